"""ISC: what an intrinsically safe circuit is made of: its source, its devices, its level, and simple apparatus.

Ferrule accepts nothing: screening aid - requires review by a competent person.
"""

from __future__ import annotations

from collections.abc import Mapping
from types import MappingProxyType
from typing import Final

from instruments.area import Area
from instruments.certificate import read_certificates
from instruments.epl import LEVELS
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.marking_entry import T_CODE_C
from instruments.origin import Cell
from instruments.protection import is_simple_apparatus, signal_of
from instruments.quantity import format_number
from instruments.signal_words import signal_class
from loops.circuit import Circuit
from loops.intrinsic import ExSource, Intrinsic, Item, Level, classified_areas, intrinsic, needed_level
from loops.plant import Plant
from loops.wiring import has_io
from validation.finding import Clear, Found, Review, Severity, Unchecked, Verdict
from validation.hazardous_place import has_marking_column
from validation.rule import Subject, rule
from validation.rules.entity_parameters import barrier_cells, is_ex_i
from validation.source_mending import source_fixes

_FROM_MEMORY: Final = "from memory; screening aid - requires review by a competent person"


# ------------------------------------------------------------------------------------------- the source, the others


def _may_rely_on_energy(circuit: Circuit, plant: Plant) -> bool:
    of = intrinsic(circuit, plant)
    if of.concerns is False:
        return False
    return of.is_ex_i or any(item.how not in ("other", "pending", "unmarked") for item in of.items if item.areas != ())


@rule(
    "ISC01",
    severity=Severity.DANGER,
    on=Subject.CIRCUIT,
    applies=_may_rely_on_energy,
    message="{devices}: no Ex i source on the circuit ({reason})",
    basis=f"IEC 60079-14:2013 16.2 and NEC Article 504 ({_FROM_MEMORY}); one item breaks it: common practice",
)
def no_source_or_broken(circuit: Circuit, plant: Plant) -> Verdict:
    """A device that relies on intrinsic safety without an Ex i source, or an item that breaks an Ex i circuit.

    Why it matters: intrinsic safety is of the whole circuit. Without a barrier or isolator the control system may
    put any energy on the wires; and one item that is neither Ex i nor simple apparatus undoes it for all the others.

    What to do: name the barrier, isolator or Ex i card; or take the item off the circuit, or one that is Ex i. A
    device with several protections may be used by another of them: somebody says which.

    >>> from validation.example import said
    >>> rows = [{"tag": "PT-101", "Ex marking": "Ex ia IIC T4 Ga", "area classification": "Zone 1 IIC T4",
    ...          "barrier": "", "card": "AI8", "I/O type": "AI", "signal": "4-20 mA"},
    ...         {"tag": "PT-102", "Ex marking": "Ex ia IIC T4 Ga", "area classification": "Zone 1 IIC T4",
    ...          "barrier": "ZB", "card": "AI8", "I/O type": "AI", "signal": "4-20 mA"}]
    >>> types = [{"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC"}, {"code": "AI8", "kind": "card"}]
    >>> said("ISC01", rows, types=types)
    ['P-101: PT-101: no Ex i source on the circuit (Ex ia IIC T4 Ga)']
    """
    of = intrinsic(circuit, plant)
    if of.concerns is None:
        return Unchecked("area")
    found: list[Found | Review] = []
    missing: dict[str, None] = {}
    if of.is_ex_i:
        for item in of.items:
            broken = _breaks(item, of, circuit, plant)
            if broken is not None:
                found.append(broken)
            elif item.how in ("unknown", "pending", "unmarked"):
                missing[item.missing] = None
    if not of.sources:
        source = _without_source(of, circuit, plant)
        if isinstance(source, Unchecked):
            missing.update(dict.fromkeys(source.fields))
        elif source is not None:
            found.append(source)
    if found:
        return found
    return Unchecked(*missing) if missing else None


