"""HAZ: areas, markings, and markings in areas, over small lists."""

from __future__ import annotations

import json
from collections.abc import Mapping
from pathlib import Path
from typing import Any

import pytest

from loops.plant import assemble
from validation.audit import audit
from validation.example import example_plant, findings, outcomes, said, unchecked_for
from validation.finding import Outcome
from validation.mend import mended

Row = Mapping[str, str]
CODES = [f"HAZ{number:02}" for number in (*range(1, 11), 15, 20)]
ON_MARKINGS = [f"HAZ{number:02}" for number in range(3, 11)]
ATEX = {"jurisdiction": "ATEX", "default reference": "gauge"}
US = {"jurisdiction": "US", "default reference": "gauge"}
CANADA = {"jurisdiction": "Canada", "default reference": "gauge"}


def gas(
    zone: str = "1", group: str = "IIB", t_class: str = "T3", low: str = "-20", high: str = "40", **more: str
) -> Row:
    return {
        "zone": zone,
        "gas group": group,
        "temperature class": t_class,
        "ambient min": low,
        "ambient max": high,
        **more,
    }


def dust(zone: str = "21", group: str = "IIIB", surface: str = "150", **more: str) -> Row:
    return {
        "zone": zone,
        "dust group": group,
        "permitted dust surface temperature": surface,
        "ambient min": "-20",
        "ambient max": "40",
        **more,
    }


def division(number: str = "2", group: str = "D", t_class: str = "T3", class_: str = "I", **more: str) -> Row:
    column = "dust group" if class_ != "I" else "gas group"
    return {
        "system": "division",
        "class": class_,
        "division": number,
        column: group,
        "temperature class": t_class,
        "ambient min": "-20",
        "ambient max": "40",
        **more,
    }


def came_to(code: str, rows: list[Any], **sheets: Any) -> list[str] | str:
    """Return what a rule says on a small plant; its outcome and the blanks, where it says nothing."""
    result = audit(example_plant(rows, **sheets), codes=[code], raise_errors=True)
    if result.findings:
        return [
            f"{'review: ' if each.outcome is Outcome.REVIEW else ''}{each.subject}: {each.message}"
            for each in result.findings
        ]
    coverage = result.coverage[code]
    (outcome,) = (each.value for each in Outcome if coverage.count(each))
    blanks = sorted(coverage.because)
    return f"{outcome}: {', '.join(blanks)}" if blanks else outcome


def told(code: str, marking: str | None, area: Row | str, plant: Row | None = None, **row: str) -> list[str] | str:
    """Return what a rule says of PT-1 with a marking in area A, or in a place that its own cell names."""
    here: dict[str, Any] = {"tag": "PT-1", "Ex marking": marking or "", **row}
    sheets: dict[str, Any] = {"plant": plant} if plant else {}
    if isinstance(area, str):
        here["area classification"] = area
    else:
        here["area"] = "A"
        sheets["areas"] = [{"code": "A", **area}]
    return came_to(code, [here], **sheets)


# ---------------------------------------------------------------------------------------------- subtle mistakes


@pytest.mark.parametrize(
    ("code", "marking", "area", "row", "expected"),
    [
        # the marking is silent on ambient: -20..+40
        (
            "HAZ08", "Ex ia IIC T4 Ga", gas(high="50"), {},
            ["PT-1: ambient up to 50 degC, the marking covers -20..40 degC by default, the mark being silent: "
             "Ex ia IIC T4 Ga, in area A (Zone 1 IIB T3)"],
        ),
        # classes paired with ambients: the one at the site's ambient
        (
            "HAZ05", "Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", gas(t_class="T6", high="55"), {},
            ["PT-1: T4 135 degC, T6 (85 degC) needed: Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga, "
             "in area A (Zone 1 IIB T6)"],
        ),
        ("HAZ05", "Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", gas(t_class="T4", high="55"), {}, "clear"),
        ("HAZ08", "Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", gas(t_class="T4", high="55"), {}, "clear"),
        # too cold
        (
            "HAZ08", "Ex db IIC T6 Gb", gas(low="-30", high="35"), {},
            ["PT-1: ambient down to -30 degC, the marking covers -20..40 degC by default, the mark being silent: "
             "Ex db IIC T6 Gb, in area A (Zone 1 IIB T3)"],
        ),
        # ia with EPL Gb is none for zone 0
        (
            "HAZ03", "Ex ia IIC T4 Gb", gas("0"), {},
            ["PT-1: EPL Gb in Zone 0, which accepts Ga: Ex ia IIC T4 Gb, in area A (Zone 0 IIB T3)"],
        ),
        # a partition counts by its weaker side, unless the zone on its process side is named
        (
            "HAZ03", "Ex db ia IIC T6...T4 Ga/Gb", gas("0"), {},
            ["PT-1: EPL Gb (the body of Ga/Gb) in Zone 0, which accepts Ga: Ex db ia IIC T6...T4 Ga/Gb, "
             "in area A (Zone 0 IIB T3)"],
        ),
        ("HAZ03", "Ex db ia IIC T6...T4 Ga/Gb", gas("1"), {"process-side zone": "0"}, "clear"),
        ("HAZ03", "Ex db ia IIC T6...T4 Ga/Gb", "Zone 0/1 IIB T3", {}, "clear"),
        (
            "HAZ03", "Ex db IIC T4 Gb", gas("1"), {"process-side zone": "Zone 0"},
            ["PT-1: EPL Gb in Zone 0 on the process side, which accepts Ga: Ex db IIC T4 Gb, "
             "in area A (Zone 1 IIB T3)"],
        ),
        ("HAZ03", "Ex db IIC T4 Gb", gas("1"), {"process-side zone": "vessel"}, "unchecked: process-side zone"),
        ("HAZ05", "Ex db ia IIC T6...T4 Ga/Gb", gas(t_class="T4"), {}, "clear"),
        (
            "HAZ05", "Ex db ia IIC T6...T4 Ga/Gb", gas(t_class="T5"), {},
            ["PT-1: T4 135 degC, T5 (100 degC) needed: Ex db ia IIC T6...T4 Ga/Gb, in area A (Zone 1 IIB T5)"],
        ),
        # a bracket says where the outputs go, never where the equipment stands
        (
            "HAZ03", "Ex ec [ia Ga] nC IIC T4 Gc", gas("1"), {},
            ["PT-1: EPL Gc in Zone 1, which accepts Ga, Gb: Ex ec [ia Ga] nC IIC T4 Gc, in area A (Zone 1 IIB T3)"],
        ),
        ("HAZ03", "Ex ec [ia Ga] nC IIC T4 Gc", gas("2"), {}, "clear"),
        # IIB+H2: hydrogen yes, acetylene no, unnamed: who knows
        ("HAZ04", "Ex db IIB+H2 T1 Gb", gas(group="IIC", t_class="T1", gas="hydrogen"), {}, "clear"),
        (
            "HAZ04", "Ex db IIB+H2 T1 Gb", gas(group="IIC", t_class="T1", gas="acetylene"), {},
            ["PT-1: IIB + H2 for area IIC (acetylene): Ex db IIB+H2 T1 Gb, in area A (Zone 1 IIC T1, acetylene)"],
        ),
        (
            "HAZ04", "Ex db IIB+H2 T1 Gb", gas(group="IIC", t_class="T1"), {},
            ["review: PT-1: IIB + H2 for area IIC: no gas is named, it may be H2: Ex db IIB+H2 T1 Gb, "
             "in area A (Zone 1 IIC T1)"],
        ),
        # gas and dust never stand for one another
        (
            "HAZ03", "Ex db IIC T4 Gb", dust(), {},
            ["PT-1: EPL Gb in Zone 21, which accepts Da, Db: Ex db IIC T4 Gb, in area A (Zone 21 IIIB)"],
        ),
        (
            "HAZ03", "Ex tb IIIC T85°C Db", gas(), {},
            ["PT-1: EPL Db in Zone 1, which accepts Ga, Gb: Ex tb IIIC T85°C Db, in area A (Zone 1 IIB T3)"],
        ),
        # dust groups
        (
            "HAZ06", "Ex tb IIIB T100°C Db", dust(group="IIIC"), {},
            ["PT-1: IIIB for dust IIIC, which accepts IIIC: Ex tb IIIB T100°C Db, in area A (Zone 21 IIIC)"],
        ),
        ("HAZ06", "Ex tb IIIB T100°C Db", dust(group="IIIA"), {}, "clear"),
        # group I is for mines
        (
            "HAZ03", "Ex db I Mb", gas(), {},
            ["PT-1: EPL Mb in Zone 1, which accepts Ga, Gb: Ex db I Mb, in area A (Zone 1 IIB T3)"],
        ),
        (
            "HAZ03", "EEx d I", gas(), {},
            ["PT-1: EPL Mb in Zone 1, which accepts Ga, Gb: EEx d I, in area A (Zone 1 IIB T3)"],
        ),
        # the EPL decides against the category
        (
            "HAZ03", "II 1 G Ex db IIC T6 Gb", gas("0"), {},
            ["PT-1: EPL Gb in Zone 0, which accepts Ga: II 1 G Ex db IIC T6 Gb, in area A (Zone 0 IIB T3)"],
        ),
        # lettered T codes
        (
            "HAZ05", "Class I Div 2 Groups A,B,C,D T3C", division(t_class="T4"), {},
            ["PT-1: T3C 160 degC, T4 (135 degC) needed: Class I Div 2 Groups A,B,C,D T3C, "
             "in area A (Class I Div 2 Group D T4)"],
        ),
        ("HAZ05", "Class I Div 2 Groups A,B,C,D T4A", division(t_class="T4"), {}, "clear"),
        # group letters are no ladder
        (
            "HAZ10", "Class I Div 1 Groups C,D T4", division("1", "B", gas="hydrogen"), {},
            ["PT-1: groups C, D marked, B needed: Class I Div 1 Groups C,D T4, "
             "in area A (Class I Div 1 Group B T3, hydrogen)"],
        ),
        ("HAZ10", "Class I Div 1 Groups B,C,D T4", division("1", "B", gas="hydrogen"), {}, "clear"),
        (
            "HAZ10", "Class I Div 1 Group A T4", division("1", "B"), {},
            ["PT-1: groups A marked, B needed: Class I Div 1 Group A T4, in area A (Class I Div 1 Group B T3)"],
        ),
    ],
)  # fmt: skip
def test_subtle_mistakes(code: str, marking: str, area: Row | str, row: Row, expected: list[str] | str) -> None:
    assert told(code, marking, area, **row) == expected


