"""Alarms and trips: their order, their place on the range, what letters promise, and trips together."""

from typing import Any

import pytest

from tests.validation.rules.applied import counts, tell, untold
from tests.validation.rules.asked import asked, outcome, said_of, unmended, values_of
from validation.example import said, unchecked_for

Row = dict[str, Any]


# Another row with a value in each column: a column of which no cell can be read is none of the list.
COMPANY: Row = {
    "tag": "LT-99", "LRV": "0 m", "URV": "9 m", "LL": "1 m", "L": "2 m", "H": "6 m", "HH": "8 m", "trip": "7 m",
    "operating value normal": "5 m",
}  # fmt: skip


def beside_others(code: str, row: Row, **sheets: Any) -> str:
    """Return what a rule comes to on a row of a list that fills the same columns elsewhere."""
    company = {title: value for title, value in COMPANY.items() if title in row or title == "tag"}
    return outcome(code, [row, company], **sheets)


def told(code: str, row: Row, **sheets: Any) -> list[str]:
    """Return what a rule says of one row, once it is sure that its fixes clear it."""
    found = [said_of(each) for each in asked(code, [row], **sheets)]
    assert unmended(code, [row], **sheets) == []
    return found


# ------------------------------------------------------------------------------------------------------------ SET01

LEVEL = {"tag": "LT-1", "LRV": "0", "URV": "6", "range unit": "m", "signal": "4-20 mA"}
PRESSURE = {"tag": "PT-1", "LRV": "0", "URV": "10", "range unit": "barg", "signal": "4-20 mA"}
ORDER = "not in the order LL < L < H < HH: "


@pytest.mark.parametrize(
    ("settings", "expected"),
    [
        ({"LL": "1", "L": "2", "H": "3", "HH": "4"}, []),
        ({"LL": "1", "HH": "4"}, []),
        ({"L": "2", "H": 2.001}, []),
        ({"L": "2", "H": "2"}, [f"{ORDER}L 2 m, H 2 m"]),
        ({"L": "2", "H": 1.999}, [f"{ORDER}L 2 m, H 1.999 m"]),
        ({"LL": "2", "L": "1", "H": "3", "HH": "4"}, [f"{ORDER}LL 2 m, L 1 m, H 3 m, HH 4 m"]),
        ({"LL": "1", "L": "2", "H": "4", "HH": "3"}, [f"{ORDER}LL 1 m, L 2 m, H 4 m, HH 3 m"]),
        ({"LL": "4", "HH": "3"}, [f"{ORDER}LL 4 m, HH 3 m"]),
        # Another unit of the same dimension is the same setting.
        ({"L": "200 cm", "H": "3"}, []),
        ({"L": "2", "H": "1990 mm"}, [f"{ORDER}L 2 m, H 1990 mm"]),
        ({"L": "2", "H": "2000 mm"}, [f"{ORDER}L 2 m, H 2000 mm"]),
        # A level in percent cannot be compared with one in metres, but with its like.
        ({"L": "30 %", "H": "20 %", "HH": "5"}, [f"{ORDER}L 30 %, H 20 %"]),
    ],
)
def test_settings_stand_in_their_order(settings: Row, expected: list[str]) -> None:
    assert told("SET01", {**LEVEL, **settings}) == expected


@pytest.mark.parametrize(
    ("settings", "expected"),
    [
        ({}, "not applicable"),
        ({"H": "3"}, "not applicable"),
        ({"H": "3", "HH": "4..5"}, "unchecked: HH"),
        ({"L": "1", "H": "3", "HH": "4..5"}, "unchecked: HH"),
        # What is given is wrong already.
        ({"L": "4", "H": "3", "HH": "4..5"}, "finding"),
        ({"L": "30 %", "H": "5"}, "unchecked: settings in one unit"),
        ({"L": "10 %", "H": "20 %", "HH": "5"}, "unchecked: settings in one unit"),
        ({"trip": "5", "H": "3"}, "not applicable"),
    ],
)
def test_the_order_asks_for_two_settings_of_one_dimension(settings: Row, expected: str) -> None:
    assert beside_others("SET01", {**LEVEL, **settings}) == expected


@pytest.mark.parametrize(
    ("settings", "fixes"),
    [
        ({"L": "0.9", "H": "0.6", "HH": "1.1"}, [{"L": "0.6 m", "H": "0.9 m"}]),
        ({"LL": "4", "L": "3", "H": "2", "HH": "1"}, [{"LL": "1 m", "L": "2 m", "H": "3 m", "HH": "4 m"}]),
        # Two that are equal are not exchanged: one of them is wrong.
        ({"L": "2", "H": "2"}, []),
    ],
)
def test_exchanged_settings_are_put_in_order(settings: Row, fixes: list[dict[str, str]]) -> None:
    (finding,) = asked("SET01", [{**LEVEL, **settings}])
    assert values_of(finding.fixes) == fixes


@pytest.mark.parametrize(
    ("settings", "expected"),
    [
        ({"H": "3 barg", "HH": "4.5 bara"}, []),  # 3.487 barg
        ({"H": "4 barg", "HH": "4.5 bara"}, [f"{ORDER}H 4 barg, HH 4.5 bara"]),
        # Of a body that is stated the reference is too.
        ({"LRV": "", "URV": "", "range unit": "", "H": "3 barg", "HH": "3.5 bar", "body": "gauge"}, []),
        (
            {"LRV": "", "URV": "", "range unit": "", "H": "3 barg", "HH": "3.5 bar", "body": "absolute"},
            [f"{ORDER}H 3 barg, HH 3.5 bar"],
        ),
    ],
)
def test_pressures_are_put_in_order_whatever_they_are_referred_to(settings: Row, expected: list[str]) -> None:
    assert [said_of(each) for each in asked("SET01", [{**PRESSURE, **settings}])] == expected


