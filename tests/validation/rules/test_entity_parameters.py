"""The entity comparison as rules: what is found, reviewed, unchecked and clear, with fixes applied."""

from collections.abc import Sequence
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from loops.plant import Plant, assemble
from validation.audit import audit
from validation.example import example_plant
from validation.finding import Finding, Fix, Outcome
from validation.mend import mended

Row = dict[str, Any]

DEVICE: Row = {
    "code": "T1", "kind": "transmitter", "signal": "4-20 mA", "Ex marking": "Ex ia IIC T4 Ga", "Ui V": "30",
    "Ii mA": "120", "Pi mW": "1000", "Ci nF": "3", "Li uH": "10",
}  # fmt: skip
SOURCE: Row = {
    "code": "ZB", "kind": "barrier", "signal": "4-20 mA", "Ex marking": "[Ex ia Ga] IIC",
    "zener or isolator": "zener", "IS earth": "yes", "Uo V": "28", "Io mA": "93", "Po mW": "650", "Co nF IIC": "83",
    "Co nF IIB": "650", "Co nF IIA": "2150", "Lo mH IIC": "3.05", "Lo mH IIB": "12.2", "Lo mH IIA": "24.4",
}  # fmt: skip
CABLES: list[Row] = [{"code": "C1", "conductor": "1.5 mm2", "capacitance": "200 pF/m", "inductance": "1 uH/m"}]
TAG: Row = {
    "tag": "PT-101", "device type": "T1", "area classification": "Zone 1 IIC T4", "barrier": "ZB", "I/O type": "AI",
    "I/O address": "1", "signal": "4-20 mA", "wires": "2", "cable type": "C1", "cable length": "300 m",
}  # fmt: skip


def plant_of(
    tag: Row | None = None, device: Row | None = None, source: Row | None = None, *more: Row, **sheets: Any
) -> Plant:
    types = [{**DEVICE, **(device or {})}, {**SOURCE, **(source or {})}, *more]
    sheets.setdefault("cable_types", CABLES)
    rows = [{**TAG, **(tag or {})}, *sheets.pop("rows", ())]
    return example_plant(rows, types=types, **sheets)


def told(code: str, plant: Plant) -> str:
    """Return what a rule comes to on the circuit of PT-101: the outcome with its message, or the blanks."""
    result = audit(plant, codes=[code], raise_errors=True)
    if result.findings:
        return "; ".join(f"{each.outcome.value}: {each.message}" for each in result.findings)
    coverage = result.coverage[code]
    if coverage.unchecked:
        return "; ".join(f"unchecked: {', '.join(fields)}" for fields in coverage.unchecked)
    if coverage.count(Outcome.CLEAR):
        assumed = f" ({'; '.join(coverage.assumed)})" if coverage.assumed else ""
        return f"clear{assumed}"
    return "not applicable"


def findings_of(code: str, plant: Plant) -> list[Finding]:
    return audit(plant, codes=[code], raise_errors=True).findings


# --------------------------------------------------------------------------------------------- ISC02, ISC03, ISC04


@pytest.mark.parametrize(
    ("code", "device", "source", "wanted"),
    [
        ("ISC02", {}, {}, "clear"),
        ("ISC02", {"Ui V": "28"}, {}, "clear"),
        ("ISC02", {"Ui V": "27.9"}, {}, "finding: Uo 28 V of ZB is above Ui 27.9 V of PT-101, by 0.1 V"),
        ("ISC02", {"Ui V": ""}, {}, "unchecked: Ui V"),
        ("ISC02", {}, {"Uo V": ""}, "unchecked: Uo V"),
        ("ISC02", {}, {"Uo V": "28 000 mV"}, "clear"),
        ("ISC03", {}, {}, "clear"),
        ("ISC03", {"Ii mA": "93"}, {}, "clear"),
        ("ISC03", {"Ii mA": "92.9"}, {}, "finding: Io 93 mA of ZB is above Ii 92.9 mA of PT-101, by 0.1 mA"),
        ("ISC03", {"Ii mA": ""}, {}, "unchecked: Ii mA"),
        ("ISC03", {"Ii mA": "TBA"}, {}, "unchecked: Ii mA"),
        ("ISC03", {"Ii mA": "n/a"}, {}, "not applicable"),
        ("ISC03", {}, {"Io mA": ""}, "unchecked: Io mA"),
        ("ISC04", {}, {}, "clear"),
        ("ISC04", {"Pi mW": "0.65 W"}, {}, "clear"),
        ("ISC04", {"Pi mW": "0.649 W"}, {}, "finding: Po 650 mW of ZB is above Pi 649 mW of PT-101, by 1 mW"),
        ("ISC04", {"Pi mW": ""}, {}, "unchecked: Pi mW"),
        ("ISC04", {}, {"Po mW": ""}, "unchecked: Po mW"),
    ],
)
def test_each_limit_and_each_blank(code: str, device: Row, source: Row, wanted: str) -> None:
    assert told(code, plant_of(device=device, source=source)) == wanted


