"""HART on a current loop: what it is heard across, and its time constant."""

from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from loops.hart import with_resistor
from tests.validation.rules.test_analogue_circuits import AT_20, Row, _with, asked, comes_to, left_after, plant_of

PT = {"tag": "PT-7", "device type": "T2", "signal": "4-20 mA HART", "wires": 2, "I/O type": "AI", "I/O address": "1"}
TYPE = {"code": "T2", "kind": "transmitter"}
LOOP = {"number": "P-7", "circuit or tag": "PT-7", "range resistor": 250}
CARD = {"code": "AI", "kind": "card", "input ohm": 250}
ISOLATOR = {"code": "ISO", "kind": "isolator", "signal": "4-20 mA", "HART": "yes", "volts available at 20 mA": 15,
            "volts available at high alarm": 14.6, "maximum load ohm": 600}  # fmt: skip
ZENER = {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 340}
RECORDER = {"tag": "PI-7", "kind": "indicator", "location": "panel", "signal": "1-5 V", "device type": "REC"}
AT_CARD = "at the card's terminals, it needs 230 ohm"


# ------------------------------------------------------------------------------------------------------------ ELC05


@pytest.mark.parametrize(
    ("tag", "types", "expected"),
    [
        # 230 ohm, exactly and beyond.
        ({"receiver ohm": 250}, (), "clear"),
        ({"receiver ohm": 230}, (), "clear"),
        ({"receiver ohm": 229}, (), f"finding: HART has 229 ohm {AT_CARD}"),
        ({"receiver ohm": 100}, (), f"finding: HART has 100 ohm {AT_CARD}"),
        # The card's own, with what it puts in series.
        ({"card": "AI"}, (CARD,), "clear"),
        ({"card": "AI"}, ({**CARD, "input ohm": 50},), f"finding: HART has 50 ohm {AT_CARD}"),
        ({"card": "AI"}, ({**CARD, "input ohm": 50, "resistance ohm": 200},), "clear"),
        ({"card": "AI"}, ({"code": "AI", "kind": "card", "resistance ohm": 250},), "clear"),
        ({"card": "AI"}, ({"code": "AI", "kind": "card"},), "unchecked: receiver ohm"),
        ({}, (), "unchecked: receiver ohm"),
        # A receiver that is blank is no 250 ohm here: a blank is no pass.
        ({"receiver ohm": None}, (), "unchecked: receiver ohm"),
        # The barrier, the cable and the lift-off lie on the other side of the terminals.
        ({"receiver ohm": 100, "barrier": "ZB"}, (ZENER,), f"finding: HART has 100 ohm {AT_CARD}"),
        ({"receiver ohm": 250, "barrier": "LOST"}, (), "unchecked: barrier"),
        # An input of its own is no receiver that is smaller.
        ({"receiver ohm": 1e6, "card": "AI"}, (CARD,), "clear"),
        # 233 ohm with 3300 ohm across it are 217.6.
        ({"receiver ohm": 3300, "card": "AI"}, ({**CARD, "input ohm": 233},),
         f"finding: HART has 217.634 ohm {AT_CARD}"),
        # Two papers that differ: the second would be too little.
        ({"receiver ohm": 250, "card": "AI"}, ({**CARD, "input ohm": 100},), f"review: HART has 100 ohm {AT_CARD}"),
        ({"receiver ohm": 500, "card": "AI"}, (CARD,), "clear"),
        # Four wires, three wires: the same terminals.
        ({"wires": 4, "receiver ohm": 100}, (), f"finding: HART has 100 ohm {AT_CARD}"),
        # Whether it is HART.
        ({"signal": "4-20 mA", "receiver ohm": 100}, (), "unchecked: HART"),
        ({"signal": "4-20 mA", "receiver ohm": 100}, ({**TYPE, "HART": "no"},), "not applicable"),
        ({"signal": "4-20 mA", "receiver ohm": 100}, ({**TYPE, "HART": "yes"},),
         f"finding: HART has 100 ohm {AT_CARD}"),
        ({"signal": "WirelessHART"}, (), "not applicable"),
        ({"signal": "Pt100", "I/O type": "RTD"}, ({**TYPE, "HART": "yes"},), "not applicable"),
        # A current output is no short: what it drives is the resistance.
        ({"tag": "FY-7", "kind": "positioner", "I/O type": "AO"}, (), "not applicable"),
    ],
)  # fmt: skip
def test_hart_needs_230_ohm_at_the_cards_terminals(tag: Row, types: tuple[Row, ...], expected: str) -> None:
    known = () if any(each.get("code") == "T2" for each in types) else (TYPE,)
    assert comes_to("ELC05", _with(PT, tag), (*known, *types)) == expected


