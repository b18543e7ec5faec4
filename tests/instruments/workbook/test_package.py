"""The look at a package: what is refused before anything reads a value, and what stands beside the sheets."""

import io
import os
import struct
import time
import tracemalloc
import zipfile
import zlib
from collections.abc import Mapping
from pathlib import Path

import pytest

from instruments.workbook.package import (
    LIMITS,
    Contents,
    Limits,
    Package,
    SheetEntry,
    look_at,
    read_contents,
    read_styles,
    rich_texts,
)
from instruments.workbook.plain import BrokenXml
from instruments.workbook.sheet import UnreadableFile
from instruments.workbook.sheet_look import NotPlain
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

ROWS = '<row r="1"><c r="A1"><v>1</v></c></row>'
ONE = parts(worksheet(ROWS))


def saved(folder: Path, data: bytes) -> Path:
    path = folder / "list.xlsx"
    path.write_bytes(data)
    return path


def refusal(folder: Path, data: bytes, limits: Limits = LIMITS) -> str:
    """What is said of a package that cannot be read."""
    with (
        pytest.raises(UnreadableFile) as refused,
        Package(saved(folder, data), file="list.xlsx", limits=limits) as package,
    ):
        look_at(package)
    return str(refused.value)


def without(name: str) -> dict[str, str | bytes]:
    return {part: text for part, text in ONE.items() if part != name}


@pytest.mark.parametrize(
    ("made", "limits", "message"),
    [
        (
            ONE | {f"x{number}": "" for number in range(15)},
            Limits(parts=19),
            "list.xlsx: has 20 parts; at most 19 are read.",
        ),
        (
            ONE | {"x": b"x" * 999_999},
            Limits(unpacked_bytes=1_000_000),
            "list.xlsx: unpacks to 1,001,{} bytes; at most 1,000,000 are read.",
        ),
        (
            ONE | {"xl/media/photo.png": bytes(16_000_001)},
            LIMITS,
            "list.xlsx, part xl/media/photo.png: unpacks to 16,000,001 bytes, more than 200 times its size.",
        ),
        (without("xl/workbook.xml"), LIMITS, "list.xlsx: is a zip file with no workbook in it."),
        (
            {"word/document.xml": "<w/>"},
            LIMITS,
            "list.xlsx: is a text document, not a workbook: copy its table into a workbook.",
        ),
        (
            {"xl/workbook.bin": b"\x83\1"},
            LIMITS,
            "list.xlsx: is a binary workbook (.xlsb): save it as .xlsx.",
        ),
        (
            {"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": "<a/>"},
            LIMITS,
            "list.xlsx: is an OpenDocument spreadsheet (.ods): save it as .xlsx.",
        ),
        (without(FIRST_SHEET), LIMITS, "list.xlsx, sheet 'Sheet1': its part is missing."),
        (
            without("xl/_rels/workbook.xml.rels"),
            LIMITS,
            "list.xlsx, part xl/_rels/workbook.xml.rels: is missing.",
        ),
        (
            ONE | {"xl/workbook.xml": "<workbook>"},
            LIMITS,
            "list.xlsx, part xl/workbook.xml: is not well-formed XML: no element found, line 1, column 11.",
        ),
        (
            ONE | {"xl/workbook.xml": f'<!DOCTYPE a [<!ENTITY b "b">]><workbook xmlns="{MAIN}"/>'},
            LIMITS,
            "list.xlsx, part xl/workbook.xml: has a DOCTYPE, which no workbook needs and which"
            " can make a small file"
            " fill the memory.",
        ),
        (
            ONE | {FIRST_SHEET: '<!DOCTYPE a [<!ENTITY b "b">]>' + worksheet(ROWS).partition("?>")[2].strip()},
            LIMITS,
            "list.xlsx, sheet 'Sheet1': has a DOCTYPE, which no workbook needs and which can"
            " make a small file fill"
            " the memory.",
        ),
        (
            ONE | {"xl/sharedStrings.xml": '<!DOCTYPE a SYSTEM "http://0.0.0.0/x"><sst/>'},
            LIMITS,
            "list.xlsx, part xl/sharedStrings.xml: has a DOCTYPE, which no workbook needs and"
            " which can make a small"
            " file fill the memory.",
        ),
        (
            ONE | {FIRST_SHEET: worksheet(ROWS)[:-30]},
            LIMITS,
            "list.xlsx, sheet 'Sheet1': is not well-formed XML: no element found, line 2, column 200.",
        ),
        (
            ONE | {FIRST_SHEET: "<html><body/></html>"},
            LIMITS,
            "list.xlsx, sheet 'Sheet1': is not what a sheet or its texts look like.",
        ),
        (
            ONE | {FIRST_SHEET: worksheet('<row r="1"><c r="XFE1"><v>1</v></c></row>')},
            LIMITS,
            "list.xlsx, sheet 'Sheet1': has a cell in column XFE, and a sheet ends at column XFD.",
        ),
        (
            parts(worksheet(ROWS), worksheet('<row r="3"><c r="B3"><v>1</v></c></row>')),
            Limits(cells=6),
            "list.xlsx, sheet 'Sheet2': reaches to B3, which is 6 cells, 1 of them filled; at most 5 are read.",
        ),
        (
            ONE | {"xl/styles.xml": styles()},
            Limits(side_part_bytes=100),
            "list.xlsx, part xl/_rels/workbook.xml.rels: is {} bytes long; at most 100 are read.",
        ),
    ],
)
def test_what_is_refused(tmp_path: Path, made: Mapping[str, str | bytes], limits: Limits, message: str) -> None:
    before, _, after = message.partition("{}")
    said = refusal(tmp_path, zipped(made), limits)
    assert said.startswith(before)
    assert said.endswith(after)
    assert "{}" in message or said == message


