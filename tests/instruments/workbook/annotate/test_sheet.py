"""Where in a sheet's bytes a mark goes: among cells, among rows, and among what stands behind the rows."""

import re

import pytest

from instruments.workbook.annotate.sheet import Frame, cell_edits, frame_of, legacy_drawing, parsed_frame
from instruments.workbook.annotate.splice import spliced
from instruments.workbook.plain import BrokenXml
from instruments.workbook.sheet_look import NotPlain
from tests.instruments.workbook.annotate.shapes import ORDER, parsed
from tests.instruments.workbook.packages import KINDS, MAIN, STRICT, worksheet

MORE = "http://schemas.openxmlformats.org/markup-compatibility/2006"
X14AC = "http://schemas.microsoft.com/office/spreadsheetml/2009/9/ac"


def as_excel_writes(rows: str) -> str:
    return (
        '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\r\n'
        f'<worksheet xmlns="{MAIN}" xmlns:r="{KINDS}" xmlns:mc="{MORE}" mc:Ignorable="x14ac" xmlns:x14ac="{X14AC}">'
        f'<sheetFormatPr defaultRowHeight="15" x14ac:dyDescent="0.25"/><sheetData>{rows}</sheetData></worksheet>'
    )


def frame(sheet: str) -> Frame:
    return frame_of(lambda: (sheet.encode(),), lambda: sheet.encode())


def marked(sheet: str, wanted: dict[int, list[int]]) -> str:
    """The sheet with each cell's style s made 100 + s."""
    found = frame(sheet)
    edits = cell_edits(found, (sheet.encode(),), wanted, lambda row, column, style: 100 + style)
    return b"".join(spliced((sheet.encode(),), edits)).decode()


def rows_of(sheet: str) -> str:
    found = re.search("<sheetData>(.*)</sheetData>", sheet, re.DOTALL)
    assert found is not None
    return found[1]


SHARED = '<row r="1"><c r="A1"><f t="shared" ref="A1:A2" si="0">B1</f><v>1</v></c></row><row r="2"><c r="A2"{}>{}'
OF_IT = '<f t="shared" si="0"/><v>2</v></c></row>'
CELLS = [
    (
        '<row r="1"><c r="A1"><v>1</v></c></row>',
        {0: [0]},
        '<row r="1"><c r="A1" s="100"><v>1</v></c></row>',
    ),
    (
        '<row r="1"><c r="A1" s="7"/></row>',
        {0: [0]},
        '<row r="1"><c r="A1" s="107"/></row>',
    ),
    (
        '<row r="1"><c r="A1" s="7" t="s"><v>0</v></c></row>',
        {0: [0]},
        '<row r="1"><c r="A1" s="107" t="s"><v>0</v></c></row>',
    ),
    (
        '<row r="1"><c r="A1" t="s" s="7" cm="1"><v>0</v></c></row>',
        {0: [0]},
        '<row r="1"><c r="A1" t="s" s="107" cm="1"><v>0</v></c></row>',
    ),
    (
        '<row r="1"><c r="B1"/></row>',
        {0: [0, 2]},
        '<row r="1"><c r="A1" s="100"/><c r="B1"/><c r="C1" s="100"/></row>',
    ),
    (
        '<row r="1" x14ac:dyDescent="0.25"/>',
        {0: [26]},
        '<row r="1" x14ac:dyDescent="0.25"><c r="AA1" s="100"/></row>',
    ),
    (
        '<row r="1" s="5"/>',
        {0: [0]},
        '<row r="1" s="5"><c r="A1" s="100"/></row>',
    ),
    (
        '<row r="1" s="5" customFormat="1"/>',
        {0: [0]},
        '<row r="1" s="5" customFormat="1"><c r="A1" s="105"/></row>',
    ),
    (
        '<row r="1" s="5" customFormat="1"><c r="A1"/></row>',
        {0: [0]},
        '<row r="1" s="5" customFormat="1"><c r="A1" s="100"/></row>',
    ),
    (
        '<row r="1" spans="2:3"><c r="B1"/></row>',
        {0: [1, 2]},
        '<row r="1" spans="2:3"><c r="B1" s="100"/><c r="C1" s="100"/></row>',
    ),
    (
        '<row r="1" spans="2:3"><c r="B1"/></row>',
        {0: [0, 3]},
        '<row r="1" spans="1:4"><c r="A1" s="100"/><c r="B1"/><c r="D1" s="100"/></row>',
    ),
    (
        '<row r="1" spans="2:3"/>',
        {0: [5]},
        '<row r="1" spans="2:6"><c r="F1" s="100"/></row>',
    ),
    (
        '<row r="3"/>',
        {1: [0], 4: [1]},
        '<row r="2"><c r="A2" s="100"/></row><row r="3"/><row r="5"><c r="B5" s="100"/></row>',
    ),
    (
        "",
        {2: [1]},
        '<row r="3"><c r="B3" s="100"/></row>',
    ),
    (
        SHARED.format("", OF_IT),
        {1: [0]},
        SHARED.format(' s="100"', OF_IT),
    ),
    (
        '<row r="1"><c r="A1"/></row>',
        {},
        '<row r="1"><c r="A1"/></row>',
    ),
]


@pytest.mark.parametrize(("rows", "wanted", "after"), CELLS)
def test_cells(rows: str, wanted: dict[int, list[int]], after: str) -> None:
    sheet = as_excel_writes(rows)
    assert marked(sheet, wanted) == as_excel_writes(after)
    edits = cell_edits(parsed_frame(sheet.encode()), (sheet.encode(),), wanted, lambda row, column, style: 100 + style)
    assert b"".join(spliced((sheet.encode(),), edits)).decode() == as_excel_writes(after)


