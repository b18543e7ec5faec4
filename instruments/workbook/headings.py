"""Which rows of a sheet are its heading, what kind of sheet it is, and which heading is which field."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from dataclasses import field as dataclass_field
from itertools import islice
from typing import Final

from instruments.column import Column, Reads, SheetKind
from instruments.unit import Unit
from instruments.workbook.column_unit import factor_to
from instruments.workbook.contents import IO_WORD, Contents
from instruments.workbook.heading_words import (
    BRACKET,
    DEPENDENT,
    GENERIC_UNITS,
    NEUTRAL,
    NUMERIC,
    Candidate,
    Finder,
    Levels,
    heading_words,
    names_of,
    unit_for,
)
from instruments.workbook.number_format import as_text
from instruments.workbook.sheet import Sheet
from instruments.workbook.words import folded, placeholder

__all__ = ["ColumnMatch", "Given", "SheetMatch", "headings_in", "match_given", "match_sheet"]

LOOKED_AT_ROWS: Final = 400
"""Rows in which a heading is looked for; title pages and notes come before it."""

LOOKED_AT_COLUMNS: Final = 600
"""Columns whose headings are matched; those beyond are kept as unknown."""


@dataclass(frozen=True, slots=True, kw_only=True)
class ColumnMatch:
    """One column that was understood.

    Attributes
    ----------
    index
        The column, counted from 0.
    heading
        The heading as written, the rows of it joined by a blank.
    how
        ``synonym``, ``likeness``, ``contents`` where only the cells could tell, or ``mapping`` where it was told.
    likelihood
        0 to 1.
    unit, unit_text
        The unit that the heading (or a unit row below it) states: as understood, with its reference,
        for quantities; as written for bare numbers.
    unit_index
        The unit column that speaks for this column alone, as it stands beside it.
    prefix
        What the cells leave out because the heading says it: ``Zone`` before a bare 2.
    parts
        Columns that say the rest of it, each with its own prefix: gas group, temperature class.
    piece
        Which of how many values in each cell is meant, where a column holds two (design P/T); else None.
    only
        The first letter of the tags that the column speaks of (a flow column says nothing of a pressure);
        blank: all.
    decimal
        The decimal mark, where it is known and not the sheet's.
    """

    column: Column
    index: int
    heading: str
    how: str = "synonym"
    likelihood: float = 1.0
    unit: Unit | None = None
    unit_text: str = ""
    unit_index: int | None = None
    prefix: str = ""
    parts: tuple[tuple[int, str], ...] = ()
    piece: tuple[int, int] | None = None
    only: str = ""
    decimal: str = ""

    @property
    def field(self) -> str:
        """The field that the column is read into."""
        return self.column.field


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetMatch:
    """How a sheet was understood.

    Attributes
    ----------
    header_rows
        The heading's rows, counted from 0; unit and numbering rows among them. Empty where each
        row is a field and its value.
    first_row
        The first row below the heading.
    columns
        Field to column.
    unknown
        Columns that were not understood: index and heading.
    unit_columns
        Columns of units that speak for their neighbours alone: index and heading.
    named
        True where the name of the sheet or file says what it is.
    notes
        What was decided otherwise than by a synonym.
    last_heading_row
        The last row that holds headings; units and numbers may stand in rows of their own below.
    headings
        Every column that has a heading, and the heading.
    decimal
        The decimal mark of the sheet, where it is known; blank: its cells tell.
    """

    kind: SheetKind
    header_rows: tuple[int, ...]
    first_row: int
    columns: Mapping[str, ColumnMatch]
    unknown: tuple[tuple[int, str], ...] = ()
    unit_columns: tuple[tuple[int, str], ...] = ()
    named: bool = False
    notes: tuple[str, ...] = ()
    score: float = 0.0
    last_heading_row: int = 0
    headings: Mapping[int, str] = dataclass_field(default_factory=dict)
    decimal: str = ""

    @property
    def fields(self) -> frozenset[str]:
        """All fields that the columns fill, those of ranges and triplets among them."""
        return frozenset(name for match in self.columns.values() for name in _fills(match.column))


@dataclass(frozen=True, slots=True, kw_only=True)
class Given:
    """What is known beforehand of the columns of a sheet: it is not guessed again.

    Attributes
    ----------
    columns
        Field to column.
    no_field
        Columns that are no field: they are kept under their headings.
    unit_columns
        Columns of units that speak for their neighbours alone.
    units_stated
        Fields whose unit, or that they have none, is known: a row of units does not change it.
    """

    columns: Mapping[str, ColumnMatch]
    no_field: frozenset[int] = frozenset()
    unit_columns: tuple[int, ...] = ()
    units_stated: frozenset[str] = frozenset()

    @property
    def indexes(self) -> frozenset[int]:
        """All columns of which something is known."""
        found = {*self.no_field, *self.unit_columns}
        for match in self.columns.values():
            found.update((match.index, *(index for index, _ in match.parts)))
        return frozenset(found)


# --- the heading of one sheet ---------------------------------------------------------------------------------------


def match_sheet(
    sheet: Sheet,
    kinds: Sequence[SheetKind],
    *,
    forced: SheetKind | None = None,
    codes: frozenset[str] = frozenset(),
) -> SheetMatch | None:
    """Find the heading of a sheet, what kind of sheet it is, and which column is which field.

    Parameters
    ----------
    sheet
        The sheet as read.
    kinds
        The kinds of sheet that are known.
    forced
        The kind that it is, where that is known otherwise; None to find out.
    codes
        Codes of device types and areas that other sheets list, case-folded: by them a column is
        known for one of such codes.

    Returns
    -------
    SheetMatch or None
        None where no row of the sheet is a heading of any kind.
    """
    wanted = [forced] if forced is not None else list(kinds)
    finders = [Finder(kind) for kind in wanted]
    listed = _field_and_value(sheet, wanted)
    best: SheetMatch | None = None
    strongest = 0.0
    contents: dict[tuple[int, int, str], Contents] = {}
    seen: set[tuple[Levels, ...]] = set()
    for tried, (top, bottom) in enumerate(_blocks(sheet, finders), start=1):
        levels = _levels(sheet, top, bottom)
        texts = tuple(levels.values())
        if texts in seen:
            # The heading again, on a later page.
            continue
        seen.add(texts)
        found = [
            match
            for finder in finders
            if (match := _assign(sheet, finder, levels, top, bottom, codes=codes, contents=contents)) is not None
        ]
        strength = max((match.score for match in found), default=0.0)
        # The words of the headings rank the blocks; the contents overrule them only where they say much more.
        if found and (best is None or strength > strongest + 1.0):
            best, strongest = _choose(sheet, found, top), strength
        if (tried >= 4 and best is not None) or tried >= 12:
            break
    if listed is not None and (best is None or listed.score >= best.score):
        return listed
    return best


def headings_in(sheet: Sheet, top: int, bottom: int) -> dict[int, Levels]:
    """Return the heading of each column in the rows from `top` to `bottom`."""
    return _levels(sheet, top, bottom)


def match_given(
    sheet: Sheet, kind: SheetKind, given: Given, *, top: int, bottom: int, codes: frozenset[str] = frozenset()
) -> SheetMatch | None:
    """Match a sheet of which the heading's rows, and columns, are known; only what is not known is found out.

    Parameters
    ----------
    sheet, kind
        The sheet as read, and what it is.
    given
        What is known of its columns.
    top, bottom
        The rows of its headings.
    codes
        As in `match_sheet`.

    Returns
    -------
    SheetMatch or None
        None where the columns do not make a sheet of this kind.
    """
    levels = _levels(sheet, top, bottom)
    return _assign(sheet, Finder(kind), levels, top, bottom, codes=codes, contents={}, given=given)


def _rows_to_look_at(sheet: Sheet) -> Iterator[tuple[int, dict[int, str]]]:
    for number, row in enumerate(islice(sheet.rows, LOOKED_AT_ROWS)):
        texts = {
            index: cell
            for index, cell in enumerate(row[:LOOKED_AT_COLUMNS])
            if isinstance(cell, str) and len(cell) <= 120
        }
        if texts:
            yield number, texts


def _blocks(sheet: Sheet, finders: Sequence[Finder]) -> list[tuple[int, int]]:
    """Return the rows that may be a heading, first and last, the likeliest first."""
    hits: dict[int, int] = {}
    known: dict[str, bool] = {}
    for number, texts in _rows_to_look_at(sheet):
        count = 0
        for text in texts.values():
            hit = known.get(text)
            if hit is None:
                hit = known[text] = _is_heading_text(text, finders)
            count += hit
        if count:
            hits[number] = count
    best_rows = sorted(hits, key=lambda row: (-hits[row], row))[:5]
    scored: dict[tuple[int, int], float] = {}
    for row in best_rows:
        for top, bottom in (
            (row, row),
            (row - 1, row),
            (row, row + 1),
            (row - 2, row),
            (row - 1, row + 1),
            (row, row + 2),
        ):
            if top < 0 or bottom >= len(sheet.rows) or (top, bottom) in scored:
                continue
            if any(not any(cell is not None for cell in sheet.rows[each]) for each in range(top, bottom + 1)):
                continue
            # A lone cell below the headings is the name of a section, a row of figures is data.
            if bottom > top and sum(cell is not None for cell in sheet.rows[bottom]) < 2:
                continue
            if any(sum(map(_is_figure, sheet.rows[each])) > 2 for each in range(top, bottom + 1)):
                continue
            if bottom > top and any(map(_is_figure, sheet.rows[bottom])):
                continue
            scored[top, bottom] = _name_score(sheet, finders, top, bottom)
            below = hits.get(bottom, 0)
            filled = sum(cell is not None for cell in sheet.rows[bottom])
            # Two rows of headings are one heading: the lower one is no data, though it adds no field.
            if bottom == top + 1 and hits.get(top, 0) > 1 and below > 1 and below * 2 >= filled:
                scored[top, bottom] += 0.1 * below
    # Of equals the shorter, then the higher: a repeated heading further down is no better.
    order = sorted(scored, key=lambda block: (-scored[block], block[1] - block[0], block[0]))
    return [block for block in order if scored[block] > 0]


_FIGURE: Final = re.compile(r"[-+]?\d{1,12}(?:[.,]\d{1,12})?")


def _is_figure(cell: object) -> bool:
    return isinstance(cell, float) or (isinstance(cell, str) and _FIGURE.fullmatch(cell.strip()) is not None)


def _is_heading_text(text: str, finders: Sequence[Finder]) -> bool:
    """Whether a text, with or without what is in its brackets or behind its comma, is a heading of any kind."""
    # Two languages in one cell: either will do.
    pieces = [piece for piece in re.split(r"\s/\s|\n", text) if len(piece) > 2]
    for each in dict.fromkeys((text, BRACKET.sub(" ", text), text.partition(",")[0], *pieces[:3])):
        words = heading_words(each)
        # A letter alone is a revision or a column of a form as often as the C of a cable.
        if len(words) == 1 and len(words[0]) == 1 and words[0] not in ("l", "h"):
            continue
        if words and (words in GENERIC_UNITS or any(finder.names.knows(words) for finder in finders)):
            return True
    return False


def _name_score(sheet: Sheet, finders: Sequence[Finder], top: int, bottom: int) -> float:
    levels = _levels(sheet, top, bottom)
    best = 0.0
    for finder in finders:
        taken: dict[str, float] = {}
        for each in levels.values():
            for candidate in finder.candidates(each):
                if candidate.how == "synonym":
                    name = candidate.column.field
                    if candidate.strength > taken.get(name, 0.0):
                        taken[name] = candidate.strength
                    break
        fields = {name for column in finder.kind.columns if column.field in taken for name in _fills(column)}
        keyed = any(all(name in fields for name in key) for key in finder.kind.key)
        best = max(best, sum(taken.values()) + (2.0 if keyed else 0.0))
    numbers = sum(isinstance(cell, float) for row in range(top, bottom + 1) for cell in sheet.rows[row])
    return best - 0.5 * numbers - 0.05 * (bottom - top)


def _levels(sheet: Sheet, top: int, bottom: int) -> dict[int, Levels]:
    """Return the heading of each column in the rows from `top` to `bottom`."""
    rows = range(top, bottom + 1)
    width = min(sheet.width, LOOKED_AT_COLUMNS)
    texts = [[as_text(cell).strip() or None for cell in sheet.rows[row][:width]] for row in rows]
    spread: list[list[bool]] = [[False] * width for _ in rows]
    across: set[tuple[int, int]] = set()
    for first_row, first_column, last_row, last_column in sheet.merged:
        if first_row < top or first_row > bottom:
            continue
        for row in range(first_row, min(last_row, bottom) + 1):
            for column in range(first_column, min(last_column, width - 1) + 1):
                across.add((row, column))
        # A title across the whole sheet is over nothing in particular.
        if last_column > first_column and last_column - first_column + 1 < max(width - 1, 2):
            text = texts[first_row - top][first_column]
            for column in range(first_column, min(last_column, width - 1) + 1):
                texts[first_row - top][column] = text
                spread[first_row - top][column] = True
    for at, row in enumerate(rows):
        if row == bottom:
            continue
        filled = [column for column in range(width) if sheet.rows[row][column] is not None]
        if len(filled) < 2 and top == bottom:
            continue
        if _is_title_row(texts[at]):
            continue
        over: str | None = None
        for column in range(width):
            below = any(texts[lower - top][column] for lower in range(row + 1, bottom + 1))
            if texts[at][column]:
                over = texts[at][column] if below and len(filled) > 1 else None
                if over and not spread[at][column]:
                    beside = column + 1 < width and not texts[at][column + 1] and (row, column + 1) not in across
                    spread[at][column] = beside and any(
                        texts[lower - top][column + 1] for lower in range(row + 1, bottom + 1) if column + 1 < width
                    )
            elif over and below and (row, column) not in across:
                texts[at][column] = over
                spread[at][column] = True
            else:
                over = None
    found: dict[int, Levels] = {}
    for column in range(width):
        kept: list[str] = []
        for at in range(len(texts)):
            text = texts[at][column]
            if text and (not kept or folded(kept[-1]) != folded(text)):
                kept.append(text)
        if kept:
            found[column] = Levels(tuple(kept), len(kept) > 1 and any(each[column] for each in spread[:-1]))
    if top > 0 and top == bottom:
        _leave_to_parents(sheet, top, found)
    return found


_TITLE_WORDS: Final = re.compile(
    r"\b(?:doc(?:ument)?|rev(?:ision)?|date|project|client|sheet|page|prepared|checked|approved|title|job|contract|"
    r"customer|purchaser|location of plant|issued?|datum|blatt|projekt|kunde|erstellt|geprueft)\b"
)


def _is_title_row(texts: Sequence[str | None]) -> bool:
    filled = [text for text in texts if text]
    return (any(_TITLE_WORDS.search(folded(text)) for text in filled if len(text) < 30) and len(filled) <= 6) or len(
        filled
    ) == 1


def _leave_to_parents(sheet: Sheet, top: int, found: dict[int, Levels]) -> None:
    """Take out headings that mean nothing without the row above, where that row is a heading too."""
    above = [as_text(cell).strip() or None for cell in sheet.rows[top - 1][:LOOKED_AT_COLUMNS]]
    if sum(text is not None for text in above) < 2 or _is_title_row(above):
        return
    # A title in pieces (plant, list, issue) stands over nothing: headings have no figures.
    if any(text and any(sign.isdigit() for sign in text) for text in above):
        return
    over: str | None = None
    for column, text in enumerate(above):
        if text:
            over = text
        elif column not in found:
            over = None
        if over and column in found:
            words = heading_words(found[column].joined)
            if (
                words
                and all(word in DEPENDENT for word in words)
                and not all(word in NEUTRAL for word in heading_words(over))
            ):
                found[column] = Levels((over, found[column].joined), spread=True)


# --- which heading is which field -----------------------------------------------------------------------------------


def _fills(column: Column) -> tuple[str, ...]:
    return column.into if column.into else (column.field,)


def _occupies(column: Column) -> tuple[str, ...]:
    # A column of three may stand beside one for the maximum: the single one is the surer.
    return (column.field,) if column.reads is Reads.TRIPLET else _fills(column)


def _assign(
    sheet: Sheet,
    finder: Finder,
    levels: Mapping[int, Levels],
    top: int,
    bottom: int,
    *,
    codes: frozenset[str],
    contents: dict[tuple[int, int, str], Contents],
    given: Given | None = None,
) -> SheetMatch | None:
    """Give each heading its field, the surest first; None where the sheet is not of this kind."""
    kind = finder.kind
    given = given or Given(columns={})
    header_rows, first_row, units = _rows_below(sheet, finder, levels, top, bottom)
    headings, known = levels, given.indexes
    levels = {index: heading for index, heading in headings.items() if index not in known}

    def content(index: int) -> Contents:
        heading = headings[index].texts[-1] if index in headings else ""
        found = contents.get((index, first_row, heading))
        if found is None:
            found = contents[index, first_row, heading] = Contents(sheet, index, first_row, heading)
        return found

    offers: list[tuple[float, int, Candidate, float, bool]] = []
    for index, heading in levels.items():
        candidates = finder.candidates_or_alike(heading)
        if not candidates:
            continue
        several = sum(candidate.how == "synonym" for candidate in candidates) > 1
        cells = content(index)
        fits = [(candidate, cells.fit(candidate.column, codes)) for candidate in candidates]
        believed = [(candidate, fit) for candidate, fit in fits if _believed(candidate, cells, fit, several)]
        if not believed and several:
            # The contents fit nothing that the heading may mean; where it is the field's own name it means that,
            # and what cannot be read in it is told. A column left out would be silent.
            own = heading_words(heading.joined)
            believed = [(candidate, fit) for candidate, fit in fits if heading_words(candidate.column.title) == own]
        offers.extend(
            (candidate.strength * (0.5 + 0.5 * fit), index, candidate, fit, several) for candidate, fit in believed
        )
    offers.sort(key=lambda offer: (-offer[0], offer[1]))
    columns: dict[str, ColumnMatch] = dict(given.columns)
    taken: set[str] = {name for match in columns.values() for name in _occupies(match.column)}
    used: set[int] = set(known)
    notes: list[str] = []
    _match_pairs(kind, levels, content, columns, used)
    _match_parted_tag(kind, levels, content, columns, used, notes)
    taken.update(columns)
    for _, index, candidate, _, several in offers:
        column = candidate.column
        if index in used or taken.intersection(_occupies(column)) or column.field in columns:
            continue
        columns[column.field] = ColumnMatch(
            column=column,
            index=index,
            heading=levels[index].joined,
            how="contents" if several and candidate.how == "synonym" else candidate.how,
            likelihood=round(min(1.0, candidate.strength), 3),
            unit=candidate.unit,
            unit_text=candidate.unit_text,
            only=_only(column, levels[index]),
        )
        taken.update(_occupies(column))
        used.add(index)
        if candidate.how == "likeness":
            notes.append(f"heading '{levels[index].joined}' is taken for {column.title} by likeness")
    _add_tag_without_heading(kind, levels, content, columns, used, min(sheet.width, LOOKED_AT_COLUMNS), notes)
    _take_beside_normal(kind, levels, content, columns, used)
    _take_low_and_high(kind, levels, columns)
    _take_text_of_signals(kind, content, columns)
    if not given.columns:
        _take_model_for_code(kind, content, columns)
        notes += _take_listed_codes(kind, levels, content, columns, used, codes)
    unit_columns = _place_units(kind, levels, content, columns, used, taken)
    _join_parts(kind, levels, content, columns, used)
    _join_address(kind, levels, content, columns, used)
    for index, text in units.items():
        for name, match in columns.items():
            if match.index == index and not match.unit_text and name not in given.units_stated:
                stated = unit_for(match.column, text)
                if stated is not None:
                    columns[name] = replace(match, unit=stated if isinstance(stated, Unit) else None, unit_text=text)
    _state_units_of_a_length(columns, used)
    fields = {name for match in columns.values() for name in _fills(match.column)} | set(columns)
    if not any(all(name in fields for name in key) for key in kind.key):
        return None
    if "tag" in columns and _names_lines(content(columns["tag"].index), finder):
        return None
    if "tag" in columns and len(columns) == 1 and content(columns["tag"].index).fit(columns["tag"].column, codes) < 0.5:
        return None
    speaking = {index for index, _ in unit_columns} | {index for match in columns.values() for index, _ in match.parts}
    unknown = [
        (index, heading.joined)
        for index, heading in headings.items()
        if (index not in used or index in given.no_field) and index not in speaking
    ]
    unit_columns += [
        (index, headings[index].joined if index in headings else "")
        for index in given.unit_columns
        if index not in {each for each, _ in unit_columns}
    ]
    guessed = "tag" in columns and columns["tag"].likelihood < 0.75 and columns["tag"].how == "contents"
    score = sum(match.likelihood * (1.0 if content(match.index).filled else 0.3) for match in columns.values())
    return SheetMatch(
        kind=kind,
        header_rows=header_rows,
        first_row=first_row,
        # In the order of the sheet; of three values in one cell only what no column of its own says is read.
        columns=dict(sorted(columns.items(), key=_in_order)),
        unknown=tuple(_numbered(sorted(unknown), [match.heading for match in columns.values()])),
        unit_columns=tuple(sorted(unit_columns)),
        notes=tuple(notes),
        score=score - 2.0 * guessed,
        last_heading_row=bottom,
        headings={index: heading.joined for index, heading in sorted(headings.items())},
    )


def _names_lines(cells: Contents, finder: Finder) -> bool:
    """Whether what stands below a heading are themselves headings: a form that has a property on each line."""
    if cells.count < 2 or cells.holds(_DIGIT) > 0.3:
        return False
    return sum(finder.names.knows(heading_words(text)) for text in cells.texts) * 2 > cells.count


def _in_order(item: tuple[str, ColumnMatch]) -> tuple[bool, int, int]:
    match = item[1]
    return match.column.reads is Reads.TRIPLET, match.index, match.piece[0] if match.piece is not None else 0


def _take_beside_normal(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
) -> None:
    """Take a Min or Max that stands beside Normal for the operating value's, where it is nothing else."""
    normal = columns.get("operating_value_normal")
    if normal is None:
        return
    for name, word in (("operating_value_min", "min"), ("operating_value_max", "max")):
        if name in columns:
            continue
        for index in (normal.index + 1, normal.index - 1, normal.index + 2, normal.index - 2):
            if index in used or index not in levels or heading_words(levels[index].joined) != (word,):
                continue
            if content(index).fit(kind.column(name), frozenset()) < 0.5:
                continue
            columns[name] = ColumnMatch(
                column=kind.column(name), index=index, heading=levels[index].joined, how="contents", likelihood=0.7
            )
            used.add(index)
            break


