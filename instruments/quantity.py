"""A written value: a number with its unit and what it is referred to, a range of two, a triplet of three."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass, field
from typing import Final, NamedTuple

from instruments.number import (
    LONGEST_RAW,
    NUMBER_PATTERN,
    CellTrouble,
    Number,
    plain_signs,
    read_number,
    split_qualifier,
)
from instruments.unit import (
    Unit,
    UnitMismatch,
    commensurable,
    comparable,
    convert,
    difference,
    read_reference,
    read_unit,
    unit_label,
)
from instruments.unit import unit as unit_of

__all__ = [
    "CellTrouble",
    "Quantity",
    "Range",
    "Triplet",
    "UnitMismatch",
    "absolute_pa",
    "comparable",
    "convert",
    "difference",
    "format_number",
    "read_quantity",
    "read_range",
    "read_triplet",
    "unit_label",
    "with_reference",
]

LONGEST_CELL: Final = 120
"""Characters of a cell that may still be a value or a range; anything longer is prose."""


@dataclass(frozen=True, slots=True)
class Quantity:
    """A value as it was written and in the base unit of its kind.

    Attributes
    ----------
    text
        What was written. It does not count when two quantities are compared.
    number
        The number, in `unit`.
    unit
        None where no unit was stated anywhere.
    reference
        The unit's reference; for pressures only.
    base
        The value in the kind's base unit (see `instruments.unit.BASE_UNITS`): a gauge pressure in
        Pa gauge, a vacuum in Pa gauge and so negative, a temperature in K, a volume of gas in m3/s
        at 0 degC and 101.325 kPa. None without a unit, and where no factor leads there (a head of
        process liquid).
    qualifier
        ``<``, ``>``, ``~``, ``min``, ``norm``, ``max``, ``rising``, ``falling`` or ``full vacuum``
        (``3.5 barg / FV``), if one was written.
    """

    text: str = field(compare=False)
    number: float
    unit: Unit | None
    reference: str | None
    base: float | None
    qualifier: str | None = None

    @classmethod
    def made(cls, number: float, unit: Unit | None, reference: str | None = None) -> Quantity:
        """Make a quantity of a computed value.

        >>> str(Quantity.made(0.1 + 0.2, read_unit("bar"), "gauge"))
        '0.3 barg'
        """
        if unit is not None and reference is not None:
            unit = unit.referred_to(reference)
        written = format_number(number)
        return _quantity(written if unit is None else f"{written} {unit_label(unit)}", float(number), unit)

    def to(self, unit: Unit) -> float:
        """Return the number in another unit.

        Raises
        ------
        UnitMismatch
            Another kind of unit, another reference, or no unit on this side.

        >>> round(read_quantity("10 kg/cm2(g)").to(read_unit("psig")), 3)
        142.233
        """
        if self.unit is None:
            raise UnitMismatch(f"{self.text} has no unit")
        return convert(self.number, self.unit, unit)

    def in_unit(self, unit: Unit) -> Quantity:
        """Return the same quantity written in another unit; an unstated reference takes that unit's."""
        return Quantity.made(self.to(unit), unit)

    def same_as(self, other: Quantity) -> bool:
        """Whether both mean the same value, whatever unit each is written in (1e-9 relative).

        A reference that one of them leaves unstated makes no difference.
        """
        if self.unit is None or other.unit is None:
            return self.unit is other.unit and math.isclose(self.number, other.number, rel_tol=1e-9)
        try:
            number = other.to(self.unit)
        except UnitMismatch:
            return False
        return math.isclose(self.number, number, rel_tol=1e-9, abs_tol=1e-12)

    def __str__(self) -> str:
        number = format_number(self.number)
        return number if self.unit is None else f"{number} {unit_label(self.unit)}"


class Range(NamedTuple):
    """Both ends of a range, and the signal they belong to if the cell named it."""

    lrv: Quantity
    urv: Quantity
    signal: str | None = None


class Triplet(NamedTuple):
    """Minimum, normal and maximum; None for one that the cell leaves open."""

    min: Quantity | None
    norm: Quantity | None
    max: Quantity | None


def _quantity(text: str, number: float, unit: Unit | None, qualifier: str | None = None) -> Quantity:
    if unit is None:
        return Quantity(text, number, None, None, None, qualifier)
    factor = unit.factor
    base = None if factor is None else number * factor + unit.offset + 0.0
    return Quantity(text, number, unit, unit.reference, base, qualifier)


