"""The tables of hazardous areas against what is published of them; each test names its source.

Clauses and tables of the standards are from memory where it says so; secondary pages that show the same
figures are corroboration, not authority.
"""

import itertools

import pytest
from chemicals.safety import T_autoignition  # type: ignore[import-untyped]

from instruments.acceptance import (
    DIVISION_ACCEPTS,
    DUST_GROUPS_ACCEPTED,
    GAS_GROUPS_ACCEPTED,
    GAS_NEC_GROUP,
    division_group,
    division_location,
    epl_in_zone,
    t_class_for_ignition,
)
from instruments.area import Area, permitted_dust_surface_c
from instruments.epl import EPLS_IN_ZONE, PROTECTIONS, derived_epl
from instruments.marking import read_marking
from instruments.marking_entry import (
    DEFAULT_AMBIENT_MAX_C,
    DEFAULT_AMBIENT_MIN_C,
    DIVISION_AMBIENT_MAX_C,
    T_CLASS_C,
    T_CODE_C,
)


def test_epl_and_zone() -> None:
    """1999/92/EC Annex II B: zone 0 and 20 category 1; 1 and 21 category 1 or 2; 2 and 22 category 1, 2 or 3.

    The category's EPL: 2014/34/EU Annex I, 1 is a, 2 is b, 3 is c. IEC 60079-14:2013 Table 1 (number from
    memory) has the same; so do maker-independent training pages on marking.
    """
    letters = {1: "a", 2: "b", 3: "c"}
    directive = {
        "0": ("G", (1,)),
        "1": ("G", (1, 2)),
        "2": ("G", (1, 2, 3)),
        "20": ("D", (1,)),
        "21": ("D", (1, 2)),
        "22": ("D", (1, 2, 3)),
    }
    assert {zone: {d + letters[c] for c in categories} for zone, (d, categories) in directive.items()} == {
        zone: set(accepted) for zone, accepted in EPLS_IN_ZONE.items()
    }
    for zone, epl in itertools.product(EPLS_IN_ZONE, ("Ga", "Gb", "Gc", "Da", "Db", "Dc", "Ma", "Mb")):
        d, categories = directive[zone]
        expected = epl[0] == d and epl[1] in {letters[c] for c in categories}
        assert epl_in_zone(epl, zone).accepted is expected


def test_protections_and_zones() -> None:
    """Training pages on marking: da zones 0, 1, 2; db, eb zones 1, 2; dc, ec zone 2; ia, ib, ic likewise.

    The other types of protection: IEC 60079-14:2013 Table 2, from memory.
    """
    published = {
        "da": "Ga",
        "db": "Gb",
        "dc": "Gc",
        "eb": "Gb",
        "ec": "Gc",
        "ia": "Ga",
        "ib": "Gb",
        "ic": "Gc",
    }
    assert {symbol: PROTECTIONS[symbol].gas for symbol in published} == published
    from_memory = {
        "ma": "Ga",
        "mb": "Gb",
        "mc": "Gc",
        "nA": "Gc",
        "nC": "Gc",
        "nR": "Gc",
        "ob": "Gb",
        "oc": "Gc",
        "pxb": "Gb",
        "pyb": "Gb",
        "pzc": "Gc",
        "q": "Gb",
        "sa": "Ga",
        "sb": "Gb",
        "sc": "Gc",
    }
    assert {symbol: PROTECTIONS[symbol].gas for symbol in from_memory} == from_memory
    assert {symbol: PROTECTIONS[symbol].dust for symbol in ("ta", "tb", "tc")} == {
        "ta": "Da",
        "tb": "Db",
        "tc": "Dc",
    }
    assert derived_epl(["ia", "ib", "ic"], side="gas") == "Gc"


def test_temperature_classes() -> None:
    """IEC 60079-0 Table 2, as tables of gland makers and the CFIHOS pick list show it: degC."""
    assert dict(T_CLASS_C) == {"T1": 450, "T2": 300, "T3": 200, "T4": 135, "T5": 100, "T6": 85}


def test_temperature_codes_of_north_america() -> None:
    """NEC 500.8(C)(4), as three published tables of T codes show it: degC."""
    lettered = {
        "T2A": 280,
        "T2B": 260,
        "T2C": 230,
        "T2D": 215,
        "T3A": 180,
        "T3B": 165,
        "T3C": 160,
        "T4A": 120,
    }
    assert {code: T_CODE_C[code] for code in T_CODE_C if code not in T_CLASS_C} == lettered
    codes = sorted(T_CODE_C, key=lambda code: -T_CODE_C[code])
    assert codes == sorted(codes), "the letters run from hot to cool inside each class"


@pytest.mark.parametrize(
    ("cas", "name", "t_class"),
    [
        ("74-82-8", "methane", "T1"),
        ("74-98-6", "propane", "T2"),
        ("74-85-1", "ethylene", "T2"),
        ("1333-74-0", "hydrogen", "T1"),
        ("74-86-2", "acetylene", "T2"),
        ("110-54-3", "n-hexane", "T3"),
        ("7783-06-4", "hydrogen sulfide", "T3"),
        ("60-29-7", "diethyl ether", "T4"),
        ("75-07-0", "acetaldehyde", "T4"),
        ("75-15-0", "carbon disulfide", "T6"),
    ],
)
def test_the_class_that_an_ignition_temperature_asks_for(cas: str, name: str, t_class: str) -> None:
    """Auto-ignition temperatures of IEC 60079-20-1 (2010), as the package chemicals carries them.

    Propane's 450 degC sits on the limit of T1: the surface must be below it (IEC 60079-14, from memory).
    """
    ignition_c = round(T_autoignition(cas, method="IEC 60079-20-1 (2010)") - 273.15, 2)
    assert t_class_for_ignition(ignition_c) == t_class, name


