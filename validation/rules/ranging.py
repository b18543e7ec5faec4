"""RNG: whether a calibrated range is one at all, can exist, and is held by its body."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.measurement import Measurement, Scale, amount, at, difference_in, from_to, in_unit, same_dimension
from instruments.plant_data import STANDARD_ATMOSPHERE_PA
from instruments.pressure import rounding
from instruments.quantity import Quantity, format_number
from instruments.span import (
    SLACK,
    above,
    beyond_limit,
    nearest_range_inside,
    nearest_zero_shift,
    range_with_span,
    smallest_span,
    turndown,
)
from instruments.unit import Unit, UnitMismatch, difference, unit_label
from loops.plant import Plant
from validation.bodies import body_check, measured, ranged_body, type_fixes, with_range, with_span
from validation.finding import Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.mending import range_change, rounded_down, rounded_up, with_fixes, written
from validation.rule import Subject, rule
from validation.rules.pressure_references import BY_RNG06, mixed_references

TURNDOWN_THRESHOLD: Final = "RNG04 maximum turndown"
BODY_UNIT: Final = "range in the unit of the body's limits"
ISA_51: Final = "ANSI/ISA-51.1 for the terms (from memory)"


@rule(
    "RNG01",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=with_range,
    needs=("lrv|system_lrv", "urv|system_urv"),
    message="{ends} are both {value}",
    basis=ISA_51,
)
def no_span(installed: Installed, plant: Plant) -> Verdict:
    """A range whose LRV equals its URV.

    Why it matters: there is nothing between 4 and 20 mA; a transmitter refuses it, a system divides by zero.

    What to do: give the range its other end. A reversed range (LRV above URV) is legal.

    >>> from validation.example import said
    >>> said("RNG01", [{"tag": "PT-1", "LRV": "10 barg", "URV": "10 barg"}])
    ['PT-1: LRV and URV are both 10 barg']
    >>> said("RNG01", [{"tag": "PT-1", "LRV": "10 barg", "URV": "0 barg"}])
    []
    """
    measurement = measured(installed, plant)
    found: list[Found] = []
    unreadable = False
    for scale, part, fields in (
        (measurement.field, "", ("lrv", "urv")),
        (measurement.system, "system range", ("system_lrv", "system_urv")),
    ):
        if scale is None:
            continue
        if scale.flat and not found:  # both typed twice are one slip
            found.append(
                Found(
                    values={"ends": "system LRV and URV" if part else "LRV and URV", "value": str(scale.urv)},
                    fields=fields,
                    part=part,
                    found=str(scale),
                    wanted="two ends that differ",
                )
            )
        elif not scale.flat and scale.unit is None and scale.lrv.unit is not scale.urv.unit:
            unreadable = True
    if found:
        return found
    return Unchecked("range unit") if unreadable else None


@rule(
    "RNG02",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=ranged_body,
    needs=("lrv", "urv", "type.lrl|type.url"),
    message="{end} {value} is {side} the body's {limit} {limit_value} by {off}",
    basis=ISA_51,
)
def range_outside_body(installed: Installed, plant: Plant) -> Verdict:
    """A range that its body cannot be set to.

    Why it matters: the transmitter cannot be ranged as the list says; what is built instead measures
    something else than the control system believes. Both ends count: a wet leg's LRV is as easily out
    of reach as a URV.

    What to do: take the nearest range that the body holds, or a body that holds the range.

    >>> from validation.example import said
    >>> types = [{"code": "D60", "kind": "transmitter", "body": "differential", "LRL": "-60 inH2O", "URL": "60 inH2O"}]
    >>> said("RNG02", [{"tag": "LT-1", "device type": "D60", "LRV": "-84 inH2O", "URV": "-29 inH2O"}], types=types)
    ["LT-1: LRV -84 inH2O is below the body's LRL -60 inH2O by 24 inH2O"]
    >>> said("RNG02", [{"tag": "LT-1", "device type": "D60", "LRV": "-60 inH2O", "URV": "-29 inH2O"}], types=types)
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(
        outside_body(measurement, plant),
        lambda found: (*_nearest_inside(measurement), *type_fixes("RNG02", measurement, plant)),
    )


