"""HAZ11 to HAZ13: the certificates behind what is marked, their conditions of use and their components.

Nothing is inferred from a number but its suffix; what a certificate says only its reader knows.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import Final

from instruments.area import Area
from instruments.certificate import Certificate, conditions_accepted
from instruments.installed import Installed
from instruments.marking_entry import MarkingEntry
from instruments.protection import marking_of
from loops.certificates import CertificateInPlant, certificate_cells, certificate_text, evidence_of
from loops.plant import Plant
from validation.finding import Clear, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.hazardous_place import (
    areas_of,
    is_marked_in_area,
    jurisdiction_of,
    marking_field,
    may_be_in_area,
    place,
    type_is_lost,
)
from validation.rule import Subject, rule, title_of

_NO_LISTING: Final = ("no", "none", "nein", "not listed", "unlisted", "not certified", "no listing")
_LISTS_EQUIPMENT: Final = ("US", "Canada")
_SELF_DECLARED: Final = "c"  # level c and category 3 may rest on the maker's own declaration (2014/34/EU Article 13)


# ---------------------------------------------------------------------------------------------- no certificate number


def _no_certificate_column(plant: Plant) -> Verdict:
    if plant.has_column("certificate"):
        return None
    for device in plant.types.values():
        if device.certificate is not None or (
            device.origin is not None and "certificate" in device.origin.place.columns
        ):
            return None
    if any(evidence_of(each) for each in plant.live):
        return None  # it stands with the marking
    count = sum(1 for each in plant.live if is_marked_in_area(each, plant) and _needs_a_number(each, plant))
    if count < 2:
        return None
    return Found(
        values={"count": count},
        fields=("certificate",),
        message="no sheet has a column for the certificate; {count} marked instruments stand in classified areas",
        found="no such column",
        wanted="certificate",
    )


def _needs_a_number(installed: Installed, plant: Plant) -> bool:
    return isinstance(_judged(installed, plant), Found)


@rule(
    "HAZ11",
    severity=Severity.DANGER,
    on=Subject.INSTRUMENT,
    applies=is_marked_in_area,
    whole=_no_certificate_column,
    message="no certificate number: {marking}, in {place}",
    basis="IEC 60079-14:2013 4.4.1, 2014/34/EU Article 13, NEC 500.8(A) for listings (from memory)",
)
def no_certificate(installed: Installed, plant: Plant) -> Verdict:
    """Marked equipment without a certificate number.

    Why it matters: a marking is the maker's word; what stands behind it, and under which conditions, is in the
    certificate.

    What to do: write its number as the plate has it, with its X or U. In the US and Canada any listing reference
    serves. Equipment of level c or category 3 may rest on a declaration of its maker's, which a competent person
    reads, as he does a number of a form that is not known here.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Zone 1 IIB T3", "Ex marking": "Ex db IIC T4 Gb"}
    >>> said("HAZ11", [{**row, "certificate": ""}])
    ["PT-1: no certificate number: Ex db IIC T4 Gb, in 'Zone 1 IIB T3'"]
    >>> said("HAZ11", [{**row, "certificate": "ABC 20 ATEX 0001"}])
    []
    """
    return _judged(installed, plant)


def _judged(installed: Installed, plant: Plant) -> Verdict:
    areas = areas_of(installed, plant)
    if isinstance(areas, Unchecked):
        return areas
    marking = marking_of(installed)
    if marking is None or not marking.readable:
        return Unchecked("Ex marking")
    if not marking.standing():
        return NotApplicable("associated apparatus")
    record, device = installed.record, installed.type
    text, evidence = certificate_text(installed), evidence_of(installed)
    jurisdiction = jurisdiction_of(areas[0], plant)[0]
    listing = jurisdiction in _LISTS_EQUIPMENT
    if any(each.form_known for each in evidence) or (listing and text and not _says_none(text)):
        return None
    if not text and ("certificate" in record.unread or (device is not None and "certificate" in device.unread)):
        return Unchecked("certificate")
    if not text and type_is_lost(installed, plant):
        return Unchecked("device type")
    if not listing and any(entry.is_division for entry in marking.standing()):
        # No evidence here whatever its listing, which HAZ16 says, or nobody knows whose rules hold.
        return Unchecked("Ex marking" if jurisdiction else title_of("area.jurisdiction"))
    numbered = [each for each in evidence if any(sign.isdigit() for sign in each.number)]
    if numbered and not listing:
        return _said(
            Review,
            installed,
            areas[0],
            message="the form of the certificate number '{text}' is not known: {marking}, in {place}",
            wanted="a number of an IECEx or EU-type certificate, or a competent person's judgement",
        )
    levels = {_level(entry, areas) for entry in marking.standing()}
    if listing:
        return _said(Found if levels - {_SELF_DECLARED} else Review, installed, areas[0])
    if levels & {"a", "b"}:
        return _said(Found, installed, areas[0])
    if levels == {_SELF_DECLARED}:
        message = "no certificate number for level c, which its maker may declare himself: {marking}, in {place}"
        return _said(Review, installed, areas[0], message=message)
    return Unchecked("Ex marking")


def _says_none(text: str) -> bool:
    return text.strip(" .").casefold() in (
        "no",
        "none",
        "nein",
        "not listed",
        "unlisted",
        "not certified",
        "no listing",
    )


def _level(entry: MarkingEntry, areas: Iterable[Area]) -> str:
    """Return the level a, b or c of one marking; of a division mark that its division stands for; empty: unknown."""
    if entry.is_division:
        return _SELF_DECLARED if entry.division == "2" else "b"
    return entry.epl[1] if entry.epl else ""


def _said(
    kind: type[Found], installed: Installed, area: Area, *, message: str = "", wanted: str = "a certificate number"
) -> Found:
    marking, text = marking_of(installed), certificate_text(installed)
    reason = installed.record.blanks.get("certificate", "")
    return kind(
        values={
            "marking": marking.text if marking is not None else "",
            "place": place(area, installed),
            "text": text or "",
        },
        fields=("certificate", marking_field(installed)),
        message=message,
        found=text or (f"blank ({reason})" if reason else "blank"),
        wanted=wanted,
        cells=certificate_cells(installed),
    )


# --------------------------------------------------------------------------------------------------------- X and U


def _stands_in_an_area(subject: CertificateInPlant, plant: Plant) -> bool:
    return any(may_be_in_area(each, plant) for each in subject.members)


def _members(subject: CertificateInPlant, plant: Plant) -> tuple[Installed, ...]:
    return tuple(each for each in subject.members if may_be_in_area(each, plant))


def _tags(members: Iterable[Installed]) -> str:
    return ", ".join(each.name for each in members)


def _of_form_unknown(certificate: Certificate) -> str:
    return "" if certificate.form_known else ", a number of a form that is not known"


@rule(
    "HAZ12",
    severity=Severity.DANGER,
    on=Subject.CERTIFICATE,
    applies=_stands_in_an_area,
    message="{number} has conditions of use ({why}); nobody has recorded that they are met for {tags}",
    basis="IEC 60079-0:2017 29.3 e) and IEC 60079-14:2013 4.4.1: X and specific conditions of use (from memory)",
)
def conditions_not_accepted(subject: CertificateInPlant, plant: Plant) -> Verdict:
    """A certificate that ends in X, and nobody has recorded that its conditions of use are met.

    Why it matters: the equipment is only what its marking says where these conditions are kept: an impact that
    is kept away, a cable that is fixed, an ambient, a surface that is not rubbed.

    What to do: read the certificate; at each tag write who found its conditions met, and when.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "area classification": "Zone 1 IIB T3", "Ex marking": "Ex db IIC T4 Gb",
    ...        "certificate": "ABC 20 ATEX 0001X"}
    >>> said("HAZ12", [{**row, "X conditions accepted": ""}])[0][:73]
    'review: ABC 20 ATEX 0001X: ABC 20 ATEX 0001X has conditions of use (X beh'
    >>> said("HAZ12", [{**row, "X conditions accepted": "N. Hollin, 3 May 2026"}])
    []
    """
    certificate, members = subject.certificate, _members(subject, plant)
    on_plate = [each for each in members if _marked_x(each)]
    if certificate.suffix == "U":
        return NotApplicable("a component")
    if certificate.suffix != "X" and not on_plate:
        if not certificate.form_known:
            return Unchecked("certificate")
        return Clear(("a certificate whose number is written without X is taken to have no conditions of use",))
    asked = members if certificate.suffix == "X" else tuple(on_plate)
    lacking = [each for each in asked if not conditions_accepted(each.record.x_accepted)]
    if not lacking:
        return None
    why = "X behind its number" if certificate.suffix == "X" else "X behind the marking"
    recorded = dict.fromkeys(each.record.x_accepted for each in lacking if each.record.x_accepted)
    return Review(
        values={"number": subject.name, "why": why + _of_form_unknown(certificate), "tags": _tags(lacking)},
        fields=("certificate", "x_accepted"),
        found="; ".join(recorded) or "blank",
        wanted="a name and a date at each tag, once the conditions have been read and are met",
        off_by=f"{len(lacking)} of {len(asked)} tags",
    )


def _marked_x(installed: Installed) -> bool:
    """Whether an X stands behind the marking, and the row has no certificate of its own that bears it."""
    marking = marking_of(installed)
    if marking is None or not marking.marked_x:
        return False
    return not any(each.suffix == "X" for each in evidence_of(installed))


@rule(
    "HAZ13",
    severity=Severity.DANGER,
    on=Subject.CERTIFICATE,
    applies=_stands_in_an_area,
    message="{number} is of a component ({why}) and the only certificate of {tags}",
    basis="IEC 60079-0:2017 13 and 29: U, an Ex component is not used on its own (from memory)",
)
def component_alone(subject: CertificateInPlant, plant: Plant) -> Verdict:
    """A certificate that ends in U, of a component, is the only evidence for a tag.

    Why it matters: an empty enclosure or a terminal was tested to be built into equipment; whether what was made
    of it holds is what the equipment's own certificate says.

    What to do: find the certificate of the whole equipment, and write its number.

    >>> from validation.example import said
    >>> row = {"tag": "JB-1", "area classification": "Zone 1 IIB T3", "Ex marking": "Ex eb IIC T6 Gb"}
    >>> said("HAZ13", [{**row, "certificate": "ABC 20 ATEX 0001U"}])[0][:70]
    'ABC 20 ATEX 0001U: ABC 20 ATEX 0001U is of a component (U behind its n'
    >>> said("HAZ13", [{**row, "certificate": "ABC 20 ATEX 0001U; ABC 20 ATEX 0002"}])
    []
    """
    certificate, members = subject.certificate, _members(subject, plant)
    alone = [each for each in members if _is_component_alone(each)]
    if not alone:
        return None if certificate.form_known else Unchecked("certificate")
    kind = Found if certificate.form_known else Review
    why = "U behind its number" if certificate.suffix == "U" else "U behind the marking"
    return kind(
        values={"number": subject.name, "why": why + _of_form_unknown(certificate), "tags": _tags(alone)},
        fields=("certificate",),
        found=subject.name,
        wanted="the certificate of the whole equipment",
    )


def _is_component_alone(installed: Installed) -> bool:
    marking, evidence = marking_of(installed), evidence_of(installed)
    if all(each.suffix == "U" for each in evidence):
        return True
    return marking is not None and marking.is_component and len(evidence) == 1
