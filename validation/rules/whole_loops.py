"""DAT: what is alone that cannot be: an element, a well, a controller."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import replace
from functools import lru_cache
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.letters import read_letters
from instruments.tag import canonical_tag
from loops.circuit import ANALOGUE_OUTPUT, DIGITAL_OUTPUT, Loop
from loops.plant import Plant, name_key
from loops.wiring import circuit_kind
from validation.channel import channels, takes_a_sensor
from validation.finding import Found, NotApplicable, Severity, Unchecked, Verdict
from validation.rule import Subject, rule

# --------------------------------------------------------------------------------------------- elements and wells

_INDICATES: Final = frozenset({Kind.GAUGE, Kind.INDICATOR, Kind.GLASS})
_TAKES: Final = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR, Kind.SWITCH})
_FOR_TESTS: Final = re.compile(r"\btest(?:ing)?\b|\bspare\b|\bblank(?:ed)?\b|\bplugged\b|pr\u00fcf", re.IGNORECASE)
# Under these letters the transmitter of an orifice F-101 stands in many lists.
_DIFFERENTIAL: Final = ("PDT", "PDIT", "DPT", "DPIT", "PDI", "PDG")


def _is_well(installed: Installed) -> bool:
    return installed.letters[:1] == "T" and installed.letters[-1:] == "W"


def _element_or_well(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    if kind is Kind.ELEMENT or kind is None:
        return not installed.equipment_tag
    return kind is Kind.PRIMARY_ELEMENT and (_is_well(installed) or installed.letters[-1:] == "E")


def alone(installed: Installed, plant: Plant) -> Found | Unchecked | NotApplicable | None:
    """Return what is to be said of an element or a well that has nothing to go with it; None where it has."""
    if installed.kind is None:
        return Unchecked("kind")
    loop = plant.loop_of(installed)
    if loop is None:
        return Unchecked("loop")
    others = [each for each in loop.members if each is not installed]
    if _is_well(installed):
        return _well_alone(installed, others)
    if channels(installed, plant) or any(row.card for row in installed.signals):
        return None
    if any(_takes_element(each, plant) for each in others):
        return None
    if installed.letters[:1] == "F" and _has_differential(installed, plant):
        return None
    if {"io_type", "io_address"} & installed.record.unread:
        return Unchecked("I/O type or I/O address")
    if not plant.has_column("io_type", "io_address", "card") and not plant.io_list:
        # The list does not say what is wired to what; a transmitter is still seen by its tag.
        return Unchecked("I/O type or I/O address")
    return Found(
        values={"loop": loop.name},
        fields=("tag", "io_type"),
        found="no transmitter, no input",
        wanted="a transmitter, an input or a local indication",
    )


def _takes_element(each: Installed, plant: Plant) -> bool:
    if each.kind in _TAKES or each.kind in _INDICATES or each.measuring_point:
        return True
    # A converter (TY), or a function of the system whose row carries the channel (TIC as older lists write it).
    return each.kind in (Kind.IP_CONVERTER, Kind.SOFT_FUNCTION) and takes_a_sensor(each, plant)


def _has_differential(installed: Installed, plant: Plant) -> bool:
    reading = installed.tag
    if reading is None or not reading.parsed:
        return False
    for suffix in dict.fromkeys((reading.suffix, "")):
        for letters in _DIFFERENTIAL:
            tag = canonical_tag(replace(reading, letters=letters, suffix=suffix), profile=plant.profile)
            if plant.by_tag(tag):
                return True
    return False


def _well_alone(installed: Installed, others: list[Installed]) -> Found | NotApplicable | None:
    suffix = _suffix(installed)
    wells = {_suffix(each) for each in others if _is_well(each)}
    for each in others:
        goes_in = each.kind in _TAKES or each.kind in _INDICATES or each.kind is Kind.ELEMENT or each.measuring_point
        # What has a well of its own letter stands in that one.
        if goes_in and (_suffix(each) == suffix or _suffix(each) not in wells):
            return None
    record = installed.record
    if any(text and _FOR_TESTS.search(text) for text in (record.service, record.remarks, record.kind_written)):
        return NotApplicable("a well for tests has no element")
    return Found(
        values={"loop": installed.loop},
        fields=("tag", "loop"),
        found="no element",
        wanted="an element, a transmitter or a thermometer",
        message="a well with no element in its loop {loop}",
    )


def _suffix(installed: Installed) -> str:
    return installed.tag.suffix if installed.tag is not None else ""


@rule(
    "DAT06",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_element_or_well,
    message="an element with neither a transmitter in its loop {loop} nor an input of its own",
    basis="common practice",
)
def element_alone(installed: Installed, plant: Plant) -> Verdict:
    """An element with neither transmitter nor an input of its own in its loop, or a well without an element.

    Why it matters: a sensor that goes nowhere was forgotten at its other end: no channel, no cable.

    What to do: add the transmitter or the input, or correct the number of one of the two. Local
    indication counts.

    >>> from validation.example import said
    >>> said("DAT06", [{"tag": "TE-1", "I/O type": ""}, {"tag": "TE-2", "I/O type": "RTD"}])
    ['TE-1: an element with neither a transmitter in its loop T-1 nor an input of its own']
    """
    return alone(installed, plant)


# ------------------------------------------------------------------------------------------------- controllers

_FINAL: Final = frozenset(
    {Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID, Kind.REGULATOR}
)
_OUTPUTS: Final = frozenset({ANALOGUE_OUTPUT, DIGITAL_OUTPUT})
_TAGS_IN_TEXT: Final = (
    re.compile(r"[A-Za-z0-9][A-Za-z0-9\-./]{2,20}"),
    # FIC 301, as older lists write tags.
    re.compile(r"\b[A-Za-z]{2,6} [0-9]{1,6}[A-Za-z]?\b"),
)
_NO_CONTROLLERS: Final = frozenset(
    {Kind.SWITCH, Kind.PANEL, Kind.JUNCTION_BOX, Kind.CARD, Kind.BARRIER, Kind.ISOLATOR, Kind.POWER_SUPPLY}
)


@lru_cache(maxsize=4096)
def _control(letters: str) -> bool:
    """Whether letters are a controller's: C among the functions, and none that acts, senses or transmits."""
    reading = read_letters(letters)
    if reading.legal == "illegal":
        # LCP is a panel as often as letters out of order.
        return False
    heads = {function[0] for function in reading.functions}
    # ZIC is a position that is closed as often as one that is controlled.
    return "C" in heads and not heads & set("VETGYZSW") and letters not in ("ZIC", "XIC")


