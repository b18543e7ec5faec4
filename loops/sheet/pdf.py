"""loop-sheets.pdf: draws the pages of all loops, with bookmarks and links, and forgets each page once it is drawn."""

from __future__ import annotations

import math
import zlib
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import replace
from functools import cache
from pathlib import Path
from typing import Any, BinaryIO, Final, NamedTuple

from reportlab.pdfbase import pdfdoc, pdfmetrics
from reportlab.pdfbase.ttfonts import TTFont
from reportlab.pdfgen.canvas import Canvas

from loops.plant import Plant
from loops.sheet import font
from loops.sheet.choice import Choice, chosen
from loops.sheet.content import sheet_content, source_of
from loops.sheet.index import TITLE, entries_of, lay_index, outline_of
from loops.sheet.layout import INDEX, PAGE_HEIGHT, PAGE_WIDTH, sheet_pages
from loops.sheet.mark import TYPE, Known, Marks, Parts, change_of, mark_of, packed, parts_of
from loops.sheet.pack import LoopOnPaper, Sheets, sheets_of
from loops.sheet.shapes import BLACK, Box, Circle, Line, Link, Page, Shape, Style, Text, Use, group

__all__ = ["write_sheets"]

EVERY: Final = Choice()

_POINTS: Final = 72.0 / 25.4
_SIZE: Final = (PAGE_WIDTH * _POINTS, PAGE_HEIGHT * _POINTS)
_LANGUAGE: Final = "en"
_VERSION: Final = (1, 4)
"""Of the format: the first that knows a language and shows the title."""
_DOTS: Final = "[0.6 1.8] 0 d"
_SOLID: Final = "[] 0 d"
_RESOURCES: Final = "Resources of the sheets"
_MOST_KEPT: Final = 50_000
_COMPRESSION: Final = 4
"""Half the time of the usual level for a tenth more in size."""


def write_sheets(
    plant: Plant,
    path: Path,
    *,
    notes: Mapping[str, Sequence[str]] | None = None,
    on_sheet: Callable[[int, int], None] | None = None,
    choice: Choice = EVERY,
    before: Known | None = None,
) -> Drawn:
    """Write the sheets of the loops that have an electrical signal; the same bytes for the same plant and choice.

    Parameters
    ----------
    plant
        The whole plant.
    path
        The file to write.
    notes
        Open findings in plain words, by the loop's name; None where the plant was not audited.
    on_sheet
        Called after each sheet with its number and their count.
    choice
        Which sheets are wanted.
    before
        The marks of an earlier pack: only what is not as it was then is drawn, and says what changed.

    Raises
    ------
    OSError
        The file cannot be written.
    NothingChosen
        No loop has what the choice names.
    """
    sheets = chosen(sheets_of(plant), choice, plant)
    marks: dict[str, Parts] = {}
    changes: dict[str, str] = {}
    if before is not None:
        sheets, unchanged = _changed(sheets, plant, before, changes)
        marks.update(unchanged)
    entries = entries_of(sheets, notes)
    source = source_of(plant)
    with path.open("wb") as file:
        title = " - ".join(text for text in (TITLE, plant.data.name, str(choice)) if text)
        drawing = _Drawing(file, title=title)
        blank: list[None] = []
        lay_index(plant, sheets, entries, source, emit=lambda page: blank.append(None))
        drawing.reserve(INDEX, len(blank))
        pages: dict[str, int] = {}
        total = len(sheets.drawn)
        for number, (loop, entry) in enumerate(zip(sheets.drawn, entries, strict=True), start=1):
            own = None if notes is None else notes.get(loop.name, ())
            content = sheet_content(loop, plant, notes=own)
            parts = marks[loop.name] = parts_of(content)
            pages[entry.anchor] = drawing.number
            anchors = (entry.anchor, entry.area_anchor) if entry.area_anchor else (entry.anchor,)
            for page in sheet_pages(
                content,
                anchors=anchors,
                first_page=drawing.number,
                mark=mark_of(parts),
                changed=changes.get(loop.name, ""),
            ):
                drawing.page(page)
            if on_sheet is not None:
                on_sheet(number, total)
        count = drawing.number - 1 - len(blank)
        lay_index(plant, sheets, entries, source, emit=drawing.reserved, pages=pages, count=count)
        for level, title, anchor in outline_of(entries):
            drawing.bookmark(level, title, anchor)
        drawing.keep(marks)
        drawing.save()
    gone = tuple(name for name in before if name not in marks) if before is not None and not choice else ()
    return Drawn(loops=total, marks=marks, unchanged=len(marks) - total, gone=gone)


