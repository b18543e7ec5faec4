"""Which signals there are, and which devices stand on each: from rows to circuits and loops."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.record import DeviceType, Instrument
from instruments.tag import natural_key
from loops.circuit import (
    ANALOGUE_INPUT,
    ANALOGUE_OUTPUT,
    DIGITAL_INPUT,
    DIGITAL_OUTPUT,
    RESISTANCE_THERMOMETER,
    THERMOCOUPLE,
    Circuit,
    Given,
    Loop,
)
from loops.record import LoopRow

if TYPE_CHECKING:
    from loops.plant import Plant

# What stands in an I/O column where there is no I/O.
_NO_IO = frozenset(
    {"", "none", "soft", "-", "local", "no", "n/a", "na", "0", "nil", "not applicable", "pneumatic", "mechanical",
     "software", "calc", "calculated", "internal", "lokal", "keine", "ohne"}
)  # fmt: skip
_VOLTS = re.compile(
    r"(?<![\d.,])(\d{1,3}(?:[.,]\d{1,2})?)\s*v(?![a-z]*a\b)\s*(ac|dc|d\.c\.|a\.c\.|=|~)?", re.IGNORECASE
)
_LOOP_POWERED = re.compile(r"\b(loop|2[\s-]?wire|two[\s-]?wire|2l)\b", re.IGNORECASE)
_KIND_WORDS = (
    (re.compile(r"^(?:is[\s-]?|sis[\s-]?|h)?ai\b|analog\w* in", re.IGNORECASE), ANALOGUE_INPUT),
    (re.compile(r"^(?:is[\s-]?)?ao\b|analog\w* out", re.IGNORECASE), ANALOGUE_OUTPUT),
    (re.compile(r"^(?:is[\s-]?)?d[io]\s*/\s*d[io]\b", re.IGNORECASE), DIGITAL_INPUT),
    (re.compile(r"^(?:is[\s-]?)?di\b|digital in|binary in|discrete in", re.IGNORECASE), DIGITAL_INPUT),
    (re.compile(r"^(?:is[\s-]?)?do\b|digital out|binary out|discrete out", re.IGNORECASE), DIGITAL_OUTPUT),
    (re.compile(r"^rtd\b|^pt\s?100\b|resistance", re.IGNORECASE), RESISTANCE_THERMOMETER),
    (re.compile(r"^t/?c\b|thermoc", re.IGNORECASE), THERMOCOUPLE),
)
# Devices whose signal makes a circuit though no I/O is given for it.
_SIGNAL_KINDS = frozenset(kind for kind in Kind if kind.wired in ("yes", "element"))
_TRANSMITTERS = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR})
_VALVE_DRIVES = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID})
_DRIVEN_VALVES = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})
# From the field to the system; what is not named stands with the device.
_FIELD_ORDER = {
    Kind.ELEMENT: 0,
    Kind.CONTROL_VALVE: 0,
    Kind.ON_OFF_VALVE: 0,
    Kind.INDICATOR: 2,
    Kind.JUNCTION_BOX: 3,
    Kind.BARRIER: 4,
    Kind.ISOLATOR: 4,
    Kind.CARD: 5,
}
_WITH_DEVICE = 1


def wire(plant: Plant) -> tuple[tuple[Circuit, ...], tuple[Loop, ...]]:
    """Return the plant's circuits and loops.

    A circuit is one I/O address, one row of the loop list, or one wired instrument; a loop has one
    or more. Devices without a signal of their own (an element beside its transmitter, an indicator
    in series, the valve of a positioner) stand on the circuit of the device that has it.
    """
    by_loop: dict[str, list[Installed]] = defaultdict(list)
    names: dict[str, str] = {}
    for each in plant.instruments:
        if each.live and each.loop:
            key = _key(each.loop)
            by_loop[key].append(each)
            names.setdefault(key, each.loop)
    rows = _LoopRows(plant)
    made: list[tuple[Installed, Instrument, LoopRow | None]] = []
    for each in plant.instruments:
        if not each.live:
            continue
        made.extend(
            (each, signal, rows.row_for(each, signal)) for signal in _signals(each, by_loop, plant, rows)
        )
    circuits = _circuits(made, by_loop, plant, rows)
    on_loop: dict[str, list[Circuit]] = defaultdict(list)
    for circuit in circuits:
        if circuit.loop:
            on_loop[_key(circuit.loop)].append(circuit)
    loops = tuple(
        Loop(name=names[key], members=tuple(members), circuits=tuple(on_loop.get(key, ())))
        for key, members in sorted(by_loop.items(), key=lambda item: natural_key(names[item[0]]))
    )
    return circuits, loops


class _LoopRows:
    """The rows of the loop list, found by tag or by loop number."""

    def __init__(self, plant: Plant) -> None:
        self.by_device: dict[int, list[LoopRow]] = defaultdict(list)
        self.by_number: dict[str, list[LoopRow]] = defaultdict(list)
        self.count: dict[str, int] = defaultdict(int)
        for row in plant.loop_rows:
            if row.number:
                self.count[_key(row.number)] += 1
            devices = plant.by_tag(row.circuit) if row.circuit else ()
            for device in devices:
                self.by_device[id(device)].append(row)
            if not devices and row.number:
                named = plant.by_tag(row.number)
                for device in named:
                    self.by_device[id(device)].append(row)
                if not named:
                    self.by_number[_key(row.number)].append(row)

    def row_for(self, each: Installed, signal: Instrument) -> LoopRow | None:
        """Return the row that describes the circuit of a device's signal."""
        own = self.by_device.get(id(each), [])
        if own:
            kind = circuit_kind(signal.io_type) or circuit_kind(signal.signal)
            for row in own:
                if len(own) == 1 or kind is None or circuit_kind(row.kind) == kind:
                    return row
            return own[0]
        if not each.loop:
            return None
        kind = _signal_kind(each, signal)
        of_loop = self.by_number.get(_key(each.loop), [])
        for row in of_loop:
            stated = circuit_kind(row.kind)
            if stated is None or kind is None or stated == kind:
                return row
        return None


