"""A tag: how it is read, compared and sorted, which loop it names, and what would mend it."""

from __future__ import annotations

import re
from collections.abc import Collection, Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Final, Literal

from instruments.kind import Kind, code_kind
from instruments.letters import USERS_CHOICE, nearest_legal_letters, read_letters
from instruments.plant_codes import CODES, PlantCode, code_for
from instruments.tag_cell import EQUIPMENT_WORDS, NOT_TAGS, split_note, tags_of_cell
from instruments.tag_profile import (
    DEFAULT,
    PROFILES,
    TagProfile,
    best_profile,
    plant_profile,
    profile_from_pattern,
)
from instruments.tag_text import latin, normalise, normalise_tag, tidy

__all__ = [
    "DEFAULT",
    "PROFILES",
    "TagProfile",
    "TagReading",
    "Verdict",
    "assembly_key",
    "best_profile",
    "canonical_tag",
    "is_equipment_shape",
    "is_valve",
    "look_alike_key",
    "loop_agrees",
    "loop_of",
    "match_key",
    "natural_key",
    "nearest_fitting_tag",
    "nearest_legal_letters",
    "normalise_tag",
    "plant_profile",
    "profile_from_pattern",
    "read_tag",
    "split_note",
    "tags_of_cell",
]

Verdict = Literal["valid", "warn", "site", "invalid"]
#: What the loop column of the tag table says where only the plant's code table knows the loop.
BY_CODE_TABLE: Final = "by code table"


@dataclass(frozen=True, slots=True, kw_only=True)
class TagReading:
    """How the text of one tag reads; blank parts are empty text.

    Attributes
    ----------
    text, normalised
        As written, and in the spelling by which it is read, without a note.
    prefix, letters, number, suffix
        Its parts; all empty where it could not be parted (``parsed`` is False).
    loop
        The loop that it names; empty where it names none, or where only the plant's table could tell.
    verdict, reason
        "valid", "warn" (reads, but look at it), "site" (a plant code) or "invalid", and why.
    look_alikes
        Its characters that only look Latin.
    means
        The tags that the cell stands for, where it holds two, a list or a range; else empty.
    note
        What stands beside the tag in its cell.
    legal
        "legal", "ambiguous" or "illegal" by the rules of succession; "code"; "" where not asked.
    undefined
        The first letter, where it is a user's choice that the plant has not defined.
    code
        The plant code that the letters are, if they are one.
    scheme
        "isa", "area" or "kks"; "" for free text.
    placeholder
        It is a word that stands where a tag should: SPARE, TBA, a dash.
    """

    text: str
    normalised: str
    verdict: Verdict
    reason: str
    prefix: str = ""
    letters: str = ""
    number: str = ""
    suffix: str = ""
    loop: str = ""
    parsed: bool = False
    look_alikes: str = ""
    means: tuple[str, ...] = ()
    note: str = ""
    legal: str = ""
    undefined: str = ""
    code: PlantCode | None = None
    scheme: str = "isa"
    placeholder: bool = False

    def as_vector(self) -> dict[str, str]:
        """The reading as the ``read tag`` command shows it."""
        by_table = self.code is not None and self.verdict != "invalid"
        return {
            "normalised": self.normalised,
            "prefix": self.prefix,
            "letters": self.letters,
            "number": self.number,
            "suffix": self.suffix,
            "loop": BY_CODE_TABLE if by_table else self.loop,
            "verdict": self.verdict,
        }


def read_tag(
    text: str,
    *,
    profile: TagProfile = DEFAULT,
    codes: Mapping[str, PlantCode] = CODES,
    users_letters: Collection[str] = frozenset(),
    numbering: str = "parallel",
) -> TagReading:
    """Read one tag, or say why it is none.

    Parameters
    ----------
    text
        The cell of a tag column.
    profile
        How the plant writes its tags.
    codes
        The plant's code table, looked up before the letters.
    users_letters
        First letters of the user's choice that the plant has defined.
    numbering
        "parallel" (a series for each first letter) or "serial" (one series for all).

    Examples
    --------
    >>> r = read_tag("10-PDIT-1001A")
    >>> (r.prefix, r.letters, r.number, r.suffix, r.loop, r.verdict)
    ('10', 'PDIT', '1001', 'A', '10-P-1001', 'valid')
    >>> read_tag("PT-1001 TO 1004").means
    ('PT-1001', 'PT-1002', 'PT-1003', 'PT-1004')
    """
    normalised, odd = normalise(text)
    if not isinstance(users_letters, frozenset):
        users_letters = frozenset(users_letters)
    parts = profile.parts(normalised)
    if parts is None:
        return _read_other(
            text,
            normalised,
            odd,
            profile=profile,
            codes=codes,
            users_letters=users_letters,
            numbering=numbering,
        )
    return _read_parts(
        text,
        normalised,
        odd,
        parts,
        note="",
        profile=profile,
        codes=codes,
        users_letters=users_letters,
        numbering=numbering,
    )


