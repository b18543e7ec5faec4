"""Which loops have a sheet: every signal has one, every instrument is somewhere, in an order people expect."""

from __future__ import annotations

from collections import Counter
from typing import Any

import pytest

from loops.sheet.pack import AREA_NOT_GIVEN, Sheets, sheets_of
from tests.loops.sheet.plants import AREAS, crowded, works
from validation.example import example_plant


def packed(rows: list[dict[str, Any]], **sheets: Any) -> Sheets:
    return sheets_of(example_plant(rows, **sheets))


def test_the_loops_with_a_signal_and_the_loops_without() -> None:
    sheets = sheets_of(works())
    assert [loop.name for loop in sheets.drawn] == ["F-102", "F-105", "P-101", "X-106", "T-103", "T-104"]
    assert [(loop.name, loop.why) for loop in sheets.left_out] == [("P-107", "local only"), ("P-108", "local only")]


@pytest.mark.parametrize("plant", [works, crowded])
def test_each_circuit_stands_on_one_sheet_and_each_live_instrument_somewhere(plant: Any) -> None:
    made = plant()
    sheets = sheets_of(made)
    circuits = Counter(id(circuit) for loop in sheets.drawn for circuit in loop.circuits)
    assert circuits == Counter(id(circuit) for circuit in made.circuits)
    placed = {id(each) for loop in (*sheets.drawn, *sheets.left_out) for each in loop.members}
    assert placed == {id(each) for each in made.live}
    names = [loop.name for loop in sheets.drawn]
    assert len(names) == len(set(names))


def test_areas_and_loops_stand_in_natural_order_and_no_area_last() -> None:
    rows = [
        {"tag": f"PT-{number}", "I/O type": "AI", "area": area}
        for number, area in ((10, "A2"), (9, "A10"), (2, "A2"), (100, "A2"), (7, ""), (1, "A1"))
    ]
    drawn = packed(rows, areas=[{"code": "A10"}, {"code": "A2"}, *AREAS[:1]]).drawn
    assert [(loop.area, loop.name) for loop in drawn] == [
        ("A1 Tank farm", "P-1"), ("A2", "P-2"), ("A2", "P-10"), ("A2", "P-100"), ("A10", "P-9"),
        (AREA_NOT_GIVEN, "P-7"),
    ]  # fmt: skip


def test_a_loop_row_files_a_circuit_under_its_number() -> None:
    rows = [{"tag": "PT-1", "I/O type": "AI"}, {"tag": "PT-2", "I/O type": "AI"}]
    loops = [{"number": "LP-900", "circuit or tag": "PT-1", "kind": "AI"}]
    drawn = packed(rows, loops=loops).drawn
    assert [loop.name for loop in drawn] == ["P-1", "P-2"]


def test_a_circuit_in_no_loop_has_a_sheet_of_its_own() -> None:
    drawn = packed([{"tag": "no tag at all !", "I/O type": "DI", "I/O address": "1"}]).drawn
    assert [len(loop.circuits) for loop in drawn] == [1]


@pytest.mark.parametrize(
    ("rows", "why"),
    [
        ([{"tag": "PG-1"}], "local only"),
        ([{"tag": "FIC-1", "location": "system"}], "in the control system only"),
        ([{"tag": "JB-1"}], "box, panel or supply"),
        ([{"tag": "!!", "service": "x"}], "kind not known, no signal given"),
        ([{"tag": "PG-1"}, {"tag": "PI-1", "location": "system"}], "local only"),
    ],
)
def test_why_a_loop_has_no_sheet(rows: list[dict[str, Any]], why: str) -> None:
    sheets = packed(rows)
    assert (len(sheets.drawn), [each.why for each in sheets.left_out]) == (0, [why])


def test_what_is_not_live_is_nowhere() -> None:
    sheets = packed([{"tag": "PT-1", "I/O type": "AI", "status": "demolished"}, {"tag": "PG-2", "status": "void"}])
    assert sheets == Sheets(drawn=(), left_out=()) or (sheets.drawn, sheets.left_out) == ((), ())
