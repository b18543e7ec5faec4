"""Workbooks broken by chance, each by a number that breaks it the same way again, and what the audit makes of them."""

from __future__ import annotations

import io
import random
import re
import warnings
import zipfile
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path
from typing import Final

from config.bench.audits import Audits, Done

BEYOND_S: Final = 5.0
"""Seconds that a mutant may take beyond what the sound file takes."""

_ODD_TEXTS: Final = (
    "",
    " ",
    "=1+1",
    "NaN",
    "inf",
    "1e999",
    "9**9**9",
    "-",
    "../../x",
    "<b>",
    "\x1b[31m",
    "0",
    "-1",
    "TBA",
    "#REF!",
    "A" * 32_767,
    "4-20 mA",
    "0-100 barg",
    "PT-101",
    "Tag No.",
    "II 2 G Ex ia IIC T4 Gb",
    "24 VDC",
    "°C",
    "100 %",
    "1,5",
    "1.234,5",
    "2026-12-01",
    "\u202e",
    "\ufeff",
    "'",
    '"',
    "&",
    ",",
    ";",
    "/",
    "\n",
    "\u00b2",
    "(" * 300,
    "1-" * 300,
    "yes",
    "Zone 1 IIC T4",
)
_ODD_BYTES: Final = (
    b"<",
    b">",
    b"&",
    b'"',
    b"\0",
    b"\xff",
    b"</c>",
    b"<c>",
    b'<c r="A1"/>',
    b"<row>",
    b"</row>",
    b"<!--",
    b"<![CDATA[",
    b"]]>",
    b"<!DOCTYPE x>",
    b"&amp;",
    b"&#0;",
    b"&x;",
    b"NaN",
    b"1e999",
    b"-1",
    b"99999999999",
    b' r="XFD1048576"',
    b' t="s"',
    b' t="e"',
    b' s="9999"',
    b' t="d"',
    b"<f>A1</f>",
    b"<is><t>x</t></is>",
    b"<v/>",
    b"\xc3\x28",
    b"\xe2\x80\xae",
)
_TEXT: Final = re.compile(rb"(<t(?: [^<>]*)?>|<v>)([^<]*)(</t>|</v>)")
_ATTRIBUTE: Final = re.compile(rb' [A-Za-z:]+="[^"<>]*"')
_MADE_AT: Final = re.compile(rb"20[0-9]{2}-[0-9]{2}-[0-9]{2}T[0-9:]{8}Z")
_TAG: Final = re.compile(rb"<[^<>]+>")


def mutant(sound: bytes, number: int, *, seed: int = 1) -> bytes:
    """Return a workbook broken in one to three places, in its bytes, its parts, their XML or its cells' values."""
    chance = random.Random(f"{seed}-{number}")  # noqa: S311 - it must come out the same again
    kind = chance.choice((_bytes, _parts, _xml, _xml, _values, _values))
    data = sound
    for _ in range(chance.choice((1, 1, 2, 3))):
        data = kind(data, chance)
    return data


def settled(data: bytes) -> bytes:
    """Return a workbook without the time at which it was made, so that its mutants come out the same again."""
    return _packed([(name, _MADE_AT.sub(b"2026-01-01T00:00:00Z", text)) for name, text in _unpacked(data)])


def _bytes(data: bytes, chance: random.Random) -> bytes:
    found = bytearray(data)
    at = chance.randrange(max(1, len(found)))
    what = chance.randrange(5)
    if what == 0:
        found[at : at + 1] = bytes([chance.randrange(256)])
    elif what == 1:
        del found[at : at + chance.randrange(1, 200)]
    elif what == 2:
        found[at:at] = chance.randbytes(chance.randrange(1, 50))
    elif what == 3:
        del found[at:]
    else:
        found[at : at + 4] = chance.choice((b"\0\0\0\0", b"\xff\xff\xff\xff", b"PK\3\4", b"\xff\xff\xff\x7f"))
    return bytes(found)


def _unpacked(data: bytes) -> list[tuple[str, bytes]]:
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as package:
            return [(info.filename, package.read(info)) for info in package.infolist()]
    except Exception:  # what was broken before
        return []


def _packed(parts: Sequence[tuple[str, bytes]], method: int = zipfile.ZIP_DEFLATED) -> bytes:
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", method) as package, warnings.catch_warnings():
        warnings.simplefilter("ignore")  # a name that stands twice is one of the ways to be broken
        for name, text in parts:
            package.writestr(zipfile.ZipInfo(name), text, method)
    return out.getvalue()