def _read_parts(
    text: str,
    normalised: str,
    odd: str,
    parts: tuple[str, str, str, str],
    *,
    note: str,
    profile: TagProfile,
    codes: Mapping[str, PlantCode],
    users_letters: frozenset[str],
    numbering: str,
) -> TagReading:
    prefix, letters, number, suffix = parts
    scheme = profile.scheme
    if letters in EQUIPMENT_WORDS and letters not in codes:
        return TagReading(
            text=text,
            normalised=normalised,
            verdict="invalid",
            reason=f"{letters} names equipment, not an instrument",
            scheme=scheme,
        )
    if letters in NOT_TAGS and letters not in codes:
        return _placeholder(text, normalised)
    means = tags_of_cell(normalised, profile=profile) if "/" in suffix else ()
    doubts: list[str] = []
    if odd:
        doubts.append(f"{odd} only looks Latin")
    if means:
        doubts.append(f"{_count(len(means))} devices in one cell: split to {', '.join(means)}")
    if not number.strip("0."):
        doubts.append("loop number zero")
    if suffix:
        slip = _digit_slip(text, suffix)
        if slip:
            doubts.append(slip)
    code = code_for(letters, codes)
    undefined = ""
    if code is not None:
        legal, verdict, reason = "code", "site", f"site code: {code.meaning}"
        first = code.first or ""
    elif scheme == "kks":
        legal, verdict, reason, first = "", "valid", f"KKS profile: {prefix} · {letters}{number}", letters
    else:
        reading = read_letters(letters, users_letters=users_letters)
        legal, first = reading.legal, reading.first
        verdict, reason = "valid", " + ".join(reading.meaning)
        if legal == "illegal":
            if not scheme:
                return _free_text(text, normalised, odd)
            verdict, reason = "invalid", reading.problem
        else:
            undefined = reading.undefined
            if legal == "ambiguous":
                doubts.append(reading.problem)
            if undefined:
                doubts.append(f"first letter {undefined} must be defined by the site")
            if reading.too_long:
                doubts.append("more than five letters")
    if verdict == "invalid":
        loop = ""
    else:
        loop = _loop(prefix, first, number, numbering=numbering, scheme=scheme)
        if doubts:
            verdict = "warn"
    if doubts:
        reason = "; ".join([*([reason] if verdict == "invalid" else []), *doubts])
    return TagReading(
        text=text,
        normalised=normalised,
        verdict=verdict,  # type: ignore[arg-type]
        reason=reason,
        prefix=prefix,
        letters=letters,
        number=number,
        suffix=suffix,
        loop=loop,
        parsed=True,
        look_alikes=odd,
        means=means,
        note=note,
        legal=legal,
        undefined=undefined,
        code=code,
        scheme=scheme,
    )


