"""Equipment protection levels: what a zone accepts, and what a type of protection allows if none is marked.

Clause and table numbers of the IEC 60079 series are from memory of the named editions; a competent person
checks them against the bought standard.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final, Literal

Side = Literal["gas", "dust", "mines"]

SIDE_OF_LETTER: Final[Mapping[str, Side]] = MappingProxyType({"G": "gas", "D": "dust", "M": "mines"})
LETTER_OF_SIDE: Final[Mapping[Side, str]] = MappingProxyType({"gas": "G", "dust": "D", "mines": "M"})
LEVELS: Final = ("a", "b", "c")  # from the strongest to the weakest

# IEC 60079-14:2013 Table 1 (from memory); 1999/92/EC Annex II B gives the same by category.
EPLS_IN_ZONE: Final[Mapping[str, frozenset[str]]] = MappingProxyType(
    {
        "0": frozenset({"Ga"}),
        "1": frozenset({"Ga", "Gb"}),
        "2": frozenset({"Ga", "Gb", "Gc"}),
        "20": frozenset({"Da"}),
        "21": frozenset({"Da", "Db"}),
        "22": frozenset({"Da", "Db", "Dc"}),
    }
)


@dataclass(frozen=True, slots=True)
class Protection:
    """What one type of protection allows without a marked EPL; None: it is not for that atmosphere."""

    gas: str | None = None
    dust: str | None = None
    mines: str | None = None


def _level(level: str, *sides: Side) -> Protection:
    return Protection(**{side: LETTER_OF_SIDE[side] + level for side in sides})


# IEC 60079-14:2013 Table 2 and the product standards (from memory). A symbol of an older edition, without a
# level letter, takes the level that its edition meant.
PROTECTIONS: Final[Mapping[str, Protection]] = MappingProxyType(
    {
        # IEC 60079-11
        "ia": _level("a", "gas", "dust", "mines"),
        "ib": _level("b", "gas", "dust", "mines"),
        "ic": _level("c", "gas", "dust"),
        # IEC 60079-1
        "da": _level("a", "gas", "mines"),
        "db": _level("b", "gas", "mines"),
        "d": _level("b", "gas", "mines"),
        "dc": _level("c", "gas"),
        # IEC 60079-7
        "eb": _level("b", "gas", "mines"),
        "e": _level("b", "gas", "mines"),
        "ec": _level("c", "gas"),
        # IEC 60079-18; its old m without a letter counts as mb
        "ma": _level("a", "gas", "dust", "mines"),
        "mb": _level("b", "gas", "dust", "mines"),
        "m": _level("b", "gas", "dust", "mines"),
        "mc": _level("c", "gas", "dust"),
        # IEC 60079-15; a bare n is older still
        **{symbol: _level("c", "gas") for symbol in ("n", "nA", "nC", "nR", "nL", "nP")},
        **{symbol: _level("c", "gas") for symbol in ("nAc", "nCc", "nRc", "nLc")},
        # IEC 60079-6
        "ob": _level("b", "gas"),
        "o": _level("b", "gas"),
        "oc": _level("c", "gas"),
        # IEC 60079-2
        **{symbol: _level("b", "gas", "dust") for symbol in ("pxb", "pyb", "px", "py", "p")},
        **{symbol: _level("c", "gas", "dust") for symbol in ("pzc", "pz")},
        # IEC 60079-5
        "q": _level("b", "gas", "mines"),
        "qb": _level("b", "gas", "mines"),
        # IEC 60079-31
        "ta": _level("a", "dust"),
        "tb": _level("b", "dust"),
        "tc": _level("c", "dust"),
        # IEC 60079-33
        "sa": _level("a", "gas", "dust"),
        "sb": _level("b", "gas", "dust"),
        "sc": _level("c", "gas", "dust"),
        # IEC 61241, withdrawn; a zone behind the symbol may lower it
        "iaD": _level("a", "dust"),
        "ibD": _level("b", "dust"),
        "icD": _level("c", "dust"),
        "maD": _level("a", "dust"),
        "mbD": _level("b", "dust"),
        "mcD": _level("c", "dust"),
    }
)
# IEC 60079-28, ISO 80079-36, the old special protection, t of IEC 60079-31:2008 and the IEC 61241 symbols
# whose level is the zone behind them: only a marked EPL (or that zone) tells.
UNDERIVABLE: Final = frozenset({"op is", "op pr", "op sh", "h", "s", "t", "tD", "pD"})
DUST_SERIES: Final = frozenset({"iaD", "ibD", "icD", "maD", "mbD", "mcD", "tD", "pD"})  # IEC 61241
DUST_ZONE_EPL: Final[Mapping[str, str]] = MappingProxyType({"20": "Da", "21": "Db", "22": "Dc"})


def weakest(epls: Iterable[str]) -> str:
    """Return the weakest of some EPLs of one letter.

    >>> weakest(["Ga", "Gb"])
    'Gb'
    """
    return max(epls, key=lambda epl: LEVELS.index(epl[1]))


def strongest(epls: Iterable[str]) -> str:
    """Return the strongest of some EPLs of one letter."""
    return min(epls, key=lambda epl: LEVELS.index(epl[1]))


def stronger(epl: str, other: str) -> bool:
    """Say whether one EPL is stronger than another of the same letter."""
    return LEVELS.index(epl[1]) < LEVELS.index(other[1])


def protection_epl(protection: str, *, side: Side) -> str | None:
    """Return the EPL that one protection allows in gas, dust or mines; None where it cannot be derived.

    Parameters
    ----------
    protection
        The symbol as marked, such as ``db``, ``op is``, ``tD A21``.
    side
        The atmosphere meant.

    Returns
    -------
    str or None
        ``Ga``...``Mb``; an empty text where the protection is not for that atmosphere at all; None for
        symbols that only a marked EPL explains (IEC 60079-14:2013 Table 2, from memory).

    >>> protection_epl("db", side="gas"), protection_epl("db", side="dust"), protection_epl("h", side="gas")
    ('Gb', '', None)
    >>> protection_epl("tD A21", side="dust"), protection_epl("iaD 21", side="dust")
    ('Db', 'Db')
    """
    symbol, _, zone = protection.partition(" ")
    if protection in UNDERIVABLE or (symbol in UNDERIVABLE and not zone):
        return None
    if symbol in DUST_SERIES and zone:
        if side != "dust":
            return ""
        by_zone = DUST_ZONE_EPL[zone[-2:]]
        own = PROTECTIONS[symbol].dust if symbol in PROTECTIONS else None
        return by_zone if own is None else weakest([by_zone, own])
    known = PROTECTIONS.get(protection)
    if known is None:
        return None
    return {"gas": known.gas, "dust": known.dust, "mines": known.mines}[side] or ""


def derived_epl(protections: Iterable[str], *, side: Side) -> str | None:
    """Return the EPL that follows from the protections alone: the weakest of them, or None.

    A derived EPL is an assumption, never a marked fact. Ga out of two independent Gb types
    (IEC 60079-26) is never inferred.

    >>> derived_epl(["d", "ia"], side="gas"), derived_epl(["op is"], side="gas"), derived_epl([], side="gas")
    ('Gb', None, None)
    """
    allowed = [protection_epl(protection, side=side) for protection in protections]
    if not allowed or not all(allowed):
        return None
    return weakest(epl for epl in allowed if epl)
