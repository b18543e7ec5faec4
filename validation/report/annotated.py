"""The annotated copy of a list: which cells are marked, in which colour, and what stands in their comments."""

from __future__ import annotations

import tempfile
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path, PurePath
from typing import Final

from instruments.columns import INSTRUMENTS
from instruments.origin import Cell
from instruments.workbook.annotate.comments import Passage
from instruments.workbook.annotate.marked_copy import Mark, MarkedCopy, write_marked_copy
from instruments.workbook.annotate.styles import Fill
from instruments.workbook.annotate.text_workbook import write_text_workbook
from instruments.workbook.lists import SheetReport
from instruments.workbook.problem import CellProblem
from instruments.workbook.reader import read_file
from instruments.workbook.sheet import UnreadableFile
from validation.audit import Audit
from validation.finding import Finding, Outcome, Severity
from validation.report.causes import some_of
from validation.report.cell_text import cell_text

__all__ = ["AUTHOR", "Annotated", "Annotations", "annotated_names"]

AUTHOR: Final = "Ferrule"

_FILLS: Final[Mapping[str, Fill]] = {
    "danger": Fill(pale="FFB3B3", dark="9C0006"),
    "fault": Fill(pale="FFD28A", dark="9C5700"),
    "gap": Fill(pale="BDD7EE", dark="1F4E79"),
    "review": Fill(pale="DCCBEF", dark="5B2C83"),
}
_MENDED: Final = Mark(
    fill=Fill(pale="C6E7C8", dark="1E5B24"), text=(Passage("Found by an earlier audit, and not by the last one."),)
)
_LEGEND: Final = (
    "Screening aid - requires review by a competent person. Marked by Ferrule: red danger, orange fault, blue gap, "
    "violet to be reviewed; each comment says what was found in its cell. The whole list stands in exceptions.xlsx."
)
_MOST_ENTRIES: Final = 8
_MOST_FIXES: Final = 3
_MOST_LETTERS: Final = 600
"""Letters of one entry's message or fix; the exception list has them all."""

_ZIP: Final = b"PK\3\4"
_ENDINGS: Final = frozenset({".xlsx", ".xlsm", ".xltx", ".xltm"})

Place = tuple[int, int]


@dataclass(frozen=True, slots=True, kw_only=True)
class Annotated:
    """What became of one annotated copy: the lines that the summary has for it."""

    cells: int
    sheets: int
    remarks: tuple[str, ...] = ()

    @property
    def lines(self) -> tuple[str, ...]:
        """What the summary says of it.

        >>> Annotated(cells=1, sheets=1).lines, Annotated(cells=1200, sheets=3).lines
        (('1 cell marked on 1 sheet',), ('1,200 cells marked on 3 sheets',))
        """
        cells, sheets = (
            f"{number:,} {what}{'' if number == 1 else 's'}"
            for number, what in ((self.cells, "cell"), (self.sheets, "sheet"))
        )
        return (f"{cells} marked on {sheets}" if self.cells else "no cell marked", *self.remarks)


@dataclass(frozen=True, slots=True)
class _Entry:
    """One thing said in a comment, with all the subjects that it is said of."""

    rank: int
    look: str
    code: str
    part: str
    message: str
    fixes: str


def annotated_names(files: Sequence[str]) -> dict[str, str]:
    """Return what the annotated copy of each list is called.

    A single .xlsx or .csv has ``annotated.xlsx``; where there are several, and where a workbook has
    macros or is a template, the copy bears the name and ending of its list.

    >>> annotated_names(["in/index.xlsx"]), annotated_names(["in/index.xlsm"])
    ({'in/index.xlsx': 'annotated.xlsx'}, {'in/index.xlsm': 'index.annotated.xlsm'})
    >>> list(annotated_names(["index.xlsx", "areas.csv", "old/Index.xlsx"]).values())
    ['index.annotated.xlsx', 'areas.annotated.xlsx', 'Index-2.annotated.xlsx']
    """
    names: dict[str, str] = {}
    taken: set[str] = set()
    for file in dict.fromkeys(files):
        path = PurePath(file)
        ending = path.suffix.lower() if path.suffix.lower() in _ENDINGS else ".xlsx"
        name = "annotated.xlsx" if len(files) == 1 and ending == ".xlsx" else f"{path.stem}.annotated{ending}"
        number = 1
        while name.casefold() in taken:
            number += 1
            name = f"{path.stem}-{number}.annotated{ending}"
        taken.add(name.casefold())
        names[file] = name
    return names


