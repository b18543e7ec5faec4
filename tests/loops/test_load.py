"""What a source must drive: each term with where it came from."""

from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from loops.load import drives, loads
from loops.series import Term, hot_cable
from validation.example import example_plant

Row = dict[str, Any]
FT = {"tag": "FT-1", "device type": "M", "signal": "4-20 mA", "wires": 4, "I/O type": "AI", "I/O address": "A1",
      "receiver ohm": 250, "cable length": 1000, "conductor size": "1.5 mm2"}  # fmt: skip
METER = {"code": "M", "kind": "transmitter", "source or sink": "source", "maximum load ohm": 500}
FY = {"tag": "FY-1", "kind": "positioner", "device type": "P", "signal": "4-20 mA", "I/O type": "AO",
      "I/O address": "A1", "card": "C", "cable length": 1000, "conductor size": "1.5 mm2"}  # fmt: skip
DRIVE = {"code": "P", "kind": "positioner", "device volts at 4 mA": 10, "device volts at 20 mA": 9}
CARD = {"code": "C", "kind": "card", "compliance V": 15}


def plant_of(row: Row, *types: Row, **more: Any) -> Any:
    return example_plant([row], types=[*types, {"code": "X", "kind": "lamp"}], plant={"ELC hot degC": 20}, **more)


def test_a_load_holds_its_terms() -> None:
    plant = plant_of(FT, METER)
    (load,) = loads(plant.circuits[0], plant.data, named=True).loads
    assert (load.name, load.part, load.current_ma) == ("output of FT-1", "", 20.0)
    cable, receiver = load.all_terms
    assert (cable.name, round(cable.ohm, 9), cable.source) == (
        "cable",
        24.2,
        "2 x 1000 m, its row, x 12.1 ohm/km, IEC 60228 for 1.5 mm2, x 1.0000 at 20 degC",
    )
    assert receiver == Term(name="receiver", ohm=250.0, source="its row")
    assert (round(load.ohm, 9), round(load.kindest_ohm, 9)) == (274.2, 274.2)
    assert (load.too_much, load.too_much_at_best, load.missing, load.assumed) == (False, False, (), ())
    assert load.longest_cable_m == 10_330


def test_an_output_holds_both_ends() -> None:
    plant = plant_of(FY, DRIVE, CARD)
    (drive,) = drives(plant.circuits[0], plant.data).drives
    assert [(end.current_ma, round(end.needed_v, 9)) for end in drive.ends] == [(4.0, 10.0968), (20.0, 9.484)]
    assert drive.worst is None
    assert (drive.compliance_v, drive.missing) == (15.0, ())
    # 5 V at 4 mA would be 1250 ohm, 6 V at 20 mA are 300: 12396 m.
    assert drive.longest_cable_m == 12_396


@pytest.mark.parametrize(
    ("type_row", "source"),
    [
        ({"conductor size": "1.5 mm2"}, "x 12.1 ohm/km, IEC 60228 for 1.5 mm2, x 1.0000 at 20 degC"),
        ({"conductor size": "18 AWG"}, "x 21.367 ohm/km, AWG 18 by ASTM B258, x 1.0000 at 20 degC"),
        ({"conductor size": "1.5 mm2", "ohm per km": 13}, "x 13 ohm/km, cable type T, x 1.0000 at 20 degC"),
    ],
)
def test_the_source_of_a_cables_ohms(type_row: Row, source: str) -> None:
    row = {**FT, "cable type": "T"}
    del row["conductor size"]
    plant = plant_of(row, METER, cable_types=[{"code": "T", "capacitance": 100, **type_row}])
    assert hot_cable(plant.circuits[0], plant.data, named=True).source.endswith(source)


def test_a_cable_whose_ohms_are_of_the_pair_is_not_doubled() -> None:
    row = {**FT, "cable type": "T"}
    kinds = [{"code": "T", "ohm per km": 24.2, "per conductor or per loop": "loop", "capacitance": 100}]
    plant = plant_of(row, METER, cable_types=kinds)
    run = hot_cable(plant.circuits[0], plant.data, named=True)
    assert run.ohm_per_m == pytest.approx(0.0242)
    assert run.source.startswith("1000 m, its row, x 24.2 ohm/km, cable type T")


@settings(max_examples=60, deadline=None)
@given(
    ohm=st.integers(0, 900), maximum=st.integers(0, 900), length=st.integers(0, 3000), size=st.sampled_from([0.75, 2.5])
)
def test_the_longest_cable_is_the_longest(ohm: int, maximum: int, length: int, size: float) -> None:
    row = {**FT, "receiver ohm": ohm, "cable length": length, "conductor size": f"{size} mm2"}
    plant = plant_of(row, {**METER, "maximum load ohm": maximum})
    (load,) = loads(plant.circuits[0], plant.data).loads
    longest = load.longest_cable_m
    assert load.too_much is (longest is None or length > longest)
