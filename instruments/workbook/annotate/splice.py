"""XML changed in place: where the elements of a part stand in its bytes, and the part with some bytes replaced.

A part that is read and written again comes back in another spelling, without what its reader does not know.
Here the bytes around a change stay what they were.
"""

from __future__ import annotations

import codecs
import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Final
from xml.parsers import expat

from instruments.workbook.plain import MAX_DEPTH, BrokenXml, is_utf8
from instruments.workbook.sheet_look import Edit

__all__ = ["Edit", "Element", "elements", "in_utf8", "spliced", "text_in_xml", "with_attribute", "with_room"]

MOST_ELEMENTS: Final = 300_000
"""Elements of a part that are told; a workbook has at most 64,000 formats, and a sheet few comments."""

_MAIN: Final = frozenset(
    {
        "http://schemas.openxmlformats.org/spreadsheetml/2006/main",
        "http://purl.oclc.org/ooxml/spreadsheetml/main",
    }
)
_ATTRIBUTE: Final = re.compile(rb"""\s+([^\s=>"']+)\s*=\s*("[^"]*"|'[^']*')""")
_NAME: Final = re.compile(rb"<[^\s/>]+")
_TAG: Final = re.compile(rb"""<([^\s/>]+)((?:\s+[^\s=>"']+\s*=\s*(?:"[^"]*"|'[^']*'))*+)\s*(/?)>""")
_DECLARATION: Final = re.compile(r"\A\ufeff?<\?xml[^>]{0,300}\?>")
_NO_XML: Final = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\ud800-\udfff\ufffe\uffff]")
_MARKUP: Final = str.maketrans({"&": "&amp;", "<": "&lt;", ">": "&gt;", '"': "&quot;", "\r": "&#13;"})


@dataclass(slots=True, kw_only=True)
class Element:
    """One element and the bytes that it takes up.

    Attributes
    ----------
    name
        Without its prefix; a name that is not the workbook's own begins with ``~``.
    prefix
        As it is written before names, with the colon; blank where there is none.
    depth
        0 for the outermost.
    start, inside, close, end
        Where its start tag begins and ends, and its end tag: all after `start` are equal where it is
        one tag that closes itself.
    """

    name: str
    prefix: bytes
    depth: int
    attributes: Mapping[str, str]
    start: int
    inside: int = 0
    close: int = 0
    end: int = 0
    closes_itself: bool = False
    children: list[Element] = field(default_factory=list)

    def first(self, name: str) -> Element | None:
        """Return the first child of this name."""
        return next((child for child in self.children if child.name == name), None)

    def moved(self, by: int) -> None:
        """Move it and all in it, where it was read out of its part."""
        self.start, self.inside, self.close, self.end = (
            at + by for at in (self.start, self.inside, self.close, self.end)
        )
        for child in self.children:
            child.moved(by)

    def appended(self, data: bytes, text: bytes) -> Edit:
        """Return the edit that puts `text` behind the last child."""
        if not self.closes_itself:
            return Edit(self.close, self.close, text)
        tag = data[self.start : self.end]
        return Edit(self.start, self.end, opened(tag) + text + closing(tag))


def opened(tag: bytes) -> bytes:
    """Return a tag that closes itself as one that does not.

    >>> opened(b'<row r="5" />')
    b'<row r="5">'
    """
    return tag[: tag.rindex(b"/")].rstrip() + b">"


def closing(tag: bytes) -> bytes:
    """Return the end tag for a start tag.

    >>> closing(b'<x:row r="5"/>')
    b'</x:row>'
    """
    found = _TAG.match(tag)
    return b"</" + (found[1] if found else b"") + b">"


