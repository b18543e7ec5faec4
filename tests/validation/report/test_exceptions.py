"""exceptions.xlsx, read back: what each sheet says, and that nothing from a list acts, hides or is cut unseen."""

import re
import subprocess
import sys
import tracemalloc
import zipfile
from collections import Counter
from functools import lru_cache
from pathlib import Path
from typing import Any

import openpyxl
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from python_calamine import CalamineWorkbook
from reportlab.lib.utils import simpleSplit

from instruments.origin import Cell
from tests.validation.report.small_audit import (
    FINDINGS,
    PROBLEMS,
    RULES,
    SHEETS,
    cell,
    coverage,
    finding,
    small_audit,
)
from validation.audit import Audit
from validation.finding import Fix, Outcome, Severity
from validation.report import book
from validation.report.caution import CAUTION
from validation.report.cell_text import CUT, MOST_CHARACTERS, cell_text
from validation.report.exceptions import write_exceptions

ROOT = Path(__file__).parents[3]
NAMES = (
    "Summary", "Causes", "Findings", "Reviews", "Coverage", "Unread cells", "Columns", "Notes", "Rules",
)  # fmt: skip
TABLES = NAMES[1:]


def write(folder: Path, result: Audit) -> Path:
    path = folder / "exceptions.xlsx"
    write_exceptions(result, path, rules=RULES)
    return path


@lru_cache(maxsize=4)
def _loaded(path: Path, written: int) -> Any:
    return openpyxl.load_workbook(path)


def load(path: Path) -> Any:
    """Return the workbook, read once for all that one test asks of it."""
    return _loaded(path, path.stat().st_mtime_ns)


def sheets(path: Path) -> dict[str, list[list[Any]]]:
    """Return the filled cells of each row of each sheet."""
    return {
        sheet.title: [[value for value in row if value is not None] for row in sheet.iter_rows(values_only=True)]
        for sheet in load(path)
    }


def table(path: Path, name: str) -> list[tuple[Any, ...]]:
    return list(load(path)[name].iter_rows(values_only=True))


@pytest.fixture(scope="module")
def small(tmp_path_factory: pytest.TempPathFactory) -> Path:
    result = small_audit()
    result.coverage["RNG02"].assumed.update({"receiver 250 ohm": 41})
    return write(tmp_path_factory.mktemp("small"), result)


