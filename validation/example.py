"""Small plants written in code: for the examples in the rules' docstrings, and for tests."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.workbook.lists import Lists, records_of_sheets
from instruments.workbook.sheet import Sheet
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import Plant, assemble
from validation.audit import audit
from validation.finding import Finding, Outcome

KINDS = (*INSTRUMENT_SHEETS, *LOOP_SHEETS)
FILE = "list.xlsx"
Rows = Sequence[Mapping[str, Any]]


def example_lists(instruments: Rows, **sheets: Rows | Mapping[str, Any]) -> Lists:
    """Return the lists of a plant whose rows are given by column title.

    Parameters
    ----------
    instruments
        Rows of the index: title to cell, as in a workbook.
    sheets
        Rows of other sheets by a short name: types, areas, loops, io_list, alarms, cables, cable_types,
        terminations; and `plant`, its fields and their values.
    """
    tables: list[Sheet] = []
    for short, name in _SHEETS.items():
        rows = instruments if short == "instruments" else sheets.get(short)
        if not rows:
            continue
        tables.append(_fields(name, rows) if isinstance(rows, Mapping) else _sheet(name, rows))
    return records_of_sheets(tables, KINDS)


def example_plant(instruments: Rows, **sheets: Rows | Mapping[str, Any]) -> Plant:
    """Return the plant put together from rows; see `example_lists`."""
    return assemble(example_lists(instruments, **sheets))


def findings(code: str, instruments: Rows, **sheets: Rows | Mapping[str, Any]) -> list[Finding]:
    """Return what one rule finds and reviews in a small plant."""
    return audit(example_plant(instruments, **sheets), codes=[code], raise_errors=True).findings


def said(code: str, instruments: Rows, **sheets: Rows | Mapping[str, Any]) -> list[str]:
    """Return the messages of one rule on a small plant, each behind its subject; reviews say so."""
    return [
        f"{'review: ' if each.outcome is Outcome.REVIEW else ''}{each.subject}: {each.message}"
        for each in findings(code, instruments, **sheets)
    ]


def outcomes(code: str, instruments: Rows, **sheets: Rows | Mapping[str, Any]) -> dict[str, int]:
    """Return how often one rule came to each outcome on a small plant; those that never occur are left out."""
    coverage = audit(example_plant(instruments, **sheets), codes=[code], raise_errors=True).coverage[code]
    return {outcome.value: coverage.count(outcome) for outcome in Outcome if coverage.count(outcome)}


def unchecked_for(code: str, instruments: Rows, **sheets: Rows | Mapping[str, Any]) -> dict[str, int]:
    """Return the blanks that leave one rule unchecked on a small plant, with their counts."""
    coverage = audit(example_plant(instruments, **sheets), codes=[code], raise_errors=True).coverage[code]
    return dict(coverage.because)


_SHEETS = {
    "instruments": "Instruments",
    "types": "Device types",
    "areas": "Areas",
    "loops": "Loops",
    "cables": "Cables",
    "cable_types": "Cable types",
    "terminations": "Terminations",
    "io_list": "IO list",
    "alarms": "Alarm list",
    "plant": "Plant",
}


def _fields(name: str, values: Mapping[str, Any]) -> Sheet:
    """Return a sheet with a field and its value on each row, as a plant's data stand."""
    cells: list[list[Any]] = [[title, str(value)] for title, value in {**_PLANT, **values}.items()]
    return Sheet(file=FILE, name=name, rows=cells, cells_filled=2 * len(cells))


_PLANT = {"name": "Example", "numbering": "parallel"}


def _sheet(name: str, rows: Rows) -> Sheet:
    titles = list(dict.fromkeys(title for row in rows for title in row))
    cells: list[list[Any]] = [list(titles)]
    cells.extend([_cell(row.get(title)) for title in titles] for row in rows)
    filled = sum(1 for row in cells for cell in row if cell is not None)
    return Sheet(file=FILE, name=name, rows=cells, cells_filled=filled)


def _cell(value: Any) -> Any:
    """Return a cell as the reader gives it: a blank is None, and every number a float."""
    if value is None or value == "":
        return None
    return float(value) if isinstance(value, int) and not isinstance(value, bool) else value
