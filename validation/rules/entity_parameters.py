"""ISC: what an Ex i source can give against what its devices bear, and what devices and cable store.

Ferrule accepts nothing: screening aid - requires review by a competent person.
"""

from __future__ import annotations

from collections.abc import Iterable
from operator import attrgetter
from typing import Final, Literal

from instruments.origin import Cell
from loops.circuit import Circuit
from loops.entity import MORE_DEMANDING, Comparison, Line, Quantity, pair
from loops.intrinsic import (
    DEVICE_LIMITS,
    TITLES,
    Entity,
    ExSource,
    Intrinsic,
    Item,
    apparatus_of,
    entity_comparison,
    groups_stated,
    intrinsic,
    linear_assumption,
    plainly_holds,
)
from loops.plant import Plant
from validation.finding import Clear, Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule
from validation.source_mending import length_fix, source_fixes

_FROM_MEMORY: Final = "from memory; screening aid - requires review by a competent person"
_LIMITS: Final = f"IEC 60079-14:2013 16.2.2; Vmax, Imax and Pmax of ANSI/ISA RP12.06.01 ({_FROM_MEMORY})"
_STORES: Final = (
    f"IEC 60079-14:2013 16.2.2 and IEC 60079-11:2011 for the 1 % and 50 % rule, its edge and its caps ({_FROM_MEMORY})"
)
_FIELDS: Final = {"voltage": ("uo_v", "ui_v"), "current": ("io_ma", "ii_ma"), "power": ("po_mw", "pi_mw")}


def is_ex_i(circuit: Circuit, plant: Plant) -> bool:
    """Whether a circuit is an Ex i circuit of which a part may stand in a classified area, or declared one."""
    of = intrinsic(circuit, plant)
    return of.is_ex_i and of.concerns is not False


def plain(of: Intrinsic, plant: Plant) -> tuple[str, ...] | None:
    """Return the assumptions of a comparison that plainly holds, asked once a circuit; None of any other."""
    known: dict[int, tuple[Intrinsic, tuple[str, ...] | None]] = plant.once("plain comparisons", _nothing_yet)
    found = known.get(id(of))
    if found is None or found[0] is not of:
        found = known[id(of)] = (of, plainly_holds(of, plant))
    return found[1]


def _nothing_yet(plant: Plant) -> dict[int, tuple[Intrinsic, tuple[str, ...] | None]]:
    return {}


def barrier_cells(circuit: Circuit) -> tuple[Cell, ...]:
    """Return the cell that names a circuit's barrier."""
    if circuit.row is not None and circuit.row.barrier:
        return circuit.row.cells("barrier")
    owner = circuit.signal_row if circuit.signal_row.barrier else circuit.device.record
    return owner.cells("barrier")


def _own_field(item: Item, circuit: Circuit, name: str) -> tuple[str, ...]:
    """Return the field of a device's figure, as the audit names it: of another device on the circuit its title only."""
    return (f"type.{name}",) if item.installed is circuit.device else (name,)


def _item(of: Intrinsic, name: str) -> Item:
    return next(item for item in of.items if item.name == name)


# ------------------------------------------------------------------------------------------ voltage, current, power


def _against_devices(circuit: Circuit, plant: Plant, quantity: Literal["voltage", "current", "power"]) -> Verdict:
    of = intrinsic(circuit, plant)
    if of.concerns is None:
        return Unchecked("area")
    if plain(of, plant) is not None and any(item.how != "simple" for item in of.fed):
        return None
    entity = entity_comparison(circuit, plant)
    if entity.comparison is None:
        return Unchecked(*entity.missing)
    lines = entity.comparison.of(quantity)
    if not lines:
        return NotApplicable("no device on the circuit sets a limit of its own")
    found = [line for line in lines if line.passes is False]
    if found:
        fixes = source_fixes(circuit, plant)
        return [_over_limit(line, entity, circuit, len(lines) > 1, fixes=fixes) for line in found]
    missing = [title.partition(" of ")[0] for line in lines if line.passes is None for title in line.missing]
    return Unchecked(*dict.fromkeys(missing)) if missing else None


