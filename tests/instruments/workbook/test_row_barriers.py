"""Barriers that rows describe beside their instrument."""

from __future__ import annotations

from typing import Any

import pytest

from validation.example import example_plant, outcomes, said, unchecked_for

_ROW: dict[str, Any] = {
    "tag": "PT-101",
    "area classification": "Zone 1 IIC T4",
    "Ex marking": "Ex ia IIC T4 Ga",
    "barrier": "KD-21",
    "Uo V": 25.2,
    "Io mA": 93,
    "Po mW": 587,
    "Co nF IIC": 107,
    "Lo mH IIC": 4.1,
    "Ui V": 30,
    "Ii mA": 120,
    "Pi mW": 900,
    "Ci nF": 5,
    "Li uH": 10,
    "cable length": 100,
    "output characteristic": "linear",
    "signal": "4-20 mA",
    "I/O type": "AI",
}


@pytest.mark.parametrize(
    ("rule", "change", "expected"),
    [
        ("ISC02", {"Ui V": 25.2}, []),
        ("ISC02", {"Ui V": 24}, ["P-101: Uo 25.2 V of KD-21 is above Ui 24 V of PT-101, by 1.2 V"]),
        ("ISC02", {"Ui V": 24, "barrier": "isolator"}, [
            "P-101: Uo 25.2 V of isolator of PT-101 is above Ui 24 V of PT-101, by 1.2 V"
        ]),
        ("ISC03", {"Ii mA": 80}, ["P-101: Io 93 mA of KD-21 is above Ii 80 mA of PT-101, by 13 mA"]),
        ("ISC05", {"Ci nF": 150}, ["P-101: capacitance 150 nF at KD-21, Co for IIC 107 nF: over by 43 nF"]),
        ("ISC01", {"Ex marking": "Ex db IIC T4 Gb"}, [
            "P-101: PT-101 is Ex db IIC T4 Gb, neither Ex i nor simple apparatus, on an Ex i circuit: KD-21 is an Ex i"
            " source"
        ]),
        ("DAT10", {}, []),
    ],
)  # fmt: skip
def test_figures_of_the_source_are_the_barriers(rule: str, change: dict[str, Any], expected: list[str]) -> None:
    assert said(rule, [{**_ROW, "cable length": 0, **change}]) == expected


def test_a_temperature_transmitter_is_fed_by_the_barrier_where_other_rows_have_one() -> None:
    hot = {**_ROW, "tag": "TT-102", "Ui V": 24}
    assert said("ISC02", [_ROW, hot]) == ["T-102: Uo 25.2 V of KD-21 is above Ui 24 V of TT-102, by 1.2 V"]


def test_what_only_temperature_transmitters_give_is_their_sensors() -> None:
    hot = {**_ROW, "tag": "TT-102", "Ui V": 24}
    without = {name: value for name, value in _ROW.items() if name not in ("Uo V", "Io mA", "Po mW")}
    assert outcomes("ISC02", [without, hot]) == {"unchecked": 2}
    assert unchecked_for("ISC02", [without, hot]) == {"barrier": 2}


def test_a_barrier_that_is_listed_is_left_as_it_is() -> None:
    listed = [{"code": "KD-21", "kind": "isolator", "Ex marking": "[Ex ia Ga] IIC", "Uo V": 20}]
    assert example_plant([_ROW], types=listed).types["kd-21"].uo_v == 20


def test_rows_that_disagree_of_one_barrier_are_found() -> None:
    rows = [_ROW, {**_ROW, "tag": "PT-102", "Uo V": 28}]
    assert [each.partition(":")[0] for each in said("DAT10", rows)] != []
    assert outcomes("ISC02", rows) == {"unchecked": 2}


def test_a_row_without_the_word_for_a_barrier_keeps_its_figures() -> None:
    plant = example_plant([{**_ROW, "barrier": "none"}])
    assert plant.types == {}
    assert plant.instruments[0].type is not None
    assert plant.instruments[0].type.uo_v == 25.2


@pytest.mark.parametrize(
    ("heading", "figure", "expected"),
    [
        ("cable pF/m", 200, []),
        ("cable pF/m", 1000, ["P-101: capacitance 105 nF at KD-21, Co for IIC 100 nF: over by 5 nF"]),
        ("cable nF/km", 1000, ["P-101: capacitance 105 nF at KD-21, Co for IIC 100 nF: over by 5 nF"]),
        ("cable capacitance", "1 nF/m", ["P-101: capacitance 105 nF at KD-21, Co for IIC 100 nF: over by 5 nF"]),
    ],
)
def test_a_row_states_its_cable(heading: str, figure: Any, expected: list[str]) -> None:
    row = {**_ROW, "Co nF IIC": 100, heading: figure, "cable uH/m": 0.7}
    assert said("ISC05", [row]) == expected


def test_inductance_and_resistance_of_a_rows_cable() -> None:
    row = {**_ROW, "Lo mH IIC": 0.5, "cable pF/m": 100, "cable uH/m": 6, "cable ohm/km": 12.1}
    assert said("ISC06", [row]) == ["P-101: inductance 0.61 mH at KD-21, Lo for IIC halved 0.25 mH: over by 0.36 mH"]
    circuit = example_plant([row]).circuits[0]
    assert circuit.cable_type is not None
    assert circuit.cable_type.ohm_per_km == 12.1
    assert [cell.address for cell in circuit.cable_type.cells("ohm_per_km")] != []


@pytest.mark.parametrize(
    "heading", ["Isolator type", "Associated apparatus", "Safety barrier", "Barrier make / model", "Barrier / isolator"]
)
@pytest.mark.parametrize("sign", ["Barrier {}o ({})", "{}0 ({})", "{}o max ({})"])
def test_headings_of_a_barrier_and_of_what_it_gives(heading: str, sign: str) -> None:
    row = {name: value for name, value in _ROW.items() if name not in ("barrier", "Uo V", "Io mA", "Po mW")}
    given = {
        sign.format(*each): value for each, value in {("U", "V"): 25.2, ("I", "mA"): 93, ("P", "W"): 0.587}.items()
    }
    source = example_plant([{**row, heading: "KD-21", **given}]).types["kd-21"]
    assert (source.uo_v, source.io_ma, source.po_mw) == (25.2, 93, 587)
