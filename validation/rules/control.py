"""CTL: what controls, and what it falls back to."""

from __future__ import annotations

from instruments.installed import Installed
from instruments.kind import Kind
from loops.plant import Plant
from validation.finding import Found, Severity, Unchecked, Verdict
from validation.rule import Subject, rule

_DRIVEN = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})


def _is_driven_valve(installed: Installed, plant: Plant) -> bool:
    return (installed.kind is None or installed.kind in _DRIVEN) and not installed.equipment_tag


def _no_column(plant: Plant) -> Verdict:
    if plant.has_column("failure_position"):
        return None
    count = sum(1 for each in plant.live if each.kind in _DRIVEN and not each.equipment_tag)
    if not count:
        return None
    return Found(
        values={"count": "1 valve needs" if count == 1 else f"{count} valves need"},
        fields=("failure_position",),
        message="no sheet has a column for the failure position; {count} one",
        found="no such column",
        wanted="failure position",
    )


@rule(
    "CTL01",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_is_driven_valve,
    whole=_no_column,
    message="{kind} without a failure position",
    basis="ISA-5.4-1991: the fail position of a final element is shown (from memory)",
)
def no_failure_position(installed: Installed, plant: Plant) -> Verdict:
    """A control or on/off valve without a failure position.

    Why it matters: what the valve does without air or power is decided by its spring; nobody may
    guess it.

    What to do: state open, closed or in place.

    >>> from validation.example import said
    >>> said("CTL01", [{"tag": "FV-1", "failure position": ""}, {"tag": "FV-2", "failure position": "FC"}])
    ['FV-1: a control valve without a failure position']
    """
    record, kind = installed.record, installed.kind
    if kind is None:
        return Unchecked("kind")
    if record.failure_position is not None:
        return None
    if "failure_position" in record.unread:
        return Unchecked("failure position")
    reason = record.blanks.get("failure_position", "")
    return Found(
        values={"kind": kind.with_article},
        fields=("failure_position",),
        found=f"blank ({reason})" if reason else "blank",
        wanted="open, closed or in place",
    )
