"""The audit: every rule over every subject, five outcomes that add up, and what becomes of a rule that breaks."""

import sys
import textwrap
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest
from openpyxl import load_workbook

import validation.rules
from loops.certificates import certificates_of
from loops.plant import Plant
from tests.marrowbeck import DEMO, audit_of
from validation.audit import Audit, Broken, audit, bare_name, check_one, finding_order, group_name, reaudit
from validation.example import example_plant
from validation.finding import (
    Clear,
    Finding,
    Found,
    NotApplicable,
    Outcome,
    Review,
    Severity,
    Unchecked,
    Verdict,
)
from validation.report.exceptions import write_exceptions
from validation.rule import RULES, Registry, Subject, load_rules, rule

Row = dict[str, Any]

ROWS: list[Row] = [
    {"tag": "PT-1", "LRV": "0 barg", "URV": "10 barg", "signal": "4-20 mA", "loop": "P-1"},
    {"tag": "PT-2", "LRV": "0 barg", "URV": "", "signal": "4-20 mA", "loop": "P-2"},
    {"tag": "PG-3", "LRV": "0 barg", "URV": "4 barg", "signal": "", "loop": ""},
    {"tag": "PT-4", "LRV": "0 barg", "URV": "6 barg", "signal": "4-20 mA", "loop": "P-4", "status": "spare"},
]


def registry_of(
    check: Callable[..., Verdict], *, on: Subject = Subject.INSTRUMENT, code: str = "TAG90", **told: Any
) -> Registry:
    """Return a registry with one rule made of a function."""
    registry = Registry()
    check.__doc__ = "A rule made up."
    told.setdefault("message", "found {what}")
    rule(code, severity=Severity.FAULT, on=on, basis="common practice", registry=registry, **told)(check)
    return registry


def run(
    check: Callable[..., Verdict], *, rows: list[Row] = ROWS, sheets: dict[str, Any] | None = None, **told: Any
) -> Audit:
    return audit(example_plant(rows, **(sheets or {})), rules=registry_of(check, **told))


def outcomes(result: Audit, code: str = "TAG90") -> dict[str, int]:
    coverage = result.coverage[code]
    return {outcome.value: coverage.count(outcome) for outcome in Outcome if coverage.count(outcome)}


FOUND = Found(values={"what": "it"}, fields=("urv",))


# --------------------------------------------------------------------------------------------- one rule's outcomes


@pytest.mark.parametrize(
    ("verdict", "outcome"),
    [
        (None, "clear"),
        (Clear(("supply 24 V",)), "clear"),
        (FOUND, "finding"),
        (Review(values={"what": "it"}), "review"),
        ([FOUND, FOUND], "finding"),
        ([Review(values={"what": "it"}), FOUND], "finding"),
        ([FOUND, Review(values={"what": "it"})], "finding"),
        ([Review(values={"what": "it"})], "review"),
        ([], "clear"),
        (Unchecked("URV"), "unchecked"),
        (NotApplicable(), "not applicable"),
    ],
)
def test_each_verdict_is_one_outcome(verdict: Verdict, outcome: str) -> None:
    expected = {outcome: 3}
    expected["not applicable"] = expected.get("not applicable", 0) + 1  # the spare one
    assert outcomes(run(lambda installed, plant: verdict)) == expected


def test_a_blank_need_is_unchecked_by_itself_and_named() -> None:
    result = run(lambda installed, plant: FOUND, needs=("lrv", "urv"))
    assert outcomes(result) == {"finding": 2, "unchecked": 1, "not applicable": 1}
    coverage = result.coverage["TAG90"]
    assert dict(coverage.because) == {"URV": 1}
    assert coverage.unchecked == {("URV",): ["PT-2"]}


def test_alternative_needs_are_one() -> None:
    result = run(lambda installed, plant: None, needs=("urv|lrv",))
    assert outcomes(result) == {"clear": 3, "not applicable": 1}
    result = run(lambda installed, plant: None, needs=("urv|system_urv",))
    assert dict(result.coverage["TAG90"].because) == {"URV or system URV": 1}


def test_a_rule_says_whom_it_is_about() -> None:
    result = run(lambda installed, plant: FOUND, applies=lambda installed, plant: installed.letters == "PT")
    assert outcomes(result) == {"finding": 2, "not applicable": 2}


