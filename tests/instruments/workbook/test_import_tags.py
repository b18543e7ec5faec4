"""How tags are written when lists arrive, each as a real file read whole, and what the audit makes of it."""

from __future__ import annotations

from pathlib import Path

import pytest
from openpyxl.worksheet.worksheet import Worksheet

from instruments.workbook.lists import Lists
from loops.plant import assemble
from tests.instruments.workbook.as_sent import as_read, delimited, rows, tags, unread, workbook
from validation.audit import audit

KINDS = pytest.mark.parametrize("kind", ["xlsx", "csv"])


def made(tmp_path: Path, text: str, kind: str) -> Path:
    return workbook(tmp_path / "l.xlsx", text) if kind == "xlsx" else delimited(tmp_path / "l.csv", text)


def found_by(found: Lists, *rules: str) -> list[tuple[str, str, str]]:
    result = audit(assemble(found), raise_errors=True)
    return [(each.rule, each.outcome.value, each.subject) for each in result.findings if each.rule in rules]


@pytest.mark.parametrize(
    ("written", "tag"),
    [
        pytest.param("PT-1001 ", "PT-1001", id="case15-blank-behind"),
        pytest.param("\u00a0PT-1001", "PT-1001", id="case15-no-break-blank"),
        pytest.param("PT-\u200b1001\u200b", "PT-1001", id="case15-zero-width"),
        pytest.param("\ufeffPT-1001\t", "PT-1001", id="case15-byte-order-mark"),
        pytest.param("PT\u20131001", "PT-1001", id="case16-en-dash"),
        pytest.param("PT\u20111001", "PT-1001", id="case16-no-break-hyphen"),
        pytest.param("PT\u22121001", "PT-1001", id="case16-minus"),
        pytest.param("PT\u20141001", "PT-1001", id="case16-em-dash"),
        pytest.param("pt-1001", "PT-1001", id="case17-small-letters"),
        pytest.param("\u0420\u0422-1001", "PT-1001", id="case18-cyrillic"),
        pytest.param("\u03a1\u03a4-1001", "PT-1001", id="case18-greek"),
        pytest.param("ＰＴ-1001", "PT-1001", id="case18-wide"),
    ],
)
@KINDS
def test_a_tag_is_brought_to_its_plain_signs(tmp_path: Path, written: str, tag: str, kind: str) -> None:
    found = as_read(made(tmp_path, f"Tag|Service\n{written}|Feed\nTT-1002|Feed\nLT-1003|Feed", kind))
    assert tags(found) == [tag, "TT-1002", "LT-1003"]
    assert found.problems == ()


@KINDS
def test_spellings_of_one_tag_are_duplicates_and_not_merged(tmp_path: Path, kind: str) -> None:
    written = ["PT-1001", "PT 1001", "PT1001", "pt-1001", "TT-1002", "LT-1003", "FT-1004", "LT_1005"]
    lines = [f"{tag}|Feed|{number}|bar" for number, tag in enumerate(written, 1)]
    found = as_read(made(tmp_path, "\n".join(["Tag|Service|URV|Unit", *lines]), kind))
    assert len(found.records["Instruments"]) == 8
    # The underscore is no separator: its tag does not read, and the finding offers one that does.
    assert found_by(found, "TAG02", "TAG03", "TAG04") == [
        ("TAG02", "finding", "PT 1001"),
        ("TAG04", "finding", "LT_1005"),
    ]


@KINDS
def test_letters_that_only_look_latin_are_told(tmp_path: Path, kind: str) -> None:
    found = as_read(made(tmp_path, "Tag|Service\n\u0420\u0422-1001|Feed\nTT-1002|Feed\nLT-1003|Feed", kind))
    result = audit(assemble(found), raise_errors=True)
    assert [each.subject for each in result.findings if "Cyrillic" in each.message or "look" in each.message]


