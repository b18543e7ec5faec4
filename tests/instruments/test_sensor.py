"""Platinum sensors and thermocouples: functions, inverses, limits, and what lists call them."""

import itertools

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.sensor import (
    THERMOCOUPLE_LIMITS_C,
    SensorLimits,
    pt100_c,
    pt100_class_limits_c,
    pt100_ohm,
    pt100_ohm_per_k,
    pt100_tolerance_k,
    read_sensor_type,
    sensor_limits,
    sensors_for_range,
    thermocouple_c,
    thermocouple_mv,
    two_wire_lead_error_k,
)

FUNCTIONS_C = {**THERMOCOUPLE_LIMITS_C, "K": (-270.0, 1372.0), "R": (-50.0, 1768.1), "S": (-50.0, 1768.1)}
LETTERS = "KJTENRSB"


@pytest.mark.parametrize(
    ("t_c", "ohm"),
    [
        (-200.0, 18.5201),
        (-100.0, 60.2558),
        (0.0, 100.0),
        (100.0, 138.5055),
        (200.0, 175.8560),
        (400.0, 247.0920),
        (850.0, 390.4811),
    ],
)
def test_pt100(t_c: float, ohm: float) -> None:
    assert pt100_ohm(t_c) == pytest.approx(ohm, abs=5.1e-5)
    assert pt100_c(pt100_ohm(t_c)) == pytest.approx(t_c, abs=1e-9)
    assert pt100_ohm(t_c, r0_ohm=1000.0) == pytest.approx(10.0 * pt100_ohm(t_c), rel=1e-12)


@pytest.mark.parametrize("t_c", [-200.001, 850.001])
def test_pt100_has_no_function_outside_its_limits(t_c: float) -> None:
    for function in (pt100_ohm, pt100_ohm_per_k):
        with pytest.raises(ValueError, match="IEC 60751"):
            function(t_c)


@pytest.mark.parametrize("ohm", [18.51, 390.49])
def test_pt100_has_no_temperature_outside_its_limits(ohm: float) -> None:
    with pytest.raises(ValueError, match="IEC 60751"):
        pt100_c(ohm)


@given(st.floats(-199.9, 849.9))
def test_pt100_sensitivity_is_the_slope(t_c: float) -> None:
    slope = (pt100_ohm(t_c + 0.05) - pt100_ohm(t_c - 0.05)) / 0.1
    assert pt100_ohm_per_k(t_c) == pytest.approx(slope, rel=1e-6)


@pytest.mark.parametrize(
    ("tolerance_class", "tolerances"),
    [("AA", (0.1, 0.27)), ("A", (0.15, 0.35)), ("B", (0.3, 0.8)), ("C", (0.6, 1.6))],
)
def test_pt100_tolerance(tolerance_class: str, tolerances: tuple[float, float]) -> None:
    found = [pt100_tolerance_k(t_c, tolerance_class) for t_c in (0.0, 100.0, -100.0)]  # type: ignore[arg-type]
    assert found == pytest.approx([*tolerances, tolerances[1]], rel=1e-12)


def test_a_class_holds_in_a_range_that_differs_with_the_construction() -> None:
    assert pt100_class_limits_c("A", "wire-wound") == (-100.0, 450.0)
    assert pt100_class_limits_c("A", "film") == (-30.0, 300.0)


@pytest.mark.parametrize(
    ("lead_ohm", "error_k"), [(7.8, 20.63), (0.02 * 3.9, 0.21), (0.0, 0.0)], ids=["2-wire", "3-wire", "none"]
)
def test_lead_error(lead_ohm: float, error_k: float) -> None:
    assert two_wire_lead_error_k(100.0, lead_ohm) == pytest.approx(error_k, abs=0.005)


@pytest.mark.parametrize("t_c", [-150.0, -1.0, 850.0])
def test_lead_error_below_zero_across_zero_and_above_the_upper_limit(t_c: float) -> None:
    assert two_wire_lead_error_k(t_c, 1.0) == pytest.approx(1.0 / pt100_ohm_per_k(t_c), rel=5e-3)


@pytest.mark.parametrize(
    ("letter", "mv_at_100"),
    [
        ("K", 4.0962),
        ("J", 5.2689),
        ("T", 4.2785),
        ("E", 6.3189),
        ("N", 2.7741),
        ("R", 0.6474),
        ("S", 0.6459),
        ("B", 0.0332),
    ],
)
def test_thermocouple(letter: str, mv_at_100: float) -> None:
    assert thermocouple_mv(letter, 100.0) == pytest.approx(mv_at_100, abs=5.1e-5)
    assert thermocouple_mv(letter, 0.0) == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize("letter", LETTERS)
def test_pieces_of_a_function_meet(letter: str) -> None:
    low, high = FUNCTIONS_C[letter]
    for end in (0.0, 630.615, 760.0, 1064.18, 1664.5):
        if low < end < high:
            step = thermocouple_mv(letter, end + 1e-6) - thermocouple_mv(letter, end - 1e-6)
            assert abs(step) < 1e-6


