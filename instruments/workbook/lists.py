"""Sheets in, all their records out: which kind each is, the plant's data, then the rows."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from pathlib import PurePath
from types import MappingProxyType
from typing import Any

from instruments.column import SheetKind
from instruments.number import CellTrouble
from instruments.origin import column_letters
from instruments.plant_data import PlantData
from instruments.workbook.headings import SheetMatch, match_sheet
from instruments.workbook.mapping import LEAVE_OUT, MappedSheet
from instruments.workbook.mapping import Mapping as ListMapping
from instruments.workbook.mapping_fit import MappingNote, find_sheets, match_by_mapping
from instruments.workbook.normalise import SheetRecords, read_records
from instruments.workbook.number_format import as_text
from instruments.workbook.plant_sheet import PlantEntry, plant_data, read_plant_sheet
from instruments.workbook.problem import CellProblem
from instruments.workbook.row_barriers import barriers_of_rows
from instruments.workbook.sheet import Sheet
from instruments.workbook.side_by_side import parted_where_tables_stand_side_by_side
from instruments.workbook.turned import columns_of_labels, turned_where_tags_stand_across
from instruments.workbook.unread import Unread, problems_of
from instruments.workbook.words import folded

__all__ = ["Lists", "NoTags", "SheetReport", "records_of_sheets"]


class NoTags(Exception):
    """No sheet of the files that were given holds tags; says what each was taken for."""


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetReport:
    """What became of one sheet.

    Attributes
    ----------
    kind
        The kind's name; None where the sheet was not understood.
    skipped
        Why it was left out; blank where it was read.
    match
        How its heading was understood.
    rows, records
        Rows that became records, and how many.
    cells_filled, cells_read, cells_unread
        What became of its cells; of a sheet that was left out they are filled only.
    sections, notes
        Section rows; title lines, notes and legends: row counted from 1, and text.
    left_out
        Whether a mapping told to leave it out.
    missed
        Whether it was left out though nothing says that it holds no list.
    turned
        Whether its tags stood side by side, and its lines were read as columns.
    decimal, decimals
        The decimal mark that its numbers were read with, and those of columns that have another, by index.
    encoding, separator
        Of a delimited text.
    """

    file: str
    sheet: str
    kind: str | None = None
    skipped: str = ""
    match: SheetMatch | None = None
    rows: int = 0
    records: int = 0
    cells_filled: int = 0
    cells_read: int = 0
    cells_unread: int = 0
    merged: int = 0
    sections: tuple[tuple[int, str], ...] = ()
    notes: tuple[tuple[int, str], ...] = ()
    remarks: tuple[str, ...] = ()
    left_out: bool = False
    missed: bool = False
    turned: bool = False
    decimal: str = ""
    decimals: Mapping[int, str] = field(default_factory=dict)
    encoding: str = ""
    separator: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Lists:
    """Everything that a plant's lists say.

    Attributes
    ----------
    records
        Records by the name of their kind of sheet.
    problems
        The cells that could not be read.
    sheets
        What became of each sheet.
    plant
        The plant's data, with what was assumed.
    assumptions
        What was taken for granted while reading.
    files
        The files, as given.
    index_file
        The file that holds the index (the first, if several do).
    index_columns
        The fields that columns of the index fill.
    mapping_notes
        What a mapping that was given says and the lists do not, and what they have that it does not say.
    """

    records: Mapping[str, tuple[Any, ...]]
    problems: tuple[CellProblem, ...]
    sheets: tuple[SheetReport, ...]
    plant: PlantData
    assumptions: tuple[str, ...] = ()
    files: tuple[str, ...] = ()
    index_file: str = ""
    index_columns: frozenset[str] = frozenset()
    mapping_notes: tuple[MappingNote, ...] = ()


_LEFT_OUT = (
    "cover",
    "revision",
    "rev history",
    "history",
    "legend",
    "note",
    "notes",
    "readme",
    "contents",
    "index of",
    "abbreviation",
    "title",
    "deckblatt",
    "legende",
    "aenderung",
    "lookup",
    "dropdown",
    "lists",
    "validation",
)


def records_of_sheets(
    sheets: Sequence[Sheet],
    kinds: Sequence[SheetKind],
    *,
    stated: Sequence[PlantEntry] = (),
    files: Sequence[str] = (),
    mapping: ListMapping | None = None,
    thresholds: Callable[[], Sequence[str]] | None = None,
    on_progress: Callable[[str], None] | None = None,
) -> Lists:
    """Understand sheets that are read: their kinds first, then the plant's data, then their rows.

    Parameters
    ----------
    sheets
        The sheets of all files.
    kinds
        The kinds of sheet that are known.
    stated
        What a plant.toml says.
    files
        The files' names, for the report.
    mapping
        How earlier lists were understood, and are to be again; None to find out.
    thresholds
        Called, where the plant states a threshold, for the names of all that there are; None: any name is taken.
    on_progress
        Called with a line for each sheet.

    Raises
    ------
    NoTags
        No sheet holds tags.
    """
    tell = on_progress or (lambda line: None)
    sheets = _turned(sheets, kinds, mapping)
    found_sheets = find_sheets(mapping, sheets) if mapping is not None else None
    mapped = found_sheets.mapped if found_sheets is not None else (None,) * len(sheets)
    notes: list[MappingNote] = list(found_sheets.notes) if found_sheets is not None else []
    matches = _match(sheets, kinds, mapped, notes)
    if not any(match is not None and match.kind.key == (("tag",),) for match in matches):
        raise NoTags(_no_tags(sheets, matches, files))
    entries: list[PlantEntry] = []
    for sheet, match in zip(sheets, matches, strict=True):
        if match is not None and _is_plant(match.kind):
            entries.extend(read_plant_sheet(sheet, match))
    plant, row, plant_problems = plant_data([*entries, *stated], thresholds=thresholds)
    records: dict[str, list[Any]] = {}
    problems: list[CellProblem] = list(plant_problems)
    assumptions: dict[str, None] = dict.fromkeys(plant.assumptions)
    reports: list[SheetReport] = []
    columns: set[str] = set()
    index_file = ""
    for sheet, match, told in zip(sheets, matches, mapped, strict=True):
        if match is None:
            reports.append(_left_out(sheet, told, kinds))
            continue
        if _is_plant(match.kind):
            failed, count = _failed_cells(sheet)
            problems.extend(failed)
            reports.append(_plant_report(sheet, match, entries, plant_problems, count))
            continue
        tell(f"understanding {sheet.file}, sheet {sheet.name}: {match.kind.name}")
        found = read_records(sheet, match, plant=plant)
        records.setdefault(match.kind.name, []).extend(found.records)
        problems.extend(found.problems)
        for each in found.assumptions:
            assumptions.setdefault(each if len(sheets) == 1 else f"{match.kind.name}: {each}")
        for note in match.notes:
            assumptions.setdefault(f"{sheet.name}: {note}")
        reports.append(_report(sheet, match, found))
        if match.kind.key == (("tag",),):
            index_file = index_file or sheet.file
            columns |= match.fields | set(match.columns)
    indexes = [
        (sheet, match)
        for sheet, match in zip(sheets, matches, strict=True)
        if match is not None and match.kind.key == (("tag",),)
    ]
    if not any(records.get(match.kind.name) for _, match in indexes):
        said = ", ".join(f"{PurePath(sheet.file).name}, sheet '{sheet.name}'" for sheet, _ in indexes[:12])
        raise NoTags(f"no row stands under the headings of any list with tags ({said})")
    if row is not None:
        records["Plant"] = [row]
    _describe_barriers(records)
    return Lists(
        records=MappingProxyType({name: tuple(each) for name, each in records.items()}),
        problems=tuple(problems),
        sheets=tuple(reports),
        plant=plant,
        assumptions=tuple(assumptions),
        files=tuple(files) or tuple(dict.fromkeys(sheet.file for sheet in sheets)),
        index_file=PurePath(index_file).name,
        index_columns=frozenset(columns),
        mapping_notes=tuple(notes),
    )


def _describe_barriers(records: dict[str, list[Any]]) -> None:
    """Make entries of the catalogue of the barriers that rows of the index describe beside their instrument."""
    name = "Instruments" if records.get("Instruments") else "IO list"
    rows, barriers = barriers_of_rows(records.get(name, ()), records.get("Device types", ()))
    if barriers:
        records[name] = list(rows)
        records.setdefault("Device types", []).extend(barriers)


def _turned(sheets: Sequence[Sheet], kinds: Sequence[SheetKind], mapping: ListMapping | None) -> list[Sheet]:
    """Turn the sheets whose tags stand side by side, but for those that a mapping reads as they are."""
    told = find_sheets(mapping, sheets).mapped if mapping is not None else (None,) * len(sheets)
    often = Counter((each.file, each.sheet) for each in mapping.sheets) if mapping is not None else Counter()
    return [
        each
        for sheet, mapped in zip(sheets, told, strict=True)
        for each in (
            (sheet,)
            if mapped is not None and mapped.kind and not mapped.turned and often[mapped.file, mapped.sheet] == 1
            else _as_rows(sheet, kinds)
        )
    ]


def _as_rows(sheet: Sheet, kinds: Sequence[SheetKind]) -> tuple[Sheet, ...]:
    """Return a sheet as lists stand, a row for each tag, in as many as it has lists."""
    turned = turned_where_tags_stand_across(sheet, kinds)
    return turned if turned[0].turned else parted_where_tables_stand_side_by_side(sheet, kinds)


def _is_plant(kind: SheetKind) -> bool:
    return "thresholds" in getattr(kind.record, "__dataclass_fields__", {})


def _match(
    sheets: Sequence[Sheet],
    kinds: Sequence[SheetKind],
    mapped: Sequence[MappedSheet | None],
    notes: list[MappingNote],
) -> list[SheetMatch | None]:
    """Match all sheets: those that list codes first, so that a column of such codes is known for one."""
    told = {number: each for number, each in enumerate(mapped) if each is not None and each.kind}
    found: list[SheetMatch | None] = []
    of_sheet: dict[int, tuple[MappingNote, ...]] = {}

    def take(number: int, codes: frozenset[str] = frozenset()) -> SheetMatch | None:
        each = told.get(number)
        if each is None:
            return match_sheet(sheets[number], kinds, codes=codes) if codes else match_sheet(sheets[number], kinds)
        if each.kind == LEAVE_OUT:
            return None
        match, of_sheet[number] = match_by_mapping(sheets[number], each, kinds, codes=codes)
        return match

    found.extend(take(number) for number in range(len(sheets)))
    codes: set[str] = set()
    for sheet, match in zip(sheets, found, strict=True):
        if match is not None and match.kind.key != (("tag",),) and "code" in match.columns:
            index = match.columns["code"].index
            codes.update(folded(as_text(row[index])) for row in sheet.rows[match.first_row :] if row[index] is not None)
    if codes:
        known = frozenset(codes)
        for number, match in enumerate(found):
            if match is not None and match.kind.key == (("tag",),):
                found[number] = take(number, known)
    index_kinds = [kind for kind in kinds if kind.key == (("tag",),)]
    if index_kinds and not any(match is not None and match.kind is index_kinds[0] for match in found):
        # The only list with tags is the index, whatever it is called: the I/O list first, then an alarm list.
        others = [
            (number, match)
            for number, match in enumerate(found)
            if match is not None and match.kind.record is index_kinds[0].record
        ]
        others.sort(key=lambda each: [kind.name for kind in kinds].index(each[1].kind.name))
        chosen = others[0][1].kind if others else None
        for number, match in others:
            if match.kind is not chosen:
                continue
            if number in told:
                told[number] = replace(told[number], kind=index_kinds[0].name)
                again = take(number, frozenset(codes))
            else:
                again = match_sheet(sheets[number], kinds, forced=index_kinds[0], codes=frozenset(codes))
            if again is not None:
                found[number] = again
    for number in sorted(of_sheet):
        notes.extend(of_sheet[number])
    if any(each is not None for each in mapped):
        notes.extend(_new_sheets(sheets, mapped, found))
    return found


def _new_sheets(
    sheets: Sequence[Sheet], mapped: Sequence[MappedSheet | None], found: Sequence[SheetMatch | None]
) -> Iterator[MappingNote]:
    """Tell the sheets that a mapping does not know, and what they were taken for."""
    for sheet, told, match in zip(sheets, mapped, found, strict=True):
        if told is None and (match is not None or sheet.cells_filled):
            what = f"taken for {match.kind.name}" if match is not None else "not read"
            yield MappingNote(file=PurePath(sheet.file).name, sheet=sheet.name, text=f"is not in the mapping: {what}")


def _no_tags(sheets: Sequence[Sheet], matches: Sequence[SheetMatch | None], files: Sequence[str]) -> str:
    if not sheets:
        return f"no sheet was found in {', '.join(PurePath(file).name for file in files)}"
    said = "; ".join(
        f"{PurePath(sheet.file).name}, sheet '{sheet.name}': "
        + (
            f"taken for {match.kind.name}"
            if match
            else "no heading found"
            if any(any(c is not None for c in r) for r in sheet.rows)
            else "empty"
        )
        for sheet, match in list(zip(sheets, matches, strict=True))[:12]
    )
    return f"no list with tags was found: a sheet needs a heading such as 'Tag' or 'Tag No.' over its tags ({said})"


def _left_out(sheet: Sheet, told: MappedSheet | None, kinds: Sequence[SheetKind]) -> SheetReport:
    name = folded(sheet.name)
    missed = False
    if told is not None and told.kind == LEAVE_OUT:
        why = told.why or "the mapping leaves it out"
    elif not any(any(cell is not None for cell in row) for row in sheet.rows):
        why = "empty"
    elif any(word in name for word in _LEFT_OUT):
        why = f"a sheet named {sheet.name} holds no list"
    elif labels := columns_of_labels(sheet, kinds):
        missed = True
        columns = " and ".join(map(column_letters, labels))
        why = (
            f"a form with the data of one tag, and its names stand in columns {columns}: put them all in one"
            " column and their values in the next, or the tag in a row of a list"
        )
    else:
        missed = True
        why = "no heading of a known list was found"
    return SheetReport(
        file=sheet.file,
        sheet=sheet.name,
        skipped=why,
        cells_filled=sheet.cells_filled,
        remarks=(*sheet.notes, *_drawn_and_said(sheet)),
        left_out=told is not None and told.kind == LEAVE_OUT,
        missed=missed,
        encoding=sheet.encoding,
        separator=sheet.separator,
    )


def _drawn_and_said(sheet: Sheet) -> list[str]:
    """Tell what belongs to a sheet of which no row is read and stands in none of its cells."""
    said = [f"{len(sheet.comments)} comments are not read"] if sheet.comments else []
    return said + ([f"{sheet.shapes} drawn shapes are not read"] if sheet.shapes else [])


def _plant_report(
    sheet: Sheet, match: SheetMatch, entries: Sequence[PlantEntry], problems: Sequence[CellProblem], failed: int
) -> SheetReport:
    cells = {each.cell for each in problems if (each.cell.file, each.cell.sheet) == (sheet.file, sheet.name)}
    return SheetReport(
        file=sheet.file,
        sheet=sheet.name,
        kind=match.kind.name,
        match=match,
        rows=1,
        records=1,
        cells_filled=sheet.cells_filled,
        cells_read=sheet.cells_filled - len(cells) - failed,
        cells_unread=len(cells) + failed,
        notes=_beside_the_plant_s_data(sheet, match, entries),
        remarks=(*sheet.notes, *_drawn_and_said(sheet)),
        encoding=sheet.encoding,
        separator=sheet.separator,
    )


def _failed_cells(sheet: Sheet) -> tuple[tuple[CellProblem, ...], int]:
    """Return the cells of a Plant sheet that show an error, have no value or stand far away, and how many they are."""
    failed = [
        Unread(row, column, "", "", "", text, CellTrouble(reason=f"the cell shows {text}"))
        for (row, column), text in sheet.errors.items()
    ]
    failed += [
        Unread(row, column, "", "", "", "", CellTrouble(reason="a formula without a saved value"))
        for row, column in sheet.no_value
    ]
    return problems_of(sheet, failed, lambda column: 0)


def _beside_the_plant_s_data(
    sheet: Sheet, match: SheetMatch, entries: Sequence[PlantEntry]
) -> tuple[tuple[int, str], ...]:
    """Return what a Plant sheet says besides: lines with one cell, and cells behind the values."""
    own = {each.cell.row: each for each in entries if (each.cell.file, each.cell.sheet) == (sheet.file, sheet.name)}
    rows = range(len(sheet.rows)) if not match.header_rows else range(match.header_rows[0])
    notes: list[tuple[int, str]] = []
    for number in rows:
        filled = [as_text(cell).strip() for cell in sheet.rows[number] if cell is not None]
        entry = own.get(number + 1) if not match.header_rows else None
        if entry is not None:
            # The name, the value, and its unit.
            filled = [text for text in filled[2:] if text not in entry.text.split()]
        elif len(filled) == 2 and not match.header_rows:
            continue
        if filled:
            notes.append((number + 1, " | ".join(filled)))
    return tuple(notes)


def _report(sheet: Sheet, match: SheetMatch, found: SheetRecords) -> SheetReport:
    remarks = list(sheet.notes)
    if not sheet.visible:
        remarks.append("hidden in the workbook; read like the others")
    if sheet.hidden_rows or sheet.hidden_columns:
        remarks.append(f"hidden, and read like the others: {_hidden(sheet, match)}")
    if sheet.shapes:
        remarks.append(
            f"{sheet.shapes} drawn shapes (clouds, triangles, pictures) are not read: which rows they mark is not known"
        )
    remarks.extend(_coloured(sheet, found))
    if found.merged:
        remarks.append(f"{found.merged} cells filled from merged cells")
    return SheetReport(
        file=sheet.file,
        sheet=sheet.name,
        kind=match.kind.name,
        match=match,
        rows=found.rows,
        records=len(found.records),
        cells_filled=found.cells_filled,
        cells_read=found.cells_read,
        cells_unread=found.cells_unread,
        merged=found.merged,
        sections=found.sections,
        notes=found.notes,
        remarks=tuple(remarks),
        decimal=found.decimal,
        decimals=found.decimals,
        turned=sheet.turned,
        encoding=sheet.encoding,
        separator=sheet.separator,
    )


def _coloured(sheet: Sheet, found: SheetRecords) -> list[str]:
    """Tell which rows are filled with a colour that the rest has not, and with which tags.

    Bands of one colour, on every second row or on most, mark nothing.
    """
    tags = {each.origin.row - 1: getattr(each, "tag", None) or "" for each in found.records}
    by_colour: dict[str, list[int]] = {}
    for row, colour in sorted(sheet.coloured_rows.items()):
        if row in tags:
            by_colour.setdefault(colour, []).append(row)
    said = []
    for colour, rows in sorted(by_colour.items()):
        if len(rows) * 3 > len(tags) and len(rows) > 1:
            continue
        named = ", ".join(f"{row + 1} {tags[row]}".strip() for row in rows[:MOST_NAMED])
        more = f" and {len(rows) - MOST_NAMED} more" if len(rows) > MOST_NAMED else ""
        said.append(
            f"{len(rows)} row{'s' if len(rows) > 1 else ''} filled with the colour {colour}, which may mean a hold, a"
            f" change or another's supply, and is not applied: {named}{more}"
        )
    return said


MOST_NAMED = 20
"""Runs of hidden rows, or hidden columns, that a remark names; more of them are counted."""


def _hidden(sheet: Sheet, match: SheetMatch) -> str:
    """Name the hidden rows and columns of a sheet, as its own program does."""
    rows = [(row, "") for row in sorted(sheet.hidden_rows)]
    columns = [(column, match.headings.get(column, "")) for column in sorted(sheet.hidden_columns)]
    lines, across = (columns, rows) if sheet.turned else (rows, columns)
    said: list[str] = []
    runs: list[list[int]] = []
    for line, _ in lines:
        if runs and runs[-1][-1] == line - 1:
            runs[-1].append(line)
        else:
            runs.append([line])
    if runs:
        named = [f"{run[0] + 1}-{run[-1] + 1}" if len(run) > 1 else f"{run[0] + 1}" for run in runs]
        said.append(f"row{'s' if len(lines) > 1 else ''} {_first_of(named)}")
    if across:
        named = [
            f"{column_letters(column)} ({heading})" if heading else column_letters(column) for column, heading in across
        ]
        said.append(f"column{'s' if len(across) > 1 else ''} {_first_of(named)}")
    return "; ".join(said)


def _first_of(named: Sequence[str]) -> str:
    more = len(named) - MOST_NAMED
    return ", ".join(named[:MOST_NAMED]) + (f" and {more} more" if more > 0 else "")