def test_an_unstated_reference_is_asked_about_only_where_it_changes_the_order() -> None:
    row = {"tag": "PT-1", "H": "3 barg", "HH": "3.5 bar"}
    assert [said_of(each) for each in asked("SET01", [row])] == [f"review: {ORDER}H 3 barg, HH 3.5 bar"]
    (review,) = asked("SET01", [row])
    assert review.assumed == ("a pressure without a reference, of no stated body, is read as gauge",)
    assert review.found == "H 3 barg, HH 3.5 bar, read as absolute"
    assert asked("SET01", [{**row, "HH": "5 bar"}]) == []
    assert asked("SET01", [{**row, "H": "3 bar"}]) == []


# ------------------------------------------------------------------------------------------------- SET02 and SET07


@pytest.mark.parametrize(
    ("row", "outside", "unreached"),
    [
        # 20.5 mA is at 6.1875 m, 3.8 mA at -0.075 m.
        ({"HH": "6"}, [], []),
        ({"HH": 6.001}, ["HH 6.001 m is outside the range 0 to 6 m"], []),
        ({"HH": 6.1875}, ["HH 6.1875 m is outside the range 0 to 6 m"], []),
        ({"HH": 6.188}, [], ["HH 6.188 m on 0 to 6 m needs 20.501 mA, the signal ends at 20.5 mA"]),
        ({"LL": "0"}, [], []),
        ({"LL": -0.075}, ["LL -0.075 m is outside the range 0 to 6 m"], []),
        ({"LL": -0.076}, [], ["LL -0.076 m on 0 to 6 m needs 3.797 mA, the signal ends at 3.8 mA"]),
        ({"trip": "7"}, [], ["trip 7 m on 0 to 6 m needs 22.667 mA, the signal ends at 20.5 mA"]),
        (
            {"L": "-0.01", "H": "6.01"},
            ["H 6.01 m is outside the range 0 to 6 m", "L -0.01 m is outside the range 0 to 6 m"],
            [],
        ),
        # A reversed range: 4 mA at the top.
        ({"LRV": "6", "URV": "0", "HH": "6.05"}, ["HH 6.05 m is outside the range 6 to 0 m"], []),
        (
            {"LRV": "6", "URV": "0", "HH": "6.1"},
            [],
            ["HH 6.1 m on 6 to 0 m needs 3.733 mA, the signal ends at 3.8 mA"],
        ),
        # Its own unit, whatever the range's.
        ({"HH": "6000 mm"}, [], []),
        ({"HH": "6010 mm"}, ["HH 6010 mm is outside the range 0 to 6 m"], []),
        ({"HH": "19.69 ft"}, ["HH 19.69 ft is outside the range 0 to 6 m"], []),
        # Any other signal than 4-20 mA has no such ends.
        ({"HH": "9", "signal": "0-20 mA"}, ["HH 9 m is outside the range 0 to 6 m"], []),
        ({"HH": "9", "signal": "Pt100"}, ["HH 9 m is outside the range 0 to 6 m"], []),
        ({"HH": "9", "signal": "Modbus"}, ["HH 9 m is outside the range 0 to 6 m"], []),
        ({"HH": "6.1", "signal": "4..20 mA HART"}, ["HH 6.1 m is outside the range 0 to 6 m"], []),
        ({"HH": "9", "signal": "WirelessHART"}, ["HH 9 m is outside the range 0 to 6 m"], []),
        # Without any word of the signal it is still outside.
        ({"HH": "9", "signal": ""}, ["HH 9 m is outside the range 0 to 6 m"], []),
    ],
)
def test_a_setting_lies_where_the_signal_can_tell(row: Row, outside: list[str], unreached: list[str]) -> None:
    row = {**LEVEL, **row}
    assert told("SET02", row) == outside
    assert told("SET07", row) == unreached


@pytest.mark.parametrize(
    ("row", "outside", "unreached"),
    [
        ({"H": "5"}, "clear", "clear"),
        ({}, "not applicable", "not applicable"),
        # A blank is unchecked, and named.
        ({"H": "5", "LRV": "", "URV": ""}, *["unchecked: LRV or system LRV, URV or system URV"] * 2),
        ({"H": "5", "URV": ""}, *["unchecked: LRV or system LRV, URV or system URV"] * 2),
        ({"H": "4..5"}, *["unchecked: H"] * 2),
        ({"H": "5", "HH": "4..6"}, *["unchecked: HH"] * 2),
        ({"H": "9", "HH": "4..6"}, "unchecked: HH", "finding"),
        ({"H": "5", "signal": ""}, "clear", "unchecked: signal"),
        ({"H": "5", "signal": "analogue"}, "clear", "unchecked: signal"),
        ({"H": "5", "signal": "contact"}, "clear", "not applicable"),
        ({"H": "5", "signal": "", "I/O type": "DI"}, "clear", "not applicable"),
        # None of the ranges has the setting's dimension.
        ({"H": "5 barg"}, *["unchecked: system LRV, system URV"] * 2),
        ({"H": "80 %"}, *["unchecked: system LRV, system URV"] * 2),
        ({"H": "80 %", "system LRV": "0", "system URV": "100", "system unit": "%"}, "clear", "clear"),
        (
            {"H": "5 barg", "system LRV": "0", "system URV": "100", "system unit": "%"},
            *["unchecked: a range in the dimension of H"] * 2,
        ),
        # RNG01 speaks of it.
        ({"H": "5", "URV": "0"}, *["unchecked: a range with a span"] * 2),
        # The scale of a switch is seldom given; where it is, its set pressure is on it.
        ({"tag": "LSH-1", "H": "5", "LRV": "", "URV": "", "signal": ""}, "not applicable", "not applicable"),
    ],
)
def test_what_a_setting_is_compared_with(row: Row, outside: str, unreached: str) -> None:
    row = {**LEVEL, **row}
    assert (beside_others("SET02", row), beside_others("SET07", row)) == (outside, unreached)


