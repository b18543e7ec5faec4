"""The closed table of units: what each measures, how large it is, and how values pass from one to another.

Only canonical names reach the unit library: of raw text it makes nonsense without a word (psi(a) is
psi x year to it, kg/cm2 no pressure). `instruments.unit` says which spelling means which unit.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any, Final

REFERENCES: Final = ("gauge", "absolute", "differential", "vacuum", "unstated")
"""What a pressure may be referred to; vacuum is gauge counted downwards."""


class UnitMismatch(ValueError):
    """Two units that do not measure the same thing, or pressures of different reference."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Unit:
    """One unit of the table. There is one object for each, so two are equal only if they are the same.

    Attributes
    ----------
    canonical
        The name of the unit in the table (``bar``, ``m3/h``, ``percent of LEL``).
    kind
        What it measures: ``pressure``, ``temperature``, ``volflow`` ...
    dimension
        What it may be converted into; finer than the kind where the kind holds things that no
        factor connects (LEL and mol %, pH and turbidity, heads that need a density).
    factor, offset
        ``base value = number x factor + offset``, in the kind's base unit (see `base_unit`). The
        factor is None where no number does it, and negative for a vacuum, which counts downwards.
    reference
        One of `REFERENCES` for pressures, else None. The factor says nothing of it: a gauge
        pressure's base value is a gauge pressure in Pa.
    basis
        What else was said or is understood: ``dc``, ``pk-pk``, ``normal (0 degC, 101.325 kPa)``.
    si_factor
        The factor to SI as unit tables print it, a text where no number does it: for gas volumes
        at base conditions m3/s at those conditions, whatever they are.
    """

    canonical: str
    kind: str
    factor: float | None
    offset: float = 0.0
    reference: str | None = None
    basis: str = ""
    dimension: str = ""
    si_factor: float | str = 1.0

    def as_vector(self) -> dict[str, str | float]:
        """Return kind, canonical name and SI factor, as `read unit --json` gives them.

        >>> unit("kgf/cm2", "gauge").as_vector()
        {'kind': 'pressure', 'canonical': 'kgf/cm2', 'si_factor': 98066.5}
        """
        return {"kind": self.kind, "canonical": self.canonical, "si_factor": self.si_factor}

    def referred_to(self, reference: str) -> Unit:
        """Return the same unit with another reference; a unit that is no pressure returns itself."""
        if self.kind != "pressure" or reference == self.reference:
            return self
        return unit(self.canonical, reference)

    def __str__(self) -> str:
        return unit_label(self)

    def __reduce__(self) -> tuple[Any, tuple[str, str | None, str]]:
        return unit, (self.canonical, self.reference, self.basis)


BASE_UNITS: Final[Mapping[str, str]] = {
    "pressure": "Pa",
    "temperature": "K",
    "dtemp": "K",
    "volflow": "m3/s",
    "stdflow": "m3/s at 0 degC and 101.325 kPa",
    "massflow": "kg/s",
    "ratio": "1",
    "length": "m",
    "vel": "m/s",
    "accel": "m/s2",
    "speed": "1/s",
    "cond": "S/m",
    "curr": "A",
    "volt": "V",
    "res": "ohm",
    "power": "W",
    "conc": "kg/m3",
    "volume": "m3",
    "density": "kg/m3",
    "dynvisc": "Pa s",
    "kinvisc": "m2/s",
    "mass": "kg",
    "other": "1",
}
"""Base unit of each kind: what `Unit.factor` leads to."""

_PINT_BASE: Final = {
    "pressure": "pascal", "temperature": "kelvin", "dtemp": "delta_degC", "ratio": "dimensionless",
    "volflow": "meter**3/second", "stdflow": "meter**3/second", "massflow": "kilogram/second",
    "length": "meter", "vel": "meter/second", "accel": "meter/second**2", "speed": "1/second",
    "cond": "siemens/meter", "curr": "ampere", "volt": "volt", "res": "ohm", "power": "watt",
    "conc": "kilogram/meter**3", "density": "kilogram/meter**3", "volume": "meter**3", "mass": "kilogram",
    "dynvisc": "pascal*second", "kinvisc": "meter**2/second",
}  # fmt: skip


@dataclass(frozen=True, slots=True, kw_only=True)
class _Entry:
    """A line of the table: `size` is a number in the base unit, or what the unit library calls the unit."""

    kind: str
    size: float | str
    label: str
    times: float = 1.0
    dimension: str = ""
    basis: str = ""
    si_text: str = ""


