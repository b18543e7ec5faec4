"""The audit: every rule over every subject of a plant, with the five outcomes counted."""

from __future__ import annotations

import gc
from collections import Counter
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from functools import partial
from typing import Any

from instruments.installed import Installed
from instruments.origin import Cell
from instruments.tag import natural_key
from loops.certificates import certificates_of
from loops.circuit import Circuit
from loops.plant import Plant
from validation.finding import (
    Clear,
    Finding,
    Found,
    NotApplicable,
    Outcome,
    Review,
    Severity,
    Unchecked,
    Verdict,
)
from validation.rule import Registry, Rule, Subject, load_rules, title_of


@dataclass(slots=True)
class Coverage:
    """What one rule came to: its subjects by outcome, and which blanks left it unchecked."""

    rule: str
    outcomes: Counter[Outcome] = field(default_factory=Counter)
    unchecked: dict[tuple[str, ...], list[str]] = field(default_factory=dict)
    assumed: Counter[str] = field(default_factory=Counter)

    @property
    def because(self) -> Counter[str]:
        """How often each blank left a subject unchecked."""
        because: Counter[str] = Counter()
        for names, subjects in self.unchecked.items():
            for name in names:
                because[name] += len(subjects)
        return because

    def count(self, outcome: Outcome) -> int:
        """Return the number of subjects with that outcome."""
        return self.outcomes[outcome]


@dataclass(frozen=True, slots=True)
class Broken:
    """A rule that raised: the code, the subject and what it said."""

    rule: str
    subject: str
    error: str


@dataclass(slots=True)
class Audit:
    """All that the rules said of a plant."""

    plant: Plant
    findings: list[Finding] = field(default_factory=list)
    coverage: dict[str, Coverage] = field(default_factory=dict)
    broken: list[Broken] = field(default_factory=list)
    assumptions: tuple[str, ...] = ()

    def of(self, outcome: Outcome) -> list[Finding]:
        """Return the findings, or the reviews."""
        return [finding for finding in self.findings if finding.outcome is outcome]

    def counts(self) -> dict[str, int]:
        """Return the number of findings by severity, and of reviews."""
        counts = {severity.value: 0 for severity in Severity}
        for finding in self.of(Outcome.FINDING):
            counts[finding.severity.value] += 1
        counts["review"] = len(self.of(Outcome.REVIEW))
        return counts


def audit(
    plant: Plant,
    *,
    rules: Registry | None = None,
    codes: Iterable[str] | None = None,
    raise_errors: bool = False,
    on_rule: Callable[[int, int, str], None] | None = None,
) -> Audit:
    """Run the rules over the plant.

    Parameters
    ----------
    plant
        The whole plant.
    rules
        The registry; default: every rule of the package.
    codes
        Only these rules.
    raise_errors
        Raise what a rule raises, for tests; otherwise the rule is reported as broken.
    on_rule
        Called before each rule with its number, their count and its code.
    """
    registry = rules if rules is not None else load_rules()
    wanted = None if codes is None else frozenset(codes)
    chosen = [each for each in registry if wanted is None or each.code in wanted]
    result = Audit(plant=plant)
    sorted_already: _Sorted = {who: None for who, rules_of_it in Counter(map(_who, chosen)).items() if rules_of_it > 1}
    # Millions of short-lived results and no cycles among them: the collector would only walk the records.
    collecting = gc.isenabled()
    gc.disable()
    try:
        for number, each in enumerate(chosen, start=1):
            if on_rule is not None:
                on_rule(number, len(chosen), each.code)
            result.coverage[each.code] = _run(each, plant, result, raise_errors, sorted_already)
    finally:
        if collecting:
            gc.enable()
    result.findings.sort(key=finding_order)
    result.assumptions = _assumptions(plant, result)
    return result


def finding_order(finding: Finding) -> tuple[Any, ...]:
    """Danger first, then the rule, the subject in natural order, the part and the fields."""
    return (
        finding.outcome is Outcome.REVIEW,
        finding.severity.rank,
        finding.rule,
        natural_key(finding.subject),
        finding.part,
        finding.fields,
    )


def check_one(rule: Rule, subject: Any, plant: Plant) -> Verdict:
    """Return what a rule says of one subject: instrument, circuit, loop or area."""
    if rule.applies is not None and not rule.applies(subject, plant):
        return NotApplicable()
    missing = tuple(title for title, get in rule.needs if get(subject) is None)
    if missing:
        return Unchecked(*missing)
    return rule.check(subject, plant)


