"""A circuit's cable run as a rule or a sheet shows it: what it comes to, term by term, and where its figures stand."""

from __future__ import annotations

from loops.budget import CablePath, cable_path, ohm_per_km
from loops.cable import temperature_factor
from loops.circuit import Circuit


def missing_of_cable(circuit: Circuit) -> tuple[str, ...]:
    """Return what the resistance of a circuit's cable cannot be worked without, as titles."""
    missing = []
    if circuit.cable_length_m is None:
        missing.append("cable length")
    if ohm_per_km(circuit) is None:
        missing.append("conductor size")
    return tuple(missing)


def cable_working(circuit: Circuit, conductor_c: float) -> str:
    """Return the resistance of a circuit's cable term by term; empty where it is not known.

    >>> from validation.example import example_plant
    >>> row = {"tag": "XY-1", "signal": "24 VDC", "I/O type": "DO", "cable length": 500, "conductor size": "2.5 mm2"}
    >>> (circuit,) = example_plant([row]).circuits
    >>> cable_working(circuit, 70.0)
    'cable 2 x 500 m x 7.41 ohm/km (IEC 60228) x 1.1965 at 70 degC = 8.866 ohm'
    """
    path = cable_path(circuit)
    if path is None:
        return ""
    factor = temperature_factor(conductor_c)
    conductors = "2 x " if path.per == "conductor" else ""
    per_km = f"{path.ohm_per_km_20c:.5g} ohm/km"
    return (
        f"cable {conductors}{path.length_m:g} m x {per_km} ({resistance_from(circuit, path)})"
        f" x {factor:.5g} at {conductor_c:g} degC = {path.ohm(conductor_c):.4g} ohm"
    )


def resistance_from(circuit: Circuit, path: CablePath) -> str:
    """Return where the resistance of a circuit's cable comes from: its type, the standard, its cables."""
    if circuit.segments:
        return "mean of its cables, out and back"
    kind = circuit.cable_type
    if kind is not None and kind.ohm_per_km is not None:
        return f"cable type {kind.code}" + (", out and back" if path.per == "loop" else "")
    gauge = path.conductor is not None and path.conductor.awg is not None
    return "ASTM B258" if gauge else "IEC 60228"
