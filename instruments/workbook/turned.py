"""Data sheets with one tag a column, turned so that each tag has a row as in a list."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Sequence
from dataclasses import replace
from itertools import pairwise
from typing import Final, NamedTuple

from instruments.column import Reads, SheetKind
from instruments.workbook.heading_words import Finder, heading_words
from instruments.workbook.headings import match_sheet
from instruments.workbook.number_format import as_text
from instruments.workbook.sheet import Sheet, Value
from instruments.workbook.words import folded, placeholder

__all__ = ["columns_of_labels", "turned_where_tags_stand_across"]

MOST_LINES: Final = 600
"""A data sheet has a line for each property; what is longer is a list."""

LABEL_COLUMNS: Final = 8
"""Columns in which the names of the lines are looked for; a line number and a group may stand before them."""

_TAG: Final = re.compile(r"[^\w(]{0,2}(?=[^\n]{0,12}\d)(?=[^\n]{0,12}[A-Za-z])[\w.\-/+*()&,~ ‑–−]{2,40}")
_SHORT: Final = 3
_SAY_TOO_LITTLE: Final = frozenset(
    ("min", "max", "normal", "unit", "low", "high", "from", "to", "temperature", "pressure", "set", "trip", "value",
     "eu", "uom", "von", "bis", "l", "h", "ll", "hh", "einheit", "setpoint")
)  # fmt: skip


class _Block(NamedTuple):
    """The lines from first to last whose names stand in a column, the first that is named, and that of the tags."""

    first: int
    last: int
    labels: int
    named: int
    tags: int


def turned_where_tags_stand_across(sheet: Sheet, kinds: Sequence[SheetKind]) -> tuple[Sheet, ...]:
    """Return a sheet turned where its tags stand side by side, a sheet for each block of them; else as it is.

    A turned sheet has the lines of the written one as its columns, and says so: `Sheet.turned`. Where a page
    of tags stands below another, each block has the others' lines blank, so that all of them keep their places.

    Parameters
    ----------
    sheet
        The sheet as read.
    kinds
        The kinds of sheet that are known.
    """
    index_kinds = [kind for kind in kinds if kind.key == (("tag",),)]
    if not index_kinds or len(sheet.rows) > MOST_LINES or not sheet.width >= 2:
        return (sheet,)
    blocks = _blocks(sheet, [Finder(kind) for kind in index_kinds])
    if not blocks:
        return (sheet,)
    turned = tuple(
        _turned(sheet, block, first=number == 0, last=number == len(blocks) - 1) for number, block in enumerate(blocks)
    )
    across = match_sheet(turned[0], index_kinds)
    if across is None or "tag" not in across.columns or len(across.columns) < _SHORT:
        return (sheet,)
    down = match_sheet(sheet, kinds)
    if down is not None and down.score > across.score:
        return (sheet,)
    return turned


def columns_of_labels(sheet: Sheet, kinds: Sequence[SheetKind]) -> tuple[int, ...]:
    """Return the columns of names of a data sheet of one tag, filled in as a form; nothing where it is none.

    Such a form has names with their values beside them in two or more columns of names, and no list in it.
    """
    finders = [Finder(kind) for kind in kinds if kind.key == (("tag",),)]
    if not finders or len(sheet.rows) > MOST_LINES:
        return ()
    found: list[int] = []
    tags = 0
    for column in range(min(LABEL_COLUMNS * 2, sheet.width - 1)):
        cells = [row[column] for row in sheet.rows]
        names = [_named(cell, finders) if isinstance(cell, str) and len(cell) <= 80 else "" for cell in cells]
        beside = [line for line, name in enumerate(names) if name and sheet.rows[line][column + 1] is not None]
        if len(beside) < _SHORT or (found and column == found[-1] + 1):
            continue
        found.append(column)
        tags += sum(names[line] == "tag" and _holds_tags([sheet.rows[line][column + 1]]) for line in beside)
    return tuple(found) if len(found) > 1 and tags else ()


def _blocks(sheet: Sheet, finders: Sequence[Finder]) -> list[_Block]:
    """Find the lines of tags, and which lines belong to each."""
    known: dict[str, str] = {}

    def named(cell: Value) -> str:
        """What a text names as the name of a line: "tag", "other", or nothing."""
        if not isinstance(cell, str) or len(cell) > 80:
            return ""
        found = known.get(cell)
        if found is None:
            found = known[cell] = _named(cell, finders)
        return found

    for labels in range(min(LABEL_COLUMNS, sheet.width - 1)):
        names = [named(row[labels]) for row in sheet.rows]
        if names.count("tag") == 0 or len(names) - names.count("") < _SHORT:
            continue
        tags = [
            line for line, name in enumerate(names) if name == "tag" and _holds_tags(sheet.rows[line][labels + 1 :])
        ]
        # Two lines of tags with hardly a line between them are one page's: Item, and Tag number below it.
        for line, after in pairwise(tags):
            if sum(map(bool, names[line:after])) < _SHORT:
                names[line] = ""
        tags = [line for line in tags if names[line]]
        if not tags:
            continue
        first = next(line for line, name in enumerate(names) if name)
        starts = [0]
        for before, line in pairwise(tags):
            head = folded(as_text(sheet.rows[min(first, tags[0])][labels]))
            lines = range(before + 1, line + 1)
            again = [at for at in lines if names[at] and folded(as_text(sheet.rows[at][labels])) == head]
            starts.append(again[0] if again else line)
        ends = [*(start - 1 for start in starts[1:]), len(sheet.rows) - 1]
        blocks = [
            _Block(start, end, labels, next(at for at in range(start, end + 1) if names[at]), line)
            for start, end, line in zip(starts, ends, tags, strict=True)
        ]
        if all(sum(bool(name) for name in names[each.first : each.last + 1]) >= _SHORT for each in blocks):
            return blocks
    return []


def _named(text: str, finders: Sequence[Finder]) -> str:
    words = heading_words(re.sub(r"[(\[][^()\[\]]*[)\]]", " ", text))
    if not words:
        return ""
    reads = {column.reads for finder in finders for _, how, column in finder.names.find(words) if how == "synonym"}
    return "tag" if Reads.TAG in reads else "other" if reads else ""


def _holds_tags(cells: Sequence[Value]) -> bool:
    """Whether the cells behind the name of a line are tags; a unit or a reference may stand before them."""
    texts = [as_text(cell).strip() for cell in cells if cell is not None]
    texts = [text for text in texts if placeholder(text) is None and any(map(str.isalnum, text))]
    good = sum(_TAG.fullmatch(text) is not None for text in texts)
    return good > 0 and good * 10 >= (len(texts) - 1) * 8


def _turned(sheet: Sheet, block: _Block, *, first: bool, last: bool) -> Sheet:
    """Return the block turned: lines as columns, those of other blocks blank."""
    height, width = len(sheet.rows), sheet.width
    titles = {
        line
        for line in range(block.first, block.last + 1)
        if line < block.named or not any(cell is not None for cell in sheet.rows[line][block.labels + 1 :])
    }
    # A name that stands over the lines of a group is no title.
    titles -= {line for line in titles if line >= block.named and _is_over_others(sheet, block, line)}

    def within(line: int) -> bool:
        return block.first <= line <= block.last and line not in titles

    rows: list[list[Value]] = [
        [sheet.rows[line][column] if within(line) else None for line in range(height)] for column in range(width)
    ]
    for line, name in _names_in_groups(sheet, block, titles).items():
        rows[block.labels][line] = name
    errors = {(column, line): text for (line, column), text in sheet.errors.items() if within(line)}
    no_value = {(column, line) for line, column in sheet.no_value if within(line)}
    far = {(column, line): value for (line, column), value in sheet.far.items()} if first else {}
    filled = sum(len(row) - row.count(None) for row in rows)
    filled += sum(len(sheet.rows[line]) - sheet.rows[line].count(None) for line in titles)
    return replace(
        sheet,
        rows=rows,
        turned=True,
        titles=tuple((line, text) for line in sorted(titles) if (text := _line_text(sheet.rows[line]))),
        cells_in_titles=sum(len(sheet.rows[line]) - sheet.rows[line].count(None) for line in titles),
        errors=errors,
        no_value=no_value,
        far=far,
        merged=tuple(
            (left, max(top, block.first), right, min(bottom, block.last))
            for top, left, bottom, right in sheet.merged
            if top <= block.last and bottom >= block.first
        ),
        hidden_rows=sheet.hidden_columns,
        coloured_rows={},
        hidden_columns=frozenset(line for line in sheet.hidden_rows if within(line)),
        struck={(column, line) for line, column in sheet.struck if within(line)},
        partly_struck={(column, line): text for (line, column), text in sheet.partly_struck.items() if within(line)},
        number_formats={(column, line): code for (line, column), code in sheet.number_formats.items()},
        comments={(column, line): text for (line, column), text in sheet.comments.items() if within(line)},
        ragged={},
        shapes=sheet.shapes if first else 0,
        cells_filled=filled + len(errors) + len(no_value) + len(far),
        notes=(*(sheet.notes if first else ()), "one tag a column: turned, so that lines are read as columns"),
    )


def _line_text(cells: Sequence[Value]) -> str:
    return " | ".join(as_text(cell).strip() for cell in cells if cell is not None)


def _is_over_others(sheet: Sheet, block: _Block, line: int) -> bool:
    """Whether a line without values names the group of those below it, in a column of its own."""
    if not any(cell is not None for cell in sheet.rows[line][: block.labels]):
        return False
    below = sheet.rows[line + 1] if line < block.last else []
    return any(cell is not None for cell in below[block.labels :]) and not any(below[: block.labels])


def _names_in_groups(sheet: Sheet, block: _Block, titles: set[int]) -> dict[int, str]:
    """Return the names that say too little by themselves, with the line over their group: Design, Pressure."""
    names = {
        line: as_text(sheet.rows[line][block.labels]).strip()
        for line in range(block.named, block.last + 1)
        if sheet.rows[line][block.labels] is not None
    }
    often = Counter(folded(name) for line, name in names.items() if line not in titles)
    found: dict[int, str] = {}
    over = ""
    for line, name in names.items():
        if line in titles:
            over = name if len(name) <= 40 else ""
        elif over and (often[folded(name)] > 1 or all(word in _SAY_TOO_LITTLE for word in heading_words(name))):
            found[line] = f"{over.rstrip(' :')} {name}"
    return found
