"""Figures of the trade: common practice, no source."""

import pytest

from instruments.signal import signal_table
from instruments.span import (
    beyond_limit,
    nearest_zero_shift,
    smallest_span,
    turndown,
    usual_over_range,
    within_zero_shift,
)
from loops.power import max_loop_ohm


def test_a_test_resistor_of_2_5_ohm_shows_10_to_50_mv() -> None:
    assert [row.test_mv for row in signal_table(0.0, 100.0)] == [10.0, 20.0, 30.0, 40.0, 50.0]


def test_a_range_resistor_of_250_ohm_shows_1_to_5_v() -> None:
    assert [row.range_v for row in signal_table(0.0, 100.0)] == [1.0, 2.0, 3.0, 4.0, 5.0]


@pytest.mark.parametrize(("supply_v", "ohm"), [(24.0, 630.0), (28.0, 830.0)])
def test_24_v_with_630_ohm_is_a_lift_off_of_11_4_v_at_20_ma(supply_v: float, ohm: float) -> None:
    assert max_loop_ohm(supply_v, 20.0, needed_v=11.4) == pytest.approx(ohm, abs=1e-9)


@pytest.mark.parametrize(
    ("design_bar", "beyond_bar"), [(8.0, 0.0), (20.0, 0.0), (25.0, 5.0)], ids=["operating", "limit", "design"]
)
def test_a_body_of_10_bar_bears_twice_its_upper_limit(design_bar: float, beyond_bar: float) -> None:
    assert beyond_limit(design_bar, None, usual_over_range(10.0)) == beyond_bar


@pytest.mark.parametrize(("maximum", "smallest_bar"), [(3.0, 2.0), (5.0, 1.2)], ids=["3:1", "5:1"])
def test_turndown_of_a_body_of_6_bar(maximum: float, smallest_bar: float) -> None:
    assert smallest_span(0.0, 6.0, maximum_turndown=maximum) == smallest_bar
    assert not beyond_limit(turndown(0.0, 6.0, smallest_bar), None, maximum)
    assert beyond_limit(turndown(0.0, 6.0, smallest_bar * 0.999), None, maximum)


@pytest.mark.parametrize(("lrv_bar", "within"), [(0.9, True), (0.91, False), (-0.9, True), (-0.91, False), (0.0, True)])
def test_zero_shift_of_a_body_of_6_bar_is_15_percent_of_its_upper_limit(lrv_bar: float, within: bool) -> None:
    assert within_zero_shift(lrv_bar, 6.0, 15.0) is within


def test_nearest_lrv_of_a_body_of_6_bar() -> None:
    assert nearest_zero_shift(2.0, 4.0, 6.0, 15.0) == (0.9, 2.9)
    assert nearest_zero_shift(-2.0, 0.0, 6.0, 15.0) == (-0.9, 1.1)
