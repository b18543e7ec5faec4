"""The path of a circuit from its device to its card: the stations that it passes, and each conductor between them."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from enum import StrEnum
from typing import Final, NamedTuple

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.quantity import format_number
from loops.circuit import (
    ANALOGUE_INPUT,
    ANALOGUE_OUTPUT,
    RESISTANCE_THERMOMETER,
    THERMOCOUPLE,
    Circuit,
)
from loops.given import is_box, listed_cables
from loops.plant import Plant, name_key
from loops.record import Cable, Termination

MOST_CONDUCTORS: Final = 8
"""What a drawing can show side by side; the table of terminations shows them all."""
MOST_STATIONS: Final = 14


class Symbol(StrEnum):
    """What a station is."""

    DEVICE = "device"
    IN_SERIES = "in series"
    BOX = "junction box"
    STRIP = "terminal strip"
    BARRIER = "barrier or isolator"
    CARD = "card"


class Zone(StrEnum):
    """Where a station stands; the order in which they are drawn never changes."""

    FIELD = "field"
    CABINET = "cabinet"
    SYSTEM = "control system"


@dataclass(frozen=True, slots=True, kw_only=True)
class Station:
    """One thing that the circuit passes.

    Attributes
    ----------
    symbol, zone
        What it is, and where it stands.
    name
        What it is called; None where nobody named it.
    lines
        What else is written at it: its strip, its type, its address.
    device
        The instrument, where it is one.
    """

    symbol: Symbol
    zone: Zone
    name: str | None
    lines: tuple[str, ...] = ()
    device: Installed | None = field(default=None, repr=False)


@dataclass(frozen=True, slots=True, kw_only=True)
class Wire:
    """One conductor between two stations; None where nobody gave a value.

    `left` and `right` are its terminals at the station before and at the one behind it. `ends_at` names
    where it ends, when that is not the next station: an earth bar, for a screen.
    """

    left: str | None = None
    right: str | None = None
    core: str | None = None
    colour: str | None = None
    mark: str | None = None
    ends_at: str | None = None
    is_screen: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Stretch:
    """The conductors between two stations, with the cable that holds them.

    `wires` has a place for each conductor of the path, None where it does not run here. `internal` is
    wiring inside one cabinet, for which no cable is asked.
    """

    wires: tuple[Wire | None, ...]
    cable: str | None = None
    cable_type: str | None = None
    pair: str | None = None
    length_m: float | None = None
    screen_earthed_at: str | None = None
    internal: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Path:
    """A circuit's way from the field to the system.

    Attributes
    ----------
    stations, stretches
        One stretch less than there are stations.
    joined
        What the device is joined with, without wires of this circuit: its element, the valve that it drives.
    functions
        The soft functions of its loop that read or drive it.
    supply
        What feeds a device that does not live on its signal.
    boundary
        Number of the stretch in which the hazardous area ends; None where no area is stated.
    from_terminations
        Whether the termination list gave it; else the circuit's own row did.
    """

    stations: tuple[Station, ...]
    stretches: tuple[Stretch, ...]
    joined: tuple[Installed, ...] = field(default=(), repr=False)
    functions: tuple[Installed, ...] = field(default=(), repr=False)
    supply: str | None = None
    boundary: int | None = None
    from_terminations: bool = False

    @property
    def conductors(self) -> int:
        """How many conductors are drawn side by side."""
        return max((len(stretch.wires) for stretch in self.stretches), default=0)


def path_of(circuit: Circuit, plant: Plant, *, members: Sequence[Installed]) -> Path:
    """Return the path of a circuit: as the termination list has it, else as its own row tells it.

    Parameters
    ----------
    circuit
        The circuit.
    plant
        Its plant.
    members
        The instruments of its loop.
    """
    rows = terminations_of(circuit, plant)
    found = _listed_path(circuit, rows, plant) if rows else None
    stations, stretches = found or _told_path(circuit, plant)
    stations, stretches = _to_the_card(circuit, stations, stretches)
    inside = [number for number, station in enumerate(stations) if station.zone is Zone.FIELD]
    area = circuit.area
    classified = area is not None and area.system in ("zone", "division")
    return Path(
        stations=tuple(stations),
        stretches=tuple(stretches),
        joined=_joined(circuit.device, members),
        functions=_functions(circuit, members),
        supply=circuit.supply_named if circuit.powered_by_loop is False else None,
        boundary=inside[-1] if classified and inside and inside[-1] < len(stretches) else None,
        from_terminations=found is not None,
    )


# --------------------------------------------------------------------------------------------------------
# The termination list


def terminations_of(circuit: Circuit, plant: Plant) -> Sequence[Termination]:
    """Return the rows of the termination list that are a circuit's.

    A device with several circuits has its rows with the first: no row says which is meant.
    """
    by_circuit: Mapping[int, list[Termination]] = plant.once("loop sheets' terminations", _terminations)
    return by_circuit.get(id(circuit), ())


def _terminations(plant: Plant) -> dict[int, list[Termination]]:
    """Return the terminations of each circuit: by the circuit's name, by a tag on it, or by a loop of one circuit."""
    by_name: dict[str, Circuit] = {}
    by_loop: dict[str, list[Circuit]] = defaultdict(list)
    for circuit in plant.circuits:
        by_name.setdefault(name_key(circuit.name), circuit)
        by_loop[name_key(circuit.loop)].append(circuit)
    found: dict[int, list[Termination]] = defaultdict(list)
    for row in plant.terminations:
        if not row.circuit:
            continue
        named = by_name.get(name_key(row.circuit))
        if named is None:
            devices = plant.by_tag(row.circuit)
            circuits = plant.circuits_of(devices[0]) if devices else ()
            own = [circuit for circuit in circuits if circuit.device is devices[0]]
            named = next(iter(own or circuits), None)
        if named is None:
            of_loop = by_loop.get(name_key(row.circuit), [])
            named = of_loop[0] if len(of_loop) == 1 else None
        if named is not None:
            found[id(named)].append(row)
    return found