def test_order_of_the_gas_groups() -> None:
    """IIC covers IIB covers IIA: published charts of gas groups; IEC 60079-14 Table 3, from memory."""
    lettered = {area: set(accepted) & {"IIA", "IIB", "IIC"} for area, accepted in GAS_GROUPS_ACCEPTED.items()}
    assert lettered["IIA"] == {"IIA", "IIB", "IIC"}
    assert lettered["IIB"] == {"IIB", "IIC"}
    assert lettered["IIC"] == lettered["IIB+H2"] == {"IIC"}
    assert all("II" in accepted for accepted in GAS_GROUPS_ACCEPTED.values()), "II without letter (from memory)"
    assert not any(group.startswith("III") or group == "I" for g in GAS_GROUPS_ACCEPTED.values() for group in g)


def test_order_of_the_dust_groups() -> None:
    """IEC 60079-0 4.4 (from memory): flyings IIIA, non-conductive IIIB, conductive IIIC, the last for all."""
    lettered = {area: set(accepted) & {"IIIA", "IIIB", "IIIC"} for area, accepted in DUST_GROUPS_ACCEPTED.items()}
    assert lettered == {"IIIA": {"IIIA", "IIIB", "IIIC"}, "IIIB": {"IIIB", "IIIC"}, "IIIC": {"IIIC"}}


def test_default_ambient() -> None:
    """IEC 60079-0 5.1.1: -20..+40 degC where nothing is marked, as published charts repeat it.

    The 40 degC of a silent division mark: NEC 500.8(C), from memory; it states no minimum.
    """
    assert (DEFAULT_AMBIENT_MIN_C, DEFAULT_AMBIENT_MAX_C, DIVISION_AMBIENT_MAX_C) == (-20.0, 40.0, 40.0)
    silent = read_marking("Ex ia IIC T4 Ga").entries[0]
    assert (silent.ambient_min_c, silent.ambient_max_c) == (-20.0, 40.0)
    division = read_marking("Class I Div 2 Gr D T4").entries[0]
    assert (division.ambient_min_c, division.ambient_max_c) == (None, 40.0)


def test_dust_surface_limit() -> None:
    """Two thirds of the cloud's, the layer's less 75 K: published guidance; IEC 60079-14 5.6.3 (memory)."""
    published = permitted_dust_surface_c(Area(cloud_ignition_c=420.0, layer_ignition_c=225.0, layer_mm=5.0))
    assert published.limit_c == pytest.approx(150.0)
    cloud_rules = permitted_dust_surface_c(Area(cloud_ignition_c=300.0, layer_ignition_c=310.0, layer_mm=5.0))
    assert cloud_rules.limit_c == pytest.approx(200.0)


def test_divisions_accept() -> None:
    """NEC 501.5, as quoted in public: Class I Div 1 takes Zone 0 marks; Div 2 takes Zone 0, 1 and 2 marks.

    NEC 500.8(A)(2): Division 1 equipment serves Division 2. Class II, 502.6: from memory.
    """
    assert {each for each in DIVISION_ACCEPTS["I", "1"] if isinstance(each, str)} == {"0"}
    assert {each for each in DIVISION_ACCEPTS["I", "2"] if isinstance(each, str)} == {"0", "1", "2"}
    assert {each for each in DIVISION_ACCEPTS["II", "1"] if isinstance(each, str)} == {"20"}
    assert {each for each in DIVISION_ACCEPTS["II", "2"] if isinstance(each, str)} == {"20", "21", "22"}
    for class_ in ("I", "II", "III"):
        assert (class_, "1") in DIVISION_ACCEPTS[class_, "2"]
        assert (class_, "2") not in DIVISION_ACCEPTS[class_, "1"]


@pytest.mark.parametrize(
    ("mark", "area", "outcome"),
    [
        ("Class I, Zone 1, AEx db IIC T4 Gb", Area(system="division", class_="I", division="1"), "refused"),
        ("Class I Div 2 Gr ABCD T4", Area(system="zone", zone="1"), "refused"),
        ("XP Class I Div 1 Gr BCD T4", Area(system="zone", zone="0"), "refused"),
        ("IS Class I Div 1 Gr ABCD T4", Area(system="zone", zone="0"), "accepted"),
        ("Class I Div 1 Gr ABCD T4", Area(system="zone", zone="1"), "accepted"),
        ("Class I Div 2 Gr ABCD T4", Area(system="zone", zone="2"), "accepted"),
    ],
)
def test_zones_accept_divisions_only_by_exception(mark: str, area: Area, outcome: str) -> None:
    """NEC 505.20(A) to (C), from memory."""
    assert division_location(read_marking(mark).entries[0], area).outcome == outcome


def test_group_letters_of_the_typical_gases() -> None:
    """NEC 500.6(A), 2008 edition, as its page is shown: A acetylene, B hydrogen, C ethylene, D propane."""
    assert dict(GAS_NEC_GROUP) == {"acetylene": "A", "hydrogen": "B", "ethylene": "C", "propane": "D"}
    for marked, needed in itertools.product("ABCD", repeat=2):
        assert division_group(marked, needed).accepted is (marked == needed), "the letters are no ladder"
