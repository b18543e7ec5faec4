"""The volts at a solenoid's coil: a divider of coil and cable, for a coil is a resistance and sinks no set current."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final

from instruments.kind import Kind
from instruments.origin import Cell
from instruments.plant_data import PlantData
from instruments.record import DeviceType
from instruments.span import SLACK
from loops.budget import HOT_C, SUPPLY_TOLERANCE_PERCENT, CablePath, cable_path
from loops.cable import longest_m, loop_resistance_ohm, smallest_mm2
from loops.cable_run import cable_working, missing_of_cable
from loops.circuit import DIGITAL_OUTPUT, Circuit
from loops.given import SupplyWords, supply_words

PULL_IN_PERCENT: Final = 85.0
"""Of the nominal voltage, where the coil's own is not stated (common practice)."""


def coil_ohm(nominal_v: float, power_w: float) -> float:
    """Resistance of a direct-current coil in ohm.

    Parameters
    ----------
    nominal_v : float
        Nominal voltage in V.
    power_w : float
        Power at that voltage in W.

    >>> coil_ohm(24.0, 12.0)
    48.0
    """
    return nominal_v * nominal_v / power_w


def volts_at_coil(supply_v: float, coil: float, line_ohm: float, *, fixed_v: float = 0.0) -> float:
    """Volts at a coil behind a line.

    The current falls with the line, so that supply less nominal current times line comes out too low.

    Parameters
    ----------
    supply_v : float
        Supply in V.
    coil : float
        Resistance of the coil in ohm, of several in parallel together.
    line_ohm : float
        Resistance of all that is in series, out and back, in ohm.
    fixed_v : float
        Volts that drop before, whatever the current: the output card.

    >>> round(volts_at_coil(24.0, 48.0, 7.41), 3), round(24.0 - 0.5 * 7.41, 3)
    (20.79, 20.295)
    """
    return (supply_v - fixed_v) * coil / (coil + line_ohm)


@dataclass(frozen=True, slots=True, kw_only=True)
class Coil:
    """One coil: whose it is, its figures in V, W and ohm, and what it pulls in at."""

    name: str
    type_code: str
    nominal_v: float
    power_w: float
    pull_in_percent: float

    @property
    def ohm(self) -> float:
        """Its resistance in ohm."""
        return coil_ohm(self.nominal_v, self.power_w)

    @property
    def needed_v(self) -> float:
        """What it pulls in at, in V."""
        return self.nominal_v * self.pull_in_percent / 100.0


@dataclass(frozen=True, slots=True, kw_only=True)
class CoilVolts:
    """The volts at a coil against what it pulls in at; `margin_v` is exactly 0.0 within the slack of 1e-9."""

    supply_v: float
    at_coil_v: float
    needed_v: float
    margin_v: float
    working: str

    @property
    def passes(self) -> bool:
        """Whether it pulls in; a margin of exactly nothing is enough."""
        return self.margin_v >= 0.0


