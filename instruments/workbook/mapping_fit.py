"""A mapping laid over lists: which sheet and which column each entry speaks of now, and which of them fit nothing."""

from __future__ import annotations

from collections import Counter, defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from pathlib import PurePath
from typing import Final

from instruments.column import SheetKind
from instruments.origin import column_letters
from instruments.unit import Unit
from instruments.workbook.heading_words import Finder, Levels, heading_words, unit_for
from instruments.workbook.headings import (
    LOOKED_AT_ROWS,
    ColumnMatch,
    Given,
    SheetMatch,
    headings_in,
    match_given,
    match_sheet,
)
from instruments.workbook.mapping import MappedColumn, MappedSheet
from instruments.workbook.mapping import Mapping as ListMapping
from instruments.workbook.sheet import Sheet
from instruments.workbook.words import folded

__all__ = ["MappingNote", "SheetsFound", "find_sheets", "match_by_mapping"]

ENOUGH: Final = 0.5
"""Part of a sheet's headings that must be there for a row to be its heading, and for a sheet to be that sheet."""


@dataclass(frozen=True, slots=True, kw_only=True)
class MappingNote:
    """Something that a mapping and the lists do not agree in.

    Attributes
    ----------
    file, sheet
        The file's name and the sheet's, as the lists have them, else as the mapping has.
    text
        What it is.
    line
        Where the mapping says so; 0: nowhere, the lists have it and the mapping has not.
    """

    file: str
    sheet: str
    text: str
    line: int = 0

    def __str__(self) -> str:
        where = f"line {self.line}, " if self.line else ""
        return f"{where}{self.file}, sheet '{self.sheet}': {self.text}" if self.sheet else f"{where}{self.text}"


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetsFound:
    """For each sheet of the lists what the mapping says of it, None where it says nothing; and what fits nothing."""

    mapped: tuple[MappedSheet | None, ...]
    notes: tuple[MappingNote, ...]


# --- sheets ---------------------------------------------------------------------------------------------------------


def find_sheets(mapping: ListMapping, sheets: Sequence[Sheet]) -> SheetsFound:
    """Find what a mapping says of each sheet: files by their names, else by their sheets; sheets likewise.

    Parameters
    ----------
    mapping
        How earlier lists were understood.
    sheets
        The sheets of all files, as read.
    """
    files: dict[str, list[int]] = defaultdict(list)
    for number, sheet in enumerate(sheets):
        files[sheet.file].append(number)
    told: dict[str, list[MappedSheet]] = defaultdict(list)
    for each in mapping.sheets:
        told[each.file].append(each)
    found: dict[int, MappedSheet] = {}
    pairs: list[tuple[str, str]] = []
    left_files = list(files)
    left_told = list(told)
    for name in list(left_told):
        file = next((file for file in left_files if folded(PurePath(file).name) == folded(name)), None)
        if file is not None:
            pairs.append((name, file))
            left_told.remove(name)
            left_files.remove(file)
    notes: list[MappingNote] = []
    if len(told) == len(files) == 1 and left_told:
        pairs.append((left_told.pop(), left_files.pop()))
    else:
        alike = sorted(
            (
                (sum(likeness for *_, likeness in _pair(told[name], [sheets[at] for at in files[file]])), name, file)
                for name in left_told
                for file in left_files
            ),
            key=lambda each: -each[0],
        )
        for likeness, name, file in alike:
            if likeness >= ENOUGH and name in left_told and file in left_files:
                pairs.append((name, file))
                left_told.remove(name)
                left_files.remove(file)
    for name, file in pairs:
        if folded(PurePath(file).name) != folded(name):
            notes.append(
                MappingNote(
                    file=PurePath(file).name, sheet="", text=f"{PurePath(file).name} is read as {name} was mapped"
                )
            )
        numbers = files[file]
        here = told[name]
        for one, two, _ in _pair(here, [sheets[at] for at in numbers]):
            found[numbers[two]] = here[one]
    taken = {id(each) for each in found.values()}
    for each in mapping.sheets:
        if id(each) not in taken and each.kind:
            text = f"there is no such {'file' if each.file in left_told else 'sheet'} any more"
            notes.append(MappingNote(file=each.file, sheet=each.sheet, line=each.line, text=text))
    return SheetsFound(mapped=tuple(found.get(number) for number in range(len(sheets))), notes=tuple(notes))


