"""What a circuit is given: supply, receiver and cable, from the loop list, the device's row and the catalogues."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import replace
from functools import lru_cache
from types import MappingProxyType
from typing import TYPE_CHECKING, Any, Final, NamedTuple

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.origin import Cell, Origin
from instruments.record import DeviceType, Instrument
from loops.cable import read_conductor_size
from loops.circuit import Given, Segment
from loops.record import Cable, CableType, LoopRow

if TYPE_CHECKING:
    from loops.plant import Plant


# -------------------------------------------------------------------------------------------------------- supply

_FIGURE: Final = r"(\d{1,3}(?:[.,]\d{1,2})?)"
_CURRENT: Final = r"(ac|dc|d\.c\.|a\.c\.|=|~)"
_VOLTS: Final = re.compile(rf"(?<!\d)(?<!\d[.,]){_FIGURE} ?v(?![a-z]*a\b)(?:olts?)? ?{_CURRENT}?", re.IGNORECASE)
_BETWEEN: Final = re.compile(
    rf"(?<![\d.,]){_FIGURE} ?(?:v ?(?:dc|ac)?)? ?(?:-|\u2013|to|bis|\.{{2,3}}|\u2026) ?{_FIGURE} ?v", re.IGNORECASE
)
_CURRENT_FIRST: Final = re.compile(rf"\b(ac|dc) ?{_FIGURE} ?v?\b", re.IGNORECASE)
_EITHER_WAY: Final = re.compile(r"(?:\u00b1|\+ ?/ ?-|\+-) ?(\d{1,2}(?:[.,]\d)?) ?%")
_EACH_WAY: Final = re.compile(r"([-+]) ?(\d{1,2}(?:[.,]\d)?) ?%? ?/ ?([-+]) ?(\d{1,2}(?:[.,]\d)?) ?%")
# What one supply spans: 24 V -15 % +20 % (IEC 61131-2, from memory) is 1.4 to one. A transmitter that takes
# 10.5 to 42 V says what it bears, not what it gets.
_WIDEST_SUPPLY: Final = 1.7
_LARGEST_LOOP_SUPPLY_V: Final = 100.0


class SupplyWords(NamedTuple):
    """What the text of a supply states: volts at their lowest, nominal and highest, and whether they are dc."""

    min_v: float | None
    nominal_v: float | None
    max_v: float | None
    dc: bool | None


def supply_words(text: str | None) -> SupplyWords | None:
    """Read the volts that the text of a supply states; None where it states none.

    >>> supply_words("24VDC"), supply_words("loop")
    (SupplyWords(min_v=None, nominal_v=24.0, max_v=None, dc=True), None)
    >>> supply_words("24 V DC +/-10 %")
    SupplyWords(min_v=21.6, nominal_v=24.0, max_v=26.4, dc=True)
    >>> supply_words("21.5-27 VDC"), supply_words("10.5-42 V DC")
    (SupplyWords(min_v=21.5, nominal_v=None, max_v=27.0, dc=True), None)
    """
    return _supply_words(text) if text else None


@lru_cache(maxsize=4096)
def _supply_words(text: str) -> SupplyWords | None:
    words = " ".join(text[:120].split())
    found = _VOLTS.search(words)
    if found is None:
        first = _CURRENT_FIRST.search(words)
        return None if first is None else SupplyWords(None, _number(first[2]), None, first[1].casefold() == "dc")
    first = _CURRENT_FIRST.search(words)
    written = (found[2] or (first[1] if first else "")).casefold().replace(".", "")
    dc = {"": None, "dc": True, "=": True, "ac": False, "~": False}[written]
    span = _BETWEEN.search(words)
    if span is not None:
        low, high = sorted((_number(span[1]), _number(span[2])))
        return SupplyWords(low, None, high, dc) if 0.0 < high <= _WIDEST_SUPPLY * low else None
    nominal = _number(found[1])
    around = _EITHER_WAY.search(words)
    if around is not None:
        percent = _number(around[1])
        return SupplyWords(_off(nominal, -percent), nominal, _off(nominal, percent), dc)
    sides = _EACH_WAY.search(words)
    if sides is not None and sides[1] != sides[3]:
        down, up = (sides[2], sides[4]) if sides[1] == "-" else (sides[4], sides[2])
        return SupplyWords(_off(nominal, -_number(down)), nominal, _off(nominal, _number(up)), dc)
    return SupplyWords(None, nominal, None, dc)


def volts_in(text: str | None) -> tuple[float, bool | None] | None:
    """Return the volts that a supply's text states, and whether they are dc; None where it states none.

    >>> volts_in("24VDC"), volts_in("230 V AC"), volts_in("loop")
    ((24.0, True), (230.0, False), None)
    """
    found = supply_words(text)
    if found is None:
        return None
    volts = found.nominal_v if found.nominal_v is not None else found.max_v
    return None if volts is None else (volts, found.dc)


def _number(text: str) -> float:
    return float(text.replace(",", "."))


def _off(nominal: float, percent: float) -> float:
    return round(nominal * (1.0 + percent / 100.0), 9)


class Supply(NamedTuple):
    """What is stated of a circuit's supply."""

    min_v: Given | None = None
    nominal_v: Given | None = None
    max_v: Given | None = None