@dataclass(frozen=True, slots=True, kw_only=True)
class PullIn:
    """What a solenoid's circuit leaves for its coils, with what is stated and with defaults.

    Attributes
    ----------
    coils
        All on the circuit, in parallel behind one line.
    missing
        What it cannot be worked without, as titles; there is then no worst case.
    assumed, assumed_of_coils
        The defaults that were used, in words: of the circuit, and of the coils.
    kindest_v, worst_v
        The supply with the kindest value that could be true, and with the default; its words with each.
    drops, in_series
        What drops before the coil whatever the current, in V, and what lies in series beside the cable, in ohm.
    cable, cable_words
        The cable and its resistance term by term; None where it is not known.
    """

    coils: tuple[Coil, ...] = ()
    missing: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()
    assumed_of_coils: tuple[str, ...] = ()
    kindest_v: float | None = None
    worst_v: float | None = None
    supply_words: tuple[str, str] = ("", "")
    drops: tuple[tuple[str, float], ...] = ()
    in_series: tuple[tuple[str, float], ...] = ()
    cable: CablePath | None = None
    cable_words: str = ""
    hot_c: float = HOT_C

    @property
    def together_ohm(self) -> float:
        """The coils in parallel, in ohm."""
        return 1.0 / math.fsum(1.0 / coil.ohm for coil in self.coils)

    def kindest(self, coil: Coil) -> CoilVolts | None:
        """With the kindest value that could be true for each blank: the supply's nominal, a cable of nothing."""
        return None if self.kindest_v is None else self._at(coil, self.kindest_v, self.supply_words[0])

    def worst(self, coil: Coil) -> CoilVolts | None:
        """With the defaults for the blanks; None where a blank has no default."""
        return None if self.missing or self.worst_v is None else self._at(coil, self.worst_v, self.supply_words[1])

    def passes(self, coil: Coil, line_ohm: float) -> bool:
        """Whether a coil pulls in at the lowest supply behind a line of this resistance, cable included."""
        return self.worst_v is not None and self._margin(coil, self.worst_v, line_ohm) >= 0.0

    def longest_cable_m(self, coil: Coil) -> int | None:
        """Longest cable in whole metres with which a coil pulls in; None where it does with none at all."""
        cable = self.cable
        if self.missing or cable is None:
            return None
        before = self._series_ohm()

        def holds(length_m: int) -> bool:
            ohm = loop_resistance_ohm(length_m, cable.ohm_per_km_20c, conductor_c=self.hot_c, per=cable.per)
            return self.passes(coil, before + ohm)

        return longest_m(holds)

    def smallest_conductor_mm2(self, coil: Coil) -> float | None:
        """Smallest conductor of the standard series, in mm2, with which a coil pulls in; None where none does."""
        cable = self.cable
        if self.missing or cable is None or cable.conductor is None:
            return None
        before = self._series_ohm()

        def holds(ohm_per_km: float) -> bool:
            ohm = loop_resistance_ohm(cable.length_m, ohm_per_km, conductor_c=self.hot_c)
            return self.passes(coil, before + ohm)

        return smallest_mm2(holds, conductor_class=cable.conductor.conductor_class, tinned=cable.conductor.tinned)

    def _series_ohm(self) -> float:
        return math.fsum(ohm for _, ohm in self.in_series)

    def _margin(self, coil: Coil, supply_v: float, line_ohm: float) -> float:
        fixed_v = math.fsum(volts for _, volts in self.drops)
        margin_v = volts_at_coil(supply_v, self.together_ohm, line_ohm, fixed_v=fixed_v) - coil.needed_v
        return 0.0 if abs(margin_v) <= SLACK * max(abs(coil.needed_v), abs(supply_v)) else margin_v

    def _at(self, coil: Coil, supply_v: float, words: str) -> CoilVolts:
        cable_ohm = self.cable.ohm(self.hot_c) if self.cable is not None else 0.0
        line_ohm = self._series_ohm() + cable_ohm
        margin_v = self._margin(coil, supply_v, line_ohm)
        fixed_v = math.fsum(volts for _, volts in self.drops)
        at_coil_v = volts_at_coil(supply_v, self.together_ohm, line_ohm, fixed_v=fixed_v)
        return CoilVolts(
            supply_v=supply_v,
            at_coil_v=at_coil_v,
            needed_v=coil.needed_v,
            margin_v=margin_v,
            working=self._working(coil, words, cable_ohm, at_coil_v=at_coil_v, margin_v=margin_v),
        )

    def _working(self, coil: Coil, words: str, cable_ohm: float, *, at_coil_v: float, margin_v: float) -> str:
        ohms = [
            f"coil of {each.name} ({each.type_code}) {each.nominal_v:g} V x {each.nominal_v:g} V / {each.power_w:g} W"
            f" = {each.ohm:.6g} ohm"
            for each in self.coils
        ]
        if len(self.coils) > 1:
            ohms.append(f"{len(self.coils)} coils in parallel = {self.together_ohm:.6g} ohm")
        if self.cable is not None:
            ohms.append(self.cable_words)
        drops = "".join(f" - {volts:g} V {name}" for name, volts in self.drops)
        coils_ohm = f"{self.together_ohm:.6g} ohm"
        line = "".join(f" + {ohm:g} ohm {name}" for name, ohm in self.in_series)
        line += f" + {cable_ohm:.4g} ohm cable" if self.cable is not None else ""
        decimals = 3
        while decimals < 9 and margin_v and not round(margin_v, decimals):
            decimals += 1

        def volts(value: float) -> str:
            return f"{value:.{decimals}f}".rstrip("0").rstrip(".")

        verdict = f"short by {volts(-margin_v)} V" if margin_v < 0.0 else f"margin {volts(margin_v)} V"
        divider = (
            f"({words}{drops}) x {coils_ohm} / ({coils_ohm}{line}) = {volts(at_coil_v)} V at the coil,"
            f" pull-in {coil.pull_in_percent:g} % of {coil.nominal_v:g} V = {volts(coil.needed_v)} V, {verdict}"
        )
        return "; ".join((*ohms, divider))


