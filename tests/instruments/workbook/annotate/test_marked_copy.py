"""A marked copy of workbooks of many shapes: marked where it should be, and the same everywhere else."""

import re
import shutil
import subprocess
import zipfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

import openpyxl
import pytest

from config import bootstrap
from instruments.workbook.annotate.comments import Passage
from instruments.workbook.annotate.marked_copy import Mark, MarkedCopy, write_marked_copy
from instruments.workbook.annotate.styles import Fill
from instruments.workbook.reader import read_file
from instruments.workbook.sheet import UnreadableFile
from tests.instruments.workbook.annotate.shapes import (
    BLUE,
    BUSY_MARKS,
    BY_HAND,
    BY_OPENPYXL,
    MARKS,
    NOT_READ_HERE,
    PLAIN,
    PLAIN_ROWS,
    RED,
    VML,
    assert_in_order,
    assert_marked,
    assert_untouched,
    beside,
    commented_book,
    made,
    mark,
    parsed,
    raw,
    saved,
    with_macros,
    with_parts,
)
from tests.instruments.workbook.packages import worksheet

Convert = Callable[[list[Path], Path], None]

LISTS = sorted((bootstrap.ROOT / "fixtures").glob("*/*.xlsx"))


@pytest.mark.parametrize("shape", BY_HAND)
def test_by_hand(shape: str, tmp_path: Path) -> None:
    before, after = tmp_path / "before.xlsx", tmp_path / "after.xlsx"
    before.write_bytes(BY_HAND[shape]())
    assert write_marked_copy(before, after, {"Sheet1": MARKS}, author="Ferrule") == MarkedCopy(cells=8, sheets=1)
    assert_untouched(before, after)
    assert_in_order(after)
    if shape not in ("UTF-16", "strict"):  # which openpyxl cannot read at all
        assert_marked(before, after, {"Sheet1": MARKS})


@pytest.mark.parametrize("shape", BY_OPENPYXL)
def test_by_openpyxl(shape: str, tmp_path: Path) -> None:
    before, after = tmp_path / "before.xlsm", tmp_path / "after.xlsm"
    before.write_bytes(BY_OPENPYXL[shape]())
    assert write_marked_copy(before, after, BUSY_MARKS, author="Ferrule") == MarkedCopy(cells=9, sheets=2)
    assert_untouched(before, after)
    assert_in_order(after)
    assert_marked(before, after, BUSY_MARKS, moved={(42, 2): (41, 0)})


@pytest.mark.parametrize("path", LISTS, ids=lambda path: path.stem)
def test_lists(path: Path, tmp_path: Path) -> None:
    after = tmp_path / path.name
    marks = {
        sheet.name: {
            (row, column): mark() for row in range(0, len(sheet.rows), 7) for column in range(0, sheet.width, 3)
        }
        for sheet in read_file(path)
    }
    found = write_marked_copy(path, after, marks, author="Ferrule")
    assert found.unmarked == ()
    assert_untouched(path, after)
    assert_in_order(after)


# --- comments that stand there ----------------------------------------------------------------------------------

OF_THE_USER = (
    '<authors><author>T. Brand</author></authors><commentList><comment ref="{}" authorId="0">{}</comment></commentList>'
)
SAID = "RNG02 fault\nmore &lt;b&gt; &amp; such"
ADDED = "\n\nFerrule:\n" + SAID


def copied(folder: Path, data: bytes, marks: dict[tuple[int, int], Mark], **more: Any) -> tuple[MarkedCopy, Path]:
    before = folder / "before.xlsx"
    before.write_bytes(data)
    after = folder / "after.xlsx"
    return write_marked_copy(before, after, {"Sheet1": marks}, author="Ferrule", **more), after


def part(path: Path, name: str) -> str:
    with zipfile.ZipFile(path) as package:
        return package.read(name).decode()


