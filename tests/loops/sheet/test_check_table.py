"""The check table, against figures worked by hand and printed tables."""

from __future__ import annotations

from typing import Any

import pytest

from loops.sheet.check_table import CheckPoint, CheckTable, check_table, signal_of
from tests.loops.sheet.plants import ORIFICE, RESISTANCE, THERMOCOUPLE, TRANSMITTER, VALVE
from validation.example import example_plant


def table(row: dict[str, Any], **sheets: Any) -> CheckTable:
    plant = example_plant([row], **sheets)
    made = check_table(plant.circuits[0], plant)
    assert made is not None
    return made


def column(made: CheckTable, name: str) -> list[float | None]:
    return [getattr(point, name) for point in made.points]


def test_a_linear_transmitter() -> None:
    made = table(TRANSMITTER, loops=[{"number": "P-101", "circuit or tag": "PT-101", "range resistor": "250"}])
    assert made.points == (
        CheckPoint(percent=0.0, input_value=0.0, ma=4.0, range_v=1.0, test_mv=10.0, reading=0.0),
        CheckPoint(percent=25.0, input_value=2.5, ma=8.0, range_v=2.0, test_mv=20.0, reading=2.5),
        CheckPoint(percent=50.0, input_value=5.0, ma=12.0, range_v=3.0, test_mv=30.0, reading=5.0),
        CheckPoint(percent=75.0, input_value=7.5, ma=16.0, range_v=4.0, test_mv=40.0, reading=7.5),
        CheckPoint(percent=100.0, input_value=10.0, ma=20.0, range_v=5.0, test_mv=50.0, reading=10.0),
    )
    assert (made.law, made.input_unit, made.reading_unit) == ("linear", "barg", "barg")
    assert (made.resistor_ohm, made.resistor_assumed, made.assumed, made.remarks) == (250.0, False, (), ())


def test_a_receiver_that_is_not_given_is_assumed_and_one_of_100_ohm_is_not() -> None:
    made = table(TRANSMITTER)
    assert (made.resistor_ohm, made.resistor_assumed, made.assumed) == (250.0, True, ("receiver 250 ohm",))
    made = table({**TRANSMITTER, "receiver ohm": "100"})
    assert made.resistor_assumed is False
    assert column(made, "range_v") == pytest.approx([0.4, 0.8, 1.2, 1.6, 2.0])


def test_the_plant_s_receiver_counts() -> None:
    assert table(TRANSMITTER, plant={"ELC receiver ohm": "500"}).resistor_ohm == 500.0


def test_a_reverse_range() -> None:
    made = table({**TRANSMITTER, "LRV": "10", "URV": "0"})
    assert column(made, "input_value") == [10.0, 7.5, 5.0, 2.5, 0.0]
    assert column(made, "ma") == [4.0, 8.0, 12.0, 16.0, 20.0]


def test_ends_in_two_units() -> None:
    made = table({**TRANSMITTER, "LRV": "-500 mbarg", "URV": "1.5 barg"})
    assert column(made, "input_value") == pytest.approx([-0.5, 0.0, 0.5, 1.0, 1.5])
    assert made.input_unit == "barg"


def test_the_root_in_the_device() -> None:
    """At half the flow a quarter of the differential pressure and 12 mA."""
    made = table(ORIFICE)
    assert made.law == "square root"
    assert column(made, "input_value") == pytest.approx([0.0, 15.625, 62.5, 140.625, 250.0])
    assert column(made, "ma") == [4.0, 8.0, 12.0, 16.0, 20.0]
    assert column(made, "reading") == [0.0, 25.0, 50.0, 75.0, 100.0]


def test_the_root_in_the_system() -> None:
    """At a quarter of the signal half the flow."""
    made = table({**ORIFICE, "square root in device": "no", "square root in system": "yes"})
    assert made.law == "square root"
    assert column(made, "input_value") == [0.0, 62.5, 125.0, 187.5, 250.0]
    assert column(made, "reading") == pytest.approx([0.0, 50.0, 70.71068, 86.60254, 100.0])


def test_a_flow_range_has_no_root_left_to_take() -> None:
    made = table({**ORIFICE, "LRV": "0", "URV": "100", "range unit": "m3/h"})
    assert made.law == "linear"
    assert column(made, "input_value") == [0.0, 25.0, 50.0, 75.0, 100.0]


def test_a_root_nobody_states_is_an_assumption() -> None:
    made = table({**ORIFICE, "square root in device": "", "square root in system": ""})
    assert made.law == "linear"
    assert "linear: where the square root is taken is not stated" in made.assumed