def test_a_rule_may_be_about_what_is_not_live_too() -> None:
    assert outcomes(run(lambda installed, plant: FOUND, not_live_too=True)) == {"finding": 4}


def test_a_finding_is_told_whole() -> None:
    def check(installed: Any, plant: Plant) -> Verdict:
        if installed.name != "PT-1":
            return None
        return Found(
            values={"what": "10 barg"},
            fields=("urv", "lrv"),
            part="HH",
            found="10 barg",
            wanted="8 barg",
            off_by="2 bar",
            working="10 - 8",
            assumed=("gauge",),
            cells=installed.cells("signal"),
        )

    result = run(check)
    assert result.findings == [
        Finding(
            rule="TAG90",
            severity=Severity.FAULT,
            outcome=Outcome.FINDING,
            subject="PT-1",
            part="HH",
            fields=("URV", "LRV"),
            message="found 10 barg",
            values={"what": "10 barg"},
            found="10 barg",
            wanted="8 barg",
            off_by="2 bar",
            working="10 - 8",
            assumed=("gauge",),
            fixes=(),
            cells=result.findings[0].cells,
            cause="found {what}",
        )
    ]
    assert [cell.address for cell in result.findings[0].cells] == ["C2", "B2", "D2"]
    assert result.findings[0].identity == ("TAG90", "PT-1", "HH", ("URV", "LRV"))
    assert "gauge" in result.assumptions


def test_a_branch_may_have_a_message_of_its_own() -> None:
    result = run(lambda installed, plant: Found(values={"what": "x"}, message="but {what}"), rows=ROWS[:1])
    assert [(each.message, each.cause) for each in result.findings] == [("but x", "but {what}")]
    # A finding about no field goes back to the tag.
    assert [cell.address for cell in result.findings[0].cells] == ["A2"]


# ---------------------------------------------------------------------------------------------------- other subjects


def test_circuits_loops_areas_and_the_whole_list_are_counted() -> None:
    areas = {"areas": [{"code": "A", "zone": "1"}, {"code": "B", "zone": "2"}]}
    counted = {
        Subject.CIRCUIT: {"finding": 2},
        Subject.LOOP: {"finding": 3},
        Subject.AREA: {"finding": 2},
        Subject.WHOLE: {"finding": 1},
    }
    for on, expected in counted.items():
        whole = on is Subject.WHOLE
        check = (lambda plant: FOUND) if whole else (lambda subject, plant: FOUND)
        result = run(check, on=on, sheets=areas)
        assert outcomes(result) == expected, on
    assert {each.subject for each in result.findings} == {"list.xlsx"}


def test_a_certificate_is_counted_once_however_many_name_it() -> None:
    rows: list[Row] = [
        {"tag": "PT-1", "certificate": "ABC 20 ATEX 0001", "device type": "", "status": ""},
        {"tag": "PT-2", "certificate": "ABC20ATEX0001X", "device type": "", "status": ""},
        {"tag": "PT-3", "certificate": "", "device type": "T-1", "status": ""},
        {"tag": "PT-4", "certificate": "ABC 20 ATEX 0009", "device type": "", "status": "spare"},
    ]
    types = [
        {"code": "T-1", "kind": "transmitter", "certificate": "IECEx ABC 20.0002X"},
        {"code": "T-2", "kind": "transmitter", "certificate": "ABC 20 ATEX 0008"},
    ]
    result = run(
        lambda subject, plant: Found(
            values={"what": ", ".join(each.name for each in subject.members)}, fields=("certificate",)
        ),
        on=Subject.CERTIFICATE,
        rows=rows,
        sheets={"types": types},
    )
    found = [(each.subject, each.message, [f"{c.sheet} {c.address}" for c in each.cells]) for each in result.findings]
    assert found == [
        ("ABC 20 ATEX 0001X", "found PT-1, PT-2", ["Instruments B2", "Instruments B3"]),
        ("IECEx ABC 20.0002X", "found PT-3", ["Device types C2", "Instruments C4"]),
    ]
    assert outcomes(result) == {"finding": 2}


def groups_of(*groups: str) -> Callable[[Plant], list[tuple[Any, ...]]]:
    def find(plant: Plant) -> list[tuple[Any, ...]]:
        by_name = {each.name: each for each in plant.instruments}
        return [tuple(by_name[name] for name in group.split()) for group in groups]

    return find


