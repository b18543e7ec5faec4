"""ELC: HART on a current loop."""

from __future__ import annotations

from instruments.quantity import format_number
from instruments.record import DeviceType
from loops.circuit import Circuit
from loops.hart import (
    LEAST_OHM,
    LIMIT_US,
    Heard,
    TimeConstant,
    heard_across,
    series_resistor_ohm,
    time_constant,
    too_slow,
    with_resistor,
)
from loops.plant import Plant
from loops.series import carries_a_current, is_output, shown
from validation.circuit_mending import length_change, range_resistor_change, volts_text
from validation.finding import Clear, Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule

_USUAL_OHM = 250.0


def _may_speak_hart(circuit: Circuit, plant: Plant) -> bool:
    return circuit.hart is not False and carries_a_current(circuit)


# -------------------------------------------------------------------------------------------------------- ELC05


@rule(
    "ELC05",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_may_speak_hart,
    message="HART has {ohm} at {where}, it needs {needed}",
    basis="HART FSK physical layer, 230 ohm (published training text; the specification itself was not seen)",
)
def too_little_for_hart(circuit: Circuit, plant: Plant) -> Verdict:
    """HART with too little resistance between the supply and the point of communication.

    Why it matters: a supply is a short to the HART signal. Without 230 ohm between it and the card's
    terminals neither the system nor a communicator in the cabinet hears the device; two receivers of 250 ohm
    across each other are 125 ohm.

    What to do: a resistor in series, on the supply's side of the terminals, as far as the transmitter's
    lift-off voltage allows; or an isolator that passes HART.

    >>> from validation.example import said
    >>> tag = {"tag": "PT-7", "signal": "4-20 mA HART", "wires": 2, "I/O type": "AI", "I/O address": "1"}
    >>> said("ELC05", [{**tag, "receiver ohm": 100}])
    ["P-7: HART has 100 ohm at the card's terminals, it needs 230 ohm"]
    >>> said("ELC05", [{**tag, "receiver ohm": 250}])
    []
    """
    isolator = circuit.isolator
    if circuit.hart is None:
        return Unchecked("HART")
    if circuit.barrier_named and circuit.barrier is None:
        return Unchecked("barrier")
    least = plant.threshold("ELC05 ohm", LEAST_OHM)
    if isolator is not None and isolator.hart is False and not _heard_in_the_field(isolator, least):
        return _not_passed(circuit, f"isolator {isolator.code}", Found, plant)
    zener = circuit.zener
    if zener is not None and zener.hart is False:
        return _not_passed(circuit, f"barrier {zener.code}", Review, plant)
    if is_output(circuit):
        # A current output is no short to HART: what it drives is the resistance.
        return NotApplicable()
    heard = heard_across(circuit)
    if heard.ohm is None:
        return Unchecked(*heard.missing)
    if _short_of(heard.ohm, least):
        return _too_little(circuit, heard, least, plant, Found)
    if heard.missing:
        return Unchecked(*heard.missing)
    if heard.other_ohm is not None and _short_of(heard.other_ohm, least):
        return _too_little(circuit, heard, least, plant, Review)
    if isolator is not None and isolator.hart is None:
        return Clear((f"isolator {isolator.code} passes HART",))
    return None


def _short_of(ohm: float, least: float) -> bool:
    return series_resistor_ohm(ohm, least) > 0


def _heard_in_the_field(isolator: DeviceType, least: float) -> bool:
    """Whether an isolator that passes no HART has the resistance for a communicator on its field side."""
    own = isolator.input_ohm if isolator.input_ohm is not None else isolator.resistance_ohm
    return own is not None and not _short_of(own, least)