def test_summary(small: Path) -> None:
    assert sheets(small)["Summary"] == [
        ["Exception list - Marrowbeck Works"],
        [CAUTION],
        [],
        ["What was read"],
        ["file", "sheet", "read as", "rows", "cells filled", "read", "unread"],
        ["index.xlsx", "Index", "Instruments", 4, 38, 37, 1],
        ["index.xlsx", "Types", "Device types", 2, 9, 9, 0],
        ["areas.csv", "Zones", "not read: no heading of a known list was found", 0, 6, 0, 0],
        [
            "4 tags on 4 instruments, 3 of them live; 3 loops, 3 circuits, from 6 rows of 3 sheets in 2 files. "
            "53 cells in them: 46 read, 1 unread, 6 on sheets that were not read."
        ],
        [],
        ["Findings by severity and family"],
        ["family", "danger", "fault", "gap", "findings", "to review", "unchecked"],
        ["TAG identification", 0, 0, 1, 1, 0, 0],
        ["RNG ranging", 0, 1, 0, 1, 1, 2],
        ["HAZ hazardous area", 1, 0, 0, 1, 0, 1],
        ["all", 1, 1, 1, 3, 1, 3],
        [
            "danger: someone can get hurt, or a protection fails; fault: it will not measure, drive or fit as "
            "built; gap: the record is wrong or incomplete; to review: the data is there, a competent person must "
            "decide; unchecked: a value that the rule needs is blank or could not be read, and the sheet Coverage "
            "says which."
        ],
        [],
        ["Rules that broke: what they would have said is missing"],
        ["code", "subject", "what it raised"],
        ["RNG05", "PT-102", "ZeroDivisionError: float division by zero"],
        [],
        ["The ten most common causes"],
        ["findings", "severity", "code", "cause", "subjects"],
        [1, "danger", "HAZ05", "marked T3, the area asks for T4", "PT-102"],
        [1, "fault", "RNG02", "URV 20 bar is above 16 bar", "PT-101"],
        [1, "gap", "TAG04", "=1+1 does not fit", "=1+1"],
        ["All causes stand on the sheet Causes, each finding on the sheet Findings."],
        [],
        ["What was assumed"],
        ["assumption", "checks that rest on it"],
        ["most tags fit isa-hyphen"],
        ["receiver 250 ohm", 41],
        [],
        ["Sheets that were absent, and what they would let be checked"],
        [
            "Absent, and missed by no rule of this audit: IO list, Alarm and trip list, Plant, Loops, Terminations, "
            "Cables, Cable types."
        ],
        ["sheet", "checks it would let be made", "and with other values", "what it brings", "rules"],
        ["Areas, named in a column 'area'", 1, 0, "area temperature class (1)", "HAZ05 (1)"],
        [],
        ["What was skipped, and what was noticed in reading"],
        ["file", "sheet", "what"],
        ["index.xlsx", "Index", "1 column not understood, kept: see the sheet Columns"],
        ["index.xlsx", "Index", "1 cell filled from merged cells"],
        ["areas.csv", "Zones", "not read: no heading of a known list was found"],
        ["1 instrument deleted, void, future, spare or demolished: not checked"],
        ["2 rows taken as titles, notes and sections: see the sheet Notes"],
    ]


