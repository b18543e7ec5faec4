"""Which circuits are intrinsically safe, and by what: sources, devices, simple apparatus, group, level, parameters.

Nothing here says that a circuit is safe, certified or compliant: screening aid - requires review by a competent
person.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, replace
from decimal import Decimal
from functools import lru_cache
from types import MappingProxyType
from typing import Any, Final, Literal, NamedTuple

from instruments.area import Area, area_from_classification, read_zone
from instruments.epl import DUST_SERIES, LEVELS
from instruments.gas import iec_group_of, named_gases
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.marking import Marking, read_marking
from instruments.marking_entry import MarkingEntry
from instruments.origin import Cell
from instruments.protection import (
    NEVER_SIMPLE,
    intrinsically_safe,
    is_passive,
    is_simple_apparatus,
    marking_of,
    says_intrinsically_safe,
)
from instruments.record import DeviceType
from loops.cable import read_conductor_size
from loops.circuit import Circuit, Given
from loops.entity import (
    CAPS_NF,
    IEC_DEFAULTS,
    MORE_DEMANDING,
    US_DEFAULTS,
    Apparatus,
    CableDefaults,
    CablePiece,
    Comparison,
    Group,
    Source,
    compare,
    exact,
    number,
    with_defaults,
)
from loops.plant import Plant, name_key

How = Literal["intrinsically safe", "several", "other", "simple", "pending", "unmarked", "unknown"]
Level = Literal["a", "b", "c"]

DEVICE_LIMITS: Final = ("ui_v", "ii_ma", "pi_mw", "ci_nf", "li_uh")
TITLES: Final[Mapping[str, str]] = MappingProxyType({
    "ui_v": "Ui V", "ii_ma": "Ii mA", "pi_mw": "Pi mW", "ci_nf": "Ci nF", "li_uh": "Li uH",
    "uo_v": "Uo V", "io_ma": "Io mA", "po_mw": "Po mW", "co_nf": "Co nF", "lo_mh": "Lo mH",
})  # fmt: skip
"""The titles of the columns of the entity parameters."""

_SYMBOL_LEVEL: Final[Mapping[str, Level]] = MappingProxyType(
    {"ia": "a", "ib": "b", "ic": "c", "iaD": "a", "ibD": "b", "icD": "c"}
)
# Marked beside a type of protection for something else: light, and parts that move.
_BESIDE: Final = frozenset({"op is", "op pr", "op sh", "h"})
_SYSTEM_SIDE: Final = frozenset({Kind.BARRIER, Kind.ISOLATOR, Kind.CARD, Kind.POWER_SUPPLY, Kind.SOFT_FUNCTION})
# Terminals: the wires go through them, and what is marked on the box is for what else it holds.
_BOXES: Final = frozenset({Kind.JUNCTION_BOX, Kind.PANEL})
_DRIVES: Final = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID})
_VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.MANUAL_VALVE})
_TRANSMITTERS: Final = frozenset({Kind.TRANSMITTER, Kind.ANALYSER})


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Item:
    """One device on the field side of a circuit.

    Attributes
    ----------
    how
        ``intrinsically safe``: that protection and no other; ``several``: that one among others; ``other``; ``simple``
        apparatus; ``pending``: perhaps simple apparatus, which nobody has stated; ``unmarked``: said to have no
        protection, or without a marking though it cannot be simple apparatus; ``unknown``.
    level
        a, b or c of its intrinsic safety; None where there is none, or it is not marked.
    missing
        Of ``unknown``: the title of what is missing.
    blank
        Of ``unmarked``: whether the marking is merely blank.
    areas
        The classified areas that its row names; empty where the place is unclassified; None where nothing tells.
    at_transmitter
        An element that is wired to a transmitter of the circuit, not to its source.
    """

    installed: Installed
    how: How
    level: Level | None = None
    missing: str = ""
    blank: bool = False
    areas: tuple[Area, ...] | None = None
    at_transmitter: bool = False

    @property
    def name(self) -> str:
        """The device's name."""
        return self.installed.name

    @property
    def classified(self) -> bool:
        """Whether it stands in a classified area, as far as its row says."""
        return bool(self.areas)

    @property
    def relies(self) -> bool:
        """Whether it relies on intrinsic safety alone, or on being simple apparatus, in a classified area."""
        return self.classified and self.how in ("intrinsically safe", "simple")

    @property
    def protection(self) -> str:
        """What it is marked with, in few words."""
        marking = marking_of(self.installed)
        if marking is not None:
            return marking.text
        if self.how == "simple":
            return "simple apparatus"
        return self.installed.record.protection or "no Ex marking"


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class ExSource:
    """An Ex i source of a circuit: its barrier, its card, or a device that gives power of its own.

    Attributes
    ----------
    entry
        Its figures.
    role
        ``barrier``, ``card`` or ``device``.
    level
        a, b or c of what it feeds; None where no marking says so.
    letters
        The groups of a division mark for what it feeds: its Co and Lo are then those groups' own.
    for_gas_only
        Whether its marking names what it may feed, and no dust.
    group
        The most demanding gas group that is marked for what it feeds; None where none is.
    """

    name: str
    entry: DeviceType
    role: str
    level: Level | None = None
    letters: frozenset[str] = frozenset()
    for_gas_only: bool = False
    group: Group | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Ruling:
    """The group that rules a circuit.

    Attributes
    ----------
    group
        IIC, IIB or IIA; None where an area does not state its own.
    why
        From which area it follows.
    harder
        The group that it may be instead where divisions were translated and no gas is named; else the same.
    doubt
        What is translated, in words.
    letters
        The division groups that were translated.
    """

    group: Group | None = None
    why: str = ""
    harder: Group | None = None
    doubt: str = ""
    letters: frozenset[str] = frozenset()


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Intrinsic:
    """A circuit as the rules of intrinsic safety see it.

    Attributes
    ----------
    because
        Why it is an Ex i circuit; empty where it is none.
    items
        The devices on its field side, from the field on.
    sources
        Its Ex i sources.
    source_missing
        What it would take to tell whether it has a source; empty where that is known.
    ruling
        The group that rules it.
    concerns
        Whether a part of it stands in a classified area, or it is declared; None where nothing tells.
    """

    circuit: Circuit
    because: str = ""
    items: tuple[Item, ...] = ()
    sources: tuple[ExSource, ...] = ()
    source_missing: str = ""
    ruling: Ruling = Ruling()
    concerns: bool | None = None

    @property
    def is_ex_i(self) -> bool:
        """Whether it has an Ex i source, is declared so, or has a device with no other protection."""
        return bool(self.because)

    @property
    def fed(self) -> tuple[Item, ...]:
        """The devices that the source feeds: those at a transmitter are fed by it."""
        return tuple(item for item in self.items if not item.at_transmitter)

    @property
    def level(self) -> Level | None:
        """The level of the system: the lowest of its parts; None where one of them is not marked."""
        levels = [source.level for source in self.sources]
        levels += [item.level for item in self.items if item.how in ("intrinsically safe", "several")]
        known = [level for level in levels if level is not None]
        return max(known, key=LEVELS.index) if known and len(known) == len(levels) else None


