"""manage.py sheets: the loop sheets alone, without an audit."""

from __future__ import annotations

import os
import sys
import tempfile
import time
from argparse import ArgumentParser
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any

from django.core.management.base import BaseCommand

from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.console import for_console
from instruments.workbook.files import read_lists
from instruments.workbook.lists import NoTags
from instruments.workbook.reader import UnreadableFile
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import assemble
from loops.sheet.choice import Choice, NothingChosen
from loops.sheet.mark import NoMarks, marks_in

if TYPE_CHECKING:
    from loops.sheet.pdf import Drawn

NAME = "loop-sheets.pdf"
_CHOICES = {
    "area": "only the loops of this area; may be given more than once, as the other choices",
    "unit": "only those of this process unit",
    "system": "only those wired to this system: control, safety, fire and gas, package",
    "box": "only those through this junction box",
    "tag": "only the loop of this tag, or of this number",
}
FINISHED, UNREADABLE = 0, 2


class Command(BaseCommand):
    """Read the lists and draw a sheet for every loop with an electrical signal."""

    help = (
        "Reads a plant's instrument list (.xlsx, .xlsm or .csv; several files are one plant) and writes "
        f"{NAME}: a sheet for every loop with an electrical signal. No rule is run: the sheets show no findings "
        "and say so. Exit status: 0 finished; 2 something cannot be read or written."
    )
    requires_system_checks = ()

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Declare the options."""
        parser.add_argument("lists", nargs="+", metavar="LIST", help="the list, or all lists of one plant")
        parser.add_argument("--to", required=True, metavar="DIR", help="the folder for the sheets")
        parser.add_argument("--plant", metavar="plant.toml", help="the plant's data, where no sheet has them")
        parser.add_argument("--mapping", metavar="mapping.toml", help="how an audit read these lists, mended")

        parser.add_argument(
            "--changed-since",
            metavar="PACK",
            help="only the sheets whose content is not as it was in this loop-sheets.pdf or findings.json",
        )
        for option, words in _CHOICES.items():
            parser.add_argument(f"--{option}", action="append", default=[], metavar=option.upper(), help=words)

    def handle(self, *args: Any, **options: Any) -> None:
        """Run and leave with the exit status."""
        sys.exit(self.run(options))

    def run(self, options: dict[str, Any]) -> int:
        """Return the exit status."""
        from loops.sheet.pdf import write_sheets

        choice = Choice(
            areas=tuple(options["area"]),
            units=tuple(options["unit"]),
            systems=tuple(options["system"]),
            boxes=tuple(options["box"]),
            tags=tuple(options["tag"]),
        )
        try:
            lists = read_lists(
                [Path(name) for name in options["lists"]],
                (*INSTRUMENT_SHEETS, *LOOP_SHEETS),
                plant_toml=Path(options["plant"]) if options["plant"] else None,
                mapping_toml=Path(options["mapping"]) if options["mapping"] else None,
            )
            plant = assemble(lists)
            path = Path(options["to"]) / NAME
            before = marks_in(Path(options["changed_since"])) if options["changed_since"] else None
            drawn = _whole(
                path,
                lambda part: write_sheets(plant, part, on_sheet=self._progress(), choice=choice, before=before),
            )
        except (UnreadableFile, NoTags, NothingChosen, NoMarks) as error:
            return self._cannot(str(error))
        except OSError as error:
            return self._cannot(f"{error.filename or options['to']}: {(error.strerror or str(error)).lower()}")
        count = drawn.loops
        since = f"; {drawn.unchanged} unchanged and left out" if before is not None else ""
        said = f"{count} loop{'' if count == 1 else 's'} drawn, without an audit{since}; written to {path}"
        self.stdout.write(for_console(said))
        if drawn.gone:
            gone = f"no longer there: {', '.join(drawn.gone[:20])}{' ...' if len(drawn.gone) > 20 else ''}"
            self.stdout.write(for_console(gone))
        return FINISHED

    def _progress(self) -> Callable[[int, int], None] | None:
        """Return what rewrites one line on a terminal; nothing where the output is no terminal."""
        stream = self.stderr
        if not getattr(stream, "isatty", lambda: False)():
            return None
        since = last = time.monotonic()

        def show(number: int, of: int) -> None:
            nonlocal last
            now = time.monotonic()
            if now - last < 0.1 and number != of:
                return
            last = now
            left = (now - since) / number * (of - number)
            text = f"sheet {number} of {of}, {left:.0f} s left" if number != of else ""
            stream.write(f"\r\x1b[2K{text}", ending="")
            stream.flush()

        return show

    def _cannot(self, text: str) -> int:
        self.stderr.write(for_console(f"sheets: {text}"))
        return UNREADABLE


def _whole(path: Path, write: Callable[[Path], Drawn]) -> Drawn:
    """Let `write` make a file under a passing name and give it its own when it is whole."""
    path.parent.mkdir(parents=True, exist_ok=True)
    handle, text = tempfile.mkstemp(prefix=".ferrule-", suffix=".part", dir=path.parent)
    os.close(handle)
    part = Path(text)
    try:
        drawn = write(part)
        part.chmod(0o644)
        os.replace(part, path)
    finally:
        part.unlink(missing_ok=True)
    return drawn
