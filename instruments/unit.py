"""Units: the closed table of what may be written, which spelling means which unit, and how large each unit is.

A spelling is never guessed. It is cleaned (blanks, dots, glyphs), then composed from the parts below (a
quantity, a time, a reference to gauge or absolute); what no composition gives is no unit. Only canonical
names reach the unit library: of raw text it makes nonsense without a word (psi(a) is psi x year to it).
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from functools import cache
from itertools import product
from typing import Any, Final

LONGEST_SPELLING: Final = 64
"""Characters of a text that may still be a unit; anything longer is a sentence."""

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

        >>> read_unit("KG/CM2G").as_vector()
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
    "pressure": "pascal", "temperature": "kelvin", "dtemp": "delta_degC", "volflow": "meter**3/second",
    "stdflow": "meter**3/second", "massflow": "kilogram/second", "length": "meter", "vel": "meter/second",
    "accel": "meter/second**2", "speed": "1/second", "cond": "siemens/meter", "curr": "ampere", "volt": "volt",
    "res": "ohm", "power": "watt", "conc": "kilogram/meter**3", "volume": "meter**3",
    "density": "kilogram/meter**3", "dynvisc": "pascal*second", "kinvisc": "meter**2/second", "mass": "kilogram",
    "ratio": "dimensionless",
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
    # Conventional water and mercury columns: 1000 kg/m3 and 13 595.1 kg/m3 at standard gravity (NIST SP 811 B.8).
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
    "Btu/h": _entry("power", "Btu/hour", "Btu/h", basis="international table"),
    "1e6 Btu/h": _entry("power", "Btu/hour", "MMBtu/h", times=1e6, basis="international table"),
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
    "degAPI = 141.5/SG60 - 131.5": _entry("other", 1.0, "°API", dimension="API gravity", si_text="nonlinear"),
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
    return float(f"{size:.14g}")  # the last digits are the noise of a chain of multiplications


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

_SHORT_SUFFIX: Final = {"bar": "ga", "mbar": "ga", "psi": "gad", "kPa": "ga", "MPa": "ga", "hPa": "g", "Pa": "g",
                        "kgf/cm2": "ga"}  # fmt: skip
_LETTER: Final = {"gauge": "g", "absolute": "a", "differential": "d"}


def unit_label(unit: Unit, reference: str | None = None) -> str:
    """Spelling of a unit for people: the trade's own, and one that reads back to the same unit.

    Parameters
    ----------
    unit : Unit
        The unit.
    reference : str or None
        Instead of the unit's own reference.

    >>> [unit_label(read_unit(text)) for text in ("BARG", "psi(d)", "inwg", "DEG C", "M3/HR", "inHg vac")]
    ['barg', 'psid', 'inH2O(g)', '°C', 'm³/h', 'inHg vac']
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


# ---------------------------------------------------------------------------------------------------------
# Cleaning: what a spelling looks like once glyphs, blanks and dots no longer matter.

_BEFORE = str.maketrans(
    {
        "˚": "°", "º": "°", "∘": "°", "⁰": "°", "ᵒ": "°", "°": "°",  # what people take for a degree sign
        "²": "^2", "³": "^3", "¹": "^1", "⁶": "^6", "₂": "2", "₃": "3", "⁻": "-",
        "\u00ad": None, "\u200b": None, "\u200c": None, "\u200d": None, "\u2060": None, "\ufeff": None,
        "∆": "Δ", "Ω": "Ω", "″": '"', "＂": '"',
    }
)  # fmt: skip
_AFTER = str.maketrans(
    {
        "‐": "-", "‑": "-", "‒": "-", "–": "-", "—": "-", "−": "-",
        "∕": "/", "⁄": "/", "÷": "/", "·": ".", "⋅": ".", "∙": ".", "•": ".", "×": ".",
        "“": '"', "”": '"', "„": '"', "’": "'", "‘": "'", "′": "'", "`": "'", "´": "'",
        "ℓ": "l", "µ": "μ", "٪": "%",
    }
)  # fmt: skip
# UTF-8 that was read as Windows-1252: Â stands before the sign that was meant.
_MOJIBAKE = re.compile("Â(?=[°²³µº·])")
_PER = re.compile(r"(?<![a-z])per(?!\s*cent)(?![a-z])", re.IGNORECASE)
_INVERSE = re.compile(r"[ .*]([A-Za-z]{1,4})\^?-([123])$")
_DROPPED = str.maketrans(dict.fromkeys(" \t\n\r\f\v.()[]{}_,^*'-;"))


