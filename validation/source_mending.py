"""Which Ex i sources of the catalogue would fit a circuit, with what margins, and what changes to take one."""

from __future__ import annotations

from collections.abc import Iterable
from decimal import Decimal
from typing import Final

from instruments.epl import LEVELS
from instruments.kind import Kind
from instruments.protection import signal_of
from instruments.record import DeviceType
from instruments.signal_words import signal_classes
from instruments.tag import natural_key
from loops.circuit import ANALOGUE_INPUT, ANALOGUE_OUTPUT, Circuit
from loops.entity import MORE_DEMANDING, Comparison, Line, number
from loops.intrinsic import Entity, ExSource, Intrinsic, entity_with, ex_source, intrinsic, needed_level
from loops.plant import Plant
from validation.circuit_mending import barrier_change, length_change
from validation.finding import Fix

MOST_SOURCES: Final = 3
"""How many sources a finding names."""
_ON_SWITCHES: Final = frozenset({"contact", "digital"})


def source_fixes(circuit: Circuit, plant: Plant, *, with_cable: bool = True) -> tuple[Fix, ...]:
    """Return up to three sources of the catalogue with which the whole comparison of a circuit passes.

    They do what the circuit asks of its barrier, feed what its places need, and every term is stated. Where none
    passes with the cable as it is, those that pass with a shorter one, both changed at once: not so where
    `with_cable` says that a shorter cable alone would do.
    """
    of = intrinsic(circuit, plant)
    if not plant.types or not of.items:
        return ()
    whole: list[tuple[ExSource, Entity]] = []
    shorter: list[tuple[ExSource, Comparison, int]] = []
    for source in _candidates(of, plant):
        entity = entity_with(of, source, plant)
        if _holds(entity):
            whole.append((source, entity))
        elif with_cable and not whole and (length_m := _length_that_holds(of, source, entity, plant)) is not None:
            short = entity_with(of, source, plant, length_m=length_m).comparison
            assert short is not None
            shorter.append((source, short, length_m))
    whole.sort(key=lambda each: (each[0].entry.kind is not _own_kind(of), natural_key(each[0].name)))
    fixes = [_source_fix(circuit, source, entity, plant) for source, entity in whole[:MOST_SOURCES]]
    if fixes:
        return tuple(fixes)
    shorter.sort(key=lambda each: (-each[2], natural_key(each[0].name)))
    return tuple(
        Fix(
            text=f"source {source.name} and a cable no longer than {length_m} m together: {margins(short)}",
            **barrier_change(circuit, source.name, plant, length_m=length_m),
        )
        for source, short, length_m in shorter[:MOST_SOURCES]
    )


def length_fix(circuit: Circuit, comparison: Comparison, plant: Plant) -> tuple[Fix, ...]:
    """Return the longest cable, where a shorter one alone lets capacitance and inductance pass."""
    length_m = comparison.longest_cable_m
    if not length_m:
        return ()
    text = f"cable no longer than {length_m} m ({comparison.longest_because} decides)"
    return (Fix(text=text, **length_change(circuit, length_m, plant)),)


def margins(comparison: Comparison) -> str:
    """Return what a comparison leaves, in words: the least margin of each quantity, and the longest cable."""
    words: list[str] = []
    for quantity in ("voltage", "current", "power"):
        lines = [line for line in comparison.of(quantity) if line.excess is not None]
        if lines:
            line = max(lines, key=_excess)
            words.append(f"{line.terms[0].name} {number(line.terms[0].value)} {line.unit}, {_left(line)} to spare")
    for line in (*comparison.of("capacitance"), *comparison.of("inductance")):
        if line.by_ratio:
            words.append("inductance by L/R")
        elif line.excess is not None:
            words.append(f"{line.quantity} {_left(line)} to spare")
    if comparison.longest_cable_m is not None:
        words.append(f"cable up to {comparison.longest_cable_m} m")
    return "; ".join(words)


