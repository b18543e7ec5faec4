"""A marked copy of workbooks of many shapes: marked where it should be, and the same everywhere else."""

import shutil
import subprocess
from collections.abc import Callable
from pathlib import Path

import openpyxl
import pytest

from config import bootstrap
from instruments.workbook.annotate.marked_copy import MarkedCopy, write_marked_copy
from instruments.workbook.reader import read_file
from tests.instruments.workbook.annotate.shapes import (
    BUSY_MARKS,
    BY_HAND,
    BY_OPENPYXL,
    MARKS,
    assert_in_order,
    assert_marked,
    assert_untouched,
    mark,
)

Convert = Callable[[list[Path], Path], None]

LISTS = sorted((bootstrap.ROOT / "fixtures").glob("*/*.xlsx"))


@pytest.mark.parametrize("shape", BY_HAND)
def test_by_hand(shape: str, tmp_path: Path) -> None:
    before, after = tmp_path / "before.xlsx", tmp_path / "after.xlsx"
    before.write_bytes(BY_HAND[shape]())
    assert write_marked_copy(before, after, {"Sheet1": MARKS}, author="Ferrule") == MarkedCopy(cells=8, sheets=1)
    assert_untouched(before, after)
    assert_in_order(after)
    if shape not in ("UTF-16", "strict"):  # which openpyxl cannot read at all
        assert_marked(before, after, {"Sheet1": MARKS})


@pytest.mark.parametrize("shape", BY_OPENPYXL)
def test_by_openpyxl(shape: str, tmp_path: Path) -> None:
    before, after = tmp_path / "before.xlsm", tmp_path / "after.xlsm"
    before.write_bytes(BY_OPENPYXL[shape]())
    assert write_marked_copy(before, after, BUSY_MARKS, author="Ferrule") == MarkedCopy(cells=9, sheets=2)
    assert_untouched(before, after)
    assert_in_order(after)
    assert_marked(before, after, BUSY_MARKS, moved={(42, 2): (41, 0)})


@pytest.mark.parametrize("path", LISTS, ids=lambda path: path.stem)
def test_lists(path: Path, tmp_path: Path) -> None:
    after = tmp_path / path.name
    marks = {
        sheet.name: {
            (row, column): mark() for row in range(0, len(sheet.rows), 7) for column in range(0, sheet.width, 3)
        }
        for sheet in read_file(path)
    }
    found = write_marked_copy(path, after, marks, author="Ferrule")
    assert found.unmarked == ()
    assert_untouched(path, after)
    assert_in_order(after)


@pytest.fixture(scope="module")
def convert(tool: Callable[[str, str], str], tmp_path_factory: pytest.TempPathFactory) -> Convert:
    """Open workbooks with LibreOffice and save them again under another folder."""
    program = tool("soffice", "libreoffice-calc")
    profile = tmp_path_factory.mktemp("profile").as_uri()

    def run(paths: list[Path], folder: Path) -> None:
        command = [program, f"-env:UserInstallation={profile}", "--headless", "--convert-to", "xlsx", "--outdir"]
        done = subprocess.run([*command, str(folder), *map(str, paths)], capture_output=True, text=True, check=False)
        assert done.returncode == 0, done.stdout + done.stderr

    return run


def comments_of(path: Path) -> dict[tuple[str, str], str]:
    book = openpyxl.load_workbook(path)
    return {
        (sheet.title, cell.coordinate): cell.comment.text
        for sheet in book.worksheets
        for row in sheet.iter_rows()
        for cell in row
        if cell.comment
    }


def test_opens_in_another_program(convert: Convert, tmp_path: Path) -> None:
    """Every shape, marked and saved again by LibreOffice, has the values that the list has there, and our comments."""
    folder = tmp_path / "before"
    folder.mkdir()
    marked = {}
    for number, (shape, make) in enumerate((BY_HAND | BY_OPENPYXL).items()):
        path = folder / f"{number}.xlsx"
        path.write_bytes(make())
        marks = BUSY_MARKS if shape in BY_OPENPYXL else {"Sheet1": MARKS}
        marked[path.name] = shape, marks
        write_marked_copy(path, tmp_path / path.name, marks, author="Ferrule")
    for path in LISTS:
        shutil.copy(path, folder)
        marks = {
            sheet.name: {(row, column): mark() for row in range(3, 30, 5) for column in (0, 2)}
            for sheet in read_file(path)
            if sheet.visible
        }
        marked[path.name] = path.stem, marks
        write_marked_copy(path, tmp_path / path.name, marks, author="Ferrule")
    convert([folder / name for name in marked], tmp_path / "old")
    convert([tmp_path / name for name in marked], tmp_path / "new")
    for name, (shape, marks) in marked.items():
        old, new = read_file(tmp_path / "old" / name), read_file(tmp_path / "new" / name)
        for before, after in zip(old, new, strict=True):
            width, height = before.width, len(before.rows)
            assert [row[:width] for row in after.rows[:height]] == before.rows, shape
            assert (after.name, after.merged, after.shapes) == (before.name, before.merged, before.shapes), shape
        assert set(comments_of(tmp_path / "new" / name)) >= set(comments_of(tmp_path / name)) - MERGED, shape
        assert len(comments_of(tmp_path / "new" / name)) >= sum(map(len, marks.values())) - 1, shape


MERGED = {("Sheet1", "F1")}


def test_a_workbook_by_another_program(convert: Convert, tmp_path: Path) -> None:
    """What LibreOffice itself has written, comments of the user's among it, marked."""
    before, after = tmp_path / "other" / "busy.xlsx", tmp_path / "after.xlsx"
    (tmp_path / "busy.xlsx").write_bytes(BY_OPENPYXL["commented"]())
    convert([tmp_path / "busy.xlsx"], tmp_path / "other")
    assert write_marked_copy(before, after, BUSY_MARKS, author="Ferrule") == MarkedCopy(cells=9, sheets=2)
    assert_untouched(before, after)
    assert_in_order(after)
    assert_marked(before, after, BUSY_MARKS, moved={(42, 2): (41, 0)})
    convert([after], tmp_path / "again")
    said = comments_of(tmp_path / "again" / "after.xlsx")
    assert said["Index & <list>", "A3"].startswith("Ask the vendor\nabout this")
    assert "beneath what stands there" in said["Index & <list>", "A3"]
    assert said["Index & <list>", "A5"] == "as built"
