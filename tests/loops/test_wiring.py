"""From rows to circuits: one signal is one circuit, however many rows speak of it."""

from random import Random
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.plant import Plant
from loops.wiring import circuit_kind, has_io, loop_key, transmitter_of
from validation.example import example_plant

Row = dict[str, Any]


def plant_of(*rows: str | Row, **sheets: Any) -> Plant:
    return example_plant(
        [{"service": "x", **({"tag": row} if isinstance(row, str) else row)} for row in rows], **sheets
    )


def circuits(*rows: str | Row, **sheets: Any) -> list[str]:
    """Return each circuit: its name, its kind, and its devices from the field to the system."""
    return [
        f"{circuit.name} {circuit.kind or '-'}: {' '.join(member.name for member in circuit.members)}"
        for circuit in plant_of(*rows, **sheets).circuits
    ]


def ai(tag: str, address: str, **more: str) -> Row:
    return {"tag": tag, "signal": "4-20 mA", "I/O type": "AI", "I/O address": address, **more}


def io(tag: str, kind: str, address: str, **more: str) -> Row:
    return {"tag": tag, "I/O type": kind, "I/O address": address, **more}


# ------------------------------------------------------------------------------------------------- which signals


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        # One address, one circuit; alone in its loop it has the loop's number.
        ((ai("PT-101", "A1"),), ["P-101 AI: PT-101"]),
        # A wired instrument without any I/O is one as well.
        (("PT-101",), ["P-101 AI: PT-101"]),
        # A control loop: an input and an output.
        (
            (ai("FT-1", "A1"), {"tag": "FIC-1", "location": "system"}, io("FV-1", "AO", "A2", signal="4-20 mA")),
            ["F-1 FT-1 AI: FT-1", "F-1 FV-1 AO: FV-1"],
        ),
        # Three voting transmitters: three inputs.
        (
            tuple(ai(f"PT-1{suffix}", suffix) for suffix in "ABC"),
            ["P-1 PT-1A AI: PT-1A", "P-1 PT-1B AI: PT-1B", "P-1 PT-1C AI: PT-1C"],
        ),
        # An on/off valve: an output and two inputs, the valve on the output's circuit.
        (
            ("XV-1", io("XY-1", "DO", "O1"), io("ZSO-1", "DI", "I1"), io("ZSC-1", "DI", "I2")),
            ["X-1 XY-1 DO: XV-1 XY-1", "X-1 ZSC-1 DI: ZSC-1", "X-1 ZSO-1 DI: ZSO-1"],
        ),
        # Two types in one cell are one address still; two addresses are two signals.
        ((io("MOV-1", "DI/DO", "NET-1", signal="VFC"),), ["MOV-1 DI: MOV-1"]),
        (
            (io("MOV-1", "DI/DO", "R1.S2.C3 / R1.S4.C5", signal="VFC"),),
            ["MOV-1 DI: MOV-1", "MOV-1 (2) DO: MOV-1"],
        ),
        ((io("MOV-1", "DI", "C3, C4", signal="VFC"),), ["MOV-1 DI: MOV-1", "MOV-1 (2) DI: MOV-1"]),
        ((io("PT-1", "AI", "N1/S2/C3"),), ["P-1 AI: PT-1"]),
        # Rows that differ in their signal are one instrument with several circuits.
        (
            (ai("FIT-1", "A1"), io("FIT-1", "DI", "D1", signal="pulse")),
            ["F-1 FIT-1 AI: FIT-1", "F-1 FIT-1 (2) DI: FIT-1"],
        ),
        # Functions of the system, gauges and valves without a signal have none.
        (({"tag": "FIC-1", "location": "system"}, "PG-1", "PSV-1", "FV-2", "FE-1"), []),
        # An I/O type that says none is none.
        (({"tag": "PG-1", "I/O type": "none"}, {"tag": "FIC-2", "location": "system", "I/O type": "soft"}), []),
        # A pump's contacts.
        ((io("P-1A", "DI", "D1"), io("P-1A", "DO", "D2")), ["P-1A DI: P-1A", "P-1A (2) DO: P-1A"]),
        # What is not live has no circuit.
        (({**ai("PT-1", "A1"), "status": "spare"},), []),
    ],
)
def test_one_signal_is_one_circuit(rows: tuple[str | Row, ...], expected: list[str]) -> None:
    assert circuits(*rows) == expected


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        # An element beside its transmitter.
        (("TE-1", ai("TT-1", "A1")), ["T-1 AI: TE-1 TT-1"]),
        # With the sensor's own card it has its own circuit.
        ((io("TE-1", "RTD", "R1", signal="Pt100"), ai("TT-1", "A1")), ["T-1 TE-1 RTD: TE-1", "T-1 TT-1 AI: TT-1"]),
        # The element's row repeats the transmitter's address.
        ((io("TE-1", "AI", "A1"), ai("TT-1", "A1")), ["T-1 AI: TE-1 TT-1"]),
        # The element's row alone has the channel: it is the transmitter's.
        ((io("TE-1", "AI", "A1"), "TT-1"), ["T-1 AI: TE-1 TT-1"]),
        ((io("TE-1", "RTD", "A1"), "TT-1"), ["T-1 TE-1 RTD: TE-1", "T-1 TT-1 AI: TT-1"]),
        # Each suffix with its own.
        (
            ("TE-1A", "TE-1B", ai("TT-1A", "A1"), ai("TT-1B", "A2")),
            ["T-1 TT-1A AI: TE-1A TT-1A", "T-1 TT-1B AI: TE-1B TT-1B"],
        ),
        # One transmitter for two elements.
        (("TE-1A", "TE-1B", ai("TT-1", "A1")), ["T-1 AI: TE-1A TE-1B TT-1"]),
        # An indicator in series, behind the transmitter; without word of it, it is a gauge.
        (
            ({"tag": "LI-1", "location": "field", "signal": "4-20 mA"}, ai("LT-1", "A1")),
            ["L-1 AI: LT-1 LI-1"],
        ),
        (("LI-1", ai("LT-1", "A1")), ["L-1 AI: LT-1"]),
        # The positioner of a valve.
        (("FV-1", io("FY-1", "AO", "A1", signal="4-20 mA")), ["F-1 AO: FV-1 FY-1"]),
        # The valve's row repeats the address, or has it alone.
        ((io("FV-1", "AO", "A1"), io("FY-1", "AO", "A1", signal="4-20 mA")), ["F-1 AO: FV-1 FY-1"]),
        (
            (io("FV-1", "AO", "A1", signal="4-20 mA"), {"tag": "FY-1", "kind": "positioner"}),
            ["F-1 AO: FV-1 FY-1"],
        ),
        ((io("XV-1", "DO", "A1"), {"tag": "XY-1", "kind": "solenoid"}), ["X-1 DO: XV-1 XY-1"]),
        # An analogue output moves no solenoid: it has a signal of its own, whatever its channel.
        (
            (io("FV-1", "AO", "A1", signal="4-20 mA"), {"tag": "FY-1", "kind": "solenoid"}),
            ["F-1 FV-1 AO: FV-1", "F-1 FY-1 DO: FY-1"],
        ),
        # A controller's row that shows its transmitter's address.
        ((ai("FT-1", "A1"), {**io("FIC-1", "AI", "A1"), "location": "system"}), ["F-1 AI: FT-1"]),
        # Two transmitters on one address are two signals, and one of them is wrong.
        ((ai("FT-1A", "A1"), ai("FT-1B", "A1")), ["F-1 FT-1A AI: FT-1A", "F-1 FT-1B AI: FT-1B"]),
        # An address that is only a channel is one place on one card.
        (
            (io("TE-1", "AI", "3", card="C1"), {**ai("TT-1", "3"), "card": "C2"}),
            ["T-1 TE-1 AI: TE-1", "T-1 TT-1 AI: TT-1"],
        ),
        # The older manner: one point, whichever letters.
        ((ai("PI 27", "A1"),), ["P-27 AI: PI 27"]),
    ],
)
def test_devices_without_a_signal_of_their_own_lie_in_anothers(
    rows: tuple[str | Row, ...], expected: list[str]
) -> None:
    assert circuits(*rows) == expected


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        # Two valves of a split range on one output lie one behind the other: one address, one circuit.
        (
            (io("PV-1A", "AO", "A2", signal="4-20 mA"), io("PV-1B", "AO", "A2", signal="4-20 mA")),
            ["P-1 AO: PV-1A PV-1B"],
        ),
        (
            ("PV-1A", "PV-1B", *(
                {**io(f"PY-1{x}", "AO", "A2", signal="4-20 mA"), "kind": "positioner"} for x in "AB")),
            ["P-1 AO: PV-1A PV-1B PY-1A PY-1B"],
        ),
        # On an output each they are two; three on one are a mistake, and stay three.
        (
            (io("PV-1A", "AO", "A2", signal="4-20 mA"), io("PV-1B", "AO", "A3", signal="4-20 mA")),
            ["P-1 PV-1A AO: PV-1A", "P-1 PV-1B AO: PV-1B"],
        ),
        (
            tuple(io(f"PV-1{x}", "AO", "A2", signal="4-20 mA") for x in "ABC"),
            ["P-1 PV-1A AO: PV-1A", "P-1 PV-1B AO: PV-1B", "P-1 PV-1C AO: PV-1C"],
        ),
        # Behind a barrier each they are a circuit each in the field; behind one that is named by its tag, one.
        (
            tuple(io(f"PV-1{x}", "AO", "A2", signal="4-20 mA", barrier="ISO-AO") for x in "AB"),
            ["P-1 PV-1A AO: PV-1A", "P-1 PV-1B AO: PV-1B"],
        ),
        (
            (*(io(f"PV-1{x}", "AO", "A2", signal="4-20 mA", barrier="PB-1") for x in "AB"),
             {"tag": "PB-1", "kind": "isolator", "location": "cabinet"}),
            ["P-1 AO: PV-1A PV-1B PB-1"],
        ),
        # Solenoids on one output are not put behind each other.
        (
            tuple({**io(f"XY-1{x}", "DO", "D2", signal="24 VDC"), "kind": "solenoid"} for x in "AB"),
            ["X-1 XY-1A DO: XY-1A", "X-1 XY-1B DO: XY-1B"],
        ),
        # The controller's row has the output; the positioner is what it drives.
        (
            ({**io("FIC-1", "AO", "A1"), "location": "system"}, {"tag": "FY-1", "kind": "I/P converter"}, "FV-1"),
            ["F-1 AO: FV-1 FY-1"],
        ),
        # An input on the controller's row is another signal; so is an output where the positioner has its own.
        (
            ({**io("FIC-1", "DO", "A1"), "location": "system"}, {"tag": "FY-1", "kind": "I/P converter"}),
            ["F-1 FIC-1 DO: FIC-1", "F-1 FY-1 AO: FY-1"],
        ),
        # 2-, 3- and 4-wire inputs, a contact, a proximity switch, RTD and thermocouple: each by itself.
        (tuple(ai(f"AT-1{x}", x, wires=str(n)) for x, n in zip("ABC", (2, 3, 4), strict=True)),
         ["A-1 AT-1A AI: AT-1A", "A-1 AT-1B AI: AT-1B", "A-1 AT-1C AI: AT-1C"]),
        ((io("LSH-1", "DI", "D1", signal="VFC"), io("ZSO-2", "DI", "D2", signal="NAMUR")),
         ["L-1 DI: LSH-1", "Z-2 DI: ZSO-2"]),
        ((io("TE-1", "RTD", "R1", signal="Pt100"), io("TE-2", "TC", "R2", signal="TC type K")),
         ["T-1 RTD: TE-1", "T-2 TC: TE-2"]),
    ],
)  # fmt: skip
def test_outputs_and_inputs_of_all_sorts(rows: tuple[str | Row, ...], expected: list[str]) -> None:
    assert circuits(*rows) == expected


