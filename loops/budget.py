"""What a circuit's supply leaves for its transmitter: the circuit's figures put into the voltage budget."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field, replace
from functools import lru_cache
from typing import Final

from instruments.kind import Kind
from instruments.origin import Cell
from instruments.plant_data import PlantData
from instruments.record import DeviceType
from instruments.signal_words import signal_classes
from instruments.span import below
from loops.cable import (
    Conductor,
    ResistancePer,
    conductor_ohm_per_km_20c,
    loop_resistance_ohm,
    read_conductor_size,
)
from loops.circuit import ANALOGUE_INPUT, Circuit, Given, Segment, is_isolator
from loops.power import (
    HIGH_ALARM_MA,
    LOW_FAILURE_MA,
    LOWEST_MA,
    NOMINAL_MA,
    OverVoltage,
    VoltageBudget,
    check_current_ma,
    over_voltage,
    stated_volts,
    voltage_budget,
    volts_at_transmitter,
)
from loops.record import CableType

SUPPLY_TOLERANCE_PERCENT: Final = 5.0
RECEIVER_OHM: Final = 250.0
HOT_C: Final = 70.0
COLD_C: Final = -20.0
DIODE_V: Final = 0.7  # a bypass diode that conducts; common practice

Parts = tuple[tuple[str, float], ...]
"""Names with ohms or volts."""


@dataclass(frozen=True, slots=True, kw_only=True)
class CablePath:
    """The cable of a circuit, out and back: length, resistance at 20 degC and what it is per.

    `conductor` is None where the cables of the run differ: the resistance is then their mean.
    """

    length_m: float
    ohm_per_km_20c: float
    per: ResistancePer
    conductor: Conductor | None

    def ohm(self, conductor_c: float) -> float:
        """Resistance out and back in ohm at a conductor temperature in degC."""
        return loop_resistance_ohm(self.length_m, self.ohm_per_km_20c, conductor_c=conductor_c, per=self.per)


@dataclass(frozen=True, slots=True, kw_only=True)
class Budget:
    """The voltage budget of a circuit at its check current, with what is stated and with defaults.

    Attributes
    ----------
    missing
        What it cannot be worked without, as titles; `worst` is then None.
    assumed
        The defaults that were used, in words.
    kindest_resistances, resistances, fixed_drops
        What lies in series beside the cable: with the kindest value that could be true for a blank,
        and with the default.
    source_name, kindest_v, source_v, source_20_ma_v
        What the budget starts from: supply, isolator or card; its volts with the kindest value, with
        the default, and with the default at 20 mA.
    supply_is_free
        Whether the volts are a supply's, which could be raised.
    cable
        The cable's path; None where it is not known.
    """

    current_ma: float
    lift_off_v: float | None = None
    lift_off_field: str = ""
    missing: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()
    kindest_resistances: Parts = ()
    resistances: Parts = ()
    fixed_drops: Parts = ()
    source_name: str = "supply"
    kindest_v: float | None = None
    source_v: float | None = None
    source_20_ma_v: float | None = None
    supply_is_free: bool = False
    hot_c: float = HOT_C
    cable: CablePath | None = None

    @property
    def kindest(self) -> VoltageBudget | None:
        """With the kindest value that could be true for each blank: the supply's nominal, no receiver, no cable."""
        return self._at(self.kindest_v, self.current_ma, self.kindest_resistances)

    @property
    def worst(self) -> VoltageBudget | None:
        """With the defaults for the blanks; None where a blank has no default."""
        return None if self.missing else self._at(self.source_v, self.current_ma, self.resistances)

    @property
    def at_20_ma(self) -> VoltageBudget | None:
        """As `worst`, at 20 mA."""
        return None if self.missing else self._at(self.source_20_ma_v, NOMINAL_MA, self.resistances)

    @property
    def passes_at_worst(self) -> bool | None:
        """Whether `worst` passes, without its terms; None where a blank has no default."""
        if self.missing or self.source_v is None or self.lift_off_v is None:
            return None
        volts = volts_at_transmitter(
            self.source_v, self.current_ma, (*self.resistances, *self._cable()), self.fixed_drops
        )
        return not below(volts, self.lift_off_v, scale=self.source_v)

    def _cable(self) -> Parts:
        return (("cable", self.cable.ohm(self.hot_c)),) if self.cable is not None else ()

    def _at(self, source_v: float | None, current_ma: float, series: Parts) -> VoltageBudget | None:
        if source_v is None or self.lift_off_v is None:
            return None
        return voltage_budget(
            source_v,
            current_ma,
            needed_v=self.lift_off_v,
            resistances=(*series, *self._cable()),
            fixed_drops=self.fixed_drops,
        )


