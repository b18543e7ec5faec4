"""A what-if in words."""

from validation.finding import Finding, Outcome, Severity
from validation.report.what_if_text import MOST_LINES, what_if_lines
from validation.what_if import WhatIf


def finding(subject: str, *, part: str = "", outcome: Outcome = Outcome.FINDING) -> Finding:
    return Finding(
        rule="RNG02", severity=Severity.FAULT, outcome=outcome, subject=subject, part=part, fields=(), values={},
        message="12 barg is above 10 barg", found="", wanted="", off_by="", working="", assumed=(), fixes=(), cells=(),
    )  # fmt: skip


def test_what_was_changed_what_appears_and_what_goes() -> None:
    found = WhatIf(
        changed=("Areas 30T: zone becomes 0 (was zone 1)",),
        appear=(finding("PT-1", part="upper"), finding("PT-2", outcome=Outcome.REVIEW)),
        go=(),
        stay=((finding("PT-3"), finding("PT-3")),),
        rules=("RNG02",),
        looked_at=12,
    )
    assert list(what_if_lines(found)) == [
        "what if:",
        "  Areas 30T: zone becomes 0 (was zone 1)",
        "findings that appear: 0 danger, 1 fault, 0 gap; 1 to review",
        "  fault RNG02 PT-1 (upper): 12 barg is above 10 barg",
        "  review RNG02 PT-2: 12 barg is above 10 barg",
        "findings that go: none",
        "findings that stay with other figures: 1",
        "  fault RNG02 PT-3: 12 barg is above 10 barg",
        "asked again: 1 rules over 12 instruments; screening aid - requires review by a competent person",
    ]


def test_a_long_list_ends() -> None:
    many = tuple(finding(f"PT-{number}") for number in range(MOST_LINES + 3))
    lines = list(what_if_lines(WhatIf(changed=(), appear=(), go=many)))
    assert lines[-2] == "  and 3 more"
    assert sum(line.startswith("  fault") for line in lines) == MOST_LINES
