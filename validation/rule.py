"""The registry of rules: what a rule is, how it is declared, and how its needs are looked up."""

from __future__ import annotations

import importlib
import inspect
import os
import pkgutil
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass
from enum import StrEnum
from operator import attrgetter
from types import MappingProxyType
from typing import Any

from instruments.column import SheetKind
from instruments.columns import AREAS, DEVICE_TYPES, INSTRUMENTS
from loops.columns import LOOPS
from validation.finding import Severity, Verdict


class Subject(StrEnum):
    """What a rule is about."""

    INSTRUMENT = "instrument"
    CIRCUIT = "circuit"
    LOOP = "loop"
    GROUP = "group of instruments"
    AREA = "area"
    CERTIFICATE = "certificate"
    WHOLE = "whole list"


Need = tuple[str, Callable[[Any], Any]]


@dataclass(frozen=True, slots=True, kw_only=True)
class Rule:
    """One rule of the catalogue.

    Attributes
    ----------
    code
        For ever: a code never changes its meaning and is never used again.
    title, text
        First line and whole of the docstring.
    needs
        The fields without which it is unchecked: title and how to look it up. Titles joined by
        ``or`` are alternatives.
    applies
        Whom it is about; None for everybody.
    message
        Template, filled from the values that the rule returns.
    basis
        Standard and clause, or ``common practice``, or ``from memory``.
    groups
        For groups: the candidates, each of two or more instruments.
    alone_is_clear
        For groups: whether an instrument in no group is clear (True) or not applicable (False).
    whole
        What is wrong with a whole column or sheet: one finding on the list instead of one a row.
    """

    code: str
    severity: Severity
    on: Subject
    check: Callable[..., Verdict]
    title: str
    text: str
    message: str
    basis: str
    needs: tuple[Need, ...] = ()
    applies: Callable[..., bool] | None = None
    groups: Callable[..., Iterable[tuple[Any, ...]]] | None = None
    alone_is_clear: bool = True
    whole: Callable[..., Verdict] | None = None
    not_live_too: bool = False

    @property
    def family(self) -> str:
        """The letters of the code, such as ``RNG``."""
        return self.code.rstrip("0123456789")


class Registry:
    """The rules by code, in the order of their codes."""

    def __init__(self) -> None:
        self._rules: dict[str, Rule] = {}
        self._in_order: tuple[Rule, ...] | None = None

    def add(self, rule: Rule) -> None:
        """Add a rule; ValueError where its code is taken."""
        other = self._rules.get(rule.code)
        if other is not None:
            raise ValueError(
                f"{rule.code} is the code of {_where(other.check)} already; {_where(rule.check)} needs one of its own"
            )
        self._rules[rule.code] = rule
        self._in_order = None

    def remove(self, code: str) -> None:
        """Take a rule out; KeyError where there is none."""
        del self._rules[code]
        self._in_order = None

    def __iter__(self) -> Iterator[Rule]:
        if self._in_order is None:
            self._in_order = tuple(sorted(self._rules.values(), key=lambda rule: rule.code))
        return iter(self._in_order)

    def __len__(self) -> int:
        return len(self._rules)

    def __getitem__(self, code: str) -> Rule:
        return self._rules[code]

    def __contains__(self, code: object) -> bool:
        return code in self._rules


RULES = Registry()


def rule(
    code: str,
    *,
    severity: Severity,
    on: Subject,
    message: str,
    basis: str,
    needs: tuple[str, ...] = (),
    applies: Callable[..., bool] | None = None,
    groups: Callable[..., Iterable[tuple[Any, ...]]] | None = None,
    alone_is_clear: bool = True,
    whole: Callable[..., Verdict] | None = None,
    not_live_too: bool = False,
    registry: Registry = RULES,
) -> Callable[[Callable[..., Verdict]], Callable[..., Verdict]]:
    """Register the decorated function as the rule `code`.

    The function takes the subject and the plant (for the whole list: the plant alone) and returns
    nothing, the values that disagree (`Found`, one or several), a `Review`, `Unchecked`,
    `NotApplicable` or `Clear` with assumptions. `needs` are field names: plain for the
    instrument's row, ``type.`` for the limits that hold for it, ``area.`` for its area, ``row.``
    for a circuit's row of the loop list, ``record.`` for a column where its plain name means more than the column
    (``loop`` is also derived from the tag); alternatives are joined by ``|``.
    """

    def register(check: Callable[..., Verdict]) -> Callable[..., Verdict]:
        text = inspect.getdoc(check) or ""
        if not text:
            raise ValueError(f"{code} has no docstring; the catalogue is made of it")
        registry.add(
            Rule(
                code=code,
                severity=severity,
                on=on,
                check=check,
                title=text.splitlines()[0].rstrip("."),
                text=text,
                message=message,
                basis=basis,
                needs=tuple(_need(name, on) for name in needs),
                applies=applies,
                groups=groups,
                alone_is_clear=alone_is_clear,
                whole=whole,
                not_live_too=not_live_too,
            )
        )
        return check

    return register


