"""Placeholders, ditto marks, yes and no, dates, errors and encodings, each in a real file read whole."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from openpyxl.worksheet.worksheet import Worksheet

from instruments.workbook.sheet import UnreadableFile
from tests.instruments.workbook.as_sent import as_read, delimited, rows, tags, unread, workbook

KINDS = pytest.mark.parametrize("kind", ["xlsx", "csv"])


def made(tmp_path: Path, text: str, kind: str) -> Path:
    if kind == "xlsx":
        return workbook(tmp_path / "l.xlsx", {"Cover": "Marrowbeck Works", "Index": text})
    return delimited(tmp_path / "l.csv", text, separator=";", encoding="utf-8")


PLACEHOLDERS = [
    pytest.param(text, reason, id=f"case42-{number:02}")
    for number, (text, reason) in enumerate(
        (
            ("N/A", "not applicable"),
            ("n.a.", "not applicable"),
            ("NA", "not applicable"),
            ("-", "not applicable"),
            ("--", "not applicable"),
            ("—", "not applicable"),
            (".", "not applicable"),
            ("nil", "not applicable"),
            ("none", "not applicable"),
            ("entfällt", "not applicable"),
            ("sans objet", "not applicable"),
            ("TBA", "to be defined"),
            ("T.B.C.", "to be defined"),
            ("tbd", "to be defined"),
            ("LATER", "to be defined"),
            ("?", "to be defined"),
            ("XXX", "to be defined"),
            ("noch offen", "to be defined"),
            ("HOLD", "on hold"),
            ("HOLD-3", "hold 3"),
            ("Hold No. 12", "hold 12"),
            ("BY VENDOR", "by vendor"),
            ("VTA", "by vendor"),
            ("bauseits", "by vendor"),
            ("SEE NOTE 4", "see note 4"),
            ("(note 4)", "see note 4"),
            ("siehe Bemerkung 2", "see bemerkung 2"),
        )
    )
]


@pytest.mark.parametrize(("written", "reason"), PLACEHOLDERS)
@KINDS
def test_a_placeholder_is_blank_for_a_reason_in_any_column(
    tmp_path: Path, written: str, reason: str, kind: str
) -> None:
    text = (
        "Tag|Service|P&ID|Range|Alarm H|Fail position|HART|Cable length (m)\n"
        f"PT-1|{written}|{written}|{written}|{written}|{written}|{written}|{written}\n"
        "PT-2|Feed|D-1|0 - 16 barg|12|FC|Y|120\nPT-3|Feed|D-1|0 - 16 barg|12|FC|Y|120"
    )
    found = as_read(made(tmp_path, text, kind))
    record = found.records["Instruments"][0]
    names: tuple[str, ...] = ("service", "pid", "lrv", "urv", "setting_h", "failure_position", "cable_length_m")
    # None is an answer where yes or no is asked.
    names = names if written == "none" else (*names, "hart")
    assert {name: record.blanks.get(name) for name in names} == dict.fromkeys(names, reason)
    assert (found.problems, record.unread) == ((), frozenset())


@pytest.mark.parametrize(
    "mark", [pytest.param(mark, id=f"case42-{mark}") for mark in ("ditto", '"', "do", "dto.", "〃")]
)
@KINDS
def test_ditto_repeats_the_row_above(tmp_path: Path, mark: str, kind: str) -> None:
    text = (
        "Tag|Service|P&ID|Range|Alarm H|Maker\nPT-1|Feed|D-1|0 - 16 barg|12|Roe\n"
        f"PT-2|{mark}|{mark}|{mark}|{mark}|{mark}\nUNIT 20|||||\nPT-3|{mark}|D-2|{mark}|13|-\n"
        f"PT-4|Gas|TBA|0 - 1 barg|-|{mark}\nPT-5|{mark}|{mark}|{mark}|{mark}|Roe"
    )
    found = as_read(made(tmp_path, text, kind))
    shown = rows(found, "service", "pid", "urv", "setting_h", "maker")
    assert shown == [
        {"service": "Feed", "pid": "D-1", "urv": "16 barg", "setting_h": "12 barg", "maker": "Roe"},
        {"service": "Feed", "pid": "D-1", "urv": "16 barg", "setting_h": "12 barg", "maker": "Roe"},
        {"service": "Feed", "pid": "D-2", "urv": "16 barg", "setting_h": "13 barg"},
        {"service": "Gas", "urv": "1 barg"},
        {"service": "Gas", "urv": "1 barg", "maker": "Roe"},
    ]
    assert found.records["Instruments"][4].blanks["pid"] == "to be defined"


def test_errors_and_formulas_without_a_value_are_told_with_their_cell(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet["C2"] = "=1+1"
        sheet["D3"] = "=[1]Sheet1!A1"

    text = "Tag|Service|LRV|URV|Unit\nPT-1|Feed||10|bar\nPT-2|#N/A|0||bar\nPT-3|Feed|0|10|#REF!\n#VALUE!|Gas|0|10|bar"
    found = as_read(workbook(tmp_path / "l.xlsx", {"Cover": "Marrowbeck", "Index": text}, look))
    no_value = "a formula without a saved value: open the list in a spreadsheet program and save it"
    assert unread(found) == [
        ("C2", "PT-1", no_value),
        ("B3", "PT-2", "the cell shows #N/A"),
        ("D3", "PT-2", no_value),
        ("E4", "PT-3", "the cell shows #REF!"),
        ("A5", "Index Gas", "the cell shows #VALUE!"),
    ]
    assert [sorted(record.unread) for record in found.records["Instruments"]] == [
        ["lrv"],
        ["service", "urv"],
        ["lrv", "range_unit", "urv"],
        ["tag"],
    ]
    assert found.sheets[1].remarks == ("formulas that refer to another workbook, read by their saved values: 1",)


@pytest.mark.parametrize(
    "error", ["#REF!", "#N/A", "#VALUE!", "#DIV/0!", "#BEZUG!", "#NV", "#WERT!", "Err:508", "####"]
)
def test_errors_that_were_saved_as_text_are_told_too(tmp_path: Path, error: str) -> None:
    text = f"Tag|Service|LRV|URV|Unit\nPT-1|Feed|0|{error}|bar\nPT-2|Feed|0|10|bar"
    found = as_read(delimited(tmp_path / "l.csv", text))
    assert unread(found) == [("D2", "PT-1", f"the cell shows {error}")]


def test_a_date_stands_where_dates_do_and_is_asked_about_elsewhere(tmp_path: Path) -> None:
    text = (
        "Tag|Service|Terminals|I/O Address|Range|Remarks|X conditions accepted\n"
        "PT-1|Feed|@2024-02-01|@2024-01-03|@2024-03-01|@2024-03-12|@2024-03-12\n"
        "PT-2|Feed|1:2|1.1|0 - 1 barg|12/03/24|J. Halden 12-Mar-24"
    )
    found = as_read(workbook(tmp_path / "l.xlsx", text))
    reason = "the spreadsheet made a date or time of it"
    assert [(each.cell.address, each.reason, each.readings) for each in found.problems] == [
        ("C2", reason, ("1-FEB", "02-01", "01-02")),
        ("D2", reason, ("3-JAN", "01-03", "03-01")),
        ("E2", reason, ("03-01", "01-03")),
    ]
    assert rows(found, "remarks", "x_accepted") == [
        {"remarks": "2024-03-12", "x_accepted": "2024-03-12"},
        {"remarks": "12/03/24", "x_accepted": "J. Halden 12-Mar-24"},
    ]


YES: list[Any] = [
    pytest.param(text, value, id=f"case45-{text}")
    for text, value in (
        ("Y", True), ("YES", True), ("✓", True), ("x", True), ("●", True), ("O", True), ("ja", True), ("oui", True),
        ("1", True), ("N", False), ("no", False), ("nein", False), ("0", False), ("☐", False),
    )
]  # fmt: skip


@pytest.mark.parametrize(("written", "value"), YES)
@KINDS
def test_yes_and_no_in_all_their_signs(tmp_path: Path, written: str, value: bool, kind: str) -> None:
    text = f"Tag|Service|HART|Wires\nPT-1|Feed|{written}|2\nPT-2|Feed|Y|2\nPT-3|Feed|N|4"
    found = as_read(made(tmp_path, text, kind))
    assert [record.own.hart for record in found.records["Instruments"]] == [value, True, False]


@KINDS
def test_nc_is_a_contact_in_one_column_and_no_connection_in_another(tmp_path: Path, kind: str) -> None:
    text = (
        "Tag|Service|Contact|Terminals\nLS-1|Sump|NC|NC\nLS-2|Sump|N/C|X1:3\nLS-3|Sump|N.O.|n.c.\n"
        "LS-4|Sump|NO/NC|X1:5\nLS-5|Sump|SPDT|X1:6\nLS-6|Sump|Öffner|X1:7"
    )
    found = as_read(made(tmp_path, text, kind))
    assert [(each.get("contact"), each.get("terminals"), each.get("blanks")) for each in rows(found)] == [
        ("NC", None, {"terminals": "no connection"}),
        ("NC", "X1:3", None),
        ("NO", None, {"terminals": "no connection"}),
        (None, "X1:5", {"contact": "changeover contact"}),
        (None, "X1:6", {"contact": "changeover contact"}),
        ("NC", "X1:7", None),
    ]
    assert found.problems == ()


def test_nc_is_a_terminal_where_the_device_has_a_contact_with_two_sides(tmp_path: Path) -> None:
    wiring = (
        "Tag|From|From terminal|To|To terminal|Cable|Core\nPT-1|PT-1|+|JB-1|1|C1|1\nPT-1|PT-1|-|JB-1|2|C1|2\n"
        "PT-1|PT-1|NC|JB-1|NC|C1|3\nLS-2|LS-2|COM|JB-1|3|C2|1\nLS-2|LS-2|NC|JB-1|4|C2|2"
    )
    found = as_read(
        workbook(tmp_path / "l.xlsx", {"Index": "Tag|Service\nPT-1|Feed\nLS-2|Sump", "Terminations": wiring})
    )
    shown = rows(found, "from_terminal", "to_terminal", kind="Terminations")
    assert shown == [
        {"from_terminal": "+", "to_terminal": "1"},
        {"from_terminal": "-", "to_terminal": "2"},
        {},
        {"from_terminal": "COM", "to_terminal": "3"},
        {"from_terminal": "NC", "to_terminal": "4"},
    ]


@KINDS
def test_cells_of_several_lines_are_one_text_or_one_list(tmp_path: Path, kind: str) -> None:
    text = "Tag|Service|Terminals|Line\nPT-1|Feed\\n pressure|X1:1\\nX1:2|6-P-1\\n6-P-2\nPT-2|Feed|X1:3|6-P-3"
    found = as_read(made(tmp_path, text, kind))
    assert rows(found, "service", "terminals", "line")[0] == {
        "service": "Feed pressure",
        "terminals": "X1:1, X1:2",
        "line": "6-P-1, 6-P-2",
    }


@pytest.mark.parametrize(
    ("encoding", "separator", "remarks"),
    [
        pytest.param("utf-8", ",", (), id="case46-utf-8"),
        pytest.param("utf-8-sig", ";", ("columns taken to be separated by semicolons",), id="case46-with-mark"),
        pytest.param("utf-16", "\t", ("columns taken to be separated by tabs",), id="case46-utf-16"),
        pytest.param(
            "cp1252",
            ";",
            ("not in UTF-8: read as Windows-1252", "columns taken to be separated by semicolons"),
            id="case46-windows",
        ),
    ],
)
def test_texts_are_read_in_the_encoding_they_were_saved_in(
    tmp_path: Path, encoding: str, separator: str, remarks: tuple[str, ...]
) -> None:
    text = "Messstelle|Benennung|Messbereich|Einheit\nPT-1|Zulauf für Öl|0 - 16|bar\nTT-2|Kühlöl|0 - 100|°C"
    found = as_read(delimited(tmp_path / "l.csv", text, separator=separator, encoding=encoding))
    assert rows(found, "tag", "service", "urv") == [
        {"tag": "PT-1", "service": "Zulauf für Öl", "urv": "16 bar"},
        {"tag": "TT-2", "service": "Kühlöl", "urv": "100 °C"},
    ]
    assert found.sheets[0].remarks == remarks


@pytest.mark.parametrize(
    ("data", "message"),
    [
        pytest.param(
            b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"W\0o\0r\0k\0b\0o\0o\0k\0" * 9, "old kind", id="case46-xls"
        ),
        pytest.param(
            b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + "EncryptedPackage".encode("utf-16-le") * 9,
            "protected by a password",
            id="case46-password",
        ),
    ],
)
def test_what_cannot_be_opened_is_said(tmp_path: Path, data: bytes, message: str) -> None:
    path = tmp_path / "list.xlsx"
    path.write_bytes(data)
    with pytest.raises(UnreadableFile, match=message):
        as_read(path)


def test_formatted_rows_without_cells_do_not_count(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet.row_dimensions[1_048_576].height = 15
        sheet["E900"].number_format = "0.00"

    found = as_read(workbook(tmp_path / "l.xlsx", "Tag|Service\nPT-1|Feed\nPT-2|Feed", look))
    assert (tags(found), found.sheets[0].cells_filled) == (["PT-1", "PT-2"], 6)
