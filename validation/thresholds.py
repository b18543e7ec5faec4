"""The thresholds that a plant can set: what rules and calculations ask for by name."""

from __future__ import annotations

import ast
import importlib
import importlib.util
import pkgutil
from collections.abc import Iterator
from functools import cache
from pathlib import Path
from types import ModuleType

import instruments
import loops
import validation

__all__ = ["threshold_names"]


@cache
def threshold_names() -> tuple[str, ...]:
    """Return the names of all thresholds, in alphabetical order.

    A threshold is declared by asking for it: ``plant.threshold("RNG08 low %", 30.0)``. Which names there are
    stands in the calls themselves, so that a new one needs no other line.

    Raises
    ------
    ValueError
        A call asks for a name that does not stand in it, nor in a constant of its module.

    >>> [name for name in threshold_names() if name.startswith("RNG08")]
    ['RNG08 high %', 'RNG08 low %']
    """
    return tuple(sorted({name for package in (instruments, loops, validation) for name in _asked_in(package)}))


def _asked_in(package: ModuleType) -> Iterator[str]:
    for found in pkgutil.walk_packages(package.__path__, f"{package.__name__}."):
        spec = importlib.util.find_spec(found.name)
        if spec is None or spec.origin is None or not spec.origin.endswith(".py"):
            continue
        source = Path(spec.origin).read_text(encoding="utf-8")
        if ".threshold(" in source:
            yield from _asked_by(found.name, ast.parse(source))


def _asked_by(module: str, tree: ast.Module) -> Iterator[str]:
    for node in ast.walk(tree):
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Attribute) and node.func.attr == "threshold":
            name = node.args[0] if node.args else None
            if isinstance(name, ast.Constant) and isinstance(name.value, str):
                yield name.value
            elif isinstance(name, ast.Name) and isinstance(value := _constant(module, name.id), str):
                yield value
            elif not _hands_on(tree, name):
                raise ValueError(f"{module}, line {node.lineno}: a threshold is asked for by a name that is not told")


def _constant(module: str, name: str) -> object:
    return getattr(importlib.import_module(module), name, None)


def _hands_on(tree: ast.Module, name: ast.expr | None) -> bool:
    """Whether a call hands on the name that its function, itself called threshold, was given."""
    return isinstance(name, ast.Name) and any(
        isinstance(node, ast.FunctionDef)
        and node.name == "threshold"
        and name.id in {argument.arg for argument in node.args.args}
        for node in ast.walk(tree)
    )
