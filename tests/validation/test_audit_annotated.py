"""manage.py audit: the annotated copies among its outputs."""

from __future__ import annotations

import hashlib
import io
import json
import shutil
import zipfile
from pathlib import Path

import openpyxl
import pytest
from django.core.management import call_command

from config import bootstrap
from instruments.workbook.reader import read_file

GASWORKS = bootstrap.ROOT / "fixtures/lists/gasworks.csv"
TOLUENE = bootstrap.ROOT / "fixtures/lists/toluene-index.xlsx"
WATER = bootstrap.ROOT / "fixtures/lists/water-works.xlsx"


def run(*arguments: object) -> tuple[int, list[str], str]:
    out, err = io.StringIO(), io.StringIO()
    with pytest.raises(SystemExit) as left:
        call_command("audit", *map(str, arguments), "--no-sheets", stdout=out, stderr=err)
    assert isinstance(left.value.code, int)
    return left.value.code, out.getvalue().splitlines(), err.getvalue()


def findings(folder: Path) -> dict[str, set[str]]:
    """The cells that the findings name, by file and sheet."""
    said = json.loads((folder / "findings.json").read_text(encoding="utf-8"))
    for name, digest in said["outputs"].items():
        assert hashlib.sha256((folder / name).read_bytes()).hexdigest() == digest
    found: dict[str, set[str]] = {}
    for each in said["findings"]:
        for cell in each["cells"]:
            found.setdefault(f"{Path(cell['file']).name} {cell['sheet']}", set()).add(cell["cell"])
    return found


def commented(path: Path) -> dict[str, set[str]]:
    book = openpyxl.load_workbook(path)
    cells = {
        sheet.title: {cell.coordinate for row in sheet.iter_rows() for cell in row if cell.comment}
        for sheet in book.worksheets
    }
    return {sheet: found for sheet, found in cells.items() if found}


def test_one_workbook(tmp_path: Path) -> None:
    status, out, err = run(WATER, "--to", tmp_path)
    assert (status, err) == (0, "")
    assert {path.name for path in tmp_path.iterdir()} == {
        "annotated.xlsx", "exceptions.xlsx", "findings.json", "mapping.toml",
    }  # fmt: skip
    marked = commented(tmp_path / "annotated.xlsx")
    cells = sum(map(len, marked.values()))
    # One cell has a comment that was there before, and nothing else.
    assert f"annotated.xlsx: {cells - 1} cells marked on 1 sheet" in out
    for place, named in findings(tmp_path).items():
        assert marked[place.partition(" ")[2]] >= named
    assert [sheet.rows for sheet in read_file(tmp_path / "annotated.xlsx")] == [
        sheet.rows for sheet in read_file(WATER)
    ]


def test_the_same_list_gives_the_same_copy(tmp_path: Path) -> None:
    for folder in ("one", "two"):
        run(WATER, "--to", tmp_path / folder)
    assert (tmp_path / "one/annotated.xlsx").read_bytes() == (tmp_path / "two/annotated.xlsx").read_bytes()


def test_delimited_text(tmp_path: Path) -> None:
    status, out, err = run(GASWORKS, "--to", tmp_path)
    assert (status, err) == (0, "")
    (marked,) = commented(tmp_path / "annotated.xlsx").values()
    (named,) = findings(tmp_path).values()
    assert marked >= named
    assert f"annotated.xlsx: {len(marked)} cells marked on 1 sheet" in out
    assert read_file(tmp_path / "annotated.xlsx")[0].rows == read_file(GASWORKS)[0].rows


def test_several_lists_have_a_copy_each(tmp_path: Path) -> None:
    macros = tmp_path / "water.xlsm"
    shutil.copy(WATER, macros)
    status, out, _ = run(macros, GASWORKS, "--to", tmp_path / "out")
    assert status == 0
    assert out[-1].endswith(
        "exceptions.xlsx, water.annotated.xlsm, gasworks.annotated.xlsx, mapping.toml, findings.json"
    )
    assert all((tmp_path / "out" / name).exists() for name in ("water.annotated.xlsm", "gasworks.annotated.xlsx"))


def test_none_is_made_where_none_is_asked_for(tmp_path: Path) -> None:
    status, out, _ = run(WATER, "--to", tmp_path, "--no-annotated")
    assert status == 0
    assert not (tmp_path / "annotated.xlsx").exists()
    assert not any("marked" in line for line in out)


def test_a_copy_that_is_mended_and_audited_again(tmp_path: Path) -> None:
    run(WATER, "--to", tmp_path / "one")
    first = commented(tmp_path / "one/annotated.xlsx")
    status, _, _ = run(tmp_path / "one/annotated.xlsx", "--to", tmp_path / "two")
    assert status == 0
    assert commented(tmp_path / "two/annotated.xlsx") == first
    one, two = (openpyxl.load_workbook(tmp_path / name / "annotated.xlsx") for name in ("one", "two"))
    for sheet, cells in first.items():
        for cell in cells:
            assert two[sheet][cell].comment.text == one[sheet][cell].comment.text.replace("water-works", "annotated")


def test_a_list_is_never_written_over(tmp_path: Path) -> None:
    listed = tmp_path / "annotated.xlsx"
    shutil.copy(WATER, listed)
    before = listed.read_bytes()
    status, out, err = run(listed, "--to", tmp_path)
    assert (status, out) == (2, [])
    assert err == f"audit: {listed}: is the list that is read; name another folder with --to\n"
    assert [path.name for path in tmp_path.iterdir()] == ["annotated.xlsx"]
    assert listed.read_bytes() == before


def test_a_list_that_cannot_be_marked_has_all_other_outputs(tmp_path: Path) -> None:
    """A workbook that says nowhere what its parts are can be read, and opened by no spreadsheet."""
    listed = tmp_path / "toluene.xlsx"
    with zipfile.ZipFile(TOLUENE) as package, zipfile.ZipFile(listed, "w") as out:
        for name in package.namelist():
            if name != "[Content_Types].xml":
                out.writestr(name, package.read(name))
    status, said, _ = run(listed, "--to", tmp_path / "out")
    assert status == 0
    assert f"no annotated copy of {listed}: part [Content_Types].xml is missing" in said
    assert {path.name for path in (tmp_path / "out").iterdir()} == {"exceptions.xlsx", "findings.json", "mapping.toml"}
