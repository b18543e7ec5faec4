"""RNG: whether field, control system and redundant neighbours have one range, and the square root is taken once."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.measurement import Measurement, Scale, amount, at, in_unit, same_dimension
from instruments.quantity import Quantity, format_number
from instruments.record import Instrument
from instruments.span import SLACK
from instruments.unit import Unit, unit_label
from loops.plant import Plant
from loops.redundancy import how_redundant, in_redundant_group, redundant_groups
from validation.bodies import measured
from validation.finding import Fix, Found, Review, Severity, Unchecked, Verdict
from validation.mending import SAME_RANGE, read_both_ways, written
from validation.rule import Subject, rule, title_of
from validation.rules.pressure_references import BY_RNG06

_WIRED: Final = frozenset({"yes", "element"})


def _with_two_ranges(installed: Installed, plant: Plant) -> bool:
    measurement = measured(installed, plant)
    field, system = measurement.field, measurement.system
    if field is not None and system is not None:
        return not field.flat and not system.flat
    if measurement.flat or installed.kind is None or installed.kind.wired not in _WIRED:
        return False
    return measurement.asked


@rule(
    "RNG09",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_with_two_ranges,
    needs=("lrv", "urv", "system_lrv", "system_urv"),
    message="the field range is {field}, the range in the control system {system}{in_field_unit}",
    basis="common practice",
)
def ranges_differ(installed: Installed, plant: Plant) -> Verdict:
    """A field range and a control-system range that are not the same.

    Why it matters: every reading is wrong by the ratio of the two, and so is every alarm and trip
    though the settings look right on both sides.

    What to do: settle which of the two is meant, and set the other to it. A differential pressure in
    the field and a flow or a level in the system cannot be compared here.

    >>> from validation.example import said
    >>> said("RNG09", [{"tag": "PT-1", "LRV": "0 barg", "URV": "10 barg",
    ...                 "system LRV": "0 barg", "system URV": "1600 kPag"}])
    ['PT-1: the field range is 0 to 10 barg, the range in the control system 0 barg to 1600 kPag (0 to 16 barg)']
    >>> said("RNG09", [{"tag": "PT-1", "LRV": "0 barg", "URV": "10 barg",
    ...                 "system LRV": "0 MPag", "system URV": "1 MPag"}])
    []
    """
    measurement = measured(installed, plant)
    field, system = measurement.field, measurement.system
    assert field is not None
    assert system is not None
    if field.unit is None:
        return Unchecked("range unit")
    if system.unit is None:
        return Unchecked("system unit")
    if not same_dimension(field.unit, system.unit):
        return Unchecked("field and system range of one dimension")
    ends = _system_in_field(measurement)
    if ends is None:
        return Unchecked(BY_RNG06)
    tolerance = SAME_RANGE * field.span
    off = [end - at(mine) for end, mine in zip(ends, (field.lrv, field.urv), strict=True)]
    if all(abs(each) <= tolerance for each in off):
        return None
    unit = field.unit
    in_field = [in_unit(end, unit) for end in ends]
    shown = f"{format_number(in_field[0])} to {written(in_field[1], unit)}"
    if shown == str(field):  # they differ in a digit that nobody would write
        shown = f"{in_field[0]:.10g} to {in_field[1]:.10g} {unit_label(unit)}"
    worst = max(off, key=abs)
    names = [
        name
        for each, pair in zip(off, (("lrv", "system_lrv"), ("urv", "system_urv")), strict=True)
        if abs(each) > tolerance
        for name in pair
    ]
    return Found(
        values={
            "field": str(field),
            "system": shown if system.unit is unit else str(system),
            "in_field_unit": "" if system.unit is unit else f" ({shown})",
        },
        fields=tuple(names),
        found=f"field {field}, system {shown}",
        wanted="the same range",
        off_by=amount(worst, unit),
        working="" if system.unit is unit else f"{system} = {shown}",
        fixes=(
            Fix(
                text=f"system range as the field's: {field}",
                change={"system LRV": str(field.lrv), "system URV": str(field.urv)},
            ),
            Fix(
                text=f"field range as the system's: {shown}",
                change={"LRV": _exactly(in_field[0], unit), "URV": _exactly(in_field[1], unit)},
            ),
        ),
    )


def _exactly(value: float, unit: Unit) -> str:
    """Write a value with the digits that it takes to be the same range again."""
    if not 1e-4 <= abs(value) < 1e10 or unit.reference == "vacuum":
        return written(value, unit)
    return f"{value:.10g} {unit_label(unit)}"


def _system_in_field(measurement: Measurement) -> tuple[float, float] | None:
    """Return the ends of the system range in the base unit; None where it is referred to something else (RNG06)."""
    field, system = measurement.field, measurement.system
    assert field is not None
    assert system is not None
    if not field.is_pressure:
        return at(system.lrv), at(system.urv)
    references = {measurement.reference(end) for end in (field.lrv, field.urv, system.lrv, system.urv)}
    if "absolute" in references and len(references) > 1:
        return None
    return at(system.lrv), at(system.urv)


def _redundant(plant: Plant) -> Iterator[tuple[Installed, ...]]:
    return (group.members for group in redundant_groups(plant))


def _in_group(installed: Installed, plant: Plant) -> bool:
    if not in_redundant_group(installed, plant):
        return False
    measurement = measured(installed, plant)
    return not measurement.flat if measurement.ranged else measurement.asked


@rule(
    "RNG10",
    severity=Severity.DANGER,
    on=Subject.GROUP,
    applies=_in_group,
    needs=("lrv|system_lrv", "urv|system_urv"),
    groups=_redundant,
    alone_is_clear=False,
    message="redundant, and their ranges differ: {ranges}",
    basis="common practice",
)
def redundant_ranges_differ(group: tuple[Installed, ...], plant: Plant) -> Verdict:
    """Redundant devices with different ranges.

    Why it matters: a voter compares them; where one saturates or reads by another scale, two of three
    become one of two, and the deviation alarm that should tell is switched off as a nuisance.

    What to do: give them one range. Suffixes alone do not make devices redundant (split range, wide and
    narrow range, the points of a multipoint): then somebody must say.

    >>> from validation.example import said
    >>> rows = [{"tag": "PT-1A", "safety function": "SIF-1", "LRV": "0 barg", "URV": "10 barg"},
    ...         {"tag": "PT-1B", "safety function": "SIF-1", "LRV": "0 barg", "URV": "16 barg"}]
    >>> said("RNG10", rows)
    ['PT-1A, PT-1B: redundant, and their ranges differ: PT-1A 0 to 10 barg; PT-1B 0 to 16 barg']
    >>> said("RNG10", [rows[0], {**rows[1], "URV": "1000 kPag"}])
    []
    """
    members = [measured(each, plant) for each in group]
    scales = _compared_scales(members)
    if scales is None:
        return Unchecked("ranges of one dimension")
    default = plant.data.default_reference
    pressures = [
        (at(scale.urv), member.reference(scale.urv))
        for member, scale in zip(members, scales, strict=True)
        if scale.is_pressure
    ]

    def check(open_as: str) -> Verdict:
        first, first_scale = members[0], scales[0]
        to = first.reference(first_scale.urv) or open_as
        ends: list[tuple[float, float]] = []
        for member, scale in zip(members, scales, strict=True):
            pair = [
                member.at(end, to=to, open_as=open_as, atmospheric_pa=plant.data.atmospheric_pa)
                for end in (scale.lrv, scale.urv)
            ]
            if pair[0] is None or pair[1] is None:
                return _ranges_found(members, scales, plant)
            ends.append((pair[0], pair[1]))
        tolerance = SAME_RANGE * first_scale.span
        if all(abs(each[0] - ends[0][0]) <= tolerance and abs(each[1] - ends[0][1]) <= tolerance for each in ends):
            return None
        return _ranges_found(members, scales, plant)

    verdict = read_both_ways(check, pressures, plant) if pressures else check(default)
    if verdict is None and scales[0] is members[0].system:
        return _field_ranges(members, plant)
    return verdict


def _compared_scales(members: Sequence[Measurement]) -> list[Scale] | None:
    """Return the ranges to compare: the field's; the system's where a pressure in the field stands for a flow."""
    systems = [each.system for each in members if each.system is not None]
    fields = [each.field for each in members if each.field is not None]
    if len(systems) == len(members) and _of_one_dimension(systems):
        stands_for = any(
            field.is_pressure and system.unit is not None and system.unit.kind != "pressure"
            for field, system in ((each.field, each.system) for each in members)
            if field is not None and system is not None
        )
        if stands_for or len(fields) < len(members) or not _of_one_dimension(fields):
            return systems
    if len(fields) == len(members) and _of_one_dimension(fields):
        return fields
    either = [each.field or each.system for each in members]
    known = [each for each in either if each is not None]
    return known if len(known) == len(members) and _of_one_dimension(known) else None


def _of_one_dimension(scales: Sequence[Scale]) -> bool:
    first = scales[0].unit
    return first is not None and all(each.unit is not None and same_dimension(each.unit, first) for each in scales)


def _field_ranges(members: Sequence[Measurement], plant: Plant) -> Verdict:
    """Review field ranges that differ though the system's are one: legs and elements may differ, or one is wrong."""
    fields = [each.field for each in members]
    known = [each for each in fields if each is not None]
    if len(known) < len(members) or not _of_one_dimension(known):
        return None
    tolerance = SAME_RANGE * known[0].span
    if all(
        abs(at(each.lrv) - at(known[0].lrv)) <= tolerance and abs(at(each.urv) - at(known[0].urv)) <= tolerance
        for each in known
    ):
        return None
    found = _ranges_found(members, known, plant)
    return Review(
        values=found.values,
        fields=found.fields,
        found=found.found,
        wanted=found.wanted,
        message="redundant, with one range in the system and several in the field: {ranges}",
        cells=found.cells,
    )


