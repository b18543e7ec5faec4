"""The reader of cells: files in, cells out with where they stood and how they looked, and no meaning."""

from __future__ import annotations

import contextlib
import datetime
import functools
import mmap
import os
import stat
from collections.abc import Iterable, Iterator
from pathlib import PurePath
from typing import TYPE_CHECKING, Final

from instruments.workbook.delimited import read_delimited
from instruments.workbook.number_format import as_text, format_kind
from instruments.workbook.package import LIMITS, Limits, Package, Seen, SeenSheet, find_misfit, look_at
from instruments.workbook.sheet import (
    Sheet,
    UnreadableFile,
    Value,
    cell_address,
    is_error_text,
    shows_nothing,
    take_out_errors,
)

if TYPE_CHECKING:
    from python_calamine import CalamineWorkbook

__all__ = [
    "LIMITS",
    "Limits",
    "Sheet",
    "UnreadableFile",
    "Value",
    "as_text",
    "cell_address",
    "format_kind",
    "read_file",
    "read_files",
]

_ZIP: Final = b"PK\3\4"
_EMPTY_ZIP: Final = b"PK\5\6"
_COMPOUND: Final = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
_TEXT_ENDINGS: Final = frozenset({".csv", ".tsv", ".txt", ".tab", ""})
_WORKBOOK_ENDINGS: Final = frozenset({".xlsx", ".xlsm", ".xltx", ".xltm", ".xls", ".xlsb", ".ods"})
_OTHERS: Final = (
    (b"%PDF", "is a PDF: ask for the list it was printed from"),
    (b"{\\rtf", "is a text document (RTF): copy its table into a workbook"),
    (b"\x89PNG", "is a picture"),
    (b"\xff\xd8\xff", "is a picture"),
    (b"\x1f\x8b", "is a packed file (gzip): unpack it"),
    (b"7z\xbc\xaf", "is a packed file (7z): unpack it"),
    (b"Rar!", "is a packed file (RAR): unpack it"),
)


def read_files(paths: Iterable[str | os.PathLike[str]], *, limits: Limits = LIMITS) -> list[Sheet]:
    """Return the sheets of several files, in order; see `read_file`."""
    return [sheet for path in paths for sheet in read_file(path, limits=limits)]


def read_file(
    path: str | os.PathLike[str], *, limits: Limits = LIMITS, encoding: str = "", separator: str = ""
) -> list[Sheet]:
    """Return the sheets of a file: a workbook (.xlsx, .xlsm) by what it holds, else delimited text.

    Parameters
    ----------
    path : path
        The file.
    limits : Limits, optional
        How large it may be, unpacked and in cells.
    encoding, separator : str, optional
        Of a delimited text, where they are known; see `delimited.read_delimited`.

    Raises
    ------
    UnreadableFile
        There is no such file, or it cannot be read; says where, and what would help.
    """
    file = os.fspath(path)
    try:
        status = os.stat(path)
        if stat.S_ISDIR(status.st_mode):
            raise UnreadableFile(file, "", "is a folder, not a file")
        if not stat.S_ISREG(status.st_mode):
            raise UnreadableFile(file, "", "is no ordinary file")
        if status.st_size == 0:
            raise UnreadableFile(file, "", "is empty")
        if status.st_size > limits.file_bytes:
            raise UnreadableFile(file, "", f"has {status.st_size:,} bytes; at most {limits.file_bytes:,} are read")
        with open(path, "rb") as stream:
            head = stream.read(4096)
            if head.startswith(_COMPOUND):
                raise UnreadableFile(file, "", _compound(stream.fileno()))
            if head.startswith(_ZIP):
                data = None
            else:
                _not_something_else(file, head)
                data = head + stream.read()
    except FileNotFoundError:
        raise UnreadableFile(file, "", "there is no such file") from None
    except OSError as error:
        raise UnreadableFile(file, "", f"cannot be opened ({error.strerror})") from None
    except ValueError:
        raise UnreadableFile(repr(file), "", "is no name a file can have") from None
    if data is None:
        return _read_workbook(path, file, limits)
    return [read_delimited(data, file=file, max_cells=limits.cells, encoding=encoding, separator=separator)]


