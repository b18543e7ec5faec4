"""HAZ11 to HAZ13: certificate numbers, conditions of use and components, over small lists."""

from __future__ import annotations

from typing import Any

import pytest

from tests.validation.rules.asked import outcome
from validation.audit import audit
from validation.example import example_plant, findings, outcomes, said, unchecked_for
from validation.finding import Outcome

GAS = {"code": "A", "zone": "1", "gas group": "IIB", "temperature class": "T3"}
DIVISION = {**GAS, "zone": "", "system": "division", "class": "I", "division": "1", "gas group": "D"}
ATEX, US = {"jurisdiction": "ATEX"}, {"jurisdiction": "US"}


def haz11(marking: str, certificate: str, area: dict[str, str] = GAS, plant: dict[str, str] | None = None) -> str:
    here = {"tag": "PT-1", "area": "A", "Ex marking": marking, "certificate": certificate}
    other = {"tag": "PT-9", "certificate": "ABC 20 ATEX 0009"}
    return outcome("HAZ11", [here, other], areas=[area], plant=plant or ATEX)


@pytest.mark.parametrize(
    ("marking", "certificate", "expected"),
    [
        # numbers of the known forms
        ("II 2 G Ex db IIC T4 Gb", "ABC 20 ATEX 0001", "clear"),
        ("II 2 G Ex db IIC T4 Gb", "ABC 20 ATEX 0001X", "clear"),
        ("II 2 G Ex db IIC T4 Gb", "IECEx ABC 20.0001X issue 3", "clear"),
        ("II 2 G Ex db IIC T4 Gb", "ABC 21 UKEX 0002", "clear"),
        ("Ex db IIC T4 Gb ABC 20 ATEX 0001", "", "clear"),
        # none: by level
        ("II 1 G Ex ia IIC T4 Ga", "", "finding"),
        ("II 2 G Ex db IIC T4 Gb", "", "finding"),
        ("EEx d IIC T4", "", "finding"),
        ("II 2 G Ex db IIC T4 Gb", "TBA", "finding"),
        ("II 2 G Ex db IIC T4 Gb", "n/a", "finding"),
        ("II 2 G Ex db IIC T4 Gb", "applied for", "finding"),
        ("II 3 G Ex ec IIC T4 Gc", "", "review"),
        ("EEx nA II T4", "", "review"),
        ("II 3 G Ex ec IIC T4 Gc", "maker's declaration", "review"),
        ("II 3 G Ex ec IIC T4 Gc; II 2 D Ex tb IIIC T85°C Db", "", "finding"),
        ("Ex op is IIC T4", "", "unchecked: Ex marking"),
        # a form that is not known
        ("II 2 G Ex db IIC T4 Gb", "E-20417", "review"),
        ("II 2 G Ex db IIC T4 Gb", "BAS Ex 812345", "review"),
        ("II 3 G Ex ec IIC T4 Gc", "DoC 4471-2", "review"),
        # not about it
        ("", "", "not applicable"),
        ("none", "", "not applicable"),
        ("[Ex ia Ga] IIC", "", "not applicable"),
        ("EExe approved", "", "unchecked: Ex marking"),
        # a division mark is no evidence here, which another rule says
        ("Class I Div 1 Groups C,D T4", "", "unchecked: Ex marking"),
        ("Class I Div 1 Groups C,D T4", "E-20417", "unchecked: Ex marking"),
    ],
)
def test_certificate_number(marking: str, certificate: str, expected: str) -> None:
    assert haz11(marking, certificate) == expected