FINDING_HEADINGS = (
    "severity", "code", "subject", "part", "what is wrong", "found", "wanted", "off by", "working", "fix", "file",
    "sheet and cell", "basis", "done by", "remark",
)  # fmt: skip
EXPECTED = {
    "Causes": [
        (
            "count", "severity", "outcome", "code", "rule", "cause", "found", "wanted", "fix for all of them",
            "cells that all of them name", "subjects",
        ),
        (
            1, "danger", "finding", "HAZ05", "A temperature class weaker than the area's",
            "marked T3, the area asks for T4", "T3", "T4", "a device marked T4 or better",
            "Index: AE8\nZones: C4", "PT-102",
        ),
        (
            1, "fault", "finding", "RNG02", "A range outside its body's limits", "URV 20 bar is above 16 bar",
            "20 bar", "at most 16 bar", "• range 0 to 16 bar\n• device types P40", "Index: V7\nTypes: H3", "PT-101",
        ),
        (
            1, "gap", "finding", "TAG04", "A tag that does not fit the plant's pattern", "=1+1 does not fit", "=1+1",
            None, None, "Index: A9", "=1+1",
        ),
        (
            1, "fault", "review", "RNG02", "A range outside its body's limits",
            "URV 20 bar is above 16 bar, if the reference is gauge", "20 bar", "at most 16 bar", None,
            "Index: V7\nTypes: H3", "PT-103",
        ),
    ],
    "Findings": [
        FINDING_HEADINGS,
        (
            "danger", "HAZ05", "PT-102", None, "marked T3, the area asks for T4", "T3", "T4", None, None,
            "a device marked T4 or better", "index.xlsx\nareas.csv", "Index: AE8\nZones: C4",
            "IEC 60079-14:2013, 5.6", None, None,
        ),
        (
            "fault", "RNG02", "PT-101", "URV", "URV 20 bar is above 16 bar", "20 bar", "at most 16 bar", "4 bar",
            "20 bar - 16 bar = 4 bar", "• range 0 to 16 bar\n• device types P40 (then finds RNG03, RNG08)",
            "index.xlsx", "Index: V7\nTypes: H3", "common practice", None, None,
        ),
        (
            "gap", "TAG04", "=1+1", None, "=1+1 does not fit", "=1+1", None, None, None, None, "index.xlsx",
            "Index: A9", "ISA-5.1 (from memory)", None, None,
        ),
    ],
    "Reviews": [
        (*FINDING_HEADINGS[:4], "what to decide", *FINDING_HEADINGS[5:]),
        (
            "fault", "RNG02", "PT-103", "URV", "URV 20 bar is above 16 bar, if the reference is gauge", "20 bar",
            "at most 16 bar", "4 bar", "20 bar - 16 bar = 4 bar\nassumed: receiver 250 ohm\nassumed: 24 V", None,
            "index.xlsx", "Index: V7\nTypes: H3", "common practice", None, None,
        ),
    ],
    "Coverage": [
        (
            "code", "rule", "severity", "subject", "subjects", "clear", "finding", "review", "unchecked",
            "not applicable", "unchecked because of these blanks",
        ),
        (
            "HAZ05", "A temperature class weaker than the area's", "danger", "instrument", 4, 0, 1, 0, 1, 2,
            "area temperature class (1)",
        ),
        (
            "RNG02", "A range outside its body's limits", "fault", "instrument", 4, 0, 1, 1, 2, 0,
            "URL (2), LRV or range (1)",
        ),
        (
            "TAG04", "A tag that does not fit the plant's pattern", "gap", "group of instruments", 4, 2, 1, 0, 0, 1,
            None,
        ),
    ],
    "Unread cells": [
        (
            "file", "sheet", "cell", "subject", "field", "what stands there", "why it could not be read",
            "readings considered", "cells",
        ),
        ("index.xlsx", "Index", "V6", "PT-100", "URV", "16 bsr", "unit 'bsr' is not known", "bar or psi", 1),
        ("index.xlsx", "Index", "column D", None, "LRV", "kg", "a mass is no pressure", None, 1234),
    ],
    "Columns": [
        ("file", "sheet", "column", "heading", "field", "how matched", "likelihood", "unit of the column"),
        ("index.xlsx", "Index", "A", "Tag No.", "tag", "synonym", 1, None),
        ("index.xlsx", "Index", "D", "From", "LRV", "synonym", 1, "in column E"),
        ("index.xlsx", "Index", "E", "EU", "unit", "the unit of the columns beside it", None, None),
        ("index.xlsx", "Index", "F", "Colour", "kept", "not understood; kept under its own heading", None, None),
        ("index.xlsx", "Index", "G", "Zone", "area classification", "synonym", 1, None),
        ("index.xlsx", "Index", "H", None, "area classification", "says the rest of it", None, None),
        ("index.xlsx", "Index", "V", "Cal. upp", "URV", "likeness", 0.875, "barg"),
    ],
    "Notes": [
        ("file", "sheet", "row", "taken as", "text"),
        ("index.xlsx", "Index", 1, "title or note, not applied", "Rev 3 | checked"),
        ("index.xlsx", "Index", 5, "section", "FILTER GALLERY"),
    ],
    "Rules": [
        ("code", "severity", "rule", "subject", "needs", "basis", "why it matters, and what to do"),
        (
            "HAZ05", "danger", "A temperature class weaker than the area's", "instrument",
            "Ex marking, area temperature class", "IEC 60079-14:2013, 5.6",
            "Why it matters: a surface that is hotter than the area allows can ignite what it stands in.\n"
            "What to do: take a device of the class T6.",
        ),
        (
            "RNG02", "fault", "A range outside its body's limits", "instrument", "LRV or range, URL",
            "common practice", None,
        ),
        (
            "TAG04", "gap", "A tag that does not fit the plant's pattern", "group of instruments", None,
            "ISA-5.1 (from memory)", "Why it matters: nobody finds it.",
        ),
    ],
}  # fmt: skip


def test_sheets_in_order(small: Path) -> None:
    assert tuple(load(small).sheetnames) == NAMES


