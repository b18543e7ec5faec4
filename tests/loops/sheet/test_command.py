"""manage.py sheets: from lists to the file, whole or not at all."""

from __future__ import annotations

import io
from pathlib import Path

import pypdf
import pytest
from django.core.management import call_command

LIST = """tag,service,kind,LRV,URV,range unit,signal,wires,I/O type,I/O address
PT-101,Feed pressure,transmitter,0,10,barg,4-20 mA,2,AI,1.1.1
PG-102,Local pressure,gauge,0,10,barg,,,,
"""


def run(*arguments: str) -> tuple[int, str, str]:
    out, err = io.StringIO(), io.StringIO()
    with pytest.raises(SystemExit) as left:
        call_command("sheets", *arguments, stdout=out, stderr=err)
    assert isinstance(left.value.code, int)
    return left.value.code, out.getvalue(), err.getvalue()


@pytest.fixture
def listed(tmp_path: Path) -> Path:
    path = tmp_path / "list.csv"
    path.write_text(LIST, encoding="utf-8")
    return path


def test_it_draws_and_says_where(listed: Path, tmp_path: Path) -> None:
    folder = tmp_path / "new" / "folder"
    status, out, err = run(str(listed), "--to", str(folder))
    assert (status, err) == (0, "")
    assert out == f"1 loop drawn, without an audit; written to {folder / 'loop-sheets.pdf'}\n"
    assert [each.name for each in folder.iterdir()] == ["loop-sheets.pdf"]
    reader = pypdf.PdfReader(folder / "loop-sheets.pdf")
    assert "Drawn without an audit" in reader.pages[1].extract_text()


def test_it_replaces_an_older_file(listed: Path, tmp_path: Path) -> None:
    (tmp_path / "loop-sheets.pdf").write_text("old")
    assert run(str(listed), "--to", str(tmp_path))[0] == 0
    assert (tmp_path / "loop-sheets.pdf").read_bytes().startswith(b"%PDF")


def test_the_plant_s_data_can_stand_in_a_file_of_their_own(listed: Path, tmp_path: Path) -> None:
    (tmp_path / "plant.toml").write_text('name = "Marrowbeck Works"\n', encoding="utf-8")
    assert run(str(listed), "--to", str(tmp_path), "--plant", str(tmp_path / "plant.toml"))[0] == 0
    metadata = pypdf.PdfReader(tmp_path / "loop-sheets.pdf").metadata
    assert metadata is not None
    assert metadata.title == "Loop sheets - Marrowbeck Works"


@pytest.mark.parametrize("content", [None, "", "nothing,here\n1,2\n"])
def test_what_cannot_be_read(tmp_path: Path, content: str | None) -> None:
    path = tmp_path / "other.csv"
    if content is not None:
        path.write_text(content, encoding="utf-8")
    status, out, err = run(str(path), "--to", str(tmp_path / "out"))
    assert (status, out) == (2, "")
    assert err.startswith("sheets: ")
    assert not (tmp_path / "out").exists()


def test_a_folder_that_is_a_file(listed: Path, tmp_path: Path) -> None:
    status, _, err = run(str(listed), "--to", str(listed))
    assert status == 2
    assert err.startswith("sheets: ")


def test_nothing_is_left_where_drawing_fails(listed: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def fails(*arguments: object, **options: object) -> int:
        raise OSError(28, "No space left on device", "part")

    monkeypatch.setattr("loops.sheet.pdf.write_sheets", fails)
    (tmp_path / "out").mkdir()
    (tmp_path / "out" / "loop-sheets.pdf").write_text("old")
    status, _, err = run(str(listed), "--to", str(tmp_path / "out"))
    assert (status, err) == (2, "sheets: part: no space left on device\n")
    assert [each.read_text() for each in (tmp_path / "out").iterdir()] == ["old"]


def test_a_pack_of_one_tag(listed: Path, tmp_path: Path) -> None:
    assert run(str(listed), "--to", str(tmp_path), "--tag", "PT-101")[:2] == (
        0,
        f"1 loop drawn, without an audit; written to {tmp_path / 'loop-sheets.pdf'}\n",
    )


def test_a_pack_of_nothing_is_refused_and_leaves_nothing(listed: Path, tmp_path: Path) -> None:
    status, out, err = run(str(listed), "--to", str(tmp_path / "new"), "--box", "JB-9")
    assert (status, out) == (2, "")
    assert err == "sheets: no loop with a sheet has the junction box JB-9\n"
    assert list((tmp_path / "new").iterdir()) == []


def test_only_what_changed(listed: Path, tmp_path: Path) -> None:
    old, new = tmp_path / "old", tmp_path / "new"
    assert run(str(listed), "--to", str(old))[0] == 0
    pack = str(old / "loop-sheets.pdf")
    status, out, _ = run(str(listed), "--to", str(new), "--changed-since", pack)
    assert (status, out) == (
        0, f"0 loops drawn, without an audit; 1 unchanged and left out; written to {new / 'loop-sheets.pdf'}\n"
    )  # fmt: skip
    status, _, err = run(str(listed), "--to", str(new), "--changed-since", str(listed))
    assert (status, err) == (
        2, f"sheets: {listed}: is neither a loop-sheets.pdf nor a findings.json, or is damaged\n"
    )  # fmt: skip
