"""Pressures of different reference: what each is referred to, and the same pressure referred to something else."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Final

from instruments.plant_data import STANDARD_ATMOSPHERE_PA
from instruments.quantity import Quantity, format_number

WATER_COLUMNS: Final = frozenset({"inH2O", "inH2O@4C", "inH2O@20C", "inH2O@60F", "mmH2O", "cmH2O", "mH2O", "ftH2O"})
"""Units in which 'gauge' is as often the water gauge that it is read on as a pressure above atmosphere."""


def stated_reference(quantity: Quantity, *, body: str | None = None) -> str | None:
    """Return what a pressure says that it is referred to; None for one that says nothing.

    A vacuum is a gauge pressure counted downwards. Of a differential body, inches or millimetres
    water gauge are a differential pressure, and so say nothing of their reference.

    Parameters
    ----------
    quantity : Quantity
        A pressure.
    body : str or None
        gauge, absolute or differential, where the value belongs to a body.

    >>> from instruments.quantity import read_quantity
    >>> [stated_reference(read_quantity(text)) for text in ("5 barg", "5 bara", "20 inHg vac", "5 bar")]
    ['gauge', 'absolute', 'gauge', None]
    >>> stated_reference(read_quantity("50 mmWG"), body="differential"), stated_reference(read_quantity("50 mmWG"))
    (None, 'gauge')
    """
    reference = quantity.reference
    if reference is None or reference == "unstated":
        return None
    if reference == "vacuum":
        return "gauge"
    if reference == "gauge" and body == "differential" and quantity.unit is not None:
        return None if quantity.unit.canonical in WATER_COLUMNS else reference
    return reference


def referred(pa: float, reference: str, to: str, *, atmospheric_pa: float) -> float | None:
    """Return a pressure referred to something else.

    Parameters
    ----------
    pa : float
        The pressure in Pa, referred to `reference`.
    reference, to : str
        gauge, absolute or differential.
    atmospheric_pa : float
        Atmospheric pressure at the plant in Pa.

    Returns
    -------
    float or None
        In Pa. A gauge pressure is a differential pressure whose low side is open to the atmosphere.
        None between absolute and differential, where no figure leads from one to the other.

    >>> referred(10e5, "gauge", "absolute", atmospheric_pa=101325.0)
    1101325.0
    >>> referred(2500.0, "gauge", "differential", atmospheric_pa=101325.0)
    2500.0
    """
    if reference == to or "absolute" not in (reference, to):
        return pa
    if "differential" in (reference, to):
        return None
    return pa + atmospheric_pa if to == "absolute" else pa - atmospheric_pa


def can_be(pa: float, reference: str) -> bool:
    """Whether there is such a pressure: nothing is below absolute zero, nothing gauge below minus one atmosphere.

    >>> can_be(-50_000.0, "gauge"), can_be(-50_000.0, "absolute"), can_be(-150_000.0, "gauge")
    (True, False, False)
    """
    if reference == "absolute":
        return pa >= 0.0
    return reference != "gauge" or pa >= -STANDARD_ATMOSPHERE_PA


def ways_to_read(pressures: Iterable[tuple[float, str | None]], *, default: str) -> tuple[str, ...]:
    """Return what pressures without a reference may be referred to, the plant's default first.

    Parameters
    ----------
    pressures : iterable of (float, str or None)
        All pressures that are compared, in Pa, each with its reference; None where it has none.
    default : str
        What the plant takes for an unstated reference.

    Returns
    -------
    tuple of str
        One way where every reference is known, where none is (they move together), or where the
        other way there can be no such pressure; else gauge and absolute.

    >>> ways_to_read([(5e5, None), (6e5, "gauge")], default="gauge")
    ('gauge', 'absolute')
    >>> ways_to_read([(5e5, None), (6e5, None)], default="gauge")
    ('gauge',)
    >>> ways_to_read([(-5e4, None), (6e5, "gauge")], default="gauge")
    ('gauge',)
    """
    given = tuple(pressures)
    open_ones = [pa for pa, reference in given if reference is None]
    if not open_ones or len(open_ones) == len(given):
        return (default,)
    other = "absolute" if default == "gauge" else "gauge"
    return (default, other) if all(can_be(pa, other) for pa in open_ones) else (default,)


def rounding(quantity: Quantity) -> float:
    """Return half a step of the last digit in which a number is written, in its unit.

    >>> from instruments.quantity import read_quantity
    >>> rounding(read_quantity("-14.7 psig")), rounding(read_quantity("-30 inHg(g)"))
    (0.05, 0.5)
    """
    places = len(format_number(quantity.number).partition(".")[2])
    return 0.5 * 10.0**-places
