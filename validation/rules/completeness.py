"""DAT: what is missing from a row or cannot be read."""

from __future__ import annotations

import re
from collections import Counter, defaultdict
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass, replace
from functools import lru_cache
from operator import attrgetter
from typing import Any, Final

from instruments.column import Reads
from instruments.columns import DEVICE_TYPES, INSTRUMENTS
from instruments.installed import Installed
from instruments.kind import Kind, kinds_from_words, touches_process
from instruments.letters import read_letters
from instruments.origin import Cell
from instruments.plant_data import DEFAULT_REQUIRED
from instruments.quantity import Quantity
from instruments.record import DeviceType, Instrument, Record
from instruments.signal_words import io_types, signal_classes
from instruments.unit_table import unit_label
from instruments.workbook.problem import CellProblem
from instruments.written import CannotStand, value_of
from loops.plant import Plant
from loops.wiring import transmitter_of
from validation.finding import Fix, Found, Severity, Unchecked, Verdict
from validation.rule import Subject, rule, title_of
from validation.rules.whole_loops import alone

_TITLES = {column.title.casefold(): column.field for column in INSTRUMENTS.columns}


# ------------------------------------------------------------------------------------------- required fields

_RANGE_TITLES: Final = frozenset({"range", "range unit", "LRV", "URV"})
_MEASURES_NO_RANGE: Final = frozenset({Kind.FIRE_DETECTOR, Kind.GLASS})


def _has_a_range(kind: Kind) -> bool:
    return kind.measures == "yes" and kind not in _MEASURES_NO_RANGE


def _on_a_wire(kind: Kind) -> bool:
    return kind.wired in ("yes", "element")


def _of_equipment(kind: Kind) -> bool:
    return kind is not Kind.SOFT_FUNCTION


def _fields(*names: str) -> frozenset[str]:
    return frozenset(INSTRUMENTS.column(name).title for name in names)


# A plant may require any field; asked is only the kind that can have it (common practice).
_ASKED_OF: Final[tuple[tuple[frozenset[str], Callable[[Kind], bool]], ...]] = (
    (_RANGE_TITLES, _has_a_range),
    (
        _fields("pid", "line", "equipment", "mounting", "fluid", "phase", "design_pressure", "design_temperature")
        | {column.title for column in INSTRUMENTS.columns if column.title.startswith(("operating p", "operating t"))},
        lambda kind: kind.process,
    ),
    (
        _fields(
            "signal",
            "wires",
            "io_type",
            "io_address",
            "card",
            "system",
            "power_supply",
            "barrier",
            "receiver_ohm",
            "junction_box",
            "terminals",
            "cable",
            "cable_type",
            "cable_length_m",
            "conductor",
            "ohm_per_km",
            "capacitance_pf_per_m",
            "inductance_uh_per_m",
            "pair",
        ),
        _on_a_wire,
    ),
    (_fields("ex_marking", "certificate"), lambda kind: kind.electrical == "yes"),
    (_fields("area", "area_classification", "ip_code", "maker", "model", "serial"), _of_equipment),
    (_fields("failure_position"), lambda kind: kind in (Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE)),
    (_fields("failure_direction"), lambda kind: kind in (Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR)),
    (_fields("contact"), lambda kind: kind is Kind.SWITCH),
    (_fields("set_pressure"), lambda kind: kind.measures == "set pressure"),
    (
        _fields("system_lrv", "system_urv", "system_range", "system_unit")
        | {column.title for column in INSTRUMENTS.columns if column.title.startswith("operating value")},
        lambda kind: kind in (Kind.TRANSMITTER, Kind.ANALYSER, Kind.SOFT_FUNCTION),
    ),
)
# What an element leaves to the transmitter that it is wired to.
_TRANSMITTERS_OWN: Final = _RANGE_TITLES | next(titles for titles, of in _ASKED_OF if of is _on_a_wire)


@dataclass(frozen=True, slots=True, kw_only=True)
class _Required:
    """A field that the plant requires: its title, the record's fields, whether any sheet has a column for it."""

    title: str
    fields: tuple[str, ...]
    column: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class _Asked:
    """What is asked of one kind, and how all of it is looked up at once."""

    required: tuple[_Required, ...]
    values: Callable[[Instrument], tuple[Any, ...]]
    unit: bool


