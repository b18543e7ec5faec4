"""What a source of current must drive: its load in ohm against what it declares, and the volts that an output needs."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Final

from instruments.origin import Cell
from instruments.plant_data import PlantData
from instruments.quantity import format_number
from instruments.record import DeviceType
from loops.budget import SUPPLY_TOLERANCE_PERCENT
from loops.cable import longest_m
from loops.circuit import Circuit
from loops.series import (
    LEAST_MA,
    NOMINAL_MA,
    Series,
    Term,
    assumed_receiver,
    card_in_series,
    driven_in_series,
    entry_name,
    exceeds,
    given_by,
    hot_cable,
    indicators_in_series,
    is_output,
    isolator_input,
    receiver_term,
    shown,
    total_ohm,
    total_volts,
    zener_in_series,
)
from loops.source import DEVICE, parts_of

__all__ = ["ENDS_MA", "Drive", "End", "Load", "drives", "loads"]

ENDS_MA: Final = (LEAST_MA, NOMINAL_MA)
"""A positioner may need more volts at the lower end: both ends count."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Load:
    """What one source of a circuit drives, as a resistance, with what is stated and with the defaults for blanks.

    Attributes
    ----------
    name, part
        The source, and the part of a finding: empty for what the device itself or an output drives.
    maximum_ohm, kindest_maximum_ohm
        What it may drive: with the default for a blank, and with the kindest value that could be true.
    maximum_words, kindest_words
        How they came about, where the supply is not the one that the load is declared for.
    current_ma
        The current for which it is declared.
    terms
        What lies in series beside the cable, with the default for a blank receiver; `assumed_term` is that default.
    cable
        The cable, where it is on this side and known.
    missing, assumed
        What it cannot be worked without, as titles, and the defaults that were used, in words.
    """

    name: str
    entry: DeviceType
    part: str = ""
    field: str = "maximum_load_ohm"
    maximum_ohm: float
    kindest_maximum_ohm: float
    maximum_words: str = ""
    kindest_words: str = ""
    current_ma: float
    terms: tuple[Term, ...]
    assumed_term: Term | None = None
    cable: Term | None = None
    ohm_per_m: float | None = None
    missing: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()
    cells: tuple[Cell, ...] = ()

    @property
    def ohm(self) -> float:
        """All of it in ohm, with the defaults."""
        return total_ohm(self.all_terms, self.current_ma)

    @property
    def kindest_ohm(self) -> float:
        """All of it in ohm, without what is only assumed."""
        return total_ohm((each for each in self.all_terms if each is not self.assumed_term), self.current_ma)

    @property
    def all_terms(self) -> tuple[Term, ...]:
        """All that lies in series, the cable first."""
        cable = (self.cable,) if self.cable is not None else ()
        assumed = (self.assumed_term,) if self.assumed_term is not None else ()
        return (*cable, *self.terms, *assumed)

    @property
    def too_much(self) -> bool:
        """Whether it is more than the source may drive, with the defaults."""
        return exceeds(self.ohm, self.maximum_ohm)

    @property
    def too_much_at_best(self) -> bool:
        """Whether it is more, whatever the blanks may be."""
        return exceeds(self.kindest_ohm, self.kindest_maximum_ohm)

    def working(self, *, at_best: bool) -> str:
        """Return the sum with its figures."""
        terms = [each for each in self.all_terms if not (at_best and each is self.assumed_term)]
        ohm = self.kindest_ohm if at_best else self.ohm
        maximum = self.kindest_maximum_ohm if at_best else self.maximum_ohm
        summed = " + ".join(each.as_ohm(self.current_ma) for each in terms)
        over = ohm - maximum
        verdict = f"over by {_fine(over, over)} ohm" if exceeds(ohm, maximum) else f"margin {_fine(-over, over)} ohm"
        told = self.kindest_words if at_best else self.maximum_words
        words = f"{told} = " if told else ""
        return (
            f"{summed or '0 ohm'} = {_fine(ohm, over)} ohm; {words}{_fine(maximum, over)} ohm allowed"
            f" ({entry_name(self.entry)}, at {format_number(self.current_ma)} mA), {verdict}"
        )

    @property
    def longest_cable_m(self) -> int | None:
        """Longest cable in whole metres that it may drive; None without a cable on this side, or with none at all."""
        per_m = self.ohm_per_m
        if per_m is None or self.missing:
            return None
        others = total_ohm((each for each in self.all_terms if each is not self.cable), self.current_ma)
        return longest_m(lambda length_m: not exceeds(others + length_m * per_m, self.maximum_ohm))


