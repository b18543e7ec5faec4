"""Damaged and hostile workbooks: marked, or refused with a reason, and soon; never a broken copy."""

import io
import random
import time
import zipfile
from collections.abc import Callable
from pathlib import Path
from xml.parsers import expat

import pytest

from instruments.workbook.annotate.marked_copy import MarkedCopy, write_marked_copy
from instruments.workbook.reader import read_file
from instruments.workbook.sheet import UnreadableFile
from tests.instruments.workbook.annotate.shapes import (
    BUSY_MARKS,
    BY_HAND,
    BY_OPENPYXL,
    MARKS,
    PLAIN_ROWS,
    VML,
    beside,
    made,
    mark,
    repacked,
)
from tests.instruments.workbook.packages import worksheet, zipped

USER = "<authors><author>T. Brand</author></authors><commentList>{}</commentList>"
COMMENT = '<comment ref="C2" authorId="0"><text><r><t>why</t></r></text></comment>'
SHAPES = {shape: (make, {"Sheet1": MARKS}) for shape, make in BY_HAND.items()} | {
    shape: (make, BUSY_MARKS) for shape, make in BY_OPENPYXL.items()
}
SHAPES["beside"] = (lambda: beside(USER.format(COMMENT)), {"Sheet1": MARKS})
TOKENS = (
    b'"', b"<", b">", b"/", b"&", b"<!--", b"-->", b" ", b"'", b"=", b'<c r="A1"/>', b"</row>", b'<row r="2">', b"\0",
    b"\xff", b' s="9"', b'<legacyDrawing r:id="rId2"/>', b"<fills/>", b"<cellXfs/>", b"<author>Ferrule</author>",
    b'<mergeCells><mergeCell ref="A1:C9"/></mergeCells>', b'authorId="7"', b"9999999", b"-1", b"<![CDATA[x]]>",
)  # fmt: skip


def damaged(data: bytes, chance: random.Random) -> bytes:
    """The package with a few of its bytes changed, doubled or gone, or a part left out."""
    with zipfile.ZipFile(io.BytesIO(data)) as package:
        parts = {name: package.read(name) for name in package.namelist()}
    for _ in range(chance.choice((1, 1, 1, 2, 4))):
        name = chance.choice(list(parts))
        part = parts[name]
        at = chance.randrange(len(part) + 1)
        end = min(len(part), at + chance.choice((1, 2, 5, 20, 200)))
        what = chance.randrange(6)
        if what == 5 and len(parts) > 1:
            del parts[name]
        else:
            middle = (b"", chance.choice(TOKENS), chance.choice(TOKENS) + part[at:end], part[at:end] * 2, b"")[what % 5]
            parts[name] = part[:at] + middle + (part[end:] if what != 4 else b"")
    return zipped(parts)


def well_formed(data: bytes) -> bool:
    try:
        expat.ParserCreate().Parse(data, True)
    except expat.ExpatError:
        return False
    return True


@pytest.mark.parametrize("seed", range(12))
def test_mutants(seed: int, tmp_path: Path) -> None:
    """What can be read afterwards as well as before says the same; what was well-formed still is."""
    chance = random.Random(seed)
    before, after = tmp_path / "before.xlsx", tmp_path / "after.xlsx"
    for _ in range(12):
        make, marks = SHAPES[chance.choice(list(SHAPES))]
        before.write_bytes(damaged(make(), chance))
        try:
            write_marked_copy(before, after, marks, author="Ferrule", mended=mark("mended"))
        except UnreadableFile:
            continue
        with zipfile.ZipFile(before) as old, zipfile.ZipFile(after) as new:
            for name in new.namelist():
                if not name.endswith(".vml") and (name not in old.namelist() or well_formed(old.read(name))):
                    assert well_formed(new.read(name)), name
        try:
            sheets = read_file(before)
        except UnreadableFile:
            continue
        for one, two in zip(sheets, read_file(after), strict=True):
            assert [row[: one.width] for row in two.rows[: len(one.rows)]] == one.rows
            assert (two.errors, two.merged, two.cells_filled) == (one.errors, one.merged, one.cells_filled)


MANY = 300_000
BLANKS = " " * 2_000_000


def merged() -> bytes:
    ranges = "".join(f'<mergeCell ref="A{row}:C{row + 900}"/>' for row in range(1, 50_000))
    return made(worksheet(PLAIN_ROWS, after=f"<mergeCells>{ranges}</mergeCells>"))


def in_rows(old: str, new: str) -> bytes:
    return made(worksheet(PLAIN_ROWS.replace(old, new)))


def in_boxes(text: str) -> bytes:
    return beside(USER.format(COMMENT), boxes=VML.replace("</xml>", f"{text}</xml>"))


def in_comments(text: str) -> bytes:
    return beside(USER.format(text))


@pytest.mark.parametrize(
    ("make", "marked"),
    [
        (lambda: in_rows('<c r="A2"', f'<c{BLANKS}r="A2"'), True),
        (lambda: in_rows('<row r="2"', f'<row{BLANKS}r="2"'), True),
        (merged, True),
        (lambda: in_boxes('<x:ClientData ObjectType="Note"' * MANY), True),
        (lambda: in_boxes('<x:ClientData ObjectType="Note">' * MANY), True),
        (lambda: in_boxes("<x:ClientData " + 'ObjectType="Note" ' * MANY), True),
        (lambda: in_boxes("<o:idmap " + "data=" * MANY), True),
        (lambda: in_comments(COMMENT.replace("C2", "B9") * (MANY // 3)), True),
        (lambda: in_comments("<comment/>" * 310_000), False),
        (lambda: in_comments(f'<comment ref="C2"><text>{"<r/>" * 310_000}</text></comment>'), False),
    ],
    ids=range(10),
)
def test_hostile_parts_take_no_long_time(make: Callable[[], bytes], *, marked: bool, tmp_path: Path) -> None:
    before = tmp_path / "before.xlsx"
    before.write_bytes(repacked(make(), zipfile.ZIP_STORED))  # packed, they are refused for their ratio
    since = time.process_time()
    found = write_marked_copy(before, tmp_path / "after.xlsx", {"Sheet1": {(1, 2): mark()}}, author="Ferrule")
    assert time.process_time() - since < 15
    assert found == MarkedCopy(cells=int(marked), sheets=int(marked), unmarked=found.unmarked)
    assert bool(found.unmarked) is not marked