def _compound(descriptor: int) -> str:
    """Say what an old office document is: its directory names its streams in UTF-16."""
    with mmap.mmap(descriptor, 0, access=mmap.ACCESS_READ) as view:
        if any(view.find(name.encode("utf-16-le")) >= 0 for name in ("EncryptedPackage", "EncryptionInfo")):
            return "is protected by a password: save it without one"
        if any(view.find(name.encode("utf-16-le")) >= 0 for name in ("Workbook", "Book\0")):
            return "is a workbook of the old kind (.xls): save it as .xlsx"
    return "is an office document of an old kind, not a workbook: save the list as .xlsx"


def _not_something_else(file: str, head: bytes) -> None:
    """Refuse what holds neither workbook nor delimited text, and text under a workbook's name."""
    if head.startswith(_EMPTY_ZIP):
        raise UnreadableFile(file, "", "is a zip file with nothing in it")
    for beginning, what in _OTHERS:
        if head.startswith(beginning):
            raise UnreadableFile(file, "", what)
    start = head.lstrip(b"\xef\xbb\xbf \t\r\n").lower()
    if start.startswith((b"<!doctype html", b"<html", b"<table")):
        raise UnreadableFile(file, "", "is a web page (HTML), not a workbook: open it and save it as .xlsx")
    if start.startswith(b"<?xml"):
        raise UnreadableFile(file, "", "is an XML file, not a workbook: open it and save it as .xlsx")
    ending = PurePath(file).suffix.lower()
    if ending in _WORKBOOK_ENDINGS:
        raise UnreadableFile(
            file,
            "",
            f"is not a workbook, though its name ends in {ending}; delimited text must be named .csv",
        )


class _Texts(dict[str, str | None]):
    """Each text once, however many cells it stands in: None where it shows nothing."""

    has_errors = False

    def __missing__(self, text: str) -> str | None:
        kept = None if shows_nothing(text) else text
        self[text] = kept
        if text[:1] in ("#", "E") and is_error_text(text):
            self.has_errors = True
        return kept


def _read_workbook(path: str | os.PathLike[str], file: str, limits: Limits) -> list[Sheet]:
    with Package(path, file=file, limits=limits) as package:
        seen = look_at(package)
        try:
            return _read_values(package, seen)
        finally:
            if seen.copy is not None:
                seen.copy.close()


def _read_values(package: Package, seen: Seen) -> list[Sheet]:
    """Read the values of every sheet and join them with what was seen."""
    # Imported here: delimited text needs no workbook reader.
    from python_calamine import CalamineWorkbook

    texts = _Texts()
    with _failing(package, ""):
        workbook = (
            CalamineWorkbook.from_path(package.path) if seen.copy is None else CalamineWorkbook.from_filelike(seen.copy)
        )
    with workbook:
        rows_of = functools.partial(_rows, package, workbook, texts)
        stray: dict[int, dict[tuple[int, int], Value]] = {}
        for index, (number, positions) in enumerate(seen.far, len(seen.sheets)):
            cells = rows_of(index, seen.sheets[number])
            stray[number] = {
                position: row[0] for position, row in zip(positions, cells, strict=False) if row and row[0] is not None
            }
        return [
            _joined(package.file, sheet, rows_of(seen.index(number), sheet), texts, stray.get(number, {}))
            for number, sheet in enumerate(seen.sheets)
        ]


@contextlib.contextmanager
def _failing(package: Package, place: str, sheet: SeenSheet | None = None) -> Iterator[None]:
    """Turn what the value reader raises into an UnreadableFile that names the cell, where one is to blame."""
    try:
        yield
    except BaseException as error:
        # A panic is no Exception; it can be caught where the library was built to unwind.
        if not isinstance(error, Exception) and type(error).__name__ != "PanicException":
            raise
        if sheet is not None and (misfit := find_misfit(package, sheet)) is not None:
            raise UnreadableFile(package.file, f"{place}, cell {misfit[0]}", misfit[1]) from None
        said = " ".join(str(error).split())[:200]
        raise UnreadableFile(package.file, place, f"cannot be read ({said})") from None


def _rows(
    package: Package, workbook: CalamineWorkbook, texts: _Texts, index: int, seen: SeenSheet
) -> list[list[Value]]:
    """Return the values of a sheet from A1 on, every row as long as the widest."""
    rows: list[list[Value]] = []
    with _failing(package, f"sheet {seen.entry.name!r}", seen):
        sheet = workbook.get_sheet_by_index(index)
        if sheet.end is None:
            return rows
        height, width = sheet.end[0] + 1, sheet.end[1] + 1
        # Row by row: the whole sheet at once would stand in memory twice.
        for raw in sheet.iter_rows():
            row: list[Value] = [
                texts[value]
                if value.__class__ is str
                else (value if value.__class__ is float and value - value == 0.0 else _value(value, texts))
                for value in raw
            ]
            # Blank columns and rows before the first filled ones are left out, or not, by version.
            rows.append(row if len(row) == width else [None] * (width - len(row)) + row)
        if len(rows) != height:
            rows[:0] = [[None] * width for _ in range(height - len(rows))]
    return rows


