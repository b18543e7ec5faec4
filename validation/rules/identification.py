"""TAG: how an instrument is identified: tags, letters, loops, and what the letters promise."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, fields, replace
from functools import lru_cache
from typing import Final

from instruments.installed import Installed
from instruments.kind import (
    Kind,
    can_bear,
    derive_kind,
    dimension_allowed,
    kinds_from_words,
    letters_for_kind,
    measured_variable,
)
from instruments.letters import is_usual, read_letters
from instruments.record import Instrument, Record
from instruments.signal_words import io_types
from instruments.tag import (
    TagReading,
    assembly_key,
    canonical_tag,
    is_valve,
    look_alike_key,
    loop_agrees,
    loop_of,
    match_key,
    natural_key,
    nearest_fitting_tag,
    nearest_legal_letters,
    normalise_tag,
    read_tag,
)
from instruments.unit import Unit
from instruments.unit_table import unit_label
from loops.plant import Plant, disagreements, loop_of_assembly
from validation.finding import Clear, Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule, title_of

TAG08_DISAGREEMENT_PERCENT = 20.0
# Two or three rows are no column: there a share says nothing of how the list numbers its loops.
TAG08_LEAST_ROWS = 10
ISA = "ISA-5.1-2009, succession of letters (from memory)"
FREE_TEXT = "free-text"


def _no_equipment(installed: Installed, plant: Plant) -> bool:
    return not installed.equipment_tag


def _with_tag(installed: Installed, plant: Plant) -> bool:
    return installed.tag is not None and not installed.equipment_tag


# What a note or a section can hold too: no instrument's data.
_WORDS_ONLY = frozenset({"service", "place", "remarks", "revision"})
_NO_DATA = frozenset(each.name for each in fields(Record)) | {"tag_number", "tag_written", "tag_cell"}
_DATA = tuple(each.name for each in fields(Instrument) if each.name not in _NO_DATA and each.name not in _WORDS_ONLY)


@rule(
    "TAG01",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_no_equipment,
    message="the row has instrument data and no tag",
    basis="common practice",
)
def no_tag(installed: Installed, plant: Plant) -> Verdict:
    """A row that carries instrument data but no tag.

    Why it matters: nothing else can refer to it; it is missed by every count, sheet and check.

    What to do: give it its tag, or take the row out.

    >>> from validation.example import said
    >>> said("TAG01", [{"tag": "", "service": "Feed flow", "LRV": "0 m3/h"}, {"tag": "FT-2", "service": "Feed"}])
    ['Instruments: Feed flow: the row has instrument data and no tag']
    """
    record = installed.record
    if record.tag:
        return None
    if "tag" in record.unread:
        return Unchecked("tag")
    if not record.unitless and not record.unread and all(getattr(record, name) is None for name in _DATA):
        return NotApplicable("words alone: a section or a note")
    reason = record.blanks.get("tag")
    return Found(fields=("tag",), found=f"blank ({reason})" if reason else "blank", wanted="a tag")


@rule(
    "TAG02",
    severity=Severity.FAULT,
    on=Subject.GROUP,
    applies=_with_tag,
    groups=lambda plant: plant.sharing_a_tag(),
    message="{count} rows have the tag {tag} and disagree in {details}",
    basis="ISA-5.1-2009: a tag is of one instrument (from memory)",
)
def one_tag_twice(group: tuple[Installed, ...], plant: Plant) -> Verdict:
    """Two rows with one tag that disagree.

    Why it matters: two instruments under one tag, or one with two sets of figures: whichever is
    built, the other is wrong, and work on the one isolates the other.

    What to do: give the second instrument its own tag, or correct the row that is out of date.
    Rows that agree, or that only give another signal of the same instrument, are one instrument.

    >>> from validation.example import said
    >>> rows = [{"tag": "FIT-3", "service": "Clarifier 3"}, {"tag": "FIT-3", "service": "Clarifier 4"}]
    >>> said("TAG02", rows)
    ['FIT-3: 2 rows have the tag FIT-3 and disagree in service: Clarifier 3 / Clarifier 4']
    >>> said("TAG02", [rows[0], {"tag": "FIT-4", "service": "Clarifier 4"}])
    []
    """
    names: dict[str, None] = {}
    for number, one in enumerate(group):
        for other in group[number + 1 :]:
            names.update(dict.fromkeys(disagreements(one.record, other.record)))
    fields = tuple(names)
    details = "; ".join(
        f"{title_of(name)}: {' / '.join(dict.fromkeys(filter(None, (_shown(each, name) for each in group))))}"
        for name in fields
    )
    cells = tuple(cell for each in group for name in ("tag", *fields) for cell in each.cells(name))
    return Found(
        values={
            "count": sum(each.merged_rows for each in group),
            "tag": group[0].record.tag,
            "fields": ", ".join(title_of(name) for name in fields),
            "details": details,
        },
        fields=fields,
        found=details,
        wanted="one row, or tags of their own",
        cells=cells,
    )


def _shown(installed: Installed, name: str) -> str:
    owner, _, field = name.rpartition(".")
    value = getattr(installed.record.own if owner else installed.record, field, None)
    if value is None:
        return ""
    if isinstance(value, bool):
        return "yes" if value else "no"
    text = f"{value:g}" if isinstance(value, float) else str(value)
    return text if len(text) <= 60 else f"{text[:59]}…"


def _look_alikes(plant: Plant) -> Iterator[tuple[Installed, ...]]:
    alike: dict[object, list[Installed]] = defaultdict(list)
    profile = plant.profile
    for each in plant.live:
        reading = each.tag
        if reading is None or each.equipment_tag:
            continue
        if reading.parsed and not reading.suffix and reading.legal != "illegal":
            prefix = reading.prefix and (reading.prefix.lstrip("0") or "0")
            key = (prefix, reading.letters, reading.number.lstrip("0") or "0", "")
        else:
            key = look_alike_key(reading, profile=profile)
            if key[3].isdigit():
                key = (*key[:3], key[3].lstrip("0") or "0")
        alike[key].append(each)
    for group in alike.values():
        if len(group) < 2:
            continue
        kept = tuple(each for each in group if not _in_a_lettered_set(each.tag, plant))
        if len({match_key(each.tag) for each in kept if each.tag is not None}) > 1:
            yield kept


_NEIGHBOURS = {"I": "HJ", "O": "NP"}


def _in_a_lettered_set(reading: TagReading | None, plant: Plant) -> bool:
    """Whether a suffix I or O is the ninth or fifteenth of a set, so that it is no digit."""
    if reading is None or reading.suffix not in _NEIGHBOURS:
        return False
    tags: frozenset[object] = plant.once("tags", _live_tags)
    prefix, letters, number, suffix = match_key(reading)
    return any((prefix, letters, number, other) in tags for other in _NEIGHBOURS[suffix])


def _live_tags(plant: Plant) -> frozenset[object]:
    return frozenset(match_key(each.tag) for each in plant.live if each.tag is not None)


@rule(
    "TAG03",
    severity=Severity.GAP,
    on=Subject.GROUP,
    applies=_with_tag,
    groups=_look_alikes,
    message="{tags} differ only by {by}",
    basis="common practice",
)
def tags_that_look_alike(group: tuple[Installed, ...], plant: Plant) -> Verdict:
    """Two tags that differ only by leading zeros or by look-alike characters.

    Why it matters: people read them as one tag, programs as two; documents are filed under either.

    What to do: use one spelling, or give the second instrument a number of its own.

    >>> from validation.example import said
    >>> said("TAG03", [{"tag": "FT-101", "service": "a"}, {"tag": "FT-0101", "service": "b"}])
    ['FT-0101, FT-101: FT-0101 and FT-101 differ only by leading zeros']
    >>> said("TAG03", [{"tag": "FT-101", "service": "a"}, {"tag": "FT-102", "service": "b"}])
    []
    """
    tags = sorted({each.record.tag or "" for each in group}, key=natural_key)
    canonical = _canonical_of(group, plant)
    without_zeros = {_without_zeros(each.tag) for each in group if each.tag is not None}
    fixes = tuple(
        Fix(text=f"tag {canonical} for {each.record.tag}", change={"tag": canonical}, subject=each.name)
        for each in group
        if canonical and each.record.tag != canonical
    )
    return Found(
        values={
            "tags": f"{', '.join(tags[:-1])} and {tags[-1]}",
            "by": "leading zeros" if len(without_zeros) == 1 else "characters that look alike",
        },
        fields=("tag",),
        found=", ".join(tags),
        wanted=canonical,
        fixes=fixes,
        cells=tuple(cell for each in group for cell in each.cells("tag")),
    )


def _without_zeros(reading: TagReading) -> tuple[str, ...]:
    if not reading.parsed:
        return (reading.normalised,)
    prefix, letters, number, suffix = match_key(reading)
    return (prefix.lstrip("0"), letters, number.lstrip("0"), suffix.lstrip("0") if suffix.isdigit() else suffix)


def _canonical_of(group: Iterable[Installed], plant: Plant) -> str:
    """Return the spelling that reads without doubt and has the width of the list's other numbers."""
    widths: dict[int, int] = plant.once("number widths", _number_widths)
    best, rank = "", (-1, -1)
    for each in group:
        reading = each.tag
        if reading is None or not reading.parsed or reading.look_alikes:
            continue
        mended = nearest_fitting_tag(reading.text, profile=plant.profile, codes=plant.codes)
        doubtful = mended is not None and match_key(read_tag(mended, profile=plant.profile)) != match_key(reading)
        doubtful = doubtful or reading.suffix in _NEIGHBOURS
        here = (0 if doubtful else 1, widths.get(len(reading.number), 0))
        if here > rank:
            best, rank = canonical_tag(reading, profile=plant.profile), here
    return best


