"""Which signals there are, and which devices stand on each: from rows to circuits and loops."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import fields, replace
from functools import lru_cache
from itertools import zip_longest
from typing import TYPE_CHECKING, Final, NamedTuple

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.measurement import variable_of
from instruments.record import Instrument, Record
from instruments.signal_words import io_types, signal_classes
from instruments.tag import natural_key
from loops.circuit import (
    ANALOGUE_INPUT,
    ANALOGUE_OUTPUT,
    DIGITAL_INPUT,
    DIGITAL_OUTPUT,
    RESISTANCE_THERMOMETER,
    THERMOCOUPLE,
    Circuit,
    Loop,
)
from loops.given import cable_run, in_parallel, receivers_of, supply_of, supply_words, volts_in
from loops.record import LoopRow

if TYPE_CHECKING:
    from loops.plant import Plant

__all__ = ["circuit_kind", "has_io", "loop_key", "transmitter_of", "volts_in", "wire"]

# What stands in an I/O column where there is no I/O.
_NO_IO: Final = frozenset(
    {"", "none", "soft", "-", "local", "no", "n/a", "na", "0", "nil", "not applicable", "pneumatic", "mechanical",
     "software", "virtual", "calc", "calculated", "internal", "lokal", "keine", "ohne"}
)  # fmt: skip
# What a loop list calls the kinds of circuit.
_CIRCUIT_KINDS: Final = frozenset(
    {ANALOGUE_INPUT, ANALOGUE_OUTPUT, DIGITAL_INPUT, DIGITAL_OUTPUT, RESISTANCE_THERMOMETER, THERMOCOUPLE}
)
# Devices whose signal makes a circuit though no I/O is given for it.
_SIGNAL_KINDS: Final = frozenset(kind for kind in Kind if kind.wired in ("yes", "element"))
_TRANSMITTERS: Final = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR})
_POSITIONERS: Final = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER})
_VALVE_DRIVES: Final = _POSITIONERS | {Kind.SOLENOID}
# Of a split range on one output: the current goes through each of them.
_SERIES_DRIVES: Final = _POSITIONERS | {Kind.CONTROL_VALVE}
_DRIVEN_VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})
# Through whose signal a device lies that has none of its own.
_LIES_IN: Final[Mapping[Kind, frozenset[Kind]]] = {
    Kind.ELEMENT: _TRANSMITTERS,
    Kind.INDICATOR: _TRANSMITTERS,
    Kind.CONTROL_VALVE: _VALVE_DRIVES,
    Kind.ON_OFF_VALVE: _VALVE_DRIVES,
}
# From the field to the system; what is not named stands with the device.
_FIELD_ORDER: Final = {
    Kind.ELEMENT: 0,
    Kind.CONTROL_VALVE: 0,
    Kind.ON_OFF_VALVE: 0,
    Kind.INDICATOR: 2,
    Kind.JUNCTION_BOX: 3,
    Kind.BARRIER: 4,
    Kind.ISOLATOR: 4,
    Kind.CARD: 5,
}
_WITH_DEVICE: Final = 1
_WIRES: Final = re.compile(r"\b([234])[ -]?(?:wire|leiter|fils|draht)|\b(two|three|four)[ -]wire", re.IGNORECASE)
_MOST_SIGNALS: Final = 64
_WIRE_WORDS: Final = {"two": 2, "three": 3, "four": 4}
_LOOP_POWERED: Final = re.compile(r"\b(?:loop|2[ -]?wire|two[ -]?wire|2l)\b", re.IGNORECASE)


class _Signal(NamedTuple):
    """A signal that makes a circuit: whose, the row that gives it, and its row of the loop list."""

    device: Installed
    given: Instrument
    row: LoopRow | None


def wire(plant: Plant) -> tuple[tuple[Circuit, ...], tuple[Loop, ...]]:
    """Return the plant's circuits and loops.

    A circuit is one I/O address, one row of the loop list, or one wired instrument; a loop has one
    or more. Devices without a signal of their own (an element beside its transmitter, an indicator
    in series, the valve of a positioner) stand on the circuit of the device that has it, and so do
    those whose row only repeats that device's address.
    """
    live = [each for each in plant.instruments if each.live]
    by_loop: dict[str, list[Installed]] = defaultdict(list)
    for each in live:
        if each.loop:
            by_loop[loop_key(each.loop)].append(each)
    rows = _LoopRows(plant, by_loop)
    own: dict[int, tuple[Instrument, ...]] = {}
    hosts: dict[int, Installed] = {}
    for members in by_loop.values():
        signals = {id(each): _signals(each, members, rows) for each in members}
        if len(members) > 1:
            hosts.update(_share(members, signals, rows))
        own.update(signals)
    for each in live:
        if not each.loop:
            own[id(each)] = _signals(each, (), rows)
    _put_together(rows.together, own, hosts)
    made: list[_Signal] = []
    for each in live:
        made.extend(rows.assigned(each, own[id(each)]))
    circuits = _circuits(made, hosts, live, plant, rows)
    on_loop: dict[str, list[Circuit]] = defaultdict(list)
    for circuit in circuits:
        if circuit.loop:
            on_loop[loop_key(circuit.loop)].append(circuit)
    named = [(members[0].loop or "", key, members) for key, members in by_loop.items()]
    named.sort(key=lambda item: natural_key(item[0]))
    loops = tuple(
        Loop(name=name, members=tuple(members), circuits=tuple(on_loop.get(key, ()))) for name, key, members in named
    )
    return circuits, loops


@lru_cache(maxsize=200_000)
def loop_key(text: str | None) -> str:
    """Return a loop number's key: P-101, P 101 and p101 are one loop, P-101-1 and P-1011 are two.

    >>> loop_key("P 101"), loop_key("p101") == loop_key("P-101"), loop_key("P-101-1") == loop_key("P-1011")
    ('p-101', True, False)
    """
    if not text:
        return ""
    parts: list[str] = re.findall(r"[^\W\d_]+|\d+", text.casefold())
    return "-".join(parts) or "".join(text.split()).casefold()


class _LoopRows:
    """The rows of the loop list, found by tag or by loop number."""

    def __init__(self, plant: Plant, loops: Mapping[str, object]) -> None:
        self.by_device: dict[int, list[LoopRow]] = defaultdict(list)
        self.by_number: dict[str, list[LoopRow]] = defaultdict(list)
        self.count: dict[str, int] = defaultdict(int)
        self.together: list[tuple[Installed, ...]] = []
        self.place: dict[int, int] = {}
        self._used: set[int] = set()
        self._plant = plant
        # By their contents, so that the order of rows decides nothing.
        for row in sorted(plant.loop_rows, key=_contents):
            if row.number:
                self.count[loop_key(row.number)] += 1
            named = plant.by_tag(row.circuit) if row.circuit else ()
            if not named and row.circuit:
                named = self._several(row.circuit, plant)
            if not named and row.number:
                # Pump P-101 has the number of the pressure loop P-101.
                a_loop = loop_key(row.number) in loops
                named = tuple(each for each in plant.by_tag(row.number) if not (a_loop and each.equipment_tag))
            wired = [device for device in named if not _is_soft(device)]
            for device in wired:
                self.by_device[id(device)].append(row)
            if wired:
                continue
            # A controller's or an indication's row in the loop list is its loop's.
            for text in (row.number, row.circuit, *(device.loop for device in named)):
                if text and loop_key(text) in loops:
                    self.by_number[loop_key(text)].append(row)
                    break

    def one_item(self, barrier: str | None) -> bool:
        """Whether a barrier is named by its own tag, and so is one thing; a catalogue's code may stand for many."""
        return bool(barrier) and bool(self._plant.by_tag(barrier or ""))

    def _several(self, text: str, plant: Plant) -> tuple[Installed, ...]:
        """Return the device that carries the signal of a row that names all its devices, from field to system.

        The others are put on its circuit, in the order in which they are named.
        """
        parts = [part for part in _DEVICES.split(text[:_LONGEST_ROW]) if part.strip()]
        if len(parts) < 2:
            return ()
        devices = [plant.by_tag(part.strip()) for part in parts]
        if any(len(found) != 1 for found in devices):
            return ()
        in_order = tuple(found[0] for found in devices)
        carrier = _carrier(in_order)
        if carrier is None or len({id(each) for each in in_order}) < len(in_order):
            return ()
        self.together.append((carrier, *(each for each in in_order if each is not carrier)))
        self.place.update((id(each), place) for place, each in enumerate(in_order))
        return (carrier,)

    def assigned(self, each: Installed, signals: Iterable[Instrument]) -> list[_Signal]:
        """Return a device's signals with their rows, and its rows that no signal of the index answers to."""
        named = self.by_device.get(id(each))
        if named is None:
            return [_Signal(each, given, self._of_loop(each, given)) for given in signals]
        made: list[_Signal] = []
        left = list(named)
        for given in signals:
            kind = circuit_kind(given.io_type) or circuit_kind(given.signal)
            row = next((row for row in left if kind is not None and circuit_kind(row.kind) == kind), None)
            if row is None:
                row = next((row for row in left if kind is None or circuit_kind(row.kind) is None), None)
            if row is not None:
                left.remove(row)
            made.append(_Signal(each, given, row))
        if not made or not left:
            return made
        if len(made) == 1 and made[0].row is None:
            # One signal and rows of other kinds: the two papers disagree in the kind, not in the signal.
            made[0] = made[0]._replace(row=left.pop(0))
        made.extend(_Signal(each, made[0].given, row) for row in left)
        return made

    def _of_loop(self, each: Installed, given: Instrument) -> LoopRow | None:
        of_loop = self.by_number.get(loop_key(each.loop)) if each.loop else None
        if not of_loop:
            return None
        kind = _signal_kind(each, given)
        fitting = [
            row for row in of_loop if kind is None or (stated := circuit_kind(row.kind)) is None or stated == kind
        ]
        if not fitting:
            return None
        # Rows that give only a number are its circuits in the order of their tags; one alone is for all.
        row = next((row for row in fitting if id(row) not in self._used), fitting[0])
        self._used.add(id(row))
        return row


