"""SET: alarms and trips: in what order, where on the range, and whether the signal can tell."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace
from functools import partial
from itertools import pairwise
from typing import Final, NamedTuple

from instruments.columns import INSTRUMENTS
from instruments.installed import Installed
from instruments.kind import Kind, dimension_allowed
from instruments.letters import read_letters
from instruments.measurement import Measurement, Scale, amount, at, difference_in, same_dimension
from instruments.pressure import referred
from instruments.quantity import Quantity, format_number, read_quantity
from instruments.record import Instrument
from instruments.signal import MEASUREMENT_MAX_MA, MEASUREMENT_MIN_MA
from instruments.signal_words import carries_live_zero, io_types, signal_classes
from instruments.span import above, below
from loops.plant import Plant
from loops.redundancy import how_redundant, read_voting, redundant_groups, voting_of
from validation.bodies import measured
from validation.finding import Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.mending import each_found, read_both_ways, rounded_down, rounded_up, written
from validation.rule import Subject, rule, title_of

SETTINGS: Final = ("setting_ll", "setting_l", "setting_h", "setting_hh")
WITH_TRIP: Final = (*SETTINGS, "trip")
SET13_PERCENT: Final = 5.0
NE43: Final = "NAMUR NE 43:2021 (3.8 to 20.5 mA is measurement)"
PRACTICE: Final = "common practice"
_HIGH_ALARMS: Final = frozenset({"setting_h", "setting_hh"})

Numbers = tuple[float, ...]


# ----------------------------------------------------------------------------------------------- what is given


def _given(record: Instrument, names: Iterable[str]) -> list[tuple[str, Quantity]]:
    pairs = ((name, getattr(record, name)) for name in names)
    return [(name, value) for name, value in pairs if value is not None]


def _unread(record: Instrument, names: Iterable[str]) -> list[str]:
    """Return the titles of those fields that have something in their cell which is no value."""
    if not record.unread and not record.unitless:
        return []
    return [title_of(name) for name in names if name in record.unread or name in record.unitless]


def trip_of(installed: Installed) -> tuple[str, Quantity] | None:
    """Return the field trip and its field: of a switch its set pressure, where the trip is blank."""
    record = installed.record
    if record.trip is not None:
        return "trip", record.trip
    if installed.kind is Kind.SWITCH and record.set_pressure is not None:
        return "set_pressure", record.set_pressure
    return None


def _has_trip(installed: Installed, plant: Plant) -> bool:
    record = installed.record
    return bool(
        record.trip is not None
        or (record.set_pressure is not None and installed.kind is Kind.SWITCH)
        or record.trip_direction
        or "trip" in record.unread
        or "trip" in record.unitless
    )


def _trips_at_outer_alarms(installed: Installed, plant: Plant) -> bool:
    """Whether its HH and LL are what trips: of a safety device, on a list that has no column for trips.

    HH and LL are alarms elsewhere; but a list without such a column has nowhere else to write a trip.
    """
    record = installed.record
    if record.setting_hh is None and record.setting_ll is None:
        return False
    if plant.has_column("trip") or _has_trip(installed, plant):
        return False
    return bool(
        record.system == "safety"
        or record.safety_function
        or read_voting(voting_of(record))
        or (record.sil and any(level in record.sil for level in "1234"))
    )


def _trips(installed: Installed, plant: Plant) -> list[tuple[str | None, str, Quantity]]:
    """Return the trips: direction, field and value of each."""
    pair = trip_of(installed)
    if pair is not None:
        return [(trip_direction(installed), *pair)]
    if not _trips_at_outer_alarms(installed, plant):
        return []
    record = installed.record
    outer = (("high", "setting_hh", record.setting_hh), ("low", "setting_ll", record.setting_ll))
    return [(direction, name, value) for direction, name, value in outer if value is not None]


def trip_direction(installed: Installed) -> str | None:
    """Return high or low: as stated, else as the trip itself or the letters of a switch or alarm say."""
    record = installed.record
    if record.trip_direction is not None:
        return record.trip_direction
    if record.trip is not None and record.trip.qualifier in ("rising", "falling"):
        return "high" if record.trip.qualifier == "rising" else "low"
    for function in _functions(installed):
        if function[:1] in ("S", "A") and len(function) > 1:
            if set(function[1:]) == {"H"}:
                return "high"
            if set(function[1:]) == {"L"}:
                return "low"
    return None


def _functions(installed: Installed) -> tuple[str, ...]:
    reading = installed.tag
    if reading is None or not reading.letters:
        return ()
    letters = reading.code.letters if reading.code is not None else reading.letters
    return read_letters(letters).functions if letters else ()


# ----------------------------------------------------------------------------------------- comparing quantities


def _compared(
    values: Sequence[Quantity], measurements: Sequence[Measurement], plant: Plant, check: Callable[[Numbers], Verdict]
) -> Verdict:
    """Compare quantities as numbers in one base unit and of one reference.

    Where a pressure states no reference and no body tells it, the check is worked with the plant's
    default and with the other reading.

    Parameters
    ----------
    values
        What is compared.
    measurements
        Of the instrument that each value is of; one for all of them.
    plant
        The plant.
    check
        Takes the numbers, in the order of the values.

    Returns
    -------
    Verdict
        `_CANNOT` where the values have no dimension or reference in common.
    """
    first = values[0].unit
    if first is None:
        return _CANNOT
    for value in values:
        unit = value.unit
        if unit is not first and (unit is None or not same_dimension(unit, first)):
            return _CANNOT
        if value.base is None and unit is not first:
            return _CANNOT
    numbers = tuple(map(at, values))
    if first.kind != "pressure":
        return check(numbers)
    if len(measurements) == 1:
        references = tuple(map(measurements[0].reference, values))
    else:
        references = tuple(each.reference(value) for each, value in zip(measurements, values, strict=True))
    if len(set(references)) == 1:
        return check(numbers)

    def read_as(open_as: str) -> Verdict:
        in_gauge = [
            referred(pa, reference or open_as, "gauge", atmospheric_pa=plant.data.atmospheric_pa)
            for pa, reference in zip(numbers, references, strict=True)
        ]
        known = {reference or open_as for reference in references}
        # An absolute pressure beside a difference has no figure that leads from one to the other.
        if known >= {"absolute", "differential"} or None in in_gauge:
            return _CANNOT
        return check(tuple(pa for pa in in_gauge if pa is not None))

    return read_both_ways(read_as, zip(numbers, references, strict=True), plant)


_CANNOT: Final = Unchecked("one dimension and reference")


def _is_plain(value: Quantity, other: Quantity) -> bool:
    """Whether two quantities can be compared as they are written."""
    return value.unit is other.unit and value.reference == other.reference and value.unit is not None


def _one(verdict: Verdict) -> Found | None:
    return next(each_found(verdict), None)


# ------------------------------------------------------------------------------------------------- the order


def _two_settings(installed: Installed, plant: Plant) -> bool:
    record = installed.record
    given = (
        (record.setting_ll is not None)
        + (record.setting_l is not None)
        + (record.setting_h is not None)
        + (record.setting_hh is not None)
    )
    return given > 1 or bool((record.unread or record.unitless) and given + len(_unread(record, SETTINGS)) > 1)


@rule(
    "SET01",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=_two_settings,
    message="not in the order LL < L < H < HH: {settings}",
    basis="IEC 62682:2014 (from memory); common practice",
)
def settings_out_of_order(installed: Installed, plant: Plant) -> Verdict:
    """Alarm settings that are not in the order LL < L < H < HH.

    Why it matters: an alarm behind its trip warns of nothing; a low above a high is always in alarm,
    and is soon ignored.

    What to do: correct the one that is out of place; two that were exchanged are seen by their values.

    >>> from validation.example import said
    >>> row = {"tag": "AIT-4", "LRV": "0", "URV": "2", "range unit": "mg/l", "LL": "0.5", "L": "0.9", "HH": "1.1"}
    >>> said("SET01", [{**row, "H": "0.6"}])
    ['AIT-4: not in the order LL < L < H < HH: LL 0.5 mg/l, L 0.9 mg/l, H 0.6 mg/l, HH 1.1 mg/l']
    >>> said("SET01", [{**row, "H": "1.0"}])
    []
    """
    record = installed.record
    given = _given(record, SETTINGS)
    unread = _unread(record, SETTINGS)
    groups = _of_one_dimension(given)
    for group in groups:
        values = [value for _, value in group]
        if len(values) < 2:
            continue
        verdict = _compared(values, (measured(installed, plant),), plant, partial(_order, group))
        if verdict is _CANNOT:
            return Unchecked("settings of one reference")
        if verdict is not None:
            return verdict
    if unread:
        return Unchecked(*unread)
    return None if len(groups) == 1 else Unchecked("settings in one unit")


def _of_one_dimension(given: list[tuple[str, Quantity]]) -> list[list[tuple[str, Quantity]]]:
    """Part settings by what they measure: a percentage of the span says nothing beside a pressure."""
    groups: list[list[tuple[str, Quantity]]] = []
    for name, value in given:
        for group in groups:
            other = group[0][1].unit
            if other is value.unit or (
                other is not None and value.unit is not None and same_dimension(other, value.unit)
            ):
                group.append((name, value))
                break
        else:
            groups.append([(name, value)])
    return groups


def _order(given: Sequence[tuple[str, Quantity]], numbers: Numbers) -> Verdict:
    steps = [above(upper, lower) for lower, upper in pairwise(numbers)]
    if all(steps):
        return None
    wrong = tuple(
        name
        for place, (name, _) in enumerate(given)
        if (place and not steps[place - 1]) or (place < len(steps) and not steps[place])
    )
    order = sorted(range(len(given)), key=numbers.__getitem__)
    fixes: tuple[Fix, ...] = ()
    if all(above(numbers[higher], numbers[lower]) for lower, higher in pairwise(order)):
        change = {
            title_of(name): str(given[source][1])
            for (name, _), source in zip(given, order, strict=True)
            if given[source][0] != name
        }
        fixes = (Fix(text="; ".join(f"{title} {value}" for title, value in change.items()), change=change),)
    shown = ", ".join(f"{title_of(name)} {value}" for name, value in given)
    return Found(
        values={"settings": shown},
        fields=wrong,
        found=shown,
        wanted="LL < L < H < HH",
        fixes=fixes,
    )


# --------------------------------------------------------------------------------------- settings on their range


def _carries_4_20(installed: Installed) -> bool | None:
    """Whether the signal is 4-20 mA; None where nothing says."""
    texts = [row.signal for row in installed.signals if row.signal]
    if not texts and installed.type is not None and installed.type.signal:
        texts = [installed.type.signal]
    if not texts:
        # Nothing but a current, or volts, comes over an analogue input; a contact's needs no more words.
        kinds = {kind for row in installed.signals for kind in io_types(row.io_type)}
        return False if installed.kind is Kind.SWITCH or (kinds and "AI" not in kinds) else None
    said = [carries_live_zero(text) for text in texts]
    if True not in said and None in said and installed.type is not None:
        said.append(carries_live_zero(installed.type.signal))
    if True in said:
        return True
    return None if None in said else False


class _Placed(NamedTuple):
    """A setting, and the range of its dimension; None where there is none."""

    name: str
    value: Quantity
    scale: Scale | None


def _has_setting_to_place(installed: Installed, plant: Plant) -> bool:
    record = installed.record
    if (
        record.setting_hh is None
        and record.setting_h is None
        and record.setting_l is None
        and record.setting_ll is None
        and record.trip is None
        and (record.set_pressure is None or installed.kind is not Kind.SWITCH)
        and not ((record.unread or record.unitless) and _unread(record, WITH_TRIP))
    ):
        return False
    # A switch has a scale of its own, which lists seldom give.
    return installed.kind is not Kind.SWITCH or measured(installed, plant).ranged


def _outside(installed: Installed, plant: Plant) -> tuple[list[_Placed], list[str]]:
    """Return the settings that are not seen to lie within their range at a glance, and what was not to be read."""
    record = installed.record
    measurement = measured(installed, plant)
    placed: list[_Placed] = []
    field = measurement.field
    for name in WITH_TRIP:
        value: Quantity | None = getattr(record, name)
        if value is None:
            if name != "trip" or record.set_pressure is None or installed.kind is not Kind.SWITCH:
                continue
            name, value = "set_pressure", record.set_pressure
        if (
            field is not None
            and value.base is not None
            and _is_plain(value, field.urv)
            and _is_plain(value, field.lrv)
            and field.low <= value.base <= field.high
            and not field.flat
        ):
            continue
        placed.append(_Placed(name, value, measurement.scale_of(value)))
    return placed, _unread(record, WITH_TRIP)


def _no_range_for(measurement: Measurement, name: str) -> tuple[str, ...]:
    """Return what is blank where a setting has no range to be compared with."""
    if not measurement.ranged:
        return "LRV or system LRV", "URV or system URV"
    if measurement.flat:
        return ("a range with a span",)
    if measurement.system is None:
        return "system LRV", "system URV"
    if measurement.field is None:
        return "LRV", "URV"
    return (f"a range in the dimension of {title_of(name)}",)


def _ma(numbers: Numbers, scale: Scale, measurement: Measurement) -> float:
    value, lrv, urv = numbers
    return measurement.ma_at(value, scale, lrv=lrv, urv=urv)


def _is_beyond(numbers: Numbers) -> bool:
    value, lrv, urv = numbers
    size = abs(urv - lrv)
    return above(value, max(lrv, urv), scale=size) or below(value, min(lrv, urv), scale=size)


def _is_reached(ma: float) -> bool:
    return not (below(ma, MEASUREMENT_MIN_MA) or above(ma, MEASUREMENT_MAX_MA))


def _each_on_range(
    installed: Installed, plant: Plant, check: Callable[[_Placed, Scale, Measurement, Numbers], Verdict]
) -> Verdict:
    """Check each setting that may lie outside its range; unchecked where one cannot be placed."""
    placed, unread = _outside(installed, plant)
    if not placed:
        return Unchecked(*unread) if unread else None
    measurement = measured(installed, plant)
    found: list[Found] = []
    unchecked = dict.fromkeys(unread)
    for each in placed:
        scale = each.scale
        if scale is None:
            unchecked.update(dict.fromkeys(_no_range_for(measurement, each.name)))
            continue
        verdict = _compared(
            (each.value, scale.lrv, scale.urv), (measurement,), plant, partial(check, each, scale, measurement)
        )
        if verdict is _CANNOT:
            unchecked.setdefault(f"{title_of(each.name)} and range of one reference")
        else:
            found.extend(each_found(verdict))
    if found:
        return found
    return Unchecked(*unchecked) if unchecked else None


@rule(
    "SET02",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_has_setting_to_place,
    message="{title} {setting} is outside the range {range}",
    basis=PRACTICE,
)
def setting_outside_range(installed: Installed, plant: Plant) -> Verdict:
    """A setting outside the calibrated range.

    Why it matters: it acts in the over-range that no calibration covers, if it acts at all.

    What to do: move the setting, or widen the range. Where the signal cannot reach the setting at
    all, that is said alone.

    >>> from validation.example import said
    >>> row = {"tag": "LIT-5", "LRV": "0", "URV": "6", "range unit": "m", "signal": "4-20 mA"}
    >>> said("SET02", [{**row, "HH": "6.1"}])
    ['LIT-5: HH 6.1 m is outside the range 0 to 6 m']
    >>> said("SET02", [{**row, "HH": "6"}])
    []
    """
    return _each_on_range(installed, plant, _outside_range)


def _outside_range(each: _Placed, scale: Scale, measurement: Measurement, numbers: Numbers) -> Verdict:
    if not _is_beyond(numbers):
        return None
    if _carries_4_20(measurement.installed) and not _is_reached(_ma(numbers, scale, measurement)):
        return None
    title = title_of(each.name)
    return Found(
        values={"title": title, "setting": str(each.value), "range": str(scale)},
        fields=(each.name, *_range_fields(scale, measurement)),
        part=title,
        found=str(each.value),
        wanted=f"within {scale}",
        off_by=_off_range(numbers, each.value),
        fixes=_to_the_end(each, scale, numbers),
    )


def _range_fields(scale: Scale, measurement: Measurement) -> tuple[str, str]:
    return ("lrv", "urv") if scale is measurement.field else ("system_lrv", "system_urv")


def _off_range(numbers: Numbers, value: Quantity) -> str:
    high = max(numbers[1:])
    beyond = numbers[0] - high if numbers[0] > high else min(numbers[1:]) - numbers[0]
    return amount(beyond, value.unit) if value.unit is not None else ""


def _to_the_end(each: _Placed, scale: Scale, numbers: Numbers) -> tuple[Fix, ...]:
    """Return the nearest end of the range as a setting."""
    is_above = numbers[0] > max(numbers[1:])
    end = scale.lrv if (numbers[1] > numbers[2]) == is_above else scale.urv
    if end.unit is None:
        return ()
    text = written(rounded_down(end.number) if is_above else rounded_up(end.number), end.unit)
    title = title_of(each.name)
    return (Fix(text=f"{title} {text} at the {'most' if is_above else 'least'}", change={title: text}),)


@rule(
    "SET07",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: _has_setting_to_place(installed, plant) and _carries_4_20(installed) is not False,
    message="{title} {setting} on {range} needs {ma}, the signal ends at {end}",
    basis=NE43,
)
def setting_never_reached(installed: Installed, plant: Plant) -> Verdict:
    """A setting that the signal cannot reach inside 3.8 to 20.5 mA.

    Why it matters: the alarm or trip never comes; beyond these limits a signal is a failure, not a
    measurement.

    What to do: move the setting into the range, or widen the range.

    >>> from validation.example import said
    >>> row = {"tag": "LIT-5", "LRV": "0", "URV": "6", "range unit": "m", "signal": "4-20 mA"}
    >>> said("SET07", [{**row, "HH": "6.5"}])
    ['LIT-5: HH 6.5 m on 0 to 6 m needs 21.333 mA, the signal ends at 20.5 mA']
    >>> said("SET07", [{**row, "HH": "6.1"}])
    []
    """
    if _carries_4_20(installed) is None:
        return Unchecked("signal")
    return _each_on_range(installed, plant, _never_reached)


def _never_reached(each: _Placed, scale: Scale, measurement: Measurement, numbers: Numbers) -> Verdict:
    ma = _ma(numbers, scale, measurement)
    if _is_reached(ma):
        return None
    end_ma = MEASUREMENT_MAX_MA if ma > MEASUREMENT_MAX_MA else MEASUREMENT_MIN_MA
    title = title_of(each.name)
    needs = f"{format_number(round(ma, 3))} mA"
    return Found(
        values={
            "title": title,
            "setting": str(each.value),
            "range": str(scale),
            "ma": needs,
            "end": f"{format_number(end_ma)} mA",
        },
        fields=(each.name, *_range_fields(scale, measurement)),
        part=title,
        found=f"{each.value} at {needs}",
        wanted=f"within {scale}",
        off_by=f"{format_number(round(abs(ma - end_ma), 3))} mA",
        working=_ma_working(each, scale, measurement, needs),
        fixes=_to_the_end(each, scale, numbers),
    )


def _ma_working(each: _Placed, scale: Scale, measurement: Measurement, needs: str) -> str:
    """Return the formula with its figures, where one unit and one law make it."""
    record = measurement.installed.record
    if record.square_root_device or record.square_root_system:
        return ""
    if not (_is_plain(each.value, scale.lrv) and _is_plain(each.value, scale.urv)):
        return ""
    value, lrv, urv = (_in_brackets(one.number) for one in (each.value, scale.lrv, scale.urv))
    return f"4 mA + 16 mA x ({value} - {lrv}) / ({urv} - {lrv}) = {needs}"


def _in_brackets(number: float) -> str:
    shown = format_number(number)
    return f"({shown})" if shown.startswith("-") else shown


# ---------------------------------------------------------------------------------------- pre-alarm and trip


class _Pair(NamedTuple):
    """A trip with the pre-alarm on its side."""

    direction: str
    alarm_name: str
    alarm: Quantity
    trip_name: str
    trip: Quantity

    @property
    def sign(self) -> float:
        """1 where the trip is high, -1 where it is low."""
        return 1.0 if self.direction == "high" else -1.0


def _prealarm_and_trip(installed: Installed) -> _Pair | Unchecked:
    """Return a trip and its pre-alarm, H or L on the trip's side; what is blank where one is."""
    direction = trip_direction(installed)
    if direction is None:
        return Unchecked("trip direction")
    name = "setting_h" if direction == "high" else "setting_l"
    alarm: Quantity | None = getattr(installed.record, name)
    trip = trip_of(installed)
    if alarm is None or trip is None:
        return Unchecked(*([title_of(name)] if alarm is None else []), *(["trip"] if trip is None else []))
    return _Pair(direction, name, alarm, *trip)