def _number_widths(plant: Plant) -> dict[int, int]:
    widths: dict[int, int] = defaultdict(int)
    for each in plant.live:
        if each.tag is not None and each.tag.parsed:
            widths[len(each.tag.number)] += 1
    return widths


@rule(
    "TAG04",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: (
        installed.tag is not None and not installed.equipment_tag and installed.record.tag_cell is None
    ),
    message="{tag} does not fit the plant's pattern ({profile}): {reason}",
    basis="the plant's tag pattern; where it states none, the one that most of its tags fit",
)
def tag_off_pattern(installed: Installed, plant: Plant) -> Verdict:
    """A tag that does not fit the plant's pattern, or has a character that only looks Latin.

    Why it matters: no other list will match it, and a search does not find it.

    What to do: write the tag as the plant writes tags. Separators alone are no matter.

    >>> from validation.example import said
    >>> others = [{"tag": "PT-1001"}, {"tag": "PT-1002"}]
    >>> said("TAG04", [{"tag": "PT_1003"}, *others])
    ["PT_1003: PT_1003 does not fit the plant's pattern (isa-hyphen): PT-1003 would"]
    >>> said("TAG04", [{"tag": "PT 1003"}, *others])
    []
    """
    reading = installed.tag
    assert reading is not None
    if not reading.look_alikes:
        if plant.profile.name == FREE_TEXT:
            return NotApplicable("the tags follow no pattern")
        if reading.parsed and not (reading.suffix and reading.verdict == "warn"):
            return None
    written = installed.record.tag_written or installed.record.tag or ""
    message = ""
    # Of a word in Cyrillic or Greek letters only some look Latin: it is read as what it is.
    if reading.look_alikes and reading.normalised.isascii() and not _writes_other_letters(plant):
        odd = "".join(dict.fromkeys(reading.look_alikes))
        message = "{tag} has a character that only looks Latin: {reason}"
        if len(odd) > 1:
            message = "{tag} has characters that only look Latin: {reason}"
        nearest, reason = _in_latin(reading, plant), odd
    elif plant.profile.name == FREE_TEXT:
        return NotApplicable("the tags follow no pattern")
    else:
        nearest = nearest_fitting_tag(reading.text, profile=plant.profile, codes=plant.codes) or ""
        if reading.parsed and (not nearest or _in_a_lettered_set(reading, plant)):
            return None
        if reading.parsed:
            mended = read_tag(nearest, profile=plant.profile, codes=plant.codes)
            if match_key(mended) == match_key(reading):
                return None
        reason = f"{nearest} would" if nearest else _why_not(reading)
    return Found(
        values={"tag": written, "profile": plant.profile.name, "reason": reason},
        fields=("tag",),
        found=written,
        wanted=nearest,
        fixes=(Fix(text=f"tag {nearest}", change={"tag": nearest}),) if nearest else (),
        message=message,
    )


