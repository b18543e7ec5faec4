"""Text in a cell of a workbook: what a cell can hold, and the room that the text takes."""

from __future__ import annotations

import math
import re
from functools import lru_cache
from typing import Final

__all__ = ["CUT", "MOST_CHARACTERS", "MOST_LINES", "cell_text", "em_of", "lines_of"]

MOST_CHARACTERS: Final = 32_767
"""Characters in a cell, counted as UTF-16 does (Excel's specification limits)."""
MOST_LINES: Final = 253
"""Line feeds in a cell (the same limits); what follows goes on in the last line."""
CUT: Final = "... (cut)"
"""Ends a text that was longer than its cell can hold."""

# What XML cannot hold, what hides or turns round the text beside it, and what would be decoded as an escape.
_ODD: Final = re.compile(
    "[\x00-\x08\x0b-\x1f\x7f-\x9f\u00ad\u200b\u200e\u200f\u2028-\u202e\u2060\u2066-\u2069\ufeff\ufffe\uffff]"
    "|[\ud800-\udfff]|_(?=x[0-9A-Fa-f]{4}_)|\t"
)
_BROKEN_ESCAPE: Final = re.compile(r"_(?:x(?:0(?:0(?:5F?)?)?)?)?\Z")


def cell_text(text: str) -> str:
    r"""Return a text as it may be typed into a cell: nothing in it is lost unseen, acted upon or too long.

    Control characters, lone surrogates and marks that hide or turn text round are shown by their code;
    a line end of any kind is a line feed; a literal ``_x0041_``, which a spreadsheet would take for an
    escaped letter, is escaped itself; what is too long ends with `CUT`.

    >>> cell_text("=1+1"), cell_text("PT\x01-101"), cell_text("a\r\nb")
    ('=1+1', 'PT<U+0001>-101', 'a\nb')
    """
    if not (text.isascii() and text.isprintable()):
        text = text.replace("\r\n", "\n").replace("\r", "\n")
    text = _ODD.sub(_shown, text)
    if text.count("\n") > MOST_LINES:
        lines = text.split("\n")
        text = "\n".join((*lines[:MOST_LINES], " / ".join(lines[MOST_LINES:])))
    return _within_length(text) if len(text) * 2 > MOST_CHARACTERS else text


def _shown(match: re.Match[str]) -> str:
    character = match[0]
    if character == "_":
        return "_x005F_"
    return " " if character == "\t" else f"<U+{ord(character):04X}>"


def _within_length(text: str) -> str:
    if _utf16_length(text) <= MOST_CHARACTERS:
        return text
    room = MOST_CHARACTERS - len(CUT)
    kept = text[:room]
    while (over := _utf16_length(kept) - room) > 0:
        kept = kept[: -((over + 1) // 2)]
    return _BROKEN_ESCAPE.sub("", kept) + CUT


def _utf16_length(text: str) -> int:
    return len(text) if text.isascii() else len(text.encode("utf-16-le")) // 2


# Advance widths of Helvetica, which Arial and its free equals share, in thousandths of the font's size (the metrics
# that every PDF reader has built in), from the blank to the tilde.
_ADVANCES: Final = (
    278, 278, 355, 556, 556, 889, 667, 191, 333, 333, 389, 584, 278, 333, 278, 278,
    556, 556, 556, 556, 556, 556, 556, 556, 556, 556, 278, 278, 584, 584, 584, 556,
    1015, 667, 667, 722, 722, 667, 611, 778, 722, 278, 500, 667, 556, 833, 722, 778,
    667, 778, 722, 667, 611, 722, 667, 944, 667, 667, 611, 278, 278, 278, 469, 556,
    333, 556, 556, 500, 556, 556, 278, 556, 556, 222, 222, 500, 222, 833, 556, 556,
    556, 556, 333, 500, 278, 556, 500, 722, 500, 500, 500, 334, 260, 334, 584,
)  # fmt: skip
_BOLD: Final = 1.12  # bold Arial against plain, for words


class _Widths(dict[str, float]):
    def __missing__(self, character: str) -> float:
        # Accented, Greek and Cyrillic letters are no wider, but for a few; from the Asian scripts on all are.
        return 0.75 if character < "\u2e80" else 1.0


_EM: Final = _Widths({chr(32 + index): advance / 1000 for index, advance in enumerate(_ADVANCES)})


def em_of(text: str, *, bold: bool = False) -> float:
    """Return the width of one line of text, in sizes of its font (Arial).

    >>> round(em_of("PT-101"), 3), em_of("danger", bold=True) > em_of("danger")
    (3.279, True)
    """
    em = sum(map(_EM.__getitem__, text))
    return em * _BOLD if bold else em


@lru_cache(maxsize=2_000)
def lines_of(text: str, room_em: float, *, bold: bool = False) -> int:
    """Return how many lines a text takes in a cell that wraps, `room_em` sizes of its font wide.

    Words are broken only at blanks, so that it is rather too many than too few.

    >>> lines_of("Main steam pressure", 6.0), lines_of("Main steam pressure", 10.0), lines_of("a\\nb", 9.0)
    (2, 1, 2)
    """
    room = max(room_em, 1.0)
    count = 0
    for line in text.split("\n"):
        count += 1
        if len(line) * 1.02 * _BOLD <= room or em_of(line, bold=bold) <= room:
            continue
        used = 0.0
        for word in line.split(" "):
            em = em_of(word, bold=bold)
            if used and used + em > room:
                count += 1
                used = 0.0
            if em > room:
                # A word wider than the cell is broken where the cell ends.
                more = math.ceil(em / room - 1e-9) - 1
                count += more
                em -= more * room
            used += em + 0.278
    return count
