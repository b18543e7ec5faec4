"""manage.py audit: one command from the lists to the exception list and the loop sheets."""

from __future__ import annotations

import gc
import hashlib
import sys
from argparse import ArgumentParser
from functools import partial
from pathlib import Path
from typing import Any

from django.core.management.base import BaseCommand

from instruments import VERSION
from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.console import for_console
from instruments.workbook.files import read_lists
from instruments.workbook.lists import NoTags, SheetReport
from instruments.workbook.mapping import mapping_of
from instruments.workbook.mapping_toml import mapping_text
from instruments.workbook.reader import UnreadableFile
from instruments.written import CannotStand
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import assemble
from validation.audit import Audit, audit
from validation.finding import Outcome, Severity
from validation.mend import with_consequences
from validation.report.annotated import Annotated, Annotations, annotated_names
from validation.report.findings_json import as_text, counts
from validation.report.outputs import CannotWrite, Outputs
from validation.report.progress import Progress
from validation.report.wanted_sheets import wanted_sheets
from validation.report.what_if_text import what_if_lines
from validation.thresholds import threshold_names
from validation.what_if import Change, WhatIf, changed_lists, read_changes, what_if

KINDS = (*INSTRUMENT_SHEETS, *LOOP_SHEETS)
FINISHED, FOUND, UNREADABLE, BROKEN = 0, 1, 2, 3
MOST_SAID = 20
HOW_TO_MAP = "see README.md, Mend how a list was read"
MOST_WANTED = 4


