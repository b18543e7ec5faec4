"""Reading delimited text: its encoding, what separates its columns, and whether its quotes are quotes."""

from __future__ import annotations

import codecs
import csv
import io
import re
from collections import Counter
from collections.abc import Iterable
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

MAX_CELLS: Final = 20_000_000
"""Rows times columns, blank ones included."""

_SAMPLE: Final = 400
"""Records by which the separator is chosen."""

_SAID: Final = re.compile(r"sep=(.)", re.IGNORECASE)
_FORMULA_TEXT: Final = re.compile(r'="((?:[^"]|"")*)"')
_UTF_16: Final = (codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE)


def read_delimited(data: bytes, *, file: str, max_cells: int = MAX_CELLS) -> Sheet:
    """Read a delimited text file as one sheet; every cell is a text or None.

    Parameters
    ----------
    data : bytes
        What the file holds.
    file : str
        Its name; without folder and ending it is the name of the sheet.
    max_cells : int
        Rows times columns that are read at most.

    Raises
    ------
    UnreadableFile
        It holds NUL characters, its encoding cannot be read, a quotation mark is not closed, or it is too
        large.
    """
    text, notes = _decoded(data, file)
    if (at := text.find("\0")) >= 0:
        raise UnreadableFile(
            file,
            f"line {text.count(chr(10), 0, at) + 1}",
            "holds a NUL character, as no text does: save it as CSV in UTF-8",
        )
    separator = None
    first, _, rest = text.partition("\n")
    if said := _SAID.fullmatch(first.rstrip("\r")):
        # A spreadsheet does not show this line, so the addresses count from the next.
        separator, text = said[1], rest
    if separator is None:
        separator = find_separator(text)
        if separator != "," and shape_of(text, separator)[1] > 1:
            notes.append(f"columns taken to be separated by {NAMES[separator]}")
    records, quotes_are_text = _records(text, separator, file)
    if quotes_are_text:
        notes.append('the quotation marks were taken as part of the text (") and not as quotes')
    width = max(map(len, records), default=0)
    while records and not any(records[-1]):
        records.pop()
    if len(records) > MAX_ROWS or width > MAX_COLUMNS or len(records) * width > max_cells:
        raise UnreadableFile(
            file, "", f"has {len(records):,} rows and {width:,} columns; at most {max_cells:,} cells are read"
        )
    ragged = _ragged(records)
    if ragged:
        rows = ", ".join(str(row + 1) for row in sorted(ragged)[:10])
        notes.append(
            f"rows with more or fewer cells than is usual here: {len(ragged)}, in row {rows}"
            + (" ..." if len(ragged) > 10 else "")
        )
    rows_read: list[list[Value]] = []
    for record in records:
        row: list[Value] = [_value(cell) for cell in record]
        row += [None] * (width - len(row))
        rows_read.append(row)
    errors = take_out_errors(rows_read)
    filled = sum(len(row) - row.count(None) for row in rows_read)
    return Sheet(
        file=file,
        name=PurePath(file).stem,
        rows=rows_read,
        errors=errors,
        ragged=ragged,
        cells_filled=filled + len(errors),
        notes=tuple(notes),
    )


def _value(cell: str) -> Value:
    if not cell or shows_nothing(cell):
        return None
    if cell.startswith('="') and (quoted := _FORMULA_TEXT.fullmatch(cell)):
        # ="0034" is how a list says that the zeros belong to the text.
        return quoted[1].replace('""', '"') or None
    return cell


def _decoded(data: bytes, file: str) -> tuple[str, list[str]]:
    notes: list[str] = []
    if data.startswith(_UTF_16):
        try:
            return data.decode("utf-16"), notes
        except UnicodeDecodeError as error:
            raise UnreadableFile(
                file, "", f"says that it is in UTF-16, and is not from byte {error.start} on"
            ) from None
    try:
        return data.decode("utf-8-sig"), notes
    except UnicodeDecodeError:
        pass
    # A file in UTF-8 with a few damaged bytes must not have every degree sign read as two other characters.
    mended = data.decode("utf-8-sig", "replace")
    damaged = mended.count("\ufffd")
    beyond_ascii = sum(1 for character in mended if character > "\x7f") - damaged
    if beyond_ascii > damaged:
        notes.append(f"{damaged} characters are damaged and stand as \ufffd")
        return mended, notes
    text = data.decode("cp1252", "replace")
    notes.append("not in UTF-8: read as Windows-1252")
    if unknown := text.count("\ufffd"):
        notes.append(f"{unknown} characters are unknown there and stand as \ufffd")
    return text, notes


def _parsed(text: str, separator: str, *, strict: bool = True) -> Iterable[list[str]]:
    return csv.reader(io.StringIO(text, newline=""), delimiter=separator, strict=strict)


def shape_of(text: str, separator: str) -> tuple[float, int]:
    """Return the commonest number of cells above one, after the share of the first records that has it."""
    widths: list[int] = []
    try:
        for record in _parsed(text, separator, strict=False):
            if any(record):
                widths.append(len(record))
            if len(widths) == _SAMPLE:
                break
    except csv.Error:
        pass
    usual = Counter(width for width in widths if width > 1).most_common()
    if not usual:
        return 0.0, 1
    # The wider of equally common ones: title rows are narrow.
    number, times = max(usual, key=lambda found: (found[1], found[0]))
    return times / len(widths), number


def find_separator(text: str) -> str:
    r"""Return what separates the columns: the mark that cuts most rows into equally many cells, and many.

    >>> find_separator("tag;lrv;urv\nPT-1;0,5;1,5\nPT-2;0;2,5\n")
    ';'
    >>> find_separator("tag\tservice\nPT-1\tfeed, hot\n")
    '\t'
    """

    def weight(separator: str) -> float:
        share, number = shape_of(text, separator)
        return share * (number - 1)

    return max(SEPARATORS, key=weight)


def _records(text: str, separator: str, file: str) -> tuple[list[list[str]], bool]:
    """Return the records, and whether quotation marks had to be taken as text."""
    records: list[list[str]] = []
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=separator, strict=True)
    begun = 1
    try:
        for record in reader:
            records.append(record)
            begun = reader.line_num + 1
    except csv.Error as error:
        # "WC for inches of water opens a quote that the next "WC closes, and a row is lost in between.
        # Where each line makes a whole row by itself, nobody quotes in this file.
        plain = _unquoted(text, separator)
        if plain is not None:
            return plain, True
        raise UnreadableFile(
            file,
            f"line {begun}",
            f"a quotation mark in the row that begins here is not closed where its cell ends ({error})",
        ) from None
    return records, False


def _unquoted(text: str, separator: str) -> list[list[str]] | None:
    try:
        records = list(
            csv.reader(
                io.StringIO(text, newline=""), delimiter=separator, quoting=csv.QUOTE_NONE, strict=True
            )
        )
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
        row: len(record)
        for row, record in enumerate(records)
        if len(record) != usual and sum(map(bool, record)) > 1
    }
