"""RNG: where the operating values stand in the range: inside it, well inside it, or out by a slip of the unit."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping
from typing import Final, NamedTuple

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.measurement import Measurement, Scale, amount, at, in_unit, same_dimension
from instruments.pressure import can_be
from instruments.quantity import Quantity, format_number
from instruments.span import (
    UnitSlip,
    above,
    below,
    beyond_limit,
    preferred_urv,
    preferred_urv_for_normal,
    smallest_span,
    unit_slips,
)
from instruments.unit import CANONICAL, Unit, UnitMismatch, difference, unit_label
from instruments.unit import unit as unit_of
from loops.plant import Plant
from validation.bodies import measured, with_span
from validation.finding import Fix, Found, NotApplicable, Severity, Unchecked, Verdict
from validation.mending import are_one, each_found, range_change, read_both_ways, rounded_up, with_fixes, written
from validation.rule import Subject, rule, title_of
from validation.rules.pressure_references import BY_RNG06

LOW_PERCENT: Final = 30.0
HIGH_PERCENT: Final = 75.0
NO_SUCH_RANGE: Final = "range in the unit of the operating value"

_SHOWS: Final = frozenset({Kind.INDICATOR, Kind.SOFT_FUNCTION})
_WITHOUT_OPERATION: Final = frozenset({Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR})


def _is_operated(installed: Installed, plant: Plant) -> bool:
    """Whether it measures or shows something that is operated between limits."""
    kind = installed.kind
    measurement = measured(installed, plant)
    if kind is not None and (kind in _SHOWS or kind in _WITHOUT_OPERATION):
        return measurement.ranged and not measurement.flat and measurement.values != (None, None, None)
    if kind is not None and kind.measures != "yes":
        return False
    return with_span(installed, plant)


def _blank_title(measurement: Measurement, place: int) -> str:
    """Return the title of a measured quantity that is blank, with the one that would have served in its place."""
    title = title_of(measurement.names[place])
    end = ("min", "normal", "max")[place]
    if measurement.values == (None, None, None):
        if measurement.names[place].startswith("operating_pressure"):
            return f"operating value {end} or operating pressure {end}"
        if measurement.names[place].startswith("operating_temperature"):
            return f"operating value {end} or operating temperature {end}"
    return title


class _Stands(NamedTuple):
    """One operating value and where it lies, in the base unit, by what its range is referred to."""

    name: str
    value: Quantity
    scale: Scale
    base: float


def _placed(measurement: Measurement, plant: Plant, open_as: str) -> list[_Stands] | Unchecked:
    """Return where the operating values that are given lie; why they cannot be placed, where they cannot."""
    stands: list[_Stands] = []
    for name, value in zip(measurement.names, measurement.values, strict=True):
        if value is None:
            continue
        if value.unit is None:
            return Unchecked(title_of(name))
        scale = measurement.scale_of(value)
        if scale is None:
            return _no_scale(measurement)
        to = measurement.reference(scale.urv) or open_as
        if scale.is_pressure and to != (measurement.reference(scale.lrv) or open_as):
            return Unchecked(BY_RNG06)
        base = measurement.at(value, to=to, open_as=open_as, atmospheric_pa=plant.data.atmospheric_pa)
        if base is None:
            return Unchecked(BY_RNG06)
        stands.append(_Stands(name, value, scale, base))
    return stands


def _no_scale(measurement: Measurement) -> Unchecked:
    field, system = measurement.field, measurement.system
    if field is None and system is None:
        record = measurement.installed.record
        return Unchecked(*(title for title, end in (("LRV", record.lrv), ("URV", record.urv)) if end is None))
    if (field is None or field.unit is None) and (system is None or system.unit is None):
        return Unchecked("range unit")
    return Unchecked(NO_SUCH_RANGE)


def _pressures(measurement: Measurement) -> Iterator[tuple[float, str | None]]:
    """Yield the pressures that are compared: the operating values and the ranges of their dimension."""
    for value in measurement.values:
        if value is None or value.unit is None or value.unit.kind != "pressure":
            continue
        scale = measurement.scale_of(value)
        if scale is not None:
            yield at(value), measurement.reference(value)
            for end in (scale.lrv, scale.urv):
                yield at(end), measurement.reference(end)


def _plain_scale(measurement: Measurement) -> Scale | None:
    """Return the range with which all operating values can be compared as they stand; None where more must be asked.

    They have its very dimension, and are pressures of one reference if they are pressures.
    """
    scale = measurement.field if measurement.field is not None else measurement.system
    if scale is None or scale.unit is None or scale.flat:
        return None
    dimension, reference = scale.unit.dimension, scale.urv.reference
    for value in measurement.values:
        if value is not None:
            unit = value.unit
            if unit is None or unit.dimension != dimension or value.reference != reference or value.base is None:
                return None
    return scale if scale.lrv.reference == reference else None


def _stands_inside(measurement: Measurement) -> bool:
    """Whether minimum and maximum are given and stand inside the range beyond doubt."""
    low, normal, high = measurement.values
    if low is None or high is None:
        return False
    scale = _plain_scale(measurement)
    if scale is None:
        return False
    return all(value is None or scale.low <= at(value) <= scale.high for value in (low, normal, high))


# ------------------------------------------------------------------------------------------------------------ RNG07


@rule(
    "RNG07",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_is_operated,
    message="{what} {value} is {side} the {scale} {range} by {off}",
    basis="common practice",
)
def operated_outside_range(installed: Installed, plant: Plant) -> Verdict:
    """A measured quantity that runs beyond its range.

    Why it matters: the signal saturates and the display stands still while the process goes on; control
    and alarms see a value that is not there.

    What to do: take the next preferred range that holds the operating values, or correct them.

    >>> from validation.example import said
    >>> row = {"tag": "FT-1", "LRV": "0 m3/h", "URV": "1500 m3/h", "operating value min": "0 m3/h"}
    >>> said("RNG07", [{**row, "operating value max": "1650 m3/h"}])
    ['FT-1: operating value max 1650 m³/h is above the range 0 to 1500 m³/h by 150 m³/h']
    >>> said("RNG07", [{**row, "operating value max": "1500 m3/h"}])
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(beyond_range(measurement, plant), lambda found: _wider(measurement, found, plant))


