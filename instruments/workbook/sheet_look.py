"""The look at one sheet's part: how far it reaches, and what is rare in it, found by pattern over its bytes.

A handler called for each of two million cells takes 5 s, a compiled pattern 1 s; so only what a pattern
points at is looked at more closely. The patterns take the usual spelling of XML for granted and count what
they match: where the counts differ from those of the bare tags, the part is spelt otherwise and is rewritten
first.
"""

from __future__ import annotations

import functools
import itertools
import re
from array import array
from collections import Counter
from collections.abc import Collection, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Final, NamedTuple

from instruments.workbook.plain import BrokenXml, is_utf8, read_xml, without_codes
from instruments.workbook.sheet import MAX_COLUMNS, MAX_ROWS, cell_address, cell_position, column_number

MAX_BLOCK: Final = 64 << 20
"""The longest row, and the longest part of a sheet before or after its rows."""

FAR_ROWS: Final = 5_000
FAR_COLUMNS: Final = 500
"""A blank stretch of this many rows or columns ends a list, where the whole would take too much memory."""

MAX_FAR_CELLS: Final = 1_000

LAST_DAY: Final = 2_958_465.0
"""The serial number of 9999-12-31, the last day a spreadsheet knows."""

_ROOT: Final = re.compile(rb"\A(?:\xef\xbb\xbf)?\s*(?:<\?xml[^<>]*\?>\s*)?<worksheet[\s>]")
_PREFIXED: Final = re.compile(
    rb"""xmlns:[\w.-]+\s*=\s*["'](?:http://schemas\.openxmlformats\.org/spreadsheetml/2006/main|"""
    rb"""http://purl\.oclc\.org/ooxml/spreadsheetml/main)["']"""
)
_SHEET_DATA: Final = re.compile(rb"<sheetData(?: [^<>]*)?>")
_ROW: Final = re.compile(rb'<row r="([1-9][0-9]*)"((?: [\w:.-]+="[^"<>]*")*+) ?(/?)>')
_FILLED: Final = re.compile(rb'<c r="([A-Z]+[0-9]+)"(?: [a-z]+="[^"<>]*")*+ ?>')
_CELL: Final = re.compile(rb'<c r="([A-Z]+)([0-9]+)"((?: [a-z]+="[^"<>]*")*+) ?>(.*?)</c>', re.DOTALL)
_TYPE: Final = re.compile(rb' t="([^"]*)"')
_STYLE: Final = re.compile(rb' s="([0-9]+)"')
_VALUE: Final = re.compile(rb"<v(?: [^<>]*)?>([^<]*)</v>")
_HIDDEN: Final = re.compile(rb' hidden="(?:1|true)"')
_UNSAVED: Final = (
    re.compile(rb"</f>\s*(?:<v ?/>|<v>\s*</v>|</c>)"),
    re.compile(rb"<f(?: [^<>]*)?/>\s*(?:<v ?/>|<v>\s*</v>|</c>)"),
)
_ELSEWHERE: Final = re.compile(rb"<f(?: [^<>]*)?>[^<]*\[[0-9]+\][^<]*</f>")
_TEXT: Final = re.compile(rb"<t(?: [^<>]*)?>([^<]*)</t>")
_STRIKE: Final = re.compile(rb'<strike(?: val="([^"]*)")? ?/?>')
_ENTITY: Final = re.compile("&(?:#([0-9]{1,7})|#x([0-9A-Fa-f]{1,6})|(amp|lt|gt|quot|apos));")
_NAMED: Final = {"amp": "&", "lt": "<", "gt": ">", "quot": '"', "apos": "'"}

# What the value reader takes for an error value; it gives up the whole sheet at any other.
_KNOWN_ERRORS: Final = frozenset({b"#DIV/0!", b"#N/A", b"#NAME?", b"#NULL!", b"#NUM!", b"#REF!", b"#VALUE!", b""})

Run = tuple[str, bool | None]
"""A run of a rich text and whether it is struck out; None where it looks as its cell does."""


class NotPlain(Exception):
    """The part is spelt otherwise than patterns expect."""


class Edit(NamedTuple):
    """Bytes of a part from `start` to `end` for which the value reader gets others."""

    start: int
    end: int
    text: bytes