@pytest.mark.parametrize("letter", LETTERS)
@given(st.floats(0.0, 1.0))
def test_thermocouple_inverse(letter: str, fraction: float) -> None:
    low, high = FUNCTIONS_C[letter]
    low = 45.0 if letter == "B" else low
    t_c = low + fraction * (high - low)
    mv = thermocouple_mv(letter, t_c)
    found = thermocouple_c(letter, mv)
    assert thermocouple_mv(letter, found) == pytest.approx(mv, abs=1e-9)
    # where the curve is flat (below -250 degC, type B below 100) a rounding of the voltage is some 1e-6 K
    assert found == pytest.approx(t_c, abs=1e-6)


@pytest.mark.parametrize("letter", LETTERS)
def test_thermocouple_outside_its_function(letter: str) -> None:
    low, high = FUNCTIONS_C[letter]
    for t_c in (low - 0.01, high + 0.01):
        with pytest.raises(ValueError, match="no voltage"):
            thermocouple_mv(letter, t_c)
    with pytest.raises(ValueError, match="no temperature"):
        thermocouple_c(letter, thermocouple_mv(letter, high) + 0.001)
    with pytest.raises(ValueError, match="no temperature"):
        thermocouple_c(letter, (-0.0026 if letter == "B" else thermocouple_mv(letter, low)) - 0.001)


@pytest.mark.parametrize("letter", ["A", "C", "L", "X", ""])
def test_types_without_a_function(letter: str) -> None:
    with pytest.raises(ValueError, match="no function"):
        thermocouple_mv(letter, 100.0)


def test_type_b_gives_the_upper_of_two_temperatures() -> None:
    assert thermocouple_c("B", 0.0) == pytest.approx(42.0, abs=0.5)
    assert thermocouple_c("B", -0.002) > 21.0


def test_cold_junction_is_compensated_in_millivolts() -> None:
    measured = thermocouple_mv("K", 300.0, cold_junction_c=25.0)
    assert thermocouple_c("K", measured, cold_junction_c=25.0) == pytest.approx(300.0, abs=1e-6)
    assert thermocouple_c("K", measured) + 25.0 == pytest.approx(300.78, abs=0.005)
    at_400 = thermocouple_mv("K", 400.0, cold_junction_c=25.0)
    assert thermocouple_c("K", at_400) + 25.0 == pytest.approx(401.28, abs=0.005)


def test_copper_instead_of_extension_cable_reads_wrong() -> None:
    box_c, card_c = 45.0, 25.0
    at_card = thermocouple_mv("K", 300.0, cold_junction_c=box_c)
    assert at_card + thermocouple_mv("K", card_c) == pytest.approx(11.3917, abs=5e-5)
    assert thermocouple_c("K", at_card, cold_junction_c=card_c) == pytest.approx(280.23, abs=0.005)


PT100 = [
    "Pt100",
    "PT 100",
    "Pt-100 3-wire",
    "PT100-3W",
    "pt100",
    "2xPt100",
    "2 x PT100 Class A",
    "Duplex Pt100",
]
PT100 += [
    "RTD Pt100",
    "RTD (PT-100), 4 wire",
    "RTDPt100",
    "PT100 3WIRE RTD",
    "100 ohm platinum",
    "100 \u2126 Pt",
]
PT100 += [
    "Platinum RTD, 100 ohm",
    "Platinum resistance thermometer, 100 \u03a9",
    "Pt100 type B",
    "Pt100 1/3 DIN",
]
PT100 += [
    "Widerstandsthermometer Pt100 Kl. B",
    "PT100 IEC 60751 class AA",
    "Pt\u2011100",
    "Pt100, \u03b1 = 0.00385",
]
NAMES = {
    "Pt100": PT100,
    "Pt1000": ["Pt1000", "PT 1000 2-wire", "1000 ohm platinum"],
    "Pt500": ["Pt 500"],
    "type K": [
        *(
            "TC type K",
            "K",
            "k",
            "Typ K",
            "Type K",
            "K type",
            "K-type",
            "T/C K",
            "T/C-K",
            "T/C Type K",
            "T/C, K",
        ),
        *(
            "Thermocouple K",
            "Thermocouple (K)",
            "TC-K",
            "TCK",
            "TC(K)",
            "TypeK",
            "Thermoelement Typ K",
            "NiCr-Ni",
        ),
        *(
            "NiCr-NiAl",
            "Ni-Cr/Ni-Al",
            "NiCrNi",
            "NiCr-NiSi",
            "Chromel-Alumel",
            "Cr-Al",
            "K (NiCr-Ni)",
            "K duplex",
        ),
        *(
            "Chromel/Alumel type K",
            "2 x K",
            '"K"',
            "Type \u2018K\u2019",
            "K T/C",
            "Mantelthermoelement Typ K",
        ),
        *("Nickel-chromium / nickel-aluminium", "Nickelchrom-Nickel", "type K, L=300mm", "K-type TC"),
    ],
    "type J": [
        "J",
        "Fe-CuNi",
        "Fe/Cu-Ni",
        "FeCuNi",
        "Iron-Constantan",
        "Fe-Konst",
        "Fe-Ko",
        "J, simplex ungrounded",
    ],
    "type T": ["Cu-CuNi", "Copper/Constantan", "TC T", "T"],
    "type E": ["NiCr-CuNi", "NiCr-Konst", "Chromel-Constantan", "Type E"],
    "type N": ["Nicrosil-Nisil", "NiCrSi-NiSi", "type N class 1"],
    "type S": [
        "Pt10Rh-Pt",
        "Pt-10%Rh/Pt",
        "PtRh10-Pt",
        "Pt-PtRh10",
        "Platinum-10% Rhodium/Platinum",
        "S-type",
    ],
    "type R": ["Pt13%Rh-Pt", "Platinum 13% rhodium - platinum", "TC Typ R"],
    "type B": ["Pt30Rh-Pt6Rh", "PtRh30-PtRh6", "TC type B", "B"],
    "type C": ["TC type C"],
    "type A": ["Type A thermocouple"],
}