@pytest.mark.parametrize(
    ("written", "wanted"),
    [
        pytest.param("PT-1001A/B", ["PT-1001A", "PT-1001B"], id="case19"),
        pytest.param("PT-1001 A/B", ["PT-1001A", "PT-1001B"], id="case19-blank"),
        pytest.param("PT-1001A & B", ["PT-1001A", "PT-1001B"], id="case19-and"),
        pytest.param("PT-1001A\\nPT-1001B", ["PT-1001A", "PT-1001B"], id="case19-two-lines"),
        pytest.param("PT-1001 A thru C", ["PT-1001A", "PT-1001B", "PT-1001C"], id="case20-thru"),
        pytest.param("PT-1001A~C", ["PT-1001A", "PT-1001B", "PT-1001C"], id="case20-tilde"),
        pytest.param("PT-1001A bis PT-1001C", ["PT-1001A", "PT-1001B", "PT-1001C"], id="case20-german"),
        pytest.param("TE-12A-D", ["TE-12A", "TE-12B", "TE-12C", "TE-12D"], id="case20-hyphen"),
        pytest.param("PT-1001/1002", ["PT-1001", "PT-1002"], id="case20-numbers"),
    ],
)
@KINDS
def test_a_cell_of_several_tags_makes_a_row_of_each(tmp_path: Path, written: str, wanted: list[str], kind: str) -> None:
    text = f"Tag|Service|Range|I/O Address|Serial\n{written}|Feed|0-16 barg|1.1.1|S1\nLT-9|Feed|0-1 m|1.1.2|S2"
    found = as_read(made(tmp_path, text, kind))
    assert tags(found) == [*wanted, "LT-9"]
    shown = rows(found, "tag_cell", "service", "urv", "io_address", "serial")[: len(wanted)]
    assert shown == [
        {"tag_cell": written.replace("\\n", "\n"), "service": "Feed", "urv": "16 barg", **(own if not number else {})}
        for number, own in enumerate([{"io_address": "1.1.1", "serial": "S1"}] * len(wanted))
    ]
    # They are shown, for somebody to say whether it is so.
    assert [(rule, how) for rule, how, _ in found_by(found, "TAG04", "TAG13")] == [("TAG13", "finding")]


@pytest.mark.parametrize(
    ("text", "wanted"),
    [
        pytest.param(
            "Area|Tag|Service\n10|10-PT-1001|Feed\n10|10-PT-1002|Feed", ["10-PT-1001", "10-PT-1002"], id="case21-whole"
        ),
        pytest.param(
            "Tag|||Service\nUnit|Function|No.|\n10|PT|1001|Feed\n20|PT|1002|Feed",
            ["10-PT-1001", "20-PT-1002"],
            id="case21-under-one-heading",
        ),
        pytest.param("Letters|No.|Suffix|Service\nPT|1001|A|Feed\nTT|1002||Feed", ["PT-1001A", "TT-1002"], id="case22"),
        pytest.param("Function|Loop No.|Service\nPT|1001|Feed\nTT|1002|Feed", ["PT-1001", "TT-1002"], id="case22-two"),
    ],
)
@KINDS
def test_a_tag_in_several_columns_is_joined_and_said(tmp_path: Path, text: str, wanted: list[str], kind: str) -> None:
    found = as_read(made(tmp_path, text, kind))
    assert tags(found) == wanted
    said = [each for each in found.assumptions if "joined to the tag" in each]
    assert len(said) == (0 if "10-PT-1001|" in text else 1)


