"""The whole plant put together from all its lists: everything by name, lookups built once."""

from __future__ import annotations

import dataclasses
import re
from collections import Counter, defaultdict
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from types import MappingProxyType
from typing import Any, Final

from instruments.area import Area, Classification, area_from_classification, read_classification, understood
from instruments.columns import AREAS
from instruments.installed import NOT_LIVE, Installed
from instruments.kind import Kind, derive_kind, read_kind
from instruments.marking import Marking, read_marking
from instruments.origin import Cell, Origin
from instruments.plant_codes import PlantCode, codes_with
from instruments.plant_data import PlantData
from instruments.quantity import Quantity
from instruments.record import DeviceType, Instrument, Record
from instruments.signal_words import io_types, signal_classes
from instruments.tag import (
    TagProfile,
    TagReading,
    assembly_key,
    best_profile,
    is_equipment_shape,
    is_valve,
    loop_of,
    match_key,
    natural_key,
    plant_profile,
    read_tag,
)
from instruments.workbook.lists import Lists
from instruments.workbook.problem import CellProblem
from loops.circuit import Circuit, Loop
from loops.record import Cable, CableType, LoopRow, Termination
from loops.wiring import has_io, loop_key, wire

_RECORD_OWN = frozenset(each.name for each in dataclasses.fields(Record))
_FIELDS = tuple(each.name for each in dataclasses.fields(Instrument) if each.name not in _RECORD_OWN)
_TYPE_FIELDS = tuple(each.name for each in dataclasses.fields(DeviceType) if each.name not in _RECORD_OWN)
_TYPE_ONLY = frozenset(_TYPE_FIELDS) - frozenset(_FIELDS)

# What a second row of one instrument may say differently: its other signal and how that is wired.
SIGNAL_FIELDS = frozenset(
    {
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
        "contact",
        "trip_action",
        "failure_direction",
        "bad_signal_detection",
    }
)
# Not statements about the instrument.
_NO_STATEMENT = frozenset(
    {
        "tag",
        "tag_written",
        "tag_cell",
        "tag_number",
        "kind_written",
        "place",
        "remarks",
        "revision",
        "hold",
        "own",
        "range_unit",
        "system_unit",
        "settings_unit",
    }
)
COMPARED = tuple(name for name in _FIELDS if name not in _NO_STATEMENT)
# Fields that a row and its device type can both state.
ROW_AND_TYPE = ("ex_marking", "certificate", "signal", "wires", "ip_code", "maker", "model")


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class AreaInPlant:
    """An area of the list, or one that rows' own classifications make."""

    record: Area
    name: str
    live: bool = True

    def cells(self, name: str) -> tuple[Cell, ...]:
        """Return the cells of a field of the area."""
        return self.record.cells(name.rpartition(".")[2]) or self.record.cells("code")


@dataclass(slots=True, kw_only=True, eq=False)
class Plant:
    """Everything that the lists say, by name.

    Built by `assemble`; read only from then on.
    """

    data: PlantData
    lists: Lists
    instruments: tuple[Installed, ...]
    circuits: tuple[Circuit, ...]
    loops: tuple[Loop, ...]
    areas_seen: tuple[AreaInPlant, ...]
    types: Mapping[str, DeviceType]
    types_twice: frozenset[str]
    areas: Mapping[str, Area]
    areas_twice: frozenset[str]
    cables: Mapping[str, Cable]
    cables_twice: frozenset[str]
    cable_types: Mapping[str, CableType]
    cable_types_twice: frozenset[str]
    terminations: tuple[Termination, ...]
    loop_rows: tuple[LoopRow, ...]
    io_list: tuple[Instrument, ...]
    alarm_list: tuple[Instrument, ...]
    profile: TagProfile
    codes: Mapping[str, PlantCode]
    assumptions: tuple[str, ...] = ()
    more_problems: tuple[CellProblem, ...] = ()
    _by_tag: dict[Any, tuple[Installed, ...]] = field(default_factory=dict)
    _asked: dict[str, tuple[Installed, ...]] = field(default_factory=dict)
    _by_loop: dict[str, Loop] = field(default_factory=dict)
    _circuits_of: dict[int, tuple[Circuit, ...]] = field(default_factory=dict)
    _whole: dict[str, Any] = field(default_factory=dict)
    _part_of: Plant | None = field(default=None, repr=False)
    _columns: frozenset[str] = frozenset()
    _notes: dict[str, Any] = field(default_factory=dict)

    @property
    def file_name(self) -> str:
        """The name of the file that holds the index: the subject of what is wrong with the whole list."""
        return self.lists.index_file

    @property
    def name(self) -> str:
        """The subject's name where the whole list is the subject."""
        return self.file_name

    @property
    def problems(self) -> tuple[CellProblem, ...]:
        """The cells that could not be read."""
        return (*self.lists.problems, *self.more_problems)

    @property
    def live(self) -> tuple[Installed, ...]:
        """The live instruments."""
        live = self._notes.get("live")
        if live is None:
            live = self._notes["live"] = tuple(each for each in self.instruments if each.live)
        return live

    def threshold(self, name: str, default: float) -> float:
        """Return the plant's threshold of that name, or the catalogue's default."""
        return self.data.threshold(name, default)

    def has_column(self, *names: str) -> bool:
        """Whether any sheet of the index has a column that is read into one of the fields."""
        return any(name in self._columns for name in names)

    def sheet_has_column(self, installed: Installed, *names: str) -> bool:
        """Whether a sheet on which the instrument stands has a column for one of the fields.

        Where all stand on one sheet, what it lacks the whole list lacks, and this says yes.
        """
        if not self.once("index on several sheets", _on_several_sheets):
            return True
        for row in (installed.record, *installed.signals):
            if row.origin is None or any(name in row.origin.place.columns for name in names):
                return True
        return False

    def has_sheet(self, kind: str) -> bool:
        """Whether a sheet of that kind was read."""
        return bool(self.lists.records.get(kind))

    def by_tag(self, text: str) -> tuple[Installed, ...]:
        """Return the live instruments with that tag, however it is written."""
        found = self._asked.get(text)
        if found is None:
            key = _lookup_key(read_tag(text, profile=self.profile, codes=self.codes))
            found = self._asked[text] = self._by_tag.get(key, ())
        return found

    def sharing_a_tag(self) -> tuple[tuple[Installed, ...], ...]:
        """Return the groups of live instruments that have one tag though their rows disagree."""
        return tuple(group for group in self._by_tag.values() if len(group) > 1)

    def loop_of(self, installed: Installed) -> Loop | None:
        """Return the loop an instrument belongs to."""
        return self._by_loop.get(loop_key(installed.loop)) if installed.loop else None

    def circuits_of(self, installed: Installed) -> tuple[Circuit, ...]:
        """Return the circuits that an instrument stands on."""
        return self._circuits_of.get(id(installed), ())

    def named_type(self, text: str | None) -> DeviceType | None:
        """Return the catalogue entry that a text names: a code, or a tag of the list with a device type."""
        if not text:
            return None
        key = _key(text)
        found = self.types.get(key)
        if found is not None or key in self.types_twice:
            return found
        for installed in self.by_tag(text):
            if installed.type is not None:
                return installed.type
        return None

    def whole_finding(self, code: str, ask: Callable[[Plant], Any]) -> Any:
        """Return what is wrong with a whole column, asked once."""
        if code not in self._whole:
            self._whole[code] = ask(self)
        return self._whole[code]

    def stand_in(self, whole: Plant) -> None:
        """Take what is wrong with whole columns from the whole plant that this one is a part of."""
        self._whole = dict(whole._whole)
        self._part_of = whole.whole

    @property
    def whole(self) -> Plant:
        """The whole plant that this one is a part of, as it stood when it was cut; itself where it is no part."""
        return self if self._part_of is None else self._part_of

    def once(self, name: str, make: Callable[[Plant], Any]) -> Any:
        """Return what `make` gives for this plant, made once: lookups that only some rules need."""
        if name not in self._notes:
            self._notes[name] = make(self)
        return self._notes[name]


