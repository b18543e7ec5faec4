"""The look at one sheet's part: extents and what is rare in it."""

import re
from collections.abc import Iterator

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.workbook.plain import BrokenXml, rewritten
from instruments.workbook.sheet_look import (
    MAX_BLOCK,
    Edit,
    Looks,
    NotPlain,
    SheetLook,
    altered,
    blocks,
    first_misfit,
    look,
    one_of,
    runs_of,
    text_of,
)
from tests.instruments.workbook.packages import MAIN, worksheet

TINY = {"dense": 1_000, "room": 100_000}


def cut(part: str | bytes, size: int = 1 << 20) -> Iterator[bytes]:
    data = part.encode() if isinstance(part, str) else part
    return (data[at : at + size] for at in range(0, len(data), size))


def seen(rows: str, looks: Looks | None = None, *, before: str = "", after: str = "", size: int = 1 << 20) -> SheetLook:
    return look(cut(worksheet(rows, before=before, after=after), size), looks or Looks(), **TINY)


@pytest.mark.parametrize("size", [1, 3, 11, 64, 1 << 20])
@pytest.mark.parametrize(
    ("rows", "kinds"),
    [
        ("", "head rows tail"),
        ('<row r="1"/>', "head rows tail"),
        ('<row r="1"><c r="A1"><v>1</v></c></row><row r="2"/><row r="4"><c r="B4"><v>2</v></c></row>', None),
    ],
)
def test_blocks_are_the_part_again_and_whole_rows(rows: str, kinds: str | None, size: int) -> None:
    part = worksheet(rows, before="<cols/>", after="<mergeCells/>")
    found = list(blocks(cut(part, size)))
    assert b"".join(text for _, text in found).decode() == part
    if kinds:
        assert " ".join(kind for kind, _ in found) == kinds
    for kind, text in found:
        if kind == "rows" and text:
            assert text.startswith(b"<row ")
            assert text.endswith((b"</row>", b"/>"))


@pytest.mark.parametrize("data", ["<sheetData/>", "<sheetData />", ""])
def test_a_sheet_without_rows(data: str) -> None:
    part = f'<worksheet xmlns="{MAIN}"><cols><col min="2" max="3" hidden="1"/></cols>{data}</worksheet>'
    assert look(cut(part), Looks(), **TINY) == SheetLook(hidden_columns={1, 2})


@pytest.mark.parametrize(
    "part",
    [
        pytest.param(worksheet("").replace("<worksheet", "<!-- --><worksheet"), id="comment before"),
        pytest.param(worksheet("<!-- -->"), id="comment"),
        pytest.param(worksheet('<row r="1"><c r="A1" t="str"><v><![CDATA[a]]></v></c></row>'), id="CDATA"),
        pytest.param(worksheet('<row r="1"><?x y?></row>'), id="instruction"),
        pytest.param(worksheet("<row r='1'/>"), id="single quotes in a row"),
        pytest.param(worksheet('<row r="1"><c r="A1" t=\'e\'><v>#REF!</v></c></row>'), id="single quotes in a cell"),
        pytest.param(worksheet('<row r="1"><c r="A1" t = "e"><v>#REF!</v></c></row>'), id="blanks round ="),
        pytest.param(worksheet('<row r="1"><c t="e" r="A1"><v>#REF!</v></c></row>'), id="address last"),
        pytest.param(worksheet('<row r="1"><c><v>1</v></c></row>'), id="cell without address"),
        pytest.param(worksheet("<row><c/></row>"), id="row without number"),
        pytest.param(worksheet('<row r="1"><c r="a1"><v>1</v></c></row>'), id="small letters"),
        pytest.param(worksheet('<row r="01"><c r="A1"><v>1</v></c></row>'), id="leading zero"),
        pytest.param(worksheet('<row\nr="1"/>'), id="line end in a tag"),
        pytest.param(worksheet('<row r="1"><c r="A1" x="a>b" t="e"><v>#REF!</v></c></row>'), id="> in an attribute"),
        pytest.param(worksheet("").replace("</sheetData>", "</sheetData >"), id="blank in an end tag"),
        pytest.param(worksheet("").replace("worksheet", "x:worksheet"), id="prefix"),
        pytest.param(worksheet("").replace("xmlns:r=", f'xmlns:x="{MAIN}" xmlns:r='), id="prefix for later"),
        pytest.param(worksheet("").encode("utf-16"), id="UTF-16"),
        pytest.param(worksheet('<row r="1"/>').partition("</sheetData>")[0], id="cut short"),
    ],
)
def test_what_is_spelt_otherwise_is_noticed(part: str | bytes) -> None:
    with pytest.raises(NotPlain):
        look(cut(part), Looks(), **TINY)


