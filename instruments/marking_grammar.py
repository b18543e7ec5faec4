"""The grammar of explosion-protection markings: its tokens, and the recursive descent over them.

IEC 60079-0:2017 clause 29 (from memory), with the older European and IEC 61241 symbols, ATEX categories,
AEx zone marks (NEC 505.9(C)) and division marks (NEC 500.8(C)).
"""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from typing import Final

from instruments.certificate import Certificate, take_certificate
from instruments.epl import (
    DUST_SERIES,
    EPLS_IN_ZONE,
    PROTECTIONS,
    SIDE_OF_LETTER,
    Side,
    derived_epl,
    protection_epl,
    stronger,
    strongest,
    weakest,
)
from instruments.marking_entry import (
    CLASS_LETTERS,
    T_CODE_C,
    Ambient,
    Category,
    MarkedTemperature,
    MarkingEntry,
    Output,
    side_of_group,
)
from instruments.marking_text import Scanner, Token, UnreadableMarking

_DEGREE = r"(?:\s*(?:°\s*C?|deg\.?\s*C?|C)(?![A-Za-z]))"
_DEGREE_RUN = r"(?:\s*(?:°\s*C|°|deg\.?\s*C|C(?![A-Za-z])))"  # T85°CDb is written without a blank, too
_NUMBER = r"([+-]?\s?\d{1,3}(?:[.,]\d)?)"
_TA = (
    r"(?:T[\s._]?(?:ambient|amb|umg|a|u)(?![A-Za-z])\.?|ambient(?:\s+temp(?:erature)?\.?)?|amb\.?(?:\s*temp\.?)?"
    r"|umgebungstemp(?:eratur)?\.?)\s*[=:]?"
)
_RANGE = r"\s*(?:to|bis|till|\.{2,3}|/|~|-|and|und|(?=\+))\s*"
_RELATION = r"\s*([≤<≥>])\s*"

PREFIX: Final = Token(r"(EEx|AEx|Ex)[-\s]?")
SYMBOL: Final = Token(r"[<({]\s*[EeεƐɛ]x\s*[>)}]|[εƐɛ]x", any_case=True)
CE: Final = Token(r"(?:CE|UK\s?CA)(?![A-Za-z])[-\s]?(?:\d{4}(?!\d))?|\d{4}(?=\s*(?:[<({εƐɛ]|II?\s*[(\dM]))")
GROUP_WORD: Final = Token(r"(II|I)(?![A-Za-hj-z])")
CATEGORY: Final = Token(
    r"(?P<pre>\(\s*[123]\s*\)\s*(?=[123]))?"
    r"(?:(?P<m>M\s*[12])|(?P<mout>\(\s*M\s*[12]\s*\))"
    r"|(?P<only>\(\s*[123]\s*\))|(?P<one>[123])(?:\s*/\s*(?P<two>[123]))?(?:\s*\(\s*(?P<out>[123])\s*(?P<outside>GD|G|D)?\s*\))?)"
    r"\s*(?P<side>(?:G\s*[/&+,]?\s*D|G|D)(?![a-z]))?"
    r"(?:\s*\(\s*(?P<behind>[123])\s*(?P<behindside>GD|G|D)\s*\))?"
)
_SYMBOLS = sorted((*PROTECTIONS, "op is", "op pr", "op sh", "h", "s"), key=len, reverse=True)
_CANONICAL: Final = {symbol.casefold().replace(" ", ""): symbol for symbol in (*_SYMBOLS, "tD", "pD", "t")}
PROTECTION: Final = Token(
    r"(?P<series>(?:ia|ib|ic|ma|mb|mc|t|p)D)(?:\s*(?P<method>[AB])?\s*(?P<zone>2[0-2])(?!\d))?"
    r"|(?P<symbol>op\s*(?:is|pr|sh)|"
    + "|".join(symbol for symbol in _SYMBOLS if " " not in symbol and not symbol.endswith("D"))
    + r"|(?-i:t)(?![A-Za-z0-9]|\s*\d))"
)
BETWEEN_PROTECTIONS: Final = Token(r"[-+/,&]")
OPEN: Final = Token(r"\[")
OPEN_WITH_PREFIX: Final = Token(r"\[\s*(?:EEx|AEx|Ex)")
CLOSE: Final = Token(r"\]")
GROUP: Final = Token(r"(III\s?[ABC]|II\s?[ABC]|III|II|(?-i:I))(?=T\s*\d|[^A-Za-z0-9]|$)")
GROUP_MORE: Final = Token(r"/\s*(IIA|IIB|IIC|IIIA|IIIB|IIIC)(?=[^A-Za-z0-9]|$)")
GAS_EXTRA: Final = Token(
    r"\+\s*((?:(?!T\d)[A-Z][a-z]?\d{0,2}){1,6}(?=T\d|[^A-Za-z0-9]|$)|[A-Za-z][a-z]{2,20}(?:\s(?:di)?sul[fp]h?ide)?)"
)
GAS_ONLY: Final = Token(r"\(\s*([^()°≤<≥>=]{1,40})\s*\)")
T_CLASS: Final = Token(r"T([1-6])(?!\d|[A-D](?![a-z]))")
T_CODE: Final = Token(r"T\s?([1-6])([A-D])?(?![A-Za-z0-9])", any_case=True)
T_CODE_WORD: Final = Token(r"(?:T(?:emp(?:erature)?)?\.?[-\s]?(?:code|class)|TC)(?![A-Za-z])\s*[:=]?", any_case=True)
T_LAYER: Final = Token(r"T\s*(\d{2,4})(?:\s*mm)?\s+T?\s*(\d{2,3})" + _DEGREE_RUN)
T_CELSIUS: Final = Token(r"(?:T\s*[=:]?\s*)?(\d{2,3})" + _DEGREE_RUN)
T_NO_UNIT: Final = Token(r"T\s?(\d{2,3})(?![\d°]|\s*\d)(?=[\s,;/)A-Z]|$)")
COOLEST_SURFACE_C: Final = 40.0  # a surface is no cooler than the ambient that every mark allows
AMBIENT_BEYOND_BELIEF_C: Final = 250.0
IN_BRACKETS_CLASS: Final = Token(r"\(\s*T([1-6])\s*\)")
IN_BRACKETS_CELSIUS: Final = Token(r"\(\s*(?:T\s*)?(\d{2,3})" + _DEGREE + r"\s*\)")
T_LIST: Final = Token(
    r"(\.{2,3}|-|~|/|,|&|\+|to(?![A-Za-z])|bis(?![A-Za-z])|and(?![A-Za-z]))(?=\s*T\s*\d)", any_case=True
)
T_LIST_PAIRED: Final = Token(r";(?=\s*T\s*\d)")
C_LIST: Final = Token(r"(?:\.{2,3}|to(?![A-Za-z])|bis(?![A-Za-z])|-)\s*(?:T\s*)?(\d{2,3})" + _DEGREE, any_case=True)
AT: Final = Token(r"(?:@|at(?![A-Za-z])|for(?![A-Za-z])|bei(?![A-Za-z])|:)", any_case=True)
EPL: Final = Token(r"([GD][abc]|M[ab])(?![A-Za-z0-9])(?:\s*/\s*([GD][abc]|M[ab])(?![A-Za-z0-9]))?")
SUFFIX: Final = Token(r"([XU])(?![A-Za-z0-9])")
IP: Final = Token(
    r"IP[\s-]?([0-6X][0-9X]K?(?:[A-DHMSW](?![A-Za-z]))?(?:\s?/\s?(?:IP\s?)?[0-6X]?[0-9X]K?(?![0-9]))*)",
    any_case=True,
)
ENCLOSURE: Final = Token(
    r"(?:NEMA|Type|Encl(?:osure)?\.?\s+Type)\s*\d{1,2}[A-Z]{0,2}(?:\s?[/,]\s?\d{1,2}[A-Z]{0,2})*(?![A-Za-z0-9])",
    any_case=True,
)
SEPARATOR: Final = Token(r"[;,/|&+]|(?:and|und|et)(?![A-Za-z])")
SOFT_SEPARATOR: Final = Token(r"[,/]|-(?=\s*[A-Za-z])")