def beyond_range(measurement: Measurement, plant: Plant) -> Verdict:
    """RNG07 without its fixes."""
    if _stands_inside(measurement):
        return None
    if measurement.values == (None, None, None):
        return Unchecked(_blank_title(measurement, 2), _blank_title(measurement, 0))
    return read_both_ways(lambda open_as: _beyond(measurement, plant, open_as), _pressures(measurement), plant)


def _beyond(measurement: Measurement, plant: Plant, open_as: str) -> Verdict:
    stands = _placed(measurement, plant, open_as)
    if isinstance(stands, Unchecked):
        return stands
    found: list[Found] = []
    # A normal value beyond the range tells the same of a maximum that is blank.
    highest, lowest = max(stands, key=_base), min(stands, key=_base)
    size = max(abs(highest.scale.low), abs(highest.scale.high))
    if above(highest.base, highest.scale.high, scale=size):
        found.append(_beyond_end(measurement, highest, "maximum", highest.base - highest.scale.high))
    if below(lowest.base, lowest.scale.low, scale=size):
        found.append(_beyond_end(measurement, lowest, "minimum", lowest.base - lowest.scale.low))
    if found:
        return found
    blank = [_blank_title(measurement, place) for place in (2, 0) if measurement.values[place] is None]
    return Unchecked(*blank) if blank else None


def _base(stands: _Stands) -> float:
    return stands.base


def _beyond_end(measurement: Measurement, stands: _Stands, part: str, off: float) -> Found:
    scale = stands.scale
    unit = scale.unit
    assert unit is not None
    upper = off > 0.0
    end, name = (scale.urv, "urv") if upper is not scale.reversed else (scale.lrv, "lrv")
    in_system = scale is measurement.system
    return Found(
        values={
            "what": title_of(stands.name),
            "value": str(stands.value),
            "side": "above" if upper else "below",
            "scale": "system range" if in_system else "range",
            "range": str(scale),
            "off": amount(off, unit),
        },
        fields=(stands.name, f"system_{name}" if in_system else name),
        part=part,
        found=str(stands.value),
        wanted=f"at {'most' if upper else 'least'} {end}",
        off_by=amount(off, unit),
        working=_converted(measurement, stands),
    )


def _converted(measurement: Measurement, stands: _Stands) -> str:
    """Show a value as its range has it, where it is written otherwise."""
    unit = stands.scale.unit
    assert unit is not None
    number = in_unit(stands.base, unit)
    if (
        stands.value.unit is not None
        and stands.value.unit.canonical == unit.canonical
        and stands.value.number == number
    ):
        return ""
    return f"{stands.value} = {written(number, unit)}"


# ------------------------------------------------------------------------------- ranges that would hold the operation


