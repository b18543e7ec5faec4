"""Each rule of the catalogue over the clean twin: just inside it nothing, a step beyond it that rule alone."""

from collections import Counter
from pathlib import Path

import pytest

from instruments.workbook.reader import read_file
from tests.marrowbeck import (
    Change,
    Near,
    branches,
    changes,
    demo_rows,
    expected,
    found,
    nears,
    reviews,
    with_changes,
    write_workbook,
)
from tests.twin import Said, batches, cells_of, said_of, twin
from validation.finding import Outcome
from validation.rule import load_rules

BROKEN = (*branches(), *(near.beyond for near in nears() if near.beyond is not None))


def named(batch: tuple[Change, ...]) -> str:
    return f"{batch[0].rule}-{batch[-1].rule}-{len(batch)}"


def difference(got: list[str], wanted: list[str]) -> dict[str, int]:
    """Return what was found and is not wanted as positive counts, what is wanted and was not found as negative."""
    lines = Counter(got)
    lines.subtract(wanted)
    return {line: count for line, count in lines.items() if count}


def test_a_sheet_made_in_memory_is_the_one_that_is_read(tmp_path: Path) -> None:
    rows = demo_rows()
    for read in read_file(write_workbook(tmp_path / "demo.xlsx", rows)):
        made = cells_of(read.name, rows[read.name])
        assert (read.name, made.rows) == (read.name, read.rows)
        assert (read.name, made.merged, made.errors) == (read.name, read.merged, read.errors)
        assert made.cells_filled == read.cells_filled


def test_a_batch_touches_nothing_twice() -> None:
    for batch in batches(BROKEN):
        places = [place for change in batch for place in change.places]
        assert len(places) == len(set(places))
    assert sum(map(len, batches(BROKEN))) == len(BROKEN)


@pytest.mark.parametrize("batch", batches(near.change for near in nears()), ids=named)
def test_just_inside_a_rule_nothing_is_found(batch: tuple[Change, ...]) -> None:
    result = twin().audit(with_changes(twin().rows, batch))
    assert difference(found(result), reviews()) == {}
    of_change: dict[int, Near] = {id(near.change): near for near in nears()}
    said = {f"{change.rule} {change.about}": said_of(result, change.rule, change.about) for change in batch}
    wanted = {
        f"{change.rule} {change.about}": Said(outcome=Outcome(near.says), because=near.because)
        for change in batch
        for near in (of_change[id(change)],)
    }
    # What a rule does not look at it cannot pass: a near miss is clear, or says why it is not.
    assert said == wanted


@pytest.mark.parametrize("batch", batches(BROKEN), ids=named)
def test_beyond_it_the_rule_is_found_with_its_companions_alone(batch: tuple[Change, ...]) -> None:
    result = twin().audit(with_changes(twin().rows, batch))
    assert difference(found(result), [*expected(batch), *reviews()]) == {}


def test_every_rule_has_a_near_miss_and_is_broken_in_several_ways() -> None:
    codes = {rule.code for rule in load_rules()}
    assert {near.change.rule for near in nears()} == codes
    ways = Counter(change.rule for change in (*changes(), *BROKEN))
    assert {code: ways[code] for code in codes if ways[code] < 2} == {}