def _writes_other_letters(plant: Plant) -> bool:
    """Whether the plant's tags are free text in which other letters than Latin ones stand for themselves."""
    return plant.profile.name == FREE_TEXT and bool(plant.once("other letters in tags", _has_other_letters))


def _has_other_letters(plant: Plant) -> bool:
    return any(
        sign.isalpha() and not sign.isascii()
        for each in plant.live
        if each.tag is not None and not each.tag.normalised.isascii()
        for sign in each.tag.normalised
    )


def _in_latin(reading: TagReading, plant: Plant) -> str:
    if reading.parsed:
        return canonical_tag(reading, profile=plant.profile)
    if plant.profile.name == FREE_TEXT:
        return reading.normalised
    return nearest_fitting_tag(reading.normalised, profile=plant.profile, codes=plant.codes) or ""


def _why_not(reading: TagReading) -> str:
    if not reading.reason or reading.reason.startswith("does not fit"):
        return "it cannot be parted into letters and number"
    return reading.reason


# Whose letters are a name (LCP, MCC, UPS) and no functions, where the list says that they are one of these.
_NAMED: Final = frozenset({Kind.PANEL, Kind.JUNCTION_BOX, Kind.CARD, Kind.BARRIER, Kind.ISOLATOR, Kind.POWER_SUPPLY})


def _letters_asked(installed: Installed, plant: Plant) -> bool:
    reading = installed.tag
    if installed.kind in _NAMED and installed.kind_from != "letters":
        return False
    return (
        reading is not None
        and reading.parsed
        and reading.code is None
        and reading.legal != ""
        and not installed.equipment_tag
    )