class _Terminal(NamedTuple):
    """One terminal: the item and the terminal as written."""

    item: str | None
    text: str | None

    @property
    def station(self) -> tuple[str, str]:
        """What tells its station from others: the item and the strip."""
        return name_key(self.item), name_key(self.strip)

    @property
    def strip(self) -> str | None:
        """The strip that it is on."""
        strip, colon, _ = (self.text or "").rpartition(":")
        return strip.strip() or None if colon else None

    @property
    def number(self) -> str | None:
        """Its number, or whatever it is called, on its strip."""
        text = _SIDE.sub("", self.text or "").strip()
        return text.rpartition(":")[2].strip() or None


_SIDE: Final = re.compile(r"\s*/\s*(?:in|out)$", re.IGNORECASE)


class _Hop(NamedTuple):
    """A row of the termination list, read in the direction from the field."""

    start: _Terminal
    end: _Terminal
    row: Termination


Chain = list[_Hop]


def _chains(rows: Sequence[Termination], devices: frozenset[str]) -> list[Chain]:
    """Follow each conductor from a device on, whichever way round its rows are written."""

    def node(item: str | None, text: str | None, number: int, side: int) -> tuple[str, ...]:
        terminal = name_key(_SIDE.sub("", text or ""))
        if not terminal:
            # No terminal is none that another row could share.
            return (name_key(item), "", str(number), str(side))
        return (name_key(item), terminal)

    edges: list[tuple[tuple[str, ...], tuple[str, ...], Termination]] = []
    at: dict[tuple[str, ...], list[int]] = defaultdict(list)
    for number, row in enumerate(rows):
        one = node(row.from_item, row.from_terminal, number, 0)
        other = node(row.to_item, row.to_terminal, number, 1)
        edges.append((one, other, row))
        at[one].append(number)
        at[other].append(number)
    used: set[int] = set()
    chains: list[Chain] = []
    for first, (one, other, _) in enumerate(edges):
        if first in used or not {one[0], other[0]} & devices:
            continue
        here = one if one[0] in devices else other
        chain: Chain = []
        edge: int | None = first
        while edge is not None:
            used.add(edge)
            one, other, row = edges[edge]
            start, end = _Terminal(row.from_item, row.from_terminal), _Terminal(row.to_item, row.to_terminal)
            if here == other:
                one, other, start, end = other, one, end, start
            chain.append(_Hop(start, end, row))
            here = other
            edge = None if here[0] in devices else next((each for each in at[here] if each not in used), None)
        chains.append(chain)
    return chains


