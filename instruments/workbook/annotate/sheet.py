"""One sheet's part with some of its cells in another format: the edits of its bytes, found without reading values.

In the usual spelling one pattern over the bytes finds rows and cells, which takes a second for two million
cells; a part that is spelt otherwise is taken apart by the XML parser, which takes five.
"""

from __future__ import annotations

import bisect
import functools
import re
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Final
from xml.parsers import expat

from instruments.workbook.annotate.splice import Edit, Element, closing, elements, opened, with_attribute
from instruments.workbook.plain import BrokenXml
from instruments.workbook.sheet import MAX_COLUMNS, MAX_ROWS, cell_address, cell_position, column_number
from instruments.workbook.sheet_look import NotPlain, blocks

__all__ = ["Frame", "Grid", "cell_edits", "frame_of", "legacy_drawing", "parsed_frame"]

_ROW: Final = re.compile(rb'<row r="([1-9][0-9]{0,6})"((?: [\w:.-]+="[^"<>]*")*+) ?(/?)>')
_CELL_BEGINS: Final = re.compile(rb"<c(?=[\s/>])")
_CELL: Final = re.compile(rb'<c r="([A-Z]{1,3})([0-9]{1,7})"((?: [a-z]+="[^"<>]*")*+) ?/?>')
_STYLE: Final = re.compile(rb' s="([0-9]{1,6})"')
_CUSTOM: Final = re.compile(rb' customFormat="(?:1|true)"')
_SPANS: Final = re.compile(rb' spans="([0-9]{1,5}):([0-9]{1,5})"')
_ANY_SPANS: Final = re.compile(rb"""\sspans\s*=\s*["']([0-9]{1,5}):([0-9]{1,5})["']""")
_HEIGHT: Final = re.compile(rb' ht="([0-9]{1,4}(?:\.[0-9]*)?)"')
_HIDDEN: Final = re.compile(rb' hidden="(?:1|true)"')

_AFTER_LEGACY_DRAWING: Final = frozenset(
    {"legacyDrawingHF", "drawingHF", "picture", "oleObjects", "controls", "webPublishItems", "tableParts", "extLst"}
)
"""What stands behind legacyDrawing in a worksheet (ECMA-376-1 18.3.1.99)."""

_MOST_STEPS: Final = 1_000_000
"""Rows looked at for merged cells; ranges that do not overlap need no more than the sheet has."""

_POINTS_TO_PX: Final = 96 / 72
_DIGIT_PX: Final = 7.0  # a column's width counts digits of the usual font


@dataclass(slots=True, kw_only=True)
class Grid:
    """How wide the columns of a sheet are and how high its rows, in pixels; counted from 0."""

    column_px: float = 64.0
    row_px: float = 20.0
    columns: dict[int, float] = field(default_factory=dict)
    rows: dict[int, float] = field(default_factory=dict)

    def width(self, column: int) -> float:
        """Return the width of a column."""
        return self.columns.get(column, self.column_px)

    def height(self, row: int) -> float:
        """Return the height of a row."""
        return self.rows.get(row, self.row_px)


@dataclass(slots=True, kw_only=True)
class Frame:
    """What stands before and after the rows of a sheet."""

    root: Element
    data: bytes
    gap_at: int
    """Where, in `data`, the rows were left out."""
    left_out: int
    """How many bytes they are."""
    strict: bool
    merged: list[tuple[int, int, int, int]]
    column_styles: dict[int, int]
    """The styles of the blank cells of columns, counted from 0."""
    grid: Grid
    plain: bool
    """Whether the part is in the usual spelling."""

    @property
    def drawing(self) -> str | None:
        """The relation of the sheet's note boxes, if it has any."""
        found = self.root.first("legacyDrawing")
        return None if found is None else found.attributes.get("id", "")

    def anchors(self, cells: Iterable[tuple[int, int]]) -> dict[tuple[int, int], tuple[int, int]]:
        """Return, for the cells that are merged with others, the first of these: it alone is seen."""
        columns: dict[int, list[int]] = {}
        for row, column in cells:
            columns.setdefault(row, []).append(column)
        rows = sorted(columns)
        found: dict[tuple[int, int], tuple[int, int]] = {}
        steps = 0
        for top, first, bottom, last in self.merged:
            for row in rows[bisect.bisect_left(rows, top) : bisect.bisect_right(rows, bottom)]:
                steps += 1
                for column in columns[row]:
                    if first <= column <= last:
                        found.setdefault((row, column), (top, first))
            if steps > _MOST_STEPS:
                break
        return found

    def column_style(self, column: int) -> int:
        """Return the style of a column's blank cells."""
        return self.column_styles.get(column, 0)

    def at(self, place: int) -> int:
        """Return where in the part a byte of the frame stands."""
        return place if place <= self.gap_at else place + self.left_out


