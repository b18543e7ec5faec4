"""The look at a .xlsx package before anything reads its values: what it holds, and whether it may be read.

The value reader takes the process with it where one cell at XFD1048576 makes it ask for 100 GB, gives error
values and formulas without a result as blanks, and knows neither what is struck out nor what is hidden. So
sizes, counts and extents are looked at first, and what it does not tell is gathered on the way.
"""

from __future__ import annotations

import copy
import functools
import os
import posixpath
import re
import struct
import tempfile
import zipfile
import zlib
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from types import TracebackType
from typing import IO, Final, NamedTuple, Self, TypeVar

from instruments.workbook.number_format import BUILT_IN, format_kind
from instruments.workbook.plain import BrokenXml, is_utf8, read_xml, rewritten, well_formed, without_codes
from instruments.workbook.sheet import UnreadableFile, cell_position
from instruments.workbook.sheet_look import (
    Looks,
    NotPlain,
    Run,
    SheetLook,
    altered,
    first_misfit,
    look,
    runs_of,
)

WORKBOOK: Final = "xl/workbook.xml"
STYLES: Final = "xl/styles.xml"
TEXTS: Final = "xl/sharedStrings.xml"


@dataclass(frozen=True, slots=True, kw_only=True)
class Limits:
    """How large a file may be: 200,000 tags by 45 columns unpack to about 510 MB and are 9 million cells."""

    file_bytes: int = 100_000_000
    unpacked_bytes: int = 600_000_000
    ratio: int = 200
    """Unpacked over packed, for parts of more than 16 MB: a sheet has about 10, one full of equal texts more."""
    parts: int = 2_000
    side_part_bytes: int = 50_000_000
    """A part other than a sheet or its texts: styles, comments, drawings."""
    dense_cells: int = 4_000_000
    """Rows times columns up to which a sheet may be as empty as it likes."""
    cells: int = 20_000_000
    """Rows times columns of all sheets together, blank ones included."""
    memory_bytes: int = 600_000_000
    memory_per_byte: int = 25
    """What the reading process may take, and how much more for each byte of the file: 200,000 tags by 45 columns
    without a blank are 52 MB and take 1.1 GB."""
    seconds: float = 20.0
    seconds_per_mb: float = 5.0
    """How long a reading may take, and how much longer for each million bytes of the file: ten times what it does."""

    def memory_for(self, file_bytes: int) -> int:
        """Return the bytes that the reading of a file of this size may take."""
        return self.memory_bytes + self.memory_per_byte * file_bytes

    def seconds_for(self, file_bytes: int) -> float:
        """Return the seconds that the reading of a file of this size may take."""
        return self.seconds + self.seconds_per_mb * file_bytes / 1e6


LIMITS: Final = Limits()

_READ_ERRORS: Final = (
    zipfile.BadZipFile,
    zlib.error,
    struct.error,
    EOFError,
    OSError,
    NotImplementedError,
    RuntimeError,
    ValueError,
    LookupError,
    OverflowError,
)


Found = TypeVar("Found")


class Relation(NamedTuple):
    """What a part refers to: the kind of it, and where it is."""

    kind: str
    target: str
    usual: bool
    """Whether the way to it is written as the value reader expects."""


class SheetEntry(NamedTuple):
    """A sheet as the workbook lists it."""

    name: str
    visible: bool
    part: str
    number: int
    """Its place among all sheets, those without cells (charts) included."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Contents:
    """What the workbook's own part lists."""

    sheets: Sequence[SheetEntry]
    from_1904: bool = False
    """Whether days are counted from 1904-01-01."""
    styles: str | None = None
    texts: str | None = None
    usual: bool = True
    """Whether the value reader finds all of it by itself."""


@dataclass(slots=True, kw_only=True)
class SeenSheet:
    """A sheet of the package with all that was seen of it."""

    entry: SheetEntry
    look: SheetLook
    comments: dict[tuple[int, int], str] = field(default_factory=dict)
    shapes: int = 0
    notes: list[str] = field(default_factory=list)
    rewritten: bool = False
    """Whether its XML is spelt otherwise than usual, and the value reader gets it in the usual spelling."""
    text_count: int = 0
    """How many shared texts its cells may refer to."""


