"""HAZ17: whether an area's temperature class and group are enough for the gas that it names.

Ferrule classifies no area: it shows the published figures beside what the area's documents say.
"""

from __future__ import annotations

from dataclasses import replace

from instruments.area import Area
from instruments.area_gas import FROM_MEMORY, GasAsks, asked_in, named_in
from loops.plant import AreaInPlant, Plant, name_key
from validation.finding import Clear, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.hazardous_place import first_cell, jurisdiction_of, place
from validation.rule import Subject, rule, title_of


def _may_name_a_gas(subject: AreaInPlant, plant: Plant) -> bool:
    area = subject.record
    return "gas" in area.sides or (not area.classified and not area.unclassified)


@rule(
    "HAZ17",
    severity=Severity.DANGER,
    on=Subject.AREA,
    applies=_may_name_a_gas,
    message="{gas} asks for {asks}; {area} states {states}: {reason}",
    basis="IEC 60079-14:2013 5.6 with Table 4, NEC 500.8 (from memory); IEC 60079-20-1:2010 and NFPA 497 (2008) for "
    "auto-ignition temperatures; groups from memory",
)
def gas_asks_for_more(subject: AreaInPlant, plant: Plant) -> Verdict:
    """An area whose temperature class is too hot for the gas that it names.

    Why it matters: everything that stands there is chosen by that class, and the gas ignites on its surfaces.

    What to do: ask whoever classified the area; the area's documents outrank the figures shown. Under IEC and
    ATEX those of IEC 60079-20-1 count, in the US and Canada those of NFPA 497. Where the other source, or the
    gas's group, asks for more, a competent person decides. A mixture's name tells no composition, and nothing is
    cleared by it.

    >>> from validation.example import said
    >>> area = {"code": "10A", "zone": "1", "gas group": "IIB", "temperature class": "T2", "gas": "H2S",
    ...         "jurisdiction": "ATEX"}
    >>> row = [{"tag": "PT-1", "area": "10A"}]
    >>> said("HAZ17", row, areas=[area])[0][:79]
    '10A: hydrogen sulfide asks for T3; area 10A (Zone 1 IIB T2, H2S) states T2: 260'
    >>> said("HAZ17", row, areas=[{**area, "temperature class": "T3"}])
    []
    """
    area = subject.record
    if not area.from_row_cell and name_key(area.code) in plant.areas_twice:
        return Unchecked("area")
    if not area.classified:
        return Unchecked("area zone")
    named = named_in(area)
    if not named.gases:
        return Unchecked(title_of("area.gas")) if named.unknown or not area.gas else NotApplicable("no flammable gas")
    jurisdiction, assumed = jurisdiction_of(area, plant)
    asked = asked_in(area, named.gases, jurisdiction=jurisdiction)
    if not named.certain:
        asked = tuple(replace(each, outcome="review") if each.outcome == "refused" else each for each in asked)
    found = [_finding(each, area, plant, assumed=assumed) for each in asked if each.outcome in ("refused", "review")]
    if found:
        return found
    missing = {f"area {each.missing}" for each in asked if each.missing}
    if named.unknown:
        missing.add(title_of("area.gas"))
    if missing:
        return Unchecked(*sorted(missing))
    none_held = tuple(f"no group is held for {each.gas}" for each in asked if each.outcome == "unknown")
    return Clear((*assumed, FROM_MEMORY, *none_held))


def _finding(asked: GasAsks, area: Area, plant: Plant, *, assumed: tuple[str, ...]) -> Found:
    kind = Found if asked.outcome == "refused" else Review
    return kind(
        values={
            "gas": asked.gas,
            "asks": asked.asks,
            "area": place(area),
            "states": asked.states,
            "reason": asked.reason,
        },
        fields=(f"area.{asked.about}", "area.gas"),
        part=asked.gas,
        found=asked.states,
        wanted=f"{asked.asks}, or what the area's documents say",
        working=asked.reason,
        assumed=(*assumed, FROM_MEMORY) if asked.about == "gas_group" else assumed,
        cells=first_cell(area, plant),
    )