def assemble(lists: Lists, *, profile: TagProfile | None = None) -> Plant:
    """Put the plant together from its lists.

    Parameters
    ----------
    lists
        All records of all sheets, as read.
    profile
        How the plant writes its tags, where that is known already: a part of a plant must not be read
        otherwise than the whole.
    """
    data = lists.plant
    records: Mapping[str, tuple[Any, ...]] = lists.records
    index: tuple[Instrument, ...] = records.get("Instruments", ())
    io_list: tuple[Instrument, ...] = records.get("IO list", ())
    if not index:
        index, io_list = io_list, ()
    codes = codes_with(data.plant_codes)
    assumptions: tuple[str, ...] = ()
    if profile is None:
        profile, assumptions = _profile(data, index)
    types, types_twice = _unlike_left_out(*_by_name(records.get("Device types", ()), "code"))
    written_areas: tuple[Area, ...] = records.get("Areas", ())
    listed_areas = tuple(map(understood, written_areas))
    areas, areas_twice = _by_name(listed_areas, "code")
    cables, cables_twice = _unlike_left_out(*_by_name(records.get("Cables", ()), "number"))
    cable_types, cable_types_twice = _unlike_left_out(*_by_name(records.get("Cable types", ()), "code"))
    readings: dict[str, TagReading] = {}

    def reading_of(text: str) -> TagReading:
        reading = readings.get(text)
        if reading is None:
            reading = readings[text] = read_tag(
                text,
                profile=profile,
                codes=codes,
                users_letters=frozenset(data.users_letters),
                numbering=data.numbering,
            )
        return reading

    def reading_of_row(row: Instrument) -> TagReading:
        reading = reading_of(row.tag or "")
        written = row.tag_written
        if written is None or written == row.tag or row.tag_cell is not None:
            return reading
        # Letters that only look Latin, and a small l, are seen in the tag as it is written.
        as_written = reading_of(written)
        return as_written if match_key(as_written) == match_key(reading) else reading

    fitter = _Fitter(data, types, {key: area for key, area in areas.items() if key not in areas_twice}, index)
    grouped, alone = _same_tag(index, reading_of)
    placed: list[tuple[Instrument, TagReading | None, tuple[Instrument, ...], str]] = []
    for rows in grouped:
        placed.extend(_one_or_several(rows, reading_of_row, profile))
    names: dict[str, int] = defaultdict(int)
    for record in sorted(alone, key=_contents):
        reading = reading_of_row(record) if record.tag else None
        name = _called(record, profile) or _untagged_name(record)
        names[name] += 1
        placed.append((record, reading, (record,), name if names[name] == 1 else f"{name} ({names[name]})"))
    drafts = [fitter.install(*each) for each in placed]
    _give_listed_channels(drafts, io_list, reading_of)
    _give_loops(drafts, data)
    _give_kinds(drafts, codes)
    first = [draft.installed() for draft in drafts]
    first.sort(key=lambda each: natural_key(each.name))
    by_tag: dict[Any, list[Installed]] = defaultdict(list)
    for each in first:
        if each.live and each.tag is not None:
            by_tag[_lookup_key(each.tag)].append(each)
    plant = Plant(
        data=data,
        lists=lists,
        instruments=tuple(first),
        circuits=(),
        loops=(),
        areas_seen=_areas_seen(listed_areas, first),
        types=types,
        types_twice=types_twice,
        areas=areas,
        areas_twice=areas_twice,
        cables=cables,
        cables_twice=cables_twice,
        cable_types=cable_types,
        cable_types_twice=cable_types_twice,
        terminations=records.get("Terminations", ()),
        loop_rows=records.get("Loops", ()),
        io_list=io_list,
        alarm_list=records.get("Alarm and trip list", ()),
        profile=profile,
        codes=codes,
        assumptions=(*lists.assumptions, *assumptions, *fitter.assumptions),
        more_problems=(*fitter.problems, *_unread_in_areas(written_areas, listed_areas)),
        _by_tag={key: tuple(found) for key, found in by_tag.items()},
        _columns=lists.index_columns,
    )
    _wire(plant)
    return plant