def _breaks(item: Item, of: Intrinsic, circuit: Circuit, plant: Plant) -> Found | Review | None:
    """Return that an item is neither Ex i nor simple apparatus; None where it is, or nothing tells."""
    if item.how not in ("other", "unmarked"):
        return None
    if item.how == "unmarked" and item.blank:
        if not has_marking_column(plant):
            return None  # found once, on the whole list
        # Its blank marking is found by its own rule: here it counts where it undoes what others rely on.
        others = any(each is not item and each.how in ("intrinsically safe", "several", "simple") for each in of.items)
        if item.classified and not others:
            return None
        if item.areas is None:
            return None
    nonincendive = item.installed.record.nonincendive is True and _in_division(item)
    installed = item.installed
    said = "is not marked Ex i" if item.how == "unmarked" else f"is {item.protection}"
    message = "{device} {said}, neither Ex i nor simple apparatus, on an Ex i circuit: {because}"
    if nonincendive:
        message += "; stated to be nonincendive, which somebody has to judge"
    cells = installed.cells("type.ex_marking") if installed.record.ex_marking is None else installed.cells("ex_marking")
    return (Review if nonincendive else Found)(
        values={"device": item.name, "said": said, "because": of.because},
        message=message,
        fields=("ex_marking",),
        part=item.name,
        found=item.protection,
        wanted="Ex i, or simple apparatus",
        cells=(*cells, *installed.cells("device_type"), *barrier_cells(circuit)),
    )


def _in_division(item: Item) -> bool:
    return any(area.system == "division" for area in item.areas or ())


def _without_source(of: Intrinsic, circuit: Circuit, plant: Plant) -> Found | Review | Unchecked | None:
    fed = [item for item in of.items if not _has_its_own_source(item, of)]
    relying = [item for item in fed if item.relies]
    several = [item for item in fed if item.classified and item.how == "several"]
    unknown = [item for item in fed if item.classified and item.how == "unknown"]
    if not relying and not several:
        if unknown:
            return Unchecked(*dict.fromkeys(item.missing for item in unknown))
        return Unchecked(of.source_missing) if of.is_ex_i and of.source_missing else None
    if circuit.device.kind is Kind.ELEMENT and circuit.row is None and not has_io(circuit.signal_row):
        # An element that is wired nowhere is found as such.
        return Unchecked("I/O address")
    if of.source_missing:
        return Unchecked(of.source_missing)
    nonincendive = relying and all(item.installed.record.nonincendive and _in_division(item) for item in relying)
    meant = relying or several
    names = ", ".join(item.name for item in meant)
    reason = ", ".join(dict.fromkeys(item.protection for item in meant))
    if relying and not nonincendive:
        return Found(
            values={"devices": names, "reason": reason},
            fields=("barrier",),
            found="no Ex i source",
            wanted="an Ex i source",
            fixes=source_fixes(circuit, plant),
            cells=tuple(cell for item in meant for cell in _protection_cells(item)),
        )
    message = "{devices}: {reason}, and no Ex i source on the circuit: "
    message += (
        "nonincendive wiring, which somebody has to judge" if relying else "by which of its protections is it used?"
    )
    return Review(
        values={"devices": names, "reason": reason},
        message=message,
        fields=("barrier", "protection"),
        found="no Ex i source",
        wanted="an Ex i source, or the protection that is used",
        cells=tuple(cell for item in meant for cell in _protection_cells(item)),
    )


def _has_its_own_source(item: Item, of: Intrinsic) -> bool:
    """Whether an element hangs on a transmitter whose bracketed output feeds it."""
    if not item.at_transmitter:
        return False
    host = of.circuit.device.marking
    return host is not None and any(set(each.protections) & {"ia", "ib", "ic"} for each in host.outputs)


def _protection_cells(item: Item) -> tuple[Cell, ...]:
    installed = item.installed
    if item.how == "simple":
        return installed.cells("simple_apparatus")
    return installed.cells("ex_marking" if installed.record.ex_marking is not None else "type.ex_marking")


# -------------------------------------------------------------------------------------------------------- the level


