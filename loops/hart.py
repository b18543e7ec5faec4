"""HART on a current loop: the resistance that its signal is heard across, and its time constant with the cable."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from instruments.kind import Kind
from instruments.origin import Cell
from instruments.plant_data import PlantData
from instruments.quantity import format_number
from instruments.span import SLACK
from loops.budget import lift_off
from loops.cable import longest_m
from loops.circuit import Circuit
from loops.power import voltage_budget
from loops.receiving import Receivers, receivers
from loops.series import (
    NOMINAL_MA,
    HotCable,
    Series,
    Term,
    assumed_receiver,
    card_in_series,
    driven_devices,
    driven_in_series,
    entry_name,
    hot_cable,
    indicators_in_series,
    is_output,
    receiver_term,
    shown,
    total_ohm,
    zener_in_series,
)

LEAST_OHM: Final = 230.0
"""Between the supply, which is a short to HART, and the point of communication (point-to-point)."""
LIMIT_US: Final = 65.0
"""Resistance times capacitance must stay below it (from memory; public excerpts of the physical layer agree)."""
NF_PER_NUMBER: Final = 5.0
"""Capacitance number 1 means 5000 pF (from memory; public excerpts agree)."""
CAPACITANCE_NUMBER: Final = 1.0


def rc_us(ohm: float, nf: float) -> float:
    """Time constant of a resistance in ohm and a capacitance in nF, in microseconds.

    >>> round(rc_us(274.2, 210.0), 2), round(rc_us(286.3, 310.0), 2)
    (57.58, 88.75)
    """
    return ohm * nf / 1000.0


def too_slow(us: float) -> bool:
    """Whether a time constant is not below the limit; at the limit it is not.

    >>> too_slow(64.999), too_slow(65.0)
    (False, True)
    """
    return us >= LIMIT_US * (1.0 - SLACK)


def longest_hart_cable_m(ohm: float, nf: float, *, ohm_per_m: float, nf_per_m: float) -> int | None:
    """Longest cable in whole metres whose time constant is below the limit; one metre more is not.

    Parameters
    ----------
    ohm, nf : float
        All in series but the cable, and all capacitance but the cable's.
    ohm_per_m, nf_per_m : float
        What a metre of cable adds: its resistance out and back, and its capacitance.

    Returns
    -------
    int or None
        None where even no cable at all is too slow.

    >>> longest_hart_cable_m(250.0, 10.0, ohm_per_m=0.0242, nf_per_m=0.2)
    1122
    """
    return longest_m(lambda length: not too_slow(rc_us(ohm + length * ohm_per_m, nf + length * nf_per_m)))


def series_resistor_ohm(seen_ohm: float, least_ohm: float = LEAST_OHM) -> int:
    """Least resistor in whole ohms that brings what HART is heard across up to what it needs.

    >>> series_resistor_ohm(125.0), series_resistor_ohm(229.5), series_resistor_ohm(230.0)
    (105, 1, 0)
    """
    return max(math.ceil((least_ohm - seen_ohm) * (1.0 - SLACK)), 0)


# ------------------------------------------------------------------------------- the resistance it is heard across


@dataclass(frozen=True, slots=True, kw_only=True)
class Heard:
    """The resistance between source and point of communication.

    Attributes
    ----------
    ohm
        The resistance; None where it is not known.
    where
        The point of communication: the card's terminals, or the isolator's system side.
    receivers, in_card
        What it is made of.
    other_ohm
        What it would be if another paper's figure for the receiver held; None where none differs.
    missing
        What it cannot be told without, as titles.
    """

    ohm: float | None
    where: str
    receivers: Receivers
    in_card: Term | None = None
    other_ohm: float | None = None
    missing: tuple[str, ...] = ()
    cells: tuple[Cell, ...] = ()

    def heard_in_words(self, circuit: Circuit, least_ohm: float) -> str:
        """Write the sum with its figures."""
        parts = [self.receivers.receivers_in_words(circuit)] if self.receivers.range_resistor is not None else []
        if self.in_card is not None:
            parts.append(self.in_card.as_ohm(NOMINAL_MA))
        return (
            f"{' + '.join(parts) or 'nothing'} = {shown(self.ohm or 0.0)} ohm at {self.where},"
            f" {format_number(least_ohm)} ohm needed"
        )


def heard_across(circuit: Circuit) -> Heard:
    """Return the resistance across which the system hears a circuit's HART signal.

    It lies between the supply, which is a short to HART, and the card's terminals; behind an isolator,
    between its output and the card. What lies before those terminals, cable and barrier, does not count.

    Parameters
    ----------
    circuit
        The circuit; an input of 4-20 mA with HART.
    """
    isolator = circuit.isolator
    where = "the card's terminals" if isolator is None else f"the system side of isolator {isolator.code}"
    found = receivers(circuit)
    series = Series()
    card_in_series(circuit, series)
    in_card = next((each for each in series.terms if each.ohm), None)
    cells = [*series.cells]
    for each in circuit.receivers:
        cells.extend(each.cells)
    extra = in_card.ohm if in_card is not None else 0.0
    ohm = found.ohm
    missing = list(found.missing)
    if ohm is None and in_card is None:
        missing.insert(0, "receiver ohm")
    total = None if ohm is None and in_card is None else (ohm or 0.0) + extra
    other = found.other.number + extra if found.other is not None else None
    return Heard(
        ohm=total,
        where=where,
        receivers=found,
        in_card=in_card,
        other_ohm=other,
        missing=tuple(missing),
        cells=tuple(dict.fromkeys(cells)),
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class WithResistor:
    """What a resistor more in series does to a circuit's transmitter.

    `holds` is None where the volts cannot be worked for a blank. `least_supply_v` and `longest_cable_m` are what
    would go with it where it breaks the lift-off: either of them.
    """

    ohm: int
    holds: bool | None
    at_terminals_v: float | None = None
    needed_v: float | None = None
    current_ma: float | None = None
    least_supply_v: float | None = None
    missing: tuple[str, ...] = ()


def with_resistor(circuit: Circuit, ohm: int, data: PlantData) -> WithResistor:
    """Work a two-wire transmitter's volts with a resistor more in series.

    Parameters
    ----------
    circuit
        The circuit.
    ohm
        The resistor.
    data
        The plant's data.
    """
    if circuit.isolator is not None or circuit.powered_by_loop is False:
        # The resistor lies on another side, or the device drives the loop itself.
        return WithResistor(ohm=ohm, holds=True)
    budget = lift_off(circuit, data)
    if budget.missing or budget.source_v is None or budget.lift_off_v is None:
        return WithResistor(ohm=ohm, holds=None, missing=budget.missing)
    cable = (("cable", budget.cable.ohm(budget.hot_c)),) if budget.cable is not None else ()
    series = (*budget.resistances, *cable, ("resistor", float(ohm)))
    found = voltage_budget(
        budget.source_v,
        budget.current_ma,
        needed_v=budget.lift_off_v,
        resistances=series,
        fixed_drops=budget.fixed_drops,
    )
    least = None
    if not found.passes and budget.supply_is_free:
        short_v = -found.margin_v
        least = math.ceil(round((budget.source_v + short_v) * 10.0, 6)) / 10.0
    return WithResistor(
        ohm=ohm,
        holds=found.passes,
        at_terminals_v=found.at_terminals_v,
        needed_v=budget.lift_off_v,
        current_ma=budget.current_ma,
        least_supply_v=least,
    )


# ----------------------------------------------------------------------------------------------- time constant


@dataclass(frozen=True, slots=True, kw_only=True)
class Capacitance:
    """One part of a circuit's capacitance in nF, with where it came from."""

    name: str
    nf: float
    source: str