# What tells which rows are one instrument, what it is called, its loop and its kind. Other fields are values.
_STRUCTURE = frozenset(
    {
        "tag", "tag_written", "tag_cell", "tag_number", "status", "kind", "kind_written", "loop", "signal", "io_type",
        "io_address", "card", "location", "device_type", "ex_marking", "equipment", "own", "area",
        "area_classification", "origin", "elsewhere", "other",
    }
)  # fmt: skip
_OF_ENTRIES = {"Areas": frozenset({"code"}), "Device types": frozenset({"code", "kind", "description"})}
_WIRING = frozenset({"Loops", "Cables", "Cable types"})


def with_values(plant: Plant, lists: Lists) -> Plant | None:
    """Return a plant with other values in its lists; None where more than values has changed.

    What values cannot change is kept: tags, names, loops, kinds; and the circuits too, where only areas have
    changed. It is what `assemble` gives, for a fraction of the time.

    Parameters
    ----------
    plant
        The plant as it is.
    lists
        Its lists with the same rows, each the same object or one with other values.
    """
    moved = _moved(plant, lists)
    if moved is None:
        return None
    index_name = "Instruments" if plant.lists.records.get("Instruments") else "IO list"
    rows = {id(old): new for old, new in moved.pop(index_name, ())}
    records = lists.records
    listed_areas, areas, areas_twice = _areas_with_values(plant, records) if "Areas" in moved else (None, {}, None)
    types, types_twice = plant.types, plant.types_twice
    if "Device types" in moved:
        types, types_twice = _unlike_left_out(*_by_name(records["Device types"], "code"))
    cables, cables_twice = plant.cables, plant.cables_twice
    if "Cables" in moved:
        cables, cables_twice = _unlike_left_out(*_by_name(records["Cables"], "number"))
    cable_types, cable_types_twice = plant.cable_types, plant.cable_types_twice
    if "Cable types" in moved:
        cable_types, cable_types_twice = _unlike_left_out(*_by_name(records["Cable types"], "code"))
    if (types_twice, areas_twice or plant.areas_twice) != (plant.types_twice, plant.areas_twice):
        return None
    fitter = _Fitter(plant.data, types, {}, ())
    new: dict[int, Installed] = {}
    for each in plant.instruments:
        row = rows.pop(id(each.record), None)
        if row is not None and (each.merged_rows != 1 or not each.record.tag or _shares_its_tag(plant, each)):
            return None
        record = row if row is not None else each.record
        listed = types.get(_key(record.device_type)) if record.device_type else None
        area = areas.get(id(each.area), each.area) if each.area is not None else None
        if row is None and listed is each.listed_type and area is each.area:
            continue
        device = fitter._effective(record, listed) if record.own is not None or listed is not each.listed_type else None
        device = each.type if device is None and listed is each.listed_type else device
        marking_text = record.ex_marking or (device.ex_marking if device else None)
        new[id(each)] = replace(
            each,
            record=record,
            signals=(record,) if row is not None else each.signals,
            listed_type=listed,
            type=device,
            area=area,
            unclassified=area.unclassified if area is not None and area is not each.area else each.unclassified,
            marking=fitter._marking(marking_text) if marking_text else None,
            body=_body_of(device),
        )
    if rows:
        return None  # of an instrument that several rows make
    instruments = tuple(new.get(id(each), each) for each in plant.instruments)
    changed = replace(
        plant,
        lists=lists,
        instruments=instruments,
        areas_seen=plant.areas_seen if listed_areas is None else _areas_seen(listed_areas, instruments),
        types=types,
        areas=plant.areas if listed_areas is None else _by_name(listed_areas, "code")[0],
        cables=cables,
        cables_twice=cables_twice,
        cable_types=cable_types,
        cable_types_twice=cable_types_twice,
        loop_rows=records.get("Loops", ()),
        _by_tag={key: tuple(new.get(id(each), each) for each in found) for key, found in plant._by_tag.items()},
        _asked={},
        _whole={},
        _part_of=None,
        _notes={},
    )
    only_areas = moved.keys() == {"Areas"} and all(
        old.record is each.record for old, each in zip(plant.instruments, instruments, strict=True)
    )
    if only_areas:
        _keep_circuits(plant, changed, new)
    else:
        _wire(changed)
    return changed


def _moved(plant: Plant, lists: Lists) -> dict[str, list[tuple[Any, Any]]] | None:
    """Return the rows that have other values, old and new by their sheet; None where more has changed."""
    before, after = plant.lists.records, lists.records
    if before.keys() != after.keys() or lists.plant is not plant.lists.plant:
        return None
    index_name = "Instruments" if before.get("Instruments") else "IO list"
    moved: dict[str, list[tuple[Any, Any]]] = {}
    for name, rows in before.items():
        if len(rows) != len(after[name]):
            return None
        pairs = [(old, new) for old, new in zip(rows, after[name], strict=True) if old is not new]
        if not pairs:
            continue
        if name in _WIRING:
            moved[name] = pairs
            continue
        structure = _STRUCTURE if name == index_name else _OF_ENTRIES.get(name)
        if structure is None or any(
            not same_value(getattr(old, field), getattr(new, field))
            or (getattr(old, field) is None) != (getattr(new, field) is None)
            for old, new in pairs
            for field in structure
            if hasattr(old, field)
        ):
            return None
        moved[name] = pairs
    return moved


