"""What the lists do not have and the rules would need: the sheets and columns that would let more be checked."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Final

from instruments.column import SheetKind
from instruments.columns import INSTRUMENTS
from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from loops.columns import SHEETS as LOOP_SHEETS
from validation.audit import Audit

__all__ = ["Wanted", "wanted_columns", "wanted_sheets"]

_CALLED: Final[Mapping[str, str]] = {
    "Device types": "a device catalogue",
    "Areas": "an area register",
    "IO list": "an I/O list",
    "Alarm and trip list": "an alarm and trip list",
    "Plant": "a sheet with the plant's own data",
    "Loops": "a loop list",
    "Terminations": "a termination list",
    "Cables": "a cable schedule",
    "Cable types": "a list of cable types",
}

_NAMED_IN: Final[Mapping[str, str]] = {"Device types": "device_type", "Areas": "area", "Cables": "cable"}
"""The column of the index that names an entry of such a sheet; without it the sheet says nothing of any row."""

_COMPARED_ONLY: Final = frozenset({"IO list", "Alarm and trip list"})
"""Sheets that are compared with the index and bring it no values."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Wanted:
    """A sheet or a column that is not there, and what it would let be checked.

    Attributes
    ----------
    name
        The kind of sheet, or the titles of the columns.
    called
        What people call it: a device catalogue.
    checks
        Rules, with the checks they could not make for want of nothing else.
    with_others
        Rules, with the checks that other values besides are blank for.
    fields
        The titles that it would bring, with the checks that each was blank for.
    named_in
        The column that the index needs for it and does not have; blank: none.
    """

    name: str
    called: str
    checks: Mapping[str, int] = field(default_factory=dict)
    with_others: Mapping[str, int] = field(default_factory=dict)
    fields: Mapping[str, int] = field(default_factory=dict)
    named_in: str = ""

    @property
    def count(self) -> int:
        """How many checks could be made."""
        return sum(self.checks.values())

    def __str__(self) -> str:
        rules = f"{len(self.checks)} rule{'' if len(self.checks) == 1 else 's'}"
        most = sorted(self.checks, key=lambda code: (-self.checks[code], code))
        shown = ", ".join(f"{code} {self.checks[code]:,}" for code in most[:6]) + (", ..." if len(most) > 6 else "")
        beside = f", with a column '{self.named_in}' in the index," if self.named_in else ""
        return f"{self.called}{beside} would let {rules} check {self.count:,} more: {shown}"


def wanted_sheets(result: Audit) -> tuple[Wanted, ...]:
    """Return the kinds of sheet that the lists do not have, the most wanted first.

    Parameters
    ----------
    result
        What the rules said: which checks could not be made, and for want of which values.
    """
    there = {sheet.kind for sheet in result.plant.lists.sheets if not sheet.skipped}
    index = _titles_of_index(result)
    found: list[Wanted] = []
    for kind in (*INSTRUMENT_SHEETS, *LOOP_SHEETS):
        if kind.name in there or kind is INSTRUMENTS:
            continue
        # A code in the index's own column is an area only where a register has it.
        brings = _titles_of(kind) - (index - {"area"})
        column = _NAMED_IN.get(kind.name)
        missing = column is not None and column not in result.plant.lists.index_columns
        found.append(
            _wanted(
                result,
                kind.name,
                _CALLED.get(kind.name, kind.name),
                brings,
                named_in=INSTRUMENTS.column(column).title if column is not None and missing else "",
            )
        )
    return tuple(sorted(found, key=lambda each: (-each.count, -sum(each.with_others.values()))))


def wanted_columns(result: Audit) -> tuple[Wanted, ...]:
    """Return the columns, alone or together, that the index does not have and checks were not made for want of.

    Parameters
    ----------
    result
        As for `wanted_sheets`.
    """
    absent = {column.title for column in INSTRUMENTS.columns if not column.owner} - _titles_of_index(result)
    by_titles: dict[tuple[str, ...], Counter[str]] = {}
    for code, fields, count in _unchecked(result):
        titles = [next((title for title in each if title in absent), None) for each in fields]
        named = tuple(dict.fromkeys(title for title in titles if title is not None))
        if "area classification" in named:
            named = tuple(title for title in named if title != "area")
        if len([title for title in titles if title is not None]) == len(titles) and named:
            by_titles.setdefault(tuple(sorted(named)), Counter())[code] += count
    found = [
        Wanted(
            name=", ".join(titles),
            called=f"{'a column' if len(titles) == 1 else 'columns'} {', '.join(titles)}",
            checks=dict(sorted(rules.items())),
            fields=dict.fromkeys(titles, sum(rules.values())),
        )
        for titles, rules in by_titles.items()
    ]
    return tuple(sorted(found, key=lambda each: (-each.count, each.name)))


def _wanted(result: Audit, name: str, called: str, brings: frozenset[str], *, named_in: str) -> Wanted:
    checks: Counter[str] = Counter()
    with_others: Counter[str] = Counter()
    titles: Counter[str] = Counter()
    for code, fields, count in _unchecked(result):
        brought = [next((title for title in each if title in brings), None) for each in fields]
        named = [title for title in brought if title is not None]
        if not named:
            continue
        titles.update(dict.fromkeys(named, count))
        (checks if len(named) == len(fields) else with_others)[code] += count
    return Wanted(
        name=name,
        called=called,
        checks=dict(sorted(checks.items())),
        with_others=dict(sorted(with_others.items())),
        fields=dict(titles.most_common()),
        named_in=named_in if checks or with_others else "",
    )


def _unchecked(result: Audit) -> Iterator[tuple[str, Sequence[Sequence[str]], int]]:
    """Yield rule, the values that were blank, each with its alternatives, and the number of subjects."""
    for code, coverage in result.coverage.items():
        for fields, subjects in coverage.unchecked.items():
            yield code, [each.split(" or ") for each in fields], len(subjects)


def _titles_of_index(result: Audit) -> frozenset[str]:
    """Return the titles of the columns that the index has."""
    known = result.plant.lists.index_columns
    return frozenset(column.title for column in INSTRUMENTS.columns if column.field in known and not column.owner)


def _titles_of(kind: SheetKind) -> frozenset[str]:
    """Return the titles, as rules name them, of the values that a kind of sheet brings."""
    if kind.name in _COMPARED_ONLY:
        return frozenset()
    own = {column.title for column in kind.columns if column.field not in ("code", "number", "tag", "circuit")}
    if kind.name == "Areas":
        return frozenset({"area", *(f"area {title}" for title in own)})
    if kind.name == "Loops":
        # What a circuit is (AI, RTD) is not what an instrument is.
        return frozenset(own - {"kind", "service"})
    if kind.name == "Cables":
        return frozenset({*own, "cable length"} - {"length"})
    return frozenset(own)
