"""The Plant sheet and plant.toml: what a plant says of itself, as written and as understood."""

from __future__ import annotations

import os
import re
import tomllib
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType
from typing import Any, Final

from instruments.column import SheetKind
from instruments.columns import INSTRUMENTS, JURISDICTIONS, PLANT
from instruments.letters import read_users_letters
from instruments.origin import Cell, Origin, Place
from instruments.plant_codes import read_codes
from instruments.plant_data import STANDARD_ATMOSPHERE_PA, PlantData, PlantRow
from instruments.quantity import read_quantity
from instruments.tag import plant_profile
from instruments.workbook.heading_words import heading_words
from instruments.workbook.headings import SheetMatch
from instruments.workbook.number_format import as_text
from instruments.workbook.problem import CellProblem
from instruments.workbook.sheet import Sheet, UnreadableFile
from instruments.workbook.words import Words, folded, placeholder

__all__ = ["PlantEntry", "plant_data", "read_plant_sheet", "read_plant_toml"]

ATMOSPHERE_PA: Final = (45_000.0, 110_000.0)
"""Atmospheric pressures that a plant can have: from some 6,000 m above the sea to below it (ISO 2533, from memory)."""

_THRESHOLD: Final = re.compile(r"(?i)(?:tag|dat|rng|pro|elc|haz|isc|wir|set|ctl|doc|com|xch)(?:\d\d)?\b.*\S")
_NUMBER: Final = re.compile(r"[+-]?\d{1,12}(?:[.,]\d{1,12})?")
_REFERENCES: Final = {"gauge": ("gauge", "g", "gage", "barg", "relative"), "absolute": ("absolute", "a", "abs")}
_NUMBERING: Final = {
    "parallel": ("parallel", "parallel numbering", "per letter", "by letter"),
    "serial": ("serial", "serial numbering", "one series", "sequential"),
}


@dataclass(frozen=True, slots=True, kw_only=True)
class PlantEntry:
    """One thing that a plant says: the name as written, the text, and the cell it stands in."""

    name: str
    text: str
    cell: Cell


def read_plant_sheet(sheet: Sheet, match: SheetMatch) -> tuple[PlantEntry, ...]:
    """Return what a Plant sheet says, whether it has one row under headings or a field and its value on each row.

    Parameters
    ----------
    sheet
        The sheet as read.
    match
        How its heading was understood; without heading rows each row is a field and its value.
    """
    entries: list[PlantEntry] = []
    if not match.header_rows:
        for number, row in enumerate(sheet.rows):
            filled = [(index, cell) for index, cell in enumerate(row) if cell is not None]
            if len(filled) < 2 or not isinstance(filled[0][1], str):
                continue
            name = filled[0][1].strip(" :=\t\n")
            index = filled[1][0]
            text = _text(sheet, number, index)
            # A unit of its own behind a number belongs to it.
            if len(filled) > 2 and _NUMBER.fullmatch(text):
                beside = _text(sheet, number, filled[2][0])
                if re.fullmatch(r"[^\d\W]{1,12}|%|[^\W\d]{1,6}\([a-z]{1,4}\)", beside):
                    text = f"{text} {beside}"
            if folded(name) in ("field", "name of field", "item", "setting") and folded(text) in (
                "value",
                "setting",
                "wert",
            ):
                continue
            entries.append(PlantEntry(name=name, text=text, cell=_cell(sheet, number, index)))
        return tuple(entries)
    headings = {each.index: each.heading for each in match.columns.values()} | dict(match.unknown)
    for number in range(match.first_row, len(sheet.rows)):
        row = sheet.rows[number]
        filled_row = [index for index in headings if index < len(row) and row[index] is not None]
        if not filled_row:
            continue
        entries.extend(
            PlantEntry(
                name=re.sub(r" \(\d+\)$", "", headings[index]),
                text=_text(sheet, number, index),
                cell=_cell(sheet, number, index),
            )
            for index in sorted(filled_row)
        )
    return tuple(entries)


def _text(sheet: Sheet, row: int, column: int) -> str:
    return as_text(sheet.at(row, column), sheet.number_formats.get((row, column))).strip()


def _cell(sheet: Sheet, row: int, column: int) -> Cell:
    return Cell(file=sheet.file, sheet=sheet.name, row=row + 1, column=column)


def read_plant_toml(path: str | os.PathLike[str]) -> tuple[PlantEntry, ...]:
    """Return what a plant.toml says, at top level or in [plant]: the Plant sheet's names, with blanks or underscores.

    Raises
    ------
    UnreadableFile
        There is no such file, or it is no TOML; says where.
    """
    file = os.fspath(path)
    try:
        with open(path, "rb") as stream:
            source = stream.read(1 << 20)
        text = source.decode("utf-8-sig")
        found = tomllib.loads(text)
    except FileNotFoundError:
        raise UnreadableFile(file, "", "there is no such file") from None
    except OSError as error:
        raise UnreadableFile(file, "", f"cannot be opened ({error.strerror})") from None
    except UnicodeDecodeError:
        raise UnreadableFile(file, "", "is not text in UTF-8") from None
    except (tomllib.TOMLDecodeError, RecursionError, ValueError) as error:
        raise UnreadableFile(file, "", f"is not TOML ({error})") from None
    lines = text.splitlines()
    entries: list[PlantEntry] = []
    for name, value in _flat(found):
        line = next((number for number, line in enumerate(lines, start=1) if line.lstrip(" \"'").startswith(name)), 1)
        entries.append(
            PlantEntry(
                name=name.replace("_", " "),
                text=_toml_text(value),
                cell=Cell(file=file, sheet="", row=line, column=0),
            )
        )
    return tuple(entries)


