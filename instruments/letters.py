"""Identification letters: what each may mean in which place, and the rules by which they follow each other.

The table and the rules are ISA-5.1 (2009 edition, with what the 1984 edition read otherwise), in own words;
clause numbers are not quoted because the standard itself was not at hand.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Literal

__all__ = [
    "KKS_FIRST",
    "LETTERS",
    "USERS_CHOICE",
    "LetterMeaning",
    "LettersReading",
    "is_usual",
    "letters_stem",
    "nearest_legal_letters",
    "read_letters",
    "read_users_letters",
]

Role = Literal["first", "modifier", "readout", "output", "function"]
Legality = Literal["legal", "ambiguous", "illegal"]


@dataclass(frozen=True, slots=True, kw_only=True)
class LetterMeaning:
    """One letter in one place, in the edition "1984", "2009" or "both"; a user's choice the plant defines."""

    letter: str
    role: Role
    words: str
    edition: str = "both"
    users_choice: bool = False


def _row(letter: str, roles: Mapping[Role, str]) -> Iterator[LetterMeaning]:
    for role, text in roles.items():
        words, _, edition = text.partition("@")
        yield LetterMeaning(
            letter=letter,
            role=role,
            words=words,
            edition=edition or "both",
            users_choice=words.startswith("user's choice"),
        )


# Behind an '@' stands the only edition that has the meaning.
_TABLE: Mapping[str, Mapping[Role, str]] = {
    "A": {"first": "analysis", "readout": "alarm"},
    "B": {"first": "burner/combustion", "readout": "user's choice B", "output": "user's choice B"},
    "C": {"first": "user's choice C", "output": "control", "function": "closed"},
    "D": {"first": "user's choice D", "modifier": "differential", "function": "deviation"},
    "E": {"first": "voltage", "readout": "element"},
    "F": {"first": "flow", "modifier": "ratio"},
    "G": {"first": "user's choice G", "readout": "gauge/glass"},
    "H": {"first": "hand", "function": "high"},
    "I": {"first": "current", "readout": "indicate"},
    "J": {"first": "power", "modifier": "scan@1984", "readout": "scan@2009"},
    "K": {"first": "time/schedule", "modifier": "time rate of change", "output": "control station"},
    "L": {"first": "level", "readout": "light", "function": "low"},
    "M": {"first": "user's choice M", "modifier": "momentary@1984", "function": "middle"},
    "N": {"first": "user's choice N", "readout": "user's choice N", "output": "user's choice N"},
    "O": {"first": "user's choice O", "readout": "orifice", "function": "open"},
    "P": {"first": "pressure", "readout": "test point"},
    "Q": {"first": "quantity", "modifier": "total", "readout": "totalise"},
    "R": {"first": "radiation", "readout": "record", "function": "run"},
    "S": {"first": "speed/frequency", "modifier": "safety", "output": "switch", "function": "stop"},
    "T": {"first": "temperature", "output": "transmit"},
    "U": {"first": "multivariable", "readout": "multifunction", "output": "multifunction"},
    "V": {"first": "vibration/mech. analysis", "output": "valve"},
    "W": {"first": "weight/force", "readout": "well/probe"},
    "X": {
        "first": "unclassified",
        "modifier": "x-axis",
        "readout": "unclassified",
        "output": "unclassified",
    },
    "Y": {"first": "event/state/presence", "modifier": "y-axis", "output": "relay/compute/convert"},
    "Z": {"first": "position/dimension", "modifier": "z-axis/SIS", "output": "actuator/driver"},
}

#: Every letter in every place it may stand, after ISA-5.1.
LETTERS: tuple[LetterMeaning, ...] = tuple(m for letter, roles in _TABLE.items() for m in _row(letter, roles))

#: First letters that mean nothing until the plant says what (ISA-5.1: user's choice).
USERS_CHOICE = frozenset(m.letter for m in LETTERS if m.role == "first" and m.users_choice)

