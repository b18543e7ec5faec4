"""What is tried beside the points of the check table: what to bring about, what to expect, blanks left blank."""

from __future__ import annotations

from typing import Any

import pytest

from loops.sheet.content import sheet_content
from loops.sheet.pack import sheets_of
from validation.example import example_plant

Row = dict[str, Any]
Line = tuple[str, str, str | None, str | None]

AI: Row = {"tag": "PT-1", "LRV": "0", "URV": "10", "range unit": "barg", "I/O type": "AI", "signal": "4-20 mA"}
BROKEN: Line = ("PT-1", "wire broken", "wire off: 0 mA", None)


def tried(rows: list[Row]) -> list[Line]:
    plant = example_plant(rows)
    (loop,) = sheets_of(plant).drawn
    content = sheet_content(loop, plant)
    return [
        (each.device, each.what, each.bring_about, each.expect)
        for circuit in content.circuits
        for each in circuit.tries
    ]


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({}, [BROKEN]),
        ({"H": "8", "LL": "1"},
         [("PT-1", "LL, falling", "1 barg = 5.60 mA", "alarm LL"),
          ("PT-1", "H, rising", "8 barg = 16.80 mA", "alarm H"), BROKEN]),
        ({"trip": "9", "trip direction": "high"},
         [("PT-1", "trip, rising", "9 barg = 18.40 mA", "trip"), BROKEN]),
        ({"trip": "9"}, [("PT-1", "trip", "9 barg = 18.40 mA", "trip"), BROKEN]),
        ({"failure direction": "high", "bad signal detection": "yes"},
         [("PT-1", "wire broken", "wire off: 0 mA", "bad signal shown"),
          ("PT-1", "failure signal", "21 mA, failure high", "bad signal shown")]),
        ({"failure direction": "low", "bad signal detection": "no"},
         [("PT-1", "wire broken", "wire off: 0 mA", "no bad signal shown"),
          ("PT-1", "failure signal", "3.6 mA, failure low", "no bad signal shown")]),
        ({"tag": "TE-1", "signal": "Pt100", "I/O type": "RTD", "range unit": "degC", "failure direction": "high"},
         [("TE-1", "wire broken", "wire off", "reading goes high")]),
        ({"tag": "TE-1", "signal": "Pt100", "I/O type": "RTD", "range unit": "degC"},
         [("TE-1", "wire broken", "wire off", None)]),
    ],
)  # fmt: skip
def test_measurements(row: Row, expected: list[Line]) -> None:
    assert tried([{**AI, **row}]) == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "PSH-1", "contact": "NC"},
         [("healthy", None, "contact closed"), ("alarm or trip", None, "contact open")]),
        ({"tag": "PSH-1", "contact": "NO"},
         [("healthy", None, "contact open"), ("alarm or trip", None, "contact closed")]),
        ({"tag": "PSH-1"}, [("healthy", None, None), ("alarm or trip", None, None)]),
        ({"tag": "XS-1", "contact": "NO"}, [("healthy", None, None), ("alarm or trip", None, None)]),
        ({"tag": "PSL-1", "contact": "NC"}, [("healthy", None, None), ("alarm or trip", None, None)]),
        ({"tag": "PSL-1", "contact": "NC", "trip": "2 barg", "trip direction": "low"},
         [("trip, falling", "2 barg", None), ("healthy", None, None)]),
        ({"tag": "PS-1", "contact": "NO", "trip": "2 barg", "trip direction": "high"},
         [("trip, rising", "2 barg", "contact closes"), ("healthy", None, "contact open")]),
        ({"tag": "ZSO-1", "contact": "NO"},
         [("position not reached", None, "contact open"), ("position reached", None, "contact closed")]),
        ({"tag": "PSHH-1", "contact": "NC", "trip": "12 barg", "trip direction": "high"},
         [("trip, rising", "12 barg", "contact opens"), ("healthy", None, "contact closed")]),
        ({"tag": "PSHH-1", "trip": "12 barg"}, [("trip", "12 barg", None), ("healthy", None, None)]),
    ],
)  # fmt: skip
def test_contacts(row: Row, expected: list[tuple[str, str | None, str | None]]) -> None:
    assert [line[1:] for line in tried([{"I/O type": "DI", "I/O address": "1", "kind": "switch", **row}])] == expected


VALVES = [
    ("FC", ["valve open", "valve closed", "valve closed"]),
    ("FO", ["valve closed", "valve open", "valve open"]),
    ("FL", [None, "stays in place", "stays in place"]),
    ("", [None, None, None]),
]


@pytest.mark.parametrize(("position", "expected"), VALVES)
def test_a_coil_and_its_valve(position: str, expected: list[str | None]) -> None:
    rows = [{"tag": "XV-1", "failure position": position}, {"tag": "XY-1", "I/O type": "DO", "I/O address": "1"}]
    assert tried(rows) == [
        ("XY-1", "energised", "output on", expected[0]),
        ("XY-1", "de-energised", "output off", expected[1]),
        ("XY-1", "air fails", "air off", expected[2]),
    ]


@pytest.mark.parametrize(("position", "expected"), VALVES)
def test_a_positioner_and_its_valve(position: str, expected: list[str | None]) -> None:
    rows = [
        {"tag": "FV-1", "failure position": position},
        {"tag": "FY-1", "kind": "positioner", "I/O type": "AO", "I/O address": "1", "signal": "4-20 mA"},
    ]
    assert tried(rows) == [
        ("FY-1", "signal fails", "wire off", expected[1]),
        ("FY-1", "air fails", "air off", expected[2]),
    ]


def test_of_two_valves_each_coil_has_its_own() -> None:
    rows = [
        {"tag": "XV-1A", "failure position": "FC"},
        {"tag": "XV-1B", "failure position": "FO"},
        {"tag": "XY-1A", "I/O type": "DO", "I/O address": "1"},
        {"tag": "XY-1B", "I/O type": "DO", "I/O address": "2"},
    ]
    found = {(device, what): expect for device, what, _, expect in tried(rows)}
    assert found["XY-1A", "de-energised"] == "valve closed"
    assert found["XY-1B", "de-energised"] == "valve open"


def test_a_lamp_has_no_air() -> None:
    rows = [{"tag": "XL-1", "kind": "lamp", "I/O type": "DO", "I/O address": "1"}]
    assert [what for _, what, _, _ in tried(rows)] == ["energised", "de-energised"]


def test_of_two_valves_on_one_output_each_has_its_own() -> None:
    rows = [
        {"tag": f"TY-1{letter}", "kind": "positioner", "signal": "4-20 mA", "I/O type": "AO", "I/O address": "1"}
        for letter in "AB"
    ]
    rows += [{"tag": "TV-1A", "failure position": "FC"}, {"tag": "TV-1B", "failure position": "FO"}]
    assert [(device, expect) for device, what, _, expect in tried(rows) if what == "signal fails"] == [
        ("TY-1A", "valve closed"),
        ("TY-1B", "valve open"),
    ]
