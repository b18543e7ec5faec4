"""The calibrated range and the body that holds it: span, turndown, zero shift, the range that would fit."""

import math
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final

SLACK: Final = 1e-9
"""Relative slack of every comparison with a limit: (0.3 - 0.1) / 0.2 is 0.9999999999999999, not a fault."""

PREFERRED_SERIES: Final = (1.0, 1.6, 2.5, 4.0, 6.0)
"""Upper range values in each decade (the ranges of pressure gauges, EN 837-1, from memory)."""


def span(lrv: float, urv: float) -> float:
    """Span of a calibrated range: the absolute difference, so that reverse ranges have one too.

    >>> span(-84.0, -29.0), span(-25.0, 100.0), span(10.0, 0.0)
    (55.0, 125.0, 10.0)
    """
    return abs(urv - lrv)


def turndown(lrl: float, url: float, span: float) -> float:
    """Turndown of a body at a span: the larger of abs(LRL) and abs(URL), over the span.

    Parameters
    ----------
    lrl, url, span : float
        Lower and upper limit of the body and the calibrated span, in one unit.

    Raises
    ------
    ValueError
        The span is zero.

    >>> turndown(0.0, 500.0, 100.0), turndown(-60.0, 60.0, 20.0)
    (5.0, 3.0)
    """
    if span == 0.0:
        raise ValueError("the range has no span")
    return max(abs(lrl), abs(url)) / abs(span)


def above(value: float, limit: float, *, scale: float = 0.0) -> bool:
    """Whether a value is above a limit by more than the slack.

    Parameters
    ----------
    value, limit : float
        In one unit.
    scale : float
        A size in the same unit for limits at or near zero, where a relative slack alone is nothing.

    >>> above(10.0000001, 10.0), above(0.1 + 0.2, 0.3)
    (True, False)
    """
    return value - limit > SLACK * max(abs(value), abs(limit), abs(scale))


def below(value: float, limit: float, *, scale: float = 0.0) -> bool:
    """Whether a value is below a limit by more than the slack; parameters as for `above`.

    >>> below(9.9999999, 10.0), below(0.3, 0.1 + 0.2)
    (True, False)
    """
    return above(limit, value, scale=scale)


def beyond_limit(value: float, lower: float | None, upper: float | None) -> float:
    """How far a value lies beyond a pair of limits.

    Parameters
    ----------
    value : float
        The value.
    lower, upper : float or None
        The limits in the value's unit; None is a limit that is not stated and not compared.

    Returns
    -------
    float
        Positive above the upper limit, negative below the lower, 0.0 inside or within the slack
        (1e-9 of the largest figure involved).

    >>> beyond_limit(-84.0, -60.0, 60.0), beyond_limit(-29.0, -60.0, 60.0), beyond_limit(12.0, None, 10.0)
    (-24.0, 0.0, 2.0)
    """
    scale = max(abs(lower or 0.0), abs(upper or 0.0))
    if upper is not None and above(value, upper, scale=scale):
        return value - upper
    if lower is not None and below(value, lower, scale=scale):
        return value - lower
    return 0.0


def percent_of_span(value: float, lrv: float, urv: float) -> float:
    """Where a value stands in a calibrated range, 0 % at LRV and 100 % at URV, reverse ranges included.

    Raises
    ------
    ValueError
        LRV equals URV.

    >>> percent_of_span(-70.25, -84.0, -29.0), percent_of_span(2.5, 10.0, 0.0)
    (25.0, 75.0)
    """
    if lrv == urv:
        raise ValueError("LRV equals URV: the range has no span")
    return 100.0 * (value - lrv) / (urv - lrv)


def _without_noise(lrv: float, urv: float) -> tuple[float, float]:
    """Clear a proposed range of the rounding of a subtraction, at 1e-11 of its span: far inside the slack."""
    digits = 11 - math.floor(math.log10(span(lrv, urv)))
    return round(lrv, digits) + 0.0, round(urv, digits) + 0.0  # + 0.0 turns -0.0 into 0.0


