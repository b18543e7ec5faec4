"""The reader of cells over whole files: what is read, where it stood, how it looked, and what is refused."""

import contextlib
import datetime
import io
import math
import os
import pickle
import random
import re
import subprocess
import sys
import zipfile
from collections.abc import Callable
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import openpyxl
import pytest
from openpyxl.cell.rich_text import CellRichText, TextBlock
from openpyxl.cell.text import InlineFont
from openpyxl.comments import Comment
from openpyxl.drawing.image import Image
from openpyxl.styles import Font

from instruments.workbook.reader import (
    Limits,
    Sheet,
    UnreadableFile,
    as_text,
    cell_address,
    read_file,
    read_files,
)
from instruments.workbook.sheet import cell_position, column_number, is_error_text
from tests.instruments.workbook.packages import (
    FIRST_SHEET,
    KINDS,
    MAIN,
    parts,
    relations,
    styles,
    texts,
    worksheet,
    zipped,
)


def saved(folder: Path, data: bytes, name: str = "list.xlsx") -> Path:
    path = folder / name
    path.write_bytes(data)
    return path


def one(folder: Path, *sheets: str, **more: Any) -> Sheet:
    return read_file(saved(folder, zipped(parts(*sheets, **more))))[0]


def refusal(path: Path, **how: Any) -> str:
    with pytest.raises(UnreadableFile) as refused:
        read_file(path, **how)
    return str(refused.value).replace(f"{path.parent}{os.sep}", "")


def written(folder: Path, fill: Callable[[Any], None], name: str = "list.xlsx") -> Sheet:
    """What is read of a workbook that `fill` has filled."""
    book = openpyxl.Workbook()
    fill(book.active)
    book.save(folder / name)
    return read_file(folder / name)[0]


# A whole workbook as a program writes it


def test_a_workbook_whole(tmp_path: Path) -> None:
    book = openpyxl.Workbook()
    index = book.active
    index.title = "Index"
    index["B2"] = "INSTRUMENT INDEX"
    index["A4"], index["B4"], index["C4"], index["D4"], index["E4"] = "Tag", "Range", "No.", "Due", "Load"
    index["A5"], index["B5"], index["C5"], index["D5"], index["E5"] = (
        "PT-1",
        "0-10 barg",
        34,
        datetime.date(2024, 12, 5),
        0.25,
    )
    index["C5"].number_format, index["D5"].number_format, index["E5"].number_format = "0000", "d-mmm", "0%"
    index["A6"], index["B6"], index["C6"], index["D6"], index["E6"] = (
        "PT-2",
        "  ",
        True,
        datetime.datetime.fromisoformat("2024-01-02 03:04"),
        "#REF!",
    )
    for cell in index[5]:
        cell.font = Font(strike=True)
    index["A7"] = CellRichText(TextBlock(InlineFont(strike=True), "PT-3 "), "PT-4")
    index["B7"] = "=A5&A6"
    index["A8"] = "\u00a0"
    index["D8"] = datetime.time(6, 30)
    index["E8"] = datetime.timedelta(hours=36, minutes=30)
    index.merge_cells("B2:D2")
    index.merge_cells("B5:B6")
    index.row_dimensions[6].hidden = True
    index.row_dimensions[99].hidden = True
    index.column_dimensions["C"].hidden = True
    index["A5"].comment = Comment("check the range", "R. Quill")
    hidden = book.create_sheet("Old")
    hidden.sheet_state = "hidden"
    hidden["A1"] = 1
    book.create_chartsheet("Curve")
    book.create_sheet("Empty")
    path = tmp_path / "list.xlsx"
    book.save(path)

    assert read_file(path) == [
        Sheet(
            file=str(path),
            name="Index",
            rows=[
                [None, None, None, None, None],
                [None, "INSTRUMENT INDEX", None, None, None],
                [None, None, None, None, None],
                ["Tag", "Range", "No.", "Due", "Load"],
                ["PT-1", "0-10 barg", 34.0, datetime.date(2024, 12, 5), 0.25],
                ["PT-2", None, True, datetime.datetime.fromisoformat("2024-01-02 03:04"), None],
                ["PT-3 PT-4", None, None, None, None],
                [None, None, None, datetime.time(6, 30), "36:30:00"],
            ],
            errors={(5, 4): "#REF!"},
            no_value={(6, 1)},
            merged=((1, 1, 1, 3), (4, 1, 5, 1)),
            hidden_rows=frozenset({5}),
            hidden_columns=frozenset({2}),
            struck={(4, 0), (4, 1), (4, 2), (4, 3), (4, 4)},
            partly_struck={(6, 0): "PT-4"},
            number_formats={
                (4, 2): "0000",
                (4, 3): "d-mmm",
                (4, 4): "0%",
                (5, 3): "yyyy-mm-dd h:mm:ss",
                (7, 3): "h:mm:ss",
                (7, 4): "[hh]:mm:ss",
            },
            comments={(4, 0): "R. Quill: check the range"},
            cells_filled=19,
        ),
        Sheet(file=str(path), name="Old", visible=False, rows=[[1.0]], cells_filled=1),
        Sheet(file=str(path), name="Empty", rows=[]),
    ]


