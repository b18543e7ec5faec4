"""RNG14: whether a temperature sensor can measure the range it is given."""

from __future__ import annotations

from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.measurement import Measurement, amount, at
from instruments.quantity import format_number
from instruments.sensor import read_sensor_type, sensor_limits, sensors_for_range
from instruments.span import beyond_limit
from loops.plant import Plant
from validation.bodies import body_check, measured, range_is_asked, type_fixes
from validation.finding import Fix, Found, NotApplicable, Severity, Unchecked, Verdict
from validation.mending import with_fixes
from validation.rule import Subject, rule

_SENSES_TEMPERATURE: Final = frozenset({None, Kind.ELEMENT, Kind.TRANSMITTER})


def _with_sensor(installed: Installed, plant: Plant) -> bool:
    if installed.kind not in _SENSES_TEMPERATURE:
        return False
    measurement = measured(installed, plant)
    if measurement.flat or measurement.variable not in ("T", ""):
        return False
    scale = measurement.field or measurement.system
    if scale is None:
        return measurement.variable == "T" and range_is_asked(installed, plant)
    if scale.unit is None or scale.unit.kind != "temperature":
        return False
    return measurement.variable == "T" or _sensor(installed, plant) is not None


def _sensor(installed: Installed, plant: Plant) -> tuple[str, str] | None:
    """Return the text that names the sensor and its field: the type's sensor, else the words of row and type."""
    record, device = installed.record, installed.type
    texts = (
        ("type.sensor_type", device.sensor_type if device is not None else None),
        ("signal", record.signal),
        ("kind", record.kind_written),
        ("type.signal", device.signal if device is not None else None),
        ("type.description", device.description if device is not None else None),
        ("model", record.model),
    )
    for field, text in texts:
        if text and (field == "type.sensor_type" or read_sensor_type(text) is not None):
            return text, field
    return None


def _element_s_sensor(installed: Installed, plant: Plant) -> tuple[str, str, Installed] | None:
    if installed.kind is Kind.ELEMENT:
        return None
    loop = plant.loop_of(installed)
    for each in loop.members if loop is not None else ():
        if each is not installed and each.kind is Kind.ELEMENT:
            found = _sensor(each, plant)
            if found is not None and read_sensor_type(found[0]) is not None:
                return (*found, each)
    return None


@rule(
    "RNG14",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_with_sensor,
    needs=("lrv|system_lrv", "urv|system_urv"),
    message="the range {range} is outside what {sensor} can measure, {limits} ({basis})",
    basis="IEC 60751:2022 for platinum; the functions of IEC 60584-1:2013 for thermocouples",
)
def range_outside_sensor(installed: Installed, plant: Plant) -> Verdict:
    """A temperature range outside what its sensor type can measure.

    Why it matters: beyond the end of its function the sensor has no reading: the transmitter goes to its
    failure current in the very upset that it is there to show.

    What to do: take a sensor type whose function covers the range.

    >>> from validation.example import said
    >>> said("RNG14", [{"tag": "TE-1", "signal": "TC type K", "LRV": "0 degC", "URV": "1350 degC"}])
    ['TE-1: the range 0 to 1350 °C is outside what type K can measure, -270 to 1300 °C (IEC 60584-1:2013)']
    >>> said("RNG14", [{"tag": "TE-1", "signal": "TC type K", "LRV": "0 degC", "URV": "1300 degC"}])
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(outside_sensor(measurement, plant), lambda found: _sensors_that_can(measurement, plant))


@body_check("RNG14")
def outside_sensor(measurement: Measurement, plant: Plant) -> Verdict:
    """RNG14 without its fixes."""
    installed = measurement.installed
    scale = measurement.field or measurement.system
    if not _with_sensor(installed, plant) or scale is None:
        return NotApplicable()
    if scale.unit is None:
        return Unchecked("range unit")
    named = _sensor(installed, plant)
    limits = sensor_limits(named[0]) if named is not None else None
    other: Installed | None = None
    if limits is None:
        at_element = _element_s_sensor(installed, plant) if named is None else None
        if at_element is None:
            return Unchecked("sensor type")
        named, other = at_element[:2], at_element[2]
        limits = sensor_limits(named[0])
    sensor = read_sensor_type(named[0]) if named is not None else None
    if limits is None or sensor is None or named is None:
        return Unchecked("sensor type")
    ends = (("lrv", scale.lrv), ("urv", scale.urv))
    if scale is measurement.system:
        ends = (("system_lrv", scale.lrv), ("system_urv", scale.urv))
    off = {name: beyond_limit(at(end) - _KELVIN, limits.min_c, limits.max_c) for name, end in ends}
    outside = [name for name in off if off[name]]
    if not outside:
        return None
    worst = max(off.values(), key=abs)
    unit = scale.unit
    limit_text = f"{format_number(limits.min_c)} to {format_number(limits.max_c)} °C"
    return Found(
        values={
            "range": str(scale),
            "sensor": sensor.name if other is None else f"{sensor.name} of {other.name}",
            "limits": limit_text,
            "basis": limits.basis,
        },
        fields=(*outside, *((named[1],) if other is None else ())),
        found=str(scale),
        wanted=f"within {limit_text}",
        off_by=amount(worst, unit),
        cells=() if other is None else other.cells(named[1]),
        working=""
        if unit.canonical == "degC"
        else f"{scale} = {format_number(at(scale.lrv) - _KELVIN)} to {format_number(at(scale.urv) - _KELVIN)} °C",
    )


_KELVIN: Final = 273.15


def _sensors_that_can(measurement: Measurement, plant: Plant) -> tuple[Fix, ...]:
    scale = measurement.field or measurement.system
    assert scale is not None
    names = sensors_for_range(at(scale.lrv) - _KELVIN, at(scale.urv) - _KELVIN)
    types = type_fixes("RNG14", measurement, plant)
    if not names:
        return types
    return (Fix(text=f"sensor types that can: {', '.join(names)}"), *types)