def _fine(value: float, margin: float) -> str:
    """Write a figure to as many decimals as it takes to see a margin."""
    decimals = 3
    while decimals < 9 and margin and not round(margin, decimals):
        decimals += 1
    return shown(value, decimals)


@dataclass(frozen=True, slots=True, kw_only=True)
class Loads:
    """The sources of a circuit that declare what they may drive, and what leaves others unknown, as titles."""

    loads: tuple[Load, ...] = ()
    missing: tuple[str, ...] = ()
    others: bool = False


def loads(circuit: Circuit, data: PlantData, *, named: bool = False) -> Loads:
    """Return what each source of a circuit drives that must say how much it may.

    A four-wire output drives the cable and the input; an isolator's output drives the receiver on its
    system side, or, of an output, what stands in the field; an output card all there is.

    Parameters
    ----------
    circuit
        The circuit; of 4-20 mA.
    data
        The plant's data: receiver, hot conductor, supply tolerance.
    named
        Whether to write where the figures came from: only for what is shown.
    """
    if circuit.barrier_named and circuit.barrier is None:
        return Loads(missing=("barrier",))
    return _of_output(circuit, data, named=named) if is_output(circuit) else _of_input(circuit, data, named=named)


def _of_output(circuit: Circuit, data: PlantData, *, named: bool) -> Loads:
    isolator = circuit.isolator
    source = isolator or circuit.card
    if source is None:
        return Loads(missing=("card",))
    if source.maximum_load_ohm is None:
        stated = source.compliance_v is not None or source.available_20ma_v is not None
        return Loads(others=True) if stated else Loads(missing=("maximum load ohm",))
    current_ma = source.maximum_load_ma or NOMINAL_MA
    found = Series()
    driven_in_series(circuit, found, NOMINAL_MA)
    indicators_in_series(circuit, found, system_side=False if isolator is not None else None)
    zener_in_series(circuit, found)
    name = f"isolator {source.code}" if isolator is not None else f"card {source.code}"
    made = [_load(circuit, data, found, name=name, entry=source, current_ma=current_ma, named=named)]
    card = circuit.card
    if isolator is not None and card is not None and card.maximum_load_ohm is not None:
        behind = isolator_input(circuit, NOMINAL_MA)
        if behind is not None:
            rest = Series(terms=[behind])
            indicators_in_series(circuit, rest, system_side=True)
            ma = card.maximum_load_ma or NOMINAL_MA
            made.append(
                _load(
                    circuit,
                    data,
                    rest,
                    name=f"card {card.code}",
                    part="card",
                    entry=card,
                    current_ma=ma,
                    cable=False,
                    named=named,
                )
            )
    return Loads(loads=tuple(made))


def _of_input(circuit: Circuit, data: PlantData, *, named: bool) -> Loads:
    made: list[Load] = []
    missing: list[str] = []
    isolator, kind = circuit.isolator, circuit.device.type
    device = next(each for each in parts_of(circuit).field if each.what == DEVICE)
    role = device.role
    if role is None:
        missing.append(device.missing)
    if role == "source":
        if kind is None or kind.maximum_load_ohm is None:
            missing.append("maximum load ohm")
        else:
            made.append(_of_transmitter(circuit, data, kind, named=named))
    if isolator is not None:
        if isolator.maximum_load_ohm is None:
            missing.append("maximum load ohm")
        else:
            found = Series()
            indicators_in_series(circuit, found, system_side=True)
            assumed = _receiver(circuit, data, found)
            made.append(
                _load(
                    circuit,
                    data,
                    found,
                    name=f"isolator {isolator.code}",
                    part="isolator",
                    entry=isolator,
                    current_ma=isolator.maximum_load_ma or NOMINAL_MA,
                    assumed_term=assumed,
                    cable=False,
                    named=named,
                )
            )
    elif role == "sink" and circuit.card is not None and circuit.card.maximum_load_ohm is not None:
        card = circuit.card
        if card.source_or_sink != "sink":
            # What it may have before its terminals; its own input lies behind them.
            found = Series()
            indicators_in_series(circuit, found)
            zener_in_series(circuit, found)
            ma = card.maximum_load_ma or NOMINAL_MA
            made.append(
                _load(
                    circuit, data, found, name=f"card {card.code}", part="card", entry=card, current_ma=ma, named=named
                )
            )
    return Loads(loads=tuple(made), missing=tuple(missing), others=not made and not missing)


