"""ELC14 and ELC15: what lies between a temperature sensor and its input, and what it adds to the reading."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import Any, Final, NamedTuple

from instruments.extension_cable import (
    COPPER,
    IEC_COLOURS,
    ExtensionCable,
    cable_error_k,
    extension_in_words,
    fits,
    fitting_cables,
    read_extension,
)
from instruments.installed import Installed
from instruments.measurement import at
from instruments.named_sensor import NamedSensor, named_sensor
from instruments.origin import Cell
from instruments.quantity import format_number
from instruments.tag import natural_key
from loops.budget import figure_cells
from loops.cable import Conductor, conductor_ohm_per_km_20c, read_conductor_size
from loops.circuit import RESISTANCE_THERMOMETER, THERMOCOUPLE, Circuit
from loops.given import listed_cables
from loops.leads import TwoWires, lead_wires, sensor_circuits, two_wires
from loops.plant import Plant, name_key
from loops.record import Cable, CableType
from validation.bodies import measured
from validation.circuit_mending import cable_type_change, length_change, wires_change
from validation.finding import Clear, Fix, Found, Severity, Unchecked, Verdict
from validation.rule import Subject, rule

_KELVIN: Final = 273.15
# For the working: a head in the sun and a cool cabinet.
_HEAD_C: Final = 45.0
_CABINET_C: Final = 25.0


def _thermocouples(circuit: Circuit, plant: Plant) -> Iterator[tuple[Circuit, NamedSensor | None]]:
    """Give the circuits of a thermocouple's own signal, with what it is; None where nothing says which."""
    for each in sensor_circuits(circuit, plant):
        named = named_sensor(each.device)
        if named is None:
            if each.kind == THERMOCOUPLE and not _names_another_sensor(each.device):
                yield each, None
        elif named.sensor.letter is not None:
            yield each, named


def _names_another_sensor(device: Installed) -> bool:
    """Whether the type names a sensor for which no standard function is held: Ni100, Cu10."""
    stated = device.type.sensor_type if device.type is not None else None
    return bool(stated) and any(sign.isdigit() for sign in stated or "")


def _with_thermocouple(circuit: Circuit, plant: Plant) -> bool:
    return any(True for _ in _thermocouples(circuit, plant))


class _Piece(NamedTuple):
    """One cable between an element and its input: what it is called, its entry, and where it is named."""

    name: str
    type_named: str | None
    type: CableType | None
    cable: Cable | None


@rule(
    "ELC14",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_with_thermocouple,
    message="{cable} is {extension}, {device} is {element}",
    basis="IEC 60584-3:2021 for the cables, from memory; IEC 60584-1:2013 for the error",
)
def wrong_extension_cable(circuit: Circuit, plant: Plant) -> Verdict:
    """A thermocouple whose cable to the cold junction is not of its type.

    Why it matters: each degree between the head and the cabinet is lost or counted twice, and it changes with
    the weather: the cold-junction compensation cannot know that the cable is another.

    What to do: take the extension or compensating cable of the element, over the whole way.

    >>> from validation.example import said
    >>> row = {"tag": "TE-1", "kind": "thermocouple", "signal": "TC type K", "I/O type": "TC", "I/O address": "1",
    ...        "cable type": "J"}
    >>> types = [{"code": "J", "conductor size": 1.5, "extension type": "JX"}]
    >>> said("ELC14", [row], cable_types=types)
    ['T-1: cable type J is JX, TE-1 is type K']
    >>> said("ELC14", [row], cable_types=[{**types[0], "extension type": "KCB"}])
    []
    """
    found: list[Found] = []
    missing: dict[str, None] = {}
    assumed: dict[str, None] = {}
    for each, named in _thermocouples(circuit, plant):
        pieces = tuple(_pieces(each, plant))
        if named is None:
            missing["sensor type"] = None
        elif not pieces:
            missing["cable type"] = None
        else:
            letter = named.sensor.letter or ""
            for piece in pieces:
                cable = _extension_of(piece, plant)
                if isinstance(cable, str):
                    missing[cable] = None
                    continue
                fit = fits(letter, cable)
                if fit is None:
                    assumed["copper behind a thermocouple of type B, whose head stays below 100 degC"] = None
                elif not fit:
                    found.append(_wrong(circuit, each, named, piece, cable, len(pieces) > 1, plant))
    if found:
        return found
    if missing:
        return Unchecked(*missing)
    return Clear(tuple(assumed)) if assumed else None