def test_several_files_in_order(tmp_path: Path) -> None:
    first = saved(tmp_path, zipped(parts(worksheet(""), worksheet(""))))
    second = saved(tmp_path, b"a,b\n", "cables.csv")
    assert [(sheet.file, sheet.name) for sheet in read_files([first, str(second)])] == [
        (str(first), "Sheet1"),
        (str(first), "Sheet2"),
        (str(second), "cables"),
    ]


# How lists really arrive


def test_zeros_that_a_format_shows_are_part_of_the_text(tmp_path: Path) -> None:
    def fill(sheet: Any) -> None:
        sheet["A1"], sheet["B1"], sheet["C1"] = 34, 1001, 34
        sheet["A1"].number_format, sheet["C1"].number_format = "0000", '"PT-"0000'

    sheet = written(tmp_path, fill)
    assert [as_text(cell, sheet.number_formats.get((0, column))) for column, cell in enumerate(sheet.rows[0])] == [
        "0034",
        "1001",
        "PT-0034",
    ]


def test_tags_that_became_dates_keep_how_they_looked(tmp_path: Path) -> None:
    def fill(sheet: Any) -> None:
        sheet["A1"], sheet["A2"] = datetime.date(2024, 12, 5), 3e5
        sheet["A1"].number_format, sheet["A2"].number_format = "d-mmm", "0.00E+00"

    sheet = written(tmp_path, fill)
    assert (sheet.rows, sheet.number_formats) == (
        [[datetime.date(2024, 12, 5)], [300000.0]],
        {(0, 0): "d-mmm", (1, 0): "0.00E+00"},
    )


def test_text_numbers_stay_text(tmp_path: Path) -> None:
    def fill(sheet: Any) -> None:
        sheet["A1"], sheet["B1"] = "0034", "1.000,5"

    assert written(tmp_path, fill).rows == [["0034", "1.000,5"]]


def test_a_unit_that_a_format_shows(tmp_path: Path) -> None:
    def fill(sheet: Any) -> None:
        sheet["A1"] = 16
        sheet["A1"].number_format = '0.0" barg"'

    sheet = written(tmp_path, fill)
    assert as_text(sheet.rows[0][0], sheet.number_formats[0, 0]) == "16 barg"


def test_filtered_and_grouped_rows_are_read_and_known_as_hidden(tmp_path: Path) -> None:
    def fill(sheet: Any) -> None:
        for row in range(1, 7):
            sheet.cell(row, 1, f"PT-{row}")
        sheet.auto_filter.ref = "A1:A6"
        sheet.row_dimensions[3].hidden = True
        sheet.row_dimensions.group(5, 6, hidden=True)
        sheet.freeze_panes = "B2"

    sheet = written(tmp_path, fill)
    assert ([row[0] for row in sheet.rows], sheet.hidden_rows) == (
        [f"PT-{row}" for row in range(1, 7)],
        frozenset({2, 4, 5}),
    )


def test_a_million_formatted_blank_rows_do_not_count(tmp_path: Path) -> None:
    rows = (
        ROW
        + "".join(f'<row r="{row}" s="1" customFormat="1"><c r="A{row}" s="1"/></row>' for row in range(2, 200_000))
        + '<row r="1048576"><c r="A1048576" s="1"/></row>'
    )
    path = saved(tmp_path, zipped(parts(worksheet(rows)), method=zipfile.ZIP_STORED))
    sheet = read_file(path)[0]
    assert (sheet.rows, sheet.cells_filled) == ([[1.0]], 1)


ROW = '<row r="1"><c r="A1"><v>1</v></c></row>'


