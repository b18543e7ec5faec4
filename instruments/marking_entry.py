"""One explosion-protection marking as a record: what it says, and where it contradicts itself."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final, Literal

from instruments.epl import (
    DUST_SERIES,
    EPLS_IN_ZONE,
    LETTER_OF_SIDE,
    LEVELS,
    SIDE_OF_LETTER,
    Side,
    protection_epl,
    stronger,
    strongest,
)

Scheme = Literal["iec", "atex only", "division", "associated"]
EplSource = Literal["explicit", "derived", "category"]

# IEC 60079-0:2017 5.1.1, Table 1 (from memory): the ambient range of a mark that states none.
DEFAULT_AMBIENT_MIN_C: Final = -20.0
DEFAULT_AMBIENT_MAX_C: Final = 40.0
# NEC Article 500 (from memory): the T code of a silent mark holds up to 40 degC; no minimum is stated.
DIVISION_AMBIENT_MAX_C: Final = 40.0

# IEC 60079-0:2017 5.3.2.2, Table 2 (from memory), and NEC 500.8(C)(4) for the lettered codes: surface, degC.
T_CLASS_C: Final[Mapping[str, float]] = MappingProxyType(
    {"T1": 450.0, "T2": 300.0, "T3": 200.0, "T4": 135.0, "T5": 100.0, "T6": 85.0}
)
T_CODE_C: Final[Mapping[str, float]] = MappingProxyType(
    {
        **T_CLASS_C,
        "T2A": 280.0,
        "T2B": 260.0,
        "T2C": 230.0,
        "T2D": 215.0,
        "T3A": 180.0,
        "T3B": 165.0,
        "T3C": 160.0,
        "T4A": 120.0,
    }
)

# NEC 500.6: A to D are gases, E to G dusts; fibres have no groups.
CLASS_LETTERS: Final[Mapping[str, str]] = MappingProxyType({"I": "ABCD", "II": "EFG", "III": ""})


@dataclass(frozen=True, slots=True, kw_only=True)
class Ambient:
    """A marked ambient range in degC; a limit that is not marked is None."""

    min_c: float | None = None
    max_c: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Category:
    """An ATEX equipment group and category (2014/34/EU, Annex I).

    `body` is the category of the equipment itself, `process` that of the other side of a partition
    (``1/2``), `output` that of what it feeds (in brackets). `letter` is G, D or M.
    """

    group: str
    letter: str
    body: str | None = None
    process: str | None = None
    output: str | None = None

    @property
    def text(self) -> str:
        """The category in one spelling, such as ``II 3(1) G``."""
        if self.letter == "M":
            return f"{self.group} (M{self.output})" if self.output else f"{self.group} M{self.body}"
        number = self.body or ""
        if self.process:
            number = f"{self.process}/{number}"
        if self.output:
            number += f"({self.output})"
        return f"{self.group} {number} {self.letter}"

    def epl(self, number: str | None) -> str | None:
        """Return the EPL that stands for a category number here: 1 is a, 2 is b, 3 is c."""
        return None if number is None else self.letter + LEVELS[int(number) - 1]


@dataclass(frozen=True, slots=True, kw_only=True)
class MarkedTemperature:
    """One temperature of a mark: a class, a surface temperature in degC, or both.

    `layer_mm` is the dust layer it was tested under (T500 320 degC); `ambient` the range it is paired with.
    """

    t_class: str | None = None
    celsius: float | None = None
    layer_mm: float | None = None
    ambient: Ambient | None = None

    @property
    def max_c(self) -> float:
        """The hottest surface in degC: the figure where one is marked, else that of the class."""
        if self.celsius is not None:
            return self.celsius
        return T_CODE_C[self.t_class or "T1"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Output:
    """What a bracket says: where the outputs may go, not where the equipment stands.

    `group` only where the bracket names its own.
    """

    protections: tuple[str, ...]
    epl: str | None
    epl_marked: bool
    group: str | None = None

    @property
    def text(self) -> str:
        """The bracket in one spelling, such as ``ia -> Ga, output group IIC``."""
        text = "+".join(self.protections)
        if self.epl_marked:
            text += f" -> {self.epl}"
        elif self.epl:
            text += f" (derived {self.epl})"
        return f"{text}, output group {self.group}" if self.group else text


@dataclass(frozen=True, slots=True, kw_only=True)
class Contradiction:
    """One way in which a marking contradicts itself: its kind, and the figures in words."""

    kind: str
    text: str


@dataclass(frozen=True, slots=True, kw_only=True)
class MarkingEntry:
    """One marking of the text, or one class of a division marking.

    Attributes
    ----------
    scheme
        ``iec`` (Ex, EEx, AEx), ``atex only`` (old dust marks without Ex), ``division``, or
        ``associated``: equipment that has no place in the area, only outputs into it.
    part
        The number of the marking in the text, from 0; the classes of one division marking share it.
    categories
        The ATEX categories in force here.
    own_categories
        True where they stand directly before this entry, so that each must fit it.
    protections
        The symbols as marked, of the equipment itself (brackets left out).
    outputs
        The brackets.
    group, groups_marked
        IIA, IIB, IIC, II, IIIA..IIIC, III or I; the weakest, where several are marked with a stroke.
    gas_extra, gas_only
        A named gas beyond the group (IIB+H2), or the only gas it is for (II (NH3)), as written.
    temperatures
        None, one, a list, or classes paired with ambients.
    epl, epl_process
        EPL of the body and, on a partition, of the process side.
    epl_source
        ``explicit``, ``derived`` from the protections, or from the ``category``; None without EPL.
    class_, division, groups
        A division mark: class I, II or III; division 1 or 2 (None: both); group letters.
    division_protection
        ``intrinsically safe``, ``explosionproof``, ``dust-ignitionproof`` or ``nonincendive``, where the
        division mark says so.
    zone
        The zone written before AEx.
    component
        Marked U: an Ex component, no evidence by itself (IEC 60079-0 clause 29, from memory).
    ambient
        The ambient range that is marked.
    """

    scheme: Scheme
    part: int = 0
    prefix: str = ""
    categories: tuple[Category, ...] = ()
    own_categories: bool = False
    protections: tuple[str, ...] = ()
    outputs: tuple[Output, ...] = ()
    group: str | None = None
    groups_marked: tuple[str, ...] = ()
    gas_extra: str | None = None
    gas_only: str | None = None
    temperatures: tuple[MarkedTemperature, ...] = ()
    epl: str | None = None
    epl_process: str | None = None
    epl_source: EplSource | None = None
    class_: str | None = None
    division: str | None = None
    groups: tuple[str, ...] = ()
    division_protection: str | None = None
    zone: str | None = None
    component: bool = False
    ambient: Ambient | None = None

    @property
    def is_output(self) -> bool:
        """True for associated apparatus: the entry says where its outputs may go, and nothing else."""
        return self.scheme == "associated"

    @property
    def is_division(self) -> bool:
        """True where classes and divisions are marked (as the equipment's place or its outputs')."""
        return self.class_ is not None

    @property
    def side(self) -> Side | None:
        """Gas, dust or mines; the marked EPL decides, then the group."""
        if self.class_:
            return "gas" if self.class_ == "I" else "dust"
        if self.epl and self.epl_source == "explicit":
            return SIDE_OF_LETTER[self.epl[0]]
        return side_of_group(self.group, self.protections, self.categories)

    @property
    def is_partition(self) -> bool:
        """True where process side and body have different EPLs (IEC 60079-26)."""
        return self.epl_process is not None and self.epl_process != self.epl

    @property
    def epl_text(self) -> str:
        """The EPL as it is written, process side first: ``Ga/Gb``; empty without one."""
        if self.epl is None:
            return ""
        return f"{self.epl_process}/{self.epl}" if self.is_partition else self.epl

    @property
    def is_paired(self) -> bool:
        """True where temperatures are paired with ambients."""
        return any(temperature.ambient for temperature in self.temperatures)

    # Ambient

    @property
    def _marked_ambient(self) -> Ambient | None:
        if self.ambient is not None or not self.is_paired:
            return self.ambient
        paired = [t.ambient for t in self.temperatures if t.ambient]
        lows = [ambient.min_c for ambient in paired if ambient.min_c is not None]
        highs = [ambient.max_c for ambient in paired if ambient.max_c is not None]
        return Ambient(min_c=min(lows, default=None), max_c=max(highs, default=None))

    @property
    def ambient_min_c(self) -> float | None:
        """The lowest ambient in degC; None where a division mark states none."""
        marked = self._marked_ambient
        if marked and marked.min_c is not None:
            return marked.min_c
        return None if self.is_division else DEFAULT_AMBIENT_MIN_C

    @property
    def ambient_max_c(self) -> float:
        """The highest ambient in degC."""
        marked = self._marked_ambient
        if marked and marked.max_c is not None:
            return marked.max_c
        return DIVISION_AMBIENT_MAX_C if self.is_division else DEFAULT_AMBIENT_MAX_C

    @property
    def ambient_source(self) -> str:
        """``marked`` (at least one end is), ``standard default`` or ``division default``."""
        if self._marked_ambient is not None:
            return "marked"
        return "division default" if self.is_division else "standard default"

    # Temperature

    def temperature_at(
        self, ambient_max_c: float | None, *, ambient_min_c: float | None = None
    ) -> MarkedTemperature | None:
        """Return the temperature that counts at a site.

        Parameters
        ----------
        ambient_max_c
            The site's highest ambient in degC; None: the hottest of the mark.
        ambient_min_c
            The site's lowest, where pairs state lower ends of their own.

        Returns
        -------
        MarkedTemperature or None
            Paired classes: that of the smallest upper ambient which is not below the site's. Unpaired
            ranges (T6...T4): the hottest. None where no temperature is marked, or no pair reaches the site.
        """
        if not self.temperatures:
            return None
        if not self.is_paired or ambient_max_c is None:
            return max(self.temperatures, key=lambda t: t.max_c)
        reaching: list[tuple[float, float, MarkedTemperature]] = []
        for temperature in self.temperatures:
            pair = temperature.ambient or Ambient()
            upper = self.ambient_max_c if pair.max_c is None else pair.max_c
            low_enough = pair.min_c is None or ambient_min_c is None or pair.min_c <= ambient_min_c
            if upper >= ambient_max_c and low_enough:
                reaching.append((upper, temperature.max_c, temperature))
        if not reaching:
            return None
        nearest = min(upper for upper, _, _ in reaching)
        return max((t for upper, _, t in reaching if upper == nearest), key=lambda t: t.max_c)

    def worst_t_class_at(self, ambient_max_c: float | None) -> str | None:
        """Return the T class that counts at the site's highest ambient in degC; None where none is marked."""
        temperature = self.temperature_at(ambient_max_c)
        return temperature.t_class if temperature else None

    def max_surface_c_at(self, ambient_max_c: float | None) -> float | None:
        """Return the hottest surface in degC at the site's highest ambient; None: none is marked for it."""
        temperature = self.temperature_at(ambient_max_c)
        return temperature.max_c if temperature else None

    # Contradictions

    @property
    def group_contradicts_epl(self) -> bool:
        """True where a gas group stands with a dust EPL, or the reverse: the group then says nothing."""
        if self.epl is None or self.epl_source != "explicit" or self.group is None:
            return False
        return side_of_group(self.group, (), ()) != SIDE_OF_LETTER[self.epl[0]]

    @property
    def t_class_on_dust(self) -> bool:
        """True where dust is marked with a T class instead of degrees (IEC 60079-0 5.3.2.3, from memory)."""
        return self.side == "dust" and self.class_ is None and any(t.celsius is None for t in self.temperatures)

    @property
    def epl_beyond_protections(self) -> bool:
        """True where a marked EPL is stronger than every one of its protections allows.

        Two independent types of level b may make up level a (IEC 60079-26); that is for a person to see.
        """
        if self.epl_source != "explicit" or self.epl is None or not self.protections:
            return False
        side = SIDE_OF_LETTER[self.epl[0]]
        allowed = [protection_epl(protection, side=side) for protection in self.protections]
        if None in allowed:
            return False
        known = [epl for epl in allowed if epl]
        if not known:
            return True
        return stronger(self.epl_process or self.epl, strongest(known))

    @property
    def contradictions(self) -> tuple[Contradiction, ...]:
        """The ways in which this entry contradicts itself."""
        return tuple(_contradictions(self))

    # Text

    @property
    def group_text(self) -> str:
        """The gas or dust group in one spelling; ``none`` without one."""
        if self.gas_only:
            return f"named gas only: {self.gas_only}"
        if self.group is None:
            return "none"
        if self.group == "II":
            return "II (no subdivision)"
        if self.group == "III":
            return "III unspecified"
        text = "/".join(self.groups_marked) if len(self.groups_marked) > 1 else self.group
        return f"{text} + {self.gas_extra}" if self.gas_extra else text

    @property
    def temperature_text(self) -> str:
        """The temperatures in one spelling; ``none`` without one."""
        if not self.temperatures:
            return "none"
        if self.is_paired:
            return "; ".join(f"{_one_temperature(t)}{_pair_text(t.ambient)}" for t in self.temperatures)
        if len(self.temperatures) == 1:
            return _one_temperature(self.temperatures[0])
        cool_to_hot = sorted(self.temperatures, key=lambda t: t.max_c)
        coolest, hottest = cool_to_hot[0], cool_to_hot[-1]
        if hottest.t_class and coolest.t_class:
            return f"{coolest.t_class}..{hottest.t_class}, worst {hottest.t_class}"
        return f"{coolest.max_c:g}..{hottest.max_c:g} °C, worst {hottest.max_c:g} °C"

    @property
    def ambient_text(self) -> str:
        """The ambient range in one spelling."""
        marked = self._marked_ambient
        if self.is_output:
            return "n/a"
        if marked is None:
            return f"max {DIVISION_AMBIENT_MAX_C:g}" if self.is_division else "default"
        if marked.min_c is not None and marked.max_c is not None:
            return f"{marked.min_c:g}..{marked.max_c:g}"
        if marked.max_c is not None:
            lower = "" if self.is_division else f", lower default {DEFAULT_AMBIENT_MIN_C:g}"
            return f"max {marked.max_c:g}{lower}"
        return f"min {marked.min_c:g}, upper default {self.ambient_max_c:g}"