def test_the_signal_of_the_device_type_counts() -> None:
    types = [{"code": "R1", "kind": "transmitter", "signal": "4-20 mA HART"}]
    row = {**LEVEL, "signal": "", "device type": "R1", "HH": "9"}
    assert told("SET07", row, types=types) == ["HH 9 m on 0 to 6 m needs 28 mA, the signal ends at 20.5 mA"]
    assert told("SET07", {**row, "signal": "analogue"}, types=types) == told("SET07", row, types=types)


FLOW = {"tag": "FT-1", "signal": "4-20 mA", "LRV": "0 mbar", "URV": "250 mbar", "system LRV": "0", "system URV": "100",
        "system unit": "m3/h"}  # fmt: skip


@pytest.mark.parametrize(
    ("row", "outside", "unreached"),
    [
        ({"H": "80 m3/h"}, [], []),
        # With the root in the device the signal follows the flow: 103.125 m3/h is 20.5 mA.
        ({"H": "103 m3/h", "square root in device": "yes"}, ["H 103 m³/h is outside the range 0 to 100 m³/h"], []),
        (
            {"H": "103.2 m3/h", "square root in device": "yes"},
            [],
            ["H 103.2 m³/h on 0 to 100 m³/h needs 20.512 mA, the signal ends at 20.5 mA"],
        ),
        # With the root in the system it follows the pressure, the square of the flow: 101.55 m3/h is 20.5 mA.
        ({"H": "101.5 m3/h", "square root in system": "yes"}, ["H 101.5 m³/h is outside the range 0 to 100 m³/h"], []),
        (
            {"H": "101.6 m3/h", "square root in system": "yes"},
            [],
            ["H 101.6 m³/h on 0 to 100 m³/h needs 20.516 mA, the signal ends at 20.5 mA"],
        ),
        # A range in flow behind a root in the system is no less a pressure's.
        (
            {"H": "101.6 m3/h", "square root in system": "yes", "LRV": "0 m3/h", "URV": "100 m3/h"},
            [],
            ["H 101.6 m³/h on 0 to 100 m³/h needs 20.516 mA, the signal ends at 20.5 mA"],
        ),
        # A setting as a pressure, where the root is taken in the device: 265.87 mbar is 20.5 mA.
        ({"H": "265 mbar", "square root in device": "yes"}, ["H 265 mbar is outside the range 0 to 250 mbar"], []),
        (
            {"H": "266 mbar", "square root in device": "yes"},
            [],
            ["H 266 mbar on 0 to 250 mbar needs 20.504 mA, the signal ends at 20.5 mA"],
        ),
        # As the pressure's own signal: 257.8 mbar is 20.5 mA.
        ({"H": "257 mbar"}, ["H 257 mbar is outside the range 0 to 250 mbar"], []),
        ({"H": "258 mbar"}, [], ["H 258 mbar on 0 to 250 mbar needs 20.512 mA, the signal ends at 20.5 mA"]),
        # A pressure of flow below nothing keeps its sign.
        ({"L": "-1 mbar", "square root in device": "yes"}, [],
         ["L -1 mbar on 0 to 250 mbar needs 2.988 mA, the signal ends at 3.8 mA"]),
    ],
)  # fmt: skip
def test_the_root_decides_what_the_signal_reaches(row: Row, outside: list[str], unreached: list[str]) -> None:
    row = {**FLOW, **row}
    assert told("SET02", row) == outside
    assert told("SET07", row) == unreached


@pytest.mark.parametrize(
    ("row", "outside", "unreached"),
    [
        ({"LRV": "32 °F", "URV": "212 °F", "HH": "100 °C"}, [], []),
        ({"LRV": "32 °F", "URV": "212 °F", "HH": "213 °F"}, ["HH 213 °F is outside the range 32 to 212 °F"], []),
        ({"LRV": "0 °C", "URV": "100 °C", "HH": "213 °F"}, ["HH 213 °F is outside the range 0 to 100 °C"], []),
        (
            {"LRV": "0 °C", "URV": "100 °C", "HH": "218 °F"},
            [],
            ["HH 218 °F on 0 to 100 °C needs 20.533 mA, the signal ends at 20.5 mA"],
        ),
        ({"LRV": "-50 °C", "URV": "50 °C", "LL": "-51 °C"}, ["LL -51 °C is outside the range -50 to 50 °C"], []),
    ],
)
def test_temperatures_are_compared_as_temperatures(row: Row, outside: list[str], unreached: list[str]) -> None:
    row = {"tag": "TT-1", "signal": "4-20 mA", **row}
    assert told("SET02", row) == outside
    assert told("SET07", row) == unreached


@pytest.mark.parametrize(
    ("row", "outside", "unreached"),
    [
        ({"HH": "11 bara"}, [], []),  # 9.987 barg
        ({"HH": "11.1 bara"}, ["HH 11.1 bara is outside the range 0 to 10 barg"], []),
        ({"HH": "11.4 bara"}, [], ["HH 11.4 bara on 0 to 10 barg needs 20.619 mA, the signal ends at 20.5 mA"]),
        # Unstated, and of a range that says what it is: the same.
        ({"HH": "10.1 bar"}, ["HH 10.1 barg is outside the range 0 to 10 barg"], []),
        ({"body": "absolute", "LRV": "0 bara", "URV": "10 bara", "HH": "10.1 bar"},
         ["HH 10.1 bara is outside the range 0 to 10 bara"], []),
        # Water gauge on a differential body is the difference itself.
        ({"body": "differential", "LRV": "0 mmWG", "URV": "500 mmWG", "HH": "510 mmH2O"},
         ["HH 510 mmH2O(g) is outside the range 0 to 500 mmH2O(g)"], []),
        ({"LRV": "0 barg", "URV": "-1 barg", "LL": "750 mmHg vac"}, [], []),
    ],
)  # fmt: skip
def test_pressures_are_compared_by_what_they_are_referred_to(
    row: Row, outside: list[str], unreached: list[str]
) -> None:
    row = {**PRESSURE, **row}
    assert [said_of(each) for each in asked("SET02", [row])] == outside
    assert [said_of(each) for each in asked("SET07", [row])] == unreached


