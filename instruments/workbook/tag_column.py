"""The tag column of a sheet: the tags that each cell means, the note beside them, and what it says of its row."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from instruments.number import CellTrouble
from instruments.plant_data import PlantData
from instruments.tag import (
    DEFAULT,
    TagProfile,
    best_profile,
    normalise_tag,
    plant_profile,
    read_tag,
    split_note,
    tags_of_cell,
)
from instruments.workbook.cell import trouble
from instruments.workbook.number_format import as_text, as_typed, format_kind
from instruments.workbook.sheet import Value
from instruments.workbook.words import is_ditto, not_live, placeholder

__all__ = ["TagCell", "profile_of", "read_tag_cell"]


@dataclass(frozen=True, slots=True, kw_only=True)
class TagCell:
    """What one cell of a tag column says.

    Attributes
    ----------
    tags
        The tags it means, in their normalised spelling: none, one, or several.
    letters
        The letters of the first; blank where it does not parse.
    note
        What stands beside the tag.
    status
        deleted, void, spare, future or demolished, where the cell says it.
    blank, trouble
        Why it holds no tag.
    ditto
        It repeats the cell above.
    """

    tags: tuple[str, ...] = ()
    letters: str = ""
    note: str = ""
    status: str | None = None
    blank: str | None = None
    trouble: CellTrouble | None = None
    ditto: bool = False


def profile_of(plant: PlantData, texts: Sequence[str]) -> TagProfile:
    """Return how a sheet's tags are written: as the plant states, else as most of them are."""
    try:
        stated = plant_profile(plant.tag_pattern)
    except ValueError:
        stated = None
    return stated or (best_profile(texts) if texts else DEFAULT)


# A month as a spreadsheet writes it into a text file, with a day or a year, and dates all in figures.
_MONTH: Final = (
    r"(?:jan(?:uary|uar|v)?|feb(?:ruary|ruar|r)?|mar(?:ch|s)?|m[äa]rz?|m[äa]r|apr(?:il)?|avr(?:il)?|ma[yi]|june?|juni?|"
    r"july?|juli?|juil|aug(?:ust)?|ao[uû]t|sept?(?:ember)?|o[ck]t(?:ober)?|nov(?:ember)?|de[cz](?:ember)?|d[ée]c)"
)
_DATE: Final = re.compile(
    rf"(?P<day>\d{{1,2}})(?:\.\s?|[-/ ])(?P<month>{_MONTH})\.?(?:[-/ ](?:\d\d|\d{{4}}))?"
    rf"|(?P<first>{_MONTH})\.?[-/ ](?P<tail>\d{{1,2}}|\d{{4}})"
    r"|\d{4}[-./]\d{1,2}[-./]\d{1,2}|\d{1,2}[./]\d{1,2}[./](?:\d\d|\d{4})",
    re.IGNORECASE,
)
_EXPONENT: Final = re.compile(r"(?P<figures>\d[.,]\d{1,14}|\d)E\+(?P<places>\d{1,3})", re.IGNORECASE)
_MADE_A_DATE: Final = "the spreadsheet made a date or time of it"
_MADE_A_NUMBER: Final = "the spreadsheet made a number of it"


def _made_of_it(text: str, profile: TagProfile) -> CellTrouble | None:
    """Return the trouble with a text that a spreadsheet wrote for a date or a number that it took a tag for."""
    found = _EXPONENT.fullmatch(text)
    if found is not None:
        return trouble(_MADE_A_NUMBER, as_typed(float(text.replace(",", "."))))
    found = _DATE.fullmatch(text)
    if found is None:
        return None
    # DEC-12 in capitals may be a density element; a spreadsheet writes Dec-12.
    if text == text.upper() and profile.parts(text) is not None:
        return None
    word = found["month"] or found["first"]
    if word is None:
        return trouble(_MADE_A_DATE)
    month = word.upper()[:3]
    other = found["day"] or found["tail"]
    shown = f"{int(other)}-{month}" if found["day"] else f"{month}-{other}"
    number = _MONTH_NUMBERS.get(month)
    if number is None or len(other) > 2:
        return trouble(_MADE_A_DATE, (shown,))
    return trouble(_MADE_A_DATE, (shown, f"{number:02}-{int(other):02}", f"{int(other):02}-{number:02}"))


_MONTH_NUMBERS: Final = {
    name: number
    for number, names in enumerate(
        (
            ("JAN",), ("FEB",), ("MAR", "MÄR"), ("APR", "AVR"), ("MAY", "MAI"), ("JUN",), ("JUL",),
            ("AUG", "AOU", "AOÛ"), ("SEP",), ("OCT", "OKT"), ("NOV",), ("DEC", "DEZ", "DÉC"),
        ),
        1,
    )
    for name in names
}  # fmt: skip


def read_tag_cell(cell: Value, profile: TagProfile, *, number_format: str | None = None) -> TagCell:
    """Read a cell of a tag column.

    Parameters
    ----------
    cell
        The cell.
    profile
        How the sheet's tags are written.
    number_format
        The format code of a number or date that looks otherwise than it is.

    >>> found = read_tag_cell("PT-1001A/B (Note 3)", DEFAULT)
    >>> found.tags, found.letters, found.note
    (('PT-1001A', 'PT-1001B'), 'PT', 'Note 3')
    >>> read_tag_cell("PT-102 DELETED", DEFAULT).status, read_tag_cell(1001.0, DEFAULT).tags
    ('deleted', ('1001',))
    """
    if cell is not None and not isinstance(cell, str | float):
        return TagCell(trouble=trouble(_MADE_A_DATE, as_typed(cell, number_format)))
    if isinstance(cell, float):
        scientific = number_format is not None and format_kind(number_format) == "scientific"
        if scientific or not 1e-4 < abs(cell) < 1e15:
            return TagCell(trouble=trouble(_MADE_A_NUMBER, as_typed(cell, number_format)))
    text = as_text(cell).strip()
    plain = text.isascii() and text.isupper() and " " not in text and "/" not in text
    parts = profile.parts(text) if plain else None
    if parts is not None:
        return TagCell(tags=(text,), letters=parts[1])
    made = _made_of_it(text, profile) if text[:1].isdigit() or text[-1:].isdigit() else None
    if made is not None:
        return TagCell(trouble=made)
    status = not_live(text)
    if status and not any(sign.isdigit() for sign in text):
        return TagCell(status=status, blank=status, note=text)
    reason = placeholder(text)
    if reason:
        return TagCell(blank=reason)
    if is_ditto(text):
        return TagCell(ditto=True)
    one_line = " ".join(text.split())
    tag, note = split_note(one_line if profile.parts(normalise_tag(one_line)) else text, profile=profile)
    tag = normalise_tag(tag)
    tags = tags_of_cell(tag, profile=profile) or ((tag,) if tag else ())
    if note:
        status = status or not_live(note, status_column=True)
    letters = read_tag(tags[0], profile=profile).letters if tags else ""
    return TagCell(tags=tags, letters=letters, note=note, status=status)