def load_rules(package: str = "validation.rules") -> Registry:
    """Import every module of the rules' package, so that a new rule needs no list to be added to.

    The package is walked again only when one of its folders has changed.
    """
    root = importlib.import_module(package)
    if _WALKED.get(package) != _folders(root.__path__):
        for module in pkgutil.walk_packages(root.__path__, prefix=f"{package}."):
            importlib.import_module(module.name)
        # Afterwards, because importing may write the folder of compiled modules.
        _WALKED[package] = _folders(root.__path__)
    return RULES


def _folders(paths: Iterable[str]) -> tuple[tuple[str, int], ...]:
    return tuple((path, os.stat(path).st_mtime_ns if os.path.isdir(path) else 0) for path in paths)


_WALKED: dict[str, tuple[tuple[str, int], ...]] = {}


def title_of(name: str) -> str:
    """Return the words people see for a field name such as ``type.url``; the name itself where it has none.

    >>> title_of("type.url"), title_of("setting_hh"), title_of("area.zone")
    ('URL', 'HH', 'area zone')
    """
    owner, _, field = name.rpartition(".")
    if owner == "area":
        return f"area {_TITLES[owner].get(field, field)}"
    return _TITLES.get(owner, _TITLES[""]).get(field, field)


def _titles(kind: SheetKind) -> Mapping[str, str]:
    return MappingProxyType({column.field: column.title for column in kind.columns})


_TITLES: Mapping[str, Mapping[str, str]] = {
    "": _titles(INSTRUMENTS),
    "type": _titles(DEVICE_TYPES),
    "area": _titles(AREAS),
    "row": _titles(LOOPS),
}


def _need(name: str, on: Subject) -> Need:
    alternatives = name.split("|")
    getters = tuple(_getter(alternative, on) for alternative in alternatives)
    title = " or ".join(title_of(alternative) for alternative in alternatives)
    if len(getters) == 1:
        return title, getters[0]

    def either(subject: Any) -> Any:
        for getter in getters:
            value = getter(subject)
            if value is not None:
                return value
        return None

    return title, either


def _getter(name: str, on: Subject) -> Callable[[Any], Any]:
    owner, _, field = name.rpartition(".")
    if on is Subject.CIRCUIT:
        base = {"": "device.record", "type": "device.type", "area": "device.area", "row": "row"}[owner]
        if owner == "" and field in _CIRCUIT_FIELDS:
            return attrgetter(field)
    elif on in (Subject.INSTRUMENT, Subject.GROUP):
        if owner == "" and field in _INSTALLED_FIELDS:
            return attrgetter(field)
        base = {"": "record", "record": "record", "type": "type", "area": "area"}[owner]
        if owner == "record":
            return attrgetter(name)
    else:
        return attrgetter(field)
    if owner == "":
        return attrgetter(f"{base}.{field}")
    get_base = attrgetter(base)

    def get(subject: Any) -> Any:
        found = get_base(subject)
        return None if found is None else getattr(found, field)

    return get


_INSTALLED_FIELDS = frozenset({"kind", "loop", "marking", "area", "body", "io_address"})
_CIRCUIT_FIELDS = frozenset(
    {
        "kind",
        "card",
        "barrier",
        "supply_min_v",
        "supply_nominal_v",
        "supply_max_v",
        "receiver_ohm",
        "cable_length_m",
        "conductor",
        "hart",
        "wires",
        "loop",
    }
)


def _where(function: Callable[..., Any]) -> str:
    return f"{function.__module__}.{function.__qualname__}"
