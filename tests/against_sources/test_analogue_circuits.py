"""Figures of current loops: HART's limits as they were published, and what the trade does with receivers and diodes."""

from typing import Any

import pytest

from loops.budget import lift_off
from loops.hart import LEAST_OHM, LIMIT_US, NF_PER_NUMBER, longest_hart_cable_m, rc_us, series_resistor_ohm, too_slow
from loops.power import volts_at_transmitter
from loops.receiving import parallel_ohm, shift_percent
from validation.example import example_plant, said

# ------------------------------------------------------------------------------------------------------------- HART


def test_hart_needs_230_ohm() -> None:
    """A public training text on a power plant's instruments: 230 ohm at least, point to point."""
    assert LEAST_OHM == 230.0
    assert [series_resistor_ohm(ohm) for ohm in (229.0, 230.0, 250.0)] == [1, 0, 0]


def test_the_range_resistor_of_the_trade_is_enough_and_two_of_them_are_not() -> None:
    """Common practice, no source: 250 ohm; and two of 250 ohm across each other carry no HART."""
    assert series_resistor_ohm(250.0) == 0
    assert parallel_ohm(250.0, 250.0) == 125.0
    assert series_resistor_ohm(125.0) == 105


# From memory; several public excerpts of the HART FSK physical layer (HCF_SPEC-54) agree: the time constant stays below
# 65 microseconds, a capacitance number is 5000 pF.
def test_the_time_constant_of_hart() -> None:
    assert (LIMIT_US, NF_PER_NUMBER) == (65.0, 5.0)
    assert rc_us(250.0, 260.0) == LIMIT_US
    assert too_slow(rc_us(250.0, 260.0))
    assert not too_slow(rc_us(250.0, 259.9))


@pytest.mark.parametrize(
    ("ohm", "pf_per_m", "device_pf", "length_m"),
    [
        # From memory; public excerpts agree: L = 65e6/(R x C) - (Cf + 10000)/C, which leaves out the cable's own ohms.
        (250.0, 200.0, 5000.0, 1225.0),
        (590.0, 200.0, 5000.0, 475.8),
        (250.0, 65.0, 5000.0, 3769.2),
    ],
)
def test_the_length_formula_of_the_guides(ohm: float, pf_per_m: float, device_pf: float, length_m: float) -> None:
    assert 65e6 / (ohm * pf_per_m) - (device_pf + 10000.0) / pf_per_m == pytest.approx(length_m, abs=0.06)
    nf = (device_pf + 10000.0) / 1000.0
    found = longest_hart_cable_m(ohm, nf, ohm_per_m=0.0, nf_per_m=pf_per_m / 1000.0)
    # Below the limit, not at it: the whole metre below.
    assert found is not None
    assert length_m - 1.1 <= found < length_m
    # With its ohms the cable is shorter than the formula says.
    shorter = longest_hart_cable_m(ohm, nf, ohm_per_m=0.0242, nf_per_m=pf_per_m / 1000.0)
    assert shorter is not None
    assert shorter < found


# ------------------------------------------------------------------------------------------------ receivers, diodes

ROWS: list[dict[str, Any]] = [
    {"tag": "PT-7", "device type": "T", "signal": "4-20 mA HART", "wires": 2, "I/O type": "AI", "I/O address": "1"},
    {"tag": "PI-7", "device type": "R", "kind": "indicator", "location": "panel", "signal": "4-20 mA"},
]
LOOP = {"number": "P-7", "circuit or tag": "PT-7", "range resistor": 250, "supply V min": 24, "cable length": 100}


def rules_that_speak(receiver: dict[str, object]) -> list[str]:
    types = [
        {"code": "T", "kind": "transmitter", "lift-off V": 10.5},
        {"code": "R", "kind": "indicator", **receiver},
    ]
    rows = [{**ROWS[0], "conductor size": "1.5 mm2"}, ROWS[1]]
    return [code for code in ("ELC01", "ELC05", "ELC11", "ELC12") if said(code, rows, types=types, loops=[LOOP])]


def test_one_receiver_in_series_and_the_others_across_the_range_resistor() -> None:
    """Common practice, no source: an input that reads volts lies across the resistor, and takes next to nothing."""
    assert rules_that_speak({"input ohm": 1e6}) == []
    assert rules_that_speak({"input ohm": 10_000}) == ["ELC11"]
    assert rules_that_speak({"input ohm": 250}) == ["ELC05", "ELC11"]


def test_a_diode_across_the_indicator_keeps_the_loop() -> None:
    """Common practice, no source: with it the indicator can be taken out, as long as it drops less than the knee."""
    assert rules_that_speak({"resistance ohm": 10, "bypass diode": "yes"}) == []
    assert rules_that_speak({"resistance ohm": 10, "bypass diode": "no"}) == ["ELC12"]
    assert rules_that_speak({"resistance ohm": 50, "bypass diode": "yes"}) == ["ELC12"]


def test_a_diode_drops_0_7_v_when_the_indicator_is_out() -> None:
    """A public page on measuring loop current with a test diode gives 0.7 V."""
    types = [
        {"code": "T", "kind": "transmitter", "lift-off V": 10.5},
        {"code": "R", "kind": "indicator", "resistance ohm": 10, "bypass diode": "yes"},
    ]
    (circuit,) = (plant := example_plant(ROWS, types=types, loops=[LOOP])).circuits
    assert lift_off(circuit, plant.data).fixed_drops == (("diode of PI-7", 0.7),)


@pytest.mark.parametrize(("ohm", "percent"), [(1e6, -0.031), (1e5, -0.312), (1e4, -3.05)])
def test_what_inputs_across_250_ohm_take(ohm: float, percent: float) -> None:
    """Computed: 250 R/(250 + R) against 250 ohm, at 20 mA, in % of 16 mA."""
    assert shift_percent(250.0, parallel_ohm(250.0, ohm)) == pytest.approx(percent, abs=1.5e-3)


@pytest.mark.parametrize(("ma", "volts"), [(4.0, 25.0), (20.0, 21.0)])
def test_26_v_and_250_ohm_leave_25_and_21_v(ma: float, volts: float) -> None:
    """A public forum's measurement on a working loop."""
    assert volts_at_transmitter(26.0, ma, [("receiver", 250.0)]) == volts