def _pieces(circuit: Circuit, plant: Plant) -> Iterator[_Piece]:
    """Give the cables of a run: the type that row or loop list states, and each cable of the schedule on the way."""
    cell = circuit.signal_row.cable or circuit.device.record.cable
    box = circuit.signal_row.junction_box or circuit.device.record.junction_box
    cables = listed_cables(cell, box=box, plant=plant)
    stated = name_key(circuit.cable_type_named)
    if stated and stated not in {name_key(each.type) for each in cables}:
        yield _Piece(f"cable type {circuit.cable_type_named}", circuit.cable_type_named, circuit.cable_type, None)
    for each in cables:
        kind = plant.cable_types.get(name_key(each.type)) if each.type else None
        yield _Piece(f"cable {each.number}, type {each.type or 'not stated'},", each.type, kind, each)


def _extension_of(piece: _Piece, plant: Plant) -> ExtensionCable | str:
    """Return what a cable is, else the title of the blank that leaves it open."""
    kind = piece.type
    if kind is None:
        if piece.type_named is None:
            return "cable type"
        if plant.cable_types:
            return "cable type"  # it is not listed
        return extension_in_words(piece.type_named) or "extension type"
    if kind.extension_type is not None:
        return read_extension(kind.extension_type) or "extension type"
    return ExtensionCable(letter=None) if _is_copper(kind) else "extension type"


_COPPER_WITHIN: Final = 0.25


def _is_copper(kind: CableType) -> bool:
    """Whether a cable without an extension type has the resistance of copper.

    The alloys of K, J, T, E and N have twenty to sixty times as much.
    """
    if kind.ohm_per_km is None or kind.conductor is None:
        return False
    size = read_conductor_size(kind.conductor)
    if size is None:
        return False
    copper = conductor_ohm_per_km_20c(
        Conductor(size_mm2=size.size_mm2, awg=size.awg, conductor_class=2, tinned=bool(kind.tinned))
    )
    if copper is None:
        return False
    own = kind.ohm_per_km / 2.0 if kind.resistance_per == "loop" else kind.ohm_per_km
    return math.isclose(own, copper, rel_tol=_COPPER_WITHIN)


def _wrong(
    circuit: Circuit,
    each: Circuit,
    named: NamedSensor,
    piece: _Piece,
    cable: ExtensionCable,
    several: bool,
    plant: Plant,
) -> Found:
    letter = named.sensor.letter or ""
    wanted = ", ".join(fitting_cables(letter)) or f"a cable for type {letter}"
    parts = [each.device.name] if each is not circuit else []
    if several:
        parts.append(piece.cable.number or piece.name if piece.cable is not None else piece.name)
    cells: list[Cell] = []
    if piece.type is not None:
        cells.extend(piece.type.cells("extension_type"))
    if piece.cable is not None:
        cells.extend(piece.cable.cells("type"))
    elif circuit.row is not None:
        cells.extend(circuit.row.cells("cable_type"))
    cells.extend(each.device.cells(named.field))
    working, off_by = _error(letter, each.device, cable, plant)
    return Found(
        values={
            "cable": piece.name,
            "extension": _called(cable, piece),
            "device": each.device.name,
            "element": named.sensor.name,
        },
        fields=("cable_type",),
        part=", ".join(parts),
        found=cable.name,
        wanted=wanted,
        off_by=off_by,
        working=working,
        fixes=_cable_fixes(each, letter, piece, plant),
        cells=tuple(dict.fromkeys(cells)),
    )


