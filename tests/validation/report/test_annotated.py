"""The annotated copy: what stands at which cell, in which colour, and under which name."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace
from functools import partial
from pathlib import Path
from typing import Any

import openpyxl
import pytest

from instruments.workbook.annotate.comments import plain_text
from instruments.workbook.reader import read_file
from tests.validation.report.small_audit import FINDINGS, PROBLEMS, SHEETS, cell, finding, small_audit
from validation.finding import Finding, Fix, Outcome, Severity
from validation.report.annotated import Annotated, Annotations, annotated_names

LEGEND = "Screening aid - requires review by a competent person. Marked by Ferrule: red danger, orange fault, "
NAMES = {"FFB3B3": "danger", "FFD28A": "fault", "BDD7EE": "gap", "DCCBEF": "review"}


def said(findings: Sequence[Finding] = FINDINGS, *, file: str = "in/index.xlsx", **plant: Any) -> dict[str, str]:
    """What stands at each cell: sheet, cell and colour, and the comment without what every sheet has once."""
    marks = Annotations(small_audit(findings, **plant)).marks(file)
    return {
        f"{sheet} {cell(row + 1, column).address} {NAMES[mark.fill.pale]}": plain_text(mark.text).partition(
            f"\n\n{LEGEND}"
        )[0]
        for sheet, cells in marks.items()
        for (row, column), mark in cells.items()
    }


def test_each_cell_says_what_is_wrong() -> None:
    range_text = "RNG02 fault  PT-101 (URV)\nURV 20 bar is above 16 bar\nFix: range 0 to 16 bar or: device types P40"
    review = "RNG02 review  PT-103 (URV)\nURV 20 bar is above 16 bar, if the reference is gauge"
    assert said() == {
        "Index AE8 danger": "HAZ05 danger  PT-102\nmarked T3, the area asks for T4\nFix: a device marked T4 or better",
        "Index V7 fault": f"{range_text}\n\n{review}",
        "Types H3 fault": f"{range_text}\n\n{review}",
        "Index A9 gap": "TAG04 gap  =1+1\n=1+1 does not fit",
        "Index V6 gap": "not read  PT-100\nURV: '16 bsr' cannot be read: unit 'bsr' is not known\nFix: bar or: psi",
        # A whole column is said at its heading.
        "Index D2 gap": "not read\nLRV: 'kg' cannot be read: a mass is no pressure (and 1,233 more)",
    }
    assert said(file="in/areas.csv") == {
        "Zones C4 danger": "HAZ05 danger  PT-102\nmarked T3, the area asks for T4\nFix: a device marked T4 or better"
    }
    assert said(file="other.xlsx") == {}


def test_a_review_alone_is_violet() -> None:
    alone = finding(outcome=Outcome.REVIEW)
    assert set(said([alone], problems=())) == {"Index V7 review", "Types H3 review"}


def test_the_worst_gives_the_colour_and_stands_first() -> None:
    both = [
        finding(rule="TAG04", severity=Severity.GAP, part="", message="one", cells=(cell(7, 0),)),
        finding(rule="RNG02", outcome=Outcome.REVIEW, part="", message="two", cells=(cell(7, 0),)),
        finding(rule="HAZ05", severity=Severity.DANGER, part="", message="three", cells=(cell(7, 0),)),
    ]
    found = said(both, problems=())
    assert list(found) == ["Index A7 danger"]
    assert re.findall("one|two|three", found["Index A7 danger"]) == ["three", "one", "two"]


def test_the_same_of_many_subjects_is_said_once() -> None:
    """A value of a device type, an area or a card is wrong for all that share it."""
    many = [finding(subject=f"PT-{number}", part="", cells=(cell(3, 7, "Types"),)) for number in range(100, 200)]
    text = said(many, problems=())["Types H3 fault"]
    assert text.count("URV 20 bar") == 1
    assert text.startswith("RNG02 fault  PT-100; PT-101; PT-102; ")
    assert re.search(r" and \d+ more\n", text)
    assert len(text) < 400


def test_a_comment_does_not_grow_for_ever() -> None:
    many = [
        finding(subject=f"PT-{number}", part="", message=f"{number} bar", cells=(cell(3, 7),)) for number in range(500)
    ]
    text = said(many, problems=())["Index H3 fault"]
    assert text.count("RNG02 fault") == 8
    assert text.endswith("\n\nand 492 more at this cell: see exceptions.xlsx")
    fixes = tuple(Fix(text=f"type {number} " + "x" * 500) for number in range(40))
    long = said([finding(message="y" * 5_000, fixes=fixes, cells=(cell(3, 7),))], problems=())["Index H3 fault"]
    assert len(long) < 1_400
    assert all(len(line) <= 610 for line in long.split("\n"))


def test_what_the_whole_list_lacks_is_said_at_the_heading_of_the_tags() -> None:
    lacking = finding(rule="DAT01", severity=Severity.GAP, subject="index.xlsx", part="", message="no column", cells=())
    assert said([lacking], problems=()) == {"Index A2 gap": "DAT01 gap  index.xlsx\nno column"}


def test_a_data_sheet_with_one_tag_a_column_has_its_headings_at_the_left() -> None:
    index, *others = SHEETS
    turned = (replace(index, turned=True), *others)
    problem = replace(PROBLEMS[1], cell=cell(4, 6))
    lacking = finding(rule="DAT01", severity=Severity.GAP, subject="index.xlsx", part="", message="no column", cells=())
    assert said([lacking], problems=(problem,), sheets=turned) == {
        "Index B1 gap": "DAT01 gap  index.xlsx\nno column",
        "Index B4 gap": "not read\nLRV: 'kg' cannot be read: a mass is no pressure (and 1,233 more)",
    }


def test_an_unread_cell_that_a_finding_tells_is_not_told_twice() -> None:
    unread = partial(finding, rule="DAT09", severity=Severity.GAP)
    one = unread(subject="PT-100", part="URV", message="16 bsr", cells=(cell(6, 21),))
    column = unread(subject="", part="LRV", message="all kg", cells=(cell(3, 3),))
    assert said([one, column]) == {
        "Index V6 gap": "DAT09 gap  PT-100 (URV)\n16 bsr",
        "Index D2 gap": "DAT09 gap  (LRV)\nall kg",
    }


def test_the_caution_stands_once_a_sheet_in_its_first_comment() -> None:
    marks = Annotations(small_audit()).marks("in/index.xlsx")
    for cells in marks.values():
        with_it = [place for place, mark in cells.items() if LEGEND in plain_text(mark.text)]
        assert with_it == [min(cells)]


def test_odd_text_is_shown_and_not_alive() -> None:
    odd = finding(subject="PT\x07\u202e-1", part="", message="<b>=1+1</b>\ud800 _x0041_", cells=(cell(3, 7),))
    assert said([odd], problems=()) == {
        "Index H3 fault": "RNG02 fault  PT<U+0007><U+202E>-1\n<b>=1+1</b><U+D800> _x005F_x0041_"
    }


@pytest.mark.parametrize(
    ("files", "names"),
    [
        (["index.xlsx"], ["annotated.xlsx"]),
        (["INDEX.XLSX"], ["annotated.xlsx"]),
        (["in/loops.csv"], ["annotated.xlsx"]),
        (["loops"], ["annotated.xlsx"]),
        (["index.xlsm"], ["index.annotated.xlsm"]),
        (["index.xltx"], ["index.annotated.xltx"]),
        (["a.xlsx", "b.csv", "c.xlsm"], ["a.annotated.xlsx", "b.annotated.xlsx", "c.annotated.xlsm"]),
        (["a.xlsx", "a.csv", "b/A.xlsx"], ["a.annotated.xlsx", "a-2.annotated.xlsx", "A-3.annotated.xlsx"]),
        (["a.xlsx", "a.xlsx"], ["a.annotated.xlsx"]),
        (["rev.3.final.xlsx", "b.xlsx"], ["rev.3.final.annotated.xlsx", "b.annotated.xlsx"]),
    ],
)
def test_names(files: list[str], names: list[str]) -> None:
    assert list(annotated_names(files).values()) == names
    assert list(annotated_names(files)) == list(dict.fromkeys(files))


def test_delimited_text_becomes_a_workbook(tmp_path: Path) -> None:
    listed = tmp_path / "zones [1].csv"
    listed.write_text("Area,Name,Zone\n10A,=1+1,1\n10B,<b>,2\n10C,x,1\n", encoding="utf-8")
    wrong = finding(subject="10B", part="", cells=(cell(3, 2, "zones [1]", str(listed)),))
    made = Annotations(small_audit([wrong], problems=())).write(str(listed), tmp_path / "annotated.xlsx")
    assert made == Annotated(cells=1, sheets=1)
    (before,), (after,) = read_file(listed), read_file(tmp_path / "annotated.xlsx")
    assert after.rows == before.rows
    sheet = openpyxl.load_workbook(tmp_path / "annotated.xlsx").worksheets[0]
    assert (sheet.title, sheet["B2"].value, sheet["B2"].data_type) == ("zones _1_", "=1+1", "s")
    assert sheet["C3"].fill.start_color.rgb == "FFFFD28A"
    assert sheet["C3"].comment.text.startswith("RNG02 fault  10B\nURV 20 bar is above 16 bar")