@rule(
    "SET03",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=_has_trip,
    message="the pre-alarm {title} {alarm} is {where} the {direction} trip {trip}",
    basis="IEC 61511-1:2016 and IEC 62682:2014 (from memory); common practice",
)
def prealarm_beyond_trip(installed: Installed, plant: Plant) -> Verdict:
    """A pre-alarm beyond the trip that it announces, or at it.

    Why it matters: the operator is told after the plant has tripped.

    What to do: set the alarm before the trip, with time enough to act.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "LRV": "0", "URV": "10", "range unit": "barg", "trip": "8", "trip direction": "high"}
    >>> said("SET03", [{**row, "H": "8.5"}])
    ['PT-1: the pre-alarm H 8.5 barg is beyond the high trip 8 barg']
    >>> said("SET03", [{**row, "H": "7.5"}])
    []
    """
    pair = _prealarm_and_trip(installed)
    if isinstance(pair, Unchecked):
        return pair

    def check(numbers: Numbers) -> Verdict:
        alarm, trip = (pair.sign * number for number in numbers)
        if below(alarm, trip):
            return None
        title = title_of(pair.alarm_name)
        beyond = above(alarm, trip)
        return Found(
            values={
                "title": title,
                "alarm": str(pair.alarm),
                "trip": str(pair.trip),
                "direction": pair.direction,
                "where": "beyond" if beyond else "at",
            },
            fields=(pair.alarm_name, pair.trip_name),
            part=title,
            found=str(pair.alarm),
            wanted=f"{'below' if pair.direction == 'high' else 'above'} {pair.trip}",
            off_by=amount(alarm - trip, pair.alarm.unit) if beyond and pair.alarm.unit is not None else "",
        )

    verdict = _compared((pair.alarm, pair.trip), (measured(installed, plant),), plant, check)
    return Unchecked(f"{title_of(pair.alarm_name)} and trip of one dimension") if verdict is _CANNOT else verdict


