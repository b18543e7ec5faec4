"""loop-sheets.pdf, read back by another library."""

from __future__ import annotations

import io
import itertools
import re
from pathlib import Path
from typing import Any

import pypdf
import pytest

from loops.plant import Plant
from loops.sheet.layout import CAUTION, PAGE_HEIGHT, PAGE_WIDTH
from loops.sheet.pack import Sheets, sheets_of
from loops.sheet.pdf import write_sheets
from tests.loops.sheet.plants import HOSTILE, crowded, works
from validation.example import example_plant

POINTS = 72.0 / 25.4


def drawn(plant: Plant, tmp_path: Path, **options: Any) -> pypdf.PdfReader:
    path = tmp_path / "loop-sheets.pdf"
    write_sheets(plant, path, **options)
    return pypdf.PdfReader(io.BytesIO(path.read_bytes()), strict=True)


def outline(reader: pypdf.PdfReader, lines: Any = None, level: int = 0) -> list[tuple[int, str, int]]:
    found: list[tuple[int, str, int]] = []
    for line in reader.outline if lines is None else lines:
        if isinstance(line, list):
            found.extend(outline(reader, line, level + 1))
        else:
            number = reader.get_destination_page_number(line)
            assert number is not None
            found.append((level, str(line.title), number))
    return found


def links(reader: pypdf.PdfReader, number: int) -> list[tuple[list[float], int]]:
    found = []
    for reference in reader.pages[number].get("/Annots") or ():
        link = reference.get_object()
        assert link["/Subtype"] == "/Link"
        target = link["/Dest"][0].get_object()
        found.append(([float(each) for each in link["/Rect"]], page_number(reader, target)))
    return found


def page_number(reader: pypdf.PdfReader, page: Any) -> int:
    return next(number for number, each in enumerate(reader.pages) if each.get_object() == page)


def plain(text: str) -> str:
    return " ".join(text.split())


@pytest.fixture(scope="module")
def whole(tmp_path_factory: pytest.TempPathFactory) -> pypdf.PdfReader:
    notes = {"P-101": ["FAULT ELC01 P-101: short by 0.117 V"], "T-103": []}
    return drawn(works(), tmp_path_factory.mktemp("sheets"), notes=notes)


def test_what_the_file_says_of_itself(whole: pypdf.PdfReader) -> None:
    assert whole.metadata is not None
    assert whole.metadata.title == "Loop sheets - Marrowbeck Works"
    assert whole.trailer["/Root"]["/Lang"] == "en"
    assert whole.trailer["/Root"]["/PageMode"] == "/UseOutlines"
    assert whole.trailer["/Root"]["/ViewerPreferences"]["/DisplayDocTitle"] == True  # noqa: E712 - a PDF's own boolean
    for page in whole.pages:
        assert [float(each) for each in page.mediabox] == pytest.approx([0, 0, 210 * POINTS, 297 * POINTS], abs=0.01)
    assert (PAGE_WIDTH, PAGE_HEIGHT) == (210.0, 297.0)


def test_bookmarks_by_area_then_loop(whole: pypdf.PdfReader) -> None:
    assert outline(whole) == [
        (0, "Index", 0),
        (0, "A1 Tank farm", 1),
        (1, "F-102", 1),
        (1, "F-105", 2),
        (1, "P-101", 3),
        (1, "X-106", 5),
        (0, "A2 Boiler house", 6),
        (1, "T-103", 6),
        (1, "T-104", 7),
    ]


def test_the_index_leads_to_the_sheets_and_back(whole: pypdf.PdfReader) -> None:
    assert [target for _, target in links(whole, 0)] == [1, 2, 3, 5, 6, 7]
    for number in range(1, 8):
        assert [target for _, target in links(whole, number)] == [0]
    for number in range(8):
        for (left, bottom, right, top), _ in links(whole, number):
            assert 0 <= left < right <= 210 * POINTS
            assert 0 <= bottom < top <= 297 * POINTS


def test_the_index_names_pages_and_what_has_no_sheet(whole: pypdf.PdfReader) -> None:
    said = plain(whole.pages[0].extract_text())
    assert "6 loops with a sheet on 7 pages, 7 circuits; 2 loops without an electrical signal" in said
    assert re.search(r"P-101 Feed pump discharge pressure AI 1 4\b", said)
    assert re.search(r"X-106 Feed shut-off DO, DI 6\b|X-106 Feed shut-off DI, DO 6\b", said)
    assert "P-107 PG-107 (gauge) Local pressure local only" in said
    assert "P-108 PSV-108 (relief valve) Relief local only" in said


@pytest.mark.parametrize(
    "words",
    [
        "P-101", "Feed pump discharge pressure", "A1 Tank farm", "Zone 1, IIB, T3", "PID-1", "1 of 2",
        "Quillmoor QP-4", "0 to 10 barg", "8 barg", "80.0 % = 16.80 mA", "X1:1", "PT-101+", "MAR-1",
        "10.383", "-0.117", "24.0 V - 22 mA x 618.955 ohm = 10.383 V at the terminals, 10.5 V needed, short by 0.117 V",
        "FAULT ELC01 P-101: short by 0.117 V", CAUTION, "page 4", "page 5", "Witnessed by", "Signature",
    ],
)  # fmt: skip
def test_what_a_sheet_says(whole: pypdf.PdfReader, words: str) -> None:
    assert any(words in plain(whole.pages[number].extract_text()) for number in (3, 4))


