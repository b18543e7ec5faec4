from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path

import openpyxl
import pytest
from openpyxl.styles import PatternFill

from instruments.workbook.files import read_lists
from instruments.workbook.lists import Lists, NoTags, records_of_sheets
from instruments.workbook.sheet import Sheet, UnreadableFile
from tests.instruments.workbook.sheets import KINDS, said, sheet

INDEX = "Tag|Service|P&ID|LRV|URV|Unit|I/O Type\nPT-1|Feed|D-1|0|10|barg|AI\nTT-2|Feed|D-1|0|100|°C|AI"
IO = "Tag|I/O Type|Address|Card\nPT-1|AI|1.1|C1\nTT-2|AI|1.2|C1"
CABLES = "Cable No.|Type|From|To|Length m\nC-1|1P|PT-1|JB-1|40\nC-2|1P|PT-2|JB-1|50"


def lists(*sheets: Sheet) -> Lists:
    return records_of_sheets(sheets, KINDS)


def counts(found: Lists) -> dict[str, int]:
    return {name: len(records) for name, records in found.records.items()}


def write_csv(folder: Path, name: str, text: str) -> Path:
    path = folder / name
    path.write_text(text.replace("|", ","), encoding="utf-8")
    return path


def test_several_files_are_one_plant(tmp_path: Path) -> None:
    workbook = openpyxl.Workbook()
    first = workbook.active
    assert first is not None
    first.title = "Cover"
    first.append(["INSTRUMENT INDEX"])
    index = workbook.create_sheet("Index")
    for line in INDEX.split("\n"):
        index.append([float(piece) if piece.isdigit() else piece or None for piece in line.split("|")])
    path = tmp_path / "INDEX.xlsx"
    workbook.save(path)
    said_so: list[str] = []
    found = read_lists(
        [path, write_csv(tmp_path, "IO-LIST.csv", IO), write_csv(tmp_path, "CABLES.csv", CABLES)],
        KINDS,
        on_progress=said_so.append,
    )
    assert counts(found) == {"Instruments": 2, "IO list": 2, "Cables": 2}
    assert [(each.sheet, each.kind, each.skipped) for each in found.sheets] == [
        ("Cover", None, "a sheet named Cover holds no list"),
        ("Index", "Instruments", ""),
        ("IO-LIST", "IO list", ""),
        ("CABLES", "Cables", ""),
    ]
    assert (found.index_file, [Path(name).name for name in found.files]) == (
        "INDEX.xlsx",
        ["INDEX.xlsx", "IO-LIST.csv", "CABLES.csv"],
    )
    assert found.index_columns == {
        "tag",
        "service",
        "pid",
        "lrv",
        "urv",
        "range_unit",
        "io_type",
    }
    assert found.problems == ()
    record = found.records["Instruments"][1]
    assert [(each.sheet, each.address) for each in record.cells("urv")] == [("Index", "E3")]
    assert len(said_so) == 6
    assert all(each.cells_read + each.cells_unread == each.cells_filled for each in found.sheets if each.kind)


@pytest.mark.parametrize(
    ("sheets", "wanted"),
    [
        # the only list with tags is the index, whatever it is called
        ([sheet(IO, name="IO list")], {"Instruments": 2}),
        ([sheet("Tag|H|Unit\nPT-1|8|bar\nPT-2|9|bar", name="Alarms")], {"Instruments": 2}),
        (
            [sheet(IO, name="IO list"), sheet("Tag|H|Unit\nPT-1|8|bar\nPT-2|9|bar", name="Alarms")],
            {"Instruments": 2, "Alarm and trip list": 2},
        ),
        ([sheet(INDEX, name="Area 10"), sheet(INDEX, name="Area 20")], {"Instruments": 4}),
        ([sheet(IO, name="Sheet1", file="IO-LIST.csv"), sheet(INDEX, name="Sheet1")], {"IO list": 2, "Instruments": 2}),
    ],
)
def test_which_list_is_the_index(sheets: list[Sheet], wanted: dict[str, int]) -> None:
    assert counts(lists(*sheets)) == wanted