@pytest.mark.parametrize(("text", "name"), [(text, name) for name, texts in NAMES.items() for text in texts], ids=str)
def test_names_of_sensors(text: str, name: str) -> None:
    sensor = read_sensor_type(text)
    assert sensor is not None
    assert sensor.name == name


@pytest.mark.parametrize(
    "text",
    [
        *(
            "",
            "-",
            "x",
            "RTD",
            "RTD B",
            "RTD class B",
            "RTD type B",
            "RTD type K",
            "TC",
            "T/C",
            "Thermocouple",
        ),
        *("Thermocouples", "Thermoelemente", "Type", "type of sensor", "class A", "A", "C", "KX", "DP cell"),
        *(
            "Pt100 / TC K",
            "Pt100 or type K",
            "Type J/K",
            "K/J",
            "Type K or type J",
            "Type K Fe-CuNi",
            "J (NiCr-Ni)",
        ),
        *(
            "Ni100",
            "Ni 120",
            "Cu50",
            "JPt100",
            "Pt100 (0.003916)",
            "Pt100 alpha 0,00392",
            "NTC",
            "NTC type B",
        ),
        *(
            "Type L",
            "Typ L Fe-CuNi",
            "Typ U",
            "PtRh-Pt",
            "PT-1001",
            "TE-101",
            "4-20 mA",
            "bimetal",
            "thermowell",
        ),
        "K" * 500,
        "Pt100 " * 50,
    ],
)
def test_what_names_no_standard_sensor_is_not_guessed(text: str) -> None:
    assert read_sensor_type(text) is None
    assert sensor_limits(text) is None


@given(st.text(max_size=150))
def test_any_text_is_read_or_not(text: str) -> None:
    assert (read_sensor_type(text) is None) is (sensor_limits(text) is None)


@pytest.mark.parametrize(
    ("text", "limits"),
    [
        ("Pt100", SensorLimits(-200.0, 850.0, "IEC 60751")),
        ("K", SensorLimits(-270.0, 1300.0, "IEC 60584-1:2013")),
        ("J", SensorLimits(-210.0, 1200.0, "IEC 60584-1:2013")),
        ("T", SensorLimits(-270.0, 400.0, "IEC 60584-1:2013")),
        ("E", SensorLimits(-270.0, 1000.0, "IEC 60584-1:2013")),
        ("N", SensorLimits(-270.0, 1300.0, "IEC 60584-1:2013")),
        ("R", SensorLimits(-50.0, 1768.0, "IEC 60584-1:2013")),
        ("S", SensorLimits(-50.0, 1768.0, "IEC 60584-1:2013")),
        ("B", SensorLimits(0.0, 1820.0, "IEC 60584-1:2013")),
        ("TC type C", SensorLimits(0.0, 2315.0, "IEC 60584-1:2013 (from memory)")),
    ],
)
def test_limits(text: str, limits: SensorLimits) -> None:
    assert sensor_limits(text) == limits


@pytest.mark.parametrize(
    ("lrv_c", "urv_c", "names"),
    [
        (-200.0, 850.0, ("Pt100", "type K", "type E", "type N", "type J")),
        (
            0.0,
            850.1,
            ("type K", "type J", "type E", "type N", "type R", "type S", "type B", "type A", "type C"),
        ),
        (1300.0, 0.0, ("type K", "type N", "type R", "type S", "type B", "type A", "type C")),
        (0.0, 1300.1, ("type R", "type S", "type B", "type A", "type C")),
        (-100.0, 1250.0, ("type K", "type N")),
        (0.0, 3000.0, ()),
    ],
)
def test_sensors_for_a_range(lrv_c: float, urv_c: float, names: tuple[str, ...]) -> None:
    assert sorted(sensors_for_range(lrv_c, urv_c)) == sorted(names)


def test_every_named_sensor_of_a_range_reads_back() -> None:
    names = set(itertools.chain(sensors_for_range(0.0, 100.0), sensors_for_range(0.0, 2000.0)))
    assert {sensor.name for name in names if (sensor := read_sensor_type(name))} == names
