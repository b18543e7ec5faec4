"""Sizes of units against figures published elsewhere and against packages of other people."""

import pytest
from CoolProp.CoolProp import PropsSI
from scipy import constants

from instruments.quantity import Quantity, absolute_pa, read_quantity
from instruments.unit import convert, difference, read_unit, unit

GRAVITY = 9.80665  # m/s2, standard
INCH = 0.0254


# NIST Special Publication 811 (2008), appendix B.8: factor to the SI unit, to as many digits as are printed there.
@pytest.mark.parametrize(
    ("spelling", "factor", "relative"),
    [
        ("atm", 1.01325e5, 1e-12),
        ("at", 9.80665e4, 1e-12),  # atmosphere, technical
        ("bar", 1.0e5, 1e-12),
        ("mbar", 1.0e2, 1e-12),
        ("cmH2O", 9.80665e1, 1e-6),  # centimetre of water, conventional
        ("ftH2O", 2.989067e3, 1e-6),
        ("ftH2O", 2.98898e3, 5e-5),  # at 39.2 degF: another unit, 29 ppm away
        ("inHg", 3.386389e3, 1e-6),
        ("inH2O", 2.490889e2, 1e-6),
        ("inH2O@4C", 2.49082e2, 2e-6),  # inch of water (39.2 degF)
        ("inH2O@60F", 2.4884e2, 2e-6),  # inch of water (60 degF)
        ("mmHg", 1.333224e2, 1e-6),
        ("mmH2O", 9.80665, 1e-6),
        ("torr", 1.333224e2, 1e-6),
        ("psi", 6.894757e3, 1e-6),
        ("kgf/cm2", 9.80665e4, 1e-12),
        ("US gal/min", 6.309020e-5, 1e-6),
        ("CFM", 4.719474e-4, 1e-6),
        ("BPD", 1.589873e-1 / 86400.0, 1e-6),  # barrel of 42 US gallons
        ("igpm", 4.54609e-3 / 60.0, 1e-9),
        ("lb/h", 1.259979e-4, 1e-6),
        ("TPH", 1.0e3 / 3600.0, 1e-9),
        ("lb", 4.535924e-1, 1e-6),
        ("lb/ft3", 1.601846e1, 1e-6),
        ("ft", 3.048e-1, 1e-12),
        ("inch", 2.54e-2, 1e-12),
        ("mil", 2.54e-5, 1e-12),
        ("in/s", 2.54e-2, 1e-12),
        ("cP", 1.0e-3, 1e-12),
        ("cSt", 1.0e-6, 1e-12),
        ("BTU/hr", 2.930711e-1, 1e-6),  # international table
        ("rpm", 1.0 / 60.0, 1e-12),  # as turns, not as radians
    ],
)
def test_factors_of_nist_sp_811(spelling, factor, relative):
    assert read_unit(spelling).si_factor == pytest.approx(factor, rel=relative)


def test_the_conventional_inch_of_water_is_not_the_one_at_4_degc():
    """NIST SP 811 prints both; they are 28 ppm apart, harmless on site and fatal to a test for equality."""
    conventional, cold = unit("inH2O").factor, unit("inH2O@4C").factor
    assert conventional == pytest.approx(1000.0 * GRAVITY * INCH, rel=1e-12)
    assert conventional / cold - 1.0 == pytest.approx(28e-6, abs=1e-6)


# Density of water by the IAPWS-95 formulation in CoolProp; NIST rounds its figures to five digits: 2e-5.
@pytest.mark.parametrize(
    ("canonical", "kelvin"),
    [("inH2O@4C", 277.15),
     ("inH2O@4C", (39.2 + 459.67) / 1.8), ("inH2O@20C", 293.15), ("inH2O@20C", (68.0 + 459.67) / 1.8),
     ("inH2O@60F", (60.0 + 459.67) / 1.8)],
)  # fmt: skip
def test_columns_of_water_against_its_density(canonical, kelvin):
    density = PropsSI("D", "T", kelvin, "P", 101325.0, "Water")
    assert unit(canonical).factor == pytest.approx(density * GRAVITY * INCH, rel=2e-5)


def test_water_at_20_degc_makes_the_inch_0_18_percent_smaller():
    """A 400 inH2O range: 99 635.56 Pa conventional, 99 456.4 at 20 degC (computed; no source beyond the density)."""
    pa = unit("Pa")
    conventional, warm = convert(400.0, unit("inH2O"), pa), convert(400.0, unit("inH2O@20C"), pa)
    assert (conventional, warm) == (pytest.approx(99635.56, abs=0.01), pytest.approx(99456.4, abs=0.01))
    assert warm / conventional - 1.0 == pytest.approx(-0.00180, abs=1e-5)