def format_number(value: float) -> str:
    """Print a number to six significant digits, without float noise and without an exponent.

    >>> [format_number(value) for value in (0.30000000000000004, -84.0, 1234567.0, 10.488)]
    ['0.3', '-84', '1234567', '10.488']
    """
    if not math.isfinite(value):
        return str(value)
    if value == 0.0:
        return "0"
    size = math.floor(math.log10(abs(value)))
    if not -10 < size < 15:
        return f"{value:.6g}"
    places = max(0, 5 - size)
    text = f"{value:.{places}f}"
    if places:
        text = text.rstrip("0").rstrip(".")
    return "0" if text == "-0" else text


# ---------------------------------------------------------------------------------------------------------
# One value

_MOST_KEPT: Final = 100_000
_NUMBERS: dict[tuple[float, Unit | None], Quantity] = {}
_TEXTS: dict[tuple[str, Unit | None, str | None, tuple[str, ...]], Quantity | CellTrouble] = {}
_RANGES: dict[tuple[str, Unit | None, str | None], Range | CellTrouble] = {}

_SIGNED = re.compile(rf"([-+]?) ?({NUMBER_PATTERN})(?![0-9])")
_NOTE = re.compile(
    r"[ ,]*(?:[(\[] ?(?:see )?(?:note|remark|rem)s?\.? ?[0-9][0-9 ,&]{0,8}[)\]]|(?:see )?notes? [0-9]{1,3}|"
    r"\*{1,3})$",
    re.IGNORECASE,
)
_ADDED = re.compile(
    r"[ ,]*[(\[]?(?:√|sqrt|sq\.? ?root|sq\.? ?rt|square root|linear|lin|adjustable|adj|factory set|set|"
    r"calibrated|cal)"
    r"\.?[)\]]?$",
    re.IGNORECASE,
)
_DIRECTION = re.compile(
    r"[ ,]*[(\[]?(?:(?P<rising>↑|rising|rise|increasing|incr?|steigend)|"
    r"(?P<falling>↓|falling|fall|decreasing|decr?|fallend))"
    r"\.?[)\]]?$",
    re.IGNORECASE,
)
_CONNECTION = re.compile(
    r"(?:[0-9]{1,2}[ -])?[0-9]{1,2} ?/ ?[0-9]{1,2} ?(?:\"|''|in\b|inch|npt|bsp|nb\b)|(?:dn|nps) ?[0-9]|[0-9]{1,4} ?nb$",
    re.IGNORECASE,
)
_LETTERS_ONLY = re.compile(r"[^a-z]+")
_FULL_VACUUM = frozenset({"fv", "fullvacuum", "fullvac", "fullv", "vollvakuum", "vacuum", "fvac"})
_ATMOSPHERIC = frozenset({"atm", "atmos", "atmosphere", "atmospheric", "atmosphericpressure", "atmpress", "drucklos"})
_AMBIENT = frozenset({"amb", "ambient", "ambienttemp", "ambienttemperature", "ambtemp", "umgebung"})
_AND_VACUUM = re.compile(
    r"(?:^(?:f\.?v\.?|full vac(?:uum)?) ?"
    r"(?:/|&|\+|,|and|to|bis|\.{2,4}|…|~|÷|-(?= |[0-9]{1,2}(?![0-9A-Za-z]))) ?(?=[0-9]))"
    r"|(?: ?(?:/|&|\+|,|and) ?(?:f\.?v\.?|full vac(?:uum)?)$)",
    re.IGNORECASE,
)
FULL_VACUUM_BAR: Final = -1.01325
"""Full vacuum as a gauge pressure in bar: minus one standard atmosphere."""


def _keyword(text: str, unit: Unit | None, kinds: tuple[str, ...]) -> Quantity | CellTrouble | None:
    if len(text) > 24 or any(sign.isdigit() for sign in text):
        return None
    word = _LETTERS_ONLY.sub("", text.lower())
    vacuum, atmospheric = word in _FULL_VACUUM, word in _ATMOSPHERIC
    if not (vacuum or atmospheric or word in _AMBIENT):
        return None
    pressure = unit.kind == "pressure" if unit is not None else "pressure" in kinds
    if not pressure:
        if word in _AMBIENT:
            return CellTrouble(reason=f"'{text}' gives no figure", blank="ambient")
        return CellTrouble(reason=f"'{text}' is a pressure, and this column holds none")
    if unit is not None and unit.reference == "absolute":
        atmosphere = unit_of("atm", "absolute")
        return _quantity(text, 0.0 if vacuum else convert(1.0, atmosphere, unit), unit)
    if vacuum:
        return _quantity(text, FULL_VACUUM_BAR, unit_of("bar", "gauge"))
    if unit is not None and unit.reference == "differential":
        return CellTrouble(reason=f"'{text}' is no differential pressure")
    return _quantity(text, 0.0, unit_of("bar", "gauge") if unit is None else unit.referred_to("gauge"))


