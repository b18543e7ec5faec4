"""How numbers are written: decimal point or comma, thousands, signs, and what stands around them (<, ~, max).

Nothing is evaluated and nothing is guessed: what has two readings is trouble, with both of them.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterable
from dataclasses import dataclass
from decimal import Decimal
from typing import Final

LONGEST_NUMBER: Final = 40
"""Characters of a text that may still be a number."""

LONGEST_RAW: Final = 1000
"""Characters of a cell that are looked at, blanks and all: the rest is never copied."""


@dataclass(frozen=True, slots=True)
class CellTrouble:
    """Why a cell could not be read, in words to print, and the readings that were considered.

    `blank` is set where the cell is no mistake but names a value without giving a figure
    (``ambient``): the field is blank for that reason.
    """

    reason: str
    readings: tuple[str, ...] = ()
    blank: str | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Number:
    """A number as read, with its qualifier (``<``, ``>``, ``~``, ``min``, ``norm``, ``max``) or None."""

    value: float
    qualifier: str | None = None


_GLYPHS = str.maketrans(
    {
        "−": "-", "–": "-", "—": "-", "‐": "-", "‑": "-", "‒": "-", "﹣": "-", "－": "-", "＋": "+",
        "\u00a0": " ", "\u2002": " ", "\u2003": " ", "\u2007": " ", "\u2008": " ", "\u2009": " ",
        "\u200a": " ", "\u202f": " ", "\u3000": " ", "\t": " ", "\n": " ", "\r": " ",
        "\u200b": None, "\u200c": None, "\u200d": None, "\u2060": None, "\ufeff": None, "\u00ad": None,
        "’": "'", "‘": "'", "´": "'", "`": "'", "．": ".", "，": ",",
        **{chr(0xFF10 + digit): str(digit) for digit in range(10)},
    }
)  # fmt: skip


def plain_signs(text: str) -> str:
    """Bring minus signs, blanks and wide digits to their plain forms.

    >>> plain_signs("−5\\u202f000")
    '-5 000'
    """
    return text.translate(_GLYPHS)


QUALIFIERS: Final = {
    "<": "<", "<=": "<", "=<": "<", "≤": "<", "≦": "<", "less than": "<", "up to": "<", "bis": "<",
    ">": ">", ">=": ">", "=>": ">", "≥": ">", "≧": ">", "more than": ">", "over": ">",
    "~": "~", "∼": "~", "～": "~", "≈": "~", "ca": "~", "circa": "~", "approx": "~",
    "approximately": "~", "about": "~", "abt": "~", "app": "~", "etwa": "~", "est": "~",
    "max": "max", "maximum": "max", "maxi": "max", "min": "min", "minimum": "min", "mini": "min",
    "norm": "norm", "normal": "norm", "nor": "norm", "nom": "norm", "nominal": "norm", "typ": "norm",
    "typical": "norm", "oper": "norm", "op": "norm",
}  # fmt: skip
_BEFORE = re.compile(
    r"\(?(<=|=<|>=|=>|[<>≤≥≦≧~∼～≈]|less than|more than|up to|approximately|approx|about|circa|"
    r"maximum|minimum|"
    r"nominal|typical|normal|maxi|mini|etwa|over|oper|norm|max|min|nor|nom|typ|abt|app|est|bis|ca|op)"
    r"(?![A-Za-z])\)?[.:=]? *(?=[-+.,0-9(])",
    re.IGNORECASE,
)
_BEHIND = re.compile(
    r"[ .,]*\(?(?<![A-Za-z])(approximately|approx|maximum|minimum|nominal|typical|normal|norm|"
    r"max|min|nor|nom|typ)\.?\)?$",
    re.IGNORECASE,
)


def split_qualifier(text: str) -> tuple[str, str | None]:
    """Split a text into what it says and the qualifier before or behind it.

    >>> [split_qualifier(text) for text in ("<5", "max. 5 barg", "5 max", "5 mbar")]
    [('5', '<'), ('5 barg', 'max'), ('5', 'max'), ('5 mbar', None)]
    """
    before = _BEFORE.match(text)
    if before:
        return text[before.end() :].strip(), QUALIFIERS[before[1].lower()]
    # US gal/min ends in a word that is a time.
    behind = _BEHIND.search(text)
    if behind and "/" not in text[behind.start() - 1 : behind.start()]:
        return text[: behind.start()].strip(), QUALIFIERS[behind[1].lower()]
    return text, None


NUMBER_PATTERN: Final = (
    r"(?:[0-9]{1,3}(?:[ '][0-9]{3})+(?![0-9])(?:[.,][0-9]+)?|[0-9]+(?:[.,][0-9]+)*|[.,][0-9]+)"
    r"(?:[eE][-+]?[0-9]{1,4}(?![0-9A-Za-z]))?"
)
"""What may be a number, without its sign; which number it is, `read_number` says."""

_WHOLE = re.compile(rf"([-+]?) ?({NUMBER_PATTERN}|[0-9]+\.)$")
_GROUPED = {mark: re.compile(rf"[1-9][0-9]{{0,2}}(?:{re.escape(mark)}[0-9]{{3}})+$") for mark in ".,"}
_INDIAN = re.compile(r"[1-9][0-9]?(?:,[0-9]{2})+,[0-9]{3}$")
_LOOK_ALIKES = str.maketrans("OoОоlI|S", "00001115")  # О and о are Cyrillic too
_DAMAGED = re.compile(r"[-+]?[0-9OoОоlI|S]+(?:[.,][0-9OoОоlI|S]+)?$")


def _readings(digits: str) -> tuple[float, ...]:
    """All numbers that digits with points and commas may mean: none, one, or two where they are ambiguous."""
    points, commas = digits.count("."), digits.count(",")
    if not points and not commas:
        return (float(digits),)
    if points and commas:
        mark = "." if digits.rfind(".") > digits.rfind(",") else ","
        other = "," if mark == "." else "."
        whole, _, part = digits.rpartition(mark)
        grouped = _GROUPED[other].match(whole) or (other == "," and _INDIAN.match(whole))
        return (float(f"{whole.replace(other, '')}.{part}"),) if grouped else ()
    mark = "." if points else ","
    if points + commas > 1:
        grouped = _GROUPED[mark].match(digits) or (mark == "," and _INDIAN.match(digits))
        return (float(digits.replace(mark, "")),) if grouped else ()
    decimal = float(digits.replace(",", "."))
    return (decimal, float(digits.replace(mark, ""))) if _GROUPED[mark].match(digits) else (decimal,)


def _magnitude(written: str, decimal: str | None) -> float | CellTrouble:
    digits, _, exponent = written.replace("E", "e").partition("e")
    digits = digits.replace(" ", "").replace("'", "").rstrip("." if digits.endswith(".") else "")
    found = _readings(digits)
    if not found:
        return CellTrouble(reason=f"'{written}' is not a number")
    if len(found) > 1:
        if decimal not in (".", ","):
            return CellTrouble(
                reason=f"'{written}' may have a decimal mark or a thousands mark",
                readings=(f"{found[0]:.15g}", f"{found[1]:.15g}"),
            )
        value = found[0] if decimal in digits else found[1]
    else:
        value = found[0]
    if not exponent:
        return value
    scaled = float(Decimal(repr(value)).scaleb(int(exponent)))
    return scaled if scaled or not value else math.inf  # a number too small to hold is refused like one too large


def read_number(cell: object, *, decimal: str | None = ".") -> Number | CellTrouble:
    """Read a number from a cell.

    Parameters
    ----------
    cell : object
        Text or number. Truth values, nan and infinity are no numbers.
    decimal : str or None
        The sheet's decimal mark, which decides what ``2,500`` means; see `decimal_convention`. None:
        nobody knows, and ``2,500`` is trouble with both readings. What can mean one thing only
        (``1.000,5``, ``0,5``) is read whatever the sheet's mark.

    >>> read_number("1,000.5").value, read_number("1.000,5").value, read_number("1 000").value
    (1000.5, 1000.5, 1000.0)
    >>> read_number("2,500").value, read_number("2,500", decimal=",").value
    (2500.0, 2.5)
    >>> read_number("2,500", decimal=None).readings
    ('2.5', '2500')
    """
    if isinstance(cell, bool) or not isinstance(cell, str | int | float):
        return CellTrouble(reason=f"{cell!r:.40} is not a number")
    if not isinstance(cell, str):
        return _finite(cell)
    text = plain_signs(cell[:LONGEST_RAW]).strip()
    if not text:
        return CellTrouble(reason="the cell is empty")
    if len(text) > LONGEST_NUMBER or len(cell) > LONGEST_RAW:
        return CellTrouble(reason="the text is too long for a number")
    text, qualifier = split_qualifier(text)
    found = _WHOLE.match(text)
    if not found:
        mended = text.translate(_LOOK_ALIKES)
        if _DAMAGED.match(text) and any(sign.isdigit() for sign in text) and _WHOLE.match(mended):
            return CellTrouble(reason=f"'{text}' is a damaged number", readings=(mended,))
        return CellTrouble(reason=f"'{text}' is not a number")
    value = _magnitude(found[2], decimal)
    if isinstance(value, CellTrouble):
        sign = "-" if found[1] == "-" else ""
        return CellTrouble(reason=value.reason, readings=tuple(sign + reading for reading in value.readings))
    return _finite(-value if found[1] == "-" else value, qualifier=qualifier)


def _finite(value: float, *, qualifier: str | None = None) -> Number | CellTrouble:
    try:
        number = float(value)
    except OverflowError:
        number = math.inf
    if not math.isfinite(number):
        return CellTrouble(reason="not a finite number")
    return Number(value=number + 0.0, qualifier=qualifier)  # + 0.0 turns -0.0 into 0.0


_TOKEN = re.compile(r"(?<![0-9A-Za-z.,/])[0-9]+(?:[.,][0-9]+)+(?![0-9A-Za-z]*[.,/][0-9])")
_NUMERIC_LIKE = re.compile(r"[-+<>~≤≥±(\[ ]*(?:(?:max|min|ca|approx)\.? *)?[.,]?[0-9]", re.IGNORECASE)


def decimal_convention(texts: Iterable[object]) -> str | None:
    """Decide the decimal mark of a sheet or column from all its cells that look like numbers.

    Returns
    -------
    str or None
        ``"."`` or ``","``, None where nothing decides or where the cells contradict each other.

    >>> [decimal_convention(texts) for texts in (["0,5", "2,500"], ["2,500", 3.0], ["1,000.5"])]
    [',', None, '.']
    """
    marks: set[str] = set()
    for text in texts:
        if not isinstance(text, str) or len(text) > LONGEST_NUMBER * 2:
            continue
        plain = plain_signs(text).strip()
        if not _NUMERIC_LIKE.match(plain):
            continue
        for token in _TOKEN.findall(plain):
            found = _readings(token)
            if len(found) != 1:
                continue
            if "." in token and "," in token:
                marks.add("." if token.rfind(".") > token.rfind(",") else ",")
            elif token.count(".") + token.count(",") > 1:
                marks.add("," if "." in token else ".")  # the mark that comes twice parts thousands
            else:
                marks.add("." if "." in token else ",")
    return marks.pop() if len(marks) == 1 else None
