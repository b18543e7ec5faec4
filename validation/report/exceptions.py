"""exceptions.xlsx: the exception list that a person works through with a pencil, sheet by sheet."""

from __future__ import annotations

import doctest
import re
from collections import Counter
from collections.abc import Iterable, Iterator, Mapping, Sequence
from pathlib import Path, PurePath
from typing import Any, Final

from instruments.origin import Cell, column_letters
from instruments.workbook.lists import SheetReport
from instruments.workbook.problem import CellProblem
from validation.audit import Audit, Coverage
from validation.finding import Finding, Fix, Outcome, Severity
from validation.report.book import Book, Column, Look, Page, Shown, Table
from validation.report.causes import Cause, causes_of, some_of
from validation.report.caution import CAUTION
from validation.report.findings_json import counts
from validation.report.wanted_sheets import wanted_columns, wanted_sheets
from validation.rule import Registry, Rule, load_rules

__all__ = ["write_exceptions"]

FAMILIES: Final[Mapping[str, str]] = {
    "TAG": "identification",
    "DAT": "completeness",
    "RNG": "ranging",
    "PRO": "process limits",
    "ELC": "circuit electrical",
    "HAZ": "hazardous area",
    "ISC": "intrinsic safety of the circuit",
    "WIR": "wiring and I/O",
    "SET": "alarms and trips",
    "CTL": "control and safety functions",
    "DOC": "documents",
    "COM": "commissioning",
    "XCH": "cross-checks of lists",
}

_LOOKS: Final = {Severity.DANGER: Look.DANGER, Severity.FAULT: Look.FAULT, Severity.GAP: Look.GAP}
_MEANING: Final = {
    Severity.DANGER: "someone can get hurt, or a protection fails",
    Severity.FAULT: "it will not measure, drive or fit as built",
    Severity.GAP: "the record is wrong or incomplete",
}
_COMMONEST: Final = 10
_MOST_LINES: Final = 200
_MOST_COLUMNS: Final = 15


def write_exceptions(result: Audit, path: Path, *, rules: Registry | None = None) -> None:
    """Write the exception list of an audit; the same bytes for the same audit.

    Parameters
    ----------
    result
        What the rules said.
    path
        The workbook to write.
    rules
        The registry that the audit used; default: every rule of the package.

    Raises
    ------
    OSError
        The file cannot be written.
    """
    registry = rules if rules is not None else load_rules()
    report = _Report(result, registry)
    book = Book(title=report.title, source=report.source, footer=CAUTION.partition(". ")[0])
    book.add_page(report.summary())
    book.add_table(report.causes())
    book.add_table(report.findings("Findings", Outcome.FINDING, "no findings"))
    book.add_table(report.findings("Reviews", Outcome.REVIEW, "nothing to review"))
    book.add_table(report.coverage())
    book.add_table(report.unread())
    book.add_table(report.columns())
    book.add_table(report.notes())
    book.add_table(report.rules())
    book.save(path)