def test_the_loop_lists_word_on_hart_is_the_last() -> None:
    tag = {**PT, "receiver ohm": 100}
    for said, expected in (("no", "not applicable"), ("yes", f"finding: HART has 100 ohm {AT_CARD}")):
        loop = {"number": "P-7", "circuit or tag": "PT-7", "HART": said, "supply V nominal": 24}
        assert comes_to("ELC05", tag, (TYPE,), loops=[loop]) == expected


@pytest.mark.parametrize(
    ("kind", "expected"),
    [
        # M6: two resistors of 250 ohm across each other.
        ({"input ohm": 250}, f"finding: HART has 125 ohm {AT_CARD}"),
        ({"input ohm": 10_000}, "clear"),
        ({"input ohm": 2875}, "clear"),
        ({"input ohm": 2874}, f"finding: HART has 229.994 ohm {AT_CARD}"),
        # In series with the transmitter it is none; one that says neither may be either.
        ({"resistance ohm": 10}, "clear"),
        ({}, "unchecked: resistance ohm or input ohm"),
    ],
)
def test_receivers_in_parallel_count(kind: Row, expected: str) -> None:
    types = (TYPE, {"code": "REC", "kind": "indicator", **kind})
    assert comes_to("ELC05", PT, types, rows=(RECORDER,), loops=[LOOP]) == expected


def test_a_receiver_that_says_nothing_makes_too_little_no_better() -> None:
    types = (TYPE, {"code": "REC", "kind": "indicator"})
    loop = {**LOOP, "range resistor": 100}
    assert comes_to("ELC05", PT, types, rows=(RECORDER,), loops=[loop]) == f"finding: HART has 100 ohm {AT_CARD}"


@pytest.mark.parametrize(
    ("isolator", "tag", "expected"),
    [
        # Behind an isolator the resistance counts on its system side.
        ({}, {"receiver ohm": 250}, "clear"),
        ({}, {"receiver ohm": 100}, "finding: HART has 100 ohm at the system side of isolator ISO, it needs 230 ohm"),
        ({}, {}, "unchecked: receiver ohm"),
        ({"HART": None}, {"receiver ohm": 250}, "clear, assumed: isolator ISO passes HART"),
        ({"HART": None}, {"receiver ohm": 100},
         "finding: HART has 100 ohm at the system side of isolator ISO, it needs 230 ohm"),
        # Its field side counts only where it says that it passes none.
        ({"HART": "no"}, {"receiver ohm": 250}, "finding: PT-7 speaks HART, isolator ISO does not pass it"),
        ({"HART": "no"}, {}, "finding: PT-7 speaks HART, isolator ISO does not pass it"),
        ({"HART": "no", "input ohm": 250}, {"receiver ohm": 250}, "clear"),
        ({"HART": "no", "input ohm": 200}, {"receiver ohm": 250},
         "finding: PT-7 speaks HART, isolator ISO does not pass it"),
        ({"HART": "no"}, {"tag": "FY-7", "kind": "positioner", "I/O type": "AO"},
         "finding: FY-7 speaks HART, isolator ISO does not pass it"),
        ({"HART": "no"}, {"signal": "4-20 mA"}, "unchecked: HART"),
    ],
)  # fmt: skip
def test_an_isolator_passes_hart_or_says_that_it_does_not(isolator: Row, tag: Row, expected: str) -> None:
    types = (TYPE, _with(ISOLATOR, isolator))
    assert comes_to("ELC05", _with(PT, {"barrier": "ISO", **tag}), types) == expected


def test_a_zener_barrier_that_says_no_is_for_a_person_to_see() -> None:
    tag = {**PT, "barrier": "ZB", "receiver ohm": 250}
    assert (
        comes_to("ELC05", tag, (TYPE, {**ZENER, "HART": "no"}))
        == "review: PT-7 speaks HART, barrier ZB does not pass it"
    )
    assert comes_to("ELC05", tag, (TYPE, {**ZENER, "HART": "yes"})) == "clear"


