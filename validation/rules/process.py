"""PRO: whether what the process does, and is designed for, stays within what the instrument bears."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Final, NamedTuple

from instruments.area import Area
from instruments.installed import Installed
from instruments.kind import Kind, touches_process
from instruments.measurement import Measurement, amount, at, in_unit, variable_of
from instruments.pressure import stated_reference
from instruments.quantity import Quantity, format_number
from instruments.record import DeviceType
from instruments.span import above, below
from instruments.unit import Unit
from loops.plant import Plant
from validation.bodies import body_check, measured, stands_on_a_body, type_fixes
from validation.finding import Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.mending import each_found, read_both_ways, with_fixes, written
from validation.rule import Subject, rule, title_of

_OPERATING_PRESSURE: Final = ("operating_pressure_max", "operating_pressure_normal", "operating_pressure_min")
_OPERATING_TEMPERATURE: Final = (
    "operating_temperature_max",
    "operating_temperature_normal",
    "operating_temperature_min",
)


class _Named(NamedTuple):
    """A value and the field it stands in."""

    name: str
    value: Quantity


def _given(installed: Installed, names: Iterable[str]) -> list[_Named]:
    record = installed.record
    values = ((name, getattr(record, name)) for name in names)
    return [_Named(name, value) for name, value in values if value is not None]


def _extreme(given: Sequence[_Named], *, highest: bool) -> _Named | None:
    """Return the highest or lowest of some operating values, the first of equals; None of none."""
    readable = [each for each in given if each.value.unit is not None]
    if not readable:
        return None
    # A maximum that is blank is at least the normal value.
    return max(readable, key=_place) if highest else min(readable, key=_place)


def _place(named: _Named) -> float:
    return at(named.value)


# ---------------------------------------------------------------------------------------------- pressures of the line


def _line_reference(value: Quantity, measurement: Measurement, plant: Plant) -> str | None:
    """Return what a pressure of the line is referred to: its own, else its body's; None where neither is known.

    Nothing of the line is a differential pressure: on a differential body it is what the plant takes
    for an unstated reference.
    """
    own = stated_reference(value)
    if own is not None:
        return own
    return plant.data.default_reference if measurement.body == "differential" else measurement.body


def _on_one_reference(
    value: Quantity, other: Quantity, measurement: Measurement, plant: Plant, open_as: str
) -> tuple[float, float] | None:
    """Return two pressures of the line in Pa, referred to what the second is; None where no figure leads there."""
    reference = _line_reference(value, measurement, plant) or open_as
    to = _line_reference(other, measurement, plant) or open_as
    if reference == to or "differential" in (reference, to):
        # A limit that somebody wrote as differential is of the line all the same: counted from atmosphere.
        reference = to = "gauge" if reference != "absolute" else reference
        return (at(value), at(other)) if reference == to else None
    shift = plant.data.atmospheric_pa
    return (at(value) + shift if to == "absolute" else at(value) - shift), at(other)


def _shown_as(value: Quantity, pa: float, other: Quantity) -> str:
    """Show a pressure as the one it is compared with is written, where that is another unit or reference."""
    unit = other.unit
    assert unit is not None
    number = in_unit(pa, unit)
    if value.unit is not None and value.unit.canonical == unit.canonical and value.number == number:
        return ""
    return f"{value} = {written(number, unit)}"


# ------------------------------------------------------------------------------------------------------------ PRO01


def _has_process_data(installed: Installed, plant: Plant) -> bool:
    record = installed.record
    if record.design_pressure is not None or record.design_temperature is not None:
        return True
    kind = installed.kind
    return kind is not None and kind.process and touches_process(kind, installed.letters)


@rule(
    "PRO01",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=_has_process_data,
    message="the {what} {design} is below the {operating_title} {operating} by {off}",
    basis="common practice",
)
def designed_below_operation(installed: Installed, plant: Plant) -> Verdict:
    """A design pressure or temperature below the operating maximum.

    Why it matters: one of the two is wrong. If it is the operating value, instruments are sized wrong; if
    it is the design value, everything on the line is run beyond what it was made for.

    What to do: take both from the line list again.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "operating pressure max": "12 barg"}
    >>> said("PRO01", [{**row, "design pressure": "10 barg"}])
    ['PT-1: the design pressure 10 barg is below the operating pressure max 12 barg by 2 bar']
    >>> said("PRO01", [{**row, "design pressure": "12 barg"}])
    []
    """
    record = installed.record
    measures = _measures_of_the_process(installed)
    found: list[Found] = []
    blank: list[str] = []
    for part, design, names in (
        ("pressure", record.design_pressure, _OPERATING_PRESSURE),
        ("temperature", record.design_temperature, _OPERATING_TEMPERATURE),
    ):
        maximum = getattr(record, names[0])
        own: list[_Named] = []
        if measures == part:
            # What a PT or TT measures is the pressure or temperature of its line.
            own = [each for each in _given(installed, _OPERATING_VALUE) if _is_of(part, each.value)]
            maximum = maximum or next((each.value for each in own if each.name == _OPERATING_VALUE[0]), None)
        elif _is_well_above(design, maximum, getattr(record, names[1]), getattr(record, names[2])):
            continue
        if design is None or design.unit is None:
            blank.append(f"design {part}")
        if maximum is None or maximum.unit is None:
            blank.append(f"operating {part} max")
        if design is None or design.unit is None:
            continue
        operating = _extreme([*_given(installed, names), *own], highest=True)
        if operating is not None:
            measurement = measured(installed, plant)
            found.extend(each_found(_designed_below(part, design, operating, measurement, plant)))
    if found:
        return found
    return Unchecked(*blank) if blank else None


_OPERATING_VALUE: Final = ("operating_value_max", "operating_value_normal", "operating_value_min")


def _is_of(part: str, value: Quantity) -> bool:
    return value.unit is not None and value.unit.kind == part


def _measures_of_the_process(installed: Installed) -> str:
    """Return pressure or temperature, where the operating value is given and is that of the line; else nothing."""
    record = installed.record
    letters = installed.letters
    if letters[:1] not in ("P", "T") or (record.operating_value_max is None and record.operating_value_normal is None):
        return ""
    if installed.body == "differential" or variable_of(installed) not in ("P", "T"):
        return ""
    return "pressure" if letters[0] == "P" else "temperature"


def _is_well_above(design: Quantity | None, maximum: Quantity | None, *others: Quantity | None) -> bool:
    """Whether the design value and the operating maximum are given, and stand right beyond doubt, as do the others."""
    if design is None or maximum is None or design.base is None:
        return False
    for each in (maximum, *others):
        if each is not None and (each.base is None or each.reference != design.reference or each.base > design.base):
            return False
    return True


def _designed_below(part: str, design: Quantity, operating: _Named, measurement: Measurement, plant: Plant) -> Verdict:
    def check(open_as: str) -> Verdict:
        if part == "pressure":
            pair = _on_one_reference(operating.value, design, measurement, plant, open_as)
            if pair is None:
                return None
            highest, limit = pair
        else:
            highest, limit = at(operating.value), at(design)
        if not above(highest, limit, scale=abs(limit)):
            return None
        assert design.unit is not None
        off = amount(highest - limit, design.unit)
        return Found(
            values={
                "what": f"design {part}",
                "design": str(design),
                "operating_title": title_of(operating.name),
                "operating": str(operating.value),
                "off": off,
            },
            fields=(f"design_{part}", operating.name),
            part=part,
            found=str(design),
            wanted=f"at least {operating.value}",
            off_by=off,
            working=_shown_as(operating.value, highest, design),
        )

    if part != "pressure":
        return check("")
    pressures = [(at(each), _line_reference(each, measurement, plant)) for each in (design, operating.value)]
    return read_both_ways(check, pressures, plant)


# -------------------------------------------------------------------------------------------------- PRO02 and PRO03

_BEARS_PRESSURE: Final = frozenset({None, Kind.TRANSMITTER, Kind.SWITCH, Kind.GAUGE, Kind.ANALYSER, Kind.ELEMENT})


def _is_dp(measurement: Measurement) -> bool:
    return measurement.body == "differential"


def _has_over_range(measurement: Measurement) -> bool:
    """Whether it has a gauge or absolute body, or may have: then an over-range limit is asked."""
    installed = measurement.installed
    if _is_dp(measurement) or not stands_on_a_body(installed) or installed.kind not in _BEARS_PRESSURE:
        return False
    if installed.type is not None and installed.type.over_range_limit is not None:
        return True
    if measurement.body in ("gauge", "absolute"):
        return True
    field = measurement.field
    return measurement.variable == "P" or (measurement.variable == "L" and field is not None and field.is_pressure)


def _has_static_limit(measurement: Measurement) -> bool:
    """Whether it has a differential body, or may have: then a static pressure limit is asked."""
    installed = measurement.installed
    if not stands_on_a_body(installed) or installed.kind not in _BEARS_PRESSURE:
        return False
    if _is_dp(measurement):
        return True
    field = measurement.field
    return measurement.body is None and measurement.variable == "L" and field is not None and field.is_pressure


@rule(
    "PRO02",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: _has_over_range(measured(installed, plant)),
    message="the {what} {value} is above the body's over-range limit {limit} by {off}",
    basis="common practice: the limit is the device type's",
)
def over_ranged_by_design(installed: Installed, plant: Plant) -> Verdict:
    """A design pressure above what a gauge or absolute body bears.

    Why it matters: in the upset that the design pressure stands for, the cell is destroyed and the
    process is let out of it. That it stands the operating pressure is no comfort.

    What to do: take a device type that holds it.

    >>> from validation.example import said
    >>> types = [{"code": "G", "kind": "transmitter", "body": "gauge", "LRL": "0 barg", "URL": "10 barg",
    ...           "over-range limit": "20 barg"}]
    >>> said("PRO02", [{"tag": "PT-1", "device type": "G", "design pressure": "25 barg"}], types=types)
    ["PT-1: the design pressure 25 barg is above the body's over-range limit 20 barg by 5 bar"]
    >>> said("PRO02", [{"tag": "PT-1", "device type": "G", "design pressure": "20 barg"}], types=types)
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(above_over_range(measurement, plant), lambda found: type_fixes("PRO02", measurement, plant))


