"""Temperature sensors by their standards: platinum (IEC 60751), thermocouples (IEC 60584-1), their limits."""

import math
import re
import unicodedata
from collections.abc import Callable
from dataclasses import dataclass
from typing import Final, Literal, NamedTuple

from instruments.span import beyond_limit

# --- Platinum resistance, IEC 60751 -------------------------------------------------------------------

PLATINUM_MIN_C: Final = -200.0
PLATINUM_MAX_C: Final = 850.0

# Coefficients of the industrial platinum function, IEC 60751; C acts below 0 degC only.
_A: Final = 3.9083e-3
_B: Final = -5.775e-7
_C: Final = -4.183e-12

ToleranceClass = Literal["AA", "A", "B", "C"]
Construction = Literal["wire-wound", "film"]

# IEC 60751: tolerance in K = offset + slope x abs(t).
_TOLERANCE: Final[dict[ToleranceClass, tuple[float, float]]] = {
    "AA": (0.1, 0.0017),
    "A": (0.15, 0.002),
    "B": (0.3, 0.005),
    "C": (0.6, 0.01),
}

# IEC 60751:2022: where each class of thermometer holds, in degC; it differs with the construction.
_CLASS_LIMITS_C: Final[dict[tuple[ToleranceClass, Construction], tuple[float, float]]] = {
    ("AA", "wire-wound"): (-50.0, 250.0),
    ("AA", "film"): (0.0, 150.0),
    ("A", "wire-wound"): (-100.0, 450.0),
    ("A", "film"): (-30.0, 300.0),
    ("B", "wire-wound"): (-196.0, 600.0),
    ("B", "film"): (-50.0, 500.0),
    ("C", "wire-wound"): (-196.0, 600.0),
    ("C", "film"): (-50.0, 600.0),
}


def _platinum_ratio(t_c: float) -> float:
    ratio = 1.0 + t_c * (_A + t_c * _B)
    return ratio if t_c >= 0.0 else ratio + _C * (t_c - 100.0) * t_c**3


def pt100_ohm(t_c: float, *, r0_ohm: float = 100.0) -> float:
    """Resistance of an industrial platinum sensor at a temperature.

    Parameters
    ----------
    t_c : float
        Temperature in degC.
    r0_ohm : float
        Resistance at 0 degC: 100 ohm for Pt100.

    Raises
    ------
    ValueError
        Outside -200..850 degC, where IEC 60751 gives no function.

    >>> round(pt100_ohm(100.0), 4), round(pt100_ohm(-200.0), 4)
    (138.5055, 18.5201)
    """
    if beyond_limit(t_c, PLATINUM_MIN_C, PLATINUM_MAX_C):
        raise ValueError(f"IEC 60751 gives no resistance at {t_c} degC")
    return r0_ohm * _platinum_ratio(t_c)


def _platinum_c(ratio: float) -> float:
    if ratio >= 1.0:
        return (-_A + math.sqrt(_A * _A - 4.0 * _B * (1.0 - ratio))) / (2.0 * _B)
    return _root(lambda t_c: _platinum_ratio(t_c) - ratio, PLATINUM_MIN_C, 0.0)


def pt100_c(ohm: float, *, r0_ohm: float = 100.0) -> float:
    """Temperature in degC of an industrial platinum sensor from its resistance: the inverse of `pt100_ohm`.

    Raises
    ------
    ValueError
        A resistance that belongs to no temperature in -200..850 degC.

    >>> round(pt100_c(138.5055), 6)
    100.0
    """
    ratio = ohm / r0_ohm
    if beyond_limit(ratio, _platinum_ratio(PLATINUM_MIN_C), _platinum_ratio(PLATINUM_MAX_C)):
        raise ValueError(f"IEC 60751 gives no temperature for {ohm} ohm")
    return _platinum_c(ratio)


