"""How one cell is read: what it says, why it says nothing, or what the trouble with it is."""

from __future__ import annotations

import datetime
import re
from collections.abc import Callable, Mapping, Sequence
from typing import Any, Final, NamedTuple

from instruments.column import Column, Reads
from instruments.number import CellTrouble, read_number
from instruments.quantity import Quantity, read_quantity, read_range, read_triplet
from instruments.unit import Unit, read_unit
from instruments.workbook.column_unit import read_plain_number
from instruments.workbook.negligible import is_negligible
from instruments.workbook.number_format import as_text, as_typed
from instruments.workbook.sheet import Value
from instruments.workbook.words import Words, folded, is_ditto, is_plainly_a_value, placeholder, yes_or_no

__all__ = [
    "BAD",
    "DITTO",
    "NOTHING",
    "STATES",
    "Outcome",
    "Read",
    "UnitCell",
    "count_cell",
    "is_settings_text",
    "joined_cell",
    "labelled_settings",
    "number_cell",
    "part_marking",
    "pieces_of",
    "quantity_cell",
    "text_cell",
    "trouble",
    "unit_cell",
    "with_prefix",
    "word_cell",
    "yes_cell",
]


class Outcome(NamedTuple):
    """What one cell says.

    Attributes
    ----------
    value
        What was read; None where there is a reason below.
    blank
        Why it is blank although something stands in it.
    trouble
        Why it could not be read.
    unitless
        It holds a number that needs a unit and has none; with `trouble` where its unit was not read.
    ditto
        It repeats the cell above.
    aside
        It says something that the field cannot hold, and that is no mistake: kept under its heading.
    """

    value: Any = None
    blank: str | None = None
    trouble: CellTrouble | None = None
    unitless: bool = False
    ditto: bool = False
    aside: bool = False


Read = Callable[[Value], Outcome]

NOTHING: Final = Outcome()
DITTO: Final = Outcome(ditto=True)
_UNITLESS: Final = Outcome(unitless=True)


def trouble(reason: str, readings: Sequence[str] = ()) -> CellTrouble:
    """Make the trouble of a cell."""
    return CellTrouble(reason=reason, readings=tuple(readings))


def _in_trouble(reason: str, readings: Sequence[str] = ()) -> Outcome:
    return Outcome(trouble=trouble(reason, readings))


# --- texts and words --------------------------------------------------------------------------------------------------

# Fields in which a word that elsewhere holds a place is a value.
_KEPT: Final[Mapping[str, frozenset[str]]] = {
    "scope": frozenset({"by vendor"}),
    "status": frozenset({"on hold", "to be defined"}),
    "hold": frozenset({"on hold"}),
    "area_classification": frozenset({"not applicable"}),
    "area": frozenset({"not applicable"}),
}
# Of those words what says nothing of a place all the same: in an area's column only none or N/A is unclassified.
_NO_WORDS: Final[Mapping[str, frozenset[str]]] = {
    "area": frozenset(
        (
            "n/r",
            "not required",
            "not appl.",
            "entfaellt",
            "entf.",
            "entf",
            "k.a.",
            "k. a.",
            "keine angabe",
            "s.o.",
            "s/o",
            "sans objet",
            "n.v.t.",
        )
    ),
}
_MINUS: Final = frozenset({"-", "\u2212", "\u2013"})
_DASHES: Final = frozenset({"-", "--", "---", "----", ".", "..", "_", "__", "- -", "/", "//", ""})
# DO is a digital output there.
_NO_DITTO: Final = frozenset({"io_type", "signal", "kind"})
# What a list of wiring parts by lines.
_BY_LINES: Final = frozenset(
    (
        "terminals",
        "junction_box",
        "io_address",
        "line",
        "equipment",
        "cable",
        "pair",
        "from_terminal",
        "to_terminal",
        "pid",
    )
)
# Terminals whose name may be a sign: there a dash is the minus.
_TERMINALS: Final = frozenset({"from_terminal", "to_terminal"})
# Contacts that are both, as wired.
_CHANGEOVER: Final = re.compile(
    r"(?:[1-4] ?x? ?)?(?:spdt|dpdt|co|c/o|changeover|change-over|change over|wechsler|umschaltkontakt|inverseur)"
    r"|n\.?/?o\.? ?(?:/|\+|&|,|and|und) ?n\.?/?c\.?|n\.?/?c\.? ?(?:/|\+|&|,|and|und) ?n\.?/?o\.?"
)
# Words that are matched generously: another text there says something else and is no mistake.
_GENEROUS: Final = frozenset({"location", "mounting", "system"})


