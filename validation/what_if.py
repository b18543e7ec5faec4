"""What if: the plant with some values changed, and the findings that appear and those that go."""

from __future__ import annotations

import dataclasses
import tomllib
from collections.abc import Callable, Hashable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import cache
from operator import attrgetter
from types import MappingProxyType
from typing import Any, Final, cast

from instruments.area import Area
from instruments.column import Column, Reads, SheetKind
from instruments.installed import Installed
from instruments.quantity import Quantity, format_number
from instruments.record import DeviceType, Instrument, Record, nothing
from instruments.unit import unit_label
from instruments.workbook.lists import Lists
from instruments.written import CannotStand, value_of
from loops.circuit import Circuit
from loops.plant import Plant, assemble, name_key, same_value, with_values
from loops.record import CableType, LoopRow
from validation.audit import Audit, Broken, audit, finding_order
from validation.cut import Cuts, row_key
from validation.finding import Finding, Fix
from validation.mend import SHEET_KINDS, changed_row, fields_of, rows_meant
from validation.reads import FIELDS, can_read, can_read_in
from validation.rule import Registry, Rule, Subject, load_rules

INDEX: Final = "Instruments"
EVERY: Final = "*"
_NAME_TITLES: Final = {INDEX: "tag", "Loops": "circuit or tag", "Cables": "number", "Terminations": "circuit or tag"}


@dataclass(frozen=True, slots=True, kw_only=True)
class Change:
    """One change of a what-if, as its file says it.

    Attributes
    ----------
    sheet
        The kind of sheet: Instruments, Device types, Areas, Loops, Cables, Cable types ...
    rows
        Names of rows: tags, codes, numbers; empty for every row.
    where
        Titles of columns with what must stand in them: of the rows, those are meant.
    set, add
        Titles with their new texts; titles with a number to add to what stands there, in its own unit.
    """

    sheet: str = INDEX
    rows: tuple[str, ...] = ()
    where: Mapping[str, str] = field(default_factory=nothing)
    set: Mapping[str, str] = field(default_factory=nothing)
    add: Mapping[str, float] = field(default_factory=nothing)


@dataclass(frozen=True, slots=True, kw_only=True)
class WhatIf:
    """What changes come to.

    Attributes
    ----------
    changed
        What was changed, a line each.
    appear, go
        The findings and reviews that there would be, and those that there would no longer be.
    stay
        Findings of before and after that are one, with other figures.
    rules
        Codes of the rules that were asked again.
    looked_at
        How many instruments were.
    broken
        Rules that raised.
    """

    changed: tuple[str, ...]
    appear: tuple[Finding, ...]
    go: tuple[Finding, ...]
    stay: tuple[tuple[Finding, Finding], ...] = ()
    rules: tuple[str, ...] = ()
    looked_at: int = 0
    broken: tuple[Broken, ...] = ()


# ------------------------------------------------------------------------------------------------------- the file


def read_changes(text: str) -> tuple[Change, ...]:
    """Read the changes of a what-if from TOML.

    Each ``[[change]]`` has a `sheet` (Instruments where it says none), `rows` (a name, a list of names, or
    ``"*"`` for every row), `where`, and `set` or `add` or both, by the titles of columns.

    Raises
    ------
    CannotStand
        The text is no TOML, or says something that no what-if has.

    >>> read_changes('''
    ... [[change]]
    ... sheet = "Areas"
    ... rows = "30T"
    ... set = { zone = 0 }
    ... ''')[0].set["zone"]
    '0'
    """
    try:
        told = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise CannotStand(f"it is no TOML: {error}") from error
    changes = told.pop("change", None)
    if told:
        raise CannotStand(f"it says {', '.join(sorted(told))}; a what-if has only [[change]]")
    if not isinstance(changes, list) or not changes or not all(isinstance(each, dict) for each in changes):
        raise CannotStand("it has no [[change]]")
    return tuple(_change(each, f"change {number}") for number, each in enumerate(changes, start=1))


_KEYS: Final = frozenset({"sheet", "rows", "where", "set", "add"})