def circuit_kind(text: str | None) -> str | None:
    """Return AI, AO, DI, DO, RTD or TC for an I/O type or kind as written; None where it says none of them.

    >>> circuit_kind("AI-HART"), circuit_kind("Digital Input"), circuit_kind("Pt100"), circuit_kind("bus")
    ('AI', 'DI', 'RTD', None)
    """
    if not text:
        return None
    for pattern, kind in _KIND_WORDS:
        if pattern.search(text.strip()):
            return kind
    return None


def _signal_kind(each: Installed, signal: Instrument) -> str | None:
    stated = circuit_kind(signal.io_type)
    if stated:
        return stated
    text = (signal.signal or (each.type.signal if each.type else None) or "").casefold()
    if each.kind is Kind.ELEMENT:
        if "pt" in text or "rtd" in text:
            return RESISTANCE_THERMOMETER
        if "tc" in text or "thermo" in text or "type" in text:
            return THERMOCOUPLE
    if each.kind in _TRANSMITTERS or each.measuring_point:
        return ANALOGUE_INPUT if "ma" in text or "hart" in text or not text else None
    if each.kind in (Kind.SWITCH, Kind.HAND_SWITCH):
        return DIGITAL_INPUT
    if each.kind in (Kind.POSITIONER, Kind.IP_CONVERTER):
        return ANALOGUE_OUTPUT
    if each.kind in (Kind.SOLENOID, Kind.LAMP, Kind.SOUNDER):
        return DIGITAL_OUTPUT
    if each.kind in _DRIVEN_VALVES:
        return ANALOGUE_OUTPUT if "ma" in text else None
    return None


def _signals(
    each: Installed, by_loop: dict[str, list[Installed]], plant: Plant, rows: _LoopRows
) -> list[Instrument]:
    """Return the rows of an instrument that make a circuit each."""
    if each.record.location == "system" and not any(has_io(row) for row in each.signals):
        return []
    with_io = [row for row in each.signals if has_io(row)]
    if with_io:
        return with_io
    if id(each) in rows.by_device:
        return [each.signals[0] if each.signals else each.record]
    if each.kind not in _SIGNAL_KINDS or each.kind is None or each.equipment_tag:
        return []
    if each.kind is Kind.ELEMENT and transmitter_of(each, by_loop.get(_key(each.loop), ())) is not None:
        return []
    return [each.record]


def has_io(row: Instrument) -> bool:
    """Whether a row gives a channel: an I/O address, or an I/O type that is not a word for none."""
    return bool(row.io_address or (row.io_type and row.io_type.strip().casefold() not in _NO_IO))


