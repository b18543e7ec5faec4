from __future__ import annotations

import pytest

from instruments.kind import Kind
from instruments.workbook.lists import records_of_sheets
from loops.plant import Plant, assemble
from tests.instruments.workbook.sheets import KINDS, sheet
from validation.example import example_plant, outcomes, said


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
        ({"tag": "LA 34", "signal": "240 V contact"}, False),
        ({"tag": "PI 29", "signal": "3-15 lb."}, True),
        # nothing of its own
        ({"tag": "PI 28"}, False),
        ({"tag": "FIC-6", "I/O type": "AI", "location": "DCS"}, False),
    ],
)
def test_a_tag_names_the_measuring_point_where_no_transmitter_does(row: dict[str, str], point: bool) -> None:
    (installed,) = example_plant([row]).instruments
    assert installed.measuring_point is point


@pytest.mark.parametrize(
    ("row", "kind", "kind_from"),
    [
        ({"tag": "PV-1", "device type": "EP"}, Kind.CONTROL_VALVE, "letters"),
        ({"tag": "XV-1", "device type": "SV"}, Kind.ON_OFF_VALVE, "letters"),
        ({"tag": "PY-1", "device type": "EP"}, Kind.POSITIONER, "type"),
        ({"tag": "XY-1", "device type": "SV"}, Kind.SOLENOID, "type"),
        ({"tag": "PV-1", "kind": "positioner", "device type": "EP"}, Kind.POSITIONER, "row"),
        ({"tag": "PT-1", "device type": "G"}, Kind.ANALYSER, "type"),
    ],
)
def test_a_blank_kind_is_the_type_s_but_a_valve_stays_one(row: dict[str, str], kind: Kind, kind_from: str) -> None:
    types = [
        {"code": "EP", "kind": "positioner"},
        {"code": "SV", "kind": "solenoid"},
        {"code": "G", "kind": "analyser"},
    ]
    (found,) = example_plant([row], types=types).instruments
    assert (found.kind, found.kind_from) == (kind, kind_from)


def test_a_loop_with_a_transmitter_has_no_measuring_point() -> None:
    found = example_plant([{"tag": "FIC-1", "I/O type": "AI"}, {"tag": "FT-1", "I/O type": "AI"}]).instruments
    assert [each.measuring_point for each in found] == [False, False]


@pytest.mark.parametrize(
    ("row", "equipment"),
    [
        ({"equipment": "P101.M01", "I/O type": "DI"}, True),
        ({"equipment": "P101.M01", "I/O type": "DO"}, True),
        ({"equipment": "P101.M01", "I/O type": "AI"}, False),
        ({"equipment": "P101.M01", "I/O type": "DI", "kind": "Limit switch"}, False),
        ({"equipment": "V-1", "I/O type": "DI", "URV": "3 m"}, False),
        ({"equipment": "", "I/O type": "DI"}, False),
        ({"equipment": "P101.M01", "I/O type": ""}, False),
    ],
)
def test_a_drives_signal_needs_no_tag(row: dict[str, str], equipment: bool) -> None:
    plant = example_plant([{"tag": "", "service": "Pump 1 running", **row}, {"tag": "LSH-2", "service": "High"}])
    (installed,) = (each for each in plant.instruments if not each.record.tag)
    assert installed.equipment_tag is equipment


def listed(index: list[dict[str, str]], io_list: list[dict[str, str]]) -> dict[str, list[str | None]]:
    plant = example_plant(index, io_list=io_list)
    return {each.name: [row.io_address for row in each.listed] for each in plant.instruments}


def test_an_instrument_without_channel_in_the_index_has_the_io_lists() -> None:
    index = [{"tag": tag, "P&ID": "D-1", "I/O address": io} for tag, io in (("PT-1", ""), ("FT 2", "A1"), ("LT-3", ""))]
    io_list = [
        {"tag": tag, "I/O type": "AI", "I/O address": io}
        for tag, io in (("PT 1", "B1"), ("PT-1", "B2"), ("FT-2", "B3"), ("TT-4", "B4"))
    ]
    assert listed(index, io_list) == {"PT-1": ["B1", "B2"], "FT 2": [], "LT-3": []}


def test_what_the_io_list_alone_says_is_checked() -> None:
    index = [{"tag": tag, "service": "Feed", "P&ID": "D-1"} for tag in ("PT-1", "FT-2", "LT-3")]
    io_list = [
        {"tag": "PT-1", "I/O type": "DI", "I/O address": "B1", "signal": "4-20 mA"},
        {"tag": "FT-2", "I/O type": "AI", "I/O address": "B1", "signal": "4-20 mA"},
    ]
    assert said("ELC16", index, io_list=io_list) == ["PT-1: 4-20 mA does not fit the I/O type DI"]
    assert said("WIR01", index, io_list=io_list) == ["FT-2, PT-1: FT-2, PT-1 are on one I/O address, B1"]
    assert outcomes("WIR01", index, io_list=io_list) == {"finding": 2, "unchecked": 1}
    assert said("ELC16", [{**index[0], "signal": "4-20 mA"}], io_list=[{**io_list[0], "signal": ""}]) == [
        "PT-1: 4-20 mA does not fit the I/O type DI"
    ]