def test_a_column_of_listed_codes_is_the_device_type() -> None:
    types = sheet(
        ("Code|Kind|LRL|URL|Limit unit\nTP-G10|transmitter|-1|10|barg\nTP-G02|transmitter|-1|2|barg"), name="Types"
    )
    found = lists(sheet("Tag|Type\nPT-1|TP-G10\nPT-2|tp-g02"), types)
    assert [record.device_type for record in found.records["Instruments"]] == ["TP-G10", "tp-g02"]


def test_the_plant_sheet_says_how_tags_are_written_before_any_is_read() -> None:
    plant = sheet("Name|Marrowbeck\nTag pattern|compact\nNumbering|serial", name="Plant")
    found = lists(sheet("Tag|Service\n20PT0034/35|Feed\nPT 99|Feed", name="Index"), plant)
    assert (found.plant.numbering, found.plant.name) == ("serial", "Marrowbeck")
    assert [record.tag for record in found.records["Instruments"]] == ["20PT0034", "20PT0035", "PT 99"]
    assert said(found.records["Plant"][0])["numbering"] == "serial"


def test_a_plant_toml_goes_before_the_plant_sheet(tmp_path: Path) -> None:
    toml = tmp_path / "plant.toml"
    toml.write_text('numbering = "parallel"\ncolour = "green"', encoding="utf-8")
    found = read_lists(
        [
            write_csv(tmp_path, "index.csv", INDEX),
            write_csv(tmp_path, "plant.csv", ("Name|M\nNumbering|serial\nJurisdiction|IEC")),
        ],
        KINDS,
        plant_toml=toml,
    )
    assert (found.plant.numbering, found.plant.jurisdiction) == ("parallel", "IEC")
    assert any("stated twice" in each for each in found.assumptions)
    assert [(each.title, each.reason) for each in found.problems] == [("colour", "no plant setting has this name")]


def test_what_was_taken_by_likeness_is_named_and_assumptions_are_told_once() -> None:
    text = "Tag|Desing Presure (barg)|Cable length\nPT-1|16|100\nPT-2|25|200"
    found = lists(sheet(text, name="Area 10"), sheet(text, name="Area 20"))
    assert [each for each in found.assumptions if not each.startswith("plant:")] == [
        "Instruments: cable length without unit read as m",
        "Area 10: heading 'Desing Presure (barg)' is taken for design pressure by likeness",
        "Area 20: heading 'Desing Presure (barg)' is taken for design pressure by likeness",
    ]


@pytest.mark.parametrize(
    ("sheets", "reason"),
    [
        ([], "no sheet was found"),
        ([sheet(CABLES, name="Cables")], "sheet 'Cables': taken for Cables"),
        ([sheet("a|b\nc|d", name="X")], "sheet 'X': no heading found"),
        ([Sheet(file="x.xlsx", name="Y", rows=[])], "sheet 'Y': empty"),
    ],
)
def test_lists_without_tags_are_refused_and_told_what_is_wanted(sheets: list[Sheet], reason: str) -> None:
    with pytest.raises(NoTags, match=r"no sheet|a heading such as 'Tag'") as caught:
        lists(*sheets)
    assert reason in str(caught.value)


def test_a_file_that_cannot_be_read_is_said(tmp_path: Path) -> None:
    with pytest.raises(UnreadableFile, match="there is no such file"):
        read_lists([tmp_path / "none.xlsx"], KINDS)