_DEVICES: Final = re.compile(r"[,;\n|]| ?\+ | ?/ | ?& | ?-> ?| ?\u2192 ?")
_LONGEST_ROW: Final = 300
# What lies in another's signal where a row names both.
_RIDES: Final = frozenset(
    {Kind.ELEMENT, Kind.INDICATOR, Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.JUNCTION_BOX, Kind.BARRIER}
    | {Kind.ISOLATOR, Kind.CARD, Kind.POWER_SUPPLY, Kind.SOFT_FUNCTION, Kind.PANEL}
)


def _carrier(devices: Sequence[Installed]) -> Installed | None:
    """Return the device whose signal the others lie in; None where several could be."""
    own = [each for each in devices if each.kind not in _RIDES]
    if not own:
        own = [each for each in devices if each.kind in _DRIVEN_VALVES or each.kind is Kind.ELEMENT]
    if len(own) > 1 and all(each.kind in _SERIES_DRIVES for each in own):
        return own[0]
    return own[0] if len(own) == 1 else None


def _put_together(
    together: Iterable[tuple[Installed, ...]], own: dict[int, tuple[Instrument, ...]], hosts: dict[int, Installed]
) -> None:
    """Put on one circuit the devices that one row of the loop list names."""
    for carrier, *others in together:
        for each in others:
            hosts[id(each)] = carrier
            own[id(each)] = ()
        hosts.pop(id(carrier), None)
        if not own.get(id(carrier)):
            own[id(carrier)] = (carrier.signals[0] if carrier.signals else carrier.record,)