LIMITS = """
Code|Description|LRL|URL|Unit
P1|Pressure transmitter|0|10|barg
P2|Level switch|||
P3|Level transmitter|0|4|m
"""
ENTITY = """
Code|Description|Ex marking|Ui V|URL
P1|PT, gauge|Ex ia IIC T4 Ga|30|
P2|Level switch|Ex ia IIC T6 Ga|15|
P3|Level transmitter|Ex ia IIC T4 Ga|30|5 m
"""
INDEX = "Tag|Service\nPT-1|Feed\nLSH-2|Feed"


def catalogue(*texts: str, names: tuple[str, ...] = ("Device types", "Entity parameters")) -> Plant:
    sheets = [sheet(text, name=name) for text, name in zip(texts, names, strict=False)]
    return assemble(records_of_sheets([sheet(INDEX, name="Index"), *sheets], KINDS))


@pytest.mark.parametrize("texts", [(LIMITS, ENTITY), (ENTITY, LIMITS)])
def test_two_sheets_complete_an_entry_where_they_do_not_disagree(texts: tuple[str, str]) -> None:
    plant = catalogue(*texts)
    shown = {
        entry.code: (str(entry.lrl), str(entry.url), entry.ex_marking, entry.ui_v) for entry in plant.types.values()
    }
    assert shown == {
        "P1": ("0 barg", "10 barg", "Ex ia IIC T4 Ga", 30.0),
        "P2": ("None", "None", "Ex ia IIC T6 Ga", 15.0),
    }
    assert plant.types_twice == {"p3"}
    cells = [
        (cell.sheet, cell.address)
        for text in texts
        for name in ("url" if text is LIMITS else "ui_v",)
        for cell in plant.types["p1"].cells(name)
    ]
    assert cells == [("Device types", "D2"), ("Entity parameters", "D2")]


def test_two_entries_of_one_sheet_are_two() -> None:
    plant = catalogue("Code|LRL|URL|Unit|Ui V\nP1|0|10|bar|\nP1||||30\nP2||||30\nP3||||30")
    assert (sorted(plant.types), plant.types_twice) == (["p2", "p3"], {"p1"})


# ---------------------------------------------------------------------------------------- instruments and their rows


@pytest.mark.parametrize(
    ("rows", "names"),
    [
        # Rows that agree are one; blanks agree with everything.
        ([{"service": "Feed", "URV": "10 barg"}, {"service": "Feed", "line": "L1"}], ["PT-1"]),
        ([{"URV": "10 barg"}, {"URV": "1000 kPag"}], ["PT-1"]),
        # Rows that differ only in signal and wiring are one instrument; the service may differ where the address does.
        ([{"I/O address": "A1", "signal": "4-20 mA"}, {"I/O address": "D1", "signal": "pulse"}], ["PT-1"]),
        ([{"I/O address": "A1", "service": "Flow"}, {"I/O address": "D1", "service": "Total"}], ["PT-1"]),
        # Rows that disagree are two, told apart by number.
        ([{"URV": "10 barg"}, {"URV": "16 barg"}], ["PT-1", "PT-1 (2)"]),
        ([{"service": "Feed"}, {"service": "Drain"}], ["PT-1", "PT-1 (2)"]),
        ([{"I/O address": "A1", "URV": "1 bar"}, {"I/O address": "D1", "URV": "2 bar"}], ["PT-1", "PT-1 (2)"]),
        # One that is not live is none of them.
        ([{"URV": "10 barg"}, {"URV": "16 barg", "status": "spare"}], ["PT-1", "PT-1 (spare)"]),
    ],
)
def test_rows_of_one_tag(rows: list[dict[str, str]], names: list[str]) -> None:
    listed_rows = [{"tag": "PT-1", "P&ID": "D-1", **row} for row in rows]
    for ordered in (listed_rows, listed_rows[::-1]):
        assert [each.name for each in example_plant(ordered).instruments] == names