@body_check("RNG02")
def outside_body(measurement: Measurement, plant: Plant) -> Verdict:
    """RNG02 without its fixes."""
    field, device = measurement.field, measurement.installed.type
    if field is None or device is None or (device.lrl is None and device.url is None):
        return Unchecked("LRV", "URV", "LRL", "URL")
    trouble = _not_comparable(measurement, device.lrl, device.url)
    if trouble is not None:
        return trouble
    low = None if device.lrl is None else at(device.lrl)
    high = None if device.url is None else at(device.url)
    if low is not None and high is not None:
        if low > high:
            return Unchecked("LRL below URL")
        if low <= field.low and field.high <= high:
            return None
    found: list[Found] = []
    for end, name, value in (("LRV", "lrv", field.lrv), ("URV", "urv", field.urv)):
        off = beyond_limit(at(value), low, high)
        if off == 0.0:
            continue
        limit, limit_name, limit_value = (
            ("URL", "type.url", device.url) if off > 0.0 else ("LRL", "type.lrl", device.lrl)
        )
        assert limit_value is not None
        assert value.unit is not None
        found.append(
            Found(
                values={
                    "end": end,
                    "value": str(value),
                    "side": "above" if off > 0.0 else "below",
                    "limit": limit,
                    "limit_value": str(limit_value),
                    "off": amount(off, value.unit),
                },
                fields=(name, limit_name),
                part=end,
                found=str(value),
                wanted=f"{'at most' if off > 0.0 else 'at least'} {limit_value}",
                off_by=amount(off, value.unit),
                working=_in_one_unit(value, limit_value),
            )
        )
    if found:
        return found
    blank = tuple(title for title, limit in (("LRL", device.lrl), ("URL", device.url)) if limit is None)
    return Unchecked(*blank) if blank else None


def _not_comparable(measurement: Measurement, *limits: Quantity | None) -> Unchecked | None:
    """Why a field range cannot be compared with the limits of its body."""
    field = measurement.field
    if field is None or field.unit is None:
        return Unchecked("range unit")
    for limit in limits:
        if limit is None:
            continue
        if limit.unit is None:
            return Unchecked("limit unit")
        if not same_dimension(limit.unit, field.unit):
            return Unchecked(BODY_UNIT)
    if field.is_pressure and mixed_references(measurement):
        return Unchecked(BY_RNG06)
    return None


def _in_one_unit(value: Quantity, limit: Quantity) -> str:
    """Show the limit in the unit of the value, where it is written in another."""
    if value.unit is None or limit.unit is None or value.unit.canonical == limit.unit.canonical:
        return ""
    return f"{limit} = {written(in_unit(at(limit), value.unit), value.unit.referred_to(limit.unit.reference or ''))}"


def _hold_zero(field: Scale) -> bool:
    return field.lrv.number == 0.0 or field.urv.number == 0.0


def _limits_in(measurement: Measurement, unit: Unit) -> tuple[float, float] | None:
    device = measurement.installed.type
    if device is None or device.lrl is None or device.url is None:
        return None
    low, high = in_unit(at(device.lrl), unit), in_unit(at(device.url), unit)
    return (low, high) if low < high else None


def _nearest_inside(measurement: Measurement) -> tuple[Fix, ...]:
    field = measurement.field
    assert field is not None
    assert field.unit is not None
    unit = field.unit
    if (unit.factor or 0.0) < 0.0:
        return ()  # a vacuum is counted the other way
    limits = _limits_in(measurement, unit)
    if limits is None:
        return _cut_at_the_limit(measurement)
    lrv, urv = in_unit(at(field.lrv), unit), in_unit(at(field.urv), unit)
    # An engineer shortens a range that begins at zero and does not lift its zero; a square root needs it there.
    lrv, urv = nearest_range_inside(lrv, urv, *limits, hold_zero=_hold_zero(field))
    if lrv < urv:
        lrv, urv = rounded_up(lrv), rounded_down(urv)
    else:
        lrv, urv = rounded_down(lrv), rounded_up(urv)
    return _range_fix(measurement, lrv, urv, "nearest range inside the body")