@pytest.mark.parametrize(
    ("rows", "extent"),
    [
        ('<row r="3"><c r="C3"><v>1</v></c></row>', (3, 3, False)),
        ('<row r="3"><c r="C3"/><c r="D3" s="4" /></row>', (0, 0, False)),
        (
            '<row r="1048576"><c r="XFD1048576" s="1"/></row><row r="2"><c r="B2"><v>1</v></c></row>',
            (2, 2, False),
        ),
        (
            '<row r="2"><c r="F2"><v>1</v></c><c r="A2"><v>1</v></c></row><row r="1"><c r="B1"><v>1</v></c></row>',
            (2, 6, False),
        ),
        # 1,000 rows by 100 columns is the room there is.
        ('<row r="1000"><c r="CV1000"><v>1</v></c></row>', (1000, 100, False)),
        # Blank stretches of 5,000 rows and of 500 columns, and one more.
        (
            '<row r="2"><c r="A2"><v>1</v></c></row><row r="5002"><c r="A5002"><v>1</v></c></row>',
            (5002, 1, False),
        ),
        (
            '<row r="2"><c r="A2"><v>1</v></c></row><row r="5003"><c r="A5003"><v>1</v></c></row>',
            (2, 1, True),
        ),
        ('<row r="1"><c r="A1"><v>1</v></c></row><row r="9"><c r="SG9"><v>1</v></c></row>', (9, 501, False)),
        ('<row r="1"><c r="A1"><v>1</v></c></row><row r="9"><c r="SH9"><v>1</v></c></row>', (9, 1, True)),
        (
            '<row r="1"><c r="A1"><v>1</v></c></row><row r="1048576"><c r="XFD1048576"><v>1</v></c></row>',
            (1, 1, True),
        ),
    ],
)
def test_how_far_filled_cells_reach(rows: str, extent: tuple[int, int, bool]) -> None:
    found = seen(rows)
    assert (found.height, found.width, found.far) == extent


@pytest.mark.parametrize(
    ("rows", "reason"),
    [
        (
            '<row r="1048576"><c r="XFD1048576"><v>1</v></c></row>',
            "reaches to XFD1048576, which is 17,179,869,184 cells, 1 of them filled; at most 100,000 are read",
        ),
        (
            '<row r="1000"><c r="CW1000"><v>1</v></c></row>',
            "reaches to CW1000, which is 101,000 cells, 1 of them filled; at most 100,000 are read",
        ),
        (
            '<row r="1"><c r="A1"><v>1</v></c></row>'
            + "".join(f'<row r="{row}"><c r="A{row}"><v>1</v></c></row>' for row in range(30_000, 31_001)),
            "has 1,001 filled cells after a blank stretch, beyond A1: move them up to the list,"
            " or to a sheet of"
            " their own",
        ),
        ('<row r="2"><c r="B9"><v>1</v></c></row>', "has a cell of another row, B9, in row 2"),
        ('<row r="5"><c r="B55"><v>1</v></c></row>', "has a cell of another row, B55, in row 5"),
        ('<row r="1"><c r="B1"><v>1</v></c><c r="B1"><v>2</v></c></row>', "has cell B1 twice"),
        ('<row r="7"><c r="B7"><v>1</v></c></row><row r="7"/>', "has row 7 twice"),
        (
            '<row r="1048577"><c r="A1048577"><v>1</v></c></row>',
            "has a row 1048577, and a sheet ends at row 1048576",
        ),
        (
            '<row r="99999999999999999999999"/>',
            "has a row 99999999999999999999, and a sheet ends at row 1048576",
        ),
        (
            '<row r="1"><c r="XFE1"><v>1</v></c></row>',
            "has a cell in column XFE, and a sheet ends at column XFD",
        ),
        (
            '<row r="1"><c r="ABCDEFGH1"><v>1</v></c></row>',
            "has a cell in column ABCDEFGH, and a sheet ends at column XFD",
        ),
    ],
)
def test_what_no_sheet_can_be(rows: str, reason: str) -> None:
    with pytest.raises(BrokenXml) as refused:
        seen(rows)
    assert str(refused.value) == reason