def _read_other(
    text: str,
    normalised: str,
    odd: str,
    *,
    profile: TagProfile,
    codes: Mapping[str, PlantCode],
    users_letters: frozenset[str],
    numbering: str,
) -> TagReading:
    """Read what does not fit the profile as it stands: no tag, several tags, a tag with a note, a misfit."""
    if not normalised:
        return TagReading(text=text, normalised="", verdict="invalid", reason="no tag")
    if normalised in NOT_TAGS or not any(c.isalnum() for c in normalised):
        return _placeholder(text, normalised)
    means = tags_of_cell(normalised, profile=profile)
    if means:
        return TagReading(
            text=text,
            normalised=normalised,
            verdict="invalid",
            reason=f"{_count(len(means))} tags in one cell: split to {_shown(means)}",
            look_alikes=odd,
            means=means,
            scheme=profile.scheme,
        )
    tag, note = split_note(text, profile=profile)
    bare, bare_odd = normalise(tag)
    parts = profile.parts(bare) or _parts_by_separators(bare, profile)
    if parts is not None:
        return _read_parts(
            text,
            bare,
            bare_odd,
            parts,
            note=note,
            profile=profile,
            codes=codes,
            users_letters=users_letters,
            numbering=numbering,
        )
    if bare != normalised:
        means = tags_of_cell(bare, profile=profile)
        if means:
            return TagReading(
                text=text,
                normalised=bare,
                verdict="invalid",
                reason=f"{_count(len(means))} tags in one cell: split to {_shown(means)}",
                look_alikes=odd,
                means=means,
                note=note,
                scheme=profile.scheme,
            )
    if not profile.scheme:
        return _free_text(text, normalised, odd)
    return TagReading(
        text=text,
        normalised=normalised,
        verdict="invalid",
        reason=_misfit(normalised, profile),
        look_alikes=odd,
        scheme=profile.scheme,
    )


def _placeholder(text: str, normalised: str) -> TagReading:
    return TagReading(
        text=text,
        normalised=normalised,
        verdict="invalid",
        reason="not a tag: placeholder row",
        placeholder=True,
    )


def _free_text(text: str, normalised: str, odd: str) -> TagReading:
    """A tag of a plant whose tags follow no pattern: it is what it is."""
    return TagReading(
        text=text,
        normalised=normalised,
        verdict="warn" if odd else "valid",
        reason=f"{odd} only looks Latin" if odd else "free text: only uniqueness is asked",
        look_alikes=odd,
        scheme="",
    )


def _misfit(normalised: str, profile: TagProfile) -> str:
    kks = PROFILES["kks"].parts(normalised)
    if kks and profile.scheme != "kks":
        return f"KKS profile: {kks[0]} · {kks[1]}{kks[2]}"
    if not re.search("[0-9]", normalised):
        return "no number"
    if not re.search("[A-Z]", normalised):
        return "no letters"
    return f"does not fit the pattern {profile.name}"


def _count(number: int) -> str:
    return {2: "two", 3: "three", 4: "four"}.get(number, str(number))


def _shown(tags: Sequence[str]) -> str:
    return ", ".join(tags) if len(tags) <= 6 else f"{tags[0]}, {tags[1]}, ... {tags[-1]}"


def _digit_slip(text: str, suffix: str) -> str:
    """A letter in the place of a digit: the suffix begins with O or I, or with a lower-case l."""
    if "/" in suffix:
        return ""
    if _lower_l(text, suffix):
        return "lower-case l after digits: probably digit 1"
    # A lone I may be the ninth of a lettered set: TE-12A to TE-12L.
    if suffix != "I" and re.fullmatch("[OI][OI0-9]*", suffix):
        where = "between" if suffix[1:].isdigit() else "after"
        return f"letter {suffix[0]} {where} digits: probably {'0' if suffix[0] == 'O' else '1'}"
    return ""


def _lower_l(text: str, suffix: str) -> bool:
    # In pt-10l every letter is small and the l may be meant.
    if suffix[0] != "L":
        return False
    return re.search("[0-9]l", text) is not None and re.search("[A-Z]", text) is not None


# ----------------------------------------------------------------------------------------------- loops


def _loop(prefix: str, first: str, number: str, *, numbering: str, scheme: str) -> str:
    if scheme == "kks":
        return f"{prefix}{first}{number}"
    if numbering == "serial":
        return f"{prefix}-{number}" if prefix else number
    if not first:
        return ""
    if scheme == "area":
        return f"{first}-{prefix}-{number}"
    return f"{prefix}-{first}-{number}" if prefix else f"{first}-{number}"