_ROW_FIELDS: Final = tuple(
    each.name for each in fields(LoopRow) if each.name not in {own.name for own in fields(Record)}
)


def _contents(row: LoopRow) -> tuple[str, ...]:
    return tuple(str(getattr(row, name)) for name in _ROW_FIELDS)


def _is_soft(device: Installed) -> bool:
    soft = device.kind is Kind.SOFT_FUNCTION or device.record.location == "system"
    return soft and not any(map(has_io, device.signals))


def circuit_kind(text: str | None) -> str | None:
    """Return AI, AO, DI, DO, RTD or TC for an I/O type or kind as written; None where it says none of them.

    >>> circuit_kind("AI-HART"), circuit_kind("Digital Input"), circuit_kind("Pt100"), circuit_kind("bus")
    ('AI', 'DI', 'RTD', None)
    """
    if not text:
        return None
    return next((kind for kind in io_types(text) if kind in _CIRCUIT_KINDS), None)


def _signal_kind(each: Installed, given: Instrument) -> str | None:
    """Return the kind of circuit that a signal makes: as its I/O type says, else as its device's kind tells."""
    stated = circuit_kind(given.io_type)
    if stated:
        return stated
    kind = each.kind
    classes = signal_classes(given.signal) or (signal_classes(each.type.signal) if each.type else frozenset())
    if kind is Kind.ELEMENT:
        if "RTD" in classes:
            return RESISTANCE_THERMOMETER
        if "thermocouple" in classes:
            return THERMOCOUPLE
    if kind in _TRANSMITTERS or kind is Kind.ELEMENT or each.measuring_point:
        wanted = classes & {"current", "voltage"}
        return ANALOGUE_INPUT if wanted or (not classes and kind is not Kind.ELEMENT) else None
    if kind in (Kind.SWITCH, Kind.HAND_SWITCH):
        return DIGITAL_INPUT
    if kind in _POSITIONERS:
        return ANALOGUE_OUTPUT
    if kind in (Kind.SOLENOID, Kind.LAMP, Kind.SOUNDER):
        return DIGITAL_OUTPUT
    if kind in _DRIVEN_VALVES:
        return ANALOGUE_OUTPUT if "current" in classes else None
    return None


