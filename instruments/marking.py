"""Explosion-protection markings: what a text says that may hold several, and how it is shown.

What is accepted where is not decided here (`instruments.acceptance`), only what is written.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from instruments.certificate import Certificate
from instruments.epl import Side
from instruments.marking_entry import T_CODE_C, Contradiction, MarkingEntry, Output, division_text
from instruments.marking_grammar import RecordReader
from instruments.marking_text import MAX_LENGTH, UnreadableMarking, normalised

NONE_STATED: Final = re.compile(
    r"(?:none|nil|no|nein|non[\s-]?ex|not[\s-]ex|no[\s-]ex|nicht[\s-]ex|kein[\s-]ex(?:-?schutz)?|ohne(?:[\s-]ex(?:-?schutz)?)?"
    r"|general[\s-]purpose|ordinary location|uncertified|not certified|weather[\s-]?proof)\.?",
    re.IGNORECASE,
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Marking:
    """An explosion-protection marking as read.

    Attributes
    ----------
    text
        What was written, untouched.
    entries
        The markings in the text, in order; empty where it cannot be read.
    certificates, ip
        Certificate numbers and IP codes that stand in the same text.
    marked_x
        True where an X stands behind the marking or a certificate: conditions of use exist.
    flags
        How the text had to be bent to be read: ``case_repaired``, ``look_alike`` (letters that only look
        Latin), ``temperature_unit_missing``.
    problem
        Why it cannot be read; None where it can.
    none_stated
        True where the text says that there is no protection (non-Ex, none).
    """

    text: str
    entries: tuple[MarkingEntry, ...] = ()
    certificates: tuple[Certificate, ...] = ()
    ip: tuple[str, ...] = ()
    marked_x: bool = False
    flags: tuple[str, ...] = ()
    problem: str | None = None
    none_stated: bool = False

    @property
    def readable(self) -> bool:
        """False where the text is no marking that the grammar knows."""
        return self.problem is None

    @property
    def case_repaired(self) -> bool:
        """True where it was read only by taking letters of the wrong case (EX IA for Ex ia)."""
        return "case_repaired" in self.flags

    @property
    def is_associated(self) -> bool:
        """True where every entry is associated apparatus: nothing is marked for standing in an area."""
        return bool(self.entries) and all(entry.is_output for entry in self.entries)

    @property
    def is_component(self) -> bool:
        """True where an entry is marked U."""
        return any(entry.component for entry in self.entries)

    @property
    def outputs(self) -> tuple[Output, ...]:
        """The brackets of all entries: what the outputs may feed."""
        return tuple(output for entry in self.entries for output in entry.outputs)

    def standing(self, side: Side | None = None) -> tuple[MarkingEntry, ...]:
        """Return the entries that speak of the equipment's own place, those of one side if it is given."""
        return tuple(e for e in self.entries if not e.is_output and (side is None or e.side == side))

    @property
    def protections(self) -> tuple[str, ...]:
        """The protections of the equipment itself, each once, in the order marked."""
        return tuple(dict.fromkeys(p for entry in self.standing() for p in entry.protections))

    @property
    def contradictions(self) -> tuple[Contradiction, ...]:
        """The ways in which the marking contradicts itself, each once."""
        return tuple(dict.fromkeys(c for entry in self.entries for c in entry.contradictions))

    @property
    def ambient_min_c(self) -> float | None:
        """The lowest ambient in degC that all its entries bear; None where none of them states one."""
        lows = [e.ambient_min_c for e in self.standing() if e.ambient_min_c is not None]
        return max(lows, default=None)

    @property
    def ambient_max_c(self) -> float | None:
        """The highest ambient in degC that all its entries bear; None without an entry for the area."""
        return min((entry.ambient_max_c for entry in self.standing()), default=None)

    @property
    def ambient_source(self) -> str | None:
        """``marked``, ``standard default`` or ``division default``: where the range comes from."""
        sources = {entry.ambient_source for entry in self.standing()}
        return next((s for s in ("marked", "standard default", "division default") if s in sources), None)

    def worst_t_class_at(self, ambient_max_c: float | None) -> str | None:
        """Return the hottest T class of its entries for gas at the site's highest ambient in degC."""
        classes = [e.worst_t_class_at(ambient_max_c) for e in self.standing("gas")]
        known = [t for t in classes if t]
        return max(known, key=lambda t: T_CODE_C[t]) if known and len(known) == len(classes) else None

    def max_surface_c_at(self, ambient_max_c: float | None) -> float | None:
        """Return the hottest surface in degC of its entries at the site's highest ambient in degC."""
        surfaces = [e.max_surface_c_at(ambient_max_c) for e in self.standing()]
        known = [c for c in surfaces if c is not None]
        return max(known) if known and len(known) == len(surfaces) else None

    def as_vector(self) -> dict[str, str]:
        """Return the marking as `read marking` shows it: atex, protections, assoc, group, temp, epl, ta.

        >>> read_marking("II 1/2 G Ex ia IIC T4 Ga/Gb").as_vector()["epl"]
        'Ga/Gb'
        """
        if not self.entries:
            return {
                "atex": "-",
                "protections": "none",
                "assoc": "-",
                "group": "none",
                "temp": "none",
                "epl": "none",
                "ta": "-",
            }
        parts: dict[int, list[MarkingEntry]] = {}
        for entry in self.entries:
            parts.setdefault(entry.part, []).append(entry)
        shown = [_part_vector(entries) for entries in parts.values()]
        categories = dict.fromkeys(c.text for entry in self.entries for c in entry.categories)
        vector = {"atex": " + ".join(categories) or "-"}
        for name in ("protections", "assoc", "group", "temp", "epl", "ta"):
            values = [value for part in shown if (value := part[name]) != "-"]
            if len(set(values)) == 1:
                values = values[:1]
            vector[name] = "; ".join(values) or "-"
        return vector