class Command(BaseCommand):
    """Read the lists, run every rule, write the exception list, the loop sheets and findings.json."""

    help = (
        "Reads a plant's instrument list (.xlsx, .xlsm or .csv; several files are one plant), runs every rule over "
        "the whole of it and writes exceptions.xlsx, an annotated copy, loop-sheets.pdf, mapping.toml (how headings "
        "were understood, to mend and give back) and findings.json. Exit status: 0 finished; "
        "1 findings at or above --fail-on; 2 something cannot be read or written; 3 a rule broke."
    )
    requires_system_checks = ()

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Declare the options."""
        parser.add_argument("lists", nargs="*", metavar="LIST", help="the list, or all lists of one plant")
        parser.add_argument("--to", required=True, metavar="DIR", help="the folder for the outputs")
        parser.add_argument("--plant", metavar="plant.toml", help="the plant's data, where no sheet has them")
        parser.add_argument("--mapping", metavar="mapping.toml", help="how an earlier run read these lists, mended")
        parser.add_argument("--what-if", metavar="FILE.toml", help="changes; prints what would be found with them")
        parser.add_argument("--no-sheets", action="store_true", help="leave out loop-sheets.pdf")
        parser.add_argument("--no-annotated", action="store_true", help="leave out the annotated copy")
        parser.add_argument(
            "--fail-on",
            choices=[severity.value for severity in Severity],
            help="exit with 1 where there is a finding of this severity or a worse one",
        )

    def handle(self, *args: Any, **options: Any) -> None:
        """Run and leave with the exit status."""
        # One run, then the process ends: nothing it makes is garbage, and walking millions of records
        # for cycles costs a fifth of the time.
        gc.disable()
        sys.exit(self.run_audit(options))

    def run_audit(self, options: dict[str, Any]) -> int:
        """Return the exit status."""
        self._annotated: list[str] = []
        if not options["lists"]:
            return self._cannot("name the list to audit; the plant's own index cannot be kept yet")
        paths = [Path(name) for name in options["lists"]]
        plant_toml = Path(options["plant"]) if options["plant"] else None
        mapping_toml = Path(options["mapping"]) if options["mapping"] else None
        supposed: WhatIf | None = None
        with Progress(self.stderr) as progress:
            try:
                changes = _changes(options["what_if"])
                progress.stage("reading")
                beside = [path for path in (plant_toml, mapping_toml) if path is not None]
                inputs = {str(path): _digest(path) for path in [*paths, *beside]}
                lists = read_lists(
                    paths, KINDS, plant_toml=plant_toml, mapping_toml=mapping_toml, thresholds=threshold_names
                )
                progress.stage("putting the plant together")
                plant = assemble(lists)
                if changes:
                    changed_lists(plant, changes)  # refused before anything is written
                result = audit(plant, on_rule=lambda number, of, code: progress.step("rules", number, of, code))
                if changes:
                    progress.stage("what if")
                    supposed = what_if(result, changes)
                with_consequences(result, on_fix=lambda number, of: progress.step("fixes", number, of))
                folder = Path(options["to"])
                with Outputs(folder, keep=paths) as outputs:
                    self._write(outputs, result, inputs, options, progress)
            except NoTags as error:
                return self._cannot(f"{error}; or tell with --mapping which heading is the tag: {HOW_TO_MAP}")
            except (UnreadableFile, CannotWrite) as error:
                return self._cannot(str(error))
            except CannotStand as error:
                return self._cannot(f"{options['what_if']}: {error}")
            except OSError as error:
                return self._cannot(f"{error.filename or 'a file'}: {(error.strerror or str(error)).lower()}")
        self._say(result, Path(options["to"]), outputs)
        if supposed is not None:
            for line in what_if_lines(supposed):
                self._out(line)
        if result.broken or (supposed is not None and supposed.broken):
            return BROKEN
        if options["fail_on"]:
            limit = Severity(options["fail_on"]).rank
            if any(finding.severity.rank <= limit for finding in result.of(Outcome.FINDING)):
                return FOUND
        return FINISHED

    def _write(
        self,
        outputs: Outputs,
        result: Audit,
        inputs: dict[str, str],
        options: dict[str, Any],
        progress: Progress,
    ) -> None:
        from validation.report.exceptions import write_exceptions

        marks: dict[str, str] | None = None
        progress.stage("writing exceptions.xlsx")
        outputs.add("exceptions.xlsx", lambda path: write_exceptions(result, path))
        if not options["no_annotated"]:
            self._annotate(outputs, result, progress)
        if not options["no_sheets"]:
            progress.stage("drawing loop-sheets.pdf")
            marks = {}
            outputs.add("loop-sheets.pdf", lambda path: marks.update(_draw(result, path, progress)))
        mapping = mapping_text(mapping_of(result.plant.lists.sheets), KINDS)
        outputs.add("mapping.toml", lambda path: _write_text(path, mapping))
        digests = dict(outputs.digests)
        text = as_text(result, digests=digests, version=VERSION, inputs=inputs, sheets=marks)
        outputs.add("findings.json", lambda path: _write_text(path, text))

    def _annotate(self, outputs: Outputs, result: Audit, progress: Progress) -> None:
        annotations = Annotations(result)
        for file, name in annotated_names(result.plant.lists.files).items():
            progress.stage(f"writing {name}")
            made: list[Annotated] = []
            write = partial(_annotate, annotations, file, made)
            try:
                outputs.add(name, write)
            except UnreadableFile as error:
                self._annotated.append(f"no annotated copy of {file}: {error.place} {error.reason}")
            else:
                self._annotated.extend(f"{name}: {line}" for line in made[0].lines)

    def _out(self, text: str) -> None:
        self.stdout.write(for_console(text))

    def _err(self, text: str) -> None:
        self.stderr.write(for_console(text))

    def _cannot(self, text: str) -> int:
        self._err(f"audit: {text}")
        return UNREADABLE

    def _say(self, result: Audit, folder: Path, outputs: Outputs) -> None:
        figures = counts(result)
        say = self._out
        say(
            f"{figures['tags']} tags, {figures['loops']} loops, {figures['circuits']} circuits from "
            f"{figures['rows']} rows; {figures['cells_read']} cells read, {figures['cells_unread']} unread"
            + (f", {figures['cells_left_out']} on sheets that were not read" if figures["cells_left_out"] else "")
        )
        say(
            f"findings: {figures['danger']} danger, {figures['fault']} fault, {figures['gap']} gap; "
            f"{figures['review']} to review; {figures['unchecked']} checks could not be made for want of data"
        )
        missed: dict[str, list[str]] = {}
        for sheet in result.plant.lists.sheets:
            if sheet.missed:
                missed.setdefault(sheet.skipped, []).append(f"'{sheet.sheet}'")
        for why, sheets in list(missed.items())[:MOST_SAID]:
            more = f" and {len(sheets) - MOST_SAID} more" if len(sheets) > MOST_SAID else ""
            say(f"not read: {', '.join(sheets[:MOST_SAID])}{more}: {why}")
        for line in self._annotated:
            say(line)
        for wanted in [each for each in wanted_sheets(result) if each.checks][:MOST_WANTED]:
            say(f"not checked: {wanted}")
        guessed = [note for sheet in result.plant.lists.sheets for note in _guesses(sheet)]
        for note in guessed[:MOST_SAID]:
            say(f"heading guessed: {note}")
        for problem in [each for each in result.plant.lists.problems if each.subject == "plant"][:MOST_SAID]:
            nearest = f"; the nearest: {', '.join(problem.readings)}" if problem.readings else ""
            self._err(f"plant: {problem.title} = {problem.text}: {problem.reason}{nearest}")
        notes = result.plant.lists.mapping_notes
        for misfit in notes[:MOST_SAID]:
            self._err(f"mapping: {misfit}")
        if len(notes) > MOST_SAID:
            self._err(f"mapping: and {len(notes) - MOST_SAID} more; see the Summary of exceptions.xlsx")
        for each in result.broken[:5]:
            self._err(f"rule {each.rule} could not be run on {each.subject}: {each.error}")
        if len(result.broken) > 5:
            self._err(f"and {len(result.broken) - 5} more; see findings.json")
        say(f"written to {folder}: {', '.join(outputs.digests)}")


def _changes(name: str | None) -> tuple[Change, ...]:
    if not name:
        return ()
    try:
        return read_changes(Path(name).read_text(encoding="utf-8-sig"))
    except UnicodeDecodeError as error:
        raise UnreadableFile(name, "", "is not text in UTF-8") from error
    except OSError as error:
        raise UnreadableFile(name, "", (error.strerror or str(error)).lower()) from error


def _digest(path: Path) -> str:
    try:
        if path.exists() and not (path.is_file() or path.is_dir()):
            raise UnreadableFile(str(path), "", "is no ordinary file")  # a pipe may never end
        with path.open("rb") as file:
            return hashlib.file_digest(file, "sha256").hexdigest()
    except IsADirectoryError as error:
        raise UnreadableFile(str(path), "", "is a folder; name a file") from error
    except OSError as error:
        raise UnreadableFile(str(path), "", (error.strerror or str(error)).lower()) from error


def _guesses(sheet: SheetReport) -> list[str]:
    if sheet.match is None:
        return []
    return [
        f"{sheet.sheet}, '{each.heading}' is taken for {each.column.title}"
        for each in sheet.match.columns.values()
        if each.how == "likeness"
    ]


def _draw(result: Audit, path: Path, progress: Progress) -> dict[str, str]:
    """Draw the sheets; return their content marks."""
    from loops.sheet.mark import mark_of
    from loops.sheet.pdf import write_sheets
    from validation.report.sheet_notes import notes_by_loop

    drawn = write_sheets(
        result.plant,
        path,
        notes=notes_by_loop(result),
        on_sheet=lambda number, of: progress.step("sheets", number, of),
    )
    return {loop: mark_of(parts) for loop, parts in drawn.marks.items()}


def _annotate(annotations: Annotations, file: str, made: list[Annotated], path: Path) -> None:
    made.append(annotations.write(file, path))


def _write_text(path: Path, text: str) -> None:
    path.write_text(text, encoding="utf-8")
