"""A value for a field from its text, as Ferrule itself writes it: for fixes, forms and what-ifs."""

from __future__ import annotations

from typing import Any

from instruments.column import Column, Reads
from instruments.kind import Kind, kind_from_words
from instruments.number import Number, read_number
from instruments.quantity import Quantity, read_quantity
from instruments.unit import Unit, UnitMismatch, convert, read_unit
from instruments.workbook.words import folded, yes_or_no


class CannotStand(ValueError):
    """A text that the column cannot hold; says which and why."""


def value_of(column: Column, text: str) -> Any:
    """Return the value of a field for the text of one cell.

    Parameters
    ----------
    column
        The column that the text would stand in; one that fills several fields has no single value.
    text
        The text, with its unit where the field needs one.

    Raises
    ------
    CannotStand
        The column cannot hold it.

    >>> from instruments.columns import INSTRUMENTS
    >>> str(value_of(INSTRUMENTS.column("urv"), "10 barg")), value_of(INSTRUMENTS.column("wires"), "2")
    ('10 barg', 2)
    """
    reads = column.reads
    if reads in (Reads.TEXT, Reads.TAG):
        return text
    if reads is Reads.KIND:
        return _kind(column, text)
    if reads is Reads.UNIT:
        return _unit(column, text)
    if reads is Reads.QUANTITY:
        return _quantity(column, text)
    if reads is Reads.YES_NO:
        return _yes_or_no(column, text)
    if reads is Reads.WORD:
        return _word(column, text)
    if reads in (Reads.NUMBER, Reads.COUNT):
        return _number(column, text)
    raise CannotStand(f"{column.title} fills {' and '.join(column.into)}: give each its own value")


def _refused(column: Column, text: str, why: str = "") -> CannotStand:
    return CannotStand(f"{column.title} cannot be {text!r}{f': {why}' if why else ''}")


def _kind(column: Column, text: str) -> Kind:
    kind = kind_from_words(text)
    if kind is None:
        raise _refused(column, text)
    return kind


def _unit(column: Column, text: str) -> Unit:
    unit = read_unit(text)
    if unit is None:
        raise _refused(column, text)
    return unit


def _quantity(column: Column, text: str) -> Quantity:
    own = read_unit(column.unit) if column.unit else None
    quantity = read_quantity(text, unit=own)
    if not isinstance(quantity, Quantity):
        raise _refused(column, text, quantity.reason)
    if quantity.unit is None:
        raise _refused(column, text, "it has no unit")
    if column.kinds and quantity.unit.kind not in column.kinds:
        raise _refused(column, text, f"it is no {' or '.join(column.kinds)}")
    return quantity


def _yes_or_no(column: Column, text: str) -> bool:
    answer = yes_or_no(text)
    if answer is None:
        raise _refused(column, text)
    return answer


def _word(column: Column, text: str) -> str:
    for word, spellings in column.words.items():
        if text.strip().casefold() in (word.casefold(), *spellings):
            return word
    raise _refused(column, text)


def _number(column: Column, text: str) -> float | int:
    """Read a bare number in the column's own unit; another unit behind it is converted."""
    written, _, behind = text.strip().partition(" ")
    number = read_number(written)
    if not isinstance(number, Number):
        raise _refused(column, text)
    value = number.value
    if behind and folded(behind) != folded(column.unit or ""):
        unit, own = read_unit(behind), read_unit(column.unit) if column.unit else None
        if unit is None or own is None:
            raise _refused(column, text, f"{behind} is no unit of it")
        try:
            value = convert(value, unit, own)
        except UnitMismatch as mismatch:
            raise _refused(column, text, str(mismatch)) from mismatch
    if column.reads is not Reads.COUNT:
        return float(value)
    if value != int(value):
        raise _refused(column, text, "it counts")
    return int(value)