def _wider(measurement: Measurement, found: Found, plant: Plant) -> tuple[Fix, ...]:
    """Return the next preferred end of the range that holds the value which is beyond it."""
    stands = _placed(measurement, plant, plant.data.default_reference)
    if isinstance(stands, Unchecked):
        return ()
    upper = found.part == "maximum"
    chosen = max(stands, key=_base) if upper else min(stands, key=_base)
    scale = chosen.scale
    unit = scale.unit
    if unit is None or unit.kind == "ratio" or (unit.factor or 0.0) < 0.0:
        return ()  # nobody lays a percentage wider, and a vacuum is counted the other way
    value = in_unit(chosen.base, unit)
    if upper:
        _, high = _body_limits(measurement, scale)
        end = preferred_urv(value, at_most=high)
        return () if end is None else _with_upper_end(measurement, scale, end, "next preferred URV")
    if value >= 0.0:
        return _with_lower_end(measurement, scale, 0.0)
    return _with_lower_end(measurement, scale, -_round_depth(-value))


def _round_depth(depth: float) -> float:
    """Return the next of 1, 2, 5 x 10^n: how far below zero ranges are laid."""
    decade = float(f"1e{math.floor(math.log10(depth))}")
    return next(step * decade for step in (1.0, 2.0, 5.0, 10.0) if not below(step * decade, depth))


def _body_limits(measurement: Measurement, scale: Scale) -> tuple[float | None, float | None]:
    """Return what the body allows in the unit of a range: a flow by the root of its differential pressure."""
    device, unit, field = measurement.installed.type, scale.unit, measurement.field
    if device is None or unit is None:
        return None, None
    low = high = None
    if scale is field:
        if device.lrl is not None and device.lrl.unit is not None and same_dimension(device.lrl.unit, unit):
            low = in_unit(at(device.lrl), unit)
        if device.url is not None and device.url.unit is not None and same_dimension(device.url.unit, unit):
            high = in_unit(at(device.url), unit)
    elif field is not None and _is_dp_flow(measurement, scale) and device.url is not None:
        if device.url.unit is not None and field.unit is not None and same_dimension(device.url.unit, field.unit):
            high = in_unit(scale.high, unit) * math.sqrt(max(at(device.url), 0.0) / field.high)
        low = 0.0
    return low, high


def _is_dp_flow(measurement: Measurement, scale: Scale) -> bool:
    """Whether a range in the system is the root of a differential pressure, both from zero."""
    field = measurement.field
    return (
        measurement.variable == "F"
        and scale is measurement.system
        and field is not None
        and field.is_pressure
        and not scale.is_pressure
        and field.lrv.number == scale.lrv.number == 0.0
        and field.high > 0.0
    )


def _with_upper_end(measurement: Measurement, scale: Scale, end: float, why: str) -> tuple[Fix, ...]:
    unit = scale.unit
    assert unit is not None
    if scale is measurement.field:
        lrv, urv = in_unit(at(scale.lrv), unit), in_unit(at(scale.urv), unit)
        lrv, urv = (end, urv) if scale.reversed else (lrv, end)
        change = range_change(measurement, lrv, urv, unit)
    else:
        change = {"system LRV" if scale.reversed else "system URV": written(end, unit)}
        if _is_dp_flow(measurement, scale):
            change = {**change, **_dp_for(measurement, scale, end)}
        elif measurement.field is not None:
            return ()  # a level or a count that the field range stands for: what it must become nobody can tell here
    text = f"{why} {written(end, unit)}"
    if "URV" in change and scale is not measurement.field:
        text += f", at {change['URV']}"
    return (Fix(text=text, change=change),)


def _dp_for(measurement: Measurement, scale: Scale, end: float) -> Mapping[str, str]:
    """Return the differential pressure of another flow: it goes with the square."""
    field, unit = measurement.field, scale.unit
    assert field is not None
    assert field.unit is not None
    assert unit is not None
    ratio = end / in_unit(scale.high, unit)
    return {"URV": written(rounded_up(in_unit(field.high * ratio * ratio, field.unit)), field.unit)}


def _with_lower_end(measurement: Measurement, scale: Scale, end: float) -> tuple[Fix, ...]:
    unit = scale.unit
    assert unit is not None
    low, high = _body_limits(measurement, scale)
    if scale is not measurement.field or beyond_limit(end, low, high):
        return ()
    if scale.is_pressure and not can_be(end * (unit.factor or 1.0), measurement.reference(scale.lrv) or "gauge"):
        return ()
    lrv, urv = in_unit(at(scale.lrv), unit), in_unit(at(scale.urv), unit)
    lrv, urv = (lrv, end) if scale.reversed else (end, urv)
    change = range_change(measurement, lrv, urv, unit)
    return (Fix(text=f"{'URV' if scale.reversed else 'LRV'} {written(end, unit)}", change=change),)


