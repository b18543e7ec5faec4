"""What a circuit leaves for its transmitter, and what an input takes."""

from collections.abc import Mapping
from typing import Any

import pytest

from tests.validation.rules.applied import counts
from tests.validation.rules.asked import outcome, said_of, values_of
from validation.audit import audit
from validation.example import example_plant
from validation.finding import Finding, Outcome
from validation.mend import found_after

Row = dict[str, Any]

# The case of the mistakes' table: 340 ohm of barrier, 250 ohm of receiver, 1 km of 1.5 mm2 at 20 degC.
TAG = {
    "tag": "PT-101",
    "device type": "T1",
    "signal": "4-20 mA HART",
    "wires": 2,
    "I/O type": "AI",
    "I/O address": "R1.1",
    "conductor size": "1.5 mm2",
}
LOOP = {
    "number": "P-101",
    "circuit or tag": "PT-101",
    "kind": "AI",
    "supply V min": 24.0,
    "supply V max": 26.0,
    "range resistor": 250.0,
    "barrier": "ZB",
    "cable length": 1000.0,
}
TRANSMITTER = {"code": "T1", "kind": "transmitter", "lift-off V": 10.5, "maximum V": 42.0}
BARRIER = {"code": "ZB", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": 340.0}
ISOLATOR = {"code": "ISO", "kind": "isolator", "zener or isolator": "isolator"}
AT_20 = {"ELC hot degC": 20, "ELC cold degC": 20}


def list_of(
    *,
    tag: Row | None = None,
    loop: Row | None = None,
    transmitter: Row | None = None,
    barrier: Row | None = None,
    more: tuple[Row, ...] = (),
    rows: tuple[Row, ...] = (),
    plant: Mapping[str, Any] = AT_20,
    **sheets: Any,
) -> dict[str, Any]:
    """Return a small plant with one circuit; what is given replaces or adds, None takes away."""
    made: dict[str, Any] = {
        "instruments": [_with(TAG, tag), *rows],
        "loops": [_with(LOOP, loop)],
        "types": [_with(TRANSMITTER, transmitter), _with(BARRIER, barrier), *more],
        "plant": dict(plant),
        **sheets,
    }
    return {name: value for name, value in made.items() if value}


def _with(row: Row, changed: Row | None) -> Row:
    return {title: value for title, value in {**row, **(changed or {})}.items() if value is not None}


def asked(code: str, **changed: Any) -> list[Finding]:
    made = list_of(**changed)
    return audit(example_plant(made.pop("instruments"), **made), codes=[code], raise_errors=True).findings


def comes_to(code: str, **changed: Any) -> str:
    """Return the outcome on the one circuit, with the blanks or the assumptions."""
    made = list_of(**changed)
    result = audit(example_plant(made.pop("instruments"), **made), codes=[code], raise_errors=True)
    coverage = result.coverage[code]
    (outcome,) = [each for each in Outcome if coverage.count(each)]
    if coverage.because:
        return f"{outcome.value}: {', '.join(coverage.because)}"
    return f"{outcome.value}, assumed: {'; '.join(coverage.assumed)}" if coverage.assumed else outcome.value


def left_after(code: str, **changed: Any) -> list[str]:
    """Apply each fix that is a value, alone, and return those after which the rule still finds or reviews."""
    made = list_of(**changed)
    plant = example_plant(made.pop("instruments"), **made)
    left: list[str] = []
    for finding in audit(plant, codes=[code], raise_errors=True).findings:
        assert any(fix.change for fix in finding.fixes)
        left.extend(
            fix.text
            for fix in finding.fixes
            if fix.change and code in {each.rule for each in found_after(plant, finding, fix)}
        )
    return left


# ------------------------------------------------------------------------------------------------------------ ELC01


def test_the_check_current_is_that_of_a_failure_and_not_20_ma() -> None:
    (finding,) = asked("ELC01")
    assert finding.subject == "P-101"
    assert finding.message == "PT-101 gets 10.488 V at 22 mA, its lift-off is 10.5 V: short by 0.012 V"
    # The sum, then each term at the check current, with where it stands, at 20 mA and at 4 mA.
    assert finding.working == (
        "24.0 V - 22 mA x 614.2 ohm = 10.488 V at the terminals, 10.5 V needed, short by 0.012 V;"
        " at 22 mA: supply 24 V (lowest, loop list) - barrier 22 mA x 340 ohm = 7.48 V (type ZB)"
        " - receiver 22 mA x 250 ohm = 5.5 V (loop list) - cable 22 mA x 24.2 ohm = 0.532 V (2 x 1000 m, loop list,"
        " x 12.1 ohm/km, IEC 60228 for 1.5 mm2, x 1.0000 at 20 degC): 10.488 V left;"
        " at 20 mA: supply 24 V - barrier 20 mA x 340 ohm = 6.8 V - receiver 20 mA x 250 ohm = 5 V"
        " - cable 20 mA x 24.2 ohm = 0.484 V: 11.716 V left;"
        " at 4 mA: supply 24 V - barrier 4 mA x 340 ohm = 1.36 V - receiver 4 mA x 250 ohm = 1 V"
        " - cable 4 mA x 24.2 ohm = 0.097 V: 21.543 V left"
    )
    assert (finding.found, finding.wanted, finding.off_by) == (
        "10.488 V at 22 mA, 11.716 V at 20 mA",
        "at least 10.5 V",
        "0.012 V",
    )
    assert finding.fields == ("lift-off V",)
    assert finding.assumed == ()
    assert finding.outcome is Outcome.FINDING
    assert {f"{cell.sheet} {cell.address}" for cell in finding.cells} == {
        "Device types C2",  # lift-off
        "Device types F3",  # the barrier's resistance
        "Loops D2",  # supply
        "Loops E2",
        "Loops F2",  # receiver
        "Loops H2",  # cable length
    }


@pytest.mark.parametrize(
    ("changed", "message"),
    [
        # M1 and M2: out and back, and hot.
        ({"loop": {"cable length": 970.0}}, None),
        ({"loop": {"cable length": 970.0}, "plant": {}},
         "PT-101 gets 10.402 V at 22 mA, its lift-off is 10.5 V: short by 0.098 V"),
        ({"plant": {"ELC hot degC": 70}}, "PT-101 gets 10.383 V at 22 mA, its lift-off is 10.5 V: short by 0.117 V"),
        # M4: the lowest supply.
        ({"loop": {"supply V min": 22.8}}, "PT-101 gets 9.288 V at 22 mA, its lift-off is 10.5 V: short by 1.212 V"),
        # Exactly enough, and one millivolt less.
        ({"transmitter": {"lift-off V": 10.4876}}, None),
        ({"transmitter": {"lift-off V": 10.4886}},
         "PT-101 gets 10.488 V at 22 mA, its lift-off is 10.489 V: short by 0.001 V"),
        # A shortfall too small for three decimals is shown with as many as it takes.
        ({"transmitter": {"lift-off V": 10.48765}},
         "PT-101 gets 10.4876 V at 22 mA, its lift-off is 10.4877 V: short by 0.0001 V"),
        # The current: the type's own, the plant's, that of a signal that fails low.
        ({"transmitter": {"high-alarm mA": 21.75}}, None),
        ({"transmitter": {"high-alarm mA": 23.0}},
         "PT-101 gets 9.873 V at 23 mA, its lift-off is 10.5 V: short by 0.627 V"),
        ({"plant": {**AT_20, "ELC high alarm mA": 21.5}}, None),
        ({"tag": {"failure direction": "high"}},
         "PT-101 gets 10.488 V at 22 mA, its lift-off is 10.5 V: short by 0.012 V"),
        ({"tag": {"failure direction": "low"}}, None),
        ({"tag": {"failure direction": "low"}, "transmitter": {"lift-off V": 11.5, "high-alarm mA": 23.0}},
         "PT-101 gets 11.409 V at 20.5 mA, its lift-off is 11.5 V: short by 0.091 V"),
        ({"tag": {"failure direction": "low"}, "transmitter": {"lift-off V": 11.2},
          "plant": {**AT_20, "ELC low failure mA": 21}},
         "PT-101 gets 11.102 V at 21 mA, its lift-off is 11.2 V: short by 0.098 V"),
        # What it needs at high alarm, where that is stated.
        ({"transmitter": {"lift-off V at high alarm": 10.0}}, None),
        ({"transmitter": {"lift-off V at high alarm": 10.6}},
         "PT-101 gets 10.488 V at 22 mA, its lift-off is 10.6 V: short by 0.112 V"),
        ({"tag": {"failure direction": "low"}, "transmitter": {"lift-off V at high alarm": 12.0}}, None),
        # Drops that do not grow with the current.
        ({"barrier": {"resistance ohm": 300.0, "fixed drop V": 0.9}},
         "PT-101 gets 10.468 V at 22 mA, its lift-off is 10.5 V: short by 0.032 V"),
        ({"barrier": {"resistance ohm": None, "fixed drop V": 7.0}}, None),
        ({"barrier": {"resistance ohm": None, "fixed drop V": 8.0}},
         "PT-101 gets 9.968 V at 22 mA, its lift-off is 10.5 V: short by 0.532 V"),
        # No barrier at all.
        ({"loop": {"barrier": None}}, None),
        ({"loop": {"barrier": None, "supply V min": 16.0}},
         "PT-101 gets 9.968 V at 22 mA, its lift-off is 10.5 V: short by 0.532 V"),
    ],
)  # fmt: skip
def test_the_figures_decide(changed: dict[str, Any], message: str | None) -> None:
    assert [each.message for each in asked("ELC01", **changed)] == ([] if message is None else [message])


@pytest.mark.parametrize(
    ("cable", "volts"),
    [
        # The standard's maximum for the size on the row, of the class and plating of the type.
        ({}, "10.488 V"),
        ({"conductor size": "1.5 mm2", "class": "5"}, "10.435 V"),
        ({"conductor size": "1.5 mm2", "tinned": "yes"}, "10.483 V"),
        # The type's own figure, of one conductor or of the pair.
        ({"conductor size": "1.5 mm2", "ohm per km": 12.5}, "10.47 V"),
        ({"conductor size": "1.5 mm2", "ohm per km": 24.2, "per conductor or per loop": "loop"}, "10.488 V"),
        ({"ohm per km": 13.0}, "10.448 V"),
        ({"conductor size": "16 AWG"}, "10.429 V"),
    ],
)
def test_the_cable_is_a_resistance(cable: Row, volts: str) -> None:
    changed: dict[str, Any] = {"tag": {"conductor size": None, "cable type": "CT"}}
    if not cable:
        changed = {}
    (finding,) = asked("ELC01", **changed, cable_types=[{"code": "CT", **cable}] if cable else None)
    assert finding.values["volts"] == volts


def test_the_size_of_the_row_comes_before_that_of_its_cable_type() -> None:
    types = [{"code": "CT", "conductor size": "0.5 mm2"}]
    (thin,) = asked("ELC01", tag={"conductor size": None, "cable type": "CT"}, cable_types=types)
    (own,) = asked("ELC01", tag={"conductor size": "1.5 mm2", "cable type": "CT"}, cable_types=types)
    assert (thin.values["volts"], own.values["volts"]) == ("9.436 V", "10.488 V")
    # A type whose name is a size needs no list of types.
    (named,) = asked("ELC01", tag={"conductor size": None, "cable type": "1x2x1.5 mm2"})
    assert named.values["volts"] == "10.488 V"


def test_receivers_that_read_volts_lie_across_the_range_resistor() -> None:
    card = {"code": "AI8", "kind": "card", "input ohm": 10000.0}
    changed: dict[str, Any] = {"loop": {"card": "AI8", "supply V min": 23.8}, "more": (card,)}
    # 250 ohm with 10 kohm across it are 243.902 ohm.
    (finding,) = asked("ELC01", **changed)
    assert finding.working.partition("; ")[0] == (
        "23.8 V - 22 mA x 608.102 ohm = 10.422 V at the terminals, 10.5 V needed, short by 0.078 V"
    )
    # Another range resistor in the catalogue than in the loop is no second one.
    (finding,) = asked("ELC01", **{**changed, "more": ({**card, "input ohm": 100.0},)})
    assert finding.values["volts"] == "10.288 V"


@pytest.mark.parametrize(
    ("changed", "expected"),
    [
        ({"loop": {"cable length": 900.0}}, "clear"),
        # A blank, named; never clear.
        ({"transmitter": {"lift-off V": None}}, "unchecked: lift-off V"),
        ({"tag": {"device type": None}}, "unchecked: lift-off V"),
        ({"loop": {"supply V min": None, "supply V max": None}}, "unchecked: supply V min"),
        ({"loop": {"cable length": None}}, "unchecked: cable length"),
        ({"tag": {"conductor size": None}}, "unchecked: conductor size"),
        ({"tag": {"wires": None}}, "unchecked: wires"),
        ({"barrier": {"resistance ohm": None}}, "unchecked: resistance ohm of the barrier"),
        ({"loop": {"barrier": "ZC"}}, "unchecked: barrier"),
        # A size that the standard's table does not hold.
        ({"tag": {"conductor size": "1.3 mm2"}}, "unchecked: conductor size"),
        # The default decides alone: for a person to say.
        ({"loop": {"range resistor": None}}, "review, assumed: receiver 250 ohm"),
        ({"loop": {"supply V min": None, "supply V max": None, "supply V nominal": 24.5}},
         "review, assumed: supply 24.5 V may be 5 % low"),
        # It passes with the default: listed.
        ({"loop": {"range resistor": None, "cable length": 900.0}}, "clear, assumed: receiver 250 ohm"),
        ({"loop": {"supply V min": None, "supply V nominal": 26.0}}, "clear, assumed: supply 26 V may be 5 % low"),
        ({"loop": {"range resistor": None, "supply V min": None, "supply V nominal": 26.0}},
         "clear, assumed: supply 26 V may be 5 % low; receiver 250 ohm"),
        # It fails even with the kindest value: found, whatever is blank.
        ({"loop": {"range resistor": None, "supply V min": 18.0}}, "finding"),
        ({"loop": {"supply V min": None, "supply V nominal": 24.0}}, "finding"),
        ({"loop": {"supply V min": 20.0, "cable length": None}}, "finding"),
        ({"loop": {"supply V min": 20.0}, "tag": {"conductor size": None}}, "finding"),
        ({"loop": {"supply V min": None, "supply V max": 20.0}}, "finding"),
        ({"loop": {"supply V min": None, "supply V max": 30.0}}, "unchecked: supply V min"),
        # What is not a two-wire transmitter's circuit.
        ({"tag": {"wires": 4}}, "not applicable"),
        ({"tag": {"wires": 3}}, "not applicable"),
        ({"tag": {"signal": "Pt100", "I/O type": "RTD"}, "loop": {"kind": "RTD"}}, "not applicable"),
        ({"tag": {"signal": "Profibus PA"}}, "not applicable"),
        ({"tag": {"signal": "0-10 V"}}, "not applicable"),
        ({"tag": {"wires": None, "power supply": "230 VAC"}}, "not applicable"),
        # The wires where only the words of the supply or the signal say.
        ({"tag": {"wires": None, "power supply": "loop"}, "loop": {"cable length": 900.0}}, "clear"),
        ({"tag": {"wires": None, "signal": "4-20 mA, 2-wire"}, "loop": {"cable length": 900.0}}, "clear"),
        ({"tag": {"wires": None, "power supply": "24 VDC"}}, "unchecked: wires"),
        ({"tag": {"wires": None}, "transmitter": {"wires": 2}, "loop": {"cable length": 900.0}}, "clear"),
    ],
)  # fmt: skip
def test_blanks_and_defaults(changed: dict[str, Any], expected: str) -> None:
    assert comes_to("ELC01", **changed) == expected


def test_a_review_shows_the_default_and_a_finding_the_kindest() -> None:
    (review,) = asked("ELC01", loop={"range resistor": None})
    assert said_of(review) == "review: PT-101 gets 10.488 V at 22 mA, its lift-off is 10.5 V: short by 0.012 V"
    assert review.assumed == ("receiver 250 ohm",)
    (finding,) = asked("ELC01", loop={"range resistor": None, "supply V min": 18.0})
    assert finding.message == "PT-101 gets 9.988 V at 22 mA, its lift-off is 10.5 V: short by 0.512 V"
    assert finding.assumed == ()
    assert finding.found == "9.988 V at 22 mA, 10.716 V at 20 mA"


def test_a_plant_may_assume_another_receiver_and_tolerance() -> None:
    assert comes_to("ELC01", loop={"range resistor": None}, plant={**AT_20, "ELC receiver ohm": 100}) == (
        "clear, assumed: receiver 100 ohm"
    )
    nominal = {"supply V min": None, "supply V nominal": 26.0}
    assert comes_to("ELC01", loop=nominal, plant={**AT_20, "ELC supply tolerance %": 10}) == (
        "review, assumed: supply 26 V may be 10 % low"
    )


@pytest.mark.parametrize(
    ("supply", "expected"),
    [
        ("24 VDC", "finding"),  # 24 V is short by itself
        ("24.5 V DC", "review, assumed: supply 24.5 V may be 5 % low"),
        ("24 V DC +/-10 %", "finding"),
        ("25-27 VDC", "clear"),
        ("26 VDC \u00b15 %", "clear"),
        ("26 VDC -10/+20 %", "finding"),
        ("48 VDC", "clear, assumed: supply 48 V may be 5 % low"),
        # What a transmitter bears is not what it gets.
        ("10.5-42 V DC", "unchecked: supply V min"),
        ("loop", "unchecked: supply V min"),
        ("PSU-1", "clear, assumed: supply 26 V may be 5 % low"),
        ("PSU-2", "unchecked: supply V min"),
    ],
)
def test_the_supply_of_the_row(supply: str, expected: str) -> None:
    psu = ({"code": "P26", "kind": "power supply", "nominal V": 26.0},)
    rows = ({"tag": "PSU-1", "kind": "power supply", "device type": "P26"}, {"tag": "PSU-2", "kind": "power supply"})
    blank = {"supply V min": None, "supply V max": None}
    assert comes_to("ELC01", tag={"power supply": supply}, loop=blank, more=psu, rows=rows) == expected


def test_the_supply_of_the_card() -> None:
    card = {"code": "AI8", "kind": "card", "nominal V": 26.0}
    loop = {"card": "AI8", "supply V min": None, "supply V max": None}
    tag = {"power supply": "loop"}
    assert comes_to("ELC01", tag=tag, loop=loop, more=(card,)) == "clear, assumed: supply 26 V may be 5 % low"
    assert comes_to("ELC01", tag=tag, loop=loop, more=({**card, "source or sink": "sink"},)) == (
        "unchecked: supply V min"
    )
    # What the card puts in series counts, and says what the receiver is.
    loud = {**card, "resistance ohm": 300.0}
    (review,) = asked("ELC01", tag=tag, loop={**loop, "range resistor": None}, more=(loud,))
    assert review.working.partition("; ")[0] == (
        "24.7 V - 22 mA x 664.2 ohm = 10.088 V at the terminals, 10.5 V needed, short by 0.412 V"
    )


# --------------------------------------------------------------------------------------------------- isolators (M8)


@pytest.mark.parametrize(
    ("isolator", "tag", "expected"),
    [
        # The volts count at the current for which they are stated.
        ({"volts available at 20 mA": 15.0}, {}, "unchecked: volts available at high alarm"),
        ({"volts available at 20 mA": 15.0, "volts available at high alarm": 14.0}, {}, "clear"),
        ({"volts available at 20 mA": 15.0, "volts available at high alarm": 14.0, "high-alarm mA": 22.0}, {}, "clear"),
        ({"volts available at 20 mA": 15.0, "volts available at high alarm": 14.0, "high-alarm mA": 21.0}, {},
         "unchecked: volts available at 22 mA"),
        ({"volts available at 20 mA": 15.0, "volts available at high alarm": 14.0}, {"failure direction": "low"},
         "unchecked: volts available at 20.5 mA"),
        ({"volts available at high alarm": 14.0, "high-alarm mA": 20.5}, {"failure direction": "low"}, "clear"),
        ({"volts available at high alarm": 12.0}, {}, "finding"),
        ({}, {}, "unchecked: volts available at high alarm"),
    ],
)  # fmt: skip
def test_an_isolator_is_a_source(isolator: Row, tag: Row, expected: str) -> None:
    changed: dict[str, Any] = {
        "loop": {"barrier": "ISO"},
        "tag": tag,
        "transmitter": {"lift-off V": 12.0},
        "more": ({**ISOLATOR, **isolator},),
    }
    assert comes_to("ELC01", **changed) == expected


def test_the_receiver_does_not_count_on_the_field_side_of_an_isolator() -> None:
    plant = {**AT_20, "ELC high alarm mA": 20}
    isolator = {**ISOLATOR, "volts available at 20 mA": 15.0}
    changed: dict[str, Any] = {"loop": {"barrier": "ISO"}, "more": (isolator,), "plant": plant}
    assert comes_to("ELC01", transmitter={"lift-off V": 12.0}, **changed) == "clear"
    (finding,) = asked("ELC01", transmitter={"lift-off V": 14.6}, **changed)
    assert finding.working.partition("; ")[0] == (
        "15.0 V - 20 mA x 24.2 ohm = 14.516 V at the terminals, 14.6 V needed, short by 0.084 V"
    )
    # Nobody raises the supply of an isolator.
    assert [fix.text for fix in finding.fixes] == ["cable no longer than 826 m", "conductor of at least 2.5 mm2"]


def test_a_card_that_states_its_volts_is_a_source_too() -> None:
    card = {"code": "AI8", "kind": "card", "volts available at high alarm": 18.0}
    (finding,) = asked("ELC01", loop={"card": "AI8"}, transmitter={"lift-off V": 10.5}, more=(card,))
    # Behind its terminals lies its own receiver; the zener barrier is in front of them.
    assert finding.working.partition("; ")[0] == (
        "18.0 V - 22 mA x 364.2 ohm = 9.988 V at the terminals, 10.5 V needed, short by 0.512 V"
    )


# --------------------------------------------------------------------------------------------- what lies in series


@pytest.mark.parametrize(
    ("indicator", "volts"),
    [
        ({"resistance ohm": 10.0}, "10.268 V"),
        # M7: with the indicator out its diode carries the loop.
        ({"resistance ohm": 10.0, "bypass diode": "yes"}, "9.788 V"),
        ({"resistance ohm": 50.0, "bypass diode": "yes"}, "9.388 V"),
        ({"fixed drop V": 1.5}, "8.988 V"),
    ],
)
def test_an_indicator_in_series_takes_its_volts(indicator: Row, volts: str) -> None:
    rows = ({"tag": "PI-101", "kind": "indicator", "location": "field", "device type": "IND", "signal": "4-20 mA"},)
    (finding,) = asked("ELC01", rows=rows, more=({"code": "IND", "kind": "indicator", **indicator},))
    assert finding.values["volts"] == volts


def test_an_indicator_that_states_nothing_leaves_it_unchecked() -> None:
    rows = ({"tag": "PI-101", "kind": "indicator", "location": "field", "signal": "4-20 mA"},)
    changed: dict[str, Any] = {"rows": rows, "loop": {"cable length": 900.0}}
    assert comes_to("ELC01", **changed) == "unchecked: resistance ohm or fixed drop V of PI-101"
    # Without it the volts are short already.
    assert comes_to("ELC01", rows=rows) == "finding"


# ------------------------------------------------------------------------------------------------------- what mends


def test_each_remedy_alone_is_enough_and_one_step_less_is_not() -> None:
    (finding,) = asked("ELC01")
    assert [(fix.text, dict(fix.change), fix.sheet, fix.subject) for fix in finding.fixes] == [
        ("cable no longer than 976 m", {"cable length": "976"}, "Loops", "PT-101"),
        ("conductor of at least 2.5 mm2", {"conductor size": "2.5 mm2"}, "Instruments", "PT-101"),
        ("supply of at least 24.1 V at its lowest", {"supply V min": "24.1"}, "Loops", "PT-101"),
    ]
    assert left_after("ELC01") == []
    assert comes_to("ELC01", loop={"cable length": 976.0}) == "clear"
    assert comes_to("ELC01", loop={"cable length": 977.0}) == "finding"
    assert comes_to("ELC01", tag={"conductor size": "2.5 mm2"}) == "clear"
    assert comes_to("ELC01", loop={"supply V min": 24.1}) == "clear"


@pytest.mark.parametrize(
    ("changed", "texts"),
    [
        # The length of the row, the supply of the row, a nominal supply.
        ({"loop": {"cable length": None}, "tag": {"cable length": 1000.0}},
         ["cable no longer than 976 m", "conductor of at least 2.5 mm2", "supply of at least 24.1 V at its lowest"]),
        ({"loop": {"supply V min": None, "supply V max": None}, "tag": {"power supply": "24 VDC"}},
         ["supply of at least 24.1 V at its lowest"]),
        ({"loop": {"supply V min": None, "supply V max": None, "supply V nominal": 24.0}},
         ["supply of at least 24.1 V at its lowest"]),
        # Short with no cable at all: no length and no conductor mends it.
        ({"loop": {"supply V min": 20.0}}, ["supply of at least 24.1 V at its lowest"]),
        # The receiver is assumed: the remedy holds with the default.
        ({"loop": {"range resistor": None}},
         ["cable no longer than 976 m", "conductor of at least 2.5 mm2", "supply of at least 24.1 V at its lowest"]),
    ],
)  # fmt: skip
def test_what_would_mend_a_short_supply(changed: dict[str, Any], texts: list[str]) -> None:
    (finding,) = asked("ELC01", **changed)
    assert [fix.text for fix in finding.fixes] == texts
    assert left_after("ELC01", **changed) == []


def test_a_nominal_supply_is_raised_as_such() -> None:
    (finding,) = asked("ELC01", loop={"supply V min": None, "supply V max": None}, tag={"power supply": "24 VDC"})
    assert values_of(finding.fixes) == [{"power supply": "25.4 V DC"}]
    (finding,) = asked("ELC01", loop={"supply V min": None, "supply V max": None, "supply V nominal": 24.0})
    assert values_of(finding.fixes) == [{"supply V nominal": "25.4"}]


def test_what_a_fix_would_change_elsewhere_is_left_to_a_person() -> None:
    # A cable type is shared, a row of the loop list with the number alone is all its circuits'.
    (finding,) = asked(
        "ELC01",
        tag={"conductor size": None, "cable type": "CT"},
        cable_types=[{"code": "CT", "conductor size": "1.5 mm2"}],
    )
    assert values_of(finding.fixes) == [{"cable length": "976"}, {"supply V min": "24.1"}]
    loops = [{**LOOP, "circuit or tag": None}, {**LOOP, "circuit or tag": None, "kind": "AO"}]
    (finding,) = asked("ELC01", loops=[{k: v for k, v in row.items() if v is not None} for row in loops])
    assert values_of(finding.fixes) == [{"conductor size": "2.5 mm2"}]


# ------------------------------------------------------------------------------------------------------------ ELC02

M5 = {"barrier": None, "cable length": None, "supply V max": 36.0}


def test_the_highest_volts_stand_at_the_lowest_current() -> None:
    (finding,) = asked("ELC02", loop=M5, transmitter={"maximum V": 32.0})
    assert finding.message == "PT-101 can see 35.1 V, its maximum is 32 V: over by 3.1 V"
    assert finding.working == ("36.0 V - 3.6 mA x 250 ohm = 35.1 V at the terminals, 32.0 V allowed, over by 3.1 V")
    assert (finding.found, finding.wanted, finding.off_by) == ("35.1 V", "at most 32 V", "3.1 V")
    assert finding.fields == ("maximum V",)
    assert [(fix.text, dict(fix.change), fix.sheet) for fix in finding.fixes] == [
        ("supply of at most 32.9 V at its highest", {"supply V max": "32.9"}, "Loops")
    ]
    assert left_after("ELC02", loop=M5, transmitter={"maximum V": 32.0}) == []


@pytest.mark.parametrize(
    ("loop", "maximum", "expected"),
    [
        ({"supply V max": 32.9}, 32.0, "clear"),
        ({"supply V max": 33.0}, 32.0, "finding"),
        # Exactly its maximum.
        ({}, 35.1, "clear"),
        ({}, 35.099, "finding"),
        # A cable of 24.2 ohm takes 0.087 V.
        ({"cable length": 1000.0}, 35.02, "clear"),
        ({"cable length": 1000.0}, 35.01, "finding"),
        # So does a barrier.
        ({"barrier": "ZB"}, 33.9, "clear"),
        ({"barrier": "ZB"}, 33.0, "finding"),
        # Nominal: 5 % more is assumed.
        ({"supply V max": None, "supply V min": None, "supply V nominal": 36.0}, 40.0,
         "clear, assumed: supply 36 V may be 5 % high"),
        ({"supply V max": None, "supply V min": None, "supply V nominal": 36.0}, 36.0,
         "review, assumed: supply 36 V may be 5 % high"),
        ({"supply V max": None, "supply V min": None, "supply V nominal": 36.0}, 34.0, "finding"),
        # No receiver is stated: 250 ohm are assumed; without any the volts would be more.
        ({"range resistor": None}, 35.1, "clear, assumed: receiver 250 ohm"),
        ({"range resistor": None}, 35.0, "finding, assumed: receiver 250 ohm"),
        # The lowest supply is over it by itself.
        ({"supply V max": None, "supply V min": 36.0}, 32.0, "finding"),
        ({"supply V max": None, "supply V min": 24.0}, 32.0, "unchecked: supply V max"),
        ({"supply V max": None, "supply V min": None}, 32.0, "unchecked: supply V max"),
        ({}, None, "unchecked: maximum V"),
        ({"barrier": "ZC"}, 32.0, "unchecked: barrier"),
    ],
)  # fmt: skip
def test_volts_that_a_transmitter_bears(loop: Row, maximum: float | None, expected: str) -> None:
    assert comes_to("ELC02", loop={**M5, **loop}, transmitter={"maximum V": maximum}) == expected


def test_what_lies_in_series_unknown_never_makes_a_finding_and_need_not_be_known_to_pass() -> None:
    barrier = {"resistance ohm": None}
    assert comes_to("ELC02", loop={**M5, "barrier": "ZB"}, barrier=barrier, transmitter={"maximum V": 32.0}) == (
        "unchecked: resistance ohm of the barrier"
    )
    assert comes_to("ELC02", loop={**M5, "barrier": "ZB"}, barrier=barrier, transmitter={"maximum V": 42.0}) == "clear"


def test_a_cable_is_coldest_where_its_area_is() -> None:
    loop = {**M5, "barrier": None, "cable length": 3000.0, "range resistor": 0.0}
    areas = [{"code": "A", "zone": "2", "ambient min": -60.0, "ambient max": 40.0}]
    changed: dict[str, Any] = {"loop": loop, "transmitter": {"maximum V": 30.0}, "plant": {}}
    # 72.6 ohm at 20 degC are 61.187 ohm at -20 degC and 49.774 ohm at -60 degC.
    assert asked("ELC02", **changed)[0].working.startswith("36.0 V - 3.6 mA x 61.187 ohm = 35.78 V")
    assert asked("ELC02", tag={"area": "A"}, areas=areas, **changed)[0].working.startswith(
        "36.0 V - 3.6 mA x 49.775 ohm = 35.821 V"
    )
    assert asked("ELC02", **{**changed, "plant": {"ELC cold degC": 20}})[0].working.startswith(
        "36.0 V - 3.6 mA x 72.6 ohm = 35.739 V"
    )


@pytest.mark.parametrize(
    ("isolator", "maximum", "expected"),
    [
        ({"volts available at 20 mA": 15.0, "Uo V": 28.0}, 30.0, "clear"),
        ({"volts available at 20 mA": 15.0, "Uo V": 28.0}, 28.0, "clear"),
        ({"volts available at 20 mA": 15.0, "Uo V": 28.0}, 24.0, "unchecked: volts available at 3.6 mA"),
        ({"volts available at 20 mA": 15.0}, 30.0, "unchecked: Uo V"),
        # What it gives at 20 mA it gives at 3.6 mA too.
        ({"volts available at 20 mA": 26.0, "Uo V": 28.0}, 24.0, "finding"),
    ],
)
def test_an_isolator_gives_no_more_than_its_uo(isolator: Row, maximum: float, expected: str) -> None:
    changed: dict[str, Any] = {
        "loop": {"barrier": "ISO"},
        "transmitter": {"maximum V": maximum},
        "more": ({**ISOLATOR, **isolator},),
    }
    assert comes_to("ELC02", **changed) == expected


def test_a_nominal_supply_is_lowered_as_such() -> None:
    changed: dict[str, Any] = {
        "loop": {**M5, "supply V max": None, "supply V min": None},
        "tag": {"power supply": "48 VDC"},
        "transmitter": {"maximum V": 42.0},
    }
    (finding,) = asked("ELC02", **changed)
    assert finding.message == "PT-101 can see 47.1 V, its maximum is 42 V: over by 5.1 V"
    assert values_of(finding.fixes) == [{"power supply": "40.8 V DC"}]
    assert left_after("ELC02", **changed) == []


# ------------------------------------------------------------------------------------------------------------ ELC16


@pytest.mark.parametrize(
    ("signal", "io", "fits"),
    [
        ("4-20 mA", "AI", True),
        ("4-20 mA", "DI", False),
        ("4-20mA HART", "AI-HART", True),
        ("4-20 mA", "SAI", True),
        ("4-20 mA", "Analogue input", True),
        ("4-20 mA", "Analogeingang", True),
        ("4-20 mA", "AO", False),  # a transmitter sends
        ("4-20 mA", "RTD", False),
        ("4-20 mA", "AI/DI", True),
        ("0-20 mA", "AI", True),
        ("1-5 V", "AI", True),
        ("1-5 V", "DI", False),
        ("Pt100", "RTD", True),
        ("Pt100", "AI", True),
        ("Pt100", "AI (RTD)", True),
        ("Pt100", "TC", False),
        ("Pt100", "DI", False),
        ("TC type K", "TC", True),
        ("TC type K", "T/C", True),
        ("TC type K", "RTD", False),
        ("4-20 mA", "RTD (AI)", False),
        ("VFC", "AI", False),
        ("VFC", "DI", True),
        ("pulse", "DI", True),
        ("pulse", "PI", True),
        ("pulse", "AI", False),
        ("4-20 mA + relay", "DI", True),
        ("4-20 mA + relay", "AI", True),
        # A bus carries what it carries.
        ("Profibus PA", "AI", True),
        ("WirelessHART", "AI", True),
    ],
)
def test_a_transmitters_signal_fits_its_channel(signal: str, io: str, fits: bool) -> None:
    assert outcome("ELC16", [{"tag": "XT-1", "kind": "transmitter", "signal": signal, "I/O type": io}]) == (
        "clear" if fits else "finding"
    )


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "FY-1", "kind": "positioner", "signal": "4-20 mA", "I/O type": "AO"}, "clear"),
        ({"tag": "FY-1", "kind": "positioner", "signal": "4-20 mA", "I/O type": "AI"}, "finding"),
        # A valve may send its position.
        ({"tag": "FV-1", "kind": "control valve", "signal": "4-20 mA", "I/O type": "AI"}, "clear"),
        ({"tag": "XV-1", "kind": "on/off valve", "signal": "24 VDC", "I/O type": "DI/DO"}, "clear"),
        ({"tag": "XV-1", "kind": "on/off valve", "signal": "24 VDC", "I/O type": "AO"}, "finding"),
        ({"tag": "XY-1", "kind": "solenoid", "signal": "24 VDC", "I/O type": "DO"}, "clear"),
        ({"tag": "XY-1", "kind": "solenoid", "signal": "24 VDC", "I/O type": "DI"}, "finding"),
        ({"tag": "ZSO-1", "signal": "NAMUR", "I/O type": "DI"}, "clear"),
        ({"tag": "ZSO-1", "signal": "NAMUR", "I/O type": "DO"}, "finding"),
        ({"tag": "HS-1", "kind": "hand switch", "signal": "contact", "I/O type": "DI"}, "clear"),
        ({"tag": "HS-1", "kind": "hand switch", "signal": "contact", "I/O type": "DO"}, "finding"),
        # A lamp or a sounder may be lit from elsewhere and only be told.
        ({"tag": "XL-1", "kind": "lamp", "signal": "VFC", "I/O type": "DI"}, "clear"),
        # A pump's running contact is a signal of its own.
        ({"tag": "P-3601A", "signal": "VFC", "I/O type": "DI"}, "clear"),
        ({"tag": "P-3601A", "signal": "4-20 mA", "I/O type": "DI"}, "finding"),
        # Without a signal the kind says which way it goes.
        ({"tag": "ZSO-1", "kind": "limit switch", "I/O type": "DO"}, "finding"),
        ({"tag": "ZSO-1", "kind": "limit switch", "I/O type": "DI"}, "unchecked: signal"),
        ({"tag": "ZSO-1", "kind": "limit switch", "I/O type": "DI/DO"}, "unchecked: signal"),
        ({"tag": "ZSO-1", "kind": "limit switch", "I/O type": "DO", "signal": "Modbus"}, "clear"),
        ({"tag": "PT-1", "kind": "transmitter", "I/O type": "AO"}, "finding"),
        ({"tag": "XY-1", "kind": "solenoid", "I/O type": "DI"}, "finding"),
        ({"tag": "XY-1", "kind": "solenoid", "I/O type": "DO"}, "unchecked: signal"),
        ({"tag": "FV-1", "kind": "control valve", "I/O type": "AI"}, "unchecked: signal"),
        ({"tag": "HS-1", "kind": "hand switch", "I/O type": "DO"}, "unchecked: signal"),
        # Blanks, and words that say nothing here.
        ({"tag": "PT-1", "signal": "4-20 mA"}, "unchecked: I/O type"),
        ({"tag": "PT-1", "I/O type": "AI"}, "unchecked: signal"),
        ({"tag": "PT-1", "service": "x"}, "unchecked: signal, I/O type"),
        ({"tag": "PT-1", "signal": "4-20 mA", "I/O type": "special"}, "unchecked: I/O type"),
        ({"tag": "PT-1", "signal": "proprietary", "I/O type": "AI"}, "unchecked: signal"),
        ({"tag": "PT-1", "signal": "4-20 mA", "I/O type": "soft"}, "not applicable"),
        ({"tag": "PT-1", "signal": "4-20 mA", "I/O type": "Modbus"}, "not applicable"),
        ({"tag": "PG-1", "service": "x"}, "not applicable"),
        ({"tag": "TE-1", "signal": "Pt100"}, "not applicable"),
        ({"tag": "TE-1", "signal": "Pt100", "I/O address": "R1.3"}, "unchecked: I/O type"),
    ],
)  # fmt: skip
def test_which_kind_is_on_which_channel(row: Row, expected: str) -> None:
    assert outcome("ELC16", [row]) == expected