@dataclass(frozen=True, slots=True, kw_only=True)
class TimeConstant:
    """Resistance times capacitance of a circuit, or of its field's side where an isolator parts it.

    Attributes
    ----------
    terms, assumed_term
        What lies in series beside the cable; the default for a blank receiver.
    capacitances
        The devices' capacitances.
    cable, nf_per_m
        The cable: its resistance, and the capacitance of a metre; None where it is not known.
    missing, assumed
        What it cannot be worked without, as titles, and the defaults that were used.
    """

    terms: tuple[Term, ...]
    assumed_term: Term | None
    capacitances: tuple[Capacitance, ...]
    cable: HotCable
    cable_nf: float | None
    nf_per_m: float | None
    cable_nf_words: str = ""
    missing: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()
    cells: tuple[Cell, ...] = ()

    @property
    def worst_us(self) -> float | None:
        """With the defaults; None where a blank has none."""
        return None if self.missing else self._us(kindest=self.assumed_term is None)

    @property
    def kindest_us(self) -> float:
        """With the kindest value that could be true: no receiver, and what is not known of the cable nothing."""
        return self._us(kindest=True)

    def ohm(self, *, kindest: bool) -> float:
        """All in series."""
        run = self.cable.term()
        return total_ohm(self._terms(kindest=kindest), NOMINAL_MA) + (run.ohm if run is not None else 0.0)

    @property
    def nf(self) -> float:
        """All capacitance, the cable's where it is known."""
        return math.fsum(each.nf for each in self.capacitances) + (self.cable_nf or 0.0)

    def _us(self, *, kindest: bool) -> float:
        return rc_us(self.ohm(kindest=kindest), self.nf)

    def _terms(self, *, kindest: bool) -> tuple[Term, ...]:
        return self.terms if kindest or self.assumed_term is None else (*self.terms, self.assumed_term)

    @property
    def longest_cable_m(self) -> int | None:
        """Longest cable in whole metres with the defaults; None where none is short enough, or nobody can tell."""
        if self.missing or self.cable.ohm_per_m is None or self.nf_per_m is None:
            return None
        return longest_hart_cable_m(
            total_ohm(self._terms(kindest=False), NOMINAL_MA),
            math.fsum(each.nf for each in self.capacitances),
            ohm_per_m=self.cable.ohm_per_m,
            nf_per_m=self.nf_per_m,
        )

    def working(self, *, kindest: bool) -> str:
        """Write the product with its figures."""
        run = self.cable.term()
        ohms = [each.as_ohm(NOMINAL_MA) for each in (*((run,) if run else ()), *self._terms(kindest=kindest))]
        nfs = [f"{each.name} {shown(each.nf)} nF ({each.source})" for each in self.capacitances]
        if self.cable_nf is not None:
            nfs.insert(0, f"cable {shown(self.cable_nf)} nF ({self.cable_nf_words})")
        us = self._us(kindest=kindest)
        return (
            f"{' + '.join(ohms) or '0 ohm'} = {shown(self.ohm(kindest=kindest))} ohm;"
            f" {' + '.join(nfs)} = {shown(self.nf)} nF;"
            f" {shown(self.ohm(kindest=kindest))} ohm x {shown(self.nf)} nF = {shown(us)} us,"
            f" must be below {format_number(LIMIT_US)} us"
        )


