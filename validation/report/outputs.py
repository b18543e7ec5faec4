"""Writing the outputs: each appears whole or not at all, and a new set takes the place of the old one whole."""

from __future__ import annotations

import contextlib
import hashlib
import os
import sys
import tempfile
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path
from types import TracebackType

if sys.platform == "win32":
    import msvcrt
else:
    import fcntl

_ATTEMPTS = 10


class CannotWrite(Exception):
    """The output folder or a file in it cannot be written; says which and why."""

    def __init__(self, path: Path, reason: str) -> None:
        super().__init__(f"{path}: {reason}")
        self.path = path
        self.reason = reason


class Outputs:
    """A folder's new files, made under other names and put in place together.

    Used as a context manager: left normally, the files take their names; left by an exception, nothing of
    them remains. The file added last, which names the others, is the first of the old set to go and the last of
    the new one to appear: a folder that holds it holds the whole set, even where the run was killed. What a
    killed run left is cleared by the next; what a run beside this one is writing stays.

    Parameters
    ----------
    folder
        Where they go.
    keep
        Files that are never written over: the lists themselves, one of which may be an annotated copy.
    """

    def __init__(self, folder: Path, *, keep: Sequence[Path] = ()) -> None:
        self.folder = folder
        self._keep = keep
        self.digests: dict[str, str] = {}
        self._made: list[tuple[Path, Path]] = []
        self._run: _Run | None = None

    def __enter__(self) -> Outputs:
        if self.folder.exists() and not self.folder.is_dir():
            raise CannotWrite(self.folder, "is a file; name a folder with --to")
        try:
            self.folder.mkdir(parents=True, exist_ok=True)
            _clear(self.folder)
            self._run = _Run(self.folder)
        except OSError as error:
            raise CannotWrite(self.folder, _words(error)) from error
        return self

    def add(self, name: str, write: Callable[[Path], None]) -> str:
        """Let `write` make the file under a passing name; return its SHA-256 digest.

        A file whose writing fails is left out; the others may still take their names.
        """
        assert self._run is not None, "used as a context manager"
        final = self.folder / name
        if final.exists() and any(final.samefile(path) for path in self._keep if path.exists()):
            raise CannotWrite(final, "is the list that is read; name another folder with --to")
        try:
            part = self._run.part()
            self._made.append((part, final))
            try:
                write(part)
            except BaseException:
                self._made.pop()
                part.unlink(missing_ok=True)
                raise
            digest = hashlib.sha256()
            # Open for writing too: Windows brings nothing to the disk through a file opened for reading.
            with part.open("r+b") as file:
                while block := file.read(1 << 20):
                    digest.update(block)
                os.fsync(file.fileno())
            part.chmod(0o644)
        except OSError as error:
            raise CannotWrite(final, _words(error)) from error
        self.digests[name] = digest.hexdigest()
        return self.digests[name]

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        assert self._run is not None
        try:
            if error is None:
                self._take_names(self._run)
        finally:
            for part, _ in self._made:
                with contextlib.suppress(OSError):
                    part.unlink(missing_ok=True)
            self._run.end()

    def _take_names(self, run: _Run) -> None:
        # Before the first takes its name: one that cannot would leave old and new side by side.
        for _, final in self._made:
            if final.is_dir():
                raise CannotWrite(final, "is a folder")
        at = self.folder
        aside: list[tuple[Path, Path]] = []
        placed: list[Path] = []
        try:
            with _alone(self.folder):
                try:
                    for _, final in reversed(self._made):
                        at = final
                        if final.exists():
                            passing = run.name()
                            os.replace(final, passing)
                            aside.append((passing, final))
                            _to_disk(self.folder)
                    for part, final in self._made:
                        at = final
                        _to_disk(self.folder)
                        os.replace(part, final)
                        placed.append(final)
                    at = self.folder
                    _to_disk(self.folder)
                except BaseException:
                    for final in placed:
                        final.unlink(missing_ok=True)
                    for passing, final in reversed(aside):
                        os.replace(passing, final)
                    raise
        except OSError as problem:
            raise CannotWrite(at, _words(problem)) from problem
        for passing, _ in aside:
            with contextlib.suppress(OSError):
                passing.unlink(missing_ok=True)