@pytest.mark.parametrize(
    ("card", "signal", "expected"),
    [
        ("4-20 mA HART", "4-20 mA", "clear"),
        ("4-20 mA HART", "Pt100", "finding"),
        ("4-20 mA", "1-5 V", "finding"),
        ("Pt100", "TC type K", "finding"),
        ("RTD / TC / mV", "TC type K", "clear"),
        ("AI", "Pt100", "clear"),
        ("AI", "VFC", "finding"),
        ("DI 24 VDC", "VFC", "clear"),
        ("24 VDC", "NAMUR", "clear"),
        ("AO 4-20 mA", "4-20 mA", "finding"),
        ("special", "4-20 mA", "unchecked: signal of the card"),
        ("Modbus", "4-20 mA", "clear"),
    ],
)
def test_the_card_takes_the_signal(card: str, signal: str, expected: str) -> None:
    types = [{"code": "C1", "kind": "card", "signal": card}, {"code": "C2", "kind": "card", "signal": "4-20 mA"}]
    row = {"tag": "XT-1", "kind": "transmitter", "signal": signal, "card": "C1"}
    assert outcome("ELC16", [row], types=types) == expected


def test_the_message_names_what_does_not_fit_and_the_fix_what_would() -> None:
    row = {"tag": "LIT-1", "kind": "transmitter", "signal": "4-20 mA", "I/O type": "DI", "card": "C1"}
    made = {"types": [{"code": "C1", "kind": "card", "signal": "NAMUR"}]}
    found = audit(example_plant([row], **made), codes=["ELC16"], raise_errors=True).findings
    assert [(each.message, each.fields, [dict(fix.change) for fix in each.fixes]) for each in found] == [
        ("4-20 mA does not fit the I/O type DI", ("signal", "I/O type"), [{"I/O type": "AI"}]),
        ("4-20 mA does not fit the card C1 (NAMUR)", ("signal", "card"), []),
    ]
    plant = example_plant([row], **made)
    after = found_after(plant, found[0], found[0].fixes[0])
    assert [each.message for each in after if each.rule == "ELC16"] == ["4-20 mA does not fit the card C1 (NAMUR)"]