def _take_low_and_high(kind: SheetKind, levels: Mapping[int, Levels], columns: dict[str, ColumnMatch]) -> None:
    """Take a bare Low and High for the range where the list has no other range: I/O maps head the scale so."""
    low, high = columns.get("setting_l"), columns.get("setting_h")
    names = {column.field for column in kind.columns}
    if low is None or high is None or not {"lrv", "urv"} <= names or "mapping" in (low.how, high.how):
        return
    if any(name in columns for name in ("lrv", "urv", "range", "setting_ll", "setting_hh", "settings", "trip")):
        return
    if (heading_words(low.heading), heading_words(high.heading)) != (("low",), ("high",)):
        return
    for old, new in (("setting_l", "lrv"), ("setting_h", "urv")):
        columns[new] = replace(columns.pop(old), column=kind.column(new), how="contents")


_SEVERAL_WORDS: Final = re.compile(r"[^\W\d_]{2,}.*[\s,/-][^\W\d_]{2,}.*")


def _take_text_of_signals(kind: SheetKind, content: Callable[[int], Contents], columns: dict[str, ColumnMatch]) -> None:
    """Take a column headed Signal for the service where it says in words which signal it is, and nothing else does."""
    signal = columns.get("signal")
    if (
        signal is None
        or signal.how == "mapping"
        or "service" in columns
        or all(column.field != "service" for column in kind.columns)
    ):
        return
    cells = content(signal.index)
    if cells.fit(signal.column, frozenset()) < 0.5 and cells.part(_SEVERAL_WORDS) > 0.6:
        columns["service"] = replace(columns.pop("signal"), column=kind.column("service"), how="contents")