def said_in(comments: str) -> dict[str, str]:
    """The texts of a part of comments, by cell, markup as it stands there."""
    found = re.findall(r'<(?:\w+:)?comment ref="([^"]*)"[^>]*>(.*?)</(?:\w+:)?comment>', comments, re.DOTALL)
    return {cell: "".join(re.findall(r"<(?:\w+:)?t(?: [^>]*)?>([^<]*)</", text)) for cell, text in found}


@pytest.mark.parametrize(
    ("text", "stands"),
    [
        ("<text><t>Why 16?</t></text>", "Why 16?"),
        ('<text><t xml:space="preserve"> Why 16? </t></text>', " Why 16? "),
        ("<text><r><rPr><b/></rPr><t>Why</t></r><r><t> 16?</t></r></text>", "Why 16?"),
        ("<text><r><t>Why</t></r><rPh sb='0' eb='1'><t>W</t></rPh><phoneticPr fontId='1'/></text>", "Why"),
        ("<text/>", ""),
        ("", ""),
    ],
)
def test_beneath_a_comment_that_stands_there(text: str, stands: str, tmp_path: Path) -> None:
    data = beside(OF_THE_USER.format("C2", text))
    found, after = copied(tmp_path, data, {(1, 2): mark()})
    assert found == MarkedCopy(cells=1, sheets=1)
    comments = part(after, "xl/comments1.xml")
    said = re.sub(r"<rPh.*?</rPh>", "", comments)
    assert said_in(said) == {"C2": stands + ADDED}
    assert comments.count("<comment ") == 1
    assert "<author>T. Brand</author><author>Ferrule</author>" in comments
    parsed(comments)
    # The box is made higher by what is added, and nothing else of the drawing is changed.
    boxes = part(after, "xl/drawings/vmlDrawing1.vml")
    (anchor,) = re.findall("<x:Anchor>(.*?)</x:Anchor>", boxes)
    assert anchor.startswith("3, 15, 0, 10, 5, 15, ")
    assert int(anchor.split(", ")[6]) > 4
    assert boxes.replace(anchor, "3, 15, 0, 10, 5, 15, 4, 4") == VML


def test_beside_a_comment_that_stands_there(tmp_path: Path) -> None:
    data = beside(OF_THE_USER.format("C2", "<text><t>Why 16?</t></text>"))
    found, after = copied(tmp_path, data, {(1, 0): mark()})
    assert found == MarkedCopy(cells=1, sheets=1)
    assert said_in(part(after, "xl/comments1.xml")) == {"C2": "Why 16?", "A2": SAID}
    boxes = part(after, "xl/drawings/vmlDrawing1.vml")
    assert re.findall(r'id="_x0000_s(\d+)"', boxes) == ["1025", "2049"]
    assert 'data="1,2"' in boxes
    assert boxes.count("<v:shapetype") == 1
    assert boxes.startswith(VML[: VML.index('1"/>')])