#: First letters of the measuring circuits of KKS (VGB-B 105, from memory): CP pressure, CT temperature.
KKS_FIRST: Mapping[str, str] = {
    "CP": "P", "CT": "T", "CF": "F", "CL": "L", "CG": "Z", "CS": "S", "CY": "V", "CQ": "A", "CE": "E",
    "CK": "K", "CM": "M", "CW": "W", "CR": "R", "CD": "D", "CH": "H", "CU": "U",
}  # fmt: skip

_WORDS: Mapping[tuple[str, str], str] = {(m.role, m.letter): m.words for m in LETTERS}
_READOUTS = frozenset(m.letter for m in LETTERS if m.role == "readout")
_OUTPUTS = frozenset(m.letter for m in LETTERS if m.role == "output")
_FUNCTIONS = _READOUTS | _OUTPUTS
_USERS_FUNCTIONS = frozenset("BN")
# Nothing flows through a position or a state.
_HAS_NO_ORIFICE = frozenset("ZXYHSVKEIJ")
# High, low, middle, deviation follow a switch, alarm, light, indication or transmission;
# closed, open, run, stop follow a switch or a light directly (after I or T the same letters are functions).
_LEVELS = frozenset("HLMD")
_LEVELLED = frozenset("ASLIT")
_STATES = frozenset("CORS")
_STATED = frozenset("SL")
# An axis belongs to what moves. Elsewhere Y is a relay: FYI puts a readout after an output.
_HAS_AXES = frozenset("VZSWXU")
_MODIFIERS = frozenset("DFJKMQSXYZ")
_LONGEST = 5


@dataclass(frozen=True, slots=True, kw_only=True)
class LettersReading:
    """How a group of identification letters reads.

    ``functions`` are the succeeding letters, each with its function modifiers: LSHH has ("SHH",).
    ``problem`` says why the letters are illegal or which two readings there are; it is empty for legal ones.
    ``undefined`` is the first letter where it is a user's choice that the plant has not defined, else empty.
    """

    letters: str
    legal: Legality
    meaning: tuple[str, ...]
    first: str
    modifier: str
    functions: tuple[str, ...]
    problem: str
    undefined: str = ""
    too_long: bool = False

    @property
    def function_letters(self) -> frozenset[str]:
        """The function letters without their modifiers."""
        return frozenset(f[0] for f in self.functions)


@dataclass(slots=True)
class _Parse:
    modifiers: str
    functions: list[str]
    meaning: list[str]
    doubts: list[str]
    error: str = ""


def read_letters(letters: str, *, users_letters: Iterable[str] = frozenset(), edition: str = "2009") -> LettersReading:
    """Read identification letters by the table and the rules of succession.

    Parameters
    ----------
    letters
        The letters of one tag, such as "PDIT".
    users_letters
        First letters that are a user's choice and that the plant has defined.
    edition
        "2009" or "1984" (momentary and scan were modifiers then).

    Examples
    --------
    >>> read_letters("PDIT").meaning
    ('pressure', 'differential(mod)', 'indicate', 'transmit')
    >>> read_letters("FTIC").problem
    'readout I after output letter'
    >>> read_letters("ZIC").legal
    'ambiguous'
    """
    return _read_letters(letters.upper(), frozenset(users_letters), edition)


@lru_cache(maxsize=16384)
def _read_letters(letters: str, users_letters: frozenset[str], edition: str) -> LettersReading:
    # DIN 19227 writes + for high and - for low behind the functions (from memory).
    plain = letters.replace("+", "H").replace("-", "L")
    if not re.fullmatch(r"[A-Z]{1,12}", plain):
        return _reading(letters, "illegal", None, f"{letters or 'nothing'} is not a group of letters")
    undefined = plain[0] if plain[0] in USERS_CHOICE and plain[0] not in users_letters else ""
    if len(plain) == 1:
        return _reading(letters, "illegal", None, "no function letter", undefined=undefined)
    parses = list(_parses(plain, edition))
    good = [p for p in parses if not p.error]
    if not good:
        # The reading without modifier names the letter that breaks the order; the others only echo it.
        return _reading(letters, "illegal", parses[-1], parses[-1].error, undefined=undefined)
    best = min(good, key=lambda p: len(p.doubts))
    doubts = list(best.doubts)
    if re.fullmatch(r"LL[HLMD]*", plain):
        doubts.append("parses as level light; usually a typo for LSLL/LALL")
    return _reading(
        letters,
        "ambiguous" if doubts else "legal",
        best,
        "; ".join(doubts),
        undefined=undefined,
    )