_OF_A_LENGTH: Final = frozenset(("pF/m", "uH/m", "ohm/km"))
_FIGURE_OF_A_CABLE: Final = re.compile(
    r"(?<![a-z])(?:(?:[pnum\u00b5\u03bc]?[fh]|m?(?:ohms?|\u03c9))\s?(?:/|per )\s?\d{0,4}\s?[a-z]{1,5}"
    r"|[pnum\u00b5\u03bc][fh])(?![a-z0-9])"
)


def _state_units_of_a_length(columns: dict[str, ColumnMatch], used: set[int]) -> None:
    """Take the unit that stands within a heading of a cable's figures; a column in one that is not known is not read.

    45 pF/ft taken for 45 pF/m is a third of what the cable has.
    """
    for name, match in list(columns.items()):
        if match.column.unit not in _OF_A_LENGTH or match.how == "mapping":
            continue
        if match.unit_text and not (name == "ohm_per_km" and "loop" in heading_words(match.heading)):
            continue
        found = _FIGURE_OF_A_CABLE.search(match.heading.casefold())
        text = found[0] if found is not None else match.column.unit or ""
        if name == "ohm_per_km" and "loop" in heading_words(match.heading) and "resistance_per" not in columns:
            text = f"loop {text}"
        elif found is None:
            continue
        if factor_to(match.column.unit or "", text) is not None:
            columns[name] = replace(match, unit_text=text)
        else:
            used.discard(columns.pop(name).index)


