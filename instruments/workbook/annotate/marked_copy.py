"""A copy of a workbook with cells filled and commented: which parts that takes, and what each says then."""

from __future__ import annotations

import functools
import os
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import Final

from instruments.workbook.annotate.boxes import Numbers, lines_in, with_boxes
from instruments.workbook.annotate.comments import MOST_CHARACTERS, Comments, Passage, Text, plain_text
from instruments.workbook.annotate.package_parts import Changes
from instruments.workbook.annotate.sheet import Frame, cell_edits, frame_of, legacy_drawing, parsed_frame
from instruments.workbook.annotate.splice import Edit, in_utf8, spliced
from instruments.workbook.annotate.styles import NEW_STYLES, Fill, Styles
from instruments.workbook.annotate.threads import with_person, with_replies
from instruments.workbook.package import LIMITS, STYLES, WORKBOOK, Limits, Package, Relation, SheetEntry, read_contents
from instruments.workbook.plain import BrokenXml
from instruments.workbook.sheet import UnreadableFile
from instruments.workbook.sheet_look import NotPlain

__all__ = ["Mark", "MarkedCopy", "write_marked_copy"]

Place = tuple[int, int]

_KINDS: Final = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
_STRICT_KINDS: Final = "http://purl.oclc.org/ooxml/officeDocument/relationships"
_COMMENTS_TYPE: Final = "application/vnd.openxmlformats-officedocument.spreadsheetml.comments+xml"
_STYLES_TYPE: Final = "application/vnd.openxmlformats-officedocument.spreadsheetml.styles+xml"
_BOXES_TYPE: Final = "application/vnd.openxmlformats-officedocument.vmlDrawing"

_MOST_BYTES_PARSED: Final = 150_000_000
"""A sheet spelt otherwise than usual is taken into memory whole, up to this size."""

_ROOM_WORTH: Final = 200
"""With less room than this in a comment nothing is added to it."""

_MOST_TOGETHER: Final = 8
"""Cells of a merged range whose comments are said in the one that it has."""

_A_FEW_LINES: Final = 5

_CUT: Final = "... (cut)"


@dataclass(frozen=True, slots=True, kw_only=True)
class Mark:
    """What a cell gets.

    Attributes
    ----------
    fill
        Its colour.
    text
        Its comment.
    rank
        Of two marks on merged cells the lower one gives the colour.
    """

    fill: Fill
    text: Text
    rank: int = 0


@dataclass(frozen=True, slots=True, kw_only=True)
class MarkedCopy:
    """What became of the marks.

    Attributes
    ----------
    cells
        How many cells are marked, on how many sheets.
    unmarked
        The sheets that could not be marked, and why.
    signed
        Whether the workbook bears a digital signature, which holds for the original alone.
    """

    cells: int
    sheets: int
    unmarked: tuple[tuple[str, str], ...] = ()
    signed: bool = False


def write_marked_copy(
    source: str | os.PathLike[str],
    target: str | os.PathLike[str],
    marks: Mapping[str, Mapping[Place, Mark]],
    *,
    author: str,
    mended: Mark | None = None,
    limits: Limits = LIMITS,
) -> MarkedCopy:
    """Write a copy of a workbook in which cells are marked; every part that this does not change is the same bytes.

    Parameters
    ----------
    source, target
        The workbook, and its copy.
    marks
        The marks by sheet and by row and column, counted from 0.
    author
        Whose comments they are.
    mended
        What cells get that bear a comment of this author's, as the workbook is such a copy itself, and
        are not marked any more; None leaves them as they are.
    limits
        How large the workbook may be.

    Raises
    ------
    UnreadableFile
        The workbook cannot be read, or has parts that cannot be added to.
    OSError
        The copy cannot be written.
    """
    with Package(source, file=os.fspath(source), limits=limits) as package:
        try:
            return _Copy(package, author, mended).write(target, marks)
        except BrokenXml as error:
            raise UnreadableFile(package.file, "", str(error)) from None