_DATES: Final = (datetime.date, datetime.time)
# Fields in which a date may stand; elsewhere it is a terminal or an address such as 1-2.
_MAY_BE_DATES: Final = frozenset(
    {"x_accepted", "hold", "status", "revision", "scope", "service", "description", "name"}
)
MADE_A_DATE: Final = "the spreadsheet made a date or time of it"


def _plain(cell: Value) -> str:
    return (cell if isinstance(cell, str) else as_text(cell)).strip()


def _unless_blank(field: str, read: Callable[[str], Outcome]) -> Read:
    """Wrap a reader of texts: placeholders and ditto marks before the rest."""
    kept = _KEPT.get(field, frozenset())
    ditto = field not in _NO_DITTO
    minus = field in _TERMINALS

    def outcome(cell: Value) -> Outcome:
        text = _plain(cell)
        if is_plainly_a_value(text) or (minus and text in _MINUS):
            return read(text)
        if ditto and is_ditto(text):
            return DITTO
        reason = placeholder(text)
        held = "on hold" in kept and reason is not None and reason.startswith("hold")
        said = reason in kept and folded(text) not in (*_DASHES, *_NO_WORDS.get(field, ()))
        if reason and not held and not said:
            return Outcome(blank=reason)
        return read(text)

    return outcome


def text_cell(field: str) -> Read:
    r"""Return the reader of a column of texts.

    >>> text_cell("service")("Feed\n pressure").value, text_cell("terminals")("TB1:1\nTB1:2").value
    ('Feed pressure', 'TB1:1, TB1:2')
    >>> text_cell("from_terminal")("-").value, text_cell("service")("-").blank
    ('-', 'not applicable')
    >>> text_cell("maker")("by vendor").blank, text_cell("area_classification")("N/A").value
    ('by vendor', 'N/A')
    """
    joint = ", " if field in _BY_LINES else " "
    dated = field in _MAY_BE_DATES

    def read(text: str) -> Outcome:
        if "\n" in text or "\r" in text:
            text = joint.join(piece.strip(" ,;") for piece in text.splitlines() if piece.strip(" ,;"))
        return Outcome(value=" ".join(text.split()) or None)

    if field != "remarks":
        plain = _unless_blank(field, read)

        def said(cell: Value) -> Outcome:
            if isinstance(cell, _DATES) and not dated:
                return _in_trouble(MADE_A_DATE, as_typed(cell))
            return plain(cell)

        return said

    def remark(cell: Value) -> Outcome:
        text = _plain(cell)
        if folded(text) in _DASHES:
            return Outcome(blank="not applicable")
        return DITTO if is_ditto(text) else read(text)

    return remark


def word_cell(column: Column) -> Read:
    """Return the reader of a column that holds one of a closed set of words."""
    words = Words(column.words)
    generous = column.field in _GENEROUS

    def read(text: str) -> Outcome:
        found = words.find(text)
        if len(found) == 1 or (found and generous):
            return Outcome(value=found[0])
        if generous:
            return Outcome(aside=True)
        if column.field == "contact" and _CHANGEOVER.fullmatch(folded(text)):
            return Outcome(blank="changeover contact")
        return _in_trouble(f"'{text}' is not one of: {', '.join(words.canonical)}", found or words.canonical[:4])

    blank = _unless_blank(column.field, read)

    def outcome(cell: Value) -> Outcome:
        text = _plain(cell)
        # NO and NC are words in a column of contacts, none is one in a column of systems.
        if folded(text) not in _DASHES and len(found := words.find(text)) == 1:
            return Outcome(value=found[0])
        return blank(cell)

    return outcome