def test_dust_surface_follows_from_cloud_and_layer() -> None:
    ignites = {"cloud ignition temperature": "420", "layer ignition temperature": "225", "layer depth": "5"}
    area = {**dust(surface=""), **ignites}
    assert told("HAZ07", "Ex tb IIIC T135°C Db", area) == "clear"
    assert told("HAZ07", "Ex tb IIIC T150°C Db", area) == "clear"
    assert told("HAZ07", "Ex tb IIIC T200°C Db", area) == [
        "PT-1: 200 degC marked, at most 150 permitted: min(2/3 x 420 = 280, 225 - 75 = 150) = 150 degC: "
        "Ex tb IIIC T200°C Db, in area A (Zone 21 IIIB)"
    ]
    assert told("HAZ07", "Ex tb IIIC T135°C Db", {**area, "layer depth": "8"}) == [
        "review: PT-1: a layer of 8 mm needs the layer's own curve or a test; the rule is for 5 mm: "
        "Ex tb IIIC T135°C Db, in area A (Zone 21 IIIB)"
    ]
    assert told("HAZ07", "Ex tb IIIC T135°C Db", {**area, "layer ignition temperature": ""}) == (
        "unchecked: area layer ignition temperature"
    )
    assert told("HAZ07", "Ex tb IIIC T135°C Db", {**area, "cloud ignition temperature": ""}) == (
        "unchecked: area cloud ignition temperature"
    )
    # The other half could only lower the limit.
    assert told("HAZ07", "Ex tb IIIC T200°C Db", {**area, "cloud ignition temperature": ""}) == [
        "PT-1: 200 degC marked, at most 150 permitted: 225 - 75 = 150: Ex tb IIIC T200°C Db, in area A (Zone 21 IIIB)"
    ]


# ------------------------------------------------------------------------------------- each rule, both sides of it


@pytest.mark.parametrize(
    ("zone", "accepted", "refused"),
    [
        ("0", ["Ga"], ["Gb", "Gc"]),
        ("1", ["Ga", "Gb"], ["Gc"]),
        ("2", ["Ga", "Gb", "Gc"], []),
        ("20", ["Da"], ["Db", "Dc"]),
        ("21", ["Da", "Db"], ["Dc"]),
        ("22", ["Da", "Db", "Dc"], []),
    ],
)
def test_epl_in_each_zone(zone: str, accepted: list[str], refused: list[str]) -> None:
    for_dust = zone.startswith("2") and zone != "2"
    area = dust(zone) if for_dust else gas(zone)
    symbol = {"a": "ia", "b": "ib", "c": "ic"}
    for epl in accepted + refused:
        group = "IIIC T100°C" if for_dust else "IIC T4"
        marking = f"Ex {symbol[epl[1]]} {group} {epl}"
        expected: list[str] | str = "clear"
        if epl in refused:
            place = f"area A (Zone {zone} {'IIIB' if for_dust else 'IIB T3'})"
            expected = [f"PT-1: EPL {epl} in Zone {zone}, which accepts {', '.join(accepted)}: {marking}, in {place}"]
        assert told("HAZ03", marking, area) == expected


@pytest.mark.parametrize(
    ("marking", "area", "expected"),
    [
        # the plant's own EPL in place of the zone's, either way
        (
            "Ex ec IIC T4 Gc", gas("2", **{"EPL required": "Gb"}),
            ["PT-1: EPL Gc in a place that requires EPL Gb, which accepts Ga, Gb: Ex ec IIC T4 Gc, "
             "in area A (Zone 2 EPL Gb IIB T3)"],
        ),
        ("Ex eb IIC T4 Gb", gas("0", **{"EPL required": "Gb"}), "clear"),
        # nothing marked: the weakest protection counts, or the category
        ("EEx de IIC T4", gas("1"), "clear"),
        ("EEx d ia IIC T4", gas("0"),
         ["PT-1: EPL Gb in Zone 0, which accepts Ga: EEx d ia IIC T4, in area A (Zone 0 IIB T3)"]),
        ("II 2 D T 80 °C IP 67", dust("21"), "clear"),
        ("II 2 D T 80 °C IP 67", dust("20"),
         ["PT-1: EPL Db in Zone 20, which accepts Da: II 2 D T 80 °C IP 67, in area A (Zone 20 IIIB)"]),
        ("Ex op is IIC T4", gas("1"), "unchecked: Ex marking"),
        # stronger than any of its protections allows
        (
            "Ex db IIC T4 Ga", gas("0"),
            ["review: PT-1: EPL Ga is more than db allows; only the certificate can tell: Ex db IIC T4 Ga, "
             "in area A (Zone 0 IIB T3)"],
        ),
        (
            "Ex db eb IIC T4 Ga", gas("2"),
            ["review: PT-1: EPL Ga is more than db eb allows; only the certificate can tell: Ex db eb IIC T4 Ga, "
             "in area A (Zone 2 IIB T3)"],
        ),
        # one marking must fit as a whole
        ("Ex ia IIC T4 Ga, Ex tb IIIC T85°C Db", gas("1"), "clear"),
        # blanks
        ("Ex ia IIC T4 Ga", {**gas(""), "gas": "methane"}, "unchecked: area zone"),
        (None, gas(), "unchecked: Ex marking"),
        ("none", gas(), "unchecked: Ex marking"),
        ("Ex whatever", gas(), "unchecked: Ex marking"),
        ("[Ex ia Ga] IIC", gas(), "not applicable"),
        ("Ex ia IIC T4 Ga", {"system": "none", "zone": ""}, "not applicable"),
        ("Ex ia IIC T4 Ga", "safe", "not applicable"),
        ("Ex ia IIC T4 Ga", "", "unchecked: area"),
        ("Ex ia IIC T4 Ga", "Zone 7", "unchecked: area classification"),
    ],
)  # fmt: skip
def test_epl(marking: str | None, area: Row | str, expected: list[str] | str) -> None:
    assert told("HAZ03", marking, area) == expected


@pytest.mark.parametrize(
    ("marking", "area", "expected"),
    [
        *((f"Ex db {marked} T4 Gb", gas(group=asked), "clear") for marked, asked in (
            ("IIA", "IIA"), ("IIB", "IIA"), ("IIC", "IIA"), ("IIB", "IIB"), ("IIC", "IIB"), ("IIC", "IIC"),
            ("IIB+H2", "IIB"), ("IIB+H2", "IIA"), ("IIC", "IIB+H2"), ("IIB+H2", "IIB+H2"),
        )),
        ("Ex db IIA T4 Gb", gas(group="IIB"),
         ["PT-1: IIA for area IIB, which accepts II, IIB, IIC: Ex db IIA T4 Gb, in area A (Zone 1 IIB T3)"]),
        ("Ex db IIB T4 Gb", gas(group="IIC"),
         ["PT-1: IIB for area IIC, which accepts II, IIC: Ex db IIB T4 Gb, in area A (Zone 1 IIC T3)"]),
        ("Ex db IIB T4 Gb", gas(group="IIB+H2"),
         ["PT-1: IIB for area IIB+H2, which accepts II, IIC: Ex db IIB T4 Gb, in area A (Zone 1 IIB+H2 T3)"]),
        ("Ex e II T4", gas(group="IIC"), "clear"),
        ("Ex d II T4", gas(group="IIB"),
         ["review: PT-1: II without a letter on d, which needs one: Ex d II T4, in area A (Zone 1 IIB T3)"]),
        ("Ex db II (NH3) T1 Gb", gas(group="IIA", gas="ammonia"), "clear"),
        ("Ex db II (NH3) T1 Gb", gas(group="IIA", gas="methane"),
         ["PT-1: marked for NH3 only; the area names methane: Ex db II (NH3) T1 Gb, "
          "in area A (Zone 1 IIA T3, methane)"]),
        ("Ex db II (NH3) T1 Gb", gas(group="IIA"), "unchecked: area gas"),
        ("Ex db IIC T4 Gb", gas(group=""), "unchecked: area gas group"),
        # what contradicts the EPL says nothing
        ("Ex ia IIC T100°C Da", gas(), "unchecked: Ex marking"),
        ("Ex tb IIIC T85°C Db", gas(), "unchecked: Ex marking"),
        ("Ex db I Mb", gas(), "unchecked: Ex marking"),
        ("Ex db IIC T4 Gb", dust(), "not applicable"),
        (None, dust(), "not applicable"),
        (None, gas(), "unchecked: Ex marking"),
    ],
)  # fmt: skip
def test_gas_group(marking: str | None, area: Row, expected: list[str] | str) -> None:
    assert told("HAZ04", marking, area) == expected


