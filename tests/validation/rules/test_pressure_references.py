"""Gauge, absolute and differential pressure within one instrument."""

from typing import Any

import pytest

from tests.validation.rules.asked import asked, outcome, said_of

TYPES: list[dict[str, Any]] = [
    {"code": "G", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg"},
    {"code": "A", "kind": "transmitter", "body": "absolute", "LRL": "0 bara", "URL": "10 bara"},
    {"code": "D", "kind": "transmitter", "body": "differential", "LRL": "-250 mbar", "URL": "250 mbar"},
    {"code": "X", "kind": "transmitter", "body": "gauge", "LRL": "0 bara", "URL": "10 bara"},
    {"code": "U", "kind": "transmitter", "LRL": "0 barg", "URL": "10 barg"},
]
GAUGE = {"LRV": "0 barg", "URV": "10 barg"}
PLAIN = {"LRV": "0 bar", "URV": "10 bar"}
ABSOLUTE = {"LRV": "0 bara", "URV": "10 bara"}


@pytest.mark.parametrize(
    ("device", "row", "expected"),
    [
        ("G", GAUGE, []),
        ("G", PLAIN, []),  # takes its body's
        ("A", PLAIN, []),
        ("D", {"LRV": "0 mbar", "URV": "100 mbar"}, []),
        ("D", {"LRV": "0 mbar(d)", "URV": "100 mbar(d)"}, []),
        ("D", {"LRV": "0 mmWG", "URV": "100 mmWG"}, []),  # a water gauge on a differential body says nothing
        ("G", {"LRV": "30 inHg vac", "URV": "0 inHg vac"}, []),  # a vacuum is a gauge pressure
        ("A", GAUGE, ["gauge and absolute are mixed: range 0 to 10 barg, body absolute"]),
        ("G", ABSOLUTE, ["gauge and absolute are mixed: range 0 to 10 bara, body gauge"]),
        ("D", {"LRV": "0 mbara", "URV": "200 mbara"},
         ["absolute and differential are mixed: range 0 to 200 mbara, body differential"]),
        ("G", {"LRV": "0 psid", "URV": "10 psid"},
         ["gauge and differential are mixed: range 0 to 10 psid, body gauge"]),
        ("G", {"LRV": "0 barg", "URV": "10 bara"},
         ["gauge and absolute are mixed: range 0 barg to 10 bara, body gauge"]),
        ("D", {"LRV": "0 mbarg", "URV": "30 mbarg"},
         ["review: range 0 to 30 mbarg on a differential body: is its low side open to the atmosphere?"]),
        ("D", {"LRV": "0 mbarg", "URV": "30 mbarg", "HH": "25 mbara"},
         ["gauge, absolute and differential are mixed: range 0 to 30 mbarg, HH 25 mbara, body differential"]),
        ("D", {"LRV": "0 mbar(d)", "URV": "30 mbar(d)", "HH": "25 mbarg"},
         ["gauge and differential are mixed: range 0 to 30 mbar(d), HH 25 mbarg, body differential"]),
        ("D", {"LRV": "0 mbar", "URV": "30 mbar", "HH": "25 mbarg"},
         ["review: HH 25 mbarg on a differential body: is its low side open to the atmosphere?"]),
        ("G", {**GAUGE, "HH": "9 bara"}, ["gauge and absolute are mixed: range 0 to 10 barg, HH 9 bara, body gauge"]),
        ("G", {**GAUGE, "trip": "9 bara"},
         ["gauge and absolute are mixed: range 0 to 10 barg, trip 9 bara, body gauge"]),
        ("G", {**GAUGE, "HH": "9 barg"}, []),
        ("G", {**GAUGE, "HH": "9 bar"}, []),
        ("G", {**GAUGE, "HH": "9 m3/h"}, []),
        ("G", {**GAUGE, "system LRV": "0 bara", "system URV": "10 bara"},
         ["gauge and absolute are mixed: range 0 to 10 barg, system range 0 to 10 bara, body gauge"]),
        ("G", {**GAUGE, "system LRV": "0 %", "system URV": "100 %"}, []),
        ("X", GAUGE, ["gauge and absolute are mixed: range 0 to 10 barg, body gauge, LRL 0 bara, URL 10 bara"]),
        ("U", ABSOLUTE, ["gauge and absolute are mixed: range 0 to 10 bara, body gauge"]),  # the URL tells the body
        ("", {**GAUGE, "HH": "9 bara"}, ["gauge and absolute are mixed: range 0 to 10 barg, HH 9 bara"]),
    ],
)  # fmt: skip
def test_one_instrument_has_one_reference(device: str, row: dict[str, str], expected: list[str]) -> None:
    found = asked("RNG06", [{"tag": "PT-1", "device type": device, **row}], types=TYPES)
    assert [said_of(each) for each in found] == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "PT-1", **GAUGE}, "unchecked: body"),
        ({"tag": "PT-1", "device type": "G"}, "unchecked: LRV, URV"),
        ({"tag": "PT-1", "device type": "G", "LRV": "0 barg"}, "unchecked: URV"),
        ({"tag": "PT-1"}, "unchecked: body, LRV, URV"),
        ({"tag": "TT-1", "LRV": "0 °C", "URV": "100 °C"}, "not applicable"),
        ({"tag": "FT-1", "LRV": "0 m3/h", "URV": "100 m3/h"}, "not applicable"),
        ({"tag": "XV-1", "service": "x"}, "not applicable"),
        ({"tag": "PSV-1", "set pressure": "10 barg"}, "not applicable"),  # nothing to compare it with
        ({"tag": "PSH-1", "device type": "G", "trip": "5 bara"}, "finding"),
        ({"tag": "PSH-1", "device type": "G", "trip": "5 barg"}, "clear"),
        ({"tag": "PIC-1", "location": "system", "system LRV": "0 barg", "system URV": "10 barg"}, "not applicable"),
        ({"tag": "PIC-1", "location": "system", "system LRV": "0 barg", "system URV": "10 barg", "H": "9 bara"},
         "finding"),
    ],
)  # fmt: skip
def test_what_is_blank_is_not_one_reference(row: dict[str, str], expected: str) -> None:
    types = [*TYPES, {**TYPES[0], "code": "G", "kind": "switch"}] if row["tag"].startswith("PSH") else TYPES
    if row["tag"].startswith("PSH"):
        types = [{**TYPES[0], "kind": "switch"}]
    assert outcome("RNG06", [row], types=types) == expected


def test_the_range_is_shown_as_the_body_sees_it() -> None:
    found = asked("RNG06", [{"tag": "PT-1", "device type": "A", **GAUGE}], types=TYPES)
    assert found[0].working == "0 to 10 barg is 1.01325 to 11.0132 bara at 1.01325 bara of atmosphere"
    high = asked(
        "RNG06", [{"tag": "PT-1", "device type": "A", **GAUGE}], types=TYPES, plant={"atmospheric pressure": "0.8 bara"}
    )
    assert high[0].working == "0 to 10 barg is 0.8 to 10.8 bara at 0.8 bara of atmosphere"


def test_a_finding_is_one_for_all_that_disagrees() -> None:
    row = {"tag": "PT-1", "device type": "A", **GAUGE, "H": "8 barg", "HH": "9 barg"}
    found = asked("RNG06", [row], types=TYPES)
    assert [(each.fields, each.found) for each in found] == [
        (("LRV", "URV", "body"), "range 0 to 10 barg, body absolute")
    ]