def _own_unit(written: str, unit: Unit | None) -> Unit | CellTrouble | None:
    """Unit of a value from what stands behind its number, and from what heading or column said."""
    written = written.strip(" .:=")
    if not written:
        return unit
    if unit is not None and unit.kind == "pressure":
        reference = read_reference(written)
        if reference:
            return unit.referred_to(reference)
    found = read_unit(written)
    if found is None and "@" in written:
        found = read_unit(written.partition("@")[0])  # a condition (850 kg/m3 @ 20 °C) changes no value
    if found is None:
        return CellTrouble(reason=f"unit '{written}' is not known")
    if unit is not None and found.reference == "unstated" and found.canonical == unit.canonical:
        return unit
    return found


def _written(text: str, number: float, unit: Unit | None) -> Quantity:
    if number < 0.0 and unit is not None and unit.reference == "vacuum":
        unit = unit.referred_to("gauge")  # -20 inHg vac: the sign says it once more
    return _quantity(text, number, unit)


def _value(text: str, sign: str, digits: str, unit: Unit | None, decimal: str | None) -> Quantity | CellTrouble:
    number = read_number(digits, decimal=decimal)
    if isinstance(number, CellTrouble):
        minus = "-" if sign == "-" else ""
        return CellTrouble(reason=number.reason, readings=tuple(minus + reading for reading in number.readings))
    return _written(text, -number.value + 0.0 if sign == "-" else number.value, unit)


_UNITS_IN_FRONT: Final = ("other", "ratio")  # pH 7, SG 0.85, % 50


def _single(text: str, unit: Unit | None, decimal: str | None) -> Quantity | CellTrouble:
    """Read one number with or without a unit behind it (in front of it for pH and SG)."""
    text, qualifier = split_qualifier(_ADDED.sub("", text))
    direction = _DIRECTION.search(text)
    if direction:
        text, qualifier = text[: direction.start()], direction.lastgroup
    found = _SIGNED.match(text)
    if not found:
        start = next((at for at, sign in enumerate(text) if sign in "0123456789"), 0)
        start -= 1 if start and text[start - 1] in "-+" else 0
        front = read_unit(text[:start].strip(" :=")) if start else None
        if front is not None and front.kind in _UNITS_IN_FRONT:
            return _single(text[start:], front, decimal)
        number = read_number(text, decimal=decimal)
        if isinstance(number, Number):
            return _quantity(text, number.value, unit, qualifier)
        return number
    own = _own_unit(text[found.end() :], unit)
    if isinstance(own, CellTrouble):
        whole = read_number(text, decimal=decimal)
        if isinstance(whole, CellTrouble) and whole.readings:
            return whole
        return own
    value = _value(text, found[1], found[2], own, decimal)
    if qualifier and isinstance(value, Quantity):
        return Quantity(value.text, value.number, value.unit, value.reference, value.base, qualifier)
    return value


_TWICE = re.compile(r" ?(?:[(\[] ?(?P<inside>[-+]?[.,0-9][^()\[\]]*)[)\]]| [/=] ?(?P<after>[-+]?[.,0-9].*))$")
_BRACKETS = {"(": ")", "[": "]"}


def _unwrapped(text: str) -> str:
    if len(text) > 2 and _BRACKETS.get(text[0]) == text[-1] and text.count(text[0]) == 1:
        return text[1:-1].strip()
    return text


def _agree(one: float, other: float, size: float) -> bool:
    return abs(one - other) <= 0.01 * size  # both are rounded by hand


