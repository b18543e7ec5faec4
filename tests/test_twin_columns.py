"""Whole columns and sheets taken from the clean twin: one finding on the list, never one a row."""

from collections.abc import Callable, Sequence

import pytest

from tests.marrowbeck import INDEX, PACKAGE, THE_LIST, Rows, Sheets, found, headings, look_of, reviews
from tests.twin import twin

SETTINGS = ("Alarms LL", "Alarms L", "Alarms H", "Alarms HH", "Trip", "Trip Dir.", "Set Press. (barg)")
OF_PACKAGE = {
    "P&ID No.": "P&ID", "Service Description": "Description", "Line No.": "Line No.", "Equip.": "Equipment",
    "Area": "Area", "Haz. Area Class.": "Elec. Area Class", "Ex Marking": "Ex Rating", "I/O Type": "I/O Type",
    "I/O Address": "PLC Address", "Card": "Module", "Fail Pos.": "Fail Action", "Instrument Type": "Type",
    "Loop No.": "Loop", "Alarms L": "Alarm L", "Alarms H": "Alarm H", "Alarms HH": "Alarm HH", "Trip": "Trip",
    "Trip Dir.": "Trip on", "Set Press. (barg)": "Set Press. (psig)",
}  # fmt: skip


def without_columns(title: str, rows: Rows, names: Sequence[str]) -> Rows:
    """Return a sheet without some columns; what a parent heading stands over keeps it."""
    look, heads = look_of(title), headings(title, rows)
    kept = [at for at, name in enumerate(heads) if name not in names]
    assert len(kept) < len(heads)
    changed = [[row[at] for at in kept] for row in rows]
    if look.heading_rows == 2:
        above, below = rows[look.heading - 1], rows[look.heading]
        parents: list[str] = []
        for at, text in enumerate(above):
            parents.append(text or (parents[-1] if below[at] and parents else ""))
        line = changed[look.heading - 1]
        for place, at in enumerate(kept):
            same = place > 0 and below[kept[place - 1]] and parents[kept[place - 1]] == parents[at]
            line[place] = "" if below[at] and same else parents[at]
    return changed


def lacking(*names: str) -> Sheets:
    """Return the twin without some of the index's columns, and the package without its own."""
    of_package = [OF_PACKAGE[name] for name in names if name in OF_PACKAGE]
    rows = {**twin().rows, INDEX: without_columns(INDEX, twin().rows[INDEX], names)}
    return {**rows, PACKAGE: without_columns(PACKAGE, rows[PACKAGE], of_package)} if of_package else rows


def sheet_lacking(title: str, *names: str, rows: Sheets | None = None) -> Sheets:
    made = rows or twin().rows
    return {**made, title: without_columns(title, made[title], names)}


def without(*titles: str, rows: Sheets | None = None) -> Sheets:
    return {title: each for title, each in (rows or twin().rows).items() if title not in titles}


def headed(old: str, new: str) -> Sheets:
    """Return the twin with a heading of the index changed."""
    look = look_of(INDEX)
    changed = [list(row) for row in twin().rows[INDEX]]
    for line in changed[look.heading - 1 : look.heading - 1 + look.heading_rows]:
        line[:] = [new if text == old else text for text in line]
    assert changed != twin().rows[INDEX]
    return {**twin().rows, INDEX: changed}


def filled(heading: str, text: str) -> Sheets:
    """Return the twin with each filled cell of a column holding the same text."""
    look = look_of(INDEX)
    changed = [list(row) for row in twin().rows[INDEX]]
    at = headings(INDEX, changed).index(heading)
    for row in changed[look.heading - 1 + look.heading_rows :]:
        if row[at] and sum(1 for cell in row if cell) > 1:
            row[at] = text
    return {**twin().rows, INDEX: changed}


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (lambda: lacking("P&ID No."), ["DAT01"]),
        (lambda: lacking("Service Description"), ["DAT01"]),
        (lambda: lacking("Line No.", "Equip."), ["DAT02"]),
        (lambda: headed("Design Press. (barg)", "Design Press."), ["DAT05 (design pressure)"]),
        (lambda: sheet_lacking("Device types", "Limit unit"), ["DAT05 (limit unit)"]),
        (lambda: sheet_lacking(PACKAGE, "Unit"), ["DAT05 (range unit)"]),
        (lambda: filled("Temp. at Device (°C)", "6O"), ["DAT09 (temperature at the device)"]),
        (lambda: filled("Bad PV", "perhaps"), ["DAT09 (bad-signal detection)"]),
        (lambda: without("Areas"), ["DAT10"]),
        (lambda: without("Cables"), ["DAT10"]),
        (lambda: without("Cable types"), ["DAT10"]),
        (lambda: without("Areas", rows=lacking("Area", "Haz. Area Class.")), ["HAZ01"]),
        (lambda: sheet_lacking("Device types", "Ex marking", rows=lacking("Ex Marking")), ["HAZ02"]),
        (lambda: sheet_lacking("Areas", "Ambient min (°C)", "Ambient max (°C)"), ["HAZ20"]),
        (lambda: sheet_lacking("Areas", "T class"), ["HAZ20"]),
        (lambda: sheet_lacking("Areas", "Zone"), ["HAZ20"]),
        (lambda: without("IO list", rows=lacking("I/O Type", "I/O Address", "Card")), ["WIR06"]),
        (lambda: without("Alarm and trip list", rows=lacking(*SETTINGS)), ["SET06"]),
        (lambda: lacking("Fail Pos."), ["CTL01"]),
        # What another sheet has, or the tags tell.
        (lambda: lacking("I/O Type", "I/O Address", "Card"), []),
        (lambda: lacking("Instrument Type"), []),
        (lambda: lacking("Loop No."), []),
        (lambda: lacking("Item"), []),
        (lambda: without("Terminations", "Loops", "IO list", "Alarm and trip list"), []),
    ],
)
def test_what_is_wrong_with_a_column_is_found_once(rows: Callable[[], Sheets], expected: list[str]) -> None:
    wanted = []
    for each in expected:
        rule, _, part = each.partition(" ")
        wanted.append(f"{rule} {THE_LIST}{f' {part}' if part else ''}")
    lines = found(twin().audit(rows()))
    # What is no longer there asks nothing of a person.
    assert [line for line in lines if not line.startswith("review ")] == wanted
    assert {line for line in lines if line.startswith("review ")} <= set(reviews())


def numbered_otherwise(every: int) -> Sheets:
    """Return the twin with each so-many-th loop of the index given another number."""
    changed = [list(row) for row in twin().rows[INDEX]]
    at = headings(INDEX, changed).index("Loop No.")
    counted = 0
    for row in changed[look_of(INDEX).heading + 1 :]:
        letters, dash, number = row[at].partition("-")
        if dash and sum(1 for cell in row if cell) > 1:
            counted += 1
            if counted % every == 0:
                row[at] = f"{letters}-{int(number) + 500}"
    return {**twin().rows, INDEX: changed}


@pytest.mark.parametrize(("every", "on_the_list"), [(4, True), (5, False)])
def test_another_numbering_of_the_loops_is_found_once(every: int, on_the_list: bool) -> None:
    lines = [line for line in found(twin().audit(numbered_otherwise(every))) if line.startswith("TAG08 ")]
    assert (lines == [f"TAG08 {THE_LIST}"]) is on_the_list
    assert (len(lines) > 40) is not on_the_list
