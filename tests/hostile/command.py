"""The whole command on files that may harm it, and what it left."""

from __future__ import annotations

import hashlib
import json
import re
from pathlib import Path

from config.bench.audits import Done

# Everything but a line end that acts upon a terminal, or turns round or hides what stands beside it.
ACTS = re.compile(
    "[\x00-\x09\x0b-\x1f\x7f-\x9f\u061c\u200b-\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufffe\uffff\U000e0000-\U000e007f]"
)


def whole(folder: Path) -> bool:
    """Whether a folder holds a whole set of outputs: findings.json, and all that it names as it names it."""
    said = json.loads((folder / "findings.json").read_text(encoding="utf-8"))
    return all(
        hashlib.sha256((folder / name).read_bytes()).hexdigest() == digest for name, digest in said["outputs"].items()
    )


def left(folder: Path) -> set[str]:
    """The files of a folder, hidden ones too."""
    return {path.name for path in folder.iterdir()} if folder.is_dir() else set()


def check(done: Done, *, status: int, words: tuple[str, ...], file: Path, folder: Path) -> None:
    """Check how an audit ended: in one message, or in a whole set of outputs; and what it cost."""
    said = done.out + done.err
    assert done.status == status, said
    assert "Traceback" not in said
    assert not ACTS.search(said), repr(said)
    # 30 s and 1 GB for both processes together; on a machine beside which nothing else runs a third of it.
    assert done.cpu_s < 30
    assert done.peak_mb < 500
    if status == 2:
        assert done.out == ""
        assert re.fullmatch(r"audit: [^\n]+\n", done.err), done.err
        assert file.name in done.err
        assert left(folder) == set()
    else:
        assert whole(folder)
        said += (folder / "findings.json").read_text(encoding="utf-8")
    for word in words:
        assert word in said