@pytest.mark.parametrize("name", TABLES)
def test_tables(small: Path, name: str) -> None:
    assert table(small, name) == EXPECTED[name]


def test_another_reader_reads_the_same(small: Path) -> None:
    read = CalamineWorkbook.from_path(str(small))
    for name in TABLES:
        rows = [
            tuple(None if value == "" else value for value in row) for row in read.get_sheet_by_name(name).to_python()
        ]
        assert rows == EXPECTED[name]


def test_an_empty_audit_says_so_on_each_sheet(tmp_path: Path) -> None:
    result = small_audit([], sheets=(), problems=(), name=None)
    result.coverage, result.broken, result.assumptions = {}, [], ()
    found = sheets(write(tmp_path, result))
    assert {name: rows[1:] for name, rows in found.items() if name != "Summary"} == {
        "Causes": [["no findings"]],
        "Findings": [["no findings"]],
        "Reviews": [["nothing to review"]],
        "Coverage": [["no rule ran"]],
        "Unread cells": [["every cell of a known column was read"]],
        "Columns": [["no sheet was read"]],
        "Notes": [["no row was taken as a title, a note or a section"]],
        "Rules": [list(filter(None, row)) for row in EXPECTED["Rules"][1:]],
    }
    summary = found["Summary"]
    assert summary[0] == ["Exception list"]
    assert summary[-12:-9] == [["The ten most common causes"], ["No findings."], []]
    assert summary[-9:-6] == [["What was assumed"], ["Nothing."], []]
    assert ["Rules that broke: what they would have said is missing"] not in summary


def test_a_thousand_equal_findings_are_one_line_of_the_summary(tmp_path: Path) -> None:
    many = [finding(subject=f"PT-{number}", cells=(cell(number + 1, 21),)) for number in range(1000)]
    found = sheets(write(tmp_path, small_audit([*many, FINDINGS[0]])))
    subjects = "; ".join(f"PT-{number}" for number in range(5))
    line = [1000, "fault", "RNG02", "URV 20 bar is above 16 bar", f"{subjects} and 995 more"]
    assert found["Summary"].index(line) + 1 == found["Summary"].index(
        [1, "danger", "HAZ05", "marked T3, the area asks for T4", "PT-102"]
    )
    subjects = "; ".join(f"PT-{number}" for number in range(10))
    assert found["Causes"][1] == [
        1000, "fault", "finding", "RNG02", "A range outside its body's limits", "URV 20 bar is above 16 bar",
        "20 bar", "at most 16 bar", f"{subjects} and 990 more",
    ]  # fmt: skip
    assert len(found["Findings"]) == 1002


def test_the_cells_that_many_findings_go_back_to_stand_with_their_cause(tmp_path: Path) -> None:
    many = [
        finding(subject=f"PT-{number}", message=f"URV 2{number} bar is above 16 bar", found=f"2{number} bar",
                values={"end": "URV", "value": f"2{number} bar", "limit": "16 bar"},
                cells=(cell(number + 1, 21), cell(3, 7, "Types")))
        for number in range(4)
    ]  # fmt: skip
    found = sheets(write(tmp_path, small_audit(many)))["Summary"]
    assert [4, "fault", "RNG02", "URV 20 to 23 bar is above 16 bar\n(Types: H3)", "PT-0; PT-1; PT-2; PT-3"] in found


def test_only_the_ten_most_common_causes_stand_on_the_summary(tmp_path: Path) -> None:
    many = [
        finding(message=f"m{number}", cause=f"m{number}", cells=()) for number in range(12) for _ in range(number + 1)
    ]
    found = sheets(write(tmp_path, small_audit(many)))
    start = found["Summary"].index(["The ten most common causes"]) + 2
    shown = [row[:4] for row in found["Summary"][start : start + 11]]
    assert shown == [
        *([number + 1, "fault", "RNG02", f"m{number}"] for number in range(11, 1, -1)),
        ["All causes stand on the sheet Causes, each finding on the sheet Findings."],
    ]
    assert len(found["Causes"]) == 13


