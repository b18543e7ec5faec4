"""What an Ex i circuit is made of: sources, items that break it, levels, earths, simple apparatus."""

from typing import Any

import pytest

from loops.plant import Plant, assemble
from tests.validation.rules.test_entity_parameters import (
    CABLES,
    DEVICE,
    ISOLATOR,
    SOURCE,
    TAG,
    Row,
    findings_of,
    plant_of,
    told,
)
from validation.audit import audit
from validation.example import example_plant
from validation.finding import Outcome
from validation.mend import mended
from validation.rules.intrinsic_safety import t4_power_mw

CARD: Row = {"code": "AI8", "kind": "card", "signal": "4-20 mA"}
# A second circuit with a barrier: the list does say which circuits have one.
OTHER: Row = {**TAG, "tag": "PT-900", "I/O address": "9", "loop": "P-900"}
ELEMENT: Row = {
    "tag": "TE-101", "kind": "element", "signal": "Pt100", "device type": "", "I/O type": "RTD",
    "simple apparatus": "yes", "cable type": "C1", "cable length": "100 m", "I/O address": "1", "barrier": "ZB",
    "area classification": "Zone 1 IIC T4",
}  # fmt: skip


def with_other(tag: Row, device: Row | None = None, source: Row | None = None, *more: Row, **sheets: Any) -> Plant:
    rows = [*sheets.pop("rows", ()), OTHER]
    return plant_of(tag, device, source, CARD, *more, rows=rows, **sheets)


def said_of_pt_101(code: str, plant: Plant) -> str:
    """Return what a rule says of the circuit of PT-101 alone."""
    result = audit(plant, codes=[code], raise_errors=True)
    found = [each for each in result.findings if each.subject.startswith(("P-101", "T-101", "L-101", "TE-101"))]
    if found:
        return "; ".join(f"{each.outcome.value}: {each.message}" for each in found)
    unchecked = [
        f"unchecked: {', '.join(fields)}"
        for fields, names in result.coverage[code].unchecked.items()
        for name in names
        if name.startswith(("P-101", "T-101", "L-101", "TE-101"))
    ]
    return "; ".join(unchecked) or "nothing"


# ----------------------------------------------------------------------------------------------------------- ISC01

NO_SOURCE = "PT-101: no Ex i source on the circuit (Ex ia IIC T4 Ga)"


@pytest.mark.parametrize(
    ("tag", "device", "source", "wanted"),
    [
        ({}, {}, {}, "nothing"),
        ({"barrier": "", "card": "AI8"}, {}, {}, f"finding: {NO_SOURCE}"),
        ({"barrier": ""}, {}, {}, f"finding: {NO_SOURCE}"),
        ({"barrier": "none"}, {}, {}, f"finding: {NO_SOURCE}"),
        ({"barrier": "TBA"}, {}, {}, "unchecked: barrier"),
        ({"barrier": "ZB-7"}, {}, {}, "unchecked: barrier"),
        ({"barrier": "", "area classification": ""}, {}, {}, "unchecked: area"),
        ({"barrier": "", "area classification": "safe"}, {}, {}, "nothing"),
        ({"barrier": "", "type of protection": "Ex d"}, {"Ex marking": "Ex db ia IIC T4 Gb"}, {}, "nothing"),
        ({"barrier": ""}, {"Ex marking": "Ex db IIC T4 Gb"}, {}, "nothing"),
        ({"barrier": ""}, {"Ex marking": "Ex db ia IIC T4 Gb"}, {},
         "review: PT-101: Ex db ia IIC T4 Gb, and no Ex i source on the circuit: by which of its protections is it"
         " used?"),
        ({}, {"Ex marking": "Ex db ia IIC T4 Gb"}, {}, "nothing"),
        # An item that is none of both breaks the circuit.
        ({}, {"Ex marking": "Ex db IIC T4 Gb"}, {},
         "finding: PT-101 is Ex db IIC T4 Gb, neither Ex i nor simple apparatus, on an Ex i circuit: ZB is an Ex i"
         " source"),
        ({}, {"Ex marking": "non-Ex"}, {},
         "finding: PT-101 is not marked Ex i, neither Ex i nor simple apparatus, on an Ex i circuit: ZB is an Ex i"
         " source"),
        ({}, {"Ex marking": ""}, {}, "unchecked: Ex marking"),
        ({}, {"Ex marking": "Ex thing"}, {}, "unchecked: Ex marking"),
        ({"device type": "X9"}, {}, {}, "unchecked: device type"),
        # An isolator of which nothing Ex is stated.
        ({}, {}, {"Ex marking": "", "Uo V": "", "Io mA": "", "Po mW": ""}, "unchecked: barrier"),
        ({}, {}, {"Ex marking": "non-Ex", "Uo V": "", "Io mA": "", "Po mW": ""}, f"finding: {NO_SOURCE}"),
    ],
)  # fmt: skip
def test_a_device_without_a_source_and_an_item_that_breaks_it(tag: Row, device: Row, source: Row, wanted: str) -> None:
    assert said_of_pt_101("ISC01", with_other(tag, device, source)) == wanted