def intrinsic(circuit: Circuit, plant: Plant) -> Intrinsic:
    """Return a circuit as the rules of intrinsic safety see it.

    Parameters
    ----------
    circuit
        The circuit.
    plant
        Its plant: catalogue, areas and jurisdiction.
    """
    known: dict[int, Intrinsic] = plant.once("circuits and their intrinsic safety", _nothing_yet)
    found = known.get(id(circuit))
    # A circuit that the plant does not hold (a what-if) may be gone, and its number be another's.
    if found is None or found.circuit is not circuit:
        found = known[id(circuit)] = _intrinsic(circuit, plant)
    return found


def _nothing_yet(plant: Plant) -> dict[Any, Any]:
    return {}


def _intrinsic(circuit: Circuit, plant: Plant) -> Intrinsic:
    items = tuple(_items(circuit, plant))
    sources, missing = _sources(circuit, items, plant)
    because = ""
    if sources:
        because = f"{sources[0].name} is an Ex i source"
    elif circuit.intrinsically_safe:
        because = "the loop list declares it intrinsically safe"
    else:
        # What hangs on a transmitter is fed by it: it makes no Ex i circuit of the transmitter's.
        fed = [item for item in items if not item.at_transmitter]
        relying = next((item for item in fed if item.areas != () and item.how == "intrinsically safe"), None)
        if relying is not None:
            because = f"{relying.name} has no protection but {relying.protection}"
    if circuit.intrinsically_safe is False and not any(item.how in ("intrinsically safe", "simple") for item in items):
        because = ""
    return Intrinsic(
        circuit=circuit,
        because=because,
        items=items,
        sources=sources,
        source_missing=missing,
        ruling=_cached_ruling(items, plant) if because or any(item.relies for item in items) else Ruling(),
        concerns=_concerns(circuit, items),
    )


def _concerns(circuit: Circuit, items: tuple[Item, ...]) -> bool | None:
    if circuit.intrinsically_safe or any(item.areas for item in items):
        return True
    return None if any(item.areas is None for item in items) else False


def _cached_ruling(items: tuple[Item, ...], plant: Plant) -> Ruling:
    key = tuple(area for item in items for area in item.areas or ())
    known: dict[tuple[int, ...], tuple[tuple[Area, ...], Ruling]] = plant.once("ruling groups", _nothing_yet)
    ids = tuple(map(id, key))
    found = known.get(ids)
    if found is None or any(one is not other for one, other in zip(found[0], key, strict=True)):
        found = known[ids] = (key, _ruling(items))
    return found[1]


# ------------------------------------------------------------------------------------------------- the field's side


def _items(circuit: Circuit, plant: Plant) -> Iterator[Item]:
    members = circuit.members
    driven = len(members) > 1 and any(each.kind in _DRIVES for each in members)
    transmits = circuit.device.kind in _TRANSMITTERS and len(members) > 1 and _is_in_field(circuit.device)
    for each in members:
        kind = each.kind
        if kind in _SYSTEM_SIDE or kind in _BOXES or not _is_in_field(each):
            continue
        if kind is not None and kind.electrical == "no":
            continue
        if driven and kind in _VALVES and each.marking is None:
            continue
        areas = classified_areas(each)
        if areas == () and each.record.location == "panel":
            # On which side of the barrier a panel stands nobody says.
            continue
        told = _known_protection(each, areas or (), plant)
        yield Item(
            installed=each,
            areas=areas,
            at_transmitter=transmits and kind is Kind.ELEMENT and each is not circuit.device,
            **told._asdict(),
        )


def _is_in_field(each: Installed) -> bool:
    location = each.record.location
    if location is None:
        return each.kind is None or each.kind.location == "field"
    return location in ("field", "panel")