ZONE_MARK: Final = Token(
    r"(?:(?:Class|Cl)\.?\s*(?:I{1,3})\s*[,;/]?\s*)?Zone\s*(20|21|22|0|1|2)(?!\d)\s*,?\s*(?=(?:AEx|Ex)(?![A-Z]{3}))",
    any_case=True,
)
LEAD: Final = Token(
    r"(XP|IS|DIP|NI|I\.S\.|intrinsically[\s-]safe|explosion[\s-]?proof|dust[\s-]ignition[\s-]?proof"
    r"|non-?\s?incendive)(?:\s+for)?\s*[:,/]?\s*(?=(?:Class|Cl)(?:es)?(?![a-z]))",
    any_case=True,
)
# Associated apparatus before its classes: AIS Class I Div 1, [IS] CL I DIV 1 GP A-D, Associated apparatus for Class I.
ASSOCIATED_LEAD: Final = Token(
    r"(?:AIS|\[\s*IS\s*\]|Associated\s+(?:apparatus|equipment)(?:\s*\[\s*IS\s*\])?)"
    r"(?:\s+(?:for|providing\s+IS\s+(?:connections?|circuits?)\s+(?:to|for)))?\s*[:,/]?\s*(?=(?:Class|Cl)(?:es)?(?![a-z]))",
    any_case=True,
)
# What protects it, behind the classes: Class I Div 1 Groups C, D explosionproof.
TAIL: Final = Token(
    r"(?:[-,]\s*)?\(?\s*(XP|DIP|NI|IS|I\.S\.|intrinsically[\s-]safe|explosion[\s-]?proof|dust[\s-]ignition[\s-]?proof"
    r"|non-?\s?incendive)(?![A-Za-z0-9/]|\s*(?:for\s*)?[:,]?\s*Cl)\s*\)?",
    any_case=True,
)
# As approval listings write it: XP / I / 1 / BCD / T4. An A before it is for associated apparatus.
STROKED: Final = Token(
    r"(?P<associated>A)?(?P<lead>XP|DIP|NI|IS)\s*[-/]\s*(?P<classes>(?:III|II|I)(?:\s*,\s*(?:III|II|I))*)\s*/"
    r"\s*(?:Div\.?\s*)?(?P<division>[12](?:\s*,\s*[12])?)(?!\d)"
    r"(?:\s*/\s*(?:(?:Groups?|Grps?|Gps?|Grs?)\.?\s*)?(?P<letters>[A-G](?:[\s,]*[A-G])*)(?![A-Za-z]))?",
    any_case=True,
)
ENTITY: Final = Token(r"(?:[-,]\s*)?\(?\s*(?:entity|FISCO)(?![A-Za-z])\s*\)?", any_case=True)
CLASS: Final = Token(r"(?:Class(?:es)?|Cl)\.?\s*(III|II|I|[123])(?![A-Za-z0-9])", any_case=True)
CLASS_MORE: Final = Token(r"(?:[,/&+]|and(?![A-Za-z]))\s*(III|II|I)(?![A-Za-z0-9])", any_case=True)
CLASS_SHORT: Final = Token(r"C\s?(III|II|I|[123])\s?[/-]?\s?D(?:iv\.?)?\s?([12])(?!\d)", any_case=True)
DIVISION: Final = Token(
    r"(?:Division|Div)s?\.?\s*([12])(?!\d)(?:\s*(?:[,/&+]|and(?![A-Za-z]))\s*(?:(?:Division|Div)\.?\s*)?([12])(?![\d.]))?",
    any_case=True,
)
GROUPS: Final = Token(r"(?:Groups?|Grps?|Gps?|Grs?)(?![A-Za-z])\.?\s*:?", any_case=True)
LETTERS: Final = Token(r"([A-G]+)(?=T\d|[^A-Za-z0-9]|$)")
LETTERS_TO: Final = Token(r"(?:-|to(?![A-Za-z])|thru(?![A-Za-z])|through(?![A-Za-z]))\s*([A-G])(?![A-Za-z])")
BETWEEN_LETTERS: Final = Token(r"[,&/+]?\s*(?:and(?![A-Za-z])|und(?![A-Za-z])|&)?", any_case=True)
BETWEEN_CLASS_PARTS: Final = Token(r"[,/]|-(?=\s*[A-Za-z])")
BETWEEN_CLASSES: Final = Token(r"[,;/&+]|and(?![A-Za-z])", any_case=True)
ASSOCIATED: Final = Token(r"(?:\(?\s*associated(?:\s+(?:apparatus|equipment))?\s*\)?|\[\s*IS\s*\])", any_case=True)

