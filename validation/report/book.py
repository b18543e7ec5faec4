"""A workbook to be read, filtered and printed: every cell that is no number of ours is typed as text."""

from __future__ import annotations

import datetime
import io
import re
import zipfile
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from enum import StrEnum
from itertools import islice
from pathlib import Path
from typing import Any, Final, Generic, TypeVar

from openpyxl import Workbook
from openpyxl.cell import Cell as StyledCell
from openpyxl.styles import Alignment, Border, Font, PatternFill, Side
from openpyxl.worksheet.properties import PageSetupProperties
from openpyxl.writer.excel import ExcelWriter

from instruments.origin import column_letters
from validation.report.cell_text import CUT, cell_text, em_of, lines_of

__all__ = ["MOST_ROWS", "Book", "Column", "Look", "Page", "Shown", "Table"]

MOST_ROWS: Final = 1_048_576
"""Rows of a sheet (ECMA-376-1, 18.3.1.73)."""

_SPACES_COUNT: Final = re.compile(r"\s.*|.*\s|.*(?:\n|  ).*", re.DOTALL)
_MARKUP: Final = str.maketrans({"&": "&amp;", "<": "&lt;", ">": "&gt;"})

# --- how a cell looks ---------------------------------------------------------------------------------------


class Look(StrEnum):
    """How a cell looks; printed grey, danger is dark and its letters white, fault grey and bold, gap pale."""

    TEXT = "text"
    COUNT = "count"
    SHARE = "share"
    HEADING = "heading"
    COUNT_HEADING = "heading over counts"
    DANGER = "danger"
    FAULT = "fault"
    GAP = "gap"
    TOTAL = "total"
    TITLE = "title"
    SECTION = "section"
    PLAIN = "plain"
    SMALL = "small"


@dataclass(frozen=True, slots=True, kw_only=True)
class _Style:
    size: int = 9
    bold: bool = False
    italic: bool = False
    colour: str = "000000"
    fill: str = ""
    grid: bool = True
    under: bool = False
    right: bool = False
    vertical: str = "top"
    number_format: str = ""

    @property
    def em_px(self) -> float:
        """Pixels of the font's size, at 96 to the inch."""
        return self.size * 96 / 72

    @property
    def line_pt(self) -> float:
        """Points that one line takes, as Excel spaces Arial."""
        return self.size * 4 / 3


_FONT: Final = "Arial"  # on Windows, and fonts of equal widths everywhere else
_STYLES: Final[Mapping[Look, _Style]] = {
    Look.TEXT: _Style(),
    Look.COUNT: _Style(right=True, number_format="#,##0"),
    Look.SHARE: _Style(right=True, number_format="0%"),
    Look.HEADING: _Style(bold=True, fill="D9D9D9", under=True),
    Look.COUNT_HEADING: _Style(bold=True, fill="D9D9D9", under=True, right=True),
    Look.DANGER: _Style(bold=True, colour="FFFFFF", fill="9C0006"),
    Look.FAULT: _Style(bold=True, fill="FFC000"),
    Look.GAP: _Style(fill="E2EFF9"),
    Look.TOTAL: _Style(bold=True, fill="F2F2F2", right=True, number_format="#,##0"),
    Look.TITLE: _Style(size=16, bold=True, grid=False, vertical="center"),
    Look.SECTION: _Style(size=11, bold=True, grid=False, under=True, vertical="bottom"),
    Look.PLAIN: _Style(grid=False),
    Look.SMALL: _Style(size=8, italic=True, grid=False),
}


def _dress(cell: Any, style: _Style) -> None:
    thin = Side(style="thin", color="A6A6A6") if style.grid else Side()
    cell.font = Font(name=_FONT, size=style.size, bold=style.bold, italic=style.italic, color=f"FF{style.colour}")
    if style.fill:
        cell.fill = PatternFill("solid", start_color=style.fill, end_color=style.fill)
    under = Side(style="medium", color="404040") if style.under else thin
    cell.border = Border(left=thin, right=thin, top=thin, bottom=under)
    # The indent keeps a number off the text in the next column.
    across = {"horizontal": "right", "indent": 1} if style.right else {}
    wrapped = not style.number_format
    cell.alignment = Alignment(wrap_text=wrapped, vertical=style.vertical, **across)
    if style.number_format:
        cell.number_format = style.number_format
    else:
        # Text stays text when somebody edits the cell.
        cell.quotePrefix = True


