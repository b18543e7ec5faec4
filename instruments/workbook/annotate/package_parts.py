"""A package's own lists, what each part is and what it refers to, and a copy of it with some parts changed."""

from __future__ import annotations

import copy
import os
import posixpath
import struct
import zipfile
from collections.abc import Callable, Iterable
from typing import IO, Final

from instruments.workbook.annotate.splice import elements, in_utf8, spliced, text_in_xml
from instruments.workbook.package import Package
from instruments.workbook.plain import BrokenXml

__all__ = ["Changes", "relations_part"]

TYPES: Final = "[Content_Types].xml"
_RELATIONS: Final = b"http://schemas.openxmlformats.org/package/2006/relationships"
_NEW_RELATIONS: Final = (
    b'<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n<Relationships xmlns="' + _RELATIONS + b'"/>'
)
_NO_TIME: Final = (1980, 1, 1, 0, 0, 0)
"""The same list gives the same copy."""

_LOCAL_HEADER: Final = 30
"""Bytes before a part's name (APPNOTE 4.3.7)."""

_ZIP64_EXTRA: Final = 1


def relations_part(part: str) -> str:
    """Return the name of the part that says what a part refers to.

    >>> relations_part("xl/worksheets/sheet1.xml")
    'xl/worksheets/_rels/sheet1.xml.rels'
    """
    folder, base = posixpath.split(part)
    return f"{folder}/_rels/{base}.rels"


class Changes:
    """What is to be otherwise in the copy of a package.

    Parameters
    ----------
    package : Package
        The package that is copied.
    """

    def __init__(self, package: Package) -> None:
        self._package = package
        self._parts: dict[str, tuple[str, Callable[[], Iterable[bytes]]]] = {}
        self._new_types: dict[str, str] = {}
        self._new_defaults: dict[str, str] = {}

    def part(self, name: str) -> bytes:
        """Return a part in UTF-8, with the changes made so far.

        Raises
        ------
        UnreadableFile, BrokenXml
            There is none, or it cannot be read.
        """
        changed = self._parts.get(name.casefold())
        if changed is not None:
            return b"".join(changed[1]())
        return in_utf8(b"".join(self._package.pieces(name, at_most=self._package.limits.side_part_bytes)))

    def __contains__(self, name: str) -> bool:
        return name.casefold() in self._parts or name in self._package

    def put(self, name: str, pieces: Callable[[], Iterable[bytes]]) -> None:
        """Change a part, or add it."""
        self._parts[name.casefold()] = name, pieces

    def put_bytes(self, name: str, data: bytes) -> None:
        """Change a part, or add it."""
        self.put(name, lambda: (data,))

    def free_name(self, pattern: str) -> str:
        """Return the first name of the form ``xl/comments{}.xml`` that no part has."""
        number = 1
        while pattern.format(number) in self:
            number += 1
        return pattern.format(number)

    def refer(self, part: str, kind: str, target: str, *, spaces: str) -> str:
        """Let a part refer to another, and return the id of this relation.

        Parameters
        ----------
        part, target
            The parts.
        kind
            What the other is to it.
        spaces
            The beginning of the names of such kinds.
        """
        name = relations_part(part)
        data = self.part(name) if name in self else _NEW_RELATIONS
        root = elements(data, deepest=1)
        used = {child.attributes.get("Id") for child in root.children}
        number = 1
        while (made := f"ferrule{number}") in used:
            number += 1
        way = posixpath.relpath(target, posixpath.dirname(part))
        tag = b'<%bRelationship Id="%b" Type="%b" Target="%b"/>' % (
            root.prefix, made.encode(), text_in_xml(f"{spaces}/{kind}"), text_in_xml(way),
        )  # fmt: skip
        self.put_bytes(name, b"".join(spliced([data], [root.appended(data, tag)])))
        return made

    def declare(self, name: str, content_type: str) -> None:
        """Say what a new part is."""
        self._new_types[name] = content_type

    def declare_ending(self, ending: str, content_type: str) -> None:
        """Say what the parts are whose names end so, where it is not said yet."""
        self._new_defaults[ending] = content_type

    def _types(self) -> None:
        if not self._new_types and not self._new_defaults:
            return
        data = self.part(TYPES)
        root = elements(data, deepest=1)
        if root.name.lstrip("~") != "Types":
            raise BrokenXml("does not say what its parts are")
        said = {child.attributes.get("Extension", "").casefold() for child in root.children}
        made = b"".join(
            b'<%bDefault Extension="%b" ContentType="%b"/>' % (root.prefix, ending.encode(), kind.encode())
            for ending, kind in self._new_defaults.items()
            if ending not in said
        ) + b"".join(
            b'<%bOverride PartName="/%b" ContentType="%b"/>' % (root.prefix, text_in_xml(name), kind.encode())
            for name, kind in self._new_types.items()
        )
        self.put_bytes(TYPES, b"".join(spliced([data], [root.appended(data, made)])))

    def write(self, target: str | os.PathLike[str]) -> None:
        """Write the copy: what was not changed as it stands in the file, packed as it was.

        Raises
        ------
        UnreadableFile, BrokenXml
            A part cannot be read.
        OSError
            It cannot be written.
        """
        self._types()
        left = dict(self._parts)
        with open(self._package.path, "rb") as source, zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED) as out:
            for entry in self._package.entries():
                name = entry.filename.replace("\\", "/").lstrip("/").casefold()
                changed = self._parts.get(name)
                if changed is None:
                    _copy(source, entry, out)
                    continue
                made = zipfile.ZipInfo(entry.filename, entry.date_time)
                made.external_attr = entry.external_attr
                _write(out, made, changed[1]())
                del left[name]
            for name, pieces in left.values():
                _write(out, zipfile.ZipInfo(name, _NO_TIME), pieces())


def _write(out: zipfile.ZipFile, entry: zipfile.ZipInfo, pieces: Iterable[bytes]) -> None:
    entry.compress_type = zipfile.ZIP_DEFLATED
    with out.open(entry, "w") as stream:
        for piece in pieces:
            stream.write(piece)


def _copy(source: IO[bytes], entry: zipfile.ZipInfo, out: zipfile.ZipFile) -> None:
    """Copy one part without unpacking it."""
    source.seek(entry.header_offset)
    header = source.read(_LOCAL_HEADER)
    if len(header) < _LOCAL_HEADER or header[:4] != b"PK\3\4":
        raise BrokenXml(f"is damaged where its part {entry.filename} begins")
    name_length, extra_length = struct.unpack_from("<HH", header, 26)
    source.seek(name_length + extra_length, os.SEEK_CUR)
    made = copy.copy(entry)
    # Its sizes are known, so they stand before it, and no longer behind it too.
    made.flag_bits &= ~0x08
    made.extra = _without_zip64(entry.extra)
    stream = out.fp
    assert stream is not None  # it is open
    made.header_offset = out.start_dir
    stream.seek(out.start_dir)
    stream.write(made.FileHeader(zip64=False))
    left = entry.compress_size
    while left:
        piece = source.read(min(left, 1 << 20))
        if not piece:
            raise BrokenXml(f"is cut short in its part {entry.filename}")
        stream.write(piece)
        left -= len(piece)
    out.filelist.append(made)
    out.NameToInfo[made.filename] = made
    out.start_dir = stream.tell()


def _without_zip64(extra: bytes) -> bytes:
    kept = b""
    at = 0
    while at + 4 <= len(extra):
        kind, length = struct.unpack_from("<HH", extra, at)
        if kind != _ZIP64_EXTRA:
            kept += extra[at : at + 4 + length]
        at += 4 + length
    return kept