@pytest.mark.parametrize(
    ("marking", "certificate", "area", "expected"),
    [
        # any listing reference serves
        ("Class I Div 1 Groups C,D T4", "E-20417", DIVISION, "clear"),
        ("Class I Div 1 Groups C,D T4", "listed, file 12", DIVISION, "clear"),
        ("AEx db IIC T4 Gb", "E-20417", GAS, "clear"),
        ("Class I Div 1 Groups C,D T4", "", DIVISION, "finding"),
        ("Class I Div 1 Groups C,D T4", "not listed", DIVISION, "finding"),
        ("Class I Groups C,D T4", "", DIVISION, "finding"),
        ("Class I Div 2 Groups C,D T4", "", {**DIVISION, "division": "2"}, "review"),
        ("AEx ec IIC T4 Gc", "", {**GAS, "zone": "2"}, "review"),
        ("AEx db IIC T4 Gb", "", GAS, "finding"),
    ],
)
def test_listing_in_the_us(marking: str, certificate: str, area: dict[str, str], expected: str) -> None:
    assert haz11(marking, certificate, area, US) == expected
    assert haz11(marking, certificate, area, {"jurisdiction": "Canada"}) == expected


def test_whose_rules_hold_must_be_known_for_a_division_mark() -> None:
    assert haz11("Class I Div 1 Groups C,D T4", "E-20417", plant={"name": "Example"}) == "unchecked: area jurisdiction"
    assert haz11("Ex db IIC T4 Gb", "", plant={"name": "Example"}) == "finding"
    # ... and a division's, where nothing is stated, is the US
    assert haz11("Class I Div 1 Groups C,D T4", "E-20417", DIVISION, plant={"name": "Example"}) == "clear"


def test_the_types_certificate_stands_for_the_rows() -> None:
    types = [{"code": "T-1", "kind": "transmitter", "Ex marking": "Ex db IIC T4 Gb", "certificate": "ABC 20 ATEX 0001"}]
    row = {"tag": "PT-1", "area": "A", "device type": "T-1", "certificate": ""}
    assert outcomes("HAZ11", [row], types=types, areas=[GAS]) == {"clear": 1}
    unlisted = {**row, "device type": "", "Ex marking": "Ex db IIC T4 Gb"}
    assert outcomes("HAZ11", [unlisted], types=types, areas=[GAS]) == {"finding": 1}


def test_what_is_missing_is_told_with_its_cells() -> None:
    row = {"tag": "PT-1", "area": "A", "Ex marking": "Ex db IIC T4 Gb", "certificate": "TBA"}
    (found,) = findings("HAZ11", [row, {"tag": "PT-2", "certificate": "x"}], areas=[GAS], plant=ATEX)
    assert found.message == "no certificate number: Ex db IIC T4 Gb, in area A (Zone 1 IIB T3)"
    assert (found.found, found.wanted) == ("blank (to be defined)", "a certificate number")
    assert [cell.address for cell in found.cells] == ["D2", "C2"]


def test_a_list_without_the_column_is_told_once() -> None:
    rows = [
        {"tag": f"PT-{number}", "area classification": "Zone 1 IIB T3", "Ex marking": "Ex db IIC T4 Gb"}
        for number in range(1, 4)
    ]
    assert said("HAZ11", rows) == [
        "list.xlsx: no sheet has a column for the certificate; 3 marked instruments stand in classified areas"
    ]
    assert unchecked_for("HAZ11", rows) == {"certificate": 3}
    # it may stand with the marking
    with_number = [{**rows[0], "Ex marking": "Ex db IIC T4 Gb / ABC 20 ATEX 0001"}, *rows[1:]]
    assert [each.subject for each in findings("HAZ11", with_number)] == ["PT-2", "PT-3"]
    # level c and unmarked equipment need none
    assert said("HAZ11", [{**row, "Ex marking": ""} for row in rows]) == []


# ------------------------------------------------------------------------------------------------------ X and U


def told(code: str, *rows: dict[str, str], **sheets: Any) -> list[str]:
    listed = [{"area": "A", "Ex marking": "Ex db IIC T4 Gb", "X conditions accepted": "", **row} for row in rows]
    return said(code, listed, areas=[GAS, {"code": "S", "system": "none"}], **sheets)