def test_as_large_as_the_limits_is_read(tmp_path: Path) -> None:
    unpacked = sum(len(text) for text in ONE.values())
    exact = Limits(parts=len(ONE), unpacked_bytes=unpacked, cells=1, side_part_bytes=600)
    with Package(saved(tmp_path, zipped(ONE)), file="list.xlsx", limits=exact) as package:
        assert [sheet.look.height for sheet in look_at(package).sheets] == [1]


@pytest.mark.parametrize("kept", [0.1, 0.5, 0.99])
def test_a_file_cut_short(tmp_path: Path, kept: float) -> None:
    data = zipped(ONE)
    said = refusal(tmp_path, data[: int(len(data) * kept)])
    assert said.startswith("list.xlsx: is damaged or cut short (")


def test_a_flipped_byte_is_noticed(tmp_path: Path) -> None:
    data = bytearray(zipped(ONE, method=zipfile.ZIP_STORED))
    at = data.index(b"<v>1</v>") + 3
    data[at] = ord("7")
    assert refusal(tmp_path, bytes(data)) == (
        f"list.xlsx, part {FIRST_SHEET}: is damaged (Bad CRC-32 for file '{FIRST_SHEET}')."
    )


def test_a_length_that_lies_is_noticed(tmp_path: Path) -> None:
    # The part unpacks to 50 MB and says that it is 400 bytes long, with a check sum to match.
    bomb = worksheet(ROWS + " " * 50_000_000)
    data = bytearray(zipped(ONE | {FIRST_SHEET: bomb}))
    entry = data.rindex(FIRST_SHEET.encode()) - 46
    struct.pack_into("<I", data, entry + 16, zlib.crc32(bomb[:401].encode()))
    struct.pack_into("<I", data, entry + 24, 400)
    tracemalloc.start()
    said = refusal(tmp_path, bytes(data))
    peak = tracemalloc.get_traced_memory()[1]
    tracemalloc.stop()
    assert said == f"list.xlsx, part {FIRST_SHEET}: is damaged (its length is not what the file says)."
    assert peak < 10_000_000


def test_a_list_of_parts_that_would_fill_the_memory(tmp_path: Path) -> None:
    data = bytearray(zipped(ONE))
    struct.pack_into("<I", data, len(data) - 10, 3_000_000)
    assert refusal(tmp_path, bytes(data)) == "list.xlsx: has more parts than a workbook: at most 2,000 are read."


def test_the_same_part_twice(tmp_path: Path) -> None:
    out = io.BytesIO(zipped(ONE))
    with zipfile.ZipFile(out, "a") as package:
        package.writestr("XL/Worksheets/SHEET1.xml", worksheet(""))
    assert refusal(tmp_path, out.getvalue()) == f"list.xlsx, part {FIRST_SHEET}: stands twice in the file."