def test_rows_of_many_shapes_are_counted_as_others() -> None:
    # More shapes of rows than are kept at a time; a far column among them is still found.
    rows = "".join(
        f'<row r="{row}">'
        + "".join(f'<c r="{letter}{row}"><v>1</v></c>' for bit, letter in enumerate("ABCDEFGHIJKLM") if row >> bit & 1)
        + ('<c r="ZZZ1"><v>1</v></c>'.replace("ZZZ1", f"WWW{row}") if row == 17 else "")
        + "</row>"
        for row in range(1, 5000)
    )
    found = look(cut(worksheet(rows)), Looks(), dense=1_000, room=100_000)
    assert (found.height, found.width, found.far) == (4999, 13, True)


@pytest.mark.parametrize("size", [13, 1 << 20])
def test_errors_and_formulas_without_a_result(size: int) -> None:
    found = seen(
        '<row r="1"><c r="A1" t="e"><v>#REF!</v></c><c r="B1" s="3" t="e"><f>X1</f><v>#N/A</v></c>'
        '<c r="C1" t="e"/><c r="D1" t="e"><v>#SPILL!</v></c>'
        '<c r="E1" t="inlineStr"><is><t> t="e"</t></is></c><c r="F1" t="str"><v>#N/A</v></c></row>'
        '<row r="2"><c r="A2"><f>B1</f></c><c r="B2"><f>B1</f><v/></c><c r="C2"><f>B1</f><v></v></c>'
        '<c r="D2"><f>B1</f><v>0</v></c><c r="E2" t="str"><f>B1</f><v></v></c><c r="F2"'
        ' t="str"><f>B1</f><v/></c>'
        '<c r="G2" t="str"><f>B1</f></c><c r="H2"><f t="shared" si="0"/><v>1</v></c>'
        '<c r="I2"><f t="shared" si="0"/></c><c r="J2"><f t="shared" si="0" /> <v /></c>'
        '<c r="K2"><f>[1]Other!A1</f><v>1</v></c><c r="L2"><v>5</v></c></row>',
        size=size,
    )
    assert found.errors == {(0, 0): "#REF!", (0, 1): "#N/A", (0, 3): "#SPILL!"}
    assert found.no_value == {(1, 0), (1, 1), (1, 2), (1, 6), (1, 8), (1, 9)}
    assert found.elsewhere == 1


STRUCK = Looks(
    struck=frozenset({b"3"}),
    formats={b"4": "d-mmm", b"5": "0000", b"44": "0%"},
    dates=frozenset({b"4"}),
    texts={
        b"0": [("old", True), (" new", False)],
        b"1": [("all ", True), ("gone", True)],
        b"2": [("as the cell", None), (" and not", False)],
        b"10": [("kept", False), (" too", False)],
    },
)


