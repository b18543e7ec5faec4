"""A range that is one, can exist, and is held by its body."""

from typing import Any

import pytest

from tests.validation.rules.asked import asked, outcome, said_of, unmended, values_of

GAUGE = {
    "code": "G10", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg",
    "minimum span": "0.2 bar", "maximum turndown": "50", "signal": "4-20 mA",
}  # fmt: skip
WIDER = {**GAUGE, "code": "G40", "URL": "40 barg", "minimum span": "0.8 bar"}
WIDEST = {**GAUGE, "code": "G100", "URL": "100 barg", "minimum span": "2 bar"}
NARROW = {**GAUGE, "code": "G2", "URL": "2 barg", "minimum span": "0.05 bar"}
DP = {
    "code": "D60", "kind": "transmitter", "body": "differential", "LRL": "-60 inH2O", "URL": "60 inH2O",
    "signal": "4-20 mA",
}  # fmt: skip
TYPES = [GAUGE, WIDER, WIDEST, NARROW, DP]


def pt(lrv: str, urv: str, **more: Any) -> list[dict[str, Any]]:
    """A pressure transmitter with a range."""
    return [{"tag": "PT-1", "device type": "G10", "LRV": lrv, "URV": urv, **more}]


# ------------------------------------------------------------------------------------------------------------ RNG01


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"LRV": "10 barg", "URV": "10 barg"}, "finding"),
        ({"LRV": "0 barg", "URV": "0 barg"}, "finding"),
        ({"LRV": "0 degC", "URV": "32 degF"}, "finding"),
        ({"LRV": "1000 mbarg", "URV": "1 barg"}, "finding"),
        ({"LRV": "0 barg", "URV": "0 bara"}, "clear"),  # one atmosphere apart
        ({"LRV": "10 barg", "URV": "0 barg"}, "clear"),  # reversed is legal
        ({"LRV": "10 barg", "URV": "10.01 barg"}, "clear"),
        ({"LRV": "0", "URV": "5"}, "unchecked: LRV or system LRV, URV or system URV"),  # no unit (DAT05)
        ({"LRV": "0 barg"}, "unchecked: URV or system URV"),
        ({}, "unchecked: LRV or system LRV, URV or system URV"),
        ({"LRV": "0 barg", "URV": "10 m3/h"}, "unchecked: range unit"),
        ({"system LRV": "3 barg", "system URV": "3 barg"}, "finding"),
        ({"system LRV": "3 barg", "system URV": "4 barg"}, "clear"),
    ],
)
def test_a_range_needs_two_ends_that_differ(row: dict[str, str], expected: str) -> None:
    assert outcome("RNG01", [{"tag": "PT-1", **row}]) == expected


def test_a_range_typed_twice_is_one_finding() -> None:
    row = {"tag": "PT-1", "LRV": "20 barg", "URV": "20 barg", "system LRV": "20 barg", "system URV": "20 barg"}
    assert [said_of(each) for each in asked("RNG01", [row])] == ["LRV and URV are both 20 barg"]


def test_a_system_range_without_span_is_found_beside_a_good_field_range() -> None:
    row = {"tag": "PT-1", "LRV": "0 barg", "URV": "20 barg", "system LRV": "20 barg", "system URV": "20 barg"}
    found = asked("RNG01", [row])
    assert [(each.part, each.message) for each in found] == [("system range", "system LRV and URV are both 20 barg")]


@pytest.mark.parametrize("tag", ["XV-1", "TW-1", "HS-1", "LG-1"])
def test_no_range_is_asked_of_what_does_not_measure(tag: str) -> None:
    assert outcome("RNG01", [{"tag": tag, "service": "x"}]) == "not applicable"


def test_an_element_beside_its_transmitter_is_asked_for_no_range() -> None:
    rows = [{"tag": "TE-1", "signal": "Pt100"}, {"tag": "TT-1", "LRV": "0 degC", "URV": "100 degC"}]
    assert outcome("RNG01", rows, "TE-1") == "not applicable"
    assert outcome("RNG01", rows[:1], "TE-1") == "unchecked: LRV or system LRV, URV or system URV"


