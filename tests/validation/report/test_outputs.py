"""Outputs appear whole or not at all."""

import errno
import hashlib
import os
import shutil
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from tests.validation.report.small_audit import RULES, finding, small_audit
from validation.report.exceptions import write_exceptions
from validation.report.outputs import CannotWrite, Outputs

resource = pytest.importorskip("resource", reason="limits on a file's size are POSIX's")


def text(content: str) -> Callable[[Path], None]:
    return lambda path: path.write_bytes(content.encode()) and None


def fail(error: BaseException, content: str = "half") -> Callable[[Path], None]:
    def write(path: Path) -> None:
        path.write_text(content)
        raise error

    return write


def make(folder: Path, files: dict[str, Callable[[Path], None]]) -> None:
    with Outputs(folder) as outputs:
        for name, write in files.items():
            outputs.add(name, write)


def inside(folder: Path) -> dict[str, str]:
    """Return all files of a folder, hidden ones too, with what they hold."""
    return {path.name: path.read_text() if path.is_file() else "a folder" for path in folder.iterdir()}


def test_files_take_their_names_together_at_the_end(tmp_path: Path) -> None:
    folder = tmp_path / "new" / "out"
    with Outputs(folder) as outputs:
        digest = outputs.add("a.txt", text("first"))
        outputs.add("b.txt", text("second"))
        assert not {"a.txt", "b.txt"} & set(inside(folder))
    assert inside(folder) == {"a.txt": "first", "b.txt": "second"}
    assert digest == hashlib.sha256(b"first").hexdigest()
    assert outputs.digests == {"a.txt": digest, "b.txt": hashlib.sha256(b"second").hexdigest()}
    assert [(folder / name).stat().st_mode & 0o777 for name in ("a.txt", "b.txt")] == [0o644, 0o644]


def test_a_file_that_is_to_be_kept_is_not_written_over(tmp_path: Path) -> None:
    (tmp_path / "list.xlsx").write_text("mine")
    (tmp_path / "link.xlsx").symlink_to(tmp_path / "list.xlsx")
    keep = [tmp_path / "list.xlsx", tmp_path / "gone.xlsx"]
    for name in ("list.xlsx", "link.xlsx"):
        with Outputs(tmp_path, keep=keep) as outputs, pytest.raises(CannotWrite, match="is the list that is read"):
            outputs.add(name, text("new"))
    assert inside(tmp_path) == {"list.xlsx": "mine", "link.xlsx": "mine"}
    with Outputs(tmp_path, keep=keep) as outputs:
        outputs.add("gone.xlsx", text("new"))
    assert inside(tmp_path)["gone.xlsx"] == "new"


def test_a_file_that_cannot_be_made_is_left_out(tmp_path: Path) -> None:
    with Outputs(tmp_path) as outputs:
        outputs.add("a.txt", text("first"))
        with pytest.raises(ValueError, match="no"):
            outputs.add("b.txt", fail(ValueError("no")))
        outputs.add("c.txt", text("third"))
    assert inside(tmp_path) == {"a.txt": "first", "c.txt": "third"}
    assert set(outputs.digests) == {"a.txt", "c.txt"}


