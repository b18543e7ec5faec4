"""Which circuits are intrinsically safe, by which source, in which group and at which level; and their comparison."""

from typing import Any

import pytest

from loops.circuit import Circuit
from loops.intrinsic import entity_comparison, groups_stated, intrinsic, needed_level, plainly_holds
from loops.plant import Plant
from validation.example import example_plant

Row = dict[str, Any]

TYPES: list[Row] = [
    {
        "code": "T1", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga", "Ui V": "30", "Ii mA": "120",
        "Pi mW": "1000", "Ci nF": "3", "Li uH": "10",
    },
    {
        "code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "zener or isolator": "zener", "Uo V": "28",
        "Io mA": "93", "Po mW": "650", "Co nF IIC": "83", "Co nF IIB": "650", "Co nF IIA": "2150",
        "Lo mH IIC": "3.05", "Lo mH IIB": "12.2", "Lo mH IIA": "24.4", "Lo/Ro": "54",
    },
    {"code": "SI", "kind": "isolator", "signal": "4-20 mA", "volts available at 20 mA": "16"},
    {"code": "AI8", "kind": "card"},
    {"code": "AIX", "kind": "card", "Ex marking": "[Ex ia Ga] IIC", "Uo V": "25"},
]  # fmt: skip
CABLES: list[Row] = [{"code": "C1", "conductor": "1.5 mm2", "capacitance": "110 pF/m", "inductance": "0.65 uH/m"}]
TAG: Row = {
    "tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB", "card": "AI8",
    "I/O type": "AI", "I/O address": "1", "signal": "4-20 mA", "cable type": "C1", "cable length": "300 m",
}  # fmt: skip


def plant_of(*rows: Row, types: list[Row] | None = None, **sheets: Any) -> Plant:
    sheets.setdefault("cable_types", CABLES)
    return example_plant(list(rows), types=types or TYPES, **sheets)


def circuit_of(plant: Plant, tag: str = "PT-101") -> Circuit:
    return next(each for each in plant.circuits if each.device.name == tag)


def tag(**changes: Any) -> Row:
    return {**TAG, **{name.replace("_", " "): value for name, value in changes.items()}}


# ------------------------------------------------------------------------------------------- is it Ex i, and why


@pytest.mark.parametrize(
    ("changes", "sheets", "because"),
    [
        ({}, {}, "ZB is an Ex i source"),
        ({"barrier": "", "card": "AIX"}, {}, "AIX is an Ex i source"),
        ({"barrier": ""}, {}, "PT-101 has no protection but Ex ia IIC T4 Ga"),
        ({"barrier": "", "Ex marking": "Ex db IIC T4 Gb"}, {}, ""),
        (
            {"barrier": "", "Ex marking": "Ex db IIC T4 Gb"},
            {"loops": [{"number": "P-101", "circuit or tag": "PT-101", "kind": "AI", "intrinsically safe": "yes"}]},
            "the loop list declares it intrinsically safe",
        ),
        # Said to be none, though its isolator could make it one.
        (
            {"Ex marking": "Ex db IIC T4 Gb"},
            {"loops": [{"number": "P-101", "circuit or tag": "PT-101", "kind": "AI", "intrinsically safe": "no"}]},
            "",
        ),
        ({}, {"loops": [{"number": "P-101", "circuit or tag": "PT-101", "kind": "AI", "intrinsically safe": "no"}]},
         "ZB is an Ex i source"),
        ({"barrier": "SI", "Ex marking": "Ex db IIC T4 Gb"}, {}, ""),
        ({"barrier": "", "Ex marking": "", "device type": "", "type of protection": "Ex ia"}, {},
         "PT-101 has no protection but Ex ia"),
        ({"barrier": "", "area classification": "safe"}, {}, ""),
    ],
)  # fmt: skip
def test_why_a_circuit_is_ex_i(changes: Row, sheets: Row, because: str) -> None:
    plant = plant_of({**TAG, **changes}, **sheets)
    assert intrinsic(circuit_of(plant), plant).because == because