def loop_of(reading: TagReading, *, numbering: str = "parallel", with_modifier: bool = False) -> str:
    """The loop that a tag names, also where its letters are illegal; empty where it names none.

    Parameters
    ----------
    numbering
        "parallel": prefix, first letter and number; "serial": prefix and number.
    with_modifier
        PDT-77 belongs to PD-77 (strict) rather than to P-77 (practical, the usual way).

    Examples
    --------
    >>> pdt = read_tag("PDT-77")
    >>> loop_of(pdt), loop_of(pdt, with_modifier=True), loop_of(pdt, numbering="serial")
    ('P-77', 'PD-77', '77')
    """
    if not reading.parsed:
        return ""
    if reading.code is not None:
        first = reading.code.first or ""
    elif reading.scheme == "kks":
        first = reading.letters
    else:
        first = reading.letters[:1]
        if with_modifier:
            first += read_letters(reading.letters).modifier
    return _loop(reading.prefix, first, reading.number, numbering=numbering, scheme=reading.scheme)


# What belongs to a valve and carries its number: position, hand switch, solenoid, valve status.
_ASSEMBLY_FIRST: Final = frozenset("XZHY")


def is_valve(reading: TagReading) -> bool:
    """Whether a tag names a final element that an assembly can belong to (not a relief valve).

    >>> [is_valve(read_tag(t)) for t in ("XV-1", "FCV-1", "SDV-1", "PSV-1", "ZSO-1")]
    [True, True, True, False, False]
    """
    if not reading.parsed or reading.scheme in ("kks", ""):
        return False
    if reading.code is not None:
        return code_kind(reading.code) in (Kind.ON_OFF_VALVE, Kind.CONTROL_VALVE)
    letters = read_letters(reading.letters)
    return "S" not in letters.modifier and any(f in ("V", "Z") for f in letters.functions)


def assembly_key(reading: TagReading) -> tuple[str, str] | None:
    """What a valve and the devices of its assembly share: prefix and number; None for what can be in none.

    A valve, and whatever begins with X, Z, H or Y: ZSO-1201, XY-1201 and HS-1201 belong to the loop of the
    valve with the number 1201. Several valves may share a number; each is then as likely.
    """
    if not reading.parsed or reading.scheme in ("kks", ""):
        return None
    if is_valve(reading) or (reading.code is None and reading.letters[0] in _ASSEMBLY_FIRST):
        return (reading.prefix, reading.number)
    if reading.code is not None and code_kind(reading.code) is Kind.SOLENOID:
        return (reading.prefix, reading.number)
    return None


_BARE_LOOP = re.compile(
    r"(?:LOOP|LP|KREIS|L)?[-. /:]?(?:(?P<p>[0-9]{1,4}[A-Z]?)[-./ ])?(?P<n>[0-9]{1,6})"
    r"(?:[-./ ]?(?P<x>[A-Z]{1,2}))?"
)


def loop_agrees(
    loop: str,
    reading: TagReading,
    *,
    profile: TagProfile = DEFAULT,
    numbering: str = "parallel",
    valve_loops: Collection[str] = (),
) -> bool | None:
    """Whether the loop that a list states is the one that the tag names; None where nothing can be said.

    Parameters
    ----------
    loop
        The text of the loop column: F-101, 10-F-101, FIC-101, 101, LOOP 101.
    valve_loops
        The loops stated for the valves that share this tag's `assembly_key`.

    Examples
    --------
    >>> tag = read_tag("FT-101")
    >>> [loop_agrees(text, tag) for text in ("F-101", "FIC101", "101", "F-102", "P-101", "FEED")]
    [True, True, True, False, False, None]
    """
    if not reading.parsed or reading.legal == "illegal" or reading.scheme in ("kks", ""):
        return None
    stated = normalise_tag(loop)
    if not stated:
        return None
    if any(stated == normalise_tag(other) for other in valve_loops) and assembly_key(reading):
        return True
    parts = profile.parts(stated) or DEFAULT.parts(stated)
    letters = ""
    if parts:
        prefix, letters, number, _ = parts
        if letters in ("LOOP", "LP", "L") and reading.letters[:1] != "L":
            letters = ""
    else:
        bare = _BARE_LOOP.fullmatch(stated)
        if bare is None:
            return None
        prefix, number = bare["p"] or "", bare["n"]
    same_number = _no_zeros(number) == _no_zeros(reading.number)
    same_prefix = not prefix or not reading.prefix or _no_zeros(prefix) == _no_zeros(reading.prefix)
    if not same_number and not prefix and number == f"{reading.prefix}{reading.number}":
        same_number = True
    if not (same_number and same_prefix):
        # A serial or joined number cannot be told from another loop's; a number that differs is another loop.
        return False
    if not letters or numbering == "serial":
        return True
    if reading.code is not None:
        if letters == reading.letters:
            return True
        return letters[0] == reading.code.first if reading.code.first else None
    if letters[0] == reading.letters[0]:
        return True
    if reading.letters[0] in _ASSEMBLY_FIRST:
        # The valve may stand under another letter, in this list or in a package's.
        return True if letters[0] in _ASSEMBLY_FIRST else None
    if is_valve(reading) and letters[0] in _ASSEMBLY_FIRST:
        return None
    return False


