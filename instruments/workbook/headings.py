"""Which rows of a sheet are its heading, what kind of sheet it is, and which heading is which field."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from itertools import islice
from typing import Final

from rapidfuzz import fuzz, process

from instruments.column import Column, Reads, SheetKind
from instruments.kind import kind_from_words
from instruments.unit import Unit, read_unit
from instruments.workbook.column_unit import factor_to
from instruments.workbook.number_format import as_text
from instruments.workbook.sheet import Sheet
from instruments.workbook.words import Words, folded, is_ditto, placeholder, yes_or_no

__all__ = ["ColumnMatch", "SheetMatch", "heading_words", "match_sheet"]

LOOKED_AT_ROWS: Final = 400
"""Rows in which a heading is looked for; title pages and notes come before it."""

SAMPLE: Final = 300
"""Filled cells of a column by which its contents are judged."""

LIKE_ENOUGH: Final = 86.0
"""Likeness (0..100) from which a heading that is no synonym is taken for a misspelt one."""


@dataclass(frozen=True, slots=True, kw_only=True)
class ColumnMatch:
    """One column that was understood.

    Attributes
    ----------
    index
        The column, counted from 0.
    heading
        The heading as written, the rows of it joined by a blank.
    how
        ``synonym``, ``likeness``, or ``contents`` where only the cells could tell.
    likelihood
        0 to 1.
    unit, unit_text
        The unit that the heading (or a unit row below it) states: as understood, with its reference,
        for quantities; as written for bare numbers.
    unit_index
        The unit column that speaks for this column alone, as it stands beside it.
    prefix
        What the cells leave out because the heading says it: ``Zone`` before a bare 2.
    parts
        Columns that say the rest of it, each with its own prefix: gas group, temperature class.
    piece
        Which of how many values in each cell is meant, where a column holds two (design P/T); else None.
    only
        The first letter of the tags that the column speaks of (a flow column says nothing of a pressure);
        blank: all.
    """

    column: Column
    index: int
    heading: str
    how: str = "synonym"
    likelihood: float = 1.0
    unit: Unit | None = None
    unit_text: str = ""
    unit_index: int | None = None
    prefix: str = ""
    parts: tuple[tuple[int, str], ...] = ()
    piece: tuple[int, int] | None = None
    only: str = ""

    @property
    def field(self) -> str:
        """The field that the column is read into."""
        return self.column.field


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetMatch:
    """How a sheet was understood.

    Attributes
    ----------
    header_rows
        The heading's rows, counted from 0; unit and numbering rows among them. Empty where each
        row is a field and its value.
    first_row
        The first row below the heading.
    columns
        Field to column.
    unknown
        Columns that were not understood: index and heading.
    unit_columns
        Columns of units that speak for their neighbours alone: index and heading.
    named
        True where the name of the sheet or file says what it is.
    notes
        What was decided otherwise than by a synonym.
    """

    kind: SheetKind
    header_rows: tuple[int, ...]
    first_row: int
    columns: Mapping[str, ColumnMatch]
    unknown: tuple[tuple[int, str], ...] = ()
    unit_columns: tuple[tuple[int, str], ...] = ()
    named: bool = False
    notes: tuple[str, ...] = ()
    score: float = 0.0

    @property
    def fields(self) -> frozenset[str]:
        """All fields that the columns fill, those of ranges and triplets among them."""
        return frozenset(name for match in self.columns.values() for name in _fills(match.column))


# --- the words of a heading -----------------------------------------------------------------------------------------

_PHRASES: Final = tuple(
    (re.compile(pattern), f" {word} ")
    for pattern, word in (
        (r"\bp\s?(?:&|\+|and)\s?i\s?d\b", "pid"),
        (r"\bp\.\s?&?\s?i\.\s?d\b", "pid"),
        (r"\br\s?(?:&|\+|und)\s?i\b", "ri"),
        (r"\bi\s?/\s?o\b", "io"),
        (r"\be\s?/\s?a\b", "ea"),
        (r"\by\s?/\s?n\b|\byes\s?/\s?no\b|\bja\s?/\s?nein\b", ""),
        (r"\bn\.?\s?[oc]\.?\s?/\s?n\.?\s?[oc]\b", "nonc"),
        (r"\bs\s?/\s?n\b", "serial"),
        (r"\bd\s?/\s?p\b", "dp"),
        (r"\bset\s?-?\s?(?:points?|pts?)\b", "setpoint"),
        (r"\b(?:low|lo|l)[\s-]?(?:low|lo|l)\b", "ll"),
        (r"\b(?:high|hi|h)[\s-]?(?:high|hi|h)\b", "hh"),
        (r"\bmess ?stellen?\s?-?\s?(?:nr|nummer)\b", "messstellen"),
        (r"\bmess(?:bereichs?|b\.)\s?-?\s?anfang\b", "messbereich anfang"),
        (r"\bmess(?:bereichs?|b\.)\s?-?\s?ende\b", "messbereich ende"),
        (r"\bmess ?bereichs?-?einheit\b", "messbereich einheit"),
        (r"\bein-? ?/ ?ausgang\b", "ea"),
    )
)
# SafetyNotes, TagName: names as programs write them.
_HUMPS: Final = re.compile(r"(?<=[a-z])(?=[A-Z][a-z])")
_INITIALS: Final = re.compile(r"\b(?:[a-z]\.\s?){1,5}[a-z]\b\.?")
_SPLIT: Final = re.compile(r"[^0-9a-z%#µμ°Ω&]+")
_ONE_WORD: Final[Mapping[str, str]] = {
    spelling: word
    for word, spellings in {
        "operating": ("oper", "op", "opg", "opr", "operation", "operational", "opn"),
        "pressure": ("press", "pres"),
        "temperature": ("temp", "tmp", "temperatures"),
        "min": ("minimum", "mini", "minim"),
        "max": ("maximum", "maxi", "maxim"),
        "normal": ("norm", "nor", "nom", "nominal", "nrm"),
        "design": ("des", "dsgn", "desgn"),
        "calibrated": ("cal", "calib", "calibr", "calibration", "calibrate"),
        "instrument": ("instr", "inst", "instruments", "instrumentation"),
        "equipment": ("equip", "eqpt", "eqp", "equipt", "equpt", "eqmt"),
        "description": ("desc", "descr", "descrip", "descriptions", "descrpt"),
        "hazardous": ("haz", "hazard"),
        "class": ("classification", "classn", "classif", "cl", "classifn"),
        "location": ("loc", "locn", "locat"),
        "manufacturer": ("mfr", "manuf", "mfg", "manufacture", "mfgr", "manufact", "manu"),
        "revision": ("rev",),
        "drawing": ("dwg", "drg", "drwg"),
        "terminal": ("term", "terminals", "terms"),
        "unit": ("units",),
        "alarm": ("alarms", "alm", "alms"),
        "setting": ("settings",),
        "setpoint": ("sp", "setpoints", "setpt"),
        "low": ("lo",),
        "high": ("hi",),
        "ll": ("lolo",),
        "hh": ("hihi",),
        "signal": ("sig", "signals", "sgnl"),
        "remark": ("remarks", "rem", "rmk", "rmks"),
        "comment": ("comments",),
        "note": ("notes",),
        "length": ("len", "lg", "lgth"),
        "certificate": ("cert", "certificates", "certification"),
        "position": ("pos", "posn"),
        "engineering": ("eng", "engg", "engrg"),
        "certificated": (),
        "category": ("cat",),
        "range": ("ranges", "rng", "rge"),
        "messbereich": ("messber", "messbereiche"),
        "einheit": ("einh",),
        "betriebstemperatur": ("betriebstemp",),
        "auslegungstemperatur": ("auslegungstemp", "ausltemp"),
        "betriebsdruck": ("betriebsdr",),
        "auslegungsdruck": ("auslegungsdr",),
        "bezeichnung": ("bez", "bezeichn"),
        "address": ("addr", "adress", "addresses"),
        "supply": ("supplies", "suppl"),
        "junction": ("junct",),
        "conductor": ("cond",),
        "voltage": ("volts", "volt"),
        "temperaturklasse": ("temp.klasse", "tklasse"),
        "failure": ("fails",),
    }.items()
    for spelling in spellings
}
# Words that say nothing about which field it is.
_DROPPED: Final = frozenset(
    (
        "no", "nr", "num", "number", "nos", "nummer", "nbr", "#", "of", "the", "for", "a", "an", "and", "or", "der",
        "die", "das", "des", "und", "in", "at", "&", "numero", "n°", "du", "et", "oder", "s",
    )
)  # fmt: skip
_NEUTRAL: Final = frozenset(
    (
        "detail", "data", "information", "info", "general", "particular", "instrument", "field", "project",
        "client", "site", "current", "actual", "final", "existing", "ref", "reference", "as", "built", "proposed",
        "main", "process", "column", "technical", "electrical", "daten", "allgemein", "requirement", "condition",
        "parameter", "characteristic", "value", "connection", "title", "hazardous", "plant", "mechanical",
        "specification",
    )
)  # fmt: skip
_KEEP_S: Final = frozenset(
    (
        "class", "status", "process", "gas", "bus", "address", "loss", "us", "as", "is", "access", "chassis",
        "basis", "press", "cis", "dcs", "plcs", "pls", "sis", "fgs", "pcs", "bpcs", "fails", "sps", "adsress",
        "abs",
    )
)  # fmt: skip


@lru_cache(maxsize=65536)
def heading_words(text: str) -> tuple[str, ...]:
    """Return the words of a heading as headings are compared: abbreviations written out, punctuation and "no." gone.

    >>> heading_words("Oper. Press. (Max.)"), heading_words("P & ID No."), heading_words("I/O Type")
    (('operating', 'pressure', 'max'), ('pid',), ('io', 'type'))
    >>> heading_words("E.U."), heading_words("Set Pts HI-HI"), heading_words("Tag #")
    (('eu',), ('setpoint', 'hh'), ('tag',))
    """
    if " " not in text:
        text = _HUMPS.sub(" ", text)
    plain = folded(text[:200]).replace("μ", "u").replace("µ", "u")
    plain = _INITIALS.sub(lambda found: found[0].replace(".", "").replace(" ", "") + " ", plain)
    for pattern, word in _PHRASES:
        plain = pattern.sub(word, plain)
    words = [word for word in _SPLIT.split(plain) if word]
    kept = [_one_word(word) for word in words if word not in _DROPPED]
    return tuple(kept or words)


def _one_word(word: str) -> str:
    known = _ONE_WORD.get(word)
    if known:
        return known
    if len(word) > 3 and word.endswith("s") and not word.endswith("ss") and word not in _KEEP_S:
        return _ONE_WORD.get(word[:-1], word[:-1])
    return word


# Headings of one everyday word: they are believed only where the contents fit.
_WEAK: Final = frozenset(
    heading_words(text)
    for text in (
        "min", "max", "from", "to", "unit", "type", "class", "low", "high", "name", "item", "set", "normal", "fail",
        "zone", "index", "box", "run", "by", "ex", "me", "point", "zero", "span", "scale", "td", "co", "ca", "la",
        "pi", "po", "ci", "li", "io", "cn", "ui", "ii", "uo", "h", "l", "hh", "ll", "function", "position", "art",
        "package", "power", "supply", "output", "signal", "state", "device", "text", "id", "code", "source", "drop",
        "in", "field", "circuit", "loop tag", "ident", "process min", "process max", "vmax", "level", "enclosure",
        "connection", "temperature", "pressure", "start", "end", "group", "marking", "reference", "connected to",
        "value", "diode", "limit", "length", "ort", "size", "installation", "architecture", "room", "deck", "grid",
        "burst", "sensor", "class of sensor", "product", "stoff", "material", "dimension", "interlock", "channel",
        "address", "failure", "trip", "listing", "approval", "operating",
    )
)  # fmt: skip
# Headings that need the heading above them to mean anything.
_DEPENDENT: Final = frozenset(
    (
        "min", "max", "normal", "unit", "low", "high", "from", "to", "type", "length", "size", "class", "group",
        "zone", "code", "temperature", "pressure", "set", "trip", "name", "description", "value", "eu", "uom",
        "von", "bis", "l", "h", "typ", "einheit", "setpoint", "tag", "address", "marking", "service", "material",
        "model",
    )
)  # fmt: skip
_GENERIC_UNITS: Final = frozenset(
    heading_words(text)
    for text in (
        "unit", "e.u.", "uom", "engineering unit", "eng. units", "einheit", "unit of measure", "me", "unite",
        "dimension", "unit of measurement", "u/m", "measuring unit", "masseinheit", "einh.",
    )
)  # fmt: skip
_TITLE_WORDS: Final = re.compile(
    r"\b(?:doc(?:ument)?|rev(?:ision)?|date|project|client|sheet|page|prepared|checked|approved|title|job|contract|"
    r"customer|purchaser|location of plant|issued?|datum|blatt|projekt|kunde|erstellt|geprueft)\b"
)


class _Names:
    """The headings of one kind of sheet, by their words."""

    def __init__(self, kind: SheetKind) -> None:
        self.exact: dict[tuple[str, ...], list[tuple[float, Column]]] = {}
        self.loose: dict[tuple[str, ...], list[tuple[float, Column]]] = {}
        for column in kind.columns:
            own = 0.05 if column.owner == "own" else 0.0
            seen: set[tuple[str, ...]] = set()
            for rank, heading in enumerate((column.title, *column.headings)):
                words = heading_words(heading)
                if not words or words in seen:
                    continue
                seen.add(words)
                strength = 1.0 - own - min(0.001 * rank, 0.04)
                self.exact.setdefault(words, []).append((strength, column))
                self.loose.setdefault(tuple(sorted(words)), []).append((strength - 0.03, column))
        self.texts = {words: " ".join(words) for words in self.exact if len(" ".join(words)) > 4}
        self._likes: dict[tuple[str, ...], list[tuple[float, str, Column]]] = {}

    def find(self, words: tuple[str, ...]) -> list[tuple[float, str, Column]]:
        """Return the columns that words name: strength, how, column."""
        found = self.exact.get(words)
        if found:
            return [(strength, "synonym", column) for strength, column in found]
        found = self.loose.get(tuple(sorted(words)))
        if found:
            return [(strength, "synonym", column) for strength, column in found]
        rest = tuple(word for word in words if word not in _NEUTRAL)
        if rest and rest != words:
            found = self.exact.get(rest) or self.loose.get(tuple(sorted(rest)))
            if found:
                return [(strength - 0.08, "synonym", column) for strength, column in found]
        return []

    def knows(self, words: tuple[str, ...]) -> bool:
        """Whether words are a heading, in whatever order."""
        return words in self.exact or tuple(sorted(words)) in self.loose

    def like(self, words: tuple[str, ...]) -> list[tuple[float, str, Column]]:
        """Return the columns whose headings words resemble."""
        known = self._likes.get(words)
        if known is None:
            known = self._likes[words] = []
            text = " ".join(words)
            # Short words resemble too much: line and lime, tag and tab.
            if 4 < len(text) <= 60 and not any(word.isdigit() for word in words):
                for like, score, key in process.extract(
                    text, self.texts, scorer=fuzz.token_sort_ratio, score_cutoff=LIKE_ENOUGH, limit=4
                ):
                    if _qualifiers(like) == _qualifiers(text):
                        known.extend(
                            (0.75 * score / 100 * strength, "likeness", column) for strength, column in self.exact[key]
                        )
        return known


# Min is like max in letters only.
_QUALIFYING: Final = frozenset(
    (
        "min", "max", "normal", "low", "high", "ll", "hh", "l", "h", "from", "to", "upper", "lower", "unit", "von",
        "bis", "anfang", "ende", "design", "operating", "system", "device", "former", "old", "iic", "iib", "iia",
        "seal", "ambient", "process", "type", "length", "class", "group", "size", "position", "direction", "no",
    )
)  # fmt: skip


def _qualifiers(text: str) -> frozenset[str]:
    return _QUALIFYING.intersection(text.split())


_NAMES: dict[int, tuple[SheetKind, _Names]] = {}


def _names(kind: SheetKind) -> _Names:
    found = _NAMES.get(id(kind))
    if found is None or found[0] is not kind:
        found = _NAMES[id(kind)] = (kind, _Names(kind))
    return found[1]


# --- what a heading can be ------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class _Levels:
    """The texts of a heading from top to bottom; `spread` for a top that stands over several columns."""

    texts: tuple[str, ...]
    spread: bool = False

    @property
    def joined(self) -> str:
        return " ".join(" ".join(text.split()) for text in self.texts)


@dataclass(frozen=True, slots=True)
class _Candidate:
    strength: float
    how: str
    column: Column
    unit: Unit | None
    unit_text: str
    weak: bool


_NUMERIC: Final = frozenset({Reads.QUANTITY, Reads.NUMBER, Reads.COUNT, Reads.RANGE, Reads.TRIPLET})
_BRACKET: Final = re.compile(r"[(\[{<]([^()\[\]{}<>]{1,24})[)\]}>]")
_PARTS: Final = re.compile(r"[/|\n;]|\s[-–]\s")


def unit_in(text: str) -> Unit | None:
    """Return the unit that a text is, None where it is none."""
    text = text.strip()
    if not text or len(text) > 24:
        return None
    return read_unit(text)


def unit_for(column: Column, text: str) -> Unit | str | None:
    """Return the unit that a text states for a column; None where it is none, or none that its values can be in."""
    if column.reads in (Reads.QUANTITY, Reads.RANGE, Reads.TRIPLET):
        unit = unit_in(text)
        return unit if unit is not None and (not column.kinds or unit.kind in column.kinds) else None
    if column.reads is Reads.NUMBER and column.unit:
        return text.strip() if factor_to(column.unit, text) is not None else None
    return None


_NO_UNITS: Final = frozenset(["l", "h", "ll", "hh", "min", "max", "no", "in", "from", "to", "at"])


def _without_unit(text: str) -> Iterator[tuple[str, str]]:
    """Yield a heading without each piece that may be its unit: in brackets, behind a comma, at its end."""
    for found in _BRACKET.finditer(text):
        inside = found[1].strip()
        # (L) and (H) are alarms, not litres and henries.
        if inside.casefold() not in _NO_UNITS:
            yield text[: found.start()] + " " + text[found.end() :], inside
    comma, mark, rest = text.rpartition(",")
    if mark and rest.strip():
        yield comma, rest.strip()
    words = text.split()
    for count in (3, 2, 1):
        if len(words) > count:
            tail = " ".join(words[-count:]).strip(",.;:")
            if tail.casefold() not in _NO_UNITS and len(tail) <= 20:
                yield " ".join(words[:-count]).rstrip(" ,;:-"), tail


class _Finder:
    """Finds what the headings of a sheet can be, for one kind of sheet."""

    def __init__(self, kind: SheetKind) -> None:
        self.kind = kind
        self.names = _names(kind)
        self._known: dict[_Levels, tuple[_Candidate, ...]] = {}

    def candidates(self, levels: _Levels) -> tuple[_Candidate, ...]:
        """Return what a heading may be by its words."""
        known = self._known.get(levels)
        if known is None:
            known = self._known[levels] = tuple(self._candidates(levels, alike=False))
        return known

    def candidates_or_alike(self, levels: _Levels) -> tuple[_Candidate, ...]:
        """Return what a heading may be by its words, else by likeness."""
        return self.candidates(levels) or tuple(self._candidates(levels, alike=True))

    def _candidates(self, levels: _Levels, *, alike: bool) -> Iterable[_Candidate]:
        best: dict[str, _Candidate] = {}

        def offer(found: Sequence[tuple[float, str, Column]], factor: float, unit_text: str | None, weak: bool) -> None:
            for strength, how, column in found:
                stated = None if unit_text is None else unit_for(column, unit_text)
                if unit_text is not None and stated is None:
                    continue
                strength *= factor
                other = best.get(column.field)
                if (
                    other is None
                    or strength > other.strength
                    or (stated and not other.unit_text and strength > 0.8 * other.strength)
                ):
                    best[column.field] = _Candidate(
                        strength, how, column, stated if isinstance(stated, Unit) else None, unit_text or "", weak
                    )

        whole = levels.joined
        if alike and heading_words(levels.texts[-1]) in _GENERIC_UNITS:
            return ()
        if alike:
            offer(self.names.like(heading_words(whole)), 1.0, None, True)
            for rest, unit in _without_unit(whole):
                offer(self.names.like(heading_words(rest)), 1.0, unit, True)
            return best.values()
        for text, factor in self._readings(levels):
            words = heading_words(text)
            if not words or words in _GENERIC_UNITS:
                continue
            weak = words in _WEAK
            offer(self.names.find(words), factor * (0.7 if weak else 1.0), None, weak)
            for rest, unit in _without_unit(text):
                short = heading_words(rest)
                if short and short != words:
                    weak = short in _WEAK
                    offer(self.names.find(short), factor * (0.85 if weak else 1.0), unit, weak)
        return best.values()

    def _readings(self, levels: _Levels) -> Iterator[tuple[str, float]]:
        """Yield the texts that a heading may be read as, the surest first."""
        texts = levels.texts
        yield levels.joined, 1.0
        if len(texts) == 3:
            if all(word in _NEUTRAL for word in heading_words(texts[1])):
                yield f"{texts[0]} {texts[2]}", 0.98
            yield f"{texts[1]} {texts[2]}", 0.97
        if len(texts) > 1:
            above, below = " ".join(texts[:-1]), texts[-1]
            if self._stands_alone(above, below):
                yield below, 0.9
            if not levels.spread:
                yield above, 0.9
                if len(texts) == 3:
                    yield texts[0], 0.9
        for text in dict.fromkeys((levels.joined, *(texts if len(texts) > 1 and not levels.spread else ()))):
            pieces = [piece for piece in _PARTS.split(text) if piece.strip()]
            if len(pieces) > 1:
                for piece in pieces[:4]:
                    yield piece, 0.92
            bracket = _BRACKET.search(text)
            if bracket:
                outside = f"{text[: bracket.start()]} {text[bracket.end() :]}"
                if outside.strip():
                    yield outside, 0.93
                yield bracket[1], 0.88

    def _stands_alone(self, above: str, below: str) -> bool:
        words, over = heading_words(below), heading_words(above)
        if all(word in _NEUTRAL for word in over):
            return True
        if words in (("ll",), ("hh",), ("l",), ("h",)):
            return bool({"alarm", "setting", "setpoint", "limit", "trip", "set"} & set(over))
        if words and all(word in _DEPENDENT for word in words):
            fields = {column.field for _, _, column in self.names.find(words)}
            return any(column.field in fields for _, _, column in self.names.find(over))
        return True


# --- what the contents say ------------------------------------------------------------------------------------------

_NUMBER: Final = re.compile(r"[<>≤≥~≈±+\-−–(]{0,3}\s?(?:\d|[.,]\d)")
_ONE_NUMBER: Final = re.compile(
    r"[<>≤≥~≈±+\-−–(]{0,3}\s?(?:\d[\d.,' ]{0,15}|[.,]\d{1,8})(?:e[+-]?\d{1,3})?\)?\s?(?:[^\d\s].{0,20})?", re.IGNORECASE
)
_TWO_NUMBERS: Final = re.compile(
    r"\(?[+\-−–]?\s?[\d.,]{1,12}\s?[^\d\s]{0,8}?\s?(?:-|–|—|−|to|bis|\.{2,3}|…|~|÷|/|thru|through|and|\|)\s?[+\-−–]?\s?[.,]?\d.{0,30}",
    re.IGNORECASE,
)
_KEYWORD: Final = re.compile(r"amb(?:ient)?|atm|fv|full vac(?:uum)?|vac(?:uum)?", re.IGNORECASE)
_NUMBER_AND_WORDS: Final = re.compile(r"[+\-]?[\d.,]{1,12}\s?[^\d\s]{0,12}(?:\s[^\d\s]{1,12}){0,2}")
_TAG_LIKE: Final = re.compile(
    r"[\W_]{0,2}[0-9]{0,4}[\W_]?[A-Za-zА-яΑ-ω]{1,24}[A-Za-z0-9А-яΑ-ω._/\\ \-–‑−()+*~:=,&]{0,40}"
)
_IO_WORD: Final = re.compile(
    r"(?:h?(?:[ad][io]|p[io]|r?tdi?|rtd|tc|ff|pa|bus|hart|soft|serial|analog(?:ue)?[ -]?(?:in|out)(?:put)?|"
    r"digital[ -]?(?:in|out)(?:put)?|discrete[ -]?(?:in|out)(?:put)?|ae|aa|be|ba|de|da|uio|uai|eth(?:ernet)?|modbus|"
    r"pulse))"
    r"(?:[ \-]?(?:is|hart|ex|nis|s|sis|4-20.{0,8}))?(?:\s?[/+,&]\s?[a-z]{2,4}){0,3}",
    re.IGNORECASE,
)
_SIGNAL: Final = re.compile(
    r"(?i)(?:m\s?a\b|hart|contact|\bvfc\b|volt[ -]?free|pt ?-?\s?1?00|thermocouple|\btype [kjtnrsbe]\b|pulse|modbus|"
    r"fieldbus|profibus|foundation|\d\s?v(?:dc|ac)?\b|namur|relay|solenoid|dry|potential[ -]?free|\brtd\b|"
    r"\bt/?c\b|rs-?485|psi|bar\b|pneumatic|frequency|\bhz\b|binary|\bff\b|\bpa\b|digital|analog|npn|pnp|prox|potential)"
)
_AREA_CLASS: Final = re.compile(
    r"(?i)(?:zone|\bz ?[012]{1,2}\b|\bcl(?:ass)?\.? ?i|\bdiv|safe|non[- ]?haz|unclass|haz|^n/?a$|^none$|\bex\b|"
    r"^(?:0|1|2|20|21|22)$|^ii[abc]|general purpose|^nh$|^\W{0,2}z[012])"
)
_DOCUMENT: Final = re.compile(r"(?=.*\d)[\w.\-/&() ]{4,60}")
_CODE_LIKE: Final = re.compile(r"(?=.*[A-Za-z])(?=.*\d)[\w.\-/+*]{2,30}")


class _Contents:
    """The cells below a heading, and how far they fit a field."""

    def __init__(self, sheet: Sheet, index: int, first_row: int, heading: str) -> None:
        heading = folded(heading)
        cells = (
            (number, row[index])
            for number, row in enumerate(islice(sheet.rows, first_row, None), start=first_row)
            if row[index] is not None
        )
        texts: list[str] = []
        numbers = 0
        sequence = True
        last = 0.0
        self.filled = False
        for number, cell in islice(cells, SAMPLE):
            self.filled = True
            if isinstance(cell, float) and not isinstance(cell, bool):
                numbers += 1
                text = as_text(cell, sheet.number_formats.get((number, index)))
                sequence = sequence and cell == int(cell) and last < cell <= last + 25 if abs(cell) < 1e9 else False
                last = cell
            else:
                text = as_text(cell).strip()
                if text.isdecimal() and len(text) < 7:
                    sequence = sequence and last < int(text) <= last + 25
                    last = float(text)
                elif folded(text) == heading or placeholder(text) or is_ditto(text):
                    continue
                elif len(text) < 40:
                    sequence = sequence and not any(sign.isdigit() for sign in text)
            texts.append(text)
        self.texts = texts
        self.count = len(texts)
        self.numbers = numbers
        self.sequence = sequence and last > 0 and bool(texts)
        self._fits: dict[int, float] = {}

    def part(self, pattern: re.Pattern[str]) -> float:
        """Return the part of the cells that a pattern fits whole."""
        return sum(pattern.fullmatch(text) is not None for text in self.texts) / self.count if self.count else 0.0

    def holds(self, pattern: re.Pattern[str]) -> float:
        """Return the part of the cells that hold a pattern."""
        return sum(pattern.search(text) is not None for text in self.texts) / self.count if self.count else 0.0

    def units(self) -> float:
        """Return the part of the cells that are units; of the different texts, where that is more."""
        if not self.count:
            return 0.0
        known = {text: unit_in(text) is not None for text in set(self.texts)}
        by_row = sum(known[text] for text in self.texts) / self.count
        return max(by_row, sum(known.values()) / len(known))

    def in_words(self, words: Mapping[str, tuple[str, ...]]) -> float:
        """Return the part of the cells that are of a closed set of words."""
        read = Words(words)
        known = {text: len(read.find(text)) == 1 for text in set(self.texts)}
        return sum(known[text] for text in self.texts) / self.count if self.count else 0.0

    def fit(self, column: Column, codes: frozenset[str]) -> float:
        """Return how far the cells fit a column, 0 to 1; 0.6 where there are none to judge by."""
        if not self.count:
            return 0.6
        # By the column and not its field: two kinds of sheet may read one field name in two ways.
        known = self._fits.get(id(column))
        if known is None:
            known = self._fits[id(column)] = self._fit(column, codes)
        return known

    def _fit(self, column: Column, codes: frozenset[str]) -> float:
        reads = column.reads
        if reads is Reads.TAG:
            return 0.0 if self.sequence else self._tags()
        if reads is Reads.KIND:
            known = {text: kind_from_words(text) is not None for text in set(self.texts)}
            part = sum(known[text] for text in self.texts) / self.count
            return part if self.part(_IO_WORD) < 0.5 else 0.0
        if reads is Reads.UNIT:
            return self.units()
        if reads in (Reads.QUANTITY, Reads.NUMBER, Reads.COUNT):
            if self.part(_TWO_NUMBERS) > 0.5:
                return 0.2
            return (
                max(self.part(_ONE_NUMBER), self.part(_NUMBER_AND_WORDS))
                if not self.sequence or self.count < 8
                else 0.5
            )
        if reads is Reads.RANGE:
            return self.part(_TWO_NUMBERS)
        if reads is Reads.TRIPLET:
            return (
                sum(_NUMBER.match(text) is not None or _KEYWORD.fullmatch(text) is not None for text in self.texts)
                / self.count
            )
        if reads is Reads.WORD:
            return self.in_words(column.words)
        if reads is Reads.YES_NO:
            return sum(yes_or_no(text) is not None for text in self.texts) / self.count
        return self._text_fit(column.field, codes)

    def _tags(self) -> float:
        good = 0.0
        for text in self.texts:
            if _NUMBER_AND_WORDS.fullmatch(text) or _TWO_NUMBERS.fullmatch(text):
                # A whole number may be a tag that lost its letters to a column of its own.
                continue
            if _TAG_LIKE.fullmatch(text) and text.count(" ") <= 4:
                digits = any(sign.isdigit() for sign in text)
                good += 1.0 if digits else 0.55 if " " not in text else 0.1
        return good / self.count

    def _text_fit(self, name: str, codes: frozenset[str]) -> float:
        if name == "io_type":
            return self.part(_IO_WORD)
        if name == "signal":
            return max(self.holds(_SIGNAL), 0.4 * (1 - self.part(_IO_WORD)))
        if name in ("area_classification", "process_zone"):
            return self.holds(_AREA_CLASS)
        if name == "area":
            listed = sum(folded(text) in codes for text in self.texts) / self.count
            return max(listed, 0.6 * (1 - self.holds(_AREA_CLASS)))
        if name == "device_type":
            listed = sum(folded(text) in codes for text in self.texts) / self.count
            return listed if codes else 0.3 * self.part(_CODE_LIKE)
        if name == "model":
            return 0.3 + 0.3 * self.part(_CODE_LIKE)
        if name in ("equipment", "line"):
            return 0.0 if self.sequence else 0.3 if self.numbers == self.count else 0.7
        if name == "pid":
            return 0.3 + 0.5 * self.part(_DOCUMENT)
        if name == "unit":
            return 0.7 * (1 - self.units())
        if name == "place":
            return 0.5
        if name in ("service", "description", "remarks"):
            spaced = sum(" " in text for text in self.texts) / self.count
            return 0.2 if self.numbers == self.count else 0.5 + 0.4 * spaced
        if name == "revision":
            return sum(len(text) <= 6 for text in self.texts) / self.count
        if name in ("ex_marking", "certificate", "protection"):
            return 0.1 if self.numbers == self.count else 0.6
        if name == "conductor":
            return 0.6
        return 0.25 if self.numbers == self.count and name in _NEVER_NUMBERS else 0.6


_NEVER_NUMBERS: Final = frozenset((
    "fluid", "maker", "phase", "scope", "status", "signal", "service", "junction_box", "kind",
))  # fmt: skip


# --- the heading of one sheet ---------------------------------------------------------------------------------------


def match_sheet(
    sheet: Sheet,
    kinds: Sequence[SheetKind],
    *,
    forced: SheetKind | None = None,
    codes: frozenset[str] = frozenset(),
) -> SheetMatch | None:
    """Find the heading of a sheet, what kind of sheet it is, and which column is which field.

    Parameters
    ----------
    sheet
        The sheet as read.
    kinds
        The kinds of sheet that are known.
    forced
        The kind that it is, where that is known otherwise; None to find out.
    codes
        Codes of device types and areas that other sheets list, case-folded: by them a column is
        known for one of such codes.

    Returns
    -------
    SheetMatch or None
        None where no row of the sheet is a heading of any kind.
    """
    wanted = [forced] if forced is not None else list(kinds)
    finders = [_Finder(kind) for kind in wanted]
    listed = _field_and_value(sheet, wanted)
    best: SheetMatch | None = None
    contents: dict[tuple[int, int, str], _Contents] = {}
    for tried, (top, bottom) in enumerate(_blocks(sheet, finders), start=1):
        levels = _levels(sheet, top, bottom)
        found = [
            match
            for finder in finders
            if (match := _assign(sheet, finder, levels, top, bottom, codes=codes, contents=contents)) is not None
        ]
        chosen = _choose(sheet, found, top)
        if chosen is not None and (best is None or chosen.score > best.score):
            best = chosen
        if (tried >= 4 and best is not None) or tried >= 12:
            break
    if listed is not None and (best is None or listed.score >= best.score):
        return listed
    return best


def _rows_to_look_at(sheet: Sheet) -> Iterator[tuple[int, dict[int, str]]]:
    for number, row in enumerate(islice(sheet.rows, LOOKED_AT_ROWS)):
        texts = {index: cell for index, cell in enumerate(row) if isinstance(cell, str) and len(cell) <= 120}
        if texts:
            yield number, texts


def _blocks(sheet: Sheet, finders: Sequence[_Finder]) -> list[tuple[int, int]]:
    """Return the rows that may be a heading, first and last, the likeliest first."""
    hits: dict[int, int] = {}
    known: dict[str, bool] = {}
    for number, texts in _rows_to_look_at(sheet):
        count = 0
        for text in texts.values():
            hit = known.get(text)
            if hit is None:
                hit = known[text] = _is_heading_text(text, finders)
            count += hit
        if count:
            hits[number] = count
    best_rows = sorted(hits, key=lambda row: (-hits[row], row))[:5]
    scored: dict[tuple[int, int], float] = {}
    for row in best_rows:
        for top, bottom in (
            (row, row),
            (row - 1, row),
            (row, row + 1),
            (row - 2, row),
            (row - 1, row + 1),
            (row, row + 2),
        ):
            if top < 0 or bottom >= len(sheet.rows) or (top, bottom) in scored:
                continue
            if any(not any(cell is not None for cell in sheet.rows[each]) for each in range(top, bottom + 1)):
                continue
            scored[top, bottom] = _name_score(sheet, finders, top, bottom)
    # Of equals the shorter, then the higher: a repeated heading further down is no better.
    order = sorted(scored, key=lambda block: (-scored[block], block[1] - block[0], block[0]))
    return [block for block in order if scored[block] > 0]


def _is_heading_text(text: str, finders: Sequence[_Finder]) -> bool:
    """Whether a text, with or without what is in its brackets or behind its comma, is a heading of any kind."""
    for each in dict.fromkeys((text, _BRACKET.sub(" ", text), text.partition(",")[0])):
        words = heading_words(each)
        if words and (words in _GENERIC_UNITS or any(finder.names.knows(words) for finder in finders)):
            return True
    return False


def _name_score(sheet: Sheet, finders: Sequence[_Finder], top: int, bottom: int) -> float:
    levels = _levels(sheet, top, bottom)
    best = 0.0
    for finder in finders:
        taken: dict[str, float] = {}
        for each in levels.values():
            for candidate in finder.candidates(each):
                if candidate.how == "synonym":
                    name = candidate.column.field
                    if candidate.strength > taken.get(name, 0.0):
                        taken[name] = candidate.strength
                    break
        fields = {name for column in finder.kind.columns if column.field in taken for name in _fills(column)}
        keyed = any(all(name in fields for name in key) for key in finder.kind.key)
        best = max(best, sum(taken.values()) + (2.0 if keyed else 0.0))
    numbers = sum(isinstance(cell, float) for row in range(top, bottom + 1) for cell in sheet.rows[row])
    return best - 0.5 * numbers - 0.05 * (bottom - top)


def _levels(sheet: Sheet, top: int, bottom: int) -> dict[int, _Levels]:
    """Return the heading of each column in the rows from `top` to `bottom`."""
    rows = range(top, bottom + 1)
    width = sheet.width
    texts = [[as_text(cell).strip() or None for cell in sheet.rows[row]] for row in rows]
    spread: list[list[bool]] = [[False] * width for _ in rows]
    across: set[tuple[int, int]] = set()
    for first_row, first_column, last_row, last_column in sheet.merged:
        if first_row < top or first_row > bottom:
            continue
        for row in range(first_row, min(last_row, bottom) + 1):
            for column in range(first_column, min(last_column, width - 1) + 1):
                across.add((row, column))
        # A title across the whole sheet is over nothing in particular.
        if last_column > first_column and last_column - first_column + 1 < max(width - 1, 2):
            text = texts[first_row - top][first_column]
            for column in range(first_column, min(last_column, width - 1) + 1):
                texts[first_row - top][column] = text
                spread[first_row - top][column] = True
    for at, row in enumerate(rows):
        if row == bottom:
            continue
        filled = [column for column in range(width) if sheet.rows[row][column] is not None]
        if len(filled) < 2 and top == bottom:
            continue
        if _is_title_row(texts[at]):
            continue
        over: str | None = None
        for column in range(width):
            below = any(texts[lower - top][column] for lower in range(row + 1, bottom + 1))
            if texts[at][column]:
                over = texts[at][column] if below and len(filled) > 1 else None
                if over and not spread[at][column]:
                    beside = column + 1 < width and not texts[at][column + 1] and (row, column + 1) not in across
                    spread[at][column] = beside and any(
                        texts[lower - top][column + 1] for lower in range(row + 1, bottom + 1) if column + 1 < width
                    )
            elif over and below and (row, column) not in across:
                texts[at][column] = over
                spread[at][column] = True
            else:
                over = None
    found: dict[int, _Levels] = {}
    for column in range(width):
        kept: list[str] = []
        for at in range(len(texts)):
            text = texts[at][column]
            if text and (not kept or folded(kept[-1]) != folded(text)):
                kept.append(text)
        if kept:
            found[column] = _Levels(tuple(kept), len(kept) > 1 and any(each[column] for each in spread[:-1]))
    if top > 0 and top == bottom:
        _leave_to_parents(sheet, top, found)
    return found


def _is_title_row(texts: Sequence[str | None]) -> bool:
    filled = [text for text in texts if text]
    return (any(_TITLE_WORDS.search(folded(text)) for text in filled if len(text) < 30) and len(filled) <= 6) or len(
        filled
    ) == 1


def _leave_to_parents(sheet: Sheet, top: int, found: dict[int, _Levels]) -> None:
    """Take out headings that mean nothing without the row above, where that row is a heading too."""
    above = [as_text(cell).strip() or None if cell is not None else None for cell in sheet.rows[top - 1]]
    if sum(text is not None for text in above) < 2 or _is_title_row(above):
        return
    over: str | None = None
    for column, text in enumerate(above):
        if text:
            over = text
        elif column not in found:
            over = None
        if over and column in found:
            words = heading_words(found[column].joined)
            if (
                words
                and all(word in _DEPENDENT for word in words)
                and not all(word in _NEUTRAL for word in heading_words(over))
            ):
                found[column] = _Levels((f"{over} {found[column].joined}",))


# --- which heading is which field -----------------------------------------------------------------------------------


def _fills(column: Column) -> tuple[str, ...]:
    return column.into if column.into else (column.field,)


def _occupies(column: Column) -> tuple[str, ...]:
    # A column of three may stand beside one for the maximum: the single one is the surer.
    return (column.field,) if column.reads is Reads.TRIPLET else _fills(column)


def _assign(
    sheet: Sheet,
    finder: _Finder,
    levels: Mapping[int, _Levels],
    top: int,
    bottom: int,
    *,
    codes: frozenset[str],
    contents: dict[tuple[int, int, str], _Contents],
) -> SheetMatch | None:
    """Give each heading its field, the surest first; None where the sheet is not of this kind."""
    kind = finder.kind
    header_rows, first_row, units = _rows_below(sheet, finder, levels, top, bottom)

    def content(index: int) -> _Contents:
        heading = levels[index].texts[-1] if index in levels else ""
        found = contents.get((index, first_row, heading))
        if found is None:
            found = contents[index, first_row, heading] = _Contents(sheet, index, first_row, heading)
        return found

    offers: list[tuple[float, int, _Candidate, float, bool]] = []
    for index, heading in levels.items():
        candidates = finder.candidates_or_alike(heading)
        if not candidates:
            continue
        several = sum(candidate.how == "synonym" for candidate in candidates) > 1
        for candidate in candidates:
            cells = content(index)
            fit = cells.fit(candidate.column, codes)
            if not _believed(candidate, cells, fit, several):
                continue
            offers.append((candidate.strength * (0.5 + 0.5 * fit), index, candidate, fit, several))
    offers.sort(key=lambda offer: (-offer[0], offer[1]))
    columns: dict[str, ColumnMatch] = {}
    taken: set[str] = set()
    used: set[int] = set()
    notes: list[str] = []
    _match_pairs(kind, levels, content, columns, used)
    taken.update(columns)
    for _, index, candidate, _, several in offers:
        column = candidate.column
        if index in used or taken.intersection(_occupies(column)) or column.field in columns:
            continue
        columns[column.field] = ColumnMatch(
            column=column,
            index=index,
            heading=levels[index].joined,
            how="contents" if several and candidate.how == "synonym" else candidate.how,
            likelihood=round(min(1.0, candidate.strength), 3),
            unit=candidate.unit,
            unit_text=candidate.unit_text,
            only=_only(column, levels[index]),
        )
        taken.update(_occupies(column))
        used.add(index)
        if candidate.how == "likeness":
            notes.append(f"heading '{levels[index].joined}' is taken for {column.title} by likeness")
    _add_tag_without_heading(kind, levels, content, columns, used, sheet.width, notes)
    unit_columns = _place_units(kind, levels, content, columns, used, taken)
    _join_parts(kind, levels, content, columns, used)
    for index, text in units.items():
        for name, match in columns.items():
            if match.index == index and not match.unit_text:
                stated = unit_for(match.column, text)
                if stated is not None:
                    columns[name] = replace(match, unit=stated if isinstance(stated, Unit) else None, unit_text=text)
    fields = {name for match in columns.values() for name in _fills(match.column)} | set(columns)
    if not any(all(name in fields for name in key) for key in kind.key):
        return None
    if "tag" in columns and len(columns) == 1 and content(columns["tag"].index).fit(columns["tag"].column, codes) < 0.5:
        return None
    speaking = {index for index, _ in unit_columns} | {index for match in columns.values() for index, _ in match.parts}
    unknown = [(index, levels[index].joined) for index in levels if index not in used and index not in speaking]
    score = sum(match.likelihood * (1.0 if content(match.index).filled else 0.3) for match in columns.values())
    return SheetMatch(
        kind=kind,
        header_rows=header_rows,
        first_row=first_row,
        columns=columns,
        unknown=tuple(_numbered(sorted(unknown), [match.heading for match in columns.values()])),
        unit_columns=tuple(sorted(unit_columns)),
        notes=tuple(notes),
        score=score,
    )


_SPEAKS_OF: Final = {"flow": "F", "flowrate": "F", "durchfluss": "F", "level": "L", "fuellstand": "L"}


def _only(column: Column, heading: _Levels) -> str:
    """The first letter of the tags that a column of operating values speaks of, where its heading names a variable."""
    if not column.field.startswith("operating_value"):
        return ""
    return next((_SPEAKS_OF[word] for word in heading_words(heading.joined) if word in _SPEAKS_OF), "")


# Two values in one cell: what the heading says beside pressure and temperature.
_PAIRED: Final = {
    "design": ("design_pressure", "design_temperature"),
    "operating": ("operating_pressure_normal", "operating_temperature_normal"),
}
_TWO_VALUES: Final = re.compile(r"[^/|\n;]{1,20}[/|\n;][^/|\n;]{1,20}")
_PRESSURE_WORDS: Final = frozenset({"pressure", "p"})
_TEMPERATURE_WORDS: Final = frozenset({"temperature", "t"})


def _match_pairs(
    kind: SheetKind,
    levels: Mapping[int, _Levels],
    content: Callable[[int], _Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
) -> None:
    """Find the columns that hold a pressure and a temperature in each cell: Design P/T (barg / degC)."""
    known = {column.field: column for column in kind.columns}
    for index, heading in levels.items():
        text = _BRACKET.sub(" ", heading.joined)
        words = heading_words(text)
        if not (_PRESSURE_WORDS.intersection(words) and _TEMPERATURE_WORDS.intersection(words)):
            continue
        names = next((_PAIRED[word] for word in words if word in _PAIRED), None)
        if names is None or any(name not in known or name in columns for name in names):
            continue
        if content(index).part(_TWO_VALUES) < 0.5:
            continue
        bracket = _BRACKET.search(heading.joined)
        units = [piece.strip() for piece in re.split(r"[/|,;]", bracket[1])] if bracket else []
        first = next(word for word in words if word in _PRESSURE_WORDS or word in _TEMPERATURE_WORDS)
        for place, name in enumerate(names if first in _PRESSURE_WORDS else names[::-1]):
            stated = unit_for(known[name], units[place]) if len(units) == 2 else None
            columns[name] = ColumnMatch(
                column=known[name],
                index=index,
                heading=heading.joined,
                likelihood=0.9,
                unit=stated if isinstance(stated, Unit) else None,
                unit_text=units[place] if stated is not None else "",
                piece=(place, 2),
            )
        used.add(index)


def _believed(candidate: _Candidate, cells: _Contents, fit: float, several: bool) -> bool:
    if candidate.how == "likeness":
        return cells.count > 0 and fit >= 0.5
    if not cells.count:
        return True
    if candidate.column.reads is Reads.TAG and cells.sequence:
        return False
    if candidate.weak or several:
        return fit >= 0.25
    if candidate.column.reads in _NUMERIC and candidate.column.reads is not Reads.RANGE:
        return fit > 0 or any(any(sign.isdigit() for sign in text) for text in cells.texts) or cells.count < 4
    return True


def _numbered(unknown: Iterable[tuple[int, str]], known: Iterable[str]) -> Iterator[tuple[int, str]]:
    """Give headings that stand twice a number: Rev, Rev (2)."""
    seen: dict[str, int] = {}
    for heading in known:
        seen[folded(heading)] = seen.get(folded(heading), 0) + 1
    for index, heading in unknown:
        count = seen[folded(heading)] = seen.get(folded(heading), 0) + 1
        yield index, heading if count == 1 else f"{heading} ({count})"


def _add_tag_without_heading(
    kind: SheetKind,
    levels: Mapping[int, _Levels],
    content: Callable[[int], _Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
    width: int,
    notes: list[str],
) -> None:
    """Take the column that holds tags for the tag column where no heading names it."""
    if "tag" in columns or not any(key == ("tag",) for key in kind.key) or len(columns) < 2:
        return
    column = kind.column("tag")
    if _join_tag(column, levels, content, columns, used, width, notes):
        return
    best: tuple[float, int] | None = None
    for index in range(width):
        if index in used:
            continue
        cells = content(index)
        if cells.count < 2:
            continue
        digits = sum(any(sign.isdigit() for sign in text) and " " not in text for text in cells.texts) / cells.count
        different = len(set(cells.texts)) / cells.count
        fit = cells.fit(column, frozenset())
        if fit >= 0.8 and digits >= 0.7 and different >= 0.8 and (best is None or fit > best[0]):
            best = (fit, index)
    if best is not None:
        heading = levels[best[1]].joined if best[1] in levels else ""
        columns["tag"] = ColumnMatch(column=column, index=best[1], heading=heading, how="contents", likelihood=0.6)
        used.add(best[1])
        notes.append(f"column '{heading}' is taken for the tag: its cells look like tags")


_LETTERS_ONLY: Final = re.compile(r"[A-Z]{1,6}")
_NUMBER_ONLY: Final = re.compile(r"[0-9]{1,6}[A-Z]?")
_SUFFIX_ONLY: Final = re.compile(r"[A-Z]{1,2}[0-9]?|[0-9]{1,2}")


def _join_tag(
    column: Column,
    levels: Mapping[int, _Levels],
    content: Callable[[int], _Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
    width: int,
    notes: list[str],
) -> bool:
    """Join a tag that stands in columns of its own: letters, number and suffix."""
    for index in range(width - 1):
        letters, number = content(index), content(index + 1)
        if letters.count < 2 or number.count < 2 or index not in levels or index + 1 not in levels:
            continue
        if letters.part(_LETTERS_ONLY) < 0.9 or number.part(_NUMBER_ONLY) < 0.9:
            continue
        if sum(text[:1] in _TAG_FIRST for text in letters.texts) < 0.8 * letters.count or letters.part(_IO_WORD) > 0.5:
            continue
        parts = [(index + 1, "-")]
        suffix = content(index + 2) if index + 2 < width else None
        if (
            suffix is not None
            and suffix.count
            and suffix.part(_SUFFIX_ONLY) > 0.9
            and heading_words(levels[index + 2].joined if index + 2 in levels else "")[:1]
            in (("suffix",), ("sfx",), ("suf",), ("tag",))
        ):
            parts.append((index + 2, ""))
        heading = " ".join(levels[each].joined for each in (index, *(each for each, _ in parts)) if each in levels)
        columns["tag"] = ColumnMatch(
            column=column, index=index, heading=heading, how="contents", likelihood=0.7, parts=tuple(parts)
        )
        used.update((index, *(each for each, _ in parts)))
        notes.append(f"columns '{heading}' are joined to the tag")
        return True
    return False


_TAG_FIRST: Final = frozenset("ABEFHIJKLPQRSTUVWXYZCDGMN")

# --- rows that belong to the heading --------------------------------------------------------------------------------


def _rows_below(
    sheet: Sheet, finder: _Finder, levels: Mapping[int, _Levels], top: int, bottom: int
) -> tuple[tuple[int, ...], int, dict[int, str]]:
    """Return the heading's rows, the first row below, and the units of a unit row."""
    rows = list(range(top, bottom + 1))
    units: dict[int, str] = {}
    row = bottom + 1
    while row < len(sheet.rows) and len(rows) < 7:
        cells = {index: as_text(cell).strip() for index, cell in enumerate(sheet.rows[row]) if cell is not None}
        if not cells:
            # A blank line between the heading and its unit or numbering row.
            following = row + 1
            if following >= len(sheet.rows) or not _is_heading_more(
                {i: as_text(c).strip() for i, c in enumerate(sheet.rows[following]) if c is not None}, finder, levels
            ):
                break
            row = following
            continue
        more = _is_heading_more(cells, finder, levels)
        if more is None:
            break
        units.update(more)
        rows.append(row)
        row += 1
    return tuple(rows), rows[-1] + 1, units


