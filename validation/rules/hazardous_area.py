"""HAZ: where electrical instruments stand, and whether what is marked on them is accepted there.

Ferrule classifies nothing and accepts nothing: screening aid - requires review by a competent person.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Final

from instruments.area import Area, permitted_dust_surface_c
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.protection import NEVER_SIMPLE, is_passive, is_simple_apparatus, marking_of
from loops.plant import AreaInPlant, Plant, name_key
from validation.finding import Clear, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.hazardous_place import (
    CLASSIFICATION_FIELDS,
    area_fields,
    areas_of,
    described,
    first_cell,
    has_its_systems_group,
    has_marking_column,
    is_marked_in_area,
    judge,
    kind_is_known,
    marking_field,
    may_be_in_area,
    own_classification,
    place,
    repaired,
    stands_in_field,
    type_fixes,
    type_is_lost,
)
from validation.rule import Subject, rule, title_of

_BOXES: Final = frozenset({Kind.JUNCTION_BOX, Kind.PANEL})
_IN_AREA: Final = "{reason}: {marking}, in {place}"


# -------------------------------------------------------------------------------------------------- area, marking


def _no_area_column(plant: Plant) -> Verdict:
    """Neither area nor classification anywhere, or a list of areas that classifies none of them."""
    if not plant.has_column("area", "area_classification"):
        count = sum(1 for each in plant.live if stands_in_field(each, plant) and kind_is_known(each))
        if not count:
            return None
        return Found(
            values={"count": count},
            fields=("area", "area_classification"),
            message="no sheet has a column for the area or its classification; "
            "{count} electrical instruments stand in the field",
            found="no such column",
            wanted="area or area classification",
        )
    if plant.has_column("area_classification") or not plant.areas or _areas_are_classified(plant):
        return None
    count = sum(1 for each in plant.live if each.area is not None and stands_in_field(each, plant))
    if count < 2:
        return None
    return Found(
        values={"count": count},
        fields=("area.zone", "area.class_", "area.division"),
        message="the list of areas has no column for zone, class or division; "
        "{count} electrical instruments stand in its areas",
        found="no such column",
        wanted="area zone, or area class and division",
    )


def _areas_are_classified(plant: Plant) -> bool:
    fields = {*CLASSIFICATION_FIELDS, "system"}
    return any(
        area.classified or area.unclassified or area.origin is None or fields & area.origin.place.columns.keys()
        for area in plant.areas.values()
    )


@rule(
    "HAZ01",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=stands_in_field,
    whole=_no_area_column,
    message="no area, and no classification of its own",
    basis="IEC 60079-14:2013 4.1 and 29 CFR 1910.307(b): classification is documented (from memory)",
)
def no_area(installed: Installed, plant: Plant) -> Verdict:
    """An electrical instrument in the field without an area, or in an area without a classification.

    Why it matters: nobody can tell which equipment may stand there, so nothing that is marked on it can be
    checked.

    What to do: name its area; or write what the area documents say of its place, or that it is unclassified.

    >>> from validation.example import said
    >>> said("HAZ01", [{"tag": "PT-1", "area classification": ""}, {"tag": "PT-2", "area classification": "safe"}])
    ['PT-1: no area, and no classification of its own']
    >>> said("HAZ01", [{"tag": "PT-1", "area classification": "Zone 2 IIB T3"}])
    []
    """
    if installed.unclassified:
        return None
    record, area = installed.record, installed.area
    if record.area and name_key(record.area) in plant.areas_twice:
        return Unchecked("area")
    if area is not None:
        return _area_is_classified(area, installed, plant)
    if record.area_classification or "area_classification" in record.unread:
        return Unchecked("area classification")
    if record.area or "area" in record.unread:
        return Unchecked("area")
    if record.location == "panel" and installed.kind not in _BOXES:
        # A panel may be a local one, or stand in the control room.
        return Unchecked("location")
    if not kind_is_known(installed):
        return Unchecked("kind")
    reason = record.blanks.get("area") or record.blanks.get("area_classification") or ""
    return Found(
        fields=("area", "area_classification"),
        found=f"blank ({reason})" if reason else "blank",
        wanted="an area, or a classification",
    )


def _area_is_classified(area: Area, installed: Installed, plant: Plant) -> Verdict:
    if area.classified or own_classification(installed, plant) is not None:
        return None
    unread = [name for name in (*CLASSIFICATION_FIELDS, "system") if name in area.unread]
    if unread:
        return Unchecked(*(title_of(f"area.{name}") for name in unread))
    if not kind_is_known(installed):
        return Unchecked("kind")
    return Found(
        values={"area": area.code},
        fields=("area", "area.zone", "area.class_", "area.division"),
        message="area {area} has no classification",
        found="blank",
        wanted="a zone, a class and division, or none",
        cells=installed.record.cells("area"),
    )


def _no_marking_column(plant: Plant) -> Verdict:
    if has_marking_column(plant):
        return None
    count = sum(1 for each in plant.live if _lacks_a_marking(each, plant))
    if count < 2:
        return None
    return Found(
        values={"count": count},
        fields=("ex_marking",),
        message="no sheet has a column for the Ex marking; {count} electrical instruments stand in classified areas",
        found="no such column",
        wanted="Ex marking",
    )


def _lacks_a_marking(installed: Installed, plant: Plant) -> bool:
    return (
        may_be_in_area(installed, plant)
        and not is_simple_apparatus(installed)
        and not isinstance(areas_of(installed, plant), Unchecked)
    )


@rule(
    "HAZ02",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    whole=_no_marking_column,
    message="no Ex marking, in {place}",
    basis="IEC 60079-14:2013 5 and 16.2 for simple apparatus; NEC 500.8, 501 and 505.9 (from memory)",
)
def no_marking(installed: Installed, plant: Plant) -> Verdict:
    """An electrical instrument in a classified area without an Ex marking.

    Why it matters: nothing shows that it is no ignition source.

    What to do: read the plate and write its marking; or name a device type that is marked for the area. A
    passive element (RTD, thermocouple, contact) may be simple apparatus, if somebody states it. In Division 2
    some boxes, panels and nonincendive items need no marking, which a competent person decides.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Zone 2 IIB T3", "Ex marking": ""}
    >>> said("HAZ02", [row])
    ["PT-1: no Ex marking, in 'Zone 2 IIB T3'"]
    >>> said("HAZ02", [{**row, "Ex marking": "Ex ec IIC T4 Gc"}])
    []
    """
    areas = areas_of(installed, plant)
    if isinstance(areas, Unchecked):
        return areas
    marking = marking_of(installed)
    if marking is not None and not marking.none_stated:
        if not marking.readable:
            return Unchecked("Ex marking")
        if marking.is_associated:
            return NotApplicable("associated apparatus")
        return Unchecked("device type") if type_is_lost(installed, plant) else None
    if marking is None:
        if "ex_marking" in installed.record.unread or (
            installed.type is not None and "ex_marking" in installed.type.unread
        ):
            return Unchecked("Ex marking")
        if type_is_lost(installed, plant):
            return Unchecked("device type")
    if is_simple_apparatus(installed):
        return None
    return _unmarked(installed, areas[0], plant)


def _unmarked(installed: Installed, area: Area, plant: Plant) -> Verdict:
    record, marking = installed.record, marking_of(installed)
    kind = installed.kind.value if installed.kind is not None else "instrument"
    said = f"marked '{marking.text}'" if marking is not None else "no Ex marking"
    reason = record.blanks.get("ex_marking", "")
    verdict, message = Found, "{said}, in {place}"
    stated = record.simple_apparatus is True
    if area.system == "division" and area.division == "2" and (installed.kind in _BOXES or record.nonincendive):
        verdict = Review
        what = "stated to be nonincendive" if record.nonincendive else f"a {kind}"
        message += f": {what}, which Division 2 may allow without"
    elif is_passive(installed):
        verdict = Review
        message += ": a passive {kind} is simple apparatus only where that is stated"
    elif stated and installed.kind not in NEVER_SIMPLE:
        verdict = Review
        message += ": stated to be simple apparatus, which not every {kind} can be"
    elif stated:
        message += ": stated to be simple apparatus, which a {kind} cannot be"
    listed = () if area.from_row_cell else record.cells("area")
    return verdict(
        values={"said": said, "place": place(area, installed), "kind": kind},
        fields=(marking_field(installed), *area_fields(_classifies(area), area, installed)),
        message=message,
        found=said if marking is not None else f"blank ({reason})" if reason else "blank",
        wanted=f"an Ex marking for {described(area)}",
        fixes=type_fixes("HAZ03" if area.system != "division" else "HAZ09", installed, plant),
        cells=(*record.cells("device_type"), *listed) if record.device_type else listed,
    )


def _classifies(area: Area) -> tuple[str, ...]:
    return ("class_", "division") if area.system == "division" else ("zone",)


# ------------------------------------------------------------------------------------------- marking against area


@rule(
    "HAZ03",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message=_IN_AREA,
    basis="IEC 60079-14:2013 5.4 with Tables 1 and 2, IEC 60079-26:2014, 1999/92/EC Annex II B (from memory)",
)
def epl_not_accepted(installed: Installed, plant: Plant) -> Verdict:
    """An equipment protection level (EPL) that the zone does not accept.

    Why it matters: the equipment may become an ignition source where gas or dust is present more often than it
    was built for.

    What to do: take a device marked for this zone. Gas and dust never stand for one another, and of a partition
    (Ga/Gb) the weaker side counts unless the zone on its process side is named. An EPL stronger than each of the
    protections allows is for a competent person to see.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Zone 1 IIB T3", "Ex marking": "Ex ec IIC T4 Gc"}
    >>> said("HAZ03", [row])
    ["PT-1: EPL Gc in Zone 1, which accepts Ga, Gb: Ex ec IIC T4 Gc, in 'Zone 1 IIB T3'"]
    >>> said("HAZ03", [{**row, "Ex marking": "Ex eb IIC T4 Gb"}])
    []
    """
    return judge("HAZ03", installed, plant)


@rule(
    "HAZ04",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message=_IN_AREA,
    basis="IEC 60079-14:2013 5.5 with Table 3, IEC 60079-0:2017 4.2 and 29 (from memory)",
)
def gas_group_not_accepted(installed: Installed, plant: Plant) -> Verdict:
    """A gas group that the area's gas is not covered by.

    Why it matters: the gaps and energies that hold back one gas let another through.

    What to do: take a device of the area's group, or a more demanding one. IIB+H2 is for IIB gases and hydrogen
    alone: name the gas where it is hydrogen.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Zone 1 IIC T1", "Ex marking": "Ex db IIB T4 Gb"}
    >>> said("HAZ04", [row])
    ["PT-1: IIB for area IIC, which accepts II, IIC: Ex db IIB T4 Gb, in 'Zone 1 IIC T1'"]
    >>> said("HAZ04", [{**row, "Ex marking": "Ex db IIC T4 Gb"}])
    []
    """
    return judge("HAZ04", installed, plant)


@rule(
    "HAZ05",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message=_IN_AREA,
    basis="IEC 60079-14:2013 5.6 with Table 4, IEC 60079-0:2017 5.3.2 (from memory); NEC 500.8(C)(4) for T codes",
)
def too_hot_for_gas(installed: Installed, plant: Plant) -> Verdict:
    """A temperature class weaker than the area asks for.

    Why it matters: a surface hotter than the gas ignites at needs no spark.

    What to do: take a device of the class. Where classes are paired with ambients, the one at the area's highest
    ambient counts; of T6...T4 without ambients, T4.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Zone 1 IIB T4", "Ex marking": "Ex db IIC T3 Gb"}
    >>> said("HAZ05", [row])
    ["PT-1: T3 200 degC, T4 (135 degC) needed: Ex db IIC T3 Gb, in 'Zone 1 IIB T4'"]
    >>> said("HAZ05", [{**row, "Ex marking": "Ex db IIC T4 Gb"}])
    []
    """
    return judge("HAZ05", installed, plant)


@rule(
    "HAZ06",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message=_IN_AREA,
    basis="IEC 60079-0:2017 4.4, IEC 60079-14:2013 5.5 (from memory)",
)
def dust_group_not_accepted(installed: Installed, plant: Plant) -> Verdict:
    """A dust group that the area's dust is not covered by.

    Why it matters: conductive dust that gets in shorts what non-conductive dust only covers.

    What to do: take a device of the area's group, or a more demanding one: IIIC is for conductive dust, IIIB for
    other dust, IIIA for fibres.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Zone 21 IIIC T150°C", "Ex marking": "Ex tb IIIB T100°C Db"}
    >>> said("HAZ06", [row])
    ["PT-1: IIIB for dust IIIC, which accepts IIIC: Ex tb IIIB T100°C Db, in 'Zone 21 IIIC T150°C'"]
    >>> said("HAZ06", [{**row, "Ex marking": "Ex tb IIIC T100°C Db"}])
    []
    """
    return judge("HAZ06", installed, plant)


@rule(
    "HAZ07",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message=_IN_AREA,
    basis="IEC 60079-14:2013 5.6.3 (from memory): two thirds of the cloud's, 75 K below the layer's ignition",
)
def too_hot_for_dust(installed: Installed, plant: Plant) -> Verdict:
    """A marked surface temperature above what the area's dust permits.

    Why it matters: a cloud or a layer of dust ignites on it.

    What to do: take a cooler device. A layer thicker than 5 mm needs its own curve or a test, which a competent
    person reads.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Zone 21 IIIB T120°C", "Ex marking": "Ex tb IIIC T135°C Db"}
    >>> said("HAZ07", [row])[0][:60]
    'PT-1: 135 degC marked, at most 120 permitted: 120 degC state'
    >>> said("HAZ07", [{**row, "Ex marking": "Ex tb IIIC T120°C Db"}])
    []
    """
    return judge("HAZ07", installed, plant)


@rule(
    "HAZ08",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message=_IN_AREA,
    basis="IEC 60079-0:2017 5.1.1 with Table 1, IEC 60079-14:2013 5.6; NEC Article 500 for +40 degC (from memory)",
)
def outside_marked_ambient(installed: Installed, plant: Plant) -> Verdict:
    """An area whose ambient temperature is outside the one that the marking covers.

    Why it matters: hotter, the temperature class no longer holds; colder, flameproof joints and seals don't.

    What to do: take a device marked for the area's ambient. A marking that is silent covers -20 to +40 degC; a
    division mark that is silent covers at most +40 degC and leaves the cold end open.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area": "A", "Ex marking": "Ex ia IIC T4 Ga"}
    >>> area = {"code": "A", "zone": "1", "gas group": "IIB", "temperature class": "T3", "ambient min": "-20"}
    >>> said("HAZ08", [row], areas=[{**area, "ambient max": "50"}])[0][:81]
    'PT-1: ambient up to 50 degC, the marking covers -20..40 degC by default, the mark'
    >>> said("HAZ08", [row], areas=[{**area, "ambient max": "40"}])
    []
    """
    return judge("HAZ08", installed, plant)


@rule(
    "HAZ09",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message=_IN_AREA,
    basis="NEC 501.5 and 500.8(A)(2); 502.6, 503.6, 505.20, 505.6 and 506.20 (from memory)",
)
def division_not_accepted(installed: Installed, plant: Plant) -> Verdict:
    """A division mark that the area does not accept, or a zone mark in a division area that does not.

    Why it matters: divisions and zones were drawn differently; Zone 1 equipment is none for Division 1, and
    Division 2 equipment none for Zone 1.

    What to do: take a device marked for the area. Where the table leaves it to judgement, and in Canada, for
    which no table is held, a competent person decides.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Cl I Div 1 Gr D T3",
    ...        "Ex marking": "Class I, Zone 1, AEx db IIC T4 Gb"}
    >>> said("HAZ09", [row])[0][:51]
    'PT-1: AEx db for Zone 1 in Class I Div 1: Class I, '
    >>> said("HAZ09", [{**row, "area classification": "Cl I Div 2 Gr D T3"}])
    []
    """
    return judge("HAZ09", installed, plant)


@rule(
    "HAZ10",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message=_IN_AREA,
    basis="NEC 500.6 and 500.8(C)(3)",
)
def group_letter_not_marked(installed: Installed, plant: Plant) -> Verdict:
    """A division area whose group letter is not among those marked.

    Why it matters: the letters are no ladder; a mark for C and D says nothing of hydrogen, and one for A alone
    nothing of B.

    What to do: take a device whose mark names the letter.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Cl I Div 2 Gr B T3",
    ...        "Ex marking": "Class I Div 2 Groups C,D T4"}
    >>> said("HAZ10", [row])[0][:41]
    'PT-1: groups C, D marked, B needed: Class'
    >>> said("HAZ10", [{**row, "Ex marking": "Class I Div 2 Groups B,C,D T4"}])
    []
    """
    return judge("HAZ10", installed, plant)


@rule(
    "HAZ15",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=is_marked_in_area,
    message="the Ex marking '{marking}' cannot be read: {problem}",
    basis="IEC 60079-0:2017 29 and NEC 500.8(C) for what a marking holds (from memory)",
)
def unreadable_marking(installed: Installed, plant: Plant) -> Verdict:
    """An Ex marking that cannot be read.

    Why it matters: what it allows is not checked; every other rule about the area leaves this instrument out.

    What to do: copy the whole marking from the plate or the certificate: type of protection, group, temperature
    class and EPL.

    >>> from validation.example import said
    >>> row = {"tag": "JB-1", "area classification": "Zone 1 IIB T3", "Ex marking": "EExe approved"}
    >>> said("HAZ15", [row])[0][:56]
    "review: JB-1: the Ex marking 'EExe approved' cannot be r"
    >>> said("HAZ15", [{**row, "Ex marking": "EEx e II T3"}])
    []
    """
    marking = marking_of(installed)
    assert marking is not None
    if marking.readable:
        assumed = repaired(marking)
        return Clear(assumed) if assumed else None
    return Review(
        values={"marking": marking.text, "problem": marking.problem},
        fields=(marking_field(installed),),
        found=marking.text,
        wanted="protection, group, temperature class and EPL",
        cells=installed.record.cells("device_type") if marking_field(installed) == "type.ex_marking" else (),
    )


# -------------------------------------------------------------------------------------------------- the area itself


def _lacking(area: Area) -> Iterator[str]:
    """Give the fields without which the rules about markings cannot be worked."""
    sides = area.sides
    letters = (area.gas_group or area.dust_group or "I")[0] != "I"
    if area.system == "division" or area.division or (not area.zone and (area.class_ or letters)):
        if not area.class_:
            yield "class_"
        if not area.division:
            yield "division"
        if "gas" in sides and not (area.gas_group and has_its_systems_group(area, "gas")):
            yield "gas_group"
        if ("II" in area.classes and not area.dust_group) or not has_its_systems_group(area, "dust"):
            yield "dust_group"
        if area.temperature_class is None:
            yield "temperature_class"
    else:
        if ("gas" in sides and not area.gas_zone and not area.epl_assigned("gas")) or (
            "dust" in sides and not area.dust_zone and not area.epl_assigned("dust")
        ):
            yield "zone"
        if "gas" in sides:
            if not area.gas_group or not has_its_systems_group(area, "gas"):
                yield "gas_group"
            if area.temperature_class is None:
                yield "temperature_class"
        if "dust" in sides:
            if not area.dust_group or not has_its_systems_group(area, "dust"):
                yield "dust_group"
            yield from permitted_dust_surface_c(area).missing
    if not area.from_row_cell:
        if area.ambient_min_c is None:
            yield "ambient_min_c"
        if area.ambient_max_c is None:
            yield "ambient_max_c"


# Fields that stand in one column, or in each other's.
_WITH: Final[Mapping[str, tuple[str, ...]]] = {
    "dust_surface_c": ("dust_surface_c", "cloud_ignition_c", "layer_ignition_c"),
    "gas_group": ("gas_group", "zone"),
}


def _absent_columns(plant: Plant) -> Mapping[str, int]:
    """Return what no list of areas has a column for, though more than one area needs it, and how many do."""
    absent: dict[str, int] = {}
    columns: set[str] = set()
    for area in plant.areas.values():
        if area.origin is None:
            return {}
        columns |= area.origin.place.columns.keys()
    for area in plant.areas.values():
        if area.unclassified or not area.classified:
            continue
        for name in _lacking(area):
            if not columns & set(_WITH.get(name, (name,))):
                absent[name] = absent.get(name, 0) + 1
    return {name: count for name, count in absent.items() if count > 1}


def _no_area_data(plant: Plant) -> Verdict:
    absent: Mapping[str, int] = plant.once("columns that no list of areas has", _absent_columns)
    if not absent:
        return None
    titles = ", ".join(title_of(f"area.{name}") for name in absent)
    return Found(
        values={"titles": titles, "count": max(absent.values())},
        fields=tuple(f"area.{name}" for name in absent),
        message="the list of areas has no column for {titles}; {count} areas need it",
        found="no such column",
        wanted=titles,
        stops_rows=False,
    )


@rule(
    "HAZ20",
    severity=Severity.GAP,
    on=Subject.AREA,
    whole=_no_area_data,
    message="{area} lacks its {lacks}",
    basis="IEC 60079-14:2013 4.2 and 5: what equipment is chosen by (from memory)",
)
def incomplete_area(subject: AreaInPlant, plant: Plant) -> Verdict:
    """An area whose own record does not say all that equipment is chosen by.

    Why it matters: what is blank is checked for none of the instruments that stand there.

    What to do: write it from the area classification documents: for gas the group, the temperature class and the
    ambient range, for dust the group, the permitted surface temperature and the ambient range.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area": "30B"}
    >>> area = {"code": "30B", "zone": "2", "gas group": "IIA", "temperature class": "", "ambient min": "-20",
    ...         "ambient max": "40"}
    >>> said("HAZ20", [row], areas=[area])
    ['30B: area 30B (Zone 2 IIA) lacks its temperature class']
    >>> said("HAZ20", [row], areas=[{**area, "temperature class": "T1"}])
    []
    """
    area = subject.record
    if area.unclassified:
        return NotApplicable()
    if name_key(area.code) in plant.areas_twice and not area.from_row_cell:
        return Unchecked("area")
    unread = [name for name in (*CLASSIFICATION_FIELDS, "temperature_class") if name in area.unread]
    if not area.classified and not unread:
        return Unchecked("area zone")
    absent: Mapping[str, int] = plant.once("columns that no list of areas has", _absent_columns)
    lacking = list(dict.fromkeys((*unread, *_lacking(area)))) if area.classified else unread
    lacking = [name for name in lacking if name not in absent or area.from_row_cell]
    if not lacking:
        return None
    lacks = [_words(name, area) for name in lacking]
    return Found(
        values={"area": place(area), "lacks": _and(lacks)},
        fields=tuple(f"area.{name}" for name in lacking),
        found="blank" if not unread else "blank or unreadable",
        wanted=", ".join(lacks),
        cells=first_cell(area, plant),
    )


def _words(name: str, area: Area) -> str:
    if name == "zone" and area.zone:
        return "dust zone" if area.gas_zone else "gas zone"
    words = title_of(f"area.{name}").removeprefix("area ")
    if name in area.unread:
        return f"{words} (the cell cannot be read)"
    stated = getattr(area, name)  # a group of the other system
    return f"{words} ({stated} is none of the {area.system} system's)" if stated else words


def _and(parts: list[str]) -> str:
    return parts[0] if len(parts) == 1 else f"{', '.join(parts[:-1])} and {parts[-1]}"