@pytest.mark.parametrize(
    ("row", "wanted"),
    [
        ({"tag": "FY-1", "kind": "positioner", "signal": "4-20 mA", "I/O type": "DO"}, "AO"),
        ({"tag": "LT-1", "signal": "4-20 mA", "I/O type": "DO"}, "AI"),
        ({"tag": "TE-1", "signal": "Pt100", "I/O type": "DI"}, "RTD"),
        ({"tag": "TE-1", "signal": "TC type K", "I/O type": "DI"}, "TC"),
        ({"tag": "LSH-1", "signal": "contact", "I/O type": "AI"}, "DI"),
        ({"tag": "XY-1", "kind": "solenoid", "signal": "24 VDC", "I/O type": "AI"}, "DO"),
    ],
)
def test_the_channel_that_would_fit(row: Row, wanted: str) -> None:
    (finding,) = audit(example_plant([row]), codes=["ELC16"], raise_errors=True).findings
    assert finding.wanted == wanted
    assert values_of(finding.fixes) == [{"I/O type": wanted}]


def test_each_signal_of_an_instrument_is_judged_alone() -> None:
    rows = [
        {"tag": "FIT-1", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "A1"},
        {"tag": "FIT-1", "signal": "pulse", "I/O type": "AI", "I/O address": "A2"},
    ]
    (finding,) = audit(example_plant(rows), codes=["ELC16"], raise_errors=True).findings
    assert (finding.subject, finding.part, finding.message) == ("FIT-1", "A2", "pulse does not fit the I/O type AI")
    # The type's signal is that of one of them, nobody says which.
    types = [{"code": "F", "kind": "transmitter", "signal": "4-20 mA"}]
    bare = [{**row, "device type": "F", "signal": ""} for row in rows]
    assert counts("ELC16", *({**row, "service": "x"} for row in bare), types=types) == {"unchecked": 1}


def test_what_is_not_live_has_no_signal_to_judge() -> None:
    row = {"tag": "PT-1", "signal": "4-20 mA", "I/O type": "DI", "status": "future"}
    assert counts("ELC16", row) == {"not applicable": 1}
    made = list_of(tag={"status": "spare"})
    result = audit(example_plant(made.pop("instruments"), **made), codes=["ELC01", "ELC02"], raise_errors=True)
    assert result.findings == []
