"""What a valve falls back to: each kind, each word, the blank and the absent column."""

import pytest

from tests.validation.rules.applied import Row, counts, found, tell, untold

WITHOUT = "{} without a failure position"


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "FV-1"}, WITHOUT.format("a control valve")),
        ({"tag": "XV-1"}, WITHOUT.format("an on/off valve")),
        ({"tag": "SDV-1"}, WITHOUT.format("an on/off valve")),
        ({"tag": "FV-1", "failure position": "TBA"}, WITHOUT.format("a control valve")),
        ({"tag": "FV-1", "failure position": "FO"}, ""),
        ({"tag": "FV-1", "failure position": "fail closed"}, ""),
        # In place counts, and so does a valve that drifts.
        ({"tag": "MOV-1", "failure position": "FL"}, ""),
        ({"tag": "FV-1", "failure position": "drifts closed"}, ""),
        # Self-acting ones are not asked, nor what nothing drives, relief valves, boxes and equipment.
        ({"tag": "PCV-1", "kind": "self-acting regulator"}, ""),
        ({"tag": "PCV-1"}, ""),
        ({"tag": "PCV-1", "I/O type": "AO"}, WITHOUT.format("a control valve")),
        ({"tag": "HV-1"}, ""),
        ({"tag": "PSV-1"}, ""),
        ({"tag": "FY-1", "I/O type": "AO"}, ""),
        ({"tag": "PT-1"}, ""),
        ({"tag": "FV-1", "status": "deleted"}, ""),
        ({"tag": "V-1", "I/O type": "DO"}, ""),
    ],
)
def test_a_driven_valve_has_a_failure_position(row: Row, expected: str) -> None:
    blank = {"failure position": "", "kind": "", "I/O type": "", "line": "L-1"}
    lines = tell("CTL01", {**blank, **row}, {**blank, "tag": "FV-9", "failure position": "FC"})
    assert lines == ([f"{row['tag']}: {expected}"] if expected else [])


def test_a_blank_tells_its_reason() -> None:
    each = found("CTL01", {"tag": "FV-1", "failure position": "by vendor"}, {"tag": "FV-2", "failure position": "FC"})
    assert [(one.found, one.wanted, one.fields) for one in each] == [
        ("blank (by vendor)", "open, closed or in place", ("failure position",))
    ]


@pytest.mark.parametrize(
    ("row", "blanks"),
    [
        ({"tag": "FV-1", "failure position": "sideways"}, {"failure position": 1}),
        ({"tag": "PUMP 7", "failure position": ""}, {"kind": 1}),
    ],
)
def test_what_is_unread_or_unknown_is_unchecked(row: Row, blanks: dict[str, int]) -> None:
    assert untold("CTL01", row, {"tag": "FV-9", "failure position": "FC"}) == blanks
    assert tell("CTL01", row, {"tag": "FV-9", "failure position": "FC"}) == []


@pytest.mark.parametrize(
    ("tags", "expected"),
    [
        (["FV-1", "XV-2", "PT-3"], ["list.xlsx: no sheet has a column for the failure position; 2 valves need one"]),
        (["FV-1"], ["list.xlsx: no sheet has a column for the failure position; 1 valve needs one"]),
        (["PT-3", "PSV-4"], []),
    ],
)
def test_an_absent_column_is_one_finding(tags: list[str], expected: list[str]) -> None:
    assert tell("CTL01", *tags) == expected
    valves = sum(tag[1] == "V" for tag in tags)
    assert untold("CTL01", *tags) == ({"failure position": valves} if expected else {})
    assert counts("CTL01", *tags).get("clear", 0) == 0