@dataclass(frozen=True, slots=True, kw_only=True)
class HighestVolts:
    """The highest voltage at a circuit's transmitter, with what is stated and with defaults.

    A load is kind here, for it takes volts from the transmitter. A blank receiver is the default in
    both workings, and a blank cable nothing: what passes so passes with any, and what fails so fails
    with all that is common.

    Attributes
    ----------
    missing
        What it cannot be worked without, as titles.
    assumed, assumed_in_series
        The defaults that were used, in words: all of them, and those of what lies in series.
    kindest_v, highest_v
        The highest supply with the kindest value that could be true, and with the default.
    resistances, fixed_drops
        What lies in series, cable included.
    current_ma
        3.6 mA, or nothing where the volts are the most that a source ever gives.
    """

    allowed_v: float | None = None
    missing: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()
    assumed_in_series: tuple[str, ...] = ()
    kindest_v: float | None = None
    highest_v: float | None = None
    resistances: Parts = ()
    fixed_drops: Parts = ()
    current_ma: float = LOWEST_MA

    @property
    def kindest(self) -> OverVoltage | None:
        """With the kindest value that could be true for the supply."""
        return self._at(self.kindest_v)

    @property
    def worst(self) -> OverVoltage | None:
        """With the defaults; what is blank without one takes no volts."""
        return self._at(self.highest_v)

    @property
    def passes_at_worst(self) -> bool | None:
        """Whether `worst` passes, without its terms; None where the supply is not known."""
        if self.highest_v is None or self.allowed_v is None:
            return None
        volts = volts_at_transmitter(self.highest_v, self.current_ma, self.resistances, self.fixed_drops)
        return not below(self.allowed_v, volts, scale=self.highest_v)

    def _at(self, supply_v: float | None) -> OverVoltage | None:
        if supply_v is None or self.allowed_v is None:
            return None
        return over_voltage(
            supply_v,
            allowed_v=self.allowed_v,
            current_ma=self.current_ma,
            resistances=self.resistances,
            fixed_drops=self.fixed_drops,
        )


_SENDS: Final = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR})
_OUTPUTS: Final = frozenset(
    {Kind.POSITIONER, Kind.IP_CONVERTER, Kind.SOLENOID, Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.MANUAL_VALVE}
)


def feeds_a_transmitter(circuit: Circuit) -> bool | None:
    """Whether the circuit feeds a two-wire 4-20 mA transmitter; None where its wires are not stated."""
    device = circuit.device
    if circuit.kind not in (None, ANALOGUE_INPUT) or device.kind in _OUTPUTS:
        return False
    classes = signal_classes(circuit.signal_row.signal)
    if not classes and device.type is not None:
        classes = signal_classes(device.type.signal)
    # What sends a current is a transmitter, whatever its row calls it: the head of an element, for one.
    if classes and "current" not in classes:
        return False
    if not classes and device.kind not in _SENDS:
        return False
    return circuit.powered_by_loop


# --------------------------------------------------------------------------------------------------------- cable


