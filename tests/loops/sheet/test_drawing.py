"""The drawing of a circuit: everything inside its frame, nothing over anything else, no conductor in the air."""

from __future__ import annotations

from itertools import pairwise
from math import hypot

import pytest

from loops.plant import Plant
from loops.sheet.content import sheet_content
from loops.sheet.drawing import CONTINUED, CONTINUES, bands_of
from loops.sheet.layout import LEFT, TOP, WIDTH, sheet_pages
from loops.sheet.pack import sheets_of
from loops.sheet.path import Path, path_of
from loops.sheet.shapes import GREY, Bounds, Box, Circle, Line, Page, Shape, Text, expanded, lowered
from tests.loops.sheet import gallery
from tests.loops.sheet.geometry import inside, troubles, words
from tests.loops.sheet.plants import crowded, works
from tests.loops.sheet.test_path import AREAS, DEVICE, LISTED, TOLD, TYPES, Row, row
from validation.example import example_plant

CLOSE = 0.02


def paths(plant: Plant) -> dict[str, Path]:
    return {
        circuit.name: path_of(circuit, plant, members=loop.members)
        for loop in sheets_of(plant).drawn
        for circuit in loop.circuits
    }


def plant_of(rows: list[Row], terminations: list[Row] | None = None) -> Plant:
    return example_plant(rows, types=TYPES, areas=AREAS, terminations=terminations or [])


FAR = [
    row("PT-1 +", "JB-1 X1:1", core="1", colour="white"),
    *(row(f"JB-{number} X1:1/out", f"JB-{number + 1} X1:1", core="1", colour="white") for number in range(1, 8)),
    row("PT-1 -", "JB-1 X1:2", core="2", colour="black"),
    *(row(f"JB-{number} X1:2/out", f"JB-{number + 1} X1:2", core="2", colour="black") for number in range(1, 8)),
]
CONTROL: list[Row] = [
    {"tag": "FT-1", "area": "A1", "signal": "4-20 mA", "wires": "4", "power supply": "230 V AC", "I/O type": "AI"},
    {"tag": "FE-1"},
    {"tag": "FIC-1", "location": "system"},
    {"tag": "FY-1", "kind": "positioner", "signal": "4-20 mA", "I/O type": "AO", "barrier": "ISO-2", "area": "A1"},
    {"tag": "FV-1"},
    {"tag": "FI-1", "kind": "indicator", "location": "field"},
]
SERIES: list[Row] = [
    {**DEVICE, "receiver ohm": "250"},
    {"tag": "PI-1", "kind": "indicator", "signal": "4-20 mA", "location": "field", "loop": "P-1"},
]
SPLIT: list[Row] = [
    {"tag": "FY-1A", "kind": "positioner", "signal": "4-20 mA", "I/O type": "AO", "I/O address": "1", "area": "A1"},
    {"tag": "FV-1A"},
    {"tag": "FY-1B", "kind": "positioner", "signal": "4-20 mA", "I/O type": "AO", "I/O address": "1", "area": "A1"},
    {"tag": "FV-1B"},
]
PLANTS = {
    "in series": plant_of(SERIES),
    "split range": plant_of(SPLIT),
    "listed": plant_of([DEVICE], LISTED),
    "far": plant_of([DEVICE], FAR),
    "control": plant_of(CONTROL),
    **{f"told {number}": plant_of([{**DEVICE, **changes}]) for number, (changes, _) in enumerate(TOLD)},
}


def drawn(path: Path) -> list[tuple[float, tuple[Shape, ...]]]:
    return [
        (band.height, band.shapes)
        for band in bands_of(path, left=LEFT, width=WIDTH, classification="Zone 1, IIB, T3, ambient -20 to 40 \u00b0C")
    ]


def test_a_diode_across_an_indicator_is_said() -> None:
    (path,) = paths(gallery.plant_of("indicator in series")).values()
    ((_, shapes),) = drawn(path)
    assert "diode across it" in [shape.text for shape in shapes if isinstance(shape, Text)]


def test_the_gallery_has_a_sheet_of_every_kind() -> None:
    circuits = {kind: list(paths(gallery.plant_of(kind)).values()) for kind in gallery.KINDS}
    assert all(circuits.values())
    assert len(circuits["solenoid with its valve and switches"]) == 3
    assert len(circuits["three voting"]) == 3
    assert len(circuits["flow by orifice"]) == 2


def all_paths() -> list[tuple[str, Path]]:
    plants = {**PLANTS, "works": works(), "crowded": crowded()}
    plants |= {kind: gallery.plant_of(kind) for kind in gallery.KINDS}
    return [
        (f"{name}: {circuit}"[:40], path) for name, plant in plants.items() for circuit, path in paths(plant).items()
    ]