# --------------------------------------------------------------------------------------- the signals of a device


def _signals(each: Installed, loop: Sequence[Installed], rows: _LoopRows) -> tuple[Instrument, ...]:
    """Return the rows of an instrument that make a circuit each."""
    with_io = [row for row in each.signals if has_io(row)]
    if with_io:
        if all("," not in row.io_address and "/" not in row.io_address for row in with_io if row.io_address):
            return tuple(with_io)
        return tuple(part for row in with_io for part in _one_an_address(row))
    if each.record.location == "system":
        return ()
    if id(each) in rows.by_device:
        return (each.signals[0] if each.signals else each.record,)
    if each.kind not in _SIGNAL_KINDS or each.equipment_tag:
        return ()
    if each.kind is Kind.ELEMENT and len(loop) > 1 and transmitter_of(each, loop) is not None:
        return ()
    return (each.record,)


def has_io(row: Instrument) -> bool:
    """Whether a row gives a channel: an I/O address, or an I/O type that is not a word for none."""
    return bool(row.io_address or (row.io_type and row.io_type.strip().casefold() not in _NO_IO))


_ADDRESSES: Final = re.compile(r" ?[,;\n] ?| / | & | \+ ")


def _one_an_address(row: Instrument) -> tuple[Instrument, ...]:
    """Part a row whose cell holds several addresses: each is a signal, with its part of the I/O type."""
    addresses = [part for part in _ADDRESSES.split(row.io_address or "") if part.strip()]
    if len(addresses) > _MOST_SIGNALS:
        addresses = [row.io_address or ""]  # no device has so many; it is one text that says something else
    if len(addresses) < 2:
        return (row,)
    kinds = io_types(row.io_type)
    if len(kinds) != len(addresses):
        return tuple(replace(row, io_address=address) for address in addresses)
    return tuple(replace(row, io_address=address, io_type=kind) for address, kind in zip_longest(addresses, kinds))


def transmitter_of(element: Installed, loop: Sequence[Installed]) -> Installed | None:
    """Return the transmitter that an element of the loop is wired to; None where there is none.

    It measures what the element measures: where all letters share one series of numbers, a flow
    transmitter of the same number is another loop's. Where the loop has several, the one with the
    element's suffix.
    """
    return _nearest(element, [each for each in loop if each.kind in _TRANSMITTERS and each is not element])


def _nearest(other: Installed, candidates: Sequence[Installed], *, any_variable: bool = False) -> Installed | None:
    """Return the device that another belongs to: of the same variable, and of the same suffix if there is one."""
    if not candidates:
        return None
    variable = variable_of(other)[:1]
    alike = [each for each in candidates if not variable or variable_of(each)[:1] in ("", variable)]
    if not alike:
        if not any_variable:
            return None
        alike = list(candidates)
    suffix = other.tag.suffix if other.tag else None
    return next((each for each in alike if each.tag is not None and each.tag.suffix == suffix), alike[0])