def yes_cell(field: str) -> Read:
    """Return the reader of a column of yes and no.

    >>> [yes_cell("hart")(text).value for text in ("Y", "HART 7", "no", "x")]
    [True, True, False, True]
    >>> yes_cell("hart")("4-20 mA").trouble.reason
    "'4-20 mA' is neither yes nor no"
    """

    def read(text: str) -> Outcome:
        said = _said(field, text)
        return (
            Outcome(value=said) if said is not None else _in_trouble(f"'{text}' is neither yes nor no", ("yes", "no"))
        )

    blank = _unless_blank(field, read)

    def outcome(cell: Value) -> Outcome:
        text = _plain(cell)
        if folded(text) not in _DASHES and (said := _said(field, text)) is not None:
            return Outcome(value=said)
        return blank(cell)

    return outcome


def _said(field: str, text: str) -> bool | None:
    """Return what a yes/no cell says, in the words of its own column too."""
    plain = folded(text)
    if field == "hart" and (
        re.fullmatch(r"[567](?:\.\d)?", plain)
        or (re.search(r"\bhart\b", plain) and not re.search(r"\bno\b|\bnon\b|\bnot\b|without", plain))
    ):
        return True
    if field.startswith("square_root"):
        if re.fullmatch(r"lin(?:ear)?\.?", plain):
            return False
        if re.fullmatch(r"(?:sq(?:uare)?\.?\s?(?:rt|root)|sqrt|√|root|radiziert|radizierend)\.?", plain):
            return True
    return yes_or_no(text)


def count_cell(field: str) -> Read:
    """Return the reader of a column of whole numbers.

    >>> [count_cell("wires")(cell).value for cell in (2.0, "4-wire", "3W", "12 x 2 x 1.5")]
    [2, 4, 3, 12]
    """
    return _unless_blank(field, _count)


def _count(text: str) -> Outcome:
    number = read_number(text)
    if not isinstance(number, CellTrouble):
        if number.value == int(number.value) and 0 <= number.value < 1e6:
            return Outcome(value=int(number.value))
        return _in_trouble(f"'{text}' is no count")
    by_size = re.fullmatch(r"(\d{1,4})\s?[x×*]\s?[23]\s?[x×*].{0,20}", text)
    found = by_size or re.fullmatch(r"(\d{1,4})\s?[- ]?\s?[^\d]{1,24}", text)
    return Outcome(value=int(found[1])) if found else _in_trouble(f"'{text}' is no count")


def number_cell(field: str, unit: str, *, stated: str | None, decimal: str | None) -> Read:
    """Return the reader of a column of bare numbers; parameters as for `read_plain_number`.

    >>> number_cell("ci_nf", "nF", stated=None, decimal=None)("negligible").value
    0.0
    """

    def read(cell: Value) -> Outcome:
        if isinstance(cell, str) and is_negligible(field, cell):
            return Outcome(value=0.0)
        value = read_plain_number(cell, unit, heading_unit=stated, decimal=decimal)
        return Outcome(trouble=value) if isinstance(value, CellTrouble) else Outcome(value=value)

    blank = _unless_blank(field, read)
    return lambda cell: read(cell) if type(cell) is float else blank(cell)


_LABEL: Final = re.compile(
    r"(?<![A-Za-z])(HI[\s-]?HI|LO[\s-]?LO|H{1,2}|L{1,2}|HI|LO|HIGH|LOW|TRIP|[A-Z]{1,3}[SA](?:HH|LL|H|L))(?![A-Za-z])"
    r"\s?[:=@]?\s?(?=[<>]?\s?-?[\d.])",
    re.IGNORECASE,
)
_LEVELS: Final = {
    "ll": 0,
    "lolo": 0,
    "l": 1,
    "lo": 1,
    "low": 1,
    "h": 2,
    "hi": 2,
    "high": 2,
    "hh": 3,
    "hihi": 3,
    "trip": 4,
}


_FIGURE_FIRST: Final = re.compile(r"[<>~(]{0,2}\s?[-+]?\d")


def is_settings_text(text: str) -> bool:
    """Whether a text is about figures of settings, read or not; see the cause and effect chart is not.

    >>> is_settings_text("12/10 barg"), is_settings_text("trip at HH 12"), is_settings_text("see chart CE-01")
    (True, True, False)
    """
    return placeholder(text) is None and (_FIGURE_FIRST.match(text) is not None or _LABEL.search(text) is not None)