def test_errors_of_every_kind(tmp_path: Path) -> None:
    known = (
        "#DIV/0!",
        "#N/A",
        "#NAME?",
        "#NULL!",
        "#NUM!",
        "#REF!",
        "#VALUE!",
        "#SPILL!",
        "#CALC!",
        "#GETTING_DATA",
        "#BUSY!",
    )
    cells = "".join(f'<c r="{cell_address(0, column)}" t="e"><v>{error}</v></c>' for column, error in enumerate(known))
    pasted = "".join(
        f'<c r="{cell_address(1, column)}" t="str"><v>{error}</v></c>'
        for column, error in enumerate(("#REF!", "#BEZUG!", "#####", "Err:508", "#1", "Error"))
    )
    sheet = one(tmp_path, worksheet(f'<row r="1">{cells}</row><row r="2">{pasted}</row>'))
    assert sheet.errors == {(0, column): error for column, error in enumerate(known)} | {
        (1, 0): "#REF!",
        (1, 1): "#BEZUG!",
        (1, 2): "#####",
        (1, 3): "Err:508",
    }
    assert sheet.rows == [[None] * 11, [None] * 4 + ["#1", "Error"] + [None] * 5]
    assert sheet.cells_filled == 17


@pytest.mark.parametrize(
    ("text", "answer"),
    [
        ("#N/A", True),
        ("#¡REF!", True),
        ("#NV", True),
        ("##", False),
        ("#", False),
        ("#4", False),
        ("#REF", False),
        ("Err:5", False),
        ("E", False),
    ],
)
def test_which_texts_are_errors(text: str, answer: bool) -> None:
    assert is_error_text(text) is answer


def test_formulas_without_a_result_are_no_blanks(tmp_path: Path) -> None:
    # They stand below and beside every value, where the value reader sees no cells at all.
    sheet = one(
        tmp_path,
        worksheet(
            '<row r="2"><c r="A2"><v>1</v></c><c r="B2"><f>A2</f></c></row><row r="4"><c r="C4"><f>A2</f><v/></c></row>'
        ),
    )
    assert sheet == Sheet(
        file=str(tmp_path / "list.xlsx"),
        name="Sheet1",
        rows=[[None, None, None], [1.0, None, None], [None, None, None], [None, None, None]],
        no_value={(1, 1), (3, 2)},
        cells_filled=3,
    )


def test_values_from_another_workbook_are_read_and_said(tmp_path: Path) -> None:
    sheet = one(tmp_path, worksheet('<row r="1"><c r="A1"><f>[1]Data!B2*2</f><v>5</v></c></row>'))
    assert (sheet.rows, sheet.notes) == (
        [[5.0]],
        ("formulas that refer to another workbook, read by their saved values: 1",),
    )


def test_shapes_are_counted(tmp_path: Path) -> None:
    pixel = (
        b"\x89PNG\r\n\x1a\n\0\0\0\rIHDR\0\0\0\1\0\0\0\1\x08\6\0\0\0\x1f\x15\xc4\x89\0\0\0\rIDATx\x9cc\xf8\xcf\xc0\xf0"
        b"\x1f\0\5\0\1\xff\x89\x99=\x1d\0\0\0\0IEND\xaeB`\x82"
    )

    def fill(sheet: Any) -> None:
        sheet["A1"] = 1
        sheet.add_image(Image(io.BytesIO(pixel)), "B2")
        sheet.add_image(Image(io.BytesIO(pixel)), "B4")

    assert written(tmp_path, fill).shapes == 2


def test_multi_line_cells_and_odd_characters_stay_as_they_are(tmp_path: Path) -> None:
    sheet = one(
        tmp_path,
        worksheet(
            '<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1" t="s"><v>1</v></c><c r="C1" t="s"><v>2</v></c></row>'
        ),
        shared=texts("<t>PSHH\n12 barg\nPSH</t>", "<t xml:space='preserve'> PT-1\u200b </t>", "<t>a_x0007_\u202e</t>"),
    )
    assert sheet.rows == [["PSHH\n12 barg\nPSH", " PT-1\u200b ", "a\x07\u202e"]]


# Numbers that are none


def test_numbers_beyond_all_bounds_are_errors(tmp_path: Path) -> None:
    sheet = one(
        tmp_path,
        worksheet(
            '<row r="1"><c r="A1"><v>1e999</v></c><c r="B1"><v>NaN</v></c><c r="C1"><v>-inf</v>'
            '</c><c r="D1"><v>1e300</v></c></row>'
        ),
    )
    assert (sheet.rows, sheet.errors) == (
        [[None, None, None, 1e300]],
        {(0, 0): "inf", (0, 1): "nan", (0, 2): "-inf"},
    )


DATED = styles(formats={164: "[h]:mm"}, cells='<xf/><xf numFmtId="14"/><xf numFmtId="164"/>')