def test_a_sheet_that_would_help_more_rules_is_told_with_each(tmp_path: Path) -> None:
    result = small_audit()
    result.coverage["RNG02"] = coverage(
        "RNG02", 0, 1, 1, 5, 0,
        unchecked={
            ("range resistor", "HART"): ["a", "b"], ("HART",): ["c"], ("supply V min or LRV",): ["d"], ("LRV",): ["e"],
        },
    )  # fmt: skip
    found = sheets(write(tmp_path, result))["Summary"]
    assert ["Loops", 4, 0, "HART (3), range resistor (2), supply V min (1)", "RNG02 (4)"] in found


def test_files_of_one_name_are_told_apart(tmp_path: Path) -> None:
    other = SHEETS[0].__class__(file="old/index.xlsx", sheet="Index", kind="Instruments")
    result = small_audit(
        [finding(cells=(cell(1, 0), cell(2, 0, file="old/index.xlsx"), cell(3, 0, file="other/areas.csv")))],
        files=("in/index.xlsx", "old/index.xlsx"),
        sheets=(SHEETS[0], other),
    )
    path = write(tmp_path, result)
    assert table(path, "Findings")[1][10] == "in/index.xlsx\nold/index.xlsx\nareas.csv"
    assert load(path)["Findings"].oddHeader.right.text == "in/index.xlsx, old/index.xlsx"


def test_a_rule_that_the_registry_has_not_is_listed_without_its_title(tmp_path: Path) -> None:
    result = small_audit([finding(rule="OLD01")])
    result.coverage["OLD01"] = coverage("OLD01", 1, 2, 3, 4, 5)
    path = write(tmp_path, result)
    assert table(path, "Coverage")[-1] == ("OLD01", None, None, None, 15, 1, 2, 3, 4, 5, None)
    assert table(path, "Findings")[1][12] is None
    assert ["OLD", 0, 1, 0, 1, 0, 4] in sheets(path)["Summary"]


# --- a page to be printed ---------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", NAMES)
def test_page(small: Path, name: str) -> None:
    sheet = load(small)[name]
    assert (sheet.page_setup.orientation, sheet.page_setup.paperSize) == ("landscape", 9)
    assert sheet.sheet_properties.pageSetUpPr.fitToPage
    assert (sheet.page_setup.fitToWidth, sheet.page_setup.fitToHeight) == (1, 0)
    header, footer = sheet.oddHeader, sheet.oddFooter
    assert (header.left.text, header.center.text, header.right.text) == (
        "Exception list - Marrowbeck Works", "&A", "index.xlsx, areas.csv",
    )  # fmt: skip
    assert (footer.left.text, footer.right.text) == (
        "Screening aid - requires review by a competent person", "page &P of &N",
    )  # fmt: skip


@pytest.mark.parametrize("name", TABLES)
def test_table_setup(small: Path, name: str) -> None:
    sheet = load(small)[name]
    assert sheet.print_title_rows == "$1:$1"
    assert sheet.freeze_panes == {
        "Causes": "E2", "Findings": "D2", "Reviews": "D2", "Coverage": "B2", "Unread cells": "D2", "Rules": "B2",
    }.get(name, "A2")  # fmt: skip
    assert sheet.auto_filter.ref == sheet.dimensions
    rows = len(EXPECTED[name])
    assert sheet.dimensions == f"A1:{book.column_letters(len(EXPECTED[name][0]) - 1)}{rows}"


def luminance(colour: str) -> float:
    red, green, blue = (int(colour[index : index + 2], 16) for index in (2, 4, 6))
    return 0.299 * red + 0.587 * green + 0.114 * blue


