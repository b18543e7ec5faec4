"""The unit of a column of bare numbers (volts, ohm, nF, metres), and what a number of another size means in it."""

from __future__ import annotations

import re
from functools import lru_cache
from typing import Final

from instruments.number import CellTrouble, Number, read_number
from instruments.workbook.words import folded

__all__ = ["factor_to", "read_plain_number"]

# Unit to what it is in the quantity's base: exact by definition (SI prefixes, inch 25.4 mm).
_SIZES: Final[dict[str, tuple[str, float]]] = {}
for _quantity, _units in {
    "volt": {
        "v": 1.0,
        "mv": 1e-3,
        "kv": 1e3,
        "vdc": 1.0,
        "v dc": 1.0,
        "volt": 1.0,
        "volts": 1.0,
        "vac": 1.0,
        "v d.c.": 1.0,
    },
    "ampere": {"a": 1.0, "ma": 1e-3, "ua": 1e-6, "madc": 1e-3, "ma dc": 1e-3},
    "ohm": {"ohm": 1.0, "ohms": 1.0, "ω": 1.0, "r": 1.0, "kohm": 1e3, "kω": 1e3, "k ohm": 1e3},
    "watt": {"w": 1.0, "mw": 1e-3, "watt": 1.0, "watts": 1.0, "kw": 1e3},
    "farad": {"pf": 1e-12, "nf": 1e-9, "uf": 1e-6, "mf": 1e-3, "µf": 1e-6},
    "henry": {"nh": 1e-9, "uh": 1e-6, "mh": 1e-3, "h": 1.0, "microhenry": 1e-6, "henry": 1.0},
    "metre": {
        "m": 1.0,
        "mtr": 1.0,
        "mtrs": 1.0,
        "metre": 1.0,
        "metres": 1.0,
        "meter": 1.0,
        "meters": 1.0,
        "mm": 1e-3,
        "cm": 1e-2,
        "km": 1e3,
        "ft": 0.3048,
        "feet": 0.3048,
        "foot": 0.3048,
        "in": 0.0254,
        "inch": 0.0254,
        "yd": 0.9144,
        "lm": 1.0,
    },
    "square metre": {"mm2": 1e-6, "sq mm": 1e-6, "sqmm": 1e-6, "cm2": 1e-4, "m2": 1.0, "mm^2": 1e-6},
    "ohm per metre": {
        "ohm/km": 1e-3,
        "ω/km": 1e-3,
        "ohms/km": 1e-3,
        "ohm/m": 1.0,
        "ohm/1000m": 1e-3,
        "mohm/m": 1e-3,
        "mω/m": 1e-3,
        "ohm/1000ft": 1.0 / 304.8,
        "ohm/kft": 1.0 / 304.8,
        "ohms/1000ft": 1.0 / 304.8,
        "ohm/mft": 1.0 / 304.8,
        "ω/1000ft": 1.0 / 304.8,
        "ohm/100m": 1e-2,
        # Out and back: a conductor has half of it.
        "loop ohm/km": 0.5e-3,
        "loop ω/km": 0.5e-3,
        "loop ohm/1000ft": 0.5 / 304.8,
        "loop ohm/kft": 0.5 / 304.8,
        "ohm/ft": 1.0 / 0.3048,
        "ohm/mile": 1.0 / 1609.344,
        "ohm/mi": 1.0 / 1609.344,
    },
    "farad per metre": {
        "pf/m": 1e-12,
        "nf/km": 1e-12,
        "nf/m": 1e-9,
        "uf/km": 1e-9,
        "pf/ft": 1e-12 / 0.3048,
        "nf/1000ft": 1e-9 / 304.8,
        "pf/km": 1e-15,
        "nf/kft": 1e-9 / 304.8,
        "nf/100m": 1e-11,
        "pf/100m": 1e-14,
    },
    "henry per metre": {
        "uh/m": 1e-6,
        "mh/km": 1e-6,
        "uh/km": 1e-9,
        "nh/m": 1e-9,
        "uh/ft": 1e-6 / 0.3048,
        "mh/m": 1e-3,
        "mh/1000ft": 1e-3 / 304.8,
        "mh/kft": 1e-3 / 304.8,
        "uh/100m": 1e-8,
    },
    "henry per ohm": {"uh/ohm": 1e-6, "uh/ω": 1e-6, "mh/ohm": 1e-3, "mh/ω": 1e-3},
    "percent": {"%": 0.01, "pct": 0.01, "percent": 0.01, "% url": 0.01, "% of url": 0.01, "%url": 0.01},
}.items():
    for _name, _size in _units.items():
        _SIZES[_name] = (_quantity, _size)