def nearest_range_inside(
    lrv: float, urv: float, lrl: float, url: float, *, hold_zero: bool = False
) -> tuple[float, float]:
    """Range nearest to the one asked for that a body holds.

    The span is kept and shifted where it fits; a range too wide for the body is cut at its limits;
    one that lies wholly outside and is too wide becomes the body's whole range. The direction of a
    reverse range is kept.

    Parameters
    ----------
    lrv, urv : float
        The range asked for.
    lrl, url : float
        Limits of the body, in the same unit.
    hold_zero : bool
        An end of the range at zero stays there and the other end is cut: a square root needs LRV 0.

    Returns
    -------
    tuple of float
        LRV and URV.

    Raises
    ------
    ValueError
        LRL is not below URL.

    >>> nearest_range_inside(-84.0, -29.0, -60.0, 60.0)
    (-60.0, -5.0)
    >>> nearest_range_inside(0.0, 16.0, -1.0, 10.0)
    (0.0, 10.0)
    """
    if lrl >= url:
        raise ValueError("LRL is not below URL")
    reverse = lrv > urv
    low, high = min(lrv, urv), max(lrv, urv)
    if not beyond_limit(low, lrl, url) and not beyond_limit(high, lrl, url):
        return lrv, urv
    keeps_zero = hold_zero and 0.0 in (low, high) and lrl <= 0.0 <= url
    if high - low <= (url - lrl) * (1.0 + SLACK) and not keeps_zero:
        if high > url:
            low, high = max(lrl, url - (high - low)), url
        else:
            low, high = lrl, min(url, lrl + (high - low))
    else:
        low, high = max(low, lrl), min(high, url)
        if low >= high:
            low, high = lrl, url
    return _without_noise(high, low) if reverse else _without_noise(low, high)


def smallest_span(
    lrl: float, url: float, *, maximum_turndown: float | None = None, minimum_span: float | None = None
) -> float | None:
    """Smallest span a body may be set to; None where neither of its limits is stated.

    Parameters
    ----------
    lrl, url : float
        Limits of the body.
    maximum_turndown : float or None
        Largest turndown allowed, as 5.0 for 5:1.
    minimum_span : float or None
        Minimum span that the body states, in the unit of its limits.

    Raises
    ------
    ValueError
        The turndown is not above zero.

    >>> smallest_span(0.0, 6.0, maximum_turndown=3.0), smallest_span(0.0, 6.0, maximum_turndown=5.0)
    (2.0, 1.2)
    """
    if maximum_turndown is not None and maximum_turndown <= 0.0:
        raise ValueError("a turndown must be above zero")
    stated = [] if minimum_span is None else [abs(minimum_span)]
    if maximum_turndown is not None:
        stated.append(max(abs(lrl), abs(url)) / maximum_turndown)
    return max(stated, default=None)


def range_with_span(lrv: float, urv: float, *, at_least: float, lrl: float, url: float) -> tuple[float, float] | None:
    """Range widened to a span, LRV kept where the body allows it; None where the body is too small.

    Parameters
    ----------
    lrv, urv : float
        The range that is too narrow.
    at_least : float
        The span it must have.
    lrl, url : float
        Limits of the body, in the same unit.

    >>> range_with_span(50.0, 90.0, at_least=50.0, lrl=0.0, url=1000.0)
    (50.0, 100.0)
    >>> range_with_span(960.0, 1000.0, at_least=50.0, lrl=0.0, url=1000.0)
    (950.0, 1000.0)
    """
    if above(at_least, url - lrl):
        return None
    if not below(span(lrv, urv), at_least):
        return nearest_range_inside(lrv, urv, lrl, url)
    wider = lrv - at_least if lrv > urv else lrv + at_least
    return nearest_range_inside(*_without_noise(lrv, wider), lrl, url)