def _of_transmitter(circuit: Circuit, data: PlantData, kind: DeviceType, *, named: bool) -> Load:
    current_ma = kind.maximum_load_ma or NOMINAL_MA
    found = Series()
    indicators_in_series(circuit, found, system_side=False if circuit.isolator is not None else None)
    assumed = None
    if circuit.isolator is not None:
        behind = isolator_input(circuit, NOMINAL_MA)
        if behind is None:
            found.missing.append("input ohm")
        else:
            found.terms.append(behind)
    else:
        zener_in_series(circuit, found)
        assumed = _receiver(circuit, data, found)
    return _load(
        circuit,
        data,
        found,
        name=f"output of {circuit.device.name}",
        entry=kind,
        field="type.maximum_load_ohm",
        current_ma=current_ma,
        assumed_term=assumed,
        own_supply=True,
        named=named,
    )


def _receiver(circuit: Circuit, data: PlantData, found: Series) -> Term | None:
    """Add the receiver and what the card puts in series; return the one that is assumed where neither is stated."""
    stated = card_in_series(circuit, found)
    receiver = receiver_term(circuit)
    if receiver is not None:
        found.terms.append(receiver)
        if circuit.receiver_ohm is not None:
            found.cells.extend(circuit.receiver_ohm.cells)
        return None
    return None if stated else assumed_receiver(data)


def _load(
    circuit: Circuit,
    data: PlantData,
    found: Series,
    *,
    name: str,
    entry: DeviceType,
    current_ma: float,
    part: str = "",
    field: str = "maximum_load_ohm",
    assumed_term: Term | None = None,
    cable: bool = True,
    own_supply: bool = False,
    named: bool,
) -> Load:
    declared = entry.maximum_load_ohm or 0.0
    missing, assumed = list(found.missing), []
    cells = list(entry.cells("maximum_load_ohm"))
    run = hot_cable(circuit, data, named=named) if cable else None
    if run is not None:
        missing.extend(run.missing)
        if circuit.cable_length_m is not None:
            cells.extend(circuit.cable_length_m.cells)
    if assumed_term is not None:
        assumed.append(f"receiver {format_number(assumed_term.ohm)} ohm")
    kindest = worst = declared
    kindest_words = worst_words = ""
    if own_supply and entry.maximum_load_supply_v is not None:
        low_v, best_v, source, tolerance = _own_supply_v(circuit, data)
        if low_v is not None and best_v is not None:
            worst, worst_words = _maximum_at(low_v, entry, current_ma, source)
            kindest, kindest_words = _maximum_at(best_v, entry, current_ma, source.partition(" less ")[0])
            if tolerance and worst != kindest:
                assumed.append(tolerance)
    return Load(
        name=name,
        entry=entry,
        part=part,
        field=field,
        maximum_ohm=worst,
        kindest_maximum_ohm=kindest,
        maximum_words=worst_words,
        kindest_words=kindest_words,
        current_ma=current_ma,
        terms=tuple(found.terms),
        assumed_term=assumed_term,
        cable=run.term() if run is not None else None,
        ohm_per_m=run.ohm_per_m if run is not None else None,
        missing=tuple(missing),
        assumed=tuple(assumed),
        cells=(*cells, *found.cells),
    )


def _maximum_at(supply_v: float, entry: DeviceType, current_ma: float, source: str) -> tuple[float, str]:
    """Return the load that may be driven at another supply than it is declared for, and how it came about.

    24 V with 630 ohm are 830 ohm at 28 V and 20 mA, as far as the device bears the volts.
    """
    declared, for_v = entry.maximum_load_ohm or 0.0, entry.maximum_load_supply_v or 0.0
    volts = min(supply_v, entry.maximum_v if entry.maximum_v is not None else math.inf)
    ohm = max(declared + (volts - for_v) / (current_ma / 1000.0), 0.0)
    if volts == for_v:
        return ohm, ""
    return ohm, (
        f"{format_number(declared)} ohm + ({shown(volts)} V, {source}, - {format_number(for_v)} V)"
        f" / {format_number(current_ma)} mA"
    )