@pytest.mark.parametrize(
    ("marking", "more", "how", "level"),
    [
        ("Ex ia IIC T4 Ga", {}, "intrinsically safe", "a"),
        ("EEx ib IIC T4", {}, "intrinsically safe", "b"),
        ("Ex ic IIC T4 Gc", {}, "intrinsically safe", "c"),
        ("Ex ia op is IIC T4 Ga", {}, "intrinsically safe", "a"),
        ("Ex db ia IIC T4 Gb", {}, "several", "a"),
        ("Ex db ia IIC T4 Gb", {"type of protection": "Ex d"}, "other", None),
        ("Ex db ia IIC T4 Gb", {"type of protection": "IS"}, "intrinsically safe", "a"),
        ("Ex ia IIC T4 Ga; Ex db IIC T4 Gb", {}, "several", "a"),
        ("II 1 G Ex ia IIC T4 Ga; II 2 D Ex tb IIIC T100°C Db", {}, "intrinsically safe", "a"),
        ("Ex db IIC T4 Gb", {}, "other", None),
        ("Ex db [ia Ga] IIC T4 Gb", {}, "other", None),
        ("non-Ex", {}, "unmarked", None),
        ("", {"device type": ""}, "unmarked", None),
        ("", {"device type": "X9"}, "unknown", None),
        ("Ex maybe", {}, "unknown", None),
        ("Class I Div 1 Groups A-D T4", {}, "unknown", None),
        ("Class I Div 1 Groups A-D T4", {"type of protection": "intrinsically safe"}, "intrinsically safe", "a"),
        ("Class I Div 2 Groups A-D T4", {}, "other", None),
    ],
)
def test_how_a_device_is_protected(marking: str, more: Row, how: str, level: str | None) -> None:
    plant = plant_of({**TAG, "Ex marking": marking, **more})
    (item,) = intrinsic(circuit_of(plant), plant).items
    assert (item.how, item.level) == (how, level)


@pytest.mark.parametrize(
    ("more", "how"),
    [
        ({"simple apparatus": "yes"}, "simple"),
        ({"simple apparatus": "no"}, "pending"),
        ({}, "pending"),
        ({"signal": "NAMUR", "tag": "LS-101", "kind": "switch"}, "unmarked"),
        ({"kind": "transmitter", "signal": "4-20 mA", "simple apparatus": "yes"}, "unmarked"),
    ],
)
def test_what_may_be_simple_apparatus(more: Row, how: str) -> None:
    row = {**TAG, "tag": "TE-101", "kind": "element", "signal": "Pt100", "device type": "", **more}
    plant = plant_of(row)
    (item,) = intrinsic(circuit_of(plant, row["tag"]), plant).items
    assert item.how == how


# ------------------------------------------------------------------------------------------------------ the items


def test_an_element_at_a_transmitter_is_fed_by_it() -> None:
    rows = [
        tag(tag="TT-101", kind="transmitter"),
        {"tag": "TE-101", "kind": "element", "signal": "Pt100", "area classification": "Zone 0 IIC T4",
         "simple apparatus": "yes"},
    ]  # fmt: skip
    plant = plant_of(*rows)
    found = intrinsic(circuit_of(plant, "TT-101"), plant)
    assert [(item.name, item.at_transmitter) for item in found.items] == [("TE-101", True), ("TT-101", False)]
    assert [item.name for item in found.fed] == ["TT-101"]


def test_what_stands_in_the_cabinet_and_a_valves_body_are_no_items() -> None:
    rows = [
        {**TAG, "tag": "FY-101", "kind": "positioner", "I/O type": "AO"},
        {"tag": "FV-101", "kind": "control valve", "area classification": "Zone 1 IIC T4"},
    ]
    plant = plant_of(*rows)
    assert [item.name for item in intrinsic(circuit_of(plant, "FY-101"), plant).items] == ["FY-101"]


@pytest.mark.parametrize(
    ("changes", "concerns"),
    [
        ({}, True),
        ({"area classification": "safe"}, False),
        ({"area classification": ""}, None),
        ({"area classification": "safe", "location": "cabinet"}, False),
    ],
)
def test_whether_a_part_stands_in_a_classified_area(changes: Row, concerns: bool | None) -> None:
    plant = plant_of({**TAG, **changes})
    assert intrinsic(circuit_of(plant), plant).concerns is concerns


# ---------------------------------------------------------------------------------------------------- the sources


