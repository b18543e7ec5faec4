"""What an instrument measures, ready to be compared."""

from typing import Any

import pytest

from instruments.installed import Installed
from instruments.measurement import (
    Measurement,
    amount,
    at,
    difference_in,
    from_to,
    in_unit,
    measurement_of,
    same_dimension,
    scale,
)
from instruments.quantity import Quantity, read_quantity
from instruments.unit import Unit, read_unit
from validation.example import example_plant


def quantity(text: str) -> Quantity:
    """Read a value that is one."""
    value = read_quantity(text)
    assert isinstance(value, Quantity)
    return value


def unit(text: str) -> Unit:
    """Read a unit that is one."""
    found = read_unit(text)
    assert found is not None
    return found


def measurement(**row: Any) -> Measurement:
    """Return what the only instrument of a plant measures."""
    types = [
        {"code": "D", "kind": "transmitter", "body": "differential", "LRL": "-250 mbar", "URL": "250 mbar"},
        {"code": "A", "kind": "transmitter", "body": "absolute", "LRL": "0 bara", "URL": "10 bara"},
    ]
    installed: Installed = example_plant([row], types=types).instruments[0]
    return measurement_of(installed)


@pytest.mark.parametrize(
    ("lrv", "urv", "low", "high", "reversed_", "reference", "flat"),
    [
        ("0 barg", "10 barg", 0.0, 1e6, False, "gauge", False),
        ("10 barg", "0 barg", 0.0, 1e6, True, "gauge", False),
        ("0 bar", "10 bara", 0.0, 1e6, False, "absolute", False),
        ("0 bar", "10 bar", 0.0, 1e6, False, None, False),
        ("0 mmWG", "100 mmWG", 0.0, 980.665, False, None, False),
        ("30 inHg vac", "0 inHg vac", -30 * 3386.38815789, 0.0, False, "gauge", False),
        ("0 °C", "100 °C", 273.15, 373.15, False, None, False),
        ("0 °C", "32 °F", 273.15, 273.15, False, None, True),
        ("0 barg", "0 bara", 0.0, 0.0, False, "absolute", False),
        ("5 m3/h", "5 m3/h", 5 / 3600, 5 / 3600, False, None, True),
        ("0 mlc", "4 mlc", 0.0, 4.0, False, None, False),  # no factor leads out of a head of process liquid
    ],
)
def test_a_range_in_base_units(
    lrv: str, urv: str, low: float, high: float, reversed_: bool, reference: str | None, flat: bool
) -> None:
    found = scale(quantity(lrv), quantity(urv))
    assert found is not None
    assert (found.low, found.high) == (pytest.approx(low, rel=1e-6), pytest.approx(high, rel=1e-6))
    assert (found.reversed, found.reference, found.flat) == (reversed_, reference, flat)


def test_a_range_with_a_blank_or_two_dimensions() -> None:
    assert scale(None, quantity("1 barg")) is None
    assert scale(quantity("1 barg"), None) is None
    mixed = scale(quantity("0 barg"), quantity("5 °C"))
    assert mixed is not None
    assert (mixed.unit, mixed.flat) == (None, False)
    bare = scale(quantity("5"), quantity("5"))
    assert bare is not None
    assert (bare.unit, bare.flat) == (None, True)


@pytest.mark.parametrize(
    ("base", "text", "expected"),
    [(1e6, "barg", 10.0), (273.15, "°C", 0.0), (310.9277777777778, "°F", 100.0), (-3386.388, "inHg vac", 1.0)],
)
def test_a_base_value_in_a_unit(base: float, text: str, expected: float) -> None:
    assert in_unit(base, unit(text)) == pytest.approx(expected, rel=1e-6, abs=1e-9)


def test_a_difference_has_neither_offset_nor_reference() -> None:
    assert difference_in(10.0, unit("°F")) == pytest.approx(18.0)
    assert amount(10.0, unit("°F")) == "18 °F"
    assert amount(-50_000.0, unit("barg")) == "0.5 bar"
    assert from_to(quantity("0 barg"), quantity("10 bara")) == "0 barg to 10 bara"


