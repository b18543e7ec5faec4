"""Which sensor a row and its type name, and where they say so."""

from typing import Any

import pytest

from instruments.named_sensor import named_sensor
from validation.example import example_plant


@pytest.mark.parametrize(
    ("tag", "device", "named"),
    [
        ({}, {"sensor type": "Pt100"}, ("Pt100", "type.sensor_type")),
        ({"signal": "TC type K"}, {"sensor type": "Pt100"}, ("Pt100", "type.sensor_type")),
        ({"signal": "TC type K"}, {}, ("type K", "signal")),
        ({"kind": "Thermocouple type J"}, {}, ("type J", "kind")),
        ({}, {"signal": "Pt1000"}, ("Pt1000", "type.signal")),
        ({}, {"description": "Thermocouple type N, 6 mm"}, ("type N", "type.description")),
        # Named well enough, and no standard function is held for it.
        ({"signal": "Pt100"}, {"sensor type": "Ni100"}, None),
        # A word that names no sensor leaves the others to say it.
        ({"signal": "Pt100"}, {"sensor type": "thin film"}, ("Pt100", "signal")),
        ({"signal": "4-20 mA"}, {}, None),
    ],
)
def test_the_type_says_it_before_the_row(
    tag: dict[str, Any], device: dict[str, Any], named: tuple[str, str] | None
) -> None:
    rows = [{"tag": "TE-1", "service": "Feed", "device type": "T", **tag}]
    (installed,) = example_plant(rows, types=[{"code": "T", "kind": "element", **device}]).instruments
    found = named_sensor(installed)
    assert (None if found is None else (found.sensor.name, found.field)) == named