@rule(
    "ISC09",
    severity=Severity.DANGER,
    on=Subject.CIRCUIT,
    applies=is_ex_i,
    message="the system is i{level} ({part}); {place} of {device} needs i{needed}",
    basis=f"IEC 60079-25:2020 and IEC 60079-14:2013 5.4; NEC 501.5 for Division 1 ({_FROM_MEMORY})",
)
def level_too_low(circuit: Circuit, plant: Plant) -> Verdict:
    """A system whose level of protection is below what the zone needs.

    Why it matters: the level of the whole is the lowest of its parts: a device for Zone 0 on an ib source is in a
    system ib, which is for Zone 1.

    What to do: take a source, or a device, of the level: ia for Zones 0 and 20, ib for 1 and 21, ic for 2 and 22.

    >>> from validation.example import said
    >>> types = [{"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ib Gb] IIC", "Uo V": "28"}]
    >>> tag = {"tag": "LT-101", "Ex marking": "Ex ia IIC T4 Ga", "area classification": "Zone 0 IIC T4",
    ...        "barrier": "ZB", "I/O type": "AI", "signal": "4-20 mA"}
    >>> said("ISC09", [tag], types=types)
    ['L-101: the system is ib (ZB); Zone 0 of LT-101 needs ia']
    >>> said("ISC09", [{**tag, "area classification": "Zone 1 IIC T4"}], types=types)
    []
    """
    of = intrinsic(circuit, plant)
    if of.concerns is None:
        return Unchecked("area")
    parts: list[tuple[Level | None, str, ExSource | Item]] = [
        (source.level, source.name, source) for source in of.sources
    ]
    parts += [(item.level, item.name, item) for item in of.items if item.how in ("intrinsically safe", "several")]
    places = [(item, needed_level(item)) for item in of.items if item.classified]
    needs = [(item, needed) for item, needed in places if needed is not None]
    lowest = max((part for part in parts if part[0] is not None), key=_rank, default=None)
    if lowest is not None and lowest[0] is not None and needs:
        item, (level, where) = min(needs, key=lambda each: LEVELS.index(each[1][0]))
        if LEVELS.index(lowest[0]) > LEVELS.index(level):
            return Found(
                values={
                    "level": lowest[0],
                    "part": ", ".join(name for found, name, _ in parts if found == lowest[0]),
                    "place": where,
                    "device": item.name,
                    "needed": level,
                },
                fields=("area.zone",),
                found=f"i{lowest[0]}",
                wanted=f"i{level}",
                working=", ".join(f"{name} {f'i{found}' if found else 'not marked'}" for found, name, _ in parts),
                fixes=source_fixes(circuit, plant) if any(lowest[1] == each.name for each in of.sources) else (),
                cells=(*_level_cells(lowest[2]), *item.installed.cells("area"), *barrier_cells(circuit)),
            )
    missing = [] if of.sources else [of.source_missing or "barrier"]
    missing += ["Ex marking"] if any(found is None for found, _, _ in parts) else []
    missing += [item.missing for item in of.items if item.how in ("unknown", "pending", "unmarked")]
    missing += ["area zone"] if any(needed is None for _, needed in places) else []
    dusty = next((source for source in of.sources if source.for_gas_only and _dust(of)), None)
    if dusty is not None:
        return _for_gas_only(dusty, circuit)
    return Unchecked(*dict.fromkeys(missing)) if missing else None


def _rank(part: tuple[Level | None, str, ExSource | Item]) -> int:
    return LEVELS.index(part[0]) if part[0] is not None else -1


def _level_cells(part: ExSource | Item) -> tuple[Cell, ...]:
    return _protection_cells(part) if isinstance(part, Item) else part.entry.cells("ex_marking")


def _dust(of: Intrinsic) -> bool:
    return any("dust" in area.sides for item in of.items for area in item.areas or ())


def _for_gas_only(source: ExSource, circuit: Circuit) -> Review:
    return Review(
        values={"source": source.name, "marking": source.entry.ex_marking},
        message="{source} is marked for circuits in gas, not in dust: {marking}",
        fields=("barrier",),
        found=source.entry.ex_marking or "",
        wanted="a marking for dust",
        cells=(*source.entry.cells("ex_marking"), *barrier_cells(circuit)),
    )


