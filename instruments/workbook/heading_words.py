"""The words of headings, and which columns of a kind of sheet a heading can mean by them."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from rapidfuzz import fuzz, process

from instruments.column import Column, Reads, SheetKind
from instruments.unit import Unit, read_unit
from instruments.workbook.column_unit import factor_to
from instruments.workbook.words import folded

__all__ = [
    "BRACKET",
    "DEPENDENT",
    "GENERIC_UNITS",
    "NEUTRAL",
    "NUMERIC",
    "Candidate",
    "Finder",
    "Levels",
    "heading_words",
    "names_of",
    "unit_for",
    "unit_in",
]

LIKE_ENOUGH: Final = 86.0
"""Likeness (0..100) from which a heading that is no synonym is taken for a misspelt one."""

# --- the words of a heading -----------------------------------------------------------------------------------------

_PHRASES: Final = tuple(
    (re.compile(pattern), f" {word} ")
    for pattern, word in (
        (r"\bp\s?(?:&|\+|and)\s?i\s?d\b", "pid"),
        (r"\bp\.\s?&?\s?i\.\s?d\b", "pid"),
        (r"\br\s?(?:&|\+|und)\s?i\b", "ri"),
        (r"\bi\s?/\s?o\b", "io"),
        (r"\be\s?/\s?a\b", "ea"),
        (r"\be\s?/\s?s\b", "io"),  # entrées/sorties, entradas/salidas
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
        "die", "das", "des", "und", "in", "at", "&", "numero", "n°", "du", "de", "et", "oder", "s",
    )
)  # fmt: skip
NEUTRAL: Final = frozenset(
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
    if len(words) == 1 and (parts := _parts_of(words[0])):
        words = list(parts)
    kept = [_one_word(word) for word in words if word not in _DROPPED]
    return tuple(kept or words)


# The abbreviations of which databases with eight letters to a name put their headings together: TAGNMBR, RNGELOW.
_GLUED: Final[Mapping[str, str]] = {
    spelling: word
    for word, spellings in {
        "tag": ("tag",),
        "number": ("numb", "nmbr", "nmb", "nbr", "num", "no", "nr", "number", "numbr"),
        "service": ("serv", "srvc", "svc", "service", "servc"),
        "description": ("desc", "descr", "dscr", "dsc", "descrip", "descrptn"),
        "instrument": ("inst", "instr", "ins", "instrmnt"),
        "type": ("type", "typ", "ty"),
        "loop": ("loop", "lp"),
        "pid": ("pid", "pandid", "pnid"),
        "line": ("line", "lin", "ln"),
        "equipment": ("eqpt", "eqp", "equip", "eqpmt", "equp"),
        "range": ("range", "rnge", "rng", "rang"),
        "calibrated": ("calib", "clb"),
        "min": ("min", "mini", "mn"),
        "max": ("max", "maxi", "mx"),
        "low": ("low", "lo", "lw"),
        "high": ("high", "hi", "hgh"),
        "ll": ("lolo", "lowlow"),
        "hh": ("hihi", "highhigh"),
        "engineering": ("eng", "engg"),
        "unit": ("unit", "units", "unts", "unt"),
        "normal": ("norm", "nrm", "normal", "nom"),
        "operating": ("oper", "opr", "op", "oprtg"),
        "design": ("design", "desgn", "dsgn", "des", "dsn"),
        "pressure": ("press", "pres", "prs", "prss"),
        "temperature": ("temp", "tmp", "tmpr"),
        "alarm": ("alarm", "alrm", "alm"),
        "trip": ("trip", "trp"),
        "setpoint": ("setpt", "stpt", "setp", "sp"),
        "signal": ("signl", "sgnl", "sgl", "sig", "signal", "sigl"),
        "io": ("io",),
        "address": ("addr", "addrss", "adrs", "adr", "addrs", "addres"),
        "card": ("card", "crd"),
        "channel": ("chan", "chnl", "chn"),
        "junction box": ("jb", "jbox", "jctbox"),
        "cable": ("cable", "cbl", "cabl"),
        "terminal": ("term", "trml", "trm"),
        "area": ("area", "ar"),
        "class": ("class", "clss", "cls"),
        "ex": ("ex",),
        "marking": ("mark", "markng", "mrkg", "marking"),
        "certificate": ("cert", "certif", "crt"),
        "revision": ("rev", "revn"),
        "remark": ("rmrk", "rmks", "remk", "rem", "remrk"),
        "manufacturer": ("mfr", "manf", "mfgr", "manuf"),
        "model": ("model", "modl", "mdl"),
        "serial": ("serl", "serial", "srl"),
        "location": ("locn", "loc", "locat"),
        "fluid": ("fluid", "fld", "flud"),
        "fail": ("fail", "fl"),
        "position": ("posn", "pos"),
        "supply": ("supp", "sply", "suppl"),
        "status": ("stat", "stts", "status", "stus"),
        "drawing": ("dwg", "drwg"),
    }.items()
    for spelling in spellings
}
_LONGEST_PART: Final = max(map(len, _GLUED))


def _parts_of(word: str) -> tuple[str, ...]:
    """Return the words of which one is put together, the fewest that make it; nothing where it is one of its own.

    >>> _parts_of("tagnumbr"), _parts_of("ioaddrss"), _parts_of("alrmhihi"), _parts_of("manometer")
    (('tag', 'number'), ('io', 'address'), ('alarm', 'hh'), ())
    """
    if not 5 <= len(word) <= 12 or not word.isalpha() or word in _GLUED or word in _ONE_WORD:
        return ()
    best: list[tuple[str, ...] | None] = [()] + [None] * len(word)
    for end in range(2, len(word) + 1):
        for start in range(max(0, end - _LONGEST_PART), end - 1):
            before, part = best[start], _GLUED.get(word[start:end])
            if before is None or part is None or len(before) == 3:
                continue
            known = best[end]
            if known is None or len(known) > len(before) + 1:
                best[end] = (*before, *part.split())
    found = best[-1] or ()
    return found if len(found) > 1 else ()


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
        "kanal", "ch", "typ", "signalart", "failure", "trip", "listing", "approval", "operating",
    )
)  # fmt: skip
# Headings that need the heading above them to mean anything.
DEPENDENT: Final = frozenset(
    (
        "min", "max", "normal", "unit", "low", "high", "from", "to", "type", "length", "size", "class", "group",
        "zone", "code", "temperature", "pressure", "set", "trip", "name", "description", "value", "eu", "uom",
        "von", "bis", "l", "h", "typ", "einheit", "setpoint", "tag", "address", "marking", "service", "material",
        "model",
    )
)  # fmt: skip
GENERIC_UNITS: Final = frozenset(
    heading_words(text)
    for text in (
        "unit", "e.u.", "uom", "engineering unit", "eng. units", "einheit", "unit of measure", "me", "unite",
        "dimension", "unit of measurement", "u/m", "measuring unit", "masseinheit", "einh.",
    )
)  # fmt: skip


# Set point high, high alarm setting, limit value HH: what stands beside the level says no more than it.
_ABOUT_SETTINGS: Final = frozenset({"setpoint", "setting", "alarm", "limit", "value", "point", "set", "annunciation"})
_SETTING_LEVELS: Final = frozenset({"ll", "l", "h", "hh", "low", "high"})


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
        self.words = frozenset(word for words in self.exact for word in words)
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
        rest = tuple(word for word in words if word not in NEUTRAL)
        if rest and rest != words:
            found = self.exact.get(rest) or self.loose.get(tuple(sorted(rest)))
            if found:
                return [(strength - 0.08, "synonym", column) for strength, column in found]
        levels = tuple(word for word in words if word not in _ABOUT_SETTINGS)
        if len(levels) == 1 < len(words) and levels[0] in _SETTING_LEVELS:
            return [(strength - 0.1, "synonym", column) for strength, column in self.exact.get(levels, ())]
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
                    if _qualifies_alike(like, text):
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


def _qualifies_alike(like: str, text: str) -> bool:
    """Whether two headings have the same qualifying words, or one has them misspelt."""
    words = text.split()
    stated = _QUALIFYING.intersection(words)
    wanted = _QUALIFYING.intersection(like.split())
    if stated - wanted:
        return False
    others = [word for word in words if word not in stated]
    return all(any(fuzz.ratio(word, other) >= 70 for other in others) for word in wanted - stated)


_NAMES: dict[int, tuple[SheetKind, _Names]] = {}


def names_of(kind: SheetKind) -> _Names:
    """Return the headings of a kind of sheet by their words, made once."""
    found = _NAMES.get(id(kind))
    if found is None or found[0] is not kind:
        found = _NAMES[id(kind)] = (kind, _Names(kind))
    return found[1]


# --- what a heading can be ------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Levels:
    """The texts of a heading from top to bottom; `spread` for a top that stands over several columns."""

    texts: tuple[str, ...]
    spread: bool = False

    @property
    def joined(self) -> str:
        """The whole heading."""
        return " ".join(" ".join(text.split()) for text in self.texts)


@dataclass(frozen=True, slots=True)
class Candidate:
    """A column that a heading may be: how surely, how it was found, and the unit that the heading states.

    `weak` for one everyday word, believed only where the contents fit.
    """

    strength: float
    how: str
    column: Column
    unit: Unit | None
    unit_text: str
    weak: bool


NUMERIC: Final = frozenset({Reads.QUANTITY, Reads.NUMBER, Reads.COUNT, Reads.RANGE, Reads.TRIPLET})
BRACKET: Final = re.compile(r"[(\[{<]([^()\[\]{}<>]{1,24})[)\]}>]")
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


MOST_CHARACTERS: Final = 1000
"""The longest heading, all its levels together; a cell holds 32,767, and every row may be a heading's."""

