"""Which instruments stand in for one another: by a safety function, by declared voting, or by their suffixes alone."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Callable, Hashable, Iterable, Iterator, Sequence
from functools import lru_cache
from typing import TYPE_CHECKING, Final, Literal, NamedTuple

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.letters import USERS_CHOICE
from instruments.measurement import variable_of
from instruments.record import Instrument

if TYPE_CHECKING:
    from loops.plant import Plant

By = Literal["declared", "suffix"]


class RedundantGroup(NamedTuple):
    """Instruments that are redundant.

    Attributes
    ----------
    members
        Two or more live instruments, in the order of their tags.
    by
        ``declared`` where they have one safety function and one measured variable, or voting is declared;
        ``suffix`` where nothing but the suffixes of one tag speaks for it, so that a person must say.
    """

    members: tuple[Installed, ...]
    by: By


class Voting(NamedTuple):
    """A voting as declared, `needed` of `total`: None for a letter, or where a word says only that they vote."""

    needed: int | None
    total: int | None


_WORDS: Final = {"one": "1", "two": "2", "three": "3", "four": "4"}
_COUNT_WORD: Final = re.compile(r"\b(one|two|three|four)\b")
_M_OO_N: Final = re.compile(
    r"(?<![a-z0-9])([1-9mn])[ \-]?(?:oo|0o|o0|out[ \-]?of|of|von|aus|v|/)[ \-]?([1-9mn])d?(?![0-9])"
)
_WITH_ZEROS: Final = re.compile(r"(?<![0-9])([1-4])00([1-4])d?(?![0-9])")  # 2003 typed for 2oo3
_NO_VOTING: Final = frozenset(
    {"no", "none", "n", "single", "simplex", "not voted", "no voting", "nil", "false", "non redundant", "non-redundant"}
)


def read_voting(text: str | None) -> Voting | None:
    """Read a voting; None where there is none: a blank, a word that says so, or one out of one.

    >>> read_voting("2oo3"), read_voting("1 out of 2"), read_voting("2003"), read_voting("1oo1")
    (Voting(needed=2, total=3), Voting(needed=1, total=2), Voting(needed=2, total=3), None)
    >>> read_voting("median select"), read_voting("single")
    (Voting(needed=None, total=None), None)
    """
    return _read_voting(text) if text else None


_IN_A_TEXT: Final = re.compile(r"(?<![a-z0-9])[1-4] ?oo ?[1-4]d?(?![a-z0-9])", re.IGNORECASE)


def voting_of(record: Instrument) -> str | None:
    """Return the voting that a row states: in its column, else among its remarks, where it says 2oo3."""
    if record.voting is not None or not record.remarks or "oo" not in record.remarks.casefold():
        return record.voting
    found = _IN_A_TEXT.search(record.remarks[:300])
    return found[0].replace(" ", "").lower() if found else None


@lru_cache(maxsize=4096)
def _read_voting(text: str) -> Voting | None:
    plain = _COUNT_WORD.sub(lambda found: _WORDS[found[1]], " ".join(text[:200].casefold().split()))
    if not plain or plain in _NO_VOTING:
        return None
    found = _M_OO_N.search(plain) or _WITH_ZEROS.search(plain)
    if found is None:
        return Voting(None, None)
    needed, total = (int(part) if part.isdigit() else None for part in found.groups())
    return None if total == 1 else Voting(needed, total)


def redundant_groups(plant: Plant) -> tuple[RedundantGroup, ...]:
    """Return the redundant instruments of a plant, found once.

    What is alike but for its suffix may be split range, wide beside narrow range, or the points of a
    multipoint: whether such a group is redundant a person must say.
    """
    return plant.once("redundant groups", _find)  # type: ignore[no-any-return]


def in_redundant_group(installed: Installed, plant: Plant) -> bool:
    """Whether an instrument is in any of the plant's redundant groups."""
    return installed in plant.once("redundant members", _members)


def how_redundant(members: Iterable[Installed], plant: Plant) -> By:
    """Return how instruments of one redundant group, or some of its members, are known to be redundant."""
    numbers: dict[Installed, frozenset[int]] = plant.once("redundant by declaration", _declared)
    common = frozenset.intersection(*(numbers.get(each, frozenset()) for each in members))
    return "declared" if common else "suffix"


def _members(plant: Plant) -> frozenset[Installed]:
    return frozenset(each for group in redundant_groups(plant) for each in group.members)


