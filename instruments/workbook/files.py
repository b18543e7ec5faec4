"""Files in, all the records of all their sheets out: the one entrance to reading a plant's lists."""

from __future__ import annotations

import os
from collections.abc import Callable, Sequence

from instruments.column import SheetKind
from instruments.unit_table import unit
from instruments.workbook.lists import Lists, records_of_sheets
from instruments.workbook.plant_sheet import read_plant_toml
from instruments.workbook.reading_process import read_apart


def read_lists(
    paths: Sequence[str | os.PathLike[str]],
    kinds: Sequence[SheetKind],
    *,
    plant_toml: str | os.PathLike[str] | None = None,
    on_progress: Callable[[str], None] | None = None,
) -> Lists:
    """Read a plant's lists.

    Parameters
    ----------
    paths
        Workbooks and delimited texts, in any mixture; all of them are one plant.
    kinds
        The kinds of sheet that are known.
    plant_toml
        A file with the plant's data; what it states goes before a Plant sheet.
    on_progress
        Called with a line for each file and sheet.

    Raises
    ------
    UnreadableFile
        A file cannot be read; says where and why.
    NoTags
        No sheet holds tags.
    """
    tell = on_progress or (lambda line: None)
    entries = list(read_plant_toml(plant_toml)) if plant_toml is not None else []
    read = read_apart(
        [(path, {}) for path in paths],
        on_file=lambda file: tell(f"reading {file}"),
        # The library of units takes as long to be imported as the process to start.
        meanwhile=lambda: unit("bar"),
    )
    sheets = [sheet for each in read for sheet in each]
    del read
    return records_of_sheets(
        sheets, kinds, stated=entries, files=tuple(os.fspath(path) for path in paths), on_progress=tell
    )
