"""What an instrument measures: its variable, its ranges and its measured quantity, ready to be compared."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from typing import Final, NamedTuple

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.letters import USERS_CHOICE, read_letters
from instruments.pressure import referred, stated_reference
from instruments.quantity import Quantity, format_number
from instruments.signal import ma_for_value, ma_from_percent
from instruments.span import percent_of_span
from instruments.unit import Unit, commensurable, unit_label

EQUAL_RANGES: Final = 1e-9
"""Relative difference within which LRV and URV are one value."""


class Scale(NamedTuple):
    """A range with its ends in the base unit of its kind.

    Attributes
    ----------
    lrv, urv
        As written.
    low, high
        The lower and the upper end in the base unit (pressures in Pa, whatever their reference), so
        that a reversed range has them too; the bare numbers where a unit is missing.
    unit
        The URV's unit; None where an end has no unit, or where the two ends measure different things.
    reference
        What a pressure range says that it is referred to; None where it says nothing, or only water gauge.
    flat
        Whether LRV equals URV.
    """

    lrv: Quantity
    urv: Quantity
    low: float
    high: float
    unit: Unit | None
    reference: str | None
    flat: bool

    @property
    def span(self) -> float:
        """The span in the base unit."""
        return self.high - self.low

    @property
    def reversed(self) -> bool:
        """Whether LRV is above URV."""
        return at(self.lrv) > at(self.urv)  # not by the numbers: a vacuum is counted downwards

    @property
    def is_pressure(self) -> bool:
        """Whether it is a range of pressure."""
        return self.unit is not None and self.unit.kind == "pressure"

    def measures(self, quantity: Quantity) -> bool:
        """Whether a value has the range's dimension."""
        return quantity.unit is not None and self.unit is not None and same_dimension(quantity.unit, self.unit)

    def __str__(self) -> str:
        return from_to(self.lrv, self.urv)


@dataclass(slots=True, kw_only=True, eq=False)
class Measurement:
    """What an instrument measures.

    Attributes
    ----------
    installed
        The instrument.
    variable
        The measured variable of its letters: P, PD, T, F, L, A ...; empty where they tell none.
    field, system
        Its field range and its range in the control system.
    body
        gauge, absolute or differential: what its body is; where that is not stated, what its range, its
        letters or its kind tell. None: nothing does, and the plant's default is an assumption.
    names
        The fields of the measured quantity: minimum, normal, maximum.
    values
        Its values; None for a blank.
    ranged
        Whether it has a range, in the field or in the system.
    flat
        Whether LRV equals URV, so that no other question about the range has an answer.
    asked
        Whether an instrument of its kind, in its loop, must have a range.
    mixed
        Whether its pressures are referred to different things; None: not worked out yet.
    """

    installed: Installed
    variable: str
    field: Scale | None
    system: Scale | None
    body: str | None
    names: tuple[str, str, str]
    values: tuple[Quantity | None, Quantity | None, Quantity | None]
    ranged: bool
    flat: bool
    asked: bool = False
    mixed: bool | None = None

    def reference(self, quantity: Quantity) -> str | None:
        """Return what a pressure is referred to: its own, else the body's; None where neither is known."""
        return stated_reference(quantity, body=self.body) or self.body

    def scale_of(self, quantity: Quantity) -> Scale | None:
        """Return the range, of field or system, that has the dimension of a value."""
        for scale in (self.field, self.system):
            if scale is not None and scale.high > scale.low and scale.measures(quantity):
                return scale
        return None

    def at(self, quantity: Quantity, *, to: str, open_as: str, atmospheric_pa: float) -> float | None:
        """Return where a value lies, in the base unit; a pressure referred to `to`.

        Parameters
        ----------
        quantity
            A value with a unit.
        to
            gauge, absolute or differential.
        open_as
            What a pressure is referred to that neither says so itself nor has a body.
        atmospheric_pa
            Atmospheric pressure at the plant in Pa.
        """
        if quantity.unit is None or quantity.unit.kind != "pressure":
            return at(quantity)
        return referred(at(quantity), self.reference(quantity) or open_as, to, atmospheric_pa=atmospheric_pa)

    def ma_at(self, value: float, scale: Scale, *, lrv: float, urv: float) -> float:
        """Return the current of a 4-20 mA signal in mA at a value.

        Of a differential pressure whose root is taken in the device the current follows the root; of a
        flow whose root is taken in the system, its square.

        Parameters
        ----------
        value, lrv, urv
            The value and the ends of the range, in one unit and of one reference.
        scale
            The range that they belong to: the field's or the system's.
        """
        record = self.installed.record
        if scale.is_pressure:
            root = bool(record.square_root_device) and scale is self.field
            return ma_for_value(value, lrv, urv, square_root=root)
        if record.square_root_system and not record.square_root_device:
            percent = percent_of_span(value, lrv, urv)
            return ma_from_percent(percent * abs(percent) / 100.0)
        return ma_for_value(value, lrv, urv)


