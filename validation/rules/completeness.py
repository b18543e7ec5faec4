"""DAT: what is missing from the record, cannot be read, or is stated twice and differently."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Iterator
from typing import Any

from instruments.column import Reads
from instruments.columns import INSTRUMENTS
from instruments.installed import Installed
from instruments.kind import Kind, touches_process
from instruments.letters import read_letters
from instruments.marking import read_marking
from instruments.plant_data import DEFAULT_REQUIRED
from instruments.record import DeviceType, Record
from instruments.workbook.problem import CellProblem
from loops.cable import read_conductor_size
from loops.circuit import Loop
from loops.plant import Plant, name_key, same_value
from loops.wiring import transmitter_of, volts_in
from validation.finding import Fix, Found, NotApplicable, Severity, Unchecked, Verdict
from validation.rule import Subject, rule, title_of
from validation.rules.electrical import signal_class

_MEASURES_NO_RANGE = frozenset({Kind.FIRE_DETECTOR, Kind.GLASS})
_TITLES = {column.title.casefold(): column.field for column in INSTRUMENTS.columns}


# ------------------------------------------------------------------------------------------- required fields


def _required(plant: Plant) -> tuple[tuple[str, tuple[str, ...]], ...]:
    """Return the fields that the plant requires: title, and the record's fields that fill it."""
    names = plant.data.required_fields or DEFAULT_REQUIRED
    required: list[tuple[str, tuple[str, ...]]] = []
    for name in names:
        field = _TITLES.get(name.casefold())
        if field is None:
            continue
        column = INSTRUMENTS.column(field)
        fields = column.into if column.reads in (Reads.RANGE, Reads.TRIPLET) else (field,)
        required.append((column.title, fields))
    return tuple(required)