def _declared(plant: Plant) -> dict[Installed, frozenset[int]]:
    numbers: dict[Installed, set[int]] = defaultdict(set)
    for number, group in enumerate(redundant_groups(plant)):
        if group.by == "declared":
            for each in group.members:
                numbers[each].add(number)
    return {each: frozenset(found) for each, found in numbers.items()}


# ------------------------------------------------------------------------------------------ what can be redundant

_SENSES: Final = frozenset(
    {Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR, Kind.ELEMENT, Kind.SWITCH}
)
# Letters whose variable the letter itself does not name: two of them are one variable only in one dimension.
_ANY_VARIABLE: Final = frozenset("AQUXY") | frozenset(USERS_CHOICE)


def measured_variable_of(installed: Installed) -> str:
    """Return the measured variable that the tag names: P, PD, T ...; a plant code such as GD is its own."""
    reading = installed.tag
    if reading is not None and reading.code is not None and not reading.code.letters:
        return reading.letters
    return variable_of(installed)


def _senses(installed: Installed) -> bool:
    record = installed.record
    if record.location == "system" or not installed.letters:
        return False
    if installed.kind is None:
        return any(letter in "TES" for letter in installed.letters[1:])
    # An open and a closed contact of one valve are two statements, not one made twice.
    if installed.kind is Kind.SWITCH and installed.letters[0] == "Z":
        return read_voting(voting_of(record)) is not None
    return installed.kind in _SENSES


def _number_of(installed: Installed) -> Hashable:
    tag = installed.tag
    if tag is not None and tag.parsed:
        return tag.prefix, tag.number
    return installed.name


def _without_elements(members: Sequence[Installed]) -> tuple[Installed, ...]:
    """Leave out an element whose transmitter is in the group: they are one measurement."""
    measured = {(_number_of(each), _suffix(each)) for each in members if each.kind is not Kind.ELEMENT}
    return tuple(
        each for each in members if each.kind is not Kind.ELEMENT or (_number_of(each), _suffix(each)) not in measured
    )


def _suffix(installed: Installed) -> str:
    return installed.tag.suffix if installed.tag is not None else ""


# ------------------------------------------------------------------------------------------------- the groups


def _find(plant: Plant) -> tuple[RedundantGroup, ...]:
    by_function: dict[tuple[str, str], list[Installed]] = defaultdict(list)
    by_voting: dict[tuple[str, str], list[Installed]] = defaultdict(list)
    by_letters: dict[Hashable, list[Installed]] = defaultdict(list)
    for each in plant.live:
        if not _senses(each):
            continue
        record, tag = each.record, each.tag
        voting = voting_of(record)
        if record.safety_function or voting:
            variable = measured_variable_of(each)
            votes = read_voting(voting)
            single = voting is not None and votes is None
            functions = safety_functions(record.safety_function) if not single else ()
            for function in functions:
                by_function[function, variable].append(each)
            if votes is not None and not functions:
                by_voting[_plain(voting), variable].append(each)
        if tag is not None and tag.parsed:
            by_letters[tag.prefix, tag.letters, tag.number].append(each)
    groups: dict[frozenset[int], RedundantGroup] = {}
    for (function, variable), members in by_function.items():
        _add(groups, _of_one_function(members, variable, merging=_names_one(function)), "declared")
    for (_, variable), members in by_voting.items():
        _add(groups, _of_one_voting(members, variable), "declared")
    declared: dict[Installed, set[int]] = defaultdict(set)
    for number, group in enumerate(groups.values()):
        for each in group.members:
            declared[each].add(number)
    alike = (_by_suffix(members) for members in by_letters.values() if len(members) > 1)
    _add(groups, (each for each in alike if not _all_together(each, declared)), "suffix")
    return tuple(groups.values())


def _add(groups: dict[frozenset[int], RedundantGroup], found: Iterable[Sequence[Installed]], by: By) -> None:
    for members in found:
        kept = _without_elements(members)
        if len(kept) > 1:
            groups.setdefault(frozenset(map(id, kept)), RedundantGroup(members=kept, by=by))


def _all_together(members: Sequence[Installed], declared: dict[Installed, set[int]]) -> bool:
    return bool(members) and bool(set.intersection(*(declared.get(each, set()) for each in members)))


def _plain(text: str | None) -> str:
    return "".join(text.split()).casefold() if text else ""


_SEVERAL: Final = re.compile(r"[,;&\n]| and | und ")
_NO_FUNCTION: Final = frozenset({"y", "yes", "x", "n", "no", "none", "ja", "nein", "true", "false", "oui", "non"})