def labelled_settings(text: str) -> tuple[str | None, ...] | None:
    """Return the settings that one cell names, LL L H HH and trip, each with its unit; None where it names none.

    >>> labelled_settings("H=18 HH=20 barg")
    (None, None, '18 barg', '20 barg', None)
    >>> labelled_settings("PSHH 12 barg / PSH 10 barg"), labelled_settings("see data sheet")
    ((None, None, '10 barg', '12 barg', None), None)
    """
    labels = list(_LABEL.finditer(text))
    if not labels or text[: labels[0].start()].strip():
        return None
    found: list[str | None] = [None] * 5
    ends = [*(each.start() for each in labels[1:]), len(text)]
    for each, end in zip(labels, ends, strict=True):
        label = re.sub(r"[\s-]", "", each[1].casefold())
        tail = re.search(r"(?:hh|ll|h|l)$", label)
        place = _LEVELS.get(label, _LEVELS[tail[0]] if tail else -1)
        if place < 0 or found[place] is not None:
            return None
        found[place] = text[each.end() : end].strip(" ,;/|")
    units = {unit for said in found if said and (unit := said.lstrip("<>-0123456789., "))}
    if len(units) == 1:
        (unit,) = units
        found = [f"{said} {unit}" if said and unit not in said else said for said in found]
    return tuple(found)


# --- texts that stand in several columns, values that stand in one ----------------------------------------------------

_BARE: Final = {
    "Zone": re.compile(r"(?:2[0-2]|[0-2])(?:\s?/\s?(?:2[0-2]|[0-2]))?"),
    "Class": re.compile(r"I{1,3}|[123]"),
    "Div": re.compile(r"[12]"),
    "Group": re.compile(r"[A-G](?:\s?[,&/+ ]\s?[A-G]){0,6}"),
    "T": re.compile(r"\d{2,3}(?:[.,]0)?(?:\s?°?\s?C)?"),
    "Ta": re.compile(r"[-+\u2212\u2013\d].{0,40}"),
}


def with_prefix(prefix: str, text: str) -> str:
    """Return a text with what its heading says and its cell leaves out.

    >>> with_prefix("Zone", "2"), with_prefix("Group", "IIB"), with_prefix("Div", "2"), with_prefix("Slot", "4")
    ('Zone 2', 'IIB', 'Div 2', 'Slot 4')
    """
    bare = _BARE.get(prefix)
    if not prefix or (bare is not None and not bare.fullmatch(text)):
        return text
    return f"{prefix} {text}"


_PARTS: Final = re.compile(r"[/|\n;]")
_PARTS_TOO: Final = re.compile(r",\s")
_END_LABEL: Final = re.compile(r"(?<![A-Za-z])(min|nor|max)[a-z]{0,6}(?![A-Za-z])[.:= ]*", re.IGNORECASE)
_TAIL: Final = re.compile(r"[\d.,]\s?([^\d.,<>\s+-][^\d]{0,20}\d?)$")
_ENDS: Final = ("min", "nor", "max")