@body_check("PRO02")
def above_over_range(measurement: Measurement, plant: Plant) -> Verdict:
    """PRO02 without its fixes."""
    if not _has_over_range(measurement):
        return NotApplicable()
    installed = measurement.installed
    device = installed.type
    design = installed.record.design_pressure
    blank = [] if design is not None and design.unit is not None else ["design pressure"]
    if device is None or device.over_range_limit is None or device.over_range_limit.unit is None:
        blank.append("over-range limit")
        if measurement.body is None:
            blank.insert(0, "body")
        return Unchecked(*blank)
    # Where no design pressure is given, one is at least what the line is operated at.
    value = _Named("design_pressure", design) if design is not None and not blank else None
    if value is None:
        value = _extreme(_given(installed, _OPERATING_PRESSURE), highest=True)
    verdict = _above_limit(value, "over_range_limit", device.over_range_limit, measurement, plant)
    if blank and not any(True for _ in each_found(verdict)):
        return Unchecked(*blank)
    return verdict


def _above_limit(value: _Named | None, field: str, limit: Quantity, measurement: Measurement, plant: Plant) -> Verdict:
    if value is None:
        return None

    def check(open_as: str) -> Verdict:
        pair = _on_one_reference(value.value, limit, measurement, plant, open_as)
        if pair is None or not above(*pair, scale=abs(at(limit))):
            return None
        assert limit.unit is not None
        off = amount(pair[0] - pair[1], limit.unit)
        return Found(
            values={"what": title_of(value.name), "value": str(value.value), "limit": str(limit), "off": off},
            fields=(value.name, f"type.{field}"),
            found=str(value.value),
            wanted=f"at most {limit}",
            off_by=off,
            working=_shown_as(value.value, pair[0], limit),
        )

    pressures = [(at(each), _line_reference(each, measurement, plant)) for each in (value.value, limit)]
    return read_both_ways(check, pressures, plant)


