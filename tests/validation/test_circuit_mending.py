"""Which cell a circuit's fix changes."""

from typing import Any

import pytest

from validation.circuit_mending import (
    cable_type_change,
    conductor_change,
    highest_supply_fix,
    least_supply_change,
    length_change,
    volts_text,
    wires_change,
)
from validation.example import example_plant

TAG = {"tag": "PT-101", "signal": "4-20 mA", "wires": 2, "I/O type": "AI", "I/O address": "1"}
LOOP = {"number": "P-101", "circuit or tag": "PT-101"}
ON_LOOP = {"subject": "PT-101", "sheet": "Loops"}
ON_ROW = {"subject": "PT-101", "sheet": "Instruments"}


def made(tag: dict[str, Any], loop: dict[str, Any], **sheets: Any) -> Any:
    plant = example_plant([{**TAG, **tag}], loops=[{**LOOP, **loop}], **sheets)
    (circuit,) = plant.circuits
    return circuit, plant


@pytest.mark.parametrize(
    ("tag", "loop", "change"),
    [
        ({}, {"cable length": 100}, {"change": {"cable length": "90"}, **ON_LOOP}),
        ({"cable length": 100}, {}, {"change": {"cable length": "90"}, **ON_ROW}),
        ({}, {}, {}),
    ],
    ids=["loop", "row", "none"],
)
def test_the_length_is_changed_where_it_stands(
    tag: dict[str, Any], loop: dict[str, Any], change: dict[str, Any]
) -> None:
    circuit, plant = made(tag, loop)
    assert length_change(circuit, 90, plant) == change


def test_a_cable_that_is_the_whole_run_is_changed_in_the_schedule() -> None:
    cables = [{"number": "C-1", "from": "PT-101", "to": "X", "length": 40, "type": "A"}]
    circuit, plant = made({"cable": "C-1"}, {}, cables=cables)
    assert length_change(circuit, 30, plant) == {"change": {"length": "30"}, "subject": "C-1", "sheet": "Cables"}


def test_a_sum_of_cables_has_no_one_cell() -> None:
    cables = [
        {"number": "C-1", "from": "PT-101", "to": "JB-1", "length": 40, "type": "A"},
        {"number": "M-1", "from": "JB-1", "to": "X", "length": 60, "type": "A"},
    ]
    circuit, plant = made({"cable": "C-1"}, {}, cables=cables)
    assert circuit.cable_length_m.number == 100.0
    assert length_change(circuit, 30, plant) == {}


def test_a_cable_of_several_pairs_is_not_changed_for_one_circuit() -> None:
    cables = [{"number": "C-1", "from": "PT-101", "to": "X", "length": 40, "type": "A", "pairs": 4}]
    circuit, plant = made({"cable": "C-1"}, {}, cables=cables)
    assert length_change(circuit, 30, plant) == {}
    assert cable_type_change(circuit, "B", next(iter(plant.cables.values())), plant) == {}


def test_the_cable_type_is_changed_where_it_stands() -> None:
    cables = [{"number": "C-1", "from": "PT-101", "to": "X", "length": 40, "type": "A"}]
    circuit, plant = made({"cable": "C-1"}, {}, cables=cables)
    cable = next(iter(plant.cables.values()))
    assert cable_type_change(circuit, "B", cable, plant) == {
        "change": {"type": "B"}, "subject": "C-1", "sheet": "Cables",
    }  # fmt: skip
    circuit, plant = made({"cable type": "A"}, {})
    assert cable_type_change(circuit, "B", None, plant) == {"change": {"cable type": "B"}, **ON_ROW}
    circuit, plant = made({"cable type": "A"}, {"cable type": "C", "kind": "AI"})
    assert cable_type_change(circuit, "B", None, plant) == {"change": {"cable type": "B"}, **ON_LOOP}


@pytest.mark.parametrize(
    ("of_type", "change"),
    [(None, {"change": {"wires": "3"}, **ON_ROW}), (3, {"change": {"wires": "3"}, **ON_ROW}), (2, {})],
)
def test_wires_are_changed_where_the_type_allows_it(of_type: int | None, change: dict[str, Any]) -> None:
    types = [{"code": "T", "kind": "element", "sensor type": "Pt100", "wires": of_type}]
    plant = example_plant([{**TAG, "device type": "T"}], types=types)
    assert wires_change(plant.circuits[0], 3) == change


def test_a_row_of_the_loop_list_that_is_not_alone_is_not_changed() -> None:
    plant = example_plant([TAG], loops=[{**LOOP, "cable length": 100}, {**LOOP, "cable length": 100}])
    assert length_change(plant.circuits[0], 90, plant) == {}


@pytest.mark.parametrize(
    ("tag", "types", "change"),
    [
        ({"conductor size": "1 mm2"}, [], {"change": {"conductor size": "2.5 mm2"}, **ON_ROW}),
        ({"cable type": "A"}, [{"code": "A", "conductor size": "1 mm2"}], {}),
        ({"conductor size": "1 mm2", "cable type": "A"}, [{"code": "A", "ohm per km": 18.1}], {}),
    ],
    ids=["row", "cable type", "cable type with ohms"],
)
def test_the_conductor_is_changed_where_it_stands(
    tag: dict[str, Any], types: list[dict[str, Any]], change: dict[str, Any]
) -> None:
    circuit, _ = made(tag, {}, cable_types=types)
    assert conductor_change(circuit, 2.5) == change


@pytest.mark.parametrize(
    ("tag", "loop", "least", "highest"),
    [
        ({}, {"supply V min": 23, "supply V max": 26}, {"supply V min": "20"}, {"supply V max": "20"}),
        ({}, {"supply V nominal": 24}, {"supply V nominal": "21.1"}, {"supply V nominal": "19"}),
        ({"power supply": "24 V DC"}, {}, {"power supply": "21.1 V DC"}, {"power supply": "19 V DC"}),
        ({}, {}, {}, {}),
    ],
    ids=["ends", "nominal", "row", "none"],
)
def test_the_supply_is_changed_where_it_stands(
    tag: dict[str, Any], loop: dict[str, Any], least: dict[str, str], highest: dict[str, str]
) -> None:
    circuit, plant = made(tag, loop)
    assert least_supply_change(circuit, 20.0, plant).get("change", {}) == least
    fix = highest_supply_fix(circuit, 20.0, plant)
    assert (fix.text, dict(fix.change)) == ("supply of at most 20 V at its highest", highest)


@pytest.mark.parametrize(
    ("volts", "margin", "text"),
    [(10.4884, -0.0116, "10.488 V"), (12.0, 0.0, "12 V"), (9.99999996, -4e-8, "9.99999996 V")],
)
def test_volts_are_written_to_the_margin(volts: float, margin: float, text: str) -> None:
    assert volts_text(volts, margin) == text