_ROMAN: Final = {"1": "I", "2": "II", "3": "III"}
_LEADS: Final = {
    "xp": "explosionproof",
    "is": "intrinsically safe",
    "i.s.": "intrinsically safe",
    "dip": "dust-ignitionproof",
    "ni": "nonincendive",
    "int": "intrinsically safe",
    "exp": "explosionproof",
    "dus": "dust-ignitionproof",
    "non": "nonincendive",
}

AMBIENTS: Final = tuple(
    Token(pattern, any_case=True)
    for pattern in (
        rf"\(?\s*{_NUMBER}{_DEGREE}?{_RELATION}{_TA}(?:{_RELATION}{_NUMBER}{_DEGREE}?)?\s*\)?",
        rf"\(?\s*{_TA}\s*{_RELATION}{_NUMBER}{_DEGREE}?\s*\)?",
        rf"\(?\s*{_TA}\s*(?:max(?:imum)?\.?|up\s+to|bis)\s*:?\s*{_NUMBER}{_DEGREE}?\s*\)?",
        rf"\(?\s*{_TA}\s*\(?\s*{_NUMBER}{_DEGREE}?(?:{_RANGE}{_NUMBER}{_DEGREE}?)?(?![\d°])\s*\)?\)?",
        # Without Ta a range counts only if it begins with a sign and has degrees: T80 °C...T130 °C is none.
        rf"\(?\s*([+-]\s?\d{{1,3}}){_DEGREE}?{_RANGE}{_NUMBER}{_DEGREE}\s*\)?",
    )
)
_RELATIONAL, _TA_RELATION, _TA_MAX, _TA_RANGE, _BARE_RANGE = AMBIENTS


def _celsius(text: str) -> float:
    return float(text.replace(" ", "").replace(",", "."))


def take_ambient(scanner: Scanner) -> Ambient | None:
    """Take an ambient range: ``-40 °C ≤ Ta ≤ +60 °C``, ``Tamb = -50 ... +85 °C``, ``Ta max 60``; or None."""
    start = scanner.position
    found: Ambient | None = None
    if match := scanner.take(_RELATIONAL):
        found = _relational(match)
    elif match := scanner.take(_TA_RELATION):
        limit = _celsius(match[2])
        found = Ambient(max_c=limit) if match[1] in "≤<" else Ambient(min_c=limit)
    elif match := scanner.take(_TA_MAX):
        found = Ambient(max_c=_celsius(match[1]))
    elif match := scanner.take(_TA_RANGE):
        first = _celsius(match[1])
        found = Ambient(max_c=first) if match[2] is None else Ambient(min_c=first, max_c=_celsius(match[2]))
    elif match := scanner.take(_BARE_RANGE):
        found = Ambient(min_c=_celsius(match[1]), max_c=_celsius(match[2]))
    if found is None or not _plausible(found):
        scanner.position = start
        return None
    return found


def _plausible(ambient: Ambient) -> bool:
    limits = [limit for limit in (ambient.min_c, ambient.max_c) if limit is not None]
    backwards = len(limits) == 2 and limits[0] >= limits[1]
    return not backwards and all(abs(limit) <= AMBIENT_BEYOND_BELIEF_C for limit in limits)


def _relational(match: re.Match[str]) -> Ambient | None:
    first, before, behind, second = match[1], match[2], match[3], match[4]
    if second is not None and (before in "≤<") != (behind in "≤<"):
        return None
    limits = [_celsius(first), None if second is None else _celsius(second)]
    if before in "≥>":
        limits.reverse()
    return Ambient(min_c=limits[0], max_c=limits[1])


