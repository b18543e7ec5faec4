"""The stages of an audit, each timed."""

from __future__ import annotations

import gc
import resource
import tempfile
import time
from pathlib import Path

from openpyxl import load_workbook

from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.workbook.lists import records_of_sheets
from instruments.workbook.reading_process import read_apart
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import assemble
from validation.audit import audit, reaudit
from validation.mend import with_consequences
from validation.report.annotated import Annotations
from validation.report.exceptions import write_exceptions
from validation.report.findings_json import as_text
from validation.rule import load_rules


def audit_stages(path: Path) -> dict[str, float]:
    """Audit a list and return the seconds of each stage, without the loop sheets."""
    load_rules()
    gc.disable()  # as the command does
    marks = [time.perf_counter()]

    def mark() -> float:
        marks.append(time.perf_counter())
        return marks[-1] - marks[-2]

    ((*sheets,),) = read_apart([(path, {})])
    seconds = {"read": mark()}
    # At its end both processes hold the sheets; the reading one takes no more than it has taken so far.
    both_mb = peak_mb() + peak_mb(resource.RUSAGE_CHILDREN)
    lists = records_of_sheets(sheets, (*INSTRUMENT_SHEETS, *LOOP_SHEETS), files=(str(path),))
    sheets.clear()
    seconds["normalise"] = mark()
    plant = assemble(lists)
    seconds["assemble"] = mark()
    result = audit(plant)
    seconds["rules"] = mark()
    with_consequences(result)
    seconds["fixes"] = mark()
    with tempfile.TemporaryDirectory(prefix="ferrule-bench-") as folder:
        write_exceptions(result, Path(folder) / "exceptions.xlsx")
        (Path(folder) / "findings.json").write_text(as_text(result, digests={}, version="", inputs={}))
        seconds["write"] = mark()
        Annotations(result).write(str(path), Path(folder) / "annotated.xlsx")
        seconds["annotate"] = mark()
    wired = [each for each in plant.live if plant.circuits_of(each)][:200] or list(plant.live[:200])
    since = time.perf_counter()
    for each in wired:
        reaudit(each, plant)
    one_ms = (time.perf_counter() - since) * 1000 / len(wired) if wired else 0.0
    return {
        **seconds,
        "instruments": float(len(plant.instruments)),
        "loops": float(len(plant.loops)),
        "findings": float(len(result.findings)),
        "one_ms": one_ms,
        "peak_mb": max(both_mb, peak_mb()),
    }


def bare_read(path: Path) -> dict[str, float]:
    """Return the seconds that openpyxl's read-only mode needs merely to read the file."""
    since = time.perf_counter()
    book = load_workbook(path, read_only=True)
    for sheet in book.worksheets:
        for _ in sheet.iter_rows(values_only=True):
            pass
    book.close()
    return {"read": time.perf_counter() - since, "peak_mb": peak_mb()}


def peak_mb(who: int = resource.RUSAGE_SELF) -> float:
    """Return the most memory that this process, or one that it started, has held at once."""
    return resource.getrusage(who).ru_maxrss / 1024