def test_a_controllers_channel_brings_its_card_to_the_positioner() -> None:
    function = {**io("FIC-1", "AO", "A1"), "location": "system", "card": "AO8"}
    drive = {"tag": "FY-1", "kind": "I/P converter", "barrier": "ISO", "signal": "4-20 mA"}
    (found,) = plant_of(function, drive).circuits
    row = found.signal_row
    assert (row.tag, row.io_address, row.card, row.barrier, row.signal) == ("FY-1", "A1", "AO8", "ISO", "4-20 mA")


@pytest.mark.parametrize(
    ("cell", "expected"),
    [
        # From field to system, as the cell names them.
        ("PT-1, PI-1, PI-2", ["100 AI: PT-1 PI-1 PI-2"]),
        ("PT-1 + PI-2 + PI-1", ["100 AI: PT-1 PI-2 PI-1"]),
        ("PI-1; PT-1", ["100 AI: PI-1 PT-1"]),
        ("PT-1 / PB-1 / PI-1", ["100 AI: PT-1 PB-1 PI-1"]),
        # A name that nothing has, one device alone, or two that carry a signal: no row of one circuit.
        ("PT-1, PI-9", ["P-1 AI: PT-1 PI-1"]),
        ("PT-1", ["100 AI: PT-1 PI-1"]),
    ],
)
def test_a_row_of_the_loop_list_may_name_all_devices_of_its_circuit(cell: str, expected: list[str]) -> None:
    shown = [{"tag": tag, "kind": "indicator", "location": "panel", "signal": "4-20 mA"} for tag in ("PI-1", "PI-2")]
    barrier = {"tag": "PB-1", "kind": "barrier", "location": "cabinet"}
    loops = [{"number": "100", "circuit or tag": cell, "kind": "AI", "supply V nominal": 24}]
    assert circuits(ai("PT-1", "A1"), *shown, barrier, loops=loops) == expected


