"""Reading in a process of its own: what kills, fills or stops the reader costs that reading, and nothing else."""

from __future__ import annotations

import contextlib
import gc
import os
import pickle
import signal
import subprocess
import sys
import tempfile
import threading
import traceback
from collections.abc import Callable, Iterable, Mapping, Sequence
from pathlib import Path, PurePath
from types import TracebackType
from typing import IO, Any, Final, NoReturn, Self

from instruments.workbook.package import LIMITS, Limits
from instruments.workbook.sheet import Sheet, UnreadableFile

How = Mapping[str, Any]
"""The keyword arguments of `reader.read_file` for one file."""

START: Final = "import sys\nsys.path.insert(0, sys.argv[1])\nfrom instruments.workbook import reading_process as at\n"
SERVE: Final = "at.serve(sys.stdin.buffer, sys.stdout.buffer)"
_ROOT: Final = str(Path(__file__).resolve().parents[2])

# What an answer is made of. A reader that hostile bytes had taken over could otherwise send any command.
_ANSWER: Final = frozenset(
    {
        ("instruments.workbook.sheet", "Sheet"),
        ("instruments.workbook.sheet", "UnreadableFile"),
        ("builtins", "frozenset"),
        ("builtins", "set"),
        ("datetime", "date"),
        ("datetime", "datetime"),
        ("datetime", "time"),
    }
)


def read_apart(
    asked: Sequence[tuple[str | os.PathLike[str], How]],
    *,
    limits: Limits = LIMITS,
    on_file: Callable[[str], None] | None = None,
    meanwhile: Callable[[], object] | None = None,
) -> list[list[Sheet]]:
    """Read files in a process of their own, and return the sheets of each.

    Parameters
    ----------
    asked
        The files, each with the arguments of `reader.read_file` that it is read with.
    limits
        How large a file may be, and how much memory and time its reading may take.
    on_file
        Called with each file's name when its turn comes.
    meanwhile
        Called once while the reading has begun: what takes its time and needs no sheet.

    Raises
    ------
    UnreadableFile
        A file cannot be read; says where and why, also where it was the reader's end.
    """
    with ReadingProcess(asked, limits=limits) as reading:
        if meanwhile is not None:
            meanwhile()
        sheets = []
        for path, _ in asked:
            if on_file is not None:
                on_file(os.fspath(path))
            sheets.append(reading.sheets_of(path))
        return sheets


class ReadingProcess:
    """A process that reads files one after the other while whoever started it does something else.

    A new process costs 0.1 s, and nothing where `meanwhile` would be waited for anyhow; a copy of this one
    (fork) would take its memory and its threads' locks along, and Windows has none. The sheets come back
    through a pipe: of a reading of 50,000 rows by 45 columns this is a twentieth.
    """

    def __init__(self, asked: Sequence[tuple[str | os.PathLike[str], How]], *, limits: Limits = LIMITS) -> None:
        self._limits = limits
        self._late = False
        # A file, not a pipe: nobody reads it before the end.
        self._said = tempfile.TemporaryFile()  # noqa: SIM115 - __exit__ closes it
        try:
            self._process = subprocess.Popen(
                # -P: a zipfile.py in the folder of the lists is not the one to import.
                [sys.executable, "-P", "-c", START + SERVE, _ROOT],
                stdin=subprocess.PIPE,
                stdout=subprocess.PIPE,
                stderr=self._said,
            )
        except BaseException:
            self._said.close()
            raise
        assert self._process.stdin is not None
        assert self._process.stdout is not None
        self._answers: IO[bytes] = self._process.stdout
        # Where it ended at once, there is no answer either, and then it is said why.
        with contextlib.suppress(OSError), self._process.stdin as to_it:
            pickle.dump((limits, [(os.fspath(path), dict(how)) for path, how in asked]), to_it, protocol=5)

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        if self._process.poll() is None:
            self._process.kill()
        self._process.wait()
        self._answers.close()
        self._said.close()

    def sheets_of(self, path: str | os.PathLike[str]) -> list[Sheet]:
        """Wait for the sheets of the next file, which is this one.

        Raises
        ------
        UnreadableFile
            It cannot be read.
        """
        file = os.fspath(path)
        seconds = self._limits.seconds_for(_size(path))
        timer = threading.Timer(seconds, self._stop)
        timer.daemon = True
        timer.start()
        collecting = gc.isenabled()
        gc.disable()  # what is loaded is no garbage, and looking for some among millions of cells takes a second
        try:
            answer = _Answer(self._answers).load()
        except MemoryError:
            raise
        except Exception:
            # Half an answer can make the loader raise nearly anything.
            self._ended(file, seconds)
        finally:
            timer.cancel()
            if collecting:
                gc.enable()
        if isinstance(answer, UnreadableFile):
            raise answer
        sheets: list[Sheet] = answer
        return sheets

    def _stop(self) -> None:
        self._late = True
        self._process.kill()

    def _ended(self, file: str, seconds: float) -> NoReturn:
        """Say why there is no answer."""
        code = 0
        with contextlib.suppress(subprocess.TimeoutExpired):
            code = self._process.wait(2.0)
        self._said.seek(0)
        said = self._said.read(1 << 20).decode(errors="replace")
        if self._late:
            reason = f"was not read within {seconds:.0f} s, as any list of its size is"
        elif "memory allocation of " in said or "MemoryError" in said:
            reason = too_much_memory(file, self._limits)
        elif sys.platform != "win32" and code == -signal.SIGKILL:
            reason = "was being read when the system ended the reader (SIGKILL): mostly the memory was full"
        elif code < 0 or code > 255:  # Windows has no signals and tells its exceptions in large numbers
            reason = f"stops the reader ({_signal(code)}): it is damaged; open it in a spreadsheet and save it anew"
        elif code == 0:
            reason = "cannot be read: the reader's answer is no sheet"
        else:
            last = said.strip().rpartition("\n")[2][:200]
            reason = f"cannot be read: the reader did not start or broke off ({last or code})"
        raise UnreadableFile(file, "", reason) from None


