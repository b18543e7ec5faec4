"""What a run understood of its lists, kept so that a person can mend it and the next run need not guess."""

from __future__ import annotations

from collections.abc import Mapping as Lookup
from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from pathlib import PurePath
from typing import TYPE_CHECKING

from instruments.workbook.heading_words import Finder, Levels
from instruments.workbook.headings import ColumnMatch, SheetMatch

if TYPE_CHECKING:
    from instruments.workbook.lists import SheetReport

__all__ = ["LEAVE_OUT", "NOT_READ", "MappedColumn", "MappedSheet", "Mapping", "mapping_of"]

NOT_READ = ""
"""The kind of a sheet that was not understood: the next run tries again."""

LEAVE_OUT = "leave out"
"""The kind of a sheet that is not to be read."""


@dataclass(frozen=True, slots=True, kw_only=True)
class MappedColumn:
    """One column of a sheet: what it is headed, and what is read from it.

    Attributes
    ----------
    index
        Where it stood, counted from 0.
    row
        The last row of its heading, counted from 0; None where it was not told.
    heading
        As written, its rows joined by a blank. By it the column is found again.
    fields
        The field it is read into; none: the column is kept under its heading. Several: each cell holds
        several values in this order.
    units
        A unit for each of `fields`, blank for none; None: what the heading says.
    unit_of
        Columns, by their own `index`, whose units stand in this one.
    part
        1, 2 ...: the field, of two the second, stands in several columns, and this is one of them; 0: it has
        one column.
    before
        What is written before each of its cells, which leave it out: ``Zone``, or the dash of a tag in parts.
    only
        The first letter of the tags that it speaks of; blank: all.
    decimal
        Its decimal mark, where it is not the sheet's.
    how, likelihood
        How it was matched, and how likely; for the reader, not for the next run.
    line
        Where the mapping's file says so.
    """

    index: int
    row: int | None = None
    heading: str = ""
    fields: tuple[str, ...] = ()
    units: tuple[str, ...] | None = None
    unit_of: tuple[int, ...] = ()
    part: int = 0
    before: str = ""
    only: str = ""
    decimal: str = ""
    how: str = ""
    likelihood: float | None = None
    line: int = field(default=0, compare=False)


@dataclass(frozen=True, slots=True, kw_only=True)
class MappedSheet:
    """One sheet: what it is, where its headings stand, and its columns.

    Attributes
    ----------
    file, sheet
        The file's name without its folder, and the sheet's.
    kind
        The name of its kind, `NOT_READ` or `LEAVE_OUT`.
    why
        Why it was not read.
    heading_rows
        The rows that hold headings, counted from 0; none where each row is a field and its value.
    decimal
        The decimal mark; blank where no number tells.
    encoding, separator
        Of a delimited text.
    turned
        Its tags stand side by side: its lines are the columns here, and its columns the rows.
    """

    file: str
    sheet: str
    kind: str = NOT_READ
    why: str = ""
    heading_rows: tuple[int, ...] = ()
    decimal: str = ""
    encoding: str = ""
    separator: str = ""
    turned: bool = False
    columns: tuple[MappedColumn, ...] = ()
    line: int = field(default=0, compare=False)

    @property
    def is_moved(self) -> bool:
        """Whether the heading's rows are others than those its columns were found in: somebody changed them."""
        stood = {column.row for column in self.columns if column.row is not None}
        return bool(stood and self.heading_rows) and self.heading_rows[-1] not in stood


@dataclass(frozen=True, slots=True, kw_only=True)
class Mapping:
    """How a plant's lists are understood; `source` is the file it was read from."""

    sheets: tuple[MappedSheet, ...] = ()
    source: str = field(default="", compare=False)

    @property
    def files(self) -> tuple[str, ...]:
        """The names of the files, in order."""
        return tuple(dict.fromkeys(each.file for each in self.sheets))


def mapping_of(reports: Sequence[SheetReport]) -> Mapping:
    """Return how sheets were understood.

    Parameters
    ----------
    reports
        What became of each sheet.
    """
    return Mapping(sheets=tuple(map(_sheet, reports)))


def _sheet(report: SheetReport) -> MappedSheet:
    match = report.match
    kind = match.kind.name if match is not None else LEAVE_OUT if report.left_out else NOT_READ
    return MappedSheet(
        file=PurePath(report.file).name,
        sheet=report.sheet,
        kind=kind,
        why=report.skipped,
        heading_rows=tuple(range(match.header_rows[0], match.last_heading_row + 1))
        if match is not None and match.header_rows
        else (),
        decimal=report.decimal,
        encoding=report.encoding,
        separator=report.separator,
        turned=report.turned,
        columns=_columns(match, report.decimals) if match is not None and match.header_rows else (),
    )


def _columns(match: SheetMatch, decimals: Lookup[int, str]) -> tuple[MappedColumn, ...]:
    finder = Finder(match.kind)
    row = match.last_heading_row
    found: dict[int, MappedColumn] = {}
    speaks_for: dict[int, list[int]] = {}
    by_index: dict[int, list[ColumnMatch]] = {}
    for each in match.columns.values():
        by_index.setdefault(each.index, []).append(each)
        if each.unit_index is not None:
            speaks_for.setdefault(each.unit_index, []).append(each.index)
    for index, matches in by_index.items():
        matches.sort(key=lambda each: (bool(each.parts), each.piece or (0, 0)))
        first, last = matches[0], matches[-1]
        heading = match.headings.get(index, "")
        told = tuple(each.unit_text for each in matches)
        silent = len(matches) > 1 or not finder.unit_of(Levels((heading,)), first.column)[1]
        found[index] = MappedColumn(
            index=index,
            row=row,
            heading=heading,
            fields=tuple(each.field for each in matches),
            units=told if any(told) or not silent else None,
            part=1 if last.parts else 0,
            before=last.prefix,
            only=first.only,
            decimal=decimals.get(index, ""),
            how=first.how,
            likelihood=first.likelihood,
        )
    for each in match.columns.values():
        for number, (at, before) in enumerate(each.parts, start=2):
            # Rack and slot of an address may be a card besides.
            own = found.get(at) or MappedColumn(index=at, row=row, heading=match.headings.get(at, ""))
            found[at] = replace(
                own,
                fields=(*own.fields, each.field),
                part=number,
                before=before,
                how=own.how or each.how,
                likelihood=each.likelihood if own.likelihood is None else own.likelihood,
            )
    for index, heading in match.headings.items():
        if index not in found:
            found[index] = MappedColumn(index=index, row=row, heading=heading, how="not understood")
    for index, owners in speaks_for.items():
        own = found.get(index) or MappedColumn(index=index, row=row)
        found[index] = replace(
            own, unit_of=tuple(sorted(set(owners))), how=own.how if own.fields else "unit of its neighbours"
        )
    return tuple(found[index] for index in sorted(found))