def _is_controller(installed: Installed) -> bool:
    letters = installed.letters
    if "C" not in letters[1:] or installed.kind in _FINAL or installed.kind in _NO_CONTROLLERS:
        return False
    if installed.tag is None or installed.tag.code is not None or installed.tag.scheme in ("kks", ""):
        return False
    return _control(letters)


def _measures(installed: Installed) -> bool:
    return installed.measuring_point or (
        installed.kind is not None and installed.kind.measures == "yes" and installed.kind.wired != "no"
    )


def _acts(installed: Installed, plant: Plant) -> bool:
    kind = installed.kind
    # HV is a hand valve by its letters alone; in a controller's loop it is the one that is driven.
    if kind in _FINAL or (kind is Kind.MANUAL_VALVE and installed.kind_from == "letters"):
        return True
    outputs = {circuit_kind(io) for io in channels(installed, plant)} & _OUTPUTS
    # A drive that is started and stopped is a final element too; a lamp is none.
    return ANALOGUE_OUTPUT in outputs or (DIGITAL_OUTPUT in outputs and installed.equipment_tag)


def _measured_otherwise(controller: Installed, loop: Loop, plant: Plant) -> bool:
    """Whether a controller needs no measurement in its loop.

    By hand and by time there is nothing to measure; one in the field measures itself; and the speed of a drive
    that takes an analogue output is measured by the drive.
    """
    first = controller.letters[:1]
    if first == "S":
        return any(circuit_kind(io) == ANALOGUE_OUTPUT for each in loop.members for io in channels(each, plant))
    return first in ("H", "K") or controller.record.location == "field"


def _named_in(text: str | None, loop: Loop, plant: Plant) -> Iterator[Installed]:
    """Give the instruments of other loops that a text names."""
    for pattern in _TAGS_IN_TEXT:
        for word in pattern.findall(text or ""):
            for named in plant.by_tag(word.strip("-./")):
                if named not in loop.members:
                    yield named


def _parents(plant: Plant) -> dict[str, set[str]]:
    """Return the loops that rows of the loop list connect, both ways: parent and child."""
    connected: dict[str, set[str]] = {}
    for row in plant.loop_rows:
        if row.parent_loop and row.number:
            child, parent = name_key(row.number), name_key(row.parent_loop)
            if child != parent:
                connected.setdefault(child, set()).add(parent)
                connected.setdefault(parent, set()).add(child)
    return connected


def _named_by(plant: Plant) -> dict[int, list[Installed]]:
    """Return the controllers by each instrument that their remarks name."""
    named: dict[int, list[Installed]] = {}
    for loop in plant.loops:
        for controller in loop.members:
            if controller.record.remarks and _is_controller(controller):
                for each in _named_in(controller.record.remarks, loop, plant):
                    named.setdefault(id(each), []).append(controller)
    return named


