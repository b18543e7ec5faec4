"""manage.py rules: the catalogue, made of the rules themselves."""

from __future__ import annotations

import json
import sys
from argparse import ArgumentParser
from typing import Any

from django.core.management.base import BaseCommand

from validation.rule import Rule, load_rules


class Command(BaseCommand):
    """Print the rules: all of them a line each, or some in full."""

    help = "Lists the rules, or shows those named in full: rules [--json] [CODE ...]"
    requires_system_checks = ()

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Declare the options."""
        parser.add_argument("codes", nargs="*", metavar="CODE")
        parser.add_argument("--json", action="store_true")

    def handle(self, *args: Any, **options: Any) -> None:
        """Print the catalogue."""
        registry = load_rules()
        wanted = [code.upper() for code in options["codes"]]
        unknown = [code for code in wanted if code not in registry]
        if unknown:
            self.stderr.write(f"rules: there is no {', '.join(unknown)}; 'rules' lists those there are")
            sys.exit(2)
        rules = [rule for rule in registry if not wanted or rule.code in wanted]
        if options["json"]:
            self.stdout.write(json.dumps([_data(rule) for rule in rules], ensure_ascii=False, indent=1))
            return
        for rule in rules:
            self.stdout.write(f"{rule.code}  {rule.severity.value:6}  {rule.on.value:21}  {rule.title}")
            if wanted:
                self.stdout.write("")
                for line in rule.text.splitlines()[1:]:
                    self.stdout.write(f"    {line}" if line else "")
                self.stdout.write(
                    f"\n    needs: {', '.join(title for title, _ in rule.needs) or 'nothing beside its subject'}"
                )
                self.stdout.write(f"    basis: {rule.basis}\n")


def _data(rule: Rule) -> dict[str, Any]:
    return {
        "rule": rule.code,
        "severity": rule.severity.value,
        "subject": rule.on.value,
        "title": rule.title,
        "needs": [title for title, _ in rule.needs],
        "message": rule.message,
        "basis": rule.basis,
        "text": rule.text,
    }
