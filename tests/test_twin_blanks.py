"""Each cell of what a rule found blanked: what was a finding becomes unchecked, never clear."""

import tomllib
from collections.abc import Iterable, Iterator, Mapping, Sequence
from functools import cache

import pytest

from tests.marrowbeck import (
    FOLDER,
    INDEX,
    PACKAGE,
    Change,
    Sheets,
    branches,
    changes,
    headings,
    look_of,
    looks,
    nears,
    with_changes,
)
from tests.twin import Said, batches, said_of, twin
from validation.audit import Audit
from validation.finding import Outcome

KEYS = {look.title: look.key for look in looks() if look.key}
# The columns that name a row of another sheet.
NAMES = {
    "Type Code": "Device types",
    "Device Code": "Device types",
    "Card": "Device types",
    "Module": "Device types",
    "Barrier / Isolator": "Device types",
    "Area": "Areas",
    "Cable No.": "Cables",
    "Cable type": "Cable types",
    "Type": "Cable types",
}
# What rules take one for the other.
TOGETHER = (
    ("Calibrated Range", "DCS Range"),
    ("Operating Value Min", "Operating Value Norm", "Operating Value Max"),
    ("Oper. Press. (barg) Min", "Oper. Press. (barg) Norm", "Oper. Press. (barg) Max"),
    ("Oper. Temp. (°C) Min", "Oper. Temp. (°C) Norm", "Oper. Temp. (°C) Max"),
    ("Oper. Press. (barg) Max", "Design Press. (barg)"),
    ("Oper. Temp. (°C) Min", "Oper. Temp. (°C) Norm", "Oper. Temp. (°C) Max", "Design Temp. (°C)"),
    ("Sqrt Tx", "Sqrt DCS"),
    ("Instrument Type", "Type Code"),
    ("Type Code", "Ex Marking"),
    ("Type Code", "Signal Type"),
    ("Type Code", "Wires"),
    ("I/O Type", "Card"),
    ("I/O Type", "I/O Address", "Card"),
    ("Power Supply", "Card"),
    ("Area", "Haz. Area Class."),
    ("Alarms L", "Alarms H", "Trip"),
)
BROKEN = (*branches(), *(near.beyond for near in nears() if near.beyond is not None))

Place = tuple[str, int]


@cache
def given() -> Mapping[tuple[str, str, str], tuple[frozenset[str], str]]:
    """Return what the catalogue gives to a blank other than unchecked, with the reason: by rule, sheet and heading."""
    told = tomllib.loads((FOLDER / "blanks.toml").read_text(encoding="utf-8"))["blank"]
    found: dict[tuple[str, str, str], tuple[frozenset[str], str]] = {}
    for each in told:
        for heading in listed(each["blank"]):
            key = (each["rule"], each.get("sheet", INDEX), heading)
            assert key not in found, key
            found[key] = (frozenset(listed(each["says"])), each["why"])
    return found


def listed(told: str | list[str]) -> list[str]:
    return [told] if isinstance(told, str) else told


def rows_called(rows: Sheets, title: str, name: str) -> Iterator[Place]:
    """Give the rows of a sheet that its key column calls `name`."""
    look = look_of(title)
    column = headings(title, rows[title]).index(look.key)
    start = look.heading - 1 + look.heading_rows
    for number, row in enumerate(rows[title][start:], start=start):
        if name and row[column] == name:
            yield title, number


def cell(rows: Sheets, place: Place, heading: str) -> str:
    title, number = place
    names = headings(title, rows[title])
    return rows[title][number][names.index(heading)] if heading in names else ""


def concerned(change: Change, rows: Sheets) -> frozenset[Place]:
    """Return the rows that a mistake is about, and those that they name: types, areas, cables."""
    found: set[Place] = set()
    for sheet, row, cells in (
        (change.sheet, change.row, change.cells),
        *((each.sheet, each.row, each.cells) for each in change.more),
    ):
        key = KEYS.get(sheet)
        if key is not None:
            found.update(rows_called(rows, sheet, cells[key][1] if key in cells else row))
    for name in change.about.split(", "):
        # Where a loop has several circuits, they are called by number and tag.
        for sheet in (INDEX, PACKAGE, "Areas", "Loops"):
            found.update(rows_called(rows, sheet, name))
            if change.rule.startswith("ELC"):
                found.update(rows_called(rows, sheet, name.rpartition(" ")[2]))
        # A circuit or a loop is called by its number.
        for number in range(len(rows["Loops"])):
            if cell(rows, ("Loops", number), "Loop No.") == name:
                found.add(("Loops", number))
        for number in range(len(rows[INDEX])):
            if cell(rows, (INDEX, number), "Loop No.") == name and change.rule.startswith(("DAT07", "ELC")):
                found.add((INDEX, number))
    for place in tuple(found):
        if place[0] == "Loops":
            found.update(rows_called(rows, INDEX, cell(rows, place, "Tag")))
    for _ in range(2):  # a tag's cable, and that cable's type
        for place in tuple(found):
            for heading, sheet in NAMES.items():
                # Type is a kind on the package's sheet.
                if sheet != place[0] and (heading != "Type" or place[0] == "Cables"):
                    found.update(rows_called(rows, sheet, cell(rows, place, heading)))
    return frozenset(found)


def blanked(rows: Sheets, cells: Iterable[tuple[str, int, int]]) -> Sheets:
    """Return the rows with cells blanked: title, row and column counted from 0."""
    changed = dict(rows)
    copied: set[str] = set()
    for title, number, column in cells:
        if title not in copied:
            copied.add(title)
            changed[title] = [list(row) for row in rows[title]]
        changed[title][number][column] = ""
    return changed