def _acts_through_another(loop: Loop, controllers: list[Installed], plant: Plant) -> bool:
    """Whether a controller, or the loop list, names another controller, or another loop's final element: a cascade."""
    for controller in controllers:
        if any(
            _is_controller(each) or _acts(each, plant) for each in _named_in(controller.record.remarks, loop, plant)
        ):
            return True
    named_by: dict[int, list[Installed]] = plant.once("controllers by whom they name", _named_by)
    if any(named_by.get(id(controller)) for controller in controllers):
        return True
    connected: dict[str, set[str]] = plant.once("parent loops", _parents)
    partners = connected.get(name_key(loop.name), set())
    if not partners:
        return False
    by_name: dict[str, Loop] = plant.once("loops by name", lambda plant: {name_key(e.name): e for e in plant.loops})
    # A partner that is in none of these lists is taken at its word.
    return any(name not in by_name or _has_controller(by_name[name], plant) for name in partners)


def _measured_elsewhere(loop: Loop, controllers: list[Installed], plant: Plant) -> bool:
    """Whether the remarks of every controller name what it takes its measurement from."""
    return all(
        any(_measures(each) for each in _named_in(controller.record.remarks, loop, plant)) for controller in controllers
    )


def _has_controller(loop: Loop, plant: Plant) -> bool:
    return any("C" in each.letters[1:] and _is_controller(each) for each in loop.members)


# Fewer loops are no list: there each is a slip of its own.
_LEAST_LOOPS: Final = 5
_NONE_OF: Final = (("measurement", "no measurement"), ("final element", "no final element"))


def _none_in_the_list(plant: Plant) -> frozenset[str]:
    """Return what no loop with a controller has, because the list holds none: valves are often listed elsewhere."""
    loops = [loop for loop in plant.loops if _has_controller(loop, plant)]
    if len(loops) < _LEAST_LOOPS:
        return frozenset()
    members = [each for each in plant.live if not _is_controller(each)]
    lacking: set[str] = set()
    if not any(_measures(each) for each in members):
        lacking.add("no measurement")
    if not any(_acts(each, plant) for each in members):
        lacking.add("no final element")
    return frozenset(lacking)


def _holds_none(plant: Plant) -> Verdict:
    lacking: frozenset[str] = plant.once("what no loop has", _none_in_the_list)
    if not lacking:
        return None
    count = sum(1 for loop in plant.loops if _has_controller(loop, plant))
    named = [name for name, lack in _NONE_OF if lack in lacking]
    return Found(
        values={"what": " and no ".join(named), "count": count},
        fields=("tag",),
        message="the list has no {what}; {count} loops have a controller",
        found=" and ".join(lack for _, lack in _NONE_OF if lack in lacking),
        wanted="the final elements and measurements of the loops, or the list that holds them",
        stops_rows=False,
    )


@rule(
    "DAT07",
    severity=Severity.FAULT,
    on=Subject.LOOP,
    applies=_has_controller,
    whole=_holds_none,
    message="{controller} {has} {lacks} in its loop",
    basis="common practice",
)
def loop_not_whole(loop: Loop, plant: Plant) -> Verdict:
    """A loop with a controller that has no measurement or no final element.

    Why it matters: a controller without either controls nothing; one of them is missing from the
    list, or carries another loop's number.

    What to do: add what is missing or correct its loop. A controller that names another in its
    remarks or as its parent loop needs no final element; a hand controller needs no measurement.

    >>> from validation.example import said
    >>> said("DAT07", [{"tag": "FIC-1"}, {"tag": "FT-1"}])
    ['F-1: FIC-1 has no final element in its loop']
    >>> said("DAT07", [{"tag": "FIC-1"}, {"tag": "FT-1"}, {"tag": "FV-1"}])
    []
    """
    controllers = [each for each in loop.members if _is_controller(each)]
    lacks: list[str] = []
    if (
        not any(_measures(each) for each in loop.members)
        and not all(_measured_otherwise(each, loop, plant) for each in controllers)
        and not _measures_by_switch(loop, controllers)
        and not _measured_elsewhere(loop, controllers, plant)
    ):
        lacks.append("no measurement")
    if not any(_acts(each, plant) for each in loop.members) and not _acts_through_another(loop, controllers, plant):
        lacks.append("no final element")
    if not lacks:
        return None
    if any(each.kind is None and not each.equipment_tag for each in loop.members):
        # What it is might be what is missing.
        return Unchecked("kind")
    anywhere: frozenset[str] = plant.once("what no loop has", _none_in_the_list)
    untold = [lack.removeprefix("no ") for lack in lacks if lack in anywhere]
    lacks = [lack for lack in lacks if lack not in anywhere]
    if not lacks:
        return Unchecked(*untold)
    return Found(
        values={
            "controller": ", ".join(each.name for each in controllers),
            "has": "has" if len(controllers) == 1 else "have",
            "lacks": " and ".join(lacks),
        },
        fields=("tag",),
        found=" and ".join(lacks),
        wanted="measurement, controller and final element",
    )


def _measures_by_switch(loop: Loop, controllers: list[Installed]) -> bool:
    """Whether a controller that shows nothing (LC) is one of two positions, with a switch for its measurement."""
    shows = any(set("IR") & set(each.letters[1:]) for each in controllers)
    return not shows and any(each.kind is Kind.SWITCH and each.letters[:1] != "Z" for each in loop.members)
