"""Hostile and damaged files, each through the whole command: a clear message or a whole set of outputs."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

import pytest

from config.bench.audits import ROOT, Audits
from tests.hostile.command import check, left, whole
from tests.hostile.files import CANNOT, HOSTILE, Hostile, good

pytestmark = pytest.mark.skipif(os.name != "posix", reason="processes are forked")


@pytest.mark.parametrize("hostile", HOSTILE, ids=lambda each: each.name.replace(" ", "-"))
def test_a_hostile_file(audits: Audits, tmp_path: Path, hostile: Hostile) -> None:
    file = tmp_path / f"list{hostile.ending}"
    hostile.make(file)
    done = audits.run(file, "--to", tmp_path / "out")
    check(done, status=hostile.status, words=hostile.words, file=file, folder=tmp_path / "out")


def test_every_hostile_file_has_a_name_of_its_own() -> None:
    assert len({each.name for each in HOSTILE}) == len(HOSTILE) > 120


@pytest.mark.parametrize(
    ("arguments", "status", "words"),
    [
        (["good.xlsx", "--to", "out"], 0, "written to out"),
        (["good.xlsx", "nothing.xlsx", "--to", "out"], 2, "nothing.xlsx: "),
        (["good.xlsx", "cut.xlsx", "--to", "out"], 2, "cut.xlsx: is damaged or cut short"),
        (["good.xlsx", "--to", "good.xlsx"], 2, "good.xlsx: is a file; name a folder with --to"),
        (["good.xlsx", "--to", "good.xlsx/deeper"], 2, "good.xlsx/deeper: not a directory"),
        (["good.xlsx", "--to", "/proc/nowhere"], 2, "/proc/nowhere: "),
        (["folder", "--to", "out"], 2, "folder: is a folder"),
        (["pipe", "--to", "out"], 2, "pipe: is no ordinary file"),
        (["/dev/zero", "--to", "out"], 2, "/dev/zero: is no ordinary file"),
        (["good.xlsx", "--plant", "pipe", "--to", "out"], 2, "pipe: is no ordinary file"),
        (["good.xlsx", "--plant", "cut.xlsx", "--to", "out"], 2, "cut.xlsx"),
        (["good.xlsx", "--mapping", "pipe", "--to", "out"], 2, "pipe: is no ordinary file"),
        (["good.xlsx", "--mapping", "cut.xlsx", "--to", "out"], 2, "cut.xlsx"),
        (["a\x1b[31mb.xlsx", "--to", "out"], 2, "a<U+001B>[31mb.xlsx"),
        (["good.xlsx", "--to", "o\x1b[31mut"], 0, "written to o<U+001B>[31mut"),
    ],
    ids=lambda value: " ".join(map(repr, value)) if isinstance(value, list) else "",
)
def test_a_command_line_typed_in_full(tmp_path: Path, arguments: list[str], status: int, words: str) -> None:
    held = good()
    (tmp_path / "good.xlsx").write_bytes(held)
    (tmp_path / "cut.xlsx").write_bytes(held[:900])
    (tmp_path / "folder").mkdir()
    os.mkfifo(tmp_path / "pipe")
    before = left(tmp_path)
    command = [sys.executable, str(ROOT / "manage.py"), "audit", *arguments]
    done = subprocess.run(command, cwd=tmp_path, capture_output=True, text=True, timeout=60, check=False)
    assert (done.returncode, "Traceback" in done.stderr) == (status, False), done.stderr
    assert words in done.stdout + done.stderr
    assert "\x1b" not in done.stdout + done.stderr
    if status == CANNOT:
        assert done.stderr.count("\n") == 1
        assert left(tmp_path) == before
        assert (tmp_path / "good.xlsx").read_bytes() == held
    else:
        assert whole(tmp_path / arguments[-1])
