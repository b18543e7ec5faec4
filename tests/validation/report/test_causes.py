"""Findings put together by cause."""

from collections.abc import Sequence
from typing import Any

import pytest

from tests.validation.report.small_audit import cell, finding
from validation.finding import Finding, Fix, Outcome, Severity
from validation.report.causes import Cause, causes_of, some_of

LIFT_OFF = "{device} gets {volts} at {current}, its lift-off is {needed}: short by {short}"


def starved(number: int, volts: str, short: str, *, needed: str = "10.5 V", row: int = 4) -> Finding:
    values = {"device": f"PT-{number}", "volts": volts, "current": "22 mA", "needed": needed, "short": short}
    return finding(
        rule="ELC01",
        subject=f"P-{number}",
        part="",
        fields=("lift-off V",),
        message=LIFT_OFF.format_map(values),
        values=values,
        cause=LIFT_OFF,
        found=volts,
        wanted=f"at least {needed}",
        off_by=short,
        fixes=(Fix(text=f"cable no longer than {number} m"), Fix(text="conductor of at least 2.5 mm2")),
        cells=(cell(row, 20, "Types"), cell(number, 6, "Loops")),
    )


def weak(number: int, marked: str, asked: str, *, area: int = 3) -> Finding:
    template = "marked {marked}, the area asks for {asked}"
    values = {"marked": marked, "asked": asked}
    return finding(
        rule="HAZ05",
        severity=Severity.DANGER,
        subject=f"PT-{number}",
        part="",
        fields=("Ex marking", "area temperature class"),
        message=template.format_map(values),
        values=values,
        cause=template,
        found=marked,
        wanted=asked,
        off_by="",
        cells=(cell(number, 30), cell(area, 7, "Areas")),
    )


def said(findings: Sequence[Finding]) -> list[tuple[int, str]]:
    return [(cause.count, cause.text) for cause in causes_of(findings)]


def test_one_finding_is_its_own_cause() -> None:
    (cause,) = causes_of([starved(101, "10.488 V", "0.012 V")])
    assert cause == Cause(
        rule="ELC01",
        severity=Severity.FAULT,
        outcome=Outcome.FINDING,
        text="PT-101 gets 10.488 V at 22 mA, its lift-off is 10.5 V: short by 0.012 V",
        count=1,
        subjects=("P-101",),
        fields=("lift-off V",),
        found="10.488 V",
        wanted="at least 10.5 V",
        off_by="0.012 V",
        fixes=("cable no longer than 101 m", "conductor of at least 2.5 mm2"),
        cells=(cell(4, 20, "Types"), cell(101, 6, "Loops")),
    )


def test_a_thousand_equal_findings_are_one_cause_with_a_count() -> None:
    many = [weak(number, "T3", "T4", area=number % 7) for number in range(1000)]
    (cause,) = causes_of(many)
    assert (cause.count, cause.text) == (1000, "marked T3, the area asks for T4")
    assert cause.subjects == tuple(f"PT-{number}" for number in range(1000))
    assert cause.cells == ()


def test_what_differs_every_time_is_a_range_and_what_names_the_subject_is_left_open() -> None:
    (cause,) = causes_of([starved(101, "10.488 V", "0.012 V"), starved(102, "9.1 V", "1.4 V")])
    assert cause.text == ("[device] gets 9.1 to 10.488 V at 22 mA, its lift-off is 10.5 V: short by 0.012 to 1.4 V")
    assert (cause.found, cause.wanted, cause.off_by) == (
        "9.1 to 10.488 V",
        "at least 10.5 V",
        "0.012 to 1.4 V",
    )
    assert cause.fixes == ("conductor of at least 2.5 mm2",)
    assert cause.cells == (cell(4, 20, "Types"),)


@pytest.mark.parametrize(
    ("findings", "expected"),
    [
        # Three a pair on average: each pair is a cause of its own, the most common first.
        (
            [weak(n, "T3", "T4") for n in range(2)] + [weak(n, "T4", "T6") for n in range(2, 6)],
            [(4, "marked T4, the area asks for T6"), (2, "marked T3, the area asks for T4")],
        ),
        # Fewer: together, with the alternatives.
        (
            [weak(n, "T3", "T4") for n in range(2)] + [weak(n, "T4", "T6") for n in range(2, 5)],
            [(5, "marked T3 or T4, the area asks for T4 or T6")],
        ),
        # Computed volts tell nothing apart, the device type's limit does.
        (
            [starved(n, f"{9 + n / 10:g} V", "1 V") for n in range(3)]
            + [starved(n, f"{9 + n / 10:g} V", "1 V", row=5) for n in range(3, 7)],
            [
                (4, "[device] gets 9.3 to 9.6 V at 22 mA, its lift-off is 10.5 V: short by 1 V"),
                (3, "[device] gets 9 to 9.2 V at 22 mA, its lift-off is 10.5 V: short by 1 V"),
            ],
        ),
        # ... and so does what is wanted.
        (
            [starved(n, f"{9 + n / 10:g} V", "1 V", row=n) for n in range(3)]
            + [starved(n, f"{9 + n / 10:g} V", "1 V", row=n, needed="12 V") for n in range(3, 6)],
            [
                (3, "[device] gets 9 to 9.2 V at 22 mA, its lift-off is 10.5 V: short by 1 V"),
                (3, "[device] gets 9.3 to 9.5 V at 22 mA, its lift-off is 12 V: short by 1 V"),
            ],
        ),
    ],
)
def test_told_apart_where_it_says_something(findings: list[Finding], expected: list[tuple[int, str]]) -> None:
    assert said(findings) == expected