@dataclass(frozen=True, slots=True, kw_only=True)
class Looks:
    """What a workbook says of looks in general: its styles, and its texts that are struck out in part."""

    struck: frozenset[bytes] = frozenset()
    """Style ids whose font is struck out."""
    formats: Mapping[bytes, str] = field(default_factory=dict)
    """Format code by style id, for those that `format_kind` has a kind for."""
    dates: frozenset[bytes] = frozenset()
    """Style ids whose numbers are dates or times."""
    fills: Mapping[bytes, str] = field(default_factory=dict)
    """Colour by style id, for those that are filled with one that is not white."""
    texts: Mapping[bytes, Sequence[Run]] = field(default_factory=dict)
    """The runs of shared texts by index: all if a style is struck out, else those with a struck-out run."""


@dataclass(slots=True, kw_only=True)
class SheetLook:
    """What was seen of a sheet; positions counted from 0."""

    height: int = 0
    width: int = 0
    """How far the filled cells reach that stand together."""
    far: bool = False
    """Whether filled cells stand beyond `height` or `width`."""
    errors: dict[tuple[int, int], str] = field(default_factory=dict)
    no_value: set[tuple[int, int]] = field(default_factory=set)
    struck: set[tuple[int, int]] = field(default_factory=set)
    partly_struck: dict[tuple[int, int], str] = field(default_factory=dict)
    number_formats: dict[tuple[int, int], str] = field(default_factory=dict)
    hidden_rows: set[int] = field(default_factory=set)
    hidden_columns: set[int] = field(default_factory=set)
    coloured_rows: dict[int, str] = field(default_factory=dict)
    """Rows most of whose cells are filled with one colour."""
    merged: list[tuple[int, int, int, int]] = field(default_factory=list)
    elsewhere: int = 0
    """Formulas that refer to another workbook."""
    drawing: str | None = None
    edits: list[Edit] = field(default_factory=list)


def blocks(pieces: Iterable[bytes]) -> Iterator[tuple[str, bytes]]:
    """Cut a sheet's part into its head, blocks of whole rows and its tail; joined they are the part again.

    Raises
    ------
    NotPlain
        It does not begin or end as a sheet in the usual spelling does.
    BrokenXml
        A row, or what stands before or after the rows, is longer than `MAX_BLOCK`.
    """
    source = iter(pieces)
    buffer = bytearray()
    opened: re.Match[bytes] | None = None
    for piece in source:
        searched = max(0, len(buffer) - 200)
        buffer += piece
        _bounded(buffer, "before its rows")
        opened = _SHEET_DATA.search(buffer, searched)
        if opened is not None:
            break
    head = bytes(buffer[: opened.end()] if opened else buffer)
    del buffer[: len(head)]
    if not is_utf8(head) or not _ROOT.match(head) or _PREFIXED.search(head) or b"<!" in head:
        raise NotPlain
    if opened is None or head.endswith(b"/>"):
        yield "tail", head + _rest(buffer, source)
        return
    yield "head", head
    searched = 0
    while True:
        end = buffer.find(b"</sheetData>", searched)
        if end >= 0:
            yield "rows", bytes(buffer[:end])
            del buffer[:end]
            yield "tail", _rest(buffer, source)
            return
        cut = buffer.rfind(b"<row ", max(1, searched))
        if cut > 0:
            yield "rows", bytes(buffer[:cut])
            del buffer[:cut]
        searched = max(0, len(buffer) - 16)
        _bounded(buffer, "in one row")
        more = next(source, None)
        if more is None:
            raise NotPlain
        buffer += more


def _rest(buffer: bytearray, source: Iterator[bytes]) -> bytes:
    for piece in source:
        buffer += piece
        _bounded(buffer, "after its rows")
    return bytes(buffer)


def _bounded(buffer: bytearray, where: str) -> None:
    if len(buffer) > MAX_BLOCK:
        raise BrokenXml(f"has more than {MAX_BLOCK >> 20} MB {where}")


def look(pieces: Iterable[bytes], looks: Looks, *, dense: int, room: int) -> SheetLook:
    """Look at the part of one sheet.

    Parameters
    ----------
    pieces : iterable of bytes
        The part, unpacked.
    looks : Looks
        The styles and rich texts of the workbook.
    dense, room : int
        Rows times columns up to which blank cells do not matter, and up to which a sheet is read at all.

    Raises
    ------
    NotPlain
        The part must be rewritten first.
    BrokenXml
        The sheet cannot be read; the message goes on from "the sheet".
    """
    found = _Look(looks)
    at = 0
    frame: list[bytes] = []
    for kind, text in blocks(pieces):
        if kind == "rows":
            found.rows(text, at)
        else:
            frame.append(text)
        at += len(text)
    found.frame(frame)
    seen = found.seen
    seen.height, seen.width, seen.far = found.extent(dense=dense, room=room)
    return seen


