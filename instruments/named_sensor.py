"""Which temperature sensor an instrument's row and type name."""

from __future__ import annotations

from functools import lru_cache
from typing import NamedTuple

from instruments.installed import Installed
from instruments.sensor import SensorLimits, SensorType, read_sensor_type, sensor_limits


class NamedSensor(NamedTuple):
    """The sensor that a list names, what it can measure, and where it says so."""

    sensor: SensorType
    limits: SensorLimits
    field: str
    owner: Installed


@lru_cache(maxsize=4096)
def _read(text: str) -> tuple[SensorType, SensorLimits] | None:
    sensor, limits = read_sensor_type(text), sensor_limits(text)
    return None if sensor is None or limits is None else (sensor, limits)


def named_sensor(installed: Installed) -> NamedSensor | None:
    """Return the sensor that the type names, else the words of the row or of the type."""
    record, device = installed.record, installed.type
    stated = device.sensor_type if device is not None else None
    if stated and _read(stated) is None and any(sign.isdigit() for sign in stated):
        return None  # Ni100, Cu10: named well enough, and no standard function is held for it
    texts = (
        ("type.sensor_type", stated),
        ("signal", record.signal),
        ("kind", record.kind_written),
        ("type.signal", device.signal if device is not None else None),
        ("type.description", device.description if device is not None else None),
    )
    for field, text in texts:
        found = _read(text) if text else None
        if found is not None:
            return NamedSensor(*found, field, installed)
    return None
