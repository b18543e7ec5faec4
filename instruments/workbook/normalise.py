"""The cells of a matched sheet made into records: values with units, tags, words, blanks with their reasons, unread cells."""

from __future__ import annotations

import dataclasses
import re
from collections import Counter, defaultdict
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType
from typing import Any, Final, NamedTuple

from instruments.column import Column, Reads, SheetKind
from instruments.kind import Kind, dimension_allowed, kind_from_words
from instruments.number import CellTrouble, decimal_convention, read_number
from instruments.origin import Cell, Origin, Place
from instruments.plant_data import PlantData
from instruments.quantity import Quantity, read_quantity, read_range, read_triplet
from instruments.record import DeviceType
from instruments.tag import (
    DEFAULT,
    TagProfile,
    best_profile,
    normalise_tag,
    plant_profile,
    read_tag,
    split_note,
    tags_of_cell,
)
from instruments.unit import Unit, commensurable, read_unit
from instruments.workbook.column_unit import read_plain_number
from instruments.workbook.headings import ColumnMatch, SheetMatch
from instruments.workbook.number_format import as_text, format_kind
from instruments.workbook.problem import CellProblem
from instruments.workbook.rows import RowsOfSheet, sort_rows
from instruments.workbook.sheet import Sheet, Value
from instruments.workbook.words import Words, folded, is_ditto, not_live, placeholder, yes_or_no

__all__ = ["SheetRecords", "read_records"]


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetRecords:
    """The records of one sheet, and what became of each of its cells.

    Attributes
    ----------
    records, problems
        What was read, and the cells that could not be.
    sections, notes
        Section rows, and title lines, notes and legends: row counted from 1, and text.
    assumptions
        What was taken for granted, once a column.
    cells_filled, cells_read, cells_unread
        Cells with something in them; `cells_read` are those of records, headings, sections and notes.
    merged
        Blank cells that a merged cell filled.
    rows
        Rows that became records; one row with several tags becomes several records.
    """

    records: tuple[Any, ...]
    problems: tuple[CellProblem, ...]
    sections: tuple[tuple[int, str], ...] = ()
    notes: tuple[tuple[int, str], ...] = ()
    assumptions: tuple[str, ...] = ()
    cells_filled: int = 0
    cells_read: int = 0
    cells_unread: int = 0
    merged: int = 0
    rows: int = 0


def read_records(
    sheet: Sheet, match: SheetMatch, *, plant: PlantData | None = None, decimal: str | None = None
) -> SheetRecords:
    """Read the rows of a matched sheet.

    Parameters
    ----------
    sheet
        The sheet as read.
    match
        How its heading was understood.
    plant
        The plant's data: its tag pattern says how tags are written.
    decimal
        The decimal mark of the sheet; None to find out from its cells.
    """
    return _SheetReader(sheet, match, plant or PlantData(), decimal).read()


class _Outcome(NamedTuple):
    """What one cell says."""

    value: Any = None
    blank: str | None = None
    trouble: CellTrouble | None = None
    unitless: bool = False
    ditto: bool = False
    aside: bool = False  # no value of the field, but kept beside it under the heading


def trouble(reason: str, readings: Sequence[str] = ()) -> CellTrouble:
    """Make the trouble of a cell."""
    return CellTrouble(reason=reason, readings=tuple(readings))


_NOTHING: Final = _Outcome()
_DITTO: Final = _Outcome(ditto=True)
_UNITLESS: Final = _Outcome(unitless=True)

# Fields in which a word that elsewhere holds a place is a value.
_KEPT: Final[Mapping[str, frozenset[str]]] = {
    "scope": frozenset({"by vendor"}),
    "maker": frozenset(),
    "status": frozenset({"on hold", "to be defined"}),
    "hold": frozenset({"on hold"}),
    "area_classification": frozenset({"not applicable"}),
    "system": frozenset({"by vendor"}),
    "x_accepted": frozenset(),
}
_DASHES: Final = frozenset({"-", "--", "---", "----", ".", "..", "_", "__", "- -", "/", "//", "", "n.v.t."})
_NO_DITTO: Final = frozenset({"io_type", "signal"})

# What a list of wiring separates by lines.
_LISTED: Final = frozenset({"terminals", "junction_box", "io_address", "line", "equipment", "cable", "pair", "from_terminal",
                            "to_terminal", "pid"})

# A copy of a row for a further tag of its cell does not share what one device alone can have.
_NOT_SHARED: Final = ("serial", "io_address", "terminals", "cable", "pair")

_SETTINGS: Final = frozenset({"setting_ll", "setting_l", "setting_h", "setting_hh", "trip", "set_pressure"})
_OPERATING: Final = frozenset({"operating_value_min", "operating_value_normal", "operating_value_max", "operating_values"})
_TWO_STATES: Final = re.compile(
    r"(?:bool(?:ean)?|binary|bin[aä]r|digital|discrete|logic(?:al)?|states?|on\s?[/-]\s?off|open(?:ed)?\s?[/-]\s?closed?|closed?\s?[/-]\s?open|"
    r"0\s?/\s?1|1\s?/\s?0|contact|run\s?[/-]\s?stop|start\s?[/-]\s?stop|ein\s?[/-]\s?aus|auf\s?[/-]\s?zu|status|true\s?/\s?false|no\s?/\s?nc|"
    r"alarm|trip|yes\s?/\s?no|normal\s?/\s?(?:alarm|trip|fault)|healthy\s?/\s?fault)",
    re.IGNORECASE,
)
_RELIEF: Final = frozenset({Kind.RELIEF_VALVE, Kind.RUPTURE_DISC, Kind.REGULATOR})
_RELIEF_LETTERS: Final = frozenset({"PSV", "PRV", "PVRV", "TSV", "PSE", "PRD", "BD", "TRV", "VRV", "PVSV", "PCV", "RV", "SV", "VSV", "PVV"})
_GENERAL_SETTING: Final = frozenset({"set_pressure", "trip"})

# Words that are matched generously: another text there says something else and is no mistake.
_GENEROUS: Final = frozenset({"location", "mounting", "system"})


class _BadUnit:
    """A unit cell that could not be read: what it speaks for has no value."""


_BAD: Final = _BadUnit()


class _States:
    """A unit cell that says that its row has two states and no unit."""


_STATES: Final = _States()
_UnitCell = Unit | _BadUnit | _States | None