def _pair(told: Sequence[MappedSheet], sheets: Sequence[Sheet]) -> list[tuple[int, int, float]]:
    """Pair the sheets of a mapped file with those of a file: by name, else by headings; and how alike they are."""
    pairs: list[tuple[int, int, float]] = []
    ones, twos = list(range(len(told))), list(range(len(sheets)))
    for one in list(ones):
        two = next((two for two in twos if folded(sheets[two].name) == folded(told[one].sheet)), None)
        if two is not None:
            pairs.append((one, two, 1.0))
            ones.remove(one)
            twos.remove(two)
    alike = sorted(
        ((_alike(sheets[two], told[one]), one, two) for one in ones for two in twos), key=lambda each: -each[0]
    )
    for likeness, one, two in alike:
        # Of files with one sheet each the sheet's name says nothing: it is the file's, or Sheet1.
        if (likeness >= ENOUGH or (len(told) == len(sheets) == 1)) and one in ones and two in twos:
            pairs.append((one, two, likeness))
            ones.remove(one)
            twos.remove(two)
    return pairs


def _alike(sheet: Sheet, mapped: MappedSheet) -> float:
    wanted = sum(bool(column.heading) for column in mapped.columns)
    if not wanted:
        return 0.0
    place = _heading_now(sheet, mapped)
    return place[2] / wanted if place is not None else 0.0


# --- the heading's rows ---------------------------------------------------------------------------------------------


def _key(heading: str) -> str:
    return " ".join(folded(heading).split())


def _heading_now(sheet: Sheet, mapped: MappedSheet) -> tuple[int, int, int] | None:
    """Return the rows in which most of a mapping's headings stand now, and how many of them do."""
    wanted = Counter(_key(column.heading) for column in mapped.columns if column.heading)
    if not wanted or not mapped.heading_rows:
        return None
    height = mapped.heading_rows[-1] - mapped.heading_rows[0] + 1
    # The lowest of a heading's rows holds its end.
    ends = {" ".join(words[at:]) for key in wanted for words in [key.split()] for at in range(len(words))}
    hits: list[tuple[int, int]] = []
    known: dict[str, bool] = {}
    for row, cells in enumerate(sheet.rows[: LOOKED_AT_ROWS + mapped.heading_rows[-1]]):
        count = 0
        for cell in cells:
            if isinstance(cell, str):
                hit = known.get(cell)
                if hit is None:
                    hit = known[cell] = len(cell) <= 400 and _key(cell) in ends
                count += hit
        if count:
            hits.append((-count, row))
    hits.sort()
    best: tuple[int, int, int] | None = None
    for _, row in hits[:8]:
        top = max(0, row - height + 1)
        here = Counter(_key(heading.joined) for heading in headings_in(sheet, top, row).values())
        count = sum((here & wanted).values())
        # Of equals the highest: the others are the headings again, on later pages.
        if count and (best is None or count > best[2] or (count == best[2] and row < best[1])):
            best = (top, row, count)
    return best


def _rows_of_heading(sheet: Sheet, mapped: MappedSheet, notes: list[tuple[int, str]]) -> tuple[int, int] | None:
    """Return the rows of a sheet's heading, None where they are not to be found."""
    top, bottom = mapped.heading_rows[0], mapped.heading_rows[-1]
    shown = f"row {bottom + 1}" if top == bottom else f"rows {top + 1} to {bottom + 1}"
    if mapped.is_moved or not any(column.heading for column in mapped.columns):
        if bottom < len(sheet.rows):
            return top, bottom
        notes.append((mapped.line, f"the sheet has no {shown} to hold its headings; they are looked for"))
        return None
    place = _heading_now(sheet, mapped)
    wanted = sum(bool(column.heading) for column in mapped.columns)
    if place is None or place[2] < ENOUGH * wanted:
        notes.append((mapped.line, f"its headings stand neither in {shown} nor elsewhere; they are looked for"))
        return None
    return place[:2]


# --- its columns ----------------------------------------------------------------------------------------------------


