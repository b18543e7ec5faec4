"""ELC: what a circuit must carry, and what its input or output can."""

from __future__ import annotations

import re

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.quantity import format_number
from loops.budget import Budget, feeds_a_transmitter, highest_volts, lift_off
from loops.circuit import Circuit
from loops.plant import Plant
from loops.power import highest_supply_v, least_supply_v, longest_cable_m, smallest_conductor
from loops.wiring import circuit_kind
from validation.finding import Clear, Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule


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
    if feeds_a_transmitter(circuit) is None:
        return Unchecked("wires")
    budget = lift_off(circuit, plant.data)
    short_at_best = budget.kindest is not None and not budget.kindest.passes
    if budget.worst is None and not short_at_best:
        return Unchecked(*budget.missing)
    if budget.worst is not None and budget.worst.passes:
        return Clear(budget.assumed) if budget.assumed else None
    shown = budget.kindest if short_at_best else budget.worst
    assert shown is not None
    at_20 = f"; at 20 mA {_volts(budget.at_20_ma.at_terminals_v)}" if budget.at_20_ma is not None else ""
    kind = Found if short_at_best else Review
    return kind(
        values={
            "device": circuit.device.name,
            "volts": _volts(shown.at_terminals_v),
            "current": f"{format_number(shown.current_ma)} mA",
            "needed": _volts(shown.needed_v),
            "short": _volts(-shown.margin_v),
        },
        fields=(budget.lift_off_field,),
        found=_volts(shown.at_terminals_v),
        wanted=f"at least {_volts(shown.needed_v)}",
        off_by=_volts(-shown.margin_v),
        working=shown.working + at_20,
        assumed=() if short_at_best else budget.assumed,
        fixes=_lift_off_fixes(circuit, budget),
        cells=budget.cells,
    )


def _lift_off_fixes(circuit: Circuit, budget: Budget) -> tuple[Fix, ...]:
    """Longest cable, smallest conductor, least supply: each alone."""
    if budget.worst is None or budget.source_v is None or budget.lift_off_v is None or budget.cable is None:
        return ()
    fixes: list[Fix] = []
    cable = budget.cable
    common = {"needed_v": budget.lift_off_v, "fixed_drops": budget.fixed_drops}
    length_m = longest_cable_m(
        budget.source_v,
        budget.current_ma,
        ohm_per_km_20c=cable.ohm_per_km_20c,
        conductor_c=budget.hot_c,
        per=cable.per,
        resistances=budget.resistances,
        **common,
    )
    if length_m:
        fixes.append(Fix(text=f"cable no longer than {length_m} m", **_length_change(circuit, length_m)))
    if cable.conductor is not None:
        size_mm2 = smallest_conductor(
            budget.source_v,
            budget.current_ma,
            length_m=cable.length_m,
            conductor_c=budget.hot_c,
            conductor_class=cable.conductor.conductor_class,
            tinned=cable.conductor.tinned,
            resistances=budget.resistances,
            **common,
        )
        if size_mm2 is not None:
            fixes.append(
                Fix(text=f"conductor of at least {size_mm2:g} mm2", **_conductor_change(circuit, size_mm2))
            )
    if budget.supply_is_free:
        resistances = (*budget.resistances, ("cable", cable.ohm(budget.hot_c)))
        volts = least_supply_v(budget.current_ma, resistances=resistances, **common)
        change: dict[str, object] = {}
        if circuit.row is not None and circuit.row.supply_min_v is not None:
            change = {
                "change": {"supply V min": f"{volts:g}"},
                "subject": _row_subject(circuit),
                "sheet": "Loops",
            }
        fixes.append(Fix(text=f"supply of at least {volts:g} V at its lowest", **change))  # type: ignore[arg-type]
    return tuple(fixes)


def _length_change(circuit: Circuit, length_m: int) -> dict[str, object]:
    source = circuit.cable_length_m.source if circuit.cable_length_m else ""
    if source == "row":
        return {"change": {"cable length": str(length_m)}, "subject": circuit.device.name}
    if source == "loop row":
        return {"change": {"cable length": str(length_m)}, "subject": _row_subject(circuit), "sheet": "Loops"}
    return {}


