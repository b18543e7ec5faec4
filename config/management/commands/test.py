"""The command that runs every test: pytest, with lint, types, import contracts and migrations among them."""

import os
import sys
from collections.abc import Sequence
from typing import Any

import pytest
from django.conf import settings
from django.core.management.base import BaseCommand, CommandParser


class Command(BaseCommand):
    """Runs pytest from the project's folder; what follows `test` is pytest's own."""

    help = (
        "Runs every test with pytest. What follows is pytest's: options (-k, -x, -n 0, ...), and paths in "
        "Ferrule's own folder."
    )
    requires_system_checks = ()  # they are among the tests

    def create_parser(self, prog_name: str, subcommand: str, **kwargs: Any) -> CommandParser:
        """Make a parser for the help alone, without Django's options: pytest takes them all."""
        return CommandParser(
            prog=f"{os.path.basename(prog_name)} {subcommand}",
            usage="%(prog)s [argument of pytest ...]",
            description=self.help,
        )

    def run_from_argv(self, argv: list[str]) -> None:
        """Hand the command line on unread, whatever Django would make of it."""
        if argv[2:3] in (["-h"], ["--help"]):
            self.print_help(*argv[:2])
            return
        os.chdir(settings.BASE_DIR)
        sys.exit(pytest.main(arguments(argv[2:])))


def arguments(given: Sequence[str]) -> list[str]:
    """Spread the tests over the processors, unless one file is asked for: starting workers takes a second.

    >>> arguments(["-k", "span"])
    ['-n', 'auto', '--dist', 'worksteal', '-k', 'span']
    >>> arguments(["tests/loops/test_cable.py"])
    ['tests/loops/test_cable.py']
    """
    one_file = any(".py" in argument for argument in given)
    return [*given] if one_file else ["-n", "auto", "--dist", "worksteal", *given]
