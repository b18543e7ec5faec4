"""What the process does, and is designed for, against what the instrument bears."""

from typing import Any

import pytest

from tests.validation.rules.asked import asked, outcome, said_of, unmended, values_of

# ------------------------------------------------------------------------------------------------------------ PRO01

WELL = {
    "tag": "PT-1",
    "design pressure": "16 barg",
    "operating pressure max": "12 barg",
    "design temperature": "100 °C",
    "operating temperature max": "60 °C",
}


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({}, []),
        ({"design pressure": "12 barg", "design temperature": "60 °C"}, []),
        ({"design pressure": "11.9 barg"},
         ["the design pressure 11.9 barg is below the operating pressure max 12 barg by 0.1 bar"]),
        ({"design temperature": "59 °C"},
         ["the design temperature 59 °C is below the operating temperature max 60 °C by 1 °C"]),
        ({"design pressure": "1 barg", "design temperature": "59 °C"},
         ["the design pressure 1 barg is below the operating pressure max 12 barg by 11 bar",
          "the design temperature 59 °C is below the operating temperature max 60 °C by 1 °C"]),
        ({"design pressure": "1.2 MPag"}, []),
        ({"design pressure": "170 psig"},
         ["the design pressure 170 psig is below the operating pressure max 12 barg by 4.04529 psi"]),
        ({"design pressure": "13.1 bara"}, []),  # 12.087 barg
        ({"design pressure": "12.9 bara"},
         ["the design pressure 12.9 bara is below the operating pressure max 12 barg by 0.11325 bar"]),
        ({"design temperature": "140 °F"}, []),
        # A normal value above the design value tells the same of a maximum that is blank.
        ({"operating pressure max": "", "operating pressure normal": "17 barg"},
         ["the design pressure 16 barg is below the operating pressure normal 17 barg by 1 bar"]),
        # What a PT or TT measures is the pressure or temperature of its line.
        ({"operating pressure max": "", "operating value max": "17 barg"},
         ["the design pressure 16 barg is below the operating value max 17 barg by 1 bar"]),
        ({"operating value max": "17 barg"},
         ["the design pressure 16 barg is below the operating value max 17 barg by 1 bar"]),
        ({"operating value max": "16 barg"}, []),
        ({"operating value normal": "17 barg"},
         ["the design pressure 16 barg is below the operating value normal 17 barg by 1 bar"]),
        ({"tag": "TT-1", "operating value max": "120 °C"},
         ["the design temperature 100 °C is below the operating value max 120 °C by 20 °C"]),
        ({"tag": "PDT-1", "operating value max": "17 barg"}, []),
        ({"tag": "LT-1", "operating value max": "17 barg"}, []),
        ({"tag": "PT-1", "operating value max": "17 barg", "body": "dp"}, []),
        # Both without a reference: they are of one line.
        ({"design pressure": "12 bar", "operating pressure max": "12 bar"}, []),
        ({"design pressure": "11 bar", "operating pressure max": "12 bar"},
         ["the design pressure 11 bar is below the operating pressure max 12 bar by 1 bar"]),
        # One of them without: read as gauge, and asked where read as absolute it would come out otherwise.
        ({"design pressure": "12.5 bar"},
         ["review: the design pressure 12.5 bar is below the operating pressure max 12 barg by 0.51325 bar"]),
        ({"design pressure": "14 bar"}, []),
        ({"design pressure": "11 bar"},
         ["the design pressure 11 bar is below the operating pressure max 12 barg by 1 bar"]),
    ],
)  # fmt: skip
def test_nothing_is_run_beyond_its_design(row: dict[str, str], expected: list[str]) -> None:
    assert [said_of(each) for each in asked("PRO01", [{**WELL, **row}])] == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"design pressure": ""}, "unchecked: design pressure"),
        ({"operating pressure max": ""}, "unchecked: operating pressure max"),
        ({"operating pressure max": "", "operating value max": "12 barg"}, "clear"),
        ({"design temperature": ""}, "unchecked: design temperature"),
        ({"operating temperature max": ""}, "unchecked: operating temperature max"),
        ({"design pressure": "", "design temperature": "50 °C"}, "finding"),
        ({"tag": "HS-1"}, "clear"),
        ({"tag": "TW-1", "design temperature": "50 °C"}, "finding"),
    ],
)
def test_a_blank_is_no_design(row: dict[str, str], expected: str) -> None:
    assert outcome("PRO01", [{**WELL, **row}]) == expected