@pytest.mark.parametrize("code", ["RNG02", "RNG03", "RNG04", "RNG06", "RNG07", "RNG08", "RNG15", "RNG16"])
def test_without_span_no_other_question_has_an_answer(code: str) -> None:
    row = pt("12 barg", "12 barg", **{"operating pressure max": "99 barg", "operating pressure normal": "1 barg"})
    assert outcome(code, row, types=TYPES) == "not applicable"


# ------------------------------------------------------------------------------------------------------------ RNG02


@pytest.mark.parametrize(
    ("lrv", "urv", "expected"),
    [
        ("0 barg", "10 barg", []),
        ("0 barg", "10.000000005 barg", []),  # 1e-9 of slack
        ("0 barg", "10.0000001 barg", ["URV 10 barg is above the body's URL 10 barg by 0.0000001 bar"]),
        ("0 barg", "10.1 barg", ["URV 10.1 barg is above the body's URL 10 barg by 0.1 bar"]),
        ("-1 barg", "10 barg", []),
        ("-1.01 barg", "9 barg", ["LRV -1.01 barg is below the body's LRL -1 barg by 0.01 bar"]),
        ("12 barg", "0 barg", ["LRV 12 barg is above the body's URL 10 barg by 2 bar"]),  # reversed
        ("10 barg", "-1 barg", []),
        ("0 psig", "150 psig", ["URV 150 psig is above the body's URL 10 barg by 4.96226 psi"]),
        ("0 psig", "145 psig", []),
        ("0 bar", "10 bar", []),  # takes the body's reference
        (
            "-2 barg",
            "12 barg",
            [
                "LRV -2 barg is below the body's LRL -1 barg by 1 bar",
                "URV 12 barg is above the body's URL 10 barg by 2 bar",
            ],
        ),
    ],
)
def test_both_ends_of_a_range_must_lie_in_the_body(lrv: str, urv: str, expected: list[str]) -> None:
    assert [said_of(each) for each in asked("RNG02", pt(lrv, urv), types=TYPES)] == expected


@pytest.mark.parametrize(
    ("row", "types", "expected"),
    [
        ({"LRV": "0 barg"}, TYPES, "unchecked: URV"),
        ({"URV": "5 barg"}, TYPES, "unchecked: LRV"),
        ({"LRV": "0 barg", "URV": "5 barg"}, [{**GAUGE, "LRL": ""}], "unchecked: LRL"),
        ({"LRV": "0 barg", "URV": "5 barg"}, [{**GAUGE, "URL": ""}], "unchecked: URL"),
        ({"LRV": "0 barg", "URV": "50 barg"}, [{**GAUGE, "LRL": ""}], "finding"),  # wrong whatever the LRL is
        ({"LRV": "0 barg", "URV": "5 barg"}, [{**GAUGE, "LRL": "", "URL": ""}], "unchecked: LRL or URL"),
        ({"LRV": "0 barg", "URV": "5 barg", "device type": ""}, TYPES, "unchecked: LRL or URL"),
        (
            {"LRV": "0 barg", "URV": "5 barg"},
            [{**GAUGE, "LRL": "10 barg", "URL": "0 barg"}],
            "unchecked: LRL below URL",
        ),
        ({"LRV": "0 bara", "URV": "50 bara"}, TYPES, "unchecked: reference (RNG06)"),
        ({"LRV": "0 mm", "URV": "500 mm"}, TYPES, "unchecked: range in the unit of the body's limits"),
        ({"LRV": "0", "URV": "5"}, TYPES, "unchecked: LRV, URV"),
    ],
)
def test_a_blank_leaves_the_body_unchecked(row: dict[str, str], types: list[dict[str, Any]], expected: str) -> None:
    assert outcome("RNG02", [{"tag": "PT-1", "device type": "G10", **row}], types=types) == expected


def test_limits_that_the_row_states_come_before_the_catalogue_s() -> None:
    row = pt("0 barg", "12 barg", URL="16 barg")
    assert outcome("RNG02", row, types=TYPES) == "clear"
    assert outcome("RNG02", pt("0 barg", "12 barg", URL="11 barg"), types=TYPES) == "finding"