def _listed_path(
    circuit: Circuit, rows: Sequence[Termination], plant: Plant
) -> tuple[list[Station], list[Stretch]] | None:
    """Return the path that the termination list gives; None where its rows do not begin at the device."""
    devices = frozenset(
        name_key(text)
        for text in (circuit.device.name, circuit.device.record.tag, circuit.device.record.tag_written)
        if text
    )
    chains = _chains(rows, devices)
    if not chains or len(chains) > MOST_CONDUCTORS:
        return None
    # A screen goes to an earth bar and not on to the card, and is drawn beneath what it screens.
    chains.sort(key=_is_screen)
    longest = max(chains, key=lambda chain: (not _is_screen(chain), len(_stations_on(chain))))
    order = _stations_on(longest)
    if len(order) > MOST_STATIONS:
        return None
    place = {key: number for number, key in enumerate(order)}
    wires: list[list[Wire | None]] = [[None] * len(chains) for _ in order[1:]]
    firsts: list[Termination | None] = [None] * len(wires)
    screens: list[str | None] = [None] * len(wires)
    for lane, chain in enumerate(chains):
        for hop in chain:
            start, end = place.get(hop.start.station), place.get(hop.end.station)
            if start is None or end == start:
                continue
            row = hop.row
            onward = end == start + 1
            if onward:
                firsts[start] = firsts[start] or row
                screens[start] = screens[start] or row.screen_earthed_at
            elif start >= len(wires):
                continue
            elsewhere = name_key(hop.end.item) != name_key(hop.start.item)
            ends = " ".join(text for text in (hop.end.item if elsewhere else None, hop.end.text) if text)
            wires[start][lane] = Wire(
                left=_short(hop.start.number, circuit),
                right=_short(hop.end.number, circuit) if onward else None,
                core=row.core,
                colour=row.colour,
                mark=row.wire_mark,
                ends_at=None if onward else ends or "?",
                is_screen=_is_screen(chain),
            )
    stations = [_listed_station(number, key, longest, circuit, plant) for number, key in enumerate(order)]
    stretches = [
        replace(
            _listed_stretch(tuple(lanes), first, plant, internal=order[number][0] == order[number + 1][0]),
            screen_earthed_at=screen,
        )
        for number, (lanes, first, screen) in enumerate(zip(wires, firsts, screens, strict=True))
    ]
    return _in_zones(stations), stretches


def _short(terminal: str | None, circuit: Circuit) -> str | None:
    """Return a terminal without the tag that it is named after: ``FT-1007+`` is the + of FT-1007."""
    tag = circuit.device.record.tag
    return terminal[len(tag) :].strip() or terminal if terminal and tag and terminal.startswith(tag) else terminal


def _stations_on(chain: Chain) -> list[tuple[str, str]]:
    """Return the stations of a chain, each once."""
    found = dict.fromkeys([chain[0].start.station])
    for hop in chain:
        found.setdefault(hop.end.station)
    return list(found)


_SCREENS: Final = frozenset({"s", "sc", "scr", "scrn", "screen", "shield", "sh", "drain", "pe"})


def _is_screen(chain: Chain) -> bool:
    return any(name_key(hop.row.core) in _SCREENS for hop in chain)


_BARRIERS: Final = re.compile(r"(?:iso|isol|isolator|bar|barrier|zb|is)\b", re.IGNORECASE)


def _listed_station(number: int, key: tuple[str, str], chain: Chain, circuit: Circuit, plant: Plant) -> Station:
    terminals = [terminal for hop in chain for terminal in (hop.start, hop.end) if terminal.station == key]
    item, strip = terminals[0].item, terminals[0].strip
    lines = (strip,) if strip else ()
    if number == 0:
        return Station(symbol=Symbol.DEVICE, zone=Zone.FIELD, name=circuit.device.name, device=circuit.device)
    if item and name_key(item) in (name_key(circuit.card_named), name_key(circuit.signal_row.io_address)):
        return Station(symbol=Symbol.CARD, zone=Zone.SYSTEM, name=item, lines=_card_lines(circuit, item))
    barrier = name_key(circuit.barrier_named)
    if barrier and (barrier in (name_key(item), name_key(strip)) or (strip and _BARRIERS.match(strip))):
        return Station(symbol=Symbol.BARRIER, zone=Zone.CABINET, name=item, lines=_barrier_lines(circuit, item))
    if item and is_box(item, circuit.signal_row.junction_box or circuit.device.record.junction_box, plant):
        return Station(symbol=Symbol.BOX, zone=Zone.FIELD, name=item, lines=lines)
    riding = next((each for each in circuit.members if item and name_key(each.name) == name_key(item)), None)
    if riding is not None:
        return Station(symbol=Symbol.IN_SERIES, zone=Zone.FIELD, name=item, lines=lines, device=riding)
    return Station(symbol=Symbol.STRIP, zone=Zone.CABINET, name=item, lines=lines)


def _in_zones(stations: list[Station]) -> list[Station]:
    """Let no station stand in the cabinet before one in the field: what lies between is in the field too."""
    last = max(number for number, station in enumerate(stations) if station.zone is Zone.FIELD)
    return [
        station
        if number >= last or station.zone is Zone.FIELD
        else Station(
            symbol=station.symbol, zone=Zone.FIELD, name=station.name, lines=station.lines, device=station.device
        )
        for number, station in enumerate(stations)
    ]


