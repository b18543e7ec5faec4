"""Columns that name the entries of a list: by their contents, where their heading does not say so."""

from __future__ import annotations

from typing import Any

import pytest

from validation.example import example_plant, said

_TYPES: list[dict[str, Any]] = [
    {"code": "PX-16", "kind": "transmitter", "lift-off V": 10.5},
    {"code": "PX-40", "kind": "transmitter", "lift-off V": 11},
]


@pytest.mark.parametrize("heading", ["Code", "Cat. ref", "Model", "Spec"])
def test_a_column_of_listed_codes_is_the_device_type(heading: str) -> None:
    rows = [{"tag": "PT-101", heading: "PX-16"}, {"tag": "PT-102", heading: "PX-40"}]
    plant = example_plant(rows, types=_TYPES)
    assert [each.type.lift_off_v if each.type else None for each in plant.instruments] == [10.5, 11.0]


@pytest.mark.parametrize(
    ("heading", "cells"),
    [
        ("Code", ("PT", "PT")),  # what the function is, and on no list
        ("Remarks", ("PX-16", "PX-40")),  # heads no name
    ],
)
def test_another_column_is_none(heading: str, cells: tuple[str, str]) -> None:
    rows = [{"tag": f"PT-10{number}", heading: cell} for number, cell in enumerate(cells, start=1)]
    plant = example_plant(rows, types=_TYPES)
    assert [each.record.device_type for each in plant.instruments] == [None, None]


def test_models_with_figures_and_no_code_are_entries() -> None:
    headings = ("Model", "Description", "Voc (V)", "Isc (mA)", "Ca Gr D (uF)", "La Gr D (mH)")
    barriers = [
        dict(zip(headings, ("MB-1", "zener barrier", 28, 93, 1.04, 33.6), strict=True)),
        dict(zip(headings, ("MB-2", "isolator", 22, 80, 3, 40), strict=True)),
    ]
    row = {
        "tag": "PT-101",
        "area classification": "Cl I Div 1 Gr D T4",
        "Ex marking": "IS Cl I Div 1 Gp ABCD T4",
        "Vmax": 24,
        "barrier": "MB-1",
        "signal": "4-20 mA",
        "I/O type": "AI",
    }
    plant = example_plant([row], types=barriers)
    assert (plant.types["mb-1"].uo_v, plant.types["mb-1"].co_iia_nf) == (28, 1040)
    assert said("ISC02", [row], types=barriers) == ["P-101: Uo 28 V of MB-1 is above Ui 24 V of PT-101, by 4 V"]
    assert said("ISC02", [{**row, "barrier": "MB-2"}], types=barriers) == []


def test_a_list_of_models_without_figures_is_no_catalogue() -> None:
    bought = [{"Model": "MB-1", "Description": "zener barrier", "Maker": "Sorn"}]
    assert example_plant([{"tag": "PT-101"}], types=bought).types == {}
