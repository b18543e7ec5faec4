"""Reading delimited text: its encoding, what separates its columns, and whether its quotes are quotes."""

from __future__ import annotations

import codecs
import csv
import io
import itertools
import re
from collections import Counter
from collections.abc import Iterable, Iterator
from pathlib import PurePath
from typing import Final

from instruments.workbook.sheet import (
    MAX_COLUMNS,
    MAX_ROWS,
    Sheet,
    UnreadableFile,
    Value,
    shows_nothing,
    take_out_errors,
)

SEPARATORS: Final = (",", ";", "\t", "|")
NAMES: Final = {",": "commas", ";": "semicolons", "\t": "tabs", "|": "bars"}

ENCODINGS: Final = {"UTF-8": "utf-8-sig", "UTF-16": "utf-16", "Windows-1252": "cp1252"}
"""What people call the encodings that are read, and what Python does."""

MAX_CELLS: Final = 20_000_000
"""Rows times columns, blank ones included."""

MAX_LINE: Final = 8_000_000
"""Characters in a line that are read at most."""

_SAMPLE: Final = 400
"""Records by which the separator is chosen, of a million characters at most."""

_SAID: Final = re.compile(r"sep=([^\w\s\"]|\t)", re.IGNORECASE)
_FORMULA_TEXT: Final = re.compile(r'="((?:[^"]|"")*)"')
_UTF_16: Final = (codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE)


class _Text:
    """The lines of a text, decoded as they are asked for: a whole text may take four times its bytes."""

    def __init__(self, data: bytes, file: str, encoding: str = "") -> None:
        self.file = file
        self.notes: list[str] = []
        self._data = data
        self._encoding, self._errors = self._found(encoding)
        first = next(self._lines(), "").rstrip("\r\n")
        # A spreadsheet does not show a line that says the separator, so the addresses count from the next.
        self.said = _SAID.fullmatch(first)

    def lines(self) -> Iterator[str]:
        """Return the lines, each with its end."""
        return itertools.islice(self._lines(), 1 if self.said else 0, None)

    def line_number(self, number: int) -> str:
        """Return the place of a line, counted from 1 in `lines`."""
        return f"line {number + bool(self.said)}"

    def _lines(self) -> Iterator[str]:
        stream: Iterable[str]
        if self._errors == _EITHER:
            stream = (piece for line in io.BytesIO(self._data) for piece in io.StringIO(_either(line), newline=""))
        else:
            stream = io.TextIOWrapper(io.BytesIO(self._data), self._encoding, self._errors, newline="")
        for number, line in enumerate(stream, 1):
            if "\0" in line:
                raise UnreadableFile(
                    self.file,
                    f"line {number}",
                    "holds a NUL character, as no text does: save it as CSV in UTF-8",
                )
            if len(line) > MAX_LINE:
                raise UnreadableFile(
                    self.file, f"line {number}", f"is longer than {MAX_LINE:,} characters, as no row is"
                )
            yield line

    @property
    def encoding(self) -> str:
        """The name that people have for the encoding."""
        return next(name for name, codec in ENCODINGS.items() if codec == self._encoding)

    def _found(self, told: str) -> tuple[str, str]:
        """Return the encoding, and what is done about bytes that are none in it.

        What the bytes say goes before what was told: of all texts, hardly any but one in UTF-8 can be read so.
        """
        data = self._data
        if data.startswith(_UTF_16):
            try:
                for _ in _decoded(data, "utf-16", "strict"):
                    pass
            except UnicodeError:
                raise UnreadableFile(self.file, "", "says that it is in UTF-16, and is not all of it") from None
            return "utf-16", "strict"
        damaged = beyond_ascii = 0
        for piece in _decoded(data, "utf-8-sig", "replace"):
            damaged += piece.count("\ufffd")
            if not piece.isascii():
                beyond_ascii += sum(1 for character in piece if character > "\x7f")
        if not damaged:
            return "utf-8-sig", "strict"
        if told != "Windows-1252" and beyond_ascii > damaged and (others := _lines_of_another_hand(data)):
            shown = ", ".join(map(str, others[:10])) + (" ..." if len(others) > 10 else "")
            self.notes.append(f"in UTF-8, but for lines read as Windows-1252: {len(others)}, line {shown}")
            return "utf-8-sig", _EITHER
        # A text with a few damaged bytes must not have every degree sign read as two other characters.
        if told == "UTF-8" or (beyond_ascii > 2 * damaged and told != "Windows-1252"):
            self.notes.append(f"damaged characters, shown as \ufffd: {damaged}")
            return "utf-8-sig", "replace"
        if told != "Windows-1252":
            self.notes.append("not in UTF-8: read as Windows-1252")
        if unknown := sum(piece.count("\ufffd") for piece in _decoded(data, "cp1252", "replace")):
            self.notes.append(f"characters that Windows-1252 has not, shown as \ufffd: {unknown}")
        return "cp1252", "replace"


