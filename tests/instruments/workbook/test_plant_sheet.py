from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from instruments.origin import Cell
from instruments.plant_data import PlantData
from instruments.workbook.headings import SheetMatch, match_sheet
from instruments.workbook.plant_sheet import PlantEntry, plant_data, read_plant_sheet, read_plant_toml
from instruments.workbook.sheet import UnreadableFile
from tests.instruments.workbook.sheets import KINDS, matched, sheet

NOTHING_STATED = (
    "plant: jurisdiction not stated",
    "plant: loop numbering not stated, parallel assumed",
    "plant: default pressure reference not stated, gauge assumed",
    "plant: atmospheric pressure not stated, 101.325 kPa assumed",
)


def entries(**said: str) -> list[PlantEntry]:
    return [
        PlantEntry(name=name, text=text, cell=Cell(file="p", sheet="Plant", row=row, column=1))
        for row, (name, text) in enumerate(said.items(), start=1)
    ]


def understood(**said: str) -> PlantData:
    data, _, problems = plant_data(entries(**said))
    assert problems == ()
    return data


ROWS = """
Field|Value
Name|Marrowbeck Works
Tag pattern|isa-hyphen
Numbering|serial
Users' first letters|D = density; C = conductivity
Plant codes|SDV = on/off valve, X; FOO = gas detector
Jurisdiction|ATEX
Atmospheric pressure|0.95|bara
Default reference|absolute
Required fields|tag; service; kind
RNG08 low %|25
ELC high alarm mA|21.5
"""
ONE_ROW = """
Plant|Tag pattern|Numbering|Users' first letters|Plant codes|Jurisdiction|Atmospheric pressure|Default reference|Required fields|RNG08 low %|ELC high alarm mA
Marrowbeck Works|isa-hyphen|serial|D = density; C = conductivity|SDV = on/off valve, X; FOO = gas detector|ATEX|0.95 bara|absolute|tag; service; kind|25|21.5
"""  # noqa: E501


@pytest.mark.parametrize("text", [ROWS, ONE_ROW], ids=["a field a row", "one row under headings"])
def test_a_plant_sheet_is_read_either_way_round(text: str) -> None:
    made = sheet(text, name="Plant")
    data, row, problems = plant_data(read_plant_sheet(made, matched(made)))
    assert problems == ()
    assert (data.name, data.tag_pattern, data.numbering, data.jurisdiction) == (
        "Marrowbeck Works",
        "isa-hyphen",
        "serial",
        "ATEX",
    )
    assert dict(data.users_letters) == {"D": "density", "C": "conductivity"}
    assert dict(data.plant_codes) == {"SDV": ("on/off valve", "X"), "FOO": ("gas detector", "")}
    assert (data.atmospheric_pa, data.default_reference, data.required_fields) == (
        95000.0,
        "absolute",
        ("tag", "service", "kind"),
    )
    assert (data.threshold("RNG08 low %", 30.0), data.threshold("elc HIGH alarm mA", 22.0)) == (25.0, 21.5)
    assert data.threshold("RNG08 high %", 75.0) == 75.0
    assert data.assumptions == ()
    assert row is not None
    assert (row.numbering, dict(row.thresholds)) == ("serial", {"RNG08 low %": "25", "ELC high alarm mA": "21.5"})


TOML = """
name = "Marrowbeck Works"
[plant]
numbering = "serial"
users_letters = { D = "density", C = "conductivity" }
"plant codes" = ["SDV = on/off valve, X", "FOO = gas detector"]
jurisdiction = "ATEX"
atmospheric_pressure = "0.95 bara"
default_reference = "absolute"
required_fields = ["tag", "service", "kind"]
[plant.thresholds]
"RNG08 low %" = 25
elc_high_alarm_ma = 21.5
RNG08_high_percent = 80
"""


