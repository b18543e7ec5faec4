from __future__ import annotations

import datetime
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from instruments.plant_data import PlantData
from instruments.workbook.headings import match_sheet
from instruments.workbook.normalise import read_records
from instruments.workbook.sheet import Sheet
from tests.instruments.workbook.sheets import KINDS, all_said, matched, read, said, sheet

# --- units: the cell's own, the unit column, the heading, the default, none ---

RANGES = [
    # heading, cells of the row, what is read (lrv, urv, range_unit), unitless
    ("Tag|LRV|URV|Unit", "PT-1|0|10|barg", ("0 barg", "10 barg", "barg"), {}),
    ("Tag|LRV|URV|Unit", "PT-1|0|100 psig|barg", ("0 barg", "100 psig", "psig"), {}),
    ("Tag|LRV (bar)|URV (bar)|Unit", "PT-1|0|10|barg", ("0 barg", "10 barg", "barg"), {}),
    ("Tag|LRV (bar)|URV (bar)|Unit", "PT-1|0|10|", ("0 bar", "10 bar", "bar"), {}),
    ("Tag|LRV|URV", "PT-1|0|10 barg", ("0 barg", "10 barg", "barg"), {}),
    ("Tag|LRV|URV", "PT-1|0|10", (None, None, None), {"lrv": "0", "urv": "10"}),
    ("Tag|LRV|URV|Unit", "PT-1|0|10|-", (None, None, None), {"lrv": "0", "urv": "10"}),
    ("Tag|Range", "PT-1|0-100 barg", ("0 barg", "100 barg", "barg"), {}),
    ("Tag|Range (barg)", "PT-1|0 to 100", ("0 barg", "100 barg", "barg"), {}),
    ("Tag|Range|Unit", "PT-1|-1...3|barg", ("-1 barg", "3 barg", "barg"), {}),
    ("Tag|Range", "PT-1|0-100", (None, None, None), {"lrv": "0", "urv": "100"}),
    ("Tag|Range", "FT-1|4-20mA = 0-250 m³/h", ("0 m³/h", "250 m³/h", "m³/h"), {}),
    ("Tag|LRV|URV|Unit", "AT-1|0|14|pH", ("0 pH", "14 pH", "pH"), {}),
    ("Tag|LRV|URV|Unit", "AT-1|0|100|%", ("0 %", "100 %", "%"), {}),
    ("Tag|LRV|URV|Unit", "PT-1|10|0|barg", ("10 barg", "0 barg", "barg"), {}),
]


@pytest.mark.parametrize(("heading", "row", "wanted", "unitless"), RANGES)
def test_a_range_takes_its_unit(
    heading: str, row: str, wanted: tuple[str | None, ...], unitless: dict[str, str]
) -> None:
    (record,) = read(f"{heading}\n{row}").records
    found = (record.lrv, record.urv, record.range_unit)
    assert tuple(each if each is None else str(each) for each in found) == wanted
    assert dict(record.unitless) == unitless
    assert record.unread == frozenset()


@pytest.mark.parametrize(
    ("row", "wanted"),
    [
        ("PT-1|0|60|psig|0|600", ("0 psig", "600 psig")),
        ("TT-1|0|600|degF|0|100", None),  # may be a percentage
        ("TT-1|0|100|degF|0|100", ("0 °F", "100 °F")),
        ("FT-1|0|100|inH2O|0|5000", None),  # may be a flow
        ("LT-1|-15|15|inH2O|-15|15", ("-15 inH2O", "15 inH2O")),
        ("FT-1|0|40|t/h|0|50", ("0 t/h", "50 t/h")),
    ],
)
def test_a_system_range_without_any_unit_is_in_the_ranges(row: str, wanted: tuple[str, str] | None) -> None:
    found = read(f"Tag|LRV|URV|Unit|DCS Min|DCS Max\n{row}")
    (record,) = found.records
    if wanted is None:
        assert (record.system_lrv, record.system_urv) == (None, None)
        assert set(record.unitless) == {"system_lrv", "system_urv"}
        assert found.assumptions == ()
    else:
        assert (str(record.system_lrv), str(record.system_urv), dict(record.unitless)) == (*wanted, {})
        assert found.assumptions == ("system range without unit read in the unit of the range",)


SETTINGS = [
    # settings take their own unit column, else the range's, else the system's where that is of another dimension
    ("Tag|LRV|URV|Unit|H", "PT-1|0|10|barg|8", {"setting_h": "8 barg"}),
    ("Tag|LRV|URV|Unit|H", "PT-1|0|10|barg|800 mbarg", {"setting_h": "800 mbarg"}),
    ("Tag|LRV|URV|Unit|H|Setting Unit", "PT-1|0|10|barg|800|mbarg", {"setting_h": "800 mbarg"}),
    ("Tag|LRV|URV|Unit|H (psig)", "PT-1|0|10|barg|80", {"setting_h": "80 psig"}),
    ("Tag|Range|H", "PT-1|0-10 barg|8", {"setting_h": "8 barg"}),
    ("Tag|Range|DCS Range|H", "FT-1|0-2500 mmH2O|0-100 m3/h|80", {"setting_h": "80 m³/h"}),
    ("Tag|Range|DCS Range|H", "PT-1|0-10 barg|0-1000 kPag|8", {"setting_h": "8 barg"}),
    ("Tag|LRV|URV|Unit|H", "LSHH-1|||m|4.8", {"setting_h": "4.8 m"}),
    ("Tag|Range|DCS Range|Normal", "FT-1|0-2500 mmH2O|0-100 m3/h|50", {"operating_value_normal": "50 m³/h"}),
    ("Tag|LRV|URV|Unit|Normal", "PT-1|0|10|barg|5", {"operating_value_normal": "5 barg"}),
    ("Tag|Type|Unit|Set pressure", "PSV-1|Relief valve|barg|6", {"set_pressure": "6 barg"}),
]


@pytest.mark.parametrize(("heading", "row", "wanted"), SETTINGS)
def test_settings_and_operating_values_take_their_unit(heading: str, row: str, wanted: dict[str, str]) -> None:
    (record,) = all_said(read(f"{heading}\n{row}"))
    names = ("setting_h", "operating_value_normal", "set_pressure")
    assert {name: record[name] for name in names if name in record} == wanted


