"""The sheet's typeface in plain numbers: how wide each character is, and which characters there are."""

from __future__ import annotations

import struct
import unicodedata
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Final

FOLDER: Final = Path(__file__).parent / "fonts"
REGULAR: Final = FOLDER / "DejaVuSansCondensed.ttf"
BOLD: Final = FOLDER / "DejaVuSansCondensed-Bold.ttf"

PLACEHOLDER: Final = "\ufffd"
"""Stands, to be seen, for a character that the typeface does not have."""

MM_PER_POINT: Final = 25.4 / 72.0

# Words broken at the end of a line by hand leave this behind; it is to be seen there and nowhere else.
_SOFT_HYPHEN: Final = "\u00ad"


class UnreadableFont(ValueError):
    """A file that is no TrueType font, or lacks a table that measuring needs."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Face:
    """One face of the typeface.

    Attributes
    ----------
    advances
        Width of each character it has, in thousandths of the type size.
    ascent, descent
        How far its tallest letter stands above the base line and its longest below, in thousandths.
    """

    advances: Mapping[str, float]
    ascent: float
    descent: float

    def width_mm(self, text: str, size_pt: float) -> float:
        """Width of a text in mm; the text must be `printable`.

        Raises
        ------
        KeyError
            A character that the typeface does not have.
        """
        return sum(map(self.advances.__getitem__, text)) * size_pt * (MM_PER_POINT / 1000.0)


def read_face(path: Path) -> Face:
    """Read the widths of a TrueType font's characters of the Basic Multilingual Plane.

    Raises
    ------
    UnreadableFont
        No TrueType font, or one without a Unicode table of formats 4 or 12.
    """
    data = path.read_bytes()
    try:
        tables = _tables(data)
        head, hhea = tables["head"], tables["hhea"]
        per_em = struct.unpack_from(">H", data, head + 18)[0]
        ascent, descent = struct.unpack_from(">hh", data, hhea + 4)
        metrics = struct.unpack_from(">H", data, hhea + 34)[0]
        glyphs = _glyphs(data, tables["cmap"])
        widths = struct.unpack_from(f">{2 * metrics}H", data, tables["hmtx"])[::2]
    except (KeyError, struct.error) as error:
        raise UnreadableFont(f"{path.name}: {error}") from error
    scale = 1000.0 / per_em
    # Glyphs beyond the table are as wide as its last.
    advances = {chr(code): widths[min(glyph, metrics - 1)] * scale for code, glyph in glyphs.items()}
    return Face(advances=advances, ascent=ascent * scale, descent=-descent * scale)


def _tables(data: bytes) -> dict[str, int]:
    if data[:4] not in (b"\x00\x01\x00\x00", b"true"):
        raise UnreadableFont("no TrueType font")
    count = struct.unpack_from(">H", data, 4)[0]
    return {
        data[at : at + 4].decode("latin-1"): struct.unpack_from(">I", data, at + 8)[0]
        for at in range(12, 12 + 16 * count, 16)
    }


def _glyphs(data: bytes, cmap: int) -> dict[int, int]:
    """Return the glyph of each character that has one, by its code."""
    found: dict[int, int] = {}
    for number in range(struct.unpack_from(">H", data, cmap + 2)[0]):
        platform, encoding, offset = struct.unpack_from(">HHI", data, cmap + 4 + 8 * number)
        if (platform, encoding) not in ((0, 3), (0, 4), (3, 1), (3, 10)):
            continue
        at = cmap + offset
        kind = struct.unpack_from(">H", data, at)[0]
        if kind == 4:
            found.update(_segments(data, at))
        elif kind == 12:
            for group in range(struct.unpack_from(">I", data, at + 12)[0]):
                first, last, glyph = struct.unpack_from(">III", data, at + 16 + 12 * group)
                found.update((code, glyph + code - first) for code in range(first, min(last, 0xFFFF) + 1))
    if not found:
        raise UnreadableFont("no Unicode table of formats 4 or 12")
    return {code: glyph for code, glyph in found.items() if glyph}


def _segments(data: bytes, at: int) -> dict[int, int]:
    count = struct.unpack_from(">H", data, at + 6)[0] // 2
    ends = struct.unpack_from(f">{count}H", data, at + 14)
    starts = struct.unpack_from(f">{count}H", data, at + 16 + 2 * count)
    deltas = struct.unpack_from(f">{count}H", data, at + 16 + 4 * count)
    ranges_at = at + 16 + 6 * count
    ranges = struct.unpack_from(f">{count}H", data, ranges_at)
    glyphs: dict[int, int] = {}
    for segment, (first, last) in enumerate(zip(starts, ends, strict=True)):
        for code in range(first, min(last, 0xFFFE) + 1):
            if ranges[segment] == 0:
                glyph = code + deltas[segment]
            else:
                place = ranges_at + 2 * segment + ranges[segment] + 2 * (code - first)
                glyph = struct.unpack_from(">H", data, place)[0]
                glyph += deltas[segment] if glyph else 0
            glyphs[code] = glyph & 0xFFFF
    return glyphs


@cache
def regular() -> Face:
    """Return the regular face."""
    return read_face(REGULAR)


@cache
def bold() -> Face:
    """Return the bold face."""
    return read_face(BOLD)


class _Printed(dict[int, str]):
    """What is printed for each character, found once."""

    def __missing__(self, code: int) -> str:
        sign = chr(code)
        category = unicodedata.category(sign)
        if sign == _SOFT_HYPHEN:
            printed = ""
        elif category[0] == "Z" or sign in "\t\n\r\x0b\x0c\x1c\x1d\x1e\x1f\x85":
            printed = " "
        elif category[0] == "C" or sign not in regular().advances or sign not in bold().advances:
            printed = PLACEHOLDER
        else:
            printed = sign
        self[code] = printed
        return printed


_PRINTED: Final = _Printed()


def printable(text: str) -> str:
    """Return a text as the typeface can print it, on one line.

    Letters with accents of their own are put together; blanks of every kind become one blank each;
    what the typeface does not have, and what has no form to be seen (control characters, marks that
    turn the direction of writing), becomes a placeholder that is seen.

    >>> printable("Dru\u0308cke 0\u00a0\u2026\u00a010\\nbar \u2192 250 \u03a9"), printable("A\u202eB\\x07\U0001f512")
    ('Dr\u00fccke 0 \u2026 10 bar \u2192 250 \u03a9', 'A\ufffdB\ufffd\ufffd')
    """
    if text.isascii() and text.isprintable():
        return text
    return unicodedata.normalize("NFC", text).translate(_PRINTED)
