"""The boxes that comments are shown in: a VML drawing, new or with more boxes than before.

VML as spreadsheets write it is not always well-formed, so what stands there is looked through by pattern.
"""

from __future__ import annotations

import functools
import math
import re
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from typing import Final

from instruments.workbook.annotate.sheet import Grid
from instruments.workbook.annotate.splice import Edit, spliced
from instruments.workbook.plain import BrokenXml, is_utf8
from instruments.workbook.sheet import MAX_COLUMNS, MAX_ROWS

__all__ = ["Numbers", "lines_in", "with_boxes"]

_WIDTH_PX: Final = 340.0
_LINE_PX: Final = 15.0
_EDGES_PX: Final = 14.0
_LETTERS: Final = 56
"""Letters in a line of the box, of Tahoma 9."""
_MOST_LINES: Final = 32

_IDMAP: Final = re.compile(rb"""<o:idmap\b[^<>]{0,500}?\bdata\s*=\s*["']([0-9, ]*)["']""")
_SHAPE_NUMBER: Final = re.compile(rb"""_x0000_[si]([0-9]{1,9})\b""")
_CLIENT: Final = re.compile(
    rb"""<x:ClientData\b[^<>]{0,200}?\bObjectType\s{0,9}=\s{0,9}["']Note["'][^<>]{0,200}>([^<]*+(?:<(?!/?x:ClientData)[^<]*+)*+)</x:ClientData>"""
)
_ROW: Final = re.compile(rb"<x:Row>\s*([0-9]{1,7})\s*</x:Row>")
_COLUMN: Final = re.compile(rb"<x:Column>\s*([0-9]{1,5})\s*</x:Column>")
_ANCHOR: Final = re.compile(rb"<x:Anchor>\s*([0-9]{1,7}(?:\s*,\s*[0-9]{1,7}){7})\s*</x:Anchor>")

_AT_ONCE: Final = 500

_LONGEST: Final = 2_000
"""Bytes in which a number, or the list of a drawing's clusters, stands."""

_A_CLUSTER: Final = 1024
"""Numbers of shapes that a drawing takes at once."""

_EMPTY: Final = (
    b'<xml xmlns:v="urn:schemas-microsoft-com:vml" xmlns:o="urn:schemas-microsoft-com:office:office"'
    b' xmlns:x="urn:schemas-microsoft-com:office:excel">'
    b'<o:shapelayout v:ext="edit"><o:idmap v:ext="edit" data=""/></o:shapelayout></xml>'
)
_SHAPE_TYPE: Final = (
    b'<v:shapetype id="_x0000_t202" coordsize="21600,21600" o:spt="202" path="m,l,21600r21600,l21600,xe">'
    b'<v:stroke joinstyle="miter"/><v:path gradientshapeok="t" o:connecttype="rect"/></v:shapetype>'
)

Place = tuple[int, int]