def transmitter_of(element: Installed, loop: Sequence[Installed]) -> Installed | None:
    """Return the transmitter that an element of the loop is wired to; None where there is none.

    Where the loop has several, the one with the element's suffix.
    """
    transmitters = [each for each in loop if each is not element and each.kind in _TRANSMITTERS]
    if not transmitters:
        return None
    suffix = element.tag.suffix if element.tag else None
    for each in transmitters:
        if each.tag is not None and each.tag.suffix == suffix:
            return each
    return transmitters[0]


def _circuits(
    made: list[tuple[Installed, Instrument, LoopRow | None]],
    by_loop: dict[str, list[Installed]],
    plant: Plant,
    rows: _LoopRows,
) -> tuple[Circuit, ...]:
    per_loop: dict[str, int] = defaultdict(int)
    for each, _, row in made:
        per_loop[_key((row.number if row else None) or each.loop)] += 1
    carriers: dict[str, list[Installed]] = defaultdict(list)
    for each, _, _ in made:
        if each.loop:
            carriers[_key(each.loop)].append(each)
    carrying = {id(each) for each, _, _ in made}
    taken: set[str] = set()
    circuits: list[Circuit] = []
    for each, signal, row in made:
        number = (row.number if row is not None else None) or each.loop
        several = per_loop[_key(number)] > 1 or (number is not None and rows.count.get(_key(number), 0) > 1)
        name = number or each.name
        if several and number:
            name = f"{number} {each.name}"
        called, count = name, 1
        while called in taken:
            count += 1
            called = f"{name} ({count})"
        taken.add(called)
        kind = circuit_kind(row.kind if row else None) or _signal_kind(each, signal)
        riders = [
            other
            for other in by_loop.get(_key(each.loop), ())
            if id(other) not in carrying and _rides_on(other, carriers[_key(each.loop)]) is each
        ]
        members = sorted(
            [each, *riders],
            key=lambda one: _FIELD_ORDER.get(one.kind, _WITH_DEVICE) if one.kind else _WITH_DEVICE,
        )
        circuits.append(_circuit(called, each, signal, row, kind, tuple(members), plant))
    return tuple(circuits)


def _rides_on(other: Installed, carriers: Sequence[Installed]) -> Installed | None:
    """Return the device whose signal passes through a device that has none of its own."""
    wanted: frozenset[Kind]
    if other.kind is Kind.ELEMENT:
        wanted = _TRANSMITTERS
    elif other.kind is Kind.INDICATOR:
        if not (other.record.signal or other.listed_type or other.record.ex_marking):
            return None
        wanted = _TRANSMITTERS
    elif other.kind in _DRIVEN_VALVES:
        wanted = _VALVE_DRIVES
    else:
        return None
    suitable = [
        each for each in carriers if each.kind in wanted or (each.measuring_point and wanted is _TRANSMITTERS)
    ]
    suffix = other.tag.suffix if other.tag else None
    for each in suitable:
        if each.tag is not None and each.tag.suffix == suffix:
            return each
    return suitable[0] if suitable else None


def _circuit(
    name: str,
    each: Installed,
    signal: Instrument,
    row: LoopRow | None,
    kind: str | None,
    members: tuple[Installed, ...],
    plant: Plant,
) -> Circuit:
    record = each.record
    card_named = (row.card if row else None) or signal.card or record.card
    barrier_named = (row.barrier if row else None) or signal.barrier or record.barrier
    card = plant.named_type(card_named)
    barrier = plant.named_type(barrier_named)
    supply_named = signal.power_supply or record.power_supply
    type_named = (row.cable_type if row else None) or signal.cable_type or record.cable_type
    cable_type, cable_type_named = _cable_type(type_named, signal, plant)
    wires = signal.wires or record.wires or (each.type.wires if each.type else None)
    low, nominal, high = _supply(row, signal, supply_named, card, plant)
    hart = row.hart if row is not None and row.hart is not None else None
    if hart is None:
        text = f"{signal.signal or ''} {(each.type.signal if each.type else '') or ''}".casefold()
        hart = True if "hart" in text else (each.type.hart if each.type else None)
    return Circuit(
        name=name,
        loop=(row.number if row else None) or each.loop,
        kind=kind,
        device=each,
        signal_row=signal,
        members=members,
        row=row,
        card=card,
        card_named=card_named,
        barrier=barrier,
        barrier_named=barrier_named,
        supply_min_v=low,
        supply_nominal_v=nominal,
        supply_max_v=high,
        supply_named=supply_named,
        receiver_ohm=_receiver(row, signal, record, card),
        cable_length_m=_length(row, signal, record, plant),
        cable_type=cable_type,
        cable_type_named=cable_type_named,
        conductor=signal.conductor or record.conductor or (cable_type.conductor if cable_type else None),
        hart=hart,
        intrinsically_safe=row.intrinsically_safe if row else None,
        wires=wires,
        powered_by_loop=_powered_by_loop(wires, supply_named),
    )