def _excess(line: Line) -> Decimal:
    return line.excess if line.excess is not None else Decimal(0)


def _left(line: Line) -> str:
    return f"{number(-_excess(line))} {line.unit}"


def _source_fix(circuit: Circuit, source: ExSource, entity: Entity, plant: Plant) -> Fix:
    assert entity.comparison is not None
    return Fix(
        text=f"source {source.name}: {margins(entity.comparison)}", **barrier_change(circuit, source.name, plant)
    )


def _holds(entity: Entity) -> bool:
    """Whether every term passes, nothing being missing, translated in doubt or of an unknown characteristic."""
    if entity.comparison is None or entity.intrinsic.ruling.group is None or not entity.linear:
        return False
    if entity.harder is not None and not entity.harder.passes:
        return False
    return entity.comparison.passes is True


def _length_that_holds(of: Intrinsic, source: ExSource, entity: Entity, plant: Plant) -> int | None:
    comparison = entity.comparison
    if comparison is None or not comparison.longest_cable_m or of.circuit.cable_length_m is None:
        return None
    if comparison.longest_cable_m >= of.circuit.cable_length_m.number:
        return None
    shorter = entity_with(of, source, plant, length_m=comparison.longest_cable_m)
    return comparison.longest_cable_m if _holds(shorter) else None


def _own_kind(of: Intrinsic) -> Kind | None:
    return of.circuit.barrier.kind if of.circuit.barrier is not None else None


def _candidates(of: Intrinsic, plant: Plant) -> Iterable[ExSource]:
    entries: list[DeviceType] = plant.once("barriers and isolators of the catalogue", _barriers_of)
    own = {id(source.entry) for source in of.sources}
    dust = any("dust" in area.sides for item in of.items for area in item.areas or ())
    needs = [needed[0] for item in of.items if (needed := needed_level(item)) is not None]
    level = min(needs, key=LEVELS.index, default="c")
    earthed = any(item.installed.record.earthed_sensor for item in of.items)
    for entry in entries:
        if id(entry) in own or not _does_the_job(entry, of.circuit):
            continue
        source = ex_source(entry)
        if source is None or source.level is None or LEVELS.index(source.level) > LEVELS.index(level):
            continue
        group = of.ruling.group
        if group is None or (source.group is not None and source.group not in MORE_DEMANDING[group]):
            continue
        if (dust and source.for_gas_only) or (entry.isolation == "zener" and (earthed or not entry.is_earth)):
            continue
        yield source


def _barriers_of(plant: Plant) -> list[DeviceType]:
    return sorted(
        (
            each
            for each in plant.types.values()
            if each.code and each.kind in (Kind.BARRIER, Kind.ISOLATOR) and each.uo_v is not None
        ),
        key=lambda each: natural_key(each.code or ""),
    )


def _does_the_job(entry: DeviceType, circuit: Circuit) -> bool:
    """Whether a barrier passes on the signal of a circuit, the way that it goes."""
    wanted = signal_classes(circuit.signal_row.signal) or signal_classes(signal_of(circuit.device))
    offered = signal_classes(entry.signal)
    if not offered or not wanted:
        return False
    if not (offered & wanted or (offered & _ON_SWITCHES and wanted & _ON_SWITCHES)):
        return False
    namur = "namur" in (circuit.signal_row.signal or signal_of(circuit.device)).casefold()
    if namur and "namur" not in (entry.signal or "").casefold():
        return False
    if entry.isolation == "zener" or "current" not in offered:
        return True
    # An isolator passes one way only: it supplies a transmitter, or it drives an output.
    supplies = entry.available_20ma_v is not None or entry.available_alarm_v is not None
    drives = entry.compliance_v is not None
    if circuit.kind == ANALOGUE_INPUT:
        return supplies or not drives
    return circuit.kind == ANALOGUE_OUTPUT and (drives or not supplies)