# ------------------------------------------------------------------------------- comparing and sorting

Key = tuple[str, str, str, str]


def _no_zeros(number: str) -> str:
    return number.lstrip("0") or "0"


def match_key(reading: TagReading) -> Key:
    """By what two tags are the same: prefix, letters, number with its zeros, suffix; separators do not count.

    A tag that does not parse is compared by its letters and digits run together.

    >>> match_key(read_tag("10-PT-1001A")) == match_key(read_tag("10 PT1001-A"))
    True
    >>> match_key(read_tag("PCV-101-1")) == match_key(read_tag("PCV-1011"))
    False
    """
    if reading.parsed:
        return (reading.prefix, reading.letters, reading.number, reading.suffix)
    return ("", "".join(c for c in reading.normalised if c.isalnum()), "", "")


_AS_DIGIT = str.maketrans("OIL", "011")
_AS_LETTER = str.maketrans("01", "OI")


def look_alike_key(tag: TagReading | str, *, profile: TagProfile = DEFAULT) -> Key:
    """By what two tags look the same: as `match_key`, without leading zeros, digits for letters like them.

    O and 0, I and 1, small l and 1, Cyrillic and Greek letters like Latin ones. Capital L is no 1: TE-12L is
    the twelfth element of TE-12.

    >>> look_alike_key("FT-1O1") == look_alike_key("FT-0101")
    True
    >>> look_alike_key("TE-12L") == look_alike_key("TE-121")
    False
    """
    reading = read_tag(tag, profile=profile) if isinstance(tag, str) else tag
    if reading.parsed and (reading.legal != "illegal" or reading.scheme == "kks"):
        number, suffix = _digits_out_of(reading.text, reading.number, reading.suffix)
        return (
            _no_zeros(reading.prefix) if reading.prefix else "",
            reading.letters,
            _no_zeros(number),
            suffix,
        )
    mended = _mended(reading, profile)
    if mended is not None:
        return look_alike_key(mended, profile=profile)
    if reading.parsed:
        return (
            _no_zeros(reading.prefix) if reading.prefix else "",
            reading.letters,
            _no_zeros(reading.number),
            reading.suffix,
        )
    plain = "".join(c for c in reading.normalised if c.isalnum()).replace("O", "0").replace("I", "1")
    return ("", re.sub("(?<![0-9])0+(?=[0-9])", "", plain), "", "")


def _digits_out_of(text: str, number: str, suffix: str) -> tuple[str, str]:
    """The number and suffix, with look-alike letters at the front of the suffix read as digits."""
    if not suffix or "/" in suffix or suffix[0].isdigit():
        return number, suffix
    if _lower_l(text, suffix):
        suffix = f"I{suffix[1:]}"
    found = re.fullmatch("([OI][OI0-9]*)([A-Z]?)", suffix)
    return (number + found[1].translate(_AS_DIGIT), found[2]) if found else (number, suffix)


def _mended(reading: TagReading, profile: TagProfile) -> TagReading | None:
    """The reading of a tag once letters and digits are exchanged for their look-alikes, if it is one."""
    text = _with_small_l(reading.text) if reading.text else reading.normalised
    # The tokens behind the first that holds letters are numbers; the first itself is letters.
    pieces = re.split(r"([-./ ])", text)
    tries: list[str] = []
    if len(pieces) > 1:
        for at in (0, 2):
            if at < len(pieces):
                letters = pieces[at].translate(_AS_LETTER)
                if re.fullmatch("[A-Z]{2,6}", letters):
                    rest = [_as_number(piece) for piece in pieces[at + 1 :]]
                    tries.append("".join([*pieces[:at], letters, *rest]))
    joined = re.fullmatch("([A-Z]{2,6}?)([OI]*[0-9][OI0-9]*)([A-Z]?)", text)
    if joined:
        tries.append(f"{joined[1]}{joined[2].translate(_AS_DIGIT)}{joined[3]}")
    for attempt in tries:
        if attempt == reading.normalised:
            continue
        again = read_tag(attempt, profile=profile)
        if again.parsed and again.legal != "illegal":
            return again
    return None