def _over_limit(line: Line, entity: Entity, circuit: Circuit, several: bool, *, fixes: tuple[Fix, ...]) -> Found:
    assert line.found is not None
    assert line.allowed is not None
    assert line.excess is not None
    assert entity.source is not None
    out, into = _FIELDS[line.quantity]
    item = _item(entity.intrinsic, line.device)
    entry = item.installed.type
    gives, bears = pair(line.found, line.allowed)
    over = f"{pair(line.excess, line.allowed)[0]} {line.unit}"
    gives, bears = f"{line.terms[0].name} {gives} {line.unit}", f"{line.limits[0].name} {bears} {line.unit}"
    return Found(
        values={"gives": gives, "source": entity.source.name, "bears": bears, "device": line.device, "over": over},
        fields=_own_field(item, circuit, into),
        part=line.device if several else "",
        found=gives,
        wanted=f"at most {bears}",
        off_by=over,
        working=line.working,
        fixes=fixes,
        cells=(
            *(entry.cells(into) if entry is not None else ()),
            *entity.source.entry.cells(out),
            *barrier_cells(circuit),
        ),
    )


_OVER: Final = "{gives} of {source} is above {bears} of {device}, by {over}"


@rule("ISC02", severity=Severity.DANGER, on=Subject.CIRCUIT, applies=is_ex_i, message=_OVER, basis=_LIMITS)
def too_many_volts(circuit: Circuit, plant: Plant) -> Verdict:
    """An Ex i source whose Uo is above a device's Ui.

    Why it matters: the device was assessed up to its Ui; above it, nothing shows that a fault makes no igniting
    spark.

    What to do: take a source of less voltage, or a device that bears more. Devices in parallel are compared one by
    one.

    >>> from validation.example import said
    >>> types = [{"code": "T1", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga", "Ui V": "24"},
    ...          {"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "Uo V": "28"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB",
    ...        "I/O type": "AI", "signal": "4-20 mA"}
    >>> said("ISC02", [tag], types=types)
    ['P-101: Uo 28 V of ZB is above Ui 24 V of PT-101, by 4 V']
    >>> said("ISC02", [tag], types=[{**types[0], "Ui V": "28"}, types[1]])
    []
    """
    return _against_devices(circuit, plant, "voltage")


@rule("ISC03", severity=Severity.DANGER, on=Subject.CIRCUIT, applies=is_ex_i, message=_OVER, basis=_LIMITS)
def too_much_current(circuit: Circuit, plant: Plant) -> Verdict:
    """An Ex i source whose Io is above a device's Ii.

    Why it matters: the device was assessed up to its Ii; above it, nothing shows that a fault makes no igniting
    spark or surface.

    What to do: take a source of less current, or a device that bears more. Where a certificate sets no Ii, write
    'not applicable' for it once somebody has read so.

    >>> from validation.example import said
    >>> types = [{"code": "T1", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga", "Ii mA": "90"},
    ...          {"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "Io mA": "93"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB",
    ...        "I/O type": "AI", "signal": "4-20 mA"}
    >>> said("ISC03", [tag], types=types)
    ['P-101: Io 93 mA of ZB is above Ii 90 mA of PT-101, by 3 mA']
    >>> said("ISC03", [tag], types=[{**types[0], "Ii mA": "93"}, types[1]])
    []
    """
    return _against_devices(circuit, plant, "current")


@rule("ISC04", severity=Severity.DANGER, on=Subject.CIRCUIT, applies=is_ex_i, message=_OVER, basis=_LIMITS)
def too_much_power(circuit: Circuit, plant: Plant) -> Verdict:
    """An Ex i source whose Po is above a device's Pi.

    Why it matters: with more power than Pi a part of the device may get hotter than its temperature class.

    What to do: take a source of less power, or a device that bears more. A blank Pi is no Pi without limit.

    >>> from validation.example import said
    >>> types = [{"code": "T1", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga", "Pi mW": "600"},
    ...          {"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "Po mW": "650"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB",
    ...        "I/O type": "AI", "signal": "4-20 mA"}
    >>> said("ISC04", [tag], types=types)
    ['P-101: Po 650 mW of ZB is above Pi 600 mW of PT-101, by 50 mW']
    >>> said("ISC04", [tag], types=[{**types[0], "Pi mW": "650"}, types[1]])
    []
    """
    return _against_devices(circuit, plant, "power")


# ------------------------------------------------------------------------------------- capacitance and inductance

_STORED: Final = "{what} {stored} at {source}, {limit} {allowed}: over by {over}"