def _conductor_change(circuit: Circuit, size_mm2: float) -> dict[str, object]:
    # A cable type is shared by other circuits: changing it is for a person to say.
    if circuit.signal_row.conductor and (circuit.cable_type is None or circuit.cable_type.ohm_per_km is None):
        return {"change": {"conductor size": f"{size_mm2:g} mm2"}, "subject": circuit.device.name}
    return {}


def _row_subject(circuit: Circuit) -> str:
    row = circuit.row
    return (row.circuit or row.number or "") if row is not None else ""


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
    if feeds_a_transmitter(circuit) is None:
        return Unchecked("wires")
    volts = highest_volts(circuit, plant.data)
    if volts.missing or volts.kindest is None or volts.worst is None:
        return Unchecked(*volts.missing)
    if volts.worst.passes:
        return Clear(volts.assumed) if volts.assumed else None
    over_at_best = not volts.kindest.passes
    shown = volts.kindest if over_at_best else volts.worst
    assert volts.allowed_v is not None
    highest_v = highest_supply_v(
        allowed_v=volts.allowed_v, resistances=volts.resistances, fixed_drops=volts.fixed_drops
    )
    change: dict[str, object] = {}
    if circuit.row is not None and circuit.row.supply_max_v is not None:
        change = {
            "change": {"supply V max": f"{highest_v:g}"},
            "subject": _row_subject(circuit),
            "sheet": "Loops",
        }
    kind = Found if over_at_best else Review
    return kind(
        values={
            "device": circuit.device.name,
            "volts": _volts(shown.at_terminals_v),
            "allowed": _volts(shown.allowed_v),
            "over": _volts(-shown.margin_v),
        },
        fields=("type.maximum_v",),
        found=_volts(shown.at_terminals_v),
        wanted=f"at most {_volts(shown.allowed_v)}",
        off_by=_volts(-shown.margin_v),
        working=shown.working,
        assumed=() if over_at_best else volts.assumed,
        fixes=(Fix(text=f"supply of at most {highest_v:g} V at its highest", **change),),  # type: ignore[arg-type]
        cells=volts.cells,
    )


_CURRENT = re.compile(r"(?<![\d.])(?:4|0)\s*(?:-|\u2013|to|\.\.\.?)\s*20\s*ma|\bhart\b", re.IGNORECASE)
_RTD = re.compile(r"\bpt\s?-?\s?\d{2,4}\b|\brtd\b|\bni\s?100\b", re.IGNORECASE)
_THERMOCOUPLE = re.compile(r"\bt/?c\b|thermocouple|\btype\s?[kjtenrsb]\b|\btc\s?[kjtenrsb]\b", re.IGNORECASE)
_CONTACT = re.compile(
    r"\bvfc\b|volt[\s-]?free|dry\s?contact|\bcontact\b|namur|proximity|potential[\s-]?free|\bspdt\b|\bspst\b|\bdpdt\b",
    re.IGNORECASE,
)
_BUS = re.compile(
    r"fieldbus|profibus|modbus|profinet|ethernet|\bff\b|\bpa\b|\bdp\b|serial|rs-?485|\bbus\b|foundation|wireless|"
    r"\bnet\b|ip\b",
    re.IGNORECASE,
)
_VOLTS_DC = re.compile(r"\b(?:12|24|48|110|120|230|240)\s*v\s*(?:ac|dc)?\b", re.IGNORECASE)

# What may be wired to what. A sensor's own signal may go to an analogue input only through a card that
# takes it, which the I/O type then says; a contact never goes to an analogue input.
_FITS: dict[str, frozenset[str]] = {
    "current": frozenset({"AI", "AO"}),
    "RTD": frozenset({"RTD", "AI"}),
    "thermocouple": frozenset({"TC", "AI"}),
    "contact": frozenset({"DI", "DO"}),
    "volts": frozenset({"DO", "DI"}),
}
_IO_FOR = {"RTD": "RTD", "thermocouple": "TC"}


