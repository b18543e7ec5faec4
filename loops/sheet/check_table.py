"""The table by which an analogue circuit is checked: what to put in, and what is then to be read."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.quantity import Quantity
from instruments.record import Instrument
from instruments.sensor import SensorType, pt100_ohm, read_sensor_type, thermocouple_mv
from instruments.signal import TABLE_PERCENT, flow_percent_from_dp_percent, signal_table
from instruments.signal_words import carries_live_zero
from instruments.unit import Unit, UnitMismatch, convert, unit_label
from instruments.unit import unit as unit_of
from loops.budget import RECEIVER_OHM
from loops.circuit import (
    ANALOGUE_INPUT,
    ANALOGUE_OUTPUT,
    DIGITAL_INPUT,
    DIGITAL_OUTPUT,
    RESISTANCE_THERMOMETER,
    THERMOCOUPLE,
    Circuit,
)
from loops.plant import Plant


@dataclass(frozen=True, slots=True, kw_only=True)
class CheckPoint:
    """One point of the check table; None where it cannot be worked, or is no part of this table.

    `sensor_warm` is a thermocouple's voltage where its terminals are at `TERMINALS_C`.
    """

    percent: float
    input_value: float | None = None
    ma: float | None = None
    range_v: float | None = None
    test_mv: float | None = None
    sensor: float | None = None
    sensor_warm: float | None = None
    reading: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class CheckTable:
    """The 0, 25, 50, 75 and 100 % points of an analogue circuit.

    Attributes
    ----------
    law
        ``linear`` or ``square root``.
    input_unit
        Unit of the input; None where it is not given.
    current, resistor_ohm
        Whether it has mA, and the resistor that the volts are read across.
    sensor_unit, sensor
        ``ohm`` or ``mV`` and the sensor's name, of a resistance thermometer or thermocouple.
    reading_unit
        Unit of what the control system shows; None without a system range.
    output
        True for a command to a valve.
    """

    points: tuple[CheckPoint, ...]
    law: str = "linear"
    input_unit: str | None = None
    current: bool = False
    resistor_ohm: float | None = None
    resistor_assumed: bool = False
    sensor_unit: str | None = None
    sensor: str | None = None
    reading_unit: str | None = None
    output: bool = False
    remarks: tuple[str, ...] = ()
    assumed: tuple[str, ...] = ()


LIVE_ZERO: Final = "4-20 mA"
TERMINALS_C: Final = 20.0
"""Of the terminals at which millivolts are fed in, beside 0 degC: a room's."""


def signal_of(row: Instrument, each: Installed) -> str | None:
    """Return `LIVE_ZERO` for a 4-20 mA signal, another as it is written, None where nothing says which it is."""
    text = row.signal or each.record.signal or (each.type.signal if each.type else None)
    live_zero = carries_live_zero(text)
    if live_zero is None:
        return None
    return LIVE_ZERO if live_zero else text


def pressure_ranged(each: Installed) -> bool:
    """Whether a device's range is a pressure: of a flow, the differential pressure before its root is taken."""
    lrv = each.record.lrv
    return lrv is not None and lrv.unit is not None and lrv.unit.kind == "pressure"


def check_table(circuit: Circuit, plant: Plant) -> CheckTable | None:
    """Return the table by which an analogue circuit is checked; None for a contact or a coil."""
    device = circuit.device
    if circuit.kind in (DIGITAL_INPUT, DIGITAL_OUTPUT):
        return None
    sensor = _sensor(circuit)
    if circuit.kind in (RESISTANCE_THERMOMETER, THERMOCOUPLE) or (device.kind is Kind.ELEMENT and sensor is not None):
        return _sensor_table(circuit, sensor)
    if circuit.kind not in (ANALOGUE_INPUT, ANALOGUE_OUTPUT):
        return None
    assumed: list[str] = []
    signal = signal_of(circuit.signal_row, device)
    if signal is None:
        assumed.append("signal 4-20 mA")
    if circuit.kind == ANALOGUE_OUTPUT:
        return _output_table(signal, assumed)
    return _input_table(circuit, plant, signal, assumed)


def _output_table(signal: str | None, assumed: list[str]) -> CheckTable:
    if signal not in (None, LIVE_ZERO):
        remark = f"the signal is {signal}: no currents"
        points = tuple(CheckPoint(percent=percent) for percent in TABLE_PERCENT)
        return CheckTable(points=points, output=True, input_unit="%", remarks=(remark,))
    points = tuple(
        CheckPoint(percent=row.percent, ma=row.ma, test_mv=row.test_mv)
        for row in signal_table(0.0, 100.0, resistor_ohm=None)
    )
    return CheckTable(points=points, output=True, input_unit="%", current=True, assumed=tuple(assumed))