@pytest.mark.parametrize(
    ("cell", "struck", "partly"),
    [
        ('<c r="A1" s="3"><v>1</v></c>', True, None),
        ('<c r="A1" s="3"/>', False, None),
        ('<c r="A1" s="3"></c>', False, None),
        ('<c r="A1" s="33"><v>1</v></c>', False, None),
        ('<c r="A1" t="s"><v>0</v></c>', False, " new"),
        ('<c r="A1"><v>0</v></c>', False, None),
        ('<c r="A1" t="s"><v>1</v></c>', True, None),
        ('<c r="A1" t="s"><v>2</v></c>', False, None),
        ('<c r="A1" s="3" t="s"><v>2</v></c>', False, " and not"),
        ('<c r="A1" s="3" t="s"><v>7</v></c>', True, None),
        ('<c r="A1" s="3" t="s"><v>10</v></c>', False, None),
        ('<c r="A1" t="inlineStr" s="3"><is><t>a</t></is></c>', True, None),
        (
            '<c r="A1" t="inlineStr"><is><r><rPr><strike/></rPr><t>a</t></r><r><t> b</t></r></is></c>',
            False,
            " b",
        ),
        ('<c r="A1" t="inlineStr"><is><r><rPr><b/><strike val="1"/></rPr><t>a</t></r></is></c>', True, None),
        (
            '<c r="A1" t="inlineStr"><is><r><rPr><strike val="0"/></rPr><t>a</t></r><r><t> b</t></r></is></c>',
            False,
            None,
        ),
        ('<c r="A1" t="inlineStr"><is><t>&lt;strike/></t></is></c>', False, None),
        ('<c r="A1" t="str" s="3"><f>B1</f><v>a</v></c>', True, None),
    ],
)
def test_what_is_struck_out(cell: str, struck: bool, partly: str | None) -> None:
    found = seen(f'<row r="1" s="3" customFormat="1">{cell}</row>', STRUCK)
    assert (found.struck, found.partly_struck) == (
        {(0, 0)} if struck else set(),
        {(0, 0): partly} if partly else {},
    )


def test_formats_are_those_of_numbers() -> None:
    found = seen(
        '<row r="1"><c r="A1" s="4"><v>45000</v></c><c r="B1" s="5" t="n"><v>34</v></c><c'
        ' r="C1" s="44"><v>0.5</v></c>'
        '<c r="D1" s="4" t="s"><v>0</v></c><c r="E1" s="4"/><c r="F1" s="5" t="str"><v>1</v></c>'
        '<c r="G1" s="5" t="b"><v>1</v></c><c r="H1" s="1"><v>1</v></c><c r="I1" s="5"><f>A1</f></c></row>',
        STRUCK,
    )
    assert found.number_formats == {(0, 0): "d-mmm", (0, 1): "0000", (0, 2): "0%"}
    assert found.edits == []


def test_what_the_value_reader_cannot_take_is_edited_out() -> None:
    part = worksheet(
        '<row r="1"><c r="A1" s="4"><v>-3</v></c><c r="B1" s="4"><v>2958465</v></c><c r="C1"'
        ' s="4"><v>1e20</v></c>'
        '<c r="D1" t="e"><v>#SPILL!</v></c></row><row r="2"><c r="A2" t="e"><v>#REF!</v></c></row>'
    )
    for size in (17, 1 << 20):
        found = look(cut(part, size), STRUCK, **TINY)
        assert b"".join(altered(cut(part, size), found, far=[])).decode() == part.replace('A1" s="4"', 'A1"').replace(
            'C1" s="4"', 'C1"'
        ).replace("#SPILL!", "")