def _own_supply_v(circuit: Circuit, data: PlantData) -> tuple[float | None, float | None, str, str]:
    """Return a four-wire device's own supply: its lowest, the kindest that could be true, its source, the tolerance."""
    lowest, nominal = circuit.supply_min_v, circuit.supply_nominal_v
    if lowest is not None:
        return lowest.number, lowest.number, given_by(lowest, circuit), ""
    if nominal is not None and nominal.source != "card":
        percent = data.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
        volts = nominal.number
        words = f"supply {volts:g} V may be {percent:g} % low"
        return volts * (1 - percent / 100), volts, f"{volts:g} V less {percent:g} %", words
    return None, None, "", ""


# ------------------------------------------------------------------------------------------------ volts of an output


@dataclass(frozen=True, slots=True, kw_only=True)
class End:
    """What an output must give at one current: the device's volts and the drops before it."""

    current_ma: float
    terms: tuple[Term, ...]
    cable: Term | None
    missing: tuple[str, ...] = ()

    @property
    def needed_v(self) -> float:
        """Volts needed, with the cable where it is known."""
        return total_volts((*self.terms, *((self.cable,) if self.cable else ())), self.current_ma)


@dataclass(frozen=True, slots=True, kw_only=True)
class Drive:
    """What drives an output's circuit, or one side of it: the volts it can give, and what is needed at both ends.

    Attributes
    ----------
    name, part
        The source, and the part of a finding: empty for what moves the device.
    compliance_v, compliance_words
        The volts it can give, and where they came from.
    from_load
        Whether they were worked out of a declared load: then the load itself says what is wrong at its current.
    """

    name: str
    entry: DeviceType
    part: str = ""
    field: str = "compliance_v"
    compliance_v: float
    compliance_words: str
    from_load: bool = False
    ends: tuple[End, ...]
    ohm_per_m: float | None = None
    cable_missing: tuple[str, ...] = ()
    cells: tuple[Cell, ...] = ()

    @property
    def missing(self) -> tuple[str, ...]:
        """What it cannot be worked without, as titles."""
        found = (*(title for end in self.ends for title in end.missing), *self.cable_missing)
        return tuple(dict.fromkeys(found))

    def short_v(self, end: End) -> float:
        """Volts that are lacking at one end; not more than nothing where it has enough."""
        return end.needed_v - self.compliance_v

    def falls_short(self, end: End) -> bool:
        """Whether one end lacks volts, whatever is not stated may be."""
        return exceeds(end.needed_v, self.compliance_v)

    @property
    def worst(self) -> End | None:
        """The end that lacks most; None where neither lacks any."""
        short = [each for each in self.ends if self.falls_short(each)]
        return max(short, key=self.short_v, default=None)

    @property
    def working(self) -> str:
        """The sum at each end, with its figures."""
        return "; ".join(self._end(each) for each in self.ends)

    def _end(self, end: End) -> str:
        terms = (*end.terms, *((end.cable,) if end.cable else ()))
        short = self.short_v(end)
        summed = " + ".join(each.as_volts(end.current_ma) for each in terms)
        if end.missing:
            return f"at {format_number(end.current_ma)} mA: {', '.join(end.missing)} not stated"
        verdict = f"short by {_fine(short, short)} V" if self.falls_short(end) else f"margin {_fine(-short, short)} V"
        return (
            f"at {format_number(end.current_ma)} mA: {summed} = {_fine(end.needed_v, short)} V of"
            f" {shown(self.compliance_v)} V ({self.compliance_words}), {verdict}"
        )

    @property
    def longest_cable_m(self) -> int | None:
        """Longest cable in whole metres with which both ends have enough; None with none at all."""
        per_m = self.ohm_per_m
        if per_m is None or self.missing:
            return None

        def holds(length_m: int) -> bool:
            return not any(
                exceeds(
                    total_volts(end.terms, end.current_ma) + length_m * per_m * end.current_ma / 1000.0,
                    self.compliance_v,
                )
                for end in self.ends
            )

        return longest_m(holds)