class Drawn(NamedTuple):
    """What a pack holds: the number of loops drawn, the marks of all, and what was left out for being as it was.

    `gone` are loops of the earlier pack that have no sheet any more.
    """

    loops: int
    marks: Marks
    unchanged: int = 0
    gone: tuple[str, ...] = ()


def _changed(sheets: Sheets, plant: Plant, before: Known, changes: dict[str, str]) -> tuple[Sheets, dict[str, Parts]]:
    """Return the sheets that are not as they were, and the marks of the others; fill in what changed."""
    drawn: list[LoopOnPaper] = []
    unchanged: dict[str, Parts] = {}
    for loop in sheets.drawn:
        parts = parts_of(sheet_content(loop, plant))
        change = change_of(parts, before.get(loop.name))
        if change is None:
            unchanged[loop.name] = parts
        else:
            drawn.append(loop)
            changes[loop.name] = str(change)
    return replace(sheets, drawn=tuple(drawn), left_out=()), unchanged


class _Document(pdfdoc.PDFDocument):  # type: ignore[misc]
    """A document that writes each page as soon as it is complete, all pages with the same resources.

    What the pages draw is nearly all that a long file is made of; kept to the end, it would be held
    in memory once for each page and once more for the whole file.
    """

    objectcounter: int  # of the base class

    def __init__(self, file: BinaryIO) -> None:
        super().__init__(compression=1, invariant=1, pdfVersion=_VERSION, lang=_LANGUAGE)
        self._file = file
        self._at = 0
        self._offsets: dict[int, int] = {}
        self._out(pdfdoc.PDFFile(self._pdfVersion).format(self))
        self._forms = pdfdoc.PDFDictionary()
        fonts = pdfdoc.PDFObjectReference(pdfdoc.BasicFonts)
        self.Reference(pdfdoc.PDFDictionary({"Font": fonts, "XObject": self._forms}), _RESOURCES)

    def _out(self, data: bytes) -> None:
        self._file.write(data)
        self._at += len(data)

    def addForm(self, name: str, form: Any) -> None:
        """Take a group of shapes, and let every page use it."""
        super().addForm(name, form)
        internal = self.getXObjectName(name)
        self._forms[internal] = pdfdoc.PDFObjectReference(internal)

    def reserve_page(self) -> str:
        """Give the next page its place in the file's order, and return its name."""
        name: str = self.thisPageName()
        self.Reference(None, name)
        self.Pages.addPage(pdfdoc.PDFObjectReference(name))
        self.pageCounter += 1
        self.inObject = None
        return name

    def write_page(self, name: str, code: str, links: Iterable[tuple[Sequence[float], str]]) -> None:
        """Write a reserved page that shows `code`; each link is a rectangle and the name of a page."""
        data = zlib.compress(code.encode("ascii"), _COMPRESSION)
        head = f"<< /Length {len(data)} /Filter /FlateDecode >>\nstream\n".encode("ascii")
        contents = self.write_plain(b"%b%b\nendstream" % (head, data))
        annotations = [
            self.write_plain(
                (
                    f"<< /Type /Annot /Subtype /Link /Rect [{' '.join(f'{each:.2f}' for each in rectangle)}] "
                    f"/Border [0 0 0] /Dest [{self._number(target)} 0 R /Fit] >>"
                ).encode("ascii")
            )
            for rectangle, target in links
        ]
        annots = f" /Annots [{' '.join(f'{number} 0 R' for number in annotations)}]" if annotations else ""
        self.write_plain(
            (
                f"<< /Type /Page /Parent {self._number(self.Reference(self.Pages).name)} 0 R "
                f"/MediaBox [0 0 {_SIZE[0]:.3f} {_SIZE[1]:.3f}] /Contents {contents} 0 R "
                f"/Resources {self._number(_RESOURCES)} 0 R{annots} >>"
            ).encode("ascii"),
            self._number(name),
        )

    def _number(self, name: str) -> int:
        number: int = self.idToObjectNumberAndVersion[name][0]
        return number

    def write_plain(self, data: bytes, number: int = 0) -> int:
        """Write an object in plain words and return its number, a new one where none is given."""
        if not number:
            number = self.objectcounter + 1
            self.objectcounter = number
        self._offsets[number] = self._at
        self._out(b"%d 0 obj\n%b\nendobj\n" % (number, data))
        return number

    def format(self) -> bytes:
        """Write what has not been written, and where everything stands."""
        catalog, info = self.Reference(self.Catalog), self.Reference(self.info)
        number = 1
        while number <= self.objectcounter:  # writing one object may bring another
            if number not in self._offsets:
                self._offsets[number] = self._at
                name = self.numberToId[number]
                self._out(pdfdoc.PDFIndirectObject(name, self.idToObject[name]).format(self))
            number += 1
        starts = self._at
        self._out(b"xref\n0 %d\n0000000000 65535 f \n" % number)
        for each in range(1, number):
            self._out(b"%010d 00000 n \n" % self._offsets[each])
        trailer = pdfdoc.PDFTrailer(startxref=starts, Size=number, Root=catalog, Info=info, ID=self.ID())
        self._out(trailer.format(self))
        return b""


