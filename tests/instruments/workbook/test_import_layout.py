"""How lists are laid out when they arrive, each as a real file read whole."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from openpyxl.worksheet.worksheet import Worksheet

from instruments.workbook.lists import NoTags
from tests.instruments.workbook.as_sent import Look, as_read, delimited, rows, tags, unread, workbook


def merging(*ranges: str) -> Look:
    def look(sheet: Worksheet) -> None:
        for each in ranges:
            sheet.merge_cells(each)

    return look


@pytest.mark.parametrize(
    ("text", "separator", "encoding", "notes"),
    [
        pytest.param(
            "PROJECT: Marrowbeck|||\nDoc No. MB-IN-001 Rev C|||\nDate 2024-03-12|||\n|||\n"
            "Tag No.|Service|Range|Unit\nPT-1001|Feed|0-16|barg\nTT-1002|Feed|0-100|degC",
            "",
            "",
            ((1, "PROJECT: Marrowbeck"), (2, "Doc No. MB-IN-001 Rev C"), (3, "Date 2024-03-12")),
            id="case01-title-block",
        ),
        pytest.param(
            "Projekt|Marrowbeck||\nDokument|MB-1|Rev|C\nMessstelle|Benennung|Messbereich|Einheit\n"
            "PT-1001|Feed|0-16|barg\nTT-1002|Feed|0-100|°C",
            ";",
            "cp1252",
            ((1, "Projekt | Marrowbeck"), (2, "Dokument | MB-1 | Rev | C")),
            id="case01-german-csv",
        ),
        pytest.param(
            "|Instrument list|||\n|Marrowbeck Works|||\n|Sheet 1 of 3|Issue|2|\n|||\n"
            "|Item no.|Description|Range|E.U.\n|PT-1001|Feed|0-16|barg\n|TT-1002|Feed|0-100|degC",
            "",
            "",
            ((1, "Instrument list"), (2, "Marrowbeck Works"), (3, "Sheet 1 of 3 | Issue | 2")),
            id="case01-beside-a-blank-column",
        ),
    ],
)
def test_what_stands_over_the_heading_is_kept_as_notes(
    tmp_path: Path, text: str, separator: str, encoding: str, notes: tuple[tuple[int, str], ...]
) -> None:
    path = (
        delimited(tmp_path / "list.csv", text, separator=separator, encoding=encoding)
        if separator
        else workbook(tmp_path / "list.xlsx", text)
    )
    found = as_read(path)
    (report,) = found.sheets
    assert report.notes == notes
    assert rows(found, "tag", "service", "lrv", "urv") == [
        {"tag": "PT-1001", "service": "Feed", "lrv": "0 barg", "urv": "16 barg"},
        {"tag": "TT-1002", "service": "Feed", "lrv": "0 °C", "urv": "100 °C"},
    ]
    assert found.problems == ()


HEADINGS = [
    pytest.param(
        "Tag|Service|Range|||P&ID\n||Min|Max|Unit|\nPT-1|Feed|0|16|barg|D-1\nPT-2|Feed|0|25|barg|D-1",
        ("C1:E1",),
        [
            {"tag": "PT-1", "service": "Feed", "pid": "D-1", "lrv": "0 barg", "urv": "16 barg", "range_unit": "barg"},
            {"tag": "PT-2", "service": "Feed", "pid": "D-1", "lrv": "0 barg", "urv": "25 barg", "range_unit": "barg"},
        ],
        id="case02-two-rows-merged",
    ),
    pytest.param(
        "Tag|Service|Range||Alarm settings||Rev\n||from|to|low|high|\n||barg|barg|barg|barg|\nPT-1|Feed|0|16|2|14|A",
        ("A1:A3", "B1:B3", "C1:D1", "E1:F1", "G1:G3"),
        [
            {
                "tag": "PT-1",
                "service": "Feed",
                "lrv": "0 barg",
                "urv": "16 barg",
                "range_unit": "barg",
                "setting_l": "2 barg",
                "setting_h": "14 barg",
                "revision": "A",
            }
        ],
        id="case02-three-rows-with-units",
    ),
    pytest.param(
        "Tag|Oper. Press.|||Oper. Temp.||Range\n|Min|Norm|Max|Norm|Max|\n|barg|barg|barg|degC|degC|barg\n"
        "PT-1|1|5|8|40|60|0-16",
        ("B1:D1", "E1:F1"),
        [
            {
                "tag": "PT-1",
                "operating_pressure_min": "1 barg",
                "operating_pressure_normal": "5 barg",
                "operating_pressure_max": "8 barg",
                "operating_temperature_normal": "40 °C",
                "operating_temperature_max": "60 °C",
                "lrv": "0 barg",
                "urv": "16 barg",
                "range_unit": "barg",
            }
        ],
        id="case03-three-rows",
    ),
    pytest.param(
        "Messstelle|Messbereich||Auslegung|\n|Anfang|Ende|Druck|Temp.\n|bar|bar|bar|°C\nPT-1|0|16|16|100",
        ("B1:C1", "D1:E1"),
        [
            {
                "tag": "PT-1",
                "lrv": "0 bar",
                "urv": "16 bar",
                "range_unit": "bar",
                "design_pressure": "16 bar",
                "design_temperature": "100 °C",
            }
        ],
        id="case03-german",
    ),
]


@pytest.mark.parametrize("kind", ["xlsx", "csv"])
@pytest.mark.parametrize(("text", "merged", "wanted"), HEADINGS)
def test_a_heading_may_have_two_or_three_rows(
    tmp_path: Path, text: str, merged: tuple[str, ...], wanted: list[dict[str, Any]], kind: str
) -> None:
    path = (
        workbook(tmp_path / "list.xlsx", text, merging(*merged))
        if kind == "xlsx"
        else delimited(tmp_path / "list.csv", text)
    )
    found = as_read(path)
    assert (rows(found), found.problems) == (wanted, ())


def test_merged_cells_are_filled_down_and_blanks_are_not(tmp_path: Path) -> None:
    text = "Tag|Service|P&ID|Area\nPT-1|Feed|D-100|Z1\nPT-2|Feed||\nPT-3|Feed||\nPT-4|Feed||\nPT-5|Feed|D-200|Z2"
    found = as_read(workbook(tmp_path / "list.xlsx", {"Cover": "Marrowbeck", "Index": text}, merging("C2:C4")))
    assert [(each.get("pid"), each.get("area")) for each in rows(found)] == [
        ("D-100", "Z1"),
        ("D-100", None),
        ("D-100", None),
        (None, None),
        ("D-200", "Z2"),
    ]
    report = found.sheets[1]
    assert (report.merged, report.remarks) == (2, ("2 cells filled from merged cells",))
    # The value stands in the first cell of the merged ones.
    assert [each.address for each in found.records["Instruments"][2].cells("pid")] == ["C4"]


@pytest.mark.parametrize(
    ("text", "sections"),
    [
        pytest.param(
            "Tag|Service|Range\nUNIT 10 - FEED||\nPT-1|Feed|0-16 barg\nUNIT 20 - GAS||\nPT-2|Gas|0-25 barg",
            ("UNIT 10 - FEED", "UNIT 20 - GAS"),
            id="case05-in-the-tag-column",
        ),
        pytest.param(
            "Tag|Service|Range\n|Filter gallery|\nPT-1|Feed|0-16 barg\n|Chlorine house|\nPT-2|Gas|0-25 barg",
            ("Filter gallery", "Chlorine house"),
            id="case05-in-the-service-column",
        ),
        pytest.param(
            "Messstelle|Benennung|Messbereich\nTeilanlage 10: Zulauf||\nPT-1|Feed|0-16 barg\n"
            "Teilanlage 20: Gas||\nPT-2|Gas|0-25 barg",
            ("Teilanlage 10: Zulauf", "Teilanlage 20: Gas"),
            id="case05-german",
        ),
    ],
)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_a_section_is_the_place_of_the_rows_below_it(
    tmp_path: Path, text: str, sections: tuple[str, str], kind: str
) -> None:
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert [(each["tag"], each["place"]) for each in rows(found)] == [("PT-1", sections[0]), ("PT-2", sections[1])]
    assert [text for _, text in found.sheets[0].sections] == list(sections)


@pytest.mark.parametrize(
    ("text", "wanted", "places"),
    [
        pytest.param(
            "Tag|Service|LRV|URV|Unit\nPT-1|Feed|0|10|bar\n|Tank level|4||\nPT-2|Feed|0|10|bar",
            ["PT-1", None, "PT-2"],
            [None, None, None],
            id="case05-a-row-that-lost-its-tag-is-no-section",
        ),
        pytest.param(
            "Tag|Service|LRV|URV|Unit\nPT-1|Feed|0|10|bar\nPT-2|Feed|0|10|bar\n|Sump||10|",
            ["PT-1", "PT-2", None],
            [None, None, None],
            id="case05-nor-a-note-at-the-foot",
        ),
        pytest.param(
            "Tag|Service|H|Unit\nPT-1|Feed|8|bar\n|3 Filters|||\nPT-2|Feed|8|bar",
            ["PT-1", "PT-2"],
            [None, "3 Filters"],
            id="case05-a-section-may-have-a-figure",
        ),
        pytest.param(
            "No|Tag|Service|H|Unit\n1|PT-1|Feed|8|bar\n2||Pumps||\n3|PT-2|Feed|8|bar",
            ["PT-1", "PT-2"],
            [None, "2 Pumps"],
            id="case05-and-a-running-number",
        ),
    ],
)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_a_row_with_a_figure_of_a_field_is_no_section(
    tmp_path: Path, text: str, wanted: list[str | None], places: list[str | None], kind: str
) -> None:
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert tags(found) == wanted
    assert [each.get("place") for each in rows(found)] == places


@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_headings_of_later_pages_are_dropped(tmp_path: Path, kind: str) -> None:
    head = "Tag|Service|Range||Rev\n||from|to|\n"
    text = f"{head}PT-1|Feed|0|16 barg|A\n|Page 1 of 2|||\n{head}PT-2|Gas|0|25 barg|A\n|Page 2 of 2|||"
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert [(each["tag"], each["urv"]) for each in rows(found)] == [("PT-1", "16 barg"), ("PT-2", "25 barg")]
    assert found.sheets[0].notes == ((4, "Page 1 of 2"), (8, "Page 2 of 2"))


@pytest.mark.parametrize(
    "foot",
    [
        pytest.param("NOTES:|\n1. All ranges are gauge|\n2. PT-1 and PT-2 by vendor|\nEND OF LIST|", id="case07"),
        pytest.param("END OF LIST|\n*|to be confirmed by process", id="case07-marks"),
        pytest.param("Bemerkungen|\n1) Messbereiche sind Überdruck|\nEnde der Liste|", id="case07-german"),
        pytest.param("LEGEND|\nPT|Pressure transmitter\nTBA|to be advised", id="case07-legend"),
        pytest.param("|Prepared by: J. Halden\n|Checked: M. Roe 12/03/24", id="case07-signatures"),
    ],
)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_notes_and_the_end_of_the_list_are_no_instruments(tmp_path: Path, foot: str, kind: str) -> None:
    text = f"Tag|Service\nPT-1|Feed\nPT-2|Gas\n{foot}"
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert tags(found) == ["PT-1", "PT-2"]
    assert [text for _, text in found.sheets[0].notes] == [
        " | ".join(filter(None, line.split("|"))) for line in foot.split("\n")
    ]


def test_each_sheet_is_read_by_its_own_heading(tmp_path: Path) -> None:
    path = workbook(
        tmp_path / "plant.xlsx",
        {
            "Cover": "INSTRUMENT INDEX|\nMarrowbeck Works|",
            "Rev History": "Rev|Date|Description|By\nA|2024-01-01|First issue|JH\nB|2024-02-01|PT-2 added|JH",
            "Legend": "Abbreviation|Meaning\nPT|Pressure transmitter\nTBA|To be advised",
            "Unit 10": "Tag|Service|Range\nPT-1|Feed|0-16 barg",
            "Unit 20": "P&ID|Range|Tag No.|Description\nD-2|0-25 barg|PT-2|Gas",
            "Anlage 30": "Benennung|Einheit|Messbereich|Messstelle\nDampf|bar|0-40|PT-3",
        },
    )
    found = as_read(path)
    assert rows(found, "tag", "service", "pid", "urv") == [
        {"tag": "PT-1", "service": "Feed", "urv": "16 barg"},
        {"tag": "PT-2", "service": "Gas", "pid": "D-2", "urv": "25 barg"},
        {"tag": "PT-3", "service": "Dampf", "urv": "40 bar"},
    ]
    assert [[each.address for each in record.cells("urv")] for record in found.records["Instruments"]] == [
        ["C2"],
        ["B2"],
        ["C2"],
    ]
    assert [(each.sheet, each.skipped) for each in found.sheets if each.kind is None] == [
        ("Cover", "a sheet named Cover holds no list"),
        ("Rev History", "a sheet named Rev History holds no list"),
        ("Legend", "a sheet named Legend holds no list"),
    ]


def test_hidden_rows_columns_and_sheets_are_read_and_named(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        for row in (3, 5, 6):
            sheet.row_dimensions[row].hidden = True
        sheet.column_dimensions["C"].hidden = True
        sheet.auto_filter.ref = "A1:D6"
        sheet.sheet_state = "hidden"

    text = "Tag|Service|Range|Rev\n" + "\n".join(f"PT-{number}|Feed|0-16 barg|A" for number in range(1, 6))
    found = as_read(workbook(tmp_path / "l.xlsx", {"Index": "Tag|Service\nPT-9|Gas", "Old": text}, look))
    assert tags(found) == ["PT-9", "PT-1", "PT-2", "PT-3", "PT-4", "PT-5"]
    assert {each.get("urv") for each in rows(found)} == {None, "16 barg"}
    assert found.sheets[1].remarks == (
        "hidden in the workbook; read like the others",
        "hidden, and read like the others: rows 3, 5-6; column C (Range)",
    )


def test_frozen_panes_and_outlines_change_nothing(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet.freeze_panes = "B2"
        sheet.row_dimensions.group(3, 4, outline_level=1)

    text = "Tag|Service|Range\nPT-1|Feed|0-16 barg\nPT-2|Feed|0-16 barg\nPT-3|Feed|0-16 barg"
    found = as_read(workbook(tmp_path / "l.xlsx", text, look))
    assert (tags(found), found.sheets[0].remarks) == (["PT-1", "PT-2", "PT-3"], ())


TURNED = "one tag a column: turned, so that lines are read as columns"
ACROSS = [
    pytest.param(
        "Tag No.|PT-101|PT-102\nService|Feed|Steam\nRange|0-16|0-25\nUnit|barg|barg",
        (),
        [
            {"tag": "PT-101", "service": "Feed", "lrv": "0 barg", "urv": "16 barg", "range_unit": "barg"},
            {"tag": "PT-102", "service": "Steam", "lrv": "0 barg", "urv": "25 barg", "range_unit": "barg"},
        ],
        [("C1", "C3")],
        id="case12-bare",
    ),
    pytest.param(
        "PRESSURE TRANSMITTERS|||\nDoc No.|MB-DS-01|Rev|B\n|||\nGroup|Parameter|Unit|PT-101|PT-102\n"
        "GENERAL|Tag number||PT-101|PT-102\n|Service||Feed|Steam\nPROCESS|Operating pressure min|barg|1|2\n"
        "|Operating pressure max|barg|8|9\nINSTRUMENT|LRV|barg|0|0\n|URV|barg|16|25\nNOTES|||\n1. Gauge|||",
        ("A5:A6", "A7:A8", "A9:A10"),
        [
            {
                "tag": "PT-101",
                "service": "Feed",
                "operating_pressure_min": "1 barg",
                "operating_pressure_max": "8 barg",
                "lrv": "0 barg",
                "urv": "16 barg",
                "range_unit": "barg",
            },
            {
                "tag": "PT-102",
                "service": "Steam",
                "operating_pressure_min": "2 barg",
                "operating_pressure_max": "9 barg",
                "lrv": "0 barg",
                "urv": "25 barg",
                "range_unit": "barg",
            },
        ],
        [("E5", "E10")],
        id="case12-groups-units-and-titles",
    ),
    pytest.param(
        "Datenblatt Druckmessumformer||\nMessstelle|PT-101|PT-102\nBenennung|Zulauf|Dampf\nMessbereich Anfang|0|-1\n"
        "Messbereich Ende|16|2.5\nEinheit|bar|bar",
        (),
        [
            {"tag": "PT-101", "service": "Zulauf", "lrv": "0 bar", "urv": "16 bar", "range_unit": "bar"},
            {"tag": "PT-102", "service": "Dampf", "lrv": "-1 bar", "urv": "2.5 bar", "range_unit": "bar"},
        ],
        [("C2", "C5")],
        id="case12-german",
    ),
    pytest.param(
        "Tag|PT-1|PT-2\nOperating conditions||\nPressure|5 barg|6 barg\nTemperature|40 °C|50 °C\n"
        "Design conditions||\nPressure|16 barg|25 barg\nTemperature|100 °C|120 °C",
        (),
        [
            {
                "tag": "PT-1",
                "operating_pressure_normal": "5 barg",
                "operating_temperature_normal": "40 °C",
                "design_pressure": "16 barg",
                "design_temperature": "100 °C",
            },
            {
                "tag": "PT-2",
                "operating_pressure_normal": "6 barg",
                "operating_temperature_normal": "50 °C",
                "design_pressure": "25 barg",
                "design_temperature": "120 °C",
            },
        ],
        [("C1", "")],
        id="case12-a-line-over-its-group",
    ),
    pytest.param(
        "Tag|PT-1|PT-2|PT-3\nService|Feed||\nRange|0-16 barg|0-10 barg|0-6 barg",
        ("B2:D2",),
        [
            {"tag": "PT-1", "service": "Feed", "lrv": "0 barg", "urv": "16 barg", "range_unit": "barg"},
            {"tag": "PT-2", "service": "Feed", "lrv": "0 barg", "urv": "10 barg", "range_unit": "barg"},
            {"tag": "PT-3", "service": "Feed", "lrv": "0 barg", "urv": "6 barg", "range_unit": "barg"},
        ],
        [("C1", "C3")],
        id="case12-merged-across",
    ),
    pytest.param(
        "Tag No.|PT-101\nService|Feed\nRange|0-16 barg\nP&ID|D-1",
        (),
        [{"tag": "PT-101", "service": "Feed", "pid": "D-1", "lrv": "0 barg", "urv": "16 barg", "range_unit": "barg"}],
        [],
        id="case12-one-tag",
    ),
]


@pytest.mark.parametrize("kind", ["xlsx", "csv"])
@pytest.mark.parametrize(("text", "merged", "wanted", "addresses"), ACROSS)
def test_tags_that_stand_side_by_side_are_turned_and_said(
    tmp_path: Path,
    text: str,
    merged: tuple[str, ...],
    wanted: list[dict[str, Any]],
    addresses: list[tuple[str, str]],
    kind: str,
) -> None:
    if kind == "csv" and "merged" in text:
        return
    before = {"Index": "Tag|Service\nTT-1|Gas\nTT-2|Gas"}
    if kind == "xlsx":
        found = as_read(workbook(tmp_path / "l.xlsx", {**before, "Data sheets": text}, merging(*merged)))
    else:
        found = as_read(workbook(tmp_path / "l.xlsx", before), delimited(tmp_path / "l.csv", text))
    if kind == "csv" and merged == ("B2:D2",):
        wanted = [wanted[0], *({name: each[name] for name in each if name != "service"} for each in wanted[1:])]
    assert rows(found)[2:] == wanted
    assert found.sheets[1].remarks[-1 - any("merged" in each for each in found.sheets[1].remarks)] == TURNED
    assert found.problems == ()
    second = found.records["Instruments"][3:4]
    assert [
        (record.cells("tag")[0].address, "".join(each.address for each in record.cells("urv"))) for record in second
    ] == addresses


def test_blocks_of_tags_below_each_other_are_all_read(tmp_path: Path) -> None:
    block = "Data sheet {page}||\nTag No.|PT-{one}|PT-{two}\nService|Feed|Steam\nRange|0-16 barg|{bad}"
    text = "\n||\n".join(
        block.format(page=page, one=2 * page, two=2 * page + 1, bad="0-6 barx" if page == 2 else "0-6 barg")
        for page in (1, 2, 3)
    )
    found = as_read(delimited(tmp_path / "sheets.csv", text, separator=";"))
    assert tags(found) == ["PT-2", "PT-3", "PT-4", "PT-5", "PT-6", "PT-7"]
    assert [each.address for each in found.records["Instruments"][4].cells("urv")] == ["B14"]
    assert unread(found) == [("C9", "PT-5", "unit 'barx' is not known")]
    assert [text for each in found.sheets for _, text in each.notes] == [
        "Data sheet 1",
        "Data sheet 2",
        "Data sheet 3",
    ]


@pytest.mark.parametrize(
    "text",
    [
        pytest.param(
            "INSTRUMENT DATA SHEET|||\nTag No.|PT-101|Service|Feed\nP&ID|D-1|Line|6-P-100\n"
            "Range|0-16 barg|Signal|4-20 mA\nOperating pressure|5 barg|Design pressure|16 barg",
            id="case12-two-properties-a-line",
        ),
    ],
)
def test_a_form_is_not_read_as_a_list(tmp_path: Path, text: str) -> None:
    with pytest.raises(NoTags, match="no list with tags"):
        as_read(workbook(tmp_path / "l.xlsx", text))
    found = as_read(workbook(tmp_path / "l.xlsx", {"Index": "Tag|Service\nPT-1|Feed\nPT-2|Feed", "PT-101": text}))
    assert tags(found) == ["PT-1", "PT-2"]
    assert found.sheets[1].skipped


@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_columns_nobody_knows_are_kept_under_their_heading(tmp_path: Path, kind: str) -> None:
    text = "Tag|Service|Paint colour|Farbton\nPT-1|Feed|red|RAL 3000\nPT-2|Feed||RAL 5010"
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert [each["other"] for each in rows(found)] == [
        (("Paint colour", "red"), ("Farbton", "RAL 3000")),
        (("Farbton", "RAL 5010"),),
    ]
    assert found.sheets[0].match is not None
    assert found.sheets[0].match.unknown == ((2, "Paint colour"), (3, "Farbton"))


SECOND = "a second column headed 'Range', with other values: the first (column B) is read"


@pytest.mark.parametrize(
    ("text", "wanted"),
    [
        pytest.param(
            "Tag|Range|Range|Service\nPT-1|0-16 barg|0-25 barg|Feed\nPT-2|0-16 barg|0-16 barg|Feed",
            [("C2", "", SECOND)],
            id="case14-values-differ",
        ),
        pytest.param(
            "Tag|Range|Range|Service\nPT-1|0-16 barg|0-16 barg|Feed\nPT-2|0-16 barg||Feed",
            [],
            id="case14-values-agree",
        ),
        pytest.param(
            "Tag|Rev|Service|Rev\nPT-1|A|Feed|B\nPT-2|A|Feed|",
            [("D2", "", "a second column headed 'Rev', with other values: the first (column B) is read")],
            id="case14-revisions",
        ),
    ],
)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_two_columns_of_one_heading_are_asked_about_where_they_differ(
    tmp_path: Path, text: str, wanted: list[tuple[str, str, str]], kind: str
) -> None:
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert unread(found) == wanted
    assert [each.whole_column for each in found.problems] == [True] * len(wanted)
    # What stands in the second is kept.
    assert rows(found)[0]["other"]


SIDE_BY_SIDE = [
    pytest.param(
        "INSTRUMENT LIST|||||||\nDWG MB-1001 SHEET 2|||||||\nITEM|TAG|DESCRIPTION|RANGE||ITEM|TAG|DESCRIPTION|RANGE\n"
        "1|PT-1|Feed|0-16 barg||3|TT-3|Gas|0-100 degC\n2|PT-2|Feed|0-16 barg||4|TT-4|Gas|0-100 barx",
        ["PT-1", "PT-2", "TT-3", "TT-4"],
        [("I5", "TT-4", "unit 'barx' is not known")],
        id="case12-a-drawings-tables",
    ),
    pytest.param(
        "TAG|RANGE|TAG|RANGE|TAG|RANGE\nPT-1|0-1 bar|PT-3|0-2 bar|PT-5|0-3 bar\nPT-2|0-1 bar|PT-4|0-2 bar||",
        ["PT-1", "PT-2", "PT-3", "PT-4", "PT-5"],
        [],
        id="case12-three-without-a-gap",
    ),
    pytest.param(
        "Tag|Service|Range|Tag\nPT-1|Feed|0-1 bar|PT-1\nPT-2|Feed|0-1 bar|PT-2",
        ["PT-1", "PT-2"],
        [],
        id="case12-a-tag-that-is-repeated",
    ),
]


@pytest.mark.parametrize(("text", "wanted", "problems"), SIDE_BY_SIDE)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_tables_that_stand_side_by_side_are_all_read(
    tmp_path: Path, text: str, wanted: list[str], problems: list[tuple[str, str, str]], kind: str
) -> None:
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert (tags(found), unread(found)) == (wanted, problems)
    assert [each.cells_filled for each in found.sheets if each.kind is None] == []


def test_a_line_over_the_tags_that_repeats_them_is_a_title(tmp_path: Path) -> None:
    text = "Item|Unit|PT-1|PT-2\nTag number||PT-1|PT-2\nService||Feed|Gas\nLRV|barg|0|0\nURV|barg|16|25"
    found = as_read(workbook(tmp_path / "l.xlsx", text))
    assert rows(found) == [
        {"tag": "PT-1", "service": "Feed", "lrv": "0 barg", "urv": "16 barg", "range_unit": "barg"},
        {"tag": "PT-2", "service": "Gas", "lrv": "0 barg", "urv": "25 barg", "range_unit": "barg"},
    ]
    assert found.sheets[0].notes == ((1, "Item | Unit | PT-1 | PT-2"),)


@pytest.mark.parametrize(
    ("title", "place"),
    [
        pytest.param("INSTRUMENT SCHEDULE   PAGE {}", None, id="case06-page"),
        pytest.param("Messstellenliste Blatt {}", None, id="case06-german"),
        pytest.param("AREA {}0", "AREA 20", id="case06-a-section-is-no-page"),
    ],
)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_the_title_of_a_later_page_is_no_section(tmp_path: Path, title: str, place: str | None, kind: str) -> None:
    head = "TAG NO|SERVICE|RANGE\n----------|----------|----------\n"
    text = f"{title.format(1)}||\n{head}PT-1|Feed|0-1 bar\n{title.format(2)}||\n{head}PT-2|Feed|0-1 bar"
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert (tags(found), rows(found)[1].get("place")) == (["PT-1", "PT-2"], place)


@pytest.mark.parametrize(
    ("heading", "cells", "wanted"),
    [
        pytest.param("I/O", ("AI 1/06", "DI 2/01"), [("AI", "AI 1/06"), ("DI", "DI 2/01")], id="case02-both-in-one"),
        pytest.param("I/O", ("AI", "DI"), [("AI", None), ("DI", None)], id="case02-type-alone"),
        pytest.param(
            "Adresse E/S / I/O address", ("1.01", "1.02"), [(None, "1.01"), (None, "1.02")], id="case02-two-languages"
        ),
        pytest.param("E/S / I/O type", ("AI", "DI"), [("AI", None), ("DI", None)], id="case02-two-languages-type"),
    ],
)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_inputs_and_outputs_are_known_by_what_stands_below(
    tmp_path: Path, heading: str, cells: tuple[str, str], wanted: list[tuple[str | None, str | None]], kind: str
) -> None:
    text = f"Tag|Service|{heading}\nPT-1|Feed|'{cells[0]}\nLS-2|Feed|'{cells[1]}"
    path = (
        workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text.replace("'", ""))
    )
    found = as_read(path)
    assert [(each.get("io_type"), each.get("io_address")) for each in rows(found)] == wanted


@pytest.mark.parametrize(
    ("heading", "field"),
    [
        pytest.param("Alarm hoch", "setting_h", id="german"),
        pytest.param("Alarm tief", "setting_l", id="german-low"),
        pytest.param("Seuil haut / High alarm", "setting_h", id="french"),
        pytest.param("Alarme très basse", "setting_ll", id="french-low-low"),
    ],
)
def test_alarms_are_headed_in_other_languages(tmp_path: Path, heading: str, field: str) -> None:
    found = as_read(delimited(tmp_path / "l.csv", f"Tag|Service|{heading}\nPT-1|Feed|8 bar\nPT-2|Feed|9 bar"))
    assert [each.get(field) for each in rows(found)] == ["8 bar", "9 bar"]
