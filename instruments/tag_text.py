"""The spelling of a tag before it is read: blanks, dashes, hidden characters, letters that look Latin."""

from __future__ import annotations

import re
import unicodedata

__all__ = ["latin", "normalise_tag", "tidy"]

# Dashes that people and spreadsheets put for a hyphen; the soft hyphen stands where a browser broke a tag.
_DASHES = dict.fromkeys((0x00AD, *range(0x2010, 0x2016), 0x2043, 0x2212, 0x02D7, 0x207B, 0xFE58, 0xFE63, 0xFF0D), "-")
_CYRILLIC = dict(zip("АВЕЅІЈКМНОРСТУХ", "ABESIJKMHOPCTYX", strict=True))
_GREEK = dict(zip("ΑΒΕΖΗΙΚΜΝΟΡΤΥΧ", "ABEZHIKMNOPTYX", strict=True))
_LOOK_ALIKES = _CYRILLIC | _GREEK
_LATIN = str.maketrans(_LOOK_ALIKES)

_PLAIN = re.compile(r"[A-Z0-9]+(?:-[A-Z0-9]+)*")
_CONTROLS = re.compile(r"[\x00-\x08\x0e-\x1b\x7f]")
_AROUND = re.compile(r" ?([-/]) ?")


def tidy(text: str) -> str:
    """A tag as written, with plain blanks and hyphens and no hidden characters; case and letters are kept.

    >>> tidy("pt\\u2011 1001\\u200b ")
    'pt-1001'
    """
    if text.isascii():
        text = _CONTROLS.sub("", text)
    else:
        text = unicodedata.normalize("NFKC", text.translate(_DASHES)).translate(_DASHES)
        text = "".join(c for c in text if c.isspace() or not _is_hidden(c))
    return _AROUND.sub(r"\1", " ".join(text.split()))


def _is_hidden(character: str) -> bool:
    return unicodedata.category(character) in ("Cf", "Cc") or "\ufe00" <= character <= "\ufe0f"


def latin(text: str) -> tuple[str, str]:
    """A tag in upper case with Latin letters for those that only look so, and the characters replaced."""
    upper = text.upper()
    if upper.isascii():
        return upper, ""
    odd = "".join(c for c in text if c.upper() in _LOOK_ALIKES)
    return upper.translate(_LATIN), odd


def normalise_tag(text: str) -> str:
    """A tag in the spelling by which it is read and compared.

    NFKC; every dash a hyphen; hidden characters gone; Cyrillic and Greek letters that look Latin made Latin;
    upper case; one blank for any run of blanks, none at the ends and none around hyphens and slashes.

    >>> normalise_tag(" pt \\u2013 1001"), normalise_tag("\\u0420\\u0422-1001")
    ('PT-1001', 'PT-1001')
    """
    return normalise(text)[0]


def normalise(text: str) -> tuple[str, str]:
    """As `normalise_tag`, with the characters that only looked Latin."""
    if _PLAIN.fullmatch(text):
        return text, ""
    done, odd = latin(tidy(text))
    if done.isascii():
        return done, odd
    # Upper case can undo NFKC, and a replaced letter can join the accent behind it; it settles soon.
    for _ in range(8):
        again, more = latin(tidy(done))
        if again == done:
            break
        done, odd = again, odd + more
    return done, odd
