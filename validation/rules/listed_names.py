"""DAT: what the index names and other sheets describe: whether it is listed, and whether both say the same."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from operator import attrgetter
from typing import Any, Final

from instruments.certificate import read_certificates
from instruments.column import Reads
from instruments.columns import DEVICE_TYPES, INSTRUMENTS
from instruments.installed import Installed
from instruments.kind import Kind
from instruments.marking import Marking, read_marking
from instruments.record import DeviceType, Instrument, Record
from instruments.sensor import read_sensor_type
from instruments.written import CannotStand, value_of
from loops.cable import read_conductor_size
from loops.circuit import Circuit
from loops.plant import Plant, name_key, same_value
from loops.wiring import volts_in
from validation.finding import Fix, Found, NotApplicable, Severity, Unchecked, Verdict
from validation.rule import Subject, rule, title_of
from validation.rules.electrical import signal_class

# ---------------------------------------------------------------------------------------------- names and sheets

# Of two names of three signs that differ in one, 67 in a hundred are alike.
LIKENESS: Final = 65
# Fewer rows are no column: there each name is a slip of its own.
LEAST_ROWS_OF_A_COLUMN: Final = 5
_SHEET_OF: Final[Mapping[str, str]] = {
    "device_type": "Device types",
    "area": "Areas",
    "barrier": "Device types",
    "card": "Device types",
    "power_supply": "Device types",
    "cable": "Cables",
    "cable_type": "Cable types",
}
_VALUES: Final = attrgetter("device_type", "barrier", "card", "power_supply", "cable", "cable_type")
_FIELDS: Final = ("device_type", "barrier", "card", "power_supply", "cable", "cable_type")
_TITLE_OF: Final[Mapping[str, str]] = {field: INSTRUMENTS.column(field).title for field in _SHEET_OF}
# A supply in words, and a plain number of volts.
_NO_SUPPLY: Final = re.compile(
    r"\b(?:loop|2[\s-]?wire|self|internal|integral|card|system|mains|battery|solar|ups|instrument air|air|local|dcs"
    r"|plc|panel|none|no|yes|bus|segment|poe|field|external|separate|separately)\b|^\s*\d{1,3}(?:[.,]\d+)?\s*(?:v|ac|dc)?\b",
    re.IGNORECASE,
)
# What stands in a barrier's column and says what it is, not which.
_NO_BARRIER: Final = re.compile(
    r"(?:y|yes|no|n|x|required|not required|zener|isolator|barrier|zener barrier|galvanic|galvanic isolator|isolated|"
    r"integral|internal|is|ex ?i|none|ja|nein)\.?",
    re.IGNORECASE,
)
_SLOT: Final = re.compile(r"(?:slot|card|module|pos\.?)?\s?[0-9]{1,3}", re.IGNORECASE)
_APART: Final = re.compile(r"[,;\n]")


@dataclass(frozen=True, slots=True, kw_only=True)
class _Named:
    """A name that a row, or its circuit, uses: the field, the name and where it is written.

    Attributes
    ----------
    sheet, subject, title
        The row that a fix has to change, and the title of its column; no title where several rows have it.
    text
        The whole cell, where the name is one of several in it.
    """

    field: str
    name: str
    sheet: str = "Instruments"
    subject: str = ""
    title: str = ""
    text: str = ""
    row: Record | None = None
    row_field: str = ""


# What a cell comes to: all its names are listed, one is not, two different entries have one.
_GOOD, _UNKNOWN, _TWICE = 0, 1, 2


class _Names:
    """Which names are listed, each cell's text looked up once."""

    def __init__(self, plant: Plant) -> None:
        self.plant = plant
        self.known: dict[str, dict[str, int]] = {field: {} for field in _SHEET_OF}
        self.of_cables: dict[str, int] = {}
        self.bad: dict[int, dict[str, int]] = {}
        self.absent: frozenset[str] = frozenset()
        self.details: str = ""
        self.fields: tuple[str, ...] = ()

    def state(self, field: str, text: str) -> int:
        """Return what a cell of a field comes to."""
        found = self.known[field].get(text)
        if found is None:
            found = self.known[field][text] = max(
                (self._of_one(field, name) for name in _pieces(field, text)), default=_GOOD
            )
        return found

    def _of_one(self, field: str, name: str) -> int:
        if self.twice(field, name):
            return _TWICE
        return _GOOD if self.listed(field, name) else _UNKNOWN

    def state_of_cables(self, text: str) -> int:
        """Return what the types of the cables in a cell come to."""
        found = self.of_cables.get(text)
        if found is None:
            cables = [self.plant.cables.get(name_key(number)) for number in _APART.split(text)]
            types = [cable.type for cable in cables if cable is not None and cable.type]
            found = self.of_cables[text] = max((self.state("cable_type", each) for each in types), default=_GOOD)
        return found

    def listed(self, field: str, name: str) -> bool:
        plant, key = self.plant, name_key(name)
        sheet = _SHEET_OF[field]
        if sheet == "Device types":
            # A barrier, a card or a supply may be a tag of the list; a device type may not.
            return key in plant.types or (field != "device_type" and bool(plant.by_tag(name)))
        entries: Mapping[str, Any] = {"Areas": plant.areas, "Cables": plant.cables, "Cable types": plant.cable_types}[
            sheet
        ]
        return key in entries

    def twice(self, field: str, name: str) -> bool:
        plant, key = self.plant, name_key(name)
        return (
            key
            in {
                "Device types": plant.types_twice,
                "Areas": plant.areas_twice,
                "Cables": plant.cables_twice,
                "Cable types": plant.cable_types_twice,
            }[_SHEET_OF[field]]
        )