def test_a_water_works_list_reads_whole() -> None:
    path = Path(__file__).parents[3] / "fixtures" / "lists" / "water-works.xlsx"
    found = read_lists([path], KINDS)
    (report,) = found.sheets
    assert (report.rows, report.records, report.cells_read, report.cells_unread) == (116, 116, 2541, 1)
    assert report.match is not None
    assert report.match.unknown == ((0, "Item"),)
    assert [text for _, text in report.sections][:2] == ["INLET WORKS", "COAGULATION AND CLARIFICATION"]
    assert (5, "Site is not a hazardous area (DSEAR assessment TWT-HS-014)") in report.notes
    assert [(each.subject, each.cell.address, each.text) for each in found.problems] == [("AIT-1009", "J18", "Hazen")]
    by_tag = {record.tag: said(record, without=("other", "blanks")) for record in found.records["Instruments"]}
    assert by_tag["LSHH-1004"] == {
        "tag": "LSHH-1004",
        "service": ("Inlet chamber very high level"),
        "kind": "switch",
        "kind_written": "Float switch",
        "pid": "TWT-PID-101",
        "equipment": "Inlet chamber",
        "range_unit": "m",
        "setting_hh": "4.8 m",
        "signal": "VFC",
        "wires": 2,
        "io_type": "DI",
        "io_address": "R1.S04.C00",
        "area_classification": "Non-haz",
        "ip_code": "IP68",
        "maker": "Halden & Roe",
        "model": "FS2",
        "place": "Inlet chamber",
        "remarks": "Hardwired to inlet valve close",
    }
    assert by_tag["AIT-4001"]["area_classification"] == "N/A"
    assert by_tag["FIT-4006"]["urv"] == "60 Ml/d"
    assert {record.kind is not None for record in found.records["Instruments"]} == {True}
    expected = json.loads(path.with_name("water-works.expected.json").read_text(encoding="utf-8"))
    named = {tag.strip() for each in expected["must"] for tag in each["subject"].split(",")}
    assert named <= set(by_tag)


@pytest.mark.parametrize(
    ("rows", "tags"),
    [
        ("Tag\nPT-101\nPT-102\nTT-103", ["PT-101", "PT-102", "TT-103"]),
        ("Instrument list\n\nTag No.\nPT-101\nUNIT 20 - FEED\nTT-103\nEND OF LIST", ["PT-101", "TT-103"]),
        # Names without a number are tags where nothing else stands in the sheet.
        ("Tag\nMAINVALVE\nSTOPBUTTON\nHORN", ["MAINVALVE", "STOPBUTTON", "HORN"]),
        ("Tag\nMAINVALVE\nFilter gallery\nHORN\nSIREN\nLAMP\nUnit 7", ["MAINVALVE", "HORN", "SIREN", "LAMP"]),
        ("KKS\n10LBA10CP001\n10LBA10CP002", ["10LBA10CP001", "10LBA10CP002"]),
    ],
)
def test_a_list_of_tags_alone(rows: str, tags: list[str]) -> None:
    found = records_of_sheets([sheet(rows)], KINDS)
    assert [each.tag for each in found.records["Instruments"]] == tags


@pytest.mark.parametrize(
    "rows",
    [
        "Code|mm2\nA1|1.5\nA1|2.5",
        "Code|Conductor|ohm/km\nA1|1.5|12\nA1|2.5|7",
        "Code|Conductor size\nA1|1.5 mm2\nA1|2.5 mm2",
        "Type|Conductor size|Insulation\nA1|1.5 mm2|70\nA1|2.5 mm2|90",
        "Cable type|AWG\nA1|16\nA1|16",
    ],
)
def test_a_small_list_of_cable_types_with_a_code_twice_is_one(rows: str) -> None:
    index = sheet("Tag|Cable type\nPT-101|A1\nPT-102|A1")
    found = records_of_sheets([index, sheet(rows, name="Cable types")], KINDS)
    assert [(each.kind, each.records) for each in found.sheets] == [("Instruments", 2), ("Cable types", 2)]