def pt100_ohm_per_k(t_c: float, *, r0_ohm: float = 100.0) -> float:
    """Sensitivity of an industrial platinum sensor in ohm per kelvin, the slope of IEC 60751's function.

    >>> round(pt100_ohm_per_k(0.0), 4), round(pt100_ohm_per_k(100.0), 4)
    (0.3908, 0.3793)
    """
    if beyond_limit(t_c, PLATINUM_MIN_C, PLATINUM_MAX_C):
        raise ValueError(f"IEC 60751 gives no resistance at {t_c} degC")
    slope = _A + 2.0 * _B * t_c
    if t_c < 0.0:
        slope += _C * (4.0 * t_c**3 - 300.0 * t_c**2)
    return r0_ohm * slope


def pt100_tolerance_k(t_c: float, tolerance_class: ToleranceClass) -> float:
    """Tolerance of a platinum thermometer in K, whatever the limits of its class (IEC 60751).

    >>> [round(pt100_tolerance_k(100.0, c), 4) for c in ("AA", "A", "B", "C")]
    [0.27, 0.35, 0.8, 1.6]
    """
    offset, slope = _TOLERANCE[tolerance_class]
    return offset + slope * abs(t_c)


def pt100_class_limits_c(tolerance_class: ToleranceClass, construction: Construction) -> tuple[float, float]:
    """Temperatures in degC between which a thermometer keeps its class (IEC 60751:2022).

    >>> pt100_class_limits_c("A", "film")
    (-30.0, 300.0)
    """
    return _CLASS_LIMITS_C[tolerance_class, construction]


def two_wire_lead_error_k(t_c: float, lead_ohm: float, *, r0_ohm: float = 100.0) -> float:
    """Error in K that the leads of a two-wire platinum sensor add to its reading.

    Parameters
    ----------
    t_c : float
        Temperature of the sensor in degC.
    lead_ohm : float
        Resistance of both leads together, out and back, in ohm; of a three-wire connection, the
        difference between the two leads that carry the current.
    r0_ohm : float
        Resistance of the sensor at 0 degC.

    Returns
    -------
    float
        The exact inverse of IEC 60751's function, which is not linear: 0.385 ohm/K holds nowhere in
        particular. It is continued above 850 degC for a reading that the leads carry there.

    >>> round(two_wire_lead_error_k(100.0, 7.8), 2)
    20.63
    """
    return _platinum_c((pt100_ohm(t_c, r0_ohm=r0_ohm) + lead_ohm) / r0_ohm) - t_c


# --- Thermocouples, IEC 60584-1 -----------------------------------------------------------------------

# ITS-90 reference functions, the same in IEC 60584-1 and NIST Monograph 175 (figures of NIST's public
# database): millivolts from degC with the cold junction at 0 degC. Each type: its lower end in degC, then
# for each piece its upper end and its coefficients from the constant upwards.
_Piece = tuple[float, tuple[float, ...]]

