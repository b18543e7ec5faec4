"""manage.py read: how a tag, a unit or a marking is understood."""

from __future__ import annotations

import json
import sys
from argparse import ArgumentParser
from collections.abc import Mapping
from typing import Any

from django.core.management.base import BaseCommand

from instruments.marking import read_marking
from instruments.tag import read_tag
from instruments.unit import read_unit

NO_UNIT: Mapping[str, str] = {"kind": "", "canonical": "", "si_factor": ""}


class Command(BaseCommand):
    """Show how texts are understood."""

    help = (
        "Shows how a tag, a unit or an Ex marking is understood: "
        "read tag|unit|marking [--json] -- TEXT [TEXT ...]. Exit status 2 where a text cannot be read."
    )
    requires_system_checks = ()

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Declare the options."""
        parser.add_argument("what", choices=["tag", "unit", "marking"])
        parser.add_argument("--json", action="store_true", help="a list of objects in the order given")
        parser.add_argument("texts", nargs="+", metavar="TEXT")

    def handle(self, *args: Any, **options: Any) -> None:
        """Read each text and print what it means."""
        readings = [(text, *_READERS[options["what"]](text)) for text in options["texts"]]
        if options["json"]:
            self.stdout.write(json.dumps([fields for _, fields, _ in readings], ensure_ascii=False, indent=1))
        else:
            for text, fields, note in readings:
                self.stdout.write(text + (f"   ({note})" if note else ""))
                for name, value in fields.items():
                    self.stdout.write(f"  {name}: {value}")
        if not options["json"] and any(not _understood(options["what"], fields) for _, fields, _ in readings):
            sys.exit(2)


def _tag(text: str) -> tuple[dict[str, Any], str]:
    reading = read_tag(text)
    return reading.as_vector(), reading.reason


def _unit(text: str) -> tuple[dict[str, Any], str]:
    unit = read_unit(text)
    if unit is None:
        return dict(NO_UNIT), "no unit that Ferrule knows; it never guesses"
    return unit.as_vector(), ", ".join(part for part in (unit.reference, unit.basis) if part)


def _marking(text: str) -> tuple[dict[str, Any], str]:
    marking = read_marking(text)
    return marking.as_vector(), "" if marking.readable else "cannot be read: a review for a competent person"


_READERS = {"tag": _tag, "unit": _unit, "marking": _marking}


def _understood(what: str, fields: Mapping[str, Any]) -> bool:
    if what == "tag":
        return bool(fields["verdict"] != "invalid")
    if what == "unit":
        return bool(fields["kind"] != "")
    return bool(fields["ta"] != "-")
