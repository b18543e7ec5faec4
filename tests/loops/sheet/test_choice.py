"""Packs: the sheets of an area, a unit, a system, a box or some tags, and what is said where there are none."""

from __future__ import annotations

from pathlib import Path

import pypdf
import pytest

from loops.plant import Plant
from loops.sheet.choice import Choice, NothingChosen, chosen
from loops.sheet.pack import sheets_of
from loops.sheet.pdf import write_sheets
from validation.example import example_plant

ROWS = [
    {"tag": "PT-101", "area": "A1", "unit": "10", "system": "DCS", "junction box": "JB-1", "I/O type": "AI"},
    {"tag": "FT-102", "area": "A1", "unit": "20", "system": "SIS", "junction box": "JB-2", "I/O type": "AI"},
    {"tag": "XY-103", "area": "A2", "unit": "20", "system": "DCS", "junction box": "JB-1", "I/O type": "DO"},
    {"tag": "ZSO-103", "area": "A2", "unit": "20", "system": "DCS", "junction box": "JB-3", "I/O type": "DI"},
    {"tag": "XV-103", "area": "A2", "unit": "20"},
    {"tag": "PG-104", "area": "A2", "unit": "20"},
]
AREAS = [{"code": "A1", "name": "Tank farm", "zone": "1"}, {"code": "A2", "name": "Boiler house", "system": "none"}]


@pytest.fixture(scope="module")
def plant() -> Plant:
    return example_plant(ROWS, areas=AREAS, plant={"name": "Marrowbeck Works"})


@pytest.mark.parametrize(
    ("choice", "loops"),
    [
        (Choice(), ["F-102", "P-101", "X-103"]),
        (Choice(areas=("A1",)), ["F-102", "P-101"]),
        (Choice(areas=("a1", "A2")), ["F-102", "P-101", "X-103"]),
        (Choice(areas=("A2 Boiler house",)), ["X-103"]),
        (Choice(units=("20",)), ["F-102", "X-103"]),
        (Choice(systems=("safety",)), ["F-102"]),
        (Choice(boxes=("JB-1",)), ["P-101", "X-103"]),
        (Choice(boxes=("JB-1",), areas=("A2",)), ["X-103"]),
        (Choice(tags=("PT 101",)), ["P-101"]),
        (Choice(tags=("ZSO-103", "F-102")), ["F-102", "X-103"]),
    ],
)
def test_what_is_wanted(plant: Plant, choice: Choice, loops: list[str]) -> None:
    assert [loop.name for loop in chosen(sheets_of(plant), choice, plant).drawn] == loops


@pytest.mark.parametrize(
    ("choice", "said"),
    [
        (Choice(boxes=("JB-9",)), "no loop with a sheet has the junction box JB-9; the list has JB-3, JB-2, JB-1"),
        (Choice(boxes=("JB-1", "JB-9")),
         "no loop with a sheet has the junction box JB-9; the list has JB-3, JB-2, JB-1"),
        (Choice(units=("99",)), "no loop with a sheet has the unit 99; the list has 10, 20"),
        (Choice(tags=("PG-104",)), "no loop with a sheet has the tag PG-104"),
        (Choice(areas=("A1",), boxes=("JB-3",)), "no loop has all of: area A1; junction box JB-3"),
    ],
)  # fmt: skip
def test_what_no_loop_has_is_said(plant: Plant, choice: Choice, said: str) -> None:
    with pytest.raises(NothingChosen) as raised:
        chosen(sheets_of(plant), choice, plant)
    assert str(raised.value).startswith(said)


def test_a_pack_says_what_it_is_of(plant: Plant, tmp_path: Path) -> None:
    path = tmp_path / "pack.pdf"
    assert write_sheets(plant, path, choice=Choice(boxes=("JB-1",))).loops == 2
    reader = pypdf.PdfReader(path, strict=True)
    assert reader.metadata is not None
    assert reader.metadata.title == "Loop sheets - Marrowbeck Works - junction box JB-1"
    said = reader.pages[0].extract_text()
    assert "P-101" in said
    assert "F-102" not in said