def test_the_working_shows_the_current_of_a_setting() -> None:
    (finding,) = asked("SET07", [{**LEVEL, "HH": "6.5"}])
    assert finding.working == "4 mA + 16 mA x (6.5 - 0) / (6 - 0) = 21.333 mA"
    assert (finding.found, finding.wanted, finding.off_by) == ("6.5 m at 21.333 mA", "within 0 to 6 m", "0.833 mA")
    assert finding.fields == ("HH", "LRV", "URV")
    assert [fix.text for fix in finding.fixes] == ["HH 6 m at the most"]
    (finding,) = asked("SET07", [{**LEVEL, "LRV": "-1", "LL": "-1.5"}])
    assert finding.working == "4 mA + 16 mA x ((-1.5) - (-1)) / (6 - (-1)) = 2.857 mA"
    assert [fix.text for fix in finding.fixes] == ["LL -1 m at the least"]


def test_each_setting_is_a_finding_of_its_own() -> None:
    found = asked("SET07", [{**LEVEL, "LL": "-1", "HH": "7"}])
    assert [(each.part, each.fields) for each in found] == [
        ("HH", ("HH", "LRV", "URV")),
        ("LL", ("LL", "LRV", "URV")),
    ]


def test_the_end_of_a_range_is_written_so_that_it_is_inside() -> None:
    row = {**LEVEL, "URV": 6.12345678, "HH": "6.2"}
    (finding,) = asked("SET02", [row])
    assert values_of(finding.fixes) == [{"HH": "6.12345 m"}]
    assert unmended("SET02", [row]) == []


def test_a_setting_on_a_range_of_the_system() -> None:
    row = {**FLOW, "LRV": "", "URV": "", "H": "101 m3/h"}
    (finding,) = asked("SET02", [row])
    assert finding.fields == ("H", "system LRV", "system URV")


def test_a_pressure_switch_is_on_its_own_scale() -> None:
    row = {"tag": "PSH-1", "LRV": "1 barg", "URV": "6 barg", "set pressure": "7 barg", "signal": "contact"}
    assert told("SET02", row) == ["set pressure 7 barg is outside the range 1 to 6 barg"]
    assert outcome("SET07", [row]) == "not applicable"
    # A relief valve's set pressure is no setting.
    assert outcome("SET02", [{**row, "tag": "PSV-1", "signal": ""}]) == "not applicable"


# ------------------------------------------------------------------------------------------------- SET03 and SET13

TRIP = {**PRESSURE, "trip": "8", "trip direction": "high"}


@pytest.mark.parametrize(
    ("row", "beyond", "near"),
    [
        ({"H": "7.5"}, [], []),
        ({"H": 7.501}, [], ["the pre-alarm H 7.501 barg is 4.99 % of span from the trip 8 barg, less than 5 %"]),
        ({"H": 7.999}, [], ["the pre-alarm H 7.999 barg is 0.01 % of span from the trip 8 barg, less than 5 %"]),
        ({"H": "8"}, ["the pre-alarm H 8 barg is at the high trip 8 barg"], []),
        ({"H": "800 kPag"}, ["the pre-alarm H 800 kPag is at the high trip 8 barg"], []),
        ({"H": 8.001}, ["the pre-alarm H 8.001 barg is beyond the high trip 8 barg"], []),
        # The pre-alarm of a low trip is L; HH and LL are none.
        ({"trip": "2", "trip direction": "low", "L": "2.5", "H": "1"}, [], []),
        ({"trip": "2", "trip direction": "low", "L": "2.4"}, [],
         ["the pre-alarm L 2.4 barg is 4 % of span from the trip 2 barg, less than 5 %"]),
        ({"trip": "2", "trip direction": "low", "L": "2"}, ["the pre-alarm L 2 barg is at the low trip 2 barg"], []),
        ({"trip": "2", "trip direction": "low", "L": "1"}, ["the pre-alarm L 1 barg is beyond the low trip 2 barg"],
         []),
        # The span of a reversed range is no less a span.
        ({"LRV": "10", "URV": "0", "H": "7.6"}, [],
         ["the pre-alarm H 7.6 barg is 4 % of span from the trip 8 barg, less than 5 %"]),
        # A trip that says so itself.
        ({"trip": "8 barg rising", "trip direction": "", "H": "8.5"},
         ["the pre-alarm H 8.5 barg is beyond the high trip 8 barg"], []),
        # Letters of a switch say its direction; its set pressure is its trip.
        ({"tag": "PSHH-1", "trip": "", "trip direction": "", "set pressure": "8 barg", "H": "8.5"},
         ["the pre-alarm H 8.5 barg is beyond the high trip 8 barg"], []),
        ({"tag": "PSLL-1", "trip": "2", "trip direction": "", "L": "1"},
         ["the pre-alarm L 1 barg is beyond the low trip 2 barg"], []),
        ({"H": "8.9 bara"}, [], ["the pre-alarm H 8.9 bara is 1.13 % of span from the trip 8 barg, less than 5 %"]),
        ({"H": "9.1 bara"}, ["the pre-alarm H 9.1 bara is beyond the high trip 8 barg"], []),
    ],
)  # fmt: skip
def test_the_pre_alarm_comes_in_time(row: Row, beyond: list[str], near: list[str]) -> None:
    row = {**TRIP, **row}
    assert told("SET03", row) == beyond
    assert told("SET13", row) == near


