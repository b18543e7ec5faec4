"""Marrowbeck Works for tests: its lists in fixtures, with any changes, as rows, as a workbook or as files.

``python -m tests.marrowbeck`` writes anew what is made of the lists and the changes: the demo workbook and
the text of its findings. Both are then read as a diff.
"""

from __future__ import annotations

import csv
import random
import re
import tomllib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from functools import cache
from io import BytesIO
from pathlib import Path
from types import MappingProxyType
from typing import Any
from zipfile import ZipFile

from openpyxl import Workbook
from openpyxl.cell.cell import Cell
from openpyxl.styles import Alignment, Border, Font, PatternFill, Side
from openpyxl.utils import get_column_letter
from openpyxl.worksheet.worksheet import Worksheet

from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.workbook.files import read_lists
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import assemble
from validation.audit import Audit, audit
from validation.finding import Finding, Outcome
from validation.mend import with_consequences

FOLDER = Path(__file__).parent.parent / "fixtures" / "marrowbeck"
DEMO = FOLDER / "instrument-list.xlsx"
FINDINGS = FOLDER / "findings.txt"
THE_LIST = "the list"
KINDS = (*INSTRUMENT_SHEETS, *LOOP_SHEETS)
INDEX = "Instrument index"
PACKAGE = "Package K-501"

Rows = list[list[str]]
Sheets = dict[str, Rows]

_NUMBER = re.compile(r"-?(?:0|[1-9]\d*)(?:\.\d+)?")
_ALSO = re.compile(r"(?P<review>review )?(?P<rule>[A-Z]{3}\d\d)(?: (?P<subject>[^(]+?))?(?: \((?P<part>.+)\))?")
_BOLD = Font(bold=True)
_TITLE = Font(bold=True, size=14)
_GREY = PatternFill("solid", start_color="D9D9D9")
_SECTION = PatternFill("solid", start_color="EEECE1")
_THIN = Border(*(Side(style="thin"),) * 4)
_WRAPPED = Alignment(wrap_text=True, vertical="center", horizontal="center")


@dataclass(frozen=True, slots=True, kw_only=True)
class Look:
    """How one sheet stands in the workbook: where its headings are, and what its cells look like.

    `heading` counts rows from 1 and is 0 where the sheet has none: there each row is a name and a
    value, and the name is the column by which it is found. `key` is the heading of the column that
    names a row. `together` are columns that mean what they do by standing side by side.
    """

    title: str
    file: str
    heading: int = 0
    heading_rows: int = 1
    key: str = ""
    text: tuple[str, ...] = ()
    hidden: tuple[str, ...] = ()
    together: tuple[str, ...] = ()
    decimals: Mapping[str, str] = field(default_factory=dict)
    widths: Mapping[str, float] = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Edit:
    """Cells of one row with their old and new text; `row` is what the sheet's key column says."""

    sheet: str
    row: str
    cells: Mapping[str, tuple[str, str]]


@dataclass(frozen=True, slots=True, kw_only=True)
class Change:
    """One mistake: the row it is made in, the cells with their old and new text, and what must be found.

    `row` is what the sheet's key column says. A `copied` change leaves the row alone and makes its
    edits in a copy beneath it, an `inserted` one in a blank row beneath it. `more` are edits of other
    rows that the same mistake takes. `also` are the companions: what the same mistake breaks besides.
    Each names the rule, the subject where that is not the row, and the part if there is one:
    ``SET07 PT-1001 (H)``; before it stands ``review`` where it is one.
    """

    number: int
    sheet: str
    row: str
    cells: Mapping[str, tuple[str, str]]
    rule: str
    why: str
    subject: str = ""
    part: str = ""
    review: bool = False
    copied: bool = False
    inserted: bool = False
    more: tuple[Edit, ...] = ()
    also: tuple[str, ...] = ()

    @property
    def about(self) -> str:
        """The subject of what must be found."""
        return self.subject or self.row

    @property
    def places(self) -> frozenset[tuple[str, str]]:
        """The rows that it touches."""
        return frozenset(((self.sheet, self.row), *((each.sheet, each.row) for each in self.more)))


@dataclass(frozen=True, slots=True, kw_only=True)
class Near:
    """A change that stays just inside a rule: nothing is found, and the rule says `says` of the subject.

    `beyond` is the same change one step further, where something is found.
    """

    change: Change
    says: str = "clear"
    because: tuple[str, ...] = ()
    beyond: Change | None = None