ALL = all_paths()


@pytest.mark.parametrize(("name", "path"), ALL, ids=[name for name, _ in ALL])
def test_nothing_overlaps_and_nothing_is_left_outside(name: str, path: Path) -> None:
    for height, shapes in drawn(path):
        page = Page(tuple(lowered(shape, TOP) for shape in shapes))
        assert troubles(page) == []
        frame = Bounds(LEFT, TOP, LEFT + WIDTH, TOP + height)
        assert all(inside(bounds(shape), frame) for shape in page.shapes)


def bounds(shape: Shape) -> Bounds:
    if isinstance(shape, Line):
        x0, x1 = sorted((shape.x0, shape.x1))
        y0, y1 = sorted((shape.y0, shape.y1))
        return Bounds(x0, y0, x1, y1)
    if isinstance(shape, Circle):
        x, y, radius = shape.x, shape.y, shape.radius
        return Bounds(x - radius, y - radius, x + radius, y + radius)
    if isinstance(shape, Text):
        return shape.box
    assert isinstance(shape, Box)
    return Bounds(shape.left, shape.top, shape.right, shape.bottom)


@pytest.mark.parametrize(("name", "path"), ALL, ids=[name for name, _ in ALL])
def test_every_conductor_ends_on_something(name: str, path: Path) -> None:
    for _, shapes in drawn(path):
        level = [shape for shape in shapes if isinstance(shape, Line) and shape.y0 == shape.y1 and shape.grey != GREY]
        assert level
        loose = [
            (x, line)
            for line in level
            for x in (line.x0, line.x1)
            if not any(touches(x, line.y0, other) for other in shapes if other is not line)
        ]
        assert loose == []


def touches(x: float, y: float, other: Shape) -> bool:
    """Whether a point lies on the edge of a box or a circle, or on a line."""
    if isinstance(other, Box):
        return min(abs(x - other.left), abs(x - other.right)) < CLOSE and other.top < y < other.bottom
    if isinstance(other, Circle):
        return abs(hypot(x - other.x, y - other.y) - other.radius) < CLOSE
    if isinstance(other, Line):
        if other.y0 == other.y1:
            return abs(y - other.y0) < CLOSE and min(abs(x - other.x0), abs(x - other.x1)) < CLOSE
        return abs(x - other.x0) < CLOSE and min(other.y0, other.y1) <= y <= max(other.y0, other.y1)
    return False


def test_a_long_path_goes_on_below_and_says_so_both_ways() -> None:
    (path,) = paths(PLANTS["far"]).values()
    bands = drawn(path)
    assert len(bands) > 1
    said = ["\n".join(shape.text for shape in shapes if isinstance(shape, Text)) for _, shapes in bands]
    assert [CONTINUES in text for text in said] == [True] * (len(bands) - 1) + [False]
    assert [CONTINUED in text for text in said] == [False] + [True] * (len(bands) - 1)
    for station in path.stations:
        assert any(station.name in text for text in said if station.name)
    for one, other in pairwise(said):
        assert any(station.name in one and station.name in other for station in path.stations if station.name)


def test_what_the_drawing_shows_in_full_is_not_said_twice() -> None:
    plant = PLANTS["told 0"]
    (loop,) = sheets_of(plant).drawn
    (page,) = sheet_pages(sheet_content(loop, plant))
    labels = {shape.text for shape in expanded(page.shapes) if isinstance(shape, Text)}
    assert not labels & {"Junction box", "Terminals", "Barrier or isolator", "I/O address", "Pair"}
    assert {"JB-1", "X1", "C-1", "MC-1", "ZB-28", "1.1.1", "Signal", "Conductor"} <= labels


@pytest.mark.parametrize(
    ("change", "label"),
    [
        ({"junction box": "Junction box of the third fractionating column, north"}, "Junction box"),
        ({"terminals": "X1:1,X1:2,X1:3,X1:4"}, "Terminals"),
        ({"cable": "C-1, C-2, C-3, C-4"}, "Cable"),
        ({"I/O address": "NODE-1/RACK-2/SLOT-3/CHANNEL-4/POINT-5"}, "I/O address"),
    ],
)
def test_what_the_drawing_cannot_hold_stands_in_the_table(change: Row, label: str) -> None:
    plant = plant_of([{**DEVICE, **change}])
    (loop,) = sheets_of(plant).drawn
    pages = sheet_pages(sheet_content(loop, plant))
    said = {shape.text for page in pages for shape in expanded(page.shapes) if isinstance(shape, Text)}
    assert label in said
    whole = " ".join(words(page).replace("\n", " ") for page in pages)
    (value,) = change.values()
    assert value.replace(" ", "") in whole.replace(" ", "")
