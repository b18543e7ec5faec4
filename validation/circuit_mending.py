"""How a circuit is mended: the cell that holds its cable's length, its conductor, its supply, and the new value."""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any, NamedTuple

from loops.budget import SUPPLY_TOLERANCE_PERCENT
from loops.circuit import Circuit
from loops.plant import Plant, name_key
from loops.record import Cable
from validation.finding import Fix


class _Row(NamedTuple):
    """The row that a fix changes, as `Fix` names it."""

    subject: str
    sheet: str


def _loop_row(circuit: Circuit, plant: Plant) -> _Row | None:
    """Return the row of the loop list; None where its name is that of other circuits too."""
    row = circuit.row
    if row is None:
        return None
    for field, text in (("circuit", row.circuit), ("number", row.number)):
        if text:
            alone = sum(1 for other in plant.loop_rows if getattr(other, field) == text) == 1
            return _Row(text, "Loops") if alone else None
    return None


def _own_row(circuit: Circuit) -> _Row | None:
    """Return the device's row; None where it has several signals, whose rows would all be changed."""
    return _Row(circuit.device.name, "Instruments") if len(circuit.device.signals) <= 1 else None


def _changing(row: _Row | None, change: Mapping[str, str]) -> dict[str, Any]:
    return {} if row is None else {"change": change, "subject": row.subject, "sheet": row.sheet}


def length_change(circuit: Circuit, length_m: int, plant: Plant) -> dict[str, Any]:
    """Return what a `Fix` changes to give a circuit's cable another length; nothing where cables are summed."""
    source = circuit.cable_length_m.source if circuit.cable_length_m else ""
    if source == "cables":
        return _changing(_only_cable(circuit, plant), {"length": str(length_m)})
    row = {"loop row": _loop_row(circuit, plant), "row": _own_row(circuit)}.get(source)
    return _changing(row, {"cable length": str(length_m)})


def card_change(circuit: Circuit, code: str, plant: Plant) -> dict[str, Any]:
    """Return what a `Fix` changes to put a circuit on another card: its row of the loop list, or the device's."""
    row = _loop_row(circuit, plant) if circuit.row is not None and circuit.row.card else _own_row(circuit)
    return _changing(row, {"card": code})


def range_resistor_change(circuit: Circuit, ohm: float, plant: Plant) -> dict[str, Any]:
    """Return what a `Fix` changes to give a circuit another range resistor; nothing where it is a card's own."""
    source = circuit.receivers[0].source if circuit.receivers else ""
    if source == "loop row":
        return _changing(_loop_row(circuit, plant), {"range resistor": f"{ohm:g}"})
    return _changing(_own_row(circuit), {"receiver ohm": f"{ohm:g}"}) if source == "row" else {}


def _only_cable(circuit: Circuit, plant: Plant) -> _Row | None:
    """Return the row of the cable schedule that is the whole run, of one circuit alone."""
    cable = plant.cables.get(name_key(circuit.signal_row.cable or circuit.device.record.cable))
    given = circuit.cable_length_m
    if cable is None or not cable.number or given is None or cable.length_m != given.number:
        return None
    return _Row(cable.number, "Cables") if cable.pairs is None or cable.pairs <= 1 else None


def conductor_change(circuit: Circuit, size_mm2: float) -> dict[str, Any]:
    """Return what a `Fix` changes to give a circuit's cable another conductor.

    A cable type is shared by other circuits: changing it is for a person to say.
    """
    if circuit.signal_row.conductor and (circuit.cable_type is None or circuit.cable_type.ohm_per_km is None):
        return _changing(_own_row(circuit), {"conductor size": f"{size_mm2:g} mm2"})
    return {}