class _Copy:
    """One copy while it is made."""

    def __init__(self, package: Package, author: str, mended: Mark | None) -> None:
        self._package = package
        self._mended = mended
        self._author = author
        self._changes = Changes(package)
        self._contents = read_contents(package)
        self._numbers = Numbers()

    def write(self, target: str | os.PathLike[str], marks: Mapping[str, Mapping[Place, Mark]]) -> MarkedCopy:
        changes, contents = self._changes, self._contents
        data = changes.part(contents.styles) if contents.styles else NEW_STYLES
        self._styles = Styles(data)
        names = [entry.filename for entry in self._package.entries()]
        for name in names:
            if name.casefold().endswith(".vml"):
                self._numbers.note(self._package.pieces(name))
        cells = sheets = 0
        unmarked: list[tuple[str, str]] = []
        strict = False
        there = {entry.name for entry in contents.sheets}
        gone = [sheet for sheet, wanted in marks.items() if wanted and sheet not in there]
        unmarked += ((sheet, "it is not in the workbook any more") for sheet in gone)
        for entry in contents.sheets:
            sheet, wanted = entry.name, marks.get(entry.name, {})
            state = self._styles.state()
            try:
                if not wanted and not self._marked_before(entry):
                    continue
                marked, frame = self._mark(entry, wanted)
            except (BrokenXml, UnreadableFile, NotPlain) as error:
                self._styles.back_to(state)
                unmarked.append((sheet, _reason(error)))
            else:
                strict = strict or frame.strict
                cells += marked
                sheets += bool(marked)
        if self._styles.changed:
            self._write_styles(strict=strict)
        changes.write(target)
        return MarkedCopy(
            cells=cells,
            sheets=sheets,
            unmarked=tuple(unmarked),
            signed=any(name.casefold().startswith("_xmlsignatures/") for name in names),
        )

    def _write_styles(self, *, strict: bool) -> None:
        changes, name = self._changes, self._contents.styles
        told = [one for one in self._package.relations(WORKBOOK).values() if one.kind == "styles"]
        if name is None:
            name = STYLES  # where they would have been found
            changes.declare(name, _STYLES_TYPE)
        if not told:
            changes.refer(WORKBOOK, "styles", name, spaces=_STRICT_KINDS if strict else _KINDS)
        changes.put_bytes(name, self._styles.written())

    # --- one sheet ----------------------------------------------------------------------------------------------

    def _marked_before(self, entry: SheetEntry) -> bool:
        """Whether a sheet bears comments of an earlier copy that may have to go."""
        if self._mended is None:
            return False
        name = _target(self._package.relations(entry.part), "comments")
        if name is None:
            return False
        comments = Comments(self._changes.part(name), author=self._author)
        return bool(comments.own or comments.added)

    def _mark(self, entry: SheetEntry, wanted: Mapping[Place, Mark]) -> tuple[int, Frame]:
        """Mark the cells of one sheet; nothing of it is changed where it cannot be done whole."""
        package = self._package
        frame = frame_of(lambda: package.pieces(entry.part), lambda: self._whole(entry.part))
        relations = package.relations(entry.part)
        comments_part = _target(relations, "comments")
        comments = Comments(
            self._changes.part(comments_part) if comments_part else None, author=self._author, strict=frame.strict
        )
        marks = dict(_on_what_is_seen(wanted, frame))
        count = len(marks)
        if self._mended is not None:
            marks = dict.fromkeys(comments.own | comments.added, self._mended) | marks
        rows: dict[int, list[int]] = {}
        for row, column in sorted(marks):
            rows.setdefault(row, []).append(column)

        def restyle(row: int, column: int, style: int) -> int:
            return self._styles.filled(style, marks[row, column].fill)

        try:
            edits = cell_edits(frame, package.pieces(entry.part) if frame.plain else (frame.data,), rows, restyle)
        except NotPlain:
            frame = parsed_frame(self._whole(entry.part))
            edits = cell_edits(frame, (frame.data,), rows, restyle)
        beside = self._beside(relations, comments_part, comments, frame, marks)
        spaces = _STRICT_KINDS if frame.strict else _KINDS
        for name, pieces in beside.changed.items():
            self._changes.put(name, pieces)
        if beside.comments:
            self._changes.declare(beside.comments, _COMMENTS_TYPE)
            self._changes.refer(entry.part, "comments", beside.comments, spaces=spaces)
        if beside.boxes:
            self._changes.declare_ending("vml", _BOXES_TYPE)
            relation = self._changes.refer(entry.part, "vmlDrawing", beside.boxes, spaces=spaces)
            edits.append(legacy_drawing(frame, relation, spaces))
        self._changes.put(entry.part, functools.partial(self._edited, entry.part, edits, plain=frame.plain))
        return count, frame

    def _whole(self, part: str) -> bytes:
        return in_utf8(b"".join(self._package.pieces(part, at_most=_MOST_BYTES_PARSED)))

    def _edited(self, part: str, edits: list[Edit], *, plain: bool) -> Iterable[bytes]:
        return spliced(self._package.pieces(part) if plain else (self._whole(part),), edits)

    def _beside(
        self,
        relations: Mapping[str, Relation],
        comments_part: str | None,
        comments: Comments,
        frame: Frame,
        marks: Mapping[Place, Mark],
    ) -> _Beside:
        """Return what becomes of the parts beside a sheet: its comments, their boxes and its threads."""
        changes = self._changes
        beside = _Beside({}, "", "")
        if comments_part is None:
            comments_part = beside.comments = changes.free_name("xl/comments{}.xml")
        texts = {place: _within(mark.text, comments.length(place)) for place, mark in marks.items()}
        texts = {place: text for place, text in texts.items() if text}
        beside.changed[comments_part] = comments.with_added(texts)
        lines = {place: lines_in(plain_text(text)) for place, text in texts.items()}
        boxes: str | None = None
        if frame.drawing is not None:
            relation = relations.get(frame.drawing)
            if relation is None or relation.kind != "vmlDrawing":
                raise BrokenXml("refers to a drawing of comments that the workbook has not got")
            boxes = relation.target
        # Without boxes the comments that stand there have none either.
        new = dict.fromkeys(comments.standing, _A_FEW_LINES) if boxes is None else {}
        new |= {place: number for place, number in lines.items() if place not in comments.standing}
        first_time = comments.standing.keys() - comments.own - comments.added
        drawn = with_boxes(
            changes.part(boxes) if boxes is not None else None,
            new,
            longer={place: number for place, number in lines.items() if place in first_time},
            afresh={place: number for place, number in lines.items() if place in comments.own},
            grid=frame.grid,
            numbers=self._numbers,
        )
        if boxes is None:
            boxes = beside.boxes = changes.free_name("xl/drawings/vmlDrawing{}.vml")
        beside.changed[boxes] = drawn
        threaded = {place: plain_text(text) for place, text in texts.items() if comments.thread_of(place)}
        if threaded:
            self._reply(relations, threaded, beside)
        return beside

    def _reply(self, relations: Mapping[str, Relation], texts: Mapping[Place, str], beside: _Beside) -> None:
        threads = _target(relations, "threadedComment")
        persons = _target(self._package.relations(WORKBOOK), "person")
        if threads is None or persons is None or threads not in self._changes or persons not in self._changes:
            return
        persons_now, person = with_person(self._changes.part(persons), self._author)
        threads_now = with_replies(self._changes.part(threads), texts, person)
        beside.changed[persons] = lambda: (persons_now,)
        beside.changed[threads] = lambda: (threads_now,)