def test_an_unreadable_unit_is_one_problem_and_takes_its_numbers_with_it() -> None:
    found = read("Tag|LRV|URV|Unit|H\nAT-1|0|150|Hazen|90\nAT-2|0|14|pH|9")
    assert [(each.cell.address, each.field, each.subject, each.reason) for each in found.problems] == [
        ("D2", "range_unit", "AT-1", "unit 'Hazen' is not known")
    ]
    assert all_said(found) == [
        {"tag": "AT-1", "unread": ["lrv", "range_unit", "setting_h", "urv"]},
        {"tag": "AT-2", "lrv": "0 pH", "urv": "14 pH", "range_unit": "pH", "setting_h": "9 pH"},
    ]


def test_what_every_cell_of_a_column_suffers_is_told_once() -> None:
    found = read("Tag|LRV|URV|Unit\nAT-1|0|150|Hazen\nAT-2|0|14|Hazen\nAT-3|0|14|Hazen\nAT-4|0|14|TBA")
    (problem,) = found.problems
    assert (problem.whole_column, problem.cells_concerned, problem.subject, problem.cell.address) == (True, 3, "", "D2")
    assert (found.cells_unread, found.cells_read) == (3, 17)


def test_numbers_in_a_columns_own_unit() -> None:
    found = read("Tag|Cable Length|Cable Type|Ui (V)|Ci (pF)|Receiver ohm\nPT-1|120|1P|30 V|1100|0.25 kohm")
    (record,) = all_said(found)
    assert record == {
        "tag": "PT-1",
        "cable_length_m": 120.0,
        "cable_type": "1P",
        "receiver_ohm": 250.0,
        "own": {"ui_v": 30.0, "ci_nf": 1.1},
    }
    assert found.assumptions == ("cable length without unit read as m",)
    assert read("Tag|Cable Length (ft)\nPT-1|100").records[0].cable_length_m == 30.48


def test_a_unit_column_beside_a_number_of_its_own() -> None:
    found = read("Tag|Service|Cable Length|Unit\nPT-1|Feed|100|ft\nPT-2|Feed|100|m\nPT-3|Feed|100|kg")
    assert [record.cable_length_m for record in found.records] == [30.48, 100.0, None]
    assert [each.reason for each in found.problems] == ["unit 'kg' is not a unit of this column (m)"]


LIMITS = [
    ("Tag|Sensor Range|Cal Range|Unit", "PT-1|0-40|0-25|barg", {"lrl": "0 barg", "url": "40 barg"}),
    ("Tag|LRL|URL|LRV|URV|Range Unit", "PT-1|-1|40|0|25|barg", {"lrl": "-1 barg", "url": "40 barg"}),
    (
        ("Tag|LRL|URL|Limit Unit|LRV|URV|Range Unit"),
        "PT-1|-1|40|bara|0|25|barg",
        {"lrl": "-1 bara", "url": "40 bara", "limit_unit": "bara"},
    ),
    ("Tag|LRL|URL|Cal Range", "PT-1|-1|40|0-25 barg", {"lrl": "-1 barg", "url": "40 barg"}),
    ("Tag|Range|Sensor Range", "PT-1|0-25 barg|-1 to 40 bara", {"lrl": "-1 bara", "url": "40 bara"}),
]


@pytest.mark.parametrize(("heading", "row", "own"), LIMITS)
def test_limits_on_a_row_without_a_unit_of_their_own_are_in_the_ranges(
    heading: str, row: str, own: dict[str, str]
) -> None:
    (record,) = all_said(read(f"{heading}\n{row}"))
    assert record["own"] == own


def test_device_limits_on_a_row_make_a_type_for_that_row() -> None:
    found = read("Tag|LRL|URL|Limit Unit|Min. span|HART\nPT-1|-1|10|barg|0.2|Y\nPT-2||||| ")
    assert all_said(found) == [
        {
            "tag": "PT-1",
            "own": {
                "lrl": "-1 barg",
                "url": "10 barg",
                "limit_unit": "barg",
                ("minimum_span"): "0.2 barg",
                "hart": True,
            },
        },
        {"tag": "PT-2"},
    ]


# --- blanks with a reason ---

PLACEHOLDERS = [
    ("N/A", "not applicable"),
    ("n.a.", "not applicable"),
    ("-", "not applicable"),
    ("—", "not applicable"),
    ("nil", "not applicable"),
    ("TBA", "to be defined"),
    ("?", "to be defined"),
    ("XXX", "to be defined"),
    ("HOLD", "on hold"),
    ("HOLD-3", "hold 3"),
    ("BY VENDOR", "by vendor"),
    ("VTA", "by vendor"),
    ("SEE NOTE 4", "see note 4"),
    ("(Note 2)", "see note 2"),
]


@pytest.mark.parametrize("heading", ["Maker", "Alarm H", "Cable length", "Range", "Fail Pos.", "HART", "Wires"])
@pytest.mark.parametrize(("text", "reason"), PLACEHOLDERS)
def test_a_placeholder_is_blank_with_a_reason(heading: str, text: str, reason: str) -> None:
    found = read(f"Tag|Service|{heading}\nPT-1|Feed|{text}")
    (record,) = found.records
    field = matched(f"Tag|Service|{heading}\nPT-1|Feed|{text}").columns
    (match,) = (each for each in field.values() if each.index == 2)
    assert {record.blanks.get(name) for name in match.column.into or (match.field,)} == {reason}
    assert (found.problems, record.unread) == ((), frozenset())


KEPT_WORDS = [
    ("Haz. Area Class.", "N/A", {"area_classification": "N/A"}, {}),
    ("Haz. Area Class.", "none", {"area_classification": "none"}, {}),
    ("Haz. Area Class.", "safe", {"area_classification": "safe"}, {}),
    ("Haz. Area Class.", "-", {}, {"area_classification": "not applicable"}),
    ("Haz. Area Class.", "TBA", {}, {"area_classification": "to be defined"}),
    ("Scope of supply", "Vendor", {"scope": "Vendor"}, {}),
    ("Hold", "HOLD-3", {"hold": "HOLD-3"}, {}),
    ("Contact", "NO", {"contact": "NO"}, {}),
    ("Contact", "N.C.", {"contact": "NC"}, {}),
    ("HART", "none", {"own": {"hart": False}}, {}),
    ("I/O Type", "DO", {"io_type": "DO"}, {}),
    ("I/O Type", "DI/DO", {"io_type": "DI/DO"}, {}),
    ("Remarks", "See note 4", {"remarks": "See note 4"}, {}),
]


