"""Where an electrical instrument stands, how its marking fits the place, and which device types would fit."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field
from functools import lru_cache
from itertools import islice
from typing import Any, Final

from instruments.acceptance import (
    Acceptance,
    ambient,
    best_entry,
    crosses_systems,
    division_group,
    division_location,
    dust_group,
    dust_surface,
    entry_in_zone,
    gas_group,
    scheme_as_evidence,
    temperature,
    translated_group,
    zone_marked,
)
from instruments.area import Area, AreaSide, area_from_classification, permitted_dust_surface_c
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.marking import Marking, read_marking
from instruments.marking_entry import T_CODE_C, MarkingEntry, division_text
from instruments.origin import Cell
from instruments.protection import (
    intrinsically_safe,
    is_simple_apparatus,
    marking_of,
    signal_of,
)
from instruments.quantity import Quantity
from instruments.record import DeviceType, Instrument
from instruments.tag import natural_key
from loops.plant import Plant, name_key
from validation.finding import Clear, Fix, Found, NotApplicable, Review, Unchecked, Verdict
from validation.rule import title_of
from validation.rules.electrical import signal_class

MOST_TYPES: Final = 3
"""How many device types a finding names."""

# ---------------------------------------------------------------------------------------- who stands in the field

_ELECTRICAL: Final = frozenset(kind for kind in Kind if kind.electrical == "yes")
_ELECTRICAL_BY_SIGNAL: Final = frozenset(kind for kind in Kind if kind.electrical == "own")
_IN_FIELD_BY_DEFAULT: Final = frozenset(kind for kind in Kind if kind.location == "field")
_DRIVES: Final = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID})
# Signals by air, as old plants have them: nothing electrical is in such an instrument.
_PNEUMATIC: Final = re.compile(
    r"pneu|druckluft|(?<![\d.,])(?:3\s?(?:-|–|to|\.{2,3})\s?15\s?(?:psi|lb)"
    r"|0[.,]2\s?(?:-|–|to|\.{2,3})\s?1(?:[.,]0)?\s?(?:bar|kg)|20\s?(?:-|–|to|\.{2,3})\s?100\s?kpa)",
    re.IGNORECASE,
)
_ELECTRIC: Final = re.compile(r"elec|elek|m\s?a\b|\d\s?v|volt|hart|namur|contact|bus\b", re.IGNORECASE)


@lru_cache(maxsize=1024)
def is_pneumatic(signal: str) -> bool:
    """Whether a signal is air alone.

    >>> [is_pneumatic(text) for text in ("3-15 psig", "pneumatic", "4-20 mA / 0.2-1 bar", "electropneumatic")]
    [True, True, False, False]
    """
    return bool(_PNEUMATIC.search(signal)) and not _ELECTRIC.search(signal)


def _is_wired(row: Instrument) -> bool:
    return bool(row.io_type or row.io_address or row.card)


def _has_signal(installed: Installed) -> bool:
    """Whether an electrical signal, I/O or a marking of its own makes it electrical."""
    if installed.marking is not None:
        return True
    device = installed.type
    if device is not None and device.signal and not is_pneumatic(device.signal):
        return True
    return any(
        _is_wired(row) or (row.signal and not is_pneumatic(row.signal))
        for row in (installed.record, *installed.signals)
    )


def _is_by_air(installed: Installed) -> bool:
    signal = installed.record.signal
    if not signal or not is_pneumatic(signal) or installed.marking is not None:
        return False
    return all(not _is_wired(row) and (not row.signal or is_pneumatic(row.signal)) for row in installed.signals)


def _is_marked_as_its_drive(installed: Installed, plant: Plant) -> bool:
    """Whether a valve's output is its positioner's or solenoid's, whose own row is asked for the marking."""
    rows = installed.signals or (installed.record,)
    if installed.marking is not None or any((row.io_type or "AO")[:2].upper() not in ("AO", "DO") for row in rows):
        return False
    loop = plant.loop_of(installed)
    return loop is not None and any(each.kind in _DRIVES and each is not installed for each in loop.members)


def _stands_in_field(installed: Installed, plant: Plant) -> bool:
    kind, location = installed.kind, installed.record.location
    if location is None:
        if kind is not None and kind not in _IN_FIELD_BY_DEFAULT:
            return False
    elif location not in ("field", "panel"):
        return False
    if kind in _ELECTRICAL:
        return installed.record.signal is None or not _is_by_air(installed)
    if kind in _ELECTRICAL_BY_SIGNAL:
        return _has_signal(installed) and not _is_marked_as_its_drive(installed, plant)
    if kind is None:
        return not installed.equipment_tag or installed.marking is not None
    return False


def stands_in_field(installed: Installed, plant: Plant) -> bool:
    """Whether it is electrical and stands in the field; True as well where its kind is not known.

    A local panel stands in the field; cabinets, control room and system do not. Valves count where they have a
    signal, I/O or marking of their own, and nothing counts whose only signal is air.
    """
    return _case(installed, plant).in_field


def may_be_in_area(installed: Installed, plant: Plant) -> bool:
    """Whether it stands in the field, and neither its row nor its area says that the place is unclassified."""
    return _case(installed, plant).may_be_in_area