class _Drawing:
    """A file of pages, drawn from shapes."""

    def __init__(self, file: BinaryIO, *, title: str) -> None:
        self._fonts = {False: _font(font.REGULAR), True: _font(font.BOLD)}
        self._canvas = Canvas(
            file,
            pagesize=_SIZE,
            invariant=1,
            lang=_LANGUAGE,
            initialFontName=self._fonts[False].fontName,  # else Helvetica, which nothing here is set in
        )
        self._document = self._canvas._doc = _Document(file)
        self._names = {
            weight: typeface.getSubsetInternalName(0, self._document)[1:] for weight, typeface in self._fonts.items()
        }
        self._shown: dict[tuple[str, bool], str | list[tuple[str, str]]] = {}
        self._forms: dict[str, str] = {}
        self._pages: dict[str, str] = {}
        self.number = 1
        canvas = self._canvas
        canvas.setTitle(font.printable(title))
        canvas.setSubject("One sheet a loop: devices, settings, wiring, power, check table")
        canvas.setAuthor("Ferrule")
        canvas.setCreator("Ferrule")
        canvas.setViewerPreference("DisplayDocTitle", "true")
        canvas.showOutline()

    def reserve(self, anchor: str, count: int) -> None:
        """Leave so many pages free; the anchor is the first of them."""
        self._anchor(anchor)
        self._free = iter([self._document.reserve_page() for _ in range(count)])
        self.number += count

    def page(self, page: Page) -> None:
        """Draw the next page."""
        for anchor in page.anchors:
            self._anchor(anchor)
        self._write(page, self._document.reserve_page())
        self.number += 1

    def reserved(self, page: Page) -> None:
        """Draw the next of the pages that were left free."""
        self._write(page, next(self._free))

    def bookmark(self, level: int, title: str, anchor: str) -> None:
        """Add a line to the bookmarks."""
        self._canvas.addOutlineEntry(font.printable(title), anchor, level=level, closed=level == 0)

    def keep(self, marks: Marks) -> None:
        """Keep the content marks of the sheets in the file, for a later pack to be compared with."""
        data = packed(marks)
        head = f"<< /Type {TYPE} /Length {len(data)} /Filter /FlateDecode >>\nstream\n".encode("ascii")
        self._document.write_plain(b"%b%b\nendstream" % (head, data))

    def save(self) -> None:
        """Finish the file."""
        self._canvas.save()

    def _anchor(self, anchor: str) -> None:
        """Let an anchor be the page that comes next."""
        self._canvas.bookmarkPage(anchor)
        self._pages[anchor] = self._document.thisPageName()

    def _write(self, page: Page, name: str) -> None:
        links = [
            (
                (
                    shape.box.left * _POINTS,
                    _SIZE[1] - shape.box.bottom * _POINTS,
                    shape.box.right * _POINTS,
                    _SIZE[1] - shape.box.top * _POINTS,
                ),
                self._pages[shape.target],
            )
            for shape in page.shapes
            if isinstance(shape, Link)
        ]
        self._document.write_page(name, self._code(page.shapes), links)

    def _group(self, name: str) -> str:
        """Return the operator that shows a group of shapes; it is drawn once for the whole file."""
        code = self._forms.get(name)
        if code is None:
            number = f"G{len(self._forms)}"
            code = self._forms[name] = f"/{self._document.getXObjectName(number)} Do"
            self._canvas.beginForm(number)
            self._canvas.addLiteral(self._code(group(name)))
            self._canvas.endForm()
        return code

    def _code(self, shapes: Iterable[Shape]) -> str:
        """Return the operators that draw shapes: fillings, letters and groups in the order of reading, then lines."""
        fills: list[str] = []
        strokes: dict[tuple[float, float, bool], list[str]] = {}
        body: list[str] = []
        letters = False
        look: Style | None = None
        height = _SIZE[1]
        for shape in shapes:
            if isinstance(shape, Text):
                x, y, text, wanted, _ = shape
                if not letters:
                    body.append("BT")
                    letters = True
                if wanted is not look:
                    look = wanted
                    body.append(f"/{self._names[look.bold]} {look.size_pt:g} Tf {look.grey:g} g")
                shown = self._shown.get((text, wanted.bold))
                if type(shown) is not str:
                    shown = self._letters(text, wanted)
                body.append(f"1 0 0 1 {x * _POINTS:.2f} {height - y * _POINTS:.2f} Tm {shown}")
            elif isinstance(shape, Line):
                x0, y0, x1, y1, weight_mm, grey, dotted = shape
                strokes.setdefault((weight_mm, grey, dotted), []).append(
                    f"{x0 * _POINTS:.2f} {height - y0 * _POINTS:.2f} m {x1 * _POINTS:.2f} {height - y1 * _POINTS:.2f} l"
                )
            elif isinstance(shape, Box):
                left, top, right, bottom, weight_mm, fill = shape
                rectangle = (
                    f"{left * _POINTS:.2f} {height - bottom * _POINTS:.2f} "
                    f"{(right - left) * _POINTS:.2f} {(bottom - top) * _POINTS:.2f} re"
                )
                if fill is not None:
                    fills.append(f"{fill:g} g {rectangle} f")
                if weight_mm:
                    strokes.setdefault((weight_mm, BLACK, False), []).append(rectangle)
            elif isinstance(shape, Circle):
                ring = _ring(shape.x * _POINTS, height - shape.y * _POINTS, shape.radius * _POINTS)
                if shape.fill is not None:
                    fills.append(f"{shape.fill:g} g {ring} f")
                if shape.weight_mm:
                    strokes.setdefault((shape.weight_mm, BLACK, False), []).append(ring)
            elif isinstance(shape, Use):
                if letters:
                    body.append("ET")
                    letters = False
                look = None
                code = self._group(shape.name)
                body.append(f"q 1 0 0 1 0 {-shape.y * _POINTS:.2f} cm {code} Q" if shape.y else code)
        if letters:
            body.append("ET")
        lines = [
            f"{weight_mm * _POINTS:.3f} w {grey:g} G {_DOTS if dotted else _SOLID} {' '.join(paths)} S"
            for (weight_mm, grey, dotted), paths in strokes.items()
        ]
        return "\n".join((*fills, *body, *lines))

    def _letters(self, text: str, look: Style) -> str:
        """Return the operators that show a text: the typeface is embedded in parts of 256 characters."""
        key = (text, look.bold)
        known = self._shown.get(key)
        if known is None:
            typeface = self._fonts[look.bold]
            parts = [
                (
                    typeface.getSubsetInternalName(part, self._document)[1:],
                    f"({pdfdoc.escapePDF(letters)}) Tj",
                )
                for part, letters in typeface.splitString(text, self._document)
            ]
            known = parts[0][1] if len(parts) == 1 and parts[0][0] == self._names[look.bold] else parts
            if len(self._shown) >= _MOST_KEPT:
                self._shown.clear()
            self._shown[key] = known
        if isinstance(known, str):
            return known
        first = self._names[look.bold]
        shown = " ".join(f"/{name} {look.size_pt:g} Tf {code}" for name, code in known)
        return f"{shown} /{first} {look.size_pt:g} Tf"


_HANDLE: Final = 4.0 / 3.0 * (math.sqrt(2.0) - 1.0)
"""Length of a handle by which a curve follows a quarter of a circle of radius 1."""


def _ring(x: float, y: float, radius: float) -> str:
    """Return the operators of a circle's path: four curves, each a quarter."""
    h = radius * _HANDLE
    return (
        f"{x + radius:.2f} {y:.2f} m "
        f"{x + radius:.2f} {y + h:.2f} {x + h:.2f} {y + radius:.2f} {x:.2f} {y + radius:.2f} c "
        f"{x - h:.2f} {y + radius:.2f} {x - radius:.2f} {y + h:.2f} {x - radius:.2f} {y:.2f} c "
        f"{x - radius:.2f} {y - h:.2f} {x - h:.2f} {y - radius:.2f} {x:.2f} {y - radius:.2f} c "
        f"{x + h:.2f} {y - radius:.2f} {x + radius:.2f} {y - h:.2f} {x + radius:.2f} {y:.2f} c h"
    )


@cache
def _font(path: Path) -> Any:
    """Return a face, registered once: reportlab asks for it by name."""
    typeface = TTFont(f"Sheet-{path.stem}", str(path))
    pdfmetrics.registerFont(typeface)
    return typeface