@pytest.mark.parametrize(
    ("marking", "area", "expected"),
    [
        ("Ex db IIC T3 Gb", gas(t_class="T3"), "clear"),
        ("Ex db IIC T2 Gb", gas(t_class="T3"),
         ["PT-1: T2 300 degC, T3 (200 degC) needed: Ex db IIC T2 Gb, in area A (Zone 1 IIB T3)"]),
        ("Ex db IIC T4...T6 Gb", gas(t_class="T4"), "clear"),
        ("Ex db IIC T4...T6 Gb", gas(t_class="T5"),
         ["PT-1: T4 135 degC, T5 (100 degC) needed: Ex db IIC T4...T6 Gb, in area A (Zone 1 IIB T5)"]),
        # the figure counts before its class
        ("Ex eb IIC 350 °C (T1) Gb", gas(t_class="T1"), "clear"),
        ("Ex eb IIC 350 °C (T1) Gb", gas(t_class="T2"),
         ["PT-1: T1 350 degC, T2 (300 degC) needed: Ex eb IIC 350 °C (T1) Gb, in area A (Zone 1 IIB T2)"]),
        # the boundary of a pair
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", gas(t_class="T6", high="40"), "clear"),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", gas(t_class="T6", high="41"),
         ["PT-1: T4 135 degC, T6 (85 degC) needed: Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga, "
          "in area A (Zone 1 IIB T6)"]),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", gas(t_class="T6", high=""), "unchecked: area ambient max"),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", gas(t_class="T4", high=""), "clear"),
        # hotter than any pair: HAZ08 says so
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", gas(t_class="T4", high="80"), "unchecked: Ex marking"),
        ("Ex ia IIC Ga", gas(), "unchecked: Ex marking"),
        ("Ex ia IIC T4 Ga", gas(t_class=""), "unchecked: area temperature class"),
        ("Class I Div 2 Groups A,B,C,D", division(),
         ["review: PT-1: the division mark has no T code: Class I Div 2 Groups A,B,C,D, "
          "in area A (Class I Div 2 Group D T3)"]),
        ("Class I Div 2 Groups A,B,C,D T2D", division(),
         ["PT-1: T2D 215 degC, T3 (200 degC) needed: Class I Div 2 Groups A,B,C,D T2D, "
          "in area A (Class I Div 2 Group D T3)"]),
        ("Class I Div 2 Groups A,B,C,D T3", division(t_class="T2D"), "clear"),
        ("Class II Div 1 Groups E,F,G T4", division("1", "G", "T3C", "II"), "clear"),
        ("Class II Div 1 Groups E,F,G T3", division("1", "G", "T3C", "II"),
         ["PT-1: T3 200 degC, T3C (160 degC) needed: Class II Div 1 Groups E,F,G T3, "
          "in area A (Class II Div 1 Group G T3C)"]),
        ("Ex tb IIIC T85°C Db", gas(), "unchecked: Ex marking"),
        ("Ex tb IIIC T85°C Db", dust(), "not applicable"),
        (None, gas(), "unchecked: Ex marking"),
        (None, dust(), "not applicable"),
    ],
)  # fmt: skip
def test_temperature_class(marking: str | None, area: Row, expected: list[str] | str) -> None:
    assert told("HAZ05", marking, area) == expected


@pytest.mark.parametrize(
    ("marking", "area", "expected"),
    [
        *((f"Ex tb {marked} T100°C Db", dust(group=asked), "clear") for marked, asked in (
            ("IIIA", "IIIA"), ("IIIB", "IIIA"), ("IIIC", "IIIA"), ("IIIB", "IIIB"), ("IIIC", "IIIB"), ("IIIC", "IIIC"),
        )),
        ("Ex tb IIIA T100°C Db", dust(group="IIIB"),
         ["PT-1: IIIA for dust IIIB, which accepts III, IIIB, IIIC: Ex tb IIIA T100°C Db, in area A (Zone 21 IIIB)"]),
        ("Ex tD A21 T100°C", dust(group="IIIB"), "clear"),
        ("Ex tD A21 T100°C", dust(group="IIIC"),
         ["review: PT-1: a dust mark without a letter for dust IIIC: Ex tD A21 T100°C, in area A (Zone 21 IIIC)"]),
        ("Ex tb IIIC T100°C Db", dust(group=""), "unchecked: area dust group"),
        ("Ex ia IIC T100°C Db", dust(), "unchecked: Ex marking"),
        ("Ex db IIC T4 Gb", dust(), "unchecked: Ex marking"),
        ("Ex tb IIIC T100°C Db", gas(), "not applicable"),
        (None, gas(), "not applicable"),
        (None, dust(), "unchecked: Ex marking"),
    ],
)  # fmt: skip
def test_dust_group(marking: str | None, area: Row, expected: list[str] | str) -> None:
    assert told("HAZ06", marking, area) == expected


@pytest.mark.parametrize(
    ("marking", "area", "expected"),
    [
        ("Ex tb IIIC T150°C Db", dust(), "clear"),
        ("Ex tb IIIC T151°C Db", dust(),
         ["PT-1: 151 degC marked, at most 150 permitted: 150 degC stated: Ex tb IIIC T151°C Db, "
          "in area A (Zone 21 IIIB)"]),
        # T500 is the depth of the layer it was tested under
        ("Ex ta IIIC T500 135 °C Da", dust(), "clear"),
        ("Ex tb IIIC T6 Db", dust(), "unchecked: Ex marking"),
        ("Ex tb IIIC Db", dust(), "unchecked: Ex marking"),
        ("Ex db IIC T4 Gb", dust(), "unchecked: Ex marking"),
        ("Ex tb IIIC T150°C Db", dust(surface=""), "unchecked: area permitted dust surface temperature"),
        ("Ex tb IIIC T150°C Db", gas(), "not applicable"),
        ("Class II Div 1 Groups E,F,G T4", division("1", "G", "T3C", "II"), "not applicable"),
        ("Class II Div 1 Groups E,F,G T3C",
         division("1", "G", "T3C", "II", **{"permitted dust surface temperature": "155"}),
         ["PT-1: 160 degC marked, at most 155 permitted: 155 degC stated: Class II Div 1 Groups E,F,G T3C, "
          "in area A (Class II Div 1 Group G T3C)"]),
        (None, gas(), "not applicable"),
        (None, dust(), "unchecked: Ex marking"),
    ],
)  # fmt: skip
def test_dust_surface(marking: str | None, area: Row, expected: list[str] | str) -> None:
    assert told("HAZ07", marking, area) == expected


@pytest.mark.parametrize(
    ("marking", "area", "expected"),
    [
        ("Ex ia IIC T4 Ga", gas(low="-20", high="40"), "clear"),
        ("Ex ia IIC T4 Ga", gas(low="-20.5", high="40"),
         ["PT-1: ambient down to -20.5 degC, the marking covers -20..40 degC by default, the mark being silent: "
          "Ex ia IIC T4 Ga, in area A (Zone 1 IIB T3)"]),
        ("Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +60°C", gas(low="-40", high="60"), "clear"),
        ("Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +60°C", gas(low="-40", high="61"),
         ["PT-1: ambient up to 61 degC, the marking covers -40..60 degC marked: Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +60°C, "
          "in area A (Zone 1 IIB T3)"]),
        ("Ex ia IIC T4 Ga", gas(low=""), "unchecked: area ambient min"),
        ("Ex ia IIC T4 Ga", gas(high=""), "unchecked: area ambient max"),
        ("Ex ia IIC T4 Ga", gas(low="", high=""), "unchecked: area ambient max, area ambient min"),
        # One end is enough to see that it does not fit.
        ("Ex ia IIC T4 Ga", gas(low="", high="45"),
         ["PT-1: ambient up to 45 degC, the marking covers -20..40 degC by default, the mark being silent: "
          "Ex ia IIC T4 Ga, in area A (Zone 1 IIB T3)"]),
        ("Ex ia IIC T4 Ga", "Zone 1 IIB T3", "unchecked: area ambient max, area ambient min"),
        ("Ex ia IIC T4 Ga", "Zone 1 IIB T3 -10°C ≤ Ta ≤ +35°C", "clear"),
        # a division mark that is silent says nothing of the cold
        ("Class I Div 2 Groups A,B,C,D T4", division(), "unchecked: Ex marking"),
        ("Class I Div 2 Groups A,B,C,D T4", division(**{"ambient max": "41"}),
         ["PT-1: ambient up to 41 degC, the marking covers ?..40 degC by default, the mark being silent: "
          "Class I Div 2 Groups A,B,C,D T4, in area A (Class I Div 2 Group D T3)"]),
        ("Class I Div 2 Groups A,B,C,D T4 -40°C ≤ Ta ≤ +60°C", division(), "clear"),
        (None, gas(), "unchecked: Ex marking"),
    ],
)  # fmt: skip
def test_ambient(marking: str | None, area: Row | str, expected: list[str] | str) -> None:
    assert told("HAZ08", marking, area) == expected


