"""A mapping given back: the same list reads the same, a mended one as mended, the next revision without a guess."""

from __future__ import annotations

import re
from functools import cache
from pathlib import Path

import pytest

from instruments.workbook.files import read_lists
from instruments.workbook.lists import Lists, NoTags, records_of_sheets
from instruments.workbook.mapping import mapping_of
from instruments.workbook.mapping_toml import mapping_text
from loops.plant import assemble
from tests.instruments.workbook.accounted import assert_mapping_reads_the_same, assert_no_cell_is_lost
from tests.instruments.workbook.as_sent import delimited, rows, tags, workbook
from tests.instruments.workbook.sheets import KINDS
from tests.twin import cells_of, twin
from validation.audit import audit

FIXTURES = Path(__file__).parents[3] / "fixtures"
LISTS = sorted(
    path
    for folder in ("lists", "marrowbeck")
    for path in (FIXTURES / folder).iterdir()
    if path.suffix in (".xlsx", ".csv")
)


@cache
def read(path: Path) -> Lists:
    return read_lists([path], KINDS)


@pytest.mark.parametrize("path", LISTS, ids=lambda path: path.name)
def test_no_cell_of_a_fixture_is_lost(path: Path) -> None:
    assert_no_cell_is_lost([path], read(path))


@pytest.mark.parametrize("path", LISTS, ids=lambda path: path.name)
def test_the_same_list_reads_the_same(path: Path) -> None:
    assert_mapping_reads_the_same([path], read(path))


def test_the_twin_reads_the_same() -> None:
    sheets = [cells_of(title, rows) for title, rows in twin().rows.items()]
    first = records_of_sheets(sheets, KINDS)
    again = records_of_sheets(sheets, KINDS, mapping=mapping_of(first.sheets))
    assert again.mapping_notes == ()
    assert dict(again.records) == dict(first.records)
    assert (again.problems, again.plant) == (first.problems, first.plant)
    said = [[each.identity, each.message] for each in audit(assemble(first)).findings]
    assert [[each.identity, each.message] for each in audit(assemble(again)).findings] == said


# --------------------------------------------------------------------------------------------------- the next revision

INDEX = """
Lakeside Works|||||||
Tag No.|Service|Range|Alarms (barg)||Stoff|Bemerkung|Zeichen
|||L|H|||
PT-101|feed|0-10 barg|1|9|Benzol||P1
PT-102|return|0-16 barg|2|14|Toluol||P2
TT-103|reflux|0-160 °C|||Benzol|neu|P3
"""
# Rows above, columns moved, one gone (Bemerkung), one new (IP), a heading written with other signs.
NEXT = """
Lakeside Works|||||||
Revision C|||||||
|||||||
Stoff|Tag no|Zeichen|Service|Range|Alarms (barg)||IP Code
|||||L|H|
Benzol|PT-101|P1|feed|0-10 barg|1|9|IP66
Wasser|LT-104|P4|drum|0-2 m|||IP65
"""
MENDS = {'heading = "Zeichen",': '"former tag"', 'heading = "Stoff",': '"fluid"'}


def left_by(*paths: Path) -> str:
    """Return the mapping.toml that reading lists leaves."""
    return mapping_text(mapping_of(read_lists(list(paths), KINDS).sheets), KINDS)


def mended(text: str, mends: dict[str, str]) -> str:
    """Give headings other fields, as a person would."""
    lines = text.splitlines()
    for entry, field in mends.items():
        (number,) = (at for at, line in enumerate(lines) if entry in line)
        lines[number] = re.sub(r'field = (?:"[^"]*"|\[[^\]]*\])', f"field = {field}", lines[number])
    return "\n".join(lines)


def by_mapping(text: str, *paths: Path) -> Lists:
    """Read lists by a mapping."""
    file = paths[0].parent / "mapping.toml"
    file.write_text(text, encoding="utf-8")
    found = read_lists(list(paths), KINDS, mapping_toml=file)
    assert_no_cell_is_lost(paths, found)
    return found


def written(path: Path, text: str) -> Path:
    return workbook(path, text) if path.suffix == ".xlsx" else delimited(path, text, separator=";")


def hows(found: Lists) -> dict[str, str]:
    """How each column was matched, by its field."""
    return {
        name: each.how
        for sheet in found.sheets
        if sheet.match is not None
        for name, each in sheet.match.columns.items()
    }


