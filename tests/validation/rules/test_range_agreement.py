"""Field, system and redundant neighbours have one range; the square root is taken once, from zero."""

from typing import Any

import pytest

from tests.validation.rules.asked import asked, outcome, said_of, unmended, values_of

# ------------------------------------------------------------------------------------------------------------ RNG09


def two(lrv: str, urv: str, system_lrv: str, system_urv: str, **more: Any) -> list[dict[str, Any]]:
    """A transmitter with a field range and a range in the system."""
    return [{"tag": "PT-1", "LRV": lrv, "URV": urv, "system LRV": system_lrv, "system URV": system_urv, **more}]


@pytest.mark.parametrize(
    ("ends", "expected"),
    [
        (("0 barg", "10 barg", "0 barg", "10 barg"), []),
        (("0 barg", "10 barg", "0 MPag", "1 MPag"), []),
        (("0 barg", "10 barg", "0 bar", "10 bar"), []),  # the range says what the instrument is
        (("0 bar", "10 bar", "0 barg", "10 barg"), []),
        (("0 °C", "100 °C", "32 °F", "212 °F"), []),
        (("0 barg", "10 barg", "0 barg", "10.000005 barg"), []),  # 1e-6 of the span
        (
            ("0 barg", "10 barg", "0 barg", "10.00002 barg"),
            ["the field range is 0 to 10 barg, the range in the control system 0 to 10.00002 barg"],
        ),
        (
            ("0 barg", "10 barg", "0 psig", "145 psig"),
            ["the field range is 0 to 10 barg, the range in the control system 0 to 145 psig (0 to 9.9974 barg)"],
        ),
        (
            ("0 barg", "10 barg", "10 barg", "0 barg"),
            ["the field range is 0 to 10 barg, the range in the control system 10 to 0 barg"],
        ),
        (("10 barg", "0 barg", "10 barg", "0 barg"), []),
        (
            ("-20 °C", "60 °C", "0 °C", "60 °C"),
            ["the field range is -20 to 60 °C, the range in the control system 0 to 60 °C"],
        ),
    ],
)
def test_field_and_system_have_one_range(ends: tuple[str, str, str, str], expected: list[str]) -> None:
    assert [said_of(each) for each in asked("RNG09", two(*ends))] == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"LRV": "0 mbar", "URV": "250 mbar", "system LRV": "0 m3/h", "system URV": "100 m3/h"},
         "unchecked: field and system range of one dimension"),
        ({"LRV": "0 barg", "URV": "10 barg"}, "unchecked: system LRV, system URV"),
        ({"LRV": "0 barg", "URV": "10 barg", "system URV": "10 barg"}, "unchecked: system LRV"),
        ({"system LRV": "0 barg", "system URV": "10 barg"}, "unchecked: LRV, URV"),
        ({"LRV": "0 barg", "URV": "10 barg", "system LRV": "0 bara", "system URV": "10 bara"},
         "unchecked: reference (RNG06)"),
        ({"LRV": "0", "URV": "10", "system LRV": "0", "system URV": "10"},
         "unchecked: LRV, URV, system LRV, system URV"),
        ({"LRV": "0 barg", "URV": "10 m", "system LRV": "0 m", "system URV": "10 m"}, "unchecked: range unit"),
        ({"LRV": "0 m", "URV": "10 m", "system LRV": "0 m", "system URV": "10 barg"}, "unchecked: system unit"),
        ({"LRV": "0 barg", "URV": "0 barg", "system LRV": "0 barg", "system URV": "10 barg"}, "not applicable"),
        ({"LRV": "0 barg", "URV": "5 barg", "system LRV": "1 barg", "system URV": "1 barg"}, "not applicable"),
        ({"tag": "PG-1", "LRV": "0 barg", "URV": "10 barg"}, "not applicable"),  # no system
        ({"tag": "PIC-1", "location": "system", "system LRV": "0 barg", "system URV": "10 barg"}, "not applicable"),
    ],
)  # fmt: skip
def test_ranges_that_cannot_be_compared_are_not_clear(row: dict[str, str], expected: str) -> None:
    assert outcome("RNG09", [{"tag": "PT-1", **row}]) == expected


def test_both_ranges_are_shown_in_one_unit_and_either_may_follow() -> None:
    rows = two("0 barg", "10 barg", "0 psig", "150 psig")
    found = asked("RNG09", rows)[0]
    assert (found.found, found.off_by) == ("field 0 to 10 barg, system 0 to 10.3421 barg", "0.342136 bar")
    assert found.working == "0 to 150 psig = 0 to 10.3421 barg"
    assert values_of(found.fixes) == [
        {"system LRV": "0 barg", "system URV": "10 barg"},
        {"LRV": "0 barg", "URV": "10.34213594 barg"},
    ]
    assert unmended("RNG09", rows) == []