@pytest.mark.parametrize(("heading", "text", "wanted", "blanks"), KEPT_WORDS)
def test_where_such_a_word_is_a_value_it_is_kept(
    heading: str, text: str, wanted: dict[str, Any], blanks: dict[str, str]
) -> None:
    (record,) = all_said(read(f"Tag|Service|{heading}\nPT-1|Feed|{text}"))
    assert record == {"tag": "PT-1", "service": "Feed", **wanted, **({"blanks": blanks} if blanks else {})}


def test_ditto_repeats_the_row_above() -> None:
    found = read(
        'Tag|Service|LRV|URV|Unit|Maker|HART\nPT-1|Feed|0|10|barg|Kestrix|Y\nPT-2|"|"|"|"|ditto|do\nPT-3|'
        'as above|-"-|16|-do-|TBA|"\nPT-4|"|0|1|bar|"|N'
    )
    base = {"service": "Feed", "lrv": "0 barg", "range_unit": "barg", "own": {"hart": True}}
    assert all_said(found) == [
        {"tag": "PT-1", **base, "urv": "10 barg", "maker": "Kestrix"},
        {"tag": "PT-2", **base, "urv": "10 barg", "maker": "Kestrix"},
        {"tag": "PT-3", **base, "urv": "16 barg", "blanks": {"maker": "to be defined"}},
        {
            "tag": "PT-4",
            "service": "Feed",
            "lrv": "0 bar",
            "urv": "1 bar",
            "range_unit": "bar",
            "own": {"hart": False},
            "blanks": {"maker": "to be defined"},
        },
    ]
    assert found.records[1].cells("maker")[0].address == "F3"


def test_ditto_without_a_row_above_is_blank() -> None:
    found = read('Tag|Service|H (bar)\nPT-1|"|"')
    assert dict(found.records[0].blanks) == {
        "service": "ditto without a row above",
        "setting_h": "ditto without a row above",
    }


INCH_OR_DITTO = [
    # unit of the row above, the row with the sign, its unit
    ("LT-1|0|100|mm", 'LT-2|0|40|"', None),  # either
    ("LT-1|0|100|in", 'LT-2|0|40|"', "in"),
    ("PT-1|0|100|barg", 'PT-2|0|40|"', "barg"),
    ("LT-1|0|100|barg", 'LT-2|"|"|"', "barg"),
]


@pytest.mark.parametrize(("above", "row", "unit"), INCH_OR_DITTO[1:])
def test_a_quotation_mark_in_a_unit_column_is_inch_or_ditto(above: str, row: str, unit: str) -> None:
    found = read(f"Tag|LRV|URV|Unit\n{above}\n{row}")
    assert str(found.records[1].range_unit) == unit


def test_a_quotation_mark_that_may_be_either_is_a_problem() -> None:
    found = read('Tag|LRV|URV|Unit\nLT-1|0|100|mbar\nLT-2|0|40|"')
    (problem,) = found.problems
    assert (problem.cell.address, problem.readings) == ("D3", ("inch", "mbar"))
    assert found.records[1].unread == {"range_unit", "lrv", "urv"}


def test_a_bare_letter_in_which_the_tag_is_not_measured_is_a_problem() -> None:
    found = read("Tag|LRV|URV|Unit\nTT-1|0|100|C\nPT-1|0|100|C\nLT-1|0|10|M")
    assert [str(record.range_unit) for record in found.records] == ["°C", "None", "m"]
    assert [(each.cell.address, each.subject) for each in found.problems] == [("D3", "PT-1")]


# --- numbers ---


@pytest.mark.parametrize(
    ("cells", "wanted"),
    [
        (("2,5", "1,000"), "1 barg"),  # a comma is this column's decimal mark
        (("2.5", "1,000"), "1000 barg"),
        (("1.000,5", "1,000"), "1 barg"),
        (("4", "1 000"), "1000 barg"),
    ],
)
def test_the_column_tells_what_a_comma_means(cells: tuple[str, str], wanted: str) -> None:
    found = read(f"Tag|H (barg)\nPT-1|'{cells[0]}\nPT-2|'{cells[1]}")
    assert str(found.records[1].setting_h) == wanted


def test_a_comma_of_which_nothing_tells_is_a_problem_with_both_readings() -> None:
    found = read("Tag|H (barg)\nPT-1|'1,000\nPT-2|'8")
    assert [(each.text, each.readings) for each in found.problems] == [("1,000", ("1", "1000"))]
    assert found.records[0].unread == {"setting_h"}


def test_the_sheet_tells_where_the_column_does_not() -> None:
    found = read("Tag|Min|Max|Unit\nPT-1|'-0.02|'0.02|bar\nFT-1|'0|'27,648|m3/h", numbers=False)
    assert str(found.records[1].urv) == "27648 m³/h"


@pytest.mark.parametrize(
    ("cell", "look", "heading", "wanted"),
    [
        (34.0, "0000", "Loop No.", {"loop": "0034"}),
        (1001.0, None, "Loop No.", {"loop": "1001"}),
        (1001.0, '"PT-"0', "Loop No.", {"loop": "PT-1001"}),
        (0.25, "0%", "Alarm H", {"setting_h": "25 %"}),
        (16.0, '0" barg"', "Alarm H", {"setting_h": "16 barg"}),
        (0.30000000000000004, None, "Alarm H (bar)", {"setting_h": "0.3 bar"}),
    ],
)
def test_a_number_is_read_as_it_looks(cell: float, look: str | None, heading: str, wanted: dict[str, str]) -> None:
    made = sheet(f"Tag|{heading}\nPT-1|x", number_formats={(1, 1): look} if look else {})
    made.rows[1][1] = cell
    (record,) = all_said(read(made))
    assert record == {"tag": "PT-1", **wanted}


