"""What each kind of instrument is: whether it is electrical, wired, measures, and touches the process."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum
from typing import Final, Literal

__all__ = ["VALVES", "Electrical", "Kind", "Measures", "Wired"]


class Kind(StrEnum):
    """What an instrument is; the value is the trade's word for it."""

    TRANSMITTER = "transmitter"
    ANALYSER = "analyser"
    GAS_DETECTOR = "gas detector"
    FIRE_DETECTOR = "fire detector"
    ELEMENT = "element"
    PRIMARY_ELEMENT = "primary element"
    SWITCH = "switch"
    INDICATOR = "indicator"
    GAUGE = "gauge"
    GLASS = "glass"
    POSITIONER = "positioner"
    IP_CONVERTER = "I/P converter"
    SOLENOID = "solenoid"
    CONTROL_VALVE = "control valve"
    ON_OFF_VALVE = "on/off valve"
    # Neither control nor on/off valve: nothing drives it, so nobody asks where it fails to.
    MANUAL_VALVE = "manual valve"
    RELIEF_VALVE = "relief valve"
    RUPTURE_DISC = "rupture disc"
    REGULATOR = "self-acting regulator"
    HAND_SWITCH = "hand switch"
    LAMP = "lamp"
    SOUNDER = "sounder"
    BARRIER = "barrier"
    ISOLATOR = "isolator"
    CARD = "card"
    POWER_SUPPLY = "power supply"
    JUNCTION_BOX = "junction box"
    PANEL = "panel"
    SOFT_FUNCTION = "soft function"

    @property
    def electrical(self) -> Electrical:
        """ "yes", "no", or "own": when it has a signal, I/O or marking of its own."""
        return _TRAITS[self].electrical

    @property
    def wired(self) -> Wired:
        """Whether it is wired to the system.

        "yes", "no", "own" (when it is electrical), "element" (to the system or to its transmitter), "circuit"
        (lies in another device's circuit), "cabinet" (is part of the system's side).
        """
        return _TRAITS[self].wired

    @property
    def measures(self) -> Measures:
        """Whether it measures: "yes", "no", "setting", "set pressure", "system" (a range there only)."""
        return _TRAITS[self].measures

    @property
    def process(self) -> bool:
        """Whether it touches the process, so that it stands on a P&ID, on a line or on equipment."""
        return _TRAITS[self].process

    @property
    def with_article(self) -> str:
        """The word behind its article, for messages.

        >>> Kind.GAUGE.with_article, Kind.ANALYSER.with_article
        ('a gauge', 'an analyser')
        """
        return f"{'an' if self.value[0] in 'aeioI' else 'a'} {self.value}"

    @property
    def location(self) -> str:
        """Where it stands if nobody says: "field", "cabinet" or "system"."""
        return _TRAITS[self].location


Electrical = Literal["yes", "no", "own"]
Wired = Literal["yes", "no", "own", "element", "circuit", "cabinet"]
Measures = Literal["yes", "no", "setting", "set pressure", "system"]


@dataclass(frozen=True, slots=True)
class _Traits:
    electrical: Electrical
    wired: Wired
    measures: Measures
    process: bool
    location: str = "field"


_TRAITS: Final[Mapping[Kind, _Traits]] = {
    Kind.TRANSMITTER: _Traits("yes", "yes", "yes", True),
    Kind.ANALYSER: _Traits("yes", "yes", "yes", True),
    Kind.GAS_DETECTOR: _Traits("yes", "yes", "yes", False),
    Kind.FIRE_DETECTOR: _Traits("yes", "yes", "yes", False),
    Kind.ELEMENT: _Traits("yes", "element", "yes", True),
    Kind.PRIMARY_ELEMENT: _Traits("no", "no", "no", True),
    Kind.SWITCH: _Traits("yes", "yes", "setting", True),
    Kind.INDICATOR: _Traits("yes", "circuit", "no", False),
    Kind.GAUGE: _Traits("no", "no", "yes", True),
    Kind.GLASS: _Traits("no", "no", "yes", True),
    Kind.POSITIONER: _Traits("yes", "yes", "no", False),
    Kind.IP_CONVERTER: _Traits("yes", "yes", "no", False),
    Kind.SOLENOID: _Traits("yes", "yes", "no", False),
    Kind.CONTROL_VALVE: _Traits("own", "own", "no", True),
    Kind.ON_OFF_VALVE: _Traits("own", "own", "no", True),
    Kind.MANUAL_VALVE: _Traits("own", "own", "no", True),
    Kind.RELIEF_VALVE: _Traits("no", "no", "set pressure", True),
    Kind.RUPTURE_DISC: _Traits("no", "no", "set pressure", True),
    Kind.REGULATOR: _Traits("no", "no", "set pressure", True),
    Kind.HAND_SWITCH: _Traits("yes", "yes", "no", False),
    Kind.LAMP: _Traits("yes", "yes", "no", False),
    Kind.SOUNDER: _Traits("yes", "yes", "no", False),
    Kind.BARRIER: _Traits("yes", "cabinet", "no", False, "cabinet"),
    Kind.ISOLATOR: _Traits("yes", "cabinet", "no", False, "cabinet"),
    Kind.CARD: _Traits("yes", "cabinet", "no", False, "cabinet"),
    Kind.POWER_SUPPLY: _Traits("yes", "cabinet", "no", False, "cabinet"),
    Kind.JUNCTION_BOX: _Traits("yes", "no", "no", False),
    Kind.PANEL: _Traits("yes", "no", "no", False),
    Kind.SOFT_FUNCTION: _Traits("no", "no", "system", False, "system"),
}

VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE, Kind.MANUAL_VALVE, Kind.RELIEF_VALVE, Kind.REGULATOR})
