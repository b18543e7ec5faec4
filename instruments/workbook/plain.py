"""XML as it may be written, read, or rewritten as it usually is, for the patterns and for the value reader.

A workbook's parts may be in UTF-16, use prefixes, single quotes, comments or CDATA, and leave out where a
cell stands. Hardly any does, so the quick look at a sheet takes the usual spelling for granted, and what is
spelt otherwise goes through here first; the value reader gets the same rewritten text, as it loses text in
CDATA and reads UTF-16 as an empty sheet.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator, Mapping
from typing import Final
from xml.parsers import expat

from instruments.workbook.sheet import MAX_COLUMNS, MAX_ROWS, cell_address, cell_position

MAX_TOKEN: Final = 8 << 20
"""The longest single tag or run of text that is read (a cell holds 32,767 characters)."""

MAX_DEPTH: Final = 200

_MAIN: Final = frozenset(
    {
        "",
        "http://schemas.openxmlformats.org/spreadsheetml/2006/main",
        "http://purl.oclc.org/ooxml/spreadsheetml/main",
    }
)
_XML_SPACE: Final = "http://www.w3.org/XML/1998/namespace space"
_IN_TEXT: Final = str.maketrans({"&": "&amp;", "<": "&lt;", ">": "&gt;", "\r": "&#13;"})
_IN_ATTRIBUTE: Final = _IN_TEXT | str.maketrans({'"': "&quot;", "\n": "&#10;", "\t": "&#9;"})
_ENCODING: Final = re.compile(rb"""\A(?:\xef\xbb\xbf)?<\?xml[^>]{0,200}?encoding\s*=\s*["']([A-Za-z0-9._-]+)["']""")
_CODED: Final = re.compile("_x([0-9A-Fa-f]{4})_")

Start = Callable[[str, Mapping[str, str]], None]


class BrokenXml(Exception):
    """A part that is no well-formed XML, or that asks for what a workbook never needs."""


def is_utf8(head: bytes) -> bool:
    """Whether a part that begins so is in UTF-8."""
    if head[:2] in (b"\xff\xfe", b"\xfe\xff", b"<\0", b"\0<"):
        return False
    named = _ENCODING.match(head)
    return named is None or named[1].lower() in (b"utf-8", b"utf8", b"us-ascii", b"ascii")


def without_codes(text: str) -> str:
    r"""Return a text with the ``_x000D_`` of ECMA-376-1 22.9.2.19 put back as the characters they stand for.

    >>> without_codes("4_x002D_20 mA_x005F_x0041_")
    '4-20 mA_x0041_'
    """
    return _CODED.sub(lambda code: chr(int(code[1], 16)), text) if "_x" in text else text


class XmlReader:
    """Reads XML piece by piece and calls handlers; names have no namespace, foreign ones begin with ``~``.

    Parameters
    ----------
    start, end, text : callables, optional
        Called with name and attributes, with the name, with a run of text.
    keep_space : bool
        Whether ``xml:space`` stands among the attributes.
    bare : bool
        Whether only the form of the XML is looked at, five times as fast: no handler, no limit to its depth.

    Raises
    ------
    BrokenXml
        It is not well-formed, has a DOCTYPE (and so could have entities), is nested deeper than `MAX_DEPTH`
        or has a tag or text longer than `MAX_TOKEN`.
    """

    def __init__(
        self,
        *,
        start: Start | None = None,
        end: Callable[[str], None] | None = None,
        text: Callable[[str], None] | None = None,
        keep_space: bool = False,
        bare: bool = False,
    ) -> None:
        self._start, self._end, self._keep_space = start, end, keep_space
        self._names: dict[str, str] = {}
        self._depth = 0
        self._since_tag = 0
        self._parser = expat.ParserCreate(namespace_separator=None if bare else " ")
        self._parser.StartDoctypeDeclHandler = self._refused
        if bare:
            return
        self._parser.buffer_text = True
        self._parser.StartElementHandler = self._started
        self._parser.EndElementHandler = self._ended
        if text is not None:
            self._parser.CharacterDataHandler = text

    def feed(self, piece: bytes) -> None:
        """Read the next piece."""
        # A token that does not end is looked at again with every piece: refused before that takes long.
        found = piece.rfind(b">")
        self._since_tag = self._since_tag + len(piece) if found < 0 else len(piece) - found
        if self._since_tag > MAX_TOKEN:
            raise BrokenXml(f"has a tag or text of more than {MAX_TOKEN:,} bytes")
        self._parse(piece, last=False)

    def close(self) -> None:
        """Say that there is no more."""
        self._parse(b"", last=True)

    def _parse(self, piece: bytes, *, last: bool) -> None:
        try:
            self._parser.Parse(piece, last)
        except expat.ExpatError as error:
            raise BrokenXml(
                f"is not well-formed XML: {expat.ErrorString(error.code)},"
                f" line {error.lineno}, column {error.offset + 1}"
            ) from None
        except (LookupError, ValueError) as error:
            raise BrokenXml(f"is in an encoding that cannot be read ({error})") from None

    def _started(self, name: str, attributes: dict[str, str]) -> None:
        self._depth += 1
        if self._depth > MAX_DEPTH:
            raise BrokenXml("is nested too deeply")
        if self._start is None:
            return
        space = attributes.pop(_XML_SPACE, None)
        found = {key.rpartition(" ")[2]: value for key, value in attributes.items()}
        if space is not None and self._keep_space:
            found["xml:space"] = space
        self._start(self._names.get(name) or self._plain(name), found)

    def _ended(self, name: str) -> None:
        self._depth -= 1
        if self._end is not None:
            self._end(self._names.get(name) or self._plain(name))

    def _plain(self, name: str) -> str:
        space, _, local = name.rpartition(" ")
        self._names[name] = local if space in _MAIN else f"~{local}"
        return self._names[name]

    def _refused(self, *_: object) -> None:
        raise BrokenXml("has a DOCTYPE, which no workbook needs and which can make a small file fill the memory")


def read_xml(
    pieces: Iterable[bytes],
    *,
    start: Start | None = None,
    end: Callable[[str], None] | None = None,
    text: Callable[[str], None] | None = None,
) -> None:
    """Read XML from first to last piece; see `XmlReader`."""
    reader = XmlReader(start=start, end=end, text=text)
    for piece in pieces:
        reader.feed(piece)
    reader.close()


def well_formed(pieces: Iterable[bytes]) -> Iterator[bytes]:
    """Pass the pieces of a part on, and find out whether it is well-formed.

    Patterns and the value reader read on where a tag is broken, and what stood in one cell is then part of the
    text of another, or gone.

    Raises
    ------
    BrokenXml
        As `XmlReader`, once the pieces have been passed on.
    """
    reader = XmlReader(bare=True)
    for piece in pieces:
        yield piece
        reader.feed(piece)
    reader.close()


def rewritten(pieces: Iterable[bytes]) -> Iterator[bytes]:
    """Return XML in the usual spelling: UTF-8, double quotes, no prefix, no comment, all cells addressed.

    Raises
    ------
    BrokenXml
        As `XmlReader`, or a row or cell has an address that is none.
    """
    out: list[str] = []
    path: list[str] = []
    row = column = -1

    def start(name: str, attributes: Mapping[str, str]) -> None:
        nonlocal row, column
        parent = path[-1] if path else ""
        path.append(name)
        if parent == "sheetData" and name == "row":
            row, column = _row(attributes.get("r"), after=row), -1
            attributes = {"r": str(row + 1)} | {key: value for key, value in attributes.items() if key != "r"}
        elif parent == "row" and name == "c":
            row, column = _cell(attributes.get("r"), row=row, after=column)
            address = cell_address(row, column)
            attributes = {"r": address} | {key: value for key, value in attributes.items() if key != "r"}
        written = "".join(f' {key}="{value.translate(_IN_ATTRIBUTE)}"' for key, value in attributes.items())
        out.append(f"<{name.replace('~', 'other-')}{written}>")

    def end(name: str) -> None:
        path.pop()
        if name == "c" and out[-1].startswith("<c "):
            out[-1] = f"{out[-1][:-1]}/>"  # an open cell would count as one with something in it
        else:
            out.append(f"</{name.replace('~', 'other-')}>")

    reader = XmlReader(start=start, end=end, text=lambda found: out.append(found.translate(_IN_TEXT)), keep_space=True)
    for piece in pieces:
        reader.feed(piece)
        if len(out) > 1:
            yield "".join(out[:-1]).encode()
            del out[:-1]
    reader.close()
    yield "".join(out).encode()


def _row(address: str | None, *, after: int) -> int:
    if address is None:
        row = after + 1
    elif re.fullmatch("[0-9]{1,8}", address, re.ASCII):
        row = int(address) - 1
    else:
        raise BrokenXml(f"has a row numbered {address[:40]!r}")
    if not 0 <= row < MAX_ROWS:
        raise BrokenXml(f"has a row {row + 1}, and a sheet ends at row {MAX_ROWS}")
    return row


def _cell(address: str | None, *, row: int, after: int) -> tuple[int, int]:
    if address is None:
        if after + 1 >= MAX_COLUMNS:
            raise BrokenXml(f"has more than {MAX_COLUMNS} cells in row {row + 1}")
        return row, after + 1
    position = cell_position(address)
    if position is None:
        raise BrokenXml(f"has a cell at {address[:40]!r}, which no sheet has")
    return position