def cable_path(circuit: Circuit) -> CablePath | None:
    """Return the circuit's cable; None where its length or its resistance is not known."""
    per_km = ohm_per_km(circuit)
    if circuit.cable_length_m is None or per_km is None:
        return None
    return CablePath(
        length_m=circuit.cable_length_m.number, ohm_per_km_20c=per_km[0], per=per_km[1], conductor=per_km[2]
    )


def ohm_per_km(circuit: Circuit) -> tuple[float, ResistancePer, Conductor | None] | None:
    """Return the resistance of the circuit's cable at 20 degC: the cable type's own, else the standard's maximum."""
    if circuit.segments:
        return _mean_ohm_per_km(circuit.segments)
    return _resistance(circuit.cable_type, circuit.conductor)


def _mean_ohm_per_km(segments: tuple[Segment, ...]) -> tuple[float, ResistancePer, None] | None:
    ohm = length_m = 0.0
    for segment in segments:
        size = segment.conductor or (segment.type.conductor if segment.type else None)
        found = _resistance(segment.type, size)
        if found is None:
            return None
        ohm += loop_resistance_ohm(segment.length_m, found[0], conductor_c=20.0, per=found[1])
        length_m += segment.length_m
    return (ohm / length_m * 1000.0, "loop", None) if length_m else None


def _resistance(kind: CableType | None, size: str | None) -> tuple[float, ResistancePer, Conductor | None] | None:
    stranding = kind.class_ if kind is not None else None
    tinned = kind.tinned if kind is not None else None
    known = _conductor(size, stranding, tinned) if size else None
    if kind is not None and kind.ohm_per_km is not None:
        per: ResistancePer = "loop" if kind.resistance_per == "loop" else "conductor"
        return kind.ohm_per_km, per, known[0] if known else None
    if known is None or known[1] is None:
        return None
    return known[1], "conductor", known[0]


@lru_cache(maxsize=4096)
def _conductor(size: str, stranding: str | None, tinned: bool | None) -> tuple[Conductor, float | None] | None:
    """Return a conductor by its size, class and plating, with its resistance in ohm/km at 20 degC."""
    conductor = read_conductor_size(size)
    if conductor is None:
        return None
    digits = [int(letter) for letter in stranding or "" if letter.isdigit()]
    conductor = replace(
        conductor,
        conductor_class=digits[0] if digits else conductor.conductor_class,
        tinned=bool(tinned),
    )
    return conductor, conductor_ohm_per_km_20c(conductor)


# --------------------------------------------------------------------------------------- what lies in the circuit


@dataclass(slots=True)
class _InSeries:
    """What lies in series beside the cable, what is not stated of it, and what is assumed."""

    ohm: list[tuple[str, float]] = field(default_factory=list)
    drops: list[tuple[str, float]] = field(default_factory=list)
    missing: list[str] = field(default_factory=list)
    assumed: list[str] = field(default_factory=list)

    def take(self, name: str, entry: DeviceType) -> None:
        """Take what a catalogue entry states."""
        if entry.resistance_ohm is not None:
            self.ohm.append((name, entry.resistance_ohm))
        if entry.fixed_drop_v is not None:
            self.drops.append((name, entry.fixed_drop_v))


def _stating(circuit: Circuit) -> tuple[str, DeviceType] | None:
    """Return the entry that states what it makes available at its terminals: an isolator, or the card itself."""
    barrier = circuit.barrier
    if barrier is not None and is_isolator(barrier):
        return "isolator", barrier
    card = circuit.card
    if card is not None and (card.available_20ma_v is not None or card.available_alarm_v is not None):
        return "card", card
    return None


# An element stands before its transmitter, and a barrier that is named by its tag is counted as the barrier.
_NOT_IN_SERIES: Final = frozenset({Kind.ELEMENT, Kind.BARRIER, Kind.ISOLATOR, Kind.CARD, Kind.POWER_SUPPLY})


