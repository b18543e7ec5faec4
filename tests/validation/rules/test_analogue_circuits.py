"""What sends, carries and receives the current of a 4-20 mA circuit."""

from collections.abc import Mapping
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from validation.audit import audit
from validation.example import example_plant
from validation.finding import Finding, Outcome
from validation.mend import found_after

Row = dict[str, Any]
AT_20 = {"ELC hot degC": 20}

# 1 km of 1.5 mm2 at 20 degC: 24.2 ohm out and back.
FT = {"tag": "FT-7", "device type": "M4", "signal": "4-20 mA", "wires": 4, "I/O type": "AI", "I/O address": "1",
      "receiver ohm": 250, "cable length": 1000, "conductor size": "1.5 mm2"}  # fmt: skip
METER = {"code": "M4", "kind": "transmitter", "source or sink": "source", "maximum load ohm": 300}
FY = {"tag": "FY-7", "kind": "positioner", "device type": "POS", "signal": "4-20 mA", "I/O type": "AO",
      "I/O address": "1", "card": "AO8", "cable length": 500, "conductor size": "1.5 mm2"}  # fmt: skip
POSITIONER = {"code": "POS", "kind": "positioner", "device volts at 4 mA": 10, "device volts at 20 mA": 9}
OUTPUT = {"code": "AO8", "kind": "card", "compliance V": 15}
PT = {"tag": "PT-7", "device type": "T2", "signal": "4-20 mA", "wires": 2, "I/O type": "AI", "I/O address": "1"}


def _with(row: Row, changed: Row | None) -> Row:
    return {title: value for title, value in {**row, **(changed or {})}.items() if value is not None}


def plant_of(
    tag: Row, types: tuple[Row, ...] = (), rows: tuple[Row, ...] = (), plant: Mapping[str, Any] = AT_20, **sheets: Any
) -> Any:
    filled = {name: value for name, value in sheets.items() if value}
    return example_plant([_with(tag, None), *rows], types=types, plant=dict(plant), **filled)


def asked(code: str, tag: Row, types: tuple[Row, ...] = (), **more: Any) -> list[Finding]:
    return audit(plant_of(tag, types, **more), codes=[code], raise_errors=True).findings


def comes_to(code: str, tag: Row, types: tuple[Row, ...] = (), **more: Any) -> str:
    """Return the outcome on the one circuit, with the messages, the blanks or the assumptions."""
    result = audit(plant_of(tag, types, **more), codes=[code], raise_errors=True)
    coverage = result.coverage[code]
    (outcome,) = [each for each in Outcome if coverage.count(each)]
    if result.findings:
        return f"{outcome.value}: {'; '.join(each.message for each in result.findings)}"
    if coverage.because:
        return f"{outcome.value}: {', '.join(coverage.because)}"
    return f"{outcome.value}, assumed: {'; '.join(coverage.assumed)}" if coverage.assumed else outcome.value


def left_after(code: str, tag: Row, types: tuple[Row, ...] = (), **more: Any) -> list[str]:
    """Apply each fix that is a value, alone, and return those after which the rule still finds or reviews."""
    plant = plant_of(tag, types, **more)
    return [
        fix.text
        for finding in audit(plant, codes=[code], raise_errors=True).findings
        for fix in finding.fixes
        if fix.change and code in {each.rule for each in found_after(plant, finding, fix)}
    ]


# ------------------------------------------------------------------------------------------------------------ ELC03


def test_a_load_is_the_cable_and_the_receiver() -> None:
    (finding,) = asked("ELC03", FT, ({**METER, "maximum load ohm": 270},))
    assert finding.subject == "F-7"
    assert finding.message == "output of FT-7 drives 274.2 ohm, its maximum load is 270 ohm: over by 4.2 ohm"
    assert finding.working == (
        "cable 24.2 ohm (2 x 1000 m, its row, x 12.1 ohm/km, IEC 60228 for 1.5 mm2, x 1.0000 at 20 degC)"
        " + receiver 250 ohm (its row) = 274.2 ohm; 270 ohm allowed (type M4, at 20 mA), over by 4.2 ohm"
    )
    assert (finding.found, finding.wanted, finding.off_by) == ("274.2 ohm", "at most 270 ohm", "4.2 ohm")
    assert (finding.fields, finding.part, finding.assumed) == (("maximum load ohm",), "", ())
    assert [(fix.text, dict(fix.change)) for fix in finding.fixes] == [
        ("cable no longer than 826 m", {"cable length": "826"}),
        ("a source that drives at least 275 ohm", {}),
    ]
    assert {f"{cell.sheet} {cell.address}" for cell in finding.cells} == {
        "Device types D2", "Instruments G2", "Instruments H2"
    }  # fmt: skip