def _reading(
    letters: str, legal: Legality, parse: _Parse | None, problem: str, *, undefined: str = ""
) -> LettersReading:
    first = letters[:1]
    words = _WORDS.get(("first", first), "")
    return LettersReading(
        letters=letters,
        legal=legal,
        meaning=((words, *parse.meaning) if parse else (words,)) if words else (),
        first=first,
        modifier=parse.modifiers if parse else "",
        functions=tuple(parse.functions) if parse else (),
        problem=problem,
        undefined=undefined,
        too_long=len(letters) > _LONGEST,
    )


def _parses(letters: str, edition: str) -> Iterator[_Parse]:
    """Every way to part the letters into modifiers and functions, the one without modifiers last."""
    first, rest = letters[0], letters[1:]
    # Beside a ratio, a total or a difference the S of a relief valve and the Z of a safety system stand as a
    # second modifier: PDSV, PDZT. Common practice; ISA-5.1 has one modifier only.
    if rest[0] in "DFQ" and rest[1:2] in ("S", "Z") and _is_modifier(first, rest[1:], edition):
        yield _functions(first, rest[2:], modifiers=rest[:2], doubts=[])
    if _is_modifier(first, rest, edition):
        yield _functions(first, rest[1:], modifiers=rest[0], doubts=_modifier_doubts(rest[0], edition))
    yield _functions(first, rest, modifiers="", doubts=[])


def _is_modifier(first: str, rest: str, edition: str) -> bool:
    """A second letter modifies the first only when a function letter follows it; S only before V or E."""
    if len(rest) < 2 or rest[0] not in _MODIFIERS or rest[1] not in _FUNCTIONS:
        return False
    if rest[0] == "S":
        return rest[1] in "VE"
    if rest[0] in "XY":
        return first in _HAS_AXES
    if rest[0] == "J":
        return edition == "1984"
    return True


def _modifier_doubts(modifier: str, edition: str) -> list[str]:
    if modifier == "M" and edition != "1984":
        return ["M as a modifier (momentary) is read by the 1984 edition only"]
    return []


def _functions(first: str, letters: str, *, modifiers: str, doubts: list[str]) -> _Parse:
    parse = _Parse(modifiers, [], [f"{_WORDS['modifier', m]}(mod)" for m in modifiers], doubts)
    seen: set[str] = set()
    output_seen = False
    at = 0
    while at < len(letters):
        letter = letters[at]
        if letter not in _FUNCTIONS:
            parse.error = (
                f"modifier {letter} has no function letter before it"
                if letter in _LEVELS
                else f"{letter} is no function letter"
            )
            return parse
        if letter in seen:
            parse.error = f"function {letter} is repeated"
            return parse
        if letter == "O" and first in _HAS_NO_ORIFICE and at + 1 < len(letters):
            parse.error = "O for open stands behind the switch or light that it speaks of"
            return parse
        readout = letter in _READOUTS and not (output_seen and letter in _OUTPUTS)
        if readout and output_seen:
            if letter != "A":
                parse.error = f"readout {letter} after output letter"
                return parse
            parse.doubts.append("alarm after output letter: older European order, or a slip")
        if letter in _USERS_FUNCTIONS:
            parse.doubts.append(f"{letter} as a function must be defined by the site")
        seen.add(letter)
        output_seen = output_seen or not readout
        parse.meaning.append(_WORDS["readout" if readout else "output", letter])
        end = at + 1 + _modifiers_length(letter, letters[at + 1 :])
        for modifier in letters[at + 1 : end]:
            parse.meaning.append(_WORDS["function", modifier])
        parse.functions.append(letters[at:end])
        # Position open, as ZSO and ZLO have it: nobody indicates an orifice's position.
        if letter == "I" and first in "ZX" and letters[end : end + 1] == "O":
            parse.functions[-1] += "O"
            parse.meaning.append("open")
            end += 1
        if letter == "I" and first in "ZX" and letters[end : end + 1] == "C":
            parse.doubts.append(f"{first}IC ambiguous (closed/open indication or control)")
        at = end
    return parse


