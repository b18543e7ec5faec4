"""The sheets of the demo plant: a hundred and more, as people write their lists."""

from __future__ import annotations

from pathlib import Path

import pypdf
import pytest

from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.workbook.files import read_lists
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import Plant, assemble
from loops.sheet.content import sheet_content
from loops.sheet.layout import sheet_pages
from loops.sheet.pack import sheets_of
from loops.sheet.pdf import write_sheets
from tests.loops.sheet.geometry import troubles
from tests.marrowbeck import DEMO
from validation.audit import audit
from validation.finding import Outcome
from validation.report.sheet_notes import notes_by_loop


@pytest.fixture(scope="module")
def plant() -> Plant:
    return assemble(read_lists([DEMO], (*INSTRUMENT_SHEETS, *LOOP_SHEETS)))


def test_nothing_overlaps_on_any_sheet(plant: Plant) -> None:
    found: dict[str, list[str]] = {}
    for loop in sheets_of(plant).drawn:
        for number, page in enumerate(sheet_pages(sheet_content(loop, plant, notes=[])), start=1):
            said = troubles(page)
            if said:
                found[f"{loop.name}, page {number}"] = said
    assert found == {}


def test_every_finding_about_a_drawn_instrument_stands_on_a_sheet(plant: Plant, tmp_path: Path) -> None:
    result = audit(plant)
    notes = notes_by_loop(result)
    sheets = sheets_of(plant)
    drawn = {each.name for loop in sheets.drawn for each in loop.members}
    printed = {note for said in notes.values() for note in said}
    for finding in result.of(Outcome.FINDING):
        if finding.subject in drawn:
            assert any(f" {finding.rule} {finding.subject}" in note for note in printed), finding
    path = tmp_path / "loop-sheets.pdf"
    assert write_sheets(plant, path, notes=notes).loops == len(sheets.drawn) > 100
    reader = pypdf.PdfReader(path, strict=True)
    # Front and back: drawing and figures, then what is tried and signed.
    assert len(reader.pages) < 2.1 * len(sheets.drawn)
