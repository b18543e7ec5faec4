"""ELC13: whether a zener barrier bears the highest supply without leaking."""

from __future__ import annotations

import math

from instruments.quantity import format_number
from instruments.span import above
from loops.budget import SUPPLY_TOLERANCE_PERCENT, figure_cells
from loops.circuit import THERMOCOUPLE, Circuit, Given
from loops.plant import Plant
from validation.circuit_mending import highest_supply_fix, volts_text
from validation.finding import Clear, Found, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule


def _through_a_barrier(circuit: Circuit, plant: Plant) -> bool:
    # A thermocouple's circuit has no supply at all.
    return circuit.barrier_named is not None and circuit.isolator is None and circuit.kind != THERMOCOUPLE


@rule(
    "ELC13",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_through_a_barrier,
    message="the supply reaches {supply}, zener barrier {barrier} works up to {working}: over by {over}",
    basis="common practice",
)
def leaking_barrier(circuit: Circuit, plant: Plant) -> Verdict:
    """A zener barrier whose working voltage is below the highest supply.

    Why it matters: above its working voltage the zeners begin to conduct, and what they take from the loop to
    earth is missing from the signal: a measurement error that no calibration shows, and a blown fuse in the end.

    What to do: lower the supply, or take a barrier or an isolator that bears it.

    >>> from validation.example import said
    >>> row = {"tag": "PT-1", "signal": "4-20 mA", "wires": 2, "I/O type": "AI", "I/O address": "1", "barrier": "ZB"}
    >>> types = [{"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "working voltage V": 26}]
    >>> loop = {"number": "P-1", "circuit or tag": "PT-1", "kind": "AI", "supply V max": 26.4}
    >>> said("ELC13", [row], types=types, loops=[loop])
    ['P-1: the supply reaches 26.4 V, zener barrier ZB works up to 26 V: over by 0.4 V']
    >>> said("ELC13", [row], types=types, loops=[{**loop, "supply V max": 26}])
    []
    """
    barrier = circuit.barrier
    if barrier is None:
        return Unchecked("barrier")
    working_v = barrier.working_voltage_v
    highest, nominal, lowest = (
        _through_the_signal(given, circuit)
        for given in (circuit.supply_max_v, circuit.supply_nominal_v, circuit.supply_min_v)
    )
    percent = plant.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
    assumed: tuple[str, ...] = ()
    kindest_v = worst_v = None
    words = "stated as its highest"
    if highest is not None:
        kindest_v = worst_v = highest.number
    elif nominal is not None:
        kindest_v, worst_v = nominal.number, nominal.number * (1.0 + percent / 100.0)
        of = {"card": f" of the card {circuit.card_named}", "power supply": f" of {circuit.supply_named}"}
        words = f"nominal{of.get(nominal.source, '')}"
        assumed = (f"supply {nominal.number:g} V may be {percent:g} % high",)
    elif lowest is not None:
        kindest_v, words = lowest.number, "stated as its lowest"
    missing = [
        *(["working voltage V"] if working_v is None else []),
        *(["supply V max"] if worst_v is None else []),
    ]
    over_at_best = working_v is not None and kindest_v is not None and above(kindest_v, working_v)
    if working_v is None or (worst_v is None and not over_at_best):
        return Unchecked(*missing)
    supply_v = kindest_v if over_at_best or worst_v is None else worst_v
    if supply_v is None or not above(supply_v, working_v):
        return Clear(assumed) if assumed else None
    margin_v = working_v - supply_v
    tolerance = "" if over_at_best or not assumed else f", {percent:g} % high"
    kind = Found if over_at_best else Review
    allowed_v = math.floor(round(working_v * 10.0, 6)) / 10.0
    return kind(
        values={
            "supply": volts_text(supply_v, margin_v),
            "barrier": circuit.barrier_named,
            "working": volts_text(working_v, margin_v),
            "over": volts_text(-margin_v, margin_v),
        },
        fields=("barrier",),
        found=volts_text(supply_v, margin_v),
        wanted=f"at most {volts_text(working_v, margin_v)}",
        off_by=volts_text(-margin_v, margin_v),
        working=(
            f"supply {format_number(kindest_v if kindest_v is not None else supply_v)} V {words}{tolerance}"
            f" = {volts_text(supply_v, margin_v)}; working voltage of {barrier.code} {volts_text(working_v, margin_v)};"
            f" over by {volts_text(-margin_v, margin_v)}"
        ),
        assumed=() if over_at_best else assumed,
        fixes=(highest_supply_fix(circuit, allowed_v, plant),),
        cells=(*barrier.cells("working_voltage_v"), *figure_cells(circuit)),
    )


def _through_the_signal(given: Given | None, circuit: Circuit) -> Given | None:
    """Leave out the supply of a four-wire device: it comes on wires of its own, past the barrier."""
    if given is None or (circuit.wires == 4 and given.source in ("row", "power supply")):
        return None
    return given