@rule(
    "PRO03",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: _has_static_limit(measured(installed, plant)),
    message="the {what} {value} is above the body's static pressure limit {limit} by {off}",
    basis="common practice: the limit is the device type's",
)
def static_pressure_too_high(installed: Installed, plant: Plant) -> Verdict:
    """A design pressure, else operating pressure, above what a differential body bears on both sides.

    Why it matters: a cell for millibars stands in a line of many bar; beyond its static limit its bolts
    and its diaphragm let go.

    What to do: take a device type that holds it.

    >>> from validation.example import said
    >>> types = [{"code": "D", "kind": "transmitter", "body": "differential", "LRL": "-10 mbar", "URL": "10 mbar",
    ...           "static pressure limit": "0.7 barg"}]
    >>> said("PRO03", [{"tag": "PDT-1", "device type": "D", "design pressure": "1 barg"}], types=types)
    ["PDT-1: the design pressure 1 barg is above the body's static pressure limit 0.7 barg by 0.3 bar"]
    >>> said("PRO03", [{"tag": "PDT-1", "device type": "D", "design pressure": "0.7 barg"}], types=types)
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(above_static_limit(measurement, plant), lambda found: type_fixes("PRO03", measurement, plant))


@body_check("PRO03")
def above_static_limit(measurement: Measurement, plant: Plant) -> Verdict:
    """PRO03 without its fixes."""
    if not _has_static_limit(measurement):
        return NotApplicable()
    installed = measurement.installed
    device, design = installed.type, installed.record.design_pressure
    blank: list[str] = []
    if measurement.body is None:
        blank.append("body")
    limit = device.static_pressure_limit if device is not None else None
    if limit is None or limit.unit is None:
        blank.append("static pressure limit")
    value = _Named("design_pressure", design) if design is not None and design.unit is not None else None
    if value is None:
        value = _extreme(_given(installed, _OPERATING_PRESSURE), highest=True)
        maximum = installed.record.operating_pressure_max
        if maximum is None or maximum.unit is None:
            blank.append("design pressure or operating pressure max")
    if limit is None or limit.unit is None or measurement.body is None:
        return Unchecked(*blank)
    verdict = _above_limit(value, "static_pressure_limit", limit, measurement, plant)
    if blank and not any(True for _ in each_found(verdict)):
        return Unchecked(*blank)
    return verdict


# ------------------------------------------------------------------------------------------------------------ PRO05

_OFF_THE_PROCESS: Final = frozenset({"panel", "cabinet", "control room", "system"})
_WETTED: Final = frozenset({None, Kind.TRANSMITTER, Kind.ANALYSER, Kind.ELEMENT, Kind.SWITCH, Kind.GAUGE, Kind.GLASS})
_KEPT_AWAY: Final = {
    "impulse line": NotApplicable(assumed=("impulse line: the process temperature is taken not to reach the body",)),
    "thermowell": NotApplicable(assumed=("thermowell: the process temperature is taken not to reach the head",)),
}


def _meets_the_process(installed: Installed, plant: Plant) -> bool:
    device, record, kind = installed.type, installed.record, installed.kind
    if record.device_temperature is not None:
        return kind in _WETTED
    states = device is not None and (
        device.process_temperature_min is not None
        or device.process_temperature_max is not None
        or device.seal_temperature_min is not None
        or device.seal_temperature_max is not None
    )
    if kind not in _WETTED and not states:
        return False
    if record.location in _OFF_THE_PROCESS:
        return False
    return states or (kind is not None and kind in _WETTED and touches_process(kind, installed.letters))


@rule(
    "PRO05",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=_meets_the_process,
    message="the {what} {value} is {side} the {owner} limit {limit} by {off}",
    basis="common practice: the limits are the device type's",
)
def too_hot_or_too_cold(installed: Installed, plant: Plant) -> Verdict:
    """A process temperature outside what the body, or its remote seal, bears.

    Why it matters: fill fluid boils or freezes, seals leak, electronics die; a cell that has lost its fill
    shows a steady value.

    What to do: take a device type that holds it, or keep the process away (impulse line, cooling
    element, remote seal) and state the temperature at the device.

    >>> from validation.example import said
    >>> types = [{"code": "G", "kind": "transmitter", "body": "gauge", "process temperature limit min": "-40 degC",
    ...           "process temperature limit max": "110 degC"}]
    >>> row = {"tag": "PT-1", "device type": "G", "mounting": "direct"}
    >>> said("PRO05", [{**row, "design temperature": "150 degC"}], types=types)
    ["PT-1: the design temperature 150 °C is above the body's limit 110 °C by 40 °C"]
    >>> said("PRO05", [{**row, "design temperature": "110 degC"}], types=types)
    []
    """
    record = installed.record
    if record.device_temperature is None and record.mounting in _KEPT_AWAY:
        return _KEPT_AWAY[record.mounting]
    measurement = measured(installed, plant)
    return with_fixes(
        outside_temperature_limits(measurement, plant), lambda found: type_fixes("PRO05", measurement, plant)
    )


@body_check("PRO05")
def outside_temperature_limits(measurement: Measurement, plant: Plant) -> Verdict:
    """PRO05 without its fixes."""
    installed = measurement.installed
    record = installed.record
    if not _meets_the_process(installed, plant):
        return NotApplicable()
    mounting = record.mounting
    found: list[Found] = []
    blank: list[str] = []
    if record.device_temperature is not None:
        value = _Named("device_temperature", record.device_temperature)
        _compare(installed, "body", [value], [value], found, blank)
        if mounting != "remote seal":
            return found or (Unchecked(*dict.fromkeys(blank)) if blank else None)
    elif mounting in _KEPT_AWAY:
        return _KEPT_AWAY[mounting]
    highs, lows = _process_temperatures(installed, blank)
    if mounting == "remote seal":
        _compare(installed, "seal", highs, lows, found, blank)
    elif mounting == "direct":
        _compare(installed, "body", highs, lows, found, blank)
    else:
        _compare(installed, "body", highs, lows, found, blank)
        device = installed.type
        if device is not None and (device.seal_temperature_min or device.seal_temperature_max):
            _compare(installed, "seal", highs, lows, found, [])
        return [_if_it_gets_there(each) for each in found] or (Unchecked(*dict.fromkeys(blank)) if blank else None)
    return found or (Unchecked(*dict.fromkeys(blank)) if blank else None)


def _process_temperatures(installed: Installed, blank: list[str]) -> tuple[list[_Named], list[_Named]]:
    """Return what is held against the upper and the lower limit; add what is missing to `blank`."""
    record = installed.record
    operating = _given(installed, _OPERATING_TEMPERATURE)
    design = record.design_temperature
    if design is not None and design.unit is not None:
        named = _Named("design_temperature", design)
        lowest = _extreme(operating, highest=False)
        # A design temperature is a maximum: a cold service is colder in operation.
        return [named], [named] if lowest is None else [named, lowest]
    highest, lowest = _extreme(operating, highest=True), _extreme(operating, highest=False)
    if record.operating_temperature_max is None:
        blank.append("design temperature or operating temperature max")
    if record.operating_temperature_min is None:
        blank.append("design temperature or operating temperature min")
    return [] if highest is None else [highest], [] if lowest is None else [lowest]


_LIMIT_FIELDS: Final = {
    "body": ("process_temperature_min", "process_temperature_max"),
    "seal": ("seal_temperature_min", "seal_temperature_max"),
}


def _compare(
    installed: Installed,
    owner: str,
    highs: Sequence[_Named],
    lows: Sequence[_Named],
    found: list[Found],
    blank: list[str],
) -> None:
    """Hold temperatures against the limits of body or seal."""
    device = installed.type
    low_name, high_name = _LIMIT_FIELDS[owner]
    for name, values, upper in ((high_name, highs, True), (low_name, lows, False)):
        limit: Quantity | None = getattr(device, name) if device is not None else None
        if limit is None or limit.unit is None:
            blank.append(title_of(f"type.{name}"))
            continue
        value = _extreme(values, highest=upper)
        if value is None:
            continue
        outside = above if upper else below
        if outside(at(value.value), at(limit)):
            found.append(_outside_limit(owner, value, name, limit, upper=upper))


def _outside_limit(owner: str, value: _Named, name: str, limit: Quantity, *, upper: bool) -> Found:
    unit = limit.unit
    assert unit is not None
    off = amount(at(value.value) - at(limit), unit)
    return Found(
        values={
            "what": title_of(value.name),
            "value": str(value.value),
            "side": "above" if upper else "below",
            "owner": f"{owner}'s",
            "limit": str(limit),
            "off": off,
        },
        fields=(value.name, f"type.{name}"),
        part=f"{owner} {'maximum' if upper else 'minimum'}",
        found=str(value.value),
        wanted=f"at {'most' if upper else 'least'} {limit}",
        off_by=off,
        working=_in_the_limit_s_unit(value.value, unit),
    )


def _in_the_limit_s_unit(value: Quantity, unit: Unit) -> str:
    return "" if value.unit is unit else f"{value} = {written(in_unit(at(value), unit), unit)}"


def _if_it_gets_there(found: Found) -> Review:
    return Review(
        values=found.values,
        fields=(*found.fields, "mounting"),
        part=found.part,
        found=found.found,
        wanted=found.wanted,
        off_by=found.off_by,
        working=found.working,
        message="mounting not stated: mounted direct, the {what} {value} is {side} the {owner} limit {limit} by {off}",
    )


# ------------------------------------------------------------------------------------------------------------ PRO06


def _stands_in_an_ambient(installed: Installed, plant: Plant) -> bool:
    device, kind = installed.type, installed.kind
    if device is not None and (device.ambient_min is not None or device.ambient_max is not None):
        return True
    if kind is None or kind.electrical != "yes":
        return False
    # What stands indoors, in no area of the list, is not in the weather of one.
    return installed.area is not None or (installed.record.location or kind.location) == "field"


@rule(
    "PRO06",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_stands_in_an_ambient,
    message="the area's ambient {value} is {side} the device type's {limit} by {off}",
    basis="common practice: the limits are the device type's",
)
def ambient_outside_type(installed: Installed, plant: Plant) -> Verdict:
    """An area whose ambient is outside what the device type bears.

    Why it matters: displays blacken, electronics drift and fail in the first hard winter or in the sun of
    the first summer. The Ex marking's own range is another matter (HAZ08).

    What to do: take a device type for the climate, or shade, heat or move the instrument.

    >>> from validation.example import said
    >>> types = [{"code": "X", "kind": "transmitter", "ambient limit min": "-10 degC", "ambient limit max": "60 degC"}]
    >>> areas = [{"code": "A1", "system": "zone", "zone": "2", "ambient min": "-20 degC", "ambient max": "40 degC"}]
    >>> said("PRO06", [{"tag": "PT-1", "device type": "X", "area": "A1"}], types=types, areas=areas)
    ["PT-1: the area's ambient -20 °C is below the device type's -10 °C by 10 °C"]
    >>> areas[0]["ambient min"] = "-10 degC"
    >>> said("PRO06", [{"tag": "PT-1", "device type": "X", "area": "A1"}], types=types, areas=areas)
    []
    """
    measurement = measured(installed, plant)
    return with_fixes(outside_ambient(measurement, plant), lambda found: type_fixes("PRO06", measurement, plant))


_KELVIN: Final = 273.15


def _bears(device: DeviceType, area: Area) -> bool:
    """Whether all four limits are given, and the area's lie within the type's."""
    low, high = device.ambient_min, device.ambient_max
    if low is None or high is None or low.base is None or high.base is None:
        return False
    if area.ambient_min_c is None or area.ambient_max_c is None:
        return False
    return low.base <= area.ambient_min_c + _KELVIN and area.ambient_max_c + _KELVIN <= high.base


@body_check("PRO06")
def outside_ambient(measurement: Measurement, plant: Plant) -> Verdict:
    """PRO06 without its fixes."""
    installed = measurement.installed
    area, device = installed.area, installed.type
    if area is not None and device is not None and _bears(device, area):
        return None
    found: list[Found] = []
    blank: list[str] = []
    for name, end, upper in (("ambient_min", "ambient_min_c", False), ("ambient_max", "ambient_max_c", True)):
        limit: Quantity | None = getattr(device, name) if device is not None else None
        outdoors: float | None = getattr(area, end) if area is not None else None
        if limit is None or limit.unit is None:
            blank.append(title_of(f"type.{name}"))
        if outdoors is None:
            blank.append(title_of(f"area.{end}") if area is not None else "area")
        if limit is None or limit.unit is None or outdoors is None:
            continue
        outside = above if upper else below
        limit_c = at(limit) - _KELVIN
        if not outside(outdoors, limit_c, scale=_KELVIN):
            continue
        off = amount(outdoors - limit_c, limit.unit)
        found.append(
            Found(
                values={
                    "value": f"{format_number(outdoors)} °C",
                    "side": "above" if upper else "below",
                    "limit": str(limit),
                    "off": off,
                },
                fields=(f"area.{end}", f"type.{name}"),
                part="maximum" if upper else "minimum",
                found=f"{format_number(outdoors)} °C",
                wanted=f"at {'most' if upper else 'least'} {limit}",
                off_by=off,
            )
        )
    if found:
        return found
    return Unchecked(*dict.fromkeys(blank)) if blank else None