def test_only_the_ends_that_differ_are_named() -> None:
    assert asked("RNG09", two("0 barg", "10 barg", "0 barg", "16 barg"))[0].fields == ("URV", "system URV")
    assert asked("RNG09", two("0 barg", "10 barg", "1 barg", "10 barg"))[0].fields == ("LRV", "system LRV")


# ------------------------------------------------------------------------------------------------------------ RNG10

TRIP = {"safety function": "SIF-1", "voting": "2oo3"}


def voters(*ranges: tuple[str, str], **more: Any) -> list[dict[str, Any]]:
    """Transmitters of one safety function."""
    return [
        {"tag": f"PT-1{'ABC'[number]}", "LRV": lrv, "URV": urv, **TRIP, **more}
        for number, (lrv, urv) in enumerate(ranges)
    ]


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (voters(("0 barg", "10 barg"), ("0 barg", "10 barg"), ("0 barg", "10 barg")), []),
        (voters(("0 barg", "10 barg"), ("0 kPag", "1000 kPag"), ("0 MPag", "1 MPag")), []),
        (voters(("0 barg", "10 barg"), ("0 barg", "10 barg"), ("0 barg", "16 barg")), [
            "redundant, and their ranges differ: PT-1A 0 to 10 barg; PT-1B 0 to 10 barg; PT-1C 0 to 16 barg"]),
        (voters(("0 barg", "10 barg"), ("10 barg", "0 barg")), [
            "redundant, and their ranges differ: PT-1A 0 to 10 barg; PT-1B 10 to 0 barg"]),
        (voters(("0 barg", "10 barg"), ("0 bara", "10 bara")), [
            "redundant, and their ranges differ: PT-1A 0 to 10 barg; PT-1B 0 to 10 bara"]),
        (voters(("0 barg", "10 barg"), ("1.01325 bara", "11.01325 bara")), []),
        (voters(("0 barg", "10 barg"), ("0 barg", "16 barg"), **{"safety function": "", "voting": ""}), [
            "review: alike but for their suffixes, and their ranges differ: PT-1A 0 to 10 barg; PT-1B 0 to 16 barg"]),
        (voters(("0 barg", "10 barg"), ("0 barg", "10 barg"), **{"safety function": "", "voting": ""}), []),
        (voters(("0 barg", "10 barg"), ("0 barg", "16 barg"), **{"safety function": ""}), [
            "redundant, and their ranges differ: PT-1A 0 to 10 barg; PT-1B 0 to 16 barg"]),
        (voters(("0 barg", "10 barg"), ("0 barg", "16 barg"), voting=""), [
            "redundant, and their ranges differ: PT-1A 0 to 10 barg; PT-1B 0 to 16 barg"]),
    ],
)  # fmt: skip
def test_redundant_devices_have_one_range(rows: list[dict[str, str]], expected: list[str]) -> None:
    assert [said_of(each) for each in asked("RNG10", rows)] == expected


def test_a_group_s_finding_names_all_and_has_all_cells() -> None:
    found = asked("RNG10", voters(("0 barg", "10 barg"), ("0 barg", "16 barg")))[0]
    assert found.subject == "PT-1A, PT-1B"
    assert len(found.cells) == 4


def coverage_of(rows: list[dict[str, str]]) -> dict[str, int]:
    """Return how often RNG10 comes to each outcome."""
    from validation.example import outcomes

    return outcomes("RNG10", rows)


def test_a_range_that_is_blank_is_unchecked_and_the_others_are_compared() -> None:
    rows = voters(("0 barg", "10 barg"), ("0 barg", "16 barg"), ("", ""))
    assert coverage_of(rows) == {"finding": 2, "unchecked": 1}
    assert coverage_of([*rows, {"tag": "PT-2", "LRV": "0 barg", "URV": "1 barg"}]) == {
        "finding": 2, "unchecked": 1, "not applicable": 1,
    }  # fmt: skip


def test_a_level_by_head_and_one_by_radar_are_compared_in_the_system() -> None:
    head = {"tag": "LT-1A", "LRV": "-84 mbar", "URV": "-29 mbar", "system LRV": "0 %", "system URV": "100 %", **TRIP}
    radar = {"tag": "LT-1B", "LRV": "0 m", "URV": "3 m", "system LRV": "0 %", "system URV": "100 %", **TRIP}
    assert asked("RNG10", [head, radar]) == []
    assert len(asked("RNG10", [head, {**radar, "system URV": "80 %"}])) == 1
    without = {key: value for key, value in radar.items() if not key.startswith("system")}
    assert coverage_of([head, without]) == {"unchecked": 2}