_NO_UNITS: Final = frozenset(["l", "h", "ll", "hh", "min", "max", "no", "in", "from", "to", "at"])


def _without_unit(text: str) -> Iterator[tuple[str, str]]:
    """Yield a heading without each piece that may be its unit: in brackets, behind a comma, at its end."""
    for found in BRACKET.finditer(text):
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
            inside = BRACKET.search(tail)
            # "bar (g)" is one unit, and "normal (m3/h)" a word and a unit.
            if inside is not None and count > 1 and unit_in(inside[1]) is not None and len(inside[1]) > 1:
                continue
            if tail.casefold() not in _NO_UNITS and len(tail) <= 20:
                yield " ".join(words[:-count]).rstrip(" ,;:-"), tail


# Headings that a heading in a language not known here does not change: Schaltpunkt over Set point.
_ALONE_UNDER_A_STRANGER: Final = frozenset({("setpoint",), ("tag",), ("description",), ("service",), ("model",)})
_OVER_SETTINGS: Final = frozenset(
    ("alarm", "setting", "setpoint", "limit", "trip", "set", "grenzwert", "grenzwerte", "alarme", "schaltpunkt",
     "schaltpunkte", "meldung", "meldungen", "seuil", "seuils", "interlock", "shutdown")
)  # fmt: skip


