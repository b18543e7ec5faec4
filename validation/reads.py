"""Which fields a rule can read, found in its code: so that a change asks again only the rules that it can touch."""

from __future__ import annotations

import dataclasses
import re
import sys
from collections.abc import Callable, Iterable, Iterator, Mapping
from functools import cache, partial
from operator import attrgetter
from types import CodeType, FunctionType, MethodType, ModuleType
from typing import Any, Final

from instruments.area import Area
from instruments.installed import Installed
from instruments.record import DeviceType, Instrument, Record
from loops.circuit import Circuit, Loop
from loops.record import Cable, CableType, LoopRow, Termination
from validation.rule import Rule, title_of

_PACKAGES: Final = ("instruments", "loops", "validation")
# What reads and writes files, draws, or runs the rules is none of a rule's own.
_NO_PART: Final = ("instruments.workbook", "instruments.management", "loops.sheet", "loops.management")
_NO_PART_OF_RULES: Final = ("audit", "cut", "mend", "what_if", "reads", "rule", "example", "report", "management")
_RECORDS: Final = (
    Instrument, DeviceType, Area, LoopRow, Cable, CableType, Termination, Installed, Circuit, Loop,
)  # fmt: skip
_OWN: Final = frozenset(field.name for field in dataclasses.fields(Record))
FIELDS: Final = frozenset(field.name for each in _RECORDS for field in dataclasses.fields(each)) - _OWN
"""The names of all fields of all records, and of what is put together from them."""

_LONGEST_CONTAINER: Final = 5000


def can_read(rule: Rule, names: frozenset[str]) -> bool:
    """Whether a rule's outcome can change where only fields of these names have changed.

    Everything that its code can reach counts: what it calls, methods of that name on any class, tables that
    name fields, names put together from parts. What walks all fields of a record reads all. It errs to yes.
    """
    read = fields_read(rule)
    return read is None or not names.isdisjoint(read)


def can_read_in(function: Callable[..., Any], names: frozenset[str]) -> bool:
    """Whether what a function gives can change where only fields of these names have changed."""
    read = _reached((function,))
    return read is None or not names.isdisjoint(read)


def fields_read(rule: Rule) -> frozenset[str] | None:
    """Return the fields that a rule's code names; None where it may read any."""
    known = _KNOWN.get(rule.code)
    if known is None or known[0] is not rule:
        known = _KNOWN[rule.code] = (
            rule,
            _reached((rule.check, rule.applies, rule.groups, rule.whole, rule.needs)),
        )
    return known[1]


_KNOWN: dict[str, tuple[Rule, frozenset[str] | None]] = {}


@dataclasses.dataclass(frozen=True, slots=True)
class _Node:
    """One function, class or table: the fields that it names, the names that it calls by, what it refers to."""

    of: Any
    fields: frozenset[str]
    called: tuple[tuple[str, str], ...]
    refers: tuple[Any, ...]
    any: bool


_NODES: dict[int, _Node] = {}


def _reached(start: Iterable[Any]) -> frozenset[str] | None:
    found: set[str] = set()
    seen: set[int] = set()
    asked: set[tuple[str, str]] = set()
    ahead: list[Any] = list(start)
    while ahead:
        each = ahead.pop()
        if id(each) in seen:
            continue
        seen.add(id(each))
        node = _NODES.get(id(each))
        if node is None or node.of is not each:
            node = _NODES[id(each)] = _node(each)
        if node.any:
            return None
        found |= node.fields
        ahead.extend(node.refers)
        for call in node.called:
            if call not in asked:
                asked.add(call)
                ahead.extend(_methods().get(call, ()))
    return frozenset(found)


def _node(each: Any) -> _Node:
    if each is None or each is title_of:  # titles are what people read
        return _Node(each, frozenset(), (), (), False)
    if each is dataclasses.fields or each is dataclasses.asdict or each is vars:
        return _Node(each, frozenset(), (), (), True)
    names: set[str] = set()
    refers: list[Any] = []
    for piece in _pieces(each):
        if isinstance(piece, str):
            names.add(piece)
        elif not isinstance(piece, _PLAIN):
            refers.append(piece)
    fields = frozenset(name for text in names for name in _fields_of(text))
    called: tuple[tuple[str, str], ...] = ()
    if isinstance(each, FunctionType | attrgetter):
        # A private class is called by its own module alone.
        places = ("", getattr(each, "__module__", "") or "")
        called = tuple((place, name) for place in places for name in names if (place, name) in _methods())
    return _Node(each, fields, called, tuple(refers), False)