def _is_heading_more(cells: Mapping[int, str], finder: _Finder, levels: Mapping[int, _Levels]) -> dict[int, str] | None:
    """Return the units of a row that still belongs to the heading; None where it is data."""
    numeric: dict[int, list[Column]] = {}
    tag_index = None
    for index, heading in levels.items():
        columns = [candidate.column for candidate in finder.candidates(heading)]
        numeric[index] = [column for column in columns if column.reads in _NUMERIC]
        if tag_index is None and any(column.reads is Reads.TAG for column in columns):
            tag_index = index
    texts = list(cells.values())
    if len(texts) >= 3 and (
        [text.strip("()[].") for text in texts] == [str(number) for number in range(1, len(texts) + 1)]
        or [text.strip("()[].").casefold() for text in texts]
        == [chr(97 + number) for number in range(min(26, len(texts)))]
    ):
        return {}
    units = {
        index: text.strip("()[] ")
        for index, text in cells.items()
        if not text.isdigit() and any(unit_for(column, text.strip("()[] ")) for column in numeric.get(index, ()))
    }
    idle = sum(placeholder(text) is not None or folded(text) in ("text", "unit", "units", "alpha") for text in texts)
    if units and len(units) + idle == len(cells) and (tag_index is None or tag_index not in cells or idle):
        return units
    same = 0
    for index, text in cells.items():
        if index not in levels:
            continue
        here = {each.column.field for each in finder.candidates(levels[index])}
        there = {each.column.field for each in finder.candidates(_Levels((text,))) if each.how == "synonym"}
        same += bool(here & there) and folded(text) not in YES_LIKE
    return {} if same >= 3 and same * 2 > len(cells) else None


