"""The voltage budget of a two-wire transmitter: what reaches its terminals, and what would make it enough."""

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from instruments.signal import FAILURE_LOW_MA, MEASUREMENT_MAX_MA
from instruments.span import SLACK
from loops.cable import (
    STANDARD_SIZES_MM2,
    Conductor,
    ResistancePer,
    conductor_ohm_per_km_20c,
    largest_whole,
    longest_m,
    loop_resistance_ohm,
)

# Fail-high current that is commonly configured: a loop that cannot push it shows a failed transmitter as a
# healthy high value (engineering judgement from the limits of NAMUR NE 43).
HIGH_ALARM_MA: Final = 22.0
LOW_FAILURE_MA: Final = MEASUREMENT_MAX_MA
NOMINAL_MA: Final = 20.0
LOWEST_MA: Final = FAILURE_LOW_MA

Resistances = Sequence[tuple[str, float]]
"""Names and ohms of what lies in series, cable included."""
FixedDrops = Sequence[tuple[str, float]]
"""Names and volts of what drops the same at any current: diodes, loop-powered indicators."""

_DECIMALS: Final = 3
_MOST_DECIMALS: Final = 9


@dataclass(frozen=True, slots=True, kw_only=True)
class VoltageDrop:
    """One term of a budget; `ohm` is None for a drop that does not grow with the current."""

    name: str
    ohm: float | None
    drop_v: float


@dataclass(frozen=True, slots=True, kw_only=True)
class VoltageBudget:
    """What a supply leaves at a transmitter's terminals, against what it needs there.

    `margin_v` is negative when it falls short, and exactly 0.0 within the slack of 1e-9.
    """

    supply_v: float
    current_ma: float
    terms: tuple[VoltageDrop, ...]
    at_terminals_v: float
    needed_v: float
    margin_v: float

    @property
    def passes(self) -> bool:
        """Whether the transmitter has what it needs; a margin of exactly nothing is enough."""
        return self.margin_v >= 0.0

    @property
    def working(self) -> str:
        """The formula with its figures."""
        return _working(self, limit_v=self.needed_v, limit_word="needed", shortfall="short by")


@dataclass(frozen=True, slots=True, kw_only=True)
class OverVoltage:
    """The highest voltage at a transmitter's terminals, against what it bears; `margin_v` as in a budget."""

    supply_v: float
    current_ma: float
    terms: tuple[VoltageDrop, ...]
    at_terminals_v: float
    allowed_v: float
    margin_v: float

    @property
    def passes(self) -> bool:
        """Whether the transmitter bears it."""
        return self.margin_v >= 0.0

    @property
    def working(self) -> str:
        """The formula with its figures."""
        return _working(self, limit_v=self.allowed_v, limit_word="allowed", shortfall="over by")


def check_current_ma(
    failure_direction: str | None,
    high_alarm_ma: float | None,
    *,
    default_high_ma: float = HIGH_ALARM_MA,
    low_ma: float = LOW_FAILURE_MA,
) -> float:
    """Current in mA at which the supply must still be enough.

    Parameters
    ----------
    failure_direction : {"high", "low"} or None
        Where the signal goes on a failure; None, not stated, counts as high.
    high_alarm_ma : float or None
        High-alarm current that the transmitter declares.
    default_high_ma : float
        Used where it declares none.
    low_ma : float
        Highest measurement current (NAMUR NE 43), for a signal that fails low.

    >>> check_current_ma(None, None), check_current_ma("high", 21.6), check_current_ma("low", 21.6)
    (22.0, 21.6, 20.5)
    """
    if failure_direction == "low":
        return low_ma
    return default_high_ma if high_alarm_ma is None else high_alarm_ma


