"""What a circuit's supply leaves for its transmitter: the circuit's figures put into the voltage budget."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.origin import Cell
from instruments.plant_data import PlantData
from loops.cable import (
    Conductor,
    ResistancePer,
    conductor_ohm_per_km_20c,
    loop_resistance_ohm,
    read_conductor_size,
)
from loops.circuit import ANALOGUE_INPUT, Circuit
from loops.power import (
    HIGH_ALARM_MA,
    LOW_FAILURE_MA,
    NOMINAL_MA,
    OverVoltage,
    VoltageBudget,
    check_current_ma,
    over_voltage,
    voltage_budget,
)

SUPPLY_TOLERANCE_PERCENT = 5.0
RECEIVER_OHM = 250.0
HOT_C = 70.0
COLD_C = -20.0
DIODE_V = 0.7  # a bypass diode that conducts; common practice


@dataclass(frozen=True, slots=True, kw_only=True)
class CablePath:
    """The cable of a circuit, out and back: length, resistance at 20 degC and what it is per."""

    length_m: float
    ohm_per_km_20c: float
    per: ResistancePer
    conductor: Conductor | None

    def ohm(self, conductor_c: float) -> float:
        """Resistance out and back in ohm at a conductor temperature in degC."""
        return loop_resistance_ohm(self.length_m, self.ohm_per_km_20c, conductor_c=conductor_c, per=self.per)


@dataclass(frozen=True, slots=True, kw_only=True)
class Budget:
    """The voltage budget of a circuit at its check current, worked with what is stated and with defaults.

    Attributes
    ----------
    missing
        What it cannot be worked without, as titles; the budgets are then None unless the kindest
        values that could be true already fail.
    kindest
        With the kindest value that could be true for each blank: the supply's nominal, a cable of
        nothing, no receiver.
    worst
        With the defaults for the blanks; None where a blank has no default.
    at_20_ma
        As `worst`, at 20 mA.
    assumed
        The defaults that were used, in words.
    resistances, fixed_drops
        Of `worst`, without the cable, in series.
    source_v
        The volts that `worst` starts from.
    cable
        The cable's path; None where it is not known.
    cells
        Where the figures came from.
    """

    current_ma: float
    lift_off_v: float | None = None
    lift_off_field: str = ""
    missing: tuple[str, ...] = ()
    kindest: VoltageBudget | None = None
    worst: VoltageBudget | None = None
    at_20_ma: VoltageBudget | None = None
    assumed: tuple[str, ...] = ()
    resistances: tuple[tuple[str, float], ...] = ()
    fixed_drops: tuple[tuple[str, float], ...] = ()
    source_v: float | None = None
    source_name: str = "supply"
    supply_is_free: bool = False
    hot_c: float = HOT_C
    cable: CablePath | None = None
    cells: tuple[Cell, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class HighestVolts:
    """The highest voltage at a circuit's transmitter, worked with what is stated and with defaults."""

    allowed_v: float | None = None
    missing: tuple[str, ...] = ()
    kindest: OverVoltage | None = None
    worst: OverVoltage | None = None
    assumed: tuple[str, ...] = ()
    resistances: tuple[tuple[str, float], ...] = ()
    fixed_drops: tuple[tuple[str, float], ...] = ()
    cells: tuple[Cell, ...] = ()