@rule(
    "TAG05",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_letters_asked,
    message="the letters {letters} break the rules of succession: {reason}",
    basis=ISA,
)
def letters_out_of_order(installed: Installed, plant: Plant) -> Verdict:
    """Identification letters that break the rules of succession and are no plant code.

    Why it matters: the letters say what is measured and what the device does; out of order they say
    something else, or nothing.

    What to do: use the nearest legal letters, or add the code to the plant's code table.

    >>> from validation.example import said
    >>> said("TAG05", [{"tag": "TCI-101"}])
    ['TCI-101: the letters TCI break the rules of succession: readout I after output letter']
    >>> said("TAG05", [{"tag": "TIC-101"}])
    []
    """
    reading = installed.tag
    assert reading is not None
    if reading.legal == "legal":
        return None
    if _alarm_is_last(reading.letters) and plant.once("writes alarms last", _writes_alarms_last):
        return Clear(assumed=("an alarm behind the controller is the older European order: LICA",))
    if _reports_closed(installed):
        return None
    nearest = nearest_legal_letters(reading.letters, codes=frozenset(plant.codes))
    tags = [_with_letters(reading, letters, plant) for letters in nearest]
    # P1-10 is PI-10 with a digit for a letter.
    slip = nearest_fitting_tag(reading.text, profile=plant.profile, codes=plant.codes)
    if reading.legal == "illegal" and slip:
        tags = [slip]
    fixes = tuple(Fix(text=f"tag {tag}", change={"tag": tag}) for tag in dict.fromkeys(tags) if tag)
    problem = read_letters(reading.letters, users_letters=frozenset(plant.data.users_letters)).problem
    kind, message = Found, ""
    if reading.legal == "ambiguous":
        kind, message = Review, "the letters {letters} are read in two ways: {reason}"
    return kind(
        values={"letters": reading.letters, "reason": problem or reading.reason},
        fields=("tag",),
        found=reading.letters,
        wanted=" or ".join([slip] if slip and reading.legal == "illegal" else nearest),
        fixes=fixes,
        message=message,
    )


def _reports_closed(installed: Installed) -> bool:
    """Whether ZIC or XIC is closed indication beyond doubt: a contact on a digital input controls nothing."""
    if installed.letters not in ("ZIC", "XIC"):
        return False
    kinds = {kind for row in installed.channels for kind in io_types(row.io_type)}
    return kinds == {"DI"} or (installed.kind_from == "row" and installed.kind in (Kind.SWITCH, Kind.LAMP))


@lru_cache(maxsize=4096)
def _alarm_is_last(letters: str) -> bool:
    reading = read_letters(letters)
    return reading.legal == "ambiguous" and reading.problem.startswith("alarm after output")


_ALARM_BEFORE: Final = re.compile(r"[A-Z]{1,3}A[HL]{0,2}C")


def _writes_alarms_last(plant: Plant) -> bool:
    """Whether the list is of the older tradition beyond doubt: one such tag may be a slip, a manner is none.

    It has several such tags, or records and names its measuring points as older lists do; and no tag has
    the alarm before the controller.
    """
    tags = {each.tag.normalised: each for each in plant.live if each.tag is not None and each.letters}
    if any(_ALARM_BEFORE.fullmatch(each.letters) for each in tags.values()):
        return False
    last = sum(_alarm_is_last(each.letters) for each in tags.values())
    older = sum(each.measuring_point or "R" in each.letters[1:] for each in tags.values())
    return last >= 2 or older >= 3


def _with_letters(reading: TagReading, letters: str, plant: Plant) -> str:
    """Return the tag with other letters; empty where the plant's pattern does not hold it."""
    tag = canonical_tag(replace(reading, letters=letters), profile=plant.profile)
    parts = plant.profile.parts(tag)
    return tag if parts is not None and parts[1] == letters else ""


@rule(
    "TAG06",
    severity=Severity.GAP,
    on=Subject.WHOLE,
    message="the first letter {letter} is a user's choice and the plant has not defined it; {count} it",
    basis=ISA,
)
def letter_not_defined(plant: Plant) -> Verdict:
    """A first letter of the user's choice that the plant has not defined.

    Why it matters: C may be conductivity in one list and concentration in the next; nobody can
    check the range of a variable that has no name.

    What to do: define the letter once, among the users' first letters on the Plant sheet.

    >>> from validation.example import said
    >>> said("TAG06", [{"tag": "MT-31"}])
    ["list.xlsx: the first letter M is a user's choice and the plant has not defined it; 1 tag uses it"]
    >>> said("TAG06", [{"tag": "MT-31"}], plant={"users' first letters": "M = moisture"})
    []
    """
    used: dict[str, list[Installed]] = defaultdict(list)
    for each in plant.live:
        if each.tag is not None and each.tag.undefined and not each.equipment_tag:
            used[each.tag.undefined].append(each)
    return [
        Found(
            values={
                "letter": letter,
                "count": "1 tag uses" if len(members) == 1 else f"{len(members)} tags use",
            },
            fields=("tag",),
            part=letter,
            found=", ".join(each.name for each in members[:3]),
            wanted=f"{letter} = what it measures",
            fixes=(Fix(text=f"define {letter} among the users' first letters of the plant"),),
            cells=members[0].cells("tag"),
        )
        for letter, members in sorted(used.items())
    ]


