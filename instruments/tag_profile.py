"""How a plant writes its tags: the known profiles, a plant's own pattern, and which one a list follows."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import lru_cache
from types import MappingProxyType
from typing import Any, Final

from instruments.tag_text import normalise_tag

__all__ = [
    "DEFAULT",
    "PROFILES",
    "TagProfile",
    "best_profile",
    "plant_profile",
    "profile_from_pattern",
]

# CFIHOS 2.0 gives a tag at most 33 characters; the rest is for blanks. Nothing longer meets a pattern.
LONGEST_TAG: Final = 64

_SUFFIX = r"[A-Z]{1,2}[0-9]?(?:/[A-Z0-9]{1,2})*"


@dataclass(frozen=True, slots=True, kw_only=True)
class TagProfile:
    """One way of writing tags.

    ``pattern`` has the groups p (prefix), l (letters), n (number), x (suffix), and p2, x2 for another place
    of the prefix or suffix. ``separator`` is the canonical one. ``examples`` are tags that it must read.
    ``scheme`` says whose letters they are, and where they stand: "isa", "area" (ISA letters in front of area
    and number), "kks", or "" (free text: letters are not asked for).
    """

    name: str
    pattern: str
    separator: str = "-"
    examples: tuple[str, ...] = ()
    scheme: str = "isa"
    regex: re.Pattern[str] = field(repr=False, compare=False)
    places: tuple[int, ...] = field(repr=False, compare=False)

    def parts(self, normalised: str) -> tuple[str, str, str, str] | None:
        """Prefix, letters, number and suffix of a normalised tag; None where it does not fit."""
        if len(normalised) > LONGEST_TAG:
            return None
        match = self.regex.fullmatch(normalised)
        if match is None:
            return None
        groups = (*match.groups(""), "")
        p, p2, l, n, x, x2 = self.places  # noqa: E741
        return (groups[p] or groups[p2], groups[l], groups[n], groups[x] or groups[x2])

    def write(self, prefix: str, letters: str, number: str, suffix: str) -> str:
        """A tag from its parts, in the canonical form of this profile."""
        separator = self.separator
        if self.scheme == "area":
            letters, prefix = prefix, letters
        head = f"{prefix}{separator}" if prefix else ""
        tail = f"-{suffix}" if suffix[:1].isdigit() else suffix
        if self.scheme == "kks":
            tail = f" {suffix}" if len(suffix) > 1 else suffix
        return f"{head}{letters}{separator}{number}{tail}"


def _profile(name: str, pattern: str, **rest: Any) -> TagProfile:
    regex = re.compile(pattern, re.IGNORECASE)
    # The last place is empty text: that of a group which the pattern does not have.
    places = tuple(regex.groupindex.get(group, 0) - 1 for group in ("p", "p2", "l", "n", "x", "x2"))
    return TagProfile(name=name, pattern=pattern, regex=regex, places=places, **rest)


def _isa(separators: str, **rest: Any) -> TagProfile:
    pattern = (
        rf"(?:(?P<p>[0-9]{{1,4}}[A-Z]?){separators}|(?P<p2>[0-9]{{1,4}}))?"
        rf"(?P<l>[A-Z]{{1,6}}\+{{0,2}}){separators}?(?P<n>[0-9]{{1,6}})"
        rf"(?:{separators}?(?P<x>{_SUFFIX})|-(?P<x2>[0-9]{{1,2}}))?"
    )
    return _profile(pattern=pattern, **rest)


def _unit_prefix(separators: str, **rest: Any) -> TagProfile:
    # What reads as a tag with a suffix (FT-101-B2) is not one with the prefix FT-101.
    pattern = (
        rf"(?![A-Z]{{2,6}}{separators}?[0-9]{{1,6}}(?:{separators}?{_SUFFIX})?$)"
        rf"(?P<p>[A-Z0-9]{{1,8}}(?:{separators}[A-Z0-9]{{1,8}}){{0,2}}?){separators}"
        rf"(?P<l>[A-Z]{{1,6}}\+{{0,2}}){separators}?(?P<n>[0-9]{{1,6}})"
        rf"(?:{separators}?(?P<x>{_SUFFIX})|-(?P<x2>[0-9]{{1,2}}))?"
    )
    return _profile(pattern=pattern, **rest)


#: The profiles that a plant may name, each with tags that it must read.
PROFILES: Mapping[str, TagProfile] = MappingProxyType(
    {
        profile.name: profile
        for profile in (
            _isa(
                "[-./ ]",
                name="isa-hyphen",
                examples=("PT-1001", "10-PDIT-1001A", "TIC 300", "PCV-101-1", "2-FT-101B2", "12A-FT-0101"),
            ),
            _unit_prefix(
                "[-./ ]",
                name="isa-unit-prefix",
                examples=("10-PT-1001", "U10-FIC-101", "ABC-20-PT-0034A", "A1-LT-12"),
            ),
            _profile(
                "isa-area-number",
                rf"(?P<l>[A-Z]{{1,6}})[-./ ](?P<p>[0-9]{{1,4}}[A-Z]?)[-./ ](?P<n>[0-9]{{2,6}})"
                rf"(?:[-./ ]?(?P<x>{_SUFFIX})|-(?P<x2>[0-9]{{1,2}}))?",
                scheme="area",
                examples=("PT-210-001", "FIC-21-0034A", "LSHH-1A-12"),
            ),
            _profile(
                "compact",
                # NORSOK Z-DP-002 writes so (from memory): system, function code, sequence, letter.
                r"(?P<p>[0-9]{1,3})?(?P<l>[A-Z]{2,6})(?P<n>[0-9]{2,6})(?P<x>[A-Z]{1,2})?",
                separator="",
                examples=("20PT0034", "FIC101", "13ESDV0012A"),
            ),
            _profile(
                "kks",
                # VGB-B 105: total plant, system (N)AAANN, equipment AANNN(A), component AANN.
                r"(?P<p>(?:[A-Z0-9] ?)?[0-9]?[A-Z]{3}[0-9]{2}) ?(?P<l>[A-Z]{2})(?P<n>[0-9]{3})"
                r"(?: ?(?P<x>[A-Z]{1,2}(?:[0-9]{2})?))?",
                separator="",
                scheme="kks",
                examples=("10LBA10CP001", "1 LBA10 CP001 XQ01", "11HAD20CL001", "LAB10AA101"),
            ),
            _profile(
                "free-text",
                r"(?:(?P<p>[A-Z0-9]{1,8})[-./ _])?(?P<l>[A-Z]{1,6})[-./ _]?(?P<n>[0-9]{1,6}(?:\.[0-9]{1,4})?)"
                r"(?:[-./ _]?(?P<x>[A-Z]{1,2}[0-9]{0,2}|[0-9]{1,2}))?",
                scheme="",
                examples=("PIT 4712.02", "P1_FT01", "FIC 3"),
            ),
        )
    }
)

DEFAULT: Final = PROFILES["isa-hyphen"]

# The same with the underscore, for plants that write little else; elsewhere PT_1001 is a slip for PT-1001.
_UNDERSCORED = (
    _isa("[-./ _]", name="isa-hyphen", separator="_"),
    _unit_prefix("[-./ _]", name="isa-unit-prefix", separator="_"),
)


def best_profile(texts: Iterable[str]) -> TagProfile:
    """The profile that most of a list's tags fit, with the separator that most of them use.

    Where fewer than two thirds fit any, the list is free text: only uniqueness is asked of its tags. A slip is
    the exception among tags, and where every third is one, the tags follow no such pattern: an I/O map beside
    PAS01_TT11 names PAS01_PU11_RUN. The order of the texts and repeated ones change nothing.

    >>> best_profile(["20PT0034", "20PT0035", "20-FT-1"]).name, best_profile(["4th pump", "PT1/PT2 out"]).name
    ('isa-hyphen', 'free-text')
    """
    tags = {n for n in map(normalise_tag, texts) if any(c.isdigit() for c in n)}
    if not tags:
        return DEFAULT
    underscored = sum("_" in tag for tag in tags) * 2 > len(tags)
    # The first of equals stands: where PT-210-01 is the rule, 210 is an area and no loop with a device 01.
    candidates: list[TagProfile] = [PROFILES["kks"], PROFILES["compact"], PROFILES["isa-area-number"]]
    candidates += _UNDERSCORED if underscored else (DEFAULT, PROFILES["isa-unit-prefix"])
    best, most = DEFAULT, 0
    for profile in candidates:
        fitting = sum(profile.regex.fullmatch(tag) is not None for tag in tags if len(tag) <= LONGEST_TAG)
        if fitting > most:
            best, most = profile, fitting
    if most * 3 < len(tags) * 2:
        return PROFILES["free-text"]
    if best.name in ("kks", "compact"):
        return best
    counts: dict[str, int] = {}
    for tag in tags:
        found = best.regex.fullmatch(tag) if len(tag) <= LONGEST_TAG else None
        if found:
            between = tag[found.end("l")] if not tag[found.end("l")].isdigit() else ""
            counts[between] = counts.get(between, 0) + 1
    separator = max(counts, key=lambda s: (counts[s], s == "-", s), default=best.separator)
    return best if separator == best.separator else replace(best, separator=separator)


def plant_profile(text: str | None) -> TagProfile | None:
    """The profile that a plant states: the name of one, or a regular expression; None where it states none.

    Raises
    ------
    ValueError
        The text is neither a profile's name nor a pattern that can be used; the message says why.
    """
    if text is None or not text.strip():
        return None
    name = re.sub(r"[\s_-]+", "-", text.strip().lower())
    if name in PROFILES:
        return PROFILES[name]
    return profile_from_pattern(text.strip())


# ------------------------------------------------------------------------------- a plant's own pattern

_LONGEST_PATTERN: Final = 500
# Ways to part one text that a pattern may have at most: enough for any tag, too few to keep a machine busy.
_MOST_WAYS: Final = 20_000
_DEEPEST: Final = 5


@lru_cache(maxsize=32)
def profile_from_pattern(pattern: str) -> TagProfile:
    """A profile from a plant's own regular expression with the groups l and n, and p, x, p2, x2 where needed.

    Parameters
    ----------
    pattern
        A regular expression that a whole tag must match, in upper case, after normalisation.

    Raises
    ------
    ValueError
        It does not compile, lacks a group, or could take very long on a text made for it.

    Examples
    --------
    >>> profile_from_pattern(r"(?P<p>[A-Z]\\d{2})-(?P<l>[A-Z]+)-(?P<n>\\d{4})").parts("B12-FT-0031")
    ('B12', 'FT', '0031', '')
    """
    if len(pattern) > _LONGEST_PATTERN:
        raise ValueError(f"the tag pattern has {len(pattern)} characters; {_LONGEST_PATTERN} are allowed")
    try:
        regex = re.compile(pattern, re.IGNORECASE)
    except (re.error, OverflowError, RecursionError) as error:
        raise ValueError(f"the tag pattern is no regular expression: {error}") from error
    missing = [group for group in ("l", "n") if group not in regex.groupindex]
    if missing:
        raise ValueError(
            f"the tag pattern names no group {' and no group '.join(missing)}: "
            "write (?P<l>...) around the letters and (?P<n>...) around the number"
        )
    odd = sorted(set(regex.groupindex) - {"p", "p2", "l", "n", "x", "x2"})
    if odd:
        raise ValueError(f"the tag pattern names the group {odd[0]}; it may name p, l, n, x, p2 and x2")
    _refuse_slow(pattern)
    return _profile("plant pattern", pattern, separator=_separator_of(pattern))


def _separator_of(pattern: str) -> str:
    """The separator that a pattern writes in front of its number; a hyphen where that cannot be seen."""
    found = re.search(r"(\\?[-./ _]|\\s|\[[-./ _\\]+\])(\?|\*|\{0,1\})?\)?\(\?P<n>", pattern)
    if not found:
        return "" if re.search(r"\)\(\?P<n>", pattern) else "-"
    text = found[1].replace("\\s", " ").strip("[]\\")
    return "-" if "-" in text or not text else text[0]


# Every printable character, lower case folded, and one letter for all that is beyond ASCII: what parts of a
# pattern can match the same character is worked out with these.
_BEYOND: Final = "\xe9"
_EVERYTHING: Final = frozenset(c for c in map(chr, range(32, 127)) if c == c.upper()) | {_BEYOND}
_NOTHING: Final[frozenset[str]] = frozenset()
_CLASSES: Final = {
    "DIGIT": frozenset("0123456789") | {_BEYOND},
    "SPACE": frozenset(" ") | {_BEYOND},
    "WORD": frozenset(c for c in _EVERYTHING if c.isalnum() or c == "_"),
}

_Node = tuple[Any, Any]
_Nodes = Sequence[_Node]


def _refuse_slow(pattern: str) -> None:
    """Raise ValueError for a pattern that can part one text in very many ways, as repeats in repeats can.

    Wherever a pattern may go on or leave off, the next character should say which; where it does not, the
    ways multiply. The parse tree is the standard library's own; its module has no public name since
    Python 3.11.
    """
    from re import _parser  # type: ignore[attr-defined]

    _ways(_parser.parse(pattern, re.IGNORECASE), _NOTHING)


def _ways(nodes: _Nodes, follow: frozenset[str], *, depth: int = 0) -> int:
    """An upper bound for the ways in which a sequence matches one text, if ``follow`` can come behind it."""
    if depth > _DEEPEST:
        raise ValueError(f"the tag pattern has more than {_DEEPEST} repeats one inside of the other")
    ways = 1
    nodes = list(nodes)
    for at, (operator, value) in enumerate(nodes):
        name = str(operator)
        behind = _starts(nodes[at + 1 :], follow)
        if name.endswith("_REPEAT"):
            least, most, body = int(value[0]), min(int(value[1]), LONGEST_TAG), value[2]
            if most > 1 and (_ways(body, _starts(body, _NOTHING), depth=depth + 1) > 1 or not _width(body)):
                raise ValueError(
                    "the tag pattern has a repeat inside of a repeat, or a choice inside of one, and the "
                    "next character does not tell which goes on; such a pattern can take for ever"
                )
            ways *= _ways(body, behind, depth=depth + 1)
            if most > least and _characters(body) & behind:
                ways *= most - least + 1
        elif name == "BRANCH":
            starts = [_starts(branch, behind) for branch in value[1]]
            shared = any(a & b for i, a in enumerate(starts) for b in starts[i + 1 :])
            inside = [_ways(branch, behind, depth=depth) for branch in value[1]]
            ways *= sum(inside) if shared else max(inside)
        elif name == "SUBPATTERN":
            ways *= _ways(value[-1], behind, depth=depth)
        elif name == "ATOMIC_GROUP":
            ways *= _ways(value, behind, depth=depth)
        elif name in ("ASSERT", "ASSERT_NOT"):
            ways *= _ways(value[1], _EVERYTHING, depth=depth)
        elif name.startswith("GROUPREF"):
            raise ValueError("the tag pattern refers back to a group; such a pattern can take for ever")
        if ways > _MOST_WAYS:
            raise ValueError(
                "the tag pattern can part one text in too many ways; write what separates its repeats, or "
                "how many characters each may have"
            )
    return ways


def _starts(nodes: _Nodes, follow: frozenset[str]) -> frozenset[str]:
    """The characters with which a sequence can start; those of ``follow`` too where it can be empty."""
    found = _NOTHING
    for operator, value in nodes:
        name = str(operator)
        if name == "SUBPATTERN":
            found |= _starts(value[-1], _NOTHING)
        elif name == "ATOMIC_GROUP":
            found |= _starts(value, _NOTHING)
        elif name == "BRANCH":
            found |= _NOTHING.union(*(_starts(branch, _NOTHING) for branch in value[1]))
        elif name.endswith("_REPEAT"):
            found |= _starts(value[2], _NOTHING)
        else:
            found |= _characters([(operator, value)])
        if _width([(operator, value)]):
            return found
    return found | follow


def _characters(nodes: _Nodes) -> frozenset[str]:
    """Every character that any part of a sequence can match."""
    found = _NOTHING
    for operator, value in nodes:
        name = str(operator)
        if name == "LITERAL":
            found |= _folded(value)
        elif name == "NOT_LITERAL":
            found |= _EVERYTHING - (_folded(value) - {_BEYOND})
        elif name == "ANY":
            found |= _EVERYTHING
        elif name == "IN":
            found |= _set_characters(value)
        elif name.endswith("_REPEAT"):
            found |= _characters(value[2])
        elif name == "BRANCH":
            found |= _NOTHING.union(*(_characters(branch) for branch in value[1]))
        elif name == "SUBPATTERN":
            found |= _characters(value[-1])
        elif name == "ATOMIC_GROUP":
            found |= _characters(value)
    return found


def _set_characters(items: _Nodes) -> frozenset[str]:
    found = _NOTHING
    negated = False
    for operator, value in items:
        name = str(operator)
        if name == "NEGATE":
            negated = True
        elif name == "LITERAL":
            found |= _folded(value)
        elif name == "RANGE":
            low, high = value
            found |= {c for c in _EVERYTHING if low <= ord(c) <= high or low <= ord(c.lower()) <= high}
            if high > 126:
                found |= {_BEYOND}
        else:
            known = _CLASSES.get(str(value).rpartition("_")[2], _EVERYTHING)
            found |= (_EVERYTHING - known) | {_BEYOND} if "_NOT_" in str(value) else known
    return (_EVERYTHING - found) | {_BEYOND} if negated else found


def _folded(code: int) -> frozenset[str]:
    return frozenset((chr(code).upper() if code < 127 else _BEYOND,))


def _width(nodes: _Nodes) -> int:
    """The fewest characters that a sequence matches."""
    width = 0
    for operator, value in nodes:
        name = str(operator)
        if name in ("LITERAL", "NOT_LITERAL", "ANY", "IN"):
            width += 1
        elif name.endswith("_REPEAT"):
            width += int(value[0]) * _width(value[2])
        elif name == "BRANCH":
            width += min(_width(branch) for branch in value[1])
        elif name == "SUBPATTERN":
            width += _width(value[-1])
        elif name == "ATOMIC_GROUP":
            width += _width(value)
    return width