def test_a_gauge_range_on_a_differential_body_is_compared_as_it_stands() -> None:
    row = {"tag": "PT-1", "device type": "D60", "LRV": "0 mbarg", "URV": "149 mbarg"}
    assert outcome("RNG02", [row], types=TYPES) == "clear"
    assert outcome("RNG02", [{**row, "URV": "150 mbarg"}], types=TYPES) == "finding"


@pytest.mark.parametrize(
    ("lrv", "urv", "change"),
    [
        ("0 barg", "16 barg", {"URV": "10 barg"}),
        ("-84 mbarg", "-1.2 barg", {"LRV": "0.116 barg", "URV": "-1 barg"}),
        ("16 barg", "0 barg", {"LRV": "10 barg"}),
        ("8 barg", "12 barg", {"LRV": "6 barg", "URV": "10 barg"}),
        ("0 psig", "200 psig", {"URV": "145.037 psig"}),  # rounded to the inside
        ("0 barg", "10.5 barg", {"URV": "10 barg"}),  # shortened, not lifted off its zero
    ],
)
def test_the_nearest_range_inside_is_worked_out(lrv: str, urv: str, change: dict[str, str]) -> None:
    found = asked("RNG02", pt(lrv, urv), types=[GAUGE])
    assert values_of(found[0].fixes) == [change]
    assert unmended("RNG02", pt(lrv, urv), types=[GAUGE]) == []


def test_a_system_range_that_is_the_field_s_goes_with_it() -> None:
    row = pt("0 barg", "16 barg", **{"system LRV": "0 kPag", "system URV": "1600 kPag"})
    assert values_of(asked("RNG02", row, types=[GAUGE])[0].fixes) == [{"URV": "10 barg", "system URV": "1000 kPag"}]
    other = pt("0 barg", "16 barg", **{"system LRV": "0 kPag", "system URV": "1500 kPag"})
    assert values_of(asked("RNG02", other, types=[GAUGE])[0].fixes) == [{"URV": "10 barg"}]


def test_device_types_that_hold_the_range_are_named_narrowest_first() -> None:
    row = pt("0 barg", "16 barg")
    fixes = asked("RNG02", row, types=TYPES)[0].fixes
    assert [fix.text for fix in fixes] == [
        "nearest range inside the body: 0 to 10 barg",
        "device type G40 (-1 to 40 barg)",
        "device type G100 (-1 to 100 barg)",
    ]
    assert values_of(fixes)[1:] == [{"device type": "G40"}, {"device type": "G100"}]
    assert unmended("RNG02", row, types=TYPES) == []


@pytest.mark.parametrize(
    ("other", "why"),
    [
        ({"kind": "switch"}, "another kind"),
        ({"body": "absolute", "LRL": "0 bara", "URL": "40 bara"}, "another body"),
        ({"LRL": "0 mm", "URL": "4000 mm"}, "another dimension"),
        ({"signal": "contact"}, "another signal"),
        ({"minimum span": "20 bar"}, "cannot be set so narrow"),
        ({"maximum turndown": "2"}, "turned down too far"),
        ({"over-range limit": "50 barg"}, "over-ranged by the design pressure"),
        ({"process temperature limit min": "-10 degC", "process temperature limit max": "90 degC"}, "too hot"),
    ],
)
def test_a_device_type_that_would_fail_is_not_named(other: dict[str, str], why: str) -> None:
    row = pt("0 barg", "16 barg", mounting="direct", **{"design pressure": "60 barg", "design temperature": "100 degC"})
    fixes = asked("RNG02", row, types=[GAUGE, {**WIDER, **other}])[0].fixes
    assert values_of(fixes) == [{"URV": "10 barg"}], why
    assert len(asked("RNG02", row, types=[GAUGE, WIDER])[0].fixes) == 2