class _Report:
    """What each sheet says."""

    def __init__(self, result: Audit, registry: Registry) -> None:
        self.result = result
        self.plant = result.plant
        self.lists = result.plant.lists
        self.registry = registry
        self.causes_found = causes_of(result.findings)
        name = self.plant.data.name
        self.title = f"Exception list - {name}" if name else "Exception list"
        files = dict.fromkeys((*self.lists.files, *(sheet.file for sheet in self.lists.sheets)))
        names = Counter(PurePath(file).name for file in files)
        # The folder is told where the name alone would not do.
        self.files = {file: name if names[name := PurePath(file).name] == 1 else file for file in files}
        self.source = ", ".join(self.files[file] for file in self.lists.files)

    def file(self, file: str) -> str:
        """Return a file's name as the list shows it."""
        return self.files.get(file) or PurePath(file).name

    # --- Summary --------------------------------------------------------------------------------------------

    def summary(self) -> Page:
        page = Page(name="Summary", widths=(6.0,) * 24)
        page.title(self.title)
        page.paragraph(CAUTION, look=Look.SMALL)
        self._what_was_read(page)
        self._figures(page)
        self._broken(page)
        self._commonest(page)
        self._assumed(page)
        self._absent(page)
        self._skipped(page)
        return page

    def _what_was_read(self, page: Page) -> None:
        page.section("What was read")
        page.table(
            ("file", "sheet", "read as", "rows", "cells filled", "read", "unread"),
            [
                (
                    self.file(sheet.file),
                    sheet.sheet,
                    f"not read: {sheet.skipped}" if sheet.skipped else sheet.kind,
                    sheet.rows,
                    sheet.cells_filled,
                    sheet.cells_read,
                    sheet.cells_unread,
                )
                for sheet in self.lists.sheets
            ],
            spans=(6, 4, 6, 2, 2, 2, 2),
        )
        figures = counts(self.result)
        page.paragraph(
            f"{_count(figures['tags'], 'tag')} on {_count(figures['instruments'], 'instrument')}, "
            f"{figures['live']:,} of them live; {_count(figures['loops'], 'loop')}, "
            f"{_count(figures['circuits'], 'circuit')}, from {_count(figures['rows'], 'row')} of "
            f"{_count(figures['sheets'], 'sheet')} in {_count(figures['files'], 'file')}. "
            f"{_count(figures['cells_filled'], 'cell')} in them: {figures['cells_read']:,} read, "
            f"{figures['cells_unread']:,} unread, {figures['cells_left_out']:,} on sheets that were not read."
        )

    def _figures(self, page: Page) -> None:
        page.section("Findings by severity and family")
        found: Counter[tuple[str, str]] = Counter()
        for finding in self.result.findings:
            what = "review" if finding.outcome is Outcome.REVIEW else finding.severity.value
            found[_family(finding.rule), what] += 1
        for code, coverage in self.result.coverage.items():
            found[_family(code), "unchecked"] += coverage.count(Outcome.UNCHECKED)
        families = list(dict.fromkeys([*FAMILIES, *sorted({family for family, _ in found})]))
        checked = {_family(code) for code in self.result.coverage} | {family for family, _ in found}
        kinds = [*(severity.value for severity in Severity), "all", "review", "unchecked"]
        for family in families:
            found[family, "all"] = sum(found[family, severity.value] for severity in Severity)
        rows: list[Sequence[Shown]] = [
            (f"{family} {FAMILIES.get(family, '')}".strip(), *(found[family, kind] for kind in kinds))
            for family in families
            if family in checked
        ]
        totals = [sum(found[family, kind] for family in families) for kind in kinds]
        rows.append((("all", Look.HEADING), *((total, Look.TOTAL) for total in totals)))
        page.table(
            ("family", *(severity.value for severity in Severity), "findings", "to review", "unchecked"),
            rows,
            spans=(6, 2, 2, 2, 2, 2, 2),
        )
        page.paragraph(
            "; ".join(f"{severity.value}: {meaning}" for severity, meaning in _MEANING.items())
            + "; to review: the data is there, a competent person must decide; unchecked: a value that the rule "
            "needs is blank or could not be read, and the sheet Coverage says which.",
            look=Look.SMALL,
        )

    def _broken(self, page: Page) -> None:
        if not self.result.broken:
            return
        page.section("Rules that broke: what they would have said is missing")
        page.table(
            ("code", "subject", "what it raised"),
            [(each.rule, each.subject, each.error) for each in self.result.broken[:_MOST_LINES]],
            spans=(2, 5, 17),
        )
        _and_more(page, len(self.result.broken))

    def _commonest(self, page: Page) -> None:
        page.section("The ten most common causes")
        commonest = [cause for cause in self.causes_found if cause.outcome is Outcome.FINDING][:_COMMONEST]
        if not commonest:
            page.paragraph("No findings.")
            return
        page.table(
            ("findings", "severity", "code", "cause", "subjects"),
            [
                (
                    cause.count,
                    _severity(cause),
                    cause.rule,
                    _with_cells(cause),
                    some_of(cause.subjects, most=5),
                )
                for cause in commonest
            ],
            spans=(2, 2, 2, 11, 7),
        )
        page.paragraph("All causes stand on the sheet Causes, each finding on the sheet Findings.", look=Look.SMALL)

    def _assumed(self, page: Page) -> None:
        page.section("What was assumed")
        rests: Counter[str] = Counter()
        for coverage in self.result.coverage.values():
            rests.update(coverage.assumed)
        assumptions = self.result.assumptions
        if not assumptions:
            page.paragraph("Nothing.")
            return
        page.table(
            ("assumption", "checks that rest on it"),
            [(text, rests[text] or None) for text in assumptions[:_MOST_LINES]],
            spans=(20, 4),
        )
        _and_more(page, len(assumptions))

    def _absent(self, page: Page) -> None:
        page.section("Sheets that were absent, and what they would let be checked")
        absent = wanted_sheets(self.result)
        wanted = [each for each in absent if each.checks or each.with_others]
        missed_by_none = [each.name for each in absent if not each.checks and not each.with_others]
        if missed_by_none:
            page.paragraph(f"Absent, and missed by no rule of this audit: {', '.join(missed_by_none)}.")
        elif not wanted:
            page.paragraph("None.")
        if wanted:
            page.table(
                ("sheet", "checks it would let be made", "and with other values", "what it brings", "rules"),
                [
                    (
                        f"{each.name}, named in a column '{each.named_in}'" if each.named_in else each.name,
                        each.count,
                        sum(each.with_others.values()),
                        _with_counts(each.fields),
                        _with_counts(Counter(each.checks) + Counter(each.with_others)),
                    )
                    for each in wanted
                ],
                spans=(4, 3, 3, 7, 7),
            )
        columns = wanted_columns(self.result)
        if columns:
            page.section("Columns that the index does not have, and what they would let be checked")
            page.table(
                ("columns", "checks they would let be made", "rules"),
                [(each.name, each.count, _with_counts(each.checks)) for each in columns[:_MOST_COLUMNS]],
                spans=(11, 3, 10),
            )

    def _skipped(self, page: Page) -> None:
        page.section("What was skipped, and what was noticed in reading")
        lines: list[tuple[str, str, str]] = []
        noted = 0
        for sheet in self.lists.sheets:
            said = [f"not read: {sheet.skipped}"] if sheet.skipped else []
            if sheet.match is not None and sheet.match.unknown:
                unknown = _count(len(sheet.match.unknown), "column")
                said.append(f"{unknown} not understood, kept: see the sheet Columns")
            said.extend(sheet.remarks)
            lines.extend((self.file(sheet.file), sheet.sheet, text) for text in said)
            noted += len(sheet.sections) + len(sheet.notes)
        lines.extend(
            (note.file, note.sheet, f"mapping{f', line {note.line}' if note.line else ''}: {note.text}")
            for note in self.lists.mapping_notes
        )
        figures = counts(self.result)
        not_live = figures["instruments"] - figures["live"]
        if not_live:
            what = f"{_count(not_live, 'instrument')} deleted, void, future, spare or demolished: not checked"
            lines.append(("", "", what))
        if figures["rows_merged"]:
            what = f"{_count(figures['rows_merged'], 'row')} taken as a further row of an instrument"
            lines.append(("", "", what))
        if noted:
            what = f"{_count(noted, 'row')} taken as titles, notes and sections: see the sheet Notes"
            lines.append(("", "", what))
        if not lines:
            page.paragraph("Nothing.")
            return
        page.table(("file", "sheet", "what"), lines[:_MOST_LINES], spans=(6, 4, 14))
        _and_more(page, len(lines))

    # --- Causes, Findings, Reviews --------------------------------------------------------------------------

    def causes(self) -> Table[Cause]:
        return Table(
            name="Causes",
            columns=(
                Column(heading="count", least=6, most=8, look=Look.COUNT),
                Column(heading="severity", least=8, most=9),
                Column(heading="outcome", least=8, most=9),
                Column(heading="code", least=6, most=8),
                Column(heading="rule", least=14, most=26),
                Column(heading="cause", least=24, most=36),
                Column(heading="found", most=12),
                Column(heading="wanted", most=12),
                Column(heading="fix for all of them", least=12, most=24),
                Column(heading="cells that all of them name", least=10, most=16),
                Column(heading="subjects", least=12, most=28),
            ),
            items=self.causes_found,
            row=self._cause_row,
            frozen=4,
            empty="no findings",
        )

    def _cause_row(self, cause: Cause) -> Sequence[Shown]:
        rule = self._rule(cause.rule)
        return (
            cause.count,
            _severity(cause),
            cause.outcome.value,
            cause.rule,
            rule.title if rule is not None else "",
            cause.text,
            cause.found,
            cause.wanted,
            _listed(cause.fixes),
            _sheets_and_cells(cause.cells),
            some_of(cause.subjects),
        )

    def findings(self, name: str, outcome: Outcome, empty: str) -> Table[Finding]:
        what = "what is wrong" if outcome is Outcome.FINDING else "what to decide"
        return Table(
            name=name,
            columns=(
                Column(heading="severity", least=8, most=9),
                Column(heading="code", least=6, most=8),
                Column(heading="subject", least=9, most=14),
                Column(heading="part", least=4, most=9),
                Column(heading=what, least=20, most=31),
                Column(heading="found", least=6, most=12),
                Column(heading="wanted", least=6, most=12),
                Column(heading="off by", least=5, most=9),
                Column(heading="working", least=8, most=25),
                Column(heading="fix", least=8, most=25),
                Column(heading="file", least=5, most=10),
                Column(heading="sheet and cell", least=8, most=13),
                Column(heading="basis", least=8, most=20),
                Column(heading="done by", least=9, most=9),
                Column(heading="remark", least=13, most=13),
            ),
            items=self.result.of(outcome),
            row=self._finding_row,
            frozen=3,
            empty=empty,
        )

    def _finding_row(self, finding: Finding) -> Sequence[Shown]:
        rule = self._rule(finding.rule)
        working = [finding.working] if finding.working else []
        working.extend(f"assumed: {text}" for text in finding.assumed)
        return (
            _severity(finding),
            finding.rule,
            finding.subject,
            finding.part,
            finding.message,
            finding.found,
            finding.wanted,
            finding.off_by,
            "\n".join(working),
            _listed([_fix(fix) for fix in finding.fixes]),
            "\n".join(dict.fromkeys(self.file(cell.file) for cell in finding.cells)),
            _sheets_and_cells(finding.cells),
            rule.basis if rule is not None else "",
            None,
            None,
        )

    # --- Coverage, Rules ------------------------------------------------------------------------------------

    def coverage(self) -> Table[tuple[str, Coverage]]:
        return Table(
            name="Coverage",
            columns=(
                Column(heading="code", least=6, most=8),
                Column(heading="rule", least=20, most=50),
                Column(heading="severity", least=8, most=9),
                Column(heading="subject", least=8, most=14),
                *(
                    Column(heading=heading, least=8, most=10, look=Look.COUNT)
                    for heading in ("subjects", "clear", "finding", "review", "unchecked", "not applicable")
                ),
                Column(heading="unchecked because of these blanks", least=20, most=60),
            ),
            items=tuple(self.result.coverage.items()),
            row=self._coverage_row,
            frozen=1,
            empty="no rule ran",
        )

    def _coverage_row(self, item: tuple[str, Coverage]) -> Sequence[Shown]:
        code, coverage = item
        rule = self._rule(code)
        return (
            code,
            rule.title if rule is not None else "",
            _severity(rule) if rule is not None else "",
            rule.on.value if rule is not None else "",
            sum(coverage.outcomes.values()),
            coverage.count(Outcome.CLEAR),
            coverage.count(Outcome.FINDING),
            coverage.count(Outcome.REVIEW),
            coverage.count(Outcome.UNCHECKED),
            coverage.count(Outcome.NOT_APPLICABLE),
            _with_counts(coverage.because),
        )

    def rules(self) -> Table[Rule]:
        return Table(
            name="Rules",
            columns=(
                Column(heading="code", least=6, most=8),
                Column(heading="severity", least=8, most=9),
                Column(heading="rule", least=20, most=40),
                Column(heading="subject", least=8, most=14),
                Column(heading="needs", least=10, most=28),
                Column(heading="basis", least=12, most=34),
                Column(heading="why it matters, and what to do", least=30, most=80),
            ),
            items=tuple(self.registry),
            row=_rule_row,
            frozen=1,
            empty="there are no rules",
        )

    def _rule(self, code: str) -> Rule | None:
        return self.registry[code] if code in self.registry else None  # noqa: SIM401 (it has no get)

    # --- Unread cells, Columns ------------------------------------------------------------------------------

    def unread(self) -> Table[CellProblem]:
        return Table(
            name="Unread cells",
            columns=(
                Column(heading="file", least=8, most=22),
                Column(heading="sheet", least=8, most=20),
                Column(heading="cell", least=6, most=9),
                Column(heading="subject", least=9, most=20),
                Column(heading="field", least=8, most=20),
                Column(heading="what stands there", least=12, most=34),
                Column(heading="why it could not be read", least=16, most=44),
                Column(heading="readings considered", least=12, most=34),
                Column(heading="cells", least=6, most=9, look=Look.COUNT),
            ),
            items=self.plant.problems,
            row=self._problem_row,
            frozen=3,
            empty="every cell of a known column was read",
        )

    def _problem_row(self, problem: CellProblem) -> Sequence[Shown]:
        return (
            self.file(problem.cell.file),
            problem.cell.sheet,
            f"column {column_letters(problem.cell.column)}" if problem.whole_column else problem.cell.address,
            problem.subject,
            problem.title,
            problem.text,
            problem.reason,
            " or ".join(problem.readings),
            problem.cells_concerned,
        )

    def columns(self) -> Table[Sequence[Shown]]:
        return Table(
            name="Columns",
            columns=(
                Column(heading="file", least=8, most=24),
                Column(heading="sheet", least=8, most=22),
                Column(heading="column", least=6, most=8),
                Column(heading="heading", least=12, most=40),
                Column(heading="field", least=12, most=28),
                Column(heading="how matched", least=10, most=28),
                Column(heading="likelihood", least=8, most=10, look=Look.SHARE),
                Column(heading="unit of the column", least=11, most=16),
            ),
            items=[
                (self.file(sheet.file), sheet.sheet, *row) for sheet in self.lists.sheets for row in _column_rows(sheet)
            ],
            row=lambda row: row,
            empty="no sheet was read",
        )

    def notes(self) -> Table[tuple[SheetReport, int, str, str]]:
        return Table(
            name="Notes",
            columns=(
                Column(heading="file", least=8, most=24),
                Column(heading="sheet", least=8, most=22),
                Column(heading="row", least=6, most=10, look=Look.COUNT),
                Column(heading="taken as", least=10, most=24),
                Column(heading="text", least=30, most=110),
            ),
            items=[row for sheet in self.lists.sheets for row in _note_rows(sheet)],
            row=lambda row: (self.file(row[0].file), row[0].sheet, *row[1:]),
            empty="no row was taken as a title, a note or a section",
        )