@pytest.mark.parametrize(
    ("marking", "area", "plant", "row", "expected"),
    [
        ("Class I Div 1 Groups C,D T4", division("1"), None, {}, "clear"),
        ("Class I Div 2 Groups C,D T4", division("2"), None, {}, "clear"),
        ("Class I Div 1 Groups C,D T4", division("2"), None, {}, "clear"),
        ("Class I Groups C,D T4", division("1"), None, {}, "clear"),
        ("Class I Div 2 Groups C,D T4", division("1"), None, {},
         ["PT-1: Class I Div 2 in Class I Div 1: Class I Div 2 Groups C,D T4, in area A (Class I Div 1 Group D T3)"]),
        ("Class II Div 1 Groups F,G T4", division("1"), None, {},
         ["PT-1: Class II Div 1 in Class I Div 1: Class II Div 1 Groups F,G T4, in area A (Class I Div 1 Group D T3)"]),
        # zone marks in divisions
        ("Class I, Zone 1, AEx db IIC T4 Gb", division("1"), US, {},
         ["PT-1: AEx db for Zone 1 in Class I Div 1: Class I, Zone 1, AEx db IIC T4 Gb, "
          "in area A (Class I Div 1 Group D T3)"]),
        ("Class I, Zone 1, AEx db IIC T4 Gb", division("2"), US, {}, "clear"),
        ("Class I, Zone 0, AEx ia IIC T4 Ga", division("1"), US, {}, "clear"),
        ("Ex ia IIC T4 Ga", division("1"), US, {},
         ["review: PT-1: Ex ia for Zone 0 in Class I Div 1: a plain Ex is no listing for the US: Ex ia IIC T4 Ga, "
          "in area A (Class I Div 1 Group D T3)"]),
        ("Ex db IIC T4 Gb", division("1"), US, {},
         ["PT-1: Ex db for Zone 1 in Class I Div 1: Ex db IIC T4 Gb, in area A (Class I Div 1 Group D T3)"]),
        # ... and their groups
        ("Class I, Zone 1, AEx db IIA T4 Gb", division("2", "C"), US, {},
         ["PT-1: IIA for group C: Class I, Zone 1, AEx db IIA T4 Gb, in area A (Class I Div 2 Group C T3)"]),
        ("Class I, Zone 1, AEx db IIB T4 Gb", division("2", "C"), US, {},
         ["review: PT-1: IIB for group C: the gas is not named, and IIB ends short of group C: "
          "Class I, Zone 1, AEx db IIB T4 Gb, in area A (Class I Div 2 Group C T3)"]),
        ("Class I, Zone 1, AEx db IIB T4 Gb", division("2", "C", gas="ethylene"), US, {}, "clear"),
        # division marks in zones
        ("Class I Div 2 Gp ABCD T4", gas("1"), US, {},
         ["PT-1: Class I Div 2 in Zone 1: Class I Div 2 Gp ABCD T4, in area A (Zone 1 IIB T3)"]),
        ("Class I Div 2 Gp ABCD T4", gas("2"), US, {}, "clear"),
        ("Class I Div 2 Gp D T4", gas("2"), US, {},
         ["PT-1: groups D for area IIB, C needed: Class I Div 2 Gp D T4, in area A (Zone 2 IIB T3)"]),
        ("Class I Div 1 Gp B,C,D T4", gas("0"), US, {"type of protection": "explosionproof"},
         ["PT-1: Class I Div 1 in Zone 0: accepted only as intrinsically safe apparatus: Class I Div 1 Gp B,C,D T4, "
          "in area A (Zone 0 IIB T3)"]),
        ("Class I Div 1 Gp B,C,D T4", gas("0"), US, {"type of protection": "Intrinsically safe"}, "clear"),
        ("Class I Div 1 Gp B,C,D T4", gas("0"), US, {"type of protection": "IS"}, "clear"),
        ("Class I Div 1 Gp B,C,D T4", gas("0"), US, {"type of protection": ""},
         ["review: PT-1: Class I Div 1 in Zone 0: accepted only as intrinsically safe apparatus, "
          "which is not recorded: Class I Div 1 Gp B,C,D T4, in area A (Zone 0 IIB T3)"]),
        ("Class I Div 1 Gp B,C,D T4", gas("0"), US, {"type of protection": "XP-IS"},
         ["review: PT-1: Class I Div 1 in Zone 0: accepted only as intrinsically safe apparatus, "
          "which is not recorded: Class I Div 1 Gp B,C,D T4, in area A (Zone 0 IIB T3)"]),
        ("Class II Div 1 Gp E,F,G T4", dust("21"), US, {}, "clear"),
        ("Class II Div 2 Gp E,F,G T4", dust("21"), US, {},
         ["PT-1: Class II Div 2 in Zone 21: Class II Div 2 Gp E,F,G T4, in area A (Zone 21 IIIB)"]),
        # no table is held for Canada
        ("Class I Div 2 Gp ABCD T4", gas("1"), CANADA, {},
         ["review: PT-1: division against zone in Canada, for which no table is held: Class I Div 2 Gp ABCD T4, "
          "in area A (Zone 1 IIB T3)"]),
        ("Class I Div 2 Gp D T4", gas("2"), CANADA, {},
         ["review: PT-1: division against zone in Canada, for which no table is held; groups D for area IIB, C needed: "
          "Class I Div 2 Gp D T4, in area A (Zone 2 IIB T3)"]),
        ("Class I Div 2 Gp ABCD T4", division("1"), CANADA, {},
         ["PT-1: Class I Div 2 in Class I Div 1: Class I Div 2 Gp ABCD T4, in area A (Class I Div 1 Group D T3)"]),
        # elsewhere it says nothing
        ("Class I Div 2 Gp ABCD T4", gas("1"), ATEX, {}, "not applicable"),
        ("Class I Div 2 Gp ABCD T4", gas("1", jurisdiction="IEC"), US, {}, "not applicable"),
        ("Class I Div 2 Gp ABCD T4", gas("1"), None, {}, "unchecked: area jurisdiction"),
        ("Ex db IIC T4 Gb", division("1"), ATEX, {}, "not applicable"),
        ("Ex db IIC T4 Gb", gas("1"), US, {}, "not applicable"),
        # blanks
        ("Class I, Zone 1, AEx db IIC T4 Gb", division("2", ""), US, {}, "unchecked: area gas group"),
        ("Class I, Zone 1, AEx db IIC T4 Gb", division("2", "IIC"), US, {}, "unchecked: area gas group"),
        ("Class I Div 1 Gp ABCD T4", gas("2", "C"), US, {}, "unchecked: area gas group"),
        ("Class I Div 2 Gp ABCD T4", {**division(""), "division": ""}, None, {}, "unchecked: area division"),
        ("Class I Div 2 Gp ABCD T4", division(class_="", group=""), None, {}, "unchecked: area class"),
        (None, division(), None, {}, "unchecked: Ex marking"),
        (None, gas(), ATEX, {}, "not applicable"),
        (None, gas(), US, {}, "unchecked: Ex marking"),
    ],
)  # fmt: skip
def test_divisions(marking: str | None, area: Row, plant: Row | None, row: Row, expected: list[str] | str) -> None:
    assert told("HAZ09", marking, area, plant, **row) == expected


@pytest.mark.parametrize(
    ("marking", "area", "plant", "expected"),
    [
        # HAZ09 speaks for HAZ03, HAZ04, HAZ06 and HAZ10 in North America
        ("Class I Div 2 Gp D T4", gas("1"), US, ["not applicable"] * 4),
        ("Class I, Zone 1, AEx db IIA T4 Gb", division("1"), US, ["not applicable"] * 4),
        ("Class II Div 2 Gp G T4", dust("21"), CANADA, ["not applicable"] * 4),
        # elsewhere nobody can tell
        ("Class I Div 2 Gp D T4", gas("1"), ATEX,
         ["unchecked: Ex marking", "unchecked: Ex marking", "not applicable", "unchecked: Ex marking"]),
        ("Ex db IIA T4 Gb", division("1"), ATEX,
         ["unchecked: Ex marking", "unchecked: Ex marking", "not applicable", "unchecked: Ex marking"]),
        ("Class I Div 2 Gp D T4", gas("1"), None,
         ["unchecked: area jurisdiction", "unchecked: area jurisdiction", "not applicable",
          "unchecked: area jurisdiction"]),
        ("Class II Div 2 Gp G T4", dust("21"), ATEX,
         ["unchecked: Ex marking", "not applicable", "unchecked: Ex marking", "unchecked: Ex marking"]),
        # of one system, only its own rules speak
        ("Ex db IIB T4 Gb", gas("1"), US, ["clear", "clear", "not applicable", "not applicable"]),
        ("Class I Div 2 Gp D T4", division("2"), ATEX,
         ["not applicable", "not applicable", "not applicable", "clear"]),
    ],
)  # fmt: skip
def test_who_speaks_of_division_against_zone(marking: str, area: Row, plant: Row | None, expected: list[str]) -> None:
    assert [told(code, marking, area, plant) for code in ("HAZ03", "HAZ04", "HAZ06", "HAZ10")] == expected


@pytest.mark.parametrize(
    ("marking", "area", "expected"),
    [
        ("Class I Div 2 Groups C,D T4", division("2", "C,D"), "clear"),
        ("Class I Div 2 Groups C T4", division("2", "C,D"),
         ["PT-1: groups C marked, D needed: Class I Div 2 Groups C T4, in area A (Class I Div 2 Groups C, D T3)"]),
        ("Class II Div 1 Groups F,G T4", division("1", "E", "T3", "II"),
         ["PT-1: groups F, G marked, E needed: Class II Div 1 Groups F,G T4, in area A (Class II Div 1 Group E T3)"]),
        # of several classes, the area's own
        ("CL. I, DIV. 1, GR. C & D; CL. II, DIV. 1, GR. E, F & G T4", division("1", "G", "T3", "II"), "clear"),
        ("CL. I, DIV. 1, GR. C & D; CL. II, DIV. 1, GR. E, F & G T4", division("1", "B", "T3"),
         ["PT-1: groups C, D marked, B needed: CL. I, DIV. 1, GR. C & D; CL. II, DIV. 1, GR. E, F & G T4, "
          "in area A (Class I Div 1 Group B T3)"]),
        # fibres have no groups; the wrong class is HAZ09's finding
        ("Class III Div 1 T4", division("1", "", "T3", "III"), "not applicable"),
        ("Class II Div 1 Groups F,G T4", division("1"), "unchecked: Ex marking"),
        ("Class I Div 2 T4", division("2"), "unchecked: Ex marking"),
        ("Class I Div 2 Groups C,D T4", division("2", ""), "unchecked: area gas group"),
        ("Class I Div 2 Groups C,D T4", division("2", "IIC"), "unchecked: area gas group"),
        ("Class I Div 2 Groups C,D T4", gas(jurisdiction="US"), "not applicable"),
        (None, division(), "unchecked: Ex marking"),
        (None, gas(), "not applicable"),
    ],
)  # fmt: skip
def test_group_letters(marking: str | None, area: Row, expected: list[str] | str) -> None:
    assert told("HAZ10", marking, area) == expected


def test_gas_and_dust_are_judged_each_by_its_own_marking() -> None:
    area = {**dust("2/22", "IIIC", "120"), "gas group": "IIB", "temperature class": "T4"}
    both = "Ex db IIB T4 Gb, Ex tb IIIC T120°C Db"
    assert [told(code, both, area) for code in ("HAZ03", "HAZ04", "HAZ05", "HAZ06", "HAZ07", "HAZ08")] == ["clear"] * 6
    words = "in area A (Zone 2/22 IIB IIIC T4)"
    assert told("HAZ03", "Ex db IIB T4 Gb", area) == [
        f"PT-1: EPL Gb in Zone 22, which accepts Da, Db, Dc: Ex db IIB T4 Gb, {words}"
    ]
    weak = "Ex db IIA T3 Gb, Ex tb IIIB T135°C Db"
    assert [told(code, weak, area) for code in ("HAZ04", "HAZ05", "HAZ06", "HAZ07")] == [
        [f"PT-1: IIA for area IIB, which accepts II, IIB, IIC: {weak}, {words}"],
        [f"PT-1: T3 200 degC, T4 (135 degC) needed: {weak}, {words}"],
        [f"PT-1: IIIB for dust IIIC, which accepts IIIC: {weak}, {words}"],
        [f"PT-1: 135 degC marked, at most 120 permitted: 120 degC stated: {weak}, {words}"],
    ]
    row = {"tag": "PT-1", "area": "A", "Ex marking": "Ex ec IIB T4 Gc, Ex tc IIIC T100°C Dc"}
    areas = [{"code": "A", **area, "zone": "1/21"}]
    assert [each.part for each in findings("HAZ03", [row], areas=areas)] == ["dust", "gas"]
    # One ambient, one finding.
    assert len(findings("HAZ08", [{**row, "Ex marking": both}], areas=[{**areas[0], "ambient max": "45"}])) == 1


