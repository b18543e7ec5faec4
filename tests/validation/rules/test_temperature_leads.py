"""Extension cables and two-wire leads: each side, each blank, each fix."""

from typing import Any

import pytest

from tests.validation.rules.applied import cells, counts, fixes, found, tell, untold

Row = dict[str, Any]
TC: Row = {
    "tag": "TE-1",
    "kind": "thermocouple",
    "signal": "TC type K",
    "I/O type": "TC",
    "I/O address": "1",
    "cable type": "KX",
    "LRV": "0 degC",
    "URV": "300 degC",
}
# Codes are names: what a cable is stands in its entry.
CABLE_TYPES: list[Row] = [
    {"code": "KX", "conductor size": 1.5, "extension type": "KX"},
    {"code": "KCB", "conductor size": 1.5, "extension type": "KCB"},
    {"code": "K", "conductor size": 1.5, "extension type": "Type K"},
    {"code": "JX", "conductor size": 1.5, "extension type": "JX"},
    {"code": "CU", "conductor size": 1.5, "extension type": "copper"},
    {"code": "NS", "conductor size": 1.5, "ohm per km": 12.1},
    {"code": "NSL", "conductor size": 1.5, "ohm per km": 24.2, "per conductor or per loop": "loop"},
    {"code": "ALLOY", "conductor size": 1.5, "ohm per km": 600},
    {"code": "OPEN", "conductor size": 1.5},
    {"code": "ODD", "conductor size": 1.5, "extension type": "see drawing"},
]
LISTED = {"cable_types": CABLE_TYPES}


@pytest.mark.parametrize(
    ("row", "told"),
    [
        ({}, ""),
        ({"cable type": "KCB"}, ""),
        ({"cable type": "K"}, ""),
        ({"cable type": "JX"}, "cable type JX is JX, TE-1 is type K"),
        ({"cable type": "CU"}, "cable type CU is copper, TE-1 is type K"),
        # An ordinary cable says nothing of thermocouples, but its resistance is that of copper.
        ({"cable type": "NS"}, "cable type NS is copper by its 12.1 ohm/km, TE-1 is type K"),
        ({"cable type": "NSL"}, "cable type NSL is copper by its 24.2 ohm/km, TE-1 is type K"),
        ({"signal": "TC type J"}, "cable type KX is KX, TE-1 is type J"),
        ({"signal": "Thermocouple NiCr-Ni"}, ""),
        # An element on an analogue input, with nothing between.
        ({"I/O type": "AI", "cable type": "JX"}, "cable type JX is JX, TE-1 is type K"),
    ],
)
def test_elc14_finds_a_cable_of_another_type(row: Row, told: str) -> None:
    assert tell("ELC14", {**TC, **row}, **LISTED) == ([f"T-1: {told}"] if told else [])


@pytest.mark.parametrize(
    ("row", "sheets", "blanks"),
    [
        ({"cable type": None}, LISTED, {"cable type": 1}),
        ({"cable type": "UNLISTED"}, LISTED, {"cable type": 1}),
        ({"cable type": "OPEN"}, LISTED, {"extension type": 1}),
        ({"cable type": "ALLOY"}, LISTED, {"extension type": 1}),
        ({"cable type": "ODD"}, LISTED, {"extension type": 1}),
        ({"signal": "TC", "kind": None}, LISTED, {"sensor type": 1}),
        ({"cable type": "1x2x1.5 mm2"}, {}, {"extension type": 1}),
    ],
)
def test_elc14_leaves_open_what_is_blank(row: Row, sheets: dict[str, Any], blanks: dict[str, int]) -> None:
    assert tell("ELC14", {**TC, **row}, **sheets) == []
    assert untold("ELC14", {**TC, **row}, **sheets) == blanks


@pytest.mark.parametrize(
    "row",
    [
        {"signal": "Pt100", "kind": "RTD", "I/O type": "RTD"},
        # The transmitter in the head sends 4-20 mA over copper.
        {"signal": "4-20 mA", "I/O type": "AI"},
        {"tag": "TT-1", "kind": "transmitter", "signal": "4-20 mA", "I/O type": "AI"},
    ],
)
def test_elc14_is_about_the_signal_of_thermocouples(row: Row) -> None:
    assert counts("ELC14", {**TC, **row, "cable type": "CU"}, **LISTED) == {"not applicable": 1}


