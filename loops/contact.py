"""Contacts and proximity switches on inputs of IEC 60947-5-6: the current of a contact, and what its line may add."""

from __future__ import annotations

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final

from instruments.kind import Kind
from instruments.plant_data import PlantData
from instruments.signal_words import LONGEST_WORDS, signal_classes
from loops.budget import HOT_C, CablePath, cable_path
from loops.cable import longest_m, loop_resistance_ohm
from loops.cable_run import cable_working, missing_of_cable
from loops.circuit import DIGITAL_INPUT, Circuit

# IEC 60947-5-6: the input's source and its inner resistance; 1.2 and 2.1 mA are from memory.
SOURCE_V: Final = 8.2
SOURCE_OHM: Final = 1000.0
HIGH_IMPEDANCE_MA: Final = 1.2
LOW_IMPEDANCE_MA: Final = 2.1

LINE_OHM: Final = 50.0
"""Most that the line may add in all (IEC 60947-5-6, 5.6)."""


def input_ma(ohm: float, *, line_ohm: float = 0.0) -> float:
    """Current in mA that an input of IEC 60947-5-6 drives through what stands in the field.

    Parameters
    ----------
    ohm : float
        Resistance of the contact with its resistors; infinite for a broken line.
    line_ohm : float
        Resistance of the line, out and back.

    >>> input_ma(1000.0), round(input_ma(11000.0), 3), input_ma(0.0)
    (4.1, 0.683, 8.2)
    """
    return SOURCE_V / (SOURCE_OHM + line_ohm + ohm) * 1000.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Line:
    """The line of a proximity switch against what its input allows.

    Attributes
    ----------
    limit_ohm, limit_from
        What is allowed, and whether the standard, the isolator or the card says so.
    in_series
        What stands in the line beside the cable.
    missing
        What it cannot be worked without, as titles; `ohm` is then the least that it can be.
    """

    limit_ohm: float
    limit_from: str
    in_series: tuple[tuple[str, float], ...] = ()
    missing: tuple[str, ...] = ()
    cable: CablePath | None = None
    cable_words: str = ""
    hot_c: float = HOT_C

    @property
    def ohm(self) -> float:
        """Resistance of all that is known of the line, out and back, in ohm."""
        return self._with(self.cable.ohm(self.hot_c) if self.cable is not None else 0.0)

    @property
    def working(self) -> str:
        """The sum with its terms."""
        terms = [f"{ohm:g} ohm {name}" for name, ohm in self.in_series]
        if self.cable is not None:
            terms.append(self.cable_words)
        sum_of = f"; {self.ohm:.4g} ohm in all" if len(terms) > 1 else ""
        return f"{' + '.join(terms)}{sum_of}, {self.limit_ohm:g} ohm allowed ({self.limit_from})"

    def longest_cable_m(self) -> int | None:
        """Longest cable in whole metres that the input allows; None where it allows none."""
        cable = self.cable
        if cable is None:
            return None

        def holds(length_m: int) -> bool:
            ohm = loop_resistance_ohm(length_m, cable.ohm_per_km_20c, conductor_c=self.hot_c, per=cable.per)
            return fits(self._with(ohm), self.limit_ohm)

        return longest_m(holds)

    def _with(self, cable_ohm: float) -> float:
        return math.fsum(ohm for _, ohm in self.in_series) + cable_ohm


def fits(ohm: float, limit_ohm: float) -> bool:
    """Whether a line is within its limit; exactly at it is."""
    return ohm <= limit_ohm or math.isclose(ohm, limit_ohm, rel_tol=1e-9)


_NAMUR: Final = re.compile(r"\bnamur|60947-?5-?6|\b8[.,]2 ?v\b|\b50227\b|\b19234\b", re.IGNORECASE)
_PROXIMITY: Final = re.compile(
    r"\bprox(?:imit|\b)|inductive (?:switch|sensor)|n\u00e4herung|initiator|induktiv|slot(?:ted)? sensor", re.IGNORECASE
)


def _says_namur(text: str | None) -> bool:
    return bool(text) and _NAMUR.search((text or "")[:LONGEST_WORDS]) is not None


def is_on_proximity_input(circuit: Circuit) -> bool | None:
    """Whether a circuit is a proximity switch of IEC 60947-5-6; None where it is one of no stated sort.

    The signal says so, of the row or of the type; a proximity switch whose barrier or card is for NAMUR is one
    too. Three and four wires are another sort.
    """
    device = circuit.device
    if device.kind not in _SWITCHES or circuit.kind not in (None, DIGITAL_INPUT):
        return False
    if circuit.wires in (3, 4):
        return False
    kind = device.type
    signal = circuit.signal_row.signal or device.record.signal
    own = (signal, device.record.kind_written, *((kind.signal, kind.description) if kind is not None else ()))
    if any(map(_says_namur, own)):
        return True
    if not any(_PROXIMITY.search((text or "")[:LONGEST_WORDS]) for text in own):
        return False
    if any(_says_namur(text) for text in _inputs(circuit)):
        return True
    # A contact, or 24 V through the switch, is said to be that.
    classes = signal_classes(signal) or (signal_classes(kind.signal) if kind is not None else frozenset())
    return False if classes & {"contact", "volts", "current", "bus"} else None


_SWITCHES: Final = frozenset({Kind.SWITCH, Kind.HAND_SWITCH, Kind.FIRE_DETECTOR, Kind.GAS_DETECTOR, Kind.ELEMENT})


def _inputs(circuit: Circuit) -> Iterator[str | None]:
    for entry in (circuit.barrier, circuit.card):
        if entry is not None:
            yield entry.signal
            yield entry.description


def line_of(circuit: Circuit, data: PlantData) -> Line:
    """Work the line of a proximity switch: cable out and back, hot, and a zener barrier in it.

    The limit of the isolator that it ends at, else of the card, where one is stated; else that of the standard.
    """
    missing: list[str] = []
    series: list[tuple[str, float]] = []
    if circuit.barrier_named and circuit.barrier is None:
        missing.append("barrier")
    if circuit.zener is not None:
        if circuit.zener.resistance_ohm is None:
            missing.append("resistance ohm of the barrier")
        else:
            series.append(("barrier", circuit.zener.resistance_ohm))
    missing.extend(missing_of_cable(circuit))
    limit_ohm, limit_from = LINE_OHM, "IEC 60947-5-6"
    name, entry = ("isolator", circuit.isolator) if circuit.isolator is not None else ("card", circuit.card)
    if entry is not None and entry.input_limit_ohm is not None:
        limit_ohm, limit_from = entry.input_limit_ohm, f"{name} {entry.code}"
    hot_c = data.threshold("ELC hot degC", HOT_C)
    return Line(
        limit_ohm=limit_ohm,
        limit_from=limit_from,
        in_series=tuple(series),
        missing=tuple(missing),
        cable=cable_path(circuit),
        cable_words=cable_working(circuit, hot_c),
        hot_c=hot_c,
    )
