"""HAZ16 and HAZ18: markings of another scheme, and associated apparatus in an area."""

from __future__ import annotations

import itertools

import pytest

from tests.validation.rules.asked import outcome
from validation.audit import audit
from validation.example import example_plant, findings, said

ZONE = {
    "code": "A",
    "zone": "1",
    "gas group": "IIB",
    "temperature class": "T3",
    "ambient min": "-20",
    "ambient max": "40",
}
DIVISION = {**ZONE, "zone": "", "system": "division", "class": "I", "division": "1", "gas group": "D"}
NONE = {"code": "S", "system": "none"}

EX, ATEX_MARK, EEX = "Ex ia IIC T4 Ga", "II 1 G Ex ia IIC T4 Ga", "EEx ia IIC T4"
AEX, CLASS = "AEx ia IIC T4 Ga", "Class I Div 1 Groups A,B,C,D T4"
DUST = "II 2 D T 80 °C"
# A mark of each scheme, and where it is evidence: from memory, NEC 500.8(A) and 505.9(C), CSA C22.1 section 18.
EVIDENCE = {
    EX: {"IEC", "ATEX", "Canada"},
    ATEX_MARK: {"IEC", "ATEX"},
    EEX: {"IEC", "ATEX"},
    AEX: {"US"},
    CLASS: {"US", "Canada"},
}


def haz16(marking: str, where: dict[str, str], jurisdiction: str, **row: str) -> str:
    here = {"tag": "PT-1", "area": "A", "Ex marking": marking, **row}
    told = outcome("HAZ16", [here], areas=[{**where, "jurisdiction": jurisdiction}])
    return told.partition(", assumed")[0]


@pytest.mark.parametrize(
    ("marking", "jurisdiction"), list(itertools.product(EVIDENCE, ("IEC", "ATEX", "US", "Canada"))), ids=str
)
def test_every_scheme_under_every_jurisdiction(marking: str, jurisdiction: str) -> None:
    expected = "clear" if jurisdiction in EVIDENCE[marking] else "review"
    assert haz16(marking, ZONE, jurisdiction) == expected
    # A zone's mark in a division says nothing outside North America, and neither does a division's in a zone.
    if jurisdiction in ("IEC", "ATEX"):
        assert haz16(marking, DIVISION, jurisdiction) == "review"
    else:
        assert haz16(marking, DIVISION, jurisdiction) == expected


@pytest.mark.parametrize(
    ("marking", "area", "jurisdiction", "row", "expected"),
    [
        # without a jurisdiction nothing can be told, but of a division, which is the US's
        (EX, ZONE, "", {}, "unchecked: area jurisdiction"),
        (CLASS, ZONE, "", {}, "unchecked: area jurisdiction"),
        (CLASS, DIVISION, "", {}, "clear"),
        (EX, DIVISION, "", {}, "review"),
        # marked twice: one that fits is enough, if it fits in all else
        (f"{EX}; {CLASS}", ZONE, "ATEX", {}, "clear"),
        (f"{CLASS}; {EX}", ZONE, "ATEX", {}, "clear"),
        (f"{EX}; {AEX}", ZONE, "US", {}, "clear"),
        (f"{EX}; {CLASS}", DIVISION, "US", {}, "clear"),
        (f"{EX}; AEx ic IIC T4 Gc", ZONE, "US", {}, "review"),
        (f"{EX}; AEx ia IIA T4 Ga", ZONE, "US", {}, "review"),
        # certificates of another scheme
        (EX, ZONE, "ATEX", {"certificate": "IECEx ABC 20.0001"}, "review"),
        (ATEX_MARK, ZONE, "ATEX", {"certificate": "IECEx ABC 20.0001"}, "clear"),
        (EX, ZONE, "ATEX", {"certificate": "IECEx ABC 20.0001 / ABC 20 ATEX 0001"}, "clear"),
        (EX, ZONE, "ATEX", {"certificate": "ABC 20 ATEX 0001"}, "clear"),
        (EX, ZONE, "ATEX", {"certificate": "E-20417"}, "clear"),
        (EX, ZONE, "IEC", {"certificate": "IECEx ABC 20.0001"}, "clear"),
        (EX, ZONE, "Canada", {"certificate": "IECEx ABC 20.0001"}, "review"),
        (EX, ZONE, "Canada", {"certificate": "E-20417"}, "clear"),
        # no marking, or none that speaks of its own place
        ("", ZONE, "ATEX", {}, "unchecked: Ex marking"),
        ("EExe approved", ZONE, "ATEX", {}, "unchecked: Ex marking"),
        ("[Ex ia Ga] IIC", ZONE, "US", {}, "not applicable"),
        (EX, ZONE, "ATEX", {"area": "S"}, "unchecked: area"),
    ],
)
def test_schemes(marking: str, area: dict[str, str], jurisdiction: str, row: dict[str, str], expected: str) -> None:
    assert haz16(marking, area, jurisdiction, **row) == expected


def test_an_old_dust_mark_is_the_eus() -> None:
    area = {"code": "A", "zone": "21", "dust group": "IIIB", "permitted dust surface temperature": "150"}
    assert [haz16(DUST, area, where) for where in ("ATEX", "IEC", "US")] == ["clear", "review", "review"]


def test_a_division_in_a_rows_own_cell_is_read_as_us_in_a_plant_of_the_eu() -> None:
    rows = [{"tag": "PT-1", "area classification": "Class I Div 2 Gr D T3", "Ex marking": CLASS}]
    result = audit(example_plant(rows, plant={"jurisdiction": "ATEX"}), codes=["HAZ16"], raise_errors=True)
    assert result.findings == []
    assert "areas by class and division without a jurisdiction are read as US" in result.assumptions
    assert said("HAZ16", [{**rows[0], "Ex marking": ATEX_MARK}], plant={"jurisdiction": "ATEX"}) == [
        "review: PT-1: an Ex mark with an ATEX category is no evidence by itself under the rules of the US: "
        "II 1 G Ex ia IIC T4 Ga, in 'Class I Div 2 Gr D T3'"
    ]


