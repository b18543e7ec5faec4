"""The comments part of a sheet: new comments, and ours beneath those that stand there."""

from __future__ import annotations

import functools
from collections.abc import Callable, Iterator, Mapping, Sequence
from typing import Final, NamedTuple

from instruments.workbook.annotate.splice import Edit, Element, closing, elements, spliced, text_in_xml
from instruments.workbook.plain import BrokenXml
from instruments.workbook.sheet import cell_address, cell_position

__all__ = ["MOST_CHARACTERS", "Comments", "Passage", "Text", "plain_text"]

MOST_CHARACTERS: Final = 32_000
"""Characters of a comment; a cell's text ends at 32,767, and programs differ in what they count."""

_AT_ONCE: Final = 500

_MAIN: Final = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
_STRICT: Final = "http://purl.oclc.org/ooxml/spreadsheetml/main"


class Passage(NamedTuple):
    """A run of a comment's text, in bold letters or not."""

    text: str
    bold: bool = False


Text = Sequence[Passage]

_HEADED: Final = b"%b:\n"
"""What stands in a run of its own above a text that is added to somebody else's comment."""

Place = tuple[int, int]


def plain_text(text: Text) -> str:
    """Return a comment as plain text."""
    return "".join(passage.text for passage in text)


class Comments:
    """The comments of one sheet.

    Parameters
    ----------
    data : bytes or None
        The part in UTF-8; None where the sheet has no comments yet.
    author : str
        Whose comments are added.
    strict : bool
        Whether the workbook is of the strict kind of ECMA-376-1.

    Raises
    ------
    BrokenXml
        The part cannot be read.
    """

    def __init__(self, data: bytes | None, *, author: str, strict: bool = False) -> None:
        self._author = author
        self._data = data if data is not None else _empty(_STRICT if strict else _MAIN)
        self._root = elements(self._data, deepest=2)
        listed = self._root.first("commentList")
        if listed is not None and listed.closes_itself:
            self._data = b"".join(spliced((self._data,), [listed.appended(self._data, b"")]))
            self._root = elements(self._data, deepest=2)
            listed = self._root.first("commentList")
        if self._root.name != "comments" or listed is None:
            raise BrokenXml("is no part of comments")
        self._list = listed
        self.standing: dict[Place, Element] = {}
        """The comments that stand there, by their cell."""
        for child in listed.children:
            place = cell_position(child.attributes.get("ref", "")) if child.name == "comment" else None
            if place is not None:
                self.standing[place] = child
        name = text_in_xml(author)
        self.own: frozenset[Place] = frozenset(place for place in self.standing if self._author_of(place) == name)
        """The cells whose comment is this author's, from an earlier copy."""
        self.added: frozenset[Place] = frozenset(
            place for place, comment in self.standing.items() if self._added_before(comment) is not None
        )
        """The cells where an earlier copy added something to a comment of somebody else's."""

    def length(self, place: Place) -> int:
        """Return how many bytes the text of somebody else's comment takes that stands there; else 0."""
        comment = self.standing.get(place)
        text = self._text_of(comment) if comment is not None and place not in self.own else None
        return text.close - text.inside if text else 0

    def _text_of(self, comment: Element) -> Element | None:
        """Return the text of a comment, where it stands in the part.

        A part can have a hundred thousand comments: each is looked into when it is its turn.
        """
        if comment.closes_itself:
            return None
        head = self._data[self._root.start : self._root.inside]
        whole = head + self._data[comment.start : comment.end] + closing(head)
        text = elements(whole).children[0].first("text")
        if text is not None:
            text.moved(comment.start - len(head))
        return text

    def _author_of(self, place: Place) -> bytes:
        number = self.standing[place].attributes.get("authorId", "")
        authors = self._root.first("authors")
        names = authors.children if authors else []
        if not (number.isascii() and number.isdigit() and len(number) < 7) or int(number) >= len(names):
            return b""
        return self._data[names[int(number)].inside : names[int(number)].close].strip()

    def thread_of(self, place: Place) -> bool:
        """Whether the comment of a cell stands for a thread, which newer programs show in its place."""
        return place in self.standing and self._author_of(place).startswith(b"tc=")

    def with_added(self, texts: Mapping[Place, Text]) -> Callable[[], Iterator[bytes]]:
        """Return what gives the part with a comment added to each of these cells, beneath what stands there.

        What was added to an earlier copy gives way to what is added now. The part is not made before it is
        asked for, piece by piece: it may be larger than the sheet.
        """
        prefix = self._root.prefix
        edits: list[Edit] = []
        number = self._author_number(edits)
        for place in sorted(texts.keys() & self.standing.keys()):
            comment = self.standing[place]
            if place in self.own:
                made = b"<%btext>%b</%btext>" % (prefix, _runs(texts[place], prefix), prefix)
                holder = self._text_of(comment)
                edits.append(Edit(holder.start, holder.end, made) if holder else comment.appended(self._data, made))
            else:
                edits += self._beneath(comment, texts[place])
        return functools.partial(self._pieces, edits, number, texts)

    def _pieces(self, edits: Sequence[Edit], author: int, texts: Mapping[Place, Text]) -> Iterator[bytes]:
        prefix = self._root.prefix
        end = self._list.close
        yield from spliced((self._data[:end],), edits)
        new = sorted(texts.keys() - self.standing.keys())
        for at in range(0, len(new), _AT_ONCE):
            yield b"".join(
                b'<%bcomment ref="%b" authorId="%d"><%btext>%b</%btext></%bcomment>'
                % (
                    prefix,
                    cell_address(*place).encode(),
                    author,
                    prefix,
                    _runs(texts[place], prefix),
                    prefix,
                    prefix,
                )
                for place in new[at : at + _AT_ONCE]
            )
        yield self._data[end:]

    def _author_number(self, edits: list[Edit]) -> int:
        authors = self._root.first("authors")
        prefix = self._root.prefix
        name = text_in_xml(self._author)
        made = b"<%bauthor>%b</%bauthor>" % (prefix, name, prefix)
        if authors is None:
            at = self._list.start
            edits.append(Edit(at, at, b"<%bauthors>%b</%bauthors>" % (prefix, made, prefix)))
            return 0
        for number, author in enumerate(authors.children):
            if self._data[author.inside : author.close] == name:
                return number
        edits.append(authors.appended(self._data, made))
        return len(authors.children)

    def _beneath(self, comment: Element, text: Text) -> list[Edit]:
        prefix = self._root.prefix
        runs = _runs((Passage("\n\n"), Passage(f"{self._author}:\n", bold=True), *text), prefix)
        holder = self._text_of(comment)
        if holder is None:
            return [comment.appended(self._data, b"<%btext>%b</%btext>" % (prefix, runs, prefix))]
        if holder.closes_itself:
            return [holder.appended(self._data, runs)]
        edits: list[Edit] = []
        at = holder.close
        for child in holder.children:
            if child.name == "t":
                # A text without runs becomes the first of them.
                edits.append(Edit(child.start, child.start, b"<%br>" % prefix))
                edits.append(Edit(child.end, child.end, b"</%br>" % prefix))
            elif child.name in ("rPh", "phoneticPr"):
                at = min(at, child.start)
        begun = self._added_before(comment)
        edits.append(Edit(at if begun is None else begun, at, runs))
        return edits

    def _added_before(self, comment: Element) -> int | None:
        """Return where in somebody else's comment begins what an earlier copy added; None where it has nothing."""
        headed = _HEADED % text_in_xml(self._author)
        if headed not in self._data[comment.start : comment.end]:
            return None
        holder = self._text_of(comment)
        previous: Element | None = None
        for run in holder.children if holder else ():
            text = run.first("t") if run.name == "r" else None
            if text is None:
                continue
            said = self._data[text.inside : text.close]
            if said == headed:
                return run.start if previous is None else previous.start
            previous = run if not said.strip() else None
        return None


def _empty(space: str) -> bytes:
    return (
        '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n'
        f'<comments xmlns="{space}"><authors/><commentList/></comments>'
    ).encode()


def _runs(text: Text, prefix: bytes) -> bytes:
    made: list[bytes] = []
    for passage in text:
        if not passage.text:
            continue
        bold = b"<%bb/>" % prefix if passage.bold else b""
        made.append(
            b'<%br><%brPr>%b<%bsz val="9"/><%bcolor indexed="81"/><%brFont val="Tahoma"/><%bfamily val="2"/></%brPr>'
            b'<%bt xml:space="preserve">%b</%bt></%br>'
            % (*(prefix,) * 2, bold, *(prefix,) * 6, text_in_xml(passage.text), prefix, prefix)
        )
    return b"".join(made)
