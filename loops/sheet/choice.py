"""Which of a plant's sheets are wanted: those of an area, a unit, a system, a junction box, or of some tags."""

from __future__ import annotations

import difflib
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, fields, replace
from typing import Final

from loops.plant import Plant, name_key
from loops.sheet.pack import LoopOnPaper, Sheets, area_title, filed_under


class NothingChosen(Exception):
    """No loop has what was asked for; says which the list has."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Choice:
    """What is wanted: a loop must have one of each kind that is named; nothing named is every loop."""

    areas: tuple[str, ...] = ()
    units: tuple[str, ...] = ()
    systems: tuple[str, ...] = ()
    boxes: tuple[str, ...] = ()
    tags: tuple[str, ...] = ()

    def __bool__(self) -> bool:
        return any(getattr(self, field.name) for field in fields(self))

    def __str__(self) -> str:
        named = ((word, getattr(self, name)) for name, (word, _) in _KINDS.items())
        return "; ".join(f"{word} {', '.join(texts)}" for word, texts in named if texts)


def _areas(loop: LoopOnPaper) -> Iterable[str | None]:
    for each in loop.members:
        yield filed_under(each)
        yield area_title(each)
        yield each.record.area


def _units(loop: LoopOnPaper) -> Iterable[str | None]:
    return (each.record.unit for each in loop.members)


def _systems(loop: LoopOnPaper) -> Iterable[str | None]:
    for circuit in loop.circuits:
        yield circuit.signal_row.system
        yield circuit.device.record.system


def _boxes(loop: LoopOnPaper) -> Iterable[str | None]:
    for circuit in loop.circuits:
        yield circuit.signal_row.junction_box
        yield circuit.device.record.junction_box


def _tags(loop: LoopOnPaper) -> Iterable[str | None]:
    yield loop.name
    for each in loop.members:
        yield each.name
        yield each.record.tag_written
        yield each.tag.normalised if each.tag is not None else None


_KINDS: Final[dict[str, tuple[str, Callable[[LoopOnPaper], Iterable[str | None]]]]] = {
    "areas": ("area", _areas),
    "units": ("unit", _units),
    "systems": ("system", _systems),
    "boxes": ("junction box", _boxes),
    "tags": ("tag", _tags),
}
_MOST_SHOWN: Final = 8


def chosen(sheets: Sheets, choice: Choice, plant: Plant) -> Sheets:
    """Return the sheets that are wanted, in their order.

    Parameters
    ----------
    sheets
        All sheets of the plant.
    choice
        What is wanted.
    plant
        The plant: a tag may be written in any spelling of it.

    Raises
    ------
    NothingChosen
        A name that no loop has, or no loop that has one of each kind.
    """
    if not choice:
        return sheets
    drawn: Sequence[LoopOnPaper] = sheets.drawn
    for name, (word, values) in _KINDS.items():
        wanted = getattr(choice, name)
        if not wanted:
            continue
        known = {id(loop): {name_key(text): text for text in values(loop) if text} for loop in sheets.drawn}
        keys: set[str] = set()
        for text in wanted:
            meant = _spellings(text, plant) if name == "tags" else {name_key(text)}
            if not any(meant & known[id(loop)].keys() for loop in sheets.drawn):
                raise NothingChosen(_no_such(word, text, (each for found in known.values() for each in found.values())))
            keys |= meant
        drawn = [loop for loop in drawn if keys & known[id(loop)].keys()]
    if not drawn:
        raise NothingChosen(f"no loop has all of: {choice}")
    return replace(sheets, drawn=tuple(drawn), left_out=())


def _spellings(text: str, plant: Plant) -> set[str]:
    return {name_key(text), *(name_key(each.name) for each in plant.by_tag(text))}


def _no_such(word: str, text: str, known: Iterable[str]) -> str:
    names = sorted(set(known))
    near = difflib.get_close_matches(text, names, n=3) or (names if len(names) <= _MOST_SHOWN else [])
    return f"no loop with a sheet has the {word} {text}" + (f"; the list has {', '.join(near)}" if near else "")
