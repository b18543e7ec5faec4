"""Leads of temperature sensors: on which circuits they are, and what two of them add."""

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.sensor import pt100_c, pt100_ohm
from loops.cable import STANDARD_SIZES_MM2
from loops.circuit import Circuit
from loops.leads import lead_error_k, lead_wires, sensor_circuits, two_wires
from loops.plant import Plant
from validation.example import example_plant

Row = dict[str, Any]
TE: Row = {
    "tag": "TE-1",
    "kind": "RTD",
    "signal": "Pt100",
    "wires": 2,
    "I/O type": "RTD",
    "I/O address": "1",
    "cable length": 200,
    "conductor size": "1 mm2",
}


def circuit_of(row: Row, *others: Row, **sheets: Any) -> tuple[Circuit, Plant]:
    plant = example_plant([{"service": "Feed", **TE, **row}, *others], **sheets)
    (circuit,) = plant.circuits
    return circuit, plant


@pytest.mark.parametrize(
    ("row", "sheets", "own"),
    [
        ({}, {}, True),
        ({"signal": "TC type K", "I/O type": "TC"}, {}, True),
        ({"signal": "Pt100", "I/O type": "AI"}, {}, True),
        ({"signal": "4-20 mA", "I/O type": "AI"}, {}, False),
        ({"signal": "4-20 mA", "I/O type": "RTD"}, {}, False),
        (
            {"signal": None, "I/O type": "AI", "device type": "T"},
            {"types": [{"code": "T", "kind": "element", "sensor type": "K"}]},
            True,
        ),
        ({"tag": "TT-1", "kind": "transmitter", "signal": "Pt100", "I/O type": "AI"}, {}, False),
    ],
)
def test_a_sensors_own_signal(row: Row, sheets: Any, own: bool) -> None:
    circuit, plant = circuit_of(row, **sheets)
    assert sensor_circuits(circuit, plant) == ((circuit,) if own else ())


TT: Row = {
    "tag": "TT-1",
    "service": "Feed",
    "kind": "transmitter",
    "signal": "4-20 mA",
    "I/O type": "AI",
    "I/O address": "1",
    "cable": "C-1",
    "cable type": "A",
    "cable length": 300,
}
WITH_TT: Row = {"I/O type": None, "I/O address": None}


@pytest.mark.parametrize(
    ("row", "length"),
    [
        ({"cable": "C-2", "cable length": 10}, 10.0),
        ({"cable": "C-1", "cable length": 10}, None),
        ({"cable": None, "cable type": "A", "cable length": 300, "conductor size": None}, None),
        ({"cable": None, "cable type": "B", "cable length": 300}, 300.0),
        ({"cable": None, "cable length": None, "conductor size": None}, None),
    ],
    ids=["own", "repeated number", "repeated type and length", "own type", "none: in the head"],
)
def test_an_element_on_its_transmitter_has_leads_where_it_states_a_cable(row: Row, length: float | None) -> None:
    circuit, plant = circuit_of({**WITH_TT, **row}, TT)
    assert circuit.device.name == "TT-1"
    found = sensor_circuits(circuit, plant)
    assert [(each.device.name, each.cable_length_m.number) for each in found if each.cable_length_m] == (
        [] if length is None else [("TE-1", length)]
    )


@pytest.mark.parametrize(
    ("row", "description", "wires"),
    [
        ({}, "", 2),
        ({"wires": 4}, "", 4),
        ({"wires": None, "signal": "Pt100 3-wire"}, "", 3),
        ({"wires": None, "signal": "Pt100, 3W"}, "", 3),
        ({"wires": None, "kind": "RTD 2-wire"}, "", 2),
        ({"wires": None}, "Pt100, four-wire, 6 mm", 4),
        ({"wires": None, "signal": "Pt100 3-Leiter"}, "", 3),
        ({"wires": None}, "", None),
    ],
)
def test_how_many_wires(row: Row, description: str, wires: int | None) -> None:
    types = [{"code": "T", "kind": "element", "sensor type": "Pt100", "description": description or None}]
    circuit, _ = circuit_of({"device type": "T", **row}, types=types)
    assert lead_wires(circuit) == wires