_EITHER: Final = "line by line"
"""Said in place of a way to take bytes that are none: each line is in UTF-8 or else in Windows-1252."""

_AS_PEOPLE_WRITE: Final = re.compile("[\u00a0-\u024f\u0370-\u04ff\u2010-\u22ff\ufeff]+")


def _either(line: bytes) -> str:
    try:
        return line.decode("utf-8").removeprefix("\ufeff")
    except UnicodeDecodeError:
        return line.decode("cp1252")


def _lines_of_another_hand(data: bytes) -> list[int]:
    """Return the lines in Windows-1252 of a text that was put together from two; nothing where it is damaged.

    In a text of two hands each line is wholly one or the other. A line that holds characters in UTF-8 and bytes
    that are none is damaged, and so is one whose bytes make no letter or sign of any word.
    """
    others: list[int] = []
    good = 0
    for number, line in enumerate(io.BytesIO(data), 1):
        if line.isascii():
            continue
        try:
            beyond = "".join(sign for sign in line.decode("utf-8") if sign > "\x7f")
        except UnicodeDecodeError:
            if any(sign > "\x7f" for sign in line.decode("utf-8", "ignore")):
                return []
            try:
                text = line.decode("cp1252")
            except UnicodeDecodeError:
                return []
            if _IN_WORDS.search(text) is None:
                return []
            others.append(number)
        else:
            # Two letters of Windows-1252 may by chance be one in UTF-8, but hardly one that is written.
            if not _AS_PEOPLE_WRITE.fullmatch(beyond):
                return []
            good += 1
    return others if good else []


# Länge, °C, m³/h, 1½": what lists have beyond ASCII.
_IN_WORDS: Final = re.compile("[À-ÖØ-öø-ÿ][a-z]|[a-z][À-ÖØ-öø-ÿ]|[°º²³µ½¼¾±\u2013\u2014\u2018-\u201d\u00a0]")


def _decoded(data: bytes, encoding: str, errors: str) -> Iterator[str]:
    decoder = codecs.getincrementaldecoder(encoding)(errors)
    for at in range(0, len(data), 1 << 20):
        yield decoder.decode(data[at : at + (1 << 20)])
    yield decoder.decode(b"", final=True)


def read_delimited(
    data: bytes, *, file: str, max_cells: int = MAX_CELLS, encoding: str = "", separator: str = ""
) -> Sheet:
    """Read a delimited text file as one sheet; every cell is a text or None.

    Parameters
    ----------
    data : bytes
        What the file holds.
    file : str
        Its name; without folder and ending it is the name of the sheet.
    max_cells : int
        Rows times columns that are read at most.
    encoding, separator : str
        What they are, where that is known: one of `ENCODINGS`, one of `SEPARATORS`. Where the bytes say
        otherwise, or the separator parts nothing, they are found out as ever.

    Raises
    ------
    UnreadableFile
        It holds NUL characters, its encoding cannot be read, a quotation mark is not closed, or it is too
        large.
    """
    text = _Text(data, file, encoding)
    notes = text.notes
    if text.said:
        separator = text.said[1]
    elif separator not in SEPARATORS or _shape("".join(itertools.islice(text.lines(), _SAMPLE)), separator)[1] < 2:
        separator, columns = find_separator(text.lines())
        if separator != "," and columns > 1:
            notes.append(f"columns taken to be separated by {NAMES[separator]}")
    records, quotes_are_text = _records(text, separator, max_cells)
    if quotes_are_text:
        notes.append('the quotation marks were taken as part of the text (") and not as quotes')
    while records and all(map(shows_nothing, records[-1])):
        records.pop()
    width = max(map(len, records), default=0)
    if len(records) > MAX_ROWS or width > MAX_COLUMNS or len(records) * width > max_cells:
        raise UnreadableFile(
            file, "", f"has {len(records):,} rows and {width:,} columns; at most {max_cells:,} cells are read"
        )
    ragged = _ragged(records)
    if ragged:
        shown = ", ".join(str(row + 1) for row in sorted(ragged)[:10])
        notes.append(
            f"rows with more or fewer cells than is usual here: {len(ragged)}, in row {shown}"
            + (" ..." if len(ragged) > 10 else "")
        )
    rows: list[list[Value]] = []
    texts: dict[str, Value] = {}
    for record in records:
        row = [texts[cell] if cell in texts else texts.setdefault(cell, _value(cell)) for cell in record]
        row += [None] * (width - len(row))
        rows.append(row)
    errors = take_out_errors(rows)
    return Sheet(
        file=file,
        name=PurePath(file).stem,
        rows=rows,
        errors=errors,
        ragged=ragged,
        cells_filled=sum(len(row) - row.count(None) for row in rows) + len(errors),
        notes=tuple(notes),
        encoding=text.encoding,
        separator=separator,
    )