def feeds_a_transmitter(circuit: Circuit) -> bool | None:
    """Whether the circuit feeds a two-wire 4-20 mA transmitter; None where its wires are not stated."""
    device = circuit.device
    if circuit.kind not in (None, ANALOGUE_INPUT):
        return False
    if device.kind not in (Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR):
        return False
    text = f"{circuit.signal_row.signal or ''} {(device.type.signal if device.type else '') or ''}".casefold()
    if text.strip() and "ma" not in text and "hart" not in text:
        return False
    return circuit.powered_by_loop


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
    kind = circuit.cable_type
    conductor = _conductor(circuit.conductor) if circuit.conductor else None
    if conductor is not None and kind is not None:
        stranding = (kind.class_ or "").strip()
        digits = [int(letter) for letter in stranding if letter.isdigit()]
        conductor = replace(
            conductor,
            conductor_class=digits[0] if digits else conductor.conductor_class,
            tinned=bool(kind.tinned),
        )
    if kind is not None and kind.ohm_per_km is not None:
        per: ResistancePer = "loop" if kind.resistance_per == "loop" else "conductor"
        return kind.ohm_per_km, per, conductor
    if conductor is None:
        return None
    try:
        ohm = conductor_ohm_per_km_20c(conductor)
    except ValueError:
        return None
    return None if ohm is None else (ohm, "conductor", conductor)


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
    its supply nor the receiver counts here.
    """
    device = circuit.device
    kind = device.type
    current_ma = check_current_ma(
        circuit.signal_row.failure_direction or device.record.failure_direction,
        kind.high_alarm_ma if kind else None,
        default_high_ma=data.threshold("ELC high alarm mA", HIGH_ALARM_MA),
        low_ma=data.threshold("ELC low failure mA", LOW_FAILURE_MA),
    )
    hot_c = data.threshold("ELC hot degC", HOT_C)
    missing: list[str] = []
    assumed: list[str] = []
    cells: list[Cell] = []
    lift_off_v, lift_off_field = _lift_off_v(circuit, current_ma)
    if lift_off_v is None:
        missing.append("lift-off V")
    else:
        cells.extend(device.cells(lift_off_field))
    source = _source(circuit, current_ma, data, assumed, missing, cells)
    series, drops = _in_series(circuit, current_ma, missing, cells)
    kind_series = list(series)
    worst_series = list(series)
    if source.receiver_counts:
        if circuit.receiver_ohm is not None:
            kind_series.append(("receiver", circuit.receiver_ohm.number))
            worst_series.append(("receiver", circuit.receiver_ohm.number))
            cells.extend(circuit.receiver_ohm.cells)
        else:
            ohm = data.threshold("ELC receiver ohm", RECEIVER_OHM)
            worst_series.append(("receiver", ohm))
            assumed.append(f"receiver {ohm:g} ohm")
    path = cable_path(circuit)
    cable: list[tuple[str, float]] = []
    if path is not None:
        cable.append(("cable", path.ohm(hot_c)))
        if circuit.cable_length_m is not None:
            cells.extend(circuit.cable_length_m.cells)
    else:
        if circuit.cable_length_m is None:
            missing.append("cable length")
        if ohm_per_km(circuit) is None:
            missing.append("conductor size")
    kindest = worst = at_20 = None
    if lift_off_v is not None and source.kindest_v is not None:
        kindest = voltage_budget(
            source.kindest_v,
            current_ma,
            needed_v=lift_off_v,
            resistances=(*kind_series, *cable),
            fixed_drops=drops,
        )
    if lift_off_v is not None and source.worst_v is not None and not missing:
        worst = voltage_budget(
            source.worst_v,
            current_ma,
            needed_v=lift_off_v,
            resistances=(*worst_series, *cable),
            fixed_drops=drops,
        )
        at_20 = None
        if source.same_at_20_ma:
            at_20 = voltage_budget(
                source.worst_v,
                NOMINAL_MA,
                needed_v=lift_off_v,
                resistances=(*worst_series, *cable),
                fixed_drops=drops,
            )
    return Budget(
        current_ma=current_ma,
        lift_off_v=lift_off_v,
        lift_off_field=lift_off_field,
        missing=tuple(dict.fromkeys(missing)),
        kindest=kindest,
        worst=worst,
        at_20_ma=at_20,
        assumed=tuple(assumed),
        resistances=tuple(worst_series),
        fixed_drops=tuple(drops),
        source_v=source.worst_v,
        source_name=source.name,
        supply_is_free=source.same_at_20_ma,
        hot_c=hot_c,
        cable=path,
        cells=tuple(dict.fromkeys(cells)),
    )


def highest_volts(circuit: Circuit, data: PlantData) -> HighestVolts:
    """Work the highest voltage at a two-wire transmitter: highest supply, 3.6 mA, cold cable.

    Parameters
    ----------
    circuit
        The circuit.
    data
        The plant's data: supply tolerance, receiver, cold conductor.
    """
    device = circuit.device
    missing: list[str] = []
    assumed: list[str] = []
    cells: list[Cell] = []
    allowed_v = device.type.maximum_v if device.type else None
    if allowed_v is None:
        missing.append("maximum V")
    else:
        cells.extend(device.cells("type.maximum_v"))
    barrier = circuit.barrier
    if circuit.barrier_named and barrier is None:
        missing.append("barrier")
    isolated = barrier is not None and _is_isolator(barrier)
    source = circuit.card if barrier is None and circuit.card and circuit.card.available_20ma_v else None
    if isolated or source is not None:
        # The volts that an isolator states are those at 20 mA; its Uo is more than it ever gives.
        limit_v = (barrier if isolated else source).uo_v  # type: ignore[union-attr]
        if limit_v is not None and allowed_v is not None and limit_v <= allowed_v:
            bound = over_voltage(limit_v, allowed_v=allowed_v, current_ma=0.0)
            return HighestVolts(allowed_v=allowed_v, kindest=bound, worst=bound, cells=tuple(cells))
        return HighestVolts(allowed_v=allowed_v, missing=(*missing, "the isolator's highest volts"))
    kindest_v = worst_v = None
    if circuit.supply_max_v is not None:
        kindest_v = worst_v = circuit.supply_max_v.number
        cells.extend(circuit.supply_max_v.cells)
    elif circuit.supply_nominal_v is not None:
        percent = data.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
        kindest_v = circuit.supply_nominal_v.number
        worst_v = kindest_v * (1 + percent / 100)
        cells.extend(circuit.supply_nominal_v.cells)
        assumed.append(f"supply {kindest_v:g} V may be {percent:g} % high")
    else:
        missing.append("supply V max")
    series, drops = _in_series(circuit, 3.6, missing, cells)
    receiver = circuit.receiver_ohm
    default_ohm = data.threshold("ELC receiver ohm", RECEIVER_OHM)
    # Here a load is kind: it takes volts from the transmitter. The default is the kindest that is common,
    # no receiver the other end.
    kind_series = [*series, ("receiver", receiver.number if receiver else default_ohm)]
    worst_series = [*series, *([("receiver", receiver.number)] if receiver else [])]
    if receiver is not None:
        cells.extend(receiver.cells)
    else:
        worst_series.append(("receiver", default_ohm))
        assumed.append(f"receiver {default_ohm:g} ohm")
    area = device.area
    cold_c = area.ambient_min_c if area is not None and area.ambient_min_c is not None else None
    if cold_c is None:
        cold_c = data.threshold("ELC cold degC", COLD_C)
    path = cable_path(circuit)
    if path is not None:
        kind_series.append(("cable", path.ohm(cold_c)))
        worst_series.append(("cable", path.ohm(cold_c)))
    kindest = worst = None
    if allowed_v is not None and not missing and kindest_v is not None and worst_v is not None:
        kindest = over_voltage(kindest_v, allowed_v=allowed_v, resistances=kind_series, fixed_drops=drops)
        worst = over_voltage(worst_v, allowed_v=allowed_v, resistances=worst_series, fixed_drops=drops)
    return HighestVolts(
        allowed_v=allowed_v,
        missing=tuple(dict.fromkeys(missing)),
        kindest=kindest,
        worst=worst,
        assumed=tuple(assumed),
        resistances=tuple(worst_series),
        fixed_drops=tuple(drops),
        cells=tuple(dict.fromkeys(cells)),
    )


@lru_cache(maxsize=4096)
def _conductor(text: str) -> Conductor | None:
    return read_conductor_size(text)


@dataclass(frozen=True, slots=True, kw_only=True)
class _Source:
    name: str
    kindest_v: float | None
    worst_v: float | None
    receiver_counts: bool
    same_at_20_ma: bool


def _source(
    circuit: Circuit,
    current_ma: float,
    data: PlantData,
    assumed: list[str],
    missing: list[str],
    cells: list[Cell],
) -> _Source:
    barrier = circuit.barrier
    if circuit.barrier_named and barrier is None:
        missing.append("barrier")
        return _Source(name="barrier", kindest_v=None, worst_v=None, receiver_counts=True, same_at_20_ma=False)
    entry = None
    name = "supply"
    if barrier is not None and _is_isolator(barrier):
        entry, name = barrier, "isolator"
    elif barrier is None and circuit.card is not None and circuit.card.available_20ma_v is not None:
        entry, name = circuit.card, "card"
    if entry is not None:
        volts, title = _available_v(entry.available_20ma_v, entry.available_alarm_v, entry.high_alarm_ma, current_ma)
        if volts is None:
            missing.append(title)
        cells.extend(entry.cells("available_alarm_v" if current_ma > NOMINAL_MA else "available_20ma_v"))
        return _Source(name=name, kindest_v=volts, worst_v=volts, receiver_counts=False, same_at_20_ma=False)
    if circuit.supply_min_v is not None:
        cells.extend(circuit.supply_min_v.cells)
        volts = circuit.supply_min_v.number
        return _Source(name=name, kindest_v=volts, worst_v=volts, receiver_counts=True, same_at_20_ma=True)
    if circuit.supply_nominal_v is not None:
        percent = data.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
        nominal_v = circuit.supply_nominal_v.number
        cells.extend(circuit.supply_nominal_v.cells)
        assumed.append(f"supply {nominal_v:g} V may be {percent:g} % low")
        return _Source(
            name=name,
            kindest_v=nominal_v,
            worst_v=nominal_v * (1 - percent / 100),
            receiver_counts=True,
            same_at_20_ma=True,
        )
    missing.append("supply V min")
    return _Source(name=name, kindest_v=None, worst_v=None, receiver_counts=True, same_at_20_ma=True)


def _available_v(
    at_20_ma_v: float | None, at_alarm_v: float | None, alarm_ma: float | None, current_ma: float
) -> tuple[float | None, str]:
    """Return the volts of a source at the current they are stated for, and the title that is missing if not."""
    if current_ma <= NOMINAL_MA:
        return at_20_ma_v, "volts available at 20 mA"
    if at_alarm_v is not None and (alarm_ma is None or current_ma <= alarm_ma):
        return at_alarm_v, ""
    return None, "volts available at high alarm"


def _is_isolator(barrier: object) -> bool:
    stated = getattr(barrier, "isolation", None)
    if stated is not None:
        return bool(stated == "isolator")
    return getattr(barrier, "available_20ma_v", None) is not None


def _lift_off_v(circuit: Circuit, current_ma: float) -> tuple[float | None, str]:
    kind = circuit.device.type
    if kind is None:
        return None, "type.lift_off_v"
    if current_ma > LOW_FAILURE_MA and kind.lift_off_alarm_v is not None:
        return kind.lift_off_alarm_v, "type.lift_off_alarm_v"
    return kind.lift_off_v, "type.lift_off_v"


def _in_series(
    circuit: Circuit, current_ma: float, missing: list[str], cells: list[Cell]
) -> tuple[list[tuple[str, float]], list[tuple[str, float]]]:
    """Return what lies in series beside receiver and cable: resistances in ohm and fixed drops in volts."""
    series: list[tuple[str, float]] = []
    drops: list[tuple[str, float]] = []
    barrier = circuit.barrier
    if barrier is not None and not _is_isolator(barrier):
        if barrier.resistance_ohm is None and barrier.fixed_drop_v is None:
            missing.append("resistance ohm of the barrier")
        if barrier.resistance_ohm is not None:
            series.append(("barrier", barrier.resistance_ohm))
            cells.extend(barrier.cells("resistance_ohm"))
        if barrier.fixed_drop_v is not None:
            drops.append(("barrier", barrier.fixed_drop_v))
    for member in circuit.members:
        if member is circuit.device or member.kind is not Kind.INDICATOR:
            continue
        _indicator(member, current_ma, series, drops, missing, cells)
    return series, drops


def _indicator(
    member: Installed,
    current_ma: float,
    series: list[tuple[str, float]],
    drops: list[tuple[str, float]],
    missing: list[str],
    cells: list[Cell],
) -> None:
    kind = member.type
    if kind is None or (kind.resistance_ohm is None and kind.fixed_drop_v is None):
        missing.append(f"resistance ohm or fixed drop V of {member.name}")
        return
    if kind.fixed_drop_v is not None:
        drops.append((member.name, kind.fixed_drop_v))
        cells.extend(member.cells("type.fixed_drop_v"))
    if kind.resistance_ohm is not None:
        # With the indicator taken out the diode carries the loop, and drops its own volts.
        if kind.bypass_diode and kind.resistance_ohm * current_ma / 1000 < DIODE_V:
            drops.append((f"diode of {member.name}", DIODE_V))
        else:
            series.append((member.name, kind.resistance_ohm))
        cells.extend(member.cells("type.resistance_ohm"))
