"""Pt100 and thermocouple functions against reference packages and printed tables."""

import pytest
import thermocouple_its90
from rtd_sensor import pt100, tolerance  # type: ignore[import-untyped]

from instruments.sensor import (
    pt100_c,
    pt100_class_limits_c,
    pt100_ohm,
    pt100_ohm_per_k,
    pt100_tolerance_k,
    sensor_limits,
    thermocouple_c,
    thermocouple_mv,
)

CLASSES = ("AA", "A", "B", "C")
CONSTRUCTIONS = {"wire-wound": "wire_wound", "film": "film"}


def test_pt100_is_that_of_the_package_rtd_sensor() -> None:
    """IEC 60751, every half degree from -200 to 850 degC, forward, backward and its slope."""
    for step in range(-400, 1701):
        t_c = step / 2.0
        ohm = pt100.celsius_to_resistance(t_c)
        assert pt100_ohm(t_c) == pytest.approx(ohm, rel=1e-12)
        assert pt100_c(ohm) == pytest.approx(t_c, abs=1e-9)
        assert pt100_c(ohm) == pytest.approx(pt100.resistance_to_celsius(ohm), abs=1e-6)
        assert pt100_ohm_per_k(t_c) == pytest.approx(pt100.resistance_sensitivity_ohms_per_celsius(t_c), rel=1e-12)


@pytest.mark.parametrize("tolerance_class", CLASSES)
@pytest.mark.parametrize("construction", CONSTRUCTIONS)
def test_pt100_classes_are_those_of_the_package_rtd_sensor(tolerance_class: str, construction: str) -> None:
    """IEC 60751:2022, tolerance and where each class holds; the package refuses a temperature outside."""

    def published(t_c: float) -> float:
        return float(
            tolerance.thermometer_tolerance_c(
                t_c, tolerance_class=tolerance_class, construction=CONSTRUCTIONS[construction]
            )
        )

    low_c, high_c = pt100_class_limits_c(tolerance_class, construction)  # type: ignore[arg-type]
    for t_c in (low_c, 0.5 * (low_c + high_c), high_c):
        assert pt100_tolerance_k(t_c, tolerance_class) == pytest.approx(published(t_c))  # type: ignore[arg-type]
    for t_c in (low_c - 0.01, high_c + 0.01):
        with pytest.raises(ValueError, match="must be between"):
            published(t_c)


@pytest.mark.parametrize("letter", "BEJKNRST")
def test_thermocouples_are_those_of_the_package_thermocouple_its90(letter: str) -> None:
    """NIST's ITS-90 database, which IEC 60584-1 shares; the package is checked against all its tables."""
    reference = thermocouple_its90.get(letter)
    low, high = {"B": (0, 1820), "E": (-270, 1000), "J": (-210, 1200), "K": (-270, 1372)}.get(
        letter, {"N": (-270, 1300), "T": (-270, 400)}.get(letter, (-50, 1768))
    )
    for t_c in range(low, high + 1):
        mv = reference.emf(float(t_c))
        assert thermocouple_mv(letter, float(t_c)) == pytest.approx(mv, abs=1e-9)
        if t_c % 7 == 0 and not (letter == "B" and t_c < 50):
            assert thermocouple_c(letter, mv) == pytest.approx(t_c, abs=1e-5)


# NIST ITS-90 tables (Monograph 175), cold junction at 0 degC, printed to 0.001 mV. Both ends of each type
# and both sides of each joint of its pieces, where a mistyped coefficient shows.
PRINTED_MV = {
    "B": [(0, 0.0), (600, 1.792), (700, 2.431), (1000, 4.834), (1820, 13.820)],
    "E": [(-270, -9.835), (-200, -8.825), (500, 37.005), (1000, 76.373)],
    "J": [(-210, -8.095), (-100, -4.633), (750, 42.281), (800, 45.494), (1200, 69.553)],
    "K": [(-270, -6.458), (-200, -5.891), (100, 4.096), (500, 20.644), (1000, 41.276), (1372, 54.886)],
    "N": [(-270, -4.345), (-200, -3.990), (600, 20.613), (1300, 47.513)],
    "R": [(-50, -0.226), (250, 1.923), (1000, 10.506), (1200, 13.228), (1768, 21.101)],
    "S": [(-50, -0.236), (250, 1.874), (1000, 9.587), (1200, 11.951), (1768, 18.693)],
    "T": [(-270, -6.258), (-200, -5.603), (100, 4.279), (400, 20.872)],
}


@pytest.mark.parametrize(
    ("letter", "t_c", "mv"), [(letter, *point) for letter, points in PRINTED_MV.items() for point in points]
)
def test_printed_thermocouple_tables(letter: str, t_c: float, mv: float) -> None:
    assert thermocouple_mv(letter, t_c) == pytest.approx(mv, abs=5.1e-4)


# Ranges of the standards' functions in degC: IEC 60751; IEC 60584-1:2013, whose public abstract says that
# type K now ends at 1300, the others from memory.
@pytest.mark.parametrize(
    ("text", "min_c", "max_c"),
    [
        ("Pt100", -200, 850),
        ("K", -270, 1300),
        ("J", -210, 1200),
        ("T", -270, 400),
        ("E", -270, 1000),
        ("N", -270, 1300),
        ("R", -50, 1768),
        ("S", -50, 1768),
        ("B", 0, 1820),
    ],
)
def test_ranges_of_the_functions(text: str, min_c: float, max_c: float) -> None:
    limits = sensor_limits(text)
    assert limits is not None
    assert (limits.min_c, limits.max_c) == (min_c, max_c)