EVERY = ("ISC02", "ISC03", "ISC04", "ISC05", "ISC06", "ISC07", "ISC08")


@pytest.mark.parametrize(
    ("tag", "source", "wanted"),
    [
        ({"area classification": "safe"}, {}, {"not applicable"}),
        ({"area classification": ""}, {}, {"unchecked: area"}),
        ({"barrier": ""}, {}, {"unchecked: barrier"}),
        ({"barrier": "X9"}, {}, {"unchecked: barrier"}),
        ({"Ex marking": "Ex db IIC T4 Gb"}, {"Ex marking": "", "Uo V": "", "Io mA": "", "Po mW": ""},
         {"not applicable"}),
    ],
)  # fmt: skip
def test_what_is_no_ex_i_circuit_or_has_no_source(tag: Row, source: Row, wanted: set[str]) -> None:
    plant = plant_of(tag, source=source)
    assert {told(code, plant) for code in EVERY} == wanted


def test_each_device_on_the_circuit_is_found_by_itself() -> None:
    indicator = {
        "tag": "PI-101", "kind": "indicator", "location": "field", "signal": "4-20 mA", "device type": "L1",
        "area classification": "Zone 1 IIC T4",
    }  # fmt: skip
    other = {**DEVICE, "code": "L1", "kind": "indicator", "Ui V": "24", "Ii mA": "90"}
    plant = plant_of({}, {"Ui V": "26"}, {}, other, rows=[indicator])
    found = findings_of("ISC02", plant)
    assert [(each.subject, each.part, each.message) for each in found] == [
        ("P-101", "PI-101", "Uo 28 V of ZB is above Ui 24 V of PI-101, by 4 V"),
        ("P-101", "PT-101", "Uo 28 V of ZB is above Ui 26 V of PT-101, by 2 V"),
    ]
    assert [each.part for each in findings_of("ISC03", plant)] == ["PI-101"]


def test_simple_apparatus_has_no_limits() -> None:
    plant = plant_of({"tag": "TS-101", "kind": "switch", "signal": "contact", "device type": "", "I/O type": "DI",
                      "simple apparatus": "yes"})  # fmt: skip
    assert {code: told(code, plant) for code in EVERY} == {
        "ISC02": "not applicable", "ISC03": "not applicable", "ISC04": "not applicable",
        "ISC05": "clear (ZB: a zener barrier's output characteristic is taken as linear)",
        "ISC06": "clear (ZB: a zener barrier's output characteristic is taken as linear)",
        "ISC07": "clear", "ISC08": "clear",
    }  # fmt: skip


def test_a_finding_shows_its_figures_its_working_and_its_cells() -> None:
    (found,) = findings_of("ISC02", plant_of(device={"Ui V": "24"}))
    assert (found.found, found.wanted, found.off_by) == ("Uo 28 V", "at most Ui 24 V", "4 V")
    assert found.working == "Uo 28 V (ZB); Ui 24 V of PT-101 (type T1)"
    assert {(cell.sheet, cell.row) for cell in found.cells} == {
        ("Instruments", 2), ("Device types", 2), ("Device types", 3)
    }  # fmt: skip
    assert found.severity.value == "danger"


# --------------------------------------------------------------------------------------------------- ISC05, ISC06