def _in_series(circuit: Circuit, current_ma: float) -> _InSeries:
    """Gather what lies in the circuit beside receiver and cable."""
    found = _InSeries()
    barrier = circuit.barrier
    if barrier is not None and not is_isolator(barrier):
        if barrier.resistance_ohm is None and barrier.fixed_drop_v is None:
            found.missing.append("resistance ohm of the barrier")
        found.take("barrier", barrier)
    if len(circuit.members) == 1:
        return found
    for member in circuit.members:
        if member is circuit.device or member.kind in _NOT_IN_SERIES or circuit.on_system_side(member):
            continue
        kind = member.type
        if kind is not None and kind.input_ohm is not None and kind.resistance_ohm is None:
            # It reads the volts across the range resistor.
            continue
        if kind is None or (kind.resistance_ohm is None and kind.fixed_drop_v is None):
            if member.kind is Kind.INDICATOR:
                found.missing.append(f"resistance ohm or fixed drop V of {member.name}")
        elif (
            kind.bypass_diode
            and kind.resistance_ohm is not None
            and kind.resistance_ohm * current_ma / 1000.0 < DIODE_V
        ):
            # With the indicator taken out the diode carries the loop, and drops its own volts.
            found.drops.append((f"diode of {member.name}", max(DIODE_V, kind.fixed_drop_v or 0.0)))
        else:
            found.take(member.name, kind)
    return found


def _with_receiver(circuit: Circuit, data: PlantData, found: _InSeries) -> tuple[Parts, Parts]:
    """Return all in series: without the receiver where it is blank, and with the default."""
    before = len(found.ohm)
    if circuit.card is not None:
        found.take("card", circuit.card)
    if circuit.receiver_ohm is not None:
        found.ohm.append(("receiver", circuit.receiver_ohm.number))
    elif len(found.ohm) == before:
        ohm = data.threshold("ELC receiver ohm", RECEIVER_OHM)
        found.assumed.append(f"receiver {ohm:g} ohm")
        return tuple(found.ohm), (*found.ohm, ("receiver", ohm))
    # A card that states what it puts in series has said what it puts into the loop.
    return tuple(found.ohm), tuple(found.ohm)


def figure_cells(circuit: Circuit) -> tuple[Cell, ...]:
    """Return the cells from which the figures of a circuit's voltages came, but those of its device."""
    return tuple(dict.fromkeys(_figure_cells(circuit)))


def _figure_cells(circuit: Circuit) -> Iterator[Cell]:
    stating = _stating(circuit)
    given: list[Given | None] = [circuit.cable_length_m]
    if stating is not None:
        yield from stating[1].cells("available_20ma_v")
        yield from stating[1].cells("available_alarm_v")
    else:
        given = [
            circuit.supply_min_v,
            circuit.supply_nominal_v,
            circuit.supply_max_v,
            circuit.receiver_ohm,
            circuit.cable_length_m,
        ]
    for each in given:
        if each is not None:
            yield from each.cells
    barrier = circuit.barrier
    if barrier is not None and not is_isolator(barrier):
        yield from barrier.cells("resistance_ohm")
    for member in circuit.members:
        if member is not circuit.device and member.kind is Kind.INDICATOR:
            yield from member.cells("type.resistance_ohm")
            yield from member.cells("type.fixed_drop_v")


# --------------------------------------------------------------------------------------------------- the least volts