def _areas_with_values(
    plant: Plant, records: Mapping[str, tuple[Any, ...]]
) -> tuple[tuple[Area, ...], dict[int, Area], frozenset[str]]:
    """Return the areas as listed now, those that have changed by the ids of the old ones, and names that two have."""
    listed = tuple(understood(area) for area in records["Areas"])
    areas, twice = _by_name(listed, "code")
    changed = {id(old): areas[key] for key, old in plant.areas.items() if key in areas and areas[key] != old}
    return listed, changed, twice


def _shares_its_tag(plant: Plant, each: Installed) -> bool:
    return each.tag is not None and len(plant._by_tag.get(_lookup_key(each.tag), ())) > 1


def _keep_circuits(plant: Plant, changed: Plant, new: Mapping[int, Installed]) -> None:
    """Give a plant the circuits and loops of another, whose instruments have other areas."""
    circuits: dict[int, Circuit] = {
        id(circuit): replace(
            circuit,
            device=new.get(id(circuit.device), circuit.device),
            members=tuple(new.get(id(each), each) for each in circuit.members),
        )
        for circuit in plant.circuits
    }
    changed.circuits = tuple(circuits[id(circuit)] for circuit in plant.circuits)
    changed.loops = tuple(
        replace(
            loop,
            members=tuple(new.get(id(each), each) for each in loop.members),
            circuits=tuple(circuits[id(circuit)] for circuit in loop.circuits),
        )
        for loop in plant.loops
    )
    _find_circuits(changed)


def _wire(plant: Plant) -> None:
    """Give a plant its circuits and loops."""
    plant.circuits, plant.loops = wire(plant)
    _find_circuits(plant)


def _find_circuits(plant: Plant) -> None:
    plant._by_loop = {loop_key(loop.name): loop for loop in plant.loops}
    on: dict[int, list[Circuit]] = defaultdict(list)
    for circuit in plant.circuits:
        for member in circuit.members:
            on[id(member)].append(circuit)
    plant._circuits_of = {key: tuple(found) for key, found in on.items()}


def _body_of(device: DeviceType | None) -> str | None:
    """Return gauge, absolute or differential for a device's body: as stated, else as its limits are referred."""
    if device is None or device.body is not None:
        return device.body if device is not None else None
    if device.url is not None and device.url.reference in ("gauge", "absolute", "differential"):
        return device.url.reference
    return None


def name_key(text: str | None) -> str:
    """Return a name's key: case and blanks do not tell two entries apart."""
    return _key(text)


def _key(text: str | None) -> str:
    return "".join(text.split()).casefold() if text else ""


# Between two digits a separator parts two numbers, so that 1-12 is not 11-2.
_NO_SEPARATOR = re.compile(r"(?<![0-9])[\W_]+|[\W_]+(?![0-9])")


def _lookup_key(reading: TagReading) -> Any:
    return match_key(reading) if reading.parsed else _NO_SEPARATOR.sub("", reading.normalised).casefold()


def _profile(data: PlantData, index: Sequence[Instrument]) -> tuple[TagProfile, tuple[str, ...]]:
    try:
        stated = plant_profile(data.tag_pattern)
    except ValueError as error:
        chosen = best_profile([record.tag for record in index if record.tag])
        return chosen, (f"the plant's tag pattern could not be used ({error}); tags read as {chosen.name}",)
    if stated is not None:
        return stated, ()
    chosen = best_profile([record.tag for record in index if record.tag])
    return chosen, (f"tag pattern not stated: most tags fit {chosen.name}",)


def _on_several_sheets(plant: Plant) -> bool:
    """Whether the index has several sheets; of a part of a plant, whether the plant's has."""
    kind = "Instruments" if any(sheet.kind == "Instruments" for sheet in plant.lists.sheets) else "IO list"
    return sum(sheet.kind == kind for sheet in plant.lists.sheets) > 1


def _by_name(records: Iterable[Any], attribute: str) -> tuple[dict[str, Any], frozenset[str]]:
    """Return the entries by name, and the names that two different entries have.

    What two sheets say of one entry, limits on one and entity parameters on the other, is one entry where
    they do not disagree; on one sheet two entries are two.
    """
    found: dict[str, Any] = {}
    twice: set[str] = set()
    for record in records:
        key = _key(getattr(record, attribute))
        if not key:
            continue
        other = found.get(key)
        if other is None:
            found[key] = record
        elif _on_two_sheets(other, record) and (whole := _completed(other, record)) is not None:
            found[key] = whole
        elif any(
            getattr(other, each.name) != getattr(record, each.name)
            for each in dataclasses.fields(record)
            if each.name not in _RECORD_OWN
        ):
            twice.add(key)
    return found, frozenset(twice)


def _on_two_sheets(one: Record, other: Record) -> bool:
    if one.origin is None or other.origin is None:
        return False
    places = {id(one.origin.place), *(id(origin.place) for origin in one.elsewhere.values())}
    return id(other.origin.place) not in places