def _read_one(cell: str, unit: Unit | None, decimal: str | None, kinds: tuple[str, ...]) -> Quantity | CellTrouble:
    text = plain_signs(cell[:LONGEST_RAW]).strip()
    if not text:
        return CellTrouble(reason="the cell is empty")
    if len(text) > LONGEST_CELL or len(cell) > LONGEST_RAW:
        return CellTrouble(reason="the text is too long for a value")
    text = _NOTE.sub("", text).strip()
    if _CONNECTION.match(text):
        return CellTrouble(reason=f"'{text}' is a pipe size")
    keyword = _keyword(text, unit, kinds)
    if keyword is not None:
        return keyword
    text = _unwrapped(text)
    vacuum = _AND_VACUUM.search(text)
    if vacuum:
        value = _single((text[: vacuum.start()] + text[vacuum.end() :]).strip(), unit, decimal)
        if isinstance(value, Quantity):
            return Quantity(value.text, value.number, value.unit, value.reference, value.base, "full vacuum")
    value = _single(text, unit, decimal)
    if isinstance(value, Quantity) or value.readings:
        return value
    twice = _TWICE.search(text)
    if twice:
        first = _single(text[: twice.start()].strip(), unit, decimal)
        second = _single((twice["inside"] or twice["after"]).strip(), None, decimal)
        if isinstance(first, Quantity) and isinstance(second, Quantity):
            if first.unit and second.unit and commensurable(first.unit, second.unit):
                try:
                    again = second.to(first.unit)
                except UnitMismatch:
                    again = math.inf
                if _agree(first.number, again, abs(first.number)):
                    return first
            return CellTrouble(reason=f"'{text}' holds two values", readings=(str(first), str(second)))
    pair = _read_pair(text, unit, decimal)
    if isinstance(pair, Range):
        return CellTrouble(
            reason=f"'{text}' holds two values where one is wanted", readings=(str(pair.lrv), str(pair.urv))
        )
    return value


def read_quantity(
    cell: object, *, unit: Unit | None = None, decimal: str | None = ".", kinds: tuple[str, ...] = ()
) -> Quantity | CellTrouble:
    """Read one value.

    Parameters
    ----------
    cell : object
        Text or number.
    unit : Unit or None
        What heading or unit column say. A unit in the cell wins over it; where both name the same
        unit, a reference that the cell leaves unstated is taken from it.
    decimal : str or None
        The sheet's decimal mark, see `instruments.number.read_number`.
    kinds : tuple of str
        Kinds of unit that the column holds, where no unit is known: full vacuum and atmospheric
        are pressures and nothing else.

    Returns
    -------
    Quantity or CellTrouble
        Trouble says what was found and the readings that were considered.

    >>> barg = read_unit("BAR G")
    >>> str(read_quantity("100 psig", unit=barg)), str(read_quantity(12.5, unit=barg))
    ('100 psig', '12.5 barg')
    >>> str(read_quantity("FV", unit=read_unit("mbar"))), read_quantity("5 furlongs").reason
    ('-1.01325 barg', "unit 'furlongs' is not known")
    """
    if type(cell) is float:
        kept = _NUMBERS.get((cell, unit))
        if kept is not None:
            return kept
        return _from_number(cell, unit)
    if type(cell) is str:
        key = (cell, unit, decimal, kinds)
        known = _TEXTS.get(key)
        if known is None:
            known = _read_one(cell, unit, decimal, kinds)
            if len(_TEXTS) < _MOST_KEPT and len(cell) <= LONGEST_CELL:
                _TEXTS[key] = known
        return known
    number = read_number(cell)
    return number if isinstance(number, CellTrouble) else _from_number(number.value, unit)


def _from_number(cell: float, unit: Unit | None) -> Quantity | CellTrouble:
    if not math.isfinite(cell):
        return CellTrouble(reason="not a finite number")
    value = _written(f"{cell:.15g}", cell, unit)
    if len(_NUMBERS) < _MOST_KEPT:
        _NUMBERS[cell, unit] = value
    return value


# ---------------------------------------------------------------------------------------------------------
# A range

