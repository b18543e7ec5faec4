"""The leads of a temperature sensor: on which circuits its own signal runs, and what two wires add to a reading."""

from __future__ import annotations

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.plant_data import PlantData
from instruments.quantity import format_number
from instruments.sensor import PLATINUM_MAX_C, PLATINUM_MIN_C, pt100_ohm, pt100_ohm_per_k, two_wire_lead_error_k
from instruments.signal_words import signal_classes
from instruments.span import above
from loops.budget import HOT_C, CablePath, cable_path
from loops.cable import longest_m, loop_resistance_ohm
from loops.cable_run import cable_working, missing_of_cable
from loops.circuit import ANALOGUE_INPUT, RESISTANCE_THERMOMETER, THERMOCOUPLE, Circuit
from loops.given import cable_run
from loops.plant import Plant, name_key

LEAD_ERROR_K: Final = 0.5
"""Most that two leads may add to a reading, unless the plant says otherwise."""

# ------------------------------------------------------------------------------- where a sensor's own signal runs


def sensor_circuits(circuit: Circuit, plant: Plant) -> tuple[Circuit, ...]:
    """Return the circuits on which a sensor's own signal runs.

    A circuit that ends at an input for sensors is one; else each element on it that states a cable of its own to
    its transmitter. What only repeats the transmitter's cable states none.
    """
    if _sends_its_own(circuit):
        return (circuit,)
    if len(circuit.members) == 1:
        return ()
    return tuple(_leads_to_transmitter(circuit, plant))


def _sends_its_own(circuit: Circuit) -> bool:
    device = circuit.device
    signal = circuit.signal_row.signal or device.record.signal
    classes = signal_classes(signal) or (signal_classes(device.type.signal) if device.type else frozenset())
    if classes & {"current", "voltage", "bus"}:
        return False
    if circuit.kind in (RESISTANCE_THERMOMETER, THERMOCOUPLE):
        return True
    if circuit.kind not in (None, ANALOGUE_INPUT) or device.kind is not Kind.ELEMENT:
        return False
    return bool(classes & {"RTD", "thermocouple"}) or bool(device.type and device.type.sensor_type)


def _leads_to_transmitter(circuit: Circuit, plant: Plant) -> Iterator[Circuit]:
    taken = circuit.device.record
    for element in circuit.members:
        record = element.record
        if element.kind is not Kind.ELEMENT or element is circuit.device:
            continue
        states_one = record.cable or record.cable_type or record.cable_length_m is not None or record.conductor
        if not states_one or (record.cable and name_key(record.cable) == name_key(taken.cable)):
            continue
        alike = (record.cable_type, record.cable_length_m, record.conductor)
        if not record.cable and alike == (taken.cable_type, taken.cable_length_m, taken.conductor):
            continue
        run = cable_run(None, record, record, named=(), plant=plant)
        yield replace(
            circuit,
            device=element,
            signal_row=record,
            members=(element,),
            row=None,
            card=None,
            card_named=None,
            barrier=None,
            barrier_named=None,
            cable_length_m=run.length_m,
            cable_type=run.type,
            cable_type_named=run.type_named,
            conductor=run.conductor,
            segments=run.segments,
            wires=record.wires or (element.type.wires if element.type else None),
        )


_WIRES: Final = re.compile(
    r"\b([234]) ?-? ?(?:w\b|wires?\b|leiter|draht|fils?\b)|\b(two|three|four)[ -]wire", re.IGNORECASE
)
_WIRE_WORDS: Final = {"two": 2, "three": 3, "four": 4}
_LONGEST_TEXT: Final = 120


def lead_wires(circuit: Circuit) -> int | None:
    """Return by how many wires a sensor is connected: as stated, else in the words of its row or type."""
    if circuit.wires is not None:
        return circuit.wires
    device: Installed = circuit.device
    kind = device.type
    texts = (
        circuit.signal_row.signal,
        device.record.kind_written,
        circuit.signal_row.io_type,
        *((kind.sensor_type, kind.signal, kind.description) if kind is not None else ()),
    )
    for text in texts:
        found = _WIRES.search(text[:_LONGEST_TEXT]) if text else None
        if found is not None:
            return int(found[1]) if found[1] else _WIRE_WORDS[found[2].casefold()]
    return None


# ------------------------------------------------------------------------------------------ what two wires add


def lead_error_k(t_c: float, lead_ohm: float, *, r0_ohm: float) -> float:
    """Error in K that two leads add; where the reading leaves IEC 60751's function, what it is at least.

    Parameters
    ----------
    t_c : float
        Temperature of the sensor in degC.
    lead_ohm : float
        Resistance of both leads, out and back, in ohm.
    r0_ohm : float
        Resistance of the sensor at 0 degC.

    >>> round(lead_error_k(100.0, 7.8, r0_ohm=100.0), 2), lead_error_k(100.0, 5000.0, r0_ohm=100.0)
    (20.63, 750.0)
    """
    if pt100_ohm(t_c, r0_ohm=r0_ohm) + lead_ohm > pt100_ohm(PLATINUM_MAX_C, r0_ohm=r0_ohm):
        return PLATINUM_MAX_C - t_c if t_c < PLATINUM_MAX_C else lead_ohm / pt100_ohm_per_k(t_c, r0_ohm=r0_ohm)
    return two_wire_lead_error_k(t_c, lead_ohm, r0_ohm=r0_ohm)


