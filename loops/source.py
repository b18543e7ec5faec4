"""Which parts of a circuit drive its current and which only take it, on each side of an isolator."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Final, Literal

from instruments.kind import Kind
from instruments.record import DeviceType
from loops.circuit import Circuit
from loops.series import driven_devices, is_output

Role = Literal["source", "sink"]

DEVICE: Final = "device"
CARD: Final = "card"
ISOLATOR: Final = "isolator"

_TAKES: Final = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})
_THE_LOOP: Final = re.compile(r"^\W*(?:from |by |via )?(?:the )?(?:signal )?loop(?:[ -]?powered)?\W*$", re.IGNORECASE)


@dataclass(frozen=True, slots=True, kw_only=True)
class Part:
    """A part of a circuit: its name, what it is, and whether it drives the current or takes it.

    `role` is None where nothing says, and then `missing` is the title of what would. `assumed` says what is
    taken for granted of it.
    """

    name: str
    what: str
    role: Role | None
    missing: str = ""
    assumed: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Parts:
    """The parts of a circuit on the field's side and, behind an isolator, on the system's."""

    field: tuple[Part, ...]
    system: tuple[Part, ...] = ()

    @property
    def sides(self) -> tuple[tuple[Part, ...], ...]:
        """The sides that there are."""
        return (self.field, self.system) if self.system else (self.field,)


def parts_of(circuit: Circuit) -> Parts:
    """Return the parts of a circuit that drive its current or take it.

    An indicator in series does neither; a zener barrier does neither.

    Parameters
    ----------
    circuit
        The circuit; of 4-20 mA.
    """
    output = is_output(circuit)
    devices = _devices(circuit, output)
    isolator = circuit.isolator
    if isolator is None:
        return Parts(field=(*devices, _card(circuit, output)))
    name = f"isolator {isolator.code}"
    to_field = Part(
        name=name,
        what=ISOLATOR,
        role=_stated(isolator) or ("source" if _gives(isolator) else None),
        missing="source or sink",
    )
    return Parts(field=(*devices, to_field), system=(_to_the_system(isolator, name, output), _card(circuit, output)))


def _devices(circuit: Circuit, output: bool) -> tuple[Part, ...]:
    if output:
        return tuple(
            Part(
                name=each.name,
                what=DEVICE,
                role=(_stated(each.type) if each.type else None) or ("sink" if each.kind in _TAKES else None),
                missing="source or sink",
            )
            for each in driven_devices(circuit)
        )
    kind = circuit.device.type
    role: Role | None = _stated(kind) if kind is not None else None
    missing = "source or sink"
    if role is None:
        if circuit.powered_by_loop:
            role = "sink"
        elif circuit.powered_by_loop is None and circuit.wires is None:
            missing = "wires"
            if kind is not None and kind.lift_off_v is not None:
                role = "sink"
        if role is None and kind is not None and kind.maximum_load_ohm is not None:
            role = "source"
    return (Part(name=circuit.device.name, what=DEVICE, role=role, missing=missing),)


def _card(circuit: Circuit, output: bool) -> Part:
    card = circuit.card
    if card is None:
        name = f"card {circuit.card_named}" if circuit.card_named else "the card"
        return Part(name=name, what=CARD, role=None, missing="card")
    role = _stated(card)
    if role is None and (_gives(card) if output else card.available_20ma_v is not None):
        role = "source"
    return Part(name=f"card {card.code or circuit.card_named}", what=CARD, role=role, missing="source or sink")


def _to_the_system(isolator: DeviceType, name: str, output: bool) -> Part:
    if output:
        return Part(name=f"input of {name}", what=ISOLATOR, role="sink")
    if isolator.maximum_load_ohm is not None:
        return Part(name=f"output of {name}", what=ISOLATOR, role="source")
    return Part(
        name=f"output of {name}",
        what=ISOLATOR,
        role="source",
        missing="maximum load ohm",
        assumed=f"the output of {isolator.code} drives its current itself",
    )


def _stated(entry: DeviceType) -> Role | None:
    if entry.source_or_sink == "source":
        return "source"
    return "sink" if entry.source_or_sink == "sink" else None


def _gives(entry: DeviceType) -> bool:
    """Whether an entry states what it can drive, as only a source does."""
    return any(
        value is not None
        for value in (entry.available_20ma_v, entry.available_alarm_v, entry.compliance_v, entry.maximum_load_ohm)
    )


def outside_supply(circuit: Circuit) -> bool | None:
    """Whether a supply of its own lies in series in the circuit; None where nothing is said of any.

    A supply that feeds a four-wire device by wires of its own is none. What is fed by the loop takes what
    another part of the loop gives.

    Parameters
    ----------
    circuit
        The circuit, neither of whose ends drives the current.
    """
    for given in (circuit.supply_min_v, circuit.supply_nominal_v, circuit.supply_max_v):
        if given is not None and given.source == "loop row":
            return True
    named = circuit.supply_named
    if not circuit.powered_by_loop and circuit.powered_by_loop is not None:
        return None
    if not named:
        return None
    return not _THE_LOOP.match(named) and not _names_only_wires(named)


_WIRES_ONLY: Final = re.compile(r"^\W*(?:2|two)[ -]?wires?\W*$", re.IGNORECASE)


def _names_only_wires(text: str) -> bool:
    return _WIRES_ONLY.match(text) is not None