_DESCRIBED: Final = frozenset(("uo_v", "io_ma", "ui_v", "ii_ma", "lrl", "url", "limits", "lift_off_v"))


def _take_model_for_code(kind: SheetKind, content: Callable[[int], Contents], columns: dict[str, ColumnMatch]) -> None:
    """Take the models of a list that gives each of them its figures, and no code, for its codes."""
    model = columns.get("model")
    if model is None or "code" in columns or not any(column.field == "code" for column in kind.columns):
        return
    code = kind.column("code")
    if _DESCRIBED & columns.keys() and content(model.index).fit(code, frozenset()) > 0.5:
        columns["code"] = replace(columns.pop("model"), column=code, how="contents")


_NAMES_AN_ENTRY: Final = frozenset(("code", "model", "ref", "reference", "catalogue", "catalog", "type", "typ", "spec"))
_MOSTLY: Final = 0.6


def _take_listed_codes(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
    codes: frozenset[str],
) -> list[str]:
    """Take a column that names entries of a list of codes for the device type where no other is, and tell it."""
    if not codes or "device_type" in columns or ("tag",) not in kind.key:
        return []
    if not any(column.field == "device_type" for column in kind.columns):
        return []
    column = kind.column("device_type")
    model = columns.get("model")
    for index, heading in levels.items():
        of_model = model is not None and model.index == index
        if (index in used and not of_model) or not _NAMES_AN_ENTRY & set(heading_words(heading.joined)):
            continue
        if content(index).fit(column, codes) >= _MOSTLY:
            if of_model:
                del columns["model"]
            columns["device_type"] = ColumnMatch(
                column=column, index=index, heading=heading.joined, how="contents", likelihood=0.8
            )
            used.add(index)
            return [f"heading '{heading.joined}' is taken for {column.title}: it names entries of the lists of codes"]
    return []


_SPEAKS_OF: Final = {"flow": "F", "flowrate": "F", "durchfluss": "F", "level": "L", "fuellstand": "L"}


def _only(column: Column, heading: Levels) -> str:
    """The first letter of the tags that a column of operating values speaks of, where its heading names a variable."""
    if not column.field.startswith("operating_value"):
        return ""
    return next((_SPEAKS_OF[word] for word in heading_words(heading.joined) if word in _SPEAKS_OF), "")


# Two values in one cell: what the heading says beside pressure and temperature.
_PAIRED: Final = {
    "design": ("design_pressure", "design_temperature"),
    "operating": ("operating_pressure_normal", "operating_temperature_normal"),
}
_TWO_VALUES: Final = re.compile(r"[^/|\n;]{1,20}[/|\n;][^/|\n;]{1,20}")
_PRESSURE_WORDS: Final = frozenset({"pressure", "p"})
_TEMPERATURE_WORDS: Final = frozenset({"temperature", "t"})