# ----------------------------------------------------------------------------------------------- what stands beside


def test_a_finding_holds_figures_working_and_cells() -> None:
    area = {"code": "A", **gas(t_class="T4")}
    types = [{"code": "X", "kind": "transmitter", "Ex marking": "EEx d IIC T6...T3"}]
    (found,) = findings("HAZ05", [{"tag": "PT-1", "device type": "X", "area": "A"}], types=types, areas=[area])
    assert (found.found, found.wanted, found.off_by, found.working) == (
        "200 degC (T3)",
        "at most 135 degC (T4)",
        "65 K",
        "T6..T3, worst T3",
    )
    assert [(cell.sheet, cell.address) for cell in found.cells] == [
        ("Device types", "C2"),
        ("Areas", "D2"),
        ("Instruments", "B2"),
        ("Instruments", "C2"),
    ]
    assert found.fields == ("Ex marking", "area temperature class")


@pytest.mark.parametrize(
    ("code", "marking", "area", "figures"),
    [
        ("HAZ03", "Ex ec IIC T4 Gc", gas(), ("EPL Gc", "EPL Ga or Gb", "", "")),
        ("HAZ04", "Ex db IIA T4 Gb", gas(gas="ethylene"), ("IIA", "IIB (ethylene)", "", "")),
        ("HAZ06", "Ex tb IIIA T100°C Db", dust(), ("IIIA", "IIIB", "", "")),
        ("HAZ07", "Ex tb IIIC T200°C Db", dust(), ("200 degC", "at most 150 degC", "50 K", "150 degC stated")),
        ("HAZ08", "Ex ia IIC T4 Ga", gas(high="55"), ("-20..40 degC", "up to 55 degC", "15 K", "")),
        ("HAZ08", "Ex ia IIC T4 Ga", gas(low="-40"), ("-20..40 degC", "down to -40 degC", "20 K", "")),
        ("HAZ09", "Class I Div 2 Gr D T4", division("1"), ("Class I Div 2", "Class I Div 1 Group D T3", "", "")),
        ("HAZ10", "Class I Div 2 Gr C,D T4", division("2", "B"), ("groups C, D", "group B", "", "")),
    ],
)
def test_figures(code: str, marking: str, area: Row, figures: tuple[str, str, str, str]) -> None:
    row = {"tag": "PT-1", "area": "A", "Ex marking": marking}
    (found,) = findings(code, [row], areas=[{"code": "A", **area}])
    assert (found.found, found.wanted, found.off_by, found.working) == figures


def test_a_rows_own_cell_is_the_cell_of_its_area() -> None:
    (found,) = findings("HAZ03", [{"tag": "PT-1", "Zone": "Zone 1 IIB T3", "Ex marking": "Ex ec IIC T4 Gc"}])
    assert [cell.address for cell in found.cells] == ["C2", "B2"]
    assert found.fields == ("Ex marking", "area classification")


def assumed(code: str, marking: str, area: Row, plant: Row | None = None) -> tuple[str, ...]:
    row = {"tag": "PT-1", "Ex marking": marking, "area": "A"}
    sheets: dict[str, Any] = {"areas": [{"code": "A", **area}], "plant": plant or ATEX}
    result = audit(example_plant([row], **sheets), codes=[code], raise_errors=True)
    said_of = {text for each in result.findings for text in each.assumed} | set(result.coverage[code].assumed)
    return tuple(sorted(said_of))


@pytest.mark.parametrize(
    ("code", "marking", "area", "expected"),
    [
        ("HAZ03", "EEx d IIC T6", gas(), ("EEx d IIC T6: EPL Gb follows from d",)),
        ("HAZ03", "EEx d IIC T6", gas("0"), ("EEx d IIC T6: EPL Gb follows from d",)),
        ("HAZ03", "II 2 D T 80 °C IP 67", dust(), ("II 2 D T 80 °C IP 67: EPL Db follows from the ATEX category",)),
        ("HAZ03", "Ex db IIC T6 Gb", gas(), ()),
        # what the standard gives for silence is no assumption
        ("HAZ08", "Ex db IIC T6 Gb", gas(), ()),
        (
            "HAZ07", "Ex tb IIIC T100°C Db",
            {**dust(surface=""), "cloud ignition temperature": "420", "layer ignition temperature": "225"},
            ("Ex tb IIIC T100°C Db: a dust layer of no more than 5 mm",),
        ),
        (
            "HAZ15", "EX IA IIC T4 GA", gas(),
            ("EX IA IIC T4 GA: read in spite of letters in the wrong case",),
        ),
        (
            "HAZ05", "EX IA IIC T4 GA", gas(t_class="T6"),
            ("EX IA IIC T4 GA: read in spite of letters in the wrong case",),
        ),
    ],
)  # fmt: skip
def test_assumptions_are_named(code: str, marking: str, area: Row, expected: tuple[str, ...]) -> None:
    assert assumed(code, marking, area) == expected


def test_a_division_area_without_jurisdiction_is_read_as_us() -> None:
    unstated = {"name": "Example", "default reference": "gauge"}
    text = "areas by class and division without a jurisdiction are read as US"
    assert assumed("HAZ09", "Class I, Zone 1, AEx db IIC T4 Gb", division("2"), unstated) == (text,)
    assert assumed("HAZ09", "Class I, Zone 1, AEx db IIC T4 Gb", division("1"), unstated) == (text,)
    assert assumed("HAZ09", "Class I, Zone 1, AEx db IIC T4 Gb", division("2"), US) == ()


# ------------------------------------------------------------------------------------------------------ other types


def catalogue(*types: Row) -> list[Row]:
    return [{"kind": "transmitter", "signal": "4-20 mA", "wires": "2", **each} for each in types]


