"""HAZ16 and HAZ18: what is marked for another place than it stands in: other rules, or no place in the area at all."""

from __future__ import annotations

from typing import Final

from instruments.area import Area
from instruments.certificate import Certificate
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.protection import marking_of
from loops.certificates import certificate_cells, evidence_of
from loops.plant import Plant
from validation.finding import Fix, Found, Review, Severity, Unchecked, Verdict
from validation.hazardous_place import (
    area_fields,
    areas_named,
    areas_of,
    judge,
    jurisdiction_of,
    marking_field,
    may_be_in_area,
    place,
    type_fixes,
    type_is_lost,
)
from validation.rule import Subject, rule


@rule(
    "HAZ16",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=may_be_in_area,
    message="{reason}: {marking}, in {place}",
    basis="NEC 500.8(A), 505.9(C) and 501.5; 2014/34/EU Articles 13 and 16; CSA C22.1 section 18 (from memory)",
)
def other_scheme(installed: Installed, plant: Plant) -> Verdict:
    """A marking scheme that is no evidence under the rules that hold in the area.

    Why it matters: the tests behind a mark for divisions, for zones, for the EU or for the US are not the same,
    and neither is who must have made them.

    What to do: find out whether the equipment bears a second marking or listing, and write it beside the first;
    otherwise a competent person decides with the authority of the place.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area": "A", "Ex marking": "Class I Div 1 Groups C,D T4"}
    >>> area = {"code": "A", "zone": "1", "gas group": "IIB", "temperature class": "T3", "jurisdiction": "ATEX"}
    >>> said("HAZ16", [row], areas=[area])[0][:78]
    'review: PT-1: a mark by class and division is no evidence by itself in a zone '
    >>> said("HAZ16", [{**row, "Ex marking": "II 2 G Ex db IIC T4 Gb"}], areas=[area])
    []
    """
    verdict = judge("HAZ16", installed, plant)
    if isinstance(verdict, list | Unchecked):
        return verdict
    areas, marking = areas_of(installed, plant), marking_of(installed)
    if isinstance(areas, Unchecked) or marking is None or not marking.standing():
        return verdict
    foreign = _certified_elsewhere(evidence_of(installed), jurisdiction_of(areas[0], plant)[0])
    if not foreign or any(entry.categories for entry in marking.standing()):
        return verdict
    return Review(
        values={"reason": foreign, "marking": marking.text, "place": place(areas[0], installed)},
        fields=("certificate", *area_fields(("jurisdiction",), areas[0], installed)),
        found=foreign,
        wanted="a certificate of this jurisdiction",
        cells=certificate_cells(installed),
    )


def _certified_elsewhere(evidence: tuple[Certificate, ...], jurisdiction: str | None) -> str:
    """Return why certificates, all of another scheme, are no evidence here though the marking's scheme is."""
    if not evidence or not all(each.form_known for each in evidence):
        return ""
    numbers = ", ".join(map(str, evidence))
    international = all(each.number.startswith("IECEx") for each in evidence)
    if jurisdiction == "ATEX" and international:
        return f"no ATEX category, and no EU-type certificate beside {numbers}"
    if jurisdiction == "Canada":
        return f"{numbers} is no listing for Canada"
    return ""


_IN_CABINET: Final = frozenset({Kind.BARRIER, Kind.ISOLATOR, Kind.CARD, Kind.POWER_SUPPLY})


def _is_associated_in_area(installed: Installed, plant: Plant) -> bool:
    marking = marking_of(installed)
    if marking is None or not (marking.is_associated or marking.outputs or not marking.readable):
        return False
    if may_be_in_area(installed, plant):
        return True
    # A cabinet may stand in an area, too: what its row names counts.
    stands = installed.kind in _IN_CABINET and installed.record.location in (None, "cabinet")
    return stands and bool(areas_named(installed, plant))


@rule(
    "HAZ18",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=_is_associated_in_area,
    message="associated apparatus without a marking of its own: {marking}, in {place}",
    basis="IEC 60079-0:2017 29.6 and IEC 60079-14:2013 16.2.1: Ex in brackets is for outside the area (from memory)",
)
def associated_in_area(installed: Installed, plant: Plant) -> Verdict:
    """Associated apparatus in a classified area, without a marking of its own.

    Why it matters: what stands in brackets says where its outputs may go. The apparatus itself makes sparks and
    heat like any other, and nothing on it says that it may stand there.

    What to do: put it outside the area, or into an enclosure with a protection of its own; or take one that is
    marked for the area outside the brackets.

    >>> from validation.example import said
    >>> row = {"tag": "YY-1", "kind": "isolator", "location": "field", "area classification": "Zone 2 IIB T3"}
    >>> said("HAZ18", [{**row, "Ex marking": "[Ex ia Ga] IIC"}])[0][:75]
    'YY-1: associated apparatus without a marking of its own: [Ex ia Ga] IIC, in'
    >>> said("HAZ18", [{**row, "Ex marking": "Ex ec [ia Ga] IIC T4 Gc"}])
    []
    """
    marking = marking_of(installed)
    if marking is None or not marking.readable:
        return Unchecked("Ex marking")
    in_field = may_be_in_area(installed, plant)
    areas = areas_of(installed, plant) if in_field else areas_named(installed, plant)
    if isinstance(areas, Unchecked):
        return areas
    if marking.standing():
        return None
    if type_is_lost(installed, plant):
        return Unchecked("device type")
    own = marking_field(installed)
    kind = Review if not in_field and installed.record.location == "cabinet" else Found
    message = "associated apparatus without a marking of its own: {marking}, in a cabinet in {place}"
    return kind(
        values={"marking": marking.text, "place": place(areas[0], installed)},
        fields=(own, *area_fields(_classifying(areas[0]), areas[0], installed)),
        message=message if kind is Review else "",
        found=marking.text,
        wanted="a place outside classified areas, or a marking of its own",
        fixes=(
            *type_fixes("HAZ03" if areas[0].system != "division" else "HAZ09", installed, plant),
            Fix(text="a place outside the classified area, or in an enclosure with a protection of its own"),
        ),
        cells=(
            *(installed.record.cells("device_type") if own == "type.ex_marking" else ()),
            *(() if areas[0].from_row_cell else installed.record.cells("area")),
        ),
    )


def _classifying(area: Area) -> tuple[str, ...]:
    return ("class_", "division") if area.system == "division" else ("zone",)