def test_elc14_reads_the_text_where_no_cable_is_listed() -> None:
    assert tell("ELC14", {**TC, "cable type": "KX 2x1.5"}) == []
    assert tell("ELC14", {**TC, "cable type": "JX 2x1.5"}) == ["T-1: cable type JX 2x1.5 is JX, TE-1 is type K"]


def test_elc14_lets_copper_pass_behind_type_b_and_says_so() -> None:
    row = {**TC, "signal": "TC type B", "cable type": "CU"}
    assert counts("ELC14", row, **LISTED) == {"clear": 1}


CABLES: list[Row] = [
    {"number": "C-1", "from": "TE-1", "to": "JB-1", "length": 40, "type": "KX"},
    {"number": "M-1", "from": "JB-1", "to": "X", "length": 60, "type": "NS"},
]
JB: Row = {"tag": "JB-1", "kind": "junction box", "service": "Box"}


def test_elc14_looks_at_each_cable_of_the_run() -> None:
    row = {**TC, "cable type": None, "cable": "C-1", "junction box": "JB-1"}
    assert tell("ELC14", row, JB, cables=CABLES, **LISTED) == [
        "T-1: cable M-1, type NS, is copper by its 12.1 ohm/km, TE-1 is type K"
    ]
    # What the row says of the first does not hide the second.
    told = found("ELC14", {**row, "cable type": "KX"}, JB, cables=CABLES, **LISTED)
    assert [(each.part, each.found) for each in told] == [("M-1", "copper")]


def test_elc14_looks_at_the_cable_to_a_transmitter() -> None:
    transmitter = {"tag": "TT-1", "kind": "transmitter", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "1"}
    element = {**TC, "I/O type": None, "I/O address": None, "cable type": "NS"}
    told = found("ELC14", element, {**transmitter, "cable type": "OPEN"}, **LISTED)
    assert [(each.subject, each.part, each.found) for each in told] == [("T-1", "TE-1", "copper")]
    # What repeats the transmitter's own cable is no cable of the element.
    assert tell("ELC14", element, {**transmitter, "cable type": "NS"}, **LISTED) == []


def test_elc14_gives_the_cable_types_that_fit() -> None:
    assert fixes("ELC14", {**TC, "cable type": "JX"}, **LISTED) == [
        ("TE-1", "cable type K (Type K)", {"cable type": "K"}),
        ("TE-1", "cable type KCB (KCB)", {"cable type": "KCB"}),
        ("TE-1", "cable type KX (KX)", {"cable type": "KX"}),
    ]
    assert fixes("ELC14", {**TC, "cable type": "JX"}, cable_types=CABLE_TYPES[3:4]) == [
        ("T-1", "KX or KCA or KCB, green by IEC 60584-3 (from memory)", {}),
    ]
    row = {**TC, "cable type": None, "cable": "C-1", "junction box": "JB-1"}
    assert fixes("ELC14", row, JB, cables=CABLES, cable_types=[CABLE_TYPES[0], CABLE_TYPES[5]]) == [
        ("M-1", "cable type KX (KX)", {"type": "KX"}),
    ]


def test_elc14_shows_the_error() -> None:
    """Hot 300 degC, head 45, cabinet 25: 280.2 degC with copper; 'the compensation handles it' would be no error."""
    (one,) = found("ELC14", {**TC, "cable type": "NS"}, **LISTED)
    assert (one.off_by, one.found, one.wanted) == (
        "-19.8 K with a head at 45 degC and a cabinet at 25 degC", "copper", "KX, KCA, KCB",
    )  # fmt: skip
    assert one.working == (
        "type K takes KX, KCA, KCB (IEC 60584-3, from memory); with copper, a head at 45 degC and a cabinet at"
        " 25 degC, 300 degC is read as 280.2 degC (IEC 60584-1)"
    )
    assert cells("ELC14", {**TC, "cable type": "JX"}, **LISTED) == [
        ["Instruments G2", "Cable types C5", "Instruments D2"]
    ]


TE: Row = {
    "tag": "TE-1",
    "kind": "RTD",
    "signal": "Pt100",
    "wires": 2,
    "LRV": "0 degC",
    "URV": "100 degC",
    "I/O type": "RTD",
    "I/O address": "1",
    "cable length": 200,
    "cable type": "C",
}
COPPER = {"cable_types": [{"code": "C", "conductor size": 1, "class": 5}]}
AT_20 = {"plant": {"ELC hot degC": "20"}}


