"""ELC09 and ELC10: what a solenoid's coil gets, and what the line of a proximity switch may add."""

from __future__ import annotations

from loops.budget import figure_cells
from loops.circuit import Circuit
from loops.contact import fits, is_on_proximity_input, line_of
from loops.plant import Plant
from loops.solenoid import Coil, PullIn, coil_cells, has_a_coil, is_alternating, pull_in
from validation.circuit_mending import conductor_change, length_change, volts_text
from validation.finding import Clear, Fix, Found, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule


def _moves_a_solenoid(circuit: Circuit, plant: Plant) -> bool:
    return has_a_coil(circuit)


@rule(
    "ELC09",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_moves_a_solenoid,
    message="the coil of {device} gets {volts}, it pulls in at {needed}: short by {short}",
    basis="Ohm's law: the coil and its cable divide the voltage; IEC 60228:2023 for the cable; "
    "pull-in at 85 % common practice",
)
def weak_solenoid(circuit: Circuit, plant: Plant) -> Verdict:
    """A solenoid whose coil does not get its pull-in voltage.

    Why it matters: the valve does not move when it is told to, or does so on a good day: on a warm one with
    the supply low it stays where it is, and nothing on the screen says so.

    What to do: thicken or shorten the cable, or take a coil of less power.

    >>> from validation.example import said
    >>> row = {"tag": "XY-1", "kind": "solenoid", "device type": "SV", "signal": "24 VDC", "I/O type": "DO",
    ...        "I/O address": "1", "cable length": 500, "conductor size": "1.5 mm2"}
    >>> loops = [{"number": "X-1", "circuit or tag": "XY-1", "supply V min": 24}]
    >>> types = [{"code": "SV", "kind": "solenoid", "coil W": 12, "nominal V": 24, "pull-in %": 85}]
    >>> said("ELC09", [row], types=types, loops=loops, plant={"ELC hot degC": 20})
    ['X-1: the coil of XY-1 gets 19.168 V, it pulls in at 20.4 V: short by 1.232 V']
    >>> said("ELC09", [{**row, "conductor size": "2.5 mm2"}], types=types, loops=loops, plant={"ELC hot degC": 20})
    []
    """
    if is_alternating(circuit):
        return Unchecked("impedance of the coil")
    found = pull_in(circuit, plant.data)
    short: list[Found | Review] = []
    unknown = False
    for coil in found.coils:
        each = _weak(circuit, coil, found, plant)
        if each is not None:
            short.append(each)
        unknown = unknown or found.worst(coil) is None
    if short:
        return short
    if unknown or not found.coils:
        return Unchecked(*found.missing)
    assumed = (*found.assumed, *found.assumed_of_coils)
    return Clear(assumed) if assumed else None


def _weak(circuit: Circuit, coil: Coil, found: PullIn, plant: Plant) -> Found | Review | None:
    # Where another coil's figures are blank, the two together are not known, and together they get less.
    kindest, worst = found.kindest(coil), found.worst(coil)
    at_best = kindest is not None and not kindest.passes
    shown = kindest if at_best else worst
    if shown is None or shown.passes:
        return None
    kind = Found if at_best else Review
    volts = volts_text(shown.at_coil_v, shown.margin_v)
    needed = volts_text(shown.needed_v, shown.margin_v)
    short = volts_text(-shown.margin_v, shown.margin_v)
    return kind(
        values={"device": coil.name, "volts": volts, "needed": needed, "short": short},
        fields=("type.coil_w",),
        part=coil.name if len(found.coils) > 1 else "",
        found=volts,
        wanted=f"at least {needed}",
        off_by=short,
        working=shown.working,
        assumed=found.assumed_of_coils if at_best else (*found.assumed, *found.assumed_of_coils),
        fixes=_coil_fixes(circuit, coil, found, plant),
        cells=coil_cells(circuit),
    )


def _coil_fixes(circuit: Circuit, coil: Coil, found: PullIn, plant: Plant) -> tuple[Fix, ...]:
    """Smallest conductor, longest cable: each alone."""
    fixes: list[Fix] = []
    size_mm2 = found.smallest_conductor_mm2(coil)
    if size_mm2 is not None:
        fixes.append(Fix(text=f"conductor of at least {size_mm2:g} mm2", **conductor_change(circuit, size_mm2)))
    length_m = found.longest_cable_m(coil)
    if length_m:
        fixes.append(Fix(text=f"cable no longer than {length_m} m", **length_change(circuit, length_m, plant)))
    return tuple(fixes)


def _is_proximity(circuit: Circuit, plant: Plant) -> bool:
    return is_on_proximity_input(circuit) is not False


@rule(
    "ELC10",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_is_proximity,
    message="the line of {device} has {ohm}, {limit} allows {allowed}",
    basis="IEC 60947-5-6:1999, 5.6; IEC 60228:2023 for the cable",
)
def long_proximity_line(circuit: Circuit, plant: Plant) -> Verdict:
    """A proximity switch whose line has more resistance than its input allows.

    Why it matters: the input tells on from off, and both from a broken or a shorted line, by a few
    milliamperes; a line that takes its part of 8.2 V shifts all of these.

    What to do: shorten or thicken the cable, or move the input nearer.

    >>> from validation.example import said
    >>> row = {"tag": "ZSO-1", "kind": "switch", "signal": "NAMUR", "I/O type": "DI", "I/O address": "1",
    ...        "conductor size": "1.5 mm2", "cable length": 1727}
    >>> said("ELC10", [row])
    ['Z-1: the line of ZSO-1 has 50.006 ohm, IEC 60947-5-6 allows 50 ohm']
    >>> said("ELC10", [{**row, "cable length": 1726}])
    []
    """
    if is_on_proximity_input(circuit) is None:
        return Unchecked("signal")
    line = line_of(circuit, plant.data)
    # An isolator or a card that is not listed may allow more.
    if "barrier" in line.missing:
        return Unchecked(*line.missing)
    if fits(line.ohm, line.limit_ohm):
        return Unchecked(*line.missing) if line.missing else None
    ohm, over = _ohm(line.ohm, line.limit_ohm), _ohm(line.ohm - line.limit_ohm, 0.0)
    allowed = _ohm(line.limit_ohm, line.limit_ohm)
    length_m = line.longest_cable_m()
    fixes = (
        (Fix(text=f"cable no longer than {length_m} m", **length_change(circuit, length_m, plant)),) if length_m else ()
    )
    return Found(
        values={"device": circuit.device.name, "ohm": ohm, "limit": line.limit_from, "allowed": allowed},
        fields=("cable_length_m",),
        found=ohm,
        wanted=f"at most {allowed}",
        off_by=over,
        working=line.working,
        fixes=fixes,
        cells=figure_cells(circuit),
    )


def _ohm(ohm: float, limit: float) -> str:
    """Write ohms to as many decimals as it takes to see that they are not the limit."""
    decimals = 3
    while decimals < 9 and ohm != limit and round(ohm, decimals) == round(limit, decimals):
        decimals += 1
    shown = f"{ohm:.{decimals}f}".rstrip("0").rstrip(".")
    return f"{shown} ohm"