NORMAL: Final = "normal (0 degC, 101.325 kPa)"  # DIN 1343
STANDARD: Final = "standard (15 degC, 101.325 kPa)"  # ISO 13443
US_STANDARD: Final = "standard (60 degF, 14.696 psia)"  # common practice in the US, from memory

_TO_NORMAL: Final = {
    NORMAL: 1.0,
    STANDARD: 273.15 / 288.15,
    US_STANDARD: 273.15 / ((60.0 + 459.67) / 1.8) * 14.696 * 6894.757293168 / 101325.0,
}
"""Volume of a gas at 0 degC and 101.325 kPa over its volume at other base conditions (ideal gas)."""


def _entry(kind: str, size: float | str, label: str, **more: Any) -> _Entry:
    return _Entry(kind=kind, size=size, label=label, **more)


_TABLE: Final[Mapping[str, _Entry]] = {
    # Conventional columns: 1000 kg/m3 of water, 13 595.1 of mercury, at standard gravity (NIST SP 811, B.8).
    "inH2O": _entry("pressure", "inH2O", "inH2O", basis="conventional (1000 kg/m3)"),
    "inH2O@4C": _entry("pressure", "inH2O_4C", "inH2O@4°C", basis="water at 4 degC / 39.2 degF"),
    # 998.2 kg/m3; the figure as tables print it, for the unit library has none.
    "inH2O@20C": _entry("pressure", 248.641, "inH2O@20°C", basis="water at 20 degC / 68 degF"),
    "inH2O@60F": _entry("pressure", "inH2O_60F", "inH2O@60°F", basis="water at 60 degF"),
    "mmH2O": _entry("pressure", "kilogram_force/meter**2", "mmH2O", basis="conventional (1000 kg/m3)"),
    "cmH2O": _entry("pressure", "cmH2O", "cmH2O", basis="conventional (1000 kg/m3)"),
    "mH2O": _entry("pressure", "cmH2O", "mH2O", times=100.0, basis="conventional (1000 kg/m3)"),
    "m of process liquid (needs SG)": _entry(
        "pressure", "", "mlc", dimension="head of process liquid", si_text="SG x 9806.65"),
    "ftH2O": _entry("pressure", "ftH2O", "ftH2O", basis="conventional (1000 kg/m3)"),
    "inHg": _entry("pressure", "inHg", "inHg", basis="conventional (13595.1 kg/m3)"),
    "mmHg": _entry("pressure", "mmHg", "mmHg", basis="conventional (13595.1 kg/m3)"),
    "torr": _entry("pressure", "torr", "Torr"),
    "psi": _entry("pressure", "psi", "psi"),
    "kgf/cm2": _entry("pressure", "kilogram_force/centimeter**2", "kg/cm²"),
    "bar": _entry("pressure", "bar", "bar"),
    "mbar": _entry("pressure", "millibar", "mbar"),
    "Pa": _entry("pressure", "pascal", "Pa"),
    "kPa": _entry("pressure", "kilopascal", "kPa"),
    "MPa": _entry("pressure", "megapascal", "MPa"),
    "hPa": _entry("pressure", "hectopascal", "hPa"),
    "atm": _entry("pressure", "standard_atmosphere", "atm"),
    "degC": _entry("temperature", "delta_degC", "°C", si_text="t+273.15"),
    "degF": _entry("temperature", "delta_degF", "°F", si_text="(t+459.67)/1.8"),
    "K": _entry("temperature", "kelvin", "K"),
    "degR": _entry("temperature", "delta_degF", "°R"),
    "delta_degC": _entry("dtemp", "delta_degC", "Δ°C"),
    "m3/h": _entry("volflow", "meter**3/hour", "m³/h"),
    "m3/s": _entry("volflow", "meter**3/second", "m³/s"),
    "L/s": _entry("volflow", "liter/second", "l/s"),
    "1e6 L/d": _entry("volflow", "liter/day", "Ml/d", times=1e6),
    "1e6 US gal/d": _entry("volflow", "gallon/day", "MGD", times=1e6),
    "ft3/min": _entry("volflow", "foot**3/minute", "ft³/min"),
    "US gal/min": _entry("volflow", "gallon/minute", "US gpm"),
    "imp gal/min": _entry("volflow", "imperial_gallon/minute", "imp gpm"),
    "bbl/d": _entry("volflow", "oil_barrel/day", "bbl/d"),
    "1e3 bbl/d": _entry("volflow", "oil_barrel/day", "Mbbl/d", times=1e3),
    "bbl/h": _entry("volflow", "oil_barrel/hour", "bbl/h"),
    "L/min": _entry("volflow", "liter/minute", "l/min"),
    "L/h": _entry("volflow", "liter/hour", "l/h"),
    "cm3/min": _entry("volflow", "centimeter**3/minute", "cm³/min"),
    "Nm3/h": _entry("stdflow", "meter**3/hour", "Nm³/h", basis=NORMAL),
    "Sm3/h": _entry("stdflow", "meter**3/hour", "Sm³/h", basis=STANDARD),
    "Sm3/d": _entry("stdflow", "meter**3/day", "Sm³/d", basis=STANDARD),
    "1e6 Sm3/d": _entry("stdflow", "meter**3/day", "MMSCMD", times=1e6, basis=STANDARD),
    "scf/min": _entry("stdflow", "foot**3/minute", "scfm", basis=US_STANDARD),
    "scf/h": _entry("stdflow", "foot**3/hour", "scfh", basis=US_STANDARD),
    "1e3 scf/d": _entry("stdflow", "foot**3/day", "MSCFD", times=1e3, basis=US_STANDARD),
    "1e6 scf/d": _entry("stdflow", "foot**3/day", "MMSCFD", times=1e6, basis=US_STANDARD),
    "NL/min": _entry("stdflow", "liter/minute", "Nl/min", basis=NORMAL),
    "NL/h": _entry("stdflow", "liter/hour", "Nl/h", basis=NORMAL),
    "kg/h": _entry("massflow", "kilogram/hour", "kg/h"),
    "t/h": _entry("massflow", "metric_ton/hour", "t/h", basis="metric tonne"),
    "t/d": _entry("massflow", "metric_ton/day", "t/d", basis="metric tonne"),
    "lb/h": _entry("massflow", "pound/hour", "lb/h"),
    "1e3 lb/h": _entry("massflow", "pound/hour", "klb/h", times=1e3),
    "kg/s": _entry("massflow", "kilogram/second", "kg/s"),
    "percent": _entry("ratio", "percent", "%", dimension="ratio"),
    "percent valve travel": _entry("ratio", "percent", "% open", dimension="valve travel"),
    "percent of LEL": _entry("ratio", "percent", "% LEL", dimension="lower explosive limit"),
    "percent v/v": _entry("ratio", "percent", "% v/v", dimension="volume ratio"),
    "percent mol": _entry("ratio", "percent", "mol%", dimension="mole ratio"),
    "percent RH": _entry("ratio", "percent", "% RH", dimension="relative humidity"),
    "ppm": _entry("ratio", "ppm", "ppm", dimension="ratio"),
    "ppm w/w": _entry("ratio", "ppm", "ppm w/w", dimension="mass ratio"),
    "ppm v/v": _entry("ratio", "ppm", "ppm v/v", dimension="volume ratio"),
    "ppb": _entry("ratio", 1e-9, "ppb", dimension="ratio"),
    "specific gravity": _entry(
        "ratio", 1.0, "SG", dimension="specific gravity", si_text="x 999.016 (60F) or 1000"),
    "mm": _entry("length", "millimeter", "mm"),
    "cm": _entry("length", "centimeter", "cm"),
    "m": _entry("length", "meter", "m"),
    "inch": _entry("length", "inch", "in"),
    "ft": _entry("length", "foot", "ft"),
    "mil (0.001 in)": _entry("length", "thou", "mil"),
    "um": _entry("length", "micrometer", "µm"),
    "mm/s": _entry("vel", "millimeter/second", "mm/s"),
    "in/s": _entry("vel", "inch/second", "in/s"),
    "g (standard gravity)": _entry("accel", "standard_gravity", "g"),
    "rev/min": _entry("speed", "1/minute", "rpm"),  # as a turn: the unit library's own rpm is radians
    "cycles/min": _entry("speed", "1/minute", "cpm"),
    "Hz": _entry("speed", "1/second", "Hz"),
    "uS/cm": _entry("cond", "microsiemens/centimeter", "µS/cm"),
    "mS/cm": _entry("cond", "millisiemens/centimeter", "mS/cm"),
    "mA": _entry("curr", "milliampere", "mA"),
    "A": _entry("curr", "ampere", "A"),
    "V": _entry("volt", "volt", "V"),
    "mV": _entry("volt", "millivolt", "mV"),
    "ohm": _entry("res", "ohm", "ohm"),
    "kW": _entry("power", "kilowatt", "kW"),
    "MW": _entry("power", "megawatt", "MW"),
    "kcal/h": _entry("power", "kilocalorie/hour", "kcal/h", basis="thermochemical calorie"),
    "Btu/h": _entry("power", "Btu_it/hour", "Btu/h", basis="international table"),
    "1e6 Btu/h": _entry("power", "Btu_it/hour", "MMBtu/h", times=1e6, basis="international table"),
    "mg/L": _entry("conc", "milligram/liter", "mg/l"),
    "ug/L": _entry("conc", "microgram/liter", "µg/l"),
    "g/L": _entry("conc", "gram/liter", "g/l"),
    "m3": _entry("volume", "meter**3", "m³"),
    "L": _entry("volume", "liter", "l"),
    "kg/m3": _entry("density", "kilogram/meter**3", "kg/m³"),
    "g/cm3": _entry("density", "gram/centimeter**3", "g/cm³"),
    "lb/ft3": _entry("density", "pound/foot**3", "lb/ft³"),
    "cP": _entry("dynvisc", "centipoise", "cP"),
    "cSt": _entry("kinvisc", "centistokes", "cSt"),
    "kg": _entry("mass", "kilogram", "kg"),
    "tonne": _entry("mass", "metric_ton", "t"),
    "lb": _entry("mass", "pound", "lb"),
    "pH (dimensionless log)": _entry("other", 1.0, "pH", dimension="pH"),
    "NTU": _entry("other", 1.0, "NTU", dimension="turbidity NTU"),
    "FNU": _entry("other", 1.0, "FNU", dimension="turbidity FNU"),
    "degAPI = 141.5/SG60 - 131.5": _entry(
        "other", 1.0, "°API", dimension="API gravity", si_text="nonlinear"),
}  # fmt: skip

