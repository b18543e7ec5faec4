"""A cell that could not be read: where it stands, what was found, and the readings that were considered."""

from __future__ import annotations

from dataclasses import dataclass

from instruments.origin import Cell


@dataclass(frozen=True, slots=True, kw_only=True)
class CellProblem:
    """One unread cell, or one unread column where every filled cell of it has the same trouble.

    `subject` is the tag or other name of the row it stands in; blank for a whole column.
    """

    cell: Cell
    field: str
    title: str
    subject: str
    text: str
    reason: str
    readings: tuple[str, ...] = ()
    whole_column: bool = False
    cells_concerned: int = 1