def test_field_ranges_of_heads_may_differ_under_one_system_range() -> None:
    system = {"system LRV": "0 %", "system URV": "100 %", **TRIP}
    rows = [
        {"tag": "LT-1A", "LRV": "-84 mbar", "URV": "-29 mbar", **system},
        {"tag": "LT-1B", "LRV": "-80 mbar", "URV": "-25 mbar", **system},
    ]
    assert [said_of(each) for each in asked("RNG10", rows)] == [
        "review: redundant, with one range in the system and several in the field: "
        "LT-1A -84 to -29 mbar; LT-1B -80 to -25 mbar"
    ]


# --------------------------------------------------------------------------------------------------- RNG11 and RNG12

DP_FLOW = {"tag": "FT-1", "LRV": "0 mbar", "URV": "250 mbar"}


@pytest.mark.parametrize(
    ("device", "system", "expected"),
    [
        ("yes", "no", "clear"),
        ("no", "yes", "clear"),
        ("yes", "yes", "finding"),
        ("no", "no", "finding"),
        ("yes", "", "unchecked: square root in system"),
        ("", "no", "unchecked: square root in device"),
        ("", "", "unchecked: square root in device, square root in system"),
    ],
)
def test_the_root_is_taken_once(device: str, system: str, expected: str) -> None:
    rows = [{**DP_FLOW, "square root in device": device, "square root in system": system}]
    assert outcome("RNG11", rows) == expected
    assert unmended("RNG11", rows) == []


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "FT-1", "LRV": "0 m3/h", "URV": "100 m3/h"}, "not applicable"),
        ({"tag": "FT-1", "LRV": "0 m3/h", "URV": "100 m3/h", "device type": "D"}, "finding"),  # the body tells
        ({"tag": "LT-1", "LRV": "0 mbar", "URV": "250 mbar"}, "not applicable"),
        ({"tag": "PDT-1", "LRV": "0 mbar", "URV": "250 mbar"}, "not applicable"),
        ({"tag": "FG-1", "LRV": "0 mbar", "URV": "250 mbar"}, "not applicable"),
        ({"tag": "FIT-1", "LRV": "0 inH2O", "URV": "100 inH2O"}, "finding"),
    ],
)
def test_only_a_flow_by_differential_pressure_takes_a_root(row: dict[str, str], expected: str) -> None:
    types = [{"code": "D", "kind": "transmitter", "body": "differential", "LRL": "-250 mbar", "URL": "250 mbar"}]
    both = {"square root in device": "yes", "square root in system": "yes"}
    assert outcome("RNG11", [{**row, **both}], types=types) == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({}, []),
        ({"LRV": "10 mbar"}, ["a square root is taken, and LRV is 10 mbar, not 0"]),
        ({"LRV": "-10 mbar"}, ["a square root is taken, and LRV is -10 mbar, not 0"]),
        ({"LRV": "250 mbar", "URV": "0 mbar"}, ["a square root is taken, and LRV is 250 mbar, not 0"]),
        ({"square root in device": "no", "square root in system": "yes", "LRV": "10 mbar"},
         ["a square root is taken, and LRV is 10 mbar, not 0"]),
        ({"square root in device": "no", "LRV": "10 mbar"}, []),
        ({"system LRV": "20 m3/h", "system URV": "100 m3/h"},
         ["a square root is taken, and system LRV is 20 m³/h, not 0"]),
        ({"system LRV": "0 m3/h", "system URV": "100 m3/h"}, []),
    ],
)  # fmt: skip
def test_a_root_begins_at_zero(row: dict[str, str], expected: list[str]) -> None:
    rows = [{**DP_FLOW, "square root in device": "yes", "square root in system": "no", **row}]
    assert [said_of(each) for each in asked("RNG12", rows)] == expected
    assert unmended("RNG12", rows) == []


def test_a_root_on_a_blank_range_is_unchecked() -> None:
    assert outcome("RNG12", [{"tag": "FT-1", "square root in device": "yes"}]) == "unchecked: LRV or system LRV"
    in_system = {"system LRV": "0 m3/h", "system URV": "100 m3/h"}
    assert outcome("RNG12", [{"tag": "FT-1", "square root in device": "yes", **in_system}]) == "unchecked: LRV"


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"LRV": "5 mbar"}, "unchecked: square root in device, square root in system"),
        ({"LRV": "5 mbar", "square root in system": "no"}, "unchecked: square root in device"),
        ({"LRV": "5 mbar", "square root in device": "no", "square root in system": "no"}, "not applicable"),
        ({"LRV": "0 mbar"}, "clear"),
        ({"tag": "LT-1", "LRV": "5 mbar"}, "not applicable"),
    ],
)
def test_a_root_that_is_not_stated_is_asked_only_where_it_would_matter(row: dict[str, str], expected: str) -> None:
    assert outcome("RNG12", [{"tag": "FT-1", "URV": "9 mbar", **row}]) == expected