LINEAR = " (ZB: a zener barrier's output characteristic is taken as linear)"
IEC_BASIS = "IEC 60079-14:2013 16.2.2, from memory"
C_DEFAULT, L_DEFAULT = f"cable 200 pF/m ({IEC_BASIS})", f"cable 1 uH/m ({IEC_BASIS})"
US_BASIS = "60 pF/ft and 0.20 uH/ft of ANSI/ISA RP12.06.01, from memory"


@pytest.mark.parametrize(
    ("tag", "device", "source", "wanted"),
    [
        ({}, {}, {}, f"clear{LINEAR}"),
        ({}, {}, {"output characteristic": "linear"}, "clear"),
        ({"cable length": "400 m"}, {}, {}, f"clear{LINEAR}"),
        ({"cable length": "401 m"}, {}, {}, "finding: capacitance 83.2 nF at ZB, Co for IIC 83 nF: over by 0.2 nF"),
        # Halved from one percent of both on.
        ({"cable length": "192 m"}, {"Li uH": "30.5"}, {}, f"clear{LINEAR}"),
        ({"cable length": "193 m"}, {"Li uH": "30.5"}, {},
         "finding: capacitance 41.6 nF at ZB, Co for IIC halved 41.5 nF: over by 0.1 nF"),
        ({"cable length": "193 m"}, {"Li uH": "30.4"}, {}, f"clear{LINEAR}"),
        ({"cable length": "193 m"}, {"Li uH": "30.5"}, {"combined pairs": "yes"}, f"clear{LINEAR}"),
        # The group.
        ({"area classification": "Zone 1 IIB T4", "cable length": "3000 m"}, {}, {}, f"clear{LINEAR}"),
        ({"area classification": "Zone 1 T4"}, {}, {}, "unchecked: area gas group"),
        ({}, {}, {"Co nF IIC": ""}, "unchecked: Co nF IIC"),
        ({"area classification": "Zone 21 IIIC T120°C", "cable length": "3000 m"},
         {"Ex marking": "Ex ia IIIC T100°C Db"}, {}, f"clear{LINEAR}"),
        # Blanks.
        ({}, {"Ci nF": ""}, {}, "unchecked: Ci nF"),
        ({}, {"Ci nF": "negligible"}, {}, f"clear{LINEAR}"),
        ({"cable length": ""}, {}, {}, "unchecked: cable length"),
        ({"cable length": ""}, {"Ci nF": "83.1"}, {},
         "finding: capacitance 83.1 nF at ZB, Co for IIC 83 nF: over by 0.1 nF"),
        ({"cable type": "C9"}, {}, {}, "unchecked: cable type"),
        ({"cable type": ""}, {}, {}, f"clear ({C_DEFAULT}; {L_DEFAULT}; {LINEAR[2:-1]})"),
        ({"cable type": "", "cable length": "401 m"}, {}, {},
         "review: capacitance 83.2 nF at ZB, Co for IIC 83 nF: over by 0.2 nF"),
        ({"cable type": "", "area classification": "Cl I Div 1 Gr B T4"}, {},
         {}, f"clear (cable 196.85 pF/m ({US_BASIS}); cable 0.656168 uH/m ({US_BASIS}); {LINEAR[2:-1]})"),
        # The characteristic.
        ({}, {}, {"output characteristic": "rectangular"},
         "review: the output characteristic of ZB is not linear: its limits for capacitance hold by its"
         " certificate's pairs alone (63 nF on the circuit)"),
        ({}, {}, {"zener or isolator": "isolator"}, "unchecked: output characteristic"),
        ({}, {}, {"zener or isolator": "isolator", "output characteristic": "linear"}, "clear"),
        ({"cable length": "401 m"}, {}, {"zener or isolator": "isolator"},
         "finding: capacitance 83.2 nF at ZB, Co for IIC 83 nF: over by 0.2 nF"),
    ],
)  # fmt: skip
def test_capacitance(tag: Row, device: Row, source: Row, wanted: str) -> None:
    assert told("ISC05", plant_of(tag, device, source)) == wanted


SHORT_LO = {"Lo mH IIC": "0.31"}


