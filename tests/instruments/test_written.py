"""A value from its text, as a fix writes it: what each column takes, and why it refuses."""

from typing import Any

import pytest

from instruments.column import Column, Reads
from instruments.columns import DEVICE_TYPES, INSTRUMENTS
from instruments.kind import Kind
from instruments.quantity import Quantity
from instruments.written import CannotStand, value_of
from loops.columns import CABLE_TYPES, LOOPS


@pytest.mark.parametrize(
    ("column", "text", "value"),
    [
        (INSTRUMENTS.column("tag"), "PT-101", "PT-101"),
        (INSTRUMENTS.column("service"), " as it is ", " as it is "),
        (INSTRUMENTS.column("kind"), "transmitter", Kind.TRANSMITTER),
        (INSTRUMENTS.column("kind"), "on/off valve", Kind.ON_OFF_VALVE),
        (INSTRUMENTS.column("range_unit"), "barg", "barg"),
        (INSTRUMENTS.column("urv"), "10 barg", "10 barg"),
        (INSTRUMENTS.column("urv"), "-84 inH2O", "-84 inH2O"),
        (INSTRUMENTS.column("setting_h"), "20 % LEL", "20 % LEL"),
        (INSTRUMENTS.column("design_temperature"), "100 °C", "100 °C"),
        (INSTRUMENTS.column("bad_signal_detection"), "yes", True),
        (INSTRUMENTS.column("bad_signal_detection"), "No", False),
        (INSTRUMENTS.column("failure_direction"), "high", "high"),
        (INSTRUMENTS.column("failure_direction"), "Upscale", "high"),
        (INSTRUMENTS.column("wires"), "2", 2),
        (INSTRUMENTS.column("cable_length_m"), "976", 976.0),
        (LOOPS.column("supply_min_v"), "24.1", 24.1),
        (LOOPS.column("supply_min_v"), "24.1 V", 24.1),
        (LOOPS.column("supply_min_v"), "24100 mV", 24.1),
        (LOOPS.column("range_resistor_ohm"), "250 ohm", 250.0),
        (CABLE_TYPES.column("capacitance_pf_per_m"), "110 pF/m", 110.0),
        (DEVICE_TYPES.column("url"), "16 barg", "16 barg"),
    ],
)
def test_what_a_column_takes(column: Column, text: str, value: Any) -> None:
    found = value_of(column, text)
    assert (str(found) if isinstance(found, Quantity) or column.reads is Reads.UNIT else found) == value
    assert isinstance(found, bool) is isinstance(value, bool)


@pytest.mark.parametrize(
    ("column", "text", "reason"),
    [
        (INSTRUMENTS.column("kind"), "zorp", "kind cannot be 'zorp'"),
        (INSTRUMENTS.column("range_unit"), "zorp", "range unit cannot be 'zorp'"),
        (INSTRUMENTS.column("urv"), "wide", "URV cannot be 'wide': 'wide' is not a number"),
        (INSTRUMENTS.column("urv"), "10", "URV cannot be '10': it has no unit"),
        (INSTRUMENTS.column("urv"), "10 zorp", "URV cannot be '10 zorp': unit 'zorp' is not known"),
        (INSTRUMENTS.column("design_pressure"), "10 m", "design pressure cannot be '10 m': it is no pressure"),
        (INSTRUMENTS.column("bad_signal_detection"), "maybe", "bad-signal detection cannot be 'maybe'"),
        (INSTRUMENTS.column("failure_direction"), "sideways", "failure direction cannot be 'sideways'"),
        (INSTRUMENTS.column("wires"), "two", "wires cannot be 'two'"),
        (INSTRUMENTS.column("wires"), "2.5", "wires cannot be '2.5': it counts"),
        (INSTRUMENTS.column("cable_length_m"), "", "cable length cannot be ''"),
        (LOOPS.column("supply_min_v"), "24 zorp", "supply V min cannot be '24 zorp': zorp is no unit of it"),
        (INSTRUMENTS.column("range"), "0-10 barg", "range fills lrv and urv: give each its own value"),
    ],
)
def test_what_a_column_refuses_and_why(column: Column, text: str, reason: str) -> None:
    with pytest.raises(CannotStand) as refused:
        value_of(column, text)
    assert str(refused.value) == reason


def test_volts_are_no_ohms() -> None:
    with pytest.raises(CannotStand, match="range resistor cannot be '250 V'"):
        value_of(LOOPS.column("range_resistor_ohm"), "250 V")


@pytest.mark.parametrize(
    "column",
    [each for kind in (INSTRUMENTS, DEVICE_TYPES, LOOPS) for each in kind.columns],
    ids=lambda column: column.field,
)
def test_every_column_takes_a_text_or_says_why_not(column: Column) -> None:
    for text in ("", "x", "1", "1 bar", "yes", "-", "é" * 300):
        try:
            value_of(column, text)
        except CannotStand as refused:
            assert column.title in str(refused)  # noqa: PT017