@pytest.mark.parametrize("bit", [0x01, 0x40])
def test_parts_with_a_password(tmp_path: Path, bit: int) -> None:
    data = bytearray(zipped(ONE))
    data[data.rindex(FIRST_SHEET.encode()) - 46 + 8] |= bit
    assert refusal(tmp_path, bytes(data)) == "list.xlsx: is protected by a password: save it without one."


def test_parts_packed_in_an_odd_way(tmp_path: Path) -> None:
    said = refusal(tmp_path, zipped(ONE, method=zipfile.ZIP_LZMA))
    assert said == "list.xlsx, part [content_types].xml: is packed in a way no workbook is."


def test_two_sheets_of_one_name(tmp_path: Path) -> None:
    made = parts(worksheet(ROWS), worksheet(ROWS))
    made["xl/workbook.xml"] = str(made["xl/workbook.xml"]).replace("Sheet2", "Sheet1")
    assert refusal(tmp_path, zipped(made)) == "list.xlsx, sheet 'Sheet1': there are two of this name."


def test_a_bomb_is_refused_before_it_is_unpacked(tmp_path: Path) -> None:
    data = zipped(ONE | {FIRST_SHEET: worksheet(ROWS * 10_000_000)})
    begun = time.process_time()
    said = refusal(tmp_path, data)
    assert time.process_time() - begun < 1
    assert said.endswith("more than 200 times its size.")


def test_the_list_of_sheets(tmp_path: Path) -> None:
    made = parts(worksheet(ROWS), more={"xl/styles.xml": styles(), "xl/charts.xml": "<chartsheet/>"})
    made["xl/workbook.xml"] = (
        f'<workbook xmlns="{MAIN}" xmlns:r="{KINDS}"><workbookPr date1904="true"/><sheets>'
        '<sheet name="Chart" r:id="a"/><sheet name="A &amp; &quot;B&quot;" state="veryHidden"'
        ' r:id="b"/></sheets>'
        "</workbook>"
    )
    made["xl/_rels/workbook.xml.rels"] = relations(
        ("a", "chartsheet", "charts.xml"),
        ("b", "worksheet", "/xl/worksheets/sheet1.xml"),
        ("c", "styles", "styles.xml"),
    )
    with Package(saved(tmp_path, zipped(made)), file="list.xlsx") as package:
        assert read_contents(package) == Contents(
            sheets=[SheetEntry('A & "B"', False, FIRST_SHEET, 1)], from_1904=True, styles="xl/styles.xml"
        )


@pytest.mark.parametrize(
    ("target", "usual"),
    [
        ("worksheets/sheet1.xml", True),
        ("/xl/worksheets/sheet1.xml", True),
        ("../xl/worksheets/sheet1.xml", False),
        ("./worksheets/sheet1.xml", False),
        (r"worksheets\sheet1.xml", False),
    ],
)
def test_ways_to_a_sheet(tmp_path: Path, target: str, usual: bool) -> None:
    made = ONE | {"xl/_rels/workbook.xml.rels": relations(("rId1", "worksheet", target))}
    with Package(saved(tmp_path, zipped(made)), file="list.xlsx") as package:
        contents = read_contents(package)
        assert (contents.sheets[0].part, contents.usual) == (FIRST_SHEET, usual)


def test_styles_that_show_cells_otherwise(tmp_path: Path) -> None:
    made = ONE | {
        "xl/styles.xml": styles(
            formats={164: "0000", 165: "0.00", 14: "dd&quot;.&quot;mm"},
            fonts='<font><b/></font><font><strike/></font><font><strike val="0"/></font><font><strike val="1"/></font>',
            cells='<xf fontId="0"/><xf fontId="1" numFmtId="0"/><xf fontId="2"/><xf fontId="3"'
            ' numFmtId="164"/>'
            '<xf fontId="9" numFmtId="165"/><xf numFmtId="14" fontId="x"/><xf numFmtId="9"/><xf'
            ' numFmtId="22"/>',
        )
    }
    with Package(saved(tmp_path, zipped(made)), file="list.xlsx") as package:
        assert read_styles(package, "xl/styles.xml") == (
            frozenset({b"1", b"3"}),
            {b"3": "0000", b"5": 'dd"."mm', b"6": "0%", b"7": "m/d/yy h:mm"},
            {},
        )


