"""What a rule says of a subject: the five outcomes, findings with their fixes, and how one is told from another."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from enum import StrEnum
from typing import Any

from instruments.origin import Cell
from instruments.record import nothing


class Severity(StrEnum):
    """How badly: someone can get hurt, it will not work as built, the record is wrong."""

    DANGER = "danger"
    FAULT = "fault"
    GAP = "gap"

    @property
    def rank(self) -> int:
        """0 for the worst."""
        return _RANKS[self]


_RANKS = {Severity.DANGER: 0, Severity.FAULT: 1, Severity.GAP: 2}


class Outcome(StrEnum):
    """What a rule comes to on one subject. The five add up to the subjects."""

    CLEAR = "clear"
    FINDING = "finding"
    REVIEW = "review"
    UNCHECKED = "unchecked"
    NOT_APPLICABLE = "not applicable"


@dataclass(frozen=True, slots=True, kw_only=True)
class Fix:
    """One thing that would mend a finding.

    Attributes
    ----------
    text
        What to do, for a person.
    change
        The fields it changes and their new values, as they would be written in the list; empty
        where the fix is no value. Applied, it clears its finding.
    subject
        The tag, number or code of the row that it changes, where that is not the finding's own subject.
    sheet
        The kind of sheet that the row stands in.
    makes
        Codes of the rules that would find something once it is applied.
    """

    text: str
    change: Mapping[str, str] = field(default_factory=nothing)
    subject: str = ""
    sheet: str = "Instruments"
    makes: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Found:
    """The values that disagree, returned by a rule that finds something.

    Attributes
    ----------
    values
        What the message prints, by name; texts with their units.
    fields
        The fields that disagree; with rule, subject and part they identify the finding, and the
        cells are theirs. ``type.url`` is the device type's, ``area.zone`` the area's.
    part
        The setting, device, end or conductor meant, where a subject can have several findings.
    found, wanted, off_by
        Short texts with units for the exception list.
    working
        The formula with its figures.
    assumed
        The assumptions it rests on.
    message
        A template of its own, where the rule's does not fit this branch.
    subject
        The subject's name, where it is not the object the rule was given.
    cells
        Cells beside those of `fields`.
    stops_rows
        For what is wrong with a whole column: whether the rows cannot be checked because of it.
    """

    values: Mapping[str, Any] = field(default_factory=nothing)
    fields: tuple[str, ...] = ()
    part: str = ""
    found: str = ""
    wanted: str = ""
    off_by: str = ""
    working: str = ""
    assumed: tuple[str, ...] = ()
    fixes: tuple[Fix, ...] = ()
    message: str = ""
    subject: str = ""
    cells: tuple[Cell, ...] = ()
    stops_rows: bool = True


@dataclass(frozen=True, slots=True, kw_only=True)
class Review(Found):
    """The data is there; a competent person must decide."""


@dataclass(frozen=True, slots=True)
class Unchecked:
    """A value that the rule needs is blank or unreadable; `fields` are the titles of those values."""

    fields: tuple[str, ...]

    def __init__(self, *fields: str) -> None:
        object.__setattr__(self, "fields", fields)


@dataclass(frozen=True, slots=True)
class NotApplicable:
    """The rule is not about this subject, for a reason worth telling; `assumed` is listed as an assumption."""

    because: str = ""
    assumed: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Clear:
    """Nothing found, with the assumptions that this rests on."""

    assumed: tuple[str, ...] = ()


Verdict = None | Found | Review | Unchecked | NotApplicable | Clear | Sequence["Found | Review"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Finding:
    """A finding or review as it is reported."""

    rule: str
    severity: Severity
    outcome: Outcome
    subject: str
    part: str
    fields: tuple[str, ...]
    message: str
    values: Mapping[str, Any]
    found: str
    wanted: str
    off_by: str
    working: str
    assumed: tuple[str, ...]
    fixes: tuple[Fix, ...]
    cells: tuple[Cell, ...]
    cause: str = ""

    @property
    def identity(self) -> tuple[str, str, str, tuple[str, ...]]:
        """Rule, subject, part and fields: neither the text nor the row number."""
        return (self.rule, self.subject, self.part, self.fields)
