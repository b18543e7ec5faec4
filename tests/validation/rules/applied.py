"""One rule on a small list: what it says, that no order of rows changes it, and that its fixes clear it."""

import random
from collections.abc import Sequence
from typing import Any

from validation.audit import audit
from validation.example import example_plant, said
from validation.finding import Finding
from validation.mend import found_after
from validation.rule import Registry, load_rules

Row = dict[str, Any]


def rows_of(*rows: str | Row) -> list[Row]:
    """Return rows, a bare text being a row with that tag; all have a service, so that the sheet is an index."""
    return [{"service": "Feed", **({"tag": row} if isinstance(row, str) else row)} for row in rows]


def tell(code: str, *rows: str | Row, **sheets: Any) -> list[str]:
    """Return what the rule says, once it is sure that no order of rows changes it and that its fixes clear it."""
    listed = rows_of(*rows)
    told = said(code, listed, **sheets)
    for seed in range(2):
        moved = listed[:]
        random.Random(seed).shuffle(moved)
        assert said(code, moved, **sheets) == told, "another order of rows says something else"
    assert unmended(code, listed, **sheets) == []
    return told


def unmended(code: str, rows: Sequence[Row], **sheets: Any) -> list[str]:
    """Apply each fix that is a value, alone, and return those after which the finding is still found."""
    only = Registry()
    only.add(load_rules()[code])
    plant = example_plant(rows, **sheets)
    left: list[str] = []
    for finding in audit(plant, rules=only, raise_errors=True).findings:
        for fix in finding.fixes:
            if fix.change:
                after = found_after(plant, finding, fix, rules=only)
                if finding.identity in {each.identity for each in after}:
                    left.append(f"{finding.subject}: {fix.text}")
    return left


def found(code: str, *rows: str | Row, **sheets: Any) -> list[Finding]:
    """Return what the rule finds, whole."""
    return audit(example_plant(rows_of(*rows), **sheets), codes=[code], raise_errors=True).findings


def fixes(code: str, *rows: str | Row, **sheets: Any) -> list[tuple[str, str, dict[str, str]]]:
    """Return each fix: whose row it changes, its text and its values."""
    return [
        (fix.subject or each.subject, fix.text, dict(fix.change))
        for each in found(code, *rows, **sheets)
        for fix in each.fixes
    ]


def untold(code: str, *rows: str | Row, **sheets: Any) -> dict[str, int]:
    """Return the blanks that leave the rule unchecked."""
    return dict(audit(example_plant(rows_of(*rows), **sheets), codes=[code], raise_errors=True).coverage[code].because)


def counts(code: str, *rows: str | Row, **sheets: Any) -> dict[str, int]:
    """Return how often the rule came to each outcome."""
    outcomes = audit(example_plant(rows_of(*rows), **sheets), codes=[code], raise_errors=True).coverage[code].outcomes
    return {outcome.value: count for outcome, count in sorted(outcomes.items()) if count}


def cells(code: str, *rows: str | Row, **sheets: Any) -> list[list[str]]:
    """Return the cells of each finding: sheet and address."""
    return [[f"{cell.sheet} {cell.address}" for cell in each.cells] for each in found(code, *rows, **sheets)]
