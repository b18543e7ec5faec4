"""What each row of a sheet is: an instrument (or cable, or area), a section, a repeated heading, a note."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

from instruments.column import Reads
from instruments.tag_cell import split_note
from instruments.workbook.headings import SheetMatch
from instruments.workbook.number_format import as_text
from instruments.workbook.sheet import Sheet, Value
from instruments.workbook.words import folded, not_live

__all__ = ["RowsOfSheet", "sort_rows"]

# Merged cells are written into the rows they stand for; a hostile file may merge the same rows many times.
MOST_MERGED: Final = 1_000_000


@dataclass(frozen=True, slots=True, kw_only=True)
class RowsOfSheet:
    """The rows of a sheet by what they are, each counted from 0.

    Attributes
    ----------
    data
        Rows that become records.
    places
        The section that each row of `data` stands under, None before the first.
    sections
        Section rows and their text.
    notes
        Title lines, notes, legends and end lines: row and text.
    headings
        Heading rows, the repeated ones among them.
    struck
        Rows of `data` that are struck out: their tag is, or half of their cells.
    struck_cells
        Cells of other rows of `data` that are struck out whole, with nothing beside: row and column.
    instead
        What stands in a cell, where that is not what the sheet's rows hold: merged cells, and cells of
        which a part is struck out.
    merged
        The number of cells that were filled from a merged cell.
    """

    data: tuple[int, ...]
    places: tuple[str | None, ...]
    sections: tuple[tuple[int, str], ...]
    notes: tuple[tuple[int, str], ...]
    headings: tuple[int, ...]
    struck: frozenset[int]
    struck_cells: frozenset[tuple[int, int]]
    instead: Mapping[int, Mapping[int, Value]]
    merged: int = 0


_END: Final = re.compile(
    r"\W{0,4}(?:end of (?:the )?(?:list|document|schedule|index|report|sheet|file)|end|ende(?: der liste)?|"
    r"listenende|fin de liste|"
    r"notes?|general notes?|legend|legende|abbreviations?|abkuerzungen|anmerkungen|bemerkungen|hinweise|key|"
    r"remarks|footnotes?|nomenclature)\b\s?[:.]?.{0,200}",
    re.DOTALL,
)
_NOTE: Final = re.compile(
    r"\W{0,3}(?:note|notes|page|sheet|seite|blatt|total|sum|count|prepared|checked|approved|printed|issued|rev|"
    r"revision|date|continued|cont\.?|fortsetzung|see|hold list|confidential|doc|document|copyright|\(c\)|n\.b\.|"
    r"nb|\*)\b[\s.:#]?.{0,300}",
    re.DOTALL,
)
_SECTION: Final = re.compile(
    r"(?:process |plant )?(?:unit|area|system|section|zone|train|anlage|bereich|teilanlage|package|plant|skid|"
    r"building|gebaeude|module|deck|level|system|circuit|part)\b.{0,120}"
)
_UNIT_TITLE: Final = re.compile(
    r"(?:unit|area|section|system|anlage|teilanlage|bereich|zone|train|page|sheet|note|rev)\b", re.IGNORECASE
)
# What stands alone in its row and has a word in it is a title, whatever figures it has: Boiler house 2.
_WORDY: Final = re.compile(r"(?<![^\W\d_])[^\W\d_]{4,}(?![^\W\d_])")
_PAGE: Final = re.compile(r"\b(?:page|sheet|blatt|seite|folio|pagina|pag|bladzijde)\b")
_FIGURES: Final = re.compile(r"\d+")
_FIGURE: Final = re.compile(r"[<>~]?\s?[-+]?\d[\d.,]{0,15}")


def looks_like_tag(text: str) -> bool:
    """Whether a text of a tag column may be a tag: letters and digits, and not too many words.

    >>> [looks_like_tag(text) for text in ("PT-1001", "PT-1001 A/B (Note 3)", "UNIT 10 - FEED", "1. VFC = contact")]
    [True, True, False, False]
    """
    if len(text) > 60 or _UNIT_TITLE.match(text):
        return False
    return (
        any(sign.isdigit() for sign in text)
        and any(sign.isalpha() for sign in text)
        and text.count(" ") <= 5
        and "=" not in text
        and re.match(r"\W{0,3}\d{1,2}[.)]\s", text) is None
    )


def sort_rows(sheet: Sheet, match: SheetMatch) -> RowsOfSheet:
    """Tell what each row of a matched sheet is.

    Parameters
    ----------
    sheet
        The sheet as read.
    match
        How its heading was understood.
    """
    sorter = _Sorter(sheet, match)
    sorter.run()
    return sorter.result()


class _Sorter:
    def __init__(self, sheet: Sheet, match: SheetMatch) -> None:
        self.sheet = sheet
        self.match = match
        self.key = self._key_column()
        self.has_tags = "tag" in match.columns
        self.mapped = {each.index: each.column for each in match.columns.values()}
        for each in match.columns.values():
            for index, _ in each.parts:
                self.mapped.setdefault(index, each.column)
        self.numeric = {
            index
            for index, column in self.mapped.items()
            if column.reads in (Reads.QUANTITY, Reads.NUMBER, Reads.COUNT, Reads.RANGE, Reads.TRIPLET)
        }
        self.headers = [self._comparable(row) for row in match.header_rows]
        self.headers = [each for each in self.headers if each]
        self.titles = {
            frozenset(self._comparable(row).items())
            for row in range(min(match.header_rows, default=0))
            if any(cell is not None for cell in sheet.rows[row])
        }
        # The title of a later page has another page's number.
        self.page_titles = {
            _FIGURES.sub("", text)
            for title in self.titles
            for _, text in title
            if len(title) == 1 and _PAGE.search(text)
        }
        self.header_key = self._header_texts(self.key)
        self.data: list[int] = []
        self.places: list[str | None] = []
        self.sections: list[tuple[int, str]] = []
        self.notes: list[tuple[int, str]] = []
        self.headings: list[int] = list(match.header_rows)
        self.instead: dict[int, dict[int, Value]] = {}
        self.filled = 0
        self.place: str | None = None
        self.pending: list[tuple[int, str]] = []

    def _key_column(self) -> int:
        for names in (("tag",), *self.match.kind.key):
            match = self.match.columns.get(names[0])
            if match is not None:
                return match.index
        return min((each.index for each in self.match.columns.values()), default=0)

    def _comparable(self, row: int) -> dict[int, str]:
        return {index: folded(as_text(cell)) for index, cell in enumerate(self.sheet.rows[row]) if cell is not None}

    def _header_texts(self, column: int) -> frozenset[str]:
        return frozenset(each[column] for each in self.headers if column in each)

    def run(self) -> None:
        self._take_merged_and_struck()
        sheet, key = self.sheet, self.key
        failed = Counter(row for row, _ in sheet.errors) + Counter(row for row, _ in sheet.no_value)
        first = self.match.first_row
        for row in range(min(self.match.header_rows, default=0)):
            self._note(row)
        header_rows = set(self.match.header_rows)
        for row in range(min(header_rows, default=0), min(first, len(sheet.rows))):
            if row not in header_rows:
                self._note(row)
        plain: dict[str, bool] = {}
        ended = False
        data, places = self.data, self.places
        for number in range(first, len(sheet.rows)):
            cells = sheet.rows[number]
            cell = cells[key]
            if cell is None and number in self.instead:
                cell = self.instead[number].get(key)
            if type(cell) is str:
                known = plain.get(cell)
                if known is None:
                    known = plain[cell] = self._is_plain_key(cell)
                if known and (not ended or self._filled(number) > 2) and not self._stands_alone(number, cell):
                    ended = False
                    if self.pending:
                        self._settle_sections()
                    data.append(number)
                    places.append(self.place)
                    continue
            what = self._what(number, cells, cell, failed.get(number, 0), ended)
            if what == "data":
                ended = False
                if self.pending:
                    self._settle_sections()
                data.append(number)
                places.append(self.place)
            elif what == "heading":
                self.headings.append(number)
            elif what == "section":
                self.pending.append((number, self._row_text(number)))
            elif what == "end":
                ended = True
                self._note(number)
            elif what == "note":
                self._note(number)
        # A section that nothing stands under is a line at the foot of the list.
        self.notes.extend(self.pending)
        self.pending = []

    def _settle_sections(self) -> None:
        self.sections.extend(self.pending)
        self.place = " - ".join(dict.fromkeys(text for _, text in self.pending))
        self.pending = []

    def _is_plain_key(self, text: str) -> bool:
        """Whether a text in the tag (or code) column is beyond doubt one of a row of data."""
        if folded(text) in self.header_key:
            return False
        if self.has_tags:
            return looks_like_tag(text)
        return len(text) <= 40 and not _END.fullmatch(folded(text)) and not _NOTE.fullmatch(folded(text))

    def _stands_alone(self, row: int, text: str) -> bool:
        """Whether a text of the tag column that is no plain tag is all that its row holds."""
        if not self.has_tags or " " not in text or _WORDY.search(text) is None or self._filled(row) > 1:
            return False
        return not not_live(text) and split_note(text)[1] == ""

    def _filled(self, row: int) -> int:
        return sum(cell is not None for cell in self.sheet.rows[row])

    def _row_text(self, row: int) -> str:
        texts = dict.fromkeys(as_text(cell).strip() for cell in self.sheet.rows[row] if cell is not None)
        return " ".join(texts)

    def _note(self, row: int) -> None:
        text = " | ".join(as_text(cell).strip() for cell in self.sheet.rows[row] if cell is not None)
        if text:
            self.notes.append((row, text))

    def _what(self, number: int, cells: list[Value], key: Value, failed: int, ended: bool) -> str:
        filled = {index: cell for index, cell in enumerate(cells) if cell is not None}
        if not filled and number not in self.instead:
            return "data" if failed and not ended else "blank"
        comparable = {index: folded(as_text(cell)) for index, cell in filled.items()}
        if self._is_heading(comparable):
            return "heading"
        if self.titles and filled and frozenset(comparable.items()) in self.titles:
            return "note"
        texts = list(dict.fromkeys(comparable.values()))
        first = texts[0] if texts else ""
        if len(texts) == 1 and _FIGURES.sub("", first) in self.page_titles:
            return "note"
        if texts and not failed and not any(sign.isalnum() for text in texts for sign in text):
            # A line ruled in signs.
            return "note"
        status = key is not None and not_live(as_text(key))
        if ended and not status:
            return "end" if _END.fullmatch(first) else "note"
        if status:
            return "data"
        named = key is not None and not isinstance(key, str)
        if not named and len(texts) <= 3 and not failed:
            # The line itself may stand in a column of numbers, which comes first in some lists.
            beside = {index: cell for index, cell in filled.items() if comparable[index] != first}
            if _END.fullmatch(first):
                return "end" if not self._values(beside) else "data"
            if _NOTE.fullmatch(first) and not self._values(beside):
                return "note"
        if self._is_section(filled, texts, key):
            return "section"
        if len(texts) == 1 and not failed and key is None:
            index = next(iter(filled))
            if index not in self.mapped:
                return "note"
            if self.mapped[index].field in ("remarks", "service", "description"):
                return "note"
            if number in self.instead and len(self.instead[number]) > 0:
                return "data"
        if not self.has_tags and key is None and not any(index in self.mapped for index in filled):
            return "note"
        if self.has_tags and key is None and not any(index in self.mapped for index in filled) and not failed:
            return "note"
        return "data"

    def _values(self, filled: Mapping[int, Value]) -> bool:
        """Whether a row has something in a column of numbers."""
        return any(index in self.numeric for index in filled)

    def _is_heading(self, comparable: Mapping[int, str]) -> bool:
        for header in self.headers:
            same = sum(header.get(index) == text for index, text in comparable.items())
            if same and same * 10 >= len(comparable) * 6 and (same >= 2 or same == len(comparable) == len(header)):
                return True
        return False

    def _is_section(self, filled: Mapping[int, Value], texts: list[str], key: Value) -> bool:
        if any(
            not isinstance(cell, str) or (_FIGURE.fullmatch(cell.strip()) and index in self.numeric)
            for index, cell in filled.items()
            if index in self.mapped
        ):
            return False
        # The running number in front of a section is in a column that no field is read from.
        wordy = {
            index: cell
            for index, cell in filled.items()
            if isinstance(cell, str) and not re.fullmatch(r"[\d.]{1,8}", cell.strip())
        }
        different = {folded(cell) for cell in wordy.values()}
        if len(different) != 1:
            if len(different) == 2 and len(wordy) == 2 and max(filled) <= 3 and not self._values(filled):
                head = folded(str(next(iter(wordy.values()))))
                return (head.endswith(":") or _SECTION.fullmatch(head) is not None) and not (
                    isinstance(key, str) and looks_like_tag(key)
                )
            return False
        index, cell = next(iter(wordy.items()))
        text = str(cell)
        if (
            index == self.key
            and self.has_tags
            and looks_like_tag(text)
            and (" " not in text or not _WORDY.search(text))
        ):
            return False
        if index == self.key and self.has_tags and self._is_lone_tag(text):
            return False
        if index in self.numeric and len(wordy) == 1 and not re.search(r"[A-Za-z]{3}", text):
            return False
        if not self.has_tags and index == self.key and len(text) <= 40 and len(filled) == 1:
            # One filled cell in the code column: an entry of which nothing is known, or a line between two groups.
            return bool(re.search(r"\s", text.strip())) or _SECTION.fullmatch(folded(text)) is not None
        column = self.mapped.get(index)
        if column is not None and column.field in ("remarks",) and len(wordy) == 1:
            return False
        return not not_live(text)

    def _is_lone_tag(self, text: str) -> bool:
        """Whether a word may be a tag for want of anything else: the sheet has no other column."""
        one_column = not any(index != self.key for index in self.mapped) and not self.match.unknown
        return one_column and not re.search(r"\s", text.strip()) and _SECTION.fullmatch(folded(text)) is None

    def _take_merged_and_struck(self) -> None:
        sheet, first = self.sheet, self.match.first_row
        for top, left, bottom, _ in sheet.merged:
            if bottom <= top or bottom < first or left not in self.mapped:
                continue
            value = sheet.at(top, left)
            if value is None or top < first:
                continue
            for row in range(top + 1, bottom + 1):
                if self.filled >= MOST_MERGED:
                    return
                if sheet.at(row, left) is None:
                    self.instead.setdefault(row, {})[left] = value
                    self.filled += 1
        for (row, column), kept in sheet.partly_struck.items():
            if row >= first and column in self.mapped and row < len(sheet.rows):
                self.instead.setdefault(row, {})[column] = kept.strip() or None

    def result(self) -> RowsOfSheet:
        rows = set(self.data)
        counts = Counter(row for row, _ in self.sheet.struck if row in rows)
        struck = {row for row, count in counts.items() if count * 2 >= self._filled(row)}
        struck |= {row for row in counts if (row, self.key) in self.sheet.struck}
        struck_cells = {
            (row, column)
            for row, column in self.sheet.struck
            if row in rows and row not in struck and column in self.mapped
        }
        for row, column in struck_cells:
            self.instead.setdefault(row, {})[column] = None
        return RowsOfSheet(
            data=tuple(self.data),
            places=tuple(self.places),
            sections=tuple(self.sections),
            notes=tuple(sorted(self.notes)),
            headings=tuple(sorted(self.headings)),
            struck=frozenset(struck),
            struck_cells=frozenset(struck_cells),
            instead=self.instead,
            merged=sum(
                self.sheet.at(row, column) is None
                for row, cells in self.instead.items()
                if row in rows
                for column in cells
            ),
        )
