"""What stands on a loop's sheet, in texts and numbers: from the same functions that the rules use."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from typing import Final

from instruments.area import Area
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.measurement import measurement_of
from instruments.quantity import Quantity, format_number
from instruments.span import percent_of_span
from loops.budget import feeds_a_transmitter, lift_off
from loops.circuit import (
    ANALOGUE_INPUT,
    ANALOGUE_OUTPUT,
    DIGITAL_INPUT,
    DIGITAL_OUTPUT,
    RESISTANCE_THERMOMETER,
    THERMOCOUPLE,
    Circuit,
    Given,
)
from loops.plant import Plant
from loops.power import VoltageBudget
from loops.sheet.check_record import Set, ToTry, things_to_try
from loops.sheet.check_table import LIVE_ZERO, CheckTable, check_table, signal_of
from loops.sheet.entity_table import EntityTable, SystemDocument, entity_table, system_document
from loops.sheet.pack import LoopOnPaper, area_title, filed_under
from loops.sheet.path import Path, path_of, terminations_of
from loops.sheet.span_scale import SpanScale

NOT_APPLICABLE: Final = "\u2013"
"""Printed where this kind of device has no such value; None stands for one that nobody gave."""

SETTINGS: Final = (
    ("LL", "setting_ll"),
    ("L", "setting_l"),
    ("H", "setting_h"),
    ("HH", "setting_hh"),
    ("trip", "trip"),
)


@dataclass(frozen=True, slots=True, kw_only=True)
class DeviceLine:
    """One device: None is a value that nobody gave."""

    tag: str
    kind: str | None
    service: str | None
    type_code: str | None
    maker: str | None
    marking: str | None
    field_range: str | None
    system_range: str | None
    location: str | None


@dataclass(frozen=True, slots=True, kw_only=True)
class SettingValue:
    """One setting: as written, its place on the span in percent, and the current that it gives."""

    text: str
    percent: float | None = None
    ma: float | None = None
    assumed: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class SettingLine:
    """One device's settings in the order of `SETTINGS`; a text stands where there can be none.

    `scale` has them on a scale of the span; None where none of them has a place on it.
    """

    tag: str
    values: tuple[SettingValue | str | None, ...]
    direction: str | None
    scale: SpanScale | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Field:
    """One value of a circuit with its name; None where nobody gave it."""

    label: str
    value: str | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Conductor:
    """One conductor between two terminals, as the termination list has it."""

    from_item: str | None
    from_terminal: str | None
    to_item: str | None
    to_terminal: str | None
    cable: str | None
    pair: str | None
    core: str | None
    colour: str | None
    wire_mark: str | None
    screen: str | None


@dataclass(frozen=True, slots=True, kw_only=True)
class PowerLine:
    """One term of a voltage budget; `drop_20_v` is the same at 20 mA."""

    name: str
    ohm: float | None = None
    drop_v: float | None = None
    drop_20_v: float | None = None
    assumed: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Power:
    """The voltage budget of a two-wire circuit: its terms, what is left, and what it lacks.

    `source_v` and what follows it are None where a value that it needs is `missing`.
    """

    current_ma: float | None = None
    source_name: str = "supply"
    source_v: float | None = None
    source_assumed: bool = False
    lines: tuple[PowerLine, ...] = ()
    at_terminals_v: float | None = None
    at_terminals_20_v: float | None = None
    lift_off_v: float | None = None
    margin_v: float | None = None
    margin_20_v: float | None = None
    working: str = ""
    missing: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class CircuitContent:
    """One circuit: its path with what its device's area is, its wiring as given, its terminations, its power and
    its check table.
    """

    name: str
    kind: str | None
    device: str
    service: str | None
    fields: tuple[Field, ...]
    path: Path | None = None
    classification: str | None = None
    conductors: tuple[Conductor, ...] = ()
    power: Power | None = None
    check: CheckTable | None = None
    tries: tuple[ToTry, ...] = ()
    entity: EntityTable | None = None
    system: SystemDocument | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetContent:
    """Everything that stands on a loop's sheet.

    `notes` are the open findings; None where the loop was not audited.
    """

    loop: str
    plant: str | None
    source: str
    service: str | None
    unit: str | None
    area: str | None
    classification: str | None
    pid: str | None
    line: str | None
    equipment: str | None
    drawing: str | None
    devices: tuple[DeviceLine, ...]
    settings: tuple[SettingLine, ...]
    circuits: tuple[CircuitContent, ...]
    remarks: tuple[tuple[str, str], ...] = ()
    notes: tuple[str, ...] | None = None
    assumed: tuple[str, ...] = ()


def sheet_content(loop: LoopOnPaper, plant: Plant, *, notes: Sequence[str] | None = None) -> SheetContent:
    """Return what stands on a loop's sheet.

    Parameters
    ----------
    loop
        The loop.
    plant
        Its plant.
    notes
        Its open findings in plain words; None where nobody looked for any.
    """
    members = loop.members
    service = loop_service(loop)
    several_areas = len({filed_under(each) for each in members if _in_field(each)}) > 1
    settings = tuple(_setting_lines(loop, plant))
    circuits = tuple(_circuit(circuit, plant, service, members, settings) for circuit in loop.circuits)
    return SheetContent(
        loop=loop.name,
        plant=plant.data.name,
        source=source_of(plant),
        service=service,
        unit=_listed(each.record.unit for each in members),
        area=_listed(area_title(each) for each in members if _in_field(each)),
        classification=_classifications(members),
        pid=_listed(each.record.pid for each in members),
        line=_listed(each.record.line for each in members),
        equipment=_listed(each.record.equipment for each in members),
        drawing=_listed(circuit.row.drawing if circuit.row else None for circuit in loop.circuits),
        devices=tuple(_device(each, service, several_areas) for each in members),
        settings=settings,
        circuits=circuits,
        remarks=tuple(_remarks(members)),
        notes=None if notes is None else tuple(notes),
        assumed=tuple(_assumed(circuits, settings, members)),
    )


def _assumed(
    circuits: Sequence[CircuitContent], settings: Sequence[SettingLine], members: Sequence[Installed]
) -> Iterable[str]:
    """Yield each assumption once, with the devices that it is made for."""
    made: dict[str, dict[str, None]] = defaultdict(dict)
    for circuit in circuits:
        for text in circuit.power.assumed if circuit.power else ():
            made[text][circuit.device] = None
        for text in circuit.check.assumed if circuit.check else ():
            made[text][circuit.device] = None
        for text in circuit.entity.assumed if circuit.entity else ():
            made[text][circuit.device] = None
    for line in settings:
        for value in line.values:
            if isinstance(value, SettingValue) and value.assumed:
                made[value.assumed][line.tag] = None
    for each in members:
        if each.kind_from == "letters":
            made["kind, by the letters of the tag"][each.name] = None
    for text, devices in made.items():
        yield f"{text}: {', '.join(devices)}"


def source_of(plant: Plant) -> str:
    """Return the names of the files that the plant was read from."""
    return str(plant.once("loop sheets source", _source_of))


def _source_of(plant: Plant) -> str:
    # Names alone: where a file lies is no part of what the sheet says.
    names = dict.fromkeys(file.replace("\\", "/").rpartition("/")[2] for file in plant.lists.files)
    return ", ".join(names) or plant.file_name.replace("\\", "/").rpartition("/")[2]


def _listed(texts: Iterable[str | None]) -> str | None:
    """Return different texts once each, in one line; None where all are blank."""
    found = dict.fromkeys(text for text in texts if text)
    return ", ".join(found) if found else None


def _first(*texts: str | None) -> str | None:
    return next((text for text in texts if text), None)


# Whose service is the loop's: what is measured, else what is driven, else what is switched.
_SPEAKS_FOR: Final = (
    frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR, Kind.ELEMENT}),
    frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE}),
    frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID}),
)


def loop_service(loop: LoopOnPaper) -> str | None:
    """Return the loop list's service where it has one for the loop, else the first measurement's."""
    stated = dict.fromkeys(
        circuit.row.service for circuit in loop.circuits if circuit.row is not None and circuit.row.service
    )
    if len(stated) == 1:
        return next(iter(stated))
    found = [*(circuit.device for circuit in loop.circuits), *loop.members]
    found.sort(key=lambda each: next((rank for rank, kinds in enumerate(_SPEAKS_FOR) if each.kind in kinds), 9))
    return _first(*(each.record.service for each in found))


def _in_field(each: Installed) -> bool:
    if each.record.location is not None:
        return each.record.location == "field"
    return each.kind is None or each.kind.location == "field"


def _classifications(members: Iterable[Installed]) -> str | None:
    """Return the classification of each area in which a device stands, with the area where there are several."""
    found: dict[str, str | None] = {}
    for each in members:
        if not _in_field(each):
            continue
        text = _classification(each)
        if text:
            found.setdefault(text, each.area.code if each.area and not each.area.from_row_cell else None)
    if len(found) <= 1:
        return next(iter(found), None)
    return "; ".join(f"{code}: {text}" if code else text for text, code in found.items())


def _classification(each: Installed) -> str | None:
    if each.record.area_classification and (each.area is None or each.area.from_row_cell):
        return each.record.area_classification
    if each.area is not None:
        return classification_text(each.area)
    return "no hazardous area" if each.unclassified else None


def classification_text(area: Area) -> str | None:
    """Return an area's classification as its row lists it; None where it lists none.

    >>> classification_text(Area(zone="1/21", gas_group="IIB", dust_group="IIIC", temperature_class="T3"))
    'Zone 1/21, IIB, IIIC, T3'
    >>> classification_text(Area(class_="I", division="2", gas_group="C,D", temperature_class="T2B"))
    'Class I, Division 2, C,D, T2B'
    """
    if area.system == "none":
        return "no hazardous area"
    if area.from_row_cell and area.code:
        return area.code
    parts = [
        f"Class {area.class_}" if area.class_ else None,
        f"Division {area.division}" if area.division else None,
        f"Zone {area.zone}" if area.zone else None,
        f"process side Zone {area.process_zone}" if area.process_zone else None,
        f"EPL {area.epl_required}" if area.epl_required else None,
        area.gas_group,
        area.dust_group,
        area.temperature_class,
        f"dust {area.dust_surface_c:g} \u00b0C" if area.dust_surface_c is not None else None,
    ]
    if area.ambient_min_c is not None or area.ambient_max_c is not None:
        ends = (f"{end:g}" if end is not None else "?" for end in (area.ambient_min_c, area.ambient_max_c))
        parts.append(f"ambient {' to '.join(ends)} \u00b0C")
    shown = [part for part in parts if part]
    return ", ".join(shown) if shown else None


def _remarks(members: Iterable[Installed]) -> Iterable[tuple[str, str]]:
    for each in members:
        if each.record.hold:
            yield each.name, f"hold: {each.record.hold}"
        if each.record.remarks:
            yield each.name, each.record.remarks


# --------------------------------------------------------------------------------------------------------
# Devices and settings


def _device(each: Installed, shown_above: str | None, several_areas: bool) -> DeviceLine:
    record, kind = each.record, each.kind
    typed = kind is not Kind.SOFT_FUNCTION
    maker = _listed((record.maker or (each.type.maker if each.type else None),))
    model = record.model or (each.type.model if each.type else None)
    location = record.location
    if location and several_areas and _in_field(each) and record.area:
        location = f"{location}, {record.area}"
    measures = kind.measures if kind is not None else "yes"
    in_system = measures == "yes" and kind is not None and kind.wired in ("yes", "element")
    if measures == "system":
        in_system = record.lrv is None and record.urv is None
    return DeviceLine(
        tag=each.name,
        kind=f"{kind.value} *" if kind is not None and each.kind_from == "letters" else kind and kind.value,
        service=record.service if record.service != shown_above else None,
        type_code=record.device_type or (None if typed else NOT_APPLICABLE),
        maker=_listed((" ".join(text for text in (maker, model) if text),)),
        marking=record.ex_marking or (each.type.ex_marking if each.type else None),
        field_range=range_text(record.lrv, record.urv) or (None if measures == "yes" else NOT_APPLICABLE),
        system_range=range_text(record.system_lrv, record.system_urv) or (None if in_system else NOT_APPLICABLE),
        location=location,
    )


def range_text(lrv: Quantity | None, urv: Quantity | None) -> str | None:
    """Return a range with its unit once where both ends have the same; a blank end is a question mark.

    >>> from instruments.quantity import read_range
    >>> range_text(*read_range("0-40 mbarg")[:2]), range_text(None, None)
    ('0 to 40 mbarg', None)
    """
    if lrv is None and urv is None:
        return None
    ends = (lrv, urv)
    if any(end is not None and end.unit is None for end in ends):
        numbers = (format_number(end.number) if end is not None else "?" for end in ends)
        return f"{' to '.join(numbers)} (no unit)"
    if lrv is not None and urv is not None and lrv.unit == urv.unit:
        return f"{format_number(lrv.number)} to {urv}"
    return " to ".join(str(end) if end is not None else "?" for end in ends)


def _setting_lines(loop: LoopOnPaper, plant: Plant) -> Iterable[SettingLine]:
    """Lines for the devices that have settings, and for those that could: the measurements of the loop."""
    measuring = {
        id(circuit.device)
        for circuit in loop.circuits
        if circuit.kind in (ANALOGUE_INPUT, RESISTANCE_THERMOMETER, THERMOCOUPLE)
    }
    for each in loop.members:
        record = each.record
        given = [getattr(record, name) for _, name in SETTINGS]
        if record.set_pressure is None and all(value is None for value in given) and id(each) not in measuring:
            continue
        blank = None if id(each) in measuring else NOT_APPLICABLE
        values: list[SettingValue | str | None] = [
            blank if value is None else setting_value(value, each, plant) for value in given
        ]
        if record.trip is None:
            if record.set_pressure is not None:
                set_value = setting_value(record.set_pressure, each, plant)
                values[-1] = replace(set_value, text=f"set {set_value.text}")
            elif each.kind is Kind.SWITCH:
                values[-1] = None
        direction = record.trip_direction
        if direction is None and record.trip is not None:
            direction = _DIRECTIONS.get(record.trip.qualifier or "")
        yield SettingLine(
            tag=each.name,
            values=tuple(values),
            direction=direction or blank,
            scale=_span_scale(each, values, plant),
        )


_DIRECTIONS: Final = {"rising": "high", "falling": "low"}


_OPERATING: Final = ("min", "normal", "max")


def _span_scale(each: Installed, values: Sequence[SettingValue | str | None], plant: Plant) -> SpanScale | None:
    """Return the settings and the operating values on the range that the settings are compared with."""
    settings = tuple(
        (title, value.percent)
        for (title, _), value in zip(SETTINGS, values, strict=True)
        if isinstance(value, SettingValue) and value.percent is not None
    )
    if not settings:
        return None
    measurement = measurement_of(each)
    given = (*(getattr(each.record, name) for _, name in SETTINGS), each.record.set_pressure)
    scale = next((found for value in given if value is not None and (found := measurement.scale_of(value))), None)
    if scale is None:
        return None
    operating = [
        (title, setting_value(quantity, each, plant).percent)
        for title, quantity in zip(_OPERATING, measurement.values, strict=True)
        if quantity is not None and measurement.scale_of(quantity) is scale
    ]
    return SpanScale(
        tag=each.name,
        lrv=str(scale.lrv),
        urv=str(scale.urv),
        settings=settings,
        operating=tuple((title, percent) for title, percent in operating if percent is not None),
    )


def setting_value(value: Quantity, each: Installed, plant: Plant) -> SettingValue:
    """Return a setting with its place on the span and, of a 4-20 mA signal, its current.

    The range is the field's, where it has the setting's dimension, else the control system's. A
    pressure that is referred to nothing is read as the plant's default.
    """
    record = each.record
    measurement = measurement_of(each)
    scale = measurement.scale_of(value)
    if scale is None:
        return SettingValue(text=str(value))
    quantities = (value, scale.lrv, scale.urv)
    references = {measurement.reference(quantity) if scale.is_pressure else None for quantity in quantities}
    default = plant.data.default_reference
    numbers = tuple(
        measurement.at(quantity, to="gauge", open_as=default, atmospheric_pa=plant.data.atmospheric_pa)
        for quantity in quantities
    )
    # No figure leads from an absolute pressure to a difference.
    if {reference or default for reference in references} >= {"absolute", "differential"} or None in numbers:
        return SettingValue(text=str(value))
    setting, lrv, urv = (number for number in numbers if number is not None)
    percent = percent_of_span(setting, lrv, urv)
    ma = None
    if any(signal_of(row, each) == LIVE_ZERO for row in each.signals or (record,)):
        ma = measurement.ma_at(setting, scale, lrv=lrv, urv=urv)
    assumed = f"a pressure without stated reference is {default}" if None in references and len(references) > 1 else ""
    return SettingValue(text=str(value), percent=percent, ma=ma, assumed=assumed)


# --------------------------------------------------------------------------------------------------------
# Circuits


def _circuit(
    circuit: Circuit,
    plant: Plant,
    shown_above: str | None,
    members: Sequence[Installed],
    settings: Iterable[SettingLine],
) -> CircuitContent:
    service = circuit.device.record.service
    if circuit.signal_row.service and circuit.signal_row is not circuit.device.record:
        service = circuit.signal_row.service
    path = path_of(circuit, plant, members=members)
    return CircuitContent(
        name=circuit.name,
        kind=circuit.kind,
        device=circuit.device.name,
        service=service if service != shown_above else None,
        fields=tuple(_fields(circuit)),
        path=path,
        classification=_classification(circuit.device),
        conductors=_conductors(circuit, plant),
        power=power_of(circuit, plant),
        check=check_table(circuit, plant),
        tries=things_to_try(circuit, _set_on(circuit.device, settings), members),
        entity=entity_table(circuit, plant),
        system=system_document(circuit, plant, path),
    )


def _set_on(device: Installed, lines: Iterable[SettingLine]) -> list[Set]:
    """Return the settings of a device with the currents that they give."""
    found: list[Set] = []
    for line in lines:
        if line.tag != device.name:
            continue
        for (title, _), value in zip(SETTINGS, line.values, strict=True):
            if isinstance(value, SettingValue):
                text = value.text if value.ma is None else f"{value.text} = {value.ma:.2f} mA"
                found.append(Set(title=title, text=text, direction=line.direction))
    return found


_YES_NO: Final = {True: "yes", False: "no", None: None}


def _fields(circuit: Circuit) -> Iterable[Field]:
    """The circuit's values as given, in the order from the field to the system."""
    signal, record, kind = circuit.signal_row, circuit.device.record, circuit.kind
    analogue = kind in (ANALOGUE_INPUT, ANALOGUE_OUTPUT, None)

    def given(name: str) -> str | None:
        return getattr(signal, name) or getattr(record, name) or None

    yield Field(label="Signal", value=_signal_text(circuit))
    if kind not in (DIGITAL_INPUT, DIGITAL_OUTPUT):
        yield Field(label="Wires", value=f"{circuit.wires}-wire" if circuit.wires else None)
    yield Field(label="I/O type", value=_first(signal.io_type, circuit.row.kind if circuit.row else None))
    yield Field(label="I/O address", value=given("io_address"))
    yield Field(label="Card", value=circuit.card_named)
    yield Field(label="System", value=given("system"))
    yield Field(label="Barrier or isolator", value=circuit.barrier_named)
    yield Field(label="Intrinsically safe", value=_YES_NO[circuit.intrinsically_safe])
    yield Field(label="Power supply", value=circuit.supply_named)
    if kind != ANALOGUE_OUTPUT:
        yield Field(label="Supply V", value=_supply_text(circuit))
    if kind in (ANALOGUE_INPUT, None):
        across = len(circuit.receivers) > 1 and circuit.receiver_ohm != circuit.receivers[0]
        receiver = _number_text(circuit.receiver_ohm)
        yield Field(label="Receiver ohm", value=f"{receiver} with the inputs across it" if across else receiver)
    if analogue:
        yield Field(label="HART", value=_YES_NO[circuit.hart])
    yield Field(label="Junction box", value=given("junction_box"))
    yield Field(label="Terminals", value=given("terminals"))
    yield Field(label="Cable", value=given("cable"))
    kinds = [f"{each.name}: {each.type.code}" if each.type else None for each in circuit.segments]
    yield Field(label="Cable type", value=_listed(kinds) or circuit.cable_type_named)
    yield Field(label="Cable length m", value=_number_text(circuit.cable_length_m))
    yield Field(label="Conductor", value=_conductors_text(circuit))
    yield Field(label="Pair", value=given("pair"))
    if kind in (DIGITAL_INPUT, None):
        yield Field(label="Contact", value=given("contact"))
    if kind in (DIGITAL_INPUT, DIGITAL_OUTPUT):
        action = given("trip_action")
        yield Field(label="Trip action", value=f"{action} to trip" if action else None)
    if kind in (ANALOGUE_INPUT, RESISTANCE_THERMOMETER, THERMOCOUPLE):
        yield Field(label="On failure the signal goes", value=given("failure_direction"))
    if kind in (ANALOGUE_OUTPUT, DIGITAL_OUTPUT):
        fails = _listed(each.record.failure_position for each in (*circuit.members, circuit.device))
        yield Field(label="Fails to", value=fails)
    for label, name in (("Safety function", "safety_function"), ("SIL", "sil"), ("Voting", "voting")):
        if getattr(record, name):
            yield Field(label=label, value=getattr(record, name))
    if circuit.row is not None and circuit.row.parent_loop:
        yield Field(label="Parent loop", value=circuit.row.parent_loop)


