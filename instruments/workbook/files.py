"""Files in, all the records of all their sheets out: the one entrance to reading a plant's lists."""

from __future__ import annotations

import os
from collections.abc import Callable, Sequence
from pathlib import PurePath

from instruments.column import SheetKind
from instruments.unit_table import unit
from instruments.workbook.lists import Lists, records_of_sheets
from instruments.workbook.mapping import Mapping
from instruments.workbook.mapping_toml import read_mapping
from instruments.workbook.plant_sheet import read_plant_toml
from instruments.workbook.reading_process import read_apart
from instruments.workbook.words import folded


def read_lists(
    paths: Sequence[str | os.PathLike[str]],
    kinds: Sequence[SheetKind],
    *,
    plant_toml: str | os.PathLike[str] | None = None,
    mapping_toml: str | os.PathLike[str] | None = None,
    thresholds: Callable[[], Sequence[str]] | None = None,
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
    mapping_toml
        A file that says how headings are to be understood, as an earlier run wrote it.
    thresholds
        Called, where the plant states a threshold, for the names of all that there are; None: any name is taken.
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
    mapping = read_mapping(mapping_toml, kinds) if mapping_toml is not None else None
    read = read_apart(
        [(path, _how(path, mapping)) for path in paths],
        on_file=lambda file: tell(f"reading {file}"),
        # The library of units takes as long to be imported as the process to start.
        meanwhile=lambda: unit("bar"),
    )
    sheets = [sheet for each in read for sheet in each]
    del read
    return records_of_sheets(
        sheets,
        kinds,
        stated=entries,
        files=tuple(os.fspath(path) for path in paths),
        mapping=mapping,
        thresholds=thresholds,
        on_progress=tell,
    )


def _how(path: str | os.PathLike[str], mapping: Mapping | None) -> dict[str, str]:
    """Return how a file is to be read where a mapping says so: a text's encoding and separator."""
    if mapping is None:
        return {}
    texts = [sheet for sheet in mapping.sheets if sheet.encoding or sheet.separator]
    name = folded(PurePath(path).name)
    told = next((sheet for sheet in texts if folded(sheet.file) == name), None)
    if told is None and len(mapping.files) == len(texts) == 1:
        (told,) = texts
    return {"encoding": told.encoding, "separator": told.separator} if told is not None else {}