def test_outside_north_america_it_alone_speaks_of_division_against_zone() -> None:
    rows = [{"tag": "PT-1", "area": "A", "Ex marking": "Class I Div 2 Groups C,D T4"}]
    areas = [{**ZONE, "jurisdiction": "ATEX"}]
    spoken = {code: outcome(code, rows, areas=areas) for code in ("HAZ03", "HAZ04", "HAZ09", "HAZ10", "HAZ11", "HAZ16")}
    assert spoken == {
        "HAZ03": "unchecked: Ex marking",
        "HAZ04": "unchecked: Ex marking",
        "HAZ09": "not applicable",
        "HAZ10": "unchecked: Ex marking",
        "HAZ11": "unchecked: Ex marking",
        "HAZ16": "review",
    }


def test_what_is_said_has_its_figures_and_cells() -> None:
    rows = [{"tag": "PT-1", "area": "A", "Ex marking": CLASS}]
    (found,) = findings("HAZ16", rows, areas=[{**ZONE, "jurisdiction": "ATEX"}])
    assert found.message == (
        "a mark by class and division is no evidence by itself in a zone under ATEX: "
        "Class I Div 1 Groups A,B,C,D T4, in area A (Zone 1 IIB T3)"
    )
    assert (found.found, found.wanted) == (CLASS, "a marking for ATEX")
    assert [f"{cell.sheet} {cell.address}" for cell in found.cells] == ["Instruments C2", "Areas G2", "Instruments B2"]


# ------------------------------------------------------------------------------------------------------ associated


def haz18(marking: str, where: dict[str, str] = ZONE, **row: str) -> str:
    here = {"tag": "UY-1", "kind": "isolator", "location": "field", "area": "A", "Ex marking": marking, **row}
    return outcome("HAZ18", [here], areas=[where, NONE])


@pytest.mark.parametrize(
    ("marking", "area", "row", "expected"),
    [
        ("[Ex ia Ga] IIC", ZONE, {}, "finding"),
        ("II (1) G [Ex ia Ga] IIC", {**ZONE, "zone": "2"}, {}, "finding"),
        ("Class I Div 1 Groups A,B,C,D associated", DIVISION, {}, "finding"),
        # a marking of its own
        ("Ex ec [ia Ga] IIC T4 Gc", {**ZONE, "zone": "2"}, {}, "clear"),
        ("Ex ec [ia Ga] IIC T4 Gc", ZONE, {}, "clear"),
        ("Ex ec IIC T4 Gc; [Ex ia Ga] IIC", ZONE, {}, "clear"),
        # outside
        ("[Ex ia Ga] IIC", ZONE, {"area": "S"}, "not applicable"),
        ("[Ex ia Ga] IIC", ZONE, {"area": "", "location": ""}, "not applicable"),
        ("[Ex ia Ga] IIC", ZONE, {"location": "control room"}, "not applicable"),
        # where the row names an area the kind's usual place does not count
        ("[Ex ia Ga] IIC", ZONE, {"location": ""}, "finding"),
        ("[Ex ia Ga] IIC", ZONE, {"location": "cabinet"}, "review"),
        # nobody knows
        ("[Ex ia Ga] IIC", ZONE, {"area": ""}, "unchecked: area"),
        ("[Ex ia Ga", ZONE, {}, "unchecked: Ex marking"),
        # of another kind
        ("Ex db IIC T4 Gb", ZONE, {}, "not applicable"),
        ("", ZONE, {}, "not applicable"),
        ("[Ex ia Ga] IIC", ZONE, {"kind": "transmitter", "tag": "PT-1"}, "finding"),
    ],
)
def test_associated_apparatus(marking: str, area: dict[str, str], row: dict[str, str], expected: str) -> None:
    assert haz18(marking, area, **row) == expected


def test_the_rules_about_markings_are_then_not_applicable() -> None:
    rows = [{"tag": "UY-1", "kind": "isolator", "location": "field", "area": "A", "Ex marking": "[Ex ia Ga] IIC"}]
    codes = [f"HAZ{number:02}" for number in range(2, 9)]
    assert {outcome(code, rows, areas=[ZONE]) for code in codes} == {"not applicable"}


def test_one_that_is_marked_for_the_area_is_offered() -> None:
    types = [
        {"code": "IS-1", "kind": "isolator", "Ex marking": "[Ex ia Ga] IIC"},
        {"code": "IS-2", "kind": "isolator", "Ex marking": "Ex ec [ia Ga] IIC T4 Gc"},
        {"code": "IS-3", "kind": "isolator", "Ex marking": "Ex db [ia Ga] IIC T4 Gb"},
    ]
    rows = [{"tag": "UY-1", "kind": "isolator", "location": "field", "area": "A", "device type": "IS-1"}]
    (found,) = findings("HAZ18", rows, types=types, areas=[{**ZONE, "jurisdiction": "IEC"}])
    assert [(fix.text, dict(fix.change)) for fix in found.fixes] == [
        ("device type IS-3 (Ex db [ia Ga] IIC T4 Gb)", {"device type": "IS-3"}),
        ("a place outside the classified area, or in an enclosure with a protection of its own", {}),
    ]
    assert found.message == (
        "associated apparatus without a marking of its own: [Ex ia Ga] IIC, in area A (Zone 1 IIB T3)"
    )