def _rule_row(rule: Rule) -> Sequence[Shown]:
    return (
        rule.code,
        _severity(rule),
        rule.title,
        rule.on.value,
        ", ".join(title for title, _ in rule.needs),
        rule.basis,
        _prose(rule.text),
    )


def _column_rows(sheet: SheetReport) -> Iterator[Sequence[Shown]]:
    match = sheet.match
    if match is None:
        return
    if not match.header_rows:
        yield (None, None, None, "a field and its value on each row", None, None)
    rows: list[tuple[int, Sequence[Shown]]] = []
    for each in match.columns.values():
        unit = str(each.unit) if each.unit is not None else ""
        if each.unit_index is not None and not unit:
            unit = f"in column {column_letters(each.unit_index)}"
        rows.append((each.index, (each.heading, each.column.title, each.how, float(each.likelihood), unit)))
        rows.extend((index, ("", each.column.title, "says the rest of it", None, "")) for index, _ in each.parts)
    rows.extend(
        (index, (heading, "unit", "the unit of the columns beside it", None, ""))
        for index, heading in match.unit_columns
    )
    rows.extend(
        (index, (heading, ("kept", Look.GAP), "not understood; kept under its own heading", None, ""))
        for index, heading in match.unknown
    )
    for index, row in sorted(rows, key=lambda item: item[0]):
        yield (column_letters(index), *row)