_NO_DEVICES: Final = frozenset(
    {Kind.ELEMENT, Kind.BARRIER, Kind.ISOLATOR, Kind.CARD, Kind.POWER_SUPPLY, Kind.JUNCTION_BOX, Kind.SOFT_FUNCTION}
)
_VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.MANUAL_VALVE})


def time_constant(circuit: Circuit, data: PlantData, *, named: bool = False) -> TimeConstant:
    """Return a circuit's resistance times capacitance, with all in series and hot conductors.

    An isolator ends the circuit: what lies on its field's side counts, and the resistance that it states
    there; where it states none, that of a receiver is assumed.

    Parameters
    ----------
    circuit
        The circuit; of 4-20 mA with HART.
    data
        The plant's data: receiver, hot conductor, capacitance number.
    named
        Whether to write where the figures came from: only for what is shown.
    """
    output = is_output(circuit)
    found = Series()
    indicators_in_series(circuit, found, system_side=False if circuit.isolator is not None else None)
    zener_in_series(circuit, found)
    assumed_term = None
    assumed = ""
    missing = [*found.missing]
    if circuit.barrier_named and circuit.barrier is None:
        missing.append("barrier")
    if circuit.isolator is not None and not output:
        own = circuit.isolator.input_ohm if circuit.isolator.input_ohm is not None else circuit.isolator.resistance_ohm
        if own is None:
            assumed_term = assumed_receiver(data)
            assumed = _assumed_words(f"input of isolator {circuit.isolator.code}", assumed_term.ohm)
        else:
            found.terms.append(Term(name="isolator", ohm=own, source=entry_name(circuit.isolator)))
    elif output:
        driven = Series()
        driven_in_series(circuit, driven, NOMINAL_MA)
        # Volts say nothing of what a positioner is to a signal of some kilohertz.
        ohms = [each for each in driven.terms if each.ohm]
        if ohms and len(ohms) == len(driven_devices(circuit)):
            found.terms.extend(ohms)
            found.cells.extend(driven.cells)
        else:
            assumed_term = assumed_receiver(data)
    else:
        stated = card_in_series(circuit, found)
        receiver = receiver_term(circuit)
        if receiver is not None:
            found.terms.append(receiver)
            if circuit.receiver_ohm is not None:
                found.cells.extend(circuit.receiver_ohm.cells)
        elif not stated:
            assumed_term = assumed_receiver(data)
    run = hot_cable(circuit, data, named=named)
    missing.extend(run.missing)
    nf, nf_per_m, words, cells = _cable_nf(circuit, named=named)
    if nf is None and (circuit.cable_length_m is not None or nf_per_m is None):
        missing.append("capacitance")
    devices = _device_nf(circuit, data, named=named)
    return TimeConstant(
        terms=tuple(found.terms),
        assumed_term=assumed_term,
        capacitances=devices,
        cable=run,
        cable_nf=nf,
        nf_per_m=nf_per_m,
        cable_nf_words=words,
        missing=tuple(dict.fromkeys(missing)),
        assumed=(assumed or _assumed_words("receiver", assumed_term.ohm),) if assumed_term is not None else (),
        cells=(
            *(circuit.cable_length_m.cells if circuit.cable_length_m is not None else ()),
            *cells,
            *found.cells,
        )
        if named
        else (),
    )