INDICATOR: Row = {
    "tag": "PI-101", "kind": "indicator", "location": "field", "signal": "4-20 mA",
    "area classification": "Zone 1 IIC T4",
}  # fmt: skip
BREAKS = "neither Ex i nor simple apparatus, on an Ex i circuit: ZB is an Ex i source"


@pytest.mark.parametrize(
    ("indicator", "wanted"),
    [
        ({"Ex marking": "Ex ia IIC T4 Ga"}, "nothing"),
        ({"Ex marking": "Ex ec IIC T4 Gc"}, f"finding: PI-101 is Ex ec IIC T4 Gc, {BREAKS}"),
        # Not marked at all, it undoes what the transmitter relies on.
        ({}, f"finding: PI-101 is not marked Ex i, {BREAKS}"),
        ({"area classification": "safe"}, f"finding: PI-101 is not marked Ex i, {BREAKS}"),
        ({"location": "panel", "area classification": "safe"}, "nothing"),
        ({"location": "control room"}, "nothing"),
    ],
)
def test_one_item_that_is_not_intrinsically_safe_breaks_the_loop(indicator: Row, wanted: str) -> None:
    plant = with_other({}, rows=[{**INDICATOR, **indicator}])
    assert said_of_pt_101("ISC01", plant) == wanted


@pytest.mark.parametrize(
    ("element", "transmitter", "wanted"),
    [
        ({}, {}, "nothing"),
        ({"simple apparatus": ""}, {}, "unchecked: simple apparatus"),
        ({"simple apparatus": "", "Ex marking": "Ex db IIC T4 Gb"}, {},
         f"finding: TE-101 is Ex db IIC T4 Gb, {BREAKS}"),
        # A flameproof transmitter feeds its sensor: intrinsically safe only by an output that it is marked for.
        ({}, {"Ex marking": "Ex db IIC T4 Gb", "barrier": ""},
         "finding: TE-101: no Ex i source on the circuit (simple apparatus)"),
        ({}, {"Ex marking": "Ex db [ia Ga] IIC T4 Gb", "barrier": ""}, "nothing"),
        ({"simple apparatus": "", "Ex marking": "Ex db IIC T4 Gb"}, {"Ex marking": "Ex db IIC T4 Gb", "barrier": ""},
         "nothing"),
    ],
)  # fmt: skip
def test_an_element_belongs_to_its_transmitters_circuit(element: Row, transmitter: Row, wanted: str) -> None:
    te = {**ELEMENT, "I/O type": "", "I/O address": "", "barrier": "", "cable type": "", **element}
    plant = with_other({"tag": "TT-101", **transmitter}, rows=[te])
    assert said_of_pt_101("ISC01", plant) == wanted


@pytest.mark.parametrize(
    ("element", "wanted"),
    [
        ({}, "nothing"),
        ({"barrier": ""}, "finding: TE-101: no Ex i source on the circuit (simple apparatus)"),
        # What nobody has stated to be simple apparatus relies on nothing yet.
        ({"barrier": "", "simple apparatus": ""}, "nothing"),
        ({"simple apparatus": ""}, "unchecked: simple apparatus"),
        ({"barrier": "", "area classification": "safe"}, "nothing"),
        # Wired nowhere: found as such.
        ({"barrier": "", "I/O type": "", "I/O address": ""}, "unchecked: I/O address"),
    ],
)
def test_simple_apparatus_needs_a_source(element: Row, wanted: str) -> None:
    plant = with_other({**dict.fromkeys(TAG), **ELEMENT, **element})
    assert said_of_pt_101("ISC01", plant) == wanted