def _with_small_l(text: str) -> str:
    """Upper case, after a small l that touches a digit has become 1."""
    plain = tidy(text)
    if re.search("[A-Z]", plain):
        plain = re.sub("(?<=[0-9])l|l(?=[0-9])", "1", plain)
    return latin(plain)[0]


def _as_number(piece: str) -> str:
    found = re.fullmatch("([OI0-9]*)([A-Z]?)", piece)
    if found and found[1] and (re.search("[0-9]", found[1]) or len(found[1]) > 2):
        return found[1].translate(_AS_DIGIT) + found[2]
    return piece


_RUNS = re.compile("([^0-9]*)([0-9]*)")

NaturalKey = tuple[tuple[tuple[str, int, str], ...], str]


def natural_key(tag: str) -> NaturalKey:
    """A key that sorts FT-9 before FT-10; tags that differ by leading zeros only stand together.

    >>> sorted(["FT-10", "FT-9A", "FT-009", "FT-9"], key=natural_key)
    ['FT-009', 'FT-9', 'FT-9A', 'FT-10']
    """
    # Numbers are compared by length, then by digits: int() refuses very long ones.
    runs = [(text, number.lstrip("0")) for text, number in _RUNS.findall(tag.upper())]
    return tuple((text, len(number), number) for text, number in runs), tag


_WORD_AND_NUMBER: Final = re.compile(r"(?:[0-9]{1,4}[-./ ])?([A-ZÄÖÜ]{3,12})[-_./ ]?(?:NO\.? ?)?[0-9]{0,5}[A-Z]?")


def is_equipment_shape(reading: TagReading) -> bool:
    """Whether a tag is one letter and a number, as equipment is tagged (P-3601A, 10-E-101), or its word and a number.

    >>> [is_equipment_shape(read_tag(tag)) for tag in ("P-3601A", "PT-3601A", "MIXER 7")]
    [True, False, True]
    """
    worded = _WORD_AND_NUMBER.fullmatch(reading.normalised.upper())
    if worded is not None and worded[1] in EQUIPMENT_WORDS:
        return True
    return reading.parsed and len(reading.letters) == 1 and reading.scheme != "kks"


# ------------------------------------------------------------------------------------------- what fits


def canonical_tag(reading: TagReading, *, profile: TagProfile = DEFAULT) -> str:
    """The tag in the plant's canonical form; as it stands where it does not parse.

    >>> canonical_tag(read_tag("10 pt1001a"))
    '10-PT-1001A'
    """
    if not reading.parsed:
        return reading.normalised
    return _written(profile, reading.prefix, reading.letters, reading.number, reading.suffix) or reading.normalised


def _written(profile: TagProfile, prefix: str, letters: str, number: str, suffix: str) -> str | None:
    """The parts as a tag that fits the profile and reads as these parts; zeros may come before the number."""
    plain = profile.write(prefix, letters, number, suffix)
    if profile.parts(plain) == (prefix, letters, number, suffix):
        return plain
    # A plant's own pattern does not say how it is written: try the usual forms, and zeros before the number.
    for width in range(len(number), 7):
        filled = number.zfill(width)
        for text in _forms(profile.separator, prefix, letters, filled, suffix):
            if profile.parts(text) == (prefix, letters, filled, suffix):
                return text
    return None


def _forms(separator: str, prefix: str, letters: str, number: str, suffix: str) -> Iterator[str]:
    """The ways in which plants write the same parts."""
    for mark in dict.fromkeys((separator, "-", "", " ", ".", "_", "/")):
        for joint in dict.fromkeys(("", mark, "-")) if suffix else ("",):
            tail = f"{number}{joint}{suffix}"
            if not prefix:
                yield from (f"{letters}{mark}{tail}", f"{letters}{tail}")
                continue
            yield from (
                f"{prefix}{mark}{letters}{mark}{tail}",
                f"{prefix}{mark}{letters}{tail}",
                f"{prefix}{letters}{mark}{tail}",
                f"{letters}{mark}{prefix}{mark}{tail}",
            )