CANONICAL: Final = tuple(_TABLE)
"""The canonical names, all of them."""

_OFFSETS: Final = {"degC": 273.15, "degF": 459.67 / 1.8}


@cache
def _registry() -> Any:
    # Half a second: nobody pays it who reads no unit.
    import pint

    return pint.UnitRegistry(cache_folder=None)


@cache
def _size(canonical: str) -> float | None:
    """Size of a unit in the base unit of its kind, gas volumes as if all had one base."""
    entry = _TABLE[canonical]
    if isinstance(entry.size, float):
        return entry.size
    if not entry.size:
        return None
    registry = _registry()
    size = entry.times * registry.Quantity(1.0, entry.size).to(_PINT_BASE[entry.kind]).magnitude
    return float(f"{size:.15g}")  # the last digits are the noise of a chain of multiplications


@cache
def unit(canonical: str, reference: str | None = None, basis: str = "") -> Unit:
    """Return a unit by its canonical name.

    Parameters
    ----------
    canonical : str
        A name of the table, as ``"bar"``.
    reference : str or None
        For pressures; None is ``"unstated"``, and for the torr ``"absolute"``, as it is by custom.
    basis : str
        Beside what the table understands by itself, such as ``"dc"``.

    Raises
    ------
    KeyError
        The table has no such unit.
    ValueError
        The reference is none of `REFERENCES`, or the unit is no pressure.
    """
    entry = _TABLE[canonical]
    pressure = entry.kind == "pressure"
    custom = ("absolute" if canonical == "torr" else "unstated") if pressure else None
    if (reference is not None and not pressure) or (pressure and (reference or custom) not in REFERENCES):
        raise ValueError(f"{reference} is no reference of {canonical}")
    return _the_one(canonical, reference or custom, basis or entry.basis)