_BETWEEN = re.compile(
    r" ?(?P<sep>\.{2,4}|…|up to|to|bis|thru|through|till|until|and|und|-{1,2}>|→|[-/~∼～÷:;|]|,(?= )|(?=\+)|"
    r"(?= max))"
    rf" ?(?:max(?:imum)?[.: =]+)?(?P<sign>[-+]?) ?(?P<digits>{NUMBER_PATTERN})(?![0-9])",
    re.IGNORECASE,
)
_INTRODUCTION = re.compile(
    r"(?:(?:calibrated|calibration|cal|measuring|meas|set|scale|range|messbereich|bereich|from|von|between|zwischen|"
    r"lrv|min)"
    r"(?![A-Za-z])[.:= ]*)+",
    re.IGNORECASE,
)
_PLUS_MINUS = re.compile(rf"(?:0 ?)?(?:±|\+ ?/ ?-|-/\+|\+-) ?(?P<digits>{NUMBER_PATTERN})(?![0-9])", re.IGNORECASE)
_PAIR_IN_BRACKETS = re.compile(r"[(\[]([^()\[\]]+)[)\]] ?(.*)$")
_SIGNAL = (
    r"(?P<signal>[0-9]+(?:[.,][0-9]+)? ?(?:mA ?)?(?:-|to|\.{2,3}|…|/|bis) ?[0-9]+(?:[.,][0-9]+)? ?"
    r"(?:mA|V)(?: ?d\.?c\.?)?(?: ?\+? ?HART)?)"
)
_SIGNAL_FIRST = re.compile(
    rf"[(\[]?{_SIGNAL}[)\]]?(?![A-Za-z]) ?(?:[=:,;/@]|≙|->|→|for|corresponds to)? ?(?=.)", re.IGNORECASE
)
_SIGNAL_LAST = re.compile(rf" ?(?:[=:,;/@]|≙|->|→|[(\[]|(?<= )) ?{_SIGNAL} ?[)\]]?$", re.IGNORECASE)
_CURRENT_SIGNAL = re.compile(
    r"[(\[]?[04] ?(?:mA ?)?(?:-|to|\.{2,3}|…|/|bis) ?20 ?mA(?: ?d\.?c\.?)?(?: ?\+? ?HART)?[)\]]?$",
    re.IGNORECASE,
)
_SIGNAL_ENDS = re.compile(
    r"4 ?mA ?(?:=|:|@|≙) ?(?P<low>[^=:@≙]{1,30}?) ?[,;/] ?20 ?mA ?(?:=|:|@|≙) ?(?P<high>[^=:@≙]{1,30})$",
    re.IGNORECASE,
)
_PNEUMATIC = re.compile(
    r"(?:3 ?(?:-|to) ?15 ?psi|0[.,]2 ?(?:-|to) ?1(?:[.,]0)? ?bar|20 ?(?:-|to) ?100 ?kPa)g?$", re.IGNORECASE
)
_EQUALS = re.compile(r" ?(?:=|≙) ?")


def _ends(low: Quantity | CellTrouble, high: Quantity | CellTrouble, signal: str | None = None) -> Range | CellTrouble:
    if isinstance(low, CellTrouble):
        return low
    if isinstance(high, CellTrouble):
        return high
    if {low.reference, high.reference} == {"gauge", "vacuum"}:  # -30..0 inHg vac: one of them had a sign
        low, high = (
            end.in_unit(end.unit.referred_to("gauge")) if end.unit and end.reference == "vacuum" else end
            for end in (low, high)
        )
    return Range(low, high, signal)


def _same_side(low: Unit | None, high: Unit | None) -> tuple[Unit | None, Unit | None]:
    """Let an end without a stated reference take the other's."""
    if low and high and low.kind == high.kind == "pressure":
        if low.reference == "unstated" and high.reference:
            return low.referred_to(high.reference), high
        if high.reference == "unstated" and low.reference:
            return low, high.referred_to(low.reference)
    return low, high


def _vacuum_end(text: str, unit: Unit | None, decimal: str | None) -> Range | CellTrouble | None:
    """Read 'FV to 3 barg': full vacuum as the lower end."""
    found = _AND_VACUUM.match(text)
    if not found:
        return None
    high = _single(text[found.end() :], unit, decimal)
    if isinstance(high, CellTrouble) or high.unit is None or high.unit.kind != "pressure":
        return None
    gauge = high.unit.referred_to("gauge") if high.reference == "unstated" else high.unit
    low = 0.0 if high.reference == "absolute" else convert(FULL_VACUUM_BAR, unit_of("bar", gauge.reference), gauge)
    return Range(_quantity("FV", low, gauge), _quantity(high.text, high.number, gauge), None)


