"""The page as SVG: well-formed, the same words at the same places as in the PDF, and nothing live in it."""

from __future__ import annotations

import io
from pathlib import Path
from xml.etree import ElementTree

import pypdf
import pytest

from loops.sheet.content import sheet_content
from loops.sheet.font import printable
from loops.sheet.layout import sheet_pages
from loops.sheet.pack import sheets_of
from loops.sheet.pdf import write_sheets
from loops.sheet.shapes import Box, Circle, Line, Page, Text, expanded
from loops.sheet.svg import svg_of, svg_pages
from tests.loops.sheet import gallery
from tests.loops.sheet.plants import HOSTILE, crowded, works

SVG = "{http://www.w3.org/2000/svg}"


def parsed(text: str) -> ElementTree.Element:
    return ElementTree.fromstring(text)  # noqa: S314 - made here


def pages_of(kind: str) -> list[Page]:
    plant = gallery.plant_of(kind)
    (loop,) = sheets_of(plant).drawn
    return sheet_pages(sheet_content(loop, plant))


@pytest.mark.parametrize("kind", gallery.KINDS)
def test_every_shape_stands_in_it(kind: str) -> None:
    for page in pages_of(kind):
        root = parsed(svg_of(page, title=kind))
        shapes = list(expanded(page.shapes))
        counts = {tag: len(root.findall(f"{SVG}{tag}")) for tag in ("text", "line", "rect", "circle")}
        assert counts == {
            "text": sum(isinstance(shape, Text) for shape in shapes),
            "line": sum(isinstance(shape, Line) for shape in shapes),
            "rect": sum(isinstance(shape, Box) for shape in shapes),
            "circle": sum(isinstance(shape, Circle) for shape in shapes),
        }
        assert [each.text or "" for each in root.findall(f"{SVG}text")] == [
            shape.text for shape in shapes if isinstance(shape, Text)
        ]


@pytest.mark.parametrize("kind", gallery.KINDS)
def test_it_says_what_the_pdf_says(kind: str, tmp_path: Path) -> None:
    plant = gallery.plant_of(kind)
    path = tmp_path / "sheets.pdf"
    write_sheets(plant, path)
    reader = pypdf.PdfReader(io.BytesIO(path.read_bytes()))
    (loop,) = sheets_of(plant).drawn
    for number, page in enumerate(sheet_pages(sheet_content(loop, plant), first_page=2), start=1):
        told = {each.text for each in parsed(svg_of(page, title="")).iter(f"{SVG}text") if each.text}
        printed = "".join(reader.pages[number].extract_text().split())
        # The pack's sheets bear their content mark, which is the pack's to work out.
        assert {text for text in told if "".join(text.split()) not in printed} == set()


def test_nothing_in_it_is_live() -> None:
    plant = crowded()
    loop = next(loop for loop in sheets_of(plant).drawn if loop.name == "P-203")
    for text in svg_pages(sheet_pages(sheet_content(loop, plant)), title=HOSTILE):
        root = parsed(text)
        assert {each.tag.removeprefix(SVG) for each in root.iter()} <= {
            "svg", "title", "desc", "text", "line", "rect", "circle", "a",
        }  # fmt: skip
        names = {name for each in root.iter() for name in each.attrib}
        assert not {name for name in names if name == "style" or name.startswith("on")}
        title = root.find(f"{SVG}title")
        assert title is not None
        assert title.text == f"{printable(HOSTILE)}, page {text.partition('page-')[2][0]}"
        assert "<b>" not in text


def test_two_pages_share_no_id() -> None:
    plant = works()
    ids: list[str] = []
    loop = sheets_of(plant).drawn[2]
    pages = sheet_pages(sheet_content(loop, plant))
    for text in svg_pages([*pages, *pages], title=loop.name):
        ids += [each.attrib["id"] for each in parsed(text).iter() if "id" in each.attrib]
    assert len(ids) == len(set(ids)) > 2