# A column's width counts digits of the workbook's usual font (in Arial 10, 7 pixels each); 5 are the cell's edges.
_DIGIT_PX: Final = 7.0
_EDGES_PX: Final = 5.0
_INDENT_PX: Final = 9.0
# Screens and printers set the same words up to so much wider than the font's metrics.
_WIDER: Final = 1.06
_PADDING_PT: Final = 2.5
_HIGHEST_PT: Final = 409.0  # a row is no higher (Excel's specification limits)


def _edges_px(style: _Style) -> float:
    return _EDGES_PX + _INDENT_PX if style.right else _EDGES_PX


def _room_em(width: float, style: _Style) -> float:
    return round((width * _DIGIT_PX - _edges_px(style)) / (style.em_px * _WIDER), 2)


def _width_of(text: str, style: _Style) -> float:
    em = max((em_of(line, bold=style.bold) for line in text.split("\n")), default=0.0)
    return (em * style.em_px * _WIDER + _edges_px(style)) / _DIGIT_PX + 0.1


def _height_of(text: str, width: float, style: _Style) -> float:
    return lines_of(text, _room_em(width, style), bold=style.bold) * style.line_pt + _PADDING_PT


_LINE_PT: Final = _STYLES[Look.TEXT].line_pt
"""Of a row in a table, whose looks are all of one size."""


Value = str | int | float | None
Shown = Value | tuple[Value, Look]
"""A value with the look of its kind, or with one of its own."""


# --- what a sheet is ----------------------------------------------------------------------------------------

_Item = TypeVar("_Item")


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """One column of a table: heading, least and greatest width in characters, and how its cells look."""

    heading: str
    least: int = 6
    most: int = 40
    look: Look = Look.TEXT


@dataclass(frozen=True, slots=True, kw_only=True)
class Table(Generic[_Item]):
    """One sheet that is a table: headings that stay in sight and are printed on each page, and filters.

    Attributes
    ----------
    row
        What stands in the cells of an item's row.
    frozen
        Columns on the left that stay in sight.
    empty
        What the sheet says where there are no items.
    """

    name: str
    columns: tuple[Column, ...]
    items: Sequence[_Item]
    row: Callable[[_Item], Sequence[Shown]]
    frozen: int = 0
    empty: str = "none"


@dataclass(slots=True, kw_only=True)
class Page:
    """One sheet that is read from top to bottom: titles, paragraphs and small tables on one grid.

    Attributes
    ----------
    widths
        The grid's columns, in characters.
    """

    name: str
    widths: tuple[float, ...]
    _rows: list[_PageRow] = field(default_factory=list)

    def title(self, text: str) -> None:
        """Add the page's title."""
        self._across(text, Look.TITLE)

    def section(self, text: str) -> None:
        """Add the title of what follows, and the space before it."""
        self._rows.append(_PageRow(cells=(), height=6.0))
        self._across(text, Look.SECTION)

    def paragraph(self, text: str, *, look: Look = Look.PLAIN) -> None:
        """Add text across the page."""
        self._across(text, look)

    def table(self, headings: Sequence[str], rows: Iterable[Sequence[Shown]], *, spans: Sequence[int]) -> None:
        """Add a small table; `spans` are the grid columns that each of its columns takes."""
        made = list(rows)
        counted = [bool(made) and all(_is_count(row[index]) for row in made) for index in range(len(spans))]
        looks = [Look.COUNT_HEADING if each else Look.HEADING for each in counted]
        self._row(list(zip(headings, looks, strict=True)), spans)
        for row in made:
            self._row(row, spans)

    def _across(self, text: str, look: Look) -> None:
        self._row([(text, look)], (len(self.widths),))

    def _row(self, values: Sequence[Shown], spans: Sequence[int]) -> None:
        cells: list[tuple[int, int, Value, Look]] = []
        at, height = 0, 0.0
        for shown, span in zip(values, spans, strict=True):
            value, look = _look(shown, Look.TEXT)
            style = _STYLES[look]
            if isinstance(value, str):
                value = _page_text(value)
                # Merged cells are never fitted on opening.
                height = max(height, _height_of(value, sum(self.widths[at : at + span]), style))
            else:
                height = max(height, style.line_pt + _PADDING_PT)
            cells.append((at, span, value, look))
            at += span
        self._rows.append(_PageRow(cells=tuple(cells), height=min(height, _HIGHEST_PT)))