def test_true_and_false_are_no_numbers() -> None:
    made = sheet("Tag|HART|Service\nPT-1|x|y\nPT-2|x|y")
    made.rows[1][1:], made.rows[2][1:] = [True, 1.0], [False, True]
    assert all_said(read(made)) == [
        {"tag": "PT-1", "service": "1", "own": {"hart": True}},
        {"tag": "PT-2", "service": "TRUE", "own": {"hart": False}},
    ]


def test_a_date_in_a_column_of_tags_or_numbers_is_a_problem() -> None:
    made = sheet("Tag|H (bar)\nx|8\nPT-2|y")
    made.rows[1][0] = datetime.date(2024, 12, 5)
    made.rows[2][1] = datetime.date(2024, 3, 1)
    found = read(made)
    assert [(each.cell.address, each.reason, each.readings) for each in found.problems] == [
        ("A2", "the spreadsheet made a date or time of it", ("5-DEC", "12-05", "05-12")),
        ("B3", "the spreadsheet made a date or time of it", ("03-01", "01-03")),
    ]
    assert all_said(found) == [
        {"setting_h": "8 bar", "unread": ["tag"]},
        {"tag": "PT-2", "unread": ["setting_h"]},
    ]


TWO_STATES = [
    ("Tag|Range|Unit|I/O", "XS-1|0-1|Boolean|DI", "two states, no unit"),
    ("Tag|Range|Unit|I/O", "XS-1|0-1||DI", "two states, no range"),
    ("Tag|Range|Unit|I/O", "XS-1|On/Off||DI", "two states, no range"),
    ("Tag|Range|Unit|I/O", "XS-1|Open / Closed||DI", "two states, no range"),
]


@pytest.mark.parametrize(("heading", "row", "reason"), TWO_STATES)
def test_two_states_are_no_range(heading: str, row: str, reason: str) -> None:
    found = read(f"{heading}\n{row}")
    assert dict(found.records[0].blanks) == {"lrv": reason, "urv": reason}
    assert (found.problems, dict(found.records[0].unitless)) == ((), {})


def test_three_values_in_one_cell() -> None:
    found = read("Tag|Oper. Press. (barg)|Op Temp\nPT-1|2/5/8|20 / 40 / 60 °C\nPT-2|5|AMB\nPT-3|1/2/3/4|")
    assert all_said(found) == [
        {
            "tag": "PT-1",
            "operating_pressure_min": "2 barg",
            "operating_pressure_normal": "5 barg",
            "operating_pressure_max": "8 barg",
            "operating_temperature_min": "20 °C",
            "operating_temperature_normal": "40 °C",
            "operating_temperature_max": "60 °C",
        },
        {
            "tag": "PT-2",
            "operating_pressure_normal": "5 barg",
            "blanks": {f"operating_temperature_{end}": "ambient" for end in ("min", "normal", "max")},
        },
        {"tag": "PT-3", "unread": [f"operating_pressure_{end}" for end in ("max", "min", "normal")]},
    ]


def test_a_column_of_its_own_goes_before_one_of_three() -> None:
    found = read("Tag|Oper. Press. (barg)|Max Oper. Press. (barg)\nPT-1|5|9\nPT-2|2/5/8|9")
    assert all_said(found, "operating_pressure_normal", "operating_pressure_max") == [
        {"operating_pressure_normal": "5 barg", "operating_pressure_max": "9 barg"},
        {"operating_pressure_normal": "5 barg", "operating_pressure_max": "9 barg"},
    ]


def test_a_value_of_the_wrong_dimension_is_a_problem() -> None:
    found = read("Tag|Design pressure|Service\nPT-1|100 °C|Feed\nPT-2|16 barg|Feed")
    assert [(each.cell.address, each.reason) for each in found.problems] == [("B2", "'100 °C' is no pressure")]


def test_a_column_may_hold_pressure_and_temperature() -> None:
    found = read("Tag|Design P/T (barg/°C)\nPT-1|20 / 90\nPT-2|16/120\nPT-3|N/A\nPT-4|25")
    assert all_said(found, "design_pressure", "design_temperature") == [
        {"design_pressure": "20 barg", "design_temperature": "90 °C"},
        {"design_pressure": "16 barg", "design_temperature": "120 °C"},
        {},
        {},
    ]
    assert [(each.cell.address, each.reason) for each in found.problems] == [
        ("B5", "'25' holds 1 value where 2 are wanted")
    ]


def test_a_flow_column_says_nothing_of_a_pressure() -> None:
    found = read("Tag|Service|Flow normal (m3/h)\nFT-1|Feed|80\nPT-2|Feed|80")
    assert all_said(found) == [
        {"tag": "FT-1", "service": "Feed", "operating_value_normal": "80 m³/h"},
        {"tag": "PT-2", "service": "Feed", "other": (("Flow normal (m3/h)", "80"),)},
    ]


def test_a_set_point_is_read_by_what_it_belongs_to() -> None:
    found = read(
        "Tag|Type|Set point|Unit\nPSV-1|Relief valve|6|barg\nPSHH-2|Pressure switch|8|barg\nFIC-3|"
        "Controller|50|m3/h\nLSL-4||0.4|m\nPCV-5|Regulator|2|barg"
    )
    names = ("set_pressure", "trip", "other")
    assert all_said(found, *names) == [
        {"set_pressure": "6 barg"},
        {"trip": "8 barg"},
        {"other": (("Set point", "50"),)},
        {"trip": "0.4 m"},
        {"set_pressure": "2 barg"},
    ]


SETTINGS_IN_ONE_CELL = [
    ("H=8 HH=9 bar", {"setting_h": "8 barg", "setting_hh": "9 barg"}),
    (
        "LL 1, L 2, H 8, HH 9",
        {"setting_ll": "1 barg", "setting_l": "2 barg", "setting_h": "8 barg", "setting_hh": "9 barg"},
    ),
    ("PSHH\\n9 barg\\nPSH\\n800 mbarg", {"setting_h": "800 mbarg", "setting_hh": "9 barg"}),
    ("TRIP @ 9.5", {"trip": "9.5 barg"}),
    ("Hi-Hi: 9", {"setting_hh": "9 barg"}),
    ("see cause & effect", {"other": (("Alarm settings", "see cause & effect"),)}),
    ("H per cause & effect", {"other": (("Alarm settings", "H per cause & effect"),)}),
]


