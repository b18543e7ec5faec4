"""TAG: how an instrument is identified: tags, letters, loops, and what the letters promise."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Iterator

from instruments.installed import Installed
from instruments.kind import can_bear, derive_kind, dimension_allowed, letters_for_kind, measured_variable
from instruments.letters import read_letters
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
    read_tag,
)
from instruments.unit import Unit
from instruments.unit_table import unit_label
from loops.plant import Plant, disagreements
from validation.finding import Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule, title_of

TAG08_DISAGREEMENT_PERCENT = 20.0
ISA = "ISA-5.1-2009, succession of letters (from memory)"
FREE_TEXT = "free-text"


@rule(
    "TAG01",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
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
    if installed.record.tag:
        return None
    return Found(fields=("tag",), found="no tag", wanted="a tag")


def _with_tag(installed: Installed, plant: Plant) -> bool:
    return installed.tag is not None and not installed.equipment_tag


def _sharing(plant: Plant) -> Iterator[tuple[Installed, ...]]:
    shared: dict[object, list[Installed]] = defaultdict(list)
    for each in plant.live:
        if each.tag is not None:
            shared[match_key(each.tag)].append(each)
    return (tuple(group) for group in shared.values() if len(group) > 1)


@rule(
    "TAG02",
    severity=Severity.FAULT,
    on=Subject.GROUP,
    applies=lambda installed, plant: installed.tag is not None,
    groups=_sharing,
    message="{count} rows have the tag {tag} and disagree in {fields}: {details}",
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
        " / ".join(dict.fromkeys(_shown(each, name) for each in group if _shown(each, name)))
        for name in fields
    )
    cells = tuple(cell for each in group for name in ("tag", *fields) for cell in each.cells(name))
    return Found(
        values={
            "count": len(group),
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
    return "" if value is None else str(value)


def _look_alikes(plant: Plant) -> Iterator[tuple[Installed, ...]]:
    alike: dict[object, list[Installed]] = defaultdict(list)
    for each in plant.live:
        if each.tag is not None:
            alike[look_alike_key(each.tag, profile=plant.profile)].append(each)
    for group in alike.values():
        if len(group) > 1 and len({match_key(each.tag) for each in group if each.tag is not None}) > 1:
            yield tuple(group)


@rule(
    "TAG03",
    severity=Severity.GAP,
    on=Subject.GROUP,
    applies=lambda installed, plant: installed.tag is not None,
    groups=_look_alikes,
    message="{tags} differ only by leading zeros or by characters that look alike",
    basis="common practice",
)
def tags_that_look_alike(group: tuple[Installed, ...], plant: Plant) -> Verdict:
    """Two tags that differ only by leading zeros or by look-alike characters.

    Why it matters: people read them as one tag, programs as two; documents are filed under either.

    What to do: use one spelling, or give the second instrument a number of its own.

    >>> from validation.example import said
    >>> said("TAG03", [{"tag": "FT-101", "service": "a"}, {"tag": "FT-0101", "service": "b"}])
    ['FT-0101, FT-101: FT-0101, FT-101 differ only by leading zeros or by characters that look alike']
    >>> said("TAG03", [{"tag": "FT-101", "service": "a"}, {"tag": "FT-102", "service": "b"}])
    []
    """
    tags = sorted({each.record.tag or "" for each in group}, key=natural_key)
    canonical = _canonical_of(group, plant)
    fixes = tuple(
        Fix(text=f"{each.record.tag}: {canonical}", change={"tag": canonical}, subject=each.name)
        for each in group
        if canonical and each.record.tag != canonical
    )
    return Found(
        values={"tags": ", ".join(tags)},
        fields=("tag",),
        found=", ".join(tags),
        wanted=canonical,
        fixes=fixes,
        cells=tuple(cell for each in group for cell in each.cells("tag")),
    )


def _canonical_of(group: Iterable[Installed], plant: Plant) -> str:
    """Return the spelling that reads without doubt and has the width of the list's other numbers."""
    widths: dict[int, int] = plant.once("number widths", _number_widths)
    best, rank = "", (-1, -1)
    for each in group:
        reading = each.tag
        if reading is None or not reading.parsed or reading.look_alikes:
            continue
        mended = nearest_fitting_tag(reading.text, profile=plant.profile, codes=plant.codes)
        doubtful = mended is not None and match_key(read_tag(mended, profile=plant.profile)) != match_key(
            reading
        )
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
        _with_tag(installed, plant) and plant.profile.name != FREE_TEXT and installed.record.tag_cell is None
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
    if reading.means:
        return NotApplicable()
    nearest = nearest_fitting_tag(reading.text, profile=plant.profile, codes=plant.codes)
    slipped = False
    if reading.parsed and reading.verdict == "warn" and nearest is not None:
        slipped = match_key(read_tag(nearest, profile=plant.profile, codes=plant.codes)) != match_key(reading)
    if reading.parsed and not reading.look_alikes and not slipped:
        return None
    if reading.look_alikes:
        nearest = canonical_tag(reading, profile=plant.profile)
        reason = f"{', '.join(reading.look_alikes)} only looks Latin"
    elif nearest:
        reason = f"{nearest} would"
    else:
        reason = reading.reason or "it cannot be parted into letters and number"
    return Found(
        values={
            "tag": installed.record.tag_written or installed.record.tag,
            "profile": plant.profile.name,
            "reason": reason,
        },
        fields=("tag",),
        found=installed.record.tag or "",
        wanted=nearest or "",
        fixes=(Fix(text=f"tag {nearest}", change={"tag": nearest}),) if nearest else (),
    )


