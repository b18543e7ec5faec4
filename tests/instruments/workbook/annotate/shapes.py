"""Workbooks of many shapes to be marked, and what must be true of every marked copy."""

from __future__ import annotations

import io
import re
import zipfile
from collections.abc import Callable, Mapping
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import openpyxl
from openpyxl.chart import BarChart, Reference
from openpyxl.comments import Comment
from openpyxl.formatting.rule import CellIsRule
from openpyxl.styles import Alignment, Border, Font, PatternFill, Protection, Side
from openpyxl.worksheet.datavalidation import DataValidation
from openpyxl.worksheet.table import Table

from instruments.workbook.annotate.comments import Passage
from instruments.workbook.annotate.marked_copy import Mark
from instruments.workbook.annotate.styles import NEW_STYLES, Fill
from instruments.workbook.reader import read_file
from tests.instruments.workbook.packages import KINDS, MAIN, RELATIONS, STRICT, parts, worksheet, zipped

RED = Fill(pale="FFB3B3", dark="9C0006")
BLUE = Fill(pale="BDD7EE", dark="1F4E79")
TYPES = "http://schemas.openxmlformats.org/package/2006/content-types"
STRICT_KINDS = b"http://purl.oclc.org/ooxml/officeDocument/relationships"
SHEET_TYPE = "application/vnd.openxmlformats-officedocument.spreadsheetml"

STYLES = NEW_STYLES.replace(
    b'<fonts count="1">', b'<fonts count="2"><font><b/><color rgb="FF000080"/></font>'
).replace(
    b'<cellXfs count="1">',
    b'<cellXfs count="2"><xf numFmtId="0" fontId="1" fillId="0" borderId="0" xfId="0"/>',
)  # fmt: skip
"""Two formats: the usual one, and one in bold letters."""

Place = tuple[int, int]


def mark(text: str = "RNG02 fault", fill: Fill = RED, rank: int = 0) -> Mark:
    return Mark(fill=fill, text=(Passage(text, bold=True), Passage("\nmore <b> & such")), rank=rank)


def made(sheet: str, **more: str | bytes | None) -> bytes:
    """A package of one sheet's part, with all that a spreadsheet asks for; names of parts may have a __ for a /."""
    parts_of = parts(
        sheet,
        style=STYLES,
        more={
            "[Content_Types].xml": f'<Types xmlns="{TYPES}"><Default Extension="rels" '
            'ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
            '<Default Extension="xml" ContentType="application/xml"/>'
            f'<Override PartName="/xl/workbook.xml" ContentType="{SHEET_TYPE}.sheet.main+xml"/>'
            f'<Override PartName="/xl/worksheets/sheet1.xml" ContentType="{SHEET_TYPE}.worksheet+xml"/>'
            f'<Override PartName="/xl/styles.xml" ContentType="{SHEET_TYPE}.styles+xml"/></Types>',
            "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{RELATIONS}">'
            f'<Relationship Id="rId1" Type="{KINDS}/worksheet" Target="worksheets/sheet1.xml"/>'
            f'<Relationship Id="rId2" Type="{KINDS}/styles" Target="styles.xml"/></Relationships>',
            **more,
        },
    )
    return zipped(parts_of)


def text_cell(address: str, text: str = "x", style: str = "") -> str:
    return f'<c r="{address}"{style} t="inlineStr"><is><t>{text}</t></is></c>'


PLAIN_ROWS = (
    f'<row r="1" spans="1:3">{text_cell("A1", "Tag")}{text_cell("B1", "LRV")}{text_cell("C1", "URV")}</row>'
    f'<row r="2" spans="1:3">{text_cell("A2", "PT-1", " s=" + chr(34) + "1" + chr(34))}<c r="C2"><v>16</v></c></row>'
    '<row r="3" s="1" customFormat="1" ht="40" customHeight="1"/>'
    '<row r="6" hidden="1"><c r="B6"><f>SUM(C2:C2)</f><v>16</v></c></row>'
)

