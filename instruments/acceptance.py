"""Which marking is accepted in which place: EPL, group, temperature, ambient and division as pure tables.

Everything is a set or a table with its source; nothing is decided by comparing letters. What is accepted here
is not thereby safe, certified or compliant: screening aid - requires review by a competent person. Clause
numbers are from memory of the named editions.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final, Literal

from instruments.area import (
    DUST_ZONES,
    GAS_ZONES,
    Area,
    AreaSide,
    permitted_dust_surface_c,
    read_classification,
)
from instruments.certificate import Certificate
from instruments.certificate import conditions_accepted as is_recorded
from instruments.epl import EPLS_IN_ZONE
from instruments.gas import INERT, gases_in, iec_group_of, named_gases, nec_group_of
from instruments.marking import Marking
from instruments.marking_entry import (
    T_CLASS_C,
    T_CODE_C,
    MarkingEntry,
    division_text,
)

Judgement = Literal["accepted", "refused", "review", "unknown"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Acceptance:
    """What a table says of one mark in one place.

    Attributes
    ----------
    outcome
        ``accepted``; ``refused``; ``review``: the data is there and a competent person must decide;
        ``unknown``: something it needs is blank or unreadable, which is never acceptance.
    reason
        The figures in words.
    missing
        Of ``unknown``: the fields that are missing.
    assumed
        What was taken for a blank or by default.
    """

    outcome: Judgement
    reason: str
    missing: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()

    @property
    def accepted(self) -> bool:
        """True for ``accepted`` only."""
        return self.outcome == "accepted"


def _accepted(reason: str, *assumed: str) -> Acceptance:
    return Acceptance(outcome="accepted", reason=reason, assumed=assumed)


def _refused(reason: str) -> Acceptance:
    return Acceptance(outcome="refused", reason=reason)


def _review(reason: str) -> Acceptance:
    return Acceptance(outcome="review", reason=reason)


def _unknown(reason: str, *missing: str) -> Acceptance:
    return Acceptance(outcome="unknown", reason=reason, missing=missing)


def _worst(found: Iterable[Acceptance]) -> Acceptance:
    """Return the gravest of several: refused, then review, then unknown."""
    order = ("refused", "review", "unknown", "accepted")
    return min(found, key=lambda acceptance: order.index(acceptance.outcome))


# EPL and zone ---------------------------------------------------------------------------------------------

# For an EPL that the plant assigns in place of the zone's (IEC 60079-14:2013 5.3, from memory).
EPLS_FOR_REQUIRED: Final[Mapping[str, frozenset[str]]] = MappingProxyType(
    {
        "Ga": frozenset({"Ga"}),
        "Gb": frozenset({"Ga", "Gb"}),
        "Gc": frozenset({"Ga", "Gb", "Gc"}),
        "Da": frozenset({"Da"}),
        "Db": frozenset({"Da", "Db"}),
        "Dc": frozenset({"Da", "Db", "Dc"}),
    }
)


def epl_in_zone(
    epl: str | None, zone: str | None, *, assigned: str | None = None, process_zone: str | None = None
) -> Acceptance:
    """Say whether a zone accepts an EPL (IEC 60079-14:2013 Table 1).

    Parameters
    ----------
    epl
        The EPL, of a partition both, process side first: ``Ga/Gb``. A pair counts as its weaker side
        unless the process side's zone is named.
    zone
        0, 1, 2, 20, 21, 22, or one of each (``1/21``): then the EPL's own atmosphere is asked.
    assigned
        The EPL that the plant requires here; it overrides the zone.
    process_zone
        The zone on the process side of a partition.

    >>> epl_in_zone("Gb", "1").outcome, epl_in_zone("Gb", "0").outcome, epl_in_zone("Gb", "21").outcome
    ('accepted', 'refused', 'refused')
    >>> epl_in_zone("Ga/Gb", "0").outcome, epl_in_zone("Ga/Gb", "1", process_zone="0").outcome
    ('refused', 'accepted')
    """
    if not epl:
        return _unknown("the marking has no EPL, and none follows from it", "EPL")
    process, _, body = epl.partition("/")
    body = body or process
    place, accepts = _accepted_epls(body, zone, assigned)
    if accepts is None:
        return _unknown(f"cannot tell what {place} accepts" if zone else "no zone is stated", "zone")
    outcomes = [_epl_outcome(body, place, accepts, "" if process == body else f" (the body of {epl})")]
    if process_zone:
        inside = read_classification(process_zone)
        if inside is None or not (inside.unclassified or inside.zone in EPLS_IN_ZONE):
            return _worst([*outcomes, _unknown(f"cannot read the zone {process_zone!r}", "process-side zone")])
        if inside.zone is not None:
            needed = EPLS_IN_ZONE[inside.zone]
            outcomes.append(_epl_outcome(process, f"Zone {inside.zone} on the process side", needed, ""))
    worst = _worst(outcomes)
    return worst if worst.outcome != "accepted" else _accepted("; ".join(each.reason for each in outcomes))


def _accepted_epls(body: str, zone: str | None, assigned: str | None) -> tuple[str, frozenset[str] | None]:
    if assigned:
        required = [epl for epl in assigned.split("/") if epl in EPLS_FOR_REQUIRED]
        required = [epl for epl in required if epl[0] == body[0]] or required
        return f"a place that requires EPL {assigned}", EPLS_FOR_REQUIRED[required[0]] if required else None
    zones = (zone or "").split("/")
    own = GAS_ZONES if body[0] == "G" else DUST_ZONES if body[0] == "D" else ()
    asked = next((each for each in zones if each in own), zones[0])
    return f"Zone {asked}", EPLS_IN_ZONE.get(asked)


def _epl_outcome(epl: str, place: str, accepts: frozenset[str], remark: str) -> Acceptance:
    if epl in accepts:
        return _accepted(f"EPL {epl}{remark} in {place}")
    return _refused(f"EPL {epl}{remark} in {place}, which accepts {', '.join(sorted(accepts))}")


def entry_in_zone(entry: MarkingEntry, area: Area, *, side: AreaSide, process_zone: str | None = None) -> Acceptance:
    """Say whether an area accepts the EPL of one marking, with what the marking itself leaves in doubt.

    An EPL stronger than each of its protections allows is never accepted without a person, nor is flameproof
    type ``da`` where level a is needed: it is for the sensors of portable gas detectors (IEC 60079-1:2014).

    Parameters
    ----------
    entry
        One marking.
    area
        The place, with the spellings of `instruments.area.understood`.
    side
        The atmosphere asked for; an area may have both.
    process_zone
        The zone on the process side, in place of the area's own.
    """
    zone = area.gas_zone if side == "gas" else area.dust_zone
    found = epl_in_zone(
        entry.epl_text or None,
        zone,
        assigned=area.epl_assigned(side),
        process_zone=process_zone or area.process_zone,
    )
    if found.outcome != "accepted":
        return found
    if entry.epl_beyond_protections:
        protections = " ".join(entry.protections)
        return _review(f"EPL {entry.epl_text} is more than {protections} allows; only the certificate can tell")
    if "da" in entry.protections and "Ga" in (entry.epl, entry.epl_process) and "0" in (zone, process_zone):
        return _review("type da is for the sensors of portable gas detectors")
    if entry.epl_source == "derived":
        return _accepted(found.reason, f"EPL {entry.epl_text} follows from {' '.join(entry.protections)}")
    if entry.epl_source == "category":
        return _accepted(found.reason, f"EPL {entry.epl_text} follows from the ATEX category")
    return found


# Groups ---------------------------------------------------------------------------------------------------

# IEC 60079-14:2013 Table 3, IEC 60079-0:2017 4.3 and clause 29 (from memory). Group I is in no set.
GAS_GROUPS_ACCEPTED: Final[Mapping[str, frozenset[str]]] = MappingProxyType(
    {
        "IIA": frozenset({"IIA", "IIB", "IIC", "II"}),
        "IIB": frozenset({"IIB", "IIC", "II"}),
        "IIB+H2": frozenset({"IIC", "II"}),
        "IIC": frozenset({"IIC", "II"}),
    }
)
DUST_GROUPS_ACCEPTED: Final[Mapping[str, frozenset[str]]] = MappingProxyType(
    {
        "IIIA": frozenset({"IIIA", "IIIB", "IIIC", "III"}),
        "IIIB": frozenset({"IIIB", "IIIC", "III"}),
        "IIIC": frozenset({"IIIC"}),
    }
)
# Types that always needed a letter behind II (from memory): flameproof and intrinsically safe.
_NEEDS_LETTER: Final = frozenset({"d", "da", "db", "dc", "ia", "ib", "ic"})
# The representative gases of the groups: IEC 60079-20-1 and NEC 500.6(A).
GAS_IEC_GROUP: Final[Mapping[str, str]] = MappingProxyType(
    {
        "propane": "IIA",
        "methane": "IIA",
        "ethylene": "IIB",
        "hydrogen": "IIC",
        "acetylene": "IIC",
        "carbon disulfide": "IIC",
    }
)
GAS_NEC_GROUP: Final[Mapping[str, str]] = MappingProxyType(
    {"acetylene": "A", "hydrogen": "B", "ethylene": "C", "propane": "D"}
)


def gas_group(entry: MarkingEntry, area_group: str | None, *, gas: str | None = None) -> Acceptance:
    """Say whether a marked gas group is accepted (IEC 60079-14:2013 Table 3; IEC 60079-0 clause 29).

    Parameters
    ----------
    entry
        One marking: its group, and the gas it names beyond the group or alone.
    area_group
        IIA, IIB, IIB+H2 or IIC.
    gas
        The gas that the area names, as written; it decides IIB+H2 against IIC.

    >>> from instruments.marking import read_marking
    >>> mark = read_marking("Ex db IIB+H2 T1 Gb").entries[0]
    >>> [gas_group(mark, "IIC", gas=gas).outcome for gas in ("Wasserstoff", "acetylene", None)]
    ['accepted', 'refused', 'review']
    """
    if entry.group_contradicts_epl:
        return _unknown(f"group {entry.group_text} contradicts EPL {entry.epl_text}", "gas group of the marking")
    if entry.group is None and not entry.gas_only:
        return _unknown("the marking has no gas group", "gas group of the marking")
    if entry.group == "I" or (entry.group or "").startswith("III"):
        return _refused(f"group {entry.group_text} is not for this area's gas")
    present = named_gases(gas)
    if entry.gas_only:
        return _named_gas_only(entry, present)
    if not area_group:
        return _unknown("the area has no gas group", "gas group")
    accepts = GAS_GROUPS_ACCEPTED.get(area_group)
    if accepts is None:
        return _unknown(f"cannot read the area's gas group {area_group!r}", "gas group")
    marked, wanted = entry.group_text, f"area {area_group}" + (f" ({gas})" if gas else "")
    if entry.group in accepts:
        if entry.group == "II" and _NEEDS_LETTER & set(entry.protections):
            return _review(f"II without a letter on {' '.join(entry.protections)}, which needs one")
        return _accepted(f"{marked} for {wanted}")
    extra = named_gases(entry.gas_extra)
    if not extra:
        return _refused(f"{marked} for {wanted}, which accepts {', '.join(sorted(accepts))}")
    if area_group == "IIB+H2":
        fits = extra == ("hydrogen",) and entry.group == "IIB"
        return _accepted(f"{marked} for {wanted}") if fits else _refused(f"{marked} for {wanted}")
    if not present:
        if area_group == "IIB":
            return _refused(f"{marked} for {wanted}")
        return _review(f"{marked} for {wanted}: no gas is named, it may be {entry.gas_extra}")
    if set(present) == set(extra):
        return _accepted(f"{marked} for {wanted}")
    if set(extra) & set(present):
        return _review(f"{marked} for {wanted}: {entry.gas_extra} mixed with other gases")
    return _refused(f"{marked} for {wanted}")


def _named_gas_only(entry: MarkingEntry, present: tuple[str, ...]) -> Acceptance:
    meant = named_gases(entry.gas_only)
    if not present:
        return _unknown(f"marked for {entry.gas_only} only, and the area names no gas", "gas")
    if set(present) == set(meant):
        return _accepted(f"marked for {entry.gas_only}, which the area names")
    if set(present) & set(meant):
        return _review(f"marked for {entry.gas_only} only, in a mixture: {', '.join(present)}")
    return _refused(f"marked for {entry.gas_only} only; the area names {', '.join(present)}")


def dust_group(entry: MarkingEntry, area_group: str | None) -> Acceptance:
    """Say whether a marked dust group is accepted (IEC 60079-0:2017 4.4, from memory).

    Gas groups never count for dust. A mark without a letter (IEC 61241) is left to a person against IIIC.

    >>> from instruments.marking import read_marking
    >>> mark = read_marking("Ex tb IIIB T100°C Db").entries[0]
    >>> dust_group(mark, "IIIC").outcome, dust_group(mark, "IIIA").outcome
    ('refused', 'accepted')
    """
    if entry.group_contradicts_epl:
        return _unknown(f"group {entry.group_text} contradicts EPL {entry.epl_text}", "dust group of the marking")
    if entry.group is None:
        return _unknown("the marking has no dust group", "dust group of the marking")
    if not entry.group.startswith("III"):
        return _refused(f"group {entry.group_text} is not for dust")
    if not area_group:
        return _unknown("the area has no dust group", "dust group")
    accepts = DUST_GROUPS_ACCEPTED.get(area_group)
    if accepts is None:
        return _unknown(f"cannot read the area's dust group {area_group!r}", "dust group")
    if entry.group in accepts:
        return _accepted(f"{entry.group_text} for dust {area_group}")
    if entry.group == "III":
        return _review(f"a dust mark without a letter for dust {area_group}")
    return _refused(f"{entry.group_text} for dust {area_group}, which accepts {', '.join(sorted(accepts))}")


_LETTERS: Final = re.compile(r"[A-G](?:[\s,&/]*[A-G])*")


def group_letters(group: str | Iterable[str] | None) -> tuple[str, ...]:
    """Return the letters of a division's group, ``C,D``; none of a text that is no such group, ``IIC``.

    >>> group_letters("C,D"), group_letters("IIC"), group_letters(None)
    (('C', 'D'), (), ())
    """
    text = ",".join(group) if group is not None and not isinstance(group, str) else group or ""
    if not _LETTERS.fullmatch(text.strip()):
        return ()
    return tuple(dict.fromkeys(letter for letter in text if letter in "ABCDEFG"))


def division_group(marked: Iterable[str], needed: str | Iterable[str] | None) -> Acceptance:
    """Say whether a division mark has the group letters that an area needs (NEC 500.6, 500.8(C)).

    The letters are no ladder: a mark for group A alone is no evidence for B. Listings are often cumulative;
    that is not inferred.

    Parameters
    ----------
    marked
        The letters of the marking.
    needed
        The letters that the area needs, all of them: ``D`` or ``C,D``.

    >>> division_group("CD", "B").outcome, division_group("BCD", "B").outcome
    ('refused', 'accepted')
    """
    letters = sorted(set(marked))
    wanted = sorted(group_letters(needed))
    if not wanted:
        return _unknown("the area has no group letter", "group")
    if not letters:
        return _unknown("the marking has no group letter", "group of the marking")
    lacking = [letter for letter in wanted if letter not in letters]
    if lacking:
        return _refused(f"groups {', '.join(letters)} marked, {', '.join(lacking)} needed")
    return _accepted(f"groups {', '.join(letters)} marked, {', '.join(wanted)} needed")


# Temperature ----------------------------------------------------------------------------------------------


def t_class_for_ignition(ignition_c: float) -> str | None:
    """Return the least T class for an auto-ignition temperature in degC; None where none is enough.

    The surface must stay below it, strictly (IEC 60079-14:2013 Table 4, from memory): propane's 450 degC
    asks for T2.

    >>> t_class_for_ignition(450.0), t_class_for_ignition(450.1), t_class_for_ignition(85.0)
    ('T2', 'T1', None)
    """
    return next((name for name, limit in T_CLASS_C.items() if limit < ignition_c), None)


def temperature(
    entry: MarkingEntry,
    area_class: str | None,
    *,
    ambient_max_c: float | None = None,
    ambient_min_c: float | None = None,
    ignition_c: float | None = None,
) -> Acceptance:
    """Say whether the marked temperature is cool enough for a gas (IEC 60079-14:2013 Table 4; NEC 500.8).

    Parameters
    ----------
    entry
        One marking. Paired classes: that of the site's ambient; T6...T4 counts as T4.
    area_class
        The area's T class (T1..T6), in North America T2A..T4A, too.
    ambient_max_c, ambient_min_c
        The site's ambient in degC.
    ignition_c
        An auto-ignition temperature in degC, in place of a class or beside it; the surface must be below it.

    >>> from instruments.marking import read_marking
    >>> mark = read_marking("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga").entries[0]
    >>> temperature(mark, "T6", ambient_max_c=55).outcome, temperature(mark, "T4", ambient_max_c=55).outcome
    ('refused', 'accepted')
    """
    if area_class is None and ignition_c is None:
        return _unknown("the area has no temperature class", "temperature class")
    if area_class is not None and area_class not in T_CODE_C:
        return _unknown(f"cannot read the area's temperature class {area_class!r}", "temperature class")
    if not entry.temperatures:
        if entry.is_division:  # some equipment needs no T code; no class may be assumed (NEC 500.8(C))
            return _review("the division mark has no T code")
        return _unknown("the marking has no temperature class", "temperature class of the marking")
    limits = [T_CODE_C[area_class]] if area_class else []
    counts = entry.temperature_at(ambient_max_c, ambient_min_c=ambient_min_c)
    if counts is None:
        return _refused(f"{entry.temperature_text}: no class is marked for an ambient of {ambient_max_c:g} degC")
    cool = min(entry.temperatures, key=lambda each: each.max_c)
    if ambient_max_c is None and entry.is_paired and not _cool_enough(counts.max_c, limits, ignition_c):
        if _cool_enough(cool.max_c, limits, ignition_c):
            return _unknown(f"{entry.temperature_text}: the class depends on the ambient", "ambient max")
        counts = cool
    shown = f"{counts.t_class or ''} {counts.max_c:g} degC".strip()
    wanted = " and ".join(
        ([f"{area_class} ({T_CODE_C[area_class]:g} degC)"] if area_class else [])
        + ([f"below {ignition_c:g} degC"] if ignition_c is not None else [])
    )
    if _cool_enough(counts.max_c, limits, ignition_c):
        return _accepted(f"{shown}, {wanted} needed")
    return _refused(f"{shown}, {wanted} needed")


def _cool_enough(surface_c: float, limits: list[float], ignition_c: float | None) -> bool:
    return all(surface_c <= limit for limit in limits) and (ignition_c is None or surface_c < ignition_c)


def dust_surface(entry: MarkingEntry, area: Area, *, ambient_max_c: float | None = None) -> Acceptance:
    """Say whether the marked surface temperature is one that the area's dust permits.

    Parameters
    ----------
    entry
        One marking; a T class on dust contradicts itself and counts as no temperature.
    area
        The place: its permitted surface, or cloud and layer ignition temperature and layer depth.
    ambient_max_c
        The site's highest ambient in degC; None: the area's.

    >>> from instruments.marking import read_marking
    >>> dust = Area(zone="21", cloud_ignition_c=420, layer_ignition_c=225, layer_mm=5)
    >>> marks = [read_marking(f"Ex tb IIIC T{t}°C Db").entries[0] for t in (135, 150, 200)]
    >>> [dust_surface(mark, dust).outcome for mark in marks]
    ['accepted', 'accepted', 'refused']
    """
    if entry.t_class_on_dust:
        return _unknown(
            f"{entry.temperature_text} on dust: no degrees are marked", "surface temperature of the marking"
        )
    site_max_c = area.ambient_max_c if ambient_max_c is None else ambient_max_c
    if not entry.temperatures:
        return _unknown("the marking has no surface temperature", "surface temperature of the marking")
    marked = entry.max_surface_c_at(site_max_c)
    if marked is None:
        return _refused(f"{entry.temperature_text}: nothing is marked for an ambient of {site_max_c:g} degC")
    permitted = permitted_dust_surface_c(area)
    bound = permitted.limit_c if permitted.limit_c is not None else permitted.upper_bound_c
    if bound is not None and marked > bound:
        return _refused(f"{marked:g} degC marked, at most {bound:.4g} permitted: {permitted.working}")
    if permitted.limit_c is None:
        return _unknown(permitted.reason, *permitted.missing) if permitted.missing else _review(permitted.reason)
    return _accepted(
        f"{marked:g} degC marked, {permitted.limit_c:.4g} permitted: {permitted.working}",
        *permitted.assumptions,
    )


# Ambient --------------------------------------------------------------------------------------------------


def ambient(entry: MarkingEntry, *, area_min_c: float | None, area_max_c: float | None) -> Acceptance:
    """Say whether a marking covers the site's ambient range, both ends included.

    A silent mark means -20..+40 degC (IEC 60079-0:2017 5.1.1, from memory); a silent division mark at most
    +40, and its lower end stays unknown (NEC Article 500, from memory).

    Parameters
    ----------
    entry
        One marking.
    area_min_c, area_max_c
        The site's ambient in degC; a blank is never acceptance.

    >>> from instruments.marking import read_marking
    >>> mark = read_marking("Ex ia IIC T4 Ga").entries[0]
    >>> [ambient(mark, area_min_c=-20, area_max_c=high).outcome for high in (40, 50, None)]
    ['accepted', 'refused', 'unknown']
    """
    low, high = entry.ambient_min_c, entry.ambient_max_c
    source = "marked" if entry.ambient_source == "marked" else "by default, the mark being silent"
    covers = f"{'?' if low is None else f'{low:g}'}..{high:g} degC {source}"
    if area_max_c is not None and area_max_c > high:
        return _refused(f"ambient up to {area_max_c:g} degC, the marking covers {covers}")
    if area_min_c is not None and low is not None and area_min_c < low:
        return _refused(f"ambient down to {area_min_c:g} degC, the marking covers {covers}")
    blank = [name for name, value in (("ambient min", area_min_c), ("ambient max", area_max_c)) if value is None]
    if blank:
        return _unknown(f"the area has no {' and no '.join(blank)}", *blank)
    if low is None:
        return _unknown(
            f"up to {high:g} degC is covered; the division mark states no minimum",
            "ambient min of the marking",
        )
    return _accepted(f"ambient {area_min_c:g}..{area_max_c:g} degC, the marking covers {covers}")


# Divisions ------------------------------------------------------------------------------------------------

# Class and division accept these divisions and zones (NEC 501.5; 502.6 and 503.6 from memory). Division 1
# equipment, and a mark without division, serves Division 2 of its class (NEC 500.8(A)(2)).
DIVISION_ACCEPTS: Final[Mapping[tuple[str, str], frozenset[tuple[str, str] | str]]] = MappingProxyType(
    {
        ("I", "1"): frozenset({("I", "1"), "0"}),
        ("I", "2"): frozenset({("I", "1"), ("I", "2"), "0", "1", "2"}),
        ("II", "1"): frozenset({("II", "1"), "20"}),
        ("II", "2"): frozenset({("II", "1"), ("II", "2"), "20", "21", "22"}),
        ("III", "1"): frozenset({("III", "1")}),
        ("III", "2"): frozenset({("III", "1"), ("III", "2")}),
    }
)
# Zones accept these divisions by exception (NEC 505.20 and 506.20, from memory).
ZONE_ACCEPTS_DIVISION: Final[Mapping[str, frozenset[tuple[str, str]]]] = MappingProxyType(
    {
        "0": frozenset(),
        "1": frozenset({("I", "1")}),
        "2": frozenset({("I", "1"), ("I", "2")}),
        "20": frozenset(),
        "21": frozenset({("II", "1")}),
        "22": frozenset({("II", "1"), ("II", "2")}),
    }
)
# ... and these only as intrinsically safe apparatus listed for that class and Division 1 (same articles).
ZONE_ACCEPTS_INTRINSICALLY_SAFE: Final[Mapping[str, tuple[str, str]]] = MappingProxyType(
    {"0": ("I", "1"), "20": ("II", "1")}
)
ZONE_ACCEPTS_ZONE: Final[Mapping[str, frozenset[str]]] = MappingProxyType(
    {
        "0": frozenset({"0"}),
        "1": frozenset({"0", "1"}),
        "2": frozenset({"0", "1", "2"}),
        "20": frozenset({"20"}),
        "21": frozenset({"20", "21"}),
        "22": frozenset({"20", "21", "22"}),
    }
)
ZONE_OF_EPL: Final[Mapping[str, str]] = MappingProxyType(
    {"Ga": "0", "Gb": "1", "Gc": "2", "Da": "20", "Db": "21", "Dc": "22"}
)


def crosses_systems(entry: MarkingEntry, area: Area) -> bool:
    """True where a division mark stands in a zone, or a zone mark in a division."""
    return area.system in ("zone", "division") and entry.is_division != (area.system == "division")


def division_location(
    entry: MarkingEntry,
    area: Area,
    *,
    jurisdiction: str | None = "US",
    side: AreaSide | None = None,
    intrinsically_safe: bool | None = None,
) -> Acceptance:
    """Say whether a division or zone accepts a mark of either system (NEC 501.5, 502.6, 505.20, 506.20).

    Parameters
    ----------
    entry
        One marking. Zone marks need AEx: a plain Ex that would fit is left to a person, one that would not
        is refused.
    area
        The place, with the spellings of `instruments.area.understood`.
    jurisdiction
        US or Canada. For Canada no table is held: crossing systems is left to a person. Elsewhere the tables
        say nothing.
    side
        Gas or dust; None: the area's, where it has both the marking's.
    intrinsically_safe
        Of a division mark: recorded as intrinsically safe and listed for Class I Division 1 (True), as
        something else (False), or not recorded (None).

    >>> from instruments.marking import read_marking
    >>> def told(mark, **area): return division_location(read_marking(mark).entries[0], Area(**area)).outcome
    >>> told("Class I, Zone 1, AEx db IIC T4 Gb", system="division", class_="I", division="1")
    'refused'
    >>> told("Class I Div 2 Gp ABCD T4", system="zone", zone="2")
    'accepted'
    """
    if area.system == "none":
        return _accepted("the area is unclassified")
    crossing = crosses_systems(entry, area)
    if crossing and jurisdiction == "Canada":
        return _review("division against zone in Canada, for which no table is held")
    if crossing and jurisdiction != "US":
        return _unknown("division against zone: there is no table outside North America", "jurisdiction")
    asked = side or _side_asked(entry, area)
    if area.system == "division":
        return _in_division(entry, area, asked)
    zone = area.gas_zone if asked == "gas" else area.dust_zone
    if zone is None:
        return _unknown("no zone is stated", "zone")
    if entry.is_division:
        return _division_in_zone(entry, zone, intrinsically_safe)
    marked = zone_marked(entry)
    if marked is None:
        return _unknown("the marking has neither zone nor EPL", "EPL")
    said = f"marked for Zone {marked}, in Zone {zone}"
    return _accepted(said) if marked in ZONE_ACCEPTS_ZONE[zone] else _refused(said)


def _side_asked(entry: MarkingEntry, area: Area) -> AreaSide:
    sides = area.sides
    return sides[0] if len(sides) == 1 else "dust" if entry.side == "dust" else "gas"


def zone_marked(entry: MarkingEntry) -> str | None:
    """Return the zone that a mark is for: as written before AEx, or as its EPL says; the weaker of both."""
    by_epl = ZONE_OF_EPL.get(entry.epl or "")
    if entry.zone is None or by_epl is None or entry.zone not in ZONE_ACCEPTS_ZONE:
        return entry.zone or by_epl
    return by_epl if entry.zone in ZONE_ACCEPTS_ZONE[by_epl] else entry.zone


def _in_division(entry: MarkingEntry, area: Area, side: AreaSide) -> Acceptance:
    classes = [class_ for class_ in area.classes if (class_ == "I") == (side == "gas")]
    if not area.division or not area.classes:
        blank = [name for name, value in (("class", area.class_), ("division", area.division)) if not value]
        return _unknown(f"the area has no {' and no '.join(blank)}", *blank)
    if not classes:
        return _refused(f"{_mark_text(entry)} in Class {area.class_} Div {area.division}")
    class_ = entry.class_ if entry.class_ in classes else classes[0]
    accepts = DIVISION_ACCEPTS.get((class_ or "", area.division))
    if accepts is None:
        return _unknown(f"cannot read Class {area.class_} Division {area.division}", "class", "division")
    said = f"{_mark_text(entry)} in Class {class_} Div {area.division}"
    if entry.is_division:
        return _accepted(said) if (entry.class_, entry.division or "1") in accepts else _refused(said)
    marked = zone_marked(entry)
    if marked is None:
        return _unknown("the marking has neither zone nor EPL", "EPL")
    if class_ == "III":
        return _review(f"{said}: the table has no zone marks for Class III")
    if marked not in accepts:
        return _refused(said)
    if entry.prefix != "AEx":
        return _review(f"{said}: a plain {entry.prefix or 'ATEX category'} is no listing for the US")
    return _accepted(said)


def _mark_text(entry: MarkingEntry) -> str:
    if entry.is_division:
        return division_text(entry)
    zone = zone_marked(entry)
    text = f"{entry.prefix} {' '.join(entry.protections)}".strip()
    return f"{text} for Zone {zone}" if zone else text


def _division_in_zone(entry: MarkingEntry, zone: str, intrinsically_safe: bool | None) -> Acceptance:
    place = (entry.class_ or "", entry.division or "1")
    said = f"{division_text(entry)} in Zone {zone}"
    if place in ZONE_ACCEPTS_DIVISION.get(zone, ()):
        return _accepted(said)
    if place != ZONE_ACCEPTS_INTRINSICALLY_SAFE.get(zone):
        return _refused(said)
    if intrinsically_safe is None and entry.division_protection is not None:
        intrinsically_safe = entry.division_protection == "intrinsically safe"
    if intrinsically_safe is None:
        return _review(f"{said}: accepted only as intrinsically safe apparatus, which is not recorded")
    if intrinsically_safe:
        return _accepted(f"{said}, as intrinsically safe apparatus listed for {division_text(entry)}")
    return _refused(f"{said}: accepted only as intrinsically safe apparatus")


def translated_group(
    entry: MarkingEntry,
    area: Area,
    *,
    side: AreaSide | None = None,
    gas: str | None = None,
    iec_group: str | None = None,
    nec_group: str | None = None,
) -> Acceptance:
    """Say whether a group of one system covers what an area asks in the other.

    NEC 505.6 and 506.6 (from memory). The boundaries differ: NEC C ends at an MESG of 0.75 mm and IIB at
    0.90; B ends at 0.45 and IIC at 0.50. So only the sound directions are accepted without a named gas: IIC
    for A to D, IIB for D, group C in a IIB area, D in a IIA area, A and B together in a IIC area.

    Parameters
    ----------
    entry
        One marking of the other system.
    area
        The place.
    side
        Gas or dust; None: the area's, where it has both the marking's.
    gas
        The gas that the area names; None: the area's own text.
    iec_group, nec_group
        The named gas's groups in either system, where the caller knows them.

    >>> from instruments.marking import read_marking
    >>> needs_d = Area(system="division", class_="I", division="2", gas_group="D")
    >>> marks = [read_marking(f"AEx db {group} T3 Gb").entries[0] for group in ("IIC", "IIB", "IIA")]
    >>> [translated_group(mark, needs_d).outcome for mark in marks]
    ['accepted', 'accepted', 'review']
    """
    asked = side or _side_asked(entry, area)
    said = gases_in(gas or area.gas)
    alone = said.names[0] if len(said.names) == 1 and not said.vague else ""
    # What it is when all are known and no amount of one is left to be weighed.
    names = [] if said.vague or said.amounts else [name for name in said.names if name not in INERT]
    if entry.is_division:
        if asked == "dust":
            return _letters_for_dust(entry, area.dust_group)
        known = nec_group or GAS_NEC_GROUP.get(alone)
        plain = _letters_for_gas(entry, area.gas_group, known, alone)
        remembered = None if known or not names else nec_group_of(names)
        if remembered is None:
            return plain
        return _with_memory(plain, _letters_for_gas(entry, area.gas_group, remembered, alone), names, remembered)
    if entry.group_contradicts_epl:
        return _unknown(f"group {entry.group_text} contradicts EPL {entry.epl_text}", "group of the marking")
    if asked == "dust":
        wanted = [x for x in group_letters(area.dust_group) if x in "EFG"]
        wanted = wanted or (["III"] if "III" in area.classes else [])
        return _worst([_dust_for_letter(entry, x) for x in wanted]) if wanted else _no_letter()
    wanted = [letter for letter in group_letters(area.gas_group) if letter in "ABCD"]
    if not wanted:
        return _no_letter()

    def judged(group: str | None) -> Acceptance:
        return _worst([_gas_for_letter(entry, letter, group, gas or area.gas) for letter in wanted])

    known = iec_group or GAS_IEC_GROUP.get(alone)
    plain = judged(known)
    remembered = None if known or not names else iec_group_of(names)
    return plain if remembered is None else _with_memory(plain, judged(remembered), names, remembered)


def _with_memory(plain: Acceptance, named: Acceptance, names: list[str], group: str) -> Acceptance:
    """Return what a named gas's group makes of a translation: it may refuse or settle a review, never overrule."""
    source = f"{' and '.join(names)}: group {group}, from memory"
    if plain.outcome == "unknown" or named.outcome == plain.outcome:
        return plain
    if named.outcome == "accepted" and plain.outcome == "review":
        return _accepted(named.reason, source)
    if named.outcome == "accepted":
        return _review(f"{plain.reason}; {source}")
    return Acceptance(outcome=named.outcome, reason=f"{named.reason} ({source})", missing=named.missing)