def _part_vector(entries: list[MarkingEntry]) -> dict[str, str]:
    first = entries[0]
    if first.is_division:
        return {
            "protections": "none" if first.is_output else "-",
            "assoc": "-",
            "group": _letters_text(entries) + (" (output)" if first.is_output else ""),
            "temp": first.temperature_text,
            "epl": "none" if first.is_output else "; ".join(dict.fromkeys(map(division_text, entries))),
            "ta": first.ambient_text,
        }
    source = {"explicit": "", "derived": "derived ", "category": "from category: "}
    return {
        "protections": "+".join(first.protections) or "none",
        "assoc": "; ".join(output.text for output in first.outputs) or "-",
        "group": first.group_text + (" (output)" if first.is_output and first.group else ""),
        "temp": first.temperature_text,
        "epl": f"{source[first.epl_source]}{first.epl_text}" if first.epl_source else "none",
        "ta": first.ambient_text,
    }


def _letters_text(entries: list[MarkingEntry]) -> str:
    said = dict.fromkeys((entry.class_, entry.groups) for entry in entries)
    if len(said) == 1:
        (_, letters), *_ = said
        return f"NEC {','.join(letters)}" if letters else "none"
    if not any(letters for _, letters in said):
        return "none"
    return "NEC " + "; ".join(f"{class_}:{','.join(letters)}" if letters else f"{class_}" for class_, letters in said)


@lru_cache(maxsize=4096)
def read_marking(text: str) -> Marking:
    """Read an explosion-protection marking.

    Never raises: a text that is no marking has `readable` False and says why in `problem`. The grammar is in
    `instruments.marking_grammar`. Letters of the wrong case are taken only where the text cannot be read
    otherwise, and flagged.

    Parameters
    ----------
    text
        The marking as written; several, an ambient range, IP codes and certificate numbers may stand in it.

    >>> marking = read_marking("II 3 (1) G Ex ec [ia Ga] IIC T4 Gc")
    >>> marking.entries[0].epl, marking.outputs[0].text
    ('Gc', 'ia -> Ga')
    >>> read_marking("EEx de IIB T5").as_vector()["epl"]
    'derived Gb'
    >>> read_marking("Ex").problem
    "no type of protection behind Ex at ''"
    """
    if len(text) > MAX_LENGTH:
        return Marking(text=text, problem=f"longer than {MAX_LENGTH} characters")
    plain, look_alike = normalised(text)
    if len(plain) > MAX_LENGTH:
        return Marking(text=text, problem=f"longer than {MAX_LENGTH} characters")
    if NONE_STATED.fullmatch(plain):
        return Marking(text=text, none_stated=True)
    problem, furthest = "", -1
    for fold in (False, True):
        reader = RecordReader(plain, fold=fold)
        try:
            reader.record()
        except UnreadableMarking as error:
            if reader.scanner.position > furthest:
                problem, furthest = str(error), reader.scanner.position
            continue
        flags = reader.scanner.flags | ({"case_repaired"} if fold else set())
        return Marking(
            text=text,
            entries=tuple(reader.entries),
            certificates=tuple(reader.certificates),
            ip=tuple(reader.ip),
            marked_x=reader.marked_x,
            flags=tuple(sorted(flags | ({"look_alike"} if look_alike else set()))),
        )
    return Marking(text=text, problem=problem, flags=("look_alike",) if look_alike else ())