MARKS: Mapping[Place, Mark] = {
    (0, 0): mark(),  # filled, no style
    (1, 0): mark("one"),  # filled, a style
    (1, 1): mark("two", BLUE),  # blank, between two cells
    (1, 5): mark("three"),  # blank, beyond the last cell
    (2, 1): mark("four"),  # blank, in a row of one tag with a style
    (4, 2): mark("five", BLUE),  # blank, in a row that is not there
    (5, 1): mark("six"),  # a formula, in a hidden row
    (9, 0): mark("seven"),  # below the last row
}


def prefixed(sheet: str) -> str:
    """The same sheet with its names behind a prefix."""
    text = re.sub(r"<(/?)(?=[a-zA-Z])", r"<\1x:", sheet.partition("?>")[2])
    return '<?xml version="1.0" encoding="UTF-8"?>' + text.replace("xmlns=", "xmlns:x=")


def without_addresses(sheet: str) -> str:
    """The same sheet, saying where a cell or row stands only where it follows no other."""
    rows = (
        '<row><c t="inlineStr"><is><t>Tag</t></is></c><c t="inlineStr"><is><t>LRV</t></is></c></row>'
        '<row><c s="1" t="inlineStr"><is><t>PT-1</t></is></c><c r="C2"><v>16</v></c></row>'
        '<row/><row r="6"><c r="B6"><f>SUM(C2:C2)</f><v>16</v></c></row>'
    )
    return re.sub("<sheetData>.*</sheetData>", f"<sheetData>{rows}</sheetData>", sheet)


PLAIN = worksheet(PLAIN_ROWS, before='<dimension ref="A1:C6"/><cols><col min="2" max="2" width="20" style="1"/></cols>')
AFTER = (
    '<mergeCells count="1"><mergeCell ref="E1:F1"/></mergeCells><pageMargins left="0.7" right="0.7" top="0.75" '
    'bottom="0.75" header="0.3" footer="0.3"/>'
)

BY_HAND: Mapping[str, Callable[[], bytes]] = {
    "plain": lambda: made(PLAIN),
    "with what follows": lambda: made(worksheet(PLAIN_ROWS, after=AFTER)),
    "with lists of extensions": lambda: made(
        worksheet(PLAIN_ROWS, after=AFTER + '<extLst><ext uri="{1}"><a xmlns="urn:a"/></ext></extLst>')
    ),
    "no rows": lambda: made(worksheet("").replace("<sheetData></sheetData>", "<sheetData/>")),
    "rows to come": lambda: made(worksheet("", after=AFTER)),
    "prefixed": lambda: made(prefixed(PLAIN)),
    "prefixed with what follows": lambda: made(prefixed(worksheet(PLAIN_ROWS, after=AFTER))),
    "without addresses": lambda: made(without_addresses(PLAIN)),
    "comments in the XML": lambda: made(PLAIN.replace("<row r=\"2\"", '<!-- row <row r="1"> --><row r="2"')),
    "single quotes": lambda: made(PLAIN.replace('<row r="2" spans="1:3">', "<row r='2' spans='1:3' >")),
    "attributes in another order": lambda: made(
        PLAIN.replace('<c r="A2" s="1" t="inlineStr">', '<c s="1" t="inlineStr" r="A2">')
    ),
    "blank cells": lambda: made(PLAIN.replace('<c r="C2">', '<c r="B2" s="1"/><c r="C2">')),
    "lines ended as on Windows": lambda: made(PLAIN.replace("<row", "\r\n<row").replace("</row>", "\r\n</row>\r\n")),
    "UTF-16": lambda: made(
        PLAIN, **{"xl/worksheets/sheet1.xml": PLAIN.replace("UTF-8", "UTF-16").encode("utf-16")}
    ),
    "strict": lambda: strict(made(PLAIN)),
    "no styles": lambda: made(
        PLAIN.replace(' s="1"', "").replace(' style="1"', ""),
        **{
            "xl/styles.xml": None,
            "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{RELATIONS}">'
            f'<Relationship Id="rId1" Type="{KINDS}/worksheet" Target="worksheets/sheet1.xml"/></Relationships>',
        },
    ),
    "stored, not packed": lambda: repacked(made(PLAIN), zipfile.ZIP_STORED),
}  # fmt: skip