def stated_volts(stated: Sequence[tuple[float, float | None]], current_ma: float) -> float | None:
    """Volts that an isolator states for a current; None where it states none for exactly that one.

    Parameters
    ----------
    stated : sequence of (float, float or None)
        Currents in mA, each with the volts available at it.
    current_ma : float
        The current asked for. Volts do not count at another current.

    >>> stated_volts([(20.0, 15.0), (22.0, None)], 20.0), stated_volts([(20.0, 15.0)], 22.0)
    (15.0, None)
    """
    for ma, volts in stated:
        if volts is not None and math.isclose(ma, current_ma, rel_tol=SLACK):
            return volts
    return None


def volts_at_transmitter(
    supply_v: float, current_ma: float, resistances: Resistances = (), fixed_drops: FixedDrops = ()
) -> float:
    """Volts that reach a two-wire transmitter's terminals at a current.

    Parameters
    ----------
    supply_v : float
        Supply in V; of an isolator, the volts it makes available at this current, and then only what
        lies on its field side is in series.
    current_ma : float
        Loop current in mA.
    resistances : sequence of (str, float)
        Name and ohms of everything in series.
    fixed_drops : sequence of (str, float)
        Name and volts of what drops the same at any current.

    >>> volts_at_transmitter(26.0, 4.0, [("receiver", 250.0)])
    25.0
    """
    loop_ohm = math.fsum(ohm for _, ohm in resistances)
    return supply_v - loop_ohm * current_ma / 1000.0 - math.fsum(volts for _, volts in fixed_drops)


def voltage_budget(
    supply_v: float,
    current_ma: float,
    *,
    needed_v: float,
    resistances: Resistances = (),
    fixed_drops: FixedDrops = (),
) -> VoltageBudget:
    """Compare what reaches a transmitter with its lift-off voltage.

    Parameters
    ----------
    supply_v, current_ma, resistances, fixed_drops
        As for `volts_at_transmitter`; the supply at its lowest, the cable hot.
    needed_v : float
        Lift-off voltage of the transmitter at this current, in V.

    >>> voltage_budget(24.0, 22.0, needed_v=10.5, resistances=[("all", 614.2)]).working
    '24.0 V - 22 mA x 614.2 ohm = 10.488 V at the terminals, 10.5 V needed, short by 0.012 V'
    """
    at_terminals_v = volts_at_transmitter(supply_v, current_ma, resistances, fixed_drops)
    return VoltageBudget(
        supply_v=supply_v,
        current_ma=current_ma,
        terms=_terms(current_ma, resistances, fixed_drops),
        at_terminals_v=at_terminals_v,
        needed_v=needed_v,
        margin_v=_margin(at_terminals_v, needed_v, scale=supply_v),
    )


def over_voltage(
    supply_v: float,
    *,
    allowed_v: float,
    current_ma: float = LOWEST_MA,
    resistances: Resistances = (),
    fixed_drops: FixedDrops = (),
) -> OverVoltage:
    """Compare the highest voltage at a transmitter's terminals with what it bears.

    Parameters
    ----------
    supply_v, current_ma, resistances, fixed_drops
        As for `volts_at_transmitter`; the supply at its highest, the cable cold, the current its lowest:
        at 20 mA the drops would hide the fault.
    allowed_v : float
        Maximum voltage of the transmitter in V.

    >>> over_voltage(36.0, allowed_v=32.0, resistances=[("receiver", 250.0)]).working
    '36.0 V - 3.6 mA x 250 ohm = 35.1 V at the terminals, 32.0 V allowed, over by 3.1 V'
    """
    at_terminals_v = volts_at_transmitter(supply_v, current_ma, resistances, fixed_drops)
    return OverVoltage(
        supply_v=supply_v,
        current_ma=current_ma,
        terms=_terms(current_ma, resistances, fixed_drops),
        at_terminals_v=at_terminals_v,
        allowed_v=allowed_v,
        margin_v=_margin(allowed_v, at_terminals_v, scale=supply_v),
    )


