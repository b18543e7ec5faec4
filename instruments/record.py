"""The records that every list, form and database row becomes: one instrument, one device type."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from types import MappingProxyType
from typing import Any

from instruments.kind import Kind
from instruments.origin import Cell, Origin
from instruments.quantity import Quantity
from instruments.unit import Unit

_NOTHING: Mapping[str, Any] = MappingProxyType({})


def nothing() -> Mapping[str, Any]:
    """Return the one empty mapping that all records without a note of some kind share."""
    return _NOTHING


@dataclass(frozen=True, slots=True, kw_only=True)
class Record:
    """What every record carries beside its values.

    Attributes
    ----------
    origin
        The row it was read from; None for a record that no list holds (a form, a what-if).
    elsewhere
        Fields that another row supplied, where rows were merged into one record.
    blanks
        Why a field is blank although its cell has something in it: a placeholder
        (``to be defined``, ``by vendor``, ``hold``, ``not applicable``) by field.
    unread
        Fields whose cell could not be read. They are None, and a rule that needs
        one is unchecked: an unread value is no value.
    unitless
        Fields that hold a number which needs a unit and has none anywhere.
    other
        Columns that were not recognised: heading and text.
    """

    origin: Origin | None = None
    elsewhere: Mapping[str, Origin] = field(default_factory=nothing)
    blanks: Mapping[str, str] = field(default_factory=nothing)
    unread: frozenset[str] = frozenset()
    unitless: Mapping[str, str] = field(default_factory=nothing)
    other: tuple[tuple[str, str], ...] = ()

    def cells(self, name: str) -> tuple[Cell, ...]:
        """Return the cells that field `name` came from."""
        origin = self.elsewhere.get(name) or self.origin
        return origin.cells(name) if origin else ()


@dataclass(frozen=True, slots=True, kw_only=True)
class DeviceType(Record):
    """One entry of the device catalogue, or the limits that a row states for itself.

    Names carry the unit where the value is a bare number. LRL, URL and minimum
    span are quantities with their unit and reference.
    """

    code: str | None = None
    kind: Kind | None = None
    description: str | None = None
    maker: str | None = None
    model: str | None = None
    body: str | None = None  # gauge, absolute, differential
    lrl: Quantity | None = None
    url: Quantity | None = None
    limit_unit: Unit | None = None
    minimum_span: Quantity | None = None
    maximum_turndown: float | None = None
    zero_shift_percent: float | None = None
    over_range_limit: Quantity | None = None
    static_pressure_limit: Quantity | None = None
    process_temperature_min: Quantity | None = None
    process_temperature_max: Quantity | None = None
    seal_temperature_min: Quantity | None = None
    seal_temperature_max: Quantity | None = None
    ambient_min: Quantity | None = None
    ambient_max: Quantity | None = None
    signal: str | None = None
    wires: int | None = None
    hart: bool | None = None
    hart_capacitance_number: float | None = None
    lift_off_v: float | None = None
    lift_off_4ma_v: float | None = None
    lift_off_alarm_v: float | None = None
    maximum_v: float | None = None
    high_alarm_ma: float | None = None
    resistance_ohm: float | None = None
    fixed_drop_v: float | None = None
    device_4ma_v: float | None = None
    device_20ma_v: float | None = None
    bypass_diode: bool | None = None
    available_20ma_v: float | None = None
    available_alarm_v: float | None = None
    compliance_v: float | None = None
    maximum_load_ohm: float | None = None
    maximum_load_supply_v: float | None = None
    maximum_load_ma: float | None = None
    source_or_sink: str | None = None  # source, sink
    coil_w: float | None = None
    nominal_v: float | None = None
    pull_in_percent: float | None = None
    input_ohm: float | None = None
    input_limit_ohm: float | None = None
    working_voltage_v: float | None = None
    ex_marking: str | None = None
    certificate: str | None = None
    ui_v: float | None = None
    ii_ma: float | None = None
    pi_mw: float | None = None
    ci_nf: float | None = None
    li_uh: float | None = None
    uo_v: float | None = None
    io_ma: float | None = None
    po_mw: float | None = None
    co_iic_nf: float | None = None
    co_iib_nf: float | None = None
    co_iia_nf: float | None = None
    lo_iic_mh: float | None = None
    lo_iib_mh: float | None = None
    lo_iia_mh: float | None = None
    lo_ro_uh_per_ohm: float | None = None
    combined_pairs: bool | None = None
    output_characteristic: str | None = None  # linear, other
    isolation: str | None = None  # zener, isolator
    is_earth: bool | None = None
    ip_code: str | None = None
    sensor_type: str | None = None
    sensor_class: str | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Instrument(Record):
    """One row of an instrument list, as it was understood.

    `tag` is the written tag in its normalised spelling; `tag_cell` is the whole
    text of a cell that holds several tags, of which this record is number
    `tag_number` (from 0). `own` are the device limits that the row itself states.
    """

    tag: str | None = None
    tag_written: str | None = None
    tag_cell: str | None = None
    tag_number: int = 0
    service: str | None = None
    device_type: str | None = None
    kind: Kind | None = None
    kind_written: str | None = None
    unit: str | None = None
    area: str | None = None
    loop: str | None = None
    pid: str | None = None
    line: str | None = None
    equipment: str | None = None
    location: str | None = None  # field, panel, cabinet, control room, system
    mounting: str | None = None  # direct, impulse line, remote seal, thermowell
    status: str | None = None  # live words as written; deleted, void, future, spare, demolished
    fluid: str | None = None
    phase: str | None = None
    operating_pressure_min: Quantity | None = None
    operating_pressure_normal: Quantity | None = None
    operating_pressure_max: Quantity | None = None
    operating_temperature_min: Quantity | None = None
    operating_temperature_normal: Quantity | None = None
    operating_temperature_max: Quantity | None = None
    operating_value_min: Quantity | None = None
    operating_value_normal: Quantity | None = None
    operating_value_max: Quantity | None = None
    design_pressure: Quantity | None = None
    design_temperature: Quantity | None = None
    device_temperature: Quantity | None = None
    lrv: Quantity | None = None
    urv: Quantity | None = None
    range_unit: Unit | None = None
    system_lrv: Quantity | None = None
    system_urv: Quantity | None = None
    system_unit: Unit | None = None
    square_root_device: bool | None = None
    square_root_system: bool | None = None
    failure_direction: str | None = None  # high, low
    failure_position: str | None = None  # open, closed, in place, indeterminate
    setting_ll: Quantity | None = None
    setting_l: Quantity | None = None
    setting_h: Quantity | None = None
    setting_hh: Quantity | None = None
    trip: Quantity | None = None
    trip_direction: str | None = None  # high, low
    set_pressure: Quantity | None = None
    settings_unit: Unit | None = None
    bad_signal_detection: bool | None = None
    contact: str | None = None  # NO, NC
    trip_action: str | None = None  # energise, de-energise
    signal: str | None = None
    wires: int | None = None
    io_type: str | None = None
    io_address: str | None = None
    card: str | None = None
    system: str | None = None
    power_supply: str | None = None
    barrier: str | None = None
    receiver_ohm: float | None = None
    junction_box: str | None = None
    terminals: str | None = None
    cable: str | None = None
    cable_type: str | None = None
    cable_length_m: float | None = None
    conductor: str | None = None
    ohm_per_km: float | None = None  # of the cable, as the next two are
    capacitance_pf_per_m: float | None = None
    inductance_uh_per_m: float | None = None
    pair: str | None = None
    area_classification: str | None = None
    process_zone: str | None = None
    nonincendive: bool | None = None
    protection: str | None = None
    ex_marking: str | None = None
    certificate: str | None = None
    x_accepted: str | None = None
    simple_apparatus: bool | None = None
    generated_v: float | None = None
    generated_ma: float | None = None
    generated_mw: float | None = None
    surface_mm2: float | None = None
    earthed_sensor: bool | None = None
    ip_code: str | None = None
    sil: str | None = None
    safety_function: str | None = None
    voting: str | None = None
    maker: str | None = None
    model: str | None = None
    serial: str | None = None
    former_tag: str | None = None
    scope: str | None = None
    place: str | None = None
    hold: str | None = None
    revision: str | None = None
    remarks: str | None = None
    own: DeviceType | None = None
