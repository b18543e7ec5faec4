"""Extension and compensating cables of thermocouples: what a list calls them, which element each fits, its colour."""

from __future__ import annotations

import re
import unicodedata
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from instruments.sensor import read_sensor_type, thermocouple_c, thermocouple_mv

# IEC 60584-3, all from memory: X is an extension cable, of the element's own alloys; C a compensating one, of
# others that give its voltage up to 100 or 150 degC. R and S share their compensating alloys.
_FITS: Final[dict[str, tuple[str, ...]]] = {
    "K": ("KX", "KCA", "KCB"),
    "J": ("JX",),
    "T": ("TX",),
    "E": ("EX",),
    "N": ("NX", "NC"),
    "R": ("RCA", "RCB", "SCA", "SCB"),
    "S": ("SCA", "SCB", "RCA", "RCB"),
    "B": ("BC",),
}
# What cables were called before: VX for KCB and WX for KCA; RX, SX and BX for what is compensating today.
_OLD_NAMES: Final = {
    "VX": "KCB",
    "WX": "KCA",
    "RX": "RCA",
    "SX": "SCA",
    "BX": "BC",
    "KC": "KCA",
    "RC": "RCA",
    "SC": "SCA",
}

COPPER: Final = "copper"

# IEC 60584-3 (from memory): of the positive conductor and the sheath; in intrinsically safe circuits the sheath
# is blue whatever the type.
IEC_COLOURS: Final = {
    "K": "green", "J": "black", "T": "brown", "E": "violet", "N": "pink", "R": "orange", "S": "orange", "B": "grey",
}  # fmt: skip


@dataclass(frozen=True, slots=True, kw_only=True)
class ExtensionCable:
    """A cable between a thermocouple and its cold junction.

    Attributes
    ----------
    letter
        The element that it is made for; None for copper.
    code
        KX, KCA, NC ...; empty where only the element is told.
    """

    letter: str | None
    code: str = ""

    @property
    def name(self) -> str:
        """What it is called in a message."""
        return COPPER if self.letter is None else self.code or f"for type {self.letter}"


def fitting_cables(letter: str) -> tuple[str, ...]:
    """Return the cables that fit an element, its own extension cable first; empty where none is known.

    >>> fitting_cables("K"), fitting_cables("S")
    (('KX', 'KCA', 'KCB'), ('SCA', 'SCB', 'RCA', 'RCB'))
    """
    return _FITS.get(letter, ())


def fits(letter: str, cable: ExtensionCable) -> bool | None:
    """Whether a cable carries an element's voltage to the cold junction unchanged.

    None for copper behind type B, which gives next to nothing below 100 degC: it fits while the head stays
    below that (from memory).

    >>> [fits("K", ExtensionCable(letter="K", code=code)) for code in ("KX", "KCB", "")]
    [True, True, True]
    >>> fits("K", ExtensionCable(letter="J", code="JX")), fits("R", ExtensionCable(letter="S", code="SCA"))
    (False, True)
    """
    if cable.letter is None:
        return None if letter == "B" else False
    if cable.letter == letter:
        return True
    return {cable.letter, letter} == {"R", "S"}


def cable_error_k(letter: str, hot_c: float, *, head_c: float, cabinet_c: float, cable: ExtensionCable) -> float:
    """Error in K of a thermocouple whose cable to the cold junction is another than its own.

    Parameters
    ----------
    letter : str
        Type of the element: K, J, T, E, N, R, S or B.
    hot_c : float
        Temperature of the measuring junction in degC.
    head_c, cabinet_c : float
        Temperatures where the cable begins, and where it ends and the cold junction is compensated.
    cable : ExtensionCable
        What the cable is.

    Raises
    ------
    ValueError
        No function is held for one of the two, or a temperature lies outside it.

    >>> round(cable_error_k("K", 300.0, head_c=45.0, cabinet_c=25.0, cable=ExtensionCable(letter=None)), 1)
    -19.8
    """
    mv = thermocouple_mv(letter, hot_c, cold_junction_c=head_c)
    if cable.letter is not None:
        mv += thermocouple_mv(cable.letter, head_c, cold_junction_c=cabinet_c)
    return thermocouple_c(letter, mv, cold_junction_c=cabinet_c) - hot_c


# ------------------------------------------------------------------------------------------- what a list calls it

_LONGEST_TEXT: Final = 120
_CODE: Final = re.compile(r"(?<![a-z0-9])(?:(k|n)(c)|(k|r|s)(c[ab]?)|([kjtenrsbvw])(?:[pn]?x)|(b)(c))(?![a-z0-9])")
# Codes that are nothing else in the text of a cable: EX is a protection, TX a transmitter, NC a contact.
_PLAIN_CODE: Final = re.compile(r"(?<![a-z0-9])(?:k|j|n)x(?![a-z0-9])|(?<![a-z0-9])(?:k|r|s)c[ab](?![a-z0-9])")
_CABLE_WORD: Final = re.compile(r"extension|compensat|ausgleich|thermoleitung|thermocouple|(?<![a-z])t/?c(?![a-z])")
_COPPER: Final = re.compile(r"(?<![a-z])(?:copper|kupfer|cu|e-cu|cu/cu)(?![a-z/-])")


def read_extension(text: str) -> ExtensionCable | None:
    """Read what a cable catalogue says of an extension cable: its code (KX, KCB), its element, or copper.

    >>> [read_extension(text) for text in ("KX", "Type J", "copper")]
    [ExtensionCable(letter='K', code='KX'), ExtensionCable(letter='J', code=''), ExtensionCable(letter=None, code='')]
    >>> read_extension("twisted"), read_extension("KX / JX")
    (None, None)
    """
    return _read(text) if len(text) <= _LONGEST_TEXT else None


@lru_cache(maxsize=1024)
def _read(text: str) -> ExtensionCable | None:
    plain = " ".join(unicodedata.normalize("NFKC", text).casefold().split())
    codes = {"".join(part for part in found if part) for found in _CODE.findall(plain)}
    named = {_code(code) for code in codes}
    letters = {code[0] for code in named}
    if letters == {"R", "S"} or len(named) > 1 == len(letters):
        # R/S is one alloy; KX and KCA in one text say K at least.
        return ExtensionCable(letter=min(letters))
    if len(named) == 1:
        code = named.pop()
        return ExtensionCable(letter=code[0], code=code)
    if named:
        return None
    bare = plain.upper().replace(" ", "")
    if bare in ("R/S", "S/R", "RS", "R,S", "S,R"):
        return ExtensionCable(letter="R")
    sensor = read_sensor_type(text)
    if sensor is not None:
        return ExtensionCable(letter=sensor.letter) if sensor.letter else None
    return ExtensionCable(letter=None) if _COPPER.search(plain) else None


def _code(letters: str) -> str:
    """Return a code in the spelling of the standard: the letter alone of one ending in X is an extension cable."""
    code = letters.upper()
    if len(code) == 1:
        code += "X"
    return _OLD_NAMES.get(code, code)


def extension_in_words(text: str) -> ExtensionCable | None:
    """Read the extension cable of a free text that names a cable; None where it does not speak of one.

    >>> extension_in_words("KX 2x1.5 mm2"), extension_in_words("1x2x1.5 Ex i blue")
    (ExtensionCable(letter='K', code='KX'), None)
    """
    plain = text[:_LONGEST_TEXT].casefold()
    if _PLAIN_CODE.search(plain) or _CABLE_WORD.search(plain):
        return read_extension(text)
    return None