def repacked(data: bytes, method: int) -> bytes:
    """The same parts, packed otherwise."""
    with zipfile.ZipFile(io.BytesIO(data)) as package:
        return zipped({name: package.read(name) for name in package.namelist()}, method=method)


def with_parts(data: bytes, more: Mapping[str, bytes | str]) -> bytes:
    """The same package with some parts changed or added."""
    with zipfile.ZipFile(io.BytesIO(data)) as package:
        return zipped({name: package.read(name) for name in package.namelist()} | dict(more))


def strict(data: bytes) -> bytes:
    """The same package as one of the strict kind."""
    with zipfile.ZipFile(io.BytesIO(data)) as package:
        return zipped(
            {
                name: package.read(name).replace(MAIN.encode(), STRICT.encode()).replace(KINDS.encode(), STRICT_KINDS)
                for name in package.namelist()
            }
        )


def saved(book: Any) -> bytes:
    out = io.BytesIO()
    book.save(out)
    return out.getvalue()


def busy_book() -> Any:
    """A workbook with nearly everything that a list has on it, and that openpyxl can write."""
    book = openpyxl.Workbook()
    sheet = book.active
    sheet.title = "Index & <list>"
    sheet.append(["Tag", "LRV", "URV", "Span", "State"])
    for number in range(1, 40):
        sheet.append([f"PT-{number}", 0, number, f"=C{number + 1}-B{number + 1}", "live" if number % 3 else None])
    thin = Side(style="thin", color="FF808080")
    for column in "ABCDE":
        head = sheet[f"{column}1"]
        head.font = Font(name="Arial", bold=True, color="FFFFFFFF")
        head.fill = PatternFill("solid", start_color="FF203864")
        head.alignment = Alignment(horizontal="center", wrap_text=True, text_rotation=90)
        head.border = Border(left=thin, right=thin, top=thin, bottom=thin)
        head.protection = Protection(locked=True)
    for row in range(2, 41):
        sheet[f"C{row}"].number_format = '0.0" barg"'
        sheet[f"C{row}"].font = Font(strike=True, color="FFFF0000")
        sheet[f"A{row}"].protection = Protection(locked=False)
    sheet.add_table(Table(displayName="Index", ref="A1:E40"))
    valid = DataValidation(type="list", formula1='"live,void"')
    valid.add("E2:E40")
    sheet.add_data_validation(valid)
    red = PatternFill(bgColor="FFFFC7CE")
    sheet.conditional_formatting.add("C2:C40", CellIsRule(operator="greaterThan", formula=["30"], fill=red))
    sheet.freeze_panes = "B2"
    sheet.print_title_rows = "1:1"
    sheet.merge_cells("A42:C43")
    sheet["A42"] = "Notes\nto all"
    sheet.protection.sheet = True
    sheet.column_dimensions["B"].width = 30
    sheet.column_dimensions["D"].hidden = True
    sheet.row_dimensions[5].hidden = True
    chart = BarChart()
    chart.add_data(Reference(sheet, min_col=3, min_row=1, max_row=40), titles_from_data=True)
    sheet.add_chart(chart, "H2")
    other = book.create_sheet("Other")
    other["B2"] = "='Index & <list>'!C2"
    other.sheet_state = "hidden"
    return book


def commented_book() -> Any:
    """The busy workbook with comments of the user's own on both sheets."""
    book = busy_book()
    sheet = book.worksheets[0]
    sheet["A3"].comment = Comment("Ask the vendor\nabout this", "T. Brand", height=80, width=200)
    sheet["A5"].comment = Comment("as built", "T. Brand")
    book["Other"]["B2"].comment = Comment("from the index", "J. Hale")
    return book