def test_styles_that_are_filled_with_a_colour(tmp_path: Path) -> None:
    fills = (
        '<fgColor rgb="FFFFFF00"/>',
        '<fgColor rgb="FFFFFFFF"/>',
        '<fgColor theme="0"/>',
        '<fgColor theme="5" tint="0.39997"/><bgColor rgb="FF00FF00"/>',
        '<fgColor indexed="13"/>',
        '<fgColor indexed="64"/>',
    )
    solid = "".join(f'<fill><patternFill patternType="solid">{each}</patternFill></fill>' for each in fills)
    none = '<fill><patternFill patternType="none"><fgColor rgb="FF0000FF"/></patternFill></fill>'
    made = (
        '<styleSheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main">'
        f"<fills>{none}{solid}</fills><cellXfs>"
        + "".join(f'<xf fillId="{number}"/>' for number in (0, 1, 2, 3, 4, 5, 6, 7, 1))
        + "</cellXfs></styleSheet>"
    )
    with Package(saved(tmp_path, zipped(ONE | {"xl/styles.xml": made})), file="list.xlsx") as package:
        assert read_styles(package, "xl/styles.xml") == (
            frozenset(),
            {},
            {b"1": "#FFFF00", b"4": "theme 5 (0.399)", b"5": "colour 13", b"8": "#FFFF00"},
        )


RICH = "<r><rPr><strike/></rPr><t>old</t></r><r><t> new</t></r>"
PLAIN_RICH = "<r><rPr><b/></rPr><t>bold</t></r><r><t>!</t></r>"


@pytest.mark.parametrize("size", [9, 300, 1 << 20])
@pytest.mark.parametrize(
    ("every", "found"),
    [
        (False, {b"3": [("old", True), (" new", None)]}),
        (True, {b"1": [("bold", False), ("!", None)], b"3": [("old", True), (" new", None)]}),
    ],
)
def test_texts_with_runs(every: bool, found: Mapping[bytes, object], size: int) -> None:
    part = texts("<t>a</t>", PLAIN_RICH, "", RICH, "<t>&lt;strike/></t>").replace("<si></si>", "<si/>").encode()
    pieces = [part[:70], *(part[at : at + size] for at in range(70, len(part), size))]
    assert rich_texts(pieces, every=every) == (found, 5)


@pytest.mark.parametrize("part", ["<x:sst/>", texts("<t><![CDATA[a]]></t>"), "<!-- --><sst/>"])
def test_texts_spelt_otherwise(part: str) -> None:
    with pytest.raises(NotPlain):
        rich_texts([part.encode()], every=False)


def test_a_text_that_does_not_end() -> None:
    with pytest.raises(BrokenXml, match="has a text of more than 4 MB"):
        rich_texts([b"<sst><si><t>", *[b"x" * (1 << 20)] * 6], every=False)


def commented(*found: str, authors: str = "<author>R. Quill</author><author/>") -> str:
    return (
        f'<comments xmlns="{MAIN}"><authors>{authors}</authors><commentList>{"".join(found)}</commentList></comments>'
    )


def beside(folder: Path, kinds: tuple[tuple[str, str, str], ...], more: Mapping[str, str], **frame: str) -> object:
    made = parts(worksheet(ROWS, **frame), more={"xl/worksheets/_rels/sheet1.xml.rels": relations(*kinds), **more})
    with Package(saved(folder, zipped(made)), file="list.xlsx") as package:
        sheet = look_at(package).sheets[0]
        return sheet.comments, sheet.shapes, sheet.notes


def test_comments_with_their_authors(tmp_path: Path) -> None:
    part = commented(
        '<comment ref="B2" authorId="0"><text><r><t>Range to be</t></r><r><rPr><b/></rPr><t'
        ' xml:space="preserve"> agreed'
        "</t></r><rPh><t>no</t></rPh></text></comment>",
        '<comment ref="B3" authorId="1"><text>\n  <t>no author</t>\n</text></comment>',
        '<comment ref="B4" authorId="7"><text><t>R_x002E_</t></text></comment>',
        '<comment ref="B5" authorId="0"><text><t>R. Quill:\nhas it in the text</t></text></comment>',
        '<comment ref="B6" authorId="0"><text><t> </t></text></comment>',
        '<comment ref="ZZZZ1" authorId="0"><text><t>nowhere</t></text></comment>',
    )
    assert beside(tmp_path, (("r1", "comments", "../comments1.xml"),), {"xl/comments1.xml": part}) == (
        {
            (1, 1): "R. Quill: Range to be agreed",
            (2, 1): "no author",
            (3, 1): "R.",
            (4, 1): "R. Quill:\nhas it in the text",
        },
        0,
        [],
    )


