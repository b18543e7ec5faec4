"""SET: alarms and trips: in what order, where on the range, and whether the signal can tell."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Sequence
from dataclasses import dataclass

from instruments.columns import INSTRUMENTS
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.letters import read_letters
from instruments.pressure import referred, stated_reference, ways_to_read
from instruments.quantity import Quantity, format_number
from instruments.signal import MEASUREMENT_MAX_MA, MEASUREMENT_MIN_MA, ma_for_value
from instruments.span import above, below
from loops.plant import Plant
from loops.redundancy import how_redundant, in_redundant_group, redundant_groups
from validation.finding import Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule, title_of
from validation.rules.electrical import signal_class

SETTINGS = ("setting_ll", "setting_l", "setting_h", "setting_hh")
WITH_TRIP = (*SETTINGS, "trip")
SET13_PERCENT = 5.0
NE43 = "NAMUR NE 43:2021 (3.8 to 20.5 mA is measurement)"
PRACTICE = "common practice"
_SWITCHES = frozenset({Kind.SWITCH})


# ----------------------------------------------------------------------------------------- comparing quantities


@dataclass(frozen=True, slots=True)
class _Way:
    """Quantities as comparable numbers, under one reading of pressures whose reference is not stated."""

    numbers: tuple[float, ...]
    assumed: str = ""


def _ways(values: Sequence[Quantity], installed: Installed, plant: Plant) -> tuple[_Way, ...] | None:
    """Return the ways in which quantities can be compared, the plant's default first; None where there is none."""
    units = [each.unit for each in values]
    first = units[0]
    if any(unit is None or first is None or unit.dimension != first.dimension for unit in units):
        return None
    bases = [each.base for each in values]
    if any(base is None for base in bases):
        return None
    numbers = tuple(base for base in bases if base is not None)
    if first is None or first.kind != "pressure":
        return (_Way(numbers),)
    body = installed.body
    references = [stated_reference(each, body=body) or body for each in values]
    ways: list[_Way] = []
    pairs = list(zip(numbers, references, strict=True))
    for way in ways_to_read(pairs, default=plant.data.default_reference):
        in_gauge = [
            referred(pa, reference or way, "gauge", atmospheric_pa=plant.data.atmospheric_pa) for pa, reference in pairs
        ]
        # An absolute pressure beside a difference has no figure that leads from one to the other.
        if "differential" in references and ("absolute" in references or (None in references and way == "absolute")):
            continue
        if any(pa is None for pa in in_gauge):
            return None
        unstated = None in references and any(reference is not None for reference in references)
        ways.append(
            _Way(
                tuple(pa for pa in in_gauge if pa is not None),
                f"a pressure without stated reference is {way}" if unstated else "",
            )
        )
    return tuple(ways) or None


def _judge(ways: Sequence[_Way], fails: Callable[[tuple[float, ...]], bool]) -> tuple[bool, bool, tuple[str, ...]]:
    """Return whether the default reading fails, whether another reading would change that, and the assumption."""
    results = [fails(way.numbers) for way in ways]
    changed = any(result != results[0] for result in results)
    return results[0], changed, (ways[0].assumed,) if changed and ways[0].assumed else ()


def _say(make: Callable[[], Found], ways: Sequence[_Way], fails: Callable[[tuple[float, ...]], bool]) -> Found | None:
    """Return the finding, the same as a review where an unstated reference decides it, or nothing.

    The finding is made only where there is one: most settings are right, and texts cost time.
    """
    failed, changed, assumed = _judge(ways, fails)
    if not failed and not changed:
        return None
    found = make()
    if changed:
        values = {name: getattr(found, name) for name in found.__dataclass_fields__}
        values["assumed"] = (*found.assumed, *assumed)
        return Review(**values)
    return found


def _given(installed: Installed, names: Iterable[str]) -> list[tuple[str, Quantity]]:
    record = installed.record
    pairs = ((name, getattr(record, name)) for name in names)
    return [(name, value) for name, value in pairs if value is not None]