def measurement_of(installed: Installed, *, asked: bool = False) -> Measurement:
    """Return what an instrument measures, worked out from its row, its body and its letters.

    Parameters
    ----------
    installed
        The instrument.
    asked
        Whether it must have a range.
    """
    record = installed.record
    field = scale(record.lrv, record.urv)
    system = scale(record.system_lrv, record.system_urv, kept=_SYSTEM_SCALES)
    variable = variable_of(installed)
    body = installed.body or _body_told(installed, variable, field, system)
    low, normal, high = record.operating_value_min, record.operating_value_normal, record.operating_value_max
    names = _OPERATING_VALUE
    if low is None and normal is None and high is None:
        if variable == "P" and body != "differential":
            names = _OPERATING_PRESSURE
            low, normal = record.operating_pressure_min, record.operating_pressure_normal
            high = record.operating_pressure_max
        elif variable == "T":
            names = _OPERATING_TEMPERATURE
            low, normal = record.operating_temperature_min, record.operating_temperature_normal
            high = record.operating_temperature_max
    return Measurement(
        installed=installed,
        variable=variable,
        field=field,
        system=system,
        body=body,
        names=names,
        values=(low, normal, high),
        ranged=field is not None or system is not None,
        flat=field.flat if field is not None else system is not None and system.flat,
        asked=asked,
    )


_OPERATING_VALUE: Final = ("operating_value_min", "operating_value_normal", "operating_value_max")
_OPERATING_PRESSURE: Final = ("operating_pressure_min", "operating_pressure_normal", "operating_pressure_max")
_OPERATING_TEMPERATURE: Final = (
    "operating_temperature_min",
    "operating_temperature_normal",
    "operating_temperature_max",
)


_MOST_KEPT: Final = 50_000
_Scales = dict[tuple[int, int], "Scale"]
_SCALES: _Scales = {}
# A field range and a system range stay two where both are written alike: rules tell them apart by identity.
_SYSTEM_SCALES: _Scales = {}


def scale(lrv: Quantity | None, urv: Quantity | None, *, kept: _Scales = _SCALES) -> Scale | None:
    """Return a range with its ends in base units; None where an end is blank.

    `kept` are those made before: lists repeat their ranges.

    >>> from instruments.quantity import read_quantity
    >>> upside_down = scale(read_quantity("10 barg"), read_quantity("0 barg"))
    >>> upside_down.low, upside_down.high, upside_down.reversed, upside_down.reference
    (0.0, 1000000.0, True, 'gauge')
    >>> scale(read_quantity("0 degC"), read_quantity("32 degF")).flat
    True
    """
    if lrv is None or urv is None:
        return None
    # The reader of cells keeps one object for each value that it has seen.
    key = (id(lrv), id(urv))
    known = kept.get(key)
    if known is None:
        known = _scale(lrv, urv)
        if len(kept) < _MOST_KEPT:
            kept[key] = known  # holds both ends, so that no other object can get their ids
    return known