def _no_letter() -> Acceptance:
    return _unknown("the area has no group letter", "group")


def _letters_for_gas(entry: MarkingEntry, area_group: str | None, nec_group: str | None, gas: str) -> Acceptance:
    marked = set(entry.groups)
    if not marked:
        return _unknown("the marking has no group letter", "group of the marking")
    if nec_group:
        return division_group(marked, nec_group)
    if gas == "carbon disulfide":
        return _review("carbon disulfide has no group letter in the NEC")
    said = f"groups {', '.join(sorted(marked))} for area {area_group}"
    if area_group == "IIC":
        if {"A", "B"} <= marked:
            return _accepted(said)
        return _review(f"{said}: the gas is not named") if marked & {"A", "B"} else _refused(said)
    needed = {"IIA": {"D"}, "IIB": {"C"}, "IIB+H2": {"B", "C"}}.get(area_group or "")
    if needed is None:
        return _unknown("the area has no gas group", "gas group")
    return _accepted(said) if needed <= marked else _refused(f"{said}, {' and '.join(sorted(needed))} needed")


def _letters_for_dust(entry: MarkingEntry, area_group: str | None) -> Acceptance:
    marked = set(entry.groups)
    said = f"{division_text(entry)} groups {', '.join(sorted(marked))} for dust {area_group}"
    if area_group == "IIIA":
        return _accepted(said) if entry.class_ == "III" else _refused(f"{said}, Class III needed")
    needed = {"IIIB": "G", "IIIC": "E"}.get(area_group or "")
    if needed is None:
        return _unknown("the area has no dust group", "dust group")
    if needed in marked:
        return _accepted(said)
    # F is carbonaceous dust: IIIB or IIIC by its resistivity.
    return _review(f"{said}: group F depends on the dust's resistivity") if "F" in marked else _refused(said)