def reaudit(installed: Installed, plant: Plant, *, rules: Registry | None = None) -> list[Finding]:
    """Return the findings on one instrument and its circuits, by the rules about single subjects."""
    circuits = plant.circuits_of(installed)
    findings: list[Finding] = []
    for each in rules if rules is not None else load_rules():
        if each.on is Subject.INSTRUMENT:
            subjects: Sequence[Any] = (installed,)
        elif each.on is Subject.CIRCUIT:
            subjects = circuits
        else:
            continue
        if not installed.live and not each.not_live_too:
            continue
        if each.whole is not None and any(
            found.stops_rows for found in _each(plant.whole_finding(each.code, each.whole))
        ):
            continue
        for subject in subjects:
            verdict = check_one(each, subject, plant)
            if verdict is not None and each.whole is not None and each.on is Subject.INSTRUMENT:
                verdict = _without_lacking_columns(verdict, subject, plant, {})
            if verdict is not None:
                findings.extend(_finding(found, each, _name(subject), subject) for found in _each(verdict))
    findings.sort(key=finding_order)
    return findings


def _run(rule: Rule, plant: Plant, result: Audit, raise_errors: bool, sorted_already: _Sorted) -> Coverage:
    coverage = Coverage(rule=rule.code)
    outcomes = coverage.outcomes
    blocked: tuple[str, ...] | None = None
    if rule.whole is not None:
        try:
            verdict = plant.whole_finding(rule.code, rule.whole)
        except Exception as error:
            if raise_errors:
                raise
            result.broken.append(Broken(rule.code, plant.file_name, f"{type(error).__name__}: {error}"))
            verdict = None
        if verdict:
            # Of the list, which is none of this rule's subjects: counted with them it would be one too many.
            _report(verdict, rule, plant.name, plant, coverage, result)
            stopping = [each for each in _each(verdict) if each.stops_rows]
            if stopping:
                blocked = tuple(dict.fromkeys(title_of(name) for each in stopping for name in each.fields)) or (
                    "column",
                )
    if rule.on is Subject.WHOLE:
        done = _guard(
            lambda: _take(rule.check(plant), rule, plant, coverage, result),
            rule,
            plant.file_name,
            result,
            raise_errors,
        )
        if not done:
            _unchecked(_BROKEN, plant.file_name, coverage)
        return coverage
    if rule.on is Subject.GROUP:
        _run_groups(rule, plant, coverage, result, raise_errors, blocked)
        return coverage
    applies, needs, check = rule.applies, rule.needs, rule.check
    of_a_sheet = rule.whole is not None and rule.on is Subject.INSTRUMENT
    unsaid = 0
    lacking: dict[tuple[str, tuple[str, ...]], int] = {}
    subjects, sorted_out, not_applicable = _applicable(rule, plant, sorted_already)
    for subject in subjects:
        try:
            if not sorted_out and applies is not None and not applies(subject, plant):
                not_applicable += 1
                continue
            if blocked is not None:
                _unchecked(blocked, subject.name, coverage)
                continue
            if needs:
                missing = tuple([title for title, get in needs if get(subject) is None])
                if missing:
                    _unchecked(missing, subject.name, coverage)
                    continue
            verdict = check(subject, plant)
            if verdict is None:
                unsaid += 1
                continue
            if isinstance(verdict, NotApplicable) and not verdict.assumed:
                not_applicable += 1
                continue
            if of_a_sheet:
                verdict = _without_lacking_columns(verdict, subject, plant, lacking)
            _take(verdict, rule, subject, coverage, result)
        except Exception as error:
            if raise_errors:
                raise
            result.broken.append(Broken(rule.code, subject.name, f"{type(error).__name__}: {error}"))
            _unchecked(_BROKEN, subject.name, coverage)
    outcomes[Outcome.NOT_APPLICABLE] += not_applicable
    outcomes[Outcome.CLEAR] += unsaid
    for (sheet, names), count in sorted(lacking.items()):
        _report(_sheet_lacks(sheet, names, count), rule, plant.name, plant, coverage, result)
    return coverage


_Who = tuple[Subject, bool, Callable[..., bool] | None]
_Meant = tuple[Sequence[Any], bool, int]
_Sorted = dict[_Who, _Meant | None]


def _applicable(rule: Rule, plant: Plant, sorted_already: _Sorted) -> _Meant:
    """Return the subjects of a rule, whether those to which it does not apply are out, and how many are.

    Ten rules ask whether an instrument may stand in an area, nine whether a circuit is Ex i: what several ask is
    kept for the run of one audit.
    """
    key = _who(rule)
    found = sorted_already.get(key)
    if found is None:
        every = _subjects(rule, plant)
        live = every if rule.not_live_too else [each for each in every if each.live]
        meant, sorted_out, applies = live, True, rule.applies
        if applies is not None:
            try:
                meant = [each for each in live if applies(each, plant)]
            except Exception:
                # One by one then: each that raises is reported by its name, for each rule that asks.
                meant, sorted_out = live, False
        found = (meant, sorted_out, len(every) - len(meant))
        if key in sorted_already:
            sorted_already[key] = found
    return found