@lru_cache(maxsize=1024)
def _assumed_words(what: str, ohm: float) -> str:
    return f"{what} {format_number(ohm)} ohm"


def _cable_nf(circuit: Circuit, *, named: bool) -> tuple[float | None, float | None, str, tuple[Cell, ...]]:
    """Return the cable's capacitance, that of a metre, the words for it, and its cells."""
    if circuit.segments:
        nf = length_m = 0.0
        for segment in circuit.segments:
            if segment.type is None or segment.type.capacitance_pf_per_m is None:
                return None, None, "", ()
            nf += segment.length_m * segment.type.capacitance_pf_per_m / 1000.0
            length_m += segment.length_m
        words = ""
        if named:
            words = " + ".join(
                f"{shown(each.length_m)} m x {shown(each.type.capacitance_pf_per_m or 0.0)} pF/m, cable type"
                f" {each.type.code}"
                for each in circuit.segments
                if each.type is not None
            )
        cells = tuple(
            cell
            for each in circuit.segments
            if each.type is not None
            for cell in each.type.cells("capacitance_pf_per_m")
        )
        return nf, nf / length_m if length_m else None, words, cells
    kind = circuit.cable_type
    if kind is None or kind.capacitance_pf_per_m is None:
        return None, None, "", ()
    nf_per_m = kind.capacitance_pf_per_m / 1000.0
    length = circuit.cable_length_m
    if length is None:
        return None, nf_per_m, "", ()
    if not named:
        return length.number * nf_per_m, nf_per_m, "", ()
    words = f"{shown(length.number)} m x {shown(kind.capacitance_pf_per_m)} pF/m, cable type {kind.code}"
    return length.number * nf_per_m, nf_per_m, words, kind.cells("capacitance_pf_per_m")


def _device_nf(circuit: Circuit, data: PlantData, *, named: bool) -> tuple[Capacitance, ...]:
    """Return the capacitance of each device on the circuit: those in the field, and a card that speaks HART."""
    default = data.threshold("ELC06 capacitance number", CAPACITANCE_NUMBER)
    found: list[Capacitance] = []

    def add(name: str, number: float | None, source: str) -> None:
        counted = default if number is None else number
        words = ""
        if named:
            says = f"capacitance number {format_number(counted)}, {source if number is not None else 'ELC06 default'}"
            words = f"5 nF x {says}"
        found.append(Capacitance(name=name, nf=NF_PER_NUMBER * counted, source=words))

    driven = {id(each) for each in driven_devices(circuit)} if is_output(circuit) else set()
    for member in circuit.members:
        if member.kind in _NO_DEVICES or (member.kind in _VALVES and id(member) not in driven):
            continue
        kind = member.type
        add(member.name, kind.hart_capacitance_number if kind else None, entry_name(kind) if kind else "")
    end = circuit.isolator or circuit.card
    if end is not None and (end.hart or end.hart_capacitance_number is not None):
        name = f"isolator {end.code}" if circuit.isolator is not None else f"card {end.code}"
        add(name, end.hart_capacitance_number, entry_name(end))
    return tuple(found)