def _scale(lrv: Quantity, urv: Quantity) -> Scale:
    one, other = lrv.unit, urv.unit
    if one is None or other is None or not (one is other or same_dimension(one, other)):
        low, high = sorted((lrv.number, urv.number))
        return Scale(lrv, urv, low, high, None, None, one is other and low == high)
    start, end = at(lrv), at(urv)
    reference = None
    mixed = False
    if other.kind == "pressure":
        # Water gauge is as often said of a differential pressure, and so tells nothing of a body.
        first, reference = stated_reference(lrv, body="differential"), stated_reference(urv, body="differential")
        mixed = first is not None and reference is not None and first != reference
        reference = reference or first
    size = max(abs(lrv.number * (one.factor or 1.0)), abs(urv.number * (other.factor or 1.0)))
    flat = not mixed and abs(end - start) <= EQUAL_RANGES * size
    return Scale(lrv, urv, min(start, end), max(start, end), other, reference, flat)


def at(quantity: Quantity) -> float:
    """Return a value in the base unit of its kind; the bare number where no factor leads there."""
    return quantity.number if quantity.base is None else quantity.base


def same_dimension(one: Unit, other: Unit) -> bool:
    """Whether values in two units can be compared, whatever pressures are referred to."""
    return one.dimension == other.dimension or commensurable(one, other)


def in_unit(base: float, unit: Unit) -> float:
    """Return a value given in the base unit as a number in a unit, without the noise of the last digits."""
    if unit.factor is None:
        return base
    return float(f"{(base - unit.offset) / unit.factor:.13g}")


def difference_in(base: float, unit: Unit) -> float:
    """Return a difference given in the base unit as a number in a unit."""
    return base if unit.factor is None else float(f"{base / abs(unit.factor):.13g}")


def from_to(lrv: Quantity, urv: Quantity) -> str:
    """Write a range for people.

    >>> from instruments.quantity import read_quantity
    >>> from_to(read_quantity("0 barg"), read_quantity("10 barg")), from_to(read_quantity("0 mm"), read_quantity("2 m"))
    ('0 to 10 barg', '0 mm to 2 m')
    """
    if lrv.unit is urv.unit:
        return f"{format_number(lrv.number)} to {urv}"
    return f"{lrv} to {urv}"


def amount(base: float, unit: Unit) -> str:
    """Write a difference given in the base unit: a pressure difference has no reference.

    >>> from instruments.unit import read_unit
    >>> amount(200_000.0, read_unit("barg")), amount(5.0, read_unit("degC"))
    ('2 bar', '5 °C')
    """
    return f"{format_number(difference_in(abs(base), unit))} {unit_label(unit.referred_to('unstated'))}"


# ------------------------------------------------------------------------------------------------- the variable

_KKS_VARIABLES: Final = {"CP": "P", "CT": "T", "CF": "F", "CL": "L", "CQ": "A"}
# What makes another variable of the first letter; the Z and S of a safety system do not.
_OF_ANOTHER_VARIABLE: Final = frozenset("DFJKQ")


def variable_of(installed: Installed) -> str:
    """Return the measured variable that a tag names: its first letter, with D, F, J, K or Q where that modifies it."""
    reading = installed.tag
    if reading is None or not reading.letters:
        return ""
    if reading.scheme == "kks":
        return _KKS_VARIABLES.get(reading.letters, "")
    if reading.code is not None:
        return _variable(reading.code.letters) if reading.code.letters else reading.code.first or ""
    return _variable(reading.letters)


@lru_cache(maxsize=8192)
def _variable(letters: str) -> str:
    reading = read_letters(letters, users_letters=USERS_CHOICE)
    return letters[:1] + "".join(letter for letter in reading.modifier if letter in _OF_ANOTHER_VARIABLE)


def _body_told(installed: Installed, variable: str, field: Scale | None, system: Scale | None) -> str | None:
    """Return the body that a row tells without stating it: by the reference of its range, by letters, by kind."""
    for each in (field, system):
        if each is not None and each.reference is not None:
            return each.reference
    if variable == "PD" or (variable == "F" and field is not None and field.is_pressure):
        return "differential"
    # The scale of a pressure gauge counts from atmosphere unless it says otherwise (EN 837-1, from memory).
    if variable == "P" and installed.kind is Kind.GAUGE:
        return "gauge"
    return None