@pytest.mark.parametrize(("text", "wanted"), SETTINGS_IN_ONE_CELL)
def test_a_cell_may_name_several_settings(text: str, wanted: dict[str, Any]) -> None:
    found = read(f"Tag|Range|Alarm settings\nPT-1|0-10 barg|{text}\nPT-2|0-10 barg|H=8\nPT-3|0-10 barg|H=8")
    names = ("setting_ll", "setting_l", "setting_h", "setting_hh", "trip", "other")
    assert all_said(found, *names)[0] == wanted
    assert found.problems == ()


@pytest.mark.parametrize("text", ["H 8 H 9", "12/10 barg", "9"])
def test_figures_of_which_nobody_says_which_setting_they_are_are_a_problem(text: str) -> None:
    found = read(
        f"Tag|Range|Alarm settings\nPT-1|0-10 barg|{text}\nPT-2|0-10 barg|H=8\nPT-3|0-10 barg|H=8", numbers=False
    )
    assert [(each.cell.address, each.reason) for each in found.problems] == [
        ("C2", f"'{text}' does not say which settings it holds")
    ]
    assert {"setting_h", "setting_hh", "trip"} <= found.records[0].unread


def test_a_set_point_in_a_column_of_ranges_is_a_set_point() -> None:
    found = read("Tag|Type|Range\nPSV-1|Relief valve|Set 12 barg\nPG-2|Gauge|0-25 barg\nPSL-3|Switch|Set at 2 barg")
    names = ("lrv", "urv", "set_pressure", "trip", "blanks")
    assert all_said(found, *names) == [
        {"set_pressure": "12 barg", "blanks": {"lrv": "set point", "urv": "set point"}},
        {"lrv": "0 barg", "urv": "25 barg"},
        {"trip": "2 barg", "blanks": {"lrv": "set point", "urv": "set point"}},
    ]
    assert found.problems == ()


def test_a_certificate_behind_the_marking_is_parted_from_it() -> None:
    found = read(
        "Tag|Ex marking / certificate\nPT-1|Ex ia IIC T4 Ga, BVX 15 ATEX 1012X\nPT-2|"
        "Ex d IIB T6 (IECEx BVX 16.0007)\nPT-3|Ex d IIB T6"
    )
    assert all_said(found, "ex_marking", "certificate") == [
        {"ex_marking": "Ex ia IIC T4 Ga", "certificate": "BVX 15 ATEX 1012X"},
        {"ex_marking": "Ex d IIB T6", "certificate": "IECEx BVX 16.0007"},
        {"ex_marking": "Ex d IIB T6"},
    ]
    assert [each.address for each in found.records[0].cells("certificate")] == ["B2"]


def test_a_card_without_a_channel_is_no_address() -> None:
    found = read("Tag|Card|Channel|Service\nPT-1|C1|1|Feed\nPT-2|C1||Feed")
    assert all_said(found, "card", "io_address") == [{"card": "C1", "io_address": "Slot C1 Ch 1"}, {"card": "C1"}]


# --- words ---

WORDS = [
    ("Fail Pos.", "FC", "failure_position", "closed"),
    ("Fail Pos.", "Fail Closed (FC)", "failure_position", "closed"),
    ("Fail Pos.", "Stay put", "failure_position", "in place"),
    ("Fail Pos.", "öffnet", "failure_position", "open"),
    ("Burnout", "Upscale", "failure_direction", "high"),
    ("Location", "Field", "location", "field"),
    ("Location", "Local Panel LP-1", "location", "panel"),
    ("Mounting", "Diaphragm seal, capillary", "mounting", "remote seal"),
    ("System", "PLC-1", "system", "control"),
    ("HART", "✓", "hart", True),
    ("HART", "nein", "hart", False),
    ("HART", "HART 7", "hart", True),
    ("Sqrt", "Linear", "square_root_device", False),
    ("Sqrt", "SQ RT", "square_root_device", True),
    ("Wires", "4-wire", "wires", 4),
    ("Wires", "2L", "wires", 2),
]


@pytest.mark.parametrize(("heading", "text", "field", "value"), WORDS)
def test_words_are_read(heading: str, text: str, field: str, value: object) -> None:
    found = read(f"Tag|Service|{heading}\nPT-1|Feed|{text}")
    (record,) = found.records
    owner = record.own if field == "hart" else record
    assert (getattr(owner, field), found.problems) == (value, ())


UNREAD_WORDS = [
    ("Fail Pos.", "FO/FC", "failure_position", ("open", "closed")),
    ("Fail Pos.", "yes", "failure_position", ("open", "closed", "in place", "indeterminate")),
    ("HART", "4-20 mA", "hart", ("yes", "no")),
    ("Wires", "2 or 4", "wires", ()),
]


@pytest.mark.parametrize(("heading", "text", "field", "readings"), UNREAD_WORDS)
def test_a_word_that_is_none_of_the_set_is_a_problem(
    heading: str, text: str, field: str, readings: tuple[str, ...]
) -> None:
    found = read(f"Tag|Service|{heading}\nPT-1|Feed|{text}")
    assert [(each.field, each.text, each.readings) for each in found.problems] == [(field, text, readings)]
    assert found.records[0].unread == {field}


@pytest.mark.parametrize(
    ("heading", "text", "wanted"),
    [
        ("Mounting", "Tank top", {"other": (("Mounting", "Tank top"),)}),
        ("Location", "Filter gallery", {"place": "Filter gallery"}),
    ],
)
def test_where_and_how_it_stands_may_be_said_in_any_words(heading: str, text: str, wanted: dict[str, Any]) -> None:
    other = {"Mounting": "Direct", "Location": "Field"}[heading]
    found = read(f"Tag|{heading}\nPT-1|{text}\nPT-2|{other}")
    assert (all_said(found)[0], found.problems) == ({"tag": "PT-1", **wanted}, ())


