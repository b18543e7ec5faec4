"""The text of markings and classifications: one spelling of signs and blanks, and the taking of tokens."""

from __future__ import annotations

import re
import unicodedata
from typing import Final

MAX_LENGTH: Final = 500  # longer text is no marking; it also bounds the work that a hostile cell can cause

# Characters that only look Latin, as keyboards of other scripts put them into markings.
_LOOK_ALIKES: Final = str.maketrans(
    "АВСЕНІКМОРТХаеіорсхᎪΑΒΕΗΙΚΜΝΟΡΤΧ",
    "ABCEHIKMOPTXaeiopcxAABEHIKMNOPTX",
)
_SIGNS: Final = str.maketrans(
    {
        **dict.fromkeys("‐‑‒–—―−﹣", "-"),
        **dict.fromkeys("≦⩽", "≤"),
        **dict.fromkeys("≧⩾", "≥"),
        **dict.fromkeys("⁄∕÷", "/"),
        **dict.fromkeys("⟨〈‹", "<"),
        **dict.fromkeys("⟩〉›", ">"),
        **dict.fromkeys("'\"`´‘’“”„«»", " "),
    }
)
_SUBSCRIPT_BEFORE_DIGIT: Final = re.compile("([₀-₉])(?=[0-9])")
_DEGREES_BEFORE_FOLDING: Final = str.maketrans({"º": "°", "˚": "°", "∘": "°"})  # NFKC would make letters of them


def normalised(text: str) -> tuple[str, bool]:
    """Return a marking's text in one spelling of signs and spaces, and whether letters only looked Latin.

    Letters and digits are never repaired; l and 1, O and 0 stay what they are.

    >>> normalised("Ex  ia IIC T4 –20 ℃ =< Ta")
    ('Ex ia IIC T4 -20 °C ≤ Ta', False)
    """
    text = _SUBSCRIPT_BEFORE_DIGIT.sub(r"\1 ", text)  # T with a lowered 500 directly before 320
    text = unicodedata.normalize("NFKC", text.translate(_DEGREES_BEFORE_FOLDING))
    text = "".join(sign for sign in text if unicodedata.category(sign) != "Cf")
    text = text.translate(_SIGNS)
    latin = text.translate(_LOOK_ALIKES)
    for written, meant in (("=<", "≤"), ("<=", "≤"), (">=", "≥"), ("=>", "≥")):
        latin = latin.replace(written, meant)
    return " ".join(latin.split()), text.translate(_LOOK_ALIKES) != text


class Token:
    """One token: how it is written, exactly and without regard to case."""

    __slots__ = ("any_case", "exact")

    def __init__(self, pattern: str, *, any_case: bool = False) -> None:
        self.any_case = re.compile(pattern, re.IGNORECASE)
        self.exact = self.any_case if any_case else re.compile(pattern)


class UnreadableMarking(ValueError):
    """The text is no marking: what was expected, and where it stopped."""


class Scanner:
    """Takes tokens from a text, one after the other; blanks between them do not count.

    `fold` reads letters without regard to case: level letters are case-significant (IEC 60079-0 clause 29,
    from memory), so a text is first read exactly.
    """

    __slots__ = ("flags", "fold", "position", "text")

    def __init__(self, text: str, *, fold: bool = False) -> None:
        self.text = text
        self.fold = fold
        self.position = 0
        self.flags: set[str] = set()

    @property
    def ended(self) -> bool:
        """True where nothing but blanks is left."""
        self.skip_blanks()
        return self.position >= len(self.text)

    def skip_blanks(self) -> None:
        """Move to the next character that is not blank."""
        while self.position < len(self.text) and self.text[self.position] == " ":
            self.position += 1

    def peek(self, token: Token) -> re.Match[str] | None:
        """Return the match of a token here, without moving on."""
        self.skip_blanks()
        return (token.any_case if self.fold else token.exact).match(self.text, self.position)

    def take(self, token: Token) -> re.Match[str] | None:
        """Return the match of a token here and move behind it."""
        match = self.peek(token)
        if match:
            self.position = match.end()
        return match

    def rest(self) -> str:
        """Return the beginning of what is left, for messages."""
        left = self.text[self.position :].strip()
        return left if len(left) <= 30 else f"{left[:30]}..."