@rule(
    "SET13",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_has_trip,
    message="the pre-alarm {title} {alarm} is {of_span} of span from the trip {trip}, less than {limit}",
    basis=PRACTICE,
)
def prealarm_near_trip(installed: Installed, plant: Plant) -> Verdict:
    """A pre-alarm nearer to its trip than a share of the span.

    Why it matters: it leaves no time to act, and noise runs one into the other.

    What to do: set it farther from the trip, or the plant's limit lower if the process is slow.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "LRV": "0", "URV": "10", "range unit": "barg", "trip": "8", "trip direction": "high"}
    >>> said("SET13", [{**row, "H": "7.6"}])
    ['PT-1: the pre-alarm H 7.6 barg is 4 % of span from the trip 8 barg, less than 5 %']
    >>> said("SET13", [{**row, "H": "7.5"}])
    []
    """
    pair = _prealarm_and_trip(installed)
    if isinstance(pair, Unchecked):
        return pair
    measurement = measured(installed, plant)
    scale = measurement.scale_of(pair.trip)
    if scale is None:
        return Unchecked(*_no_range_for(measurement, pair.trip_name))
    percent = plant.threshold("SET13 %", SET13_PERCENT)
    least = scale.span * percent / 100.0

    def check(numbers: Numbers) -> Verdict:
        apart = pair.sign * (numbers[1] - numbers[0])
        if not apart > 0.0 or not above(pair.sign * numbers[1], pair.sign * numbers[0]):
            return NotApplicable("the pre-alarm is beyond its trip")
        if not below(apart, least, scale=scale.span):
            return None
        return _near(pair, apart, scale=scale, percent=percent)

    verdict = _compared((pair.alarm, pair.trip), (measurement,), plant, check)
    return Unchecked(f"{title_of(pair.alarm_name)} and trip of one dimension") if verdict is _CANNOT else verdict