def test_what_reads_volts_lies_across_the_range_resistor() -> None:
    recorder = {"tag": "PI-1", "kind": "indicator", "location": "panel", "signal": "1-5 V", "device type": "R10"}
    types = [
        {"code": "R10", "kind": "indicator", "input ohm": 10000},
        {"code": "AI8", "kind": "card", "input ohm": 250},
    ]
    (found,) = plant_of(ai("PT-1", "A1", card="AI8"), recorder, types=types).circuits
    assert [(each.number, each.source, each.item) for each in found.receivers] == [
        (250.0, "card", ""), (10000.0, "device", "PI-1")
    ]  # fmt: skip
    assert found.receiver_ohm is not None
    assert found.receiver_ohm.number == pytest.approx(243.902, abs=5e-4)


def test_the_two_sides_of_a_barrier() -> None:
    types = [
        {"code": "ISO", "kind": "isolator"},
        {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "volts available at 20 mA": 15},
        {"code": "REP", "kind": "barrier", "volts available at 20 mA": 15},
    ]
    for named, isolates in (("ISO", True), ("ZB", False), ("REP", True)):
        (found,) = plant_of(ai("PT-1", "A1", barrier=named), types=types).circuits
        assert ((found.isolator is not None), (found.zener is not None)) == (isolates, not isolates)
    (found,) = plant_of(ai("PT-1", "A1", barrier="LOST"), types=types).circuits
    assert (found.isolator, found.zener, found.barrier_named) == (None, None, "LOST")


