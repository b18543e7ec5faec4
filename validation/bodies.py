"""What an instrument asks of its body, worked out once for each plant, and the device types that would give it."""

from __future__ import annotations

from collections.abc import Callable, Hashable, Iterator
from dataclasses import fields, replace
from typing import Any, Final, NamedTuple

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.marking import read_marking
from instruments.measurement import Measurement, at, from_to, measurement_of
from instruments.record import DeviceType, Record
from instruments.tag import natural_key
from loops.plant import Plant, name_key
from validation.finding import Fix, Found, Unchecked, Verdict

BodyCheck = Callable[[Measurement, Plant], Verdict]
MOST_TYPES: Final = 3
"""How many device types a finding names."""


def measured(installed: Installed, plant: Plant) -> Measurement:
    """Return what an instrument measures, worked out once for each plant."""
    known: dict[Installed, Measurement] = plant.once("measurements", _none_yet)
    found = known.get(installed)
    if found is None:
        found = known[installed] = measurement_of(installed, asked=_must_have_a_range(installed, plant))
    return found


def _none_yet(plant: Plant) -> dict[Any, Any]:
    return {}


def is_element_of_transmitter(installed: Installed, plant: Plant) -> bool:
    """Whether it is an element whose loop has a transmitter, which then carries range and signal."""
    if installed.kind is not Kind.ELEMENT:
        return False
    loop = plant.loop_of(installed)
    return loop is not None and any(each.kind in _CARRIES_THE_RANGE for each in loop.members)


_CARRIES_THE_RANGE: Final = frozenset({Kind.TRANSMITTER, Kind.ANALYSER})
_WITHOUT_RANGE: Final = frozenset({Kind.GLASS, Kind.FIRE_DETECTOR})