def runs_of(rich: bytes) -> list[Run]:
    """Return the runs of a rich text, ``<r>`` by ``<r>``; nothing where it is all of one look."""
    runs: list[Run] = []
    for following in rich.split(b"<r>")[1:]:
        run = following.partition(b"</r>")[0]
        struck: bool | None = None
        shown = run
        # Properties of its own, even if there are none, take the place of the cell's.
        if run.lstrip().startswith((b"<rPr>", b"<rPr/>", b"<rPr />")):
            properties, _, shown = run.rpartition(b"</rPr>")
            strike = _STRIKE.search(properties)
            struck = strike is not None and strike[1] not in (b"0", b"false")
        text = _TEXT.search(shown)
        runs.append((text_of(text[1]) if text else "", struck))
    return runs


def text_of(raw: bytes) -> str:
    """Return the text that stands in a part as `raw`.

    >>> text_of(b"4&#8211;20 mA &lt; 1_x000A_A")
    '4–20 mA < 1\\nA'
    """
    text = raw.decode("utf-8", "replace")
    if "&" in text:
        text = _ENTITY.sub(_character, text)
    return without_codes(text.replace("\r\n", "\n").replace("\r", "\n"))


def _character(entity: re.Match[str]) -> str:
    decimal, hexadecimal, name = entity.groups()
    if name:
        return _NAMED[name]
    number = int(decimal) if decimal else int(hexadecimal, 16)
    return chr(number) if number < 0x110000 else "\ufffd"


def one_of(numbers: Collection[bytes]) -> bytes:
    """Return a pattern for any of these numbers, or for any number where they are many.

    A plain row of alternatives is tried one by one at each of two million places.

    >>> one_of([b"3", b"31", b"4"])
    b'(?:3(?:|1)|4)'
    """
    if len(numbers) > 500:
        return rb"[0-9]+"
    by_first: dict[bytes, list[bytes]] = {}
    for number in sorted(numbers):
        by_first.setdefault(number[:1], []).append(number[1:])
    branches = [
        first + (b"" if rests == [b""] else one_of(rests)) if first else b"" for first, rests in by_first.items()
    ]
    return b"(?:" + b"|".join(branches) + b")"


class _Shape(NamedTuple):
    """The columns that the filled cells of a row stand in."""

    columns: tuple[int, ...]
    highest: int


class _Cell(NamedTuple):
    position: tuple[int, int]
    attributes: bytes
    attributes_at: int
    kind: bytes
    body: bytes
    body_at: int