@dataclass(slots=True)
class _Beside:
    """Parts beside a sheet: those that change, and the names of those that are new."""

    changed: dict[str, Callable[[], Iterable[bytes]]]
    comments: str
    boxes: str


def _reason(error: Exception) -> str:
    if isinstance(error, UnreadableFile):
        return f"{error.place} {error.reason}".strip()
    return f"it, or a part beside it, {str(error) or 'is not what it should look like'}"


def _target(relations: Mapping[str, Relation], kind: str) -> str | None:
    return next((relation.target for relation in relations.values() if relation.kind == kind), None)


def _on_what_is_seen(wanted: Mapping[Place, Mark], frame: Frame) -> Mapping[Place, Mark]:
    """Return the marks with those of merged cells on the first of these."""
    moved = frame.anchors(wanted)
    if not moved:
        return wanted
    gathered: dict[Place, list[Mark]] = {}
    for place in sorted(wanted):
        gathered.setdefault(moved.get(place, place), []).append(wanted[place])
    return {place: marks[0] if len(marks) == 1 else _as_one(marks) for place, marks in gathered.items()}


def _as_one(marks: Sequence[Mark]) -> Mark:
    """Return one mark for merged cells: the worst gives the colour and is said first, and nothing is said twice."""
    ordered = sorted(marks, key=lambda mark: mark.rank)
    texts = list(dict.fromkeys(tuple(mark.text) for mark in ordered))
    text: list[Passage] = []
    for each in texts[:_MOST_TOGETHER]:
        text += (Passage("\n\n" if text else ""), *each)
    if len(texts) > _MOST_TOGETHER:
        text.append(Passage(f"\n\nand more at {len(texts) - _MOST_TOGETHER:,} of the cells merged here"))
    return Mark(fill=ordered[0].fill, text=text, rank=ordered[0].rank)


def _within(text: Text, taken: int) -> Text:
    """Return as much of a text as a comment has room for."""
    room = MOST_CHARACTERS - taken
    if taken and room < _ROOM_WORTH:
        return ()
    kept: list[Passage] = []
    for passage in text:
        # What a character beyond the first plane takes twice, as some programs count.
        length = len(passage.text.encode("utf-16-le", "replace")) // 2
        if length > room:
            shown = passage.text.encode("utf-16-le", "replace")[: max(0, room - len(_CUT)) * 2]
            kept.append(Passage(shown.decode("utf-16-le", "ignore") + _CUT, passage.bold))
            break
        kept.append(passage)
        room -= length
    return kept