TYPES = catalogue(
    {"code": "GC", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg", "Ex marking": "Ex ec IIC T4 Gc"},
    {"code": "GB", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg", "Ex marking": "Ex db IIC T4 Gb"},
    {"code": "GB-HOT", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg", "Ex marking": "Ex db IIC T2 Gb"},
    {"code": "GB-IIA", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg", "Ex marking": "Ex db IIA T4 Gb"},
    {"code": "GB-SMALL", "body": "gauge", "LRL": "0 barg", "URL": "2 barg", "Ex marking": "Ex db IIC T4 Gb"},
    {"code": "GB-BIG", "body": "gauge", "LRL": "-1 barg", "URL": "100 barg", "Ex marking": "Ex db IIC T4 Gb"},
    {"code": "GB-HUGE", "body": "gauge", "LRL": "-1 barg", "URL": "400 barg", "Ex marking": "Ex db IIC T4 Gb"},
    {"code": "GA", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg", "Ex marking": "Ex ia IIC T4 Ga"},
    {"code": "DP", "body": "differential", "LRL": "-1 bar", "URL": "10 bar", "Ex marking": "Ex ia IIC T4 Ga"},
    {"code": "4W", "body": "gauge", "wires": "4", "LRL": "-1 barg", "URL": "10 barg", "Ex marking": "Ex ia IIC T4 Ga"},
    {"code": "BUS", "body": "gauge", "signal": "Profibus PA", "LRL": "-1 barg", "URL": "10 barg",
     "Ex marking": "Ex ia IIC T4 Ga"},
    {"code": "SW", "kind": "switch", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg",
     "Ex marking": "Ex ia IIC T4 Ga"},
    {"code": "BAD", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg", "Ex marking": "Ex something"},
    {"code": "NO-T", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg", "Ex marking": "Ex ia IIC Ga"},
)  # fmt: skip


def test_types_that_are_like_it_and_would_be_accepted_are_named() -> None:
    row = {"tag": "PT-1", "device type": "GC", "LRV": "0", "URV": "6", "range unit": "barg", "area": "A"}
    (found,) = findings("HAZ03", [row], types=TYPES, areas=[{"code": "A", **gas()}])
    assert [fix.text for fix in found.fixes] == [
        "device type GA (Ex ia IIC T4 Ga)",
        "device type GB (Ex db IIC T4 Gb)",
        "device type GB-BIG (Ex db IIC T4 Gb)",
    ]
    assert [dict(fix.change) for fix in found.fixes] == [{"device type": code} for code in ("GA", "GB", "GB-BIG")]


@pytest.mark.parametrize(
    ("code", "row", "area"),
    [
        ("HAZ02", {"device type": "BARE"}, gas()),
        ("HAZ03", {"device type": "GC"}, gas()),
        ("HAZ03", {"device type": "GC", "Ex marking": "Ex ec IIC T4 Gc", "certificate": "ABC 20 ATEX 0001"}, gas()),
        ("HAZ03", {"Ex marking": "Ex ec IIC T4 Gc"}, gas()),
        ("HAZ04", {"device type": "GB-IIA"}, gas()),
        ("HAZ05", {"device type": "GB-HOT"}, gas()),
        ("HAZ08", {"device type": "GB"}, gas(high="50")),
    ],
)
def test_a_type_applied_clears_its_finding(code: str, row: Row, area: Row) -> None:
    types = [
        *TYPES,
        *catalogue(
            {"code": "BARE", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg"},
            {"code": "WARM", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg", "certificate": "ABC 21 ATEX 0002",
             "Ex marking": "Ex db IIC T5 Gb -40°C ≤ Ta ≤ +60°C"},
        ),
    ]  # fmt: skip
    plant = example_plant([{"tag": "PT-1", **row, "area": "A"}], types=types, areas=[{"code": "A", **area}])
    result = audit(plant, codes=CODES, raise_errors=True)
    (found,) = [each for each in result.findings if each.rule == code]
    assert found.fixes
    for fix in found.fixes:
        after = audit(assemble(mended(plant, found, fix)), codes=CODES, raise_errors=True)
        assert (fix.text, after.findings) == (fix.text, [])


def test_a_rows_own_marking_goes_with_its_type() -> None:
    row = {"tag": "PT-1", "device type": "GC", "Ex marking": "Ex ec IIC T4 Gc", "area": "A"}
    (found,) = findings("HAZ03", [row], types=TYPES[:2], areas=[{"code": "A", **gas()}])
    assert [dict(fix.change) for fix in found.fixes] == [{"device type": "GB", "Ex marking": "Ex db IIC T4 Gb"}]


def test_no_type_is_offered_that_another_variable_or_substance_uses() -> None:
    types = [
        {"code": "LS", "kind": "switch", "signal": "contact", "Ex marking": "Ex ia IIC T4 Ga"},
        {"code": "PS", "kind": "switch", "signal": "contact", "Ex marking": "Ex ec IIC T4 Gc"},
        {"code": "PS-1", "kind": "switch", "signal": "contact", "Ex marking": "Ex db IIC T4 Gb"},
        {"code": "AN", "kind": "analyser", "description": "Oxygen analyser", "Ex marking": "Ex ec IIC T4 Gc"},
        {"code": "AN-D", "kind": "analyser", "description": "Oxygen analyser, d", "Ex marking": "Ex db IIC T4 Gb"},
        {"code": "AC-D", "kind": "analyser", "description": "Chlorine analyser", "Ex marking": "Ex db IIC T4 Gb"},
    ]
    rows = [
        {"tag": "LSH-1", "device type": "LS", "area": "A"},
        {"tag": "PSH-2", "device type": "PS", "area": "A"},
        {"tag": "AIT-3", "device type": "AN", "area": "A"},
    ]
    found = findings("HAZ03", rows, types=types, areas=[{"code": "A", **gas()}])
    assert [(each.subject, [fix.change["device type"] for fix in each.fixes]) for each in found] == [
        ("AIT-3", ["AN-D"]),
        ("PSH-2", ["PS-1"]),
    ]


# ------------------------------------------------------------------------------------------------------ who is asked


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "PT-1"}, True),
        ({"tag": "TE-1"}, True),
        ({"tag": "LSH-1"}, True),
        ({"tag": "ZSO-1"}, True),
        ({"tag": "FY-1", "kind": "positioner"}, True),
        ({"tag": "HS-1", "kind": "hand switch"}, True),
        ({"tag": "JB-1", "kind": "junction box"}, True),
        ({"tag": "LCP-1", "kind": "panel"}, True),
        ({"tag": "PT-1", "location": "field"}, True),
        ({"tag": "HS-1", "kind": "hand switch", "location": "local panel"}, True),
        ({"tag": "PT-1", "location": "cabinet"}, False),
        ({"tag": "PT-1", "location": "control room"}, False),
        ({"tag": "PY-1", "kind": "isolator"}, False),
        ({"tag": "PY-1", "kind": "isolator", "location": "field"}, True),
        ({"tag": "PSU-1", "kind": "power supply"}, False),
        ({"tag": "PG-1"}, False),
        ({"tag": "FE-1"}, False),
        ({"tag": "PSV-1"}, False),
        ({"tag": "FIC-1", "location": "system"}, False),
        # a valve by its signal, I/O or marking
        ({"tag": "FV-1"}, False),
        ({"tag": "FV-1", "signal": "4-20 mA"}, True),
        ({"tag": "XV-1", "I/O type": "DO"}, True),
        ({"tag": "XV-1", "Ex marking": "Ex"}, True),
        ({"tag": "FV-1", "signal": "0.2-1 bar"}, False),
        ({"tag": "FV-1", "signal": "3-15 psi"}, False),
        # an old transmitter by air
        ({"tag": "PT-1", "signal": "3-15 psi"}, False),
        ({"tag": "PT-1", "signal": "pneumatic", "I/O type": "AI"}, True),
        ({"tag": "FY-1", "kind": "I/P converter", "signal": "4-20 mA / 3-15 psi"}, True),
        # no longer there
        ({"tag": "PT-1", "status": "deleted"}, False),
    ],
)
def test_who_is_asked(row: Row, expected: bool) -> None:
    asked = outcomes("HAZ02", [{"Ex marking": "", **row, "area": "A"}], areas=[{"code": "A", **gas()}])
    assert (asked != {"not applicable": 1}) is expected


def test_an_unknown_kind_is_unchecked() -> None:
    assert outcomes("HAZ01", [{"tag": "XX-1", "Zone": "Zone 1"}]) == {"clear": 1}
    assert unchecked_for("HAZ01", [{"tag": "XX-1", "area": "E"}], areas=[{"code": "E", "zone": ""}]) == {"kind": 1}
    for code in (*CODES[:2], *ON_MARKINGS):
        row = {"tag": "XX-1", "area classification": "", "Ex marking": ""}
        assert unchecked_for(code, [row]) == {"kind": 1}
    # A signal shows that it is electrical.
    assert said("HAZ01", [{"tag": "XX-1", "signal": "4-20 mA", "area": ""}]) == [
        "XX-1: no area, and no classification of its own"
    ]


def test_a_valve_is_marked_as_its_positioner_is() -> None:
    area = [{"code": "A", **gas()}]
    valve = {"tag": "FV-1", "signal": "4-20 mA", "I/O type": "AO", "area": "A", "Ex marking": ""}
    positioner = {"tag": "FY-1", "kind": "positioner", "area": "A", "Ex marking": "Ex ia IIC T4 Gb"}
    words = "no Ex marking, in area A (Zone 1 IIB T3)"
    assert said("HAZ02", [valve], areas=area) == [f"FV-1: {words}"]
    assert said("HAZ02", [valve, positioner], areas=area) == []
    assert said("HAZ02", [valve, {**positioner, "Ex marking": ""}], areas=area) == [f"FY-1: {words}"]
    # Its own contacts are not the positioner's.
    assert said("HAZ02", [{**valve, "I/O type": "DI"}, positioner], areas=area) == [f"FV-1: {words}"]


# ------------------------------------------------------------------------------------------------------------- HAZ01


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"area": "", "area classification": ""}, ["PT-1: no area, and no classification of its own"]),
        ({"area": "-", "area classification": ""}, ["PT-1: no area, and no classification of its own"]),
        ({"area": "", "area classification": "TBA"}, ["PT-1: no area, and no classification of its own"]),
        ({"area": "", "area classification": "---"}, ["PT-1: no area, and no classification of its own"]),
        *(({"area": "", "area classification": text}, "clear") for text in
          ("safe", "none", "Non-haz", "unclassified", "N/A", "Zone 2", "Zone 1 IIB T3", "Cl I Div 2 Gr D T3")),
        ({"area": "A", "area classification": ""}, "clear"),
        ({"area": "a", "area classification": ""}, "clear"),
        ({"area": "N", "area classification": ""}, "clear"),
        ({"area": "safe", "area classification": ""}, "clear"),
        ({"area": "E", "area classification": ""}, ["PT-1: area E has no classification"]),
        ({"area": "E", "area classification": "Zone 1 IIB T3"}, "clear"),
        # found as not listed, unreadable, or listed twice: not again
        ({"area": "B", "area classification": ""}, "unchecked: area"),
        ({"area": "T", "area classification": ""}, "unchecked: area"),
        ({"area": "", "area classification": "Zone 7"}, "unchecked: area classification"),
        ({"area": "U", "area classification": ""}, "unchecked: area zone"),
        # a panel may stand in the control room
        ({"area": "", "area classification": "", "location": "panel"}, "unchecked: location"),
        ({"area": "", "area classification": "", "location": "cabinet"}, "not applicable"),
    ],
)  # fmt: skip
def test_area(row: Row, expected: list[str] | str) -> None:
    areas = [
        {"code": "A", "system": "", **gas()},
        {"code": "N", "system": "none"},
        {"code": "E", "name": "Pump bay", "ambient min": "-20"},
        {"code": "T", **gas()},
        {"code": "T", **gas("2")},
        {"code": "U", "zone": "7"},
    ]
    assert came_to("HAZ01", [{"tag": "PT-1", **row}], areas=areas) == expected


def test_why_the_area_is_blank_is_told() -> None:
    found = findings("HAZ01", [{"tag": "PT-1", "area": "TBC"}, {"tag": "PT-2", "area": ""}])
    assert [each.found for each in found] == ["blank (to be defined)", "blank"]


def test_no_column_for_the_area_is_one_finding() -> None:
    rows = [{"tag": f"PT-{number}", "service": "water"} for number in range(1, 4)] + [{"tag": "PG-1"}]
    assert said("HAZ01", rows) == [
        "list.xlsx: no sheet has a column for the area or its classification; "
        "3 electrical instruments stand in the field"
    ]
    assert outcomes("HAZ01", rows) == {"unchecked": 3, "not applicable": 1}
    assert said("HAZ01", [{"tag": "PG-1", "service": "water"}]) == []


def test_a_list_of_areas_that_classifies_none_is_one_finding() -> None:
    areas = [{"code": "10", "name": "Inlet works"}, {"code": "20", "name": "Filters"}]
    rows = [{"tag": f"PT-{number}", "area": "10"} for number in (1, 2)] + [{"tag": "PT-3", "area": "20"}]
    assert said("HAZ01", rows, areas=areas) == [
        "list.xlsx: the list of areas has no column for zone, class or division; "
        "3 electrical instruments stand in its areas"
    ]
    assert said("HAZ01", rows[:1], areas=areas) == ["PT-1: area 10 has no classification"]
    # With the column, each row is its own.
    assert said("HAZ01", rows[:2], areas=[{**areas[0], "zone": ""}, {**areas[1], "zone": "2"}]) == [
        "PT-1: area 10 has no classification",
        "PT-2: area 10 has no classification",
    ]


# ------------------------------------------------------------------------------------------------------------- HAZ02