@dataclass(frozen=True, slots=True, kw_only=True)
class Drives:
    """What drives an output's circuit, what leaves it unknown, as titles, and what is taken for granted."""

    drives: tuple[Drive, ...] = ()
    missing: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()


def drives(circuit: Circuit, data: PlantData, *, named: bool = False) -> Drives:
    """Return what drives an output's circuit: an isolator its field side and the card the isolator, else the card all.

    Parameters
    ----------
    circuit
        The circuit; an output of 4-20 mA.
    data
        The plant's data: hot conductor.
    named
        Whether to write where the figures came from: only for what is shown.
    """
    if circuit.barrier_named and circuit.barrier is None:
        return Drives(missing=("barrier",))
    isolator = circuit.isolator
    source = isolator or circuit.card
    if source is None:
        return Drives(missing=("card",))
    compliance = _compliance(source)
    name = f"isolator {source.code}" if isolator is not None else f"card {source.code}"
    if compliance is None:
        return Drives(missing=("compliance V",))
    volts, words, from_load = compliance
    run = hot_cable(circuit, data, named=named)
    cells: list[Cell] = [*source.cells("compliance_v"), *source.cells("maximum_load_ohm")]
    if circuit.cable_length_m is not None:
        cells.extend(circuit.cable_length_m.cells)
    ends = []
    for current_ma in ENDS_MA:
        found = Series()
        driven_in_series(circuit, found, current_ma)
        indicators_in_series(circuit, found, system_side=False if isolator is not None else None)
        zener_in_series(circuit, found)
        cells.extend(found.cells)
        ends.append(
            End(current_ma=current_ma, terms=tuple(found.terms), cable=run.term(), missing=tuple(found.missing))
        )
    made = [
        Drive(
            name=name,
            entry=source,
            compliance_v=volts,
            compliance_words=words,
            from_load=from_load,
            ends=tuple(ends),
            ohm_per_m=run.ohm_per_m,
            cable_missing=run.missing,
            cells=tuple(dict.fromkeys(cells)),
        )
    ]
    assumed: tuple[str, ...] = ()
    if isolator is not None:
        behind = _to_the_isolator(circuit)
        if behind is None:
            assumed = (f"the card drives the input of {isolator.code}",)
        else:
            made.append(behind)
    return Drives(drives=tuple(made), assumed=assumed)


def _to_the_isolator(circuit: Circuit) -> Drive | None:
    """Return what the card must give an isolator; None where one of them does not say."""
    card = circuit.card
    compliance = _compliance(card) if card is not None else None
    inputs = [isolator_input(circuit, current_ma) for current_ma in ENDS_MA]
    if card is None or compliance is None or inputs[1] is None:
        return None
    ends = []
    for current_ma, term in zip(ENDS_MA, inputs, strict=True):
        rest = Series(terms=[term] if term is not None else [])
        indicators_in_series(circuit, rest, system_side=True)
        if term is not None:
            ends.append(End(current_ma=current_ma, terms=tuple(rest.terms), cable=None, missing=tuple(rest.missing)))
    volts, words, from_load = compliance
    return Drive(
        name=f"card {card.code}",
        entry=card,
        part="card",
        compliance_v=volts,
        compliance_words=words,
        from_load=from_load,
        ends=tuple(ends),
        cells=card.cells("compliance_v"),
    )


def _compliance(source: DeviceType) -> tuple[float, str, bool] | None:
    """Return the volts that a source can give, where they stand, and whether they are those of a declared load."""
    name = entry_name(source)
    if source.compliance_v is not None:
        return source.compliance_v, f"compliance, {name}", False
    if source.available_20ma_v is not None:
        return source.available_20ma_v, f"volts available at 20 mA, {name}", False
    if source.maximum_load_ohm is not None:
        current_ma = source.maximum_load_ma or NOMINAL_MA
        words = f"{format_number(source.maximum_load_ohm)} ohm x {format_number(current_ma)} mA, {name}"
        return source.maximum_load_ohm * current_ma / 1000.0, words, True
    return None