def take_protections(scanner: Scanner) -> tuple[str, ...]:
    """Take protection symbols, longest match first, however they are run together or apart."""
    found: list[str] = []
    while True:
        start = scanner.position
        if found:
            scanner.take(BETWEEN_PROTECTIONS)
        match = None if scanner.peek(PREFIX) else scanner.take(PROTECTION)
        if match is None:
            scanner.position = start
            return tuple(found)
        written = (match["series"] or match["symbol"]).casefold().replace(" ", "")
        symbol = _CANONICAL[written]
        if match["zone"]:
            symbol += f" {(match['method'] or '').upper()}{match['zone']}"
        found.append(symbol)


def take_group(scanner: Scanner) -> tuple[str, ...]:
    """Take a gas or dust group, or several with strokes; an ATEX group with its category is none."""
    start = scanner.position
    match = scanner.take(GROUP)
    if match is None:
        return ()
    behind = scanner.position
    scanner.position = start
    if take_categories(scanner):
        scanner.position = start
        return ()
    scanner.position = behind
    groups = [_group(match[1])]
    while more := scanner.take(GROUP_MORE):
        groups.append(_group(more[1]))
    if len({len(group) for group in groups}) > 1:  # IIC/IIIC: a gas and a dust mark in one
        raise UnreadableMarking(f"a gas group and a dust group in one marking: {'/'.join(groups)}")
    return tuple(groups)


def _group(text: str) -> str:
    return text.replace(" ", "").upper()


def take_gas(scanner: Scanner) -> tuple[str | None, str | None]:
    """Take the gas behind a group: (extra, only), as written."""
    if match := scanner.take(GAS_EXTRA):
        return match[1].strip(), None
    start = scanner.position
    if match := scanner.take(GAS_ONLY):
        gas = match[1].strip()
        if gas.startswith("+"):
            return gas[1:].strip() or None, None
        if re.match(r"T\s*(?:\d|a|amb)|Ex|[123]\s*[GD]?$|M[12]$|.*\d\s*C$", gas) is None:
            return None, gas
    scanner.position = start
    return None, None


def _take_gas_of(scanner: Scanner, groups: tuple[str, ...]) -> tuple[str | None, str | None]:
    extra, only = take_gas(scanner) if groups else (None, None)
    if (extra and groups[0] not in ("IIA", "IIB", "IIC")) or (only and groups[0].startswith("III")):
        raise UnreadableMarking(f"group {groups[0]} with a gas, {extra or only}")
    return extra, only


def take_categories(scanner: Scanner) -> tuple[Category, ...]:
    """Take ATEX group and category, or several in a row (``II 1 G, II 1 D``)."""
    found: list[Category] = []
    while True:
        start = scanner.position
        if found:
            scanner.take(SEPARATOR)
        group = scanner.take(GROUP_WORD)
        match = scanner.take(CATEGORY) if group or found else None
        made = _categories(group[1].upper() if group else found[-1].group, match) if match else ()
        if not made:
            scanner.position = start
            return tuple(dict.fromkeys(found))
        found += made


def _categories(group: str, match: re.Match[str]) -> tuple[Category, ...]:
    if (group == "I") != bool(match["m"] or match["mout"]):
        return ()
    if match["m"] or match["mout"]:
        if match["side"] or match["pre"] or match["behind"]:
            return ()
        number = (match["m"] or match["mout"]).strip("() ")[-1]
        return (Category(group=group, letter="M", **{"body" if match["m"] else "output": number}),)
    if not match["side"]:
        return ()
    letters = [letter for letter in "GD" if letter in match["side"].upper()]
    bracket = match["pre"] or match["only"] or match["out"]
    output = bracket.strip("() ") if bracket else None
    numbers = [number for number in (match["one"], match["two"]) if number]
    body = max(numbers, default=None)  # of a partition the weaker side is the body's
    process = min(numbers) if len(numbers) == 2 and numbers[0] != numbers[1] else None
    if match["outside"] and match["outside"].upper() != "".join(letters):
        return ()
    made = [Category(group=group, letter=letter, body=body, process=process, output=output) for letter in letters]
    if match["behind"]:
        fed = [letter for letter in "GD" if letter in match["behindside"].upper()]
        made = [replace(c, output=match["behind"]) if c.letter in fed else c for c in made]
        made += [Category(group=group, letter=x, output=match["behind"]) for x in fed if x not in letters]
    return tuple(made)


def take_temperatures(scanner: Scanner) -> tuple[MarkedTemperature, ...]:
    """Take T classes or degrees: one, a range, a list, or classes paired with ambients; empty without."""
    first = _take_temperature(scanner, paired=False)
    if first is None:
        return ()
    found = [first]
    while True:
        start = scanner.position
        if take_ambient(scanner):  # T4 -40 °C ≤ Ta: no list
            scanner.position = start
            return tuple(found)
        nxt: MarkedTemperature | None = None
        if scanner.take(T_LIST) or (found[-1].ambient and scanner.take(T_LIST_PAIRED)):
            nxt = _take_temperature(scanner, paired=found[-1].ambient is not None)
        elif found[-1].celsius is not None and found[-1].ambient is None and (more := scanner.take(C_LIST)):
            nxt = MarkedTemperature(celsius=float(more[1]))
        if nxt is None:
            scanner.position = start
            return tuple(found)
        found.append(nxt)