def _value(cell: str) -> Value:
    if not cell or shows_nothing(cell):
        return None
    if cell.startswith('="') and (quoted := _FORMULA_TEXT.fullmatch(cell)):
        # ="0034" is how a list says that the zeros belong to the text.
        return quoted[1].replace('""', '"') or None
    return cell


def _shape(sample: str, separator: str) -> tuple[float, int]:
    """Return the commonest number of cells above one, after the share of the records that has it."""
    widths: list[int] = []
    try:
        for record in csv.reader(io.StringIO(sample, newline=""), delimiter=separator):
            if any(record):
                widths.append(len(record))
            if len(widths) == _SAMPLE:
                break
    except csv.Error:
        pass
    usual = Counter(width for width in widths if width > 1)
    if not usual:
        return 0.0, 1
    # The wider of equally common ones: title rows are narrow.
    number, times = max(usual.items(), key=lambda found: (found[1], found[0]))
    return times / len(widths), number


def find_separator(lines: Iterable[str]) -> tuple[str, int]:
    r"""Return the mark that cuts most rows into equally many cells, and many, and how many these are.

    >>> find_separator(["tag;lrv;urv\n", "PT-1;0,5;1,5\n", "PT-2;0;2,5\n"])
    (';', 3)
    >>> find_separator(["tag\tservice\n", "PT-1\tfeed, hot\n"])
    ('\t', 2)
    """
    kept: list[str] = []
    length = 0
    for line in itertools.islice(lines, _SAMPLE):
        kept.append(line[: 1 << 20])
        length += len(line)
        if length > 1 << 20:
            break
    sample = "".join(kept)
    shapes = {separator: _shape(sample, separator) for separator in SEPARATORS}
    # Squared: semicolons in the texts of a list of two columns cut most of its rows into three.
    best = max(SEPARATORS, key=lambda separator: shapes[separator][0] ** 2 * (shapes[separator][1] - 1))
    return best, shapes[best][1]


def _records(text: _Text, separator: str, max_cells: int) -> tuple[list[list[str]], bool]:
    """Return the records, and whether quotation marks had to be taken as text."""
    records: list[list[str]] = []
    reader = csv.reader(text.lines(), delimiter=separator, strict=True)
    begun = 1
    try:
        for record in _counted(reader, text.file, max_cells):
            records.append(record)
            begun = reader.line_num + 1
    except csv.Error as error:
        # "WC for inches of water opens a quote that the next "WC closes, and a row is lost in between.
        # Where each line makes a whole row by itself, nobody quotes in this file.
        plain = _unquoted(text, separator, max_cells)
        if plain is not None:
            return plain, True
        raise UnreadableFile(
            text.file,
            text.line_number(begun),
            f"a quotation mark in the row that begins here is not closed where its cell ends ({error})",
        ) from None
    return records, False


def _counted(records: Iterable[list[str]], file: str, max_cells: int) -> Iterator[list[str]]:
    cells = 0
    for record in records:
        cells += len(record) or 1
        if cells > max_cells:
            raise UnreadableFile(file, "", f"has more than {max_cells:,} cells, and no more are read")
        yield record


def _unquoted(text: _Text, separator: str, max_cells: int) -> list[list[str]] | None:
    reader = csv.reader(text.lines(), delimiter=separator, quoting=csv.QUOTE_NONE, strict=True)
    try:
        records = list(_counted(reader, text.file, max_cells))
    except csv.Error:
        return None
    widths = Counter(len(record) for record in records if any(record))
    usual = widths.most_common(1)[0][0] if widths else 0
    if usual < 2 or any(width > usual for width in widths) or widths[usual] < 0.9 * widths.total():
        return None
    return [[_unwrapped(cell) for cell in record] for record in records]


def _unwrapped(cell: str) -> str:
    if len(cell) > 1 and cell[0] == cell[-1] == '"':
        return cell[1:-1].replace('""', '"')
    return cell


def _ragged(records: list[list[str]]) -> dict[int, int]:
    """Return the rows that have another number of cells than is usual, but for titles and blank rows."""
    widths = Counter(len(record) for record in records if sum(map(bool, record)) > 1)
    if not widths:
        return {}
    usual = max(widths.items(), key=lambda found: (found[1], found[0]))[0]
    return {
        row: len(record) for row, record in enumerate(records) if len(record) != usual and sum(map(bool, record)) > 1
    }