def _asked_of(title: str, installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if title == "P&ID":
        return kind is not None and kind.process
    if title in ("range", "range unit", "LRV", "URV"):
        if kind is None or kind.measures != "yes" or kind in _MEASURES_NO_RANGE:
            return False
        return not (kind is Kind.ELEMENT and _transmitter(installed, plant) is not None)
    return True


def _transmitter(installed: Installed, plant: Plant) -> Installed | None:
    loop = plant.loop_of(installed)
    return transmitter_of(installed, loop.members) if loop is not None else None


def _filled(installed: Installed, title: str, fields: tuple[str, ...]) -> bool:
    record = installed.record
    if title == "kind":
        return installed.kind is not None or bool(record.kind_written)
    if title == "range unit":
        quantities = (record.lrv, record.urv)
        return record.range_unit is not None or any(each is not None and each.unit for each in quantities)
    return all(getattr(record, field) is not None for field in fields)


def _excused(installed: Installed, title: str, fields: tuple[str, ...]) -> bool:
    """Whether another rule speaks of it: an unread cell, a number without its unit, a row without a tag."""
    record = installed.record
    if title == "tag":
        return True
    if title == "range unit" and ({"lrv", "urv"} & (record.unitless.keys() | record.unread)):
        return True
    return any(field in record.unread or field in record.unitless for field in fields)


def _column_there(title: str, fields: tuple[str, ...], plant: Plant) -> bool:
    if title == "kind":
        return True
    if title == "range unit":
        # Units stand in cells or headings as often as in a column of their own.
        return plant.has_column("range_unit", "lrv", "urv")
    return plant.has_column(*fields)


def _required_column_absent(plant: Plant) -> Verdict:
    absent: list[str] = []
    asking = 0
    for title, fields in _required(plant):
        if _column_there(title, fields, plant):
            continue
        count = sum(1 for each in plant.live if not each.equipment_tag and _asked_of(title, each, plant))
        if count:
            absent.append(title)
            asking = max(asking, count)
    if not absent:
        return None
    return Found(
        values={"columns": ", ".join(absent), "count": asking},
        fields=tuple(_TITLES[title.casefold()] for title in absent),
        message="no sheet has a column for {columns}; {count} instruments need it",
        found="no such column",
        wanted=", ".join(absent),
        stops_rows=False,
    )


@rule(
    "DAT01",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: not installed.equipment_tag,
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
    required: tuple[tuple[str, tuple[str, ...]], ...] = plant.once("required fields", _required)
    blank: list[str] = []
    shown: list[str] = []
    for title, fields in required:
        if _filled(installed, title, fields) or not _asked_of(title, installed, plant):
            continue
        if _excused(installed, title, fields) or not _column_there(title, fields, plant):
            continue
        blank.append(_TITLES[title.casefold()])
        reason = next(
            (installed.record.blanks[each] for each in fields if each in installed.record.blanks), ""
        )
        shown.append(f"{title} ({reason})" if reason else title)
    if not blank:
        return None
    return Found(
        values={"fields": ", ".join(shown)}, fields=tuple(blank), found="blank", wanted=", ".join(shown)
    )


def _no_line_or_equipment_column(plant: Plant) -> Verdict:
    if plant.has_column("line", "equipment"):
        return None
    count = sum(1 for each in plant.live if _on_the_process(each, plant))
    if not count:
        return None
    return Found(
        values={"count": count},
        fields=("line", "equipment"),
        message="no sheet has a column for line or equipment; {count} instruments touch the process",
        found="no such column",
        wanted="line or equipment",
    )


def _on_the_process(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if kind is None or installed.equipment_tag or kind is Kind.SOLENOID:
        return False
    if kind is Kind.SWITCH and installed.letters[:1] == "Z":
        return False
    return touches_process(kind, installed.letters)


@rule(
    "DAT02",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_on_the_process,
    whole=_no_line_or_equipment_column,
    message="a {kind} that is on neither a line nor equipment",
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
    return Found(
        values={"kind": kind.value if kind else ""},
        fields=("line", "equipment"),
        found="blank",
        wanted="line or equipment",
    )


# ------------------------------------------------------------------------------------------- units and cells


def _columns_without_unit(plant: Plant) -> dict[tuple[int, str], tuple[Record, int]]:
    """Return the columns of which every filled cell lacks its unit: place and field, an example and a count."""
    lacking: dict[tuple[int, str], list[Record]] = defaultdict(list)
    filled: set[tuple[int, str]] = set()
    records: list[Record] = [row for each in plant.instruments for row in (each.record, *each.signals)]
    records.extend(plant.types.values())
    for record in dict.fromkeys(map(_Same, records)):
        origin = record.record.origin
        if origin is None:
            continue
        for field in record.record.unitless:
            lacking[(id(origin.place), field)].append(record.record)
    wanted: dict[int, set[str]] = defaultdict(set)
    for place, field in lacking:
        wanted[place].add(field)
    for each in records:
        if each.origin is None:
            continue
        place = id(each.origin.place)
        for field in wanted.get(place, ()):
            if getattr(each, field, None) is not None:
                filled.add((place, field))
    return {
        key: (found[0], len(found)) for key, found in lacking.items() if key not in filled and len(found) > 1
    }


class _Same:
    """A record compared by identity."""

    __slots__ = ("record",)

    def __init__(self, record: Record) -> None:
        self.record = record

    def __hash__(self) -> int:
        return id(self.record)

    def __eq__(self, other: object) -> bool:
        return isinstance(other, _Same) and other.record is self.record


def _whole_column_without_unit(plant: Plant) -> Verdict:
    found: list[Found] = []
    columns = plant.once("columns without unit", _columns_without_unit)
    for (_, field), (record, count) in columns.items():
        owner = "type." if isinstance(record, DeviceType) else ""
        title = title_of(f"{owner}{field}")
        found.append(
            Found(
                values={"title": title, "count": count},
                fields=(f"{owner}{field}",),
                part=title,
                message="no value of {title} has a unit, in its cell, its heading or a unit column ({count} values)",
                found=f"{record.unitless[field]} without unit",
                wanted="a unit in the heading, or a unit column",
                cells=record.cells(field),
                stops_rows=False,
            )
        )
    return sorted(found, key=lambda each: each.part)


@rule(
    "DAT05",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
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
    columns = plant.once("columns without unit", _columns_without_unit)
    values: list[str] = []
    fields: list[str] = []
    for record, owner in (
        (installed.record, ""),
        (installed.record.own, "type."),
        (installed.listed_type, "type."),
    ):
        if record is None or record.origin is None:
            continue
        for field, text in record.unitless.items():
            if (id(record.origin.place), field) not in columns:
                values.append(f"{title_of(owner + field)} {text}")
                fields.append(owner + field)
    if not values:
        return None
    return Found(
        values={"values": ", ".join(values)},
        fields=tuple(fields),
        found=", ".join(values),
        wanted="a unit",
    )


def _problems_by_row(plant: Plant) -> dict[tuple[str, str, int], list[CellProblem]]:
    by_row: dict[tuple[str, str, int], list[CellProblem]] = defaultdict(list)
    for problem in plant.problems:
        if not problem.whole_column:
            by_row[(problem.cell.file, problem.cell.sheet, problem.cell.row)].append(problem)
    return by_row


def _rows_of(installed: Installed) -> Iterator[tuple[str, str, int]]:
    for row in {id(each): each for each in (installed.record, *installed.signals)}.values():
        if row.origin is not None:
            yield (row.origin.place.file, row.origin.place.sheet, row.origin.row)
            for origin in row.elsewhere.values():
                yield (origin.place.file, origin.place.sheet, origin.row)


def _unread_elsewhere(plant: Plant) -> Verdict:
    """Whole columns, and cells of sheets that hold no instruments."""
    own = {key for each in plant.instruments for key in _rows_of(each)}
    found = [
        _unread(problem, whole=problem.whole_column)
        for problem in plant.problems
        if problem.whole_column or (problem.cell.file, problem.cell.sheet, problem.cell.row) not in own
    ]
    return found or None


def _unread(problem: CellProblem, *, whole: bool) -> Found:
    message = "{title}: '{text}' cannot be read: {reason}"
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
        subject="" if whole else problem.subject,
        found=problem.text,
        wanted=" or ".join(problem.readings),
        fixes=tuple(Fix(text=f"{problem.title} {reading}") for reading in problem.readings),
        cells=(problem.cell,),
        stops_rows=False,
    )


@rule(
    "DAT09",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
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
    by_row: dict[tuple[str, str, int], list[CellProblem]] = plant.once(
        "unread cells by row", _problems_by_row
    )
    if not by_row:
        return None
    found: list[Found] = []
    for key in dict.fromkeys(_rows_of(installed)):
        found.extend(_unread(problem, whole=False) for problem in by_row.get(key, ()))
    return [_without_subject(each) for each in found] or None


def _without_subject(found: Found) -> Found:
    from dataclasses import replace

    return replace(found, subject="")


# ------------------------------------------------------------------------------------------------ what is alone


def _element_or_well(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if installed.equipment_tag:
        return False
    if kind is Kind.ELEMENT:
        return True
    return kind is Kind.PRIMARY_ELEMENT and (_is_well(installed) or installed.letters[-1:] == "E")


def _is_well(installed: Installed) -> bool:
    return installed.letters[:1] == "T" and installed.letters[-1:] == "W"


_INDICATES = frozenset({Kind.GAUGE, Kind.INDICATOR, Kind.GLASS})
_TAKES = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR, Kind.SWITCH})


@rule(
    "DAT06",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_element_or_well,
    needs=("loop",),
    message="{what} alone in its loop {loop}: {lacks}",
    basis="common practice",
)
def element_alone(installed: Installed, plant: Plant) -> Verdict:
    """An element with neither transmitter nor an input of its own in its loop, or a well without an element.

    Why it matters: a sensor that goes nowhere was forgotten at its other end: no channel, no cable.

    What to do: add the transmitter or the input, or correct the number of one of the two. Local
    indication counts.

    >>> from validation.example import said
    >>> said("DAT06", [{"tag": "TE-1", "I/O type": ""}, {"tag": "TE-2", "I/O type": "RTD"}])
    ['TE-1: an element alone in its loop T-1: it has neither a transmitter nor an input of its own']
    """
    loop = plant.loop_of(installed)
    others = [each for each in loop.members if each is not installed] if loop is not None else []
    if _is_well(installed):
        if any(each.kind in _TAKES | _INDICATES | {Kind.ELEMENT} or each.measuring_point for each in others):
            return None
        return Found(
            values={"what": "a well", "loop": installed.loop, "lacks": "it has no element"},
            fields=("tag", "loop"),
            found="no element",
            wanted="an element, a transmitter or a thermometer",
        )
    if any(row.io_type or row.io_address or row.card for row in installed.signals):
        return None
    if any(each.kind in _TAKES | _INDICATES or each.measuring_point for each in others):
        return None
    if {"io_type", "io_address"} & installed.record.unread:
        return Unchecked("I/O type")
    if not plant.has_column("io_type", "io_address", "card"):
        # The list does not say what is wired to what; a transmitter is still seen by its tag.
        return Unchecked("I/O type", "I/O address")
    return Found(
        values={
            "what": "an element",
            "loop": installed.loop,
            "lacks": "it has neither a transmitter nor an input of its own",
        },
        fields=("tag", "io_type"),
        found="no transmitter, no input",
        wanted="a transmitter, an input or a local indication",
    )


_FINAL = frozenset(
    {Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID, Kind.REGULATOR}
)
_TAG_IN_TEXT = re.compile(r"[A-Za-z0-9][A-Za-z0-9\-./]{2,20}")


def _is_controller(installed: Installed) -> bool:
    letters = installed.letters
    if "C" not in letters[1:] or installed.kind in _FINAL or installed.kind is Kind.SWITCH:
        return False
    if installed.tag is not None and installed.tag.code is not None:
        return False
    return any(function.startswith("C") for function in read_letters(letters).functions)


def _measures(installed: Installed) -> bool:
    return installed.measuring_point or (
        installed.kind is not None and installed.kind.measures == "yes" and installed.kind.wired != "no"
    )


def _acts(installed: Installed) -> bool:
    return installed.kind in _FINAL or any(
        name_key(row.io_type).startswith(("ao", "isao")) for row in installed.signals if row.io_type
    )


def _names_another_controller(loop: Loop, controllers: list[Installed], plant: Plant) -> bool:
    for circuit in loop.circuits:
        parent = circuit.row.parent_loop if circuit.row is not None else None
        if parent:
            return True
    for row in plant.loop_rows:
        if row.parent_loop and name_key(row.number) == name_key(loop.name):
            return True
    for controller in controllers:
        for text in _TAG_IN_TEXT.findall(controller.record.remarks or ""):
            for named in plant.by_tag(text):
                if named not in loop.members and _is_controller(named):
                    return True
    return False


def _has_controller(loop: Loop, plant: Plant) -> bool:
    return any(_is_controller(each) for each in loop.members)


@rule(
    "DAT07",
    severity=Severity.FAULT,
    on=Subject.LOOP,
    applies=_has_controller,
    message="{controller} has {lacks} in its loop",
    basis="common practice",
)
def loop_not_whole(loop: Loop, plant: Plant) -> Verdict:
    """A loop with a controller that has no measurement or no final element.

    Why it matters: a controller without either controls nothing; one of them is missing from the
    list, or carries another loop's number.

    What to do: add what is missing or correct its loop. A controller that names another in its
    remarks or as its parent loop needs no final element; a hand controller needs no measurement.

    >>> from validation.example import said
    >>> said("DAT07", [{"tag": "FIC-1"}, {"tag": "FT-1"}])
    ['F-1: FIC-1 has no final element in its loop']
    >>> said("DAT07", [{"tag": "FIC-1"}, {"tag": "FT-1"}, {"tag": "FV-1"}])
    []
    """
    controllers = [each for each in loop.members if _is_controller(each)]
    lacks: list[str] = []
    # Hand and time are their own measurement.
    by_hand = all(each.letters[:1] in "HK" for each in controllers)
    if not by_hand and not any(_measures(each) for each in loop.members):
        lacks.append("no measurement")
    if not any(_acts(each) for each in loop.members) and not _names_another_controller(
        loop, controllers, plant
    ):
        lacks.append("no final element")
    if not lacks:
        return None
    return Found(
        values={"controller": ", ".join(each.name for each in controllers), "lacks": " and ".join(lacks)},
        fields=("tag",),
        found=" and ".join(lacks),
        wanted="measurement, controller and final element",
    )


# --------------------------------------------------------------------------------------- names and statements

_NO_NAME = re.compile(
    r"\b(?:loop|2[\s-]?wire|self|internal|integral|card|system|mains|battery|solar|ups|instrument air|air|local)\b",
    re.IGNORECASE,
)


def _named(installed: Installed, plant: Plant) -> Iterator[tuple[str, str, str, str]]:
    """Give each name that the row or its circuits use: title, the name, the sheet it is listed in, the field."""
    record = installed.record
    if record.device_type:
        yield "device type", record.device_type, "Device types", "device_type"
    if record.area and installed.area is None and not installed.unclassified:
        yield "area", record.area, "Areas", "area"
    elif record.area and installed.area is not None and not installed.area.from_row_cell:
        yield "area", record.area, "Areas", "area"
    circuits = plant.circuits_of(installed)
    own = [circuit for circuit in circuits if circuit.device is installed]
    rows = installed.signals or (record,)
    for field, title in (("barrier", "barrier"), ("card", "card")):
        names = dict.fromkeys(
            [getattr(row, field) for row in rows] + [getattr(circuit.row, field, None) for circuit in own]
        )
        for name in names:
            if name:
                yield title, name, "Device types", field
    for name in dict.fromkeys(row.power_supply for row in rows):
        if name and volts_in(name) is None and not _NO_NAME.search(name):
            yield "power supply", name, "Device types", "power_supply"
    for row in rows:
        for name in re.split(r"[,;\n]", row.cable or ""):
            if name.strip():
                yield "cable", name.strip(), "Cables", "cable"
    names = dict.fromkeys(
        [row.cable_type for row in rows] + [circuit.row.cable_type for circuit in own if circuit.row]
    )
    for name in names:
        if name and read_conductor_size(name) is None:
            yield "cable type", name, "Cable types", "cable_type"


def _listed(sheet: str, name: str, plant: Plant) -> tuple[bool, bool]:
    """Return whether the name is listed, and whether two different entries have it."""
    key = name_key(name)
    if sheet == "Device types":
        return key in plant.types or bool(plant.by_tag(name)), key in plant.types_twice
    if sheet == "Areas":
        return key in plant.areas, key in plant.areas_twice
    if sheet == "Cables":
        return key in plant.cables, key in plant.cables_twice
    return key in plant.cable_types, key in plant.cable_types_twice


def _absent_sheets(plant: Plant) -> dict[str, tuple[str, int]]:
    absent: dict[str, tuple[str, int]] = {}
    for each in plant.live:
        for title, name, sheet, _ in _named(each, plant):
            if plant.has_sheet(sheet) or _listed(sheet, name, plant)[0]:
                continue
            first = absent.get(sheet)
            absent[sheet] = (first[0], first[1] + 1) if first else (f"{title} {name}", 1)
    return absent


def _sheet_absent(plant: Plant) -> Verdict:
    absent = plant.once("sheets that are named and absent", _absent_sheets)
    if not absent:
        return None
    details = "; ".join(
        f"{sheet}: {count} names such as {first}" for sheet, (first, count) in sorted(absent.items())
    )
    return Found(
        values={"details": details},
        fields=(),
        part=", ".join(sorted(absent)),
        message="the list names what no sheet describes: {details}",
        found="no such sheet",
        wanted=", ".join(sorted(absent)),
        stops_rows=False,
    )


@rule(
    "DAT10",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    whole=_sheet_absent,
    message="{title} {name} is not listed on {sheet}",
    basis="common practice",
)
def name_not_listed(installed: Installed, plant: Plant) -> Verdict:
    """A device type, area, barrier, card, supply, cable or cable type that is named and not listed.

    Why it matters: every check that needs the entry is left out, in silence, if nobody says so.

    What to do: correct the name, or list the entry. Two different entries with one name are no
    entry either.

    >>> from validation.example import said
    >>> types = [{"code": "DP-30", "kind": "transmitter", "maximum V": "42"}]
    >>> said("DAT10", [{"tag": "PT-1", "device type": "DP-3O"}], types=types)
    ['PT-1: device type DP-3O is not listed on Device types']
    >>> said("DAT10", [{"tag": "PT-1", "device type": "DP-30"}], types=types)
    []
    """
    absent = plant.once("sheets that are named and absent", _absent_sheets)
    found: list[Found] = []
    for title, name, sheet, field in dict.fromkeys(_named(installed, plant)):
        listed, twice = _listed(sheet, name, plant)
        if (listed and not twice) or sheet in absent:
            continue
        nearest = _nearest(sheet, name, plant) if not listed else ()
        found.append(
            Found(
                values={"title": title, "name": name, "sheet": sheet},
                fields=(field,),
                part=title,
                message="{title} {name} is listed twice on {sheet}, with different figures" if twice else "",
                found=name,
                wanted=" or ".join(nearest),
                fixes=tuple(
                    Fix(
                        text=f"{title} {each}",
                        change={title: each} if getattr(installed.record, field) == name else {},
                    )
                    for each in nearest
                ),
            )
        )
    return found or None


def _nearest(sheet: str, name: str, plant: Plant) -> tuple[str, ...]:
    from rapidfuzz import fuzz, process

    entries: dict[str, Any] = {
        "Device types": plant.types,
        "Areas": plant.areas,
        "Cables": plant.cables,
        "Cable types": plant.cable_types,
    }[sheet]
    codes = [getattr(entry, "code", None) or getattr(entry, "number", "") for entry in entries.values()]
    likely = process.extract(name, codes, scorer=fuzz.ratio, limit=2, score_cutoff=70)
    return tuple(code for code, _, _ in likely)


_STATED_TWICE = ("ex_marking", "certificate", "signal", "wires")
_LIMITS = tuple(
    each
    for each in DeviceType.__dataclass_fields__
    if each not in Record.__dataclass_fields__
    and each not in (*_STATED_TWICE, "code", "kind", "description", "maker", "model", "ip_code", "limit_unit")
)


@rule(
    "DAT11",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: installed.listed_type is not None,
    message="{title}: the row says {row}, its device type {code} says {type}",
    basis="common practice",
)
def row_against_type(installed: Installed, plant: Plant) -> Verdict:
    """The row and its device type state different values for the same thing.

    Why it matters: one of the two papers is out of date, or the wrong device was fitted. The row's
    value is used.

    What to do: correct whichever is wrong; name another device type if the row is right.

    >>> from validation.example import said
    >>> types = [{"code": "P1", "kind": "transmitter", "wires": "2", "LRL": "0 barg", "URL": "10 barg"}]
    >>> said("DAT11", [{"tag": "PT-1", "device type": "P1", "wires": "4"}], types=types)
    ['PT-1: wires: the row says 4, its device type P1 says 2']
    >>> said("DAT11", [{"tag": "PT-1", "device type": "P1", "wires": "2"}], types=types)
    []
    """
    listed = installed.listed_type
    if listed is None:
        return NotApplicable()
    found: list[Found] = []
    pairs: list[tuple[str, Any, Any]] = [
        (field, getattr(installed.record, field), getattr(listed, field)) for field in _STATED_TWICE
    ]
    own = installed.record.own
    if own is not None:
        pairs.extend((field, getattr(own, field), getattr(listed, field)) for field in _LIMITS)
    for field, row, entry in pairs:
        if row is None or entry is None or _says_the_same(field, row, entry):
            continue
        name = field if field in _STATED_TWICE else f"type.{field}"
        title = title_of(name)
        found.append(
            Found(
                values={"title": title, "row": row, "type": entry, "code": listed.code},
                fields=(field if field in _STATED_TWICE else field,),
                part=title,
                found=f"{row} on the row",
                wanted=f"{entry} by the type, or the type's entry corrected",
                fixes=(
                    Fix(text=f"{title} {entry} on the row", change={title: _as_written(entry)}),
                    Fix(text=f"{title} {row} on the device type"),
                ),
                cells=(*installed.record.cells(field), *listed.cells(field)),
            )
        )
    return found or None


def _as_written(value: Any) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    return f"{value:g}" if isinstance(value, float) else str(value)


def _says_the_same(field: str, row: Any, entry: Any) -> bool:
    if same_value(row, entry):
        return True
    if field == "certificate":
        return _letters_and_digits(row) == _letters_and_digits(entry)
    if field == "signal":
        one, other = signal_class(row), signal_class(entry)
        return one is None or other is None or one == other
    if field == "ex_marking":
        return _marking_without_category(row) == _marking_without_category(entry)
    return (
        isinstance(row, float)
        and isinstance(entry, float)
        and abs(row - entry) <= 1e-9 * max(abs(row), abs(entry))
    )


def _letters_and_digits(text: str) -> str:
    return "".join(letter for letter in text.casefold() if letter.isalnum())


def _marking_without_category(text: str) -> Any:
    marking = read_marking(text)
    if not marking.readable:
        return _letters_and_digits(text)
    # The category says again what the EPL says; it may stand in one paper and not in the other.
    return {name: value for name, value in marking.as_vector().items() if name != "atex"}
