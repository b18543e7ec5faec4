"""What the reader hands on: one sheet's cells, where they stood and how they looked, or why there is none."""

from __future__ import annotations

import datetime
import math
import re
from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Final

from instruments.origin import column_letters

Value = str | float | bool | datetime.date | datetime.datetime | datetime.time | None
"""What stands in a cell. A blank, and text that shows nothing, is None; every number is a float."""

MAX_ROWS: Final = 1_048_576
MAX_COLUMNS: Final = 16_384
"""The last row and column that a workbook can have: XFD1048576 (ECMA-376-1, 18.3.1.73 and 18.3.1.4)."""

_SHOWS_NOTHING: Final = re.compile(r"[\s\u200b-\u200f\u2060\ufeff]*")

# The error values of ECMA-376-1 18.18.11, those that came later, and what a spreadsheet in another language
# writes into a CSV (#BEZUG!, #NV, Err:508). A run of # is a number that the column was too narrow to show.
_ERROR_TEXT: Final = re.compile(
    r"#[¡¿]?[A-ZÀ-Ý][A-Z0-9À-Ý/_]{1,19}[!?]|#N/A|#NV|#N/D|#GETTING_DATA|#{3,255}|Err:[0-9]{3}"
)


class UnreadableFile(Exception):
    """A file, or a named place in it, that cannot be read: the only error the reader raises.

    >>> print(UnreadableFile("list.xlsx", "sheet 'Index', cell B7", "'abc' is stored as a number"))
    list.xlsx, sheet 'Index', cell B7: 'abc' is stored as a number.
    """

    def __init__(self, file: str, place: str, reason: str) -> None:
        super().__init__(file, place, reason)
        self.file = file
        self.place = place
        self.reason = reason

    def __str__(self) -> str:
        where = f"{self.file}, {self.place}" if self.place else self.file
        return f"{where}: {self.reason.rstrip('.')}."


@dataclass(frozen=True, slots=True, kw_only=True)
class Sheet:
    """One sheet as it was read. All positions are counted from 0, from A1: `rows[6][1]` is cell B7.

    Every row is as long as the widest, so that any column of the sheet may be asked of any row.
    """

    file: str
    """The file's name as it was given."""
    name: str
    rows: list[list[Value]]
    visible: bool = True
    errors: dict[tuple[int, int], str] = field(default_factory=dict)
    """Cells that hold an error value (``#REF!``), or a number that is none (``inf``): None in `rows`."""
    no_value: set[tuple[int, int]] = field(default_factory=set)
    """Formula cells whose result was not saved: None in `rows`, and not blank."""
    far: dict[tuple[int, int], Value] = field(default_factory=dict)
    """Filled cells so far below or beside the list that they are left out of `rows`."""
    merged: tuple[tuple[int, int, int, int], ...] = ()
    """Merged ranges: first row, first column, last row, last column, within `rows`."""
    hidden_rows: frozenset[int] = frozenset()
    """Hidden, collapsed and filtered rows, within `rows`."""
    hidden_columns: frozenset[int] = frozenset()
    coloured_rows: dict[int, str] = field(default_factory=dict)
    """Rows most of whose cells are filled with one colour, and what the workbook calls it; not of a turned sheet."""
    struck: set[tuple[int, int]] = field(default_factory=set)
    """Filled cells that are struck out whole."""
    partly_struck: dict[tuple[int, int], str] = field(default_factory=dict)
    """Cells of which a part is struck out, with the text that is not; `rows` has the whole text."""
    number_formats: dict[tuple[int, int], str] = field(default_factory=dict)
    """Format codes of numbers that look otherwise than they are: dates, percents, ``0000``, ``0" barg"``."""
    comments: dict[tuple[int, int], str] = field(default_factory=dict)
    """Comments and notes, with their author."""
    ragged: dict[int, int] = field(default_factory=dict)
    """Rows of a delimited file that have more or fewer cells than is usual there, with how many."""
    shapes: int = 0
    """Pictures, clouds, triangles and other drawn things."""
    cells_filled: int = 0
    """Cells with something in them, wherever it went: `rows`, `errors`, `no_value` or `far`."""
    notes: tuple[str, ...] = ()
    """What was guessed, and what was noticed and not read."""
    encoding: str = ""
    """Of a delimited text: what its bytes were read as, in the words of `delimited.ENCODINGS`."""
    separator: str = ""
    """Of a delimited text: what stands between its cells."""
    turned: bool = False
    """True where columns were made rows, so that `rows[6][1]` is cell G2: a data sheet with one tag a column."""
    titles: tuple[tuple[int, str], ...] = ()
    """Of a turned sheet: lines of the written one that no tag has a part in, and their text; not in `rows`."""
    cells_in_titles: int = 0

    @property
    def width(self) -> int:
        """The number of columns."""
        return len(self.rows[0]) if self.rows else 0

    def at(self, row: int, column: int) -> Value:
        """Return what stands in a cell, None where the sheet does not reach."""
        if 0 <= row < len(self.rows) and 0 <= column < len(self.rows[row]):
            return self.rows[row][column]
        return None


def cell_address(row: int, column: int) -> str:
    """Return the address of a cell, counted from 0, as a spreadsheet shows it.

    >>> cell_address(111, 5), cell_address(0, 0), cell_address(1048575, 16383)
    ('F112', 'A1', 'XFD1048576')
    """
    return f"{column_letters(column)}{row + 1}"


def column_number(letters: str) -> int:
    """Return the column, counted from 0, of its letters.

    >>> column_number("A"), column_number("AA"), column_number("XFD")
    (0, 26, 16383)
    """
    number = 0
    for letter in letters:
        number = number * 26 + ord(letter) - 64
    return number - 1


def cell_position(address: str) -> tuple[int, int] | None:
    """Return row and column, counted from 0, of an address such as F112 or $F$112; None if it is none.

    >>> cell_position("F112"), cell_position("$b$3"), cell_position("XFE1"), cell_position("A0")
    ((111, 5), (2, 1), None, None)
    """
    matched = re.fullmatch(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})", address, re.ASCII)
    if matched is None:
        return None
    row, column = int(matched[2]) - 1, column_number(matched[1].upper())
    if not 0 <= row < MAX_ROWS or column >= MAX_COLUMNS:
        return None
    return row, column


def shows_nothing(text: str) -> bool:
    r"""Whether a text is empty to the eye: white space and zero-width characters only.

    >>> shows_nothing(" \t\u00a0\u200b"), shows_nothing("-")
    (True, False)
    """
    return _SHOWS_NOTHING.fullmatch(text) is not None


def is_error_text(text: str) -> bool:
    """Whether a text is what a spreadsheet shows in place of a value it could not work out.

    >>> [is_error_text(text) for text in ("#REF!", "#N/A", "#BEZUG!", "#####", "# 4", "N/A")]
    [True, True, True, True, False, False]
    """
    return _ERROR_TEXT.fullmatch(text) is not None


def take_out_errors(rows: Sequence[list[Value]]) -> dict[tuple[int, int], str]:
    """Blank the cells whose text is an error value or whose number is not finite, and return them."""
    errors: dict[tuple[int, int], str] = {}
    for number, row in enumerate(rows):
        for column, value in enumerate(row):
            if (isinstance(value, str) and value[0] in "#E" and is_error_text(value)) or (
                isinstance(value, float) and not math.isfinite(value)
            ):
                errors[number, column] = str(value)
                row[column] = None
    return errors