@dataclass(frozen=True, slots=True, kw_only=True)
class _PageRow:
    cells: tuple[tuple[int, int, Value, Look], ...]
    height: float


_MOST_ON_A_PAGE_ROW: Final = 3_000


def _page_text(text: str) -> str:
    text = cell_text(text)
    return text if len(text) <= _MOST_ON_A_PAGE_ROW else text[: _MOST_ON_A_PAGE_ROW - len(CUT)] + CUT


def _is_count(shown: Shown) -> bool:
    return not isinstance(shown[0] if isinstance(shown, tuple) else shown, str)


def _look(shown: Shown, usual: Look) -> tuple[Value, Look]:
    if isinstance(shown, tuple):
        return shown
    if isinstance(shown, str) or shown is None:
        return shown, usual if usual not in (Look.COUNT, Look.SHARE) else Look.TEXT
    return shown, Look.SHARE if isinstance(shown, float) else Look.COUNT


# --- the workbook -------------------------------------------------------------------------------------------

# A clock in the file would give the same audit another digest each time.
_NO_TIME: Final = datetime.datetime(1980, 1, 1)  # noqa: DTZ001 (a workbook's times have no zone)
_ZIP_TIME: Final = (1980, 1, 1, 0, 0, 0)
_SAMPLE: Final = 2_000
_MOST_IN_HEADER: Final = 80
_ROWS_AT_ONCE: Final = 100
_MANY_ROWS: Final = 250_000
_NO_ROWS: Final = re.compile(rb"<sheetData\s*/>|<sheetData></sheetData>")
_EXTENT: Final = re.compile(rb'<dimension ref="[^"]{0,40}"')


@dataclass(frozen=True, slots=True, kw_only=True)
class _Sheet:
    """A sheet ready to be written: its frame is openpyxl's, its rows are made as they are written."""

    extent: str
    rows: Callable[[], Iterator[str]]
    many: bool = False