@pytest.mark.parametrize(
    ("barrier", "marking", "level"),
    [
        ("barrier", "[Ex ia Ga] IIC", "a"),
        ("barrier", "[Ex ib Gb] IIC", "b"),
        ("isolator", "II (1) G [Ex ia Ga] IIC; II (1) D [Ex ia Da] IIIC", "a"),
        ("isolator", "II 3 (1) G Ex ec [ia Ga] IIC T4 Gc", "a"),
        ("barrier", "[EEx ia] IIC", "a"),
        ("isolator", "[Ex ic Gc] IIC", "c"),
        ("barrier", "Class I Div 1 Groups A,B,C,D associated", "a"),
    ],
)
def test_a_bracketed_output_is_a_source(barrier: str, marking: str, level: str) -> None:
    types = [TYPES[0], {"code": "ZB", "kind": barrier, "Ex marking": marking}]
    plant = plant_of(TAG, types=types)
    assert [(each.name, each.level) for each in intrinsic(circuit_of(plant), plant).sources] == [("ZB", level)]


@pytest.mark.parametrize(
    ("entry", "sources", "missing"),
    [
        ({"Uo V": "28"}, [("ZB", None)], ""),
        ({"Ex marking": "Ex ec IIC T4 Gc"}, [], ""),
        ({"Ex marking": "non-Ex"}, [], ""),
        ({}, [], "barrier"),
    ],
)
def test_what_is_no_source_and_what_nobody_says(entry: Row, sources: list[Any], missing: str) -> None:
    plant = plant_of(TAG, types=[TYPES[0], {"code": "ZB", "kind": "isolator", **entry}])
    found = intrinsic(circuit_of(plant), plant)
    assert ([(each.name, each.level) for each in found.sources], found.source_missing) == (sources, missing)


OTHER: Row = {**TAG, "tag": "PT-102", "I/O address": "2"}


@pytest.mark.parametrize(
    ("rows", "missing"),
    [
        ([tag(barrier=""), OTHER], ""),
        ([tag(barrier="none"), OTHER], ""),
        ([tag(barrier="TBA"), OTHER], "barrier"),
        ([tag(barrier="n/a"), OTHER], ""),
        ([tag(barrier="XY-7"), OTHER], "barrier"),
        # No barrier anywhere: the list does not say which circuits have one.
        ([tag(barrier="")], "barrier"),
        ([tag(barrier="", card="Ex i AI 8"), OTHER], "card"),
        ([tag(barrier="", card="SLOT 7"), OTHER], ""),
    ],
)
def test_whether_a_blank_barrier_says_that_there_is_none(rows: list[Row], missing: str) -> None:
    plant = plant_of(*rows)
    found = intrinsic(circuit_of(plant), plant)
    assert (found.sources, found.source_missing) == ((), missing)


@pytest.mark.parametrize(
    ("changes", "more", "names"),
    [
        ({"card": "AIX"}, {}, ["ZB", "AIX"]),
        ({"barrier": "ZB / ZB"}, {}, ["ZB", "ZB"]),
        ({}, {"Uo V": "5", "Io mA": "10"}, ["ZB", "PT-101"]),
        # A bracketed output, and what goes to a sensor, is the source of another circuit.
        ({"Ex marking": "Ex ia [ia Ga] IIC T4 Ga"}, {"Uo V": "5", "Io mA": "10"}, ["ZB"]),
        ({"tag": "TT-101"}, {"Uo V": "5", "Io mA": "10"}, ["ZB"]),
        ({}, {"Uo V": "0", "Io mA": "0"}, ["ZB"]),
    ],
)
def test_several_sources(changes: Row, more: Row, names: list[str]) -> None:
    row = {**TAG, **changes}
    plant = plant_of(row, types=[{**TYPES[0], **more}, *TYPES[1:]])
    assert [each.name for each in intrinsic(circuit_of(plant, row["tag"]), plant).sources] == names


def test_a_barrier_may_be_a_tag_of_the_list() -> None:
    rows = [tag(barrier="ZB-101"), {"tag": "ZB-101", "kind": "barrier", "device type": "ZB", "location": "cabinet"}]
    plant = plant_of(*rows)
    found = intrinsic(circuit_of(plant), plant)
    assert [(each.name, each.entry.uo_v, each.level) for each in found.sources] == [("ZB-101", 28.0, "a")]
    assert [item.name for item in found.items] == ["PT-101"]


# ------------------------------------------------------------------------------------------------------ the group


