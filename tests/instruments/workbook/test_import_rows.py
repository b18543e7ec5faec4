"""Rows that were struck out, deleted, revised or commented on, each in a real file read whole."""

from __future__ import annotations

from pathlib import Path

import pytest
from openpyxl.cell.rich_text import CellRichText, TextBlock
from openpyxl.cell.text import InlineFont
from openpyxl.comments import Comment
from openpyxl.styles import Font
from openpyxl.worksheet.worksheet import Worksheet

from instruments.workbook.lists import Lists
from loops.plant import assemble
from tests.instruments.workbook.as_sent import as_read, delimited, rows, tags, workbook
from validation.audit import audit
from validation.report.annotated import Annotations

LIST = "Tag|Service|Range|P&ID|Rev\n" + "\n".join(f"PT-{number}|Feed|0-16 barg|D-1|A" for number in range(1, 6))
STRUCK = Font(strike=True)


def of(found: Lists, name: str) -> list[object]:
    return [each.get(name) for each in rows(found)]


def test_struck_out_rows_are_deleted_and_kept(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        for cell in sheet[2]:
            cell.font = STRUCK
        for name in ("A3", "B3", "C3"):
            sheet[name].font = STRUCK
        sheet["A4"].font = STRUCK  # the tag alone
        sheet.row_dimensions[6].font = STRUCK  # what the row would look like where it has no cells

    found = as_read(workbook(tmp_path / "l.xlsx", {"Cover": "Marrowbeck", "Index": LIST}, look))
    assert of(found, "status") == ["deleted", "deleted", "deleted", None, None]
    assert of(found, "urv") == ["16 barg"] * 5
    result = audit(assemble(found), raise_errors=True)
    assert [each.record.tag for each in result.plant.instruments if each.live] == ["PT-4", "PT-5"]


def test_a_struck_out_value_of_a_live_row_is_no_value(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet["C2"].font = STRUCK
        sheet["D3"].font = STRUCK
        sheet["C4"] = CellRichText(
            TextBlock(InlineFont(strike=True), "0-16 barg"), " ", TextBlock(InlineFont(b=True), "0-25 barg")
        )
        sheet["C5"] = CellRichText(TextBlock(InlineFont(strike=True), "0-16"), " barg")

    found = as_read(workbook(tmp_path / "l.xlsx", LIST, look))
    assert of(found, "urv") == [None, "16 barg", "25 barg", None, "16 barg"]
    assert of(found, "pid") == ["D-1", None, "D-1", "D-1", "D-1"]
    assert [each.get("blanks") for each in rows(found)[:3]] == [
        {"lrv": "struck out", "urv": "struck out"},
        {"pid": "struck out"},
        None,
    ]
    assert of(found, "status") == [None] * 5
    assert [(each.cell.address, each.reason) for each in found.problems] == [("C5", "'barg' is not a range")]


@pytest.mark.parametrize(
    ("row", "tag", "status"),
    [
        pytest.param("PT-1|DELETED||", "PT-1", "deleted", id="case27-service"),
        pytest.param("PT-1|Not used||", "PT-1", "void", id="case27-not-used"),
        pytest.param("PT-1|SPARE|0-16 barg|", "PT-1", "spare", id="case27-spare"),
        pytest.param("PT-1|Entfallen||", "PT-1", "deleted", id="case27-german"),
        pytest.param("PT-1|annulé||", "PT-1", "void", id="case27-french"),
        pytest.param("PT-1|Vervallen||", "PT-1", "deleted", id="case27-dutch"),
        pytest.param("PT-1 VOID|Feed|0-16 barg|", "PT-1", "void", id="case27-beside-the-tag"),
        pytest.param("PT-1 (deleted)|Feed|0-16 barg|", "PT-1", "deleted", id="case27-bracket"),
        pytest.param("VOID|||", None, "void", id="case27-for-a-tag"),
        pytest.param("SPARE|||", None, "spare", id="case27-spare-for-a-tag"),
        pytest.param("PT-1|Feed|0-16 barg|DELETED IN REV C", "PT-1", "deleted", id="case27-remark"),
        pytest.param("PT-1|Feed|0-16 barg|gestrichen", "PT-1", "deleted", id="case27-german-remark"),
        pytest.param("PT-1|Reserve pump pressure|0-16 barg|", "PT-1", None, id="case27-of-the-pump"),
        pytest.param("PT-1|Void tank level|0-16 barg|", "PT-1", None, id="case27-of-the-tank"),
        pytest.param("PT-1|Feed|0-16 barg|spare", "PT-1", None, id="case27-a-spare-is-held"),
        pytest.param("PT-1|Feed|0-16 barg|deleted alarm H, see MOC 12", "PT-1", None, id="case27-of-the-alarm"),
    ],
)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_words_say_that_a_row_is_no_longer_live(
    tmp_path: Path, row: str, tag: str | None, status: str | None, kind: str
) -> None:
    text = f"Tag|Service|Range|Remarks\n{row}\nTT-2|Feed|0-100 °C|"
    path = workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)
    found = as_read(path)
    assert (tags(found), of(found, "status")) == ([tag, "TT-2"], [status, None])


def test_a_revision_triangle_is_the_rows_revision_and_drawn_ones_are_said(tmp_path: Path) -> None:
    text = "Tag|Service|Rev\nPT-1|Feed|Δ2\nPT-2|Feed|▲3\nPT-3|Feed|C"
    found = as_read(workbook(tmp_path / "l.xlsx", text))
    assert of(found, "revision") == ["Δ2", "▲3", "C"]
    assert found.sheets[0].remarks == ()


def test_comments_are_kept_with_their_row_and_author(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet["A2"].comment = Comment("Range to be\nchecked", "J. Halden")
        sheet["C2"].comment = Comment("was 0-10", "M. Roe")
        sheet["C3"].comment = Comment("M. Roe:\nwas 0-10", "M. Roe")
        sheet["C1"].comment = Comment("all gauge", "M. Roe")

    text = "Tag|Service|Range|Remarks\nPT-1|Feed|0-16 barg|new\nPT-2|Feed|0-16 barg|\nPT-3|Feed|0-16 barg|old"
    found = as_read(workbook(tmp_path / "l.xlsx", text, look))
    assert of(found, "remarks") == [
        "new; J. Halden: Range to be checked; M. Roe: was 0-10",
        "M. Roe: was 0-10",
        "old",
    ]
    assert found.sheets[0].notes == ((1, "comment at C1: M. Roe: all gauge"),)


def test_what_an_annotated_copy_says_is_no_remark(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet["C2"].comment = Comment("to be checked", "J. Halden")

    text = "Tag|Service|Range|Alarm H\nPT-1|Feed|0-16 barg|20 barg\nPT-2|Feed|0-16 barg|20 barg\nPT-2|Gas|0-10 barg|"
    first = as_read(workbook(tmp_path / "l.xlsx", text, look))
    result = audit(assemble(first), raise_errors=True)
    made = Annotations(result).write(str(tmp_path / "l.xlsx"), tmp_path / "annotated.xlsx")
    assert made.cells > 2
    again = as_read(tmp_path / "annotated.xlsx")
    assert of(again, "remarks") == of(first, "remarks") == ["J. Halden: to be checked", None, None]
