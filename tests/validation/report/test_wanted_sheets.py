"""Which sheets and columns would let more be checked: counted from the checks that were not made."""

from __future__ import annotations

from collections.abc import Mapping

import pytest

from tests.twin import twin
from tests.validation.report.small_audit import coverage, small_audit
from validation.audit import Audit
from validation.finding import Outcome
from validation.report.wanted_sheets import Wanted, wanted_columns, wanted_sheets

Blanks = Mapping[tuple[str, ...], list[str]]


def unchecked(**blanks: Blanks) -> Audit:
    result = small_audit()
    result.coverage.clear()
    for code, each in blanks.items():
        count = sum(map(len, each.values()))
        result.coverage[code] = coverage(code, 0, 0, 0, count, 0, unchecked=dict(each))
    return result


def sheet(result: Audit, name: str) -> Wanted:
    (found,) = (each for each in wanted_sheets(result) if each.name == name)
    return found


def test_a_check_counts_for_a_sheet_that_brings_all_that_is_blank() -> None:
    result = unchecked(
        ELC05={("HART",): ["a", "b", "c"], ("HART", "range resistor"): ["d"], ("HART", "wires"): ["e", "f"]},
        ELC02={("supply V min or supply V nominal",): ["a"], ("supply V min", "LRV"): ["g"]},
        RNG01={("LRV",): ["a"]},
    )
    assert sheet(result, "Loops") == Wanted(
        name="Loops",
        called="a loop list",
        checks={"ELC02": 1, "ELC05": 4},
        with_others={"ELC02": 1, "ELC05": 2},
        fields={"HART": 6, "supply V min": 2, "range resistor": 1},
    )
    assert str(sheet(result, "Loops")) == "a loop list would let 2 rules check 5 more: ELC05 4, ELC02 1"


@pytest.mark.parametrize(
    ("name", "blank", "checks", "others"),
    [
        ("Areas", ("area",), 1, 0),
        ("Areas", ("area zone", "area ambient max"), 1, 0),
        ("Areas", ("zone",), 0, 0),
        ("Cables", ("cable length",), 1, 0),
        ("Cables", ("length",), 0, 0),
        ("Cable types", ("capacitance", "cable length"), 0, 1),
        # A circuit's kind is no instrument's.
        ("Loops", ("kind",), 0, 0),
        # They are compared with the index, and bring it no values.
        ("IO list", ("I/O address",), 0, 0),
        ("Alarm and trip list", ("H",), 0, 0),
    ],
)
def test_what_a_sheet_brings(name: str, blank: tuple[str, ...], checks: int, others: int) -> None:
    found = next((each for each in wanted_sheets(unchecked(RNG02={blank: ["a"]})) if each.name == name), None)
    assert found is not None
    assert (found.count, sum(found.with_others.values())) == (checks, others)


def test_the_column_that_must_name_its_entries() -> None:
    result = unchecked(RNG02={("area zone",): ["a"] * 1000})
    assert str(sheet(result, "Areas")) == (
        "an area register, with a column 'area' in the index, would let 1 rule check 1,000 more: RNG02 1,000"
    )


def test_the_most_wanted_sheet_first() -> None:
    result = unchecked(RNG02={("area zone",): ["a"], ("HART",): ["a", "b"], ("capacitance", "tag"): ["a", "b", "c"]})
    assert [each.name for each in wanted_sheets(result)][:3] == ["Loops", "Areas", "Cable types"]


def test_columns_together_and_alone() -> None:
    result = unchecked(
        RNG07={("operating value max", "operating value min"): ["a", "b"]},
        RNG16={("operating value min", "operating value max"): ["a"]},
        HAZ01={("area", "area classification"): ["a"]},
        TAG08={("loop",): ["a", "b", "c", "d"], ("tag",): ["e"]},
        RNG02={("URL", "LRV"): ["a"]},
        DAT01={("LRV or system LRV",): ["a"]},
    )
    assert [(each.name, each.count, each.checks) for each in wanted_columns(result)] == [
        ("loop", 4, {"TAG08": 4}),
        ("operating value max, operating value min", 3, {"RNG07": 2, "RNG16": 1}),
        ("LRV", 1, {"DAT01": 1}),
        ("area classification", 1, {"HAZ01": 1}),
    ]


@pytest.mark.parametrize("title", ["Device types", "Areas", "Cables"])
def test_a_sheet_taken_from_the_twin_would_let_about_so_much_be_checked(title: str) -> None:
    without = twin().audit({name: each for name, each in twin().rows.items() if name != title})
    (wanted,) = (each for each in wanted_sheets(without) if each.name == title)
    whole = twin().audit(twin().rows)
    gained = sum(
        without.coverage[code].count(Outcome.UNCHECKED) - whole.coverage[code].count(Outcome.UNCHECKED)
        for code in wanted.checks
    )
    assert wanted.named_in == ""
    assert 0.8 * wanted.count <= gained <= 1.2 * wanted.count
    # It is the one that is wanted most.
    assert [each for each in wanted_sheets(without) if each.count > wanted.count] == []
