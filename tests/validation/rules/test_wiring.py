"""Channels: both sides of each boundary, what may share one, who needs one, and what cannot be told."""

from typing import Any

import pytest

from tests.validation.rules.applied import Row, cells, counts, found, tell, untold

# ------------------------------------------------------------------------------------------------------------ WIR01

COLUMNS = ("tag", "I/O address", "I/O type", "system", "card", "loop", "signal", "status")


def channels(*rows: tuple[str, ...]) -> list[Row]:
    return [{**dict.fromkeys(COLUMNS, ""), **dict(zip(COLUMNS, row, strict=False))} for row in rows]


def one(tags: str, address: str) -> str:
    return f"{tags}: {tags} are on one I/O address, {address}"


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ([("FT-4", "R1.7"), ("FT-5", "R1.8")], []),
        ([("FT-4", "R1.7"), ("FT-5", "R1.7")], [one("FT-4, FT-5", "R1.7")]),
        ([("FT-10", "R1.7"), ("FT-9", "r1 .7"), ("FT-5", "R1.7")], [one("FT-5, FT-9, FT-10", "R1.7")]),
        ([("FT-4", "R1.7"), ("FT-5", "R1.7", "", "", "", "", "", "deleted")], []),
        ([("FT-4", "R1.7"), ("FT-5", "")], []),
        # Several addresses of the same instruments are one finding.
        ([("FT-4", "R1.1", "AI"), ("FT-4", "R1.2", "DI"), ("FT-5", "R1.1", "AI"), ("FT-5", "R1.2", "DI")],
         [one("FT-4, FT-5", "R1.1, R1.2")]),
        ([("FT-4", "R1.7"), ("P-5", "R1.7", "DI")], [one("FT-4, P-5", "R1.7")]),
        # A bus segment or a serial link may repeat.
        ([("FT-4", "MB-SEG-01", "Bus"), ("FT-5", "MB-SEG-01", "Bus")], []),
        ([("FT-4", "N1.3", "FF"), ("FT-5", "N1.3", "FF")], []),
        ([("FT-4", "N1.3", "", "", "", "", "Modbus RTU"), ("FT-5", "N1.3", "", "", "", "", "Modbus RTU")], []),
        ([("FT-4", "N1.3", "AI"), ("FT-5", "N1.3", "FF")], [one("FT-4, FT-5", "N1.3")]),
        # Two valves of one split range may share; three, two of two loops and two on/off valves not.
        ([("FV-1A", "A1", "AO"), ("FV-1B", "A1", "AO")], []),
        ([("FV-1A", "A1", "AO"), ("FV-1B", "A1", "AO"), ("FY-1A", "A1", "AO"), ("FY-1B", "A1", "AO")], []),
        ([("FV-1A", "A1", "AO"), ("FV-1B", "A1", "AO"), ("FV-1C", "A1", "AO")], [one("FV-1A, FV-1B, FV-1C", "A1")]),
        ([("FV-1A", "A1", "AO"), ("PV-1A", "A1", "AO")], [one("FV-1A, PV-1A", "A1")]),
        ([("FV-1A", "A1", "AO", "", "", "F-1"), ("FV-2A", "A1", "AO", "", "", "F-2")], [one("FV-1A, FV-2A", "A1")]),
        ([("XV-1A", "A1", "DO"), ("XV-1B", "A1", "DO")], [one("XV-1A, XV-1B", "A1")]),
        ([("FV-1A", "A1", "DO"), ("FV-1B", "A1", "DO")], [one("FV-1A, FV-1B", "A1")]),
        # One signal on two rows: a valve and what drives it, an element and its transmitter, what shows it.
        ([("FV-1", "A1", "AO"), ("FY-1", "A1", "AO")], []),
        ([("XV-1", "A1", "DO"), ("XY-1", "A1", "DO")], []),
        ([("TE-1", "A1", "RTD"), ("TT-1", "A1", "AI")], []),
        ([("TE-1A", "A1", "RTD"), ("TE-1B", "A1", "RTD")], [one("TE-1A, TE-1B", "A1")]),
        ([("FT-1", "A1", "AI"), ("FI-1", "A1", "AI"), ("FIC-1", "A1", "AI")], []),
        ([("FT-1", "A1", "AI"), ("FI-2", "A1", "AI")], [one("FI-2, FT-1", "A1")]),
        ([("ZSO-1", "A1", "DI"), ("ZSC-1", "A1", "DI")], [one("ZSC-1, ZSO-1", "A1")]),
        # An address of two systems is two; of one that is not told it may be either's.
        ([("FT-4", "R1", "AI", "DCS"), ("FT-5", "R1", "AI", "SIS")], []),
        ([("FT-4", "R1", "AI", "DCS"), ("FT-5", "R1", "AI", "")], [one("FT-4, FT-5", "R1")]),
        ([("FT-4", "R1", "AI", "DCS"), ("FT-5", "R1", "AI", "SIS"), ("FT-6", "R1", "AI", "")],
         [one("FT-4, FT-6", "R1"), one("FT-5, FT-6", "R1")]),
        # A bare channel is a place only with its card.
        ([("FT-4", "3", "AI", "", "C1"), ("FT-5", "3", "AI", "", "C2")], []),
        ([("FT-4", "3", "AI", "", "C1"), ("FT-5", "3", "AI", "", "C1")], [one("FT-4, FT-5", "3")]),
        ([("FT-4", "Ch 3", "AI", "", "C1"), ("FT-5", "ch.3", "AI", "", "C1")], [one("FT-4, FT-5", "Ch 3, ch.3")]),
        ([("FT-4", "3", "AI"), ("FT-5", "3", "AI")], []),
    ],
)  # fmt: skip
def test_one_address_is_of_one_signal(rows: list[tuple[str, ...]], expected: list[str]) -> None:
    assert tell("WIR01", *channels(*rows)) == expected


