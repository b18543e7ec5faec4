"""The entity comparison of an intrinsically safe circuit: a source against devices and cable, term by term.

All figures are decimals in the units of the certificates, so that 0.083 microfarad is 83 nF and what is equal
passes. What passes here is not thereby safe, certified or compliant: screening aid - requires review by a
competent person. Clauses are from memory of the named editions.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from decimal import ROUND_FLOOR, Decimal
from types import MappingProxyType
from typing import Final, Literal

Group = Literal["IIC", "IIB", "IIA"]
Quantity = Literal["voltage", "current", "power", "capacitance", "inductance"]

LUMPED_SHARE: Final = Decimal("0.01")
"""From here on a lumped part counts (IEC 60079-11:2011 and IEC 60079-14:2013 16.2.2, from memory)."""
CAPS_NF: Final[Mapping[str, Decimal]] = MappingProxyType(
    {"IIC": Decimal(600), "IIB": Decimal(1000), "IIA": Decimal(1000)}
)
"""The most that is left of a halved Co, cable included (same source)."""
IGNITION_UJ: Final[Mapping[str, Decimal]] = MappingProxyType(
    {"IIC": Decimal(40), "IIB": Decimal(160), "IIA": Decimal(320)}
)
"""The energies of the L/R formula of IEC 60079-11, in microjoule (from memory)."""
MORE_DEMANDING: Final[Mapping[str, tuple[Group, ...]]] = MappingProxyType(
    {"IIC": ("IIC",), "IIB": ("IIB", "IIC"), "IIA": ("IIA", "IIB", "IIC")}
)
"""Whose Co and Lo may be taken in a group: its own, else those of a more demanding one; never the reverse."""


@dataclass(frozen=True, slots=True, kw_only=True)
class CableDefaults:
    """What a standard gives for a two- or three-core cable whose parameters are not given.

    Its capacitance in pF/m, inductance in microhenry/m and inductance over resistance in microhenry/ohm, and
    whose figures they are: the bases are never mixed.
    """

    pf_per_m: Decimal
    uh_per_m: Decimal
    uh_per_ohm: Decimal | None
    basis: str


_FEET_PER_M: Final = 1 / Decimal("0.3048")
IEC_DEFAULTS: Final = CableDefaults(
    pf_per_m=Decimal(200),
    uh_per_m=Decimal(1),
    uh_per_ohm=Decimal(30),
    basis="IEC 60079-14:2013 16.2.2, from memory",
)
US_DEFAULTS: Final = CableDefaults(
    pf_per_m=60 * _FEET_PER_M,
    uh_per_m=Decimal("0.20") * _FEET_PER_M,
    uh_per_ohm=None,
    basis="60 pF/ft and 0.20 uH/ft of ANSI/ISA RP12.06.01, from memory",
)


def exact(value: float) -> Decimal:
    """Return a number as the decimal that was written, not as the binary fraction nearest to it.

    >>> exact(0.1 + 0.2), exact(0.083e-6 * 1e9)
    (Decimal('0.3'), Decimal('83'))
    """
    return Decimal(f"{value:.12g}")


# ----------------------------------------------------------------------------------------------- what is compared


@dataclass(frozen=True, slots=True, kw_only=True)
class Source:
    """An associated apparatus: what it can give, for the group that was asked for.

    Attributes
    ----------
    name, came_from
        What it is called, and where its figures stand.
    uo_v, io_ma, po_mw
        Uo, Io and Po.
    co_nf, co_group, lo_mh, lo_group
        Co and Lo, and the group whose figures they are.
    lo_ro_uh_per_ohm
        Lo/Ro.
    combined_pairs
        Whether Co and Lo were assessed together, for lumped capacitance and inductance at once.
    """

    name: str
    came_from: str = ""
    uo_v: Decimal | None = None
    io_ma: Decimal | None = None
    po_mw: Decimal | None = None
    co_nf: Decimal | None = None
    co_group: str = ""
    lo_mh: Decimal | None = None
    lo_group: str = ""
    lo_ro_uh_per_ohm: Decimal | None = None
    combined_pairs: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Apparatus:
    """One device on the circuit: what it bears and what it stores.

    Simple apparatus has no limits of its own; what it does not state of Ci and Li it does not store. `not_set` are
    limits (``Ii``, ``Pi``) that its certificate does not set.
    """

    name: str
    came_from: str = ""
    ui_v: Decimal | None = None
    ii_ma: Decimal | None = None
    pi_mw: Decimal | None = None
    ci_nf: Decimal | None = None
    li_uh: Decimal | None = None
    simple: bool = False
    not_set: frozenset[str] = frozenset()


@dataclass(frozen=True, slots=True, kw_only=True)
class CablePiece:
    """One cable of the run: its length in m and what each metre stores.

    `length_from` and `came_from` say where its length and its figures stand; the figures named in `assumed`
    (``pf_per_m``, ``uh_per_m``, ``uh_per_ohm``) are a standard's for a cable of which nothing is given.
    """

    name: str
    length_m: Decimal | None = None
    length_from: str = ""
    pf_per_m: Decimal | None = None
    uh_per_m: Decimal | None = None
    uh_per_ohm: Decimal | None = None
    came_from: str = ""
    assumed: frozenset[str] = frozenset()


def with_defaults(piece: CablePiece, defaults: CableDefaults) -> CablePiece:
    """Return a cable with the standard's figures for those that are not given.

    >>> piece = with_defaults(CablePiece(name="C1", length_m=Decimal(100), pf_per_m=Decimal(110)), IEC_DEFAULTS)
    >>> piece.pf_per_m, piece.uh_per_m, sorted(piece.assumed)
    (Decimal('110'), Decimal('1'), ['uh_per_m', 'uh_per_ohm'])
    """
    given = {name: getattr(defaults, name) for name in ("pf_per_m", "uh_per_m", "uh_per_ohm")}
    blank = {name: value for name, value in given.items() if getattr(piece, name) is None and value is not None}
    return replace(piece, **blank, assumed=piece.assumed | blank.keys()) if blank else piece


# ------------------------------------------------------------------------------------------- lumped C and L: 1 %, 50 %


@dataclass(frozen=True, slots=True, kw_only=True)
class LumpedLimits:
    """Co and Lo as they count beside the lumped parts of a circuit.

    `halved` says whether both lumped parts reach one percent, `capped` whether the halved Co is cut to the cap;
    the shares are in percent of Co and Lo, cable left out.
    """

    co_nf: Decimal | None
    lo_mh: Decimal | None
    halved: bool = False
    capped: bool = False
    ci_percent: Decimal | None = None
    li_percent: Decimal | None = None
    working: str = ""


def lumped_limits(
    co_nf: Decimal | None,
    lo_mh: Decimal | None,
    *,
    ci_nf: Decimal,
    li_uh: Decimal,
    group: str,
    combined_pairs: bool = False,
) -> LumpedLimits:
    """Return Co and Lo after the rule for lumped capacitance and inductance together.

    Full Co and Lo hold while the lumped Ci is below 1 % of Co or the lumped Li below 1 % of Lo. Where both reach it,
    each is halved, and what is left of Co is at most 600 nF in IIC and 1 microfarad in the other groups. Some texts
    say 'greater than 1 %': from 1 % on is the stricter reading.

    Parameters
    ----------
    co_nf, lo_mh
        Of the source, in the group that was asked for; None where it does not state it.
    ci_nf, li_uh
        Of all devices on the circuit together, cable left out.
    group
        IIC, IIB or IIA.
    combined_pairs
        Whether Co and Lo are pairs assessed for both at once: then they hold as they are.

    Notes
    -----
    IEC 60079-11:2011 and IEC 60079-14:2013 16.2.2 (from memory). For sources with a linear characteristic.

    >>> full = {"co_nf": Decimal(83), "lo_mh": Decimal("3.05"), "group": "IIC"}
    >>> lumped_limits(**full, ci_nf=Decimal(3), li_uh=Decimal(10)).halved
    False
    >>> halved = lumped_limits(**full, ci_nf=Decimal(3), li_uh=Decimal(40))
    >>> halved.co_nf, halved.lo_mh
    (Decimal('41.5'), Decimal('1.525'))
    """
    ci_percent = 100 * ci_nf / co_nf if co_nf else None
    li_percent = li_uh / (10 * lo_mh) if lo_mh else None
    ci_counts = co_nf is not None and ci_nf >= LUMPED_SHARE * co_nf
    li_counts = lo_mh is not None and li_uh >= LUMPED_SHARE * 1000 * lo_mh
    shares = ", ".join(
        f"{name} {_percent(percent)} % of {limit}"
        for name, percent, limit in (("Ci", ci_percent, "Co"), ("Li", li_percent, "Lo"))
        if percent is not None
    )
    if combined_pairs:
        working = "Co and Lo are combined pairs: not halved"
    elif ci_counts and li_counts:
        return replace(_halved(co_nf, lo_mh, group, shares), ci_percent=ci_percent, li_percent=li_percent)
    else:
        working = f"{shares}: not both 1 % or more, not halved" if shares else ""
    return LumpedLimits(co_nf=co_nf, lo_mh=lo_mh, ci_percent=ci_percent, li_percent=li_percent, working=working)


def _halved(co_nf: Decimal | None, lo_mh: Decimal | None, group: str, shares: str) -> LumpedLimits:
    cap, half_nf = CAPS_NF[group], co_nf / 2 if co_nf is not None else None
    capped = half_nf is not None and half_nf > cap
    working = f"{shares}: both 1 % or more, Co and Lo halved"
    if half_nf is not None and capped:
        working += f", Co cut from {number(half_nf)} to {number(cap)} nF"
    return LumpedLimits(
        co_nf=cap if capped else half_nf,
        lo_mh=lo_mh / 2 if lo_mh is not None else None,
        halved=True,
        capped=capped,
        working=working,
    )


def largest_lo_ro(uo_v: Decimal, io_ma: Decimal, *, group: str, li_uh: Decimal = Decimal(0)) -> Decimal | None:
    """Return the largest inductance over resistance of a cable in microhenry/ohm, by the formula of IEC 60079-11.

    (8 e R + sqrt(64 e^2 R^2 - 72 U^2 e L)) / (4.5 U^2), with R the least source resistance and e the energy of the
    group; its margin of 1.5 is in it (from memory; with L above nothing not verified).

    Parameters
    ----------
    uo_v, io_ma
        Of a linear source: R is Uo over Io.
    group
        IIC, IIB or IIA.
    li_uh
        The lumped inductance of the circuit.

    Returns
    -------
    Decimal or None
        None where the lumped inductance leaves nothing.

    >>> round(largest_lo_ro(Decimal(28), Decimal(1000) * 28 / 300, group="IIC"), 1)
    Decimal('54.4')
    """
    if uo_v <= 0 or io_ma <= 0:
        return None
    ohm = 1000 * uo_v / io_ma
    joule = IGNITION_UJ[group] / 1_000_000
    inside = 64 * joule**2 * ohm**2 - 72 * uo_v**2 * joule * li_uh / 1_000_000
    if inside < 0:
        return None
    return (8 * joule * ohm + inside.sqrt()) / (Decimal("4.5") * uo_v**2) * 1_000_000


# ---------------------------------------------------------------------------------------------------- line by line


@dataclass(frozen=True, slots=True, kw_only=True)
class Term:
    """One figure of a line: what it is, its number and unit, and where it came from."""

    name: str
    value: Decimal
    unit: str
    came_from: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Line:
    """One line of the comparison.

    Attributes
    ----------
    quantity
        What is compared.
    device
        The device whose limit it is; empty for the sums of the circuit.
    found, allowed, unit
        The two figures; `found` is at least so much where something is missing.
    terms, limits
        What they are made of.
    missing
        What is not stated of it, as titles of the columns; with the device's name for those of devices.
    passes
        True; False; None where what is missing decides.
    working
        The terms with their figures.
    by_ratio
        Whether the inductance passes because the cable's L/R does.
    ratio_doubtful
        Whether it would pass by the formula with lumped inductance, which is for a person to confirm.
    """

    quantity: Quantity
    found: Decimal | None
    allowed: Decimal | None
    unit: str
    device: str = ""
    terms: tuple[Term, ...] = ()
    limits: tuple[Term, ...] = ()
    missing: tuple[str, ...] = ()
    passes: bool | None = None
    working: str = ""
    by_ratio: bool = False
    ratio_doubtful: bool = False

    @property
    def excess(self) -> Decimal | None:
        """By how much the limit is passed; negative while it holds."""
        return None if self.found is None or self.allowed is None else self.found - self.allowed


@dataclass(frozen=True, slots=True, kw_only=True)
class Comparison:
    """The whole entity comparison of one circuit.

    Attributes
    ----------
    group
        The group that rules.
    lines
        Voltage, current and power of each device, then capacitance and inductance of the circuit.
    limits
        Co and Lo after the rule for lumped parts.
    longest_cable_m, longest_because
        The longest cable in whole metres and what limits it (``capacitance``, ``inductance``); None where it is not
        limited, cannot be told, or the cables of the run are not alike. Nought where not even the devices fit.
    """

    source: Source
    apparatus: tuple[Apparatus, ...]
    cable: tuple[CablePiece, ...]
    group: str
    lines: tuple[Line, ...]
    limits: LumpedLimits
    longest_cable_m: int | None = None
    longest_because: str = ""

    def of(self, quantity: Quantity) -> tuple[Line, ...]:
        """Return the lines about one quantity."""
        return tuple(line for line in self.lines if line.quantity == quantity)

    @property
    def passes(self) -> bool | None:
        """Whether every line passes; None where something is missing and nothing fails."""
        outcomes = [line.passes for line in self.lines]
        return False if False in outcomes else None if None in outcomes else True


_EACH: Final[tuple[tuple[Quantity, str, str, str, str, str], ...]] = (
    ("voltage", "Uo", "uo_v", "Ui", "ui_v", "V"),
    ("current", "Io", "io_ma", "Ii", "ii_ma", "mA"),
    ("power", "Po", "po_mw", "Pi", "pi_mw", "mW"),
)


def compare(source: Source, apparatus: Sequence[Apparatus], cable: Sequence[CablePiece], *, group: str) -> Comparison:
    """Compare a source with the devices and the cable that it feeds.

    Parameters
    ----------
    source
        With the Co and Lo that hold in the group.
    apparatus
        All devices on the circuit, simple apparatus among them.
    cable
        The cables of the run; empty where nothing is known of them.
    group
        IIC, IIB or IIA; dust takes IIB (IEC 60079-11:2011, from memory).

    Notes
    -----
    Uo <= Ui, Io <= Ii and Po <= Pi for each device, sum of Ci with the cable <= Co, sum of Li with the cable <= Lo
    (IEC 60079-14:2013 16.2.2, from memory). The last holds as well where the cable's inductance over resistance is
    at most the source's Lo/Ro and the lumped inductance below 1 % of Lo. Nothing that is not stated is nothing.

    >>> barrier = Source(name="Z", uo_v=Decimal(28), io_ma=Decimal(93), po_mw=Decimal(650), co_nf=Decimal(83),
    ...                  lo_mh=Decimal("3.05"))
    >>> device = Apparatus(name="PT-1", ui_v=Decimal(30), ii_ma=Decimal(120), pi_mw=Decimal(1000), ci_nf=Decimal(3),
    ...                    li_uh=Decimal(10))
    >>> run = CablePiece(name="C", length_m=Decimal(300), pf_per_m=Decimal(200), uh_per_m=Decimal(1))
    >>> found = compare(barrier, [device], [run], group="IIC")
    >>> found.passes, found.longest_cable_m, found.longest_because
    (True, 400, 'capacitance')
    >>> found.lines[3].working
    'Ci 3 nF (PT-1) + C 300 m x 200 pF/m = 60 nF: 63 nF; Co 83 nF'
    """
    lines = [line for each in apparatus for line in _limits_of(source, each)]
    ci, ci_missing = _lumped(apparatus, "ci_nf", "Ci", "nF")
    li, li_missing = _lumped(apparatus, "li_uh", "Li", "mH")
    ci_nf, li_mh = sum((each.value for each in ci), Decimal(0)), sum((each.value for each in li), Decimal(0))
    limits = lumped_limits(
        source.co_nf,
        source.lo_mh,
        ci_nf=ci_nf,
        li_uh=1000 * li_mh,
        group=group,
        combined_pairs=source.combined_pairs,
    )
    doubt = _may_be_halved(
        source, ci_nf, li_mh, ci_missing=ci_missing, li_missing=li_missing, limits=limits, group=group
    )
    if doubt is not None:
        limits = replace(limits, working="")
    route, words = _ratio(source, li_mh, cable, group=group) if not li_missing else ("", "")
    lines.append(_capacitance(source, ci, ci_missing, cable, limits, doubt))
    lines.append(_by_ratio(_inductance(source, li, li_missing, cable, limits, doubt), li_mh, limits, route, words))
    longest, because = _longest(ci_nf, li_mh, cable, limits, known=doubt is None, by_ratio=route == "holds")
    return Comparison(
        source=source,
        apparatus=tuple(apparatus),
        cable=tuple(cable),
        group=group,
        lines=tuple(lines),
        limits=limits,
        longest_cable_m=longest,
        longest_because=because,
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class _Doubt:
    """That Co and Lo may have to be halved, which what is missing decides: the limits then."""

    limits: LumpedLimits
    missing: tuple[str, ...]


def _may_be_halved(
    source: Source,
    ci_nf: Decimal,
    li_mh: Decimal,
    *,
    ci_missing: Sequence[str],
    li_missing: Sequence[str],
    limits: LumpedLimits,
    group: str,
) -> _Doubt | None:
    if limits.halved or source.combined_pairs:
        return None
    missing: list[str] = []
    for stated, lumped, blank, title, share in (
        (source.co_nf, ci_nf, ci_missing, "Co nF", limits.ci_percent),
        (source.lo_mh, li_mh, li_missing, "Lo mH", limits.li_percent),
    ):
        if stated is None and (lumped > 0 or blank):
            missing.append(title)
        missing.extend(blank)
        certain = stated is not None and not blank
        if (certain and share is not None and share < 1) or (lumped == 0 and not blank):
            return None
    return _Doubt(limits=_halved(source.co_nf, source.lo_mh, group, ""), missing=tuple(missing)) if missing else None


def _limits_of(source: Source, each: Apparatus) -> Iterable[Line]:
    for quantity, out, out_field, into, in_field, unit in _EACH:
        gives: Decimal | None = getattr(source, out_field)
        bears: Decimal | None = getattr(each, in_field)
        if into in each.not_set or (each.simple and bears is None):
            continue
        missing = [] if gives is not None else [f"{out} {unit}"]
        missing += [] if bears is not None else [f"{into} {unit} of {each.name}"]
        terms = () if gives is None else (Term(name=out, value=gives, unit=unit, came_from=source.came_from),)
        limits = () if bears is None else (Term(name=into, value=bears, unit=unit, came_from=each.came_from),)
        passes = gives <= bears if gives is not None and bears is not None else None
        working = ""
        if gives is not None and bears is not None:
            a, b = pair(gives, bears)
            working = (
                f"{out} {a} {unit}{_from(source.came_from)}; {into} {b} {unit} of {each.name}{_from(each.came_from)}"
            )
        yield Line(
            quantity=quantity,
            device=each.name,
            found=gives,
            allowed=bears,
            unit=unit,
            terms=terms,
            limits=limits,
            missing=tuple(missing),
            passes=passes,
            working=working,
        )


def _lumped(apparatus: Sequence[Apparatus], name: str, symbol: str, unit: str) -> tuple[list[Term], list[str]]:
    terms: list[Term] = []
    missing: list[str] = []
    for each in apparatus:
        value: Decimal | None = getattr(each, name)
        if value is None:
            if not each.simple:
                missing.append(f"{symbol} {'nF' if unit == 'nF' else 'uH'} of {each.name}")
            continue
        if unit == "mH":
            value = value / 1000
        terms.append(Term(name=f"{symbol} of {each.name}", value=value, unit=unit, came_from=each.came_from))
    return terms, missing


def _stored(cable: Sequence[CablePiece], name: str, unit: str, per_m: str) -> tuple[list[Term], list[str], list[str]]:
    """Return what the cables store in nF or mH, what is missing of them, and the terms in words."""
    terms: list[Term] = []
    missing: list[str] = [] if cable else ["cable length"]
    words: list[str] = []
    for each in cable:
        stores: Decimal | None = getattr(each, name)
        if each.length_m is None:
            missing.append("cable length")
        elif stores is None:
            missing.append("cable type")
        else:
            value = each.length_m * stores / 1000
            came_from = each.came_from if name not in each.assumed else ""
            terms.append(Term(name=each.name, value=value, unit=unit, came_from=came_from))
            words.append(
                f"{each.name} {number(each.length_m)} m{_from(each.length_from)}"
                f" x {number(stores)} {per_m}{_from(came_from)} = {number(value)} {unit}"
            )
    return terms, list(dict.fromkeys(missing)), words


def _capacitance(
    source: Source,
    ci: Sequence[Term],
    ci_missing: Sequence[str],
    cable: Sequence[CablePiece],
    limits: LumpedLimits,
    doubt: _Doubt | None,
) -> Line:
    stored, cable_missing, words = _stored(cable, "pf_per_m", "nF", "pF/m")
    found = sum((each.value for each in (*ci, *stored)), Decimal(0))
    return _sum_line(
        "capacitance",
        "nF",
        found,
        limits.co_nf,
        terms=(*ci, *stored),
        words=[*(_lumped_words(each) for each in ci), *words],
        limit=Term(name="Co", value=source.co_nf, unit="nF", came_from=source.came_from)
        if source.co_nf is not None
        else None,
        group=source.co_group,
        missing=[*([] if source.co_nf is not None else ["Co nF"]), *ci_missing, *cable_missing],
        limits=limits,
        doubt=doubt,
    )


def _inductance(
    source: Source,
    li: Sequence[Term],
    li_missing: Sequence[str],
    cable: Sequence[CablePiece],
    limits: LumpedLimits,
    doubt: _Doubt | None,
) -> Line:
    stored, cable_missing, words = _stored(cable, "uh_per_m", "mH", "uH/m")
    return _sum_line(
        "inductance",
        "mH",
        sum((each.value for each in (*li, *stored)), Decimal(0)),
        limits.lo_mh,
        terms=(*li, *stored),
        words=[*(_lumped_words(each) for each in li), *words],
        limit=Term(name="Lo", value=source.lo_mh, unit="mH", came_from=source.came_from)
        if source.lo_mh is not None
        else None,
        group=source.lo_group,
        missing=[*([] if source.lo_mh is not None else ["Lo mH"]), *li_missing, *cable_missing],
        limits=limits,
        doubt=doubt,
    )


def _ratio(
    source: Source, lumped_mh: Decimal, cable: Sequence[CablePiece], *, group: str
) -> tuple[Literal["", "no", "doubtful", "holds"], str]:
    """Say whether the cable's inductance over resistance may stand for its inductance, and the figures in words."""
    allowed = source.lo_ro_uh_per_ohm
    ratios = [each.uh_per_ohm for each in cable]
    if allowed is None or not ratios or None in ratios:
        return "", ""
    ratio = max(each for each in ratios if each is not None)
    a, b = pair(ratio, allowed)
    words = f"cable L/R {a} uH/ohm, Lo/Ro {b} uH/ohm"
    if ratio > allowed:
        return "no", words
    if lumped_mh == 0 or (source.lo_mh is not None and lumped_mh < LUMPED_SHARE * source.lo_mh):
        return "holds", f"{words}: the cable's inductance need not be counted"
    words += ", which holds without lumped inductance"
    if source.uo_v is None or source.io_ma is None:
        return "no", words
    left = largest_lo_ro(source.uo_v, source.io_ma, group=group, li_uh=1000 * lumped_mh)
    if left is None or ratio > left:
        return "no", words
    words += f"; with it {number(round(left, 1))} uH/ohm by the formula of IEC 60079-11 (from memory, not verified)"
    return "doubtful", words