def _change(told: dict[str, Any], place: str) -> Change:
    unknown = sorted(told.keys() - _KEYS)
    if unknown:
        raise CannotStand(f"{place} says {', '.join(unknown)}; it can say {', '.join(sorted(_KEYS))}")
    sheet = told.get("sheet", INDEX)
    if not isinstance(sheet, str) or (kind := _kind_called(sheet)) is None:
        raise CannotStand(f"{place}: there is no sheet {sheet}; there are {', '.join(SHEET_KINDS)}")
    rows = told.get("rows")
    if isinstance(rows, str):
        rows = [rows]
    if not isinstance(rows, list) or not rows or not all(isinstance(each, str) and each for each in rows):
        raise CannotStand(f'{place} does not say which rows: a name, a list of names, or "*" for every row')
    if EVERY in rows:
        rows = []
    change = Change(
        sheet=kind.name,
        rows=tuple(dict.fromkeys(rows)),
        where=_texts(told.get("where", {}), f"{place}, where"),
        set=_texts(told.get("set", {}), f"{place}, set"),
        add=_numbers(told.get("add", {}), f"{place}, add"),
    )
    if not change.set and not change.add:
        raise CannotStand(f"{place} changes nothing: it needs set or add")
    return change


def _kind_called(name: str) -> SheetKind | None:
    return next((kind for kind in SHEET_KINDS.values() if kind.name.casefold() == name.strip().casefold()), None)


def _texts(told: Any, place: str) -> Mapping[str, str]:
    if not isinstance(told, dict):
        raise CannotStand(f'{place} needs columns and their values: {{ "URV" = "10 barg" }}')
    return MappingProxyType({title: _text(value, f"{place}, {title}") for title, value in told.items()})


def _text(value: Any, place: str) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, int | float):
        return format_number(float(value))
    if isinstance(value, str):
        return value
    raise CannotStand(f"{place} needs a text or a number")


def _numbers(told: Any, place: str) -> Mapping[str, float]:
    if not isinstance(told, dict):
        raise CannotStand(f'{place} needs columns and numbers: {{ "cable length" = 100 }}')
    for title, value in told.items():
        if isinstance(value, bool) or not isinstance(value, int | float):
            raise CannotStand(f"{place}, {title} needs a number, in the unit of the cell")
    return MappingProxyType({title: float(value) for title, value in told.items()})


# -------------------------------------------------------------------------------------------------- the changed lists


@dataclass(frozen=True, slots=True)
class _Made:
    """Changes made: the lists as they would be, each changed row as a fix names it, and what to say of it."""

    lists: Lists
    fixes: tuple[Fix, ...]
    said: tuple[str, ...]


def changed_lists(plant: Plant, changes: Iterable[Change]) -> Lists:
    """Return the lists as they would be with changes made, one after the other.

    Raises
    ------
    CannotStand
        A change names a row, a column or a value that there is not.
    """
    return _made(plant, changes).lists


def _made(plant: Plant, changes: Iterable[Change]) -> _Made:
    lists, fixes, said = plant.lists, list[Fix](), list[str]()
    for change in changes:
        kind = SHEET_KINDS[change.sheet]
        name = change.sheet
        if name == INDEX and name not in lists.records:
            name = "IO list"
        before = lists.records.get(name, ())
        meant = _rows_of(plant, change, kind, before)
        after: list[Any] = []
        filled: set[Any] = set()
        moved: list[tuple[Any, Mapping[str, str]]] = []
        columns = {column.title: column for column in kind.columns}
        for row in before:
            text = _texts_for(row, change, kind) if id(row) in meant else {}
            new = changed_row(row, kind, text) if text else row
            if text and not _alike(row, new, [columns[title] for title in text]):
                moved.append((row, text))
                filled.update(cell for each in fields_of(kind, text) for cell in row.cells(each))
                after.append(new)
            else:
                after.append(row)
        if change.add and not change.set and not moved:
            raise CannotStand(f"no row of {change.sheet} that is meant has a number in {' or '.join(change.add)}")
        fixes.extend(_fix(row, change.sheet, text) for row, text in moved)
        said.append(_said(change, kind, [row for row, _ in moved], len(meant)))
        lists = replace(
            lists,
            records=MappingProxyType({**lists.records, name: tuple(after)}),
            problems=tuple(problem for problem in lists.problems if problem.cell not in filled),
        )
    return _Made(lists, tuple(fixes), tuple(said))


def _alike(row: Record, new: Record, columns: Iterable[Column]) -> bool:
    """Whether a changed row says in some columns what it said before, its written words apart."""
    return row.unread == new.unread and all(_value(row, each) == _value(new, each) for each in columns)