def side_of_group(group: str | None, protections: tuple[str, ...], categories: tuple[Category, ...]) -> Side | None:
    """Return the atmosphere that a group is for; without a group, that of the symbols or categories."""
    if group:
        return "mines" if group == "I" else "dust" if group.startswith("III") else "gas"
    if any(protection.partition(" ")[0] in DUST_SERIES for protection in protections):
        return "dust"
    letters = {category.letter for category in categories}
    return SIDE_OF_LETTER[letters.pop()] if len(letters) == 1 else None


def _one_temperature(temperature: MarkedTemperature) -> str:
    if temperature.celsius is None:
        t_class = temperature.t_class or ""
        return t_class if t_class in T_CLASS_C else f"{t_class} = {T_CODE_C[t_class]:g} °C"
    text = f"{temperature.celsius:g} °C"
    if temperature.layer_mm is not None:
        return f"{text} at {temperature.layer_mm:g} mm layer"
    return f"{text} ({temperature.t_class})" if temperature.t_class else text


def _pair_text(ambient: Ambient | None) -> str:
    if ambient is None:
        return ""
    return f"@>={ambient.min_c:g}" if ambient.max_c is None else f"@<={ambient.max_c:g}"


def _contradictions(entry: MarkingEntry) -> Iterable[Contradiction]:
    if entry.class_:
        fitting = CLASS_LETTERS[entry.class_]
        strange = [letter for letter in entry.groups if letter not in fitting]
        if strange:
            yield Contradiction(kind="group and class", text=f"Class {entry.class_} has no group {', '.join(strange)}")
        return
    yield from _category_contradictions(entry)
    if entry.group_contradicts_epl:
        yield Contradiction(kind="group and EPL", text=f"group {entry.group_text} with EPL {entry.epl_text}")
    if entry.epl_beyond_protections:
        yield Contradiction(
            kind="EPL and protections",
            text=f"EPL {entry.epl_text} is more than {' '.join(entry.protections)} allows",
        )
    if entry.t_class_on_dust:
        yield Contradiction(kind="T class on dust", text=f"{entry.temperature_text} on dust, where degrees are needed")
    if entry.zone and entry.epl and entry.epl not in EPLS_IN_ZONE[entry.zone]:
        yield Contradiction(kind="zone and EPL", text=f"marked for Zone {entry.zone} with EPL {entry.epl_text}")