def test_at_most_three_types_are_named_and_those_with_the_same_marking_first() -> None:
    many = [{**WIDER, "code": f"W{number}", "URL": f"{number} barg"} for number in (60, 40, 50, 30)]
    fixes = asked("RNG02", pt("0 barg", "16 barg"), types=[GAUGE, *many])[0].fixes
    assert [fix.change["device type"] for fix in fixes[1:]] == ["W30", "W40", "W50"]
    marking = {"Ex marking": "II 2 G Ex db IIC T5 Gb"}
    fixes = asked("RNG02", pt("0 barg", "16 barg"), types=[{**GAUGE, **marking}, WIDER, {**WIDEST, **marking}])[0].fixes
    assert values_of(fixes)[1:] == [{"device type": "G100"}]


def test_no_other_type_is_named_where_the_row_states_the_limit_itself() -> None:
    row = pt("0 barg", "16 barg", URL="10 barg")
    assert values_of(asked("RNG02", row, types=TYPES)[0].fixes) == [{"URV": "10 barg"}]


# ------------------------------------------------------------------------------------------------------------ RNG03


@pytest.mark.parametrize(
    ("lrv", "urv", "expected"),
    [
        ("0 barg", "0.2 barg", []),
        ("0.1 barg", "0.3 barg", []),  # 0.19999999999999998 in floating point
        ("0 barg", "0.19 barg", ["the span 0.19 bar is below the body's minimum span 0.2 bar by 0.01 bar"]),
        ("0.19 barg", "0 barg", ["the span 0.19 bar is below the body's minimum span 0.2 bar by 0.01 bar"]),
        ("5 barg", "5.1 barg", ["the span 0.1 bar is below the body's minimum span 0.2 bar by 0.1 bar"]),
        ("0 kPag", "19 kPag", ["the span 19 kPa is below the body's minimum span 20 kPa by 1 kPa"]),
    ],
)
def test_a_span_is_at_least_the_body_s_minimum(lrv: str, urv: str, expected: list[str]) -> None:
    assert [said_of(each) for each in asked("RNG03", pt(lrv, urv), types=TYPES)] == expected


@pytest.mark.parametrize(
    ("minimum", "urv", "expected"),
    [
        ("10 K", "10 degC", "clear"),
        ("10 K", "9 degC", "finding"),
        ("18 degF", "10 degC", "clear"),  # a difference of temperature has no offset
        ("18 degF", "9.9 degC", "finding"),
        ("10 degC", "9.9 degC", "finding"),
        ("", "1 degC", "unchecked: minimum span"),
        ("10 mm", "5 degC", "unchecked: range in the unit of the body's limits"),
    ],
)
def test_a_minimum_span_is_a_difference(minimum: str, urv: str, expected: str) -> None:
    types = [{"code": "T", "kind": "transmitter", "LRL": "-200 degC", "URL": "850 degC", "minimum span": minimum}]
    assert outcome("RNG03", [{"tag": "TT-1", "device type": "T", "LRV": "0 degC", "URV": urv}], types=types) == expected


@pytest.mark.parametrize(
    ("lrv", "urv", "change"),
    [
        ("5 barg", "5.1 barg", {"URV": "5.2 barg"}),
        ("9.9 barg", "10 barg", {"LRV": "9.8 barg"}),
        ("5.1 barg", "5 barg", {"URV": "4.9 barg"}),
    ],
)
def test_the_smallest_span_is_worked_out(lrv: str, urv: str, change: dict[str, str]) -> None:
    types = [{**GAUGE, "maximum turndown": "100"}]
    assert values_of(asked("RNG03", pt(lrv, urv), types=types)[0].fixes) == [change]
    assert unmended("RNG03", pt(lrv, urv), types=types) == []


def test_the_smallest_span_heeds_the_turndown_too() -> None:
    found = asked("RNG03", pt("0 barg", "0.1 barg"), types=[{**GAUGE, "maximum turndown": "10"}, NARROW])
    assert values_of(found[0].fixes) == [{"URV": "1 barg"}, {"device type": "G2"}]


def test_mixed_references_leave_the_span_unchecked() -> None:
    assert outcome("RNG03", pt("0 bara", "0.1 bara"), types=TYPES) == "unchecked: reference (RNG06)"