def _completed(one: Any, other: Any) -> Any:
    """Return an entry with what another says beyond it; None where they disagree."""
    values: dict[str, Any] = {}
    elsewhere: dict[str, Origin] = dict(one.elsewhere)
    for each in dataclasses.fields(one):
        name = each.name
        if name in _RECORD_OWN:
            continue
        here, there = getattr(one, name), getattr(other, name)
        if there is None or there == each.default:
            continue
        if here is None or here == each.default:
            values[name] = there
            origin = other.elsewhere.get(name) or other.origin
            if origin is not None:
                elsewhere[name] = origin
        elif name != "description" and not same_value(here, there):
            return None
    blank = {name for name in one.unread | other.unread if values.get(name, getattr(one, name, None)) is None}
    return replace(
        one,
        **values,
        elsewhere=MappingProxyType(elsewhere),
        unread=frozenset(blank),
        unitless=MappingProxyType({
            name: text
            for name, text in {**other.unitless, **one.unitless}.items()
            if values.get(name, getattr(one, name, None)) is None
        }),
        blanks=MappingProxyType({**other.blanks, **one.blanks}),
    )  # fmt: skip


def _unlike_left_out(found: dict[str, Any], twice: frozenset[str]) -> tuple[dict[str, Any], frozenset[str]]:
    """Leave out what two different entries are called: to take the first would let the order of rows decide."""
    return {key: entry for key, entry in found.items() if key not in twice} if twice else found, twice


def _same_tag(
    index: Sequence[Instrument], reading_of: Callable[[str], TagReading]
) -> tuple[list[list[Instrument]], list[Instrument]]:
    groups: dict[Any, list[Instrument]] = defaultdict(list)
    alone: list[Instrument] = []
    for record in index:
        if record.tag and record.status not in NOT_LIVE:
            groups[_lookup_key(reading_of(record.tag))].append(record)
        else:
            alone.append(record)
    return list(groups.values()), alone


def _called(record: Instrument, profile: TagProfile) -> str:
    """Return what a row is called: its tag; where the plant's tags are free text, as it is written."""
    if profile.name == "free-text" and record.tag_written and record.tag_cell is None:
        return record.tag_written.strip()
    return record.tag or ""


def _one_or_several(
    rows: list[Instrument], reading_of_row: Callable[[Instrument], TagReading], profile: TagProfile
) -> list[tuple[Instrument, TagReading | None, tuple[Instrument, ...], str]]:
    name = _called(rows[0], profile)
    if len(rows) == 1:
        return [(rows[0], reading_of_row(rows[0]), (rows[0],), name)]
    rows = sorted(rows, key=_contents)
    name = _called(rows[0], profile)
    merged: list[list[Instrument]] = []
    # Rows that say the same agree with the same rows: one of them is asked for all.
    said: list[dict[tuple[Any, ...], Instrument]] = []
    for row in rows:
        saying = _saying(row)
        for group, others in zip(merged, said, strict=True):
            if saying in others or all(rows_agree(row, other) for other in others.values()):
                group.append(row)
                others.setdefault(saying, row)
                break
        else:
            merged.append([row])
            said.append({saying: row})
    placed: list[tuple[Instrument, TagReading | None, tuple[Instrument, ...], str]] = []
    for number, group in enumerate(merged, start=1):
        called = name if number == 1 else f"{name} ({number})"
        # What is odd about a tag stands in one row's cell: that row speaks for those that agree with it.
        readings = {id(row): reading_of_row(row) for row in group}
        group.sort(key=lambda row: (not readings[id(row)].look_alikes, row.tag_cell is None))
        placed.append((_merge(group), readings[id(group[0])], tuple(group), called))
    return placed


def disagreements(one: Instrument, other: Instrument) -> tuple[str, ...]:
    """Return the fields that both rows fill and in which they disagree, signal and wiring among them."""
    found = tuple(name for name in COMPARED if not same_value(getattr(one, name), getattr(other, name)))
    if one.own is not None and other.own is not None:
        found += tuple(
            f"type.{name}" for name in _TYPE_FIELDS if not same_value(getattr(one.own, name), getattr(other.own, name))
        )
    return found


def _saying(row: Instrument) -> tuple[Any, ...]:
    """Return what `rows_agree` compares of a row, as it is written."""
    own = None if row.own is None else tuple(repr(getattr(row.own, name)) for name in _TYPE_FIELDS)
    return (*(repr(getattr(row, name)) for name in COMPARED), own)


def rows_agree(one: Instrument, other: Instrument) -> bool:
    """Whether two rows of one tag are one instrument: alike, or another signal of it."""
    differing = set(disagreements(one, other)) - SIGNAL_FIELDS
    if not differing:
        return True
    both_addressed = bool(one.io_address and other.io_address) and _key(one.io_address) != _key(other.io_address)
    return both_addressed and differing <= {"service"}


def same_value(one: Any, other: Any) -> bool:
    """Whether two values of a field agree; a blank agrees with everything.

    Quantities agree when they mean the same, whatever the unit they are written in.
    """
    if one is None or other is None:
        return True
    if isinstance(one, Quantity) and isinstance(other, Quantity):
        if one.base is None or other.base is None or one.unit is None or other.unit is None:
            return one.text == other.text
        if one.unit.kind != other.unit.kind:
            return False
        unstated = ("unstated", None)
        if one.reference != other.reference and one.reference not in unstated and other.reference not in unstated:
            return False
        return abs(one.base - other.base) <= 1e-9 * max(abs(one.base), abs(other.base))
    if isinstance(one, str) and isinstance(other, str):
        return " ".join(one.split()).casefold() == " ".join(other.split()).casefold()
    return bool(one == other)


