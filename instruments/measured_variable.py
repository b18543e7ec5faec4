"""What a tag measures, and in which units a range of it can be."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from instruments.letters import KKS_FIRST, USERS_CHOICE, read_letters
from instruments.plant_codes import CODES, PlantCode, code_for

__all__ = ["dimension_allowed", "measured_variable"]

_VARIABLES: Final[Mapping[str, str]] = {
    "A": "analysis", "B": "burner", "E": "voltage", "F": "flow", "H": "hand", "I": "current", "J": "power",
    "K": "time", "L": "level", "P": "pressure", "Q": "quantity", "R": "radiation", "S": "speed",
    "T": "temperature",
    "U": "multivariable", "V": "vibration", "W": "weight", "X": "unclassified", "Y": "state", "Z": "position",
}  # fmt: skip
_MODIFIED: Final[Mapping[tuple[str, str], str]] = {
    ("P", "D"): "differential pressure",
    ("T", "D"): "temperature difference",
    ("L", "D"): "level difference",
    ("F", "F"): "flow ratio",
    ("F", "Q"): "flow quantity",
}


def measured_variable(
    letters: str,
    *,
    codes: Mapping[str, PlantCode] = CODES,
    scheme: str = "isa",
    users_letters: Mapping[str, str] | None = None,
) -> str | None:
    """What a tag measures, in a word; None for letters and codes that do not tell.

    >>> [measured_variable(letters) for letters in ("PDIT", "DPT", "LSHH", "SDV")]
    ['differential pressure', 'differential pressure', 'level', None]
    """
    if scheme == "kks":
        return _VARIABLES.get(KKS_FIRST.get(letters, ""))
    code = code_for(letters, codes)
    if code is not None:
        if code.letters and code.letters[0] not in "XH":
            letters = code.letters
        else:
            if code.first:
                return _VARIABLES.get(code.first)
            return {"GD": "analysis", "FD": "fire"}.get(code.code)
    if not letters:
        return None
    reading = read_letters(letters, users_letters=USERS_CHOICE)
    first = reading.first
    if first in USERS_CHOICE:
        return (users_letters or {}).get(first)
    return _MODIFIED.get((first, reading.modifier[:1])) or _VARIABLES.get(first)


#: Kinds of unit that each first letter's range may have, and those of which nothing is said (practice).
_DIMENSIONS: Final[Mapping[str, tuple[frozenset[str], frozenset[str]]]] = {
    first: (frozenset(allowed.split()), frozenset(open_.split()))
    for first, allowed, open_ in (
        ("P", "pressure", ""),
        ("T", "temperature dtemp", ""),
        ("F", "volflow stdflow massflow", "vel"),
        ("L", "length pressure volume mass ratio", ""),
        ("S", "speed ratio vel", "other accel"),
        # V is also viscosity on older lists.
        ("V", "vel accel length ratio dynvisc kinvisc", "speed other volt curr"),
        ("W", "mass massflow ratio", "other pressure"),
        ("J", "power curr volt ratio", "other"),
        ("I", "curr ratio", "other"),
        ("E", "volt ratio", "other curr power"),
        ("Z", "length ratio other", "speed curr volt res"),
        ("B", "ratio curr volt temperature", "other speed"),
        ("R", "ratio other", "length density mass volume massflow speed"),
        ("K", "other ratio", "speed length mass volume"),
    )
}


def dimension_allowed(
    letters: str,
    unit_kind: str | None,
    *,
    dp_body: bool | None = None,
    square_root_known: bool = False,
    codes: Mapping[str, PlantCode] = CODES,
    scheme: str = "isa",
) -> bool | None:
    """Whether a range may be in units of this kind; None where it cannot be told.

    Parameters
    ----------
    letters
        The letters of the tag.
    unit_kind
        The kind of the range's unit: pressure, temperature, volflow and so on.
    dp_body
        Whether the device's body is a differential pressure cell; None where no body is stated.
    square_root_known
        Whether the list says where, or that nowhere, the square root is taken.

    Examples
    --------
    >>> dimension_allowed("PIT", "volflow"), dimension_allowed("LT", "pressure")
    (False, True)
    """
    if unit_kind is None:
        return None
    if scheme == "kks":
        first = KKS_FIRST.get(letters, "")
        return _allowed(first, "", frozenset("T"), unit_kind, dp_body, square_root_known) if first else None
    code = code_for(letters, codes)
    if code is not None:
        if not code.letters or code.letters[0] in "XH" or code.code in ("RO", "PVRV"):
            return True
        letters = code.letters
    reading = read_letters(letters, users_letters=USERS_CHOICE)
    if reading.legal == "illegal":
        return None
    return _allowed(reading.first, reading.modifier, reading.function_letters, unit_kind, dp_body, square_root_known)


def _allowed(
    first: str,
    modifier: str,
    functions: frozenset[str],
    unit_kind: str,
    dp_body: bool | None,
    square_root_known: bool,
) -> bool | None:
    if first not in _DIMENSIONS or (functions & set("VZYKWOPLX") and not functions & set("TE")):
        # A valve's travel, a relay's output, a well's length: not the measured variable's.
        return True
    allowed, untold = _DIMENSIONS[first]
    if unit_kind in allowed:
        return True
    if "C" in functions and unit_kind == "ratio" and modifier != "F":
        # A controller's output stands in percent.
        return None
    if "E" in functions and unit_kind in ("volt", "curr", "res", "length", "speed"):
        # What the sensor gives (mV, ohm, pulses), or its size.
        return True
    if first == "F":
        if "F" in modifier and unit_kind == "ratio":
            return True
        if (functions & set("Q") or "Q" in modifier) and unit_kind in ("volume", "mass"):
            return True
        if unit_kind == "pressure":
            if dp_body is False:
                return False
            return True if square_root_known else None
    return None if unit_kind in untold else False