@pytest.mark.parametrize(
    ("row", "beyond", "near"),
    [
        ({"H": "7"}, "clear", "clear"),
        ({"H": ""}, "unchecked: H", "unchecked: H"),
        ({"H": "7", "trip direction": ""}, "unchecked: trip direction", "unchecked: trip direction"),
        ({"H": "7", "trip": ""}, "unchecked: trip", "unchecked: trip"),
        ({"H": "7", "trip": "4..8"}, "unchecked: trip", "unchecked: trip"),
        ({"H": "7", "trip": "", "trip direction": ""}, "not applicable", "not applicable"),
        ({"H": "7", "URV": ""}, "clear", "unchecked: LRV or system LRV, URV or system URV"),
        ({"H": "70 %"}, "unchecked: H and trip of one dimension", "unchecked: H and trip of one dimension"),
        # What SET03 finds is not found again.
        ({"H": "8"}, "finding", "not applicable"),
        ({"H": "9"}, "finding", "not applicable"),
        ({"L": "7", "H": "7"}, "clear", "clear"),
    ],
)
def test_what_a_pre_alarm_is_compared_with(row: Row, beyond: str, near: str) -> None:
    row = {**TRIP, **row}
    assert (beside_others("SET03", row), beside_others("SET13", row)) == (beyond, near)


def test_the_distance_is_the_plants_to_say() -> None:
    row = {**TRIP, "H": "7"}
    plant = {"SET13 %": "12"}
    assert told("SET13", row) == []
    assert told("SET13", row, plant=plant) == [
        "the pre-alarm H 7 barg is 10 % of span from the trip 8 barg, less than 12 %"
    ]
    (finding,) = asked("SET13", [row], plant=plant)
    assert values_of(finding.fixes) == [{"H": "6.8 barg"}]
    assert finding.working == "|7 barg - 8 barg| is 10 % of the span of 0 to 10 barg"


def test_the_farthest_pre_alarm_is_written_so_that_it_is_far_enough() -> None:
    row = {**TRIP, "URV": 7.7777777, "trip": 6.1234567, "H": "6"}
    assert unmended("SET13", [row]) == []
    low = {**row, "trip direction": "low", "L": "6.2"}
    assert unmended("SET13", [low]) == []


# ------------------------------------------------------------------------------------------------------------ SET04


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"design pressure": "8 barg"}, []),
        ({"design pressure": "7.99 barg"}, ["the high trip 8 barg is above the design limit 7.99 barg"]),
        ({"design pressure": "800 kPag"}, []),
        ({"design pressure": "9 bara"}, ["the high trip 8 barg is above the design limit 9 bara"]),
        ({"design pressure": "9.1 bara"}, []),
        # The line's pressure takes the reference of the body that stands on it.
        ({"design pressure": "7.5 bar"}, ["the high trip 8 barg is above the design limit 7.5 bar"]),
        ({"trip direction": "low", "design pressure": "5 barg"}, []),
        ({"tag": "TT-1", "LRV": "0 °C", "URV": "200 °C", "trip": "151 °C", "design temperature": "150 °C",
          "design pressure": "1 barg"}, ["the high trip 151 °C is above the design limit 150 °C"]),
        ({"tag": "TT-1", "LRV": "0 °C", "URV": "200 °C", "trip": "150 °C", "design temperature": "302 °F"}, []),
        # A difference of pressures has no design limit here.
        ({"tag": "PDT-1", "design pressure": "5 barg"}, []),
        ({"body": "differential", "LRV": "0 bar", "URV": "10 bar", "trip": "8 bar", "design pressure": "5 barg"}, []),
        ({"tag": "LT-1", "LRV": "0 m", "URV": "10 m", "trip": "8 m", "design pressure": "5 barg"}, []),
        # A switch trips at its set pressure.
        ({"tag": "PSHH-1", "trip": "", "trip direction": "", "set pressure": "8 barg", "design pressure": "7 barg"},
         ["the high trip 8 barg is above the design limit 7 barg"]),
        ({"tag": "PAHH-1", "trip direction": "", "design pressure": "7 barg"},
         ["the high trip 8 barg is above the design limit 7 barg"]),
    ],
)  # fmt: skip
def test_a_high_trip_acts_below_the_design_limit(row: Row, expected: list[str]) -> None:
    assert told("SET04", {**TRIP, **row}) == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"design pressure": "8 barg"}, "clear"),
        ({}, "unchecked: design pressure"),
        ({"trip direction": ""}, "unchecked: design pressure, trip direction"),
        ({"design pressure": "5 barg", "trip direction": ""}, "unchecked: trip direction"),
        ({"design pressure": "5 barg", "trip": ""}, "unchecked: trip"),
        ({"design pressure": "5 barg", "trip": "80 %"}, "unchecked: trip and design pressure of one dimension"),
        ({"design pressure": "5 barg", "trip direction": "low"}, "not applicable"),
        ({"design pressure": "5 barg", "trip": "", "trip direction": ""}, "not applicable"),
        ({"tag": "TT-1", "trip": "100 °C", "LRV": "0 °C", "URV": "200 °C"}, "unchecked: design temperature"),
        ({"tag": "FT-1", "trip": "8 m3/h", "LRV": "0 m3/h", "URV": "10 m3/h"}, "not applicable"),
    ],
)
def test_what_a_high_trip_is_compared_with(row: Row, expected: str) -> None:
    assert beside_others("SET04", {**TRIP, **row}) == expected


