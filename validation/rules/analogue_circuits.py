"""ELC: what sends, carries and receives the current of a 4-20 mA circuit."""

from __future__ import annotations

from typing import Any

from instruments.kind import Kind
from instruments.quantity import format_number
from instruments.record import DeviceType
from instruments.signal_words import io_types, signal_classes
from loops.circuit import ANALOGUE_INPUT, ANALOGUE_OUTPUT, Circuit
from loops.load import Drive, Load, drives, loads
from loops.plant import Plant
from loops.receiving import KNEE_V, SHIFT_PERCENT, SeriesIndicator, receivers, series_indicators, shift_percent
from loops.series import carries_a_current, exceeds, indicators, is_output, shown
from loops.source import CARD, Part, outside_supply, parts_of
from validation.circuit_mending import card_change, length_change, volts_text
from validation.finding import Clear, Fix, Found, NotApplicable, Review, Severity, Unchecked, Verdict
from validation.rule import Subject, rule


def _current_loop(circuit: Circuit, plant: Plant) -> bool:
    return carries_a_current(circuit)


# -------------------------------------------------------------------------------------------------------- ELC03


@rule(
    "ELC03",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_current_loop,
    message="{source} drives {ohm}, its maximum load is {maximum}: over by {over}",
    basis="Ohm's law, the source's declared maximum load; IEC 60228:2023 for the cable",
)
def load_too_great(circuit: Circuit, plant: Plant) -> Verdict:
    """A source of current that must drive more resistance than it can.

    Why it matters: a four-wire output, an isolator or an output card that has run out of volts stops
    short of 20 mA: the top of the range reads low and nothing says so.

    What to do: shorten or thicken the cable, take a receiver off, or take a source that drives more. A load
    that is stated for a supply and a current counts for those: at another supply it is another load.

    >>> from validation.example import said
    >>> tag = {"tag": "FT-7", "device type": "M4", "signal": "4-20 mA", "wires": 4, "I/O type": "AI",
    ...        "I/O address": "1", "receiver ohm": 250, "cable length": 2000, "conductor size": "1.5 mm2"}
    >>> types = [{"code": "M4", "kind": "transmitter", "source or sink": "source", "maximum load ohm": 300}]
    >>> said("ELC03", [tag], types=types)
    ['F-7: output of FT-7 drives 307.911 ohm, its maximum load is 300 ohm: over by 7.911 ohm']
    >>> said("ELC03", [{**tag, "cable length": 1700}], types=types)
    []
    """
    asked = loads(circuit, plant.data)
    if asked.others:
        return NotApplicable()
    found: list[Found | Review] = []
    missing = list(asked.missing)
    assumed: list[str] = []
    named: dict[str, Load] | None = None
    for each in asked.loads:
        if each.too_much_at_best or (each.too_much and not each.missing):
            if named is None:
                named = {load.part: load for load in loads(circuit, plant.data, named=True).loads}
            found.append(_load_found(circuit, named[each.part], plant))
        elif each.missing:
            missing.extend(each.missing)
        else:
            assumed.extend(each.assumed)
    if found:
        return found
    if missing:
        return Unchecked(*dict.fromkeys(missing))
    return Clear(tuple(dict.fromkeys(assumed))) if assumed else None


def _load_found(circuit: Circuit, load: Load, plant: Plant) -> Found:
    at_best = load.too_much_at_best
    ohm, maximum = (load.kindest_ohm, load.kindest_maximum_ohm) if at_best else (load.ohm, load.maximum_ohm)
    kind = Found if at_best else Review
    fixes: list[Fix] = []
    length_m = load.longest_cable_m
    if length_m and load.cable is not None:
        fixes.append(Fix(text=f"cable no longer than {length_m} m", **length_change(circuit, length_m, plant)))
    fixes.append(Fix(text=f"a source that drives at least {_ceiling(load.ohm)} ohm"))
    return kind(
        values={
            "source": load.name,
            "ohm": _ohm(ohm, ohm - maximum),
            "maximum": _ohm(maximum, ohm - maximum),
            "over": _ohm(ohm - maximum, ohm - maximum),
            "current": f"{format_number(load.current_ma)} mA",
        },
        fields=(load.field,),
        part=load.part,
        found=_ohm(ohm, ohm - maximum),
        wanted=f"at most {_ohm(maximum, ohm - maximum)}",
        off_by=_ohm(ohm - maximum, ohm - maximum),
        working=load.working(at_best=at_best),
        assumed=() if at_best else load.assumed,
        fixes=tuple(fixes),
        cells=load.cells,
    )