def _read_pair(text: str, unit: Unit | None, decimal: str | None) -> Range | CellTrouble:
    """Read two numbers and their unit or units, without a signal."""
    text = _INTRODUCTION.sub("", text, count=1) if _INTRODUCTION.match(text) else text
    text = _unwrapped(text)
    bracketed = _PAIR_IN_BRACKETS.match(text)
    if bracketed:
        text = f"{bracketed[1].strip()} {bracketed[2]}".strip()
    around = _PLUS_MINUS.match(text)
    if around:
        own = _own_unit(text[around.end() :], unit)
        if isinstance(own, CellTrouble):
            return own
        digits = around["digits"]
        return _ends(
            _value(f"-{text[around.start('digits') :]}", "-", digits, own, decimal),
            _value(text[around.start("digits") :], "+", digits, own, decimal),
        )
    vacuum = _vacuum_end(text, unit, decimal)
    if vacuum is not None:
        return vacuum
    first = _SIGNED.match(text)
    if not first:
        start = next((at for at, sign in enumerate(text) if sign in "0123456789"), 0)
        start -= 1 if start and text[start - 1] in "-+" else 0
        front = _own_unit(text[:start], unit) if text[:start].strip(" .:=") else None
        if isinstance(front, Unit) and _SIGNED.match(text, start):
            return _read_pair(text[start:].strip(), front, decimal)
        return _no_pair(text, unit, decimal)
    trouble: CellTrouble | None = None
    for between in _BETWEEN.finditer(text, first.end()):
        written_low, written_high = text[first.end() : between.start()].strip(" ."), text[between.end() :].strip(" .")
        unit_low = _own_unit(written_low, None) if written_low else None
        unit_high = _own_unit(written_high or written_low, unit)
        if isinstance(unit_low, CellTrouble):
            continue
        if isinstance(unit_high, CellTrouble):
            trouble = trouble or unit_high
            continue
        if unit_low is None or not written_high:
            unit_low = unit_high
        if unit_low and unit_high and not commensurable(unit_low, unit_high):
            if unit_low.canonical != "inch":  # 0"-100" WC
                return CellTrouble(
                    reason=f"the ends of '{text}' measure different things",
                    readings=(unit_label(unit_low), unit_label(unit_high)),
                )
            unit_low = unit_high
        low, high = _same_side(unit_low, unit_high)
        return _ends(
            _value(text[: between.start()].strip(), first[1], first[2], low, decimal),
            _value(text[between.start("sign") :].strip(), between["sign"], between["digits"], high, decimal),
        )
    if trouble is not None:
        return trouble
    return _no_pair(text, unit, decimal)


def _no_pair(text: str, unit: Unit | None, decimal: str | None) -> CellTrouble:
    single = _single(text, unit, decimal)
    if isinstance(single, CellTrouble):
        return single if single.readings else CellTrouble(reason=f"'{text}' is not a range")
    return CellTrouble(
        reason=f"'{text}' is one figure where a range is wanted", readings=(f"0 to {single}", str(single))
    )


def _read_range(cell: str, unit: Unit | None, decimal: str | None) -> Range | CellTrouble:
    text = plain_signs(cell[:LONGEST_RAW]).strip()
    if not text:
        return CellTrouble(reason="the cell is empty")
    if len(text) > LONGEST_CELL or len(cell) > LONGEST_RAW:
        return CellTrouble(reason="the text is too long for a range")
    text = _ADDED.sub("", " ".join(_NOTE.sub("", text).split()))
    if _CONNECTION.match(text):
        return CellTrouble(reason=f"'{text}' is a pipe size")
    if _CURRENT_SIGNAL.match(text):
        return CellTrouble(reason=f"'{text}' is a signal, no range", readings=(f"signal {text}",))
    ends = _SIGNAL_ENDS.match(text)
    if ends:
        high = _single(ends["high"], unit, decimal)
        shared = high.unit if isinstance(high, Quantity) else unit
        return _ends(_single(ends["low"], shared, decimal), high, "4-20 mA")
    sides = _EQUALS.split(text)
    if len(sides) == 2 and all(sides):
        for signal, rest in (sides, sides[::-1]):
            if _PNEUMATIC.match(signal) or re.fullmatch(_SIGNAL, signal, re.IGNORECASE):
                return _with_signal(_read_pair(rest, unit, decimal), signal)
    for pattern in (_SIGNAL_FIRST, _SIGNAL_LAST):
        found = pattern.search(text) if pattern is _SIGNAL_LAST else pattern.match(text)
        if found:
            rest = (text[: found.start()] + text[found.end() :]).strip()
            pair = _read_pair(rest, unit, decimal) if rest else None
            if isinstance(pair, Range):
                return _with_signal(pair, found["signal"])
    pair = _read_pair(text, unit, decimal)
    if isinstance(pair, Range) or pair.readings:
        return pair
    return _said_twice(text, unit, decimal) or pair