@pytest.mark.parametrize(
    ("tag", "device", "source", "cables", "wanted"),
    [
        ({}, {"Ci nF": "0"}, SHORT_LO, {}, f"clear{LINEAR}"),
        ({"cable length": "301 m"}, {"Ci nF": "0"}, SHORT_LO, {},
         "finding: inductance 0.311 mH at ZB, Lo for IIC 0.31 mH: over by 0.001 mH"),
        # Both lumped parts are beyond one percent: half of Lo is left.
        ({}, {}, SHORT_LO, {}, "finding: inductance 0.31 mH at ZB, Lo for IIC halved 0.155 mH: over by 0.155 mH"),
        ({}, {"Li uH": ""}, {}, {}, "unchecked: Li uH"),
        ({}, {}, {"Lo mH IIC": ""}, {}, "unchecked: Lo mH IIC"),
        ({"cable length": ""}, {}, {}, {}, "unchecked: cable length"),
        ({"cable type": "", "cable length": "301 m"}, {"Ci nF": "0"}, SHORT_LO, {},
         "review: inductance 0.311 mH at ZB, Lo for IIC 0.31 mH: over by 0.001 mH"),
        # L/R: equal is enough, if the devices store less than one percent of Lo.
        ({"cable length": "400 m"}, {"Li uH": "3"}, {**SHORT_LO, "Lo/Ro": "27"}, {"inductance/resistance": "27"},
         f"clear{LINEAR}"),
        ({"cable length": "400 m"}, {"Li uH": "3"}, {**SHORT_LO, "Lo/Ro": "26.9"}, {"inductance/resistance": "27"},
         "finding: inductance 0.403 mH at ZB, Lo for IIC 0.31 mH: over by 0.093 mH"),
        ({"cable length": "400 m"}, {"Li uH": "3.1", "Ci nF": "0"}, {**SHORT_LO, "Lo/Ro": "27"},
         {"inductance/resistance": "27"}, "review: inductance 0.4031 mH at ZB, Lo for IIC 0.31 mH: over by 0.0931 mH"),
        # The standard's 30 uH/ohm for a cable that states no ratio.
        ({"cable length": "400 m"}, {"Li uH": "3"}, {**SHORT_LO, "Lo/Ro": "30"}, {},
         f"clear (cable 30 uH/ohm ({IEC_BASIS}); {LINEAR[2:-1]})"),
        ({"cable length": "400 m"}, {"Li uH": "3"}, {**SHORT_LO, "Lo/Ro": "29"}, {},
         "review: inductance 0.403 mH at ZB, Lo for IIC 0.31 mH: over by 0.093 mH"),
        # The characteristic, as for the capacitance.
        ({}, {}, {"output characteristic": "other"}, {},
         "review: the output characteristic of ZB is not linear: its limits for inductance hold by its"
         " certificate's pairs alone (0.31 mH on the circuit)"),
        ({}, {}, {"zener or isolator": "isolator"}, {}, "unchecked: output characteristic"),
    ],
)  # fmt: skip
def test_inductance(tag: Row, device: Row, source: Row, cables: Row, wanted: str) -> None:
    assert told("ISC06", plant_of(tag, device, source, cable_types=[{**CABLES[0], **cables}])) == wanted


@pytest.mark.parametrize(
    ("group", "gas", "length_m", "wanted"),
    [
        ("D", "", "3235 m", f"clear{LINEAR}"),  # 650 nF: what IIB may store, D may
        ("D", "", "3236 m",
         "review: Group D of area A, no gas named: IIA or IIB; capacitance 650.2 nF is above Co 650 nF for IIB"),
        ("D", "Methane", "3236 m", f"clear{LINEAR}"),
        ("D", "Ethanol", "3236 m", "finding: capacitance 650.2 nF at ZB, Co for IIB 650 nF: over by 0.2 nF"),
        ("D", "", "10736 m", "finding: capacitance 2150.2 nF at ZB, Co for IIA 2150 nF: over by 0.2 nF"),
        ("C", "", "401 m",
         "review: Group C of area A, no gas named: IIB or IIC; capacitance 83.2 nF is above Co 83 nF for IIC"),
        ("C", "Ethylene", "401 m", f"clear{LINEAR}"),
        ("B", "", "401 m", "finding: capacitance 83.2 nF at ZB, Co for IIC 83 nF: over by 0.2 nF"),
    ],
)  # fmt: skip
def test_a_division_is_translated_and_the_doubt_is_for_a_person(
    group: str, gas: str, length_m: str, wanted: str
) -> None:
    area = {"code": "A", "class": "I", "division": "1", "gas group": group, "temperature class": "T3", "gas": gas}
    device = {"Ex marking": "Class I, Zone 0, AEx ia IIC T4 Ga"}
    plant = plant_of({"area classification": "", "area": "A", "cable length": length_m}, device, areas=[area])
    assert told("ISC05", plant) == wanted


