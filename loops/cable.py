"""The cable of a circuit as a resistance: conductor sizes, what the standards allow them, hot and cold."""

import math
import re
import unicodedata
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Final, Literal

STANDARD_SIZES_MM2: Final = (0.5, 0.75, 1.0, 1.5, 2.5, 4.0)

# IEC 60228 (tables for classes 1 and 2, and for class 5): maximum dc resistance of one conductor at 20 degC
# in ohm/km, plain and tinned. These are limits: computing them from resistivity and area comes out 5 % low.
_STRANDED: Final = {
    0.5: (36.0, 36.7),
    0.75: (24.5, 24.8),
    1.0: (18.1, 18.2),
    1.5: (12.1, 12.2),
    2.5: (7.41, 7.56),
    4.0: (4.61, 4.70),
}
_FLEXIBLE: Final = {
    0.5: (39.0, 40.1),
    0.75: (26.0, 26.7),
    1.0: (19.5, 20.0),
    1.5: (13.3, 13.7),
    2.5: (7.98, 8.21),
    4.0: (4.95, 5.09),
}
# In these sizes class 1 has the figures of class 2, and class 6 those of class 5.
_BY_CLASS: Final = {1: _STRANDED, 2: _STRANDED, 5: _FLEXIBLE, 6: _FLEXIBLE}

ANNEALED_COPPER_OHM_M: Final = 1.7241e-8  # at 20 degC
COPPER_PER_K: Final = 0.00393  # temperature coefficient of annealed copper at 20 degC
STRANDED_LAY_FACTOR: Final = 1.02  # strands are longer than the cable; 2..7 % in practice

SMALLEST_AWG: Final = 40
_INCH_MM: Final = 25.4

