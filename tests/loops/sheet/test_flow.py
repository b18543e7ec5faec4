"""Wrapping and splitting: every line fits, no character is lost, every page is used."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.sheet.flow import (
    BODY,
    HEAD,
    MOST_SET,
    NOTHING,
    PAD_X,
    SMALL,
    STRONG,
    TO_WRITE,
    Column,
    Flow,
    Para,
    Table,
    cell,
    head_mm,
    set_row,
    set_table,
    shortened,
    width_mm,
    wrapped,
)
from loops.sheet.font import MM_PER_POINT, printable, regular
from loops.sheet.shapes import Line, Link, Shape, Text, expanded

TEXTS = st.text(st.characters(exclude_categories=()), max_size=120)


@given(TEXTS, st.floats(4.0, 200.0), st.sampled_from([BODY, STRONG, SMALL, HEAD]))
def test_wrapped_lines_fit_and_lose_nothing_but_blanks(text: str, room_mm: float, look: object) -> None:
    lines = wrapped(text, look, room_mm)  # type: ignore[arg-type]
    assert "".join("".join(lines).split()) == "".join(printable(text).split())
    assert lines
    widest = max(regular().advances.values()) * 12 * MM_PER_POINT / 1000
    assert all(width_mm(line, look) <= max(room_mm, widest) + 1e-6 for line in lines)  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("text", "room_mm", "lines"),
    [
        ("", 10.0, [""]),
        ("one two", 100.0, ["one two"]),
        ("one two", 7.0, ["one", "two"]),
        ("10-PT-101A/101B", 14.0, ["10-PT-", "101A/101B"]),
        ("a\nb\tc", 100.0, ["a b c"]),
    ],
)
def test_where_a_text_breaks(text: str, room_mm: float, lines: list[str]) -> None:
    assert wrapped(text, BODY, room_mm) == lines


def test_the_room_is_used_to_the_last_hundredth() -> None:
    width = width_mm("exactly", BODY)
    assert wrapped("exactly", BODY, width) == ["exactly"]
    assert wrapped("exactly", BODY, width - 0.01) == ["exactl", "y"]


@pytest.mark.parametrize(
    ("most", "lines", "cut"),
    [(1, ["alpha …"], True), (2, ["alpha", "beta …"], True), (3, ["alpha", "beta", "gamma"], False)],
)
def test_a_shortened_text_says_that_it_was(most: int, lines: list[str], cut: bool) -> None:
    assert shortened("alpha beta gamma", BODY, 11.0, most) == (lines, cut)


def test_a_row_is_as_high_as_its_highest_cell() -> None:
    columns = (Column("a", 20.0), Column("b", 20.0))
    row = set_row((cell("one two three four five six"), cell("x")), columns, 4.9)
    lines = len(row.cells[0])
    assert lines > 1
    assert row.height == pytest.approx(lines * BODY.pitch_mm + 2 * row.pad)
    assert set_row((cell("x"), NOTHING), columns, 4.9).height == pytest.approx(4.9)


def filled(rows: int, *, tall: str = "", bottom: float = 60.0) -> list[list[Shape]]:
    flow = Flow(left=10.0, width=100.0, bottom=bottom, first_top=20.0, next_top=10.0)
    columns = (Column("head", 40.0), Column("other", 60.0))
    content = [(cell(f"row {number}"), cell(tall or "x")) for number in range(rows)]
    flow.add(set_table(Table(title="Title", columns=columns, rows=content)))
    return flow.pages


def test_a_table_goes_on_with_its_heading_on_every_page() -> None:
    pages = filled(40)
    assert len(pages) > 3
    titles = [next(shape.text for shape in expanded(page) if isinstance(shape, Text)) for page in pages]
    assert titles == ["Title"] + ["Title (continued)"] * (len(pages) - 1)
    rows = [shape.text for page in pages for shape in page if isinstance(shape, Text) and shape.text.startswith("row")]
    assert rows == [f"row {number}" for number in range(40)]


def test_no_row_is_drawn_below_the_foot() -> None:
    for page in filled(40):
        assert all(shape.y <= 60.0 for shape in page if isinstance(shape, Text))


def test_a_row_higher_than_a_page_goes_on() -> None:
    tall = " ".join(f"word{number}" for number in range(300))
    pages = filled(2, tall=tall)
    said = " ".join(shape.text for page in pages for shape in expanded(page) if isinstance(shape, Text))
    assert all(said.count(f"word{number} ") == 2 for number in range(299))
    assert len(pages) > 4
    assert max(shape.box.bottom for page in pages for shape in page if isinstance(shape, Text)) <= 60.0


@pytest.mark.parametrize(("length", "kept"), [(MOST_SET, MOST_SET), (MOST_SET + 1, MOST_SET), (32_000, MOST_SET)])
def test_a_text_that_no_sheet_is_for_is_cut_and_says_so(length: int, kept: int) -> None:
    said = "".join(wrapped("y" * length, BODY, 40.0)).replace(" ", "")
    assert said == "y" * kept + ("" if length == kept else f"\u2026(cut:{length:,}characters)")


def test_a_row_of_more_than_half_a_page_begins_where_it_stands() -> None:
    tall = " ".join(f"word{number}" for number in range(160))
    flow = Flow(left=0.0, width=100.0, bottom=100.0, first_top=0.0, next_top=0.0)
    columns = (Column("", 60.0),)
    flow.add(set_table(Table(title="before", columns=columns, rows=[(cell("x"),)] * 8)))
    flow.add(set_table(Table(title="tall", columns=columns, rows=[(cell(tall),)])))
    first = [shape.text for shape in expanded(flow.pages[0]) if isinstance(shape, Text)]
    assert "tall" in first
    assert any("word0" in text for text in first)
    assert len(flow.pages) == 2


def test_tables_beside_each_other_begin_at_one_height_and_the_flow_goes_on_below_both() -> None:
    flow = Flow(left=0.0, width=100.0, bottom=200.0, first_top=0.0, next_top=0.0)
    short = set_table(Table(title="short", columns=(Column("a", 40.0),), rows=[(cell("x"),)]))
    long = set_table(Table(title="long", columns=(Column("b", 50.0),), rows=[(cell("y"),)] * 9))
    flow.beside(short, long)
    texts = {shape.text: shape for shape in expanded(flow.page) if isinstance(shape, Text)}
    assert texts["short"].y == texts["long"].y
    assert texts["long"].x - texts["short"].x == pytest.approx(50.0)
    assert flow.y > long.height


def test_tables_too_high_to_stand_beside_each_other_follow_each_other() -> None:
    flow = Flow(left=0.0, width=100.0, bottom=60.0, first_top=0.0, next_top=0.0)
    long = set_table(Table(title="long", columns=(Column("b", 50.0),), rows=[(cell("y"),)] * 20))
    flow.beside(long, long)
    said = [shape.text for page in flow.pages for shape in expanded(page) if isinstance(shape, Text)]
    assert said.count("y") == 40


def test_a_value_not_given_is_a_dotted_line_in_its_cell() -> None:
    flow = Flow(left=0.0, width=100.0, bottom=60.0, first_top=0.0, next_top=0.0)
    flow.add(set_table(Table(title="t", columns=(Column("a", 30.0), Column("b", 30.0)), rows=[(cell("x"), TO_WRITE)])))
    (dots,) = (shape for shape in flow.page if isinstance(shape, Line) and shape.dotted)
    assert (dots.x0, dots.x1) == (30.0 + PAD_X, 60.0 - PAD_X)
    assert flow.y - 5.0 < dots.y0 < flow.y - 1.0


def test_a_row_with_a_link_leads_there_over_its_whole_width() -> None:
    flow = Flow(left=5.0, width=100.0, bottom=60.0, first_top=0.0, next_top=0.0)
    columns = (Column("a", 30.0), Column("b", 20.0))
    flow.add(set_table(Table(title="t", columns=columns, rows=[(cell("x"), cell("y"))], links=["there"])))
    (link,) = (shape for shape in flow.page if isinstance(shape, Link))
    assert link.target == "there"
    assert (link.box.left, link.box.right) == (5.0, 55.0)
    assert link.box.top == pytest.approx(head_mm(columns))


def test_a_title_that_the_bar_cannot_hold_stands_in_full_at_the_foot() -> None:
    title = "A title with very many words in it " * 5
    made = set_table(Table(title=title, columns=(Column("a", 50.0),), rows=[(cell("x"),)]))
    assert made.foot is not None
    assert " ".join(line for line, _ in made.foot.cells[0]) == title.strip()


def test_pages_are_handed_over_as_they_fill() -> None:
    handed: list[list[Shape]] = []
    flow = Flow(left=0.0, width=100.0, bottom=40.0, first_top=0.0, next_top=0.0, done=handed.append)
    flow.add(set_table(Table(title="t", columns=(Column("a", 30.0),), rows=[(cell("x"),)] * 30, foot=(Para("end"),))))
    assert len(handed) > 3
    assert len(flow.pages) == 1
    assert [shape.text for shape in flow.page if isinstance(shape, Text)][-1] == "end"