@pytest.mark.parametrize(
    ("marking", "more", "wanted"),
    [
        ("Class I Div 1 Groups A-D T4", {}, "unchecked: type of protection"),
        ("Class I Div 1 Groups A-D T4", {"type of protection": "explosionproof"}, "nothing"),
        ("Class I Div 1 Groups A-D T4", {"type of protection": "IS"},
         "finding: PT-101: no Ex i source on the circuit (Class I Div 1 Groups A-D T4)"),
        ("Class I Div 2 Groups A-D T4", {}, "nothing"),
        ("Class I Div 1 Groups A-D T4", {"type of protection": "IS", "nonincendive": "yes"},
         "review: PT-101: Class I Div 1 Groups A-D T4, and no Ex i source on the circuit: nonincendive wiring, which"
         " somebody has to judge"),
    ],
)  # fmt: skip
def test_divisions(marking: str, more: Row, wanted: str) -> None:
    tag = {"barrier": "", "area classification": "Cl I Div 2 Gr B T4", "Ex marking": marking, **more}
    assert said_of_pt_101("ISC01", with_other(tag)) == wanted


def test_a_nonincendive_item_on_an_ex_i_circuit_is_for_a_person() -> None:
    tag = {"area classification": "Cl I Div 2 Gr B T4", "nonincendive": "yes"}
    plant = with_other(tag, {"Ex marking": "Class I Div 2 Groups A-D T4"})
    assert said_of_pt_101("ISC01", plant).startswith("review: PT-101 is Class I Div 2 Groups A-D T4, neither Ex i")


def test_a_list_that_names_no_barriers_is_not_found_row_by_row() -> None:
    plant = plant_of({"barrier": ""}, rows=[{**OTHER, "barrier": ""}])
    assert told("ISC01", plant) == "unchecked: barrier"


UNMARKED = (
    "finding: TT-101 is not marked Ex i, neither Ex i nor simple apparatus, on an Ex i circuit: ZB is an Ex i source"
)


@pytest.mark.parametrize(
    ("row", "more", "wanted"),
    [
        ({}, {}, "unchecked: Ex marking"),
        # A column on one sheet is enough, though it be blank.
        ({"Ex marking": ""}, {}, UNMARKED),
        ({"protection": ""}, {}, UNMARKED),
        ({}, {"Ex marking": ""}, UNMARKED),
        ({}, {"Ex marking": "Ex ia IIC T4 Ga"}, UNMARKED),
    ],
)
def test_a_list_without_a_column_for_markings_is_not_found_row_by_row(row: Row, more: Row, wanted: str) -> None:
    element = {"tag": "TE-101", "kind": "element", "signal": "Pt100", "simple apparatus": "yes",
               "area classification": "Zone 1 IIC T4"}  # fmt: skip
    types = [{name: text for name, text in each.items() if name != "Ex marking"} for each in (DEVICE, SOURCE)]
    rows = [{**TAG, "tag": "TT-101"}, element, {**OTHER, **row}]
    plant = example_plant(rows, types=[*types, {**CARD, **more}], cable_types=CABLES)
    assert said_of_pt_101("ISC01", plant) == wanted


def test_the_sources_that_would_do_are_named_and_clear_the_finding() -> None:
    plant = with_other({"barrier": ""}, {}, {}, ISOLATOR)
    (finding,) = findings_of("ISC01", plant)
    assert [dict(fix.change) for fix in finding.fixes] == [{"barrier": "ISO-1"}, {"barrier": "ZB"}]
    for fix in finding.fixes:
        assert findings_of("ISC01", assemble(mended(plant, finding, fix))) == []


# ----------------------------------------------------------------------------------------------------------- ISC09