@pytest.mark.parametrize(
    ("tag", "expected"),
    [
        ("PT-1", "unchecked: design pressure, operating pressure max, design temperature, operating temperature max"),
        ("HS-1", "not applicable"),
        ("ZSO-1", "not applicable"),
    ],
)
def test_what_does_not_touch_the_process_is_not_asked(tag: str, expected: str) -> None:
    assert outcome("PRO01", [{"tag": tag, "service": "x"}]) == expected


# ------------------------------------------------------------------------------------------------------------ PRO02

GAUGE: dict[str, Any] = {
    "code": "G", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg",
    "over-range limit": "20 barg",
}  # fmt: skip
STRONG = {**GAUGE, "code": "G40", "URL": "40 barg", "over-range limit": "80 barg"}
ABSOLUTE = {**GAUGE, "code": "A", "body": "absolute", "LRL": "0 bara", "URL": "10 bara", "over-range limit": "20 bara"}


@pytest.mark.parametrize(
    ("device", "design", "expected"),
    [
        ("G", "20 barg", []),
        ("G", "25 barg", ["the design pressure 25 barg is above the body's over-range limit 20 barg by 5 bar"]),
        ("G", "20 bar", []),  # takes the body's reference
        ("G", "20.5 bar", ["the design pressure 20.5 bar is above the body's over-range limit 20 barg by 0.5 bar"]),
        ("G", "21 bara", []),
        ("G", "22 bara", ["the design pressure 22 bara is above the body's over-range limit 20 barg by 0.98675 bar"]),
        ("G", "2000 kPag", []),
        ("A", "18.9 barg", []),
        ("A", "19 barg", ["the design pressure 19 barg is above the body's over-range limit 20 bara by 0.01325 bar"]),
        ("A", "20 bar", []),
    ],
)
def test_the_design_pressure_stays_below_the_over_range_limit(device: str, design: str, expected: list[str]) -> None:
    rows = [{"tag": "PT-1", "device type": device, "design pressure": design, "LRV": "0 bar", "URV": "5 bar"}]
    assert [said_of(each) for each in asked("PRO02", rows, types=[GAUGE, ABSOLUTE])] == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({}, "unchecked: design pressure"),
        ({"operating pressure max": "25 barg"}, "finding"),  # a design pressure is no lower
        ({"operating pressure max": "15 barg"}, "unchecked: design pressure"),
        ({"design pressure": "15 barg", "device type": ""}, "unchecked: body, over-range limit"),
        ({"design pressure": "15 barg", "device type": "N"}, "unchecked: over-range limit"),
        ({"design pressure": "25 barg", "device type": "D"}, "not applicable"),
        ({"tag": "TT-1", "design pressure": "15 barg", "device type": ""}, "not applicable"),
        ({"tag": "PSV-1", "design pressure": "15 barg", "device type": ""}, "not applicable"),
        ({"tag": "PDT-1", "design pressure": "15 barg", "device type": ""}, "not applicable"),
        ({"tag": "PG-1", "design pressure": "15 barg", "device type": ""}, "unchecked: over-range limit"),
        ({"tag": "LT-1", "design pressure": "50 barg", "device type": "R"}, "finding"),  # a radar with a limit
        ({"tag": "LT-1", "design pressure": "50 barg", "device type": ""}, "not applicable"),
    ],
)
def test_a_blank_is_no_over_range_limit(row: dict[str, str], expected: str) -> None:
    types = [
        GAUGE,
        {**GAUGE, "code": "N", "over-range limit": ""},
        {**GAUGE, "code": "D", "body": "differential"},
        {"code": "R", "kind": "transmitter", "LRL": "0 m", "URL": "20 m", "over-range limit": "40 barg"},
    ]
    assert outcome("PRO02", [{"tag": "PT-1", "device type": "G", **row}], types=types) == expected


def test_a_body_that_is_not_stated_is_asked_about_only_where_it_matters() -> None:
    limits = {"over-range limit": "20 bar"}
    row = {"tag": "LT-1", "design pressure": "19.5 barg", **limits}
    assert outcome("PRO02", [row]) == "review"
    assert outcome("PRO02", [{**row, "design pressure": "18 barg"}]) == "clear"
    assert outcome("PRO02", [{**row, "design pressure": "21 barg"}]) == "finding"