# ------------------------------------------------------------------------------------------------------------ RNG08

_VARIABLES: Final = frozenset({"P", "PD", "T", "TD", "F", "L"})


def _has_a_normal_place(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if kind is not None and kind.measures != "yes":
        return False
    return measured(installed, plant).variable in _VARIABLES and with_span(installed, plant)


def _percents(plant: Plant) -> tuple[float, float]:
    return plant.threshold("RNG08 low %", LOW_PERCENT), plant.threshold("RNG08 high %", HIGH_PERCENT)


@rule(
    "RNG08",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_has_a_normal_place,
    message="{what} {value} stands at {percent} of the {scale} {range}{of_flow}, outside {low} to {high} %",
    basis="common practice: operation between a third and three quarters of the span",
)
def normal_at_an_end(installed: Installed, plant: Plant) -> Verdict:
    """A normal value that stands near an end of its range.

    Why it matters: near the bottom the error of a few tenths of the span is a large part of the reading;
    near the top there is nothing left for an upset.

    What to do: take the next preferred range that puts the normal value inside. A flow by differential
    pressure counts by its flow: a tenth of the flow is a hundredth of the differential pressure.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "LRV": "0 barg", "URV": "10 barg"}
    >>> said("RNG08", [{**row, "operating value normal": "2.9 barg"}])
    ['PT-1: operating value normal 2.9 barg stands at 29 % of the range 0 to 10 barg, outside 30 to 75 %']
    >>> said("RNG08", [{**row, "operating value normal": "3 barg"}])
    []
    """
    measurement = measured(installed, plant)
    normal = measurement.values[1]
    if normal is None:
        return Unchecked(_blank_title(measurement, 1))
    if normal.number == 0.0:
        return NotApplicable("the normal value is zero")
    if normal.unit is None:
        return Unchecked(title_of(measurement.names[1]))
    scale = _plain_scale(measurement)
    if scale is not None and not (scale.is_pressure and measurement.variable == "F"):
        low, high = _percents(plant)
        if low <= 100.0 * (at(normal) - scale.low) / scale.span <= high:
            return None
    verdict = read_both_ways(lambda open_as: _off_place(measurement, plant, open_as), _pressures(measurement), plant)
    return with_fixes(verdict, lambda found: _range_for_normal(measurement, plant))


def _off_place(measurement: Measurement, plant: Plant, open_as: str) -> Verdict:
    stands = _placed(measurement, plant, open_as)
    if isinstance(stands, Unchecked):
        return stands
    normal = next(each for each in stands if each.name == measurement.names[1])
    scale = normal.scale
    low, high = _percents(plant)
    # Reversed or not, the room above the value is what counts: from the lower end.
    percent = 100.0 * (normal.base - scale.low) / scale.span
    by_root = measurement.variable == "F" and scale.is_pressure
    if by_root and percent > 0.0:
        percent = 100.0 * math.sqrt(percent / 100.0)
    off = beyond_limit(percent, low, high)
    if off == 0.0:
        return None
    in_system = scale is measurement.system
    ends = ("system_lrv", "system_urv") if in_system else ("lrv", "urv")
    return Found(
        values={
            "what": title_of(normal.name),
            "value": str(normal.value),
            "percent": f"{format_number(round(percent, 1))} %",
            "scale": "system range" if in_system else "range",
            "range": str(scale),
            "of_flow": " counted as flow" if by_root else "",
            "low": format_number(low),
            "high": format_number(high),
        },
        fields=(normal.name, *ends),
        found=f"{format_number(round(percent, 1))} %",
        wanted=f"{format_number(low)} to {format_number(high)} %",
        off_by=f"{format_number(round(abs(off), 1))} %",
        working=_converted(measurement, normal),
    )


def _range_for_normal(measurement: Measurement, plant: Plant) -> tuple[Fix, ...]:
    stands = _placed(measurement, plant, plant.data.default_reference)
    if isinstance(stands, Unchecked):
        return ()
    normal = next(each for each in stands if each.name == measurement.names[1])
    scale = normal.scale
    unit = scale.unit
    if unit is None or scale.reversed or unit.kind == "ratio" or (measurement.variable == "F" and scale.is_pressure):
        return ()
    low_percent, high_percent = _percents(plant)
    _, high = _body_limits(measurement, scale)
    lrv = in_unit(scale.low, unit)
    reach = [in_unit(each.base, unit) for each in stands if each.scale is scale]
    end = preferred_urv_for_normal(
        in_unit(normal.base, unit),
        lrv,
        low_percent=low_percent,
        high_percent=high_percent,
        at_least=max((*reach, *_settings_in(measurement, scale, plant))),
        at_most=high,
    )
    if end is None or (scale is measurement.field and _too_narrow(measurement, end - lrv, plant)):
        return ()
    return _with_upper_end(measurement, scale, end, "next preferred URV")


_SETTINGS: Final = ("setting_ll", "setting_l", "setting_h", "setting_hh", "trip")


def _settings_in(measurement: Measurement, scale: Scale, plant: Plant) -> Iterator[float]:
    """Yield the settings in the unit of a range: a narrower range must still hold them."""
    unit, default = scale.unit, plant.data.default_reference
    assert unit is not None
    to = measurement.reference(scale.urv) or default
    for name in _SETTINGS:
        value: Quantity | None = getattr(measurement.installed.record, name)
        if value is not None and scale.measures(value):
            base = measurement.at(value, to=to, open_as=default, atmospheric_pa=plant.data.atmospheric_pa)
            if base is not None:
                yield in_unit(base, unit)


def _too_narrow(measurement: Measurement, span: float, plant: Plant) -> bool:
    device, field = measurement.installed.type, measurement.field
    if device is None or field is None or field.unit is None:
        return False
    least = None
    if device.minimum_span is not None and device.minimum_span.unit is not None:
        try:
            least = abs(difference(device.minimum_span.number, device.minimum_span.unit, field.unit))
        except UnitMismatch:
            return False
    low, high = _body_limits(measurement, field)
    most = device.maximum_turndown or plant.threshold("RNG04 maximum turndown", 0.0)
    if low is not None and high is not None and most > 0.0 and field.is_pressure:
        least = smallest_span(low, high, maximum_turndown=most, minimum_span=least)
    return least is not None and below(span, least)


# ------------------------------------------------------------------------------------------------------------ RNG16


@rule(
    "RNG16",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_is_operated,
    message="the operating values would fit the {scale} {range} {slip}",
    basis="common practice: the slips that lists have",
)
def unit_slipped(installed: Installed, plant: Plant) -> Verdict:
    """Operating values out of range that a slip of the unit would explain.

    Why it matters: it says what RNG07 is about: not a range too small but figures in another unit, and
    whatever else was sized with them is wrong by the same factor.

    What to do: correct the unit of the operating values, or that of the range.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "LRV": "0 barg", "URV": "10 barg"}
    >>> said("RNG16", [{**row, "operating value normal": "600 barg", "operating value max": "800 barg"}])
    ['PT-1: the operating values would fit the range 0 to 10 barg if they are in kPag']
    >>> said("RNG16", [{**row, "operating value normal": "6 barg", "operating value max": "16 barg"}])
    []
    """
    measurement = measured(installed, plant)
    verdict = beyond_range(measurement, plant)
    if isinstance(verdict, Unchecked):
        return verdict
    finds = list(each_found(verdict))
    if not finds or type(finds[0]) is not Found:
        return None
    normal = measurement.values[1]
    if normal is None or normal.unit is None:
        return Unchecked(title_of(measurement.names[1]))
    return _explained_by_a_slip(measurement, normal, plant)


def _explained_by_a_slip(measurement: Measurement, normal: Quantity, plant: Plant) -> Verdict:
    scale, unit = measurement.scale_of(normal), normal.unit
    assert unit is not None
    if scale is None or scale.unit is None:
        return Unchecked(NO_SUCH_RANGE)
    ends = _range_as_operated(measurement, scale, normal, plant)
    if ends is None:
        return Unchecked(BY_RNG06)
    low, high = _percents(plant)
    given = [
        (name, _number_in(value, unit))
        for name, value in zip(measurement.names, measurement.values, strict=True)
        if value is not None
    ]
    numbers = dict(given)
    slips = unit_slips(
        *ends,
        normal=normal.number,
        op_min=numbers.get(measurement.names[0]),
        op_max=numbers.get(measurement.names[2]),
        unit_kind=unit.kind,
        low_percent=low,
        high_percent=high,
    )
    if not slips:
        return None
    texts: list[str] = []
    fixes: list[Fix] = []
    for slip in slips:
        other = unit_meant(unit, slip)
        if other is not None and not _inside(numbers.values(), ends, unit, other):
            other = None  # the slip is rounded, and what it rounds off is the difference here
        ranged = None if slip.offset else unit_meant(scale.unit, _turned_round(slip))
        if other is not None:
            change = {title_of(name): written(number, other) for name, number in given}
            texts.append(f"if they are in {unit_label(other)}")
            fixes.append(Fix(text=f"operating values in {unit_label(other)}", change=change))
        if ranged is not None:
            texts.append(f"if the range is in {unit_label(ranged)}")
            fixes.append(_range_in(measurement, scale, ranged))
        if other is None and ranged is None:
            texts.append(f"if they are {_by_how_much(slip)}")
            fixes.append(Fix(text=f"operating values {_by_how_much(slip)}"))
    return Found(
        values={
            "scale": "system range" if scale is measurement.system else "range",
            "range": str(scale),
            "slip": ", or ".join(texts),
        },
        fields=tuple(numbers),
        found=str(normal),
        wanted=", or ".join(texts),
        working="; ".join(
            f"{normal} {_by_how_much(slip)} is {written(slip.mended(normal.number), unit)}" for slip in slips
        ),
        fixes=tuple(fixes),
    )


def _inside(numbers: Iterable[float], ends: tuple[float, float], unit: Unit, other: Unit) -> bool:
    """Whether figures read in another unit stand inside a range given in the unit that they are written in."""
    bases = (number * (other.factor or 1.0) + other.offset for number in numbers)
    return not any(beyond_limit(in_unit(base, unit), *ends) for base in bases)


def _turned_round(slip: UnitSlip) -> UnitSlip:
    """Return the slip that the range would have where the operating values have none."""
    return UnitSlip(name=slip.name, factor=1.0 / slip.factor)


def _range_in(measurement: Measurement, scale: Scale, unit: Unit) -> Fix:
    lrv, urv = written(scale.lrv.number, unit), written(scale.urv.number, unit)
    if scale is measurement.system:
        change = {"system LRV": lrv, "system URV": urv}
    else:
        change = {"LRV": lrv, "URV": urv}
        if measurement.system is not None and are_one(measurement, scale, measurement.system):
            change |= {"system LRV": lrv, "system URV": urv}
    return Fix(text=f"range {format_number(scale.lrv.number)} to {urv}", change=change)


def _range_as_operated(
    measurement: Measurement, scale: Scale, normal: Quantity, plant: Plant
) -> tuple[float, float] | None:
    """Return the ends of the range as the operating values would be written: in their unit and their reference."""
    unit, default = normal.unit, plant.data.default_reference
    assert unit is not None
    to = measurement.reference(normal) or default
    ends = [
        measurement.at(end, to=to, open_as=default, atmospheric_pa=plant.data.atmospheric_pa)
        for end in (scale.lrv, scale.urv)
    ]
    if ends[0] is None or ends[1] is None:
        return None
    low, high = sorted((in_unit(ends[0], unit), in_unit(ends[1], unit)))
    return low, high


def _number_in(value: Quantity, unit: Unit) -> float:
    return value.number if value.unit is unit else in_unit(at(value), unit)


# The factors of a slip are rounded (14.5 for 14.5038, 1.02 for 1.01972).
_SAME_FACTOR: Final = 1e-3


def unit_meant(unit: Unit, slip: UnitSlip) -> Unit | None:
    """Return the unit in which figures would be right as they stand; None where the table has none.

    >>> from instruments.unit import read_unit
    >>> str(unit_meant(read_unit("barg"), UnitSlip(name="/ 1000", factor=0.001)))
    'mbarg'
    """
    if slip.offset:
        return unit_of("degF" if unit.canonical == "degC" else "degC")
    if unit.factor is None:
        return None
    for canonical in CANONICAL:
        other = unit_of(canonical)
        if "@" in canonical or other.dimension != unit.dimension or other.factor is None:
            continue
        if other.offset != unit.offset:
            continue
        if abs(other.factor / (abs(unit.factor) * slip.factor) - 1.0) <= _SAME_FACTOR:
            return other.referred_to(unit.reference) if unit.reference is not None else other
    return None


def _by_how_much(slip: UnitSlip) -> str:
    if slip.offset:
        return "in °F" if slip.factor < 1.0 else "in °C"
    if slip.factor >= 1.0:
        return f"times {format_number(slip.factor)}"
    return f"divided by {format_number(round(1.0 / slip.factor, 6))}"
