"""Fixes applied: the lists as they would be, and what would then be found."""

from __future__ import annotations

import dataclasses
from collections import defaultdict
from collections.abc import Callable, Iterable, Mapping
from dataclasses import replace
from types import MappingProxyType
from typing import Any

from instruments.column import Reads, SheetKind
from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.installed import Installed
from instruments.record import DeviceType, Instrument, Record
from instruments.workbook.lists import Lists
from instruments.written import CannotStand, value_of
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import Plant, assemble, name_key
from loops.redundancy import redundant_groups
from validation.audit import Audit, audit
from validation.finding import Finding, Fix, Outcome
from validation.rule import Registry

_KINDS: Mapping[str, SheetKind] = {kind.name: kind for kind in (*INSTRUMENT_SHEETS, *LOOP_SHEETS)}
_NAMES = {"Instruments": "tag", "Loops": "circuit", "Device types": "code", "Areas": "code", "Cables": "number"}


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
    kind = _KINDS[fix.sheet]
    records = dict(plant.lists.records)
    name = "Instruments" if fix.sheet == "Instruments" and "Instruments" in records else fix.sheet
    if name == "Instruments" and name not in records:
        name = "IO list"
    rows = records.get(name, ())
    meant = _meant(plant, fix.subject or finding.subject, rows, fix.sheet)
    if not meant:
        raise CannotStand(f"no row of {fix.sheet} is {fix.subject or finding.subject}")
    changed = tuple(_changed(row, kind, fix.change) if id(row) in meant else row for row in rows)
    records[name] = changed
    fields = {column.title.casefold(): column.field for column in kind.columns}
    written = {
        cell for row in rows if id(row) in meant for title in fix.change for cell in row.cells(fields[title.casefold()])
    }
    problems = tuple(each for each in plant.lists.problems if each.whole_column or each.cell not in written)
    return replace(plant.lists, records=MappingProxyType(records), problems=problems)


def _meant(plant: Plant, subject: str, rows: Iterable[Any], sheet: str) -> frozenset[int]:
    """Return the rows that a subject's name means."""
    if sheet == "Instruments":
        origins = {
            (row.origin.place.file, row.origin.place.sheet, row.origin.row, row.tag_number)
            for each in plant.instruments
            if each.name == subject
            for row in (each.record, *each.signals)
            if row.origin is not None
        }
        return frozenset(
            id(row)
            for row in rows
            if row.origin is not None
            and (row.origin.place.file, row.origin.place.sheet, row.origin.row, row.tag_number) in origins
        )
    key = name_key(subject)
    fields = ("circuit", "number") if sheet == "Loops" else (_NAMES.get(sheet, "code"),)
    for field in fields:
        found = frozenset(id(row) for row in rows if name_key(getattr(row, field)) == key)
        if found:
            return found
    return frozenset()


def _changed(row: Record, kind: SheetKind, change: Mapping[str, str]) -> Record:
    values: dict[str, Any] = {}
    own: dict[str, Any] = {}
    by_title = {column.title.casefold(): column for column in kind.columns}
    for title, text in change.items():
        column = by_title.get(title.casefold())
        if column is None:
            raise CannotStand(f"{kind.name} has no column {title}")
        value = value_of(column, text) if text else None
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
    known = {field.name for field in dataclasses.fields(row)}
    values = {field: value for field, value in values.items() if field in known}
    filled = values.keys() | own.keys()
    return replace(
        row,
        **values,
        unread=row.unread - filled,
        unitless=MappingProxyType({field: text for field, text in row.unitless.items() if field not in filled}),
    )


def found_after(plant: Plant, finding: Finding, fix: Fix, *, rules: Registry | None = None) -> list[Finding]:
    """Return what the whole audit finds once a fix is applied."""
    return audit(assemble(mended(plant, finding, fix), profile=plant.profile), rules=rules).findings