def _pieces(field: str, text: str) -> tuple[str, ...]:
    """Return the names in a cell; none where it says something else."""
    if field == "cable":
        return tuple(piece.strip() for piece in _APART.split(text) if piece.strip())
    if field == "cable_type":
        return () if read_conductor_size(text) is not None else (text,)
    if field == "power_supply":
        return () if volts_in(text) is not None or _NO_SUPPLY.search(text) else (text,)
    if field == "barrier":
        return () if _NO_BARRIER.fullmatch(text.strip()) else (text,)
    if field == "card":
        # A bare number is the slot that the card sits in.
        return () if _SLOT.fullmatch(text.strip()) else (text,)
    return (text,)


def _area_named(installed: Installed, plant: Plant) -> str | None:
    """Return the area that a row names on the area list; None where the cell is its own classification.

    Where no area is listed and the row has a classification, the column names a part of the plant.
    """
    name = installed.record.area
    if not name:
        return None
    key = name_key(name)
    if key in plant.areas or key in plant.areas_twice:
        return name
    area = installed.area
    of_the_cell = area is not None and area.from_row_cell and name_key(area.code) == key
    if of_the_cell or (installed.unclassified and not installed.record.area_classification):
        return None
    if not plant.areas and not plant.areas_twice and (area is not None or installed.record.area_classification):
        return None
    return name


_NOTHING_BAD: Final[dict[str, int]] = {}


def _bad(installed: Installed, plant: Plant, names: _Names) -> dict[str, int]:
    """Return the fields in which a row or its circuits name what is not listed; in most lists there are none."""
    bad: dict[str, int] = {}
    known = names.known
    record = installed.record
    for row in (record,) if len(installed.signals) < 2 else (record, *installed.signals):
        for field, text in zip(_FIELDS, _VALUES(row), strict=True):
            if text is not None and known[field].get(text) != _GOOD:
                state = names.state(field, text)
                if state:
                    bad[field] = max(state, bad.get(field, _GOOD))
    if record.area is not None:
        area = _area_named(installed, plant)
        if area is not None:
            state = names.state("area", area)
            if state:
                bad["area"] = state
    if plant.loop_rows or plant.cables:
        for circuit in plant.circuits_of(installed):
            if circuit.device is installed:
                for field, state in _bad_of_circuit(circuit, names):
                    bad[field] = max(state, bad.get(field, _GOOD))
    return bad or _NOTHING_BAD


