"""What a circuit is given: supply, receiver and cable, each from where it stands first."""

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.budget import cable_path
from loops.circuit import Circuit, Given
from loops.given import SupplyWords, in_parallel, supply_words, volts_in
from validation.example import example_plant

Row = dict[str, Any]

PT = {"tag": "PT-1", "signal": "4-20 mA", "wires": 2, "I/O type": "AI", "I/O address": "A1"}


def circuit(row: Row | None = None, *, loop: Row | None = None, rows: tuple[Row, ...] = (), **sheets: Any) -> Circuit:
    """Return the circuit of PT-1."""
    if loop is not None:
        sheets["loops"] = [{"number": "P-1", "circuit or tag": "PT-1", "kind": "AI", **loop}]
    plant = example_plant([{"service": "x", **each} for each in ({**PT, **(row or {})}, *rows)], **sheets)
    (found,) = [each for each in plant.circuits if each.device.name == "PT-1"]
    return found


def told(given: Given | None) -> tuple[float, str] | None:
    return None if given is None else (round(given.number, 6), given.source)


# -------------------------------------------------------------------------------------------------------- supply


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("24 VDC", (None, 24.0, None, True)),
        ("24Vdc", (None, 24.0, None, True)),
        ("24 V d.c.", (None, 24.0, None, True)),
        ("24V=", (None, 24.0, None, True)),
        ("24 V", (None, 24.0, None, None)),
        ("24 volts DC", (None, 24.0, None, True)),
        ("DC 24 V", (None, 24.0, None, True)),
        ("23,5 VDC", (None, 23.5, None, True)),
        ("230 VAC", (None, 230.0, None, False)),
        ("AC 230V", (None, 230.0, None, False)),
        ("230V~", (None, 230.0, None, False)),
        ("110/230 VAC", (None, 230.0, None, False)),
        ("24 VDC via PSU-1", (None, 24.0, None, True)),
        # Its own tolerance.
        ("24 VDC \u00b110 %", (21.6, 24.0, 26.4, True)),
        ("24 V DC +/- 5%", (22.8, 24.0, 25.2, True)),
        ("24 VDC -15/+20 %", (20.4, 24.0, 28.8, True)),
        ("24 VDC (+20% / -15%)", (20.4, 24.0, 28.8, True)),
        # A range of a supply; what a device bears is none.
        ("21.6-26.4 VDC", (21.6, None, 26.4, True)),
        ("20...28 V", (20.0, None, 28.0, None)),
        ("20 to 28 V DC", (20.0, None, 28.0, True)),
        ("10.5-42 VDC", None),
        ("12-55 V", None),
        # No volts.
        ("loop", None),
        ("2-wire", None),
        ("PSU-24", None),
        ("20 VA", None),
        ("", None),
        (None, None),
    ],
)  # fmt: skip
def test_what_the_words_of_a_supply_say(text: str | None, expected: tuple[Any, ...] | None) -> None:
    assert supply_words(text) == (None if expected is None else SupplyWords(*expected))


@pytest.mark.parametrize(
    ("text", "expected"),
    [("24VDC", (24.0, True)), ("21.6-26.4 VDC", (26.4, True)), ("230 V AC", (230.0, False)), ("loop", None)],
)
def test_the_volts_of_a_supply(text: str, expected: tuple[float, bool | None] | None) -> None:
    assert volts_in(text) == expected


@given(st.text(max_size=60))
def test_any_text_can_be_asked_for_volts(text: str) -> None:
    words = supply_words(text)
    assert words is None or (words.min_v or 0.0) <= (words.nominal_v or words.max_v or 0.0)