GRAVITY = (Outcome.FINDING, Outcome.REVIEW, Outcome.UNCHECKED, Outcome.CLEAR, Outcome.NOT_APPLICABLE)


def says(result: Audit, change: Change) -> Said:
    """Return what a rule says of a mistake: the gravest of what it says of a group's members."""
    found = [each for each in result.findings if each.rule == change.rule]
    if change.about in {each.subject for each in found}:
        return said_of(result, change.rule, change.about)
    if change.rule == "TAG01" and found:  # a row without a tag is called by what is left of it
        return Said(outcome=found[0].outcome)
    said = [said_of(result, change.rule, name) for name in change.about.split(", ")]
    return min(said, key=lambda each: GRAVITY.index(each.outcome))


class Mistakes:
    """Mistakes made together, and the rows that each is about."""

    def __init__(self, made: Sequence[Change]) -> None:
        self.made = made
        self.rows = twin().keep(with_changes(twin().rows, made))
        self._concerned = [concerned(change, self.rows) for change in made]

    def without(self, sheet: str, blanks: Sequence[str]) -> dict[str, str]:
        """Blank cells of a sheet in all rows that the mistakes are about; return those that are let off by it."""
        names = headings(sheet, self.rows[sheet])
        columns = [names.index(heading) for heading in blanks]
        of_sheet = [{number for title, number in places if title == sheet} for places in self._concerned]
        mine = [
            change
            for change, numbers in zip(self.made, of_sheet, strict=True)
            if any(self.rows[sheet][number][column] for number in numbers for column in columns)
        ]
        if not mine:
            return {}
        cells = [(sheet, number, column) for numbers in of_sheet for number in numbers for column in columns]
        result = twin().audit(blanked(self.rows, cells), codes={change.rule for change in mine})
        return {
            f"{change.rule} {change.about} without {' + '.join(blanks)} ({sheet})": wrong
            for change in mine
            if (wrong := let_off(change, sheet, " + ".join(blanks), says(result, change)))
        }


def let_off(change: Change, sheet: str, heading: str, said: Said) -> str:
    """Return what is said where a blank lets a mistake off: neither unchecked nor what the catalogue gives it."""
    if said.outcome in (Outcome.REVIEW if change.review else Outcome.FINDING, Outcome.UNCHECKED):
        return ""
    wanted, _ = given().get((change.rule, sheet, heading), (frozenset(), ""))
    return "" if said.outcome.value in wanted else str(said)


@cache
def demo() -> Mistakes:
    return Mistakes(changes())


@pytest.mark.parametrize("sheet", [sheet for sheet in KEYS if sheet in {"Areas", "Cables", "Cable types", "Loops"}])
def test_a_blank_on_a_sheet_lets_nothing_off(sheet: str) -> None:
    let: dict[str, str] = {}
    for heading in headings(sheet, demo().rows[sheet]):
        if heading != KEYS[sheet]:
            let |= demo().without(sheet, [heading])
    assert let == {}


def columns(sheet: str) -> list[list[str]]:
    """Return a sheet's columns but for its key in parts, so that they can be audited side by side."""
    names = [heading for heading in headings(sheet, twin().rows[sheet]) if heading != KEYS[sheet]]
    return [names[start::4] for start in range(4)]


@pytest.mark.parametrize(
    ("sheet", "part"),
    [(sheet, part) for sheet in (INDEX, PACKAGE, "Device types") for part in range(4)],
)
def test_a_blank_of_an_instrument_or_type_lets_nothing_off(sheet: str, part: int) -> None:
    let: dict[str, str] = {}
    for heading in columns(sheet)[part]:
        let |= demo().without(sheet, [heading])
    assert let == {}


@pytest.mark.parametrize("blanks", TOGETHER, ids=" + ".join)
def test_blanks_that_stand_in_for_one_another_let_nothing_off(blanks: tuple[str, ...]) -> None:
    assert demo().without(INDEX, blanks) == {}


@pytest.mark.parametrize(
    "batch",
    [batch for batch in batches(BROKEN) if len(batch) > 1],
    ids=lambda batch: f"{batch[0].rule}-{batch[-1].rule}-{len(batch)}",
)
def test_a_blank_among_the_cells_of_a_finding_lets_it_off_nowhere(batch: tuple[Change, ...]) -> None:
    rows = twin().keep(with_changes(twin().rows, batch))
    found = twin().audit(rows).findings
    cells = [
        [
            (each.sheet, each.row - 1, each.column - 1)
            for finding in found
            if finding.rule == change.rule and finding.subject == change.about
            for each in finding.cells
            if rows[each.sheet][each.row - 1][each.column - 1]
            and headings(each.sheet, rows[each.sheet])[each.column - 1] != KEYS.get(each.sheet)
        ]
        for change in batch
    ]
    let: dict[str, str] = {}
    for turn in range(max(map(len, cells))):
        chosen = {at: places[turn] for at, places in enumerate(cells) if turn < len(places)}
        result = twin().audit(blanked(rows, chosen.values()))
        for at, (sheet, _, column) in chosen.items():
            heading = headings(sheet, rows[sheet])[column]
            wrong = let_off(batch[at], sheet, heading, says(result, batch[at]))
            if wrong:
                let[f"{batch[at].rule} {batch[at].about} without {heading} ({sheet})"] = wrong
    assert let == {}


def test_every_reason_has_a_rule_and_a_column() -> None:
    for (rule, sheet, heading), (outcomes, why) in given().items():
        assert rule in {change.rule for change in (*changes(), *BROKEN)}
        assert set(heading.split(" + ")) <= set(headings(sheet, twin().rows[sheet]))
        assert outcomes <= {"clear", "not applicable", "review"}
        assert why