def _not_passed(circuit: Circuit, what: str, kind: type[Found], plant: Plant) -> Found:
    entry = circuit.barrier
    others = [
        each.code
        for each in plant.types.values()
        if entry is not None
        and each.code is not None
        and each.hart
        and each.kind is entry.kind
        and each.isolation == entry.isolation
        and each.signal is not None
        and (each.compliance_v is None) is (entry.compliance_v is None)
    ]
    text = f"{', or '.join(sorted(others))}, which {'passes' if len(others) == 1 else 'pass'} HART"
    return kind(
        values={"what": what, "device": circuit.device.name},
        fields=("row.barrier",),
        found=f"{what}: HART no",
        wanted="HART yes",
        working=f"{circuit.device.name} speaks HART; {what} states that it does not pass it",
        fixes=(Fix(text=text if others else "an isolator that passes HART"),),
        cells=entry.cells("hart") if entry is not None else (),
        message="{device} speaks HART, {what} does not pass it",
    )


def _too_little(circuit: Circuit, heard: Heard, least: float, plant: Plant, kind: type[Found]) -> Found:
    ohm = heard.ohm if kind is Found else heard.other_ohm
    assert ohm is not None
    found = heard.receivers
    first, other = found.range_resistor, found.other
    figures: tuple[str, ...] = ()
    if kind is Review and first is not None and other is not None:
        figures = (f"of {shown(first.number)} ohm and {shown(other.number)} ohm the second is the receiver's",)
    return kind(
        values={
            "ohm": f"{shown(ohm)} ohm",
            "where": heard.where,
            "needed": f"{format_number(least)} ohm",
            "short": f"{shown(least - ohm)} ohm",
        },
        fields=("receiver_ohm",),
        found=f"{shown(ohm)} ohm",
        wanted=f"at least {format_number(least)} ohm",
        off_by=f"{shown(least - ohm)} ohm",
        working=heard.heard_in_words(circuit, least)
        if kind is Found
        else f"{shown(ohm)} ohm, {format_number(least)} needed",
        assumed=figures,
        fixes=_resistor_fixes(circuit, heard, ohm, least, plant),
        cells=heard.cells,
    )


def _resistor_fixes(circuit: Circuit, heard: Heard, ohm: float, least: float, plant: Plant) -> tuple[Fix, ...]:
    """Return the resistor that would do, with what has to go with it where it alone breaks the lift-off."""
    more = series_resistor_ohm(ohm, least)
    words = f"a resistor of at least {more} ohm in series, between the supply and {heard.where}"
    isolator = circuit.isolator
    if isolator is not None:
        limit = isolator.maximum_load_ohm
        if limit is not None and ohm + more > limit:
            return (Fix(text=f"an isolator whose output drives {ohm + more:.0f} ohm, with {words}"),)
        return (Fix(text=words), *_instead(circuit, heard, least, plant))
    limit = circuit.device.type.maximum_load_ohm if circuit.device.type is not None else None
    if circuit.powered_by_loop is False and limit is not None and ohm + more > limit:
        return (Fix(text=f"{words}; {circuit.device.name} drives only {format_number(limit)} ohm: both cannot hold"),)
    after = with_resistor(circuit, more, plant.data)
    if after.holds is False:
        needed = volts_text(after.needed_v or 0.0, 0.0)
        left = volts_text(after.at_terminals_v or 0.0, (after.at_terminals_v or 0.0) - (after.needed_v or 0.0))
        with_it = (
            f"{words}, together with a supply of at least {after.least_supply_v:g} V at its lowest"
            if after.least_supply_v is not None
            else f"{words}, together with a source that gives more"
        )
        return (
            Fix(
                text=f"{with_it}: the resistor alone would leave {left} at {format_number(after.current_ma or 0.0)} mA,"
                f" the lift-off is {needed}"
            ),
        )
    if after.holds is None:
        words = f"{words}; whether the lift-off voltage still holds is not known ({', '.join(after.missing)})"
    return (Fix(text=words), *_instead(circuit, heard, least, plant))


