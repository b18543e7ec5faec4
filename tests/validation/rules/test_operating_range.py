"""Where the operating values stand in the range."""

from typing import Any

import pytest

from tests.validation.rules.asked import asked, outcome, said_of, unmended, values_of

TYPES: list[dict[str, Any]] = [
    {"code": "G", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg",
     "minimum span": "0.2 bar"},
    {"code": "A", "kind": "transmitter", "body": "absolute", "LRL": "0 bara", "URL": "10 bara"},
    {"code": "D", "kind": "transmitter", "body": "differential", "LRL": "-250 mbar", "URL": "250 mbar"},
]  # fmt: skip


def operated(low: str, normal: str, high: str, **row: Any) -> list[dict[str, Any]]:
    """An instrument with operating values."""
    values = {"operating value min": low, "operating value normal": normal, "operating value max": high}
    return [{"tag": "FT-1", "LRV": "0 m3/h", "URV": "100 m3/h", **values, **row}]


def pressed(low: str, normal: str, high: str, **row: Any) -> list[dict[str, Any]]:
    """A pressure instrument with operating pressures."""
    values = {"operating pressure min": low, "operating pressure normal": normal, "operating pressure max": high}
    return [{"tag": "PT-1", "LRV": "0 barg", "URV": "10 barg", **values, **row}]