class Book:
    """A workbook that is made of tables and pages and is the same, byte for byte, for the same contents.

    openpyxl makes everything but the rows: looks, widths, filters, page setup, names. The rows are
    streamed between them: openpyxl's own stream makes an object and an element of every cell, and takes
    four times as long for 30,000 findings.

    Parameters
    ----------
    title
        What it is, for the document's properties and the header of each printed page.
    source
        The list's name, for the header.
    footer
        What stands at the foot of each printed page, left of the page's number.
    """

    def __init__(self, *, title: str, source: str, footer: str) -> None:
        self._title = title
        self._source = source
        self._footer = footer
        self._book = Workbook()
        self._book.remove(self._book.active)
        # Widths are counted in digits of this font; openpyxl has no other way to it.
        self._book._named_styles["Normal"].font = Font(name=_FONT, size=10)
        self._book.properties.creator = "Ferrule"
        self._book.properties.title = cell_text(title)[:255]
        self._book.properties.created = self._book.properties.modified = _NO_TIME
        self._sheets: list[_Sheet] = []
        self._style_ids: dict[Look, int] = {}

    def add_page(self, page: Page) -> None:
        """Add a sheet that is read from top to bottom."""
        sheet = self._sheet(page.name, page.widths)
        sheet.sheet_view.showGridLines = False
        for number, row in enumerate(page._rows, start=1):
            for at, span, _, _ in row.cells:
                if span > 1:
                    ends = f"{column_letters(at)}{number}:{column_letters(at + span - 1)}{number}"
                    sheet.merged_cells.add(ends)
        extent = f"A1:{column_letters(len(page.widths) - 1)}{max(len(page._rows), 1)}"
        self._sheets.append(_Sheet(extent=extent, rows=lambda: self._page_rows(page)))

    def add_table(self, table: Table[Any]) -> None:
        """Add a sheet that is a table; as many sheets as it takes, where one holds no more rows."""
        widths = _widths(table)
        most = MOST_ROWS - 1
        starts = range(0, max(len(table.items), 1), most)
        for number, start in enumerate(starts, start=1):
            items = table.items[start : start + most] if len(starts) > 1 else table.items
            self._add_part(table, items, table.name if number == 1 else f"{table.name} {number}", widths)

    def _add_part(self, table: Table[Any], items: Sequence[Any], name: str, widths: Sequence[float]) -> None:
        sheet = self._sheet(name, widths)
        extent = f"A1:{column_letters(len(widths) - 1)}{max(len(items), 1) + 1}"
        sheet.freeze_panes = f"{column_letters(table.frozen)}2"
        sheet.print_title_rows = "1:1"
        sheet.auto_filter.ref = extent
        self._sheets.append(
            _Sheet(
                extent=extent,
                rows=lambda: self._table_rows(table, items, widths),
                many=len(items) > _MANY_ROWS,
            )
        )

    def save(self, path: Path) -> None:
        """Write the workbook; OSError where it cannot be written."""
        for look, style in _STYLES.items():
            cell = StyledCell(self._book.worksheets[0], row=1, column=1)
            _dress(cell, style)
            self._style_ids[look] = int(cell.style_id)
        frame = io.BytesIO()
        # Workbook.save() would set the clock.
        ExcelWriter(self._book, zipfile.ZipFile(frame, "w")).save()
        names = [sheet.path.lstrip("/") for sheet in self._book.worksheets]
        sheets = dict(zip(names, self._sheets, strict=True))
        with zipfile.ZipFile(frame) as parts, zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as package:
            for name in parts.namelist():
                entry = zipfile.ZipInfo(name, _ZIP_TIME)
                entry.compress_type = zipfile.ZIP_DEFLATED
                entry.create_system = 0  # else the machine's own
                made = sheets.get(name)
                with package.open(entry, "w", force_zip64=made is not None and made.many) as part:
                    for some in [parts.read(name)] if made is None else _filled(parts.read(name), made):
                        part.write(some)

    def _sheet(self, name: str, widths: Sequence[float]) -> Any:
        sheet = self._book.create_sheet(name)
        for number, width in enumerate(widths):
            sheet.column_dimensions[column_letters(number)].width = width
        sheet.page_setup.orientation = "landscape"
        sheet.page_setup.paperSize = 9  # A4
        sheet.page_setup.fitToWidth = 1
        sheet.page_setup.fitToHeight = 0
        sheet.sheet_properties.pageSetUpPr = PageSetupProperties(fitToPage=True)
        margins = sheet.page_margins
        margins.left = margins.right = 0.35
        margins.top, margins.bottom, margins.header, margins.footer = 0.6, 0.55, 0.3, 0.25
        head, foot = sheet.oddHeader, sheet.oddFooter
        head.left.text, head.center.text, head.right.text = (
            _in_header(self._title),
            "&A",
            _in_header(self._source),
        )
        foot.left.text, foot.right.text = _in_header(self._footer), "page &P of &N"
        for part in (head.left, head.center, head.right, foot.left, foot.right):
            part.font, part.size = f"{_FONT},Regular", 9
        head.left.font = f"{_FONT},Bold"
        return sheet

    def _page_rows(self, page: Page) -> Iterator[str]:
        for number, row in enumerate(page._rows, start=1):
            cells: list[str] = []
            for at, span, value, look in row.cells:
                cells.append(self._cell(column_letters(at), number, value, look))
                # The cells under a merged one carry its border.
                beside = range(at + 1, at + span)
                cells.extend(self._cell(column_letters(each), number, None, look) for each in beside)
            yield f'<row r="{number}" ht="{row.height:g}" customHeight="1">{"".join(cells)}</row>'

    def _table_rows(self, table: Table[Any], items: Sequence[Any], widths: Sequence[float]) -> Iterator[str]:
        columns = [
            (column_letters(index), column.look, _room_em(width, _STYLES[Look.TEXT]))
            for index, (column, width) in enumerate(zip(table.columns, widths, strict=True))
        ]
        yield self._heading_row(table, widths)
        if not items:
            widest = max(range(len(columns)), key=lambda index: widths[index])
            said = [table.empty if index == widest else None for index in range(len(columns))]
            yield self._table_row(2, columns, said)
        for number, item in enumerate(items, start=2):
            yield self._table_row(number, columns, table.row(item))

    def _heading_row(self, table: Table[Any], widths: Sequence[float]) -> str:
        cells: list[str] = []
        height = 0.0
        for index, (column, width) in enumerate(zip(table.columns, widths, strict=True)):
            look = _heading_look(column)
            cells.append(self._cell(column_letters(index), 1, column.heading, look))
            height = max(height, _height_of(column.heading, width, _STYLES[look]))
        # The buttons of the filters stand below the words.
        return f'<row r="1" ht="{height + _LINE_PT:g}" customHeight="1">{"".join(cells)}</row>'

    def _table_row(self, number: int, columns: Sequence[tuple[str, Look, float]], row: Sequence[Shown]) -> str:
        cells: list[str] = []
        lines = 1
        for (letters, usual, room_em), shown in zip(columns, row, strict=True):
            value, look = shown if isinstance(shown, tuple) else (shown, usual)
            if isinstance(value, str) and value:
                value = cell_text(value)
                if len(value) > room_em or "\n" in value:
                    lines = max(lines, lines_of(value, room_em, bold=_STYLES[look].bold))
            cells.append(self._cell(letters, number, value, look))
        height = min(lines * _LINE_PT + _PADDING_PT, _HIGHEST_PT)
        # Not customHeight: Excel fits the row anew when somebody edits it. LibreOffice would not fit one without ht.
        return f'<row r="{number}" ht="{height:g}">{"".join(cells)}</row>'

    def _cell(self, letters: str, row: int, value: Value, look: Look) -> str:
        style = self._style_ids[look]
        if value is None or value == "":
            return f'<c r="{letters}{row}" s="{style}"/>'
        if isinstance(value, str):
            return (
                f'<c r="{letters}{row}" s="{style}" t="inlineStr"><is><t xml:space="preserve">'
                f"{value.translate(_MARKUP)}</t></is></c>"
            )
        return f'<c r="{letters}{row}" s="{style}"><v>{value!r}</v></c>'