# fmt: off
_PIECES: Final[dict[str, tuple[float, tuple[_Piece, ...]]]] = {
    "B": (0.0, (
        (630.615, (0.0, -0.00024650818346, 5.9040421171e-6, -1.3257931636e-9, 1.5668291901e-12,
                   -1.694452924e-15, 6.2990347094e-19)),
        (1820.0, (-3.8938168621, 0.02857174747, -8.4885104785e-5, 1.5785280164e-7, -1.6835344864e-10,
                  1.1109794013e-13, -4.4515431033e-17, 9.8975640821e-21, -9.3791330289e-25)),
    )),
    "E": (-270.0, (
        (0.0, (0.0, 0.058665508708, 4.5410977124e-5, -7.7998048686e-7, -2.5800160843e-8,
               -5.9452583057e-10, -9.3214058667e-12, -1.0287605534e-13, -8.0370123621e-16,
               -4.3979497391e-18, -1.6414776355e-20, -3.9673619516e-23, -5.5827328721e-26,
               -3.4657842013e-29)),
        (1000.0, (0.0, 0.05866550871, 4.5032275582e-5, 2.8908407212e-8, -3.3056896652e-10,
                  6.502440327e-13, -1.9197495504e-16, -1.2536600497e-18, 2.1489217569e-21,
                  -1.4388041782e-24, 3.5960899481e-28)),
    )),
    "J": (-210.0, (
        (760.0, (0.0, 0.050381187815, 3.047583693e-5, -8.568106572e-8, 1.3228195295e-10,
                 -1.7052958337e-13, 2.0948090697e-16, -1.2538395336e-19, 1.5631725697e-23)),
        (1200.0, (296.45625681, -1.4976127786, 0.0031787103924, -3.1847686701e-6, 1.5720819004e-9,
                  -3.0691369056e-13)),
    )),
    "K": (-270.0, (
        (0.0, (0.0, 0.039450128025, 2.3622373598e-5, -3.2858906784e-7, -4.9904828777e-9,
               -6.7509059173e-11, -5.7410327428e-13, -3.1088872894e-15, -1.0451609365e-17,
               -1.9889266878e-20, -1.6322697486e-23)),
        (1372.0, (-0.017600413686, 0.038921204975, 1.8558770032e-5, -9.9457592874e-8, 3.1840945719e-10,
                  -5.6072844889e-13, 5.6075059059e-16, -3.2020720003e-19, 9.7151147152e-23,
                  -1.2104721275e-26)),
    )),
    "N": (-270.0, (
        (0.0, (0.0, 0.026159105962, 1.0957484228e-5, -9.3841111554e-8, -4.6412039759e-11,
               -2.6303357716e-12, -2.2653438003e-14, -7.6089300791e-17, -9.3419667835e-20)),
        (1300.0, (0.0, 0.025929394601, 1.571014188e-5, 4.3825627237e-8, -2.5261169794e-10,
                  6.4311819339e-13, -1.0063471519e-15, 9.9745338992e-19, -6.0863245607e-22,
                  2.0849229339e-25, -3.0682196151e-29)),
    )),
    "R": (-50.0, (
        (1064.18, (0.0, 0.00528961729765, 1.39166589782e-5, -2.38855693017e-8, 3.56916001063e-11,
                   -4.62347666298e-14, 5.00777441034e-17, -3.73105886191e-20, 1.57716482367e-23,
                   -2.81038625251e-27)),
        (1664.5, (2.95157925316, -0.00252061251332, 1.59564501865e-5, -7.64085947576e-9,
                  2.05305291024e-12, -2.93359668173e-16)),
        (1768.1, (152.232118209, -0.268819888545, 0.000171280280471, -3.45895706453e-8,
                  -9.34633971046e-15)),
    )),
    "S": (-50.0, (
        (1064.18, (0.0, 0.00540313308631, 1.2593428974e-5, -2.32477968689e-8, 3.22028823036e-11,
                   -3.31465196389e-14, 2.55744251786e-17, -1.25068871393e-20, 2.71443176145e-24)),
        (1664.5, (1.32900444085, 0.00334509311344, 6.54805192818e-6, -1.64856259209e-9,
                  1.29989605174e-14)),
        (1768.1, (146.628232636, -0.258430516752, 0.000163693574641, -3.30439046987e-8,
                  -9.43223690612e-15)),
    )),
    "T": (-270.0, (
        (0.0, (0.0, 0.038748106364, 4.4194434347e-5, 1.1844323105e-7, 2.0032973554e-8, 9.0138019559e-10,
               2.2651156593e-11, 3.6071154205e-13, 3.8493939883e-15, 2.8213521925e-17, 1.4251594779e-19,
               4.8768662286e-22, 1.079553927e-24, 1.3945027062e-27, 7.9795153927e-31)),
        (400.0, (0.0, 0.038748106364, 3.329222788e-5, 2.0618243404e-7, -2.1882256846e-9, 1.0996880928e-11,
                 -3.0815758772e-14, 4.547913529e-17, -2.7512901673e-20)),
    )),
}
# fmt: on

