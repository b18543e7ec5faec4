"""What receives a circuit's current: the range resistor, the inputs across it, and what they do to each other."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Final

from instruments.quantity import format_number
from loops.circuit import Circuit, Given
from loops.given import VOLTAGE_INPUT_OHM
from loops.series import entry_name, given_by, indicators, shown

NOMINAL_MA: Final = 20.0
SPAN_MA: Final = 16.0
KNEE_V: Final = 0.5
SHIFT_PERCENT: Final = 0.1


def parallel_ohm(*ohms: float) -> float:
    """Resistance of resistors that lie across each other, in ohm.

    >>> round(parallel_ohm(250.0, 10000.0), 3), parallel_ohm(250.0, 250.0)
    (243.902, 125.0)
    """
    if any(ohm <= 0.0 for ohm in ohms):
        return 0.0
    return 1.0 / math.fsum(1.0 / ohm for ohm in ohms)


def shift_percent(range_ohm: float, together_ohm: float) -> float:
    """Error at 20 mA in % of the span of 4-20 mA, where a range resistor comes to less than it should.

    Parameters
    ----------
    range_ohm : float
        The range resistor alone.
    together_ohm : float
        What it comes to with all inputs across it.

    >>> round(shift_percent(250.0, parallel_ohm(250.0, 10e3)), 2), round(shift_percent(250.0, 125.0), 1)
    (-3.05, -62.5)
    """
    return (together_ohm - range_ohm) / range_ohm * NOMINAL_MA / SPAN_MA * 100.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Receivers:
    """The receivers of a circuit: the range resistor and the inputs across it.

    `other` is a second figure for the range resistor, from another paper, that differs from it. `missing` are the
    titles of what is not stated: of the range resistor, or of a device that states neither a resistance in
    series nor an input.
    """

    range_resistor: Given | None = None
    across: tuple[Given, ...] = ()
    other: Given | None = None
    missing: tuple[str, ...] = ()

    @property
    def ohm(self) -> float | None:
        """What they come to together; None without a range resistor."""
        if self.range_resistor is None:
            return None
        return parallel_ohm(self.range_resistor.number, *(each.number for each in self.across))

    def receivers_in_words(self, circuit: Circuit) -> str:
        """Write them with where they stand.

        Named like nothing else: called `words`, it made 52 rules that ask any record for its words or its working
        read the supply in the eyes of `validation.reads`, and a what-if about supplies asked them all again.
        """
        if self.range_resistor is None:
            return ""
        found = f"range resistor {shown(self.range_resistor.number)} ohm ({given_by(self.range_resistor, circuit)})"
        return found + "".join(f" across {shown(each.number)} ohm ({given_by(each, circuit)})" for each in self.across)


def receivers(circuit: Circuit) -> Receivers:
    """Return what receives a circuit's current.

    The first figure below 1 kohm is the range resistor: of the loop list, the row, the card. What reads
    volts, and the input of any other device, lies across it.

    Parameters
    ----------
    circuit
        The circuit; an input of 4-20 mA.
    """
    stated = circuit.receivers
    low = [each for each in stated if each.source != "device" and each.number < VOLTAGE_INPUT_OHM]
    devices = [each for each in stated if each.source == "device"]
    across = [each for each in stated if each not in low]
    first = low[0] if low else None
    if first is None and devices and not any(each.source != "device" for each in stated):
        # The one input of another device that can be a range resistor is it.
        small = [each for each in devices if each.number < VOLTAGE_INPUT_OHM]
        if small:
            first = small[0]
            across = [each for each in devices if each is not first]
    other = next((each for each in low[1:] if first is not None and each.number != first.number), None)
    return Receivers(range_resistor=first, across=tuple(across), other=other, missing=silent_receivers(circuit))


def silent_receivers(circuit: Circuit) -> tuple[str, ...]:
    """Return the titles of what receivers beside the card do not state: a resistance in series, or an input."""
    found: list[str] = []
    for member in indicators(circuit):
        kind = member.type
        if kind is None or (kind.resistance_ohm is None and kind.input_ohm is None and kind.fixed_drop_v is None):
            found.append("resistance ohm or input ohm")
    return tuple(dict.fromkeys(found))


# ------------------------------------------------------------------------------------------------ series indicators


@dataclass(frozen=True, slots=True, kw_only=True)
class SeriesIndicator:
    """An indicator in series with a loop.

    Attributes
    ----------
    name
        Its tag.
    bypass_diode
        Whether a diode lies across it; None where nothing says.
    resistance_ohm
        Its resistance; None where nothing says.
    """

    name: str
    bypass_diode: bool | None
    resistance_ohm: float | None
    source: str = ""

    @property
    def volts(self) -> float | None:
        """Volts across it at 20 mA."""
        return None if self.resistance_ohm is None else self.resistance_ohm * NOMINAL_MA / 1000.0

    def working(self, knee_v: float) -> str:
        """Write its volts against the diode's knee."""
        return (
            f"{format_number(NOMINAL_MA)} mA x {shown(self.resistance_ohm or 0.0)} ohm ({self.source})"
            f" = {shown(self.volts or 0.0)} V, the diode's knee is {format_number(knee_v)} V"
        )


def series_indicators(circuit: Circuit) -> tuple[SeriesIndicator, ...]:
    """Return the indicators in series with a circuit's device.

    One that states an input resistance and none in series reads the volts across the range resistor.
    """
    found: list[SeriesIndicator] = []
    for member in indicators(circuit):
        kind = member.type
        if kind is not None and kind.input_ohm is not None and kind.resistance_ohm is None:
            continue
        found.append(
            SeriesIndicator(
                name=member.name,
                bypass_diode=kind.bypass_diode if kind is not None else None,
                resistance_ohm=kind.resistance_ohm if kind is not None else None,
                source=entry_name(kind) if kind is not None else "",
            )
        )
    return tuple(found)