def classified_areas(installed: Installed) -> tuple[Area, ...] | None:
    """Return the classified areas that a row names; empty where it is unclassified, None where nothing tells."""
    record, area = installed.record, installed.area
    text = record.area_classification
    beside = _classified(text) if text and area is not None and not area.from_row_cell else None
    if area is not None and area.classified:
        return (area,) if beside is None else (area, beside)
    if beside is not None:
        return (beside,)
    return () if installed.unclassified else None


@lru_cache(maxsize=1024)
def _classified(text: str) -> Area | None:
    area = area_from_classification(text)
    return area if area is not None and area.classified else None


class _Told(NamedTuple):
    """What a device's row and type tell of its protection; the fields are those of `Item`."""

    how: How
    level: Level | None = None
    missing: str = ""
    blank: bool = False


def _known_protection(installed: Installed, areas: tuple[Area, ...], plant: Plant) -> _Told:
    """Return how a device is protected, worked out once for all that are alike in what it depends on."""
    record = installed.record
    known: dict[Any, tuple[tuple[Any, ...], _Told]] = plant.once("how devices are protected", _nothing_yet)
    held = (*areas, installed.type, installed.listed_type)
    key = (
        installed.marking.text if installed.marking is not None else None,
        record.protection,
        tuple(map(id, held)),
        installed.kind,
        record.simple_apparatus,
        record.nonincendive,
        record.signal,
        record.device_type,
        "ex_marking" in record.unread,
        installed.letters[:1],
    )
    found = known.get(key)
    if found is None or any(one is not other for one, other in zip(found[0], held, strict=True)):
        found = known[key] = (held, _protection(installed, areas))
    return found[1]


def _protection(installed: Installed, areas: tuple[Area, ...]) -> _Told:
    marking = marking_of(installed)
    if marking is None or marking.none_stated:
        return _unmarked(installed, marking, areas)
    if not marking.readable or marking.is_associated:
        return _Told("unknown", missing="Ex marking")
    standing = marking.standing()
    sides = {side for area in areas for side in area.sides}
    meant = [entry for entry in standing if entry.side in sides] or list(standing)
    by_words = intrinsically_safe(installed)
    told = [_of_entry(entry, by_words) for entry in meant]
    if None in told:
        return _Told("unknown", missing="type of protection")
    if by_words is False or not any(told):
        return _Told("other")
    level = _weakest(each for each in map(_level_of_entry, meant) if each is not None)
    # In gas by one protection and in dust by another, each atmosphere has but one.
    one_a_side = len({entry.side for entry in meant}) == len(meant)
    if by_words is True or all(each == "only" for each in told) or (one_a_side and "among" not in told):
        return _Told("intrinsically safe", level)
    return _Told("several", level)


def _unmarked(installed: Installed, marking: Marking | None, areas: tuple[Area, ...]) -> _Told:
    record = installed.record
    if is_simple_apparatus(installed):
        return _Told("simple")
    if marking is None:
        if "ex_marking" in record.unread or (installed.type is not None and "ex_marking" in installed.type.unread):
            return _Told("unknown", missing="Ex marking")
        if record.device_type and installed.listed_type is None:
            return _Told("unknown", missing="device type")
        words = record.protection or ""
        if says_intrinsically_safe(words):
            symbol = re.search(r"\bi[abc]\b", words)
            return _Told("intrinsically safe", _SYMBOL_LEVEL[symbol[0]] if symbol else None)
    in_division_2 = any(area.system == "division" and area.division == "2" for area in areas)
    stated = record.simple_apparatus is True and installed.kind not in NEVER_SIMPLE
    if is_passive(installed) or stated or (in_division_2 and record.nonincendive):
        return _Told("pending", missing="simple apparatus")
    return _Told("unmarked", missing="Ex marking", blank=marking is None)


def _of_entry(entry: MarkingEntry, by_words: bool | None) -> str | None:
    """Say whether intrinsic safety is an entry's only protection, one among others, or none; None: not told."""
    if entry.is_division:
        if entry.division_protection is not None:
            return "only" if entry.division_protection == "intrinsically safe" else ""
        if by_words is not None:
            return "only" if by_words else ""
        # For Division 2 alone nothing has to be intrinsically safe.
        return "" if entry.division == "2" else None
    symbols = [symbol.partition(" ")[0] if symbol[:3] in DUST_SERIES else symbol for symbol in entry.protections]
    counting = [symbol for symbol in symbols if symbol not in _BESIDE]
    if not counting:
        return None if not symbols else ""
    safe = [symbol for symbol in counting if symbol in _SYMBOL_LEVEL]
    return "" if not safe else "only" if len(safe) == len(counting) else "among"


def _level_of_entry(entry: MarkingEntry) -> Level | None:
    if entry.is_division:
        return "c" if entry.division == "2" else "a"
    return _weakest(
        _SYMBOL_LEVEL[symbol] for text in entry.protections if (symbol := text.partition(" ")[0]) in _SYMBOL_LEVEL
    )


def _weakest(levels: Iterable[Level]) -> Level | None:
    return max(levels, key=LEVELS.index, default=None)


# ------------------------------------------------------------------------------------------------------ the sources

# What stands in a barrier's column and says that there is none, or which sort without saying which one.
_NO_BARRIER: Final = re.compile(r"(?:no|n|none|not required|nein|ohne|direct)\.?", re.IGNORECASE)
_APART: Final = re.compile(r" ?[,;\n] ?| \+ | / | & | and | und ")
_MOST_NAMES: Final = 4