def _parts_by_separators(normalised: str, profile: TagProfile) -> tuple[str, str, str, str] | None:
    """The parts of a tag that fits the profile once its separators are the profile's."""
    if profile.scheme != "isa" or profile is DEFAULT:
        return None
    for known in (DEFAULT, PROFILES["isa-unit-prefix"], PROFILES["isa-area-number"]):
        found = known.parts(normalised)
        if found and "/" not in found[3]:
            for text in _forms(profile.separator, *found):
                if profile.parts(text) == found:
                    return found
    return None


def nearest_fitting_tag(
    text: str,
    *,
    profile: TagProfile = DEFAULT,
    codes: Mapping[str, PlantCode] = CODES,
) -> str | None:
    """The tag that fits the plant's pattern and is nearest to a text that does not; None where none is near.

    It mends separators and brackets, drops notes, puts digits for letters that look like them and the
    reverse, and fills the number with zeros where the pattern asks for more digits.

    >>> [nearest_fitting_tag(t) for t in ("PT_1001", "FT-IO1", "pt:1001", "SPARE")]
    ['PT-1001', 'FT-101', 'PT-1001', None]
    """
    read = read_tag(text, profile=profile, codes=codes, users_letters=USERS_CHOICE)
    if read.means or read.placeholder or len(read.normalised) > 80:
        return None
    if read.parsed and read.legal != "illegal":
        number, suffix = read.number, read.suffix
        if suffix and _digit_slip(read.text, suffix):
            number, suffix = _digits_out_of(read.text, number, suffix)
        done = _written(profile, read.prefix, read.letters, number, suffix)
        return done if done != normalise_tag(text) else None
    tag = _with_small_l(split_note(text, profile=profile)[0])
    if read.parsed:
        return _written_mended(tag, profile)
    bracketed = re.sub(r" ?[(\[{]([A-Z0-9]{1,2})[)\]}]$", r"\1", tag)
    separated = re.sub(r"[^A-Z0-9]+", "-", bracketed).strip("-")
    words = tag.split(" ")
    candidates = dict.fromkeys(
        (
            tag,
            bracketed,
            separated,
            # No separator between letters and digits; those between digits part two numbers.
            re.sub("(?<=[A-Z])-|-(?=[A-Z])", "", separated),
            # Words behind the tag; a number there could be a second tag.
            *[
                " ".join(words[:count])
                for count in range(min(len(words) - 1, 6), 0, -1)
                if not re.search("[0-9]", "".join(words[count:]))
            ],
        )
    )
    for candidate in candidates:
        if not candidate or candidate in NOT_TAGS:
            continue
        done = _mended_form(candidate, profile, codes) or _written_mended(candidate, profile)
        if done:
            return done
    return None


def _mended_form(candidate: str, profile: TagProfile, codes: Mapping[str, PlantCode]) -> str | None:
    """A candidate written so that it fits the profile, if its letters are legal or a code."""
    names = (
        profile.name,
        "isa-hyphen",
        *(("isa-unit-prefix", "isa-area-number") if profile is not DEFAULT else ()),
    )
    for known in dict.fromkeys(names):
        parts = (profile if known == profile.name else PROFILES[known]).parts(candidate)
        if parts is None or "/" in parts[3] or parts[1] in NOT_TAGS:
            continue
        prefix, letters, number, suffix = parts
        if code_for(letters, codes) or profile.scheme == "kks" or read_letters(letters).legal != "illegal":
            done = _written(profile, prefix, letters, *_digits_out_of("", number, suffix))
            if done:
                return done
    return None


def _written_mended(candidate: str, profile: TagProfile) -> str | None:
    bare = TagReading(text="", normalised=candidate, verdict="invalid", reason="")
    mended = _mended(bare, profile if profile.scheme == "isa" else DEFAULT)
    if mended is None:
        return None
    number, suffix = _digits_out_of(mended.text, mended.number, mended.suffix)
    return _written(profile, mended.prefix, mended.letters, number, suffix)
