"""What a signal is, and which input or output takes it, from the words that lists have for both."""

from __future__ import annotations

import re
from functools import lru_cache
from typing import Final

LONGEST_WORDS: Final = 120
"""Characters of a text that may still be a signal or an I/O type; anything longer is a sentence."""

_TO: Final = r" ?(?:m ?a)? ?(?:-|\u2013|\u2014|to|bis|/|\.{2,3}|\u2026) ?"
# 4-20 without its mA is a signal as well; 0-20 may be anything.
_LIVE_ZERO: Final = re.compile(rf"(?<![\d.,])(?:4{_TO}20(?![\d.,]*\d)|20{_TO}4 ?m ?a\b)|\bhart\b", re.IGNORECASE)
_CURRENT: Final = re.compile(r"(?<![a-z])m ?a(?:dc)?(?![a-z])", re.IGNORECASE)
_WIRELESS: Final = re.compile(r"wireless", re.IGNORECASE)
_BUS: Final = re.compile(
    r"fieldbus|profibus|modbus|profinet|ethernet|\bff\b|\bpa\b|\bdp\b|serial|rs-?485|\bbus\b|foundation|wireless|"
    r"\bnet\b|ip\b",
    re.IGNORECASE,
)
_RTD: Final = re.compile(
    r"\bpt ?-?\d{2,4}\b|\brtd\b|\bni ?1[02]0\b|\bcu ?10\b|resistance therm|widerstandstherm", re.IGNORECASE
)
_THERMOCOUPLE: Final = re.compile(
    r"\bt/?c\b|thermocouple|thermoelement|\btype[ -]?[kjtenrsb]\b|\btc ?[kjtenrsb]\b|\b[kjtenrsb][ -]type\b",
    re.IGNORECASE,
)
_CONTACT: Final = re.compile(
    r"\bvfc\b|volt[ -]?free|\bcontact\b|dry ?contact|namur|proximity|potential[ -]?free|potentialfrei|kontakt|"
    r"\bspdt\b|\bspst\b|\bdpdt\b|\breed\b|\brelay\b",
    re.IGNORECASE,
)
_VOLTS: Final = re.compile(r"\b(?:12|24|48|110|115|120|125|220|230|240) ?v ?(?:ac|dc|cc|ca)?\b", re.IGNORECASE)
# A measurement in volts: 1-5 V, 0-10 VDC, +/-10 V; what is switched has one figure.
_VOLTAGE: Final = re.compile(
    rf"(?<![\d.,])[0-2]{_TO}(?:5|10) ?v|(?:\+/-|\u00b1) ?(?:5|10) ?v|\bmv\b|millivolt", re.IGNORECASE
)
_PULSE: Final = re.compile(r"pulse|frequency|frequenz|impuls|\bhz\b|namur frequency", re.IGNORECASE)
_DIGITAL: Final = re.compile(r"digital|discrete|\bbinary\b|bin[\u00e4a]r|\bon ?/ ?off\b|\bstatus\b", re.IGNORECASE)

_CLASSES: Final = (
    ("current", _CURRENT),
    ("RTD", _RTD),
    ("thermocouple", _THERMOCOUPLE),
    ("contact", _CONTACT),
    ("voltage", _VOLTAGE),
    ("volts", _VOLTS),
    ("pulse", _PULSE),
    ("digital", _DIGITAL),
)
_ONE_CLASS: Final = ("current", "bus", "RTD", "thermocouple", "contact", "volts")


def signal_classes(text: str | None) -> frozenset[str]:
    """Return all that a signal says of itself.

    Returns
    -------
    frozenset of str
        Of current, voltage (1-5 V), RTD, thermocouple, contact, volts (24 VDC, which is switched),
        pulse, digital (a contact or a switched voltage, nothing says which) and bus.

    >>> [sorted(signal_classes(text)) for text in ("4-20mA HART", "4-20 mA + relay", "Pt100", "0-10 V", "pneumatic")]
    [['current'], ['contact', 'current'], ['RTD'], ['voltage'], []]
    """
    return _classes(text) if text else frozenset()


@lru_cache(maxsize=4096)
def _classes(text: str) -> frozenset[str]:
    words = " ".join(text[:LONGEST_WORDS].split())
    if _WIRELESS.search(words):
        return frozenset({"bus"})
    found = {name for name, pattern in _CLASSES if pattern.search(words)}
    if _LIVE_ZERO.search(words):
        found.add("current")
    if _BUS.search(words):
        found.add("bus")
    return frozenset(found)


def signal_class(text: str | None) -> str | None:
    """Return current, bus, RTD, thermocouple, contact or volts for a signal as written: the first that it says.

    >>> [signal_class(text) for text in ("4-20mA HART", "Pt100", "VFC", "24VDC", "Profibus PA", "pneumatic")]
    ['current', 'RTD', 'contact', 'volts', 'bus', None]
    """
    if not text:
        return None
    classes = _classes(text)
    return next((name for name in _ONE_CLASS if name in classes), None)


def carries_live_zero(text: str | None) -> bool | None:
    """Whether a signal is 4-20 mA; None where its words do not say.

    >>> [carries_live_zero(text) for text in ("4-20mA HART", "0-20 mA", "Pt100", "analogue", "mA", None)]
    [True, False, False, None, None, None]
    """
    return _live_zero(text) if text else None


@lru_cache(maxsize=4096)
def _live_zero(text: str) -> bool | None:
    words = " ".join(text[:LONGEST_WORDS].split())
    if _LIVE_ZERO.search(words) and not _WIRELESS.search(words):
        return True
    classes = _classes(text)
    if not classes:
        return None
    # mA alone names the kind of signal and not its range.
    return None if classes == {"current"} and not re.search(r"\d", words) else False