@pytest.mark.parametrize(
    ("area", "group", "harder"),
    [
        ("Zone 1 IIC T4", "IIC", "IIC"),
        ("Zone 1 IIB T4", "IIB", "IIB"),
        ("Zone 2 IIA T1", "IIA", "IIA"),
        ("Zone 1 IIB+H2 T1", "IIC", "IIC"),
        ("Zone 1 T4", None, None),
        ("Zone 21 IIIC T120°C", "IIB", "IIB"),
        ("Zone 22", "IIB", "IIB"),
        ("Cl I Div 1 Gr A T4", "IIC", "IIC"),
        ("Cl I Div 1 Gr B T4", "IIC", "IIC"),
        ("Cl I Div 1 Gr C T4", "IIB", "IIC"),
        ("Cl I Div 1 Gr D T4", "IIA", "IIB"),
        ("Cl I Div 2 Gr C,D T4", "IIB", "IIC"),
        ("Cl II Div 1 Gr G T120°C", "IIB", "IIB"),
    ],
)
def test_the_group_is_the_areas(area: str, group: str | None, harder: str | None) -> None:
    plant = plant_of(tag(area_classification=area))
    ruling = intrinsic(circuit_of(plant), plant).ruling
    assert (ruling.group, ruling.harder) == (group, harder)


@pytest.mark.parametrize(
    ("gas", "group", "harder"),
    [("Methane", "IIA", "IIA"), ("Ethanol", "IIB", "IIB"), ("solvent xy", "IIA", "IIB"), ("", "IIA", "IIB")],
)
def test_a_named_gas_decides_what_a_division_is_taken_for(gas: str, group: str, harder: str) -> None:
    area = {"code": "A", "class": "I", "division": "1", "gas group": "D", "temperature class": "T3", "gas": gas}
    plant = plant_of({**TAG, "area classification": "", "area": "A"}, areas=[area])
    ruling = intrinsic(circuit_of(plant), plant).ruling
    assert (ruling.group, ruling.harder) == (group, harder)


def test_the_most_demanding_group_of_its_devices_rules() -> None:
    rows = [
        tag(area_classification="Zone 2 IIA T3"),
        {"tag": "PI-101", "kind": "indicator", "location": "field", "signal": "4-20 mA", "device type": "T1",
         "area classification": "Zone 1 IIB T3"},
    ]  # fmt: skip
    plant = plant_of(*rows)
    found = intrinsic(circuit_of(plant), plant)
    assert [item.name for item in found.items] == ["PT-101", "PI-101"]
    assert found.ruling.group == "IIB"


@pytest.mark.parametrize(
    ("area", "pair", "co_nf", "groups"),
    [
        ("Zone 1 IIC T4", {}, "83", ("IIC", "IIC")),
        ("Zone 1 IIB T4", {}, "650", ("IIB", "IIB")),
        ("Zone 1 IIA T4", {}, "2150", ("IIA", "IIA")),
        ("Zone 21 IIIC T100°C", {}, "650", ("IIB", "IIB")),
        # A more demanding group's pair, never a less demanding one's.
        ("Zone 1 IIB T4", {"Co nF IIB": "", "Lo mH IIB": ""}, "83", ("IIC", "IIC")),
        ("Zone 1 IIA T4", {"Co nF IIA": "", "Lo mH IIA": ""}, "650", ("IIB", "IIB")),
        ("Zone 1 IIC T4", {"Co nF IIC": "", "Lo mH IIC": ""}, None, ("", "")),
        # A pair belongs together where there is one.
        ("Zone 1 IIB T4", {"Lo mH IIB": ""}, "83", ("IIC", "IIC")),
        ("Zone 1 IIB T4", {"Lo mH IIB": "", "Co nF IIC": ""}, "650", ("IIB", "IIC")),
    ],
)
def test_co_and_lo_are_the_groups_own_or_a_more_demanding_ones(
    area: str, pair: Row, co_nf: str | None, groups: tuple[str, str]
) -> None:
    plant = plant_of(tag(area_classification=area), types=[TYPES[0], {**TYPES[1], **pair}, *TYPES[2:]])
    comparison = entity_comparison(circuit_of(plant), plant).comparison
    assert comparison is not None
    source = comparison.source
    assert (None if source.co_nf is None else str(source.co_nf), (source.co_group, source.lo_group)) == (co_nf, groups)


def test_which_groups_an_entry_states() -> None:
    plant = plant_of(TAG)
    assert groups_stated(plant.types["zb"], "co") == ("IIC", "IIB", "IIA")
    assert groups_stated(plant.types["si"], "lo") == ()