@pytest.mark.parametrize(
    ("row", "loop", "expected"),
    [
        # The loop list; what it lacks, the row.
        ({}, {"supply V min": 22.0, "supply V nominal": 24.0, "supply V max": 26.0},
         ((22.0, "loop row"), (24.0, "loop row"), (26.0, "loop row"))),
        ({"power supply": "24 VDC"}, {"supply V min": 22.0}, ((22.0, "loop row"), (24.0, "row"), None)),
        ({"power supply": "24 VDC \u00b110 %"}, {"supply V nominal": 24.0},
         ((21.6, "row"), (24.0, "loop row"), (26.4, "row"))),
        # A nominal that contradicts what is stated is another supply's.
        ({"power supply": "24 VDC"}, {"supply V min": 44.0}, ((44.0, "loop row"), None, None)),
        ({"power supply": "24 VDC \u00b110 %"}, {"supply V nominal": 48.0}, (None, (48.0, "loop row"), None)),
        # The row alone; mains is no loop's supply.
        ({"power supply": "24 VDC"}, None, (None, (24.0, "row"), None)),
        ({"power supply": "230 VAC"}, None, (None, None, None)),
        ({"power supply": "220 V"}, None, (None, None, None)),
        ({"power supply": "PSU-1"}, None, (None, (27.0, "power supply"), None)),
        ({"power supply": "P27"}, None, (None, (27.0, "power supply"), None)),
        ({"power supply": "PSU-9"}, None, (None, None, None)),
        # The card's, where nobody else says, and it is no sink.
        ({"card": "AI8"}, None, (None, (23.0, "card"), None)),
        ({"card": "AI8", "power supply": "loop"}, None, (None, (23.0, "card"), None)),
        ({"card": "AI8", "power supply": "24 VDC"}, None, (None, (24.0, "row"), None)),
        ({"card": "SINK"}, None, (None, None, None)),
        ({}, None, (None, None, None)),
    ],
)  # fmt: skip
def test_where_the_supply_stands(row: Row, loop: Row | None, expected: tuple[Any, ...]) -> None:
    types = [
        {"code": "P27", "kind": "power supply", "nominal V": 27},
        {"code": "AI8", "kind": "card", "nominal V": 23},
        {"code": "SINK", "kind": "card", "nominal V": 23, "source or sink": "sink"},
    ]
    psu = {"tag": "PSU-1", "kind": "power supply", "device type": "P27"}
    found = circuit(row, loop=loop, rows=(psu,), types=types)
    assert (told(found.supply_min_v), told(found.supply_nominal_v), told(found.supply_max_v)) == expected


# ------------------------------------------------------------------------------------------------------ receiver


@pytest.mark.parametrize(
    ("row", "loop", "expected"),
    [
        ({}, {"range resistor": 250}, (250.0, "loop row")),
        ({"receiver ohm": 250}, None, (250.0, "row")),
        ({"card": "LOW"}, None, (100.0, "card")),
        # What reads volts lies across it (M6).
        ({"receiver ohm": 10000}, {"range resistor": 250}, (243.902439, "loop row")),
        ({"card": "HIGH"}, {"range resistor": 250}, (249.937516, "loop row")),
        ({"receiver ohm": 10000, "card": "HIGH"}, {"range resistor": 250}, (243.842965, "loop row")),
        # Two range resistors are one, told twice: the loop's own is nearer to it.
        ({"receiver ohm": 250}, {"range resistor": 250}, (250.0, "loop row")),
        ({"card": "LOW"}, {"range resistor": 250}, (250.0, "loop row")),
        ({"card": "LOW", "receiver ohm": 250}, None, (250.0, "row")),
        ({}, None, None),
        ({}, {"range resistor": 0}, (0.0, "loop row")),
    ],
)
def test_what_the_receiver_comes_to(row: Row, loop: Row | None, expected: tuple[float, str] | None) -> None:
    types = [{"code": "LOW", "kind": "card", "input ohm": 100}, {"code": "HIGH", "kind": "card", "input ohm": 1e6}]
    found = circuit(row, loop=loop, types=types)
    assert told(found.receiver_ohm) == expected
    assert len(found.receivers) == ("receiver ohm" in row) + ("card" in row) + (loop is not None)


def test_the_input_of_another_device_is_always_one_more() -> None:
    def of(*ohms: tuple[float, str]) -> float | None:
        found = in_parallel([Given(number=ohm, source=source) for ohm, source in ohms])
        return None if found is None else round(found.number, 3)

    assert of((250.0, "card"), (250.0, "device")) == 125.0
    assert of((250.0, "loop row"), (250.0, "card"), (10000.0, "device")) == 243.902
    assert of((250.0, "device")) == 250.0
    assert of((250.0, "card"), (0.0, "device")) == 0.0


