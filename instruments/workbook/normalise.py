"""The cells of a matched sheet made into records: values with units, blanks with reasons, cells that are not read."""

from __future__ import annotations

import dataclasses
import re
from collections import defaultdict
from collections.abc import Iterable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from functools import cached_property
from types import MappingProxyType
from typing import Any, Final

from instruments.column import Column, Reads
from instruments.kind import Kind, dimension_allowed, kind_from_words, kinds_from_words
from instruments.number import CellTrouble, decimal_convention
from instruments.origin import Origin, Place, column_letters
from instruments.plant_data import PlantData
from instruments.quantity import Quantity, read_quantity, read_range, read_triplet
from instruments.record import DeviceType
from instruments.signal_words import io_type_of_title, io_types
from instruments.unit import Unit, commensurable, read_unit
from instruments.workbook.cell import (
    BAD,
    NOTHING,
    Outcome,
    Read,
    UnitCell,
    count_cell,
    is_settings_text,
    joined_cell,
    labelled_settings,
    number_cell,
    part_marking,
    pieces_of,
    quantity_cell,
    text_cell,
    trouble,
    unit_cell,
    with_prefix,
    word_cell,
    yes_cell,
)
from instruments.workbook.column_unit import read_plain_number
from instruments.workbook.heading_words import NUMERIC
from instruments.workbook.headings import ColumnMatch, SheetMatch
from instruments.workbook.number_format import as_text, format_kind
from instruments.workbook.problem import CellProblem
from instruments.workbook.rows import RowsOfSheet, sort_rows
from instruments.workbook.sheet import Sheet, Value, cell_address
from instruments.workbook.tag_column import TagCell, profile_of, read_tag_cell
from instruments.workbook.unread import Unread, problems_of
from instruments.workbook.words import folded, is_ditto, not_live, placeholder

__all__ = ["SheetRecords", "read_records"]

# A copy of a row for a further tag of its cell does not share what one device alone can have.
NOT_SHARED: Final = ("serial", "io_address", "terminals", "cable", "pair")

_SETTINGS: Final = frozenset(("setting_ll", "setting_l", "setting_h", "setting_hh", "trip", "set_pressure"))
_OPERATING: Final = frozenset(
    ("operating_value_min", "operating_value_normal", "operating_value_max", "operating_values")
)
# A column of set points means one thing for a relief valve and another for a switch.
_SET_POINTS: Final = frozenset(("set_pressure", "trip"))
_RELIEF: Final = frozenset((Kind.RELIEF_VALVE, Kind.RUPTURE_DISC, Kind.REGULATOR))
_RELIEF_LETTERS: Final = frozenset(("PSV", "PRV", "PVRV", "TSV", "PSE", "PRD", "TRV", "PCV", "RV", "SV"))
_TRIPPING: Final = frozenset((Kind.SWITCH, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR))
_TRIPPING_LETTERS: Final = re.compile(r"[A-Z][^V]*[SA](?:H{1,3}|L{1,3})?")
_SET_AT: Final = re.compile(
    r"set(?:\s?(?:at|@|press(?:ure)?\.?|point))?\s?[:=@]?\s?([\d.,]{1,12}\s?\S.{0,20}?)", re.IGNORECASE
)
_ZERO_OR_ONE: Final = re.compile(r"[01]|0\s?(?:-|/|\.{2,3}|to)\s?1")
_DIGITAL: Final = re.compile(r"d[io]\b|digital|discrete|b[ea]\b|d[ea]\b", re.IGNORECASE)


LONGEST_COMMENT: Final = 1000
"""Characters of a comment that are kept with its row."""

# Where what an annotated copy says begins, in a comment of its own or beneath another.
_OWN_COMMENT: Final = re.compile(r"(?:^|\n)Ferrule:(?=\s)")

# AI 1/06, DI-2.01: what it is stands before where it is connected.
_TYPE_AND_ADDRESS: Final = re.compile(r"([A-Za-z/]{2,5})[ :.-]{1,3}(?=[A-Za-z]{0,6}[ ./-]?\d)")

_GONE: Final = frozenset({"deleted", "void", "demolished"})

_OF_A_SIGNAL: Final = re.compile(r"\d ?(?:mA|V)\b|psi|bar|kPa")
# A cell and the unit that its row or heading give it.
_Key = tuple[Value, UnitCell]