def _rows_of(plant: Plant, change: Change, kind: SheetKind, rows: Sequence[Any]) -> frozenset[int]:
    """Return the ids of the rows that a change means."""
    if not rows:
        raise CannotStand(f"there is no sheet of {change.sheet}")
    for title in (*change.where, *change.set, *change.add):
        _column(kind, title)
    named = [row for row in rows if not change.rows]
    for name in change.rows:
        # A row that an earlier change of the same what-if has changed is still the same row.
        meant = rows_meant(plant, name, rows, change.sheet)
        keys = {row_key(row) for row in rows if id(row) in meant}
        found = [row for row in rows if id(row) in meant or row_key(row) in keys]
        if not found and change.sheet == INDEX:
            found = _by_tag(plant, name, rows)
        if not found:
            raise CannotStand(f"no row of {change.sheet} is {name}")
        named.extend(found)
    wanted = [(_column(kind, title), text) for title, text in change.where.items()]
    kept = frozenset(id(row) for row in named if all(_stands(row, column, text) for column, text in wanted))
    if not kept:
        told = ", ".join(f"{title} {text}" for title, text in change.where.items())
        raise CannotStand(f"no row of {change.sheet} that is meant has {told}" if told else f"{change.sheet} is empty")
    return kept


def _by_tag(plant: Plant, name: str, rows: Sequence[Any]) -> list[Any]:
    """Return the rows of a tag, however it is written."""
    keys = {row_key(row) for each in plant.by_tag(name) for row in (each.record, *each.signals)}
    return [row for row in rows if row_key(row) in keys]


def _column(kind: SheetKind, title: str) -> Column:
    column = next((each for each in kind.columns if each.title.casefold() == title.strip().casefold()), None)
    if column is None:
        raise CannotStand(f"{kind.name} has no column {title}")
    return column


def _value(row: Any, column: Column) -> Any:
    if column.owner == "own" and isinstance(row, Instrument):
        return getattr(row.own, column.field) if row.own is not None else None
    return getattr(row, column.field, None)


def _stands(row: Any, column: Column, text: str) -> bool:
    value = _value(row, column)
    if not text:
        return value is None
    if value is None:
        return False
    return same_value(value, value_of(column, text)) or (isinstance(value, str) and name_key(value) == name_key(text))


def _texts_for(row: Any, change: Change, kind: SheetKind) -> dict[str, str]:
    """Return the new texts of a row's cells: those that are set, and the sums."""
    texts = {_column(kind, title).title: text for title, text in change.set.items()}
    for title, number in change.add.items():
        column = _column(kind, title)
        value = _value(row, column)
        if isinstance(value, Quantity) and value.unit is not None:
            texts[column.title] = f"{format_number(value.number + number)} {unit_label(value.unit)}"
        elif isinstance(value, int | float) and not isinstance(value, bool):
            texts[column.title] = repr(value + number) if column.reads is Reads.NUMBER else f"{value + number:g}"
        elif column.reads not in (Reads.NUMBER, Reads.COUNT, Reads.QUANTITY):
            raise CannotStand(f"{column.title} holds no numbers to add to")
    return texts


def _fix(row: Any, sheet: str, text: Mapping[str, str]) -> Fix:
    return Fix(text="", change=text, subject=_name(row, sheet), sheet=sheet)


def _name(row: Any, sheet: str) -> str:
    if sheet == "Loops":
        return row.circuit or row.number or ""
    for each in ("tag", "code", "number", "circuit"):
        text = getattr(row, each, None)
        if text:
            return str(text)
    return ""


def _said(change: Change, kind: SheetKind, moved: Sequence[Any], meant: int) -> str:
    """Return a line that says what a change changed."""
    if not moved:
        return f"{change.sheet}: nothing, for it is so already"
    pieces = [f"{_column(kind, title).title} becomes {text or 'blank'}" for title, text in change.set.items()]
    pieces += [f"{_column(kind, title).title} {number:+g}" for title, number in change.add.items()]
    if len(moved) == 1:
        was = [
            f"{column.title} {_written(_value(moved[0], column))}"
            for title in (*change.set, *change.add)
            for column in (_column(kind, title),)
        ]
        return f"{change.sheet} {_name(moved[0], change.sheet)}: {', '.join(pieces)} (was {', '.join(was)})"
    others = f", {meant - len(moved)} more have nothing to change" if meant > len(moved) else ""
    return f"{change.sheet}, {len(moved)} rows: {', '.join(pieces)}{others}"


def _written(value: Any) -> str:
    if value is None:
        return "blank"
    if isinstance(value, bool):
        return "yes" if value else "no"
    return format_number(float(value)) if isinstance(value, int | float) else str(value)


# ---------------------------------------------------------------------------------------------- what would be found

_SHARE: Final = 4
"""Where more than this part of the plant is touched, cutting it out saves nothing: a quarter."""


