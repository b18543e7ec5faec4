"""Whether an instrument has a channel of the system, whichever list says so."""

from __future__ import annotations

from instruments.installed import Installed
from loops.circuit import ANALOGUE_OUTPUT, DIGITAL_INPUT, DIGITAL_OUTPUT
from loops.plant import Plant
from loops.wiring import circuit_kind, has_io

_NO_SENSOR_INPUT = frozenset({ANALOGUE_OUTPUT, DIGITAL_OUTPUT, DIGITAL_INPUT})


def own_channels(installed: Installed) -> tuple[str, ...]:
    """Return the I/O types (else addresses) that its rows of the index give; empty without any."""
    return tuple(row.io_type or row.io_address or "" for row in installed.signals if has_io(row))


def channels(installed: Installed, plant: Plant) -> tuple[str, ...]:
    """Return the I/O types (else addresses) that the row, the loop list or the I/O list give; empty without any.

    The I/O list is compared with the index and not merged into it; but what it lists has a channel.
    """
    found = list(own_channels(installed))
    if not found and plant.loop_rows:
        found = [
            circuit.row.kind
            for circuit in plant.circuits_of(installed)
            if circuit.device is installed and circuit.row is not None and circuit.row.kind
        ]
    if not found:
        found = [row.io_type or row.io_address or "" for row in installed.listed]
    return tuple(found)


def takes_a_sensor(installed: Installed, plant: Plant) -> bool:
    """Whether one of its channels can be that of a sensor in its loop: no output, and no contact's."""
    return any(circuit_kind(io) not in _NO_SENSOR_INPUT for io in channels(installed, plant))