def _note_rows(sheet: SheetReport) -> list[tuple[SheetReport, int, str, str]]:
    rows = [(sheet, row, "section", text) for row, text in sheet.sections]
    rows.extend((sheet, row, "title or note, not applied", text) for row, text in sheet.notes)
    return sorted(rows, key=lambda row: row[1:])


# --- words --------------------------------------------------------------------------------------------------


def _family(code: str) -> str:
    return code.rstrip("0123456789")


def _severity(of: Finding | Cause | Rule) -> Shown:
    return (of.severity.value, _LOOKS[of.severity])


def _count(number: int, what: str) -> str:
    return f"{number:,} {what}" if number == 1 else f"{number:,} {what}s"


def _with_counts(times: Mapping[str, int]) -> str:
    """Return names with their counts, the most common first."""
    ordered = sorted(times.items(), key=lambda item: (-item[1], item[0]))
    return ", ".join(f"{name} ({number:,})" for name, number in ordered)


def _and_more(page: Page, number: int) -> None:
    if number > _MOST_LINES:
        page.paragraph(f"and {number - _MOST_LINES:,} more; all of them stand in findings.json.")


def _listed(texts: Iterable[str]) -> str:
    """Return each text on a line of its own, marked where there are several."""
    lines = list(texts)
    return lines[0] if len(lines) == 1 else "\n".join(f"\u2022 {text}" for text in lines)