def test_what_an_output_drives() -> None:
    (found,) = plant_of(io("FV-1", "AO", "A1", signal="4-20 mA"), {"tag": "FY-1", "kind": "positioner"}).circuits
    assert (found.device.name, found.driven.name) == ("FV-1", "FY-1")
    (found,) = plant_of(ai("PT-1", "A1")).circuits
    assert found.driven is found.device


def test_where_all_letters_share_their_numbers_an_element_stays_with_its_own_variable() -> None:
    rows = ("TE-101", ai("FT-101", "A1"), "AE-102", ai("AT-102", "A2"))
    assert circuits(*rows, plant={"numbering": "serial"}) == [
        "102 AI: AE-102 AT-102",
        "101 FT-101 AI: FT-101",
        "101 TE-101 -: TE-101",
    ]


def test_a_barrier_that_is_named_by_its_tag_stands_on_the_circuit() -> None:
    rows = ({**ai("PT-1", "A1"), "barrier": "PB-1"}, {"tag": "PB-1", "kind": "isolator", "location": "cabinet"})
    assert circuits(*rows) == ["P-1 AI: PT-1 PB-1"]


def test_the_transmitter_of_an_element() -> None:
    plant = plant_of("TE-1A", "TE-1B", "TE-1C", "TT-1A", "TT-1B", "PT-1A")
    by_name = {each.name: each for each in plant.instruments}
    members = list(plant.instruments)
    found = [transmitter_of(by_name[tag], members) for tag in ("TE-1A", "TE-1B", "TE-1C")]
    assert [each.name if each else None for each in found] == ["TT-1A", "TT-1B", "TT-1A"]
    assert transmitter_of(by_name["TE-1A"], [by_name["TE-1A"], by_name["PT-1A"]]) is None


# ------------------------------------------------------------------------------------------------- the loop list