# ------------------------------------------------------------------------------------------------------------ RNG07


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (operated("0 m3/h", "50 m3/h", "100 m3/h"), []),
        (operated("0 m3/h", "50 m3/h", "101 m3/h"),
         ["operating value max 101 m³/h is above the range 0 to 100 m³/h by 1 m³/h"]),
        (operated("-1 m3/h", "50 m3/h", "100 m3/h"),
         ["operating value min -1 m³/h is below the range 0 to 100 m³/h by 1 m³/h"]),
        (operated("-1 m3/h", "50 m3/h", "101 m3/h"),
         ["operating value max 101 m³/h is above the range 0 to 100 m³/h by 1 m³/h",
          "operating value min -1 m³/h is below the range 0 to 100 m³/h by 1 m³/h"]),
        (operated("0 m3/h", "50 m3/h", "28 l/s"),
         ["operating value max 28 l/s is above the range 0 to 100 m³/h by 0.8 m³/h"]),
        (operated("0 m3/h", "50 m3/h", "27 l/s"), []),
        # A normal value beyond the range tells the same of a maximum that is blank.
        (operated("0 m3/h", "120 m3/h", ""),
         ["operating value normal 120 m³/h is above the range 0 to 100 m³/h by 20 m³/h"]),
        # A reversed range has the same ends.
        (operated("0 m3/h", "50 m3/h", "100 m3/h", LRV="100 m3/h", URV="0 m3/h"), []),
        (operated("0 m3/h", "50 m3/h", "101 m3/h", LRV="100 m3/h", URV="0 m3/h"),
         ["operating value max 101 m³/h is above the range 100 to 0 m³/h by 1 m³/h"]),
        # Another dimension than the field range: the range in the system counts.
        (operated("0 m3/h", "50 m3/h", "101 m3/h", LRV="0 mbar", URV="250 mbar",
                  **{"system LRV": "0 m3/h", "system URV": "100 m3/h"}),
         ["operating value max 101 m³/h is above the system range 0 to 100 m³/h by 1 m³/h"]),
        (operated("10 %", "50 %", "101 %", tag="LT-1", LRV="0 mm", URV="600 mm",
                  **{"system LRV": "0 %", "system URV": "100 %"}),
         ["operating value max 101 % is above the system range 0 to 100 % by 1 %"]),
        # P and T tags have the pressure and the temperature of the line, where nothing else is given.
        (pressed("0 barg", "5 barg", "11 barg"),
         ["operating pressure max 11 barg is above the range 0 to 10 barg by 1 bar"]),
        (pressed("0 barg", "5 barg", "11 barg",
                 **{"operating value min": "0 barg", "operating value max": "9 barg"}), []),
        (pressed("0 barg", "5 barg", "11 barg", tag="PG-1"),
         ["operating pressure max 11 barg is above the range 0 to 10 barg by 1 bar"]),
        (pressed("0 barg", "0.5 barg", "0.6 barg", LRV="0 bara", URV="1.6 bara"),
         ["operating pressure max 0.6 barg is above the range 0 to 1.6 bara by 0.01325 bar"]),
        (pressed("0 barg", "0.5 barg", "0.58 barg", LRV="0 bara", URV="1.6 bara"), []),
        ([{"tag": "TT-1", "LRV": "0 °C", "URV": "100 °C", "operating temperature min": "-5 °C",
           "operating temperature max": "212 °F"}],
         ["operating temperature min -5 °C is below the range 0 to 100 °C by 5 °C"]),
    ],
)  # fmt: skip
def test_the_measured_quantity_stays_inside_its_range(rows: list[dict[str, Any]], expected: list[str]) -> None:
    assert [said_of(each) for each in asked("RNG07", rows)] == expected
    assert unmended("RNG07", rows) == []


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (operated("0 m3/h", "50 m3/h", ""), "unchecked: operating value max"),
        (operated("", "50 m3/h", "90 m3/h"), "unchecked: operating value min"),
        (operated("", "50 m3/h", "110 m3/h"), "finding"),  # wrong whatever the minimum is
        (operated("", "", ""), "unchecked: operating value max, operating value min"),
        (pressed("", "", ""), "unchecked: operating value max or operating pressure max, "
                              "operating value min or operating pressure min"),
        (operated("0 m3/h", "50 m3/h", "90 m3/h", LRV="", URV=""), "unchecked: LRV, URV"),
        (operated("0 m3/h", "50 m3/h", "90 m3/h", LRV="0 mbar", URV="250 mbar"),
         "unchecked: range in the unit of the operating value"),
        # Never the pressure of the line for a differential pressure, nor on a differential body.
        (pressed("0 barg", "5 barg", "11 barg", tag="PDT-1", LRV="0 bar", URV="1 bar"),
         "unchecked: operating value max, operating value min"),
        (pressed("0 mbarg", "5 barg", "11 barg", LRV="0 mbarg", URV="100 mbarg", **{"device type": "D"}),
         "unchecked: operating value max, operating value min"),
        (pressed("0 bara", "5 bara", "9 bara", LRV="0 bar(d)", URV="10 bar(d)"),
         "unchecked: operating value max, operating value min"),
        (operated("0 %LEL", "", "", tag="GD-1", LRV="0 %LEL", URV="100 %LEL"), "unchecked: operating value max"),
        ([{"tag": "GD-1", "LRV": "0 %LEL", "URV": "100 %LEL"}], "not applicable"),
        ([{"tag": "PSH-1", "LRV": "5 barg", "URV": "10 barg", "operating pressure max": "20 barg"}], "not applicable"),
        ([{"tag": "FV-1", "LRV": "0 %", "URV": "100 %", "operating value max": "20 m3/h"}], "not applicable"),
        ([{"tag": "FIC-1", "location": "system", "LRV": "0 m3/h", "URV": "10 m3/h"}], "not applicable"),
        ([{"tag": "FIC-1", "location": "system", "LRV": "0 m3/h", "URV": "10 m3/h",
           "operating value max": "20 m3/h"}], "finding"),
    ],
)  # fmt: skip
def test_values_that_are_blank_stay_unchecked(rows: list[dict[str, Any]], expected: str) -> None:
    assert outcome("RNG07", rows, types=TYPES) == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        # No body and no reference: read as gauge, and asked where read as absolute it would come out otherwise.
        ({"LRV": "0 bar", "URV": "10 bar", "operating pressure max": "9.5 barg"}, "review"),
        ({"LRV": "0 bar", "URV": "10 bar", "operating pressure max": "8.9 barg"}, "clear"),
        ({"LRV": "0 bar", "URV": "10 bar", "operating pressure max": "10.5 barg"}, "finding"),
        ({"LRV": "0 bar", "URV": "10 bar", "operating pressure max": "9.5 bar",
          "operating pressure min": "0 bar"}, "clear"),
        ({"LRV": "0 barg", "URV": "10 barg", "operating pressure max": "9.5 bar"}, "clear"),
        ({"LRV": "0 bar", "URV": "10 bar", "operating pressure max": "9.5 barg", "device type": "G"}, "clear"),
        ({"LRV": "0 bar", "URV": "10 bar", "operating pressure max": "9.5 barg", "device type": "A"}, "finding"),
        ({"LRV": "-1 bar", "URV": "10 bar", "operating pressure max": "9.5 barg"}, "clear"),  # cannot be absolute
        ({"tag": "PG-1", "LRV": "0 bar", "URV": "10 bar", "operating pressure max": "9.5 barg"}, "clear"),  # a dial
    ],
)  # fmt: skip
def test_an_unstated_reference_is_the_body_s_else_asked_about(row: dict[str, str], expected: str) -> None:
    rows = [{"tag": "PT-1", "operating pressure min": "0 barg", **row}]
    assert outcome("RNG07", rows, types=TYPES) == expected