def _required(plant: Plant) -> tuple[_Required, ...]:
    required: list[_Required] = []
    for name in plant.data.required_fields or DEFAULT_REQUIRED:
        field = _TITLES.get(name.casefold())
        # A row without a tag is found as such.
        if field is None or field == "tag":
            continue
        column = INSTRUMENTS.column(field)
        fields = column.into if column.reads in (Reads.RANGE, Reads.TRIPLET) else (field,)
        names = fields
        if field == "range_unit":
            # Units stand in cells or headings as often as in a column of their own.
            names = ("range_unit", "lrv", "urv")
        elif field == "kind":
            names = ("kind", "device_type")
        required.append(_Required(title=column.title, fields=fields, column=plant.has_column(*names)))
    return tuple(required)


def _asked(kind: Kind | None, plant: Plant) -> _Asked:
    plans: dict[Kind | None, _Asked] = plant.once("fields asked of each kind", lambda plant: {})
    plan = plans.get(kind)
    if plan is None:
        every: tuple[_Required, ...] = plant.once("required fields", _required)
        asked = tuple(each for each in every if _is_asked(each.title, kind))
        names = [name for each in asked if each.title not in ("range unit", "kind") for name in each.fields]
        plan = plans[kind] = _Asked(
            required=asked,
            # Two names that are never blank let it always give a tuple.
            values=attrgetter("unread", "unitless", *names),
            unit=any(each.title == "range unit" for each in asked),
        )
    return plan


def _is_asked(title: str, kind: Kind | None) -> bool:
    if title == "kind":
        return kind is None
    return all(kind is not None and of(kind) for titles, of in _ASKED_OF if title in titles)


def _has_unit(record: Instrument) -> bool:
    if record.range_unit is not None:
        return True
    return any(end is not None and end.unit is not None for end in (record.lrv, record.urv))


def _blank(required: _Required, installed: Installed) -> tuple[tuple[str, ...], tuple[str, ...]]:
    """Return the fields that are blank, and those that another rule speaks of: unread, or without their unit."""
    record = installed.record
    if required.title == "kind":
        # The kind may be the tag's, or the device type's: where there is none, or it is not listed, that is the cause.
        return () if record.kind_written or record.device_type or not record.tag else ("kind",), ()
    lost = record.unitless.keys() | record.unread if record.unitless or record.unread else ()
    if required.title == "range unit":
        if _has_unit(record) or _is_ratio(installed.letters):
            return (), ()
        # Without a unit stands the range, or what was to be its unit cannot be read.
        return ((), ("range_unit",)) if any(name in lost for name in _UNIT_OF_RANGE) else (("range_unit",), ())
    blank = tuple(
        field
        for field in required.fields
        if getattr(record, field) is None and field not in lost and record.blanks.get(field) != SHARED_CELL
    )
    return blank, tuple(field for field in required.fields if field in lost)


_UNIT_OF_RANGE: Final = ("lrv", "urv", "range_unit")
# What is in the unit of the measured variable.
_MEASURED: Final = frozenset({
    "lrv", "urv", "system_lrv", "system_urv", "setting_ll", "setting_l", "setting_h", "setting_hh", "trip",
    "operating_value_min", "operating_value_normal", "operating_value_max",
})  # fmt: skip
# The reader's reason for what one device of a cell with several tags cannot have.
SHARED_CELL: Final = "shared cell"


@lru_cache(maxsize=4096)
def _is_ratio(letters: str) -> bool:
    """Whether the letters measure a ratio, which is a number without unit: FFIC."""
    return "F" in letters[1:] and "F" in read_letters(letters).modifier


# An analyser or a detector may have an alarm contact for its only signal, a flame scanner has little else.
_MAY_TELL_A_STATE: Final = frozenset({Kind.ELEMENT, Kind.ANALYSER, Kind.GAS_DETECTOR})