def _unread(installed: Installed, names: Iterable[str]) -> tuple[str, ...]:
    record = installed.record
    return tuple(title_of(name) for name in names if name in record.unread or name in record.unitless)


def _ranges(installed: Installed) -> Iterator[tuple[Quantity, Quantity, str]]:
    record = installed.record
    if record.lrv is not None and record.urv is not None:
        yield record.lrv, record.urv, "field"
    if record.system_lrv is not None and record.system_urv is not None:
        yield record.system_lrv, record.system_urv, "system"


def _same_dimension(one: Quantity, other: Quantity) -> bool:
    return one.unit is not None and other.unit is not None and one.unit.dimension == other.unit.dimension


def _range_for(value: Quantity, installed: Installed) -> tuple[Quantity, Quantity, str] | None:
    """Return the range, field before system, that has the setting's dimension."""
    for lrv, urv, which in _ranges(installed):
        if _same_dimension(value, lrv) and _same_dimension(value, urv):
            return lrv, urv, which
    return None


def trip_direction(installed: Installed) -> str | None:
    """Return high or low: as stated, else as the letters of a switch or alarm say; None where neither does."""
    record = installed.record
    if record.trip_direction is not None:
        return record.trip_direction
    functions = read_letters(installed.letters).functions if installed.letters else ()
    for function in functions:
        if function[:1] in ("S", "A") and len(function) > 1:
            if set(function[1:]) == {"H"}:
                return "high"
            if set(function[1:]) == {"L"}:
                return "low"
    return None


def _amount(difference_base: float, like: Quantity) -> str:
    """Return a difference of base values in the unit of `like`, for people."""
    factor = like.unit.factor if like.unit is not None and like.unit.factor else 1.0
    unit = str(like).partition(" ")[2].removesuffix("g").removesuffix("a") if like.unit else ""
    if like.unit is not None and like.unit.kind != "pressure":
        unit = str(like).partition(" ")[2]
    return f"{format_number(abs(difference_base / factor))} {unit}".strip()


# ---------------------------------------------------------------------------------------------------- the rules