@pytest.mark.parametrize(
    ("row", "sheets", "told"),
    [
        ({}, AT_20, "7.8 ohm: it reads 20.63 K too high at 100 °C, 0.5 K allowed"),
        # Hot, where the case at 20 degC says less.
        ({}, {}, "9.333 ohm: it reads 24.70 K too high at 100 °C, 0.5 K allowed"),
        ({"cable length": 4}, {}, ""),
        ({"cable length": 5}, {"plant": {"ELC15 K": "0.62"}}, ""),
        ({"cable length": 5}, {}, "0.2333 ohm: it reads 0.62 K too high at 100 °C, 0.5 K allowed"),
        ({"cable length": 40, "signal": "Pt1000"}, {}, ""),
        ({"cable length": 41, "signal": "Pt1000"}, {}, "1.913 ohm: it reads 0.504 K too high at 100 °C, 0.5 K allowed"),
        # The range may stand in Fahrenheit, and reversed.
        ({"LRV": "212 degF", "URV": "32 degF"}, AT_20, "7.8 ohm: it reads 20.63 K too high at 100 °C, 0.5 K allowed"),
        # Without a range: too much whatever it measures.
        ({"LRV": None, "URV": None}, AT_20, "7.8 ohm: it reads 18.18 K too high at -200 °C already, 0.5 K allowed"),
    ],
)  # fmt: skip
def test_elc15_finds_leads_that_add_too_much(row: Row, sheets: dict[str, Any], told: str) -> None:
    assert tell("ELC15", {**TE, **row}, **COPPER, **sheets) == (
        [f"T-1: the two leads of TE-1 have {told}"] if told else []
    )


@pytest.mark.parametrize(
    ("row", "blanks"),
    [
        ({"wires": None}, {"wires": 1}),
        ({"cable length": None}, {"cable length": 1}),
        ({"cable type": None}, {"conductor size": 1}),
        ({"signal": "RTD", "kind": None}, {"sensor type": 1}),
        ({"LRV": None, "URV": None, "cable length": 4}, {"URV": 1}),
        ({"barrier": "X", "cable length": 1}, {"barrier": 1}),
    ],
)
def test_elc15_leaves_open_what_is_blank(row: Row, blanks: dict[str, int]) -> None:
    assert tell("ELC15", {**TE, **row}, **COPPER) == []
    assert untold("ELC15", {**TE, **row}, **COPPER) == blanks


def test_elc15_needs_no_range_where_any_passes() -> None:
    assert counts("ELC15", {**TE, "LRV": None, "URV": None, "cable length": 1}, **COPPER) == {"clear": 1}


@pytest.mark.parametrize(
    "row",
    [
        {"wires": 3},
        {"wires": 4},
        {"wires": None, "signal": "Pt100 3-wire"},
        {"signal": "4-20 mA", "I/O type": "AI"},
        {"signal": "TC type K", "kind": "thermocouple", "I/O type": "TC"},
    ],
)
def test_elc15_is_about_two_wires(row: Row) -> None:
    assert counts("ELC15", {**TE, **row}, **COPPER) == {"not applicable": 1}


def test_elc15_gives_three_wires_and_the_longest_cable() -> None:
    assert fixes("ELC15", TE, **COPPER) == [
        ("TE-1", "three wires", {"wires": "3"}),
        ("TE-1", "cable no longer than 4 m", {"cable length": "4"}),
    ]
    types = [{"code": "T", "kind": "element", "sensor type": "Pt100", "wires": 2}]
    assert fixes("ELC15", {**TE, "device type": "T"}, types=types, **COPPER)[0] == ("T-1", "three wires", {})


def test_elc15_looks_at_the_leads_to_a_transmitter() -> None:
    transmitter = {
        "tag": "TT-1", "kind": "transmitter", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "1",
        "LRV": "0 degC", "URV": "100 degC", "cable length": 300, "cable type": "C",
    }  # fmt: skip
    element = {**TE, "I/O type": None, "I/O address": None, "LRV": None, "URV": None}
    told = found("ELC15", element, transmitter, **COPPER)
    assert [(each.subject, each.part, each.found) for each in told] == [("T-1", "TE-1", "24.70 K")]
    assert tell("ELC15", {**element, "wires": 3}, transmitter, **COPPER) == []
