"""manage.py audit: the mapping that a run leaves, given back with the same list and with the next revision."""

from __future__ import annotations

import hashlib
import io
import json
import re
from pathlib import Path

import pytest
from django.core.management import call_command

LIST = """Lakeside Works;;;;
Tag No.;Service;von;bis;Zeichen
PT-101;feed;0;10,5 barg;rot
PT-102;return;0;16 barg;blau
PT-103;reflux;0;6 barg;
"""
NEXT = """Lakeside Works;;;;;
Revision C;;;;;
Tag No.;Zeichen;Service;von;bis;IP Code
PT-101;PT-101A;feed;0;10,5 barg;IP66
PT-104;;top;0;1 barg;IP66
"""


def run(*arguments: object) -> tuple[int, str, str]:
    out, err = io.StringIO(), io.StringIO()
    with pytest.raises(SystemExit) as left:
        call_command("audit", *map(str, arguments), "--no-sheets", "--no-annotated", stdout=out, stderr=err)
    assert isinstance(left.value.code, int)
    return left.value.code, out.getvalue(), err.getvalue()


@pytest.fixture
def listed(tmp_path: Path) -> Path:
    path = tmp_path / "rev-b.csv"
    path.write_text(LIST, encoding="utf-8")
    return path


def test_a_mapping_is_left_and_listed_with_its_digest(listed: Path, tmp_path: Path) -> None:
    status, out, err = run(listed, "--to", tmp_path / "out")
    assert (status, err) == (0, "")
    assert out.endswith("exceptions.xlsx, mapping.toml, findings.json\n")
    mapping = tmp_path / "out" / "mapping.toml"
    said = json.loads((tmp_path / "out" / "findings.json").read_text(encoding="utf-8"))
    assert said["outputs"]["mapping.toml"] == hashlib.sha256(mapping.read_bytes()).hexdigest()


def test_mended_and_given_back_with_the_next_revision(listed: Path, tmp_path: Path) -> None:
    run(listed, "--to", tmp_path / "one")
    text = (tmp_path / "one" / "mapping.toml").read_text(encoding="utf-8")
    entry = 'cell = "E2", heading = "Zeichen", field = "none",'
    assert text.count(entry) == 1
    mended = tmp_path / "mended.toml"
    mended.write_text(text.replace(entry, entry.replace('"none"', '"former tag"')), encoding="utf-8")
    following = tmp_path / "rev-c.csv"
    following.write_text(NEXT, encoding="utf-8")
    status, out, err = run(following, "--to", tmp_path / "two", "--mapping", mended)
    assert status == 0
    assert err.splitlines() == [
        "mapping: rev-c.csv is read as rev-b.csv was mapped",
        "mapping: rev-c.csv, sheet 'rev-c': column F 'IP Code' is new: taken for IP code (synonym)",
    ]
    assert "heading guessed" not in out
    said = json.loads((tmp_path / "two" / "findings.json").read_text(encoding="utf-8"))
    assert [each["file"] for each in said["audit"]["files"]] == [str(following), str(mended)]
    again = (tmp_path / "two" / "mapping.toml").read_text(encoding="utf-8")
    assert 'cell = "B3", heading = "Zeichen", field = "former tag", how = "mapping", likely = 1.00 },' in again


def test_a_threshold_that_no_rule_has_is_told_with_the_nearest(listed: Path, tmp_path: Path) -> None:
    plant = tmp_path / "plant.toml"
    plant.write_text('"RNG08 low %" = 10\n"RNG08 hihg %" = 80\n"RGN08 low %" = 5\n"ZZZ99 x" = 1\n', encoding="utf-8")
    status, _, err = run(listed, "--to", tmp_path / "out", "--plant", plant)
    assert status == 0
    assert err.splitlines() == [
        "plant: RNG08 hihg % = 80: no rule has a threshold of this name; the nearest: RNG08 high %",
        "plant: RGN08 low % = 5: no plant setting has this name; the nearest: RNG08 low %, ELC low failure mA",
        "plant: ZZZ99 x = 1: no plant setting has this name",
    ]


