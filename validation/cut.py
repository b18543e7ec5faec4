"""Small plants cut out of a large one: all that one change can touch, and nothing else."""

from __future__ import annotations

import re
from collections import OrderedDict, defaultdict
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from types import MappingProxyType
from typing import Any, Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.record import Instrument, Record
from instruments.tag import TagReading, loop_of, read_tag
from loops.given import is_box
from loops.plant import Plant, assemble, name_key
from loops.record import Cable
from loops.redundancy import redundant_groups
from loops.wiring import loop_key
from validation.audit import bare_name
from validation.finding import Finding, Fix

MOST_KEPT: Final = 256
"""Parts that are kept, because the next finding is often about the same instruments."""

_CABLES_ON: Final = 3
_NAMES_APART: Final = re.compile(r"[,;\n]")
# Fields of a row, or of a row of the loop list, that name an entry of a catalogue.
_CATALOGUES: Final = {
    "Device types": ("device_type", "card", "barrier", "power_supply"),
    "Areas": ("area",),
    "Cable types": ("cable_type",),
}


def row_key(row: Record) -> tuple[Any, ...]:
    """Return what tells a row of a list from every other, whatever becomes of its values."""
    origin = row.origin
    if origin is None:
        return (id(row),)
    return (origin.place.file, origin.place.sheet, origin.row, getattr(row, "tag_number", 0))


@dataclass(slots=True, eq=False)
class Part:
    """A part of a plant, and the identities of what is found in it as it stands, once somebody has looked."""

    plant: Plant
    found: frozenset[Any] | None = None