@cache
def _the_one(canonical: str, reference: str | None, basis: str) -> Unit:
    entry = _TABLE[canonical]
    size = _size(canonical)
    si_factor: float | str = entry.si_text or (1.0 if size is None else size)
    factor = size
    if size is not None and entry.kind == "stdflow":
        factor = size * _TO_NORMAL[entry.basis]
    if factor is not None and reference == "vacuum":
        factor = -factor
    return Unit(
        canonical=canonical,
        kind=entry.kind,
        factor=factor,
        offset=_OFFSETS.get(canonical, 0.0),
        reference=reference,
        basis=basis,
        dimension=entry.dimension or entry.kind,
        si_factor=si_factor,
    )


def base_unit(kind: str) -> str:
    """Name of the unit in which base values of a kind are counted."""
    return BASE_UNITS[kind]


# ---------------------------------------------------------------------------------------------------------
# Labels: the trade's spelling, which reads back to the same unit.

_SHORT_SUFFIX: Final = {
    "bar": "ga", "mbar": "ga", "psi": "gad", "kPa": "ga", "MPa": "ga", "hPa": "g", "Pa": "g", "kgf/cm2": "ga",
}  # fmt: skip
_LETTER: Final = {"gauge": "g", "absolute": "a", "differential": "d"}


def unit_label(unit: Unit, reference: str | None = None) -> str:
    """Spelling of a unit for people: the trade's own, and one that reads back to the same unit.

    Parameters
    ----------
    unit : Unit
        The unit.
    reference : str or None
        Instead of the unit's own reference.

    >>> unit_label(unit("bar"), "gauge"), unit_label(unit("psi", "differential")), unit_label(unit("m3/h"))
    ('barg', 'psid', 'm³/h')
    """
    entry = _TABLE[unit.canonical]
    label = entry.label
    if unit.kind != "pressure":
        return f"{label} {unit.basis.upper()}" if unit.basis in ("dc", "ac") else (
            f"{label} {unit.basis}" if unit.basis and unit.basis != entry.basis else label)  # fmt: skip
    reference = reference or unit.reference
    if reference == "vacuum":
        return f"{label} vac"
    letter = _LETTER.get(reference or "", "")
    if not letter or (unit.canonical == "torr" and letter == "a"):
        return label
    return label + letter if letter in _SHORT_SUFFIX.get(unit.canonical, "") else f"{label}({letter})"