def _cleaned(text: str) -> str:
    """Bring glyphs to one form and powers with a minus under a stroke; letters keep their case.

    >>> _cleaned("kg·m⁻³"), _cleaned("℃"), _cleaned("mÂ³/h")
    ('kg/m3', '°C', 'm^3/h')
    """
    text = _MOJIBAKE.sub("", text).translate(_BEFORE)
    text = unicodedata.normalize("NFKC", text).translate(_AFTER).strip()
    text = text.replace("''", '"').replace('""', '"')
    text = _PER.sub("/", text)
    inverse = _INVERSE.search(text)
    if inverse:
        power = "" if inverse[2] == "1" else inverse[2]
        text = f"{text[: inverse.start()]}/{inverse[1]}{power}"
    return text


def _compact(text: str) -> str:
    """Drop what separates and no more; signs become the words they stand for, case stays.

    >>> _compact('in. W.C.'), _compact('"WC'), _compact("Bar (A)"), _compact("° C"), _compact("μS / cm")
    ('inWC', 'inWC', 'BarA', 'degC', 'uS/cm')
    """
    text = text.translate(_DROPPED)
    return text.replace('"', "in").replace("°", "deg").replace("μ", "u").replace("Δ", "delta").replace("Ω", "ohm")


# ---------------------------------------------------------------------------------------------------------
# Parts of spellings, in small letters, without blanks and dots.


def _words(text: str) -> tuple[str, ...]:
    return tuple(text.split())


_HOUR = _words("h hr hrs hour hours std stunde stunden")
_MINUTE = _words("min mins minute minutes mn")
_SECOND = _words("s sec secs second seconds sek")
_DAY = _words("d day days dy tag tage")
_TIMES = {"h": _HOUR, "m": _MINUTE, "s": _SECOND, "d": _DAY}

_M3 = _words("m3 cum cbm mc kl kiloliter kilolitre kiloliters kilolitres") + tuple(
    f"{cubic}{metre}" for cubic in ("cubic", "cu") for metre in _words("meter metre meters metres m mtr")
)
_LITRE = _words("l lt ltr ltrs lit liter litre liters litres dm3")
_MEGALITRE = _words("megaliter megalitre megaliters megalitres")  # Ml itself asks for its case
_CM3 = _words("cm3 ccm cc cucm")
_FT3 = _words("ft3 cf cft cuft cubicft cubicfeet cubicfoot cufeet")
_GALLON = _words("gal gals gallon gallons")
_US_GALLON = _GALLON + tuple(f"us{gallon}" for gallon in _GALLON) + tuple(f"{gallon}us" for gallon in _GALLON)
_IMPERIAL_GALLON = tuple(
    word
    for gallon in _GALLON
    for imperial in ("imp", "imperial", "uk", "i")
    for word in (f"{imperial}{gallon}", f"{gallon}{imperial}")
    if word != f"{gallon}i"
)
_BARREL = _words("bbl bbls barrel barrels bo")
_KILOGRAM = _words("kg kgs kgm kilogram kilograms kilogramme kilogrammes")
_TONNE = _words("t te tonne tonnes mt mton mtons metricton metrictons metrictonne metrictonnes")
_POUND = _words("lb lbs lbm pound pounds #")
_THOUSAND = _words("k m 1000 103 1e3")
_MILLION = _words("mm 1000000 106 1e6")

_MM = _words("mm millimeter millimetre millimeters millimetres")
_CM = _words("cm centimeter centimetre centimeters centimetres")
_METRE = _words("m meter metre meters metres mtr mtrs")
_INCH = _words("in inch inches ins")
_FOOT = _words("ft feet foot")
_MICRON = _words("um micron microns micrometer micrometre micrometers micrometres")
_CM2 = _words("cm2 sqcm cmsq cmq squarecm squarecentimeter squarecentimetre")
_IN2 = _words("in2 sqin sqinch inch2 squareinch insq")


