"""Units of a cable's figures, whose headings hold them in many ways: a wrong one is a wrong cable."""

from __future__ import annotations

from typing import Any

import pytest

from validation.example import example_plant

_TAG: dict[str, Any] = {"tag": "PT-101", "cable type": "X", "cable length": 100, "signal": "4-20 mA", "I/O type": "AI"}


def _listed(heading: str, cell: Any) -> Any:
    cable = {"code": "X", "conductor": "1.0", heading: cell}
    return example_plant([_TAG], cable_types=[cable]).cable_types["x"]


@pytest.mark.parametrize(
    ("heading", "cell", "pf_per_m"),
    [
        ("Capacitance pF/m", 150, 150),
        ("C nF/km", 150, 150),
        ("Capacitance uF/km", 0.15, 150),
        ("pF/ft", 45, 147.6378),
        ("Capacitance (pF/ft)", 45, 147.6378),
        ("C (nF/kft)", 45, 147.6378),
        ("Capacitance (nF/100 m)", 15, 150),
        ("Capacitance", "45 pF/ft", 147.6378),
        ("Capacitance (nF)", 15, None),
        ("Capacitance (pF/chain)", 15, None),
    ],
)
def test_capacitance_of_a_listed_cable(heading: str, cell: Any, pf_per_m: float | None) -> None:
    assert _listed(heading, cell).capacitance_pf_per_m == (
        None if pf_per_m is None else pytest.approx(pf_per_m, rel=1e-6)
    )


@pytest.mark.parametrize(
    ("heading", "cell", "ohm_per_km"),
    [
        ("ohm/km", 20, 20),
        ("Resistance (ohm/1000 ft)", 6.4, 20.997375),
        ("Ohm/1000ft", 6.4, 20.997375),
        ("DC resistance ohm/mile", 33, 20.505249),
        ("Resistance", "6.4 ohm/1000 ft", 20.997375),
        ("Loop resistance ohm/km", 40, 20),  # out and back
        ("Loop resistance (ohm/km)", 40, 20),
        ("Loop resistance (ohm/1000 ft)", 12.8, 20.997375),
    ],
)
def test_resistance_of_a_conductor(heading: str, cell: Any, ohm_per_km: float) -> None:
    assert _listed(heading, cell).ohm_per_km == pytest.approx(ohm_per_km, rel=1e-6)


def test_a_column_that_says_per_loop_is_not_halved_twice() -> None:
    cable = {"code": "X", "Loop resistance ohm/km": 40, "per": "loop"}
    found = example_plant([_TAG], cable_types=[cable]).cable_types["x"]
    assert (found.ohm_per_km, found.resistance_per) == (40, "loop")


@pytest.mark.parametrize(
    ("heading", "cell", "pf_per_m"),
    [
        ("Cable pF/m", 150, 150),
        ("Cable pF/ft", 45, 147.6378),
        ("Cable uF/km", 0.15, 150),
        ("Cable capacitance (nF/kft)", 45, 147.6378),
        ("Cable C (nF)", 90, None),  # of the whole cable
    ],
)
def test_capacitance_on_the_row(heading: str, cell: Any, pf_per_m: float | None) -> None:
    row = {**_TAG, "cable type": None, heading: cell}
    found = example_plant([row]).circuits[0].cable_type
    stated = None if found is None else found.capacitance_pf_per_m
    assert stated == (None if pf_per_m is None else pytest.approx(pf_per_m, rel=1e-6))
