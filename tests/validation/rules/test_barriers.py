"""Zener barriers and the highest supply: each side of the working voltage, each blank, the fix."""

from typing import Any

import pytest

from tests.validation.rules.applied import cells, counts, fixes, found, tell, untold

Row = dict[str, Any]
PT: Row = {
    "tag": "PT-1",
    "signal": "4-20 mA",
    "wires": 2,
    "I/O type": "AI",
    "I/O address": "1",
    "barrier": "ZB",
}
LOOP: Row = {"number": "P-1", "circuit or tag": "PT-1", "kind": "AI"}
ZENER: Row = {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "working voltage V": 26}
CARD: Row = {"code": "AI", "kind": "card", "nominal V": 26.1, "source or sink": "source"}
MAX = "supply V max"
NOMINAL = "supply V nominal"


def on(loop: Row | None = None, zener: Row | None = None) -> dict[str, Any]:
    types = [{**ZENER, **(zener or {})}, CARD, {"code": "ISO", "kind": "isolator", "working voltage V": 20}]
    return {"types": types, "loops": [{**LOOP, **(loop or {})}]}


@pytest.mark.parametrize(
    ("row", "sheets", "told"),
    [
        ({}, on({MAX: 26}), ""),
        ({}, on({MAX: 26.1}), "26.1 V, 0.1 V"),
        # 24 V and 10 % above it: 26.4 V.
        ({"power supply": "24 V DC +/-10 %"}, on(), "26.4 V, 0.4 V"),
        # Only a nominal: 5 % either way is assumed.
        ({}, on({NOMINAL: 24.7}), ""),
        ({}, on({NOMINAL: 25}), "review: 26.25 V, 0.25 V"),
        ({}, on({NOMINAL: 27}), "27 V, 1 V"),
        ({}, {**on({NOMINAL: 25}), "plant": {"ELC supply tolerance %": "2"}}, ""),
        # Its lowest alone is too much.
        ({}, on({"supply V min": 26.5}), "26.5 V, 0.5 V"),
        ({"card": "AI"}, on(), "26.1 V, 0.1 V"),
        # A barrier that does not say that it is a zener barrier, but works up to some volts.
        ({}, on({MAX: 27}, {"zener or isolator": None}), "27 V, 1 V"),
        # An output.
        ({"kind": "solenoid", "signal": "24 VDC", "I/O type": "DO"}, on({"kind": "DO", MAX: 28}), "28 V, 2 V"),
    ],
)  # fmt: skip
def test_elc13_finds_a_supply_above_the_working_voltage(row: Row, sheets: dict[str, Any], told: str) -> None:
    said = [
        each.replace("zener barrier ZB works up to 26 V: over by ", "")
        for each in tell("ELC13", {**PT, **row}, **sheets)
    ]
    assert [each.replace("P-1: the supply reaches ", "") for each in said] == ([told] if told else [])


def test_elc13_says_it_in_words() -> None:
    assert tell("ELC13", PT, **on({MAX: 26.4})) == [
        "P-1: the supply reaches 26.4 V, zener barrier ZB works up to 26 V: over by 0.4 V"
    ]


@pytest.mark.parametrize(
    ("row", "sheets", "blanks"),
    [
        ({}, on({MAX: 27}, {"working voltage V": None}), {"working voltage V": 1}),
        ({}, on(), {"supply V max": 1}),
        ({}, on({"supply V min": 23}), {"supply V max": 1}),
        ({}, on(zener={"working voltage V": None}), {"working voltage V": 1, "supply V max": 1}),
        ({"barrier": "X"}, on({MAX: 27}), {"barrier": 1}),
        # The supply of a four-wire device comes past the barrier.
        ({"wires": 4, "power supply": "28 V DC"}, on(), {"supply V max": 1}),
        ({"wires": 4, "power supply": "230 V AC"}, on(), {"supply V max": 1}),
    ],
)
def test_elc13_leaves_open_what_is_blank(row: Row, sheets: dict[str, Any], blanks: dict[str, int]) -> None:
    assert tell("ELC13", {**PT, **row}, **sheets) == []
    assert untold("ELC13", {**PT, **row}, **sheets) == blanks


@pytest.mark.parametrize(
    "row", [{"barrier": None}, {"barrier": "ISO"}, {"signal": "TC type K", "I/O type": "TC", "kind": "thermocouple"}]
)
def test_elc13_is_about_zener_barriers_with_a_supply(row: Row) -> None:
    loop = {MAX: 30, "kind": row.get("I/O type", "AI")}
    assert counts("ELC13", {**PT, **row}, **on(loop)) == {"not applicable": 1}


def test_elc13_gives_the_highest_supply() -> None:
    assert fixes("ELC13", PT, **on({MAX: 27})) == [
        ("PT-1", "supply of at most 26 V at its highest", {MAX: "26"}),
    ]
    assert fixes("ELC13", PT, **on({NOMINAL: 27}, {"working voltage V": 25.77})) == [
        ("PT-1", "supply of at most 25.7 V at its highest", {NOMINAL: "24.4"}),
    ]


def test_elc13_shows_its_terms_and_where_they_stand() -> None:
    (one,) = found("ELC13", PT, **on({NOMINAL: 25}))
    assert one.working == ("supply 25 V nominal, 5 % high = 26.25 V; working voltage of ZB 26 V; over by 0.25 V")
    assert one.assumed == ("supply 25 V may be 5 % high",)
    assert cells("ELC13", PT, **on({NOMINAL: 25})) == [["Instruments G2", "Device types D2", "Loops D2"]]
