"""Where a value stood: file, sheet, row and the column that was read into a field."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field


@dataclass(frozen=True, slots=True, kw_only=True)
class Place:
    """One sheet as it was read: which column went into which field.

    A record keeps only its row; the address of a value is worked out from the
    mapping, because an address object for every value would cost more memory
    than the values.
    """

    file: str
    sheet: str
    columns: Mapping[str, tuple[int, ...]] = field(default_factory=dict)
    turned: bool = False  # one record a column, as on data sheets


@dataclass(frozen=True, slots=True, kw_only=True)
class Origin:
    """The row (counted from 1) that a record was read from."""

    place: Place
    row: int

    def cells(self, name: str) -> tuple[Cell, ...]:
        """Return the cells that field `name` was read from."""
        columns = self.place.columns
        found = columns.get(name) or ()
        if self.place.turned:
            return tuple(
                Cell(file=self.place.file, sheet=self.place.sheet, row=line + 1, column=self.row - 1) for line in found
            )
        return tuple(
            Cell(file=self.place.file, sheet=self.place.sheet, row=self.row, column=column) for column in found
        )


@dataclass(frozen=True, slots=True, kw_only=True, order=True)
class Cell:
    """One cell: row counted from 1, column from 0."""

    file: str
    sheet: str
    row: int
    column: int

    @property
    def address(self) -> str:
        """The address as a spreadsheet shows it, such as ``F112``."""
        return f"{column_letters(self.column)}{self.row}"


def column_letters(column: int) -> str:
    """Return the letters of a column counted from 0.

    >>> column_letters(0), column_letters(25), column_letters(26), column_letters(16383)
    ('A', 'Z', 'AA', 'XFD')
    """
    letters = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(65 + rest) + letters
    return letters