def max_loop_ohm(supply_v: float, current_ma: float, *, needed_v: float, fixed_v: float = 0.0) -> float | None:
    """Largest resistance in ohm that a loop may have at a current; None where the supply alone falls short.

    Parameters
    ----------
    supply_v, needed_v, fixed_v : float
        Supply, lift-off voltage and the sum of the fixed drops, in V.
    current_ma : float
        Loop current in mA.

    >>> round(max_loop_ohm(24.0, 22.0, needed_v=10.5), 1), max_loop_ohm(10.0, 22.0, needed_v=10.5)
    (613.6, None)
    """
    left_v = _margin(supply_v, fixed_v + needed_v, scale=supply_v)
    return None if left_v < 0.0 else left_v / (current_ma / 1000.0)


def longest_cable_m(
    supply_v: float,
    current_ma: float,
    *,
    needed_v: float,
    ohm_per_km_20c: float,
    conductor_c: float,
    per: ResistancePer = "conductor",
    resistances: Resistances = (),
    fixed_drops: FixedDrops = (),
) -> int | None:
    """Longest cable in whole metres with which a transmitter still has its lift-off voltage.

    One metre more falls short, up to the 100 km that no loop has.

    Parameters
    ----------
    supply_v, current_ma, needed_v, fixed_drops
        As for `voltage_budget`.
    ohm_per_km_20c, conductor_c, per
        As for `loops.cable.loop_resistance_ohm`.
    resistances : sequence of (str, float)
        Everything in series but the cable.

    Returns
    -------
    int or None
        None where the transmitter falls short with no cable at all.

    >>> longest_cable_m(24.0, 22.0, needed_v=10.5, ohm_per_km_20c=12.1, conductor_c=20.0,
    ...                 resistances=[("barrier", 340.0), ("receiver", 250.0)])
    976
    """

    def passes(length_m: int) -> bool:
        ohm = loop_resistance_ohm(length_m, ohm_per_km_20c, conductor_c=conductor_c, per=per)
        at_terminals_v = volts_at_transmitter(supply_v, current_ma, (*resistances, ("cable", ohm)), fixed_drops)
        return _margin(at_terminals_v, needed_v, scale=supply_v) >= 0.0

    return longest_m(passes)


def smallest_conductor(
    supply_v: float,
    current_ma: float,
    *,
    needed_v: float,
    length_m: float,
    conductor_c: float,
    sizes_mm2: Sequence[float] = STANDARD_SIZES_MM2,
    conductor_class: int = 2,
    tinned: bool = False,
    resistances: Resistances = (),
    fixed_drops: FixedDrops = (),
) -> float | None:
    """Smallest conductor of a series, in mm2, with which a transmitter has its lift-off voltage.

    Parameters
    ----------
    supply_v, current_ma, needed_v, fixed_drops
        As for `voltage_budget`.
    length_m, conductor_c : float
        Length of the cable, one way, in m, and temperature of its conductors in degC.
    sizes_mm2 : sequence of float
        Sizes to choose from; one that IEC 60228's table does not hold is passed over.
    conductor_class, tinned
        As in `loops.cable.Conductor`.
    resistances : sequence of (str, float)
        Everything in series but the cable.

    Returns
    -------
    float or None
        None where none of them does.

    >>> smallest_conductor(24.0, 22.0, needed_v=10.5, length_m=1000.0, conductor_c=20.0,
    ...                    resistances=[("barrier", 340.0), ("receiver", 250.0)])
    2.5
    """
    for size_mm2 in sorted(sizes_mm2):
        conductor = Conductor(size_mm2=size_mm2, conductor_class=conductor_class, tinned=tinned)
        ohm_per_km = conductor_ohm_per_km_20c(conductor)
        if ohm_per_km is None:
            continue
        ohm = loop_resistance_ohm(length_m, ohm_per_km, conductor_c=conductor_c)
        at_terminals_v = volts_at_transmitter(supply_v, current_ma, (*resistances, ("cable", ohm)), fixed_drops)
        if _margin(at_terminals_v, needed_v, scale=supply_v) >= 0.0:
            return size_mm2
    return None