def kind_is_known(installed: Installed) -> bool:
    """Whether its kind, or else a signal or a marking, tells that it is electrical."""
    return installed.kind is not None or _has_signal(installed)


# ------------------------------------------------------------------------------------------------------- the place


def own_classification(installed: Installed, plant: Plant) -> Area | None:
    """Return the hazardous area that the row's own cell makes beside the one of the area list that it names."""
    text, area = installed.record.area_classification, installed.area
    if not text or area is None or area.from_row_cell:
        return None
    known: dict[str, Area | None] = plant.once("classifications beside an area", _nothing_yet)
    if text not in known:
        made = area_from_classification(text)
        known[text] = made if made is not None and made.classified else None
    return known[text]


def _nothing_yet(plant: Plant) -> dict[Any, Any]:
    return {}


CLASSIFICATION_FIELDS: Final = ("zone", "class_", "division", "gas_group", "dust_group", "epl_required")
"""The fields of an area that classify it."""


def areas_named(installed: Installed, plant: Plant) -> tuple[Area, ...]:
    """Return the classified areas that its row names, wherever its kind stands; none where that cannot be told."""
    found = _areas_of(installed, plant)
    return () if isinstance(found, Unchecked) else found


def areas_of(installed: Installed, plant: Plant) -> tuple[Area, ...] | Unchecked:
    """Return the classified areas that its row names, the area list's first, or what is missing to tell."""
    return _case(installed, plant).areas


def _areas_of(installed: Installed, plant: Plant) -> tuple[Area, ...] | Unchecked:
    if not kind_is_known(installed):
        return Unchecked("kind")
    record, area = installed.record, installed.area
    if record.area and plant.areas_twice and name_key(record.area) in plant.areas_twice:
        return Unchecked("area")
    beside = own_classification(installed, plant) if record.area_classification else None
    if area is None or area.unclassified:
        if beside is not None:
            return (beside,)
        unread = bool(record.area_classification) or "area_classification" in record.unread
        return Unchecked("area classification" if unread else "area")
    if not area.classified:
        return (beside,) if beside is not None else Unchecked("area zone")
    return (area,) if beside is None else (area, beside)


def jurisdiction_of(area: Area, plant: Plant) -> tuple[str | None, tuple[str, ...]]:
    """Return whose rules hold in an area, and what was assumed: its own, the plant's, US for a division without."""
    stated = area.jurisdiction or plant.data.jurisdiction
    by_division = area.system == "division"
    if by_division and (stated is None or (area.from_row_cell and stated not in ("US", "Canada"))):
        # A row's own cell has no place for a jurisdiction, and elsewhere there are no divisions.
        return "US", ("areas by class and division without a jurisdiction are read as US",)
    return stated, ()


def described(area: Area) -> str:
    """Return what an area asks for, in few words.

    >>> described(Area(zone="1", gas_group="IIB", temperature_class="T3", gas="Methane"))
    'Zone 1 IIB T3, Methane'
    >>> described(Area(system="division", class_="I", division="2", gas_group="C,D"))
    'Class I Div 2 Groups C, D'
    """
    parts: list[str] = []
    if area.zone:
        parts.append(f"Zone {area.zone}")
    if area.process_zone:
        parts.append(f"(Zone {area.process_zone} on the process side)")
    if area.class_:
        parts.append(f"Class {area.class_}")
    if area.division:
        parts.append(f"Div {area.division}")
    if area.epl_required:
        parts.append(f"EPL {area.epl_required}")
    for group in (area.gas_group, area.dust_group):
        if group and area.system == "division" and group[0] in "ABCDEFG":
            parts.append(f"Group{'s' if ',' in group else ''} {group.replace(',', ', ')}")
        elif group:
            parts.append(group)
    if area.temperature_class:
        parts.append(area.temperature_class)
    text = " ".join(parts)
    return f"{text}, {area.gas}" if area.gas else text


def place(area: Area, installed: Installed | None = None) -> str:
    """Return how a message names an area: its code and what it asks for, or the row's own words."""
    if area.from_row_cell:
        if installed is None:
            return f"'{area.code}'"
        # Rows that write it differently share the area.
        (name,) = area_fields((), area, installed)
        return f"'{getattr(installed.record, name)}'"
    return f"area {area.code} ({described(area)})"


def first_cell(area: Area, plant: Plant) -> tuple[Cell, ...]:
    """Return the first cell that makes the area, where no list has a row for it."""
    if not area.from_row_cell:
        return ()
    firsts: dict[Any, tuple[Cell, ...]] = plant.once("first cells of rows' own areas", _first_cells)
    return firsts.get(name_key(area.code), ())


def _first_cells(plant: Plant) -> dict[Any, tuple[Cell, ...]]:
    firsts: dict[Any, tuple[Cell, ...]] = {}
    for each in plant.live:
        area = each.area
        if area is not None and area.from_row_cell and name_key(area.code) not in firsts:
            firsts[name_key(area.code)] = each.record.cells(area_fields((), area, each)[0])
    return firsts


# ----------------------------------------------------------------------------------------------------- the marking