# Type K carries this bump above 0 degC besides: a x exp(b x (t - c)^2).
_K_BUMP: Final = (0.1185976, -1.183432e-4, 126.9686)

# Type B falls from 0 mV to a minimum near 21 degC and passes 0 mV again near 42: only above the minimum
# does a voltage belong to one temperature.
_INVERSE_FROM_C: Final = {"B": 21.020262}

# Limits of the functions, IEC 60584-1:2013, which ends type K at 1300 degC where the earlier edition went
# on to 1372. A and C (tungsten-rhenium) from memory: their limits are known here, their functions not.
THERMOCOUPLE_LIMITS_C: Final[dict[str, tuple[float, float]]] = {
    "K": (-270.0, 1300.0),
    "J": (-210.0, 1200.0),
    "T": (-270.0, 400.0),
    "E": (-270.0, 1000.0),
    "N": (-270.0, 1300.0),
    "R": (-50.0, 1768.0),
    "S": (-50.0, 1768.0),
    "B": (0.0, 1820.0),
    "A": (0.0, 2500.0),
    "C": (0.0, 2315.0),
}


def _root(rising: Callable[[float], float], low: float, high: float) -> float:
    """Zero of a rising function by halving, to the last digit that a float holds."""
    while True:
        middle = 0.5 * (low + high)
        if not low < middle < high:
            return middle
        if rising(middle) < 0.0:
            low = middle
        else:
            high = middle


def _pieces(letter: str) -> tuple[float, tuple[_Piece, ...]]:
    try:
        return _PIECES[letter]
    except KeyError:
        raise ValueError(f"no function is held for a thermocouple of type {letter!r}") from None


def _emf_mv(letter: str, t_c: float) -> float:
    _, pieces = _pieces(letter)
    coefficients = next((row for end, row in pieces if t_c <= end), pieces[-1][1])
    emf = 0.0
    for coefficient in reversed(coefficients):
        emf = emf * t_c + coefficient
    if letter == "K" and t_c > 0.0:
        size, width, centre = _K_BUMP
        emf += size * math.exp(width * (t_c - centre) ** 2)
    return emf


def thermocouple_mv(letter: str, t_c: float, *, cold_junction_c: float = 0.0) -> float:
    """Voltage of a thermocouple in millivolts.

    Parameters
    ----------
    letter : str
        Type: K, J, T, E, N, R, S or B.
    t_c, cold_junction_c : float
        Temperatures of the measuring and of the cold junction in degC. Millivolts are subtracted,
        never degrees.

    Raises
    ------
    ValueError
        Another type, or a temperature outside the function (type K to 1372 degC, as ITS-90 has it;
        IEC 60584-1:2013 itself ends it at 1300, see `THERMOCOUPLE_LIMITS_C`).

    >>> round(thermocouple_mv("K", 100.0), 4), round(thermocouple_mv("K", 300.0, cold_junction_c=25.0), 4)
    (4.0962, 11.2083)
    """
    lower, pieces = _pieces(letter)
    for junction_c in (t_c, cold_junction_c):
        if beyond_limit(junction_c, lower, pieces[-1][0]):
            raise ValueError(f"IEC 60584-1 gives type {letter} no voltage at {junction_c} degC")
    return _emf_mv(letter, t_c) - _emf_mv(letter, cold_junction_c)


