"""Leads of temperature sensors against reference packages; contacts and proximity switches against their standard."""

import pytest
import thermocouple_its90
from rtd_sensor import pt100  # type: ignore[import-untyped]

from instruments.extension_cable import ExtensionCable, cable_error_k
from instruments.sensor import two_wire_lead_error_k
from loops.contact import (
    HIGH_IMPEDANCE_MA,
    LINE_OHM,
    LOW_IMPEDANCE_MA,
    SOURCE_OHM,
    SOURCE_V,
    input_ma,
)
from loops.leads import lead_error_k
from loops.solenoid import volts_at_coil

COPPER = ExtensionCable(letter=None)


@pytest.mark.parametrize("t_c", [-150.0, -50.0, 0.0, 20.0, 100.0, 250.0, 400.0, 600.0])
@pytest.mark.parametrize("lead_ohm", [0.05, 0.2, 1.0, 7.8, 20.0])
def test_two_wires_of_a_pt100_add_what_the_package_rtd_sensor_says(t_c: float, lead_ohm: float) -> None:
    """IEC 60751 by the package rtd-sensor: the temperature of the sensor's own resistance and the leads'."""
    read_c = pt100.resistance_to_celsius(pt100.celsius_to_resistance(t_c) + lead_ohm)
    assert two_wire_lead_error_k(t_c, lead_ohm) == pytest.approx(read_c - t_c, abs=1e-5)
    assert lead_error_k(t_c, lead_ohm, r0_ohm=100.0) == pytest.approx(read_c - t_c, abs=1e-5)


def test_a_small_lead_is_worth_its_ohms_over_the_packages_slope() -> None:
    """Slope of IEC 60751 by the package rtd-sensor; 0.385 ohm/K is right nowhere in particular."""
    for t_c in (0.0, 100.0, 400.0):
        slope = pt100.resistance_sensitivity_ohms_per_celsius(t_c)
        assert two_wire_lead_error_k(t_c, 1e-4) == pytest.approx(1e-4 / slope, rel=1e-6)
    assert two_wire_lead_error_k(100.0, 7.8) == pytest.approx(20.63, abs=5e-3)
    assert two_wire_lead_error_k(100.0, 7.8) != pytest.approx(7.8 / 0.385, abs=0.3)


def by_the_package(letter: str, hot_c: float, head_c: float, cabinet_c: float, cable: str | None) -> float:
    """Work the reading with the package's voltages: the voltages of element and cable, then the input's own."""
    element = thermocouple_its90.get(letter)
    mv = element.emf(hot_c) - element.emf(head_c) + element.emf(cabinet_c)
    if cable is not None:
        wire = thermocouple_its90.get(cable)
        mv += wire.emf(head_c) - wire.emf(cabinet_c)
    low, high = 0.0, element.range[1]
    for _ in range(80):
        middle = 0.5 * (low + high)
        low, high = (middle, high) if element.emf(middle) < mv else (low, middle)
    return 0.5 * (low + high) - hot_c


@pytest.mark.parametrize("letter", "KJTENRS")
@pytest.mark.parametrize("cable", [None, "K", "J", "T"])
@pytest.mark.parametrize(
    ("hot_c", "head_c", "cabinet_c"), [(300.0, 45.0, 25.0), (150.0, 60.0, 20.0), (350.0, 5.0, 25.0)]
)
def test_a_wrong_cable_does_what_the_package_thermocouple_its90_says(
    letter: str, cable: str | None, hot_c: float, head_c: float, cabinet_c: float
) -> None:
    """NIST's ITS-90 functions, which IEC 60584-1 shares; copper has no voltage of its own."""
    found = cable_error_k(letter, hot_c, head_c=head_c, cabinet_c=cabinet_c, cable=ExtensionCable(letter=cable))
    assert found == pytest.approx(by_the_package(letter, hot_c, head_c, cabinet_c, cable), abs=1e-6)


def test_copper_to_a_type_k_reads_19_8_k_low() -> None:
    """12.2086 - 1.8171 + 1.0002 = 11.3917 mV, which is 280.23 degC; 'the compensation handles it' would be no error."""
    error_k = cable_error_k("K", 300.0, head_c=45.0, cabinet_c=25.0, cable=COPPER)
    assert 300.0 + error_k == pytest.approx(280.23, abs=5e-3)


def test_the_source_of_a_proximity_input_is_8_2_v_behind_1_kohm() -> None:
    """IEC 60947-5-6 (1.2 and 2.1 mA from memory): 5.5 and 5.6 of the Australian adoption's preview, 2015."""
    assert (SOURCE_V, SOURCE_OHM, LINE_OHM) == (8.2, 1000.0, 50.0)
    assert (HIGH_IMPEDANCE_MA, LOW_IMPEDANCE_MA) == (1.2, 2.1)
    # A preferred switching difference of 0.2 mA lies inside the two.
    assert LOW_IMPEDANCE_MA - HIGH_IMPEDANCE_MA > 0.2


@pytest.mark.parametrize(
    ("ohm", "ma"),
    [(1000.0, 4.1), (11000.0, 0.683), (float("inf"), 0.0), (0.0, 8.2)],
    ids=["closed", "open", "broken", "shorted"],
)
def test_a_contact_with_1_kohm_in_series_and_10_kohm_across_it(ohm: float, ma: float) -> None:
    """8.2 V over 1 kohm of the input and what stands at the contact: common practice, no source."""
    assert input_ma(ohm) == pytest.approx(ma, abs=5e-4)
    # The line that is allowed moves no state across a switching point.
    assert (input_ma(ohm, line_ohm=LINE_OHM) >= LOW_IMPEDANCE_MA) is (ma >= LOW_IMPEDANCE_MA)
    assert (input_ma(ohm, line_ohm=LINE_OHM) <= HIGH_IMPEDANCE_MA) is (ma <= HIGH_IMPEDANCE_MA)


def test_a_coil_of_12_w_behind_500_m() -> None:
    """Ohm's law over IEC 60228's 7.41 and 12.1 ohm/km at 20 degC, a coil of 24 V and 12 W: common practice."""
    assert volts_at_coil(24.0, 48.0, 7.41) == pytest.approx(20.790, abs=5e-4)
    assert volts_at_coil(24.0, 48.0, 12.1) == pytest.approx(19.168, abs=5e-4)