def _called(cable: ExtensionCable, piece: _Piece) -> str:
    kind = piece.type
    if cable.letter is None and kind is not None and kind.extension_type is None:
        return f"{COPPER} by its {kind.ohm_per_km:g} ohm/km"
    return cable.name


def _error(letter: str, device: Installed, cable: ExtensionCable, plant: Plant) -> tuple[str, str]:
    """Return the error as a working, and short, for a head warmer than the cabinet; empty where it cannot be worked."""
    hot_c = _hottest_c(device, plant)
    if hot_c is None:
        return f"type {letter} takes {', '.join(fitting_cables(letter))} (IEC 60584-3, from memory)", ""
    try:
        error_k = cable_error_k(letter, hot_c, head_c=_HEAD_C, cabinet_c=_CABINET_C, cable=cable)
    except ValueError:
        return f"type {letter} takes {', '.join(fitting_cables(letter))} (IEC 60584-3, from memory)", ""
    ends = f"a head at {_HEAD_C:g} degC and a cabinet at {_CABINET_C:g} degC"
    read = f"{format_number(hot_c)} degC is read as {hot_c + error_k:.1f} degC"
    return (
        f"type {letter} takes {', '.join(fitting_cables(letter))} (IEC 60584-3, from memory);"
        f" with {_with_article(cable)}, {ends}, {read} (IEC 60584-1)",
        f"{error_k:+.1f} K with {ends}",
    )


def _with_article(cable: ExtensionCable) -> str:
    return cable.name if cable.code or cable.letter is None else f"a cable {cable.name}"


def _hottest_c(device: Installed, plant: Plant) -> float | None:
    """Return the upper end of what a device measures in degC: its range's, else its operating temperature's."""
    measurement = measured(device, plant)
    for scale in (measurement.field, measurement.system):
        if scale is not None and scale.unit is not None and scale.unit.kind == "temperature":
            return max(at(scale.lrv), at(scale.urv)) - _KELVIN
    record = device.record
    for value in (record.operating_temperature_max, record.operating_temperature_normal):
        if value is not None and value.unit is not None and value.unit.kind == "temperature":
            return at(value) - _KELVIN
    return None


def _cable_fixes(circuit: Circuit, letter: str, piece: _Piece, plant: Plant) -> tuple[Fix, ...]:
    """Cable types of the catalogue that fit, each a fix; the codes of the standard where none does."""
    fitting = [kind for kind in plant.cable_types.values() if kind.code and _is_for(letter, kind)]
    if not fitting:
        colour = f", {IEC_COLOURS[letter]} by IEC 60584-3 (from memory)" if letter in IEC_COLOURS else ""
        codes = " or ".join(fitting_cables(letter)) or f"cable for type {letter}"
        return (Fix(text=f"{codes}{colour}"),)
    fixes: list[Fix] = []
    for kind in sorted(fitting, key=lambda each: natural_key(each.code or "")):
        change: dict[str, Any] = cable_type_change(circuit, kind.code or "", piece.cable, plant)
        fixes.append(Fix(text=f"cable type {kind.code} ({kind.extension_type})", **change))
    return tuple(fixes)


def _is_for(letter: str, kind: CableType) -> bool:
    cable = read_extension(kind.extension_type) if kind.extension_type else None
    return cable is not None and fits(letter, cable) is True


# ------------------------------------------------------------------------------------------------------ two wires


def _resistance_thermometers(circuit: Circuit, plant: Plant) -> Iterator[tuple[Circuit, NamedSensor | None]]:
    for each in sensor_circuits(circuit, plant):
        named = named_sensor(each.device)
        if named is None:
            if each.kind == RESISTANCE_THERMOMETER and not _names_another_sensor(each.device):
                yield each, None
        elif named.sensor.r0_ohm is not None:
            yield each, named


def _with_two_wires(circuit: Circuit, plant: Plant) -> bool:
    return any(lead_wires(each) in (None, 2) for each, _ in _resistance_thermometers(circuit, plant))