# scipy.constants, from the CODATA set and the definitions of the customary units.
@pytest.mark.parametrize(
    ("canonical", "factor"),
    [
        ("psi", constants.psi),
        ("atm", constants.atm),
        ("torr", constants.torr),
        ("bar", constants.bar),
        ("kgf/cm2", constants.kgf / 1e-4),
        ("lb", constants.lb),
        ("inch", constants.inch),
        ("ft", constants.foot),
        ("mil (0.001 in)", constants.mil),
        ("US gal/min", constants.gallon / constants.minute),
        ("imp gal/min", constants.gallon_imp / constants.minute),
        ("bbl/d", constants.barrel / constants.day),
        ("bbl/h", constants.barrel / constants.hour),
        ("1e6 US gal/d", 1e6 * constants.gallon / constants.day),
        ("ft3/min", constants.foot**3 / constants.minute),
        ("Btu/h", constants.Btu / constants.hour),
        ("kcal/h", 1000.0 * constants.calorie_th / constants.hour),
        ("lb/ft3", constants.lb / constants.foot**3),
        ("g (standard gravity)", constants.g),
    ],
)
def test_factors_of_scipy(canonical, factor):
    assert unit(canonical).si_factor == pytest.approx(factor, rel=1e-9)


def test_mercury_and_torr_are_two_units():
    """13 595.1 kg/m3 of mercury at standard gravity against 1/760 of an atmosphere: 0.14 ppm (definitions)."""
    assert unit("mmHg").factor == pytest.approx(13595.1 * GRAVITY * 1e-3, rel=1e-12)
    assert unit("mmHg").factor / unit("torr").factor - 1.0 == pytest.approx(0.142e-6, abs=0.002e-6)
    assert unit("inHg").factor == pytest.approx(13595.1 * GRAVITY * INCH, rel=1e-12)


@pytest.mark.parametrize("celsius", [-273.15, -40.0, 0.0, 37.0, 100.0, 850.0])
@pytest.mark.parametrize(("canonical", "name"), [("degF", "Fahrenheit"), ("K", "Kelvin"), ("degR", "Rankine")])
def test_temperatures_of_scipy(celsius, canonical, name):
    wanted = constants.convert_temperature(celsius, "Celsius", name)
    assert convert(celsius, unit("degC"), unit(canonical)) == pytest.approx(wanted, rel=1e-12, abs=1e-9)
    assert Quantity.made(celsius, unit("degC")).base == pytest.approx(
        constants.convert_temperature(celsius, "Celsius", "Kelvin"), abs=1e-9
    )


def test_a_span_of_temperature_has_no_offset():
    """A span of 100 degC is 180 degF, a deadband of 1 degC is 1.8 degF (definition of the scales)."""
    assert difference(100.0, unit("degC"), unit("degF")) == 180.0
    assert difference(1.0, unit("degC"), unit("degF")) == 1.8


def test_a_kilogram_per_square_centimetre_is_a_pressure():
    """10 kg/cm2(g) is 9.80665 barg, 142.233 psig and 980 665 Pa (definition of the kilogram-force)."""
    written = read_quantity("10 kg/cm2(g)")
    assert written.base == pytest.approx(980665.0, rel=1e-12)
    assert written.to(read_unit("barg")) == pytest.approx(9.80665, rel=1e-12)
    assert written.to(read_unit("psig")) == pytest.approx(142.233, abs=5e-4)


# Base conditions: DIN 1343 (0 degC, 101.325 kPa), ISO 13443 (15 degC, 101.325 kPa), 60 degF and 14.696 psia (US common
# practice, no source). The ratios are those of an ideal gas, computed.
@pytest.mark.parametrize(
    ("source", "target", "wanted"),
    [("Nm3/h", "Sm3/h", 288.15 / 273.15), ("Nm3/h", "SCFM", 0.62209), ("SCFM", "Nm3/h", 1.60747),
     ("MMSCFD", "Nm3/h", 1e6 * 0.3048**3 / 24.0 * 273.15 / 288.705556 * 14.696 * constants.psi / constants.atm)],
)  # fmt: skip
def test_gas_volumes_at_base_conditions(source, target, wanted):
    assert convert(1.0, read_unit(source), read_unit(target)) == pytest.approx(wanted, rel=1e-5)


def test_gas_volumes_follow_real_gas_density():
    """Air by CoolProp: real gas and ideal gas are 0.1 % apart at base conditions, so the ratio holds to 2e-4."""
    normal = PropsSI("D", "T", 273.15, "P", 101325.0, "Air")
    standard = PropsSI("D", "T", 288.15, "P", 101325.0, "Air")
    assert convert(1.0, unit("Nm3/h"), unit("Sm3/h")) == pytest.approx(normal / standard, rel=2e-4)


def test_gauge_to_absolute_takes_the_atmosphere_of_the_place():
    """At 1600 m the ISO 2533 standard atmosphere is 83.5 kPa: 100 psig is 112.11 psia there, not 114.70."""
    high = 101325.0 * (1.0 - 0.0065 * 1600.0 / 288.15) ** 5.255876
    assert high == pytest.approx(83520.0, abs=20.0)
    written = read_quantity("100 psig")
    assert absolute_pa(written, high) / constants.psi == pytest.approx(112.11, abs=0.01)
    assert absolute_pa(written, 101325.0) / constants.psi == pytest.approx(114.70, abs=0.01)