@pytest.mark.parametrize(
    ("area", "device", "source", "wanted"),
    [
        ("Zone 0 IIC T4", "Ex ia IIC T4 Ga", "[Ex ia Ga] IIC", "clear"),
        ("Zone 0 IIC T4", "Ex ia IIC T4 Ga", "[Ex ib Gb] IIC",
         "finding: the system is ib (ZB); Zone 0 of PT-101 needs ia"),
        ("Zone 0 IIC T4", "Ex ib IIC T4 Gb", "[Ex ia Ga] IIC",
         "finding: the system is ib (PT-101); Zone 0 of PT-101 needs ia"),
        ("Zone 1 IIC T4", "Ex ib IIC T4 Gb", "[Ex ia Ga] IIC", "clear"),
        ("Zone 1 IIC T4", "Ex ia IIC T4 Ga", "[Ex ic Gc] IIC",
         "finding: the system is ic (ZB); Zone 1 of PT-101 needs ib"),
        ("Zone 2 IIC T4", "Ex ic IIC T4 Gc", "[Ex ic Gc] IIC", "clear"),
        ("Zone 20 IIIC T120°C", "Ex ia IIIC T100°C Da", "[Ex ib Db] IIIC",
         "finding: the system is ib (ZB); Zone 20 of PT-101 needs ia"),
        ("Zone 21 IIIC T120°C", "Ex ia IIIC T100°C Db", "[Ex ia Ga] IIC",
         "review: ZB is marked for circuits in gas, not in dust: [Ex ia Ga] IIC"),
        ("Zone 21 IIIC T120°C", "Ex ia IIIC T100°C Db", "[Ex ia] IIC", "clear"),
        ("Cl I Div 1 Gr A T4", "Class I, Zone 1, AEx ib IIC T4 Gb", "[AEx ia Ga] IIC",
         "finding: the system is ib (PT-101); Class I Div 1 of PT-101 needs ia"),
        ("Cl I Div 2 Gr A T4", "Class I, Zone 1, AEx ib IIC T4 Gb", "[AEx ia Ga] IIC", "clear"),
        # Not marked: nothing tells.
        ("Zone 0 IIC T4", "Ex ia IIC T4 Ga", "", "unchecked: Ex marking"),
        ("Zone 0 IIC T4", "Ex ib IIC T4 Gb", "", "finding: the system is ib (PT-101); Zone 0 of PT-101 needs ia"),
    ],
)  # fmt: skip
def test_the_level_of_the_system(area: str, device: str, source: str, wanted: str) -> None:
    plant = plant_of({"area classification": area}, {"Ex marking": device}, {"Ex marking": source})
    assert told("ISC09", plant) == wanted


def test_without_a_source_the_level_is_not_known() -> None:
    assert told("ISC09", plant_of({"barrier": ""})) == "unchecked: barrier"


# ----------------------------------------------------------------------------------------------------------- ISC10


@pytest.mark.parametrize(
    ("tag", "device", "more", "wanted"),
    [
        ({}, {}, (), "clear"),
        ({"barrier": ""}, {}, (), "unchecked: barrier"),
        ({"card": "AIX"}, {}, ({"code": "AIX", "kind": "card", "Ex marking": "[Ex ia Ga] IIC", "Uo V": "25"},),
         "review: 2 sources on one circuit: ZB (28 V), AIX (25 V)"),
        ({"card": "AI8"}, {}, (CARD,), "clear"),
        ({}, {"Uo V": "5.4", "Io mA": "30"}, (), "review: 2 sources on one circuit: ZB (28 V), PT-101 (5.4 V)"),
        ({}, {"Uo V": "0"}, (), "clear"),
        ({}, {"Uo V": "5.4", "Ex marking": ""}, (), "unchecked: Ex marking"),
        ({}, {"Uo V": "5.4", "Ex marking": "Ex ia [ia Ga] IIC T4 Ga"}, (), "clear"),
        ({"tag": "TT-101"}, {"Uo V": "5.4", "Io mA": "30"}, (), "clear"),
    ],
)  # fmt: skip
def test_several_sources(tag: Row, device: Row, more: tuple[Row, ...], wanted: str) -> None:
    assert told("ISC10", plant_of(tag, device, {}, *more)) == wanted


def test_with_several_sources_nothing_is_compared() -> None:
    plant = plant_of({}, {"Ui V": "5", "Uo V": "5.4", "Io mA": "30"})
    assert {told(code, plant) for code in ("ISC02", "ISC03", "ISC04", "ISC05", "ISC06")} == {"unchecked: barrier"}


def test_simple_apparatus_is_no_second_source() -> None:
    plant = plant_of({**dict.fromkeys(TAG), **ELEMENT, "generated V": "2", "generated mA": "1", "generated mW": "1"})
    assert told("ISC10", plant) == "clear"
    assert told("ISC13", plant).startswith("finding: stated to be simple apparatus, and generates 2 V")


# ----------------------------------------------------------------------------------------------------------- ISC11

HOLDS = "clear (Ex i apparatus is taken as insulated from earth where nothing else is stated (500 V, from memory))"