def lift_off(circuit: Circuit, data: PlantData) -> Budget:
    """Work the voltage budget of a two-wire transmitter's circuit at its check current.

    Parameters
    ----------
    circuit
        The circuit.
    data
        The plant's data: high-alarm and low-failure current, supply tolerance, receiver, hot conductor.

    Notes
    -----
    The current: a signal that fails low needs no more than the highest measurement current of NAMUR
    NE 43 (20.5 mA); one that fails high, or does not say, the type's declared high-alarm current,
    else 22 mA. An isolator is a source: what lies on its other side is another circuit, so neither
    its supply nor the receiver counts here. Its volts count at the current they are stated for.
    """
    device = circuit.device
    kind = device.type
    fails_low = (circuit.signal_row.failure_direction or device.record.failure_direction) == "low"
    current_ma = check_current_ma(
        "low" if fails_low else None,
        kind.high_alarm_ma if kind else None,
        default_high_ma=data.threshold("ELC high alarm mA", HIGH_ALARM_MA),
        low_ma=data.threshold("ELC low failure mA", LOW_FAILURE_MA),
    )
    lift_off_v, lift_off_field = None, "type.lift_off_v"
    if kind is not None:
        lift_off_v = kind.lift_off_v
        if not fails_low and kind.lift_off_alarm_v is not None:
            lift_off_v, lift_off_field = kind.lift_off_alarm_v, "type.lift_off_alarm_v"
    found = _in_series(circuit, current_ma)
    source = _source(circuit, current_ma, data, found, fails_low=fails_low)
    if source.receiver_counts:
        kindest, series = _with_receiver(circuit, data, found)
    else:
        kindest = series = tuple(found.ohm)
    missing = ["lift-off V"] if lift_off_v is None else []
    missing.extend(found.missing)
    path = cable_path(circuit)
    if path is None:
        if circuit.cable_length_m is None:
            missing.append("cable length")
        if ohm_per_km(circuit) is None:
            missing.append("conductor size")
    return Budget(
        current_ma=current_ma,
        lift_off_v=lift_off_v,
        lift_off_field=lift_off_field,
        missing=tuple(missing),
        assumed=tuple(found.assumed),
        kindest_resistances=kindest,
        resistances=series,
        fixed_drops=tuple(found.drops),
        source_name=source.name,
        kindest_v=source.kindest_v,
        source_v=source.worst_v,
        source_20_ma_v=source.at_20_ma_v,
        supply_is_free=source.receiver_counts,
        hot_c=data.threshold("ELC hot degC", HOT_C),
        cable=path,
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class _Source:
    name: str = "supply"
    kindest_v: float | None = None
    worst_v: float | None = None
    at_20_ma_v: float | None = None
    receiver_counts: bool = True


def _source(circuit: Circuit, current_ma: float, data: PlantData, found: _InSeries, *, fails_low: bool) -> _Source:
    if circuit.barrier_named and circuit.barrier is None:
        # It may be an isolator, and then the supply is none of this circuit's.
        found.missing.append("barrier")
        return _Source(name="barrier")
    stating = _stating(circuit)
    if stating is not None:
        name, entry = stating
        # Where it states no current of its own, its high alarm is the transmitter's.
        alarm_ma = entry.high_alarm_ma or (0.0 if fails_low else current_ma)
        volts = stated_volts(((NOMINAL_MA, entry.available_20ma_v), (alarm_ma, entry.available_alarm_v)), current_ma)
        if volts is None:
            at_alarm = not fails_low and entry.available_alarm_v is None
            found.missing.append(f"volts available at {'high alarm' if at_alarm else f'{current_ma:g} mA'}")
        return _Source(
            name=name, kindest_v=volts, worst_v=volts, at_20_ma_v=entry.available_20ma_v, receiver_counts=False
        )
    if circuit.supply_min_v is not None:
        volts = circuit.supply_min_v.number
        return _Source(kindest_v=volts, worst_v=volts, at_20_ma_v=volts)
    if circuit.supply_nominal_v is not None:
        percent = data.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
        nominal_v = circuit.supply_nominal_v.number
        found.assumed.append(f"supply {nominal_v:g} V may be {percent:g} % low")
        volts = nominal_v * (1 - percent / 100)
        return _Source(kindest_v=nominal_v, worst_v=volts, at_20_ma_v=volts)
    found.missing.append("supply V min")
    return _Source(kindest_v=circuit.supply_max_v.number if circuit.supply_max_v is not None else None)


# -------------------------------------------------------------------------------------------------- the highest volts


def highest_volts(circuit: Circuit, data: PlantData) -> HighestVolts:
    """Work the highest voltage at a two-wire transmitter: highest supply, 3.6 mA, cold cable.

    Parameters
    ----------
    circuit
        The circuit.
    data
        The plant's data: supply tolerance, receiver, cold conductor.
    """
    allowed_v = circuit.device.type.maximum_v if circuit.device.type else None
    if allowed_v is None:
        return HighestVolts(missing=("maximum V",))
    if circuit.barrier_named and circuit.barrier is None:
        return HighestVolts(allowed_v=allowed_v, missing=("barrier",))
    stating = _stating(circuit)
    if stating is not None:
        return _from_a_source(*stating, circuit=circuit, allowed_v=allowed_v, data=data)
    found = _in_series(circuit, LOWEST_MA)
    unknown = bool(found.missing)
    _, series = _with_receiver(circuit, data, found)
    in_series = tuple(found.assumed)
    kindest_v, highest_v = _highest_supply(circuit, data, found)
    if highest_v is None:
        found.missing.append("supply V max")
    cable = _cold_cable(circuit, data)
    return HighestVolts(
        allowed_v=allowed_v,
        missing=tuple(found.missing),
        assumed=tuple(found.assumed),
        assumed_in_series=in_series,
        # What a device in series takes nobody says: then nothing is certain to fail.
        kindest_v=None if unknown else kindest_v,
        highest_v=highest_v,
        resistances=(*series, cable) if cable is not None else series,
        fixed_drops=tuple(found.drops),
    )


def _cold_cable(circuit: Circuit, data: PlantData) -> tuple[str, float] | None:
    path = cable_path(circuit)
    if path is None:
        return None
    area = circuit.device.area
    cold_c = area.ambient_min_c if area is not None else None
    return "cable", path.ohm(data.threshold("ELC cold degC", COLD_C) if cold_c is None else cold_c)


def _highest_supply(circuit: Circuit, data: PlantData, found: _InSeries) -> tuple[float | None, float | None]:
    """Return the highest supply with the kindest value that could be true, and with the default."""
    if circuit.supply_max_v is not None:
        return circuit.supply_max_v.number, circuit.supply_max_v.number
    if circuit.supply_nominal_v is not None:
        percent = data.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
        nominal_v = circuit.supply_nominal_v.number
        found.assumed.append(f"supply {nominal_v:g} V may be {percent:g} % high")
        return nominal_v, nominal_v * (1 + percent / 100)
    return (circuit.supply_min_v.number if circuit.supply_min_v is not None else None), None


def _from_a_source(
    name: str, entry: DeviceType, *, circuit: Circuit, allowed_v: float, data: PlantData
) -> HighestVolts:
    """Bound the volts of a source that states them at 20 mA: at 3.6 mA it gives no less, and never more than its Uo."""
    found = _in_series(circuit, LOWEST_MA)
    ceilings = [] if entry.uo_v is None else [entry.uo_v]
    if name == "card":
        _, highest_v = _highest_supply(circuit, data, found)
        if highest_v is not None:
            ceilings.append(highest_v)
    highest_v = min(ceilings, default=None)
    if highest_v is not None and not below(allowed_v, highest_v):
        return HighestVolts(
            allowed_v=allowed_v, assumed=tuple(found.assumed), kindest_v=highest_v, highest_v=highest_v, current_ma=0.0
        )
    cable = _cold_cable(circuit, data)
    kindest_v = None if found.missing else entry.available_20ma_v
    found.missing.append("Uo V" if highest_v is None and name == "isolator" else "volts available at 3.6 mA")
    return HighestVolts(
        allowed_v=allowed_v,
        missing=tuple(found.missing),
        kindest_v=kindest_v,
        resistances=(*found.ohm, cable) if cable is not None else tuple(found.ohm),
        fixed_drops=tuple(found.drops),
    )