# ------------------------------------------------------------------------------------------------------------ RNG04

FIVE = {"numbering": "parallel", "RNG04 maximum turndown": "5"}


@pytest.mark.parametrize(
    ("turndown", "expected"),
    [
        ("5", []),  # exactly 5:1 passes
        ("4.9999", ["the span 100 bar of a body 0 to 500 barg is a turndown of 5:1, at most 4.9999:1 by its type"]),
        ("3", ["the span 100 bar of a body 0 to 500 barg is a turndown of 5:1, at most 3:1 by its type"]),
    ],
)
def test_the_span_makes_the_turndown_and_not_the_urv(turndown: str, expected: list[str]) -> None:
    types = [{**GAUGE, "LRL": "0 barg", "URL": "500 barg", "maximum turndown": turndown}]
    assert [said_of(each) for each in asked("RNG04", pt("300 barg", "400 barg"), types=types)] == expected


@pytest.mark.parametrize(
    ("types", "plant", "urv", "expected"),
    [
        ([{**GAUGE, "maximum turndown": ""}], {}, "0.1 barg", "not applicable"),  # its minimum span speaks
        ([{**GAUGE, "maximum turndown": "", "minimum span": ""}], {}, "0.1 barg", "unchecked: maximum turndown"),
        (
            [{**GAUGE, "maximum turndown": ""}],
            FIVE,
            "2 barg",
            "clear",
        ),
        (
            [{**GAUGE, "maximum turndown": ""}],
            FIVE,
            "1.9 barg",
            "finding",
        ),
        (
            [GAUGE],
            FIVE,
            "1.9 barg",
            "clear",
        ),  # the type's own comes first
        ([{**GAUGE, "URL": ""}], {}, "1 barg", "unchecked: URL"),
        ([{**GAUGE, "LRL": ""}], {}, "1 barg", "unchecked: LRL"),
        ([{**GAUGE, "LRL": ""}], {}, "0.1 barg", "finding"),
        (
            [{**GAUGE, "LRL": "-20 barg"}],
            {**FIVE, "RNG04 maximum turndown": "3"},
            "0.3 barg",
            "finding",
        ),  # abs(LRL) counts
    ],
)
def test_the_turndown_is_the_type_s_else_the_plant_s(
    types: list[dict[str, str]], plant: dict[str, str], urv: str, expected: str
) -> None:
    assert outcome("RNG04", pt("0 barg", urv), types=types, plant=plant) == expected


@pytest.mark.parametrize(
    ("tag", "lrl", "url", "urv"), [("LT-1", "0 m", "20 m", "1 m"), ("TT-1", "-200 °C", "850 °C", "10 °C")]
)
def test_no_turndown_is_asked_of_other_bodies(tag: str, lrl: str, url: str, urv: str) -> None:
    types = [{"code": "X", "kind": "transmitter", "LRL": lrl, "URL": url, "maximum turndown": "5"}]
    row = {"tag": tag, "device type": "X", "LRV": urv.replace("1", "0"), "URV": urv}
    assert outcome("RNG04", [row], types=types) == "not applicable"


def test_no_turndown_is_asked_of_a_dial() -> None:
    assert outcome("RNG04", [{"tag": "PG-1", "LRV": "0 bar", "URV": "10 bar"}]) == "not applicable"


def test_a_body_for_the_span_comes_before_a_wider_span() -> None:
    rows = pt("0 barg", "0.1 barg")
    fixes = asked("RNG04", rows, types=[{**GAUGE, "minimum span": "0.05 bar"}, NARROW])[0].fixes
    assert values_of(fixes) == [{"device type": "G2"}, {"URV": "0.2 barg"}]
    assert unmended("RNG04", rows, types=[{**GAUGE, "minimum span": "0.05 bar"}, NARROW]) == []


# ------------------------------------------------------------------------------------------------------------ RNG05

SHIFTED = {**GAUGE, "code": "S", "URL": "6 barg", "LRL": "-1 barg", "zero shift limit": "15"}
TOO_FAR = "shifts the zero by more than 0.9 bar, 15 % of the body's URL 6 barg"