def test_far_cells_are_taken_out_and_kept() -> None:
    near = '<row r="1"><c r="A1"><v>1</v></c><c r="B1" s="2"/>'
    part = worksheet(
        near + '<c r="ABC1" t="e"><v>#SPILL!</v></c></row>'
        '<row r="99999"><c r="A99999" t="inlineStr"><is><t>x</t></is></c></row>'
    )
    found = look(cut(part), Looks(), **TINY)
    far: list[tuple[tuple[int, int], bytes]] = []
    assert b"".join(altered(cut(part), found, far=far)).decode() == worksheet(near + '</row><row r="99999"></row>')
    assert far == [
        ((0, 730), b' t="e"><v></v></c>'),
        ((99998, 0), b' t="inlineStr"><is><t>x</t></is></c>'),
    ]


def test_edits_outside_of_blocks_are_not_lost() -> None:
    part = worksheet('<row r="1"><c r="A1"><v>12</v></c></row>')
    at = part.index("12")
    made = SheetLook(edits=[Edit(at, at + 2, b"345"), Edit(0, 0, b"")])
    assert b"".join(altered(cut(part, 5), made, far=[])).decode() == part.replace("12", "345")


def test_hidden_rows_and_columns_and_merged_ranges() -> None:
    found = seen(
        '<row r="1"/><row r="2" hidden="1"/><row r="3" spans="1:2" hidden="true" ht="0"/><row r="4" hidden="0"/>',
        before='<sheetViews><sheetView workbookViewId="0"/></sheetViews><cols><col min="1"'
        ' max="1" width="9"/>'
        '<col min="2" max="3" hidden="1"/><col min="3" max="4" hidden="true"/><col min="6"'
        ' max="6" width="0"/>'
        '<col min="7" max="99999" hidden="0"/></cols>',
        after='<mergeCells count="3"><mergeCell ref="A1:B2"/><mergeCell ref="D4"/><mergeCell ref="B2:A1"/>'
        '<mergeCell ref="C1:C99"/></mergeCells><drawing r:id="rId7"/>',
    )
    assert found == SheetLook(
        hidden_rows={1, 2},
        hidden_columns={1, 2, 3, 5},
        merged=[(0, 0, 1, 1), (0, 2, 98, 2)],
        drawing="rId7",
    )


def test_many_hidden_columns_take_no_time() -> None:
    found = seen("", before="<cols>" + '<col min="1" max="16384" hidden="1"/>' * 20_000 + "</cols>")
    assert len(found.hidden_columns) == 16_384


def test_rows_in_two_places_are_refused() -> None:
    with pytest.raises(BrokenXml, match="has its rows in two places"):
        seen("", after='<sheetData><row r="1"/></sheetData>')


def test_what_stands_round_the_rows_must_be_well_formed() -> None:
    with pytest.raises(BrokenXml, match="is not well-formed XML: mismatched tag"):
        seen("", after="<mergeCells></mergeCell>")


@pytest.mark.parametrize("beginning", ["", '<row r="1"><c r="A1">', "</sheetData>"])
def test_what_does_not_end_is_given_up(beginning: str) -> None:
    head = worksheet("").partition("<sheetData>")[0] + ("<sheetData>" if beginning else "")
    pieces = (piece for _ in range(1) for piece in (head.encode(), beginning.encode(), *[b"x" * (1 << 20)] * 70))
    with pytest.raises(BrokenXml, match=f"has more than {MAX_BLOCK >> 20} MB (before its|in one|after its) row"):
        look(pieces, Looks(), **TINY)


@given(st.sets(st.integers(min_value=0, max_value=99_999), min_size=1, max_size=60), st.integers(0, 99_999))
def test_a_pattern_for_numbers_takes_these_alone(numbers: set[int], other: int) -> None:
    pattern = re.compile(one_of([b"%d" % number for number in numbers]))
    assert all(pattern.fullmatch(b"%d" % number) for number in numbers)
    assert bool(pattern.fullmatch(b"%d" % other)) == (other in numbers)


def test_a_pattern_for_many_numbers_takes_any() -> None:
    assert one_of([b"%d" % number for number in range(501)]) == b"[0-9]+"


