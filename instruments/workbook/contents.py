"""What the cells below a heading say of it: how far they fit each field that it can mean."""

from __future__ import annotations

import re
from collections.abc import Mapping
from itertools import islice, pairwise
from typing import Final

from instruments.column import Column, Reads
from instruments.kind import kind_from_words
from instruments.workbook.cell import labelled_settings
from instruments.workbook.heading_words import unit_in
from instruments.workbook.negligible import is_negligible
from instruments.workbook.number_format import as_text
from instruments.workbook.sheet import Sheet
from instruments.workbook.words import Words, folded, is_ditto, placeholder, yes_or_no

__all__ = ["IO_WORD", "Contents"]

SAMPLE: Final = 300
"""Filled cells of a column by which its contents are judged."""


_NUMBER: Final = re.compile(r"[<>≤≥~≈±+\-−–(]{0,3}\s?(?:\d|[.,]\d)")
_ONE_NUMBER: Final = re.compile(
    r"[<>≤≥~≈±+\-−–(]{0,3}\s?(?:\d[\d.,' ]{0,15}|[.,]\d{1,8})(?:e[+-]?\d{1,3})?\)?\s?(?:[^\d\s].{0,20})?", re.IGNORECASE
)
_TWO_NUMBERS: Final = re.compile(
    r"\(?[+\-−–]?\s?[\d.,]{1,12}\s?[^\d\s]{0,8}?\s?(?:-|–|—|−|to|bis|\.{2,3}|…|~|÷|/|thru|through|and|\|)\s?[+\-−–]?\s?[.,]?\d.{0,30}",
    re.IGNORECASE,
)
_KEYWORD: Final = re.compile(r"amb(?:ient)?|atm|fv|full vac(?:uum)?|vac(?:uum)?", re.IGNORECASE)
_NUMBER_AND_WORDS: Final = re.compile(r"[+\-]?[\d.,]{1,12}\s?[^\d\s]{0,12}(?:\s[^\d\s]{1,12}){0,2}")
_TAG_LIKE: Final = re.compile(
    r"[\W_]{0,2}[0-9]{0,4}[\W_]?[A-Za-zА-яΑ-ω]{1,24}[A-Za-z0-9А-яΑ-ω._/\\ \-–‑−()+*~:=,&]{0,40}"
)
IO_WORD: Final = re.compile(
    r"(?:h?(?:[ad][io]|p[io]|r?tdi?|rtd|tc|ff|pa|bus|hart|soft|serial|analog(?:ue)?[ -]?(?:in|out)(?:put)?|"
    r"digital[ -]?(?:in|out)(?:put)?|discrete[ -]?(?:in|out)(?:put)?|ae|aa|be|ba|de|da|uio|uai|eth(?:ernet)?|modbus|"
    r"pulse|ea|sa|ed|sd|[es] ?tor))"
    r"(?:[ \-]?(?:is|hart|ex|nis|s|sis|4-20.{0,8}))?(?:\s?[/+,&]\s?[a-z]{2,4}){0,3}",
    re.IGNORECASE,
)
_SIGNAL: Final = re.compile(
    r"(?i)(?:m\s?a\b|hart|contact|\bvfc\b|volt[ -]?free|pt ?-?\s?1?00|thermocouple|\btype [kjtnrsbe]\b|pulse|modbus|"
    r"fieldbus|profibus|foundation|\d\s?v(?:dc|ac)?\b|namur|relay|solenoid|dry|potential[ -]?free|\brtd\b|"
    r"\bt/?c\b|rs-?485|psi|bar\b|pneumatic|frequency|\bhz\b|binary|\bff\b|\bpa\b|digital|analog|npn|pnp|prox|potential)"
)
_AREA_CLASS: Final = re.compile(
    r"(?i)(?:zone|(?<![\w-])z ?(?:2[0-2]|[0-2])(?![\w-])|\bcl(?:ass)?\.? ?i|\bdiv|safe|non[- ]?haz|"
    r"unclass|haz|^n/?a$|^none$|\bex\b|^(?:0|1|2|20|21|22)$|^ii[abc]|^(?:2[0-2]|[012])\s?[/,;]\s?iii?[abc]|"
    r"general purpose|^nh$)"
)
_MARKING: Final = re.compile(
    r"\bA?EE?x\b|\bEx ?[a-z]{1,2}\b|\bCl(?:ass)?\.? ?I|\bII ?[123](?:/[123])? ?[GD]\b|"
    r"\bI\.?S\.?$|\bXP\b|\bNI\b|explosion ?proof",
    re.IGNORECASE,
)
_CERTIFICATE: Final = re.compile(
    r"\d\d ?\.? ?(?:ATEX|UKEX)|IECEx [A-Z]|(?:ATEX|UKEX|CML|CSA|UL|FM)\W{0,2}\d{2}|\d{4,}", re.IGNORECASE
)
_DOCUMENT: Final = re.compile(r"(?=.*\d)[\w.\-/&() ]{4,60}")
_CODE_LIKE: Final = re.compile(r"(?=.*[A-Za-z])(?=.*\d)[\w.\-/+*]{2,30}")