@dataclass(slots=True, kw_only=True)
class Seen:
    """What was seen of a workbook, and what the value reader is to read."""

    sheets: list[SeenSheet]
    copy: IO[bytes] | None = None
    """What it gets in place of the file: the sheets, in the usual spelling and without what stops it."""
    far: list[tuple[int, list[tuple[int, int]]]] = field(default_factory=list)
    """Sheets added to the copy, one for each with cells far from its list: its number and their places."""

    def index(self, number: int) -> int:
        """The place, in what the value reader gets, of the sheet with this number."""
        return number if self.copy is not None else self.sheets[number].entry.number


class Package:
    """An open .xlsx or .xlsm file.

    Parameters
    ----------
    path : path
        The file.
    file : str
        Its name for messages.
    limits : Limits
        How large it may be.

    Raises
    ------
    UnreadableFile
        It is no such package, is larger than the limits, has a password, or is damaged.
    """

    def __init__(self, path: str | os.PathLike[str], *, file: str, limits: Limits = LIMITS) -> None:
        self.path = path
        self.file = file
        self.limits = limits
        self.usual = True
        """Whether the parts are named as the value reader expects."""
        try:
            self._directory_is_small(path)
            self._zip = zipfile.ZipFile(path)
        except _READ_ERRORS as error:
            raise self._unreadable("", f"is damaged or cut short ({_said(error)})") from None
        try:
            self._parts = self._checked()
        except BaseException:
            self._zip.close()
            raise

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self._zip.close()

    def _unreadable(self, place: str, reason: str) -> UnreadableFile:
        return UnreadableFile(self.file, place, reason)

    def _directory_is_small(self, path: str | os.PathLike[str]) -> None:
        # The list of parts is taken into memory whole, a hundred bytes on disk becoming a thousand: so its
        # size is read first, from the record at the end of the file (APPNOTE 6.3.10, 4.3.14 to 4.3.16).
        with open(path, "rb") as stream:
            size = stream.seek(0, os.SEEK_END)
            stream.seek(max(0, size - 66_000))
            end = stream.read()
            at = end.rfind(b"PK\5\6")
            if at < 0 or len(end) < at + 22:
                raise zipfile.BadZipFile("its end is missing")
            sizes = [struct.unpack_from("<I", end, at + 12)[0]]
            if at >= 20 and end[at - 20 : at - 16] == b"PK\6\7":
                stream.seek(struct.unpack_from("<Q", end, at - 12)[0])
                record = stream.read(56)
                if record[:4] == b"PK\6\6" and len(record) == 56:
                    sizes = [struct.unpack_from("<Q", record, 40)[0]]
        if max(sizes) > self.limits.parts * 1_000:
            raise self._unreadable("", f"has more parts than a workbook: at most {self.limits.parts:,} are read")

    def _checked(self) -> dict[str, zipfile.ZipInfo]:
        parts: dict[str, zipfile.ZipInfo] = {}
        limits = self.limits
        entries = self._zip.infolist()
        if len(entries) > limits.parts:
            raise self._unreadable("", f"has {len(entries):,} parts; at most {limits.parts:,} are read")
        unpacked = 0
        for info in entries:
            name = _part_name(info.filename)
            self.usual = self.usual and name == info.filename.casefold()
            if name in parts:
                raise self._unreadable(f"part {name}", "stands twice in the file")
            if info.flag_bits & 0x41:
                raise self._unreadable("", "is protected by a password: save it without one")
            if info.compress_type not in (zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED):
                raise self._unreadable(f"part {name}", "is packed in a way no workbook is")
            unpacked += info.file_size
            if info.file_size > 16_000_000 and info.file_size > limits.ratio * max(1, info.compress_size):
                raise self._unreadable(
                    f"part {name}",
                    f"unpacks to {info.file_size:,} bytes, more than {limits.ratio} times its size",
                )
            parts[name] = info
        if unpacked > limits.unpacked_bytes:
            raise self._unreadable("", f"unpacks to {unpacked:,} bytes; at most {limits.unpacked_bytes:,} are read")
        if WORKBOOK not in parts:
            raise self._unreadable("", _what_it_is(self._zip, parts))
        return parts

    def __contains__(self, name: str) -> bool:
        return _part_name(name) in self._parts

    def entries(self) -> list[zipfile.ZipInfo]:
        """Return the parts in the order in which they stand in the file's directory."""
        return self._zip.infolist()

    def pieces(self, name: str, *, at_most: int | None = None) -> Iterator[bytes]:
        """Return a part, unpacked, piece by piece; its length and check sum are those that the file says."""
        info = self._parts.get(_part_name(name))
        if info is None:
            raise self._unreadable(f"part {name}", "is missing")
        if at_most is not None and info.file_size > at_most:
            raise self._unreadable(f"part {name}", f"is {info.file_size:,} bytes long; at most {at_most:,} are read")
        # zipfile stops at the length that the file says, the value reader does not: one byte more tells.
        asked = copy.copy(info)
        asked.file_size = info.file_size + 1
        length = 0
        try:
            with self._zip.open(asked) as stream:
                while piece := stream.read(1 << 20):
                    length += len(piece)
                    if length > info.file_size:
                        break
                    yield piece
        except _READ_ERRORS as error:
            raise self._unreadable(f"part {name}", f"is damaged ({_said(error)})") from None
        if length != info.file_size:
            raise self._unreadable(f"part {name}", "is damaged (its length is not what the file says)")

    def read(
        self,
        name: str,
        *,
        start: Callable[[str, Mapping[str, str]], None],
        end: Callable[[str], None] | None = None,
        text: Callable[[str], None] | None = None,
    ) -> None:
        """Read a part other than a sheet or its texts."""
        try:
            read_xml(self.pieces(name, at_most=self.limits.side_part_bytes), start=start, end=end, text=text)
        except BrokenXml as error:
            raise self._unreadable(f"part {name}", str(error)) from None

    def relations(self, name: str) -> dict[str, Relation]:
        """Return what a part refers to inside the file, by id."""
        folder, base = posixpath.split(name)
        found: dict[str, Relation] = {}
        part = f"{folder}/_rels/{base}.rels"

        def start(element: str, attributes: Mapping[str, str]) -> None:
            if element.lstrip("~") == "Relationship" and attributes.get("TargetMode") != "External":
                target = attributes.get("Target", "").replace("\\", "/")
                joined = posixpath.normpath(posixpath.join("/", folder, target)).lstrip("/")
                kind = attributes.get("Type", "").rpartition("/")[2]
                # The value reader goes from xl/ or, after a slash, from the top, and knows no other turns.
                found[attributes.get("Id", "")] = Relation(
                    kind, joined, attributes.get("Target", "") in (f"/{joined}", joined.removeprefix("xl/"))
                )

        if part in self:
            self.read(part, start=start)
        return found

    def in_utf8(self, name: str) -> bool:
        """Whether a part is in UTF-8."""
        return is_utf8(next(self.pieces(name), b""))


