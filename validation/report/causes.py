"""Causes: findings that one mistake made, so that a thousand equal ones read as one with a count."""

from __future__ import annotations

import re
import string
from collections import Counter
from collections.abc import Callable, Hashable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Final

from instruments.origin import Cell
from instruments.tag import natural_key
from validation.finding import Finding, Outcome, Severity

__all__ = ["SHOWN", "Cause", "causes_of", "some_of"]

SHOWN: Final = 10
"""Names that are shown of a cause's subjects; all of them stand in the list of findings."""

WORTH_A_SPLIT: Final = 3
"""Findings that each part must hold on average before a limit or a value counts as a cause of its own."""

_LISTED: Final = 3
_LONGEST_LISTED: Final = 60
_LONGEST_NAME: Final = 50
_SAYS_ENOUGH: Final = 5
_WORD: Final = re.compile(r"[^\W\d_]+")
_LEFT_OPEN: Final = re.compile(r"\[[^\]]*\]")
# A number and its unit, no second number: '10.488 V' and '2.5 mm2', but neither '4-20 mA' nor '0 to 6 bar'.
_MEASURE: Final = re.compile(r"([-+]?\d{1,15}(?:\.\d{1,15})?(?:e[-+]?\d{1,3})?)(%|(?: [^\s\d]\S{0,20}){0,3})")


@dataclass(frozen=True, slots=True, kw_only=True)
class Cause:
    """Findings, or reviews, of one rule that say the same.

    Attributes
    ----------
    text
        What is wrong: the message with the values that all of them share; what differs is shown as a
        range, as a few alternatives, or by its name in square brackets. Where that leaves nearly
        nothing, the first message as an example.
    count
        The number of findings.
    subjects
        Their subjects, each once, in the order of the findings.
    fields
        The fields that disagree.
    found, wanted, off_by
        As in the findings: the shared value, a range or alternatives; blank where nothing is shared.
    fixes
        What each of the findings is told to do.
    cells
        The cells that each of the findings came from: one device type's limit, one area's zone.
    """

    rule: str
    severity: Severity
    outcome: Outcome
    text: str
    count: int
    subjects: tuple[str, ...]
    fields: tuple[str, ...] = ()
    found: str = ""
    wanted: str = ""
    off_by: str = ""
    fixes: tuple[str, ...] = ()
    cells: tuple[Cell, ...] = ()


def causes_of(findings: Iterable[Finding]) -> tuple[Cause, ...]:
    """Put findings together by cause, the most common first.

    Findings with the same rule, outcome, message template and fields belong together. Where they do not
    all say the same, they are told apart by what was found and wanted, then by the cells that several of
    them share (each device type's limit is a cause of its own), if each part then holds three or more on
    average: values that differ nearly every time, such as computed volts, tell nothing apart.
    """
    alike: dict[Hashable, list[Finding]] = {}
    for finding in findings:
        key = (
            finding.rule,
            finding.outcome,
            finding.severity,
            finding.cause or finding.message,
            finding.fields,
        )
        alike.setdefault(key, []).append(finding)
    found = [_cause(part) for group in alike.values() for part in _split(group, _WAYS)]
    found.sort(key=_order)
    return tuple(found)


def some_of(names: Sequence[str], *, most: int = SHOWN, between: str = "; ") -> str:
    """Return the first names, and how many more there are; a group's long name is cut between two tags.

    >>> some_of(["PT-1", "PT-2", "PT-3"]), some_of(["PT-1", "PT-2", "PT-3"], most=2)
    ('PT-1; PT-2; PT-3', 'PT-1; PT-2 and 1 more')
    """
    shown = between.join(_short(name) for name in names[:most])
    more = len(names) - most
    return f"{shown} and {more} more" if more > 0 else shown


def _short(name: str) -> str:
    if len(name) <= _LONGEST_NAME:
        return name
    tags = name.split(", ")
    kept: list[str] = []
    room = _LONGEST_NAME
    for tag in tags:
        if len(tag) + 2 > room:
            break
        kept.append(tag)
        room -= len(tag) + 2
    if not kept:
        return f"{name[:_LONGEST_NAME]}..."
    return f"{', '.join(kept)} (and {len(tags) - len(kept)} more)"


def _order(cause: Cause) -> tuple[Any, ...]:
    return (
        -cause.count,
        cause.outcome is Outcome.REVIEW,
        cause.severity.rank,
        cause.rule,
        cause.text,
        [natural_key(name) for name in cause.subjects[:1]],
        cause.fields,
        cause.cells,
    )


# --- what tells causes apart --------------------------------------------------------------------------------