def with_macros(data: bytes) -> bytes:
    """The package as a workbook with macros (which are none), printer settings, custom XML and a part of its own."""
    with zipfile.ZipFile(io.BytesIO(data)) as package:
        types = package.read("[Content_Types].xml").decode()
        relations = package.read("xl/_rels/workbook.xml.rels").decode()
    types = types.replace(f"{SHEET_TYPE}.sheet.main+xml", "application/vnd.ms-excel.sheet.macroEnabled.main+xml")
    types = types.replace(
        "<Default ", '<Default Extension="bin" ContentType="application/vnd.ms-office.vbaProject"/><Default ', 1
    )
    relations = relations.replace(
        "</Relationships>",
        '<Relationship Id="rId77" Type="http://schemas.microsoft.com/office/2006/relationships/vbaProject" '
        'Target="vbaProject.bin"/></Relationships>',
    )
    return with_parts(
        data,
        {
            "[Content_Types].xml": types,
            "xl/_rels/workbook.xml.rels": relations,
            "xl/vbaProject.bin": bytes(range(256)) * 40,
            "xl/printerSettings/printerSettings1.bin": b"\0\1printer" * 9,
            "customXml/item1.xml": "<a xmlns='urn:x'>one</a>",
            "docProps/thumbnail.wmf": b"\xd7\xcd\xc6\x9a" * 5,
        },
    )


COMMENTS_TYPE = "application/vnd.openxmlformats-officedocument.spreadsheetml.comments+xml"
THREADS = "http://schemas.microsoft.com/office/spreadsheetml/2018/threadedcomments"
NOT_READ_HERE = "[Threaded comment]\n\nYour version allows you to read this threaded comment.\n\nComment:\n    Why 16?"
VML = (
    '<xml xmlns:v="urn:schemas-microsoft-com:vml" xmlns:o="urn:schemas-microsoft-com:office:office" '
    'xmlns:x="urn:schemas-microsoft-com:office:excel"><o:shapelayout v:ext="edit"><o:idmap v:ext="edit" data="1"/>'
    '</o:shapelayout><v:shapetype id="_x0000_t202" coordsize="21600,21600" o:spt="202" '
    'path="m,l,21600r21600,l21600,xe"/>'
    '<v:shape id="_x0000_s1025" type="#_x0000_t202" style="visibility:hidden"><v:textbox><div><br></div></v:textbox>'
    '<x:ClientData ObjectType="Note"><x:Anchor>3, 15, 0, 10, 5, 15, 4, 4</x:Anchor><x:Row>1</x:Row>'
    "<x:Column>2</x:Column></x:ClientData></v:shape></xml>"
)


def beside(
    comments: str | None, *, boxes: str | None = VML, threads: str | None = None, persons: str | None = None
) -> bytes:
    """A package of one sheet with parts of comments beside it, as they are given."""
    found = []
    types = (
        f'<Default Extension="vml" ContentType="{SHEET_TYPE}.vmlDrawing"/>'
        f'<Override PartName="/xl/comments1.xml" ContentType="{COMMENTS_TYPE}"/>'
    )
    more: dict[str, str | bytes | None] = {}
    if comments is not None:
        found.append(("rId1", f"{KINDS}/comments", "../comments1.xml"))
        more["xl/comments1.xml"] = f'<comments xmlns="{MAIN}">{comments}</comments>'
    if boxes is not None:
        found.append(("rId2", f"{KINDS}/vmlDrawing", "../drawings/vmlDrawing1.vml"))
        more["xl/drawings/vmlDrawing1.vml"] = boxes
    if threads is not None:
        kind = "http://schemas.microsoft.com/office/2017/10/relationships"
        found.append(("rId3", f"{kind}/threadedComment", "../threadedComments/threadedComment1.xml"))
        more["xl/threadedComments/threadedComment1.xml"] = (
            f'<ThreadedComments xmlns="{THREADS}">{threads}</ThreadedComments>'
        )
        more["xl/persons/person.xml"] = f'<personList xmlns="{THREADS}">{persons}</personList>'
    more["xl/worksheets/_rels/sheet1.xml.rels"] = (
        f'<Relationships xmlns="{RELATIONS}">'
        + "".join(f'<Relationship Id="{one}" Type="{kind}" Target="{to}"/>' for one, kind, to in found)
        + "</Relationships>"
    )
    drawing = '<legacyDrawing r:id="rId2"/>' if boxes is not None else ""
    data = made(worksheet(PLAIN_ROWS, after=AFTER + drawing), **more)
    with zipfile.ZipFile(io.BytesIO(data)) as package:
        listed = package.read("[Content_Types].xml").decode().replace("</Types>", f"{types}</Types>")
        relations = package.read("xl/_rels/workbook.xml.rels").decode()
    if threads is not None:
        kind = "http://schemas.microsoft.com/office/2017/10/relationships/person"
        relations = relations.replace(
            "</Relationships>", f'<Relationship Id="rId9" Type="{kind}" Target="persons/person.xml"/></Relationships>'
        )
    return with_parts(data, {"[Content_Types].xml": listed, "xl/_rels/workbook.xml.rels": relations})


