"""Tables that stand beside each other on one sheet, as drawings have them, parted so that each is read for itself."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from itertools import pairwise
from typing import Final

from instruments.column import Reads, SheetKind
from instruments.workbook.heading_words import Finder, heading_words
from instruments.workbook.sheet import Sheet, Value
from instruments.workbook.words import folded

__all__ = ["parted_where_tables_stand_side_by_side"]

LOOKED_AT_ROWS: Final = 60
"""Rows in which the headings of such tables are looked for."""

FEWEST_HEADINGS: Final = 2
"""Headings that all the tables share, the tag's among them."""


def parted_where_tables_stand_side_by_side(sheet: Sheet, kinds: Sequence[SheetKind]) -> tuple[Sheet, ...]:
    """Return a sheet in as many as it has tables with the same headings side by side; else as it is.

    Each has the others' columns blank, so that all cells keep their places; what stands outside of the tables
    stays with the first.

    Parameters
    ----------
    sheet
        The sheet as read.
    kinds
        The kinds of sheet that are known.
    """
    finders = [Finder(kind) for kind in kinds if kind.key == (("tag",),)]
    for row, cells in enumerate(sheet.rows[:LOOKED_AT_ROWS]):
        starts = _starts(cells, finders)
        if starts:
            ends = [*starts[1:], sheet.width]
            return tuple(
                _part(sheet, 0 if number == 0 else start, end, row, number == 0)
                for number, (start, end) in enumerate(zip(starts, ends, strict=True))
            )
    return (sheet,)


def _starts(cells: Sequence[Value], finders: Sequence[Finder]) -> list[int]:
    """Return the first columns of the tables whose headings stand in a row; none where there is one table."""
    texts = {index: folded(cell) for index, cell in enumerate(cells) if isinstance(cell, str) and len(cell) <= 60}
    often: dict[str, list[int]] = {}
    for index, text in texts.items():
        often.setdefault(text, []).append(index)
    tags = next((found for text, found in often.items() if len(found) > 1 and _names_a_tag(text, finders)), [])
    steps = {after - before for before, after in pairwise(tags)}
    if len(steps) != 1:
        return []
    (step,) = steps
    # The headings of the first table, from the one at which the row begins to the one before it is repeated.
    first = next(
        (
            start
            for start in range(max(0, tags[0] - step + 1), tags[0] + 1)
            if texts.get(start) is not None and _repeats(texts, start, step, len(tags))
        ),
        None,
    )
    if first is None:
        return []
    return [first + step * number for number in range(len(tags))]


def _repeats(texts: Mapping[int, str], start: int, step: int, count: int) -> bool:
    """Whether the headings from a column on are the same in each table."""
    tables = [{at: texts[start + step * number + at] for at in range(step) if start + step * number + at in texts}
              for number in range(count)]  # fmt: skip
    return len(tables[0]) >= FEWEST_HEADINGS and all(table == tables[0] for table in tables)


def _names_a_tag(text: str, finders: Sequence[Finder]) -> bool:
    words = heading_words(text)
    return bool(words) and any(
        column.reads is Reads.TAG and how == "synonym"
        for finder in finders
        for _, how, column in finder.names.find(words)
    )


def _part(sheet: Sheet, start: int, end: int, heading: int, is_first: bool) -> Sheet:
    """Return the table between two columns; what stands over all of them goes with the first."""

    def within(row: int, column: int) -> bool:
        return is_first if row < heading else start <= column < end

    rows: list[list[Value]] = [
        [cell if within(number, column) else None for column, cell in enumerate(row)]
        for number, row in enumerate(sheet.rows)
    ]
    errors = {place: text for place, text in sheet.errors.items() if within(*place)}
    no_value = {place for place in sheet.no_value if within(*place)}
    far = sheet.far if is_first else {}
    filled = sum(len(row) - row.count(None) for row in rows)
    return replace(
        sheet,
        rows=rows,
        errors=errors,
        no_value=no_value,
        far=far,
        merged=tuple(each for each in sheet.merged if within(each[0], each[1])),
        hidden_columns=frozenset(column for column in sheet.hidden_columns if start <= column < end),
        hidden_rows=sheet.hidden_rows,
        struck={place for place in sheet.struck if within(*place)},
        partly_struck={place: text for place, text in sheet.partly_struck.items() if within(*place)},
        number_formats={place: code for place, code in sheet.number_formats.items() if within(*place)},
        comments={place: text for place, text in sheet.comments.items() if within(*place)},
        shapes=sheet.shapes if is_first else 0,
        cells_filled=filled + len(errors) + len(no_value) + len(far),
        notes=(*(sheet.notes if is_first else ()), "one of several tables that stand side by side"),
    )