class _SheetReader:
    def __init__(self, sheet: Sheet, match: SheetMatch, plant: PlantData, decimal: str | None) -> None:
        self.sheet = sheet
        self.match = match
        self.kind: SheetKind = match.kind
        self.rows: RowsOfSheet = sort_rows(sheet, match)
        self.numbers = self.rows.data
        self.count = len(self.numbers)
        self.row_cells = [sheet.rows[number] for number in self.numbers]
        self.record_fields = {each.name for each in dataclasses.fields(self.kind.record)}
        self.known = {column.field: column for column in self.kind.columns}
        self.values: dict[str, list[Any]] = {}
        self.blanks: dict[int, dict[str, str]] = defaultdict(dict)
        self.unread: dict[int, set[str]] = defaultdict(set)
        self.unitless: dict[int, dict[str, str]] = defaultdict(dict)
        self.other: dict[int, list[tuple[str, str]]] = defaultdict(list)
        self.troubles: list[tuple[int, int, str, str, CellTrouble]] = []  # row, column, field, text, trouble
        self.places: dict[str, tuple[int, ...]] = {}
        self.assumptions: dict[str, None] = {}
        self.filled: dict[int, int] = {}
        self.at = {number: position for position, number in enumerate(self.numbers)}
        self.instead: dict[int, dict[int, Value]] = defaultdict(dict)
        for number, cells in self.rows.instead.items():
            position = self.at.get(number)
            if position is not None:
                for index, value in cells.items():
                    self.instead[index][position] = value
        self.formats: dict[int, dict[int, str]] = defaultdict(dict)
        for (number, index), code in sheet.number_formats.items():
            position = self.at.get(number)
            if position is not None:
                self.formats[index][position] = code
        self.decimal = decimal
        self.plant = plant
        self._columns: dict[int, list[Value]] = {}
        self.letters: list[str] = []
        self.status: list[str | None] = [None] * self.count
        self.tags: list[tuple[str, ...]] = []

    # --- cells ------------------------------------------------------------------------------------------------------

    def cells(self, index: int) -> list[Value]:
        """Return the cells of a column, one a record's row: merged cells filled, numbers with a look of their own as text."""
        found = self._columns.get(index)
        if found is None:
            found = [row[index] for row in self.row_cells] if index < self.sheet.width else [None] * self.count
            if bool in set(map(type, found)):
                found = [str(cell).upper() if cell is True or cell is False else cell for cell in found]
            for position, value in self.instead.get(index, {}).items():
                found[position] = value
            for position, code in self.formats.get(index, {}).items():
                cell = found[position]
                if isinstance(cell, float) and format_kind(code) != "date":
                    found[position] = as_text(cell, code)
            self._columns[index] = found
        return found

    def convention(self, index: int) -> str | None:
        """Return the decimal mark of a column, else of the sheet."""
        if self.decimal is not None:
            return self.decimal
        texts = {cell for cell in self.cells(index) if type(cell) is str}
        return (decimal_convention(texts) if texts else None) or self.sheet_convention()

    def sheet_convention(self) -> str | None:
        if not hasattr(self, "_sheet_convention"):
            texts: set[str] = set()
            for each in self.match.columns.values():
                if each.column.reads in (Reads.QUANTITY, Reads.NUMBER, Reads.RANGE, Reads.TRIPLET):
                    texts.update(cell for cell in self.cells(each.index) if type(cell) is str)
            self._sheet_convention = decimal_convention(texts)
        return self._sheet_convention

    # --- the whole sheet --------------------------------------------------------------------------------------------

    def read(self) -> SheetRecords:
        matches = self.match.columns
        self._read_tags()
        self._errors()
        for name, match in matches.items():
            if match.column.reads is Reads.UNIT:
                self._read_units(name, match)
        beside = {
            match.unit_index: self._units_of(match.unit_index, match.column)
            for match in matches.values()
            if match.unit_index is not None
        }
        later: list[tuple[str, ColumnMatch]] = []
        for name, match in matches.items():
            reads = match.column.reads
            if reads in (Reads.TAG, Reads.UNIT):
                continue
            if name in _SETTINGS or name in _OPERATING or reads is Reads.TRIPLET:
                later.append((name, match))
            elif reads in (Reads.QUANTITY, Reads.RANGE):
                self._read_quantities(name, match, self._units(match, beside))
            elif reads is Reads.NUMBER:
                self._read_numbers(name, match, beside)
            else:
                self._read_words(name, match)
        self._share_units("lrv", "urv")
        self._share_units("system_lrv", "system_urv")
        self._share_units("lrl", "url")
        range_units = self._settle_unit("range_unit", "lrv", "urv")
        system_units = self._settle_unit("system_unit", "system_lrv", "system_urv")
        base = [
            two if isinstance(two, Unit) and (not isinstance(one, Unit) or not commensurable(one, two)) else one
            for one, two in zip(range_units, system_units, strict=True)
        ]
        for name, match in later:
            if name in _GENERAL_SETTING and self.letters:
                self._read_general_setting(name, match, base, beside)
            elif name in _SETTINGS or name in _OPERATING:
                self._read_quantities(name, match, self._units(match, beside, base))
            else:
                self._read_quantities(name, match, self._units(match, beside))
        self._take_status()
        self._keep_unknown()
        return self._result()

    # --- tags -------------------------------------------------------------------------------------------------------

    def _read_tags(self) -> None:
        match = self.match.columns.get("tag")
        if match is None or match.column.reads is not Reads.TAG:
            return
        cells = self.cells(match.index)
        texts = [cell for cell in dict.fromkeys(cells) if isinstance(cell, str)]
        profile = self._profile(texts)
        known: dict[Value, tuple[_Outcome, str, str | None, str]] = {}
        tags: list[Any] = []
        notes: list[str] = []
        written: list[str | None] = []
        cell_texts: list[str | None] = []
        last: tuple[tuple[str, ...], str] = ((), "")
        for position, cell in enumerate(cells):
            if cell is None:
                tags.append(None)
                notes.append("")
                written.append(None)
                cell_texts.append(None)
                self.tags.append(())
                self.letters.append("")
                continue
            found = known.get(cell)
            if found is None:
                found = known[cell] = self._read_tag(cell, profile)
            outcome, note, status, letters = found
            several: tuple[str, ...] = outcome.value or ()
            if outcome.ditto:
                several, letters = last
            elif several:
                last = (several, letters)
            if outcome.blank:
                self.blanks[position]["tag"] = outcome.blank
            if outcome.trouble:
                self._trouble(position, match.index, "tag", as_text(cell), outcome.trouble)
            if status:
                self.status[position] = status
            tags.append(several[0] if several else None)
            notes.append(note)
            text = as_text(cell).strip()
            written.append(text if several else None)
            cell_texts.append(text if len(several) > 1 else None)
            self.tags.append(several)
            self.letters.append(letters)
        self.values["tag"] = tags
        self.values["tag_written"] = written
        if any(len(several) > 1 for several in self.tags):
            self.values["tag_cell"] = cell_texts
        self.tag_notes = notes
        self._place("tag", match)
        self.places["tag_written"] = self.places["tag_cell"] = (match.index,)

    def _profile(self, texts: Sequence[str]) -> TagProfile:
        try:
            stated = plant_profile(self.plant.tag_pattern)
        except ValueError:
            stated = None
        return stated or (best_profile(texts) if texts else DEFAULT)

    def _read_tag(self, cell: Value, profile: TagProfile) -> tuple[_Outcome, str, str | None, str]:
        """Return the tags of a cell, the note beside them, the row's status if the cell says it, the tag's letters."""
        if not isinstance(cell, str | float):
            text = as_text(cell)
            readings = [text[5:10]] if re.match(r"\d{4}-\d\d-\d\d", text) else []
            return (
                _Outcome(trouble=trouble("the spreadsheet made a date or time of it", tuple(readings))), "", None, ""
            )
        text = as_text(cell).strip()
        status = not_live(text)
        if status and not any(sign.isdigit() for sign in text):
            return _Outcome(blank=status), text, status, ""
        reason = placeholder(text)
        if reason:
            return _Outcome(blank=reason), "", None, ""
        if is_ditto(text):
            return _DITTO, "", None, ""
        tag, note = split_note(" ".join(text.split("\n")) if "\n" in text and profile.parts(normalise_tag(text)) else text, profile=profile)
        tag = normalise_tag(tag)
        several = tags_of_cell(tag, profile=profile) or ((tag,) if tag else ())
        if note:
            status = status or not_live(note, status_column=True)
        reading = read_tag(several[0], profile=profile) if several else None
        return _Outcome(value=several), note, status, reading.letters if reading is not None else ""

    # --- troubles ---------------------------------------------------------------------------------------------------

    def _trouble(self, position: int, index: int, name: str, text: str, trouble: CellTrouble) -> None:
        self.unread[position].add(name)
        self.troubles.append((position, index, name, text, trouble))

    def _errors(self) -> None:
        fields = {}
        for name, match in self.match.columns.items():
            fields[match.index] = name
            for index, _ in match.parts:
                fields.setdefault(index, name)
        self.loose: list[tuple[int, int, str, str]] = []  # row, column, text, reason of cells that belong to no record
        failed = [(place, text, f"the cell shows {text}") for place, text in self.sheet.errors.items()]
        failed += [
            (place, "", "a formula without a saved value: open the list in a spreadsheet program and save it")
            for place in self.sheet.no_value
        ]
        for (number, index), text, reason in sorted(failed):
            position = self.at.get(number)
            if position is None:
                self.loose.append((number, index, text, reason))
                continue
            name = fields.get(index, "")
            column = self.known.get(name)
            for each in column.into if column is not None and column.into else (name,):
                self.unread[position].add(each)
            self.troubles.append((position, index, name, text, CellTrouble(reason)))

    # --- units ------------------------------------------------------------------------------------------------------

    def _read_units(self, name: str, match: ColumnMatch) -> None:
        units = self._units_of(match.index, match.column)
        self.values[name] = [unit if isinstance(unit, Unit) else None for unit in units]
        self._unit_cells[name] = units
        self._place(name, match)

    @property
    def _unit_cells(self) -> dict[str, list[_UnitCell]]:
        if not hasattr(self, "_unit_cells_read"):
            self._unit_cells_read: dict[str, list[_UnitCell]] = {}
        return self._unit_cells_read

    def _units_of(self, index: int, column: Column) -> list[_UnitCell]:
        """Read a column of units."""
        name = column.field if column.reads is Reads.UNIT else f"unit of {column.title}"
        cells = self.cells(index)
        known: dict[Value, _Outcome] = {}
        found: list[_UnitCell] = []
        for position, cell in enumerate(cells):
            if cell is None:
                found.append(_BAD if name in self.unread[position] else None) if position in self.unread else found.append(None)
                continue
            outcome = known.get(cell)
            if outcome is None:
                outcome = known[cell] = self._read_unit(cell)
            letters = self.letters[position] if self.letters else ""
            if outcome.ditto or isinstance(outcome.value, Unit) and letters and self._is_bare(cell):
                outcome = self._bare_unit(cell, outcome, position, letters, found)
            if outcome.blank:
                self.blanks[position][name] = outcome.blank
            if outcome.trouble:
                self._trouble(position, index, name, as_text(cell), outcome.trouble)
                found.append(_BAD)
            else:
                found.append(outcome.value)
        return found

    @staticmethod
    def _read_unit(cell: Value) -> _Outcome:
        text = as_text(cell).strip()
        if is_ditto(text):
            return _DITTO
        unit = read_unit(text)
        if unit is not None:
            return _Outcome(value=unit)
        bracketed = re.fullmatch(r"[\[(]\s?(.*?)\s?[\])]", text)
        if bracketed and (unit := read_unit(bracketed[1])) is not None:
            return _Outcome(value=unit)
        if _TWO_STATES.fullmatch(text):
            return _Outcome(value=_STATES)
        reason = placeholder(text)
        if reason:
            return _Outcome(blank=reason)
        pieces = [piece.strip() for piece in re.split(r"[/;,|\n]|\bor\b", text) if piece.strip()]
        units = [each for piece in pieces if (each := read_unit(piece)) is not None]
        if len(units) > 1 and len(units) == len(pieces):
            if len(set(units)) == 1:
                return _Outcome(value=units[0])
            return _Outcome(trouble=trouble(f"'{text}' holds several units", tuple(map(str, units))))
        return _Outcome(trouble=trouble(f"unit '{text}' is not known"))

    @staticmethod
    def _is_bare(cell: Value) -> bool:
        return isinstance(cell, str) and len(cell.strip(" .()[]'")) == 1 and cell.strip() not in ("%", "#")

    def _bare_unit(
        self, cell: Value, outcome: _Outcome, position: int, letters: str, above: Sequence[_UnitCell]
    ) -> _Outcome:
        """Tell a ditto mark from the inch sign, and a bare letter from what the tag cannot be measured in."""
        text = as_text(cell).strip()
        before = next((unit for unit in reversed(above) if unit is not None), None) if outcome.ditto else None
        if not outcome.ditto:
            if dimension_allowed(letters, outcome.value.kind) is False:
                return _Outcome(
                    trouble=trouble(
                        f"'{text}' alone may be {outcome.value}, which the tag does not measure in, or stand for another unit",
                        (str(outcome.value), f"a unit of {letters}"),
                    )
                )
            return outcome
        if text not in ('"', "''", "″", "”"):
            return _Outcome(value=before)
        inch = read_unit("inch")
        row = self.row_cells[position]
        repeats = sum(isinstance(each, str) and is_ditto(each) for each in row)
        if before is inch or repeats > 1:
            return _Outcome(value=before)
        if before is None or letters[:1] in ("L", "Z", "V") and dimension_allowed(letters, "length"):
            return _Outcome(value=inch) if before is None or isinstance(before, Unit) and before.kind == "length" else _Outcome(
                trouble=trouble(f"'{text}' may be inch or repeat the unit above", ("inch", str(before)))
            )
        return _Outcome(value=before)

    def _units(
        self,
        match: ColumnMatch,
        beside: Mapping[int | None, list[_UnitCell]],
        base: Sequence[_UnitCell] | None = None,
    ) -> list[_UnitCell]:
        """Return the unit that each row gives a column: its neighbour's, its unit column's, the heading's, the range's."""
        column = match.column
        lists: list[list[_UnitCell]] = []
        if match.unit_index is not None:
            lists.append(beside[match.unit_index])
        for name in column.unit_from:
            if name in self._unit_cells and not (base is not None and name == "range_unit"):
                lists.append(self._unit_cells[name])
        heading = match.unit
        if heading is None and match.unit_text and column.reads is not Reads.NUMBER:
            heading = read_unit(match.unit_text)
        if base is None and not lists:
            return [heading] * self.count
        found: list[_UnitCell] = []
        for position in range(self.count):
            unit: _UnitCell = None
            for each in lists:
                unit = each[position]
                if unit is not None:
                    break
            if unit is None:
                unit = heading
            if unit is None and base is not None:
                unit = base[position]
                if isinstance(unit, Unit) and column.kinds and unit.kind not in column.kinds:
                    unit = None
            found.append(unit)
        return found

    def _settle_unit(self, name: str, low: str, high: str) -> list[_UnitCell]:
        """Return the unit of each row's range: its ends', else its unit column's; and fill the unit's field with it."""
        stated = self._unit_cells.get(name)
        ends = [self.values[each] for each in (high, low) if each in self.values]
        if not ends and stated is None:
            return [None] * self.count
        found: list[_UnitCell] = list(stated) if stated is not None else [None] * self.count
        for values in ends:
            for position, value in enumerate(values):
                if value is not None and (not isinstance(found[position], Unit)):
                    found[position] = value.unit
        if name in self.record_fields:
            self.values[name] = [unit if isinstance(unit, Unit) else None for unit in found]
            if name not in self.places:
                self.places[name] = self.places.get(high) or self.places.get(low) or ()
        return found

    def _share_units(self, low: str, high: str) -> None:
        """Let an end of a range without a unit take the other's."""
        if low not in self.values or high not in self.values:
            return
        for one, two in ((low, high), (high, low)):
            values, others = self.values[one], self.values[two]
            for position in [each for each, fields in self.unitless.items() if one in fields]:
                other = others[position]
                if isinstance(other, Quantity) and other.unit is not None:
                    text = self.unitless[position].pop(one)
                    again = read_quantity(text, unit=other.unit, decimal=self.sheet_convention() or ".")
                    if isinstance(again, Quantity):
                        values[position] = again

    # --- columns of values ------------------------------------------------------------------------------------------

    def _place(self, name: str, match: ColumnMatch) -> None:
        indexes = (match.index, *(index for index, _ in match.parts))
        for each in match.column.into or (name,):
            self.places[each] = (*self.places.get(each, ()), *indexes) if each in self.places else indexes
        if match.column.into:
            self.places.setdefault(name, indexes)

    def _store(self, name: str, values: list[Any]) -> None:
        """Keep a column's values; where another column filled the field already, it fills only its blanks."""
        before = self.values.get(name)
        if before is None:
            self.values[name] = values
        else:
            self.values[name] = [one if one is not None else two for one, two in zip(before, values, strict=True)]

    def _run(
        self, name: str, index: int, read: Callable[[Value], _Outcome], targets: Sequence[str] = ()
    ) -> list[Any]:
        """Read the cells of a column, each different one once."""
        known: dict[Value, _Outcome] = {None: _NOTHING}
        found: list[Any] = []
        cells = self.cells(index)
        fields = targets or (name,)
        last = _NOTHING
        for position, cell in enumerate(cells):
            outcome = known.get(cell)
            if outcome is None:
                outcome = known[cell] = read(cell)
            if outcome.ditto:
                outcome = last
            elif cell is not None:
                last = outcome
            found.append(outcome.value)
            if outcome is not _NOTHING and outcome.value is None:
                self._remark(position, index, name, fields, as_text(cell), outcome)
        return found

    def _remark(
        self, position: int, index: int, name: str, fields: Sequence[str], text: str, outcome: _Outcome
    ) -> None:
        if outcome.blank:
            for each in fields:
                self.blanks[position].setdefault(each, outcome.blank)
        elif outcome.trouble is not None:
            self.unread[position].update(fields)
            self.troubles.append((position, index, name, text, outcome.trouble))
        elif outcome.unitless:
            for each in fields:
                self.unitless[position][each] = text.strip()
        elif outcome.aside:
            self.other[position].append((self._heading(index), text.strip()))

    def _heading(self, index: int) -> str:
        for match in self.match.columns.values():
            if match.index == index:
                return match.heading
        return ""

    def _blank_or(self, name: str, read: Callable[[str], _Outcome]) -> Callable[[Value], _Outcome]:
        """Wrap a reader of texts: placeholders, ditto marks and words that are values before they hold a place."""
        kept = _KEPT.get(name, frozenset())
        ditto = name not in _NO_DITTO

        def outcome(cell: Value) -> _Outcome:
            text = as_text(cell).strip()
            if ditto and is_ditto(text):
                return _DITTO
            reason = placeholder(text)
            if reason and (reason not in kept or folded(text) in _DASHES) and not (reason.startswith("hold") and "on hold" in kept):
                return _Outcome(blank=reason)
            return read(text)

        return outcome

    def _read_words(self, name: str, match: ColumnMatch) -> None:
        column = match.column
        reads = column.reads
        self._place(name, match)
        if reads is Reads.KIND:
            self._read_kinds(name, match)
            return
        if reads is Reads.TEXT and (match.parts or match.prefix):
            self._store(name, self._joined_texts(name, match))
            return
        if reads is Reads.TEXT:
            joint = ", " if name in _LISTED else " "

            def text_of(text: str) -> _Outcome:
                if "\n" in text or "\r" in text:
                    text = joint.join(piece.strip(" ,;") for piece in text.splitlines() if piece.strip(" ,;"))
                return _Outcome(value=" ".join(text.split()) or None)

            read = self._blank_or(name, text_of)
            if name == "remarks":
                read = self._remarks_reader(text_of)
        elif reads is Reads.WORD:
            words = Words(column.words)
            generous = name in _GENEROUS

            def word_of(text: str) -> _Outcome:
                found = words.find(text)
                if len(found) == 1:
                    return _Outcome(value=found[0])
                if generous and not found:
                    return _Outcome(aside=True)
                if generous:
                    return _Outcome(value=found[0])
                return _Outcome(
                    trouble=trouble(f"'{text}' is not one of: {', '.join(words.canonical)}", found or words.canonical[:4])
                )

            read = self._word_first(name, words, word_of)
        elif reads is Reads.YES_NO:

            def yes_of(text: str) -> _Outcome:
                said = _say(name, text)
                if said is None:
                    return _Outcome(trouble=trouble(f"'{text}' is neither yes nor no", ("yes", "no")))
                return _Outcome(value=said)

            read = self._yes_first(name, yes_of)
        else:
            read = self._blank_or(name, _count)
        values = self._run(name, match.index, read)
        if name == "location" and "place" in self.record_fields:
            self._free_places(match, values)
        self._store(name, values)

    def _remarks_reader(self, text_of: Callable[[str], _Outcome]) -> Callable[[Value], _Outcome]:
        def outcome(cell: Value) -> _Outcome:
            text = as_text(cell).strip()
            if folded(text) in _DASHES:
                return _Outcome(blank="not applicable")
            return _DITTO if is_ditto(text) else text_of(text)

        return outcome

    def _word_first(self, name: str, words: Words, word_of: Callable[[str], _Outcome]) -> Callable[[Value], _Outcome]:
        blank = self._blank_or(name, word_of)

        def outcome(cell: Value) -> _Outcome:
            text = as_text(cell).strip()
            # NO and NC are words in a contact column, none is one in a column of systems.
            if folded(text) not in _DASHES and len(found := words.find(text)) == 1:
                return _Outcome(value=found[0])
            return blank(cell)

        return outcome

    def _yes_first(self, name: str, yes_of: Callable[[str], _Outcome]) -> Callable[[Value], _Outcome]:
        blank = self._blank_or(name, yes_of)

        def outcome(cell: Value) -> _Outcome:
            text = as_text(cell).strip()
            if folded(text) not in _DASHES and (said := _say(name, text)) is not None:
                return _Outcome(value=said)
            return blank(cell)

        return outcome

    def _free_places(self, match: ColumnMatch, values: list[Any]) -> None:
        """A place that is no kind of location (Filter gallery) is kept as the place."""
        places: list[str | None] = [None] * self.count
        cells = self.cells(match.index)
        heading = match.heading
        for position, value in enumerate(values):
            cell = cells[position]
            if value is None and cell is not None and position in self.other:
                text = as_text(cell).strip()
                entry = (heading, text)
                if entry in self.other[position]:
                    self.other[position].remove(entry)
                    places[position] = " ".join(text.split())
        if any(places):
            self._store("place", places)
            self.places.setdefault("place", (match.index,))

    def _joined_texts(self, name: str, match: ColumnMatch) -> list[Any]:
        """Read a text that stands in several columns: Zone, gas group, temperature class."""
        pieces = [
            self._run(name, index, self._blank_or(name, lambda text: _Outcome(value=" ".join(text.split()) or None)))
            for index in (match.index, *(index for index, _ in match.parts))
        ]
        prefixes = (match.prefix, *(prefix for _, prefix in match.parts))
        joined: list[Any] = []
        for position, texts in enumerate(zip(*pieces, strict=True)):
            said = [
                _with_prefix(prefix, text) for prefix, text in zip(prefixes, texts, strict=True) if text
            ]
            joined.append(" ".join(said) or None)
            if said and position in self.blanks:
                self.blanks[position].pop(name, None)
        return joined

    def _read_kinds(self, name: str, match: ColumnMatch) -> None:
        has_text = "kind_written" in self.record_fields
        texts = self._run(
            name, match.index, self._blank_or(name, lambda text: _Outcome(value=" ".join(text.split()) or None))
        )
        known: dict[tuple[str, str], Kind | None] = {}
        kinds: list[Kind | None] = []
        for position, text in enumerate(texts):
            if text is None:
                kinds.append(None)
                continue
            key = (text, self.letters[position] if self.letters else "")
            if key not in known:
                known[key] = kind_from_words(text, letters=key[1])
                if known[key] is None and has_text:
                    self.assumptions.setdefault(f"kind '{text}' is not known: the kind is taken from the tag's letters")
            kind = known[key]
            if kind is None and not has_text:
                self._trouble(position, match.index, name, text, trouble(f"'{text}' is no kind of instrument that is known"))
            kinds.append(kind)
        self._store(name, kinds)
        if has_text:
            self._store("kind_written", texts)
            self.places["kind_written"] = (match.index,)

    def _read_numbers(self, name: str, match: ColumnMatch, beside: Mapping[int | None, list[_UnitCell]]) -> None:
        column = match.column
        unit = column.unit or ""
        decimal = self.convention(match.index)
        self._place(name, match)
        stated = match.unit_text or None
        if unit and stated is None and match.unit_index is None and any(cell is not None for cell in self.cells(match.index)):
            if unit == "m":
                self.assumptions.setdefault(f"{column.title} without unit read as {unit}")
        if match.unit_index is not None:
            self._store(name, self._numbers_with_units(name, match, unit, decimal))
            return

        def number(text: str) -> _Outcome:
            value = read_plain_number(text, unit, heading_unit=stated, decimal=decimal)
            return _Outcome(trouble=value) if isinstance(value, CellTrouble) else _Outcome(value=value)

        blank = self._blank_or(name, number)

        def read(cell: Value) -> _Outcome:
            if type(cell) is float:
                value = read_plain_number(cell, unit, heading_unit=stated, decimal=decimal)
                return _Outcome(trouble=value) if isinstance(value, CellTrouble) else _Outcome(value=value)
            return blank(cell)

        self._store(name, self._run(name, match.index, read))

    def _numbers_with_units(self, name: str, match: ColumnMatch, unit: str, decimal: str | None) -> list[Any]:
        assert match.unit_index is not None
        values: list[Any] = []
        for position, (cell, said) in enumerate(
            zip(self.cells(match.index), self.cells(match.unit_index), strict=True)
        ):
            if cell is None:
                values.append(None)
                continue
            text = as_text(cell).strip()
            reason = placeholder(text)
            if reason:
                self.blanks[position][name] = reason
                values.append(None)
                continue
            stated = as_text(said).strip() or None
            value = read_plain_number(
                cell, unit, heading_unit=None if stated and placeholder(stated) else stated, decimal=decimal
            )
            if isinstance(value, CellTrouble):
                self._trouble(position, match.index, name, text, value)
                values.append(None)
            else:
                values.append(value)
        return values

    # --- quantities -------------------------------------------------------------------------------------------------

    def _read_quantities(self, name: str, match: ColumnMatch, units: Sequence[_UnitCell]) -> None:
        column = match.column
        targets = column.into or (name,)
        self._place(name, match)
        columns = self._read_into(name, match, column, units)
        for target, values in zip(targets, columns, strict=True):
            own = self.known.get(target)
            if own is not None and own.reads is Reads.NUMBER:
                values = self._as_numbers(target, own, values)
            self._store(target, values)

    def _as_numbers(self, name: str, column: Column, values: list[Any]) -> list[Any]:
        unit = read_unit(column.unit or "")
        numbers: list[Any] = []
        for value in values:
            numbers.append(value if value is None or unit is None else float(f"{value.to(unit):.12g}"))
        return numbers

    def _read_into(
        self, name: str, match: ColumnMatch, column: Column, units: Sequence[_UnitCell]
    ) -> list[list[Any]]:
        reads = column.reads
        targets = column.into or (name,)
        width = len(targets)
        default = read_unit(column.unit) if column.unit else None
        decimal = self.convention(match.index)
        known: dict[tuple[Value, Any], _Outcome] = {}
        found: list[list[Any]] = [[] for _ in targets]
        cells = self.cells(match.index)
        last: tuple[Value, _UnitCell] | None = None
        single = width == 1
        first = found[0]
        used_default = False
        for position, cell in enumerate(cells):
            if cell is None:
                for each in found:
                    each.append(None)
                continue
            unit = units[position]
            key = (cell, unit)
            outcome = known.get(key)
            if outcome is None:
                outcome = known[key] = self._quantity(cell, unit, reads, column, decimal, default)
            if outcome.ditto:
                if last is None:
                    outcome = _Outcome(blank="ditto without a row above")
                else:
                    outcome = known[last]
            else:
                last = key
            value = outcome.value
            if value is not None:
                if single:
                    first.append(value)
                else:
                    for each, part in zip(found, value, strict=True):
                        each.append(part)
                if default is not None and unit is None:
                    used_default = True
                continue
            for each in found:
                each.append(None)
            if outcome.unitless and self._has_two_states(position, cell, name):
                outcome = _Outcome(blank="two states, no range")
            if outcome.unitless and outcome.trouble is not None:
                # The unit cell could not be read, and has its own problem.
                self.unread[position].update(targets)
                continue
            self._remark(position, match.index, name, targets, as_text(cell), outcome)
            if outcome.unitless and not single:
                self._each_unitless(position, targets, cell, reads, decimal)
        if used_default and default is not None:
            self.assumptions.setdefault(f"{column.title} without unit read as {default}")
        return found

    def _each_unitless(
        self, position: int, targets: Sequence[str], cell: Value, reads: Reads, decimal: str | None
    ) -> None:
        """Say of each end of a range without unit which number it is."""
        read = read_range(cell, decimal=decimal) if reads is Reads.RANGE else read_triplet(cell, decimal=decimal)
        if isinstance(read, CellTrouble):
            return
        for target, value in zip(targets, read, strict=False):
            if isinstance(value, Quantity):
                self.unitless[position][target] = f"{value.number:.15g}"
            else:
                self.unitless[position].pop(target, None)

    def _quantity(
        self,
        cell: Value,
        unit: _UnitCell,
        reads: Reads,
        column: Column,
        decimal: str | None,
        default: Unit | None,
    ) -> _Outcome:
        """Read one cell of a column of quantities, with the unit that its row or heading gives it."""
        given: Unit | None = unit if isinstance(unit, Unit) else default if unit is None else None
        if type(cell) is not float:
            if not isinstance(cell, str):
                return _Outcome(trouble=trouble("the spreadsheet made a date or time of it"))
            text = cell.strip()
            if is_ditto(text):
                return _DITTO
            reason = placeholder(text)
            if reason:
                return _Outcome(blank=reason)
            if _TWO_STATES.fullmatch(text):
                return _Outcome(blank="two states, no range")
            cell = " ".join(text.split()) if reads is not Reads.TRIPLET else text
        if unit is _STATES:
            return _Outcome(blank="two states, no unit")
        kinds = column.kinds
        if reads is Reads.RANGE:
            pair = read_range(cell, unit=given, decimal=decimal)
            if isinstance(pair, CellTrouble):
                return self._in_trouble(pair, unit)
            parts: tuple[Quantity | None, ...] = (pair.lrv, pair.urv)
        elif reads is Reads.TRIPLET:
            three = read_triplet(cell, unit=given, decimal=decimal, kinds=kinds)
            if isinstance(three, CellTrouble):
                return self._in_trouble(three, unit)
            parts = tuple(three)
        else:
            value = read_quantity(cell, unit=given, decimal=decimal, kinds=kinds)
            if isinstance(value, CellTrouble):
                return self._in_trouble(value, unit)
            parts = (value,)
        for part in parts:
            if part is None:
                continue
            if part.unit is None:
                if unit is _BAD:
                    return _Outcome(unitless=True, trouble=trouble("its unit could not be read"))
                return _UNITLESS
            if kinds and part.unit.kind not in kinds:
                return _Outcome(
                    trouble=trouble(f"'{part}' is no {' or '.join(kinds)}")
                )
        if all(part is None for part in parts):
            return _Outcome(blank="not applicable")
        return _Outcome(value=parts if len(parts) > 1 else parts[0])

    @staticmethod
    def _in_trouble(trouble: CellTrouble, unit: _UnitCell) -> _Outcome:
        if trouble.blank:
            return _Outcome(blank=trouble.blank)
        return _Outcome(trouble=trouble)

    def _has_two_states(self, position: int, cell: Value, name: str) -> bool:
        """Whether 0 and 1 on a digital signal's row are its states and no range."""
        if name not in ("range", "lrv", "urv"):
            return False
        text = re.sub(r"\s", "", as_text(cell))
        if text not in ("0", "1", "0-1", "0/1", "0..1", "0to1"):
            return False
        types = self.values.get("io_type")
        said = types[position] if types else None
        return isinstance(said, str) and re.match(r"(?i)d[io]\b|digital|discrete|b[ea]\b|d[ea]\b", said) is not None

    def _read_general_setting(
        self,
        name: str,
        match: ColumnMatch,
        base: Sequence[_UnitCell],
        beside: Mapping[int | None, list[_UnitCell]],
    ) -> None:
        """Read a column of set points: of a relief valve the set pressure, of a switch or alarm the trip."""
        kinds = self.values.get("kind")
        relief: list[bool] = []
        tripping: list[bool] = []
        general = name == "trip" or not re.search(r"(?i)relief|psv|ansprech|\brv\b|pressure|press", match.heading)
        for position in range(self.count):
            letters = self.letters[position]
            kind = kinds[position] if kinds else None
            is_relief = kind in _RELIEF or (kind is None and letters in _RELIEF_LETTERS)
            relief.append(is_relief)
            tripping.append(not is_relief and (name == "trip" or general and self._trips(kind, letters)))
        pressure, trip = self.known.get("set_pressure"), self.known.get("trip")
        cells = self.cells(match.index)
        for target, column, wanted in (("set_pressure", pressure, relief), ("trip", trip, tripping)):
            if column is None or not any(wanted):
                continue
            units = self._units(dataclasses.replace(match, column=column), beside, base)
            chosen = _ColumnOf(self, match.index, [cell if yes else None for cell, yes in zip(cells, wanted, strict=True)])
            with chosen:
                values = self._read_into(target, match, column, units)[0]
            self._store(target, values)
            self.places.setdefault(target, (match.index,))
        self.places.setdefault(name, (match.index,))
        for position, cell in enumerate(cells):
            if cell is not None and not relief[position] and not tripping[position]:
                text = as_text(cell).strip()
                reason = placeholder(text)
                if reason:
                    self.blanks[position].setdefault(name, reason)
                else:
                    self.other[position].append((match.heading, text))

    @staticmethod
    def _trips(kind: Kind | None, letters: str) -> bool:
        if kind in (Kind.SWITCH, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR):
            return True
        return re.search(r"[SA](?:H{1,3}|L{1,3})?$", letters[1:]) is not None and "V" not in letters

    # --- status, places, unknown columns ----------------------------------------------------------------------------

    def _take_status(self) -> None:
        """Find the rows that are no longer, or not yet, live."""
        if "status" not in self.record_fields:
            return
        said = self.values.get("status") or [None] * self.count
        services = self.values.get("service") or [None] * self.count
        found: list[str | None] = []
        for position, (text, service) in enumerate(zip(said, services, strict=True)):
            word = not_live(text, status_column=True) if text else None
            word = word or self.status[position] or (not_live(service) if service else None)
            if word is None and self.numbers[position] in self.rows.struck:
                word = "deleted"
            found.append(word or text)
        if any(found):
            self.values["status"] = found
            self.places.setdefault("status", self.places.get("service") or self.places.get("tag") or ())

    def _keep_unknown(self) -> None:
        """Keep the cells of columns that were not understood, under their headings."""
        used = {match.index for match in self.match.columns.values()}
        used |= {index for match in self.match.columns.values() for index, _ in match.parts}
        used |= {index for index, _ in self.match.unit_columns}
        headings = dict(self.match.unknown)
        from instruments.origin import column_letters

        for index in range(self.sheet.width):
            if index in used:
                continue
            heading = headings.get(index) or f"column {column_letters(index)}"
            texts: dict[Value, str] = {}
            for position, cell in enumerate(self.cells(index)):
                if cell is None:
                    continue
                text = texts.get(cell)
                if text is None:
                    text = texts[cell] = as_text(cell).strip()
                self.other[position].append((heading, text))

    # --- records ----------------------------------------------------------------------------------------------------

    def _result(self) -> SheetRecords:
        place = Place(
            file=self.sheet.file, sheet=self.sheet.name, columns=MappingProxyType({k: v for k, v in self.places.items() if v})
        )
        self._add_notes()
        self._add_places()
        own_fields = {column.field for column in self.kind.columns if column.owner == "own"}
        own_fields |= {name for column in self.kind.columns if column.owner == "own" for name in column.into}
        own = {name: values for name, values in self.values.items() if name in own_fields}
        plain = {
            name: values for name, values in self.values.items() if name not in own_fields and name in self.record_fields
        }
        names, columns = tuple(plain), tuple(plain.values())
        own_names, own_columns = tuple(own), tuple(own.values())
        record = self.kind.record
        records: list[Any] = []
        blanks, unread, unitless, other = self.blanks, self.unread, self.unitless, self.other
        numbers = self.numbers
        rows = zip(*columns, strict=True) if columns else iter([()] * self.count)
        own_rows = list(zip(*own_columns, strict=True)) if own else None
        several = self.tags
        for position, values in enumerate(rows):
            fields: dict[str, Any] = dict(zip(names, values, strict=True))
            fields["origin"] = origin = Origin(place=place, row=numbers[position] + 1)
            if position in blanks and blanks[position]:
                fields["blanks"] = MappingProxyType(dict(blanks[position]))
            if position in unread and unread[position]:
                fields["unread"] = frozenset(unread[position])
            if position in unitless and unitless[position]:
                fields["unitless"] = MappingProxyType(dict(unitless[position]))
            if position in other and other[position]:
                fields["other"] = tuple(other[position])
            if own_rows is not None:
                limits = own_rows[position]
                if any(value is not None for value in limits) or position in unread and unread[position] & own_fields:
                    fields["own"] = DeviceType(
                        origin=origin,
                        unread=frozenset(unread[position] & own_fields) if position in unread else frozenset(),
                        unitless=MappingProxyType(
                            {k: v for k, v in unitless[position].items() if k in own_fields} if position in unitless else {}
                        ),
                        **dict(zip(own_names, limits, strict=True)),
                    )
            if several and len(several[position]) > 1:
                records.extend(self._copies(record, fields, several[position]))
            else:
                records.append(record(**fields))
        return self._counted(tuple(records))

    @staticmethod
    def _copies(record: type[Any], fields: Mapping[str, Any], tags: Sequence[str]) -> Iterable[Any]:
        """Make a record of each tag of a cell: all share the row, but not what one device alone can have."""
        shares = {}
        for name in _NOT_SHARED:
            text = fields.get(name)
            if isinstance(text, str):
                pieces = [piece.strip() for piece in re.split(r"[,;/&\n]", text) if piece.strip()]
                shares[name] = pieces if len(pieces) == len(tags) else None
        for number, tag in enumerate(tags):
            copy = dict(fields, tag=tag, tag_number=number)
            blanks = dict(copy.get("blanks", {}))
            for name, pieces in shares.items():
                if pieces is not None:
                    copy[name] = pieces[number]
                elif number:
                    copy[name] = None
                    blanks[name] = "shared cell"
            if blanks:
                copy["blanks"] = MappingProxyType(blanks)
            yield record(**copy)

    def _add_notes(self) -> None:
        """Put what stands beside a tag into the remarks."""
        notes = getattr(self, "tag_notes", None)
        if not notes or "remarks" not in self.record_fields or not any(notes):
            return
        remarks = self.values.get("remarks") or [None] * self.count
        self.values["remarks"] = [
            "; ".join(filter(None, (remark, note))) or None for remark, note in zip(remarks, notes, strict=True)
        ]
        self.places.setdefault("remarks", self.places.get("tag", ()))

    def _add_places(self) -> None:
        if "place" not in self.record_fields or not any(self.rows.places):
            return
        stated = self.values.get("place") or [None] * self.count
        self.values["place"] = [one or two for one, two in zip(stated, self.rows.places, strict=True)]

    # --- problems and counts ----------------------------------------------------------------------------------------

    def _counted(self, records: tuple[Any, ...]) -> SheetRecords:
        sheet = self.sheet
        problems, unread = self._problems()
        outside = set(range(len(sheet.rows))) - set(self.numbers)
        read = sum(len(row) - row.count(None) for row in self.row_cells)
        read += sum(len(sheet.rows[number]) - sheet.rows[number].count(None) for number in outside)
        # Error cells and formulas without a value are blanks among the rows.
        unread_among_rows = unread - len(sheet.errors) - len(sheet.no_value) - len(sheet.far)
        return SheetRecords(
            records=records,
            problems=problems,
            sections=tuple((number + 1, text) for number, text in self.rows.sections),
            notes=tuple((number + 1, text) for number, text in self.rows.notes),
            assumptions=tuple(self.assumptions),
            cells_filled=sheet.cells_filled,
            cells_read=read - unread_among_rows,
            cells_unread=unread,
            merged=self.rows.merged,
            rows=self.count,
        )

    def _problems(self) -> tuple[tuple[CellProblem, ...], int]:
        """Make the problems, one for a column of which every cell has the same trouble."""
        sheet = self.sheet
        found: list[CellProblem] = []
        by_column: Counter[tuple[int, str, str]] = Counter()
        for _, index, name, text, trouble in self.troubles:
            by_column[index, name, _alike(trouble.reason, text)] += 1
        unread = 0
        told: set[tuple[int, str, str]] = set()
        for position, index, name, text, trouble in sorted(self.troubles, key=lambda each: (each[0], each[1])):
            unread += 1
            key = (index, name, _alike(trouble.reason, text))
            whole = by_column[key] > 2 and by_column[key] == self._filled_in(index)
            if whole:
                if key in told:
                    continue
                told.add(key)
            column = self.known.get(name)
            found.append(
                CellProblem(
                    cell=self._cell(self.numbers[position], index),
                    field=name,
                    title=column.title if column is not None else (name or self._heading(index)),
                    subject="" if whole else self._subject(position),
                    text=text,
                    reason=trouble.reason,
                    readings=tuple(trouble.readings),
                    whole_column=whole,
                    cells_concerned=by_column[key] if whole else 1,
                )
            )
        for number, index, text, reason in self.loose:
            unread += 1
            found.append(
                CellProblem(cell=self._cell(number, index), field="", title="", subject="", text=text, reason=reason)
            )
        if sheet.far:
            number, index = min(sheet.far)
            unread += len(sheet.far)
            found.append(
                CellProblem(
                    cell=self._cell(number, index), field="", title="", subject="",
                    text=as_text(sheet.far[number, index]),
                    reason="stands so far from the list that it was left out",
                    cells_concerned=len(sheet.far),
                )
            )
        return tuple(found), unread

    def _filled_in(self, index: int) -> int:
        known = self.filled.get(index)
        if known is None:
            failed = sum(position in self.at for position, column in self.sheet.errors if column == index)
            failed += sum(position in self.at for position, column in self.sheet.no_value if column == index)
            blank = sum(
                isinstance(cell, str) and placeholder(cell.strip()) is not None for cell in self.cells(index)
            )
            known = self.filled[index] = self.count - self.cells(index).count(None) - blank + failed
        return known

    def _cell(self, number: int, index: int) -> Cell:
        return Cell(file=self.sheet.file, sheet=self.sheet.name, row=number + 1, column=index)

    def _subject(self, position: int) -> str:
        if self.tags and self.tags[position]:
            return self.tags[position][0]
        for names in self.kind.key:
            values = self.values.get(names[0])
            if values and isinstance(values[position], str):
                return str(values[position])
        first = next((as_text(cell).strip() for cell in self.row_cells[position] if cell is not None), "")
        return f"{self.sheet.name} {first}".strip()