def _merge(group: Sequence[Instrument]) -> Instrument:
    first = group[0]
    if len(group) == 1:
        return first
    values: dict[str, Any] = {}
    elsewhere: dict[str, Origin] = dict(first.elsewhere)
    for row in group[1:]:
        for name in _FIELDS:
            if name in values or getattr(first, name) is not None:
                continue
            value = getattr(row, name)
            if value is not None:
                values[name] = value
                origin = row.elsewhere.get(name) or row.origin
                if origin is not None:
                    elsewhere[name] = origin
    own = _merged_own(group)
    if own is not None:
        values["own"] = own

    def still_blank(name: str) -> bool:
        return values.get(name, getattr(own if name in _TYPE_ONLY else first, name, None)) is None

    unitless: dict[str, str] = {}
    blanks: dict[str, str] = {}
    for row in group:
        for name, text in row.unitless.items():
            if still_blank(name) and name not in unitless:
                unitless[name] = text
                if name not in first.unitless and row.origin is not None:
                    elsewhere[name] = row.elsewhere.get(name) or row.origin
        for name, text in row.blanks.items():
            if still_blank(name):
                blanks.setdefault(name, text)
    return replace(
        first,
        **values,
        elsewhere=MappingProxyType(elsewhere),
        unread=frozenset(name for row in group for name in row.unread if still_blank(name)),
        unitless=MappingProxyType(unitless),
        blanks=MappingProxyType(blanks),
    )


def _merged_own(group: Sequence[Instrument]) -> DeviceType | None:
    """Return the limits that the rows of one instrument state, taken together."""
    stated = [row.own for row in group if row.own is not None]
    if len(stated) < 2:
        return stated[0] if stated else None
    first, values = stated[0], {}
    elsewhere: dict[str, Origin] = dict(first.elsewhere)
    for other in stated[1:]:
        for name in _TYPE_FIELDS:
            value = getattr(other, name)
            if value is None or name in values or getattr(first, name) is not None:
                continue
            values[name] = value
            origin = other.elsewhere.get(name) or other.origin
            if origin is not None:
                elsewhere[name] = origin
    return replace(
        first,
        **values,
        elsewhere=MappingProxyType(elsewhere),
        unread=frozenset(name for each in stated for name in each.unread)
        - {name for name in _TYPE_FIELDS if values.get(name, getattr(first, name)) is not None},
    )


def _contents(record: Instrument) -> tuple[Any, ...]:
    """Return what rows are sorted by, so that the order of rows changes no name."""
    plain = tuple(_content(getattr(record, name)) for name in _FIELDS if name != "own")
    if record.own is None:
        return plain
    return (*plain, *(_content(getattr(record.own, name)) for name in _TYPE_FIELDS))


def _content(value: Any) -> str:
    if value is None:
        return ""
    if isinstance(value, Quantity):
        return f"{value.base if value.base is not None else ''}{value.reference or ''}"
    return str(value)


def _untagged_name(record: Instrument) -> str:
    sheet = record.origin.place.sheet if record.origin else "row"
    for name in _FIELDS:
        if name in _NO_STATEMENT:
            continue
        value = getattr(record, name)
        if value is not None:
            return f"{sheet}: {value.text if isinstance(value, Quantity) else value}"
    return f"{sheet}: row {record.origin.row if record.origin else ''}".rstrip()


@dataclass(slots=True, kw_only=True, eq=False)
class _Draft:
    """An instrument on its way into the plant: its loop and its kind are told by the others beside it."""

    record: Instrument
    name: str
    tag: TagReading | None
    live: bool
    equipment_tag: bool
    listed_type: DeviceType | None
    type: DeviceType | None
    area: Area | None
    unclassified: bool
    marking: Marking | None
    signals: tuple[Instrument, ...]
    body: str | None
    merged_rows: int
    listed: tuple[Instrument, ...] = ()
    loop: str | None = None
    loop_from: str = ""
    kind: Kind | None = None
    kind_from: str = ""
    measuring_point: bool = False

    @property
    def letters(self) -> str:
        """The tag's letters; empty without a parsed tag."""
        return self.tag.letters if self.tag and self.tag.letters else ""

    def installed(self) -> Installed:
        """Return the instrument as the rules and the sheets see it."""
        return Installed(
            record=self.record,
            name=self.name,
            tag=self.tag,
            kind=self.kind,
            kind_from=self.kind_from,
            live=self.live,
            equipment_tag=self.equipment_tag,
            listed_type=self.listed_type,
            type=self.type,
            area=self.area,
            unclassified=self.unclassified,
            marking=self.marking,
            loop=self.loop,
            loop_from=self.loop_from,
            signals=self.signals,
            listed=self.listed,
            measuring_point=self.measuring_point,
            body=self.body,
            merged_rows=self.merged_rows,
        )


