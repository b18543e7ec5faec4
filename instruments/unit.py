"""Which spelling means which unit: a grammar of what people write, in front of the closed table of units.

A spelling is never guessed. It is cleaned (blanks, dots, glyphs) and then composed from parts: a quantity, a
time, a reference to gauge or absolute. What no composition gives is no unit.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterable, Iterator, Mapping
from itertools import product
from types import MappingProxyType
from typing import Final

from instruments.unit_table import (
    BASE_UNITS,
    CANONICAL,
    REFERENCES,
    Unit,
    UnitMismatch,
    base_unit,
    commensurable,
    comparable,
    convert,
    difference,
    unit,
    unit_label,
)

__all__ = [
    "BASE_UNITS",
    "CANONICAL",
    "REFERENCES",
    "Unit",
    "UnitMismatch",
    "base_unit",
    "commensurable",
    "comparable",
    "convert",
    "difference",
    "other_readings",
    "read_reference",
    "read_unit",
    "unit",
    "unit_label",
]

LONGEST_SPELLING: Final = 64
"""Characters of a text that may still be a unit; anything longer is a sentence."""


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
_INVERSE = re.compile(r"(?:^|[ .*])([A-Za-z]{1,4})\^?-\^?([123])(?=$|[ (\[])")
_DROPPED = str.maketrans(dict.fromkeys(" \t\n\r\f\v.()[]{}_,^*'-;"))


def _cleaned(text: str) -> str:
    """Bring glyphs to one form and powers with a minus under a stroke; letters keep their case.

    >>> _cleaned("kg·m⁻³"), _cleaned("℃"), _cleaned("mÂ³/h"), _cleaned("min-1")
    ('kg/m3', '°C', 'm^3/h', '1/min')
    """
    text = _MOJIBAKE.sub("", text).translate(_BEFORE)
    text = unicodedata.normalize("NFKC", text).translate(_AFTER).strip()
    text = text.replace("''", '"').replace('""', '"')
    text = _PER.sub("/", text)
    inverse = _INVERSE.search(text)
    if inverse:
        power = "" if inverse[2] == "1" else inverse[2]
        text = f"{text[: inverse.start()] or '1'}/{inverse[1]}{power}{text[inverse.end() :]}"
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


_HOUR = _words("h hr hrs hour hours std stunde stunden heure heures hora uur")
_MINUTE = _words("min mins minute minutes mn minuten")
_SECOND = _words("s sec secs second seconds sek sekunde")
_DAY = _words("d day days dy tag tage jour jours dag")
_TIMES = {"h": _HOUR, "m": _MINUTE, "s": _SECOND, "d": _DAY}

_M3 = _words("m3 cum cbm mc kl kiloliter kilolitre kiloliters kilolitres") + tuple(
    f"{cubic}{metre}" for cubic in ("cubic", "cu") for metre in _words("meter metre meters metres m mtr")
)
_LITRE = _words("l lt lts ltr ltrs lit liter litre liters litres dm3")
_MEGALITRE = _words("megaliter megalitre megaliters megalitres")  # Ml itself asks for its case
_CM3 = _words("cm3 ccm cc cucm")
_FT3 = _words("ft3 cf cft cuft cubicft cubicfeet cubicfoot cufeet")
_GALLON = _words("gal gals gallon gallons")
_US_GALLON = ("usg", *_GALLON, *(f"us{gallon}" for gallon in _GALLON), *(f"{gallon}us" for gallon in _GALLON))
_IMPERIAL_GALLON = tuple(
    word
    for gallon in _GALLON
    for imperial in ("imp", "imperial", "uk", "i")
    for word in (f"{imperial}{gallon}", f"{gallon}{imperial}")
    if word != f"{gallon}i"
)
_BARREL = _words("bbl bbls barrel barrels bo b")
_KILOGRAM = _words("kg kgs kilo kilos kilogram kilograms kilogramme kilogrammes")
_TONNE = _words("t te tonne tonnes mt mton mtons metricton metrictons metrictonne metrictonnes")
_POUND = _words("lb lbs lbm pound pounds #")
_THOUSAND = _words("k m 1000 103 1e3 x1000 x103")  # 103 is 10^3 when its accent has gone
_MILLION = _words("mm 1000000 106 1e6 x106")

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
    **dict.fromkeys(_words("deltap delta diff differential dp"), "differential"),
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

_DEGREES = _words("deg degs degr degree degrees grad grd grade grados graus graden degrés degres")
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
        if key.startswith(word):
            difference, key = True, key[len(word) :]
        elif key.endswith(word):
            difference, key = True, key[: -len(word)]
    scale = _SCALES.get(key)
    if scale is None:
        for degree in _DEGREES:
            if key.startswith(degree):
                scale = scale or _SCALES.get(key[len(degree) :])
        if key.endswith("deg"):  # C°
            scale = scale or _SCALES.get(key[:-3])
    if difference:
        return unit("delta_degC") if scale in ("degC", "K") else None
    return unit(scale) if scale else None


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
        "o2 h2 h2s co co2 ch4 nh3 so2 nox no no2 n2o n2 cl2 clo2 hcl hf hcn h2so4 naoh nacl naocl caco3 "
        "cl f fe al mn nh4 po4 no3 o3 voc hc c2h4 c3h8 c6h6 h2o do toc cod bod tss ss mlss ts ds tds "
        "methane oxygen hydrogen propane ammonia"
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
        "ug/L": _words("ug mcg microgram micrograms"),
        "g/L": _words("g gm gms gram grams"),
    }.items():
        for spelling in _over(numerators, (*per_litre, "1")):  # mg/1: an l that a scan took for a one
            if spelling != "g/1":
                yield spelling, canonical
    yield "gpl", "g/L"


_FRACTIONS: Final = dict(_ratio_spellings())


def _fraction(key: str) -> Unit | None:
    canonical = _FRACTIONS.get(key) or next(
        (_FRACTIONS[stem] for stem in _without_substance(key) if stem in _FRACTIONS), None
    )
    return None if canonical is None else unit(canonical)


_LONGEST_SUBSTANCE = max(map(len, _SUBSTANCES))


def _without_substance(key: str) -> Iterator[str]:
    """Leave out the substance at the end (ppm H2S, mg/l as CaCO3) or behind the sign (% CH4 v/v)."""
    for length in range(1, min(_LONGEST_SUBSTANCE, len(key) - 1) + 1):
        if key[-length:] in _SUBSTANCES:
            yield key[:-length].removesuffix("as")
        if key.startswith("%") and key[1 : length + 1] in _SUBSTANCES:
            yield key[0] + key[length + 1 :]


# --- flow

_ACTUAL = ("", "a", "act", "actual")
_AT_NORMAL = ("n", "norm", "normal")
_AT_STANDARD = ("s", "std", "standard")


def _flow_spellings() -> Iterator[tuple[str, str]]:
    normal_m3 = (*_with(_AT_NORMAL, _M3), "m3n", "mn3", "ncm")
    standard_m3 = (*_with(_AT_STANDARD, _M3), "scm")
    scf = _with(_AT_STANDARD, _FT3)
    million_m3 = _with(_MILLION, standard_m3)
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
        "Sm3/h": (standard_m3, "h"),
        "Sm3/d": (standard_m3, "d"),
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
        "1e3 bbl/d": _words("mbpd kbpd kbd mbopd"),
        "bbl/h": ("bph",),
        "lb/h": ("pph",),
        "1e3 lb/h": _words("kpph mpph"),
        "m3/h": _words("cmh acmh"),
        "m3/s": _words("cumec cumecs"),
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
    **dict.fromkeys(_words("act actual betr betrieb ib"), "a"),
}


def _flow(key: str) -> Unit | None:
    canonical = _FLOWS.get(key)
    if canonical is None:
        # m3/h (n), m³/h i.N., m3/hr std: the base conditions behind the unit instead of before it.
        for words, letter in _CONDITIONS_BEHIND.items():
            if key.endswith(words):
                canonical = canonical or _FLOWS.get(letter + key[: -len(words)])
    return None if canonical is None else unit(canonical)


# --- everything else: a spelling means its unit, whatever stands around it

_PEAKS: Final = {
    **dict.fromkeys(_words("pkpk pk/pk pp p/p pktopk peaktopeak peakpeak p2p ptop"), "pk-pk"),
    **dict.fromkeys(_words("pk peak 0pk 0p zeropeak"), "pk"),
    **dict.fromkeys(_words("rms eff"), "rms"),
}
_DIRECT: Final = {**dict.fromkeys(_words("dc ="), "dc"), **dict.fromkeys(_words("ac ~ rms"), "ac")}
_QUALIFIED: Final[Mapping[str, Mapping[str, str]]] = {
    "um": _PEAKS, "mil (0.001 in)": _PEAKS, "mm": _PEAKS, "mm/s": _PEAKS, "in/s": _PEAKS,
    "g (standard gravity)": _PEAKS, "V": _DIRECT, "mV": _DIRECT, "A": _DIRECT, "mA": _DIRECT,
}  # fmt: skip


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
        "g (standard gravity)": ("g",),
        "rev/min": (
            *_words("rpm revpm upm"),
            *_over(_words("r rev revs revolution revolutions u umdr 1 tr"), _MINUTE),
        ),
        "cycles/min": (*_words("cpm"), *_over(_words("cycles cycle cyc"), _MINUTE)),
        "Hz": (*_words("hz hertz"), *_over(_words("1 cycles cycle cyc"), _SECOND)),
        "uS/cm": _over(_words("us usiemens microsiemens micros umho umhos micromho micromhos"), _CM),
        "mS/cm": _over(_words("ms msiemens millisiemens mmho mmhos millimho millimhos"), _CM),
        "mA": _words("ma mamp mamps milliamp milliamps milliampere milliamperes"),
        "A": _words("a amp amps ampere amperes"),
        "V": _words("v volt volts"),
        "mV": _words("mv millivolt millivolts"),
        "ohm": _words("ohm ohms"),
        "kW": _words("kw kilowatt kilowatts"),
        "MW": _words("mw megawatt megawatts"),
        "kcal/h": (*_over(_words("kcal kcals kilocalorie kilocalories"), _HOUR), "kcalph"),
        "Btu/h": (*_over(_words("btu btus"), _HOUR), "btuh", "btuph"),
        "1e6 Btu/h": (
            *_over(_with(_MILLION, _words("btu btus")), _HOUR),
            *_with(_MILLION, ("btuh", "btuph")),
        ),
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
        "degAPI = 141.5/SG60 - 131.5": _words("api apideg degapi degreeapi degreesapi apigravity degapigravity oapi"),
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
    "m": "m", "M": "m", "t": "tonne", "T": "tonne", "g": "g (standard gravity)", "C": "degC", "F": "degF",
    "K": "K", "R": "degR", "A": "A", "V": "V", "l": "L", "L": "L", "c": "degC", "f": "degF", "v": "V",
}  # fmt: skip
"""A letter by itself. G is gauge, gauss or a swollen g; small k, r and a are too many things: none reads."""

_BY_CASE: Final[Mapping[str, str]] = {"Ml/": "1e6 L/d", "ML/": "1e6 L/d", "ml/": "cm3/min", "mL/": "cm3/min"}
_CONDUCTIVITY: Final = {"uS": "uS/cm", "umho": "uS/cm", "umhos": "uS/cm", "mS": "mS/cm"}
"""Of water, lists leave the centimetre out."""
_SMALL_O: Final = {**dict.fromkeys(("oC", "OC", "oc", "0C", "0c"), "degC"), "oF": "degF", "0F": "degF"}
"""An o or a nought for the degree sign; OF and OK are words."""


def _by_case(compact: str, key: str) -> tuple[bool, str | None]:
    """Whether capitals alone decide, and the canonical name that they give."""
    if len(compact) == 1 and compact.isalpha():
        return True, _LETTERS.get(compact)
    if compact in _SMALL_O:
        return True, _SMALL_O[compact]
    if compact in ("mw", "mW", "pA", "AT", "At"):
        return True, None  # milliwatt, picoampere: not in the table, and neither MW nor Pa
    if key == "mbd" or compact == "vac":
        return True, None  # thousand barrels a day, or mbar differential; vacuum, or volts AC
    if compact.startswith("mP") and key.startswith("mpa") and not key.startswith("mpas"):
        return True, None  # a millipascal as it is written, a megapascal as it is meant
    canonical = _BY_CASE.get(compact[:3])
    if canonical:
        return True, canonical if key[3:] in (_DAY if canonical == "1e6 L/d" else _MINUTE) else None
    if compact in _CONDUCTIVITY:
        return True, _CONDUCTIVITY[compact]
    return False, None


_CANONICAL_BY_TEXT: Final = {name.casefold(): name for name in CANONICAL}


def _read(text: str) -> Unit | None:
    cleaned = _cleaned(text)
    while (
        len(cleaned) > 2
        and (cleaned[0], cleaned[-1]) in (("(", ")"), ("[", "]"))
        and (cleaned[0] not in cleaned[1:] and cleaned[-1] not in cleaned[:-1])
    ):
        cleaned = cleaned[1:-1].strip()
    if not cleaned or len(cleaned) > LONGEST_SPELLING:
        return None
    compact = _compact(cleaned)
    key = compact.lower()
    decided, canonical = _by_case(compact, key)
    if decided:
        return unit(canonical) if canonical else None
    for read in (_pressure, _temperature, _flow, _fraction, _plain):
        found = read(key)
        if found:
            return found
    name = _CANONICAL_BY_TEXT.get(text.strip().casefold())
    if name:
        return unit(name)
    return _at_a_temperature(cleaned)


_TEMPERATURE_OF_THE_SAMPLE = re.compile(r"(?:@|\bat\b) ?[0-9]{1,3}(?:\.[0-9])? ?(?:°|deg\.?)? ?[CF]$", re.IGNORECASE)


def _at_a_temperature(cleaned: str) -> Unit | None:
    """Read uS/cm @ 25 degC: a condition of the sample, where it says nothing of the unit's size."""
    condition = _TEMPERATURE_OF_THE_SAMPLE.search(cleaned)
    found = _read(cleaned[: condition.start()]) if condition else None
    unaffected = found is not None and found.kind in ("cond", "density", "dynvisc", "kinvisc")
    return found if unaffected else None


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

    >>> [str(read_unit(text)) for text in ("kg/cm² (g)", "N m3/h", "in. w.c.")], read_unit("Hazen")
    (['kg/cm²g', 'Nm³/h', 'inH2O'], None)
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

    >>> read_reference("(g)"), read_reference("abs."), read_reference("bar"), read_reference("V")
    ('gauge', 'absolute', None, None)
    """
    if len(text) > LONGEST_SPELLING or text.strip() in ("v", "V"):  # volts
        return None
    return _SUFFIX.get(_compact(_cleaned(text)).lower())


_BARE: Final[Mapping[str, tuple[str, ...]]] = MappingProxyType(
    {
        "m": ("metre", "minute"), "M": ("metre", "thousand or million"), "t": ("tonne", "time"),
        "T": ("tonne", "temperature"), "g": ("standard gravity", "gram", "gauge"),
        "C": ("degree Celsius", "coulomb"), "F": ("degree Fahrenheit", "flow"), "K": ("kelvin", "thousand"),
        "R": ("degree Rankine", "ohm"), "A": ("ampere", "absolute"), "V": ("volt", "volume"),
        "#": ("psi", "pound"), '"': ("inch", "ditto"),
    }
)  # fmt: skip


def other_readings(text: str) -> tuple[str, ...]:
    """What a bare letter or sign may mean, the reading that `read_unit` gives first; empty for all else.

    Where the measured variable of the tag contradicts that first reading, the cell has two.

    >>> other_readings("#"), other_readings("bar")
    (('psi', 'pound'), ())
    """
    return _BARE.get(text.strip(), ())
