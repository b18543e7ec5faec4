"""Proximity switches on their inputs: which circuits they are, what their line comes to, the longest cable."""

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.cable import STANDARD_SIZES_MM2, Conductor, conductor_ohm_per_km_20c
from loops.circuit import Circuit
from loops.contact import fits, input_ma, is_on_proximity_input, line_of
from loops.plant import Plant
from validation.example import example_plant

Row = dict[str, Any]
ROW: Row = {
    "tag": "ZSO-1",
    "kind": "switch",
    "signal": "NAMUR",
    "I/O type": "DI",
    "I/O address": "1",
    "conductor size": "1.5 mm2",
    "cable length": 1000,
}


def circuit_of(row: Row, **sheets: Any) -> tuple[Circuit, Plant]:
    plant = example_plant([{"service": "Feed", **ROW, **row}], **sheets)
    (circuit,) = plant.circuits
    return circuit, plant


@pytest.mark.parametrize(
    ("row", "types", "namur"),
    [
        ({}, [], True),
        ({"signal": "8.2 V DC, IEC 60947-5-6"}, [], True),
        ({"signal": None, "device type": "P"}, [{"code": "P", "kind": "switch", "signal": "NAMUR"}], True),
        ({"signal": "Contact"}, [], False),
        ({"signal": None}, [], False),
        # Of a proximity switch nothing says whether it is of two wires and 8.2 V.
        ({"signal": None, "kind": "Proximity switch"}, [], None),
        ({"signal": "DI", "kind": "Proximity switch"}, [], None),
        ({"signal": "24 VDC", "kind": "Proximity switch"}, [], False),
        ({"signal": "Contact", "kind": "Proximity switch"}, [], False),
        ({"signal": None, "kind": "Proximity switch", "wires": 3}, [], False),
        (
            {"signal": None, "kind": "Proximity switch", "barrier": "ISO"},
            [{"code": "ISO", "kind": "isolator", "signal": "NAMUR"}],
            True,
        ),
        (
            {"signal": "Contact", "kind": "switch", "barrier": "ISO"},
            [{"code": "ISO", "kind": "isolator", "signal": "NAMUR"}],
            False,
        ),
        ({"tag": "PT-1", "kind": "transmitter", "I/O type": "AI"}, [], False),
    ],
)
def test_which_circuits_are_meant(row: Row, types: list[Row], namur: bool | None) -> None:
    circuit, _ = circuit_of(row, types=types)
    assert is_on_proximity_input(circuit) is namur


CABLE = "cable 2 x 1000 m x 12.1 ohm/km (IEC 60228) x 1.1965 at 70 degC = 28.96 ohm"
ISOLATOR = {"code": "ISO", "kind": "isolator", "signal": "NAMUR", "input limit ohm": 100}
CARD = {"code": "DI", "kind": "card", "input limit ohm": 20}
ZENER = {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 30}


@pytest.mark.parametrize(
    ("row", "limit", "ohm", "working"),
    [
        (
            {},
            50.0,
            28.955,
            f"{CABLE}, 50 ohm allowed (IEC 60947-5-6)",
        ),
        (
            {"barrier": "ISO", "card": "DI"},
            100.0,
            28.955,
            f"{CABLE}, 100 ohm allowed (isolator ISO)",
        ),
        (
            {"barrier": "ZB", "card": "DI"},
            20.0,
            58.955,
            f"30 ohm barrier + {CABLE}; 58.96 ohm in all, 20 ohm allowed (card DI)",
        ),
    ],
    ids=["standard", "isolator", "zener and card"],
)
def test_the_line_against_its_limit(row: Row, limit: float, ohm: float, working: str) -> None:
    circuit, plant = circuit_of(row, types=[ISOLATOR, CARD, ZENER])
    line = line_of(circuit, plant.data)
    assert (line.limit_ohm, line.ohm, line.working, line.missing) == (limit, pytest.approx(ohm, abs=5e-4), working, ())


@pytest.mark.parametrize(
    ("row", "missing"),
    [
        ({"cable length": None}, ("cable length",)),
        ({"conductor size": None}, ("conductor size",)),
        ({"barrier": "X"}, ("barrier",)),
        ({"barrier": "Z0"}, ("resistance ohm of the barrier",)),
    ],
)
def test_what_is_blank_is_named(row: Row, missing: tuple[str, ...]) -> None:
    zener = {"code": "Z0", "kind": "barrier", "zener or isolator": "zener"}
    circuit, plant = circuit_of(row, types=[ISOLATOR, zener])
    assert line_of(circuit, plant.data).missing == missing


@given(st.sampled_from(STANDARD_SIZES_MM2), st.integers(-40, 90), st.sampled_from((0.0, 20.0, 49.0)))
def test_one_metre_more_is_too_long(size_mm2: float, hot_c: int, barrier_ohm: float) -> None:
    row = {"conductor size": f"{size_mm2} mm2", "barrier": "ZB"}
    circuit, plant = circuit_of(
        row, types=[{**ZENER, "resistance ohm": barrier_ohm}], plant={"ELC hot degC": str(hot_c)}
    )
    ohm_per_km = conductor_ohm_per_km_20c(Conductor(size_mm2=size_mm2))
    assert ohm_per_km is not None

    def ohm(length_m: int) -> float:
        return barrier_ohm + 2.0 * length_m / 1000.0 * ohm_per_km * (1.0 + 0.00393 * (hot_c - 20.0))

    length_m = line_of(circuit, plant.data).longest_cable_m()
    assert length_m is not None
    assert ohm(length_m) <= 50.0 + 1e-6
    assert ohm(length_m + 1) > 50.0


def test_at_the_limit_is_within_it() -> None:
    assert [fits(ohm, 50.0) for ohm in (50.0, 50.0 + 1e-9, 50.0001)] == [True, True, False]


def test_a_line_that_takes_its_part_shifts_what_the_input_sees() -> None:
    assert [round(input_ma(1000.0, line_ohm=ohm), 3) for ohm in (0.0, 50.0, 2000.0)] == [4.1, 4.0, 2.05]