def _against_stores(circuit: Circuit, plant: Plant, quantity: Literal["capacitance", "inductance"]) -> Verdict:
    of = intrinsic(circuit, plant)
    if of.concerns is None:
        return Unchecked("area")
    plainly = plain(of, plant)
    if plainly is not None:
        return Clear(plainly) if plainly else None
    entity = entity_comparison(circuit, plant)
    comparison, kindest = entity.comparison, entity.kindest
    if comparison is None or kindest is None:
        return Unchecked(*entity.missing)
    if of.ruling.group is None:
        return Unchecked("area gas group")
    (worst,), (kind,) = comparison.of(quantity), kindest.of(quantity)
    assumed = (*entity.assumed, *_linear_assumed(entity)) if entity.assumed or entity.linear_assumed else ()
    if entity.linear is False:
        return _not_linear(worst, entity, circuit)
    if kind.passes is False:
        if kind.ratio_doubtful:
            return _over_store(Review, kind, kindest, entity, circuit, plant, assumed=_linear_assumed(entity))
        return _over_store(Found, kind, kindest, entity, circuit, plant, assumed=_linear_assumed(entity))
    if entity.linear is None:
        return Unchecked("output characteristic")
    if worst.passes is False:
        return _over_store(Review, worst, comparison, entity, circuit, plant, assumed=assumed)
    if worst.passes is None:
        return Unchecked(*_titles(worst.missing, of))
    if entity.harder is not None:
        (harder,) = entity.harder.of(quantity)
        if harder.passes is not True:
            return _doubtful_group(harder, entity, circuit, plant)
    return Clear(assumed) if assumed else None


def _linear_assumed(entity: Entity) -> tuple[str, ...]:
    if not entity.linear_assumed or entity.source is None:
        return ()
    return linear_assumption(entity.source)


def _titles(missing: Iterable[str], of: Intrinsic) -> tuple[str, ...]:
    group = of.ruling.group or ""
    titles = [title.partition(" of ")[0] for title in missing]
    return tuple(
        dict.fromkeys(f"{title} {group}" if title in (TITLES["co_nf"], TITLES["lo_mh"]) else title for title in titles)
    )


def _stored_cells(quantity: Quantity, entity: Entity, circuit: Circuit) -> tuple[Cell, ...]:
    assert entity.source is not None
    assert entity.comparison is not None
    co = quantity == "capacitance"
    cells: list[Cell] = []
    for item in entity.intrinsic.fed:
        if item.installed.type is not None:
            cells.extend(item.installed.type.cells("ci_nf" if co else "li_uh"))
    taken = entity.comparison.source
    group = (taken.co_group if co else taken.lo_group).casefold()
    if group:
        cells.extend(entity.source.entry.cells(f"co_{group}_nf" if co else f"lo_{group}_mh"))
    if circuit.cable_length_m is not None:
        cells.extend(circuit.cable_length_m.cells)
    if circuit.cable_type is not None:
        cells.extend(circuit.cable_type.cells("capacitance_pf_per_m" if co else "inductance_uh_per_m"))
    return tuple(dict.fromkeys((*cells, *barrier_cells(circuit))))


def _over_store(
    verdict: type[Found],
    line: Line,
    comparison: Comparison,
    entity: Entity,
    circuit: Circuit,
    plant: Plant,
    *,
    assumed: tuple[str, ...] = (),
) -> Found:
    assert line.found is not None
    assert line.allowed is not None
    assert line.excess is not None
    assert entity.source is not None
    stored, allowed = pair(line.found, line.allowed)
    co = line.quantity == "capacitance"
    group = comparison.source.co_group if co else comparison.source.lo_group
    limit = f"{'Co' if co else 'Lo'}{f' for {group}' if group else ''}"
    if comparison.limits.halved:
        limit += " halved"
    over = f"{pair(line.excess, line.allowed)[0]} {line.unit}"
    shorter = length_fix(circuit, entity.comparison if entity.comparison is not None else comparison, plant)
    return verdict(
        values={
            "what": "capacitance" if co else "inductance",
            "stored": f"{stored} {line.unit}",
            "source": entity.source.name,
            "limit": limit,
            "allowed": f"{allowed} {line.unit}",
            "over": over,
        },
        fields=("type.ci_nf" if co else "type.li_uh", "cable_length_m"),
        found=f"{stored} {line.unit}",
        wanted=f"at most {allowed} {line.unit}",
        off_by=over,
        working=f"{line.working}; group {entity.intrinsic.ruling.group}: {entity.intrinsic.ruling.why}",
        assumed=assumed,
        fixes=(*shorter, *source_fixes(circuit, plant, with_cable=not shorter)),
        cells=_stored_cells(line.quantity, entity, circuit),
    )


