"""The cells of a sheet that could not be read: each told once, and one trouble of a whole column in one."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Callable, Sequence
from typing import NamedTuple

from instruments.number import CellTrouble
from instruments.origin import Cell
from instruments.workbook.number_format import as_text
from instruments.workbook.problem import CellProblem
from instruments.workbook.sheet import Sheet

__all__ = ["Unread", "problems_of"]

# A trouble that three cells share, and all filled cells of the column have, is the column's.
FEWEST_OF_A_COLUMN = 3


class Unread(NamedTuple):
    """One cell that could not be read: where it stands (counted from 0), its field, what it holds, and why.

    `field` is blank for a cell that no field is read from, `subject` for a cell of no record. `cells` is more
    than one where it speaks of its whole column.
    """

    row: int
    column: int
    field: str
    title: str
    subject: str
    text: str
    trouble: CellTrouble
    cells: int = 0


def problems_of(
    sheet: Sheet, unread: Sequence[Unread], filled_in: Callable[[int], int]
) -> tuple[tuple[CellProblem, ...], int]:
    """Return the problems of a sheet in the order of its cells, and how many cells they are.

    Parameters
    ----------
    sheet
        The sheet as read.
    unread
        The cells that could not be read.
    filled_in
        How many cells of a column hold a value, unread ones among them and placeholders not.
    """
    alike = Counter((each.column, each.field, _without_quotes(each.trouble.reason)) for each in unread if each.subject)
    told: set[tuple[int, str, str]] = set()
    problems: list[CellProblem] = []
    for each in sorted(unread, key=lambda one: (one.row, one.column)):
        key = (each.column, each.field, _without_quotes(each.trouble.reason))
        whole = bool(each.subject) and FEWEST_OF_A_COLUMN <= alike[key] == filled_in(each.column)
        if whole and key in told:
            continue
        told.add(key)
        problems.append(
            CellProblem(
                cell=_cell(sheet, each.row, each.column),
                field=each.field,
                title=each.title,
                subject="" if whole else each.subject,
                text=each.text,
                reason=each.trouble.reason,
                readings=tuple(each.trouble.readings),
                whole_column=whole or each.cells > 0,
                cells_concerned=alike[key] if whole else max(each.cells, 1),
            )
        )
    if sheet.far:
        row, column = min(sheet.far)
        problems.append(
            CellProblem(
                cell=_cell(sheet, row, column),
                field="",
                title="",
                subject="",
                text=as_text(sheet.far[row, column]),
                reason="stands so far from the list that it was left out",
                cells_concerned=len(sheet.far),
            )
        )
    return tuple(problems), sum(max(each.cells, 1) for each in unread) + len(sheet.far)


def _cell(sheet: Sheet, row: int, column: int) -> Cell:
    """Return the cell of the file that stands at a place of a sheet, which may be turned."""
    if sheet.turned:
        row, column = column, row
    return Cell(file=sheet.file, sheet=sheet.name, row=row + 1, column=column)


def _without_quotes(reason: str) -> str:
    """Return a reason without the text it quotes: by it two cells have the same trouble."""
    return re.sub(r"'[^']*'", "''", reason)
