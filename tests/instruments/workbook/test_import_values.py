"""Ranges, units, decimals and figures with words beside them, each in a real file read whole."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from openpyxl.worksheet.worksheet import Worksheet

from tests.instruments.workbook.as_sent import as_read, delimited, rows, unread, workbook

KINDS = pytest.mark.parametrize("kind", ["xlsx", "csv"])


def made(tmp_path: Path, text: str, kind: str, separator: str = ";") -> Path:
    if kind == "xlsx":
        return workbook(tmp_path / "l.xlsx", {"Cover": "Marrowbeck Works", "Index": text})
    return delimited(tmp_path / "l.csv", text, separator=separator)


RANGES = [
    pytest.param("0-100 barg", ("0 barg", "100 barg"), id="case31"),
    pytest.param("0 to 100", ("0 barg", "100 barg"), id="case32-to"),
    pytest.param("0…100", ("0 barg", "100 barg"), id="case32-dots"),
    pytest.param("0 ~ 100", ("0 barg", "100 barg"), id="case32-tilde"),
    pytest.param("0/100", ("0 barg", "100 barg"), id="case32-slash"),
    pytest.param("(0-100)", ("0 barg", "100 barg"), id="case32-brackets"),
    pytest.param("0 bis 100", ("0 barg", "100 barg"), id="case32-german"),
    pytest.param("0÷100", ("0 barg", "100 barg"), id="case32-italian"),
    pytest.param("-1-3 barg", ("-1 barg", "3 barg"), id="case33-minus"),
    pytest.param("-1 to +3", ("-1 barg", "3 barg"), id="case33-plus"),
    pytest.param("−1 – 3", ("-1 barg", "3 barg"), id="case33-real-minus"),
    pytest.param("10--5", ("10 barg", "-5 barg"), id="case33-two-minuses"),
    pytest.param("-100..-20 mbarg", ("-100 mbarg", "-20 mbarg"), id="case33-both-negative"),
    pytest.param("0-100 psig", ("0 psig", "100 psig"), id="case37-the-cells-own-unit"),
    pytest.param("0-10 kg/cm2g", ("0 kg/cm²g", "10 kg/cm²g"), id="case38-technical"),
    pytest.param("0-500 mmWC", ("0 mmH2O", "500 mmH2O"), id="case38-water-column"),
    pytest.param("FV to 3", ("-1.01325 barg", "3 barg"), id="case40-vacuum"),
    pytest.param("FV...3", ("-1.01325 barg", "3 barg"), id="case40-vacuum-dots"),
]


@pytest.mark.parametrize(("written", "wanted"), RANGES)
@KINDS
def test_a_range_is_read_however_it_is_written(
    tmp_path: Path, written: str, wanted: tuple[str, str], kind: str
) -> None:
    text = f"Tag|Service|Range (barg)\nPT-1|Feed|{written}\nPT-2|Feed|0 - 16\nPT-3|Feed|0 - 25"
    found = as_read(made(tmp_path, text, kind))
    assert [(each["lrv"], each["urv"]) for each in rows(found)] == [
        wanted,
        ("0 barg", "16 barg"),
        ("0 barg", "25 barg"),
    ]
    assert found.problems == ()


@pytest.mark.parametrize(
    ("written", "reason", "readings"),
    [
        pytest.param(
            "100", "'100' is one figure where a range is wanted", ("0 to 100 barg", "100 barg"), id="case31-one"
        ),
        pytest.param("4-20 mA", "'4-20 mA' is a signal, no range", ("signal 4-20 mA",), id="case35-signal-alone"),
        pytest.param("0-16 furlongs", "unit 'furlongs' is not known", (), id="case38-unknown"),
        pytest.param('1/2" NPT', "'1/2\" NPT' is a pipe size", (), id="case41-size"),
        pytest.param("0-10/0-16", "'0-10/0-16' holds two ranges", ("0 barg to 10 barg", "0 to 16"), id="case31-two"),
    ],
)
@KINDS
def test_what_is_no_range_is_asked_about(
    tmp_path: Path, written: str, reason: str, readings: tuple[str, ...], kind: str
) -> None:
    found = as_read(made(tmp_path, f"Tag|Service|Range (barg)\nPT-1|Feed|{written}\nPT-2|Feed|0 - 16", kind))
    said = [(each.cell.address, each.reason.replace("100 barg'", "100'"), each.readings) for each in found.problems]
    assert said == [("C2", reason, readings)]
    assert {"lrv", "urv"} <= found.records["Instruments"][0].unread


@pytest.mark.parametrize(
    ("text", "wanted", "said"),
    [
        pytest.param(
            "Tag|Range [bar]|Unit\nPT-1|0-16|\nPT-2|0-16|barg\nPT-3|0-1|mbar",
            [("16 bar", "bar"), ("16 barg", "barg"), ("1 mbar", "mbar")],
            ["range: 1 cell in mbar, not in the bar of the heading: what stands nearer is taken"],
            id="case34-column-and-heading",
        ),
        pytest.param(
            "Tag|LRV (barg)|URV (barg)\nPT-1|0|100 psig\nPT-2|0|200 psig\nPT-3|0|10",
            [("100 psig", "psig"), ("200 psig", "psig"), ("10 barg", "barg")],
            ["URV: 2 cells in psig, not in the barg of the heading: what stands nearer is taken"],
            id="case34-cell-and-heading",
        ),
        pytest.param(
            "Messstelle|Messbereich (bar)|Einheit\nPT-1|0-16|bar\nPT-2|0-16|\nPT-3|0-1|kPa",
            [("16 bar", "bar"), ("16 bar", "bar"), ("1 kPa", "kPa")],
            ["range: 1 cell in kPa, not in the bar of the heading: what stands nearer is taken"],
            id="case34-german",
        ),
    ],
)
@KINDS
def test_where_heading_and_cell_have_different_units_the_nearer_is_taken_and_said(
    tmp_path: Path, text: str, wanted: list[tuple[str, str]], said: list[str], kind: str
) -> None:
    found = as_read(made(tmp_path, text, kind))
    assert [(each["urv"], each["range_unit"]) for each in rows(found)] == wanted
    assert [each.removeprefix("Instruments: ") for each in found.assumptions if "of the heading" in each] == said


@pytest.mark.parametrize(
    ("written", "signal", "wanted"),
    [
        pytest.param("4-20mA = 0-250 m³/h", "4-20mA", ("0 m³/h", "250 m³/h"), id="case35"),
        pytest.param("0-250 m3/h (4-20 mA)", "4-20 mA", ("0 m³/h", "250 m³/h"), id="case35-behind"),
        pytest.param("4 mA = 0 m3/h, 20 mA = 250 m3/h", "4-20 mA", ("0 m³/h", "250 m³/h"), id="case35-ends"),
        pytest.param("0-250 m3/h", None, ("0 m³/h", "250 m³/h"), id="case35-none"),
    ],
)
@KINDS
def test_a_signal_beside_a_range_is_the_rows(
    tmp_path: Path, written: str, signal: str | None, wanted: tuple[str, str], kind: str
) -> None:
    text = f"Tag|Service|Range\nFT-1|Feed|{written}\nFT-2|Feed|0 - 25 kg/h"
    found = as_read(made(tmp_path, text, kind))
    (first, second) = rows(found)
    assert (first.get("signal"), first["lrv"], first["urv"], second.get("signal")) == (signal, *wanted, None)


def test_a_column_of_signals_goes_before_what_a_range_says(tmp_path: Path) -> None:
    text = "Tag|Range|Signal\nFT-1|4-20mA = 0-250 m³/h|0-20 mA\nFT-2|4-20mA = 0-250 m³/h|\nFT-3|0-2 m3/h|4-20 mA"
    found = as_read(made(tmp_path, text, "csv"))
    assert [each["signal"] for each in rows(found)] == ["0-20 mA", "4-20mA", "4-20 mA"]


DECIMALS = [
    pytest.param(["0,5", "2.500"], ["0.5 bar", "2500 bar"], id="case36-comma"),
    pytest.param(["0.5", "2,500"], ["0.5 bar", "2500 bar"], id="case36-point"),
    pytest.param(["1.000,5", "1.250"], ["1000.5 bar", "1250 bar"], id="case36-both-marks"),
    pytest.param(["1,000.5", "1,250"], ["1000.5 bar", "1250 bar"], id="case36-both-marks-english"),
    pytest.param(["1 000", "12'500"], ["1000 bar", "12500 bar"], id="case36-blank-and-apostrophe"),
    pytest.param(["1\u202f250,5", "0,25"], ["1250.5 bar", "0.25 bar"], id="case36-narrow-blank"),
]


@pytest.mark.parametrize(("cells", "wanted"), DECIMALS)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_the_column_tells_what_commas_and_points_mean(
    tmp_path: Path, cells: list[str], wanted: list[str], kind: str
) -> None:
    lines = [f"PT-{number}|'0|'{cell}|bar" for number, cell in enumerate(cells, 1)]
    text = "\n".join(["Tag|LRV|URV|Unit", *lines])
    found = as_read(made(tmp_path, text if kind == "xlsx" else text.replace("|'", "|"), kind))
    assert ([each["urv"] for each in rows(found)], found.problems) == (wanted, ())


@pytest.mark.parametrize(
    ("cells", "problems", "whole"),
    [
        pytest.param(["1,000", "2,500", "1,600"], 1, True, id="case36-whole-column"),
        pytest.param(["1,000", "8", "9"], 1, False, id="case36-one-cell"),
        pytest.param(["1.5", "2,5", "1,600"], 1, False, id="case36-contradiction"),
    ],
)
@pytest.mark.parametrize("kind", ["xlsx", "csv"])
def test_a_comma_of_which_nothing_tells_is_asked_about(
    tmp_path: Path, cells: list[str], problems: int, whole: bool, kind: str
) -> None:
    lines = [f"PT-{number}|'{cell}" for number, cell in enumerate(cells, 1)]
    text = "\n".join(["Tag|Alarm H (bar)", *lines])
    found = as_read(made(tmp_path, text if kind == "xlsx" else text.replace("|'", "|"), kind))
    assert [(each.whole_column, len(each.readings)) for each in found.problems] == [(whole, 2)] * problems


def test_a_number_with_a_unit_in_its_format_is_no_text_with_commas(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        for row, value in ((2, 1.234), (3, 1.5)):
            sheet.cell(row, 2, value).number_format = '0.000" bar"'

    text = "Tag|Alarm H|Alarm L\nPT-1|x|'0,5 bar\nPT-2|x|'0,25 bar\nPT-3|'1,600 bar|'0,1 bar"
    found = as_read(workbook(tmp_path / "l.xlsx", text, look))
    assert [each["setting_h"] for each in rows(found)] == ["1.234 bar", "1.5 bar", "1.6 bar"]


OPERATING = [
    pytest.param("<5", {"normal": "5 barg"}, id="case39-below"),
    pytest.param(">4", {"normal": "4 barg"}, id="case39-above"),
    pytest.param("~20", {"normal": "20 barg"}, id="case39-about"),
    pytest.param("ca. 20", {"normal": "20 barg"}, id="case39-german"),
    pytest.param("5 max", {"max": "5 barg"}, id="case39-max"),
    pytest.param("max. 5", {"max": "5 barg"}, id="case39-max-before"),
    pytest.param("2 / 5 / 8", {"min": "2 barg", "normal": "5 barg", "max": "8 barg"}, id="case39-triplet"),
    pytest.param("2/5/8 psig", {"min": "2 psig", "normal": "5 psig", "max": "8 psig"}, id="case39-unit-at-the-end"),
    pytest.param("N/M/Max 2/5/8", {"min": "2 barg", "normal": "5 barg", "max": "8 barg"}, id="case39-legend"),
    pytest.param("2\\n5\\n8", {"min": "2 barg", "normal": "5 barg", "max": "8 barg"}, id="case39-lines"),
    pytest.param("min 2 / max 8", {"min": "2 barg", "max": "8 barg"}, id="case39-labels"),
    pytest.param("- / 5 / 8", {"normal": "5 barg", "max": "8 barg"}, id="case39-one-open"),
    pytest.param("FV", {"normal": "-1.01325 barg"}, id="case40-vacuum"),
    pytest.param("ATM", {"normal": "0 barg"}, id="case40-atmosphere"),
]


@pytest.mark.parametrize(("written", "wanted"), OPERATING)
@KINDS
def test_figures_with_words_and_triplets_are_read(
    tmp_path: Path, written: str, wanted: dict[str, str], kind: str
) -> None:
    text = f"Tag|Service|Operating pressure (barg)\nPT-1|Feed|{written}\nPT-2|Feed|6\nPT-3|Feed|1 / 2 / 3"
    found = as_read(made(tmp_path, text, kind))
    first = rows(found)[0]
    assert {
        end: first[f"operating_pressure_{end}"]
        for end in ("min", "normal", "max")
        if f"operating_pressure_{end}" in first
    } == wanted
    assert found.problems == ()


PIECES = [
    pytest.param("2/5/8", ("2 °C", "5 °C", "8 °C"), "", id="case39-three"),
    pytest.param("2/5/8 °C", ("2 °C", "5 °C", "8 °C"), "", id="case39-unit-once"),
    pytest.param("60", (None, "60 °C", None), "", id="case39-one-is-normal"),
    pytest.param("max. 60", (None, None, "60 °C"), "", id="case39-one-says-which"),
    pytest.param("20 min / 60 max", ("20 °C", None, "60 °C"), "", id="case39-two-say-which"),
    pytest.param("10 / 20", (None, None, None), "'10 / 20' holds 2 values where 3 are wanted", id="case39-two"),
    pytest.param("1/2/3/4", (None, None, None), "'1/2/3/4' holds 4 values where 3 are wanted", id="case39-four"),
    pytest.param("AMB", (None, None, None), "", id="case40-ambient"),
    pytest.param("TBA", (None, None, None), "", id="case42-placeholder"),
]


@pytest.mark.parametrize(("written", "wanted", "reason"), PIECES)
@KINDS
def test_a_heading_that_names_the_order_has_as_many_values(
    tmp_path: Path, written: str, wanted: tuple[str | None, ...], reason: str, kind: str
) -> None:
    text = f"Tag|Service|Oper. Temp. Min/Norm/Max (°C)\nPT-1|Feed|1 / 2 / 3\nPT-2|Feed|{written}\nPT-3|Feed|1 / 2 / 3"
    found = as_read(made(tmp_path, text, kind))
    second = rows(found)[1]
    names = ("operating_temperature_min", "operating_temperature_normal", "operating_temperature_max")
    assert tuple(second.get(name) for name in names) == wanted
    assert unread(found) == ([("C3", "PT-2", reason)] if reason else [])


@pytest.mark.parametrize(
    ("written", "wanted", "reason"),
    [
        pytest.param("16 / 120", {"design_pressure": "16 barg", "design_temperature": "120 °C"}, "", id="case39-pair"),
        pytest.param("16", {}, "'16' holds 1 value where 2 are wanted", id="case39-half-a-pair"),
        pytest.param("N/A", {}, "", id="case39-none"),
    ],
)
@KINDS
def test_half_a_pair_is_not_read_for_both(
    tmp_path: Path, written: str, wanted: dict[str, str], reason: str, kind: str
) -> None:
    text = f"Tag|Design P/T (barg/°C)\nPT-1|{written}\nPT-2|20 / 90\nPT-3|25 / 90"
    found = as_read(made(tmp_path, text, kind))
    assert rows(found, "design_pressure", "design_temperature")[0] == wanted
    assert unread(found) == ([("B2", "PT-1", reason)] if reason else [])


@KINDS
def test_sizes_are_texts_and_neither_dates_nor_fractions(tmp_path: Path, kind: str) -> None:
    sizes = ['1/2"', '½"', "DN15", "15NB", "1/2 NPT(F)", "M20x1.5"]
    lines = [f"PT-{number}|Feed|{size}" for number, size in enumerate(sizes, 1)]
    found = as_read(made(tmp_path, "\n".join(["Tag|Service|Process connection", *lines]), kind))
    assert [each["other"] for each in rows(found)] == [(("Process connection", size),) for size in sizes]
    assert found.problems == ()


@KINDS
def test_normal_and_standard_conditions_stay_apart(tmp_path: Path, kind: str) -> None:
    units = ["Nm3/h", "Sm3/h", "MMSCFD", "SCFM", "m3/hr", "T/h", "kg/h", "DEG C", "ºC", '"WC', "inH2O@4°C"]
    lines = [f"XT-{number}|0|100|{unit}" for number, unit in enumerate(units, 1)]
    found = as_read(made(tmp_path, "\n".join(["Tag|LRV|URV|Unit", *lines]), kind))
    assert [each["urv"].partition(" ")[2] for each in rows(found)] == [
        "Nm³/h", "Sm³/h", "MMSCFD", "scfm", "m³/h", "t/h", "kg/h", "°C", "°C", "inH2O", "inH2O@4°C",
    ]  # fmt: skip


def test_noise_behind_the_fifteenth_figure_is_not_shown(tmp_path: Path) -> None:
    def look(sheet: Worksheet) -> None:
        sheet["B2"] = 0.1 + 0.2

    found = as_read(workbook(tmp_path / "l.xlsx", "Tag|Alarm H (bar)|Service\nPT-1|1|Feed\nPT-2|1|Feed", look))
    assert rows(found)[0]["setting_h"] == "0.3 bar"


SETTINGS: list[Any] = [
    pytest.param("PSHH\\n12 barg\\nPSH\\n10 barg", {"setting_h": "10 barg", "setting_hh": "12 barg"}, "", id="case46"),
    pytest.param("HH 12 barg\\nH 10 barg", {"setting_h": "10 barg", "setting_hh": "12 barg"}, "", id="case46-lines"),
    pytest.param("H=10; HH=12 barg", {"setting_h": "10 barg", "setting_hh": "12 barg"}, "", id="case46-one-unit"),
    pytest.param("12/10", {}, "'12/10' does not say which settings it holds", id="case46-no-order"),
    pytest.param("12\\n10 barg", {}, "'12\n10 barg' does not say which settings it holds", id="case46-two-lines"),
]


@pytest.mark.parametrize(("written", "wanted", "reason"), SETTINGS)
@KINDS
def test_several_settings_in_a_cell_are_read_where_they_say_which(
    tmp_path: Path, written: str, wanted: dict[str, str], reason: str, kind: str
) -> None:
    text = f"Tag|Range|Alarm settings\nPT-1|0 - 16 barg|{written}\nPT-2|0 - 16 barg|H=8\nPT-3|0 - 16 barg|L=1"
    found = as_read(made(tmp_path, text, kind))
    assert rows(found, "setting_ll", "setting_l", "setting_h", "setting_hh")[0] == wanted
    assert unread(found) == ([("C2", "PT-1", reason)] if reason else [])


@pytest.mark.parametrize(
    ("heading", "tag", "field"),
    [
        pytest.param("Trip setting", "PSHH-1", "trip", id="case46-trip"),
        pytest.param("Set pressure", "PSV-1", "set_pressure", id="case46-relief"),
        pytest.param("Alarm H", "PT-1", "setting_h", id="case46-alarm"),
    ],
)
@KINDS
def test_two_values_where_one_is_wanted_are_asked_about(
    tmp_path: Path, heading: str, tag: str, field: str, kind: str
) -> None:
    text = f"Tag|Service|{heading}\n{tag}|Feed|12/10 barg\n{tag}0|Feed|12 barg\nTT-9|Feed|"
    found = as_read(made(tmp_path, text, kind))
    assert [(each.field, each.readings) for each in found.problems] == [(field, ("12 barg", "10 barg"))]


@KINDS
def test_a_heading_may_say_in_which_order_the_alarms_stand(tmp_path: Path, kind: str) -> None:
    text = "Tag|Service|Alarm H/HH (barg)\nPT-1|Feed|10/12\nPT-2|Feed|10\nPT-3|Feed|9/11"
    found = as_read(made(tmp_path, text, kind))
    assert rows(found, "setting_h", "setting_hh") == [
        {"setting_h": "10 barg", "setting_hh": "12 barg"},
        {},
        {"setting_h": "9 barg", "setting_hh": "11 barg"},
    ]
    assert unread(found) == [("C3", "PT-2", "'10' holds 1 value where 2 are wanted")]
