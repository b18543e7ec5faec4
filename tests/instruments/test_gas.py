"""Gases by name: as plants write them, alone, in lists and in mixtures; what each source says of them."""

import time
from collections import Counter

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.gas import (
    GAS_NAMES,
    GASES,
    INERT,
    GasText,
    gas_of,
    gases_in,
    iec_group_of,
    named_gases,
    nec_group_of,
    source_of,
)
from instruments.gas_table import GAS_ROWS, MIXTURE_ROWS, OTHER_COMPOUNDS
from instruments.marking_text import MAX_LENGTH


@pytest.mark.parametrize(
    ("text", "names"),
    [
        ("H2", ("hydrogen",)),
        ("H₂", ("hydrogen",)),
        ("Hydrogen gas", ("hydrogen",)),
        ("HYDROGEN", ("hydrogen",)),
        ("Wasserstoff H2", ("hydrogen",)),
        ("Methane, hydrogen sulphide", ("methane", "hydrogen sulfide")),
        ("Methane (CH4)", ("methane",)),
        ("H2S", ("hydrogen sulfide",)),
        ("Ethanol-Dampf", ("ethanol",)),
        ("ethyl alcohol vapour", ("ethanol",)),
        ("IPA / acetone", ("2-propanol", "acetone")),
        ("1,3-Butadiene", ("1,3-butadiene",)),
        ("N,N-Dimethylformamide", ("dimethylformamide",)),
        ("1,4-dioxane & THF", ("1,4-dioxane", "tetrahydrofuran")),
        ("iso-butane", ("isobutane",)),
        ("butane", ("n-butane",)),
        ("Flüssiggas", ("liquefied petroleum gas",)),
        ("LPG (propane/butane)", ("liquefied petroleum gas", "propane", "n-butane")),
        ("Erdgas", ("natural gas",)),
        ("natural gas", ("natural gas",)),
        ("Biogas", ("biogas",)),
        ("Faulgas", ("biogas",)),
        ("fuel gas", ("fuel gas",)),
        ("syngas", ("synthesis gas",)),
        ("74-98-6", ("propane",)),
        ("hydrogen in nitrogen", ("hydrogen", "nitrogen")),
        # another thing, whose name holds a gas's
        ("hydrogen chloride", ("hydrogen chloride",)),
        ("ethylene glycol", ("ethylene glycol",)),
        ("methanesulfonic acid", ("methanesulfonic acid",)),
        # nobody knows
        ("solvent xy", ("solvent xy",)),
        ("benzaldehyde", ("benzaldehyde",)),
        ("various", ("various",)),
    ],
)
def test_names_as_plants_write_them(text: str, names: tuple[str, ...]) -> None:
    assert gases_in(text) == GasText(names=names)
    assert named_gases(text) == names


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("CH4 60 %, CO2 40 %", GasText(names=("methane", "carbon dioxide"), amounts=True)),
        ("H2 60%/N2", GasText(names=("hydrogen", "nitrogen"), amounts=True)),
        ("natural gas with 200 ppm H2S", GasText(names=("natural gas", "hydrogen sulfide"), amounts=True)),
        ("Methane with traces of H2S", GasText(names=("methane", "hydrogen sulfide"), amounts=True)),
        ("< 25 vol.-% hydrogen", GasText(names=("hydrogen",), amounts=True)),
        ("hydrogen-rich gas", GasText(names=("hydrogen",), vague=True)),
        ("H2 mixture", GasText(names=("hydrogen",), vague=True)),
        ("methane and others", GasText(names=("methane",), vague=True)),
        ("tert-butane", GasText(names=("n-butane",), vague=True)),
        ("mixture", GasText(vague=True)),
        ("", GasText()),
        (None, GasText()),
        ("-", GasText()),
    ],
)
def test_what_is_said_beside_the_names(text: str | None, said: GasText) -> None:
    assert gases_in(text) == said


def test_no_name_means_two_things() -> None:
    words = Counter(
        word.casefold()
        for row in (*GAS_ROWS, *MIXTURE_ROWS)
        for word in dict.fromkeys((row[0], row[1], *(each.strip() for each in row[6].split(";"))))
        if word
    )
    assert {word: count for word, count in words.items() if count > 1} == {}
    others = {word.strip() for word in OTHER_COMPOUNDS.split(";")}
    assert [*(set(words) & INERT), *(set(words) & others), *(INERT & others)] == []


def test_every_name_is_read_as_its_gas() -> None:
    assert {word: named_gases(word) for word in GAS_NAMES} == {word: (name,) for word, name in GAS_NAMES.items()}


def test_what_a_mixture_holds_is_known_and_no_figure_is_made_up() -> None:
    assert {gas.name: [part for part in gas.holds if gas_of(part) is None] for gas in GASES.values() if gas.holds} == {
        gas.name: [] for gas in GASES.values() if gas.holds
    }
    mixtures = [gas for gas in GASES.values() if gas.is_mixture]
    assert len(mixtures) == len(MIXTURE_ROWS)
    assert [gas for gas in mixtures if gas.iec_group or gas.nec_group or gas.cas] == []


def test_groups_are_the_standards_letters() -> None:
    assert {gas.iec_group for gas in GASES.values()} == {None, "IIA", "IIB", "IIC"}
    assert {gas.nec_group for gas in GASES.values()} == {None, "A", "B", "C", "D", "B/D", "B/C"}


@pytest.mark.parametrize(
    ("names", "iec", "nec"),
    [
        (("methane",), "IIA", "D"),
        (("methane", "hydrogen sulfide"), "IIB", "C"),
        (("methane", "nitrogen"), "IIA", "D"),
        (("hydrogen", "acetylene"), "IIC", "A"),
        (("1,3-butadiene",), "IIB", "B"),
        (("ethanol",), "IIB", "D"),
        (("carbon disulfide",), "IIC", None),
        (("methane", "solvent xy"), None, None),
        (("biogas",), None, None),
        (("nitrogen",), None, None),
        ((), None, None),
    ],
)
def test_the_most_demanding_group_of_several(names: tuple[str, ...], iec: str | None, nec: str | None) -> None:
    assert (iec_group_of(names), nec_group_of(names)) == (iec, nec)


def test_which_source_counts() -> None:
    assert {each: source_of(each) for each in ("IEC", "ATEX", "US", "Canada", "elsewhere", None)} == {
        "IEC": "IEC", "ATEX": "IEC", "US": "NFPA", "Canada": "NFPA", "elsewhere": None, None: None,
    }  # fmt: skip


@given(st.text(max_size=80))
def test_no_text_breaks_it(text: str) -> None:
    gases_in(text)


@pytest.mark.parametrize("piece", ["hydrogen ", "h2", "60 % ", "(", "1-2 to ", "\0", "n,n-", "mixed gas "])
def test_long_hostile_text_is_read_quickly(piece: str) -> None:
    start = time.perf_counter()
    gases_in(piece * (MAX_LENGTH // len(piece)))
    assert gases_in(piece * 100_000) == GasText()
    assert time.perf_counter() - start < 1.0