def look_at(package: Package) -> Seen:
    """Look at every sheet of a package.

    Raises
    ------
    UnreadableFile
        A part is missing, damaged or too large, or a sheet reaches too far to be read.
    """
    contents = read_contents(package)
    struck, formats, fills = read_styles(package, contents.styles) if contents.styles else (frozenset(), {}, {})
    texts: Mapping[bytes, Sequence[Run]] = {}
    text_count = 0
    texts_rewritten = False
    if contents.texts:
        (texts, text_count), texts_rewritten = _spelt(
            package,
            contents.texts,
            f"part {contents.texts}",
            functools.partial(rich_texts, every=bool(struck)),
        )
    looks = Looks(
        struck=struck,
        formats=formats,
        dates=frozenset(style for style, code in formats.items() if format_kind(code) == "date"),
        texts=texts,
        fills=fills,
    )
    room = package.limits.cells
    seen = Seen(sheets=[])
    for entry in contents.sheets:
        sheet, was_rewritten = _spelt(
            package,
            entry.part,
            f"sheet {entry.name!r}",
            functools.partial(look, looks=looks, dense=package.limits.dense_cells, room=room),
        )
        room -= sheet.height * sheet.width
        found = SeenSheet(entry=entry, look=sheet, rewritten=was_rewritten, text_count=text_count)
        _beside(package, found)
        seen.sheets.append(found)
    usual = (
        contents.usual
        and not texts_rewritten
        and not any(found.rewritten or found.look.edits or found.look.far for found in seen.sheets)
    )
    if not usual:
        seen.copy = tempfile.TemporaryFile()  # noqa: SIM115 - the reader closes it
        try:
            _write_copy(package, contents, seen, texts_rewritten=texts_rewritten)
        except BaseException:
            seen.copy.close()
            raise
    return seen


