"""A what-if in plain words: what was changed, the findings that appear and those that go."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from validation.finding import Finding, Outcome, Severity
from validation.what_if import WhatIf

MOST_LINES = 200
CAUTION = "screening aid - requires review by a competent person"


def what_if_lines(found: WhatIf) -> Iterator[str]:
    """Give the lines that say what a what-if comes to; each list ends after two hundred."""
    yield "what if:"
    for line in found.changed:
        yield f"  {line}"
    yield f"findings that appear: {_counts(found.appear)}"
    yield from _listed(found.appear)
    yield f"findings that go: {_counts(found.go)}"
    yield from _listed(found.go)
    if found.stay:
        yield f"findings that stay with other figures: {len(found.stay)}"
        yield from _listed(after for _, after in found.stay)
    yield f"asked again: {len(found.rules)} rules over {found.looked_at} instruments; {CAUTION}"


def _counts(found: Iterable[Finding]) -> str:
    findings = list(found)
    if not findings:
        return "none"
    sure = [each for each in findings if each.outcome is Outcome.FINDING]
    pieces = [f"{sum(each.severity is severity for each in sure)} {severity.value}" for severity in Severity]
    return f"{', '.join(pieces)}; {len(findings) - len(sure)} to review"


def _listed(found: Iterable[Finding]) -> Iterator[str]:
    findings = list(found)
    for each in findings[:MOST_LINES]:
        kind = "review" if each.outcome is Outcome.REVIEW else each.severity.value
        part = f" ({each.part})" if each.part else ""
        yield f"  {kind} {each.rule} {each.subject}{part}: {each.message}"
    if len(findings) > MOST_LINES:
        yield f"  and {len(findings) - MOST_LINES} more"