TAGS = [{"tag": f"PT-{number}", "service": "x", "URV": "" if number == 4 else "1 barg"} for number in range(1, 6)]


@pytest.mark.parametrize(
    ("groups", "told", "expected"),
    [
        (("PT-1 PT-2",), {}, {"clear": 3, "finding": 2}),
        (("PT-1 PT-2",), {"alone_is_clear": False}, {"finding": 2, "not applicable": 3}),
        # A member counts once, by the worst that is said of it.
        (("PT-1 PT-2", "PT-2 PT-3"), {}, {"clear": 2, "finding": 3}),
        (("PT-1 PT-2", "PT-2 PT-5"), {}, {"clear": 2, "finding": 2, "review": 1}),
        # Who does not count leaves the group; a group of one is none.
        (("PT-1 PT-4",), {"needs": ("urv",)}, {"clear": 4, "unchecked": 1}),
        (("PT-1 PT-2 PT-4",), {"needs": ("urv",)}, {"clear": 2, "finding": 2, "unchecked": 1}),
        (("PT-1 PT-2",), {"applies": lambda each, plant: each.name != "PT-2"}, {"clear": 4, "not applicable": 1}),
        ((), {}, {"clear": 5}),
    ],
)
def test_the_members_of_groups_are_counted(groups: tuple[str, ...], told: Row, expected: dict[str, int]) -> None:
    def check(group: tuple[Any, ...], plant: Plant) -> Verdict:
        return Review(values={"what": "it"}) if group[-1].name == "PT-5" else FOUND

    assert outcomes(run(check, rows=TAGS, on=Subject.GROUP, groups=groups_of(*groups), **told)) == expected


def test_a_group_is_called_by_its_tags() -> None:
    result = run(lambda group, plant: FOUND, rows=TAGS, on=Subject.GROUP, groups=groups_of("PT-3 PT-1"))
    assert [each.subject for each in result.findings] == ["PT-1, PT-3"]
    plant = example_plant([{"tag": "FT-10", "service": "a"}, {"tag": "FT-9", "service": "x", "URV": "1 bar"},
                           {"tag": "FT-9", "service": "y", "URV": "2 bar"}])  # fmt: skip
    assert group_name(plant.instruments) == "FT-9, FT-10"
    assert bare_name("FT-9 (12)") == "FT-9"
    assert bare_name("FT-9 (spare)") == "FT-9 (spare)"


# ------------------------------------------------------------------------------------------ whole columns and breaks


def test_what_is_wrong_with_a_whole_column_is_one_finding_and_no_row_is_asked() -> None:
    def column_absent(plant: Plant) -> Verdict:
        return Found(values={"what": "no column"}, fields=("urv",))

    result = run(lambda installed, plant: FOUND, whole=column_absent)
    assert [(each.subject, each.message) for each in result.findings] == [("list.xlsx", "found no column")]
    # The list is none of the rule's subjects: they are unchecked for want of the column.
    assert outcomes(result) == {"unchecked": 3, "not applicable": 1}
    assert dict(result.coverage["TAG90"].because) == {"URV": 3}
    assert (
        reaudit(result.plant.instruments[0], result.plant, rules=registry_of(lambda i, p: FOUND, whole=column_absent))
        == []
    )


def test_a_whole_column_may_be_wrong_and_the_rows_still_be_asked() -> None:
    def one_line(plant: Plant) -> Verdict:
        return Found(values={"what": "all"}, fields=("urv",), stops_rows=False)

    result = run(lambda installed, plant: FOUND, whole=one_line)
    assert outcomes(result) == {"finding": 3, "not applicable": 1}
    assert [each.subject for each in result.findings] == ["list.xlsx", "PG-3", "PT-1", "PT-2"]


def broken(*_: Any) -> Verdict:
    raise ZeroDivisionError("span")