def _not_linear(line: Line, entity: Entity, circuit: Circuit) -> Review:
    assert entity.source is not None
    co = line.quantity == "capacitance"
    stored = f"{pair(line.found, line.allowed)[0]} {line.unit}" if line.found and line.allowed else "?"
    return Review(
        values={"source": entity.source.name, "stored": stored, "what": line.quantity},
        message="the output characteristic of {source} is not linear: its limits for {what} hold by its certificate's "
        "pairs alone ({stored} on the circuit)",
        fields=("type.ci_nf" if co else "type.li_uh",),
        found="not linear",
        wanted="the pairs of the certificate, or IEC 60079-25 Annex C",
        working=line.working,
        cells=(*entity.source.entry.cells("output_characteristic"), *barrier_cells(circuit)),
    )


def _doubtful_group(line: Line, entity: Entity, circuit: Circuit, plant: Plant) -> Review:
    assert entity.source is not None
    assert entity.comparison is not None
    ruling = entity.intrinsic.ruling
    co = line.quantity == "capacitance"
    symbol = "Co" if co else "Lo"
    if line.found is not None and line.allowed is not None:
        stored, allowed = pair(line.found, line.allowed)
        what = f"{line.quantity} {stored} {line.unit} is above {symbol} {allowed} {line.unit} for {ruling.harder}"
        found, wanted = f"{stored} {line.unit}", f"at most {allowed} {line.unit} for {ruling.harder}"
    else:
        what = f"{entity.source.name} states no {symbol} for {ruling.harder}"
        found, wanted = "blank", f"{symbol} for {ruling.harder}, or the name of the gas"
    return Review(
        values={"doubt": ruling.doubt, "what": what},
        message="{doubt}; {what}",
        fields=("area.gas_group", "area.gas"),
        found=found,
        wanted=wanted,
        working=line.working,
        fixes=source_fixes(circuit, plant),
        cells=_stored_cells(line.quantity, entity, circuit),
    )


@rule("ISC05", severity=Severity.DANGER, on=Subject.CIRCUIT, applies=is_ex_i, message=_STORED, basis=_STORES)
def too_much_capacitance(circuit: Circuit, plant: Plant) -> Verdict:
    """Devices and cable of an Ex i circuit that store more capacitance than Co.

    Why it matters: what is stored in Ci and cable goes into the spark besides what the source gives.

    What to do: shorten the cable, take one of less capacitance, or a source of more Co for the group. Where the
    devices store 1 % of Co and 1 % of Lo or more, both are halved, and of Co at most 600 nF (IIC) or 1 microfarad is
    left; of pairs that were assessed together nothing is halved.

    >>> from validation.example import said
    >>> types = [{"code": "T1", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga", "Ci nF": "3", "Li uH": "10"},
    ...          {"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "zener or isolator": "zener",
    ...           "Co nF IIC": "83", "Lo mH IIC": "3.05"}]
    >>> cables = [{"code": "C1", "conductor": "1.5 mm2", "capacitance": "200 pF/m", "inductance": "1 uH/m"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB",
    ...        "I/O type": "AI", "signal": "4-20 mA", "cable type": "C1", "cable length": "401 m"}
    >>> said("ISC05", [tag], types=types, cable_types=cables)
    ['P-101: capacitance 83.2 nF at ZB, Co for IIC 83 nF: over by 0.2 nF']
    >>> said("ISC05", [{**tag, "cable length": "400 m"}], types=types, cable_types=cables)
    []
    """
    return _against_stores(circuit, plant, "capacitance")


@rule("ISC06", severity=Severity.DANGER, on=Subject.CIRCUIT, applies=is_ex_i, message=_STORED, basis=_STORES)
def too_much_inductance(circuit: Circuit, plant: Plant) -> Verdict:
    """Devices and cable of an Ex i circuit that store more inductance than Lo.

    Why it matters: an inductance keeps its current up as the circuit opens, and the spark burns longer.

    What to do: shorten the cable, or take a source of more Lo for the group. Where the source states Lo/Ro, the
    cable's inductance over resistance is no more, and the devices store less than 1 % of Lo, the cable's inductance
    need not be counted.

    >>> from validation.example import said
    >>> types = [{"code": "T1", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga", "Ci nF": "0", "Li uH": "10"},
    ...          {"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "zener or isolator": "zener",
    ...           "Co nF IIC": "83", "Lo mH IIC": "0.3"}]
    >>> cables = [{"code": "C1", "conductor": "1.5 mm2", "capacitance": "200 pF/m", "inductance": "1 uH/m"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB",
    ...        "I/O type": "AI", "signal": "4-20 mA", "cable type": "C1", "cable length": "291 m"}
    >>> said("ISC06", [tag], types=types, cable_types=cables)
    ['P-101: inductance 0.301 mH at ZB, Lo for IIC 0.3 mH: over by 0.001 mH']
    >>> said("ISC06", [{**tag, "cable length": "290 m"}], types=types, cable_types=cables)
    []
    """
    return _against_stores(circuit, plant, "inductance")