def test_dates_that_are_none_stay_numbers(tmp_path: Path) -> None:
    sheet = one(
        tmp_path,
        worksheet(
            '<row r="1"><c r="A1" s="1"><v>-3</v></c><c r="B1" s="1"><v>2958466</v></c><c'
            ' r="C1" s="2"><v>1e20</v></c>'
            '<c r="D1" s="1"><v>45363</v></c><c r="E1" s="1"><v>0.5</v></c><c r="F1" s="1">'
            "<v>45363.25</v></c></row>"
        ),
        style=DATED,
    )
    assert sheet.rows == [
        [
            -3.0,
            2958466.0,
            1e20,
            datetime.date(2024, 3, 12),
            datetime.time(12),
            datetime.datetime.fromisoformat("2024-03-12 06:00"),
        ]
    ]
    assert len(sheet.number_formats) == 6


@pytest.mark.parametrize("spelt", ["usual", "otherwise"])
def test_days_counted_from_1904(tmp_path: Path, spelt: str) -> None:
    rows = '<row r="1"><c r="A1" s="1"><v>0</v></c><c r="B1" s="1"><v>43901</v></c></row>'
    made = parts(
        worksheet(rows if spelt == "usual" else f"<!-- -->{rows}"),
        style=DATED,
        more={
            "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{KINDS}"><workbookPr'
            f' date1904="1"/><sheets>'
            '<sheet name="S" sheetId="1" r:id="rId1"/></sheets></workbook>'
        },
    )
    assert read_file(saved(tmp_path, zipped(made)))[0].rows[0][1] == datetime.date(2024, 3, 12)


# Cells that stand far away


def test_cells_far_from_the_list_are_told_of_and_left_out(tmp_path: Path) -> None:
    list_ = "".join(
        f'<row r="{row}"><c r="A{row}" t="s"><v>0</v></c><c r="B{row}"><v>{row}</v></c>'
        + ('<c r="XFD2" s="1"><v>45363</v></c>' if row == 2 else "")
        + "</row>"
        for row in range(1, 4)
    )
    sheet = one(
        tmp_path,
        worksheet(
            list_ + '<row r="900000"><c r="C900000" t="e"><v>#SPILL!</v></c><c r="D900000"><f>A1</f></c></row>'
            '<row r="1048576"><c r="XFD1048576" t="inlineStr"><is><t>end</t></is></c></row>',
            after='<mergeCells><mergeCell ref="A2:XFD1048576"/></mergeCells>',
        ),
        shared=texts("<t>PT</t>"),
        style=DATED,
    )
    assert sheet == Sheet(
        file=str(tmp_path / "list.xlsx"),
        name="Sheet1",
        rows=[["PT", 1.0], ["PT", 2.0], ["PT", 3.0]],
        far={
            (1, 16383): datetime.date(2024, 3, 12),
            (899999, 2): "#SPILL!",
            (899999, 3): None,
            (1048575, 16383): "end",
        },
        merged=((1, 0, 2, 1),),
        cells_filled=10,
        notes=("filled cells far from the list, left out of it: 4, at XFD2, C900000, D900000, XFD1048576",),
    )


def test_far_cells_of_several_sheets_are_not_mixed_up(tmp_path: Path) -> None:
    def sheet(text: str, far: str) -> str:
        return worksheet(
            f'<row r="1"><c r="A1" t="str"><v>{text}</v></c></row>'
            + (f'<row r="1000000"><c r="ZZ1000000" t="str"><v>{far}</v></c></row>' if far else "")
        )

    path = saved(tmp_path, zipped(parts(sheet("a", ""), sheet("b", "B"), sheet("c", ""), sheet("d", "D"))))
    assert [(found.rows, found.far) for found in read_file(path)] == [
        ([["a"]], {}),
        ([["b"]], {(999999, 701): "B"}),
        ([["c"]], {}),
        ([["d"]], {(999999, 701): "D"}),
    ]


def test_one_cell_in_the_last_corner_is_refused_at_once(tmp_path: Path) -> None:
    made = parts(worksheet('<row r="1048576"><c r="XFD1048576"><v>1</v></c></row>'))
    assert refusal(saved(tmp_path, zipped(made))) == (
        "list.xlsx, sheet 'Sheet1': reaches to XFD1048576, which is 17,179,869,184 cells, 1 of"
        " them filled; at most"
        " 20,000,000 are read."
    )


def test_sixteen_thousand_columns_are_read(tmp_path: Path) -> None:
    cells = "".join(f'<c r="{cell_address(0, column)}"><v>{column}</v></c>' for column in range(16_384))
    assert one(tmp_path, worksheet(f'<row r="1">{cells}</row>')).rows == [[float(column) for column in range(16_384)]]