def test_the_working_and_the_parts_of_a_finding() -> None:
    types = (TYPE, {"code": "REC", "kind": "indicator", "input ohm": 250})
    (finding,) = asked("ELC05", PT, types, rows=(RECORDER,), loops=[LOOP])
    assert finding.working == (
        "range resistor 250 ohm (loop list) across 250 ohm (input of PI-7) = 125 ohm at the card's terminals,"
        " 230 ohm needed"
    )
    assert (finding.found, finding.wanted, finding.off_by) == ("125 ohm", "at least 230 ohm", "105 ohm")
    assert {f"{cell.sheet} {cell.address}" for cell in finding.cells} == {"Loops C2", "Device types C3"}
    (review,) = asked("ELC05", {**PT, "receiver ohm": 250, "card": "AI"}, (TYPE, {**CARD, "input ohm": 100}))
    assert review.assumed == ("of 250 ohm and 100 ohm the second is the receiver's",)


def test_an_isolator_that_passes_hart_mends_it() -> None:
    others = ({**ISOLATOR, "code": "ISO-H"}, {**ISOLATOR, "code": "ISO-O", "compliance V": 15})
    (finding,) = asked("ELC05", {**PT, "barrier": "ISO"}, (TYPE, {**ISOLATOR, "HART": "no"}, *others))
    assert [fix.text for fix in finding.fixes] == ["ISO-H, which passes HART"]
    (alone,) = asked("ELC05", {**PT, "barrier": "ISO"}, (TYPE, {**ISOLATOR, "HART": "no"}))
    assert [fix.text for fix in alone.fixes] == ["an isolator that passes HART"]


# What the resistor does to the volts: 24 V, lift-off 12 V, 22 mA; 100 ohm of receiver and 24.2 ohm of cable leave 9.27.
DRIVEN = {**PT, "cable length": 1000, "conductor size": "1.5 mm2"}
LIFTS = {**TYPE, "lift-off V": 12, "maximum V": 42}


def loop_of(supply: float, ohm: float) -> Row:
    return {
        "number": "P-7",
        "circuit or tag": "PT-7",
        "supply V min": supply,
        "supply V max": 30,
        "range resistor": ohm,
    }


def test_a_resistor_in_series_mends_hart_where_the_lift_off_allows_it() -> None:
    # 24 - 0.022 x (100 + 24.2 + 130) = 18.4 V.
    (finding,) = asked("ELC05", DRIVEN, (LIFTS,), loops=[loop_of(24, 100)])
    assert [(fix.text, dict(fix.change)) for fix in finding.fixes] == [
        ("a resistor of at least 130 ohm in series, between the supply and the card's terminals", {}),
        ("a range resistor of 250 ohm instead", {"range resistor": "250"}),
    ]
    assert left_after("ELC05", DRIVEN, (LIFTS,), loops=[loop_of(24, 100)]) == []


def test_a_resistor_that_would_starve_the_transmitter_needs_more_supply_with_it() -> None:
    # 16 - 0.022 x 124.2 = 13.27 V is enough; with 130 ohm more 10.41 V are left of 12.
    loops = [loop_of(16, 100)]
    (finding,) = asked("ELC05", DRIVEN, (LIFTS,), loops=loops)
    assert asked("ELC01", DRIVEN, (LIFTS,), loops=loops) == []
    assert [fix.text for fix in finding.fixes] == [
        "a resistor of at least 130 ohm in series, between the supply and the card's terminals, together with a supply"
        " of at least 17.6 V at its lowest: the resistor alone would leave 10.408 V at 22 mA, the lift-off is 12 V"
    ]
    # Both at once hold, and a tenth of a volt less does not.
    assert asked("ELC01", DRIVEN, (LIFTS,), loops=[loop_of(17.6, 230)]) == []
    assert len(asked("ELC01", DRIVEN, (LIFTS,), loops=[loop_of(17.5, 230)])) == 1
    assert asked("ELC05", DRIVEN, (LIFTS,), loops=[loop_of(17.6, 230)]) == []


def test_a_resistor_whose_effect_on_the_volts_is_not_known_says_so() -> None:
    (finding,) = asked("ELC05", {**PT, "receiver ohm": 100}, (TYPE,))
    assert finding.fixes[0].text.endswith(
        "whether the lift-off voltage still holds is not known (lift-off V, supply V min, cable length, conductor size)"
    )
    assert len(finding.fixes) == 1