def frame_of(pieces: Callable[[], Iterable[bytes]], whole: Callable[[], bytes]) -> Frame:
    """Read what stands before and after the rows.

    Parameters
    ----------
    pieces, whole
        The part, piece by piece as it stands in the file, and in UTF-8.

    Raises
    ------
    BrokenXml
        It cannot be read.
    """
    try:
        head = tail = b""
        left_out = 0
        for kind, text in blocks(pieces()):
            if kind == "head":
                head = text
            elif kind == "tail":
                tail = text
            else:
                left_out += len(text)
        return _frame(head + tail, len(head), left_out, plain=True)
    except NotPlain:
        return parsed_frame(whole())


def parsed_frame(data: bytes) -> Frame:
    """Return the frame of a whole part in UTF-8 that is spelt otherwise than usual; see `frame_of`."""
    return _frame(data, 0, 0, plain=False)


def _frame(data: bytes, gap_at: int, left_out: int, *, plain: bool) -> Frame:
    root = elements(data, deepest=2, leaving_out=("sheetData",))
    if root.name != "worksheet":
        raise BrokenXml("is no worksheet")
    merged: list[tuple[int, int, int, int]] = []
    styles: dict[int, int] = {}
    grid = Grid()
    for child in root.children:
        if child.name == "mergeCells":
            for one in child.children:
                first, _, last = one.attributes.get("ref", "").partition(":")
                corner, opposite = cell_position(first), cell_position(last)
                if corner and opposite and corner <= opposite:
                    merged.append((*corner, *opposite))
        elif child.name == "sheetFormatPr":
            grid.row_px = _number(child.attributes.get("defaultRowHeight"), 15.0) * _POINTS_TO_PX
            usual = _number(child.attributes.get("defaultColWidth"), 0.0)
            grid.column_px = usual * _DIGIT_PX if usual else 64.0
        elif child.name == "cols":
            told = -1
            for one in child.children:
                # They follow each other, so each column is told once.
                begin = max(_whole(one.attributes.get("min")) - 1, told + 1)
                told = max(told, min(_whole(one.attributes.get("max")), MAX_COLUMNS) - 1)
                width = _number(one.attributes.get("width"), grid.column_px / _DIGIT_PX) * _DIGIT_PX
                px = 0.0 if one.attributes.get("hidden") in ("1", "true") else width
                grid.columns.update(dict.fromkeys(range(begin, told + 1), px))
                if one.attributes.get("style"):
                    styles.update(dict.fromkeys(range(begin, told + 1), _whole(one.attributes["style"])))
    return Frame(
        root=root,
        data=data,
        gap_at=gap_at,
        left_out=left_out,
        strict=b"http://purl.oclc.org/ooxml/spreadsheetml/main" in data[: root.inside],
        merged=merged,
        column_styles=styles,
        grid=grid,
        plain=plain,
    )


def legacy_drawing(frame: Frame, relation: str, space: str) -> Edit:
    """Return the edit that gives a sheet its note boxes.

    Parameters
    ----------
    frame
        What stands around the rows; it has none yet.
    relation
        The id of the relation to the boxes.
    space
        The namespace of such ids.
    """
    tag = b'<%blegacyDrawing xmlns:r="%b" r:id="%b"/>' % (frame.root.prefix, space.encode(), relation.encode())
    # What Excel wraps for older readers stands at the place of what is wrapped: controls and embedded objects.
    before = next(
        (
            child
            for child in frame.root.children
            if child.name in _AFTER_LEGACY_DRAWING
            or (child.name == "~AlternateContent" and child.start > _start_of_rows(frame) and _wraps(frame, child))
        ),
        None,
    )
    if before is not None:
        return Edit(frame.at(before.start), frame.at(before.start), tag)
    edit = frame.root.appended(frame.data, tag)
    return Edit(frame.at(edit.start), frame.at(edit.end), edit.text)