def test_merged_ranges_that_overlap_are_passed_over(tmp_path: Path) -> None:
    whole = '<mergeCell ref="A1:XFD1048576"/>'
    sheet = one(
        tmp_path,
        worksheet(
            '<row r="1"><c r="A1"><v>1</v></c></row><row r="9"><c r="I9"><v>1</v></c></row>',
            after=f"<mergeCells>{whole * 1000}</mergeCells>",
        ),
    )
    assert (sheet.merged, sheet.notes) == (
        ((0, 0, 8, 8),),
        ("merged ranges that overlap others, passed over: 999",),
    )


# XML as it may be spelt


def _otherwise(xml: str, how: str) -> str | bytes:
    """Spell a part otherwise, without changing what it says."""
    body = xml.partition("?>")[2].strip() or xml
    match how:
        case "UTF-16":
            return f'<?xml version="1.0" encoding="UTF-16"?>{body}'.encode("utf-16")
        case "Latin-1":
            return f'<?xml version="1.0" encoding="ISO-8859-1"?>{body}'.encode("latin-1")
        case "prefix":
            return re.sub(r"<(/?)([a-zA-Z])", r"<\1p:\2", body).replace("xmlns=", "xmlns:p=")
        case "single quotes":
            return body.replace('"', "'")
        case "comments":
            return body.replace("<row", "<!-- <row/> --><row").replace("<si>", "<!-- --><si>")
        case "CDATA":
            return re.sub(
                r"<(v|t|f)>([^<]+)<",
                lambda found: f"<{found[1]}><![CDATA[{found[2].replace('&amp;', '&')}]]><",
                body,
            )
        case "no addresses":
            return re.sub(r'<(row|c) r="[A-Z0-9]+"', r"<\1", body)
        case "address last":
            return re.sub(r'<c (r="[A-Z0-9]+")([^>/]*)', r"<c\2 \1", body)
        case "line ends":
            return body.replace(" ", "\n").replace("><", ">\n<")
        case "strict":
            return body.replace(MAIN, "http://purl.oclc.org/ooxml/spreadsheetml/main")
    return xml


SPELT = worksheet(
    '<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1" s="1"><v>34</v></c><c r="C1" t="e">'
    "<v>#SPILL!</v></c></row>"
    '<row r="2" hidden="1"><c r="A2" s="2" t="s"><v>1</v></c><c r="B2" t="str"><f>A1</f>'
    '<v>x&amp;y</v></c><c r="C2"><f>A1</f></c></row>',
    after='<mergeCells><mergeCell ref="A1:A2"/></mergeCells>',
)


@pytest.mark.parametrize(
    "how",
    [
        "usual",
        "UTF-16",
        "Latin-1",
        "prefix",
        "single quotes",
        "comments",
        "CDATA",
        "no addresses",
        "address last",
        "line ends",
        "strict",
    ],
)
def test_however_a_workbook_is_spelt_it_reads_the_same(tmp_path: Path, how: str) -> None:
    made = parts(
        SPELT,
        shared=texts("<t>°C</t>", "<r><rPr><strike/></rPr><t>old</t></r><r><t>new</t></r>"),
        style=styles(fonts="<font/><font><strike/></font>", cells='<xf/><xf numFmtId="9"/><xf fontId="1"/>'),
    )
    for part in (FIRST_SHEET, "xl/sharedStrings.xml", "xl/styles.xml", "xl/workbook.xml"):
        if how not in ("single quotes", "line ends") or part == FIRST_SHEET:
            made[part] = _otherwise(str(made[part]), how)
    sheet = read_file(saved(tmp_path, zipped(made)))[0]
    assert sheet == Sheet(
        file=str(tmp_path / "list.xlsx"),
        name="Sheet1",
        rows=[["°C", 34.0, None], ["oldnew", "x&y", None]],
        errors={(0, 2): "#SPILL!"},
        no_value={(1, 2)},
        merged=((0, 0, 1, 0),),
        hidden_rows=frozenset({1}),
        struck={(1, 0)},
        number_formats={(0, 1): "0%"},
        cells_filled=6,
    )


def test_parts_in_unusual_places(tmp_path: Path) -> None:
    made = parts(worksheet('<row r="1"><c r="A1" t="s" s="1"><v>0</v></c><c r="B1" s="1"><v>1</v></c></row>'))
    made["odd/texts.xml"] = texts("<t>PT-1</t>")
    made["xl/look.xml"] = styles(cells='<xf/><xf numFmtId="14"/>')
    made["odd/sheet.xml"] = made.pop(FIRST_SHEET)
    made["xl/_rels/workbook.xml.rels"] = relations(
        ("rId1", "worksheet", "../odd/sheet.xml"),
        ("a", "sharedStrings", "/odd/texts.xml"),
        ("b", "styles", "look.xml"),
    )
    path = saved(tmp_path, zipped(made))
    assert read_file(path)[0].rows == [["PT-1", datetime.date(1900, 1, 1)]]
    backslashed = {name.replace("/", "\\"): text for name, text in made.items()}
    assert read_file(saved(tmp_path, zipped(backslashed)))[0].rows == [["PT-1", datetime.date(1900, 1, 1)]]


