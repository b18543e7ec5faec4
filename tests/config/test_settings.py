"""Where the plant's own data lie, how the database is opened, and when a key is made."""

import json
import os
import stat
import subprocess
import sys
from pathlib import Path

import pytest

from config import bootstrap


def start(code: str, data: Path, **environment: str) -> str:
    """Run code under Ferrule's settings with a data folder of its own; return what it prints."""
    done = subprocess.run(
        [sys.executable, "-c", f"import django; django.setup()\n{code}"],
        cwd=bootstrap.ROOT,
        env={"DJANGO_SETTINGS_MODULE": "config.settings", "FERRULE_DATA": str(data), **environment},
        capture_output=True,
        text=True,
        check=False,
    )
    assert (done.returncode, done.stderr) == (0, "")
    return done.stdout.strip()


KEY = "from django.conf import settings; print(settings.SECRET_KEY)"


def test_the_key_is_made_once_for_its_owner_alone(tmp_path: Path) -> None:
    data = tmp_path / "new" / "data"
    key = start(KEY, data)
    assert len(key) >= 50  # what Django's own check of a deployment asks for
    assert start(KEY, data) == key == (data / "secret-key").read_text()
    assert stat.S_IMODE((data / "secret-key").stat().st_mode) == 0o600
    assert [file.name for file in data.iterdir()] == ["secret-key"]
    assert start(KEY, tmp_path / "other") != key


def test_a_key_from_the_environment_is_not_stored(tmp_path: Path) -> None:
    assert start(KEY, tmp_path, FERRULE_SECRET_KEY="from outside") == "from outside"
    assert list(tmp_path.iterdir()) == []


def test_a_start_makes_neither_key_nor_database(tmp_path: Path) -> None:
    start("from django.core.management import call_command; call_command('check')", tmp_path)
    assert list(tmp_path.iterdir()) == []


def test_a_start_needs_no_data_folder(tmp_path: Path) -> None:
    in_the_way = tmp_path / "file"
    in_the_way.touch()
    assert start("print('started')", in_the_way / "data") == "started"


PRAGMAS = """
import json
from django.db import connection
names = ["journal_mode", "synchronous", "foreign_keys", "busy_timeout", "temp_store"]
with connection.cursor() as cursor:
    found = {name: cursor.execute("PRAGMA " + name).fetchone()[0] for name in names}
    statements = []
    connection.connection.set_trace_callback(statements.append)
    from django.db import transaction
    with transaction.atomic():
        pass
print(json.dumps([found, statements]))
"""


def test_the_database_is_opened_for_many_writers(tmp_path: Path) -> None:
    found, statements = json.loads(start(PRAGMAS, tmp_path))
    assert found == {
        "journal_mode": "wal",
        "synchronous": 2,  # FULL
        "foreign_keys": 1,
        "busy_timeout": 20000,
        "temp_store": 2,  # memory
    }
    assert statements[0] == "BEGIN IMMEDIATE"


@pytest.mark.parametrize("given", ["", "somewhere"])
def test_the_data_folder(given: str, tmp_path: Path) -> None:
    code = "from django.conf import settings; print(settings.DATA_DIR)"
    done = subprocess.run(
        [sys.executable, "-c", code],
        cwd=tmp_path,
        env=os.environ
        | {
            "DJANGO_SETTINGS_MODULE": "config.settings",
            "FERRULE_DATA": given,
            "PYTHONPATH": str(bootstrap.ROOT),
        },
        capture_output=True,
        text=True,
        check=True,
    )
    assert Path(done.stdout.strip()) == (tmp_path / given if given else bootstrap.ROOT / ".data")