def test_what_can_be_compared() -> None:
    assert same_dimension(unit("barg"), unit("psia"))
    assert same_dimension(unit("%"), unit("% v/v"))
    assert not same_dimension(unit("bar"), unit("m3/h"))
    assert not same_dimension(unit("m3/h"), unit("Nm3/h"))


OPERATING = {
    "operating pressure min": "1 barg", "operating pressure normal": "2 barg", "operating pressure max": "3 barg",
    "operating temperature min": "10 °C", "operating temperature normal": "20 °C", "operating temperature max": "30 °C",
}  # fmt: skip


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "PT-1"}, "2 barg"),
        ({"tag": "PIT-1"}, "2 barg"),
        ({"tag": "PG-1"}, "2 barg"),
        ({"tag": "TT-1"}, "20 °C"),
        ({"tag": "TE-1"}, "20 °C"),
        ({"tag": "PDT-1"}, None),
        ({"tag": "TDT-1"}, None),
        ({"tag": "FT-1"}, None),
        ({"tag": "LT-1"}, None),
        ({"tag": "PT-1", "device type": "D"}, None),  # on a differential body it is static pressure
        ({"tag": "PT-1", "LRV": "0 psid", "URV": "5 psid"}, None),
        ({"tag": "PT-1", "operating value normal": "2.5 barg"}, "2.5 barg"),
        ({"tag": "PT-1", "operating value max": "2.5 barg"}, None),  # the operating value is not blank
    ],
)
def test_the_measured_quantity(row: dict[str, str], expected: str | None) -> None:
    normal = measurement(**OPERATING, **row).values[1]
    assert (None if normal is None else str(normal)) == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "PT-1", "device type": "A", "LRV": "0 barg", "URV": "5 barg"}, "absolute"),  # what is stated
        ({"tag": "PT-1", "LRV": "0 barg", "URV": "5 barg"}, "gauge"),
        ({"tag": "PT-1", "LRV": "0 bar", "URV": "5 bar", "system LRV": "0 bara", "system URV": "5 bara"}, "absolute"),
        ({"tag": "PT-1", "LRV": "0 bar", "URV": "5 bar"}, None),
        ({"tag": "PG-1", "LRV": "0 bar", "URV": "5 bar"}, "gauge"),
        ({"tag": "PDT-1", "LRV": "0 bar", "URV": "5 bar"}, "differential"),
        ({"tag": "FT-1", "LRV": "0 mbar", "URV": "5 mbar"}, "differential"),
        ({"tag": "FT-1", "LRV": "0 m3/h", "URV": "5 m3/h"}, None),
        ({"tag": "LT-1", "LRV": "0 mbar", "URV": "5 mbar"}, None),
    ],
)
def test_the_body_that_a_row_tells(row: dict[str, str], expected: str | None) -> None:
    assert measurement(**row).body == expected


def test_two_ranges_that_are_written_alike_stay_two() -> None:
    found = measurement(
        tag="PT-1", **{"LRV": "0 barg", "URV": "16 barg", "system LRV": "0 barg", "system URV": "16 barg"}
    )
    assert found.field == found.system
    assert found.field is not found.system
    assert found.scale_of(quantity("4 barg")) is found.field


def test_a_value_is_compared_with_the_range_of_its_dimension() -> None:
    found = measurement(tag="FT-1", LRV="0 mbar", URV="250 mbar", **{"system LRV": "0 m3/h", "system URV": "100 m3/h"})
    assert found.scale_of(quantity("50 m3/h")) is found.system
    assert found.scale_of(quantity("50 mbar")) is found.field
    assert found.scale_of(quantity("50 °C")) is None


def test_a_pressure_is_placed_by_what_the_range_is_referred_to() -> None:
    found = measurement(tag="PT-1", LRV="0 bara", URV="2 bara")
    place = {"to": "absolute", "open_as": "gauge", "atmospheric_pa": 100_000.0}
    assert found.at(quantity("0.5 barg"), **place) == 150_000.0  # type: ignore[arg-type]
    assert found.at(quantity("0.5 bar"), **place) == 50_000.0  # type: ignore[arg-type]
    assert found.at(quantity("0.5 bar(d)"), **place) is None  # type: ignore[arg-type]
    assert found.at(quantity("20 °C"), **place) == at(quantity("20 °C")) == 293.15  # type: ignore[arg-type]
