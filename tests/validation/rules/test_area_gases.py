"""HAZ17: an area against the gases that it names, by jurisdiction, source and group."""

from __future__ import annotations

from typing import Any

import pytest

from validation.audit import audit
from validation.example import example_plant, findings, outcomes
from validation.finding import Outcome

ROW = [{"tag": "PT-1", "area": "A"}]


def told(area: dict[str, str], plant: dict[str, str] | None = None) -> list[str] | str:
    """Return what is said of an area; its outcome and the blanks, where nothing is."""
    sheets: dict[str, Any] = {"areas": [{"code": "A", **area}], **({"plant": plant} if plant else {})}
    result = audit(example_plant(ROW, **sheets), codes=["HAZ17"], raise_errors=True)
    if result.findings:
        return [
            f"{'review: ' if each.outcome is Outcome.REVIEW else ''}{each.part}: {each.found} / {each.wanted}"
            for each in result.findings
        ]
    coverage = result.coverage["HAZ17"]
    (outcome,) = (each.value for each in Outcome if coverage.count(each))
    blanks = sorted(coverage.because)
    return f"{outcome}: {', '.join(blanks)}" if blanks else outcome


def zone(group: str, t_class: str, gas: str, jurisdiction: str = "ATEX") -> dict[str, str]:
    return {
        "zone": "1",
        "gas group": group,
        "temperature class": t_class,
        "gas": gas,
        "jurisdiction": jurisdiction,
    }


def division(group: str, t_class: str, gas: str, jurisdiction: str = "US") -> dict[str, str]:
    return {
        "system": "division",
        "class": "I",
        "division": "1",
        "gas group": group,
        "temperature class": t_class,
        "gas": gas,
        "jurisdiction": jurisdiction,
    }


def asks(what: str) -> str:
    return f"{what}, or what the area's documents say"


@pytest.mark.parametrize(
    ("area", "said"),
    [
        # the source that counts: IEC 60079-20-1, both sides of the boundary
        (zone("IIB", "T3", "H2S"), "clear"),
        (zone("IIB", "T2", "H2S"), [f"hydrogen sulfide: T2 / {asks('T3')}"]),
        (zone("IIA", "T2", "Propane"), "clear"),
        (zone("IIA", "T1", "Propane"), [f"propane: T1 / {asks('T2')}"]),
        (zone("IIC", "T6", "CS2"), "clear"),
        (zone("IIC", "T5", "CS2"), [f"carbon disulfide: T5 / {asks('T6')}"]),
        (zone("IIC", "T1", "hydrogen", "IEC"), "clear"),
        # the other source asks for more
        (zone("IIA", "T2", "n-butane"), [f"review: n-butane: T2 / {asks('T3')}"]),
        (zone("IIA", "T1", "Essigester"), [f"review: ethyl acetate: T1 / {asks('T2')}"]),
        (zone("IIA", "T2", "Essigester"), "clear"),
        # NFPA 497 in North America
        (zone("IIA", "T2", "n-butane", "US"), [f"n-butane: T2 / {asks('T3')}"]),
        (zone("IIB", "T1", "ethylene", "US"), [f"review: ethylene: T1 / {asks('T2')}"]),
        (zone("IIB", "T1", "ethylene"), [f"ethylene: T1 / {asks('T2')}"]),
        (division("C", "T1", "ethylene", "Canada"), [f"review: ethylene: T1 / {asks('T2')}"]),
        (division("D", "T1", "propane"), [f"propane: T1 / {asks('T2')}"]),
        # lettered codes
        (division("D", "T2A", "n-butane"), "clear"),
        (division("C", "T3C", "acetaldehyde"), [f"review: acetaldehyde: T3C / {asks('T4')}"]),
        (division("C", "T4", "acetaldehyde"), "clear"),
        # no jurisdiction: both are asked
        (zone("IIB", "T2", "H2S", ""), [f"hydrogen sulfide: T2 / {asks('T3')}"]),
        (zone("IIA", "T2", "n-butane", ""), [f"review: n-butane: T2 / {asks('T3')}"]),
        (zone("IIA", "T3", "n-butane", ""), "clear"),
        # the group is from memory: at most a review
        (zone("IIB", "T1", "hydrogen"), [f"review: hydrogen: IIB / {asks('IIC')}"]),
        (zone("IIB+H2", "T1", "hydrogen"), "clear"),
        (zone("IIB+H2", "T1", "ethanol"), [f"ethanol: T1 / {asks('T2')}"]),
        (zone("IIB+H2", "T2", "acetylene"), [f"review: acetylene: IIB+H2 / {asks('IIC')}"]),
        (zone("IIC", "T1", "methane"), "clear"),
        (zone("IIA", "T2", "ethanol"), [f"review: ethanol: IIA / {asks('IIB')}"]),
        (division("D", "T2", "ethanol"), "clear"),
        (division("C", "T1", "hydrogen"), [f"review: hydrogen: C / {asks('B')}"]),
        (division("A,B", "T1", "hydrogen"), "clear"),
        (division("B", "T1", "methane"), "clear"),
        (division("D", "T2", "1,3-butadiene"), [f"review: 1,3-butadiene: D / {asks('B')}"]),
        (division("A", "T6", "CS2"), [f"review: carbon disulfide: A / {asks('no letter of the NEC')}"]),
        # several: each is asked
        (zone("IIA", "T1", "Methane, H2S"),
         [f"review: hydrogen sulfide: IIA / {asks('IIB')}", f"hydrogen sulfide: T1 / {asks('T3')}"]),
        (zone("IIB", "T3", "Methane; H2S"), "clear"),
        (zone("IIB", "T3", "hydrogen in nitrogen"), [f"review: hydrogen: IIB / {asks('IIC')}"]),
        # amounts, mixtures and vague words: never more than a review, never clear
        (zone("IIB", "T2", "Methane with 200 ppm H2S"), [f"review: hydrogen sulfide: T2 / {asks('T3')}"]),
        (zone("IIB", "T2", "H2S mixture"), [f"review: hydrogen sulfide: T2 / {asks('T3')}"]),
        (zone("IIB", "T2", "Biogas (CH4, H2S)"), [f"review: hydrogen sulfide: T2 / {asks('T3')}"]),
        (zone("IIA", "T1", "natural gas"), "unchecked: area gas"),
        (zone("IIC", "T6", "biogas"), "unchecked: area gas"),
        (zone("IIB", "T1", "syngas"), [f"review: synthesis gas: IIB / {asks('IIC')}"]),
        (zone("IIC", "T1", "syngas"), "unchecked: area gas"),
        (zone("IIA", "T1", "LPG"),
         [f"review: liquefied petroleum gas: T1 / {asks('T2')}"]),
        (zone("IIA", "T2", "LPG"), "unchecked: area gas"),
        (division("D", "T2", "LPG"), "clear"),
        (zone("IIC", "T6", "Solvent XY"), "unchecked: area gas"),
        (zone("IIC", "T3", "Hydrogen, Solvent XY"), "unchecked: area gas"),
        (zone("IIB", "T1", "hydrogen chloride"), "unchecked: area gas"),
        # a source that does not list it
        (zone("IIA", "T1", "o-xylene"), "clear"),
        (division("D", "T1", "o-xylene"), "unchecked: area gas"),
        (division("C", "T2", "propyne"), "unchecked: area gas"),
        (zone("IIA", "T3", "Naphtha"), "unchecked: area gas"),
        (zone("IIA", "T2", "Naphtha"), [f"review: petroleum naphtha: T2 / {asks('T3')}"]),
        # blanks
        (zone("IIB", "", "H2S"), "unchecked: area temperature class"),
        (zone("", "T3", "H2S"), "unchecked: area gas group"),
        (zone("IIB", "T3", ""), "unchecked: area gas"),
        (zone("IIB", "T3", "TBA"), "unchecked: area gas"),
        (zone("D", "T3", "H2S"), [f"review: hydrogen sulfide: D / {asks('C')}"]),
        # nothing burns, or nobody classified it
        (zone("IIB", "T3", "nitrogen"), "not applicable"),
        ({"system": "none", "gas": "H2S"}, "not applicable"),
        ({"zone": "21", "dust group": "IIIB", "gas": "flour"}, "not applicable"),
        ({"name": "tank farm", "gas": "H2S"}, "unchecked: area zone"),
    ],
)  # fmt: skip
def test_gases(area: dict[str, str], said: list[str] | str) -> None:
    got = told(area)
    assert sorted(got) == sorted(said) if isinstance(got, list) else got == said