# ------------------------------------------------------------------------------------------------------ the level


@pytest.mark.parametrize(
    ("area", "needed"),
    [
        ("Zone 0 IIC T4", ("a", "Zone 0")),
        ("Zone 1 IIC T4", ("b", "Zone 1")),
        ("Zone 2 IIC T4", ("c", "Zone 2")),
        ("Zone 20 IIIC T120°C", ("a", "Zone 20")),
        ("Zone 21 IIIC T120°C", ("b", "Zone 21")),
        ("Zone 22 IIIC T120°C", ("c", "Zone 22")),
        ("Cl I Div 1 Gr A T4", ("a", "Class I Div 1")),
        ("Cl I Div 2 Gr A T4", ("c", "Class I Div 2")),
    ],
)
def test_the_level_that_a_place_needs(area: str, needed: tuple[str, str]) -> None:
    plant = plant_of(tag(area_classification=area))
    (item,) = intrinsic(circuit_of(plant), plant).items
    assert needed_level(item) == needed


@pytest.mark.parametrize(
    ("row", "area", "needed"),
    [
        ({"process-side zone": "Zone 0"}, {}, ("a", "Zone 0 on the process side")),
        ({"process-side zone": "2"}, {}, ("b", "Zone 1")),
        ({}, {"EPL required": "Ga"}, ("a", "EPL Ga")),
        ({}, {"zone": "", "gas group": "IIC"}, None),
    ],
)
def test_the_process_side_and_an_assigned_epl_count(row: Row, area: Row, needed: Any) -> None:
    listed = {"code": "A", "zone": "1", "gas group": "IIC", "temperature class": "T4", **area}
    plant = plant_of({**TAG, "area classification": "", "area": "A", **row}, areas=[listed])
    (item,) = intrinsic(circuit_of(plant), plant).items
    assert needed_level(item) == needed


@pytest.mark.parametrize(
    ("device", "source", "level"),
    [
        ("Ex ia IIC T4 Ga", "[Ex ia Ga] IIC", "a"),
        ("Ex ia IIC T4 Ga", "[Ex ib Gb] IIC", "b"),
        ("Ex ib IIC T4 Gb", "[Ex ia Ga] IIC", "b"),
        ("Ex ib IIC T4 Gb", "[Ex ic Gc] IIC", "c"),
        ("Ex ia IIC T4 Ga", "", None),
    ],
)
def test_the_level_of_a_system_is_the_lowest_of_its_parts(device: str, source: str, level: str | None) -> None:
    types = [{**TYPES[0], "Ex marking": device}, {**TYPES[1], "Ex marking": source}]
    plant = plant_of(TAG, types=types)
    assert intrinsic(circuit_of(plant), plant).level == level


# ------------------------------------------------------------------------------------------------- the comparison


def test_the_whole_comparison_with_where_each_number_came_from() -> None:
    plant = plant_of({**TAG, "Ui V": "29"})
    found = entity_comparison(circuit_of(plant), plant)
    assert found.comparison is not None
    assert found.kindest is not None
    assert found.comparison.lines == found.kindest.lines
    assert [(line.quantity, line.device, line.passes) for line in found.comparison.lines] == [
        ("voltage", "PT-101", True),
        ("current", "PT-101", True),
        ("power", "PT-101", True),
        ("capacitance", "", True),
        ("inductance", "", True),
    ]
    assert found.comparison.lines[0].working == "Uo 28 V (ZB); Ui 29 V of PT-101 (its row and type T1)"
    assert found.comparison.lines[3].working == (
        "Ci 3 nF (PT-101, its row and type T1) + cable 300 m (its row) x 110 pF/m (cable type C1) = 33 nF: 36 nF;"
        " Co for IIC 83 nF (ZB)"
    )
    assert (found.comparison.longest_cable_m, found.comparison.longest_because) == (727, "capacitance")
    assert (found.linear, found.linear_assumed, found.assumed) == (True, True, ())