@pytest.mark.parametrize(
    ("tag", "meter", "expected"),
    [
        ({}, {}, "clear"),
        # Exactly at it, and a thousandth beyond.
        ({}, {"maximum load ohm": 274.2}, "clear"),
        ({}, {"maximum load ohm": 274.199},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 274.199 ohm: over by 0.001 ohm"),
        # Out and back, and hot: the way out alone would pass, the cold cable too (M1, M2).
        ({}, {"maximum load ohm": 262.2},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 262.2 ohm: over by 12 ohm"),
        # Three wires, and wires that nobody states though it says that it is a source.
        ({"wires": 3}, {"maximum load ohm": 200},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 200 ohm: over by 74.2 ohm"),
        ({"wires": None}, {"maximum load ohm": 200},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 200 ohm: over by 74.2 ohm"),
        ({"wires": None}, {"source or sink": None, "maximum load ohm": None}, "unchecked: wires"),
        ({}, {"source or sink": None, "maximum load ohm": None}, "unchecked: source or sink"),
        # What declares a load drives one.
        ({}, {"source or sink": None, "maximum load ohm": 200},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 200 ohm: over by 74.2 ohm"),
        ({}, {"maximum load ohm": None}, "unchecked: maximum load ohm"),
        # A passive output drives nothing, nor does a two-wire transmitter: its volts are another rule's.
        ({}, {"source or sink": "sink", "maximum load ohm": 200}, "not applicable"),
        ({"wires": 2}, {"source or sink": None, "maximum load ohm": 200}, "not applicable"),
        # The cable: whatever it is, too much is too much.
        ({"cable length": None}, {}, "unchecked: cable length"),
        ({"conductor size": None}, {}, "unchecked: conductor size"),
        ({"cable length": None}, {"maximum load ohm": 249},
         "finding: output of FT-7 drives 250 ohm, its maximum load is 249 ohm: over by 1 ohm"),
        # The receiver that is assumed.
        ({"receiver ohm": None}, {}, "clear, assumed: receiver 250 ohm"),
        ({"receiver ohm": None}, {"maximum load ohm": 260},
         "review: output of FT-7 drives 274.2 ohm, its maximum load is 260 ohm: over by 14.2 ohm"),
        ({"receiver ohm": None}, {"maximum load ohm": 24},
         "finding: output of FT-7 drives 24.2 ohm, its maximum load is 24 ohm: over by 0.2 ohm"),
        # No current loop.
        ({"signal": "0-10 V"}, {"maximum load ohm": 20}, "not applicable"),
        ({"signal": "Pt100", "I/O type": "RTD"}, {"maximum load ohm": 20}, "not applicable"),
    ],
)  # fmt: skip
def test_the_load_of_a_four_wire_output(tag: Row, meter: Row, expected: str) -> None:
    assert comes_to("ELC03", _with(FT, tag), (_with(METER, meter),)) == expected


@pytest.mark.parametrize(
    ("supply", "meter", "expected"),
    [
        # 300 ohm at 24 V and 20 mA: 1 V less is 50 ohm less.
        ("23-26 V DC", {"maximum load at supply V": 24},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 250 ohm: over by 24.2 ohm"),
        ("23.5-26 V DC", {"maximum load at supply V": 24, "maximum load ohm": 299.2}, "clear"),
        ("23.5-26 V DC", {"maximum load at supply V": 24, "maximum load ohm": 299.1},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 274.1 ohm: over by 0.1 ohm"),
        ("24-26 V DC", {"maximum load at supply V": 24, "maximum load ohm": 274}, "finding: output of FT-7 drives"
         " 274.2 ohm, its maximum load is 274 ohm: over by 0.2 ohm"),
        ("28-30 V DC", {"maximum load at supply V": 24, "maximum load ohm": 75}, "clear"),
        # Not beyond what the supply may be: 25 V are 50 ohm more.
        ("28-30 V DC", {"maximum load at supply V": 24, "maximum load ohm": 220, "maximum V": 25},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 270 ohm: over by 4.2 ohm"),
        # At its own current: 1 V at 25 mA is 40 ohm.
        ("23-26 V DC", {"maximum load at supply V": 24, "maximum load at mA": 25, "maximum load ohm": 310},
         "finding: output of FT-7 drives 274.2 ohm, its maximum load is 270 ohm: over by 4.2 ohm"),
        # A nominal supply: 24 V are enough, 22.8 V are not.
        ("24 V DC", {"maximum load at supply V": 24},
         "review: output of FT-7 drives 274.2 ohm, its maximum load is 240 ohm: over by 34.2 ohm"),
        ("24 V DC", {"maximum load at supply V": 24, "maximum load ohm": 334.2},
         "clear, assumed: supply 24 V may be 5 % low"),
        # Mains, or a load that no supply is stated for.
        ("230 V AC", {"maximum load at supply V": 24}, "clear"),
        ("10 V DC", {}, "clear"),
    ],
)  # fmt: skip
def test_a_load_counts_for_the_supply_and_the_current_that_it_is_stated_for(
    supply: str, meter: Row, expected: str
) -> None:
    assert comes_to("ELC03", {**FT, "power supply": supply}, ({**METER, **meter},)) == expected


def test_the_working_of_a_load_at_another_supply() -> None:
    meter = {**METER, "maximum load at supply V": 24}
    (finding,) = asked("ELC03", {**FT, "power supply": "23-26 V DC"}, (meter,))
    assert finding.working.endswith(
        "300 ohm + (23 V, its row, - 24 V) / 20 mA = 250 ohm allowed (type M4, at 20 mA), over by 24.2 ohm"
    )


ISOLATOR = {"code": "ISO", "kind": "isolator", "volts available at 20 mA": 15, "maximum load ohm": 300}
TWO_WIRE = {"code": "T2", "kind": "transmitter"}


@pytest.mark.parametrize(
    ("tag", "isolator", "expected"),
    [
        # Its output drives the receiver, and no cable of the field.
        ({"receiver ohm": 300}, {}, "clear"),
        ({"receiver ohm": 301}, {}, "finding: isolator ISO drives 301 ohm, its maximum load is 300 ohm: over by 1 ohm"),
        ({}, {}, "clear, assumed: receiver 250 ohm"),
        (
            {},
            {"maximum load ohm": 200},
            "review: isolator ISO drives 250 ohm, its maximum load is 200 ohm: over by 50 ohm",
        ),
        ({"receiver ohm": 300}, {"maximum load ohm": None}, "unchecked: maximum load ohm"),
        ({"receiver ohm": 300, "barrier": "LOST"}, {}, "unchecked: barrier"),
        # What the card puts in series counts there.
        (
            {"receiver ohm": 250, "card": "AI"},
            {},
            "finding: isolator ISO drives 310 ohm, its maximum load is 300 ohm: over by 10 ohm",
        ),
    ],
)
def test_what_an_isolators_output_drives(tag: Row, isolator: Row, expected: str) -> None:
    card = {"code": "AI", "kind": "card", "resistance ohm": 60}
    types = (TWO_WIRE, _with(ISOLATOR, isolator), card)
    tag = {**PT, "barrier": "ISO", "cable length": 99999, "conductor size": "0.5 mm2", **tag}
    assert comes_to("ELC03", tag, types) == expected


@pytest.mark.parametrize(
    ("isolator", "expected"),
    [
        # The four-wire output drives the isolator's input, and the isolator the receiver.
        ({"input ohm": 50}, "clear"),
        ({"input ohm": 280}, "finding: output of FT-7 drives 304.2 ohm, its maximum load is 300 ohm: over by 4.2 ohm"),
        (
            {"device volts at 20 mA": 6},
            "finding: output of FT-7 drives 324.2 ohm, its maximum load is 300 ohm: over by 24.2 ohm",
        ),
        ({}, "unchecked: input ohm"),
        (
            {"input ohm": 50, "maximum load ohm": 240},
            "finding: isolator ISO drives 250 ohm, its maximum load is 240 ohm: over by 10 ohm",
        ),
    ],
)
def test_an_isolator_ends_one_load_and_begins_another(isolator: Row, expected: str) -> None:
    types = (METER, {"code": "ISO", "kind": "isolator", "maximum load ohm": 400, **isolator})
    assert comes_to("ELC03", {**FT, "barrier": "ISO"}, types) == expected


@pytest.mark.parametrize(
    ("tag", "types", "expected"),
    [
        # An I/P converter of 300 ohm and 12.1 ohm of cable.
        ({}, ({"maximum load ohm": 312.1}, {"resistance ohm": 300}), "clear"),
        (
            {},
            ({"maximum load ohm": 312}, {"resistance ohm": 300}),
            "finding: card AO8 drives 312.1 ohm, its maximum load is 312 ohm: over by 0.1 ohm",
        ),
        # A positioner of 9 V is 450 ohm at 20 mA, and at no other current.
        ({}, ({"maximum load ohm": 462.1}, {"device volts at 20 mA": 9}), "clear"),
        (
            {},
            ({"maximum load ohm": 462}, {"device volts at 20 mA": 9}),
            "finding: card AO8 drives 462.1 ohm, its maximum load is 462 ohm: over by 0.1 ohm",
        ),
        ({}, ({"maximum load ohm": 462, "maximum load at mA": 25}, {"device volts at 20 mA": 9}), "clear"),
        ({}, ({"maximum load ohm": 462}, {}), "unchecked: device volts at 20 mA or resistance ohm"),
        # The volts speak where the card gives volts; a card that gives neither is not known.
        ({}, ({"compliance V": 15}, {"resistance ohm": 300}), "not applicable"),
        ({}, ({}, {"resistance ohm": 300}), "unchecked: maximum load ohm"),
        ({"card": None}, ({}, {"resistance ohm": 300}), "unchecked: card"),
        ({"card": "LOST"}, ({}, {"resistance ohm": 300}), "unchecked: card"),
    ],
)
def test_what_an_output_card_drives(tag: Row, types: tuple[Row, Row], expected: str) -> None:
    card, drive = types
    made = ({"code": "AO8", "kind": "card", **card}, {"code": "POS", "kind": "positioner", **drive})
    assert comes_to("ELC03", _with(FY, tag), made) == expected


def test_a_zener_barrier_and_an_indicator_lie_in_the_load() -> None:
    types = (
        {**METER, "maximum load ohm": 500},
        {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 200, "fixed drop V": 0.5},
        {"code": "IND", "kind": "indicator", "resistance ohm": 10, "bypass diode": "yes"},
    )
    shown = {"tag": "FI-7", "kind": "indicator", "location": "field", "signal": "4-20 mA", "device type": "IND"}
    (finding,) = asked("ELC03", {**FT, "barrier": "ZB"}, types, rows=(shown,))
    # 24.2 + 250 + 200 + 0.5 V / 20 mA + 0.7 V / 20 mA: the diode of an indicator that is taken out.
    assert finding.message == "output of FT-7 drives 534.2 ohm, its maximum load is 500 ohm: over by 34.2 ohm"
    assert "FI-7 35 ohm = 0.7 V / 20 mA (type IND)" in finding.working
    assert "barrier 225 ohm = 4.5 V / 20 mA (type ZB)" in finding.working


def test_a_card_that_feeds_a_two_wire_transmitter_has_its_load_before_its_terminals() -> None:
    card = {"code": "AI", "kind": "card", "source or sink": "source", "input ohm": 250, "maximum load ohm": 24}
    tag = {**PT, "card": "AI", "cable length": 1000, "conductor size": "1.5 mm2"}
    assert comes_to("ELC03", tag, (TWO_WIRE, card)) == (
        "finding: card AI drives 24.2 ohm, its maximum load is 24 ohm: over by 0.2 ohm"
    )
    assert comes_to("ELC03", tag, (TWO_WIRE, {**card, "maximum load ohm": 25})) == "clear"
    assert comes_to("ELC03", tag, (TWO_WIRE, {**card, "maximum load ohm": None})) == "not applicable"


@settings(max_examples=25, deadline=None)
@given(maximum=st.integers(251, 600), size=st.sampled_from(["0.5 mm2", "1.5 mm2", "2.5 mm2", "18 AWG"]))
def test_one_metre_more_than_the_longest_cable_is_too_much(maximum: int, size: str) -> None:
    tag = {**FT, "conductor size": size, "cable length": 50_000}
    meter = {**METER, "maximum load ohm": maximum}
    (finding,) = asked("ELC03", tag, (meter,), plant={})
    fix = next(fix for fix in finding.fixes if fix.change)
    length = int(fix.change["cable length"])
    assert asked("ELC03", {**tag, "cable length": length}, (meter,), plant={}) == []
    assert len(asked("ELC03", {**tag, "cable length": length + 1}, (meter,), plant={})) == 1


# ------------------------------------------------------------------------------------------------------------ ELC04

ACTIVE = {"code": "AIA", "kind": "card", "signal": "4-20 mA", "source or sink": "source"}
PASSIVE = {"code": "AIP", "kind": "card", "signal": "4-20 mA", "source or sink": "sink"}
UNSAID = {"code": "AIX", "kind": "card", "signal": "4-20 mA"}


@pytest.mark.parametrize(
    ("tag", "kind", "expected"),
    [
        # The table of active and passive.
        ({"wires": 2, "card": "AIA"}, {}, "clear"),
        ({"wires": 2, "card": "AIP", "power supply": "24 V DC"}, {}, "clear"),
        ({"wires": 2, "card": "AIP", "power supply": "loop"}, {},
         "finding: no source: FT-7 and card AIP only take the current, and no supply is named"),
        ({"wires": 3, "card": "AIP"}, {"source or sink": "source"}, "clear"),
        ({"wires": 4, "card": "AIP"}, {"source or sink": "active"}, "clear"),
        ({"wires": 4, "card": "AIA"}, {"source or sink": "source"},
         "finding: two sources: FT-7 and card AIA both drive the current"),
        ({"wires": 3, "card": "AIA"}, {"source or sink": "source"},
         "finding: two sources: FT-7 and card AIA both drive the current"),
        ({"wires": 4, "card": "AIA"}, {"source or sink": "passive"}, "clear"),
        # What feeds a four-wire device by wires of its own drives no loop: two that take it are suspicious.
        ({"wires": 4, "card": "AIP", "power supply": "230 V AC"}, {"source or sink": "sink"},
         "review: no source: FT-7 and card AIP only take the current, and no supply is named"),
        # Not stated: unchecked.
        ({"wires": 4, "card": "AIA"}, {}, "unchecked: source or sink"),
        ({"wires": 4, "card": "AIX"}, {"source or sink": "source"}, "unchecked: source or sink"),
        ({"wires": 2, "card": "AIX"}, {}, "unchecked: source or sink"),
        ({"wires": None, "card": "AIA"}, {}, "unchecked: wires"),
        ({"wires": 2}, {}, "unchecked: card"),
        ({"wires": 2, "card": "LOST"}, {}, "unchecked: card"),
        # A declared load is a source's, a lift-off voltage a sink's.
        ({"wires": 4, "card": "AIA"}, {"maximum load ohm": 500},
         "finding: two sources: FT-7 and card AIA both drive the current"),
        ({"wires": None, "card": "AIA"}, {"lift-off V": 10.5}, "clear"),
        # A card that states what it gives at its terminals gives it.
        ({"wires": 4, "card": "AI20"}, {"source or sink": "source"},
         "finding: two sources: FT-7 and card AI20 both drive the current"),
        # No current loop.
        ({"signal": "0-10 V", "card": "AIA"}, {"source or sink": "source"}, "not applicable"),
    ],
)  # fmt: skip
def test_two_sources_or_none(tag: Row, kind: Row, expected: str) -> None:
    giving = {"code": "AI20", "kind": "card", "volts available at 20 mA": 16}
    types = (ACTIVE, PASSIVE, UNSAID, giving, {"code": "M4", "kind": "transmitter", **kind})
    tag = _with({"tag": "FT-7", "device type": "M4", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "1"}, tag)
    assert comes_to("ELC04", tag, types) == expected


@pytest.mark.parametrize(
    ("row", "loop", "expected"),
    [
        # A supply is named, on the row or in the loop list.
        ({"power supply": "PSU-1"}, None, "clear"),
        ({}, {"supply V nominal": 24}, "clear"),
        ({}, {"supply V min": 22}, "clear"),
        # Nothing is named: where the list has a place for it, it is missing; where it has none, who knows.
        ({}, {"range resistor": 250},
         "review: no source: PT-7 and card AIP only take the current, and no supply is named"),
        ({"power supply": "2-wire"}, None,
         "finding: no source: PT-7 and card AIP only take the current, and no supply is named"),
        ({"power supply": "loop powered"}, None,
         "finding: no source: PT-7 and card AIP only take the current, and no supply is named"),
    ],
)  # fmt: skip
def test_a_passive_card_needs_a_supply_in_series(row: Row, loop: Row | None, expected: str) -> None:
    loops = [{"number": "P-7", "circuit or tag": "PT-7", **loop}] if loop else None
    tag = {**PT, "card": "AIP", **row}
    assert comes_to("ELC04", tag, (TWO_WIRE, PASSIVE), loops=loops) == expected


def test_a_blank_supply_in_a_list_that_states_others_is_none() -> None:
    other = {"tag": "PT-8", "signal": "4-20 mA", "wires": 4, "power supply": "230 V AC"}
    (finding,) = asked("ELC04", {**PT, "card": "AIP"}, (TWO_WIRE, PASSIVE), rows=(other,))
    assert (finding.subject, finding.outcome) == ("P-7", Outcome.FINDING)


@pytest.mark.parametrize(
    ("tag", "isolator", "expected"),
    [
        # Each side for itself: the isolator feeds the transmitter, and its output drives the card.
        ({"card": "AIP"}, {}, "clear"),
        ({"card": "AIA"}, {},
         "finding: two sources: output of isolator ISO and card AIA both drive the current"),
        ({"card": "AIP", "wires": 4, "device type": "M4"}, {},
         "finding: two sources: FT-7 and isolator ISO both drive the current"),
        ({"card": "AIP", "wires": 4, "device type": "M4"},
         {"source or sink": "sink", "volts available at 20 mA": None}, "clear"),
        ({"card": "AIP"}, {"source or sink": "sink", "volts available at 20 mA": None},
         "finding: no source: FT-7 and isolator ISO only take the current, and no supply is named"),
        ({"card": "AIP"}, {"volts available at 20 mA": None, "source or sink": None, "maximum load ohm": None},
         "unchecked: source or sink"),
        # Its output is taken for a source: that alone does not make two.
        ({"card": "AIP"}, {"maximum load ohm": None},
         "clear, assumed: the output of ISO drives its current itself"),
        ({"card": "AIA"}, {"maximum load ohm": None},
         "review: two sources: output of isolator ISO and card AIA both drive the current"),
        ({"card": "AIP", "barrier": "LOST"}, {}, "unchecked: barrier"),
        # A zener barrier drives nothing.
        ({"card": "AIA", "barrier": "ZB"}, {}, "clear"),
    ],
)  # fmt: skip
def test_each_side_of_an_isolator_has_a_source_of_its_own(tag: Row, isolator: Row, expected: str) -> None:
    zener = {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 300}
    types = (TWO_WIRE, METER, ACTIVE, PASSIVE, zener, _with(ISOLATOR, isolator))
    assert comes_to("ELC04", {**PT, "tag": "FT-7", "barrier": "ISO", **tag}, types) == expected


@pytest.mark.parametrize(
    ("tag", "types", "expected"),
    [
        ({}, (OUTPUT, POSITIONER), "clear"),
        ({}, ({"code": "AO8", "kind": "card", "source or sink": "source"}, POSITIONER), "clear"),
        ({}, ({"code": "AO8", "kind": "card"}, POSITIONER), "unchecked: source or sink"),
        ({}, (OUTPUT, {**POSITIONER, "source or sink": "source"}),
         "finding: two sources: FY-7 and card AO8 both drive the current"),
        # A positioner on an input is a wrong I/O type, and no transmitter with a supply of its own.
        ({"I/O type": "AI"}, (OUTPUT, POSITIONER), "clear"),
        ({}, ({**OUTPUT, "source or sink": "sink"}, POSITIONER),
         "review: no source: FY-7 and card AO8 only take the current, and no supply is named"),
    ],
)  # fmt: skip
def test_the_source_of_an_output(tag: Row, types: tuple[Row, ...], expected: str) -> None:
    assert comes_to("ELC04", {**FY, **tag}, types) == expected


def test_two_sources_are_mended_by_a_card_of_the_other_sort() -> None:
    tag = {**FT, "card": "AIA"}
    others = ({**PASSIVE, "code": "AOP", "description": "Analogue output, passive", "compliance V": 12},
              {**PASSIVE, "code": "DIP", "signal": "contact"})  # fmt: skip
    types = (METER, ACTIVE, PASSIVE, *others)
    (finding,) = asked("ELC04", tag, types)
    assert [(fix.text, dict(fix.change)) for fix in finding.fixes] == [("card AIP", {"card": "AIP"})]
    assert left_after("ELC04", tag, types) == []
    (alone,) = asked("ELC04", tag, (METER, ACTIVE))
    assert [(fix.text, dict(fix.change)) for fix in alone.fixes] == [("passive terminals of the card", {})]
    on_loop = [{"number": "F-7", "circuit or tag": "FT-7", "card": "AIA"}]
    (there,) = asked("ELC04", _with(tag, {"card": None}), types, loops=on_loop)
    assert [(fix.sheet, fix.subject) for fix in there.fixes] == [("Loops", "FT-7")]
    assert left_after("ELC04", _with(tag, {"card": None}), types, loops=on_loop) == []


def test_a_card_that_the_system_has_comes_before_another_systems() -> None:
    other = {"tag": "FT-8", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "2", "card": "AIP", "system": "DCS"}
    types = (METER, ACTIVE, PASSIVE, {**PASSIVE, "code": "AAA"})
    (found,) = asked("ELC04", {**FT, "card": "AIA", "system": "DCS"}, types, rows=(other,))
    assert [fix.text for fix in found.fixes] == ["card AIP"]
    (elsewhere,) = asked("ELC04", {**FT, "card": "AIA", "system": "SIS"}, types, rows=(other,))
    assert [fix.text for fix in elsewhere.fixes] == ["card AAA, or AIP"]


def test_no_source_is_mended_by_an_active_card_or_a_supply() -> None:
    tag = {**PT, "card": "AIP", "power supply": "loop"}
    (finding,) = asked("ELC04", tag, (TWO_WIRE, ACTIVE, PASSIVE))
    assert [(fix.text, dict(fix.change)) for fix in finding.fixes] == [
        ("card AIA", {"card": "AIA"}),
        ("a supply in series in the loop", {}),
    ]
    assert finding.working == "PT-7: sink; card AIP: sink"
    assert left_after("ELC04", tag, (TWO_WIRE, ACTIVE, PASSIVE)) == []


# ------------------------------------------------------------------------------------------------------------ ELC08


def test_a_positioner_is_no_resistor() -> None:
    """M10: 15 V, 9 V at 20 mA, 10 V at 4 mA, 12.1 ohm: enough at both ends."""
    assert comes_to("ELC08", FY, (POSITIONER, OUTPUT)) == "clear"
    # As 450 ohm it would need 1.8 V at 4 mA: not that makes 10.04 V too little.
    weak = {**OUTPUT, "compliance V": 10.04}
    (finding,) = asked("ELC08", FY, (POSITIONER, weak))
    assert finding.message == "card AO8 gives 10.04 V, 10.048 V are needed at 4 mA: short by 0.008 V"
    assert finding.working == (
        "at 4 mA: FY-7 10 V (type POS) + cable 4 mA x 12.1 ohm = 0.048 V (2 x 500 m, its row, x 12.1 ohm/km,"
        " IEC 60228 for 1.5 mm2, x 1.0000 at 20 degC) = 10.048 V of 10.04 V (compliance, type AO8), short by 0.008 V;"
        " at 20 mA: FY-7 9 V (type POS) + cable 20 mA x 12.1 ohm = 0.242 V (2 x 500 m, its row, x 12.1 ohm/km,"
        " IEC 60228 for 1.5 mm2, x 1.0000 at 20 degC) = 9.242 V of 10.04 V (compliance, type AO8), margin 0.798 V"
    )
    assert [(fix.text, dict(fix.change)) for fix in finding.fixes] == [
        ("cable no longer than 413 m", {"cable length": "413"}),
        ("an output that gives at least 10.1 V", {}),
    ]
    assert left_after("ELC08", FY, (POSITIONER, weak)) == []


@pytest.mark.parametrize(
    ("drive", "card", "tag", "expected"),
    [
        # Either end alone, at it and beyond.
        ({}, {"compliance V": 10.0484}, {}, "clear"),
        ({}, {"compliance V": 10.048},  {},
         "finding: card AO8 gives 10.048 V, 10.0484 V are needed at 4 mA: short by 0.0004 V"),
        ({"device volts at 4 mA": 8}, {"compliance V": 9.242}, {}, "clear"),
        ({"device volts at 4 mA": 8}, {"compliance V": 9.2}, {},
         "finding: card AO8 gives 9.2 V, 9.242 V are needed at 20 mA: short by 0.042 V"),
        # An I/P converter is a resistor: 220 ohm at 20 mA are 4.4 V.
        ({"device volts at 4 mA": None, "device volts at 20 mA": None, "resistance ohm": 220},
         {"compliance V": 4.6}, {}, "finding: card AO8 gives 4.6 V, 4.642 V are needed at 20 mA: short by 0.042 V"),
        ({"device volts at 4 mA": None, "device volts at 20 mA": None, "resistance ohm": 220},
         {"compliance V": 4.65}, {}, "clear"),
        # One end is stated and not the other.
        ({"device volts at 4 mA": None}, {}, {}, "unchecked: device volts at 4 mA"),
        ({"device volts at 20 mA": None}, {}, {}, "unchecked: device volts at 20 mA"),
        ({"device volts at 4 mA": None}, {"compliance V": 9}, {},
         "finding: card AO8 gives 9 V, 9.242 V are needed at 20 mA: short by 0.242 V"),
        ({"device volts at 4 mA": None, "device volts at 20 mA": None}, {}, {},
         "unchecked: device volts at 4 mA or resistance ohm, device volts at 20 mA or resistance ohm"),
        # The card.
        ({}, {"compliance V": None}, {}, "unchecked: compliance V"),
        ({}, {}, {"card": None}, "unchecked: card"),
        ({}, {}, {"barrier": "LOST"}, "unchecked: barrier"),
        # 750 ohm at 20 mA are 15 V; what is too much at 20 mA the load itself says.
        ({"device volts at 4 mA": 14.9}, {"compliance V": None, "maximum load ohm": 750}, {}, "clear"),
        ({"device volts at 4 mA": 15}, {"compliance V": None, "maximum load ohm": 750}, {},
         "finding: card AO8 gives 15 V, 15.048 V are needed at 4 mA: short by 0.048 V"),
        ({"device volts at 20 mA": 15}, {"compliance V": None, "maximum load ohm": 750}, {}, "not applicable"),
        # The cable.
        ({}, {}, {"cable length": None}, "unchecked: cable length"),
        ({}, {}, {"conductor size": None}, "unchecked: conductor size"),
        ({}, {"compliance V": 9.9}, {"cable length": None},
         "finding: card AO8 gives 9.9 V, 10 V are needed at 4 mA: short by 0.1 V"),
        # An input, or a voltage output, is another matter.
        ({}, {"compliance V": 1}, {"tag": "PT-7", "kind": "transmitter", "I/O type": "AI"}, "not applicable"),
        ({}, {"compliance V": 1}, {"signal": "0-10 V"}, "not applicable"),
        ({}, {"compliance V": 1}, {"kind": "solenoid", "signal": "24 VDC", "I/O type": "DO"}, "not applicable"),
    ],
)  # fmt: skip
def test_the_volts_of_an_output(drive: Row, card: Row, tag: Row, expected: str) -> None:
    types = (_with(POSITIONER, drive), _with(OUTPUT, card))
    assert comes_to("ELC08", _with(FY, tag), types) == expected


def test_a_zener_barrier_lies_in_series_and_an_isolator_is_the_source() -> None:
    zener = {"code": "B", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 300}
    tag = {**FY, "barrier": "B"}
    assert comes_to("ELC08", tag, (POSITIONER, {**OUTPUT, "compliance V": 15.3}, zener)) == "clear"
    assert comes_to("ELC08", tag, (POSITIONER, {**OUTPUT, "compliance V": 15.2}, zener)) == (
        "finding: card AO8 gives 15.2 V, 15.242 V are needed at 20 mA: short by 0.042 V"
    )
    assert comes_to("ELC08", tag, (POSITIONER, OUTPUT, _with(zener, {"resistance ohm": None}))) == (
        "unchecked: resistance ohm of the barrier"
    )
    isolator = {"code": "B", "kind": "isolator", "compliance V": 12}
    assert comes_to("ELC08", tag, (POSITIONER, {**OUTPUT, "compliance V": 3}, isolator)) == (
        "clear, assumed: the card drives the input of B"
    )
    assert comes_to("ELC08", tag, (POSITIONER, OUTPUT, {**isolator, "compliance V": 10})) == (
        "finding: isolator B gives 10 V, 10.048 V are needed at 4 mA: short by 0.048 V"
    )
    # Where it states what it takes, the card must give that.
    taking = {**isolator, "device volts at 4 mA": 4, "device volts at 20 mA": 6}
    assert comes_to("ELC08", tag, (POSITIONER, OUTPUT, taking)) == "clear"
    assert comes_to("ELC08", tag, (POSITIONER, {**OUTPUT, "compliance V": 5.9}, taking)) == (
        "finding: card AO8 gives 5.9 V, 6 V are needed at 20 mA: short by 0.1 V"
    )


def test_two_positioners_of_a_split_range_need_the_volts_of_both() -> None:
    rows = [{**FY, "tag": f"FY-7{suffix}"} for suffix in "AB"]
    types = (POSITIONER, {**OUTPUT, "compliance V": 20.1})
    assert comes_to("ELC08", rows[0], types, rows=(rows[1],)) == "clear"
    (finding,) = asked("ELC08", rows[0], (POSITIONER, OUTPUT), rows=(rows[1],))
    assert finding.subject == "F-7"
    assert finding.message == "card AO8 gives 15 V, 20.048 V are needed at 4 mA: short by 5.048 V"
    # Without any cable they need too much: no cable mends it.
    assert [fix.text for fix in finding.fixes] == ["an output that gives at least 20.1 V"]


@settings(max_examples=25, deadline=None)
@given(
    compliance=st.integers(101, 240).map(lambda tenths: tenths / 10),
    size=st.sampled_from(["0.5 mm2", "1.5 mm2", "16 AWG"]),
    at_4=st.integers(80, 100).map(lambda tenths: tenths / 10),
)
def test_one_metre_more_than_the_longest_cable_leaves_too_little(compliance: float, size: str, at_4: float) -> None:
    tag = {**FY, "conductor size": size, "cable length": 99_000}
    types = ({**POSITIONER, "device volts at 4 mA": at_4}, {**OUTPUT, "compliance V": compliance})
    (finding,) = asked("ELC08", tag, types, plant={})
    length = int(finding.fixes[0].change["cable length"])
    assert asked("ELC08", {**tag, "cable length": length}, types, plant={}) == []
    assert len(asked("ELC08", {**tag, "cable length": length + 1}, types, plant={})) == 1


# ------------------------------------------------------------------------------------------------------------ ELC11

LOOP = {"number": "P-7", "circuit or tag": "PT-7", "range resistor": 250}
RECORDER = {"tag": "PI-7", "kind": "indicator", "location": "panel", "signal": "1-5 V", "device type": "REC"}


@pytest.mark.parametrize(
    ("ohm", "expected"),
    [
        # M6: 10 kohm across 250 ohm; 100 kohm; 1 Mohm.
        (10_000, "finding: 10000 ohm across 250 ohm make 243.902 ohm: -3.049 % of span at 20 mA"),
        (100_000, "finding: 100000 ohm across 250 ohm make 249.377 ohm: -0.312 % of span at 20 mA"),
        (1_000_000, "clear"),
        # 0.1 % of span, exactly and beyond.
        (312_250, "clear"),
        (312_000, "finding: 312000 ohm across 250 ohm make 249.8 ohm: -0.1001 % of span at 20 mA"),
    ],
)
def test_an_input_across_the_range_resistor_takes_its_share(ohm: float, expected: str) -> None:
    assert comes_to("ELC11", {**PT, "receiver ohm": ohm}, loops=[LOOP]) == expected


def test_the_working_of_receivers_in_parallel() -> None:
    types = (TWO_WIRE, {"code": "REC", "kind": "indicator", "input ohm": 10000})
    (finding,) = asked("ELC11", PT, types, rows=(RECORDER,), loops=[LOOP])
    assert finding.message == "10000 ohm of PI-7 across 250 ohm make 243.902 ohm: -3.049 % of span at 20 mA"
    assert finding.working == (
        "range resistor 250 ohm (loop list) across 10000 ohm (input of PI-7) = 243.902 ohm;"
        " (243.902 ohm - 250 ohm) / 250 ohm x 20 mA / 16 mA = -3.049 % of span"
    )
    assert (finding.found, finding.wanted) == ("-3.049 % of span", "within 0.1 % of span")
    assert [fix.text for fix in finding.fixes] == ["inputs of at least 312250 ohm together"]


@pytest.mark.parametrize(
    ("kind", "loop", "tag", "expected"),
    [
        # A second resistor of 250 ohm halves the volts.
        ({"input ohm": 250}, {}, {}, "finding: 250 ohm of PI-7 across 250 ohm make 125 ohm: -62.5 % of span at 20 mA"),
        # In series, or alone: nothing lies across anything.
        ({"resistance ohm": 10}, {}, {}, "not applicable"),
        ({"fixed drop V": 2}, {}, {}, "not applicable"),
        # One that says neither may be either.
        ({}, {}, {}, "unchecked: resistance ohm or input ohm"),
        ({}, {}, {"receiver ohm": 10_000},
         "finding: 10000 ohm across 250 ohm make 243.902 ohm: -3.049 % of span at 20 mA"),
        # An input without a resistor to lie across.
        ({"input ohm": 1e6}, {"range resistor": None}, {}, "unchecked: range resistor"),
        # The card reads volts.
        ({"resistance ohm": 10}, {}, {"card": "AIV"}, "clear"),
        # Two papers speak of one resistor.
        ({"resistance ohm": 10}, {}, {"card": "AI250"}, "not applicable"),
    ],
)  # fmt: skip
def test_which_receivers_lie_across_the_resistor(kind: Row, loop: Row, tag: Row, expected: str) -> None:
    types = (
        TWO_WIRE,
        {"code": "REC", "kind": "indicator", **kind},
        {"code": "AIV", "kind": "card", "input ohm": 1e6},
        {"code": "AI250", "kind": "card", "input ohm": 250},
    )
    loops = [_with({**LOOP, "supply V nominal": 24}, loop)]
    assert comes_to("ELC11", {**PT, **tag}, types, rows=(RECORDER,), loops=loops) == expected


def test_a_plant_may_bear_another_shift() -> None:
    tag = {**PT, "receiver ohm": 10_000}
    assert comes_to("ELC11", tag, loops=[LOOP], plant={"ELC11 %": 3.05}) == "clear"
    assert comes_to("ELC11", tag, loops=[LOOP], plant={"ELC11 %": 3.04}).startswith("finding")


@given(ohm=st.integers(1000, 10_000_000))
@settings(max_examples=30, deadline=None)
def test_inputs_of_the_least_that_is_said_pass(ohm: int) -> None:
    found = asked("ELC11", {**PT, "receiver ohm": ohm}, loops=[LOOP])
    assert bool(found) is (ohm < 312_250)


# ------------------------------------------------------------------------------------------------------------ ELC12

SHOWN = {"tag": "PI-7", "kind": "indicator", "location": "field", "signal": "4-20 mA", "device type": "IND"}


@pytest.mark.parametrize(
    ("kind", "expected"),
    [
        # M7: 10 ohm are 0.2 V; 50 ohm are 1 V, and the diode takes the current.
        ({"resistance ohm": 10, "bypass diode": "yes"}, "clear"),
        ({"resistance ohm": 50, "bypass diode": "yes"},
         "finding: PI-7 drops 1 V at 20 mA, its diode conducts from 0.5 V on and takes part of the current"),
        ({"resistance ohm": 25, "bypass diode": "yes"}, "clear"),
        ({"resistance ohm": 25.01, "bypass diode": "yes"},
         "finding: PI-7 drops 0.5002 V at 20 mA, its diode conducts from 0.5 V on and takes part of the current"),
        ({"resistance ohm": 10, "bypass diode": "no"},
         "finding: PI-7 is in series without a bypass diode: taking it out opens the loop"),
        ({"bypass diode": "no"}, "finding: PI-7 is in series without a bypass diode: taking it out opens the loop"),
        ({"resistance ohm": 10}, "unchecked: bypass diode"),
        ({"resistance ohm": 50}, "unchecked: bypass diode"),
        ({"bypass diode": "yes"}, "unchecked: resistance ohm"),
        ({"bypass diode": "yes", "fixed drop V": 2}, "unchecked: resistance ohm"),
        ({}, "unchecked: resistance ohm or input ohm, bypass diode"),
        # One that reads volts is not in series.
        ({"input ohm": 1e6}, "not applicable"),
    ],
)  # fmt: skip
def test_an_indicator_in_series(kind: Row, expected: str) -> None:
    types = (TWO_WIRE, {"code": "IND", "kind": "indicator", **kind})
    assert comes_to("ELC12", PT, types, rows=(SHOWN,)) == expected


def test_a_circuit_without_an_indicator_is_not_asked() -> None:
    assert comes_to("ELC12", PT, (TWO_WIRE,)) == "not applicable"


def test_a_plant_may_know_another_knee() -> None:
    types = (TWO_WIRE, {"code": "IND", "kind": "indicator", "resistance ohm": 30, "bypass diode": "yes"})
    assert comes_to("ELC12", PT, types, rows=(SHOWN,), plant={"ELC12 knee V": 0.6}) == "clear"
    assert comes_to("ELC12", PT, types, rows=(SHOWN,), plant={}).startswith("finding")


def test_two_indicators_are_two_parts() -> None:
    types = (TWO_WIRE, {"code": "IND", "kind": "indicator", "resistance ohm": 50, "bypass diode": "yes"})
    loops = [{"number": "P-7", "circuit or tag": "PT-7, PI-7, PI-8", "range resistor": 250}]
    found = asked("ELC12", PT, types, rows=(SHOWN, {**SHOWN, "tag": "PI-8"}), loops=loops)
    assert [(each.subject, each.part) for each in found] == [("P-7", "PI-7"), ("P-7", "PI-8")]
    assert found[0].working == "20 mA x 50 ohm (type IND) = 1 V, the diode's knee is 0.5 V"