def test_a_review_names_the_assumption() -> None:
    found = asked("RNG07", pressed("0 barg", "5 barg", "9.5 barg", LRV="0 bar", URV="10 bar"))[0]
    assert found.assumed == ("a pressure without a reference, of no stated body, is read as gauge",)
    assert found.found == "9.5 barg, read as absolute"


@pytest.mark.parametrize(
    ("rows", "changes"),
    [
        (operated("0 m3/h", "900 m3/h", "1650 m3/h", URV="1500 m3/h"), [{"URV": "2500 m³/h"}]),
        (operated("0 m3/h", "50 m3/h", "100.5 m3/h"), [{"URV": "160 m³/h"}]),
        (operated("0 m3/h", "50 m3/h", "110 m3/h", LRV="100 m3/h", URV="0 m3/h"), [{"LRV": "160 m³/h"}]),
        (operated("0 m3/h", "50 m3/h", "110 m3/h", **{"system LRV": "0 m3/h", "system URV": "100 m3/h"}),
         [{"URV": "160 m³/h", "system URV": "160 m³/h"}]),
        (pressed("0 barg", "2 barg", "5 barg", URV="4 barg", **{"device type": "G"}), [{"URV": "6 barg"}]),
        (pressed("0 barg", "2 barg", "11 barg", **{"device type": "G"}), []),  # the body holds no 16 barg
        (pressed("-0.3 barg", "2 barg", "5 barg"), [{"LRV": "-0.5 barg"}]),
        (pressed("2 barg", "4 barg", "5 barg", LRV="3 barg"), [{"LRV": "0 barg"}]),
        # The flow goes with the root of the differential pressure.
        (operated("0 m3/h", "50 m3/h", "110 m3/h", LRV="0 mbar", URV="80 mbar",
                  **{"device type": "D", "system LRV": "0 m3/h", "system URV": "100 m3/h"}),
         [{"system URV": "160 m³/h", "URV": "204.8 mbar"}]),
        (operated("0 m3/h", "50 m3/h", "110 m3/h", LRV="0 mbar", URV="160 mbar",
                  **{"device type": "D", "system LRV": "0 m3/h", "system URV": "100 m3/h"}), []),  # 409.6 mbar
    ],
)  # fmt: skip
def test_the_next_preferred_range_that_the_body_holds(
    rows: list[dict[str, Any]], changes: list[dict[str, str]]
) -> None:
    found = asked("RNG07", rows, types=TYPES)
    assert len(found) == 1
    assert values_of(found[0].fixes) == changes
    assert unmended("RNG07", rows, types=TYPES) == []