def line_of(text: str, key: str, value: str) -> int:
    return next(number for number, line in enumerate(text.splitlines(), start=1) if f'{key} = "{value}"' in line)


@pytest.mark.parametrize("ending", [".xlsx", ".csv"])
def test_the_next_revision_is_read_without_a_guess(tmp_path: Path, ending: str) -> None:
    text = mended(left_by(written(tmp_path / f"rev-b{ending}", INDEX)), MENDS)
    found = by_mapping(text, written(tmp_path / f"rev-c{ending}", NEXT))
    assert rows(found, "tag", "former_tag", "fluid", "urv", "setting_h", "ip_code") == [
        {
            "tag": "PT-101",
            "former_tag": "P1",
            "fluid": "Benzol",
            "urv": "10 barg",
            "setting_h": "9 barg",
            "ip_code": "IP66",
        },
        {"tag": "LT-104", "former_tag": "P4", "fluid": "Wasser", "urv": "2 m", "ip_code": "IP65"},
    ]
    assert hows(found) == {
        "fluid": "mapping", "tag": "mapping", "former_tag": "mapping", "service": "mapping", "range": "mapping",
        "setting_l": "mapping", "setting_h": "mapping", "ip_code": "synonym",
    }  # fmt: skip
    sheet = "Index" if ending == ".xlsx" else "rev-c"
    where = f"rev-c{ending}, sheet '{sheet}'"
    gone = line_of(text, "heading", "Bemerkung")
    assert [str(each) for each in found.mapping_notes] == [
        f"rev-c{ending} is read as rev-b{ending} was mapped",
        f"line {gone}, {where}: the heading 'Bemerkung' (remarks) stands here no more",
        f"{where}: column H 'IP Code' is new: taken for IP code (synonym)",
    ]


def test_a_new_column_that_means_a_field_that_is_taken_is_kept_and_told(tmp_path: Path) -> None:
    one = workbook(tmp_path / "b.xlsx", "Tag|Bezeichnung|Text\nPT-1|P1|feed\nPT-2|P2|return")
    text = mended(left_by(one), {'heading = "Text"': '"service"', 'heading = "Bezeichnung"': '"former tag"'})
    two = workbook(tmp_path / "c.xlsx", "Tag|Bezeichnung|Service|Text\nPT-1|P1|x|feed\nPT-2|P2|y|return")
    found = by_mapping(text, two)
    assert rows(found, "service", "former_tag", "other") == [
        {"service": "feed", "former_tag": "P1", "other": (("Service", "x"),)},
        {"service": "return", "former_tag": "P2", "other": (("Service", "y"),)},
    ]
    assert [each.text for each in found.mapping_notes][1:] == [
        "column C 'Service' is new: not understood, kept under its heading"
    ]


def test_equal_headings_keep_their_order(tmp_path: Path) -> None:
    one = workbook(tmp_path / "b.xlsx", "Tag|Text|Text|Text\nPT-1|feed|a|P1\nPT-2|return|b|P2")
    text = mended(left_by(one), {'cell = "B1"': '"service"', 'cell = "C1"': '"none"', 'cell = "D1"': '"former tag"'})
    wanted = {"tag": "PT-1", "service": "feed", "former_tag": "P1"}
    for moved in ("Text|Text|Tag|Text\nfeed|a|PT-1|P1", "x||||\n|Text|Text|Text|Tag\n|feed|a|P1|PT-1"):
        assert rows(by_mapping(text, workbook(tmp_path / "c.xlsx", moved)), *wanted) == [wanted]
    # With one of them gone, those that stayed are the same.
    found = by_mapping(text, workbook(tmp_path / "d.xlsx", "Tag|Text|Nr|Text\nPT-1|feed|1|P1"))
    assert rows(found, *wanted) == [wanted]
    assert f"line {line_of(text, 'cell', 'C1')}, d.xlsx, sheet 'Index': the heading 'Text' stands here no more" in [
        str(each) for each in found.mapping_notes
    ]


def test_a_column_without_heading_moves_with_its_neighbour(tmp_path: Path) -> None:
    one = workbook(tmp_path / "b.xlsx", "Nr|Service||Range\n1|feed|PT-1|0-1 bar\n2|return|PT-2|0-2 bar")
    text = left_by(one)
    assert 'cell = "C1", heading = "", ' in re.sub(" +", " ", text)
    two = workbook(tmp_path / "c.xlsx", "x|Nr|Service||Range\n|1|feed|PT-1|0-1 bar\n|2|return|PT-2|0-2 bar")
    found = by_mapping(text, two)
    assert tags(found) == ["PT-1", "PT-2"]
    assert hows(found)["tag"] == "mapping"


