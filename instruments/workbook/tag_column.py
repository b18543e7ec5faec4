"""The tag column of a sheet: the tags that each cell means, the note beside them, and what it says of its row."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

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
from instruments.workbook.number_format import as_text
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


def read_tag_cell(cell: Value, profile: TagProfile) -> TagCell:
    """Read a cell of a tag column.

    >>> found = read_tag_cell("PT-1001A/B (Note 3)", DEFAULT)
    >>> found.tags, found.letters, found.note
    (('PT-1001A', 'PT-1001B'), 'PT', 'Note 3')
    >>> read_tag_cell("PT-102 DELETED", DEFAULT).status, read_tag_cell(1001.0, DEFAULT).tags
    ('deleted', ('1001',))
    """
    text = as_text(cell).strip()
    if cell is not None and not isinstance(cell, str | float):
        # 05-12 became the fifth of December, or the twelfth of May.
        readings = (text[5:10], f"{text[8:10]}-{text[5:7]}") if re.match(r"\d{4}-\d\d-\d\d", text) else ()
        return TagCell(trouble=trouble("the spreadsheet made a date or time of it", readings))
    plain = text.isascii() and text.isupper() and " " not in text and "/" not in text
    parts = profile.parts(text) if plain else None
    if parts is not None:
        return TagCell(tags=(text,), letters=parts[1])
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
