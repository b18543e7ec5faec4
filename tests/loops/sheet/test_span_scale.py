"""Settings on a scale of the span: each where it belongs, none over another, what lies outside said with its place."""

from __future__ import annotations

from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.sheet.content import sheet_content
from loops.sheet.layout import LEFT, TOP, WIDTH
from loops.sheet.pack import sheets_of
from loops.sheet.shapes import Line, Page, Text, expanded, extent, lowered
from loops.sheet.span_scale import BEYOND_MM, TAG_MM, SpanScale, draw_scale
from tests.loops.sheet.geometry import inside, troubles
from validation.example import example_plant

START = LEFT + TAG_MM + BEYOND_MM
END = LEFT + WIDTH - BEYOND_MM - 2.0

ROW = {"tag": "PT-1", "LRV": "0", "URV": "10", "range unit": "barg", "I/O type": "AI", "signal": "4-20 mA"}


def scale_of(row: dict[str, str]) -> SpanScale | None:
    plant = example_plant([{**ROW, **row}])
    (loop,) = sheets_of(plant).drawn
    (line,) = sheet_content(loop, plant).settings
    return line.scale


@pytest.mark.parametrize(
    ("row", "settings", "operating"),
    [
        ({"H": "8", "LL": "1"}, [("LL", 10.0), ("H", 80.0)], []),
        ({"H": "8", "operating value normal": "5", "operating value max": "7.5"},
         [("H", 80.0)], [("normal", 50.0), ("max", 75.0)]),
        ({"H": "8", "operating pressure normal": "5 barg"}, [("H", 80.0)], [("normal", 50.0)]),
        ({"HH": "12", "trip": "80 psig"}, [("HH", 120.0), ("trip", 55.158)], []),
        ({"LRV": "10", "URV": "0", "H": "8"}, [("H", 20.0)], []),
    ],
)  # fmt: skip
def test_places(row: dict[str, str], settings: list[tuple[str, float]], operating: list[tuple[str, float]]) -> None:
    found = scale_of(row)
    assert found is not None
    assert [(name, round(place, 3)) for name, place in found.settings] == settings
    assert [(name, round(place, 3)) for name, place in found.operating] == operating


@pytest.mark.parametrize("row", [{}, {"LRV": "", "H": "8"}, {"H": "40 degC"}, {"LRV": "10", "H": "8"}])
def test_without_a_place_there_is_no_scale(row: dict[str, str]) -> None:
    """No setting, no range, a setting of another dimension, a range without a span."""
    assert scale_of(row) is None


places = st.lists(
    st.tuples(st.sampled_from(["LL", "L", "H", "HH", "trip"]), st.floats(-500, 900)),
    min_size=1,
    max_size=5,
    unique_by=lambda mark: mark[0],
)
operating = st.lists(
    st.tuples(st.sampled_from(["min", "normal", "max"]), st.floats(-500, 900)),
    max_size=3,
    unique_by=lambda mark: mark[0],
)


@given(places, operating)
def test_no_text_lies_over_another_wherever_the_settings_are(
    settings: list[tuple[str, float]], values: list[tuple[str, float]]
) -> None:
    scale = SpanScale(tag="PT-1001A", lrv="0 barg", urv="10 barg", settings=tuple(settings), operating=tuple(values))
    drawn = draw_scale(scale, left=LEFT, width=WIDTH)
    page = Page(tuple(lowered(shape, TOP) for shape in drawn.shapes))
    assert troubles(page) == []
    texts = [shape for shape in expanded(page.shapes) if isinstance(shape, Text)]
    assert all(inside(extent(text), text.box) for text in texts)
    said = {text.text for text in texts}
    for name, percent in (*settings, *values):
        assert (name if 0.0 <= percent <= 100.0 else f"{name} ({percent:.1f} %)") in said


@given(places)
def test_a_mark_points_to_its_place(settings: list[tuple[str, float]]) -> None:
    scale = SpanScale(tag="PT-1", lrv="0", urv="1", settings=tuple(settings), operating=())
    drawn = draw_scale(scale, left=LEFT, width=WIDTH)
    leads = {shape.x1: shape.x0 for shape in drawn.shapes if isinstance(shape, Line) and shape.y0 != shape.y1}
    for text in (shape for shape in drawn.shapes if isinstance(shape, Text)):
        name = text.text.partition(" ")[0]
        place = dict(settings).get(name)
        if place is None:
            continue
        around = extent(text)
        lead = min(leads, key=lambda x: abs(x - (around.left + around.right) / 2.0))
        expected = min(max(START + (END - START) * place / 100.0, START - BEYOND_MM + 3), END + BEYOND_MM - 3)
        assert leads[lead] == pytest.approx(expected)


def test_neighbours_stand_in_the_order_of_their_values() -> None:
    scale = SpanScale(tag="PT-1", lrv="0", urv="1", settings=(("HH", 81.0), ("H", 80.5), ("trip", 80.8)), operating=())
    texts = [
        shape
        for shape in draw_scale(scale, left=LEFT, width=WIDTH).shapes
        if isinstance(shape, Text) and shape.text in ("H", "HH", "trip")
    ]
    assert [text.text for text in sorted(texts, key=lambda text: text.x)] == ["H", "trip", "HH"]
    assert all(one.box == other.box for one, other in pairwise(texts))
