"""What receives a circuit's current: one range resistor, and the inputs across it."""

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.circuit import Circuit
from loops.receiving import SeriesIndicator, parallel_ohm, receivers, series_indicators, shift_percent
from validation.example import example_plant

Row = dict[str, Any]
TAG = {"tag": "PT-1", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "A1"}
SHOWN = {"tag": "PI-1", "kind": "indicator", "location": "panel", "signal": "1-5 V", "device type": "IND"}
TYPES = [
    {"code": "LOW", "kind": "card", "input ohm": 100},
    {"code": "HIGH", "kind": "card", "input ohm": 1e6},
    {"code": "AI", "kind": "card", "input ohm": 250},
]


def circuit(tag: Row | None = None, loop: Row | None = None, shown: Row | None = None) -> Circuit:
    loops = [{"number": "P-1", "circuit or tag": "PT-1", **loop}] if loop else None
    types = [*TYPES, {"code": "IND", "kind": "indicator", **(shown or {})}]
    rows = [{**TAG, **(tag or {})}, *([SHOWN] if shown is not None else [])]
    (found,) = example_plant(rows, types=types, **({"loops": loops} if loops else {})).circuits
    return found


@pytest.mark.parametrize(
    ("tag", "loop", "shown", "expected"),
    [
        # The range resistor, what lies across it, the second figure for it, what both come to.
        ({}, None, None, (None, [], None, None)),
        ({"receiver ohm": 250}, None, None, (250.0, [], None, 250.0)),
        ({"card": "AI"}, {"range resistor": 250}, None, (250.0, [], None, 250.0)),
        ({"card": "LOW"}, {"range resistor": 250}, None, (250.0, [], 100.0, 250.0)),
        ({"card": "HIGH"}, {"range resistor": 250}, None, (250.0, [1e6], None, 249.9375)),
        ({"card": "HIGH"}, None, None, (None, [1e6], None, None)),
        # Another device's input is never the same resistor told twice, unless it is the only one.
        ({"card": "AI"}, None, {"input ohm": 250}, (250.0, [250.0], None, 125.0)),
        ({}, None, {"input ohm": 250}, (250.0, [], None, 250.0)),
        ({}, None, {"input ohm": 1e6}, (None, [1e6], None, None)),
        ({"card": "AI"}, None, {"resistance ohm": 10}, (250.0, [], None, 250.0)),
        ({"receiver ohm": 0, "card": "HIGH"}, None, None, (0.0, [1e6], None, 0.0)),
    ],
)
def test_one_range_resistor_and_the_inputs_across_it(
    tag: Row, loop: Row | None, shown: Row | None, expected: Any
) -> None:
    found = receivers(circuit(tag, loop, shown))
    resistor, across, other, ohm = expected
    assert (found.range_resistor.number if found.range_resistor else None) == resistor
    assert [each.number for each in found.across] == across
    assert (found.other.number if found.other else None) == other
    assert found.ohm == (None if ohm is None else pytest.approx(ohm, abs=5e-4))


@pytest.mark.parametrize(
    ("shown", "missing"),
    [
        ({}, ("resistance ohm or input ohm",)),
        ({"resistance ohm": 10}, ()),
        ({"input ohm": 10}, ()),
        ({"fixed drop V": 1}, ()),
    ],
)
def test_a_receiver_that_says_nothing_is_missed(shown: Row, missing: tuple[str, ...]) -> None:
    assert receivers(circuit(shown=shown)).missing == missing


@pytest.mark.parametrize(
    ("shown", "expected"),
    [
        ({"resistance ohm": 10, "bypass diode": "yes"}, (True, 10.0, 0.2)),
        ({"bypass diode": "no"}, (False, None, None)),
        ({}, (None, None, None)),
        ({"input ohm": 1e6}, None),
    ],
)
def test_the_indicators_in_series(shown: Row, expected: Any) -> None:
    found = series_indicators(circuit(shown=shown))
    if expected is None:
        assert found == ()
        return
    (one,) = found
    assert isinstance(one, SeriesIndicator)
    assert (one.bypass_diode, one.resistance_ohm, one.volts) == expected


@given(first=st.floats(1.0, 1e6), others=st.lists(st.floats(1.0, 1e6), max_size=4))
def test_across_each_other_they_are_less_than_the_least(first: float, others: list[float]) -> None:
    together = parallel_ohm(first, *others)
    assert together <= min(first, *others, first) * (1 + 1e-12)
    assert together >= min([first, *others]) / (1 + len(others)) * (1 - 1e-12)
    assert shift_percent(first, together) <= 1e-9