def worked(row: Row | None = None, *, hottest_c: float | None = 100.0, r0_ohm: float = 100.0, **sheets: Any) -> Any:
    circuit, plant = circuit_of(row or {}, **sheets)
    return two_wires(circuit, plant.data, sensor=f"Pt{r0_ohm:g}", r0_ohm=r0_ohm, hottest_c=hottest_c)


def test_the_error_is_the_exact_inverse() -> None:
    """7.8 ohm at 100 degC: 20.63 K; the slope there gives 20.57, 0.385 ohm/K everywhere 20.26."""
    leads = worked(
        {"cable type": "C", "conductor size": None},
        cable_types=[{"code": "C", "conductor size": 1, "class": 5}],
        plant={"ELC hot degC": 20},
    )
    assert leads.ohm == pytest.approx(7.8)
    assert leads.worst_k == pytest.approx(20.63, abs=5e-3)
    assert leads.worst_k != pytest.approx(7.8 / 0.385, abs=0.3)
    assert leads.worst_k != 0.0
    assert leads.working(100.0) == (
        "cable 2 x 200 m x 19.5 ohm/km (IEC 60228) x 1 at 20 degC = 7.8 ohm; Pt100 at 100 degC 138.505 ohm"
        " + 7.8 ohm of leads is read as 120.63 degC, 20.63 K too high, 0.5 K allowed (IEC 60751)"
    )


def test_of_three_wires_the_difference_is_left() -> None:
    """2 % of 3.9 ohm at 100 degC."""
    assert lead_error_k(100.0, 0.02 * 3.9, r0_ohm=100.0) == pytest.approx(0.21, abs=5e-3)


def test_ten_times_the_sensor_is_a_tenth_of_the_error() -> None:
    assert worked(r0_ohm=1000.0).worst_k == pytest.approx(worked().worst_k / 10.0, rel=0.02)


def test_a_barrier_stands_in_the_leads() -> None:
    zener = {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 15}
    leads = worked({"barrier": "ZB"}, types=[zener])
    assert leads.in_series == (("barrier", 15.0),)
    assert leads.ohm == pytest.approx(15.0 + 8.663, abs=5e-4)
    assert "15 ohm barrier + cable" in leads.working(100.0)


def test_where_the_reading_leaves_the_function_the_error_is_at_least_that() -> None:
    assert lead_error_k(100.0, 340.0, r0_ohm=100.0) == 750.0
    assert lead_error_k(850.0, 1.0, r0_ohm=100.0) == pytest.approx(1.0 / 0.2926, rel=1e-3)
    zener = {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 340}
    leads = worked({"barrier": "ZB"}, types=[zener])
    assert "is read as beyond 850 degC" in leads.working(100.0)
    assert leads.longest_cable_m() is None


@pytest.mark.parametrize(
    ("hottest_c", "ends"), [(100.0, (100.0, 100.0)), (None, (-200.0, 850.0)), (1200.0, (850.0, 850.0))]
)
def test_the_error_is_worked_at_the_hottest(hottest_c: float | None, ends: tuple[float, float]) -> None:
    leads = worked(hottest_c=hottest_c)
    assert (leads.kindest_c, leads.worst_c) == ends


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
    assert worked(row, types=[zener]).missing == missing


@given(
    st.sampled_from(STANDARD_SIZES_MM2),
    st.floats(-200.0, 800.0).map(lambda value: round(value, 1)),
    st.sampled_from((100.0, 500.0, 1000.0)),
    st.sampled_from((0.1, 0.5, 2.0)),
)
def test_one_metre_more_is_too_long(size_mm2: float, t_c: float, r0_ohm: float, limit_k: float) -> None:
    leads = worked({"conductor size": f"{size_mm2} mm2"}, hottest_c=t_c, r0_ohm=r0_ohm, plant={"ELC15 K": str(limit_k)})
    length_m = leads.longest_cable_m()
    assert length_m is not None

    def error_k(metres: int) -> float:
        ohm = leads.cable.ohm(70.0) / 200.0 * metres
        return pt100_c(pt100_ohm(t_c, r0_ohm=r0_ohm) + ohm, r0_ohm=r0_ohm) - t_c

    assert error_k(length_m) <= limit_k + 1e-6
    assert error_k(length_m + 1) > limit_k