ResistancePer = Literal["conductor", "loop"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Conductor:
    """One conductor of a cable by its size, in mm2 or in AWG, its class (IEC 60228) and its plating.

    Class 2, stranded and plain, is what an instrument cable is unless its record says otherwise.
    """

    size_mm2: float | None = None
    awg: int | None = None
    conductor_class: int = 2
    tinned: bool = False

    def __post_init__(self) -> None:
        if (self.size_mm2 is None) == (self.awg is None):
            raise ValueError("a conductor has a size in mm2 or in AWG, one of the two")


def awg_diameter_mm(awg: int) -> float:
    """Diameter of a solid wire of an American wire gauge in mm (ASTM B258).

    Parameters
    ----------
    awg : int
        Gauge, 0 to 40.

    Raises
    ------
    ValueError
        A gauge outside 0..40.

    >>> round(awg_diameter_mm(18), 4), round(awg_diameter_mm(36), 4)
    (1.0237, 0.127)
    """
    if not 0 <= awg <= SMALLEST_AWG:
        raise ValueError(f"AWG {awg} is outside 0..{SMALLEST_AWG}")
    return float(0.005 * 92.0 ** ((36 - awg) / 39.0) * _INCH_MM)


def awg_area_mm2(awg: int) -> float:
    """Cross-section of an American wire gauge in mm2 (ASTM B258).

    >>> round(awg_area_mm2(18), 4)
    0.823
    """
    return math.pi / 4.0 * awg_diameter_mm(awg) ** 2


def awg_ohm_per_km_20c(awg: int, *, lay_factor: float = STRANDED_LAY_FACTOR) -> float:
    """Resistance of one copper conductor of an American wire gauge at 20 degC in ohm/km.

    Parameters
    ----------
    awg : int
        Gauge, 0 to 40.
    lay_factor : float
        1.0 for a solid wire; a stranded one is longer than the cable (1.02 unless the cable's data say
        more).

    >>> round(awg_ohm_per_km_20c(18, lay_factor=1.0), 3)
    20.948
    """
    return ANNEALED_COPPER_OHM_M * lay_factor / (awg_area_mm2(awg) * 1e-6) * 1000.0


def conductor_ohm_per_km_20c(conductor: Conductor) -> float | None:
    """Maximum resistance of one conductor at 20 degC in ohm/km.

    Returns
    -------
    float or None
        For mm2 the limit of IEC 60228, for AWG the figure of ASTM B258 with the lay factor for all
        classes but 1. None for a size or class that the table does not hold: nothing is interpolated.

    >>> conductor_ohm_per_km_20c(Conductor(size_mm2=1.5)), conductor_ohm_per_km_20c(Conductor(size_mm2=1.3))
    (12.1, None)
    """
    if conductor.conductor_class not in _BY_CLASS:
        return None
    if conductor.awg is not None:
        if not 0 <= conductor.awg <= SMALLEST_AWG:
            return None
        return awg_ohm_per_km_20c(
            conductor.awg, lay_factor=1.0 if conductor.conductor_class == 1 else STRANDED_LAY_FACTOR
        )
    for size_mm2, (plain, tinned) in _BY_CLASS[conductor.conductor_class].items():
        if conductor.size_mm2 is not None and math.isclose(conductor.size_mm2, size_mm2, rel_tol=1e-9):
            return tinned if conductor.tinned else plain
    return None


def temperature_factor(conductor_c: float) -> float:
    """Resistance of copper at a conductor temperature in degC, against 20 degC.

    1 + 0.00393 (T - 20). The factors printed in IEC 60228 are the inverse, from a measured resistance to
    20 degC, and rounded: dividing by them gives another figure.

    >>> round(temperature_factor(70.0), 4), round(temperature_factor(-20.0), 4)
    (1.1965, 0.8428)
    """
    return 1.0 + COPPER_PER_K * (conductor_c - 20.0)


def loop_resistance_ohm(
    length_m: float, ohm_per_km_20c: float, *, conductor_c: float, per: ResistancePer = "conductor"
) -> float:
    """Resistance of a cable run in ohm, out and back.

    Parameters
    ----------
    length_m : float
        Length of the cable in m, one way.
    ohm_per_km_20c : float
        Resistance at 20 degC in ohm/km.
    conductor_c : float
        Temperature of the conductors in degC.
    per : {"conductor", "loop"}
        Whether `ohm_per_km_20c` is of one conductor, or of the pair as many cable lists give it.

    >>> loop_resistance_ohm(1000.0, 12.1, conductor_c=20.0)
    24.2
    >>> round(loop_resistance_ohm(1000.0, 24.2, conductor_c=70.0, per="loop"), 3)
    28.955
    """
    conductors = 2.0 if per == "conductor" else 1.0
    return conductors * length_m / 1000.0 * ohm_per_km_20c * temperature_factor(conductor_c)


LONGEST_CABLE_M: Final = 100_000
"""No cable length beyond this is worked out: it stands for any."""


def longest_m(holds: Callable[[int], bool]) -> int | None:
    """Longest cable in whole metres with which a condition still holds that a longer one only ever breaks.

    One metre more breaks it, up to the 100 km that no loop has. None where no cable at all breaks it already.

    >>> longest_m(lambda metres: loop_resistance_ohm(metres, 12.1, conductor_c=20.0) <= 50.0)
    2066
    """
    return largest_whole(LONGEST_CABLE_M, holds)


def largest_whole(most: int, holds: Callable[[int], bool]) -> int | None:
    """Largest whole number from 0 to `most` at which a condition still holds that only ever turns false.

    None where it does not hold at 0.

    >>> largest_whole(100, lambda number: number < 7), largest_whole(100, lambda number: False)
    (6, None)
    """
    if not holds(0):
        return None
    low, high = 0, most + 1
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (middle, high) if holds(middle) else (low, middle)
    return low


def smallest_mm2(
    holds: Callable[[float], bool],
    *,
    conductor_class: int = 2,
    tinned: bool = False,
    sizes_mm2: Sequence[float] = STANDARD_SIZES_MM2,
) -> float | None:
    """Smallest conductor of a series, in mm2, with whose resistance in ohm/km at 20 degC a condition holds.

    A size that the table of IEC 60228 does not hold is passed over. None where none of them does.

    >>> smallest_mm2(lambda ohm_per_km: loop_resistance_ohm(500.0, ohm_per_km, conductor_c=20.0) <= 8.0)
    2.5
    """
    for size_mm2 in sorted(sizes_mm2):
        ohm_per_km = conductor_ohm_per_km_20c(
            Conductor(size_mm2=size_mm2, conductor_class=conductor_class, tinned=tinned)
        )
        if ohm_per_km is not None and holds(ohm_per_km):
            return size_mm2
    return None


_LONGEST_TEXT: Final = 100
_NUMBER: Final = r"(?<![0-9.,])([0-9]{0,3}[.,]?[0-9]{1,4})"
_SIZE_MM2: Final = re.compile(
    rf"{_NUMBER} ?(?:(?:mm ?\^? ?2|mm ?sq|sq[. ]{{0,2}}mm|qmm|mmq|sq)(?![0-9])|(mm)(?![a-z0-9^]))"
)
# "0.5 mm" may be the diameter of a telephone pair; no cable is sold by a diameter of 1.5 mm.
_NO_DIAMETERS: Final = (0.75, 1.5, 2.5, 4.0)
_DIAMETER_WORD: Final = re.compile(r"\u00f8|\u2300|\bdia|\bdurchm")
_AWG_BEFORE: Final = re.compile(r"(?<![0-9.,])(?<![0-9]/)([0-9]{1,2}) ?-?(?:awg|gauge|ga)(?![a-z])")
_AWG_BEHIND: Final = re.compile(r"(?<![a-z])awg ?[#:.\-]? ?([0-9]{1,2})(?![0-9.,]|/0)")
_AWG_SIGN: Final = re.compile(r"# ?([0-9]{1,2})(?![0-9.,]|/0)")
# "7/0.67mm": seven strands of 0.67 mm diameter, beside the size that they make up.
_STRANDS: Final = re.compile(r"(?<![0-9.,])[0-9]{1,3} ?/ ?0?[.,][0-9]{1,3}(?: ?mm(?! ?(?:2|\^|sq)))?(?![0-9])")
_TWO_SIZES: Final = re.compile(
    r"[0-9] ?(?:/|&|\+|-|to|or|and|bis|oder|und) ?(?:[0-9]{0,3}[.,])?[0-9]{1,4} ?(?:mm|sq|qmm|awg)"
)
# "1x2x1.5", "12 Pr x 0.75", "4x(2x0.75)", "2/C x 1.5", "3G1.5": counts of pairs and cores, then the size.
_CONSTRUCTION: Final = re.compile(
    r"(?:[0-9]{1,3} ?(?:x|\*|pairs?|prs?|p|triads?|tr?|quads?|q|cores?|/?c|g) ?[x*\-]? ?\(?){1,3}"
    rf"{_NUMBER}[a-z +/(),.\-]*"
)
_LARGEST_BARE_MM2: Final = 10.0  # beyond it a bare number is more likely a gauge


def _sizes_mm2(plain: str) -> set[float]:
    sizes = set()
    for number, millimetres in _SIZE_MM2.findall(plain):
        size = float(number.replace(",", "."))
        if not millimetres or size in _NO_DIAMETERS:
            sizes.add(size)
    return sizes


def read_conductor_size(text: str) -> Conductor | None:
    """Read a conductor size as lists write it.

    A number by itself, or behind a construction (1x2x1.5), is mm2. A size in AWG bears its name or its
    sign (18 AWG, #16). mm alone is taken for mm2 where no cable has such a diameter.

    Returns
    -------
    Conductor or None
        Of the default class, plain. None where the text gives no size, two sizes, or one that may be
        either (16).

    >>> [read_conductor_size(text).size_mm2 for text in ("1,5 mm2", "1x2x1.5", "1 pr 1.5 sqmm")]
    [1.5, 1.5, 1.5]
    >>> read_conductor_size("18 AWG").awg, read_conductor_size("#16").awg, read_conductor_size("16")
    (18, 16, None)
    """
    if len(text) > _LONGEST_TEXT:
        return None
    plain = " ".join(unicodedata.normalize("NFKC", text).casefold().replace("\u00d7", "x").split())
    plain = _STRANDS.sub(" ", plain).strip()
    if _DIAMETER_WORD.search(plain) or _TWO_SIZES.search(plain):
        return None
    gauges = {int(found) for found in _AWG_BEFORE.findall(plain)}
    if not gauges:
        gauges = {int(found) for found in _AWG_BEHIND.findall(plain) or _AWG_SIGN.findall(plain)}
    sizes = _sizes_mm2(plain)
    if not gauges and not sizes:
        bare = re.fullmatch(_NUMBER, plain) or _CONSTRUCTION.fullmatch(plain)
        size = float(bare[1].replace(",", ".")) if bare else 0.0
        sizes = {size} if size <= _LARGEST_BARE_MM2 else set()
    if len(gauges) > 1 or len(sizes) > 1:
        return None
    if gauges:
        gauge = gauges.pop()
        if gauge > SMALLEST_AWG:
            return None
        # "18 AWG (0.82 mm2)" says one thing twice, "16 AWG (1.5 mm2)" says two.
        agrees = all(math.isclose(size, awg_area_mm2(gauge), rel_tol=0.02) for size in sizes)
        return Conductor(awg=gauge) if agrees else None
    size = sizes.pop() if sizes else 0.0
    return Conductor(size_mm2=size) if size > 0.0 else None
