"""How what a rule finds is mended: values as a list would hold them, ranges with new ends, a check read two ways."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import replace
from decimal import ROUND_CEILING, ROUND_FLOOR, Decimal
from typing import Final

from instruments.measurement import Measurement, Scale, at, in_unit, same_dimension
from instruments.pressure import ways_to_read
from instruments.quantity import Quantity, format_number
from instruments.span import SLACK
from instruments.unit import Unit, unit_label
from loops.plant import Plant
from validation.finding import Fix, Found, Review, Unchecked, Verdict

SAME_RANGE: Final = 1e-6
"""Part of the span by which two ranges may differ and still be one."""


def _digits(value: float, rounding_mode: str) -> float:
    """Round to six significant digits up or down, so that a range written with them stays inside its limits."""
    if value == 0.0:
        return 0.0
    exact = Decimal(repr(float(f"{value:.12g}")))
    return float(exact.quantize(Decimal(1).scaleb(exact.adjusted() - 5), rounding=rounding_mode))


def rounded_up(value: float) -> float:
    """Round up to six significant digits.

    >>> rounded_up(142.233430001), rounded_up(10.000000000001)
    (142.234, 10.0)
    """
    return _digits(value, ROUND_CEILING)


def rounded_down(value: float) -> float:
    """Round down to six significant digits.

    >>> rounded_down(142.2338), rounded_down(9.999999999999)
    (142.233, 10.0)
    """
    return _digits(value, ROUND_FLOOR)


def written(value: float, unit: Unit) -> str:
    """Write a value as a list would hold it; a vacuum below zero is a gauge pressure above it.

    >>> from instruments.unit import read_unit
    >>> written(12.5, read_unit("barg")), written(-3.0, read_unit("inHg vac"))
    ('12.5 barg', '3 inHg(g)')
    """
    if value < 0.0 and unit.reference == "vacuum":
        return written(-value, unit.referred_to("gauge"))
    return f"{format_number(value)} {unit_label(unit)}"


def range_change(measurement: Measurement, lrv: float, urv: float, unit: Unit) -> Mapping[str, str]:
    """Return the cells that give the field range new ends, and the system range with it where the two are one now."""
    field = measurement.field
    change: dict[str, str] = {}
    if field is None or _moved(field.lrv, lrv, unit):
        change["LRV"] = written(lrv, unit)
    if field is None or _moved(field.urv, urv, unit):
        change["URV"] = written(urv, unit)
    system = measurement.system
    if field is not None and system is not None and system.unit is not None and are_one(measurement, field, system):
        for name, title in (("LRV", "system LRV"), ("URV", "system URV")):
            if name in change:
                value = lrv if name == "LRV" else urv
                number = in_unit(value * (unit.factor or 1.0) + unit.offset, system.unit)
                change[title] = written(number, system.unit)
    return change


def _moved(end: Quantity, value: float, unit: Unit) -> bool:
    return end.unit is not unit or abs(end.number - value) > SLACK * max(abs(end.number), abs(value))


def are_one(measurement: Measurement, field: Scale, system: Scale) -> bool:
    """Whether a field range and a system range are the same one, whatever unit each is written in."""
    if field.unit is None or system.unit is None or not same_dimension(field.unit, system.unit):
        return False
    if {measurement.reference(field.urv), measurement.reference(system.urv)} >= {"gauge", "absolute"}:
        return False
    tolerance = SAME_RANGE * field.span
    return abs(at(field.lrv) - at(system.lrv)) <= tolerance and abs(at(field.urv) - at(system.urv)) <= tolerance


def read_both_ways(
    check: Callable[[str], Verdict], pressures: Iterable[tuple[float, str | None]], plant: Plant
) -> Verdict:
    """Work a check with what the plant takes for an unstated reference, and with the other reading where there is one.

    Parameters
    ----------
    check
        Takes what an unstated reference is read as.
    pressures
        All pressures that it compares, in Pa, with their references; None for one that nothing tells.

    Returns
    -------
    Verdict
        The check's own where both readings come to the same; else a review that names the assumption.
    """
    default = plant.data.default_reference
    ways = ways_to_read(pressures, default=default)
    first = check(default)
    if len(ways) == 1 or isinstance(first, Unchecked):
        return first
    other = check(ways[1])
    if _finds(first) == _finds(other) or isinstance(other, Unchecked):
        return first
    assumed = (f"a pressure without a reference, of no stated body, is read as {default}",)
    found = first if _finds(first) else other
    readings = f"read as {ways[0] if _finds(first) else ways[1]}"
    return [_as_review(each, readings, assumed) for each in each_found(found)]


def _finds(verdict: Verdict) -> bool:
    return any(True for _ in each_found(verdict))


def each_found(verdict: Verdict) -> Iterator[Found]:
    """Yield what a verdict finds; nothing where it finds nothing."""
    if isinstance(verdict, Found):
        yield verdict
    elif isinstance(verdict, Sequence):
        yield from verdict


def _as_review(found: Found, reading: str, assumed: tuple[str, ...]) -> Review:
    return Review(
        values=found.values,
        fields=found.fields,
        part=found.part,
        found=f"{found.found}, {reading}",
        wanted=found.wanted,
        off_by=found.off_by,
        working=found.working,
        assumed=assumed,
        fixes=found.fixes,
        message=found.message,
        cells=found.cells,
    )


def with_fixes(verdict: Verdict, fixes: Callable[[Found], tuple[Fix, ...]]) -> Verdict:
    """Return a verdict with the fixes of each thing that it finds."""
    if isinstance(verdict, Found):
        return replace(verdict, fixes=fixes(verdict))
    if isinstance(verdict, Sequence):
        return [replace(each, fixes=fixes(each)) for each in verdict]
    return verdict