def _share(
    members: Sequence[Installed], signals: dict[int, tuple[Instrument, ...]], rows: _LoopRows
) -> dict[int, Installed]:
    """Find the devices of a loop that lie in another's signal; those lose what their rows only repeat."""
    hosts: dict[int, Installed] = {}

    def carry(kinds: frozenset[Kind], *, besides: Installed) -> list[Installed]:
        return [
            each
            for each in members
            if signals[id(each)]
            and each is not besides
            and (each.kind in kinds or (each.measuring_point and kinds is _TRANSMITTERS))
        ]

    for each in members:
        mine = signals[id(each)]
        if each.kind in _TRANSMITTERS and mine and not any(map(has_io, mine)):
            _take_from_element(each, members, signals, hosts, rows)
    for each in members:
        wanted = _LIES_IN.get(each.kind) if each.kind is not None else None
        if wanted is None or each.measuring_point or id(each) in hosts:
            continue
        carriers = carry(wanted, besides=each)
        alone = each.kind is Kind.INDICATOR and len(carriers) == 1
        host = _nearest(each, carriers, any_variable=alone or each.kind in _DRIVEN_VALVES)
        mine = signals[id(each)]
        if host is None or (mine and not _repeats(mine, signals[id(host)])):
            continue
        if each.kind is Kind.INDICATOR and not (
            each.record.signal or each.listed_type or each.record.ex_marking or mine
        ):
            continue
        hosts[id(each)] = host
        signals[id(each)] = ()
    for each in members:
        mine = signals[id(each)]
        if each.kind in _VALVE_DRIVES and mine and not any(map(has_io, mine)) and id(each) not in rows.by_device:
            valves = [valve for valve in carry(_DRIVEN_VALVES, besides=each) if _drives(each, signals[id(valve)])]
            host = _nearest(each, valves, any_variable=True)
            if host is not None:
                hosts[id(each)] = host
                signals[id(each)] = ()
        elif each.kind is Kind.SOFT_FUNCTION and mine:
            shown = [one for one in members if one is not each and one.kind is not Kind.SOFT_FUNCTION]
            if any(_repeats(mine, signals[id(one)]) for one in shown):
                signals[id(each)] = ()
    _take_from_function(members, signals, rows)
    _in_series_on_one_output(members, signals, hosts, rows)
    return hosts


def _take_from_function(
    members: Sequence[Installed], signals: dict[int, tuple[Instrument, ...]], rows: _LoopRows
) -> None:
    """Give a positioner without a channel the analogue output that stands on its controller's row."""
    drives = [each for each in members if each.kind in _POSITIONERS and signals[id(each)]]
    functions = [
        each
        for each in members
        if each.kind is Kind.SOFT_FUNCTION
        and id(each) not in rows.by_device
        and [circuit_kind(row.io_type) for row in signals[id(each)]] == [ANALOGUE_OUTPUT]
    ]
    if len(drives) != 1 or len(functions) != 1 or id(drives[0]) in rows.by_device:
        return
    drive, function = drives[0], functions[0]
    if not any(map(has_io, signals[id(drive)])):
        (given,) = signals[id(function)]
        own = drive.record
        # The channel is the function's; what is wired to it is said by the row of the drive.
        filled = {
            field: getattr(own, field) if getattr(own, field) is not None else getattr(given, field)
            for field in _OF_THE_WIRING
        }
        signals[id(drive)] = (replace(own, io_type=given.io_type, io_address=given.io_address, **filled),)
        signals[id(function)] = ()


_OF_THE_WIRING: Final = ("card", "barrier", "power_supply", "signal")


def _in_series_on_one_output(
    members: Sequence[Installed],
    signals: dict[int, tuple[Instrument, ...]],
    hosts: dict[int, Installed],
    rows: _LoopRows,
) -> None:
    """Put the two valves of a split range that share an analogue output on one circuit, one behind the other."""
    at: dict[str, list[Installed]] = defaultdict(list)
    for each in members:
        mine = signals[id(each)]
        if each.kind in _SERIES_DRIVES and len(mine) == 1 and circuit_kind(mine[0].io_type) == ANALOGUE_OUTPUT:
            address = _address(mine[0])
            if address is not None:
                at[address].append(each)
    for sharing in at.values():
        if len(sharing) != 2 or any(id(each) in rows.by_device for each in sharing):
            continue
        behind = {signals[id(each)][0].barrier or each.record.barrier for each in sharing}
        if len(behind) > 1 or (None not in behind and not rows.one_item(*behind)):
            # Each with a barrier of its own: a circuit in the field each, whatever joins them in the cabinet.
            continue
        first, second = sharing
        signals[id(second)] = ()
        hosts[id(second)] = first
        for other, host in list(hosts.items()):
            if host is second:
                hosts[other] = first