def _who(rule: Rule) -> _Who:
    return rule.on, rule.not_live_too, rule.applies


def _without_lacking_columns(
    verdict: Verdict, subject: Installed, plant: Plant, lacking: dict[tuple[str, tuple[str, ...]], int]
) -> Verdict:
    """Leave out of a verdict the blanks for which the instrument's sheet has no column, and count them by sheet.

    Other sheets have it; so it is not the whole list that lacks it, and it is no slip of this row either.
    """
    if isinstance(verdict, Clear | NotApplicable | Unchecked):
        return verdict
    kept: list[Found] = []
    titles: dict[str, None] = {}
    for found in _each(verdict):
        names = found.fields
        # What another sheet says of the instrument is found there, whatever columns its own sheet has.
        elsewhere = any(fix.sheet != "Instruments" for fix in found.fixes) or _stands_elsewhere(found, subject)
        blank = bool(names) and not elsewhere and all(_is_blank(name, subject) for name in names)
        if not blank or plant.sheet_has_column(subject, *names):
            kept.append(found)
            continue
        origin = subject.record.origin
        key = (origin.place.sheet if origin is not None else "", names)
        lacking[key] = lacking.get(key, 0) + 1
        titles.update(dict.fromkeys(title_of(name) for name in names))
    if not titles:
        return verdict
    return kept or Unchecked(*titles)


def _stands_elsewhere(found: Found, subject: Installed) -> bool:
    origin = subject.record.origin
    here = (origin.place.file, origin.place.sheet) if origin is not None else None
    return any((cell.file, cell.sheet) != here for cell in found.cells)


def _is_blank(name: str, subject: Installed) -> bool:
    record = subject.record
    if "." in name or name in record.unread or name in record.unitless or name in record.blanks:
        return False
    return getattr(record, name, "") is None


def _sheet_lacks(sheet: str, names: tuple[str, ...], count: int) -> Found:
    titles = [title_of(name) for name in names]
    columns = " or ".join([", ".join(titles[:-1]), titles[-1]]) if len(titles) > 1 else titles[0]
    return Found(
        values={
            "sheet": sheet,
            "columns": columns,
            "count": f"{count} instrument{'s need' if count > 1 else ' needs'}",
        },
        fields=names,
        part=sheet,
        message="sheet {sheet} has no column for {columns}; {count} one",
        found="no such column",
        wanted=columns,
    )


def _run_groups(
    rule: Rule,
    plant: Plant,
    coverage: Coverage,
    result: Audit,
    raise_errors: bool,
    blocked: tuple[str, ...] | None,
) -> None:
    members: dict[int, Installed] = {}

    def sort(installed: Installed) -> None:
        if rule.applies is not None and not rule.applies(installed, plant):
            coverage.outcomes[Outcome.NOT_APPLICABLE] += 1
            return
        missing = blocked or tuple(title for title, get in rule.needs if get(installed) is None)
        if missing:
            _unchecked(missing, installed.name, coverage)
        else:
            members[id(installed)] = installed

    for installed in plant.instruments:
        if not installed.live and not rule.not_live_too:
            coverage.outcomes[Outcome.NOT_APPLICABLE] += 1
        elif not _guard(partial(sort, installed), rule, installed.name, result, raise_errors):
            _unchecked(_BROKEN, installed.name, coverage)
    groups: list[tuple[Any, ...]] = []
    if members and rule.groups is not None:
        find = rule.groups
        if not _guard(lambda: groups.extend(find(plant)), rule, plant.file_name, result, raise_errors):
            for installed in members.values():
                _unchecked(_BROKEN, installed.name, coverage)
            return
    said: dict[int, Outcome] = {}

    def say(kept: tuple[Installed, ...], outcome: Outcome) -> None:
        for installed in kept:
            before = said.get(id(installed))
            if before is None or _WORSE.index(outcome) < _WORSE.index(before):
                said[id(installed)] = outcome

    for group in groups:
        kept = tuple(installed for installed in group if id(installed) in members)
        if len(kept) < 2:
            continue
        named = group_name(kept)

        def run(kept: tuple[Installed, ...] = kept, named: str = named) -> None:
            say(kept, _report(rule.check(kept, plant), rule, named, kept[0], coverage, result))

        if not _guard(run, rule, named, result, raise_errors):
            coverage.unchecked.setdefault(_BROKEN, []).append(named)
            say(kept, Outcome.UNCHECKED)
    alone = Outcome.CLEAR if rule.alone_is_clear else Outcome.NOT_APPLICABLE
    for key in members:
        coverage.outcomes[said.get(key, alone)] += 1


_BROKEN = ("the rule is broken",)
_WORSE = [Outcome.FINDING, Outcome.REVIEW, Outcome.UNCHECKED, Outcome.CLEAR, Outcome.NOT_APPLICABLE]