def _loop_asked(installed: Installed, plant: Plant) -> bool:
    return installed.tag is not None and installed.tag.parsed and not installed.equipment_tag


def _valves(plant: Plant) -> dict[object, list[Installed]]:
    """Return the valves by what the devices of an assembly share with theirs."""
    valves: dict[object, list[Installed]] = defaultdict(list)
    for each in plant.live:
        if each.tag is not None and is_valve(each.tag):
            valves[assembly_key(each.tag)].append(each)
    return valves


def _valves_of(installed: Installed, plant: Plant) -> list[Installed]:
    """Return the valves that an instrument may belong to: X, Z, H or Y with a valve's number."""
    reading = installed.tag
    if reading is None or is_valve(reading):
        return []
    key = assembly_key(reading)
    if key is None:
        return []
    valves: dict[object, list[Installed]] = plant.once("valves by assembly", _valves)
    return valves.get(key, [])


def _compared(stated: str, reading: TagReading, plant: Plant) -> bool | None:
    """Whether a loop is the one that a tag names by itself; None where that cannot be told."""
    if stated == reading.loop:
        return True
    if reading.scheme == "kks":
        return _compared_by_kks(stated, reading, plant)
    agrees = loop_agrees(stated, reading, profile=plant.profile, numbering=plant.data.numbering)
    if agrees and len(reading.suffix) == 1 and reading.suffix.isalpha():
        # Loop F-101A is not the loop of FT-101B, whether the letter is the train's or the device's.
        parts = plant.profile.parts(normalise_tag(stated))
        if parts is not None and len(parts[3]) == 1 and parts[3].isalpha() and parts[3] != reading.suffix:
            return False
    return agrees


def _compared_by_kks(stated: str, reading: TagReading, plant: Plant) -> bool | None:
    parts = plant.profile.parts(normalise_tag(stated))
    if parts is None:
        return None
    return parts[:3] == (reading.prefix, reading.letters, reading.number)


def _agrees(installed: Installed, plant: Plant) -> bool | None:
    """Whether the loop column names the loop that the tag, or the valve of its assembly, gives."""
    reading, stated = installed.tag, installed.record.loop
    assert reading is not None
    assert stated is not None
    agrees = _compared(stated, reading, plant)
    valves = _valves_of(installed, plant)
    if agrees or not valves:
        return agrees
    key = normalise_tag(stated)
    for valve in valves:
        assert valve.tag is not None
        # Where the valve's own loop is wrong, that is found on the valve.
        if (valve.record.loop and normalise_tag(valve.record.loop) == key) or _compared(stated, valve.tag, plant):
            return True
    loop = plant.loop_of(installed)
    others = [each for each in loop.members if each is not installed] if loop is not None else []
    if any(
        each.tag is not None and not _valves_of(each, plant) and _compared(stated, each.tag, plant) for each in others
    ):
        # The loop is another one's by right: its valve may stand in a list that is not here.
        return agrees
    return False


def _answers(plant: Plant) -> dict[int, bool | None]:
    return {id(each): _agrees(each, plant) for each in plant.live if each.record.loop and _loop_asked(each, plant)}


def _another_numbering(plant: Plant) -> Verdict:
    answers: dict[int, bool | None] = plant.once("loop column against tag", _answers)
    told = sum(1 for agrees in answers.values() if agrees is not None)
    differing = [each for each in plant.live if answers.get(id(each)) is False]
    limit = plant.threshold("TAG08 disagreement %", TAG08_DISAGREEMENT_PERCENT)
    if told < TAG08_LEAST_ROWS or len(differing) * 100 <= limit * told:
        return None
    return Found(
        values={"count": len(differing), "of": told},
        fields=("loop",),
        message="the loop column differs from the tags in {count} of {of} rows: the list numbers its loops in "
        "another way",
        found=", ".join(f"{each.name} in {each.record.loop}" for each in differing[:3]),
        wanted="the plant's numbering stated as parallel or serial, or the column left to decide",
        cells=differing[0].cells("loop"),
    )