def _heading_look(column: Column) -> Look:
    return Look.COUNT_HEADING if _STYLES[column.look].right else Look.HEADING


def _filled(frame: bytes, sheet: _Sheet) -> Iterator[bytes]:
    """Yield a sheet with its rows where openpyxl left room for them, and with its true extent."""
    place = _NO_ROWS.search(frame)
    if place is None:
        raise ValueError("openpyxl wrote a sheet without a place for its rows")
    yield _EXTENT.sub(b'<dimension ref="%b"' % sheet.extent.encode(), frame[: place.start()], count=1)
    yield b"<sheetData>"
    rows = sheet.rows()
    while some := list(islice(rows, _ROWS_AT_ONCE)):
        yield "".join(some).encode()
    yield b"</sheetData>" + frame[place.end() :]


def _in_header(text: str) -> str:
    """Return a text for a page's header or footer: one line, no codes, and short: it holds 255 characters."""
    text = " ".join(cell_text(text).split())
    if len(text.replace("&", "&&")) > _MOST_IN_HEADER:
        text = text[:_MOST_IN_HEADER]
        while len(text.replace("&", "&&")) > _MOST_IN_HEADER - 3:
            text = text[:-1]
        text += "..."
    return text.replace("&", "&&")


def _widths(table: Table[Any]) -> list[float]:
    """Return widths that show each column's longest line, up to its greatest width; beyond, text wraps."""
    widths = [float(column.least) for column in table.columns]
    for item in islice(table.items, _SAMPLE):
        for index, (shown, column) in enumerate(zip(table.row(item), table.columns, strict=True)):
            value, look = _look(shown, column.look)
            if value is None or widths[index] >= column.most:
                continue
            text = value if isinstance(value, str) else f"{value:,}"
            width = _width_of(cell_text(text), _STYLES[look])
            widths[index] = min(max(widths[index], width), column.most)
    # No word of a heading is broken, however narrow its column.
    headings = (
        max(_width_of(word, _STYLES[_heading_look(column)]) for word in column.heading.split())
        for column in table.columns
    )
    return [round(max(both), 2) for both in zip(widths, headings, strict=True)]