def group_name(group: Sequence[Installed]) -> str:
    """Return a group's name: its tags in natural order, equal tags once."""
    tags = {bare_name(installed.name) for installed in group}
    return ", ".join(sorted(tags, key=natural_key))


def bare_name(name: str) -> str:
    """Return a subject's name without the number by which rows of one tag are told apart.

    >>> bare_name("PT-101 (2)"), bare_name("PT-101")
    ('PT-101', 'PT-101')
    """
    head, bracket, tail = name.rpartition(" (")
    return head if bracket and tail.endswith(")") and tail[:-1].isdigit() else name


def _guard(action: Callable[[], Any], rule: Rule, subject: str, result: Audit, raise_errors: bool) -> bool:
    """Do something, and report what it raises; return whether it raised nothing."""
    try:
        action()
    except Exception as error:
        if raise_errors:
            raise
        result.broken.append(Broken(rule.code, subject, f"{type(error).__name__}: {error}"))
        return False
    return True


def _subjects(rule: Rule, plant: Plant) -> Sequence[Any]:
    if rule.on is Subject.INSTRUMENT:
        return plant.instruments
    if rule.on is Subject.CIRCUIT:
        return plant.circuits
    if rule.on is Subject.LOOP:
        return plant.loops
    if rule.on is Subject.AREA:
        return plant.areas_seen
    if rule.on is Subject.CERTIFICATE:
        return certificates_of(plant)
    raise ValueError(f"{rule.code}: no subjects for {rule.on}")


def _take(verdict: Verdict, rule: Rule, subject: Any, coverage: Coverage, result: Audit) -> None:
    coverage.outcomes[_report(verdict, rule, _name(subject), subject, coverage, result)] += 1


def _name(subject: Any) -> str:
    return subject.file_name if isinstance(subject, Plant) else subject.name


def _report(verdict: Verdict, rule: Rule, name: str, subject: Any, coverage: Coverage, result: Audit) -> Outcome:
    if verdict is None:
        return Outcome.CLEAR
    if isinstance(verdict, Unchecked):
        coverage.unchecked.setdefault(verdict.fields, []).append(name)
        return Outcome.UNCHECKED
    if isinstance(verdict, Clear | NotApplicable):
        if verdict.assumed:
            coverage.assumed.update(verdict.assumed)
        return Outcome.CLEAR if isinstance(verdict, Clear) else Outcome.NOT_APPLICABLE
    outcome = Outcome.CLEAR
    for each in _each(verdict):
        finding = _finding(each, rule, name, subject)
        result.findings.append(finding)
        coverage.assumed.update(each.assumed)
        if outcome is not Outcome.FINDING:
            outcome = finding.outcome
    return outcome


def _each(verdict: Verdict) -> Iterator[Found]:
    if isinstance(verdict, Found):
        yield verdict
    elif isinstance(verdict, Sequence):
        yield from verdict


def _unchecked(fields: tuple[str, ...], name: str, coverage: Coverage) -> None:
    coverage.outcomes[Outcome.UNCHECKED] += 1
    coverage.unchecked.setdefault(fields, []).append(name)


def _finding(found: Found, rule: Rule, name: str, subject: Any) -> Finding:
    template = found.message or rule.message
    values: Mapping[str, Any] = found.values
    return Finding(
        rule=rule.code,
        severity=rule.severity,
        outcome=Outcome.REVIEW if isinstance(found, Review) else Outcome.FINDING,
        subject=found.subject or name,
        part=found.part,
        fields=tuple(title_of(field) for field in found.fields),
        message=template.format_map(values),
        values=values,
        found=found.found,
        wanted=found.wanted,
        off_by=found.off_by,
        working=found.working,
        assumed=found.assumed,
        fixes=found.fixes,
        cells=_cells(found, subject),
        cause=template,
    )


def _cells(found: Found, subject: Any) -> tuple[Cell, ...]:
    cells: list[Cell] = []
    owner = subject.device if isinstance(subject, Circuit) else subject
    if hasattr(owner, "cells"):
        for name in found.fields:
            if name.startswith("row.") and isinstance(subject, Circuit):
                if subject.row is not None:
                    cells.extend(subject.row.cells(name[4:]))
                continue
            cells.extend(owner.cells(name))
    cells.extend(found.cells)
    if not cells and isinstance(owner, Installed):
        cells.extend(owner.cells("tag"))
    return tuple(dict.fromkeys(cells))


def _assumptions(plant: Plant, result: Audit) -> tuple[str, ...]:
    said: dict[str, None] = dict.fromkeys(plant.assumptions)
    for coverage in result.coverage.values():
        for text in coverage.assumed:
            said.setdefault(text)
    return tuple(said)