# ------------------------------------------------------------------------------------------------------------ RNG08


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (operated("", "30 m3/h", ""), []),
        (operated("", "75 m3/h", ""), []),
        (operated("", "29.9 m3/h", ""),
         ["operating value normal 29.9 m³/h stands at 29.9 % of the range 0 to 100 m³/h, outside 30 to 75 %"]),
        (operated("", "75.1 m3/h", ""),
         ["operating value normal 75.1 m³/h stands at 75.1 % of the range 0 to 100 m³/h, outside 30 to 75 %"]),
        (operated("", "28 m3/h", "", LRV="100 m3/h", URV="0 m3/h"),
         ["operating value normal 28 m³/h stands at 28 % of the range 100 to 0 m³/h, outside 30 to 75 %"]),
        (operated("", "0 m3/h", ""), []),
        # Of flow and not of differential pressure.
        (operated("", "10 mbar", "", LRV="0 mbar", URV="100 mbar"), []),  # 31.6 % of flow
        (operated("", "8 mbar", "", LRV="0 mbar", URV="100 mbar"),
         ["operating value normal 8 mbar stands at 28.3 % of the range 0 to 100 mbar counted as flow, "
          "outside 30 to 75 %"]),
        (operated("", "60 mbar", "", LRV="0 mbar", URV="100 mbar"),
         ["operating value normal 60 mbar stands at 77.5 % of the range 0 to 100 mbar counted as flow, "
          "outside 30 to 75 %"]),
        (operated("", "20 m3/h", "", LRV="0 mbar", URV="100 mbar",
                  **{"system LRV": "0 m3/h", "system URV": "100 m3/h"}),
         ["operating value normal 20 m³/h stands at 20 % of the system range 0 to 100 m³/h, outside 30 to 75 %"]),
        (pressed("", "2 barg", ""),
         ["operating pressure normal 2 barg stands at 20 % of the range 0 to 10 barg, outside 30 to 75 %"]),
        (pressed("", "2 barg", "", LRV="0 bara"), []),  # the ends of one range: absolute, 3.01 of 10
        (operated("", "10 mbar", "", tag="PDT-1", LRV="0 mbar", URV="100 mbar"),
         ["operating value normal 10 mbar stands at 10 % of the range 0 to 100 mbar, outside 30 to 75 %"]),
        (operated("", "10 mg/l", "", tag="AT-1", LRV="0 mg/l", URV="100 mg/l"), []),
        (operated("", "1 mm/s", "", tag="VT-1", LRV="0 mm/s", URV="100 mm/s"), []),
    ],
)  # fmt: skip
def test_the_normal_value_stands_well_inside(rows: list[dict[str, Any]], expected: list[str]) -> None:
    if rows[0]["LRV"] == "0 bara":
        rows[0]["URV"] = "10 bara"
    assert [said_of(each) for each in asked("RNG08", rows)] == expected
    assert unmended("RNG08", rows) == []


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (operated("1 m3/h", "", "90 m3/h"), "unchecked: operating value normal"),
        (pressed("", "", ""), "unchecked: operating value normal or operating pressure normal"),
        (operated("", "5 m3/h", "", LRV="", URV=""), "unchecked: LRV, URV"),
        (operated("", "5 m3/h", "", LRV="0 mbar", URV="9 mbar"), "unchecked: range in the unit of the operating value"),
        (operated("", "0 m3/h", ""), "not applicable"),
        (operated("", "1 mg/l", "", tag="AT-1", LRV="0 mg/l", URV="100 mg/l"), "not applicable"),
        (operated("", "1 m3/h", "", tag="FIC-1", location="system"), "not applicable"),
        (operated("", "1 m3/h", "", tag="FSL-1"), "not applicable"),
    ],
)
def test_a_normal_value_that_is_blank_stays_unchecked(rows: list[dict[str, Any]], expected: str) -> None:
    assert outcome("RNG08", rows) == expected


@pytest.mark.parametrize(
    ("rows", "changes"),
    [
        (operated("0 m3/h", "20 m3/h", "30 m3/h"), [{"URV": "40 m³/h"}]),
        (operated("0 m3/h", "80 m3/h", "90 m3/h"), [{"URV": "160 m³/h"}]),
        (operated("0 m3/h", "20 m3/h", "30 m3/h", HH="45 m3/h"), [{"URV": "60 m³/h"}]),  # the setting stays inside
        (operated("0 m3/h", "10 m3/h", "70 m3/h"), []),  # nothing holds both
        (pressed("0 barg", "9 barg", "9.5 barg", **{"device type": "G"}), []),  # the body holds no 16 barg
        (pressed("0 barg", "0.02 barg", "0.03 barg", URV="0.2 barg", **{"device type": "G"}), []),  # nor 0.04 of span
        (operated("0 m3/h", "20 m3/h", "30 m3/h", LRV="0 mbar", URV="100 mbar",
                  **{"device type": "D", "system LRV": "0 m3/h", "system URV": "100 m3/h"}),
         [{"system URV": "40 m³/h", "URV": "16 mbar"}]),
    ],
)  # fmt: skip
def test_the_next_preferred_range_for_the_normal_value(
    rows: list[dict[str, Any]], changes: list[dict[str, str]]
) -> None:
    found = asked("RNG08", rows, types=TYPES)
    assert values_of(found[0].fixes) == changes
    assert unmended("RNG08", rows, types=TYPES) == []