def usual_over_range(url: float) -> float:
    """Pressure that a gauge or absolute body usually bears: twice its upper limit.

    Common practice, no source. For comparison only: what a body bears is on its record.

    >>> usual_over_range(10.0)
    20.0
    """
    return 2.0 * abs(url)


def zero_shift_limit(url: float, percent: float) -> float:
    """Largest zero elevation or suppression of a body, from its limit in percent of URL.

    >>> zero_shift_limit(6.0, 15.0)
    0.9
    """
    return abs(url) * percent / 100.0


def within_zero_shift(lrv: float, url: float, percent: float) -> bool:
    """Whether LRV lies within the zero shift that a body allows, up or down.

    Parameters
    ----------
    lrv : float
        Lower range value; of a reverse range, the end that counts as its zero.
    url : float
        Upper limit of the body, in the same unit.
    percent : float
        The body's zero shift limit in percent of URL.

    >>> [within_zero_shift(lrv, 6.0, 15.0) for lrv in (0.9, -0.9, 0.91)]
    [True, True, False]
    """
    return not above(abs(lrv), zero_shift_limit(url, percent), scale=url)


def nearest_zero_shift(lrv: float, urv: float, url: float, percent: float) -> tuple[float, float]:
    """Range of the same span whose LRV is the nearest that a body's zero shift limit allows.

    Parameters
    ----------
    lrv, urv : float
        The range asked for.
    url : float
        Upper limit of the body, in the same unit.
    percent : float
        The body's zero shift limit in percent of URL.

    >>> nearest_zero_shift(2.0, 5.0, 6.0, 15.0), nearest_zero_shift(-1.0, 2.0, 6.0, 15.0)
    ((0.9, 3.9), (-0.9, 2.1))
    """
    if within_zero_shift(lrv, url, percent):
        return lrv, urv
    nearest = math.copysign(zero_shift_limit(url, percent), lrv)
    return _without_noise(nearest, nearest + (urv - lrv))


def _preferred_from(at_least: float) -> Iterator[float]:
    decade = math.floor(math.log10(at_least)) - 1
    while True:
        for step in PREFERRED_SERIES:
            value = float(f"{step}e{decade}")  # exact, where 1.6 * 10 ** -1 is 0.16000000000000003
            if not below(value, at_least):
                yield value
        decade += 1


def preferred_urv(at_least: float, *, at_most: float | None = None) -> float | None:
    """Next upper range value of the series 1, 1.6, 2.5, 4, 6 x 10^n.

    Parameters
    ----------
    at_least : float
        The value that the range must reach, in the unit of the range.
    at_most : float or None
        Upper limit of the body, in the same unit.

    Returns
    -------
    float or None
        None where the series has none up to `at_most`, or where `at_least` is not above zero.

    >>> preferred_urv(11.0), preferred_urv(16.0), preferred_urv(0.17), preferred_urv(11.0, at_most=15.0)
    (16.0, 16.0, 0.25, None)
    """
    if not (at_least > 0.0 and math.isfinite(at_least)):
        return None
    value = next(_preferred_from(at_least))
    if value == math.inf or (at_most is not None and above(value, at_most)):
        return None
    return value


def preferred_urv_for_normal(
    normal: float,
    lrv: float,
    *,
    low_percent: float = 30.0,
    high_percent: float = 75.0,
    at_least: float | None = None,
    at_most: float | None = None,
) -> float | None:
    """Smallest preferred upper range value that puts the normal value well inside the span.

    Parameters
    ----------
    normal, lrv : float
        Normal operating value and lower range value, in the unit of the range.
    low_percent, high_percent : float
        Where in the span the normal value belongs.
    at_least : float or None
        A value that the range must reach besides, such as the operating maximum.
    at_most : float or None
        Upper limit of the body.

    Returns
    -------
    float or None
        None where no value of the series does it.

    >>> preferred_urv_for_normal(6.5, 0.0), preferred_urv_for_normal(6.5, 0.0, at_least=12.0)
    (10.0, 16.0)
    """
    rise = normal - lrv
    if rise <= 0.0:
        return None
    lowest = lrv + 100.0 * rise / high_percent
    highest = math.inf if low_percent <= 0.0 else lrv + 100.0 * rise / low_percent
    value = preferred_urv(lowest if at_least is None else max(lowest, at_least), at_most=at_most)
    return None if value is None or above(value, highest) else value