def _modifiers_length(function: str, rest: str) -> int:
    """How many of the letters behind a function letter modify it: HH, LLL, HL, or one of C, O, R, S."""
    if function in _STATED and rest[:1] in _STATES and rest:
        return 1
    if function not in _LEVELLED:
        return 0
    length, groups = 0, 0
    while length < len(rest) and rest[length] in _LEVELS and groups < 2:
        letter = rest[length]
        run = 0
        while rest[length + run : length + run + 1] == letter and run < 3:
            run += 1
        length += run
        groups += 1
        if rest[length : length + 1] == letter:
            break
    return length


def letters_stem(letters: str) -> str:
    """The letters without the function modifiers of their last function: LSHH gives LS, ZSO gives ZS."""
    reading = read_letters(letters)
    if reading.legal == "illegal" or not reading.functions:
        return letters
    return letters[: len(letters) - len(reading.functions[-1]) + 1]


def read_users_letters(text: str) -> dict[str, str]:
    """Read a plant's users' choices from one cell, such as "D = density; C = conductivity".

    >>> read_users_letters("D = density; C: conductivity")
    {'D': 'density', 'C': 'conductivity'}
    """
    found: dict[str, str] = {}
    for piece in re.split(r"[;\n,]", text):
        letter, mark, meaning = re.sub(r"[:=]", "=", piece, count=1).partition("=")
        if mark and re.fullmatch(r"[A-Za-z]", letter.strip()) and meaning.strip():
            found[letter.strip().upper()] = meaning.strip()
        elif not mark and re.fullmatch(r"\s*[A-Za-z]\s+\S.*", piece):
            letter, _, meaning = piece.strip().partition(" ")
            found[letter.upper()] = meaning.strip()
    return found


# What plants write most, from common practice: it orders proposals of equal distance, no more.
_USUAL_BODIES = [
    "T",
    "IT",
    "I",
    "IC",
    "E",
    "V",
    "S",
    "C",
    "CV",
    "Y",
    "SH",
    "SL",
    "SHH",
    "SLL",
    "A",
    "AH",
    "AL",
    "AHH",
    "ALL",
    "G",
    "W",
    "SV",
    "SE",
    "R",
    "RC",
    "IR",
    "IRC",
    "Q",
    "IQ",
    "O",
    "LO",
    "LC",
    "SO",
    "SC",
    "L",
    "K",
    "P",
    "IAH",
    "IAL",
    "ISH",
    "ISL",
    "ISHH",
    "ISLL",
    "RT",
    "SHL",
    "SM",
    "AD",
    "LR",
    "SR",
    "SS",
]
_USUAL = {body: rank for rank, body in enumerate(_USUAL_BODIES)}


def is_usual(letters: str) -> bool:
    """Whether letters are a combination that plants usually write, not one that only parses.

    >>> is_usual("PDIT"), is_usual("FLOW")
    (True, False)
    """
    return letters[1:] in _USUAL or (letters[1:2] in ("D", "F", "Q") and letters[2:] in _USUAL)


# What a reader takes for the thing meant: pH is an analysis.
_MEANT_ELSEWHERE = {"PH": ("AT", "AIT", "AE"), "PHT": ("AT", "AIT"), "PHIT": ("AIT",), "PHE": ("AE",)}


