"""What the gases that an area names ask for, beside what the area states: temperature class and group, by source.

The area's documents outrank the figures here; where these ask for more, somebody must look.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final, Literal

from instruments.acceptance import GAS_GROUPS_ACCEPTED, Judgement, group_letters, t_class_for_ignition
from instruments.area import Area
from instruments.gas import EDITIONS, INERT, SOURCES, Gas, Source, gas_of, gases_in, source_of
from instruments.marking_entry import T_CODE_C

FROM_MEMORY: Final = "groups of named gases are from memory (IEC 60079-20-1, NEC 500.6)"
_LETTER_ORDER: Final = ("D", "C", "B", "A")  # from the least to the most demanding gas


@dataclass(frozen=True, slots=True, kw_only=True)
class GasAsks:
    """What one named gas asks for in one respect.

    Attributes
    ----------
    gas
        Its name.
    about
        The area's field that is compared.
    outcome
        ``accepted``: it asks for no more than the area states; ``refused``: it asks for more by the source that
        counts; ``review``: by another, or from memory; ``unknown``: no figure is held, or a field is blank.
    asks, states
        The class or group, in few words.
    reason
        The figures with their sources.
    missing
        Of ``unknown``: the field that is missing.
    """

    gas: str
    about: Literal["temperature_class", "gas_group"]
    outcome: Judgement
    asks: str = ""
    states: str = ""
    reason: str = ""
    missing: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class NamedInArea:
    """The gases that an area names.

    Attributes
    ----------
    gases
        Those that are known, inert ones left out.
    unknown
        Those that are not, and ``other gases`` where the text is vague.
    certain
        False where amounts, a mixture or something vague stand in the text: what its parts ask is then for a
        person to weigh.
    """

    gases: tuple[Gas, ...]
    unknown: tuple[str, ...]
    certain: bool


def named_in(area: Area) -> NamedInArea:
    """Return the gases that an area names.

    >>> named = named_in(Area(gas="Methane, hydrogen sulphide, Solvent XY"))
    >>> [gas.name for gas in named.gases], named.unknown, named.certain
    (['methane', 'hydrogen sulfide'], ('solvent xy',), True)
    """
    said = gases_in(area.gas)
    burning = [name for name in said.names if name not in INERT]
    gases = tuple(gas for name in burning if (gas := gas_of(name)) is not None)
    unknown = tuple(name for name in burning if gas_of(name) is None)
    return NamedInArea(
        gases=gases,
        unknown=(*unknown, "other gases") if said.vague else unknown,
        certain=not (said.vague or said.amounts or any(gas.is_mixture for gas in gases)),
    )


def _shown(ignition_c: float) -> str:
    return t_class_for_ignition(ignition_c) or "a surface cooler than T6 has"


def _figure(source: Source, ignition_c: float) -> str:
    return f"{ignition_c:g} degC by {EDITIONS[source]} ({t_class_for_ignition(ignition_c) or 'below what T6 allows'})"


def temperature_asked(gas: Gas, stated: str | None, *, jurisdiction: str | None) -> GasAsks:
    """Compare a gas's auto-ignition temperature with an area's temperature class.

    The surfaces that the class allows must stay below it, strictly (IEC 60079-14:2013 Table 4, from memory); the
    NEC lets them reach it (500.8(A)), and the stricter reading is taken there as well.

    Parameters
    ----------
    gas
        A gas that the area names.
    stated
        The area's T1..T6, in North America T2A..T4A, too.
    jurisdiction
        IEC and ATEX: IEC 60079-20-1 counts; US and Canada: NFPA 497; None: both are asked.

    >>> from instruments.gas import gas_of
    >>> [temperature_asked(gas_of("n-butane"), "T2", jurisdiction=each).outcome for each in ("IEC", "US", None)]
    ['review', 'refused', 'review']
    """
    figures = {source: c for source in SOURCES if (c := gas.ignition_c(source)) is not None}
    reason = ", ".join(_figure(source, c) for source, c in figures.items())
    if stated is None or stated not in T_CODE_C:
        return GasAsks(
            gas=gas.name, about="temperature_class", outcome="unknown", reason=reason, missing="temperature class"
        )
    limit_c = T_CODE_C[stated]
    asks_more = {source: c <= limit_c for source, c in figures.items()}
    own = source_of(jurisdiction)
    counting = [c for source, c in figures.items() if asks_more[source]] or list(figures.values())

    def answer(outcome: Judgement, *, reason: str = reason, ignition_c: float | None = None) -> GasAsks:
        least_c = ignition_c if ignition_c is not None else min(counting, default=None)
        return GasAsks(
            gas=gas.name,
            about="temperature_class",
            outcome=outcome,
            asks=_shown(least_c) if least_c is not None else "",
            states=stated,
            reason=reason,
            missing="gas" if outcome == "unknown" else "",
        )

    if own in asks_more:
        if asks_more[own]:
            reason_c = figures[own]
            note = "; NEC 500.8 lets a surface reach it" if own == "NFPA" and reason_c == limit_c else ""
            return answer("refused", reason=reason + note, ignition_c=reason_c)
        return answer("review" if any(asks_more.values()) else "accepted")
    if own is None and len(asks_more) == len(SOURCES):
        if all(asks_more.values()):
            return answer("refused")
        return answer("review" if any(asks_more.values()) else "accepted")
    if any(asks_more.values()):
        return answer("review", reason=f"{reason}, the only source that lists it")
    return _of_its_parts(gas, stated, jurisdiction) or answer("unknown")


def _of_its_parts(gas: Gas, stated: str, jurisdiction: str | None) -> GasAsks | None:
    """Return what a mixture's parts ask for by the source that counts, where it is more; they clear nothing."""
    for part in map(gas_of, gas.holds):
        asked = temperature_asked(part, stated, jurisdiction=jurisdiction) if part is not None else None
        if asked is not None and asked.outcome == "refused":
            return GasAsks(
                gas=gas.name,
                about="temperature_class",
                outcome="review",
                asks=asked.asks,
                states=stated,
                reason=f"a mixture; its {asked.gas} {asked.reason}",
            )
    return None