def with_consequences(
    result: Audit, *, rules: Registry | None = None, on_fix: Callable[[int, int], None] | None = None
) -> None:
    """Let each fix that is a value say which other findings it would make.

    Only what the change can touch is audited again: the subject's loop, its redundant partners, the
    rows that share its tag or address before or after, and whatever they name.

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
    neighbours = _Neighbours(plant)
    done: list[Finding] = []
    for number, finding in enumerate(result.findings, start=1):
        if on_fix is not None:
            on_fix(number, len(result.findings))
        if not any(fix.change for fix in finding.fixes):
            done.append(finding)
            continue
        part = neighbours.around(finding)
        before = {each.identity for each in audit(part, rules=rules).findings}
        fixes: list[Fix] = []
        for fix in finding.fixes:
            if not fix.change:
                fixes.append(fix)
                continue
            try:
                whole = neighbours.around(finding, fix)
                then = audit(assemble(mended(whole, finding, fix), profile=plant.profile), rules=rules).findings
                seen = before if whole is part else {each.identity for each in audit(whole, rules=rules).findings}
            except CannotStand:
                fixes.append(fix)
                continue
            made = {each.rule for each in then if each.outcome is Outcome.FINDING and each.identity not in seen}
            fixes.append(replace(fix, makes=tuple(sorted(made))))
        done.append(replace(finding, fixes=tuple(fixes)))
    result.findings = done


class _Neighbours:
    """Small plants cut out of a large one, around what a fix changes."""

    def __init__(self, plant: Plant) -> None:
        self._plant = plant
        self._by_name: dict[str, Installed] = {each.name: each for each in plant.instruments}
        self._by_loop: dict[str, list[Installed]] = defaultdict(list)
        self._by_address: dict[str, list[Installed]] = defaultdict(list)
        self._partners: dict[int, list[Installed]] = defaultdict(list)
        for each in plant.instruments:
            if each.loop:
                self._by_loop[name_key(each.loop)].append(each)
            for row in each.signals:
                if row.io_address:
                    self._by_address[name_key(row.io_address)].append(each)
        for group in redundant_groups(plant):
            for each in group.members:
                self._partners[id(each)].extend(group.members)
        self._circuits = {circuit.name: circuit for circuit in plant.circuits}
        self._index = "Instruments" if "Instruments" in plant.lists.records else "IO list"
        self._rows: dict[tuple[Any, ...], list[Instrument]] = defaultdict(list)
        for row in plant.lists.records.get(self._index, ()):
            self._rows[_row_key(row)].append(row)
        self._cut: dict[frozenset[int], Plant] = {}

    def around(self, finding: Finding, fix: Fix | None = None) -> Plant:
        """Return the part of the plant that a finding, and a fix of it, can touch."""
        members: dict[int, Installed] = {}

        def take(each: Installed) -> None:
            members[id(each)] = each
            for other in self._partners.get(id(each), ()):
                members[id(other)] = other
            if each.loop:
                for other in self._by_loop[name_key(each.loop)]:
                    members[id(other)] = other
            for row in each.signals:
                if row.io_address:
                    for other in self._by_address[name_key(row.io_address)]:
                        members[id(other)] = other

        names = [finding.subject, *finding.subject.split(", "), *([fix.subject] if fix is not None else [])]
        for name in names:
            if name in self._by_name:
                take(self._by_name[name])
            if name in self._circuits:
                take(self._circuits[name].device)
            for each in self._by_loop.get(name_key(name), ()):
                members[id(each)] = each
        if fix is not None:
            for title, text in fix.change.items():
                if title == "tag":
                    for each in self._plant.by_tag(text):
                        take(each)
                elif title == "loop":
                    for each in self._by_loop.get(name_key(text), ()):
                        members[id(each)] = each
        key = frozenset(members)
        part = self._cut.get(key)
        if part is None:
            if len(self._cut) > 256:
                self._cut.clear()
            part = self._cut[key] = self._part(list(members.values()))
        return part

    def _part(self, members: list[Installed]) -> Plant:
        rows: dict[int, Instrument] = {}
        for each in members:
            for row in (each.record, *each.signals):
                for own in self._rows.get(_row_key(row), ()):
                    rows[id(own)] = own
        records = dict(self._plant.lists.records)
        order = {id(row): row for row in rows.values()}
        records[self._index] = tuple(order.values())
        names = {name_key(each.loop) for each in members if each.loop} | {
            name_key(each.record.tag) for each in members if each.record.tag
        }
        records["Loops"] = tuple(
            row for row in records.get("Loops", ()) if name_key(row.number) in names or name_key(row.circuit) in names
        )
        tags = {each.record.tag for each in members}
        for name in ("IO list", "Alarm and trip list"):
            if name != self._index and name in records:
                records[name] = tuple(row for row in records[name] if row.tag in tags)
        lists = replace(self._plant.lists, records=MappingProxyType(records), problems=())
        return assemble(lists, profile=self._plant.profile)


def _row_key(row: Instrument) -> tuple[Any, ...]:
    origin = row.origin
    if origin is None:
        return (id(row),)
    return (origin.place.file, origin.place.sheet, origin.row, row.tag_number)