def _near(pair: _Pair, apart: float, *, scale: Scale, percent: float) -> Found:
    title, unit = title_of(pair.alarm_name), pair.trip.unit
    of_span = f"{format_number(round(apart / scale.span * 100.0, 2))} %"
    fixes: tuple[Fix, ...] = ()
    if unit is not None and unit.factor is not None:
        step = difference_in(scale.span * percent / 100.0, unit)
        farthest = pair.trip.number - pair.sign * step
        text = written(rounded_down(farthest) if pair.direction == "high" else rounded_up(farthest), unit)
        fixes = (Fix(text=f"{title} {text}", change={title: text}),)
    return Found(
        values={
            "title": title,
            "alarm": str(pair.alarm),
            "trip": str(pair.trip),
            "of_span": of_span,
            "limit": f"{format_number(percent)} %",
        },
        fields=(pair.alarm_name, pair.trip_name),
        part=title,
        found=of_span,
        wanted=f"at least {format_number(percent)} % of span",
        working=f"|{pair.alarm} - {pair.trip}| is {of_span} of the span of {scale}",
        fixes=fixes,
    )


# ------------------------------------------------------------------------------------- design and normal values


def _design_field(installed: Installed, plant: Plant) -> str | None:
    """Return the design limit of the quantity that the tag measures: of a differential pressure there is none."""
    # P and T, CP and CT in KKS, and plant codes such as DPT.
    if installed.letters[:1] not in ("P", "T", "C") and (installed.tag is None or installed.tag.code is None):
        return None
    measurement = measured(installed, plant)
    if measurement.variable == "P" and measurement.body != "differential":
        return "design_pressure"
    return "design_temperature" if measurement.variable == "T" else None