def test_no_receiver_is_none() -> None:
    assert in_parallel([]) is None
    assert told(in_parallel([Given(number=0.0, source="row"), Given(number=1e6, source="card")])) == (0.0, "row")


# --------------------------------------------------------------------------------------------------------- cable

SIZES = [{"code": "P15", "conductor size": "1.5 mm2"}, {"code": "M075", "conductor size": "0.75 mm2"}]


def cable(number: str, start: str, end: str, length: float | None, kind: str = "P15") -> Row:
    return {"number": number, "type": kind, "from": start, "to": end, "length": length}


@pytest.mark.parametrize(
    ("row", "loop", "cables", "expected"),
    [
        # The loop's length; if blank the row's; if blank the sum of its cables: never added across sheets.
        ({"cable length": 80, "cable": "C-1"}, {"cable length": 120}, [cable("C-1", "PT-1", "MAR", 50)],
         (120.0, "loop row")),
        ({"cable length": 80, "cable": "C-1"}, {}, [cable("C-1", "PT-1", "MAR", 50)], (80.0, "row")),
        ({"cable": "C-1"}, {}, [cable("C-1", "PT-1", "MAR", 50)], (50.0, "cables")),
        ({"cable": "C-1, C-2"}, None, [cable("C-1", "PT-1", "JB-1", 50), cable("C-2", "JB-1", "MAR", 100)],
         (150.0, "cables")),
        ({"cable": "C-2\nC-1"}, None, [cable("C-1", "PT-1", "JB-1", 50), cable("C-2", "JB-1", "MAR", 100)],
         (150.0, "cables")),
        ({"cable": "C-1 + C-2"}, None, [cable("C-1", "PT-1", "JB-1", 50), cable("C-2", "JB-1", "MAR", 100)],
         (150.0, "cables")),
        # A name with a stroke in it.
        ({"cable": "MC-1/3"}, None, [cable("MC-1/3", "PT-1", "MAR", 30)], (30.0, "cables")),
        # It goes on behind a junction box, where the schedule says how.
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "JB-1", 50), cable("MC-1", "JB-1", "MAR", 100)],
         (150.0, "cables")),
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "JB-1", 50), cable("MC-1", "MAR", "JB-1", 100),
                                  cable("C-9", "PT-9", "JB-1", 20)], (150.0, "cables")),
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "JB-1", 50), cable("MC-1", "JB-1", "JB-2", 100),
                                  cable("MC-2", "JB-2", "MAR", 200)], (350.0, "cables")),
        # Two multicores of one length and type are as long whichever it is; of two lengths nobody knows.
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "JB-1", 50), cable("MC-1", "JB-1", "MAR", 100),
                                  cable("MC-2", "JB-1", "MAR", 100)], (150.0, "cables")),
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "JB-1", 50), cable("MC-1", "JB-1", "MAR", 100),
                                  cable("MC-2", "JB-1", "MAR", 300)], None),
        # A run that ends at a box, as far as the schedule goes, is no whole run.
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "JB-1", 50)], None),
        ({"cable": "C-1", "junction box": "KK7"}, None, [cable("C-1", "PT-1", "KK7", 50)], None),
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "MAR-7", 50)], (50.0, "cables")),
        # A cable that is not listed, or has no length.
        ({"cable": "C-1, C-2"}, None, [cable("C-1", "PT-1", "MAR", 50)], None),
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "MAR", None), cable("C-2", "PT-2", "MAR", 5)], None),
        ({"cable": "C-1"}, None, [cable("C-1", "PT-1", "MAR", 50), cable("C-1", "PT-1", "MAR", 60)], None),
        ({}, None, [cable("C-1", "PT-1", "MAR", 50)], None),
    ],
)  # fmt: skip
def test_where_the_length_stands(row: Row, loop: Row | None, cables: list[Row], expected: Any) -> None:
    if loop is not None:
        loop = {"range resistor": 250, **loop}
    other = {"tag": "PT-9", "signal": "4-20 mA"}
    assert told(circuit(row, loop=loop, rows=(other,), cables=cables, cable_types=SIZES).cable_length_m) == expected


