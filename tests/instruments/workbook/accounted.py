"""What must hold of every file that is read: no cell is lost, and by the mapping that it leaves it reads the same."""

from __future__ import annotations

import csv
import dataclasses
import io
import tempfile
from collections.abc import Sequence
from pathlib import Path

import openpyxl

from instruments.workbook.lists import Lists, SheetReport, records_of_sheets
from instruments.workbook.mapping import Mapping, mapping_of
from instruments.workbook.mapping_toml import mapping_text, read_mapping
from instruments.workbook.plant_sheet import PlantEntry
from instruments.workbook.reader import read_file
from tests.instruments.workbook.sheets import KINDS

_SHOWS_NOTHING = (
    " \t\r\n\f\v\u00a0\u2000\u2001\u2002\u2003\u2009\u200b\u200c\u200d\u200e\u200f\u2028\u202f\u2060\u3000\ufeff"
)


def cells_in(path: Path, *, encoding: str = "", separator: str = "", quotes: bool = True) -> int:
    """Count the filled cells of a file by other means than Ferrule's reader."""
    if path.suffix in (".csv", ".tsv", ".txt"):
        text = path.read_bytes().decode({"UTF-8": "utf-8-sig", "UTF-16": "utf-16"}.get(encoding, "cp1252"), "replace")
        if text.lower().startswith("sep="):
            text = text.partition("\n")[2]
        rows = csv.reader(
            io.StringIO(text, newline=""),
            delimiter=separator,
            quoting=csv.QUOTE_MINIMAL if quotes else csv.QUOTE_NONE,
        )
        return sum(bool(cell.strip(_SHOWS_NOTHING)) and cell != '=""' for row in rows for cell in row)
    book = openpyxl.load_workbook(path)
    return sum(
        cell.value is not None and bool(str(cell.value).strip(_SHOWS_NOTHING))
        for sheet in book.worksheets
        for row in sheet.iter_rows()
        for cell in row
    )


def assert_no_cell_is_lost(paths: Sequence[Path], found: Lists) -> None:
    """Each cell of each file was read, or is one that could not be, or stands on a sheet that says why it was not."""
    for path in paths:
        sheets = [each for each in found.sheets if each.file == str(path)]
        assert sheets
        told = sum(each.cells_read + each.cells_unread if each.kind else each.cells_filled for each in sheets)
        first = sheets[0]
        quotes = not any("quotation marks were taken as part of the text" in each for each in first.remarks)
        assert told == cells_in(path, encoding=first.encoding, separator=first.separator, quotes=quotes), path.name
        assert [each.sheet for each in sheets if each.kind is None and not each.skipped] == []
    # Each that could not be read is told.
    assert sum(each.cells_concerned for each in found.problems if each.cell.sheet) == sum(
        each.cells_unread for each in found.sheets
    )


def without_how(mapping: Mapping) -> Mapping:
    """Return a mapping without how its columns were matched."""
    return Mapping(
        sheets=tuple(
            dataclasses.replace(
                sheet, columns=tuple(dataclasses.replace(each, how="", likelihood=None) for each in sheet.columns)
            )
            for sheet in mapping.sheets
        )
    )


def _became(sheet: SheetReport) -> SheetReport:
    """Return what became of a sheet: not how its headings were matched, nor that a text's separator was a guess."""
    return dataclasses.replace(sheet, match=None, remarks=() if sheet.encoding else sheet.remarks)


def assert_mapping_reads_the_same(paths: Sequence[Path], first: Lists, *, stated: Sequence[PlantEntry] = ()) -> None:
    """The mapping of a run, given back to the same lists, gives the same records, problems and mapping, unguessed."""
    mapping = mapping_of(first.sheets)
    again = _read_by(paths, mapping, stated)
    assert [str(each) for each in again.mapping_notes] == []
    assert dict(again.records) == dict(first.records)
    assert again.problems == first.problems
    assert (again.plant, again.index_columns, again.index_file) == (
        first.plant,
        first.index_columns,
        first.index_file,
    )
    assert [_became(each) for each in again.sheets] == [_became(each) for each in first.sheets]
    matches = [each.match for each in again.sheets if each.match is not None and each.match.header_rows]
    assert {column.how for match in matches for column in match.columns.values()} <= {"mapping"}
    assert [match.notes for match in matches if match.notes] == []
    second = mapping_of(again.sheets)
    assert without_how(second) == without_how(mapping)
    assert mapping_text(mapping_of(_read_by(paths, second, stated).sheets), KINDS) == mapping_text(second, KINDS)


def _read_by(paths: Sequence[Path], mapping: Mapping, stated: Sequence[PlantEntry]) -> Lists:
    with tempfile.TemporaryDirectory() as folder:
        file = Path(folder) / "mapping.toml"
        file.write_text(mapping_text(mapping, KINDS), encoding="utf-8")
        read = read_mapping(file, KINDS)
    assert without_how(read) == without_how(mapping)
    told = {each.file: (each.encoding, each.separator) for each in read.sheets}
    sheets = [
        sheet
        for path in paths
        for encoding, separator in [told.get(path.name, ("", ""))]
        for sheet in read_file(path, encoding=encoding, separator=separator)
    ]
    return records_of_sheets(sheets, KINDS, stated=stated, files=tuple(map(str, paths)), mapping=read)