def what_if(
    result: Audit, changes: Sequence[Change], *, rules: Registry | None = None, raise_errors: bool = False
) -> WhatIf:
    """Return what would be found if some values were others, against what is found.

    Only the rules whose inputs change are asked again; and where the changes touch a small part of the plant,
    only over what they can touch.

    Parameters
    ----------
    result
        The audit of the plant as it is, by the same rules.
    changes
        The changes, made one after the other.
    rules
        The registry; default: every rule.
    raise_errors
        Raise what a rule raises, for tests.

    Raises
    ------
    CannotStand
        A change names a row, a column or a value that there is not.
    """
    plant = result.plant
    registry = rules if rules is not None else load_rules()
    made = _made(plant, changes)
    if not made.fixes:
        return WhatIf(changed=made.said, appear=(), go=())
    tags = any(title.casefold() == "tag" for fix in made.fixes for title in fix.change)
    if not tags and len(made.fixes) * _SHARE < len(plant.instruments):
        found = _of_a_part(result, made, registry, raise_errors)
        if found is not None:
            return found
    after = None if tags else with_values(plant, made.lists)
    if after is None:
        after = assemble(made.lists, profile=None if tags else plant.profile)
    names = None if tags else changed_names(plant, after)
    asked = _asked(registry, names)
    again = audit(after, rules=registry, codes=[rule.code for rule in asked], raise_errors=raise_errors)
    codes = frozenset(rule.code for rule in asked)
    before = [finding for finding in result.findings if finding.rule in codes]
    return _difference(before, again.findings, made=made, asked=asked, looked_at=len(after.instruments), again=again)


def _of_a_part(result: Audit, made: _Made, registry: Registry, raise_errors: bool) -> WhatIf | None:
    """Return what is found in the part that the changes can touch; None where the whole must be looked at."""
    plant = result.plant
    cuts = Cuts(plant)
    members = cuts.touched(made.fixes)
    if len(members) * _SHARE > len(plant.instruments):
        return None
    part = cuts.around_all(members, made.fixes)
    lists = _of_part(part, plant, made.lists)
    changed = assemble(lists, profile=plant.profile)
    changed.stand_in(plant)
    names = changed_names(part, changed)
    if names is None:
        return None
    asked = _asked(registry, names)
    # What a rule says of the whole list cannot be told of a part of it, nor which instruments make a group anew.
    whole = frozenset(
        rule.code
        for rule in asked
        if rule.on is Subject.WHOLE
        or any(each is not None and can_read_in(each, names) for each in (rule.whole, rule.groups))
    )
    local = [rule.code for rule in asked if rule.code not in whole]
    before = audit(part, rules=registry, codes=local, raise_errors=raise_errors)
    after = audit(changed, rules=registry, codes=local, raise_errors=raise_errors)
    was = list(before.findings)
    if whole:
        everything = with_values(plant, made.lists) or assemble(made.lists, profile=plant.profile)
        more = audit(everything, rules=registry, codes=whole, raise_errors=raise_errors)
        after.findings.extend(more.findings)
        after.broken.extend(more.broken)
        was.extend(finding for finding in result.findings if finding.rule in whole)
    return _difference(was, after.findings, made=made, asked=asked, looked_at=len(part.instruments), again=after)


def _of_part(part: Plant, plant: Plant, changed: Lists) -> Lists:
    """Return the lists of a part with the rows that the changes have changed."""
    records: dict[str, tuple[Any, ...]] = {}
    for name, rows in part.lists.records.items():
        new = {
            id(old): row
            for old, row in zip(plant.lists.records.get(name, ()), changed.records.get(name, ()), strict=True)
            if old is not row
        }
        records[name] = tuple(new.get(id(row), row) for row in rows)
    return replace(part.lists, records=MappingProxyType(records))


def _asked(registry: Registry, names: frozenset[str] | None) -> list[Rule]:
    return [rule for rule in registry if names is None or can_read(rule, names)]


def _difference(
    before: Iterable[Finding],
    after: Iterable[Finding],
    *,
    made: _Made,
    asked: Sequence[Rule],
    looked_at: int,
    again: Audit,
) -> WhatIf:
    was = {(each.identity, each.outcome): each for each in before}
    found = {(each.identity, each.outcome): each for each in after}
    return WhatIf(
        changed=made.said,
        appear=tuple(sorted((found[key] for key in found.keys() - was.keys()), key=finding_order)),
        go=tuple(sorted((was[key] for key in was.keys() - found.keys()), key=finding_order)),
        stay=tuple(
            sorted(
                ((was[key], found[key]) for key in was.keys() & found.keys() if was[key].message != found[key].message),
                key=lambda pair: finding_order(pair[1]),
            )
        ),
        rules=tuple(rule.code for rule in asked),
        looked_at=looked_at,
        broken=tuple(again.broken),
    )