class _Answer(pickle.Unpickler):
    def find_class(self, module: str, name: str, /) -> Any:
        if (module, name) not in _ANSWER:
            raise pickle.UnpicklingError(f"no answer holds {module}.{name}")
        return super().find_class(module, name)


def _size(path: str | os.PathLike[str]) -> int:
    try:
        return os.stat(path).st_size
    except (OSError, ValueError):
        return 0


def _signal(code: int) -> str:
    try:
        return signal.Signals(-code).name
    except ValueError:
        return f"exit status {code}"


def too_much_memory(path: str | os.PathLike[str], limits: Limits) -> str:
    """Return the words for a reading that would take more memory than `Limits.memory_for` allows."""
    return f"takes more than {limits.memory_for(_size(path)) // 1_000_000:,} MB to read, as no list of its size does"


def serve(asked: IO[bytes], answers: IO[bytes]) -> None:
    """Be the process that reads: take what is asked, and answer with the sheets of each file or an error."""
    gc.disable()
    limits, files = pickle.load(asked)  # noqa: S301 - from the process that started this one
    for path, how in files:
        confine(path, limits)
        answer: list[Sheet] | UnreadableFile
        try:
            answer = _read(path, limits, how)
        except UnreadableFile as error:
            answer = error
        except MemoryError:
            answer = UnreadableFile(path, "", too_much_memory(path, limits))
        except Exception as error:
            answer = UnreadableFile(path, "", f"cannot be read: the reader broke off ({_where(error)})")
        pickle.dump(answer, answers, protocol=5)
        answers.flush()


def _read(path: str, limits: Limits, how: How) -> list[Sheet]:
    # Imported here: whoever asks needs no reader.
    from instruments.workbook.reader import read_file

    return read_file(path, limits=limits, **how)


def confine(path: str, limits: Limits) -> None:
    """Limit this process to the memory and time that the reading of a file may take, where the platform can."""
    if sys.platform == "win32":
        return
    import resource

    size = _size(path)
    wanted: Iterable[tuple[int, int]] = (
        (resource.RLIMIT_AS, limits.memory_for(size)),
        # A deadline of its own, for where the process that would stop it has been killed.
        (resource.RLIMIT_CPU, int(_seconds_had() + 2 * limits.seconds_for(size) + 1)),
        (resource.RLIMIT_CORE, 0),
    )
    for limit, most in wanted:
        _, hard = resource.getrlimit(limit)
        # Some systems know a limit and refuse to set it; the deadline remains.
        with contextlib.suppress(OSError, ValueError):
            resource.setrlimit(limit, (most if hard == resource.RLIM_INFINITY else min(most, hard), hard))


def _seconds_had() -> float:
    """Return the processor's seconds that this process has had."""
    spent = os.times()
    return spent.user + spent.system


def _where(error: Exception) -> str:
    """Say what an error is and where it was raised, in one line."""
    last = traceback.extract_tb(error.__traceback__)[-1]
    said = " ".join(str(error).split())[:200]
    return f"{type(error).__name__} in {PurePath(last.filename).name}, line {last.lineno}: {said}"
