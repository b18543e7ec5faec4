from __future__ import annotations

import pytest

from validation.example import example_plant


@pytest.mark.parametrize(
    ("row", "point"),
    [
        ({"tag": "PI 27", "signal": "4-20 mA"}, True),
        ({"tag": "TIR 54", "I/O type": "TC"}, True),
        ({"tag": "FIC 3", "I/O type": "AI"}, True),
        # a sounder, a report, a controller's output
        ({"tag": "XA-1", "I/O type": "DO"}, False),
        ({"tag": "XA-2", "I/O type": "DI"}, False),
        ({"tag": "FIC-4", "I/O type": "AO"}, False),
        ({"tag": "FIC-5", "I/O type": "AI/AO"}, True),
        # nothing of its own
        ({"tag": "PI 28"}, False),
        ({"tag": "FIC-6", "I/O type": "AI", "location": "DCS"}, False),
    ],
)
def test_a_tag_names_the_measuring_point_where_no_transmitter_does(row: dict[str, str], point: bool) -> None:
    (installed,) = example_plant([row]).instruments
    assert installed.measuring_point is point


def test_a_loop_with_a_transmitter_has_no_measuring_point() -> None:
    found = example_plant([{"tag": "FIC-1", "I/O type": "AI"}, {"tag": "FT-1", "I/O type": "AI"}]).instruments
    assert [each.measuring_point for each in found] == [False, False]