def _columns_now(levels: Mapping[int, Levels], mapped: MappedSheet) -> dict[int, int]:
    """Return where each column of a mapping, by its number there, stands now: by heading, equal ones in their order."""
    told: dict[str, list[int]] = defaultdict(list)
    here: dict[str, list[int]] = defaultdict(list)
    for number, column in enumerate(mapped.columns):
        told[_key(column.heading)].append(number)
    for index, heading in sorted(levels.items()):
        here[_key(heading.joined)].append(index)
    found: dict[int, int] = {}
    for key, numbers in told.items():
        if not key:
            continue
        indexes = here.get(key, [])
        if len(indexes) == len(numbers):
            found.update(zip(numbers, indexes, strict=True))
            continue
        # One of several equal headings is gone, or new: those that stayed where they were are the same.
        stayed = [number for number in numbers if mapped.columns[number].index in indexes]
        found.update({number: mapped.columns[number].index for number in stayed})
        rest = [index for index in indexes if index not in {found[number] for number in stayed}]
        found.update(zip([number for number in numbers if number not in stayed], rest, strict=False))
    # Tag No. or Tag no: the same words are the same heading, where only one has them.
    left = [number for number, column in enumerate(mapped.columns) if number not in found and column.heading]
    free = [index for index in levels if index not in found.values()]
    for number in left:
        words = heading_words(mapped.columns[number].heading)
        same = [index for index in free if heading_words(levels[index].joined) == words]
        if words and len(same) == 1:
            found[number] = same[0]
            free.remove(same[0])
    # A column without a heading stands as far to the right of its neighbour as it stood.
    for number, column in enumerate(mapped.columns):
        if not column.heading:
            before = [each for each in found if mapped.columns[each].index < column.index]
            nearest = max(before, key=lambda each: mapped.columns[each].index, default=None)
            index = column.index + (0 if nearest is None else found[nearest] - mapped.columns[nearest].index)
            if index >= 0 and index not in levels and index not in found.values():
                found[number] = index
    return found


def _given(
    kind: SheetKind,
    levels: Mapping[int, Levels],
    mapped: MappedSheet,
    now: Mapping[int, int],
    notes: list[tuple[int, str]],
) -> Given:
    """Return what a mapping says of a sheet's columns, where they stand now."""
    known = {column.field: column for column in kind.columns}
    finder = Finder(kind)
    moved = {mapped.columns[number].index: index for number, index in now.items()}
    owners: dict[int, int] = {}
    columns: dict[str, ColumnMatch] = {}
    stated: set[str] = set()
    no_field: set[int] = set()
    unit_columns: list[int] = []
    parts: dict[str, list[tuple[MappedColumn, int]]] = defaultdict(list)
    for number, index in now.items():
        told = mapped.columns[number]
        for owner in told.unit_of:
            if owner in moved:
                owners[moved[owner]] = index
        names = [name for name in told.fields if name in known]
        if len(names) < len(told.fields):
            lost = ", ".join(sorted(set(told.fields) - set(names)))
            notes.append((told.line, f"'{told.heading}' cannot be {lost} here: {kind.name} has no such field"))
        if not names:
            if told.unit_of:
                unit_columns.append(index)
            else:
                no_field.add(index)
            continue
        if told.part and told.fields[-1] in known:
            parts[told.fields[-1]].append((told, index))
        heading = levels[index] if index in levels else Levels(("",))
        whole = told.fields[:-1] if told.part else told.fields
        for place, name in enumerate(whole):
            if name not in known:
                continue
            column = known[name]
            several = len(whole) > 1
            if told.units is not None:
                text = told.units[place]
                unit = unit_for(column, text) if text else None
                stated.add(name)
            else:
                unit, text = finder.unit_of(heading, column) if not several else (None, "")
            columns[name] = ColumnMatch(
                column=column,
                index=index,
                heading=heading.joined,
                how="mapping",
                unit=unit if isinstance(unit, Unit) else None,
                unit_text=text,
                prefix="" if told.part else told.before,
                piece=(place, len(whole)) if several else None,
                only=told.only,
                decimal=told.decimal,
            )
    for name, pieces in parts.items():
        pieces.sort(key=lambda each: each[0].part)
        headings = [levels[index].joined for _, index in pieces if index in levels]
        columns[name] = ColumnMatch(
            column=known[name],
            index=pieces[0][1],
            # A tag or an address is headed by all of its columns, a classification by its first.
            heading=" ".join(headings if name in ("tag", "io_address") else headings[:1]),
            how="mapping",
            prefix=pieces[0][0].before,
            parts=tuple((index, told.before) for told, index in pieces[1:]),
            decimal=pieces[0][0].decimal,
        )
    for name, match in columns.items():
        if match.index in owners:
            columns[name] = replace(match, unit_index=owners[match.index])
    return Given(
        columns=columns, no_field=frozenset(no_field), unit_columns=tuple(unit_columns), units_stated=frozenset(stated)
    )