def test_the_last_added_takes_its_name_last(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    order: list[str] = []
    replace = os.replace
    monkeypatch.setattr(os, "replace", lambda old, new: (order.append(Path(new).name), replace(old, new))[1])
    with Outputs(tmp_path) as outputs:
        for name in ("exceptions.xlsx", "loop-sheets.pdf", "findings.json"):
            outputs.add(name, text(name))
    assert order == ["exceptions.xlsx", "loop-sheets.pdf", "findings.json"]


@pytest.mark.parametrize(
    ("error", "raised", "said"),
    [
        (OSError(errno.ENOSPC, "No space left on device"), CannotWrite, "b.txt: no space left on device"),
        (PermissionError(errno.EACCES, "Permission denied"), CannotWrite, "b.txt: permission denied"),
        (OSError("the writer's own words"), CannotWrite, "b.txt: the writer's own words"),
        (ValueError("a mistake in the writer"), ValueError, "a mistake in the writer"),
        (KeyboardInterrupt(), KeyboardInterrupt, ""),
    ],
)
def test_what_was_there_stays_as_it_was_where_one_fails(
    tmp_path: Path, error: BaseException, raised: type[BaseException], said: str
) -> None:
    (tmp_path / "a.txt").write_text("of yesterday")
    with pytest.raises(raised) as caught:
        make(tmp_path, {"a.txt": text("of today"), "b.txt": fail(error)})
    assert str(caught.value).endswith(said)
    assert inside(tmp_path) == {"a.txt": "of yesterday"}


class Full:
    """A disk that takes so many bytes more: what is written beyond is refused, as by a full one."""

    def __init__(self, size: int) -> None:
        self.size = size

    def __enter__(self) -> None:
        self.before = resource.getrlimit(resource.RLIMIT_FSIZE)
        resource.setrlimit(resource.RLIMIT_FSIZE, (self.size, self.before[1]))

    def __exit__(self, *error: Any) -> None:
        resource.setrlimit(resource.RLIMIT_FSIZE, self.before)


@pytest.mark.parametrize("size", [0, 1, 4096, 9000])
def test_a_disk_that_fills_up_under_the_workbook(tmp_path: Path, size: int, recwarn: pytest.WarningsRecorder) -> None:
    (tmp_path / "exceptions.xlsx").write_text("of yesterday")
    result = small_audit([finding(subject=f"PT-{number}") for number in range(2000)])
    with pytest.raises(CannotWrite, match=r"exceptions\.xlsx: file too large$"), Full(size):
        make(tmp_path, {"exceptions.xlsx": lambda path: write_exceptions(result, path, rules=RULES)})
    assert inside(tmp_path) == {"exceptions.xlsx": "of yesterday"}
    assert [str(warning.message) for warning in recwarn] == []


def test_a_disk_that_fills_up_at_the_very_end(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def full(handle: int) -> None:
        raise OSError(errno.ENOSPC, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(CannotWrite, match=r"a\.txt: no space left on device$"):
        make(tmp_path, {"a.txt": text("whole, but not on the disk")})
    assert inside(tmp_path) == {}


def test_the_folder_is_a_file(tmp_path: Path) -> None:
    (tmp_path / "out").write_text("a list")
    with pytest.raises(CannotWrite, match=r"out: is a file; name a folder with --to$"), Outputs(tmp_path / "out"):
        pass
    with pytest.raises(CannotWrite, match=r"out/deep: not a directory$"), Outputs(tmp_path / "out" / "deep"):
        pass
    assert inside(tmp_path) == {"out": "a list"}


def test_a_file_is_a_folder(tmp_path: Path) -> None:
    (tmp_path / "a.txt").write_text("of yesterday")
    (tmp_path / "b.txt").mkdir()
    with pytest.raises(CannotWrite, match=r"b\.txt: is a folder$") as caught:
        make(tmp_path, {"a.txt": text("of today"), "b.txt": text("of today")})
    assert caught.value.path == tmp_path / "b.txt"
    assert inside(tmp_path) == {"a.txt": "of yesterday", "b.txt": "a folder"}


def test_the_folder_goes_away_meanwhile(tmp_path: Path) -> None:
    folder = tmp_path / "out"
    outputs = Outputs(folder)
    outputs.__enter__()
    outputs.add("a.txt", text("of today"))
    shutil.rmtree(folder)
    with pytest.raises(CannotWrite, match=r"out: no such file or directory$"):
        outputs.__exit__(None, None, None)


def test_what_an_interrupted_run_left_is_cleared(tmp_path: Path) -> None:
    (tmp_path / ".ferrule-xyz.part").write_text("half")
    (tmp_path / ".ferrule-notes.txt").write_text("somebody's own")
    with Outputs(tmp_path) as outputs:
        outputs.add("a.txt", text("whole"))
    assert inside(tmp_path) == {"a.txt": "whole", ".ferrule-notes.txt": "somebody's own"}


def test_two_runs_give_the_same_digests(tmp_path: Path) -> None:
    digests = []
    for folder in ("one", "two"):
        with Outputs(tmp_path / folder) as outputs:
            outputs.add("exceptions.xlsx", lambda path: write_exceptions(small_audit(), path, rules=RULES))
        digests.append(outputs.digests)
        whole = (tmp_path / folder / "exceptions.xlsx").read_bytes()
        assert outputs.digests == {"exceptions.xlsx": hashlib.sha256(whole).hexdigest()}
    assert digests[0] == digests[1]


def test_two_runs_beside_each_other_leave_one_whole_set(tmp_path: Path) -> None:
    (tmp_path / ".ferrule-killed-1.part").write_text("half")
    with Outputs(tmp_path) as first:
        first.add("a.txt", text("of the first"))
        with Outputs(tmp_path) as second:
            second.add("a.txt", text("of the second"))
            second.add("b.txt", text("of the second"))
        assert {name: held for name, held in inside(tmp_path).items() if not name.startswith(".ferrule-")} == {
            "a.txt": "of the second",
            "b.txt": "of the second",
        }
        first.add("b.txt", text("of the first"))
    assert inside(tmp_path) == {"a.txt": "of the first", "b.txt": "of the first"}


WAITS = """
import pathlib, sys, time
from validation.report.outputs import Outputs
with Outputs(pathlib.Path(sys.argv[1])) as outputs:
    outputs.add("a.txt", lambda path: path.write_text("of another process") and None)
    print("ready", flush=True)
    time.sleep(60)
"""


def test_what_a_living_process_writes_stays_and_what_a_killed_one_left_goes(tmp_path: Path) -> None:
    with subprocess.Popen(
        [sys.executable, "-c", WAITS, str(tmp_path)], stdout=subprocess.PIPE, text=True, cwd=Path(__file__).parents[3]
    ) as other:
        assert other.stdout is not None
        assert other.stdout.readline() == "ready\n"
        its = set(inside(tmp_path))
        assert len(its) == 2
        make(tmp_path, {"b.txt": text("mine")})
        assert set(inside(tmp_path)) == {*its, "b.txt"}
        other.kill()
    make(tmp_path, {"b.txt": text("mine again")})
    assert inside(tmp_path) == {"b.txt": "mine again"}


class Killed(BaseException):
    pass


NEW = {"a.txt": "new a", "b.txt": "new b", "last.json": "new last"}
OLD = {"a.txt": "old a", "b.txt": "old b", "last.json": "old last"}


def steps(monkeypatch: pytest.MonkeyPatch, at: int, error: BaseException | None) -> list[str]:
    """Let the n-th renaming or bringing to the disk fail; return what was done, to be looked at afterwards."""
    done: list[str] = []

    def counted(name: str) -> Callable[..., Any]:
        real = getattr(os, name)

        def call(*arguments: Any) -> Any:
            done.append(name)
            if len(done) == at and error is not None:
                raise error
            return real(*arguments)

        return call

    for name in ("replace", "fsync", "unlink"):
        monkeypatch.setattr(os, name, counted(name))
    return done


def all_steps(folder: Path) -> int:
    """How many steps a run takes that replaces an old set."""
    with pytest.MonkeyPatch.context() as patch:
        done = steps(patch, 0, None)
        make(folder, {name: text(held) for name, held in NEW.items()})
    return len(done)


def test_whichever_step_fails_the_old_set_stays_whole(tmp_path: Path) -> None:
    make(tmp_path / "counted", {name: text(held) for name, held in OLD.items()})
    failed = 0
    for at in range(1, all_steps(tmp_path / "counted") + 1):
        folder = tmp_path / str(at)
        make(folder, {name: text(held) for name, held in OLD.items()})
        with pytest.MonkeyPatch.context() as patch:
            steps(patch, at, OSError(errno.EIO, "Input/output error"))
            try:
                make(folder, {name: text(held) for name, held in NEW.items()})
            except CannotWrite as error:
                failed += 1
                assert str(error).endswith(": input/output error")  # noqa: PT017 - not each step's failure is one
                assert inside(folder) == OLD
            else:
                assert {name: held for name, held in inside(folder).items() if not name.startswith(".")} == NEW
        make(folder, {name: text(held) for name, held in NEW.items()})
        assert inside(folder) == NEW
    assert failed > 10


KILLED = """
import os, pathlib, signal, sys
at = int(sys.argv[2])
done = 0
def counted(name):
    real = getattr(os, name)
    def call(*arguments, **named):
        global done
        done += 1
        if done == at:
            os.kill(os.getpid(), signal.SIGKILL)
        return real(*arguments, **named)
    return call
for name in ("replace", "fsync", "unlink", "open"):
    setattr(os, name, counted(name))
from validation.report.outputs import Outputs
with Outputs(pathlib.Path(sys.argv[1])) as outputs:
    for name in ("a.txt", "b.txt", "last.json"):
        outputs.add(name, lambda path: path.write_text("new " + name.partition(".")[0]) and None)
print(done)
"""


def test_killed_at_any_step_the_old_or_the_new_set_is_there_or_the_last_is_missing(tmp_path: Path) -> None:
    found = set()
    for at in range(1, 200):
        folder = tmp_path / str(at)
        make(folder, {name: text(held) for name, held in OLD.items()})
        code = [sys.executable, "-S", "-c", KILLED, str(folder), str(at)]
        done = subprocess.run(code, cwd=Path(__file__).parents[3], capture_output=True, text=True, check=False)
        left = {name: held for name, held in inside(folder).items() if not name.startswith(".ferrule-")}
        if done.returncode == 0:
            assert inside(folder) == NEW
            break
        if "last.json" in left:
            assert left in (OLD, NEW)
        found.add("none" if "last.json" not in left else "old" if left == OLD else "new")
        make(folder, {name: text(held) for name, held in NEW.items()})
        assert inside(folder) == NEW
    else:
        pytest.fail("it never came to its end")
    assert found == {"old", "none", "new"}