@lru_cache(maxsize=4096)
def _says_none(named: str) -> bool:
    return _NO_BARRIER.fullmatch(named.strip()) is not None


def _sources(circuit: Circuit, items: tuple[Item, ...], plant: Plant) -> tuple[tuple[ExSource, ...], str]:
    """Return a circuit's Ex i sources, and what is missing to tell whether it has one."""
    found: list[ExSource] = []
    missing = ""
    named = circuit.barrier_named
    if named and not _says_none(named):
        for name, entry, marking in _barriers(named, circuit, plant):
            if entry is None:
                missing = "barrier"
                continue
            source = _known_source(name, entry, marking, "barrier", plant)
            if source is None:
                missing = "barrier"
            elif isinstance(source, ExSource):
                found.append(source)
    elif not named:
        missing = _blank_barrier(circuit, plant)
    if circuit.card is not None and circuit.card is not circuit.barrier:
        source = _known_source(circuit.card.code or "card", circuit.card, None, "card", plant)
        if isinstance(source, ExSource):
            found.append(source)
    elif circuit.card_named and circuit.card is None and says_intrinsically_safe(circuit.card_named):
        missing = missing or "card"
    for item in items:
        if _gives_power(item, items):
            entry = item.installed.type
            assert entry is not None
            found.append(ExSource(name=item.name, entry=entry, role="device", level=item.level))
    return tuple(found), "" if found else missing


def _barriers(named: str, circuit: Circuit, plant: Plant) -> Iterator[tuple[str, DeviceType | None, Marking | None]]:
    """Give each barrier that a cell names: its name, its entry, and the marking of its own row if it has one."""
    names = [named]
    if circuit.barrier is None and not plant.by_tag(named):
        parts = [part.strip() for part in _APART.split(named) if part.strip()]
        if 1 < len(parts) <= _MOST_NAMES and any(plant.named_type(part) or plant.by_tag(part) for part in parts):
            names = parts
    for name in names:
        entry = circuit.barrier if len(names) == 1 else plant.named_type(name)
        installed = plant.by_tag(name) if name_key(name) not in plant.types else ()
        if installed:
            for each in installed:
                yield each.name, each.type, each.marking
        else:
            yield (entry.code or name) if entry is not None else name, entry, None


def _known_source(
    name: str, entry: DeviceType, marking: Marking | None, role: str, plant: Plant
) -> ExSource | bool | None:
    """Return an entry as a source, worked out once: most circuits of a plant share a few."""
    known: dict[Any, tuple[DeviceType, ExSource | bool | None]] = plant.once("Ex i sources by entry", _nothing_yet)
    key = (id(entry), name, role, marking.text if marking is not None else None)
    found = known.get(key)
    if found is None or found[0] is not entry:
        found = known[key] = (entry, _source(name, entry, marking, role))
    return found[1]


def _source(name: str, entry: DeviceType, marking: Marking | None, role: str) -> ExSource | bool | None:
    """Return a catalogue entry as an Ex i source; False where it is none, None where nothing tells."""
    if marking is None and entry.ex_marking:
        marking = read_marking(entry.ex_marking)
    states = any(value is not None for value in (entry.uo_v, entry.io_ma, entry.po_mw))
    if marking is not None and marking.readable and not marking.none_stated:
        outputs = [each for each in marking.outputs if set(each.protections) & _SYMBOL_LEVEL.keys()]
        division = [each for each in marking.entries if each.is_output and each.is_division]
        if outputs or division:
            levels: list[Level] = []
            for output in outputs:
                own = _weakest(_SYMBOL_LEVEL[each] for each in output.protections if each in _SYMBOL_LEVEL)
                marked: Any = output.epl[1] if output.epl else own
                levels.append(max((own or "a", marked), key=LEVELS.index))
            levels += ["c" if each.division == "2" else "a" for each in division]
            epls = [output.epl for output in outputs if output.epl_marked and output.epl]
            return ExSource(
                name=name,
                entry=entry,
                role=role,
                level=min(levels, key=LEVELS.index),
                letters=frozenset(letter for each in division for letter in each.groups),
                for_gas_only=bool(epls) and not division and all(epl[0] == "G" for epl in epls),
                group=_fed_group(marking),
            )
        if not states:
            return False
        standing = _weakest(each for each in map(_level_of_entry, marking.standing()) if each is not None)
        return ExSource(name=name, entry=entry, role=role, level=standing)
    if states:
        return ExSource(name=name, entry=entry, role=role)
    if role == "card" or (marking is not None and marking.none_stated):
        return False
    return None


def _fed_group(marking: Marking) -> Group | None:
    """Return the most demanding gas group that a marking names for its outputs."""
    texts = [output.group or entry.group for entry in marking.entries for output in entry.outputs]
    return max((_OF_GROUP[text] for text in texts if text and text in _OF_GROUP), key=_rank, default=None)


def ex_source(entry: DeviceType) -> ExSource | None:
    """Return a barrier or isolator of the catalogue as an Ex i source; None where it is none, or nothing tells."""
    found = _source(entry.code or "", entry, None, "barrier")
    return found if isinstance(found, ExSource) else None