@rule(
    "ISC10",
    severity=Severity.DANGER,
    on=Subject.CIRCUIT,
    applies=is_ex_i,
    message="{count} sources on one circuit: {sources}",
    basis=f"IEC 60079-14:2013 Annexes A and B ({_FROM_MEMORY})",
)
def several_sources(circuit: Circuit, plant: Plant) -> Verdict:
    """More than one source on an Ex i circuit.

    Why it matters: voltages add in series and currents in parallel; the Co and Lo of each alone no longer hold, and
    the whole is at most ib though every source be ia.

    What to do: a competent person works the combination out from the tables of IEC 60079-11, or one source is taken
    away. Simple apparatus is no source.

    >>> from validation.example import said
    >>> types = [{"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "Uo V": "28"},
    ...          {"code": "AI8", "kind": "card", "Ex marking": "[Ex ia Ga] IIC", "Uo V": "21"}]
    >>> tag = {"tag": "PT-101", "Ex marking": "Ex ia IIC T4 Ga", "area classification": "Zone 1 IIC T4",
    ...        "barrier": "ZB", "card": "AI8", "I/O type": "AI", "signal": "4-20 mA"}
    >>> said("ISC10", [tag], types=types)
    ['review: P-101: 2 sources on one circuit: ZB (28 V), AI8 (21 V)']
    >>> said("ISC10", [{**tag, "card": ""}], types=types)
    []
    """
    of = intrinsic(circuit, plant)
    if of.concerns is None:
        return Unchecked("area")
    if len(of.sources) < 2:
        missing = [of.source_missing] if of.source_missing else []
        # Whether it feeds this circuit or another its marking would say.
        missing += [item.missing for item in of.items if item.missing and _states_volts(item)]
        return Unchecked(*dict.fromkeys(missing)) if missing else None
    return Review(
        values={"count": len(of.sources), "sources": ", ".join(map(_with_volts, of.sources))},
        fields=("barrier",),
        found=f"{len(of.sources)} sources",
        wanted="one, or the combination worked out",
        cells=tuple(cell for source in of.sources for cell in source.entry.cells("uo_v")),
    )


def _states_volts(item: Item) -> bool:
    return item.installed.type is not None and bool(item.installed.type.uo_v)


def _with_volts(source: ExSource) -> str:
    volts = source.entry.uo_v
    return f"{source.name} ({format_number(volts)} V)" if volts is not None else source.name


# -------------------------------------------------------------------------------------------------------- the earth

# Marked Ex i apparatus holds 500 V against earth, or its certificate ends in X for it.
_HOLDS: Final = "Ex i apparatus is taken as insulated from earth where nothing else is stated (500 V, from memory)"


def _on_zener_barrier(circuit: Circuit, plant: Plant) -> bool:
    return is_ex_i(circuit, plant) and any(
        source.role == "barrier" and source.entry.isolation != "isolator" and source.entry.kind is not Kind.ISOLATOR
        for source in intrinsic(circuit, plant).sources
    )


