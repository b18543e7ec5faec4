"""Lists as people send them, written to real files in a test, and what the whole reading makes of them."""

from __future__ import annotations

import datetime
import re
from collections.abc import Callable, Mapping
from pathlib import Path
from typing import Any

import openpyxl
from openpyxl.worksheet.worksheet import Worksheet

from instruments.workbook.files import read_lists
from instruments.workbook.lists import Lists
from tests.instruments.workbook.accounted import assert_mapping_reads_the_same, assert_no_cell_is_lost
from tests.instruments.workbook.sheets import KINDS, said

Look = Callable[[Worksheet], None]


def cell_value(piece: str) -> Any:
    """What stands in a cell written so: a number, a date (@2024-12-05), a text as it is (behind an apostrophe)."""
    piece = piece.replace("\\n", "\n")
    if not piece.strip():
        return None
    if piece.startswith("'"):
        return piece[1:]
    if piece.startswith("@"):
        return datetime.datetime.fromisoformat(piece[1:])
    if re.fullmatch(r"-?\d+(?:\.\d+)?", piece):
        return float(piece)
    return piece


def fill(sheet: Worksheet, text: str) -> None:
    """Write lines with bars between the cells."""
    for row, line in enumerate(text.strip("\n").split("\n"), 1):
        for column, piece in enumerate(line.split("|"), 1):
            value = cell_value(piece)
            if value is not None:
                cell = sheet.cell(row, column, value)
                if isinstance(value, str) and value.startswith("="):
                    cell.data_type = "f" if not piece.startswith("'") else "s"


def workbook(path: Path, sheets: str | Mapping[str, str], look: Look | None = None) -> Path:
    """Write a workbook: its sheets by name, or the text of one; `look` dresses the last."""
    made = openpyxl.Workbook()
    first = made.active
    assert first is not None
    made.remove(first)
    for name, text in ({"Index": sheets} if isinstance(sheets, str) else sheets).items():
        fill(made.create_sheet(name), text)
    if look is not None:
        look(made.worksheets[-1])
    made.save(path)
    return path


def delimited(path: Path, text: str, *, separator: str = ",", encoding: str = "utf-8") -> Path:
    """Write a delimited text of lines with bars between the cells, quoted where they must be."""
    lines: list[str] = []
    quoted = re.compile(rf'[{separator}"\n]')
    for line in text.strip("\n").split("\n"):
        pieces = [piece.replace("\\n", "\n") for piece in line.split("|")]
        written = ['"' + piece.replace('"', '""') + '"' if quoted.search(piece) else piece for piece in pieces]
        lines.append(separator.join(written))
    path.write_bytes("\r\n".join([*lines, ""]).encode(encoding))
    return path


def as_read(*paths: Path) -> Lists:
    """Read files whole; no cell of a list may be lost."""
    found = read_lists(list(paths), KINDS)
    assert [(each.sheet, each.cells_read + each.cells_unread) for each in found.sheets if each.kind] == [
        (each.sheet, each.cells_filled) for each in found.sheets if each.kind
    ]
    assert_no_cell_is_lost(paths, found)
    assert_mapping_reads_the_same(paths, found)
    return found


def tags(found: Lists, kind: str = "Instruments") -> list[str | None]:
    """The tags of the index, in the order of its rows."""
    return [record.tag for record in found.records.get(kind, ())]


def rows(found: Lists, *names: str, kind: str = "Instruments") -> list[dict[str, Any]]:
    """What the records say, or what they say in some fields."""
    shown = [said(record) for record in found.records.get(kind, ())]
    return [{name: each[name] for name in names if name in each} for each in shown] if names else shown


def unread(found: Lists) -> list[tuple[str, str, str]]:
    """The cells that were not read: address, subject and reason."""
    return [(each.cell.address, each.subject, each.reason) for each in found.problems]