_CELSIUS: Final = frozenset({"degc", "°c", "c", "deg c", "deg. c", "ºc", "celsius", "grad c"})
_FAHRENHEIT: Final = frozenset({"degf", "°f", "f", "deg f", "deg. f", "ºf", "fahrenheit"})
_KELVIN: Final = frozenset({"k", "kelvin"})


def _plain(unit: str) -> str:
    text = folded(unit).replace("μ", "u").replace("µ", "u").replace("²", "2").replace("per ", "/")
    return text.replace(" / ", "/").strip(" .[]()").removesuffix(" each")


def _closed(unit: str) -> str:
    """Return a unit without its spaces, but for the word before it: ohm/1000 ft, loop ohm/1000 ft."""
    loop = unit.startswith("loop ")
    return ("loop " if loop else "") + (unit[5:] if loop else unit).replace(" ", "")


@lru_cache(maxsize=4096)
def factor_to(column_unit: str, written: str) -> tuple[float, float] | None:
    """Return factor and offset that bring a number in the written unit into a column's own; None where none does.

    >>> factor_to("nF", "pF"), factor_to("m", "ft"), factor_to("V", "mA")
    ((0.001, 0.0), (0.3048, 0.0), None)
    >>> factor_to("degC", "°F")
    (0.5555555555555556, -17.77777777777778)
    """
    own, other = _plain(column_unit), _plain(written)
    if own == other and own:
        return 1.0, 0.0
    if own in _CELSIUS:
        if other in _CELSIUS:
            return 1.0, 0.0
        if other in _FAHRENHEIT:
            return 5.0 / 9.0, -160.0 / 9.0
        return (1.0, -273.15) if other in _KELVIN else None
    one, two = _SIZES.get(own), _SIZES.get(other) or _SIZES.get(_closed(other))
    if one is None or two is None or one[0] != two[0]:
        return None
    factor = two[1] / one[1]
    # 1e-12 / 1e-9 is 0.001 and not 0.0009999999999999999.
    return float(f"{factor:.15g}"), 0.0


_NUMBER_AND_UNIT: Final = re.compile(
    r"(?P<number>[<>≤≥~≈]?\s?[-+−–]?\s?(?:\d[\d.,' \u00a0]{0,20}\d|\d|[.,]\d{1,9})(?:[eE][-+]?\d{1,3})?)\s?"
    r"(?P<unit>[^\d\s].{0,23})?",
    re.DOTALL,
)


def read_plain_number(
    cell: object, column_unit: str, *, heading_unit: str | None, decimal: str | None
) -> float | CellTrouble:
    """Read a bare number of a column with a unit of its own.

    Parameters
    ----------
    cell
        Text or number.
    column_unit
        The unit of the value that is returned; blank for a number without one.
    heading_unit
        The unit that heading or unit column state; None where they are silent.
    decimal
        The sheet's decimal mark.

    >>> read_plain_number("250 Ω", "ohm", heading_unit=None, decimal=".")
    250.0
    >>> read_plain_number(300.0, "m", heading_unit="ft", decimal=".")
    91.44
    >>> read_plain_number("12 furlongs", "m", heading_unit=None, decimal=".").reason
    "unit 'furlongs' is not a unit of this column (m)"
    """
    unit = heading_unit
    if isinstance(cell, str):
        text = cell.strip()
        found = _NUMBER_AND_UNIT.fullmatch(text)
        if found is not None and found["unit"]:
            written = found["unit"].strip()
            if not column_unit and not re.fullmatch(r":\s?1", written):
                return CellTrouble(reason=f"'{text}' is not a number")
            if column_unit:
                unit = written
                if factor_to(column_unit, written) is None:
                    return CellTrouble(reason=f"unit '{written}' is not a unit of this column ({column_unit})")
            text = found["number"]
        elif found is None and re.fullmatch(r"\d{1,4}\s?:\s?1", text):
            text = text.partition(":")[0]
        number = read_number(text, decimal=decimal)
    else:
        number = read_number(cell, decimal=decimal)
    if isinstance(number, CellTrouble):
        return number
    assert isinstance(number, Number)
    if unit is None or not column_unit:
        return number.value
    scale = factor_to(column_unit, unit)
    if scale is None:
        return CellTrouble(reason=f"unit '{unit}' is not a unit of this column ({column_unit})")
    return float(f"{number.value * scale[0] + scale[1]:.15g}") if scale != (1.0, 0.0) else number.value