X1 = (
    "review: ABC 20 ATEX 0001X: ABC 20 ATEX 0001X has conditions of use (X behind its number); nobody has recorded that"
)
ACCEPTED = "N. Hollin, 3 May 2026"


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        # one review a certificate, listing its tags in their order
        (
            [{"tag": "PT-10", "certificate": "ABC 20 ATEX 0001X"}, {"tag": "PT-2", "certificate": "ABC20ATEX0001X"},
             {"tag": "PT-3", "certificate": "ABC 20 ATEX 0002"}],
            [f"{X1} they are met for PT-2, PT-10"],
        ),
        # what one row writes without it has its X all the same
        (
            [{"tag": "PT-1", "certificate": "ABC 20 ATEX 0001"}, {"tag": "PT-2", "certificate": "ABC 20 ATEX 0001X"}],
            [f"{X1} they are met for PT-1, PT-2"],
        ),
        # a name and a date at each tag
        ([{"tag": "PT-1", "certificate": "ABC 20 ATEX 0001X", "X conditions accepted": ACCEPTED}], []),
        (
            [{"tag": "PT-1", "certificate": "ABC 20 ATEX 0001X", "X conditions accepted": ACCEPTED},
             {"tag": "PT-2", "certificate": "ABC 20 ATEX 0001X"}],
            [f"{X1} they are met for PT-2"],
        ),
        *(
            ([{"tag": "PT-1", "certificate": "ABC 20 ATEX 0001X", "X conditions accepted": text}],
             [f"{X1} they are met for PT-1"])
            for text in ("yes", "X", "TBA", "3 May 2026", "N. Hollin", "Clean with a damp cloth, clause 17",
                         "not accepted, N. Hollin 3 May 2026")
        ),
        # only where it stands in an area
        ([{"tag": "PT-1", "certificate": "ABC 20 ATEX 0001X", "area": "S"}], []),
        (
            [{"tag": "PT-1", "certificate": "ABC 20 ATEX 0001X", "area": "S"},
             {"tag": "PT-2", "certificate": "ABC 20 ATEX 0001X"}],
            [f"{X1} they are met for PT-2"],
        ),
        # two numbers in a cell are two certificates
        (
            [{"tag": "PT-1", "certificate": "ABC 20 ATEX 0002 / IECEx ABC 20.0001X"}],
            ["review: IECEx ABC 20.0001X: IECEx ABC 20.0001X has conditions of use (X behind its number); nobody has "
             "recorded that they are met for PT-1"],
        ),
        # the X stands behind the marking
        (
            [{"tag": "PT-1", "certificate": "ABC 20 ATEX 0002", "Ex marking": "Ex db IIC T4 Gb X"}],
            ["review: ABC 20 ATEX 0002: ABC 20 ATEX 0002 has conditions of use (X behind the marking); nobody has "
             "recorded that they are met for PT-1"],
        ),
        # a form that is not known
        (
            [{"tag": "PT-1", "certificate": "ABC-4471 X"}],
            ["review: ABC-4471X: ABC-4471X has conditions of use (X behind its number, a number of a form that is not "
             "known); nobody has recorded that they are met for PT-1"],
        ),
        ([{"tag": "PT-1", "certificate": "E-20417"}], []),
        ([{"tag": "PT-1", "certificate": "ABC 20 ATEX 0001U"}], []),
        ([{"tag": "PT-1", "certificate": ""}], []),
    ],
)  # fmt: skip
def test_conditions_of_use(rows: list[dict[str, str]], expected: list[str]) -> None:
    assert told("HAZ12", *rows) == expected


@pytest.mark.parametrize(
    ("certificate", "expected"),
    [
        ("ABC 20 ATEX 0001", {"clear": 1}),
        ("E-20417", {"unchecked": 1}),
        ("ABC 20 ATEX 0001U", {"not applicable": 1}),
        ("ABC 20 ATEX 0001X", {"review": 1}),
        ("ABC 20 ATEX 0001X; ABC 20 ATEX 0002", {"clear": 1, "review": 1}),
        ("", {}),
    ],
)
def test_a_number_without_x_is_clear_by_an_assumption(certificate: str, expected: dict[str, int]) -> None:
    row = {"tag": "PT-1", "area": "A", "Ex marking": "Ex db IIC T4 Gb", "certificate": certificate}
    assert outcomes("HAZ12", [row], areas=[GAS]) == expected