ZONE_1 = "in area A (Zone 1 IIB T3)"
DIV_2 = "in area A (Class I Div 2 Group D T3)"


@pytest.mark.parametrize(
    ("row", "area", "expected"),
    [
        ({"tag": "PT-1"}, gas(), [f"PT-1: no Ex marking, {ZONE_1}"]),
        ({"tag": "PT-1", "Ex marking": "TBA"}, gas(), [f"PT-1: no Ex marking, {ZONE_1}"]),
        ({"tag": "PT-1", "Ex marking": "non-Ex"}, gas(), [f"PT-1: marked 'non-Ex', {ZONE_1}"]),
        ({"tag": "PT-1", "Ex marking": "Ex ec IIC T4 Gc"}, gas(), "clear"),
        ({"tag": "PT-1", "Ex marking": "[Ex ia Ga] IIC"}, gas(), "not applicable"),
        ({"tag": "PT-1", "Ex marking": "gibberish"}, gas(), "unchecked: Ex marking"),
        ({"tag": "PT-1", "certificate": "ABC 20 ATEX 0001"}, gas(), [f"PT-1: no Ex marking, {ZONE_1}"]),
        ({"tag": "PT-1"}, "safe", "not applicable"),
        ({"tag": "PT-1"}, "", "unchecked: area"),
        # the whole marking in the column for the protection
        ({"tag": "PT-1", "type of protection": "Ex d IIC T6"}, gas(), "clear"),
        ({"tag": "PT-1", "type of protection": "Ex d"}, gas(), [f"PT-1: no Ex marking, {ZONE_1}"]),
        # passive elements
        *(({"tag": tag}, gas(), [
            f"review: {tag}: no Ex marking, {ZONE_1}: a passive {kind} is simple apparatus only where that is stated"])
          for tag, kind in (("TE-1", "element"), ("PSH-1", "switch"), ("ZSO-1", "switch"), ("HS-1", "hand switch"))),
        ({"tag": "AE-1", "signal": "Pt100"}, gas(), [
            f"review: AE-1: no Ex marking, {ZONE_1}: a passive element is simple apparatus only where that is stated"]),
        ({"tag": "VE-1", "signal": "4-20 mA"}, gas(), [f"VE-1: no Ex marking, {ZONE_1}"]),
        ({"tag": "TE-1", "signal": "4-20 mA"}, gas(), [f"TE-1: no Ex marking, {ZONE_1}"]),
        ({"tag": "ZSO-1", "signal": "NAMUR"}, gas(), [f"ZSO-1: no Ex marking, {ZONE_1}"]),
        # ... with the statement
        *(({"tag": tag, "simple apparatus": "yes"}, gas(), "clear") for tag in ("TE-1", "PSH-1", "HS-1", "JB-1")),
        ({"tag": "TE-1", "simple apparatus": "no"}, gas(), [
            f"review: TE-1: no Ex marking, {ZONE_1}: a passive element is simple apparatus only where that is stated"]),
        ({"tag": "PT-1", "simple apparatus": "yes"}, gas(), [
            f"PT-1: no Ex marking, {ZONE_1}: stated to be simple apparatus, which a transmitter cannot be"]),
        ({"tag": "ZSO-1", "signal": "NAMUR", "simple apparatus": "yes"}, gas(), [
            f"review: ZSO-1: no Ex marking, {ZONE_1}: stated to be simple apparatus, which not every switch can be"]),
        # Division 2
        ({"tag": "JB-1"}, division(), [
            f"review: JB-1: no Ex marking, {DIV_2}: a junction box, which Division 2 may allow without"]),
        ({"tag": "LCP-1", "kind": "panel"}, division(), [
            f"review: LCP-1: no Ex marking, {DIV_2}: a panel, which Division 2 may allow without"]),
        ({"tag": "PT-1", "nonincendive": "yes"}, division(), [
            f"review: PT-1: no Ex marking, {DIV_2}: stated to be nonincendive, which Division 2 may allow without"]),
        ({"tag": "PT-1"}, division(), [f"PT-1: no Ex marking, {DIV_2}"]),
        ({"tag": "JB-1"}, division("1"), ["JB-1: no Ex marking, in area A (Class I Div 1 Group D T3)"]),
        ({"tag": "JB-1"}, gas("2"), ["JB-1: no Ex marking, in area A (Zone 2 IIB T3)"]),
        ({"tag": "PT-1", "nonincendive": "yes"}, gas("2"), ["PT-1: no Ex marking, in area A (Zone 2 IIB T3)"]),
    ],
)  # fmt: skip
def test_unmarked(row: Row, area: Row | str, expected: list[str] | str) -> None:
    here = {"Ex marking": "", **row}
    sheets: dict[str, Any] = {}
    if isinstance(area, str):
        here["area classification"] = area
    else:
        here["area"] = "A"
        sheets["areas"] = [{"code": "A", **area}]
    assert came_to("HAZ02", [here], **sheets) == expected


def test_simple_apparatus_is_not_asked_for_what_only_a_marking_says() -> None:
    row = {"tag": "TE-1", "Ex marking": "", "simple apparatus": "yes", "area": "A"}
    areas = [{"code": "A", **gas()}]
    assert [outcomes(code, [row], areas=areas) for code in ON_MARKINGS] == [{"not applicable": 1}] * 8


def test_no_column_for_the_marking_is_one_finding() -> None:
    rows = [{"tag": f"PT-{number}", "Zone": "Zone 2 IIB T3"} for number in (1, 2, 3)]
    assert said("HAZ02", rows) == [
        "list.xlsx: no sheet has a column for the Ex marking; 3 electrical instruments stand in classified areas"
    ]
    assert outcomes("HAZ02", rows) == {"unchecked": 3}
    assert said("HAZ02", rows[:1]) == ["PT-1: no Ex marking, in 'Zone 2 IIB T3'"]
    assert said("HAZ02", [{**row, "Zone": "safe"} for row in rows]) == []
    types = [{"code": "X", "kind": "transmitter", "Ex marking": ""}]
    assert len(said("HAZ02", [{**row, "device type": "X"} for row in rows], types=types)) == 3


def test_a_type_that_is_not_listed_may_hold_the_marking() -> None:
    area, types = [{"code": "A", **gas()}], [{"code": "X", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga"}]
    lost = {"tag": "PT-1", "device type": "Y", "area": "A", "Ex marking": ""}
    marked = {"tag": "PT-2", "device type": "Y", "area": "A", "Ex marking": "Ex ia IIC T4 Ga"}
    for code in ("HAZ02", "HAZ03"):
        assert unchecked_for(code, [lost], areas=area, types=types) == {"device type": 1}
        assert unchecked_for(code, [lost], areas=area) == {"device type": 1}
    # Without a catalogue, rows that hold markings hold them all.
    assert said("HAZ02", [lost, marked], areas=area) == [f"PT-1: no Ex marking, {ZONE_1}"]


def test_a_type_listed_twice_leaves_its_marking_unchecked() -> None:
    types = [
        {"code": "X", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga"},
        {"code": "X", "kind": "transmitter", "Ex marking": "Ex ec IIC T4 Gc"},
    ]
    row = {"tag": "PT-1", "device type": "X", "area": "A"}
    areas = [{"code": "A", **gas()}]
    for code in ("HAZ02", "HAZ03", "HAZ04", "HAZ05", "HAZ08"):
        assert unchecked_for(code, [row], types=types, areas=areas) == {"device type": 1}
    own = {**row, "Ex marking": "Ex db IIC T4 Gb"}
    assert outcomes("HAZ03", [own], types=types, areas=areas) == {"clear": 1}


# ------------------------------------------------------------------------------------------------------------- HAZ15


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        (
            {"Ex marking": "EExe approved", "Zone": "Zone 1 IIB T3"},
            ["review: JB-1: the Ex marking 'EExe approved' cannot be read: no gas or dust group in 'EExe'"],
        ),
        (
            {"Ex marking": "ATEX", "Zone": "Zone 1 IIB T3"},
            ["review: JB-1: the Ex marking 'ATEX' cannot be read: cannot read 'ATEX'"],
        ),
        (
            {"Ex marking": "ATEX", "Zone": ""},
            ["review: JB-1: the Ex marking 'ATEX' cannot be read: cannot read 'ATEX'"],
        ),
        ({"Ex marking": "ATEX", "Zone": "safe"}, "not applicable"),
        ({"Ex marking": "Ex e II T3", "Zone": "Zone 1 IIB T3"}, "clear"),
        ({"Ex marking": "none", "Zone": "Zone 1 IIB T3"}, "not applicable"),
        ({"Ex marking": "", "Zone": "Zone 1 IIB T3"}, "not applicable"),
    ],
)
def test_unreadable_marking(row: Row, expected: list[str] | str) -> None:
    assert came_to("HAZ15", [{"tag": "JB-1", **row}]) == expected


def test_what_cannot_be_read_leaves_the_other_rules_unchecked() -> None:
    row = {"tag": "JB-1", "Ex marking": "EExe approved", "area": "A"}
    for code in ("HAZ02", *ON_MARKINGS):
        assert unchecked_for(code, [row], areas=[{"code": "A", **gas()}]) == {"Ex marking": 1}


def test_an_unreadable_marking_of_a_type_stands_in_the_catalogue() -> None:
    types = [{"code": "X", "kind": "transmitter", "Ex marking": "Exx"}]
    (found,) = findings("HAZ15", [{"tag": "PT-1", "device type": "X", "Zone": "Zone 1 IIB T3"}], types=types)
    assert [(cell.sheet, cell.address) for cell in found.cells] == [("Device types", "C2"), ("Instruments", "B2")]


# ------------------------------------------------------------------------------------------------------------- HAZ20


@pytest.mark.parametrize(
    ("area", "expected"),
    [
        (gas(), "clear"),
        (gas(group=""), ["A: area A (Zone 1 T3) lacks its gas group"]),
        (gas(t_class=""), ["A: area A (Zone 1 IIB) lacks its temperature class"]),
        (gas(low=""), ["A: area A (Zone 1 IIB T3) lacks its ambient min"]),
        (gas("0", "", "", "", ""),
         ["A: area A (Zone 0) lacks its gas group, temperature class, ambient min and ambient max"]),
        (gas("", gas="methane"), ["A: area A (IIB T3, methane) lacks its zone"]),
        (gas("", **{"EPL required": "Gb"}), "clear"),
        (gas(group="2X"), ["A: area A (Zone 1 T3) lacks its gas group (the cell cannot be read)"]),
        (gas("7"), ["A: area A (IIB T3) lacks its zone (the cell cannot be read)"]),
        (dust(), "clear"),
        (dust(group=""), ["A: area A (Zone 21) lacks its dust group"]),
        (dust(surface=""), ["A: area A (Zone 21 IIIB) lacks its permitted dust surface temperature"]),
        ({**dust(surface=""), "cloud ignition temperature": "420"},
         ["A: area A (Zone 21 IIIB) lacks its layer ignition temperature"]),
        ({**dust(surface=""), "cloud ignition temperature": "420", "layer ignition temperature": "225"}, "clear"),
        ({**dust(surface=""), "cloud ignition temperature": "420", "layer ignition temperature": "225",
          "layer depth": "8"}, "clear"),
        ({**dust("1/21"), "gas group": "IIB", "temperature class": "T3"}, "clear"),
        (dust("1/21"), ["A: area A (Zone 1/21 IIIB) lacks its gas group and temperature class"]),
        ({**dust("21", ""), "gas group": "IIB", "temperature class": "T3"},
         ["A: area A (Zone 21 IIB T3) lacks its gas zone and dust group"]),
        (division(), "clear"),
        (division(group=""), ["A: area A (Class I Div 2 T3) lacks its gas group"]),
        (division(t_class=""), ["A: area A (Class I Div 2 Group D) lacks its temperature class"]),
        (division("", "D"), ["A: area A (Class I Group D T3) lacks its division"]),
        (division("1", "G", "T3C", "II"), "clear"),
        (division("1", "", "T3C", "II"), ["A: area A (Class II Div 1 T3C) lacks its dust group"]),
        (division("1", "", "T3C", "III"), "clear"),
        # a group of the other system is none
        (gas(group="C"), ["A: area A (Zone 1 C T3) lacks its gas group (C is none of the zone system's)"]),
        (division(group="IIC"),
         ["A: area A (Class I Div 2 IIC T3) lacks its gas group (IIC is none of the division system's)"]),
        (gas("", "C,D"), ["A: area A (C,D T3) lacks its class and division"]),
        ({"system": "none", "zone": ""}, "not applicable"),
        # HAZ01 finds it with those who stand there
        ({"zone": "", "name": "Pump bay"}, "unchecked: area zone"),
    ],
)  # fmt: skip
def test_area_record(area: Row, expected: list[str] | str) -> None:
    assert came_to("HAZ20", [{"tag": "PT-1", "area": "A"}], areas=[{"code": "A", **area}]) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("Zone 1 IIB T3", "clear"),
        ("Zone 1", ["Zone 1: 'Zone 1' lacks its gas group and temperature class"]),
        ("Zone 21 IIIB T120°C", "clear"),
        ("Zone 22", ["Zone 22: 'Zone 22' lacks its dust group and permitted dust surface temperature"]),
        ("Cl I Div 2 Gr D T3", "clear"),
        ("Class I Div 2", ["Class I Div 2: 'Class I Div 2' lacks its gas group and temperature class"]),
    ],
)
def test_a_rows_own_area_is_not_asked_for_its_ambient(text: str, expected: list[str] | str) -> None:
    rows = [{"tag": "PT-1", "Zone": text}, {"tag": "PT-2", "Zone": text}]
    assert came_to("HAZ20", rows) == expected
    if expected != "clear":
        (found,) = findings("HAZ20", rows)
        assert [cell.address for cell in found.cells] == ["B2"]


