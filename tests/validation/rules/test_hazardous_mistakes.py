"""Mistakes that are easily made about hazardous areas, each through every HAZ rule: what must come of it.

Beside each stands what a check would say that makes the mistake: that must not come back.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

import pytest

from validation.audit import audit
from validation.example import example_plant
from validation.finding import Outcome
from validation.rule import load_rules

N: dict[str, str] = {}
ATEX, US = {"jurisdiction": "ATEX"}, {"jurisdiction": "US"}


@dataclass(frozen=True, kw_only=True)
class Mistake:
    """A marking in an area, what the rules must say of it beyond clear, and what the mistaken check says."""

    name: str
    marking: str
    area: dict[str, str]
    said: dict[str, str]
    naive: str
    row: dict[str, str] = field(default_factory=dict)
    plant: dict[str, str] = field(default_factory=lambda: ATEX)


def zone(number: str, group: str, t_class: str, *, low: str = "-20", high: str = "40", gas: str = "") -> dict[str, str]:
    return {
        "zone": number,
        "gas group": group,
        "temperature class": t_class,
        "gas": gas,
        "ambient min": low,
        "ambient max": high,
    }


def dust(number: str, group: str, **more: str) -> dict[str, str]:
    return {"zone": number, "dust group": group, "ambient min": "-20", "ambient max": "40", **more}


def division(number: str, group: str, t_class: str = "T3", *, gas: str = "") -> dict[str, str]:
    return {
        "system": "division",
        "class": "I",
        "division": number,
        "gas group": group,
        "temperature class": t_class,
        "gas": gas,
        "ambient min": "-20",
        "ambient max": "40",
    }


C, R = "finding", "review"
PAIRED = "Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga"
PARTITION = "Ex db ia IIC T6...T4 Ga/Gb"
SURFACE = {"cloud ignition temperature": "420", "layer ignition temperature": "225"}

MISTAKES = [
    Mistake(name="1 the T class alone", marking="Ex ia IIC T4 Ga", area=zone("1", "IIB", "T3", high="50"),
            said={"HAZ08": C}, naive="clear"),
    Mistake(name="2 the first of the paired classes", marking=PAIRED, area=zone("1", "IIB", "T6", high="55"),
            said={"HAZ05": C}, naive="clear"),
    Mistake(name="2 paired: T4 is enough", marking=PAIRED, area=zone("1", "IIB", "T4", high="55"), said=N,
            naive="finding"),
    Mistake(name="2 paired: above every pair", marking=PAIRED, area=zone("1", "IIB", "T4", high="75"),
            said={"HAZ08": C}, naive="clear"),
    Mistake(name="3 the cold end", marking="Ex db IIC T6 Gb", area=zone("1", "IIB", "T3", low="-30", high="35"),
            said={"HAZ08": C}, naive="clear"),
    Mistake(name="4 ia read as zone 0", marking="Ex ia IIC T4 Gb", area=zone("0", "IIC", "T4"), said={"HAZ03": C},
            naive="clear"),
    Mistake(name="5 a partition read as Ga", marking=PARTITION, area=zone("0", "IIC", "T4"), said={"HAZ03": C},
            naive="clear"),
    Mistake(name="5 its process side named", marking=PARTITION, area=zone("1", "IIC", "T4"),
            row={"process-side zone": "0"}, said=N, naive="finding"),
    Mistake(name="5 zone 0 on the process side of a plain Gb", marking="Ex db IIC T4 Gb",
            area=zone("1", "IIC", "T4"), row={"process-side zone": "0"}, said={"HAZ03": C}, naive="clear"),
    Mistake(name="5 T6...T4 is T4", marking=PARTITION, area=zone("1", "IIC", "T5"), said={"HAZ05": C},
            naive="clear"),
    Mistake(name="6 brackets in the area", marking="[Ex ia Ga] IIC", area=zone("2", "IIC", "T4"),
            said={"HAZ18": C}, naive="clear"),
    Mistake(name="6 brackets outside it", marking="[Ex ia Ga] IIC", area={"system": "none"}, said=N,
            naive="finding"),
    Mistake(name="7 the bracket's EPL", marking="Ex ec [ia Ga] nC IIC T4 Gc", area=zone("1", "IIC", "T4"),
            said={"HAZ03": C}, naive="clear"),
    Mistake(name="7 Gc in zone 2", marking="Ex ec [ia Ga] nC IIC T4 Gc", area=zone("2", "IIC", "T4"), said=N,
            naive="finding"),
    Mistake(name="8 IIB+H2 for hydrogen", marking="Ex db IIB+H2 T1 Gb",
            area=zone("1", "IIC", "T1", gas="hydrogen"), said=N, naive="finding"),
    Mistake(name="8 IIB+H2 for acetylene", marking="Ex db IIB+H2 T2 Gb",
            area=zone("1", "IIC", "T2", gas="acetylene"), said={"HAZ04": C}, naive="clear"),
    Mistake(name="8 IIB+H2 for who knows", marking="Ex db IIB+H2 T1 Gb", area=zone("1", "IIC", "T1"),
            said={"HAZ04": R}, naive="clear"),
    Mistake(name="9 Division 2 in zone 1", marking="Class I Div 2 Gp ABCD T4", area=zone("1", "IIB", "T4"), plant=US,
            said={"HAZ09": C}, naive="clear"),
    Mistake(name="9 Division 2 in zone 2", marking="Class I Div 2 Gp ABCD T4", area=zone("2", "IIB", "T4"), plant=US,
            said=N, naive="finding"),
    Mistake(name="10 zone 1 in Division 1", marking="Class I, Zone 1, AEx db IIC T4 Gb", area=division("1", "D"),
            plant=US, said={"HAZ09": C}, naive="clear"),
    Mistake(name="10 zone 1 in Division 2", marking="Class I, Zone 1, AEx db IIC T4 Gb", area=division("2", "D"),
            plant=US, said=N, naive="finding"),
    Mistake(name="11 explosionproof in zone 0", marking="Class I Div 1 Gp B,C,D T4", area=zone("0", "IIB", "T4"),
            plant=US, row={"type of protection": "explosionproof"}, said={"HAZ09": C}, naive="clear"),
    Mistake(name="11 intrinsically safe in zone 0", marking="Class I Div 1 Gp B,C,D T4",
            area=zone("0", "IIB", "T4"), plant=US, row={"type of protection": "intrinsically safe"}, said=N,
            naive="finding"),
    Mistake(name="11 nobody says which", marking="Class I Div 1 Gp B,C,D T4", area=zone("0", "IIB", "T4"), plant=US,
            said={"HAZ09": R}, naive="clear"),
    Mistake(name="12 a gas EPL for dust", marking="Ex db IIC T4 Gb", area=dust("21", "IIIB",
            **{"permitted dust surface temperature": "150"}), said={"HAZ03": C}, naive="clear"),
    Mistake(name="12 a dust EPL for gas", marking="Ex tb IIIC T85°C Db", area=zone("1", "IIB", "T3"),
            said={"HAZ03": C}, naive="clear"),
    Mistake(name="13 IIIB for conductive dust", marking="Ex tb IIIB T100°C Db", area=dust("21", "IIIC",
            **{"permitted dust surface temperature": "150"}), said={"HAZ06": C}, naive="clear"),
    Mistake(name="13 IIIB for fibres", marking="Ex tb IIIB T100°C Db", area=dust("21", "IIIA",
            **{"permitted dust surface temperature": "150"}), said=N, naive="finding"),
    Mistake(name="14 135 degC of 150", marking="Ex tb IIIC T135°C Db", area=dust("21", "IIIC", **SURFACE,
            **{"layer depth": "5"}), said=N, naive="finding"),
    Mistake(name="14 200 degC of 150", marking="Ex tb IIIC T200°C Db", area=dust("21", "IIIC", **SURFACE,
            **{"layer depth": "5"}), said={"HAZ07": C}, naive="clear"),
    Mistake(name="14 a layer too thick for the rule", marking="Ex tb IIIC T135°C Db", area=dust("21", "IIIC",
            **SURFACE, **{"layer depth": "8"}), said={"HAZ07": R}, naive="clear"),
    Mistake(name="15 X ignored", marking="Ex db IIC T4 Gb", area=zone("1", "IIB", "T3"),
            row={"certificate": "ABC 20 ATEX 0001X"}, said={"HAZ12": R}, naive="clear"),
    Mistake(name="15 X accepted with name and date", marking="Ex db IIC T4 Gb", area=zone("1", "IIB", "T3"),
            row={"certificate": "ABC 20 ATEX 0001X", "X conditions accepted": "N. Hollin, 3 May 2026"}, said=N,
            naive="review"),
    Mistake(name="16 a component as equipment", marking="Ex db IIC T4 Gb", area=zone("1", "IIB", "T3"),
            row={"certificate": "ABC 20 ATEX 0001 U"}, said={"HAZ13": C}, naive="clear"),
    Mistake(name="17 450 degC with T1", marking="Ex db IIC T4 Gb", area=zone("1", "IIA", "T1", gas="propane"),
            said={"HAZ17": C}, naive="clear"),
    Mistake(name="17 450 degC with T2", marking="Ex db IIC T4 Gb", area=zone("1", "IIA", "T2", gas="propane"), said=N,
            naive="finding"),
    Mistake(name="18 group D is not IIA", marking="AEx db IIA T2 Gb", area=division("2", "D", "T2", gas="ethanol"),
            plant=US, said={"HAZ09": C}, naive="clear"),
    Mistake(name="22 ib in zone 0", marking="Ex ib IIC T4 Gb", area=zone("0", "IIC", "T4"), said={"HAZ03": C},
            naive="clear"),
    Mistake(name="26 an RTD that is said to be simple apparatus", marking="", area=zone("1", "IIC", "T4"),
            row={"tag": "TE-1", "kind": "element", "simple apparatus": "yes", "certificate": ""}, said=N,
            naive="finding"),
    Mistake(name="26 an RTD by name alone", marking="", area=zone("1", "IIC", "T4"),
            row={"tag": "TE-1", "kind": "element", "certificate": ""}, said={"HAZ02": R}, naive="clear"),
    Mistake(name="26 a transmitter is none", marking="", area=zone("1", "IIC", "T4"),
            row={"simple apparatus": "yes", "certificate": ""}, said={"HAZ02": C}, naive="clear"),
    Mistake(name="28 T3C is 160 degC", marking="Ex db IIC T4 Gb", area=zone("1", "IIA", "T3C", gas="acetaldehyde"),
            said={"HAZ17": C}, naive="clear"),
    Mistake(name="28 T4A is 120 degC", marking="Ex db IIC T6 Gb", area=zone("1", "IIA", "T4A", gas="acetaldehyde"),
            said=N, naive="finding"),
    Mistake(name="28 T3C for T4", marking="Class I Div 1 Groups A,B,C,D T3C", area=division("1", "C", "T4"), plant=US,
            said={"HAZ05": C}, naive="clear"),
    Mistake(name="29 a mine's mark", marking="Ex db I Mb", area=zone("1", "IIA", "T1"), said={"HAZ03": C},
            naive="clear"),
    Mistake(name="30 category 1 with Gb", marking="II 1 G Ex db IIC T6 Gb", area=zone("0", "IIC", "T4"),
            said={"HAZ03": C, "HAZ14": C}, naive="clear"),
    Mistake(name="31 a plain Ex in the US", marking="Ex ia IIC T4 Ga", area=division("1", "C", "T4"), plant=US,
            said={"HAZ16": R, "HAZ09": R}, naive="clear"),
    Mistake(name="31 a plain Ex in a zone of the US", marking="Ex ia IIC T4 Ga", area=zone("1", "IIB", "T4"), plant=US,
            said={"HAZ16": R}, naive="clear"),
    Mistake(name="32 the letters as a ladder", marking="Class I Div 1 Groups C,D T4",
            area=division("1", "B", gas="hydrogen"), plant=US, said={"HAZ10": C}, naive="clear"),
    Mistake(name="32 the letter itself", marking="Class I Div 1 Groups B,C,D T4",
            area=division("1", "B", gas="hydrogen"), plant=US, said=N, naive="finding"),
]  # fmt: skip


@pytest.mark.parametrize("mistake", MISTAKES, ids=lambda each: each.name)
def test_what_comes_of_a_mistake(mistake: Mistake) -> None:
    row: dict[str, Any] = {
        "tag": "PT-1",
        "kind": "transmitter",
        "area": "A",
        "Ex marking": mistake.marking,
        "certificate": "ABC 20 ATEX 0009",
        **mistake.row,
    }
    plant = example_plant([row], areas=[{"code": "A", **mistake.area}], plant=mistake.plant)
    codes = [rule.code for rule in load_rules() if rule.family == "HAZ"]
    result = audit(plant, codes=codes, raise_errors=True)
    said = {each.rule: "review" if each.outcome is Outcome.REVIEW else "finding" for each in result.findings}
    assert said == mistake.said
    worst = "finding" if "finding" in said.values() else "review" if said else "clear"
    assert worst != mistake.naive