def test_a_junction_box_is_known_by_its_row_in_the_index() -> None:
    cables = [cable("C-1", "PT-1", "KK-7", 50), cable("MC-1", "KK-7", "MAR", 100)]
    box = {"tag": "KK-7", "kind": "junction box"}
    assert told(circuit({"cable": "C-1"}, rows=(box,), cables=cables).cable_length_m) == (150.0, "cables")
    assert told(circuit({"cable": "C-1"}, cables=cables).cable_length_m) == (50.0, "cables")


def test_a_cable_that_does_not_say_where_it_goes_has_no_known_run() -> None:
    """It may go on from a box: the length of the run is not its own."""
    lost = {"number": "C-1", "from": "PT-1", "length": 50, "type": "P15"}
    other = cable("C-2", "PT-2", "MAR", 50)
    assert told(circuit({"cable": "C-1"}, cables=[lost, other]).cable_length_m) is None
    # A schedule that never says where cables go gives whole runs.
    assert told(circuit({"cable": "C-1"}, cables=[lost]).cable_length_m) == (50.0, "cables")


def test_the_terminations_name_a_circuits_cables() -> None:
    cables = [cable("C-1", "PT-1", "JB-1", 50), cable("MC-1", "JB-1", "MAR", 100), cable("MC-2", "JB-1", "MAR", 300)]
    wired = [
        {"circuit or tag": "PT-1", "from item": "PT-1", "from terminal": "+", "to item": "JB-1", "to terminal": "1",
         "cable": "C-1"},
        {"circuit or tag": "PT-1", "from item": "JB-1", "from terminal": "1/out", "to item": "MAR", "to terminal": "1",
         "cable": "MC-2"},
    ]  # fmt: skip
    found = circuit({"cable": "C-1"}, cables=cables, terminations=wired)
    assert told(found.cable_length_m) == (350.0, "cables")


@pytest.mark.parametrize(
    ("row", "loop", "expected"),
    [
        # The loop's type; if blank the row's; if blank its cables'.
        ({"cable type": "M075", "cable": "C-1"}, {"cable type": "P15"}, "P15"),
        ({"cable type": "M075", "cable": "C-1"}, {}, "M075"),
        ({"cable": "C-1"}, {}, "P15"),
        ({}, {}, None),
    ],
)
def test_where_the_type_stands(row: Row, loop: Row, expected: str | None) -> None:
    found = circuit(row, loop={"cable length": 10, **loop}, cables=[cable("C-1", "PT-1", "MAR", 50)], cable_types=SIZES)
    assert found.cable_type_named == expected
    assert (found.cable_type.code if found.cable_type else None) == expected


def test_a_run_of_two_types_has_the_resistance_of_both() -> None:
    cables = [cable("C-1", "PT-1", "JB-1", 50), cable("MC-1", "JB-1", "MAR", 100, "M075")]
    found = circuit({"cable": "C-1"}, cables=cables, cable_types=SIZES)
    assert [(each.name, each.length_m) for each in found.segments] == [("C-1", 50.0), ("MC-1", 100.0)]
    path = cable_path(found)
    assert path is not None
    # 2 x (50 m of 12.1 ohm/km and 100 m of 24.5 ohm/km)
    assert path.ohm(20.0) == pytest.approx(6.11)
    assert path.conductor is None
    # A type that is not listed leaves the whole run unknown.
    lost = circuit({"cable": "C-1"}, cables=cables, cable_types=SIZES[:1])
    assert cable_path(lost) is None
    # One that is named by its size needs no list.
    named = [cable("C-1", "PT-1", "JB-1", 50, "1x2x1.5"), cable("MC-1", "JB-1", "MAR", 100, "12x2x0.75")]
    sized = cable_path(circuit({"cable": "C-1"}, cables=named))
    assert sized is not None
    assert sized.ohm(20.0) == pytest.approx(6.11)


def test_a_type_that_two_entries_share_is_none() -> None:
    twice = [{"code": "P15", "conductor size": "1.5 mm2"}, {"code": "P15", "conductor size": "2.5 mm2"}]
    found = circuit({"cable type": "P15", "cable length": 10}, cable_types=twice)
    assert (found.cable_type, found.conductor) == (None, None)