def test_what_is_assumed_of_a_number_without_x_is_listed_once() -> None:
    rows = [
        {"tag": f"PT-{number}", "area": "A", "Ex marking": "Ex db IIC T4 Gb", "certificate": f"ABC 20 ATEX 000{number}"}
        for number in (1, 2)
    ]
    result = audit(example_plant(rows, areas=[GAS]), codes=["HAZ12"], raise_errors=True)
    assert [each for each in result.assumptions if "without X" in each] == [
        "a certificate whose number is written without X is taken to have no conditions of use"
    ]


U1 = "ABC 20 ATEX 0001U: ABC 20 ATEX 0001U is of a component (U behind its number) and the only certificate of"


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ([{"tag": "JB-1", "certificate": "ABC 20 ATEX 0001 U"}], [f"{U1} JB-1"]),
        (
            [{"tag": "JB-10", "certificate": "ABC 20 ATEX 0001U"}, {"tag": "JB-2", "certificate": "ABC 20 ATEX 0001U"}],
            [f"{U1} JB-2, JB-10"],
        ),
        ([{"tag": "JB-1", "certificate": "ABC 20 ATEX 0001U; ABC 20 ATEX 0002"}], []),
        ([{"tag": "JB-1", "certificate": "ABC 20 ATEX 0001U", "Ex marking": "Ex eb IIC T6 Gb ABC 20 ATEX 0002"}], []),
        (
            [{"tag": "JB-1", "certificate": "ABC 20 ATEX 0001U; ABC 20 ATEX 0003U"}],
            [f"{U1} JB-1", f"{U1} JB-1".replace("0001", "0003")],
        ),
        (
            [{"tag": "JB-1", "certificate": "ABC 20 ATEX 0001U; ABC 20 ATEX 0002"},
             {"tag": "JB-2", "certificate": "ABC 20 ATEX 0001U"}],
            [f"{U1} JB-2"],
        ),
        (
            [{"tag": "JB-1", "certificate": "ABC 20 ATEX 0002", "Ex marking": "Ex eb IIC Gb U"}],
            ["ABC 20 ATEX 0002: ABC 20 ATEX 0002 is of a component (U behind the marking) and the only certificate of "
             "JB-1"],
        ),
        (
            [{"tag": "JB-1", "certificate": "ABC-4471 U"}],
            ["review: ABC-4471U: ABC-4471U is of a component (U behind its number, a number of a form that is not "
             "known) and the only certificate of JB-1"],
        ),
        ([{"tag": "JB-1", "certificate": "ABC 20 ATEX 0001U", "area": "S"}], []),
        ([{"tag": "JB-1", "certificate": "ABC 20 ATEX 0002X"}], []),
    ],
)  # fmt: skip
def test_components(rows: list[dict[str, str]], expected: list[str]) -> None:
    assert told("HAZ13", *rows) == expected


def test_a_certificate_has_the_cells_of_its_tags() -> None:
    rows = [
        {"tag": "PT-1", "area": "A", "Ex marking": "Ex db IIC T4 Gb", "certificate": "ABC 20 ATEX 0001X",
         "X conditions accepted": ""},
        {"tag": "PT-2", "area": "A", "Ex marking": "Ex db IIC T4 Gb", "certificate": "ABC 20 ATEX 0001X",
         "X conditions accepted": ACCEPTED},
    ]  # fmt: skip
    (found,) = findings("HAZ12", rows, areas=[GAS])
    assert (found.subject, found.off_by, found.outcome) == ("ABC 20 ATEX 0001X", "1 of 2 tags", Outcome.REVIEW)
    assert [cell.address for cell in found.cells] == ["D2", "D3", "E2", "E3"]
    assert found.fixes == ()


def test_no_order_of_rows_changes_what_is_said() -> None:
    rows = [{"tag": f"PT-{number}", "certificate": f"ABC 20 ATEX 000{number % 2}X"} for number in range(1, 6)]
    assert told("HAZ12", *rows) == told("HAZ12", *reversed(rows))