class _Look:
    """What is gathered while the blocks of one sheet go by."""

    def __init__(self, looks: Looks) -> None:
        self.seen = SheetLook()
        self._looks = looks
        self._styles = (
            re.compile(rb' s="(' + one_of(styles) + rb')"')
            if (styles := looks.struck | frozenset(looks.formats))
            else None
        )
        partly = [index for index, runs in looks.texts.items() if any(struck for _, struck in runs)]
        self._texts = re.compile(rb"<v>(" + one_of(partly) + rb")</v>") if partly else None
        self._fills = re.compile(rb' s="(' + one_of(looks.fills) + rb')"') if looks.fills else None
        self._numbers, self._highest, self._counts = array("L"), array("L"), array("L")
        self._taken = bytearray(MAX_ROWS + 1)
        self._shapes: dict[bytes, _Shape] = {}
        self._uses: Counter[bytes] = Counter()
        self._columns: Counter[int] = Counter()

    def rows(self, text: bytes, at: int) -> None:
        """Look at a block of whole rows that begins at byte `at` of the part."""
        # One byte is looked for at ten times the speed of two, and lists seldom have these.
        if (b"!" in text and b"<!" in text) or (b"?" in text and b"<?" in text):
            raise NotPlain
        self._extents(text)
        self._errors(text, at)
        if b"<f" in text:
            self._formulas(text, at)
        if self._styles is not None:
            for hit in self._styles.finditer(text):
                if cell := _cell_around(text, hit.start(), at):
                    self._styled(cell, hit[1])
        if self._texts is not None:
            for hit in self._texts.finditer(text):
                if hit[1] in self._looks.texts and (cell := _cell_around(text, _tag_of(text, hit.start()), at)):
                    self._rich(cell, struck=self._style_of(cell) in self._looks.struck)
        if b"<strike" in text:
            for hit in _STRIKE.finditer(text):
                if cell := _cell_around(text, _tag_of(text, hit.start()), at):
                    self._rich(cell, struck=self._style_of(cell) in self._looks.struck)

    def _extents(self, text: bytes) -> None:
        starts = list(_ROW.finditer(text))
        if len(starts) != text.count(b"<row"):
            raise NotPlain
        filled = 0
        taken, shapes, uses = self._taken, self._shapes, self._uses
        stops = [*(start.start() for start in starts), len(text)][1:]
        for start, stop in zip(starts, stops, strict=True):
            digits = start[1]
            number = int(digits) if len(digits) < 8 else MAX_ROWS + 1
            if number > MAX_ROWS:
                raise BrokenXml(f"has a row {digits[:20].decode()}, and a sheet ends at row {MAX_ROWS}")
            if taken[number]:
                raise BrokenXml(f"has row {number} twice")
            taken[number] = 1
            if b"hidden" in start[2] and _HIDDEN.search(start[2]):
                self.seen.hidden_rows.add(number - 1)
            cells = _FILLED.findall(text, start.end(), stop)
            if not cells:
                continue
            filled += len(cells)
            if self._fills is not None:
                self._colour(
                    number, self._fills.findall(text, start.end(), stop), text.count(b"<c ", start.end(), stop)
                )
            # A5,B5,D5 and A6,B6,D6 have one shape: A,B,D. Few rows of a list have one of their own.
            key = (b",".join(cells) + b",").replace(digits + b",", b",")
            shape = shapes.get(key) or self._shape(key, number, cells)
            uses[key] += 1
            self._numbers.append(number)
            self._highest.append(shape.highest)
            self._counts.append(len(cells))
        if filled != text.count(b"</c>"):
            raise NotPlain

    def _colour(self, number: int, styles: Sequence[bytes], cells: int) -> None:
        if len(styles) * 2 <= cells:
            return
        style, times = Counter(styles).most_common(1)[0]
        if times * 2 > cells and style in self._looks.fills:
            self.seen.coloured_rows[number - 1] = self._looks.fills[style]

    def _shape(self, key: bytes, row: int, cells: Sequence[bytes]) -> _Shape:
        columns = []
        for letters, cell in zip(key.split(b","), cells, strict=False):
            if not letters.isalpha():
                raise BrokenXml(f"has a cell of another row, {cell[:20].decode()}, in row {row}")
            column = column_number(letters.decode()) if len(letters) < 4 else MAX_COLUMNS
            if column >= MAX_COLUMNS:
                raise BrokenXml(f"has a cell in column {letters[:20].decode()}, and a sheet ends at column XFD")
            columns.append(column)
        if len(set(columns)) != len(columns):
            twice = next(column for column in columns if columns.count(column) > 1)
            raise BrokenXml(f"has cell {cell_address(row - 1, twice)} twice")
        if len(self._shapes) > 2_000:
            self._count_columns()
        shape = self._shapes[key] = _Shape(tuple(columns), max(columns))
        return shape

    def _count_columns(self) -> None:
        for key, times in self._uses.items():
            for column in self._shapes[key].columns:
                self._columns[column] += times
        self._uses.clear()
        self._shapes.clear()

    def extent(self, *, dense: int, room: int) -> tuple[int, int, bool]:
        """Return how many rows and columns are read, and whether filled cells stand beyond them."""
        self._count_columns()
        if not self._numbers:
            return 0, 0, False
        height, width, filled = max(self._numbers), max(self._highest) + 1, sum(self._counts)
        far = False
        if height * width > max(dense, 25 * filled):
            end_row = first_gap(self._numbers, FAR_ROWS)
            end_column = first_gap(self._columns, FAR_COLUMNS) + 1
            beyond = sum(
                count for number, count in zip(self._numbers, self._counts, strict=True) if number > end_row
            ) + sum(count for column, count in self._columns.items() if column >= end_column)
            if beyond > MAX_FAR_CELLS:
                end = cell_address(end_row - 1, end_column - 1)
                raise BrokenXml(
                    f"has {beyond:,} filled cells after a blank stretch, beyond {end}: move them up to the"
                    " list, or to a sheet of their own"
                )
            far = beyond > 0
            height, width = end_row, end_column
        if height * width > room:
            raise BrokenXml(
                f"reaches to {cell_address(height - 1, width - 1)}, which is {height * width:,} cells,"
                f" {filled:,} of them filled; at most {room:,} are read"
            )
        return height, width, far

    def _errors(self, text: bytes, at: int) -> None:
        found = text.find(b' t="e"')
        while found >= 0:
            if (cell := _cell_around(text, found, at)) and (value := _VALUE.search(cell.body)):
                if value[1]:
                    self.seen.errors[cell.position] = text_of(value[1])
                if value[1] not in _KNOWN_ERRORS:
                    start = cell.body_at + value.start(1)
                    self.seen.edits.append(Edit(start, start + len(value[1]), b""))
            found = text.find(b' t="e"', found + 6)

    def _formulas(self, text: bytes, at: int) -> None:
        for pattern in _UNSAVED:
            for hit in pattern.finditer(text):
                cell = _cell_around(text, _tag_of(text, hit.start()), at)
                if cell is None or _saved(cell):
                    continue
                self.seen.no_value.add(cell.position)
        self.seen.elsewhere += sum(1 for _ in _ELSEWHERE.finditer(text))

    def _styled(self, cell: _Cell, style: bytes) -> None:
        value = _VALUE.search(cell.body)
        if style in self._looks.struck:
            if cell.kind == b"s" or cell.kind == b"inlineStr":
                self._rich(cell, struck=True)
            elif value is not None and value[1]:
                self.seen.struck.add(cell.position)
        code = self._looks.formats.get(style)
        if code is None or cell.kind not in (b"", b"n") or value is None or not value[1]:
            return
        self.seen.number_formats[cell.position] = code
        if style in self._looks.dates and not _is_a_day(value[1]):
            # The value reader makes midnight of -3, and cannot read 1e20 hours: they are given as numbers.
            styled = _STYLE.search(cell.attributes)
            if styled is not None:
                start = cell.attributes_at + styled.start()
                self.seen.edits.append(Edit(start, start + len(styled[0]), b""))

    def _style_of(self, cell: _Cell) -> bytes:
        style = _STYLE.search(cell.attributes)
        return style[1] if style else b"0"

    def _rich(self, cell: _Cell, *, struck: bool) -> None:
        if cell.kind == b"s":
            index = _VALUE.search(cell.body)
            runs = self._looks.texts.get(index[1].strip(), ()) if index else ()
        else:
            runs = runs_of(cell.body) if cell.kind == b"inlineStr" else ()
        if not runs:
            if struck:
                self.seen.struck.add(cell.position)
            return
        shown = "".join(text for text, of_its_own in runs if not (struck if of_its_own is None else of_its_own))
        whole = "".join(text for text, _ in runs)
        if not whole.strip() or shown == whole:
            return
        if shown.strip():
            self.seen.partly_struck[cell.position] = shown
        else:
            self.seen.struck.add(cell.position)

    def frame(self, texts: Sequence[bytes]) -> None:
        """Read what stands before and after the rows."""
        last_column = 0
        seen = self.seen
        data = 0

        def start(name: str, attributes: Mapping[str, str]) -> None:
            nonlocal last_column, data
            if name == "col":
                first, last = (_whole(attributes.get(key)) for key in ("min", "max"))
                first, last = max(first, last_column + 1), min(last, MAX_COLUMNS)
                if attributes.get("hidden") in ("1", "true") or attributes.get("width") == "0":
                    seen.hidden_columns.update(range(first - 1, last))
                last_column = max(last_column, last)
            elif name == "mergeCell":
                first_cell, _, last_cell = attributes.get("ref", "").partition(":")
                corner, opposite = cell_position(first_cell), cell_position(last_cell)
                if corner and opposite and corner <= opposite:
                    seen.merged.append((*corner, *opposite))
            elif name == "drawing":
                seen.drawing = attributes.get("id")
            elif name == "sheetData":
                data += 1

        read_xml(texts, start=start)
        if data > 1:
            raise BrokenXml("has its rows in two places")