BY_OPENPYXL: Mapping[str, Callable[[], bytes]] = {
    "busy": lambda: saved(busy_book()),
    "commented": lambda: saved(commented_book()),
    "macros": lambda: with_macros(saved(commented_book())),
}

BUSY_MARKS: Mapping[str, Mapping[Place, Mark]] = {
    "Index & <list>": {
        (0, 0): mark("head"),
        (2, 0): mark("beneath what stands there"),
        (3, 4): mark("blank", BLUE),
        (4, 2): mark("struck out"),
        (6, 3): mark("formula"),
        (41, 0): mark("merged", BLUE, 2),
        (42, 2): mark("merged too", RED, 1),
        (60, 7): mark("far below"),
    },
    "Other": {(1, 1): mark("hidden sheet"), (0, 0): mark("nothing here")},
}

# --- what must be true ------------------------------------------------------------------------------------------

ORDER = (
    "sheetPr", "dimension", "sheetViews", "sheetFormatPr", "cols", "sheetData", "sheetCalcPr", "sheetProtection",
    "protectedRanges", "scenarios", "autoFilter", "sortState", "dataConsolidate", "customSheetViews", "mergeCells",
    "phoneticPr", "conditionalFormatting", "dataValidations", "hyperlinks", "printOptions", "pageMargins",
    "pageSetup", "headerFooter", "rowBreaks", "colBreaks", "customProperties", "cellWatches", "ignoredErrors",
    "smartTags", "drawing", "legacyDrawing", "legacyDrawingHF", "drawingHF", "picture", "oleObjects", "controls",
    "webPublishItems", "tableParts", "extLst",
)  # fmt: skip
"""The children of a worksheet as ECMA-376-1 18.3.1.99 orders them."""


def parsed(text: str | bytes) -> ElementTree.Element:
    """A part as the standard library reads it, which fails where it is not well-formed."""
    return ElementTree.fromstring(text)  # noqa: S314 - of our own making


MAY_CHANGE = re.compile(
    r"\[Content_Types\]\.xml|xl/styles\.xml|xl/worksheets/(?:_rels/)?sheet\d+\.xml(?:\.rels)?|xl/comments.*\.xml|"
    r"xl/(?:drawings/)?[^/]*\.vml|xl/worksheets/comments.*|xl/threadedComments/.*|xl/persons/.*"
)


def raw(path: Path) -> dict[str, bytes]:
    """Each part as it is packed."""
    found = {}
    with zipfile.ZipFile(path) as package, path.open("rb") as stream:
        for entry in package.infolist():
            stream.seek(entry.header_offset + 26)
            lengths = stream.read(4)
            stream.seek(int.from_bytes(lengths[:2], "little") + int.from_bytes(lengths[2:], "little"), 1)
            found[entry.filename] = stream.read(entry.compress_size)
    return found


