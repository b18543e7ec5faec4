"""Parts of a plant: all that one change can touch, and not the rest of a large plant."""

from typing import Any

import pytest

from validation.audit import audit
from validation.cut import Cuts, row_key
from validation.example import example_plant
from validation.finding import Finding, Fix, Outcome, Severity

Row = dict[str, Any]


def finding_on(subject: str) -> Finding:
    return Finding(
        rule="TAG90", severity=Severity.GAP, outcome=Outcome.FINDING, subject=subject, part="", fields=(), message="",
        values={}, found="", wanted="", off_by="", working="", assumed=(), fixes=(), cells=(),
    )  # fmt: skip


ROWS: list[Row] = [
    {"tag": "PT-1A", "safety function": "SIF-1", "I/O address": "A1", "device type": "T1", "area": "Z1"},
    {"tag": "PT-1B", "safety function": "SIF-1", "I/O address": "A2", "device type": "T2", "barrier": "PB-1"},
    {"tag": "LT-2", "safety function": "SIF-2", "I/O address": "A1", "loop": "L-2"},
    {"tag": "LV-2", "loop": "L 2"},
    {"tag": "FT-3", "cable": "C-3"},
    {"tag": "FT-03", "service": "twin"},
    {"tag": "TT-9", "service": "far away", "device type": "T1"},
    {"tag": "PB-1", "kind": "isolator"},
    {"service": "nobody's", "device type": "T2"},
    {"service": "nobody's", "device type": "T1"},
]
SHEETS: dict[str, Any] = {
    "types": [
        {"code": "T1", "kind": "transmitter"},
        {"code": "T2", "kind": "transmitter"},
        {"code": "T3", "kind": "card"},
    ],
    "areas": [{"code": "Z1", "zone": "1"}, {"code": "Z2", "zone": "2"}],
    "loops": [{"number": "L-2", "supply V min": 20}, {"number": "F-3", "supply V min": 21}],
    "cables": [
        {"number": "C-3", "from": "FT-3", "to": "JB-1", "length": 5},
        {"number": "MC-1", "from": "JB-1", "to": "MAR", "length": 9},
        {"number": "C-9", "from": "TT-9", "to": "JB-9", "length": 5},
    ],
}
PLANT = example_plant(ROWS, **SHEETS)


def part_around(subject: str, fix: Fix) -> Any:
    return Cuts(PLANT).around(finding_on(subject), fix).plant


def names(subject: str, fix: Row) -> set[str]:
    return {each.name for each in part_around(subject, Fix(text="x", **fix)).instruments}


@pytest.mark.parametrize(
    ("subject", "fix", "expected"),
    [
        # Redundant partners, and what shares the address.
        ("PT-1A", {"change": {"URV": "1 bar"}}, {"PT-1A", "PT-1B", "LT-2"}),
        # The barrier that is named by its tag.
        ("PT-1B", {"change": {"URV": "1 bar"}}, {"PT-1A", "PT-1B", "PB-1"}),
        # The loop, however its number is written.
        ("LV-2", {"change": {"kind": "on/off valve"}}, {"LT-2", "LV-2"}),
        ("L-2", {"change": {"service": "y"}, "subject": "LT-2"}, {"LT-2", "LV-2", "PT-1A"}),
        # Near twins, now and under the tag that it would have; only a new tag can make or part them.
        ("FT-3", {"change": {"tag": "FT-99"}}, {"FT-3", "FT-03"}),
        ("FT-3", {"change": {"URV": "1 m3/h"}}, {"FT-3"}),
        ("TT-9", {"change": {"tag": "LT-2"}}, {"TT-9", "LT-2", "LV-2"}),
        ("TT-9", {"change": {"tag": "FT-003"}}, {"TT-9", "FT-3", "FT-03"}),
        ("TT-9", {"change": {"loop": "L-2"}}, {"TT-9", "LT-2", "LV-2"}),
        # What has the address that it would have.
        ("TT-9", {"change": {"I/O address": "a2"}}, {"TT-9", "PT-1B"}),
        # A group is all its members; an entry of a catalogue all that name it.
        ("PT-1A, TT-9", {"change": {"tag": "XX-1"}}, {"PT-1A", "PT-1B", "LT-2", "TT-9", "PB-1"}),
        ("LT-2", {"change": {"description": "d"}, "subject": "T1", "sheet": "Device types"},
         {"LT-2", "LV-2", "PT-1A", "PT-1B", "TT-9", "Instruments: nobody's"}),
        # Rows without a tag are told apart by all that are called alike.
        ("Instruments: nobody's (2)", {"change": {"tag": "XX-9"}},
         {"Instruments: nobody's", "Instruments: nobody's (2)", "TT-9"}),
        ("Z1", {"change": {"zone": "2"}, "subject": "Z1", "sheet": "Areas"}, {"PT-1A", "PT-1B", "LT-2"}),
    ],
)  # fmt: skip
def test_who_is_touched(subject: str, fix: Row, expected: set[str]) -> None:
    if "PT-1B" in expected:
        expected = expected | {"PB-1"}
    assert names(subject, fix) == expected


def test_a_part_holds_the_entries_that_it_names_and_no_others() -> None:
    part = part_around("FT-3", Fix(text="x", change={"device type": "T2"}))
    held = {kind: [row_key(row)[2] for row in rows] for kind, rows in part.lists.records.items()}
    assert sorted(part.cables) == ["c-3", "mc-1"]
    assert sorted(part.types) == ["t2"]
    assert [row.number for row in part.loop_rows] == ["F-3"]
    assert len(held["Areas"]) == 1  # lest the sheet should seem absent


def test_what_is_wrong_with_whole_columns_is_the_whole_plants() -> None:
    rows = [{"tag": "LSHH-1", "HH": ""}, {"tag": "LSHH-2", "HH": ""}, {"tag": "TT-3", "HH": "9 °C"}]
    plant = example_plant(rows)
    audit(plant, codes=["SET06"])
    part = Cuts(plant).around(finding_on("LSHH-1"), Fix(text="x", change={"HH": "4 m"})).plant
    assert [each.name for each in part.instruments] == ["LSHH-1"]
    assert [each.subject for each in audit(part, codes=["SET06"]).findings] == ["LSHH-1"]


def test_parts_are_kept_for_the_next_finding_about_the_same() -> None:
    cuts = Cuts(PLANT)
    fix = Fix(text="x", change={"URV": "1 bar"})
    assert cuts.around(finding_on("PT-1A"), fix) is cuts.around(finding_on("PT-1A"), fix)
    assert cuts.around(finding_on("TT-9"), fix) is not cuts.around(finding_on("PT-1A"), fix)
    # A fix that names another entry needs that entry.
    named = cuts.around(finding_on("TT-9"), Fix(text="x", change={"device type": "T3"}))
    assert "t3" in named.plant.types
    assert named is not cuts.around(finding_on("TT-9"), fix)


def test_the_part_of_a_large_plant_is_small() -> None:
    rows = [{"tag": f"PT-{number}", "service": "x", "I/O address": f"A{number}"} for number in range(1, 600)]
    part = Cuts(example_plant(rows)).around(finding_on("PT-300"), Fix(text="x", change={"URV": "1 bar"})).plant
    assert [each.name for each in part.instruments] == ["PT-300"]