@rule(
    "TAG08",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_loop_asked,
    needs=("record.loop",),
    whole=_another_numbering,
    message="the loop column says {loop}, the tag gives {derived}",
    basis="ISA-5.1-2009, loop identification (from memory)",
)
def loop_against_tag(installed: Installed, plant: Plant) -> Verdict:
    """A loop column that does not name the loop that the tag gives.

    Why it matters: the instrument is drawn and checked on another loop's sheet. The column decides
    until it is corrected.

    What to do: correct the loop, or the tag. What carries a valve's number (its switches, its
    solenoid) belongs to the valve's loop.

    >>> from validation.example import said
    >>> said("TAG08", [{"tag": "FT-101", "loop": "F-102"}])
    ['FT-101: the loop column says F-102, the tag gives F-101']
    >>> said("TAG08", [{"tag": "FT-101", "loop": "F-101"}])
    []
    """
    reading = installed.tag
    assert reading is not None
    answers: dict[int, bool | None] = plant.once("loop column against tag", _answers)
    agrees = answers[id(installed)] if id(installed) in answers else _agrees(installed, plant)
    if agrees:
        return None
    if agrees is None:
        if reading.code is not None and reading.code.first is None:
            return Unchecked(f"first letter of the plant code {reading.letters}")
        if reading.legal == "illegal":
            return Unchecked("tag")
        return Unchecked("loop in a form that can be compared")
    stated = installed.record.loop or ""
    by_valve, derived = _loop_by_right(installed, plant)
    message = "the loop column says {loop}, the tag's number is {derived}" if not derived else ""
    if by_valve:
        message = "the loop column says {loop}, its valve {valve} gives {derived}"
    return Found(
        values={"loop": stated, "derived": derived or reading.number, "valve": by_valve},
        fields=("loop",),
        found=stated,
        wanted=derived or f"a loop with the number {reading.number}",
        fixes=(Fix(text=f"loop {derived}", change={"loop": derived}),) if derived else (),
        message=message,
    )


def _loop_by_right(installed: Installed, plant: Plant) -> tuple[str, str]:
    """Return the valve that decides, if one does, and the loop that valve or tag gives."""
    reading = installed.tag
    assert reading is not None
    # A column of bare numbers is answered with a number.
    bare = not any(sign.isalpha() for sign in installed.record.loop or "")
    numbering = "serial" if bare and reading.scheme != "kks" else plant.data.numbering
    by_valve: list[tuple[TagReading, str]] = []
    for valve in _valves_of(installed, plant):
        assert valve.tag is not None
        stated = valve.record.loop
        loop = stated if stated and _agrees(valve, plant) else loop_of(valve.tag, numbering=numbering)
        if loop:
            by_valve.append((valve.tag, loop))
    by_right = loop_of_assembly(by_valve)
    if by_right is None:
        return "", loop_of(reading, numbering=numbering)
    return next(valve.normalised for valve, loop in by_valve if loop == by_right), by_right


@rule(
    "TAG09",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: (
        installed.kind is not None
        and installed.kind_from in ("row", "type")
        and bool(installed.letters)
        and not installed.equipment_tag
    ),
    message="{kind} cannot bear the letters {letters}",
    basis=ISA,
)
def kind_against_letters(installed: Installed, plant: Plant) -> Verdict:
    """A stated kind that cannot bear the tag's letters.

    Why it matters: one of the two is wrong; what is ordered, wired and checked depends on which.

    What to do: correct the kind or the letters.

    >>> from validation.example import said
    >>> said("TAG09", [{"tag": "PT-101", "kind": "pressure gauge"}])
    ['PT-101: a gauge cannot bear the letters PT']
    >>> said("TAG09", [{"tag": "PG-101", "kind": "pressure gauge"}])
    []
    """
    kind = installed.kind
    assert kind is not None
    reading = installed.tag
    assert reading is not None
    if kind in _NAMED and not is_usual(installed.letters):
        return NotApplicable("letters that are a name")
    bears = can_bear(
        kind,
        installed.letters,
        codes=plant.codes,
        scheme=reading.scheme,
        measuring_point=installed.measuring_point,
    )
    if bears is False and not installed.measuring_point and _may_be_a_point(installed, plant):
        unsaid = can_bear(kind, installed.letters, codes=plant.codes, scheme=reading.scheme, measuring_point=None)
        if unsaid is None:
            return Unchecked("signal")
    of_another = ""
    if bears is not False and installed.kind_from == "row" and reading.scheme == "isa" and reading.code is None:
        of_another = _other_variable(installed.record.kind_written or "", installed.letters)
    if bears is None and not of_another:
        return NotApplicable("practice differs on these letters")
    if bears and not of_another:
        return None
    signal = any(row.signal or row.io_type or row.io_address or row.card for row in installed.signals)
    derived = derive_kind(
        installed.letters,
        has_signal=signal,
        location=installed.record.location,
        codes=plant.codes,
        scheme=reading.scheme,
    )
    letters: Iterable[str] = letters_for_kind(kind, installed.letters, codes=plant.codes)
    if of_another:
        letters = (of_another + installed.letters[1:],)
    tags = [_with_letters(reading, each, plant) for each in letters]
    written = installed.record.kind_written or str(kind)
    return Found(
        values={
            "kind": f"a kind written '{written}'" if of_another else kind.with_article,
            "letters": installed.letters,
            "written": written,
        },
        fields=("kind", "tag") if installed.kind_from == "row" else ("device_type", "tag"),
        found=written,
        wanted="" if derived is None else derived.value,
        fixes=(
            *(Fix(text=f"tag {tag}", change={"tag": tag}) for tag in tags if tag),
            *((Fix(text=f"kind {derived.value}", change={"kind": derived.value}),) if derived else ()),
        ),
    )