@cache
def looks() -> tuple[Look, ...]:
    """Return the sheets of the workbook in their order."""
    told: list[dict[str, Any]] = tomllib.loads((FOLDER / "workbook.toml").read_text(encoding="utf-8"))["sheet"]
    return tuple(
        Look(**{name: tuple(value) if isinstance(value, list) else value for name, value in each.items()})
        for each in told
    )


def look_of(title: str) -> Look:
    """Return how the sheet `title` looks."""
    return next(look for look in looks() if look.title == title)


def twin_rows() -> Sheets:
    """Return the clean twin: the rows of every sheet by its title, as text, padded to one width."""
    return {look.title: _read(FOLDER / "clean" / look.file) for look in looks()}


@cache
def changes() -> tuple[Change, ...]:
    """Return the mistakes that make the demo of the clean twin."""
    return _changes_in("changes.toml")


@cache
def branches() -> tuple[Change, ...]:
    """Return mistakes beside those of the demo: the other branches and ends of each rule."""
    return _changes_in("branches.toml")


@cache
def nears() -> tuple[Near, ...]:
    """Return the changes that stay just inside a rule."""
    told = tomllib.loads((FOLDER / "near.toml").read_text(encoding="utf-8"))["near"]
    return tuple(_near_from(number, **each) for number, each in enumerate(told, start=1))


def change_from(number: int, *, cells: Mapping[str, Sequence[str]], sheet: str = INDEX, **told: Any) -> Change:
    """Return a change as changes.toml tells it: cells by heading, each with its old and its new text."""
    more = tuple(_edit_from(**each) for each in told.pop("more", ()))
    edit = _edit_from(cells=cells, sheet=sheet, row=told["row"])
    return Change(number=number, sheet=sheet, cells=edit.cells, more=more, **_with_tuples(told))


def _changes_in(name: str) -> tuple[Change, ...]:
    told = tomllib.loads((FOLDER / name).read_text(encoding="utf-8"))["change"]
    return tuple(change_from(number, **each) for number, each in enumerate(told, start=1))


def _near_from(
    number: int,
    *,
    says: str = "clear",
    because: Sequence[str] = (),
    beyond: Mapping[str, str] | None = None,
    **told: Any,
) -> Near:
    only_beyond = {name: told.pop(name) for name in ("part", "also", "review") if name in told}
    if "beyond_subject" in told:
        only_beyond["subject"] = told.pop("beyond_subject")
    change = change_from(number, **told)
    further = None
    if beyond is not None:
        made = dict(told)
        made["cells"] = {**told["cells"]}
        for heading, text in beyond.items():
            old = told["cells"][heading][0] if heading in told["cells"] else _cell_of_twin(change, heading)
            made["cells"][heading] = [old, text]
        further = change_from(number, **{**made, **only_beyond})
    elif only_beyond:
        raise ValueError(f"near miss {number}: {', '.join(only_beyond)} and nothing beyond")
    return Near(change=change, says=says, because=tuple(because), beyond=further)


def _cell_of_twin(change: Change, heading: str) -> str:
    rows = twin_rows()[change.sheet]
    return rows[row_number(change.sheet, rows, change.row)][headings(change.sheet, rows).index(heading)]


def _edit_from(*, cells: Mapping[str, Sequence[str]], row: str, sheet: str = INDEX) -> Edit:
    return Edit(
        sheet=sheet, row=row, cells=MappingProxyType({heading: (old, new) for heading, (old, new) in cells.items()})
    )


def headings(title: str, rows: Rows) -> list[str]:
    """Return a sheet's headings, a merged parent joined to each of its children.

    A sheet without headings has its columns' letters.
    """
    look = look_of(title)
    if not look.heading:
        return [get_column_letter(number) for number in range(1, len(rows[0]) + 1)]
    lines = rows[look.heading - 1 : look.heading - 1 + look.heading_rows]
    if len(lines) == 1:
        return lines[0]
    joined, parent = [], ""
    for above, below in zip(*lines, strict=True):
        parent = above or parent
        joined.append(f"{parent} {below}".strip())
    return joined