def _take_temperature(scanner: Scanner, *, paired: bool) -> MarkedTemperature | None:
    if match := scanner.take(T_CLASS):
        figure = scanner.take(IN_BRACKETS_CELSIUS)
        found = MarkedTemperature(t_class=f"T{match[1]}", celsius=float(figure[1]) if figure else None)
    elif match := scanner.take(T_LAYER):
        found = MarkedTemperature(celsius=float(match[2]), layer_mm=float(match[1]))
    elif match := scanner.take(T_CELSIUS):
        t_class = scanner.take(IN_BRACKETS_CLASS)
        found = MarkedTemperature(celsius=float(match[1]), t_class=f"T{t_class[1]}" if t_class else None)
    elif match := scanner.take(T_NO_UNIT):
        scanner.flags.add("temperature_unit_missing")
        found = MarkedTemperature(celsius=float(match[1]))
    else:
        return None
    if found.max_c <= COOLEST_SURFACE_C:
        raise UnreadableMarking(f"a surface temperature of {found.max_c:g} degC")
    return _take_pair(scanner, found, paired=paired)


def _take_pair(scanner: Scanner, temperature: MarkedTemperature, *, paired: bool) -> MarkedTemperature:
    """Take the ambient that belongs to this temperature: in brackets, or among paired ones."""
    start = scanner.position
    joined = scanner.take(AT) is not None
    scanner.skip_blanks()
    bracket = scanner.text.startswith("(", scanner.position)
    ambient = take_ambient(scanner)
    more = scanner.peek(T_LIST) or scanner.peek(T_LIST_PAIRED)
    if ambient and (bracket or joined or more or paired):
        return replace(temperature, ambient=ambient)
    scanner.position = start
    return temperature


def take_epl(scanner: Scanner) -> tuple[str, str] | None:
    """Take an EPL or a pair: (process side, body), the body being the weaker; None without."""
    start = scanner.position
    match = scanner.take(EPL)
    if match is None:
        return None
    first = match[1][0].upper() + match[1][1].lower()
    second = match[2][0].upper() + match[2][1].lower() if match[2] else first
    if first[0] != second[0]:
        scanner.position = start
        return None
    return strongest([first, second]), weakest([first, second])


def take_letters(scanner: Scanner) -> tuple[str, ...]:
    """Take group letters A to G behind the word Group: apart, run together, or a range A-D."""
    found: list[str] = []
    while True:
        start = scanner.position
        if found:
            scanner.take(BETWEEN_LETTERS)
        match = scanner.take(LETTERS)
        letters = match[1].upper() if match else ""
        if not letters:
            scanner.position = start
            return tuple(sorted(set(found)))
        found += letters
        if to := scanner.take(LETTERS_TO):
            found += [letter for letter in "ABCDEFG" if letters[-1] <= letter <= to[1].upper()]


@dataclass(slots=True, kw_only=True)
class ClassPart:
    """One `Class ... Division ... Group ...`: what stands in it, before classes and letters are joined."""

    classes: list[str]
    division: str | None = None
    letters: tuple[str, ...] = ()
    lead: str | None = None
    associated: bool = False


def take_class(scanner: Scanner) -> ClassPart | None:
    """Take one class with its division and group letters, in whatever order; None without."""
    start = scanner.position
    if stroked := scanner.take(STROKED):
        return ClassPart(
            classes=[each.strip().upper() for each in stroked["classes"].split(",")],
            division=min(each.strip() for each in stroked["division"].split(",")),
            letters=tuple(sorted({letter for letter in (stroked["letters"] or "").upper() if letter.isalpha()})),
            lead=_LEADS[stroked["lead"].casefold()],
            associated=stroked["associated"] is not None,
        )
    lead = None
    associated = scanner.take(ASSOCIATED_LEAD) is not None
    if not associated:
        lead = scanner.take(LEAD)
    if short := scanner.take(CLASS_SHORT):
        part = ClassPart(classes=[_class(short[1])], division=short[2])
    elif match := scanner.take(CLASS):
        part = ClassPart(classes=[_class(match[1])])
        while more := scanner.take(CLASS_MORE):
            part.classes.append(_class(more[1]))
    else:
        scanner.position = start
        return None
    part.associated = associated
    if associated:
        part.lead = _LEADS["is"]
    elif lead:
        part.lead = _protection_named(lead[1])
    while True:
        here = scanner.position
        scanner.take(BETWEEN_CLASS_PARTS)
        if part.division is None and (match := scanner.take(DIVISION)):
            part.division = min(match[1], match[2] or match[1])  # Div 1 & 2: what Div 1 accepts, both accept
            continue
        if not part.letters and (scanner.take(GROUPS) or part.division):  # Class I Div 2 BCD, without the word
            part.letters = take_letters(scanner)
            if part.letters:
                continue
        scanner.position = here
        return part


def _protection_named(word: str) -> str:
    return _LEADS.get(word.casefold()) or _LEADS[word.casefold()[:3]]


def _class(text: str) -> str:
    return _ROMAN.get(text, text.upper())


def class_letters(part: ClassPart) -> list[tuple[str, tuple[str, ...]]]:
    """Return the letters that belong to each class of a part: A to D to class I, E to G to class II."""
    if len(part.classes) == 1:
        return [(part.classes[0], part.letters)]
    return [
        (class_, tuple(letter for letter in part.letters if letter in CLASS_LETTERS[class_])) for class_ in part.classes
    ]