@pytest.mark.parametrize(
    ("rows", "loops", "expected"),
    [
        # By tag, by loop number, however either is written; the number is the circuit's name.
        ((ai("PT-101", "A1"),), ({"number": "100", "circuit or tag": "PT 101"},), ["100 AI: PT-101 <100"]),
        ((ai("PT-101", "A1"),), ({"number": "P101", "kind": "AI"},), ["P101 AI: PT-101 <P101"]),
        ((ai("PT-101", "A1"),), ({"number": "PT-101", "kind": "AI"},), ["PT-101 AI: PT-101 <PT-101"]),
        ((ai("PT-101", "A1"),), ({"number": "P-101", "circuit or tag": "P-101/1", "kind": "AI"},),
         ["P-101 AI: PT-101 <P-101"]),
        # Rows of one loop go to the circuits of their kind.
        ((ai("FT-1", "A1"), io("FV-1", "AO", "A2")), ({"number": "F-1", "kind": "AO"}, {"number": "F-1", "kind": "AI"}),
         ["F-1 FT-1 AI: FT-1 <F-1", "F-1 FV-1 AO: FV-1 <F-1"]),
        # One row with the number alone speaks for all circuits of its kind; several are taken in order.
        (tuple(ai(f"PT-1{x}", x) for x in "AB"), ({"number": "P-1", "kind": "AI"},),
         ["P-1 PT-1A AI: PT-1A <P-1", "P-1 PT-1B AI: PT-1B <P-1"]),
        # A row of a device for which the index has no signal is a circuit.
        (("XV-1",), ({"number": "X-1", "circuit or tag": "XV-1", "kind": "DO"},), ["X-1 DO: XV-1 <X-1"]),
        ((io("XV-1", "DO", "O1"),), ({"number": "X-1", "circuit or tag": "XV-1", "kind": "DO"},
                                     {"number": "X-1", "circuit or tag": "XV-1", "kind": "DI"}),
         ["X-1 XV-1 DO: XV-1 <X-1", "X-1 XV-1 (2) DI: XV-1 <X-1"]),
        # A controller's row is its loop's.
        ((ai("FT-1", "A1"), {"tag": "FIC-1", "location": "system"}),
         ({"number": "77", "circuit or tag": "FIC-1", "kind": "AI"},), ["77 AI: FT-1 <77"]),
        # Pump P-101 has the number of the pressure loop P-101.
        ((ai("PT-101", "A1"), io("P-101", "DI", "D1")), ({"number": "P-101", "kind": "AI"},),
         ["P-101 (2) DI: P-101", "P-101 AI: PT-101 <P-101"]),
        # A row that nothing in the index answers to.
        ((ai("PT-101", "A1"),), ({"number": "P-999", "kind": "AI"},), ["P-101 AI: PT-101"]),
    ],
)  # fmt: skip
def test_rows_of_the_loop_list_find_their_circuits(
    rows: tuple[Row, ...], loops: tuple[Row, ...], expected: list[str]
) -> None:
    filled = [{"supply V nominal": 24, **row} for row in loops]
    found = [
        f"{circuit.name} {circuit.kind or '-'}: {circuit.device.name}"
        + (f" <{circuit.row.number}" if circuit.row is not None else "")
        for circuit in plant_of(*rows, loops=filled).circuits
    ]
    assert found == expected


def test_rows_with_one_number_are_taken_in_the_order_of_the_tags() -> None:
    loops = [{"number": "P-1", "kind": "AI", "cable length": length} for length in (10, 20)]
    plant = plant_of(ai("PT-1A", "A1"), ai("PT-1B", "A2"), loops=loops)
    lengths = [circuit.cable_length_m.number for circuit in plant.circuits if circuit.cable_length_m]
    assert lengths == [10.0, 20.0]


def test_no_order_of_rows_decides_which_row_is_whose() -> None:
    rows: list[str | Row] = [ai("PT-1A", "A1"), ai("PT-1B", "A2"), io("FV-2", "AO", "A3"), ai("FT-2", "A4"), "XV-3"]
    loops = [
        {"number": "P-1", "kind": "AI", "cable length": 20},
        {"number": "P-1", "kind": "AI", "cable length": 10},
        {"number": "F-2", "kind": "AO", "cable length": 30},
        {"number": "F-2", "kind": "AI", "cable length": 40},
        {"number": "X-3", "circuit or tag": "XV-3", "kind": "DO", "cable length": 50},
        {"number": "X-3", "circuit or tag": "XV-3", "kind": "DI", "cable length": 60},
    ]

    def told(rows: list[str | Row], loops: list[Row]) -> list[tuple[str, str | None, float | None]]:
        return [
            (each.name, each.kind, each.cable_length_m.number if each.cable_length_m else None)
            for each in plant_of(*rows, loops=loops).circuits
        ]

    expected = told(rows, loops)
    assert len({length for _, _, length in expected}) == 6
    for seed in range(6):
        shuffled, others = rows[:], loops[:]
        Random(seed).shuffle(shuffled)
        Random(seed).shuffle(others)
        assert told(shuffled, others) == expected


