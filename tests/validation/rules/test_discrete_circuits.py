"""Solenoids and proximity switches: each side of the limits, each blank, each fix."""

from typing import Any

import pytest

from tests.validation.rules.applied import cells, counts, fixes, found, tell, untold
from validation.audit import audit
from validation.example import example_plant

Row = dict[str, Any]
XY: Row = {
    "tag": "XY-1",
    "kind": "solenoid",
    "device type": "SV",
    "signal": "24 VDC",
    "I/O type": "DO",
    "I/O address": "1",
    "cable length": 500,
    "conductor size": "2.5 mm2",
}
LOOP: Row = {"number": "X-1", "circuit or tag": "XY-1", "supply V min": 24}
COIL: Row = {"code": "SV", "kind": "solenoid", "coil W": 12, "nominal V": 24}
AT_20 = {"ELC hot degC": "20"}


def on(row: Row | None = None, coil: Row | None = None, *, loop: Row | None = None, more: Any = ()) -> dict[str, Any]:
    """Return the case of the mistakes' table: 24 V, 12 W, 500 m of 2.5 mm2."""
    return {"types": [{**COIL, **(coil or {})}, *more], "loops": [{**LOOP, **(loop or {})}]}


@pytest.mark.parametrize(
    ("row", "sheets", "told"),
    [
        # 24 x 48 / 55.41 = 20.790 V: enough, though 24 - 0.5 x 7.41 = 20.295 V would not be.
        ({}, {**on(), "plant": AT_20}, []),
        (
            {"conductor size": "1.5 mm2"},
            {**on(), "plant": AT_20},
            ["X-1: the coil of XY-1 gets 19.168 V, it pulls in at 20.4 V: short by 1.232 V"],
        ),
        # The same cable on a hot tray.
        ({}, on(), ["X-1: the coil of XY-1 gets 20.258 V, it pulls in at 20.4 V: short by 0.142 V"]),
        (
            {},
            {**on(coil={"pull-in %": 90}), "plant": AT_20},
            ["X-1: the coil of XY-1 gets 20.79 V, it pulls in at 21.6 V: short by 0.81 V"],
        ),
        (
            {},
            {**on(), "plant": {**AT_20, "ELC09 pull-in %": "88"}},
            ["X-1: the coil of XY-1 gets 20.79 V, it pulls in at 21.12 V: short by 0.33 V"],
        ),
        # Exactly enough: 24 V, a coil of 48 ohm and a line of 12 ohm leave 19.2 V, 80 %.
        (
            {"cable type": "C", "conductor size": None, "cable length": 1000},
            {
                **on(coil={"pull-in %": 80}),
                "plant": AT_20,
                "cable_types": [{"code": "C", "ohm per km": 12, "per conductor or per loop": "loop"}],
            },
            [],
        ),
        (
            {"cable type": "C", "conductor size": None, "cable length": 1001},
            {
                **on(coil={"pull-in %": 80}),
                "plant": AT_20,
                "cable_types": [{"code": "C", "ohm per km": 12, "per conductor or per loop": "loop"}],
            },
            ["X-1: the coil of XY-1 gets 19.196 V, it pulls in at 19.2 V: short by 0.004 V"],
        ),
        # The drop of the output card comes before the divider.
        (
            {"card": "DO"},
            {**on(more=[{"code": "DO", "kind": "card", "fixed drop V": 0.8}]), "plant": AT_20},
            ["X-1: the coil of XY-1 gets 20.097 V, it pulls in at 20.4 V: short by 0.303 V"],
        ),
        # Only a nominal: short with the default alone, short with the nominal too.
        (
            {},
            {**on(loop={"supply V min": None, "supply V nominal": 24}), "plant": AT_20},
            ["review: X-1: the coil of XY-1 gets 19.751 V, it pulls in at 20.4 V: short by 0.649 V"],
        ),
        (
            {"conductor size": "1.5 mm2"},
            {**on(loop={"supply V min": None, "supply V nominal": 24}), "plant": AT_20},
            ["X-1: the coil of XY-1 gets 19.168 V, it pulls in at 20.4 V: short by 1.232 V"],
        ),
        # Short with no cable at all: what the cable is does not matter.
        (
            {"cable length": None},
            on(loop={"supply V min": 20}),
            ["X-1: the coil of XY-1 gets 20 V, it pulls in at 20.4 V: short by 0.4 V"],
        ),
        # On the highest supply: short whatever its lowest is.
        (
            {},
            on(loop={"supply V min": None, "supply V max": 20}),
            ["X-1: the coil of XY-1 gets 16.882 V, it pulls in at 20.4 V: short by 3.518 V"],
        ),
    ],
)
def test_elc09_finds_a_coil_that_does_not_pull_in(row: Row, sheets: dict[str, Any], told: list[str]) -> None:
    assert tell("ELC09", {**XY, **row}, **sheets) == told


