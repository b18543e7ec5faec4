"""The entity comparison and the system document on a sheet: every line shown, nothing called complete too early."""

from __future__ import annotations

from typing import Any

import pytest

from loops.sheet.content import CircuitContent, sheet_content
from loops.sheet.layout import sheet_pages
from loops.sheet.pack import sheets_of
from tests.loops.sheet.geometry import troubles, words
from validation.example import example_plant

Row = dict[str, Any]

AREAS: list[Row] = [{"code": "A1", "zone": "1", "gas group": "IIC", "temperature class": "T3", "ambient max": "40"}]
DEVICE: Row = {
    "code": "T1", "kind": "transmitter", "Ex marking": "II 1 G Ex ia IIC T4 Ga", "certificate": "QVB 17 ATEX 0412",
    "Ui V": "30", "Ii mA": "120", "Pi mW": "1000", "Ci nF": "3", "Li microhenry": "10",
}  # fmt: skip
BARRIER: Row = {
    "code": "Z1", "kind": "barrier", "zener or isolator": "zener", "Ex marking": "II (1) G [Ex ia Ga] IIC",
    "certificate": "QVB 09 ATEX 0107", "Uo V": "28", "Io mA": "93", "Po mW": "650", "Co IIC nF": "83",
    "Lo IIC mH": "3.05", "IS earth": "yes",
}  # fmt: skip
CABLE: Row = {"code": "C", "capacitance pF/m": "200", "inductance uH/m": "1"}
TAG: Row = {
    "tag": "PT-1", "device type": "T1", "area": "A1", "barrier": "Z1", "signal": "4-20 mA", "wires": "2",
    "I/O type": "AI", "I/O address": "1", "cable type": "C", "cable length": "300",
}  # fmt: skip
LOOP: Row = {"number": "P-1", "circuit or tag": "PT-1", "drawing": "LD-1"}
SCREEN: Row = {
    "circuit or tag": "PT-1", "from item": "PT-1", "from terminal": "S", "to item": "JB-1", "to terminal": "3",
    "core": "S", "screen earthed at": "MAR-1",
}  # fmt: skip


def circuit(
    tag: Row | None = None, device: Row | None = None, barrier: Row | None = None, cable: Row | None = None,
    area: Row | None = None, terminations: list[Row] | None = None,
) -> CircuitContent:  # fmt: skip
    plant = example_plant(
        [{**TAG, **(tag or {})}],
        types=[{**DEVICE, **(device or {})}, {**BARRIER, **(barrier or {})}],
        areas=[{**AREAS[0], **(area or {})}],
        loops=[LOOP],
        cable_types=[{**CABLE, **(cable or {})}],
        terminations=[SCREEN] if terminations is None else terminations,
    )
    (loop,) = sheets_of(plant).drawn
    content = sheet_content(loop, plant)
    for page in sheet_pages(content):
        assert troubles(page) == []
    (found,) = content.circuits
    return found


def lines(found: CircuitContent) -> list[tuple[str, str | None, str | None, str]]:
    assert found.entity is not None
    return [(each.what, each.found, each.allowed, each.outcome) for each in found.entity.lines]


def test_every_line_of_the_comparison_is_shown() -> None:
    """28 V, 93 mA, 650 mW and 300 m of 200 pF/m and 1 uH/m: 63 of 83 nF, 0.31 of 3.05 mH, 400 m at most."""
    found = circuit()
    assert lines(found) == [
        ("Uo against Ui", "28 V", "30 V", "holds"),
        ("Io against Ii", "93 mA", "120 mA", "holds"),
        ("Po against Pi", "650 mW", "1000 mW", "holds"),
        ("Ci + cable, against Co", "63 nF", "83 nF", "holds"),
        ("Li + cable, against Lo", "0.31 mH", "3.05 mH", "holds"),
    ]
    assert found.entity is not None
    assert found.entity.source == "Z1, group IIC"
    assert any("longest cable 400 m" in text for text in found.entity.workings)


@pytest.mark.parametrize(
    ("changes", "what", "outcome"),
    [
        ({"device": {"Ui V": "27"}}, "Uo against Ui", "does not hold"),
        ({"tag": {"cable length": "401"}}, "Ci + cable, against Co", "does not hold"),
        ({"device": {"Pi mW": ""}}, "Po against Pi", "not worked"),
        ({"device": {"Ci nF": ""}}, "Ci + cable, against Co", "not worked"),
        ({"barrier": {"Lo IIC mH": ""}}, "Li + cable, against Lo", "not worked"),
    ],
)
def test_outcomes(changes: dict[str, Row], what: str, outcome: str) -> None:
    found = {line[0]: line[3] for line in lines(circuit(**changes))}
    assert found[what].startswith(outcome)
    assert not any(word in text for text in found.values() for word in ("safe", "compliant", "certified"))


MISSING: list[tuple[dict[str, Any], tuple[str, ...]]] = [
    ({}, ()),
    ({"device": {"certificate": ""}}, ("certificate of PT-1",)),
    ({"barrier": {"certificate": ""}}, ("certificate of Z1",)),
    ({"barrier": {"IS earth": ""}}, ("IS earth of the zener barrier",)),
    ({"barrier": {"zener or isolator": "isolator", "IS earth": ""}}, ()),
    ({"terminations": []}, ("where the screen is earthed",)),
    ({"tag": {"cable length": ""}}, ("length of the cable", "figures for the comparison")),
    ({"device": {"Ci nF": ""}}, ("figures for the comparison",)),
]


@pytest.mark.parametrize(("changes", "missing"), MISSING)
def test_each_missing_item_is_named(changes: dict[str, Any], missing: tuple[str, ...]) -> None:
    found = circuit(**changes)
    assert found.system is not None
    assert found.system.missing == missing


@pytest.mark.parametrize("terminations", [[], [SCREEN]])
def test_no_document_calls_itself_complete(terminations: list[Row]) -> None:
    plant = example_plant(
        [TAG], types=[DEVICE, BARRIER], areas=AREAS, loops=[LOOP], cable_types=[CABLE], terminations=terminations
    )
    (loop,) = sheets_of(plant).drawn
    said = " ".join(words(page).replace("\n", " ") for page in sheet_pages(sheet_content(loop, plant)))
    assert ("not complete, missing: where the screen is earthed" in said) == (not terminations)
    assert ("whether the document is complete is for a competent person to say" in said) == bool(terminations)


def test_a_failing_comparison_is_said_in_the_document() -> None:
    found = circuit(device={"Ui V": "27"})
    assert found.system is not None
    assert dict(found.system.items)["Result of the comparison"] == "the comparison fails"


def test_the_parts_of_the_system_and_their_level() -> None:
    found = circuit()
    assert found.system is not None
    assert [(each.name, each.role, each.certificate, each.level) for each in found.system.parts] == [
        ("PT-1", "transmitter", "QVB 17 ATEX 0412", "a"),
        ("Z1", "source, zener", "QVB 09 ATEX 0107", "a"),
    ]
    assert dict(found.system.items)["Group and level of the system"] == "IIC, level a, the lowest of its parts"


@pytest.mark.parametrize(
    "changes",
    [
        {"tag": {"barrier": ""}, "device": {"Ex marking": "II 2 G Ex db IIC T4 Gb"}},
        {"tag": {"barrier": "", "area": ""}, "device": {"Ex marking": ""}},
    ],
)
def test_other_circuits_have_neither(changes: dict[str, Row]) -> None:
    found = circuit(**changes)
    assert (found.entity, found.system) == (None, None)