def pieces_of(cell: Value, fields: Sequence[str]) -> tuple[Value, ...] | CellTrouble:
    """Return the values of a cell that holds one for each of several fields, in order.

    A placeholder, or a word such as ambient, speaks for all of them. Of minimum, normal and maximum a single
    value is the normal one, and a unit that stands once is all the others'.

    >>> pieces_of("20 / 90", ("design_pressure", "design_temperature"))
    ('20', '90')
    >>> pieces_of("2/8 degC", ("operating_temperature_min", "operating_temperature_max"))
    ('2 degC', '8 degC')
    >>> pieces_of("max. 60", ("operating_temperature_min", "operating_temperature_max"))
    (None, '60')
    >>> pieces_of("20", ("design_pressure", "design_temperature")).reason
    "'20' holds 1 value where 2 are wanted"
    """
    if cell is None or isinstance(cell, datetime.date | datetime.time):
        return (cell,) * len(fields)
    text = _plain(cell)
    if placeholder(text) or is_ditto(text) or not any(map(str.isdigit, text)):
        return (text,) * len(fields)
    ends = [place for name in fields for place, end in enumerate(_ENDS) if name.rpartition("_")[2].startswith(end)]
    pieces = [piece.strip() for piece in _PARTS.split(text)]
    if len(pieces) != len(fields) and _PARTS_TOO.search(text):
        pieces = [piece.strip() for piece in _PARTS_TOO.split(text)]
    pieces = pieces if len(pieces) > 1 else [piece for piece in pieces if piece]
    of_one_kind = len(ends) == len(fields) or all(name.startswith("setting_") for name in fields)
    if of_one_kind and (tail := _TAIL.search(pieces[-1])) is not None and "/" not in tail[1]:
        pieces = [f"{piece} {tail[1]}" if re.fullmatch(r"[<>~]?\s?[-+]?[\d.,]+", piece) else piece for piece in pieces]
    if len(ends) == len(fields):
        named = [_END_LABEL.search(piece) for piece in pieces]
        places = [_ENDS.index(each[1].lower()) for each in named if each is not None]
        if len(places) == len(pieces) == len(set(places)) and set(places) <= set(ends):
            by_place = {place: _END_LABEL.sub("", piece).strip() for place, piece in zip(places, pieces, strict=True)}
            return tuple(by_place.get(place) for place in ends)
        if len(pieces) == 1 and not places and 1 in ends:
            return tuple(pieces[0] if place == 1 else None for place in ends)
    if len(pieces) == len(fields):
        return tuple(piece or None for piece in pieces)
    held = f"{len(pieces)} value{'s' if len(pieces) > 1 else ''}"
    return trouble(f"'{text}' holds {held} where {len(fields)} are wanted", pieces[:4] if len(pieces) > 1 else ())


def joined_cell(cells: Sequence[Value], joints: Sequence[str]) -> str | None:
    """Return the text that stands in several cells of a row, each with what stands before it: PT, -1001, A."""
    # A part that is left out takes the joint behind it along.
    found = ""
    for joint, cell in zip(joints, cells, strict=True):
        if cell is not None:
            found += f"{joint if found else ''}{_plain(cell)}"
    return found or None


_CERTIFICATE_NUMBER: Final = re.compile(
    r"(?:^|(?<=[\s,;/(]))"
    r"(?:[A-Z][A-Za-z]{1,9} ?[0-9]{2} ?\.?(?:ATEX|UKEX)[ -]?[A-Z]{0,2} ?[0-9.]{3,10}(?: ?[XU](?![A-Za-z]))?"
    r"|IECEx [A-Z]{2,6} ?[0-9]{2}\.[0-9]{3,5}(?: ?[XU](?![A-Za-z]))?)"
)


def part_marking(text: str) -> tuple[str, str | None]:
    """Part a marking from the certificate's number that stands with it; no number where there is none.

    >>> part_marking("Ex ia IIC T4 Ga / BVX 15 ATEX 1012X")
    ('Ex ia IIC T4 Ga', 'BVX 15 ATEX 1012X')
    >>> part_marking("BVX 15 ATEX 1012X")
    ('BVX 15 ATEX 1012X', None)
    """
    found = _CERTIFICATE_NUMBER.search(text)
    if found is None:
        return text, None
    rest = f"{text[: found.start()].rstrip(' ,;/(-')} {text[found.end() :].lstrip(' ,;/)-')}".strip()
    return (rest, found[0]) if rest else (text, None)


# --- units ------------------------------------------------------------------------------------------------------------


class _Mark:
    """A unit cell that is no unit."""


BAD: Final = _Mark()
"""A unit cell that could not be read: what it speaks for has no value."""

STATES: Final = _Mark()
"""A unit cell that says that its row has two states and no unit."""

UnitCell = Unit | _Mark | None

_TWO_STATES: Final = re.compile(
    r"(?:bool(?:ean)?|binary|bin[aä]r|digital|discrete|logic(?:al)?|states?|on\s?[/-]\s?off|open(?:ed)?\s?[/-]\s?closed?|"
    r"closed?\s?[/-]\s?open|0\s?/\s?1|1\s?/\s?0|contact|run\s?[/-]\s?stop|start\s?[/-]\s?stop|ein\s?[/-]\s?aus|"
    r"auf\s?[/-]\s?zu|status|true\s?/\s?false|no\s?/\s?nc|alarm|trip|yes\s?/\s?no|normal\s?/\s?(?:alarm|trip|fault)|"
    r"healthy\s?/\s?fault)",
    re.IGNORECASE,
)