def assert_untouched(before: Path, after: Path) -> None:
    """Assert that only what marks need was changed, and that everything read from the workbook is what it was."""
    with zipfile.ZipFile(after) as package:
        assert package.testzip() is None
        names = package.namelist()
        assert len(names) == len(set(names))
    packed, copied = raw(before), raw(after)
    assert list(copied)[: len(packed)] == list(packed)
    for name, data in packed.items():
        # A workbook without styles gets some, and refers to them.
        gets_styles = name == "xl/_rels/workbook.xml.rels" and "xl/styles.xml" not in packed
        if not MAY_CHANGE.fullmatch(name) and not gets_styles:
            assert copied[name] == data, name
    one, two = read_file(before), read_file(after)
    assert len(one) == len(two)
    for old, new in zip(one, two, strict=True):
        height, width = len(old.rows), old.width
        assert [row[:width] for row in new.rows[:height]] == old.rows
        assert (new.name, new.visible, new.errors, new.no_value, new.merged, new.struck, new.shapes) == (
            old.name, old.visible, old.errors, old.no_value, old.merged, old.struck, old.shapes,
        )  # fmt: skip
        assert (new.hidden_rows, new.hidden_columns, new.number_formats, new.cells_filled) == (
            old.hidden_rows, old.hidden_columns, old.number_formats, old.cells_filled,
        )  # fmt: skip


def look_of(cell: Any, *, fill: bool) -> tuple[Any, ...]:
    own = cell.font, cell.border, cell.alignment, cell.number_format, cell.protection, cell.quotePrefix
    return tuple(map(repr, (*own, cell.fill) if fill else own))


def assert_marked(
    before: Path, after: Path, marks: Mapping[str, Mapping[Place, Mark]], moved: Mapping[Place, Place] | None = None
) -> None:
    """Assert with another library that the marked cells have fill and comment, and all others are what they were."""
    old, new = openpyxl.load_workbook(before), openpyxl.load_workbook(after)
    has_looks = "xl/styles.xml" in raw(before)
    for sheet in old.worksheets:
        twin = new[sheet.title]
        wanted = {(moved or {}).get(place, place): mark for place, mark in marks.get(sheet.title, {}).items()}
        rows, columns = max(sheet.max_row, twin.max_row), max(sheet.max_column, twin.max_column)
        for row in range(1, rows + 1):
            for column in range(1, columns + 1):
                cell, copy = sheet.cell(row, column), twin.cell(row, column)
                place = row - 1, column - 1
                assert copy.value == cell.value, (sheet.title, cell.coordinate)
                there = cell.comment.text if cell.comment else ""
                if place not in wanted:
                    assert not has_looks or look_of(copy, fill=True) == look_of(cell, fill=True), cell.coordinate
                    assert (copy.comment.text if copy.comment else "") == there
                    continue
                if cell.value is not None and has_looks:
                    assert look_of(copy, fill=False) == look_of(cell, fill=False), cell.coordinate
                colour = copy.fill.start_color.rgb
                mark = wanted[place]
                assert (copy.fill.patternType, colour[2:] in (mark.fill.pale, mark.fill.dark)) == ("solid", True)
                said = "".join(passage.text for passage in mark.text)
                assert copy.comment is not None, cell.coordinate
                assert copy.comment.text.startswith(there)
                assert said in copy.comment.text
                if not there:
                    assert copy.comment.author == "Ferrule"


def assert_in_order(after: Path) -> None:
    """Assert that what stands in each sheet stands in the order of the standard, and rows and cells in theirs."""

    with zipfile.ZipFile(after) as package:
        for name in package.namelist():
            if not re.fullmatch(r"xl/worksheets/sheet\d+\.xml", name):
                continue
            root = parsed(package.read(name))
            names = [child.tag.rpartition("}")[2] for child in root]
            places = [ORDER.index(each) for each in names if each in ORDER]
            assert places == sorted(places), names
            assert names.count("legacyDrawing") <= 1
            numbers = [int(row.get("r", "0")) for row in root.iter() if row.tag.endswith("}row") and row.get("r")]
            assert numbers == sorted(set(numbers))
            for row in root.iter():
                if not row.tag.endswith("}row"):
                    continue
                columns = [openpyxl.utils.cell.coordinate_to_tuple(cell.get("r"))[1] for cell in row if cell.get("r")]
                assert columns == sorted(set(columns))
                if row.get("spans") and columns:
                    low, high = map(int, row.get("spans", "").split(":"))
                    assert low <= min(columns)
                    assert max(columns) <= high
