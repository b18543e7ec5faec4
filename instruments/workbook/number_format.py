"""How a number looks in its cell: what a format code makes of it, and the text a reader of the list sees."""

from __future__ import annotations

import datetime
import functools
import math
import re
from collections.abc import Mapping
from types import MappingProxyType
from typing import Final, Literal

from instruments.workbook.sheet import Value

Kind = Literal["date", "percent", "padded", "worded", "scientific"]

# ECMA-376-1 18.8.30: what a format number means where the file gives no code of its own. Only those whose
# numbers look otherwise than they are; the days of 27 to 36 and 50 to 58 differ by language (from memory).
BUILT_IN: Final[Mapping[int, str]] = MappingProxyType(
    {
        9: "0%",
        10: "0.00%",
        11: "0.00E+00",
        14: "mm-dd-yy",
        15: "d-mmm-yy",
        16: "d-mmm",
        17: "mmm-yy",
        18: "h:mm AM/PM",
        19: "h:mm:ss AM/PM",
        20: "h:mm",
        21: "h:mm:ss",
        22: "m/d/yy h:mm",
        45: "mm:ss",
        46: "[h]:mm:ss",
        47: "mmss.0",
        48: "##0.0E+0",
    }
    | dict.fromkeys((*range(27, 32), 36, *range(50, 55), 57, 58), "yyyy-mm-dd")
    | dict.fromkeys((32, 33, 34, 35, 55, 56), "h:mm")
)

# One piece of a format code: quoted text, an escaped character, one skipped or repeated, a bracket, a sign.
_PIECE: Final = re.compile(r'"([^"]*)"?|\\(.)|[_*].|\[([^\]]*)\]|(.)', re.DOTALL)
_GENERAL: Final = re.compile("general", re.IGNORECASE)
_ELAPSED: Final = re.compile(r"h+|m+|s+", re.IGNORECASE)


@functools.cache
def _pieces(code: str) -> tuple[tuple[str, str], ...]:
    """Split the section for positive numbers into (kind, text): literal, bracket or sign."""
    pieces: list[tuple[str, str]] = []
    for matched in _PIECE.finditer(code[:255]):
        quoted, escaped, bracket, sign = matched.groups()
        if sign == ";":
            break
        if sign is not None:
            pieces.append(("sign", sign))
        elif bracket is not None:
            pieces.append(("bracket", bracket))
        elif quoted is not None or escaped is not None:
            pieces.append(("literal", quoted or escaped or ""))
    return tuple(pieces)


@functools.cache
def format_kind(code: str) -> Kind | None:
    """How numbers under a format code look otherwise than they are; None where they do not.

    `padded` fills with zeros, `worded` has letters or digits beside the number.

    >>> [format_kind(code) for code in ("d-mmm", "[h]:mm", "0.0%", "0000", '0.0" barg"', "#,##0.00", "0.00E+00")]
    ['date', 'date', 'percent', 'padded', 'worded', None, 'scientific']
    """
    pieces = _pieces(code)
    signs = "".join(text for kind, text in pieces if kind == "sign")
    if signs.casefold().startswith("general"):
        signs = signs[7:]
    # In this order: "0.0 m" without quotes shows the month, whatever its author meant.
    if re.search(r"[ymdhs]", signs, re.IGNORECASE) or any(
        kind == "bracket" and _ELAPSED.fullmatch(text) for kind, text in pieces
    ):
        return "date"
    if "%" in signs:
        return "percent"
    if re.search(r"[0#?][eE][-+]", signs):
        return "scientific"
    whole = re.split(r"[.Ee/]", signs, maxsplit=1)[0]
    if whole.count("0") >= 2:
        return "padded"
    if any(kind == "literal" and any(map(str.isalnum, text)) for kind, text in pieces):
        return "worded"
    return None