def unit_cell(cell: Value) -> Outcome:
    """Read a cell of a column of units.

    >>> str(unit_cell("[barg]").value), unit_cell("Boolean").value is STATES, unit_cell("-").blank
    ('barg', True, 'not applicable')
    >>> unit_cell("Hazen").trouble.reason, unit_cell("bar / °C").trouble.readings
    ("unit 'Hazen' is not known", ('bar', '°C'))
    """
    text = _plain(cell)
    if is_ditto(text):
        return DITTO
    bracketed = re.fullmatch(r"[\[(]\s?(.*?)\s?[\])]", text)
    unit = read_unit(text) or (read_unit(bracketed[1]) if bracketed else None)
    if unit is not None:
        return Outcome(value=unit)
    if _TWO_STATES.fullmatch(text):
        return Outcome(value=STATES)
    reason = placeholder(text)
    if reason:
        return Outcome(blank=reason)
    pieces = [piece.strip() for piece in re.split(r"[/;,|\n]|\bor\b", text) if piece.strip()]
    units = [each for piece in pieces if (each := read_unit(piece)) is not None]
    if len(units) > 1 and len(units) == len(pieces):
        if len(set(units)) == 1:
            return Outcome(value=units[0])
        return _in_trouble(f"'{text}' holds several units", [str(each) for each in units])
    return _in_trouble(f"unit '{text}' is not known")


# --- quantities -------------------------------------------------------------------------------------------------------


def quantity_cell(cell: Value, unit: UnitCell, column: Column, *, decimal: str | None, default: Unit | None) -> Outcome:
    """Read a cell of a column of quantities, ranges or triplets.

    Parameters
    ----------
    cell
        The cell; None says nothing.
    unit
        What the row or the heading give it; its own goes before.
    column
        The column: how it is read, and which kinds of unit it can hold.
    decimal
        The decimal mark; None where nothing tells, so that 1,000 is trouble.
    default
        The unit of a number without one, where the field has a natural one.
    """
    if cell is None:
        return NOTHING
    if type(cell) is not float:
        if not isinstance(cell, str):
            return _in_trouble(MADE_A_DATE, as_typed(cell)[1:])
        text = cell.strip()
        if is_ditto(text):
            return DITTO
        reason = placeholder(text)
        if reason:
            return Outcome(blank=reason)
        if _TWO_STATES.fullmatch(text):
            return Outcome(blank="two states, no range")
        cell = text if column.reads is Reads.TRIPLET else " ".join(text.split())
    if unit is STATES:
        return Outcome(blank="two states, no unit")
    given = unit if isinstance(unit, Unit) else default if unit is None else None
    parts: tuple[Quantity | None, ...]
    if column.reads is Reads.RANGE:
        pair = read_range(cell, unit=given, decimal=decimal)
        if isinstance(pair, CellTrouble):
            return _without_value(pair)
        parts = (pair.lrv, pair.urv)
    elif column.reads is Reads.TRIPLET:
        three = read_triplet(cell, unit=given, decimal=decimal, kinds=column.kinds)
        if isinstance(three, CellTrouble):
            return _without_value(three)
        parts = tuple(three)
    else:
        value = read_quantity(cell, unit=given, decimal=decimal, kinds=column.kinds)
        if isinstance(value, CellTrouble):
            return _without_value(value)
        parts = (value,)
    for part in parts:
        if part is None:
            continue
        if part.unit is None:
            return Outcome(unitless=True, trouble=trouble("its unit could not be read")) if unit is BAD else _UNITLESS
        if column.kinds and part.unit.kind not in column.kinds:
            return _in_trouble(f"'{part}' is no {' or '.join(column.kinds)}")
    if all(part is None for part in parts):
        single = read_quantity(cell, unit=given, decimal=decimal, kinds=column.kinds)
        return Outcome(blank=(single.blank if isinstance(single, CellTrouble) else None) or "not applicable")
    return Outcome(value=parts if len(parts) > 1 else parts[0])


def _without_value(found: CellTrouble) -> Outcome:
    return Outcome(blank=found.blank) if found.blank else Outcome(trouble=found)