def _take_from_element(
    each: Installed,
    members: Sequence[Installed],
    signals: dict[int, tuple[Instrument, ...]],
    hosts: dict[int, Installed],
    rows: _LoopRows,
) -> None:
    """Give a transmitter without I/O the channel that its element's row states."""
    elements = [
        one
        for one in members
        if one.kind is Kind.ELEMENT and any(map(has_io, signals[id(one)])) and id(one) not in rows.by_device
    ]
    element = _nearest(each, elements)
    if element is None:
        return
    given = signals[id(element)]
    if all(set(io_types(row.io_type)) <= {ANALOGUE_INPUT} for row in given):
        signals[id(each)], signals[id(element)] = given, ()
        hosts[id(element)] = each


def _drives(drive: Installed, of_valve: Iterable[Instrument]) -> bool:
    """Whether a valve's channel can be its drive's: an analogue output moves no solenoid."""
    unfit = {DIGITAL_OUTPUT, DIGITAL_INPUT} if drive.kind in _POSITIONERS else {ANALOGUE_OUTPUT, ANALOGUE_INPUT}
    return any(has_io(row) and not unfit & set(io_types(row.io_type)) for row in of_valve)


_CHANNEL: Final = re.compile(r"(?:ch(?:annel)?[\s.:-]*)?\d{1,3}", re.IGNORECASE)


def _repeats(mine: Iterable[Instrument], others: Iterable[Instrument]) -> bool:
    """Whether rows have addresses, and only such as stand on another device's rows too."""
    addresses = {_address(row) for row in mine}
    return None not in addresses and bool(addresses) and addresses <= {_address(row) for row in others}


def _address(row: Instrument) -> str | None:
    if not row.io_address:
        return None
    text = "".join(row.io_address.split()).casefold()
    return f"{row.card}:{text}" if _CHANNEL.fullmatch(row.io_address.strip()) else text


# ------------------------------------------------------------------------------------------------- the circuits


def _circuits(
    made: Sequence[_Signal],
    hosts: Mapping[int, Installed],
    live: Iterable[Installed],
    plant: Plant,
    rows: _LoopRows,
) -> tuple[Circuit, ...]:
    per_loop: dict[str, int] = defaultdict(int)
    for device, _, row in made:
        per_loop[loop_key((row.number if row else None) or device.loop)] += 1
    riders: dict[int, list[Installed]] = defaultdict(list)
    for each in live:
        host = hosts.get(id(each))
        if host is not None:
            riders[id(host)].append(each)
    cables = _cables_of_terminations(plant)
    barriers: dict[str, tuple[Installed, ...]] = {}
    taken: dict[str, int] = {}
    called: list[str] = [""] * len(made)
    # A loop's number before the tag of a pump that is called alike.
    for with_number in (True, False):
        for place, (device, _, row) in enumerate(made):
            number = (row.number if row is not None else None) or device.loop
            if bool(number) is not with_number:
                continue
            key = loop_key(number)
            several = per_loop[key] > 1 or rows.count.get(key, 0) > 1
            called[place] = _free(f"{number} {device.name}" if number and several else number or device.name, taken)
    return tuple(
        _circuit(name, signal, riders.get(id(signal.device), ()), cables, barriers, rows.place, plant)
        for name, signal in zip(called, made, strict=True)
    )


def _free(name: str, taken: dict[str, int]) -> str:
    """Return a name that no circuit has yet, and take it; beside each name stands how far its copies are counted."""
    free, count = name, taken.get(name, 1)
    while free in taken:
        count += 1
        free = f"{name} ({count})"
    taken[name] = count
    taken.setdefault(free, 1)
    return free