def test_device_types_that_hold_the_design_pressure_are_named() -> None:
    rows = [{"tag": "PT-1", "device type": "G", "design pressure": "25 barg", "LRV": "0 barg", "URV": "5 barg"}]
    found = asked("PRO02", rows, types=[GAUGE, STRONG, ABSOLUTE])[0]
    assert values_of(found.fixes) == [{"device type": "G40"}]
    assert (found.severity.value, found.found, found.wanted, found.off_by) == (
        "danger", "25 barg", "at most 20 barg", "5 bar",
    )  # fmt: skip
    assert unmended("PRO02", rows, types=[GAUGE, STRONG, ABSOLUTE]) == []


# ------------------------------------------------------------------------------------------------------------ PRO03

DP: dict[str, Any] = {
    "code": "D10", "kind": "transmitter", "body": "differential", "LRL": "-10 mbar", "URL": "10 mbar",
    "static pressure limit": "0.7 bar",
}  # fmt: skip
STOUT = {**DP, "code": "D60", "LRL": "-60 mbar", "URL": "60 mbar", "static pressure limit": "160 bar"}


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"design pressure": "0.7 barg"}, []),
        ({"design pressure": "1 barg"},
         ["the design pressure 1 barg is above the body's static pressure limit 0.7 bar by 0.3 bar"]),
        ({"design pressure": "1 bar"},
         ["the design pressure 1 bar is above the body's static pressure limit 0.7 bar by 0.3 bar"]),
        ({"design pressure": "1.5 bara"}, []),
        ({"design pressure": "0.5 barg", "operating pressure max": "2 barg"}, []),  # PRO01 speaks
        ({"operating pressure max": "2 barg"},
         ["the operating pressure max 2 barg is above the body's static pressure limit 0.7 bar by 1.3 bar"]),
        ({"operating pressure max": "0.5 barg"}, []),
        ({"operating pressure normal": "2 barg"},
         ["the operating pressure normal 2 barg is above the body's static pressure limit 0.7 bar by 1.3 bar"]),
        ({"tag": "LT-1", "design pressure": "1 barg"},
         ["the design pressure 1 barg is above the body's static pressure limit 0.7 bar by 0.3 bar"]),
    ],
)  # fmt: skip
def test_the_line_s_pressure_stays_below_the_static_limit(row: dict[str, str], expected: list[str]) -> None:
    rows = [{"tag": "PDT-1", "device type": "D10", "LRV": "0 mbar", "URV": "6 mbar", **row}]
    assert [said_of(each) for each in asked("PRO03", rows, types=[DP, STOUT])] == expected
    for each in asked("PRO03", rows, types=[DP, STOUT]):
        # Of a type that nobody can check, for want of a maximum, nobody can say that it holds.
        known = "normal" not in each.message
        assert values_of(each.fixes) == ([{"device type": "D60"}] if known else [])
    assert unmended("PRO03", rows, types=[DP, STOUT]) == []


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({}, "unchecked: design pressure or operating pressure max"),
        ({"operating pressure normal": "0.5 barg"}, "unchecked: design pressure or operating pressure max"),
        ({"device type": "N", "design pressure": "1 barg"}, "unchecked: static pressure limit"),
        ({"device type": "", "design pressure": "1 barg"}, "unchecked: static pressure limit"),
        ({"tag": "FT-1", "device type": "", "design pressure": "1 barg", "LRV": "0 mbar", "URV": "9 mbar"},
         "unchecked: static pressure limit"),
        ({"tag": "LT-1", "device type": "", "design pressure": "1 barg", "LRV": "0 mbar", "URV": "9 mbar"},
         "unchecked: body, static pressure limit"),
        ({"tag": "PT-1", "device type": "G", "design pressure": "99 barg"}, "not applicable"),
        ({"tag": "LT-1", "device type": "", "design pressure": "1 barg", "LRV": "0 m", "URV": "9 m"},
         "not applicable"),
    ],
)  # fmt: skip
def test_a_blank_is_no_static_limit(row: dict[str, str], expected: str) -> None:
    types = [DP, {**DP, "code": "N", "static pressure limit": ""}, GAUGE]
    assert outcome("PRO03", [{"tag": "PDT-1", "device type": "D10", **row}], types=types) == expected


# ------------------------------------------------------------------------------------------------------------ PRO05

