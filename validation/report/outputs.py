"""Writing the outputs: each appears whole or not at all, findings.json last."""

from __future__ import annotations

import hashlib
import os
import tempfile
from collections.abc import Callable, Sequence
from pathlib import Path
from types import TracebackType


class CannotWrite(Exception):
    """The output folder or a file in it cannot be written; says which and why."""

    def __init__(self, path: Path, reason: str) -> None:
        super().__init__(f"{path}: {reason}")
        self.path = path
        self.reason = reason


class Outputs:
    """A folder's new files, made under other names and put in place together.

    Used as a context manager: left normally, the files take their names in the order in which they
    were added; left by an exception, nothing of them remains.

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

    def __enter__(self) -> Outputs:
        if self.folder.exists() and not self.folder.is_dir():
            raise CannotWrite(self.folder, "is a file; name a folder with --to")
        try:
            self.folder.mkdir(parents=True, exist_ok=True)
            for left in self.folder.glob(".ferrule-*.part"):
                left.unlink(missing_ok=True)
        except OSError as error:
            raise CannotWrite(self.folder, _words(error)) from error
        return self

    def add(self, name: str, write: Callable[[Path], None]) -> str:
        """Let `write` make the file under a passing name; return its SHA-256 digest.

        A file whose writing fails is left out; the others may still take their names.
        """
        final = self.folder / name
        if final.exists() and any(final.samefile(path) for path in self._keep if path.exists()):
            raise CannotWrite(final, "is the list that is read; name another folder with --to")
        try:
            handle, text = tempfile.mkstemp(prefix=".ferrule-", suffix=".part", dir=self.folder)
            os.close(handle)
            part = Path(text)
            self._made.append((part, self.folder / name))
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
            raise CannotWrite(self.folder / name, _words(error)) from error
        self.digests[name] = digest.hexdigest()
        return self.digests[name]

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        if error is not None:
            self._discard()
            return
        try:
            # Before the first takes its name: one that cannot would leave old and new side by side.
            for _, final in self._made:
                if final.is_dir():
                    raise CannotWrite(final, "is a folder")
            for part, final in self._made:
                os.replace(part, final)
            if os.name == "posix":  # elsewhere a folder cannot be opened
                folder = os.open(self.folder, os.O_RDONLY)
                try:
                    os.fsync(folder)
                finally:
                    os.close(folder)
        except OSError as problem:
            self._discard()
            raise CannotWrite(self.folder, _words(problem)) from problem
        except CannotWrite:
            self._discard()
            raise

    def _discard(self) -> None:
        for part, _ in self._made:
            part.unlink(missing_ok=True)


def _words(error: OSError) -> str:
    return (error.strerror or str(error)).lower()