def _with(prefixes: Iterable[str], stems: Iterable[str]) -> tuple[str, ...]:
    return tuple(f"{prefix}{stem}" for prefix, stem in product(prefixes, stems))


def _over(numerators: Iterable[str], denominators: Iterable[str]) -> tuple[str, ...]:
    return tuple(f"{numerator}/{denominator}" for numerator, denominator in product(numerators, denominators))


# --- pressure

_GAUGE = _words("g ga gauge gage gau rel relative relativ man manometric eff ü ö ue überdruck ueberdruck")
_ABSOLUTE = _words("a ab abs absolute absolut absolu absoluta assoluta")
_DIFFERENTIAL = _words("d dif diff differential differenz dp deltap delta")
_VACUUM = _words("v vac vacuum vacc vakuum")
_SUFFIX: Final = {
    **dict.fromkeys(_GAUGE, "gauge"),
    **dict.fromkeys(_ABSOLUTE, "absolute"),
    **dict.fromkeys(_DIFFERENTIAL, "differential"),
    **dict.fromkeys(_VACUUM, "vacuum"),
}
_LONGEST_SUFFIX = max(map(len, _SUFFIX))
_PREFIX: Final = {
    **dict.fromkeys(_words("abs absolute"), "absolute"),
    **dict.fromkeys(_words("delta diff differential dp"), "differential"),
    **dict.fromkeys(_words("vac vacuum"), "vacuum"),
}
_WATER = _words("h2o h20 wc wcol watercolumn water aq ofwater ofh2o ofh20 ofwc ofwatercolumn")
_WATER_GAUGE = _words("wg watergauge ofwatergauge wwg")
_WATER_ABROAD = _words("ws wassersäule ce ca wk cda")  # German, French, Italian and Spanish, Dutch
_MERCURY = _words("hg mercury ofmercury ofhg hgcolumn")
_LIQUID = _words("lc lcol liquidcolumn liquid ofliquid ofliquidcolumn fls flc ofprocessliquid")


def _pressure_spellings() -> Iterator[tuple[str, str, str | None]]:
    plain: dict[str, tuple[str, ...]] = {
        "bar": _words("bar bars"),
        "mbar": _words("mbar mbars mb millibar millibars"),
        "Pa": _words("pa pascal pascals"),
        "kPa": _words("kpa kilopascal kilopascals"),
        "MPa": _words("mpa megapascal megapascals"),
        "hPa": _words("hpa hectopascal hectopascals"),
        "atm": _words("atm atms atmosphere atmospheres"),
        "torr": _words("torr torrs"),
        "psi": (
            *_words("psi psis # lbsi"),
            *_over(_words("lb lbs lbf lbsf pound pounds #"), _IN2),
        ),
        "kgf/cm2": (
            *_words("ksc kscm at"),
            *_over(_words("kg kgs kgf kgsf kp kilogram kilograms kilopond"), _CM2),
        ),
        "inHg": _with(_INCH, _MERCURY),
        "mmHg": _with(_MM, _MERCURY),
        "inH2O": (*_with(_INCH, _WATER), "iwc", "ih2o"),
        "ftH2O": _with(_FOOT, _WATER),
        "mmH2O": _with(_MM, _WATER + _WATER_ABROAD),
        "cmH2O": _with(_CM, _WATER + _WATER_ABROAD),
        "mH2O": _with(_METRE, _WATER + _WATER_ABROAD),
        "m of process liquid (needs SG)": _with(_METRE, _LIQUID),
    }
    for canonical, spellings in plain.items():
        for spelling in spellings:
            yield spelling, canonical, None
    gauges = {"inH2O": (*_INCH, "i"), "ftH2O": _FOOT, "mmH2O": _MM, "cmH2O": _CM, "mH2O": _METRE}
    for canonical, lengths in gauges.items():
        for spelling in _with(lengths, _WATER_GAUGE):
            yield spelling, canonical, "gauge"
    # Technical atmospheres name their reference; atu without its dots may be under-pressure and stays unread.
    yield "ata", "kgf/cm2", "absolute"
    for spelling in ("ate", "atü", "atue"):
        yield spelling, "kgf/cm2", "gauge"