# ------------------------------------------------------------------------------------------------- of a circuit


def has_a_coil(circuit: Circuit) -> bool:
    """Whether a circuit moves a solenoid: by the kind of a device on it, or by a type that states a coil."""
    if circuit.kind not in (None, DIGITAL_OUTPUT):
        return False
    return any(True for _ in _with_coils(circuit))


def _with_coils(circuit: Circuit) -> Iterator[tuple[str, DeviceType | None]]:
    for member in circuit.members:
        kind = member.type
        if member.kind is Kind.SOLENOID or (kind is not None and kind.coil_w is not None):
            yield member.name, kind


def is_alternating(circuit: Circuit) -> bool:
    """Whether a solenoid's circuit works on alternating current, as its supply, its signal or its type says.

    The coil is then no resistance: its current is set by an inductance that no list states. What says neither
    and has 100 V or more is taken for alternating current.
    """
    texts = [circuit.supply_named, circuit.signal_row.signal, circuit.device.record.signal]
    texts += [kind.signal for _, kind in _with_coils(circuit) if kind is not None]
    stated = [words for words in map(supply_words, texts) if words is not None]
    if any(words.dc is not None for words in stated):
        return any(words.dc is False for words in stated)
    volts = [words.nominal_v for words in stated]
    volts += [kind.nominal_v for _, kind in _with_coils(circuit) if kind is not None]
    return any(each is not None and each >= _LEAST_AC_V for each in volts)


_LEAST_AC_V: Final = 100.0


def pull_in(circuit: Circuit, data: PlantData) -> PullIn:
    """Work the volts at the coils of a solenoid's circuit: lowest supply, card drop, hot cable.

    Parameters
    ----------
    circuit
        The circuit.
    data
        The plant's data: pull-in, supply tolerance, hot conductor.

    Notes
    -----
    The coil counts with its resistance at its nominal power: a hot coil takes less current and has more
    volts. A card whose entry states no drop leaves it open; where no card is named, none is counted. An
    isolator is a source: its nominal volts, its resistance and its drop count, and neither supply nor card.
    """
    missing: list[str] = []
    assumed: list[str] = []
    of_coils: dict[str, None] = {}
    coils: list[Coil] = []
    for name, kind in _with_coils(circuit):
        coil = _coil(name, kind, data, missing, of_coils)
        if coil is not None:
            coils.append(coil)
    found_v = _supply(circuit, data, missing, assumed)
    drops: list[tuple[str, float]] = []
    series: list[tuple[str, float]] = []
    isolator = circuit.isolator
    if circuit.barrier_named and circuit.barrier is None:
        missing.append("barrier")
    if isolator is not None:
        _take("isolator", isolator, drops, series)
        if isolator.resistance_ohm is None:
            missing.append("resistance ohm of the isolator")
    else:
        if circuit.zener is not None:
            if circuit.zener.resistance_ohm is None and circuit.zener.fixed_drop_v is None:
                missing.append("resistance ohm of the barrier")
            _take("barrier", circuit.zener, drops, series)
        if circuit.card is not None:
            if circuit.card.fixed_drop_v is None and circuit.card.resistance_ohm is None:
                missing.append("fixed drop V of the card")
            _take("card", circuit.card, drops, series)
        elif circuit.card_named:
            missing.append("card")
        else:
            assumed.append("no drop in an output card, as none is listed")
    missing.extend(missing_of_cable(circuit))
    hot_c = data.threshold("ELC hot degC", HOT_C)
    return PullIn(
        coils=tuple(coils),
        missing=tuple(dict.fromkeys(missing)),
        assumed=tuple(assumed),
        assumed_of_coils=tuple(of_coils),
        kindest_v=found_v[0] if found_v else None,
        worst_v=found_v[1] if found_v else None,
        supply_words=found_v[2] if found_v else ("", ""),
        drops=tuple(drops),
        in_series=tuple(series),
        cable=cable_path(circuit),
        cable_words=cable_working(circuit, hot_c),
        hot_c=hot_c,
    )