def test_what_stands_beside_the_plant_s_data_is_noted_and_what_failed_told() -> None:
    plant = sheet(
        "Plant data||\nField|Value|Remark\nJurisdiction|ATEX|since 2003\nAtmospheric pressure|98|kPa\n"
        "Numbering||\nName||\nChecked by A. N.||",
        name="Plant",
        errors={(4, 1): "#REF!"},
        no_value={(5, 1)},
        far={(900, 0): "x"},
    )
    index = sheet("Tag|Service\nPT-101|feed\nPT-102|return")
    found = records_of_sheets([index, plant], KINDS)
    report = found.sheets[1]
    assert (found.plant.jurisdiction, found.plant.atmospheric_pa) == ("ATEX", 98000.0)
    assert (report.cells_filled, report.cells_read, report.cells_unread) == (16, 13, 3)
    assert [(each.cell.address, each.reason) for each in found.problems] == [
        ("B5", "the cell shows #REF!"),
        ("B6", "a formula without a saved value"),
        ("A901", "stands so far from the list that it was left out"),
    ]
    assert report.notes == (
        (1, "Plant data"), (2, "Field | Value | Remark"), (3, "since 2003"), (5, "Numbering"), (6, "Name"),
        (7, "Checked by A. N."),
    )  # fmt: skip


YELLOW = "filled with the colour #FFFF00, which may mean a hold, a change or another's supply, and is not applied"


@pytest.mark.parametrize(
    ("coloured", "remarks"),
    [
        ({}, ()),
        ({2: "#FFFF00"}, (f"1 row {YELLOW}: 3 PT-2",)),
        ({1: "#FFFF00", 3: "#FFFF00"}, (f"2 rows {YELLOW}: 2 PT-1, 4 PT-3",)),
        # The headings are no row, and bands mark nothing.
        ({0: "#FFFF00"}, ()),
        ({1: "#FFFF00", 3: "#FFFF00", 5: "#FFFF00"}, ()),
    ],
)
def test_rows_filled_with_a_colour_are_told(coloured: dict[int, str], remarks: tuple[str, ...]) -> None:
    text = "Tag|Service\n" + "\n".join(f"PT-{number}|feed {number}" for number in range(1, 7))
    (report,) = records_of_sheets([replace(sheet(text), coloured_rows=coloured)], KINDS).sheets
    assert report.remarks == remarks


def test_rows_filled_with_a_colour_in_a_workbook(tmp_path: Path) -> None:
    book = openpyxl.Workbook()
    page = book.active
    for row in [("Tag", "Service"), *((f"PT-{number}", f"feed {number}") for number in range(1, 7))]:
        page.append(row)
    for cell in page[4]:
        cell.fill = PatternFill("solid", fgColor="FFFF00")
    book.save(tmp_path / "a.xlsx")
    (report,) = read_lists([tmp_path / "a.xlsx"], KINDS).sheets
    assert report.remarks == (f"1 row {YELLOW}: 4 PT-3",)


FORM = """DATA SHEET|||Rev 1|
Tag Number|PIT-1|Fluid|Seal oil|
Service|Header|Operating Pressure (barg)|9.5|
P&ID No.|P-1|Design Pressure (barg)|16|
Range Unit|barg|Signal|4-20 mA|"""


@pytest.mark.parametrize(
    ("text", "skipped", "missed"),
    [
        (
            FORM,
            "a form with the data of one tag, and its names stand in columns A and C: put them all in one column and"
            " their values in the next, or the tag in a row of a list",
            True,
        ),
        ("Dear all,|\nplease look|at this", "no heading of a known list was found", True),
        ("|\n|", "empty", False),
    ],
)
def test_a_sheet_that_is_not_read_says_why(text: str, skipped: str, missed: bool) -> None:
    index = sheet("Tag|Service\nPT-101|feed\nPT-102|return")
    report = records_of_sheets([index, sheet(text, name="PIT-1")], KINDS).sheets[1]
    assert (report.skipped, report.missed) == (skipped, missed)


def test_comments_and_shapes_of_a_sheet_that_is_not_read_are_counted() -> None:
    index = sheet("Tag|Service\nPT-101|feed\nPT-102|return")
    cover = sheet("A list", name="Cover", comments={(0, 0): "A. N.: old", (3, 3): "x"}, shapes=2)
    report = records_of_sheets([index, cover], KINDS).sheets[1]
    assert (report.skipped, report.remarks) == (
        "a sheet named Cover holds no list",
        ("2 comments are not read", "2 drawn shapes are not read"),
    )