def test_a_plant_toml_says_the_same(tmp_path: Path) -> None:
    path = tmp_path / "plant.toml"
    path.write_text(TOML, encoding="utf-8")
    data, _, problems = plant_data(read_plant_toml(path))
    assert problems == ()
    assert dict(data.users_letters) == {"D": "density", "C": "conductivity"}
    assert (data.name, data.numbering, data.jurisdiction, data.atmospheric_pa, data.default_reference) == (
        "Marrowbeck Works",
        "serial",
        "ATEX",
        95000.0,
        "absolute",
    )
    assert data.required_fields == ("tag", "service", "kind")
    assert dict(data.thresholds) == {"rng08 low %": 25.0, "elc high alarm ma": 21.5, "rng08 high %": 80.0}


@pytest.mark.parametrize(
    "text",
    [
        'plant_codes = ["SDV = on/off valve, X", "FOO = gas detector"]',
        'plant_codes = { SDV = ["on/off valve", "X"], FOO = "gas detector" }',
        'plant_codes = "SDV = on/off valve, X; FOO = gas detector"',
    ],
)
def test_codes_may_stand_in_a_list_a_table_or_a_text(tmp_path: Path, text: str) -> None:
    path = tmp_path / "plant.toml"
    path.write_text(text, encoding="utf-8")
    data, _, _ = plant_data(read_plant_toml(path))
    assert dict(data.plant_codes) == {"SDV": ("on/off valve", "X"), "FOO": ("gas detector", "")}


@pytest.mark.parametrize(
    ("content", "reason"),
    [
        (b"numbering = ", "is not TOML"),
        (b"\xff\xfe\x00", "is not text in UTF-8"),
        (None, "there is no such file"),
    ],
)
def test_what_is_no_toml_is_said_with_its_place(tmp_path: Path, content: bytes | None, reason: str) -> None:
    path = tmp_path / "plant.toml"
    if content is not None:
        path.write_bytes(content)
    with pytest.raises(UnreadableFile, match=reason) as caught:
        read_plant_toml(path)
    assert str(path) in str(caught.value)


def test_all_defaults_are_listed() -> None:
    data = understood()
    assert data == PlantData(assumptions=NOTHING_STATED)
    assert understood(Numbering="TBA").assumptions == NOTHING_STATED


VALUES: list[tuple[str, str, str, Any]] = [
    ("Numbering", "Serial numbering", "numbering", "serial"),
    ("Jurisdiction", "IECEx", "jurisdiction", "IEC"),
    ("Jurisdiction", "NEC", "jurisdiction", "US"),
    ("Jurisdiction", "UK", "jurisdiction", "ATEX"),
    ("Jurisdiction", "CEC", "jurisdiction", "Canada"),
    ("Site pressure", "83.52 kPa", "atmospheric_pa", 83520.0),
    ("Atmospheric pressure", "1013 mbar", "atmospheric_pa", 101300.0),
    ("Default pressure reference", "gauge", "default_reference", "gauge"),
    ("Required fields", "Tag No., P & ID, Range Unit", "required_fields", ("tag", "P&ID", "range unit")),
    ("Tag pattern", r"(?P<l>[A-Z]+)-(?P<n>\d+)", "tag_pattern", r"(?P<l>[A-Z]+)-(?P<n>\d+)"),
]


@pytest.mark.parametrize(("name", "text", "field", "value"), VALUES)
def test_values(name: str, text: str, field: str, value: Any) -> None:
    found = getattr(understood(**{name: text}), field)
    assert found == (pytest.approx(value) if isinstance(value, float) else value)


PROBLEMS = [
    ("Numbering", "random", "not one of: parallel, serial"),
    ("Jurisdiction", "Mars", "not one of: IEC, ATEX, US, Canada"),
    ("Atmospheric pressure", "101.3", "an absolute pressure with its unit is needed, such as 101.3 kPa"),
    ("Atmospheric pressure", "0 barg", "an absolute pressure with its unit is needed, such as 101.3 kPa"),
    ("Atmospheric pressure", "10 bara", "no atmosphere has this pressure"),
    ("Atmospheric pressure", "20 °C", "an absolute pressure with its unit is needed, such as 101.3 kPa"),
    ("Users' first letters", "density", "no letter with its meaning, such as: D = density; C = conductivity"),
    ("Plant codes", "valves", "no code with its kind, such as: SDV = on/off valve, X"),
    ("Tag pattern", "[A-Z", "the tag pattern cannot be used"),
    ("Required fields", "tag; colour", "no field of the index is called 'colour'"),
    ("RNG08 low %", "a third", "a threshold is a number"),
    ("Colour of the plant", "green", "no plant setting has this name"),
]