def least_supply_v(
    current_ma: float, *, needed_v: float, resistances: Resistances = (), fixed_drops: FixedDrops = ()
) -> float:
    """Least supply, to the next 0.1 V, that gives a transmitter its lift-off voltage.

    Parameters
    ----------
    current_ma, needed_v, resistances, fixed_drops
        As for `voltage_budget`.

    >>> least_supply_v(22.0, needed_v=10.5, resistances=[("all", 614.2)])
    24.1
    """

    drops_v = -volts_at_transmitter(0.0, current_ma, resistances, fixed_drops)

    def falls_short(tenths: int) -> bool:
        return _margin(tenths / 10.0 - drops_v, needed_v, scale=tenths / 10.0) < 0.0

    short = largest_whole(_tenths_above(needed_v + drops_v), falls_short)
    return 0.0 if short is None else (short + 1) / 10.0


def highest_supply_v(
    *,
    allowed_v: float,
    current_ma: float = LOWEST_MA,
    resistances: Resistances = (),
    fixed_drops: FixedDrops = (),
) -> float:
    """Highest supply, down to the next 0.1 V, that keeps a transmitter at or below its maximum voltage.

    Parameters
    ----------
    allowed_v, current_ma, resistances, fixed_drops
        As for `over_voltage`.

    >>> highest_supply_v(allowed_v=32.0, resistances=[("receiver", 250.0)])
    32.9
    """

    drops_v = -volts_at_transmitter(0.0, current_ma, resistances, fixed_drops)

    def borne(tenths: int) -> bool:
        return _margin(allowed_v, tenths / 10.0 - drops_v, scale=tenths / 10.0) >= 0.0

    return (largest_whole(_tenths_above(allowed_v + drops_v), borne) or 0) / 10.0


def _tenths_above(volts: float) -> int:
    """Tenths of a volt that are surely more than `volts`, slack included."""
    return math.floor(volts * 10.0 * (1.0 + 2.0 * SLACK)) + 1


def _terms(current_ma: float, resistances: Resistances, fixed_drops: FixedDrops) -> tuple[VoltageDrop, ...]:
    return (
        *(VoltageDrop(name=name, ohm=ohm, drop_v=ohm * current_ma / 1000.0) for name, ohm in resistances),
        *(VoltageDrop(name=name, ohm=None, drop_v=volts) for name, volts in fixed_drops),
    )


def _margin(upper_v: float, lower_v: float, *, scale: float) -> float:
    margin_v = upper_v - lower_v
    return 0.0 if abs(margin_v) <= SLACK * max(abs(upper_v), abs(lower_v), abs(scale)) else margin_v


def _working(budget: VoltageBudget | OverVoltage, *, limit_v: float, limit_word: str, shortfall: str) -> str:
    """Formula with its figures, to as many decimals as it takes to show a shortfall."""
    margin_v = budget.margin_v
    decimals = _DECIMALS
    while margin_v and decimals < _MOST_DECIMALS and not float(f"{margin_v:.{decimals}f}"):
        decimals += 1

    def volts(value: float) -> str:
        shown = f"{value:.{decimals}f}".rstrip("0")
        return shown + "0" if shown.endswith(".") else shown

    def bare(value: float) -> str:
        return f"{value:.{decimals}f}".rstrip("0").rstrip(".")

    loop_ohm = math.fsum(term.ohm for term in budget.terms if term.ohm is not None)
    fixed = "".join(f" - {volts(term.drop_v)} V" for term in budget.terms if term.ohm is None)
    verdict = f"{shortfall} {volts(-margin_v)} V" if margin_v < 0.0 else f"margin {volts(margin_v)} V"
    return (
        f"{volts(budget.supply_v)} V - {bare(budget.current_ma)} mA x {bare(loop_ohm)} ohm{fixed}"
        f" = {volts(budget.at_terminals_v)} V at the terminals, {volts(limit_v)} V {limit_word}, {verdict}"
    )
