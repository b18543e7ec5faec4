"""What lies in series in a circuit on one side of its isolator: ohms and volts, each with where it came from."""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass, field
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.origin import Cell
from instruments.plant_data import PlantData
from instruments.quantity import format_number
from instruments.record import DeviceType
from instruments.signal_words import signal_classes
from instruments.span import above
from loops.budget import DIODE_V, HOT_C, RECEIVER_OHM, ohm_per_km
from loops.cable import Conductor, temperature_factor
from loops.circuit import ANALOGUE_INPUT, ANALOGUE_OUTPUT, Circuit, Given

NOMINAL_MA: Final = 20.0
LEAST_MA: Final = 4.0

_SENDS: Final = frozenset({Kind.TRANSMITTER, Kind.ANALYSER, Kind.GAS_DETECTOR, Kind.FIRE_DETECTOR})
_DRIVES: Final = frozenset({Kind.POSITIONER, Kind.IP_CONVERTER})
_VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.MANUAL_VALVE})


@dataclass(frozen=True, slots=True, kw_only=True)
class Term:
    """One thing in series: ohms that grow with the current, volts that do not, and where they came from.

    `least_v` is what it drops at any current all the same: the diode around an indicator that is taken out.
    """

    name: str
    source: str
    ohm: float = 0.0
    fixed_v: float = 0.0
    least_v: float = 0.0

    def volts(self, current_ma: float) -> float:
        """Volts across it at a current in mA."""
        return max(self.ohm * current_ma / 1000.0 + self.fixed_v, self.least_v)

    def ohm_at(self, current_ma: float) -> float:
        """Resistance that it comes to at a current in mA."""
        if not self.fixed_v and not self.least_v:
            return self.ohm
        return self.volts(current_ma) / current_ma * 1000.0

    def as_ohm(self, current_ma: float) -> str:
        """Write it as a resistance at a current, with its source."""
        ohm = f"{self.name} {shown(self.ohm_at(current_ma))} ohm"
        if self.fixed_v or self.least_v:
            ohm += f" = {shown(self.volts(current_ma))} V / {format_number(current_ma)} mA"
        return f"{ohm} ({self.source})"

    def as_volts(self, current_ma: float) -> str:
        """Write it as volts at a current, with its source."""
        if not self.ohm or self.volts(current_ma) == self.least_v:
            return f"{self.name} {shown(self.volts(current_ma))} V ({self.source})"
        fixed = f" + {shown(self.fixed_v)} V" if self.fixed_v else ""
        return (
            f"{self.name} {format_number(current_ma)} mA x {shown(self.ohm)} ohm{fixed}"
            f" = {shown(self.volts(current_ma))} V ({self.source})"
        )


@dataclass(slots=True)
class Series:
    """Things in series, what is not stated of them, as titles, and the cells that state them."""

    terms: list[Term] = field(default_factory=list)
    missing: list[str] = field(default_factory=list)
    cells: list[Cell] = field(default_factory=list)


def shown(value: float, decimals: int = 3) -> str:
    """Write a computed figure to some decimals, without zeros at its end.

    >>> shown(254.3434), shown(250.0), shown(-0.0004)
    ('254.343', '250', '0')
    """
    text = f"{value:.{decimals}f}"
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text in ("-0", "") else text


def entry_name(entry: DeviceType) -> str:
    """Return where a figure of a catalogue entry stands, for workings: the type's code, else the row itself."""
    return f"type {entry.code}" if entry.code else "its row"


def given_by(given: Given, circuit: Circuit) -> str:
    """Return where a given number stands, for workings."""
    if given.source == "card":
        return f"card {circuit.card.code if circuit.card and circuit.card.code else circuit.card_named or ''}".strip()
    if given.source == "power supply":
        return f"power supply {circuit.supply_named or ''}".strip()
    if given.source == "device":
        return f"input of {given.item}"
    return {"loop row": "loop list", "row": "its row", "cables": "cable schedule"}.get(given.source, given.source)


# ---------------------------------------------------------------------------------------------- which circuits


def carries_a_current(circuit: Circuit) -> bool:
    """Whether a circuit is a 4-20 mA loop, by its signal; where that is blank, by what its device is."""
    if circuit.kind not in (None, ANALOGUE_INPUT, ANALOGUE_OUTPUT):
        return False
    device = circuit.driven
    text = circuit.signal_row.signal
    if not text and device.type is not None:
        text = device.type.signal
    classes = signal_classes(text)
    if classes:
        return "current" in classes
    if circuit.kind == ANALOGUE_OUTPUT:
        return True
    return device.kind in _SENDS