def _spelt(package: Package, part: str, place: str, work: Callable[[Iterable[bytes]], Found]) -> tuple[Found, bool]:
    """Do a work over a part in the usual spelling, rewritten where it must be, and say whether it was."""
    try:
        try:
            return work(well_formed(package.pieces(part))), False
        except NotPlain:
            return work(rewritten(package.pieces(part))), True
    except NotPlain:
        raise UnreadableFile(package.file, place, "is not what a sheet or its texts look like") from None
    except BrokenXml as error:
        raise UnreadableFile(package.file, place, str(error)) from None


def find_misfit(package: Package, sheet: SeenSheet) -> tuple[str, str] | None:
    """Return the address of the first cell that stops the value reader, and what is wrong with it."""
    pieces = package.pieces(sheet.entry.part)
    spelt = rewritten(pieces) if sheet.rewritten else pieces
    return first_misfit(altered(spelt, sheet.look, far=[]), text_count=sheet.text_count)


def read_contents(package: Package) -> Contents:
    """Read which sheets a workbook has and where its styles and texts are."""
    relations = package.relations(WORKBOOK)
    listed: list[Mapping[str, str]] = []
    from_1904 = False

    def start(name: str, attributes: Mapping[str, str]) -> None:
        nonlocal from_1904
        if name == "sheet":
            listed.append(attributes)
        elif name == "workbookPr":
            from_1904 = attributes.get("date1904") in ("1", "true")

    package.read(WORKBOOK, start=start)
    usual = (
        package.usual
        and "_rels/.rels" in package
        and package.in_utf8(WORKBOOK)
        and package.in_utf8("xl/_rels/workbook.xml.rels")
    )
    sheets: list[SheetEntry] = []
    for index, attributes in enumerate(listed):
        name = attributes.get("name", "")
        if any(entry.name == name for entry in sheets):
            raise UnreadableFile(package.file, f"sheet {name!r}", "there are two of this name")
        relation = relations.get(attributes.get("id", ""))
        if relation is None or relation.target not in package:
            raise UnreadableFile(package.file, f"sheet {name!r}", "its part is missing")
        if relation.kind == "worksheet":
            sheets.append(SheetEntry(name, attributes.get("state", "visible") == "visible", relation.target, index))
            usual = usual and relation.usual
    styles = _standing(package, relations, "styles", STYLES)
    texts = _standing(package, relations, "sharedStrings", TEXTS)
    for target, standard in ((styles, STYLES), (texts, TEXTS)):
        if target is not None:
            usual = usual and target.casefold() == standard.casefold() and package.in_utf8(target)
    return Contents(sheets=sheets, from_1904=from_1904, styles=styles, texts=texts, usual=usual)


def _standing(package: Package, relations: Mapping[str, Relation], kind: str, standard: str) -> str | None:
    """Return where a part stands that the workbook has one of: where it says, else at its usual place."""
    told = [relation.target for relation in relations.values() if relation.kind == kind]
    return next((part for part in (*told, standard) if part in package), None)