@pytest.mark.parametrize(
    ("changes", "sheets", "assumed", "worst_nf", "kindest_nf"),
    [
        ({"cable type": ""}, {}, ("cable 200 pF/m (IEC 60079-14:2013 16.2.2, from memory)",
                                  "cable 1 uH/m (IEC 60079-14:2013 16.2.2, from memory)"), "63", "3"),
        ({"cable type": "1x2x1.5"}, {}, ("cable 200 pF/m (IEC 60079-14:2013 16.2.2, from memory)",
                                         "cable 1 uH/m (IEC 60079-14:2013 16.2.2, from memory)"), "63", "3"),
        ({}, {"cable_types": [{"code": "C1", "conductor": "1.5 mm2", "inductance": "0.65 uH/m"}]},
         ("cable 200 pF/m (IEC 60079-14:2013 16.2.2, from memory)",), "63", "3"),
        # Its ratio holds at any length.
        ({"cable length": ""}, {}, ("cable 30 uH/ohm (IEC 60079-14:2013 16.2.2, from memory)",), None, "3"),
        ({"cable type": "C9"}, {}, (), None, "3"),
        ({"cable type": "", "area classification": "Cl I Div 1 Gr B T4"}, {},
         ("cable 196.85 pF/m (60 pF/ft and 0.20 uH/ft of ANSI/ISA RP12.06.01, from memory)",
          "cable 0.656168 uH/m (60 pF/ft and 0.20 uH/ft of ANSI/ISA RP12.06.01, from memory)"), "62.0551", "3"),
    ],
)  # fmt: skip
def test_a_cable_of_which_nothing_is_given_is_worked_twice(
    changes: Row, sheets: Row, assumed: tuple[str, ...], worst_nf: str | None, kindest_nf: str
) -> None:
    plant = plant_of({**TAG, **changes}, **sheets)
    found = entity_comparison(circuit_of(plant), plant)
    assert found.comparison is not None
    assert found.kindest is not None
    (worst,), (kindest,) = found.comparison.of("capacitance"), found.kindest.of("capacitance")
    assert found.assumed == assumed
    assert (None if worst.passes is None else f"{worst.found:.6g}") == worst_nf
    assert f"{kindest.found:.6g}" == kindest_nf


@pytest.mark.parametrize(
    ("entry", "linear"),
    [
        ({}, True),
        ({"output characteristic": "linear"}, True),
        ({"output characteristic": "trapezoidal"}, False),
        ({"zener or isolator": "isolator"}, None),
        ({"zener or isolator": "isolator", "output characteristic": "linear"}, True),
    ],
)
def test_the_output_characteristic(entry: Row, linear: bool | None) -> None:
    plant = plant_of(TAG, types=[TYPES[0], {**TYPES[1], **entry}, *TYPES[2:]])
    assert entity_comparison(circuit_of(plant), plant).linear is linear


@pytest.mark.parametrize(
    ("changes", "missing"),
    [({"barrier": ""}, ("barrier",)), ({"card": "AIX"}, ("barrier",)), ({"barrier": "X9"}, ("barrier",))],
)
def test_without_one_source_there_is_no_comparison(changes: Row, missing: tuple[str, ...]) -> None:
    plant = plant_of({**TAG, **changes})
    found = entity_comparison(circuit_of(plant), plant)
    assert (found.comparison, found.missing) == (None, missing)


@pytest.mark.parametrize(
    ("changes", "types", "plainly"),
    [
        ({}, {}, True),
        ({"cable length": "345 m"}, {}, True),  # 40.95 of half the 83 nF
        ({"cable length": "360 m"}, {}, False),
        ({}, {"Ui V": "28"}, False),  # equal holds, though not plainly
        ({}, {"Li uH": "1290"}, True),
        ({}, {"Li uH": "1340"}, False),
        ({}, {"Ci nF": ""}, False),
        ({"cable type": ""}, {}, False),
        ({"area classification": "Zone 1 IIB T4"}, {}, True),
        ({"area classification": "Cl I Div 1 Gr D T4"}, {}, False),
        ({"card": "AIX"}, {}, False),
    ],
)
def test_what_plainly_holds_passes_line_by_line(changes: Row, types: Row, plainly: bool) -> None:
    plant = plant_of({**TAG, **changes}, types=[{**TYPES[0], **types}, *TYPES[1:]])
    circuit = circuit_of(plant)
    found = plainly_holds(intrinsic(circuit, plant), plant)
    assert (found is not None) is plainly
    if plainly:
        entity = entity_comparison(circuit, plant)
        assert entity.comparison is not None
        assert entity.comparison.passes is True
        assert (entity.assumed, entity.harder, entity.linear) == ((), None, True)
        assert found == ("ZB: a zener barrier's output characteristic is taken as linear",)
