"""Boxes of comments: numbered apart from all shapes, beside their cell, and as large as their text."""

import re

import pytest

from instruments.workbook.annotate.boxes import Numbers, lines_in, with_boxes
from instruments.workbook.annotate.sheet import Grid
from instruments.workbook.plain import BrokenXml
from tests.instruments.workbook.annotate.shapes import VML, parsed


@pytest.mark.parametrize(
    ("drawings", "first"),
    [
        ([], 1025),
        (['<o:idmap v:ext="edit" data="1"/>'], 2049),
        (["<o:idmap v:ext='edit' data='3, 7,2'/>"], 8193),
        (['<o:idmap data="2"/>', '<o:idmap data="5"/>'], 6145),
        (['<v:shape id="_x0000_s5130">'], 6145),
        (['<v:shape id="x" o:spid="_x0000_s2049">'], 3073),
        (['<v:shape id="_x0000_i1025">'], 2049),
        (['<o:idmap data=""/>', '<o:idmap data="999999999999"/>'], 1025),
        ([f'<o:idmap v:ext="edit" data="{",".join(map(str, range(1, 200)))}"/>'], 204_801),
    ],
)
def test_numbers_are_free(drawings: list[str], first: int) -> None:
    numbers = Numbers()
    for drawing in drawings:
        numbers.note([drawing.encode()])
    cut = Numbers()
    for drawing in drawings:
        cut.note(bytes([each]) for each in drawing.encode())
    found = numbers.take(3)
    assert found == cut.take(3) == (first, [first // 1024])
    assert numbers.take(1023) == (first + 1024, [first // 1024 + 1])
    assert numbers.take(1024) == (first + 2048, [first // 1024 + 2, first // 1024 + 3])


def joined(
    data: bytes | None,
    new: dict[tuple[int, int], str],
    longer: dict[tuple[int, int], str],
    afresh: dict[tuple[int, int], str],
    *,
    grid: Grid | None = None,
) -> bytes:
    counted = [{place: lines_in(text) for place, text in texts.items()} for texts in (new, longer, afresh)]
    return b"".join(with_boxes(data, *counted, grid=grid or Grid(), numbers=Numbers())())


def anchors(drawing: bytes) -> list[list[int]]:
    return [[int(number) for number in each.split(",")] for each in re.findall("<x:Anchor>(.*?)<", drawing.decode())]


def drawn(text: str = "x", place: tuple[int, int] = (9, 3), grid: Grid | None = None) -> list[int]:
    made = joined(None, {place: text}, {}, {}, grid=grid)
    parsed(made)
    (found,) = anchors(made)
    return found


def height_px(anchor: list[int], row_px: int = 20) -> int:
    return (anchor[6] * row_px + anchor[7]) - (anchor[2] * row_px + anchor[3])


def test_a_box_stands_beside_its_cell() -> None:
    left, left_px, top, top_px, right, right_px, bottom, _ = drawn()
    assert (left, left_px, top, top_px) == (4, 15, 8, 8)
    assert (right - left) * 64 + right_px - left_px == 340
    assert bottom >= top


def test_a_box_is_as_high_as_its_text() -> None:
    lines = [height_px(drawn("x\n" * number)) for number in (0, 1, 5, 10)]
    assert lines == [29, 44, 104, 179]
    assert height_px(drawn("word " * 100)) == 9 * 15 + 14
    assert height_px(drawn("x\n" * 5_000)) == 32 * 15 + 14


def test_a_box_is_measured_in_the_sheets_own_columns_and_rows() -> None:
    wide = Grid(column_px=64, row_px=20, columns={4: 300, 5: 0, 6: 0}, rows={8: 100, 9: 0})
    assert drawn(grid=wide) == [4, 15, 8, 8, 7, 55, 8, 37]


@pytest.mark.parametrize("place", [(0, 0), (1_048_575, 16_383), (1_048_570, 16_380)])
def test_a_box_lies_on_the_sheet(place: tuple[int, int]) -> None:
    found = drawn("x\n" * 20, place)
    assert 0 <= found[0] <= found[4] <= 16_383
    assert 0 <= found[2] <= found[6] <= 1_048_575


@pytest.mark.parametrize("data", [b"", b"<html></html>", VML.encode("utf-16")])
def test_what_is_no_drawing(data: bytes) -> None:
    with pytest.raises(BrokenXml):
        joined(data, {(0, 0): "x"}, {}, {})


def test_boxes_that_stand_there_grow_or_are_drawn_afresh() -> None:
    grown = joined(VML.encode(), {}, {(1, 2): "x\n" * 3}, {})
    assert anchors(grown) == [[3, 15, 0, 10, 5, 15, 7, 18]]
    afresh = joined(VML.encode(), {}, {}, {(1, 2): "x\n" * 3})
    assert anchors(afresh) == [drawn("x\n" * 3, (1, 2))]
    other = joined(VML.encode(), {}, {(1, 3): "x"}, {(2, 2): "x"})
    assert other == VML.encode()