def read_styles(package: Package, part: str) -> tuple[frozenset[bytes], dict[bytes, str], dict[bytes, str]]:
    """Return the styles whose font is struck out, the codes of those that show numbers otherwise, and the fills."""
    codes = dict(BUILT_IN)
    struck_fonts: set[int] = set()
    styles: list[tuple[int, int, int]] = []
    fills: list[str] = []
    path: list[str] = []
    fonts = 0
    solid = False

    def start(name: str, attributes: Mapping[str, str]) -> None:
        nonlocal fonts, solid
        parent = path[-1] if path else ""
        path.append(name)
        if name == "numFmt" and parent == "numFmts":
            codes[_number(attributes.get("numFmtId"))] = attributes.get("formatCode", "")
        elif name == "font" and parent == "fonts":
            fonts += 1
        elif name == "strike" and parent == "font" and attributes.get("val", "1") not in ("0", "false"):
            # Fonts of conditional formats stand under dxf.
            if path[-3:-1] == ["fonts", "font"]:
                struck_fonts.add(fonts - 1)
        elif name == "fill" and parent == "fills":
            fills.append("")
        elif name == "fgColor" and path[-4:-1] == ["fills", "fill", "patternFill"] and solid and fills:
            fills[-1] = _colour(attributes)
        elif name == "xf" and parent == "cellXfs":
            number, font, fill = (_number(attributes.get(key)) for key in ("numFmtId", "fontId", "fillId"))
            styles.append((number, font, fill))
        if name == "patternFill":
            solid = attributes.get("patternType") == "solid"

    def end(_: str) -> None:
        path.pop()

    package.read(part, start=start, end=end)
    struck = frozenset(b"%d" % style for style, (_, font, _) in enumerate(styles) if font in struck_fonts)
    formats = {
        b"%d" % style: codes[number]
        for style, (number, *_) in enumerate(styles)
        if number in codes and format_kind(codes[number])
    }
    filled = {
        b"%d" % style: fills[fill] for style, (*_, fill) in enumerate(styles) if 0 <= fill < len(fills) and fills[fill]
    }
    return struck, formats, filled


def _colour(attributes: Mapping[str, str]) -> str:
    """Return the name of a fill colour, by what the workbook says of it; nothing for white."""
    rgb, theme, indexed = (attributes.get(key, "") for key in ("rgb", "theme", "indexed"))
    if rgb:
        shown = rgb[-6:].upper()
        return "" if shown == "FFFFFF" else f"#{shown}"
    tint = attributes.get("tint", "")
    if theme:
        return "" if theme == "0" and tint in ("", "0") else f"theme {theme}" + (f" ({tint[:5]})" if tint else "")
    return "" if indexed in ("", "1", "9", "64", "65") else f"colour {indexed}"


def rich_texts(pieces: Iterable[bytes], *, every: bool) -> tuple[dict[bytes, Sequence[Run]], int]:
    """Return the shared texts with a struck-out run, or every one with runs, and how many texts there are.

    Raises
    ------
    NotPlain
        The part is spelt otherwise than usual.
    BrokenXml
        A text has no end.
    """
    found: dict[bytes, Sequence[Run]] = {}
    wanted = b"<r>" if every else b"<strike"
    index = 0
    buffer = bytearray()
    first = True
    for piece in pieces:
        buffer += piece
        if first and (not is_utf8(piece) or not _TEXTS_ROOT.match(piece)):
            raise NotPlain
        first = False
        if b"<!" in buffer:
            raise NotPlain
        block = bytes(buffer[: buffer.rfind(b"</si>") + 5]) if b"</si>" in buffer else b""
        del buffer[: len(block)]
        if len(buffer) > 4 << 20:
            raise BrokenXml("has a text of more than 4 MB")
        if wanted not in block:
            index += block.count(b"</si>") + len(_NO_TEXT.findall(block))
            continue
        for text in _END_OF_TEXT.split(block)[:-1]:
            if wanted in text:
                runs = runs_of(text)
                if every or any(struck for _, struck in runs):
                    found[b"%d" % index] = runs
            index += 1
    return found, index + len(_NO_TEXT.findall(buffer))


_TEXTS_ROOT: Final = re.compile(rb"\A(?:\xef\xbb\xbf)?\s*(?:<\?xml[^<>]*\?>\s*)?<sst[\s/>]")
_NO_TEXT: Final = re.compile(rb"<si ?/>")
_END_OF_TEXT: Final = re.compile(rb"</si>|<si ?/>")