def test_files_and_sheets_by_name_else_by_what_stands_in_them(tmp_path: Path) -> None:
    index = workbook(tmp_path / "index rev b.xlsx", {"Cover": "Lakeside", "Liste B": INDEX})
    cables = delimited(
        tmp_path / "cables.csv", "Cable|From|To|Farbe|Length m\nC-1|PT-101|JB-1|red|12\nC-2|PT-102|JB-1|blue|14"
    )
    text = mended(left_by(index, cables), MENDS)
    index_2 = workbook(tmp_path / "Index Rev C.xlsx", {"Liste C": NEXT, "Notes": "a note"})
    cables_2 = delimited(tmp_path / "cable list.csv", "Cable|Farbe|From|To|Length m\nC-1|red|PT-101|JB-1|12")
    found = by_mapping(text, cables_2, index_2)
    assert [(each.sheet, each.kind) for each in found.sheets] == [
        ("cable list", "Cables"), ("Liste C", "Instruments"), ("Notes", None),
    ]  # fmt: skip
    assert rows(found, "former_tag") == [{"former_tag": "P1"}, {"former_tag": "P4"}]
    told = [str(each) for each in found.mapping_notes]
    assert sorted(told[:2]) == [
        "Index Rev C.xlsx is read as index rev b.xlsx was mapped",
        "cable list.csv is read as cables.csv was mapped",
    ]
    assert told[-1] == "Index Rev C.xlsx, sheet 'Notes': is not in the mapping: not read"


def test_a_file_and_a_sheet_that_are_gone_are_told(tmp_path: Path) -> None:
    index = workbook(tmp_path / "index.xlsx", {"A": INDEX, "B": "Tag|Typ\nPT-5|4711\nPT-6|4712"})
    areas = delimited(tmp_path / "areas.csv", "Area|Zone|Gas group|T class\nA1|1|IIB|T3\nA2|2|IIA|T4")
    text = left_by(index, areas)
    found = by_mapping(text, workbook(tmp_path / "index.xlsx", {"A": INDEX}))
    assert [str(each) for each in found.mapping_notes] == [
        f"line {line_of(text, 'sheet', 'B') - 2}, index.xlsx, sheet 'B': there is no such sheet any more",
        f"line {line_of(text, 'file', 'areas.csv') - 1}, areas.csv, sheet 'areas': there is no such file any more",
    ]


def test_headings_that_are_others_altogether_are_found_anew_and_told(tmp_path: Path) -> None:
    text = left_by(workbook(tmp_path / "b.xlsx", INDEX))
    found = by_mapping(text, workbook(tmp_path / "c.xlsx", "KKS|Benennung|Messbereich\nPT-1|x|0-1 bar\nPT-2|y|0-2 bar"))
    assert rows(found, "tag", "service", "urv") == [
        {"tag": "PT-1", "service": "x", "urv": "1 bar"}, {"tag": "PT-2", "service": "y", "urv": "2 bar"},
    ]  # fmt: skip
    told = [each.text for each in found.mapping_notes]
    assert told[1] == "its headings stand neither in rows 2 to 3 nor elsewhere; they are looked for"
    assert "the heading 'Tag No.' (tag) stands here no more" in told
    assert "column A 'KKS' is new: taken for tag (synonym)" in told


# ------------------------------------------------------------------------------------------------------------- mended


def one_line(text: str) -> str:
    return re.sub(" +", " ", text)


def test_a_column_that_is_no_field_is_kept_under_its_heading(tmp_path: Path) -> None:
    path = workbook(tmp_path / "a.xlsx", "Tag|Service|Remarks\nPT-1|feed|x\nPT-2|return|y")
    found = by_mapping(mended(left_by(path), {'heading = "Remarks"': '"none"'}), path)
    assert rows(found, "remarks", "other") == [{"other": (("Remarks", "x"),)}, {"other": (("Remarks", "y"),)}]
    assert found.mapping_notes == ()


