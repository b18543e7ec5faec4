"""Barriers that rows describe beside their instrument: a calculation sheet has Uo and Ui of one circuit on one row."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import Any, Final

from instruments.kind import Kind
from instruments.record import DeviceType, Instrument

_GIVES: Final = ("uo_v", "io_ma", "po_mw")
_OF_THE_BARRIER: Final = (
    *_GIVES,
    "co_iic_nf",
    "co_iib_nf",
    "co_iia_nf",
    "lo_iic_mh",
    "lo_iib_mh",
    "lo_iia_mh",
    "lo_ro_uh_per_ohm",
    "combined_pairs",
    "output_characteristic",
    "isolation",
    "is_earth",
    "working_voltage_v",
)
_BARRIERS: Final = frozenset({Kind.BARRIER, Kind.ISOLATOR})
# Says what stands there, not which: each row then has its own.
_WHAT: Final = re.compile(
    r"(?:y|yes|ja|x|required|zener|isolator|barrier|zener barrier|galvanic|galvanic isolator|isolated|is|ex ?i)\.?",
    re.IGNORECASE,
)
_IS_TEMPERATURE: Final = re.compile(r"(?:^|[^a-z])t[a-z]{0,4}[-_. /]?[0-9]", re.IGNORECASE)
_NONE: Final = re.compile(r"(?:no|n|none|not required|nein|ohne|direct)\.?", re.IGNORECASE)


def barriers_of_rows(
    rows: Sequence[Instrument], types: Sequence[DeviceType]
) -> tuple[tuple[Instrument, ...], tuple[DeviceType, ...]]:
    """Give what rows say of a barrier to the barrier that they name, where no list describes it.

    A row states Uo, Io and Po beside the Ui, Ii and Pi of its instrument: they are the barrier's. A temperature
    transmitter gives its sensor a Uo too; where no other row of a sheet states one, the figures stay with the
    instrument.

    Parameters
    ----------
    rows
        The rows of the index, as read.
    types
        The entries of the device catalogue.

    Returns
    -------
    tuple
        The rows without what is the barrier's, and the barriers' entries: one for each name, a second one where two
        rows state different figures.
    """
    if not any(_describes(row) for row in rows):
        return tuple(rows), ()
    listed = {_key(each.code) for each in types}
    tags = {_key(row.tag) for row in rows}
    sheets = {_sheet(row) for row in rows if _describes(row) and not _IS_TEMPERATURE.search(row.tag or "")}
    found: dict[tuple[str, Any], DeviceType] = {}
    left: list[Instrument] = []
    for row in rows:
        key = _key(row.barrier)
        if not _describes(row) or key in listed or key in tags or _sheet(row) not in sheets:
            left.append(row)
            continue
        name = (row.barrier or "").strip()
        if _WHAT.fullmatch(name):
            name = f"{name} of {row.tag or 'a row without tag'}"
        own = row.own
        assert own is not None
        stated: Mapping[str, Any] = {each: getattr(own, each) for each in _OF_THE_BARRIER}
        found.setdefault(
            (name, tuple(stated.values())),
            DeviceType(
                code=name,
                kind=Kind.ISOLATOR if own.isolation == "isolator" else Kind.BARRIER,
                origin=row.origin,
                blanks={each: why for each, why in row.blanks.items() if each in _OF_THE_BARRIER},
                unread=own.unread & frozenset(_OF_THE_BARRIER),
                **stated,
            ),
        )
        nothing: dict[str, Any] = dict.fromkeys(_OF_THE_BARRIER)
        rest = replace(own, unread=own.unread - frozenset(_OF_THE_BARRIER), **nothing)
        left.append(replace(row, barrier=name, own=rest))
    return tuple(left), tuple(found.values())


def _describes(row: Instrument) -> bool:
    """Whether a row names a barrier and states what it gives."""
    own = row.own
    return (
        own is not None
        and bool(row.barrier)
        and row.kind not in _BARRIERS
        and _NONE.fullmatch((row.barrier or "").strip()) is None
        and any(getattr(own, name) is not None for name in _GIVES)
    )


def _sheet(row: Instrument) -> int | None:
    return id(row.origin.place) if row.origin is not None else None


def _key(text: str | None) -> str:
    return "".join(text.split()).casefold() if text else ""
