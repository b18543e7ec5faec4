"""A value for a field from its text, as Ferrule itself writes it: for fixes, forms and what-ifs."""

from __future__ import annotations

from typing import Any

from instruments.column import Column, Reads
from instruments.kind import kind_from_words
from instruments.number import Number, read_number
from instruments.quantity import Quantity, read_quantity
from instruments.unit import read_unit


class CannotStand(ValueError):
    """A text that the column cannot hold; says which and why."""


def value_of(column: Column, text: str) -> Any:
    """Return the value of a field for the text of one cell.

    Parameters
    ----------
    column
        The column that the text would stand in.
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
        return kind_from_words(text)
    if reads is Reads.UNIT:
        return _need(read_unit(text), column, text)
    if reads is Reads.QUANTITY:
        quantity = read_quantity(text, unit=read_unit(column.unit) if column.unit else None)
        if not isinstance(quantity, Quantity):
            raise CannotStand(f"{column.title} cannot be {text!r}")
        return quantity
    if reads is Reads.YES_NO:
        return {"yes": True, "no": False}.get(text)
    if reads is Reads.WORD:
        for word, spellings in column.words.items():
            if text.casefold() in (word.casefold(), *spellings):
                return word
        raise CannotStand(f"{column.title} cannot be {text!r}")
    number = read_number(text.split()[0]) if text.split() else None
    if not isinstance(number, Number):
        raise CannotStand(f"{column.title} cannot be {text!r}")
    return int(number.value) if reads is Reads.COUNT else float(number.value)


def _need(value: Any, column: Column, text: str) -> Any:
    if value is None:
        raise CannotStand(f"{column.title} cannot be {text!r}")
    return value
