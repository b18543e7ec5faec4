"""What stands on a sheet, against figures worked by hand."""

from __future__ import annotations

from typing import Any

import pytest

from instruments.area import Area
from instruments.quantity import read_range
from loops.plant import Plant
from loops.sheet.content import (
    NOT_APPLICABLE,
    CircuitContent,
    SettingValue,
    SheetContent,
    classification_text,
    power_of,
    range_text,
    setting_value,
    sheet_content,
)
from loops.sheet.pack import sheets_of
from tests.loops.sheet.plants import AREAS, LOOP, ORIFICE, TERMINATIONS, TRANSMITTER, TYPES, works
from validation.example import example_plant, said


def sheet(plant: Plant, name: str = "", notes: list[str] | None = None) -> SheetContent:
    loop = next(loop for loop in sheets_of(plant).drawn if name in ("", loop.name))
    return sheet_content(loop, plant, notes=notes)


def one_circuit(plant: Plant, name: str = "") -> CircuitContent:
    (circuit,) = sheet(plant, name).circuits
    return circuit


def field_of(circuit: CircuitContent, label: str) -> str | None:
    return {field.label: field.value for field in circuit.fields}[label]


def test_the_title_block() -> None:
    content = sheet(works(), "P-101")
    shown = {
        name: getattr(content, name)
        for name in (
            "loop", "plant", "source", "service", "unit", "area", "classification", "pid", "line", "equipment",
            "drawing",
        )
    }  # fmt: skip
    assert shown == {
        "loop": "P-101",
        "plant": "Marrowbeck Works",
        "source": "list.xlsx",
        "service": "Feed pump discharge pressure",
        "unit": None,
        "area": "A1 Tank farm",
        "classification": "Zone 1, IIB, T3",
        "pid": "PID-1",
        "line": "L-100",
        "equipment": "P-100",
        "drawing": "LD-P-101",
    }


def test_the_devices() -> None:
    (line,) = sheet(works(), "P-101").devices
    assert (line.tag, line.kind, line.service) == ("PT-101", "transmitter", None)
    assert (line.type_code, line.maker) == ("PT-A", "Quillmoor QP-4")
    assert (line.field_range, line.system_range, line.location) == ("0 to 10 barg", "0 to 10 barg", "field")
    solenoid = next(line for line in sheet(works(), "X-106").devices if line.tag == "XY-106")
    assert (solenoid.kind, solenoid.service) == ("solenoid *", "Feed shut-off, solenoid")
    assert (solenoid.type_code, solenoid.location) == (None, None)
    assert (solenoid.field_range, solenoid.system_range) == (NOT_APPLICABLE, NOT_APPLICABLE)


def test_a_derived_kind_is_marked_and_listed() -> None:
    content = sheet(works(), "X-106")
    assert {line.kind for line in content.devices} == {"on/off valve *", "solenoid *", "switch *"}
    assert content.assumed == ("kind, by the letters of the tag: XV-106, XY-106, ZSO-106",)


def test_the_service_is_what_is_measured_else_what_is_driven() -> None:
    assert sheet(works(), "X-106").service == "Feed shut-off"
    assert sheet(works(), "F-105").service == "Feed control"


@pytest.mark.parametrize(
    ("name", "text", "percent", "ma"),
    [
        ("setting_h", "8 barg", 80.0, 16.8),
        ("setting_l", "1 barg", 10.0, 5.6),
        ("trip", "9 barg", 90.0, 18.4),
    ],
)
def test_a_setting_on_its_span(name: str, text: str, percent: float, ma: float) -> None:
    plant = works()
    (each,) = plant.by_tag("PT-101")
    value = setting_value(getattr(each.record, name), each, plant)
    assert value.text == text
    assert value.percent == pytest.approx(percent)
    assert value.ma == pytest.approx(ma)


@pytest.mark.parametrize(
    ("changes", "percent", "ma"),
    [
        ({}, 25.0, 8.0),  # the root is taken in the device: the current goes with the flow
        ({"square root in device": "no", "square root in system": "yes"}, 25.0, 5.0),  # 4 + 16 x 0.25 squared
        ({"L": "40", "settings unit": "mbar"}, 16.0, 10.4),  # 4 + 16 x root of 0.16
        ({"L": "4", "settings unit": "kPa"}, 16.0, 10.4),
        ({"L": "25", "settings unit": "degC"}, None, None),
        ({"signal": "Pt100"}, 25.0, None),
        ({"signal": ""}, 25.0, None),
        ({"LRV": "250", "URV": "0", "system LRV": "", "system URV": "", "L": "62.5", "settings unit": "mbar",
          "square root in device": "no"}, 75.0, 16.0),
        ({"LRV": "0", "URV": "0", "system LRV": "", "system URV": "", "L": "1", "settings unit": "mbar"}, None, None),
    ],
)  # fmt: skip
def test_where_a_setting_of_a_flow_stands(changes: dict[str, Any], percent: float | None, ma: float | None) -> None:
    plant = example_plant([{**ORIFICE, **changes}])
    (each,) = plant.by_tag("FT-102")
    value = setting_value(each.record.setting_l, each, plant)  # type: ignore[arg-type]
    assert value.percent == (None if percent is None else pytest.approx(percent))
    assert value.ma == (None if ma is None else pytest.approx(ma))