def _ceiling(ohm: float) -> str:
    return f"{-(-ohm // 1):.0f}"


def _ohm(ohm: float, margin: float) -> str:
    return f"{volts_text(ohm, margin)[:-2]} ohm"


# -------------------------------------------------------------------------------------------------------- ELC04


@rule(
    "ELC04",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_current_loop,
    message="two sources: {parts} both drive the current",
    basis="common practice",
)
def sources_of_a_circuit(circuit: Circuit, plant: Plant) -> Verdict:
    """A current loop that two sources drive, or none.

    Why it matters: two sources work against each other or add up, and the current is wrong or an input is
    damaged; without any the loop reads nothing at all. What feeds a four-wire device by wires of its own
    drives no loop.

    What to do: an active output belongs on a passive input and a two-wire transmitter on an active one;
    change the card, or the terminals that are used, or put a supply in series.

    >>> from validation.example import said
    >>> tag = {"tag": "FT-7", "signal": "4-20 mA", "wires": 4, "I/O type": "AI", "I/O address": "1",
    ...        "device type": "M4", "card": "AIA"}
    >>> types = [{"code": "M4", "kind": "transmitter", "source or sink": "source"},
    ...          {"code": "AIA", "kind": "card", "source or sink": "source"},
    ...          {"code": "AIP", "kind": "card", "source or sink": "sink"}]
    >>> said("ELC04", [tag], types=types)
    ['F-7: two sources: FT-7 and card AIA both drive the current']
    >>> said("ELC04", [{**tag, "card": "AIP"}], types=types)
    []
    """
    if circuit.barrier_named and circuit.barrier is None:
        return Unchecked("barrier")
    parts = parts_of(circuit)
    found: list[Found | Review] = []
    missing: list[str] = []
    assumed: list[str] = []
    for number, side in enumerate(parts.sides):
        at = "system side" if number else ("field side" if parts.system else "")
        sources = [each for each in side if each.role == "source"]
        assumed.extend(each.assumed for each in side if each.assumed)
        if len(sources) > 1:
            found.append(_two_sources(circuit, sources, at, plant))
        elif any(each.role is None for each in side):
            missing.extend(each.missing for each in side if each.role is None)
        elif not sources:
            outside = outside_supply(circuit) if not at else False
            if not outside:
                found.append(_no_source(circuit, side, at, outside, plant))
    if found:
        return found
    if missing:
        return Unchecked(*dict.fromkeys(missing))
    return Clear(tuple(assumed)) if assumed else None


def _two_sources(circuit: Circuit, sources: list[Part], at: str, plant: Plant) -> Found:
    assumed = tuple(each.assumed for each in sources if each.assumed)
    names = " and ".join(each.name for each in sources)
    card = next((each for each in sources if each.what == CARD), None)
    fixes = _other_card(circuit, "sink", plant) if card is not None else ()
    kind = Review if assumed else Found
    return kind(
        values={"parts": names},
        fields=("type.source_or_sink",),
        part=at,
        found=f"two sources: {names}",
        wanted="one source",
        working="; ".join(f"{each.name}: {each.role}" for each in sources),
        assumed=assumed,
        fixes=fixes,
        cells=_part_cells(circuit),
    )


def _no_source(circuit: Circuit, side: tuple[Part, ...], at: str, outside: bool | None, plant: Plant) -> Found:
    """What nothing drives; where the list has no place to say so, a supply may be there all the same."""
    names = " and ".join(each.name for each in side)
    told = circuit.powered_by_loop is not False and plant.once("states supplies", _states_supplies)
    kind = Found if outside is False or told else Review
    fixes = (*_other_card(circuit, "source", plant), Fix(text="a supply in series in the loop"))
    return kind(
        values={"parts": names},
        fields=("type.source_or_sink",),
        part=at,
        found=f"no source: {names}",
        wanted="one source",
        working="; ".join(f"{each.name}: {each.role}" for each in side),
        assumed=() if kind is Found else ("no supply lies in series",),
        fixes=fixes,
        cells=_part_cells(circuit),
        message="no source: {parts} only take the current, and no supply is named",
    )


def _states_supplies(plant: Plant) -> bool:
    """Whether the list has a place in which to say what feeds a loop."""
    if plant.has_column("power_supply"):
        return True
    return any(row.supply_nominal_v is not None or row.supply_min_v is not None for row in plant.loop_rows)


def _part_cells(circuit: Circuit) -> tuple[Any, ...]:
    device, card, isolator = circuit.driven, circuit.card, circuit.isolator
    found = [*device.cells("type.source_or_sink")]
    if not found:
        found.extend(circuit.signal_row.cells("wires") or device.cells("type.wires"))
    for entry in (isolator, card):
        if entry is not None:
            found.extend(entry.cells("source_or_sink") or entry.cells("maximum_load_ohm"))
    return tuple(found)


