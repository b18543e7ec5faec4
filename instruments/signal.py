"""The 4-20 mA signal: what a current means, what a range makes of it, and the table it is checked by."""

import math
from dataclasses import dataclass
from enum import StrEnum
from typing import Final

from instruments.span import SLACK

# IEC 60381-1:1982: direct current signals with a live zero.
LIVE_ZERO_MA: Final = 4.0
FULL_SCALE_MA: Final = 20.0
SIGNAL_SPAN_MA: Final = FULL_SCALE_MA - LIVE_ZERO_MA

# NAMUR NE 43: what a current outside 4..20 mA says.
MEASUREMENT_MIN_MA: Final = 3.8
MEASUREMENT_MAX_MA: Final = 20.5
FAILURE_LOW_MA: Final = 3.6
FAILURE_HIGH_MA: Final = 21.0

# Common practice, no source: 1..5 V across the range resistor, 10..50 mV across the test resistor.
RANGE_RESISTOR_OHM: Final = 250.0
TEST_RESISTOR_OHM: Final = 2.5

TABLE_PERCENT: Final = (0.0, 25.0, 50.0, 75.0, 100.0)


class Ne43Band(StrEnum):
    """The bands into which NAMUR NE 43 divides the current of a transmitter."""

    FAILURE_LOW = "failure, low"
    UNDEFINED_LOW = "undefined, low"
    UNDER_RANGE = "under-range"
    NORMAL = "normal"
    OVER_RANGE = "over-range"
    UNDEFINED_HIGH = "undefined, high"
    FAILURE_HIGH = "failure, high"


# Each band from below: its upper end in mA, whether the end belongs to it, its meaning.
_BANDS: Final = (
    (FAILURE_LOW_MA, True, Ne43Band.FAILURE_LOW),
    (MEASUREMENT_MIN_MA, False, Ne43Band.UNDEFINED_LOW),
    (LIVE_ZERO_MA, False, Ne43Band.UNDER_RANGE),
    (FULL_SCALE_MA, True, Ne43Band.NORMAL),
    (MEASUREMENT_MAX_MA, True, Ne43Band.OVER_RANGE),
    (FAILURE_HIGH_MA, False, Ne43Band.UNDEFINED_HIGH),
)


@dataclass(frozen=True, slots=True, kw_only=True)
class SignalPoint:
    """One row of the check table: output in percent, the input that gives it, and what the meters show."""

    percent: float
    input_value: float
    ma: float
    range_v: float | None
    test_mv: float | None


def ma_from_percent(percent: float) -> float:
    """Current in mA for an output in percent of span (IEC 60381-1).

    >>> ma_from_percent(50.0), ma_from_percent(112.5)
    (12.0, 22.0)
    """
    return LIVE_ZERO_MA + SIGNAL_SPAN_MA * percent / 100.0


def percent_from_ma(ma: float) -> float:
    """Output in percent of span for a current in mA; the span is 16 mA, not 20 (IEC 60381-1).

    >>> percent_from_ma(20.5), percent_from_ma(22.0)
    (103.125, 112.5)
    """
    return (ma - LIVE_ZERO_MA) / SIGNAL_SPAN_MA * 100.0


def error_percent_of_span(reading_ma: float, ideal_ma: float) -> float:
    """Error of a reading in percent of the 16 mA span.

    >>> round(error_percent_of_span(12.08, 12.0), 9)
    0.5
    """
    return (reading_ma - ideal_ma) / SIGNAL_SPAN_MA * 100.0


def classify_ma(ma: float) -> Ne43Band:
    """Say what a current means under NAMUR NE 43.

    Exactly 3.6 and exactly 21.0 mA are failures, exactly 3.8 and 20.5 mA are still measurement; a
    relative slack of 1e-9 takes the rounding of a computed current.

    Parameters
    ----------
    ma : float
        Current in mA.

    >>> [str(classify_ma(ma)) for ma in (3.6, 3.7, 3.8, 20.5, 20.8, 21.0)]
    ['failure, low', 'undefined, low', 'under-range', 'over-range', 'undefined, high', 'failure, high']
    """
    for upper_ma, included, band in _BANDS:
        if ma <= upper_ma * (1.0 + SLACK) if included else ma < upper_ma * (1.0 - SLACK):
            return band
    return Ne43Band.FAILURE_HIGH


def carries_measurement(ma: float) -> bool:
    """Whether the current lies in 3.8..20.5 mA, where NAMUR NE 43 lets a transmitter report a value.

    >>> carries_measurement(20.5), carries_measurement(20.6)
    (True, False)
    """
    return classify_ma(ma) in (Ne43Band.UNDER_RANGE, Ne43Band.NORMAL, Ne43Band.OVER_RANGE)


