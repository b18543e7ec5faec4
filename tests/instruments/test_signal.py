"""The 4-20 mA signal: percent, current, square root, NAMUR NE 43 bands, the check table."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.signal import (
    Ne43Band,
    SignalPoint,
    carries_measurement,
    classify_ma,
    dp_percent_from_flow_percent,
    error_percent_of_span,
    flow_for_dp,
    flow_percent_from_dp_percent,
    ma_for_value,
    ma_from_percent,
    percent_from_ma,
    signal_table,
    value_for_ma,
)

RANGE_END = st.floats(-1e4, 1e4)


@pytest.mark.parametrize(
    ("percent", "ma"),
    [
        (-2.5, 3.6),
        (-1.25, 3.8),
        (0.0, 4.0),
        (25.0, 8.0),
        (50.0, 12.0),
        (75.0, 16.0),
        (100.0, 20.0),
        (103.125, 20.5),
        (106.25, 21.0),
        (112.5, 22.0),
        (118.75, 23.0),
    ],
)
def test_percent_and_current_are_inverses(percent: float, ma: float) -> None:
    assert ma_from_percent(percent) == pytest.approx(ma, rel=1e-12)
    assert percent_from_ma(ma) == pytest.approx(percent, rel=1e-12, abs=1e-12)


@pytest.mark.parametrize(
    ("ma", "band"),
    [
        (0.0, Ne43Band.FAILURE_LOW),
        (3.6, Ne43Band.FAILURE_LOW),
        (3.6 * (1 + 1e-12), Ne43Band.FAILURE_LOW),
        (3.6001, Ne43Band.UNDEFINED_LOW),
        (3.7999, Ne43Band.UNDEFINED_LOW),
        (3.8, Ne43Band.UNDER_RANGE),
        (3.8 * (1 - 1e-12), Ne43Band.UNDER_RANGE),
        (3.9999, Ne43Band.UNDER_RANGE),
        (4.0, Ne43Band.NORMAL),
        (20.0, Ne43Band.NORMAL),
        (20.0001, Ne43Band.OVER_RANGE),
        (20.5, Ne43Band.OVER_RANGE),
        (20.5 * (1 + 1e-12), Ne43Band.OVER_RANGE),
        (20.5001, Ne43Band.UNDEFINED_HIGH),
        (20.9999, Ne43Band.UNDEFINED_HIGH),
        (21.0, Ne43Band.FAILURE_HIGH),
        (21.0 * (1 - 1e-12), Ne43Band.FAILURE_HIGH),
        (23.0, Ne43Band.FAILURE_HIGH),
    ],
)
def test_bands_and_their_ends(ma: float, band: Ne43Band) -> None:
    assert classify_ma(ma) is band


@pytest.mark.parametrize(
    ("ma", "reachable"),
    [(3.79, False), (3.8, True), (4.0, True), (20.32, True), (20.5, True), (20.51, False), (21.0, False)],
)
def test_a_transmitter_reports_inside_3_8_to_20_5_ma(ma: float, reachable: bool) -> None:
    assert carries_measurement(ma) is reachable


@pytest.mark.parametrize(
    ("value", "lrv", "urv", "square_root", "ma"),
    [
        (25.0, 0.0, 100.0, False, 8.0),
        (25.0, 0.0, 100.0, True, 12.0),
        (0.36, 0.0, 100.0, True, 4.96),
        (102.0, 0.0, 100.0, False, 20.32),
        (-56.5, -84.0, -29.0, False, 12.0),
        (0.0, 10.0, 0.0, False, 20.0),
        (2.5, 10.0, 0.0, False, 16.0),
        (12.0, 10.0, 0.0, False, 0.8),
        (-1.0, 0.0, 100.0, True, 2.4),
    ],
    ids=str,
)
def test_current_for_a_value(value: float, lrv: float, urv: float, square_root: bool, ma: float) -> None:
    assert ma_for_value(value, lrv, urv, square_root=square_root) == pytest.approx(ma, rel=1e-12)


def test_the_root_taken_twice_reads_wrong() -> None:
    once = ma_for_value(25.0, 0.0, 100.0, square_root=True)
    twice = ma_for_value(percent_from_ma(once), 0.0, 100.0, square_root=True)
    assert (once, round(twice, 3)) == (12.0, 15.314)


def test_a_range_without_span_gives_no_current() -> None:
    with pytest.raises(ValueError, match="no span"):
        ma_for_value(1.0, 5.0, 5.0)


def test_doubling_the_differential_pressure_gives_root_two_of_the_flow() -> None:
    flow = flow_for_dp(200.0, dp_full_scale=100.0, flow_full_scale=100.0)
    assert flow == pytest.approx(100.0 * math.sqrt(2.0), rel=1e-12)
    with pytest.raises(ValueError, match="above zero"):
        flow_for_dp(1.0, dp_full_scale=0.0, flow_full_scale=1.0)


@pytest.mark.parametrize(
    ("tolerance", "passes"), [(0.49, False), (0.501, True)], ids=["below the error", "above the error"]
)
def test_error_is_of_the_16_ma_span_not_of_20(tolerance: float, passes: bool) -> None:
    error = error_percent_of_span(12.08, 12.0)
    assert error == pytest.approx(0.5, rel=1e-9)
    assert (abs(error) <= tolerance) is passes


def _rows(table: tuple[SignalPoint, ...]) -> list[tuple[float, float, float, float | None, float | None]]:
    return [(row.percent, row.input_value, row.ma, row.range_v, row.test_mv) for row in table]


@pytest.mark.parametrize(
    ("lrv", "urv", "square_root", "inputs"),
    [
        (0.0, 10.0, False, [0.0, 2.5, 5.0, 7.5, 10.0]),
        (-84.0, -29.0, False, [-84.0, -70.25, -56.5, -42.75, -29.0]),
        (10.0, 0.0, False, [10.0, 7.5, 5.0, 2.5, 0.0]),
        (0.0, 400.0, True, [0.0, 25.0, 100.0, 225.0, 400.0]),
    ],
    ids=["plain", "wet leg", "reverse", "square root"],
)
def test_table(lrv: float, urv: float, square_root: bool, inputs: list[float]) -> None:
    meters = [(0.0, 4.0, 1.0, 10.0), (25.0, 8.0, 2.0, 20.0), (50.0, 12.0, 3.0, 30.0)]
    meters += [(75.0, 16.0, 4.0, 40.0), (100.0, 20.0, 5.0, 50.0)]
    expected = [(percent, x, *shown) for x, (percent, *shown) in zip(inputs, meters, strict=True)]
    assert _rows(signal_table(lrv, urv, square_root=square_root)) == expected


def test_table_with_other_resistors_and_with_none() -> None:
    table = signal_table(0.0, 1.0, resistor_ohm=100.0, test_ohm=10.0)
    assert [(row.range_v, row.test_mv) for row in table] == [
        (0.4, 40.0),
        (0.8, 80.0),
        (1.2, 120.0),
        (1.6, 160.0),
        (2.0, 200.0),
    ]
    bare = signal_table(0.0, 1.0, resistor_ohm=None, test_ohm=None)
    assert [(row.range_v, row.test_mv) for row in bare] == [(None, None)] * 5


@given(st.floats(-50.0, 150.0))
def test_square_root_and_square_are_inverses(percent: float) -> None:
    assert dp_percent_from_flow_percent(flow_percent_from_dp_percent(percent)) == pytest.approx(
        percent, rel=1e-12, abs=1e-12
    )


@given(RANGE_END, RANGE_END, st.floats(0.0, 1.0), st.booleans())
def test_value_and_current_are_inverses(lrv: float, urv: float, fraction: float, square_root: bool) -> None:
    if abs(urv - lrv) < 1e-2:
        return
    value = lrv + fraction * (urv - lrv)
    ma = ma_for_value(value, lrv, urv, square_root=square_root)
    assert value_for_ma(ma, lrv, urv, square_root=square_root) == pytest.approx(value, rel=1e-9, abs=1e-7)


@given(RANGE_END, RANGE_END, st.booleans())
def test_table_ends_on_the_range_itself(lrv: float, urv: float, square_root: bool) -> None:
    table = signal_table(lrv, urv, square_root=square_root)
    assert (table[0].input_value, table[-1].input_value) == (lrv, urv)