def test_a_source_that_cannot_drive_the_resistor_says_so() -> None:
    meter = {**TYPE, "source or sink": "source", "maximum load ohm": 200}
    (finding,) = asked("ELC05", {**PT, "wires": 4, "receiver ohm": 100}, (meter,))
    assert finding.fixes[0].text == (
        "a resistor of at least 130 ohm in series, between the supply and the card's terminals; PT-7 drives only"
        " 200 ohm: both cannot hold"
    )
    isolator = {**ISOLATOR, "maximum load ohm": 200}
    (behind,) = asked("ELC05", {**PT, "barrier": "ISO", "receiver ohm": 100}, (TYPE, isolator))
    assert behind.fixes[0].text == (
        "an isolator whose output drives 230 ohm, with a resistor of at least 130 ohm in series, between the supply and"
        " the system side of isolator ISO"
    )
    assert len(behind.fixes) == 1


@settings(max_examples=25, deadline=None)
@given(ohm=st.integers(1, 229), supply=st.integers(140, 300).map(lambda tenths: tenths / 10))
def test_the_resistor_is_enough_for_hart_and_one_ohm_less_is_not(ohm: int, supply: float) -> None:
    loops = [loop_of(supply, ohm)]
    found = asked("ELC05", DRIVEN, (LIFTS,), loops=loops)
    more = 230 - ohm
    assert f"a resistor of at least {more} ohm" in found[0].fixes[0].text
    assert asked("ELC05", DRIVEN, (LIFTS,), loops=[loop_of(supply, ohm + more)]) == []
    assert len(asked("ELC05", DRIVEN, (LIFTS,), loops=[loop_of(supply, ohm + more - 1)])) == 1
    # What is said of the lift-off is what ELC01 says of the same loop.
    plant = plant_of(DRIVEN, (LIFTS,), loops=loops)
    after = with_resistor(plant.circuits[0], more, plant.data)
    assert after.holds is not bool(asked("ELC01", DRIVEN, (LIFTS,), loops=[loop_of(supply, ohm + more)]))
    if after.least_supply_v is not None:
        raised = [loop_of(after.least_supply_v, ohm + more)]
        assert asked("ELC01", DRIVEN, (LIFTS,), loops=raised) == []


def test_a_plant_may_ask_for_more() -> None:
    tag = {**PT, "receiver ohm": 250}
    assert comes_to("ELC05", tag, (TYPE,), plant={"ELC05 ohm": 250}) == "clear"
    assert comes_to("ELC05", tag, (TYPE,), plant={"ELC05 ohm": 270}) == (
        "finding: HART has 250 ohm at the card's terminals, it needs 270 ohm"
    )


# ------------------------------------------------------------------------------------------------------------ ELC06

# M23: 250 ohm, 1.5 mm2, 200 pF/m, devices of 10 nF.
LONG = {**PT, "receiver ohm": 250, "cable type": "C", "cable length": 1000}
SLOW = {**TYPE, "HART capacitance number": 2}
CABLE = {"code": "C", "conductor size": "1.5 mm2", "capacitance": 200}
LIMIT = "HART needs less than 65 us"