# --------------------------------------------------------------------------------------------- what is not stated

_OUT: Final = ("uo_v", "io_ma", "po_mw")
_ALL_LIMITS: Final = attrgetter(*DEVICE_LIMITS)


@rule(
    "ISC07",
    severity=Severity.DANGER,
    on=Subject.CIRCUIT,
    applies=is_ex_i,
    message="{name} states {stated} and no {blank}",
    basis=f"IEC 60079-14:2013 16.2.2 ({_FROM_MEMORY})",
)
def parameters_in_part(circuit: Circuit, plant: Plant) -> Verdict:
    """A device or source of an Ex i circuit that states only part of its entity parameters.

    Why it matters: a blank is not nought, and what needs the figure is not checked.

    What to do: copy the figure from the certificate: 0 where it says negligible. Where a certificate sets no Ii or
    no Pi, write 'not applicable'.

    >>> from validation.example import said
    >>> types = [{"code": "T1", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga", "Ui V": "30", "Ii mA": "120",
    ...           "Pi mW": "", "Ci nF": "3", "Li uH": "10"},
    ...          {"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "Uo V": "28", "Io mA": "93",
    ...           "Po mW": "650", "Co nF IIC": "83", "Lo mH IIC": "3.05"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB",
    ...        "I/O type": "AI", "signal": "4-20 mA"}
    >>> said("ISC07", [tag], types=types)
    ['review: P-101: PT-101 states Ui, Ii, Ci, Li and no Pi']
    >>> said("ISC07", [tag], types=[{**types[0], "Pi mW": "1000"}, types[1]])
    []
    """
    of = intrinsic(circuit, plant)
    if of.concerns is None:
        return Unchecked("area")
    found: list[Found | Review] = []
    blank: dict[str, None] = {}
    for item in of.fed:
        if item.how in ("unknown", "unmarked", "pending"):
            blank[item.missing] = None
        if item.how not in ("intrinsically safe", "several"):
            continue
        if item.installed.type is not None and None not in _ALL_LIMITS(item.installed.type):
            continue
        device = apparatus_of(item)
        missing = [name for name in DEVICE_LIMITS if getattr(device, name) is None]
        missing = [name for name in missing if _symbol(name) not in device.not_set]
        stated = [name for name in DEVICE_LIMITS if getattr(device, name) is not None]
        if missing and stated:
            entry = item.installed.type
            cells = tuple(cell for name in missing for cell in entry.cells(name)) if entry is not None else ()
            fields = tuple(field for name in missing for field in _own_field(item, circuit, name))
            found.append(_in_part(item.name, stated, missing, fields=fields, cells=cells))
        elif missing:
            blank.update(dict.fromkeys(TITLES[name] for name in missing))
    for source in of.sources:
        if source.role == "device":
            continue
        stated, missing = _of_source(source)
        if missing and stated:
            cells = (
                *(cell for name in missing for cell in source.entry.cells(_column(name))),
                *barrier_cells(circuit),
            )
            found.append(_in_part(source.name, stated, missing, fields=missing, cells=cells))
        elif missing:
            blank.update(dict.fromkeys(TITLES[name] for name in missing))
    if found:
        return found
    if not of.sources:
        blank[of.source_missing or "barrier"] = None
    return Unchecked(*blank) if blank else None


def _of_source(source: ExSource) -> tuple[list[str], list[str]]:
    """Return what a source states and what it doesn't; Lo/Ro stands for Lo."""
    entry = source.entry
    states = {name: getattr(entry, name) is not None for name in _OUT}
    states["co_nf"] = bool(groups_stated(entry, "co"))
    states["lo_mh"] = bool(groups_stated(entry, "lo")) or entry.lo_ro_uh_per_ohm is not None
    return [name for name, given in states.items() if given], [name for name, given in states.items() if not given]


def _column(name: str) -> str:
    return {"co_nf": "co_iic_nf", "lo_mh": "lo_iic_mh"}.get(name, name)