def take_t_codes(scanner: Scanner) -> tuple[MarkedTemperature, ...]:
    """Take the T code of a division mark (T1..T6, T2A..T4A), or several; empty without."""
    start = scanner.position
    scanner.take(BETWEEN_CLASSES)
    scanner.take(T_CODE_WORD)
    found: list[MarkedTemperature] = []
    while True:
        here = scanner.position
        if found and not scanner.take(T_LIST):
            break
        match = scanner.take(T_CODE)
        code = f"T{match[1]}{(match[2] or '').upper()}" if match else ""
        if match is None or code not in T_CODE_C:
            scanner.position = here
            break
        figure = scanner.take(IN_BRACKETS_CELSIUS)
        temperature = MarkedTemperature(t_class=code, celsius=float(figure[1]) if figure else None)
        found.append(_take_pair(scanner, temperature, paired=bool(found and found[-1].ambient)))
    if not found:
        if degrees := scanner.take(T_CELSIUS):  # Class II and III may state degrees
            return (MarkedTemperature(celsius=float(degrees[1])),)
        scanner.position = start
    return tuple(found)


class RecordReader:
    """Recursive descent over one text: record, marking, field, bracket, division mark."""

    def __init__(self, text: str, *, fold: bool) -> None:
        self.scanner = Scanner(text, fold=fold)
        self.entries: list[MarkingEntry] = []
        self.certificates: list[Certificate] = []
        self.ip: list[str] = []
        self.marked_x = False
        self.part = 0

    def record(self) -> None:
        """Read the whole text: markings, with ambient, IP and certificates between or behind; or raise."""
        scanner = self.scanner
        while True:
            while scanner.take(SEPARATOR):
                pass
            if scanner.ended:
                break
            if self._certificate() or self._extras():
                continue
            if self._marking():
                self.part += 1
                continue
            raise UnreadableMarking(f"cannot read {scanner.rest()!r}")
        if not self.entries:
            raise UnreadableMarking("no type of protection, class or category")
        self._spread_ambients()

    def _extras(self) -> bool:
        """Take what may stand between or behind markings: IP, enclosure type, ambient, X or U."""
        scanner = self.scanner
        if self._take_ip() or scanner.take(ENCLOSURE):
            return True
        if ambient := take_ambient(scanner):
            if not self.entries:
                raise UnreadableMarking("an ambient range before the marking it belongs to")
            for number, entry in enumerate(self.entries):
                if entry.part == self.entries[-1].part:
                    if entry.ambient is not None:
                        raise UnreadableMarking("two ambient ranges for one marking")
                    self.entries[number] = replace(entry, ambient=ambient)
            return True
        if self.entries and (match := scanner.take(SUFFIX)):
            self._suffix(match[1].upper())
            return True
        return False

    def _suffix(self, letter: str) -> None:
        if letter == "X":
            self.marked_x = True
        else:
            self.entries[-1] = replace(self.entries[-1], component=True)

    def _take_ip(self) -> bool:
        match = self.scanner.take(IP)
        if match:
            self.ip.append("IP" + re.sub(r"\s|IP", "", match[1].upper()))
        return match is not None

    def _certificate(self) -> bool:
        certificate = take_certificate(self.scanner)
        if certificate:
            self.certificates.append(certificate)
            self.marked_x = self.marked_x or certificate.suffix == "X"
        return certificate is not None

    # marking := iec | division
    def _marking(self) -> bool:
        scanner = self.scanner
        start = scanner.position
        while scanner.take(CE):
            pass
        symbol = scanner.take(SYMBOL)
        if not symbol and (prefix := scanner.take(PREFIX)):  # the symbol typed as plain Ex before a category
            here = scanner.position
            if take_categories(scanner):
                scanner.position = here
            else:
                scanner.position = prefix.start()
        categories = take_categories(scanner)
        if scanner.take(SEPARATOR) and not categories:
            scanner.position = start
            return False
        if self._associated_only(categories) or self._field(categories):
            return True
        if categories:
            return self._atex_only(categories)
        if self._division_mark():
            return True
        scanner.position = start
        return False

    # "[" prefix assoc "]" [ group ]
    def _associated_only(self, categories: tuple[Category, ...]) -> bool:
        scanner = self.scanner
        start = scanner.position
        if not (scanner.take(OPEN) and (prefix := scanner.take(PREFIX))):
            scanner.position = start
            return False
        output, side = self._bracket_content()
        groups = take_group(scanner)
        extra, only = _take_gas_of(scanner, groups)
        output = self._with_derived(output, side or side_of_group(groups[0] if groups else None, (), ()))
        self._add(
            MarkingEntry(
                scheme="associated",
                prefix=_prefix(prefix[1]),
                categories=categories,
                outputs=(output,),
                group=_weakest_group(groups),
                groups_marked=groups,
                gas_extra=extra,
                gas_only=only,
            )
        )
        return True

    def _bracket_content(self) -> tuple[Output, Side | None]:
        scanner = self.scanner
        protections = take_protections(scanner)
        if not protections:
            raise UnreadableMarking(f"no type of protection in the bracket at {scanner.rest()!r}")
        epl: tuple[str, str] | None = None
        groups: tuple[str, ...] = ()
        while not scanner.take(CLOSE):
            if epl is None and (epl := take_epl(scanner)):
                continue
            if not groups and (groups := take_group(scanner)):
                continue
            if scanner.take(SOFT_SEPARATOR):
                continue
            raise UnreadableMarking(f"cannot read {scanner.rest()!r} in the bracket")
        side: Side | None = None
        if epl:
            side = SIDE_OF_LETTER[epl[1][0]]
        elif groups:
            side = side_of_group(groups[0], (), ())
        elif any(protection.partition(" ")[0] in DUST_SERIES for protection in protections):
            side = "dust"
        output = Output(
            protections=protections,
            epl=epl[1] if epl else None,
            epl_marked=epl is not None,
            group="/".join(groups) or None,
        )
        return output, side

    def _with_derived(self, output: Output, side: Side | None) -> Output:
        if output.epl is not None:
            return output
        return replace(output, epl=derived_epl(output.protections, side=side or "gas"))

    # [ zone ] prefix item { item } [ grouping ] [ temp ] [ epl ] [ "U" ]
    def _field(self, categories: tuple[Category, ...]) -> bool:
        scanner = self.scanner
        start = scanner.position
        zone = scanner.take(ZONE_MARK)
        prefix = scanner.take(PREFIX)
        if not prefix:
            scanner.position = start
            return False
        protections: tuple[str, ...] = ()
        brackets: list[tuple[Output, Side | None]] = []
        while True:
            if found := take_protections(scanner):
                protections += found
            elif scanner.take(OPEN):
                scanner.take(PREFIX)
                brackets.append(self._bracket_content())
            else:
                break
        if not protections and not brackets:
            raise UnreadableMarking(f"no type of protection behind {prefix[1]} at {scanner.rest()!r}")
        groups: tuple[str, ...] = ()
        extra = only = None
        temperatures: tuple[MarkedTemperature, ...] = ()
        epl: tuple[str, str] | None = None
        ambient: Ambient | None = None
        component = False
        while True:
            here = scanner.position
            scanner.take(SOFT_SEPARATOR)
            if self._take_ip():
                continue
            if ambient is None and (ambient := take_ambient(scanner)):
                continue
            if epl is None and (epl := take_epl(scanner)):
                continue
            if temperatures and self._is_dust_of_old_mark(categories, temperatures):
                scanner.position = here
                break
            if not temperatures and (temperatures := take_temperatures(scanner)):
                continue
            if not groups and (groups := take_group(scanner)):
                extra, only = _take_gas_of(scanner, groups)
                continue
            if scanner.peek(OPEN) and not scanner.peek(OPEN_WITH_PREFIX):
                scanner.take(OPEN)
                brackets.append(self._bracket_content())
                continue
            if match := scanner.take(SUFFIX):
                component = component or match[1].upper() == "U"
                self.marked_x = self.marked_x or match[1].upper() == "X"
                continue
            scanner.position = here
            break
        series = any(protection.partition(" ")[0] in DUST_SERIES for protection in protections)
        if not groups and not series:
            raise UnreadableMarking(f"no gas or dust group in {scanner.text[start : scanner.position].strip()!r}")
        if not protections and (epl or temperatures):
            raise UnreadableMarking("an EPL or a temperature, but no type of protection of the equipment itself")
        group = _weakest_group(groups) or "III"
        body_side = SIDE_OF_LETTER[epl[1][0]] if epl else side_of_group(group, protections, ())
        classes, degrees = _apart(temperatures)
        if "temperature_unit_missing" in scanner.flags and body_side != "dust":
            raise UnreadableMarking(f"no T class, and degrees without a unit: {degrees[0].max_c:g}")
        if classes and degrees:
            if not any(category.letter == "D" for category in categories) or group.startswith("III"):
                raise UnreadableMarking("a T class and a dust temperature in one marking")
            temperatures = classes
        entry = MarkingEntry(
            scheme="iec" if protections else "associated",
            prefix=_prefix(prefix[1]),
            categories=categories,
            protections=protections,
            outputs=tuple(self._with_derived(output, side or body_side) for output, side in brackets),
            group=group,
            groups_marked=groups,
            gas_extra=extra,
            gas_only=only,
            temperatures=temperatures,
            epl=epl[1] if epl else None,
            epl_process=epl[0] if epl and epl[0] != epl[1] else None,
            epl_source="explicit" if epl else None,
            zone=zone[1] if zone else None,
            component=component,
            ambient=ambient,
        )
        self._add(entry)
        if classes and degrees:
            self.part += 1
            self._add_dust_by_category(categories, degrees)
        else:
            self._dust_of_old_mark(categories, temperatures)
        return True

    def _is_dust_of_old_mark(
        self, categories: tuple[Category, ...], temperatures: tuple[MarkedTemperature, ...]
    ) -> bool:
        """Say whether a surface temperature follows the T class, as `II 2 GD EEx d IIC T6 T85 °C` has it."""
        return (
            any(category.letter == "D" for category in categories)
            and all(t.t_class for t in temperatures)
            and self.scanner.peek(T_CELSIUS) is not None
        )

    def _dust_of_old_mark(self, categories: tuple[Category, ...], temperatures: tuple[MarkedTemperature, ...]) -> None:
        scanner = self.scanner
        here = scanner.position
        scanner.take(SOFT_SEPARATOR)
        if temperatures and self._is_dust_of_old_mark(categories, temperatures):
            self.part += 1
            self._add_dust_by_category(categories, take_temperatures(scanner))
        else:
            scanner.position = here

    def _add_dust_by_category(
        self, categories: tuple[Category, ...], temperatures: tuple[MarkedTemperature, ...]
    ) -> None:
        dust = tuple(category for category in categories if category.letter == "D")
        self._add(MarkingEntry(scheme="atex only", categories=dust, group="III", temperatures=temperatures))

    # atex temp: dust marks older than the dust standards
    def _atex_only(self, categories: tuple[Category, ...]) -> bool:
        while self._take_ip():
            pass
        temperatures = take_temperatures(self.scanner)
        if not temperatures or any(category.letter != "D" for category in categories):
            raise UnreadableMarking(f"nothing that can be read behind category {categories[0].text}")
        self._add_dust_by_category(categories, temperatures)
        return True

    # cls { separator cls } [ T code ] [ "associated" ]
    def _division_mark(self) -> bool:
        scanner = self.scanner
        parts: list[ClassPart] = []
        while True:
            here = scanner.position
            if parts:
                scanner.take(BETWEEN_CLASSES)
            part = None if scanner.peek(ZONE_MARK) else take_class(scanner)
            if part is None:
                scanner.position = here
                break
            parts.append(part)
        if not parts:
            return False
        associated, tail = False, ""
        temperatures: tuple[MarkedTemperature, ...] = ()
        while True:
            if scanner.take(ASSOCIATED):
                associated = True
            elif match := scanner.take(TAIL):
                said = _protection_named(match[1])
                if said != (tail or said) or any(part.lead not in (None, said) for part in parts):
                    raise UnreadableMarking(f"two types of protection: {tail or parts[0].lead}, {said}")
                tail = said
            elif not scanner.take(ENTITY) and (temperatures or not (temperatures := take_t_codes(scanner))):
                break
        if any(t.t_class is None for t in temperatures) and any("I" in part.classes for part in parts):
            raise UnreadableMarking("degrees instead of a T code on Class I")
        for part in parts:
            for class_, letters in class_letters(part):
                self._add(
                    MarkingEntry(
                        scheme="associated" if associated or part.associated else "division",
                        class_=class_,
                        division=part.division,
                        groups=letters,
                        division_protection=part.lead or tail or None,
                        temperatures=temperatures,
                    )
                )
        return True

    def _add(self, entry: MarkingEntry) -> None:
        entry = replace(entry, part=self.part, own_categories=bool(entry.categories))
        if not entry.categories and entry.scheme in ("iec", "associated") and not entry.class_:
            entry = replace(entry, categories=self._inherited(entry))
        self.entries.append(_with_epl(entry))

    def _inherited(self, entry: MarkingEntry) -> tuple[Category, ...]:
        """Return the categories written before an earlier marking that are meant for this one, too (GD)."""
        for earlier in reversed(self.entries):
            if earlier.own_categories:
                side = entry.side or (SIDE_OF_LETTER[o.epl[0]] if (o := entry.outputs[0]).epl else None)
                letters = {category.letter for category in earlier.categories}
                taken = {e.side for e in self.entries if e.categories}
                if len(letters) > 1 and side not in taken:
                    return tuple(c for c in earlier.categories if SIDE_OF_LETTER[c.letter] == side)
                return ()
        return ()

    def _spread_ambients(self) -> None:
        """A range behind several markings is meant for all that have none; one before counts if narrower."""
        stated = None
        for number in range(len(self.entries) - 1, -1, -1):
            entry = self.entries[number]
            if entry.ambient is not None:
                stated = entry.ambient
            elif stated is not None and not entry.is_paired:
                self.entries[number] = replace(entry, ambient=stated)
        earlier = None
        for number, entry in enumerate(self.entries):
            if entry.ambient is not None:
                earlier = entry.ambient
            elif earlier is not None and not entry.is_paired:
                low, high = entry.ambient_min_c, entry.ambient_max_c
                if earlier.min_c is not None and low is not None:
                    low = max(low, earlier.min_c)
                if earlier.max_c is not None:
                    high = min(high, earlier.max_c)
                if (low, high) != (entry.ambient_min_c, entry.ambient_max_c):
                    self.entries[number] = replace(entry, ambient=Ambient(min_c=low, max_c=high))