_LANGUAGES: Final = re.compile(r"\s/\s|\n")


class Finder:
    """Finds what the headings of a sheet can be, for one kind of sheet."""

    def __init__(self, kind: SheetKind) -> None:
        self.kind = kind
        self.names = names_of(kind)
        self._known: dict[Levels, tuple[Candidate, ...]] = {}

    def candidates(self, levels: Levels) -> tuple[Candidate, ...]:
        """Return what a heading may be by its words; a text longer than `MOST_CHARACTERS` is none."""
        if len(levels.joined) > MOST_CHARACTERS:
            return ()
        known = self._known.get(levels)
        if known is None:
            known = self._known[levels] = tuple(self._candidates(levels, alike=False))
        return known

    def candidates_or_alike(self, levels: Levels) -> tuple[Candidate, ...]:
        """Return what a heading may be by its words, else by likeness."""
        if len(levels.joined) > MOST_CHARACTERS:
            return ()
        return self.candidates(levels) or tuple(self._candidates(levels, alike=True))

    def unit_of(self, levels: Levels, column: Column) -> tuple[Unit | None, str]:
        """Return the unit that a heading states for a column, whatever else it says: the unit, and its text."""
        for each in self.candidates_or_alike(levels):
            if each.column is column:
                return each.unit, each.unit_text
        for _, text in _without_unit(levels.joined):
            stated = unit_for(column, text)
            if stated is not None:
                return stated if isinstance(stated, Unit) else None, text
        return None, ""

    def _candidates(self, levels: Levels, *, alike: bool) -> Iterable[Candidate]:
        best: dict[str, Candidate] = {}

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
                    best[column.field] = Candidate(
                        strength, how, column, stated if isinstance(stated, Unit) else None, unit_text or "", weak
                    )

        whole = levels.joined
        if alike and heading_words(levels.texts[-1]) in GENERIC_UNITS:
            return ()
        if alike:
            offer(self.names.like(heading_words(whole)), 1.0, None, True)
            for rest, unit in _without_unit(whole):
                offer(self.names.like(heading_words(rest)), 1.0, unit, True)
            return best.values()
        for text, factor in self._readings(levels):
            words = heading_words(text)
            if not words or words in GENERIC_UNITS:
                continue
            weak = words in _WEAK
            offer(self.names.find(words), factor * (0.7 if weak else 1.0), None, weak)
            for rest, unit in _without_unit(text):
                short = heading_words(rest)
                if short and short != words:
                    weak = short in _WEAK
                    offer(self.names.find(short), factor * (0.85 if weak else 1.0), unit, weak)
        return best.values()

    def _readings(self, levels: Levels) -> Iterator[tuple[str, float]]:
        """Yield the texts that a heading may be read as, the surest first."""
        texts = levels.texts
        yield levels.joined, 1.0
        if len(texts) == 3:
            if all(word in NEUTRAL for word in heading_words(texts[1])):
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
            # Two languages, which may have a stroke of their own: E/S / I/O address.
            languages = [piece for piece in _LANGUAGES.split(text) if len(piece.strip()) > 2]
            if len(languages) > 1:
                for piece in languages[:3]:
                    yield piece, 0.93
            # m3/h and I/O are no two headings.
            pieces = [piece for piece in _PARTS.split(text) if len(piece.strip()) > 2]
            if pieces != [text]:
                for piece in pieces[:4]:
                    yield piece, 0.92
            bracket = BRACKET.search(text)
            if bracket:
                outside = f"{text[: bracket.start()]} {text[bracket.end() :]}"
                if outside.strip():
                    yield outside, 0.93
                yield bracket[1], 0.88

    def _stands_alone(self, above: str, below: str) -> bool:
        words, over = heading_words(below), heading_words(above)
        if all(word in NEUTRAL for word in over):
            return True
        if words in (("ll",), ("hh",), ("l",), ("h",)):
            return bool(_OVER_SETTINGS & set(over))
        if words and all(word in DEPENDENT for word in words):
            if words in _ALONE_UNDER_A_STRANGER and not self.names.words & set(over):
                return True
            fields = {column.field for _, _, column in self.names.find(words)}
            return any(column.field in fields for _, _, column in self.names.find(over))
        return True
