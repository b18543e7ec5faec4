"""Variants of the clean twin audited without files: what a variant leaves as the twin has it is read once."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cache
from typing import Any
from unittest.mock import patch

from instruments.column import SheetKind
from instruments.plant_data import PlantData
from instruments.workbook import lists
from instruments.workbook.headings import SheetMatch
from instruments.workbook.normalise import SheetRecords
from instruments.workbook.sheet import Sheet, Value, take_out_errors
from loops.certificates import certificates_of
from loops.plant import Plant, assemble
from tests.marrowbeck import (
    DEMO,
    KINDS,
    Change,
    Rows,
    Sheets,
    headings,
    look_of,
    merged_headings,
    twin_rows,
    typed,
)
from validation.audit import Audit, audit, check_one
from validation.finding import NotApplicable, Outcome
from validation.rule import Rule, Subject, load_rules


def cells_of(title: str, rows: Rows) -> Sheet:
    """Return a sheet as the reader gives it of the workbook, without writing one."""
    look, names = look_of(title), headings(title, rows)
    first = look.heading + look.heading_rows if look.heading else 1
    values: list[list[Value]] = []
    for number, row in enumerate(rows, start=1):
        texts = (
            typed(text, as_text=number < first or name in look.text) for text, name in zip(row, names, strict=True)
        )
        values.append([float(each) if isinstance(each, int) else each for each in texts])
    while values and not any(value is not None for value in values[-1]):
        values.pop()
    width = max(at + 1 for row in values for at, value in enumerate(row) if value is not None)
    values = [row[:width] for row in values]
    errors = take_out_errors(values)
    return Sheet(
        file=str(DEMO),
        name=title,
        rows=values,
        errors=errors,
        merged=tuple(tuple(each - 1 for each in place) for place in merged_headings(look, rows)),  # type: ignore[misc]
        cells_filled=sum(value is not None for row in values for value in row) + len(errors),
    )


class Twin:
    """The clean twin, read once; its variants are read where they differ from it, or from a variant that is kept.

    A heading is matched once for each way in which it stands: the cells beneath it decide how it is
    understood too, but no variant here changes so many of them.
    """

    def __init__(self) -> None:
        self.rows = twin_rows()
        self._kept: dict[str, list[tuple[Rows, Sheet]]] = {title: [] for title in self.rows}
        self._matches: dict[object, SheetMatch | None] = {}
        self._records: dict[int, tuple[Sheet, SheetMatch, PlantData, SheetRecords]] = {}
        self._match, self._read = lists.match_sheet, lists.read_records
        self.keep(self.rows)

    def keep(self, rows: Sheets) -> Sheets:
        """Keep what is read of lists of which variants will follow, and return them."""
        for title, each in rows.items():
            if self._kept_sheet(title, each) is None:
                self._kept[title].append((each, cells_of(title, each)))
        return rows

    def plant(self, rows: Sheets) -> Plant:
        """Return the plant that lists make."""
        sheets = [self._kept_sheet(title, each) or cells_of(title, each) for title, each in rows.items()]
        with (
            patch.object(lists, "match_sheet", self._match_once),
            patch.object(lists, "read_records", self._read_once),
        ):
            return assemble(lists.records_of_sheets(sheets, KINDS))

    def audit(self, rows: Sheets, *, codes: Iterable[str] | None = None) -> Audit:
        """Audit lists; a rule that raises fails the test."""
        return audit(self.plant(rows), codes=codes, raise_errors=True)

    def _kept_sheet(self, title: str, rows: Rows) -> Sheet | None:
        return next((sheet for kept, sheet in self._kept[title] if kept == rows), None)

    def _match_once(self, sheet: Sheet, kinds: Sequence[SheetKind], **told: Any) -> SheetMatch | None:
        look = look_of(sheet.name)
        top = max(look.heading - 1, 0)
        heading = tuple(map(tuple, sheet.rows[top : top + look.heading_rows])) if look.heading else ()
        key = (sheet.name, heading, bool(told.get("codes")), "forced" in told)
        if key not in self._matches:
            self._matches[key] = self._match(sheet, kinds, **told)
        return self._matches[key]

    def _read_once(self, sheet: Sheet, match: SheetMatch, *, plant: PlantData) -> SheetRecords:
        known = self._records.get(id(sheet))
        if known is not None and known[0] is sheet and known[1] is match and known[2] == plant:
            return known[3]
        found = self._read(sheet, match, plant=plant)
        if any(sheet is kept for _, kept in self._kept[sheet.name]):
            self._records[id(sheet)] = (sheet, match, plant, found)
        return found


@dataclass(frozen=True, slots=True, kw_only=True)
class Said:
    """What a rule says of one subject: the outcome, and the fields that left it unchecked."""

    outcome: Outcome
    because: tuple[str, ...] = ()

    def __str__(self) -> str:
        return f"{self.outcome.value} ({', '.join(self.because)})" if self.because else self.outcome.value


def said_of(result: Audit, code: str, subject: str) -> Said:
    """Return what a rule said of one subject in an audit; of an instrument where the rule is about groups."""
    rule, plant = load_rules()[code], result.plant
    if rule.on is Subject.CIRCUIT:
        subject = _circuit_now(subject, plant)
    found = {
        each.outcome
        for each in result.findings
        if each.rule == code
        and (each.subject == subject or (rule.on is Subject.GROUP and subject in each.subject.split(", ")))
    }
    for outcome in (Outcome.FINDING, Outcome.REVIEW):
        if outcome in found:
            return Said(outcome=outcome)
    coverage = result.coverage[code]
    for fields, names in coverage.unchecked.items():
        for name in names:
            if name == subject or (rule.on is Subject.GROUP and subject in name.split(", ")):
                return Said(outcome=Outcome.UNCHECKED, because=fields)
    return Said(outcome=_quiet(rule, subject, plant))


def _circuit_now(name: str, plant: Plant) -> str:
    """Return what a circuit is called: by its loop and tag, and by its loop alone once the others are gone."""
    number, _, tag = name.rpartition(" ")
    if any(each.name == name for each in plant.circuits):
        return name
    alone = [each for each in plant.circuits if each.name == number and each.device.name == tag]
    return number if alone else name


def _quiet(rule: Rule, subject: str, plant: Plant) -> Outcome:
    """Tell clear from not applicable, where a rule said nothing."""
    if rule.on is Subject.WHOLE:
        return Outcome.CLEAR
    if rule.on is Subject.GROUP:
        (member,) = (each for each in plant.instruments if each.name == subject)
        if not member.live or (rule.applies is not None and not rule.applies(member, plant)):
            return Outcome.NOT_APPLICABLE
        if rule.alone_is_clear or any(member in group for group in rule.groups(plant)):  # type: ignore[misc]
            return Outcome.CLEAR
        return Outcome.NOT_APPLICABLE
    subjects: Any = {
        Subject.INSTRUMENT: plant.instruments,
        Subject.CIRCUIT: plant.circuits,
        Subject.LOOP: plant.loops,
        Subject.AREA: plant.areas_seen,
        Subject.CERTIFICATE: certificates_of(plant),
    }[rule.on]
    one = next((each for each in subjects if each.name == subject), None)
    if one is None and rule.on is Subject.CERTIFICATE:
        return Outcome.NOT_APPLICABLE  # nobody names it any more
    assert one is not None, subject
    if not one.live or isinstance(check_one(rule, one, plant), NotApplicable):
        return Outcome.NOT_APPLICABLE
    return Outcome.CLEAR


@cache
def twin() -> Twin:
    """Return the one twin of this process: matching its headings is what takes time."""
    return Twin()


_LARGEST_BATCH = 30
_TAG = re.compile(r"[A-Z]+[ –-][1-9]\d{2,3}[A-Z]?")
_NUMBER = re.compile(r"[1-9]\d{3}")
_CODES = ("Area", "Type Code", "Device Code")


def batches(made: Iterable[Change]) -> list[tuple[Change, ...]]:
    """Part changes into batches that can be audited at once: no two of one row, tag, loop number, type or area.

    What changes the plant's own data bears on every rule, and stands alone.
    """
    parted: list[tuple[list[Change], set[object]]] = []
    alone: list[tuple[Change, ...]] = []
    for change in made:
        touched = _touched(change)
        if "Plant" in {sheet for sheet, _ in change.places}:
            alone.append((change,))
            continue
        for members, taken in parted:
            if len(members) < _LARGEST_BATCH and not touched & taken:
                break
        else:
            members, taken = [], set()
            parted.append((members, taken))
        members.append(change)
        taken |= touched
    return [*(tuple(members) for members, _ in parted), *alone]


def _touched(change: Change) -> set[object]:
    edits = [(change.row, change.cells), *((each.row, each.cells) for each in change.more)]
    names = [change.about, *change.also, *(row for row, _ in edits)]
    codes = [text for _, cells in edits for heading in _CODES for text in cells.get(heading, ())]
    parts = [part for name in names for pattern in (_TAG, _NUMBER) for part in pattern.findall(name)]
    return {*change.places, *names, *codes, *parts} - {""}