def supply_of(
    row: LoopRow | None, signal: Instrument, named: str | None, *, card: DeviceType | None, plant: Plant
) -> Supply:
    """Return a circuit's supply: of the loop list; what it lacks, of the device's row; else its card's.

    A nominal figure that contradicts the ends stated elsewhere belongs to another supply and is left out.
    """
    supply = Supply()
    if row is not None:
        supply = Supply(
            _given(row.supply_min_v, "loop row", row, "supply_min_v"),
            _given(row.supply_nominal_v, "loop row", row, "supply_nominal_v"),
            _given(row.supply_max_v, "loop row", row, "supply_max_v"),
        )
        if None not in supply:
            return supply
    words = supply_words(named)
    if words is not None:
        if words.dc is not False and (words.nominal_v or words.max_v or 0.0) < _LARGEST_LOOP_SUPPLY_V:
            cells = signal.cells("power_supply")
            supply = _filled(
                supply,
                *(
                    None if volts is None else Given(number=volts, source="row", cells=cells)
                    for volts in (words.min_v, words.nominal_v, words.max_v)
                ),
            )
    else:
        entry = plant.named_type(named)
        if entry is not None:
            supply = _filled(supply, None, _given(entry.nominal_v, "power supply", entry, "nominal_v"), None)
    if supply == Supply() and card is not None and card.source_or_sink != "sink":
        supply = Supply(nominal_v=_given(card.nominal_v, "card", card, "nominal_v"))
    return supply


def _filled(supply: Supply, low: Given | None, nominal: Given | None, high: Given | None) -> Supply:
    if nominal is not None and not _goes_with(nominal.number, supply):
        return supply
    if supply.nominal_v is not None and nominal is not None and nominal.number != supply.nominal_v.number:
        return supply
    return Supply(supply.min_v or low, supply.nominal_v or nominal, supply.max_v or high)


def _goes_with(nominal_v: float, supply: Supply) -> bool:
    return (supply.min_v is None or supply.min_v.number <= nominal_v) and (
        supply.max_v is None or nominal_v <= supply.max_v.number
    )


# ------------------------------------------------------------------------------------------------------ receiver


def receivers_of(
    row: LoopRow | None,
    signal: Instrument,
    record: Instrument,
    *,
    card: DeviceType | None,
    others: Iterable[Installed] = (),
) -> tuple[Given, ...]:
    """Return what is stated to lie across a circuit's signal.

    Range resistor, receiver, the card's own input, and the inputs of other devices on the circuit: a
    recorder, an indicator that reads volts.
    """
    found: list[Given | None] = []
    if row is not None:
        found.append(_given(row.range_resistor_ohm, "loop row", row, "range_resistor_ohm"))
    owner = signal if signal.receiver_ohm is not None else record
    found.append(_given(owner.receiver_ohm, "row", owner, "receiver_ohm"))
    if card is not None:
        found.append(_given(card.input_ohm, "card", card, "input_ohm"))
    for other in others:
        kind = other.type
        if kind is not None and kind.input_ohm is not None:
            cells = kind.cells("input_ohm")
            found.append(Given(number=kind.input_ohm, source="device", cells=cells, item=other.name))
    return tuple(each for each in found if each is not None)


VOLTAGE_INPUT_OHM: Final = 1000.0
"""From here on an input reads the volts across a range resistor; below, it is one (common practice)."""