def test_pt100() -> None:
    """IEC 60751: 100, 119.3971, 138.5055, 157.3251 and 175.8560 ohm at 0, 50, 100, 150 and 200 degC."""
    made = table(RESISTANCE)
    assert column(made, "sensor") == pytest.approx([100.0, 119.3971, 138.5055, 157.3251, 175.8560], abs=5e-5)
    assert column(made, "ma") == [None] * 5
    assert (made.sensor_unit, made.sensor, made.current) == ("ohm", "Pt100, IEC 60751", False)


def test_pt1000_and_fahrenheit() -> None:
    made = table({**RESISTANCE, "signal": "Pt1000", "LRV": "32", "URV": "392", "range unit": "degF"})
    assert column(made, "sensor") == pytest.approx([1000.0, 1193.971, 1385.055, 1573.251, 1758.560], abs=5e-4)
    assert made.input_unit == "°F"


def test_type_k() -> None:
    """IEC 60584-1: 0, 10.153, 20.644, 31.213 and 41.276 mV at 0, 250, 500, 750 and 1000 degC."""
    made = table(THERMOCOUPLE)
    assert column(made, "sensor") == pytest.approx([0.0, 10.153, 20.644, 31.213, 41.276], abs=5e-4)
    # Less the 0.798 mV that type K gives at 20 degC (IEC 60584-1): millivolts are subtracted, never degrees.
    assert column(made, "sensor_warm") == pytest.approx([-0.798, 9.355, 19.846, 30.415, 40.478], abs=1e-3)
    assert made.sensor == "type K, IEC 60584-1, with the terminals at 0 or 20 °C"


@pytest.mark.parametrize(
    ("changes", "remark"),
    [
        ({"URV": "900"}, "IEC 60751 gives no resistance at 900.0 degC"),
        ({"range unit": "barg"}, "the range is no temperature: nothing to inject can be worked"),
        ({"signal": "", "I/O type": "RTD"}, "sensor type not given"),
        ({"LRV": "", "URV": ""}, "range not given"),
    ],
)
def test_what_cannot_be_injected_is_said(changes: dict[str, str], remark: str) -> None:
    made = table({**RESISTANCE, **changes})
    assert remark in made.remarks
    assert None in column(made, "sensor")


@pytest.mark.parametrize(
    ("changes", "remark"),
    [
        ({"LRV": "", "URV": ""}, "range not given"),
        ({"LRV": "5"}, None),
        ({"LRV": "10"}, "the range has no span"),
        ({"URV": ""}, "range not given"),
        ({"signal": "0-20 mA"}, "the signal is 0-20 mA: no currents"),
        ({"signal": "Profibus PA"}, "the signal is Profibus PA: no currents"),
    ],
)
def test_what_cannot_be_worked_is_said_and_left_blank(changes: dict[str, str], remark: str | None) -> None:
    made = table({**TRANSMITTER, **changes})
    assert (remark in made.remarks) if remark else not made.remarks
    if remark and "signal" in remark:
        assert column(made, "ma") == [None] * 5
    elif remark:
        assert column(made, "input_value") == [None] * 5
        assert column(made, "ma") == [4.0, 8.0, 12.0, 16.0, 20.0]


def test_a_signal_nobody_gives_is_an_assumption() -> None:
    made = table({"tag": "PT-1", "I/O type": "AI", "LRV": "0", "URV": "1", "range unit": "barg"})
    assert "signal 4-20 mA" in made.assumed
    assert column(made, "ma") == [4.0, 8.0, 12.0, 16.0, 20.0]


def test_an_output() -> None:
    made = table(VALVE[1])
    assert made.output
    assert column(made, "percent") == [0.0, 25.0, 50.0, 75.0, 100.0]
    assert column(made, "ma") == [4.0, 8.0, 12.0, 16.0, 20.0]
    assert column(made, "test_mv") == [10.0, 20.0, 30.0, 40.0, 50.0]
    assert column(made, "range_v") == [None] * 5


@pytest.mark.parametrize("row", [VALVE[3], VALVE[4]])
def test_a_contact_has_none(row: dict[str, Any]) -> None:
    plant = example_plant([row])
    assert check_table(plant.circuits[0], plant) is None


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("4-20mA", "4-20 mA"),
        ("4..20 mA HART", "4-20 mA"),
        ("0-20 mA", "0-20 mA"),
        ("Pt100", "Pt100"),
        ("mA", None),
        ("", None),
    ],
)
def test_the_signal(text: str, shown: str | None) -> None:
    (each,) = example_plant([{"tag": "PT-1", "signal": text}]).instruments
    assert signal_of(each.record, each) == shown
