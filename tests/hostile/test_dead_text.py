"""Text from a file is never live in an output: no formula, no link, no markup, no script; read back from each."""

from __future__ import annotations

import json
import os
import re
import tomllib
import zipfile
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import pytest
from openpyxl import load_workbook
from pypdf import PdfReader

from config.bench.audits import Audits
from tests.hostile.files import CONTROLS, FORMULAS, MARKUP, PATHS, book, everywhere, in_frame

pytestmark = pytest.mark.skipif(os.name != "posix", reason="processes are forked")

SETS = {"formulas": FORMULAS, "markup": MARKUP, "paths": PATHS, "controls": CONTROLS}
NAMES = {"exceptions.xlsx", "annotated.xlsx", "loop-sheets.pdf", "mapping.toml", "findings.json"}


@pytest.fixture(scope="module", params=SETS)
def folder(request: pytest.FixtureRequest, audits: Audits, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The outputs of a list that holds the texts wherever a text can stand."""
    made = tmp_path_factory.mktemp(request.param)
    texts = SETS[request.param]
    (made / "list.xlsx").write_bytes(book([*in_frame(texts), *everywhere(texts)[1:]]))
    done = audits.run(made / "list.xlsx", "--to", made / "out", at_most_s=300)
    assert done.status == 0, done.err
    assert {path.name for path in made.iterdir()} == {"list.xlsx", "out"}
    return made / "out"


def test_nothing_else_is_written(folder: Path) -> None:
    assert {path.name for path in folder.iterdir()} == NAMES


@pytest.mark.parametrize("name", ["exceptions.xlsx", "annotated.xlsx"])
def test_a_workbook_holds_neither_formula_nor_outer_link(folder: Path, name: str) -> None:
    with zipfile.ZipFile(folder / name) as package:
        assert not [part for part in package.namelist() if re.search("vba|externalLink|embed|activeX", part)]
        for part in package.namelist():
            text = package.read(part)
            root = ElementTree.fromstring(text)  # noqa: S314 - our own
            tags = {element.tag.rpartition("}")[2] for element in root.iter()}
            assert not tags & {"ddeLink", "oleLink", "webPublishItem"}, part
            if part.startswith("xl/worksheets/"):
                assert not tags & {"f", "oleObject", "control"}, part
            if part.endswith(".rels"):
                assert [each.get("Target") for each in root if each.get("TargetMode") == "External"] == [], part


def test_the_cells_of_the_exception_list_are_texts(folder: Path) -> None:
    workbook = load_workbook(folder / "exceptions.xlsx")
    cells = [cell for sheet in workbook for row in sheet.iter_rows() for cell in row]
    kinds = {cell.data_type for cell in cells if cell.value is not None}
    assert kinds <= {"s", "n", "b", "d", "inlineStr"}
    linked = [cell.hyperlink for cell in cells if cell.hyperlink]
    assert [link.target for link in linked if link.target] == []


def test_the_loop_sheets_only_lead_to_their_own_pages(folder: Path) -> None:
    reader = PdfReader(folder / "loop-sheets.pdf")
    assert len(reader.pages) > 1
    actions: set[str] = set()

    def walk(value: Any, depth: int = 0) -> None:
        value = value.get_object() if hasattr(value, "get_object") else value
        if isinstance(value, dict) and depth < 12:
            if "/S" in value and isinstance(value["/S"], str):
                actions.add(value["/S"])
            for key, inner in value.items():
                assert key not in ("/JS", "/JavaScript", "/Launch", "/URI", "/EmbeddedFiles", "/AA", "/OpenAction"), key
                if key not in ("/Parent", "/P", "/Prev", "/Next", "/First", "/Last", "/Dest", "/D"):
                    walk(inner, depth + 1)
        elif isinstance(value, list):
            for inner in value:
                walk(inner, depth + 1)

    for page in reader.pages[:20]:
        walk(page)
    walk({key: value for key, value in reader.trailer["/Root"].items() if key not in ("/Pages", "/Outlines")})
    assert actions <= {"/GoTo", "/Transparency"}


def test_the_texts_of_json_and_toml_are_what_their_readers_read(folder: Path) -> None:
    text = (folder / "findings.json").read_text(encoding="utf-8")
    assert not re.search("[\x00-\x09\x0b-\x1f]", text)
    assert json.loads(text)["counts"]["tags"] > 10
    mapping = (folder / "mapping.toml").read_text(encoding="utf-8")
    assert not re.search("[\x00-\x08\x0b-\x1f\x7f]", mapping)
    assert tomllib.loads(mapping)