@rule(
    "ISC11",
    severity=Severity.DANGER,
    on=Subject.CIRCUIT,
    applies=_on_zener_barrier,
    message="{device} is an earthed sensor on the zener barrier {barrier}: a second earth",
    basis=f"IEC 60079-14:2013 16.2.3 ({_FROM_MEMORY})",
)
def second_earth(circuit: Circuit, plant: Plant) -> Verdict:
    """An earthed sensor on a zener barrier, or a zener barrier without its earth on record.

    Why it matters: a shunt diode barrier works through its one earth. With a second one in the field, what flows
    between the two earths flows in the hazardous area, and past the barrier.

    What to do: take an insulated sensor, or an isolator, which needs no earth; write down that the barrier stands
    on the IS earth.

    >>> from validation.example import said
    >>> types = [{"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "zener or isolator": "zener",
    ...           "IS earth": "yes"}]
    >>> tag = {"tag": "TE-101", "simple apparatus": "yes", "area classification": "Zone 1 IIC T4", "barrier": "ZB",
    ...        "I/O type": "TC", "signal": "thermocouple", "earthed sensor": "yes"}
    >>> said("ISC11", [tag], types=types)
    ['T-101: TE-101 is an earthed sensor on the zener barrier ZB: a second earth']
    >>> said("ISC11", [{**tag, "earthed sensor": "no"}], types=types)
    []
    >>> said("ISC11", [{**tag, "earthed sensor": "no"}], types=[{**types[0], "IS earth": ""}])
    ['review: T-101: no IS earth is recorded for the zener barrier ZB']
    """
    of = intrinsic(circuit, plant)
    if of.concerns is None:
        return Unchecked("area")
    barrier = next(source for source in of.sources if source.role == "barrier" and source.entry.isolation != "isolator")
    entry = barrier.entry
    earthed = [item for item in of.items if item.installed.record.earthed_sensor is True]
    if entry.isolation is None:
        return Unchecked("zener or isolator")
    if earthed:
        return [_earthed(item, barrier, circuit, plant) for item in earthed]
    if not entry.is_earth:
        return Review(
            values={"barrier": barrier.name},
            message="no IS earth is recorded for the zener barrier {barrier}"
            if entry.is_earth is None
            else "the zener barrier {barrier} is recorded to have no IS earth",
            fields=("type.is_earth",),
            found="blank" if entry.is_earth is None else "no",
            wanted="yes",
            cells=(*entry.cells("is_earth"), *barrier_cells(circuit)),
        )
    silent = [item for item in of.items if item.installed.record.earthed_sensor is None]
    if any(not _holds_500_v(item) and not _is_contact(item.installed) for item in silent):
        return Unchecked("earthed sensor")
    return Clear((_HOLDS,)) if silent else None


def _holds_500_v(item: Item) -> bool:
    """Whether it is marked Ex i, and no certificate of it ends in X: one that is earthed inside does."""
    installed = item.installed
    text = installed.record.certificate or (installed.type.certificate if installed.type is not None else None) or ""
    marking = installed.marking
    evidence = [*read_certificates(text), *(marking.certificates if marking is not None else ())]
    return (
        item.how == "intrinsically safe"
        and not any(each.suffix == "X" for each in evidence)
        and not (marking is not None and marking.marked_x)
    )


def _is_contact(installed: Installed) -> bool:
    return installed.kind in (Kind.SWITCH, Kind.HAND_SWITCH)


def _earthed(item: Item, barrier: ExSource, circuit: Circuit, plant: Plant) -> Found:
    message = ""
    verdict = Found
    if item.at_transmitter:
        verdict = Review
        message = (
            "{device} is an earthed sensor at a transmitter on the zener barrier {barrier}: a second earth, unless the "
            "transmitter isolates"
        )
    return verdict(
        values={"device": item.name, "barrier": barrier.name},
        message=message,
        fields=("earthed_sensor",),
        part=item.name,
        found="earthed",
        wanted="insulated from earth, or an isolator",
        fixes=source_fixes(circuit, plant),
        cells=(*item.installed.cells("earthed_sensor"), *barrier_cells(circuit)),
    )


# ------------------------------------------------------------------------------------------------- simple apparatus

MOST_V: Final = 1.5
MOST_MA: Final = 100.0
MOST_MW: Final = 25.0
"""What simple apparatus may generate, all three (IEC 60079-11:2011 5.7, from memory)."""
T4_MW: Final[Mapping[float, float]] = MappingProxyType(
    {40.0: 1300.0, 50.0: 1250.0, 60.0: 1200.0, 70.0: 1100.0, 80.0: 1000.0}
)
"""The power that leaves a surface of at least 20 mm2 within T4, by the highest ambient in degC (IEC 60079-11:2011;
50 and 70 degC from memory). Between two, the hotter counts."""
LEAST_MM2: Final = 20.0
SWITCHES_T6_C: Final = 40.0
"""Up to this ambient, switches and terminals within their ratings are T6 (IEC 60079-11:2011 5.7, from memory)."""