_Way = Callable[[Sequence[Finding]], Callable[[Finding], Hashable]]


def _by_shared_cells(group: Sequence[Finding]) -> Callable[[Finding], Hashable]:
    shared = {cell for cell, times in Counter(cell for each in group for cell in each.cells).items() if times > 1}
    return lambda finding: frozenset(cell for cell in finding.cells if cell in shared)


def _by_found_and_wanted(group: Sequence[Finding]) -> Callable[[Finding], Hashable]:
    return lambda finding: (finding.found, finding.wanted)


def _by_wanted(group: Sequence[Finding]) -> Callable[[Finding], Hashable]:
    return lambda finding: finding.wanted


def _by_found(group: Sequence[Finding]) -> Callable[[Finding], Hashable]:
    return lambda finding: finding.found


_WAYS: Final[tuple[_Way, ...]] = (_by_found_and_wanted, _by_wanted, _by_shared_cells, _by_found)


def _split(group: list[Finding], ways: tuple[_Way, ...]) -> list[list[Finding]]:
    if not ways or len(group) < 2 * WORTH_A_SPLIT or len({finding.message for finding in group}) == 1:
        return [group]
    key = ways[0](group)
    if len({key(finding) for finding in group}) * WORTH_A_SPLIT > len(group):
        return _split(group, ways[1:])
    parts: dict[Hashable, list[Finding]] = {}
    for finding in group:
        parts.setdefault(key(finding), []).append(finding)
    return [small for part in parts.values() for small in _split(part, ways[1:])]


# --- what they have in common -------------------------------------------------------------------------------


def _cause(group: Sequence[Finding]) -> Cause:
    first = group[0]
    cells = list(first.cells)
    fixes = [fix.text for fix in first.fixes]
    for finding in group[1:]:
        if cells:
            theirs = frozenset(finding.cells)
            cells = [cell for cell in cells if cell in theirs]
        if fixes:
            texts = frozenset(fix.text for fix in finding.fixes)
            fixes = [text for text in fixes if text in texts]
    return Cause(
        rule=first.rule,
        severity=first.severity,
        outcome=first.outcome,
        text=_text(group),
        count=len(group),
        subjects=tuple(dict.fromkeys(finding.subject for finding in group)),
        fields=first.fields,
        found=_in_common([finding.found for finding in group]) or "",
        wanted=_in_common([finding.wanted for finding in group]) or "",
        off_by=_in_common([finding.off_by for finding in group]) or "",
        fixes=tuple(fixes),
        cells=tuple(cells),
    )


def _text(group: Sequence[Finding]) -> str:
    messages = {finding.message for finding in group}
    if len(messages) == 1:
        return group[0].message
    try:
        pieces = list(_filled(group))
    except (ValueError, LookupError, AttributeError, TypeError):
        # A template that its own values do not fit: the first message is at least true of one of them.
        return group[0].message
    left_open = any(_LEFT_OPEN.fullmatch(piece) for piece in pieces)
    said = " ".join(literal for literal, *_ in string.Formatter().parse(group[0].cause))
    if left_open and len(_WORD.findall(said)) < _SAYS_ENOUGH:
        return f"such as: {group[0].message}"
    return "".join(pieces)


def _filled(group: Sequence[Finding]) -> Iterable[str]:
    formatter = string.Formatter()
    for literal, name, spec, conversion in formatter.parse(group[0].cause):
        yield literal
        if name is None:
            continue
        said: list[str] = []
        for finding in group:
            values: Mapping[str, Any] = finding.values
            value, _ = formatter.get_field(name, (), values)
            said.append(format(formatter.convert_field(value, conversion), spec or ""))
        together = _in_common(said)
        yield f"[{name.replace('_', ' ')}]" if together is None else together


def _in_common(texts: Sequence[str]) -> str | None:
    """Return the one text, a range of measures or a few alternatives; None where nothing is shared."""
    different = set(texts)
    if len(different) == 1:
        return texts[0]
    measures = [_MEASURE.fullmatch(text) for text in different]
    units = {measure[2] if measure is not None else None for measure in measures}
    if len(units) == 1 and None not in units:
        ends = sorted((float(measure[1]), measure[1]) for measure in measures if measure is not None)
        return f"{ends[0][1]} to {ends[-1][1]}{units.pop()}"
    # Alternatives only where each is said by two or more: two tags of two findings have nothing in common.
    few = len(different) <= _LISTED and len(different) * 2 <= len(texts)
    if few and all(0 < len(text) <= _LONGEST_LISTED for text in different):
        return " or ".join(sorted(different, key=natural_key))
    return None