def _bad_of_circuit(circuit: Circuit, names: _Names) -> Iterator[tuple[str, int]]:
    row = circuit.row
    if row is not None:
        for field, text in (("card", row.card), ("barrier", row.barrier), ("cable_type", row.cable_type)):
            if text is not None:
                state = names.state(field, text)
                if state:
                    yield field, state
    if circuit.signal_row.cable is not None:
        state = names.state_of_cables(circuit.signal_row.cable)
        if state:
            yield "cable_type", state


def _of_circuit(circuit: Circuit, plant: Plant) -> Iterator[_Named]:
    """Give the names that a circuit's row of the loop list and its cables use."""
    row = circuit.row
    if row is not None:
        for field in ("card", "barrier", "cable_type"):
            name = getattr(row, field)
            if name:
                subject = row.circuit or row.number or ""
                yield _Named(
                    field=field, name=name, sheet="Loops", subject=subject, title=_LOOPS_TITLE[field], row=row,
                    row_field=field,
                )  # fmt: skip
    if plant.cables:
        for number in _APART.split(circuit.signal_row.cable or ""):
            cable = plant.cables.get(name_key(number))
            if cable is not None and cable.type:
                yield _Named(
                    field="cable_type", name=cable.type, sheet="Cables", subject=cable.number or "", title="type",
                    row=cable, row_field="type",
                )  # fmt: skip


_LOOPS_TITLE: Final[Mapping[str, str]] = {"card": "card", "barrier": "barrier", "cable_type": "cable type"}


def _named(installed: Installed, plant: Plant) -> Iterator[_Named]:
    """Give each name that a row, its signals and its circuits use."""
    rows: tuple[Instrument, ...] = tuple({id(row): row for row in (installed.record, *installed.signals)}.values())
    area = _area_named(installed, plant)
    for field in ("device_type", "area", *_FIELDS[1:]):
        texts = [area] if field == "area" else [getattr(row, field) for row in rows]
        for text in dict.fromkeys(filter(None, texts)):
            alone = all(other in (None, text) for other in texts)
            row = next((row for row in rows if getattr(row, field) == text), installed.record)
            for name in _pieces(field, text):
                yield _Named(
                    field=field,
                    name=name,
                    subject=installed.name,
                    title=_TITLE_OF[field] if alone else "",
                    text=text if text != name else "",
                    row=row,
                    row_field=field,
                )
    for circuit in plant.circuits_of(installed):
        if circuit.device is installed:
            yield from _of_circuit(circuit, plant)


def _names(plant: Plant) -> _Names:
    """Look at all names once: which sheets are absent, which columns name nothing that is listed."""
    names = _Names(plant)
    counts: Counter[str] = Counter()
    first: dict[str, Installed] = {}
    for each in plant.live:
        if not each.equipment_tag:
            bad = names.bad[id(each)] = _bad(each, plant, names)
            for field, state in bad.items():
                if state == _UNKNOWN:
                    counts[field] += 1
                    first.setdefault(field, each)
    if not counts:
        return names
    there = {field: plant.has_sheet(_SHEET_OF[field]) for field in counts}
    doubtful = {field for field, count in counts.items() if there[field] and count >= LEAST_ROWS_OF_A_COLUMN}
    good = _fields_with_a_listed_name(doubtful, plant, names)
    details: dict[str, list[str]] = {}
    fields: list[str] = []
    for sheet, field in sorted((_SHEET_OF[field], field) for field in counts):
        if there[field] and (field not in doubtful or field in good):
            continue
        fields.append(field)
        title, count = _TITLE_OF[field], counts[field]
        which = f"{count} {'name' if count == 1 else 'names'} under {title}"
        if there[field]:
            which = f"none of the {count} names under {title} is on it"
        example = next(
            named.name
            for named in _named(first[field], plant)
            if named.field == field and not names.listed(field, named.name)
        )
        details.setdefault(sheet, []).append(f"{which}, such as {example}")
    names.absent = frozenset(fields)
    names.fields = tuple(fields)
    names.details = "; ".join(f"{sheet}: {', '.join(texts)}" for sheet, texts in sorted(details.items()))
    return names