@lru_cache(maxsize=256)
def _proposals(first: str, modifiers: str) -> tuple[tuple[str, int], ...]:
    """Legal combinations under a first letter, made from the table, with how usual each is."""
    levels = ("", "H", "L", "HH", "LL", "HHH", "LLL")
    bodies = {f"{r}{o}" for r in ("", "I", "R", "Q", "IR", "IQ", "IA", "RQ") for o in ("", *"CSTVY", "CV", "TS")}
    bodies |= {f"{b}{h}" for b in ("A", "S", "IS", "IA") for h in levels} | set(_USUAL_BODIES)
    found: dict[str, int] = {}
    for modifier in ("", *modifiers):
        for body in bodies:
            letters = f"{first}{modifier}{body}"
            reading = _read_letters(letters, USERS_CHOICE, "2009")
            if reading.legal == "legal" and not reading.too_long:
                rank = _USUAL.get(body, len(_USUAL) + len(body)) + (100 if modifier else 0)
                found[letters] = min(rank, found.get(letters, rank))
    return tuple(found.items())


def _distance(a: str, b: str) -> int:
    """Edit distance in which exchanging neighbours is one edit (optimal string alignment)."""
    before: list[int] = []
    row = list(range(len(b) + 1))
    for i, x in enumerate(a, 1):
        now = [i]
        for j, y in enumerate(b, 1):
            best = min(now[j - 1] + 1, row[j] + 1, row[j - 1] + (x != y))
            if i > 1 and j > 1 and x == b[j - 2] and a[i - 2] == y:
                best = min(best, before[j - 2] + 1)
            now.append(best)
        before, row = row, now
    return row[-1]


@lru_cache(maxsize=4096)
def nearest_legal_letters(letters: str, *, limit: int = 4, codes: frozenset[str] = frozenset()) -> tuple[str, ...]:
    """The legal letters nearest to letters that break the rules, the likeliest first.

    Parameters
    ----------
    letters
        Letters of a tag, illegal or ambiguous.
    limit
        How many to give at most.
    codes
        Plant codes, which count as legal too.

    Examples
    --------
    >>> nearest_legal_letters("TCI")[0], nearest_legal_letters("FTIC")[0], nearest_legal_letters("LL")[:2]
    ('TIC', 'FIC', ('LSLL', 'LALL'))
    """
    letters = letters.upper()
    if not re.fullmatch(r"[A-Z]{1,12}", letters):
        return ()
    given = "".join(m for m in "DFKQXYZ" if m in letters[1:])
    pool: dict[str, int] = dict(_proposals(letters[0], given))
    if len(letters) > 2:
        # A stray letter before the tag's own.
        pool.update({c: rank + 200 for c, rank in _proposals(letters[1], given) if c == letters[1:]})
    pool.update(dict.fromkeys(codes, 50))
    scored = []
    for candidate, rank in pool.items():
        if candidate == letters:
            continue
        far = float(_distance(letters, candidate))
        if sorted(candidate) == sorted(letters):
            far = min(far, 1.0) - 0.5
        elif not (_is_subsequence(letters, candidate) or _is_subsequence(candidate, letters)):
            # Leaving a letter out, or one too many, is likelier than writing another letter for it.
            far += 0.5
        if candidate[0] != letters[0]:
            far += 0.5
        scored.append((far, rank, candidate))
    scored.sort()
    nearest = [c for far, _, c in scored if far <= max(2.5, scored[0][0])]
    if re.fullmatch(r"[A-Z]D?[HLMD]+", letters):
        # High or low of what? A switch or an alarm left out.
        head, tail = re.fullmatch(r"([A-Z]D?)([HLMD]+?)", letters).groups()  # type: ignore[union-attr]
        if letters.startswith("LL"):
            head, tail = "L", letters[2:] if "H" in letters else "LL" if len(letters) == 2 else letters[1:]
        missing = [f"{head}{f}{tail}" for f in "SA"]
        nearest = [m for m in missing if read_letters(m).legal == "legal"] + nearest
    nearest = [*_MEANT_ELSEWHERE.get(letters, ()), *nearest]
    return tuple(dict.fromkeys(nearest))[:limit]


def _is_subsequence(short: str, long: str) -> bool:
    rest = iter(long)
    return all(letter in rest for letter in short)