def _is_sequence(values: list[float], count: int) -> bool:
    """Whether cells are a running number: 1, 2, 3, with a step left out here and there, and sections between."""
    if not values or len(values) * 10 < count * 4 or values[0] not in (0.0, 1.0, 10.0):
        return False
    steps = sum(0 < after - before <= 25 for before, after in pairwise(values))
    return steps * 10 >= (len(values) - 1) * 8


class Contents:
    """The cells below a heading, and how far they fit a field."""

    def __init__(self, sheet: Sheet, index: int, first_row: int, heading: str) -> None:
        heading = folded(heading)
        cells = (
            (number, row[index])
            for number, row in enumerate(islice(sheet.rows, first_row, None), start=first_row)
            if row[index] is not None
        )
        texts: list[str] = []
        values: list[float] = []
        self.filled = False
        for number, cell in islice(cells, SAMPLE):
            self.filled = True
            text = as_text(cell, sheet.number_formats.get((number, index))).strip()
            if isinstance(cell, str):
                if folded(text) == heading or placeholder(text) or is_ditto(text):
                    continue
                if text.isdecimal() and len(text) < 7:
                    values.append(float(text))
            elif isinstance(cell, float):
                values.append(cell)
            texts.append(text)
        self.texts = texts
        self.count = len(texts)
        self.numbers = len(values)
        self.sequence = _is_sequence(values, self.count)
        self._fits: dict[int, float] = {}

    def part(self, pattern: re.Pattern[str]) -> float:
        """Return the part of the cells that a pattern fits whole."""
        return sum(pattern.fullmatch(text) is not None for text in self.texts) / self.count if self.count else 0.0

    def without_sections(self, pattern: re.Pattern[str]) -> float:
        """Return the part that a pattern fits whole of the cells of one word: those of several name a section."""
        texts = [text for text in self.texts if " " not in text]
        # A unit of one tag or two, each under a name of its own, leaves as many names as tags.
        if len(texts) < 2 or len(texts) * 3 < self.count:
            return 0.0
        return sum(pattern.fullmatch(text) is not None for text in texts) / len(texts)

    def holds(self, pattern: re.Pattern[str]) -> float:
        """Return the part of the cells that hold a pattern."""
        return sum(pattern.search(text) is not None for text in self.texts) / self.count if self.count else 0.0

    def units(self) -> float:
        """Return the part of the cells that are units; of the different texts, where that is more."""
        if not self.count:
            return 0.0
        known = {text: unit_in(text) is not None for text in set(self.texts)}
        by_row = sum(known[text] for text in self.texts) / self.count
        return max(by_row, sum(known.values()) / len(known))

    def in_words(self, words: Mapping[str, tuple[str, ...]]) -> float:
        """Return the part of the cells that are of a closed set of words."""
        read = Words(words)
        known = {text: len(read.find(text)) == 1 for text in set(self.texts)}
        return sum(known[text] for text in self.texts) / self.count if self.count else 0.0

    def fit(self, column: Column, codes: frozenset[str]) -> float:
        """Return how far the cells fit a column, 0 to 1; 0.6 where there are none to judge by."""
        if not self.count:
            return 0.6
        # By the column and not its field: two kinds of sheet may read one field name in two ways.
        known = self._fits.get(id(column))
        if known is None:
            known = self._fits[id(column)] = self._fit(column, codes)
        return known

    def _fit(self, column: Column, codes: frozenset[str]) -> float:
        reads = column.reads
        if reads is Reads.TAG:
            return 0.0 if self.sequence else self._tags()
        if reads is Reads.KIND:
            known = {text: kind_from_words(text) is not None for text in set(self.texts)}
            part = sum(known[text] for text in self.texts) / self.count
            return part if self.part(IO_WORD) < 0.5 else 0.0
        if reads is Reads.UNIT:
            return self.units()
        if reads in (Reads.QUANTITY, Reads.NUMBER, Reads.COUNT):
            if self.part(_TWO_NUMBERS) > 0.5:
                return 0.2
            if any(is_negligible(column.field, text) for text in self.texts):
                good = sum(
                    is_negligible(column.field, text) or bool(_ONE_NUMBER.fullmatch(text)) for text in self.texts
                )
                return good / self.count
            return (
                max(self.part(_ONE_NUMBER), self.part(_NUMBER_AND_WORDS))
                if not self.sequence or self.count < 8
                else 0.5
            )
        if reads is Reads.RANGE:
            return self.part(_TWO_NUMBERS)
        if reads is Reads.TRIPLET:
            return (
                sum(_NUMBER.match(text) is not None or _KEYWORD.fullmatch(text) is not None for text in self.texts)
                / self.count
            )
        if reads is Reads.WORD:
            return self.in_words(column.words)
        if reads is Reads.YES_NO:
            return sum(yes_or_no(text) is not None for text in self.texts) / self.count
        if column.into:
            return sum(labelled_settings(text) is not None for text in self.texts) / self.count
        return self._text_fit(column.field, codes)

    def _tags(self) -> float:
        good = 0.0
        for text in self.texts:
            if _NUMBER_AND_WORDS.fullmatch(text) or _TWO_NUMBERS.fullmatch(text):
                # A whole number may be a tag that lost its letters to a column of its own.
                continue
            if _TAG_LIKE.fullmatch(text) and text.count(" ") <= 4:
                digits = any(sign.isdigit() for sign in text)
                good += 1.0 if digits else 0.55 if " " not in text else 0.1
        return good / self.count

    def _text_fit(self, name: str, codes: frozenset[str]) -> float:
        if name == "io_type":
            return self.part(IO_WORD)
        if name == "code":
            # Each entry of a register has a code of its own; AI and DI are none.
            different = len(set(self.texts)) / self.count
            return 0.0 if self.part(IO_WORD) > 0.5 else 0.6 if different > 0.7 or self.count < 8 else 0.2
        if name == "signal":
            return max(self.holds(_SIGNAL), 0.4 * (1 - self.part(IO_WORD)))
        if name in ("area_classification", "process_zone"):
            return self.holds(_AREA_CLASS)
        if name == "area":
            listed = sum(folded(text) in codes for text in self.texts) / self.count
            return max(listed, 0.6 * (1 - self.holds(_AREA_CLASS)))
        if name == "device_type":
            listed = sum(folded(text) in codes for text in self.texts) / self.count
            # Codes of which none is listed are codes still: that they are not listed is for a rule to find.
            return max(listed, 0.3 * self.part(_CODE_LIKE))
        if name == "model":
            return 0.3 + 0.3 * self.part(_CODE_LIKE)
        if name in ("equipment", "line"):
            return 0.0 if self.sequence else 0.2 if self.numbers == self.count else 0.7
        if name == "pid":
            return 0.3 + 0.5 * self.part(_DOCUMENT)
        if name == "unit":
            return 0.7 * (1 - self.units())
        if name == "place":
            return 0.5
        if name in ("service", "description", "remarks"):
            spaced = sum(" " in text for text in self.texts) / self.count
            return 0.2 if self.numbers == self.count else 0.5 + 0.4 * spaced
        if name == "revision":
            return sum(len(text) <= 6 for text in self.texts) / self.count
        if name in ("ex_marking", "protection"):
            return max(
                self.holds(_MARKING), 0.0 if self.numbers == self.count else 0.4 * (1 - self.holds(_CERTIFICATE))
            )
        if name == "certificate":
            marked = self.holds(_MARKING)
            # Where both stand in one cell it is the marking's column, which is parted.
            return max(
                self.holds(_CERTIFICATE) * (1 - 0.3 * marked),
                0.1 if self.numbers == self.count else 0.5 * (1 - marked),
            )
        if name == "io_address":
            # A channel without its card, the same on each card, is no address.
            return 0.6 if len(set(self.texts)) * 2 > self.count else 0.2
        if name == "conductor":
            return 0.6
        return 0.25 if self.numbers == self.count and name in _NEVER_NUMBERS else 0.6


_NEVER_NUMBERS: Final = frozenset((
    "fluid", "maker", "phase", "scope", "status", "signal", "service", "junction_box", "kind",
))  # fmt: skip
