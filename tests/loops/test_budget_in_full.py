"""A voltage budget written out, term by term."""

from typing import Any

from loops.budget import lift_off
from loops.budget_in_full import budget_in_full
from validation.example import example_plant

TAG = {"tag": "PT-1", "device type": "T1", "signal": "4-20 mA", "wires": 2, "I/O type": "AI", "I/O address": "A1",
       "cable length": 500, "conductor size": "1.5 mm2"}  # fmt: skip
SHOWN = {"tag": "PI-1", "kind": "indicator", "location": "field", "signal": "4-20 mA", "device type": "IND"}
TYPES = [
    {"code": "T1", "kind": "transmitter", "lift-off V": 10.5},
    {"code": "IND", "kind": "indicator", "resistance ohm": 10, "bypass diode": "yes"},
    {"code": "ISO", "kind": "isolator", "volts available at 20 mA": 15, "volts available at high alarm": 14.6},
]


def written(changed: dict[str, Any], *, at_best: bool = False) -> str:
    plant = example_plant([{**TAG, **changed}, SHOWN], types=TYPES, plant={"ELC hot degC": 20})
    (circuit,) = plant.circuits
    return budget_in_full(circuit, lift_off(circuit, plant.data), plant.data, at_best=at_best)


CABLE = "2 x 500 m, its row, x 12.1 ohm/km, IEC 60228 for 1.5 mm2, x 1.0000 at 20 degC"


def test_what_is_assumed_is_named_and_counts_only_with_the_defaults() -> None:
    assert written({"power supply": "24 V DC"}) == (
        "at 22 mA: supply 22.8 V (nominal, its row, less the tolerance)"
        " - receiver 22 mA x 250 ohm = 5.5 V (assumed, ELC receiver ohm)"
        f" - cable 22 mA x 12.1 ohm = 0.266 V ({CABLE}) - diode of PI-1 0.7 V (type IND): 16.334 V left;"
        " at 20 mA: supply 22.8 V - receiver 20 mA x 250 ohm = 5 V - cable 20 mA x 12.1 ohm = 0.242 V"
        " - diode of PI-1 0.7 V: 16.858 V left;"
        " at 4 mA: supply 22.8 V - receiver 4 mA x 250 ohm = 1 V - cable 4 mA x 12.1 ohm = 0.048 V"
        " - diode of PI-1 0.7 V: 21.052 V left"
    )
    assert written({"power supply": "24 V DC"}, at_best=True).startswith(
        f"at 22 mA: supply 24 V (nominal, its row) - cable 22 mA x 12.1 ohm = 0.266 V ({CABLE})"
    )


def test_an_isolators_volts_are_told_where_it_states_them() -> None:
    assert written({"barrier": "ISO"}) == (
        f"at 22 mA: isolator 14.6 V (type ISO) - cable 22 mA x 12.1 ohm = 0.266 V ({CABLE})"
        " - diode of PI-1 0.7 V (type IND): 13.634 V left;"
        " at 20 mA: isolator 15 V - cable 20 mA x 12.1 ohm = 0.242 V - diode of PI-1 0.7 V: 14.058 V left"
    )