@dataclass(frozen=True, slots=True, kw_only=True)
class TwoWires:
    """The leads of a two-wire platinum sensor against what they may add.

    Attributes
    ----------
    r0_ohm, sensor
        The sensor's resistance at 0 degC, and its name.
    kindest_c, worst_c
        The hottest that it measures: the lowest and the highest it can be. The error grows with it.
    missing
        What is not known of the leads, as titles; `ohm` is then the least that they can have.
    in_series
        What stands in the leads beside the cable.
    """

    r0_ohm: float
    sensor: str
    kindest_c: float
    worst_c: float
    limit_k: float = LEAD_ERROR_K
    missing: tuple[str, ...] = ()
    in_series: tuple[tuple[str, float], ...] = ()
    cable: CablePath | None = None
    cable_words: str = ""
    hot_c: float = HOT_C

    @property
    def ohm(self) -> float:
        """Resistance of all that is known of the leads, out and back, in ohm."""
        return self._with(self.cable.ohm(self.hot_c) if self.cable is not None else 0.0)

    @property
    def kindest_k(self) -> float:
        """The error with the kindest value that could be true for what is blank."""
        return lead_error_k(self.kindest_c, self.ohm, r0_ohm=self.r0_ohm)

    @property
    def worst_k(self) -> float:
        """The error at the hottest that it can measure."""
        return lead_error_k(self.worst_c, self.ohm, r0_ohm=self.r0_ohm)

    def too_much(self, error_k: float) -> bool:
        """Whether an error is above the limit; exactly at it is not."""
        return above(error_k, self.limit_k)

    def working(self, t_c: float) -> str:
        """The error at a temperature with its terms."""
        own = pt100_ohm(t_c, r0_ohm=self.r0_ohm)
        error_k = lead_error_k(t_c, self.ohm, r0_ohm=self.r0_ohm)
        terms = [f"{ohm:g} ohm {name}" for name, ohm in self.in_series]
        if self.cable is not None:
            terms.append(self.cable_words)
        leads = " + ".join(terms) + (f"; {self.ohm:.4g} ohm in all" if len(terms) > 1 else "")
        beyond = own + self.ohm > pt100_ohm(PLATINUM_MAX_C, r0_ohm=self.r0_ohm)
        reads = "beyond 850" if beyond else f"{t_c + error_k:.2f}"
        return (
            f"{leads}; {self.sensor} at {format_number(t_c)} degC {own:.3f} ohm + {self.ohm:.4g} ohm of leads"
            f" is read as {reads} degC, {error_k:.2f} K too high, {self.limit_k:g} K allowed (IEC 60751)"
        )

    def longest_cable_m(self) -> int | None:
        """Longest cable in whole metres whose error is allowed at the hottest; None where none is."""
        cable = self.cable
        if cable is None:
            return None

        def holds(length_m: int) -> bool:
            ohm = loop_resistance_ohm(length_m, cable.ohm_per_km_20c, conductor_c=self.hot_c, per=cable.per)
            return not self.too_much(lead_error_k(self.worst_c, self._with(ohm), r0_ohm=self.r0_ohm))

        return longest_m(holds)

    def _with(self, cable_ohm: float) -> float:
        return math.fsum(ohm for _, ohm in self.in_series) + cable_ohm


def two_wires(circuit: Circuit, data: PlantData, *, sensor: str, r0_ohm: float, hottest_c: float | None) -> TwoWires:
    """Work what the leads of a two-wire platinum sensor add.

    Parameters
    ----------
    circuit
        The circuit on which the sensor's signal runs.
    data
        The plant's data: the error allowed, the hot conductor.
    sensor, r0_ohm
        The sensor's name and its resistance at 0 degC in ohm.
    hottest_c
        The hottest that it is to measure, in degC; None where that is not known.
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
    hot_c = data.threshold("ELC hot degC", HOT_C)
    known_c = None if hottest_c is None else min(max(hottest_c, PLATINUM_MIN_C), PLATINUM_MAX_C)
    return TwoWires(
        r0_ohm=r0_ohm,
        sensor=sensor,
        kindest_c=PLATINUM_MIN_C if known_c is None else known_c,
        worst_c=PLATINUM_MAX_C if known_c is None else known_c,
        limit_k=data.threshold("ELC15 K", LEAD_ERROR_K),
        missing=tuple(missing),
        in_series=tuple(series),
        cable=cable_path(circuit),
        cable_words=cable_working(circuit, hot_c),
        hot_c=hot_c,
    )