@pytest.mark.parametrize(
    ("lrv", "urv", "expected"),
    [
        ("0.9 barg", "5 barg", []),
        ("-0.9 barg", "2 barg", []),
        ("0.91 barg", "5 barg", ["LRV 0.91 barg shifts the zero by more than 0.9 bar, 15 % of the body's URL 6 barg"]),
        (
            "-0.91 barg",
            "2 barg",
            ["LRV -0.91 barg shifts the zero by more than 0.9 bar, 15 % of the body's URL 6 barg"],
        ),
        ("5 barg", "0.9 barg", []),  # the zero of a reversed range is its lower end
        ("5 barg", "1 barg", ["URV 1 barg shifts the zero by more than 0.9 bar, 15 % of the body's URL 6 barg"]),
    ],
)
def test_the_zero_is_shifted_no_further_than_the_type_allows(lrv: str, urv: str, expected: list[str]) -> None:
    row = [{"tag": "PT-1", "device type": "S", "LRV": lrv, "URV": urv}]
    assert [said_of(each) for each in asked("RNG05", row, types=[SHIFTED])] == expected
    assert unmended("RNG05", row, types=[SHIFTED]) == []


def test_the_nearest_lrv_keeps_the_span() -> None:
    found = asked("RNG05", [{"tag": "PT-1", "device type": "S", "LRV": "2 barg", "URV": "5 barg"}], types=[SHIFTED])
    assert values_of(found[0].fixes) == [{"LRV": "0.9 barg", "URV": "3.9 barg"}]
    back = asked("RNG05", [{"tag": "PT-1", "device type": "S", "LRV": "5 barg", "URV": "2 barg"}], types=[SHIFTED])
    assert values_of(back[0].fixes) == [{"LRV": "3.9 barg", "URV": "0.9 barg"}]


@pytest.mark.parametrize(
    ("change", "expected"),
    [
        ({"zero shift limit": ""}, "not applicable"),
        ({"URL": ""}, "unchecked: URL"),
    ],
)
def test_a_zero_shift_that_is_not_stated_is_not_asked(change: dict[str, str], expected: str) -> None:
    row = [{"tag": "PT-1", "device type": "S", "LRV": "2 barg", "URV": "5 barg"}]
    assert outcome("RNG05", row, types=[{**SHIFTED, **change}]) == expected


# ------------------------------------------------------------------------------------------------------------ RNG15