def _independently(part: str | bytes, shared: list[str]) -> dict[tuple[int, int], str | float | None]:
    """Read the cells of a sheet by a tree of all its elements: slow, and by another road."""
    found: dict[tuple[int, int], str | float | None] = {}
    for cell in ElementTree.fromstring(part).iter(  # noqa: S314 - made here
        f"{{{MAIN}}}c"
    ):
        position = cell_position(cell.get("r", ""))
        value = cell.findtext(f"{{{MAIN}}}v") or ""
        inline = "".join(text.text or "" for text in cell.iter(f"{{{MAIN}}}t"))
        kind = cell.get("t", "n")
        assert position is not None
        read: str | float | None = inline if kind == "inlineStr" else value
        if kind == "s" and value:
            read = shared[int(value)]
        if kind == "n":
            read = float(value) if value else None
        if isinstance(read, str) and not read.strip():
            read = None
        if read is not None:
            found[position] = read
    return found


@pytest.mark.parametrize("seed", range(25))
def test_any_sheet_reads_as_its_tree_does(tmp_path: Path, seed: int) -> None:
    """Random cells of every kind, rows and cells in any order of kinds, blanks between."""
    chance = random.Random(seed)
    shared = [f"text {number} <&> °" for number in range(50)]
    rows = []
    for row in sorted(chance.sample(range(1, 400), 60)):
        cells = []
        for column in sorted(chance.sample(range(60), chance.randrange(1, 20))):
            address = cell_address(row - 1, column)
            style = chance.choice(["", ' s="1"', ' s="2"'])
            number = chance.choice(["0", "-1.5", "1e3", str(chance.random())])
            cells.append(
                chance.choice(
                    [
                        f'<c r="{address}"{style}/>',
                        f'<c r="{address}"{style}></c>',
                        f'<c r="{address}"{style}><v>{number}</v></c>',
                        f'<c r="{address}"{style} t="n"><f>A1&gt;"2"</f><v>{number}</v></c>',
                        f'<c r="{address}"{style} t="s"><v>{chance.randrange(50)}</v></c>',
                        f'<c r="{address}"{style} t="inlineStr"><is><t>in {row} t="e" s="1"</t></is></c>',
                        f'<c r="{address}"{style} t="inlineStr"><is><t> </t></is></c>',
                        f'<c r="{address}"{style} t="e"><v>#REF!</v></c>',
                        f'<c r="{address}"{style} t="str"><f>B2</f><v>said {column}</v></c>',
                        f'<c r="{address}"{style}><f>B2</f></c>',
                    ]
                )
            )
        rows.append(f'<row r="{row}" spans="1:60">{"".join(cells)}</row>')
    part = worksheet("".join(rows))
    path = saved(
        tmp_path,
        zipped(
            parts(
                part,
                shared=texts(*(f"<t>{text.replace('&', '&amp;').replace('<', '&lt;')}</t>" for text in shared)),
                style=styles(fonts="<font/><font><strike/></font>", cells='<xf/><xf numFmtId="0"/><xf fontId="1"/>'),
            )
        ),
    )
    sheet = read_file(path)[0]
    elements = ElementTree.fromstring(part).findall(f".//{{{MAIN}}}c")  # noqa: S314 - made here
    expected = _independently(part, shared)
    found: dict[tuple[int, int], Any] = {
        (row, column): cell
        for row, line in enumerate(sheet.rows)
        for column, cell in enumerate(line)
        if cell is not None
    }
    assert {len(line) for line in sheet.rows} == {sheet.width}
    assert found | sheet.errors == expected
    assert sheet.no_value == {
        cell_position(cell.get("r", ""))
        for cell in elements
        if cell.find(f"{{{MAIN}}}f") is not None and not cell.findtext(f"{{{MAIN}}}v")
    }
    # A text of blanks alone is struck out too, as the font is that of its cell.
    assert sheet.struck == {
        cell_position(cell.get("r", ""))
        for cell in elements
        if cell.get("s") == "2" and (cell.get("t") == "inlineStr" or cell.findtext(f"{{{MAIN}}}v"))
    }
    assert sheet.cells_filled == len(expected) + len(sheet.no_value)


# What is refused


OLD = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(600)