_PRESSURES: Final = {spelling: (canonical, reference) for spelling, canonical, reference in _pressure_spellings()}
_WHOLE_WORDS: Final = frozenset({"at", "ata", "ate", "atü", "atue"})  # take no suffix: att, atg are no units

_WATER_BASIS = re.compile(r"(?:@|at)?([0-9]{1,4})(?:deg)?([cf])$")
_WATER_AT: Final = {
    **dict.fromkeys([("4", "c"), ("39", "f"), ("392", "f")], "inH2O@4C"),
    **dict.fromkeys([("20", "c"), ("68", "f")], "inH2O@20C"),
    **dict.fromkeys([("60", "f"), ("156", "c"), ("1556", "c")], "inH2O@60F"),
}


def _referred(key: str) -> Iterator[tuple[str, str | None]]:
    """Split a spelling into what it may be and the reference it ends or begins with."""
    yield key, None
    for length in range(1, min(_LONGEST_SUFFIX, len(key) - 1) + 1):
        reference = _SUFFIX.get(key[-length:])
        if reference:
            yield key[:-length], reference
    for prefix, reference in _PREFIX.items():
        if key.startswith(prefix):
            yield key[len(prefix) :], reference


def _pressure(key: str) -> Unit | None:
    for stem, reference in _referred(key):
        found = _PRESSURES.get(stem)
        canonical = found[0] if found else None
        own = found[1] if found else None
        if not found and (basis := _WATER_BASIS.search(stem)):
            for head, inner in _referred(stem[: basis.start()]):
                column, own = _PRESSURES.get(head, (None, None))
                if column == "inH2O" and (inner is None or own is None):
                    own = own or inner
                    canonical = _WATER_AT.get((basis[1], basis[2]))
                    break
        if canonical is None or (reference and stem in _WHOLE_WORDS):
            continue
        if reference and own and reference != own and (own, reference) != ("gauge", "vacuum"):
            continue
        return unit(canonical, reference or own)
    return None


# --- temperature

_DEGREE = _words("deg degs degree degrees grad grd grade grados graus graden degrés degres o 0")
_SCALES: Final = {
    **dict.fromkeys(_words("c celsius celcius celsuis centigrade"), "degC"),
    **dict.fromkeys(_words("f fahrenheit farenheit"), "degF"),
    **dict.fromkeys(_words("k kelvin kelvins"), "K"),
    **dict.fromkeys(_words("r rankine"), "degR"),
}
_DIFFERENCE = _words("diff difference delta differenz")


def _temperature(key: str) -> Unit | None:
    difference = False
    for word in _DIFFERENCE:
        if key.startswith(word) and len(key) > len(word):
            difference, key = True, key[len(word) :]
        elif key.endswith(word) and len(key) > len(word):
            difference, key = True, key[: -len(word)]
        if difference:
            break
    scale = _SCALES.get(key)
    if scale is None:
        for degree in _DEGREE:
            if key.startswith(degree):
                scale = _SCALES.get(key[len(degree) :])
            elif degree == "deg" and key.endswith(degree):
                scale = _SCALES.get(key[:-3])
            if scale:
                break
    if scale is None:
        return None
    if difference:
        return unit("delta_degC") if scale in ("degC", "K") else None
    return unit(scale)


# --- ratios and concentrations, which may name the substance they speak of