def _letters_asked(installed: Installed, plant: Plant) -> bool:
    reading = installed.tag
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
    nearest = nearest_legal_letters(reading.letters, codes=frozenset(plant.codes))
    fixes = tuple(
        Fix(text=f"tag {tag}", change={"tag": tag})
        for tag in (_with_letters(reading, letters, plant) for letters in nearest)
        if tag
    )
    problem = read_letters(reading.letters, users_letters=frozenset(plant.data.users_letters)).problem
    kind, message = Found, ""
    if reading.legal == "ambiguous":
        kind, message = Review, "the letters {letters} are read in two ways: {reason}"
    return kind(
        values={"letters": reading.letters, "reason": problem or reading.reason},
        fields=("tag",),
        found=reading.letters,
        wanted=" or ".join(nearest),
        fixes=fixes,
        message=message,
    )


def _with_letters(reading: TagReading, letters: str, plant: Plant) -> str:
    from dataclasses import replace

    return canonical_tag(replace(reading, letters=letters), profile=plant.profile)


@rule(
    "TAG06",
    severity=Severity.GAP,
    on=Subject.WHOLE,
    message="the first letter {letter} is a user's choice and the plant has not defined it; {count} tags use it",
    basis=ISA,
)
def letter_not_defined(plant: Plant) -> Verdict:
    """A first letter of the user's choice that the plant has not defined.

    Why it matters: C may be conductivity in one list and concentration in the next; nobody can
    check the range of a variable that has no name.

    What to do: define the letter once, among the users' first letters on the Plant sheet.

    >>> from validation.example import said
    >>> said("TAG06", [{"tag": "MT-31"}])
    ["list.xlsx: the first letter M is a user's choice and the plant has not defined it; 1 tags use it"]
    >>> said("TAG06", [{"tag": "MT-31"}], plant={"users' first letters": "M = moisture"})
    []
    """
    used: dict[str, list[Installed]] = defaultdict(list)
    for each in plant.live:
        if each.tag is not None and each.tag.undefined and not each.equipment_tag:
            used[each.tag.undefined].append(each)
    return [
        Found(
            values={"letter": letter, "count": len(members)},
            fields=("tag",),
            part=letter,
            found=", ".join(each.name for each in members[:3]),
            wanted=f"{letter} = what it measures",
            fixes=(Fix(text=f"define {letter} among the users' first letters of the plant"),),
            cells=members[0].cells("tag"),
        )
        for letter, members in sorted(used.items())
    ]


def _valve_loops(plant: Plant) -> dict[object, set[str]]:
    loops: dict[object, set[str]] = defaultdict(set)
    for each in plant.live:
        if each.tag is not None and each.record.loop and is_valve(each.tag):
            key = assembly_key(each.tag)
            if key is not None:
                loops[key].add(each.record.loop)
    return loops


def _agrees(installed: Installed, plant: Plant) -> bool | None:
    reading = installed.tag
    assert reading is not None and installed.record.loop is not None
    loops: dict[object, set[str]] = plant.once("loops of valves", _valve_loops)
    key = assembly_key(reading)
    return loop_agrees(
        installed.record.loop,
        reading,
        profile=plant.profile,
        numbering=plant.data.numbering,
        valve_loops=loops.get(key, ()) if key is not None else (),
    )


def _loop_asked(installed: Installed, plant: Plant) -> bool:
    return installed.tag is not None and installed.tag.parsed and not installed.equipment_tag