@pytest.mark.parametrize(("normal", "count"), [("20 m3/h", 0), ("19 m3/h", 1), ("80 m3/h", 0), ("81 m3/h", 1)])
def test_the_plant_sets_where_the_normal_value_belongs(normal: str, count: int) -> None:
    plant = {"numbering": "parallel", "RNG08 low %": "20", "RNG08 high %": "80"}
    assert len(asked("RNG08", operated("", normal, ""), plant=plant)) == count


# ------------------------------------------------------------------------------------------------------------ RNG16


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (operated("0 m3/h", "5 m3/h", "9 m3/h", URV="10 m3/h"), []),
        (operated("0 m3/h", "50 m3/h", "160 m3/h"), []),  # no slip puts the normal value well inside
        (pressed("0 barg", "600 barg", "800 barg"),
         ["the operating values would fit the range 0 to 10 barg if they are in kPag"]),
        (operated("0 m3/h", "500 m3/h", "700 m3/h"),
         ["the operating values would fit the range 0 to 100 m³/h if they are divided by 10"]),
        (operated("0 m3/h", "50000 m3/h", "70000 m3/h"),
         ["the operating values would fit the range 0 to 100 m³/h if they are in l/h"]),
        (pressed("0 barg", "60 barg", "90 barg"),
         ["the operating values would fit the range 0 to 10 barg if the range is in MPag, or if they are in psig"]),
        ([{"tag": "TT-1", "LRV": "0 °C", "URV": "80 °C", "operating temperature normal": "104 °C",
           "operating temperature max": "140 °C", "operating temperature min": "50 °C"}],
         ["the operating values would fit the range 0 to 80 °C if they are in °F"]),
        ([{"tag": "TT-1", "LRV": "32 °F", "URV": "212 °F", "operating temperature normal": "40 °F",
           "operating temperature max": "60 °F", "operating temperature min": "20 °F"}],
         ["the operating values would fit the range 32 to 212 °F if they are in °C"]),
    ],
)  # fmt: skip
def test_a_slip_of_the_unit_explains_values_out_of_range(rows: list[dict[str, Any]], expected: list[str]) -> None:
    assert [said_of(each) for each in asked("RNG16", rows)] == expected
    assert unmended("RNG16", rows) == []


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (operated("0 m3/h", "", "700 m3/h"), "unchecked: operating value normal"),
        (operated("0 m3/h", "5 m3/h", ""), "unchecked: operating value max"),
        (operated("", "", ""), "unchecked: operating value max, operating value min"),
        (operated("0 m3/h", "5 m3/h", "100 m3/h"), "clear"),
        (operated("0 m3/h", "500 m3/h", "700 m3/h", URV="0 m3/h"), "not applicable"),
        (operated("0 m3/h", "500 m3/h", "700 m3/h"), "finding"),
        # RNG07 only asks here, and so nothing is explained.
        (pressed("0 barg", "5 barg", "9.5 barg", LRV="0 bar", URV="10 bar"), "clear"),
    ],
)
def test_a_slip_is_looked_for_where_rng07_finds(rows: list[dict[str, Any]], expected: str) -> None:
    assert outcome("RNG16", rows) == expected


def test_the_unit_that_would_fit_is_given_to_the_operating_values_or_the_range() -> None:
    found = asked("RNG16", pressed("0 barg", "50 barg", "60 barg", URV="7 barg"))[0]
    ends = {"min": "0 psig", "normal": "50 psig", "max": "60 psig"}
    assert values_of(found.fixes) == [
        {"LRV": "0 MPag", "URV": "7 MPag"},
        {f"operating pressure {end}": value for end, value in ends.items()},
    ]
    other = asked("RNG16", pressed("0 psig", "50 psig", "60 psig", LRV="0 psig", URV="7 psig"))[0]
    assert values_of(other.fixes) == [{"LRV": "0 barg", "URV": "7 barg"}]
    assert unmended("RNG16", pressed("0 psig", "50 psig", "60 psig", LRV="0 psig", URV="7 psig")) == []