def is_marked_in_area(installed: Installed, plant: Plant) -> bool:
    """Whether it has an Ex marking, and stands where `may_be_in_area` says."""
    marking = marking_of(installed)
    return marking is not None and not marking.none_stated and may_be_in_area(installed, plant)


def marking_field(installed: Installed) -> str:
    """Return the field that the marking stands in: the row's, its device type's, or the type of protection."""
    if installed.record.ex_marking is not None:
        return "ex_marking"
    if installed.marking is not None:
        return "type.ex_marking"
    return "protection" if marking_of(installed) is not None else "ex_marking"


def type_is_lost(installed: Installed, plant: Plant) -> bool:
    """Whether the marking may stand with a device type that is named, and not listed or listed twice."""
    record = installed.record
    if record.ex_marking is not None or not record.device_type:
        return False
    if not plant.types:
        # Without a catalogue the rows hold the markings themselves, unless none of them does.
        return not plant.once("rows hold markings", _rows_hold_markings)
    return installed.listed_type is None or name_key(record.device_type) in plant.types_twice


def has_marking_column(plant: Plant) -> bool:
    """Whether any sheet has a column in which an instrument's marking or protection could stand."""
    # Kept as what is wrong with a whole column is: a part of the plant may lack the types that have one.
    return bool(plant.whole_finding("a column for the Ex marking", _has_marking_column))


def _has_marking_column(plant: Plant) -> bool:
    return plant.has_column("ex_marking", "protection") or any(
        each.ex_marking is not None or (each.origin is not None and "ex_marking" in each.origin.place.columns)
        for each in plant.types.values()
    )


def _rows_hold_markings(plant: Plant) -> bool:
    return any(each.record.ex_marking for each in plant.instruments)


def repaired(marking: Marking) -> tuple[str, ...]:
    """Return how a marking had to be bent to be read, as assumptions."""
    return tuple(f"{marking.text}: {_BENT[flag]}" for flag in marking.flags if flag in _BENT)


_BENT: Final = {
    "case_repaired": "read in spite of letters in the wrong case",
    "look_alike": "read in spite of letters that only look Latin",
    "temperature_unit_missing": "the surface temperature is read as degC",
}


# ---------------------------------------------------------------------------------------------- marking in the area


@dataclass(frozen=True, slots=True)
class Judged:
    """What one table says of a marking in one of an area's atmospheres."""

    side: AreaSide
    entry: MarkingEntry
    acceptance: Acceptance


Answer = NotApplicable | Unchecked | Clear | None | tuple[Judged, ...]


@dataclass(slots=True)
class Fit:
    """A marking in an area: for each atmosphere the one entry that fits best, and what each rule's table says of it.

    One fit serves every instrument with that marking in that area.
    """

    marking: Marking
    area: Area
    jurisdiction: str | None
    assumed: tuple[str, ...]
    process_zone: str | None
    intrinsically_safe: bool | None
    entries: Mapping[AreaSide, MarkingEntry]
    _answers: dict[str, Answer] = field(default_factory=dict)
    _asked: dict[tuple[str, str], Acceptance | None] = field(default_factory=dict)

    @property
    def in_north_america(self) -> bool:
        """Whether divisions and zones are compared here."""
        return self.jurisdiction in ("US", "Canada")

    def ask(self, code: str, side: AreaSide) -> Acceptance | None:
        """Return what a rule's table says for gas or for dust; None where the rule is not about it."""
        key = (code, side)
        if key not in self._asked:
            self._asked[key] = _TABLES[code](self, side, self.entries[side])
        return self._asked[key]

    def answer(self, code: str) -> Answer:
        """Return the outcome of a rule, or all that is refused or left to a person."""
        if code not in self._answers:
            self._answers[code] = self._answer(code)
        return self._answers[code]

    def _answer(self, code: str) -> Answer:
        judged = [
            Judged(side, entry, acceptance)
            for side, entry in self.entries.items()
            if (acceptance := self.ask(code, side)) is not None
        ]
        if not judged:
            return NotApplicable()
        if code in ("HAZ08", "HAZ16") and len(judged) == 2 and judged[0].acceptance == judged[1].acceptance:
            judged = judged[:1]
        against = [each for each in judged if each.acceptance.outcome in ("refused", "review")]
        if against:
            return tuple(against)
        missing = [name for each in judged for name in each.acceptance.missing]
        if any(each.acceptance.outcome == "unknown" for each in judged):
            return Unchecked(*dict.fromkeys(_MISSING.get(name, name) for name in missing or ["Ex marking"]))
        assumed = [f"{self.marking.text}: {text}" for each in judged for text in each.acceptance.assumed]
        if code in ("HAZ09", "HAZ10", "HAZ16"):
            assumed += self.assumed
        assumed += repaired(self.marking)
        return Clear(tuple(dict.fromkeys(assumed))) if assumed else None