def row_number(title: str, rows: Rows, name: str) -> int:
    """Return the place, counted from 0, of the row that the key column calls `name`."""
    look = look_of(title)
    column = headings(title, rows).index(look.key) if look.heading else 0
    start = look.heading - 1 + look.heading_rows if look.heading else 0
    found = [number for number, row in enumerate(rows) if number >= start and row[column] == name]
    if len(found) != 1:
        raise LookupError(f"{title} has {len(found)} rows that are called {name}")
    return found[0]


def with_changes(sheets: Sheets, made: Iterable[Change]) -> Sheets:
    """Return the sheets with the changes made; ValueError where a cell does not hold the old text.

    A row is looked for by the name it has in `sheets`, so that a change of tags hides no other change.
    """
    result = {title: [list(row) for row in rows] for title, rows in sheets.items()}
    new_rows: list[tuple[str, int, list[str]]] = []
    for change in made:
        at = row_number(change.sheet, sheets[change.sheet], change.row)
        before = sheets[change.sheet][at]
        target = result[change.sheet][at]
        if change.copied or change.inserted:
            before = target = list(before) if change.copied else [""] * len(before)
            new_rows.append((change.sheet, at, target))
        _make(change.number, change.sheet, change.row, change.cells, sheets, list(before), target)
        for edit in change.more:
            at = row_number(edit.sheet, sheets[edit.sheet], edit.row)
            before, target = sheets[edit.sheet][at], result[edit.sheet][at]
            _make(change.number, edit.sheet, edit.row, edit.cells, sheets, before, target)
    for title, at, row in sorted(new_rows, key=lambda new: new[1], reverse=True):
        result[title].insert(at + 1, row)
    return result


def _make(
    number: int,
    sheet: str,
    name: str,
    cells: Mapping[str, tuple[str, str]],
    sheets: Sheets,
    before: Sequence[str],
    target: list[str],
) -> None:
    names = headings(sheet, sheets[sheet])
    for heading, (old, new) in cells.items():
        column = names.index(heading)
        if before[column] != old:
            raise ValueError(f"change {number}: {name}, {heading} holds {before[column]!r}, not {old!r}")
        target[column] = new


def demo_rows() -> Sheets:
    """Return the rows of the demo: the twin with all its changes."""
    return with_changes(twin_rows(), changes())


def write_twin(path: Path, made: Iterable[Change] = ()) -> Path:
    """Write the clean twin as a workbook, with the changes made."""
    return write_workbook(path, with_changes(twin_rows(), made))


def write_demo(path: Path) -> Path:
    """Write the demo workbook."""
    return write_workbook(path, demo_rows())


def write_files(folder: Path, sheets: Sheets) -> list[Path]:
    """Write each sheet as a file of its own and return the files: several lists that are one plant."""
    folder.mkdir(parents=True, exist_ok=True)
    written = []
    for title, rows in sheets.items():
        path = folder / look_of(title).file
        with path.open("w", newline="", encoding="utf-8") as file:
            csv.writer(file, lineterminator="\n").writerows(rows)
        written.append(path)
    return written


def audit_of(*paths: Path) -> Audit:
    """Read lists and run every rule over them; a rule that raises fails the test."""
    return audit(assemble(read_lists(paths, KINDS)), raise_errors=True)


def found(result: Audit) -> list[str]:
    """Return what an audit found and asks, in the words of `expected`."""
    return sorted(_found_line(each, result) for each in result.findings)


def _found_line(each: Finding, result: Audit) -> str:
    subject = THE_LIST if each.subject == result.plant.file_name else each.subject
    return _line(each.rule, subject, each.part, review=each.outcome is Outcome.REVIEW)


def expected(made: Iterable[Change]) -> list[str]:
    """Return what must be found besides the twin's reviews: rule, subject and in brackets the part."""
    lines = []
    for change in made:
        lines.append(_line(change.rule, change.about, change.part, review=change.review))
        for also in change.also:
            told = _ALSO.fullmatch(also)
            assert told is not None
            lines.append(
                _line(told["rule"], told["subject"] or change.about, told["part"] or "", review=bool(told["review"]))
            )
    return sorted(lines)


def reviews() -> list[str]:
    """Return the reviews of the clean twin, as reviews.txt lists them with their reasons."""
    lines = (FOLDER / "reviews.txt").read_text(encoding="utf-8").splitlines()
    return sorted(f"review {line.split(':')[0]}" for line in lines if line and not line.startswith("#"))