def test_a_source_marked_for_the_divisions_groups_states_their_own_pairs() -> None:
    area = {"code": "A", "class": "I", "division": "1", "gas group": "D", "temperature class": "T3"}
    tag = {"area classification": "", "area": "A", "cable length": "3236 m"}
    source = {"Ex marking": "Class I Div 1 Groups A,B,C,D associated"}
    device = {"Ex marking": "Class I, Zone 0, AEx ia IIC T4 Ga"}
    assert told("ISC05", plant_of(tag, device, source, areas=[area])) == f"clear{LINEAR}"


# ----------------------------------------------------------------------------------------------------- ISC07, ISC08


@pytest.mark.parametrize(
    ("device", "source", "wanted"),
    [
        ({}, {}, "clear"),
        ({"Pi mW": ""}, {}, "review: PT-101 states Ui, Ii, Ci, Li and no Pi"),
        ({"Pi mW": "n/a"}, {}, "clear"),
        ({"Pi mW": "", "Ex marking": ""}, {}, "unchecked: Ex marking"),
        ({"Pi mW": "", "Ex marking": "Ex db IIC T4 Gb"}, {}, "clear"),
        ({"Ii mA": "n/a"}, {}, "clear"),
        ({"Ui V": "n/a"}, {}, "review: PT-101 states Ii, Pi, Ci, Li and no Ui"),
        ({"Ci nF": "n/a"}, {}, "review: PT-101 states Ui, Ii, Pi, Li and no Ci"),
        ({"Ci nF": "0", "Li uH": "negligible"}, {}, "clear"),
        ({"Ci nF": "", "Li uH": ""}, {}, "review: PT-101 states Ui, Ii, Pi and no Ci, Li"),
        (dict.fromkeys(("Ui V", "Ii mA", "Pi mW", "Ci nF", "Li uH"), ""), {},
         "unchecked: Ui V, Ii mA, Pi mW, Ci nF, Li uH"),
        ({}, {"Po mW": ""}, "review: ZB states Uo, Io, Co, Lo and no Po"),
        ({}, {"Lo mH IIC": "", "Lo mH IIB": "", "Lo mH IIA": ""}, "review: ZB states Uo, Io, Po, Co and no Lo"),
        ({}, {"Lo mH IIC": "", "Lo mH IIB": "", "Lo mH IIA": "", "Lo/Ro": "54"}, "clear"),
        # That the pairs are another group's is found as that.
        ({}, {"Co nF IIC": "", "Lo mH IIC": ""}, "clear"),
        (dict.fromkeys(("Ui V", "Ii mA", "Pi mW", "Ci nF", "Li uH"), ""), {"Uo V": ""},
         "review: ZB states Io, Po, Co, Lo and no Uo"),
    ],
)  # fmt: skip
def test_what_states_only_part(device: Row, source: Row, wanted: str) -> None:
    assert told("ISC07", plant_of(device=device, source=source)) == wanted


