"""Flammable gases by name: which ones a text names, and what the published sources say of each.

Ferrule classifies no area; these figures are shown beside what an area's documents say, and those documents
outrank them.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import lru_cache
from types import MappingProxyType
from typing import Final, Literal

from instruments.gas_table import GAS_ROWS, INERT_WORDS, MIXTURE_ROWS, OTHER_COMPOUNDS, Row
from instruments.marking_text import MAX_LENGTH, normalised

Source = Literal["IEC", "NFPA"]
SOURCES: Final[tuple[Source, ...]] = ("IEC", "NFPA")
EDITIONS: Final[Mapping[Source, str]] = MappingProxyType(
    {"IEC": "IEC 60079-20-1:2010", "NFPA": "NFPA 497 (2008)"}  # later editions may state other figures
)
_SOURCE_OF_JURISDICTION: Final[Mapping[str, Source]] = MappingProxyType(
    {"IEC": "IEC", "ATEX": "IEC", "US": "NFPA", "Canada": "NFPA"}
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Gas:
    """One gas, vapour or mixture that has a name.

    Attributes
    ----------
    name
        In one spelling.
    cas
        Its CAS number; empty for a mixture.
    ignition_iec_c, ignition_nfpa_c
        The auto-ignition temperature in degC by either source; None where that source has none.
    iec_group, nec_group
        IIA, IIB, IIC, and A to D, both from memory; ``B/D`` is B, or D with every conduit sealed (exceptions
        of NEC 500.6(A)); None where none is held.
    holds
        Of a mixture: the gases that it holds, or may hold. Empty where nothing certain is known of it.
    """

    name: str
    cas: str = ""
    ignition_iec_c: float | None = None
    ignition_nfpa_c: float | None = None
    iec_group: str | None = None
    nec_group: str | None = None
    holds: tuple[str, ...] = ()

    def ignition_c(self, source: Source) -> float | None:
        """Return the auto-ignition temperature in degC by one source; None where that has none.

        >>> gas_of("n-butane").ignition_c("IEC"), gas_of("n-butane").ignition_c("NFPA")
        (372.0, 288.0)
        """
        return self.ignition_iec_c if source == "IEC" else self.ignition_nfpa_c

    @property
    def is_mixture(self) -> bool:
        """True where neither source has a figure for it: its composition decides, which a name does not tell."""
        return self.ignition_iec_c is None and self.ignition_nfpa_c is None


def source_of(jurisdiction: str | None) -> Source | None:
    """Return the source that counts: IEC 60079-20-1 under IEC and ATEX, NFPA 497 in the US and Canada.

    >>> source_of("ATEX"), source_of("US"), source_of(None)
    ('IEC', 'NFPA', None)
    """
    return _SOURCE_OF_JURISDICTION.get(jurisdiction or "")


def _words(text: str) -> tuple[str, ...]:
    return tuple(word.strip() for word in text.split(";") if word.strip())


def _gas(row: Row) -> Gas:
    name, cas, iec_c, nfpa_c, iec_group, nec_group, _, holds = row
    return Gas(
        name=name,
        cas=cas,
        ignition_iec_c=None if iec_c is None else float(iec_c),
        ignition_nfpa_c=None if nfpa_c is None else float(nfpa_c),
        iec_group=iec_group,
        nec_group=nec_group,
        holds=holds,
    )


_ROWS: Final = (*GAS_ROWS, *MIXTURE_ROWS)
GASES: Final[Mapping[str, Gas]] = MappingProxyType({row[0]: _gas(row) for row in _ROWS})
GAS_NAMES: Final[Mapping[str, str]] = MappingProxyType(
    {word.casefold(): row[0] for row in _ROWS for word in (row[0], row[1], *_words(row[6])) if word}
)
INERT: Final = frozenset(_words(INERT_WORDS))
OTHER_GASES: Final = "other gases"


def gas_of(name: str) -> Gas | None:
    """Return a gas by the name that `named_gases` gives it; None where it is not known.

    >>> gas_of("hydrogen").iec_group, gas_of("solvent xy")
    ('IIC', None)
    """
    return GASES.get(name)


# What a text names -------------------------------------------------------------------------------------------

_OTHER_NAMES: Final = frozenset(_words(OTHER_COMPOUNDS))
_ANY_NAME: Final = re.compile(
    r"(?<![\w])(?:"
    + "|".join(re.escape(word) for word in sorted({*GAS_NAMES, *INERT, *_OTHER_NAMES}, key=len, reverse=True))
    + r")(?![\w])"
)
_HELD: Final = re.compile("\0(\\d+)\0")
_APART: Final = re.compile(
    r"[,;/+&()|:\n]|\b(?:and|und|et|with|mit|in|mixed|mixture|gemisch|mix|or|oder|containing)\b", re.IGNORECASE
)
_AMOUNT: Final = re.compile(
    r"(?:[<>≤≥~]\s?)?\d+(?:[.,]\d+)?(?:\s?(?:-|to|bis)\s?\d+(?:[.,]\d+)?)?\s?"
    r"(?:(?:vol|mol|wt)[.\s]*-?\s?%|%|ppm[vw]?\b|mg/m3|mg/m³|vol\b)(?:\s?(?:vol|mol|v/v|w/w|wt)\b\.?)?"
    r"|\b(?:traces?|spuren)\b(?:\s+of\b|\s+von\b)?"
)
_NO_GAS: Final = re.compile(
    r"\b(?:gas(?:es)?|gaseous|gasförmig|vapou?rs?|fumes|dampf|dämpfe|daempfe|pure|dry|wet|raw|rein|reiner|roh|liquid|"
    r"of|the|from|technical|anhydrous|approx|ca|max|up to)\b\.?",
    re.IGNORECASE,
)
_MIXTURE: Final = re.compile(r"\b(?:mixed|mixture|gemisch|mix|others?|andere)\b", re.IGNORECASE)
_NOTHING: Final = re.compile(r"[\W_]*")


@dataclass(frozen=True, slots=True, kw_only=True)
class GasText:
    """What a text names.

    Attributes
    ----------
    names
        The gases, each once: those that are known in one spelling, others as written in lower case.
    vague
        True where something else is named beside them or in one breath with them, such as a mixture.
    amounts
        True where amounts are stated: how much of a gas there is decides what it asks for.
    """

    names: tuple[str, ...] = ()
    vague: bool = False
    amounts: bool = False


@lru_cache(maxsize=1024)
def gases_in(text: str | None) -> GasText:
    """Return what a text names, with its amounts left out but told.

    >>> gases_in("CH4 60 %, CO2 40 %")
    GasText(names=('methane', 'carbon dioxide'), vague=False, amounts=True)
    """
    if not text or len(text) > MAX_LENGTH:
        return GasText()
    plain = normalised(text)[0].casefold().replace("\0", " ")
    found: list[str] = []

    def hold(match: re.Match[str]) -> str:
        word = match[0]
        found.append(GAS_NAMES.get(word) or _INERT_NAME.get(word, word))
        return f"\0{len(found) - 1}\0"

    held = _ANY_NAME.sub(hold, plain)
    less = _AMOUNT.sub(" ", held)
    vague = bool(_MIXTURE.search(less))
    names: list[str] = []
    for piece in _APART.split(less):
        inside = [found[int(number)] for number in _HELD.findall(piece)]
        left = " ".join(_NO_GAS.sub(" ", _HELD.sub(" ", piece)).split()).strip(" .-_'*#=")
        if _NOTHING.fullmatch(left):
            names += inside
        elif inside:
            names += inside
            vague = True
        elif not _MIXTURE.search(left):
            names.append(left)
    return GasText(names=tuple(dict.fromkeys(names)), vague=vague, amounts=less != held)


_INERT_NAME: Final[Mapping[str, str]] = MappingProxyType(
    {
        word: name
        for name, words in (
            ("nitrogen", ("n2", "stickstoff", "azote")),
            ("carbon dioxide", ("co2", "kohlendioxid", "kohlenstoffdioxid")),
            ("water", ("h2o", "wasser", "steam", "water vapour", "water vapor", "wasserdampf")),
            ("air", ("luft",)),
            ("argon", ("ar",)),
            ("helium", ("he",)),
            ("inert gas", ("inertgas",)),
        )
        for word in (name, *words)
    }
)


def named_gases(text: str | None) -> tuple[str, ...]:
    """Return the gases that a text names, in one spelling each; unknown ones as written, in lower case.

    A mixture with things unnamed ends in ``other gases``. No mixture is taken for one of its parts.

    >>> named_gases("Wasserstoff"), named_gases("H2 / CH4"), named_gases("H2S")
    (('hydrogen',), ('hydrogen', 'methane'), ('hydrogen sulfide',))
    >>> named_gases("hydrogen rich gas"), named_gases("hydrogen chloride"), named_gases("1,3-Butadiene")
    (('hydrogen', 'other gases'), ('hydrogen chloride',), ('1,3-butadiene',))
    """
    said = gases_in(text)
    return (*said.names, OTHER_GASES) if said.vague else said.names


# Groups of several gases -------------------------------------------------------------------------------------

_IEC_ORDER: Final = ("IIA", "IIB", "IIC")
_NEC_ORDER: Final = ("D", "C", "B", "A")


def iec_group_of(names: Iterable[str]) -> str | None:
    """Return the most demanding group of the named gases by IEC 60079-20-1, from memory; None if one is not held.

    >>> iec_group_of(["methane", "ethanol"]), iec_group_of(["methane", "solvent xy"])
    ('IIB', None)
    """
    groups = [gas.iec_group if (gas := gas_of(name)) else None for name in names if name not in INERT]
    known = [group for group in groups if group]
    return max(known, key=_IEC_ORDER.index) if known and len(known) == len(groups) else None


def nec_group_of(names: Iterable[str]) -> str | None:
    """Return the most demanding group letter of the named gases by NEC 500.6, from memory; None if one is not held.

    Of a gas that an exception lets into another group the stricter letter is taken.

    >>> nec_group_of(["ethanol"]), nec_group_of(["1,3-butadiene"])
    ('D', 'B')
    """
    groups = [gas.nec_group if (gas := gas_of(name)) else None for name in names if name not in INERT]
    known = [group[0] for group in groups if group]
    return max(known, key=_NEC_ORDER.index) if known and len(known) == len(groups) else None
