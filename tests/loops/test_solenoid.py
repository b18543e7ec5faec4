"""The divider of coil and cable: its figures, each alone its longest cable and its smallest conductor."""

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.cable import STANDARD_SIZES_MM2, Conductor, conductor_ohm_per_km_20c, loop_resistance_ohm
from loops.circuit import Circuit
from loops.plant import Plant
from loops.solenoid import PullIn, coil_ohm, has_a_coil, is_alternating, pull_in, volts_at_coil
from validation.example import example_plant

Row = dict[str, Any]
ROW: Row = {
    "tag": "XY-1",
    "kind": "solenoid",
    "device type": "SV",
    "signal": "24 VDC",
    "I/O type": "DO",
    "I/O address": "1",
    "cable length": 500,
    "conductor size": "2.5 mm2",
}
LOOP: Row = {"number": "X-1", "circuit or tag": "XY-1", "supply V min": 24}
TYPE: Row = {"code": "SV", "kind": "solenoid", "coil W": 12, "nominal V": 24, "pull-in %": 85}


def circuit_of(row: Row | None = None, kind: Row | None = None, **sheets: Any) -> tuple[Circuit, Plant]:
    types = [{**TYPE, **(kind or {})}, *sheets.pop("types", ())]
    plant = example_plant([{**ROW, **(row or {})}], types=types, loops=sheets.pop("loops", [LOOP]), **sheets)
    (circuit,) = plant.circuits
    return circuit, plant


def worked(row: Row | None = None, kind: Row | None = None, **sheets: Any) -> PullIn:
    circuit, plant = circuit_of(row, kind, **sheets)
    return pull_in(circuit, plant.data)


@pytest.mark.parametrize(
    ("size_ohm_per_km", "length_m", "volts"),
    [(7.41, 500.0, 20.790), (12.1, 500.0, 19.168), (7.41, 0.0, 24.0)],
    ids=["2.5 mm2", "1.5 mm2", "no cable"],
)
def test_a_coil_is_a_resistance(size_ohm_per_km: float, length_m: float, volts: float) -> None:
    line_ohm = loop_resistance_ohm(length_m, size_ohm_per_km, conductor_c=20.0)
    assert volts_at_coil(24.0, coil_ohm(24.0, 12.0), line_ohm) == pytest.approx(volts, abs=5e-4)


def test_a_coil_is_no_current_sink() -> None:
    """Supply less nominal current times line is 20.295 V where 20.790 V stand at the coil: never again."""
    naive = 24.0 - 12.0 / 24.0 * 7.41
    assert naive == pytest.approx(20.295)
    assert volts_at_coil(24.0, 48.0, 7.41) > 20.4 > naive


def test_hot_the_same_cable_is_too_thin() -> None:
    assert volts_at_coil(24.0, 48.0, loop_resistance_ohm(500.0, 7.41, conductor_c=70.0)) == pytest.approx(
        20.258, abs=5e-4
    )


def test_the_working_names_each_term() -> None:
    found = worked(plant={"ELC hot degC": 20})
    (coil,) = found.coils
    volts = found.worst(coil)
    assert volts is not None
    assert volts.working == (
        "coil of XY-1 (SV) 24 V x 24 V / 12 W = 48 ohm; "
        "cable 2 x 500 m x 7.41 ohm/km (IEC 60228) x 1 at 20 degC = 7.41 ohm; "
        "(24 V lowest supply) x 48 ohm / (48 ohm + 7.41 ohm cable) = 20.79 V at the coil, "
        "pull-in 85 % of 24 V = 20.4 V, margin 0.39 V"
    )
    assert (found.missing, found.assumed_of_coils) == ((), ())
    assert found.assumed == ("no drop in an output card, as none is listed",)


def test_the_working_names_card_and_barrier_and_where_the_supply_comes_from() -> None:
    types = [
        {"code": "DO", "kind": "card", "nominal V": 24, "fixed drop V": 0.8},
        {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 20},
    ]
    found = worked({"card": "DO", "barrier": "ZB"}, types=types, loops=())
    (coil,) = found.coils
    volts = found.worst(coil)
    assert volts is not None
    assert volts.working == (
        "coil of XY-1 (SV) 24 V x 24 V / 12 W = 48 ohm; "
        "cable 2 x 500 m x 7.41 ohm/km (IEC 60228) x 1.1965 at 70 degC = 8.866 ohm; "
        "(22.8 V nominal supply, of the card DO 5 % low - 0.8 V card) x 48 ohm / "
        "(48 ohm + 20 ohm barrier + 8.866 ohm cable)"
        " = 13.738 V at the coil, pull-in 85 % of 24 V = 20.4 V, short by 6.662 V"
    )
    assert found.assumed == ("supply 24 V may be 5 % low",)


@pytest.mark.parametrize(
    ("row", "kind", "sheets", "missing"),
    [
        ({}, {"coil W": None}, {}, ("coil W",)),
        ({}, {"nominal V": None}, {}, ("nominal V",)),
        ({"device type": None}, {}, {}, ("coil W", "nominal V")),
        ({"cable length": None}, {}, {}, ("cable length",)),
        ({"conductor size": None}, {}, {}, ("conductor size",)),
        ({}, {}, {"loops": ()}, ("supply V min",)),
        ({"barrier": "ZZ"}, {}, {}, ("barrier",)),
        ({"card": "ZZ"}, {}, {}, ("card",)),
        ({"card": "DO"}, {}, {"types": [{"code": "DO", "kind": "card"}]}, ("fixed drop V of the card",)),
        (
            {"barrier": "ZB"},
            {},
            {"types": [{"code": "ZB", "kind": "barrier", "zener or isolator": "zener"}]},
            ("resistance ohm of the barrier",),
        ),
        (
            {"barrier": "ISO"},
            {},
            {"types": [{"code": "ISO", "kind": "isolator"}]},
            ("nominal V of the isolator", "resistance ohm of the isolator"),
        ),
    ],
)  # fmt: skip
def test_what_is_blank_is_named(row: Row, kind: Row, sheets: dict[str, Any], missing: tuple[str, ...]) -> None:
    assert worked(row, kind, **sheets).missing == missing