def commensurable(one: Unit, other: Unit) -> bool:
    """Whether a factor leads from one unit to the other.

    A plain percent takes what it is a percentage of from the other side, as a pressure of unstated
    reference does; %LEL and % v/v are different things.
    """
    if one.dimension == other.dimension:
        return True
    if one.kind != "ratio" or other.kind != "ratio":
        return False
    plain, named = (one, other) if one.dimension == "ratio" else (other, one)
    if plain.dimension != "ratio" or named.dimension == "specific gravity":
        return False
    return plain.canonical == "percent" or named.dimension in ("volume ratio", "mass ratio", "mole ratio")


def convert(value: float, from_unit: Unit, to_unit: Unit) -> float:
    """Convert a value; a temperature is a temperature here, not a difference.

    Raises
    ------
    UnitMismatch
        The units measure different things, or need a density, or are pressures referred to
        different things. Unstated goes with every reference.

    >>> convert(10.0, unit("kgf/cm2", "gauge"), unit("bar", "gauge"))
    9.80665
    """
    if from_unit is to_unit:
        return value
    if not commensurable(from_unit, to_unit):
        raise UnitMismatch(f"{from_unit} cannot be converted into {to_unit}")
    if not comparable(from_unit.reference, to_unit.reference):
        raise UnitMismatch(f"{from_unit} and {to_unit} are referred to different pressures")
    if from_unit.factor is None or to_unit.factor is None:
        if from_unit.canonical == to_unit.canonical:
            return value
        raise UnitMismatch(f"{from_unit} cannot be converted into {to_unit}")
    if from_unit.canonical == to_unit.canonical and from_unit.factor == to_unit.factor:
        return value
    return _without_noise((value * from_unit.factor + from_unit.offset - to_unit.offset) / to_unit.factor)


def difference(value: float, from_unit: Unit, to_unit: Unit) -> float:
    """Convert a span, a deadband or a tolerance: sizes alone count, no offset, no reference.

    Raises
    ------
    UnitMismatch
        The units measure different things.

    >>> difference(100.0, unit("degC"), unit("degF")), difference(1.0, unit("degC"), unit("degF"))
    (180.0, 1.8)
    """
    temperatures = {"temperature", "dtemp"}
    if not commensurable(from_unit, to_unit) and not {from_unit.kind, to_unit.kind} <= temperatures:
        raise UnitMismatch(f"{from_unit} cannot be converted into {to_unit}")
    if from_unit.canonical == to_unit.canonical:
        return value
    if from_unit.factor is None or to_unit.factor is None:
        raise UnitMismatch(f"{from_unit} cannot be converted into {to_unit}")
    return _without_noise(value * abs(from_unit.factor) / abs(to_unit.factor))


def _without_noise(value: float) -> float:
    return float(f"{value:.14g}")


def comparable(one: str | None, other: str | None) -> bool:
    """Whether two references may be compared: equal, gauge with vacuum, or one of them unstated.

    >>> comparable("gauge", "vacuum"), comparable("gauge", "absolute"), comparable("unstated", "absolute")
    (True, False, True)
    """
    if one == other or one is None or other is None or "unstated" in (one, other):
        return True
    return {one, other} == {"gauge", "vacuum"}