def elements(data: bytes, *, deepest: int = MAX_DEPTH, leaving_out: Sequence[str] = ()) -> Element:
    """Return the outermost element of a part in UTF-8, with those inside it.

    Parameters
    ----------
    data
        The part.
    deepest
        The depth below which nothing is told; 0 is the outermost element alone.
    leaving_out
        Names of elements whose contents are not told.

    Raises
    ------
    BrokenXml
        It is not well-formed, has a DOCTYPE, is nested deeper than any part is, or has more than
        `MOST_ELEMENTS` elements.
    """
    count = 0
    found: list[Element] = []
    path: list[Element] = []
    depth = 0
    left_out: list[int] = []
    parser = expat.ParserCreate("utf-8", " ")

    def start(name: str, attributes: dict[str, str]) -> None:
        nonlocal depth, count
        depth += 1
        if depth > MAX_DEPTH:
            raise BrokenXml("is nested too deeply")
        if depth - 1 > deepest or (left_out and depth - 1 > left_out[0]):
            return
        count += 1
        if count > MOST_ELEMENTS:
            raise BrokenXml(f"has more than {MOST_ELEMENTS:,} elements")
        at = parser.CurrentByteIndex
        tag = _TAG.match(data, at)
        if tag is None:
            raise BrokenXml("has a tag that cannot be told from what it holds")
        space, _, local = name.rpartition(" ")
        prefix, colon, _ = tag[1].rpartition(b":")
        element = Element(
            name=local if space in _MAIN or not space else f"~{local}",
            prefix=prefix + colon,
            depth=depth - 1,
            attributes={key.rpartition(" ")[2]: value for key, value in attributes.items()},
            start=at,
            inside=tag.end(),
            close=tag.end(),
            end=tag.end(),
            closes_itself=bool(tag[3]),
        )
        if path:
            path[-1].children.append(element)
        else:
            found.append(element)
        path.append(element)
        if element.name in leaving_out:
            left_out.append(depth - 1)

    def end(_: str) -> None:
        nonlocal depth
        depth -= 1
        if depth > deepest or (left_out and depth > left_out[0]):
            return
        left_out.clear()
        element = path.pop()
        if not element.closes_itself:
            element.close = parser.CurrentByteIndex
            element.end = data.index(b">", element.close) + 1

    def refused(*_: object) -> None:
        raise BrokenXml("has a DOCTYPE, which no workbook needs")

    parser.StartElementHandler = start
    parser.EndElementHandler = end
    parser.StartDoctypeDeclHandler = refused
    try:
        parser.Parse(data, True)
    except expat.ExpatError as error:
        raise BrokenXml(
            f"is not well-formed XML: {expat.ErrorString(error.code)}, line {error.lineno}, column {error.offset + 1}"
        ) from None
    except (LookupError, ValueError) as error:
        raise BrokenXml(f"cannot be read ({error})") from None
    return found[0]


def with_room(data: bytes) -> bytes:
    """Return a part whose outermost element has an end tag, so that several things can be put into it.

    >>> with_room(b'<styleSheet a="1"/>'), with_room(b"<a><b/></a>")
    (b'<styleSheet a="1"></styleSheet>', b'<a><b/></a>')
    """
    root = elements(data, deepest=0)
    if not root.closes_itself:
        return data
    return b"".join(spliced([data], [root.appended(data, b"")]))


def in_utf8(data: bytes) -> bytes:
    """Return a part in UTF-8, the same bytes where it is already.

    Raises
    ------
    BrokenXml
        It is not in the encoding that it says.
    """
    if is_utf8(data):
        return data
    encoding = "utf-16"
    if data[:2] in (b"<\0", b"\0<"):
        encoding = "utf-16-le" if data[1:2] == b"\0" else "utf-16-be"
    elif data[:2] not in (codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE):
        named = re.search(rb"""encoding\s*=\s*["']([A-Za-z0-9._-]+)""", data[:300])
        encoding = named[1].decode() if named else "utf-8"
    try:
        text = data.decode(encoding)
    except (LookupError, UnicodeError) as error:
        raise BrokenXml(f"is in an encoding that cannot be read ({error})") from None
    declared = '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>'
    return _DECLARATION.sub(declared, text, count=1).removeprefix("\ufeff").encode("utf-8", "replace")


def spliced(pieces: Iterable[bytes], edits: Sequence[Edit]) -> Iterator[bytes]:
    """Return a part with its edits made, piece by piece.

    >>> b"".join(spliced([b"one t", b"wo three"], [Edit(4, 7, b"2"), Edit(13, 13, b"!")]))
    b'one 2 three!'
    """
    waiting = sorted(edits, key=lambda edit: (edit.start, edit.end))
    at = done = 0
    skip_to = 0
    for piece in pieces:
        out: list[bytes] = []
        position = max(0, skip_to - at)
        while done < len(waiting) and waiting[done].start < at + len(piece):
            edit = waiting[done]
            out += (piece[position : edit.start - at], edit.text)
            skip_to = edit.end
            position = edit.end - at
            done += 1
        out.append(piece[position:])
        at += len(piece)
        yield b"".join(out)
    yield b"".join(edit.text for edit in waiting[done:])


def with_attribute(tag: bytes, name: bytes, value: bytes) -> bytes:
    """Return a start tag with one attribute set, the rest of it as it was.

    >>> with_attribute(b'<c r="B7" s="4"/>', b"s", b"12"), with_attribute(b"<c r='B7'>", b"s", b"12")
    (b'<c r="B7" s="12"/>', b'<c r=\\'B7\\' s="12">')
    """
    named = _NAME.match(tag)
    at = named.end() if named else len(tag)
    while found := _ATTRIBUTE.match(tag, at):
        if found[1] == name:
            return tag[: found.start(2)] + b'"' + value + b'"' + tag[found.end(2) :]
        at = found.end()
    end = len(tag) - (2 if tag.endswith(b"/>") else 1)
    return tag[:end].rstrip() + b" " + name + b'="' + value + b'"' + tag[end:]


def text_in_xml(text: str) -> bytes:
    r"""Return a text as it stands in a part, between tags or double quotes; what XML cannot hold is left out.

    >>> text_in_xml('<b> & "\x07"')
    b'&lt;b&gt; &amp; &quot;&quot;'
    """
    return _NO_XML.sub("", text).translate(_MARKUP).encode()
