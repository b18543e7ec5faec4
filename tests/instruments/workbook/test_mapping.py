"""A mapping given back: the same list reads the same, a mended one as mended, the next revision without a guess."""

from __future__ import annotations

import dataclasses
from functools import cache
from pathlib import Path

import pytest

from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.workbook.files import read_lists
from instruments.workbook.lists import Lists, SheetReport
from instruments.workbook.mapping import Mapping, mapping_of
from instruments.workbook.mapping_toml import mapping_text
from loops.columns import SHEETS as LOOP_SHEETS

KINDS = (*INSTRUMENT_SHEETS, *LOOP_SHEETS)
FIXTURES = Path(__file__).parents[3] / "fixtures"
LISTS = sorted(
    path
    for folder in ("lists", "marrowbeck")
    for path in (FIXTURES / folder).iterdir()
    if path.suffix in (".xlsx", ".csv")
)


@cache
def read(path: Path) -> Lists:
    return read_lists([path], KINDS)


def given_back(path: Path, mapping: Mapping, folder: Path) -> Lists:
    file = folder / "mapping.toml"
    file.write_text(mapping_text(mapping, KINDS), encoding="utf-8")
    return read_lists([path], KINDS, mapping_toml=file)


def without_how(mapping: Mapping) -> Mapping:
    """Return a mapping without how its columns were matched."""
    return Mapping(
        sheets=tuple(
            dataclasses.replace(
                sheet,
                columns=tuple(dataclasses.replace(each, how="", likelihood=None) for each in sheet.columns),
            )
            for sheet in mapping.sheets
        )
    )


def became(sheet: SheetReport) -> SheetReport:
    """Return what became of a sheet: not how its headings were matched, nor that a text's separator was a guess."""
    return dataclasses.replace(sheet, match=None, remarks=() if sheet.encoding else sheet.remarks)


@pytest.mark.parametrize("path", LISTS, ids=lambda path: path.name)
def test_the_same_list_reads_the_same(path: Path, tmp_path: Path) -> None:
    first = read(path)
    again = given_back(path, mapping_of(first.sheets), tmp_path)
    assert again.mapping_notes == ()
    assert dict(again.records) == dict(first.records)
    assert again.problems == first.problems
    assert again.plant == first.plant
    assert [became(each) for each in again.sheets] == [became(each) for each in first.sheets]
    # Nothing is guessed.
    hows = {each.how for sheet in again.sheets if sheet.match is not None for each in sheet.match.columns.values()}
    assert hows <= {"mapping"}
    assert [sheet.match.notes for sheet in again.sheets if sheet.match is not None and sheet.match.header_rows] == [
        () for sheet in again.sheets if sheet.match is not None and sheet.match.header_rows
    ]
    mapping = mapping_of(again.sheets)
    assert without_how(mapping) == without_how(mapping_of(first.sheets))
    text = mapping_text(mapping, KINDS)
    third = given_back(path, mapping, tmp_path)
    assert mapping_text(mapping_of(third.sheets), KINDS) == text