def _must_have_a_range(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    return (
        kind is not None
        and kind.measures == "yes"
        and kind not in _WITHOUT_RANGE
        and not is_element_of_transmitter(installed, plant)
    )


def with_range(installed: Installed, plant: Plant) -> bool:
    """Whether it has a range, or must have one."""
    measurement = measured(installed, plant)
    return measurement.ranged or measurement.asked


def with_span(installed: Installed, plant: Plant) -> bool:
    """Whether it has a range, or must have one, and RNG01 does not find that its ends are one."""
    measurement = measured(installed, plant)
    return not measurement.flat if measurement.ranged else measurement.asked


_ON_A_BODY: Final = frozenset({"yes", "setting"})


def stands_on_a_body(installed: Installed) -> bool:
    """Whether something of its kind measures, so that it has a body; an unknown kind may."""
    return installed.kind is None or installed.kind.measures in _ON_A_BODY


def ranged_body(installed: Installed, plant: Plant) -> bool:
    """Whether it has a field range set on a body, or must have one, and RNG01 finds nothing."""
    measurement = measured(installed, plant)
    if measurement.field is None:
        return measurement.asked and not measurement.flat
    return not measurement.flat and stands_on_a_body(installed)


# ------------------------------------------------------------------------------------------ other device types


class _Candidate(NamedTuple):
    type: DeviceType
    code: str
    unknown: frozenset[str]


_CHECKS: dict[str, BodyCheck] = {}


def body_check(code: str) -> Callable[[BodyCheck], BodyCheck]:
    """Register the check of rule `code`, without its fixes, as one that another device type must pass."""

    def register(check: BodyCheck) -> BodyCheck:
        _CHECKS[code] = check
        return check

    return register


def type_fixes(code: str, measurement: Measurement, plant: Plant) -> tuple[Fix, ...]:
    """Return the device types of the catalogue that pass rule `code`, and fail no other rule about bodies.

    They are of the same kind, body, dimension and signal. Where some have the marking that the present
    type has, only those, else those marked by the same system for the same atmosphere; the narrowest limits
    come first.
    """
    installed = measurement.installed
    if not installed.record.device_type or not plant.types:
        return ()
    known: dict[Hashable, tuple[_Candidate, ...]] = plant.once("device types that hold", _none_yet)
    key = _asked(measurement)
    found = known.get(key) if key is not None else None
    if found is None:
        found = tuple(_candidates(measurement, plant))
        if key is not None:
            known[key] = found
    chosen = [each for each in found if code not in each.unknown][:MOST_TYPES]
    return tuple(Fix(text=_type_text(each), change={"device type": each.code}) for each in chosen)


def _type_text(candidate: _Candidate) -> str:
    lrl, url = candidate.type.lrl, candidate.type.url
    limits = f" ({from_to(lrl, url)})" if lrl is not None and url is not None else ""
    return f"device type {candidate.code}{limits}"


def _asked(measurement: Measurement) -> Hashable | None:
    """Return all that the checks look at; None where the row states limits of its own, which outlive its type."""
    installed, record = measurement.installed, measurement.installed.record
    if record.own is not None:
        return None
    return (
        installed.kind,
        measurement.variable,
        measurement.body,
        installed.type.code if installed.type is not None else None,
        id(installed.area),
        *(getattr(record, name) for name in _LOOKED_AT),
    )


_LOOKED_AT: Final = (
    "lrv",
    "urv",
    "system_lrv",
    "system_urv",
    "setting_ll",
    "setting_l",
    "setting_h",
    "setting_hh",
    "trip",
    "set_pressure",
    "operating_pressure_min",
    "operating_pressure_normal",
    "operating_pressure_max",
    "operating_temperature_min",
    "operating_temperature_normal",
    "operating_temperature_max",
    "design_pressure",
    "design_temperature",
    "device_temperature",
    "mounting",
    "location",
    "signal",
    "ex_marking",
)

_OWN_FIELDS: Final = tuple(
    each.name for each in fields(DeviceType) if each.name not in {field.name for field in fields(Record)}
)


def _candidates(measurement: Measurement, plant: Plant) -> Iterator[_Candidate]:
    installed = measurement.installed
    now = installed.listed_type
    if now is None:
        return
    kind = now.kind or installed.kind
    passing: list[_Candidate] = []
    for each in plant.types.values():
        if each is now or each.code is None or not _is_like(each, now, kind):
            continue
        unknown = _passes(_with_type(installed, each), plant)
        if unknown is not None:
            passing.append(_Candidate(each, each.code, unknown))
    marked_alike = [each for each in passing if each.type.ex_marking == now.ex_marking]
    chosen = marked_alike or [each for each in passing if _is_marked_for_the_same(each.type, now)]
    yield from sorted(chosen, key=lambda each: (_size(each.type), natural_key(each.code)))


def _is_marked_for_the_same(other: DeviceType, now: DeviceType) -> bool:
    """Whether another type is marked by the system of the present one, for its atmosphere; unmarked ones are alike."""
    marked, wanted = _marked_for(other), _marked_for(now)
    return marked == wanted or bool(marked & wanted)


def _marked_for(device: DeviceType) -> frozenset[tuple[str, str | None]]:
    marking = read_marking(device.ex_marking) if device.ex_marking else None
    return frozenset((entry.scheme, entry.side) for entry in marking.entries) if marking is not None else frozenset()


# Kinds whose word says all that they do; of the others the dimension of their limits tells a level from a flow.
_SAYS_WHAT_IT_DOES: Final = frozenset(
    {
        Kind.SOLENOID,
        Kind.POSITIONER,
        Kind.IP_CONVERTER,
        Kind.HAND_SWITCH,
        Kind.LAMP,
        Kind.SOUNDER,
        Kind.INDICATOR,
    }
)
# What one of these measures stands nowhere in the catalogue: no other is known to measure the same.
_OF_ITS_OWN: Final = frozenset({Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR})


def _is_like(other: DeviceType, now: DeviceType, kind: Kind | None) -> bool:
    """Whether another type could stand in the place of the present one, limits apart."""
    if kind is None or other.kind is not kind or kind in _OF_ITS_OWN or _body_of(other) != _body_of(now):
        return False
    if kind not in _SAYS_WHAT_IT_DOES:
        one, two = (limit.unit if limit is not None else None for limit in (other.url, now.url))
        if one is None or two is None or one.dimension != two.dimension:
            return False
    if other.wires != now.wires and None not in (other.wires, now.wires):
        return False
    if other.nominal_v != now.nominal_v and None not in (other.nominal_v, now.nominal_v):
        return False
    # Another sensor may be the mend, and has another signal.
    return kind is Kind.ELEMENT or name_key(other.signal) == name_key(now.signal)


def _passes(installed: Installed, plant: Plant) -> frozenset[str] | None:
    """Return the codes of the checks that cannot be made of a type; None where it fails one."""
    measurement = measurement_of(installed, asked=_must_have_a_range(installed, plant))
    unknown: set[str] = set()
    for code, check in _CHECKS.items():
        verdict = check(measurement, plant)
        if isinstance(verdict, Unchecked):
            unknown.add(code)
        elif isinstance(verdict, (Found, list, tuple)) and verdict:
            return None
    return frozenset(unknown)


def _with_type(installed: Installed, chosen: DeviceType) -> Installed:
    own = installed.record.own
    limits = chosen
    if own is not None:
        values = {name: getattr(own, name) for name in _OWN_FIELDS if getattr(own, name) is not None}
        limits = replace(chosen, **values)
    return replace(installed, listed_type=chosen, type=limits, body=_body_of(limits))


def _body_of(device: DeviceType) -> str | None:
    if device.body is not None:
        return device.body
    reference = device.url.reference if device.url is not None else None
    return reference if reference in ("gauge", "absolute", "differential") else None


def _size(device: DeviceType) -> float:
    return max(abs(at(limit)) if limit is not None else 0.0 for limit in (device.lrl, device.url))