_SOURCES: Final = {"card": " (of the card)", "cables": " (sum of its cables)"}


def _number_text(given: Given | None) -> str | None:
    return f"{format_number(given.number)}{_SOURCES.get(given.source, '')}" if given is not None else None


def _conductors_text(circuit: Circuit) -> str | None:
    """Return the conductor's size; of a run whose cables differ, with the cable that has it."""
    sizes = {each.name: each.conductor or (each.type.conductor if each.type else None) for each in circuit.segments}
    if len(set(sizes.values())) > 1:
        return _listed(f"{name}: {_conductor_text(size) or '?'}" for name, size in sizes.items())
    return _conductor_text(circuit.conductor or next(iter(sizes.values()), None))


def _conductor_text(text: str | None) -> str | None:
    """Return the conductor as listed; a bare number is read as mm2, here as in the voltage budget."""
    return f"{text} mm\u00b2" if text and text.replace(".", "", 1).isdigit() else text


def _supply_text(circuit: Circuit) -> str | None:
    low, nominal, high = circuit.supply_min_v, circuit.supply_nominal_v, circuit.supply_max_v
    ends = " to ".join(format_number(each.number) for each in (low, high) if each is not None)
    if ends and (low is None or high is None):
        ends = f"{ends} {'max' if low is None else 'min'}"
    if nominal is None:
        return ends or None
    return f"{format_number(nominal.number)} nominal{f' ({ends})' if ends else ''}"