class _Fitter:
    """Joins a record with its device type, its area and its marking."""

    def __init__(
        self,
        data: PlantData,
        types: Mapping[str, DeviceType],
        areas: Mapping[str, Area],
        rows: Iterable[Instrument],
    ) -> None:
        self._spelt = _spellings(rows)
        self._data = data
        self._types = types
        self._areas = areas
        self._made: dict[str, Area] = {}
        self._classified: dict[tuple[str, bool], Classification | None] = {}
        self.problems: list[CellProblem] = []
        self._markings: dict[str, Marking] = {}
        self._unclassified: set[str] = set()
        self._own: dict[int, DeviceType] = {}

    @property
    def assumptions(self) -> tuple[str, ...]:
        """What was taken from the rows' own words, listed once."""
        return tuple(
            f"'{text}' in an area column is read as: not a hazardous area" for text in sorted(self._unclassified)
        )

    def install(
        self, record: Instrument, reading: TagReading | None, rows: tuple[Instrument, ...], name: str
    ) -> _Draft:
        listed = self._types.get(_key(record.device_type)) if record.device_type else None
        device = self._effective(record, listed)
        area, unclassified = self._area(record)
        marking_text = record.ex_marking or (device.ex_marking if device else None)
        live = record.status not in NOT_LIVE
        if not live and record.tag:
            name = f"{name} ({record.status})"
        signals = _signals(rows)
        return _Draft(
            record=record,
            name=name,
            tag=reading,
            live=live,
            equipment_tag=bool(
                reading is not None
                and is_equipment_shape(reading)
                and any(row.io_type or row.io_address or row.signal for row in rows)
            )
            or _is_equipments_signal(record),
            listed_type=listed,
            type=device,
            area=area,
            unclassified=unclassified,
            marking=self._marking(marking_text) if marking_text else None,
            signals=signals,
            body=_body_of(device),
            merged_rows=len(rows),
        )

    def _effective(self, record: Instrument, listed: DeviceType | None) -> DeviceType | None:
        own = record.own
        if own is None:
            return listed
        stated = {name: getattr(record, name) for name in ROW_AND_TYPE if getattr(record, name) is not None}
        base = listed if listed is not None else DeviceType(origin=record.origin)
        values = {name: getattr(own, name) for name in _TYPE_FIELDS if getattr(own, name) is not None}
        elsewhere = dict(base.elsewhere)
        if record.origin is not None:
            for name in values:
                elsewhere[name] = record.elsewhere.get(name) or record.origin
        values.update({name: value for name, value in stated.items() if name in _TYPE_FIELDS})
        return replace(
            base,
            **values,
            elsewhere=MappingProxyType(elsewhere),
            unread=(base.unread | own.unread) - values.keys(),
        )

    def _marking(self, text: str) -> Marking:
        marking = self._markings.get(text)
        if marking is None:
            marking = self._markings[text] = read_marking(text)
        return marking

    def _classification(self, text: str, own_column: bool) -> Classification | None:
        key = (text, own_column)
        if key not in self._classified:
            self._classified[key] = read_classification(text, own_column=own_column)
        return self._classified[key]

    def _area(self, record: Instrument) -> tuple[Area | None, bool]:
        if record.area:
            listed = self._areas.get(_key(record.area))
            if listed is not None:
                return listed, listed.unclassified
        for text, field_name in ((record.area_classification, "area_classification"), (record.area, "area")):
            if not text:
                continue
            own_column = field_name == "area_classification"
            classification = self._classification(text, own_column)
            if classification is None:
                if own_column:
                    self._unread(record, text)
                continue
            if classification.unclassified:
                self._unclassified.add(text)
                return None, True
            return self._from_text(text, own_column), False
        return None, False

    def _unread(self, record: Instrument, text: str) -> None:
        for cell in record.cells("area_classification")[:1]:
            self.problems.append(
                CellProblem(
                    cell=cell,
                    field="area_classification",
                    title="area classification",
                    subject=record.tag or "",
                    text=text,
                    reason="no zone or division, and no word for an unclassified place, is read in it",
                )
            )

    def _from_text(self, text: str, own_column: bool) -> Area | None:
        key = _key(text)
        area = self._made.get(key)
        if area is None:
            made = area_from_classification(self._spelt.get(key, text), own_column=own_column)
            if made is None:
                return None
            area = self._made[key] = made
        return area


def _spellings(rows: Iterable[Instrument]) -> dict[str, str]:
    """Return how each text of an area is spelt: as most rows have it, whatever their order."""
    counts = Counter(text for row in rows for text in (row.area_classification, row.area) if text)
    found: dict[str, str] = {}
    for text in sorted(counts, key=lambda text: (-counts[text], text)):
        found.setdefault(_key(text), text)
    return found


def _signals(rows: tuple[Instrument, ...]) -> tuple[Instrument, ...]:
    """Return one row a signal: rows that say nothing new about it are left out."""
    kept: list[Instrument] = []
    for row in rows:
        if not any(
            all(same_value(getattr(row, name), getattr(other, name)) for name in SIGNAL_FIELDS) for other in kept
        ):
            kept.append(row)
    return tuple(kept)


def _is_equipments_signal(record: Instrument) -> bool:
    """Whether a row without tag is a drive's: it names the equipment, and on or off is all that it signals."""
    if record.tag or not record.equipment or "tag" in record.unread or record.kind_written or record.range_unit:
        return False
    if record.lrv is not None or record.urv is not None or record.unitless:
        return False
    return set(io_types(record.io_type)) in ({"DI"}, {"DO"}, {"DI", "DO"})


def _give_listed_channels(
    found: Sequence[_Draft], io_list: Sequence[Instrument], reading_of: Callable[[str], TagReading]
) -> None:
    """Give each instrument that has no channel in the index the rows that the I/O list has of it."""
    rows: dict[Any, list[Instrument]] = defaultdict(list)
    for row in io_list:
        if row.tag and has_io(row) and row.status not in NOT_LIVE:
            rows[_lookup_key(reading_of(row.tag))].append(row)
    if not rows:
        return
    for each in found:
        if each.live and each.tag is not None and not any(map(has_io, each.signals)):
            each.listed = tuple(rows.get(_lookup_key(each.tag), ()))


def _give_loops(found: Sequence[_Draft], data: PlantData) -> None:
    """Give each instrument its loop: the column's, else the one its tag gives, or the valve it belongs to."""
    valves: dict[tuple[str, str], list[tuple[TagReading, str]]] = defaultdict(list)
    derived: list[tuple[str | None, tuple[str, str] | None]] = []
    for each in found:
        loop, key = None, None
        # Pump P-101 is not of the pressure loop P-101.
        if each.tag is not None and each.tag.parsed and not each.equipment_tag:
            loop = loop_of(each.tag, numbering=data.numbering) or None
            key = assembly_key(each.tag)
            if key is not None and is_valve(each.tag):
                stated = each.record.loop or loop
                if each.live and stated:
                    valves[key].append((each.tag, stated))
                key = None
        derived.append((loop, key))
    for each, (loop, key) in zip(found, derived, strict=True):
        if each.record.loop:
            each.loop, each.loop_from = each.record.loop, "column"
            continue
        if key is not None and key in valves:
            loop = loop_of_assembly(valves[key]) or loop
        each.loop, each.loop_from = loop, "tag" if loop else ""


