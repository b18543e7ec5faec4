"""Several files are one plant: workbooks and delimited texts in any mixture say what one workbook says."""

from __future__ import annotations

import csv
from collections import Counter
from collections.abc import Mapping
from functools import cache
from pathlib import Path, PurePath

import pytest

from instruments.workbook.files import read_lists
from instruments.workbook.lists import Lists
from loops.plant import assemble
from tests.instruments.workbook.accounted import assert_mapping_reads_the_same, assert_no_cell_is_lost
from tests.marrowbeck import INDEX, KINDS, Sheets, demo_rows, twin_rows, write_workbook
from tests.twin import twin
from validation.audit import Audit, audit
from validation.finding import Finding

# File to the sheets in it; a delimited text holds one.
MIXTURES: Mapping[str, Mapping[str, tuple[str, ...]]] = {
    "an index with its package, the rest by others": {
        "index.xlsx": (INDEX, "Package K-501"),
        "catalogue;.csv": ("Device types",),
        "areas.xlsx": ("Cover", "Areas"),
        "loops and cables.xlsx": ("Loops", "Cables", "Cable types"),
        "terminations.csv": ("Terminations",),
        "plant.csv": ("Plant",),
        "io list utf-16;.csv": ("IO list",),
        "alarms.xlsx": ("Alarm and trip list",),
    },
    "delimited lists beside a workbook of registers": {
        "registers.xlsx": ("Device types", "Areas", "Cable types", "Plant"),
        "index utf-16;.csv": (INDEX,),
        "vendor.csv": ("Package K-501",),
        "loops|.csv": ("Loops",),
        "cables utf-16.csv": ("Cables",),
        "terminations;.csv": ("Terminations",),
        "cover.csv": ("Cover",),
        "system.xlsx": ("IO list",),
        "alarm list|.csv": ("Alarm and trip list",),
    },
}


def separator_of(name: str) -> str:
    return next((mark for mark in ";|" if mark in name), ",")


def write(folder: Path, files: Mapping[str, tuple[str, ...]], rows: Sheets) -> list[Path]:
    """Write sheets into files, each under the name it has in a mixture."""
    written = []
    for name, titles in files.items():
        path = folder / name.replace(";", "").replace("|", "")
        kept = {title: rows[title] for title in titles if title in rows}
        if path.suffix == ".xlsx":
            write_workbook(path, kept)
        else:
            (lines,) = kept.values()
            with path.open("w", newline="", encoding="utf-16" if "utf-16" in name else "utf-8") as file:
                csv.writer(file, delimiter=separator_of(name), lineterminator="\r\n").writerows(lines)
        written.append(path)
    return written


@cache
def of_one_workbook(changed: bool) -> Audit:
    return twin().audit(demo_rows() if changed else twin_rows())


def read(paths: list[Path]) -> Lists:
    found = read_lists(paths, KINDS)
    assert_no_cell_is_lost(paths, found)
    return found


def identity(finding: Finding, *, names: Mapping[str, str]) -> tuple[object, ...]:
    """Return what is found and where; a sheet of its own file goes by the file's name."""
    subject = finding.subject
    for name, title in names.items():
        if subject.startswith(f"{name}:"):
            subject = f"{title}{subject[len(name) :]}"
    cells = tuple((names.get(cell.sheet, cell.sheet), cell.address) for cell in finding.cells)
    return finding.outcome, finding.rule, subject, finding.part, finding.found, finding.wanted, cells


@pytest.mark.parametrize(
    ("mixture", "changed", "backwards"),
    [(mixture, True, backwards) for mixture, backwards in zip(MIXTURES, (False, True), strict=True)]
    + [(mixture, False, True) for mixture in [*MIXTURES][:1]],
)
def test_a_mixture_gives_what_one_workbook_gives(mixture: str, changed: bool, backwards: bool, tmp_path: Path) -> None:
    rows = demo_rows() if changed else twin_rows()
    files = {
        name: tuple(title for title in titles if title in rows)
        for name, titles in MIXTURES[mixture].items()
        if any(title in rows for title in titles)
    }
    assert {title for titles in files.values() for title in titles} == set(rows)
    paths = write(tmp_path, files, rows)
    lists = read(paths[::-1] if backwards else paths)
    result = audit(assemble(lists), raise_errors=True)
    names = {
        path.stem: title
        for path, titles in zip(paths, files.values(), strict=True)
        if path.suffix == ".csv"
        for title in titles
    }
    file_of = {title: path.name for path, titles in zip(paths, files.values(), strict=True) for title in titles}
    whole = of_one_workbook(changed)
    of_list = {result.plant.file_name: "the list", whole.plant.file_name: "the list"}

    def told(each: Audit, by_name: Mapping[str, str]) -> Counter[tuple[object, ...]]:
        return Counter(
            tuple(of_list.get(part, part) if isinstance(part, str) else part for part in identity(one, names=by_name))
            for one in each.findings
        )

    assert told(result, names) == told(whole, {})
    # Each cell names the file that its sheet stands in.
    assert {
        (names.get(cell.sheet, cell.sheet), PurePath(cell.file).name)
        for finding in result.findings
        for cell in finding.cells
    } <= set(file_of.items())


@pytest.mark.parametrize("mixture", MIXTURES)
def test_a_mixture_reads_the_same_by_its_mapping(mixture: str, tmp_path: Path) -> None:
    rows = demo_rows()
    files = {name: titles for name, titles in MIXTURES[mixture].items() if any(title in rows for title in titles)}
    paths = write(tmp_path, files, rows)
    assert_mapping_reads_the_same(paths, read(paths))


def test_sheets_are_found_in_files_with_names_that_say_nothing(tmp_path: Path) -> None:
    rows = {title: each for title, each in twin_rows().items() if title != "Cover"}
    files = {f"{number}.csv": (title,) for number, title in enumerate(rows)}
    lists = read(write(tmp_path, files, rows))
    instruments = (INDEX, "Package K-501")
    assert [each.kind for each in lists.sheets] == ["Instruments" if title in instruments else title for title in rows]