def _ranges_found(members: Sequence[Measurement], scales: Sequence[Scale], plant: Plant) -> Found:
    ranges = "; ".join(f"{each.installed.name} {scale}" for each, scale in zip(members, scales, strict=True))
    in_system = scales[0] is members[0].system
    fields = ("system_lrv", "system_urv") if in_system else ("lrv", "urv")
    kind = Found if how_redundant((each.installed for each in members), plant) == "declared" else Review
    return kind(
        values={"ranges": ranges},
        fields=fields,
        found=ranges,
        wanted="one range",
        cells=tuple(cell for each in members for name in fields for cell in each.installed.cells(name)),
        message="" if kind is Found else "alike but for their suffixes, and their ranges differ: {ranges}",
    )


_TAKES_A_ROOT: Final = frozenset({None, Kind.TRANSMITTER})


def _is_dp_flow(installed: Installed, plant: Plant) -> bool:
    if installed.kind not in _TAKES_A_ROOT:
        return False
    measurement = measured(installed, plant)
    if measurement.flat or measurement.variable != "F":
        return False
    return installed.body == "differential" or (measurement.field is not None and measurement.field.is_pressure)


@rule(
    "RNG11",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_is_dp_flow,
    needs=("square_root_device", "square_root_system"),
    message="the square root is taken {where}: at a quarter of the differential pressure "
    "the flow reads {reads}, not 50 %",
    basis="common practice: q = square root of dp",
)
def root_taken_twice_or_never(installed: Installed, plant: Plant) -> Verdict:
    """A flow by differential pressure whose square root is taken twice or not at all.

    Why it matters: it reads right at full flow and at nothing, and wrong everywhere between.

    What to do: take the root in the transmitter or in the control system, not in both.

    >>> from validation.example import said
    >>> row = {"tag": "FT-1", "LRV": "0 mbar", "URV": "250 mbar", "square root in device": "yes"}
    >>> said("RNG11", [{**row, "square root in system": "yes"}])
    ['FT-1: the square root is taken twice: at a quarter of the differential pressure the flow reads 70.7 %, not 50 %']
    >>> said("RNG11", [{**row, "square root in system": "no"}])
    []
    """
    record = installed.record
    if record.square_root_device is not record.square_root_system:
        return None
    twice = bool(record.square_root_device)
    wanted = "no" if twice else "yes"
    return Found(
        values={
            "where": "twice" if twice else "neither in the device nor in the system",
            "reads": "70.7 %" if twice else "25 %",
        },
        fields=("square_root_device", "square_root_system"),
        found="in the device and in the system" if twice else "in neither",
        wanted="in one of the two",
        working="(25 %)^(1/4) = 70.7 %" if twice else "25 % of dp is 50 % of flow: square root of 0.25 = 0.5",
        fixes=tuple(
            Fix(text=f"{title}: {wanted}", change={title: wanted})
            for title in ("square root in device", "square root in system")
        ),
    )