_PERCENT = _words("% pct percent prozent percentage")
_OF: Final[Mapping[str, tuple[str, ...]]] = {
    "percent": ("",),
    "percent valve travel": _words("open opening travel stroke valvetravel valveopening valve position lift auf"),
    "percent of LEL": _words("lel oflel lfl oflfl ueg lie"),
    "percent v/v": _words("v/v vol volume byvol byvolume v vol/vol"),
    "percent mol": _words("mol mole molar mol/mol"),
    "percent RH": _words("rh relhum relhumidity relativehumidity rf rhum"),
}
_PARTS: Final[Mapping[str, tuple[str, ...]]] = {
    "ppm": ("ppm",),
    "ppm w/w": _words("ppmw ppmw/w ppmwt ppmbyweight ppmbymass ppmmass wppm"),
    "ppm v/v": _words("ppmv ppmv/v ppmvol ppmbyvol ppmbyvolume vpm vppm ppmvolume"),
    "ppb": ("ppb",),
    "specific gravity": _words("sg spgr spgravity specgravity specificgravity relativedensity reldensity"),
}
_SUBSTANCES = frozenset(
    _words(
        "o2 h2 h2s co co2 ch4 nh3 so2 nox no no2 n2o n2 cl2 clo2 hcl hf hcn h2so4 naoh nacl naocl caco3 cl f fe al mn "
        "nh4 po4 no3 o3 voc hc c2h4 c3h8 c6h6 h2o do toc cod bod tss ss methane oxygen hydrogen propane oil ammonia"
    )
)


def _ratio_spellings() -> Iterator[tuple[str, str]]:
    for canonical, qualities in _OF.items():
        for percent, quality in product(_PERCENT, qualities):
            yield percent + quality, canonical
            if quality:
                yield quality + percent, canonical
    for canonical, spellings in _PARTS.items():
        for spelling in spellings:
            yield spelling, canonical
    per_litre = (*_LITRE, "dm3")
    for canonical, numerators in {
        "mg/L": _words("mg mgs milligram milligrams"),
        "ug/L": _words("ug microgram micrograms"),
        "g/L": _words("g gm gms gram grams"),
    }.items():
        for spelling in _over(numerators, (*per_litre, "1")):  # mg/1: an l that a scan took for a one
            if spelling != "g/1":
                yield spelling, canonical
    yield "gpl", "g/L"


_FRACTIONS: Final = dict(_ratio_spellings())


def _fraction(key: str) -> Unit | None:
    canonical = _FRACTIONS.get(key)
    if canonical is None:
        for length in range(1, 9):
            if key[-length:] in _SUBSTANCES and len(key) > length:
                stem = key[:-length].removesuffix("as")
                canonical = _FRACTIONS.get(stem)
                if canonical and canonical != "specific gravity":
                    break
                canonical = None
    return None if canonical is None else unit(canonical)


# --- flow

_ACTUAL = ("", "a", "act", "actual")
_AT_NORMAL = ("n", "norm", "normal")
_AT_STANDARD = ("s", "std", "standard")


