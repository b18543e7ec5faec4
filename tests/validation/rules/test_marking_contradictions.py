"""HAZ14: markings that contradict themselves, and what the other rules make of them."""

from __future__ import annotations

import pytest

from tests.validation.rules.asked import outcome
from validation.example import findings, said

AREA = {
    "code": "A",
    "zone": "1",
    "gas group": "IIB",
    "temperature class": "T3",
    "ambient min": "-20",
    "ambient max": "40",
}
DUST = {"code": "A", "zone": "21", "dust group": "IIIB", "permitted dust surface temperature": "150",
        "ambient min": "-20", "ambient max": "40"}  # fmt: skip


@pytest.mark.parametrize(
    ("marking", "parts"),
    [
        ("II 2 G Ex db IIC T6 Gb", []),
        ("II 1 G Ex ia IIC T6 Ga", []),
        ("II 1/2 G Ex ia IIC T4 Ga/Gb", []),
        ("II 2 (1) G Ex db [ia Ga] IIC T4 Gb", []),
        ("II 2 D Ex tb IIIC T85°C Db", []),
        ("EEx d IIC T6", []),
        ("Class I Div 1 Groups B,C,D T4", []),
        # category and EPL
        ("II 1 G Ex db IIC T6 Gb", ["category and EPL"]),
        ("II 3 G Ex db IIC T6 Gb", ["category and EPL"]),
        ("II 1 G Ex db IIC T6", ["category and EPL"]),
        ("II 2 D Ex db IIC T6 Gb", ["category and EPL"]),
        ("I M2 Ex db IIC T6 Gb", ["category and group"]),
        # a gas group with an EPL for dust, and the reverse
        ("Ex tb IIC T85°C Db", ["group and EPL"]),
        ("Ex ia IIIC T6 Gb", ["group and EPL"]),
        # more than the protections allow
        ("Ex db IIC T6 Ga", ["EPL and protections"]),
        ("Ex ec IIC T6 Gb", ["EPL and protections"]),
        ("Ex db ia IIC T6 Ga", []),
        # a class on dust
        ("Ex tb IIIC T6 Db", ["T class on dust"]),
        # the zone before AEx
        ("Class I, Zone 0, AEx db IIC T4 Gb", ["zone and EPL"]),
        # several at once
        ("II 1 G Ex ec IIC T6 Gb", ["category and EPL", "EPL and protections"]),
        # a letter of another class
        ("Class I Div 1 Groups D,G T4", None),
    ],
)
def test_contradictions(marking: str, parts: list[str] | None) -> None:
    found = findings("HAZ14", [{"tag": "PT-1", "area": "A", "Ex marking": marking}], areas=[AREA])
    if parts is None:  # read as such, or not at all: never passed
        assert found or outcome("HAZ14", [{"tag": "PT-1", "area": "A", "Ex marking": marking}], areas=[AREA]) != "clear"
        return
    assert sorted(each.part for each in found) == sorted(parts)


@pytest.mark.parametrize(
    ("marking", "area", "code", "expected"),
    [
        # the EPL decides
        ("II 1 G Ex db IIC T6 Gb", {**AREA, "zone": "0"}, "HAZ03", "finding"),
        ("II 1 G Ex db IIC T6 Gb", AREA, "HAZ03", "clear"),
        ("II 1 G Ex db IIC T6", {**AREA, "zone": "0"}, "HAZ03", "finding"),
        # what contradicts it is unchecked
        ("Ex ia IIIC T6 Gb", AREA, "HAZ03", "clear"),
        ("Ex ia IIIC T6 Gb", AREA, "HAZ04", "unchecked: Ex marking"),
        ("Ex tb IIC T85°C Db", DUST, "HAZ06", "unchecked: Ex marking"),
        ("Ex tb IIIC T6 Db", DUST, "HAZ07", "unchecked: Ex marking"),
        # an EPL beyond its protections is for a person
        ("Ex db IIC T6 Ga", {**AREA, "zone": "0"}, "HAZ03", "review"),
        ("Ex db IIC T6 Ga", AREA, "HAZ03", "review"),
    ],
)
def test_what_the_other_rules_make_of_it(marking: str, area: dict[str, str], code: str, expected: str) -> None:
    told = outcome(code, [{"tag": "PT-1", "area": "A", "Ex marking": marking}], areas=[area])
    assert told.partition(", assumed")[0] == expected


@pytest.mark.parametrize(
    ("marking", "area", "expected"),
    [
        ("", "A", "not applicable"),
        ("none", "A", "not applicable"),
        ("EExe approved", "A", "unchecked: Ex marking"),
        ("II 1 G Ex db IIC T6 Gb", "S", "not applicable"),
        ("II 1 G Ex db IIC T6 Gb", "", "finding"),
    ],
)
def test_who_is_asked(marking: str, area: str, expected: str) -> None:
    areas = [AREA, {"code": "S", "system": "none"}]
    assert outcome("HAZ14", [{"tag": "PT-1", "area": area, "Ex marking": marking}], areas=areas) == expected


def test_a_types_marking_stands_in_the_catalogue() -> None:
    types = [{"code": "T-1", "kind": "transmitter", "Ex marking": "II 1 G Ex db IIC T6 Gb"}]
    rows = [{"tag": "PT-1", "area": "A", "device type": "T-1"}]
    assert said("HAZ14", rows, types=types, areas=[AREA]) == [
        "PT-1: the marking contradicts itself: category II 1 G with EPL Gb: II 1 G Ex db IIC T6 Gb"
    ]
    (found,) = findings("HAZ14", rows, types=types, areas=[AREA])
    assert [f"{cell.sheet} {cell.address}" for cell in found.cells] == ["Device types C2", "Instruments C2"]
