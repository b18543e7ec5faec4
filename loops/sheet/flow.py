"""Tables and paragraphs set one below the other: wrapped at their columns, continued on the next page."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Final, Literal, NamedTuple

from loops.sheet.font import MM_PER_POINT, printable
from loops.sheet.shapes import (
    GREY,
    HAIR_MM,
    RULE,
    SHADE,
    THIN_MM,
    Bounds,
    Box,
    Line,
    Link,
    Shape,
    Style,
    Text,
    Use,
    lowered,
    share,
    style,
)

BODY: Final = style(7.6)
STRONG: Final = style(7.6, bold=True)
SMALL: Final = style(6.7)
HEAD: Final = style(6.6, bold=True)
LABEL: Final = style(6.0, grey=GREY)
SECTION: Final = style(8.0, bold=True)

PAD_X: Final = 0.9
PAD_Y: Final = 0.75
ROW_MM: Final = 4.9
"""The least height of a row: room to write in by hand."""
TIGHT_PAD_Y: Final = 0.35
TIGHT: Final = 0.84
"""What is left of the least heights of rows where a sheet would else spill over by a little."""
TITLE_MM: Final = 5.2
GAP_MM: Final = 1.8
WRITE: Final = style(7.6)._replace(pitch_mm=2.8)
"""Of a paragraph that is no text but a dotted line to write on."""
PART_MM: Final = 25.0
"""The least part of a high row that is worth beginning at the foot of a page."""
DOTS_UP_MM: Final = 0.2
"""How far that line stands above the foot of its paragraph."""

Align = Literal["left", "right", "centre"]


class Para(NamedTuple):
    """One paragraph of a cell."""

    text: str
    style: Style = BODY


Cell = tuple[Para, ...]
"""The paragraphs of a cell."""

NOTHING: Final[Cell] = ()
TO_WRITE: Final[Cell] = (Para("", WRITE),)
"""A line to write on, for a value that nobody gave."""


def cell(text: str | None, style: Style = BODY) -> Cell:
    """Return a cell of one paragraph; a line to write on where the text is None."""
    return TO_WRITE if text is None else (Para(text, style),)


class Column(NamedTuple):
    """One column: its heading (lines parted by a line feed), its width in mm."""

    head: str
    width: float
    align: Align = "left"


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """A table with a title bar, column headings and rows.

    Attributes
    ----------
    shared
        Whether many tables have this title and these columns, so that their heading is made once.
    links
        For each row the anchor that it leads to, or nothing.
    under
        For each row the group of shapes that lies under it, or nothing.
    row_mm, tight
        Least height of a row; whether rows stand as close as they can.
    foot
        Paragraphs beneath its last row.
    """

    title: str
    columns: tuple[Column, ...]
    rows: Sequence[Sequence[Cell]]
    shared: bool = False
    links: Sequence[str] = ()
    under: Sequence[str] = ()
    row_mm: float = ROW_MM
    tight: bool = False
    foot: tuple[Para, ...] = ()

    @property
    def width(self) -> float:
        """Width in mm."""
        return sum(column.width for column in self.columns)


# --------------------------------------------------------------------------------------------------------
# Measuring and wrapping

_MEASURED: Final[tuple[dict[str, tuple[str, float]], dict[str, tuple[str, float]]]] = ({}, {})
_MOST_MEASURED: Final = 50_000
_LONGEST_MEASURED: Final = 200


def _measured(text: str, style: Style) -> tuple[str, float]:
    """Return a text as it can be printed, and its width in mm at a type size of one point."""
    known = _MEASURED[style.bold]
    found = known.get(text)
    if found is None:
        shown = printable(text)
        found = shown, style.face.width_mm(shown, 1.0)
        if len(text) <= _LONGEST_MEASURED:
            if len(known) >= _MOST_MEASURED:
                known.clear()
            known[text] = found
    return found


def width_mm(text: str, style: Style) -> float:
    """Width of a text in mm, as it is printed."""
    return _measured(text, style)[1] * style.size_pt


MOST_SET: Final = 4000
"""Characters of a text that are printed; a cell of a list may hold 32,767, and a sheet repeats it ten times."""

_BREAK_AFTER: Final = frozenset("-/,.;:_+&)]}")


def wrapped(text: str, style: Style, room_mm: float) -> list[str]:
    """Return a text in lines that fit, none of its characters lost but the blanks at which it breaks.

    A word wider than the room is broken, behind a dash, a stroke or a stop where it has one. What no sheet is for,
    a text of more than `MOST_SET` characters, is cut and says so.
    """
    if len(text) > MOST_SET:
        text = f"{text[:MOST_SET]} \u2026 (cut: {len(text):,} characters)"
    text, width = _measured(text, style)
    if width * style.size_pt <= room_mm:
        return [text]
    lines: list[str] = []
    line = ""
    blank = width_mm(" ", style)
    used = 0.0
    for word in text.split():
        width = width_mm(word, style)
        if line and used + blank + width <= room_mm:
            line, used = f"{line} {word}", used + blank + width
            continue
        if line:
            lines.append(line)
        while width > room_mm:
            piece, taken_mm = _fitting(word, style, room_mm)
            lines.append(piece)
            word = word[len(piece) :]
            width -= taken_mm
        line, used = word, width
    if line:
        lines.append(line)
    return lines or [""]


def _fitting(word: str, style: Style, room_mm: float) -> tuple[str, float]:
    """Return the beginning of a word that fits, at least one character, and its width."""
    advances = style.face.advances
    scale = style.size_pt * MM_PER_POINT / 1000.0
    used = used_after = 0.0
    fits = after = 0
    for sign in word:
        width = advances[sign] * scale
        if fits and used + width > room_mm:
            break
        used += width
        fits += 1
        if sign in _BREAK_AFTER:
            after, used_after = fits, used
    return (word[:after], used_after) if after * 2 > fits else (word[:fits], used)


_LONGEST_SHORTENED: Final = 2000
"""Characters of a text that so few lines could hold; the rest need not be measured."""


def shortened(text: str, style: Style, room_mm: float, most_lines: int = 1) -> tuple[list[str], bool]:
    """Return a text in at most so many lines, and whether it was cut short; a cut ends in an ellipsis."""
    lines = wrapped(text[:_LONGEST_SHORTENED], style, room_mm)
    if len(lines) <= most_lines and len(text) <= _LONGEST_SHORTENED:
        return lines, False
    lines += [""] * (most_lines - len(lines))
    last = lines[most_lines - 1]
    while last and width_mm(f"{last} \u2026", style) > room_mm:
        last = last[:-1].rstrip()
    return [*lines[: most_lines - 1], f"{last} \u2026" if last else "\u2026"], True


# --------------------------------------------------------------------------------------------------------
# Rows


SetLine = tuple[str, Style]


class SetRow(NamedTuple):
    """A row in lines; `pad` is left free above and below them."""

    cells: tuple[tuple[SetLine, ...], ...]
    height: float
    pad: float
    under: str = ""
    link: str = ""


def _height(lines: Iterable[SetLine]) -> float:
    return sum(look.pitch_mm for _, look in lines)


def set_row(
    cells: Sequence[Cell],
    columns: Sequence[Column],
    least_mm: float,
    pad: float = PAD_Y,
    under: str = "",
    link: str = "",
) -> SetRow:
    """Wrap the cells of a row at its columns."""
    made: list[tuple[SetLine, ...]] = []
    height = least_mm - 2 * pad
    for content, column in zip(cells, columns, strict=True):
        if not content:
            made.append(NOTHING)
            continue
        room_mm = column.width - 2 * PAD_X
        lines: list[SetLine] = []
        used = 0.0
        for para in content:
            text, look = para
            found = _MEASURED[look.bold].get(text)
            if found is not None and found[1] * look.size_pt <= room_mm:
                lines.append((found[0], look))
                used += look.pitch_mm
            else:
                broken = wrapped(text, look, room_mm)
                lines.extend((line, look) for line in broken)
                used += look.pitch_mm * len(broken)
        made.append(tuple(lines))
        height = max(height, used)
    return SetRow(tuple(made), height + 2 * pad, pad, under, link)


def _split(row: SetRow, room_mm: float, least_mm: float) -> tuple[SetRow, SetRow | None]:
    """Return what of a row fits, at least one line of each cell, and what is left."""
    first: list[tuple[SetLine, ...]] = []
    rest: list[tuple[SetLine, ...]] = []
    height = least_mm
    left = False
    for lines in row.cells:
        if not lines:
            first.append(lines)
            rest.append(())
            continue
        count, used = 1, lines[0][1].pitch_mm
        while count < len(lines) and used + lines[count][1].pitch_mm + 2 * row.pad <= room_mm:
            used += lines[count][1].pitch_mm
            count += 1
        height = max(height, used + 2 * row.pad)
        left = left or count < len(lines)
        first.append(lines[:count])
        rest.append(lines[count:])
    if not left:
        return row, None
    remaining = max(_height(lines) + 2 * row.pad if lines else 0.0 for lines in rest)
    return (
        SetRow(tuple(first), height, row.pad, row.under, row.link),
        SetRow(tuple(rest), max(least_mm, remaining), row.pad, "", row.link),
    )


def draw_row(row: SetRow, columns: Sequence[Column], left: float, top: float, out: list[Shape]) -> None:
    """Draw the texts and the dotted lines of a row."""
    pad = row.pad
    bottom = top + row.height
    if row.under:
        out.append(Use(row.under, top + pad))
    if row.link:
        out.append(Link(Bounds(left, top, left + sum(column.width for column in columns), bottom), row.link))
    right = left
    for lines, (_, width, align) in zip(row.cells, columns, strict=True):
        inner = right + PAD_X
        right += width
        if not lines:
            continue
        y = top + pad
        if len(lines) == 1 and lines[0][1] is WRITE:
            y = bottom - pad - WRITE.pitch_mm
        box = Bounds(inner, top, right - PAD_X, bottom)
        for text, look in lines:
            if look is WRITE:
                dots = y + WRITE.pitch_mm - DOTS_UP_MM
                out.append(Line(inner, dots, box.right, dots, THIN_MM, GREY, True))
            elif text:
                start = inner
                if align != "left":
                    spare = box.right - inner - width_mm(text, look)
                    start += spare if align == "right" else spare / 2.0
                out.append(Text(start, y + look.ascent_mm, text, look, box))
            y += look.pitch_mm


# --------------------------------------------------------------------------------------------------------
# Tables


@lru_cache(maxsize=4096)
def _head_lines(column: Column) -> tuple[str, ...]:
    if not column.head:
        return ()
    room_mm = column.width - 2 * PAD_X
    return tuple(line for part in column.head.split("\n") for line in wrapped(part, HEAD, room_mm))


def head_mm(columns: Sequence[Column]) -> float:
    """Height of the title bar and the column headings of a table."""
    lines = max((len(_head_lines(column)) for column in columns), default=0)
    return TITLE_MM + (lines * HEAD.pitch_mm + 2 * PAD_Y if lines else 0.0)


def heading(title: str, columns: Sequence[Column], left: float, top: float) -> list[Shape]:
    """Return the shapes of a title bar and of column headings."""
    width = sum(column.width for column in columns)
    bottom = top + head_mm(columns)
    shapes = title_bar(title, left, top, width)
    row = top + TITLE_MM
    if bottom > row:
        x = left
        for column in columns:
            y = row + PAD_Y
            box = Bounds(x + PAD_X, row, x + column.width - PAD_X, bottom)
            for text in _head_lines(column):
                spare = column.width - 2 * PAD_X - width_mm(text, HEAD)
                shift = {"left": 0.0, "right": spare, "centre": spare / 2.0}[column.align]
                shapes.append(Text(x + PAD_X + shift, y + HEAD.ascent_mm, text, HEAD, box))
                y += HEAD.pitch_mm
            x += column.width
            if x < left + width - HAIR_MM:
                shapes.append(Line(x, row, x, bottom, HAIR_MM, RULE))
        shapes.append(Line(left, bottom, left + width, bottom, THIN_MM))
    return shapes


def title_bar(title: str, left: float, top: float, width: float) -> list[Shape]:
    """Return a shaded bar with a title, cut short where it must be: its whole stands elsewhere."""
    bottom = top + TITLE_MM
    text = shortened(title, SECTION, width - 2 * PAD_X)[0][0]
    y = top + (TITLE_MM + SECTION.ascent_mm - SECTION.descent_mm) / 2.0
    box = Bounds(left + PAD_X, top, left + width - PAD_X, bottom)
    return [
        Box(left, top, left + width, bottom, 0.0, SHADE),
        Text(left + PAD_X, y, text, SECTION, box),
        Line(left, top, left + width, top, THIN_MM),
    ]


CONTINUED: Final = " (continued)"


@lru_cache(maxsize=4096)
def _shared_heading(title: str, columns: tuple[Column, ...], left: float) -> str:
    heads = "|".join(f"{column.head}/{column.width:g}/{column.align}" for column in columns)
    return share(f"{title}|{left:g}|{heads}", lambda: heading(title, columns, left, 0.0))


class SetTable(NamedTuple):
    """A table with its rows in lines."""

    table: Table
    rows: tuple[SetRow, ...]
    foot: SetRow | None
    height: float


def set_table(table: Table) -> SetTable:
    """Wrap the rows of a table."""
    columns = table.columns
    least_mm, pad = (table.row_mm * TIGHT, TIGHT_PAD_Y) if table.tight else (table.row_mm, PAD_Y)
    none = ("",) * len(table.rows)
    under, links = table.under or none, table.links or none
    rows = tuple(
        set_row(row, columns, least_mm, pad, below, link)
        for row, below, link in zip(table.rows, under, links, strict=True)
    )
    foot = None
    height = head_mm(columns) + sum(row.height for row in rows)
    feet = table.foot
    if width_mm(table.title, SECTION) > table.width - 2 * PAD_X:
        feet = (Para(table.title, SMALL), *feet)  # the bar shows its beginning only
    if feet:
        foot = set_row((feet,), (Column("", table.width),), 0.0, pad)
        height += foot.height
    return SetTable(table, rows, foot, height)


class Flow:
    """Pages filled from the top, one block below the other.

    Parameters
    ----------
    left, width, bottom
        Of the part of the page that is filled, in mm.
    first_top, next_top
        Top of that part on the first page and on those that follow.
    done
        Takes each page as soon as it is full, so that none is kept but the last.
    """

    def __init__(
        self,
        *,
        left: float,
        width: float,
        bottom: float,
        first_top: float,
        next_top: float,
        done: Callable[[list[Shape]], None] | None = None,
    ) -> None:
        self.left = left
        self.width = width
        self.bottom = bottom
        self.whole = bottom - next_top
        self._next_top = next_top
        self._done = done
        self.pages: list[list[Shape]] = [[]]
        self.y = first_top
        self.fresh = True

    @property
    def room(self) -> float:
        """What is left of the page, in mm."""
        return self.bottom - self.y

    @property
    def page(self) -> list[Shape]:
        """The shapes of the page being filled."""
        return self.pages[-1]

    def new_page(self) -> None:
        """Go on to the next page."""
        if self._done is not None:
            self._done(self.pages.pop())
        self.pages.append([])
        self.y = self._next_top
        self.fresh = True

    def need(self, height: float) -> None:
        """Go on to the next page unless the height is left, or is more than a page holds."""
        if not self.fresh and self.room < height <= self.whole:
            self.new_page()

    def skip(self, height: float) -> None:
        """Leave a gap, unless the page is still empty."""
        if not self.fresh:
            self.y = min(self.y + height, self.bottom)

    def took(self, height: float) -> None:
        """Move down by what was drawn."""
        self.y += height
        self.fresh = False

    def back(self, height: float) -> None:
        """Take a gap back, so that what comes next touches what was drawn; nothing at the top of a page."""
        if not self.fresh:
            self.y -= height

    def draw(self, height: float, shapes: Iterable[Shape]) -> None:
        """Draw shapes made from 0 mm downwards, whole, on this page or the next."""
        self.need(height)
        self.page.extend(lowered(shape, self.y) for shape in shapes)
        self.took(height)

    def add(self, made: SetTable, *, together_mm: float = 60.0) -> None:
        """Draw a table; one of at most `together_mm` is not parted where a page holds it."""
        if made.height <= together_mm:
            self.need(made.height)
        else:
            first = made.rows[0].height if made.rows else 0.0
            self.need(head_mm(made.table.columns) + (PART_MM if self._is_tall(first) else first))
        self._draw(made)
        self.skip(GAP_MM)

    def beside(self, one: SetTable, other: SetTable) -> None:
        """Draw two tables side by side where a page holds both, else one below the other."""
        height = max(one.height, other.height)
        if height > self.whole:
            self.add(one)
            self.add(other)
            return
        self.need(height)
        top, left = self.y, self.left
        self._draw(one)
        ends, self.y = self.y, top
        self.left = left + self.width - other.table.width
        self._draw(other)
        self.left = left
        self.y = max(ends, self.y)
        self.skip(GAP_MM)

    def _is_tall(self, height: float) -> bool:
        """Whether a row is too high to be kept in one piece at the cost of half an empty page."""
        return height > self.whole / 2.0

    def _draw(self, made: SetTable) -> None:
        table = made.table
        rows: list[tuple[SetRow, tuple[Column, ...]]] = [(row, table.columns) for row in made.rows]
        if made.foot is not None:
            rows.append((made.foot, (Column("", table.width),)))
        rows.reverse()
        more = False
        while True:
            top = self.y
            title = f"{table.title}{CONTINUED}" if more else table.title
            if table.shared:
                self.page.append(Use(_shared_heading(title, table.columns, self.left), top))
            else:
                self.page.extend(heading(title, table.columns, self.left, top))
            self.took(head_mm(table.columns))
            self._rows(rows, table, self.y)
            self.page.append(Box(self.left, top, self.left + table.width, self.y))
            if not rows:
                return
            self.new_page()
            more = True

    def _rows(self, waiting: list[tuple[SetRow, tuple[Column, ...]]], table: Table, body: float) -> None:
        """Draw what fits of the rows that wait, the next one last in the list."""
        grid_ends = body
        while waiting:
            row, columns = waiting[-1]
            rest = None
            if row.height > self.room:
                if self.y > body and not (self._is_tall(row.height) and self.room >= PART_MM):
                    break
                row, rest = _split(row, self.room, table.row_mm)
            waiting.pop()
            if self.y > body:
                self.page.append(Line(self.left, self.y, self.left + table.width, self.y, HAIR_MM, RULE))
            draw_row(row, columns, self.left, self.y, self.page)
            self.took(row.height)
            if columns is table.columns:
                grid_ends = self.y
            if rest is not None:
                waiting.append((rest, columns))
                break
        x = self.left
        for column in table.columns[:-1]:
            x += column.width
            if grid_ends > body:
                self.page.append(Line(x, body, x, grid_ends, HAIR_MM, RULE))