def _flow_spellings() -> Iterator[tuple[str, str]]:
    normal_m3 = (*_with(_AT_NORMAL, _M3), "m3n", "mn3")
    scf = _with(_AT_STANDARD, _FT3)
    million_m3 = (*_with(_MILLION, _with(_AT_STANDARD, _M3)),)
    numerators: dict[str, tuple[tuple[str, ...], str]] = {
        "m3/h": (_with(_ACTUAL, _M3), "h"),
        "m3/s": (_with(_ACTUAL, _M3), "s"),
        "L/s": (_with(_ACTUAL, _LITRE), "s"),
        "L/min": (_with(_ACTUAL, _LITRE), "m"),
        "L/h": (_with(_ACTUAL, _LITRE), "h"),
        "1e6 L/d": ((*_MEGALITRE, *_with(_MILLION, _LITRE)), "d"),
        "1e6 US gal/d": (_with(("m", "mega", "million", "106", "1e6"), _US_GALLON), "d"),
        "ft3/min": (_with(_ACTUAL, _FT3), "m"),
        "US gal/min": (_US_GALLON, "m"),
        "imp gal/min": (_IMPERIAL_GALLON, "m"),
        "bbl/d": (_BARREL, "d"),
        "1e3 bbl/d": (_with(_THOUSAND, _BARREL), "d"),
        "bbl/h": (_BARREL, "h"),
        "cm3/min": (_with(_ACTUAL, _CM3), "m"),
        "Nm3/h": (normal_m3, "h"),
        "Sm3/h": (_with(_AT_STANDARD, _M3), "h"),
        "Sm3/d": (_with(_AT_STANDARD, _M3), "d"),
        "1e6 Sm3/d": (million_m3, "d"),
        "scf/min": (scf, "m"),
        "scf/h": (scf, "h"),
        "1e3 scf/d": (_with(_THOUSAND, scf), "d"),
        "1e6 scf/d": (_with(_MILLION, scf), "d"),
        "NL/min": (_with(_AT_NORMAL, _LITRE), "m"),
        "NL/h": (_with(_AT_NORMAL, _LITRE), "h"),
        "kg/h": (_KILOGRAM, "h"),
        "kg/s": (_KILOGRAM, "s"),
        "t/h": (_TONNE, "h"),
        "t/d": (_TONNE, "d"),
        "lb/h": (_POUND, "h"),
        "1e3 lb/h": (_with(_THOUSAND, _POUND), "h"),
    }
    letters = {"h": ("h", "hr"), "m": ("m", "min"), "s": ("s",), "d": ("d",)}
    for canonical, (stems, time) in numerators.items():
        for spelling in _over(stems, _TIMES[time]):
            yield spelling, canonical
        for stem, letter in product(stems, letters[time]):
            if not stem.endswith(("m", "#")):  # cum + pm
                yield f"{stem}p{letter}", canonical
    # What is said as letters alone: g, b, p, f3 and m3 have shorter names there.
    acronyms = {
        "US gal/min": (*_with(("", "us"), ("gpm",)), "gpmus"),
        "imp gal/min": _words("igpm impgpm imperialgpm ukgpm gpmimp gpmuk"),
        "1e6 US gal/d": _words("mgd usmgd mgdus mgpd"),
        "1e6 L/d": _words("mld mlpd"),
        "bbl/d": _words("bpd bopd blpd bwpd"),
        "1e3 bbl/d": _words("mbpd kbpd mbd kbd mbopd"),
        "bbl/h": ("bph",),
        "lb/h": ("pph",),
        "1e3 lb/h": _words("kpph mpph"),
        "m3/h": _words("cmh acmh"),
        "Nm3/h": _words("ncmh nmch"),
        "Sm3/h": ("scmh",),
        "Sm3/d": ("scmd",),
        "1e6 Sm3/d": ("mmscmd",),
        "ft3/min": _words("cfm acfm"),
        "scf/min": ("scfm",),
        "scf/h": ("scfh",),
        "1e3 scf/d": _words("mscfd kscfd"),
        "1e6 scf/d": ("mmscfd",),
    }
    for canonical, spellings in acronyms.items():
        for spelling in spellings:
            yield spelling, canonical


_FLOWS: Final = dict(_flow_spellings())
_CONDITIONS_BEHIND: Final = {
    **dict.fromkeys(_words("n in norm normal normiert"), "n"),
    **dict.fromkeys(_words("std standard"), "s"),
    **dict.fromkeys(_words("act actual betr ib"), "a"),
}


def _flow(key: str) -> Unit | None:
    canonical = _FLOWS.get(key)
    if canonical is None:
        # m3/h (n), m³/h i.N., m3/hr std: the base conditions behind the unit instead of before it.
        for words, letter in _CONDITIONS_BEHIND.items():
            if key.endswith(words):
                stem = key[: -len(words)]
                if _TABLE[_FLOWS[stem]].kind == "volflow" if stem in _FLOWS else False:
                    canonical = _FLOWS.get(letter + stem)
                    if canonical:
                        break
    return None if canonical is None else unit(canonical)


# --- everything else: a spelling means its unit, whatever stands around it

_PEAKS: Final = {
    **dict.fromkeys(_words("pkpk pp pktopk peaktopeak peakpeak p2p ptop ss"), "pk-pk"),
    **dict.fromkeys(_words("pk peak 0pk 0p zeropeak"), "pk"),
    **dict.fromkeys(_words("rms eff"), "rms"),
}
_DIRECT: Final = {**dict.fromkeys(_words("dc ="), "dc"), **dict.fromkeys(_words("ac ~"), "ac")}
_QUALIFIED: Final[Mapping[str, Mapping[str, str]]] = {
    **dict.fromkeys(("um", "mil (0.001 in)", "mm"), {k: v for k, v in _PEAKS.items() if v != "rms"}),
    **dict.fromkeys(("mm/s", "in/s", "g (standard gravity)"), {k: v for k, v in _PEAKS.items() if v != "pk-pk"}),
    **dict.fromkeys(("V", "mV", "A", "mA"), {**_DIRECT, "rms": "ac"}),
}