def _blank_barrier(circuit: Circuit, plant: Plant) -> str:
    """Return the title of the barrier where its blank says nothing; empty where it says that there is none."""
    record, given = circuit.device.record, circuit.signal_row
    if "barrier" in record.unread or "barrier" in given.unread:
        return "barrier"
    reason = given.blanks.get("barrier") or record.blanks.get("barrier")
    if reason and reason != "not applicable":
        return "barrier"
    if (
        any(text and says_intrinsically_safe(text) for text in (circuit.card_named, given.io_type, given.system))
        and circuit.card is None
    ):
        return "card"
    if reason:
        return ""
    # Where the plant names no barrier at all, its lists don't say which circuits have one.
    if not plant.once("some circuit names a barrier", _names_barriers):
        return "barrier"
    row = circuit.row
    if row is not None and (row.origin is None or "barrier" in row.origin.place.columns):
        return ""
    return "" if plant.has_column("barrier") and plant.sheet_has_column(circuit.device, "barrier") else "barrier"


def _names_barriers(plant: Plant) -> bool:
    """Whether a circuit names a barrier; of a part of a plant, also whether one does that the part leaves out."""
    if any(circuit.barrier_named for circuit in plant.circuits):
        return True
    whole = plant.whole
    if whole is plant:
        return False
    naming: frozenset[str] = whole.once("circuits that name a barrier", _naming_barriers)
    return not naming <= {circuit.name for circuit in plant.circuits}


def _naming_barriers(plant: Plant) -> frozenset[str]:
    return frozenset(circuit.name for circuit in plant.circuits if circuit.barrier_named)


def _gives_power(item: Item, items: tuple[Item, ...]) -> bool:
    """Whether a device feeds the circuit itself.

    A bracketed output, and what a temperature transmitter gives its sensor, is the source of another circuit.
    """
    installed, entry = item.installed, item.installed.type
    if entry is None or item.how not in ("intrinsically safe", "several") or item.at_transmitter:
        return False
    if not any(value for value in (entry.uo_v, entry.io_ma, entry.po_mw)):
        return False
    marking = marking_of(installed)
    if marking is not None and marking.outputs:
        return False
    for_sensor = (
        installed.letters[:1] == "T" or entry.sensor_type is not None or any(each.at_transmitter for each in items)
    )
    return not for_sensor


# -------------------------------------------------------------------------------------------------------- the group

_ORDER: Final[tuple[Group, ...]] = ("IIA", "IIB", "IIC")
# NEC 505.6 (from memory): what a division group is taken for, and what it may reach into where no gas is named.
_OF_LETTER: Final[Mapping[str, tuple[Group, Group]]] = MappingProxyType(
    {"A": ("IIC", "IIC"), "B": ("IIC", "IIC"), "C": ("IIB", "IIC"), "D": ("IIA", "IIB")}
)
_OF_GROUP: Final[Mapping[str, Group]] = MappingProxyType({"IIA": "IIA", "IIB": "IIB", "IIC": "IIC", "IIB+H2": "IIC"})


def _ruling(items: tuple[Item, ...]) -> Ruling:
    found: list[Ruling] = []
    unknown = False
    for area in {id(area): area for item in items for area in item.areas or ()}.values():
        for side in area.sides:
            ruling = _ruling_of(area, side)
            if ruling is None:
                unknown = True
            else:
                found.append(ruling)
    if not found:
        return Ruling()
    worst = max(found, key=lambda each: (_rank(each.group), _rank(each.harder)))
    if unknown and worst.group != "IIC":
        return Ruling()
    harder = max((each.harder for each in found if each.harder), key=_rank)
    doubt = next((each.doubt for each in found if each.doubt and each.harder == harder), "")
    return replace(
        worst,
        harder=harder,
        doubt=doubt if harder != worst.group else "",
        letters=frozenset(letter for each in found for letter in each.letters),
    )


def _rank(group: Group | None) -> int:
    return -1 if group is None else _ORDER.index(group)


def _ruling_of(area: Area, side: str) -> Ruling | None:
    where = f"area {area.code}" if area.code else "its area"
    if side == "dust":
        return Ruling(group="IIB", harder="IIB", why=f"dust in {where} takes IIB, from memory")
    text = area.gas_group or ""
    if text in _OF_GROUP:
        group = _OF_GROUP[text]
        return Ruling(group=group, harder=group, why=f"{text} of {where}")
    letters = [letter for letter in text if letter in _OF_LETTER]
    if not letters:
        return None
    known = iec_group_of(named_gases(area.gas))
    if known is not None and known in _OF_GROUP:
        group = _OF_GROUP[known]
        return Ruling(group=group, harder=group, why=f"{area.gas} in {where}: {group}, from memory")
    taken = [_OF_LETTER[letter] for letter in letters]
    group, harder = max((each[0] for each in taken), key=_rank), max((each[1] for each in taken), key=_rank)
    words = f"Group {', '.join(letters)} of {where}"
    doubt = f"{words}, no gas named: {group} or {harder}" if harder != group else ""
    return Ruling(group=group, harder=harder, why=f"{words} taken as {group}", doubt=doubt, letters=frozenset(letters))


# -------------------------------------------------------------------------------------------------------- the level