def test_the_letters_choose_among_the_kinds_that_words_leave_open() -> None:
    found = read("Tag|Type\nFE-1|Electromagnetic flowmeter\nFIT-1|Electromagnetic flowmeter\nPT-2|Gizmo")
    assert [str(record.kind) for record in found.records] == ["element", "transmitter", "None"]
    assert found.records[2].kind_written == "Gizmo"
    assert found.assumptions == ("kind 'Gizmo' is not known: the kind is taken from the tag's letters",)


# --- tags ---


def test_tags_are_normalised_and_notes_go_to_the_remarks() -> None:
    found = read("Tag|Service|Remarks\nPT–1001|Feed|\n pt 1002 (Note 3)|Feed|new\nPT-1003 DELETED|Feed|")
    assert all_said(found, "tag", "remarks", "status") == [
        {"tag": "PT-1001"},
        {"tag": "PT 1002", "remarks": "new; Note 3"},
        {"tag": "PT-1003", "remarks": "DELETED", "status": "deleted"},
    ]
    assert [record.tag_written for record in found.records] == ["PT–1001", "pt 1002 (Note 3)", "PT-1003 DELETED"]


def test_a_cell_of_several_tags_makes_a_record_of_each() -> None:
    found = read("Tag|Service|I/O Address|Cable|Serial\nPT-1A/B|Feed|1.1, 1.2|C-1|S-7\nPT-2|Feed|1.3|C-3|S-8")
    assert all_said(found) == [
        {
            "tag": "PT-1A",
            "tag_cell": "PT-1A/B",
            "service": "Feed",
            "io_address": "1.1",
            "cable": "C-1",
            "serial": "S-7",
        },
        {
            "tag": "PT-1B",
            "tag_cell": "PT-1A/B",
            "tag_number": 1,
            "service": "Feed",
            "io_address": "1.2",
            "blanks": {"cable": "shared cell", "serial": "shared cell"},
        },
        {"tag": "PT-2", "service": "Feed", "io_address": "1.3", "cable": "C-3", "serial": "S-8"},
    ]
    assert (found.rows, len(found.records)) == (2, 3)


def test_a_tag_in_several_columns_keeps_its_zeros() -> None:
    made = sheet(
        "Function|Number|Suffix|Service\nPT|34|A|Feed\nTT|35||Feed", number_formats={(1, 1): "0000", (2, 1): "0000"}
    )
    assert [record.tag for record in read(made).records] == ["PT-0034A", "TT-0035"]


def test_the_plants_pattern_says_how_tags_are_written() -> None:
    made = sheet("Tag|Service\n036FV001/2|Feed\n036FV003|Feed")
    plant = PlantData(tag_pattern=r"(?P<p>\d{3})(?P<l>[A-Z]+)(?P<n>\d{3})")
    found = read_records(made, matched(made), plant=plant)
    assert [record.tag for record in found.records] == ["036FV001", "036FV002", "036FV003"]


# --- rows ---

LIST = """
THORNMERE WORKS|||
Doc. No.|X-1|Rev.|F
|||
Item|Tag No.|Service|H (bar)
INLET WORKS|||
1|PT-1|Feed|8
2|PT-2|Feed|8
Item|Tag No.|Service|H (bar)
1.2|FILTERS||
3|PT-3|Feed|8
|UNIT 30 - STORE||
||Not tagged yet|8
4|SPARE||
Page 1 of 3|||
5|PT-5|DELETED|8
END OF LIST|||
NOTES:|||
1. bar is bar gauge.|||
VFC|volt-free contact||
"""


def test_rows_are_told_apart() -> None:
    found = read(LIST)
    assert all_said(found, "tag", "service", "place", "status", "blanks") == [
        {"tag": "PT-1", "service": "Feed", "place": "INLET WORKS"},
        {"tag": "PT-2", "service": "Feed", "place": "INLET WORKS"},
        {"tag": "PT-3", "service": "Feed", "place": "1.2 FILTERS"},
        {"service": "Not tagged yet", "place": "UNIT 30 - STORE"},
        {"status": "spare", "place": "UNIT 30 - STORE", "blanks": {"tag": "spare"}},
        {"tag": "PT-5", "service": "DELETED", "place": "UNIT 30 - STORE", "status": "deleted"},
    ]
    assert found.sections == ((5, "INLET WORKS"), (9, "1.2 FILTERS"), (11, "UNIT 30 - STORE"))
    assert found.notes == (
        (1, "THORNMERE WORKS"),
        (2, "Doc. No. | X-1 | Rev. | F"),
        (14, "Page 1 of 3"),
        (16, "END OF LIST"),
        (17, "NOTES:"),
        (18, "1. bar is bar gauge."),
        (19, "VFC | volt-free contact"),
    )


def test_a_line_at_the_foot_may_stand_under_numbers() -> None:
    found = read("H (bar)|Tag|Service\n8|PT-1|Feed\nPage 1 of 3||\n8|PT-2|Feed\n8||Note this\nEND OF LIST||\nNOTES||")
    assert all_said(found, "tag", "service") == [
        {"tag": "PT-1", "service": "Feed"},
        {"tag": "PT-2", "service": "Feed"},
        {"service": "Note this"},
    ]
    assert found.notes == ((3, "Page 1 of 3"), (6, "END OF LIST"), (7, "NOTES"))
    assert found.problems == ()


def test_both_rows_of_a_repeated_heading_are_dropped() -> None:
    found = read("Tag|Range||\n|Min|Max|Units\nPT-1|0|9|bar\nTag|Range||\n|Min|Max|Units\nPT-2|0|9|bar")
    assert [record.tag for record in found.records] == ["PT-1", "PT-2"]


def test_a_list_goes_on_below_its_notes() -> None:
    found = read("Tag|Service|H (bar)\nPT-1|Feed|8\nNOTES||\n1. See PT-1||\nPT-2|Feed|8\nPT-3|Feed|")
    assert [record.tag for record in found.records] == ["PT-1", "PT-2", "PT-3"]


def test_merged_cells_are_filled_down_and_blanks_are_not() -> None:
    made = sheet("Tag|P&ID|Service|Maker\nPT-1|D-1|Feed|Kestrix\nPT-2||Feed|\nPT-3||Feed|", merged=((1, 1, 3, 1),))
    found = read(made)
    assert all_said(found, "tag", "pid", "maker") == [
        {"tag": "PT-1", "pid": "D-1", "maker": "Kestrix"},
        {"tag": "PT-2", "pid": "D-1"},
        {"tag": "PT-3", "pid": "D-1"},
    ]
    assert found.merged == 2