def test_what_would_let_more_be_checked_is_said(listed: Path, tmp_path: Path) -> None:
    _, out, _ = run(listed, "--to", tmp_path / "out")
    (catalogue,) = (line for line in out.splitlines() if "a device catalogue" in line)
    assert re.fullmatch(
        r"not checked: a device catalogue, with a column 'device type' in the index, "
        r"would let \d+ rules check \d+ more: ELC01 3, ELC02 3, .*",
        catalogue,
    )


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        ('field = "service"', 'field = "servise"', "Instruments has no field 'servise'; the nearest: service"),
        ('field = "service"', 'field = "tag"', "tag is read from column A ('Tag No.', line {tag}) already"),
    ],
)
def test_a_mapping_that_contradicts_is_refused_with_its_line(
    listed: Path, tmp_path: Path, old: str, new: str, said: str
) -> None:
    run(listed, "--to", tmp_path / "one")
    mapping = tmp_path / "one" / "mapping.toml"
    lines = mapping.read_text(encoding="utf-8").splitlines()
    number = next(at for at, line in enumerate(lines, start=1) if old in line)
    tag = next(at for at, line in enumerate(lines, start=1) if 'heading = "Tag No."' in line)
    mapping.write_text("\n".join(lines).replace(old, new), encoding="utf-8")
    status, out, err = run(listed, "--to", tmp_path / "two", "--mapping", mapping)
    assert (status, out) == (2, "")
    begin = f"audit: {mapping}, line {number}, heading 'Service' of rev-b.csv, sheet 'rev-b': "
    assert err.startswith(begin + said.format(tag=tag))
    assert err.count("\n") == 1
    assert not (tmp_path / "two").exists()


def test_a_what_if_is_said_after_the_audit(listed: Path, tmp_path: Path) -> None:
    changes = tmp_path / "what-if.toml"
    changes.write_text('[[change]]\nrows = "PT-103"\nset = { LRV = "3 barg", URV = "3 barg" }\n', encoding="utf-8")
    status, out, _ = run(listed, "--to", tmp_path / "out", "--what-if", changes)
    lines = out.splitlines()
    said = lines[lines.index("what if:") :]
    assert status == 0
    assert said[1].startswith("  Instruments PT-103: LRV becomes 3 barg, URV becomes 3 barg (was LRV ")
    assert any(line.startswith("  fault RNG01 PT-103: ") for line in said)
    assert any(line.startswith("findings that go: ") for line in said)
    # The outputs are those of the list as it is.
    told = json.loads((tmp_path / "out" / "findings.json").read_text(encoding="utf-8"))
    assert "RNG01" not in {each["rule"] for each in told["findings"]}


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ('[[change]]\nrows = "PT-9"\nset = { URV = "1 barg" }\n', "no row of Instruments is PT-9"),
        ('[[change]]\nrows = "PT-101"\nset = { colour = "red" }\n', "Instruments has no column colour"),
        ('[[change]]\nrows = "PT-101"\nset = { URV = "wide" }\n', "URV cannot be 'wide'"),
        ("[[change", "it is no TOML"),
    ],
)
def test_a_what_if_that_cannot_be_is_refused_before_anything_is_written(
    listed: Path, tmp_path: Path, text: str, says: str
) -> None:
    changes = tmp_path / "what-if.toml"
    changes.write_text(text, encoding="utf-8")
    status, _, err = run(listed, "--to", tmp_path / "out", "--what-if", changes)
    assert (status, err.startswith(f"audit: {changes}: {says}")) == (2, True)
    assert not (tmp_path / "out").exists()


def test_a_what_if_that_is_not_there_is_said(listed: Path, tmp_path: Path) -> None:
    status, _, err = run(listed, "--to", tmp_path / "out", "--what-if", tmp_path / "none.toml")
    assert status == 2
    assert "none.toml" in err