def _cut_at_the_limit(measurement: Measurement) -> tuple[Fix, ...]:
    """Cut the range at the one limit that is stated."""
    field, device = measurement.field, measurement.installed.type
    assert field is not None
    assert field.unit is not None
    assert device is not None
    unit = field.unit
    low, high = in_unit(field.low, unit), in_unit(field.high, unit)
    if device.url is not None:
        high = min(high, rounded_down(in_unit(at(device.url), unit)))
    if device.lrl is not None:
        low = max(low, rounded_up(in_unit(at(device.lrl), unit)))
    if low >= high:
        return ()
    lrv, urv = (high, low) if field.reversed else (low, high)
    return _range_fix(measurement, lrv, urv, "nearest range inside the body")


def _range_fix(measurement: Measurement, lrv: float, urv: float, why: str) -> tuple[Fix, ...]:
    field = measurement.field
    assert field is not None
    assert field.unit is not None
    change = range_change(measurement, lrv, urv, field.unit)
    if not change or lrv == urv:
        return ()
    return (Fix(text=f"{why}: {format_number(lrv)} to {written(urv, field.unit)}", change=change),)


@rule(
    "RNG03",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=ranged_body,
    needs=("lrv", "urv", "type.minimum_span"),
    message="the span {span} is below the body's minimum span {least} by {off}",
    basis=ISA_51,
)
def span_too_small(installed: Installed, plant: Plant) -> Verdict:
    """A span below the minimum span of its body.

    Why it matters: the transmitter refuses it, or holds none of its figures for accuracy and drift.

    What to do: widen the range to the smallest span, or take a body for small spans.

    >>> from validation.example import said
    >>> types = [{"code": "G", "kind": "transmitter", "LRL": "0 psig", "URL": "1000 psig", "minimum span": "50 psi"}]
    >>> said("RNG03", [{"tag": "PT-1", "device type": "G", "LRV": "50 psig", "URV": "90 psig"}], types=types)
    ["PT-1: the span 40 psi is below the body's minimum span 50 psi by 10 psi"]
    >>> said("RNG03", [{"tag": "PT-1", "device type": "G", "LRV": "50 psig", "URV": "100 psig"}], types=types)
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(
        below_minimum_span(measurement, plant),
        lambda found: (*_smallest_span(measurement, plant), *type_fixes("RNG03", measurement, plant)),
    )


@body_check("RNG03")
def below_minimum_span(measurement: Measurement, plant: Plant) -> Verdict:
    """RNG03 without its fixes."""
    field, device = measurement.field, measurement.installed.type
    if field is None or device is None or device.minimum_span is None:
        return Unchecked("minimum span")
    trouble = _not_comparable(measurement)
    if trouble is not None:
        return trouble
    unit, least_unit = field.unit, device.minimum_span.unit
    assert unit is not None
    if least_unit is unit and field.span >= abs(device.minimum_span.number * (unit.factor or 1.0)):
        return None
    least = _span_in(device.minimum_span, unit)
    if least is None:
        return Unchecked("limit unit" if least_unit is None else BODY_UNIT)
    span = difference_in(field.span, unit)
    if not above(least, span):
        return None
    shown = f"{format_number(span)} {_span_label(unit)}"
    return Found(
        values={
            "span": shown,
            "least": f"{format_number(least)} {_span_label(unit)}",
            "off": f"{format_number(least - span)} {_span_label(unit)}",
        },
        fields=("lrv", "urv", "type.minimum_span"),
        found=shown,
        wanted=f"at least {format_number(least)} {_span_label(unit)}",
        off_by=f"{format_number(least - span)} {_span_label(unit)}",
        working=f"{field}: {shown}",
    )


def _span_label(unit: Unit) -> str:
    return unit_label(unit.referred_to("unstated"))


def _span_in(span: Quantity, unit: Unit) -> float | None:
    """Return a span in a unit: 10 K is 10 °C here, and 18 °F."""
    if span.unit is None:
        return None
    try:
        return abs(difference(span.number, span.unit, unit))
    except UnitMismatch:
        return None


def _maximum_turndown(measurement: Measurement, plant: Plant) -> tuple[float | None, bool]:
    """Return the turndown that must not be passed, and whether the type states it (else the plant)."""
    device = measurement.installed.type
    if device is not None and device.maximum_turndown is not None:
        return device.maximum_turndown, True
    stated = plant.threshold(TURNDOWN_THRESHOLD, 0.0)
    return (stated, False) if stated > 0.0 else (None, False)


def _smallest_span(measurement: Measurement, plant: Plant) -> tuple[Fix, ...]:
    field, device = measurement.field, measurement.installed.type
    assert field is not None
    assert field.unit is not None
    assert device is not None
    unit = field.unit
    least = None if device.minimum_span is None else _span_in(device.minimum_span, unit)
    limits = _limits_in(measurement, unit)
    most, _ = _maximum_turndown(measurement, plant)
    if limits is not None and _turns_down(measurement):
        least = smallest_span(*limits, maximum_turndown=most, minimum_span=least)
    if least is None:
        return ()
    lrv, urv = in_unit(at(field.lrv), unit), in_unit(at(field.urv), unit)
    if limits is None:
        wider: tuple[float, float] | None = (lrv, lrv - least if lrv > urv else lrv + least)
    else:
        wider = range_with_span(lrv, urv, at_least=least, lrl=limits[0], url=limits[1])
    if wider is None:
        return ()
    lrv, urv = wider
    # Written short, the range must be no narrower; where that would carry it past a limit, its other end gives way.
    lrv, urv = (rounded_up(lrv), rounded_down(urv)) if lrv > urv else (rounded_down(lrv), rounded_up(urv))
    return _range_fix(measurement, lrv, urv, f"smallest span {format_number(least)} {_span_label(unit)}")


def _turns_down(measurement: Measurement) -> bool:
    """Whether the body is one of pressure or differential pressure: of others no turndown is asked."""
    field = measurement.field
    return measurement.installed.body is not None or (field is not None and field.is_pressure)


def _turndown_asked(installed: Installed, plant: Plant) -> bool:
    if not ranged_body(installed, plant) or installed.kind is Kind.GAUGE:
        return False
    measurement = measured(installed, plant)
    pressure = _turns_down(measurement) or (measurement.field is None and measurement.variable in ("P", "PD"))
    if not pressure:
        return False
    device = installed.type
    stated = device is not None and device.maximum_turndown is not None
    if stated or device is None or device.minimum_span is None:
        return True
    return plant.threshold(TURNDOWN_THRESHOLD, 0.0) > 0.0


@rule(
    "RNG04",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_turndown_asked,
    needs=("lrv", "urv", "type.url"),
    message="the span {span} of a body {body} is a turndown of {ratio}:1, at most {most}:1 {by}",
    basis="common practice, no source",
)
def turned_down_too_far(installed: Installed, plant: Plant) -> Verdict:
    """A body turned down further than its type, else the plant, allows.

    Why it matters: errors that are a share of the upper limit (drift, temperature, static pressure)
    grow with the turndown, until the measurement is worth nothing though it reads well.

    What to do: take a body for this span. The span counts, not the URV: 300..400 on a body of 500 is 5:1.

    >>> from validation.example import said
    >>> types = [{"code": "G", "kind": "transmitter", "body": "gauge", "LRL": "0 barg", "URL": "500 barg",
    ...           "maximum turndown": "4.9"}]
    >>> said("RNG04", [{"tag": "PT-1", "device type": "G", "LRV": "300 barg", "URV": "400 barg"}], types=types)
    ['PT-1: the span 100 bar of a body 0 to 500 barg is a turndown of 5:1, at most 4.9:1 by its type']
    >>> types[0]["maximum turndown"] = "5"
    >>> said("RNG04", [{"tag": "PT-1", "device type": "G", "LRV": "300 barg", "URV": "400 barg"}], types=types)
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(
        over_turndown(measurement, plant),
        lambda found: (*type_fixes("RNG04", measurement, plant), *_smallest_span(measurement, plant)),
    )