YES_LIKE: Final = frozenset({"hart", "x", "no", "nc", "field", "system", "panel"})


# --- unit columns and columns that belong together ------------------------------------------------------------------


def _place_units(
    kind: SheetKind,
    levels: Mapping[int, _Levels],
    content: Callable[[int], _Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
    taken: set[str],
) -> list[tuple[int, str]]:
    """Find what each column headed Unit speaks for: its neighbours to the left, else to the right."""
    by_index = {match.index: match for match in columns.values()}
    beside: list[tuple[int, str]] = []
    known = {column.field: column for column in kind.columns}
    generic = [index for index, heading in sorted(levels.items()) if index not in used and _is_unit_heading(heading)]
    left_over: list[int] = []
    for index in generic:
        cells = content(index)
        if cells.count and cells.units() < 0.34:
            if "unit" in known and "unit" not in columns and heading_words(levels[index].joined) == ("unit",):
                columns["unit"] = ColumnMatch(
                    column=known["unit"], index=index, heading=levels[index].joined, how="contents", likelihood=0.9
                )
                used.add(index)
            continue
        group = _neighbours(index, -1, by_index) or _neighbours(index, 1, by_index)
        own_group = [match for match in group if not match.unit_text and match.unit_index is None]
        if not own_group:
            left_over.append(index)
            continue
        asked = [match.column.unit_from[0] for match in own_group if match.column.unit_from]
        name = "range_unit" if "range_unit" in asked else asked[0] if asked else ""
        if name and name in known and name not in columns:
            columns[name] = ColumnMatch(
                column=known[name], index=index, heading=levels[index].joined, how="synonym", likelihood=0.95
            )
            used.add(index)
        else:
            name = ""
        for match in own_group:
            if not name or (
                name not in match.column.unit_from
                and not (name == "range_unit" and "settings_unit" in match.column.unit_from)
            ):
                columns[match.field] = by_index[match.index] = replace(match, unit_index=index)
                if (index, levels[index].joined) not in beside:
                    beside.append((index, levels[index].joined))
    for index in left_over:
        if "range_unit" in known and "range_unit" not in columns:
            columns["range_unit"] = ColumnMatch(
                column=known["range_unit"], index=index, heading=levels[index].joined, how="synonym", likelihood=0.85
            )
            used.add(index)
    return [(index, heading) for index, heading in beside if index not in used]


def _is_unit_heading(heading: _Levels) -> bool:
    words = heading_words(heading.joined)
    return words in _GENERIC_UNITS or heading_words(heading.texts[-1]) in _GENERIC_UNITS


def _neighbours(index: int, step: int, by_index: Mapping[int, ColumnMatch]) -> list[ColumnMatch]:
    found: list[ColumnMatch] = []
    at = index + step
    while (
        (match := by_index.get(at)) is not None
        and match.column.reads in _NUMERIC
        and match.column.reads is not Reads.COUNT
    ):
        found.append(match)
        at += step
    return found


# The rest of a classification or marking in columns of its own: heading words, and what to write before a bare value.
_CLASS_PARTS: Final[tuple[tuple[str, str, tuple[str, ...]], ...]] = (
    ("class", "Class", ("class", "nec class", "hazard class")),
    ("division", "Div", ("division", "div")),
    (
        "group",
        "Group",
        (
            "gas group", "group", "explosion group", "explosionsgruppe", "gas gr", "gas grp", "gr", "ex group",
            "gas/dust group", "apparatus group", "equipment group", "dust group", "gasgruppe", "groupe",
        ),
    ),
    (
        "temperature",
        "",
        (
            "t class", "temperature class", "tclass", "temperaturklasse", "t code", "temp code", "t rating",
            "temp rating", "temperature code", "t-klasse", "temperature rating", "temp klasse",
        ),
    ),
    ("epl", "", ("epl", "equipment protection level")),
    ("ambient", "", ("marked ambient", "ta range", "tamb")),
)  # fmt: skip
_PART_WORDS: Final = {heading_words(text): (name, prefix) for name, prefix, texts in _CLASS_PARTS for text in texts}


def _join_parts(
    kind: SheetKind,
    levels: Mapping[int, _Levels],
    content: Callable[[int], _Contents],
    columns: dict[str, ColumnMatch],
    used: set[int],
) -> None:
    """Join gas group, temperature class and the like to the classification or the marking they stand beside."""
    known = {column.field: column for column in kind.columns}
    if "ex_marking" not in known:
        return
    for name in ("area_classification", "ex_marking", "protection"):
        match = columns.get(name)
        if match is not None and "zone" in heading_words(match.heading):
            columns[name] = replace(match, prefix="Zone")
        elif match is not None and heading_words(match.heading)[-1:] == ("class",):
            columns[name] = replace(match, prefix="Class")
    owners = {
        match.index: name
        for name, match in columns.items()
        if name in ("area_classification", "ex_marking", "protection")
    }
    for index in sorted(levels):
        if index in used:
            continue
        part = _part_of(levels[index])
        if part is None:
            continue
        over = heading_words(" ".join(levels[index].texts[:-1])) if len(levels[index].texts) > 1 else ()
        owner: str | None
        if {"area", "zone"} & set(over):
            owner = "area_classification" if "area_classification" in known else None
        elif {"ex", "device", "certificate", "marking", "protection", "atex", "equipment"} & set(over):
            owner = "ex_marking"
        else:
            left = [at for at in owners if at < index]
            owner = owners[max(left)] if left and index - max(left) <= 4 else None
            if owner is None and "area_classification" in known and part[0] in ("division", "group", "class"):
                owner = "area_classification" if "area_classification" not in columns else None
        if owner is None:
            continue
        name, prefix = part
        match = columns.get(owner)
        if match is None:
            columns[owner] = ColumnMatch(
                column=known[owner], index=index, heading=levels[index].joined, likelihood=0.9, prefix=prefix
            )
        else:
            columns[owner] = replace(match, parts=(*match.parts, (index, prefix)))
        owners[index] = owner
        used.add(index)


def _part_of(heading: _Levels) -> tuple[str, str] | None:
    for text in (heading.joined, heading.texts[-1]):
        words = heading_words(text)
        found = _PART_WORDS.get(words) or _PART_WORDS.get(
            tuple(word for word in words if word not in ("area", "hazardous", "ex"))
        )
        if found:
            return found
    return None


# --- which kind of sheet --------------------------------------------------------------------------------------------

# Names that nearly any sheet may bear.
_FAINT_NAMES: Final = frozenset((
    "list", "data", "index", "io", "class", "cable", "loop", "trip", "alarm", "area", "i/o", "types",
))  # fmt: skip


def _name_points(kind: SheetKind, text: str) -> float:
    """Return how far a name of a sheet or file says that it is of a kind."""
    plain = f" {' '.join(re.split(r'[^a-z0-9&]+', folded(text).replace('i/o', 'io')))} "
    best = 0.0
    for name in kind.names:
        words = " ".join(re.split(r"[^a-z0-9&]+", folded(name).replace("i/o", "io"))).strip()
        if words and (f" {words} " in plain or f" {words}s " in plain):
            best = max(best, 1.0 + 0.1 * len(words.split()) - (0.5 if name in _FAINT_NAMES else 0.0))
    return best


def _choose(sheet: Sheet, found: Sequence[SheetMatch], top: int) -> SheetMatch | None:
    if not found:
        return None
    title = " ".join(cell for row in sheet.rows[max(0, top - 12) : top] for cell in row if isinstance(cell, str))[:400]
    file_name = re.split(r"[\\/]", sheet.file)[-1].rpartition(".")[0]
    rated: list[tuple[float, float, SheetMatch]] = []
    for match in found:
        by_name = max(
            3.0 * _name_points(match.kind, sheet.name),
            1.5 * _name_points(match.kind, title),
            2.0 * _name_points(match.kind, file_name),
        )
        rated.append((match.score + by_name, by_name, match))
    rated.sort(key=lambda each: -each[0])
    _, _, best = rated[0]
    # The I/O list's and the alarm list's columns are the index's too: only the name, or having no other, tells.
    if best.kind.key == (("tag",),):
        others = [
            (by_name, match)
            for _, by_name, match in rated
            if match.kind is not best.kind and match.kind.record is best.kind.record
        ]
        own_name = next(by_name for _, by_name, match in rated if match is best)
        for by_name, match in sorted(others, key=lambda each: (-each[0], -each[1].score)):
            more = len(best.columns) - len(match.columns)
            if (by_name > own_name and more <= 12) or more <= 0:
                best = match
                break
    by_name = next(by_name for _, by_name, match in rated if match is best)
    score = next(score for score, _, match in rated if match is best)
    return replace(best, named=by_name >= 1.0, score=score)


def _field_and_value(sheet: Sheet, kinds: Sequence[SheetKind]) -> SheetMatch | None:
    """Return a match for a sheet that has a field and its value on each row."""
    for kind in kinds:
        if "thresholds" not in getattr(kind.record, "__dataclass_fields__", {}):
            continue
        names = _names(kind)
        known: set[str] = set()
        for row in sheet.rows[:LOOKED_AT_ROWS]:
            filled = [cell for cell in row if cell is not None]
            if filled and isinstance(filled[0], str) and len(filled) <= 4:
                for _, _, column in names.find(heading_words(filled[0].strip(" :="))):
                    known.add(column.field)
        named = max(
            _name_points(kind, sheet.name), _name_points(kind, re.split(r"[\\/]", sheet.file)[-1].rpartition(".")[0])
        )
        if len(known) >= (2 if named else 3) or (named and sheet.width <= 3 and known):
            return SheetMatch(
                kind=kind,
                header_rows=(),
                first_row=0,
                columns={},
                named=bool(named),
                score=len(known) + 3.0 * named,
                notes=("a field and its value on each row",),
            )
    return None