@pytest.mark.parametrize(
    ("row", "sheets", "blanks"),
    [
        ({"device type": None}, on(), {"coil W": 1, "nominal V": 1}),
        ({}, on(coil={"coil W": None}), {"coil W": 1}),
        ({}, on(coil={"nominal V": None}), {"nominal V": 1}),
        ({"cable length": None}, on(), {"cable length": 1}),
        ({"conductor size": None}, on(), {"conductor size": 1}),
        ({}, on(loop={"supply V min": None}), {"supply V min": 1}),
        ({"signal": "230 V AC"}, on(coil={"nominal V": 230}), {"impedance of the coil": 1}),
        # What is blank of a card leaves the coil open, where it would pull in without.
        (
            {"card": "DO", "cable length": 10},
            on(more=[{"code": "DO", "kind": "card", "nominal V": 24}]),
            {"fixed drop V of the card": 1},
        ),
    ],
)
def test_elc09_leaves_open_what_is_blank(row: Row, sheets: dict[str, Any], blanks: dict[str, int]) -> None:
    assert tell("ELC09", {**XY, **row}, **sheets) == []
    assert untold("ELC09", {**XY, **row}, **sheets) == blanks


@pytest.mark.parametrize(
    "row",
    [
        {"tag": "ZSO-1", "kind": "switch", "I/O type": "DI", "signal": "Contact", "device type": None},
        {"tag": "HL-1", "kind": "lamp", "device type": None},
        {"tag": "XV-1", "kind": "on/off valve", "device type": None},
    ],
)
def test_elc09_is_about_coils(row: Row) -> None:
    assert counts("ELC09", {**XY, **row}, types=[COIL]) == {"not applicable": 1}


def test_elc09_passes_with_its_assumptions_named() -> None:
    row = {**XY, "cable length": 10}
    result = audit(
        example_plant([row], types=[COIL], loops=[{**LOOP, "supply V min": None, "supply V nominal": 24}]),
        codes=["ELC09"],
        raise_errors=True,
    )
    assert counts("ELC09", row, **on(loop={"supply V min": None, "supply V nominal": 24})) == {"clear": 1}
    assert [each for each in result.assumptions if "supply 24" in each or "coil" in each or "drop" in each] == [
        "supply 24 V may be 5 % low",
        "no drop in an output card, as none is listed",
        "a coil pulls in at 85 % of its nominal voltage",
    ]


def test_elc09_gives_conductor_and_length() -> None:
    row = {**XY, "conductor size": "1.5 mm2"}
    assert fixes("ELC09", row, **on()) == [
        ("XY-1", "conductor of at least 4 mm2", {"conductor size": "4 mm2"}),
        ("XY-1", "cable no longer than 292 m", {"cable length": "292"}),
    ]
    assert cells("ELC09", row, **on()) == [
        ["Device types C2", "Loops C2", "Instruments H2"],
    ]