@rule(
    "SET04",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: (
        (_has_trip(installed, plant) or _trips_at_outer_alarms(installed, plant))
        and _design_field(installed, plant) is not None
    ),
    message="the high trip {trip} is above the design limit {design}",
    basis="IEC 61511-1:2016 (from memory); common practice",
)
def trip_above_design(installed: Installed, plant: Plant) -> Verdict:
    """A high trip above the design limit of the same quantity.

    Why it matters: the vessel is past its limit before the trip acts.

    What to do: set the trip below the design limit, with its margin.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "LRV": "0", "URV": "16", "range unit": "barg", "trip": "12", "trip direction": "high"}
    >>> said("SET04", [{**row, "design pressure": "10 barg"}])
    ['PT-1: the high trip 12 barg is above the design limit 10 barg']
    >>> said("SET04", [{**row, "design pressure": "12 barg"}])
    []
    """
    trips = [trip for trip in _trips(installed, plant) if trip[0] != "low"]
    direction = trips[0][0] if trips else trip_direction(installed)
    if direction == "low" or (not trips and not _has_trip(installed, plant)):
        return NotApplicable()
    name = _design_field(installed, plant)
    assert name is not None
    pair = trips[0][1:] if trips else None
    design: Quantity | None = getattr(installed.record, name)
    blank = [title_of(name)] if design is None else []
    if pair is None:
        blank.append("trip")
    if direction is None:
        blank.append("trip direction")
    if pair is None or design is None or blank:
        return Unchecked(*blank)
    trip_name, trip = pair

    def check(numbers: Numbers) -> Verdict:
        if not above(numbers[0], numbers[1]):
            return None
        title = title_of(trip_name)
        fixes: tuple[Fix, ...] = ()
        if design.unit is not None:
            text = written(rounded_down(design.number), design.unit)
            fixes = (Fix(text=f"{title} {text} at the most", change={title: text}),)
        return Found(
            values={"trip": str(trip), "design": str(design)},
            fields=(trip_name, name),
            part=title if trip_name in _OUTER else "trip",
            found=str(trip),
            wanted=f"at most {design}",
            off_by=amount(numbers[0] - numbers[1], trip.unit) if trip.unit is not None else "",
            fixes=fixes,
        )

    verdict = _compared((trip, design), (measured(installed, plant),), plant, check)
    return Unchecked(f"trip and {title_of(name)} of one dimension") if verdict is _CANNOT else verdict


def _any_alarm(installed: Installed, plant: Plant) -> bool:
    record = installed.record
    return (
        record.setting_h is not None
        or record.setting_l is not None
        or record.setting_hh is not None
        or record.setting_ll is not None
        or bool((record.unread or record.unitless) and _unread(record, SETTINGS))
    )