def _parts(data: bytes, chance: random.Random) -> bytes:
    parts = _unpacked(data)
    if not parts:
        return data
    at = chance.randrange(len(parts))
    name, text = parts[at]
    other = chance.choice(parts)
    what = chance.randrange(6)
    if what == 0:
        del parts[at]
    elif what == 1:
        parts[at] = (name, other[1])
    elif what == 2:
        parts[at] = (chance.choice((name.upper(), f"/{name}", name.replace("/", "\\"), f"../{name}", f"{name}x")), text)
    elif what == 3:
        in_utf_16 = text.decode("latin-1").encode("utf-16")
        parts[at] = (name, chance.choice((b"", b"<a/>", text + text, text[: len(text) // 2], in_utf_16)))
    elif what == 4:
        parts.append(
            (chance.choice(("xl/media/x.bin", "xl/vbaProject.bin", "xl/comments1.xml", f"{name}/x")), other[1])
        )
    else:
        chance.shuffle(parts)
    return _packed(parts, chance.choice((zipfile.ZIP_DEFLATED, zipfile.ZIP_STORED)))


def _changed(data: bytes, chance: random.Random, change: Callable[[bytes], bytes], *, sheets: bool = False) -> bytes:
    """Change one part: of the larger ones rather, or of sheets and their texts alone."""
    parts = _unpacked(data)
    fitting = [at for at, (name, _) in enumerate(parts) if not sheets or "sheet" in name or "Strings" in name]
    if not fitting:
        return data
    at = chance.choice(fitting)
    parts[at] = (parts[at][0], change(parts[at][1]))
    return _packed(parts)


def _xml(data: bytes, chance: random.Random) -> bytes:
    def change(text: bytes) -> bytes:
        what = chance.randrange(6)
        if what < 3:
            found = list((_ATTRIBUTE if what == 0 else _TAG).finditer(text))
            if not found:
                return text
            one, other = chance.choice(found), chance.choice(found)
            put = chance.choice((b"", other[0], one[0] + one[0], b" " + other[0] + b" "))
            return text[: one.start()] + put + text[one.end() :]
        at = chance.randrange(len(text) + 1)
        if what == 3:
            return text[:at] + chance.choice(_ODD_BYTES) + text[at:]
        if what == 4:
            return text[:at] + text[at + chance.randrange(1, 60) :]
        end = min(len(text), at + chance.randrange(1, 400))
        return text[:end] + text[at:end] + text[end:]

    return _changed(data, chance, change)


def _values(data: bytes, chance: random.Random) -> bytes:
    def change(text: bytes) -> bytes:
        found = list(_TEXT.finditer(text))
        if not found:
            return text
        pieces = []
        last = 0
        for one in sorted(
            chance.sample(found, min(len(found), chance.choice((1, 3, 30)))), key=lambda each: each.start()
        ):
            odd = chance.choice((*_ODD_TEXTS, chance.choice(found)[2].decode("utf-8", "replace")))
            put = odd.replace("&", "&amp;").replace("<", "&lt;").replace("\x1b", "_x001B_").encode()
            pieces.append(text[last : one.start(2)] + put)
            last = one.end(2)
        return b"".join(pieces) + text[last:]

    return _changed(data, chance, change, sheets=True)


def tried(sound: bytes, numbers: range, folder: Path, *, seed: int = 1) -> Iterator[tuple[int, Done, str]]:
    """Audit the mutants of these numbers: each with how it ended, and what is wrong with that, if anything."""
    with Audits() as audits:
        path = folder / "mutant.xlsx"
        path.write_bytes(sound)
        own_s = audits.run(path, "--to", folder / "sound").cpu_s
        for number in numbers:
            path.write_bytes(mutant(sound, number, seed=seed))
            done = audits.run(path, "--to", folder / "out", at_most_s=20 * (own_s + BEYOND_S))
            yield number, done, wrong(done, own_s=own_s)


def wrong(done: Done, *, own_s: float) -> str:
    """Say what is wrong with how an audit ended; nothing where it is as it should be."""
    said = done.out + done.err
    if "Traceback (most recent call last)" in said:
        return said.strip().rpartition("\n")[2][:300]
    if "the reader broke off" in said or "the reader did not start" in said or "stops the reader" in said:
        return said.strip()[:300]
    if done.late or done.cpu_s > own_s + BEYOND_S:
        return f"took {done.cpu_s:.1f} s of the processor; the sound file takes {own_s:.1f} s"
    if done.status not in (0, 2):
        return f"ended with {done.status}: {said.strip()[-300:]}"
    if done.status == 2 and (done.err.count("\n") != 1 or done.out):
        return f"more than one message: {said.strip()[-300:]}"
    return ""