def _takes_a_root(installed: Installed, plant: Plant) -> bool:
    record = installed.record
    if measured(installed, plant).flat:
        return False
    if record.square_root_device or record.square_root_system:
        return True
    # Where one of the two is not stated the root may be taken there.
    return None in (record.square_root_device, record.square_root_system) and _is_dp_flow(installed, plant)


@rule(
    "RNG12",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_takes_a_root,
    needs=("lrv|system_lrv",),
    message="a square root is taken, and {end} is {value}, not 0",
    basis="common practice: 4 mA is no flow",
)
def root_without_zero(installed: Installed, plant: Plant) -> Verdict:
    """A square root on a range that does not begin at zero.

    Why it matters: the root of a share of the span is the flow only where the span begins at no flow;
    with any other LRV the whole scale is bent.

    What to do: range it from 0.

    >>> from validation.example import said
    >>> row = {"tag": "FT-1", "URV": "250 mbar", "square root in device": "yes", "square root in system": "no"}
    >>> said("RNG12", [{**row, "LRV": "10 mbar"}])
    ['FT-1: a square root is taken, and LRV is 10 mbar, not 0']
    >>> said("RNG12", [{**row, "LRV": "0 mbar"}])
    []
    """
    record = installed.record
    found: list[Found] = []
    for end, name, lrv, urv in (
        ("LRV", "lrv", record.lrv, record.urv),
        ("system LRV", "system_lrv", record.system_lrv, record.system_urv),
    ):
        if lrv is None or abs(lrv.number) <= SLACK * max(abs(urv.number) if urv is not None else 0.0, abs(lrv.number)):
            continue
        if lrv.number == 0.0:
            continue
        if not (record.square_root_device or record.square_root_system):
            return Unchecked(*_roots_not_stated(record))
        found.append(
            Found(
                values={"end": end, "value": str(lrv)},
                fields=(name,),
                part="" if end == "LRV" else end,
                found=str(lrv),
                wanted=written(0.0, lrv.unit) if lrv.unit is not None else "0",
                off_by=str(lrv),
                fixes=_from_zero(end, lrv, urv),
            )
        )
    if found:
        return found
    if record.lrv is None and (record.square_root_device or measured(installed, plant).asked):
        return Unchecked("LRV")  # the system's zero says nothing of the device's
    return None


def _roots_not_stated(record: Instrument) -> tuple[str, ...]:
    return tuple(
        title_of(name) for name in ("square_root_device", "square_root_system") if getattr(record, name) is None
    )


def _from_zero(end: str, lrv: Quantity, urv: Quantity | None) -> tuple[Fix, ...]:
    if lrv.unit is None or lrv.unit.offset:
        return ()
    zero = written(0.0, lrv.unit)
    change = {end: zero}
    if urv is not None and urv.number == 0.0:
        change[end.replace("LRV", "URV")] = str(lrv)  # a reversed range: its ends are exchanged
    return (Fix(text=f"{end} {zero}", change=change),)
