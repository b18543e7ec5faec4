"""WIR: channels and wires."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Iterator

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.record import Instrument
from loops.plant import Plant, name_key
from loops.wiring import transmitter_of
from validation.finding import Found, Severity, Unchecked, Verdict
from validation.rule import Subject, rule
from validation.rules.electrical import signal_class

_VALVES = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})
_DRIVES = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID})
_SHOWS = frozenset({Kind.SOFT_FUNCTION, Kind.INDICATOR})
_LINK = re.compile(
    r"bus|modbus|profinet|\bnet\b|^net[-_.]|ethernet|serial|segment|\bseg\b|\bff\b|\bpa\b|rs-?485|tcp",
    re.IGNORECASE,
)
_CHANNEL = re.compile(r"(?:ch(?:annel)?[\s.:-]*)?[0-9]{1,3}", re.IGNORECASE)


def _address(row: Instrument) -> tuple[str, str, str] | None:
    """Return what makes an address one place: the address, and the card where it is only a channel."""
    if not row.io_address:
        return None
    channel = _CHANNEL.fullmatch(row.io_address.strip()) is not None
    return name_key(row.io_address), name_key(row.card) if channel else "", row.system or ""


def _is_link(row: Instrument) -> bool:
    return bool(
        signal_class(row.signal) == "bus"
        or _LINK.search(row.io_address or "")
        or _LINK.search(row.io_type or "")
    )


def _on_one_address(plant: Plant) -> Iterator[tuple[Installed, ...]]:
    at: dict[tuple[str, str, str], list[tuple[Installed, Instrument]]] = defaultdict(list)
    for each in plant.live:
        for row in each.signals:
            address = _address(row)
            if address is not None:
                at[address].append((each, row))
    for signals in at.values():
        if len(signals) > 1:
            members = tuple({id(each): each for each, _ in signals}.values())
            if len(members) > 1 and not _may_share(signals):
                yield members


def _may_share(signals: list[tuple[Installed, Instrument]]) -> bool:
    """Whether what stands at one address is one signal after all, or a link that many may share."""
    if all(_is_link(row) for _, row in signals):
        return True
    members = [each for each, _ in signals]
    loops = {name_key(each.loop) for each in members if each.loop}
    if len(loops) != 1 or any(not each.loop for each in members):
        return False
    kinds = {each.kind for each in members}
    # Two valves of one split range stand on one output.
    if kinds <= _VALVES | _DRIVES and all(
        (row.io_type or "AO").casefold().startswith("ao") for _, row in signals
    ):
        return True
    # A valve and what drives it, an element and its transmitter, a signal and what shows it: one signal each.
    carriers = [each for each in members if each.kind not in _SHOWS]
    if len(carriers) <= 1:
        return True
    if kinds - _SHOWS <= _VALVES | _DRIVES and len([each for each in carriers if each.kind in _DRIVES]) <= 1:
        return len([each for each in carriers if each.kind in _VALVES]) <= 1
    elements = [each for each in carriers if each.kind is Kind.ELEMENT]
    others = [each for each in carriers if each.kind is not Kind.ELEMENT]
    return bool(elements) and len(others) == 1 and others[0].kind in (Kind.TRANSMITTER, Kind.ANALYSER)


def _has_channel(installed: Installed, plant: Plant) -> bool:
    return (
        installed.kind is None
        or installed.kind.wired in ("yes", "own", "element")
        or any(row.io_address for row in installed.signals)
    )


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

    places: dict[tuple[str, str, str], list[Instrument]] = defaultdict(list)
    owners: dict[tuple[str, str, str], set[int]] = defaultdict(set)
    for each in group:
        for row in each.signals:
            address = _address(row)
            if address is not None:
                places[address].append(row)
                owners[address].add(id(each))
    shared = [rows for address, rows in places.items() if len(owners[address]) > 1]
    address = ", ".join(dict.fromkeys(rows[0].io_address or "" for rows in shared))
    return Found(
        values={"tags": group_name(group), "address": address},
        fields=("io_address",),
        found=address,
        wanted="an address each",
        cells=tuple(cell for rows in shared for row in rows for cell in row.cells("io_address")),
    )


def _columns_absent(plant: Plant) -> Verdict:
    if plant.has_column("io_type", "io_address"):
        return None
    count = sum(1 for each in plant.live if each.kind is not None and each.kind.wired == "yes")
    if not count:
        return None
    return Found(
        values={"count": count},
        fields=("io_type", "io_address"),
        message="no sheet has a column for I/O type or address; {count} instruments are wired to the system",
        found="no such column",
        wanted="I/O type and address",
    )


def _wired_or_local(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if kind is None or installed.equipment_tag or kind is Kind.SOFT_FUNCTION:
        return False
    return kind.wired in ("yes", "element") or (kind.wired == "no" and kind.process)


@rule(
    "WIR06",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_wired_or_local,
    whole=_columns_absent,
    message="a {kind} has neither I/O type nor address",
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
    assert kind is not None
    io = next(
        (row.io_type or row.io_address for row in installed.signals if row.io_type or row.io_address), None
    )
    if kind.wired == "no":
        if io is None:
            return None
        return Found(
            values={"kind": kind.value, "io": io},
            fields=("io_type", "io_address", "kind"),
            message="a {kind}, which is local, has I/O: {io}",
            found=io,
            wanted="no I/O, or a kind that has a signal",
        )
    if io is not None or any(_is_link(row) or row.card for row in installed.signals):
        return None
    if {"io_type", "io_address"} & installed.record.unread:
        return Unchecked("I/O type")
    loop = plant.loop_of(installed)
    members = loop.members if loop is not None else ()
    if kind is Kind.ELEMENT:
        if transmitter_of(installed, members) is not None:
            return None
        # An element that goes nowhere is found as such.
        return None
    if kind in _DRIVES and any(
        each.kind in _VALVES and any(row.io_type or row.io_address for row in each.signals)
        for each in members
    ):
        return None
    reasons = installed.record.blanks
    reason = reasons.get("io_type") or reasons.get("io_address") or ""
    return Found(
        values={"kind": kind.value},
        fields=("io_type", "io_address"),
        found=f"blank ({reason})" if reason else "blank",
        wanted="I/O type and address",
    )