def _beside(package: Package, seen: SeenSheet) -> None:
    """Read what belongs to a sheet and stands in parts of its own: comments and drawings."""
    relations = package.relations(seen.entry.part)
    try:
        threads: dict[tuple[int, int], list[str]] = {}
        people = _people(package) if any(one.kind == "threadedComment" for one in relations.values()) else {}
        for relation in relations.values():
            if relation.kind == "comments":
                _read_comments(package, relation.target, seen.comments)
            elif relation.kind == "threadedComment":
                _read_threads(package, relation.target, people, threads)
        # A thread has a comment for programs that know none, which only says that there is one.
        seen.comments.update({cell: "\n".join(said) for cell, said in threads.items()})
    except UnreadableFile as error:
        seen.notes.append(f"comments not read: {error.place} {error.reason}")
    drawing = relations.get(seen.look.drawing or "")
    if drawing is not None:
        try:
            seen.shapes = _count_shapes(package, drawing.target)
        except UnreadableFile as error:
            seen.notes.append(f"drawing not read: {error.place} {error.reason}")
    if seen.look.elsewhere:
        seen.notes.append(f"formulas that refer to another workbook, read by their saved values: {seen.look.elsewhere}")


def _read_comments(package: Package, part: str, comments: dict[tuple[int, int], str]) -> None:
    authors: list[str] = []
    words: list[str] = []
    cell: tuple[int, int] | None = None
    author = ""
    reading = spelling_aid = False

    def start(name: str, attributes: Mapping[str, str]) -> None:
        nonlocal cell, author, reading, spelling_aid
        if name == "comment":
            cell = cell_position(attributes.get("ref", ""))
            number = _number(attributes.get("authorId"))
            author = authors[number] if 0 <= number < len(authors) else ""
        elif name == "rPh":
            spelling_aid = True
        reading = name in ("author", "t") and not spelling_aid

    def end(name: str) -> None:
        nonlocal reading, spelling_aid
        reading = False
        if name == "author":
            authors.append("".join(words).strip())
            words.clear()
        elif name == "rPh":
            spelling_aid = False
        elif name == "comment":
            said = without_codes("".join(words)).strip()
            words.clear()
            named = author and not author.startswith("tc=") and not said.startswith(author)
            if said and cell is not None:
                comments[cell] = f"{author}: {said}" if named else said

    def text(found: str) -> None:
        if reading:
            words.append(found)

    package.read(part, start=start, end=end, text=text)


def _people(package: Package) -> dict[str, str]:
    people: dict[str, str] = {}

    def start(name: str, attributes: Mapping[str, str]) -> None:
        if name.lstrip("~") == "person":
            people[attributes.get("id", "")] = attributes.get("displayName", "")

    for relation in package.relations(WORKBOOK).values():
        if relation.kind == "person":
            package.read(relation.target, start=start)
    return people


def _read_threads(
    package: Package, part: str, people: Mapping[str, str], threads: dict[tuple[int, int], list[str]]
) -> None:
    words: list[str] = []
    cell: tuple[int, int] | None = None
    person = ""

    def start(name: str, attributes: Mapping[str, str]) -> None:
        nonlocal cell, person
        if name.lstrip("~") == "threadedComment":
            cell = cell_position(attributes.get("ref", ""))
            person = people.get(attributes.get("personId", ""), "")
            words.clear()

    def end(name: str) -> None:
        if name.lstrip("~") == "threadedComment" and cell is not None:
            said = "".join(words).strip()
            if said:
                threads.setdefault(cell, []).append(f"{person}: {said}" if person else said)

    package.read(part, start=start, end=end, text=words.append)


def _count_shapes(package: Package, part: str) -> int:
    shapes = 0

    def start(name: str, _: Mapping[str, str]) -> None:
        nonlocal shapes
        shapes += name.lstrip("~") in ("twoCellAnchor", "oneCellAnchor", "absoluteAnchor")

    package.read(part, start=start)
    return shapes