def _with_signal(pair: Range | CellTrouble, signal: str) -> Range | CellTrouble:
    return pair if isinstance(pair, CellTrouble) else Range(pair.lrv, pair.urv, signal)


_SECOND_RANGE_STARTS = re.compile(r" ?[(\[/=;,] ?(?=[-+]?[.,]?[0-9])")


def _said_twice(text: str, unit: Unit | None, decimal: str | None) -> Range | CellTrouble | None:
    """Read '0-10 bar (0-145 psi)': one range in two units; two different ranges are trouble."""
    pairs = None
    for found in _SECOND_RANGE_STARTS.finditer(text):
        first = _read_pair(text[: found.start()].strip(), unit, decimal)
        second = _read_pair(text[found.end() :].strip(" )]"), None, decimal)
        if isinstance(first, Range) and isinstance(second, Range):
            pairs = first, second
            break
    if pairs is None:
        return None
    first, second = pairs
    if first.urv.unit and second.urv.unit:
        try:
            low, high = second.lrv.to(first.urv.unit), second.urv.to(first.urv.unit)
        except UnitMismatch:
            low = high = math.inf
        size = abs(first.urv.number - first.lrv.number)
        if _agree(first.lrv.number, low, size) and _agree(first.urv.number, high, size):
            return first
    readings = tuple(f"{pair.lrv} to {pair.urv}" for pair in (first, second))
    return CellTrouble(reason=f"'{text}' holds two ranges", readings=readings)


def read_range(cell: object, *, unit: Unit | None = None, decimal: str | None = ".") -> Range | CellTrouble:
    """Read a range that stands in one cell.

    Parameters
    ----------
    cell : object
        The cell.
    unit : Unit or None
        What heading or unit column say; a unit in the cell wins.
    decimal : str or None
        The sheet's decimal mark.

    Returns
    -------
    Range or CellTrouble
        Reversed ranges keep their direction.

    >>> lrv, urv, signal = read_range("4-20mA = 0-250 m³/h")
    >>> str(lrv), str(urv), signal
    ('0 m³/h', '250 m³/h', '4-20mA')
    >>> [[str(end) for end in read_range(text)[:2]] for text in ("-50–+150 °C", "10--5 bar")]
    [['-50 °C', '150 °C'], ['10 bar', '-5 bar']]
    """
    if not isinstance(cell, str):
        number = read_number(cell)
        if isinstance(number, CellTrouble):
            return number
        single = Quantity.made(number.value, unit)
        return CellTrouble(
            reason=f"'{single}' is one figure where a range is wanted",
            readings=(f"0 to {single}", str(single)),
        )
    key = (cell, unit, decimal)
    known = _RANGES.get(key)
    if known is None:
        known = _read_range(cell, unit, decimal)
        if len(_RANGES) < _MOST_KEPT and len(cell) <= LONGEST_CELL:
            _RANGES[key] = known
    return known


# ---------------------------------------------------------------------------------------------------------
# Minimum, normal and maximum in one cell

_LABEL = r"(?:maximum|minimum|normal|norm|max|min|nor|nom|rated|n)\.?(?![A-Za-z/])"
_LABELLED = re.compile(rf"({_LABEL}) ?[:=]? ?|(?P<behind> ?[(]?({_LABEL})[)]?$)", re.IGNORECASE)
_PARTS = re.compile(
    rf" ?(?:[/;|]|,(?= )) ?(?=[-+<>~]? ?[.,]?[0-9]|{_LABEL} ?[:=]? ?[-+]?[0-9]|"
    r"(?:-+|n\.?/?a\.?)? ?(?:[/;|]|$))",
    re.IGNORECASE,
)
_LEGEND = re.compile(r"([a-z]{1,8})\.?/([a-z]{1,8})\.?/([a-z]{1,8})[.: =]+(?=[-+0-9<>])", re.IGNORECASE)
_DASHED = re.compile(rf"({NUMBER_PATTERN}) ?- ?({NUMBER_PATTERN}) ?- ?({NUMBER_PATTERN})(?![0-9])(.*)$")
_OPEN = frozenset({"", "-", "--", "---", "n/a", "na", "n.a.", "n.a", "tba", "tbc", "tbd"})
_SLOTS = {"mi": 0, "no": 1, "n": 1, "n.": 1, "ra": 1, "ma": 2}