def test_threads_take_the_place_of_their_stand_in(tmp_path: Path) -> None:
    space = "http://schemas.example/threads"
    made = {
        "xl/comments1.xml": commented(
            '<comment ref="B2" authorId="0"><text><t>[Threaded comment]</t></text></comment>',
            authors="<author>tc={0}</author>",
        ),
        "xl/threads/t1.xml": f'<ThreadedComments xmlns="{space}"><threadedComment ref="B2"'
        f' personId="p1"><text>Is it 4 bar?'
        '</text></threadedComment><threadedComment ref="B2" personId="p2"><text>Yes.</text></threadedComment>'
        "</ThreadedComments>",
        "xl/persons/person.xml": f'<personList xmlns="{space}"><person displayName="A. Reed" id="p1"/></personList>',
        "xl/_rels/workbook.xml.rels": relations(
            ("rId1", "worksheet", "worksheets/sheet1.xml"), ("p", "person", "persons/person.xml")
        ),
    }
    kinds = (("r1", "comments", "../comments1.xml"), ("r2", "threadedComment", "../threads/t1.xml"))
    assert beside(tmp_path, kinds, made) == ({(1, 1): "A. Reed: Is it 4 bar?\nYes."}, 0, [])


def test_shapes_are_counted(tmp_path: Path) -> None:
    drawing = (
        '<d:wsDr xmlns:d="urn:d">'
        + "<d:twoCellAnchor><d:sp/></d:twoCellAnchor><d:oneCellAnchor/><d:absoluteAnchor/>" * 2
        + "</d:wsDr>"
    )
    found = beside(
        tmp_path,
        (("r1", "drawing", "../drawings/drawing1.xml"),),
        {"xl/drawings/drawing1.xml": drawing},
        after='<drawing r:id="r1"/>',
    )
    assert found == ({}, 6, [])


def test_what_stands_beside_a_sheet_and_is_damaged_is_noted(tmp_path: Path) -> None:
    kinds = (("r1", "comments", "../comments1.xml"), ("r2", "drawing", "../drawings/drawing1.xml"))
    assert beside(tmp_path, kinds, {"xl/comments1.xml": "<comments>"}, after='<drawing r:id="r2"/>') == (
        {},
        0,
        [
            "comments not read: part xl/comments1.xml is not well-formed XML: no element found, line 1, column 11",
            "drawing not read: part xl/drawings/drawing1.xml is missing",
        ],
    )


def test_the_look_keeps_no_file_open(tmp_path: Path) -> None:
    before = len(os.listdir("/proc/self/fd"))
    refusal(tmp_path, zipped(without(FIRST_SHEET)))
    refusal(tmp_path, zipped({"a": "b"}))
    refusal(tmp_path, b"PK\3\4")
    assert len(os.listdir("/proc/self/fd")) == before


def test_a_part_full_of_equal_texts_is_no_bomb(tmp_path: Path) -> None:
    made = ONE | {"xl/media/photo.png": bytes(16_000_000)}
    with Package(saved(tmp_path, zipped(made)), file="list.xlsx") as package:
        assert "xl/media/photo.png" in package


@pytest.mark.parametrize(
    ("part", "place", "broken"),
    [
        (FIRST_SHEET, "sheet 'Sheet1'", ("<c ", "<<c ")),
        (FIRST_SHEET, "sheet 'Sheet1'", ("</v>", "/v>")),
        (FIRST_SHEET, "sheet 'Sheet1'", ("</c>", "")),
        (FIRST_SHEET, "sheet 'Sheet1'", ("</worksheet>", "</worksheet")),
        ("xl/sharedStrings.xml", "part xl/sharedStrings.xml", ("</t>", "/t>")),
        ("xl/sharedStrings.xml", "part xl/sharedStrings.xml", ("</sst>", "")),
    ],
)
def test_xml_that_the_value_reader_would_read_wrongly(
    tmp_path: Path, part: str, place: str, broken: tuple[str, str]
) -> None:
    made = parts(
        worksheet('<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1"><v>5</v></c></row>'), shared=texts("<t>Tag</t>")
    )
    damaged = str(made[part]).replace(*broken, 1)
    assert damaged != made[part]
    said = refusal(tmp_path, zipped(made | {part: damaged}))
    assert said.startswith(f"list.xlsx, {place}: is not well-formed XML: ")