@rule(
    "SET01",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: len(_given(installed, SETTINGS)) > 1,
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
    given = _given(installed, SETTINGS)
    ways = _ways([value for _, value in given], installed, plant)
    if ways is None:
        return Unchecked("settings in one dimension and reference")

    def out_of_order(numbers: tuple[float, ...]) -> bool:
        return any(lower >= upper for lower, upper in zip(numbers, numbers[1:], strict=False))

    failed, changed, _ = _judge(ways, out_of_order)
    if not failed and not changed:
        return None
    numbers = ways[0].numbers
    wrong = tuple(
        name
        for place, (name, _) in enumerate(given)
        if (place and numbers[place - 1] >= numbers[place])
        or (place + 1 < len(given) and numbers[place] >= numbers[place + 1])
    )
    order = sorted(range(len(given)), key=numbers.__getitem__)
    fixes: tuple[Fix, ...] = ()
    if len(set(numbers)) == len(numbers) and failed:
        change = {
            title_of(name): str(given[source][1])
            for (name, _), source in zip(given, order, strict=True)
            if given[source][0] != name
        }
        fixes = (Fix(text="; ".join(f"{title} {value}" for title, value in change.items()), change=change),)
    shown = ", ".join(f"{title_of(name)} {value}" for name, value in given)
    return _say(
        lambda: Found(
            values={"settings": shown},
            fields=wrong or tuple(name for name, _ in given),
            found=shown,
            wanted="LL < L < H < HH",
            fixes=fixes,
        ),
        ways,
        out_of_order,
    )


def _carries_4_20(installed: Installed) -> bool | None:
    """Whether the signal is 4-20 mA; None where nothing says."""
    texts = [row.signal for row in installed.signals if row.signal]
    if installed.type is not None and installed.type.signal:
        texts.append(installed.type.signal)
    for text in texts:
        if signal_class(text) == "current":
            return True
    if texts:
        return False
    return None


def _setting_ma(value: float, lrv: float, urv: float, installed: Installed, which: str) -> float:
    """Return the mA at a setting; with the root taken in the system the signal goes with the square of the flow."""
    record = installed.record
    if which == "system" and record.square_root_system and not record.square_root_device and record.lrv is not None:
        record_kind = record.lrv.unit.kind if record.lrv.unit is not None else ""
        if record_kind == "pressure":
            fraction = (value - lrv) / (urv - lrv)
            return 4.0 + 16.0 * fraction * abs(fraction)
    if which == "field" and record.square_root_device and record.lrv is not None and record.lrv.unit is not None:
        if record.lrv.unit.kind == "pressure":
            return ma_for_value(value, lrv, urv, square_root=True)
    return ma_for_value(value, lrv, urv)


def _has_setting_to_place(installed: Installed, plant: Plant) -> bool:
    if not _given(installed, WITH_TRIP) and not _unread(installed, WITH_TRIP):
        return False
    # A switch has its own scale, which lists do not give.
    return installed.kind not in _SWITCHES or any(True for _ in _ranges(installed))


@dataclass(frozen=True, slots=True)
class _Placed:
    """A setting on its range: the numbers are setting, LRV, URV."""

    name: str
    value: Quantity
    lrv: Quantity
    urv: Quantity
    which: str
    ways: tuple[_Way, ...]


def _placed(installed: Installed, plant: Plant) -> tuple[list[_Placed], list[str]]:
    """Return the settings on their ranges, and what could not be placed."""
    placed: list[_Placed] = []
    unplaced: list[str] = list(_unread(installed, WITH_TRIP))
    for name, value in _given(installed, WITH_TRIP):
        found = _range_for(value, installed)
        if found is None:
            unplaced.append(f"range that {title_of(name)} can be compared with")
            continue
        lrv, urv, which = found
        ways = _ways((value, lrv, urv), installed, plant)
        if ways is None or any(way.numbers[1] == way.numbers[2] for way in ways):
            unplaced.append(f"range that {title_of(name)} can be compared with")
            continue
        placed.append(_Placed(name, value, lrv, urv, which, ways))
    return placed, unplaced


def _outside(numbers: tuple[float, ...]) -> bool:
    value, lrv, urv = numbers
    scale = abs(urv - lrv)
    return above(value, max(lrv, urv), scale=scale) or below(value, min(lrv, urv), scale=scale)


def _is_reached(ma: float) -> bool:
    return not (below(ma, MEASUREMENT_MIN_MA) or above(ma, MEASUREMENT_MAX_MA))


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
    placed, unplaced = _placed(installed, plant)
    analogue = _carries_4_20(installed)
    found: list[Found] = []
    for each in placed:

        def speaks(numbers: tuple[float, ...], each: _Placed = each) -> bool:
            if not _outside(numbers):
                return False
            if analogue is not True:
                return True
            return _is_reached(_setting_ma(*numbers, installed, each.which))

        shown = _say(lambda each=each: _outside_range(each), each.ways, speaks)  # type: ignore[misc]
        if shown is not None:
            found.append(shown)
    if found:
        return found
    return Unchecked(*dict.fromkeys(unplaced)) if unplaced else None


def _outside_range(each: _Placed) -> Found:
    title = title_of(each.name)
    return Found(
        values={"title": title, "setting": str(each.value), "range": _range_text(each)},
        fields=(each.name, *_range_fields(each)),
        part=title,
        found=str(each.value),
        wanted=f"within {_range_text(each)}",
        fixes=_to_the_end(each),
    )


def _range_fields(each: _Placed) -> tuple[str, str]:
    return ("lrv", "urv") if each.which == "field" else ("system_lrv", "system_urv")


def _range_text(each: _Placed) -> str:
    low = str(each.lrv)
    if each.lrv.unit is each.urv.unit:
        low = format_number(each.lrv.number)
    return f"{low} to {each.urv}"


def _to_the_end(each: _Placed) -> tuple[Fix, ...]:
    """Return the nearest end of the range as a setting."""
    numbers = each.ways[0].numbers
    end = each.lrv if abs(numbers[0] - numbers[1]) < abs(numbers[0] - numbers[2]) else each.urv
    title = title_of(each.name)
    return (Fix(text=f"{title} {end} at the most", change={title: str(end)}),)


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
    placed, unplaced = _placed(installed, plant)
    found: list[Found] = []
    for each in placed:

        def unreached(numbers: tuple[float, ...], each: _Placed = each) -> bool:
            return not _is_reached(_setting_ma(*numbers, installed, each.which))

        shown = _say(lambda each=each: _never_reached(each, installed), each.ways, unreached)  # type: ignore[misc]
        if shown is not None:
            found.append(shown)
    if found:
        return found
    return Unchecked(*dict.fromkeys(unplaced)) if unplaced else None


def _never_reached(each: _Placed, installed: Installed) -> Found:
    ma = _setting_ma(*each.ways[0].numbers, installed, each.which)
    end_ma = MEASUREMENT_MAX_MA if ma > 12 else MEASUREMENT_MIN_MA
    title = title_of(each.name)
    needs = f"{format_number(round(ma, 3))} mA"
    working = ""
    if _is_linear(each, installed):
        lrv, urv = format_number(each.lrv.number), format_number(each.urv.number)
        working = f"4 mA + 16 mA x ({each.value} - {lrv}) / ({urv} - {lrv}) = {needs}"
    return Found(
        values={
            "title": title,
            "setting": str(each.value),
            "range": _range_text(each),
            "ma": needs,
            "end": f"{format_number(end_ma)} mA",
        },
        fields=(each.name, *_range_fields(each)),
        part=title,
        found=f"{each.value} at {needs}",
        wanted=f"within {_range_text(each)}",
        off_by=f"{format_number(round(abs(ma - end_ma), 3))} mA",
        working=working,
        fixes=_to_the_end(each),
    )


def _is_linear(each: _Placed, installed: Installed) -> bool:
    record = installed.record
    same = each.value.unit is each.lrv.unit is each.urv.unit
    return same and not record.square_root_device and not record.square_root_system


def _has_trip(installed: Installed, plant: Plant) -> bool:
    return installed.record.trip is not None


def _pre_alarm(installed: Installed) -> tuple[str, str] | None:
    """Return the trip's direction and the field of the pre-alarm on its side; None where nothing says."""
    direction = trip_direction(installed)
    if direction is None:
        return None
    return direction, "setting_h" if direction == "high" else "setting_l"


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
    return _against_trip(installed, plant, at_or_beyond=True)


def _against_trip(installed: Installed, plant: Plant, *, at_or_beyond: bool) -> Verdict:
    record = installed.record
    sides = _pre_alarm(installed)
    if sides is None:
        return Unchecked("trip direction")
    direction, name = sides
    alarm: Quantity | None = getattr(record, name)
    trip = record.trip
    title = title_of(name)
    if alarm is None or trip is None:
        return Unchecked(title if alarm is None else "trip")
    ways = _ways((alarm, trip), installed, plant)
    if ways is None:
        return Unchecked(f"{title} and trip in one dimension and reference")
    sign = 1.0 if direction == "high" else -1.0

    def beyond(numbers: tuple[float, ...]) -> bool:
        return sign * (numbers[0] - numbers[1]) >= 0

    if at_or_beyond:
        numbers = ways[0].numbers
        return _say(
            lambda: Found(
                values={
                    "title": title,
                    "alarm": str(alarm),
                    "trip": str(trip),
                    "direction": direction,
                    "where": "at" if numbers[0] == numbers[1] else "beyond",
                },
                fields=(name, "trip"),
                part=title,
                found=str(alarm),
                wanted=f"{'below' if direction == 'high' else 'above'} {trip}",
                off_by=_amount(numbers[0] - numbers[1], alarm),
            ),
            ways,
            beyond,
        )
    return _too_near(installed, plant, name, alarm, trip, sign)


def _too_near(installed: Installed, plant: Plant, name: str, alarm: Quantity, trip: Quantity, sign: float) -> Verdict:
    found = _range_for(trip, installed)
    if found is None:
        return Unchecked("range")
    lrv, urv, which = found
    ways = _ways((alarm, trip, lrv, urv), installed, plant)
    if ways is None:
        return Unchecked("range")
    percent = plant.threshold("SET13 %", SET13_PERCENT)
    title = title_of(name)
    numbers = ways[0].numbers
    span = abs(numbers[3] - numbers[2])
    if not span:
        return Unchecked("range")
    distance = sign * (numbers[1] - numbers[0])
    if distance <= 0:
        return NotApplicable("the pre-alarm is beyond its trip")

    def near(given: tuple[float, ...]) -> bool:
        here = abs(given[3] - given[2])
        apart = sign * (given[1] - given[0])
        return apart > 0 and below(apart, here * percent / 100, scale=here)

    of_span = f"{format_number(round(distance / span * 100, 2))} %"
    factor = trip.unit.factor if trip.unit is not None and trip.unit.factor else 1.0
    farthest = trip.number - sign * span * percent / 100 / factor
    wanted = Quantity.made(farthest, trip.unit, trip.reference)
    return _say(
        lambda: Found(
            values={
                "title": title,
                "alarm": str(alarm),
                "trip": str(trip),
                "of_span": of_span,
                "limit": f"{format_number(percent)} %",
            },
            fields=(name, "trip"),
            part=title,
            found=of_span,
            wanted=f"at least {format_number(percent)} % of span",
            working=f"|{alarm} - {trip}| is {of_span} of the span",
            fixes=(Fix(text=f"{title} {wanted}", change={title: str(wanted)}),),
        ),
        ways,
        near,
    )


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
    return _against_trip(installed, plant, at_or_beyond=False)


_DESIGN = {"P": "design_pressure", "T": "design_temperature"}


def _design_field(installed: Installed) -> str | None:
    letters = installed.letters
    if not letters or installed.body == "differential" or letters.startswith(("PD", "TD", "DP")):
        return None
    return _DESIGN.get(letters[0])


@rule(
    "SET04",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: _has_trip(installed, plant) and _design_field(installed) is not None,
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
    direction = trip_direction(installed)
    if direction is None:
        return Unchecked("trip direction")
    if direction != "high":
        return NotApplicable()
    name = _design_field(installed)
    assert name is not None
    trip = installed.record.trip
    design: Quantity | None = getattr(installed.record, name)
    if design is None or trip is None:
        return Unchecked(title_of(name))
    ways = _ways((trip, design), installed, plant)
    if ways is None:
        return Unchecked(f"trip and {title_of(name)} in one dimension and reference")
    return _say(
        lambda: Found(
            values={"trip": str(trip), "design": str(design)},
            fields=("trip", name),
            part="trip",
            found=str(trip),
            wanted=f"at most {design}",
            off_by=_amount(ways[0].numbers[0] - ways[0].numbers[1], trip),
            fixes=(Fix(text=f"trip {design} at the most", change={"trip": str(design)}),),
        ),
        ways,
        lambda numbers: above(numbers[0], numbers[1]),
    )


def measured_normal(installed: Installed) -> tuple[str, Quantity] | None:
    """Return the normal value of the measured quantity and its field; None where it is blank.

    The operating value; where that is blank, the operating pressure of a pressure tag (never of a
    differential one) and the operating temperature of a temperature tag.
    """
    record = installed.record
    if record.operating_value_normal is not None:
        return "operating_value_normal", record.operating_value_normal
    if _design_field(installed) == "design_pressure" and record.operating_pressure_normal is not None:
        return "operating_pressure_normal", record.operating_pressure_normal
    if _design_field(installed) == "design_temperature" and record.operating_temperature_normal is not None:
        return "operating_temperature_normal", record.operating_temperature_normal
    return None


@rule(
    "SET05",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: bool(_given(installed, SETTINGS)),
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
    normal = measured_normal(installed)
    if normal is None:
        return Unchecked("operating value normal")
    field, value = normal
    beyond: list[tuple[str, Quantity]] = []
    assumed: list[str] = []
    review = False
    compared = False
    for name, setting in _given(installed, SETTINGS):
        ways = _ways((value, setting), installed, plant)
        if ways is None:
            continue
        compared = True
        high = name in ("setting_h", "setting_hh")
        failed, changed, why = _judge(
            ways,
            lambda numbers, high=high: (  # type: ignore[misc]
                above(numbers[0], numbers[1]) if high else below(numbers[0], numbers[1])
            ),
        )
        if failed or changed:
            beyond.append((name, setting))
            assumed.extend(why)
            review = review or changed
    if not compared:
        return Unchecked("operating value and settings in one dimension and reference")
    if not beyond:
        return None
    shown = ", ".join(f"{title_of(name)} {setting}" for name, setting in beyond)
    kind = Review if review else Found
    return kind(
        values={"normal": str(value), "settings": shown},
        fields=(field, *(name for name, _ in beyond)),
        found=str(value),
        wanted=f"on the other side of {shown}",
        assumed=tuple(dict.fromkeys(assumed)),
    )


# -------------------------------------------------------------------------------------------- what letters promise

_NO_SETTINGS = frozenset("BHKJUXYZ")
_FIELD_OF = {"H": "setting_h", "HH": "setting_hh", "L": "setting_l", "LL": "setting_ll"}


def _promised(installed: Installed) -> list[tuple[str, str]]:
    """Return the function (S, A) and level (H, HH, L, LL) for each setting that the letters promise."""
    reading = installed.tag
    if reading is None or not reading.parsed or installed.letters[:1] in _NO_SETTINGS:
        return []
    letters = reading.code.letters if reading.code is not None else reading.letters
    if not letters:
        return []
    promised: list[tuple[str, str]] = []
    for function in read_letters(letters).functions:
        level = function[1:]
        if function[:1] in ("S", "A") and level:
            if set(level) == {"H"}:
                promised.append((function[0], "H" if level == "H" else "HH"))
            elif set(level) == {"L"}:
                promised.append((function[0], "L" if level == "L" else "LL"))
            elif level in ("HL", "LH"):
                promised.extend(((function[0], "H"), (function[0], "L")))
    return promised


def _has_level(installed: Installed, plant: Plant) -> bool:
    return not installed.equipment_tag and bool(_promised(installed))


def _any_setting(plant: Plant) -> bool:
    return bool(
        plant.once(
            "has settings",
            lambda plant: (
                any(
                    _given(each, (*WITH_TRIP, "set_pressure"))
                    or {*WITH_TRIP, "set_pressure"} & (each.record.unread | each.record.unitless.keys())
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


def _on_alarm_list(installed: Installed, names: Iterable[str], plant: Plant) -> bool:
    listed: dict[str, set[str]] = plant.once("settings on the alarm list", _alarm_list_settings)
    key = installed.record.tag or ""
    return bool(listed.get(key, set()) & set(names))


def _alarm_list_settings(plant: Plant) -> dict[str, set[str]]:
    listed: dict[str, set[str]] = {}
    for row in plant.alarm_list:
        if not row.tag:
            continue
        filled = {name for name in WITH_TRIP if getattr(row, name) is not None}
        for each in plant.by_tag(row.tag):
            if each.record.tag:
                listed.setdefault(each.record.tag, set()).update(filled)
        listed.setdefault(row.tag, set()).update(filled)
    return listed


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
    so does the alarm and trip list.

    >>> from validation.example import said
    >>> rows = [{"tag": "LSHH-1", "HH": ""}, {"tag": "LSHH-2", "HH": "4.8 m"}]
    >>> said("SET06", rows)
    ['LSHH-1: the letters LSHH promise a switch at HH, and there is none']
    """
    record = installed.record
    missing: list[tuple[str, str]] = []
    unread: list[str] = []
    for function, level in _promised(installed):
        names = [_FIELD_OF[level]]
        if function == "S" or installed.kind in _SWITCHES:
            names += ["trip", "set_pressure"]
        if any(getattr(record, name) is not None for name in names) or _on_alarm_list(installed, names, plant):
            continue
        if any(name in record.unread or name in record.unitless for name in names):
            unread.append(title_of(names[0]))
            continue
        if function == "A" and _set_in_loop(installed, _FIELD_OF[level], plant):
            continue
        missing.append((function, level))
    if missing:
        what = " and ".join(
            f"{'a switch' if function == 'S' else 'an alarm'} at {level}" for function, level in missing
        )
        return Found(
            values={"letters": installed.letters, "what": what},
            fields=tuple(_FIELD_OF[level] for _, level in missing),
            found="blank",
            wanted=what,
        )
    return Unchecked(*unread) if unread else None


def _set_in_loop(installed: Installed, name: str, plant: Plant) -> bool:
    """Whether another row of the loop, the transmitter's for one, holds the setting of an alarm."""
    loop = plant.loop_of(installed)
    if loop is None:
        return False
    return any(
        getattr(each.record, name) is not None or _on_alarm_list(each, (name,), plant)
        for each in loop.members
        if each is not installed and each.letters[:1] == installed.letters[:1]
    )


# -------------------------------------------------------------------------------------------------- trips together


@rule(
    "SET08",
    severity=Severity.DANGER,
    on=Subject.GROUP,
    applies=lambda installed, plant: in_redundant_group(installed, plant) and _trips(installed),
    needs=("trip",),
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
    trips = [each.record.trip for each in group]
    values = [trip for trip in trips if trip is not None]
    directions = {direction for direction in map(trip_direction, group) if direction}
    ways = _ways(values, group[0], plant)
    if ways is None:
        return Unchecked("trips in one dimension and reference")

    def differ(numbers: tuple[float, ...]) -> bool:
        largest = max(map(abs, numbers)) or 1.0
        return max(numbers) - min(numbers) > 1e-9 * largest

    settings = ", ".join(
        f"{each.record.trip} {trip_direction(each)}" if len(directions) > 1 else str(each.record.trip) for each in group
    )
    cells = tuple(cell for each in group for cell in each.cells("trip"))
    found = Found(values={"settings": settings}, fields=("trip",), found=settings, wanted="one setting", cells=cells)
    shown: Found | None = found if len(directions) > 1 else _say(lambda: found, ways, differ)
    if shown is not None and not isinstance(shown, Review) and how_redundant(group, plant) == "suffix":
        values_of = {name: getattr(shown, name) for name in shown.__dataclass_fields__}
        values_of["message"] = (
            "devices that may be redundant (by suffix alone) have different trip settings: {settings}"
        )
        return Review(**values_of)
    return shown


def _trips(installed: Installed) -> bool:
    record = installed.record
    return bool(record.trip is not None or record.trip_direction or record.safety_function or record.voting)


@rule(
    "SET10",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: (
        _has_trip(installed, plant) and installed.kind not in _SWITCHES and _carries_4_20(installed) is not False
    ),
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
    direction = trip_direction(installed)
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
            Fix(text=f"failure direction {direction}", change={column: direction}),
            Fix(text="bad-signal detection yes", change={"bad-signal detection": "yes"}),
        ),
    )
