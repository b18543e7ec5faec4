"""A skip is a skip on a bare machine, and a failure where everything has been installed."""

import os
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

from config import bootstrap

WANTING = """
import pytest

def test_a_tool(tool):
    tool("no-such-program", "no-such-package")

@pytest.mark.skip(reason="marked")
def test_marked():
    pass

@pytest.mark.xfail(strict=True)
def test_known_to_fail():
    assert False

def test_whole():
    pass
"""
MODULE = """
import pytest
pytest.importorskip("no_such_module")
"""


@pytest.mark.parametrize(
    ("required", "counts", "status"),
    [("0", "1 passed, 3 skipped, 1 xfailed", 0), ("1", "1 failed, 1 passed, 1 xfailed, 2 errors", 1)],
)
def test_what_is_missing(tmp_path: Path, required: str, counts: str, status: int) -> None:
    shutil.copy(bootstrap.ROOT / "tests/conftest.py", tmp_path)
    (tmp_path / "test_wanting.py").write_text(WANTING)
    (tmp_path / "test_module.py").write_text(MODULE)
    command = [sys.executable, "-m", "pytest", "-c", os.devnull, "--rootdir", tmp_path, "-ra", tmp_path]
    command += ["-p", "no:cacheprovider", "-p", "no:django", "--continue-on-collection-errors"]
    done = subprocess.run(
        command,
        cwd=tmp_path,
        env=os.environ | {"FERRULE_REQUIRE_ALL": required},
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == status, done.stdout + done.stderr
    assert f" {counts} in " in done.stdout.splitlines()[-1]
    assert "no-such-program is missing: apt-get install no-such-package" in done.stdout