def test_a_rack_in_a_column_of_its_own_is_part_of_the_address() -> None:
    rows = [
        {"tag": f"FT-{n}", "I/O address": "3", "Rack": rack, "line": "L"} for n, rack in ((4, "1"), (5, "2"), (6, "2"))
    ]
    assert tell("WIR01", *rows) == [one("FT-5, FT-6", "3")]


def test_the_same_address_in_two_packages() -> None:
    rows = channels(("FT-4", "R1", "AI", "package"), ("FT-5", "R1", "AI", "package"))
    assert tell("WIR01", *rows) == [one("FT-4, FT-5", "R1")]


def test_the_cells_are_those_of_the_shared_address() -> None:
    rows = channels(("FT-4", "R1.2"), ("FT-5", "R1.2"), ("FT-6", "R1.3"))
    assert [sorted(each) for each in cells("WIR01", *rows)] == [["Instruments C2", "Instruments C3"]]


@pytest.mark.parametrize(
    ("rows", "blanks", "outcomes"),
    [
        ([("FT-4", "R1"), ("FT-5", "")], {"I/O address": 1}, {"clear": 1, "unchecked": 1}),
        ([("FT-4", "3", "AI"), ("FT-5", "3", "AI"), ("FT-6", "4", "AI")], {"card": 1}, {"clear": 1, "unchecked": 2}),
        # Who needs no address: local ones, an element with its transmitter, a valve without a signal.
        ([("PG-1", ""), ("FV-2", ""), ("TE-3", ""), ("TT-3", "R1"), ("FIC-4", "")], {},
         {"clear": 1, "not applicable": 4}),
        ([("TE-3", ""), ("FV-2", "", "AO"), ("PUMP 7", "")], {"I/O address": 3}, {"unchecked": 3}),
    ],
)  # fmt: skip
def test_an_address_that_is_not_told(
    rows: list[tuple[str, ...]], blanks: dict[str, int], outcomes: dict[str, int]
) -> None:
    assert untold("WIR01", *channels(*rows)) == blanks
    assert counts("WIR01", *channels(*rows)) == outcomes


