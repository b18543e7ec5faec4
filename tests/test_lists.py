"""Lists as people keep them: each gives its own mistakes, and nothing else.

Beside each list stands what is wrong with it: `must` be found; `may` be found as well, such as one finding
on the whole list for a column that it does not have. Whatever else is found is a false alarm.
"""

from __future__ import annotations

import json
from functools import cache
from pathlib import Path
from typing import NamedTuple

import pytest

from instruments.columns import SHEETS as INSTRUMENT_SHEETS
from instruments.workbook.files import read_lists
from loops.columns import SHEETS as LOOP_SHEETS
from loops.plant import assemble
from validation.audit import Audit, audit
from validation.finding import Outcome

FOLDER = Path(__file__).parents[1] / "fixtures" / "lists"
NAMES = sorted(path.name.removesuffix(".expected.json") for path in FOLDER.glob("*.expected.json"))


class Mistake(NamedTuple):
    """What is wrong with a row: rule and subject."""

    rule: str
    subject: str


def expected(name: str, key: str) -> set[Mistake]:
    written = json.loads((FOLDER / f"{name}.expected.json").read_text(encoding="utf-8"))
    return {Mistake(each["rule"], each["subject"]) for each in written[key]}


@cache
def audited(name: str) -> Audit:
    (path,) = (path for path in FOLDER.glob(f"{name}.*") if path.suffix in (".xlsx", ".csv"))
    return audit(assemble(read_lists([path], (*INSTRUMENT_SHEETS, *LOOP_SHEETS))), raise_errors=True)


def test_there_are_lists() -> None:
    assert len(NAMES) >= 9


@pytest.mark.parametrize("name", NAMES)
def test_every_mistake_is_found(name: str) -> None:
    found = {Mistake(each.rule, each.subject) for each in audited(name).of(Outcome.FINDING)}
    assert expected(name, "must") - found == set()


@pytest.mark.parametrize("name", NAMES)
def test_nothing_else_is_found(name: str) -> None:
    known = expected(name, "must") | expected(name, "may")
    others = [each for each in audited(name).findings if Mistake(each.rule, each.subject) not in known]
    assert [f"{each.outcome.value} {each.rule} {each.subject}: {each.message}" for each in others] == []


@pytest.mark.parametrize("name", NAMES)
def test_every_cell_is_accounted_for(name: str) -> None:
    sheets = audited(name).plant.lists.sheets
    of_lists = [each for each in sheets if each.kind is not None]
    assert of_lists
    assert [(each.sheet, each.cells_read + each.cells_unread) for each in of_lists] == [
        (each.sheet, each.cells_filled) for each in of_lists
    ]
    # A sheet that is no list says why.
    assert [each.sheet for each in sheets if each.kind is None and not each.skipped] == []