def _listed_stretch(
    wires: tuple[Wire | None, ...], row: Termination | None, plant: Plant, *, internal: bool
) -> Stretch:
    name = row.cable if row is not None else None
    cable = plant.cables.get(name_key(name)) if name else None
    return Stretch(
        wires=wires,
        cable=name,
        cable_type=cable.type if cable is not None else None,
        pair=row.pair if row is not None else None,
        length_m=cable.length_m if cable is not None else None,
        internal=internal,
    )


# --------------------------------------------------------------------------------------------------------
# The circuit's own row


def _told_path(circuit: Circuit, plant: Plant) -> tuple[list[Station], list[Stretch]]:
    """Return the path as far as the circuit's row tells it: device, what is in series, the junction box."""
    signal, record = circuit.signal_row, circuit.device.record
    stations = [Station(symbol=Symbol.DEVICE, zone=Zone.FIELD, name=circuit.device.name, device=circuit.device)]
    riding = [each for each in circuit.members if each is not circuit.device and each.kind in _IN_SERIES]
    stations += [Station(symbol=Symbol.IN_SERIES, zone=Zone.FIELD, name=each.name, device=each) for each in riding]
    box = signal.junction_box or record.junction_box
    strip, numbers = _terminals(signal.terminals or record.terminals)
    if box:
        stations.append(Station(symbol=Symbol.BOX, zone=Zone.FIELD, name=box, lines=(strip,) if strip else ()))
    count = _conductor_count(circuit)
    polarity = _POLARITY if count == 2 and circuit.kind in _POLARISED else ()
    named = signal.cable or record.cable
    cables = listed_cables(named, box=box, plant=plant)
    names = [each.number for each in cables] or _names(named)
    stretches: list[Stretch] = []
    for number in range(len(stations) - 1):
        at_box = box is not None and number == len(stations) - 2
        at_device = number == 0
        stretches.append(
            _told_stretch(
                circuit,
                cables,
                names,
                number,
                tuple(
                    Wire(
                        left=polarity[lane] if at_device and polarity else None,
                        right=numbers[lane] if at_box and lane < len(numbers) else None,
                    )
                    for lane in range(count)
                ),
                alone=box is None,
            )
        )
    if len(stations) == 1 or box:
        # What leaves the last station in the field.
        left = numbers if box else polarity
        stretches.append(
            _told_stretch(
                circuit,
                cables,
                names,
                len(stations) - 1,
                tuple(Wire(left=left[lane] if lane < len(left) else None) for lane in range(count)),
                alone=not box,
            )
        )
    else:
        stretches.append(_told_stretch(circuit, cables, names, len(stations) - 1, (Wire(),) * count, alone=True))
    return stations, stretches


_IN_SERIES: Final = frozenset({Kind.INDICATOR, Kind.POSITIONER, Kind.IP_CONVERTER})
_POLARITY: Final = ("+", "\u2212")
_POLARISED: Final = frozenset({ANALOGUE_INPUT, ANALOGUE_OUTPUT, THERMOCOUPLE})
_CABLE_NAMES: Final = re.compile(r"\s*[,;\n]\s*")


def _names(text: str | None) -> list[str | None]:
    return [name for name in _CABLE_NAMES.split(text or "") if name][:MOST_STATIONS] if text else []


def _told_stretch(
    circuit: Circuit,
    cables: Sequence[Cable],
    names: Sequence[str | None],
    number: int,
    wires: tuple[Wire, ...],
    *,
    alone: bool,
) -> Stretch:
    """Return a stretch with its cable, where one is named for it; one cable alone has the circuit's whole run."""
    cable = cables[number] if number < len(cables) else None
    if cable is not None:
        return Stretch(wires=wires, cable=cable.number, cable_type=cable.type, length_m=cable.length_m,
                       pair=_pair(circuit) if number == 0 else None)  # fmt: skip
    name = names[number] if number < len(names) else None
    whole = circuit.cable_length_m.number if circuit.cable_length_m and alone and number == 0 else None
    return Stretch(
        wires=wires,
        cable=name,
        cable_type=circuit.cable_type_named if number < max(1, len(names)) else None,
        pair=_pair(circuit) if number == 0 else None,
        length_m=whole,
    )


def _pair(circuit: Circuit) -> str | None:
    return circuit.signal_row.pair or circuit.device.record.pair