@pytest.mark.parametrize(
    ("area", "source", "wanted"),
    [
        ("Zone 1 IIC T4", {}, "clear"),
        ("Zone 1 IIC T4", {"Co nF IIC": "", "Lo mH IIC": ""},
         "finding: ZB states Co and Lo for IIB and IIA only; IIC of area Zone 1 IIC T4 asks for IIC"),
        ("Zone 1 IIC T4", {"Lo mH IIC": ""},
         "finding: ZB states Lo for IIB and IIA only; IIC of area Zone 1 IIC T4 asks for IIC"),
        ("Zone 1 IIB T4", {"Co nF IIC": "", "Lo mH IIC": ""}, "clear"),
        ("Zone 1 IIB T4", {"Co nF IIB": "", "Lo mH IIB": ""}, "clear"),
        ("Zone 1 IIB T4", {"Co nF IIC": "", "Lo mH IIC": "", "Co nF IIB": "", "Lo mH IIB": ""},
         "finding: ZB states Co and Lo for IIA only; IIB of area Zone 1 IIB T4 asks for IIB"),
        ("Zone 21 IIIC T120°C", {"Co nF IIC": "", "Lo mH IIC": "", "Co nF IIB": "", "Lo mH IIB": ""},
         "finding: ZB states Co and Lo for IIA only; dust in area Zone 21 IIIC T120°C takes IIB, from memory"
         " asks for IIB"),
        ("Zone 1 T4", {}, "unchecked: area gas group"),
        ("Zone 1 IIC T4", dict.fromkeys(("Co nF IIC", "Co nF IIB", "Co nF IIA"), ""), "unchecked: Co nF IIC"),
        ("Zone 1 IIC T4", {"Ex marking": "[Ex ia Ga] IIB"},
         "finding: ZB is marked for circuits in IIB; IIC of area Zone 1 IIC T4 asks for IIC"),
        ("Zone 1 IIB T4", {"Ex marking": "[Ex ia Ga] IIB"}, "clear"),
        ("Zone 1 IIC T4", {"Ex marking": "[Ex ia Ga] IIB; [Ex ia Ga] IIC"}, "clear"),
    ],
)  # fmt: skip
def test_whose_pairs_a_source_states(area: str, source: Row, wanted: str) -> None:
    device = {"Ex marking": "Ex ia IIC T4 Ga; Ex ia IIIC T100°C Da"}
    assert told("ISC08", plant_of({"area classification": area}, device, source)) == wanted


# ----------------------------------------------------------------------------------------------------------- fixes

ISOLATOR: Row = {
    "code": "ISO-1", "kind": "isolator", "signal": "4-20 mA", "Ex marking": "[Ex ia Ga] IIC", "Uo V": "26",
    "Io mA": "90", "Po mW": "585", "Co nF IIC": "99", "Lo mH IIC": "4.2", "output characteristic": "linear",
    "zener or isolator": "isolator", "volts available at 20 mA": "16",
}  # fmt: skip


def fixes(code: str, plant: Plant) -> Sequence[Fix]:
    (found,) = findings_of(code, plant)
    return found.fixes


@pytest.mark.parametrize(
    ("changes", "wanted"),
    [
        ({}, ["source ISO-1: Uo 26 V, 1 V to spare; Io 90 mA, 30 mA to spare; Po 585 mW, 415 mW to spare;"
              " capacitance 36 nF to spare; inductance 3.89 mH to spare; cable up to 480 m"]),
        ({"Uo V": "27.1"}, []),
        ({"Io mA": "121"}, []),
        ({"Po mW": ""}, []),  # what is not stated fits nothing
        ({"Co nF IIC": "62"}, ["source ISO-1 and a cable no longer than 295 m together: Uo 26 V, 1 V to spare;"
                               " Io 90 mA, 30 mA to spare; Po 585 mW, 415 mW to spare; capacitance 0 nF to spare;"
                               " inductance 3.895 mH to spare; cable up to 295 m"]),
        ({"output characteristic": ""}, []),
        ({"output characteristic": "rectangular"}, []),
        ({"Ex marking": "[Ex ic Gc] IIC"}, []),
        ({"Ex marking": "[Ex ia Ga] IIB"}, []),
        ({"Ex marking": ""}, []),
        ({"volts available at 20 mA": "", "compliance V": "15"}, []),  # it drives an output
        ({"signal": "NAMUR"}, []),
        ({"kind": "card"}, []),
        ({"zener or isolator": "zener", "kind": "barrier"}, []),  # no IS earth recorded
    ],
)  # fmt: skip
def test_the_sources_that_fit(changes: Row, wanted: list[str]) -> None:
    plant = plant_of({}, {"Ui V": "27"}, {}, {**ISOLATOR, **changes})
    assert [each.text for each in fixes("ISC02", plant)] == wanted