def _tells_a_state(installed: Installed) -> bool:
    """Whether a contact is all that it gives: a state has no range."""
    if installed.kind not in _MAY_TELL_A_STATE:
        return False
    kinds = {kind for row in installed.signals for kind in io_types(row.io_type)}
    classes = {each for row in installed.signals for each in signal_classes(row.signal)}
    if kinds - {"DI"} or classes - {"contact", "digital", "volts"}:
        return False
    return bool(kinds or classes)


def _leaves_to_transmitter(installed: Installed, plant: Plant) -> bool:
    """Whether its range and wiring are its transmitter's, or it is found to have no transmitter."""
    if installed.kind is not Kind.ELEMENT:
        return False
    loop = plant.loop_of(installed)
    if loop is not None and transmitter_of(installed, loop.members) is not None:
        return True
    return isinstance(alone(installed, plant), Found)


def _is_glass(installed: Installed) -> bool:
    """Whether words call a glass what the letters (LI, as older lists write it) call a gauge."""
    words = installed.record.kind_written
    return installed.kind is Kind.GAUGE and words is not None and Kind.GLASS in kinds_from_words(words)[:1]


def _required_column_absent(plant: Plant) -> Verdict:
    every: tuple[_Required, ...] = plant.once("required fields", _required)
    absent = [each for each in every if not each.column]
    if not absent:
        return None
    counts: Counter[str] = Counter()
    for each in plant.live:
        if not each.equipment_tag:
            counts.update(
                required.title
                for required in absent
                if _is_asked(required.title, each.kind)
                and _blank(required, each)[0]
                and not (required.title in _RANGE_TITLES and _is_glass(each))
            )
    lacking = [each for each in absent if counts[each.title]]
    if not lacking:
        return None
    return Found(
        values={"columns": ", ".join(f"{each.title} ({_instruments(counts[each.title])})" for each in lacking)},
        fields=tuple(field for each in lacking for field in each.fields),
        message="no sheet has a column for {columns}",
        found="no such column",
        wanted=", ".join(each.title for each in lacking),
        stops_rows=False,
    )


def _instruments(count: int) -> str:
    return f"{count} instrument{'' if count == 1 else 's'}"


def _no_equipment(installed: Installed, plant: Plant) -> bool:
    return not installed.equipment_tag


@rule(
    "DAT01",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_no_equipment,
    whole=_required_column_absent,
    message="required and blank: {fields}",
    basis="the plant's required fields; by default tag, service, kind, P&ID, range and unit (common practice)",
)
def required_field_blank(installed: Installed, plant: Plant) -> Verdict:
    """Fields that the plant requires are blank.

    Why it matters: what is blank here is guessed by the next person, or bought wrong.

    What to do: fill them, or take them off the plant's required fields.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "service": "Feed", "P&ID": "D-1", "LRV": "0", "URV": "4", "range unit": "barg"}
    >>> said("DAT01", [{**row, "service": ""}, {**row, "tag": "PT-2"}])
    ['PT-1: required and blank: service']
    """
    record, kind = installed.record, installed.kind
    asked = _asked(kind, plant)
    if kind is not None and None not in asked.values(record) and (not asked.unit or _has_unit(record)):
        return None
    blank: list[str] = []
    shown: list[str] = []
    untold: list[str] = []
    of_sheet: list[Found] = []
    leaves = None
    for required in asked.required:
        missing, lost = _blank(required, installed)
        untold.extend(title_of(field) for field in lost)
        if not missing:
            continue
        if required.title in _RANGE_TITLES and _is_glass(installed):
            continue
        if kind is Kind.ELEMENT and required.title in _TRANSMITTERS_OWN:
            if leaves is None:
                leaves = _leaves_to_transmitter(installed, plant)
            if leaves:
                continue
        if required.title in _RANGE_TITLES and _tells_a_state(installed):
            continue
        if not required.column:
            untold.append(required.title)
            continue
        if not plant.sheet_has_column(installed, *missing):
            of_sheet.append(Found(values={"fields": required.title}, fields=missing, found="blank"))
            continue
        whole = len(missing) == len(required.fields)
        reason = next((record.blanks[field] for field in missing if field in record.blanks), "")
        title = required.title if whole else ", ".join(title_of(field) for field in missing)
        blank.extend(missing)
        shown.append(f"{title} ({reason})" if reason else title)
    if not blank:
        return of_sheet or (Unchecked(*dict.fromkeys(untold)) if untold else None)
    filled = ", ".join(shown)
    return [Found(values={"fields": filled}, fields=tuple(blank), found="blank", wanted=filled), *of_sheet]


