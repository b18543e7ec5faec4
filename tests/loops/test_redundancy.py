"""Which instruments stand in for one another."""

from typing import Any

import pytest

from instruments.measurement import variable_of
from loops.redundancy import (
    Voting,
    how_redundant,
    in_redundant_group,
    read_voting,
    redundant_groups,
    safety_functions,
)
from validation.example import example_plant

Rows = list[dict[str, Any]]


def groups(rows: Rows) -> list[tuple[str, str]]:
    """Return the groups of a plant as tags and what they are known by."""
    found = redundant_groups(example_plant([{"service": "x", **row} for row in rows]))
    return sorted((" ".join(each.name for each in group.members), group.by) for group in found)


def tagged(*tags: str, **more: str) -> Rows:
    """Return rows with these tags and the same other cells."""
    return [{"tag": tag, **more} for tag in tags]


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("2oo3", Voting(2, 3)),
        ("1oo2", Voting(1, 2)),
        ("1oo2D", Voting(1, 2)),
        ("2 oo 3", Voting(2, 3)),
        ("2-oo-3", Voting(2, 3)),
        ("2 out of 3", Voting(2, 3)),
        ("two out of three", Voting(2, 3)),
        ("1 of 2", Voting(1, 2)),
        ("2v3", Voting(2, 3)),
        ("2/3", Voting(2, 3)),
        ("2 von 3", Voting(2, 3)),
        ("2003", Voting(2, 3)),  # zeros typed for letters
        ("2ooN", Voting(2, None)),
        ("SIF-101 2oo3", Voting(2, 3)),
        ("median", Voting(None, None)),
        ("TMR", Voting(None, None)),
        ("1oo1", None),
        ("1oo1D", None),
        ("single", None),
        ("none", None),
        ("No", None),
        ("", None),
        (None, None),
    ],
)
def test_a_voting_is_read_however_it_is_written(text: str | None, expected: Voting | None) -> None:
    assert read_voting(text) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("SIF-101", ("sif-101",)),
        ("SIF 101", ("sif101",)),
        ("SIF-101, SIF-102", ("sif-101", "sif-102")),
        ("SIF-101 and SIF-102", ("sif-101", "sif-102")),
        ("SIF-101; sif-101", ("sif-101",)),
        ("Yes", ()),
        ("x", ()),
        (None, ()),
    ],
)
def test_a_cell_names_one_safety_function_or_several(text: str | None, expected: tuple[str, ...]) -> None:
    assert safety_functions(text) == expected


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        # Declared: one safety function and one measured variable.
        (tagged("PT-1A", "PT-1B", **{"safety function": "SIF-1"}), [("PT-1A PT-1B", "declared")]),
        (tagged("PT-1", "PT-2", **{"safety function": "SIF-1"}), [("PT-1 PT-2", "declared")]),
        (tagged("PT-1", "PSHH-2", **{"safety function": "SIF-1"}), [("PSHH-2 PT-1", "declared")]),
        (tagged("PT-1", "PZT-2", **{"safety function": "sif-1"}), [("PT-1 PZT-2", "declared")]),
        (tagged("PT-1", "PDT-2", **{"safety function": "SIF-1"}), []),
        (tagged("PT-1", "TT-2", **{"safety function": "SIF-1"}), []),
        (tagged("PT-1", "XV-1", "XY-1", "ZSC-1", "ZSO-1", **{"safety function": "SIF-1"}), []),
        # A function of the system is no second measurement, and an element is its transmitter's.
        ([*tagged("PT-1", **{"safety function": "SIF-1"}),
          *tagged("PAHH-1", **{"safety function": "SIF-1", "location": "system"})], []),
        (tagged("TE-1A", "TT-1A", "TE-1B", "TT-1B", **{"safety function": "SIF-1"}),
         [("TT-1A TT-1B", "declared"), ("TE-1A TE-1B", "suffix")]),
        (tagged("TE-1A", "TE-1B", **{"safety function": "SIF-1"}), [("TE-1A TE-1B", "declared")]),
        # Several functions in one cell; a word that is no function's name.
        ([*tagged("PT-1", **{"safety function": "SIF-1, SIF-2"}), *tagged("PT-2", **{"safety function": "SIF-2"})],
         [("PT-1 PT-2", "declared")]),
        (tagged("PT-1", "PT-2", **{"safety function": "Yes"}), []),
        (tagged("PT-1", "PT-2", **{"safety function": "ESD"}), []),  # the name of a system
        (tagged("PT-1A", "PT-1B", **{"safety function": "ESD"}), [("PT-1A PT-1B", "declared")]),
        # The rows tell that they measure two things.
        ([*tagged("PT-1", **{"safety function": "SIF-1", "equipment": "V-1"}),
          *tagged("PT-2", **{"safety function": "SIF-1", "equipment": "V-2"})], []),
        ([*tagged("PT-1", **{"safety function": "SIF-1", "equipment": "V-1"}),
          *tagged("PT-2", **{"safety function": "SIF-1"})], [("PT-1 PT-2", "declared")]),
        ([*tagged("PT-1", **{"safety function": "SIF-1", "trip direction": "high"}),
          *tagged("PT-2", **{"safety function": "SIF-1", "trip direction": "low"})], []),
        ([*tagged("PT-1A", **{"safety function": "SIF-1", "trip direction": "high"}),
          *tagged("PT-1B", **{"safety function": "SIF-1", "trip direction": "low"})], [("PT-1A PT-1B", "declared")]),
        (tagged("PSLL-1", "PSHH-2", **{"safety function": "SIF-1"}), []),
        ([*tagged("AT-1", **{"safety function": "SIF-1", "LRV": "0 pH", "URV": "14 pH"}),
          *tagged("AT-2", **{"safety function": "SIF-1", "LRV": "0 ppm", "URV": "50 ppm"})], []),
        ([*tagged("AT-1", **{"safety function": "SIF-1", "LRV": "0 %LEL", "URV": "100 %LEL"}),
          *tagged("AT-2", **{"safety function": "SIF-1", "LRV": "0 %LEL", "URV": "50 %LEL"})],
         [("AT-1 AT-2", "declared")]),
        # Two votings that are whole without each other.
        (tagged("PT-1A", "PT-1B", "PT-2A", "PT-2B", **{"safety function": "SIF-1", "voting": "1oo2"}),
         [("PT-1A PT-1B", "declared"), ("PT-2A PT-2B", "declared")]),
        (tagged("PT-1", "PT-2", "PT-3", **{"safety function": "SIF-1", "voting": "2oo3"}),
         [("PT-1 PT-2 PT-3", "declared")]),
        # Said to be alone.
        (tagged("PT-1", "PT-2", **{"safety function": "SIF-1", "voting": "1oo1"}), []),
        # Declared voting without a function.
        (tagged("PT-1A", "PT-1B", "PT-1C", voting="2oo3"), [("PT-1A PT-1B PT-1C", "declared")]),
        (tagged("PT-1", "PT-2", "PT-3", voting="2oo3"), [("PT-1 PT-2 PT-3", "declared")]),
        (tagged("PT-1", "PT-2", "PT-3", "PT-4", voting="2oo3"), []),  # which three?
        ([*tagged("PT-1", "PT-2", voting="1oo2", equipment="V-1"),
          *tagged("PT-3", "PT-4", voting="1oo2", equipment="V-2")],
         [("PT-1 PT-2", "declared"), ("PT-3 PT-4", "declared")]),
        (tagged("PT-1A", "PT-1B", voting="median"), [("PT-1A PT-1B", "declared")]),
        (tagged("ZSC-1A", "ZSC-1B", voting="1oo2"), [("ZSC-1A ZSC-1B", "declared")]),
        # Suffixes alone.
        (tagged("PT-1A", "PT-1B"), [("PT-1A PT-1B", "suffix")]),
        (tagged("PT-1", "PT-1A"), [("PT-1 PT-1A", "suffix")]),
        (tagged("PT-1A", "PT-2B"), []),
        (tagged("10-PT-1A", "20-PT-1B"), []),
        (tagged("PT-1A", "PDT-1B"), []),
        (tagged("PV-1A", "PV-1B"), []),  # split range
        (tagged("ZSO-1A", "ZSO-1B"), []),
        (tagged("PT-1A", "PT-1B", voting="1oo1"), [("PT-1A PT-1B", "suffix")]),
        # Some of one number declared, another not: the declared ones, and the question about all.
        ([*tagged("PT-1A", "PT-1B", voting="1oo2"), *tagged("PT-1C")],
         [("PT-1A PT-1B", "declared"), ("PT-1A PT-1B PT-1C", "suffix")]),
        ([*tagged("PT-1A"), *tagged("PT-1B", status="deleted")], []),
    ],
)  # fmt: skip
def test_what_is_redundant_and_by_what(rows: Rows, expected: list[tuple[str, str]]) -> None:
    assert groups(rows) == sorted(expected)