def _match_pairs(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
) -> None:
    """Find the columns that hold a pressure and a temperature in each cell: Design P/T (barg / degC)."""
    known = {column.field: column for column in kind.columns}
    for index, heading in levels.items():
        text = BRACKET.sub(" ", heading.joined)
        words = heading_words(text)
        if _match_ends(known, index, heading, content, columns) or _match_levels(known, index, heading, columns):
            used.add(index)
            continue
        if not (_PRESSURE_WORDS.intersection(words) and _TEMPERATURE_WORDS.intersection(words)):
            continue
        names = next((_PAIRED[word] for word in words if word in _PAIRED), None)
        if names is None or any(name not in known or name in columns for name in names):
            continue
        if content(index).part(_TWO_VALUES) < 0.5:
            continue
        bracket = BRACKET.search(heading.joined)
        tail = bracket[1] if bracket else heading.joined.split()[-1]
        units = [piece.strip() for piece in re.split(r"[/|,;]", tail)]
        first = next(word for word in words if word in _PRESSURE_WORDS or word in _TEMPERATURE_WORDS)
        for place, name in enumerate(names if first in _PRESSURE_WORDS else names[::-1]):
            stated = unit_for(known[name], units[place]) if len(units) == 2 else None
            columns[name] = ColumnMatch(
                column=known[name],
                index=index,
                heading=heading.joined,
                likelihood=0.9,
                unit=stated if isinstance(stated, Unit) else None,
                unit_text=units[place] if stated is not None else "",
                piece=(place, 2),
            )
        used.add(index)


_LEVEL: Final = r"(?:HH|LL|HIHI|LOLO|HI-HI|LO-LO|HI|LO|H|L)"
_LEVELS_LISTED: Final = re.compile(rf"(?<![A-Za-z]){_LEVEL}(?:\s?[/|,;]\s?{_LEVEL}){{1,3}}(?![A-Za-z])")


def _match_levels(known: Mapping[str, Column], index: int, heading: Levels, columns: dict[str, ColumnMatch]) -> bool:
    """Find a column whose heading says in which order its cells hold the alarms: LL / L / H / HH."""
    listed = _LEVELS_LISTED.search(heading.joined.upper())
    if listed is None:
        return False
    short = re.findall(_LEVEL, listed[0])
    names = [f"setting_{re.sub('[^hl]', '', level.lower())}" for level in short]
    if len(set(names)) < len(names) or any(name not in known or name in columns for name in names):
        return False
    bracket = next((each[1] for each in BRACKET.finditer(heading.joined) if unit_for(known[names[0]], each[1])), "")
    stated = unit_for(known[names[0]], bracket) if bracket else None
    for place, name in enumerate(names):
        columns[name] = ColumnMatch(
            column=known[name],
            index=index,
            heading=heading.joined,
            likelihood=0.95,
            unit=stated if isinstance(stated, Unit) else None,
            unit_text=bracket,
            piece=(place, len(names)),
        )
    return True


_END_WORDS: Final = re.compile(r"\b(min|nor|max)[a-z]*\b\.?", re.IGNORECASE)
_ENDS_LISTED: Final = re.compile(
    r"(?:min|nor|max)[a-z]{0,6}\.?\s?[/|,;-]\s?(?:min|nor|max)[a-z]{0,6}\.?(?:\s?[/|,;-]\s?(?:min|nor|max)[a-z]{0,6}\.?)?",
    re.IGNORECASE,
)
_THREE_OF: Final = {"min": 0, "nor": 1, "max": 2}


def _match_ends(
    known: Mapping[str, Column],
    index: int,
    heading: Levels,
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
) -> bool:
    """Find a column whose heading says in which order its cells hold minimum, normal and maximum."""
    listed = _ENDS_LISTED.search(heading.joined)
    if listed is None:
        return False
    ends = [_THREE_OF[word.casefold()[:3]] for word in _END_WORDS.findall(listed[0])]
    rest = f"{heading.joined[: listed.start()]} {heading.joined[listed.end() :]}"
    words = heading_words(BRACKET.sub(" ", rest))
    three = next(
        (
            column
            for column in known.values()
            if column.reads is Reads.TRIPLET
            and words in {heading_words(each) for each in (column.title, *column.headings)}
        ),
        None,
    )
    if three is None or len(set(ends)) < len(ends) or any(three.into[end] in columns for end in ends):
        return False
    if len(ends) == 2 and content(index).part(_TWO_VALUES) < 0.5:
        return False
    bracket = BRACKET.search(rest)
    stated = unit_for(three, bracket[1]) if bracket else None
    for place, end in enumerate(ends):
        name = three.into[end]
        columns[name] = ColumnMatch(
            column=known[name],
            index=index,
            heading=heading.joined,
            likelihood=0.95,
            unit=stated if isinstance(stated, Unit) else None,
            unit_text=bracket[1] if bracket and stated is not None else "",
            piece=(place, len(ends)),
        )
    return True


def _believed(candidate: Candidate, cells: Contents, fit: float, several: bool) -> bool:
    if candidate.how == "likeness":
        return cells.count > 0 and fit >= 0.5
    if not cells.count:
        return True
    if candidate.column.reads is Reads.TAG and cells.sequence:
        return False
    if candidate.weak or several or (candidate.column.into and candidate.column.reads is Reads.TEXT):
        return fit >= 0.25
    if candidate.column.reads is Reads.COUNT:
        return fit >= 0.25
    if candidate.column.reads in NUMERIC and candidate.column.reads is not Reads.RANGE:
        return fit > 0 or any(any(sign.isdigit() for sign in text) for text in cells.texts) or cells.count < 4
    return True


def _numbered(unknown: Iterable[tuple[int, str]], known: Iterable[str]) -> Iterator[tuple[int, str]]:
    """Give headings that stand twice a number: Rev, Rev (2)."""
    seen: dict[str, int] = {}
    for heading in known:
        seen[folded(heading)] = seen.get(folded(heading), 0) + 1
    for index, heading in unknown:
        count = seen[folded(heading)] = seen.get(folded(heading), 0) + 1
        yield index, heading if count == 1 else f"{heading} ({count})"


def _add_tag_without_heading(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
    width: int,
    notes: list[str],
) -> None:
    """Take the column that holds tags for the tag column where no heading names it."""
    if "tag" in columns or ("tag",) not in kind.key or not columns:
        return
    column = kind.column("tag")
    if _join_tag(column, levels, content, columns, used, width, notes) or len(columns) < 2:
        return
    # A heading such as Signal may have been believed for want of better; cells that are tags say more.
    doubtful = {
        match.index: name
        for name, match in columns.items()
        if match.how not in ("likeness", "mapping")
        and not match.parts
        and content(match.index).fit(match.column, frozenset()) < 0.5
    }
    best: tuple[float, int] | None = None
    for index in range(width):
        if index in used and index not in doubtful:
            continue
        cells = content(index)
        if cells.count < 2:
            continue
        digits = sum(any(sign.isdigit() for sign in text) and " " not in text for text in cells.texts) / cells.count
        different = len(set(cells.texts)) / cells.count
        fit = cells.fit(column, frozenset())
        if fit >= 0.8 and digits >= 0.7 and different >= 0.8 and (best is None or fit > best[0]):
            best = (fit, index)
    if best is not None:
        columns.pop(doubtful.get(best[1], ""), None)
        heading = levels[best[1]].joined if best[1] in levels else ""
        columns["tag"] = ColumnMatch(column=column, index=best[1], heading=heading, how="contents", likelihood=0.6)
        used.add(best[1])
        notes.append(f"column '{heading}' is taken for the tag: its cells look like tags")