@rule(
    "ELC15",
    severity=Severity.FAULT,
    on=Subject.CIRCUIT,
    applies=_with_two_wires,
    message="the two leads of {device} have {ohm}: it reads {error} too high at {temperature}, {allowed} allowed",
    basis="IEC 60751:2022 for the sensor; IEC 60228:2023 for the cable",
)
def two_wire_lead_error(circuit: Circuit, plant: Plant) -> Verdict:
    """A resistance thermometer on two wires whose leads add more to the reading than is allowed.

    Why it matters: the input cannot tell the resistance of the leads from that of the sensor; the reading is
    high by kelvins, and by more on a hot day.

    What to do: connect it with three or four wires, or shorten the leads.

    >>> from validation.example import said
    >>> row = {"tag": "TE-1", "kind": "RTD", "signal": "Pt100", "wires": 2, "LRV": "0 degC", "URV": "100 degC",
    ...        "I/O type": "RTD", "I/O address": "1", "cable length": 200, "cable type": "C"}
    >>> types = [{"code": "C", "conductor size": 1, "class": 5}]
    >>> said("ELC15", [row], cable_types=types, plant={"ELC hot degC": 20})
    ['T-1: the two leads of TE-1 have 7.8 ohm: it reads 20.63 K too high at 100 °C, 0.5 K allowed']
    >>> said("ELC15", [{**row, "wires": 3}], cable_types=types)
    []
    """
    found: list[Found] = []
    missing: dict[str, None] = {}
    for each, named in _resistance_thermometers(circuit, plant):
        wires = lead_wires(each)
        if wires not in (None, 2):
            continue
        if wires is None or named is None:
            missing.update(dict.fromkeys([*(["wires"] if wires is None else []), *([] if named else ["sensor type"])]))
            continue
        hottest_c = _hottest_c(each.device, plant)
        if hottest_c is None and each is not circuit:
            hottest_c = _hottest_c(circuit.device, plant)
        leads = two_wires(
            each, plant.data, sensor=named.sensor.name, r0_ohm=named.sensor.r0_ohm or 0.0, hottest_c=hottest_c
        )
        if leads.too_much(leads.kindest_k):
            found.append(_too_high(circuit, each, leads, hottest_c is None, plant))
        elif leads.missing:
            missing.update(dict.fromkeys(leads.missing))
        elif leads.too_much(leads.worst_k):
            missing["URV"] = None
    if found:
        return found
    return Unchecked(*missing) if missing else None


def _too_high(circuit: Circuit, each: Circuit, leads: TwoWires, unknown: bool, plant: Plant) -> Found:
    error, allowed = _kelvins(leads.kindest_k, leads.limit_k), f"{leads.limit_k:g} K"
    temperature = f"{format_number(leads.kindest_c)} °C" + (" already" if unknown else "")
    fixes = [Fix(text="three wires", **wires_change(each, 3))]
    length_m = leads.longest_cable_m()
    if length_m:
        fixes.append(Fix(text=f"cable no longer than {length_m} m", **length_change(each, length_m, plant)))
    return Found(
        values={
            "device": each.device.name,
            "ohm": f"{leads.ohm:.4g} ohm",
            "error": error,
            "temperature": temperature,
            "allowed": allowed,
        },
        fields=("wires", "cable_length_m"),
        part=each.device.name if each is not circuit else "",
        found=error,
        wanted=f"at most {allowed}",
        off_by=_kelvins(leads.kindest_k - leads.limit_k, 0.0),
        working=leads.working(leads.kindest_c),
        fixes=tuple(fixes),
        cells=(*each.device.cells("cable_length_m"), *figure_cells(each))
        if each is not circuit
        else figure_cells(each),
    )


def _kelvins(kelvins: float, limit: float) -> str:
    """Write kelvins to as many decimals as it takes to see that they are not the limit."""
    decimals = 2
    while decimals < 9 and kelvins != limit and round(kelvins, decimals) == round(limit, decimals):
        decimals += 1
    return f"{kelvins:.{decimals}f} K"
