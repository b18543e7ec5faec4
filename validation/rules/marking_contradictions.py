"""HAZ14: markings that contradict themselves."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Mapping

from instruments.installed import Installed
from instruments.marking import Marking
from instruments.protection import marking_of
from loops.plant import Plant
from validation.finding import Found, Severity, Unchecked, Verdict
from validation.hazardous_place import is_marked_in_area, marking_field
from validation.rule import Subject, rule


def _by_kind(marking: Marking, plant: Plant) -> Mapping[str, list[str]]:
    """Return the contradictions of a marking by their kind; worked out once for all that bear it."""
    known: dict[str, Mapping[str, list[str]]] = plant.once("contradictions of markings", _none_yet)
    if marking.text not in known:
        found: dict[str, list[str]] = defaultdict(list)
        for each in marking.contradictions:
            found[each.kind].append(each.text)
        known[marking.text] = found
    return known[marking.text]


def _none_yet(plant: Plant) -> dict[str, Mapping[str, list[str]]]:
    return {}


@rule(
    "HAZ14",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=is_marked_in_area,
    message="the marking contradicts itself: {what}: {marking}",
    basis="IEC 60079-0:2017 29 and 5.3.2, 2014/34/EU Annex I and II 1.0.5, NEC 500.6 (from memory)",
)
def contradictory_marking(installed: Installed, plant: Plant) -> Verdict:
    """A marking that contradicts itself.

    Why it matters: one of its parts is wrong, and nobody can tell from the record which. The EPL decides; what
    contradicts it is not checked.

    What to do: copy the marking from the plate once more, and compare it with the certificate: category and EPL,
    group and EPL, EPL and type of protection, degrees instead of a T class for dust.

    >>> from validation.example import said
    >>> row = {"tag": "JB-1", "area classification": "Zone 1 IIB T3", "Ex marking": "II 1 G Ex db IIC T6 Gb"}
    >>> said("HAZ14", [row])
    ['JB-1: the marking contradicts itself: category II 1 G with EPL Gb: II 1 G Ex db IIC T6 Gb']
    >>> said("HAZ14", [{**row, "Ex marking": "II 2 G Ex db IIC T6 Gb"}])
    []
    """
    marking = marking_of(installed)
    if marking is None or not marking.readable:
        return Unchecked("Ex marking")
    by_kind = _by_kind(marking, plant)
    if not by_kind:
        return None
    own = marking_field(installed)
    cells = installed.record.cells("device_type") if own == "type.ex_marking" else ()
    return [
        Found(
            values={"what": "; ".join(texts), "marking": marking.text},
            fields=(own,),
            part=kind,
            found="; ".join(texts),
            wanted="a marking whose parts fit each other",
            cells=cells,
        )
        for kind, texts in by_kind.items()
    ]