def _signal_text(circuit: Circuit) -> str | None:
    kind = circuit.device.type
    return _first(circuit.signal_row.signal, circuit.device.record.signal, kind.signal if kind else None)


def _conductors(circuit: Circuit, plant: Plant) -> tuple[Conductor, ...]:
    return tuple(
        Conductor(
            from_item=row.from_item,
            from_terminal=row.from_terminal,
            to_item=row.to_item,
            to_terminal=row.to_terminal,
            cable=row.cable,
            pair=row.pair,
            core=row.core,
            colour=row.colour,
            wire_mark=row.wire_mark,
            screen=row.screen_earthed_at,
        )
        for row in terminations_of(circuit, plant)
    )


# --------------------------------------------------------------------------------------------------------
# Power


def power_of(circuit: Circuit, plant: Plant) -> Power | None:
    """Return the voltage budget of a circuit as `loops.budget` works it; None where no such budget is asked for."""
    feeds = feeds_a_transmitter(circuit)
    if feeds is False:
        return None
    if feeds is None:
        return Power(missing=("wires: whether it is a 2-wire transmitter",))
    budget = lift_off(circuit, plant.data)
    cable = budget.cable
    cable_name = "cable"
    if cable is not None:
        cable_name = f"cable {format_number(cable.length_m)} m, both ways, {budget.hot_c:g} \u00b0C"
    assumed_receiver = circuit.receiver_ohm is None
    worst, at_20 = budget.worst, budget.at_20_ma
    lines: list[PowerLine] = []
    if worst is not None:
        drops_20 = [term.drop_v for term in at_20.terms] if at_20 is not None else [None] * len(worst.terms)
        for term, drop_20_v in zip(worst.terms, drops_20, strict=True):
            lines.append(
                PowerLine(
                    name=cable_name if term.name == "cable" else term.name,
                    ohm=term.ohm,
                    drop_v=term.drop_v,
                    drop_20_v=drop_20_v,
                    assumed=assumed_receiver and term.name == "receiver",
                )
            )
    else:
        lines.extend(
            PowerLine(name=name, ohm=ohm, assumed=assumed_receiver and name == "receiver")
            for name, ohm in budget.resistances
        )
        if cable is not None:
            lines.append(PowerLine(name=cable_name, ohm=cable.ohm(budget.hot_c)))
        lines.extend(PowerLine(name=name, drop_v=volts) for name, volts in budget.fixed_drops)
    return Power(
        current_ma=budget.current_ma,
        source_name=budget.source_name,
        source_v=budget.source_v,
        source_assumed=any(text.startswith("supply") for text in budget.assumed),
        lines=tuple(lines),
        at_terminals_v=worst.at_terminals_v if worst else None,
        at_terminals_20_v=at_20.at_terminals_v if at_20 else None,
        lift_off_v=budget.lift_off_v,
        margin_v=worst.margin_v if worst else None,
        margin_20_v=at_20.margin_v if at_20 else None,
        working=_working(worst, budget.kindest),
        missing=() if worst is not None else budget.missing,
        assumed=budget.assumed,
    )


def _working(worst: VoltageBudget | None, kindest: VoltageBudget | None) -> str:
    if worst is not None:
        return worst.working
    if kindest is not None and not kindest.passes:
        return f"even with the kindest values for what is missing: {kindest.working}"
    return ""