def test_a_trip_without_reference_is_asked_about_where_it_matters() -> None:
    row = {"tag": "PT-1", "trip": "8.5 bar", "trip direction": "high", "design pressure": "8 barg"}
    (review,) = asked("SET04", [row])
    assert said_of(review) == "review: the high trip 8.5 bar is above the design limit 8 barg"
    assert (review.found, review.off_by) == ("8.5 bar, read as gauge", "0.5 bar")
    assert asked("SET04", [{**row, "trip": "8 bar"}]) == []
    assert [said_of(each) for each in asked("SET04", [{**row, "trip": "9.1 bar"}])] == [
        "the high trip 9.1 bar is above the design limit 8 barg"
    ]


# ------------------------------------------------------------------------------------------------------------ SET05


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"H": "5"}, []),
        ({"H": "4.99"}, ["the normal value 5 m stands beyond H 4.99 m"]),
        ({"HH": "4"}, ["the normal value 5 m stands beyond HH 4 m"]),
        ({"H": "3", "HH": "4"}, ["the normal value 5 m stands beyond H 3 m, HH 4 m"]),
        ({"L": "5"}, []),
        ({"L": "5.01"}, ["the normal value 5 m stands beyond L 5.01 m"]),
        ({"LL": "5.5", "L": "5.2", "H": "6"}, ["the normal value 5 m stands beyond LL 5.5 m, L 5.2 m"]),
        ({"H": "4990 mm"}, ["the normal value 5 m stands beyond H 4990 mm"]),
        ({"H": "5000 mm"}, []),
        # A trip is no alarm.
        ({"trip": "4", "trip direction": "high", "H": "6"}, []),
    ],
)
def test_the_normal_value_stands_in_no_alarm(row: Row, expected: list[str]) -> None:
    assert told("SET05", {**LEVEL, "operating value normal": "5", **row}) == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        # The measured quantity where no operating value is given.
        ({"tag": "PT-1", "operating pressure normal": "9 barg", "H": "8 barg"}, "finding"),
        ({"tag": "PT-1", "operating pressure normal": "8 barg", "H": "8 barg"}, "clear"),
        ({"tag": "TT-1", "operating temperature normal": "90 °C", "H": "80 °C"}, "finding"),
        ({"tag": "TT-1", "operating temperature normal": "80 °C", "H": "176 °F"}, "clear"),
        ({"tag": "PDT-1", "operating pressure normal": "9 barg", "H": "200 mbar"}, "unchecked: operating value normal"),
        ({"tag": "PT-1", "body": "differential", "operating pressure normal": "9 barg", "H": "8 barg"},
         "unchecked: operating value normal"),
        ({"tag": "FT-1", "operating pressure normal": "9 barg", "H": "8 m3/h"}, "unchecked: operating value normal"),
        ({"tag": "PT-1", "operating value normal": "7 barg", "operating pressure normal": "9 barg", "H": "8 barg"},
         "clear"),
        # Blanks.
        ({"tag": "PT-1", "H": "8 barg"}, "unchecked: operating value normal or operating pressure normal"),
        ({"tag": "TT-1", "H": "8 °C"}, "unchecked: operating value normal or operating temperature normal"),
        ({"tag": "PT-1", "operating value max": "7 barg", "H": "8 barg"}, "unchecked: operating value normal"),
        ({"tag": "PT-1", "operating value normal": "4..7", "operating pressure normal": "9 barg", "H": "8 barg"},
         "unchecked: operating value normal"),
        ({"tag": "PT-1", "operating pressure normal": "7 barg", "H": "TBA"}, "not applicable"),
        ({"tag": "PT-1", "operating pressure normal": "7 barg", "H": "8 barg", "HH": "4..9"}, "unchecked: HH"),
        ({"tag": "PT-1", "operating pressure normal": "9 barg", "H": "8 barg", "HH": "4..9"}, "finding"),
        ({"tag": "PT-1", "operating pressure normal": "7 barg", "H": "80 %"},
         "unchecked: operating pressure normal and H of one dimension"),
        ({"tag": "PT-1", "operating pressure normal": "7 barg", "H": "80 %", "HH": "8 barg"},
         "unchecked: operating pressure normal and H of one dimension"),
        ({"tag": "PT-1", "operating pressure normal": "7 barg"}, "not applicable"),
        # One of them says what it is referred to.
        ({"tag": "PT-1", "operating pressure normal": "8.5 bar", "H": "8 barg"}, "review"),
        ({"tag": "PT-1", "operating pressure normal": "8.5 bar", "H": "8 barg", "body": "gauge"}, "finding"),
        ({"tag": "PT-1", "operating pressure normal": "7 bar", "H": "8 barg"}, "clear"),
    ],
)  # fmt: skip
def test_which_normal_value_is_compared(row: Row, expected: str) -> None:
    assert beside_others("SET05", {"P&ID": "D-1", **row}) == expected


def test_a_normal_value_beyond_an_alarm_says_by_how_much() -> None:
    (finding,) = asked("SET05", [{**LEVEL, "operating value normal": "5", "H": "4.5", "HH": "4.8"}])
    assert (finding.found, finding.wanted, finding.off_by) == ("5 m", "at most 4.5 m, at most 4.8 m", "0.5 m")
    assert finding.fields == ("operating value normal", "H", "HH")


# ------------------------------------------------------------------------------------------------------------ SET06

