"""RNG14: whether a temperature sensor can measure the range it is given."""

from __future__ import annotations

from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.measurement import Measurement, amount, at
from instruments.named_sensor import NamedSensor, named_sensor
from instruments.quantity import format_number
from instruments.sensor import sensors_for_range
from instruments.span import beyond_limit
from loops.plant import Plant
from validation.bodies import body_check, measured, type_fixes
from validation.finding import Fix, Found, NotApplicable, Severity, Unchecked, Verdict
from validation.mending import with_fixes
from validation.rule import Subject, rule

_SENSES_TEMPERATURE: Final = frozenset({None, Kind.ELEMENT, Kind.TRANSMITTER})


def _with_sensor(installed: Installed, plant: Plant) -> bool:
    return _asks_for_a_sensor(measured(installed, plant))


def _asks_for_a_sensor(measurement: Measurement) -> bool:
    installed = measurement.installed
    if measurement.variable not in ("T", "") or measurement.flat or installed.kind not in _SENSES_TEMPERATURE:
        return False
    scale = measurement.field or measurement.system
    if scale is None:
        return measurement.variable == "T" and measurement.asked
    if scale.unit is None:
        return measurement.variable == "T"
    return scale.unit.kind == "temperature" and (measurement.variable == "T" or named_sensor(installed) is not None)


def _sensor_of(installed: Installed, plant: Plant) -> NamedSensor | None:
    """Return the sensor of an instrument; of a transmitter that names none, its element's in the loop."""
    own = named_sensor(installed)
    if own is not None or installed.kind is Kind.ELEMENT:
        return own
    if installed.type is not None and installed.type.sensor_type:
        return None
    loop = plant.loop_of(installed)
    elements = (each for each in (loop.members if loop is not None else ()) if each.kind is Kind.ELEMENT)
    named = (named_sensor(each) for each in elements if each is not installed)
    return next((each for each in named if each is not None), None)


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
    if scale is None or not _asks_for_a_sensor(measurement):
        return NotApplicable()
    if scale.unit is None:
        return Unchecked("range unit")
    named = _sensor_of(installed, plant)
    if named is None:
        return Unchecked("sensor type")
    low, high = named.limits.min_c, named.limits.max_c
    ends = (("lrv", scale.lrv), ("urv", scale.urv))
    if scale is measurement.system:
        ends = (("system_lrv", scale.lrv), ("system_urv", scale.urv))
    off = {name: beyond_limit(at(end) - _KELVIN, low, high) for name, end in ends}
    outside = tuple(name for name in off if off[name])
    if not outside:
        return None
    own = named.owner is installed
    limits = f"{format_number(low)} to {format_number(high)} °C"
    in_celsius = f"{scale} = {format_number(at(scale.lrv) - _KELVIN)} to {format_number(at(scale.urv) - _KELVIN)} °C"
    return Found(
        values={
            "range": str(scale),
            "sensor": named.sensor.name if own else f"{named.sensor.name} of {named.owner.name}",
            "limits": limits,
            "basis": named.limits.basis,
        },
        fields=(*outside, *((named.field,) if own else ())),
        found=str(scale),
        wanted=f"within {limits}",
        off_by=amount(max(off.values(), key=abs), scale.unit),
        working="" if scale.unit.canonical == "degC" else in_celsius,
        cells=() if own else named.owner.cells(named.field),
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