_TAGS_LETTERS: Final = frozenset(
    (
        "function",
        "func",
        "fn",
        "letter",
        "tag",
        "code",
        "instrument",
        "isa",
        "type",
        "prefix",
        "symbol",
        "variable",
        "kz",
    )
)
_TAGS_NUMBER: Final = frozenset(("tag", "loop", "number", "no", "nr", "num", "sequence", "seq", "serial", "#", "lfd"))
_TAGS_SUFFIX: Final = frozenset(("suffix", "sfx", "suf", "suff", "tag", "ext"))
_AREA_ONLY: Final = re.compile(r"[0-9]{1,4}[A-Z]?")


def _match_parted_tag(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
    notes: list[str],
) -> None:
    """Join a tag that stands in several columns, where a heading calls the number alone the tag: Unit, Function, No."""
    if ("tag",) not in kind.key or "tag" in columns:
        return
    column = kind.column("tag")
    words = {index: set(heading_words(heading.joined)) for index, heading in levels.items()}
    for index in sorted(levels):
        number = index + 1
        if number not in levels or not words[index] & _TAGS_LETTERS or not words[number] & _TAGS_NUMBER:
            continue
        letters, numbers = content(index), content(number)
        if letters.without_sections(_LETTERS_ONLY) < 0.9 or letters.part(IO_WORD) > 0.5:
            continue
        if numbers.count < 2 or numbers.part(_NUMBER_ONLY) < 0.9:
            continue
        if any(
            "tag" in each and content(at).fit(column, frozenset()) > 0.8
            for at, each in words.items()
            if at not in (index, number)
        ):
            return
        parts = [index, number]
        if number + 1 in levels and words[number + 1] & _TAGS_SUFFIX:
            suffix = content(number + 1)
            if not suffix.count or suffix.part(_SUFFIX_ONLY) > 0.9:
                parts.append(number + 1)
        # The unit is part of the tag where the heading over all of them says so.
        if index - 1 in levels and words[index - 1] & {"tag", "prefix"}:
            area = content(index - 1)
            if area.count and area.part(_AREA_ONLY) > 0.9:
                parts.insert(0, index - 1)
        joints = ["" if at == number + 1 else "-" for at in parts]
        heading = " ".join(levels[at].joined for at in parts)
        columns["tag"] = ColumnMatch(
            column=column,
            index=parts[0],
            heading=heading,
            how="contents",
            likelihood=0.95,
            parts=tuple(zip(parts[1:], joints[1:], strict=True)),
        )
        used.update(parts)
        notes.append(f"columns '{heading}' are joined to the tag")
        return


_LETTERS_ONLY: Final = re.compile(r"[A-Z]{1,6}")
_NUMBER_ONLY: Final = re.compile(r"[0-9]{1,6}[A-Z]?")
_SUFFIX_ONLY: Final = re.compile(r"[A-Z]{1,2}[0-9]?|[0-9]{1,2}")


def _join_tag(
    column: Column,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
    width: int,
    notes: list[str],
) -> bool:
    """Join a tag that stands in columns of its own: letters, number and suffix."""
    for index in range(width - 1):
        letters, number = content(index), content(index + 1)
        if letters.count < 2 or number.count < 2 or index not in levels or index + 1 not in levels:
            continue
        if letters.without_sections(_LETTERS_ONLY) < 0.9 or number.part(_NUMBER_ONLY) < 0.9:
            continue
        if letters.without_sections(_FIRST_LETTER) < 0.8 or letters.part(IO_WORD) > 0.5:
            continue
        parts = [(index + 1, "-")]
        suffix = content(index + 2) if index + 2 < width else None
        if (
            suffix is not None
            and suffix.count
            and suffix.part(_SUFFIX_ONLY) > 0.9
            and heading_words(levels[index + 2].joined if index + 2 in levels else "")[:1]
            in (("suffix",), ("sfx",), ("suf",), ("tag",))
        ):
            parts.append((index + 2, ""))
        heading = " ".join(levels[each].joined for each in (index, *(each for each, _ in parts)) if each in levels)
        columns["tag"] = ColumnMatch(
            column=column, index=index, heading=heading, how="contents", likelihood=0.7, parts=tuple(parts)
        )
        used.update((index, *(each for each, _ in parts)))
        notes.append(f"columns '{heading}' are joined to the tag")
        return True
    return False


_FIRST_LETTER: Final = re.compile(r"[A-NP-Z].*", re.DOTALL)

# --- rows that belong to the heading --------------------------------------------------------------------------------


def _rows_below(
    sheet: Sheet, finder: Finder, levels: Mapping[int, Levels], top: int, bottom: int
) -> tuple[tuple[int, ...], int, dict[int, str]]:
    """Return the heading's rows, the first row below, and the units of a unit row."""
    rows = list(range(top, bottom + 1))
    units: dict[int, str] = {}
    row = bottom + 1
    while row < len(sheet.rows) and len(rows) < 7:
        cells = {index: as_text(cell).strip() for index, cell in enumerate(sheet.rows[row]) if cell is not None}
        if not cells:
            # A blank line between the heading and its unit or numbering row.
            following = row + 1
            if following >= len(sheet.rows) or not _is_heading_more(
                {i: as_text(c).strip() for i, c in enumerate(sheet.rows[following]) if c is not None}, finder, levels
            ):
                break
            row = following
            continue
        more = _is_heading_more(cells, finder, levels)
        if more is None:
            break
        units.update(more)
        rows.append(row)
        row += 1
    return tuple(rows), rows[-1] + 1, units


def _is_heading_more(cells: Mapping[int, str], finder: Finder, levels: Mapping[int, Levels]) -> dict[int, str] | None:
    """Return the units of a row that still belongs to the heading; None where it is data."""
    numeric: dict[int, list[Column]] = {}
    tag_index = None
    for index, heading in levels.items():
        columns = [candidate.column for candidate in finder.candidates(heading)]
        numeric[index] = [column for column in columns if column.reads in NUMERIC]
        if tag_index is None and any(column.reads is Reads.TAG for column in columns):
            tag_index = index
    texts = list(cells.values())
    if len(texts) >= 3 and (
        [text.strip("()[].") for text in texts] == [str(number) for number in range(1, len(texts) + 1)]
        or [text.strip("()[].").casefold() for text in texts]
        == [chr(97 + number) for number in range(min(26, len(texts)))]
    ):
        return {}
    units = {
        index: text.strip("()[] ")
        for index, text in cells.items()
        if not text.isdigit() and any(unit_for(column, text.strip("()[] ")) for column in numeric.get(index, ()))
    }
    idle = sum(placeholder(text) is not None or folded(text) in ("text", "unit", "units", "alpha") for text in texts)
    if units and len(units) + idle == len(cells) and (tag_index is None or tag_index not in cells or idle):
        return units
    same = 0
    for index, text in cells.items():
        if index not in levels:
            continue
        here = {each.column.field for each in finder.candidates(levels[index])}
        there = {each.column.field for each in finder.candidates(Levels((text,))) if each.how == "synonym"}
        same += bool(here & there) and folded(text) not in YES_LIKE
    return {} if same >= 3 and same * 2 > len(cells) else None


YES_LIKE: Final = frozenset({"hart", "x", "no", "nc", "field", "system", "panel"})


# --- unit columns and columns that belong together ------------------------------------------------------------------