def _plain_spellings() -> Iterator[tuple[str, str]]:
    spellings: dict[str, tuple[str, ...]] = {
        "mm": _MM,
        "cm": _CM,
        "m": _METRE,
        "inch": _INCH,
        "ft": _FOOT,
        "mil (0.001 in)": _words("mil mils thou thous"),
        "um": _MICRON,
        "mm/s": (*_over(_MM, _SECOND), "mmps"),
        "in/s": (*_over(_INCH, _SECOND), "ips", "inps"),
        "g (standard gravity)": _words("g gs"),
        "rev/min": (*_words("rpm revpm upm"), *_over(_words("r rev revs revolution revolutions u 1 tr"), _MINUTE)),
        "cycles/min": (*_words("cpm"), *_over(_words("cycles cycle cyc c"), _MINUTE)),
        "Hz": (*_words("hz hertz"), *_over(_words("1 cycles cycle cyc"), _SECOND)),
        "uS/cm": _over(
            _words("us usiemens microsiemens micros umho umhos micromho micromhos"), _CM
        ),
        "mS/cm": _over(_words("ms msiemens millisiemens mmho mmhos millimho millimhos"), _CM),
        "mA": _words("ma milliamp milliamps milliampere milliamperes"),
        "A": _words("a amp amps ampere amperes"),
        "V": _words("v volt volts"),
        "mV": _words("mv millivolt millivolts"),
        "ohm": _words("ohm ohms"),
        "kW": _words("kw kilowatt kilowatts"),
        "MW": _words("mw megawatt megawatts"),
        "kcal/h": (*_over(_words("kcal kcals kilocalorie kilocalories"), _HOUR), "kcalph"),
        "Btu/h": (*_over(_words("btu btus"), _HOUR), "btuh", "btuph"),
        "1e6 Btu/h": (*_over(_with(_MILLION, _words("btu btus")), _HOUR), *_with(_MILLION, ("btuh", "btuph"))),
        "m3": _M3,
        "L": _LITRE,
        "kg/m3": _over(_KILOGRAM, tuple(m3 for m3 in _M3 if not m3.startswith("k"))),
        "g/cm3": (
            *_over(_words("g gm gms gram grams"), (*_CM3, "ml", "cucm")),
            *_over(_KILOGRAM, _LITRE),
            *_over(_TONNE, ("m3",)),
        ),
        "lb/ft3": (*_over(_POUND, _FT3), "pcf"),
        "cP": _words("cp centipoise centipoises mpas millipascalsecond millipascalseconds"),
        "cSt": (*_words("cst centistoke centistokes"), *_over(("mm2",), _SECOND)),
        "kg": _KILOGRAM,
        "tonne": _TONNE,
        "lb": tuple(pound for pound in _POUND if pound != "#"),
        "pH (dimensionless log)": _words("ph phunit phunits phvalue"),
        "NTU": _words("ntu ntus"),
        "FNU": _words("fnu fnus"),
        "degAPI = 141.5/SG60 - 131.5": _words("api degapi degreeapi degreesapi apigravity degapigravity oapi"),
    }
    for canonical, words in spellings.items():
        for word in words:
            yield word, canonical


_PLAIN: Final = dict(_plain_spellings())


def _plain(key: str) -> Unit | None:
    canonical = _PLAIN.get(key)
    if canonical is not None:
        return unit(canonical)
    for length in range(1, min(10, len(key) - 1) + 1):
        canonical = _PLAIN.get(key[:-length])
        basis = _QUALIFIED.get(canonical, {}).get(key[-length:]) if canonical else None
        if canonical and basis:
            return unit(canonical, None, basis)
    return None


# ---------------------------------------------------------------------------------------------------------
# Case: most lists are typed in any case. It decides only where two readings are left.