def _gas_for_letter(entry: MarkingEntry, letter: str, iec_group: str | None, gas: str | None) -> Acceptance:
    said = f"{entry.group_text} for group {letter}"
    if entry.gas_only or iec_group:
        found = gas_group(entry, iec_group or "IIC", gas=gas)
        return Acceptance(outcome=found.outcome, reason=f"{said}: {found.reason}", missing=found.missing)
    if entry.group in ("IIC", "II"):
        return gas_group(entry, "IIC", gas=gas)
    if entry.group == "IIB":
        if letter == "D":
            return _accepted(said)
        if letter == "C":
            return _review(f"{said}: the gas is not named, and IIB ends short of group C")
        if letter == "B" and entry.gas_extra:
            return gas_group(entry, "IIC", gas=gas)
    if entry.group == "IIA" and letter == "D":
        return _review(f"{said}: the gas is not named, and group D reaches into IIB")
    return _refused(said)


def _dust_for_letter(entry: MarkingEntry, letter: str) -> Acceptance:
    found = dust_group(entry, {"E": "IIIC", "F": "IIIC", "G": "IIIB", "III": "IIIA"}[letter])
    reason = f"{entry.group_text} for {'Class III' if letter == 'III' else f'group {letter}'}"
    if letter == "F" and found.outcome == "refused" and entry.group == "IIIB":
        return _review(f"{reason}: group F depends on the dust's resistivity")
    return Acceptance(outcome=found.outcome, reason=reason, missing=found.missing)