def _place_units(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
    taken: set[str],
) -> list[tuple[int, str]]:
    """Find what each column headed Unit speaks for: its neighbours to the left, else to the right."""
    by_index = {match.index: match for match in columns.values()}
    beside: list[tuple[int, str]] = []
    known = {column.field: column for column in kind.columns}
    generic = [index for index, heading in sorted(levels.items()) if index not in used and _is_unit_heading(heading)]
    left_over: list[int] = []
    for index in generic:
        cells = content(index)
        group = _neighbours(index, -1, by_index) or _neighbours(index, 1, by_index)
        if cells.count and cells.units() < 0.34 and not (group and cells.holds(_DIGIT) < 0.5):
            if "unit" in known and "unit" not in columns and heading_words(levels[index].joined) == ("unit",):
                columns["unit"] = ColumnMatch(
                    column=known["unit"], index=index, heading=levels[index].joined, how="contents", likelihood=0.9
                )
                used.add(index)
            continue
        own_group = [match for match in group if not match.unit_text and match.unit_index is None]
        # The only unit column that there is belongs to the range, wherever it stands; alarms share it.
        if (
            len(generic) == 1
            and "range_unit" in known
            and "range_unit" not in columns
            and all("settings_unit" in each.column.unit_from for each in own_group)
            and _is_bare_range(columns, content)
        ):
            left_over.append(index)
            continue
        if not own_group:
            left_over.append(index)
            continue
        asked = [match.column.unit_from[0] for match in own_group if match.column.unit_from]
        name = "range_unit" if "range_unit" in asked else asked[0] if asked else ""
        if name and name in known and name not in columns:
            columns[name] = ColumnMatch(
                column=known[name], index=index, heading=levels[index].joined, how="synonym", likelihood=0.95
            )
            used.add(index)
        else:
            name = ""
        for match in own_group:
            if not name or (
                name not in match.column.unit_from
                and not (name == "range_unit" and "settings_unit" in match.column.unit_from)
            ):
                columns[match.field] = by_index[match.index] = replace(match, unit_index=index)
                if (index, levels[index].joined) not in beside:
                    beside.append((index, levels[index].joined))
    for index in left_over:
        if "range_unit" in known and "range_unit" not in columns:
            columns["range_unit"] = ColumnMatch(
                column=known["range_unit"], index=index, heading=levels[index].joined, how="synonym", likelihood=0.85
            )
            used.add(index)
    return [(index, heading) for index, heading in beside if index not in used]


_ANY_UNIT: Final = re.compile(r"(?<![A-Za-z])(?!(?:to|bis|and|thru|through)\b)[A-Za-z]|[%°\"]")


def _is_bare_range(columns: Mapping[str, ColumnMatch], content: Callable[[int], Contents]) -> bool:
    """Whether there is a range, and neither its heading nor its cells have a unit."""
    ranges = [columns[name] for name in ("range", "lrv", "urv") if name in columns]
    return bool(ranges) and all(
        not each.unit_text and each.unit_index is None and content(each.index).holds(_ANY_UNIT) < 0.3 for each in ranges
    )


# Process units are numbered.
_DIGIT: Final = re.compile(r"\d")


def _is_unit_heading(heading: Levels) -> bool:
    texts = (heading.joined, heading.texts[-1], *re.split(r"[/|\n]", heading.joined))
    return any(heading_words(text) in GENERIC_UNITS for text in texts)


def _neighbours(index: int, step: int, by_index: Mapping[int, ColumnMatch]) -> list[ColumnMatch]:
    found: list[ColumnMatch] = []
    at = index + step
    while (
        (match := by_index.get(at)) is not None
        and match.column.reads in NUMERIC
        and match.column.reads is not Reads.COUNT
    ):
        found.append(match)
        at += step
    return found


# The rest of a classification or marking in columns of its own: heading words, and what to write before a bare value.
_CLASS_PARTS: Final[tuple[tuple[str, str, tuple[str, ...]], ...]] = (
    ("class", "Class", ("class", "nec class", "hazard class")),
    ("division", "Div", ("division", "div")),
    (
        "group",
        "Group",
        (
            "gas group", "group", "explosion group", "explosionsgruppe", "gas gr", "gas grp", "gr", "grp", "ex group",
            "gas/dust group", "apparatus group", "equipment group", "dust group", "gasgruppe", "groupe",
        ),
    ),
    (
        "temperature",
        "",
        (
            "t class", "temperature class", "tclass", "temperaturklasse", "t code", "temp code", "t rating",
            "temp rating", "temperature code", "t-klasse", "temperature rating", "temp klasse",
        ),
    ),
    ("epl", "", ("epl", "equipment protection level")),
    ("ambient", "", ("marked ambient", "ta range", "tamb")),
    (
        "surface",
        "T",
        (
            "max surface temperature", "max surface temp", "maximum surface temperature", "surface temperature",
            "surface temp", "permitted surface temperature", "max permitted surface temperature", "max surface",
            "permitted surface temp", "max dust temperature", "oberflaechentemperatur", "max oberflaechentemperatur",
        ),
    ),
    (
        "site ambient",
        "Ta",
        ("site ambient", "ambient site", "ambient of area", "site ambient temperature", "ambient of site", "site temp"),
    ),
)  # fmt: skip
_OF_THE_PLACE: Final = frozenset(("surface", "site ambient"))
_PART_WORDS: Final = {heading_words(text): (name, prefix) for name, prefix, texts in _CLASS_PARTS for text in texts}


def _join_parts(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
) -> None:
    """Join gas group, temperature class and the like to the classification or the marking they stand beside."""
    known = {column.field: column for column in kind.columns}
    if "ex_marking" not in known:
        return
    for name in ("area_classification", "ex_marking", "protection"):
        match = columns.get(name)
        if match is not None and match.how == "mapping":
            continue
        if match is not None and "zone" in heading_words(match.heading):
            columns[name] = replace(match, prefix="Zone")
        elif match is not None and heading_words(match.heading)[-1:] == ("class",):
            columns[name] = replace(match, prefix="Class")
    owners = {
        match.index: name
        for name, match in columns.items()
        if name in ("area_classification", "ex_marking", "protection")
    }
    of_site = columns.get("ambient_limits")
    if (
        of_site is not None
        and of_site.how != "mapping"
        and "area_classification" in columns
        and _part_of(levels[of_site.index]) == ("site ambient", "Ta")
    ):
        # Not what the device bears.
        used.discard(columns.pop("ambient_limits").index)
    for index in sorted(levels):
        if index in used:
            continue
        part = _part_of(levels[index])
        if part is None:
            continue
        over = heading_words(" ".join(levels[index].texts[:-1])) if len(levels[index].texts) > 1 else ()
        owner: str | None
        if {"area", "zone"} & set(over):
            owner = "area_classification" if "area_classification" in known else None
        elif {"ex", "device", "certificate", "marking", "protection", "atex", "equipment"} & set(over):
            owner = "ex_marking"
        else:
            left = [at for at in owners if at < index]
            owner = owners[max(left)] if left and index - max(left) <= 4 else None
            if owner is None and "area_classification" in known and part[0] in ("division", "group", "class"):
                owner = "area_classification" if "area_classification" not in columns else None
        if part[0] in _OF_THE_PLACE and owner != "area_classification":
            # The place's, and it says nothing of the device wherever its column stands.
            owner = "area_classification" if part[0] == "site ambient" and "area_classification" in columns else None
        if owner is None or (part[0] in _OF_THE_PLACE and _in_fahrenheit(levels[index])):
            continue
        name, prefix = part
        match = columns.get(owner)
        if match is None:
            columns[owner] = ColumnMatch(
                column=known[owner], index=index, heading=levels[index].joined, likelihood=0.9, prefix=prefix
            )
        else:
            columns[owner] = replace(match, parts=(*match.parts, (index, prefix)))
        owners[index] = owner
        used.add(index)