def _fields_with_a_listed_name(asked: set[str], plant: Plant, names: _Names) -> frozenset[str]:
    """Return those of the fields in which some row, or its circuit, names what is listed."""
    found: set[str] = set()
    for each in plant.live if asked else ():
        if not each.equipment_tag:
            for named in _named(each, plant):
                if named.field in asked and named.field not in found and names.listed(named.field, named.name):
                    found.add(named.field)
            if found == asked:
                break
    return frozenset(found)


def _sheet_absent(plant: Plant) -> Verdict:
    names: _Names = plant.once("names and sheets", _names)
    if not names.absent:
        return None
    sheets = sorted({_SHEET_OF[field] for field in names.absent})
    return Found(
        values={"details": names.details},
        fields=names.fields,
        message="the list names what no sheet describes: {details}",
        found="no such entries",
        wanted=", ".join(sheets),
        stops_rows=False,
    )


@rule(
    "DAT10",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: not installed.equipment_tag,
    whole=_sheet_absent,
    message="{title} {name} is not listed on {sheet}",
    basis="common practice",
)
def name_not_listed(installed: Installed, plant: Plant) -> Verdict:
    """A device type, area, barrier, card, supply, cable or cable type that is named and not listed.

    Why it matters: every check that needs the entry is left out, in silence, if nobody says so.

    What to do: correct the name, or list the entry. Two different entries with one name are no
    entry either.

    >>> from validation.example import said
    >>> types = [{"code": "DP-30", "kind": "transmitter", "maximum V": "42"}]
    >>> said("DAT10", [{"tag": "PT-1", "device type": "DP-3O"}], types=types)
    ['PT-1: device type DP-3O is not listed on Device types']
    >>> said("DAT10", [{"tag": "PT-1", "device type": "DP-30"}], types=types)
    []
    """
    names: _Names = plant.once("names and sheets", _names)
    bad = names.bad.get(id(installed))
    if bad is None:
        # An instrument that is only tried, and stands in no list.
        bad = _bad(installed, plant, names)
    if not bad:
        return None
    if all(state == _UNKNOWN and field in names.absent for field, state in bad.items()):
        return Unchecked(*(_TITLE_OF[field] for field in bad))
    found: dict[tuple[str, ...], Found] = {}
    absent: dict[str, None] = {}
    for named in _named(installed, plant):
        field = named.field
        twice = names.twice(field, named.name)
        # Each cell that has a wrong name is mended by itself; of two entries with one name the sheet is wrong.
        key = (field, name_key(named.name), *(() if twice else (named.sheet, named.subject)))
        if key in found or (names.listed(field, named.name) and not twice):
            continue
        if field in names.absent and not twice:
            absent[_TITLE_OF[field]] = None
            continue
        found[key] = _not_listed(named, twice, names)
    if found:
        return list(found.values())
    return Unchecked(*absent) if absent else None


def _not_listed(named: _Named, twice: bool, names: _Names) -> Found:
    field, title = named.field, _TITLE_OF[named.field]
    nearest = () if twice else _nearest(named, names)
    return Found(
        values={"title": title, "name": named.name, "sheet": _SHEET_OF[field]},
        fields=(field,),
        part=_part(named),
        message="{title} {name} is listed twice on {sheet}, with different figures" if twice else "",
        found=named.name,
        wanted=" or ".join(nearest),
        fixes=tuple(
            Fix(
                text=f"{title} {each}",
                change={named.title: (named.text or named.name).replace(named.name, each)} if named.title else {},
                subject=named.subject,
                sheet=named.sheet,
            )
            for each in nearest
        ),
        cells=named.row.cells(named.row_field) if named.row is not None else (),
    )


def _part(named: _Named) -> str:
    title = _TITLE_OF[named.field]
    if named.sheet == "Cables":
        return f"{title} of {named.subject}"
    if named.sheet == "Loops":
        return f"{title} in the loop list"
    return f"{title} {named.name}" if named.text else title