def thermocouple_c(letter: str, mv: float, *, cold_junction_c: float = 0.0) -> float:
    """Temperature in degC of a thermocouple from its voltage: the root of `thermocouple_mv`.

    The published inverse polynomials are up to 0.06 K off; the root of the function is not.

    Parameters
    ----------
    letter : str
        Type: K, J, T, E, N, R, S or B. Type B has two temperatures for a voltage below 0 mV and none
        worth having below 42 degC: the upper one is given.
    mv : float
        Voltage in millivolts.
    cold_junction_c : float
        Temperature of the cold junction in degC.

    Raises
    ------
    ValueError
        Another type, or a voltage that belongs to no temperature of its function.

    >>> round(thermocouple_c("K", 4.096), 3), round(thermocouple_c("K", 11.2083, cold_junction_c=25.0), 2)
    (99.994, 300.0)
    """
    lower, pieces = _pieces(letter)
    low, high = _INVERSE_FROM_C.get(letter, lower), pieces[-1][0]
    emf = mv + thermocouple_mv(letter, cold_junction_c)
    if beyond_limit(emf, _emf_mv(letter, low), _emf_mv(letter, high)):
        raise ValueError(f"IEC 60584-1 gives type {letter} no temperature for {emf} mV")
    return _root(lambda t_c: _emf_mv(letter, t_c) - emf, low, high)


# --- What a list calls them ---------------------------------------------------------------------------


@dataclass(frozen=True, slots=True, kw_only=True)
class SensorType:
    """A temperature sensor with a standard function: platinum by its resistance at 0 degC, else a letter."""

    r0_ohm: float | None = None
    letter: str | None = None

    @property
    def name(self) -> str:
        """The trade's short name, Pt100 or type K."""
        return f"type {self.letter}" if self.letter else f"Pt{self.r0_ohm:g}"


class SensorLimits(NamedTuple):
    """What a sensor type can measure, in degC, and the standard that says so."""

    min_c: float
    max_c: float
    basis: str


def _limits(sensor: SensorType) -> SensorLimits:
    if sensor.letter is None:
        return SensorLimits(PLATINUM_MIN_C, PLATINUM_MAX_C, "IEC 60751")
    basis = "IEC 60584-1:2013" + (" (from memory)" if sensor.letter in "AC" else "")
    return SensorLimits(*THERMOCOUPLE_LIMITS_C[sensor.letter], basis)


_LONGEST_TEXT: Final = 120
_BARE_LETTERS: Final = frozenset("KJTENRSB")  # a bare A or C more often means a tolerance class

_R0: Final = r"(10|20|25|50|100|200|500|1000)"
_OHM: Final = r"(?:ohms?|\u03c9|r)(?![a-z])"
_PLATINUM: Final = (
    # "Pt 100", "PT-100-3W"; no rhodium alloy (Pt10Rh-Pt), no Japanese curve (JPt100)
    re.compile(rf"(?:(?<![a-z])|(?<=rtd))pt[ \-_.]?{_R0}(?![0-9.])(?! ?%? ?rh)"),
    re.compile(rf"platin[a-z]*[a-z ,:()\-]{{0,40}}{_R0} ?{_OHM}"),
    re.compile(rf"(?<![0-9.]){_R0} ?{_OHM}[ ,\-]{{0,2}}(?:platin[a-z]*|pt)(?![a-z0-9])"),
)
# A curve other than IEC 60751's 0.00385, or a resistor of another metal: no limits are held for these.
_OTHER_RESISTOR: Final = re.compile(
    r"0?[.,]0039(?:02|1[0-9]?|2[0-9]?)\b|\b39(?:02|16|2[0-6])\b|\bjpt|\bjis\b|\b(?:ntc|ptc|thermistor)\b"
    r"|(?<![a-z])(?:ni|cu)[ \-]?(?:10|50|53|100|120|1000)(?![0-9])"
)
_RESISTOR_WORD: Final = re.compile(r"(?<![a-z])rtd|resist|widerst")
_CLASS: Final = re.compile(
    r"\b(?:class|cl|klasse|kl|tol|tolerance)[ .:]{0,2}(?:aa|a|b|c|1|2|3)\b(?: ?/ ?(?:aa|a|b|c)\b)?"
)