def _coil(
    name: str, kind: DeviceType | None, data: PlantData, missing: list[str], assumed: dict[str, None]
) -> Coil | None:
    power_w = kind.coil_w if kind is not None else None
    nominal_v = kind.nominal_v if kind is not None else None
    if not power_w or power_w < 0.0:
        missing.append("coil W")
    if not nominal_v or nominal_v < 0.0:
        missing.append("nominal V")
    if kind is None or not power_w or not nominal_v or power_w < 0.0 or nominal_v < 0.0:
        return None
    percent = kind.pull_in_percent
    if percent is None:
        percent = data.threshold("ELC09 pull-in %", PULL_IN_PERCENT)
        assumed[f"a coil pulls in at {percent:g} % of its nominal voltage"] = None
    return Coil(name=name, type_code=kind.code or "row", nominal_v=nominal_v, power_w=power_w, pull_in_percent=percent)


def _take(name: str, entry: DeviceType, drops: list[tuple[str, float]], series: list[tuple[str, float]]) -> None:
    if entry.fixed_drop_v:
        drops.append((name, entry.fixed_drop_v))
    if entry.resistance_ohm:
        series.append((name, entry.resistance_ohm))


_Supply = tuple[float | None, float | None, tuple[str, str]]


def _supply(circuit: Circuit, data: PlantData, missing: list[str], assumed: list[str]) -> _Supply | None:
    """Return the kindest and the lowest supply in V, each with its words; None where nothing is stated of it."""
    isolator = circuit.isolator
    if isolator is not None:
        volts = isolator.nominal_v
        if volts is None:
            missing.append("nominal V of the isolator")
            return None
        return volts, volts, (f"{volts:g} V of isolator {isolator.code}",) * 2
    stated = _stated(circuit)
    if stated.min_v is not None:
        return stated.min_v, stated.min_v, (f"{stated.min_v:g} V lowest supply",) * 2
    if stated.nominal_v is not None:
        percent = data.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
        nominal_v = stated.nominal_v
        assumed.append(f"supply {nominal_v:g} V may be {percent:g} % low")
        lowest_v = nominal_v * (1.0 - percent / 100.0)
        source = circuit.supply_nominal_v.source if circuit.supply_nominal_v else "row"
        of = {"card": f", of the card {circuit.card_named}", "power supply": f", of {circuit.supply_named}"}
        words = f"nominal supply{of.get(source, '')}"
        return nominal_v, lowest_v, (f"{nominal_v:g} V {words}", f"{lowest_v:.6g} V {words} {percent:g} % low")
    missing.append("supply V min")
    if stated.max_v is not None:
        return stated.max_v, None, (f"{stated.max_v:g} V highest supply", "")
    return None


def _stated(circuit: Circuit) -> SupplyWords:
    given = (circuit.supply_min_v, circuit.supply_nominal_v, circuit.supply_max_v)
    if any(each is not None for each in given):
        low, nominal, high = (each.number if each is not None else None for each in given)
        return SupplyWords(low, nominal, high, True)
    # Coils work on 110 and 220 V dc too, which no loop of 4-20 mA does.
    return supply_words(circuit.supply_named) or SupplyWords(None, None, None, None)


def coil_cells(circuit: Circuit) -> tuple[Cell, ...]:
    """Return the cells from which the figures of a solenoid's circuit came, but those of its coil."""
    found: dict[Cell, None] = {}
    for given in (circuit.supply_min_v, circuit.supply_nominal_v, circuit.cable_length_m):
        if given is not None:
            found.update(dict.fromkeys(given.cells))
    for entry in (circuit.barrier, circuit.card if circuit.isolator is None else None):
        if entry is not None:
            for field in ("resistance_ohm", "fixed_drop_v"):
                found.update(dict.fromkeys(entry.cells(field)))
    return tuple(found)
