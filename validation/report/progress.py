"""Progress of a long command on a terminal; nothing where the output is no terminal."""

from __future__ import annotations

import time
from types import TracebackType
from typing import Any

from instruments.console import for_console


class Progress:
    """One line that is rewritten: the stage, how far, and the time left where it can be told."""

    def __init__(self, stream: Any) -> None:
        self._stream = stream
        self._shown = bool(getattr(stream, "isatty", lambda: False)())
        self._since = time.monotonic()
        self._last = 0.0
        self._stage = ""

    def __enter__(self) -> Progress:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self._line("")

    def stage(self, name: str) -> None:
        """Begin a stage without a count."""
        self._stage, self._since = name, time.monotonic()
        self._line(f"{name} ...")

    def step(self, stage: str, number: int, of: int, what: str = "") -> None:
        """Show step `number` of `of`; at most ten times a second."""
        now = time.monotonic()
        if stage != self._stage:
            self._stage, self._since = stage, now
        elif now - self._last < 0.1 and number != of:
            return
        self._last = now
        spent = now - self._since
        left = f", {spent / number * (of - number):.0f} s left" if spent > 2 and number else ""
        self._line(f"{stage} {number} of {of} {what}{left}")

    def _line(self, text: str) -> None:
        if self._shown:
            self._stream.write(f"\r\x1b[2K{for_console(text)}", ending="")
            self._stream.flush()
