"""Which parts of a circuit drive its current, side by side of an isolator."""

from typing import Any

import pytest

from loops.source import outside_supply, parts_of
from validation.example import example_plant

Row = dict[str, Any]
TAG = {"tag": "PT-1", "device type": "T", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "A1", "card": "C"}


def circuit(tag: Row, kind: Row | None = None, card: Row | None = None, barrier: Row | None = None, **more: Any) -> Any:
    types = [
        {"code": "T", "kind": "transmitter", **(kind or {})},
        {"code": "C", "kind": "card", **(card or {})},
        {"code": "B", **(barrier or {"kind": "barrier"})},
    ]
    (found,) = example_plant([{**TAG, **tag}], types=types, **more).circuits
    return found


@pytest.mark.parametrize(
    ("tag", "kind", "card", "expected"),
    [
        ({"wires": 2}, {}, {"source or sink": "source"}, ["PT-1 sink", "card C source"]),
        ({"wires": 4}, {"source or sink": "source"}, {"source or sink": "sink"}, ["PT-1 source", "card C sink"]),
        ({"wires": 4}, {}, {}, ["PT-1 ? source or sink", "card C ? source or sink"]),
        ({}, {}, {}, ["PT-1 ? wires", "card C ? source or sink"]),
        ({}, {"lift-off V": 10}, {"volts available at 20 mA": 16}, ["PT-1 sink", "card C source"]),
        ({"wires": 3}, {"maximum load ohm": 500}, {}, ["PT-1 source", "card C ? source or sink"]),
        # A card's compliance belongs to an output, and says nothing of an input.
        ({"wires": 2}, {}, {"compliance V": 15}, ["PT-1 sink", "card C ? source or sink"]),
        ({"kind": "positioner", "I/O type": "AO"}, {}, {"compliance V": 15}, ["PT-1 sink", "card C source"]),
        ({"kind": "positioner", "I/O type": "AO"}, {}, {"maximum load ohm": 750}, ["PT-1 sink", "card C source"]),
        # A transmitter on an output, which another rule finds, is asked as a transmitter.
        ({"I/O type": "AO"}, {}, {"compliance V": 15}, ["PT-1 ? wires", "card C ? source or sink"]),
        # Something else on an output, such as a drive, may be active.
        ({"I/O type": "AO"}, {"kind": "lamp"}, {"compliance V": 15}, ["PT-1 ? source or sink", "card C source"]),
        ({"wires": 2, "card": "LOST"}, {}, {}, ["PT-1 sink", "card LOST ? card"]),
        ({"wires": 2, "card": ""}, {}, {}, ["PT-1 sink", "the card ? card"]),
    ],
)
def test_who_drives_and_who_takes(tag: Row, kind: Row, card: Row, expected: list[str]) -> None:
    parts = parts_of(circuit(tag, kind, card))
    assert parts.sides == (parts.field,)
    assert [f"{each.name} {each.role or f'? {each.missing}'}" for each in parts.field] == expected


def test_an_isolator_has_two_sides() -> None:
    sink = {"source or sink": "sink"}
    feeding = {"kind": "isolator", "volts available at 20 mA": 15, "maximum load ohm": 500}
    parts = parts_of(circuit({"wires": 2, "barrier": "B"}, card=sink, barrier=feeding))
    assert [[(each.name, each.role) for each in side] for side in parts.sides] == [
        [("PT-1", "sink"), ("isolator B", "source")],
        [("output of isolator B", "source"), ("card C", "sink")],
    ]
    out = {"kind": "positioner", "I/O type": "AO", "barrier": "B"}
    giving = {"compliance V": 15}
    parts = parts_of(circuit(out, card=giving, barrier={"kind": "isolator", "compliance V": 13}))
    assert [[(each.name, each.role) for each in side] for side in parts.sides] == [
        [("PT-1", "sink"), ("isolator B", "source")],
        [("input of isolator B", "sink"), ("card C", "source")],
    ]


@pytest.mark.parametrize(
    ("tag", "loop", "expected"),
    [
        ({"wires": 2, "power supply": "24 V DC"}, None, True),
        ({"wires": 2, "power supply": "PSU-9"}, None, True),
        ({"wires": 2, "power supply": "loop"}, None, False),
        ({"wires": 2, "power supply": "Loop powered"}, None, False),
        ({"wires": 2, "power supply": "2-wire"}, None, False),
        ({"wires": 2}, None, None),
        ({"wires": 2}, {"supply V max": 26}, True),
        ({"wires": 4, "power supply": "24 V DC"}, None, None),
        ({"wires": 4}, {"supply V nominal": 24}, True),
    ],
)
def test_a_supply_in_series(tag: Row, loop: Row | None, expected: bool | None) -> None:
    more: dict[str, Any] = {"loops": [{"number": "P-1", "circuit or tag": "PT-1", **loop}]} if loop else {}
    assert outside_supply(circuit(tag, **more)) is expected
