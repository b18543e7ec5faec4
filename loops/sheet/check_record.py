"""What else is tried in a loop check, line by line: settings, contacts, coils and valves, a broken wire."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.quantity import format_number
from instruments.signal import FAILURE_HIGH_MA, FAILURE_LOW_MA
from loops.circuit import (
    ANALOGUE_INPUT,
    ANALOGUE_OUTPUT,
    DIGITAL_INPUT,
    DIGITAL_OUTPUT,
    RESISTANCE_THERMOMETER,
    THERMOCOUPLE,
    Circuit,
)

VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})
_BY_AIR: Final = VALVES | {Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID}
_RISING: Final = frozenset({"H", "HH"})
_FALLING: Final = frozenset({"L", "LL"})
_MEASURED: Final = frozenset({ANALOGUE_INPUT, RESISTANCE_THERMOMETER, THERMOCOUPLE})


@dataclass(frozen=True, slots=True, kw_only=True)
class ToTry:
    """One thing to try; None is a value that nobody gave, to be written in.

    Attributes
    ----------
    device
        Whose it is.
    what
        What is tried.
    bring_about
        What is brought about in the field or at the card.
    expect
        What must then be seen.
    acts
        Whether it acts at one value and resets at another, which are read.
    """

    device: str
    what: str
    bring_about: str | None
    expect: str | None
    acts: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Set:
    """A setting: its title, its value with its current, and the direction in which a trip acts."""

    title: str
    text: str
    direction: str | None = None


def things_to_try(circuit: Circuit, settings: Sequence[Set], members: Iterable[Installed]) -> tuple[ToTry, ...]:
    """Return what is tried on a circuit beside the points of its check table.

    Parameters
    ----------
    circuit
        The circuit.
    settings
        Its device's settings.
    members
        The instruments of its loop, for the valve that it drives or watches.
    """
    made = [*_settings(circuit, settings)]
    if circuit.kind == DIGITAL_INPUT:
        made += _contact(circuit, bool(settings))
    elif circuit.kind in (DIGITAL_OUTPUT, ANALOGUE_OUTPUT):
        made += _output(circuit, members)
    elif circuit.kind in _MEASURED:
        made += _failures(circuit)
    return tuple(made)


def _settings(circuit: Circuit, settings: Sequence[Set]) -> Iterable[ToTry]:
    contact = circuit.signal_row.contact or circuit.device.record.contact
    for each in settings:
        direction = "rising" if each.title in _RISING else "falling" if each.title in _FALLING else None
        direction = direction or {"high": "rising", "low": "falling"}.get(each.direction or "")
        expect: str | None = {"trip": "trip"}.get(each.title, f"alarm {each.title}")
        if circuit.kind == DIGITAL_INPUT:
            certain = direction == "rising" and _is_certain(circuit)
            expect = {"NC": "contact opens", "NO": "contact closes"}.get(contact or "") if certain else None
        yield ToTry(
            device=circuit.device.name,
            what=f"{each.title}{f', {direction}' if direction else ''}",
            bring_about=each.text,
            expect=expect,
            acts=True,
        )


def _is_certain(circuit: Circuit) -> bool:
    """Whether NO and NC can mean but one thing: as it lies on the shelf is as it is in normal operation.

    Of a switch that acts on a fall they are opposites, and lists mean the one or the other.
    """
    letters = circuit.device.letters
    if letters.startswith("Z"):
        return True
    direction = circuit.device.record.trip_direction
    return direction == "high" if direction else "H" in letters[1:] and "L" not in letters[1:]


_STATES: Final = {"NC": ("closed", "open"), "NO": ("open", "closed")}


def _contact(circuit: Circuit, has_setting: bool) -> Iterable[ToTry]:
    """Yield both states of a contact; of one with a setting the second is the setting's own line."""
    contact = circuit.signal_row.contact or circuit.device.record.contact
    rest, acted = _STATES.get(contact or "", (None, None)) if _is_certain(circuit) else (None, None)
    position = circuit.device.letters.startswith("Z")
    healthy, other = ("position not reached", "position reached") if position else ("healthy", "alarm or trip")
    yield ToTry(device=circuit.device.name, what=healthy, bring_about=None, expect=_state(rest))
    if not has_setting:
        yield ToTry(device=circuit.device.name, what=other, bring_about=None, expect=_state(acted))


def _state(contact: str | None) -> str | None:
    return f"contact {contact}" if contact else None


_OPPOSITE: Final = {"open": "closed", "closed": "open"}


def _output(circuit: Circuit, members: Iterable[Installed]) -> Iterable[ToTry]:
    """Yield what a valve does without signal or air, and of a coil what it does with both; for each device on it."""
    valves = [each for each in members if each.kind in VALVES]
    others = [each for each in circuit.members if each is not circuit.device and each.kind in _BY_AIR - VALVES]
    for driver in (circuit.device, *others):
        own = [driver, *(valve for valve in valves if _drives(driver, valve))]
        positions = dict.fromkeys(each.record.failure_position for each in own if each.record.failure_position)
        position = next(iter(positions)) if len(positions) == 1 else None
        fails = None if position is None else "stays in place" if position == "in place" else f"valve {position}"
        if circuit.kind == DIGITAL_OUTPUT:
            yield ToTry(device=driver.name, what="energised", bring_about="output on", expect=_moved(position))
            yield ToTry(device=driver.name, what="de-energised", bring_about="output off", expect=fails)
        else:
            yield ToTry(device=driver.name, what="signal fails", bring_about="wire off", expect=fails)
        if driver.kind in _BY_AIR:
            yield ToTry(device=driver.name, what="air fails", bring_about="air off", expect=fails)


def _drives(driver: Installed, valve: Installed) -> bool:
    own, other = driver.tag, valve.tag
    return valve is not driver and own is not None and other is not None and own.suffix == other.suffix


def _moved(position: str | None) -> str | None:
    """Return where a coil under voltage brings a valve: away from where it fails to."""
    other = _OPPOSITE.get(position or "")
    return f"valve {other}" if other else None


def _failures(circuit: Circuit) -> Iterable[ToTry]:
    """Yield what is seen when the wire breaks, and when the transmitter reports a failure."""
    record = circuit.device.record
    direction = circuit.signal_row.failure_direction or record.failure_direction
    detection = record.bad_signal_detection
    shown = None if detection is None else "bad signal shown" if detection else "no bad signal shown"
    if circuit.kind != ANALOGUE_INPUT:
        goes = f"reading goes {direction}" if direction else None
        expect = ", ".join(text for text in (goes, shown) if text) or None
        yield ToTry(device=circuit.device.name, what="wire broken", bring_about="wire off", expect=expect)
        return
    yield ToTry(device=circuit.device.name, what="wire broken", bring_about="wire off: 0 mA", expect=shown)
    ma = {"high": FAILURE_HIGH_MA, "low": FAILURE_LOW_MA}.get(direction or "")
    if ma is not None:
        text = f"{format_number(ma)} mA, failure {direction}"
        yield ToTry(device=circuit.device.name, what="failure signal", bring_about=text, expect=shown)