def test_an_isolator_is_the_source() -> None:
    types = [{"code": "ISO", "kind": "isolator", "nominal V": 22, "resistance ohm": 150}]
    found = worked({"barrier": "ISO", "card": "ZZ"}, types=types)
    assert (found.missing, found.kindest_v, found.in_series) == ((), 22.0, (("isolator", 150.0),))


def test_a_supply_of_110_v_dc_is_read_of_its_words() -> None:
    found = worked({"power supply": "110 V DC", "signal": "110 VDC"}, {"nominal V": 110}, loops=())
    assert (found.kindest_v, found.worst_v) == (110.0, pytest.approx(104.5))


@pytest.mark.parametrize(
    ("row", "kind", "alternating"),
    [
        ({}, {}, False),
        ({"signal": "230 VAC"}, {"nominal V": 230}, True),
        ({"signal": None, "power supply": "230 V AC"}, {}, True),
        ({"signal": None}, {"signal": "110 V AC"}, True),
        ({"signal": None}, {"nominal V": 230}, True),
        ({"signal": "230 V"}, {}, True),
        ({"signal": "110 V DC"}, {"nominal V": 110}, False),
        ({"signal": None}, {}, False),
    ],
)
def test_alternating_current_is_told(row: Row, kind: Row, alternating: bool) -> None:
    circuit, _ = circuit_of(row, kind, loops=())
    assert is_alternating(circuit) is alternating


@pytest.mark.parametrize(
    ("row", "kind", "coil"),
    [
        ({}, {}, True),
        ({"tag": "SDV-1", "kind": "on/off valve"}, {"kind": "on/off valve"}, True),
        ({"tag": "SDV-1", "kind": "on/off valve"}, {"kind": "on/off valve", "coil W": None}, False),
        ({"tag": "ZSO-1", "kind": "switch", "I/O type": "DI"}, {}, False),
    ],
)
def test_who_has_a_coil(row: Row, kind: Row, coil: bool) -> None:
    circuit, _ = circuit_of(row, kind, loops=())
    assert has_a_coil(circuit) is coil


def test_coils_on_one_output_are_in_parallel() -> None:
    """Two solenoids on the channel of their valve: the current of both goes through the line."""
    valve = {**ROW, "tag": "XV-1", "kind": "on/off valve", "device type": None, "cable length": 100}
    solenoids = [
        {"tag": tag, "kind": "solenoid", "device type": "SV", "signal": "24 VDC"} for tag in ("XY-1A", "XY-1B")
    ]
    plant = example_plant([valve, *solenoids], types=[TYPE], loops=[{**LOOP, "circuit or tag": "XV-1"}])
    (circuit,) = plant.circuits
    found = pull_in(circuit, plant.data)
    assert [coil.name for coil in found.coils] == ["XY-1A", "XY-1B"]
    volts = found.worst(found.coils[0])
    assert volts is not None
    assert volts.at_coil_v == pytest.approx(24.0 * 24.0 / (24.0 + 1.482 * 1.1965))
    assert "2 coils in parallel = 24 ohm" in volts.working


FIGURES = st.fixed_dictionaries(
    {
        "length": st.integers(1, 5000),
        "size": st.sampled_from(STANDARD_SIZES_MM2),
        "watts": st.floats(1.0, 30.0).map(lambda value: round(value, 1)),
        "drop": st.floats(0.0, 1.5).map(lambda value: round(value, 2)),
        "supply": st.floats(21.0, 28.0).map(lambda value: round(value, 1)),
    }
)


@given(FIGURES)
def test_one_metre_more_fails_and_one_size_less_fails(figures: dict[str, Any]) -> None:
    """Longest cable and smallest conductor of each circuit: they pass, the next step does not."""
    types = [{"code": "DO", "kind": "card", "fixed drop V": figures["drop"]}]
    row = {"cable length": figures["length"], "conductor size": f"{figures['size']} mm2", "card": "DO"}
    found = worked(row, {"coil W": figures["watts"]}, types=types, loops=[{**LOOP, "supply V min": figures["supply"]}])
    (coil,) = found.coils
    assert found.cable is not None

    def passes(length_m: float, size_mm2: float) -> bool:
        ohm_per_km = conductor_ohm_per_km_20c(Conductor(size_mm2=size_mm2))
        assert ohm_per_km is not None
        ohm = 2.0 * length_m / 1000.0 * ohm_per_km * (1.0 + 0.00393 * 50.0)
        coil_r = 576.0 / figures["watts"]
        return (figures["supply"] - figures["drop"]) * coil_r / (coil_r + ohm) >= 20.4 * (1.0 - 1e-9)

    length_m = found.longest_cable_m(coil)
    if length_m is None:
        assert not passes(0.0, figures["size"])
    else:
        assert passes(length_m, figures["size"])
        assert not passes(length_m + 1, figures["size"])
    size_mm2 = found.smallest_conductor_mm2(coil)
    smaller = [size for size in STANDARD_SIZES_MM2 if size_mm2 is None or size < size_mm2]
    assert not any(passes(figures["length"], size) for size in smaller)
    assert size_mm2 is None or passes(figures["length"], size_mm2)
