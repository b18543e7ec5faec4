"""The command that runs every test: it is pytest, wherever it is started from."""

import subprocess
import sys
from pathlib import Path

import pytest

from config import bootstrap

MANAGE = [sys.executable, bootstrap.ROOT / "manage.py", "test"]


def start(folder: Path, *arguments: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run([*MANAGE, *arguments], cwd=folder, capture_output=True, text=True, check=False)


def test_options_and_paths_are_pytests(tmp_path: Path) -> None:
    done = start(tmp_path, "tests/config/test_bootstrap.py", "-k", "stamp_tells_pythons_apart", "-v")
    assert done.returncode == 0, done.stdout + done.stderr
    assert "test_the_stamp_tells_pythons_apart PASSED" in done.stdout
    assert " 1 passed" in done.stdout.splitlines()[-1]


@pytest.mark.parametrize(
    ("arguments", "status"),
    [
        (
            ("tests/config/test_bootstrap.py", "-k", "called_by_no_name"),
            pytest.ExitCode.NO_TESTS_COLLECTED,
        ),
        (("tests/config/test_test.py", "--no-such-option"), pytest.ExitCode.USAGE_ERROR),
    ],
)
def test_the_status_is_pytests(tmp_path: Path, arguments: tuple[str, ...], status: int) -> None:
    assert start(tmp_path, *arguments).returncode == status


@pytest.mark.parametrize("option", ["-h", "--help"])
def test_help_is_the_commands_own(tmp_path: Path, option: str) -> None:
    done = start(tmp_path, option)
    assert done.returncode == 0
    assert done.stdout.startswith("usage: manage.py test [argument of pytest ...]")
    assert "Runs every test with pytest." in done.stdout