def test_more_boxes_than_one_drawing_is_numbered_for(tmp_path: Path) -> None:
    marks = {(row, 1): mark() for row in range(1, 2501)}
    _, after = copied(tmp_path, beside(OF_THE_USER.format("C2", "<text><t>Why</t></text>")), marks)
    boxes = part(after, "xl/drawings/vmlDrawing1.vml")
    numbers = [int(number) for number in re.findall(r'id="_x0000_s(\d+)"', boxes)]
    clusters = [int(number) for number in re.findall(r'data="([^"]*)"', boxes)[0].split(",")]
    assert len(set(numbers)) == len(numbers) == 2501
    assert clusters == [1, 2, 3, 4]
    assert {number // 1024 for number in numbers} == set(clusters)


def test_comments_without_boxes_get_theirs(tmp_path: Path) -> None:
    _, after = copied(
        tmp_path, beside(OF_THE_USER.format("C2", "<text><t>Why</t></text>"), boxes=None), {(1, 0): mark()}
    )
    boxes = part(after, "xl/drawings/vmlDrawing1.vml")
    assert re.findall(r"<x:Row>(\d+)</x:Row><x:Column>(\d+)</x:Column>", boxes) == [("1", "0"), ("1", "2")]
    assert_in_order(after)


def test_boxes_of_controls_without_comments(tmp_path: Path) -> None:
    control = VML.replace('"Note"', '"Checkbox"')
    found, after = copied(tmp_path, beside(None, boxes=control), {(1, 0): mark()})
    assert found == MarkedCopy(cells=1, sheets=1)
    boxes = part(after, "xl/drawings/vmlDrawing1.vml")
    assert boxes.startswith(control[: control.index("</xml>")].replace('data="1"', 'data="1,2"'))
    assert said_in(part(after, "xl/comments1.xml")) == {"A2": SAID}
    assert part(after, "xl/worksheets/sheet1.xml").count("legacyDrawing") == 1


def test_merged_cells_have_one_comment(tmp_path: Path) -> None:
    data = made(worksheet(PLAIN_ROWS, after='<mergeCells><mergeCell ref="E2:F40"/></mergeCells>'))
    marks = {
        (row, 4 + row % 2): mark(f"said {row // 2}", BLUE if row != 9 else RED, 1 - (row == 9)) for row in range(1, 25)
    }
    found, after = copied(tmp_path, data, marks)
    assert found == MarkedCopy(cells=1, sheets=1)
    said = said_in(part(after, "xl/comments1.xml"))
    assert list(said) == ["E2"]
    # The worst first, each text once, and no more than can be read.
    assert re.findall(r"said \d+", said["E2"]) == [f"said {number}" for number in (4, 0, 1, 2, 3, 5, 6, 7)]
    assert said["E2"].endswith("\n\nand more at 5 of the cells merged here")
    assert openpyxl.load_workbook(after).worksheets[0]["E2"].fill.start_color.rgb[2:] == RED.pale


# --- threads ----------------------------------------------------------------------------------------------------

ROOT_ID, PERSON = "{0C6B1F0A-0000-4000-8000-000000000001}", "{0C6B1F0A-0000-4000-8000-00000000000A}"
THREAD = (
    f'<threadedComment ref="C2" dT="2026-03-04T05:06:07.00" personId="{PERSON}" id="{ROOT_ID}"><text>Why 16?</text>'
    "</threadedComment>"
)
BRAND = f'<person displayName="T. Brand" id="{PERSON}" userId="tb" providerId="None"/>'
STANDS_FOR_THREAD = (
    f'<authors><author>tc={ROOT_ID}</author></authors><commentList><comment ref="C2" authorId="0"><text><t>'
    f"{NOT_READ_HERE}</t></text></comment></commentList>"
)


def test_a_thread_gets_a_reply(tmp_path: Path) -> None:
    data = beside(STANDS_FOR_THREAD, threads=THREAD, persons=BRAND)
    found, after = copied(tmp_path, data, {(1, 2): mark(), (1, 0): mark()})
    assert found == MarkedCopy(cells=2, sheets=1)
    threads = parsed(part(after, "xl/threadedComments/threadedComment1.xml"))
    first, reply = threads
    assert (first.get("id"), "".join(first.itertext())) == (ROOT_ID, "Why 16?")
    assert "".join(reply.itertext()) == "RNG02 fault\nmore <b> & such"
    assert (reply.get("ref"), reply.get("parentId"), reply.get("dT")) == ("C2", ROOT_ID, first.get("dT"))
    person = parsed(part(after, "xl/persons/person.xml"))[1]
    assert (person.get("displayName"), person.get("id")) == ("Ferrule", reply.get("personId"))
    assert said_in(part(after, "xl/comments1.xml")) == {"C2": NOT_READ_HERE + ADDED, "A2": SAID}
    assert read_file(after)[0].comments == {
        (1, 2): "T. Brand: Why 16?\nFerrule: RNG02 fault\nmore <b> & such",
        (1, 0): "Ferrule: RNG02 fault\nmore <b> & such",
    }


# --- a copy of a copy -------------------------------------------------------------------------------------------

GREEN = Fill(pale="C6E7C8", dark="1E5B24")
MENDED = Mark(fill=GREEN, text=(Passage("Mended."),))


def test_a_copy_that_is_marked_again(tmp_path: Path) -> None:
    """What an earlier copy said gives way: where it is said again, and where it is mended."""
    data = beside(OF_THE_USER.format("C2", "<text><t>Why 16?</t></text>"))
    _, once = copied(tmp_path, data, {(1, 2): mark(), (1, 0): mark("first"), (5, 1): mark("stays")}, mended=MENDED)
    found, twice = copied(tmp_path, once.read_bytes(), {(1, 2): mark("new"), (5, 1): mark("stays")}, mended=MENDED)
    assert found == MarkedCopy(cells=2, sheets=1)
    more = "\nmore &lt;b&gt; &amp; such"
    assert said_in(part(twice, "xl/comments1.xml")) == {
        "C2": f"Why 16?\n\nFerrule:\nnew{more}", "A2": "Mended.", "B6": f"stays{more}",
    }  # fmt: skip
    looks = openpyxl.load_workbook(twice).worksheets[0]
    assert [looks[cell].fill.start_color.rgb[2:] for cell in ("C2", "A2", "B6")] == [RED.pale, GREEN.pale, RED.pale]
    assert part(twice, "xl/drawings/vmlDrawing1.vml").count("<v:shape ") == 3
    # Marked again in the same way nothing changes any more, and without marks all of it is mended.
    _, thrice = copied(tmp_path, twice.read_bytes(), {(1, 2): mark("new"), (5, 1): mark("stays")}, mended=MENDED)
    assert raw(thrice)["xl/comments1.xml"] == raw(twice)["xl/comments1.xml"]
    found, last = copied(tmp_path, twice.read_bytes(), {}, mended=MENDED)
    assert found == MarkedCopy(cells=0, sheets=0) or found.sheets == 1
    assert said_in(part(last, "xl/comments1.xml")) == {
        "C2": "Why 16?\n\nFerrule:\nMended.", "A2": "Mended.", "B6": "Mended.",
    }  # fmt: skip


def test_a_thread_that_is_replied_to_again(tmp_path: Path) -> None:
    data = beside(STANDS_FOR_THREAD, threads=THREAD, persons=BRAND)
    _, once = copied(tmp_path, data, {(1, 2): mark("first")}, mended=MENDED)
    _, twice = copied(tmp_path, once.read_bytes(), {(1, 2): mark("second")}, mended=MENDED)
    assert read_file(twice)[0].comments[1, 2] == "T. Brand: Why 16?\nFerrule: second\nmore <b> & such"
    assert part(twice, "xl/persons/person.xml").count("Ferrule") == 2  # one person, by name and by user


# --- what cannot be marked --------------------------------------------------------------------------------------


IT = "it, or a part beside it,"


@pytest.mark.parametrize(
    ("data", "reason"),
    [
        (
            beside(OF_THE_USER.format("C2", "<text>"), boxes=VML),
            IT + " is not well-formed XML: mismatched tag, line 1, ",
        ),
        (
            beside(OF_THE_USER.format("C2", ""), boxes="<html>"),
            IT + " is no drawing of comments that can be added to",
        ),
        (beside("<authors/>"), IT + " is no part of comments"),
        (made(PLAIN, **{"xl/styles.xml": "<styleSheet"}), None),
        (made(PLAIN, **{"[Content_Types].xml": None}), None),
        (made(PLAIN, **{"[Content_Types].xml": "<other/>"}), None),
        (
            beside(OF_THE_USER.format("C2", "")).replace(b"vmlDrawing1", b"vmlDrawing9"),
            "part xl/drawings/vmlDrawing1.vml is missing",
        ),
    ],
)
def test_what_cannot_be_marked_is_said(data: bytes, reason: str | None, tmp_path: Path) -> None:
    if reason is None:
        with pytest.raises(UnreadableFile):
            copied(tmp_path, data, {(1, 0): mark()})
        return
    found, after = copied(tmp_path, data, {(1, 0): mark()})
    assert (found.cells, found.sheets, len(found.unmarked)) == (0, 0, 1)
    sheet, said = found.unmarked[0]
    assert sheet == "Sheet1"
    assert said.startswith(reason)
    # What cannot be marked whole is not marked at all.
    assert raw(after) == raw(tmp_path / "before.xlsx")


def test_a_sheet_that_is_not_there(tmp_path: Path) -> None:
    before, after = tmp_path / "before.xlsx", tmp_path / "after.xlsx"
    before.write_bytes(made(PLAIN))
    found = write_marked_copy(before, after, {"Gone": MARKS}, author="Ferrule")
    assert found == MarkedCopy(cells=0, sheets=0, unmarked=(("Gone", "it is not in the workbook any more"),))


def test_a_signature_is_said(tmp_path: Path) -> None:
    data = with_parts(made(PLAIN), {"_xmlsignatures/sig1.xml": "<Signature/>"})
    found, after = copied(tmp_path, data, {(1, 0): mark()})
    assert found == MarkedCopy(cells=1, sheets=1, signed=True)
    assert raw(after)["_xmlsignatures/sig1.xml"] == raw(tmp_path / "before.xlsx")["_xmlsignatures/sig1.xml"]


def test_nothing_to_mark_is_the_same_package(tmp_path: Path) -> None:
    data = with_macros(saved(commented_book()))
    found, after = copied(tmp_path, data, {})
    assert found == MarkedCopy(cells=0, sheets=0)
    assert raw(after) == raw(tmp_path / "before.xlsx")


# --- length and kind of text ------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "stands", "shown"),
    [
        ("x" * 40_000, 0, 32_000),
        ("\U0001f4a5" * 20_000, 0, 32_000),
        ("x" * 40_000, 20_000, 12_000),
        ("x" * 40_000, 31_900, 0),
        ("short", 31_000, 5),
    ],
)
def test_a_comment_has_room(text: str, stands: int, shown: int, tmp_path: Path) -> None:
    user = OF_THE_USER.format("C2", f"<text><t>{'u' * stands}</t></text>")
    data = beside(user) if stands else made(PLAIN)
    _, after = copied(tmp_path, data, {(1, 2): Mark(fill=RED, text=(Passage(text),))})
    said = said_in(part(after, "xl/comments1.xml"))["C2"]
    ours = said.removeprefix("u" * stands).removeprefix("\n\nFerrule:\n")
    length = len(ours.encode("utf-16-le")) // 2
    assert shown - 100 <= length <= shown
    assert ours.endswith("... (cut)") == (0 < shown < len(text.encode("utf-16-le")) // 2)
    assert openpyxl.load_workbook(after).worksheets[0]["C2"].fill.start_color.rgb[2:] == RED.pale


def test_text_is_text(tmp_path: Path) -> None:
    odd = '<a href="x">&amp; ]]> \x07\ud800 =cmd|"/c"!A1'
    _, after = copied(tmp_path, made(PLAIN), {(1, 2): Mark(fill=RED, text=(Passage(odd),))})
    comments = parsed(part(after, "xl/comments1.xml"))
    assert "".join(comments.itertext()).endswith('<a href="x">&amp; ]]>  =cmd|"/c"!A1')


# --- another program --------------------------------------------------------------------------------------------


@pytest.fixture(scope="module")
def convert(tool: Callable[[str, str], str], tmp_path_factory: pytest.TempPathFactory) -> Convert:
    """Open workbooks with LibreOffice and save them again under another folder."""
    program = tool("soffice", "libreoffice-calc")
    profile = tmp_path_factory.mktemp("profile").as_uri()

    def run(paths: list[Path], folder: Path) -> None:
        command = [program, f"-env:UserInstallation={profile}", "--headless", "--convert-to", "xlsx", "--outdir"]
        done = subprocess.run([*command, str(folder), *map(str, paths)], capture_output=True, text=True, check=False)
        assert done.returncode == 0, done.stdout + done.stderr

    return run


def comments_of(path: Path) -> dict[tuple[str, str], str]:
    book = openpyxl.load_workbook(path)
    return {
        (sheet.title, cell.coordinate): cell.comment.text
        for sheet in book.worksheets
        for row in sheet.iter_rows()
        for cell in row
        if cell.comment
    }


def test_opens_in_another_program(convert: Convert, tmp_path: Path) -> None:
    """Every shape, marked and saved again by LibreOffice, has the values that the list has there, and our comments."""
    folder = tmp_path / "before"
    folder.mkdir()
    marked = {}
    commented = OF_THE_USER.format("C2", "<text><t>Why 16?</t></text>")
    more = {
        "beside": lambda: beside(commented),
        "without boxes": lambda: beside(commented, boxes=None),
        "thread": lambda: beside(STANDS_FOR_THREAD, threads=THREAD, persons=BRAND),
    }
    for number, (shape, make) in enumerate((BY_HAND | more | BY_OPENPYXL).items()):
        path = folder / f"{number}.xlsx"
        path.write_bytes(make())
        marks = BUSY_MARKS if shape in BY_OPENPYXL else {"Sheet1": MARKS}
        marked[path.name] = shape, marks
        write_marked_copy(path, tmp_path / path.name, marks, author="Ferrule")
    for path in LISTS:
        if path.stem not in ("instrument-list", "water-works", "wasser-ea"):
            continue  # a second each
        shutil.copy(path, folder)
        marks = {
            sheet.name: {(row, column): mark() for row in range(3, 30, 5) for column in (0, 2)}
            for sheet in read_file(path)
            if sheet.visible
        }
        marked[path.name] = path.stem, marks
        write_marked_copy(path, tmp_path / path.name, marks, author="Ferrule")
    convert([tmp_path / name for name in marked], tmp_path / "new")
    for name, (shape, marks) in marked.items():
        old, new = read_file(folder / name), read_file(tmp_path / "new" / name)
        for before, after in zip(old, new, strict=True):
            width, height = before.width, len(before.rows)
            for row, column in before.no_value:  # worked out when it was opened
                before.rows[row][column] = after.rows[row][column]
            assert [row[:width] for row in after.rows[:height]] == before.rows, shape
            assert (after.name, after.merged, after.shapes) == (before.name, before.merged, before.shapes), shape
        assert set(comments_of(tmp_path / "new" / name)) >= set(comments_of(tmp_path / name)) - MERGED, shape
        assert len(comments_of(tmp_path / "new" / name)) >= sum(map(len, marks.values())) - 1, shape


MERGED = {("Sheet1", "F1")}


def test_a_workbook_by_another_program(convert: Convert, tmp_path: Path) -> None:
    """What LibreOffice itself has written, comments of the user's among it, marked."""
    before, after = tmp_path / "other" / "busy.xlsx", tmp_path / "after.xlsx"
    (tmp_path / "busy.xlsx").write_bytes(BY_OPENPYXL["commented"]())
    convert([tmp_path / "busy.xlsx"], tmp_path / "other")
    assert write_marked_copy(before, after, BUSY_MARKS, author="Ferrule") == MarkedCopy(cells=9, sheets=2)
    assert_untouched(before, after)
    assert_in_order(after)
    assert_marked(before, after, BUSY_MARKS, moved={(42, 2): (41, 0)})
    convert([after], tmp_path / "again")
    said = comments_of(tmp_path / "again" / "after.xlsx")
    assert said["Index & <list>", "A3"].startswith("Ask the vendor\nabout this")
    assert "beneath what stands there" in said["Index & <list>", "A3"]
    assert said["Index & <list>", "A5"] == "as built"