@dataclass(frozen=True, slots=True, kw_only=True)
class UnitSlip:
    """A wrong unit that would explain operating values outside their range.

    What was meant is what is written x `factor` + `offset`, in the range's unit.
    """

    name: str
    factor: float
    offset: float = 0.0

    def mended(self, value: float) -> float:
        """The operating value as it would be without the slip."""
        return value * self.factor + self.offset


def _both_ways(ratio: float, *, larger: str = "", smaller: str = "") -> tuple[UnitSlip, UnitSlip]:
    multiplied = f" ({larger} written as {smaller})" if larger else ""
    divided = f" ({smaller} written as {larger})" if larger else ""
    return (
        UnitSlip(name=f"x {ratio:g}{multiplied}", factor=ratio),
        UnitSlip(name=f"/ {ratio:g}{divided}", factor=1.0 / ratio),
    )


_DECADE_SLIPS: Final = (*_both_ways(10.0), *_both_ways(100.0), *_both_ways(1000.0))
_PRESSURE_SLIPS: Final = (
    *_both_ways(14.5, larger="bar", smaller="psi"),
    *_both_ways(1.02, larger="bar", smaller="kgf/cm2"),
)
_TEMPERATURE_SLIPS: Final = (
    UnitSlip(name="degF written as degC", factor=1.0 / 1.8, offset=-32.0 / 1.8),
    UnitSlip(name="degC written as degF", factor=1.8, offset=32.0),
)


def unit_slips(
    lrv: float,
    urv: float,
    *,
    normal: float,
    op_min: float | None = None,
    op_max: float | None = None,
    unit_kind: str | None = None,
    low_percent: float = 30.0,
    high_percent: float = 75.0,
) -> tuple[UnitSlip, ...]:
    """Unit slips that would put the operating values inside the range and the normal value well inside.

    Parameters
    ----------
    lrv, urv : float
        Calibrated range.
    normal, op_min, op_max : float or None
        Operating values in the range's unit; a blank minimum or maximum is not compared.
    unit_kind : str or None
        What the unit measures: bar, psi and kgf/cm2 are tried for "pressure", degC and degF for
        "temperature", powers of ten for all.
    low_percent, high_percent : float
        Where in the span the normal value belongs.

    Returns
    -------
    tuple of UnitSlip
        All that fit, in a fixed order; empty where none does.

    >>> [slip.name for slip in unit_slips(0.0, 10.0, normal=600.0, op_max=800.0)]
    ['/ 100']
    >>> [slip.name for slip in unit_slips(0.0, 200.0, normal=212.0, unit_kind="temperature")]
    ['degF written as degC']
    """
    if lrv == urv:
        return ()
    slips: tuple[UnitSlip, ...] = _DECADE_SLIPS
    if unit_kind == "pressure":
        slips += _PRESSURE_SLIPS
    elif unit_kind == "temperature":
        slips += _TEMPERATURE_SLIPS
    low, high = min(lrv, urv), max(lrv, urv)
    given = [value for value in (op_min, normal, op_max) if value is not None]
    fitting = []
    for slip in slips:
        inside = not any(beyond_limit(slip.mended(value), low, high) for value in given)
        stands_at = percent_of_span(slip.mended(normal), lrv, urv)
        if inside and not beyond_limit(stands_at, low_percent, high_percent):
            fitting.append(slip)
    return tuple(fitting)
