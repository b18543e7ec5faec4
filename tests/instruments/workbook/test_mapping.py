"""A mapping given back: the same list reads the same, a mended one as mended, the next revision without a guess."""

from __future__ import annotations

from functools import cache
from pathlib import Path

import pytest

from instruments.workbook.files import read_lists
from instruments.workbook.lists import Lists
from tests.instruments.workbook.accounted import assert_mapping_reads_the_same, assert_no_cell_is_lost
from tests.instruments.workbook.sheets import KINDS

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


@pytest.mark.parametrize("path", LISTS, ids=lambda path: path.name)
def test_no_cell_of_a_fixture_is_lost(path: Path) -> None:
    assert_no_cell_is_lost([path], read(path))


@pytest.mark.parametrize("path", LISTS, ids=lambda path: path.name)
def test_the_same_list_reads_the_same(path: Path) -> None:
    assert_mapping_reads_the_same([path], read(path))