def test_a_row_of_another_kind_lends_its_figures_to_no_other_signal() -> None:
    loops = [{"number": "F-1", "circuit or tag": "FIT-1", "kind": "AI", "cable length": 10}]
    plant = plant_of(ai("FIT-1", "A1"), io("FIT-1", "DI", "D1", signal="pulse"), loops=loops)
    assert [(each.kind, each.row is not None) for each in plant.circuits] == [("AI", True), ("DI", False)]


# ------------------------------------------------------------------------------------------------------ the loops


def test_loops_hold_their_members_and_circuits() -> None:
    plant = plant_of(ai("FT-9", "A1"), io("FV-9", "AO", "A2"), ai("FT-10", "A3"), "PG-1",
                     {"tag": "TT-1", "loop": "T 1"}, {"tag": "TI-1", "loop": "t-1"})  # fmt: skip
    assert [(loop.name, [each.name for each in loop.members], len(loop.circuits)) for loop in plant.loops] == [
        ("F-9", ["FT-9", "FV-9"], 2),
        ("F-10", ["FT-10"], 1),
        ("P-1", ["PG-1"], 0),
        ("t-1", ["TI-1", "TT-1"], 1),
    ]
    assert [circuit.name for circuit in plant.circuits_of(plant.instruments[0])] == ["F-9 FT-9"]


@pytest.mark.parametrize(
    ("one", "other", "same"),
    [
        ("P-101", "P101", True),
        ("P-101", "p 101", True),
        ("10-P-101", "10P101", True),
        ("P-101A", "P-101-A", True),
        ("P-101-1", "P-1011", False),
        ("P-101", "P-0101", False),
        ("P-101", "F-101", False),
        ("101", "101", True),
    ],
)
def test_a_loops_number_is_one_however_it_is_written(one: str, other: str, same: bool) -> None:
    assert (loop_key(one) == loop_key(other)) is same


@given(st.text(max_size=40))
def test_every_text_has_a_loop_key_that_keeps(text: str) -> None:
    assert loop_key(loop_key(text)) == loop_key(text)


@pytest.mark.parametrize(
    ("text", "kind"),
    [
        ("AI", "AI"), ("AI-HART", "AI"), ("HART AI", "AI"), ("SAI", "AI"), ("Analog Input", "AI"), ("AO", "AO"),
        ("Analogue Out", "AO"), ("DI", "DI"), ("BI", "DI"), ("DI/DO", "DI"), ("Digital Output", "DO"), ("DO", "DO"),
        ("RTD", "RTD"), ("Pt100", "RTD"), ("RTD (AI)", "RTD"), ("T/C", "TC"), ("thermocouple", "TC"),
        ("Analogeingang", "AI"), ("Bin\u00e4rausgang", "DO"), ("AE", "AI"),
        ("bus", None), ("FF", None), ("PI", None), ("main", None), ("", None), (None, None),
    ],
)  # fmt: skip
def test_the_kind_of_a_circuit(text: str | None, kind: str | None) -> None:
    assert circuit_kind(text) == kind


@pytest.mark.parametrize(
    ("row", "yes"),
    [
        ({"I/O type": "AI"}, True),
        ({"I/O address": "A1"}, True),
        ({"I/O type": "none"}, False),
        ({"I/O type": "Soft", "I/O address": "A1"}, True),
        ({}, False),
    ],
)
def test_whether_a_row_gives_a_channel(row: Row, yes: bool) -> None:
    (installed,) = plant_of({"tag": "PT-1", **row}).instruments
    assert has_io(installed.record) is yes


@pytest.mark.parametrize(
    ("row", "powered"),
    [
        ({"wires": 2}, True),
        ({"wires": 4}, False),
        ({"wires": 3}, False),
        ({"power supply": "loop"}, True),
        ({"power supply": "Loop powered"}, True),
        ({"signal": "4-20 mA 2-wire"}, True),
        ({"signal": "4-20 mA, 4 wire"}, False),
        ({"signal": "4-20 mA Zweileiter 2-Leiter"}, True),
        ({"power supply": "230 VAC"}, False),
        ({"power supply": "24 VDC"}, None),
        ({"wires": 2, "power supply": "230 VAC"}, True),
        ({}, None),
    ],
)
def test_whether_the_loop_powers_a_device(row: Row, powered: bool | None) -> None:
    (circuit,) = plant_of({"tag": "PT-1", **row}).circuits
    assert circuit.powered_by_loop is powered
