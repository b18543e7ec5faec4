"""Certificate numbers of explosion-protected equipment, and their suffixes."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from functools import lru_cache
from typing import Final

from instruments.marking_text import MAX_LENGTH, Scanner, Token, normalised

_BODY = r"([A-ZÀ-Þ][A-Za-zÀ-ÿ]{1,11})"
_ISSUE = (
    r"(?:\s*[,/(]?\s*(?:issue|iss|rev|revision|supplement|suppl|nachtrag)\.?\s*(?:no|nr)?\.?\s*:?\s*\d{1,2}\)?"
    r"|\s?/\s?\d{1,2}(?!\d))?"
)
IECEX_NUMBER: Final = Token(
    r"IECEx\s*" + _BODY + r"\s*(\d{2})\s?\.\s?(\d{4})\s?-?([XU])?(?![A-Za-z0-9])" + _ISSUE, any_case=True
)
ATEX_NUMBER: Final = Token(
    _BODY + r"\s*(\d{2})\s*(ATEX|UKEX)\s*(E(?=[\s\d]))?\s*(\d{3,6})\s?-?([XU])?(?![A-Za-z0-9])" + _ISSUE,
    any_case=True,
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Certificate:
    """A certificate number as read.

    Attributes
    ----------
    number
        The number in one spelling, without its suffix.
    suffix
        ``X``: specific conditions of use exist. ``U``: an Ex component, no evidence by itself. Empty:
        neither is written, which does not prove that there are no conditions (IEC 60079-0 clause 29,
        from memory).
    form_known
        False for a form that Ferrule does not know: number and suffix are then a guess.
    text
        What was written.
    """

    number: str
    suffix: str = ""
    form_known: bool = True
    text: str = ""

    def __str__(self) -> str:
        return f"{self.number}{self.suffix}"


def take_certificate(scanner: Scanner) -> Certificate | None:
    """Take a certificate number of a known form; None without."""
    if match := scanner.take(IECEX_NUMBER):
        number = f"IECEx {match[1]} {match[2]}.{match[3]}"
        return Certificate(number=number, suffix=(match[4] or "").upper(), text=match[0].strip())
    if match := scanner.take(ATEX_NUMBER):
        scheme = match[3].upper()
        letter = "E " if match[4] else ""
        number = f"{match[1]} {match[2]} {scheme} {letter}{match[5]}"
        return Certificate(number=number, suffix=(match[6] or "").upper(), text=match[0].strip())
    return None


_ISSUE_BEHIND: Final = re.compile(_ISSUE[:-1] + "$", re.IGNORECASE)
_SUFFIX: Final = re.compile(r"(?<=\d)\s?[-/]?\s?([XU])(?![A-Za-z0-9])", re.IGNORECASE)
_BETWEEN_CERTIFICATES: Final = Token(r"[;,/&+|]|(?:and|und)(?![A-Za-z])", any_case=True)
_APART: Final = re.compile(r"[;,&+|\n]|\s/\s|\s(?:and|und)\s")  # a bare stroke may belong to the number


@lru_cache(maxsize=4096)
def read_certificate(text: str) -> Certificate:
    """Read one certificate number.

    Forms known: ``IECEx ABC 20.0001X``, ``ABC 20 ATEX 0001 U``, ``ABC 03 ATEX E 100 X`` and
    ``ABC 21 UKEX 0002X``, with or without an issue behind. Of any other form only an X or U behind a digit is
    read. Nothing is inferred from a number but its suffix. Several in one text: `read_certificates`.

    >>> read_certificate("ABC20ATEX0001X")
    Certificate(number='ABC 20 ATEX 0001', suffix='X', form_known=True, text='ABC20ATEX0001X')
    >>> str(read_certificate("IECEx ABC 20.0001X Issue 3"))
    'IECEx ABC 20.0001X'
    """
    known = _known(text)
    if len(known) == 1:
        return replace(known[0], text=text)
    written = " ".join(text[:MAX_LENGTH].split())
    number = _ISSUE_BEHIND.sub("", written).strip()
    suffixes = list(_SUFFIX.finditer(number))
    if suffixes and suffixes[-1].end() == len(number):
        number = number[: suffixes[-1].start()]
    found = {match[1].upper() for match in suffixes}
    suffix = "X" if "X" in found else "U" if found else ""
    return Certificate(number=number, suffix=suffix, form_known=False, text=text)


@lru_cache(maxsize=4096)
def read_certificates(text: str) -> tuple[Certificate, ...]:
    """Read the certificate numbers of one cell.

    >>> [str(c) for c in read_certificates("ABC 20 ATEX 0001X / IECEx ABC 20.0002X")]
    ['ABC 20 ATEX 0001X', 'IECEx ABC 20.0002X']
    """
    found = _known(text)
    for piece in () if found else _APART.split(text[:MAX_LENGTH]):
        found += _known(piece) or tuple(each for each in (read_certificate(piece),) if each.number)
    return found


def _known(text: str) -> tuple[Certificate, ...]:
    """Return the certificates of a text that holds nothing but numbers of known forms; else none."""
    if len(text) > MAX_LENGTH:
        return ()
    scanner = Scanner(normalised(text)[0])
    found: list[Certificate] = []
    while certificate := take_certificate(scanner):
        found.append(certificate)
        while scanner.take(_BETWEEN_CERTIFICATES):
            pass
    return tuple(found) if scanner.ended else ()


# What a record of acceptance holds: somebody's name and a day. Text of the conditions themselves is none.
_DATE: Final = re.compile(
    r"\b(?:\d{4}-\d{1,2}(?:-\d{1,2})?|\d{1,2}[./-]\d{1,2}[./-]\d{2,4}|\d{1,2}[./-]\d{4}|\d{1,2}/\d{2}"
    r"|\d{1,2}\.?[ -]?[a-zäéûô]{3,9}\.?[ -]?,?\d{2,4}|[a-zäéûô]{3,9}\.?[ -]\d{1,2},? ?\d{4}|[a-zäéûô]{3,9}\.?[ -]\d{4})"
    r"(?:[ t]\d{2}:\d{2}(?::\d{2})?)?\b",
    re.IGNORECASE,
)
_MONTH: Final = re.compile(
    r"(?:jan|feb|mar|mär|mrz|apr|ma[iy]|jun|jul|aug|sep|o[ck]t|nov|de[cz]|fév|avr|juin|juil|aoû|déc|ene|abr|ago|dic)",
    re.IGNORECASE,
)
_NOT_YET: Final = re.compile(
    r"\b(?:not?|never|none|rejected|refused|declined|open|outstanding|pending|awaiting|due|until|nicht|kein|offen|"
    r"abgelehnt|ausstehend|non|tb[acd])\b",
    re.IGNORECASE,
)
_NAME: Final = re.compile(r"[^\W\d_]{2,}")
_NO_NAME: Final = re.compile(
    r"\b(?:yes|ja|oui|ok|accepted|met|done|date|on|by|am|von|seen|read|reviewed|checked)\b", re.I
)


@lru_cache(maxsize=4096)
def conditions_accepted(text: str | None) -> bool:
    """Whether a text records that somebody has accepted the conditions of use: a name and a date.

    >>> conditions_accepted("N. Hollin, 3 May 2026"), conditions_accepted("yes"), conditions_accepted(None)
    (True, False, False)
    >>> conditions_accepted("Clean with a damp cloth only, see 17"), conditions_accepted("not accepted, NH 2026-05-03")
    (False, False)
    """
    if not text or len(text) > MAX_LENGTH or _NOT_YET.search(text):
        return False
    for date in _DATE.finditer(text):
        word = _NAME.search(date[0])
        if word and not _MONTH.match(word[0]):
            continue
        return bool(_NAME.search(_NO_NAME.sub(" ", text[: date.start()] + " " + text[date.end() :])))
    return False