def _start_of_rows(frame: Frame) -> int:
    rows = frame.root.first("sheetData")
    return rows.start if rows else 0


def _wraps(frame: Frame, element: Element) -> bool:
    wrapped = frame.data[element.start : element.end]
    return any(re.search(rb"<(?:[\w.-]+:)?" + name.encode() + rb"[\s/>]", wrapped) for name in _AFTER_LEGACY_DRAWING)


Restyle = Callable[[int, int, int], int]
"""Row, column and present style of a cell to the style that it gets."""


def cell_edits(
    frame: Frame, pieces: Iterable[bytes], wanted: Mapping[int, Sequence[int]], restyle: Restyle
) -> list[Edit]:
    """Return the edits of a sheet's part that give cells another style.

    Parameters
    ----------
    frame
        What stands around its rows.
    pieces
        The part: piece by piece where it is in the usual spelling, else in UTF-8.
    wanted
        The columns of the cells in each row, in order; counted from 0.
    restyle
        Says which style.

    Raises
    ------
    NotPlain
        The part is not in the usual spelling after all.
    BrokenXml
        It cannot be read.
    """
    if not frame.plain:
        return _parsed_edits(frame, b"".join(pieces), wanted, restyle)
    edits: list[Edit] = []
    waiting = sorted(wanted)
    place = 0
    at = 0
    for kind, text in blocks(pieces):
        if kind == "tail":
            # Rows below the last one; a sheet without rows may be one tag that closes itself.
            edits += _last_rows(frame, waiting[place:], wanted, restyle)
            break
        if kind == "rows":
            if (b"!" in text and b"<!" in text) or (b"?" in text and b"<?" in text):
                raise NotPlain
            starts = list(_ROW.finditer(text))
            if len(starts) != text.count(b"<row"):
                raise NotPlain
            stops = [*(start.start() for start in starts), len(text)][1:]
            for start, stop in zip(starts, stops, strict=True):
                number = int(start[1]) - 1
                if b' ht="' in start[2] or b" hidden=" in start[2]:
                    _measure(frame.grid, number, start[2])
                while place < len(waiting) and waiting[place] < number:
                    row = waiting[place]
                    place += 1
                    edits.append(Edit(at + start.start(), at + start.start(), _row(frame, row, wanted[row], restyle)))
                if place < len(waiting) and waiting[place] == number:
                    place += 1
                    edits += _row_edits(frame, text, start, stop, at, wanted[number], restyle)
        at += len(text)
    return edits


def _measure(grid: Grid, row: int, attributes: bytes) -> None:
    if _HIDDEN.search(attributes):
        grid.rows[row] = 0.0
    elif height := _HEIGHT.search(attributes):
        grid.rows[row] = float(height[1]) * _POINTS_TO_PX


def _last_rows(frame: Frame, rows: Sequence[int], wanted: Mapping[int, Sequence[int]], restyle: Restyle) -> list[Edit]:
    if not rows:
        return []
    made = b"".join(_row(frame, row, wanted[row], restyle) for row in rows)
    data = frame.root.first("sheetData")
    if data is None:
        raise BrokenXml("has no place for rows")
    edit = data.appended(frame.data, made)
    if frame.plain and not data.closes_itself:
        # The rows were left out in front of the end tag, which therefore stands behind them.
        end = frame.gap_at + frame.left_out
        return [Edit(end, end, made)]
    return [Edit(frame.at(edit.start), frame.at(edit.end), edit.text)]


def _row(frame: Frame, row: int, columns: Sequence[int], restyle: Restyle) -> bytes:
    """Return a row that the sheet has not got, with its cells."""
    prefix = frame.root.prefix
    cells = b"".join(_cell(prefix, row, column, restyle(row, column, frame.column_style(column))) for column in columns)
    return b'<%brow r="%d">%b</%brow>' % (prefix, row + 1, cells, prefix)