@pytest.mark.parametrize(
    ("raw", "text"),
    [
        (b"&lt;&gt;&amp;&quot;&apos;&#176;&#xB0;&#9999999;&none;&", "<>&\"'°°\ufffd&none;&"),
        (b"a\r\nb\rc", "a\nb\nc"),
        (b"&amp;lt;", "&lt;"),
        (b"caf\xff", "caf\ufffd"),
    ],
)
def test_text_of_raw_bytes(raw: bytes, text: str) -> None:
    assert text_of(raw) == text


def test_runs_of_a_rich_text() -> None:
    assert runs_of(
        b'<r><t xml:space="preserve">a </t></r>\n<r><rPr><sz val="9"/><strike/></rPr><t>b</t></r>'
        b"<r><rPr><b/></rPr><t>c</t></r><r><rPr/><t>d</t></r><r><t/></r><rPh><t>no</t></rPh>"
    ) == [("a ", None), ("b", True), ("c", False), ("d", False), ("", None)]


@pytest.mark.parametrize(
    ("cell", "reason"),
    [
        ('<c r="B2" t="n"><v>abc</v></c>', "'abc' is stored as a number"),
        ('<c r="B2"><v> 12</v></c>', "' 12' is stored as a number"),
        ('<c r="B2"><v>1_2</v></c>', "'1_2' is stored as a number"),
        ('<c r="B2" t="s"><v>3</v></c>', "refers to a text '3' that the file has not"),
        ('<c r="B2" t="s"><v>-1</v></c>', "refers to a text '-1' that the file has not"),
        ('<c r="B2" t="zz"><v>1</v></c>', "is of a kind 'zz', which no cell is"),
        ('<c r="B2" t="s"><v>2</v></c>', None),
        ('<c r="B2"><v>1e5</v></c>', None),
        ('<c r="B2" t="str"><v>abc</v></c>', None),
    ],
)
def test_the_cell_that_stops_the_value_reader_is_found(cell: str, reason: str | None) -> None:
    part = worksheet(f'<row r="1"><c r="A1"><v>1</v></c></row><row r="2"><c r="A2"/>{cell}</row>')
    assert first_misfit(cut(part), text_count=3) == (None if reason is None else ("B2", reason))


def test_rewritten_sheets_look_the_same() -> None:
    rows = (
        '<row r="1" hidden="1"><c r="A1" s="3" t="s"><v>2</v></c><c r="C1" t="e"><v>#REF!</v></c></row>'
        '<row r="3"><c r="B3" s="4"><f>A1</f></c><c r="D3" t="inlineStr"><is><r><rPr><strike/>'
        "</rPr><t>x</t></r></is></c></row>"
    )
    usual = seen(rows, STRUCK, after='<mergeCells><mergeCell ref="A1:B2"/></mergeCells>')
    prefixed = re.sub(
        r"<(/?)([a-zA-Z])",
        r"<\1x:\2",
        worksheet(rows, after='<mergeCells><mergeCell ref="A1:B2"/></mergeCells>').partition("?>")[2],
    ).replace("xmlns=", "xmlns:x=")
    with pytest.raises(NotPlain):
        look(cut(prefixed), STRUCK, **TINY)
    assert look(rewritten(cut(prefixed)), STRUCK, **TINY) == usual


def test_rows_most_of_whose_cells_are_filled_with_a_colour() -> None:
    rows = "".join(
        f'<row r="{number}">'
        + "".join(
            f'<c r="{column}{number}" s="{style}"' + (f"><v>{number}</v></c>" if column == "A" else "/>")
            for column, style in zip("ABCD", styles, strict=True)
        )
        + "</row>"
        for number, styles in enumerate(("0000", "3333", "3330", "3300", "3344", "4444", "3000"), 1)
    )
    found = look(cut(worksheet(rows)), Looks(fills={b"3": "#FFFF00", b"4": "theme 5"}), dense=1_000, room=100_000)
    assert found.coloured_rows == {1: "#FFFF00", 2: "#FFFF00", 5: "theme 5"}