@pytest.mark.parametrize(
    ("remarks", "by"),
    [
        ("2oo3 with B, C", "declared"),
        ("voted 2 oo 3", "declared"),
        ("1oo1", "suffix"),
        ("see 2-3 on sheet 2", "suffix"),
        ("loop test 2003", "suffix"),
        ("no. 2 of 3", "suffix"),
        ("", "suffix"),
    ],
)
def test_a_voting_may_stand_among_the_remarks(remarks: str, by: str) -> None:
    assert groups(tagged("PT-1A", "PT-1B", "PT-1C", remarks=remarks)) == [("PT-1A PT-1B PT-1C", by)]


def test_part_of_a_declared_group_is_still_declared() -> None:
    plant = example_plant([{"service": "x", **row} for row in tagged("PT-1A", "PT-1B", "PT-1C", voting="2oo3")])
    a, b, c = plant.instruments
    assert how_redundant((a, b, c), plant) == how_redundant((a, c), plant) == "declared"
    assert all(in_redundant_group(each, plant) for each in (a, b, c))


def test_suffixes_beside_a_declared_pair_are_known_by_suffix() -> None:
    rows = [*tagged("PT-1A", "PT-1B", voting="1oo2"), *tagged("PT-1C")]
    plant = example_plant([{"service": "x", **row} for row in rows])
    a, b, c = plant.instruments
    assert (how_redundant((a, b), plant), how_redundant((a, b, c), plant)) == ("declared", "suffix")


def test_an_instrument_alone_is_in_no_group() -> None:
    plant = example_plant([{"tag": "PT-1", "service": "x"}])
    assert not in_redundant_group(plant.instruments[0], plant)


def test_the_order_of_rows_changes_no_group() -> None:
    rows = tagged("PT-1A", "PT-1B", "PT-2A", "PT-2B", **{"safety function": "SIF-1", "voting": "1oo2"})
    assert groups(rows) == groups(rows[::-1])


@pytest.mark.parametrize(
    ("tag", "expected"),
    [
        ("PT-1", "P"), ("PDT-1", "PD"), ("PDIT-1", "PD"), ("DPT-1", "PD"), ("PZT-1", "P"), ("PSV-1", "P"),
        ("TDT-1", "TD"), ("FFIC-1", "FF"), ("FQI-1", "FQ"), ("LIT-1", "L"), ("TIR-1", "T"), ("GD-1", ""),
    ],
)  # fmt: skip
def test_the_letters_name_the_measured_variable(tag: str, expected: str) -> None:
    assert variable_of(example_plant([{"tag": tag, "service": "x"}]).instruments[0]) == expected