# Where an address in columns of its own goes from the large to the small.
_ADDRESS_PARTS: Final[tuple[tuple[str, tuple[str, ...]], ...]] = (
    ("Station", ("node", "station", "controller", "drop", "automate", "plc", "plc no", "rio", "cpu", "node no")),
    ("Rack", ("rack", "chassis", "frame", "baugruppentraeger", "rack no")),
    (
        "Slot",
        (
            "slot",
            "card",
            "module",
            "i/o card",
            "steckplatz",
            "slot no",
            "card no",
            "module no",
            "baugruppe",
            "karte",
            "steckkarte",
            "karte nr",
            "carte",
            "modul",
        ),
    ),
    ("Ch", ("channel", "ch", "point", "kanal", "channel no", "ch no", "voie", "bit", "i/o channel", "point no")),
)
_ADDRESS_WORDS: Final = {heading_words(text): name for name, texts in _ADDRESS_PARTS for text in texts}


def _join_address(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    content: Callable[[int], Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
) -> None:
    """Join rack, slot and channel to the address, where no one column holds it whole."""
    known = {column.field: column for column in kind.columns}
    match = columns.get("io_address")
    if match is not None and match.how == "mapping":
        return
    if "io_address" not in known or (match is not None and _ADDRESS_WORDS.get(heading_words(match.heading)) != "Ch"):
        return
    parts: dict[str, int] = {}
    for index, heading in levels.items():
        pieces = [_ADDRESS_WORDS.get(heading_words(piece)) for piece in re.split(r"[/.\-,]", heading.joined)]
        if match is None and len(pieces) > 1 and pieces[-1] == "Ch":
            # Rack / Slot / Ch over cells that hold all of it.
            for other in [field for field, each in columns.items() if each.index == index]:
                del columns[other]
            columns["io_address"] = ColumnMatch(
                column=known["io_address"], index=index, heading=heading.joined, likelihood=0.9
            )
            used.add(index)
            return
        name = _ADDRESS_WORDS.get(heading_words(heading.joined)) or _ADDRESS_WORDS.get(heading_words(heading.texts[-1]))
        if name is not None and name not in parts and content(index).count:
            parts[name] = index
    if "Ch" not in parts or len(parts) < 2:
        return
    order = [(parts[name], name) for name, _ in _ADDRESS_PARTS if name in parts]
    columns["io_address"] = ColumnMatch(
        column=known["io_address"],
        index=order[0][0],
        heading=" ".join(levels[index].joined for index, _ in order),
        how="contents",
        likelihood=0.9,
        prefix=order[0][1],
        parts=tuple(order[1:]),
    )
    used.update(parts.values())


def _in_fahrenheit(heading: Levels) -> bool:
    return any(
        text.rstrip(" )]").casefold().endswith((" f", "(f", "[f", "°f", "degf", "deg f")) for text in heading.texts
    )


def _part_of(heading: Levels) -> tuple[str, str] | None:
    for text in (heading.joined, heading.texts[-1]):
        words = heading_words(text)
        found = _PART_WORDS.get(words) or _PART_WORDS.get(
            tuple(word for word in words if word not in ("area", "hazardous", "ex", "°c", "degc"))
        )
        if found:
            return found
    return None


# --- which kind of sheet --------------------------------------------------------------------------------------------

# Names that nearly any sheet may bear.
_FAINT_NAMES: Final = frozenset((
    "list", "data", "index", "io", "class", "cable", "loop", "trip", "alarm", "area", "i/o", "types",
))  # fmt: skip


def _name_points(kind: SheetKind, text: str) -> float:
    """Return how far a name of a sheet or file says that it is of a kind."""
    plain = f" {' '.join(re.split(r'[^a-z0-9&]+', folded(text).replace('i/o', 'io')))} "
    best = 0.0
    for name in kind.names:
        words = " ".join(re.split(r"[^a-z0-9&]+", folded(name).replace("i/o", "io"))).strip()
        if words and (f" {words} " in plain or f" {words}s " in plain):
            best = max(best, 1.0 + 0.1 * len(words.split()) - (0.5 if name in _FAINT_NAMES else 0.0))
    return best


def _choose(sheet: Sheet, found: Sequence[SheetMatch], top: int) -> SheetMatch:
    title = " ".join(
        cell
        for row in sheet.rows[max(0, top - 12) : top]
        if len(row) - row.count(None) <= 2
        for cell in row
        if isinstance(cell, str)
    )[:400]
    file_name = re.split(r"[\\/]", sheet.file)[-1].rpartition(".")[0]
    rated: list[tuple[float, float, SheetMatch]] = []
    for match in found:
        by_name = max(
            3.0 * _name_points(match.kind, sheet.name),
            1.5 * _name_points(match.kind, title),
            2.0 * _name_points(match.kind, file_name),
        )
        rated.append((match.score + by_name, by_name, match))
    rated.sort(key=lambda each: -each[0])
    _, _, best = rated[0]
    # The I/O list's and the alarm list's columns are the index's too: only the name, or having no other, tells.
    if best.kind.key == (("tag",),):
        others = [
            (by_name, match)
            for _, by_name, match in rated
            if match.kind is not best.kind and match.kind.record is best.kind.record
        ]
        own_name = next(by_name for _, by_name, match in rated if match is best)
        for by_name, match in sorted(others, key=lambda each: (-each[0], -each[1].score)):
            more = len(best.columns) - len(match.columns)
            if (by_name > own_name and more <= 12) or more <= 0:
                best = match
                break
    by_name = next(by_name for _, by_name, match in rated if match is best)
    return replace(best, named=by_name >= 1.0)


# A plant's threshold is named by the code of its rule.
_THRESHOLD: Final = re.compile(r"\s*(?:[A-Z]{3}[0-9]{2}|ELC)\s")


def _field_and_value(sheet: Sheet, kinds: Sequence[SheetKind]) -> SheetMatch | None:
    """Return a match for a sheet that has a field and its value on each row."""
    for kind in kinds:
        if "thresholds" not in getattr(kind.record, "__dataclass_fields__", {}):
            continue
        names = names_of(kind)
        known: set[str] = set()
        across = 0
        for row in sheet.rows[:LOOKED_AT_ROWS]:
            filled = [cell for cell in row if cell is not None]
            if filled and isinstance(filled[0], str) and len(filled) <= 4:
                for _, _, column in names.find(heading_words(filled[0].strip(" :="))):
                    known.add(column.field)
            named_here = sum(
                1
                for cell in filled
                if isinstance(cell, str)
                and (_THRESHOLD.match(cell) or any(True for _ in names.find(heading_words(cell.strip(" :=")))))
            )
            across = max(across, named_here)
        if across > max(len(known), 1):
            # More names stand beside each other than below each other: they are headings.
            continue
        named = max(
            _name_points(kind, sheet.name), _name_points(kind, re.split(r"[\\/]", sheet.file)[-1].rpartition(".")[0])
        )
        if len(known) >= (2 if named else 3) or (named and sheet.width <= 3 and known):
            return SheetMatch(
                kind=kind,
                header_rows=(),
                first_row=0,
                columns={},
                named=bool(named),
                score=len(known) + 3.0 * named,
                notes=("a field and its value on each row",),
            )
    return None