@pytest.mark.parametrize(
    ("told", "subjects", "expected"),
    [
        ({}, ["PG-3", "PT-1", "PT-2"], {"unchecked": 3, "not applicable": 1}),
        ({"applies": broken}, ["PG-3", "PT-1", "PT-2"], {"unchecked": 3, "not applicable": 1}),
        ({"on": Subject.WHOLE}, ["list.xlsx"], {"unchecked": 1}),
        ({"on": Subject.CIRCUIT}, ["P-1", "P-2"], {"unchecked": 2}),
        ({"on": Subject.GROUP, "groups": groups_of("PT-1 PT-2")}, ["PT-1, PT-2"],
         {"clear": 1, "unchecked": 2, "not applicable": 1}),
        ({"on": Subject.GROUP, "groups": broken}, ["list.xlsx"], {"unchecked": 3, "not applicable": 1}),
        ({"on": Subject.GROUP, "groups": groups_of("PT-1 PT-2"), "applies": broken}, ["PG-3", "PT-1", "PT-2"],
         {"unchecked": 3, "not applicable": 1}),
    ],
)  # fmt: skip
def test_a_rule_that_raises_is_reported_and_leaves_nothing_clear(
    told: Row, subjects: list[str], expected: dict[str, int]
) -> None:
    result = run(broken, **told)
    assert result.broken == [Broken("TAG90", subject, "ZeroDivisionError: span") for subject in subjects]
    assert outcomes(result) == expected
    assert set(result.coverage["TAG90"].because) == {"the rule is broken"}
    with pytest.raises(ZeroDivisionError):
        audit(result.plant, rules=registry_of(broken, **told), raise_errors=True)


def test_a_broken_question_about_a_column_leaves_the_rows_to_be_asked() -> None:
    result = run(lambda installed, plant: FOUND, whole=broken)
    assert result.broken == [Broken("TAG90", "list.xlsx", "ZeroDivisionError: span")]
    assert outcomes(result) == {"finding": 3, "not applicable": 1}


def test_a_message_without_its_value_is_a_broken_rule() -> None:
    result = run(lambda installed, plant: Found(), rows=ROWS[:1])
    assert [each.error for each in result.broken] == ["KeyError: 'what'"]
    assert outcomes(result) == {"unchecked": 1}


def test_other_rules_run_beside_a_broken_one() -> None:
    registry = registry_of(broken)
    rule("TAG91", severity=Severity.GAP, on=Subject.INSTRUMENT, message="m", basis="b", registry=registry)(
        _documented(lambda installed, plant: None)
    )
    result = audit(example_plant(ROWS), rules=registry)
    assert outcomes(result, "TAG91") == {"clear": 3, "not applicable": 1}
    assert list(result.coverage) == ["TAG90", "TAG91"]


def _documented(check: Callable[..., Verdict]) -> Callable[..., Verdict]:
    check.__doc__ = "A rule made up."
    return check


# ---------------------------------------------------------------------------------------------- all rules together


@pytest.fixture(scope="module")
def demo() -> Audit:
    return audit_of(DEMO)


def test_the_five_outcomes_add_up_to_the_subjects(demo: Audit) -> None:
    plant = demo.plant
    subjects = {
        Subject.INSTRUMENT: len(plant.instruments),
        Subject.GROUP: len(plant.instruments),
        Subject.CIRCUIT: len(plant.circuits),
        Subject.LOOP: len(plant.loops),
        Subject.AREA: len(plant.areas_seen),
        Subject.CERTIFICATE: len(certificates_of(plant)),
        Subject.WHOLE: 1,
    }
    added = {each.code: sum(demo.coverage[each.code].outcomes.values()) for each in load_rules()}
    assert added == {each.code: subjects[each.on] for each in load_rules()}
    assert demo.broken == []


def test_what_is_unchecked_says_why(demo: Audit) -> None:
    for code, coverage in demo.coverage.items():
        names = [name for subjects in coverage.unchecked.values() for name in subjects]
        if RULES[code].on is Subject.GROUP:
            # A group is named once, and counted by its members.
            names = [each for name in names for each in name.split(", ")]
        named = len(names)
        assert (code, named) == (code, coverage.count(Outcome.UNCHECKED))
        assert all(coverage.unchecked), code


def test_findings_stand_in_their_order(demo: Audit) -> None:
    assert demo.findings == sorted(demo.findings, key=finding_order)
    kinds = [each.outcome for each in demo.findings]
    assert kinds == sorted(kinds, key=[Outcome.FINDING, Outcome.REVIEW].index)
    severities = [each.severity.rank for each in demo.of(Outcome.FINDING)]
    assert severities == sorted(severities)
    assert sum(demo.counts().values()) == len(demo.findings)


def test_no_two_findings_are_one(demo: Audit) -> None:
    identities = [each.identity for each in demo.findings]
    assert len(identities) == len(set(identities))