def _powered_by_loop(wires: int | None, supply_named: str | None) -> bool | None:
    if wires == 2:
        return True
    if wires in (3, 4):
        return False
    if supply_named and _LOOP_POWERED.search(supply_named):
        return True
    return None


def volts_in(text: str | None) -> tuple[float, bool | None] | None:
    """Return the volts that a supply's text states, and whether they are dc; None where it states none.

    >>> volts_in("24VDC"), volts_in("230 V AC"), volts_in("loop")
    ((24.0, True), (230.0, False), None)
    """
    if not text:
        return None
    match = _VOLTS.search(text)
    if match is None:
        return None
    volts = float(match[1].replace(",", "."))
    current = (match[2] or "").casefold().replace(".", "")
    return volts, {"": None, "dc": True, "=": True, "ac": False, "~": False}[current]


def _supply(
    row: LoopRow | None, signal: Instrument, supply_named: str | None, card: DeviceType | None, plant: Plant
) -> tuple[Given | None, Given | None, Given | None]:
    if row is not None and (row.supply_min_v or row.supply_nominal_v or row.supply_max_v):
        return (
            _given(row.supply_min_v, "loop row", row, "supply_min_v"),
            _given(row.supply_nominal_v, "loop row", row, "supply_nominal_v"),
            _given(row.supply_max_v, "loop row", row, "supply_max_v"),
        )
    volts = volts_in(supply_named)
    if volts is not None and volts[1] is not False and volts[0] < 100:
        return None, _given(volts[0], "row", signal, "power_supply"), None
    entry = plant.named_type(supply_named)
    if entry is not None and entry.nominal_v:
        return None, _given(entry.nominal_v, "power supply", entry, "nominal_v"), None
    if card is not None and card.nominal_v and card.source_or_sink != "sink":
        return None, _given(card.nominal_v, "card", card, "nominal_v"), None
    return None, None, None


def _receiver(
    row: LoopRow | None, signal: Instrument, record: Instrument, card: DeviceType | None
) -> Given | None:
    if row is not None and row.range_resistor_ohm is not None:
        return _given(row.range_resistor_ohm, "loop row", row, "range_resistor_ohm")
    for owner in (signal, record):
        if owner.receiver_ohm is not None:
            return _given(owner.receiver_ohm, "row", owner, "receiver_ohm")
    if card is not None and card.input_ohm is not None:
        return _given(card.input_ohm, "card", card, "input_ohm")
    return None


def _length(row: LoopRow | None, signal: Instrument, record: Instrument, plant: Plant) -> Given | None:
    """The loop's length; if blank the row's; if blank the sum of its cables: never added across sheets."""
    if row is not None and row.cable_length_m is not None:
        return _given(row.cable_length_m, "loop row", row, "cable_length_m")
    for owner in (signal, record):
        if owner.cable_length_m is not None:
            return _given(owner.cable_length_m, "row", owner, "cable_length_m")
    cables = [
        plant.cables.get(_key(name))
        for name in re.split(r"[,;\n]", signal.cable or record.cable or "")
        if name.strip()
    ]
    found = [cable for cable in cables if cable is not None]
    if found and len(found) == len(cables) and all(cable.length_m is not None for cable in found):
        return Given(
            number=sum(cable.length_m or 0.0 for cable in found),
            source="cables",
            cells=tuple(cell for cable in found for cell in cable.cells("length_m")),
        )
    return None


def _cable_type(text: str | None, signal: Instrument, plant: Plant) -> tuple[Any, str | None]:
    if text is None and signal.cable:
        for name in re.split(r"[,;\n]", signal.cable):
            cable = plant.cables.get(_key(name))
            if cable is not None and cable.type:
                text = cable.type
                break
    return (plant.cable_types.get(_key(text)) if text else None), text


def _given(number: float | None, source: str, owner: Any, name: str) -> Given | None:
    if number is None:
        return None
    return Given(number=number, source=source, cells=owner.cells(name))


def _key(text: str | None) -> str:
    return "".join(text.split()).casefold() if text else ""