class Cuts:
    """The parts of a plant, found by what they share."""

    def __init__(self, plant: Plant) -> None:
        self._plant = plant
        self._by_name: dict[str, list[Installed]] = defaultdict(list)
        self._by_loop: dict[str, list[Installed]] = defaultdict(list)
        self._by_number: dict[tuple[str, str], list[Installed]] = defaultdict(list)
        self._by_address: dict[str, list[Installed]] = defaultdict(list)
        self._partners: dict[int, list[Installed]] = defaultdict(list)
        for each in plant.instruments:
            self._by_name[bare_name(each.name)].append(each)
            if each.loop:
                self._by_loop[loop_key(each.loop)].append(each)
            if each.tag is not None:
                self._by_number[_number_key(each.tag)].append(each)
            for row in each.signals:
                if row.io_address:
                    self._by_address[name_key(row.io_address)].append(each)
        for group in redundant_groups(plant):
            for each in group.members:
                self._partners[id(each)].extend(group.members)
        self._devices = {circuit.name: circuit.device for circuit in plant.circuits}
        self._index = "Instruments" if "Instruments" in plant.lists.records else "IO list"
        self._rows: dict[tuple[Any, ...], list[Instrument]] = defaultdict(list)
        for row in plant.lists.records.get(self._index, ()):
            self._rows[row_key(row)].append(row)
        self._by_entry: dict[tuple[str, str], list[Installed]] | None = None
        self._lists: dict[str, dict[str, list[Any]]] = {}
        self._names: frozenset[str] | None = None
        self._kept: OrderedDict[Any, Part] = OrderedDict()

    def around(self, finding: Finding, fix: Fix) -> Part:
        """Return the part of the plant that a finding and a fix of it can touch."""
        members = {id(each): each for each in self._touched(finding.subject, fix)}
        named = self._entries_named_in((fix,))
        key = (frozenset(members), named)
        part = self._kept.get(key)
        if part is None:
            if len(self._kept) >= MOST_KEPT:
                self._kept.popitem(last=False)
            part = self._kept[key] = Part(self._part(list(members.values()), named, (fix.subject,)))
        return part

    def touched(self, changes: Iterable[Fix]) -> list[Installed]:
        """Return the instruments that changes can touch, each change of the row that its subject names."""
        return list({id(each): each for fix in changes for each in self._touched(fix.subject, fix)}.values())

    def around_all(self, members: list[Installed], changes: Sequence[Fix]) -> Plant:
        """Return the part of the plant that changes made together can touch; `members` as `touched` gives them."""
        return self._part(members, self._entries_named_in(changes), [fix.subject for fix in changes])

    def _entries_named_in(self, changes: Iterable[Fix]) -> frozenset[str]:
        texts = frozenset(name_key(text) for fix in changes for text in (*fix.change.values(), fix.subject))
        return texts & self._names_of_entries()

    # ------------------------------------------------------------------------------------------- who is touched

    def _touched(self, subject: str, fix: Fix) -> Iterator[Installed]:
        for each in self._meant(subject, fix):
            yield from self._beside(each)
            if "tag" in fix.change and each.tag is not None:
                yield from self._by_number[_number_key(each.tag)]
        for name in (subject, fix.subject):
            yield from self._by_loop.get(loop_key(name), ())
        if "tag" in fix.change:
            yield from self._beside_tag(fix.change["tag"])
        if "loop" in fix.change:
            yield from self._by_loop.get(loop_key(fix.change["loop"]), ())
        if "I/O address" in fix.change:
            yield from self._by_address.get(name_key(fix.change["I/O address"]), ())

    def _meant(self, subject: str, fix: Fix) -> Iterator[Installed]:
        """Give the instruments that a subject and a fix name: by tag, by circuit, by an entry that they use."""
        for name in dict.fromkeys([subject, *subject.split(", "), fix.subject]):
            yield from self._by_name.get(bare_name(name), ())
            if name in self._devices:
                yield self._devices[name]
        if fix.sheet in _CATALOGUES or fix.sheet == "Cables":
            yield from self._users(fix.sheet, fix.subject or subject)

    def _beside(self, each: Installed) -> Iterator[Installed]:
        """Give an instrument and all that a rule may see together with it."""
        yield each
        yield from self._partners.get(id(each), ())
        if each.loop:
            yield from self._by_loop[loop_key(each.loop)]
        for row in each.signals:
            if row.io_address:
                yield from self._by_address[name_key(row.io_address)]

    def _beside_tag(self, text: str) -> Iterator[Installed]:
        """Give what a row would stand beside if it had another tag: what bears its number, and its loop."""
        plant = self._plant
        reading = read_tag(
            text,
            profile=plant.profile,
            codes=plant.codes,
            users_letters=frozenset(plant.data.users_letters),
            numbering=plant.data.numbering,
        )
        yield from self._by_number.get(_number_key(reading), ())
        yield from plant.by_tag(text)
        if reading.parsed:
            yield from self._by_loop.get(loop_key(loop_of(reading, numbering=plant.data.numbering)), ())

    def _users(self, sheet: str, name: str) -> list[Installed]:
        """Return the instruments whose rows or circuits name an entry of a catalogue."""
        if self._by_entry is None:
            self._by_entry = defaultdict(list)
            for each in self._plant.instruments:
                for key in dict.fromkeys(self._entries(each)):
                    self._by_entry[key].append(each)
        return self._by_entry.get((sheet, name_key(name)), [])

    def _entries(self, each: Installed) -> Iterator[tuple[str, str]]:
        circuits = self._plant.circuits_of(each)
        for row in (each.record, *each.signals, *(circuit.row for circuit in circuits if circuit.row is not None)):
            for sheet, fields in _CATALOGUES.items():
                for field in fields:
                    text = getattr(row, field, None)
                    if text:
                        yield sheet, name_key(text)
            for part in _NAMES_APART.split(getattr(row, "cable", None) or ""):
                if part.strip():
                    yield "Cables", name_key(part)
        for circuit in circuits:
            if circuit.cable_type_named:
                yield "Cable types", name_key(circuit.cable_type_named)
            for segment in circuit.segments:
                yield "Cables", name_key(segment.name)
                if segment.type is not None:
                    yield "Cable types", name_key(segment.type.code)

    # ------------------------------------------------------------------------------------------------- the part

    def _part(self, members: list[Installed], named: frozenset[str], subjects: Iterable[str]) -> Plant:
        records: dict[str, tuple[Any, ...]] = dict(self._plant.lists.records)
        called = {key for each in members for key in _both_keys(each.record.tag, each.loop)}
        called.update(_both_keys(*subjects))
        loops = records["Loops"] = self._picked("Loops", called, lambda row: _both_keys(row.number, row.circuit))
        wired = records["Terminations"] = self._picked("Terminations", called, lambda row: _both_keys(row.circuit))
        for name in ("IO list", "Alarm and trip list"):
            if name != self._index and name in records:
                records[name] = self._picked(name, called, lambda row: _both_keys(row.tag))
        wanted: dict[str, set[str]] = defaultdict(set)
        for each in members:
            for sheet, key in self._entries(each):
                wanted[sheet].add(key)
        for row in loops:
            for sheet, fields in _CATALOGUES.items():
                wanted[sheet].update(name_key(getattr(row, field, None)) for field in fields)
        cables = records["Cables"] = self._cables(wanted["Cables"] | named | {name_key(row.cable) for row in wired})
        wanted["Cable types"].update(name_key(cable.type) for cable in cables)
        for sheet in _CATALOGUES:
            records[sheet] = self._picked(sheet, wanted[sheet] | named, lambda row: (name_key(row.code),))
        rows = {
            id(own): own
            for each in (*members, *self._named_by_tag(members, wanted["Device types"], cables))
            for row in (each.record, *each.signals)
            for own in self._rows.get(row_key(row), ())
        }
        records[self._index] = tuple(rows.values())
        lists = replace(
            self._plant.lists,
            records=MappingProxyType({name: found for name, found in records.items() if found}),
            problems=(),
        )
        part = assemble(lists, profile=self._plant.profile)
        part.stand_in(self._plant)
        return part

    def _named_by_tag(
        self, members: Iterable[Installed], names: Iterable[str], cables: Iterable[Cable]
    ) -> Iterator[Installed]:
        """Give barriers, cards and supplies that are named by their tag, and the boxes that cables run through."""
        for name in names:
            if name not in self._plant.types:
                yield from self._plant.by_tag(name.upper())
        ends = {item for cable in cables for item in (cable.from_item, cable.to_item) if item}
        ends.update(row.junction_box for each in members for row in each.signals if row.junction_box)
        for item in ends:
            yield from (each for each in self._plant.by_tag(item) if each.kind in (Kind.JUNCTION_BOX, Kind.PANEL))

    def _names_of_entries(self) -> frozenset[str]:
        """Return all names of all catalogues: what a fix may name anew."""
        if self._names is None:
            self._names = frozenset(key for sheet in (*_CATALOGUES, "Cables") for key in self._listed(sheet, _own_keys))
        return self._names

    def _listed(self, sheet: str, keys: Callable[[Any], Iterable[str]]) -> Mapping[str, list[Any]]:
        listed = self._lists.get(sheet)
        if listed is None:
            listed = self._lists[sheet] = defaultdict(list)
            for row in self._plant.lists.records.get(sheet, ()):
                for key in dict.fromkeys(keys(row)):
                    listed[key].append(row)
        return listed

    def _picked(self, sheet: str, wanted: Iterable[str], keys: Callable[[Any], Iterable[str]]) -> tuple[Any, ...]:
        """Return the rows of a sheet that have one of the keys; one of any, lest the sheet should seem absent."""
        listed = self._listed(sheet, keys)
        found = {id(row): row for key in wanted if key for row in listed.get(key, ())}
        return tuple(found.values()) or tuple(self._plant.lists.records.get(sheet, ())[:1])

    def _cables(self, named: Iterable[str]) -> tuple[Cable, ...]:
        """Return the cables that are named, and those that go on from where they end."""
        by_number = self._listed("Cables", _own_keys)
        by_end = self._lists.get("ends")
        if by_end is None:
            by_end = self._lists["ends"] = defaultdict(list)
            for cable in self._plant.lists.records.get("Cables", ()):
                for item in (cable.from_item, cable.to_item):
                    if item:
                        by_end[name_key(item)].append(cable)
        found: dict[int, Cable] = {}
        ahead: list[Cable] = [cable for key in named if key for cable in by_number.get(key, ())]
        for _ in range(_CABLES_ON):
            fresh = [cable for cable in ahead if id(cable) not in found]
            found.update((id(cable), cable) for cable in fresh)
            items = {item for cable in fresh for item in (cable.from_item, cable.to_item) if item}
            boxes = [item for item in items if is_box(item, None, self._plant)]
            ahead = [other for item in boxes for other in by_end.get(name_key(item), ())]
        return tuple(found.values()) or tuple(self._plant.lists.records.get("Cables", ())[:1])


def _own_keys(row: Any) -> tuple[str, ...]:
    return (name_key(row.number if isinstance(row, Cable) else row.code),)


def _both_keys(*texts: str | None) -> tuple[str, ...]:
    return tuple(key for text in texts if text for key in (name_key(text), loop_key(text)))


_DIGITS: Final = re.compile(r"[0-9OIl]*[0-9][0-9OIl]*")
_AS_DIGITS: Final = str.maketrans("OIl", "011")


def _number_key(reading: TagReading) -> tuple[str, str]:
    """Return prefix and number without what tells near twins apart: leading zeros, letters that look like digits."""
    found = _DIGITS.findall(reading.number or reading.normalised)
    return reading.prefix or "", found[-1].translate(_AS_DIGITS).lstrip("0") if found else reading.normalised
