"""Hazardous areas: the record of an area, and the grammar of a classification written in a row's own cell.

Ferrule never classifies an area: it reads what the area's documents say.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field, replace
from functools import lru_cache
from typing import Any, Final, Literal

from instruments.gas import GAS_NAMES, named_gases
from instruments.marking_entry import CLASS_LETTERS, T_CODE_C
from instruments.marking_grammar import (
    DIVISION,
    GROUP,
    GROUPS,
    IN_BRACKETS_CELSIUS,
    T_CELSIUS,
    T_CODE,
    T_CODE_WORD,
    T_LIST,
    T_NO_UNIT,
    class_letters,
    take_ambient,
    take_class,
    take_gas,
    take_letters,
)
from instruments.marking_text import MAX_LENGTH, Scanner, Token, UnreadableMarking, normalised
from instruments.record import Record

AreaSystem = Literal["zone", "division", "none"]
AreaSide = Literal["gas", "dust"]

GAS_ZONES: Final = ("0", "1", "2")  # IEC 60079-10-1, from the most to the least demanding
DUST_ZONES: Final = ("20", "21", "22")  # IEC 60079-10-2

# IEC 60079-14:2013 5.6.3 (from memory): two thirds of the cloud's ignition temperature, and 75 K below that
# of a layer of 5 mm. Thicker layers need the layer's curve or a test.
CLOUD_FRACTION: Final = 2.0 / 3.0
LAYER_MARGIN_K: Final = 75.0
LAYER_TESTED_MM: Final = 5.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Area(Record):
    """One area: a row of the area list, or what a row's own cell says (`from_row_cell`).

    Attributes
    ----------
    code, name, drawing
        What it is called, and the drawing that classifies it.
    jurisdiction
        IEC, ATEX, US or Canada; None: the plant's.
    system
        ``zone``, ``division`` or ``none`` (said to be unclassified); None where nothing tells.
    zone, process_zone
        ``0``..``2``, ``20``..``22``, or one of each (``1/21``); the zone on the process side of a partition.
    epl_required
        The EPL that the plant assigns in place of the zone's (``Gb``, ``Gb/Db``).
    class_, division
        ``I``, ``II``, ``III`` (``I,II``) and ``1`` or ``2``.
    gas_group, dust_group
        IIA, IIB, IIC, IIB+H2 or IIIA..IIIC; of a division its letters (``C,D``).
    temperature_class
        T1..T6, in North America T2A..T4A, too.
    dust_surface_c, cloud_ignition_c, layer_ignition_c, layer_mm
        The permitted surface temperature of dust, or what it follows from.
    gas
        The gas that the area names, as written.
    ambient_min_c, ambient_max_c
        The site's ambient range in degC.
    """

    code: str | None = None
    name: str | None = None
    jurisdiction: str | None = None
    system: str | None = None
    zone: str | None = None
    process_zone: str | None = None
    epl_required: str | None = None
    class_: str | None = None
    division: str | None = None
    gas_group: str | None = None
    dust_group: str | None = None
    temperature_class: str | None = None
    dust_surface_c: float | None = None
    cloud_ignition_c: float | None = None
    layer_ignition_c: float | None = None
    layer_mm: float | None = None
    gas: str | None = None
    ambient_min_c: float | None = None
    ambient_max_c: float | None = None
    drawing: str | None = None
    from_row_cell: bool = False

    @property
    def unclassified(self) -> bool:
        """True where the area is said to be no hazardous area."""
        return self.system == "none"

    @property
    def classified(self) -> bool:
        """True where a zone, class, division or group is stated; incomplete is still classified."""
        return self.system != "none" and any(
            (self.zone, self.class_, self.division, self.gas_group, self.dust_group, self.epl_required)
        )

    @property
    def gas_zone(self) -> str | None:
        """The gas zone, without the dust zone that may stand beside it."""
        return next((zone for zone in (self.zone or "").split("/") if zone in GAS_ZONES), None)

    @property
    def dust_zone(self) -> str | None:
        """The dust zone, without the gas zone that may stand beside it."""
        return next((zone for zone in (self.zone or "").split("/") if zone in DUST_ZONES), None)

    @property
    def classes(self) -> tuple[str, ...]:
        """The classes of a division area."""
        return tuple(self.class_.split(",")) if self.class_ else ()

    @property
    def sides(self) -> tuple[AreaSide, ...]:
        """The atmospheres that equipment must be fit for here: gas, dust, or both; gas and dust never mix."""
        if self.system == "none":
            return ()
        epl = self.epl_required or ""
        gas = bool(self.gas_zone or self.gas_group or "I" in self.classes or "G" in epl)
        dust = bool(self.dust_zone or self.dust_group or {"II", "III"} & set(self.classes) or "D" in epl)
        if not gas and not dust and (self.division or self.temperature_class):
            gas = True
        asked: list[tuple[AreaSide, bool]] = [("gas", gas), ("dust", dust)]
        return tuple(side for side, asks in asked if asks)

    def epl_assigned(self, side: AreaSide) -> str | None:
        """Return the EPL that the plant assigns for gas or for dust, if any."""
        letter = "G" if side == "gas" else "D"
        return next((epl for epl in (self.epl_required or "").split("/") if epl.startswith(letter)), None)


@dataclass(frozen=True, slots=True, kw_only=True)
class Classification:
    """What a classification cell says; the fields are those of `Area`.

    `notes` are readings that were the less permissive of two.
    """

    unclassified: bool = False
    system: AreaSystem | None = None
    zone: str | None = None
    process_zone: str | None = None
    epl_required: str | None = None
    class_: str | None = None
    division: str | None = None
    gas_group: str | None = None
    dust_group: str | None = None
    temperature_class: str | None = None
    dust_surface_c: float | None = None
    gas: str | None = None
    ambient_min_c: float | None = None
    ambient_max_c: float | None = None
    notes: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class PermittedSurface:
    """The hottest surface that an area's dust permits.

    Attributes
    ----------
    limit_c
        The limit in degC; None where it cannot be told.
    upper_bound_c
        Where it cannot: a figure that it does not exceed, if part of the data is there.
    working
        The formula with its figures.
    reason
        Why there is no limit; empty where there is one.
    missing
        The fields that are blank; empty where a person has to decide (a layer thicker than 5 mm).
    assumptions
        What was taken for a blank.
    """

    limit_c: float | None = None
    upper_bound_c: float | None = None
    working: str = ""
    reason: str = ""
    missing: tuple[str, ...] = ()
    assumptions: tuple[str, ...] = ()


def permitted_dust_surface_c(area: Area) -> PermittedSurface:
    """Return the hottest surface that dust permits: as stated, or min(2/3 cloud, layer - 75 K).

    The two thirds are of the Celsius figure, and the layer's ignition temperature is that of 5 mm
    (IEC 60079-14:2013 5.6.3, from memory). Where a limit is stated and one follows, the lower one counts.

    >>> permitted_dust_surface_c(Area(cloud_ignition_c=420, layer_ignition_c=225, layer_mm=5)).working
    'min(2/3 x 420 = 280, 225 - 75 = 150) = 150 degC'
    >>> permitted_dust_surface_c(Area(cloud_ignition_c=420, layer_ignition_c=225, layer_mm=8)).limit_c is None
    True
    """
    cloud, layer = area.cloud_ignition_c, area.layer_ignition_c
    parts: list[tuple[float, str]] = []
    if cloud is not None:
        parts.append((CLOUD_FRACTION * cloud, f"2/3 x {cloud:g} = {CLOUD_FRACTION * cloud:.4g}"))
    if layer is not None:
        parts.append((layer - LAYER_MARGIN_K, f"{layer:g} - {LAYER_MARGIN_K:g} = {layer - LAYER_MARGIN_K:g}"))
    stated = area.dust_surface_c
    follows = min((value for value, _ in parts), default=None)
    thick = area.layer_mm is not None and area.layer_mm > LAYER_TESTED_MM
    if stated is not None:
        if len(parts) == 2 and not thick and follows is not None and follows < stated:
            both = ", ".join(text for _, text in parts)
            working = f"min({both}) = {follows:.4g} degC, below the stated {stated:g}"
            return PermittedSurface(limit_c=follows, working=working)
        return PermittedSurface(limit_c=stated, working=f"{stated:g} degC stated")
    bound = CLOUD_FRACTION * cloud if cloud is not None else None
    if thick:
        return PermittedSurface(
            upper_bound_c=bound,
            working=parts[0][1] if cloud is not None else "",
            reason=f"a layer of {area.layer_mm:g} mm needs the layer's own curve or a test; the rule is for "
            f"{LAYER_TESTED_MM:g} mm",
        )
    if cloud is not None and layer is not None and follows is not None:
        assumed = f"a dust layer of no more than {LAYER_TESTED_MM:g} mm"
        return PermittedSurface(
            limit_c=follows,
            working=f"min({', '.join(text for _, text in parts)}) = {follows:.4g} degC",
            assumptions=() if area.layer_mm is not None else (assumed,),
        )
    other_half = "layer_ignition_c" if layer is None else "cloud_ignition_c"
    return PermittedSurface(
        upper_bound_c=follows,
        working=parts[0][1] if parts else "",
        reason="no permitted surface temperature, nor all that it follows from",
        missing=(other_half,) if parts else ("dust_surface_c",),
    )


# Reading -------------------------------------------------------------------------------------------------

_UNCLASSIFIED_PHRASES: Final = frozenset(
    {
        "safe", "safe area", "safe zone", "safe location", "none", "nil", "n a", "na", "sa", "nh", "nha",
        "non haz", "nonhaz", "non haz area", "non hazardous", "nonhazardous", "non hazardous area",
        "non hazardous location", "non hazardous zone", "not hazardous", "unhazardous", "no hazard",
        "no haz", "no hazardous area", "unclassified", "unclassified area", "unclass", "uncl",
        "un classified", "not classified", "non classified", "nonclassified", "non classified area",
        "declassified", "de classified", "not applicable", "no zone", "non zone", "non zoned", "not zoned",
        "unzoned", "zone none", "no classification", "non ex", "nonex", "no ex", "not ex", "non ex area",
        "non ex zone", "ex free", "non atex", "no atex", "general purpose", "gp", "ordinary",
        "ordinary location", "ordinary area", "general area", "kein ex bereich", "kein ex", "keine ex zone",
        "keine zone", "kein exbereich", "nicht ex", "nicht ex bereich", "nichtex", "nicht ex gefährdet",
        "nicht explosionsgefährdet", "nicht explosionsgefaehrdet", "ex frei", "ohne ex", "ohne zone",
        "ohne", "keine", "sicher", "sicherer bereich", "nicht klassifiziert", "außerhalb ex", "kein",
        "hors zone", "zone sûre", "zone sure", "non classé", "non classe", "non dangereuse",
        "zone non dangereuse", "zona segura", "área segura", "area segura", "no clasificada",
        "no clasificado", "no peligrosa", "zona sicura", "area sicura", "non classificata",
        "non classificato", "niet ex", "veilig", "veilig gebied",
    }
)  # fmt: skip
_LIKE_A_CODE: Final = re.compile(
    r"(?:Z|Zn)?[\s.-]?\d[\d./-]*|SA|NHA?|GP|ordinary|C\d\s?D\d",
    re.IGNORECASE,
)
_PHRASE_SIGNS: Final = re.compile(r"[\s\-_./():,]+")
_PHRASES_APART: Final = re.compile(r"[/;,()|=]| - ")

ZONE: Final = Token(
    r"(?:Ex[\s-]*)?(?:Zones?|Zona|Zonen|Zn|Z)\.?\s*[-:]?\s*(20|21|22|[0-2])(?:\.0)?(?![\dA-HJ-SU-Za-z.])",
    any_case=True,
)
ZONE_MORE: Final = Token(
    r"(?:[/,&+]|and|und)\s*(?:(?:Zone|Zn|Z)\.?\s*)?(20|21|22|[0-2])(?![\dA-HJ-SU-Za-z.])", any_case=True
)
ZONE_BARE: Final = Token(r"(20|21|22|[0-2])(?:\.0)?(?=$|[\s/,;-])")
INSIDE: Final = Token(r"\(?\s*(?:inside|internal(?:ly)?|process(?:[\s-]side)?|innen)(?![A-Za-z])\s*\)?", any_case=True)
OUTSIDE: Final = Token(
    r"\(?\s*(?:outside|external(?:ly)?|body|aussen|außen|surroundings?)(?![A-Za-z])\s*\)?", any_case=True
)
EPL_REQUIRED: Final = Token(r"([GD][abc])(?![A-Za-z0-9])")
DUST_WORD: Final = Token(r"(?:dusts?|staub|staubex|poussi[eè]res?|polvo)(?![A-Za-z])", any_case=True)
GAS_WORD: Final = Token(r"(?:gas(?:es)?|vapou?rs?|gaz)(?![A-Za-z])", any_case=True)
FILLER: Final = Token(
    r"(?:(?:ex|gas|dust|explosion|explosions|staub|ignition)[\s-]?(?:groups?|gruppe|bereich|area|atmosphere)"
    r"|ex|atex|iecex|iec|nec|haz(?:ardous)?|area|location|bereich|groups?|gruppe|grp|gps?|gr|gg|epl|classification"
    r"|t(?:emp(?:erature)?|emperatur)?[\s.-]*(?:class|klasse|cl)|tc|tk|temp|class(?=\s*T\d)|max(?:imum)?)(?![A-Za-z0-9])\.?",
    any_case=True,
)
# Abbreviations that a classification cell holds for no other thing.
_SHORT_GASES: Final = frozenset({"co", "ng", "hc", "lng", "lpg", "hcn"})


def _stands_by_itself(word: str) -> bool:
    """Whether a gas's name is taken for one in a classification cell: a short word may be a unit's code."""
    return len(word) > 3 or word in _SHORT_GASES or (len(word) > 1 and not word.isalpha())


GAS_NAME: Final = Token(
    "("
    + "|".join(re.escape(word) for word in sorted(GAS_NAMES, key=len, reverse=True) if _stands_by_itself(word))
    + r")(?![A-Za-z0-9])",
    any_case=True,
)
SEPARATORS: Final = Token(r"(?:[,;/()|:&=.]|-(?!\s?\d))+|(?:and|und)(?![A-Za-z])", any_case=True)

_GAS_ORDER: Final = ("IIA", "IIB", "IIB+H2", "IIC")
_DUST_ORDER: Final = ("IIIA", "IIIB", "IIIC")


@dataclass(slots=True, kw_only=True)
class _Draft:
    """What was taken so far; a second, different value for one thing makes the text unreadable."""

    zones: list[str] = field(default_factory=list)
    inside: str | None = None
    classes: list[str] = field(default_factory=list)
    division: str | None = None
    gas_groups: list[str] = field(default_factory=list)
    dust_groups: list[str] = field(default_factory=list)
    letters: list[str] = field(default_factory=list)
    t_classes: list[str] = field(default_factory=list)
    celsius: float | None = None
    epls: list[str] = field(default_factory=list)
    gases: list[str] = field(default_factory=list)
    ambient_min_c: float | None = None
    ambient_max_c: float | None = None
    has_ambient: bool = False
    words: set[str] = field(default_factory=set)

    @property
    def empty(self) -> bool:
        return not (self.zones or self.classes or self.division or self.gas_groups or self.dust_groups or self.letters)


def _take_element(scanner: Scanner, draft: _Draft, *, letters_alone: bool = False) -> bool:
    """Take one element of a classification into the draft; False where none stands here."""
    if not draft.has_ambient and (ambient := take_ambient(scanner)):
        draft.ambient_min_c, draft.ambient_max_c, draft.has_ambient = ambient.min_c, ambient.max_c, True
        return True
    return (
        _take_zone(scanner, draft)
        or _take_division(scanner, draft, letters_alone=letters_alone)
        or _take_area_group(scanner, draft)
        or _take_limits(scanner, draft)
        or _take_words(scanner, draft)
    )


def _take_zone(scanner: Scanner, draft: _Draft) -> bool:
    # A number behind a gas may be that of a unit: CO 1.
    bare = ZONE_BARE if draft.empty and not draft.t_classes and not draft.gases else None
    match = scanner.take(ZONE) or (scanner.take(bare) if bare else None)
    if match is None:
        return False
    zones = [match[1]]
    while more := scanner.take(ZONE_MORE):
        zones.append(more[1])
    if len(zones) == 1 and scanner.take(INSIDE):
        if draft.inside is not None:
            raise UnreadableMarking("two zones inside")
        draft.inside = zones[0]
        return True
    scanner.take(OUTSIDE)
    draft.zones += zones
    return True


def _take_division(scanner: Scanner, draft: _Draft, *, letters_alone: bool) -> bool:
    if part := take_class(scanner):
        if part.division and draft.division and part.division != draft.division:
            raise UnreadableMarking("two divisions")
        draft.division = part.division or draft.division
        for class_, letters in class_letters(part):
            if any(letter not in CLASS_LETTERS[class_] for letter in letters):
                raise UnreadableMarking(f"Class {class_} has no such group")
            draft.classes.append(class_)
            draft.letters += letters
        return True
    if match := scanner.take(DIVISION):
        division = min(match[1], match[2] or match[1])
        if draft.division not in (None, division):
            raise UnreadableMarking("two divisions")
        draft.division = division
        return True
    here = scanner.position
    if (scanner.take(GROUPS) or letters_alone or draft.division) and (letters := take_letters(scanner)):
        draft.letters += letters
        return True
    scanner.position = here
    return False


def _take_area_group(scanner: Scanner, draft: _Draft) -> bool:
    here = scanner.position
    match = scanner.take(GROUP)
    group = match[1].replace(" ", "").upper() if match else ""
    if len(group) < 3 or group == "III":
        scanner.position = here
        return False
    if group.startswith("III"):
        draft.dust_groups.append(group)
        return True
    extra, only = take_gas(scanner)
    if extra:
        if named_gases(extra) != ("hydrogen",):
            draft.gases.append(extra)
            raise UnreadableMarking(f"group {group} and {extra}")
        group += "+H2"
    if only:
        if named_gases(only)[:1] == () or named_gases(only)[0] not in GAS_NAMES.values():
            raise UnreadableMarking(f"cannot read {only!r}")
        draft.gases.append(only)
    draft.gas_groups.append(group)
    return True


def _take_limits(scanner: Scanner, draft: _Draft) -> bool:
    here = scanner.position
    scanner.take(T_CODE_WORD)
    if match := scanner.take(T_CODE):
        code = f"T{match[1]}{(match[2] or '').upper()}"
        if code in T_CODE_C:
            draft.t_classes.append(code)
            figure = scanner.take(IN_BRACKETS_CELSIUS)
            if figure and float(figure[1]) != T_CODE_C[code]:
                raise UnreadableMarking(f"{code} is not {figure[1]} degC")
            scanner.take(T_LIST)
            return True
    elif match := scanner.take(T_CELSIUS) or scanner.take(T_NO_UNIT):
        if draft.celsius not in (None, float(match[1])):
            raise UnreadableMarking("two surface temperatures")
        draft.celsius = float(match[1])
        return True
    scanner.position = here
    if match := scanner.take(EPL_REQUIRED):
        draft.epls.append(match[1][0].upper() + match[1][1].lower())
        return True
    return False


def _take_words(scanner: Scanner, draft: _Draft) -> bool:
    if scanner.take(FILLER):
        return True
    for name, token in (("dust", DUST_WORD), ("gas", GAS_WORD)):
        if scanner.take(token):
            draft.words.add(name)
            return True
    if match := scanner.take(GAS_NAME):
        draft.gases.append(match[1])
        return True
    return False


def _classification(draft: _Draft) -> Classification:
    """Return what a whole text says; raises where its parts do not fit together."""
    notes: list[str] = []
    gas_zone, gas_inside = _one_zone([z for z in draft.zones if z in GAS_ZONES], draft.inside, GAS_ZONES, notes)
    dust_zone, dust_inside = _one_zone([z for z in draft.zones if z in DUST_ZONES], draft.inside, DUST_ZONES, notes)
    inside = gas_inside or dust_inside
    if draft.inside and draft.inside != inside:
        raise UnreadableMarking("a zone inside without one outside")
    classes = list(dict.fromkeys(draft.classes))
    letters = sorted(set(draft.letters))
    division = bool(draft.division or letters or (classes and not (gas_zone or dust_zone)))
    if division and (gas_zone or dust_zone):
        raise UnreadableMarking("a zone and a division")
    gas_letters = [x for x in letters if x in CLASS_LETTERS["I"]]
    dust_letters = [x for x in letters if x in CLASS_LETTERS["II"]]
    gas = bool(gas_zone or draft.gas_groups or "I" in classes or gas_letters)
    dust = bool(dust_zone or draft.dust_groups or {"II", "III"} & set(classes) or dust_letters)
    if (draft.gas_groups and dust_zone and not gas_zone) or (draft.dust_groups and gas_zone and not dust_zone):
        raise UnreadableMarking("the group is not for this zone")
    if classes and ((gas_letters and "I" not in classes) or (dust_letters and "II" not in classes)):
        raise UnreadableMarking("the group is not for this class")
    if ("dust" in draft.words and not dust) or ("gas" in draft.words and not gas and not draft.division):
        raise UnreadableMarking("gas or dust does not fit the zone")
    if draft.celsius is not None and not dust:
        raise UnreadableMarking("a surface temperature without dust")
    if division and (draft.gas_groups or draft.dust_groups):
        raise UnreadableMarking("a group of the zone system in a division")
    if not gas and not dust and not draft.division:
        raise UnreadableMarking("no zone, class, division or group")
    epls = list(dict.fromkeys(draft.epls))
    if len({epl[0] for epl in epls}) < len(epls):
        raise UnreadableMarking("two EPLs")
    notes += [
        f"{'/'.join(groups)}: the most demanding one counts"
        for groups in (draft.gas_groups, draft.dust_groups)
        if len(set(groups)) > 1
    ]
    if len(set(draft.t_classes)) > 1:
        notes.append(f"{'/'.join(draft.t_classes)}: the coolest one counts")
    return Classification(
        system="division" if division else "zone",
        zone="/".join(zone for zone in (gas_zone, dust_zone) if zone) or None,
        process_zone=inside,
        epl_required="/".join(sorted(epls, reverse=True)) or None,
        class_=",".join(classes) or None,
        division=draft.division,
        gas_group=",".join(gas_letters) or max(draft.gas_groups, key=_GAS_ORDER.index, default=None),
        dust_group=",".join(dust_letters) or max(draft.dust_groups, key=_DUST_ORDER.index, default=None),
        temperature_class=min(draft.t_classes, key=lambda code: T_CODE_C[code], default=None),
        dust_surface_c=draft.celsius,
        gas=", ".join(dict.fromkeys(draft.gases)) or None,
        ambient_min_c=draft.ambient_min_c,
        ambient_max_c=draft.ambient_max_c,
        notes=tuple(notes),
    )


def _one_zone(
    zones: list[str], inside: str | None, order: tuple[str, ...], notes: list[str]
) -> tuple[str | None, str | None]:
    """Return (zone, zone on the process side) out of the zones of one atmosphere."""
    zones = list(dict.fromkeys(zones))
    if not zones:
        return None, None
    if inside in order:
        if len(zones) > 1:
            raise UnreadableMarking("two zones outside")
        return zones[0], inside
    if len(zones) == 2 and order[0] in zones:
        other = max(zones, key=order.index)
        notes.append(f"Zone {order[0]}/{other}: read as a partition, Zone {order[0]} on the process side")
        return other, order[0]
    zone = min(zones, key=order.index)
    if len(zones) > 1:
        notes.append(f"Zone {'/'.join(zones)}: the most demanding one counts")
    return zone, None


def _says_unclassified(text: str) -> bool:
    phrase = _PHRASE_SIGNS.sub(" ", text.casefold()).strip()
    if phrase in _UNCLASSIFIED_PHRASES:
        return True
    pieces = [_PHRASE_SIGNS.sub(" ", piece).strip() for piece in _PHRASES_APART.split(text.casefold())]
    pieces = [piece for piece in pieces if piece]
    return len(pieces) > 1 and all(piece in _UNCLASSIFIED_PHRASES for piece in pieces)


@lru_cache(maxsize=4096)
def read_classification(text: str, *, own_column: bool = True) -> Classification | None:
    """Read the classification that stands in one cell, such as ``Zone 2 IIB T3`` or ``Cl I Div 2 Gr D T3``.

    Never raises; None where it cannot be read as a whole. Blanks and placeholders are the caller's matter.

    Parameters
    ----------
    text
        Zone or class and division, groups, T class or surface temperature, EPL, gas and ambient, in any
        order; or the words for a place that is no hazardous area.
    own_column
        True where the column is known to hold classifications. Otherwise a bare number, Z2 or an abbreviation
        such as SA is not read: it may be the code of a plant area.

    >>> read_classification("2 IIB T3").zone, read_classification("C1D2").division
    ('2', '2')
    >>> read_classification("kein Ex-Bereich").unclassified, read_classification("Zone 3")
    (True, None)
    >>> read_classification("2", own_column=False), read_classification("2 IIB T3", own_column=False).zone
    (None, '2')
    """
    if len(text) > MAX_LENGTH:
        return None
    plain = normalised(text)[0]
    if not plain or len(plain) > MAX_LENGTH:
        return None
    if not own_column and _LIKE_A_CODE.fullmatch(plain):
        return None
    if _says_unclassified(plain):
        return Classification(unclassified=True, system="none")
    for fold in (False, True):
        try:
            return _classification(_read_elements(plain, fold=fold))
        except UnreadableMarking:
            continue
    return None


def _read_elements(plain: str, *, fold: bool, letters_alone: bool = False) -> _Draft:
    scanner, draft = Scanner(plain, fold=fold), _Draft()
    while not scanner.ended:
        if _take_element(scanner, draft, letters_alone=letters_alone) or scanner.take(SEPARATORS):
            continue
        raise UnreadableMarking(f"cannot read {scanner.rest()!r}")
    return draft


def area_from_classification(text: str, *, own_column: bool = True) -> Area | None:
    """Return the area that a row's own cell makes; None where the cell cannot be read.

    Its code is the text, so equal texts are one area. `own_column` is that of `read_classification`.

    >>> area_from_classification("Zone 21 IIIB T120°C").dust_surface_c
    120.0
    """
    said = read_classification(text, own_column=own_column)
    if said is None:
        return None
    return Area(
        code=" ".join(text.split()),
        system=said.system,
        zone=said.zone,
        process_zone=said.process_zone,
        epl_required=said.epl_required,
        class_=said.class_,
        division=said.division,
        gas_group=said.gas_group,
        dust_group=said.dust_group,
        temperature_class=said.temperature_class,
        dust_surface_c=said.dust_surface_c,
        gas=said.gas,
        ambient_min_c=said.ambient_min_c,
        ambient_max_c=said.ambient_max_c,
        from_row_cell=True,
    )


def read_zone(text: str) -> str | None:
    """Return the zone that a text names (``1``, ``Zone 1``, ``1/21``); None where it names none.

    >>> read_zone("Z 21"), read_zone("1.0"), read_zone("safe")
    ('21', '1', None)
    """
    said = read_classification(text)
    return said.zone if said else None


# The text fields of an area list that `understood` brings into one spelling.
_UNDERSTOOD_FIELDS: Final = (
    "zone",
    "class_",
    "division",
    "gas_group",
    "dust_group",
    "temperature_class",
    "epl_required",
)


def understood(area: Area) -> Area:
    """Return the area of a list with its texts in the spelling that the acceptance tables know.

    ``Zone 1`` becomes ``1``, ``Gr. C & D`` becomes ``C,D``; a dust group in the gas group's column and a
    surface temperature in the T class's column move to their own. A text that cannot be read becomes None
    and its field is added to `unread`. The system, where blank, follows from what is filled.

    >>> area = understood(Area(zone="Zone 2", gas_group="Group IIB + H2", temperature_class="T 3"))
    >>> area.system, area.zone, area.gas_group, area.temperature_class
    ('zone', '2', 'IIB+H2', 'T3')
    """
    if area.from_row_cell:
        return area
    own: dict[str, Any] = {}
    beside: dict[str, Any] = {}  # what a column says of another's field: counts where that is blank
    unread: set[str] = set()
    for name in _UNDERSTOOD_FIELDS:
        written = getattr(area, name)
        if written is None:
            continue
        said = _understood_text(name, written)
        own[name] = said.pop(name, None) if said else None
        if said is None:
            unread.add(name)
            continue
        beside = {**said, **beside}
    for name, value in beside.items():
        if own.get(name) is None and (name in own or getattr(area, name) is None):
            own[name] = value
    result = replace(area, **{**own, "unread": area.unread | unread})
    if result.system is None:
        if result.division or (result.class_ and not result.zone):
            result = replace(result, system="division")
        elif result.zone or (result.gas_group or result.dust_group or "").startswith("II"):
            result = replace(result, system="zone")
    return result


def _understood_text(name: str, written: str) -> dict[str, str | float | None] | None:
    """Return the fields that one text of an area list fills; None where it cannot be read."""
    text = normalised(written[: MAX_LENGTH + 1])[0]
    if name == "division" and re.fullmatch(r"[12](?:\.0)?", text):
        return {"division": text[0]}
    if name == "class_" and (match := re.fullmatch(r"(?:III|II|I|[123](?:\.0)?)(?:[,/& ]+(?:III|II|I|[123]))*", text)):
        numbers = re.findall(r"III|II|I|[123]", match[0].replace(".0", ""))
        return {"class_": ",".join(dict.fromkeys("I" * int(n) if n.isdigit() else n for n in numbers))}
    if name in ("zone", "class_", "division") and _says_unclassified(text):
        return {name: None, "system": "none"}
    if name == "temperature_class" and re.fullmatch(r"[1-6]", text):
        text = f"T{text}"
    if len(text) > MAX_LENGTH:
        return None
    draft = None
    for fold in (False, True):
        try:
            draft = _read_elements(text, fold=fold, letters_alone=name in ("gas_group", "dust_group"))
            break
        except UnreadableMarking:
            continue
    if draft is None:
        return None
    found: dict[str, str | float | None] = {}
    try:
        if not draft.empty:
            said = _classification(replace(draft, celsius=None))
            for key in (*_UNDERSTOOD_FIELDS, "process_zone", "gas"):
                if (value := getattr(said, key)) is not None:
                    found[key] = value
    except UnreadableMarking:
        return None
    if draft.celsius is not None:
        found["dust_surface_c"] = draft.celsius
    if draft.t_classes:
        found["temperature_class"] = min(draft.t_classes, key=lambda code: T_CODE_C[code])
    if draft.epls:
        found["epl_required"] = "/".join(sorted(set(draft.epls), reverse=True))
    return found or None