@pytest.mark.parametrize(
    "row",
    [
        {"tag": "LIT-5", "LRV": "0", "URV": "6", "range unit": "m", "signal": "4-20 mA", "HH": "6.5"},
        {"tag": "LIT-5", "LRV": "6", "URV": "0", "range unit": "m", "signal": "4-20 mA", "LL": "7"},
        {**ORIFICE, "L": "", "HH": "110"},
        {**ORIFICE, "L": "", "HH": "110", "square root in device": "no", "square root in system": "yes"},
        {**ORIFICE, "L": "", "HH": "300", "settings unit": "mbar"},
        {"tag": "PT-5", "LRV": "0", "URV": "6", "range unit": "barg", "signal": "4-20 mA", "HH": "7.6",
         "settings unit": "bara"},
    ],
)  # fmt: skip
def test_the_sheet_and_the_rule_give_one_current(row: dict[str, Any]) -> None:
    plant = example_plant([row])
    (each,) = plant.by_tag(row["tag"])
    setting = each.record.setting_hh or each.record.setting_ll
    assert setting is not None
    value = setting_value(setting, each, plant)
    assert value.ma is not None
    (message,) = said("SET07", [row])
    assert f"needs {round(value.ma, 3):g} mA" in message


def test_a_pressure_referred_to_nothing_is_read_as_the_plant_s_default() -> None:
    row = {
        "tag": "PT-5",
        "LRV": "0",
        "URV": "5",
        "range unit": "bar",
        "H": "2",
        "settings unit": "bara",
        "I/O type": "AI",
    }
    content = sheet(example_plant([row]))
    (line,) = content.settings
    high = line.values[2]
    assert isinstance(high, SettingValue)
    assert high.percent == pytest.approx(19.735)
    assert "a pressure without stated reference is gauge: PT-5" in content.assumed


def test_which_devices_have_a_line_for_settings() -> None:
    assert [line.tag for line in sheet(works(), "X-106").settings] == []
    (line,) = sheet(works(), "T-103").settings
    assert line.values == (None,) * 5
    switch = example_plant([{"tag": "PSH-1", "I/O type": "DI", "trip": "5 barg", "trip direction": "high"}])
    (line,) = sheet(switch).settings
    assert line.values == (NOT_APPLICABLE,) * 4 + (SettingValue(text="5 barg"),)
    assert line.direction == "high"


def test_a_set_pressure_stands_where_a_trip_would() -> None:
    rows = [{"tag": "PT-1", "I/O type": "AI"}, {"tag": "PSV-1", "set pressure": "12 barg", "loop": "P-1"}]
    lines = {line.tag: line for line in sheet(example_plant(rows)).settings}
    assert lines["PSV-1"].values[-1] == SettingValue(text="set 12 barg")


def test_the_power_budget() -> None:
    """24 V less 340 + 250 ohm and 1000 m of 1.5 mm2: 2 x 12.1 ohm x (1 + 0.00393 x 50) = 28.9553 ohm at 70 degC."""
    power = one_circuit(works(), "P-101").power
    assert power is not None
    assert (power.current_ma, power.source_v, power.lift_off_v) == (22.0, 24.0, 10.5)
    lines = {line.name: (line.ohm, line.drop_v, line.drop_20_v) for line in power.lines}
    assert lines == {
        "barrier": (340.0, pytest.approx(7.48), pytest.approx(6.8)),
        "receiver": (250.0, pytest.approx(5.5), pytest.approx(5.0)),
        "cable 1000 m, both ways, 70 °C": (
            pytest.approx(28.9553, abs=5e-5),
            pytest.approx(0.637, abs=5e-4),
            pytest.approx(0.579, abs=5e-4),
        ),
    }
    assert power.at_terminals_v == pytest.approx(10.383, abs=5e-4)
    assert power.margin_v == pytest.approx(-0.117, abs=5e-4)
    assert power.at_terminals_20_v == pytest.approx(11.621, abs=5e-4)
    assert power.margin_20_v == pytest.approx(1.121, abs=5e-4)
    assert (power.missing, power.assumed) == ((), ())


