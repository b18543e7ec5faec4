"""Killed at any moment, a full disk, two audits at once: the outputs are whole or not there."""

from __future__ import annotations

import contextlib
import os
import shutil
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

from config.bench.audits import ROOT, Audits
from tests.hostile.command import left, whole
from tests.hostile.files import GOOD, HEADINGS, book, good, with_columns

pytestmark = pytest.mark.skipif(os.name != "posix", reason="processes are forked")

AUDIT = [sys.executable, str(ROOT / "manage.py"), "audit"]


def test_killed_at_any_moment_the_next_run_is_clean(audits: Audits, tmp_path: Path) -> None:
    old, new = tmp_path / "old.xlsx", tmp_path / "new.xlsx"
    old.write_bytes(good())
    new.write_bytes(book([HEADINGS, *GOOD, *(with_columns(**{"Tag No.": f"PT-2{at:02}"}) for at in range(30))]))
    audits.run(old, "--to", tmp_path / "before")
    before = {path.name: path.read_bytes() for path in (tmp_path / "before").iterdir()}
    needed_s = audits.run(new, "--to", tmp_path / "trial").wall_s
    killed = 0
    for step in range(1, 25):
        folder = tmp_path / "out"
        shutil.rmtree(folder, ignore_errors=True)
        shutil.copytree(tmp_path / "before", folder)
        done = audits.run(new, "--to", folder, at_most_s=needed_s * step / 20)
        killed += done.status == -9
        if (folder / "findings.json").exists():
            assert whole(folder)
            if done.status == -9 and (folder / "findings.json").read_bytes() == before["findings.json"]:
                assert {name: (folder / name).read_bytes() for name in before} == before
        if step % 6 == 0:
            assert audits.run(new, "--to", folder).status == 0
            assert left(folder) == set(before)
            assert whole(folder)
    assert killed > 5


@contextlib.contextmanager
def full(folder: Path) -> Iterator[list[str]]:
    """Make a folder on a small disk; where none can be mounted, limit how large a file can become."""
    folder.mkdir()
    mounted = subprocess.run(
        [shutil.which("mount") or "mount", "-t", "tmpfs", "-o", "size=24k", "tmpfs", str(folder)],
        capture_output=True,
        check=False,
    )
    try:
        yield [] if mounted.returncode == 0 else ["sh", "-c", 'ulimit -f 8; exec "$@"', "sh"]
    finally:
        if mounted.returncode == 0:
            subprocess.run([shutil.which("umount") or "umount", str(folder)], capture_output=True, check=True)


def test_a_full_disk_is_told_and_nothing_half_is_left(tmp_path: Path) -> None:
    (tmp_path / "list.xlsx").write_bytes(good())
    with full(tmp_path / "small") as prefix:
        command = [*prefix, *AUDIT, str(tmp_path / "list.xlsx"), "--to", str(tmp_path / "small")]
        done = subprocess.run(command, capture_output=True, text=True, timeout=120, check=False)
        assert (done.returncode, done.stdout) == (2, "")
        assert done.stderr.startswith(f"audit: {tmp_path / 'small'}")
        assert "no space left on device" in done.stderr or "file too large" in done.stderr
        assert done.stderr.count("\n") == 1
        assert left(tmp_path / "small") == set()


def test_two_audits_into_one_folder_leave_one_whole_set(tmp_path: Path) -> None:
    (tmp_path / "one.xlsx").write_bytes(good())
    (tmp_path / "two.xlsx").write_bytes(book([HEADINGS, *GOOD[:2]]))
    runs = [
        subprocess.Popen(
            [*AUDIT, str(tmp_path / name), "--to", str(tmp_path / "out")],
            stdout=subprocess.PIPE,
            stderr=subprocess.PIPE,
        )
        for name in ("one.xlsx", "two.xlsx", "one.xlsx")
    ]
    for run in runs:
        _, err = run.communicate(timeout=120)
        assert (run.returncode, err) == (0, b"")
    assert whole(tmp_path / "out")
    assert not [name for name in left(tmp_path / "out") if name.startswith(".")]