@pytest.mark.parametrize(
    ("tag", "kind", "cable", "expected"),
    [
        ({}, {}, {}, "clear"),
        ({"cable length": 1500}, {}, {}, f"finding: 286.3 ohm x 310 nF = 88.753 us, {LIMIT}"),
        # A capacitance number that is blank is one: 5 nF.
        ({"cable length": 1500}, {"HART capacitance number": None}, {},
         f"finding: 286.3 ohm x 305 nF = 87.322 us, {LIMIT}"),
        # The barrier counts.
        ({"barrier": "ZB"}, {}, {}, f"finding: 614.2 ohm x 210 nF = 128.982 us, {LIMIT}"),
        # At the limit it is not below it.
        ({"cable length": 0, "receiver ohm": 650}, {"HART capacitance number": 20}, {},
         f"finding: 650 ohm x 100 nF = 65 us, {LIMIT}"),
        ({"cable length": 0, "receiver ohm": 649.9}, {"HART capacitance number": 20}, {}, "clear"),
        # The receiver that is assumed.
        ({"receiver ohm": None}, {}, {}, "clear, assumed: receiver 250 ohm"),
        ({"receiver ohm": None, "cable length": 1500}, {}, {},
         f"review: 286.3 ohm x 310 nF = 88.753 us, {LIMIT}"),
        ({"receiver ohm": None, "cable length": 5000}, {}, {}, f"finding: 121 ohm x 1010 nF = 122.21 us, {LIMIT}"),
        # What is not stated.
        ({"cable length": None}, {}, {}, "unchecked: cable length"),
        ({}, {}, {"capacitance": None}, "unchecked: capacitance"),
        ({}, {}, {"conductor size": None}, "unchecked: conductor size"),
        ({"cable type": None, "conductor size": "1.5 mm2"}, {}, {}, "unchecked: capacitance"),
        ({"barrier": "LOST"}, {}, {}, "unchecked: barrier"),
        ({"signal": "4-20 mA"}, {}, {}, "unchecked: HART"),
        ({"signal": "4-20 mA"}, {"HART": "no"}, {}, "not applicable"),
        ({"signal": "4-20 mA", "cable length": 1500}, {"HART": "yes"}, {},
         f"finding: 286.3 ohm x 310 nF = 88.753 us, {LIMIT}"),
    ],
)  # fmt: skip
def test_resistance_times_capacitance(tag: Row, kind: Row, cable: Row, expected: str) -> None:
    types = (_with(SLOW, kind), ZENER)
    assert comes_to("ELC06", _with(LONG, tag), types, cable_types=[_with(CABLE, cable)]) == expected


def test_the_length_that_hart_is_said_to_bear_is_no_measure() -> None:
    """M23: 1500 m is below every ceiling that guides print, and fails."""
    (finding,) = asked("ELC06", {**LONG, "cable length": 1500}, (SLOW,), cable_types=[CABLE])
    assert finding.working == (
        "cable 36.3 ohm (2 x 1500 m, its row, x 12.1 ohm/km, IEC 60228 for 1.5 mm2, x 1.0000 at 20 degC)"
        " + receiver 250 ohm (its row) = 286.3 ohm;"
        " cable 300 nF (1500 m x 200 pF/m, cable type C) + PT-7 10 nF (5 nF x capacitance number 2, type T2) = 310 nF;"
        " 286.3 ohm x 310 nF = 88.753 us, must be below 65 us"
    )
    assert [(fix.text, dict(fix.change)) for fix in finding.fixes] == [
        ("cable no longer than 1122 m", {"cable length": "1122"})
    ]
    assert left_after("ELC06", {**LONG, "cable length": 1500}, (SLOW,), cable_types=[CABLE]) == []


def test_hot_conductors_count() -> None:
    tag = {**LONG, "cable length": 1122}
    assert comes_to("ELC06", tag, (SLOW,), cable_types=[CABLE]) == "clear"
    assert comes_to("ELC06", tag, (SLOW,), cable_types=[CABLE], plant={}).startswith("finding: 282.488 ohm")


@pytest.mark.parametrize(
    ("isolator", "length", "expected"),
    [
        # The field's side alone: what the isolator states there, else what is assumed of a receiver.
        ({"input ohm": 100}, 1500, "clear"),
        ({"input ohm": 250}, 1500, f"finding: 286.3 ohm x 315 nF = 90.184 us, {LIMIT}"),
        ({}, 1000, "clear, assumed: input of isolator ISO 250 ohm"),
        ({}, 1500, f"review: 286.3 ohm x 315 nF = 90.184 us, {LIMIT}"),
    ],
)
def test_an_isolator_ends_the_circuit(isolator: Row, length: int, expected: str) -> None:
    tag = {**LONG, "barrier": "ISO", "cable length": length, "receiver ohm": 5000}
    assert comes_to("ELC06", tag, (SLOW, {**ISOLATOR, **isolator}), cable_types=[CABLE]) == expected


