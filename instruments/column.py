"""What a column is: the field it is read into, its headings, and how its cells are read."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from dataclasses import field as dataclass_field
from enum import StrEnum
from types import MappingProxyType
from typing import Any

NO_WORDS: Mapping[str, tuple[str, ...]] = MappingProxyType({})


class Reads(StrEnum):
    """How the cells of a column are read."""

    TEXT = "text"
    TAG = "tag"
    KIND = "kind"
    UNIT = "unit"
    QUANTITY = "quantity"  # a number with a unit and, for pressures, a reference
    NUMBER = "number"  # a bare number in the column's own unit (volts, ohm, metres)
    COUNT = "count"
    YES_NO = "yes or no"
    WORD = "word"  # one of a closed set of words
    RANGE = "range"  # two quantities in one cell, into `into`
    TRIPLET = "triplet"  # three quantities in one cell, into `into`


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """One column that Ferrule knows.

    Attributes
    ----------
    field
        The record's attribute; for a cell that fills several fields, a name of its own.
    title
        The name people see in reports; the words of the trade.
    headings
        Spellings of the heading, lower case, one blank between words, no punctuation.
    kinds
        For quantities: the unit kinds that the field can hold; empty: any.
    unit
        For numbers and quantities: the unit that a number without one has, where the field
        has a natural unit (``V``, ``ohm``, ``m``); None where a unit must be stated.
    unit_from
        The unit column that speaks for this field where the cell and its heading are silent,
        in the order in which they are asked.
    into
        The fields that a range or triplet cell fills, in order.
    words
        For closed words: canonical word to the spellings that mean it.
    owner
        ``own`` for a column of device limits on an instrument's row.
    """

    field: str
    title: str
    reads: Reads = Reads.TEXT
    headings: tuple[str, ...] = ()
    kinds: tuple[str, ...] = ()
    unit: str | None = None
    unit_from: tuple[str, ...] = ()
    into: tuple[str, ...] = ()
    words: Mapping[str, tuple[str, ...]] = dataclass_field(default_factory=lambda: NO_WORDS)
    owner: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetKind:
    """One kind of sheet: what it holds, the names it goes by, and its columns.

    `record` is the class that a row becomes; its keyword arguments are the
    columns' fields. `key` are sets of fields: a sheet is of this kind only if one
    set is there whole. `names` are words that a sheet's or file's name holds,
    lower case.
    """

    name: str
    record: type[Any]
    names: tuple[str, ...]
    key: tuple[tuple[str, ...], ...]
    columns: tuple[Column, ...]

    def column(self, name: str) -> Column:
        """Return the column that is read into `name`; KeyError where there is none."""
        for column in self.columns:
            if column.field == name:
                return column
        raise KeyError(name)