def _by_ratio(line: Line, lumped_mh: Decimal, limits: LumpedLimits, route: str, words: str) -> Line:
    """Let the cable's inductance over resistance stand for its inductance, where its own is too much or not known."""
    if line.passes or not words or (limits.lo_mh is not None and lumped_mh > limits.lo_mh):
        return line
    working = f"{line.working}; {words}" if line.working else words
    if route == "holds":
        return replace(line, passes=True, missing=(), by_ratio=True, working=working)
    return replace(line, working=working, ratio_doubtful=route == "doubtful" and line.passes is False)


def _sum_line(
    quantity: Quantity,
    unit: str,
    found: Decimal,
    allowed: Decimal | None,
    *,
    terms: Sequence[Term],
    words: Sequence[str],
    limit: Term | None,
    group: str,
    missing: Sequence[str],
    limits: LumpedLimits,
    doubt: _Doubt | None,
) -> Line:
    passes: bool | None = None
    working = ""
    if allowed is not None:
        a, b = pair(found, allowed)
        symbol = "Co" if unit == "nF" else "Lo"
        full = f"{symbol}{f' for {group}' if group else ''}"
        came_from = _from(limit.came_from) if limit is not None else ""
        if limits.halved and limit is not None:
            full += f" {number(limit.value)} {unit}{came_from}, {b} {unit} after halving"
            full += " and its cap" if limits.capped and unit == "nF" else ""
        else:
            full += f" {b} {unit}{came_from}"
        working = f"{' + '.join(words) or 'nothing'}: {a} {unit}; {full}"
        if limits.halved:
            working += f"; {limits.working}"
        half = None if doubt is None else doubt.limits.co_nf if unit == "nF" else doubt.limits.lo_mh
        if doubt is not None and half is not None and found > half:
            missing = [*missing, *doubt.missing]
        # What is over with a part of it is over with the whole.
        passes = False if found > allowed else None if missing else True
    return Line(
        quantity=quantity,
        found=found,
        allowed=allowed,
        unit=unit,
        terms=tuple(terms),
        limits=(limit,) if limit is not None else (),
        missing=tuple(dict.fromkeys(missing)),
        passes=passes,
        working=working,
    )