def is_output(circuit: Circuit) -> bool:
    """Whether the system sends the current: an analogue output.

    What a device is goes before its I/O type: a positioner on an input is a wrong I/O type, and no transmitter.
    """
    kind = circuit.driven.kind
    if kind in _DRIVES:
        return True
    if kind in _SENDS:
        return False
    if circuit.kind is not None:
        return circuit.kind == ANALOGUE_OUTPUT
    return kind in _VALVES


def driven_devices(circuit: Circuit) -> tuple[Installed, ...]:
    """Return what an output moves: the positioners or converters on it, else its valves, else its device."""
    for kinds in (_DRIVES, _VALVES):
        found = tuple(each for each in circuit.members if each.kind in kinds)
        if found:
            return found
    return (circuit.device,)


def indicators(circuit: Circuit) -> tuple[Installed, ...]:
    """Return the indicators that lie in another device's signal."""
    if len(circuit.members) == 1:
        return ()
    return tuple(each for each in circuit.members if each is not circuit.device and each.kind is Kind.INDICATOR)


# --------------------------------------------------------------------------------------------------- what is in it


@dataclass(frozen=True, slots=True, kw_only=True)
class HotCable:
    """A circuit's cable at its hottest, out and back: what one metre of it comes to, and its length."""

    length_m: float | None
    ohm_per_m: float | None
    source: str = ""

    @property
    def missing(self) -> tuple[str, ...]:
        """What it lacks, as titles."""
        if self.length_m is not None and self.ohm_per_m is not None:
            return ()
        lacking = (("cable length", self.length_m), ("conductor size", self.ohm_per_m))
        return tuple(title for title, value in lacking if value is None)

    def term(self, length_m: float | None = None) -> Term | None:
        """Return it as a term; None where its length or its resistance is not known."""
        length = self.length_m if length_m is None else length_m
        if length is None or self.ohm_per_m is None:
            return None
        return Term(name="cable", ohm=length * self.ohm_per_m, source=self.source)


def hot_cable(circuit: Circuit, data: PlantData, *, named: bool = False) -> HotCable:
    """Return a circuit's cable with its conductors hot.

    Parameters
    ----------
    circuit, data
        The circuit, and the plant's data for how hot.
    named
        Whether to write where the figures came from: only for what is shown.
    """
    hot_c = data.threshold("ELC hot degC", HOT_C)
    length = circuit.cable_length_m
    per_km = ohm_per_km(circuit)
    ohm_per_m = None
    if per_km is not None:
        ohm_20c, per, _ = per_km
        ohm_per_m = (2.0 if per == "conductor" else 1.0) * ohm_20c / 1000.0 * temperature_factor(hot_c)
    source = ""
    if named and length is not None and per_km is not None:
        ohm_20c, per, conductor = per_km
        out_and_back = "2 x " if per == "conductor" else ""
        source = (
            f"{out_and_back}{shown(length.number)} m, {given_by(length, circuit)},"
            f" x {shown(ohm_20c)} ohm/km, {_ohm_source(circuit, conductor)},"
            f" x {temperature_factor(hot_c):.4f} at {format_number(hot_c)} degC"
        )
    return HotCable(length_m=length.number if length is not None else None, ohm_per_m=ohm_per_m, source=source)


def _ohm_source(circuit: Circuit, conductor: Conductor | None) -> str:
    if circuit.segments:
        return "mean of its cables out and back"
    kind = circuit.cable_type
    if kind is not None and kind.ohm_per_km is not None:
        return f"cable type {kind.code}"
    if conductor is not None and conductor.awg is not None:
        return f"AWG {conductor.awg} by ASTM B258"
    return f"IEC 60228 for {circuit.conductor}"


def zener_in_series(circuit: Circuit, found: Series) -> None:
    """Add the zener barrier, where there is one."""
    barrier = circuit.zener
    if barrier is None:
        return
    if barrier.resistance_ohm is None and barrier.fixed_drop_v is None:
        found.missing.append("resistance ohm of the barrier")
        return
    found.cells.extend((*barrier.cells("resistance_ohm"), *barrier.cells("fixed_drop_v")))
    found.terms.append(
        Term(
            name="barrier",
            ohm=barrier.resistance_ohm or 0.0,
            fixed_v=barrier.fixed_drop_v or 0.0,
            source=entry_name(barrier),
        )
    )


def indicators_in_series(circuit: Circuit, found: Series, *, system_side: bool | None = None) -> None:
    """Add the indicators in series: of one side of the isolator, or of the whole circuit.

    One that states an input resistance reads the volts across the range resistor, and is not in series.
    With the indicator taken out its diode carries the loop, and drops its own volts: the greater counts.
    """
    for member in indicators(circuit):
        if system_side is not None and circuit.on_system_side(member) is not system_side:
            continue
        kind = member.type
        if kind is not None and kind.input_ohm is not None and kind.resistance_ohm is None:
            continue
        if kind is None or (kind.resistance_ohm is None and kind.fixed_drop_v is None):
            found.missing.append(f"resistance ohm or fixed drop V of {member.name}")
            continue
        found.cells.extend((*member.cells("type.resistance_ohm"), *member.cells("type.fixed_drop_v")))
        found.terms.append(
            Term(
                name=member.name,
                ohm=kind.resistance_ohm or 0.0,
                fixed_v=kind.fixed_drop_v or 0.0,
                least_v=DIODE_V if kind.bypass_diode else 0.0,
                source=entry_name(kind),
            )
        )