# The variable that a kind's words name, where they name one; thermal and float are principles.
_VARIABLE_WORDS: Final = tuple(
    (letter, re.compile(pattern))
    for letter, pattern in (
        ("T", r"\btemp(?:eratur\w*|\.|\b)|\bthermo(?:met|coup|well|elem)|\brtd\b|\bpt ?-?100|\w+thermometer"),
        ("P", r"\bpress(?:ure|\.|\b)|\bdruck|\bmanomet|\bvacuum|\bdp\b|\bdiff"),
        ("F", r"\bflow|\bdurchflu|\brotamet|\bschwebek"),
        ("L", r"\blevel|\bf(?:ü|ue)llstand|\bniveau|\bstandgla|\bstandanz"),
    )
)
# First letters that cannot be measured so: a pressure may stand for flow and level, and for no temperature.
_NOT_MEASURED_BY: Final = {"T": "PFL", "P": "T", "F": "PTL", "L": "PTF"}
# The flow of a flume or a weir is measured by its level.
_OF_A_CHANNEL: Final = re.compile(r"ultraso|radar|channel|flume|weir|hydrosta|submers|bubbler")
_SENSES: Final = frozenset(
    {Kind.TRANSMITTER, Kind.ELEMENT, Kind.SWITCH, Kind.GAUGE, Kind.GLASS, Kind.INDICATOR, Kind.PRIMARY_ELEMENT}
)


@lru_cache(maxsize=4096)
def _other_variable(written: str, letters: str) -> str:
    """The variable that a kind's words name where it is not that of the letters: temperature transmitter, PIT."""
    text = written[:100].casefold()
    named = [letter for letter, pattern in _VARIABLE_WORDS if pattern.search(text)]
    if len(named) != 1 or letters[1:2] in ("D", "F", "Q"):
        return ""
    if letters[0] == "F" and named[0] == "L" and _OF_A_CHANNEL.search(text):
        return ""
    kinds = kinds_from_words(written)
    agrees = not kinds or kinds[0] not in _SENSES or letters[0] not in _NOT_MEASURED_BY[named[0]]
    return "" if agrees else named[0]


def _may_be_a_point(installed: Installed, plant: Plant) -> bool:
    """Whether the list leaves open if a tag names a measuring point: it has no column for what would tell."""
    if plant.has_column("signal", "io_type", "io_address", "card", "device_type"):
        return False
    loop = plant.loop_of(installed)
    return loop is not None and not any(set("TE") & set(each.letters[1:]) for each in loop.members)


_RANGE = ("lrv", "urv")
_SYSTEM_RANGE = ("system_lrv", "system_urv")


def _unit_of(record: Instrument, ends: tuple[str, str], column: Unit | None) -> Unit | None:
    for name in ends:
        quantity = getattr(record, name)
        if quantity is not None and quantity.unit is not None:
            return quantity.unit  # type: ignore[no-any-return]
    return column


def _states_a_range(record: Instrument) -> bool:
    if (
        record.lrv is not None
        or record.urv is not None
        or record.system_lrv is not None
        or record.system_urv is not None
    ):
        return True
    lost = record.unread | record.unitless.keys() if record.unread or record.unitless else ()
    return any(name in lost for name in (*_RANGE, "range_unit"))


def _unit_asked(installed: Installed, plant: Plant) -> bool:
    if not installed.letters or installed.equipment_tag:
        return False
    kind = installed.kind
    return kind is None or kind.measures in ("yes", "system") or _states_a_range(installed.record)


@rule(
    "TAG10",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=_unit_asked,
    message="{letters} with a range in {unit}: {unit} is no unit of {variable}",
    basis=ISA,
)
def unit_against_letters(installed: Installed, plant: Plant) -> Verdict:
    """A range unit that is not of the measured variable's dimension.

    Why it matters: the range was copied from another row, or the tag is of another instrument:
    either way the figures are not this instrument's.

    What to do: correct unit and range, or the tag.

    >>> from validation.example import said
    >>> said("TAG10", [{"tag": "PIT-6004", "LRV": "0", "URV": "50", "range unit": "m3/h"}])
    ['PIT-6004: PIT with a range in m³/h: m³/h is no unit of pressure']
    >>> said("TAG10", [{"tag": "PIT-6004", "LRV": "0", "URV": "50", "range unit": "bar"}])
    []
    """
    record = installed.record
    unit = _unit_of(record, _RANGE, record.range_unit)
    system_unit = _unit_of(record, _SYSTEM_RANGE, record.system_unit)
    field = _answer_for(unit, installed, plant)
    if isinstance(field, Found):
        return field
    # A system may show anything in per cent of its range.
    if system_unit is not None and system_unit.kind != "ratio" and (unit is None or system_unit.kind != unit.kind):
        system = _answer_for(system_unit, installed, plant)
        if isinstance(system, Found):
            # One range that was copied with its unit is one mistake: only the system's differs here.
            return replace(
                system,
                fields=("tag", "system_unit"),
                part="system range",
                cells=tuple(cell for name in _SYSTEM_RANGE for cell in record.cells(name)),
                message="{letters} with a range in the system in {unit}: {unit} is no unit of {variable}",
            )
        if unit is None and installed.kind is not None and installed.kind.measures == "system":
            return system
    return field