# What the tables call a blank, by the title of the cell that would fill it.
_MISSING: Final[Mapping[str, str]] = {
    **{
        name: f"area {name}"
        for name in ("zone", "class", "division", "gas group", "dust group", "temperature class", "gas")
    },
    "ambient min": "area ambient min",
    "ambient max": "area ambient max",
    "group": "area gas group",
    "jurisdiction": "area jurisdiction",
    **{name: title_of(f"area.{name}") for name in ("dust_surface_c", "cloud_ignition_c", "layer_ignition_c")},
    **dict.fromkeys(
        (
            "EPL",
            "group of the marking",
            "gas group of the marking",
            "dust group of the marking",
            "temperature class of the marking",
            "surface temperature of the marking",
            "ambient min of the marking",
        ),
        "Ex marking",
    ),
}


def _unknown(*missing: str) -> Acceptance:
    return Acceptance(outcome="unknown", reason="", missing=missing)


def _across_systems(fit: Fit) -> Acceptance | None:
    """Of a division mark in a zone or the reverse: HAZ09 speaks in North America; elsewhere nothing can be told."""
    if fit.in_north_america:
        return None
    return _unknown("Ex marking" if fit.jurisdiction else "jurisdiction")


def _by_division(fit: Fit, entry: MarkingEntry) -> bool:
    return entry.is_division or fit.area.system == "division"


def _is_for_the_other_side(fit: Fit, side: AreaSide, entry: MarkingEntry) -> bool:
    """Whether nothing is marked for this atmosphere at all, which is found once, by the EPL or the class."""
    if entry.side is None or entry.side == side:
        return False
    found = fit.ask("HAZ09" if _by_division(fit, entry) else "HAZ03", side)
    return found is not None and found.outcome == "refused"