# ------------------------------------------------------------------------------------------------------------ WIR06

NONE = "{} has neither I/O type nor address"


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "PT-1"}, NONE.format("a transmitter")),
        ({"tag": "PT-1", "I/O type": "AI"}, ""),
        ({"tag": "PT-1", "I/O address": "R1.1"}, ""),
        ({"tag": "PT-1", "I/O type": "none"}, NONE.format("a transmitter")),
        ({"tag": "PT-1", "I/O type": "TBA"}, NONE.format("a transmitter")),
        ({"tag": "PT-1", "card": "AI-16"}, NONE.format("a transmitter")),
        ({"tag": "PT-1", "signal": "Profibus PA"}, NONE.format("a transmitter")),
        ({"tag": "PT-1", "signal": "WirelessHART"}, ""),
        ({"tag": "AIT-1"}, NONE.format("an analyser")),
        ({"tag": "PSH-1"}, NONE.format("a switch")),
        ({"tag": "GD-1"}, NONE.format("a gas detector")),
        ({"tag": "HS-1"}, NONE.format("a hand switch")),
        ({"tag": "XY-1"}, NONE.format("a solenoid")),
        # A local kind has none.
        ({"tag": "PG-1"}, ""),
        ({"tag": "PG-1", "I/O type": "local"}, ""),
        ({"tag": "PG-1", "kind": "pressure gauge", "I/O type": "AI"}, "a gauge, which is local, has I/O: AI"),
        ({"tag": "LG-1", "I/O address": "R1.1"}, "a glass, which is local, has I/O: R1.1"),
        ({"tag": "PSV-1", "I/O type": "DI"}, "a relief valve, which is local, has I/O: DI"),
        # Not asked: valves, functions of the system, boxes, equipment, what is not live.
        ({"tag": "FV-1"}, ""),
        ({"tag": "TIC-1", "I/O type": "AI"}, ""),
        ({"tag": "JB-1", "I/O type": "DI"}, ""),
        ({"tag": "P-1", "I/O type": "DI"}, ""),
        ({"tag": "PT-1", "status": "deleted"}, ""),
        # An element that goes nowhere is found as such.
        ({"tag": "TE-1"}, ""),
    ],
)
def test_what_is_wired_to_the_system_has_a_channel(row: Row, expected: str) -> None:
    blank = {"I/O type": "", "I/O address": "", "kind": "", "line": "L-1"}
    lines = tell("WIR06", {**blank, **row}, {**blank, "tag": "PT-9", "I/O type": "AI"})
    assert lines == ([f"{row['tag']}: {expected}"] if expected else [])


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ([("TE-1",), ("TT-1", "R1", "AI")], []),
        ([("TE-1",), ("TG-1",)], []),
        ([("XY-1",), ("XV-1", "R1", "DO")], []),
        ([("FY-1",), ("FV-1", "R1", "AO")], []),
        ([("XY-1",), ("XV-1",)], ["XY-1: a solenoid has neither I/O type nor address"]),
        ([("SOV-1",), ("SDV-1", "R1", "DO")], []),
        ([("SOV-1",), ("SDV-2", "R1", "DO")], ["SOV-1: a solenoid has neither I/O type nor address"]),
    ],
)
def test_whose_channel_is_another_ones(rows: list[tuple[str, ...]], expected: list[str]) -> None:
    assert tell("WIR06", *channels(*rows)) == expected


@pytest.mark.parametrize(
    ("row", "blanks"),
    [
        ({"tag": "PUMP 7"}, {"kind": 1}),
        ({"tag": "TE-1", "loop": ""}, {}),
        ({"tag": "PT-1A/B", "I/O address": "R1"}, {"I/O address": 1}),
    ],
)
def test_what_cannot_be_told_of_a_channel(row: Row, blanks: dict[str, int]) -> None:
    blank = {"I/O type": "", "I/O address": "", "line": "L-1"}
    assert untold("WIR06", {**blank, **row}, {**blank, "tag": "PT-9", "I/O type": "AI"}) == blanks


