"""The demo plant: its lists, the workbook made of them, and what the audit says of both."""

from collections import Counter
from collections.abc import Callable
from pathlib import Path

import openpyxl
import pytest
from python_calamine import CalamineWorkbook

from tests.marrowbeck import (
    DEMO,
    FINDINGS,
    INDEX,
    PACKAGE,
    Change,
    Sheets,
    audit_of,
    change_from,
    changes,
    demo_audit,
    demo_rows,
    expected,
    findings_text,
    found,
    headings,
    look_of,
    looks,
    reviews,
    row_number,
    shuffled,
    twin_rows,
    typed,
    with_changes,
    without_dittos,
    write_files,
    write_twin,
    write_workbook,
)
from tests.twin import twin
from validation.audit import Audit
from validation.rule import load_rules


def column(sheets: Sheets, title: str, heading: str) -> list[str]:
    """Return the texts of a column beneath its heading, without blanks, sections and notes."""
    rows = sheets[title]
    look = look_of(title)
    at = headings(title, rows).index(heading)
    body = rows[look.heading - 1 + look.heading_rows :]
    return [row[at] for row in body if row[at] and sum(1 for cell in row if cell) > 1]


def test_the_plant_has_its_tags_areas_and_units() -> None:
    sheets = twin_rows()
    tags = column(sheets, INDEX, "Tag No.") + column(sheets, PACKAGE, "Tag Number")
    assert len(tags) == len(set(tags)) == 333
    units = Counter(tag.translate({ord("–"): "-", ord(" "): "-"}).split("-")[1][0] for tag in tags)
    assert {unit: count > 25 for unit, count in units.items()} == {
        "1": True, "2": True, "3": True, "4": True, "5": True, "9": False,
    }  # fmt: skip
    systems = dict(zip(column(sheets, "Areas", "Area"), column(sheets, "Areas", "System"), strict=True))
    assert Counter(systems.values()) == {"Zone": 12, "Division": 3, "None": 1}
    assert set(column(sheets, "Areas", "Zone")) == {"0", "1", "2", "20", "21", "22"}


def test_every_signal_has_an_address_of_its_own_but_for_split_range_and_bus() -> None:
    sheets = twin_rows()
    used = Counter(column(sheets, INDEX, "I/O Address") + column(sheets, PACKAGE, "PLC Address"))
    assert {address: count for address, count in used.items() if count > 1} == {"D1.05.00": 2, "MB-SEG-01": 2}
    assert set(column(sheets, INDEX, "I/O Type")) == {"AI", "AO", "DI", "DO", "RTD", "TC", "Bus"}


def test_what_the_index_names_is_listed() -> None:
    sheets = twin_rows()
    for title, names, sheet, key in (
        (INDEX, "Type Code", "Device types", "Code"),
        (INDEX, "Card", "Device types", "Code"),
        (INDEX, "Barrier / Isolator", "Device types", "Code"),
        (INDEX, "Area", "Areas", "Area"),
        (INDEX, "Cable No.", "Cables", "Cable No."),
        (PACKAGE, "Device Code", "Device types", "Code"),
        (PACKAGE, "Module", "Device types", "Code"),
        (PACKAGE, "Area", "Areas", "Area"),
        (PACKAGE, "Cable No.", "Cables", "Cable No."),
        ("Cables", "Type", "Cable types", "Code"),
        ("Loops", "Cable type", "Cable types", "Code"),
    ):
        missing = set(column(sheets, title, names)) - set(column(sheets, sheet, key))
        assert (title, names, missing) == (title, names, set())


@pytest.mark.parametrize("change", changes(), ids=lambda each: f"{each.number}-{each.rule}-{each.row}")
def test_a_change_finds_its_cells(change: Change) -> None:
    before, after = twin_rows(), with_changes(twin_rows(), [change])
    differing = sum(
        one != other
        for title in before
        for row, changed in zip(before[title], after[title], strict=False)
        for one, other in zip(row, changed, strict=True)
    )
    if change.copied:
        assert sum(map(len, after.values())) == sum(map(len, before.values())) + 1
    else:
        assert differing == len(change.cells) + sum(len(edit.cells) for edit in change.more)


def test_the_demo_has_about_a_hundred_changes_each_on_cells_of_its_own() -> None:
    touched = Counter(
        (change.sheet, change.row, heading, change.number if change.copied else 0)
        for change in changes()
        for heading in change.cells
    )
    assert 100 <= len(changes()) <= 180
    assert [cell for cell, count in touched.items() if count > 1] == []


def test_a_change_that_does_not_fit_is_refused() -> None:
    wrong = change_from(
        1, sheet=INDEX, row="PT-1001", cells={"Alarms H": ("33", "36")}, rule="SET07", why="not what it holds"
    )
    with pytest.raises(ValueError, match="change 1: PT-1001, Alarms H holds '32', not '33'"):
        with_changes(twin_rows(), [wrong])
    unknown = change_from(1, sheet=INDEX, row="PT-9999", cells={}, rule="SET07", why="no such row")
    with pytest.raises(LookupError, match="Instrument index has 0 rows that are called PT-9999"):
        with_changes(twin_rows(), [unknown])


def test_the_committed_workbook_is_the_demo_cell_by_cell() -> None:
    book = openpyxl.load_workbook(DEMO)
    sheets = demo_rows()
    assert book.sheetnames == list(sheets)
    for title, rows in sheets.items():
        look, names = look_of(title), headings(title, rows)
        first = look.heading + look.heading_rows if look.heading else 1
        wanted = {
            (number, at): typed(text, as_text=number < first or names[at - 1] in look.text)
            for number, row in enumerate(rows, start=1)
            for at, text in enumerate(row, start=1)
            if text
        }
        found = {
            (cell.row, cell.column): cell.value
            for row in book[title].iter_rows()
            for cell in row
            if cell.value is not None
        }
        differing = {
            place: (found.get(place), wanted.get(place))
            for place in found | wanted
            if (type(found.get(place)), found.get(place)) != (type(wanted.get(place)), wanted.get(place))
        }
        assert (title, differing) == (title, {})