def _prefix(text: str) -> str:
    return {"eex": "EEx", "aex": "AEx", "ex": "Ex"}[text.casefold()]


def _weakest_group(groups: tuple[str, ...]) -> str | None:
    """Of groups marked with a stroke the least demanding one counts for the equipment itself."""
    order = ("II", "IIA", "IIB", "IIC", "III", "IIIA", "IIIB", "IIIC", "I")
    return min(groups, key=order.index, default=None)


def _apart(
    temperatures: tuple[MarkedTemperature, ...],
) -> tuple[tuple[MarkedTemperature, ...], tuple[MarkedTemperature, ...]]:
    """Return the T classes and the bare degrees of a list that holds both (T4/T135 °C)."""
    classes = tuple(t for t in temperatures if t.t_class)
    return classes, tuple(t for t in temperatures if not t.t_class)


def _with_epl(entry: MarkingEntry) -> MarkingEntry:
    """Give an entry without a marked EPL the one that follows: the weaker of protections and category."""
    if entry.epl or entry.is_output or entry.class_:
        return entry
    side = entry.side
    if side is None:
        return entry
    derived = derived_epl(entry.protections, side=side)
    if derived and entry.zone and derived[0] in (by_zone := weakest(EPLS_IN_ZONE[entry.zone])):
        derived = weakest([derived, by_zone])  # Zone 1 AEx ia: marked for no more than Zone 1
    category = next((c for c in entry.categories if SIDE_OF_LETTER[c.letter] == side and c.body), None)
    if category is None:
        return replace(entry, epl=derived, epl_source="derived" if derived else None)
    body = category.epl(category.body) or ""
    process = category.epl(category.process) or body
    if derived is None:
        if entry.protections and all(protection_epl(p, side=side) == "" for p in entry.protections):
            return entry  # a protection that is not for this atmosphere: the category alone is no evidence
        return replace(entry, epl=body, epl_process=process if process != body else None, epl_source="category")
    if not stronger(derived, body):
        return replace(entry, epl=derived, epl_source="derived")
    process = weakest([derived, process])
    return replace(entry, epl=body, epl_process=process if process != body else None, epl_source="category")