def first_gap(used: Iterable[int], gap: int) -> int:
    """Return the last number before a blank stretch of `gap` numbers, or the last of all; rows or columns.

    >>> first_gap([3, 1, 2, 9], 5), first_gap([3, 1, 2, 8], 5), first_gap([7], 5)
    (3, 8, 7)
    """
    ordered = sorted(used)
    pairs = itertools.pairwise(ordered)
    return next((one for one, following in pairs if following - one > gap), ordered[-1])


def _whole(text: str | None) -> int:
    return int(text) if text and re.fullmatch("[0-9]{1,7}", text, re.ASCII) else 0


def _is_a_day(raw: bytes) -> bool:
    try:
        return 0.0 <= float(raw) <= LAST_DAY
    except ValueError:
        return True  # no number at all: the value reader says so


def _saved(cell: _Cell) -> bool:
    value = _VALUE.search(cell.body)
    if value is not None and value[1].strip():
        return True
    # A formula that gave an empty text has been worked out: its cell is of the kind str and has a value.
    return cell.kind == b"str" and b"<v" in cell.body


def _tag_of(text: bytes, at: int) -> int:
    """Return a place inside the start tag of the cell that the byte `at` stands in."""
    return text.rfind(b"<c ", 0, at) + 3


def _cell_around(text: bytes, at: int, base: int) -> _Cell | None:
    """Return the filled cell in whose start tag the byte `at` stands; None if it is in none."""
    start = text.rfind(b"<", 0, at)
    cell = _CELL.match(text, max(start, 0))
    if cell is None:
        return None
    letters, digits, attributes, body = cell.groups()
    kind = _TYPE.search(attributes)
    position = int(digits) - 1, _column(letters)
    return _Cell(position, attributes, base + cell.start(3), kind[1] if kind else b"", body, base + cell.start(4))