def signal_class(text: str | None) -> str | None:
    """Return current, RTD, thermocouple, contact, volts or bus for a signal as written; None for no such word.

    >>> [signal_class(text) for text in ("4-20mA HART", "Pt100", "VFC", "24VDC", "Profibus PA", "pneumatic")]
    ['current', 'RTD', 'contact', 'volts', 'bus', None]
    """
    if not text:
        return None
    if _CURRENT.search(text):
        return "current"
    if _BUS.search(text):
        return "bus"
    if _RTD.search(text):
        return "RTD"
    if _THERMOCOUPLE.search(text):
        return "thermocouple"
    if _CONTACT.search(text):
        return "contact"
    if _VOLTS_DC.search(text):
        return "volts"
    return None


def _is_output(installed: Installed) -> bool:
    return installed.kind in (Kind.POSITIONER, Kind.IP_CONVERTER, Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE)


def _measures(installed: Installed) -> bool:
    return installed.kind in (
        Kind.TRANSMITTER,
        Kind.ANALYSER,
        Kind.GAS_DETECTOR,
        Kind.FIRE_DETECTOR,
        Kind.ELEMENT,
        Kind.SWITCH,
    )


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
    """
    found: list[Found] = []
    asked = missing_io = missing_signal = False
    for row in installed.signals:
        signal_text = row.signal or (installed.type.signal if installed.type else None)
        for text, field, name in _takers(row, plant):
            asked = True
            kinds = _io_kinds(text)
            sort = signal_class(signal_text)
            if sort == "bus" or not kinds:
                continue
            if sort is None:
                missing_signal = missing_signal or signal_text is None
                continue
            if kinds & _FITS[sort] and not _wrong_way(installed, sort, kinds):
                continue
            wanted = _io_wanted(installed, sort)
            fixes = ()
            if wanted and field == "io_type":
                fixes = (Fix(text=f"I/O type {wanted}", change={"I/O type": wanted}),)
            found.append(
                Found(
                    values={"signal": signal_text, "io": text, "name": name},
                    fields=("signal", field),
                    part=row.io_address or "",
                    found=text,
                    wanted=wanted,
                    fixes=fixes,
                    cells=(*row.cells("signal"), *row.cells(field)),
                    message="" if field == "io_type" else "{signal} does not fit the card {io}",
                )
            )
        if not row.io_type and not row.card:
            missing_io = True
    if found:
        return found if len(installed.signals) > 1 else [_without_part(found[0])]
    if not asked:
        has_signal = any(row.signal for row in installed.signals) or bool(
            installed.type and installed.type.signal
        )
        return Unchecked("I/O type") if has_signal and missing_io and _wired(installed) else NotApplicable()
    return Unchecked("signal") if missing_signal else None


def _without_part(found: Found) -> Found:
    from dataclasses import replace

    return replace(found, part="")


def _wired(installed: Installed) -> bool:
    return installed.kind is not None and installed.kind.wired == "yes"


def _takers(row: object, plant: Plant) -> list[tuple[str, str, str]]:
    takers: list[tuple[str, str, str]] = []
    io_type = getattr(row, "io_type", None)
    if io_type:
        takers.append((io_type, "io_type", "I/O type"))
    card = plant.named_type(getattr(row, "card", None))
    if card is not None and card.signal:
        takers.append((card.signal, "card", "card"))
    return takers


def _io_kinds(text: str) -> frozenset[str]:
    kinds = {circuit_kind(part) for part in re.split(r"[/,+&;]", text)}
    return frozenset(kind for kind in kinds if kind)


def _wrong_way(installed: Installed, sort: str, kinds: frozenset[str]) -> bool:
    """Whether a measurement stands on an output or an output device on an input alone."""
    if sort == "current":
        if _measures(installed) and installed.kind is not Kind.SWITCH:
            return "AI" not in kinds
        if _is_output(installed):
            return (
                "AO" not in kinds
                and kinds <= {"AI"}
                and installed.kind in (Kind.POSITIONER, Kind.IP_CONVERTER)
            )
    if sort == "contact" and _measures(installed):
        return "DI" not in kinds
    return False


def _io_wanted(installed: Installed, sort: str) -> str:
    if sort == "current":
        return "AO" if _is_output(installed) else "AI"
    if sort == "contact":
        return "DI"
    if sort == "volts":
        return "DO"
    return _IO_FOR.get(sort, "")


def _volts(volts: float) -> str:
    return f"{format_number(round(volts, 3))} V"