# Somebody has a setting, so that the list has them.
OTHER = {"tag": "TT-9", "HH": "90 °C"}


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "LSHH-1"}, ["LSHH-1: the letters LSHH promise a switch at HH, and there is none"]),
        ({"tag": "LSHH-1", "HH": "4 m"}, []),
        ({"tag": "LSHH-1", "trip": "4 m"}, []),
        ({"tag": "PSHH-1", "set pressure": "4 barg"}, []),
        ({"tag": "LSHH-1", "H": "4 m"}, ["LSHH-1: the letters LSHH promise a switch at HH, and there is none"]),
        ({"tag": "PAL-1"}, ["PAL-1: the letters PAL promise an alarm at L, and there is none"]),
        ({"tag": "PAL-1", "L": "1 barg"}, []),
        # A trip or a set pressure is a switch's, not an alarm's.
        ({"tag": "PAL-1", "trip": "1 barg"}, ["PAL-1: the letters PAL promise an alarm at L, and there is none"]),
        ({"tag": "PAHL-1"}, ["PAHL-1: the letters PAHL promise an alarm at H and an alarm at L, and there is none"]),
        ({"tag": "PAHL-1", "H": "4 barg"}, ["PAHL-1: the letters PAHL promise an alarm at L, and there is none"]),
        ({"tag": "PAHHH-1"}, ["PAHHH-1: the letters PAHHH promise an alarm at HH, and there is none"]),
        ({"tag": "LSHL-1", "trip": "4 m", "trip direction": "high"},
         ["LSHL-1: the letters LSHL promise a switch at L, and there is none"]),
        ({"tag": "LSHL-1", "trip": "4 m"}, []),
        ({"tag": "TSH-1"}, ["TSH-1: the letters TSH promise a switch at H, and there is none"]),
        ({"tag": "JAH-1"}, ["JAH-1: the letters JAH promise an alarm at H, and there is none"]),
        # No level, no promise.
        ({"tag": "PSV-1"}, []),
        ({"tag": "LS-1"}, []),
        ({"tag": "PT-1"}, []),
        ({"tag": "XA-1"}, []),
        # There or not: a position, a hand, a flame, a state.
        ({"tag": "ZSH-1"}, []),
        ({"tag": "ZSL-1"}, []),
        ({"tag": "ZAL-1"}, []),
        ({"tag": "HSH-1"}, []),
        ({"tag": "BSL-1"}, []),
        ({"tag": "YAH-1"}, []),
        # Not live.
        ({"tag": "LSHH-1", "status": "future"}, []),
    ],
)  # fmt: skip
def test_letters_promise_settings(row: Row, expected: list[str]) -> None:
    assert tell("SET06", row, OTHER) == expected


def test_an_alarms_setting_may_stand_on_its_transmitters_row() -> None:
    alarm = {"tag": "PAH-1", "location": "system"}
    missing = ["PAH-1: the letters PAH promise an alarm at H, and there is none"]
    assert tell("SET06", alarm, {"tag": "PT-1", "H": "8 barg"}) == []
    assert tell("SET06", alarm, {"tag": "PT-1", "HH": "8 barg"}) == missing
    assert tell("SET06", alarm, {"tag": "PT-2", "H": "8 barg"}) == missing
    assert tell("SET06", alarm, {"tag": "PDT-1", "H": "8 mbar"}) == missing
    # A switch in the field is set on its own.
    assert tell("SET06", {"tag": "PSH-1"}, {"tag": "PT-1", "H": "8 barg"}) == [
        "PSH-1: the letters PSH promise a switch at H, and there is none"
    ]


def test_the_alarm_and_trip_list_counts() -> None:
    rows = [{"tag": "LSHH-1"}, {"tag": "LSHH 2"}, {"tag": "PAH-3"}]
    alarms = [{"tag": "LSHH 1", "trip": "4 m"}, {"tag": "LSHH-2", "HH": "4 m"}, {"tag": "PT-9", "H": "4 bar"}]
    assert tell("SET06", *rows, alarms=alarms) == ["PAH-3: the letters PAH promise an alarm at H, and there is none"]
    assert tell("SET06", *rows, {"tag": "PT-3"}, alarms=[*alarms, {"tag": "PT-3", "H": "4 bar"}]) == []


def test_a_setting_that_cannot_be_read_is_not_missing() -> None:
    assert untold("SET06", {"tag": "LSHH-1", "HH": "4..4"}, OTHER) == {"HH": 1}
    assert untold("SET06", {"tag": "LSHH-1", "HH": "4..4", "trip": "4 m"}, OTHER) == {}


def test_a_list_without_any_setting_is_one_finding() -> None:
    rows = [{"tag": "LSHH-1"}, {"tag": "PAL-2"}, {"tag": "PT-3"}]
    assert tell("SET06", *rows) == [
        "list.xlsx: no sheet gives any alarm or trip setting; the letters of 2 tags promise one"
    ]
    assert counts("SET06", *rows) == {"not applicable": 1, "unchecked": 2}
    assert tell("SET06", {"tag": "PT-3"}, {"tag": "ZSO-4"}) == []


# ------------------------------------------------------------------------------------------------------------ SET08

SIF = {"safety function": "SIF-1", "trip": "8 barg", "trip direction": "high"}


@pytest.mark.parametrize(
    ("second", "expected"),
    [
        ({}, []),
        ({"trip": "800 kPag"}, []),
        ({"trip": "9.01325 bara"}, []),
        ({"trip": "8.01 barg"}, ["8 barg, 8.01 barg"]),
        ({"trip": "8 bara"}, ["8 barg, 8 bara"]),
        ({"trip direction": "low"}, ["8 barg high, 8 barg low"]),
    ],
)
def test_redundant_devices_trip_together(second: Row, expected: list[str]) -> None:
    rows = [{"tag": "PT-1A", **SIF}, {"tag": "PT-1B", **SIF, **second}]
    assert tell("SET08", *rows) == [
        f"PT-1A, PT-1B: redundant devices with different trip settings: {settings}" for settings in expected
    ]