def cable_type_change(circuit: Circuit, code: str, cable: Cable | None, plant: Plant) -> dict[str, Any]:
    """Return what a `Fix` changes to give a circuit's cable another type: of its row, else of the cable itself.

    A cable of several pairs is shared by other circuits: changing it is for a person to say.
    """
    if cable is not None:
        alone = sum(1 for other in plant.cables.values() if other.number == cable.number) == 1
        own = cable.number and alone and (cable.pairs is None or cable.pairs <= 1)
        return _changing(_Row(cable.number or "", "Cables") if own else None, {"type": code})
    row = _loop_row(circuit, plant) if circuit.row is not None and circuit.row.cable_type else _own_row(circuit)
    return _changing(row, {"cable type": code})


def wires_change(circuit: Circuit, wires: int) -> dict[str, Any]:
    """Return what a `Fix` changes to connect a device by another number of wires; nothing where its type has others."""
    kind = circuit.device.type
    if kind is not None and kind.wires not in (None, wires):
        return {}
    return _changing(_own_row(circuit), {"wires": str(wires)})


def least_supply_change(circuit: Circuit, least_v: float, plant: Plant) -> dict[str, Any]:
    """Return what a `Fix` changes to give a circuit a supply that is never below some volts."""
    lowest, nominal = circuit.supply_min_v, circuit.supply_nominal_v
    if lowest is not None:
        if lowest.source == "loop row":
            return _changing(_loop_row(circuit, plant), {"supply V min": f"{least_v:g}"})
        return {}
    if nominal is None:
        return {}
    percent = plant.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
    if percent >= 100.0:
        return {}
    nominal_v = math.ceil(round(least_v / (1 - percent / 100) * 10, 6)) / 10
    return _nominal_change(circuit, nominal_v, plant)


def highest_supply_fix(circuit: Circuit, highest_v: float, plant: Plant) -> Fix:
    """Return the fix that gives a circuit a supply that is never above some volts."""
    change: dict[str, Any] = {}
    if circuit.supply_max_v is not None:
        if circuit.supply_max_v.source == "loop row":
            change = _changing(_loop_row(circuit, plant), {"supply V max": f"{highest_v:g}"})
    elif circuit.supply_nominal_v is not None:
        percent = plant.threshold("ELC supply tolerance %", SUPPLY_TOLERANCE_PERCENT)
        nominal_v = math.floor(round(highest_v / (1 + percent / 100) * 10, 6)) / 10
        change = _nominal_change(circuit, nominal_v, plant)
    return Fix(text=f"supply of at most {highest_v:g} V at its highest", **change)


def _nominal_change(circuit: Circuit, nominal_v: float, plant: Plant) -> dict[str, Any]:
    source = circuit.supply_nominal_v.source if circuit.supply_nominal_v else ""
    if source == "loop row":
        return _changing(_loop_row(circuit, plant), {"supply V nominal": f"{nominal_v:g}"})
    if source == "row":
        return _changing(_own_row(circuit), {"power supply": f"{nominal_v:g} V DC"})
    return {}


def volts_text(volts: float, margin_v: float) -> str:
    """Write volts to as many decimals as it takes to see the margin.

    >>> volts_text(10.488, -0.012), volts_text(10.49999, -0.00001)
    ('10.488 V', '10.49999 V')
    """
    decimals = 3
    while decimals < 9 and margin_v and not round(margin_v, decimals):
        decimals += 1
    shown = f"{volts:.{decimals}f}".rstrip("0").rstrip(".")
    return f"{shown} V"


def barrier_change(circuit: Circuit, code: str, plant: Plant, *, length_m: int | None = None) -> dict[str, Any]:
    """Return what a `Fix` changes to give a circuit another barrier, and a cable of that length with it.

    Nothing where no one row holds both.
    """
    row = circuit.row
    if row is not None and row.barrier:
        place, source = _loop_row(circuit, plant), "loop row"
    else:
        place, source = _own_row(circuit), "row"
    if length_m is None:
        return _changing(place, {"barrier": code})
    if circuit.cable_length_m is None or circuit.cable_length_m.source != source:
        return {}
    return _changing(place, {"barrier": code, "cable length": str(length_m)})