_OPERATING_VALUE: Final = "operating value normal"
_BLANK_NORMAL: Final = {
    "P": "operating value normal or operating pressure normal",
    "T": "operating value normal or operating temperature normal",
}


@rule(
    "SET05",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_any_alarm,
    message="the normal value {normal} stands beyond {settings}",
    basis="IEC 62682:2014 (from memory); common practice",
)
def normal_in_alarm(installed: Installed, plant: Plant) -> Verdict:
    """The normal value stands beyond an alarm.

    Why it matters: the alarm stands in normal operation, and is then shelved or ignored.

    What to do: correct the setting, its unit, or the normal value.

    >>> from validation.example import said
    >>> row = {"tag": "TT-1", "LRV": "0", "URV": "100", "range unit": "degC", "operating value normal": "65"}
    >>> said("SET05", [{**row, "H": "60"}])
    ['TT-1: the normal value 65 °C stands beyond H 60 °C']
    >>> said("SET05", [{**row, "H": "65"}])
    []
    """
    record = installed.record
    measurement = measured(installed, plant)
    field, normal = measurement.names[1], measurement.values[1]
    unread = _unread(record, ("operating_value_normal", field))
    if unread:
        return Unchecked(*dict.fromkeys(unread))
    if normal is None:
        fallback = measurement.variable if measurement.body != "differential" else ""
        blank = record.operating_value_min is None and record.operating_value_max is None
        return Unchecked(_BLANK_NORMAL.get(fallback, _OPERATING_VALUE) if blank else _OPERATING_VALUE)
    beyond: list[tuple[str, Quantity, float]] = []
    doubtful: list[Found] = []
    unchecked = dict.fromkeys(_unread(record, SETTINGS))
    for name in SETTINGS:
        setting: Quantity | None = getattr(record, name)
        if setting is None:
            continue
        sign = 1.0 if name in _HIGH_ALARMS else -1.0
        if normal.base is not None and setting.base is not None and _is_plain(normal, setting):
            if above(sign * normal.base, sign * setting.base):
                beyond.append((name, setting, normal.base - setting.base))
            continue

        off: list[float] = []

        def check(
            numbers: Numbers, name: str = name, setting: Quantity = setting, sign: float = sign, off: list[float] = off
        ) -> Verdict:
            if not above(sign * numbers[0], sign * numbers[1]):
                return None
            off.append(numbers[0] - numbers[1])
            return _in_alarm(field, normal, [(name, setting, off[-1])])

        verdict = _compared((normal, setting), (measurement,), plant, check)
        if verdict is _CANNOT:
            unchecked.setdefault(f"{title_of(field)} and {title_of(name)} of one dimension")
        for each in each_found(verdict):
            if isinstance(each, Review):
                doubtful.append(each)
            else:
                beyond.append((name, setting, off[0]))
    if beyond:
        return _in_alarm(field, normal, beyond)
    if doubtful:
        return doubtful
    return Unchecked(*unchecked) if unchecked else None


def _in_alarm(field: str, normal: Quantity, beyond: Sequence[tuple[str, Quantity, float]]) -> Found:
    shown = ", ".join(f"{title_of(name)} {setting}" for name, setting, _ in beyond)
    off = max((each[2] for each in beyond), key=abs)
    sides = ", ".join(f"{'at most' if name in _HIGH_ALARMS else 'at least'} {setting}" for name, setting, _ in beyond)
    return Found(
        values={"normal": str(normal), "settings": shown},
        fields=(field, *(name for name, _, _ in beyond)),
        found=str(normal),
        wanted=sides,
        off_by=amount(off, normal.unit) if normal.unit is not None else "",
    )


# -------------------------------------------------------------------------------------------- what letters promise

# What these letters measure is there or not, and has no setting: a flame, a hand, a state, a position.
_NO_SETTINGS: Final = frozenset("BHYZ")
_FIELD_OF: Final = {"H": "setting_h", "HH": "setting_hh", "L": "setting_l", "LL": "setting_ll"}
_LEVELS: Final = re.compile(r"H+|L+")


def _promised(installed: Installed) -> list[tuple[str, str]]:
    """Return the function (S, A) and level (H, HH, L, LL) for each setting that the letters promise."""
    promised: list[tuple[str, str]] = []
    for function in _functions(installed):
        levels = function[1:]
        if function[:1] in ("S", "A") and levels and set(levels) <= {"H", "L"}:
            promised.extend((function[0], level[:2]) for level in _LEVELS.findall(levels))
    return promised


def _has_level(installed: Installed, plant: Plant) -> bool:
    letters = installed.letters
    if installed.equipment_tag or not letters:
        return False
    # A level follows a function, which follows the variable.
    if "H" not in letters[2:] and "L" not in letters[2:] and (installed.tag is None or installed.tag.code is None):
        return False
    return measured(installed, plant).variable[:1] not in _NO_SETTINGS and bool(_promised(installed))


def _any_setting(plant: Plant) -> bool:
    return bool(
        plant.once(
            "has settings",
            lambda plant: (
                any(
                    _given(each.record, (*WITH_TRIP, "set_pressure"))
                    or _unread(each.record, (*WITH_TRIP, "set_pressure"))
                    for each in plant.instruments
                )
                or any(getattr(row, name) is not None for row in plant.alarm_list for name in WITH_TRIP)
            ),
        )
    )


def _no_settings_anywhere(plant: Plant) -> Verdict:
    if _any_setting(plant):
        return None
    count = sum(1 for each in plant.live if _has_level(each, plant))
    if not count:
        return None
    return Found(
        values={"count": count},
        fields=WITH_TRIP,
        message="no sheet gives any alarm or trip setting; the letters of {count} tags promise one",
        found="no settings",
        wanted="settings, or the alarm and trip list",
    )