def test_struck_out_rows_are_deleted_and_kept() -> None:
    made = sheet("Tag|Service|Maker\nPT-1|Feed|X\nPT-2|Feed|X", struck={(1, 0), (1, 1), (1, 2), (2, 2)})
    assert all_said(read(made), "tag", "status") == [{"tag": "PT-1", "status": "deleted"}, {"tag": "PT-2"}]


def test_of_a_cell_struck_out_in_part_the_rest_is_read() -> None:
    made = sheet("Tag|Service|H (bar)\nPT-1|Feed|8 9\nPT-2|Feed|8", partly_struck={(1, 2): "9"})
    assert str(read(made).records[0].setting_h) == "9 bar"


STATUS = [
    ("Status", "Deleted in rev C", "deleted"),
    ("Status", "IFC", "IFC"),
    ("Status", "Future", "future"),
    ("Service", "SPARE", "spare"),
    ("Service", "NOT USED", "void"),
    ("Service", "VOID - see PT-2", "void"),
    ("Service", "Feed pressure (FUTURE)", "future"),
    ("Service", "Spare pump discharge", None),
    ("Service", "Feed pump B (spare)", None),
]


@pytest.mark.parametrize(("heading", "text", "status"), STATUS)
def test_rows_no_longer_live_are_kept_with_their_status(heading: str, text: str, status: str | None) -> None:
    (record,) = read(f"Tag|{heading}|Maker\nPT-1|{text}|X").records
    assert (record.tag, record.status) == ("PT-1", status)


def test_unknown_columns_are_kept_with_their_row() -> None:
    found = read("Tag|Service|Weight (kg)|\nPT-1|Feed|4|odd\nPT-2|Feed||")
    assert [record.other for record in found.records] == [(("Weight (kg)", "4"), ("column D", "odd")), ()]


def test_cells_that_show_an_error_are_problems() -> None:
    made = sheet(
        "Tag|Service|LRV|URV|Unit|Odd\nPT-1|Feed|0||bar|\nPT-2|Feed|0|9||\n|Feed|0|9|bar|",
        errors={(1, 3): "#REF!", (1, 5): "#N/A", (3, 0): "#VALUE!"},
        no_value={(2, 4)},
    )
    found = read(made)
    assert [(each.cell.address, each.field, each.title, each.text) for each in found.problems] == [
        ("D2", "urv", "URV", "#REF!"),
        ("F2", "", "Odd", "#N/A"),
        ("E3", "range_unit", "range unit", ""),
        ("A4", "tag", "tag", "#VALUE!"),
    ]
    assert [sorted(record.unread) for record in found.records] == [["", "urv"], ["lrv", "range_unit", "urv"], ["tag"]]
    assert str(found.records[0].lrv) == "0 bar"


def test_an_error_in_the_title_and_a_cell_far_away_are_counted_too() -> None:
    made = sheet("WORKS|\nTag|Service\nPT-1|Feed", errors={(0, 1): "#REF!"}, far={(1_048_575, 16_383): "x"})
    found = read(made)
    assert [(each.cell.address, each.text) for each in found.problems] == [("B1", "#REF!"), ("XFD1048576", "x")]
    assert (found.cells_filled, found.cells_read, found.cells_unread) == (7, 5, 2)


def test_a_value_says_which_cell_it_stood_in() -> None:
    found = read("Tag|Range|Zone|Gas group|T class|Type\nPT-1|0-10 bar|2|IIB|T3|Gauge\nPT-2|0-10 bar|1|IIB|T3|Gauge")
    record = found.records[1]
    assert record.area_classification == "Zone 1 IIB T3"
    shown = {
        name: [each.address for each in record.cells(name)]
        for name in ("tag", "lrv", "urv", "range_unit", "area_classification", "kind_written")
    }
    assert shown == {
        "tag": ["A3"],
        "lrv": ["B3"],
        "urv": ["B3"],
        "range_unit": ["B3"],
        "area_classification": ["C3", "D3", "E3"],
        "kind_written": ["F3"],
    }


# --- other kinds of sheets ---

OTHERS = [
    (
        "Areas",
        "Area|Zone|Gas group|T class|Ambient\nA1|2|IIB|T3|-20 to +40\nA2|Safe|||",
        [
            {
                "code": "A1",
                "zone": "2",
                "gas_group": "IIB",
                "temperature_class": "T3",
                "ambient_min_c": -20.0,
                "ambient_max_c": 40.0,
            },
            {"code": "A2", "zone": "Safe"},
        ],
    ),
    (
        "Cables",
        "Cable No.|Type|From|To|Length m|Pairs\nC-1|1P|PT-1|JB-1|40|1\nC-2|12P|JB-1|MAR|TBA|12 pairs",
        [
            {"number": "C-1", "type": "1P", "from_item": "PT-1", "to_item": "JB-1", "length_m": 40.0, "pairs": 1},
            {
                "number": "C-2",
                "type": "12P",
                "from_item": "JB-1",
                "to_item": "MAR",
                "pairs": 12,
                "blanks": {"length_m": "to be defined"},
            },
        ],
    ),
    (
        "Cable types",
        "Code|Conductor mm2|Ohm/km|Per|Capacitance nF/km|Inductance mH/km\n1P|1.5|12.1|loop|110|0.65",
        [
            {
                "code": "1P",
                "conductor": "1.5",
                "ohm_per_km": 12.1,
                "resistance_per": "loop",
                "capacitance_pf_per_m": 110.0,
                "inductance_uh_per_m": 0.65,
            },
        ],
    ),
    (
        "Loops",
        "Loop|Tag|Type|Supply V nom|HART|IS|Cable length (ft)\nP-1|PT-1|AI|24|Y|N|1000",
        [
            {
                "number": "P-1",
                "circuit": "PT-1",
                "kind": "AI",
                "supply_nominal_v": 24.0,
                "hart": True,
                "intrinsically_safe": False,
                "cable_length_m": 304.8,
            },
        ],
    ),
    (
        "Device types",
        (
            "Code|Kind|LRL|URL|Limit unit|Over-range limit|Li (mH)|Kind of thing\nA|dp transmitter|-60|60|kPa|"
            "160 bar|0.01|x\nB|Gizmo|0|1|bar|||"
        ),
        [
            {
                "code": "A",
                "kind": "transmitter",
                "lrl": "-60 kPa",
                "url": "60 kPa",
                "limit_unit": "kPa",
                "over_range_limit": "160 bar",
                "li_uh": 10.0,
                "other": (("Kind of thing", "x"),),
            },
            {"code": "B", "lrl": "0 bar", "url": "1 bar", "limit_unit": "bar", "unread": ["kind"]},
        ],
    ),
]