def test_the_sheet_and_the_rule_work_one_budget() -> None:
    power = one_circuit(works(), "P-101").power
    assert power is not None
    (message,) = said("ELC01", [TRANSMITTER], types=TYPES, loops=[LOOP], areas=AREAS)
    assert f"gets {power.at_terminals_v:.3f} V at 22 mA" in message
    assert f"short by {-(power.margin_v or 0.0):.3f} V" in message


def test_a_budget_names_what_it_lacks_and_what_it_assumes() -> None:
    row = {**TRANSMITTER, "device type": "", "conductor size": "", "barrier": ""}
    circuit = one_circuit(example_plant([row], loops=[{**LOOP, "range resistor": "", "supply V min": ""}]))
    assert circuit.power is not None
    assert set(circuit.power.missing) == {"lift-off V", "supply V min", "conductor size"}
    assert circuit.power.margin_v is None
    assert [(line.name, line.ohm, line.assumed) for line in circuit.power.lines] == [("receiver", 250.0, True)]


def test_an_assumed_supply_and_receiver_are_marked() -> None:
    loop = {**LOOP, "range resistor": "", "supply V min": "", "supply V nominal": "24", "cable length": "10"}
    content = sheet(example_plant([{**TRANSMITTER, "barrier": ""}], types=TYPES, loops=[loop]))
    power = content.circuits[0].power
    assert power is not None
    assert power.source_assumed
    assert power.source_v == pytest.approx(22.8)
    assert [line.assumed for line in power.lines if line.name == "receiver"] == [True]
    assert "receiver 250 ohm: PT-101" in content.assumed
    assert "supply 24 V may be 5 % low: PT-101" in content.assumed


def test_no_budget_where_none_is_asked_for() -> None:
    plant = works()
    kinds = {circuit.kind: power_of(circuit, plant) for circuit in plant.circuits if circuit.kind != "AI"}
    assert kinds == {"RTD": None, "TC": None, "AO": None, "DO": None, "DI": None}
    wires = one_circuit(example_plant([{**TRANSMITTER, "wires": ""}], types=TYPES)).power
    assert wires is not None
    assert wires.missing == ("wires: whether it is a 2-wire transmitter",)


@pytest.mark.parametrize(
    ("label", "value"),
    [
        ("Signal", "4-20 mA HART"),
        ("Wires", "2-wire"),
        ("I/O type", "AI"),
        ("I/O address", "1.1.1"),
        ("Card", "AI-8"),
        ("Barrier or isolator", "ZB-28"),
        ("Power supply", None),
        ("Supply V", "24 min"),
        ("Receiver ohm", "250"),
        ("HART", "yes"),
        ("Intrinsically safe", None),
        ("Junction box", "JB-1"),
        ("Terminals", "X1:1,X1:2"),
        ("Cable", "C-101"),
        ("Cable type", None),
        ("Cable length m", "1000"),
        ("Conductor", "1.5 mm2"),
        ("Pair", "1"),
        ("On failure the signal goes", "high"),
    ],
)
def test_the_wiring_as_given(label: str, value: str | None) -> None:
    assert field_of(one_circuit(works(), "P-101"), label) == value


def test_a_run_of_several_cables() -> None:
    row = {**TRANSMITTER, "cable": "C-1, MC-1", "conductor size": "", "cable type": ""}
    sheets: dict[str, Any] = {
        "cables": [
            {"number": "C-1", "type": "A", "length": "40", "pairs": "1"},
            {"number": "MC-1", "type": "B", "length": "100", "pairs": "8"},
        ],
        "cable_types": [{"code": "A", "conductor size": "1.5"}, {"code": "B", "conductor size": "0.75"}],
    }
    circuit = one_circuit(example_plant([row], **sheets))
    assert field_of(circuit, "Cable length m") == "140 (sum of its cables)"
    assert field_of(circuit, "Cable type") == "C-1: A, MC-1: B"
    assert field_of(circuit, "Conductor") == "C-1: 1.5 mm\u00b2, MC-1: 0.75 mm\u00b2"
    sheets["cable_types"][1]["conductor size"] = "1.5"
    assert field_of(one_circuit(example_plant([row], **sheets)), "Conductor") == "1.5 mm\u00b2"


def test_contacts_and_valves_show_their_own() -> None:
    circuits = {circuit.device: circuit for circuit in sheet(works(), "X-106").circuits}
    assert field_of(circuits["ZSO-106"], "Contact") == "NO"
    assert "Receiver ohm" not in {field.label for field in circuits["ZSO-106"].fields}
    assert field_of(one_circuit(works(), "F-105"), "Fails to") == "closed"