def _cell(prefix: bytes, row: int, column: int, style: int) -> bytes:
    return b'<%bc r="%b" s="%d"/>' % (prefix, cell_address(row, column).encode(), style)


def _row_edits(
    frame: Frame,
    text: bytes,
    start: re.Match[bytes],
    stop: int,
    at: int,
    columns: Sequence[int],
    restyle: Restyle,
) -> list[Edit]:
    row = int(start[1]) - 1
    blank_style = _row_style(start[2])
    spans = _SPANS.search(start[2])
    low, high = (int(spans[1]) - 1, int(spans[2]) - 1) if spans else (0, MAX_COLUMNS)

    def blank(column: int) -> bytes:
        base = frame.column_style(column) if blank_style is None else blank_style
        return _cell(b"", row, column, restyle(row, column, base))

    if start[3]:
        # The row is one tag that closes itself: it is opened for its cells.
        tag = _spanned(start[0], columns, low, high, spans)
        made = opened(tag) + b"".join(map(blank, columns)) + b"</row>"
        return [Edit(at + start.start(), at + start.end(), made)]
    end = text.rfind(b"</row>", start.end(), stop)
    if end < 0:
        raise NotPlain
    edits: list[Edit] = []
    left = list(columns)
    added: list[int] = []
    for begun in _CELL_BEGINS.finditer(text, start.end(), stop):
        tag_of = _CELL.match(text, begun.start())
        if tag_of is None or int(tag_of[2]) != row + 1:
            raise NotPlain
        column = _column(tag_of[1])
        while left and left[0] < column:
            added.append(left[0])
            edits.append(Edit(at + begun.start(), at + begun.start(), blank(left.pop(0))))
        if left and left[0] == column:
            left.pop(0)
            styled = _STYLE.search(tag_of[3])
            new = restyle(row, column, int(styled[1]) if styled else 0)
            if styled:
                where = at + tag_of.start(3)
                edits.append(Edit(where + styled.start(1), where + styled.end(1), b"%d" % new))
            else:
                where = at + tag_of.end(3)
                edits.append(Edit(where, where, b' s="%d"' % new))
        elif not left:
            break
    for column in left:
        added.append(column)
        edits.append(Edit(at + end, at + end, blank(column)))
    tag = _spanned(start[0], added, low, high, spans)
    if tag != start[0]:
        edits.append(Edit(at + start.start(), at + start.end(), tag))
    return edits


def _row_style(attributes: bytes) -> int | None:
    styled = _STYLE.search(attributes)
    return int(styled[1]) if styled and _CUSTOM.search(attributes) else None


def _spanned(tag: bytes, added: Sequence[int], low: int, high: int, spans: re.Match[bytes] | None) -> bytes:
    """Return a row's tag; what it says of the columns that its cells stand in must stay true."""
    if spans is None or not added or (low <= min(added) and max(added) <= high):
        return tag
    return with_attribute(tag, b"spans", b"%d:%d" % (min(low, *added) + 1, max(high, *added) + 1))


@functools.cache
def _column(letters: bytes) -> int:
    return column_number(letters.decode())


# --- any other spelling ------------------------------------------------------------------------------------------


@dataclass(slots=True, kw_only=True)
class _OpenRow:
    number: int
    start: int
    tag: bytes
    left: list[int]
    base: int | None
    column: int = -1
    added: list[int] = field(default_factory=list)