# Schemes --------------------------------------------------------------------------------------------------


def scheme_as_evidence(entry: MarkingEntry, jurisdiction: str | None) -> Acceptance:
    """Say whether a marking's scheme is evidence where a jurisdiction's rules hold; at most a review.

    The US take divisions and AEx (NEC 500.8(A) and 505.9(C)), Canada divisions and Ex without a category (CSA
    C22.1 section 18), the EU and the IEC's members Ex; a dust category alone is the EU's (all from memory).

    >>> from instruments.marking import read_marking
    >>> texts = ("Ex ia IIC T4 Ga", "AEx ia IIC T4 Ga", "Class I Div 1 Group D T4")
    >>> marks = [read_marking(text).entries[0] for text in texts]
    >>> [[scheme_as_evidence(mark, where).outcome for mark in marks] for where in ("IEC", "US")]
    [['accepted', 'review', 'review'], ['review', 'accepted', 'accepted']]
    """
    if jurisdiction is None:
        return _unknown("no jurisdiction is stated", "jurisdiction")
    evidence: tuple[str, ...]
    if entry.is_division:
        scheme, evidence = "a mark by class and division", ("US", "Canada")
    elif entry.scheme == "atex only":
        scheme, evidence = "an ATEX category", ("ATEX",)
    elif entry.prefix == "AEx":
        scheme, evidence = "an AEx mark", ("US",)
    elif entry.categories:
        scheme, evidence = f"an {entry.prefix} mark with an ATEX category", ("ATEX", "IEC")
    elif entry.prefix == "EEx":
        scheme, evidence = "an EEx mark", ("ATEX", "IEC")
    else:
        scheme, evidence = "a plain Ex mark", ("ATEX", "IEC", "Canada")
    if jurisdiction in evidence:
        return _accepted(f"{scheme} under {jurisdiction}")
    rules = {"US": "the US", "IEC": "the IEC's standards", "ATEX": "the ATEX directive"}.get(jurisdiction, jurisdiction)
    return _review(f"{scheme} is no evidence by itself under the rules of {rules}")