NO_COLUMN = "list.xlsx: no sheet has a column for I/O type or address; {} wired to the system"


@pytest.mark.parametrize(
    ("tags", "sheets", "expected"),
    [
        (["PT-1", "PG-2", "XV-3", "TE-4", "TE-5", "TT-5"], {}, [NO_COLUMN.format("3 instruments are")]),
        (["PT-1", "PG-2"], {}, [NO_COLUMN.format("1 instrument is")]),
        (["PG-2", "XV-3"], {}, []),
        # Where the index leaves channels to the other lists.
        (["PT-1", "PT-2"], {"io_list": [{"tag": "PT-1", "I/O type": "AI"}]}, [NO_COLUMN.format("1 instrument is")]),
        (["PT-1"], {"io_list": [{"tag": "PT-1", "I/O type": "AI"}]}, []),
        (["PT-1"], {"loops": [{"number": "P-1", "circuit or tag": "PT-1", "kind": "AI"}]}, []),
    ],
)
def test_without_the_columns(tags: list[str], sheets: dict[str, Any], expected: list[str]) -> None:
    rows = [{"tag": tag, "line": "L-1"} for tag in tags]
    assert tell("WIR06", *rows, **sheets) == expected


def test_a_link_has_no_channel_that_a_list_without_columns_lacks() -> None:
    linked = {"tag": "AIT-1", "line": "L-1", "signal": "Modbus TCP"}
    assert tell("WIR06", linked, {"tag": "PT-2", "line": "L-1", "signal": "4-20 mA"}) == [
        NO_COLUMN.format("1 instrument is")
    ]
    assert tell("WIR06", linked) == []
    # With the columns there is one to fill.
    assert tell("WIR06", {**linked, "I/O type": ""}, {"tag": "PT-2", "I/O type": "AI"}) == [
        "AIT-1: an analyser has neither I/O type nor address"
    ]


def test_a_blank_in_the_index_is_found_though_another_list_fills_it() -> None:
    blank = {"line": "L-1", "LRV": "0 bar"}
    rows = [{**blank, "tag": tag, "I/O type": io} for tag, io in (("PT-1", ""), ("TE-2", ""), ("PT-9", "AI"))]
    io_list = [{"tag": "PT-1", "I/O type": "AI"}, {"tag": "TE-2", "I/O type": "RTD"}]
    assert tell("WIR06", *rows, io_list=io_list) == [
        "PT-1: a transmitter has neither I/O type nor address",
        "TE-2: an element has neither I/O type nor address",
    ]


def test_what_the_other_list_says_of_a_channel() -> None:
    rows = [{"tag": tag, "line": "L-1", "LRV": "0 bar"} for tag in ("PT-1", "PT-2", "PG-3")]
    io_list = [{"tag": tag, "I/O type": "AI", "I/O address": "R1.1"} for tag in ("PT-1", "PT-2", "PG-3")]
    assert tell("WIR01", *rows[:2], io_list=io_list) == [one("PT-1, PT-2", "R1.1")]
    assert tell("WIR06", *rows, io_list=io_list) == ["PG-3: a gauge, which is local, has I/O: AI"]
    assert cells("WIR06", *rows, io_list=io_list) == [["IO list B4", "IO list C4"]]


def test_a_blank_channel_tells_its_reason() -> None:
    blank = {"I/O type": "", "I/O address": "by vendor", "line": "L-1"}
    each = found("WIR06", {"tag": "PT-1", **blank}, {"tag": "PT-9", "I/O type": "AI", "line": "L-1"})
    assert [one.found for one in each] == ["blank (by vendor)"]