def demo_audit() -> Audit:
    """Audit the committed demo workbook; the fixes say what they would make."""
    result = audit_of(DEMO)
    with_consequences(result)
    return result


def findings_text(result: Audit) -> str:
    """Return all that is said of each finding and review, in the order of the report, with the counts above."""
    counts = ", ".join(f"{count} {word}" for word, count in result.counts().items())
    return "\n".join([f"# {counts}\n", *(_told(each, result) for each in result.findings)])


def _told(each: Finding, result: Audit) -> str:
    line = _found_line(each, result)
    lines = [line if each.outcome is Outcome.REVIEW else f"{each.severity.value} {line}", each.message]
    lines += [
        f"{word}: {text}"
        for word, text in (
            ("found", each.found),
            ("wanted", each.wanted),
            ("off by", each.off_by),
            ("working", each.working),
            ("assumed", "; ".join(each.assumed)),
        )
        if text
    ]
    for fix in each.fixes:
        change = ", ".join(f"{title} = {text}" for title, text in fix.change.items())
        where = f" on {fix.sheet} {fix.subject}".rstrip() if fix.subject else ""
        makes = f", which makes {', '.join(fix.makes)}" if fix.makes else ""
        lines.append(f"fix: {fix.text}" + (f" ({change}{where}{makes})" if change else ""))
    lines.append(f"cells: {', '.join(f'{cell.sheet} {cell.address}' for cell in each.cells)}")
    return "\n    ".join(lines) + "\n"


def shuffled(sheets: Sheets, seed: int) -> Sheets:
    """Return the sheets with sheets, columns and rows in another order.

    Rows stay within their section, since a section row speaks of those beneath it, and ditto marks
    are written out first, since they speak of the row above. Columns under one parent stay together.
    """
    order = random.Random(seed)
    result: Sheets = {}
    titles = list(sheets)
    order.shuffle(titles)
    for title in titles:
        look, rows = look_of(title), without_dittos(title, sheets[title])
        if not look.heading or not look.key:
            result[title] = rows
            continue
        start = look.heading - 1 + look.heading_rows
        head, body = rows[:start], rows[start:]
        key = headings(title, rows).index(look.key)
        body = _rows_shuffled(body, key, order)
        columns = _columns_shuffled(head[look.heading - 1 :], look.together, order)
        # A title block and notes belong to no column.
        lines = head[look.heading - 1 :] + body
        moved = [[row[column] for column in columns] if _is_data(row) else row for row in lines]
        result[title] = head[: look.heading - 1] + moved
    return result


def without_dittos(title: str, rows: Rows) -> Rows:
    """Return the rows with every ditto mark replaced by what it stands for."""
    look = look_of(title)
    start = look.heading - 1 + look.heading_rows if look.heading else 0
    result: Rows = []
    above: list[str] = []
    for number, row in enumerate(rows):
        line = list(row)
        if number >= start and _is_data(row):
            if above:
                line = [above[at] if cell in ('"', "do") else cell for at, cell in enumerate(line)]
            above = line
        result.append(line)
    return result


def write_workbook(path: Path, sheets: Sheets) -> Path:
    """Write sheets as a workbook that looks as people leave it; a text is never read as a formula."""
    book = Workbook()
    book.remove(book.worksheets[0])
    for title, rows in sheets.items():
        _write_sheet(book.create_sheet(title), look_of(title), rows)
    book.properties.creator = "Marrowbeck Works"
    book.properties.title = "Instrument index and schedules"
    book.save(path)
    return path


def typed(text: str, *, as_text: bool = False) -> str | int | float | None:
    """Return what a person's typing leaves in a cell: a number where it is one, else the text.

    >>> typed("12"), typed("2.0"), typed("0.10"), typed("0034"), typed("1", as_text=True), typed("")
    (12, 2, 0.1, '0034', '1', None)
    """
    if not text:
        return None
    if as_text or not _NUMBER.fullmatch(text):
        return text
    number = float(text)
    return int(number) if number.is_integer() else number


def _line(rule: str, subject: str, part: str, *, review: bool = False) -> str:
    line = f"{rule} {subject} ({part})" if part else f"{rule} {subject}"
    return f"review {line}" if review else line


def _with_tuples(told: Mapping[str, Any]) -> Any:
    return {name: tuple(value) if isinstance(value, list) else value for name, value in told.items()}


