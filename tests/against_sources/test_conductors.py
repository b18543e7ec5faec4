"""Conductor resistance against IEC 60228, ASTM B258 and a published wire table."""

import math

import pytest
from fluids.piping import t_from_gauge

from loops.cable import (
    Conductor,
    awg_area_mm2,
    awg_diameter_mm,
    awg_ohm_per_km_20c,
    conductor_ohm_per_km_20c,
    temperature_factor,
)

# IEC 60228 (DIN VDE 0295, HD 383): maximum resistance at 20 degC in ohm/km of a copper conductor, as a cable
# maker's public extract of the standard gives it: size, class 1 and 2 plain, tinned, class 5 plain, tinned.
IEC_60228 = [
    (0.5, 36.0, 36.7, 39.0, 40.1),
    (0.75, 24.5, 24.8, 26.0, 26.7),
    (1.0, 18.1, 18.2, 19.5, 20.0),
    (1.5, 12.1, 12.2, 13.3, 13.7),
    (2.5, 7.41, 7.56, 7.98, 8.21),
    (4.0, 4.61, 4.70, 4.95, 5.09),
]


@pytest.mark.parametrize(("size_mm2", "plain", "tinned", "flexible", "flexible_tinned"), IEC_60228)
def test_iec_60228(size_mm2: float, plain: float, tinned: float, flexible: float, flexible_tinned: float) -> None:
    for classes, (expected, expected_tinned) in {
        (1, 2): (plain, tinned),
        (5, 6): (flexible, flexible_tinned),
    }.items():
        for conductor_class in classes:
            bare = Conductor(size_mm2=size_mm2, conductor_class=conductor_class)
            coated = Conductor(size_mm2=size_mm2, conductor_class=conductor_class, tinned=True)
            assert conductor_ohm_per_km_20c(bare) == expected
            assert conductor_ohm_per_km_20c(coated) == expected_tinned


@pytest.mark.parametrize("size_mm2", [row[0] for row in IEC_60228])
def test_the_limits_of_iec_60228_lie_above_resistivity_over_area(size_mm2: float) -> None:
    """Annealed copper, 17.241 ohm mm2/km at 20 degC (IEC 60028)."""
    limit = conductor_ohm_per_km_20c(Conductor(size_mm2=size_mm2))
    assert limit is not None
    assert 1.04 < limit / (17.241 / size_mm2) < 1.08


# ASTM B258: 36 AWG is 0.005 inch, 0000 would be 0.46 inch, 39 equal ratios between them. The other figures
# are computed from that formula.
@pytest.mark.parametrize(
    ("awg", "diameter_mm", "area_mm2", "ohm_per_km"),
    [
        (14, 1.6277, 2.0809, 8.285),
        (16, 1.2908, 1.3087, 13.174),
        (18, 1.0237, 0.8230, 20.948),
        (20, 0.8118, 0.5176, 33.308),
        (22, 0.6438, 0.3255, 52.962),
        (24, 0.5106, 0.2047, 84.213),
    ],
)
def test_astm_b258(awg: int, diameter_mm: float, area_mm2: float, ohm_per_km: float) -> None:
    assert awg_diameter_mm(awg) == pytest.approx(diameter_mm, abs=5.1e-5)
    assert awg_area_mm2(awg) == pytest.approx(area_mm2, abs=5.1e-5)
    assert awg_ohm_per_km_20c(awg, lay_factor=1.0) == pytest.approx(ohm_per_km, abs=5.1e-4)


def test_astm_b258_fixed_points() -> None:
    assert awg_diameter_mm(36) == pytest.approx(0.005 * 25.4, rel=1e-12)
    assert awg_diameter_mm(0) * 92.0 ** (3 / 39) == pytest.approx(0.46 * 25.4, rel=1e-12)


# A university's public table of copper wire, ohm per 1000 ft, rounded to four figures.
@pytest.mark.parametrize(
    ("awg", "ohm_per_1000_ft"),
    [(14, 2.525), (16, 4.016), (18, 6.385), (20, 10.15), (22, 16.14), (24, 25.67)],
)
def test_published_wire_table(awg: int, ohm_per_1000_ft: float) -> None:
    assert awg_ohm_per_km_20c(awg, lay_factor=1.0) * 0.3048 == pytest.approx(ohm_per_1000_ft, rel=5e-4)


@pytest.mark.parametrize("awg", range(10, 31))
def test_diameters_of_the_package_fluids(awg: int) -> None:
    """The package holds the gauge table in inches to four places."""
    inch = t_from_gauge(awg, False, schedule="AWG")
    assert awg_diameter_mm(awg) == pytest.approx(inch * 25.4, abs=0.00051 * 25.4)


@pytest.mark.parametrize("conductor_c", [-40.0, -20.0, 0.0, 20.0, 40.0, 70.0, 90.0])
def test_temperature_factor_is_that_of_the_handbooks(conductor_c: float) -> None:
    """(234.5 + T)/254.5: copper's inferred zero resistance at -234.5 degC, as cable handbooks write it."""
    assert temperature_factor(conductor_c) == pytest.approx((234.5 + conductor_c) / 254.5, abs=2e-4)


# IEC 60228's annex prints the inverse, from a measured resistance to 20 degC, rounded along 250/(230 + T).
@pytest.mark.parametrize(("measured_at_c", "to_20c"), [(5.0, 1.064), (30.0, 0.962), (70.0, 0.833)])
def test_the_printed_correction_is_nearly_the_inverse(measured_at_c: float, to_20c: float) -> None:
    assert 1.0 / temperature_factor(measured_at_c) == pytest.approx(to_20c, abs=4e-3)
    assert math.isclose(250.0 / (230.0 + measured_at_c), to_20c, abs_tol=6e-4)