@body_check("RNG04")
def over_turndown(measurement: Measurement, plant: Plant) -> Verdict:
    """RNG04 without its fixes."""
    field, device = measurement.field, measurement.installed.type
    most, of_type = _maximum_turndown(measurement, plant)
    if not _turns_down(measurement) or (most is None and device is not None and device.minimum_span is not None):
        return NotApplicable()
    if field is None or device is None or device.url is None:
        return Unchecked("URL")
    if most is None or most <= 0.0:
        return Unchecked("maximum turndown")
    trouble = _not_comparable(measurement, device.lrl, device.url)
    if trouble is not None:
        return trouble
    unit = device.url.unit
    assert unit is not None
    assert field.unit is not None
    if device.lrl is not None and max(abs(at(device.lrl)), abs(at(device.url))) <= most * field.span:
        return None
    lrl = 0.0 if device.lrl is None else in_unit(at(device.lrl), unit)
    url = in_unit(at(device.url), unit)
    ratio = turndown(lrl, url, difference_in(field.span, unit))
    if not above(ratio, most):
        return Unchecked("LRL") if device.lrl is None else None
    body = f"up to {device.url}" if device.lrl is None else from_to(device.lrl, device.url)
    span = amount(field.span, field.unit)
    shown = f"{ratio:.3g}" if ratio > 1.01 * most else f"{ratio:.10g}"
    fields = ("lrv", "urv", "type.url", *(("type.maximum_turndown",) if of_type else ()))
    return Found(
        values={
            "span": span,
            "body": body,
            "ratio": shown,
            "most": format_number(most),
            "by": "by its type" if of_type else "by the plant",
        },
        fields=fields,
        found=f"{shown}:1",
        wanted=f"at most {format_number(most)}:1",
        off_by=f"{ratio / most:.3g} times",
        working=f"{amount(max(abs(lrl), abs(url)) * (unit.factor or 1.0), unit)} / {span} = {shown}",
    )