@pytest.mark.parametrize(("name", "text", "reason"), PROBLEMS)
def test_what_cannot_be_understood_is_a_problem_and_nothing_else_is_lost(name: str, text: str, reason: str) -> None:
    data, _, problems = plant_data(entries(**{name: text, "Name": "Marrowbeck Works"}))
    assert [(each.title, each.text, each.cell.address) for each in problems] == [(name, text, "B1")]
    assert problems[0].reason.startswith(reason)
    assert data.name == "Marrowbeck Works"


def test_an_unreadable_atmosphere_is_assumed_and_said() -> None:
    data, _, _ = plant_data(entries(**{"Atmospheric pressure": "101.3"}))
    assert data.atmospheric_pa == 101325.0
    assert "plant: atmospheric pressure could not be read, 101.325 kPa assumed" in data.assumptions


def test_the_later_of_two_statements_holds_and_the_other_is_listed() -> None:
    twice = [*entries(Numbering="parallel"), *entries(Numbering="serial")]
    data, _, _ = plant_data(twice)
    assert data.numbering == "serial"
    assert (
        data.assumptions[0]
        == "plant: Numbering is stated twice; 'serial' (p Plant B1) is used, not 'parallel' (p Plant B1)"
    )


@settings(max_examples=200, deadline=None)
@given(st.lists(st.tuples(st.sampled_from([each[0] for each in PROBLEMS]), st.text(max_size=40)), max_size=6))
def test_no_text_is_too_much(said: list[tuple[str, str]]) -> None:
    found = [PlantEntry(name=name, text=text, cell=Cell(file="p", sheet="", row=1, column=0)) for name, text in said]
    data, _, _ = plant_data(found)
    assert 45_000.0 <= data.atmospheric_pa <= 110_000.0


@settings(max_examples=60, deadline=None)
@given(
    st.lists(
        st.lists(st.one_of(st.none(), st.text(max_size=12), st.just("Numbering")), min_size=3, max_size=3), max_size=6
    )
)
def test_no_sheet_is_too_much(rows: list[list[str | None]]) -> None:
    made = sheet("x|y|z", name="Plant")
    made.rows[:] = rows or [[None] * 3]
    match = match_sheet(made, KINDS)
    assert (
        read_plant_sheet(made, match or SheetMatch(kind=KINDS[5], header_rows=(), first_row=0, columns={})) is not None
    )


@pytest.mark.parametrize(
    ("name", "kept", "readings"),
    [
        ("RNG08 low %", {"rng08 low %": 25.0}, None),
        ("rng08  LOW percent", {"rng08 low %": 25.0}, None),
        ("RNG08 low", {}, ("RNG08 low %",)),
        ("RNG08 lo %", {}, ("RNG08 low %", "RNG08 high %")),
        ("RNG09 low %", {}, ("RNG08 low %",)),
    ],
)
def test_a_threshold_that_there_is_not_is_told(
    name: str, kept: dict[str, float], readings: tuple[str, ...] | None
) -> None:
    asked: list[bool] = []

    def names() -> list[str]:
        asked.append(True)
        return ["RNG08 low %", "RNG08 high %", "ELC hot degC"]

    data, _, problems = plant_data(entries(**{name: "25"}), thresholds=names)
    assert dict(data.thresholds) == kept
    if readings is None:
        assert problems == ()
    else:
        (problem,) = problems
        assert problem.reason == "no rule has a threshold of this name"
        assert problem.readings[: len(readings)] == readings
    # Without a threshold nobody asks for their names.
    asked.clear()
    plant_data(entries(numbering="serial"), thresholds=names)
    assert asked == []
