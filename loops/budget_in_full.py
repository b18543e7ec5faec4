"""A circuit's voltage budget written out: each term at the check current, at 20 and 4 mA, and where it stands."""

from __future__ import annotations

from instruments.plant_data import PlantData
from instruments.quantity import format_number
from loops.budget import Budget, Parts
from loops.circuit import Circuit
from loops.power import NOMINAL_MA, volts_at_transmitter
from loops.series import LEAST_MA, entry_name, given_by, hot_cable, shown


def budget_in_full(circuit: Circuit, budget: Budget, data: PlantData, *, at_best: bool) -> str:
    """Write a budget's terms at each current: the volts it starts from, every drop, and what is left.

    Parameters
    ----------
    circuit, budget
        The circuit, and its budget at the check current.
    data
        The plant's data.
    at_best
        Whether with the kindest values for what is blank, or with the defaults.
    """
    series = budget.kindest_resistances if at_best else budget.resistances
    source_v = budget.kindest_v if at_best else budget.source_v
    at_20_ma_v = source_v if budget.supply_is_free else budget.source_20_ma_v
    # A source that states its volts at one current states none at 4 mA.
    at_4_ma_v = source_v if budget.supply_is_free else None
    currents = {budget.current_ma: source_v, NOMINAL_MA: at_20_ma_v, LEAST_MA: at_4_ma_v}
    if budget.current_ma == NOMINAL_MA:
        currents[NOMINAL_MA] = source_v
    return "; ".join(
        _at(circuit, budget, data, current_ma, volts, series, at_best=at_best)
        for current_ma, volts in currents.items()
        if volts is not None
    )


def _at(
    circuit: Circuit,
    budget: Budget,
    data: PlantData,
    current_ma: float,
    source_v: float,
    series: Parts,
    *,
    at_best: bool,
) -> str:
    cable = (("cable", budget.cable.ohm(budget.hot_c)),) if budget.cable is not None else ()
    first = current_ma == budget.current_ma
    ma = format_number(current_ma)
    terms = [f"{budget.source_name} {shown(source_v)} V" + (_told(_source(circuit, budget, at_best)) if first else "")]
    for name, ohm in (*series, *cable):
        told = _told(_where(circuit, name, data)) if first else ""
        terms.append(f"{name} {ma} mA x {shown(ohm)} ohm = {shown(ohm * current_ma / 1000.0)} V{told}")
    for name, volts in budget.fixed_drops:
        told = _told(_where(circuit, name, data)) if first else ""
        terms.append(f"{name} {shown(volts)} V{told}")
    left_v = volts_at_transmitter(source_v, current_ma, (*series, *cable), budget.fixed_drops)
    return f"at {ma} mA: {' - '.join(terms)}: {shown(left_v)} V left"


def _told(where: str) -> str:
    return f" ({where})" if where else ""


def _source(circuit: Circuit, budget: Budget, at_best: bool) -> str:
    """Return where the volts that a budget starts from stand."""
    if not budget.supply_is_free:
        entry = circuit.isolator if circuit.isolator is not None else circuit.card
        return entry_name(entry) if entry is not None else ""
    if circuit.supply_min_v is not None:
        return f"lowest, {given_by(circuit.supply_min_v, circuit)}"
    if circuit.supply_nominal_v is not None:
        words = f"nominal, {given_by(circuit.supply_nominal_v, circuit)}"
        return words if at_best else f"{words}, less the tolerance"
    return f"highest, {given_by(circuit.supply_max_v, circuit)}" if circuit.supply_max_v is not None else ""


def _where(circuit: Circuit, name: str, data: PlantData) -> str:
    """Return where the figure of a term stands."""
    if name == "cable":
        return hot_cable(circuit, data, named=True).source
    if name == "barrier" and circuit.barrier is not None:
        return entry_name(circuit.barrier)
    if name == "card" and circuit.card is not None:
        return entry_name(circuit.card)
    if name == "receiver":
        given = circuit.receiver_ohm
        return given_by(given, circuit) if given is not None else "assumed, ELC receiver ohm"
    for member in circuit.members:
        if name in (member.name, f"diode of {member.name}") and member.type is not None:
            return entry_name(member.type)
    return ""