def _cables_of_terminations(plant: Plant) -> dict[str, list[str]]:
    found: dict[str, list[str]] = defaultdict(list)
    for row in plant.terminations:
        if row.circuit and row.cable:
            found[loop_key(row.circuit)].append(row.cable)
    return {key: list(dict.fromkeys(names)) for key, names in found.items()}


def _circuit(
    name: str,
    signal: _Signal,
    riders: Sequence[Installed],
    cables: Mapping[str, Sequence[str]],
    barriers: dict[str, tuple[Installed, ...]],
    placed: Mapping[int, int],
    plant: Plant,
) -> Circuit:
    device, given, row = signal
    record = device.record
    card_named = (row.card if row else None) or given.card or record.card
    barrier_named = (row.barrier if row else None) or given.barrier or record.barrier
    card = plant.named_type(card_named)
    supply_named = given.power_supply or record.power_supply
    supply = supply_of(row, given, supply_named, card=card, plant=plant)
    run = cable_run(
        row,
        given,
        record,
        named=(cables.get(loop_key(record.tag)) or cables.get(loop_key(name)) or ()) if cables else (),
        plant=plant,
    )
    wires = given.wires or record.wires or (device.type.wires if device.type else None)
    if wires is None:
        wires = _wires_in(given.signal) or _wires_in(supply_named)
    hart = row.hart if row is not None and row.hart is not None else None
    if hart is None:
        text = f"{given.signal or ''} {(device.type.signal if device.type else '') or ''}".casefold()
        hart = True if "hart" in text else (device.type.hart if device.type else None)
    members: tuple[Installed, ...] = (device,)
    named_barriers = _by_tag(barrier_named, barriers, plant) if barrier_named else ()
    if riders or named_barriers:
        others = [each for each in named_barriers if each is not device and each not in riders]
        members = tuple(sorted((device, *riders, *others), key=lambda each: _in_field_order(each, placed)))
    across = [each for each in members if each is not device and each.kind is Kind.INDICATOR]
    receivers = receivers_of(row, given, record, card=card, others=across)
    return Circuit(
        name=name,
        loop=(row.number if row else None) or device.loop,
        kind=circuit_kind(row.kind if row else None) or _signal_kind(device, given),
        device=device,
        signal_row=given,
        members=members,
        row=row,
        card=card,
        card_named=card_named,
        barrier=plant.named_type(barrier_named),
        barrier_named=barrier_named,
        supply_min_v=supply.min_v,
        supply_nominal_v=supply.nominal_v,
        supply_max_v=supply.max_v,
        supply_named=supply_named,
        receiver_ohm=in_parallel(receivers),
        receivers=receivers,
        cable_length_m=run.length_m,
        cable_type=run.type,
        cable_type_named=run.type_named,
        conductor=run.conductor,
        segments=run.segments,
        hart=hart,
        intrinsically_safe=row.intrinsically_safe if row else None,
        wires=wires,
        powered_by_loop=_powered_by_loop(wires, supply_named),
    )


def _in_field_order(each: Installed, placed: Mapping[int, int]) -> tuple[int, int]:
    """Order from the field to the system: as a row of the loop list names them, else by their kinds."""
    usual = _FIELD_ORDER.get(each.kind, _WITH_DEVICE) if each.kind else _WITH_DEVICE
    place = placed.get(id(each))
    if place is not None:
        return _WITH_DEVICE, place
    return usual, -1


def _by_tag(text: str, known: dict[str, tuple[Installed, ...]], plant: Plant) -> tuple[Installed, ...]:
    """Return the instruments that a circuit's barrier names by their tag."""
    found = known.get(text)
    if found is None:
        found = known[text] = plant.by_tag(text)
    return found


def _wires_in(text: str | None) -> int | None:
    found = _WIRES.search(text) if text else None
    if found is None:
        return None
    return int(found[1]) if found[1] else _WIRE_WORDS[found[2].casefold()]


def _powered_by_loop(wires: int | None, supply_named: str | None) -> bool | None:
    if wires == 2:
        return True
    if wires in (3, 4):
        return False
    if supply_named and _LOOP_POWERED.search(supply_named):
        return True
    words = supply_words(supply_named)
    # No two-wire transmitter lives on alternating current.
    return False if words is not None and words.dc is False else None