def test_the_message_shows_both_sources() -> None:
    (found,) = findings("HAZ17", ROW, areas=[{"code": "A", "name": "Store", **zone("IIA", "T2", "Butane")}])
    assert found.message == (
        "n-butane asks for T3; area A (Zone 1 IIA T2, Butane) states T2: 372 degC by IEC 60079-20-1:2010 (T2), "
        "288 degC by NFPA 497 (2008) (T3)"
    )
    assert found.fields == ("area temperature class", "area gas")
    assert [f"{cell.sheet} {cell.address}" for cell in found.cells] == ["Areas E2", "Areas F2"]
    assert found.fixes == ()


def test_what_rests_on_memory_says_so() -> None:
    (found,) = findings("HAZ17", ROW, areas=[{"code": "A", **zone("IIA", "T2", "ethanol")}])
    assert found.message.endswith("states IIA: group IIB by IEC 60079-20-1, from memory")
    assert found.assumed == ("groups of named gases are from memory (IEC 60079-20-1, NEC 500.6)",)


def test_the_stricter_reading_of_a_surface_that_reaches_the_ignition_temperature_is_told() -> None:
    (found,) = findings("HAZ17", ROW, areas=[{"code": "A", **division("D", "T1", "propane")}])
    assert found.working.endswith("450 degC by NFPA 497 (2008) (T2); NEC 500.8 lets a surface reach it")


def test_an_area_that_a_rows_own_cell_makes() -> None:
    rows = [{"tag": "PT-1", "area classification": "Zone 1 IIB T2 H2S"}]
    (found,) = findings("HAZ17", rows, plant={"jurisdiction": "IEC"})
    assert (found.subject, found.part) == ("Zone 1 IIB T2 H2S", "hydrogen sulfide")
    assert [cell.address for cell in found.cells] == ["B2"]


def test_the_plants_jurisdiction_counts_where_the_area_states_none() -> None:
    area = zone("IIA", "T2", "n-butane", "")
    assert told(area, {"jurisdiction": "US"}) == [f"n-butane: T2 / {asks('T3')}"]
    assert told(area, {"jurisdiction": "ATEX"}) == [f"review: n-butane: T2 / {asks('T3')}"]


def test_an_area_listed_twice_is_unchecked() -> None:
    areas = [{"code": "A", **zone("IIB", "T2", "H2S")}, {"code": "A", **zone("IIB", "T3", "H2S")}]
    assert outcomes("HAZ17", ROW, areas=areas) == {"unchecked": 1}