def _another_numbering(plant: Plant) -> Verdict:
    asked = [each for each in plant.live if each.record.loop and _loop_asked(each, plant)]
    answers = [(each, _agrees(each, plant)) for each in asked]
    differing = [each for each, agrees in answers if agrees is False]
    told = sum(1 for _, agrees in answers if agrees is not None)
    limit = plant.threshold("TAG08 disagreement %", TAG08_DISAGREEMENT_PERCENT)
    # Two or three rows are no column: there a share says nothing of how the list numbers its loops.
    if told < 10 or len(differing) * 100 <= limit * told:
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

    What to do: correct the loop, or the tag.

    >>> from validation.example import said
    >>> said("TAG08", [{"tag": "FT-101", "loop": "F-102"}])
    ['FT-101: the loop column says F-102, the tag gives F-101']
    >>> said("TAG08", [{"tag": "FT-101", "loop": "F-101"}])
    []
    """
    reading = installed.tag
    assert reading is not None
    if reading.code is not None and reading.code.first is None and not reading.code.letters:
        agrees = _agrees(installed, plant)
        if agrees is None:
            return Unchecked(f"first letter of the plant code {reading.letters}")
    else:
        agrees = _agrees(installed, plant)
    if agrees is None:
        if reading.code is not None and reading.code.first is None:
            return Unchecked(f"first letter of the plant code {reading.letters}")
        return Unchecked("loop in a form that can be compared")
    if agrees:
        return None
    derived = loop_of(reading, numbering=plant.data.numbering)
    return Found(
        values={"loop": installed.record.loop, "derived": derived or "another"},
        fields=("loop",),
        found=installed.record.loop or "",
        wanted=derived,
        fixes=(Fix(text=f"loop {derived}", change={"loop": derived}),) if derived else (),
    )


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
    message="a {kind} cannot bear the letters {letters}",
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
    bears = can_bear(
        kind,
        installed.letters,
        codes=plant.codes,
        scheme=reading.scheme,
        measuring_point=installed.measuring_point,
    )
    if bears is None:
        return NotApplicable("practice differs on these letters")
    if bears:
        return None
    derived = derive_kind(installed.letters, has_signal=True, codes=plant.codes, scheme=reading.scheme)
    letters = letters_for_kind(kind, installed.letters, codes=plant.codes)
    tags = [_with_letters(reading, each, plant) for each in letters]
    written = installed.record.kind_written or str(kind)
    return Found(
        values={"kind": str(kind), "letters": installed.letters, "written": written},
        fields=("kind", "tag") if installed.kind_from == "row" else ("device_type", "tag"),
        found=written,
        wanted="" if derived is None else derived.value,
        fixes=(
            *(Fix(text=f"tag {tag}", change={"tag": tag}) for tag in tags if tag),
            *((Fix(text=f"kind {derived.value}", change={"kind": derived.value}),) if derived else ()),
        ),
    )


def _range_unit(installed: Installed) -> Unit | None:
    record = installed.record
    for quantity in (record.lrv, record.urv):
        if quantity is not None and quantity.unit is not None:
            return quantity.unit
    return record.range_unit


@rule(
    "TAG10",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: (
        bool(installed.letters)
        and not installed.equipment_tag
        and (
            installed.record.lrv is not None
            or installed.record.urv is not None
            or installed.kind is None
            or installed.kind.measures != "no"
        )
    ),
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
    unit = _range_unit(installed)
    if unit is None:
        return Unchecked("range unit")
    record = installed.record
    allowed = dimension_allowed(
        installed.letters,
        unit.kind,
        dp_body=None if installed.body is None else installed.body == "differential",
        square_root_known=record.square_root_device is not None or record.square_root_system is not None,
        codes=plant.codes,
        scheme=installed.tag.scheme if installed.tag else "isa",
    )
    if allowed is None:
        return Unchecked("square root")
    if allowed:
        return None
    label = unit_label(unit)
    variable = measured_variable(installed.letters, codes=plant.codes)
    field = "lrv" if record.lrv is not None else "range_unit"
    return Found(
        values={"letters": installed.letters, "unit": label, "variable": variable or "the measured variable"},
        fields=("tag", "range_unit" if record.range_unit is not None else field),
        found=label,
        wanted=f"a unit of {variable or 'the measured variable'}",
        cells=(*record.cells("lrv"), *record.cells("urv")),
    )


@rule(
    "TAG13",
    severity=Severity.GAP,
    on=Subject.INSTRUMENT,
    applies=lambda installed, plant: installed.tag is not None,
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
    if record.tag_number > 0:
        return NotApplicable("found on the cell's first tag")
    means = read_tag(record.tag_cell, profile=plant.profile, codes=plant.codes).means
    return Found(
        values={"count": len(means), "tags": ", ".join(means)},
        fields=("tag",),
        subject=record.tag_cell,
        found=record.tag_cell,
        wanted="; ".join(means),
        fixes=(Fix(text=f"a row each: {', '.join(means)}"),),
    )
