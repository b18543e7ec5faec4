"""Many whole audits, each in a process of its own, forked from one that has imported everything already."""

from __future__ import annotations

import contextlib
import importlib
import json
import os
import signal
import subprocess
import sys
import tempfile
import time
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from types import TracebackType
from typing import IO, Any, Final, Self

ROOT: Final = Path(__file__).resolve().parents[2]
_SERVE: Final = "import sys; sys.path.insert(0, sys.argv[1]); from config.bench.audits import serve; serve()"


@dataclass(frozen=True, slots=True, kw_only=True)
class Done:
    """How an audit ended."""

    status: int
    """The exit status; less than 0 where a signal ended it."""
    out: str
    err: str
    cpu_s: float
    """Of the processor, the reading process included: another program beside it costs none."""
    wall_s: float
    peak_mb: float
    """The most that the command, or the process that reads for it, held at once."""
    late: bool = False
    """Whether it was ended because it took too long."""


class Audits:
    """Runs `manage.py audit` again and again; a context manager. POSIX only.

    Parameters
    ----------
    root
        The folder of the manage.py that is run.
    """

    def __init__(self, root: Path = ROOT) -> None:
        self._process = subprocess.Popen(
            [sys.executable, "-P", "-c", _SERVE, str(root)], stdin=subprocess.PIPE, stdout=subprocess.PIPE
        )

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        assert self._process.stdin is not None
        assert self._process.stdout is not None
        self._process.stdin.close()
        self._process.stdout.close()
        if kind is not None:
            self._process.kill()
        self._process.wait()

    def run(self, *arguments: str | os.PathLike[str], at_most_s: float = 120.0) -> Done:
        """Run one audit with these arguments, ended where it takes more seconds than so many."""
        assert self._process.stdin is not None
        assert self._process.stdout is not None
        asked = {"arguments": [os.fspath(each) for each in arguments], "at_most_s": at_most_s}
        self._process.stdin.write(json.dumps(asked).encode() + b"\n")
        self._process.stdin.flush()
        return Done(**json.loads(self._process.stdout.readline()))


def serve() -> None:
    """Be the process from which the audits are forked: a line of JSON in, a line out, for each."""
    os.environ.setdefault("DJANGO_SETTINGS_MODULE", "config.settings")
    import django

    from instruments.unit_table import unit
    from validation.management.commands import audit
    from validation.rule import load_rules

    django.setup()
    for late in ("loops.sheet.pdf", "validation.report.exceptions", "validation.report.sheet_notes"):
        importlib.import_module(late)
    unit("bar")
    load_rules()
    answers = os.fdopen(os.dup(1), "wb")
    os.dup2(2, 1)
    for line in sys.stdin.buffer:
        asked = json.loads(line)
        answers.write(json.dumps(_forked(audit.Command, asked["arguments"], asked["at_most_s"])).encode() + b"\n")
        answers.flush()


def _forked(command: Any, arguments: Sequence[str], at_most_s: float) -> dict[str, Any]:
    with tempfile.TemporaryFile() as out, tempfile.TemporaryFile() as err:
        since = time.monotonic()
        child = os.fork()
        if not child:
            _command(command, arguments, out, err)
        late = False
        while True:
            pid, status, used = os.wait4(child, os.WNOHANG)
            if pid:
                break
            if time.monotonic() - since > at_most_s and not late:
                late = True
                os.killpg(child, signal.SIGKILL)
            time.sleep(0.005)
        wall_s = time.monotonic() - since
        with contextlib.suppress(OSError):
            os.killpg(child, signal.SIGKILL)  # what it started and left
        return {
            "status": os.waitstatus_to_exitcode(status),
            "out": _text(out),
            "err": _text(err),
            "cpu_s": used.ru_utime + used.ru_stime,
            "wall_s": wall_s,
            "peak_mb": used.ru_maxrss / 1024,
            "late": late,
        }


def _text(file: IO[bytes]) -> str:
    file.seek(0)
    return file.read().decode(errors="surrogateescape")


def _command(command: Any, arguments: Sequence[str], out: IO[bytes], err: IO[bytes]) -> None:
    """Be the command, from its arguments to its exit status."""
    os.setsid()
    with open(os.devnull, "rb") as nothing:
        os.dup2(nothing.fileno(), 0)
    os.dup2(out.fileno(), 1)
    os.dup2(err.fileno(), 2)
    status = 70
    try:
        command().run_from_argv(["manage.py", "audit", *arguments])
        status = 0
    except SystemExit as error:
        status = error.code if isinstance(error.code, int) else 1
    except BaseException:
        import traceback

        traceback.print_exc()
    finally:
        with contextlib.suppress(Exception):
            sys.stdout.flush()
            sys.stderr.flush()
        os._exit(status)