def test_rule_outcome_template_and_fields_are_never_mixed() -> None:
    plain = finding(message="m", cause="m")
    others: list[dict[str, Any]] = [
        {"rule": "RNG03"},
        {"outcome": Outcome.REVIEW},
        {"cause": "another branch", "message": "another branch"},
        {"fields": ("LRV", "LRL")},
    ]
    found = causes_of([plain, *(finding(**{"message": "m", "cause": "m", **other}) for other in others)])
    assert [cause.count for cause in found] == [1, 1, 1, 1, 1]


@pytest.mark.parametrize(
    ("texts", "expected"),
    [
        (("6 bar", "6 bar"), "6 bar"),
        (("6 bar", "10 bar", "-1 bar"), "-1 to 10 bar"),
        (("76 %", "123.5 %"), "76 to 123.5 %"),
        (("76%", "8%"), "8 to 76%"),
        (("1e-05 A", "2 A"), "1e-05 to 2 A"),
        (("1.5 mm2", "2.5 mm2"), "1.5 to 2.5 mm2"),
        (("3", "21"), "3 to 21"),
        # No measures of one unit.
        (("6 bar", "6 psi"), "[value]"),
        (("4-20 mA", "0-20 mA"), "[value]"),
        (("0 to 6 bar", "0 to 10 bar"), "[value]"),
        (("6 bar", ""), "[value]"),
        # Words: alternatives where each is said twice.
        (("T4", "T10", "T4", "T10"), "T4 or T10"),
        (("T4", "T10", "T4"), "[value]"),
        (("a", "b", "c") * 2, "a or b or c"),
        (("a", "b", "c", "d") * 2, "[value]"),
        (("a" * 61, "b") * 2, "[value]"),
    ],
)
def test_values_in_common(texts: Sequence[str], expected: str) -> None:
    findings = [
        finding(
            subject=f"PT-{number}", message=f"what stands in the list is {text} ({number})",
            values={"value": text, "n": str(number)}, cause="what stands in the list is {value} ({n})",
            found="", wanted="", cells=(),
        )
        for number, text in enumerate(texts)
    ]  # fmt: skip
    (cause,) = causes_of(findings)
    ends = f"0 to {len(texts) - 1}"
    assert cause.text == f"what stands in the list is {expected} ({ends})"


@pytest.mark.parametrize(
    ("template", "values"),
    [
        ("", {}),
        ("{missing} is wrong", {}),
        ("{value.nothing} is wrong", {"value": "x"}),
        ("{value[0} is wrong", {"value": "x"}),
        ("{value:%d} {", {"value": "x"}),
        ("{value:d}", {"value": "x"}),
    ],
)
def test_a_template_that_does_not_fit_leaves_the_first_message(template: str, values: dict[str, str]) -> None:
    findings = [finding(message=message, cause=template, values=values) for message in ("first", "second")]
    assert {cause.text for cause in causes_of(findings)} <= {"first", "second"}
    assert sum(cause.count for cause in causes_of(findings)) == 2


def test_braces_in_a_value_are_no_placeholders() -> None:
    findings = [
        finding(
            message=f"the tag {{x}} is not the one of its loop: {n}",
            cause="the tag {tag} is not the one of its loop: {n}",
            values={"tag": "{x}", "n": n},
        )
        for n in "ab"
    ]
    assert said(findings) == [(2, "the tag {x} is not the one of its loop: [n]")]


@pytest.mark.parametrize(
    ("template", "text"),
    [
        ("{reason}: {marking}, in {place}", "such as: gas on dust: Ex db, in Z1"),
        ("{marking} does not fit {place}", "such as: Ex db does not fit Z1"),
        ("{marking} does not fit the area {place}", "[marking] does not fit the area [place]"),
        ("{marking} in the same place", "such as: Ex db in the same place"),
        ("no marking: {n}", "no marking: 1 to 2"),
        ("{marking} in {area}", "such as: Ex db in the area behind the old pump house"),
    ],
)
def test_a_template_that_says_nearly_nothing_gives_an_example(template: str, text: str) -> None:
    area = "the area behind the old pump house"
    values = [
        {"reason": "gas on dust", "marking": "Ex db", "place": "Z1", "n": "1", "area": area},
        {"reason": "no group", "marking": "Ex ia", "place": "Z2", "n": "2", "area": area},
    ]
    findings = [finding(message=template.format_map(each), cause=template, values=each) for each in values]
    assert said(findings) == [(2, text)]


def test_the_order_is_count_then_findings_then_severity() -> None:
    gap = finding(rule="TAG04", severity=Severity.GAP, cause="g", message="g")
    findings = [
        finding(rule="ZZZ01", outcome=Outcome.REVIEW, severity=Severity.DANGER, cause="r", message="r"),
        finding(cause="f", message="f"),
        gap,
        gap,
        weak(1, "T3", "T4"),
    ]
    assert [cause.rule for cause in causes_of(findings)] == ["TAG04", "HAZ05", "RNG02", "ZZZ01"]


@pytest.mark.parametrize(
    ("names", "expected"),
    [
        ([], ""),
        (["PT-1"], "PT-1"),
        ([f"PT-{n}" for n in range(10)], "; ".join(f"PT-{n}" for n in range(10))),
        ([f"PT-{n}" for n in range(11)], "; ".join(f"PT-{n}" for n in range(10)) + " and 1 more"),
        ([", ".join(f"PT-{n}" for n in range(100))], "PT-0, PT-1, PT-2, PT-3, PT-4, PT-5, PT-6, PT-7 (and 92 more)"),
        (["x" * 50], "x" * 50),
        (["x" * 51], "x" * 50 + "..."),
    ],
)  # fmt: skip
def test_names_are_cut_with_their_number(names: list[str], expected: str) -> None:
    assert some_of(names) == expected