def test_elc09_tells_two_coils_on_one_output_apart() -> None:
    valve = {**XY, "tag": "XV-1", "kind": "on/off valve", "device type": None}
    solenoids = [
        {"tag": tag, "kind": "solenoid", "device type": "SV", "signal": "24 VDC"} for tag in ("XY-1A", "XY-1B")
    ]
    told = found("ELC09", valve, *solenoids, types=[COIL], loops=[{**LOOP, "circuit or tag": "XV-1"}])
    assert [(each.subject, each.part, each.found) for each in told] == [
        ("X-1", "XY-1A", "17.526 V"),
        ("X-1", "XY-1B", "17.526 V"),
    ]
    # Alone on the output the same coil does better.
    assert [each.found for each in found("ELC09", XY, **on())] == ["20.258 V"]


ZS: Row = {
    "tag": "ZSO-1",
    "kind": "switch",
    "signal": "NAMUR",
    "I/O type": "DI",
    "I/O address": "1",
    "conductor size": "1.5 mm2",
    "cable length": 1726,
}
ISOLATOR = {"code": "ISO", "kind": "isolator", "input limit ohm": 100}
CARD = {"code": "DI", "kind": "card", "input limit ohm": 20}
ZENER = {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 30}
PLAIN = {"code": "OTHER", "kind": "card"}
ALL = {"types": [ISOLATOR, CARD, ZENER, PLAIN]}


@pytest.mark.parametrize(
    ("row", "told"),
    [
        ({}, ""),
        ({"cable length": 1727}, "50.006 ohm, IEC 60947-5-6 allows 50 ohm"),
        ({"card": "OTHER", "cable length": 1727}, "50.006 ohm, IEC 60947-5-6 allows 50 ohm"),
        ({"barrier": "ISO", "cable length": 1727}, ""),
        ({"barrier": "ISO", "cable length": 3454}, "100.012 ohm, isolator ISO allows 100 ohm"),
        ({"card": "DI", "cable length": 690}, ""),
        ({"card": "DI", "cable length": 691}, "20.008 ohm, card DI allows 20 ohm"),
        # The isolator ends the line: the card's limit is of another circuit.
        ({"barrier": "ISO", "card": "DI", "cable length": 691}, ""),
        # A zener barrier stands in the line.
        ({"barrier": "ZB", "cable length": 690}, ""),
        ({"barrier": "ZB", "cable length": 691}, "50.008 ohm, IEC 60947-5-6 allows 50 ohm"),
        # What is known is too much already.
        ({"barrier": "ZB", "card": "DI", "cable length": None}, "30 ohm, card DI allows 20 ohm"),
    ],
)  # fmt: skip
def test_elc10_finds_a_line_with_too_much_resistance(row: Row, told: str) -> None:
    assert tell("ELC10", {**ZS, **row}, **ALL) == ([f"Z-1: the line of ZSO-1 has {told}"] if told else [])


@pytest.mark.parametrize(
    ("row", "blanks"),
    [
        ({"cable length": None}, {"cable length": 1}),
        ({"conductor size": None}, {"conductor size": 1}),
        ({"barrier": "X", "cable length": 5000}, {"barrier": 1}),
        ({"signal": None, "kind": "Proximity switch"}, {"signal": 1}),
    ],
)
def test_elc10_leaves_open_what_is_blank(row: Row, blanks: dict[str, int]) -> None:
    assert untold("ELC10", {**ZS, **row}, **ALL) == blanks


@pytest.mark.parametrize(
    "row", [{"signal": "Contact"}, {"signal": "24 VDC", "kind": "Proximity switch"}, {"wires": 3}, {"signal": None}]
)
def test_elc10_is_about_inputs_of_8_2_v(row: Row) -> None:
    assert counts("ELC10", {**ZS, **row, "cable length": 5000}, **ALL) == {"not applicable": 1}


def test_elc10_gives_the_longest_cable() -> None:
    row = {**ZS, "cable length": 2000}
    assert fixes("ELC10", row) == [("ZSO-1", "cable no longer than 1726 m", {"cable length": "1726"})]
    # No cable helps where the barrier alone is too much.
    assert fixes("ELC10", {**row, "barrier": "ZB", "card": "DI"}, **ALL) == []