# ------------------------------------------------------------------------------------------------ inputs, outputs

_PREFIX: Final = r"(?<![^\W\d_])(?:is|sis|esd|fg|f&g|[hsnxf])?[ -]?"
_SUFFIX: Final = r"(?:is|[hsnxipc])?(?![^\W\d_])"
_IN: Final = r"[ -]?(?:in\b|inputs?\b|eing(?:ang|\u00e4nge)?\b)"
_OUT: Final = r"[ -]?(?:out\b|outputs?\b|ausg(?:ang|\u00e4nge)?\b)"
_ANALOGUE: Final = r"analog(?:ue|e|er)?"
_ENTREE: Final = r"(?:entr[e\u00e9]e|entrada)s? "
_SORTIE: Final = r"(?:sortie|salida)s? "
_ANALOGIQUE: Final = r"anal[o\u00f3]gi(?:que|ca)s?\b"
_TOUT_OU_RIEN: Final = r"(?:tor|tout[ -]ou[ -]rien|logiques?|num[e\u00e9]riques?|digital(?:e|es)?)\b"
_BINARY: Final = r"(?:digital(?:e|er)?|discrete|binary|bin[\u00e4a]r(?:e|er)?|status)"
_ENTREE_TOR: Final = rf"^ed$|^e ?tor$|{_ENTREE}{_TOUT_OU_RIEN}"
_SORTIE_TOR: Final = rf"^sd$|^s ?tor$|{_SORTIE}{_TOUT_OU_RIEN}"
# What a resistance thermometer or a thermocouple is wired to is told before the analogue input that it also is.
_IO_WORDS: Final = (
    ("RTD", re.compile(r"\brtd\b|\bpt ?-?100\b|resistance|widerstand", re.IGNORECASE)),
    ("TC", re.compile(r"\btc\b|thermoc|thermoe", re.IGNORECASE)),
    ("PI", re.compile(r"(?<![a-z/])pi(?![a-z])|pulse|frequency|counter|\bhsc\b|impuls|frequenz", re.IGNORECASE)),
    ("AI", re.compile(rf"{_PREFIX}ai{_SUFFIX}|{_ANALOGUE}{_IN}|^ae$|^ea$|{_ENTREE}{_ANALOGIQUE}", re.IGNORECASE)),
    ("AO", re.compile(rf"{_PREFIX}ao{_SUFFIX}|{_ANALOGUE}{_OUT}|^aa$|^sa$|{_SORTIE}{_ANALOGIQUE}", re.IGNORECASE)),
    (
        "DI",
        re.compile(rf"{_PREFIX}[db]i{_SUFFIX}|{_BINARY}{_IN}|^[db]e$|{_ENTREE_TOR}", re.IGNORECASE),
    ),
    (
        "DO",
        re.compile(rf"{_PREFIX}[db]o{_SUFFIX}|{_BINARY}{_OUT}|^[db]a$|{_SORTIE_TOR}", re.IGNORECASE),
    ),
)
_BETWEEN: Final = re.compile(r"[/,+&;|\n]")
_BOTH_WAYS: Final = re.compile(rf"{_BINARY}[ -]?in(?:put)? ?/ ?out", re.IGNORECASE)


def io_types(text: str | None) -> tuple[str, ...]:
    """Return the inputs and outputs that a cell names: AI, AO, DI, DO, RTD, TC or PI (pulses), in its order.

    >>> [io_types(text) for text in ("AI-HART", "DI/DO", "Analog Input", "RTD (AI)", "SDI", "soft", "T/C")]
    [('AI',), ('DI', 'DO'), ('AI',), ('RTD',), ('DI',), (), ('TC',)]
    """
    return _io_types(text) if text else ()


_TITLE_WORDS: Final = re.compile(
    r"(?:(?:a[io]|[db][ieao])[0-9]{0,2}|r[0-9]{1,2}|ae|aa|rtds?|tcs?|pt ?100|thermocouples?|"
    r"analog(?:ue|e|er)?|digital(?:e|er)?|discrete|"
    r"binary|bin\u00e4re?r?|inputs?|outputs?|eing\w{3,5}|ausg\w{3,5}|ais|aos|dis|dos|signals?|lists?|liste|cards?|"
    r"channels?|modules?|points?|io|i/o|plc|dcs|rack|slot|node|schedule|sheet|page|of|no|and|[0-9]{1,3}[a-z]?)\.?",
    re.IGNORECASE,
)


@lru_cache(maxsize=1024)
def io_type_of_title(text: str) -> str | None:
    """Return the one input or output that a title names; None where it names none, several, or something else.

    >>> [io_type_of_title(text) for text in ("AI", "DIGITAL INPUTS - rack 2", "DO List", "Digital scales", "AI-AO")]
    ['AI', 'DI', 'DO', None, None]
    """
    words = re.split(r"[\s,;:()/_-]+", text[:LONGEST_WORDS].strip(" .:-"))
    if not all(_TITLE_WORDS.fullmatch(word) for word in words if word):
        return None
    found = {each for part in (text, *words) for each in io_types(part)}
    return found.pop() if len(found) == 1 else None


@lru_cache(maxsize=4096)
def _io_types(text: str) -> tuple[str, ...]:
    words = " ".join(text[:LONGEST_WORDS].split()).replace("T/C", "TC").replace("t/c", "tc").replace("F&G", "FG")
    if _BOTH_WAYS.search(words):
        return ("DI", "DO")
    found: dict[str, None] = {}
    for part in _BETWEEN.split(words):
        for name, pattern in _IO_WORDS:
            if pattern.search(part.strip()):
                found.setdefault(name)
                break
    return tuple(found)
