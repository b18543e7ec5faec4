"""What stands of a place's classification in columns of its own: the permitted surface, the ambient of the site."""

from __future__ import annotations

from typing import Any

import pytest

from validation.example import example_plant, said

_ROW: dict[str, Any] = {"tag": "PT-101", "zone": "21", "dust group": "IIIC", "signal": "4-20 mA", "I/O type": "AI"}


@pytest.mark.parametrize(
    ("heading", "cell", "permitted"),
    [
        ("Max surface temp °C", 125, 125.0),
        ("Max. surface temperature", "125 °C", 125.0),
        ("Permitted surface temperature (°C)", "T125°C", 125.0),
        ("Surface temp", 125, 125.0),
        ("Max surface temp °F", 257, None),
        ("Max surface temp °C", None, None),
    ],
)
def test_a_permitted_surface_in_a_column_of_its_own(heading: str, cell: Any, permitted: float | None) -> None:
    area = example_plant([{**_ROW, heading: cell}]).instruments[0].area
    assert area is not None
    assert (area.zone, area.dust_group, area.dust_surface_c) == ("21", "IIIC", permitted)


@pytest.mark.parametrize(
    ("heading", "cell", "ambient"),
    [
        ("Site ambient °C", "-10 to +55", (-10.0, 55.0)),
        ("Site ambient", "-10...+55 °C", (-10.0, 55.0)),
        ("Site ambient (°F)", "14 to 131", (None, None)),
        ("Ambient", "-10 to +55 °C", (None, None)),
    ],
)
def test_the_ambient_of_the_site_is_the_places(
    heading: str, cell: str, ambient: tuple[float | None, float | None]
) -> None:
    area = example_plant([{**_ROW, heading: cell}]).instruments[0].area
    assert area is not None
    assert (area.ambient_min_c, area.ambient_max_c) == ambient


def test_the_site_is_hotter_than_a_silent_marking() -> None:
    row = {**_ROW, "Max surface temp °C": 125, "Site ambient °C": "-10 to +55", "Ex marking": "Ex tb IIIC T85°C Db"}
    assert [text.partition(",")[0] for text in said("HAZ08", [row])] == ["PT-101: ambient up to 55 degC"]
    assert said("HAZ07", [{**row, "Ex marking": "Ex tb IIIC T135°C Db"}]) != []
    assert said("HAZ07", [{**row, "Ex marking": "Ex tb IIIC T125°C Db"}]) == []
