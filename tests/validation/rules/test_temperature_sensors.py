"""What a temperature sensor can measure."""

import pytest

from tests.validation.rules.asked import asked, outcome, said_of, unmended, values_of


def element(lrv: str, urv: str, **more: str) -> list[dict[str, str]]:
    """A temperature element with a range."""
    return [{"tag": "TE-1", "LRV": lrv, "URV": urv, **more}]


@pytest.mark.parametrize(
    ("sensor", "lrv", "urv", "expected"),
    [
        ("Pt100", "-200 °C", "850 °C", []),
        ("Pt100", "-201 °C", "600 °C",
         ["the range -201 to 600 °C is outside what Pt100 can measure, -200 to 850 °C (IEC 60751)"]),
        ("Pt100", "0 °C", "851 °C",
         ["the range 0 to 851 °C is outside what Pt100 can measure, -200 to 850 °C (IEC 60751)"]),
        ("Pt100", "0 °F", "1562 °F", []),
        ("Pt100", "0 °F", "1600 °F",
         ["the range 0 to 1600 °F is outside what Pt100 can measure, -200 to 850 °C (IEC 60751)"]),
        ("TC type K", "0 °C", "1300 °C", []),
        ("TC type K", "1301 °C", "0 °C",
         ["the range 1301 to 0 °C is outside what type K can measure, -270 to 1300 °C (IEC 60584-1:2013)"]),
        ("TC type T", "0 °C", "401 °C",
         ["the range 0 to 401 °C is outside what type T can measure, -270 to 400 °C (IEC 60584-1:2013)"]),
        ("TC type J", "-210 °C", "1200 °C", []),
        ("TC type E", "0 °C", "1001 °C",
         ["the range 0 to 1001 °C is outside what type E can measure, -270 to 1000 °C (IEC 60584-1:2013)"]),
        ("TC type S", "-50 °C", "1768 °C", []),
        ("TC type B", "0 °C", "1820 °C", []),
        ("TC type B", "-10 °C", "1800 °C",
         ["the range -10 to 1800 °C is outside what type B can measure, 0 to 1820 °C (IEC 60584-1:2013)"]),
    ],
)  # fmt: skip
def test_a_range_lies_within_the_sensor_s_function(sensor: str, lrv: str, urv: str, expected: list[str]) -> None:
    assert [said_of(each) for each in asked("RNG14", element(lrv, urv, signal=sensor))] == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "TE-1", "LRV": "0 °C", "URV": "900 °C"}, "unchecked: sensor type"),
        ({"tag": "TE-1", "LRV": "0 °C", "URV": "900 °C", "signal": "RTD"}, "unchecked: sensor type"),
        ({"tag": "TE-1", "LRV": "0 °C", "URV": "900 °C", "sensor type": "Ni100"}, "unchecked: sensor type"),
        ({"tag": "TE-1", "signal": "Pt100"}, "unchecked: LRV or system LRV, URV or system URV"),
        ({"tag": "TE-1", "signal": "Pt100", "LRV": "0 °C", "URV": "900 barg"}, "unchecked: range unit"),
        ({"tag": "TE-1", "signal": "Pt100", "system LRV": "0 °C", "system URV": "900 °C"}, "finding"),
        ({"tag": "TE-1", "kind": "Pt100 3-wire", "LRV": "0 °C", "URV": "900 °C"}, "finding"),
        ({"tag": "TT-1", "sensor type": "Pt100", "signal": "4-20 mA", "LRV": "0 °C", "URV": "900 °C"}, "finding"),
        ({"tag": "TG-1", "LRV": "0 °C", "URV": "900 °C"}, "not applicable"),
        ({"tag": "TS-1", "LRV": "0 °C", "URV": "900 °C"}, "not applicable"),
        ({"tag": "TDT-1", "sensor type": "Pt100", "LRV": "-900 °C", "URV": "900 °C"}, "not applicable"),
        ({"tag": "PT-1", "LRV": "0 barg", "URV": "900 barg"}, "not applicable"),
    ],
)
def test_a_sensor_that_nobody_names_is_not_clear(row: dict[str, str], expected: str) -> None:
    assert outcome("RNG14", [row]) == expected


def test_a_transmitter_without_a_sensor_of_its_own_has_its_element_s() -> None:
    rows = [
        {"tag": "TE-1", "signal": "TC type J"},
        {"tag": "TT-1", "signal": "4-20 mA", "LRV": "0 °C", "URV": "1250 °C"},
    ]
    assert [said_of(each) for each in asked("RNG14", rows)] == [
        "the range 0 to 1250 °C is outside what type J of TE-1 can measure, -210 to 1200 °C (IEC 60584-1:2013)"
    ]
    assert asked("RNG14", [rows[0], {**rows[1], "URV": "1200 °C"}]) == []


def test_sensor_types_and_device_types_that_can_are_named() -> None:
    types = [
        {"code": "J", "kind": "element", "sensor type": "type J", "LRL": "-40 °C", "URL": "1300 °C"},
        {"code": "K", "kind": "element", "sensor type": "type K", "LRL": "-40 °C", "URL": "1250 °C"},
        {"code": "T", "kind": "element", "sensor type": "type T", "LRL": "-40 °C", "URL": "1300 °C"},
    ]
    rows = element("0 °C", "1250 °C", **{"device type": "J"})
    fixes = asked("RNG14", rows, types=types)[0].fixes
    assert [fix.text for fix in fixes] == [
        "sensor types that can: type K, type N, type R, type S, type B, type A, type C",
        "device type K (-40 to 1250 °C)",
    ]
    assert values_of(fixes) == [{"device type": "K"}]
    assert unmended("RNG14", rows, types=types) == []