def flow_percent_from_dp_percent(dp_percent: float) -> float:
    """Flow in percent for a differential pressure in percent, both of their full scale.

    The sign is kept, so that a differential pressure below zero never looks like no flow.

    >>> flow_percent_from_dp_percent(25.0), flow_percent_from_dp_percent(-25.0)
    (50.0, -50.0)
    """
    return math.copysign(math.sqrt(abs(dp_percent) / 100.0) * 100.0, dp_percent)


def dp_percent_from_flow_percent(flow_percent: float) -> float:
    """Differential pressure in percent for a flow in percent, the inverse of the square root.

    >>> dp_percent_from_flow_percent(50.0), dp_percent_from_flow_percent(6.0)
    (25.0, 0.36)
    """
    return math.copysign(flow_percent * flow_percent / 100.0, flow_percent)


def flow_for_dp(dp: float, *, dp_full_scale: float, flow_full_scale: float) -> float:
    """Flow through a head element at a differential pressure: it grows with the square root.

    Parameters
    ----------
    dp, dp_full_scale : float
        Differential pressure and its full scale, in one unit.
    flow_full_scale : float
        Flow at `dp_full_scale`; the result has its unit.

    Raises
    ------
    ValueError
        The full scale is not above zero.

    >>> round(flow_for_dp(200.0, dp_full_scale=100.0, flow_full_scale=100.0), 2)
    141.42
    """
    if dp_full_scale <= 0.0:
        raise ValueError("the full scale of a differential pressure must be above zero")
    return flow_full_scale * flow_percent_from_dp_percent(100.0 * dp / dp_full_scale) / 100.0


def ma_for_value(value: float, lrv: float, urv: float, *, square_root: bool = False) -> float:
    """Current that a transmitter ranged LRV..URV gives for a value, before it saturates.

    Parameters
    ----------
    value, lrv, urv : float
        Measured value and calibrated range, in one unit. LRV above URV is a reverse range.
    square_root : bool
        The transmitter extracts the root of its differential pressure. A value below the range then
        keeps its sign: such a value cannot be told from 4 mA by the root alone, and must not pass
        for one that the signal reaches.

    Raises
    ------
    ValueError
        LRV equals URV.

    >>> ma_for_value(25.0, 0.0, 100.0), ma_for_value(25.0, 0.0, 100.0, square_root=True)
    (8.0, 12.0)
    >>> ma_for_value(2.5, 10.0, 0.0)
    16.0
    """
    if lrv == urv:
        raise ValueError("LRV equals URV: the range has no span")
    percent = 100.0 * (value - lrv) / (urv - lrv)
    return ma_from_percent(flow_percent_from_dp_percent(percent) if square_root else percent)


def value_for_ma(ma: float, lrv: float, urv: float, *, square_root: bool = False) -> float:
    """Value at which a transmitter ranged LRV..URV gives a current: the inverse of `ma_for_value`.

    >>> value_for_ma(12.0, 0.0, 100.0), value_for_ma(12.0, 0.0, 100.0, square_root=True)
    (50.0, 25.0)
    """
    percent = percent_from_ma(ma)
    fraction = (dp_percent_from_flow_percent(percent) if square_root else percent) / 100.0
    # Both ends weighted: at 0 and 100 % the result is LRV and URV themselves, without rounding.
    return lrv * (1.0 - fraction) + urv * fraction


def signal_table(
    lrv: float,
    urv: float,
    *,
    square_root: bool = False,
    resistor_ohm: float | None = RANGE_RESISTOR_OHM,
    test_ohm: float | None = TEST_RESISTOR_OHM,
) -> tuple[SignalPoint, ...]:
    """Table of the 0, 25, 50, 75 and 100 % points of a transmitter's output.

    Parameters
    ----------
    lrv, urv : float
        Calibrated range, in any unit.
    square_root : bool
        The transmitter extracts the root: the percentages are of flow, the inputs of differential
        pressure (50 % flow is 25 % of the differential pressure and 12 mA).
    resistor_ohm, test_ohm : float or None
        Range resistor and test resistor in ohm; None leaves its column blank.

    Returns
    -------
    tuple of SignalPoint
        Output in percent, input in the range's unit, current in mA, volts across the range resistor,
        millivolts across the test resistor.

    >>> for row in signal_table(0.0, 100.0, square_root=True):
    ...     print(row.percent, row.input_value, row.ma, row.range_v, row.test_mv)
    0.0 0.0 4.0 1.0 10.0
    25.0 6.25 8.0 2.0 20.0
    50.0 25.0 12.0 3.0 30.0
    75.0 56.25 16.0 4.0 40.0
    100.0 100.0 20.0 5.0 50.0
    """
    rows = []
    for percent in TABLE_PERCENT:
        ma = ma_from_percent(percent)
        rows.append(
            SignalPoint(
                percent=percent,
                input_value=value_for_ma(ma, lrv, urv, square_root=square_root),
                ma=ma,
                range_v=None if resistor_ohm is None else ma * resistor_ohm / 1000.0,
                test_mv=None if test_ohm is None else ma * test_ohm,
            )
        )
    return tuple(rows)