def test_two_values_in_one_cell_in_the_order_told(tmp_path: Path) -> None:
    path = workbook(tmp_path / "a.xlsx", "Tag|Lage|Werte\nPT-1|x|80/12\nPT-2|y|90/14")
    text = mended(
        left_by(path), {'heading = "Werte"': '["design temperature", "design pressure"], unit = ["degC", "barg"]'}
    )
    assert rows(by_mapping(text, path), "design_pressure", "design_temperature") == [
        {"design_pressure": "12 barg", "design_temperature": "80 °C"},
        {"design_pressure": "14 barg", "design_temperature": "90 °C"},
    ]


def test_a_field_in_several_columns(tmp_path: Path) -> None:
    path = workbook(tmp_path / "a.xlsx", "Art|Zahl|Zusatz|Service\nPT|101|A|feed\nTT|102||return")
    sheet = """[[sheet]]
file = "a.xlsx"
sheet = "Index"
read_as = "Instruments"
heading_rows = [1]
columns = [
  { cell = "A1", heading = "Art", field = "tag", part = 1 },
  { cell = "B1", heading = "Zahl", field = "tag", part = 2, before = "-" },
  { cell = "C1", heading = "Zusatz", field = "tag", part = 3 },
]
"""
    found = by_mapping(sheet, path)
    assert tags(found) == ["PT-101A", "TT-102"]
    assert [each.text for each in found.mapping_notes] == ["column D 'Service' is new: taken for service (synonym)"]


UNITS = "Tag|Wert|Einheit|Druck\nPT-1|5|bar(g)|3\nPT-2|7|mbar(g)|4"


@pytest.mark.parametrize(
    ("mends", "wanted"),
    [
        ({"Wert": '"operating value normal", unit = "kPag"'}, ["5 kPag", "7 kPag"]),
        ({"Wert": '"operating value normal"', "Einheit": '"unit of B"'}, ["5 barg", "7 mbarg"]),
        ({"Wert": '"operating value normal"', "Einheit": '["range unit", "unit of B"]'}, ["5 barg", "7 mbarg"]),
        ({"Wert": '"operating value normal"', "Einheit": '"none"'}, [None, None]),
        ({"Wert": '"none"', "Druck": '"operating value normal", unit = "barg"'}, ["3 barg", "4 barg"]),
    ],
)
def test_the_unit_of_a_column(tmp_path: Path, mends: dict[str, str], wanted: list[str | None]) -> None:
    path = workbook(tmp_path / "a.xlsx", UNITS)
    text = mended(left_by(path), {f'heading = "{name}"': field for name, field in mends.items()})
    found = rows(by_mapping(text, path), "operating_value_normal")
    assert [each.get("operating_value_normal") for each in found] == wanted


def test_no_unit_where_the_heading_seems_to_state_one(tmp_path: Path) -> None:
    path = workbook(tmp_path / "a.xlsx", "Tag|LRV (bar)|URV (bar)\nPT-1|0|5\nPT-2|0|7")
    assert [each["urv"] for each in rows(read_lists([path], KINDS), "urv")] == ["5 bar", "7 bar"]
    text = left_by(path).replace('unit = "bar"', 'unit = ""')
    found = by_mapping(text, path)
    assert rows(found, "urv", "unitless") == [
        {"unitless": {"lrv": "0", "urv": "5"}}, {"unitless": {"lrv": "0", "urv": "7"}},
    ]  # fmt: skip
    # And so it stays in the mapping that this run leaves.
    assert mapping_text(mapping_of(found.sheets), KINDS).count('unit = ""') == 2


@pytest.mark.parametrize(
    ("decimal", "of_column", "wanted"),
    [
        ("", "", None),
        (",", "", "1.234 barg"),
        (".", "", "1234 barg"),
        (".", ",", "1.234 barg"),
        (",", ".", "1234 barg"),
    ],
)
def test_the_decimal_sign(tmp_path: Path, decimal: str, of_column: str, wanted: str | None) -> None:
    path = delimited(tmp_path / "a.csv", "Tag|Service|URV (barg)\nPT-1|feed|1,234\nPT-2|feed|2,500", separator=";")
    text = left_by(path)
    assert text.count('decimal_sign = ""') == 1
    text = text.replace('decimal_sign = ""', f'decimal_sign = "{decimal}"')
    if of_column:
        text = text.replace('field = "URV",', f'field = "URV", decimal_sign = "{of_column}",')
    found = by_mapping(text, path)
    assert rows(found, "urv")[0].get("urv") == wanted
    assert mapping_of(found.sheets).sheets[0].decimal == decimal


