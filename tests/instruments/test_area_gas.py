"""What a gas asks for beside what an area states: every T code, both sources, every group."""

import pytest

from instruments.acceptance import t_class_for_ignition
from instruments.area import Area
from instruments.area_gas import GasAsks, asked_in, group_asked, named_in, temperature_asked
from instruments.gas import GASES, Gas, gas_of
from instruments.marking_entry import T_CODE_C


@pytest.mark.parametrize("jurisdiction", ["IEC", "ATEX", "US", "Canada"])
def test_every_t_code_against_every_gas(jurisdiction: str) -> None:
    north_america = jurisdiction in ("US", "Canada")
    for gas in GASES.values():
        own = gas.ignition_nfpa_c if north_america else gas.ignition_iec_c
        other = gas.ignition_iec_c if north_america else gas.ignition_nfpa_c
        for code, surface_c in T_CODE_C.items():
            asked = temperature_asked(gas, code, jurisdiction=jurisdiction)
            if own is not None and own <= surface_c:
                assert asked.outcome == "refused", (gas.name, code)
                assert asked.asks == (t_class_for_ignition(own) or "a surface cooler than T6 has")
            elif other is not None and other <= surface_c:
                assert asked.outcome == "review", (gas.name, code)
            elif own is not None:
                assert asked.outcome == "accepted", (gas.name, code)
            else:
                assert asked.outcome in ("unknown", "review"), (gas.name, code)


def test_a_gas_that_no_class_is_enough_for() -> None:
    hydrazine = Gas(name="hydrazine", ignition_iec_c=23.0, ignition_nfpa_c=23.0)
    asked = temperature_asked(hydrazine, "T6", jurisdiction="US")
    assert (asked.outcome, asked.asks) == ("refused", "a surface cooler than T6 has")


@pytest.mark.parametrize("stated", [None, "T7", "warm"])
def test_a_class_that_is_blank_or_none_is_unknown(stated: str | None) -> None:
    (gas,) = named_in(Area(gas="methane")).gases
    assert temperature_asked(gas, stated, jurisdiction="IEC").missing == "temperature class"


@pytest.mark.parametrize(
    ("gas", "group", "outcome", "asks"),
    [
        *((gas, group, outcome, needed)
          for gas, needed, accepted in (
              ("methane", "IIA", ("IIA", "IIB", "IIB+H2", "IIC")),
              ("ethylene", "IIB", ("IIB", "IIB+H2", "IIC")),
              ("hydrogen", "IIC", ("IIB+H2", "IIC")),
              ("acetylene", "IIC", ("IIC",)),
          )
          for group in ("IIA", "IIB", "IIB+H2", "IIC")
          for outcome in ["accepted" if group in accepted else "review"]),
        *((gas, letter, outcome, needed)
          for gas, needed in (("methane", "D"), ("ethylene", "C"), ("hydrogen", "B"), ("acetylene", "A"))
          for letter in "ABCD"
          for outcome in ["accepted" if letter <= needed else "review"]),
        ("methane", "C,D", "accepted", "D"),
        ("hydrogen", "C,D", "review", "B"),
        ("methane", None, "unknown", ""),
        ("methane", "flour", "unknown", ""),
        ("cyclopropane", "IIA", "unknown", ""),
        ("biogas", "IIA", "unknown", ""),
        ("synthesis gas", "IIB", "review", "IIC"),
        ("carbon disulfide", "A", "review", "no letter of the NEC"),
    ],
)  # fmt: skip
def test_groups(gas: str, group: str | None, outcome: str, asks: str) -> None:
    known = gas_of(gas)
    assert known is not None
    asked = group_asked(known, Area(gas_group=group))
    assert (asked.outcome, asked.asks) == (outcome, asks)


def test_no_group_ever_refuses() -> None:
    outcomes = {
        group_asked(gas, Area(gas_group=group)).outcome
        for gas in GASES.values()
        for group in ("IIA", "IIB", "IIB+H2", "IIC", "A", "B", "C", "D")
    }
    assert outcomes == {"accepted", "review", "unknown"}


def test_an_exception_of_the_letters_is_told() -> None:
    asked = group_asked(GASES["1,3-butadiene"], Area(gas_group="D"))
    assert asked.reason == "group B by NEC 500.6, from memory; D with every conduit sealed"


@pytest.mark.parametrize(
    ("text", "gases", "unknown", "certain"),
    [
        ("Methane, hydrogen sulphide", ["methane", "hydrogen sulfide"], (), True),
        ("hydrogen in nitrogen", ["hydrogen"], (), True),
        ("Methane with 2 % H2S", ["methane", "hydrogen sulfide"], (), False),
        ("natural gas, hydrogen", ["natural gas", "hydrogen"], (), False),
        ("hydrogen rich gas", ["hydrogen"], ("other gases",), False),
        ("Methane, Solvent XY", ["methane"], ("solvent xy",), True),
        (None, [], (), True),
    ],
)
def test_what_an_area_names(text: str | None, gases: list[str], unknown: tuple[str, ...], certain: bool) -> None:
    named = named_in(Area(gas=text))
    assert ([gas.name for gas in named.gases], named.unknown, named.certain) == (gases, unknown, certain)


def test_each_gas_is_asked_for_both() -> None:
    area = Area(gas="methane, ethanol", gas_group="IIA", temperature_class="T2")
    asked = asked_in(area, named_in(area).gases, jurisdiction="ATEX")
    assert [(each.gas, each.about, each.outcome) for each in asked] == [
        ("methane", "temperature_class", "accepted"),
        ("methane", "gas_group", "accepted"),
        ("ethanol", "temperature_class", "accepted"),
        ("ethanol", "gas_group", "review"),
    ]
    assert asked[0] == GasAsks(
        gas="methane",
        about="temperature_class",
        outcome="accepted",
        asks="T1",
        states="T2",
        reason="600 degC by IEC 60079-20-1:2010 (T1), 600 degC by NFPA 497 (2008) (T1)",
    )
