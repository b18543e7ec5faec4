"""RNG06: gauge, absolute and differential pressure within one instrument."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final, NamedTuple

from instruments.installed import Installed
from instruments.measurement import Measurement, at, in_unit
from instruments.pressure import referred, stated_reference
from instruments.quantity import Quantity, format_number
from loops.plant import Plant
from validation.bodies import measured, stands_on_a_body
from validation.finding import Found, Review, Severity, Unchecked, Verdict
from validation.mending import written
from validation.rule import Subject, rule

BY_RNG06: Final = "reference (RNG06)"
"""Why RNG02 to RNG05 are unchecked where references are mixed."""

_SETTINGS: Final = (
    ("setting_ll", "LL"),
    ("setting_l", "L"),
    ("setting_h", "H"),
    ("setting_hh", "HH"),
    ("trip", "trip"),
    ("set_pressure", "set pressure"),
)
_ORDER: Final = {"gauge": 0, "absolute": 1, "differential": 2}


class _Told(NamedTuple):
    """One thing of an instrument that says what its pressures are referred to."""

    reference: str
    name: str
    shown: object
    fields: tuple[str, ...]


def _is_pressure(quantity: Quantity | None) -> bool:
    return quantity is not None and quantity.unit is not None and quantity.unit.kind == "pressure"


def _told(measurement: Measurement) -> list[_Told]:
    installed = measurement.installed
    record, device, body = installed.record, installed.type, installed.body
    told: list[_Told] = []
    for scale, name, fields in (
        (measurement.field, "range", ("lrv", "urv")),
        (measurement.system, "system range", ("system_lrv", "system_urv")),
    ):
        if scale is None or not scale.is_pressure:
            continue
        low, high = (stated_reference(end, body=body) for end in (scale.lrv, scale.urv))
        if low is not None:
            told.append(_Told(low, name, scale, fields))
        if high is not None and high != low:
            told.append(_Told(high, name, scale, fields))
    ranged = {each.reference for each in told}
    for field, name in _SETTINGS:
        value: Quantity | None = getattr(record, field)
        if value is not None and _is_pressure(value):
            reference = stated_reference(value, body=body)
            # A setting that goes with the range tells nothing new.
            if reference is not None and reference not in ranged:
                told.append(_Told(reference, name, value, (field,)))
    if body is not None:
        stated = device is not None and device.body is not None
        told.append(_Told(body, "body", body, ("type.body" if stated else "type.url",)))
    if device is not None:
        for limit, name, field in ((device.lrl, "LRL", "type.lrl"), (device.url, "URL", "type.url")):
            if limit is not None and _is_pressure(limit):
                reference = stated_reference(limit, body=body)
                if reference is not None and reference != body:
                    told.append(_Told(reference, name, limit, (field,)))
    return told


def mixed_references(measurement: Measurement) -> bool:
    """Whether RNG06 finds that references are mixed; a gauge range on a differential body it only reviews."""
    if measurement.mixed is None:
        if _agrees(measurement):
            measurement.mixed = False
        else:
            told = _told(measurement)
            references = {each.reference for each in told}
            measurement.mixed = len(references) > 1 and not _is_vented(measurement, told, references)
    return measurement.mixed


_SAYS_NOTHING: Final = frozenset({None, "unstated"})


def _agrees(measurement: Measurement) -> bool:
    """Whether all references are the same as they are written, so that nothing more need be asked."""
    installed = measurement.installed
    record, device, field, system = installed.record, installed.type, measurement.field, measurement.system
    values = [
        record.setting_ll,
        record.setting_l,
        record.setting_h,
        record.setting_hh,
        record.trip,
        record.set_pressure,
    ]
    if field is not None:
        values += (field.lrv, field.urv)
    if system is not None:
        values += (system.lrv, system.urv)
    if device is not None:
        values += (device.lrl, device.url)
    references = {value.reference for value in values if value is not None}
    references.add(installed.body)
    return len(references - _SAYS_NOTHING) < 2


def _is_vented(measurement: Measurement, told: Sequence[_Told], references: set[str]) -> bool:
    """Whether all that is gauge stands on a differential body: right where its low side is open to the atmosphere."""
    return (
        references == {"gauge", "differential"}
        and measurement.installed.body == "differential"
        and all((each.name == "body") == (each.reference == "differential") for each in told)
        and all(each.name not in ("LRL", "URL") for each in told)
    )


def _with_pressures(installed: Installed, plant: Plant) -> bool:
    measurement = measured(installed, plant)
    if measurement.flat:
        return False
    field, system, record = measurement.field, measurement.system, installed.record
    in_field = field is not None and field.is_pressure
    on_a_body = stands_on_a_body(installed)
    if in_field and on_a_body:
        return True
    in_system = system is not None and system.is_pressure
    settings = (record.setting_ll, record.setting_l, record.setting_h, record.setting_hh, record.trip)
    in_settings = any(map(_is_pressure, (*settings, record.set_pressure)))
    if not on_a_body:
        # A function of the system or a valve has no body, but what it states must agree.
        pressures = in_field + in_system + in_settings
        return pressures > 1 or (pressures == 1 and installed.body is not None)
    if in_system or in_settings:
        return True
    if field is not None:
        return False
    return installed.body is not None or (measurement.variable in ("P", "PD") and measurement.asked)


@rule(
    "RNG06",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_with_pressures,
    message="{references} are mixed: {items}",
    basis="common practice",
)
def references_mixed(installed: Installed, plant: Plant) -> Verdict:
    """Gauge, absolute and differential pressure mixed in one instrument.

    Why it matters: gauge and absolute differ by one atmosphere. On a low range that is the whole range,
    and a trip that is set in the one and read in the other acts a bar too late.

    What to do: settle what the instrument measures, and write range, settings and system range so. A
    gauge range on a differential body may be right, with its low side open to the atmosphere.

    >>> from validation.example import said
    >>> types = [{"code": "A", "kind": "transmitter", "body": "absolute", "LRL": "0 bara", "URL": "10 bara"}]
    >>> said("RNG06", [{"tag": "PT-1", "device type": "A", "LRV": "0 barg", "URV": "10 barg"}], types=types)
    ['PT-1: gauge and absolute are mixed: range 0 to 10 barg, body absolute']
    >>> said("RNG06", [{"tag": "PT-1", "device type": "A", "LRV": "0 bar", "URV": "10 bar"}], types=types)
    []
    """
    measurement = measured(installed, plant)
    if not _agrees(measurement):
        told = _told(measurement)
        references = {each.reference for each in told}
        if len(references) > 1:
            return _mixed(measurement, plant, told, references)
    blank: list[str] = []
    if stands_on_a_body(installed):
        if installed.body is None:
            blank.append("body")
        if measurement.field is None and measurement.asked:
            record = installed.record
            blank += [title for title, end in (("LRV", record.lrv), ("URV", record.urv)) if end is None]
    return Unchecked(*blank) if blank else None


def _mixed(measurement: Measurement, plant: Plant, told: Sequence[_Told], references: set[str]) -> Found:
    fields = tuple(dict.fromkeys(field for each in told for field in each.fields))
    if _is_vented(measurement, told, references):
        gauge = ", ".join(dict.fromkeys(f"{each.name} {each.shown}" for each in told if each.reference == "gauge"))
        return Review(
            values={"items": gauge},
            fields=fields,
            found=gauge,
            wanted="differential",
            message="{items} on a differential body: is its low side open to the atmosphere?",
        )
    items = ", ".join(dict.fromkeys(f"{each.name} {each.shown}" for each in told))
    ordered = sorted(references, key=_ORDER.__getitem__)
    return Found(
        values={"references": f"{', '.join(ordered[:-1])} and {ordered[-1]}", "items": items},
        fields=fields,
        found=items,
        wanted="one reference",
        working=_as_the_body_sees_it(measurement, plant),
    )


def _as_the_body_sees_it(measurement: Measurement, plant: Plant) -> str:
    field, body = measurement.field, measurement.installed.body
    if field is None or field.unit is None or body is None or field.reference in (None, body):
        return ""
    reference, atmospheric = field.reference or "", plant.data.atmospheric_pa
    unit = field.unit.referred_to(body)
    ends = [referred(at(end), reference, body, atmospheric_pa=atmospheric) for end in (field.lrv, field.urv)]
    shown = [format_number(in_unit(end, unit)) for end in ends if end is not None]
    if len(shown) < 2:
        return ""
    atmosphere = written(in_unit(atmospheric, unit), unit.referred_to("absolute"))
    return f"{field} is {shown[0]} to {shown[1]} {unit} at {atmosphere} of atmosphere"