HOT: dict[str, Any] = {
    "code": "G", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg",
    "process temperature limit min": "-40 °C", "process temperature limit max": "110 °C",
    "seal temperature limit min": "-10 °C", "seal temperature limit max": "180 °C",
}  # fmt: skip
HOTTER = {**HOT, "code": "H", "process temperature limit max": "150 °C", "seal temperature limit max": "250 °C"}


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"mounting": "direct", "design temperature": "110 °C"}, []),
        ({"mounting": "direct", "design temperature": "120 °C"},
         ["the design temperature 120 °C is above the body's limit 110 °C by 10 °C"]),
        ({"mounting": "direct", "design temperature": "248 °F"},
         ["the design temperature 248 °F is above the body's limit 110 °C by 10 °C"]),
        ({"mounting": "direct", "design temperature": "90 °C", "operating temperature max": "120 °C"}, []),
        ({"mounting": "direct", "operating temperature max": "120 °C", "operating temperature min": "5 °C"},
         ["the operating temperature max 120 °C is above the body's limit 110 °C by 10 °C"]),
        ({"mounting": "direct", "operating temperature max": "20 °C", "operating temperature min": "-50 °C"},
         ["the operating temperature min -50 °C is below the body's limit -40 °C by 10 °C"]),
        ({"mounting": "direct", "design temperature": "60 °C", "operating temperature min": "-50 °C"},
         ["the operating temperature min -50 °C is below the body's limit -40 °C by 10 °C"]),
        ({"mounting": "direct", "design temperature": "-45 °C"},
         ["the design temperature -45 °C is below the body's limit -40 °C by 5 °C"]),
        # A remote seal takes the temperature, and has limits of its own.
        ({"mounting": "remote seal", "design temperature": "180 °C"}, []),
        ({"mounting": "remote seal", "design temperature": "200 °C"},
         ["the design temperature 200 °C is above the seal's limit 180 °C by 20 °C"]),
        ({"mounting": "remote seal", "design temperature": "100 °C", "operating temperature min": "-20 °C"},
         ["the operating temperature min -20 °C is below the seal's limit -10 °C by 10 °C"]),
        # A temperature at the device is compared whatever the mounting.
        ({"mounting": "impulse line", "temperature at the device": "120 °C", "design temperature": "300 °C"},
         ["the temperature at the device 120 °C is above the body's limit 110 °C by 10 °C"]),
        ({"mounting": "direct", "temperature at the device": "60 °C", "design temperature": "300 °C"}, []),
        ({"temperature at the device": "60 °C", "design temperature": "300 °C"}, []),
        ({"mounting": "remote seal", "temperature at the device": "60 °C", "design temperature": "200 °C"},
         ["the design temperature 200 °C is above the seal's limit 180 °C by 20 °C"]),
        # How it is mounted nobody says: somebody must.
        ({"design temperature": "120 °C"},
         ["review: mounting not stated: mounted direct, the design temperature 120 °C is above the body's limit "
          "110 °C by 10 °C"]),
        ({"design temperature": "100 °C"}, []),
        ({"design temperature": "100 °C", "operating temperature min": "-20 °C"},
         ["review: mounting not stated: mounted direct, the operating temperature min -20 °C is below the seal's "
          "limit -10 °C by 10 °C"]),
    ],
)  # fmt: skip
def test_the_process_is_no_hotter_or_colder_than_the_body_bears(row: dict[str, str], expected: list[str]) -> None:
    rows = [{"tag": "PT-1", "device type": "G", **row}]
    assert [said_of(each) for each in asked("PRO05", rows, types=[HOT, HOTTER])] == expected
    assert unmended("PRO05", rows, types=[HOT, HOTTER]) == []


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"mounting": "impulse line", "design temperature": "300 °C"}, "not applicable"),
        ({"mounting": "thermowell", "design temperature": "300 °C"}, "not applicable"),
        ({"mounting": "direct", "design temperature": "300 °C", "location": "cabinet"}, "not applicable"),
        ({"mounting": "direct"}, "unchecked: design temperature or operating temperature max, "
                                 "design temperature or operating temperature min"),
        ({"mounting": "direct", "operating temperature max": "50 °C"},
         "unchecked: design temperature or operating temperature min"),
        ({"mounting": "direct", "operating temperature max": "150 °C"}, "finding"),  # wrong whatever the minimum is
        ({"mounting": "direct", "design temperature": "50 °C", "device type": "N"},
         "unchecked: process temperature limit min"),
        ({"mounting": "direct", "design temperature": "150 °C", "device type": "N"}, "finding"),
        ({"mounting": "direct", "design temperature": "50 °C", "device type": ""},
         "unchecked: process temperature limit max, process temperature limit min"),
        ({"mounting": "remote seal", "design temperature": "50 °C", "device type": "N"},
         "unchecked: seal temperature limit max, seal temperature limit min"),
        ({"tag": "VT-1", "device type": "", "design temperature": "50 °C", "mounting": "direct"},
         "unchecked: process temperature limit max, process temperature limit min"),
        ({"tag": "HS-1", "device type": "", "design temperature": "50 °C"}, "not applicable"),
        ({"tag": "GD-1", "device type": "", "design temperature": "50 °C"}, "not applicable"),
        ({"tag": "FV-1", "device type": "", "design temperature": "50 °C"}, "not applicable"),
    ],
)  # fmt: skip
def test_a_blank_is_no_temperature_limit(row: dict[str, str], expected: str) -> None:
    types = [HOT, {**HOT, "code": "N", "process temperature limit min": "", "seal temperature limit min": "",
                   "seal temperature limit max": ""}]  # fmt: skip
    assert outcome("PRO05", [{"tag": "PT-1", "device type": "G", **row}], types=types) == expected