def test_severity_is_told_by_a_word_and_survives_grey_print(small: Path) -> None:
    sheet = load(small)["Findings"]
    cells = {sheet.cell(row, 1).value: sheet.cell(row, 1) for row in (2, 3, 4)}
    assert list(cells) == ["danger", "fault", "gap"]
    greys = [luminance(each.fill.start_color.rgb) for each in cells.values()]
    assert greys[1] - greys[0] > 40
    assert greys[2] - greys[1] > 40
    for each, grey in zip(cells.values(), greys, strict=True):
        assert abs(luminance(each.font.color.rgb) - grey) > 120


LONG = finding(
    subject=", ".join(f"PT-{number}" for number in range(40)),
    message="the quick brown fox jumps over the lazy dog " * 9,
    working="24.0 V - 22 mA x (250 ohm + 340 ohm + 24.2 ohm) = 10.488 V at the terminals, 10.5 V needed " * 3,
    fixes=tuple(Fix(text=f"device type {number} of the catalogue, which holds the range") for number in range(9)),
    found="WWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWW",
)


@pytest.mark.parametrize("name", TABLES)
def test_rows_are_high_enough_for_their_text(tmp_path: Path, name: str) -> None:
    result = small_audit([*FINDINGS, LONG])
    sheet = load(write(tmp_path, result))[name]
    for row in sheet.iter_rows():
        height = sheet.row_dimensions[row[0].row].height
        lines = 1
        for each in row:
            if not isinstance(each.value, str):
                continue
            # A column's width in digits of 7 pixels at 96 to the inch, without the cell's edges.
            width_pt = (sheet.column_dimensions[each.column_letter].width * 7 - 5) * 72 / 96
            font = "Helvetica-Bold" if each.font.b else "Helvetica"
            broken = re.sub(r"(\S{12})(?=\S)", r"\1 ", each.value) if "W" * 12 in each.value else each.value
            lines = max(lines, len(simpleSplit(broken, font, each.font.sz, width_pt)))
        assert height >= min(lines * 1.15 * 9, 409)
        assert height <= lines * 12 * 1.6 + 30


def test_the_summary_is_high_enough_for_its_text(tmp_path: Path) -> None:
    result = small_audit([LONG], name="Marrowbeck Works " * 12)
    result.assumptions = ("the receiver has 250 ohm where none is stated, and the cable none " * 20, "short")
    sheet = load(write(tmp_path, result))["Summary"]
    spans = {merged.start_cell.coordinate: merged for merged in sheet.merged_cells.ranges}
    for row in sheet.iter_rows():
        for each in row:
            if isinstance(each.value, str):
                merged = spans[each.coordinate]
                width = sum(
                    sheet.column_dimensions[book.column_letters(column - 1)].width
                    for column in range(merged.min_col, merged.max_col + 1)
                )
                font = "Helvetica-Bold" if each.font.b else "Helvetica"
                lines = len(simpleSplit(each.value, font, each.font.sz, (width * 7 - 5) * 72 / 96))
                assert sheet.row_dimensions[each.row].height >= lines * 1.15 * each.font.sz


def test_no_word_of_a_heading_is_broken(small: Path) -> None:
    for name in TABLES:
        sheet = load(small)[name]
        for each in sheet[1]:
            width_pt = (sheet.column_dimensions[each.column_letter].width * 7 - 5) * 72 / 96
            words = each.value.split()
            assert len(simpleSplit(each.value, "Helvetica-Bold", 9, width_pt)) <= len(words)
            assert all(book.em_of(word, bold=True) * 9 <= width_pt for word in words)


# --- whatever a list holds --------------------------------------------------------------------------------------

HOSTILE = (
    "=1+1", "+1", "-1", "@SUM(A1)", "=HYPERLINK(\"http://example.com\",\"x\")", "http://example.com", "#N/A", "TRUE",
    "1E5", "0001", "<b>&amp;</b>]]>", "{=1}", "'quoted", "\x00\x01\x1b[31m", "a\r\nb\rc\nd\te", "\ud83d lone",
    "\u202egnp.exe", "_x0041_", "&C&P&8", "  blanks  ", "", "\ufffe", "😀" * 20_000, "x" * 40_000, "\n" * 400,
    "{x} {0} %s",
)  # fmt: skip