NO_TOUCH = "does not touch 0 to 100 %"
NO_PH = "pH ends outside pH 0 to 14"


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"LRV": "-273.15 °C", "URV": "0 °C"}, []),
        ({"LRV": "-274 °C", "URV": "0 °C"}, ["LRV -274 °C is below absolute zero, -273.15 °C"]),
        ({"LRV": "-459.67 °F", "URV": "0 °F"}, []),
        ({"LRV": "-460 °F", "URV": "0 °F"}, ["LRV -460 °F is below absolute zero, -459.67 °F"]),
        ({"LRV": "-1 K", "URV": "100 K"}, ["LRV -1 K is below absolute zero, 0 K"]),
        ({"LRV": "0 bara", "URV": "1 bara"}, []),
        ({"LRV": "-0.1 bara", "URV": "1 bara"}, ["LRV -0.1 bara is below absolute zero, 0 bara"]),
        ({"LRV": "-1.01325 barg", "URV": "1 barg"}, []),
        ({"LRV": "-1.02 barg", "URV": "1 barg"}, ["LRV -1.02 barg is below a full vacuum, -1.01325 barg"]),
        ({"LRV": "1 barg", "URV": "-1.5 barg"}, ["URV -1.5 barg is below a full vacuum, -1.01325 barg"]),
        # A full vacuum as the trade writes it: each a little more than there is.
        ({"LRV": "-14.7 psig", "URV": "300 psig"}, []),
        ({"LRV": "-15 psig", "URV": "300 psig"}, []),
        ({"LRV": "-16 psig", "URV": "300 psig"}, ["LRV -16 psig is below a full vacuum, -14.6959 psig"]),
        ({"LRV": "-30 inHg(g)", "URV": "0 inHg(g)"}, []),
        ({"LRV": "30 inHg vac", "URV": "0 inHg vac"}, []),
        ({"LRV": "-760 mmHg(g)", "URV": "0 mmHg(g)"}, []),
        ({"LRV": "-1.033 kg/cm2(g)", "URV": "2 kg/cm2(g)"}, []),
        # Without a reference it can only be gauge; of a level or a flow it may be differential.
        ({"LRV": "-0.5 bar", "URV": "1 bar"}, []),
        ({"LRV": "-1.5 bar", "URV": "1 bar"}, ["LRV -1.5 bar is below a full vacuum, -1.01325 bar"]),
        ({"tag": "LT-1", "LRV": "-1500 mbar", "URV": "-100 mbar"}, []),
        ({"tag": "FT-1", "LRV": "-1500 mbar", "URV": "1500 mbar"}, []),
        ({"tag": "PDT-1", "LRV": "-1500 mbar", "URV": "1500 mbar"}, []),
        ({"tag": "TDT-1", "LRV": "-300 °C", "URV": "300 °C"}, []),
        ({"tag": "LT-1", "LRV": "100 %", "URV": "200 %"}, []),  # touches
        ({"tag": "LT-1", "LRV": "101 %", "URV": "200 %"}, [f"a range of 101 to 200 % {NO_TOUCH}"]),
        ({"tag": "LT-1", "LRV": "-20 %", "URV": "0 %"}, []),
        ({"tag": "LT-1", "LRV": "-20 %", "URV": "-1 %"}, [f"a range of -20 to -1 % {NO_TOUCH}"]),
        ({"tag": "AT-1", "LRV": "200 %LEL", "URV": "300 %LEL"}, [f"a range of 200 to 300 % LEL {NO_TOUCH}"]),
        ({"tag": "AT-1", "LRV": "0 pH", "URV": "14 pH"}, []),
        ({"tag": "AT-1", "LRV": "2 pH", "URV": "15 pH"}, [f"review: a range of 2 to 15 {NO_PH}"]),
        ({"tag": "AT-1", "LRV": "-1 pH", "URV": "15 pH"}, [f"a range of -1 to 15 {NO_PH} at both ends"]),
        ({"tag": "AT-1", "LRV": "15 pH", "URV": "20 pH"}, [f"a range of 15 to 20 {NO_PH} at both ends"]),
        ({"LRV": "0 barg", "URV": "1 barg", "system LRV": "-2 barg", "system URV": "1 barg"},
         ["system LRV -2 barg is below a full vacuum, -1.01325 barg"]),
    ],
)  # fmt: skip
def test_no_range_goes_where_nothing_is(row: dict[str, str], expected: list[str]) -> None:
    tag = "TT-1" if "°" in row["LRV"] or " K" in row["LRV"] else "PT-1"
    assert [said_of(each) for each in asked("RNG15", [{"tag": tag, **row}])] == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"LRV": "0 barg"}, "unchecked: URV or system URV"),
        ({"LRV": "0", "URV": "5"}, "unchecked: LRV or system LRV, URV or system URV"),
        ({"LRV": "0 barg", "URV": "5 m3/h"}, "unchecked: range unit"),
        ({"LRV": "0 barg", "URV": "5 barg"}, "clear"),
    ],
)
def test_a_blank_range_is_no_possible_range(row: dict[str, str], expected: str) -> None:
    assert outcome("RNG15", [{"tag": "PT-1", **row}]) == expected


def test_the_body_says_what_an_unstated_range_is() -> None:
    types = [{"code": "A", "kind": "transmitter", "body": "absolute", "LRL": "0 bara", "URL": "4 bara"}]
    row = {"tag": "PT-1", "device type": "A", "LRV": "-0.5 bar", "URV": "1 bar"}
    assert [said_of(each) for each in asked("RNG15", [row], types=types)] == [
        "LRV -0.5 bar is below absolute zero, 0 bar"
    ]