def _zero_shift_stated(installed: Installed, plant: Plant) -> bool:
    return (
        installed.type is not None and installed.type.zero_shift_percent is not None and ranged_body(installed, plant)
    )


@rule(
    "RNG05",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_zero_shift_stated,
    needs=("lrv", "urv", "type.url"),
    message="{end} {value} shifts the zero by more than {limit}, {percent} % of the body's URL {url}",
    basis="common practice, no source: the limit is the device type's",
)
def zero_shifted_too_far(installed: Installed, plant: Plant) -> Verdict:
    """A zero shifted further, up or down, than the device type allows.

    Why it matters: simple bodies raise or lower their zero by a small part of the upper limit only;
    beyond it they cannot be adjusted at all.

    What to do: take the nearest LRV, or a body with a smart zero.

    >>> from validation.example import said
    >>> types = [{"code": "S", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "6 barg",
    ...           "zero shift limit": "15"}]
    >>> said("RNG05", [{"tag": "PT-1", "device type": "S", "LRV": "1 barg", "URV": "4 barg"}], types=types)
    ["PT-1: LRV 1 barg shifts the zero by more than 0.9 bar, 15 % of the body's URL 6 barg"]
    >>> said("RNG05", [{"tag": "PT-1", "device type": "S", "LRV": "0.9 barg", "URV": "4 barg"}], types=types)
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(
        zero_beyond_shift(measurement, plant),
        lambda found: (*_nearest_zero(measurement), *type_fixes("RNG05", measurement, plant)),
    )


@body_check("RNG05")
def zero_beyond_shift(measurement: Measurement, plant: Plant) -> Verdict:
    """RNG05 without its fixes."""
    field, device = measurement.field, measurement.installed.type
    if device is None or device.zero_shift_percent is None:
        return NotApplicable()
    if field is None or device.url is None:
        return Unchecked("URL")
    trouble = _not_comparable(measurement, device.url)
    if trouble is not None:
        return trouble
    unit = device.url.unit
    assert unit is not None
    # The zero of a reversed range is its lower end.
    end, name, zero = ("URV", "urv", field.urv) if field.reversed else ("LRV", "lrv", field.lrv)
    url = in_unit(at(device.url), unit)
    shift = in_unit(field.low, unit)
    limit = abs(url) * device.zero_shift_percent / 100.0
    if not above(abs(shift), limit, scale=max(abs(url), difference_in(field.span, unit))):
        return None
    over = f"{format_number(abs(shift) - limit)} {_span_label(unit)}"
    return Found(
        values={
            "end": end,
            "value": str(zero),
            "limit": f"{format_number(limit)} {_span_label(unit)}",
            "percent": format_number(device.zero_shift_percent),
            "url": str(device.url),
        },
        fields=(name, "type.zero_shift_percent", "type.url"),
        found=str(zero),
        wanted=f"between {format_number(-limit)} and {written(limit, unit)}",
        off_by=over,
        working=f"{format_number(device.zero_shift_percent)} % x {device.url} = {written(limit, unit)}",
    )


def _nearest_zero(measurement: Measurement) -> tuple[Fix, ...]:
    field, device = measurement.field, measurement.installed.type
    assert field is not None
    assert field.unit is not None
    assert device is not None
    assert device.url is not None
    unit, url_unit = field.unit, device.url.unit
    assert url_unit is not None
    # A percentage of the URL means something in the URL's own unit: 15 % of 212 °F is no 15 % of 100 °C.
    ends = (in_unit(field.low, url_unit), in_unit(field.high, url_unit))
    shifted = nearest_zero_shift(*ends, in_unit(at(device.url), url_unit), device.zero_shift_percent or 0.0)
    low, high = (in_unit(end * (url_unit.factor or 1.0) + url_unit.offset, unit) for end in shifted)
    span = high - low
    low = rounded_down(low) if low > 0.0 else rounded_up(low)
    high = rounded_down(low + span) if abs(low) != 0.0 else high
    limits = _limits_in(measurement, unit)
    if limits is not None and (beyond_limit(low, *limits) or beyond_limit(high, *limits)):
        return ()
    lrv, urv = (high, low) if field.reversed else (low, high)
    return _range_fix(measurement, lrv, urv, "nearest LRV")


@rule(
    "RNG15",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=with_span,
    needs=("lrv|system_lrv", "urv|system_urv"),
    message="{end} {value} is {what}",
    basis="physics; for pH common practice",
)
def impossible_range(installed: Installed, plant: Plant) -> Verdict:
    """A range that nothing can have.

    Why it matters: no process is below absolute zero or below a full vacuum; a figure has slipped, or a
    unit, and the other figures of the row are no better.

    What to do: correct the figure or its unit.

    >>> from validation.example import said
    >>> said("RNG15", [{"tag": "PT-1", "LRV": "-1.5 barg", "URV": "4 barg"}])
    ['PT-1: LRV -1.5 barg is below a full vacuum, -1.01325 barg']
    >>> said("RNG15", [{"tag": "PT-1", "LRV": "-1 barg", "URV": "4 barg"}])
    []
    """
    measurement = measured(installed, plant)
    found: list[Found | Review] = []
    unread = False
    for scale, names, prefix in (
        (measurement.field, ("lrv", "urv"), ""),
        (measurement.system, ("system_lrv", "system_urv"), "system "),
    ):
        if scale is None or scale.flat:
            continue
        if scale.unit is None:
            unread = True
            continue
        found.extend(_impossible(measurement, scale, names, prefix, plant))
    if found:
        return found
    return Unchecked("range unit") if unread else None


def _impossible(
    measurement: Measurement, scale: Scale, names: tuple[str, str], prefix: str, plant: Plant
) -> Iterator[Found | Review]:
    unit = scale.unit
    assert unit is not None
    ends = ((f"{prefix}LRV", names[0], scale.lrv), (f"{prefix}URV", names[1], scale.urv))
    if unit.kind == "temperature":
        # A difference of temperatures may be any figure.
        if scale.low < -SLACK * abs(scale.high) and measurement.variable != "TD":
            for end, name, value in ends:
                if at(value) < 0.0:
                    assert value.unit is not None
                    lowest = written(in_unit(0.0, value.unit), value.unit)
                    yield _impossible_end(end, name, value, f"below absolute zero, {lowest}", f"at least {lowest}")
    elif unit.kind == "pressure":
        yield from _impossible_pressures(measurement, ends, plant)
    elif unit.canonical.startswith("percent"):
        if scale.high < 0.0 or scale.low > 1.0:
            yield Found(
                values={"value": str(scale)},
                fields=names,
                part=prefix.strip(),
                found=str(scale),
                wanted="a range that touches 0 to 100 %",
                message="a range of {value} does not touch 0 to 100 %",
            )
    elif unit.canonical.startswith("pH"):
        outside = [each for each in ends if beyond_limit(each[2].number, 0.0, 14.0)]
        if outside:
            kind = Found if len(outside) == 2 else Review
            yield kind(
                values={"value": str(scale)},
                fields=tuple(name for _, name, _ in outside),
                part=prefix.strip(),
                found=str(scale),
                wanted="within pH 0 to 14",
                message="a range of {value} ends outside pH 0 to 14" + (" at both ends" if len(outside) == 2 else ""),
            )


def _impossible_end(end: str, name: str, value: Quantity, what: str, wanted: str) -> Found:
    return Found(
        values={"end": end, "value": str(value), "what": what},
        fields=(name,),
        part=end,
        found=str(value),
        wanted=wanted,
    )


def _impossible_pressures(
    measurement: Measurement, ends: Sequence[tuple[str, str, Quantity]], plant: Plant
) -> Iterator[Found]:
    for end, name, value in ends:
        if value.base is None or value.unit is None or at(value) >= 0.0:
            continue
        reference = measurement.reference(value)
        if reference is None:
            if measurement.variable != "P":
                continue  # a level or a flow with no body stated: a differential pressure may be any figure
            reference = "gauge"  # read as absolute it would be impossible at any figure below zero
        if reference == "absolute":
            lowest = written(0.0, value.unit)
            yield _impossible_end(end, name, value, f"below absolute zero, {lowest}", f"at least {lowest}")
        elif reference == "gauge" and _below_vacuum(value, plant):
            unit = value.unit
            lowest = written(in_unit(-_most_vacuum(plant), unit), unit)
            yield _impossible_end(end, name, value, f"below a full vacuum, {lowest}", f"at least {lowest}")


def _most_vacuum(plant: Plant) -> float:
    return max(STANDARD_ATMOSPHERE_PA, plant.data.atmospheric_pa)


def _below_vacuum(value: Quantity, plant: Plant) -> bool:
    """Whether a gauge pressure is below minus one atmosphere, as that is written with as many digits.

    A full vacuum is written -14.7 psig, -30 inHg or -760 mmHg, and each is a little below it.
    """
    assert value.unit is not None
    assert value.unit.factor is not None
    step = rounding(value) * abs(value.unit.factor)
    return above(-_most_vacuum(plant) - step, at(value))
