"""The current signal against NAMUR NE 43, published loop voltages and a published square-root table."""

import pytest

from instruments.signal import (
    Ne43Band,
    classify_ma,
    flow_percent_from_dp_percent,
    ma_for_value,
    ma_from_percent,
    percent_from_ma,
)
from loops.power import volts_at_transmitter


# NAMUR NE 43 as public articles on it give its limits: measurement 3.8 to 20.5 mA, failure at or below 3.6
# and at or above 21 mA. Between them nothing is defined.
@pytest.mark.parametrize(
    ("ma", "percent", "failure", "measurement"),
    [
        (3.6, -2.5, True, False),
        (3.7, -1.875, False, False),
        (3.8, -1.25, False, True),
        (4.0, 0.0, False, True),
        (20.0, 100.0, False, True),
        (20.5, 103.125, False, True),
        (20.75, 104.6875, False, False),
        (21.0, 106.25, True, False),
    ],
)
def test_namur_ne_43(ma: float, percent: float, failure: bool, measurement: bool) -> None:
    assert percent_from_ma(ma) == pytest.approx(percent, abs=1e-9)
    band = classify_ma(ma)
    assert (band in (Ne43Band.FAILURE_LOW, Ne43Band.FAILURE_HIGH)) is failure
    assert (band in (Ne43Band.UNDER_RANGE, Ne43Band.NORMAL, Ne43Band.OVER_RANGE)) is measurement


# Square root of a differential pressure, in the transmitter (i = 4 + 16 sqrt(dp)) and after a linear one
# (i = 4 + 4 sqrt(i_lin - 4)): published in a control engineers' journal and on an instrumentation tutorial.
@pytest.mark.parametrize(
    ("dp_percent", "flow_percent", "linear_ma", "root_ma"),
    [
        (0.0, 0.0, 4.0, 4.0),
        (0.36, 6.0, 4.0576, 4.960),
        (1.0, 10.0, 4.16, 5.600),
        (4.0, 20.0, 4.64, 7.200),
        (6.25, 25.0, 5.00, 8.000),
        (25.0, 50.0, 8.00, 12.000),
        (50.0, 70.711, 12.00, 15.314),
        (75.0, 86.603, 16.00, 17.856),
        (100.0, 100.0, 20.00, 20.000),
    ],
)
def test_square_root_table(dp_percent: float, flow_percent: float, linear_ma: float, root_ma: float) -> None:
    assert flow_percent_from_dp_percent(dp_percent) == pytest.approx(flow_percent, abs=5.1e-4)
    assert ma_from_percent(dp_percent) == pytest.approx(linear_ma, abs=1e-9)
    found = ma_for_value(dp_percent, 0.0, 100.0, square_root=True)
    assert found == pytest.approx(root_ma, abs=5.1e-4)
    assert found == pytest.approx(4.0 + 4.0 * (linear_ma - 4.0) ** 0.5, abs=1e-6)


# Measured in an automation forum's thread on faultfinding by voltage: 26 V supply, 250 ohm in the loop.
@pytest.mark.parametrize(("ma", "at_transmitter_v", "across_resistor_v"), [(4.0, 25.0, 1.0), (20.0, 21.0, 5.0)])
def test_published_loop_voltages(ma: float, at_transmitter_v: float, across_resistor_v: float) -> None:
    found = volts_at_transmitter(26.0, ma, [("receiver", 250.0)])
    assert found == pytest.approx(at_transmitter_v, abs=1e-9)
    assert 26.0 - found == pytest.approx(across_resistor_v, abs=1e-9)