def test_a_record_audited_again_says_the_same(demo: Audit) -> None:
    single = {each.code for each in load_rules() if each.on in (Subject.INSTRUMENT, Subject.CIRCUIT)}
    whole = {each.identity for each in demo.findings if each.rule in single and each.subject != demo.plant.name}
    again = {each.identity for installed in demo.plant.instruments for each in reaudit(installed, demo.plant)}
    assert again == whole


def test_what_is_not_live_is_not_audited_again(demo: Audit) -> None:
    not_live = [each for each in demo.plant.instruments if not each.live]
    assert not_live
    assert {found.rule for each in not_live for found in reaudit(each, demo.plant)} <= {"TAG14", "DOC03"}


def test_only_the_rules_that_are_asked_for_run() -> None:
    seen: list[tuple[int, int, str]] = []
    result = audit(example_plant(ROWS), codes=["RNG01", "SET01"], on_rule=lambda *step: seen.append(step))
    assert list(result.coverage) == ["RNG01", "SET01"]
    assert seen == [(1, 2, "RNG01"), (2, 2, "SET01")]


def test_one_subject_is_asked_alone() -> None:
    plant = example_plant(ROWS)
    (only,) = registry_of(lambda installed, plant: FOUND, needs=("urv",), applies=lambda each, plant: each.live)
    by_name = {each.name: each for each in plant.instruments}
    assert check_one(only, by_name["PT-1"], plant) is FOUND
    assert check_one(only, by_name["PT-2"], plant) == Unchecked("URV")
    assert check_one(only, by_name["PT-4 (spare)"], plant) == NotApplicable()


# ------------------------------------------------------------------------------- a rule is added by adding its module

MADE_UP = '''
    """A family of its own."""
    from validation.finding import Found, Severity
    from validation.rule import Subject, rule


    @rule("TAG99", severity=Severity.GAP, on=Subject.INSTRUMENT, message="{tag} is made up", basis="common practice")
    def made_up(installed, plant):
        """A tag that is made up.

        Why it matters: it shows that a rule needs no list to be added to.
        """
        return Found(values={"tag": installed.name}, fields=("tag",)) if installed.name == "PT-1" else None
'''


@pytest.fixture
def folder_of_rules(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Iterator[Path]:
    """A folder whose modules belong to the package of the rules; afterwards nothing of them is left."""
    load_rules()
    codes = {each.code for each in RULES}
    monkeypatch.setattr(validation.rules, "__path__", [*validation.rules.__path__, str(tmp_path)])
    yield tmp_path
    for code in {each.code for each in RULES} - codes:
        RULES.remove(code)
    sys.modules.pop("validation.rules.made_up", None)


def test_a_module_in_the_package_is_a_rule_in_catalogue_audit_and_workbook(
    folder_of_rules: Path, tmp_path_factory: pytest.TempPathFactory, capsys: pytest.CaptureFixture[str]
) -> None:
    from django.core.management import call_command

    assert "TAG99" not in load_rules()
    (folder_of_rules / "made_up.py").write_text(textwrap.dedent(MADE_UP), encoding="utf-8")
    call_command("rules", "TAG99")
    assert capsys.readouterr().out.startswith("TAG99  gap     instrument             A tag that is made up\n")
    plant = example_plant(ROWS)
    result = audit(plant)
    assert [each.message for each in result.findings if each.rule == "TAG99"] == ["PT-1 is made up"]
    assert outcomes(result, "TAG99") == {"clear": 2, "finding": 1, "not applicable": 1}
    assert "TAG99" in {each.rule for each in reaudit(plant.instruments[1], plant)}
    path = tmp_path_factory.mktemp("out") / "exceptions.xlsx"
    write_exceptions(result, path)
    book = load_workbook(path, read_only=True)
    sheets = {
        sheet.title
        for sheet in book
        for row in sheet.iter_rows(values_only=True)
        if "TAG99" in [str(cell) for cell in row]
    }
    assert {"Findings", "Coverage", "Rules"} <= sheets


def test_two_rules_cannot_have_one_code(folder_of_rules: Path) -> None:
    text = textwrap.dedent(MADE_UP).replace("TAG99", "TAG01")
    (folder_of_rules / "made_up.py").write_text(text, encoding="utf-8")
    with pytest.raises(ValueError, match=r"TAG01 is the code of .* already; .*made_up needs one of its own"):
        load_rules()
