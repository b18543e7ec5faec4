"""How an instrument is protected, as far as its own row and device type say: its marking, or as simple apparatus."""

from __future__ import annotations

import re
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.marking import Marking, read_marking
from instruments.signal_words import signal_class

_BY_ENERGY: Final = re.compile(r"(?i:intrinsic|eigensich)|\bIS\b|\b(?:E?Ex ?)?i[abc]\b|\bE?Ex ?i\b")
_OTHERWISE: Final = re.compile(
    r"(?i:explosion|flame|dust.?ignition|purge|pressuri[sz]|encapsul|increased|non-?incendive)"
    r"|\bX?P\b|\bNI\b|\bDIP\b|\bE?Ex ?[demnpqot]"
)
# Kinds of which a plain one is a passive element or contact: nothing in it makes or stores energy.
PASSIVE_KINDS: Final = frozenset({Kind.ELEMENT, Kind.SWITCH, Kind.HAND_SWITCH})
# What can be simple apparatus (IEC 60079-11:2011 5.7, from memory), where somebody says so.
_SIMPLE_KINDS: Final = PASSIVE_KINDS | {Kind.JUNCTION_BOX}
# What measures, detects or positions by electronics is no simple apparatus, whatever is said of it.
NEVER_SIMPLE: Final = frozenset(
    {Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR, Kind.POSITIONER}
)
_ELECTRONIC: Final = re.compile(
    r"namur|proximity|\bprox\b|inductive|capacitive|[pn]np|hall\b|m\s?a\b|hart|bus\b", re.IGNORECASE
)


def marking_of(installed: Installed) -> Marking | None:
    """Return the Ex marking; where that is blank, the type of protection if it holds a whole marking."""
    if installed.marking is not None or not installed.record.protection:
        return installed.marking
    beside = read_marking(installed.record.protection)
    return beside if beside.readable and beside.standing() else None


def says_intrinsically_safe(text: str) -> bool | None:
    """Whether words say intrinsic safety; None where they say nothing of it, or another protection beside it.

    >>> [says_intrinsically_safe(text) for text in ("IS", "XP", "IS / XP", "Ex ia", "sealed")]
    [True, False, None, True, None]
    """
    by_energy, otherwise = bool(_BY_ENERGY.search(text)), bool(_OTHERWISE.search(text))
    return None if by_energy == otherwise else by_energy


def intrinsically_safe(installed: Installed) -> bool | None:
    """Whether the type of protection says intrinsic safety; None where it says nothing, or both."""
    text = installed.record.protection
    return says_intrinsically_safe(text) if text else None


def signal_of(installed: Installed) -> str:
    """Return the signal that its row states, else its device type; empty where neither does."""
    device = installed.type
    return installed.record.signal or (device.signal if device is not None else None) or ""


def is_passive(installed: Installed) -> bool:
    """Whether it is a passive element, as far as its row says: an RTD, a thermocouple or a contact."""
    kind, signal = installed.kind, signal_of(installed)
    if kind not in PASSIVE_KINDS or _ELECTRONIC.search(signal):
        return False
    if kind is not Kind.ELEMENT:
        return True
    device = installed.type
    return (
        installed.letters[:1] == "T"
        or signal_class(signal) in ("RTD", "thermocouple", "contact")
        or (device is not None and device.sensor_type is not None)
    )


def is_simple_apparatus(installed: Installed) -> bool:
    """Whether it is stated to be simple apparatus and can be: no electronics, nothing that it transmits."""
    return (
        installed.record.simple_apparatus is True
        and installed.kind in _SIMPLE_KINDS
        and not _ELECTRONIC.search(signal_of(installed))
    )