def test_suffixes_alone_are_for_a_person_to_judge() -> None:
    rows = [{"tag": "PT-1A", "trip": "8 barg"}, {"tag": "PT-1B", "trip": "9 barg"}]
    assert tell("SET08", *rows) == [
        "review: PT-1A, PT-1B: devices that may be redundant (by suffix alone) have different trip settings: "
        "8 barg, 9 barg"
    ]
    assert counts("SET08", *rows) == {"review": 2}
    assert tell("SET08", rows[0], {**rows[1], "trip": "8 barg"}) == []
    # Nobody says that they trip.
    assert counts("SET08", *({**row, "trip": ""} for row in rows)) == {"not applicable": 2}


def test_a_blank_trip_among_redundant_devices_is_unchecked() -> None:
    rows = [{"tag": f"PT-1{suffix}", **SIF} for suffix in "ABC"]
    rows[2]["trip"] = ""
    assert untold("SET08", *rows) == {"trip or set pressure or HH or LL": 1}
    assert counts("SET08", *rows) == {"clear": 2, "unchecked": 1}
    assert untold("SET08", {"tag": "PT-1A", "trip": "8 barg"}, {"tag": "PT-1B"}) == {
        "trip or set pressure or HH or LL": 1
    }
    assert untold("SET08", *({**row, "trip": "8 m"} if row["tag"] == "PT-1B" else row for row in rows[:2])) == {
        "trips of one dimension": 1
    }


def test_redundant_switches_trip_at_their_set_pressure() -> None:
    rows = [
        {"tag": f"PSHH-1{x}", "safety function": "SIF-1", "set pressure": f"{p} barg"} for x, p in (("A", 8), ("B", 9))
    ]
    assert tell("SET08", *rows) == ["PSHH-1A, PSHH-1B: redundant devices with different trip settings: 8 barg, 9 barg"]


def test_each_of_redundant_devices_is_of_its_own_body() -> None:
    rows = [
        {"tag": "PT-1A", **SIF, "trip": "8 bar", "body": "gauge"},
        {"tag": "PT-1B", **SIF, "trip": "8 bar", "body": "absolute"},
    ]
    assert tell("SET08", *rows) == ["PT-1A, PT-1B: redundant devices with different trip settings: 8 bar, 8 bar"]


# ------------------------------------------------------------------------------------------------------------ SET10

FAILS = {
    "tag": "PT-1",
    "trip": "8 barg",
    "trip direction": "high",
    "failure direction": "low",
    "bad-signal detection": "no",
}


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({}, ["the signal fails low, the trip is high, and bad signals are not detected"]),
        ({"failure direction": "high"}, []),
        ({"bad-signal detection": "yes"}, []),
        ({"trip direction": "low"}, []),
        ({"trip direction": "low", "failure direction": "high"},
         ["the signal fails high, the trip is low, and bad signals are not detected"]),
        # Burn-out of a thermocouple is a failure too.
        ({"tag": "TE-1", "trip": "80 °C", "signal": "TC type K"},
         ["the signal fails low, the trip is high, and bad signals are not detected"]),
        ({"signal": "4-20 mA"}, ["the signal fails low, the trip is high, and bad signals are not detected"]),
    ],
)  # fmt: skip
def test_a_failed_signal_does_not_hide_the_trip(row: Row, expected: list[str]) -> None:
    assert told("SET10", {**FAILS, **row}) == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"failure direction": ""}, "unchecked: failure direction"),
        ({"bad-signal detection": ""}, "unchecked: bad-signal detection"),
        # Either not stated: unchecked, though the other would do.
        ({"failure direction": "high", "bad-signal detection": ""}, "unchecked: bad-signal detection"),
        ({"trip direction": ""}, "unchecked: trip direction"),
        ({"trip": "", "trip direction": ""}, "not applicable"),
        ({"trip": ""}, "finding"),
        # A contact fails to no side.
        ({"tag": "PSHH-1", "signal": "contact"}, "not applicable"),
        ({"signal": "NAMUR"}, "not applicable"),
    ],
)
def test_what_a_failing_signal_is_asked(row: Row, expected: str) -> None:
    assert outcome("SET10", [{**FAILS, **row}]) == expected


def test_either_remedy_is_named() -> None:
    (finding,) = asked("SET10", [FAILS])
    assert [fix.text for fix in finding.fixes] == ["failure direction high", "bad-signal detection yes"]
    assert values_of(finding.fixes) == [{"failure direction": "high"}, {"bad-signal detection": "yes"}]


# ------------------------------------------------------------------------------------------ what holds for all of them


@pytest.mark.parametrize(
    "code", ["SET01", "SET02", "SET03", "SET04", "SET05", "SET06", "SET07", "SET08", "SET10", "SET13"]
)
def test_what_is_not_live_is_not_asked(code: str) -> None:
    row = {**TRIP, "tag": "PSHH-1", "L": "9", "H": "8.5", "HH": "20", "design pressure": "5 barg",
           "operating pressure normal": "8.9 barg", "safety function": "SIF-1", "failure direction": "low",
           "bad-signal detection": "no", "status": "demolished"}  # fmt: skip
    assert counts(code, row, {**row, "tag": "PT-1A"}, {**row, "tag": "PT-1B", "trip": "3"}) == {"not applicable": 3}


def test_a_whole_mistake_of_units_is_seen_by_all_that_compare() -> None:
    row = {**TRIP, "H": "110 psig", "HH": "120 psig", "trip": "125 psig", "design pressure": "116 psig"}
    assert said("SET04", [row]) == ["PT-1: the high trip 125 psig is above the design limit 116 psig"]
    assert said("SET13", [row]) == []
    assert unchecked_for("SET05", [row]) == {"operating value normal or operating pressure normal": 1}