def test_each_device_has_its_capacitance() -> None:
    shown = {"tag": "PI-7", "kind": "indicator", "location": "field", "signal": "4-20 mA", "device type": "IND"}
    types = (SLOW, {"code": "IND", "kind": "indicator", "resistance ohm": 10, "HART capacitance number": 3}, {
        **CARD, "HART": "yes"})  # fmt: skip
    tag = {**LONG, "card": "AI", "receiver ohm": None, "cable length": 2000}
    (finding,) = asked("ELC06", tag, types, rows=(shown,), cable_types=[CABLE])
    # 400 nF of cable, 10 + 15 nF of devices, 5 nF of a card that speaks HART.
    assert finding.message == f"308.4 ohm x 430 nF = 132.612 us, {LIMIT}"
    (without,) = asked("ELC06", tag, (*types[:2], CARD), rows=(shown,), cable_types=[CABLE])
    assert without.message == f"308.4 ohm x 425 nF = 131.07 us, {LIMIT}"
    assert "PI-7 15 nF (5 nF x capacitance number 3, type IND)" in finding.working
    assert "card AI 5 nF (5 nF x capacitance number 1, ELC06 default)" in finding.working


def test_a_plant_may_know_another_capacitance_number() -> None:
    tag = {**LONG, "cable length": 1100}
    for number, expected in ((1, "clear"), (10, f"finding: 276.62 ohm x 270 nF = 74.687 us, {LIMIT}")):
        plant = {**AT_20, "ELC06 capacitance number": number}
        assert comes_to("ELC06", tag, (TYPE,), cable_types=[CABLE], plant=plant) == expected


def test_the_cables_of_a_run_add_up() -> None:
    cables = [
        {"number": "C-1", "type": "A", "from": "PT-7", "to": "JB-1", "length": 500},
        {"number": "M-1", "type": "B", "from": "JB-1", "to": "MAR", "length": 1000},
    ]
    kinds = [
        {"code": "A", "conductor size": "1.5 mm2", "capacitance": 100},
        {"code": "B", "conductor size": "0.5 mm2", "capacitance": 300},
    ]
    tag = _with(PT, {"receiver ohm": 250, "cable": "C-1"})
    (finding,) = asked("ELC06", tag, (SLOW,), cables=cables, cable_types=kinds)
    # 2 x (500 m of 12.1 and 1000 m of 36 ohm/km) = 84.1 ohm; 50 + 300 + 10 nF.
    assert finding.message == f"334.1 ohm x 360 nF = 120.276 us, {LIMIT}"
    assert "500 m x 100 pF/m, cable type A + 1000 m x 300 pF/m, cable type B" in finding.working
    assert comes_to(
        "ELC06", tag, (SLOW,), cables=cables, cable_types=[kinds[0], _with(kinds[1], {"capacitance": None})]
    ) == ("unchecked: capacitance")


@pytest.mark.parametrize(
    ("drive", "expected"),
    [
        # An I/P converter is a resistor; what a positioner is to the signal nobody says: 250 ohm are assumed.
        ({"resistance ohm": 250}, f"finding: 286.3 ohm x 305 nF = 87.322 us, {LIMIT}"),
        ({"device volts at 20 mA": 9}, f"review: 286.3 ohm x 305 nF = 87.322 us, {LIMIT}"),
        ({"resistance ohm": 100}, "clear"),
    ],
)
def test_an_output_has_its_device_in_series(drive: Row, expected: str) -> None:
    changed = {"tag": "FY-7", "kind": "positioner", "device type": "POS", "I/O type": "AO", "cable length": 1500}
    tag = _with(LONG, {**changed, "receiver ohm": None})
    types = ({"code": "POS", "kind": "positioner", **drive}, TYPE)
    assert comes_to("ELC06", tag, types, cable_types=[CABLE]) == expected


@settings(max_examples=25, deadline=None)
@given(
    receiver=st.integers(50, 700),
    capacitance=st.integers(40, 400),
    size=st.sampled_from(["0.5 mm2", "0.75 mm2", "1.5 mm2", "20 AWG"]),
)
def test_one_metre_more_than_the_longest_cable_is_too_slow(receiver: int, capacitance: int, size: str) -> None:
    cables: dict[str, Any] = {"cable_types": [{"code": "C", "conductor size": size, "capacitance": capacitance}]}
    tag = {**LONG, "receiver ohm": receiver, "cable length": 60_000}
    (finding,) = asked("ELC06", tag, (SLOW,), plant={}, **cables)
    length = int(finding.fixes[0].change["cable length"])
    assert asked("ELC06", {**tag, "cable length": length}, (SLOW,), plant={}, **cables) == []
    assert len(asked("ELC06", {**tag, "cable length": length + 1}, (SLOW,), plant={}, **cables)) == 1
