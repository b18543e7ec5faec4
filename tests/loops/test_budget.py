"""The voltage budget of a circuit, as rules and loop sheets take it: with the kindest value and with the default."""

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.plant_data import PlantData
from loops.budget import feeds_a_transmitter, figure_cells, highest_volts, is_isolator, lift_off
from loops.circuit import Circuit
from loops.power import VoltageDrop
from validation.example import example_plant

Row = dict[str, Any]

TAG = {"tag": "PT-1", "device type": "T1", "signal": "4-20 mA", "wires": 2, "I/O type": "AI", "I/O address": "A1",
       "conductor size": "1.5 mm2"}  # fmt: skip
LOOP = {"number": "P-1", "circuit or tag": "PT-1", "kind": "AI", "supply V min": 24, "range resistor": 250,
        "cable length": 1000}  # fmt: skip
TYPE = {"code": "T1", "kind": "transmitter", "lift-off V": 10.5, "maximum V": 42}


def circuit(
    tag: Row | None = None, loop: Row | None = None, kind: Row | None = None, more: tuple[Row, ...] = ()
) -> tuple[Circuit, PlantData]:
    rows = [{**base, **(changed or {})} for base, changed in ((TAG, tag), (LOOP, loop), (TYPE, kind))]
    plant = example_plant([rows[0]], loops=[rows[1]], types=[rows[2], *more], plant={"ELC hot degC": 20})
    (found,) = plant.circuits
    return found, plant.data


def test_a_budget_holds_its_figures() -> None:
    budget = lift_off(*circuit())
    assert (budget.current_ma, budget.lift_off_v, budget.source_name, budget.source_v) == (22.0, 10.5, "supply", 24.0)
    assert budget.resistances == (("receiver", 250.0),)
    assert budget.missing == budget.assumed == ()
    worst, at_20_ma = budget.worst, budget.at_20_ma
    assert worst is not None
    assert at_20_ma is not None
    assert worst.terms == (
        VoltageDrop(name="receiver", ohm=250.0, drop_v=5.5),
        VoltageDrop(name="cable", ohm=24.2, drop_v=pytest.approx(0.5324)),
    )
    assert worst.at_terminals_v == pytest.approx(24 - 0.022 * 274.2)
    assert at_20_ma.at_terminals_v == pytest.approx(24 - 0.020 * 274.2)
    assert budget.passes_at_worst is worst.passes is True


def test_what_is_missing_leaves_only_the_kindest() -> None:
    budget = lift_off(*circuit(loop={"cable length": None, "range resistor": None}))
    assert budget.missing == ("cable length",)
    assert (budget.worst, budget.at_20_ma, budget.passes_at_worst) == (None, None, None)
    assert budget.kindest is not None
    assert budget.kindest.at_terminals_v == 24.0
    assert budget.resistances == (("receiver", 250.0),)


def test_nothing_is_said_without_a_source_or_a_lift_off() -> None:
    for changed in ({"kind": {"lift-off V": None}}, {"loop": {"supply V min": None}}, {"loop": {"barrier": "ZZ"}}):
        budget = lift_off(*circuit(**changed))
        assert (budget.kindest, budget.worst, budget.passes_at_worst) == (None, None, None)


@given(
    supply=st.floats(8.0, 60.0).map(lambda value: round(value, 2)),
    ohm=st.integers(0, 900),
    length=st.integers(0, 3000),
    needed=st.floats(8.0, 20.0).map(lambda value: round(value, 2)),
)
def test_the_quick_answer_is_the_budgets(supply: float, ohm: int, length: int, needed: float) -> None:
    found, data = circuit(
        loop={"supply V min": supply, "supply V max": supply, "range resistor": ohm, "cable length": length},
        kind={"lift-off V": needed, "maximum V": needed},
    )
    budget, highest = lift_off(found, data), highest_volts(found, data)
    assert budget.worst is not None
    assert highest.worst is not None
    assert budget.passes_at_worst is budget.worst.passes
    assert highest.passes_at_worst is highest.worst.passes


def test_the_highest_volts_hold_their_figures() -> None:
    found, data = circuit(loop={"supply V max": 36, "range resistor": None})
    highest = highest_volts(found, data)
    assert highest.missing == ()
    assert highest.assumed == highest.assumed_in_series == ("receiver 250 ohm",)
    assert highest.worst is not None
    # The default plant is cold at -20 degC: 24.2 ohm are 20.396 ohm.
    assert highest.worst.at_terminals_v == pytest.approx(36 - 0.0036 * (250 + 24.2 * 0.8428))
    assert highest.kindest == highest.worst


@pytest.mark.parametrize(
    ("entry", "isolates"),
    [
        ({"zener or isolator": "zener", "volts available at 20 mA": 15}, False),
        ({"zener or isolator": "isolator"}, True),
        ({"zener or isolator": "galvanic"}, True),
        ({"kind": "isolator"}, True),
        ({"volts available at 20 mA": 15}, True),
        ({"volts available at high alarm": 15}, True),
        ({"resistance ohm": 340}, False),
        ({}, False),
    ],
)
def test_what_is_an_isolator(entry: Row, isolates: bool) -> None:
    plant = example_plant([{"tag": "PT-1", "service": "x"}], types=[{"code": "B", "kind": "barrier", **entry}, TYPE])
    barrier = plant.named_type("B")
    assert barrier is not None
    assert is_isolator(barrier) is isolates


@pytest.mark.parametrize(
    ("tag", "kind", "feeds"),
    [
        ({}, {}, True),
        ({"wires": 4}, {}, False),
        ({"wires": None}, {}, None),
        ({"wires": None}, {"wires": 2}, True),
        ({"signal": None}, {"signal": "4-20 mA HART"}, True),
        ({"signal": None}, {}, True),
        ({"signal": "Fieldbus"}, {}, False),
        # The head of an element sends a current, whatever its row calls it.
        ({"tag": "TE-1", "signal": "4-20 mA"}, {"kind": "element"}, True),
        ({"tag": "TE-1", "signal": "Pt100"}, {"kind": "element"}, False),
        ({"tag": "TE-1", "signal": None}, {"kind": "element"}, False),
        ({"tag": "FV-1", "kind": "control valve"}, {"kind": "control valve"}, False),
    ],
)
def test_which_circuits_feed_a_transmitter(tag: Row, kind: Row, feeds: bool | None) -> None:
    row = {title: value for title, value in {**TAG, **tag}.items() if value is not None}
    types = [{title: value for title, value in {**TYPE, **kind}.items() if value is not None}]
    (found,) = example_plant([row], types=types).circuits
    assert feeds_a_transmitter(found) is feeds


def test_the_cells_of_the_figures() -> None:
    found, _ = circuit(more=({"code": "ZB", "kind": "barrier", "resistance ohm": 340},), loop={"barrier": "ZB"})
    assert sorted({cell.sheet for cell in figure_cells(found)}) == ["Device types", "Loops"]
    assert len(figure_cells(found)) == len(set(figure_cells(found)))