def as_text(cell: Value, number_format: str | None = None) -> str:
    """Return the text of a cell, a number as it looks under its format but never rounded.

    Parameters
    ----------
    cell : str, float, bool, date, datetime, time or None
        What the reader found; None gives the empty text.
    number_format : str, optional
        The format code of the cell, as in `Sheet.number_formats`.

    >>> as_text(1001.0), as_text(34.0, "0000"), as_text(34.0, '"PT-"0000'), as_text(12345.0, "00-000")
    ('1001', '0034', 'PT-0034', '12-345')
    >>> as_text(0.25, "0%"), as_text(16.5, '0" barg"'), as_text(16.0, '0.0" barg"'), as_text(0.1 + 0.2)
    ('25%', '16.5 barg', '16 barg', '0.3')
    """
    if cell is None:
        return ""
    if isinstance(cell, str):
        return cell
    if isinstance(cell, bool):
        return "TRUE" if cell else "FALSE"
    if isinstance(cell, datetime.datetime):
        return cell.isoformat(sep=" ", timespec="auto" if cell.second or cell.microsecond else "minutes")
    if isinstance(cell, datetime.time):
        return cell.isoformat("auto" if cell.second or cell.microsecond else "minutes")
    if isinstance(cell, datetime.date):
        return cell.isoformat()
    kind = format_kind(number_format) if number_format else None
    if kind == "percent":
        return f"{_plain(cell * 100)}%"
    if kind in ("padded", "worded") and number_format:
        return _laid_out(cell, number_format)
    return _plain(cell)


def as_typed(cell: Value, number_format: str | None = None) -> tuple[str, ...]:
    """Return what may have been typed where a spreadsheet made a date, or a number with an exponent, of a text.

    Parameters
    ----------
    cell
        A date, or a number.
    number_format
        The format code of the cell: by it the spreadsheet shows which it took the text for.

    >>> as_typed(datetime.datetime(2024, 2, 1), "d-mmm"), as_typed(2e-101)
    (('1-FEB', '02-01', '01-02'), ('2E-101',))
    >>> as_typed(datetime.datetime(2024, 2, 1), "mmm-yy"), as_typed(300000.0, "0.00E+00")
    (('FEB-24', '02-01', '01-02'), ('3E5', '300000'))
    """
    if isinstance(cell, datetime.date):
        month = _MONTHS[cell.month - 1]
        code = (number_format or "").lower()
        first = f"{month}-{cell:%y}" if cell.day == 1 and "d" not in code and "mmm" in code else f"{cell.day}-{month}"
        return tuple(dict.fromkeys((first, f"{cell:%m-%d}", f"{cell:%d-%m}")))
    if not isinstance(cell, float) or not cell or not math.isfinite(cell):
        return ()
    figures, _, exponent = f"{cell:.14e}".partition("e")
    figures = figures.rstrip("0").rstrip(".")
    places = int(exponent)
    if "." in figures:
        places -= len(figures.partition(".")[2])
        figures = figures.replace(".", "")
    whole = (_plain(cell),) if 0 <= places <= 12 else ()
    return (f"{figures}E{places}", *whole)


_MONTHS: Final = ("JAN", "FEB", "MAR", "APR", "MAY", "JUN", "JUL", "AUG", "SEP", "OCT", "NOV", "DEC")


def _plain(number: float) -> str:
    # 15 figures are what a spreadsheet shows: 0.1 + 0.2 is 0.3 there. Whole numbers keep all their digits,
    # as a serial number does not look like 1.23456789012346E+15.
    if number.is_integer() and abs(number) < 2**53:
        return str(int(number))
    return f"{number:.15g}"


def _laid_out(number: float, code: str) -> str:
    """Put the digits into the places that a format code has for them, its own text round about."""
    whole, point, fraction = _plain(abs(number)).partition(".")
    pieces = _pieces(_GENERAL.sub("0.#", code))
    signs = "".join(text for kind, text in pieces if kind == "sign")
    if not whole.isdecimal() or re.search(r"[eE/@]", signs):
        return _plain(number)
    places = re.split(r"\.", signs, maxsplit=1)[0]
    left = sum(places.count(place) for place in "0#?")
    surplus = max(0, len(whole) - left)
    # Leading # and ? show nothing where the number has no digit for them.
    padded = whole.rjust(left)
    out: list[str] = []
    before_point, at = True, 0
    for kind, text in pieces:
        if kind == "literal":
            out.append(text)
        elif kind == "bracket":
            out.append(text[1:].partition("-")[0] if text.startswith("$") else "")
        elif text == "." and before_point:
            before_point = False
            out.append(point + fraction)
        elif text in "0#?":
            if before_point:
                digits = padded[: surplus + 1] if at == 0 else padded[surplus + at]
                at += 1
                out.append(digits.replace(" ", "0" if text == "0" else ""))
                if at == left and "." not in signs:
                    out.append(point + fraction)
        elif text != ",":
            out.append(text)
    if not left:
        return _plain(number)
    shown = "".join(out).strip()
    return f"-{shown}" if number < 0 else shown
