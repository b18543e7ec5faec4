"""The records of the lists that wire instruments together: loop rows, cables, cable types, terminations."""

from __future__ import annotations

from dataclasses import dataclass

from instruments.record import Record


@dataclass(frozen=True, slots=True, kw_only=True)
class LoopRow(Record):
    """One row of the loop list: one circuit."""

    number: str | None = None
    circuit: str | None = None  # the circuit's own number, or the tag it belongs to
    service: str | None = None
    kind: str | None = None  # AI, AO, DI, DO, RTD, TC
    supply_min_v: float | None = None
    supply_nominal_v: float | None = None
    supply_max_v: float | None = None
    card: str | None = None
    barrier: str | None = None
    range_resistor_ohm: float | None = None
    hart: bool | None = None
    intrinsically_safe: bool | None = None
    cable_type: str | None = None
    cable_length_m: float | None = None
    parent_loop: str | None = None
    drawing: str | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Cable(Record):
    """One cable of the cable schedule."""

    number: str | None = None
    type: str | None = None
    from_item: str | None = None
    to_item: str | None = None
    length_m: float | None = None
    pairs: int | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class CableType(Record):
    """One entry of the cable catalogue."""

    code: str | None = None
    conductor: str | None = None
    class_: str | None = None
    tinned: bool | None = None
    ohm_per_km: float | None = None
    resistance_per: str | None = None  # conductor, loop
    capacitance_pf_per_m: float | None = None
    inductance_uh_per_m: float | None = None
    lr_uh_per_ohm: float | None = None
    extension_type: str | None = None
    insulation_temperature_c: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Termination(Record):
    """One conductor between two terminals."""

    circuit: str | None = None
    from_item: str | None = None
    from_terminal: str | None = None
    to_item: str | None = None
    to_terminal: str | None = None
    cable: str | None = None
    pair: str | None = None
    core: str | None = None
    colour: str | None = None
    screen_earthed_at: str | None = None
    wire_mark: str | None = None
    common: bool | None = None