def test_the_workbook_looks_as_people_leave_it() -> None:
    sheet = openpyxl.load_workbook(DEMO)[INDEX]
    merged = {str(each) for each in sheet.merged_cells.ranges}
    names = headings(INDEX, twin_rows()[INDEX])
    assert {"P7:R7", "C7:C8"} <= merged
    assert sheet.cell(7, 3).font.bold
    assert sheet.freeze_panes == "D9"
    hidden = {letter for letter, each in sheet.column_dimensions.items() if each.hidden}
    assert [names[openpyxl.utils.column_index_from_string(letter) - 1] for letter in hidden] == ["Insp. Cat."]


def test_a_text_that_looks_like_a_formula_stays_a_text(tmp_path: Path) -> None:
    sheets = twin_rows()
    rows = sheets[INDEX]
    rows[row_number(INDEX, rows, "PT-1001")][3] = "=1+1"
    path = write_workbook(tmp_path / "twin.xlsx", sheets)
    cell = openpyxl.load_workbook(path)[INDEX].cell(1 + row_number(INDEX, rows, "PT-1001"), 4)
    assert (cell.value, cell.data_type) == ("=1+1", "s")


def test_the_twin_reads_back_as_it_was_written(tmp_path: Path) -> None:
    book = CalamineWorkbook.from_path(write_twin(tmp_path / "twin.xlsx"))
    for look in looks():
        rows = twin_rows()[look.title]
        read = book.get_sheet_by_name(look.title).to_python(skip_empty_area=False)
        assert [row[0] for row in read if isinstance(row[0], str) and row[0]] == [
            row[0] for row in rows if row[0] and isinstance(typed(row[0], as_text=False), str)
        ] or look.text


def test_files_hold_what_the_sheets_hold(tmp_path: Path) -> None:
    written = write_files(tmp_path, twin_rows())
    assert [path.name for path in written] == [look.file for look in looks()]
    for path in written:
        assert path.read_text(encoding="utf-8") == (DEMO.parent / "clean" / path.name).read_text(encoding="utf-8")


def test_shuffling_moves_everything_and_loses_nothing() -> None:
    sheets = twin_rows()
    moved = shuffled(sheets, 1)
    assert list(moved) != list(sheets)
    assert set(moved) == set(sheets)
    for title, rows in sheets.items():
        plain = without_dittos(title, rows)
        assert Counter(cell for row in moved[title] for cell in row) == Counter(cell for row in plain for cell in row)
    names = headings(INDEX, moved[INDEX])
    assert names != headings(INDEX, sheets[INDEX])
    at = row_number(INDEX, moved[INDEX], "FT-1007")
    before = without_dittos(INDEX, sheets[INDEX])[row_number(INDEX, sheets[INDEX], "FT-1007")]
    assert dict(zip(names, moved[INDEX][at], strict=True)) == dict(
        zip(headings(INDEX, sheets[INDEX]), before, strict=True)
    )


def test_a_ditto_mark_stands_for_what_is_above() -> None:
    rows = twin_rows()[INDEX]
    names = headings(INDEX, rows)
    at = row_number(INDEX, rows, "PG-1044")
    plain = without_dittos(INDEX, rows)
    assert '"' not in {cell for row in plain for cell in row}
    assert plain[at][names.index("P&ID No.")] == "MBW-PID-102"


def test_the_clean_twin_gives_no_finding_and_the_listed_reviews(tmp_path: Path) -> None:
    result = audit_of(write_twin(tmp_path / "twin.xlsx"))
    assert {outcome: count for outcome, count in result.counts().items() if outcome != "review"} == {
        "danger": 0,
        "fault": 0,
        "gap": 0,
    }
    assert found(result) == reviews()
    assert len(reviews()) <= 10


@pytest.mark.parametrize("rows", [twin_rows, demo_rows])
def test_files_give_what_a_workbook_gives(rows: Callable[[], Sheets], tmp_path: Path) -> None:
    files = found(audit_of(*write_files(tmp_path, rows())))
    # A row without a tag goes by its sheet, and a file's sheet goes by the file's name.
    assert [line.replace("instrument-index:", f"{INDEX}:") for line in files] == found(twin().audit(rows()))


def test_every_rule_has_a_change() -> None:
    assert {rule.code for rule in load_rules()} == {change.rule for change in changes()}


@pytest.fixture(scope="module")
def demo() -> Audit:
    return demo_audit()


def test_the_demo_gives_what_its_changes_say_and_nothing_else(demo: Audit) -> None:
    unasked = Counter(found(demo))
    unasked.subtract(Counter(expected(changes()) + reviews()))
    assert {line: count for line, count in unasked.items() if count} == {}


def test_the_findings_of_the_demo_are_those_of_the_text(demo: Audit) -> None:
    told, text = findings_text(demo).splitlines(), FINDINGS.read_text(encoding="utf-8").splitlines()
    assert told == text, "where this is meant: python -m tests.marrowbeck, and read the difference"


@pytest.mark.parametrize("change", changes(), ids=lambda each: f"{each.number}-{each.rule}-{each.row}")
def test_a_change_alone_gives_its_rule_and_its_companions(change: Change) -> None:
    lines = Counter(found(twin().audit(with_changes(twin().rows, [change]))))
    lines.subtract(expected([change]) + reviews())
    assert {line: count for line, count in lines.items() if count} == {}