@pytest.mark.parametrize(
    ("name", "data", "message"),
    [
        ("a.xlsx", b"", "a.xlsx: is empty."),
        (
            "a.xls",
            OLD + "Workbook".encode("utf-16-le"),
            "a.xls: is a workbook of the old kind (.xls): save it as .xlsx.",
        ),
        (
            "a.xlsx",
            OLD + "Book\0".encode("utf-16-le"),
            "a.xlsx: is a workbook of the old kind (.xls): save it as .xlsx.",
        ),
        (
            "a.xlsx",
            OLD + "EncryptedPackage".encode("utf-16-le"),
            "a.xlsx: is protected by a password: save it without one.",
        ),
        (
            "a.doc",
            OLD + "WordDocument".encode("utf-16-le"),
            "a.doc: is an office document of an old kind, not a workbook: save the list as .xlsx.",
        ),
        ("a.xlsx", b"PK\5\6" + bytes(18), "a.xlsx: is a zip file with nothing in it."),
        ("a.csv", b"%PDF-1.7\n", "a.csv: is a PDF: ask for the list it was printed from."),
        ("a.csv", b"{\\rtf1", "a.csv: is a text document (RTF): copy its table into a workbook."),
        ("a.xlsx", b"\x89PNG\r\n\x1a\n", "a.xlsx: is a picture."),
        ("a.csv.gz", b"\x1f\x8b\x08", "a.csv.gz: is a packed file (gzip): unpack it."),
        (
            "a.xls",
            b"\xef\xbb\xbf \n<HTML><table>",
            "a.xls: is a web page (HTML), not a workbook: open it and save it as .xlsx.",
        ),
        (
            "a.csv",
            b"<!DOCTYPE html><html>",
            "a.csv: is a web page (HTML), not a workbook: open it and save it as .xlsx.",
        ),
        (
            "a.xml",
            b'<?xml version="1.0"?>',
            "a.xml: is an XML file, not a workbook: open it and save it as .xlsx.",
        ),
        (
            "a.xlsx",
            b"tag,service\nPT-1,feed\n",
            "a.xlsx: is not a workbook, though its name ends in .xlsx; delimited text must be named .csv.",
        ),
        (
            "a.XLSM",
            b"\1\2\3",
            "a.XLSM: is not a workbook, though its name ends in .xlsm; delimited text must be named .csv.",
        ),
        ("a.csv", b"a\0b", "a.csv, line 1: holds a NUL character, as no text does: save it as CSV in UTF-8."),
    ],
)
def test_what_is_no_list(tmp_path: Path, name: str, data: bytes, message: str) -> None:
    assert refusal(saved(tmp_path, data, name)) == message


def test_where_there_is_no_file(tmp_path: Path) -> None:
    assert refusal(tmp_path / "none.xlsx") == "none.xlsx: there is no such file."
    assert refusal(tmp_path) == f"{tmp_path.name}: is a folder, not a file."
    os.mkfifo(tmp_path / "pipe.csv")
    assert refusal(tmp_path / "pipe.csv") == "pipe.csv: is no ordinary file."
    with pytest.raises(UnreadableFile, match="is no name a file can have"):
        read_file("a\0b.csv")
    with pytest.raises(UnreadableFile, match="cannot be opened"):
        read_file("x" * 5000)


def test_a_file_larger_than_the_limit(tmp_path: Path) -> None:
    path = saved(tmp_path, b"a,b\n", "a.csv")
    assert read_file(path, limits=Limits(file_bytes=4))
    assert refusal(path, limits=Limits(file_bytes=3)) == "a.csv: has 4 bytes; at most 3 are read."


@pytest.mark.parametrize("name", ["list.xlsm", "list.xlsx", "list.csv", "list"])
def test_a_workbook_is_known_by_what_it_holds(tmp_path: Path, name: str) -> None:
    path = saved(tmp_path, zipped(parts(worksheet(ROW), more={"xl/vbaProject.bin": b"macro"})), name)
    assert read_file(path)[0].rows == [[1.0]]


@pytest.mark.parametrize(
    ("cell", "message"),
    [
        ('<c r="C7" t="n"><v>4-20</v></c>', "cell C7: '4-20' is stored as a number."),
        ('<c r="C7" t="s"><v>5</v></c>', "cell C7: refers to a text '5' that the file has not."),
        ('<c r="C7" t="zz"><v>5</v></c>', "cell C7: is of a kind 'zz', which no cell is."),
    ],
)
def test_the_cell_to_blame_is_named(tmp_path: Path, cell: str, message: str) -> None:
    made = parts(worksheet(f'{ROW}<row r="7">{cell}</row>'), shared=texts("<t>a</t>"))
    assert refusal(saved(tmp_path, zipped(made))) == f"list.xlsx, sheet 'Sheet1', {message}"