def test_device_types_that_bear_the_temperature_are_named() -> None:
    rows = [{"tag": "PT-1", "device type": "G", "mounting": "direct", "design temperature": "120 °C"}]
    assert values_of(asked("PRO05", rows, types=[HOT, HOTTER])[0].fixes) == [{"device type": "H"}]


# ------------------------------------------------------------------------------------------------------------ PRO06

INDOOR: dict[str, Any] = {
    "code": "I", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg",
    "ambient limit min": "-10 °C", "ambient limit max": "50 °C",
}  # fmt: skip
OUTDOOR = {**INDOOR, "code": "O", "ambient limit min": "-40 °C", "ambient limit max": "80 °C"}


@pytest.mark.parametrize(
    ("low", "high", "expected"),
    [
        ("-10", "50", []),
        ("-11", "50", ["the area's ambient -11 °C is below the device type's -10 °C by 1 °C"]),
        ("-10", "51", ["the area's ambient 51 °C is above the device type's 50 °C by 1 °C"]),
        (
            "-20",
            "55",
            [
                "the area's ambient 55 °C is above the device type's 50 °C by 5 °C",
                "the area's ambient -20 °C is below the device type's -10 °C by 10 °C",
            ],
        ),
    ],
)
def test_the_climate_of_the_area_is_one_that_the_type_bears(low: str, high: str, expected: list[str]) -> None:
    areas = [{"code": "A1", "system": "zone", "zone": "2", "ambient min": f"{low} °C", "ambient max": f"{high} °C"}]
    rows = [{"tag": "PT-1", "device type": "I", "area": "A1"}]
    found = asked("PRO06", rows, types=[INDOOR, OUTDOOR], areas=areas)
    assert [said_of(each) for each in found] == expected
    assert all(values_of(each.fixes) == [{"device type": "O"}] for each in found)
    assert unmended("PRO06", rows, types=[INDOOR, OUTDOOR], areas=areas) == []


@pytest.mark.parametrize(
    ("row", "area", "expected"),
    [
        ({"area": "A1"}, {"ambient min": ""}, "unchecked: area ambient min"),
        ({"area": "A1"}, {"ambient max": ""}, "unchecked: area ambient max"),
        ({"area": "A1"}, {"ambient max": "", "ambient min": "-20 °C"}, "finding"),
        ({}, {}, "unchecked: area"),
        ({"area": "A1", "device type": "N"}, {}, "unchecked: ambient limit min, ambient limit max"),
        ({"area": "A1", "device type": ""}, {}, "unchecked: ambient limit min, ambient limit max"),
        ({"tag": "TW-1", "area": "A1", "device type": ""}, {}, "not applicable"),
        ({"tag": "TT-1", "location": "cabinet", "device type": ""}, {}, "not applicable"),
    ],
)
def test_a_blank_is_no_climate(row: dict[str, str], area: dict[str, str], expected: str) -> None:
    areas = [{"code": "A1", "system": "zone", "zone": "2", "ambient min": "0 °C", "ambient max": "40 °C", **area}]
    types = [INDOOR, {**INDOOR, "code": "N", "ambient limit min": "", "ambient limit max": ""}]
    rows = [{"tag": "PT-1", "device type": "I", **row}]
    assert outcome("PRO06", rows, types=types, areas=areas) == expected