_KINDS_OF: Final[Mapping[str, frozenset[Kind]]] = {
    "barrier": frozenset({Kind.BARRIER, Kind.ISOLATOR}),
    "card": frozenset({Kind.CARD}),
    "power_supply": frozenset({Kind.POWER_SUPPLY}),
}


def _nearest(named: _Named, names: _Names) -> tuple[str, ...]:
    """Return the listed names that are likest, those of the kind that is meant."""
    from rapidfuzz import fuzz, process

    plant, sheet, wanted = names.plant, _SHEET_OF[named.field], _KINDS_OF.get(named.field)
    if sheet == "Device types":
        codes = [
            entry.code
            for entry in plant.types.values()
            if entry.kind is None
            or (entry.kind in wanted if wanted else not any(entry.kind in each for each in _KINDS_OF.values()))
        ]
        if wanted:
            codes.extend(each.record.tag for each in plant.live if each.kind in wanted)
    elif sheet == "Areas":
        codes = [entry.code for key, entry in plant.areas.items() if key not in plant.areas_twice]
    elif sheet == "Cables":
        codes = [entry.number for entry in plant.cables.values()]
    else:
        codes = [entry.code for entry in plant.cable_types.values()]
    # Sorted, so that of equals the order of rows decides nothing.
    others = {name_key(piece) for piece in _APART.split(named.text)}
    choices = sorted({code for code in codes if code and name_key(code) not in others})
    likely = process.extract(named.name, choices, scorer=fuzz.ratio, limit=2, score_cutoff=LIKENESS)
    return tuple(code for code, _, _ in likely)


# -------------------------------------------------------------------------------------------- what is stated twice

_STATED_TWICE: Final = ("ex_marking", "certificate", "signal", "wires")
_LIMITS: Final = tuple(
    name
    for name in DeviceType.__dataclass_fields__
    if name not in Record.__dataclass_fields__
    and name not in (*_STATED_TWICE, "code", "kind", "description", "maker", "model", "ip_code", "limit_unit")
)


@rule(
    "DAT11",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: installed.listed_type is not None and not installed.equipment_tag,
    message="{title}: the row says {row}, its device type {code} says {type}",
    basis="common practice",
)
def row_against_type(installed: Installed, plant: Plant) -> Verdict:
    """The row and its device type state different values for the same thing.

    Why it matters: one of the two papers is out of date, or the wrong device was fitted. The row's
    value is used.

    What to do: correct whichever is wrong; name another device type if the row is right.

    >>> from validation.example import said
    >>> types = [{"code": "P1", "kind": "transmitter", "wires": "2", "LRL": "0 barg", "URL": "10 barg"}]
    >>> said("DAT11", [{"tag": "PT-1", "device type": "P1", "wires": "4"}], types=types)
    ['PT-1: wires: the row says 4, its device type P1 says 2']
    >>> said("DAT11", [{"tag": "PT-1", "device type": "P1", "wires": "2"}], types=types)
    []
    """
    listed, record = installed.listed_type, installed.record
    assert listed is not None
    compared = 0
    found: list[Found] = []
    untold: list[str] = []
    for field in _STATED_TWICE:
        row, entry = getattr(record, field), getattr(listed, field)
        if entry is None:
            continue
        if row is None:
            if field in record.unread:
                untold.append(title_of(field))
            continue
        same = _SAME[field](row, entry) if field in _SAME else same_value(row, entry)
        if same is None:
            untold.append(title_of(field))
        elif same:
            compared += 1
        else:
            found.append(_stated_twice(field, row, entry, installed, listed))
    own = record.own
    if own is not None:
        for field in _LIMITS:
            row, entry = getattr(own, field), getattr(listed, field)
            if entry is None:
                continue
            if row is None:
                if field in record.unread or field in record.unitless:
                    untold.append(title_of(field))
                continue
            if _same_limit(row, entry):
                compared += 1
            else:
                found.append(_stated_twice(field, row, entry, installed, listed))
    if found:
        return found
    if untold:
        return Unchecked(*untold)
    # A blank on the row states nothing: there the type's value holds.
    return None if compared else NotApplicable("the row states nothing that its device type states")