def _no_line_or_equipment_column(plant: Plant) -> Verdict:
    if plant.has_column("line", "equipment"):
        return None
    count = sum(1 for each in plant.live if each.kind is not None and _on_the_process(each, plant))
    if not count:
        return None
    return Found(
        values={"count": f"{_instruments(count)} touch{'es' if count == 1 else ''}"},
        fields=("line", "equipment"),
        message="no sheet has a column for line or equipment; {count} the process",
        found="no such column",
        wanted="line or equipment",
    )


def _on_the_process(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if kind is None:
        return not installed.equipment_tag
    if not kind.process or installed.equipment_tag:
        return False
    words = installed.record.kind_written
    if kind is Kind.SWITCH and words is not None and _OF_A_POSITION.search(words):
        # GO 11: other traditions write a position with other letters.
        return False
    return touches_process(kind, installed.letters)


_OF_A_POSITION: Final = re.compile(
    r"\blimit|position|proximity|\bend ?(?:switch|schalter|lage)|stellung|fin de course|endschalter|endlage",
    re.IGNORECASE,
)


@rule(
    "DAT02",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_on_the_process,
    whole=_no_line_or_equipment_column,
    message="{kind} that is on neither a line nor equipment",
    basis="common practice",
)
def on_no_line(installed: Installed, plant: Plant) -> Verdict:
    """An instrument that touches the process and has neither line nor equipment.

    Why it matters: nobody can tell which fluid, pressure and temperature it sees, nor isolate it.

    What to do: state the line or the equipment that it is mounted on. A position switch or a
    solenoid has its valve's.

    >>> from validation.example import said
    >>> said("DAT02", [{"tag": "PT-1", "line": ""}, {"tag": "PT-2", "line": "100-P-1"}])
    ['PT-1: a transmitter that is on neither a line nor equipment']
    """
    record = installed.record
    if record.line or record.equipment:
        return None
    unread = record.unread & {"line", "equipment"}
    if unread:
        return Unchecked(*(title_of(field) for field in sorted(unread)))
    kind = installed.kind
    if kind is None:
        return Unchecked("kind")
    reason = record.blanks.get("line") or record.blanks.get("equipment")
    return Found(
        values={"kind": kind.with_article},
        fields=("line", "equipment"),
        found=f"blank ({reason})" if reason else "blank",
        wanted="line or equipment",
    )


# ------------------------------------------------------------------------------------------- units and cells

_ORDER: Final[Mapping[str, int]] = {
    column.field: number for number, column in enumerate((*INSTRUMENTS.columns, *DEVICE_TYPES.columns))
}
_UNIT_FROM: Final[Mapping[str, str]] = {
    column.field: column.unit_from[0] for column in (*INSTRUMENTS.columns, *DEVICE_TYPES.columns) if column.unit_from
}
_OWN_FIELDS: Final = frozenset(DeviceType.__dataclass_fields__) - frozenset(Instrument.__dataclass_fields__)


def _in_order(fields: Iterable[str]) -> list[str]:
    return sorted(fields, key=lambda field: (_ORDER.get(field, len(_ORDER)), field))


@dataclass(frozen=True, slots=True, kw_only=True)
class _Unitless:
    """Where units are missing: whole columns by sheet and field, and what is wrong with them."""

    columns: frozenset[tuple[int, str]]
    found: tuple[Found, ...]


def _index_rows(plant: Plant) -> Iterator[Instrument]:
    records = plant.lists.records
    yield from records.get("Instruments") or records.get("IO list", ())


def _unitless(plant: Plant) -> _Unitless:
    """Find the columns of which no filled cell has a unit, and the entries of the catalogue that lack one."""
    lacking: dict[tuple[int, str], list[Record]] = defaultdict(list)
    types: tuple[DeviceType, ...] = plant.lists.records.get("Device types", ())
    for record in (*_index_rows(plant), *types):
        if record.unitless and record.origin is not None:
            for field in record.unitless:
                lacking[(id(record.origin.place), field)].append(record)
    if not lacking:
        return _Unitless(columns=frozenset(), found=())
    asked: dict[int, list[str]] = defaultdict(list)
    for place, field in lacking:
        asked[place].append(field)
    filled: Counter[tuple[int, str]] = Counter()
    for record in (*_index_rows(plant), *types):
        if record.origin is None:
            continue
        place = id(record.origin.place)
        for field in asked.get(place, ()):
            owner = record.own if field in _OWN_FIELDS and isinstance(record, Instrument) else record
            if getattr(owner, field, None) is not None:
                filled[place, field] += 1
    whole = {key: rows for key, rows in lacking.items() if key not in filled and len(rows) > 1}
    # Where a unit column is lacking, a few values with a unit of their own do not make the others slips.
    sources = {(place, _unit_source(place, field, whole)) for place, field in whole if field in _UNIT_FROM}
    whole |= {
        key: rows
        for key, rows in lacking.items()
        if len(rows) > filled[key] and (key[0], _unit_source(*key, whole)) in sources
    }
    return _Unitless(
        columns=frozenset(whole),
        found=(*_whole_columns(whole), *_catalogue_entries(types, whole.keys())),
    )


def _unit_source(place: int, field: str, whole: Iterable[tuple[int, str]]) -> str:
    """Return the field that a column takes its unit from, its own where it stands for itself."""
    source = _UNIT_FROM.get(field, field)
    if source == "settings_unit" and any(at == place and _UNIT_FROM.get(other) == "range_unit" for at, other in whole):
        return "range_unit"
    return source


def _whole_columns(whole: Mapping[tuple[int, str], list[Record]]) -> list[Found]:
    """Report whole columns, together those that take their unit from one place: they lack it for one cause."""
    groups: dict[str, list[tuple[int, str]]] = defaultdict(list)
    for place, field in whole:
        source = _unit_source(place, field, whole)
        owner = "type." if isinstance(whole[place, field][0], DeviceType) else ""
        groups[f"{owner}{source}"].append((place, field))
    found: list[Found] = []
    for source, keys in groups.items():
        owner = "type." if source.startswith("type.") else ""
        fields = _in_order({field for _, field in keys})
        example = whole[next(key for key in keys if key[1] == fields[0])][0]
        found.append(
            Found(
                values={
                    "titles": ", ".join(title_of(f"{owner}{field}") for field in fields),
                    "count": sum(len(whole[key]) for key in keys),
                },
                fields=tuple(f"{owner}{field}" for field in fields),
                part=title_of(source),
                message="no value of {titles} has a unit, in its cell, its heading or a unit column ({count} values)",
                found=f"{example.unitless[fields[0]]} without unit",
                wanted="a unit in the heading, or a unit column",
                cells=tuple(cell for key in keys for cell in whole[key][0].cells(key[1])),
                stops_rows=False,
            )
        )
    return sorted(found, key=lambda each: (each.fields[0].startswith("type."), each.part))


def _catalogue_entries(types: Iterable[DeviceType], whole: Iterable[tuple[int, str]]) -> Iterator[Found]:
    """Report an entry of the catalogue itself, once, however many instruments are of its type."""
    columns = frozenset(whole)
    for entry in types:
        if not entry.unitless or entry.origin is None:
            continue
        fields = [f for f in _in_order(entry.unitless) if (id(entry.origin.place), f) not in columns]
        if fields:
            values = ", ".join(f"{title_of(f'type.{field}')} {entry.unitless[field]}" for field in fields)
            yield Found(
                values={"values": values},
                fields=tuple(f"type.{field}" for field in fields),
                message="",
                subject=entry.code or "",
                found=values,
                wanted="a unit",
                cells=tuple(cell for field in fields for cell in entry.cells(field)),
                stops_rows=False,
            )


def _whole_column_without_unit(plant: Plant) -> Verdict:
    unitless: _Unitless = plant.once("columns without unit", _unitless)
    return unitless.found or None


@rule(
    "DAT05",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_no_equipment,
    whole=_whole_column_without_unit,
    message="{values} without a unit in cell, heading or unit column",
    basis="common practice",
)
def number_without_unit(installed: Installed, plant: Plant) -> Verdict:
    """A number that needs a unit and has none in its cell, its heading or a unit column.

    Why it matters: 0 to 10 is a range in every unit; bar and psi are fourteen to one.

    What to do: state the unit.

    >>> from validation.example import said
    >>> rows = [{"tag": "PT-1", "LRV": "0", "URV": "10", "range unit": ""},
    ...         {"tag": "PT-2", "LRV": "0", "URV": "10", "range unit": "barg"}]
    >>> said("DAT05", rows)
    ['PT-1: LRV 0, URV 10 without a unit in cell, heading or unit column']
    """
    record = installed.record
    if not record.unitless or (_is_ratio(installed.letters) and record.unitless.keys() <= _MEASURED):
        return None
    unitless: _Unitless = plant.once("columns without unit", _unitless)
    fields: list[str] = []
    in_columns: list[str] = []
    for field in _in_order(record.unitless):
        origin = record.elsewhere.get(field) or record.origin
        whole = origin is not None and (id(origin.place), field) in unitless.columns
        (in_columns if whole or _unit_is_unread(field, record) else fields).append(field)
    if not fields:
        return Unchecked(*(title_of(field) for field in in_columns))
    values = ", ".join(f"{title_of(field)} {record.unitless[field]}" for field in fields)
    return Found(values={"values": values}, fields=tuple(fields), found=values, wanted="a unit")


def _unit_is_unread(field: str, record: Instrument) -> bool:
    """Whether a number takes its unit from a range that cannot be read, which is found as such."""
    return _UNIT_FROM.get(field) in ("range_unit", "settings_unit") and bool(_RANGE_CELLS & record.unread)


_RANGE_CELLS: Final = frozenset({"lrv", "urv", "range_unit", "settings_unit"})


@dataclass(frozen=True, slots=True, kw_only=True)
class _Unread:
    """The cells that cannot be read: by instrument, and those that are no single instrument's."""

    by_instrument: Mapping[int, tuple[CellProblem, ...]]
    elsewhere: tuple[CellProblem, ...]


def _unread_cells(plant: Plant) -> _Unread:
    problems = _once_a_column(plant)
    if not problems:
        return _Unread(by_instrument={}, elsewhere=())
    owners: dict[tuple[str, str, int], Installed] = {}
    for each in plant.instruments:
        for key in _rows_of(each):
            if key not in owners or (each.live and not owners[key].live):
                owners[key] = each
    index = {(row.origin.place.file, row.origin.place.sheet) for row in _index_rows(plant) if row.origin is not None}
    by_instrument: dict[int, list[CellProblem]] = defaultdict(list)
    elsewhere: list[CellProblem] = []
    for problem in problems:
        cell = problem.cell
        owner = owners.get((cell.file, cell.sheet, cell.row))
        if owner is None and (cell.file, cell.sheet) in index and problem.subject:
            # The row agrees with another of its tag, which speaks for both.
            owner = next(iter(plant.by_tag(problem.subject)), None)
        if problem.whole_column or owner is None:
            elsewhere.append(problem)
        else:
            by_instrument[id(owner)].append(problem)
    return _Unread(
        by_instrument={key: tuple(found) for key, found in by_instrument.items()}, elsewhere=tuple(elsewhere)
    )


def _rows_of(installed: Installed) -> Iterator[tuple[str, str, int]]:
    for row in (installed.record, *installed.signals):
        if row.origin is not None:
            yield (row.origin.place.file, row.origin.place.sheet, row.origin.row)
            for origin in row.elsewhere.values():
                yield (origin.place.file, origin.place.sheet, origin.row)


def _once_a_column(plant: Plant) -> list[CellProblem]:
    """Return the unread cells; those of a column that cannot be read at all as one."""
    problems = list(plant.lists.problems)
    columns: dict[tuple[str, str, int], list[CellProblem]] = defaultdict(list)
    for problem in plant.more_problems:
        columns[(problem.cell.file, problem.cell.sheet, problem.cell.column)].append(problem)
    for found in columns.values():
        cells = list({problem.cell: problem for problem in found}.values())
        filled = _filled_cells(plant, cells[0])
        if len(cells) > 1 and len(cells) == len(filled):
            first = min(cells, key=lambda problem: problem.cell)
            problems.append(replace(first, subject="", whole_column=True, cells_concerned=len(cells)))
        else:
            problems.extend(cells)
    return problems


def _filled_cells(plant: Plant, problem: CellProblem) -> set[Cell]:
    return {
        cell
        for row in _index_rows(plant)
        if getattr(row, problem.field, None) is not None
        for cell in row.cells(problem.field)
        if (cell.file, cell.sheet, cell.column) == (problem.cell.file, problem.cell.sheet, problem.cell.column)
    }


def _unread_elsewhere(plant: Plant) -> Verdict:
    """Whole columns, and cells of sheets that hold no instruments."""
    unread: _Unread = plant.once("unread cells", _unread_cells)
    return [_unread(problem) for problem in unread.elsewhere] or None


def _unread(problem: CellProblem, record: Instrument | None = None) -> Found:
    whole = problem.whole_column
    message = ""
    if whole:
        message = "{title}: none of its {count} cells can be read, such as '{text}': {reason}"
    return Found(
        values={
            "title": problem.title,
            "text": problem.text,
            "reason": problem.reason,
            "count": problem.cells_concerned,
        },
        fields=(),
        part=problem.title,
        message=message,
        subject="" if whole or record is not None else problem.subject,
        found=problem.text,
        wanted=" or ".join(problem.readings),
        fixes=tuple(
            Fix(text=f"{problem.title} {reading}", change={} if record is None else _as_read(problem, reading, record))
            for reading in problem.readings
        ),
        cells=(problem.cell,),
        stops_rows=False,
    )


_NUMBER = re.compile(r"[-+]?[0-9][0-9.,' ]*")


def _as_read(problem: CellProblem, reading: str, record: Instrument) -> dict[str, str]:
    """Return the change that writes one reading into the cell, where it can stand there with its unit."""
    field = _TITLES.get(problem.title.casefold())
    if field is None:
        return {}
    column = INSTRUMENTS.column(field)
    texts = [reading]
    numbers = _NUMBER.findall(problem.text)
    if len(numbers) == 1 and _NUMBER.fullmatch(reading):
        texts.insert(0, problem.text.replace(numbers[0].strip(), reading))
    if record.range_unit is not None and "range_unit" in column.unit_from:
        texts.append(f"{reading} {unit_label(record.range_unit)}")
    for text in texts:
        try:
            value = value_of(column, text)
        except CannotStand:
            continue
        if value is not None and not (isinstance(value, Quantity) and value.unit is None):
            return {column.title: text}
    return {}


@rule(
    "DAT09",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_no_equipment,
    whole=_unread_elsewhere,
    message="{title}: '{text}' cannot be read: {reason}",
    basis="the reader's closed tables",
)
def unread_cell(installed: Installed, plant: Plant) -> Verdict:
    """A cell that cannot be read.

    Why it matters: what it holds is not checked, by this audit or by anybody's formula.

    What to do: write it so that it has one reading; those considered stand beside it.

    >>> from validation.example import said
    >>> rows = [{"tag": "AIT-1", "LRV": "0", "URV": "50", "range unit": "Hazen"},
    ...         {"tag": "AIT-2", "LRV": "0", "URV": "50", "range unit": "NTU"}]
    >>> [line[:37] for line in said("DAT09", rows)]
    ["AIT-1: range unit: 'Hazen' cannot be "]
    """
    unread: _Unread = plant.once("unread cells", _unread_cells)
    problems = unread.by_instrument.get(id(installed))
    if problems is None:
        # Found on the column, or on the first tag of the cell.
        unread_here = installed.record.unread
        return Unchecked(*(title_of(field) for field in _in_order(unread_here))) if unread_here else None
    return [_unread(problem, installed.record) for problem in problems]
