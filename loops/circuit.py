"""A circuit: one signal, from the device in the field to the card, and what stands on it."""

from __future__ import annotations

from dataclasses import dataclass

from instruments.area import Area
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.origin import Cell
from instruments.record import DeviceType, Instrument
from loops.record import CableType, LoopRow

ANALOGUE_INPUT = "AI"
ANALOGUE_OUTPUT = "AO"
DIGITAL_INPUT = "DI"
DIGITAL_OUTPUT = "DO"
RESISTANCE_THERMOMETER = "RTD"
THERMOCOUPLE = "TC"


@dataclass(frozen=True, slots=True, kw_only=True)
class Given:
    """A number of a circuit with where it came from.

    `source` is ``loop row``, ``row`` (of the device), ``power supply``, ``card``, ``cables`` or ``device``
    (another one on the circuit, which `item` names).
    """

    number: float
    source: str
    cells: tuple[Cell, ...] = ()
    item: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Segment:
    """One cable of a run whose cables are not of one type."""

    name: str
    length_m: float
    type: CableType | None = None
    conductor: str | None = None


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Circuit:
    """One signal with its devices in order from the field to the system.

    Compared by identity: two signals that are alike are still two.

    Attributes
    ----------
    name
        The subject's name: the circuit's number; where a loop has several circuits,
        number and tag.
    loop
        The loop it belongs to.
    kind
        AI, AO, DI, DO, RTD, TC; None where nothing says.
    device
        The device whose signal it is.
    signal_row
        The row that gives the device's signal on this circuit (an instrument may have several).
    members
        All devices on the circuit, from the field to the system, `device` among them.
    row
        The row of the loop list, where there is one.
    card, barrier
        Catalogue entries, where they are named and listed; the `_named` texts as written.
    supply_min_v, supply_nominal_v, supply_max_v
        What is stated of the supply.
    receiver_ohm
        What the signal's receiver comes to: the range resistor with the inputs across it.
    receivers
        All that are stated: of the loop list, the row, the card, and of other devices on the circuit that
        read the volts across the range resistor.
    cable_length_m, cable_type, conductor
        The whole run. Where its cables differ in type, `segments` are those cables.
    powered_by_loop
        True where the device takes its supply from the signal pair, False where it has one of its
        own, None where nothing says.
    wires
        2, 3 or 4; None where nothing says.
    """

    name: str
    loop: str | None
    kind: str | None
    device: Installed
    signal_row: Instrument
    members: tuple[Installed, ...]
    row: LoopRow | None = None
    card: DeviceType | None = None
    card_named: str | None = None
    barrier: DeviceType | None = None
    barrier_named: str | None = None
    supply_min_v: Given | None = None
    supply_nominal_v: Given | None = None
    supply_max_v: Given | None = None
    supply_named: str | None = None
    receiver_ohm: Given | None = None
    receivers: tuple[Given, ...] = ()
    cable_length_m: Given | None = None
    cable_type: CableType | None = None
    cable_type_named: str | None = None
    conductor: str | None = None
    segments: tuple[Segment, ...] = ()
    hart: bool | None = None
    intrinsically_safe: bool | None = None
    wires: int | None = None
    powered_by_loop: bool | None = None

    @property
    def area(self) -> Area | None:
        """The area of the device in the field."""
        return self.device.area

    @property
    def live(self) -> bool:
        """Whether the device is live."""
        return self.device.live

    @property
    def isolator(self) -> DeviceType | None:
        """The entry of the isolator that parts the circuit; None where nothing does, or a zener barrier stands there.

        It ends one circuit and begins another: what lies between it and the card is none of the field's.
        """
        return self.barrier if self.barrier is not None and is_isolator(self.barrier) else None

    @property
    def zener(self) -> DeviceType | None:
        """The entry of the barrier that lies in series; None where there is none, or an isolator stands there."""
        return self.barrier if self.barrier is not None and not is_isolator(self.barrier) else None

    def on_system_side(self, member: Installed) -> bool:
        """Whether a member stands between the isolator and the card: behind it in the list's order, or indoors."""
        if len(self.members) == 1 or self.isolator is None:
            return False
        for each in self.members:
            if each is member:
                break
            if each.kind in (Kind.ISOLATOR, Kind.BARRIER):
                return True
        return member.record.location in _INDOORS

    @property
    def driven(self) -> Installed:
        """The device that an output moves: the positioner or the like on a valve's circuit, else the device."""
        if self.device.kind in _DRIVES or len(self.members) == 1:
            return self.device
        return next((each for each in self.members if each.kind in _DRIVES), self.device)


_INDOORS = frozenset({"cabinet", "control room", "system"})
_DRIVES = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID})


def is_isolator(barrier: DeviceType) -> bool:
    """Whether a barrier isolates: as its entry states, else by its kind, else because it states what it supplies."""
    if barrier.isolation is not None:
        return barrier.isolation == "isolator"
    if barrier.kind is Kind.ISOLATOR:
        return True
    return barrier.available_20ma_v is not None or barrier.available_alarm_v is not None


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Loop:
    """A loop: its number, its live instruments and its circuits."""

    name: str
    members: tuple[Installed, ...]
    circuits: tuple[Circuit, ...] = ()
    live: bool = True

    def cells(self, name: str) -> tuple[Cell, ...]:
        """Return the cells of a field of its members."""
        return tuple(cell for member in self.members for cell in member.cells(name))