def _instead(circuit: Circuit, heard: Heard, least: float, plant: Plant) -> tuple[Fix, ...]:
    """Return another range resistor, where one stands alone and the list holds its value."""
    found = heard.receivers
    resistor = found.range_resistor
    if resistor is None or found.across or (found.other is not None and _short_of(found.other.number, least)):
        return ()
    extra = heard.in_card.ohm if heard.in_card is not None else 0.0
    ohm = max(_USUAL_OHM, least - extra)
    after = with_resistor(circuit, int(ohm - resistor.number), plant.data)
    if after.holds is not True:
        return ()
    limit = circuit.isolator.maximum_load_ohm if circuit.isolator is not None else None
    if limit is not None and ohm > limit:
        return ()
    change = range_resistor_change(circuit, ohm, plant)
    return (Fix(text=f"a range resistor of {format_number(ohm)} ohm instead", **change),) if change else ()


# -------------------------------------------------------------------------------------------------------- ELC06


@rule(
    "ELC06",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_may_speak_hart,
    message="{ohm} x {nf} = {us}, HART needs less than {limit}",
    basis="HART FSK physical layer, RC below 65 us (from memory; public excerpts agree); IEC 60228:2023 for the cable",
)
def too_slow_for_hart(circuit: Circuit, plant: Plant) -> Verdict:
    """HART on a circuit whose resistance and capacitance round off its signal.

    Why it matters: the tones of 1200 and 2200 Hz are lost between a large resistance and a long cable, long
    before the cable reaches the length that HART is said to bear.

    What to do: a shorter cable, or one of less capacitance; an isolator in place of a zener barrier, whose
    resistance counts.

    >>> from validation.example import said
    >>> tag = {"tag": "PT-7", "signal": "4-20 mA HART", "wires": 2, "I/O type": "AI", "I/O address": "1",
    ...        "device type": "T", "receiver ohm": 250, "cable type": "C", "cable length": 1500}
    >>> sheets = {"types": [{"code": "T", "kind": "transmitter", "HART capacitance number": 2}],
    ...           "cable_types": [{"code": "C", "conductor size": "1.5 mm2", "capacitance": 200}],
    ...           "plant": {"ELC hot degC": 20}}
    >>> said("ELC06", [tag], **sheets)
    ['P-7: 286.3 ohm x 310 nF = 88.753 us, HART needs less than 65 us']
    >>> said("ELC06", [{**tag, "cable length": 1000}], **sheets)
    []
    """
    if circuit.hart is None:
        return Unchecked("HART")
    asked = time_constant(circuit, plant.data)
    kindest = asked.kindest_us
    if too_slow(kindest):
        return _rounded_off(circuit, plant, kindest=True)
    worst = kindest if asked.assumed_term is None and not asked.missing else asked.worst_us
    if worst is None:
        return Unchecked(*asked.missing)
    if too_slow(worst):
        return _rounded_off(circuit, plant, kindest=False)
    return Clear(asked.assumed) if asked.assumed else None


def _rounded_off(circuit: Circuit, plant: Plant, *, kindest: bool) -> Found:
    asked = time_constant(circuit, plant.data, named=True)
    us = asked.kindest_us if kindest else asked.worst_us
    assert us is not None
    kind = Found if kindest else Review
    return kind(
        values={
            "ohm": f"{shown(asked.ohm(kindest=kindest))} ohm",
            "nf": f"{shown(asked.nf)} nF",
            "us": _us(us),
            "limit": f"{format_number(LIMIT_US)} us",
        },
        fields=("cable_length_m",),
        found=_us(us),
        wanted=f"less than {format_number(LIMIT_US)} us",
        off_by=_us(us - LIMIT_US),
        working=asked.working(kindest=kindest),
        assumed=() if kindest else asked.assumed,
        fixes=_shorter(circuit, asked, plant),
        cells=asked.cells,
    )


def _shorter(circuit: Circuit, asked: TimeConstant, plant: Plant) -> tuple[Fix, ...]:
    length_m = asked.longest_cable_m
    if not length_m:
        return ()
    return (Fix(text=f"cable no longer than {length_m} m", **length_change(circuit, length_m, plant)),)


def _us(us: float) -> str:
    return f"{shown(us)} us"