def _value(value: object, texts: _Texts) -> Value:
    """Return a value that is neither a text nor an ordinary number."""
    if isinstance(value, bool):
        return value
    if isinstance(value, float):
        texts.has_errors = True  # not finite
        return value
    if isinstance(value, int):
        return float(value)
    if isinstance(value, datetime.date | datetime.time):
        return value
    if isinstance(value, datetime.timedelta):
        minutes, seconds = divmod(round(value.total_seconds()), 60)
        hours, minutes = divmod(minutes, 60)
        return f"{hours}:{minutes:02}:{seconds:02}"
    return texts[str(value)]


def _joined(
    file: str, seen: SeenSheet, rows: list[list[Value]], texts: _Texts, far: dict[tuple[int, int], Value]
) -> Sheet:
    look = seen.look
    height, width = len(rows), len(rows[0]) if rows else 0
    if height > look.height or width > look.width:
        raise UnreadableFile(
            file,
            f"sheet {seen.entry.name!r}",
            f"has cells as far as {cell_address(height - 1, width - 1)} that stand nowhere in its part",
        )

    def near(position: tuple[int, int]) -> bool:
        return position[0] < look.height and position[1] < look.width

    errors = take_out_errors(rows) if texts.has_errors else {}
    errors |= {position: error for position, error in look.errors.items() if near(position)}
    no_value = {position for position in look.no_value if near(position)}
    far |= {position: error for position, error in look.errors.items() if not near(position)}
    far |= {position: None for position in look.no_value if not near(position)}
    # Formulas without a result are blanks to the value reader, which ends where its last value stands.
    reach = [*errors, *no_value]
    if reach:
        height = max(height, 1 + max(row for row, _ in reach))
        width = max(width, 1 + max(column for _, column in reach))
    for row in rows:
        row += [None] * (width - len(row))
    rows += ([None] * width for _ in range(height - len(rows)))
    notes = list(seen.notes)
    if far:
        shown = ", ".join(cell_address(*position) for position in sorted(far)[:5])
        notes.append(
            f"filled cells far from the list, left out of it: {len(far)}, at {shown}" + (" ..." if len(far) > 5 else "")
        )
    merged, overlapping = _merged(look.merged, height, width)
    if overlapping:
        notes.append(f"merged ranges that overlap others, passed over: {overlapping}")
    return Sheet(
        file=file,
        name=seen.entry.name,
        visible=seen.entry.visible,
        rows=rows,
        errors=errors,
        no_value=no_value,
        far=far,
        merged=merged,
        hidden_rows=frozenset(row for row in look.hidden_rows if row < height),
        hidden_columns=frozenset(column for column in look.hidden_columns if column < width),
        coloured_rows={row: colour for row, colour in look.coloured_rows.items() if row < height},
        struck={position for position in look.struck if near(position)},
        partly_struck={position: text for position, text in look.partly_struck.items() if near(position)},
        number_formats={position: code for position, code in look.number_formats.items() if near(position)},
        comments=seen.comments,
        shapes=seen.shapes,
        cells_filled=sum(len(row) - row.count(None) for row in rows) + len(errors) + len(no_value) + len(far),
        notes=tuple(notes),
    )


def _merged(
    ranges: list[tuple[int, int, int, int]], height: int, width: int
) -> tuple[tuple[tuple[int, int, int, int], ...], int]:
    """Return the merged ranges within a sheet, and how many were passed over.

    Ranges that do not overlap cover no more than the sheet; a file that says otherwise would have it filled
    over and over.
    """
    kept: list[tuple[int, int, int, int]] = []
    left = height * width
    passed_over = 0
    for top, first, bottom, last in sorted(ranges):
        bottom, last = min(bottom, height - 1), min(last, width - 1)
        area = (bottom - top + 1) * (last - first + 1)
        if top > bottom or first > last or area == 1:
            continue
        if area > left:
            passed_over += 1
            continue
        left -= area
        kept.append((top, first, bottom, last))
    return tuple(kept), passed_over
