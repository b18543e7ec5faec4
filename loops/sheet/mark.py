"""A sheet's content mark: a short digest of all that it says but its findings, whole and part by part."""

from __future__ import annotations

import hashlib
import json
import re
import zlib
from collections.abc import Mapping
from pathlib import Path
from typing import Any, Final, NamedTuple

from loops.sheet.content import SheetContent

LENGTH: Final = 8
"""Hexadecimal digits of a mark: two sheets of a plant that differ share one once in 4,000 million."""
MOST_BYTES: Final = 64_000_000
"""Of the marks in a file: those of 200,000 loops."""

Parts = Mapping[str, str]
"""What a sheet has, by the names that people see, with the digest of each."""
Marks = Mapping[str, Parts]
"""The parts of each loop's sheet, by the loop's number."""
Known = Mapping[str, Parts | str]
"""What is known of earlier sheets: the parts, or the marks of the whole alone."""


class NoMarks(Exception):
    """A file that holds no marks; says which, and which files do."""

    def __init__(self, path: Path, reason: str) -> None:
        super().__init__(f"{path}: {reason}")


def parts_of(content: SheetContent) -> dict[str, str]:
    """Return the digests of a sheet's parts.

    The list's name is no part of it: the next revision has another. Nor are the findings, which change when a rule
    does.
    """
    title = (
        content.loop, content.plant, content.service, content.unit, content.area, content.classification, content.pid,
        content.line, content.equipment, content.drawing,
    )  # fmt: skip
    parts: dict[str, object] = {
        "title block": title,
        "devices": content.devices,
        "settings": content.settings,
        "remarks": content.remarks,
        "assumptions": content.assumed,
    }
    for each in content.circuits:
        named = f"circuit {each.name}"
        parts[f"{named}: wiring"] = (each.kind, each.device, each.service, each.fields, each.path, each.conductors)
        parts[f"{named}: hazardous area"] = each.classification
        parts[f"{named}: voltage budget"] = each.power
        parts[f"{named}: check"] = (each.check, each.tries)
        parts[f"{named}: entity comparison"] = (each.entity, each.system)
    return {name: _digest(repr(part)) for name, part in parts.items()}


def mark_of(parts: Parts) -> str:
    """Return the mark of a whole sheet."""
    return _digest(repr(sorted(parts.items())))


def _digest(text: str) -> str:
    return hashlib.sha256(text.encode("utf-8", "surrogatepass")).hexdigest()[:LENGTH]


class Change(NamedTuple):
    """What of a sheet is not as it was: the parts that changed, that are new and that are gone."""

    parts: tuple[str, ...]
    new: bool = False

    def __str__(self) -> str:
        return "new sheet" if self.new else ", ".join(self.parts)


def change_of(parts: Parts, before: Parts | str | None) -> Change | None:
    """Return what changed of a sheet; None where nothing did. Where only the whole's mark is known, no part is told.

    >>> change_of({"devices": "a", "settings": "b"}, {"devices": "a", "settings": "c", "remarks": "d"})
    Change(parts=('settings', 'remarks (gone)'), new=False)
    """
    if before is None:
        return Change((), new=True)
    if isinstance(before, str):
        return None if mark_of(parts) == before else Change(("content",))
    changed = [name for name, digest in parts.items() if name in before and before[name] != digest]
    added = [f"{name} (new)" for name in parts if name not in before]
    gone = [f"{name} (gone)" for name in before if name not in parts]
    found = (*changed, *added, *gone)
    return Change(found) if found else None


# --------------------------------------------------------------------------------------------------------
# Marks in a pack


TYPE: Final = "/FerruleMarks"
_STREAM: Final = re.compile(rb"<< /Type /FerruleMarks /Length (\d{1,9}) /Filter /FlateDecode >>\nstream\n")


def packed(marks: Marks) -> bytes:
    """Return the marks as they stand in a pack."""
    return zlib.compress(json.dumps(marks, ensure_ascii=True, separators=(",", ":")).encode("ascii"), 6)


def marks_in(path: Path) -> Known:
    """Return the marks of the sheets in a pack (.pdf), part by part, or of an audit (findings.json), of the whole.

    Raises
    ------
    NoMarks
        The file holds none.
    OSError
        It cannot be read.
    """
    data = path.read_bytes()
    if data.startswith(b"%PDF"):
        found = _STREAM.search(data)
        if found is None:
            raise NoMarks(path, "is no pack of loop sheets, or of an older kind that has no content marks")
        data = _unpacked(path, data[found.end() : found.end() + int(found[1])])
        told = _read(path, data)
    else:
        whole = _read(path, data)
        told = whole.get("sheets") if isinstance(whole, dict) else None
    if not _are_marks(told):
        raise NoMarks(path, "holds no content marks of loop sheets; name a loop-sheets.pdf or a findings.json")
    return told  # type: ignore[no-any-return]


def _unpacked(path: Path, data: bytes) -> bytes:
    made = zlib.decompressobj()
    try:
        text = made.decompress(data, MOST_BYTES)
    except zlib.error:
        raise NoMarks(path, "has content marks that are damaged") from None
    if made.unconsumed_tail:
        raise NoMarks(path, "has more content marks than any plant")
    return text


def _read(path: Path, data: bytes) -> Any:
    try:
        return json.loads(data)
    except (ValueError, RecursionError):
        raise NoMarks(path, "is neither a loop-sheets.pdf nor a findings.json, or is damaged") from None


def _are_marks(told: Any) -> bool:
    return isinstance(told, dict) and all(
        isinstance(parts, str)
        or (isinstance(parts, dict) and all(isinstance(digest, str) for digest in parts.values()))
        for parts in told.values()
    )