def _symbol(name: str) -> str:
    return TITLES[name].partition(" ")[0]


def _in_part(
    name: str, stated: Iterable[str], missing: Iterable[str], *, fields: Iterable[str], cells: tuple[Cell, ...]
) -> Review:
    blank = ", ".join(map(_symbol, missing))
    return Review(
        values={"name": name, "stated": ", ".join(map(_symbol, stated)), "blank": blank},
        fields=tuple(map(_column, fields)),
        part=name,
        found="blank",
        wanted=blank,
        cells=cells,
    )


@rule(
    "ISC08",
    severity=Severity.DANGER,
    on=Subject.CIRCUIT,
    applies=is_ex_i,
    message="{source} states {what} for {stated} only; {why} asks for {group}",
    basis=f"IEC 60079-14:2013 16.2.2; IEC 60079-11:2011 for dust ({_FROM_MEMORY})",
)
def pairs_of_another_group(circuit: Circuit, plant: Plant) -> Verdict:
    """An Ex i source whose Co and Lo are given only for groups less demanding than the area's.

    Why it matters: what the gas of a less demanding group bears may ignite this one.

    What to do: take the Co and Lo of the area's group from the certificate, or another source. Those of a more
    demanding group may be used: IIC for IIB and IIA, IIB for IIA; dust takes IIB.

    >>> from validation.example import said
    >>> types = [{"code": "T1", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga"},
    ...          {"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "Co nF IIB": "650",
    ...           "Lo mH IIB": "12.2"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB",
    ...        "I/O type": "AI", "signal": "4-20 mA"}
    >>> said("ISC08", [tag], types=types)
    ['P-101: ZB states Co and Lo for IIB only; IIC of area Zone 1 IIC T4 asks for IIC']
    >>> said("ISC08", [{**tag, "area classification": "Zone 1 IIA T4"}], types=types)
    []
    """
    of = intrinsic(circuit, plant)
    if of.concerns is None:
        return Unchecked("area")
    if len(of.sources) != 1:
        return Unchecked(of.source_missing or "barrier")
    if of.ruling.group is None:
        return Unchecked("area gas group")
    source, group = of.sources[0], of.ruling.group
    stated = {symbol: groups_stated(source.entry, "co" if symbol == "Co" else "lo") for symbol in ("Co", "Lo")}
    lacking = [symbol for symbol, groups in stated.items() if groups and not set(groups) & set(MORE_DEMANDING[group])]
    if not lacking and source.group is not None and source.group not in MORE_DEMANDING[group]:
        return _marked_for_another(source, of, circuit, plant)
    if not lacking:
        blank = [symbol for symbol, groups in stated.items() if not groups]
        if "Lo" in blank and source.entry.lo_ro_uh_per_ohm is not None:
            blank.remove("Lo")
        return (
            Unchecked(*(f"{TITLES['co_nf' if symbol == 'Co' else 'lo_mh']} {group}" for symbol in blank))
            if blank
            else None
        )
    given = tuple(dict.fromkeys(each for symbol in lacking for each in stated[symbol]))
    fields = tuple(f"co_{group.casefold()}_nf" if symbol == "Co" else f"lo_{group.casefold()}_mh" for symbol in lacking)
    return Found(
        values={
            "source": source.name,
            "what": " and ".join(lacking),
            "stated": " and ".join(given),
            "why": of.ruling.why,
            "group": group,
        },
        fields=fields,
        found=" and ".join(given),
        wanted=" or ".join(MORE_DEMANDING[group]),
        fixes=source_fixes(circuit, plant),
        cells=(
            *(
                cell
                for symbol in lacking
                for each in stated[symbol]
                for cell in source.entry.cells(
                    f"co_{each.casefold()}_nf" if symbol == "Co" else f"lo_{each.casefold()}_mh"
                )
            ),
            *barrier_cells(circuit),
        ),
    )


def _marked_for_another(source: ExSource, of: Intrinsic, circuit: Circuit, plant: Plant) -> Found:
    group = of.ruling.group or "IIC"
    return Found(
        values={"source": source.name, "marked": source.group, "why": of.ruling.why, "group": group},
        message="{source} is marked for circuits in {marked}; {why} asks for {group}",
        fields=("barrier",),
        found=source.group or "",
        wanted=" or ".join(MORE_DEMANDING[group]),
        fixes=source_fixes(circuit, plant),
        cells=(*source.entry.cells("ex_marking"), *barrier_cells(circuit)),
    )