def t4_power_mw(ambient_max_c: float) -> float | None:
    """Return the power in mW that simple apparatus may receive within T4; None above 80 degC.

    >>> t4_power_mw(60), t4_power_mw(55), t4_power_mw(41), t4_power_mw(-20), t4_power_mw(80.5)
    (1200.0, 1200.0, 1250.0, 1300.0, None)
    """
    return next((power for ambient_c, power in T4_MW.items() if ambient_max_c <= ambient_c), None)


def _is_simple(installed: Installed, plant: Plant) -> bool:
    return is_simple_apparatus(installed) and classified_areas(installed) != ()


@rule(
    "ISC13",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=_is_simple,
    message="stated to be simple apparatus, and generates {what}",
    basis=f"IEC 60079-11:2011 5.7 ({_FROM_MEMORY})",
)
def no_simple_apparatus(installed: Installed, plant: Plant) -> Verdict:
    """Stated simple apparatus that generates too much, or can receive more power than T4 allows.

    Why it matters: simple apparatus needs no certificate because nothing in it can ignite; a source of more than
    1.5 V, 100 mA or 25 mW can, and so can a small part that the source's whole power heats.

    What to do: take a certified device; or a source of less Po, or a place of less ambient. The three limits are for
    what generates: a switch or an RTD may stand on a barrier of 28 V.

    >>> from validation.example import said
    >>> types = [{"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "Po mW": "1250"}]
    >>> areas = [{"code": "A", "zone": "1", "gas group": "IIC", "temperature class": "T4", "ambient max": "60"}]
    >>> tag = {"tag": "TE-101", "simple apparatus": "yes", "area": "A", "barrier": "ZB", "I/O type": "RTD",
    ...        "signal": "Pt100", "surface area": "150 mm2"}
    >>> said("ISC13", [tag], types=types, areas=areas)
    ['TE-101: can receive 1250 mW from ZB, at most 1200 at 60 degC for T4']
    >>> said("ISC13", [tag], types=[{**types[0], "Po mW": "1200"}], areas=areas)
    []
    """
    areas = classified_areas(installed)
    generates = _generates(installed)
    if isinstance(generates, Found):
        return generates
    if areas is None:
        return Unchecked("area")
    heated = _heated(installed, areas, plant)
    if isinstance(heated, Found):
        return heated
    missing = [*generates, *(heated.fields if isinstance(heated, Unchecked) else ())]
    return Unchecked(*dict.fromkeys(missing)) if missing else heated


_GENERATED: Final = (
    ("generated_v", "V", MOST_V),
    ("generated_ma", "mA", MOST_MA),
    ("generated_mw", "mW", MOST_MW),
)


def _generates(installed: Installed) -> Found | tuple[str, ...]:
    """Return what it generates too much of, or the titles of those of the three that are blank beside others."""
    record = installed.record
    given = [(name, unit, limit, getattr(record, name)) for name, unit, limit in _GENERATED]
    over = [each for each in given if each[3] is not None and each[3] > each[2]]
    if over:
        _, unit, limit, value = over[0]
        return Found(
            values={
                "what": ", ".join(
                    f"{format_number(value)} {unit}, at most {format_number(limit)} {unit}"
                    for _, unit, limit, value in over
                )
            },
            fields=tuple(name for name, _, _, _ in over),
            found=f"{format_number(value)} {unit}",
            wanted=f"at most {format_number(limit)} {unit}",
            off_by=f"{format_number(value - limit)} {unit}",
            cells=record.cells("simple_apparatus"),
        )
    unread = [f"generated {unit}" for name, unit, _, _ in given if name in record.unread]
    if any(value is not None for _, _, _, value in given):
        return tuple(f"generated {unit}" for _, unit, _, value in given if value is None)
    return tuple(unread)


