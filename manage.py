#!/usr/bin/env python3
"""Ferrule's command line: Django's own, but for the line that finds or makes the environment it needs."""

import os
import sys

from config import bootstrap


def main() -> None:
    """Run the command that the command line names."""
    bootstrap.ready(sys.argv)
    os.environ.setdefault("DJANGO_SETTINGS_MODULE", "config.settings")
    from django.core.management import execute_from_command_line

    execute_from_command_line(sys.argv)


if __name__ == "__main__":
    main()
