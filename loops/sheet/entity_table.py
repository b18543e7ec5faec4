"""The entity comparison of an Ex i circuit and its descriptive system document, as they stand on the loop's sheet."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final

from loops.circuit import Circuit
from loops.entity import Comparison, Line, number
from loops.intrinsic import Entity, Item, entity_comparison, intrinsic
from loops.plant import Plant
from loops.sheet.path import Path


@dataclass(frozen=True, slots=True, kw_only=True)
class EntityLine:
    """One line of the comparison: what is compared, the two figures, and whether it holds."""

    what: str
    device: str | None
    found: str | None
    allowed: str | None
    outcome: str


@dataclass(frozen=True, slots=True, kw_only=True)
class EntityTable:
    """The comparison of a source with what it feeds.

    Attributes
    ----------
    source
        What feeds the circuit, and the group that rules.
    lines
        Voltage, current and power of each device, then capacitance and inductance of the circuit.
    workings
        The sums with their terms, and the longest cable.
    assumed
        The figures of a standard that stand for blanks.
    missing
        Why there is no comparison.
    """

    source: str
    lines: tuple[EntityLine, ...] = ()
    workings: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()
    missing: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Part:
    """One part of the system: a source, a device, simple apparatus."""

    name: str
    role: str
    marking: str | None
    certificate: str | None
    level: str | None


@dataclass(frozen=True, slots=True, kw_only=True)
class SystemDocument:
    """What IEC 60079-25:2020 clause 4 asks of the document of one system; `missing` are the items still blank."""

    parts: tuple[Part, ...]
    items: tuple[tuple[str, str | None], ...]
    missing: tuple[str, ...]


_SYMBOLS: Final = {"voltage": ("Uo", "Ui"), "current": ("Io", "Ii"), "power": ("Po", "Pi")}
_SUMS: Final = {"capacitance": "Ci + cable, against Co", "inductance": "Li + cable, against Lo"}


def entity_table(circuit: Circuit, plant: Plant) -> EntityTable | None:
    """Return the entity comparison of a circuit as `loops.intrinsic` works it; None where it is no Ex i circuit."""
    if not intrinsic(circuit, plant).is_ex_i:
        return None
    entity = entity_comparison(circuit, plant)
    comparison = entity.comparison
    if comparison is None or entity.source is None:
        return EntityTable(source="source not known", missing=entity.missing)
    ruling = entity.intrinsic.ruling
    group = f"group {ruling.group}" if ruling.group else "group not stated: figures for IIC"
    return EntityTable(
        source=f"{entity.source.name}, {group}",
        lines=tuple(_line(each) for each in comparison.lines),
        workings=tuple(_workings(comparison)),
        assumed=(*entity.assumed, *(("a linear output characteristic of the zener barrier",) if entity.linear_assumed
                                    else ())),
    )  # fmt: skip


def _line(line: Line) -> EntityLine:
    symbols = _SYMBOLS.get(line.quantity)
    what = f"{symbols[0]} against {symbols[1]}" if symbols else _SUMS.get(line.quantity, line.quantity)
    if line.passes is None:
        outcome = f"not worked: {', '.join(line.missing)}" if line.missing else "not worked"
    else:
        outcome = "holds" if line.passes else "does not hold"
        if line.passes and line.by_ratio:
            outcome = "holds by L/R"
    at_least = "at least " if line.missing and line.found is not None and not symbols else ""
    return EntityLine(
        what=what,
        device=line.device or None,
        found=None if line.found is None else f"{at_least}{number(line.found)} {line.unit}",
        allowed=None if line.allowed is None else f"{number(line.allowed)} {line.unit}",
        outcome=outcome,
    )


def _workings(comparison: Comparison) -> Iterable[str]:
    for line in comparison.lines:
        if line.quantity in _SUMS and line.working:
            yield line.working
    if comparison.limits.working:
        yield comparison.limits.working
    if comparison.longest_cable_m is not None:
        because = f", by its {comparison.longest_because}" if comparison.longest_because else ""
        yield f"longest cable {comparison.longest_cable_m} m{because}"


def system_document(circuit: Circuit, plant: Plant, path: Path | None) -> SystemDocument | None:
    """Return the descriptive system document of a circuit; None where it is no Ex i circuit.

    Parameters
    ----------
    circuit
        The circuit.
    plant
        Its plant.
    path
        Its path, which the sheet draws: where the screen is earthed.

    Notes
    -----
    IEC 60079-25:2020 clause 4: a block diagram with all apparatus, simple apparatus among it, and the wiring; group,
    level, EPL, temperature class and ambient of each part; what the wiring must be; the earthing points on which it
    depends; the confirmation of simple apparatus; the result of the assessment; an identification.
    """
    system = intrinsic(circuit, plant)
    if not system.is_ex_i:
        return None
    entity = entity_comparison(circuit, plant)
    missing: list[str] = []
    parts = [*_devices(system.items, missing), *_sources(entity, missing)]
    earth = _earth(entity, path, missing)
    items = (
        ("Block diagram", "drawn above, with every part of the list below"),
        ("Wiring", _wiring(entity, missing)),
        ("Earthing and bonding", earth),
        ("Simple apparatus", _simple(system.items, missing)),
        ("Group and level of the system", _group_and_level(entity, missing)),
        ("Result of the comparison", _result(entity, missing)),
        ("Document number", circuit.row.drawing if circuit.row is not None else None),
    )
    if items[-1][1] is None:
        missing.append("document number")
    return SystemDocument(parts=tuple(parts), items=items, missing=tuple(dict.fromkeys(missing)))


def _devices(items: Iterable[Item], missing: list[str]) -> Iterable[Part]:
    for item in items:
        record, entry = item.installed.record, item.installed.type
        marking = record.ex_marking or (entry.ex_marking if entry is not None else None)
        certificate = record.certificate or (entry.certificate if entry is not None else None)
        simple = item.how == "simple"
        if not simple and marking is None:
            missing.append(f"marking of {item.name}")
        if not simple and certificate is None:
            missing.append(f"certificate of {item.name}")
        kind = item.installed.kind
        yield Part(
            name=item.name,
            role="simple apparatus" if simple else kind.value if kind is not None else "device",
            marking="simple apparatus, as stated" if simple and marking is None else marking,
            certificate="none asked of simple apparatus" if simple and certificate is None else certificate,
            level=item.level if not simple else "\u2013",
        )


def _sources(entity: Entity, missing: list[str]) -> Iterable[Part]:
    for source in entity.intrinsic.sources:
        entry = source.entry
        if entry.ex_marking is None:
            missing.append(f"marking of {source.name}")
        if entry.certificate is None:
            missing.append(f"certificate of {source.name}")
        yield Part(
            name=source.name,
            role=f"source, {entry.isolation or source.role}",
            marking=entry.ex_marking,
            certificate=entry.certificate,
            level=source.level,
        )
    if not entity.intrinsic.sources:
        missing.append("source")


def _wiring(entity: Entity, missing: list[str]) -> str | None:
    comparison = entity.comparison
    if comparison is None or not comparison.cable:
        missing.append("cable")
        return None
    said: list[str] = []
    for each in comparison.cable:
        figures = [
            f"{number(value)} {unit}{' (standard)' if field in each.assumed else ''}"
            for field, value, unit in (
                ("pf_per_m", each.pf_per_m, "pF/m"),
                ("uh_per_m", each.uh_per_m, "\u00b5H/m"),
            )
            if value is not None
        ]
        if each.length_m is None:
            missing.append(f"length of the {each.name}")
        else:
            figures.insert(0, f"{number(each.length_m)} m")
        said.append(f"{each.name}: {', '.join(figures)}")
    limits = comparison.limits
    permitted = [
        f"{symbol} {number(value)} {unit}"
        for symbol, value, unit in (("Co", limits.co_nf, "nF"), ("Lo", limits.lo_mh, "mH"))
        if value is not None
    ]
    if permitted:
        said.append(f"permitted with the devices: {', '.join(permitted)}")
    if comparison.longest_cable_m is not None:
        said.append(f"at most {comparison.longest_cable_m} m")
    return "; ".join(said)


def _earth(entity: Entity, path: Path | None, missing: list[str]) -> str | None:
    said: list[str] = []
    source = entity.source
    if source is not None and source.entry.isolation == "zener":
        if source.entry.is_earth:
            said.append("IS earth recorded")
        else:
            missing.append("IS earth of the zener barrier")
    elif source is not None and source.entry.isolation == "isolator":
        said.append("galvanically isolated: does not rest on an IS earth")
    screens = {stretch.screen_earthed_at for stretch in path.stretches} - {None} if path is not None else set()
    if screens:
        said.append(f"screen earthed at {', '.join(sorted(str(each) for each in screens))}")
    else:
        missing.append("where the screen is earthed")
    return "; ".join(said) or None


def _simple(items: Iterable[Item], missing: list[str]) -> str | None:
    named = [item.name for item in items if item.how == "simple"]
    pending = [item.name for item in items if item.how in ("pending", "unknown", "unmarked")]
    missing.extend(f"whether {name} is simple apparatus, or its marking" for name in pending)
    if named:
        return f"stated of {', '.join(named)}"
    return None if pending else "none on this circuit"


def _group_and_level(entity: Entity, missing: list[str]) -> str | None:
    ruling, level = entity.intrinsic.ruling, entity.intrinsic.level
    if ruling.group is None:
        missing.append("group of the area")
    if level is None:
        missing.append("level of protection of each part")
    said = [text for text in (ruling.group, f"level {level}, the lowest of its parts" if level else None) if text]
    return ", ".join(said) or None


def _result(entity: Entity, missing: list[str]) -> str | None:
    passes = entity.comparison.passes if entity.comparison is not None else None
    if passes is None:
        missing.append("figures for the comparison")
        return None
    return "no line of the comparison fails" if passes else "the comparison fails"
