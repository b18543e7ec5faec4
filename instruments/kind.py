"""The kind of one instrument: which letters bear it, and what its words and its letters together say."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from instruments.kind_table import VALVES, Electrical, Kind, Measures, Wired
from instruments.kind_words import kinds_of_words
from instruments.letters import KKS_FIRST, USERS_CHOICE, LettersReading, is_usual, read_letters
from instruments.measured_variable import dimension_allowed, measured_variable
from instruments.plant_codes import CODES, PlantCode, code_for

__all__ = [
    "VALVES",
    "Electrical",
    "Kind",
    "KindReading",
    "Measures",
    "Wired",
    "can_bear",
    "code_kind",
    "derive_kind",
    "dimension_allowed",
    "kind_from_words",
    "kinds_from_words",
    "letters_for_kind",
    "measured_variable",
    "read_kind",
    "touches_process",
]

# ------------------------------------------------------------------------------------ letters to kinds

#: First letters whose switches and transmitters sit on a valve or a drive, not on a line.
_NOT_ON_A_LINE: Final = frozenset("ZXYHEIJKUB")
_ELECTRICAL_FIRST: Final = frozenset("EIJSKVZXYHUB")
_VALVE_DRIVES: Final = frozenset("XHUZYKE")


def touches_process(kind: Kind, letters: str = "") -> bool:
    """Whether a line or a piece of equipment is asked for: not for what sits on a valve or a drive.

    >>> touches_process(Kind.SWITCH, "PSHH"), touches_process(Kind.SWITCH, "ZSO")
    (True, False)
    """
    if not kind.process:
        return False
    # A valve is on a line whatever its first letter.
    return kind in VALVES or letters[:1] not in _NOT_ON_A_LINE


@lru_cache(maxsize=1024)
def _code_kind(kind: str, letters: str | None) -> Kind | None:
    known = kinds_from_words(kind) if kind else ()
    if known:
        return known[0]
    return derive_kind(letters) if letters else None


def code_kind(code: PlantCode) -> Kind | None:
    """The kind that a plant code names; None where its words are not understood.

    >>> code_kind(CODES["SDV"])
    <Kind.ON_OFF_VALVE: 'on/off valve'>
    """
    return _code_kind(code.kind, code.letters)


def derive_kind(
    letters: str,
    *,
    has_signal: bool | None = None,
    location: str | None = None,
    suffix: str = "",
    codes: Mapping[str, PlantCode] = CODES,
    scheme: str = "isa",
    measuring_point: bool = False,
    transmitter_in_loop: bool = False,
) -> Kind | None:
    """The kind that letters usually bear; None where they bear none for certain.

    Parameters
    ----------
    letters
        The letters of the tag.
    has_signal
        Whether the row has a signal, I/O or card of its own; None where the list cannot say.
    location
        field, panel, cabinet, control room or system; None where blank.
    suffix
        The tag's suffix; it decides nothing and is taken so that a reading's parts can be handed over whole.
    measuring_point
        No row of the loop bears T or E, and this one stands for the measurement (older European practice).
    transmitter_in_loop
        Another row of the loop is its transmitter, so that an indication without place is the system's.

    Examples
    --------
    >>> [derive_kind(x).value for x in ("PDIT", "AIT", "TE", "FE", "ZSO", "PSV", "XV", "FIC")]
    ['transmitter', 'analyser', 'element', 'primary element', 'switch', 'relief valve', 'on/off valve',
     'soft function']
    >>> derive_kind("PCV", has_signal=False).value, derive_kind("PCV", has_signal=True).value
    ('self-acting regulator', 'control valve')
    """
    if scheme == "kks":
        return _derive_kks(letters, has_signal=has_signal)
    code = code_for(letters, codes)
    if code is not None:
        if not code.kind and code.letters:
            letters = code.letters
        else:
            return code_kind(code)
    return _derive(letters, has_signal, location, measuring_point, transmitter_in_loop)


def _derive_kks(letters: str, *, has_signal: bool | None) -> Kind | None:
    if letters in KKS_FIRST:
        if letters == "CQ":
            return Kind.ANALYSER
        return Kind.GAUGE if has_signal is False else Kind.TRANSMITTER
    return {"AA": Kind.ON_OFF_VALVE, "BP": Kind.PRIMARY_ELEMENT}.get(letters)


@lru_cache(maxsize=32768)
def _derive(
    letters: str,
    has_signal: bool | None,
    location: str | None,
    measuring_point: bool,
    transmitter_in_loop: bool,
) -> Kind | None:
    reading = read_letters(letters, users_letters=USERS_CHOICE)
    functions = _function_set(reading)
    if not functions:
        return None
    first = reading.first
    in_system = location in ("system", "control room")
    placed = location in ("field", "panel", "cabinet")
    if "V" in functions:
        return _derive_valve(reading, has_signal)
    if "E" in functions and "S" in reading.modifier:
        return Kind.RUPTURE_DISC
    if "T" in functions:
        return Kind.ANALYSER if first == "A" else Kind.TRANSMITTER
    if "E" in functions:
        return Kind.PRIMARY_ELEMENT if first == "F" and not has_signal else Kind.ELEMENT
    if functions & set("WO"):
        return Kind.PRIMARY_ELEMENT
    if "S" in functions:
        if first == "H":
            return Kind.HAND_SWITCH
        return Kind.SOFT_FUNCTION if in_system else Kind.SWITCH
    if "G" in functions:
        return Kind.GLASS if first in "LF" else Kind.GAUGE
    if "Z" in functions:
        return Kind.ON_OFF_VALVE if first in _VALVE_DRIVES else Kind.CONTROL_VALVE
    if "Y" in functions:
        if in_system or (has_signal is False and not placed and first not in _VALVE_DRIVES):
            return Kind.SOFT_FUNCTION
        return Kind.SOLENOID if first in _VALVE_DRIVES else Kind.IP_CONVERTER
    if "L" in functions:
        return Kind.SOFT_FUNCTION if location == "system" else Kind.LAMP
    if measuring_point and has_signal and functions & set("IRCA"):
        return Kind.ANALYSER if first == "A" else Kind.TRANSMITTER
    if functions & set("CK"):
        return Kind.INDICATOR if placed and has_signal else Kind.SOFT_FUNCTION
    if functions == {"A"}:
        sounds = has_signal and (placed or first in "XYU") and not in_system
        return Kind.SOUNDER if sounds else Kind.SOFT_FUNCTION
    if functions & set("IRQJA"):
        return _derive_indication(first, functions, has_signal, location, transmitter_in_loop)
    if functions == {"P"}:
        return Kind.PRIMARY_ELEMENT
    return Kind.SOFT_FUNCTION if in_system else None


def _function_set(reading: LettersReading) -> frozenset[str]:
    """The function letters; of illegal letters those that it holds in whatever order."""
    if reading.legal != "illegal":
        return reading.function_letters
    if len(reading.letters) < 3:
        return frozenset()
    return frozenset(reading.letters[1:]) & frozenset("TEVSGYCIRWQA")


def _derive_valve(reading: LettersReading, has_signal: bool | None) -> Kind | None:
    first, functions = reading.first, reading.function_letters
    if "S" in reading.modifier or reading.letters in ("PRV", "TRV"):
        return Kind.RELIEF_VALVE
    if first == "S" and reading.functions == ("V",):
        # SV is speed and valve by the letters; plants mean a solenoid valve, or a safety valve.
        return Kind.SOLENOID if has_signal else None
    if first == "H" and "C" not in functions:
        return Kind.ON_OFF_VALVE if has_signal else Kind.MANUAL_VALVE
    if "O" in functions or "Z" in reading.modifier:
        # AOV, HOV: a letter and O for 'operated'. UZV, PZV: the valve of a safety system.
        return Kind.ON_OFF_VALVE
    if first in "XUKYZEBV":
        return Kind.CONTROL_VALVE if "C" in functions else Kind.ON_OFF_VALVE
    if first in USERS_CHOICE:
        return Kind.CONTROL_VALVE if "C" in functions else None
    if "C" in functions and has_signal is False:
        return Kind.CONTROL_VALVE if first == "H" else Kind.REGULATOR
    return Kind.CONTROL_VALVE


def _derive_indication(
    first: str,
    functions: frozenset[str],
    has_signal: bool | None,
    location: str | None,
    transmitter_in_loop: bool,
) -> Kind:
    if location in ("system", "control room"):
        return Kind.SOFT_FUNCTION
    if location in ("panel", "cabinet"):
        return Kind.INDICATOR
    if transmitter_in_loop and location is None:
        return Kind.SOFT_FUNCTION
    if has_signal or (first in _ELECTRICAL_FIRST and location == "field"):
        return Kind.INDICATOR
    if first in _ELECTRICAL_FIRST:
        return Kind.SOFT_FUNCTION
    if "I" in functions or location == "field":
        return Kind.GAUGE
    return Kind.SOFT_FUNCTION


# ------------------------------------------------------------------------------------ kinds to letters

_MEASURING_POINT: Final = frozenset("IRCAQ")


def can_bear(
    kind: Kind,
    letters: str,
    *,
    codes: Mapping[str, PlantCode] = CODES,
    scheme: str = "isa",
    measuring_point: bool | None = None,
) -> bool | None:
    """Whether letters can bear a kind; None where practice differs and nothing is said.

    Parameters
    ----------
    kind
        The kind that the list states.
    letters
        The letters of its tag.
    measuring_point
        Whether the tag names its loop's measuring point (no row of the loop bears T or E), where known.

    Examples
    --------
    >>> can_bear(Kind.GAUGE, "PT"), can_bear(Kind.TRANSMITTER, "PDIT"), can_bear(Kind.TRANSMITTER, "PI")
    (False, True, None)
    """
    if scheme != "isa" and scheme != "area":
        return None
    code = code_for(letters, codes)
    if code is not None:
        return _code_can_bear(kind, code)
    return _can_bear(kind, letters, measuring_point)


_RELATED: Final = (
    {Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.MANUAL_VALVE, Kind.SOLENOID},
    {Kind.RELIEF_VALVE, Kind.RUPTURE_DISC, Kind.REGULATOR},
    {Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR, Kind.TRANSMITTER, Kind.ANALYSER, Kind.ELEMENT},
    {Kind.SWITCH, Kind.HAND_SWITCH},
    {Kind.GAUGE, Kind.GLASS, Kind.INDICATOR},
    {Kind.BARRIER, Kind.ISOLATOR, Kind.CARD, Kind.POWER_SUPPLY},
    {Kind.JUNCTION_BOX, Kind.PANEL},
    {Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID},
    {Kind.LAMP, Kind.SOUNDER},
)


def _code_can_bear(kind: Kind, code: PlantCode) -> bool | None:
    own = code_kind(code)
    if own is None or kind is own:
        return None if own is None else True
    if code.letters:
        by_letters = _can_bear(kind, code.letters, None)
        if by_letters is not False:
            return by_letters
    return None if any(kind in group and own in group for group in _RELATED) else False


@lru_cache(maxsize=16384)
def _can_bear(kind: Kind, letters: str, measuring_point: bool | None) -> bool | None:
    reading = read_letters(letters, users_letters=USERS_CHOICE)
    if reading.legal == "illegal":
        return None
    if kind in _derivable(letters):
        return True
    said = _BEARS[kind](reading, reading.function_letters, reading.first, measuring_point)
    # A user's choice (GAS, Drive, ...) and user's or unclassified functions may mean anything.
    if said is False and (reading.first in USERS_CHOICE or reading.function_letters & set("XUBNJ")):
        return None
    return said


@lru_cache(maxsize=4096)
def _derivable(letters: str) -> frozenset[Kind | None]:
    """Every kind that the letters bear in one place or another."""
    return frozenset(
        _derive(letters, has_signal, location, False, False)
        for has_signal in (True, False, None)
        for location in (None, "field", "panel", "system")
    )


def _is_point(reading: LettersReading, measuring_point: bool | None) -> bool | None:
    """What may be said of a transmitter, element or switch under I, R, C, A or Q without T and E."""
    if reading.function_letters & set("TEVSGYWO") or not reading.function_letters & _MEASURING_POINT:
        return False
    return measuring_point


def _bears_transmitter(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "T" in f:
        return True
    if f & set("YK"):
        return False if first in _VALVE_DRIVES else None
    # A gas or flame detector's head is called element and transmitter alike.
    if "E" in f and first in "ABXY":
        return None
    return _is_point(r, point)


def _bears_analyser(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if first in "PTFSVWZEIJKH":
        return False
    if f & set("TE"):
        return True if first == "A" else None
    if "S" in f:
        return None
    return _is_point(r, point)


def _bears_gas(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if first in "PTFLWVSZ" or f & set("VGWO"):
        return False
    return True if first == "A" and f & set("TE") else None


def _bears_fire(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if first in "PLWVSZ" or f & set("VGWO"):
        return False
    # Heat is detected by temperature; an F may be fire.
    return False if first in "TF" and not f & set("SEA") and first == "T" else None


def _bears_element(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "E" in f:
        return "S" not in r.modifier
    if "T" in f:
        # Vibration, speed, position, weight and analysis heads are called by the transmitter's letters.
        return None if first in "VSZWAXB" else False
    if "S" in f:
        return None
    return _is_point(r, point)


def _bears_primary(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if f & set("WOP"):
        return True
    if "E" in f and "S" not in r.modifier:
        return False if first == "T" else None
    if f & set("TVSGY"):
        return False
    return None if f & _MEASURING_POINT and first == "F" else False


def _bears_switch(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "S" in f:
        return None if first == "H" else True
    if f & set("VGWOT"):
        return False
    if "E" in f:
        return None if first in "LZBVSXYA" else False
    if "Y" in f:
        return None if first in "ZXHY" else False
    if "A" in f or ("L" in f and first in "ZXYH"):
        return None
    if f & set("I") and first in "ZXYHS":
        return None
    return False


def _bears_hand_switch(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if first == "H":
        return not f & set("VT")
    return None if first in "XYKUE" and not f & set("VTEG") else False


def _bears_lamp(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if f & set("LA"):
        return True
    # A push button may be lit.
    return None if first in "XYUHZK" and not f & set("VTE") and (first == "H" or "S" not in f) else False


def _bears_sounder(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "A" in f:
        return True
    return None if first in "XYUHK" and not f & set("VTE") else False


def _bears_indicator(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "T" in f or "S" in f:
        return None if "I" in f else False
    if f & set("VEGWO"):
        return False
    if f & set("IRQCK"):
        return True
    return None if "L" in f or "A" in f or "Y" in f else False


def _bears_gauge(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "G" in f:
        return True
    if "T" in f or f & set("VEYWOL"):
        return False
    if "S" in f:
        return None if "I" in f else False
    if "I" in f:
        return None if f & set("CA") else True
    return None if f & set("RQP") else False


def _bears_glass(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "G" in f:
        return True if first in "LF" else None
    if "T" in f or f & set("VEYWOS"):
        return False
    return None if "I" in f else False


def _bears_positioner(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "Y" in f:
        return True
    if "S" in r.modifier:
        return False
    if "V" in f or "Z" in f or (first in "ZH" and "C" in f):
        return None
    return False


def _bears_solenoid(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "Y" in f:
        return True
    if "S" in r.modifier:
        return False
    if "V" in f or (first in _VALVE_DRIVES and not f & set("TEGISLA")):
        return None
    return False


def _bears_driven_valve(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "S" in r.modifier and f & set("VE"):
        return False
    if f & set("VZ"):
        # Owners differ: FV for on/off valves in batch plants, XV for any valve.
        return None
    return False


def _bears_relief(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "V" not in f:
        return False
    if "S" in r.modifier:
        return True
    return False if first in "XHFLZ" and "C" not in f else None


def _bears_disc(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "E" in f and first in "PXU":
        return None
    return False


def _bears_regulator(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "S" in r.modifier:
        return False
    if "V" in f:
        return True if "C" in f else (None if first in "PTLFBK" else False)
    return None if "C" in f and first in "PTLF" and "T" not in f else False


def _bears_soft(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if f & set("IRCAQKLY") and not f & set("TEVGWO"):
        return True
    if f & set("VEGWO"):
        return False
    return (None if "C" in f else False) if "T" in f else None


def _bears_cabinet(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    if "Y" in f:
        return True
    return False if f & set("TEVGS") else None


def _bears_box(r: LettersReading, f: frozenset[str], first: str, point: bool | None) -> bool | None:
    # LP and CP are panels as often as letters.
    return None if f == {"P"} or not f & set("TEVGSIWOQYRCAK") else False


_BEARS: Final = {
    Kind.TRANSMITTER: _bears_transmitter,
    Kind.ANALYSER: _bears_analyser,
    Kind.GAS_DETECTOR: _bears_gas,
    Kind.FIRE_DETECTOR: _bears_fire,
    Kind.ELEMENT: _bears_element,
    Kind.PRIMARY_ELEMENT: _bears_primary,
    Kind.SWITCH: _bears_switch,
    Kind.INDICATOR: _bears_indicator,
    Kind.GAUGE: _bears_gauge,
    Kind.GLASS: _bears_glass,
    Kind.POSITIONER: _bears_positioner,
    Kind.IP_CONVERTER: _bears_positioner,
    Kind.SOLENOID: _bears_solenoid,
    Kind.CONTROL_VALVE: _bears_driven_valve,
    Kind.ON_OFF_VALVE: _bears_driven_valve,
    Kind.MANUAL_VALVE: _bears_driven_valve,
    Kind.RELIEF_VALVE: _bears_relief,
    Kind.RUPTURE_DISC: _bears_disc,
    Kind.REGULATOR: _bears_regulator,
    Kind.HAND_SWITCH: _bears_hand_switch,
    Kind.LAMP: _bears_lamp,
    Kind.SOUNDER: _bears_sounder,
    Kind.BARRIER: _bears_cabinet,
    Kind.ISOLATOR: _bears_cabinet,
    Kind.CARD: _bears_cabinet,
    Kind.POWER_SUPPLY: _bears_cabinet,
    Kind.JUNCTION_BOX: _bears_box,
    Kind.PANEL: _bears_box,
    Kind.SOFT_FUNCTION: _bears_soft,
}

_USUAL_LETTERS: Final[Mapping[Kind, tuple[str, ...]]] = {
    Kind.TRANSMITTER: ("T", "IT"),
    Kind.ANALYSER: ("T", "IT"),
    Kind.GAS_DETECTOR: ("T", "IT"),
    Kind.FIRE_DETECTOR: ("E",),
    Kind.ELEMENT: ("E",),
    Kind.PRIMARY_ELEMENT: ("E", "W", "O"),
    Kind.SWITCH: ("S", "SH", "SL"),
    Kind.INDICATOR: ("I",),
    Kind.GAUGE: ("G", "I"),
    Kind.GLASS: ("G",),
    Kind.POSITIONER: ("Y",),
    Kind.IP_CONVERTER: ("Y",),
    Kind.SOLENOID: ("Y",),
    Kind.CONTROL_VALVE: ("V", "CV"),
    Kind.ON_OFF_VALVE: ("V",),
    Kind.MANUAL_VALVE: ("V",),
    Kind.RELIEF_VALVE: ("SV",),
    Kind.RUPTURE_DISC: ("SE",),
    Kind.REGULATOR: ("CV",),
    Kind.HAND_SWITCH: ("S",),
    Kind.LAMP: ("L",),
    Kind.SOUNDER: ("A",),
    Kind.SOFT_FUNCTION: ("I", "IC", "A"),
}
_FIXED_FIRST: Final = {
    Kind.ON_OFF_VALVE: "X",
    Kind.SOLENOID: "X",
    Kind.HAND_SWITCH: "H",
    Kind.MANUAL_VALVE: "H",
}


def letters_for_kind(kind: Kind, letters: str, *, codes: Mapping[str, PlantCode] = CODES) -> tuple[str, ...]:
    """Letters for a kind with the measured variable of a tag that cannot bear it, the usual ones first.

    >>> letters_for_kind(Kind.GAUGE, "PDT"), letters_for_kind(Kind.CONTROL_VALVE, "FT")
    (('PDG', 'PDI'), ('FV', 'FCV'))
    """
    code = code_for(letters, codes)
    if code is not None:
        letters = code.letters or letters
    reading = read_letters(letters, users_letters=USERS_CHOICE)
    modifier = "".join(m for m in reading.modifier if m not in "SZ")
    if kind in (Kind.RELIEF_VALVE, Kind.RUPTURE_DISC, Kind.ON_OFF_VALVE, Kind.SOLENOID, Kind.HAND_SWITCH):
        modifier = ""
    head = _FIXED_FIRST.get(kind, reading.first) + modifier
    if kind in (Kind.JUNCTION_BOX, Kind.PANEL):
        return ("JB",) if kind is Kind.JUNCTION_BOX else ()
    found = [f"{head}{body}" for body in _USUAL_LETTERS.get(kind, ())]
    return tuple(f for f in found if read_letters(f).legal == "legal" and can_bear(kind, f) is not False)


# ------------------------------------------------------------------------------------- words for kinds


@dataclass(frozen=True, slots=True, kw_only=True)
class KindReading:
    """The kind of one row: ``stated`` if the list's words gave it, else derived from the letters.

    ``candidates`` are all kinds that the words may mean; ``words_known`` is False where there were words and
    none was understood.
    """

    kind: Kind | None
    stated: bool
    candidates: tuple[Kind, ...] = ()
    words_known: bool = True


def read_kind(
    text: str | None,
    *,
    letters: str = "",
    has_signal: bool | None = None,
    location: str | None = None,
    codes: Mapping[str, PlantCode] = CODES,
    scheme: str = "isa",
    measuring_point: bool = False,
    transmitter_in_loop: bool = False,
) -> KindReading:
    """The kind of one row from its words and its letters.

    Words often leave open which kind is meant: a flowmeter may be transmitter, element or gauge, an indicator
    a dial or a function of the system. Then the letters choose among those that the words can mean; where
    none of them goes with the letters, the words stand, and the disagreement is for a rule to find.

    >>> read_kind("Electromagnetic flowmeter", letters="FE").kind
    <Kind.ELEMENT: 'element'>
    >>> read_kind("Pressure gauge", letters="PT").kind
    <Kind.GAUGE: 'gauge'>
    """
    derived = (
        derive_kind(
            letters,
            has_signal=has_signal,
            location=location,
            codes=codes,
            scheme=scheme,
            measuring_point=measuring_point,
            transmitter_in_loop=transmitter_in_loop,
        )
        if letters
        else None
    )
    if text is None or not text.strip():
        return KindReading(kind=derived, stated=False)
    candidates = kinds_from_words(text)
    if not candidates:
        return KindReading(kind=derived, stated=False, words_known=False)
    kind = candidates[0]
    if derived in candidates:
        kind = derived
    elif letters:
        for wanted in (True, None):
            for candidate in candidates:
                bears = can_bear(candidate, letters, codes=codes, scheme=scheme, measuring_point=measuring_point)
                if bears is not wanted:
                    continue
                if bears is None and candidate is Kind.INDICATOR and derived is not None:
                    # 'Flow indicator' beside FIT: the device that indicates is the transmitter.
                    candidate = derived
                return KindReading(kind=candidate, stated=True, candidates=candidates)
    return KindReading(kind=kind, stated=True, candidates=candidates)


def kind_from_words(text: str, *, letters: str = "") -> Kind | None:
    """The kind that words name, in English, German, and the usual ones of French, Spanish, Dutch; or None.

    >>> [kind_from_words(t).value for t in ("dp transmitter", "Regelventil", "Pt100 3-wire", "I/O card")]
    ['transmitter', 'control valve', 'element', 'card']
    """
    return read_kind(text, letters=letters).kind if letters else next(iter(kinds_from_words(text)), None)


@lru_cache(maxsize=16384)
def kinds_from_words(text: str) -> tuple[Kind, ...]:
    """All kinds that words may mean, the likeliest first; empty where they name none.

    >>> [k.value for k in kinds_from_words("sight glass")], [k.value for k in kinds_from_words("LSHH")]
    (['glass', 'gauge', 'indicator'], ['switch'])
    """
    return kinds_of_words(text) or _from_letters(text.strip())


def _from_letters(text: str) -> tuple[Kind, ...]:
    """A kind column that holds letters: PT, LSHH, SDV."""
    letters = text.replace(".", "").upper()
    if not re.fullmatch("[A-Z]{2,5}", letters) or letters in ("AI", "AO", "DI", "DO", "PI DO"):
        return ()
    if code_for(letters) is None and not is_usual(letters):
        return ()
    kind = derive_kind(letters)
    return (kind,) if kind else ()
