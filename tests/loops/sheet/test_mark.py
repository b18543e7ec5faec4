"""Content marks: the same for the same content, told apart part by part, kept in a pack and read back from it."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pypdf
import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.plant import Plant
from loops.sheet.content import sheet_content
from loops.sheet.mark import NoMarks, Parts, change_of, mark_of, marks_in, parts_of
from loops.sheet.pack import sheets_of
from loops.sheet.pdf import write_sheets
from tests.loops.sheet.plants import AREAS, LOOP, TERMINATIONS, TRANSMITTER, TYPES, VALVE
from validation.example import example_plant

Row = dict[str, Any]


def plant_of(rows: list[Row] | None = None, **lists: Any) -> Plant:
    given_lists = {"types": TYPES, "areas": AREAS, "loops": [LOOP], "terminations": TERMINATIONS, **lists}
    return example_plant(rows if rows is not None else [TRANSMITTER, *VALVE], **given_lists)


def parts(plant: Plant, notes: list[str] | None = None) -> dict[str, Parts]:
    return {loop.name: parts_of(sheet_content(loop, plant, notes=notes)) for loop in sheets_of(plant).drawn}


def test_the_same_lists_have_the_same_marks_whatever_was_found() -> None:
    assert parts(plant_of()) == parts(plant_of(), notes=["FAULT ELC01 P-101: short by 0.117 V"])


CIRCUIT = "circuit P-101"
CHANGES: list[tuple[dict[str, Any], set[str]]] = [
    ({"H": "8.5"}, {"settings", f"{CIRCUIT}: check"}),
    ({"operating pressure normal": "4 barg"}, {"settings"}),
    ({"URV": "16"}, {"devices", "settings", f"{CIRCUIT}: check"}),
    ({"service": "Other"}, {"title block"}),
    ({"remarks": "See sketch 3"}, {"remarks"}),
    ({"junction box": "JB-2"}, set()),  # the termination list gives the path
    ({"I/O address": "1.1.9"}, {f"{CIRCUIT}: wiring"}),
    ({"system": "SIS"}, {f"{CIRCUIT}: wiring"}),
    ({"serial": "4711"}, set()),  # stands on no sheet
    ({"area": "A2"}, {"title block", f"{CIRCUIT}: wiring", f"{CIRCUIT}: hazardous area"}),
]


@pytest.mark.parametrize(("change", "expected"), CHANGES)
def test_a_change_shows_in_its_part(change: Row, expected: set[str]) -> None:
    before, after = parts(plant_of()), parts(plant_of([{**TRANSMITTER, **change}, *VALVE]))
    found = change_of(after["P-101"], before["P-101"])
    said = set(found.parts) if found else set()
    if "junction box" in change:
        said -= {f"{CIRCUIT}: wiring"}  # the row's own word for it is shown beside the drawing
    assert said == expected
    assert (mark_of(after["P-101"]) == mark_of(before["P-101"])) == (found is None)
    assert after["F-105"] == before["F-105"]


def test_the_cable_changes_the_voltage_budget() -> None:
    before = parts(plant_of())["P-101"]
    after = parts(plant_of(loops=[{**LOOP, "cable length": "900"}]))["P-101"]
    found = change_of(after, before)
    assert found is not None
    assert set(found.parts) == {f"{CIRCUIT}: wiring", f"{CIRCUIT}: voltage budget"}


digests = st.dictionaries(st.sampled_from("abcdef"), st.sampled_from("1234"), max_size=6)


@given(digests, digests)
def test_what_changed_is_what_differs(one: Parts, other: Parts) -> None:
    found = change_of(one, other)
    assert (found is None) == (one == other) == (mark_of(one) == mark_of(other))
    names = {name.partition(" ")[0] for name in found.parts} if found else set()
    assert names == {name for name in {*one, *other} if one.get(name) != other.get(name)}


def test_a_pack_holds_its_marks(tmp_path: Path) -> None:
    plant, path = plant_of(), tmp_path / "a.pdf"
    drawn = write_sheets(plant, path)
    assert marks_in(path) == drawn.marks == parts(plant)
    said = pypdf.PdfReader(path, strict=True).pages[1].extract_text()
    assert f"content mark {mark_of(parts(plant)['F-105'])}" in said


def test_only_what_changed_is_drawn_and_says_what(tmp_path: Path) -> None:
    first, second = tmp_path / "a.pdf", tmp_path / "b.pdf"
    write_sheets(plant_of(), first)
    changed = plant_of([{**TRANSMITTER, "H": "8.5"}, *VALVE[2:], {"tag": "TT-9", "I/O type": "AI", "area": "A1"}])
    drawn = write_sheets(changed, second, before=marks_in(first))
    assert (drawn.loops, drawn.unchanged, drawn.gone) == (2, 1, ("F-105",))
    reader = pypdf.PdfReader(second, strict=True)
    said = [" ".join(page.extract_text().split()) for page in reader.pages]
    assert f"Changed settings, {CIRCUIT}: check" in said[1]
    assert any("Changed new sheet" in text for text in said)
    # All marks are kept, so that the next pack can be compared with this one.
    assert marks_in(second) == parts(changed)


def test_nothing_changed_is_an_empty_pack(tmp_path: Path) -> None:
    write_sheets(plant_of(), tmp_path / "a.pdf")
    drawn = write_sheets(plant_of(), tmp_path / "b.pdf", before=marks_in(tmp_path / "a.pdf"))
    assert (drawn.loops, drawn.unchanged, drawn.gone) == (0, 3, ())


def test_unchanged_content_is_the_same_page_byte_for_byte(tmp_path: Path) -> None:
    pages: list[bytes] = []
    for name, setting in (("a", "8"), ("b", "8.5")):
        path = tmp_path / f"{name}.pdf"
        write_sheets(plant_of([{**TRANSMITTER, "H": setting}, *VALVE]), path)
        contents = pypdf.PdfReader(path).pages[1].get_contents()
        assert contents is not None
        pages.append(contents.get_data())
    assert pages[0] == pages[1]


@pytest.mark.parametrize(
    ("content", "said"),
    [
        (b"%PDF-1.4 nothing", "is no pack of loop sheets, or of an older kind that has no content marks"),
        (b"%PDF-1.4\n<< /Type /FerruleMarks /Length 3 /Filter /FlateDecode >>\nstream\nabc",
         "has content marks that are damaged"),
        (b"not json", "is neither a loop-sheets.pdf nor a findings.json, or is damaged"),
        (b"\xff\xfe\x00", "is neither a loop-sheets.pdf nor a findings.json, or is damaged"),
        (b"[" * 100_000, "is neither a loop-sheets.pdf nor a findings.json, or is damaged"),
        (b"[]", "holds no content marks of loop sheets; name a loop-sheets.pdf or a findings.json"),
        (b'{"sheets": {"P-1": 3}}', "holds no content marks of loop sheets; name a loop-sheets.pdf or a findings.json"),
    ],
)  # fmt: skip
def test_a_file_without_marks_is_named(tmp_path: Path, content: bytes, said: str) -> None:
    path = tmp_path / "old"
    path.write_bytes(content)
    with pytest.raises(NoMarks) as raised:
        marks_in(path)
    assert str(raised.value) == f"{path}: {said}"


def test_findings_hold_marks_too(tmp_path: Path) -> None:
    path = tmp_path / "findings.json"
    path.write_text(json.dumps({"sheets": {"P-1": "0a"}}), encoding="utf-8")
    assert marks_in(path) == {"P-1": "0a"}


def test_the_mark_of_the_whole_tells_that_something_changed() -> None:
    told = parts(plant_of())["P-101"]
    assert change_of(told, mark_of(told)) is None
    assert str(change_of(told, "00000000")) == "content"