def test_a_blank_cell_has_the_look_of_its_column() -> None:
    columns = '<cols><col min="2" max="3" style="4"/><col min="5" max="5" width="9"/></cols>'
    sheet = worksheet('<row r="1"/>', before=columns)
    assert rows_of(marked(sheet, {0: [0, 1, 2, 4], 1: [2]})) == (
        '<row r="1"><c r="A1" s="100"/><c r="B1" s="104"/><c r="C1" s="104"/><c r="E1" s="100"/></row>'
        '<row r="2"><c r="C2" s="104"/></row>'
    )


@pytest.mark.parametrize(
    "rows",
    [
        '<row r="1"><c s="1" r="A1"/></row>',
        '<row r="1"><c r="A2"/></row>',
        "<row r='1'/>",
        '<row r="1"><!-- <c r="A1"/> --></row>',
        '<row r="1"><c r="A1"/>',
    ],
)
def test_what_the_pattern_does_not_know_is_left_to_the_parser(rows: str) -> None:
    with pytest.raises(NotPlain):
        marked(worksheet(rows), {0: [0, 1]})


@pytest.mark.parametrize(
    "rows", ['<row r="0"/>', '<row r="1048577"/>', '<row r="1"><c r="A2"/></row>', '<row r="1"><c r="7"/></row>']
)
def test_what_no_sheet_has_is_refused(rows: str) -> None:
    sheet = worksheet(rows).encode()
    with pytest.raises(BrokenXml):
        cell_edits(parsed_frame(sheet), (sheet,), {0: [0]}, lambda row, column, style: 1)


def test_merged_cells_are_seen_as_the_first_of_them() -> None:
    ranges = "".join(f'<mergeCell ref="{each}"/>' for each in ("B2:C5", "E1:E2", "nonsense", "G9:F8"))
    found = frame(worksheet('<row r="1"/>', after=f"<mergeCells>{ranges}</mergeCells>"))
    places = [(0, 0), (1, 1), (4, 2), (5, 2), (1, 4), (8, 5)]
    assert found.anchors(places) == {(1, 1): (1, 1), (4, 2): (1, 1), (1, 4): (0, 4)}


BEHIND = {
    "oleObjects": "<oleObjects/>",
    "tableParts": "<tableParts/>",
    "extLst": "<extLst/>",
    "legacyDrawingHF": '<legacyDrawingHF r:id="rId9"/>',
    "picture": '<picture r:id="rId9"/>',
    "controls": '<mc:AlternateContent><mc:Choice Requires="x14"><controls/></mc:Choice></mc:AlternateContent>',
}
BEFORE = "<sheetProtection/><mergeCells/><dataValidations/><pageMargins/><drawing r:id='rId1'/>"


@pytest.mark.parametrize("sheet", [worksheet('<row r="1"/>', after=BEFORE), worksheet("", after=BEFORE), worksheet("")])
def test_boxes_stand_last_where_nothing_stands_behind(sheet: str) -> None:
    assert placed(sheet) == sheet.replace("</worksheet>", "|</worksheet>")


@pytest.mark.parametrize("behind", BEHIND)
@pytest.mark.parametrize("fast", [True, False])
def test_boxes_have_their_place(behind: str, *, fast: bool) -> None:
    before = '<mc:AlternateContent><mc:Choice Requires="x"><sheetPr/></mc:Choice></mc:AlternateContent>'
    sheet = worksheet('<row r="1"/>', before=before, after=BEFORE + BEHIND[behind]).replace(
        "<worksheet ", '<worksheet xmlns:mc="' + MORE + '" ', 1
    )
    assert placed(sheet, fast=fast) == sheet.replace(BEHIND[behind], f"|{BEHIND[behind]}")


def placed(sheet: str, *, fast: bool = True) -> str:
    """The sheet with a bar where its boxes are put."""
    found = frame(sheet) if fast else parsed_frame(sheet.encode())
    assert found.plain is fast
    edit = legacy_drawing(found, "rId5", KINDS)
    made = b"".join(spliced((sheet.encode(),), [edit])).decode()
    parsed(made)
    tag = f'<legacyDrawing xmlns:r="{KINDS}" r:id="rId5"/>'
    assert made.count(tag) == 1
    return made.replace(tag, "|")


def test_the_order_is_known() -> None:
    assert ORDER.index("drawing") < ORDER.index("legacyDrawing") < ORDER.index("legacyDrawingHF")


def test_what_stands_around_the_rows() -> None:
    before = (
        '<sheetFormatPr defaultRowHeight="30" defaultColWidth="10"/><cols><col min="2" max="3" width="20"/>'
        '<col min="4" max="4" hidden="1"/></cols>'
    )
    sheet = worksheet(
        '<row r="2" ht="60"/><row r="3" hidden="1" ht="15"/>', before=before, after='<legacyDrawing r:id="rId3"/>'
    )
    found = frame(sheet)
    cell_edits(found, (sheet.encode(),), {8: [0]}, lambda row, column, style: 1)
    assert (found.strict, found.drawing) == (False, "rId3")
    assert [found.grid.width(column) for column in range(5)] == [70, 140, 140, 0, 70]
    assert [found.grid.height(row) for row in range(4)] == [40, 80, 0, 40]
    assert frame(worksheet("").replace(MAIN, STRICT)).strict
    assert frame(worksheet("")).drawing is None