def _read(path: Path) -> Rows:
    with path.open(newline="", encoding="utf-8") as file:
        rows = list(csv.reader(file))
    width = max(len(row) for row in rows)
    return [row + [""] * (width - len(row)) for row in rows]


def _is_data(row: Sequence[str]) -> bool:
    return sum(1 for cell in row if cell) > 1


def _rows_shuffled(body: Rows, key: int, order: random.Random) -> Rows:
    result: Rows = []
    block: Rows = []
    for row in body:
        if row[key] and _is_data(row):
            block.append(row)
            continue
        order.shuffle(block)
        result += [*block, row]
        block = []
    order.shuffle(block)
    return result + block


def _columns_shuffled(head: Rows, together: Sequence[str], order: random.Random) -> list[int]:
    groups: list[list[int]] = []
    below = head[1] if len(head) > 1 else [""] * len(head[0])
    for column, above in enumerate(head[0]):
        of_parent = not above and bool(below[column])
        if groups and (of_parent or above in together[1:]):
            groups[-1].append(column)
        else:
            groups.append([column])
    order.shuffle(groups)
    return [column for group in groups for column in group]


def _write_sheet(sheet: Worksheet, look: Look, rows: Rows) -> None:
    names = headings(look.title, rows)
    first = look.heading + look.heading_rows if look.heading else 1
    for number, row in enumerate(rows, start=1):
        data = _is_data(row)
        for column, text in enumerate(row, start=1):
            if not text:
                continue
            name = names[column - 1]
            cell = sheet.cell(number, column)
            value = typed(text, as_text=number < first or name in look.text)
            cell.value = value
            if isinstance(value, str):
                cell.data_type = "s"  # '=1+1' is a text that somebody typed, not a sum
            _dress(cell, look, number, first, data=data)
            if number >= first and name in look.decimals:
                cell.number_format = look.decimals[name]
    for top, left, bottom, right in merged_headings(look, rows):
        sheet.merge_cells(start_row=top, end_row=bottom, start_column=left, end_column=right)
    _set_widths(sheet, look, names)
    if look.heading:
        sheet.freeze_panes = sheet.cell(first, 1 + names.index(look.key) + 1)


def _dress(cell: Cell, look: Look, number: int, first: int, *, data: bool) -> None:
    if not look.heading:
        cell.font = _BOLD if cell.column == 1 else Font()
    elif number < look.heading:
        cell.font = _TITLE if number == 1 else _BOLD
    elif number < first:
        cell.font, cell.fill, cell.border, cell.alignment = _BOLD, _GREY, _THIN, _WRAPPED
    elif data:
        cell.border = _THIN
    else:
        cell.font, cell.fill = _BOLD, _SECTION


def merged_headings(look: Look, rows: Rows) -> list[tuple[int, int, int, int]]:
    """Return the merged ranges of a heading of two rows: first row, first column, last row, last column, from 1."""
    if look.heading_rows < 2:
        return []
    top, bottom = look.heading, look.heading + 1
    above, below = rows[top - 1], rows[bottom - 1]
    merged = []
    column = 0
    while column < len(above):
        end = column
        while end + 1 < len(above) and below[end + 1] and not above[end + 1]:
            end += 1
        if end > column:
            merged.append((top, column + 1, top, end + 1))
        elif not below[column]:
            merged.append((top, column + 1, bottom, column + 1))
        column = end + 1
    return merged


def _set_widths(sheet: Worksheet, look: Look, names: Sequence[str]) -> None:
    for column, name in enumerate(names, start=1):
        letter = get_column_letter(column)
        sheet.column_dimensions[letter].width = look.widths.get(name, 11)
        if name in look.hidden:
            sheet.column_dimensions[letter].hidden = True


def _parts(workbook: bytes) -> dict[str, bytes]:
    """Return what a workbook holds but for the hour at which it was saved."""
    with ZipFile(BytesIO(workbook)) as package:
        return {name: package.read(name) for name in package.namelist() if name != "docProps/core.xml"}


if __name__ == "__main__":
    before = DEMO.read_bytes()
    write_demo(DEMO)
    if _parts(before) == _parts(DEMO.read_bytes()):
        DEMO.write_bytes(before)
    FINDINGS.write_text(findings_text(demo_audit()), encoding="utf-8")