def _epl(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    if _by_division(fit, entry):
        return _across_systems(fit) if crosses_systems(entry, fit.area) else None
    return entry_in_zone(entry, fit.area, side=side, process_zone=fit.process_zone)


def _gas_group(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    if side != "gas":
        return None
    if _by_division(fit, entry):
        return _across_systems(fit) if crosses_systems(entry, fit.area) else None
    if _is_for_the_other_side(fit, side, entry):
        return _unknown("EPL")
    return gas_group(entry, fit.area.gas_group, gas=fit.area.gas)


def _temperature(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    area = fit.area
    if side == "dust" and (area.system != "division" or (area.temperature_class is None and _has_dust_limit(area))):
        return None
    if _is_for_the_other_side(fit, side, entry):
        return _unknown("EPL")
    found = temperature(
        entry, area.temperature_class, ambient_max_c=area.ambient_max_c, ambient_min_c=area.ambient_min_c
    )
    if found.outcome == "refused" and _is_hotter_than_marked(entry, area):
        return _unknown("EPL")  # no class is marked for this ambient, which is HAZ08's finding
    return found


def _is_hotter_than_marked(entry: MarkingEntry, area: Area) -> bool:
    return area.ambient_max_c is not None and entry.is_paired and area.ambient_max_c > entry.ambient_max_c


def _has_dust_limit(area: Area) -> bool:
    return any(value is not None for value in (area.dust_surface_c, area.cloud_ignition_c, area.layer_ignition_c))


def _dust_group(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    if side != "dust":
        return None
    if _by_division(fit, entry):
        return _across_systems(fit) if crosses_systems(entry, fit.area) else None
    if _is_for_the_other_side(fit, side, entry):
        return _unknown("EPL")
    return dust_group(entry, fit.area.dust_group)


def _dust_surface(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    if side != "dust" or (fit.area.system == "division" and not _has_dust_limit(fit.area)):
        return None
    if _is_for_the_other_side(fit, side, entry):
        return _unknown("EPL")
    found = dust_surface(entry, fit.area)
    if found.outcome == "refused" and _is_hotter_than_marked(entry, fit.area):
        return _unknown("EPL")
    return found


def _ambient(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    return ambient(entry, area_min_c=fit.area.ambient_min_c, area_max_c=fit.area.ambient_max_c)


_GRAVITY: Final = ("refused", "review", "unknown", "accepted")


def has_its_systems_group(area: Area, side: AreaSide) -> bool:
    """Whether the group, where one is stated, is a letter in a division and II or III with a letter in a zone."""
    group = area.dust_group if side == "dust" else area.gas_group
    return not group or area.system is None or group.startswith("I") != (area.system == "division")


def _division(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    if not _by_division(fit, entry):
        return None
    crossing = crosses_systems(entry, fit.area)
    if crossing and not fit.in_north_america:
        return None if fit.jurisdiction else _unknown("jurisdiction")
    location = division_location(
        entry, fit.area, jurisdiction=fit.jurisdiction, side=side, intrinsically_safe=fit.intrinsically_safe
    )
    if not crossing or location.outcome == "refused":
        return location
    group = translated_group(entry, fit.area, side=side)
    if not has_its_systems_group(fit.area, side):
        group = _unknown("dust group" if side == "dust" else "gas group")
    worse = min((location, group), key=lambda each: _GRAVITY.index(each.outcome))
    if fit.jurisdiction == "Canada" and worse.outcome == "refused":
        # No table is held for Canada: what the other country's table refuses is for a person to see as well.
        return Acceptance(outcome="review", reason=f"{location.reason}; {group.reason}")
    if worse.outcome == "accepted":
        return Acceptance(
            outcome="accepted", reason=f"{location.reason}; {group.reason}", assumed=location.assumed + group.assumed
        )
    return worse


def _letters(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    if not _by_division(fit, entry):
        return None
    if crosses_systems(entry, fit.area):
        return _across_systems(fit)
    if side == "dust" and "II" not in fit.area.classes and not fit.area.dust_group:
        return None  # fibres have no groups
    if _is_for_the_other_side(fit, side, entry) or entry.class_ not in fit.area.classes:
        location = fit.ask("HAZ09", side)
        if location is not None and location.outcome == "refused":
            return _unknown("EPL")
    if not has_its_systems_group(fit.area, side):
        return _unknown("dust group" if side == "dust" else "gas group")
    return division_group(entry.groups, fit.area.dust_group if side == "dust" else fit.area.gas_group)


def _scheme(fit: Fit, side: AreaSide, entry: MarkingEntry) -> Acceptance | None:
    if crosses_systems(entry, fit.area) and fit.jurisdiction and not fit.in_north_america:
        what = "a mark by class and division" if entry.is_division else "a mark for zones"
        where = f"a {'zone' if entry.is_division else 'division'} under {fit.jurisdiction}"
        return Acceptance(outcome="review", reason=f"{what} is no evidence by itself in {where}")
    return scheme_as_evidence(entry, fit.jurisdiction)


_TABLES: Final[Mapping[str, Callable[[Fit, AreaSide, MarkingEntry], Acceptance | None]]] = {
    "HAZ03": _epl,
    "HAZ04": _gas_group,
    "HAZ05": _temperature,
    "HAZ06": _dust_group,
    "HAZ07": _dust_surface,
    "HAZ08": _ambient,
    "HAZ09": _division,
    "HAZ10": _letters,
    "HAZ16": _scheme,
}


def fit_of(marking: Marking, area: Area, installed: Installed, plant: Plant) -> Fit:
    """Return how a marking fits an area, at an instrument's process side and with its type of protection."""
    known: dict[Any, Fit] = plant.once("markings in areas", _nothing_yet)
    safe = intrinsically_safe(installed) if installed.record.protection else None
    key = (marking.text, id(area), installed.record.process_zone, safe)
    found = known.get(key)
    # An area that no list holds (a what-if) may be gone, and its number be another's.
    if found is None or found.area is not area:
        jurisdiction, assumed = jurisdiction_of(area, plant)
        zone = installed.record.process_zone
        entries: dict[AreaSide, MarkingEntry] = {}
        for side in area.sides:
            entry = best_entry(
                marking, area, side=side, jurisdiction=jurisdiction, process_zone=zone, intrinsically_safe=safe
            )
            if entry is not None:
                entries[side] = entry
        found = known[key] = Fit(
            marking=marking,
            area=area,
            jurisdiction=jurisdiction,
            assumed=assumed,
            process_zone=zone,
            intrinsically_safe=safe,
            entries=entries,
        )
    return found


_NO_AREA: Final = Unchecked("area")


@dataclass(frozen=True, slots=True, eq=False)
class _Case:
    """What all rules about an instrument's place ask first, worked out once.

    `answer` is what the rules about markings say before they look at one; of `blank` only those which can have
    anything to ask in the areas. `fits` are the fits of its marking, one an area.
    """

    in_field: bool = False
    may_be_in_area: bool = False
    areas: tuple[Area, ...] | Unchecked = _NO_AREA
    answer: Unchecked | NotApplicable | None = None
    blank: Unchecked | None = None
    fits: tuple[Fit, ...] = ()


_ELSEWHERE: Final = _Case(answer=NotApplicable())
_UNCLASSIFIED: Final = _Case(in_field=True, answer=NotApplicable())


def _case(installed: Installed, plant: Plant) -> _Case:
    known: dict[Installed, _Case] = plant.once("instruments and their areas", _cases)
    found = known.get(installed)
    # What a form or a what-if asks about is not the plant's own, and not kept.
    return found if found is not None else _make_case(installed, plant)


def _cases(plant: Plant) -> dict[Installed, _Case]:
    return {each: _make_case(each, plant) for each in plant.live}


def _make_case(installed: Installed, plant: Plant) -> _Case:
    if not _stands_in_field(installed, plant):
        return _ELSEWHERE
    if installed.unclassified and own_classification(installed, plant) is None:
        return _UNCLASSIFIED
    areas = _areas_of(installed, plant)
    if isinstance(areas, Unchecked):
        return _Case(in_field=True, may_be_in_area=True, areas=areas, answer=areas)
    answer: Unchecked | NotApplicable | None = None
    blank: Unchecked | None = None
    fits: tuple[Fit, ...] = ()
    marking = marking_of(installed)
    if marking is None or marking.none_stated:
        if is_simple_apparatus(installed):
            answer = NotApplicable("simple apparatus has no marking")
        else:
            blank = Unchecked("device type" if marking is None and type_is_lost(installed, plant) else "Ex marking")
    elif not marking.readable:
        answer = Unchecked("Ex marking")
    elif not marking.standing():
        answer = NotApplicable("associated apparatus") if marking.is_associated else Unchecked("Ex marking")
    elif type_is_lost(installed, plant):
        answer = Unchecked("device type")
    else:
        fits = tuple(fit_of(marking, area, installed, plant) for area in areas)
    return _Case(in_field=True, may_be_in_area=True, areas=areas, answer=answer, blank=blank, fits=fits)


def judge(code: str, installed: Installed, plant: Plant) -> Verdict:
    """Return what a rule about a marking in an area says of an instrument.

    Parameters
    ----------
    code
        HAZ03 to HAZ10, HAZ16.
    installed
        An instrument for which `may_be_in_area` holds.
    plant
        The whole plant.
    """
    case = _case(installed, plant)
    if case.answer is not None:
        return case.answer
    if case.blank is not None:
        assert not isinstance(case.areas, Unchecked)
        return case.blank if any(_asks(code, area, plant) for area in case.areas) else NotApplicable()
    answer = case.fits[0].answer(code)
    if isinstance(answer, tuple):
        return _findings(code, case.fits[0], answer, installed, plant)
    # What the row's own cell says beside the area list counts where it is stricter.
    for fit in case.fits[1:]:
        other = fit.answer(code)
        if isinstance(other, tuple):
            refused = [each for each in other if each.acceptance.outcome == "refused"]
            if refused:
                return _findings(code, fit, refused, installed, plant)
    return answer


def _asks(code: str, area: Area, plant: Plant) -> bool:
    """Whether a rule can have anything to ask in an area, whatever is marked."""
    by_division, sides = area.system == "division", area.sides
    match code:
        case "HAZ03":
            return not by_division
        case "HAZ04":
            return not by_division and "gas" in sides
        case "HAZ05":
            return by_division or "gas" in sides
        case "HAZ06":
            return not by_division and "dust" in sides
        case "HAZ07":
            return "dust" in sides and (not by_division or _has_dust_limit(area))
        case "HAZ08" | "HAZ16":
            return True
        case "HAZ09":
            return by_division or jurisdiction_of(area, plant)[0] in ("US", "Canada")
        case _:
            return by_division


def _findings(
    code: str, fit: Fit, judged: Iterable[Judged], installed: Installed, plant: Plant
) -> list[Found | Review]:
    return [_finding(code, fit, each, installed, plant) for each in judged]


def _finding(code: str, fit: Fit, judged: Judged, installed: Installed, plant: Plant) -> Found | Review:
    acceptance, area = judged.acceptance, fit.area
    kind = Found if acceptance.outcome == "refused" else Review
    found, wanted, off_by, working = _figures(code, fit, judged)
    own = marking_field(installed)
    record = installed.record
    cells = (*record.cells("device_type"),) if own == "type.ex_marking" else ()
    if not area.from_row_cell:
        cells = (*cells, *record.cells("area"))
    return kind(
        values={"reason": acceptance.reason, "marking": fit.marking.text, "place": place(area, installed)},
        fields=(own, *area_fields(_area_fields(code, fit, judged), area, installed)),
        part=judged.side if len(fit.entries) > 1 else "",
        found=found,
        wanted=wanted,
        off_by=off_by,
        working=working,
        assumed=_assumed(code, fit, judged),
        fixes=type_fixes(code, installed, plant),
        cells=cells,
    )


def _assumed(code: str, fit: Fit, judged: Judged) -> tuple[str, ...]:
    entry = judged.entry
    assumed = [f"{fit.marking.text}: {text}" for text in judged.acceptance.assumed]
    if code == "HAZ03" and entry.epl_source in ("derived", "category"):
        source = " ".join(entry.protections) if entry.epl_source == "derived" else "the ATEX category"
        assumed.append(f"{fit.marking.text}: EPL {entry.epl_text} follows from {source}")
    if code in ("HAZ09", "HAZ10", "HAZ16"):
        assumed += fit.assumed
    return tuple(dict.fromkeys((*assumed, *repaired(fit.marking))))


def area_fields(names: Iterable[str], area: Area, installed: Installed) -> tuple[str, ...]:
    """Return the fields of an area, or the field of the row's own cell that makes it."""
    if not area.from_row_cell:
        return tuple(f"area.{name}" for name in names)
    text = installed.record.area_classification
    return ("area_classification" if text and name_key(text) == name_key(area.code) else "area",)


def _area_fields(code: str, fit: Fit, judged: Judged) -> tuple[str, ...]:
    area, side = fit.area, judged.side
    group = "dust_group" if side == "dust" else "gas_group"
    if code == "HAZ03":
        return ("epl_required",) if area.epl_assigned(side) else ("zone",)
    if code == "HAZ05":
        return ("temperature_class",)
    if code == "HAZ07":
        return ("dust_surface_c",) if area.dust_surface_c is not None else ("cloud_ignition_c", "layer_ignition_c")
    if code == "HAZ08":
        hot = area.ambient_max_c is not None and area.ambient_max_c > judged.entry.ambient_max_c
        return ("ambient_max_c",) if hot else ("ambient_min_c",)
    if code == "HAZ16":
        return ("jurisdiction",)
    if code == "HAZ09":
        return ("class_", "division") if area.system == "division" else ("zone",)
    return (group,)


def _figures(code: str, fit: Fit, judged: Judged) -> tuple[str, str, str, str]:
    """Return found, wanted, how far off, and the working."""
    entry, area = judged.entry, fit.area
    group = area.dust_group if judged.side == "dust" else area.gas_group
    match code:
        case "HAZ03":
            accepted = judged.acceptance.reason.rpartition("which accepts ")[2] if _refused(judged) else ""
            return f"EPL {entry.epl_text}", f"EPL {accepted.replace(', ', ' or ')}" if accepted else "", "", ""
        case "HAZ04" | "HAZ06":
            return entry.group_text, f"{group or ''}{f' ({area.gas})' if area.gas and code == 'HAZ04' else ''}", "", ""
        case "HAZ05":
            return _temperature_figures(entry, area)
        case "HAZ07":
            permitted = permitted_dust_surface_c(area)
            limit = permitted.limit_c if permitted.limit_c is not None else permitted.upper_bound_c
            marked = entry.max_surface_c_at(area.ambient_max_c)
            if marked is None or limit is None:
                return entry.temperature_text, "", "", permitted.working
            over = f"{_number(marked - limit)} K" if marked > limit else ""
            return f"{_number(marked)} degC", f"at most {_number(limit)} degC", over, permitted.working
        case "HAZ08":
            return _ambient_figures(entry, area)
        case "HAZ16":
            return fit.marking.text, f"a marking for {fit.jurisdiction}", "", ""
        case "HAZ09":
            marked_for = division_text(entry) if entry.is_division else f"Zone {zone_marked(entry) or '?'}"
            return marked_for, described(area), "", ""
        case _:
            letters = ", ".join(entry.groups)
            return f"groups {letters}", f"group {(group or '').replace(',', ', ')}", "", ""


def _refused(judged: Judged) -> bool:
    return judged.acceptance.outcome == "refused"


def _temperature_figures(entry: MarkingEntry, area: Area) -> tuple[str, str, str, str]:
    limit = T_CODE_C.get(area.temperature_class or "")
    wanted = f"at most {_number(limit)} degC ({area.temperature_class})" if limit is not None else ""
    counts = entry.temperature_at(area.ambient_max_c, ambient_min_c=area.ambient_min_c)
    if counts is None:
        return entry.temperature_text, wanted, "", ""
    over = f"{_number(counts.max_c - limit)} K" if limit is not None and counts.max_c > limit else ""
    shown = f"{_number(counts.max_c)} degC" + (f" ({counts.t_class})" if counts.t_class else "")
    return shown, wanted, over, entry.temperature_text if len(entry.temperatures) > 1 else ""


def _ambient_figures(entry: MarkingEntry, area: Area) -> tuple[str, str, str, str]:
    low, high = entry.ambient_min_c, entry.ambient_max_c
    found = f"{'?' if low is None else _number(low)}..{_number(high)} degC"
    if area.ambient_max_c is not None and area.ambient_max_c > high:
        return found, f"up to {_number(area.ambient_max_c)} degC", f"{_number(area.ambient_max_c - high)} K", ""
    if area.ambient_min_c is not None and low is not None and area.ambient_min_c < low:
        return found, f"down to {_number(area.ambient_min_c)} degC", f"{_number(low - area.ambient_min_c)} K", ""
    return found, "", "", ""


def _number(value: float) -> str:
    return f"{value:.6g}"


# --------------------------------------------------------------------------------------------- other device types

# An analyser or detector is made for one substance, which the catalogue says only in words.
_ONE_SUBSTANCE: Final = frozenset({Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR})
_WORD: Final = re.compile(r"[^\W\d_]{3,}")


def type_fixes(code: str, installed: Installed, plant: Plant) -> tuple[Fix, ...]:
    """Return up to three device types of the catalogue that are like its own and whose marking would be accepted.

    Like its own: of the same kind, body, signal class, number of wires and sensor, as far as both state them, and
    with limits that hold its range. The rule that asks must be passed; no other may be failed or left to a
    person, nor be unchecked for the marking's sake.
    """
    if installed.kind is None or not plant.types:
        return ()
    areas = areas_of(installed, plant)
    if isinstance(areas, Unchecked):
        return ()
    record, urv = installed.record, installed.record.urv
    # Instruments of one type in one area are offered the same types, but for their ranges.
    key = (
        code,
        installed.kind,
        tuple(map(id, areas)),
        record.process_zone,
        intrinsically_safe(installed),
        id(installed.type),
        record.signal,
        record.wires,
        installed.body,
        installed.letters[:1],
        urv.unit.dimension if urv is not None and urv.unit is not None else None,
    )
    known: dict[Any, tuple[Any, list[DeviceType]]] = plant.once("device types that fit an area", _nothing_yet)
    held = (*areas, installed.type)
    found = known.get(key)
    if found is None or any(one is not other for one, other in zip(found[0], held, strict=True)):
        found = known[key] = (held, _fitting_types(code, areas, installed, plant))
    holding = (each for each in found[1] if all(_holds(each, limit) for limit in (record.lrv, urv)))
    return tuple(_type_fix(each, installed) for each in islice(holding, MOST_TYPES))


def _fitting_types(code: str, areas: tuple[Area, ...], installed: Installed, plant: Plant) -> list[DeviceType]:
    listed, own = installed.listed_type, installed.type
    kind = (listed.kind if listed is not None else None) or installed.kind
    fitting = [
        each
        for each in _types_of_kind(plant).get(kind, ())
        if each is not listed and _would_fit(code, each, areas, installed, plant) and _is_like(each, installed, plant)
    ]
    fitting.sort(
        key=lambda each: (
            own is not None and each.maker != own.maker,
            own is not None and each.signal != own.signal,
            _distance(each, own),
            natural_key(each.code or ""),
        )
    )
    return fitting


def _types_of_kind(plant: Plant) -> Mapping[Kind | None, list[DeviceType]]:
    found: Mapping[Kind | None, list[DeviceType]] = plant.once("marked types by kind", _make_types_of_kind)
    return found


def _make_types_of_kind(plant: Plant) -> Mapping[Kind | None, list[DeviceType]]:
    found: dict[Kind | None, list[DeviceType]] = defaultdict(list)
    for key, each in plant.types.items():
        if each.kind is not None and each.ex_marking and each.code and key not in plant.types_twice:
            found[each.kind].append(each)
    return found


def _would_fit(code: str, device: DeviceType, areas: tuple[Area, ...], installed: Installed, plant: Plant) -> bool:
    marking = read_marking(device.ex_marking or "")
    if not marking.standing():
        return False
    for area in areas:
        fit = fit_of(marking, area, installed, plant)
        for each in _TABLES:
            answer = fit.answer(each)
            if isinstance(answer, tuple):
                return False
            if isinstance(answer, Unchecked) and (each == code or "Ex marking" in answer.fields):
                # A division mark says nothing of the cold: then no marking of its kind can be more certain.
                if each != code and each == "HAZ08" and all(entry.is_division for entry in fit.entries.values()):
                    continue
                return False
    return True


def _is_like(device: DeviceType, installed: Installed, plant: Plant) -> bool:
    own, record = installed.type, installed.record
    body = device.body or (device.url.reference if device.url is not None else None)
    if (own is not None or installed.body is not None) and body != installed.body:
        return False
    signals = (device.signal or "", signal_of(installed))
    classes = [signal_class(text) for text in signals]
    if all(classes) and (
        classes[0] != classes[1] or ("namur" in signals[0].casefold()) != ("namur" in signals[1].casefold())
    ):
        return False
    wires = record.wires or (own.wires if own is not None else None)
    if wires and device.wires and wires != device.wires:
        return False
    if own is not None and own.sensor_type and device.sensor_type and own.sensor_type != device.sensor_type:
        return False
    if not _same_dimension(device.url, own.url if own is not None else record.urv):
        return False
    if installed.kind in _ONE_SUBSTANCE and own is not None and own.description and device.description:
        mine, other = (set(_WORD.findall(text.casefold())) for text in (own.description, device.description))
        if not (mine <= other or other <= mine):
            return False
    used = _variables_of_types(plant).get(name_key(device.code))
    return not (used and installed.letters) or installed.letters[0] in used


def _same_dimension(one: Quantity | None, other: Quantity | None) -> bool:
    if one is None or other is None or one.unit is None or other.unit is None:
        return True
    return one.unit.dimension == other.unit.dimension


def _holds(device: DeviceType, quantity: Quantity | None) -> bool:
    if quantity is None or quantity.base is None or not _same_dimension(device.url, quantity):
        return True
    low = device.lrl.base if device.lrl is not None else None
    high = device.url.base if device.url is not None else None
    return (low is None or quantity.base >= low - 1e-9 * abs(low)) and (
        high is None or quantity.base <= high + 1e-9 * abs(high)
    )


def _variables_of_types(plant: Plant) -> Mapping[str, frozenset[str]]:
    found: Mapping[str, frozenset[str]] = plant.once("first letters of device types", _make_variables_of_types)
    return found


def _make_variables_of_types(plant: Plant) -> Mapping[str, frozenset[str]]:
    letters: dict[str, set[str]] = defaultdict(set)
    for each in plant.live:
        if each.listed_type is not None and each.letters:
            letters[name_key(each.record.device_type)].add(each.letters[0])
    return {code: frozenset(found) for code, found in letters.items()}


def _distance(device: DeviceType, own: DeviceType | None) -> float:
    if own is None or own.url is None or device.url is None or not _same_dimension(device.url, own.url):
        return 0.0
    if own.url.base is None or device.url.base is None:
        return 0.0
    return abs(device.url.base - own.url.base)


def _type_fix(device: DeviceType, installed: Installed) -> Fix:
    record = installed.record
    change = {"device type": device.code or ""}
    if record.ex_marking is not None:  # the row's own marking would outlive its device
        change["Ex marking"] = device.ex_marking or ""
    if record.certificate is not None and device.certificate:
        change["certificate"] = device.certificate
    return Fix(text=f"device type {device.code} ({device.ex_marking})", change=change)