_LIKE_THOUSANDS: Final = re.compile(r"(?<![\d.,])[1-9]\d{0,2}\.\d{3}(?![\d.,])")


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
    decimal, decimals
        The decimal mark that the sheet's numbers were read with, blank where nothing told; and of columns
        that have another, by index.
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
    decimal: str = ""
    decimals: Mapping[int, str] = dataclasses.field(default_factory=dict)


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
        The decimal mark of the sheet; None for the one that the match states, else to find out from its cells.
    """
    return _SheetReader(sheet, match, plant or PlantData(), decimal).read()


class _SheetReader:
    """Reads a sheet column by column, each different cell once, and then puts the rows together."""

    def __init__(self, sheet: Sheet, match: SheetMatch, plant: PlantData, decimal: str | None) -> None:
        self.sheet, self.match, self.plant, self.decimal = sheet, match, plant, decimal or match.decimal or None
        # Of columns: what was told, and what their own cells tell.
        self.told_marks = {each.index: each.decimal for each in match.columns.values() if each.decimal}
        self.own_marks: dict[int, str] = dict(self.told_marks)
        self.rows: RowsOfSheet = sort_rows(sheet, match)
        self.numbers = self.rows.data
        self.count = len(self.numbers)
        self.at = {number: position for position, number in enumerate(self.numbers)}
        self.row_cells = [sheet.rows[number] for number in self.numbers]
        self.known = {column.field: column for column in match.kind.columns}
        self.record_fields = {each.name for each in dataclasses.fields(match.kind.record)}
        self.headings = {each.index: each.heading for each in match.columns.values()}
        # By field a list as long as there are rows; the rest by row, as it is rare.
        self.values: dict[str, list[Any]] = {}
        self.places: dict[str, tuple[int, ...]] = {}
        self.blanks: dict[int, dict[str, str]] = defaultdict(dict)
        self.unread: dict[int, set[str]] = defaultdict(set)
        self.unitless: dict[int, dict[str, str]] = defaultdict(dict)
        self.other: dict[int, list[tuple[str, str]]] = defaultdict(list)
        self.troubles: list[tuple[int, int, str, str, CellTrouble]] = []  # position, column, field, text, trouble
        self.assumptions: dict[str, None] = {}
        self.tags: list[TagCell] = []
        self.letters: list[str] = []
        self.unit_cells: dict[str, list[UnitCell]] = {}
        self._columns: dict[int, list[Value]] = {}
        self._filled: dict[int, int] = {}

    def read(self) -> SheetRecords:
        matches = self.match.columns
        self._read_tags()
        self._take_errors()
        for name, match in matches.items():
            if match.column.reads is Reads.UNIT:
                self.unit_cells[name] = self._units_in(match.index, match.column)
                self.values[name] = [unit if isinstance(unit, Unit) else None for unit in self.unit_cells[name]]
                self._place(name, match)
        later: list[tuple[str, ColumnMatch]] = []
        labelled: list[tuple[str, ColumnMatch]] = []
        for name, match in matches.items():
            reads = match.column.reads
            if reads in (Reads.TAG, Reads.UNIT):
                continue
            if reads is Reads.KIND:
                self._read_kinds(name, match)
            elif match.column.into and reads is Reads.TEXT:
                labelled.append((name, match))
            elif reads in NUMERIC and reads is not Reads.COUNT:
                later.append((name, match))
            else:
                self._read_texts(name, match)
        self._take_set_cells()
        # Words first: whether 0 and 1 are a range, a digital signal tells.
        measured: list[tuple[str, ColumnMatch]] = []
        limits: list[tuple[str, ColumnMatch]] = []
        for name, match in later:
            reads = match.column.reads
            if name in _SETTINGS or name in _OPERATING or reads is Reads.TRIPLET or match.piece is not None:
                measured.append((name, match))
            elif reads is Reads.NUMBER:
                self._read_numbers(name, match)
            elif "limit_unit" in match.column.unit_from and "limit_unit" not in matches and "range_unit" in self.known:
                limits.append((name, match))
            else:
                self._read_quantities(name, match, self._units_for(match))
        for low, high in (("lrv", "urv"), ("system_lrv", "system_urv")):
            self._share_units(low, high)
        for name, match in limits:
            # Limits on a row that has one unit column are in it, as its range is.
            self._read_quantities(name, match, self._units_for(match, self._settled_units("range_unit", "lrv", "urv")))
        self._share_units("lrl", "url")
        self._scale_in_units_of_range()
        base = self._units_of_measurement()
        for name, match in measured:
            if name in _SET_POINTS and self.letters:
                self._read_set_points(name, match, base)
            else:
                of_range = name in _SETTINGS or name in _OPERATING
                with self._seen(match):
                    self._read_quantities(name, match, self._units_for(match, base if of_range else None))
        for _, match in labelled:
            self._read_labelled(match, base)
        self._take_signals_of_ranges()
        self._take_unconnected()
        self._part_markings()
        self._take_io_type_of_titles()
        self._take_status()
        self._keep_unknown()
        self._ask_about_second_columns()
        self._add_notes_and_places()
        return self._result()

    # --- the cells of a column ----------------------------------------------------------------------------------------

    def cells(self, index: int) -> list[Value]:
        """Return a column's cells, one a row: merged cells filled in, numbers with a look of their own as text."""
        found = self._columns.get(index)
        if found is None:
            found = [row[index] for row in self.row_cells]
            if bool in set(map(type, found)):
                found = [str(cell).upper() if isinstance(cell, bool) else cell for cell in found]
            for position, value in self._instead.get(index, {}).items():
                found[position] = value
            for position, code in self._formats.get(index, {}).items():
                cell = found[position]
                if isinstance(cell, float) and format_kind(code) not in ("date", "scientific"):
                    text = as_text(cell, code)
                    # Its point is a decimal point, whatever the texts of the sheet have.
                    found[position] = _LIKE_THOUSANDS.sub(r"\g<0>0", text) if index in self._numeric else text
            self._columns[index] = found
        return found

    @cached_property
    def _numeric(self) -> frozenset[int]:
        return frozenset(each.index for each in self.match.columns.values() if each.column.reads in NUMERIC)

    def _texts(self, index: int) -> set[str]:
        """Return the texts of a column as they were written: what a number looks like is none."""
        cells = self.cells(index)
        looks = self._formats.get(index, {})
        return {cell for position, cell in enumerate(cells) if isinstance(cell, str) and position not in looks}

    @cached_property
    def _instead(self) -> dict[int, dict[int, Value]]:
        found: dict[int, dict[int, Value]] = defaultdict(dict)
        for number, cells in self.rows.instead.items():
            position = self.at.get(number)
            if position is not None:
                for index, value in cells.items():
                    found[index][position] = value
        return found

    @cached_property
    def _formats(self) -> dict[int, dict[int, str]]:
        found: dict[int, dict[int, str]] = defaultdict(dict)
        for (number, index), code in self.sheet.number_formats.items():
            position = self.at.get(number)
            if position is not None:
                found[index][position] = code
        return found

    @contextmanager
    def _seeing(self, index: int, cells: list[Value]) -> Iterator[None]:
        """Let a column be read as if it held other cells."""
        whole = self.cells(index)
        self._columns[index] = cells
        try:
            yield
        finally:
            self._columns[index] = whole

    @contextmanager
    def _seen(self, match: ColumnMatch) -> Iterator[None]:
        """Let a column be read as its heading means it: one of two values, or only the rows that it speaks of."""
        cells = self.cells(match.index)
        if match.piece is not None:
            cells = self._pieces(match, match.piece[0], cells)
        if match.only and self.letters:
            spoken_of = [not letters or letters[0] == match.only for letters in self.letters]
            self._set_aside(match, cells, spoken_of)
            cells = [cell if yes else None for cell, yes in zip(cells, spoken_of, strict=True)]
        with self._seeing(match.index, cells):
            yield

    def _pieces(self, match: ColumnMatch, place: int, cells: Sequence[Value]) -> list[Value]:
        """Return what a column of several values holds for one of its fields; a cell of too few or many is trouble."""
        together = {name: each.piece for name, each in self.match.columns.items() if each.index == match.index}
        names = sorted((name for name, piece in together.items() if piece), key=lambda name: together[name] or (0, 0))
        known = {cell: pieces_of(cell, names) for cell in set(cells)}
        found: list[Value] = []
        for position, cell in enumerate(cells):
            pieces = known[cell]
            if isinstance(pieces, CellTrouble):
                self._trouble(position, match.index, match.field, as_text(cell), pieces)
                found.append(None)
            else:
                found.append(pieces[place])
        return found

    def _set_aside(self, match: ColumnMatch, cells: Sequence[Value], wanted: Sequence[bool]) -> None:
        """Keep the cells that a column's field does not take under the column's heading."""
        for position, (cell, yes) in enumerate(zip(cells, wanted, strict=True)):
            if cell is not None and not yes:
                text = as_text(cell).strip()
                if not placeholder(text):
                    self.other[position].append((match.heading, text))

    def _convention(self, index: int) -> str | None:
        """Return the decimal mark of a column, else of the sheet; None where nothing tells."""
        told = self.told_marks.get(index) or self.decimal
        if told is not None:
            return told
        texts = self._texts(index)
        own = decimal_convention(texts) if texts else None
        if own is not None:
            self.own_marks.setdefault(index, own)
        return own or self._sheet_convention

    @cached_property
    def _sheet_convention(self) -> str | None:
        if self.decimal is not None:
            return self.decimal
        texts: set[str] = set()
        for each in self.match.columns.values():
            if each.column.reads in (Reads.QUANTITY, Reads.NUMBER, Reads.RANGE, Reads.TRIPLET):
                texts |= self._texts(each.index)
        return decimal_convention(texts)

    # --- what the columns say -----------------------------------------------------------------------------------------

    def _place(self, name: str, match: ColumnMatch) -> None:
        """Note which columns a field, or the fields of a range, were read from."""
        indexes = (match.index, *(index for index, _ in match.parts))
        for each in match.column.into or (name,):
            self.places[each] = (*self.places.get(each, ()), *indexes)
        if match.column.into:
            self.places.setdefault(name, indexes)

    def _place_too(self, name: str, index: int) -> None:
        """Note a further column that a field was read from."""
        self.places[name] = tuple(dict.fromkeys((*self.places.get(name, ()), index)))

    def _store(self, name: str, values: list[Any]) -> None:
        """Keep a column's values; where another column filled the field already, it fills only its blanks."""
        before = self.values.get(name)
        self.values[name] = (
            values
            if before is None
            else [one if one is not None else two for one, two in zip(before, values, strict=True)]
        )

    def _run(self, name: str, index: int, read: Read) -> list[Any]:
        """Read a column, each different cell once."""
        cells = self.cells(index)
        known = {cell: NOTHING if cell is None else read(cell) for cell in dict.fromkeys(cells)}
        values = {cell: outcome.value for cell, outcome in known.items()}
        found = [values[cell] for cell in cells]
        if any(outcome.value is None and cell is not None for cell, outcome in known.items()):
            last: Outcome | None = None
            for position, cell in enumerate(cells):
                if cell is None:
                    continue
                outcome = known[cell]
                if outcome.ditto:
                    outcome = last or Outcome(blank="ditto without a row above")
                    found[position] = outcome.value
                else:
                    last = outcome
                if outcome.value is None:
                    self._remark(position, index, name, (name,), as_text(cell), outcome)
        return found

    def _remark(self, position: int, index: int, name: str, fields: Sequence[str], text: str, outcome: Outcome) -> None:
        """Note why a cell has no value."""
        if outcome.blank:
            for each in fields:
                self.blanks[position].setdefault(each, outcome.blank)
        elif outcome.trouble is not None:
            self._trouble(position, index, name, text, outcome.trouble, fields)
        elif outcome.unitless:
            for each in fields:
                self.unitless[position][each] = text.strip()
        elif outcome.aside:
            self.other[position].append((self.headings.get(index, ""), text.strip()))

    def _trouble(
        self, position: int, index: int, name: str, text: str, found: CellTrouble, fields: Sequence[str] = ()
    ) -> None:
        self.unread[position].update(fields or (name,))
        self.troubles.append((position, index, name, text, found))

    def _read_tags(self) -> None:
        match = self.match.columns.get("tag")
        if match is None or match.column.reads is not Reads.TAG:
            return
        if match.parts:
            joints = ("", *(joint for _, joint in match.parts))
            columns = [self.cells(index) for index in (match.index, *(index for index, _ in match.parts))]
            self._columns[match.index] = [joined_cell(row, joints) for row in zip(*columns, strict=True)]
        cells = self.cells(match.index)
        different = dict.fromkeys(cells)
        profile = profile_of(self.plant, [cell for cell in different if isinstance(cell, str)])
        looks = self._formats.get(match.index, {}) if not match.parts else {}
        known = {cell: TagCell() if cell is None else read_tag_cell(cell, profile) for cell in different}
        last = TagCell(blank="ditto without a row above")
        for position, cell in enumerate(cells):
            found = known[cell]
            if position in looks and cell is not None and not isinstance(cell, str):
                found = read_tag_cell(cell, profile, number_format=looks[position])
            if found.ditto:
                found = last
            elif found.tags:
                last = found
            if found.blank:
                self.blanks[position]["tag"] = found.blank
            if found.trouble is not None:
                self._trouble(position, match.index, "tag", as_text(cell), found.trouble)
            self.tags.append(found)
        self.letters = [found.letters for found in self.tags]
        self.values["tag"] = [found.tags[0] if found.tags else None for found in self.tags]
        self.values["tag_written"] = [
            as_text(cell).strip() if found.tags else None for cell, found in zip(cells, self.tags, strict=True)
        ]
        self.values["tag_cell"] = [
            as_text(cell).strip() if len(found.tags) > 1 else None for cell, found in zip(cells, self.tags, strict=True)
        ]
        for name in ("tag", "tag_written", "tag_cell"):
            self._place(name, match)

    def _read_texts(self, name: str, match: ColumnMatch) -> None:
        """Read a column of texts, words, counts or yes and no."""
        column = match.column
        self._place(name, match)
        if column.reads is Reads.TEXT and (match.parts or match.prefix):
            self._store(name, self._joined_texts(name, match))
            return
        read: Read
        if column.reads is Reads.WORD:
            read = word_cell(column)
        elif column.reads is Reads.YES_NO:
            read = yes_cell(name)
        elif column.reads is Reads.COUNT:
            read = count_cell(name)
        else:
            read = text_cell(name)
        values = self._run(name, match.index, read)
        if name == "location" and "place" in self.record_fields:
            self._take_places(match, values)
        self._store(name, values)

    def _take_places(self, match: ColumnMatch, values: Sequence[Any]) -> None:
        """Keep what is no kind of location (Filter gallery) as the place."""
        places: list[str | None] = [None] * self.count
        for position, (cell, value) in enumerate(zip(self.cells(match.index), values, strict=True)):
            if cell is not None and value is None:
                text = as_text(cell).strip()
                if (match.heading, text) in self.other.get(position, ()):
                    self.other[position].remove((match.heading, text))
                    places[position] = " ".join(text.split())
        if any(places):
            self._store("place", places)
            self.places.setdefault("place", (match.index,))

    def _joined_texts(self, name: str, match: ColumnMatch) -> list[Any]:
        """Read a text that stands in several columns: Zone, gas group, temperature class."""
        read = text_cell(name)
        columns = [self._run(name, index, read) for index in (match.index, *(index for index, _ in match.parts))]
        prefixes = (match.prefix, *(prefix for _, prefix in match.parts))
        joined: list[Any] = []
        for position, texts in enumerate(zip(*columns, strict=True)):
            if name == "io_address" and texts[-1] is None:
                # A card without a channel is no address.
                texts = (None,) * len(texts)
            said = [with_prefix(prefix, text) for prefix, text in zip(prefixes, texts, strict=True) if text]
            joined.append(" ".join(said) or None)
            if said and position in self.blanks:
                self.blanks[position].pop(name, None)
        return joined

    def _read_kinds(self, name: str, match: ColumnMatch) -> None:
        """Read a column of kinds; words may leave the kind to the letters of the tag."""
        self._place(name, match)
        keeps_text = "kind_written" in self.record_fields
        texts = self._run(name, match.index, text_cell("kind"))
        known: dict[tuple[str, str], Kind | None] = {}
        kinds: list[Kind | None] = []
        for position, text in enumerate(texts):
            if text is None:
                kinds.append(None)
                continue
            key = (text, self.letters[position] if self.letters else "")
            if key not in known:
                # Without words that name a kind the letters are asked later, as for a blank.
                known[key] = kind_from_words(text, letters=key[1]) if kinds_from_words(text) else None
            kinds.append(known[key])
            if known[key] is None and keeps_text:
                self.assumptions.setdefault(f"kind '{text}' is not known: the kind is taken from the tag's letters")
            elif known[key] is None:
                self._trouble(position, match.index, name, text, trouble(f"'{text}' is no kind that is known"))
        self._store(name, kinds)
        if keeps_text:
            self._store("kind_written", texts)
            self.places["kind_written"] = (match.index,)

    def _read_numbers(self, name: str, match: ColumnMatch) -> None:
        """Read a column of bare numbers in the column's own unit."""
        unit = match.column.unit or ""
        decimal = self._convention(match.index)
        self._place(name, match)
        if match.unit_index is not None:
            self._store(name, self._numbers_with_units(name, match, unit, decimal))
            return
        read = number_cell(name, unit, stated=match.unit_text or None, decimal=decimal)
        values = self._run(name, match.index, read)
        if unit == "m" and not match.unit_text and any(value is not None for value in values):
            self.assumptions.setdefault(f"{match.column.title} without unit read as {unit}")
        self._store(name, values)

    def _numbers_with_units(self, name: str, match: ColumnMatch, unit: str, decimal: str | None) -> list[Any]:
        """Read numbers whose unit stands in a column beside them."""
        values: list[Any] = []
        for position, (cell, said) in enumerate(
            zip(self.cells(match.index), self.cells(match.unit_index or 0), strict=True)
        ):
            stated = as_text(said).strip()
            text = as_text(cell).strip()
            value: Any = None
            if text and (reason := placeholder(text)):
                self.blanks[position][name] = reason
            elif text:
                value = read_plain_number(
                    cell, unit, heading_unit=stated if stated and not placeholder(stated) else None, decimal=decimal
                )
                if isinstance(value, CellTrouble):
                    self._trouble(position, match.index, name, text, value)
                    value = None
            values.append(value)
        return values

    # --- units --------------------------------------------------------------------------------------------------------

    def _units_in(self, index: int, column: Column) -> list[UnitCell]:
        """Read a column of units."""
        name = column.field if column.reads is Reads.UNIT else f"unit of {column.title}"
        cells = self.cells(index)
        known = {cell: NOTHING if cell is None else unit_cell(cell) for cell in dict.fromkeys(cells)}
        found: list[UnitCell] = []
        above: UnitCell = None
        for position, cell in enumerate(cells):
            outcome = known[cell]
            letters = self.letters[position] if self.letters else ""
            if cell is None:
                # An error value is blank among the cells, and not silent.
                found.append(BAD if position in self.unread and name in self.unread[position] else None)
                continue
            if outcome.ditto:
                outcome = self._repeated_unit(cell, position, letters, above)
            elif letters and isinstance(outcome.value, Unit) and _is_bare(cell):
                outcome = _bare_unit(cell, outcome.value, letters)
            if outcome.blank:
                self.blanks[position][name] = outcome.blank
            if outcome.trouble is not None:
                self._trouble(position, index, name, as_text(cell), outcome.trouble)
            unit: UnitCell = BAD if outcome.trouble is not None else outcome.value
            found.append(unit)
            above = unit if unit is not None else above
        return found

    def _repeated_unit(self, cell: Value, position: int, letters: str, above: UnitCell) -> Outcome:
        """Tell a ditto mark from the inch sign, which look the same."""
        text = as_text(cell).strip()
        inch = read_unit("inch")
        if text not in ('"', "''", "″", "”"):
            return Outcome(value=above) if above is not None else Outcome(blank="ditto without a row above")
        repeats = sum(isinstance(each, str) and is_ditto(each) for each in self.row_cells[position])
        if repeats > 1 and above is not None:
            return Outcome(value=above)
        if above is None or (isinstance(above, Unit) and above.kind == "length"):
            return Outcome(value=above if above is not None else inch)
        if letters[:1] in ("L", "Z", "V") or not letters:
            return Outcome(trouble=trouble(f"'{text}' may be inch or repeat the unit above", ("inch", str(above))))
        return Outcome(value=above)

    @cached_property
    def _units_beside(self) -> dict[int, list[UnitCell]]:
        return {
            match.unit_index: self._units_in(match.unit_index, match.column)
            for match in self.match.columns.values()
            if match.unit_index is not None and match.column.reads is not Reads.NUMBER
        }

    def _units_for(self, match: ColumnMatch, base: Sequence[UnitCell] | None = None) -> list[UnitCell]:
        """Return the unit that each row gives a column: its neighbour's, its unit column's, the heading's, the range's.

        `base` are the units of the range, for what is measured in them where it says nothing else.
        """
        column = match.column
        lists: list[list[UnitCell]] = []
        if match.unit_index is not None:
            lists.append(self._units_beside[match.unit_index])
        lists += [
            self.unit_cells[name]
            for name in column.unit_from
            if name in self.unit_cells and not (base is not None and name == "range_unit")
        ]
        if base is None and not lists:
            return [match.unit] * self.count
        found: list[UnitCell] = []
        for position in range(self.count):
            unit: UnitCell = next((each[position] for each in lists if each[position] is not None), match.unit)
            if unit is None and base is not None:
                unit = base[position]
                if isinstance(unit, Unit) and column.kinds and unit.kind not in column.kinds:
                    unit = None
            found.append(unit)
        return found

    def _share_units(self, low: str, high: str) -> None:
        """Let an end of a range without a unit take the other's."""
        if low not in self.values or high not in self.values:
            return
        for one, two in ((low, high), (high, low)):
            for position in [each for each, fields in self.unitless.items() if one in fields]:
                other = self.values[two][position]
                if isinstance(other, Quantity) and other.unit is not None:
                    again = read_quantity(
                        self.unitless[position][one], unit=other.unit, decimal=self._sheet_convention or "."
                    )
                    if isinstance(again, Quantity):
                        self.values[one][position] = again
                        del self.unitless[position][one]

    def _scale_in_units_of_range(self) -> None:
        """Let a system range for which the sheet has no unit at all be in its row's range unit, where that is plain.

        Not where the system may well show another quantity: flow or level behind a pressure, a percentage behind
        whatever is not 0 to 100 itself.
        """
        ends = ("system_lrv", "system_urv")
        if "system_unit" in self.unit_cells or not any(set(ends) & fields.keys() for fields in self.unitless.values()):
            return
        units = self._settled_units("range_unit", "lrv", "urv")
        for position, fields in list(self.unitless.items()):
            unit = units[position]
            if not isinstance(unit, Unit) or not all(name in fields for name in ends):
                continue
            values = [read_quantity(fields[name], unit=unit, decimal=self._sheet_convention or ".") for name in ends]
            shown = [value.number for value in values if isinstance(value, Quantity)]
            own = [
                each[position].number
                for each in (self.values.get("lrv"), self.values.get("urv"))
                if each is not None and each[position] is not None
            ]
            letters = self.letters[position] if self.letters else ""
            elsewhere = shown == [0, 100] or (unit.kind == "pressure" and letters[:1] != "P")
            if len(shown) != 2 or (shown != own and elsewhere):
                continue
            for name, value in zip(ends, values, strict=True):
                self.values[name][position] = value
                del self.unitless[position][name]
            self.assumptions.setdefault("system range without unit read in the unit of the range")

    def _units_of_measurement(self) -> list[UnitCell]:
        """Return the unit that each row measures in: the system's where it is of another dimension than the range's."""
        ranges = self._settled_units("range_unit", "lrv", "urv")
        systems = self._settled_units("system_unit", "system_lrv", "system_urv")
        return [
            two if isinstance(two, Unit) and not (isinstance(one, Unit) and commensurable(one, two)) else one
            for one, two in zip(ranges, systems, strict=True)
        ]

    def _settled_units(self, name: str, low: str, high: str) -> list[UnitCell]:
        """Return the unit of each row's range: its unit column's, else its ends'; and fill the unit's field with it."""
        stated = self.unit_cells.get(name)
        ends = [self.values[each] for each in (low, high) if each in self.values]
        found: list[UnitCell] = list(stated) if stated is not None else [None] * self.count
        # What stands at the value goes before what stands beside it, and the upper end before the lower.
        for values in ends:
            for position, value in enumerate(values):
                if value is not None:
                    found[position] = value.unit
        if name in self.record_fields and (ends or stated is not None):
            self.values[name] = [unit if isinstance(unit, Unit) else None for unit in found]
            self.places.setdefault(name, self.places.get(high) or self.places.get(low) or ())
        return found

    # --- quantities ---------------------------------------------------------------------------------------------------

    def _read_quantities(self, name: str, match: ColumnMatch, units: Sequence[UnitCell]) -> None:
        self._place(name, match)
        column = match.column
        for target, values in zip(column.into or (name,), self._quantities(name, match, column, units), strict=True):
            own = self.known.get(target)
            if own is not None and own.reads is Reads.NUMBER and own.unit:
                unit = read_unit(own.unit)
                values = [float(f"{value.to(unit):.12g}") if value is not None and unit else None for value in values]
            self._store(target, values)

    def _quantities(self, name: str, match: ColumnMatch, column: Column, units: Sequence[UnitCell]) -> list[list[Any]]:
        """Read a column of quantities into one list a field, each different cell with each different unit once."""
        targets = column.into or (name,)
        default = read_unit(column.unit) if column.unit else None
        decimal = self._convention(match.index)
        keys = list(zip(self.cells(match.index), units, strict=True))
        known = {key: quantity_cell(*key, column, decimal=decimal, default=default) for key in dict.fromkeys(keys)}
        if default is not None and any(each.value is not None and unit is None for (_, unit), each in known.items()):
            self.assumptions.setdefault(f"{column.title} without unit read as {default}")
        found: list[list[Any]]
        if len(targets) == 1:
            values = {key: each.value for key, each in known.items()}
            found = [[values[key] for key in keys]]
        else:
            blank = (None,) * len(targets)
            parts = {key: each.value or blank for key, each in known.items()}
            found = [list(each) for each in zip(*(parts[key] for key in keys), strict=True)] or [[] for _ in targets]
        self._say_other_units(match, keys, known)
        if any(each.value is None and each is not NOTHING for each in known.values()):
            self._quantities_without_value(name, match, column, keys, known, found)
        return found

    def _say_other_units(self, match: ColumnMatch, keys: Sequence[_Key], known: Mapping[_Key, Outcome]) -> None:
        """Say where a cell, or the unit column, has another unit than the heading: the nearer one is taken."""
        if match.unit is None or not (_has_own_unit(known) or any(unit != match.unit for _, unit in known)):
            return
        others: dict[Unit, int] = defaultdict(int)
        for key in keys:
            value = known[key].value
            parts = [part for part in (value if isinstance(value, tuple) else (value,)) if isinstance(part, Quantity)]
            unit = parts[-1].unit if parts else None
            if unit is not None and unit != match.unit and not _refines(unit, match.unit):
                others[unit] += 1
        for unit, count in others.items():
            self.assumptions.setdefault(
                f"{match.column.title}: {count} {'cell' if count == 1 else 'cells'} in {unit}, not in the {match.unit} "
                f"of the heading: what stands nearer is taken"
            )

    def _quantities_without_value(
        self,
        name: str,
        match: ColumnMatch,
        column: Column,
        keys: Sequence[_Key],
        known: Mapping[_Key, Outcome],
        found: list[list[Any]],
    ) -> None:
        targets = column.into or (name,)
        last: Outcome | None = None
        for position, key in enumerate(keys):
            cell = key[0]
            if cell is None:
                continue
            outcome = known[key]
            if outcome.ditto:
                outcome = last or Outcome(blank="ditto without a row above")
                if outcome.value is not None:
                    for each, part in zip(found, outcome.value if len(found) > 1 else (outcome.value,), strict=True):
                        each[position] = part
            else:
                last = outcome
            if outcome.value is not None:
                continue
            if outcome.unitless and self._has_two_states(position, cell, name):
                outcome = Outcome(blank="two states, no range")
            if outcome.unitless and outcome.trouble is not None:
                # Its unit cell could not be read, and has a problem of its own.
                self.unread[position].update(targets)
                continue
            self._remark(position, match.index, name, targets, as_text(cell), outcome)
            if outcome.unitless and len(targets) > 1:
                self._say_each_number(position, targets, cell, column)

    def _say_each_number(self, position: int, targets: Sequence[str], cell: Value, column: Column) -> None:
        """Say which number of a cell without a unit is whose."""
        decimal = self._sheet_convention
        read = read_range(cell, decimal=decimal) if column.reads is Reads.RANGE else read_triplet(cell, decimal=decimal)
        if isinstance(read, CellTrouble):
            return
        for target, value in zip(targets, read, strict=False):
            if isinstance(value, Quantity):
                self.unitless[position][target] = f"{value.number:.15g}"
            else:
                self.unitless[position].pop(target, None)

    def _has_two_states(self, position: int, cell: Value, name: str) -> bool:
        """Whether 0 and 1 on a digital signal's row are its states and no range."""
        types = self.values.get("io_type")
        if name not in ("range", "lrv", "urv") or not types or not isinstance(types[position], str):
            return False
        return bool(_ZERO_OR_ONE.fullmatch(as_text(cell).strip()) and _DIGITAL.match(types[position]))

    def _read_set_points(self, name: str, match: ColumnMatch, base: Sequence[UnitCell]) -> None:
        """Read a column of set points: of a relief valve the set pressure, of a switch or alarm the trip.

        Under a heading that speaks of pressures, a switch has its set pressure there.
        """
        self._place(name, match)
        kinds = self.values.get("kind") or [None] * self.count
        # A heading that names the relief valve speaks of nothing else.
        of_relief = name != "trip" and re.search(r"(?i)relief|psv|ansprech|\brv\b", match.heading) is not None
        of_pressure = name != "trip" and re.search(r"(?i)press", match.heading) is not None
        relief, tripping = [], []
        for kind, letters in zip(kinds, self.letters, strict=True):
            relieves = kind in _RELIEF if kind is not None else letters in _RELIEF_LETTERS
            trips = kind in _TRIPPING or _TRIPPING_LETTERS.fullmatch(letters) is not None
            relief.append(relieves or (trips and of_pressure and not of_relief))
            tripping.append(not relieves and (name == "trip" or (trips and not of_pressure and not of_relief)))
        cells = self.cells(match.index)
        taken = [one or two for one, two in zip(relief, tripping, strict=True)]
        for target, wanted in (("set_pressure", relief), ("trip", tripping)):
            column = self.known.get(target)
            if column is None:
                continue
            if any(yes and cell is not None for cell, yes in zip(cells, wanted, strict=True)):
                self._place_too(target, match.index)
            seen = [cell if yes else None for cell, yes in zip(cells, wanted, strict=True)]
            with self._seeing(match.index, seen):
                units = self._units_for(dataclasses.replace(match, column=column), base)
                self._store(target, self._quantities(target, match, column, units)[0])
        self._set_aside(match, cells, taken)

    def _read_labelled(self, match: ColumnMatch, base: Sequence[UnitCell]) -> None:
        """Read a column that names several settings in each cell: H=18 HH=20 barg."""
        cells = self.cells(match.index)
        texts = {cell: as_text(cell).strip() for cell in set(cells) if cell is not None}
        known = {
            cell: None if placeholder(text) else labelled_settings(" ".join(text.split()))
            for cell, text in texts.items()
        }
        for place, target in enumerate(match.column.into):
            seen: list[Value] = [
                found[place] if cell is not None and (found := known[cell]) is not None else None for cell in cells
            ]
            if any(each is not None for each in seen):
                column = self.known[target]
                with self._seeing(match.index, seen):
                    units = self._units_for(dataclasses.replace(match, column=column), base)
                    self._store(target, self._quantities(target, match, column, units)[0])
                self._place_too(target, match.index)
        # Figures of which nobody says which setting they are: there are more readings than one.
        asked = {cell for cell, text in texts.items() if known[cell] is None and is_settings_text(text)}
        for position, cell in enumerate(cells):
            if cell in asked:
                pieces = tuple(piece.strip() for piece in re.split(r"[/|;\n]", texts[cell]) if piece.strip())
                unsaid = trouble(f"'{texts[cell]}' does not say which settings it holds", pieces[:4])
                self._trouble(position, match.index, match.field, texts[cell], unsaid, match.column.into)
        self._set_aside(match, cells, [cell is None or known[cell] is not None or cell in asked for cell in cells])

    def _take_set_cells(self) -> None:
        """Read "Set 12 barg" in a column of ranges as what it is: a set point."""
        match = self.match.columns.get("range")
        if match is None or not self.letters or not self.known.get("set_pressure"):
            return
        cells = self.cells(match.index)
        said = [_SET_AT.fullmatch(cell.strip()) if isinstance(cell, str) else None for cell in cells]
        if not any(said):
            return
        for position, each in enumerate(said):
            if each is not None:
                for name in match.column.into:
                    self.blanks[position][name] = "set point"
        with self._seeing(match.index, [each[1] if each is not None else None for each in said]):
            self._read_set_points("trip", match, self._units_of_measurement())
        self._columns[match.index] = [
            None if each is not None else cell for cell, each in zip(cells, said, strict=True)
        ]

    def _take_signals_of_ranges(self) -> None:
        """Take the signal that a range states (4-20 mA = 0-250 m3/h) for the row's, where it has no other."""
        match = self.match.columns.get("range")
        if match is None or "signal" not in self.record_fields:
            return
        cells = self.cells(match.index)
        told = {cell for cell in cells if isinstance(cell, str) and _OF_A_SIGNAL.search(cell)}
        signals: dict[Value, str | None] = {}
        for cell in told:
            pair = read_range(" ".join(str(cell).split()), decimal=self._sheet_convention)
            signals[cell] = None if isinstance(pair, CellTrouble) else pair.signal
        if any(signals.values()):
            self._store("signal", [signals.get(cell) if isinstance(cell, str) else None for cell in cells])
            self._place_too("signal", match.index)

    # --- the rest of a row --------------------------------------------------------------------------------------------

    def _take_errors(self) -> None:
        """Mark the fields of cells that show an error value, or a formula without a value."""
        fields: dict[int, list[str]] = defaultdict(list)
        for name, match in self.match.columns.items():
            for index in (match.index, match.unit_index, *(index for index, _ in match.parts)):
                if index is not None:
                    fields[index].append(name if index != match.unit_index else f"unit of {match.column.title}")
        self.outside: list[Unread] = []
        failed = [(place, text, f"the cell shows {text}") for place, text in self.sheet.errors.items()]
        failed += [
            (place, "", "a formula without a saved value: open the list in a spreadsheet program and save it")
            for place in self.sheet.no_value
        ]
        for (number, index), text, reason in failed:
            position = self.at.get(number)
            if position is None:
                self.outside.append(Unread(number, index, "", "", "", text, trouble(reason)))
                continue
            names = fields.get(index) or [""]
            for name in names:
                column = self.known.get(name)
                self.unread[position].update((*column.into, name) if column is not None else (name,))
            self.troubles.append((position, index, names[0], text, trouble(reason)))

    def _take_unconnected(self) -> None:
        """Take NC in a column of terminals for no connection, but where the device has a changeover contact there."""
        for name, item in (("terminals", ""), ("from_terminal", "from_item"), ("to_terminal", "to_item")):
            terminals = self.values.get(name)
            if terminals is None or not any(map(_is_nc, terminals)):
                continue
            items = self.values.get(item) or [None] * self.count
            contacts = {
                at for at, terminal in zip(items, terminals, strict=True) if terminal and terminal.upper() in _CONTACT
            }
            for position, terminal in enumerate(terminals):
                if _is_nc(terminal) and (not item or items[position] not in contacts):
                    terminals[position] = None
                    self.blanks[position][name] = "no connection"

    def _part_markings(self) -> None:
        """Take a certificate's number that stands behind the marking for the certificate, where there is no other."""
        markings = self.values.get("ex_marking")
        if markings is None or "certificate" not in self.record_fields:
            return
        certificates = self.values.get("certificate") or [None] * self.count
        known = {text: part_marking(text) for text in set(markings) if text}
        if not any(number for _, number in known.values()):
            return
        for position, text in enumerate(markings):
            if text and certificates[position] is None and known[text][1]:
                markings[position], certificates[position] = known[text]
        self.values["certificate"] = certificates
        self.places.setdefault("certificate", self.places.get("ex_marking", ()))

    def _take_status(self) -> None:
        """Find the rows that are no longer, or not yet, live."""
        if "status" not in self.record_fields:
            return
        nothing = [None] * self.count
        found: list[str | None] = []
        for number, said, service, equipment, remark, tag in zip(
            self.numbers,
            self.values.get("status") or nothing,
            self.values.get("service") or nothing,
            self.values.get("equipment") or nothing,
            self.values.get("remarks") or nothing,
            self.tags or [TagCell()] * self.count,
            strict=True,
        ):
            word = (not_live(said, status_column=True) if said else None) or tag.status
            word = word or (not_live(service) if service else None) or (not_live(equipment) if equipment else None)
            # A remark speaks of the row where it says nothing else; a spare or future one may be the line's.
            gone = not_live(remark) if not word and remark else None
            word = gone if gone in _GONE else word
            found.append(word or ("deleted" if number in self.rows.struck else said))
        if any(found):
            self.values["status"] = found
            self.places.setdefault("status", self.places.get("service") or self.places.get("tag") or ())

    def _take_io_type_of_titles(self) -> None:
        """Where no column says it, take the I/O type that a section or the sheet is headed with: DIGITAL INPUTS."""
        if "io_type" not in self.record_fields or "io_type" in self.values:
            return
        of_sheet = io_type_of_title(self.sheet.name)
        addresses = self.values.get("io_address") or []
        types = [
            word[1] if address and (word := _TYPE_AND_ADDRESS.match(address)) and io_types(word[1]) else None
            for address in addresses
        ]
        if any(types):
            self.values["io_type"] = types
            self.places["io_type"] = self.places.get("io_address", ())
            return
        found = [(io_type_of_title(place) if place else None) or of_sheet for place in self.rows.places]
        if any(found):
            self.values["io_type"] = found
            self.assumptions.setdefault("I/O type read from the name of the sheet or section")

    def _keep_unknown(self) -> None:
        """Keep the cells of columns that were not understood, under their headings."""
        used = {index for index, _ in self.match.unit_columns}
        for match in self.match.columns.values():
            used.update((match.index, *(index for index, _ in match.parts)))
        headings = dict(self.match.unknown)
        for index in range(self.sheet.width):
            if index in used:
                continue
            heading = headings.get(index) or f"column {column_letters(index)}"
            self.headings[index] = heading
            texts = {cell: as_text(cell).strip() for cell in set(self.cells(index)) if cell is not None}
            if texts:
                for position, cell in enumerate(self.cells(index)):
                    if cell is not None:
                        self.other[position].append((heading, texts[cell]))

    def _ask_about_second_columns(self) -> None:
        """Tell of a column whose heading another has that is read, where they do not say the same."""
        first = {folded(match.heading): match for match in self.match.columns.values() if not match.parts}
        units = {index for index, _ in self.match.unit_columns}
        read = {match.index for match in self.match.columns.values()}
        for index, heading in self.match.headings.items():
            match = first.get(folded(heading))
            if match is None or index in read or index in units:
                continue
            pairs = list(zip(self.cells(match.index), self.cells(index), strict=True))
            differ = [
                position
                for position, (one, two) in enumerate(pairs)
                if two is not None
                and not placeholder(as_text(two).strip())
                and as_text(one).strip() != as_text(two).strip()
            ]
            if differ:
                where = self._column_name(match.index)
                found = trouble(f"a second column headed '{heading}', with other values: the first ({where}) is read")
                number, text = self.numbers[differ[0]], as_text(pairs[differ[0]][1])
                self.outside.append(Unread(number, index, "", heading, "", text, found, len(differ)))

    def _column_name(self, index: int) -> str:
        return f"line {index + 1}" if self.sheet.turned else f"column {column_letters(index)}"

    def _add_notes_and_places(self) -> None:
        """Put what stands beside a tag into the remarks, and the section into the place where there is no other."""
        nothing = [None] * self.count
        if "remarks" in self.record_fields and any(tag.note for tag in self.tags):
            self.values["remarks"] = [
                "; ".join(filter(None, (remark, tag.note))) or None
                for remark, tag in zip(self.values.get("remarks") or nothing, self.tags, strict=True)
            ]
            self.places.setdefault("remarks", self.places.get("tag", ()))
        for row, column in sorted(self.rows.struck_cells):
            for name in self._fields_of(column):
                self.blanks[self.at[row]].setdefault(name, "struck out")
        self._add_comments()
        if "place" in self.record_fields and any(self.rows.places):
            stated = self.values.get("place") or nothing
            self.values["place"] = [one or two for one, two in zip(stated, self.rows.places, strict=True)]

    def _fields_of(self, column: int) -> tuple[str, ...]:
        """Return the fields that a column is read into."""
        found = [
            match.column.into or (name,)
            for name, match in self.match.columns.items()
            if column in (match.index, *(index for index, _ in match.parts))
        ]
        return tuple(name for names in found for name in names if name in self.known or name in self.record_fields)

    def _add_comments(self) -> None:
        """Add what people noted at a row's cells to its remarks; what they noted elsewhere is a note of the sheet."""
        self.comments: list[tuple[int, str]] = []
        said: dict[int, list[str]] = defaultdict(list)
        for (row, column), text in sorted(self.sheet.comments.items()):
            one_line = " ".join(_OWN_COMMENT.split(text, maxsplit=1)[0].split())[:LONGEST_COMMENT]
            position = self.at.get(row)
            if not one_line:
                continue
            if position is not None and "remarks" in self.record_fields:
                said[position].append(one_line)
            else:
                self.comments.append((row + 1, f"comment at {self._address(row, column)}: {one_line}"))
        if said:
            before = self.values.get("remarks") or [None] * self.count
            self.values["remarks"] = [
                "; ".join(filter(None, (remark, *said.get(position, ())))) or None
                for position, remark in enumerate(before)
            ]
            self.places.setdefault("remarks", self.places.get("tag", ()))

    def _address(self, row: int, column: int) -> str:
        return cell_address(column, row) if self.sheet.turned else cell_address(row, column)

    # --- records ------------------------------------------------------------------------------------------------------

    def _result(self) -> SheetRecords:
        sheet = self.sheet
        problems, unread = problems_of(sheet, [*self._unread_cells(), *self.outside], self._filled_in)
        # Errors, formulas without a value and far cells are blanks among the rows, or not there.
        elsewhere = len(sheet.errors) + len(sheet.no_value) + len(sheet.far)
        read = sheet.cells_in_titles + sum(len(row) - row.count(None) for row in sheet.rows)
        return SheetRecords(
            records=tuple(self._records()),
            problems=problems,
            sections=tuple((number + 1, text) for number, text in self.rows.sections),
            notes=tuple((number + 1, text) for number, text in (*sheet.titles, *self.rows.notes))
            + tuple(self.comments),
            assumptions=tuple(self.assumptions),
            cells_filled=sheet.cells_filled,
            cells_read=read - (unread - elsewhere),
            cells_unread=unread,
            merged=self.rows.merged,
            rows=self.count,
            decimal=self._sheet_convention or "",
            decimals=MappingProxyType(
                {index: mark for index, mark in sorted(self.own_marks.items()) if mark != self._sheet_convention}
            ),
        )

    def _records(self) -> Iterator[Any]:
        kind = self.match.kind
        place = Place(
            file=self.sheet.file,
            sheet=self.sheet.name,
            turned=self.sheet.turned,
            columns=MappingProxyType({name: indexes for name, indexes in self.places.items() if indexes}),
        )
        own = {name for column in kind.columns if column.owner == "own" for name in (column.field, *column.into)}
        names = [name for name in self.values if name in self.record_fields and name not in own]
        own_names = [name for name in self.values if name in own]
        rows = zip(*(self.values[name] for name in names), strict=True) if names else iter([()] * self.count)
        own_rows = list(zip(*(self.values[name] for name in own_names), strict=True)) if own_names else []
        record = kind.record
        for position, values in enumerate(rows):
            fields: dict[str, Any] = dict(zip(names, values, strict=True))
            fields["origin"] = Origin(place=place, row=self.numbers[position] + 1)
            if self.blanks.get(position):
                fields["blanks"] = MappingProxyType(self.blanks[position])
            if self.unread.get(position):
                fields["unread"] = frozenset(self.unread[position])
            if self.unitless.get(position):
                fields["unitless"] = MappingProxyType(self.unitless[position])
            if self.other.get(position):
                fields["other"] = tuple(self.other[position])
            if own_rows:
                fields["own"] = self._own_limits(
                    position, fields, dict(zip(own_names, own_rows[position], strict=True))
                )
            tags = self.tags[position].tags if self.tags else ()
            if len(tags) > 1:
                yield from (record(**each) for each in _copies(fields, tags))
            else:
                yield record(**fields)

    def _own_limits(self, position: int, fields: Mapping[str, Any], limits: dict[str, Any]) -> DeviceType | None:
        """Return the device limits that a row states for itself; None where it states none."""
        unread = frozenset(limits).intersection(self.unread.get(position, ()))
        unitless = {name: text for name, text in self.unitless.get(position, {}).items() if name in limits}
        if not unread and not unitless and all(value is None for value in limits.values()):
            return None
        return DeviceType(origin=fields["origin"], unread=unread, unitless=MappingProxyType(unitless), **limits)

    # --- cells that were not read -------------------------------------------------------------------------------------

    def _unread_cells(self) -> Iterable[Unread]:
        seen: set[tuple[int, int]] = set()
        for position, index, name, text, found in self.troubles:
            # A cell that two fields are read from is one cell.
            if (position, index) not in seen:
                seen.add((position, index))
                column = self.known.get(name)
                yield Unread(
                    self.numbers[position],
                    index,
                    name if column is not None else "",
                    column.title if column is not None else name or self.headings.get(index, ""),
                    self._subject(position),
                    text,
                    found,
                )

    def _filled_in(self, index: int) -> int:
        """Return how many cells of a column hold a value, unread ones among them and placeholders not."""
        known = self._filled.get(index)
        if known is not None:
            return known
        failed = sum(column == index and row in self.at for row, column in self.sheet.errors)
        failed += sum(column == index and row in self.at for row, column in self.sheet.no_value)
        self._filled[index] = failed + sum(
            cell is not None and not (isinstance(cell, str) and placeholder(cell.strip())) for cell in self.cells(index)
        )
        return self._filled[index]

    def _subject(self, position: int) -> str:
        """Return what a row is called: its tag or code, else the sheet and its first filled cell."""
        if self.tags and self.tags[position].tags:
            return self.tags[position].tags[0]
        for names in self.match.kind.key:
            values = self.values.get(names[0])
            if values and isinstance(values[position], str):
                return str(values[position])
        first = next((as_text(cell).strip() for cell in self.row_cells[position] if cell is not None), "")
        return f"{self.sheet.name} {first}".strip()