_MAIN: Final = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
_RELATIONS: Final = "http://schemas.openxmlformats.org/package/2006/relationships"
_KINDS: Final = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
_TYPES: Final = "http://schemas.openxmlformats.org/package/2006/content-types"


def _write_copy(package: Package, contents: Contents, seen: Seen, *, texts_rewritten: bool) -> None:
    """Write what the value reader needs of a package into `seen.copy`."""
    if seen.copy is None:
        return
    with zipfile.ZipFile(seen.copy, "w", zipfile.ZIP_DEFLATED, compresslevel=1) as out:

        def write(name: str, pieces: Iterable[bytes]) -> None:
            with out.open(name, "w", force_zip64=True) as stream:
                for piece in pieces:
                    stream.write(piece)

        names = [f"worksheets/sheet{number}.xml" for number in range(1, len(seen.sheets) + 1)]
        for number, (sheet, name) in enumerate(zip(seen.sheets, names.copy(), strict=True)):
            far: list[tuple[tuple[int, int], bytes]] = []
            pieces = package.pieces(sheet.entry.part)
            spelt = rewritten(pieces) if sheet.rewritten else pieces
            write(f"xl/{name}", altered(spelt, sheet.look, far=far))
            if far:
                seen.far.append((number, [position for position, _ in far]))
                names.append(f"worksheets/far{number}.xml")
                rows = (b'<row r="%d"><c r="A%d"%s</row>' % (row, row, cell) for row, (_, cell) in enumerate(far, 1))
                write(
                    f"xl/{names[-1]}",
                    (f'<worksheet xmlns="{_MAIN}"><sheetData>'.encode(), *rows, b"</sheetData></worksheet>"),
                )
        for source, name, again in (
            (contents.styles, STYLES, False),
            (contents.texts, TEXTS, texts_rewritten),
        ):
            if source is not None:
                pieces = package.pieces(source)
                write(name, pieces if package.in_utf8(source) and not again else rewritten(pieces))
        listed = "".join(
            f'<sheet name="{number}" sheetId="{number}" r:id="r{number}"/>' for number in range(1, len(names) + 1)
        )
        related = "".join(
            f'<Relationship Id="r{number}" Type="{_KINDS}/worksheet" Target="{name}"/>'
            for number, name in enumerate(names, 1)
        )
        out.writestr("[Content_Types].xml", f'<Types xmlns="{_TYPES}"/>')
        out.writestr(
            "_rels/.rels",
            f'<Relationships xmlns="{_RELATIONS}"><Relationship Id="r1" Type="{_KINDS}/officeDocument"'
            f' Target="{WORKBOOK}"/></Relationships>',
        )
        out.writestr(
            WORKBOOK,
            f'<workbook xmlns="{_MAIN}" xmlns:r="{_KINDS}"><workbookPr date1904="{int(contents.from_1904)}"/>'
            f"<sheets>{listed}</sheets></workbook>",
        )
        out.writestr("xl/_rels/workbook.xml.rels", f'<Relationships xmlns="{_RELATIONS}">{related}</Relationships>')
    seen.copy.seek(0)


def _part_name(name: str) -> str:
    return name.replace("\\", "/").lstrip("/").casefold()


def _number(text: str | None) -> int:
    return int(text) if text and re.fullmatch("[0-9]{1,9}", text, re.ASCII) else -1


def _said(error: Exception) -> str:
    return " ".join(str(error).split())[:200] or type(error).__name__


def _what_it_is(package: zipfile.ZipFile, parts: Mapping[str, zipfile.ZipInfo]) -> str:
    """Say what a zip file without a workbook is."""
    if "xl/workbook.bin" in parts:
        return "is a binary workbook (.xlsb): save it as .xlsx"
    if "mimetype" in parts and parts["mimetype"].file_size < 200:
        try:
            kind = package.read(parts["mimetype"])
        except _READ_ERRORS:
            kind = b""
        if b"opendocument.spreadsheet" in kind:
            return "is an OpenDocument spreadsheet (.ods): save it as .xlsx"
    if "word/document.xml" in parts:
        return "is a text document, not a workbook: copy its table into a workbook"
    return "is a zip file with no workbook in it"