def group_asked(gas: Gas, area: Area) -> GasAsks:
    """Compare a gas's group, which is from memory, with an area's: at most a review.

    Parameters
    ----------
    gas
        A gas that the area names.
    area
        The place; its group is one of the zones or a letter of the divisions.

    >>> from instruments.gas import gas_of
    >>> asked = group_asked(gas_of("hydrogen"), Area(gas_group="IIB"))
    >>> asked.outcome, asked.asks, asked.states
    ('review', 'IIC', 'IIB')
    """
    stated = area.gas_group
    letters = group_letters(stated)

    def answer(outcome: Judgement, *, asks: str = "", reason: str = "", missing: str = "") -> GasAsks:
        return GasAsks(
            gas=gas.name,
            about="gas_group",
            outcome=outcome,
            asks=asks,
            states=stated or "",
            reason=reason,
            missing=missing,
        )

    if not stated or not (letters or stated in GAS_GROUPS_ACCEPTED):
        return answer("unknown", missing="gas group")
    needed = gas.nec_group if letters else gas.iec_group
    if needed is None:
        if letters and gas.iec_group == "IIC":
            return answer("review", asks="no letter of the NEC", reason="IIC by IEC 60079-20-1, from memory")
        for part in map(gas_of, gas.holds):
            asked = group_asked(part, area) if part is not None else None
            if asked is not None and asked.outcome == "review":
                return answer("review", asks=asked.asks, reason=f"a mixture; its {asked.gas} {asked.reason}")
        return answer("unknown")
    if letters:
        enough = max(map(_letter_rank, letters)) >= _letter_rank(needed[0])
        exception = f"; {needed[2]} with every conduit sealed" if "/" in needed else ""
        reason = f"group {needed[0]} by NEC 500.6, from memory{exception}"
        return answer("accepted" if enough else "review", asks=needed[0], reason=reason)
    covered = stated == needed or stated in GAS_GROUPS_ACCEPTED[needed]
    covered = covered or (stated == "IIB+H2" and (needed in ("IIA", "IIB") or gas.name == "hydrogen"))
    reason = f"group {needed} by IEC 60079-20-1, from memory"
    return answer("accepted" if covered else "review", asks=needed, reason=reason)


def _letter_rank(letter: str) -> int:
    return _LETTER_ORDER.index(letter) if letter in _LETTER_ORDER else -1


def asked_in(area: Area, gases: Iterable[Gas], *, jurisdiction: str | None) -> tuple[GasAsks, ...]:
    """Return what each of the gases asks for in an area: temperature class, then group."""
    return tuple(
        asked
        for gas in gases
        for asked in (
            temperature_asked(gas, area.temperature_class, jurisdiction=jurisdiction),
            group_asked(gas, area),
        )
    )