@pytest.mark.parametrize("text", HOSTILE, ids=range(len(HOSTILE)))
def test_what_comes_from_a_list_is_typed_as_text(tmp_path: Path, text: str) -> None:
    hostile = finding(
        subject=text, part=text, message=text, cause=text, values={text: text}, found=text, wanted=text, off_by=text,
        working=text, assumed=(text,), fixes=(Fix(text=text), Fix(text=text)),
        cells=(Cell(file=text, sheet=text, row=1, column=0),),
    )  # fmt: skip
    sheet = SHEETS[0].__class__(
        file=text, sheet=text, skipped=text, kind=text, notes=((1, text),), sections=((2, text),), remarks=(text,)
    )
    problem = PROBLEMS[0].__class__(
        cell=Cell(file=text, sheet=text, row=1, column=0), field=text, title=text, subject=text, text=text,
        reason=text, readings=(text, text),
    )  # fmt: skip
    result = small_audit([hostile], name=text, files=(text,), sheets=(sheet,), problems=(problem,))
    result.assumptions = (text,)
    path = write(tmp_path, result)
    typed = cell_text(text) or None
    row = table(path, "Findings")[1]
    assert row[2:8] == (typed, typed, typed, typed, typed, typed)
    # Text it stays when somebody edits the cell.
    assert all(each.quotePrefix for each in load(path)["Findings"][2])
    assert table(path, "Unread cells")[1][3:7] == (typed, typed, typed, typed)
    assert table(path, "Notes")[1][-1] == typed
    with zipfile.ZipFile(path) as package:
        for name in package.namelist():
            part = package.read(name)
            assert b"TargetMode" not in part
            if name.startswith("xl/worksheets/"):
                assert re.findall(rb"<f[ >/]|<hyperlink|<c [^>]*\bt=\"(?!inlineStr)", part) == []
                for kind in (b"oddHeader", b"oddFooter"):
                    said = re.search(rb"<%b>([^<]*)</%b>" % (kind, kind), part)
                    assert said is not None
                    assert len(said[1].decode().replace("&amp;", "&")) <= 255


@given(st.lists(st.text(st.characters(categories=None), max_size=40), min_size=30, max_size=60))
@settings(max_examples=6, suppress_health_check=[HealthCheck.function_scoped_fixture])
def test_any_text_can_be_written_and_read_back(tmp_path: Path, texts: list[str]) -> None:
    path = write(tmp_path, small_audit([finding(subject=text, message=text) for text in texts], name=texts[0]))
    assert [row[2] for row in table(path, "Findings")[1:]] == [cell_text(text) or None for text in texts]


def test_text_is_cut_where_a_cell_holds_no_more(tmp_path: Path) -> None:
    tags = ", ".join(f"PT-{number:05}" for number in range(5000))
    result = small_audit([finding(subject=tags)])
    path = write(tmp_path, result)
    subject = table(path, "Findings")[1][2]
    assert (len(subject), subject[-len(CUT) :], subject[:17]) == (MOST_CHARACTERS, CUT, "PT-00000, PT-0000")
    assert table(path, "Causes")[1][-1] == "PT-00000, PT-00001, PT-00002, PT-00003, PT-00004 (and 4995 more)"