class _Run:
    """The passing names of one run, told from those of a run that was killed by a file that it keeps locked."""

    def __init__(self, folder: Path) -> None:
        self._folder = folder
        self._names = 0
        for _ in range(_ATTEMPTS):
            self._handle, text = tempfile.mkstemp(prefix=".ferrule-", suffix=".lock", dir=folder)
            self._lock = Path(text)
            # Between its making and its locking, a run that begins may have taken it for one left behind.
            if _locked(self._handle) and self._lock.exists():
                return
            self.end()
        raise OSError("its files cannot be locked")

    def part(self) -> Path:
        """Make an empty file under a passing name."""
        part = self.name()
        part.touch(mode=0o600, exist_ok=False)
        return part

    def name(self) -> Path:
        """Return a passing name that no file has."""
        self._names += 1
        return self._folder / f"{self._lock.stem}-{self._names}.part"

    def end(self) -> None:
        """Give up the lock; nothing is left."""
        _remove(self._lock, self._handle)


def _clear(folder: Path) -> None:
    """Remove what runs left that are no more."""
    locks: dict[str, int | None] = {}
    try:
        for part in folder.glob(".ferrule-*.part"):
            stem = "-".join(part.name.removesuffix(".part").split("-")[:2])
            if stem not in locks:
                locks[stem] = _taken_over(folder / f"{stem}.lock")
            if locks[stem] is not None:
                part.unlink(missing_ok=True)
        for lock in folder.glob(".ferrule-*.lock"):
            if lock.stem not in locks:
                locks[lock.stem] = _taken_over(lock)
    finally:
        for stem, handle in locks.items():
            if handle is not None:
                _remove(folder / f"{stem}.lock", handle)


_NONE = -1


def _taken_over(lock: Path) -> int | None:
    """Return the lock of a run that is no more, held; `_NONE` where it is gone; None where the run lives."""
    try:
        handle = os.open(lock, os.O_RDWR)
    except FileNotFoundError:
        return _NONE
    except OSError:
        return None
    if _locked(handle):
        return handle
    os.close(handle)
    return None


def _remove(lock: Path, handle: int) -> None:
    # Where files can be locked as POSIX does, one goes while it is held; Windows removes none that is open.
    with contextlib.suppress(OSError):
        if os.name == "posix":
            lock.unlink(missing_ok=True)
    if handle != _NONE:
        os.close(handle)
    with contextlib.suppress(OSError):
        if os.name != "posix":
            lock.unlink(missing_ok=True)


def _locked(handle: int) -> bool:
    """Lock a file for as long as it is open, where nobody else has."""
    try:
        if sys.platform == "win32":
            msvcrt.locking(handle, msvcrt.LK_NBLCK, 1)
        else:
            fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except BlockingIOError:
        return False
    except OSError:
        # Windows says so of a lock that is held; elsewhere it is a file system that knows no locks.
        return os.name == "posix"
    return True


@contextlib.contextmanager
def _alone(folder: Path) -> Iterator[None]:
    """Let one run after the other put its files in place, so that no set is made of two."""
    if sys.platform == "win32":  # a folder cannot be opened there
        yield
        return
    handle = os.open(folder, os.O_RDONLY)
    try:
        with contextlib.suppress(OSError):
            fcntl.flock(handle, fcntl.LOCK_EX)
        yield
    finally:
        os.close(handle)


def _to_disk(folder: Path) -> None:
    """Bring the names in a folder to the disk, in the order in which they were given."""
    if os.name == "posix":
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)


def _words(error: OSError) -> str:
    return (error.strerror or str(error)).lower()