def _terminals(text: str | None) -> tuple[str | None, list[str]]:
    """Return the strip and the terminals of a cell such as ``X1:1, X1:2``; the strip of the first stands for all."""
    if not text:
        return None, []
    found = [_Terminal(None, part.strip()) for part in re.split(r"[,;\n]", text) if part.strip()]
    strip = next((each.strip for each in found if each.strip), None)
    return strip, [
        each.number or "" if each.strip in (strip, None) else _SIDE.sub("", each.text or "") for each in found
    ][:MOST_CONDUCTORS]


def _conductor_count(circuit: Circuit) -> int:
    """Return how many conductors a signal takes: of a four-wire transmitter the two of its signal."""
    kind, wires = circuit.kind, circuit.wires
    if kind == RESISTANCE_THERMOMETER:
        return wires or 3
    if wires == 3:
        return 3
    return 2


# --------------------------------------------------------------------------------------------------------
# The system's end


def _to_the_card(
    circuit: Circuit, stations: Sequence[Station], stretches: Sequence[Stretch]
) -> tuple[list[Station], list[Stretch]]:
    """Lead a path on to the barrier and the card that the circuit names."""
    made, between = list(stations), list(stretches)
    lanes = max((len(stretch.wires) for stretch in between), default=_conductor_count(circuit))
    running = tuple(_runs_on(between[-1].wires[lane]) if between else Wire() for lane in range(lanes))

    def reach(station: Station) -> None:
        if len(between) < len(made):
            between.append(Stretch(wires=running, internal=made[-1].zone is not Zone.FIELD))
        made.append(station)

    symbols = {station.symbol for station in made}
    if Symbol.CARD not in symbols:
        if circuit.barrier_named and Symbol.BARRIER not in symbols:
            name = circuit.barrier_named
            reach(Station(symbol=Symbol.BARRIER, zone=Zone.CABINET, name=name, lines=_barrier_lines(circuit, name)))
        name_or_none = circuit.card_named
        reach(
            Station(symbol=Symbol.CARD, zone=Zone.SYSTEM, name=name_or_none, lines=_card_lines(circuit, name_or_none))
        )
    return made, between


def _runs_on(wire: Wire | None) -> Wire | None:
    """Return the conductor behind the last station that is known: a screen ends there."""
    return None if wire is None or wire.ends_at or wire.is_screen else Wire()


def _barrier_lines(circuit: Circuit, name: str | None) -> tuple[str, ...]:
    entry = circuit.barrier
    word = {"zener": "zener barrier", "isolator": "isolator"}.get(entry.isolation or "") if entry else None
    named = circuit.barrier_named if name_key(circuit.barrier_named) != name_key(name) else None
    return tuple(text for text in (named, word) if text)


def _card_lines(circuit: Circuit, name: str | None) -> tuple[str, ...]:
    signal, record = circuit.signal_row, circuit.device.record
    address = signal.io_address or record.io_address
    return tuple(
        text
        for text in (
            address if name_key(address) != name_key(name) else None,
            signal.io_type or (circuit.row.kind if circuit.row else None) or record.io_type,
        )
        if text
    ) + _resistor(circuit)


def _resistor(circuit: Circuit) -> tuple[str, ...]:
    """Return the resistor across which an input reads, with what lies across it."""
    receiver = circuit.receiver_ohm
    if circuit.kind != ANALOGUE_INPUT or receiver is None:
        return ()
    return (f"{format_number(receiver.number)} \u03a9",)


# --------------------------------------------------------------------------------------------------------
# What belongs to it beside its wires

_VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})
_DRIVES: Final = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID})
_SENSING: Final = frozenset({Kind.ELEMENT, Kind.PRIMARY_ELEMENT})
_MEASURING: Final = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.INDICATOR})
_MOST_SHOWN: Final = 2


def _joined(device: Installed, members: Sequence[Installed]) -> tuple[Installed, ...]:
    """Return the valve that a device drives or watches, or the elements that a transmitter measures with."""
    if device.kind in _DRIVES or (device.kind is Kind.SWITCH and device.letters.startswith("Z")):
        wanted = _VALVES
    elif device.kind in _MEASURING:
        wanted = _SENSING
    else:
        return ()
    found = [each for each in members if each.kind in wanted and each is not device]
    suffix = device.tag.suffix if device.tag else None
    alike = [each for each in found if (each.tag.suffix if each.tag else None) == suffix]
    shown = alike or (found if len(found) == 1 else [])
    return tuple(shown[:_MOST_SHOWN])


def _functions(circuit: Circuit, members: Iterable[Installed]) -> tuple[Installed, ...]:
    soft = [each for each in members if each.kind is Kind.SOFT_FUNCTION]
    if circuit.kind == ANALOGUE_OUTPUT:
        soft = [each for each in soft if "C" in each.letters[1:]] or soft
    return tuple(soft[:_MOST_SHOWN])