_THERMOCOUPLE_WORD: Final = re.compile(r"\b(?:tc|thermocouples?|\w*thermoelemente?|thermopaare?)(?=[a-z]?\b)")
_LETTER_BEHIND: Final = re.compile(  # "TC type K", "Typ K", "TC-K", "TCK", "type J/K"
    r"(?<![a-z])"
    r"(?:(?:type|typ(?!e)|tc)[ :=.\-_(/\"']{0,3}|(?:te|thermocouple|thermoelement)[ :=.\-_(/\"']{1,3})"
    r"([a-z])(?![a-z0-9])(?: ?(?:/|&|\+|or|and|oder|und) ?([a-z])(?![a-z0-9]))?"
)
_LETTER_BEFORE: Final = re.compile(  # "K type", "K-Typ"
    r"(?<![a-z0-9/&+])([a-z])[ \-]?(?:type|typ|thermocouples?|tc)(?![a-z])"
)
_FIRST_LETTER: Final = re.compile(r"([a-z])(?![a-z0-9])")
_BESIDE_A_LETTER: Final = re.compile(
    r"\b(?:duplex|simplex|dual|double|single|twin|mi|mims|(?:un)?grounded|insulated|isolated|exposed|junction"
    r"|sheath(?:ed)?|wires?|w|tc|thermocouples?|mm|iec|ansi|din|en|[0-9]+)\b|[^a-z0-9]"
)

# The alloys of the two legs, by the chemist's and by the trade's names.
_METALS: Final = {
    "chromel": "nicr",
    "alumel": "nial",
    "nicrosil": "nicrsi",
    "nisil": "nisi",
    "iron": "fe",
    "eisen": "fe",
    "copper": "cu",
    "kupfer": "cu",
    **dict.fromkeys(("constantan", "konstantan", "const", "konst", "con", "ko"), "cuni"),
}
_ELEMENTS: Final = (
    (re.compile(r"nickel"), "ni"),
    (re.compile(r"chrom(?:ium)?(?!el)"), "cr"),
    (re.compile(r"alumini?um"), "al"),
    (re.compile(r"rhodium"), "rh"),
    (re.compile(r"platin(?:um)?(?=[ \-]{0,2}(?:[0-9]{1,2} ?%? ?)?rh)"), "pt"),
)
_LEG: Final = (
    r"(nicrosil|nisil|ni[ \-]?cr[ \-]?si|ni[ \-]?cr|ni[ \-]?si|ni[ \-]?al|cu[ \-]?ni|chromel|alumel"
    r"|constantan|konstantan|const|konst|con|ko|iron|eisen|copper|kupfer|cr|al|fe|cu|ni)"
)
_BASE_METAL_PAIR: Final = re.compile(rf"(?<![a-z]){_LEG} ?[\-/_+]? ?{_LEG}(?![a-z])")
_BASE_METAL_TYPES: Final = {
    ("nicr", "ni"): "K",
    ("nicr", "nial"): "K",
    ("nicr", "nisi"): "K",
    ("cr", "al"): "K",
    ("fe", "cuni"): "J",
    ("cu", "cuni"): "T",
    ("nicr", "cuni"): "E",
    ("cr", "cuni"): "E",
    ("nicrsi", "nisi"): "N",
}
_RHODIUM: Final = re.compile(r"(?<![a-z])pt[ \-]?(?:([0-9]{1,2}) ?%? ?rh|rh[ \-]?([0-9]{1,2}))(?![0-9])")
_RHODIUM_TYPES: Final = {frozenset({"10"}): "S", frozenset({"13"}): "R", frozenset({"30", "6"}): "B"}


def _plain(text: str) -> str:
    folded = unicodedata.normalize("NFKC", text).casefold()
    folded = folded.translate({0x2018: "'", 0x2019: "'", 0x201C: '"', 0x201D: '"', 0x201E: '"', 0x2212: "-"})
    folded = re.sub(r"[\u2010-\u2015]", "-", " ".join(folded.split()))
    folded = re.sub(r"\bt[./] ?c\b\.?", "tc", folded)
    for name, symbol in _ELEMENTS:
        folded = name.sub(symbol, folded)
    return re.sub(r"([0-9]) ?[x\u00d7*] ?", r"\1 ", folded)