def loop_of_assembly(valves: Sequence[tuple[TagReading, str]]) -> str | None:
    """Return the loop that what carries a valve's number belongs to; None where several are as likely.

    Parameters
    ----------
    valves
        The valves of that number, each with its loop. FV-101 and PV-101 are of two loops; where XV-101 is among
        them, the switches are its.
    """
    for chosen in (valves, [(tag, loop) for tag, loop in valves if tag.letters[0] in "XZHY" or tag.code is not None]):
        loops = {_key(loop): loop for _, loop in sorted(chosen, key=lambda each: (each[0].normalised, each[1]))}
        if len(loops) == 1:
            return next(iter(loops.values()))
    return None


def _give_kinds(found: Sequence[_Draft], codes: Mapping[str, PlantCode]) -> None:
    """Give each instrument its kind, and tell the measuring points of older lists."""
    bears: set[str] = set()
    transmits: set[str] = set()
    for each in found:
        if each.live and each.loop:
            functions = each.letters[1:]
            if "T" in functions or "E" in functions:
                bears.add(loop_key(each.loop))
            if "T" in functions:
                transmits.add(loop_key(each.loop))
    for each in found:
        record = each.record
        loop = loop_key(each.loop)
        signal = any(row.signal or row.io_type or row.io_address or row.card for row in (*each.signals, *each.listed))
        point = bool(
            loop
            and loop not in bears
            and (signal or record.device_type)
            and len(each.letters) >= 2
            and each.letters[-1] in "IRCA"
            and each.letters not in codes
            and record.location != "system"
            and _may_bring_a_measurement((*each.signals, *each.listed))
        )
        letters = "" if each.equipment_tag else each.letters
        asked: dict[str, Any] = {
            "has_signal": signal or bool(record.ex_marking),
            "location": record.location,
            "codes": codes,
            "scheme": each.tag.scheme if each.tag else "isa",
            "measuring_point": point,
            "transmitter_in_loop": loop in transmits and "T" not in letters[1:],
        }
        kind, kind_from = None, ""
        if record.kind_written:
            read = read_kind(record.kind_written, letters=letters, **asked)
            if read.stated:
                kind, kind_from = read.kind, "row"
        if kind is None and record.kind is not None:
            kind, kind_from = record.kind, "row"
        if kind is None and each.listed_type is not None and each.listed_type.kind is not None:
            kind, kind_from = each.listed_type.kind, "type"
            # A valve's row may name its positioner's or solenoid's type: it is the valve's all the same.
            if kind in _DRIVES and letters and (valve := derive_kind(letters, **asked)) in _VALVES:
                kind, kind_from = valve, "letters"
        if kind is None and letters:
            kind, kind_from = derive_kind(letters, **asked), "letters"
            if point and kind not in _MEASURING:
                kind = _point_kind(record) or kind
        each.kind, each.kind_from = kind, kind_from if kind is not None else ""
        each.measuring_point = point


_DRIVES = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID})
_VALVES = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})
_FOR_SENSORS = frozenset({"AI", "RTD", "TC"})
_OF_STATES = frozenset({"contact", "volts", "digital"})


def _may_bring_a_measurement(signals: Sequence[Instrument]) -> bool:
    """Whether one of the signals may be a sensor's: XA on an output sounds, and on a digital input it reports."""
    kinds = {kind for row in signals for kind in io_types(row.io_type)}
    if kinds:
        return not kinds.isdisjoint(_FOR_SENSORS)
    classes = {each for row in signals for each in signal_classes(row.signal)}
    return not classes or not classes <= _OF_STATES


_MEASURING = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.ELEMENT, Kind.SWITCH})


def _point_kind(record: Instrument) -> Kind | None:
    text = f"{record.signal or ''} {record.io_type or ''}".casefold()
    if any(word in text for word in ("pt100", "pt 100", "rtd", "tc", "thermo", "mv", "ohm")):
        return Kind.ELEMENT
    if "ma" in text or "hart" in text or record.io_type in ("AI",):
        return Kind.TRANSMITTER
    return None


_AREA_TITLES: Final = {column.field: column.title for column in AREAS.columns}


def _unread_in_areas(written: Iterable[Area], listed: Iterable[Area]) -> Iterator[CellProblem]:
    """Give the texts of a list of areas that no reading of an area has a place for."""
    for before, after in zip(written, listed, strict=True):
        for name in sorted(after.unread - before.unread):
            title = _AREA_TITLES[name]
            for cell in before.cells(name)[:1]:
                yield CellProblem(
                    cell=cell,
                    field=name,
                    title=title,
                    subject=before.code or "",
                    text=str(getattr(before, name)),
                    reason=f"no {title} is read in it",
                )


def _areas_seen(listed: Iterable[Area], found: Iterable[Installed]) -> tuple[AreaInPlant, ...]:
    seen: dict[str, AreaInPlant] = {}
    for area in listed:
        if area.code:
            seen.setdefault(_key(area.code), AreaInPlant(record=area, name=area.code))
    for each in found:
        if each.live and each.area is not None and each.area.code:
            seen.setdefault(_key(each.area.code), AreaInPlant(record=each.area, name=each.area.code))
    return tuple(sorted(seen.values(), key=lambda area: natural_key(area.name)))