@pytest.mark.parametrize(
    ("volts", "shown"),
    [
        ({"supply V nominal": "24"}, "24 nominal"),
        ({"supply V min": "21", "supply V nominal": "24", "supply V max": "24.7"}, "24 nominal (21 to 24.7)"),
        ({"supply V min": "21", "supply V max": "28"}, "21 to 28"),
        ({"supply V max": "28"}, "28 max"),
        ({}, None),
    ],
)
def test_the_supply(volts: dict[str, str], shown: str | None) -> None:
    loop = {"number": "P-101", "circuit or tag": "PT-101", "kind": "AI", **volts}
    assert field_of(one_circuit(example_plant([TRANSMITTER], loops=[loop])), "Supply V") == shown


def test_the_terminations_of_a_circuit() -> None:
    first, second = one_circuit(works(), "P-101").conductors
    assert (first.from_item, first.from_terminal, first.to_item, first.to_terminal) == ("PT-101", "+", "JB-1", "X1:1")
    assert (first.cable, first.pair, first.core, first.colour, first.wire_mark) == (
        "C-101",
        "1",
        "1",
        "white",
        "PT-101+",
    )
    assert (second.from_terminal, second.screen) == (None, "MAR-1")


@pytest.mark.parametrize("called", ["PT-101", "P-101", "pt 101"])
def test_terminations_are_found_by_tag_or_by_loop(called: str) -> None:
    plant = example_plant([TRANSMITTER], terminations=[{**TERMINATIONS[0], "circuit or tag": called}])
    assert len(one_circuit(plant).conductors) == 1


def test_the_terminations_of_a_loop_of_two_circuits_are_nobodys() -> None:
    rows = [{"tag": "PT-1A", "I/O type": "AI", "loop": "P-1"}, {"tag": "PT-1B", "I/O type": "AI", "loop": "P-1"}]
    plant = example_plant(rows, terminations=[{**TERMINATIONS[0], "circuit or tag": "P-1"}])
    assert len(plant.terminations) == 1
    assert [circuit.conductors for circuit in sheet(plant).circuits] == [(), ()]


@pytest.mark.parametrize(
    ("text", "shown"),
    [("0-40 mbarg", "0 to 40 mbarg"), ("-1..3 bar", "-1 to 3 bar"), ("10-0 m", "10 to 0 m"), ("0 mbar - 1 bar", None)],
)
def test_a_range(text: str, shown: str | None) -> None:
    read = read_range(text)
    lrv, urv, _ = read  # type: ignore[misc]
    assert range_text(lrv, urv) == (shown or "0 mbar to 1 bar")
    assert range_text(None, urv) == f"? to {urv}"
    assert range_text(None, None) is None


@pytest.mark.parametrize(
    ("area", "text"),
    [
        (Area(zone="1", gas_group="IIB", temperature_class="T3"), "Zone 1, IIB, T3"),
        (Area(zone="21", dust_group="IIIC", dust_surface_c=135.0), "Zone 21, IIIC, dust 135 °C"),
        (Area(system="none", zone="1"), "no hazardous area"),
        (Area(code="Zone 2 IIB T3", zone="2", from_row_cell=True), "Zone 2 IIB T3"),
        (Area(zone="0", epl_required="Ga", ambient_max_c=45.0), "Zone 0, EPL Ga, ambient ? to 45 °C"),
        (Area(code="A1"), None),
    ],
)
def test_a_classification_as_listed(area: Area, text: str | None) -> None:
    assert classification_text(area) == text


def test_a_row_s_own_classification_and_none_at_all() -> None:
    rows = [{"tag": "PT-1", "I/O type": "AI", "area classification": "Zone 2 IIB T3"}]
    assert sheet(example_plant(rows)).classification == "Zone 2 IIB T3"
    assert (
        sheet(example_plant([{"tag": "PT-1", "I/O type": "AI", "area": "safe"}])).classification == "no hazardous area"
    )
    assert sheet(example_plant([{"tag": "PT-1", "I/O type": "AI"}])).classification is None


def test_several_areas_are_told_apart() -> None:
    rows = [
        {"tag": "PT-1", "I/O type": "AI", "area": "A1", "location": "field"},
        {"tag": "PV-1", "I/O type": "AO", "area": "A2", "location": "field"},
    ]
    content = sheet(example_plant(rows, areas=AREAS))
    assert content.area == "A1 Tank farm, A2 Boiler house"
    assert content.classification == "A1: Zone 1, IIB, T3; A2: no hazardous area"
    assert [line.location for line in content.devices] == ["field, A1", "field, A2"]


def test_remarks_and_holds_are_handed_on() -> None:
    rows = [{"tag": "PT-1", "I/O type": "AI", "hold": "data sheet", "remarks": "by others"}]
    assert sheet(example_plant(rows)).remarks == (("PT-1", "hold: data sheet"), ("PT-1", "by others"))


def test_notes_are_taken_as_they_come() -> None:
    assert sheet(works(), "P-101").notes is None
    assert sheet(works(), "P-101", notes=["<b>a</b>"]).notes == ("<b>a</b>",)