def needed_level(item: Item) -> tuple[Level, str] | None:
    """Return the level that an item's place needs, and the place in words; None where it cannot be told.

    Ga and Da for Zones 0 and 20, Gb and Db for 1 and 21, Gc and Dc for 2 and 22 (IEC 60079-14:2013 Table 1 and
    IEC 60079-25, from memory); Division 1 takes what is for Zone 0 (NEC 501.5). An EPL that the plant assigns counts
    in the zone's place, and on a partition the zone of the process side.
    """
    needed: list[tuple[Level, str]] = []
    for area in item.areas or ():
        if area.system == "division":
            if area.division in ("1", "2"):
                needed.append(("a" if area.division == "1" else "c", f"Class {area.class_ or '?'} Div {area.division}"))
            continue
        for side in area.sides:
            assigned = area.epl_assigned(side)
            zone = area.gas_zone if side == "gas" else area.dust_zone
            if assigned is not None:
                needed.append((_as_level(assigned[1]), f"EPL {assigned}"))
            elif zone is not None:
                needed.append((_as_level("abc"[int(zone[-1])]), f"Zone {zone}"))
    inside = item.installed.record.process_zone
    zone = read_zone(inside) if inside else None
    if zone is not None and "/" not in zone and item.classified:
        needed.append((_as_level("abc"[int(zone[-1])]), f"Zone {zone} on the process side"))
    return min(needed, key=lambda each: LEVELS.index(each[0]), default=None)


def _as_level(letter: str) -> Level:
    return "a" if letter == "a" else "b" if letter == "b" else "c"


# --------------------------------------------------------------------------------------------------- the comparison


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Entity:
    """The entity comparison of a circuit, with the standard's defaults for what is blank and without.

    Attributes
    ----------
    missing
        Why there is none, as titles; `comparison` is then None.
    comparison
        With the standard's figures for a cable of which nothing is given.
    kindest
        With the kindest value that could be true for each blank: a cable that stores nothing.
    harder
        As `comparison`, for the group that a translated division may reach into; None where there is no doubt.
    assumed
        The defaults that were used, in words.
    linear
        Whether the source's output characteristic is linear: stated so, or assumed of a zener barrier; None where
        it is not stated of another source.
    linear_assumed
        Whether that is assumed.
    """

    intrinsic: Intrinsic
    source: ExSource | None = None
    missing: tuple[str, ...] = ()
    comparison: Comparison | None = None
    kindest: Comparison | None = None
    harder: Comparison | None = None
    assumed: tuple[str, ...] = ()
    linear: bool | None = None
    linear_assumed: bool = False


def entity_comparison(circuit: Circuit, plant: Plant) -> Entity:
    """Return the whole entity comparison of a circuit, line by line.

    Parameters
    ----------
    circuit
        The circuit.
    plant
        Its plant.
    """
    known: dict[int, Entity] = plant.once("entity comparisons", _nothing_yet)
    found = known.get(id(circuit))
    if found is None or found.intrinsic.circuit is not circuit:
        found = known[id(circuit)] = _entity(intrinsic(circuit, plant), plant)
    return found


def _entity(of: Intrinsic, plant: Plant) -> Entity:
    if not of.is_ex_i or len(of.sources) != 1:
        return Entity(intrinsic=of, missing=(of.source_missing or "barrier",))
    return entity_with(of, of.sources[0], plant)


_MARGIN: Final = 1.0 - 1e-9


def plainly_holds(of: Intrinsic, plant: Plant) -> tuple[str, ...] | None:
    """Return the assumptions of a comparison in which every term holds with room to spare; None of any other.

    Most circuits of a plant pass by far, even with halved Co and Lo, and need no line of the comparison.
    """
    circuit, group = of.circuit, of.ruling.group
    if len(of.sources) != 1 or group is None or of.ruling.harder != group:
        return None
    source = of.sources[0]
    entry = source.entry
    uo, io, po = entry.uo_v, entry.io_ma, entry.po_mw
    if uo is None or io is None or po is None:
        return None
    taken = _taken_floats(entry, group)
    linear, assumed_linear = _is_linear(source)
    if taken is None or not linear:
        return None
    ci = li = 0.0
    for item in of.items:
        if item.at_transmitter:
            continue
        device = item.installed.type
        if item.how == "simple":
            if device is None:
                continue
            if any(getattr(device, name) is not None for name in DEVICE_LIMITS):
                return None
            continue
        if device is None or item.how not in ("intrinsically safe", "several"):
            return None
        ui, ii, pi = device.ui_v, device.ii_ma, device.pi_mw
        if ui is None or ii is None or pi is None or device.ci_nf is None or device.li_uh is None:
            return None
        if uo > ui * _MARGIN or io > ii * _MARGIN or po > pi * _MARGIN:
            return None
        ci += device.ci_nf
        li += device.li_uh
    stored = _stored_floats(circuit)
    if stored is None:
        return None
    co_nf, lo_mh = taken
    if ci + stored[0] > co_nf * _MARGIN or (li + stored[1]) / 1000.0 > lo_mh * _MARGIN:
        return None
    return linear_assumption(source) if assumed_linear else ()


def _taken_floats(entry: DeviceType, group: Group) -> tuple[float, float] | None:
    """Return half of the Co and Lo of a group's own pair, with the cap; None where it has no pair of its own."""
    co, lo = getattr(entry, f"co_{group.casefold()}_nf"), getattr(entry, f"lo_{group.casefold()}_mh")
    if co is None or lo is None:
        return None
    return min(co / 2.0, float(CAPS_NF[group])), lo / 2.0


