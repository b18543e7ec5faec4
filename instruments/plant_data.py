"""What a plant says of itself: how it writes tags, where it stands, its thresholds and the fields it requires."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from instruments.record import Record, nothing

STANDARD_ATMOSPHERE_PA = 101325.0
DEFAULT_REQUIRED = ("tag", "service", "kind", "P&ID", "range", "range unit")


@dataclass(frozen=True, slots=True, kw_only=True)
class PlantRow(Record):
    """The plant's data as written: text, by the names of the Plant sheet."""

    name: str | None = None
    tag_pattern: str | None = None
    numbering: str | None = None
    users_letters: str | None = None
    plant_codes: str | None = None
    jurisdiction: str | None = None
    atmospheric_pressure: str | None = None
    default_reference: str | None = None
    required_fields: str | None = None
    thresholds: Mapping[str, str] = field(default_factory=nothing)


@dataclass(frozen=True, slots=True, kw_only=True)
class PlantData:
    """The plant's data as understood, with what was assumed where it says nothing.

    `thresholds` are numbers by their name in the catalogue, such as ``RNG08 low %``;
    a rule asks for one with its default, so a new threshold needs no change here.
    `required_fields` is None where the plant does not say.
    """

    name: str | None = None
    tag_pattern: str | None = None
    numbering: str = "parallel"
    users_letters: Mapping[str, str] = field(default_factory=nothing)
    plant_codes: Mapping[str, tuple[str, str]] = field(default_factory=nothing)
    jurisdiction: str | None = None  # IEC, ATEX, US, Canada
    atmospheric_pa: float = STANDARD_ATMOSPHERE_PA
    default_reference: str = "gauge"
    required_fields: tuple[str, ...] | None = None
    thresholds: Mapping[str, float] = field(default_factory=nothing)
    assumptions: tuple[str, ...] = ()

    def threshold(self, name: str, default: float) -> float:
        """Return the plant's threshold `name`, or `default` where the plant does not set it."""
        return self.thresholds.get(name.casefold(), default)
