"""Pressures of different reference."""

import pytest

from instruments.pressure import can_be, referred, rounding, stated_reference, ways_to_read
from instruments.quantity import Quantity, read_quantity


def quantity(text: str) -> Quantity:
    """Read a value that is one."""
    value = read_quantity(text)
    assert isinstance(value, Quantity)
    return value


@pytest.mark.parametrize(
    ("text", "body", "expected"),
    [
        ("5 barg", None, "gauge"),
        ("5 bara", None, "absolute"),
        ("5 psid", None, "differential"),
        ("5 bar", None, None),
        ("5 bar", "gauge", None),  # the caller's to give
        ("20 inHg vac", "gauge", "gauge"),
        ("50 mmWG", None, "gauge"),
        ("50 mmWG", "gauge", "gauge"),
        ("50 mmWG", "differential", None),
        ("50 inWG", "differential", None),
        ("50 mbarg", "differential", "gauge"),
        ("50 mmH2O(a)", "differential", "absolute"),
        ("5 °C", None, None),
        ("5 m3/h", None, None),
    ],
)
def test_what_a_pressure_says_of_its_reference(text: str, body: str | None, expected: str | None) -> None:
    assert stated_reference(quantity(text), body=body) == expected


@pytest.mark.parametrize(
    ("pa", "reference", "to", "atmospheric_pa", "expected"),
    [
        (1e6, "gauge", "gauge", 101_325.0, 1e6),
        (1e6, "gauge", "absolute", 101_325.0, 1_101_325.0),
        (1e6, "gauge", "absolute", 83_520.0, 1_083_520.0),  # at 1600 m
        (101_325.0, "absolute", "gauge", 101_325.0, 0.0),
        (2500.0, "gauge", "differential", 101_325.0, 2500.0),
        (2500.0, "differential", "gauge", 101_325.0, 2500.0),
        (2500.0, "differential", "absolute", 101_325.0, None),
        (2500.0, "absolute", "differential", 101_325.0, None),
        (2500.0, "differential", "differential", 101_325.0, 2500.0),
    ],
)
def test_a_pressure_is_referred_to_something_else(
    pa: float, reference: str, to: str, atmospheric_pa: float, expected: float | None
) -> None:
    assert referred(pa, reference, to, atmospheric_pa=atmospheric_pa) == expected


@pytest.mark.parametrize(
    ("pa", "reference", "expected"),
    [
        (0.0, "absolute", True),
        (-1.0, "absolute", False),
        (-101_325.0, "gauge", True),
        (-101_326.0, "gauge", False),
        (-1e6, "differential", True),
    ],
)
def test_what_pressures_there_are(pa: float, reference: str, expected: bool) -> None:
    assert can_be(pa, reference) is expected


@pytest.mark.parametrize(
    ("pressures", "default", "expected"),
    [
        ([(5e5, "gauge"), (6e5, "absolute")], "gauge", ("gauge",)),
        ([(5e5, None), (6e5, None)], "gauge", ("gauge",)),
        ([(5e5, None), (6e5, "gauge")], "gauge", ("gauge", "absolute")),
        ([(5e5, None), (6e5, "gauge")], "absolute", ("absolute", "gauge")),
        ([(-5e4, None), (6e5, "gauge")], "gauge", ("gauge",)),  # cannot be absolute
        ([(5e5, None), (-5e4, None), (6e5, "gauge")], "gauge", ("gauge",)),
        ([], "gauge", ("gauge",)),
    ],
)
def test_an_unstated_reference_may_be_either(
    pressures: list[tuple[float, str | None]], default: str, expected: tuple[str, ...]
) -> None:
    assert ways_to_read(pressures, default=default) == expected


@pytest.mark.parametrize(
    ("text", "expected"), [("-14.7 psig", 0.05), ("-30 inHg(g)", 0.5), ("-1.01325 barg", 0.000005), ("0 barg", 0.5)]
)
def test_half_a_step_of_the_last_digit(text: str, expected: float) -> None:
    assert rounding(quantity(text)) == pytest.approx(expected)
