"""The pages: nothing outside its box, nothing over anything else, nothing lost."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Callable

import pytest

from loops.plant import Plant
from loops.sheet.content import SheetContent, sheet_content
from loops.sheet.font import PLACEHOLDER, printable
from loops.sheet.index import entries_of, lay_index
from loops.sheet.layout import CAUTION, INDEX, sheet_pages
from loops.sheet.pack import sheets_of
from loops.sheet.shapes import Link, Page, Text, expanded
from tests.loops.sheet.geometry import troubles, words
from tests.loops.sheet.plants import HOSTILE, LONG, crowded, works
from validation.example import example_plant

NOTES = [f"FAULT ELC{number:02d} PT-101: {'the voltage falls short, ' * number}" for number in range(1, 60)]


def contents(plant: Plant, notes: list[str] | None = None) -> dict[str, SheetContent]:
    return {loop.name: sheet_content(loop, plant, notes=notes) for loop in sheets_of(plant).drawn}


def pages_of(plant: Plant, notes: list[str] | None = None) -> dict[str, list[Page]]:
    return {name: sheet_pages(content, first_page=7) for name, content in contents(plant, notes).items()}


@pytest.mark.parametrize("plant", [works, crowded])
@pytest.mark.parametrize("notes", [None, [], NOTES], ids=["not audited", "nothing found", "sixty findings"])
def test_geometry(plant: Callable[[], Plant], notes: list[str] | None) -> None:
    found = {
        f"{name[:20]} {number}": troubles(page)
        for name, pages in pages_of(plant(), notes).items()
        for number, page in enumerate(pages, start=1)
    }
    assert {name: said for name, said in found.items() if said} == {}


@pytest.mark.parametrize("plant", [works, crowded])
def test_geometry_of_the_index(plant: Callable[[], Plant]) -> None:
    made = plant()
    entries = entries_of(sheets_of(made), {})
    pages: list[Page] = []
    numbers = {entry.anchor: 17_000 + number for number, entry in enumerate(entries)}
    lay_index(made, sheets_of(made), entries, "a list with a long name.xlsx", emit=pages.append, pages=numbers)
    assert [troubles(page) for page in pages] == [[] for _ in pages]
    assert pages[0].anchors == (INDEX,)
    targets = [shape.target for page in pages for shape in page.shapes if isinstance(shape, Link)]
    assert targets == [entry.anchor for entry in entries]


def test_the_index_takes_as_many_pages_before_the_page_numbers_are_known() -> None:
    rows = [
        {"tag": f"PT-{number}", "I/O type": "AI", "service": "Water " * (number % 30)} for number in range(100, 400)
    ]
    plant = example_plant(rows)
    sheets = sheets_of(plant)
    entries = entries_of(sheets, None)
    before: list[Page] = []
    lay_index(plant, sheets, entries, "list", emit=before.append)
    after: list[Page] = []
    numbers = {entry.anchor: 12_345 for entry in entries}
    lay_index(plant, sheets, entries, "list", emit=after.append, pages=numbers, count=98_765)
    assert len(before) == len(after) > 5
    assert [links(page) for page in before] == [links(page) for page in after]


def links(page: Page) -> list[Link]:
    return [shape for shape in page.shapes if isinstance(shape, Link)]


def test_no_word_of_a_long_text_is_lost() -> None:
    """The texts of one column, over all pages, read on from line to line."""
    pages = sheet_pages(contents(crowded())["P-201"])
    columns: dict[tuple[float, float], list[str]] = defaultdict(list)
    for page in pages:
        for shape in expanded(page.shapes):
            if isinstance(shape, Text):
                columns[round(shape.box.left, 2), round(shape.box.right, 2)].append(shape.text)
    long = " ".join(LONG.split())
    counts = sorted(" ".join(lines).count(long) for lines in columns.values() if long in " ".join(lines))
    # Once the junction box; twelve times the remarks, and service, plant, P&ID, line, equipment, drawing in full.
    assert counts == [1, 12 + 6]
    assert max("".join(lines).count("x" * 400) for lines in columns.values()) == 1
    assert len(pages) > 1


def test_a_cut_title_says_so_and_stands_in_full_below() -> None:
    content = contents(crowded())["P-201"]
    page, *_ = pages = sheet_pages(content)
    assert "…" in words(page)
    assert any("Title block in full" in words(each) for each in pages)


def test_hostile_text_is_text() -> None:
    content = next(each for each in contents(crowded()).values() if each.loop == "P-203")
    said = "".join(words(page) for page in sheet_pages(content)).replace("\n", "")
    shown = printable(HOSTILE).strip()
    assert shown.replace(" ", "") in said.replace(" ", "")
    assert "<b>&amp;" in said
    assert PLACEHOLDER in shown
    assert "\u202e" not in said


def test_sheets_are_numbered_and_end_with_the_lines_to_sign_on() -> None:
    pages = pages_of(crowded())["P-202"]
    count = len(pages)
    assert count > 2
    for number, page in enumerate(pages, start=1):
        said = words(page)
        assert f"{number} of {count}" in said
        assert f"page {number + 6}" in said
        assert CAUTION in said
        assert ("Signature" in said) == (number == count)
    assert "Terminations (continued)" in words(pages[1])


def test_the_whole_of_a_plain_sheet_stands_on_one_page() -> None:
    """Of one with terminations, settings, budget and check table on front and back."""
    sizes = {name: len(pages) for name, pages in pages_of(works(), []).items()}
    assert sizes == {"P-101": 2, "F-102": 1, "T-103": 1, "T-104": 1, "F-105": 1, "X-106": 1}


def test_what_nobody_gave_is_a_dotted_line() -> None:
    plant = example_plant([{"tag": "PT-1", "I/O type": "AI"}])
    (pages,) = pages_of(plant).values()
    shapes = [shape for page in pages for shape in expanded(page.shapes)]
    dotted = [shape for shape in shapes if getattr(shape, "dotted", False)]
    texts = {shape.text for shape in shapes if isinstance(shape, Text)}
    assert len(dotted) > 30
    assert "None" not in texts
    assert (
        "Dotted line: not given in the list, to be filled in.   – not applicable.   * assumed or derived, not given."
        in (texts)
    )


def test_a_sheet_leads_back_to_the_index() -> None:
    for pages in pages_of(works()).values():
        assert [[link.target for link in links(page)] for page in pages] == [[INDEX]] * len(pages)


def test_without_an_audit_the_sheet_says_so() -> None:
    plant = works()
    assert "Drawn without an audit" in words(pages_of(plant)["P-101"][0])
    assert "None found." in words(pages_of(plant, [])["P-101"][0])
    assert NOTES[0] in words(pages_of(plant, NOTES[:1])["P-101"][0]).replace("\n", " ")