def _category_contradictions(entry: MarkingEntry) -> Iterable[Contradiction]:
    if not entry.own_categories:
        return
    written = " + ".join(category.text for category in entry.categories)
    if entry.group and (entry.group == "I") != all(category.group == "I" for category in entry.categories):
        yield Contradiction(kind="category and group", text=f"category {written} with group {entry.group}")
        return
    letter = entry.epl[0] if entry.epl else LETTER_OF_SIDE[entry.side] if entry.side else ""
    fitting = [category for category in entry.categories if category.letter == letter]
    if not fitting:
        if entry.epl_source == "explicit":
            yield Contradiction(kind="category and EPL", text=f"category {written} with EPL {entry.epl_text}")
        elif letter:
            yield Contradiction(kind="category and group", text=f"category {written} with {entry.group_text}")
        return
    category = fitting[0]
    if entry.epl_source == "explicit":
        process = category.epl(category.process) or category.epl(category.body)
        if (category.epl(category.body), process) != (entry.epl, entry.epl_process or entry.epl):
            yield Contradiction(kind="category and EPL", text=f"category {category.text} with EPL {entry.epl_text}")
    elif entry.epl and (body := category.epl(category.body)) and stronger(body, entry.epl):
        yield Contradiction(
            kind="category and EPL",
            text=f"category {category.text} with {' '.join(entry.protections)}, which allows {entry.epl}",
        )
    fed = [output.epl for output in entry.outputs if output.epl_marked and output.epl]
    fed = [epl for epl in fed if epl[0] == letter]
    if category.output and fed and category.epl(category.output) != strongest(fed):
        yield Contradiction(kind="category and EPL", text=f"category {category.text} with outputs for {strongest(fed)}")


def division_text(entry: MarkingEntry) -> str:
    """Return class and division in words, such as ``Class I Div 2``."""
    return f"Class {entry.class_}" + (f" Div {entry.division}" if entry.division else "")