def _alarm_list_settings(plant: Plant) -> dict[int, set[str]]:
    """Return which settings the alarm and trip list gives each instrument, read or not."""
    listed: dict[int, set[str]] = {}
    for row in plant.alarm_list:
        filled = {name for name in WITH_TRIP if getattr(row, name) is not None} | (
            {*WITH_TRIP} & (row.unread | row.unitless.keys())
        )
        if row.tag and filled:
            for each in plant.by_tag(row.tag):
                listed.setdefault(id(each), set()).update(filled)
    return listed


def _gives(each: Installed, names: Iterable[str], listed: dict[int, set[str]]) -> bool:
    on_list = listed.get(id(each), ())
    return any(getattr(each.record, name) is not None or name in on_list for name in names)


@rule(
    "SET06",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_has_level,
    whole=_no_settings_anywhere,
    message="the letters {letters} promise {what}, and there is none",
    basis="ISA-5.1-2009, function modifiers (from memory)",
)
def setting_missing(installed: Installed, plant: Plant) -> Verdict:
    """Letters that promise a switch or an alarm at H, L, HH or LL, and there is no such setting.

    Why it matters: somebody will set it by guess, or leave it as it came.

    What to do: give the setting, or correct the letters. A switch's trip or set pressure counts, and
    so does the alarm and trip list; an alarm's setting may stand on its transmitter's row. One that
    stands in the remarks is left unchecked: give it a column.

    >>> from validation.example import said
    >>> rows = [{"tag": "LSHH-1", "HH": ""}, {"tag": "LSHH-2", "HH": "4.8 m"}]
    >>> said("SET06", rows)
    ['LSHH-1: the letters LSHH promise a switch at HH, and there is none']
    """
    record = installed.record
    listed: dict[int, set[str]] = plant.once("settings on the alarm list", _alarm_list_settings)
    promised = _promised(installed)
    missing: list[tuple[str, str]] = []
    unread: list[str] = []
    for function, level in promised:
        names = [_FIELD_OF[level]]
        if len(level) > 1 and not plant.has_column(*_OUTER):
            # A list that has but one column for high writes there how high LSHH is.
            names.append(_FIELD_OF[level[0]])
        if function == "S" or installed.kind is Kind.SWITCH:
            names += ["trip", "set_pressure"] if _trip_may_be(level, promised, record) else ["set_pressure"]
        if _gives(installed, names, listed):
            continue
        unread_here = _unread(record, names)
        if unread_here:
            unread.extend(unread_here)
        elif function == "S" or not _set_in_loop(installed, _FIELD_OF[level], listed, plant):
            missing.append((function, level))
    if missing and _stands_in_remarks(installed):
        return Unchecked(*dict.fromkeys(f"{level} in a column" for _, level in missing))
    if missing:
        what = " and ".join(
            f"{'a switch' if function == 'S' else 'an alarm'} at {level}" for function, level in missing
        )
        fields = tuple(_FIELD_OF[level] for _, level in missing)
        if not plant.sheet_has_column(installed, *WITH_TRIP, "set_pressure"):
            fields = WITH_TRIP
        elif not plant.sheet_has_column(installed, *fields) and (
            installed.kind is Kind.SWITCH or any(function == "S" for function, _ in missing)
        ):
            # A sheet of switches gives their settings under the trip, where it has no column for LL.
            fields = ("trip", "set_pressure")
        return Found(
            values={"letters": installed.letters, "what": what},
            fields=fields,
            found="blank",
            wanted=what,
        )
    return Unchecked(*dict.fromkeys(unread)) if unread else None


_NUMBER_WITH_UNIT: Final = re.compile(r"(?<![\w.,/-])[-+]?\d[\d.,]{0,10}\s?[^\s\d.,;:()]{1,10}")


def _stands_in_remarks(installed: Installed) -> bool:
    """Whether the remarks hold a value of what it measures: read by people, and by no rule here."""
    text = (installed.record.remarks or "")[:300]
    for found in _NUMBER_WITH_UNIT.findall(text):
        value = read_quantity(found)
        kind = value.unit.kind if isinstance(value, Quantity) and value.unit is not None else None
        if kind is not None and kind not in _OF_SIGNALS and dimension_allowed(installed.letters, kind):
            return True
    return False


_OF_SIGNALS: Final = frozenset({"curr", "volt", "res", "ratio"})


def _trip_may_be(level: str, promised: Sequence[tuple[str, str]], record: Instrument) -> bool:
    """Whether the one trip of a switch with two levels is that of this level: of the side that is stated."""
    if len(promised) < 2 or record.trip_direction is None:
        return True
    return (level[0] == "H") == (record.trip_direction == "high")


def _set_in_loop(installed: Installed, name: str, listed: dict[int, set[str]], plant: Plant) -> bool:
    """Whether another row of the loop, the transmitter's for one, holds the setting of an alarm."""
    loop = plant.loop_of(installed)
    if loop is None:
        return False
    variable = measured(installed, plant).variable
    return any(
        _gives(each, (name,), listed)
        for each in loop.members
        if each is not installed and measured(each, plant).variable == variable
    )


# -------------------------------------------------------------------------------------------------- trips together


def _tripping(plant: Plant) -> frozenset[Installed]:
    """Return the redundant instruments whose trips are to be compared.

    Those that only their suffixes make redundant may have none; then there is nothing to compare.
    """
    return frozenset(
        each
        for group in redundant_groups(plant)
        if group.by == "declared"
        or any(_has_trip(each, plant) or _trips_at_outer_alarms(each, plant) for each in group.members)
        for each in group.members
    )