def _label(part: str) -> tuple[str, int | None]:
    found = _LABELLED.match(part)
    if found and found[1]:
        return part[found.end() :].strip(), _SLOTS[found[1].lower()[:2]]
    behind, qualifier = split_qualifier(part)
    if qualifier in ("min", "norm", "max"):
        return behind, ("min", "norm", "max").index(qualifier)
    return part, None


def read_triplet(
    cell: object, *, unit: Unit | None = None, decimal: str | None = ".", kinds: tuple[str, ...] = ()
) -> Triplet | CellTrouble:
    """Read minimum, normal and maximum from one cell; one figure alone is the normal value.

    Parameters are those of `read_quantity`.

    >>> [str(value) for value in read_triplet("2 / 5 / 8 barg")]
    ['2 barg', '5 barg', '8 barg']
    >>> [value and value.number for value in read_triplet("- / 5 / 8")]
    [None, 5.0, 8.0]
    """
    if not isinstance(cell, str):
        single = read_quantity(cell, unit=unit, decimal=decimal, kinds=kinds)
        return single if isinstance(single, CellTrouble) else Triplet(None, single, None)
    if len(cell) > LONGEST_CELL:
        return CellTrouble(reason="the text is too long for three values")
    text = " ".join(plain_signs(cell.strip().replace("\n", " / ")).split())
    if not text:
        return CellTrouble(reason="the cell is empty")
    legend = _LEGEND.match(text)  # N/M/Max 2/5/8: it says that there are three, and their sizes which is which
    text = text[legend.end() :] if legend else text
    dashed = _DASHED.match(text)
    parts = [dashed[1], dashed[2], dashed[3] + dashed[4]] if dashed else _PARTS.split(text)
    labelled = [_label(part.strip()) for part in parts]
    slots = [slot for _, slot in labelled]
    if all(slot is None for slot in slots):
        if len(parts) == 1:
            slots = [1]
        elif len(parts) == 3:
            slots = [0, 1, 2]
            if legend and legend[1].lower().startswith("max") and legend[3].lower().startswith("min"):
                slots = [2, 1, 0]
    known = [slot for slot in slots if slot is not None]
    if len(known) < len(slots) or len(set(known)) < len(known):
        return CellTrouble(
            reason=f"'{text}' holds {len(parts)} values where minimum, normal and maximum are wanted",
            readings=tuple(part for part, _ in labelled[:4]),
        )
    shared = unit
    for part, _ in reversed(labelled):
        value = read_quantity(part, unit=unit, decimal=decimal, kinds=kinds)
        if isinstance(value, Quantity) and value.unit is not None:
            shared = value.unit
            break
    values: list[Quantity | None] = [None, None, None]
    for (part, _), slot in zip(labelled, known, strict=True):
        if part.lower() in _OPEN:
            continue
        value = read_quantity(part, unit=shared, decimal=decimal, kinds=kinds)
        if isinstance(value, CellTrouble):
            if value.blank:
                continue
            return value
        values[slot] = value
    return Triplet(*values)


# ---------------------------------------------------------------------------------------------------------
# References of pressures


def with_reference(quantity: Quantity, reference: str | None) -> Quantity:
    """Let a pressure whose reference is unstated take a body's or the plant's; any other stays as it is.

    >>> [str(with_reference(read_quantity(text), "gauge")) for text in ("5 bar", "5 bara")]
    ['5 barg', '5 bara']
    """
    if quantity.unit is None or quantity.reference != "unstated" or reference in (None, "unstated"):
        return quantity
    return _quantity(quantity.text, quantity.number, quantity.unit.referred_to(reference), quantity.qualifier)


def absolute_pa(quantity: Quantity, atmospheric_pa: float) -> float:
    """Return a pressure as absolute pressure in Pa.

    Parameters
    ----------
    quantity : Quantity
        A gauge, vacuum or absolute pressure.
    atmospheric_pa : float
        Atmospheric pressure at the plant in Pa; at 1600 m it is 83 520, not 101 325.

    Raises
    ------
    UnitMismatch
        No pressure, a differential pressure, or one whose reference is not stated.

    >>> round(absolute_pa(read_quantity("100 psig"), 83_520.0) / 6894.757293168, 2)
    112.11
    """
    if quantity.base is None or quantity.unit is None or quantity.unit.kind != "pressure":
        raise UnitMismatch(f"{quantity} is no pressure")
    if quantity.reference == "absolute":
        return quantity.base
    if quantity.reference in ("gauge", "vacuum"):
        return quantity.base + atmospheric_pa
    raise UnitMismatch(f"{quantity} is neither gauge nor absolute")