def _other_card(circuit: Circuit, role: str, plant: Plant) -> tuple[Fix, ...]:
    """Return the cards of the catalogue that would do instead: of the same signal, and of the other role."""
    if circuit.card is None or (circuit.isolator is not None and role == "source"):
        return ()
    others = [
        each.code
        for each in plant.once(f"cards that are {role}s", lambda whole: _cards(whole, role))
        if each.code is not None and _takes_alike(each, circuit.card, circuit)
    ]
    used = plant.once("cards by system", _cards_by_system).get(circuit.device.record.system, frozenset())
    others = [code for code in others if code in used] or others
    if not others:
        word = "passive" if role == "sink" else "active"
        return (Fix(text=f"{word} terminals of the card"),)
    return (Fix(text=f"card {', or '.join(others)}", **card_change(circuit, others[0], plant)),)


def _cards(plant: Plant, role: str) -> tuple[DeviceType, ...]:
    found = [each for each in plant.types.values() if each.kind is Kind.CARD and each.source_or_sink == role]
    return tuple(sorted(found, key=lambda each: each.code or ""))


def _cards_by_system(plant: Plant) -> dict[str | None, frozenset[str]]:
    """Return the cards that each system has: those that its circuits are on."""
    found: dict[str | None, set[str]] = {}
    for circuit in plant.circuits:
        if circuit.card is not None and circuit.card.code:
            found.setdefault(circuit.device.record.system, set()).add(circuit.card.code)
    return {system: frozenset(codes) for system, codes in found.items()}


def _takes_alike(other: DeviceType, card: DeviceType, circuit: Circuit) -> bool:
    """Whether a card can take another's place: signal, HART, an input or an output as it is."""
    if signal_classes(other.signal) != signal_classes(card.signal) or bool(other.hart) < bool(card.hart):
        return False
    kinds = set(io_types(other.description)) or set(io_types(other.signal))
    unfit = ANALOGUE_INPUT if is_output(circuit) else ANALOGUE_OUTPUT
    gives = other.compliance_v is not None or other.maximum_load_ohm is not None
    if is_output(circuit) is not gives:
        return False
    return unfit not in kinds and _is_safety(other) is _is_safety(card)


def _is_safety(card: DeviceType) -> bool:
    return "safety" in (card.description or "").casefold()


# -------------------------------------------------------------------------------------------------------- ELC08


def _output_loop(circuit: Circuit, plant: Plant) -> bool:
    return carries_a_current(circuit) and is_output(circuit)


@rule(
    "ELC08",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_output_loop,
    message="{source} gives {compliance}, {needed} are needed at {current}: short by {short}",
    basis="Ohm's law, the output's declared compliance; IEC 60228:2023 for the cable",
)
def output_too_weak(circuit: Circuit, plant: Plant) -> Verdict:
    """An analogue output whose volts do not reach its device at 4 mA or at 20 mA.

    Why it matters: the valve stops short of its end, or its positioner loses its supply and goes to its
    failure position. A positioner is no resistor: it may need more volts at 4 mA than at 20 mA.

    What to do: shorten or thicken the cable, take a barrier or isolator that costs less, or an output that gives
    more.

    >>> from validation.example import said
    >>> tag = {"tag": "FY-7", "kind": "positioner", "device type": "POS", "signal": "4-20 mA", "I/O type": "AO",
    ...        "I/O address": "1", "card": "AO8", "cable length": 500, "conductor size": "1.5 mm2"}
    >>> types = [{"code": "POS", "kind": "positioner", "device volts at 4 mA": 10, "device volts at 20 mA": 9},
    ...          {"code": "AO8", "kind": "card", "compliance V": 15}]
    >>> said("ELC08", [tag], types=types)
    []
    >>> said("ELC08", [tag], types=[types[0], {**types[1], "compliance V": 10}])
    ['F-7: card AO8 gives 10 V, 10.058 V are needed at 4 mA: short by 0.058 V']
    """
    asked = drives(circuit, plant.data)
    found: list[Found | Review] = []
    missing = list(asked.missing)
    named: dict[str, Drive] | None = None
    for each in asked.drives:
        worst = each.worst
        if each.from_load and each.falls_short(each.ends[-1]):
            # What is declared is a load, and ELC03 says that it is too great.
            return NotApplicable()
        if worst is not None:
            if named is None:
                named = {drive.part: drive for drive in drives(circuit, plant.data, named=True).drives}
            found.append(_drive_found(circuit, named[each.part], plant))
        else:
            missing.extend(each.missing)
    if found:
        return found
    if missing:
        return Unchecked(*dict.fromkeys(missing))
    return Clear(asked.assumed) if asked.assumed else None