def _lumped_words(term: Term) -> str:
    symbol, _, device = term.name.partition(" of ")
    return f"{symbol} {number(term.value)} {term.unit} ({device}{f', {term.came_from}' if term.came_from else ''})"


# ------------------------------------------------------------------------------------------------ the longest cable


def _longest(
    ci_nf: Decimal,
    li_mh: Decimal,
    cable: Sequence[CablePiece],
    limits: LumpedLimits,
    *,
    known: bool,
    by_ratio: bool,
) -> tuple[int | None, str]:
    if not cable or not known or limits.co_nf is None:
        return None, ""
    first = cable[0]
    if any((each.pf_per_m, each.uh_per_m) != (first.pf_per_m, first.uh_per_m) for each in cable):
        return None, ""
    if first.pf_per_m is None or (not by_ratio and (first.uh_per_m is None or limits.lo_mh is None)):
        return None, ""
    return longest_cable_m(
        limits.co_nf - ci_nf,
        limits.lo_mh - li_mh if limits.lo_mh is not None and not by_ratio else None,
        pf_per_m=first.pf_per_m,
        uh_per_m=first.uh_per_m or Decimal(0),
    )


def longest_cable_m(
    nf_left: Decimal, mh_left: Decimal | None, *, pf_per_m: Decimal, uh_per_m: Decimal
) -> tuple[int | None, str]:
    """Return the longest cable in whole metres and what limits it; one metre more would be too much.

    Parameters
    ----------
    nf_left, mh_left
        What Co and Lo leave beside the devices; None where the inductance of the cable need not be counted.
    pf_per_m, uh_per_m
        What each metre stores.

    >>> longest_cable_m(Decimal("38.5"), Decimal("1.485"), pf_per_m=Decimal(200), uh_per_m=Decimal(1))
    (192, 'capacitance')
    >>> longest_cable_m(Decimal(-1), None, pf_per_m=Decimal(200), uh_per_m=Decimal(1))
    (0, 'capacitance')
    """
    ends: list[tuple[Decimal, str]] = []
    if nf_left < 0 or pf_per_m > 0:
        ends.append((max(nf_left, Decimal(0)) * 1000 / pf_per_m if pf_per_m > 0 else Decimal(0), "capacitance"))
    if mh_left is not None and (mh_left < 0 or uh_per_m > 0):
        ends.append((max(mh_left, Decimal(0)) * 1000 / uh_per_m if uh_per_m > 0 else Decimal(0), "inductance"))
    if not ends:
        return None, ""
    end, because = min(ends)
    return int(end.to_integral_value(rounding=ROUND_FLOOR)), because


# --------------------------------------------------------------------------------------------------------- figures


def number(value: Decimal, digits: int = 6) -> str:
    """Return a figure for a text, in at most so many digits and without an exponent.

    >>> number(Decimal("83.000")), number(Decimal("0.0001")), number(Decimal("196.850393700"))
    ('83', '0.0001', '196.85')
    """
    rounded = Decimal(f"{value:.{digits}g}")
    text = f"{rounded:f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def pair(one: Decimal, other: Decimal) -> tuple[str, str]:
    """Return two figures in as many digits as it takes to tell them apart.

    >>> pair(Decimal("83.0000001"), Decimal(83))
    ('83.0000001', '83')
    """
    digits = 6
    while one != other and digits < 28 and number(one, digits) == number(other, digits):
        digits += 3
    return number(one, digits), number(other, digits)


def _percent(value: Decimal) -> str:
    return number(value, 3)


def _from(came_from: str) -> str:
    return f" ({came_from})" if came_from else ""
