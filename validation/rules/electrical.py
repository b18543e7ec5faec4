"""ELC: what a circuit must carry, and what its input or output can."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace
from functools import lru_cache
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.quantity import format_number
from instruments.record import DeviceType, Instrument
from instruments.signal_words import io_types, signal_class, signal_classes
from loops.budget import (
    Budget,
    HighestVolts,
    feeds_a_transmitter,
    figure_cells,
    highest_volts,
    lift_off,
)
from loops.budget_in_full import budget_in_full
from loops.circuit import Circuit
from loops.plant import Plant
from loops.power import highest_supply_v, least_supply_v, longest_cable_m, smallest_conductor
from loops.wiring import has_io
from validation.circuit_mending import (
    conductor_change,
    highest_supply_fix,
    least_supply_change,
    length_change,
    volts_text,
)
from validation.finding import Clear, Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule

__all__ = ["signal_against_input", "signal_class", "starved_transmitter", "too_many_volts"]


def _is_transmitter_circuit(circuit: Circuit, plant: Plant) -> bool:
    return feeds_a_transmitter(circuit) is not False


@rule(
    "ELC01",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_is_transmitter_circuit,
    message="{device} gets {volts} at {current}, its lift-off is {needed}: short by {short}",
    basis="NAMUR NE 43:2021 for the currents; IEC 60228:2023 for the cable; Ohm's law",
)
def starved_transmitter(circuit: Circuit, plant: Plant) -> Verdict:
    """A two-wire transmitter that does not get its lift-off voltage at the check current.

    Why it matters: a loop that cannot push the current of a failure shows a failed transmitter as a
    healthy high value, and one that cannot push 20 mA reads low near the top of the range.

    What to do: shorten or thicken the cable, raise the supply, or take a transmitter or a barrier
    that needs less.

    >>> from validation.example import said
    >>> loop = {"number": "P-101", "circuit or tag": "PT-101", "supply V min": "24", "cable length": "1000",
    ...         "range resistor": "250", "barrier": "ZB"}
    >>> types = [{"code": "T1", "kind": "transmitter", "lift-off V": "10.5"},
    ...          {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": "340"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "signal": "4-20 mA", "wires": "2",
    ...        "conductor size": "1.5 mm2", "I/O type": "AI", "I/O address": "1"}
    >>> said("ELC01", [tag], types=types, loops=[loop], plant={"ELC hot degC": "20"})
    ['P-101: PT-101 gets 10.488 V at 22 mA, its lift-off is 10.5 V: short by 0.012 V']
    >>> said("ELC01", [tag], types=types, loops=[{**loop, "cable length": "970"}], plant={"ELC hot degC": "20"})
    []
    """
    if circuit.powered_by_loop is None:
        return Unchecked("wires")
    budget = lift_off(circuit, plant.data)
    passes = budget.passes_at_worst
    if passes:
        return Clear(budget.assumed) if budget.assumed else None
    kindest = budget.kindest
    short_at_best = kindest is not None and not kindest.passes
    if passes is None and not short_at_best:
        return Unchecked(*budget.missing)
    shown = kindest if short_at_best else budget.worst
    assert shown is not None
    at_20_ma = _volts_at_20_ma(budget, short_at_best=short_at_best)
    kind = Found if short_at_best else Review
    volts = volts_text(shown.at_terminals_v, shown.margin_v)
    needed = volts_text(shown.needed_v, shown.margin_v)
    short = volts_text(-shown.margin_v, shown.margin_v)
    current = f"{format_number(shown.current_ma)} mA"
    return kind(
        values={
            "device": circuit.device.name,
            "volts": volts,
            "current": current,
            "needed": needed,
            "short": short,
            "at 20 mA": at_20_ma,
        },
        fields=(budget.lift_off_field,),
        found=f"{volts} at {current}" + (f", {at_20_ma} at 20 mA" if at_20_ma else ""),
        wanted=f"at least {needed}",
        off_by=short,
        working=f"{shown.working}; {budget_in_full(circuit, budget, plant.data, at_best=short_at_best)}",
        assumed=() if short_at_best else budget.assumed,
        fixes=_lift_off_fixes(circuit, budget, plant),
        cells=figure_cells(circuit),
    )


def _volts_at_20_ma(budget: Budget, *, short_at_best: bool) -> str:
    """Return what is shown beside the check current: the same figures at 20 mA."""
    if short_at_best and budget.supply_is_free:
        budget = replace(budget, source_20_ma_v=budget.kindest_v, resistances=budget.kindest_resistances, missing=())
    at_20_ma = budget.at_20_ma
    return "" if at_20_ma is None else volts_text(at_20_ma.at_terminals_v, 0.0)


def _lift_off_fixes(circuit: Circuit, budget: Budget, plant: Plant) -> tuple[Fix, ...]:
    """Longest cable, smallest conductor, least supply: each alone."""
    cable, needed_v = budget.cable, budget.lift_off_v
    if budget.missing or budget.source_v is None or needed_v is None or cable is None:
        return ()
    fixes: list[Fix] = []
    length_m = longest_cable_m(
        budget.source_v,
        budget.current_ma,
        needed_v=needed_v,
        ohm_per_km_20c=cable.ohm_per_km_20c,
        conductor_c=budget.hot_c,
        per=cable.per,
        resistances=budget.resistances,
        fixed_drops=budget.fixed_drops,
    )
    if length_m:
        fixes.append(Fix(text=f"cable no longer than {length_m} m", **length_change(circuit, length_m, plant)))
    if cable.conductor is not None:
        size_mm2 = smallest_conductor(
            budget.source_v,
            budget.current_ma,
            needed_v=needed_v,
            length_m=cable.length_m,
            conductor_c=budget.hot_c,
            conductor_class=cable.conductor.conductor_class,
            tinned=cable.conductor.tinned,
            resistances=budget.resistances,
            fixed_drops=budget.fixed_drops,
        )
        if size_mm2 is not None:
            fixes.append(Fix(text=f"conductor of at least {size_mm2:g} mm2", **conductor_change(circuit, size_mm2)))
    if budget.supply_is_free:
        volts = least_supply_v(
            budget.current_ma,
            needed_v=needed_v,
            resistances=(*budget.resistances, ("cable", cable.ohm(budget.hot_c))),
            fixed_drops=budget.fixed_drops,
        )
        fixes.append(
            Fix(text=f"supply of at least {volts:g} V at its lowest", **least_supply_change(circuit, volts, plant))
        )
    return tuple(fixes)


@rule(
    "ELC02",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_is_transmitter_circuit,
    message="{device} can see {volts}, its maximum is {allowed}: over by {over}",
    basis="Ohm's law at 3.6 mA (NAMUR NE 43:2021), cold cable, highest supply",
)
def too_many_volts(circuit: Circuit, plant: Plant) -> Verdict:
    """A two-wire transmitter that can see more volts than it bears.

    Why it matters: the highest voltage stands at the terminals when the current is lowest, so a
    check at 20 mA passes where the transmitter is destroyed.

    What to do: lower the supply, or take a transmitter that bears it.

    >>> from validation.example import said
    >>> loop = {"number": "P-101", "circuit or tag": "PT-101", "supply V max": "36", "range resistor": "250"}
    >>> types = [{"code": "T1", "kind": "transmitter", "maximum V": "32"}]
    >>> tag = {"tag": "PT-101", "device type": "T1", "signal": "4-20 mA", "wires": "2",
    ...        "I/O type": "AI", "I/O address": "1"}
    >>> said("ELC02", [tag], types=types, loops=[loop])
    ['P-101: PT-101 can see 35.1 V, its maximum is 32 V: over by 3.1 V']
    >>> said("ELC02", [tag], types=types, loops=[{**loop, "supply V max": "32.9"}])
    []
    """
    if circuit.powered_by_loop is None:
        return Unchecked("wires")
    volts = highest_volts(circuit, plant.data)
    passes = volts.passes_at_worst
    if passes:
        return Clear(volts.assumed) if volts.assumed else None
    kindest = volts.kindest
    over_at_best = kindest is not None and not kindest.passes
    if not over_at_best and (passes is None or volts.missing):
        return Unchecked(*volts.missing)
    shown = volts.kindest if over_at_best else volts.worst
    assert shown is not None
    kind = Found if over_at_best else Review
    can_see = volts_text(shown.at_terminals_v, shown.margin_v)
    allowed = volts_text(shown.allowed_v, shown.margin_v)
    over = volts_text(-shown.margin_v, shown.margin_v)
    return kind(
        values={"device": circuit.device.name, "volts": can_see, "allowed": allowed, "over": over},
        fields=("type.maximum_v",),
        found=can_see,
        wanted=f"at most {allowed}",
        off_by=over,
        working=shown.working,
        assumed=volts.assumed_in_series if over_at_best else volts.assumed,
        fixes=_over_voltage_fixes(circuit, volts, plant),
        cells=figure_cells(circuit),
    )


def _over_voltage_fixes(circuit: Circuit, volts: HighestVolts, plant: Plant) -> tuple[Fix, ...]:
    if volts.allowed_v is None or volts.highest_v is None:
        return ()
    highest_v = highest_supply_v(
        allowed_v=volts.allowed_v, resistances=volts.resistances, fixed_drops=volts.fixed_drops
    )
    return (highest_supply_fix(circuit, highest_v, plant),)


# ------------------------------------------------------------------------------------------ signal and I/O type

# What may be wired to what. A sensor's own signal may go to an analogue input only through a card that
# takes it, which the card then says; a contact never goes to an analogue input.
_FITS: Final[Mapping[str, frozenset[str]]] = {
    "current": frozenset({"AI", "AO"}),
    "voltage": frozenset({"AI", "AO"}),
    "RTD": frozenset({"RTD", "AI"}),
    "thermocouple": frozenset({"TC", "AI"}),
    "contact": frozenset({"DI", "DO", "PI"}),
    "volts": frozenset({"DO", "DI"}),
    "pulse": frozenset({"DI", "PI"}),
    "digital": frozenset({"DI", "DO", "PI"}),
}
# A card for contacts says NAMUR, 24 VDC or contact, and takes each.
_SWITCHED: Final = frozenset({"contact", "volts", "digital", "pulse"})
_IO_FOR: Final = {
    "RTD": "RTD",
    "thermocouple": "TC",
    "contact": "DI",
    "digital": "DI",
    "pulse": "DI",
    "volts": "DO",
}
_OUTPUTS: Final = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER, Kind.CONTROL_VALVE})
_SENDS: Final = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR, Kind.ELEMENT})
_MAKES_CONTACT: Final = _SENDS | {Kind.SWITCH, Kind.HAND_SWITCH}


@rule(
    "ELC16",
    severity=Severity.FAULT,
    on=Subject.INSTRUMENT,
    message="{signal} does not fit the I/O type {io}",
    basis="common practice",
)
def signal_against_input(installed: Installed, plant: Plant) -> Verdict:
    """A signal that the I/O type or the card cannot take or give.

    Why it matters: the channel is ordered and wired from this list; the wrong card is found at
    loop check, when no spare channel of the right one is left.

    What to do: correct the I/O type, or the signal, whichever is wrong, and move the channel.

    >>> from validation.example import said
    >>> said("ELC16", [{"tag": "LIT-1", "signal": "4-20 mA", "I/O type": "DI", "I/O address": "R1.4"}])
    ['LIT-1: 4-20 mA does not fit the I/O type DI']
    >>> said("ELC16", [{"tag": "LIT-1", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "R1.4"}])
    []

    Whatever its signal is, a switch sends it, and a solenoid is driven by it:

    >>> said("ELC16", [{"tag": "ZSO-1", "kind": "switch", "I/O type": "DO"}])
    ['ZSO-1: a switch sends its signal, and the I/O type DO takes none']
    """
    found: list[Found] = []
    unknown: dict[str, None] = {}
    asked = False
    several = len(installed.channels) > 1
    for row in installed.channels or (installed.record,):
        signal = row.signal
        if signal is None and installed.listed and not several:
            signal = installed.record.signal
        if signal is None and not several and installed.type is not None:
            signal = installed.type.signal
        for field, text, card in _takers(row, plant):
            asked = True
            fits = _io_type_fits(text, signal, installed.kind) if card is None else _card_fits(card, signal, installed)
            if signal is None and card is None and not several and (way := _only_the_other_way(installed.kind, text)):
                found.append(_turned_about(installed, row, text, *way))
            elif isinstance(fits, str):
                unknown.setdefault(fits)
            elif not fits:
                found.append(_misfit(installed, row, signal or "", field, text))
    if found:
        return found
    if not asked:
        return _nothing_to_compare(installed)
    return Unchecked(*unknown) if unknown else None


def _takers(row: Instrument, plant: Plant) -> Iterator[tuple[str, str, DeviceType | None]]:
    """Give what may take the signal: the field, its text, and the card's entry."""
    if row.io_type and not _is_no_channel(row.io_type):
        yield "io_type", row.io_type, None
    card = plant.named_type(row.card) if row.card else None
    if card is not None and card.signal:
        yield "card", card.signal, card


@lru_cache(maxsize=4096)
def _is_no_channel(io_type: str) -> bool:
    """Whether an I/O type says that the signal ends elsewhere: a soft point, a link."""
    if io_types(io_type):
        return False
    return "bus" in signal_classes(io_type) or not has_io(Instrument(io_type=io_type))


@lru_cache(maxsize=16384)
def _io_type_fits(io_type: str, signal: str | None, kind: Kind | None) -> bool | str:
    """Whether a signal fits an I/O type; the title of what cannot be told."""
    if signal is None:
        return "signal"
    classes = signal_classes(signal)
    if "bus" in classes:
        return True
    if not classes:
        return "signal"
    taken = frozenset(io_types(io_type))
    if not taken:
        return "I/O type"
    return any(taken & _FITS[each] and not _wrong_way(kind, each, taken) for each in classes)


def _card_fits(card: DeviceType, signal: str | None, installed: Installed) -> bool | str:
    if signal is None:
        return "signal"
    classes = signal_classes(signal)
    if "bus" in classes:
        return True
    if not classes:
        return "signal"
    takes, kinds = signal_classes(card.signal), frozenset(io_types(card.signal))
    if "bus" in takes:
        return True
    if takes:
        right = bool(classes & takes) or bool(classes & _SWITCHED and takes & _SWITCHED)
        return right and (not kinds or any(not _wrong_way(installed.kind, each, kinds) for each in classes))
    if not kinds:
        return "signal of the card"
    return any(kinds & _FITS[each] and not _wrong_way(installed.kind, each, kinds) for each in classes)


def _wrong_way(kind: Kind | None, sort: str, taken: frozenset[str]) -> bool:
    """Whether what sends stands on an output alone, or what is driven on an input alone."""
    if sort in ("current", "voltage"):
        if kind in _SENDS:
            return "AI" not in taken
        return kind in (Kind.POSITIONER, Kind.IP_CONVERTER) and "AO" not in taken
    if sort in ("contact", "digital") and kind in _MAKES_CONTACT:
        return not taken & {"DI", "PI"}
    return sort == "volts" and kind is Kind.SOLENOID and "DO" not in taken


# Kinds whose signal goes one way only, whatever it is; a hand switch may have a lamp, a valve its position.
_ONLY_SENDS: Final = _SENDS | {Kind.SWITCH}
_ONLY_DRIVEN: Final = frozenset({Kind.IP_CONVERTER, Kind.SOLENOID})


@lru_cache(maxsize=4096)
def _only_the_other_way(kind: Kind | None, io_type: str) -> tuple[str, str] | None:
    """Return what a kind does and why the channel cannot, where no signal of this kind could fit; else None."""
    taken = frozenset(io_types(io_type))
    if kind in _ONLY_SENDS and taken and taken <= {"AO", "DO"}:
        return "sends its signal", "takes none"
    if kind in _ONLY_DRIVEN and taken and not taken & {"AO", "DO"}:
        return "is driven by its signal", "gives none"
    return None


def _turned_about(installed: Installed, row: Instrument, text: str, does: str, channel: str) -> Found:
    kind = installed.kind
    name = kind.value if kind is not None else ""
    digital = kind in (Kind.SWITCH, Kind.SOLENOID)
    wanted = ("D" if digital else "A") + ("O" if kind in _ONLY_DRIVEN else "I")
    certain = digital or kind is Kind.IP_CONVERTER
    change = {} if installed.listed else {"I/O type": wanted}
    return Found(
        values={"signal": row.signal or "", "io": text, "kind": name, "does": does, "channel": channel},
        fields=("io_type",),
        found=text,
        wanted=wanted if certain else "an input",
        fixes=(Fix(text=f"I/O type {wanted}", change=change),) if certain else (),
        cells=row.cells("io_type"),
        message="a {kind} {does}, and the I/O type {io} {channel}",
    )


def _misfit(installed: Installed, row: Instrument, signal: str, field: str, text: str) -> Found:
    several = len(installed.channels) > 1
    wanted = _io_wanted(installed, signal)
    fixes: tuple[Fix, ...] = ()
    if wanted and field == "io_type":
        # A change of the tag's I/O type would change the rows of its other signals too.
        change = {} if several or installed.listed else {"I/O type": wanted}
        fixes = (Fix(text=f"I/O type {wanted}", change=change),)
    return Found(
        values={"signal": signal, "io": text, "card": row.card or ""},
        fields=("signal", field),
        part=(row.io_address or row.io_type or "") if several else "",
        found=text,
        wanted=wanted,
        fixes=fixes,
        cells=(*row.cells("signal"), *row.cells(field)),
        message="" if field == "io_type" else "{signal} does not fit the card {card} ({io})",
    )


def _io_wanted(installed: Installed, signal: str) -> str:
    classes = signal_classes(signal)
    if classes & {"current", "voltage"}:
        return "AO" if installed.kind in _OUTPUTS else "AI"
    return next((_IO_FOR[each] for each in _IO_FOR if each in classes), "")


def _nothing_to_compare(installed: Installed) -> Verdict:
    """What is wired to the system and says of no channel what it is."""
    kind = installed.kind
    rows = installed.signals or (installed.record,)
    if any(row.io_type for row in rows) or kind is None:
        return NotApplicable()
    # An element may be wired to its transmitter; one that has an address is not.
    if kind.wired != "yes" and not (kind.wired == "element" and any(row.io_address for row in rows)):
        return NotApplicable()
    if installed.record.location == "system":
        return NotApplicable()
    has_signal = any(row.signal for row in rows) or bool(installed.type and installed.type.signal)
    return Unchecked("I/O type") if has_signal else Unchecked("signal", "I/O type")