@pytest.mark.parametrize(
    ("row", "loop", "loop_from"),
    [
        ({"tag": "PT-101"}, "P-101", "tag"),
        ({"tag": "10-PT-101A"}, "10-P-101", "tag"),
        ({"tag": "PT-101", "loop": "77"}, "77", "column"),
        # A pump, a plant code without a letter, no tag at all.
        ({"tag": "P-101", "I/O type": "DI"}, None, ""),
        ({"tag": "P-101", "I/O type": "DI", "loop": "M-101"}, "M-101", "column"),
        ({"tag": "MOV-101"}, None, ""),
        ({"device type": "T1", "URV": "1 bar"}, None, ""),
    ],
)
def test_the_loop_of_an_instrument(row: dict[str, str], loop: str | None, loop_from: str) -> None:
    rows = [{"service": "x", **row}, {"tag": "TT-9", "service": "y", "loop": "T-9", "I/O type": "AI"}]
    found = next(each for each in example_plant(rows).instruments if each.name != "TT-9")
    assert (found.loop, found.loop_from) == (loop, loop_from)


def test_an_instrument_is_found_however_its_tag_is_written() -> None:
    plant = example_plant([{"tag": tag, "service": tag} for tag in ("PT-101", "PT-102", "FT-101A")])
    assert [each.name for text in ("PT 101", "pt101", "PT-101") for each in plant.by_tag(text)] == ["PT-101"] * 3
    assert plant.by_tag("FT-101") == plant.by_tag("PT-0101") == plant.by_tag("feed") == ()


@pytest.mark.parametrize(
    ("name", "found"),
    [
        ("AI8", "AI8"), ("ai 8", "AI8"), ("PB-1", "ISO"), ("pb1", "ISO"), ("PB-2", None), ("ZZ", None),
        ("TWICE", None), ("", None), (None, None),
    ],
)  # fmt: skip
def test_a_device_type_is_named_by_its_code_or_by_a_tag_that_has_it(name: str | None, found: str | None) -> None:
    rows = [{"tag": "PB-1", "device type": "ISO", "kind": "isolator"}, {"tag": "PB-2", "kind": "isolator"}]
    types = [
        {"code": "AI8", "kind": "card"},
        {"code": "ISO", "kind": "isolator"},
        {"code": "TWICE", "kind": "card", "input ohm": 250},
        {"code": "TWICE", "kind": "card", "input ohm": 100},
    ]
    entry = example_plant(rows, types=types).named_type(name)
    assert (entry.code if entry else None) == found


@pytest.mark.parametrize(
    ("row", "limits", "body"),
    [
        ({"device type": "G"}, "10 barg", "gauge"),
        # The row's own limits before the catalogue's; the rest of the entry stays.
        ({"device type": "G", "URL": "16 barg"}, "16 barg", "gauge"),
        ({"URL": "16 bara"}, "16 bara", "absolute"),
        ({"body": "differential", "URL": "250 mbar"}, "250 mbar", "differential"),
        ({"device type": "A"}, "10 bara", "absolute"),
        ({}, None, None),
    ],
)
def test_the_limits_that_hold(row: dict[str, str], limits: str | None, body: str | None) -> None:
    types = [
        {"code": "G", "kind": "transmitter", "body": "gauge", "URL": "10 barg"},
        {"code": "A", "kind": "transmitter", "body": "", "URL": "10 bara"},
    ]
    (found,) = example_plant([{"tag": "PT-1", "service": "x", **row}], types=types).instruments
    assert (str(found.type.url) if found.type and found.type.url else None, found.body) == (limits, body)


def test_a_part_takes_what_is_wrong_with_whole_columns_from_the_whole() -> None:
    whole, part = (example_plant([{"tag": "PT-1", "service": "x"}]) for _ in range(2))
    assert whole.whole_finding("TAG90", lambda plant: "wrong") == "wrong"
    part.stand_in(whole)
    assert part.whole_finding("TAG90", lambda plant: "asked again") == "wrong"
    assert part.whole_finding("TAG91", lambda plant: "asked") == "asked"


def test_a_part_and_a_part_of_it_know_the_whole() -> None:
    whole, part, smaller = (example_plant([{"tag": "PT-1", "service": "x"}]) for _ in range(3))
    part.stand_in(whole)
    smaller.stand_in(part)
    assert [each.whole is whole for each in (whole, part, smaller)] == [True, True, True]


@pytest.mark.parametrize("order", [(0, 1, 2, 3), (3, 2, 1, 0), (1, 3, 0, 2)])
def test_an_area_of_the_rows_own_cells_is_spelt_as_most_have_it_in_any_order(order: tuple[int, ...]) -> None:
    spelt = ("zone 1 iib t3", "Zone 1 IIB T3", "Zone 1  IIB T3", "Zone 1 IIB T3")
    rows = [f"PT-{number}|Feed|{spelt[number]}" for number in order]
    plant = assemble(
        records_of_sheets([sheet("\n".join(["Tag|Service|Area classification", *rows]), name="Index")], KINDS)
    )
    assert {each.area.code for each in plant.instruments if each.area is not None} == {"Zone 1 IIB T3"}
    assert len(plant.instruments) == 4
