"""WIR: channels and wires."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Iterator
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.record import Instrument
from instruments.tag import assembly_key, natural_key
from loops.circuit import ANALOGUE_OUTPUT
from loops.plant import Plant, name_key
from loops.wiring import circuit_kind, has_io, transmitter_of
from validation.channel import channels, own_channels
from validation.finding import Found, NotApplicable, Severity, Unchecked, Verdict
from validation.rule import Subject, rule
from validation.rules.completeness import SHARED_CELL
from validation.rules.electrical import signal_class
from validation.rules.whole_loops import alone

_VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})
_DRIVES: Final = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID})
_SHOWS: Final = frozenset({Kind.SOFT_FUNCTION, Kind.INDICATOR})
_LINK: Final = re.compile(
    r"bus|modbus|profinet|\bnet\b|^net[-_.]|ethernet|serial|segment|\bseg\b|\bff\b|\bpa\b|rs-?485|tcp",
    re.IGNORECASE,
)
_CHANNEL: Final = re.compile(r"(?:ch(?:annel)?[\s.:-]*)?([0-9]{1,3})", re.IGNORECASE)
# Columns that people keep beside a channel and that no field holds.
_PART_OF_ADDRESS: Final = re.compile(
    r"rack|slot|node|chassis|drop|station|module|plc|controller|\brio\b|cabinet|panel|head|base|branch|cpu|baugruppe",
    re.IGNORECASE,
)


def _is_link(row: Instrument) -> bool:
    return bool(
        signal_class(row.signal) == "bus" or _LINK.search(row.io_address or "") or _LINK.search(row.io_type or "")
    )


_Signal = tuple[Installed, Instrument]
_ONLY_A_CHANNEL: Final = "card"


class _Shared:
    """What stands on one address: groups of instruments, each with the addresses that they share."""

    def __init__(self, plant: Plant) -> None:
        at: dict[str, list[_Signal]] = defaultdict(list)
        for each in plant.live:
            for row in each.channels:
                if row.io_address is not None:
                    channel = _CHANNEL.fullmatch(row.io_address)
                    at[channel[1] if channel else name_key(row.io_address)].append((each, row))
        self.rows: dict[tuple[int, ...], list[Instrument]] = defaultdict(list)
        self.groups: dict[tuple[int, ...], tuple[Installed, ...]] = {}
        for signals in at.values():
            if len(signals) > 1:
                for told, found in _places(signals):
                    self._take(told, found)

    def _take(self, told: bool, signals: list[_Signal]) -> None:
        members = {id(each): each for each, _ in signals}
        if len(members) < 2 or _may_share(signals):
            return
        key = (int(told), *sorted(members))
        self.groups.setdefault(key, tuple(members.values()))
        self.rows[key].extend(row for _, row in signals)


def _places(signals: list[_Signal]) -> Iterator[tuple[bool, list[_Signal]]]:
    """Part the signals with one address by where that address is, and whether that can be told.

    A bare channel is a place only with its card; addresses of two systems are two, those of two packages
    likewise; and where columns that no field holds say rack or slot, they are part of the address.
    """
    only_channel = _CHANNEL.fullmatch((signals[0][1].io_address or "").strip()) is not None
    by_place: dict[tuple[str, ...], list[_Signal]] = defaultdict(list)
    for each, row in signals:
        parts = sorted((head, name_key(text)) for head, text in row.other if _PART_OF_ADDRESS.search(head))
        beside = "|".join(f"{head}={text}" for head, text in parts)
        package = ""
        if row.system == "package" and row.origin is not None:
            package = f"{row.origin.place.file}|{row.origin.place.sheet}"
        by_place[(name_key(row.card) if only_channel else "", beside, package)].append((each, row))
    for (card, beside, _), found in by_place.items():
        told = not only_channel or bool(card or beside)
        systems = {row.system for _, row in found if row.system}
        for system in sorted(systems) or [""]:
            yield told, [(each, row) for each, row in found if row.system in (system, None, "")]


def _on_one_address(plant: Plant) -> Iterator[tuple[Installed, ...]]:
    shared: _Shared = plant.once("shared addresses", _Shared)
    # The same instruments may share an address that can be told and one that cannot.
    return iter({key[1:]: group for key, group in shared.groups.items()}.values())


def _may_share(signals: list[_Signal]) -> bool:
    """Whether what stands at one address is one signal after all, or a link that many may share."""
    if all(_is_link(row) for _, row in signals):
        return True
    members = list({id(each): each for each, _ in signals}.values())
    loops = {name_key(each.loop) for each in members if each.loop}
    if len(loops) != 1 or any(not each.loop for each in members):
        return False
    # What only shows a signal has none of its own.
    carriers = [each for each in members if each.kind not in _SHOWS]
    if len(carriers) <= 1:
        return True
    kinds = {each.kind for each in carriers}
    if kinds <= _VALVES | _DRIVES:
        valves = [each for each in carriers if each.kind in _VALVES]
        drives = [each for each in carriers if each.kind in _DRIVES]
        # A valve and what drives it; two control valves of one split range, with a drive each.
        if len(valves) <= 1 and len(drives) <= 1:
            return True
        return len(valves) <= 2 and len(drives) <= 2 and _is_split_range(carriers, signals)
    elements = [each for each in carriers if each.kind is Kind.ELEMENT]
    others = [each for each in carriers if each.kind is not Kind.ELEMENT]
    return bool(elements) and len(others) == 1 and others[0].kind in (Kind.TRANSMITTER, Kind.ANALYSER)


def _is_split_range(carriers: list[Installed], signals: list[_Signal]) -> bool:
    if any(each.kind in (Kind.ON_OFF_VALVE, Kind.SOLENOID) for each in carriers):
        return False
    return all(circuit_kind(row.io_type) in (None, ANALOGUE_OUTPUT) for _, row in signals)


def _has_channel(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if kind is None or installed.io_address is not None or kind.wired == "yes":
        return True
    if kind.wired == "own":
        return any(row.signal is not None or has_io(row) for row in installed.channels)
    if kind.wired != "element":
        return False
    loop = plant.loop_of(installed)
    return loop is None or transmitter_of(installed, loop.members) is None


@rule(
    "WIR01",
    severity=Severity.FAULT,
    on=Subject.GROUP,
    applies=_has_channel,
    needs=("io_address",),
    groups=_on_one_address,
    message="{tags} are on one I/O address, {address}",
    basis="common practice",
)
def address_used_twice(group: tuple[Installed, ...], plant: Plant) -> Verdict:
    """One I/O address on two live signals.

    Why it matters: one of the two has no channel; or both are wired to it and read each other.

    What to do: give one of them a channel of its own. A bus or serial link may repeat, and the
    valves of one split range may share.

    >>> from validation.example import said
    >>> rows = [{"tag": "FT-4", "I/O address": "R1.S2.C7"}, {"tag": "FT-5", "I/O address": "R1.S2.C7"}]
    >>> said("WIR01", rows)
    ['FT-4, FT-5: FT-4, FT-5 are on one I/O address, R1.S2.C7']
    >>> said("WIR01", [rows[0], {"tag": "FT-5", "I/O address": "R1.S2.C8"}])
    []
    """
    from validation.audit import group_name

    shared: _Shared = plant.once("shared addresses", _Shared)
    found: list[Found] = []
    untold = False
    for told in (1, 0):
        key = (told, *sorted(id(each) for each in group))
        rows = shared.rows.get(key)
        if rows is None:
            continue
        if not told:
            untold = True
            continue
        by_address: dict[str, list[Instrument]] = defaultdict(list)
        for row in rows:
            by_address[name_key(row.io_address)].append(row)
        addresses = sorted({at[0].io_address or "" for at in by_address.values()}, key=natural_key)
        found.append(
            Found(
                values={"tags": group_name(group), "address": ", ".join(addresses)},
                fields=("io_address",),
                found=", ".join(addresses),
                wanted="an address each",
                cells=tuple(cell for row in rows for cell in row.cells("io_address")),
            )
        )
    if found:
        return found
    return Unchecked(_ONLY_A_CHANNEL) if untold else None


def _columns_absent(plant: Plant) -> Verdict:
    if plant.has_column("io_type", "io_address"):
        return None
    count = sum(
        1
        for each in plant.live
        if each.kind is not None
        and not each.equipment_tag
        and each.kind.wired in ("yes", "element")
        and not _is_wireless(each)
        and not _is_on_a_bus(each)
        and not channels(each, plant)
        and not _leaves_it_to_another(each, plant)
    )
    if not count:
        return None
    return Found(
        values={"count": f"{count} instrument is" if count == 1 else f"{count} instruments are"},
        fields=("io_type", "io_address"),
        message="no sheet has a column for I/O type or address; {count} wired to the system",
        found="no such column",
        wanted="I/O type and address",
    )


def _is_on_a_bus(installed: Installed) -> bool:
    """Whether its only signal is a bus or serial link, which is no channel that a list without I/O columns lacks."""
    rows = [row for row in installed.signals if row.signal]
    return bool(rows) and all(signal_class(row.signal) == "bus" for row in rows)


def _is_wireless(installed: Installed) -> bool:
    return any("wireless" in row.signal.casefold() for row in installed.signals if row.signal)


def _leaves_it_to_another(installed: Installed, plant: Plant) -> bool:
    """Whether the channel is that of its transmitter, or of the valve that it drives."""
    kind = installed.kind
    if kind is not Kind.ELEMENT and kind not in _DRIVES:
        return False
    loop = plant.loop_of(installed)
    members = loop.members if loop is not None else ()
    if kind is Kind.ELEMENT:
        return transmitter_of(installed, members) is not None
    if any(each.kind in _VALVES and channels(each, plant) for each in members):
        return True
    # SDV-1201 and SOV-1201 are one assembly though no letter gives them a loop.
    key = assembly_key(installed.tag) if installed.tag is not None else None
    valves: dict[object, list[Installed]] = plant.once("driven valves by assembly", _driven_valves)
    return key is not None and any(channels(each, plant) for each in valves.get(key, ()))


def _driven_valves(plant: Plant) -> dict[object, list[Installed]]:
    valves: dict[object, list[Installed]] = defaultdict(list)
    for each in plant.live:
        if each.kind in _VALVES and each.tag is not None:
            valves[assembly_key(each.tag)].append(each)
    return valves


def _wired_or_local(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if installed.equipment_tag:
        return False
    if kind is None:
        return True
    wired = kind.wired
    return wired == "yes" or wired == "element" or (wired == "no" and kind.process)


@rule(
    "WIR06",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_wired_or_local,
    whole=_columns_absent,
    message="{kind} has neither I/O type nor address",
    basis="common practice",
)
def channel_missing(installed: Installed, plant: Plant) -> Verdict:
    """An instrument that is wired to the system and has neither I/O type nor address, or a local one that has.

    Why it matters: no channel means no card ordered and no place to wire it; a channel for a local
    gauge is one that something else lacks.

    What to do: give it its I/O, or correct its kind. An element with a transmitter in its loop
    needs none.

    >>> from validation.example import said
    >>> said("WIR06", [{"tag": "PT-1", "I/O type": ""}, {"tag": "PG-2", "I/O type": "AI"}])
    ['PG-2: a gauge, which is local, has I/O: AI', 'PT-1: a transmitter has neither I/O type nor address']
    >>> said("WIR06", [{"tag": "PT-1", "I/O type": "AI"}, {"tag": "PG-2", "I/O type": ""}])
    []
    """
    kind = installed.kind
    if kind is None:
        return Unchecked("kind")
    record = installed.record
    if kind.wired == "no":
        row = next((row for row in installed.channels if has_io(row)), None)
        if row is None:
            lost = [title for field, title in _IO if field in record.unread]
            return Unchecked(*lost) if lost else None
        io = row.io_type or row.io_address or ""
        return Found(
            values={"kind": kind.with_article, "io": io},
            cells=tuple(cell for field, _ in _IO for cell in row.cells(field)),
            fields=("io_type", "io_address", "kind"),
            message="{kind}, which is local, has I/O: {io}",
            found=io,
            wanted="no I/O, or a kind that has a signal",
        )
    if own_channels(installed):
        return None
    elsewhere = channels(installed, plant)
    if elsewhere and not plant.has_column("io_type", "io_address"):
        # The index leaves channels to the other lists altogether.
        return None
    if {"io_type", "io_address"} & record.unread:
        return Unchecked("I/O type or I/O address")
    if _is_on_a_bus(installed) and not plant.has_column("io_type", "io_address"):
        return NotApplicable("a link has no channel of its own")
    if _is_wireless(installed):
        return NotApplicable("a wireless device is wired to nothing")
    if _leaves_it_to_another(installed, plant):
        return None
    if kind is Kind.ELEMENT and not elsewhere:
        # An element that goes nowhere is found as such, and one that is read on the spot needs no channel.
        verdict = alone(installed, plant)
        return verdict if isinstance(verdict, Unchecked) else None
    if SHARED_CELL in (record.blanks.get("io_type"), record.blanks.get("io_address")):
        return Unchecked("I/O address")
    reason = record.blanks.get("io_type") or record.blanks.get("io_address") or ""
    return Found(
        values={"kind": kind.with_article},
        fields=("io_type", "io_address"),
        found=f"blank ({reason})" if reason else "blank",
        wanted="I/O type and address",
    )


_IO: Final = (("io_type", "I/O type"), ("io_address", "I/O address"))
