"""Cell formats for marked cells: each is the cell's own, but for the fill; the workbook's others stay as they are."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Final

from instruments.workbook.annotate.splice import Edit, Element, elements, spliced, with_attribute, with_room
from instruments.workbook.plain import BrokenXml

__all__ = ["MOST_FORMATS", "NEW_STYLES", "Fill", "Styles"]

MOST_FORMATS: Final = 64_000
"""Cell formats of a workbook (Excel's specification limits)."""

_ORDER: Final = (
    "numFmts", "fonts", "fills", "borders", "cellStyleXfs", "cellXfs", "cellStyles", "dxfs", "tableStyles", "colors",
    "extLst",
)  # fmt: skip
"""The children of a styleSheet in the order of ECMA-376-1 18.8.39."""

NEW_STYLES: Final = (
    b'<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n'
    b'<styleSheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main">'
    b'<fonts count="1"><font><sz val="11"/><name val="Calibri"/><family val="2"/></font></fonts>'
    b'<fills count="2"><fill><patternFill patternType="none"/></fill>'
    b'<fill><patternFill patternType="gray125"/></fill></fills>'
    b'<borders count="1"><border><left/><right/><top/><bottom/><diagonal/></border></borders>'
    b'<cellStyleXfs count="1"><xf numFmtId="0" fontId="0" fillId="0" borderId="0"/></cellStyleXfs>'
    b'<cellXfs count="1"><xf numFmtId="0" fontId="0" fillId="0" borderId="0" xfId="0"/></cellXfs>'
    b'<cellStyles count="1"><cellStyle name="Normal" xfId="0" builtinId="0"/></cellStyles></styleSheet>'
)
"""The styles of a workbook that has none."""

# Of the indexed colours (ECMA-376-1 18.8.27) those that are hard to read on a pale ground, and the window's own.
_PALE_INDEXED: Final = frozenset({1, 5, 7, 9, 11, 13, 15, 22, 26, 27, 31, 34, 35, 40, 41, 42, 43, 44, 45, 47, 65})


@dataclass(frozen=True, slots=True, kw_only=True)
class Fill:
    """A colour to mark with: as RRGGBB, on which dark letters can be read, and one for pale letters."""

    pale: str
    dark: str


class Styles:
    """The styles part of a workbook, to which formats are added while cells are marked.

    Parameters
    ----------
    data : bytes
        The part, in UTF-8.

    Raises
    ------
    BrokenXml
        It cannot be read.
    """

    def __init__(self, data: bytes) -> None:
        self._data = data = with_room(data)
        self._root = elements(
            data, deepest=3, leaving_out=("dxfs", "cellStyles", "cellStyleXfs", "borders", "fill", "xf")
        )
        if self._root.name != "styleSheet":
            raise BrokenXml("is no part of styles")
        formats = self._root.first("cellXfs")
        self._formats = [child for child in formats.children if child.name == "xf"] if formats else []
        fills = self._root.first("fills")
        self._fills = sum(child.name == "fill" for child in fills.children) if fills else 0
        fonts = self._root.first("fonts")
        self._pale_fonts = [_is_pale(child) for child in (fonts.children if fonts else ()) if child.name == "font"]
        self._new_fills: dict[str, int] = {}
        self._new_formats: dict[tuple[int, str], int] = {}

    @property
    def changed(self) -> bool:
        """Whether a format was added."""
        return bool(self._new_formats)

    def state(self) -> tuple[int, int]:
        """Return how much was added so far; see `back_to`."""
        return len(self._new_fills), len(self._new_formats)

    def back_to(self, state: tuple[int, int]) -> None:
        """Forget what was added since, as the sheet that asked for it cannot be marked."""
        while len(self._new_fills) > state[0]:
            self._new_fills.popitem()
        while len(self._new_formats) > state[1]:
            self._new_formats.popitem()

    def filled(self, style: int, fill: Fill) -> int:
        """Return the number of the format that is `style` with another fill.

        Raises
        ------
        BrokenXml
            The workbook has as many formats as it can have.
        """
        base = style if 0 <= style < len(self._formats) else 0
        colour = fill.dark if self._letters_are_pale(base) else fill.pale
        number = self._new_formats.get((base, colour))
        if number is None:
            if colour not in self._new_fills:
                # Two fills come first in every workbook and stand for none and a grey (18.8.20).
                self._new_fills[colour] = max(self._fills, 2) + len(self._new_fills)
            number = max(len(self._formats), 1) + len(self._new_formats)
            if number >= MOST_FORMATS:
                raise BrokenXml(f"has {number:,} cell formats, and no workbook can have more")
            self._new_formats[base, colour] = number
        return number

    def _letters_are_pale(self, base: int) -> bool:
        if base >= len(self._formats):
            return False
        font = self._formats[base].attributes.get("fontId", "0")
        number = int(font) if re.fullmatch("[0-9]{1,6}", font, re.ASCII) else 0
        return number < len(self._pale_fonts) and self._pale_fonts[number]

    def written(self) -> bytes:
        """Return the part with the added fills and formats."""
        if not self.changed:
            return self._data
        prefix = self._root.prefix
        fills = b"".join(
            b'<%bfill><%bpatternFill patternType="solid"><%bfgColor rgb="FF%b"/><%bbgColor indexed="64"/>'
            b"</%bpatternFill></%bfill>" % (*(prefix,) * 3, colour.encode(), *(prefix,) * 3)
            for colour in self._new_fills
        )
        formats = b"".join(self._copied(base, self._new_fills[colour]) for base, colour in self._new_formats)
        reserved = b"".join(
            b'<%bfill><%bpatternFill patternType="%b"/></%bfill>' % (prefix, prefix, pattern, prefix)
            for pattern in (b"none", b"gray125")[self._fills :]
        )
        first = b"" if self._formats else b'<%bxf numFmtId="0" fontId="0" fillId="0" borderId="0"/>' % prefix
        edits = [
            *self._longer("fills", reserved + fills, max(self._fills, 2) + len(self._new_fills)),
            *self._longer("cellXfs", first + formats, max(len(self._formats), 1) + len(self._new_formats)),
        ]
        return b"".join(spliced([self._data], edits))

    def _longer(self, name: str, text: bytes, count: int) -> list[Edit]:
        """Return the edits that put `text` at the end of a list, and its new length before it."""
        whole = self._root.first(name)
        if whole is None:
            prefix = self._root.prefix
            made = b'<%b%b count="%d">%b</%b%b>' % (prefix, name.encode(), count, text, prefix, name.encode())
            following = _ORDER[_ORDER.index(name) + 1 :]
            before = next((child for child in self._root.children if child.name in following), None)
            # Both lists can be missing, and then stand at one place, in this order.
            return [Edit(before.start, before.start, made) if before else self._root.appended(self._data, made)]
        tag = with_attribute(self._data[whole.start : whole.inside], b"count", b"%d" % count)
        if whole.closes_itself:
            emptied = Element(
                name=name, prefix=whole.prefix, depth=1, attributes={}, start=0, end=len(tag), closes_itself=True
            )
            return [Edit(whole.start, whole.end, emptied.appended(tag, text).text)]
        return [Edit(whole.start, whole.inside, tag), Edit(whole.close, whole.close, text)]

    def _copied(self, base: int, fill: int) -> bytes:
        prefix = self._root.prefix
        if base >= len(self._formats):
            return b'<%bxf numFmtId="0" fontId="0" fillId="%d" borderId="0" applyFill="1"/>' % (prefix, fill)
        element = self._formats[base]
        tag = with_attribute(self._data[element.start : element.inside], b"fillId", b"%d" % fill)
        return with_attribute(tag, b"applyFill", b"1") + self._data[element.inside : element.end]


def _is_pale(font: Element) -> bool:
    """Whether letters of this font are hard to read on a pale ground."""
    colour = font.first("color")
    if colour is None:
        return False
    named = colour.attributes
    if re.fullmatch("(?:[0-9A-Fa-f]{2})?[0-9A-Fa-f]{6}", named.get("rgb", "")):
        red, green, blue = bytes.fromhex(named["rgb"][-6:])
        return (299 * red + 587 * green + 114 * blue) / 1000 > 160
    if "theme" in named:
        # 0 and 2 are the theme's grounds, white and nearly white in all but dark themes; a tint darkens them.
        return named["theme"] in ("0", "2") and _number(named.get("tint", "0")) > -0.4
    return named.get("indexed", "") in {str(number) for number in _PALE_INDEXED}


def _number(text: str) -> float:
    try:
        return float(text)
    except ValueError:
        return 0.0