def _alloy_letters(plain: str) -> set[str]:
    letters = set()
    for pair in _BASE_METAL_PAIR.findall(plain):
        first, second = (_METALS.get(leg, re.sub(r"[ \-]", "", leg)) for leg in pair)
        if (first, second) in _BASE_METAL_TYPES:
            letters.add(_BASE_METAL_TYPES[first, second])
    rhodium = frozenset(before or behind for before, behind in _RHODIUM.findall(plain))
    if rhodium in _RHODIUM_TYPES:
        letters.add(_RHODIUM_TYPES[rhodium])
    return letters


def _stated_letters(plain: str) -> set[str]:
    letters = {letter for pair in _LETTER_BEHIND.findall(plain) for letter in pair if letter}
    letters.update(_LETTER_BEFORE.findall(plain))
    return {letter.upper() for letter in letters}


def read_sensor_type(text: str) -> SensorType | None:
    """Read what a list calls a temperature sensor.

    Platinum sensors by their resistance (Pt100, PT-100 3-wire, 2xPt1000), thermocouples by their letter
    (TC type K, Typ K, K) or their alloys (NiCr-Ni, Fe-CuNi, Pt10Rh-Pt). Nothing is guessed: a text that
    names no standard function, or more than one (Pt100 / TC K, type K Fe-CuNi), gives None, and so do
    nickel and copper resistors, thermistors and platinum of another curve than IEC 60751's.

    >>> [sensor and sensor.name for sensor in map(read_sensor_type, ("PT 100 3-wire", "Typ K", "Ni100"))]
    ['Pt100', 'type K', None]
    """
    if len(text) > _LONGEST_TEXT:
        return None
    plain = _plain(text)
    if _OTHER_RESISTOR.search(plain):
        return None
    plain = _CLASS.sub(" ", plain)
    resistances = {found for pattern in _PLATINUM for found in pattern.findall(plain)}
    letters = _alloy_letters(plain) | _stated_letters(plain)
    if resistances or _RESISTOR_WORD.search(plain):
        if not _THERMOCOUPLE_WORD.search(plain):
            letters -= {"A", "B", "C"}  # beside a resistor "type B" is its class
        if letters:
            return None
    elif letters and (first := _FIRST_LETTER.match(plain)):
        letters |= {first[1].upper()} & _BARE_LETTERS
    if not letters and not resistances:
        letters = {_BESIDE_A_LETTER.sub("", plain).upper()} & _BARE_LETTERS
    if len(resistances) + len(letters) != 1:
        return None
    if resistances:
        return SensorType(r0_ohm=float(resistances.pop()))
    letter = letters.pop()
    return SensorType(letter=letter) if letter in THERMOCOUPLE_LIMITS_C else None


def sensor_limits(sensor_type_text: str) -> SensorLimits | None:
    """What the sensor of a list can measure, in degC, with its standard; None where the text names none.

    These are limits of the standard functions, not of a sheath, a wire or a tolerance class.

    >>> sensor_limits("TC type K")
    SensorLimits(min_c=-270.0, max_c=1300.0, basis='IEC 60584-1:2013')
    """
    sensor = read_sensor_type(sensor_type_text)
    return None if sensor is None else _limits(sensor)


def sensors_for_range(lrv_c: float, urv_c: float) -> tuple[str, ...]:
    """Names of the sensor types whose standard function covers a range in degC, Pt100 first.

    >>> sensors_for_range(0.0, 1250.0)
    ('type K', 'type N', 'type R', 'type S', 'type B', 'type A', 'type C')
    """
    known = (SensorType(r0_ohm=100.0), *(SensorType(letter=letter) for letter in THERMOCOUPLE_LIMITS_C))
    fitting = []
    for sensor in known:
        low, high, _ = _limits(sensor)
        if not beyond_limit(lrv_c, low, high) and not beyond_limit(urv_c, low, high):
            fitting.append(sensor.name)
    return tuple(fitting)
