"""What tests ask of one rule on a small plant: its messages, its outcome for a subject, and its fixes applied."""

from collections.abc import Mapping, Sequence
from typing import Any

from loops.plant import Plant
from validation.audit import audit, check_one
from validation.example import example_plant
from validation.finding import Clear, Finding, Fix, Found, NotApplicable, Outcome, Review, Unchecked
from validation.rule import load_rules

Row = dict[str, Any]
Sheets = dict[str, Any]


def asked(code: str, rows: Sequence[Mapping[str, Any]], **sheets: Any) -> list[Finding]:
    """Return what one rule finds and reviews."""
    return audit(example_plant(rows, **sheets), codes=[code], raise_errors=True).findings


def outcome(code: str, rows: Sequence[Mapping[str, Any]], subject: str = "", **sheets: Any) -> str:
    """Return what one rule comes to on an instrument (the first row's): its outcome, with the blanks or assumptions."""
    plant = example_plant(rows, **sheets)
    verdict = check_one(load_rules()[code], _subject(plant, subject or str(rows[0]["tag"])), plant)
    if verdict is None:
        return "clear"
    if isinstance(verdict, Clear):
        return f"clear, assumed: {'; '.join(verdict.assumed)}"
    if isinstance(verdict, NotApplicable):
        return "not applicable"
    if isinstance(verdict, Unchecked):
        return f"unchecked: {', '.join(verdict.fields)}"
    found: Sequence[Found] = [verdict] if isinstance(verdict, Found) else verdict
    if not found:
        return "clear"
    return "review" if all(isinstance(each, Review) for each in found) else "finding"


def _subject(plant: Plant, name: str) -> Any:
    return next(each for each in plant.instruments if each.name == name)


def said_of(finding: Finding) -> str:
    """Return a finding's message, marked where it is a review."""
    return f"review: {finding.message}" if finding.outcome is Outcome.REVIEW else finding.message


def values_of(fixes: Sequence[Fix]) -> list[dict[str, str]]:
    """Return the changes of the fixes that are values."""
    return [dict(fix.change) for fix in fixes if fix.change]


def unmended(code: str, rows: Sequence[Row], **sheets: Any) -> list[str]:
    """Apply each fix that is a value, alone, and return those that do not clear their finding."""
    left: list[str] = []
    for finding in asked(code, rows, **sheets):
        for fix in finding.fixes:
            if not fix.change:
                continue
            subject = fix.subject or finding.subject
            mended = [{**row, **fix.change} if row["tag"] == subject else row for row in rows]
            again = asked(code, mended, **sheets)
            if any(each.identity[:3] == finding.identity[:3] for each in again):
                left.append(f"{finding.subject} {finding.part}: {fix.text}")
    return left