# --- a sheet --------------------------------------------------------------------------------------------------------


def match_by_mapping(
    sheet: Sheet, mapped: MappedSheet, kinds: Sequence[SheetKind], *, codes: frozenset[str] = frozenset()
) -> tuple[SheetMatch | None, tuple[MappingNote, ...]]:
    """Match a sheet as a mapping says.

    Parameters
    ----------
    sheet
        The sheet as read.
    mapped
        What the mapping says of it; its kind is one of `kinds`.
    kinds
        The kinds of sheet that are known.
    codes
        Codes that other sheets list, for the columns that the mapping does not know.

    Returns
    -------
    SheetMatch or None, and notes
        None where its columns make no sheet of that kind.
    """
    kind = next(kind for kind in kinds if kind.name == mapped.kind)
    found: list[tuple[int, str]] = []
    match = _matched(sheet, mapped, kind, codes, found)
    if match is not None and mapped.decimal:
        match = replace(match, decimal=mapped.decimal)
    return match, tuple(
        MappingNote(file=PurePath(sheet.file).name, sheet=sheet.name, line=line, text=text) for line, text in found
    )


def _matched(
    sheet: Sheet, mapped: MappedSheet, kind: SheetKind, codes: frozenset[str], notes: list[tuple[int, str]]
) -> SheetMatch | None:
    if not mapped.heading_rows:
        if "thresholds" in getattr(kind.record, "__dataclass_fields__", {}):
            return SheetMatch(kind=kind, header_rows=(), first_row=0, columns={}, named=True)
        return match_sheet(sheet, [kind], forced=kind, codes=codes)
    place = _rows_of_heading(sheet, mapped, notes)
    if place is None:
        anew = match_sheet(sheet, [kind], forced=kind, codes=codes)
        if anew is None:
            notes.append((mapped.line, f"no headings of {kind.name} were found: the sheet is not read"))
            return None
        if not anew.header_rows:
            return anew
        place = anew.header_rows[0], anew.last_heading_row
    levels = headings_in(sheet, *place)
    now = _columns_now(levels, mapped)
    for number, column in enumerate(mapped.columns):
        if number not in now and (column.fields or column.unit_of or column.heading):
            what = f"the heading '{column.heading}'" if column.heading else "the column without a heading"
            fields = ", ".join(_titles(kind, column.fields))
            notes.append((column.line, f"{what}{f' ({fields})' if fields else ''} stands here no more"))
    given = _given(kind, levels, mapped, now, notes)
    match = match_given(sheet, kind, given, top=place[0], bottom=place[1], codes=codes)
    if match is None:
        wanted = " or ".join(" with ".join(_titles(kind, key)) for key in kind.key[:3])
        notes.append(
            (mapped.line, f"no list of {kind.name} is left of it, which needs {wanted}: the sheet is not read")
        )
        return None
    if mapped.columns:
        notes.extend(_new_columns(match, given))
    return match


def _titles(kind: SheetKind, fields: Iterable[str]) -> list[str]:
    known = {column.field: column.title for column in kind.columns}
    return [known.get(name, name) for name in fields]


def _new_columns(match: SheetMatch, given: Given) -> Iterable[tuple[int, str]]:
    """Tell the columns that the mapping does not know, and what they were taken for."""
    known = given.indexes
    taken = {index: each for each in match.columns.values() for index in (each.index, *(at for at, _ in each.parts))}
    beside = {index for index, _ in match.unit_columns}
    for index in sorted({*match.headings, *taken}):
        if index in known:
            continue
        heading = f"column {column_letters(index)} '{match.headings.get(index, '')}' is new"
        if index in taken:
            yield 0, f"{heading}: taken for {taken[index].column.title} ({taken[index].how})"
        elif index in beside:
            yield 0, f"{heading}: taken for the unit of its neighbours"
        else:
            yield 0, f"{heading}: not understood, kept under its heading"