@pytest.mark.parametrize(("kind", "text", "records"), OTHERS, ids=[each[0] for each in OTHERS])
def test_other_sheets(kind: str, text: str, records: list[dict[str, Any]]) -> None:
    made = sheet(text, name=kind)
    assert matched(made).kind.name == kind
    assert all_said(read(made)) == records


def test_a_column_of_which_every_cell_is_odd_costs_no_more_than_its_cells() -> None:
    odd = "\n".join(f"PT-{number}|x{number}y|{number}~{number + 1}(" for number in range(3000))
    found = read(f"Tag|H (bar)|Range\n{odd}")
    assert len(found.records) == 3000
    assert found.cells_unread == 3000


# --- anything ---

HEADINGS = st.sampled_from(
    [
        "Tag",
        "Service",
        "Type",
        "Range",
        "LRV",
        "URV",
        "Unit",
        "H",
        "Set point",
        "Cable length",
        "HART",
        "Fail Pos.",
        "Zone",
        "Oper. Press.",
        "Design P/T",
        "Wires",
        "Status",
        "Location",
        "Odd",
        "LRL",
        "I/O",
    ]
)
CELLS = st.one_of(
    st.none(),
    st.floats(),
    st.booleans(),
    st.dates(),
    st.sampled_from(
        ["PT-1", "PT-1A/B", '"', "N/A", "0-10 bar", "bar", "1,000", "m", "SPARE", "END OF LIST", "Tag", "2/5/8"]
    ),
    st.text(max_size=20),
)


@settings(max_examples=200, deadline=None)
@given(st.data())
def test_no_cell_is_lost_and_none_is_too_much(data: st.DataObject) -> None:
    heading = ["Tag", *data.draw(st.lists(HEADINGS, min_size=3, max_size=6))]
    rows = data.draw(st.lists(st.lists(CELLS, min_size=len(heading), max_size=len(heading)), max_size=7))
    cells = [heading, *rows]
    filled = sum(cell is not None for row in cells for cell in row)
    made = Sheet(file="x.xlsx", name="x", rows=cells, cells_filled=filled)
    match = match_sheet(made, KINDS)
    if match is not None and match.header_rows:
        found = read_records(made, match)
        assert found.cells_read + found.cells_unread == filled
        assert len(found.records) >= found.rows
        assert all(isinstance(said(record), dict) for record in found.records)


@pytest.mark.parametrize(
    ("name", "text", "wanted"),
    [
        ("DI", "Tag|Service|Ch\nLSH-1|Feed|1\nLSH-2|Feed|2", ["DI", "DI"]),
        ("Analogue inputs", "Tag|Service|Ch\nPT-1|Feed|1\nPT-2|Feed|2", ["AI", "AI"]),
        # A section says it nearer; one that names something else leaves it to the sheet.
        ("Sheet1", "Tag|Service|Ch\nDIGITAL INPUTS||\nLSH-1|Feed|1\nDIGITAL OUTPUTS||\nXY-2|Feed|2", ["DI", "DO"]),
        ("DI", "Tag|Service|Ch\nBOILER HOUSE||\nLSH-1|Feed|1\nLSH-2|Feed|2", ["DI", "DI"]),
        # A column goes before any title, and a title of several says nothing.
        ("DI", "Tag|Service|I/O Type\nPT-1|Feed|AI\nPT-2|Feed|AI", ["AI", "AI"]),
        ("AI-AO", "Tag|Service|Ch\nPT-1|Feed|1\nPT-2|Feed|2", [None, None]),
        ("Unit 1", "Tag|Service|Ch\nPT-1|Feed|1\nPT-2|Feed|2", [None, None]),
    ],
)
def test_a_title_says_the_io_type_where_no_column_does(name: str, text: str, wanted: list[str | None]) -> None:
    found = read(text, name=name)
    assert [record.io_type for record in found.records] == wanted
    said_so = "I/O type read from the name of the sheet or section" in found.assumptions
    assert said_so is (any(wanted) and "I/O Type" not in text)


def test_a_parted_tag_leaves_out_what_a_row_leaves_out() -> None:
    text = "Tag|||Service\nUnit|Function|No.|\n31|PIT|1001|Feed\n|TIT|1002|Feed\n32|FT|1003|Feed"
    assert [record.tag for record in read(text).records] == ["31-PIT-1001", "TIT-1002", "32-FT-1003"]


def test_alarms_in_one_cell_are_read_by_their_place() -> None:
    text = (
        "Tag|Range|Alarms LL / L / H / HH\nPT-1|0-10 barg| / 2 / 8 / 9\nPT-2|0-10 barg|- / - / 8 / -\nPT-3|0-10 barg|"
    )
    shown = all_said(read(text), "setting_ll", "setting_l", "setting_h", "setting_hh")
    assert shown == [
        {"setting_l": "2 barg", "setting_h": "8 barg", "setting_hh": "9 barg"},
        {"setting_h": "8 barg"},
        {},
    ]


def test_a_reserve_may_stand_where_the_equipment_does() -> None:
    text = "Karte|Kanal|BMK|Text|Messstelle\nE1|1|P1.M1|Pumpe läuft|\nE1|2|B1.L1|Niveau|LSA 1\nE1|3|Reserve||"
    shown = [(record.io_address, record.equipment, record.status) for record in read(text).records]
    assert shown == [
        ("Slot E1 Ch 1", "P1.M1", None),
        ("Slot E1 Ch 2", "B1.L1", None),
        ("Slot E1 Ch 3", "Reserve", "spare"),
    ]