@pytest.mark.parametrize(
    ("tag", "source", "wanted"),
    [
        ({"earthed sensor": "yes"}, {}, "finding: PT-101 is an earthed sensor on the zener barrier ZB: a second earth"),
        ({"earthed sensor": "no"}, {}, "clear"),
        ({}, {}, HOLDS),
        ({"certificate": "ABC 20 ATEX 0001X"}, {}, "unchecked: earthed sensor"),
        ({"certificate": "ABC 20 ATEX 0001"}, {}, HOLDS),
        ({"earthed sensor": "no"}, {"IS earth": ""}, "review: no IS earth is recorded for the zener barrier ZB"),
        ({"earthed sensor": "no"}, {"IS earth": "no"},
         "review: the zener barrier ZB is recorded to have no IS earth"),
        ({"earthed sensor": "yes"}, {"IS earth": ""},
         "finding: PT-101 is an earthed sensor on the zener barrier ZB: a second earth"),
        ({"earthed sensor": "yes"}, {"zener or isolator": "isolator"}, "not applicable"),
        ({"earthed sensor": "yes"}, {"zener or isolator": ""}, "unchecked: zener or isolator"),
        ({"earthed sensor": "yes", "barrier": ""}, {}, "not applicable"),
    ],
)  # fmt: skip
def test_a_second_earth(tag: Row, source: Row, wanted: str) -> None:
    assert told("ISC11", plant_of(tag, {}, source)) == wanted


@pytest.mark.parametrize(
    ("element", "wanted"),
    [
        ({"earthed sensor": "yes"}, "finding: TE-101 is an earthed sensor on the zener barrier ZB: a second earth"),
        ({"earthed sensor": "no"}, "clear"),
        ({}, "unchecked: earthed sensor"),
        ({"tag": "TS-101", "kind": "switch", "signal": "contact"}, HOLDS),
    ],
)
def test_an_earthed_element_on_a_zener_barrier(element: Row, wanted: str) -> None:
    assert told("ISC11", plant_of({**dict.fromkeys(TAG), **ELEMENT, **element})) == wanted


def test_an_earthed_element_at_a_transmitter_is_for_a_person() -> None:
    te = {**ELEMENT, "I/O type": "", "I/O address": "", "barrier": "", "earthed sensor": "yes"}
    assert told("ISC11", plant_of({"tag": "TT-101"}, rows=[te])) == (
        "review: TE-101 is an earthed sensor at a transmitter on the zener barrier ZB: a second earth, unless the"
        " transmitter isolates"
    )


# ----------------------------------------------------------------------------------------------------------- ISC13

AREA: Row = {"code": "A", "zone": "1", "gas group": "IIC", "temperature class": "T4", "ambient max": "60"}


@pytest.mark.parametrize(
    ("ambient_c", "power_mw"),
    [(-20, 1300), (40, 1300), (40.1, 1250), (50, 1250), (55, 1200), (60, 1200), (60.1, 1100), (70, 1100), (80, 1000),
     (80.1, None)],
)  # fmt: skip
def test_the_table_of_powers_rounds_the_ambient_up(ambient_c: float, power_mw: float | None) -> None:
    assert t4_power_mw(ambient_c) == power_mw


@pytest.mark.parametrize(
    ("element", "area", "po_mw", "wanted"),
    [
        ({}, {}, "650", "clear"),
        ({}, {}, "1200", "clear"),
        ({}, {}, "1201", "finding: can receive 1201 mW from ZB, at most 1200 at 60 degC for T4"),
        ({}, {"ambient max": "55"}, "1220", "finding: can receive 1220 mW from ZB, at most 1200 at 55 degC for T4"),
        ({}, {"ambient max": "40"}, "1300", "clear"),
        ({}, {"ambient max": "81"}, "10",
         "review: can receive 10 mW from ZB: the table of powers ends at 80 degC, the area has 81"),
        ({}, {"ambient max": ""}, "650", "unchecked: area ambient max"),
        ({}, {"temperature class": ""}, "650", "unchecked: area temperature class"),
        ({}, {"temperature class": "T3"}, "650", "clear"),
        ({}, {"temperature class": "T5"}, "650",
         "review: can receive 650 mW from ZB: the table of powers is for T4, the area asks for T5"),
        ({"surface area": "20"}, {}, "650", "clear"),
        ({"surface area": "19.9"}, {}, "650",
         "review: can receive 650 mW from ZB: its surface of 19.9 mm2 is below the 20 mm2 of the table of powers"),
        ({"surface area": ""}, {}, "650", "unchecked: surface area"),
        ({"surface area": ""}, {}, "1201", "finding: can receive 1201 mW from ZB, at most 1200 at 60 degC for T4"),
        ({}, {}, "", "unchecked: Po mW"),
        ({"barrier": ""}, {}, "650", "unchecked: barrier"),
        ({"barrier": "X9"}, {}, "650", "unchecked: barrier"),
        ({}, {"zone": "21", "gas group": "", "dust group": "IIIC"}, "10",
         "review: can receive 10 mW from ZB: the power that simple apparatus bears under dust is for a person to"
         " judge"),
        # A switch within its ratings heats nothing.
        ({"tag": "TS-101", "kind": "switch", "signal": "contact", "surface area": ""}, {"ambient max": "40"}, "2000",
         "clear (a switch within its ratings is T6 up to +40 degC, from memory)"),
        ({"tag": "TS-101", "kind": "switch", "signal": "contact", "surface area": ""}, {}, "650",
         "unchecked: surface area"),
        ({"simple apparatus": ""}, {}, "5000", "not applicable"),
    ],
)  # fmt: skip
def test_what_can_heat_simple_apparatus(element: Row, area: Row, po_mw: str, wanted: str) -> None:
    tag = {
        **dict.fromkeys(TAG), **ELEMENT, "area": "A", "area classification": "", "surface area": "150 mm2", **element
    }  # fmt: skip
    assert told("ISC13", plant_of(tag, {}, {"Po mW": po_mw}, areas=[{**AREA, **area}])) == wanted


