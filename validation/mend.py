"""Fixes applied: the lists as they would be, and what would then be found."""

from __future__ import annotations

import dataclasses
from collections import defaultdict
from collections.abc import Callable, Hashable, Iterable, Mapping
from dataclasses import replace
from functools import cache, lru_cache
from types import MappingProxyType
from typing import Any, cast

from instruments.column import Column, Reads, SheetKind
from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.installed import Installed
from instruments.record import DeviceType, Instrument, Record
from instruments.workbook.lists import Lists
from instruments.written import CannotStand, value_of
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import Plant, assemble, name_key
from validation.audit import Audit, audit
from validation.cut import Cuts, row_key
from validation.finding import Finding, Fix, Outcome
from validation.rule import Registry

SHEET_KINDS: Mapping[str, SheetKind] = {kind.name: kind for kind in (*INSTRUMENT_SHEETS, *LOOP_SHEETS)}
_NAMES = {"Device types": "code", "Areas": "code", "Cables": "number", "Cable types": "code"}


def mended(plant: Plant, finding: Finding, fix: Fix) -> Lists:
    """Return the lists with a fix applied.

    Parameters
    ----------
    plant
        The plant as it was audited.
    finding
        The finding that the fix mends.
    fix
        One whose `change` names fields and values.

    Raises
    ------
    CannotStand
        A field cannot hold its new value, or no row is the fix's subject.
    """
    kind = SHEET_KINDS[fix.sheet]
    records = dict(plant.lists.records)
    name = fix.sheet
    if name == "Instruments" and name not in records:
        name = "IO list"
    rows = records.get(name, ())
    subject = fix.subject or finding.subject
    meant = rows_meant(plant, subject, rows, fix.sheet)
    if not meant:
        raise CannotStand(f"no row of {fix.sheet} is {subject}")
    records[name] = tuple(changed_row(row, kind, fix.change) if id(row) in meant else row for row in rows)
    changed = [row for row in rows if id(row) in meant]
    filled = {cell for row in changed for field in fields_of(kind, fix.change) for cell in row.cells(field)}
    return replace(
        plant.lists,
        records=MappingProxyType(records),
        problems=tuple(problem for problem in plant.lists.problems if problem.cell not in filled),
    )


def fields_of(kind: SheetKind, titles: Iterable[str]) -> tuple[str, ...]:
    """Return the fields of a sheet's columns, by their titles."""
    return _fields_of(kind.name, tuple(titles))


@lru_cache(maxsize=4096)
def _fields_of(name: str, titles: tuple[str, ...]) -> tuple[str, ...]:
    wanted = {title.casefold() for title in titles}
    return tuple(column.field for column in SHEET_KINDS[name].columns if column.title.casefold() in wanted)


def rows_meant(plant: Plant, subject: str, rows: Iterable[Any], sheet: str) -> frozenset[int]:
    """Return the rows of a sheet that a subject's name means, by their ids."""
    if sheet == "Instruments":
        origins = {
            row_key(row)
            for each in plant.once("instruments by name", _by_name).get(subject, ())
            for row in (each.record, *each.signals)
            if row.origin is not None
        }
        return frozenset(id(row) for row in rows if row.origin is not None and row_key(row) in origins)
    key = name_key(subject)
    fields = ("circuit", "number") if sheet == "Loops" else (_NAMES.get(sheet, "code"),)
    for field in fields:
        found = frozenset(id(row) for row in rows if name_key(getattr(row, field)) == key)
        if found:
            return found
    return frozenset()


def _by_name(plant: Plant) -> dict[str, list[Installed]]:
    named: dict[str, list[Installed]] = defaultdict(list)
    for each in plant.instruments:
        named[each.name].append(each)
    return named


def changed_row(row: Record, kind: SheetKind, change: Mapping[str, str]) -> Record:
    """Return a row with new texts in some of its columns, by their titles.

    Raises
    ------
    CannotStand
        The sheet has no such column, or the column cannot hold its text.
    """
    values: dict[str, Any] = {}
    own: dict[str, Any] = {}
    for title, text in change.items():
        column, value = _read(kind.name, title.casefold(), text)
        if column is None:
            raise CannotStand(f"{kind.name} has no column {title}")
        if column.reads is Reads.KIND:
            values["kind_written"] = text
        if column.reads is Reads.TAG:
            values["tag_written"] = text
        if column.owner == "own":
            own[column.field] = value
        else:
            values[column.field] = value
    if own and isinstance(row, Instrument):
        values["own"] = replace(row.own or DeviceType(origin=row.origin), **own)
    known = _names_of(cast(Hashable, type(row)))
    values = {field: value for field, value in values.items() if field in known}
    filled = values.keys() | own.keys()
    return replace(
        row,
        **values,
        unread=row.unread - filled,
        unitless=MappingProxyType({field: text for field, text in row.unitless.items() if field not in filled}),
    )


@cache
def _names_of(kind: Hashable) -> frozenset[str]:
    return frozenset(field.name for field in dataclasses.fields(kind))  # type: ignore[arg-type]


@lru_cache(maxsize=4096)
def _read(kind: str, title: str, text: str) -> tuple[Column | None, Any]:
    """Return the column of a title and its value for a text: often the same in many rows."""
    column = next((each for each in SHEET_KINDS[kind].columns if each.title.casefold() == title), None)
    return column, value_of(column, text) if column is not None and text else None


def found_after(plant: Plant, finding: Finding, fix: Fix, *, rules: Registry | None = None) -> list[Finding]:
    """Return what the whole audit finds once a fix is applied."""
    return audit(assemble(mended(plant, finding, fix), profile=plant.profile), rules=rules).findings


def with_consequences(
    result: Audit, *, rules: Registry | None = None, on_fix: Callable[[int, int], None] | None = None
) -> None:
    """Let each fix that is a value say which other findings it would make.

    Only what the change can touch is audited again: the subject's loop, its redundant partners, what
    shares its number or address before or after, and whatever they name.

    Parameters
    ----------
    result
        The audit; its findings are replaced by ones whose fixes say what they make.
    rules
        The registry; default: every rule.
    on_fix
        Called with the number of the finding and their count.
    """
    plant = result.plant
    cuts = Cuts(plant)
    found = {each.identity for each in result.findings}
    done: list[Finding] = []
    for number, finding in enumerate(result.findings, start=1):
        if on_fix is not None:
            on_fix(number, len(result.findings))
        fixes: list[Fix] = []
        for fix in finding.fixes:
            if not fix.change:
                fixes.append(fix)
                continue
            part = cuts.around(finding, fix)
            try:
                changed = assemble(mended(part.plant, finding, fix), profile=plant.profile)
            except CannotStand:
                fixes.append(fix)
                continue
            changed.stand_in(plant)
            new = [
                each
                for each in audit(changed, rules=rules).findings
                if each.outcome is Outcome.FINDING and each.identity not in found
            ]
            if new and part.found is None:
                # What is found only because the part is no whole plant is not the fix's doing.
                part.found = frozenset(each.identity for each in audit(part.plant, rules=rules).findings)
            made = {each.rule for each in new if part.found is not None and each.identity not in part.found}
            fixes.append(replace(fix, makes=tuple(sorted(made))))
        done.append(replace(finding, fixes=tuple(fixes)) if fixes else finding)
    result.findings = done