class Annotations:
    """What an audit has to say at the cells of its lists.

    Parameters
    ----------
    result
        What the rules said.
    """

    def __init__(self, result: Audit) -> None:
        self._lists = result.plant.lists
        self._headings = _column_headings(self._lists.problems, self._lists.sheets)
        self._said: dict[str, dict[str, dict[Place, dict[_Entry, list[str]]]]] = {}
        told: set[Cell] = set()
        home = _home(result)
        for finding in result.findings:
            entry = _entry_of(finding)
            cells = self._cells(finding)
            if finding.rule == "DAT09":
                told.update(finding.cells)
            for cell in cells or ([home] if home else ()):
                self._say(cell, entry, finding.subject)
        for problem in self._lists.problems:
            if problem.cell not in told:
                self._say(self._headings.get(problem.cell, problem.cell), _unread(problem), problem.subject)

    def _cells(self, finding: Finding) -> list[Cell]:
        if finding.rule == "DAT09":
            return [self._headings.get(cell, cell) for cell in finding.cells]
        return list(dict.fromkeys(finding.cells))

    def _say(self, cell: Cell, entry: _Entry, subject: str) -> None:
        sheet = self._said.setdefault(cell.file, {}).setdefault(cell.sheet, {})
        subjects = sheet.setdefault((cell.row - 1, cell.column), {}).setdefault(entry, [])
        if subject and subject not in subjects[-1:]:
            subjects.append(subject)

    def marks(self, file: str) -> dict[str, dict[Place, Mark]]:
        """Return the marks of one list, by sheet and cell."""
        found: dict[str, dict[Place, Mark]] = {}
        for sheet, cells in self._said.get(file, {}).items():
            first = min(cells)
            found[sheet] = {place: _mark(entries, first=place == first) for place, entries in cells.items()}
        return found

    def write(self, file: str, path: Path) -> Annotated:
        """Write the annotated copy of one list.

        Parameters
        ----------
        file
            The list, as it was given.
        path
            The copy.

        Raises
        ------
        UnreadableFile
            The list cannot be read again, or has parts that cannot be added to.
        OSError
            The copy cannot be written.
        """
        marks = self.marks(file)
        if _is_workbook(file):
            return _annotated(write_marked_copy(file, path, marks, author=AUTHOR, mended=_MENDED))
        with tempfile.TemporaryDirectory(prefix="ferrule-") as folder:
            plain = Path(folder) / "list.xlsx"
            name = write_text_workbook(read_file(file)[0], plain)
            on_its_sheet = next(iter(marks.values()), {})
            return _annotated(write_marked_copy(plain, path, {name: on_its_sheet}, author=AUTHOR))


def _is_workbook(file: str) -> bool:
    try:
        with open(file, "rb") as stream:
            return stream.read(len(_ZIP)) == _ZIP
    except OSError as error:
        raise UnreadableFile(file, "", (error.strerror or str(error)).lower()) from error


def _annotated(copied: MarkedCopy) -> Annotated:
    remarks = [f"sheet {sheet!r} is left unmarked: {reason}" for sheet, reason in copied.unmarked]
    if copied.signed:
        remarks.append("the list is digitally signed; its signature does not hold for the copy")
    return Annotated(cells=copied.cells, sheets=copied.sheets, remarks=tuple(remarks))


# --- what is said -----------------------------------------------------------------------------------------------


def _entry_of(finding: Finding) -> _Entry:
    reviewed = finding.outcome is Outcome.REVIEW
    texts = [fix.text for fix in finding.fixes[:_MOST_FIXES]]
    if len(finding.fixes) > _MOST_FIXES:
        texts.append(f"{len(finding.fixes) - _MOST_FIXES} more in exceptions.xlsx")
    return _Entry(
        rank=len(Severity) + finding.severity.rank if reviewed else finding.severity.rank,
        look="review" if reviewed else finding.severity.value,
        code=f"{finding.rule} {'review' if reviewed else finding.severity.value}",
        part=finding.part,
        message=_short(finding.message),
        fixes=_short(" or: ".join(texts)),
    )