@pytest.mark.parametrize(
    ("code", "tag", "device", "more", "changes"),
    [
        ("ISC02", {}, {"Ui V": "27"}, [ISOLATOR], [{"barrier": "ISO-1"}]),
        ("ISC03", {}, {"Ii mA": "92"}, [ISOLATOR], [{"barrier": "ISO-1"}]),
        ("ISC04", {}, {"Pi mW": "600"}, [ISOLATOR], [{"barrier": "ISO-1"}]),
        ("ISC05", {"cable length": "450 m"}, {}, [ISOLATOR], [{"cable length": "400"}, {"barrier": "ISO-1"}]),
        ("ISC05", {"cable length": "450 m"}, {}, [], [{"cable length": "400"}]),
        # Nothing alone: the devices leave no room, and the other source has room for a shorter cable.
        ("ISC05", {"cable length": "450 m"}, {"Ci nF": "84"}, [ISOLATOR],
         [{"barrier": "ISO-1", "cable length": "75"}]),
        ("ISC06", {"cable length": "3500 m"}, {"Ci nF": "0", "Li uH": "0"}, [{**ISOLATOR, "Co nF IIC": "900"}],
         [{"cable length": "415"}, {"barrier": "ISO-1"}]),
        ("ISC08", {}, {}, [ISOLATOR], [{"barrier": "ISO-1"}]),
    ],
)  # fmt: skip
def test_a_fix_applied_clears_its_finding(
    code: str, tag: Row, device: Row, more: list[Row], changes: list[Row]
) -> None:
    source = {"Co nF IIC": "", "Lo mH IIC": ""} if code == "ISC08" else {}
    plant = plant_of(tag, device, source, *more)
    (finding,) = findings_of(code, plant)
    assert [dict(fix.change) for fix in finding.fixes] == changes
    for fix in finding.fixes:
        after = assemble(mended(plant, finding, fix))
        assert findings_of(code, after) == []


def test_a_barrier_that_stands_in_the_loop_list_is_changed_there() -> None:
    loops = [{"number": "P-101", "circuit or tag": "PT-101", "kind": "AI", "barrier": "ZB", "cable length": "300 m"}]
    plant = plant_of({"barrier": "", "cable length": ""}, {"Ui V": "27"}, {}, ISOLATOR, loops=loops)
    (fix,) = fixes("ISC02", plant)
    assert (fix.sheet, fix.subject, dict(fix.change)) == ("Loops", "PT-101", {"barrier": "ISO-1"})


@settings(max_examples=25, deadline=None)
@given(ci_nf=st.integers(0, 60), pf_per_m=st.integers(80, 300), length_m=st.integers(1, 2000))
def test_the_longest_cable_of_a_finding_passes_and_one_metre_more_does_not(
    ci_nf: int, pf_per_m: int, length_m: int
) -> None:
    def run(metres: int) -> list[Finding]:
        cables = [{**CABLES[0], "capacitance": f"{pf_per_m} pF/m"}]
        return findings_of(
            "ISC05", plant_of({"cable length": f"{metres} m"}, {"Ci nF": str(ci_nf), "Li uH": "0"}, cable_types=cables)
        )

    found = run(length_m)
    if found:
        longest = int(found[0].fixes[0].change["cable length"])
        assert run(longest) == []
        assert run(longest + 1) != []
    else:
        assert ci_nf + pf_per_m * length_m / 1000 <= 83 + 1e-9


@pytest.mark.parametrize("code", EVERY)
def test_nothing_says_more_than_is_known(code: str) -> None:
    plants = [
        plant_of({"cable length": "5000 m"}, {"Ui V": "10", "Ii mA": "1", "Pi mW": "1"}, {}, ISOLATOR),
        plant_of({}, {"Pi mW": ""}, {"Co nF IIC": "", "Lo mH IIC": ""}, ISOLATOR),
        plant_of({}, {}, {"output characteristic": "other"}),
    ]
    for plant in plants:
        for each in findings_of(code, plant):
            texts = (each.message, each.working, *each.assumed, *(fix.text for fix in each.fixes))
            words = " ".join(texts).casefold().split()
            assert not {"safe", "certified", "compliant", "safe.", "invalid"} & set(words)