def in_parallel(receivers: Sequence[Given]) -> Given | None:
    """Return the resistance that receivers of one signal come to; None where none is stated.

    Inputs that read volts lie across the range resistor. Of two that are range resistors themselves, the
    first is taken: two papers speak of one resistor, and the loop's own is nearer to it than a catalogue. The
    input of another device is always one more.

    >>> [round(in_parallel([Given(number=250.0, source="loop row"), Given(number=ohm, source="card")]).number, 3)
    ...  for ohm in (10000.0, 250.0)]
    [243.902, 250.0]
    """
    low = next((each for each in receivers if each.number < VOLTAGE_INPUT_OHM and each.source != "device"), None)
    across = [each for each in receivers if each.number >= VOLTAGE_INPUT_OHM or each.source == "device"]
    if not across or (low is not None and low.number <= 0.0):
        return low
    dead = next((each for each in across if each.number <= 0.0), None)
    if dead is not None:
        return dead
    together = [*([low] if low is not None else []), *across]
    return Given(
        number=1.0 / sum(1.0 / each.number for each in together),
        source=together[0].source,
        cells=tuple(cell for each in together for cell in each.cells),
    )


# --------------------------------------------------------------------------------------------------------- cable

_NAMES: Final = re.compile(r"[,;\n]")
_LOOSER: Final = re.compile(r" ?(?:\+|&| / | and | und ) ?")
_BOX: Final = re.compile(r"^(?:[a-z0-9]{1,4}[-_./ ])?jb|junction|klemmenkasten", re.IGNORECASE)
_MOST_CABLES: Final = 6


class CableRun(NamedTuple):
    """A circuit's cable: its length, its type, its conductor, and its pieces where they differ."""

    length_m: Given | None
    type: CableType | None
    type_named: str | None
    conductor: str | None
    segments: tuple[Segment, ...]


def cable_run(
    row: LoopRow | None, signal: Instrument, record: Instrument, *, named: Iterable[str], plant: Plant
) -> CableRun:
    """Return a circuit's cable.

    The loop's length; if blank the row's; if blank the sum of its cables, on to the end of the run where
    they end at a junction box: never added across sheets. The loop's type; if blank the row's; if blank
    its cables'.

    Parameters
    ----------
    row, signal, record
        The circuit's row of the loop list, the device's row for this signal, and the device's whole record.
    named
        The cables that the terminations of the circuit name.
    plant
        The plant.
    """
    type_named = (row.cable_type if row else None) or signal.cable_type or record.cable_type
    length = _given(row.cable_length_m, "loop row", row, "cable_length_m") if row is not None else None
    if length is None:
        owner = signal if signal.cable_length_m is not None else record
        length = _given(owner.cable_length_m, "row", owner, "cable_length_m")
    cables: tuple[Cable, ...] | None = ()
    if plant.cables and (length is None or type_named is None):
        named_cables = _cables(signal.cable or record.cable, named, plant)
        if named_cables:
            cables = _to_the_end(named_cables, signal.junction_box or record.junction_box, plant)
            if cables is None and length is not None:
                cables = named_cables
    if length is None and cables and all(each.length_m is not None for each in cables):
        length = Given(
            number=sum(each.length_m or 0.0 for each in cables),
            source="cables",
            cells=tuple(cell for each in cables for cell in each.cells("length_m")),
        )
    segments: tuple[Segment, ...] = ()
    if type_named is None and cables:
        types = list(dict.fromkeys(each.type for each in cables))
        if len(types) == 1:
            type_named = types[0]
        elif length is not None and length.source == "cables":
            segments = tuple(
                Segment(
                    name=each.number or "",
                    length_m=each.length_m or 0.0,
                    type=_listed_type(each.type, plant),
                    conductor=_own_size(each.type),
                )
                for each in cables
            )
    found = _with_figures_of_row(_listed_type(type_named, plant), type_named, signal, record)
    conductor = signal.conductor or record.conductor or (found.conductor if found else None) or _own_size(type_named)
    return CableRun(length, found, type_named, conductor, segments)


_CABLE_FIGURES: Final = ("ohm_per_km", "capacitance_pf_per_m", "inductance_uh_per_m")


def _with_figures_of_row(
    listed: CableType | None, named: str | None, signal: Instrument, record: Instrument
) -> CableType | None:
    """Return a circuit's cable type with what the row states of its cable, as a row's limits are its device's."""
    stated: dict[str, float] = {}
    elsewhere: dict[str, Origin] = {}
    for name in _CABLE_FIGURES:
        owner = signal if getattr(signal, name) is not None else record
        figure = getattr(owner, name)
        if figure is not None:
            stated[name] = figure
            origin = owner.elsewhere.get(name) or owner.origin
            if origin is not None:
                elsewhere[name] = origin
    if not stated:
        return listed
    base = listed if listed is not None else CableType(code=named or f"on the row of {record.tag or 'no tag'}")
    return replace(base, **stated, elsewhere=MappingProxyType({**base.elsewhere, **elsewhere}))  # type: ignore[arg-type]