def _input_table(circuit: Circuit, plant: Plant, signal: str | None, assumed: list[str]) -> CheckTable:
    record = circuit.device.record
    remarks: list[str] = []
    ends = _ends(record.lrv, record.urv, remarks, "range")
    from_pressure = pressure_ranged(circuit.device)
    root = bool(record.square_root_device and from_pressure)
    if record.square_root_device is None and from_pressure and circuit.device.letters[:1] == "F":
        assumed.append("linear: where the square root is taken is not stated")
    current = signal in (None, LIVE_ZERO)
    if circuit.receiver_ohm is not None:
        resistor_ohm = circuit.receiver_ohm.number
    else:
        resistor_ohm = plant.data.threshold("ELC receiver ohm", RECEIVER_OHM)
    if not current:
        remarks.append(f"the signal is {signal}: no currents")
    elif circuit.receiver_ohm is None:
        assumed.append(f"receiver {resistor_ohm:g} ohm")  # in the words of the voltage budget
    system = _ends(record.system_lrv, record.system_urv, remarks, "system range") if record.system_urv else None
    root_in_system = bool(record.square_root_system and from_pressure)
    lrv, urv = ends if ends is not None else (0.0, 1.0)
    points = tuple(
        CheckPoint(
            percent=row.percent,
            input_value=row.input_value if ends is not None else None,
            ma=row.ma if current else None,
            range_v=row.range_v if current else None,
            test_mv=row.test_mv if current else None,
            reading=_reading(row.percent, system, root_in_system),
        )
        for row in signal_table(lrv, urv, square_root=root, resistor_ohm=resistor_ohm)
    )
    return CheckTable(
        points=points,
        law="square root" if root or root_in_system else "linear",
        input_unit=_unit_text(record.urv) if ends is not None else None,
        current=current,
        resistor_ohm=resistor_ohm if current else None,
        resistor_assumed=circuit.receiver_ohm is None,
        reading_unit=_unit_text(record.system_urv) if system is not None else None,
        remarks=tuple(remarks),
        assumed=tuple(assumed),
    )


def _reading(percent: float, ends: tuple[float, float] | None, root: bool) -> float | None:
    """Return what the system shows at a signal in percent."""
    if ends is None:
        return None
    fraction = (flow_percent_from_dp_percent(percent) if root else percent) / 100.0
    return ends[0] * (1.0 - fraction) + ends[1] * fraction


def _unit_text(quantity: Quantity | None) -> str | None:
    return unit_label(quantity.unit) if quantity is not None and quantity.unit is not None else None


def _ends(lrv: Quantity | None, urv: Quantity | None, remarks: list[str], name: str) -> tuple[float, float] | None:
    """Return both ends of a range in the upper end's unit; None, with a remark, where that cannot be done."""
    if lrv is None or urv is None:
        remarks.append(f"{name} not given")
        return None
    low = lrv.number
    if lrv.unit != urv.unit:
        if lrv.unit is None or urv.unit is None:
            remarks.append(f"one end of the {name} has no unit")
            return None
        try:
            low = lrv.to(urv.unit)
        except UnitMismatch as error:
            remarks.append(f"the ends of the {name} cannot be compared: {error}")
            return None
    if low == urv.number:
        remarks.append(f"the {name} has no span")
        return None
    return low, urv.number


_read_sensor: Final = lru_cache(maxsize=4096)(read_sensor_type)


def _sensor(circuit: Circuit) -> SensorType | None:
    kind, record = circuit.device.type, circuit.device.record
    for text in (
        kind.sensor_type if kind else None,
        circuit.signal_row.signal,
        record.signal,
        kind.signal if kind else None,
        record.kind_written,
    ):
        sensor = _read_sensor(text) if text else None
        if sensor is not None:
            return sensor
    return None


def _sensor_table(circuit: Circuit, sensor: SensorType | None) -> CheckTable:
    record = circuit.device.record
    remarks: list[str] = []
    source = (record.lrv, record.urv)
    if record.lrv is None and record.urv is None:
        source = (record.system_lrv, record.system_urv)
    ends = _ends(*source, remarks, "range")
    system = _ends(record.system_lrv, record.system_urv, [], "") if record.system_urv else None
    unit = source[1].unit if source[1] is not None else None
    points: list[CheckPoint] = []
    for percent in TABLE_PERCENT:
        value = reading = None
        if ends is not None:
            value = ends[0] * (1.0 - percent / 100.0) + ends[1] * percent / 100.0
            reading = _sensor_reading(sensor, value, unit, remarks)
        points.append(
            CheckPoint(
                percent=percent,
                input_value=value,
                sensor=reading,
                sensor_warm=_warm(sensor, reading),
                reading=_reading(percent, system, False),
            )
        )
    name = None
    if sensor is None:
        remarks.append("sensor type not given")
    elif sensor.letter is None:
        name = f"{sensor.name}, IEC 60751"
    else:
        name = f"{sensor.name}, IEC 60584-1, with the terminals at 0 or {TERMINALS_C:g} \u00b0C"
    return CheckTable(
        points=tuple(points),
        input_unit=_unit_text(source[1]) if ends is not None else None,
        sensor_unit=None if sensor is None else "ohm" if sensor.letter is None else "mV",
        sensor=name,
        reading_unit=_unit_text(record.system_urv) if system is not None else None,
        remarks=tuple(dict.fromkeys(remarks)),
    )


def _warm(sensor: SensorType | None, cold_mv: float | None) -> float | None:
    """Return what is left to feed in where the terminals are warm themselves."""
    if sensor is None or sensor.letter is None or cold_mv is None:
        return None
    return cold_mv - thermocouple_mv(sensor.letter, TERMINALS_C)


def _sensor_reading(sensor: SensorType | None, value: float, unit: Unit | None, remarks: list[str]) -> float | None:
    """Return ohm or millivolts (terminals at 0 degC) at a temperature; None where the standard has none."""
    if sensor is None:
        return None
    if unit is None or unit.kind != "temperature":
        remarks.append("the range is no temperature: nothing to inject can be worked")
        return None
    temperature_c = convert(value, unit, unit_of("degC"))
    try:
        if sensor.letter is not None:
            return thermocouple_mv(sensor.letter, temperature_c)
        return pt100_ohm(temperature_c, r0_ohm=sensor.r0_ohm or 100.0)
    except ValueError as error:
        remarks.append(str(error))
        return None
