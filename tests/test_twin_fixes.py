"""Each fix that is a value, applied: its finding is gone, and what it makes is what it said."""

from functools import cache

import pytest

from tests.marrowbeck import Change, branches, demo_rows, nears, with_changes
from tests.twin import batches, twin
from validation.audit import Audit
from validation.finding import Finding, Fix, Outcome
from validation.mend import found_after, with_consequences

BROKEN = (*branches(), *(near.beyond for near in nears() if near.beyond is not None))
PARTS = 6


@cache
def demo() -> Audit:
    """Return the demo's audit, its fixes saying what they would make."""
    result = twin().audit(demo_rows())
    with_consequences(result)
    return result


def values(result: Audit) -> list[tuple[Finding, Fix]]:
    """Return the fixes that are values, with their findings."""
    return [(finding, fix) for finding in result.findings for fix in finding.fixes if fix.change]


def not_mended(result: Audit, fixes: list[tuple[Finding, Fix]]) -> dict[str, str]:
    """Apply each fix alone to the whole plant; return those that leave their finding or make what they did not say."""
    before = {each.identity for each in result.findings if each.outcome is Outcome.FINDING}
    wrong: dict[str, str] = {}
    for finding, fix in fixes:
        after = found_after(result.plant, finding, fix)
        name = f"{finding.rule} {finding.subject} {finding.part}: {fix.text}"
        if finding.identity in {each.identity for each in after}:
            wrong[name] = "the finding stays"
        made = {each.rule for each in after if each.outcome is Outcome.FINDING and each.identity not in before}
        if made != set(fix.makes):
            wrong[f"{name}, says {fix.makes}"] = f"makes {sorted(made)}"
    return wrong


@pytest.mark.parametrize("part", range(PARTS))
def test_each_fix_of_the_demo_mends_what_it_is_for_and_makes_what_it_says(part: int) -> None:
    assert not_mended(demo(), values(demo())[part::PARTS]) == {}


@pytest.mark.parametrize(
    "batch",
    [batch for batch in batches(BROKEN) if len(batch) > 1],
    ids=lambda batch: f"{batch[0].rule}-{batch[-1].rule}-{len(batch)}",
)
def test_the_first_fix_of_another_branch_mends_it(batch: tuple[Change, ...]) -> None:
    result = twin().audit(with_changes(twin().rows, batch))
    with_consequences(result)
    first = {id(finding): (finding, fix) for finding, fix in reversed(values(result))}
    assert not_mended(result, list(first.values())) == {}


def test_most_rules_that_can_have_a_value_for_a_fix_give_one() -> None:
    assert {finding.rule for finding, _ in values(demo())} >= {
        "DAT10", "DAT11", "ELC01", "ELC02", "ELC16", "HAZ03", "PRO02", "RNG02", "RNG03", "RNG04", "RNG05", "RNG07",
        "RNG08", "RNG09", "RNG11", "RNG12", "RNG16", "SET01", "SET02", "SET04", "SET07", "SET10", "SET13", "TAG03",
        "TAG04", "TAG05", "TAG08", "TAG09",
    }  # fmt: skip
    assert any(fix.makes for _, fix in values(demo()))