_LETTERS: Final[Mapping[str, str]] = {
    "m": "m", "M": "m", "t": "tonne", "T": "tonne", "g": "g (standard gravity)", "C": "degC", "F": "degF", "K": "K",
    "R": "degR", "A": "A", "V": "V", "l": "L", "L": "L", "c": "degC", "f": "degF", "v": "V",
}  # fmt: skip
"""A letter by itself. G is gauge, gauss or a swollen g; small k, r and a are too many things: none reads."""

_BY_CASE: Final[Mapping[str, str]] = {"Ml/": "1e6 L/d", "ML/": "1e6 L/d", "ml/": "cm3/min", "mL/": "cm3/min"}
_CONDUCTIVITY: Final = {"uS": "uS/cm", "umho": "uS/cm", "umhos": "uS/cm", "mS": "mS/cm"}


def _by_case(compact: str, key: str) -> Unit | None | bool:
    """Read what depends on capitals; False where nothing does."""
    if len(compact) == 1 and compact.isalpha():
        letter = _LETTERS.get(compact)
        return unit(letter) if letter else None
    if key in ("mw",) and compact[0] == "m":
        return None  # milliwatts, which the table has not, or megawatts
    if compact.startswith("mP") and key.startswith("mpa") and not key.startswith("mpas"):
        return None  # millipascal, or megapascal
    if key == "at" and compact != "at":
        return None
    if key == "pa" and compact == "pA":
        return None
    canonical = _BY_CASE.get(compact[:3])
    if canonical:
        time = _DAY if canonical == "1e6 L/d" else _MINUTE
        return unit(canonical) if key[3:] in time else None
    if compact in _CONDUCTIVITY:  # of water, everybody leaves the centimetre out
        return unit(_CONDUCTIVITY[compact])
    return False


_CANONICAL_BY_TEXT: Final = {name.casefold(): name for name in CANONICAL}


def _read(text: str) -> Unit | None:
    cleaned = _cleaned(text)
    while len(cleaned) > 2 and (cleaned[0], cleaned[-1]) in (("(", ")"), ("[", "]")) and (
        cleaned[0] not in cleaned[1:] and cleaned[-1] not in cleaned[:-1]
    ):
        cleaned = cleaned[1:-1].strip()
    if not cleaned or len(cleaned) > LONGEST_SPELLING:
        return None
    compact = _compact(cleaned)
    key = compact.lower()
    decided = _by_case(compact, key)
    if not isinstance(decided, bool):
        return decided
    for read in (_pressure, _temperature, _flow, _fraction, _plain):
        found = read(key)
        if found:
            return found
    name = _CANONICAL_BY_TEXT.get(text.strip().casefold())
    return unit(name) if name else None


_KNOWN: dict[str, Unit | None] = {}
_MOST_KNOWN: Final = 20_000  # spellings remembered; hostile lists have more, and are read without memory


def read_unit(text: str) -> Unit | None:
    """Read a unit as people write it.

    Parameters
    ----------
    text : str
        The spelling: of a unit column, of what stands behind a number or in a heading's brackets.

    Returns
    -------
    Unit or None
        None where the spelling means no unit of the table, or more than one. It is never guessed.

    >>> str(read_unit("kg/cm² (g)")), str(read_unit("N m3/h")), str(read_unit("in. w.c.")), read_unit("Hazen")
    ('kg/cm²g', 'Nm³/h', 'inH2O', None)
    """
    try:
        return _KNOWN[text]
    except KeyError:
        pass
    found = _read(text) if len(text) <= LONGEST_SPELLING else None
    if len(_KNOWN) < _MOST_KNOWN:
        _KNOWN[text] = found
    return found


def read_reference(text: str) -> str | None:
    """Read what stands alone behind a number in a column of pressures: ``g``, ``(a)``, ``abs``.

    >>> read_reference("(g)"), read_reference("abs."), read_reference("bar")
    ('gauge', 'absolute', None)
    """
    return _SUFFIX.get(_compact(_cleaned(text)).lower()) if len(text) <= LONGEST_SPELLING else None


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

    >>> round(convert(10.0, read_unit("kg/cm2(g)"), read_unit("barg")), 5)
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

    >>> difference(100.0, read_unit("degC"), read_unit("degF")), difference(1.0, read_unit("degC"), read_unit("degF"))
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