def listed_cables(text: str | None, *, box: str | None, plant: Plant) -> tuple[Cable, ...]:
    """Return the cables of the schedule that a cell names, in order, on to the end of the run where that can be told.

    Parameters
    ----------
    text
        What the row's cell says.
    box
        The junction box of the row.
    plant
        The plant.
    """
    found = _cables(text, (), plant) if plant.cables else None
    return (_to_the_end(found, box, plant) or found) if found else ()


def _own_size(text: str | None) -> str | None:
    """Return a cable type's text where it is a conductor size itself, such as 1x2x1.5."""
    return text if text and read_conductor_size(text) is not None else None


def _listed_type(text: str | None, plant: Plant) -> CableType | None:
    key = _key(text)
    return None if not key or key in plant.cable_types_twice else plant.cable_types.get(key)


def _cables(text: str | None, named: Iterable[str], plant: Plant) -> tuple[Cable, ...] | None:
    """Return the cables of the schedule that a cell and the terminations name; None where one is not listed."""
    found: dict[str, Cable] = {}
    whole = plant.cables.get(_key(text)) if text else None
    names = [text] if text and whole is not None else _NAMES.split(text or "")
    for name in names:
        parts = [name] if _key(name) in plant.cables else _LOOSER.split(name)
        for part in parts:
            if not part.strip():
                continue
            cable = plant.cables.get(_key(part))
            if cable is None or _key(part) in plant.cables_twice:
                return None
            found[_key(part)] = cable
    for name in named:
        cable = plant.cables.get(_key(name))
        if cable is not None and _key(name) not in plant.cables_twice:
            found[_key(name)] = cable
    return tuple(found.values())


def _to_the_end(cables: tuple[Cable, ...], box: str | None, plant: Plant) -> tuple[Cable, ...] | None:
    """Follow a run from the junction box where its cables end; None where it cannot be told how it goes on."""
    at: dict[str, list[Cable]] = plant.once("cables by their ends", _by_end)
    run = list(cables)
    for _ in range(_MOST_CABLES):
        ends: dict[str, int] = {}
        for each in run:
            for item in (each.from_item, each.to_item):
                if item:
                    ends[_key(item)] = ends.get(_key(item), 0) + 1
        open_ends = [
            item
            for each in run
            for item in (each.from_item, each.to_item)
            if item and ends[_key(item)] == 1 and is_box(item, box, plant)
        ]
        if not open_ends:
            # Where others say where they go and one does not, it may go on from a box.
            blank = any(each.from_item and not each.to_item for each in run)
            return None if blank and plant.once("cables say where they go", _say_where_they_go) else tuple(run)
        here = [each for each in at.get(_key(open_ends[0]), ()) if each not in run]
        # A schedule goes from the field to the system; one that goes the other way says what leads to the box.
        onward = [each for each in here if _key(each.from_item) == _key(open_ends[0])] or [
            each for each in here if not plant.by_tag(each.from_item or "")
        ]
        alike = {(each.length_m, each.type) for each in onward}
        if len(alike) != 1:
            return None
        run.append(onward[0])
    return None


def _say_where_they_go(plant: Plant) -> bool:
    return any(cable.to_item for cable in plant.cables.values())


def _by_end(plant: Plant) -> dict[str, list[Cable]]:
    found: dict[str, list[Cable]] = {}
    for cable in plant.cables.values():
        for item in (cable.from_item, cable.to_item):
            if item:
                found.setdefault(_key(item), []).append(cable)
    return found


def is_box(item: str, box: str | None, plant: Plant) -> bool:
    """Whether an item at a cable's end is a junction box: the row's, one of the index, or one by its name."""
    if box and _key(item) == _key(box):
        return True
    known = plant.by_tag(item)
    if known:
        return any(each.kind is Kind.JUNCTION_BOX for each in known)
    return _BOX.search(item) is not None


def _given(number: float | None, source: str, owner: Any, name: str) -> Given | None:
    if number is None:
        return None
    cells: tuple[Cell, ...] = owner.cells(name)
    return Given(number=number, source=source, cells=cells)


def _key(text: str | None) -> str:
    return "".join(text.split()).casefold() if text else ""