def _copies(fields: Mapping[str, Any], tags: Sequence[str]) -> Iterator[dict[str, Any]]:
    """Yield the fields of each tag of a cell: all share the row, but not what one device alone can have."""
    shares: dict[str, list[str] | None] = {}
    for name in NOT_SHARED:
        text = fields.get(name)
        if isinstance(text, str):
            pieces = [piece.strip() for piece in re.split(r"[,;/&\n]", text) if piece.strip()]
            shares[name] = pieces if len(pieces) == len(tags) else None
    for number, tag in enumerate(tags):
        copy = dict(fields, tag=tag, tag_number=number)
        blanks = dict(copy.get("blanks", {}))
        for name, each in shares.items():
            if each is not None:
                copy[name] = each[number]
            elif number:
                copy[name] = None
                blanks[name] = "shared cell"
        if blanks:
            copy["blanks"] = MappingProxyType(blanks)
        yield copy


_CONTACT: Final = frozenset({"NO", "N/O", "N.O.", "C", "COM", "COMMON"})


def _is_nc(terminal: str | None) -> bool:
    return terminal is not None and terminal.upper() in ("NC", "N/C", "N.C.", "N.C")


def _has_own_unit(known: Mapping[_Key, Outcome]) -> bool:
    return any(isinstance(cell, str) for cell, _ in known)


def _refines(unit: Unit, stated: Unit) -> bool:
    """Whether a unit is the stated one, and only says besides what it is measured from: barg for bar."""
    return unit.referred_to("unstated") == stated if stated.reference == "unstated" and unit.reference else False


def _is_bare(cell: Value) -> bool:
    """Whether a unit is a single letter, which has more readings than one."""
    return isinstance(cell, str) and len(cell.strip(" .()[]'")) == 1 and cell.strip().isalpha()


def _bare_unit(cell: Value, unit: Unit, letters: str) -> Outcome:
    """Doubt a bare letter that reads as a unit the tag is not measured in."""
    if dimension_allowed(letters, unit.kind) is not False:
        return Outcome(value=unit)
    text = as_text(cell).strip()
    return Outcome(
        trouble=trouble(
            f"'{text}' alone reads as {unit}, in which {letters} is not measured", (str(unit), "another unit")
        )
    )