@pytest.mark.parametrize(
    ("generates", "wanted"),
    [
        (("1.5", "100", "25"), "clear"),
        (("1.51", "100", "25"),
         "finding: stated to be simple apparatus, and generates 1.51 V, at most 1.5 V"),
        (("1.5", "100.1", "25"),
         "finding: stated to be simple apparatus, and generates 100.1 mA, at most 100 mA"),
        (("1.5", "100", "25.1"),
         "finding: stated to be simple apparatus, and generates 25.1 mW, at most 25 mW"),
        (("3.6", "500", "900"),
         "finding: stated to be simple apparatus, and generates 3.6 V, at most 1.5 V, 500 mA, at most 100 mA, 900 mW,"
         " at most 25 mW"),
        # A thermocouple's row says nothing of it: it is no source of more.
        (("", "", ""), "clear"),
        # All three limits count: of one alone nothing is known of the others.
        (("0.5", "", ""), "unchecked: generated mA, generated mW"),
        (("", "20", "1"), "unchecked: generated V"),
        (("", "200", ""), "finding: stated to be simple apparatus, and generates 200 mA, at most 100 mA"),
    ],
)  # fmt: skip
def test_what_simple_apparatus_may_generate(generates: tuple[str, str, str], wanted: str) -> None:
    names = ("generated V", "generated mA", "generated mW")
    tag = {
        **dict.fromkeys(TAG), **ELEMENT, "area": "A", "area classification": "", "surface area": "150",
        **dict(zip(names, generates, strict=True)),
    }  # fmt: skip
    assert told("ISC13", plant_of(tag, areas=[AREA])) == wanted


def test_a_switch_or_an_rtd_on_a_28_volt_barrier_breaks_no_limit() -> None:
    tag = {**dict.fromkeys(TAG), **ELEMENT, "area": "A", "area classification": "", "surface area": "150"}
    assert told("ISC13", plant_of(tag, areas=[AREA])) == "clear"


# ---------------------------------------------------------------------------------------------------------- wording


@pytest.mark.parametrize("code", ["ISC01", "ISC09", "ISC10", "ISC11", "ISC13"])
def test_nothing_says_more_than_is_known(code: str) -> None:
    element = {**dict.fromkeys(TAG), **ELEMENT, "generated V": "9", "earthed sensor": "yes"}
    plants = [
        with_other({"barrier": ""}, {}, {}, ISOLATOR),
        plant_of({"area classification": "Zone 0 IIC T4", "card": "AIX"}, {"Ex marking": "Ex ib IIC T4 Gb"}, {},
                 {"code": "AIX", "kind": "card", "Ex marking": "[Ex ia Ga] IIC", "Uo V": "25"}),
        plant_of(element),
    ]  # fmt: skip
    found = [each for plant in plants for each in findings_of(code, plant)]
    assert found
    for each in found:
        texts = (each.message, each.working, *each.assumed, *(fix.text for fix in each.fixes))
        assert not {"safe", "certified", "compliant", "invalid"} & set(" ".join(texts).casefold().split())
        assert each.outcome in (Outcome.FINDING, Outcome.REVIEW)


def test_the_catalogue_entries_used_here_pass() -> None:
    plant = plant_of()
    assert DEVICE["code"] == "T1"
    assert SOURCE["code"] == "ZB"
    codes = [f"ISC{number:02}" for number in (1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11)]
    assert audit(plant, codes=codes, raise_errors=True).findings == []