def card_in_series(circuit: Circuit, found: Series) -> bool:
    """Add what the card puts in series beside its input; say whether it states any."""
    card = circuit.card
    if card is None or (card.resistance_ohm is None and card.fixed_drop_v is None):
        return False
    found.cells.extend((*card.cells("resistance_ohm"), *card.cells("fixed_drop_v")))
    found.terms.append(
        Term(
            name="card",
            ohm=card.resistance_ohm or 0.0,
            fixed_v=card.fixed_drop_v or 0.0,
            source=entry_name(card),
        )
    )
    return card.resistance_ohm is not None


def receiver_term(circuit: Circuit) -> Term | None:
    """Return the receiver as a term: the range resistor with all inputs across it; None where none is stated."""
    given = circuit.receiver_ohm
    if given is None:
        return None
    several = len(circuit.receivers) > 1 and given.number != circuit.receivers[0].number
    source = "with the inputs across it" if several else given_by(given, circuit)
    return Term(name="receiver", ohm=given.number, source=source)


def assumed_receiver(data: PlantData) -> Term:
    """Return the receiver that is assumed where none is stated."""
    return Term(
        name="receiver", ohm=data.threshold("ELC receiver ohm", RECEIVER_OHM), source="assumed, ELC receiver ohm"
    )


def driven_in_series(circuit: Circuit, found: Series, current_ma: float) -> None:
    """Add what an output moves, with the volts that it is stated to need at a current, else its resistance."""
    for device in driven_devices(circuit):
        kind = device.type
        at_4_ma, at_20_ma = (kind.device_4ma_v, kind.device_20ma_v) if kind is not None else (None, None)
        volts = at_4_ma if current_ma == LEAST_MA else at_20_ma
        if kind is not None and volts is not None:
            field_name = "type.device_4ma_v" if current_ma == LEAST_MA else "type.device_20ma_v"
            found.cells.extend(device.cells(field_name))
            found.terms.append(Term(name=device.name, fixed_v=volts, source=entry_name(kind)))
        elif at_4_ma is not None or at_20_ma is not None:
            # Volts at one current say nothing of another: a positioner is no resistor.
            found.missing.append(f"device volts at {format_number(current_ma)} mA")
        elif kind is not None and (ohm := _own_ohm(kind)) is not None:
            field_name = "type.resistance_ohm" if kind.resistance_ohm is not None else "type.input_ohm"
            found.cells.extend(device.cells(field_name))
            found.terms.append(
                Term(name=device.name, ohm=ohm, fixed_v=kind.fixed_drop_v or 0.0, source=entry_name(kind))
            )
        else:
            found.missing.append(f"device volts at {format_number(current_ma)} mA or resistance ohm")


def _own_ohm(kind: DeviceType) -> float | None:
    if kind.resistance_ohm is not None:
        return kind.resistance_ohm
    if kind.input_ohm is not None:
        return kind.input_ohm
    return 0.0 if kind.fixed_drop_v is not None else None


def isolator_input(circuit: Circuit, current_ma: float) -> Term | None:
    """Return what the side that drives the isolator meets there; None where the isolator does not state it."""
    entry = circuit.isolator
    if entry is None:
        return None
    volts = entry.device_4ma_v if current_ma == LEAST_MA else entry.device_20ma_v
    if volts is not None:
        return Term(name=f"input of {entry.code or 'the isolator'}", fixed_v=volts, source=entry_name(entry))
    ohm = entry.input_ohm if entry.input_ohm is not None else entry.resistance_ohm
    if ohm is None and entry.fixed_drop_v is None:
        return None
    return Term(
        name=f"input of {entry.code or 'the isolator'}",
        ohm=ohm or 0.0,
        fixed_v=entry.fixed_drop_v or 0.0,
        source=entry_name(entry),
    )


# ----------------------------------------------------------------------------------------------------- sums, lengths


def total_ohm(terms: Iterable[Term], current_ma: float) -> float:
    """Sum of resistances at a current in mA."""
    return math.fsum([each.ohm_at(current_ma) for each in terms])


def total_volts(terms: Iterable[Term], current_ma: float) -> float:
    """Sum of volts at a current in mA."""
    return math.fsum(each.volts(current_ma) for each in terms)


def exceeds(value: float, limit: float) -> bool:
    """Whether a figure lies above its limit by more than float noise."""
    return above(value, limit)