@rule(
    "SET08",
    severity=Severity.DANGER,
    on=Subject.GROUP,
    applies=lambda installed, plant: installed in plant.once("redundant and tripping", _tripping),
    needs=("trip|set_pressure|setting_hh|setting_ll",),
    groups=lambda plant: (group.members for group in redundant_groups(plant)),
    alone_is_clear=False,
    message="redundant devices with different trip settings: {settings}",
    basis="IEC 61511-1:2016 (from memory)",
)
def redundant_trips_differ(group: tuple[Installed, ...], plant: Plant) -> Verdict:
    """Redundant devices with different trip settings.

    Why it matters: a vote of two out of three at three settings is a vote at the middle one; nobody
    chose that.

    What to do: set them alike. Where only the suffixes say that the devices are redundant, a person
    must say whether they are.

    >>> from validation.example import said
    >>> row = {"trip": "8 barg", "trip direction": "high", "safety function": "SIF-1"}
    >>> rows = [{"tag": f"PT-1{x}", **row} for x in "ABC"]
    >>> said("SET08", [*rows[:2], {**rows[2], "trip": "8.5 barg"}])
    ['PT-1A, PT-1B, PT-1C: redundant devices with different trip settings: 8 barg, 8 barg, 8.5 barg']
    >>> said("SET08", rows)
    []
    """
    trips = [_trips(each, plant) for each in group]
    if any(len(each) > 1 or (each and each[0][1] in _OUTER) for each in trips):
        return _outer_trips_differ(group, trips, plant)
    if not all(trips):
        return Unchecked("trip")
    return _trips_differ(group, [each[0] for each in trips], plant)


_OUTER: Final = ("setting_hh", "setting_ll")


def _outer_trips_differ(
    group: tuple[Installed, ...], trips: Sequence[Sequence[tuple[str | None, str, Quantity]]], plant: Plant
) -> Verdict:
    """Compare the HH of all, and the LL of all."""
    found: list[Found] = []
    unchecked: dict[str, None] = {}
    for name in _OUTER:
        given = [next((trip for trip in each if trip[1] == name), None) for each in trips]
        of_each = [trip for trip in given if trip is not None]
        if not of_each:
            continue
        verdict = Unchecked("trip") if len(of_each) < len(group) else _trips_differ(group, of_each, plant)
        if isinstance(verdict, Unchecked):
            unchecked.update(dict.fromkeys(verdict.fields))
        elif isinstance(verdict, Found):
            found.append(replace(verdict, part=title_of(name)))
    return found or (Unchecked(*unchecked) if unchecked else None)


def _trips_differ(
    group: tuple[Installed, ...], given: Sequence[tuple[str | None, str, Quantity]], plant: Plant
) -> Verdict:
    pairs = [(name, trip) for _, name, trip in given]
    trips = [trip for _, trip in pairs]
    directions = [direction for direction, _, _ in given]
    opposed = len({direction for direction in directions if direction}) > 1

    def check(numbers: Numbers) -> Verdict:
        if not opposed and not above(max(numbers), min(numbers), scale=max(map(abs, numbers))):
            return None
        settings = ", ".join(
            f"{trip} {direction}" if opposed and direction else str(trip)
            for trip, direction in zip(trips, directions, strict=True)
        )
        by_suffix = how_redundant(group, plant) == "suffix"
        kind = Review if by_suffix else Found
        return kind(
            values={"settings": settings},
            fields=tuple(dict.fromkeys(name for name, _ in pairs)),
            found=settings,
            wanted="one setting",
            cells=tuple(cell for each, (name, _) in zip(group, pairs, strict=True) for cell in each.cells(name)),
            message=_BY_SUFFIX if by_suffix else "",
        )

    verdict = _compared(trips, [measured(each, plant) for each in group], plant, check)
    return Unchecked("trips of one dimension") if verdict is _CANNOT else verdict


_BY_SUFFIX: Final = "devices that may be redundant (by suffix alone) have different trip settings: {settings}"
_SWITCHED: Final = frozenset({"contact", "volts", "digital"})


def _sends_and_trips(installed: Installed, plant: Plant) -> bool:
    """Whether it trips on a signal that can fail to one side: a contact has no such side."""
    if installed.kind is Kind.SWITCH:
        return False
    if not _has_trip(installed, plant) and not _trips_at_outer_alarms(installed, plant):
        return False
    classes = [signal_classes(row.signal) for row in installed.signals if row.signal]
    return not (classes and all(each and each <= _SWITCHED for each in classes))


@rule(
    "SET10",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=_sends_and_trips,
    needs=("failure_direction", "bad_signal_detection"),
    message="the signal fails {failure}, the trip is {trip}, and bad signals are not detected",
    basis="NAMUR NE 43:2021; IEC 61511-1:2016 (from memory)",
)
def failure_hides_trip(installed: Installed, plant: Plant) -> Verdict:
    """The signal's failure direction is not the trip's direction, and a bad signal is not detected.

    Why it matters: a failed transmitter reads as healthy on the side away from the trip, and the trip
    never comes.

    What to do: let the signal fail toward the trip, or let the system detect and act on a bad signal.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "trip": "8 barg", "trip direction": "high", "bad-signal detection": "no"}
    >>> said("SET10", [{**row, "failure direction": "low"}])
    ['PT-1: the signal fails low, the trip is high, and bad signals are not detected']
    >>> said("SET10", [{**row, "failure direction": "high"}])
    []
    """
    record = installed.record
    directions = {direction for direction, _, _ in _trips(installed, plant)} or {trip_direction(installed)}
    both_ends = len(directions) > 1
    if both_ends:
        # A trip at either end: no failure direction serves both.
        directions.discard(record.failure_direction)
    direction = directions.pop()
    if direction is None:
        return Unchecked("trip direction")
    if record.bad_signal_detection or record.failure_direction == direction:
        return None
    column = INSTRUMENTS.column("failure_direction").title
    return Found(
        values={"failure": record.failure_direction, "trip": direction},
        fields=("failure_direction", "trip_direction", "bad_signal_detection"),
        found=f"fails {record.failure_direction}",
        wanted=f"fails {direction}, or bad-signal detection",
        fixes=(
            *(() if both_ends else (Fix(text=f"failure direction {direction}", change={column: direction}),)),
            Fix(text="bad-signal detection yes", change={"bad-signal detection": "yes"}),
        ),
    )