@functools.cache
def _column(letters: bytes) -> int:
    # Their length was looked at with the extents: they are at most 16,384.
    return column_number(letters.decode())


def altered(pieces: Iterable[bytes], seen: SheetLook, *, far: list[tuple[tuple[int, int], bytes]]) -> Iterator[bytes]:
    """Return the part as the value reader gets it: edited, and without the far cells, which go to `far`."""
    edits = sorted(seen.edits)
    at = done = 0
    for kind, text in blocks(pieces):
        out: list[bytes] = []
        copied = 0
        while done < len(edits) and edits[done].end <= at + len(text):
            edit = edits[done]
            out += (text[copied : edit.start - at], edit.text)
            copied = edit.end - at
            done += 1
        out.append(text[copied:])
        at += len(text)
        changed = b"".join(out)
        yield _near(changed, seen, far) if seen.far and kind == "rows" else changed


def _near(text: bytes, seen: SheetLook, far: list[tuple[tuple[int, int], bytes]]) -> bytes:
    def moved(cell: re.Match[bytes]) -> bytes:
        position = int(cell[2]) - 1, _column(cell[1])
        if position[0] < seen.height and position[1] < seen.width:
            return cell[0]
        far.append((position, cell[3] + b">" + cell[4] + b"</c>"))
        return b""

    return _CELL.sub(moved, text)


def first_misfit(pieces: Iterable[bytes], *, text_count: int) -> tuple[str, str] | None:
    """Return the address of the first cell whose value does not fit its kind, and what is wrong with it.

    The value reader stops at such a cell and does not say which it is; looking for it takes longer than
    reading, so it is done only then.
    """
    for kind, text in blocks(pieces):
        if kind != "rows":
            continue
        for cell in _CELL.finditer(text):
            type_, value = _TYPE.search(cell[3]), _VALUE.search(cell[4])
            reason = _misfit(type_[1] if type_ else b"n", value[1] if value else b"", text_count)
            if reason:
                return (cell[1] + cell[2]).decode(), reason
    return None


def _misfit(kind: bytes, value: bytes, text_count: int) -> str | None:
    shown = repr(text_of(value[:60]))
    if kind == b"s":
        number = int(value) if value.strip().isdigit() and len(value) < 12 else -1
        return None if not value or 0 <= number < text_count else f"refers to a text {shown} that the file has not"
    if kind == b"n" and value:
        try:
            float(value)
        except ValueError:
            return f"{shown} is stored as a number"
        return None if value == value.strip() and b"_" not in value else f"{shown} is stored as a number"
    if kind not in (b"n", b"b", b"e", b"d", b"str", b"inlineStr"):
        return f"is of a kind {text_of(kind[:40])!r}, which no cell is"
    return None