def _stated_twice(field: str, row: Any, entry: Any, installed: Installed, listed: DeviceType) -> Found:
    title = title_of(field)
    on_row, by_type = _shown(row), _shown(entry)
    to_type = _change(INSTRUMENTS.column(field).title, by_type, on=INSTRUMENTS, field=field)
    to_row = _change(DEVICE_TYPES.column(field).title, on_row, on=DEVICE_TYPES, field=field)
    return Found(
        values={"title": title, "row": on_row, "type": by_type, "code": listed.code},
        fields=(field,),
        part=title,
        found=f"{on_row} on the row",
        wanted=f"{by_type} by the type, or the type's entry corrected",
        fixes=(
            Fix(text=f"{title} {by_type} on the row", change=to_type),
            Fix(
                text=f"{title} {on_row} on the device type {listed.code}",
                change=to_row,
                subject=listed.code or "",
                sheet="Device types",
            ),
        ),
        cells=listed.cells(field),
    )


def _change(title: str, text: str, *, on: Any, field: str) -> dict[str, str]:
    """Return a change that writes a value as a list would hold it; none where it cannot be read back."""
    column = on.column(field)
    if column.reads is Reads.KIND:
        return {}
    try:
        return {title: text} if value_of(column, text) is not None else {}
    except CannotStand:
        return {}


def _shown(value: Any) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, float):
        return f"{value:.10g}"
    return str(value)


def _same_limit(row: Any, entry: Any) -> bool:
    if isinstance(row, float) and isinstance(entry, float):
        return abs(row - entry) <= 1e-9 * max(abs(row), abs(entry))
    if isinstance(row, str) and isinstance(entry, str):
        one, other = read_sensor_type(row), read_sensor_type(entry)
        if one is not None and other is not None:
            return one == other
        return _letters_and_digits(row) == _letters_and_digits(entry)
    return same_value(row, entry)


def _same_certificate(row: str, entry: str) -> bool:
    """Whether one cell says no other certificates than the other; it may say fewer of them."""
    one = {_letters_and_digits(str(each)) for each in read_certificates(row)}
    other = {_letters_and_digits(str(each)) for each in read_certificates(entry)}
    if not one or not other:
        return _letters_and_digits(row) == _letters_and_digits(entry)
    return one <= other or other <= one


def _same_signal(row: str, entry: str) -> bool | None:
    one, other = signal_class(row), signal_class(entry)
    if one is None or other is None:
        return True if same_value(row, entry) else None
    return one == other


def _letters_and_digits(text: str) -> str:
    return "".join(letter for letter in text.casefold() if letter.isalnum())


def _same_marking(row: str, entry: str) -> bool | None:
    """Whether two markings say the same, None where one cannot be read; what only one says is no disagreement.

    The category repeats what the EPL says, and an EPL or an ambient is often left out on a row.
    """
    one, other = read_marking(row), read_marking(entry)
    if not one.readable or not other.readable:
        return True if _letters_and_digits(row) == _letters_and_digits(entry) else None
    if bool(one.entries) != bool(other.entries):
        return False
    said, also = _said(one), _said(other)
    return all(also.get(name, value) == value for name, value in said.items())


def _said(marking: Marking) -> dict[str, str]:
    """Return what a marking itself states, by name; what follows from silence is left out."""
    vector = marking.as_vector()
    said = {
        name: value
        for name, value in vector.items()
        if name != "atex" and value not in ("-", "none") and not value.startswith(("derived", "from category"))
    }
    if marking.ambient_source != "marked":
        said.pop("ta", None)
    return said


_SAME: Final[Mapping[str, Callable[[str, str], bool | None]]] = {
    "ex_marking": _same_marking,
    "certificate": _same_certificate,
    "signal": _same_signal,
}