def _unread(problem: CellProblem) -> _Entry:
    number = f" (and {problem.cells_concerned - 1:,} more)" if problem.cells_concerned > 1 else ""
    return _Entry(
        rank=Severity.GAP.rank,
        look="gap",
        code="not read",
        part="",
        message=_short(f"{problem.title or 'cell'}: '{problem.text}' cannot be read: {problem.reason}{number}"),
        fixes=_short(" or: ".join(problem.readings)),
    )


def _short(text: str) -> str:
    text = cell_text(text)
    return text if len(text) <= _MOST_LETTERS else f"{text[: _MOST_LETTERS - 4].rstrip()} ..."


def _mark(entries: Mapping[_Entry, Sequence[str]], *, first: bool) -> Mark:
    ordered = sorted(entries.items(), key=lambda item: item[0].rank)
    text: list[Passage] = []
    for entry, subjects in ordered[:_MOST_ENTRIES]:
        text += _said(entry, subjects, blank_line=bool(text))
    if len(ordered) > _MOST_ENTRIES:
        rest = sum(max(1, len(subjects)) for _, subjects in ordered[_MOST_ENTRIES:])
        text.append(Passage(f"\n\nand {rest:,} more at this cell: see exceptions.xlsx"))
    if first:
        text.append(Passage(f"\n\n{_LEGEND}"))
    worst = ordered[0][0]
    return Mark(fill=_FILLS[worst.look], text=tuple(text), rank=worst.rank)


def _said(entry: _Entry, subjects: Sequence[str], *, blank_line: bool) -> Iterable[Passage]:
    yield Passage("\n\n" if blank_line else "")
    yield Passage(entry.code, bold=True)
    about = [_short(some_of(subjects))] if subjects else []
    if entry.part:
        about.append(f"({cell_text(entry.part)})")
    yield Passage(f"  {' '.join(about)}\n{entry.message}" if about else f"\n{entry.message}")
    if entry.fixes:
        yield Passage(f"\nFix: {entry.fixes}")


# --- where it is said -------------------------------------------------------------------------------------------


def _column_headings(problems: Iterable[CellProblem], sheets: Iterable[SheetReport]) -> dict[Cell, Cell]:
    """Return, for what is wrong with a whole column, the heading of that column."""
    known = {(sheet.file, sheet.sheet): sheet for sheet in sheets}
    found: dict[Cell, Cell] = {}
    for problem in problems:
        sheet = known.get((problem.cell.file, problem.cell.sheet))
        if problem.whole_column and sheet is not None:
            index = problem.cell.row - 1 if sheet.turned else problem.cell.column
            if (heading := _heading(sheet, index)) is not None:
                found[problem.cell] = heading
    return found


def _heading(sheet: SheetReport, index: int) -> Cell | None:
    """Return the cell over a column; on a data sheet with one tag a column, the one before a line."""
    if sheet.match is None or not sheet.match.header_rows:
        return None
    # The last row of the heading is that of the column alone; those above it may span several.
    line = sheet.match.header_rows[-1]
    row, column = (index, line) if sheet.turned else (line, index)
    return Cell(file=sheet.file, sheet=sheet.sheet, row=row + 1, column=column)


def _home(result: Audit) -> Cell | None:
    """Return the cell at which is said what the whole list lacks: the heading over its tags."""
    lists = result.plant.lists
    own = [sheet for sheet in lists.sheets if sheet.kind == INSTRUMENTS.name and sheet.match is not None]
    own.sort(key=lambda sheet: PurePath(sheet.file).name != PurePath(lists.index_file).name)
    for sheet in own:
        columns = sheet.match.columns if sheet.match is not None else {}
        tag = next((match for name, match in columns.items() if name.startswith("tag")), None)
        if tag is not None and (heading := _heading(sheet, tag.index)) is not None:
            return heading
    for each in result.plant.instruments:
        origin = each.record.origin
        cells = origin.cells("tag") if origin is not None else ()
        if cells:
            return cells[0]
    return None