class _ColumnOf:
    """Let a reader see only some cells of a column for a while."""

    def __init__(self, reader: _SheetReader, index: int, cells: list[Value]) -> None:
        self.reader, self.index, self.seen = reader, index, cells
        self.whole = reader.cells(index)

    def __enter__(self) -> None:
        self.reader._columns[self.index] = self.seen

    def __exit__(self, *_: object) -> None:
        self.reader._columns[self.index] = self.whole


def _alike(reason: str, text: str) -> str:
    """Return a reason without the text it quotes, so that one trouble of a whole column is told once."""
    return re.sub(r"'[^']*'", "''", reason)


def _with_prefix(prefix: str, text: str) -> str:
    bare = {
        "Zone": r"(?:0|1|2|20|21|22)(?:\s?/\s?(?:0|1|2|20|21|22))?",
        "Class": r"I{1,3}|[123]",
        "Div": r"[12]",
        "Group": r"[A-G](?:\s?[,&/+ ]\s?[A-G]){0,6}",
    }.get(prefix)
    return f"{prefix} {text}" if bare and re.fullmatch(bare, text) else text


def _say(name: str, text: str) -> bool | None:
    """Return what a yes/no cell says, in the words of its own column too."""
    plain = folded(text)
    if name == "hart" and re.search(r"\bhart\b", plain) and not re.search(r"\bno\b|\bnon\b|\bnot\b|without", plain):
        return True
    if name == "hart" and re.fullmatch(r"[567](?:\.\d)?", plain):
        return True
    if name.startswith("square_root"):
        if re.fullmatch(r"lin(?:ear)?\.?", plain):
            return False
        if re.fullmatch(r"(?:sq(?:uare)?\.?\s?(?:rt|root)|sqrt|√|root|radiziert|radizierend)\.?", plain):
            return True
    return yes_or_no(text)


def _count(text: str) -> _Outcome:
    number = read_number(text)
    if not isinstance(number, CellTrouble):
        if number.value == int(number.value) and 0 <= number.value < 1e6:
            return _Outcome(value=int(number.value))
        return _Outcome(trouble=trouble(f"'{text}' is no count"))
    by_size = re.fullmatch(r"(\d{1,4})\s?[x×*]\s?[23]\s?[x×*].{0,20}", text)
    found = by_size or re.fullmatch(r"(\d{1,4})\s?[- ]?\s?[^\d]{1,24}", text)
    if found:
        return _Outcome(value=int(found[1]))
    return _Outcome(trouble=trouble(f"'{text}' is no count"))
