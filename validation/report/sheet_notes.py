"""What a loop's sheet says of the audit: the open findings and reviews of what stands on it, in plain words."""

from __future__ import annotations

from collections import defaultdict

from loops.plant import Plant, name_key
from loops.sheet.pack import sheets_of
from validation.audit import Audit
from validation.finding import Finding, Outcome

__all__ = ["notes_by_loop"]


def notes_by_loop(result: Audit) -> dict[str, list[str]]:
    """Return the notes for each loop that has a sheet, by the loop's name; the worst first.

    A finding stands on the sheet of every loop that its subject is part of: the instrument, the
    circuit, the loop, or each member of a group. What is wrong with the whole list, an area or a
    certificate stands in the exception list alone. After the findings comes what could not be
    checked for want of data: no sheet may look as if it had passed a check that was never made.
    """
    place = _places(result.plant)
    notes: dict[str, list[str]] = {loop.name: [] for loop in sheets_of(result.plant).drawn}
    for finding in result.findings:
        for loop in _loops_of(finding.subject, place):
            notes[loop].append(_note(finding))
    for loop, (count, fields) in _unchecked(result, place).items():
        checks = "1 check" if count == 1 else f"{count} checks"
        notes[loop].append(f"not checked: {checks}, for want of {', '.join(fields)}")
    return notes


def _note(finding: Finding) -> str:
    what = "review" if finding.outcome is Outcome.REVIEW else finding.severity.value.upper()
    part = f" ({finding.part})" if finding.part and finding.part not in finding.message else ""
    text = f"{what} {finding.rule} {finding.subject}{part}: {finding.message}"
    if finding.working and finding.working not in text:
        text = f"{text} [{finding.working}]"
    return text


def _places(plant: Plant) -> dict[str, tuple[str, ...]]:
    """Return the sheets on which a subject stands, by the subject's name.

    Rows that share a tag are numbered, PT-1 (2), but a group names the tag once: it means them all.
    """
    found: dict[str, dict[str, None]] = defaultdict(dict)
    for loop in sheets_of(plant).drawn:
        for name in (
            loop.name,
            *(circuit.name for circuit in loop.circuits),
            *(each.name for each in loop.members),
            *(each.record.tag for each in loop.members if each.record.tag),
        ):
            found[name_key(name)][loop.name] = None
    return {name: tuple(loops) for name, loops in found.items()}


def _loops_of(subject: str, place: dict[str, tuple[str, ...]]) -> tuple[str, ...]:
    whole = place.get(name_key(subject))
    if whole is not None:
        return whole
    parts = (place.get(name_key(part), ()) for part in subject.split(", "))
    return tuple(dict.fromkeys(loop for loops in parts for loop in loops))


def _unchecked(result: Audit, place: dict[str, tuple[str, ...]]) -> dict[str, tuple[int, list[str]]]:
    """Return how many checks of each loop could not be made, and which values they wanted."""
    counts: dict[str, int] = defaultdict(int)
    fields: dict[str, dict[str, None]] = defaultdict(dict)
    for coverage in result.coverage.values():
        for wanted, subjects in coverage.unchecked.items():
            for subject in subjects:
                for loop in _loops_of(subject, place):
                    counts[loop] += 1
                    fields[loop].update(dict.fromkeys(wanted))
    return {loop: (count, list(fields[loop])) for loop, count in counts.items()}