def _drive_found(circuit: Circuit, drive: Drive, plant: Plant) -> Found:
    end = drive.worst
    assert end is not None
    short = drive.short_v(end)
    fixes: list[Fix] = []
    length_m = drive.longest_cable_m
    if length_m:
        fixes.append(Fix(text=f"cable no longer than {length_m} m", **length_change(circuit, length_m, plant)))
    if not drive.missing:
        tenths = -(-round(max(each.needed_v for each in drive.ends) * 10, 6) // 1)
        fixes.append(Fix(text=f"an output that gives at least {tenths / 10:g} V"))
    needed, compliance = volts_text(end.needed_v, short), volts_text(drive.compliance_v, short)
    return Found(
        values={
            "source": drive.name,
            "compliance": compliance,
            "needed": needed,
            "current": f"{format_number(end.current_ma)} mA",
            "short": volts_text(short, short),
        },
        fields=(drive.field,),
        part=drive.part,
        found=f"{compliance} of {drive.name}",
        wanted=f"at least {needed} at {format_number(end.current_ma)} mA",
        off_by=volts_text(short, short),
        working=drive.working,
        fixes=tuple(fixes),
        cells=drive.cells,
    )


# -------------------------------------------------------------------------------------------------------- ELC11


def _input_loop(circuit: Circuit, plant: Plant) -> bool:
    return carries_a_current(circuit) and not is_output(circuit)


@rule(
    "ELC11",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_input_loop,
    message="{inputs} across {resistor} make {together}: {shift} of span at 20 mA",
    basis="Ohm's law; common practice: one receiver in series, the others across the range resistor",
)
def receivers_across(circuit: Circuit, plant: Plant) -> Verdict:
    """Receivers across the range resistor that shift the reading.

    Why it matters: each input takes some of the current that the range resistor should turn into volts; a
    recorder of 10 kohm across 250 ohm reads 3 % of span low, on every receiver of the loop.

    What to do: take inputs of 1 Mohm or more, adjust the range resistor, or put the second receiver
    behind an isolator.

    >>> from validation.example import said
    >>> tag = {"tag": "PT-7", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "1", "receiver ohm": 10000}
    >>> loop = {"number": "P-7", "circuit or tag": "PT-7", "range resistor": 250}
    >>> said("ELC11", [tag], loops=[loop])
    ['P-7: 10000 ohm across 250 ohm make 243.902 ohm: -3.049 % of span at 20 mA']
    >>> said("ELC11", [{**tag, "receiver ohm": 1000000}], loops=[loop])
    []
    """
    found = receivers(circuit)
    limit = plant.threshold("ELC11 %", SHIFT_PERCENT)
    together = found.ohm
    if together is None:
        if found.across:
            return Unchecked("range resistor", *found.missing)
        return Unchecked(*found.missing) if found.missing else NotApplicable()
    resistor = found.range_resistor
    assert resistor is not None
    if not found.across:
        return Unchecked(*found.missing) if found.missing else NotApplicable()
    if resistor.number <= 0.0:
        return Unchecked("range resistor")
    shift = shift_percent(resistor.number, together)
    if not exceeds(abs(shift), limit):
        return Unchecked(*found.missing) if found.missing else None
    inputs = " and ".join(
        f"{_plain(each.number)} ohm{f' of {each.item}' if each.item else ''}" for each in found.across
    )
    shown_shift = f"{volts_text(shift, abs(shift) - limit)[:-2]} %"
    return Found(
        values={
            "inputs": inputs,
            "resistor": f"{_plain(resistor.number)} ohm",
            "together": f"{shown(together)} ohm",
            "shift": shown_shift,
            "limit": f"{format_number(limit)} %",
        },
        fields=("receiver_ohm",),
        found=f"{shown_shift} of span",
        wanted=f"within {format_number(limit)} % of span",
        off_by=f"{volts_text(abs(shift) - limit, abs(shift) - limit)[:-2]} % of span",
        working=(
            f"{found.receivers_in_words(circuit)} = {shown(together)} ohm;"
            f" ({shown(together)} ohm - {_plain(resistor.number)} ohm)"
            f" / {_plain(resistor.number)} ohm x 20 mA / 16 mA = {shown_shift} of span"
        ),
        fixes=(Fix(text=f"inputs of at least {_least_input_ohm(resistor.number, limit)} ohm together"),),
        cells=tuple(cell for each in circuit.receivers for cell in each.cells),
    )


def _plain(ohm: float) -> str:
    return format_number(ohm)


def _least_input_ohm(range_ohm: float, limit_percent: float) -> str:
    """Return the least input in whole ohms that shifts a range resistor by no more than the limit."""
    share = limit_percent / 100.0 * 16.0 / 20.0
    if share <= 0.0:
        return "any number of"
    return f"{-(-round(range_ohm * (1.0 - share) / share, 6) // 1):.0f}"


# -------------------------------------------------------------------------------------------------------- ELC12


def _with_an_indicator(circuit: Circuit, plant: Plant) -> bool:
    return len(circuit.members) > 1 and bool(indicators(circuit)) and carries_a_current(circuit)


@rule(
    "ELC12",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_with_an_indicator,
    message="{indicator} drops {volts} at 20 mA, its diode conducts from {knee} on and takes part of the current",
    basis="common practice",
)
def indicator_in_series(circuit: Circuit, plant: Plant) -> Verdict:
    """An indicator in series that has no bypass diode, or more volts than its diode lets stand.

    Why it matters: without a diode, taking the indicator out stops the loop for the control system too; with one
    whose knee is reached the diode carries part of the current, and the indicator reads low.

    What to do: an indicator with a diode across its terminals and at most 25 ohm (0.5 V at 20 mA).

    >>> from validation.example import said
    >>> rows = [{"tag": "PT-7", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "1"},
    ...         {"tag": "PI-7", "kind": "indicator", "location": "field", "signal": "4-20 mA", "device type": "IND"}]
    >>> kind = {"code": "IND", "kind": "indicator", "resistance ohm": 50, "bypass diode": "yes"}
    >>> said("ELC12", rows, types=[kind])
    ['P-7: PI-7 drops 1 V at 20 mA, its diode conducts from 0.5 V on and takes part of the current']
    >>> said("ELC12", rows, types=[{**kind, "resistance ohm": 10}])
    []
    """
    knee_v = plant.threshold("ELC12 knee V", KNEE_V)
    found: list[Found | Review] = []
    missing: list[str] = []
    asked = series_indicators(circuit)
    several = len(asked) > 1
    for each in asked:
        if each.bypass_diode is False:
            found.append(_without_diode(circuit, each, several))
        elif each.volts is not None and each.bypass_diode and exceeds(each.volts, knee_v):
            found.append(_over_the_knee(circuit, each, knee_v, several))
        else:
            if each.resistance_ohm is None:
                missing.append("resistance ohm or input ohm" if each.bypass_diode is None else "resistance ohm")
            if each.bypass_diode is None:
                missing.append("bypass diode")
    if found:
        return found
    if missing:
        return Unchecked(*dict.fromkeys(missing))
    return None if asked else NotApplicable()


def _without_diode(circuit: Circuit, indicator: SeriesIndicator, several: bool) -> Found:
    return Found(
        values={"indicator": indicator.name},
        fields=("type.bypass_diode",),
        part=indicator.name if several else "",
        found="no bypass diode",
        wanted="a bypass diode",
        working=f"{indicator.name}: bypass diode no ({indicator.source}); taken out, it opens the loop",
        fixes=(Fix(text="an indicator with a bypass diode, or a diode across its terminals"),),
        cells=_indicator_cells(circuit, indicator.name, "type.bypass_diode"),
        message="{indicator} is in series without a bypass diode: taking it out opens the loop",
    )


def _over_the_knee(circuit: Circuit, indicator: SeriesIndicator, knee_v: float, several: bool) -> Found:
    volts = indicator.volts or 0.0
    least = knee_v / 0.02
    return Found(
        values={
            "indicator": indicator.name,
            "volts": volts_text(volts, volts - knee_v),
            "knee": f"{format_number(knee_v)} V",
        },
        fields=("type.resistance_ohm",),
        part=indicator.name if several else "",
        found=volts_text(volts, volts - knee_v),
        wanted=f"at most {format_number(knee_v)} V",
        off_by=volts_text(volts - knee_v, volts - knee_v),
        working=indicator.working(knee_v),
        fixes=(Fix(text=f"an indicator of at most {format_number(least)} ohm"),),
        cells=_indicator_cells(circuit, indicator.name, "type.resistance_ohm"),
    )


def _indicator_cells(circuit: Circuit, name: str, field: str) -> tuple[Any, ...]:
    return tuple(cell for each in indicators(circuit) if each.name == name for cell in each.cells(field))
