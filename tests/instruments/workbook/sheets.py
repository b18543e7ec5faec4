"""Sheets written as text in a test, and records shown as text to compare whole."""

from __future__ import annotations

import dataclasses
import re
from typing import Any

from instruments.columns import SHEETS
from instruments.workbook.headings import SheetMatch, match_sheet
from instruments.workbook.normalise import SheetRecords, read_records
from instruments.workbook.sheet import Sheet, Value
from loops.columns import SHEETS as LOOP_SHEETS

KINDS = (*SHEETS, *LOOP_SHEETS)
BY_NAME = {kind.name: kind for kind in KINDS}


def sheet(text: str, *, name: str = "Sheet1", file: str = "list.xlsx", numbers: bool = True, **more: Any) -> Sheet:
    """Make a sheet of lines with bars between the cells; with `numbers`, what looks like a number is one."""
    rows = [[_cell(piece, numbers) for piece in line.strip().split("|")] for line in text.strip("\n").split("\n")]
    width = max(map(len, rows))
    rows = [row + [None] * (width - len(row)) for row in rows]
    filled = sum(cell is not None for row in rows for cell in row)
    filled += sum(len(more.get(each, ())) for each in ("errors", "no_value", "far"))
    return Sheet(file=file, name=name, rows=rows, cells_filled=filled, **more)


def _cell(piece: str, numbers: bool) -> Value:
    piece = piece.replace("\\n", "\n")
    if not piece.strip():
        return None
    if piece.startswith("'"):
        return piece[1:]
    if numbers and re.fullmatch(r"-?\d+(?:\.\d+)?", piece):
        return float(piece)
    return piece


def matched(text: str | Sheet, **more: Any) -> SheetMatch:
    """Match a sheet that must match."""
    found = match_sheet(text if isinstance(text, Sheet) else sheet(text, **more), KINDS)
    assert found is not None
    return found


def read(text: str | Sheet, **more: Any) -> SheetRecords:
    """Match and read a sheet; no cell of it may be lost."""
    made = text if isinstance(text, Sheet) else sheet(text, **more)
    found = read_records(made, matched(made))
    assert found.cells_read + found.cells_unread == found.cells_filled == made.cells_filled
    return found


def said(record: Any, *, without: tuple[str, ...] = ()) -> dict[str, Any]:
    """Show what a record says: its filled fields as text, without where it came from."""
    found: dict[str, Any] = {}
    for each in dataclasses.fields(record):
        value = getattr(record, each.name)
        if each.name in ("origin", "elsewhere", "tag_written", *without) or value is None or value == each.default:
            continue
        if isinstance(value, frozenset):
            value = sorted(value)
        elif hasattr(value, "items"):
            value = dict(value)
        elif dataclasses.is_dataclass(value) and each.name == "own":
            value = said(value)
        elif not isinstance(value, bool | int | float | tuple):
            value = str(value)
        if value in ([], {}):
            continue
        found[each.name] = value
    return found


def all_said(found: SheetRecords, *names: str) -> list[dict[str, Any]]:
    """Show what all records say, or what they say in some fields."""
    shown = [said(record) for record in found.records]
    return [{name: each[name] for name in names if name in each} for each in shown] if names else shown


def columns_of(match: SheetMatch) -> dict[str, int]:
    """Return which column each field is read from."""
    return {name: each.index for name, each in match.columns.items()}