# Certificates ---------------------------------------------------------------------------------------------


def certificate_suffix(certificates: Iterable[Certificate], *, conditions_accepted: str | None) -> Acceptance:
    """Say what the suffixes of a tag's certificates ask for (IEC 60079-0:2017 clause 29, from memory).

    Parameters
    ----------
    certificates
        All the evidence for one tag.
    conditions_accepted
        Who recorded, and when, that the specific conditions of use (X) are met.

    >>> from instruments.certificate import read_certificates
    >>> certificate_suffix(read_certificates("ABC 20 ATEX 0001 U"), conditions_accepted=None).outcome
    'refused'
    """
    evidence = tuple(certificates)
    if not evidence:
        return _unknown("no certificate number", "certificate")
    complete = [certificate for certificate in evidence if certificate.suffix != "U"]
    if not complete:
        return _refused(f"{', '.join(map(str, evidence))}: an Ex component is the only evidence")
    conditional = [str(certificate) for certificate in complete if certificate.suffix == "X"]
    if conditional and not is_recorded(conditions_accepted):
        return _review(f"{', '.join(conditional)}: nobody has recorded that the conditions of use are met")
    return _accepted(", ".join(map(str, complete)))


# The whole ------------------------------------------------------------------------------------------------


def best_entry(
    marking: Marking,
    area: Area,
    *,
    side: AreaSide,
    jurisdiction: str | None = None,
    process_zone: str | None = None,
    intrinsically_safe: bool | None = None,
) -> MarkingEntry | None:
    """Return the one marking of a text that fits an area best; the rules then all speak of this one.

    One marking must fit as a whole: the EPL of one and the temperature of another prove nothing. None where
    the text has no marking for the equipment's own place.

    Parameters
    ----------
    marking
        All that the text holds.
    area, side
        The place, and which of its atmospheres is asked for.
    jurisdiction, process_zone, intrinsically_safe
        As for `division_location` and `entry_in_zone`.
    """
    entries = marking.standing()
    if not entries:
        return None
    weights = {"accepted": 0, "review": 1, "unknown": 1, "refused": 10}

    def doubt(entry: MarkingEntry) -> int:
        found: list[Acceptance] = []
        if entry.is_division or area.system == "division":
            found.append(
                division_location(
                    entry, area, jurisdiction=jurisdiction, side=side, intrinsically_safe=intrinsically_safe
                )
            )
            if crosses_systems(entry, area):
                found.append(translated_group(entry, area, side=side))
            else:
                found.append(division_group(entry.groups, area.dust_group if side == "dust" else area.gas_group))
        elif side == "gas":
            found += [
                entry_in_zone(entry, area, side=side, process_zone=process_zone),
                gas_group(entry, area.gas_group, gas=area.gas),
            ]
        else:
            found += [
                entry_in_zone(entry, area, side=side, process_zone=process_zone),
                dust_group(entry, area.dust_group),
                dust_surface(entry, area),
            ]
        if side == "gas" or area.system == "division":
            found.append(
                temperature(
                    entry,
                    area.temperature_class,
                    ambient_max_c=area.ambient_max_c,
                    ambient_min_c=area.ambient_min_c,
                )
            )
        found.append(ambient(entry, area_min_c=area.ambient_min_c, area_max_c=area.ambient_max_c))
        if jurisdiction is not None:
            found.append(scheme_as_evidence(entry, jurisdiction))
        outside = crosses_systems(entry, area) and jurisdiction not in ("US", "Canada")
        wrong_side = entry.side is not None and entry.side != side
        return sum(weights[each.outcome] for each in found) + 20 * outside + 40 * wrong_side

    return min(entries, key=doubt)