def test_zeros_that_a_number_format_shows_belong_to_the_tag(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        for row in (2, 3):
            sheet.cell(row, 2).number_format = "0000"
        sheet["B4"].number_format = "000000"

    text = "Type|No.|Suffix|Service\nPT|34||Feed\nPT|1001|A|Feed\nTT|712|B|Feed"
    found = as_read(workbook(tmp_path / "l.xlsx", text, look))
    assert tags(found) == ["PT-0034", "PT-1001A", "TT-000712B"]


def test_a_tag_that_is_a_number_keeps_the_text_that_its_format_shows(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet["A2"].number_format = '"PT-"0000'
        sheet["A3"].number_format = '"TT-"0000'

    found = as_read(workbook(tmp_path / "l.xlsx", "Tag|Service\n34|Feed\n35|Feed\nLT-0036|Feed", look))
    assert tags(found) == ["PT-0034", "TT-0035", "LT-0036"]


DATE = "the spreadsheet made a date or time of it"
NUMBER = "the spreadsheet made a number of it"


def test_tags_that_became_dates_and_numbers_are_asked_about(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet["A2"].number_format = "d-mmm"
        sheet["A3"].number_format = "mmm-yy"
        for cell, value, code in (("A4", 2e-101, "0.00E+00"), ("A5", 3e5, "0.00E+00"), ("A6", 4e200, "General")):
            sheet[cell] = value
            sheet[cell].number_format = code

    dates = "@2024-02-01|Feed\n@2024-12-01|Feed"
    text = f"Tag|Service\n{dates}\nx|Feed\nx|Feed\nx|Feed\n2E-101|Feed\nPT-1|Feed"
    found = as_read(workbook(tmp_path / "l.xlsx", {"Cover": "Marrowbeck", "Index": text}, look))
    assert [(each.cell.address, each.reason, each.readings) for each in found.problems] == [
        ("A2", DATE, ("1-FEB", "02-01", "01-02")),
        ("A3", DATE, ("DEC-24", "12-01", "01-12")),
        ("A4", NUMBER, ("2E-101",)),
        ("A5", NUMBER, ("3E5", "300000")),
        ("A6", NUMBER, ("4E200",)),
    ]
    # What is text is a tag, whatever it looks like.
    assert tags(found) == [None, None, None, None, None, "2E-101", "PT-1"]


@pytest.mark.parametrize(
    ("written", "reason", "readings"),
    [
        pytest.param("01-Feb", DATE, ("1-FEB", "02-01", "01-02"), id="case23-day-and-month"),
        pytest.param("1-FEB", DATE, ("1-FEB", "02-01", "01-02"), id="case23-capitals"),
        pytest.param("Feb-01", DATE, ("FEB-01", "02-01", "01-02"), id="case23-month-first"),
        pytest.param("05. Dez", DATE, ("5-DEZ", "12-05", "05-12"), id="case23-german"),
        pytest.param("01.02.2024", DATE, (), id="case23-figures"),
        pytest.param("2024-02-01", DATE, (), id="case23-iso"),
        pytest.param("2.00E+05", NUMBER, ("2E5", "200000"), id="case23-exponent"),
        pytest.param("2,50E+05", NUMBER, ("25E4", "250000"), id="case23-decimal-comma"),
    ],
)
def test_texts_that_a_spreadsheet_saved_for_tags_are_asked_about(
    tmp_path: Path, written: str, reason: str, readings: tuple[str, ...]
) -> None:
    text = f"Tag|Service|Range\nPT-1|Feed|0-1 barg\n{written}|Feed|0-1 barg\nPT-3|Feed|0-1 barg"
    found = as_read(delimited(tmp_path / "l.csv", text, separator=";"))
    assert [(each.cell.address, each.reason, each.readings) for each in found.problems] == [("A3", reason, readings)]
    assert tags(found) == ["PT-1", None, "PT-3"]
    assert found_by(found, "DAT09", "TAG01")


@pytest.mark.parametrize("tag", ["2E-101", "DEC-12", "MAR-101", "10-FEB-2", "1E5-PT-1", "05-12", "12E"])
def test_what_only_resembles_a_date_or_number_is_a_tag(tmp_path: Path, tag: str) -> None:
    text = f"Tag|Service|Range\nPT-1|Feed|0-1 barg\n{tag}|Feed|0-1 barg\nPT-3|Feed|0-1 barg"
    found = as_read(delimited(tmp_path / "l.csv", text))
    assert (tags(found), found.problems) == (["PT-1", tag, "PT-3"], ())


@pytest.mark.parametrize(
    ("written", "tag", "remark", "status"),
    [
        pytest.param("PT-1001 (Note 3)", "PT-1001", "Note 3", None, id="case24-bracket"),
        pytest.param("*PT-1001", "PT-1001", "*", None, id="case24-star"),
        pytest.param("PT-1001**", "PT-1001", "**", None, id="case24-stars-behind"),
        pytest.param("PT-1001 NEW", "PT-1001", "NEW", None, id="case24-word"),
        pytest.param("PT-1001 neu", "PT-1001", "neu", None, id="case24-german"),
        pytest.param("PT-1001\\n(by vendor)", "PT-1001", "by vendor", None, id="case24-second-line"),
        pytest.param("PT-1001 DELETED", "PT-1001", "DELETED", "deleted", id="case24-state"),
    ],
)
@KINDS
def test_what_stands_beside_a_tag_is_a_remark(
    tmp_path: Path, written: str, tag: str, remark: str, status: str | None, kind: str
) -> None:
    found = as_read(made(tmp_path, f"Tag|Service|Remarks\n{written}|Feed|by J. Halden\nTT-2|Feed|", kind))
    (record, _) = rows(found)
    assert (record["tag"], record["remarks"], record.get("status")) == (tag, f"by J. Halden; {remark}", status)


@KINDS
def test_equal_rows_and_rows_that_differ_are_told_apart(tmp_path: Path, kind: str) -> None:
    text = (
        "Tag|Service|Range\nPT-1|Feed|0-16 barg\nPT-1|Feed|0-16 barg\nPT-2|Feed|0-16 barg\nPT-2|Feed|0-25 barg\n"
        "PT-3|Feed|0-16 barg"
    )
    found = as_read(made(tmp_path, text, kind))
    assert tags(found) == ["PT-1", "PT-1", "PT-2", "PT-2", "PT-3"]
    result = audit(assemble(found), raise_errors=True)
    # Rows that agree are one instrument.
    assert [(each.subject, each.message) for each in result.findings if each.rule == "TAG02"] == [
        ("PT-2", "2 rows have the tag PT-2 and disagree in URV: 16 barg / 25 barg")
    ]
    assert [each.merged_rows for each in result.plant.instruments] == [2, 1, 1, 1]


def test_a_tag_merged_over_two_rows_is_one_instrument_with_two_signals(tmp_path: Path) -> None:
    text = "Tag|Service|I/O Type|I/O Address\nPT-1|Feed|AI|1.1\n||DI|1.2\nPT-2|Feed|AI|1.3"
    found = as_read(workbook(tmp_path / "l.xlsx", text, lambda sheet: sheet.merge_cells("A2:A3")))
    assert tags(found) == ["PT-1", "PT-1", "PT-2"]
    assert unread(found) == []
