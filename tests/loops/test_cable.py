"""Cables as resistances: sizes, classes, gauges, temperature, out and back, and how sizes are written."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.cable import (
    STANDARD_SIZES_MM2,
    Conductor,
    awg_area_mm2,
    awg_diameter_mm,
    awg_ohm_per_km_20c,
    conductor_ohm_per_km_20c,
    loop_resistance_ohm,
    read_conductor_size,
    temperature_factor,
)


@pytest.mark.parametrize(
    ("conductor", "ohm_per_km"),
    [
        (Conductor(size_mm2=1.5), 12.1),
        (Conductor(size_mm2=1.5, conductor_class=1), 12.1),
        (Conductor(size_mm2=1.5, tinned=True), 12.2),
        (Conductor(size_mm2=1.5, conductor_class=5), 13.3),
        (Conductor(size_mm2=1.5, conductor_class=6, tinned=True), 13.7),
        (Conductor(size_mm2=1.3), None),
        (Conductor(size_mm2=0.8), None),
        (Conductor(size_mm2=16.0), None),
        (Conductor(size_mm2=1.5, conductor_class=3), None),
        (Conductor(awg=50), None),
        (Conductor(awg=-1), None),
    ],
    ids=str,
)
def test_conductor_resistance(conductor: Conductor, ohm_per_km: float | None) -> None:
    assert conductor_ohm_per_km_20c(conductor) == ohm_per_km


@pytest.mark.parametrize(
    ("conductor_class", "factor"), [(1, 1.0), (2, 1.02), (5, 1.02)], ids=["solid", "stranded", "flexible"]
)
def test_gauge_resistance_has_a_lay_factor_unless_solid(conductor_class: int, factor: float) -> None:
    found = conductor_ohm_per_km_20c(Conductor(awg=18, conductor_class=conductor_class))
    assert found == pytest.approx(20.948 * factor, rel=2e-5)


def test_a_conductor_has_one_size() -> None:
    for size_mm2, awg in ((None, None), (1.5, 16)):
        with pytest.raises(ValueError, match="one of the two"):
            Conductor(size_mm2=size_mm2, awg=awg)


@pytest.mark.parametrize("awg", [-1, 41])
def test_gauges_end_at_0_and_40(awg: int) -> None:
    with pytest.raises(ValueError, match="outside"):
        awg_diameter_mm(awg)


@given(st.integers(0, 36))
def test_three_gauges_halve_the_area(awg: int) -> None:
    assert awg_area_mm2(awg) / awg_area_mm2(awg + 3) == pytest.approx(2.005, abs=0.001)
    assert awg_ohm_per_km_20c(awg, lay_factor=1.0) < awg_ohm_per_km_20c(awg) < awg_ohm_per_km_20c(awg + 1)


@pytest.mark.parametrize(
    ("conductor_c", "factor"),
    [(20.0, 1.0), (40.0, 1.0786), (50.0, 1.1179), (70.0, 1.1965), (-20.0, 0.8428)],
)
def test_temperature_factor(conductor_c: float, factor: float) -> None:
    assert temperature_factor(conductor_c) == pytest.approx(factor, abs=5e-5)


@pytest.mark.parametrize(
    ("length_m", "ohm_per_km", "conductor_c", "per", "expected"),
    [
        (1000.0, 12.1, 20.0, "conductor", 24.2),
        (1000.0, 12.1, 70.0, "conductor", 28.955),
        (1000.0, 24.2, 70.0, "loop", 28.955),
        (500.0, 7.41, 20.0, "conductor", 7.41),
        (200.0, 19.5, 20.0, "conductor", 7.8),
        (0.0, 12.1, 70.0, "conductor", 0.0),
    ],
)
def test_loop_resistance(length_m: float, ohm_per_km: float, conductor_c: float, per: str, expected: float) -> None:
    found = loop_resistance_ohm(length_m, ohm_per_km, conductor_c=conductor_c, per=per)  # type: ignore[arg-type]
    assert found == pytest.approx(expected, abs=5e-4)


@given(st.floats(0.0, 5000.0), st.sampled_from(STANDARD_SIZES_MM2), st.floats(-40.0, 90.0))
def test_double_length_doubles_the_resistance(length_m: float, size_mm2: float, conductor_c: float) -> None:
    ohm_per_km = conductor_ohm_per_km_20c(Conductor(size_mm2=size_mm2))
    assert ohm_per_km is not None
    once = loop_resistance_ohm(length_m, ohm_per_km, conductor_c=conductor_c)
    twice = loop_resistance_ohm(2.0 * length_m, ohm_per_km, conductor_c=conductor_c)
    assert twice == pytest.approx(2.0 * once, rel=1e-12)


SIZES: dict[tuple[float | None, int | None], list[str]] = {
    (1.5, None): [
        *(
            "1.5",
            "1,5",
            "1.50",
            "1.5 mm2",
            "1,5 mm\u00b2",
            "1.5mm^2",
            "1.5 sqmm",
            "1.5 sq.mm.",
            "1.5 SQ MM",
            "1.5sq",
        ),
        *(
            "1.5 mm sq",
            "1.5 qmm",
            "1,5 mmq",
            "1.5 mm",
            "1x2x1.5",
            "1\u00d72\u00d71,5 mm\u00b2",
            "2x1.5mm\u00b2",
        ),
        *(
            "1 pr 1.5 sqmm",
            "1 pr 1.5",
            "1P x 1.5",
            "1Px1.5mm2",
            "2C x 1.5",
            "2/C x 1.5",
            "3G1.5",
            "1 pair x 1.5",
        ),
        *(
            "2 core 1.5",
            "1 triad 1.5",
            "1TRx1.5",
            "1PR-1.5SQMM",
            "1.5mm2 x 2",
            "2*1.5",
            "1x2x1.5 PVC/SWA/PVC",
        ),
        *("1.5mm2 (7/0.53)", "1.5 mm\u00b2 Cu class 5", "1.5MM2 (1P)", "1.5mm\u00b2/pair"),
    ],
    (0.75, None): [".75", "0,75", "12 x 2 x 0.75", "4x(2x0.75)", "12P-0.75", "1Q x 0.75 mm2"],
    (2.5, None): ["2.5mm", "2 x 2.5 mm 2", "3G2.5", "7/0.67mm (2.5mm2)", "4C 2.5"],
    (4.0, None): ["4", "4.0", "4 mm2"],
    (0.8, None): ["2x2x0.8"],
    (None, 16): [
        *(
            "AWG 16",
            "#16",
            "16AWG",
            "16 ga",
            "1 Pr #16 AWG",
            "2/C #16",
            "#16 AWG",
            "No. 16 AWG",
            "16 AWG TSP",
        ),
        *("16-gauge", "16 AWG (1.31 mm2)"),
    ],
    (None, 18): ["18 AWG", "AWG18", "1PR 18AWG", "18 AWG 2C", "AWG #18", "AWG 18/7", "1 x 2 x 18 AWG"],
    (None, 14): ["2C#14"],
}


@pytest.mark.parametrize(("text", "size"), [(text, size) for size, texts in SIZES.items() for text in texts], ids=str)
def test_sizes_as_lists_write_them(text: str, size: tuple[float | None, int | None]) -> None:
    size_mm2, awg = size
    assert read_conductor_size(text) == Conductor(size_mm2=size_mm2, awg=awg)


@pytest.mark.parametrize(
    "text",
    [
        *(
            "",
            "TBA",
            "x",
            "multicore",
            "12 pair",
            "0",
            "0 mm2",
            "1.5.2",
            "1e5",
            "7/0.53",
            "1.5 2.5",
            "K" * 500,
        ),
        *(
            "16",
            "18",
            "1 x 2 x 18",
            "0.5 mm",
            "0.8 mm",
            "2x2x0.8 mm dia",
            "\u00d80.8",
            "1/0 AWG",
            "AWG 1/0",
            "AWG 50",
        ),
        *(
            "1.5/2.5 mm2",
            "1.5 or 2.5 mm2",
            "1.5-2.5 mm2",
            "1.5 mm2 / 16 AWG",
            "16 AWG (1.5 mm2)",
            "16/18 AWG",
        ),
        *("18/2 AWG", "2.5/0.75 mm2", "1x2x1.5 + 1x2x2.5"),
    ],
)
def test_what_gives_no_size_or_two_is_not_guessed(text: str) -> None:
    assert read_conductor_size(text) is None


@given(st.text(max_size=120))
def test_any_text_is_read_or_not(text: str) -> None:
    found = read_conductor_size(text)
    assert found is None or (found.size_mm2 is None) is not (found.awg is None)


@given(st.sampled_from(STANDARD_SIZES_MM2), st.integers(1, 50), st.sampled_from("xXpPcC"))
def test_a_construction_ends_in_its_size(size_mm2: float, count: int, letter: str) -> None:
    assert read_conductor_size(f"{count}{letter}{size_mm2:g}") == Conductor(size_mm2=size_mm2)