def test_a_column_that_no_list_of_areas_has_is_one_finding() -> None:
    areas = [{"code": "A", "zone": "1", "gas group": "IIB"}, {"code": "B", "zone": "2", "gas group": "IIA"}]
    rows = [{"tag": "PT-1", "area": "A"}]
    assert said("HAZ20", rows, areas=areas) == [
        "list.xlsx: the list of areas has no column for area temperature class, area ambient min, area ambient max; "
        "2 areas need it"
    ]
    assert said("HAZ20", rows, areas=areas[:1]) == [
        "A: area A (Zone 1 IIB) lacks its temperature class, ambient min and ambient max"
    ]


def test_an_area_listed_twice_is_unchecked() -> None:
    rows = [{"tag": "PT-1", "area": "A", "Ex marking": "Ex ia IIC T4 Ga"}]
    areas = [{"code": "A", **gas()}, {"code": "A", **gas("2", t_class="")}]
    for code in ("HAZ01", "HAZ02", *ON_MARKINGS):
        assert unchecked_for(code, rows, areas=areas) == {"area": 1}
    assert outcomes("HAZ20", rows, areas=areas) == {"unchecked": 1}


# ------------------------------------------------------------------------------------------------ two words for one


def test_the_stricter_of_area_and_own_classification_counts() -> None:
    row = {"tag": "PT-1", "area": "A", "Ex marking": "Ex ec IIC T4 Gc"}
    areas = [{"code": "A", **gas("2")}, {"code": "N", "system": "none"}]
    assert said("HAZ03", [row], areas=areas) == []
    for area in ("A", "N"):
        stricter = {**row, "area": area, "area classification": "Zone 1 IIB T3"}
        assert said("HAZ03", [stricter], areas=areas) == [
            "PT-1: EPL Gc in Zone 1, which accepts Ga, Gb: Ex ec IIC T4 Gc, in 'Zone 1 IIB T3'"
        ]
    # What the row's cell leaves out, the area's own record holds.
    assert outcomes("HAZ04", [{**row, "area classification": "Zone 2"}], areas=areas) == {"clear": 1}
    assert outcomes("HAZ03", [{**row, "area classification": "safe"}], areas=areas) == {"clear": 1}


def test_the_order_of_rows_changes_nothing() -> None:
    rows = [
        {"tag": f"PT-{number}", "Zone": zone, "Ex marking": "Ex ec IIB T2 Gc"}
        for number, zone in enumerate(("Zone 1 IIC T3", "Zone 2", "zone 1 iic t3", ""))
    ]
    for code in CODES:
        assert said(code, rows) == said(code, rows[::-1])


MARKINGS = tuple(
    json.loads(line)["string"]
    for line in (Path(__file__).parents[2] / "vectors" / "markings.jsonl").read_text(encoding="utf-8").splitlines()
)


def test_every_marking_comes_to_an_outcome_everywhere_and_no_blank_is_clear() -> None:
    complete: dict[str, Row] = {
        "gas": gas(), "dust": dust(), "division": division(), "US": gas("2", jurisdiction="US"),
        "both": {**dust("2/22"), "gas group": "IIB", "temperature class": "T3"},
        "Canada": division(jurisdiction="Canada"), "fibres": division("1", "", "T3", "III"),
    }  # fmt: skip
    blank: dict[str, Row] = {
        "gas blank": {"zone": "1"}, "dust blank": {"zone": "21"}, "division blank": {"class": "I", "division": "2"},
    }  # fmt: skip
    areas = [{"code": code, **area} for code, area in {**complete, **blank}.items()]
    rows = [
        {"tag": f"PT-{100 * number + place}", "area": area["code"], "Ex marking": marking}
        for number, marking in enumerate(MARKINGS, start=1)
        for place, area in enumerate(areas)
    ]
    result = audit(example_plant(rows, areas=areas), codes=CODES, raise_errors=True)
    for code in CODES[:-1]:
        assert sum(result.coverage[code].outcomes.values()) == len(rows)
    there = [row for row in rows if str(row["area"]).endswith("blank")]
    result = audit(example_plant(there, areas=areas), codes=CODES, raise_errors=True)
    for code in ("HAZ04", "HAZ05", "HAZ06", "HAZ07", "HAZ08", "HAZ10"):
        assert (code, result.coverage[code].count(Outcome.CLEAR)) == (code, 0)


@pytest.mark.parametrize(
    ("text", "unclassified"),
    [
        ("N/A", True),
        ("n.a.", True),
        ("none", True),
        ("Not applicable", True),
        ("keine", True),
        ("safe", True),
        ("-", False),
        ("", False),
        ("TBA", False),
        ("n/r", False),
        ("entf.", False),
    ],
)
def test_none_in_the_column_of_areas_is_unclassified_and_a_dash_is_blank(text: str, unclassified: bool) -> None:
    rows = [{"tag": "PT-1", "area": text}, {"tag": "PT-2", "area": "A"}]
    plant = example_plant(rows, areas=[{"code": "A", **gas()}])
    said = [each.subject for each in audit(plant, codes=["HAZ01"], raise_errors=True).findings]
    assert (plant.instruments[0].unclassified, said) == (unclassified, [] if unclassified else ["PT-1"])
    listed = f"'{text}' in an area column is read as: not a hazardous area"
    assert (listed in plant.assumptions) is unclassified


@pytest.mark.parametrize(
    ("area", "expected"),
    [
        ({"zone": "spray booth"}, ["A: zone: 'spray booth' cannot be read: no zone is read in it"]),
        ({"gas group": "IIX"}, ["A: gas group: 'IIX' cannot be read: no gas group is read in it"]),
        (
            {"temperature class": "T7"},
            ["A: temperature class: 'T7' cannot be read: no temperature class is read in it"],
        ),
        ({"zone": "safe"}, []),
        ({"gas group": "Gr. IIB + H2"}, []),
        ({}, []),
    ],
)
def test_a_text_of_the_list_of_areas_that_cannot_be_read_is_told(area: Row, expected: list[str]) -> None:
    rows = [{"tag": "PT-1", "area": "A"}]
    assert said("DAT09", rows, areas=[{"code": "A", **gas(), **area}]) == expected
    assert [
        cell.sheet for each in findings("DAT09", rows, areas=[{"code": "A", **gas(), **area}]) for cell in each.cells
    ] == (["Areas"] * len(expected))