def _flat(table: Mapping[str, Any]) -> Iterable[tuple[str, Any]]:
    for name, value in table.items():
        if isinstance(value, dict) and heading_words(name.replace("_", " ")) in (("plant",), ("threshold",)):
            yield from _flat(value)
        else:
            yield name, value


def _toml_text(value: Any) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, dict):
        # SDV = ["on/off valve", "X"]
        return "; ".join(f"{key} = {_toml_text(each).replace('; ', ', ')}" for key, each in value.items())
    if isinstance(value, list):
        return "; ".join(map(_toml_text, value))
    return str(value)


class _Understood:
    def __init__(self, thresholds: Callable[[], Sequence[str]] | None) -> None:
        self.known_thresholds = thresholds
        self.values: dict[str, str] = {}
        self.entries: dict[str, PlantEntry] = {}
        self.thresholds: dict[str, float] = {}
        self.threshold_texts: dict[str, str] = {}
        self.problems: list[CellProblem] = []
        self.assumptions: list[str] = []

    def problem(self, entry: PlantEntry, reason: str, readings: Sequence[str] = ()) -> None:
        self.problems.append(
            CellProblem(
                cell=entry.cell,
                field="",
                title=entry.name,
                subject="plant",
                text=entry.text,
                reason=reason,
                readings=tuple(readings),
            )
        )


def plant_data(
    entries: Iterable[PlantEntry],
    *,
    kind: SheetKind = PLANT,
    thresholds: Callable[[], Sequence[str]] | None = None,
) -> tuple[PlantData, PlantRow | None, tuple[CellProblem, ...]]:
    """Understand what a plant says of itself.

    Parameters
    ----------
    entries
        What it says; of two entries of one name the later is used, and that is listed.
    kind
        The Plant sheet's columns.
    thresholds
        Called, where the plant states a threshold, for the names of all that there are; None: any name is taken.

    Returns
    -------
    PlantData, PlantRow or None, problems
        The data with an assumption for each default that was used, the texts as written (None where
        it says nothing), and a problem for each name or value that could not be understood.
    """
    found = _Understood(thresholds)
    names = {
        heading_words(text): column.field
        for column in kind.columns
        for text in (column.title, column.field, *column.headings)
    }
    any_entry: PlantEntry | None = None
    for entry in entries:
        any_entry = any_entry or entry
        name = " ".join(entry.name.replace("_", " ").split())
        # Matched before the thresholds: "Set pressure reference" is not the SET family.
        field = names.get(heading_words(name))
        if field is None and _THRESHOLD.fullmatch(name):
            _threshold(found, entry, name)
            continue
        if field is None:
            known = [" ".join(words) for words in names]
            if thresholds is not None and re.search(r"\d|%", name):
                known += thresholds()
            found.problem(entry, "no plant setting has this name", _nearest(name, known))
            continue
        if placeholder(entry.text):
            continue
        before = found.entries.get(field)
        if before is not None and folded(before.text) != folded(entry.text):
            found.assumptions.append(
                f"plant: {entry.name} is stated twice; '{entry.text}' ({_where(entry)}) is used, "
                f"not '{before.text}' ({_where(before)})"
            )
        found.entries[field] = entry
        found.values[field] = entry.text
    data = _data(found)
    row = None
    if any_entry is not None:
        cells = {field: (entry.cell.column,) for field, entry in found.entries.items()}
        written: dict[str, Any] = dict(found.values)
        row = PlantRow(
            origin=Origin(
                place=Place(file=any_entry.cell.file, sheet=any_entry.cell.sheet, columns=MappingProxyType(cells)),
                row=any_entry.cell.row,
            ),
            thresholds=MappingProxyType(dict(found.threshold_texts)),
            **written,
        )
    return data, row, tuple(found.problems)


def _where(entry: PlantEntry) -> str:
    return f"{entry.cell.file} {entry.cell.sheet} {entry.cell.address}".replace("  ", " ")


def _nearest(name: str, known: Sequence[str]) -> list[str]:
    from rapidfuzz import process, utils

    found = process.extract(name, known, processor=utils.default_process, limit=2, score_cutoff=70)
    return [text for text, _, _ in found]