def test_another_row_of_headings(tmp_path: Path) -> None:
    text = (
        "Item|Tag|Service|Range\n(old|former tag|description|range)\nNr|Messstelle|Benennung|Bereich\n"
        "1|PT-1|feed|0-1 bar\n2|PT-2|y|0-2 bar"
    )
    path = workbook(tmp_path / "a.xlsx", text)
    first = left_by(path)
    other = re.sub(r"heading_rows = \[[\d, ]*\]", "heading_rows = [3]", first)
    assert other != first
    found = by_mapping(other, path)
    (sheet,) = found.sheets
    assert sheet.match is not None
    assert sheet.match.header_rows == (2,)
    # The columns of the other row fit nothing, and are told; those of this row are found out.
    assert tags(found) == ["PT-1", "PT-2"]
    assert "column B 'Messstelle' is new: taken for tag (synonym)" in [each.text for each in found.mapping_notes]
    # Without them nothing is told.
    alone = re.sub(r"columns = \[.*?\n\]\n", "", other, flags=re.DOTALL)
    assert by_mapping(alone, path).mapping_notes == ()
    # What this run leaves reads the same, and the next revision too.
    again = mapping_text(mapping_of(found.sheets), KINDS)
    moved = workbook(tmp_path / "a.xlsx", f"Rev C\n{text}")
    assert tags(by_mapping(again, moved)) == ["PT-1", "PT-2"]


def test_a_sheet_left_out_and_a_sheet_of_another_kind(tmp_path: Path) -> None:
    path = workbook(
        tmp_path / "a.xlsx",
        {
            "Index": INDEX,
            "Old": "Tag|Service\nPT-900|x\nPT-901|y",
            "IO": "Tag|I/O Type|Address\nPT-101|AI|1.1\nPT-102|AI|1.2",
        },
    )
    text = left_by(path)
    assert len(tags(by_mapping(text, path))) == 5
    old = text.index('sheet = "Old"')
    text = text[:old] + text[old:].replace('read_as = "Instruments"', 'read_as = "leave out"', 1)
    text = text.replace('read_as = "IO list"', 'read_as = "Instruments"')
    found = by_mapping(text, path)
    assert tags(found) == ["PT-101", "PT-102", "TT-103", "PT-101", "PT-102"]
    assert [(each.sheet, each.kind, each.skipped) for each in found.sheets] == [
        ("Index", "Instruments", ""), ("Old", None, "the mapping leaves it out"), ("IO", "Instruments", ""),
    ]  # fmt: skip
    assert found.mapping_notes == ()
    again = mapping_text(mapping_of(found.sheets), KINDS)
    assert 'read_as = "leave out"\nwhy = "the mapping leaves it out"\n' in again
    assert by_mapping(again, path).records == found.records


def test_a_list_that_lost_its_tags_says_so(tmp_path: Path) -> None:
    path = workbook(tmp_path / "a.xlsx", "Tag|Service\nPT-1|x\nPT-2|y")
    text = mended(left_by(path), {'heading = "Tag"': '"none"'})
    with pytest.raises(NoTags, match="no list with tags was found"):
        by_mapping(text, path)
    beside = workbook(tmp_path / "b.xlsx", {"A": "Tag|Service\nPT-1|x\nPT-2|y", "B": "Tag|Service\nPT-3|x\nPT-4|y"})
    text = left_by(beside)
    at = text.index('sheet = "B"')
    text = text[:at] + text[at:].replace('field = "tag"', 'field = "none"', 1)
    found = by_mapping(text, beside)
    assert tags(found) == ["PT-1", "PT-2"]
    assert [str(each) for each in found.mapping_notes] == [
        f"line {line_of(text, 'sheet', 'B') - 2}, b.xlsx, sheet 'B': no list of Instruments is left of it, "
        "which needs tag: the sheet is not read"
    ]


def test_the_plant_s_own_sheet(tmp_path: Path) -> None:
    path = workbook(
        tmp_path / "a.xlsx",
        {"Index": INDEX, "Plant": "Jurisdiction|ATEX\nNumbering|serial", "More": "Atmospheric pressure|98 kPa"},
    )
    text = left_by(path)
    assert 'read_as = "Plant"\nheading_rows = []' in text
    assert by_mapping(text, path).plant.numbering == "serial"
    at = text.index('sheet = "More"')
    text = text[:at] + 'sheet = "More"\nread_as = "plant"\nheading_rows = []\n'
    assert by_mapping(text, path).plant.atmospheric_pa == 98000.0