def test_damage_that_only_the_value_reader_sees(tmp_path: Path) -> None:
    made = parts(worksheet('<row r="1"><c r="A1"><v>1</f></c></row>'))
    assert refusal(saved(tmp_path, zipped(made))).startswith("list.xlsx, sheet 'Sheet1'")


@pytest.mark.parametrize("seed", range(40))
def test_damaged_workbooks_are_refused_or_read(tmp_path: Path, seed: int) -> None:
    """Changed bytes of a sheet, its texts or styles give an UnreadableFile or sheets, and nothing else."""
    chance = random.Random(seed)
    made = parts(
        SPELT,
        shared=texts("<t>°C</t>", "<r><rPr><strike/></rPr><t>old</t></r><r><t>new</t></r>"),
        style=styles(fonts="<font/><font><strike/></font>", cells='<xf/><xf numFmtId="9"/><xf fontId="1"/>'),
    )
    for _ in range(20):
        broken = dict(made)
        for part in chance.sample(sorted(made), 2):
            data = bytearray(str(made[part]).encode())
            for _ in range(chance.randrange(1, 4)):
                at = chance.randrange(len(data))
                match chance.randrange(3):
                    case 0:
                        data[at] = chance.choice(b'<>/"& =09azAZ\0\xff')
                    case 1:
                        del data[at : at + chance.randrange(1, 30)]
                    case _:
                        data[at:at] = data[chance.randrange(len(data)) :][:30]
            broken[part] = bytes(data)
        path = saved(tmp_path, zipped(broken))
        with contextlib.suppress(UnreadableFile):
            for sheet in read_file(path):
                assert {len(row) for row in sheet.rows} <= {sheet.width}
                assert not any(
                    isinstance(cell, float) and not math.isfinite(cell) for row in sheet.rows for cell in row
                )


def test_a_large_sheet_takes_little_memory(tmp_path: Path) -> None:
    """A sheet of 400,000 cells is read in a process of its own: 60 bytes of it for each cell, and no more."""
    rows = "".join(
        f'<row r="{row}">'
        + "".join(f'<c r="{letter}{row}" t="s"><v>{ord(letter) - 65}</v></c>' for letter in "ABCDEFGHIJKLMNOPQRST")
        + "</row>"
        for row in range(1, 20_001)
    )
    path = saved(tmp_path, zipped(parts(worksheet(rows), shared=texts(*(f"<t>text {n}</t>" for n in range(20))))))
    code = (
        "import resource, sys\nfrom instruments.workbook.reader import read_file\n"
        "before = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss\nsheets = read_file(sys.argv[1])\n"
        "print(len(sheets[0].rows), resource.getrusage(resource.RUSAGE_SELF).ru_maxrss - before)"
    )
    done = subprocess.run([sys.executable, "-c", code, str(path)], capture_output=True, text=True, check=True)
    height, kilobytes = map(int, done.stdout.split())
    assert height == 20_000
    assert kilobytes < 60_000


def test_sheets_and_errors_pass_from_process_to_process(tmp_path: Path) -> None:
    sheets = read_file(saved(tmp_path, zipped(parts(SPELT, shared=texts("<t>a</t>", "<t>b</t>")))))
    assert pickle.loads(pickle.dumps(sheets)) == sheets  # noqa: S301 - made here
    error = pickle.loads(pickle.dumps(UnreadableFile("a.xlsx", "sheet 'B'", "is broken")))  # noqa: S301 - made here
    assert (str(error), error.place) == ("a.xlsx, sheet 'B': is broken.", "sheet 'B'")


# Addresses


@pytest.mark.parametrize(
    ("position", "address"),
    [
        ((0, 0), "A1"),
        ((111, 5), "F112"),
        ((9, 25), "Z10"),
        ((9, 26), "AA10"),
        ((9, 701), "ZZ10"),
        ((9, 702), "AAA10"),
        ((1048575, 16383), "XFD1048576"),
    ],
)
def test_addresses(position: tuple[int, int], address: str) -> None:
    assert cell_address(*position) == address
    assert cell_position(address) == position
    assert column_number(re.sub("[0-9]", "", address)) == position[1]


@pytest.mark.parametrize("address", ["", "A", "1", "A0", "XFE1", "A1048577", "AAAA1", "A1:B2", "Á1", "A1\n", "A١"])
def test_what_is_no_address(address: str) -> None:
    assert cell_position(address) is None


def test_a_cell_beyond_the_sheet_is_blank() -> None:
    sheet = Sheet(file="a", name="b", rows=[["x"]])
    assert [sheet.at(row, column) for row, column in ((0, 0), (1, 0), (0, 1), (-1, 0), (0, -1))] == [
        "x",
        None,
        None,
        None,
        None,
    ]