def _threshold(found: _Understood, entry: PlantEntry, name: str) -> None:
    # percent: a bare TOML key cannot hold the sign.
    name = re.sub(r"\s*\bper ?cent\b", " %", name, flags=re.IGNORECASE)
    name = " ".join(name.split())
    if placeholder(entry.text):
        return
    if found.known_thresholds is not None:
        known = found.known_thresholds()
        plain = {_plain(each): each for each in known}
        if _plain(name) not in plain:
            found.problem(entry, "no rule has a threshold of this name", _nearest(name, known))
            return
        name = plain[_plain(name)]
    number = re.fullmatch(r"([+-]?\d{1,9}(?:[.,]\d{1,9})?)\s*(?:%|mA|V|ohm|Ω|K|°C|degC|nF)?", entry.text.strip())
    if number is None:
        found.problem(entry, "a threshold is a number")
        return
    found.thresholds[name.casefold()] = float(number[1].replace(",", "."))
    found.threshold_texts[name] = entry.text


def _plain(name: str) -> str:
    """Return the name of a threshold as names are compared: a sign that a key of TOML cannot hold may be missing."""
    return re.sub(r"[^a-z0-9]+", "", name.casefold().replace("%", "percent"))


def _data(found: _Understood) -> PlantData:
    jurisdiction = _word(found, "jurisdiction", JURISDICTIONS)
    if jurisdiction is None:
        found.assumptions.append("plant: jurisdiction not stated")
    numbering = _word(found, "numbering", _NUMBERING)
    if numbering is None:
        numbering = "parallel"
        found.assumptions.append("plant: loop numbering not stated, parallel assumed")
    reference = _word(found, "default_reference", _REFERENCES)
    if reference is None:
        reference = "gauge"
        found.assumptions.append("plant: default pressure reference not stated, gauge assumed")
    return PlantData(
        name=found.values.get("name"),
        tag_pattern=_pattern(found),
        numbering=numbering,
        users_letters=_letters(found),
        plant_codes=_codes(found),
        jurisdiction=jurisdiction,
        atmospheric_pa=_atmosphere(found),
        default_reference=reference,
        required_fields=_required(found),
        thresholds=MappingProxyType(found.thresholds),
        assumptions=tuple(found.assumptions),
    )


def _word(found: _Understood, field: str, words: Mapping[str, tuple[str, ...]]) -> str | None:
    entry = found.entries.get(field)
    if entry is None:
        return None
    readings = Words(words).find(entry.text)
    if len(readings) == 1:
        return readings[0]
    found.problem(entry, "not one of: " + ", ".join(words), readings)
    return None


def _pattern(found: _Understood) -> str | None:
    entry = found.entries.get("tag_pattern")
    if entry is None:
        return None
    try:
        plant_profile(entry.text)
    except ValueError as error:
        found.problem(entry, f"the tag pattern cannot be used: {error}")
        return None
    return entry.text.strip()


def _letters(found: _Understood) -> Mapping[str, str]:
    entry = found.entries.get("users_letters")
    if entry is None:
        return MappingProxyType({})
    letters = read_users_letters(entry.text)
    if not letters:
        found.problem(entry, "no letter with its meaning, such as: D = density; C = conductivity")
    return MappingProxyType(letters)


def _codes(found: _Understood) -> Mapping[str, tuple[str, str]]:
    entry = found.entries.get("plant_codes")
    if entry is None:
        return MappingProxyType({})
    codes = read_codes(entry.text)
    if not codes:
        found.problem(entry, "no code with its kind, such as: SDV = on/off valve, X")
    return MappingProxyType(codes)


def _atmosphere(found: _Understood) -> float:
    entry = found.entries.get("atmospheric_pressure")
    if entry is None:
        found.assumptions.append("plant: atmospheric pressure not stated, 101.325 kPa assumed")
        return STANDARD_ATMOSPHERE_PA
    quantity = read_quantity(entry.text)
    low, high = ATMOSPHERE_PA
    pascal = getattr(quantity, "base", None)
    unit = getattr(quantity, "unit", None)
    reference = getattr(quantity, "reference", None)
    if (
        unit is not None
        and unit.kind == "pressure"
        and reference not in ("gauge", "differential")
        and pascal is not None
    ):
        if low <= pascal <= high:
            return float(pascal)
        found.problem(entry, "no atmosphere has this pressure")
    else:
        found.problem(entry, "an absolute pressure with its unit is needed, such as 101.3 kPa")
    found.assumptions.append("plant: atmospheric pressure could not be read, 101.325 kPa assumed")
    return STANDARD_ATMOSPHERE_PA


def _required(found: _Understood) -> tuple[str, ...] | None:
    entry = found.entries.get("required_fields")
    if entry is None:
        return None
    by_title = {folded(column.title): column.title for column in INSTRUMENTS.columns}
    by_words: dict[tuple[str, ...], str] = {}
    for column in INSTRUMENTS.columns:
        for text in (column.title, column.field.replace("_", " "), *column.headings):
            by_words.setdefault(heading_words(text), column.title)
    titles: list[str] = []
    for text in re.split(r"[;,\n]", entry.text):
        if not text.strip():
            continue
        title = by_title.get(folded(text)) or by_words.get(heading_words(text))
        if title is None:
            found.problem(entry, f"no field of the index is called '{text.strip()}'")
        elif title not in titles:
            titles.append(title)
    return tuple(titles)