def test_what_one_sheet_cannot_hold_goes_on_in_the_next(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(book, "MOST_ROWS", 4)
    path = write(tmp_path, small_audit([finding(subject=f"PT-{number}") for number in range(7)]))
    read = load(path)
    parts = [name for name in read.sheetnames if name.startswith("Findings")]
    assert parts == ["Findings", "Findings 2", "Findings 3"]
    subjects = [[row[2] for row in read[name].iter_rows(values_only=True)] for name in parts]
    assert subjects == [
        ["subject", "PT-0", "PT-1", "PT-2"], ["subject", "PT-3", "PT-4", "PT-5"], ["subject", "PT-6"],
    ]  # fmt: skip
    assert read["Findings 3"].print_title_rows == "$1:$1"


def test_long_lists_on_the_summary_say_how_many_more(tmp_path: Path) -> None:
    result = small_audit()
    result.assumptions = tuple(f"assumption {number}" for number in range(203))
    rows = sheets(write(tmp_path, result))["Summary"]
    start = rows.index(["assumption 0"])
    assert rows[start + 199 : start + 201] == [
        ["assumption 199"], ["and 3 more; all of them stand in findings.json."],
    ]  # fmt: skip


# --- the file ---------------------------------------------------------------------------------------------------


def test_nothing_in_the_file_tells_the_time(small: Path) -> None:
    with zipfile.ZipFile(small) as package:
        assert {(entry.date_time, entry.create_system) for entry in package.infolist()} == {((1980, 1, 1, 0, 0, 0), 0)}
        assert re.findall(rb"\d{4}-\d\d-\d\dT[\d:.]+Z?", package.read("docProps/core.xml")) == [
            b"1980-01-01T00:00:00Z", b"1980-01-01T00:00:00Z",
        ]  # fmt: skip


def test_the_same_audit_gives_the_same_bytes_whatever_the_order_of_sets(tmp_path: Path) -> None:
    script = (
        "import hashlib, sys; from pathlib import Path; "
        "from tests.validation.report.small_audit import FINDINGS, RULES, small_audit; "
        "from validation.report.exceptions import write_exceptions; path = Path(sys.argv[1]); "
        "write_exceptions(small_audit(FINDINGS * 9), path, rules=RULES); "
        "print(hashlib.sha256(path.read_bytes()).hexdigest())"
    )
    digests = set()
    for seed in ("1", "2"):
        done = subprocess.run(
            [sys.executable, "-c", script, str(tmp_path / seed)],
            cwd=ROOT, capture_output=True, text=True, check=True, env={"PYTHONHASHSEED": seed, "PATH": ""},
        )  # fmt: skip
        digests.add(done.stdout)
    assert len(digests) == 1


def test_rows_are_never_held_together(tmp_path: Path) -> None:
    def peak(number: int) -> tuple[int, int]:
        texts = [f"URV {number} bar is above 16 bar" for number in range(number)]
        result = small_audit([finding(subject=text, message=text, found=text) for text in texts])
        tracemalloc.start()
        path = write(tmp_path, result)
        _, most = tracemalloc.get_traced_memory()
        tracemalloc.stop()
        with zipfile.ZipFile(path) as package:
            return most, sum(entry.file_size for entry in package.infolist())

    peak(10)  # what is imported once
    (few, few_written), (many, many_written) = peak(500), peak(3000)
    assert many - few < (many_written - few_written) / 3


def test_a_file_that_cannot_be_written_is_an_os_error(tmp_path: Path) -> None:
    with pytest.raises(OSError, match="No such file"):
        write_exceptions(small_audit(), tmp_path / "nowhere" / "exceptions.xlsx", rules=RULES)


def test_counts_add_up(small: Path) -> None:
    summary = sheets(small)["Summary"]
    start = summary.index(["family", "danger", "fault", "gap", "findings", "to review", "unchecked"])
    totals = next(row for row in summary[start:] if row[0] == "all")
    severities = Counter(row[0] for row in table(small, "Findings")[1:])
    assert totals[1:4] == [severities[severity.value] for severity in Severity]
    assert totals[4:6] == [len(table(small, "Findings")) - 1, len(table(small, "Reviews")) - 1]
    assert totals[6] == sum(row[8] for row in table(small, "Coverage")[1:])
    assert totals[4] == sum(row[0] for row in table(small, "Causes")[1:] if row[2] == Outcome.FINDING.value)