def _parsed_edits(frame: Frame, data: bytes, wanted: Mapping[int, Sequence[int]], restyle: Restyle) -> list[Edit]:
    """Return the edits of a part in UTF-8, however it is spelt."""
    edits: list[Edit] = []
    waiting = sorted(wanted)
    place = 0
    prefix = frame.root.prefix
    path: list[str] = []
    rows_at = -1
    row: _OpenRow | None = None
    parser = expat.ParserCreate("utf-8", " ")

    def blank(number: int, column: int, base: int | None) -> bytes:
        style = frame.column_style(column) if base is None else base
        return _cell(prefix, number, column, restyle(number, column, style))

    def start(name: str, attributes: dict[str, str]) -> None:
        nonlocal rows_at, row, place
        local = name.rpartition(" ")[2]
        at = parser.CurrentByteIndex
        if local == "row" and path == ["worksheet", "sheetData"]:
            number = _whole(attributes["r"]) - 1 if "r" in attributes else rows_at + 1
            if not 0 <= number < MAX_ROWS:
                raise BrokenXml(f"has a row {number + 1}, and a sheet ends at row {MAX_ROWS}")
            rows_at = number
            if "ht" in attributes:
                frame.grid.rows[number] = _number(attributes["ht"], 15.0) * _POINTS_TO_PX
            if attributes.get("hidden") in ("1", "true"):
                frame.grid.rows[number] = 0.0
            while place < len(waiting) and waiting[place] < number:
                missing = waiting[place]
                place += 1
                edits.append(Edit(at, at, _row(frame, missing, wanted[missing], restyle)))
            columns: list[int] = []
            if place < len(waiting) and waiting[place] == number:
                columns = list(wanted[number])
                place += 1
            custom = attributes.get("customFormat") in ("1", "true") and "s" in attributes
            row = _OpenRow(
                number=number,
                start=at,
                tag=_tag_at(data, at) if columns else b"",
                left=columns,
                base=_whole(attributes["s"]) if custom else None,
            )
        elif local == "c" and row is not None and path == ["worksheet", "sheetData", "row"]:
            column = row.column + 1
            if "r" in attributes:
                position = cell_position(attributes["r"])
                if position is None or position[0] != row.number:
                    raise BrokenXml(f"has a cell {attributes['r'][:20]!r} in row {row.number + 1}")
                column = position[1]
            row.column = column
            while row.left and row.left[0] < column:
                row.added.append(row.left[0])
                edits.append(Edit(at, at, blank(row.number, row.left.pop(0), row.base)))
            if row.left and row.left[0] == column:
                row.left.pop(0)
                tag = _tag_at(data, at)
                new = restyle(row.number, column, _whole(attributes.get("s", "0")))
                edits.append(Edit(at, at + len(tag), with_attribute(tag, b"s", b"%d" % new)))
        path.append(local)

    def end(_: str) -> None:
        nonlocal row
        if path.pop() != "row" or row is None or path != ["worksheet", "sheetData"]:
            return
        made = b"".join(blank(row.number, column, row.base) for column in row.left)
        spans = _ANY_SPANS.search(row.tag)
        low, high = (int(spans[1]) - 1, int(spans[2]) - 1) if spans else (0, MAX_COLUMNS)
        tag = _spanned(row.tag, [*row.added, *row.left], low, high, spans)
        if row.left and tag.endswith(b"/>"):
            edits.append(Edit(row.start, row.start + len(row.tag), opened(tag) + made + closing(tag)))
        else:
            if row.left:
                edits.append(Edit(parser.CurrentByteIndex, parser.CurrentByteIndex, made))
            if tag != row.tag:
                edits.append(Edit(row.start, row.start + len(row.tag), tag))
        row = None

    parser.StartElementHandler = start
    parser.EndElementHandler = end
    try:
        parser.Parse(data, True)
    except expat.ExpatError as error:
        raise BrokenXml(f"is not well-formed XML: {expat.ErrorString(error.code)}, line {error.lineno}") from None
    edits += _last_rows(frame, waiting[place:], wanted, restyle)
    return edits


def _tag_at(data: bytes, at: int) -> bytes:
    found = re.compile(rb"""<(?:[^"'>]|"[^"]*"|'[^']*')*+>""").match(data, at)
    if found is None:
        raise BrokenXml("has a tag without an end")
    return found[0]


def _whole(text: str | None) -> int:
    return int(text) if text and re.fullmatch("[0-9]{1,7}", text, re.ASCII) else 0


def _number(text: str | None, otherwise: float) -> float:
    return float(text) if text and re.fullmatch(r"[0-9]{1,5}(?:\.[0-9]{1,20})?", text, re.ASCII) else otherwise