_PLAIN: Final = (int, float, complex, bytes, type(None), type(Ellipsis), re.Pattern)


def _fields_of(text: str) -> Iterable[str]:
    """Return the fields that a name in code can mean; a part of a name, all that begin or end so."""
    if text in FIELDS:
        return (text,)
    if "." in text:
        return [part for part in text.split(".") if part in FIELDS]
    if len(text) > 2 and (text[0] == "_" or text[-1] == "_"):
        return [field for field in FIELDS if field.endswith(text) or field.startswith(text)]
    return ()


def _pieces(each: Any) -> Iterator[Any]:
    """Give the names and the objects that something refers to."""
    if isinstance(each, str):
        yield each
    elif isinstance(each, FunctionType):
        yield from _of_code(each.__code__, each.__globals__)
        yield from each.__defaults__ or ()
        yield from (each.__kwdefaults__ or {}).values()
        for cell in each.__closure__ or ():
            yield cell.cell_contents
    elif isinstance(each, MethodType):
        yield each.__func__
    elif isinstance(each, partial):
        yield from (each.func, *each.args, *each.keywords.values())
    elif isinstance(each, attrgetter):
        for name in each.__reduce__()[1]:
            yield from name.split(".")
    elif isinstance(each, property):
        yield each.fget
    elif isinstance(each, staticmethod | classmethod):
        yield each.__func__
    elif hasattr(each, "__wrapped__"):
        yield each.__wrapped__
    elif isinstance(each, type):
        if _is_ours(each.__module__):
            # What a dataclass is given besides its fields tells nothing of them.
            yield from (value for name, value in vars(each).items() if name[:2] != "__" and _is_code(value))
    elif isinstance(each, Mapping):
        if len(each) <= _LONGEST_CONTAINER:
            for key, value in each.items():
                yield key
                yield value
    elif isinstance(each, tuple | list | set | frozenset):
        if len(each) <= _LONGEST_CONTAINER:
            yield from each
    elif dataclasses.is_dataclass(each) and _is_ours(type(each).__module__):
        for field in dataclasses.fields(each):
            yield getattr(each, field.name, None)


def _of_code(code: CodeType, known: Mapping[str, Any]) -> Iterator[Any]:
    for name in code.co_names:
        yield name
        value = known.get(name)
        if not isinstance(value, ModuleType) and value is not None:
            yield value
    for constant in code.co_consts:
        if isinstance(constant, CodeType):
            yield from _of_code(constant, known)
        elif isinstance(constant, str | tuple | frozenset):
            yield constant


@cache
def _is_ours(module: str) -> bool:
    package, _, rest = module.partition(".")
    if package not in _PACKAGES or module.startswith(_NO_PART):
        return False
    return package != "validation" or rest.partition(".")[0] not in _NO_PART_OF_RULES


def _is_code(value: Any) -> bool:
    return isinstance(value, FunctionType | property | staticmethod | classmethod) and not (
        getattr(value, "__qualname__", "").startswith("_dataclass_")
    )


@cache
def _methods() -> Mapping[tuple[str, str], tuple[Any, ...]]:
    """Return the methods and properties of all classes by module and name; of public classes without the module.

    A call says no more than the name.
    """
    found: dict[tuple[str, str], list[Any]] = {}
    for module in list(sys.modules.values()):
        if not _is_ours(getattr(module, "__name__", "")):
            continue
        for each in list(vars(module).values()):
            if isinstance(each, type) and each.__module__ == module.__name__:
                place = module.__name__ if each.__name__.startswith("_") else ""
                for name, value in vars(each).items():
                    # What is a field somewhere is a method nowhere that reads more, but it may be a property.
                    called = isinstance(value, property) or name not in FIELDS
                    if called and name[:2] != "__" and _is_code(value):
                        found.setdefault((place, name), []).append(value)
    return {key: tuple(values) for key, values in found.items()}