def _stored_floats(circuit: Circuit) -> tuple[float, float] | None:
    """Return what the cables of a run store in nF and uH; None where anything of them is not given."""
    if circuit.segments:
        pieces: list[tuple[float, Any]] = [(each.length_m, each.type) for each in circuit.segments]
    elif circuit.cable_length_m is not None:
        pieces = [(circuit.cable_length_m.number, circuit.cable_type)]
    else:
        return None
    nf = uh = 0.0
    for length_m, kind in pieces:
        if kind is None or kind.capacitance_pf_per_m is None or kind.inductance_uh_per_m is None:
            return None
        nf += length_m * kind.capacitance_pf_per_m / 1000.0
        uh += length_m * kind.inductance_uh_per_m
    return nf, uh


def _is_linear(source: ExSource) -> tuple[bool | None, bool]:
    """Return whether a source's output characteristic is linear, and whether that is assumed of a zener barrier."""
    stated, isolation = source.entry.output_characteristic, source.entry.isolation
    zener = source.role == "barrier" and (isolation == "zener" or (isolation is None and _is_zener(source.entry)))
    return (stated == "linear" if stated is not None else True if zener else None), stated is None and zener


def linear_assumption(source: ExSource) -> tuple[str, ...]:
    """Return the assumption about a zener barrier's characteristic, in words."""
    return (f"{source.name}: a zener barrier's output characteristic is taken as linear",)


def entity_with(of: Intrinsic, source: ExSource, plant: Plant, *, length_m: float | None = None) -> Entity:
    """Return the entity comparison of a circuit as it would be with a source, and with another length of cable.

    Parameters
    ----------
    of
        The circuit.
    source
        The source, its own or another.
    plant
        Its plant.
    length_m
        The length of the cable in m; None: as it is.
    """
    ruling = of.ruling
    apparatus = tuple(apparatus_of(item) for item in of.fed)
    cable, assumed = cable_of(of.circuit, plant, defaults=_defaults(of, plant))
    if length_m is not None:
        cable = tuple(replace(each, length_m=exact(length_m)) for each in cable[:1])
    group = ruling.group or "IIC"
    taken = source_for(source, ruling.group)
    comparison = compare(taken, apparatus, cable, group=group)
    kindest = compare(taken, apparatus, tuple(map(_kindest, cable)), group=group) if _is_unsure(cable) else comparison
    ratios = [each.uh_per_ohm for each in cable if "uh_per_ohm" in each.assumed and each.uh_per_ohm is not None]
    if ratios and any(line.by_ratio for line in comparison.of("inductance")):
        assumed = (*assumed, f"cable {number(ratios[0])} uH/ohm ({_defaults(of, plant).basis})")
    harder = None
    if ruling.group and ruling.harder and ruling.harder != ruling.group and not ruling.letters <= source.letters:
        harder = compare(source_for(source, ruling.harder), apparatus, cable, group=ruling.harder)
    linear, linear_assumed = _is_linear(source)
    return Entity(
        intrinsic=of,
        source=source,
        comparison=comparison,
        kindest=kindest,
        harder=harder,
        assumed=assumed,
        linear=linear,
        linear_assumed=linear_assumed,
    )


def _is_zener(entry: DeviceType) -> bool:
    return entry.kind is Kind.BARRIER and entry.available_20ma_v is None and entry.available_alarm_v is None


def apparatus_of(item: Item) -> Apparatus:
    """Return what a device bears and stores, and where that stands."""
    installed, entry = item.installed, item.installed.type
    simple = item.how == "simple"
    if entry is None:
        return Apparatus(name=item.name, simple=simple)
    values = {name: getattr(entry, name) for name in DEVICE_LIMITS}
    blanks = {**entry.blanks, **(installed.record.own.blanks if installed.record.own is not None else {})}
    return Apparatus(
        name=item.name,
        came_from=came_from(installed, DEVICE_LIMITS),
        simple=simple,
        # Some certificates set Ui and Pi alone: then a person has written so.
        not_set=frozenset(
            symbol
            for name, symbol in (("ii_ma", "Ii"), ("pi_mw", "Pi"))
            if blanks.get(name) == "not applicable" and values[name] is None and values["ui_v"] is not None
        ),
        **{name: None if value is None else exact(value) for name, value in values.items()},
    )


def came_from(installed: Installed, names: Iterable[str]) -> str:
    """Return where the figures of a device stand: its row, its type, or both."""
    own, entry = installed.record.own, installed.type
    code = f"type {entry.code}" if entry is not None and entry.code else ""
    mine = [name for name in names if own is not None and getattr(own, name) is not None]
    listed = [name for name in names if name not in mine and entry is not None and getattr(entry, name) is not None]
    places = [place for place in ("its row" if mine else "", code if listed else "") if place]
    return " and ".join(places)


def source_for(source: ExSource, group: Group | None) -> Source:
    """Return a source's figures in a group: its own Co and Lo, else those of a more demanding group."""
    entry = source.entry
    co, lo = _of_groups(entry, "co"), _of_groups(entry, "lo")
    taken = MORE_DEMANDING[group] if group is not None else ()
    both = next((each for each in taken if co.get(each) is not None and lo.get(each) is not None), None)
    of_co = both or next((each for each in taken if co.get(each) is not None), None)
    of_lo = both or next((each for each in taken if lo.get(each) is not None), None)

    def figure(value: float | None) -> Decimal | None:
        return None if value is None else exact(value)

    return Source(
        name=source.name,
        came_from=source.name,
        uo_v=figure(entry.uo_v),
        io_ma=figure(entry.io_ma),
        po_mw=figure(entry.po_mw),
        co_nf=figure(co.get(of_co)) if of_co else None,
        co_group=of_co or "",
        lo_mh=figure(lo.get(of_lo)) if of_lo else None,
        lo_group=of_lo or "",
        lo_ro_uh_per_ohm=figure(entry.lo_ro_uh_per_ohm),
        combined_pairs=bool(entry.combined_pairs),
    )