# ------------------------------------------------------------------------------------------------- what has changed


def changed_names(before: Plant, after: Plant) -> frozenset[str] | None:
    """Return the names of the fields in which two plants differ, derived ones among them.

    None where they differ in more than values: in what there is, in what cannot be read.
    """
    names: set[str] = set()
    try:
        names.update(_differing(before, after))
    except _MoreThanValues:
        return None
    return frozenset(names)


class _MoreThanValues(Exception):
    """Two plants differ in what there is."""


def _differing(before: Plant, after: Plant) -> Iterator[str]:
    for one, other in (
        (before.instruments, after.instruments),
        (before.circuits, after.circuits),
        (before.loops, after.loops),
        (before.areas_seen, after.areas_seen),
    ):
        if [each.name for each in one] != [each.name for each in other]:
            raise _MoreThanValues
    if (before.problems, before.profile, before.data) != (after.problems, after.profile, after.data):
        raise _MoreThanValues
    seen: set[tuple[int, int]] = set()

    def differing(one: Any, other: Any) -> Iterator[str]:
        if one is other or (id(one), id(other)) in seen:
            return
        seen.add((id(one), id(other)))
        yield from _between(one, other, differing)

    for area, new_area in zip(before.areas_seen, after.areas_seen, strict=True):
        yield from differing(area.record, new_area.record)
    for entries, new_entries in (
        (before.types, after.types),
        (before.areas, after.areas),
        (before.cables, after.cables),
        (before.cable_types, after.cable_types),
    ):
        if entries.keys() != new_entries.keys():
            raise _MoreThanValues
        for key, entry in entries.items():
            yield from differing(entry, new_entries[key])
    for rows, new_rows in (
        (before.loop_rows, after.loop_rows),
        (before.terminations, after.terminations),
        (before.io_list, after.io_list),
        (before.alarm_list, after.alarm_list),
    ):
        if len(rows) != len(new_rows):
            raise _MoreThanValues
        for row, new_row in zip(rows, new_rows, strict=True):
            yield from differing(row, new_row)
    for each, new in zip(before.instruments, after.instruments, strict=True):
        yield from _between(each, new, differing)
    for circuit, new_circuit in zip(before.circuits, after.circuits, strict=True):
        if [each.name for each in circuit.members] != [each.name for each in new_circuit.members]:
            raise _MoreThanValues
        yield from _between(circuit, new_circuit, differing)
    for loop, new_loop in zip(before.loops, after.loops, strict=True):
        if [each.name for each in loop.members] != [each.name for each in new_loop.members]:
            raise _MoreThanValues


# What is compared by itself, or leads back to what is.
_ELSEWHERE: Final = frozenset({"device", "members", "circuits", "origin", "elsewhere"})
_NESTED: Final = (Instrument, DeviceType, Area, LoopRow, CableType)


@cache
def _names_of(kind: Hashable) -> tuple[tuple[str, ...], Callable[[Any], tuple[Any, ...]]]:
    """Return the names of a record's fields, and what gives all their values at once."""
    own = dataclasses.fields(kind)  # type: ignore[arg-type]
    names = tuple(each.name for each in own if each.name not in _ELSEWHERE)
    return names, attrgetter(*names)


def _between(one: Any, other: Any, differing: Any) -> Iterator[str]:
    """Give the names in which two records differ, and those of the records in them."""
    if type(one) is not type(other):
        raise _MoreThanValues
    names, values = _names_of(cast(Hashable, type(one)))
    for name, old, new in zip(names, values(one), values(other), strict=True):
        if old is new:
            continue
        if isinstance(old, _NESTED) and type(old) is type(new):
            yield from differing(old, new)
        elif isinstance(old, tuple) and isinstance(new, tuple) and any(isinstance(each, _NESTED) for each in old):
            if len(old) != len(new):
                raise _MoreThanValues
            for part, new_part in zip(old, new, strict=True):
                yield from differing(part, new_part)
        elif isinstance(one, Installed | Circuit) and isinstance(old, _NESTED) != isinstance(new, _NESTED):
            # There is one where there was none: all that it says is new.
            yield name
            yield from _filled(old if old is not None else new)
        elif old != new:
            if name not in FIELDS:
                raise _MoreThanValues
            yield name


def _filled(record: Record) -> Iterator[str]:
    names, values = _names_of(cast(Hashable, type(record)))
    yield from (name for name, value in zip(names, values(record), strict=True) if value is not None and name in FIELDS)