def _answer_for(unit: Unit | None, installed: Installed, plant: Plant) -> Found | Unchecked | NotApplicable | None:
    """Return what is to be said of one unit under the instrument's letters."""
    if unit is None:
        return Unchecked("range unit")
    record, reading = installed.record, installed.tag
    assert reading is not None
    scheme = reading.scheme
    square_root_known = record.square_root_device is not None or record.square_root_system is not None
    allowed = dimension_allowed(
        installed.letters,
        unit.kind,
        dp_body=None if installed.body is None else installed.body == "differential",
        square_root_known=square_root_known,
        codes=plant.codes,
        scheme=scheme,
    )
    if allowed:
        return None
    if allowed is None:
        if reading.legal == "illegal":
            return Unchecked("tag")
        if unit.kind == "pressure" and not square_root_known:
            return Unchecked("square root in device or square root in system")
        return NotApplicable("practice differs on this unit")
    label = unit_label(unit)
    variable = (
        measured_variable(installed.letters, codes=plant.codes, scheme=scheme, users_letters=plant.data.users_letters)
        or "the measured variable"
    )
    return Found(
        values={"letters": installed.letters, "unit": label, "variable": variable},
        fields=("tag", "range_unit"),
        found=label,
        wanted=f"a unit of {variable}",
        cells=tuple(cell for name in _RANGE for cell in record.cells(name)),
    )


@rule(
    "TAG13",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=_with_tag,
    message="one cell holds {count} tags: {tags}",
    basis="common practice",
)
def several_tags_in_a_cell(installed: Installed, plant: Plant) -> Verdict:
    """A cell that holds two tags, a list or a range.

    Why it matters: one row's serial number, address and terminals cannot be those of two
    instruments. The row is audited as the tags it means.

    What to do: give each its own row.

    >>> from validation.example import said
    >>> said("TAG13", [{"tag": "TE-2001A/B"}])
    ['TE-2001A/B: one cell holds 2 tags: TE-2001A, TE-2001B']
    >>> said("TAG13", [{"tag": "TE-2001A"}])
    []
    """
    record = installed.record
    if record.tag_cell is None:
        return None
    cells: Mapping[int, _TagCell] = plant.once("cells that hold several tags", _tag_cells)
    cell = cells.get(id(record)) or _TagCell(name=record.tag_cell, tags=())
    if id(record) in cells and not cell.tags:
        return NotApplicable("found on the cell's first tag")
    means = read_tag(record.tag_cell, profile=plant.profile, codes=plant.codes).means or cell.tags
    return Found(
        values={"count": len(means), "tags": ", ".join(means)},
        fields=("tag",),
        subject=cell.name,
        found=record.tag_cell,
        wanted="; ".join(means),
        fixes=(Fix(text=f"a row each: {', '.join(means)}"),),
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class _TagCell:
    """A cell with several tags: what it is called, and its tags; none for all of its records but the first."""

    name: str
    tags: tuple[str, ...]


def _tag_cells(plant: Plant) -> Mapping[int, _TagCell]:
    """Return the cells by record; cells that hold the same text are numbered, as rows that share a tag are."""
    rows: dict[object, list[Instrument]] = defaultdict(list)
    for each in plant.live:
        record = each.record
        if record.tag_cell is not None and not each.equipment_tag:
            origin = record.origin
            where = (origin.place.file, origin.place.sheet, origin.row) if origin is not None else id(record)
            rows[(record.tag_cell, where)].append(record)
    cells: dict[int, _TagCell] = {}
    counts: dict[str, int] = defaultdict(int)
    # The instruments stand in the order of their names, which no order of rows changes.
    for records in rows.values():
        first, *others = sorted(records, key=lambda record: record.tag_number)
        text = first.tag_cell or ""
        counts[text] += 1
        name = text if counts[text] == 1 else f"{text} ({counts[text]})"
        cells[id(first)] = _TagCell(name=name, tags=tuple(record.tag or "" for record in (first, *others)))
        for record in others:
            cells[id(record)] = _TagCell(name=name, tags=())
    return cells