_FIELDS_OF_GROUPS: Final[Mapping[str, tuple[tuple[Group, str], ...]]] = MappingProxyType(
    {
        symbol: tuple((group, f"{symbol}_{group.casefold()}_{unit}") for group in reversed(_ORDER))
        for symbol, unit in (("co", "nf"), ("lo", "mh"))
    }
)


def _of_groups(entry: DeviceType, symbol: Literal["co", "lo"]) -> dict[Group, float | None]:
    return {group: getattr(entry, name) for group, name in _FIELDS_OF_GROUPS[symbol]}


def groups_stated(entry: DeviceType, symbol: Literal["co", "lo"]) -> tuple[Group, ...]:
    """Return the groups for which an entry states Co or Lo, the most demanding first."""
    return tuple([group for group, name in _FIELDS_OF_GROUPS[symbol] if getattr(entry, name) is not None])


# -------------------------------------------------------------------------------------------------------- the cable

_LENGTH_FROM: Final[Mapping[str, str]] = MappingProxyType(
    {"loop row": "loop list", "row": "its row", "cables": "cable schedule"}
)


def _defaults(of: Intrinsic, plant: Plant) -> CableDefaults:
    """Return the standard whose figures stand for a cable of which nothing is given: that of the jurisdiction."""
    for item in of.items:
        for area in item.areas or ():
            stated = area.jurisdiction or plant.data.jurisdiction
            if stated == "US" or (stated is None and area.system == "division"):
                return US_DEFAULTS
    return IEC_DEFAULTS


def cable_of(
    circuit: Circuit, plant: Plant, *, defaults: CableDefaults
) -> tuple[tuple[CablePiece, ...], tuple[str, ...]]:
    """Return the cables of a circuit's run, the standard's figures for what is not given, and these in words.

    A cable type that is named and not listed is no blank: its figures stay missing.
    """
    pieces: list[CablePiece] = []
    if circuit.segments:
        for segment in circuit.segments:
            cable = plant.cables.get(name_key(segment.name))
            named = cable.type if cable is not None else None
            name = segment.name or "cable"
            pieces.append(_piece(name, exact(segment.length_m), "cable schedule", segment.type, named))
    else:
        length = circuit.cable_length_m
        pieces.append(
            _piece(
                "cable",
                exact(length.number) if length is not None else None,
                _length_from(length),
                circuit.cable_type,
                circuit.cable_type_named,
            )
        )
    found: list[CablePiece] = []
    assumed: dict[str, None] = {}
    for piece in pieces:
        if "type not listed" in piece.came_from:
            found.append(piece)
            continue
        whole = with_defaults(piece, defaults)
        for field, value, unit in (
            ("pf_per_m", whole.pf_per_m, "pF/m"),
            ("uh_per_m", whole.uh_per_m, "uH/m"),
        ):
            if field in whole.assumed and value is not None:
                assumed[f"cable {number(value)} {unit} ({defaults.basis})"] = None
        found.append(whole)
    return tuple(found), tuple(assumed)


def _length_from(length: Given | None) -> str:
    return _LENGTH_FROM.get(length.source, length.source) if length is not None else ""


def _piece(name: str, length_m: Decimal | None, length_from: str, kind: Any, named: str | None) -> CablePiece:
    if kind is None:
        lost = bool(named) and read_conductor_size(named or "") is None
        return CablePiece(
            name=name,
            length_m=length_m,
            length_from=length_from,
            came_from="type not listed" if lost else "",
        )
    return CablePiece(
        name=name,
        length_m=length_m,
        length_from=length_from,
        pf_per_m=None if kind.capacitance_pf_per_m is None else exact(kind.capacitance_pf_per_m),
        uh_per_m=None if kind.inductance_uh_per_m is None else exact(kind.inductance_uh_per_m),
        uh_per_ohm=None if kind.lr_uh_per_ohm is None else exact(kind.lr_uh_per_ohm),
        came_from=f"cable type {kind.code}",
    )


def _is_unsure(cable: Iterable[CablePiece]) -> bool:
    return any(each.assumed or each.length_m is None for each in cable)


def _kindest(piece: CablePiece) -> CablePiece:
    nothing: dict[str, Any] = {name: Decimal(0) for name in piece.assumed}
    return replace(
        piece, **nothing, assumed=frozenset(), length_m=Decimal(0) if piece.length_m is None else piece.length_m
    )


def parameter_cells(of: Intrinsic, names: Iterable[str]) -> tuple[Cell, ...]:
    """Return the cells in which entity parameters of a circuit's sources, devices and cable stand."""
    wanted = tuple(names)
    cells: list[Cell] = []
    for source in of.sources:
        for name in wanted:
            cells.extend(source.entry.cells(name) if getattr(source.entry, name, None) is not None else ())
    for item in of.fed:
        entry = item.installed.type
        for name in wanted:
            if entry is not None and getattr(entry, name, None) is not None:
                cells.extend(entry.cells(name))
    return tuple(dict.fromkeys(cells))