class Numbers:
    """Numbers of shapes that no drawing of the workbook has yet."""

    def __init__(self) -> None:
        self._highest = 0

    def note(self, pieces: Iterable[bytes]) -> None:
        """Take note of the numbers that a drawing has."""
        kept = b""
        for piece in pieces:
            data = kept + piece
            for listed in _IDMAP.finditer(data):
                for number in listed[1].split(b","):
                    if number.strip().isdigit() and len(number) < 8:
                        self._highest = max(self._highest, int(number))
            for shape in _SHAPE_NUMBER.finditer(data):
                self._highest = max(self._highest, int(shape[1]) // _A_CLUSTER)
            # What is cut in two here is whole in the next.
            kept = data[-_LONGEST:]

    def take(self, count: int) -> tuple[int, list[int]]:
        """Return the first of `count` numbers in a row, and the clusters that they are in."""
        first = self._highest + 1
        clusters = list(range(first, first + max(1, math.ceil((count + 1) / _A_CLUSTER))))
        self._highest = clusters[-1]
        # The first number of a cluster stands for the drawing itself.
        return first * _A_CLUSTER + 1, clusters


def lines_in(text: str) -> int:
    """Return how many lines of a box a text takes.

    >>> lines_in("RNG02 fault\\nURV 20 bar is above 16 bar"), lines_in("word " * 20)
    (2, 2)
    """
    return sum(max(1, math.ceil(len(line) / _LETTERS)) for line in text.split("\n"))


def with_boxes(
    data: bytes | None,
    new: Mapping[Place, int],
    longer: Mapping[Place, int],
    afresh: Mapping[Place, int],
    *,
    grid: Grid,
    numbers: Numbers,
) -> Callable[[], Iterator[bytes]]:
    """Return what gives a drawing with a box for each new comment, and larger ones for those that became longer.

    It is not made before it is asked for, piece by piece.

    Parameters
    ----------
    data
        The drawing; None where the sheet has none yet.
    new, longer, afresh
        The lines of new comments, of what is added to others, and of those in place of others; by their cells.
    grid
        How wide the sheet's columns are and how high its rows.
    numbers
        What shapes are numbered by.

    Raises
    ------
    BrokenXml
        It has no place for a box.
    """
    drawing = data if data is not None else _EMPTY
    end = drawing.rfind(b"</xml>")
    if not is_utf8(drawing) or end < 0:
        raise BrokenXml("is no drawing of comments that can be added to")
    edits = list(_stretched(drawing[:end], longer, afresh, grid)) if longer or afresh else []
    first = 0
    if new:
        first, clusters = numbers.take(len(new))
        if (listed := _IDMAP.search(drawing, 0, end)) is not None:
            comma = b"," if listed[1].strip() else b""
            data_of = comma + b",".join(b"%d" % cluster for cluster in clusters)
            edits.append(Edit(listed.end(1), listed.end(1), data_of))
    return functools.partial(_pieces, drawing, end, edits, new, first, grid)


def _pieces(
    drawing: bytes, end: int, edits: Sequence[Edit], new: Mapping[Place, int], first: int, grid: Grid
) -> Iterator[bytes]:
    yield from spliced((drawing[:end],), edits)
    if new and b'"_x0000_t202"' not in drawing:
        yield _SHAPE_TYPE
    places = sorted(new)
    for at in range(0, len(places), _AT_ONCE):
        yield b"".join(
            _box(first + number, place, new[place], grid) for number, place in enumerate(places[at : at + _AT_ONCE], at)
        )
    yield drawing[end:]


def _box(number: int, place: Place, lines: int, grid: Grid) -> bytes:
    row, column = place
    return (
        b'<v:shape id="_x0000_s%d" type="#_x0000_t202" style="position:absolute;visibility:hidden"'
        b' fillcolor="#ffffe1" o:insetmode="auto"><v:fill color2="#ffffe1"/><v:shadow color="black" obscured="t"/>'
        b'<v:path o:connecttype="none"/><v:textbox style="mso-direction-alt:auto"><div style="text-align:left"/>'
        b'</v:textbox><x:ClientData ObjectType="Note"><x:MoveWithCells/><x:SizeWithCells/><x:Anchor>%b</x:Anchor>'
        b"<x:AutoFill>False</x:AutoFill><x:Row>%d</x:Row><x:Column>%d</x:Column></x:ClientData></v:shape>"
    ) % (number, _anchor(place, _height_px(lines), grid), row, column)


def _height_px(lines: int) -> float:
    return min(lines, _MOST_LINES) * _LINE_PX + _EDGES_PX


def _anchor(place: Place, height_px: float, grid: Grid) -> bytes:
    """Return the corners: column, pixels into it, row, pixels into it, of the first and the last."""
    row, column = place
    left, top = min(column + 1, MAX_COLUMNS - 1), max(row - 1, 0)
    right, x_px = _walk(left, 15.0 + _WIDTH_PX, grid.width, MAX_COLUMNS)
    bottom, y_px = _walk(top, 8.0 + height_px, grid.height, MAX_ROWS)
    return b"%d, 15, %d, 8, %d, %d, %d, %d" % (left, top, right, x_px, bottom, y_px)


def _walk(at: int, px: float, size: Callable[[int], float], most: int) -> tuple[int, int]:
    """Return the column or row that so many pixels from `at` lie in, and how many of them lie in it."""
    hidden = 0
    while at < most - 1 and px >= (here := size(at)):
        px -= here
        at += 1
        hidden = hidden + 1 if here < 1 else 0
        if hidden > 2_000:
            break
    return at, int(max(0.0, min(px, size(at))))


def _stretched(drawing: bytes, longer: Mapping[Place, int], afresh: Mapping[Place, int], grid: Grid) -> Iterable[Edit]:
    """Return the edits that give boxes the room that their comments take now."""
    for client in _CLIENT.finditer(drawing):
        row, column, anchor = (pattern.search(client[1]) for pattern in (_ROW, _COLUMN, _ANCHOR))
        if row is None or column is None or anchor is None:
            continue
        place = int(row[1]), int(column[1])
        at = client.start(1) + anchor.start(1)
        if place in afresh:
            yield Edit(at, at + len(anchor[1]), _anchor(place, _height_px(afresh[place]), grid))
        elif place in longer:
            corners = [int(number) for number in anchor[1].split(b",")]
            if corners[6] < MAX_ROWS:
                corners[6], corners[7] = _walk(
                    corners[6], corners[7] + _height_px(longer[place]), grid.height, MAX_ROWS
                )
            yield Edit(at, at + len(anchor[1]), b", ".join(b"%d" % corner for corner in corners))