def safety_functions(text: str | None) -> tuple[str, ...]:
    """Return the safety functions that a cell names, without case and blanks; a yes or no names none.

    >>> safety_functions("SIF-101; SIF 102"), safety_functions("Yes")
    (('sif-101', 'sif102'), ())
    """
    if not text:
        return ()
    names = (_plain(part) for part in _SEVERAL.split(text))
    return tuple(dict.fromkeys(name for name in names if name and name not in _NO_FUNCTION))


def _names_one(function: str) -> bool:
    """Whether a name is of one function: ESD, SIS, trip without a number are a system or a word for all of them."""
    return any(sign.isdigit() for sign in function)


def _clusters(members: Iterable[Installed]) -> list[list[Installed]]:
    clusters: dict[Hashable, list[Installed]] = defaultdict(list)
    for each in members:
        clusters[_number_of(each)].append(each)
    return list(clusters.values())


def _of_one_function(members: Sequence[Installed], variable: str, *, merging: bool) -> Iterator[Sequence[Installed]]:
    """Part the members of a safety function that share a variable: those of one number stay together.

    Different numbers measure the same thing unless the rows say that they do not: another item of
    equipment or line, a trip the other way, another voting, or a voting that is complete without the
    rest.
    """
    open_ones: list[list[Installed]] = []
    for cluster in _clusters(members):
        votes = read_voting(voting_of(cluster[0].record))
        if len(cluster) > 1 and (not merging or (votes is not None and votes.total == len(cluster))):
            yield cluster
        else:
            open_ones.append(cluster)
    if not merging:
        return
    yield from _alike(
        open_ones,
        (_voting_said, _direction_said, _place_said, _dimension_said if variable in _ANY_VARIABLE else _nothing),
    )


def _of_one_voting(members: Sequence[Installed], variable: str) -> Iterator[Sequence[Installed]]:
    """Part those that declare one voting and no safety function: by number, else by equipment or line."""
    open_ones: list[list[Installed]] = []
    for cluster in _clusters(members):
        if len(cluster) > 1:
            yield cluster
        else:
            open_ones.append(cluster)
    alone = [each for cluster in open_ones for each in cluster]
    votes = read_voting(voting_of(alone[0].record)) if alone else None
    if votes is not None and votes.total == len(alone):
        yield alone
        return
    placed: dict[Hashable, list[Installed]] = defaultdict(list)
    for each in alone:
        where = _place_said(each)
        dimension = _dimension_said(each) if variable in _ANY_VARIABLE else ""
        if where:
            placed[where, _direction_said(each), dimension].append(each)
    yield from placed.values()


def _alike(
    clusters: Sequence[list[Installed]], says: Sequence[Callable[[Installed], str]]
) -> Iterator[Sequence[Installed]]:
    """Join the clusters that contradict one another in nothing; a blank goes with the only value that is said."""
    said = [[_first(say(each) for each in cluster) for say in says] for cluster in clusters]
    for place in range(len(says)):
        values = {row[place] for row in said if row[place]}
        if len(values) == 1:
            only = values.pop()
            for row in said:
                row[place] = only
    joined: dict[tuple[str, ...], list[Installed]] = defaultdict(list)
    for cluster, row in zip(clusters, said, strict=True):
        joined[tuple(row)].extend(cluster)
    yield from joined.values()


def _first(texts: Iterable[str]) -> str:
    return next((text for text in texts if text), "")


def _voting_said(installed: Installed) -> str:
    return _plain(voting_of(installed.record))


def _direction_said(installed: Installed) -> str:
    if installed.record.trip_direction:
        return installed.record.trip_direction
    ending = installed.letters[-1:]
    if installed.kind is Kind.SWITCH and ending in ("H", "L"):
        return "high" if ending == "H" else "low"
    return ""


def _place_said(installed: Installed) -> str:
    record = installed.record
    if record.equipment:
        return f"equipment {_plain(record.equipment)}"
    return f"line {_plain(record.line)}" if record.line else ""


def _dimension_said(installed: Installed) -> str:
    record = installed.record
    for value in (record.urv, record.trip, record.system_urv):
        if value is not None and value.unit is not None:
            return value.unit.dimension
    return ""


def _nothing(installed: Installed) -> str:
    return ""


def _by_suffix(members: Sequence[Installed]) -> Sequence[Installed]:
    """Return one row for each suffix: rows that share a whole tag are another mistake, and the first speaks."""
    return tuple({_suffix(each): each for each in reversed(members)}.values())[::-1]