def _heated(installed: Installed, areas: tuple[Area, ...], plant: Plant) -> Verdict:
    """Say whether the power that its source can give heats it beyond what its areas ask."""
    circuits = plant.circuits_of(installed)
    sources = [source for circuit in circuits for source in intrinsic(circuit, plant).sources]
    if not sources:
        blank = [intrinsic(circuit, plant).source_missing or "barrier" for circuit in circuits]
        return Unchecked(*(blank or ["barrier"])[:1])
    powers = [(source.entry.po_mw, source) for source in sources]
    if any(power is None for power, _ in powers):
        return Unchecked("Po mW")
    po_mw, source = max(((power, source) for power, source in powers if power is not None), key=lambda each: each[0])
    hottest: Found | None = None
    missing: list[str] = []
    assumed: tuple[str, ...] = ()
    for area in areas:
        verdict = _heated_in(installed, area, po_mw, source)
        if isinstance(verdict, Found):
            if hottest is None or (isinstance(hottest, Review) and not isinstance(verdict, Review)):
                hottest = verdict
        elif isinstance(verdict, Unchecked):
            missing.extend(verdict.fields)
        elif isinstance(verdict, Clear):
            assumed = verdict.assumed
    if hottest is not None:
        return hottest
    return Unchecked(*dict.fromkeys(missing)) if missing else Clear(assumed) if assumed else None


def _heated_in(installed: Installed, area: Area, po_mw: float, source: ExSource) -> Verdict:
    surface, ambient = installed.record.surface_mm2, area.ambient_max_c
    shown = f"{format_number(po_mw)} mW from {source.name}"

    def review(reason: str, *fields: str) -> Review:
        return Review(
            values={"power": shown, "reason": reason},
            message="can receive {power}: {reason}",
            fields=fields,
            found=f"{format_number(po_mw)} mW",
            wanted="its temperature worked out: Po x thermal resistance + ambient",
            cells=source.entry.cells("po_mw"),
        )

    if "dust" in area.sides and "gas" not in area.sides:
        return review("the power that simple apparatus bears under dust is for a person to judge", "area.zone")
    t_class = area.temperature_class
    if t_class is None:
        return Unchecked("area temperature class")
    switch = _is_contact(installed) and signal_class(signal_of(installed)) in (None, "contact", "digital")
    if ambient is None and (switch or T_CODE_C.get(t_class, 0.0) >= T_CODE_C["T4"]):
        return Unchecked("area ambient max")
    if switch and ambient is not None and ambient <= SWITCHES_T6_C:
        return Clear(("a switch within its ratings is T6 up to +40 degC, from memory",))
    if ambient is None or T_CODE_C.get(t_class, 0.0) < T_CODE_C["T4"]:
        return review(f"the table of powers is for T4, the area asks for {t_class}", "area.temperature_class")
    limit_mw = t4_power_mw(ambient)
    if limit_mw is None:
        return review(
            f"the table of powers ends at 80 degC, the area has {format_number(ambient)}", "area.ambient_max_c"
        )
    if surface is not None and surface < LEAST_MM2:
        return review(
            f"its surface of {format_number(surface)} mm2 is below the 20 mm2 of the table of powers", "surface_mm2"
        )
    if po_mw > limit_mw:
        step = next(step for step, power in T4_MW.items() if power == limit_mw)
        return Found(
            values={"power": shown, "limit": format_number(limit_mw), "ambient": format_number(ambient)},
            message="can receive {power}, at most {limit} at {ambient} degC for T4",
            fields=("simple_apparatus", "area.ambient_max_c"),
            found=f"{format_number(po_mw)} mW",
            wanted=f"at most {format_number(limit_mw)} mW",
            off_by=f"{format_number(po_mw - limit_mw)} mW",
            working=f"Po {format_number(po_mw)} mW ({source.name}); at {format_number(ambient)} degC, of the table "
            f"{format_number(step)} degC: {format_number(limit_mw)} mW on at least 20 mm2",
            cells=source.entry.cells("po_mw"),
        )
    return Unchecked("surface area") if surface is None else None