def _fix(fix: Fix) -> str:
    return f"{fix.text} (then finds {', '.join(fix.makes)})" if fix.makes else fix.text


def _sheets_and_cells(cells: Sequence[Cell]) -> str:
    """Return the cells of each sheet on a line: ``Instruments: F112, G112``."""
    by_sheet: dict[tuple[str, str], list[str]] = {}
    for cell in cells:
        by_sheet.setdefault((cell.file, cell.sheet), []).append(cell.address)
    return "\n".join(
        f"{sheet}: {', '.join(dict.fromkeys(addresses))}" if sheet else ", ".join(dict.fromkeys(addresses))
        for (_, sheet), addresses in by_sheet.items()
    )


def _with_cells(cause: Cause) -> str:
    """Return what is wrong and, where many findings go back to the same cells, those."""
    if cause.count == 1 or not cause.cells:
        return cause.text
    return f"{cause.text}\n({_sheets_and_cells(cause.cells)})"


_TICKS: Final = re.compile(r"``([^`]*)``")


def _prose(text: str) -> str:
    """Return a rule's text without its first line and its examples, each paragraph on one line.

    >>> _prose("A title.\\n\\nWhy: it\\nfails.\\n\\nWhat to do: mend it.\\n\\n>>> 1 + 1\\n2\\n")
    'Why: it fails.\\nWhat to do: mend it.'
    """
    _, _, body = text.partition("\n")
    try:
        parts: list[Any] = doctest.DocTestParser().parse(body)
    except ValueError:
        parts = [body.partition(">>>")[0]]
    said = "".join(part for part in parts if isinstance(part, str))
    paragraphs = (" ".join(paragraph.split()) for paragraph in re.split(r"\n[ \t]*\n", said))
    return _TICKS.sub(r"\1", "\n".join(paragraph for paragraph in paragraphs if paragraph))