def test_the_check_table_reads_row_by_row(whole: pypdf.PdfReader) -> None:
    said = plain(whole.pages[3].extract_text())
    rows = "0 0 4.00 1.000 10.00 0 25 2.5 8.00 2.000 20.00 2.5 50 5 12.00 3.000 30.00 5"
    assert f"{rows} 75 7.5 16.00 4.000 40.00 7.5 100 10 20.00 5.000 50.00 10" in said
    assert "100.00" in plain(whole.pages[6].extract_text())
    assert "175.86" in plain(whole.pages[6].extract_text())
    assert "41.276" in plain(whole.pages[7].extract_text())


def test_each_typeface_is_embedded_and_can_be_searched(whole: pypdf.PdfReader) -> None:
    fonts = whole.pages[3]["/Resources"]["/Font"].get_object()
    names = {str(each.get_object()["/BaseFont"]) for each in fonts.values()}
    assert {name.partition("+")[2] for name in names} == {"DejaVuSansCondensed", "DejaVuSansCondensed-Bold"}
    for each in fonts.values():
        assert "/FontFile2" in each.get_object()["/FontDescriptor"]
        assert "/ToUnicode" in each.get_object()


def test_the_same_plant_gives_the_same_bytes(tmp_path: Path) -> None:
    first, second, other = (tmp_path / name for name in ("first.pdf", "second.pdf", "other.pdf"))
    write_sheets(works(), first, notes={"P-101": ["x"]})
    write_sheets(crowded(), other)
    write_sheets(works.__wrapped__(), second, notes={"P-101": ["x"]})
    assert first.read_bytes() == second.read_bytes()
    write_sheets(works(), second, notes={"P-101": ["y"]})
    assert first.read_bytes() != second.read_bytes()


def test_progress_and_count(tmp_path: Path) -> None:
    steps: list[tuple[int, int]] = []
    assert write_sheets(works(), tmp_path / "a.pdf", on_sheet=lambda number, of: steps.append((number, of))).loops == 6
    assert steps == [(number, 6) for number in range(1, 7)]


def test_crowded_and_hostile_loops(tmp_path: Path) -> None:
    reader = drawn(crowded(), tmp_path)
    said = "".join("".join(page.extract_text().split()) for page in reader.pages)
    assert "Наружная" in said
    assert "<b>&amp;%n$(x)\\)(" in said
    assert "Ω→µ" in said
    assert HOSTILE not in said
    titles = [title for _, title, _ in outline(reader)]
    assert len(titles) == len(set(titles)) or "P-203" in titles
    numbers = [number for level, _, number in outline(reader) if level == 1]
    assert numbers == sorted(numbers)
    for page in reader.pages:
        assert CAUTION in plain(page.extract_text())


def test_more_than_256_characters_of_one_face(tmp_path: Path) -> None:
    """A part of the typeface holds 256 characters: what follows comes from another part, in its place."""
    letters = "".join(
        chr(code) for code in itertools.chain(range(0x410, 0x450), range(0x3B1, 0x3C9), range(0x100, 0x17F))
    )
    words = " ".join(letters[start : start + 6] for start in range(0, len(letters), 6))
    plant = example_plant([{"tag": "PT-1", "I/O type": "DI", "remarks": f"{words} mixed Ж Ω ß"}])
    reader = drawn(plant, tmp_path)
    said = plain(reader.pages[1].extract_text())
    fonts = reader.pages[1]["/Resources"]["/Font"].get_object()
    assert len(fonts) > 2
    assert all(word in said for word in words.split())
    assert "mixed Ж Ω ß" in said


@pytest.mark.parametrize(
    ("rows", "words"),
    [
        ([], "No loop of this plant has an electrical signal."),
        ([{"tag": "PG-1", "service": "gauge"}], "P-1 PG-1 (gauge) gauge local only"),
    ],
)
def test_a_plant_without_a_signal(tmp_path: Path, rows: list[dict[str, Any]], words: str) -> None:
    plant = example_plant(rows or [{"tag": "PT-1", "status": "void"}])
    path = tmp_path / "a.pdf"
    assert write_sheets(plant, path).loops == 0
    reader = pypdf.PdfReader(path, strict=True)
    assert len(reader.pages) == 1
    assert words in plain(reader.pages[0].extract_text())
    assert outline(reader) == [(0, "Index", 0)]
    assert reader.metadata is not None
    assert reader.metadata.title == "Loop sheets"


def test_every_object_stands_where_the_table_says(tmp_path: Path) -> None:
    path = tmp_path / "a.pdf"
    write_sheets(works(), path)
    data = path.read_bytes()
    starts = int(data.rpartition(b"startxref")[2].split()[0])
    lines = data[starts:].split(b"\n")
    assert lines[0] == b"xref"
    count = int(lines[1].split()[1])
    for number, line in enumerate(lines[3 : 2 + count], start=1):
        assert len(line) == 19
        assert data[int(line[:10]) :].startswith(b"%d 0 obj" % number)


def test_pages_are_written_as_they_are_drawn(tmp_path: Path) -> None:
    """The file grows while the sheets are drawn: none of them is kept."""
    plant = works.__wrapped__()
    found = sheets_of(plant)
    plant._notes["loop sheets"] = Sheets(drawn=found.drawn * 40, left_out=())
    path = tmp_path / "a.pdf"
    sizes: list[int] = []
    write_sheets(plant, path, on_sheet=lambda number, of: sizes.append(path.stat().st_size))
    assert sizes[-1] > 0.5 * path.stat().st_size
    assert sizes[len(sizes) // 2] > 0.2 * path.stat().st_size


def test_a_file_that_cannot_be_written(tmp_path: Path) -> None:
    with pytest.raises(OSError, match="nowhere"):
        write_sheets(works(), tmp_path / "nowhere" / "a.pdf")
