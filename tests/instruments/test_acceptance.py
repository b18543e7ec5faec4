"""What is accepted where: each table with both sides of its edges, and the mistakes that are easily made."""

import itertools

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.acceptance import (
    DUST_GROUPS_ACCEPTED,
    EPLS_FOR_REQUIRED,
    GAS_GROUPS_ACCEPTED,
    Acceptance,
    ambient,
    best_entry,
    certificate_suffix,
    crosses_systems,
    division_group,
    division_location,
    dust_group,
    dust_surface,
    entry_in_zone,
    epl_in_zone,
    gas_group,
    scheme_as_evidence,
    t_class_for_ignition,
    temperature,
    translated_group,
    zone_marked,
)
from instruments.area import Area, area_from_classification
from instruments.certificate import read_certificates
from instruments.epl import EPLS_IN_ZONE
from instruments.marking import read_marking
from instruments.marking_entry import T_CODE_C, MarkingEntry

EPLS = ("Ga", "Gb", "Gc", "Da", "Db", "Dc", "Ma", "Mb")


def mark(text: str) -> MarkingEntry:
    marking = read_marking(text)
    assert marking.readable, marking.problem
    return marking.entries[0]


def place(text: str) -> Area:
    area = area_from_classification(text)
    assert area is not None
    return area


# EPL


def test_every_epl_in_every_zone() -> None:
    accepted = {(zone, epl) for zone, epl in itertools.product(EPLS_IN_ZONE, EPLS) if epl_in_zone(epl, zone).accepted}
    assert accepted == {
        ("0", "Ga"),
        ("1", "Ga"),
        ("1", "Gb"),
        ("2", "Ga"),
        ("2", "Gb"),
        ("2", "Gc"),
        ("20", "Da"),
        ("21", "Da"),
        ("21", "Db"),
        ("22", "Da"),
        ("22", "Db"),
        ("22", "Dc"),
    }
    refused = [epl_in_zone(epl, zone).outcome for zone, epl in itertools.product(EPLS_IN_ZONE, EPLS)]
    assert set(refused) == {"accepted", "refused"}


@pytest.mark.parametrize(
    ("epl", "zone", "assigned", "process_zone", "outcome"),
    [
        ("Gc", "1", "Gc", None, "accepted"),
        ("Gb", "1", "Ga", None, "refused"),
        ("Gb", None, "Gb", None, "accepted"),
        ("Db", "2/22", "Gb/Db", None, "accepted"),
        ("Dc", "2/22", "Gb/Db", None, "refused"),
        ("Gb", "22", "Db", None, "refused"),
        ("Gb", "1/21", None, None, "accepted"),
        ("Db", "1/21", None, None, "accepted"),
        ("Dc", "1/21", None, None, "refused"),
        ("Mb", "1/21", None, None, "refused"),
        ("Ga/Gb", "0", None, None, "refused"),
        ("Ga/Gb", "1", None, None, "accepted"),
        ("Ga/Gb", "1", None, "0", "accepted"),
        ("Ga/Gb", "0", None, "0", "refused"),
        ("Ga/Gc", "1", None, "0", "refused"),
        ("Gb", "1", None, "Zone 0", "refused"),
        ("Ga", "1", None, "Zone 0", "accepted"),
        ("Gb", "1", None, "Zone 1", "accepted"),
        ("Gb", "1", None, "safe", "accepted"),
        ("Gb", "1", None, "wet", "unknown"),
        ("Gc", "1", None, "wet", "refused"),
        ("Da/Db", "21", None, "20", "accepted"),
        (None, "1", None, None, "unknown"),
        ("", "1", None, None, "unknown"),
        ("Gb", None, None, None, "unknown"),
        ("Gb", "3", None, None, "unknown"),
        ("Gb", "1", "Gx", None, "unknown"),
    ],
)
def test_epl_assigned_partitioned_or_blank(
    epl: str | None, zone: str | None, assigned: str | None, process_zone: str | None, outcome: str
) -> None:
    assert epl_in_zone(epl, zone, assigned=assigned, process_zone=process_zone).outcome == outcome


def test_a_refused_epl_says_what_the_zone_accepts() -> None:
    assert epl_in_zone("Gc", "1") == Acceptance(outcome="refused", reason="EPL Gc in Zone 1, which accepts Ga, Gb")
    assert epl_in_zone("Ga/Gb", "0").reason == "EPL Gb (the body of Ga/Gb) in Zone 0, which accepts Ga"


def test_an_assigned_epl_accepts_itself_and_stronger_ones_of_its_letter() -> None:
    assert set(EPLS_FOR_REQUIRED) == {"Ga", "Gb", "Gc", "Da", "Db", "Dc"}
    for required, zone in zip(("Ga", "Gb", "Gc", "Da", "Db", "Dc"), ("0", "1", "2", "20", "21", "22"), strict=True):
        assert EPLS_FOR_REQUIRED[required] == EPLS_IN_ZONE[zone]


@pytest.mark.parametrize(
    ("text", "where", "outcome", "assumed"),
    [
        ("Ex ia IIC T4 Ga", "Zone 0 IIC T4", "accepted", ()),
        ("EEx d IIC T4", "Zone 1 IIC T4", "accepted", ("EPL Gb follows from d",)),
        ("EEx d IIC T4", "Zone 0 IIC T4", "refused", ()),
        ("II 2 D T 80 °C", "Zone 21 IIIB T120°C", "accepted", ("EPL Db follows from the ATEX category",)),
        ("Ex db IIC T4 Ga", "Zone 0 IIC T4", "review", ()),
        ("Ex db IIC T4 Ga", "Zone 1 IIC T4", "review", ()),
        ("Ex ec IIC T4 Gb", "Zone 2 IIC T4", "review", ()),
        ("Ex ec IIC T4 Gb", "Zone 0 IIC T4", "refused", ()),
        ("Ex db eb IIC T4 Ga", "Zone 0 IIC T4", "review", ()),
        ("Ex da IIC T4 Ga", "Zone 0 IIC T4", "review", ()),
        ("Ex da IIC T4 Ga", "Zone 1 IIC T4", "accepted", ()),
        ("Ex op is IIC T6", "Zone 1 IIC T4", "unknown", ()),
        ("Ex ia IIC T4 Ga/Gb", "Zone 0/1 IIC T4", "accepted", ()),
        ("Ex ib IIC T4 Gb", "Zone 0/1 IIC T4", "refused", ()),
        ("Ex db IIC T6 Gb", "Zone 1 IIC T4 Ga", "refused", ()),
        ("Ex db IIC T6 Gb", "Zone 21 IIIC T120°C", "refused", ()),
    ],
)
def test_entry_in_zone(text: str, where: str, outcome: str, assumed: tuple[str, ...]) -> None:
    area = place(where)
    found = entry_in_zone(mark(text), area, side=area.sides[0])
    assert (found.outcome, found.assumed) == (outcome, assumed)


# Groups


def test_every_gas_group_in_every_gas_area() -> None:
    groups = ("IIA", "IIB", "IIC", "II", "I", "IIIC")
    epl = {"I": "Mb", "IIIC": "Db"}
    accepted = {
        (area, group)
        for area, group in itertools.product(GAS_GROUPS_ACCEPTED, groups)
        if gas_group(mark(f"Ex mb {group} {'' if group == 'I' else 'T85°C'} {epl.get(group, 'Gb')}"), area).accepted
    }
    assert accepted == {
        ("IIA", "IIA"),
        ("IIA", "IIB"),
        ("IIA", "IIC"),
        ("IIA", "II"),
        ("IIB", "IIB"),
        ("IIB", "IIC"),
        ("IIB", "II"),
        ("IIB+H2", "IIC"),
        ("IIB+H2", "II"),
        ("IIC", "IIC"),
        ("IIC", "II"),
    }


@pytest.mark.parametrize(
    ("text", "area_group", "gas", "outcome"),
    [
        ("Ex db IIB+H2 T1 Gb", "IIA", None, "accepted"),
        ("Ex db IIB+H2 T1 Gb", "IIB", None, "accepted"),
        ("Ex db IIB+H2 T1 Gb", "IIB+H2", None, "accepted"),
        ("Ex db IIB+hydrogen T1 Gb", "IIB+H2", None, "accepted"),
        ("Ex db IIA+H2 T1 Gb", "IIB+H2", None, "refused"),
        ("Ex db IIB+C2H2 T1 Gb", "IIB+H2", None, "refused"),
        ("Ex db IIB T1 Gb", "IIB+H2", None, "refused"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "hydrogen", "accepted"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "H2", "accepted"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "Wasserstoff", "accepted"),
        ("Ex db IIB+H2 T1 Gb", "IIC", None, "review"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "", "review"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "acetylene", "refused"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "CS2", "refused"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "H2S", "refused"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "hydrogen, methane", "review"),
        ("Ex db IIB+H2 T1 Gb", "IIC", "hydrogen mixture", "review"),
        ("Ex db IIA+H2 T1 Gb", "IIB", None, "refused"),
        ("Ex db IIB+CS2 T6 Gb", "IIC", "carbon disulphide", "accepted"),
        ("Ex db IIB T1 Gb", "IIC", "hydrogen", "refused"),
        ("Ex db IIC T1 Gb", "IIC", "acetylene", "accepted"),
        ("Ex db II (NH3) T1 Gb", "IIA", "ammonia", "accepted"),
        ("Ex db II (NH3) T1 Gb", "IIA", None, "unknown"),
        ("Ex db II (NH3) T1 Gb", "IIA", "propane", "refused"),
        ("Ex db II (NH3) T1 Gb", "IIC", "Ammoniak", "accepted"),
        ("Ex db II (NH3) T1 Gb", "IIC", "ammonia and hydrogen", "review"),
        ("EEx e II T3", "IIC", None, "accepted"),
        ("EEx d II T3", "IIA", None, "review"),
        ("EEx de II T3", "IIB", None, "review"),
        ("Ex ia II T4 Ga", "IIC", None, "review"),
        ("Ex db I Mb", "IIA", None, "refused"),
        ("Ex tb IIIC T85°C Db", "IIA", None, "refused"),
        ("Ex ia IIIC T85°C Ga", "IIA", None, "unknown"),
        ("Ex db IIC T1 Gb", None, None, "unknown"),
        ("Ex db IIC T1 Gb", "methane", None, "unknown"),
    ],
)
def test_gas_group(text: str, area_group: str | None, gas: str | None, outcome: str) -> None:
    assert gas_group(mark(text), area_group, gas=gas).outcome == outcome


def test_every_dust_group_in_every_dust_area() -> None:
    accepted = {
        (area, group)
        for area, group in itertools.product(DUST_GROUPS_ACCEPTED, ("IIIA", "IIIB", "IIIC"))
        if dust_group(mark(f"Ex tb {group} T85°C Db"), area).accepted
    }
    assert accepted == {
        ("IIIA", "IIIA"),
        ("IIIA", "IIIB"),
        ("IIIA", "IIIC"),
        ("IIIB", "IIIB"),
        ("IIIB", "IIIC"),
        ("IIIC", "IIIC"),
    }


@pytest.mark.parametrize(
    ("text", "area_group", "outcome"),
    [
        ("Ex tD A21 T100°C", "IIIA", "accepted"),
        ("Ex tD A21 T100°C", "IIIB", "accepted"),
        ("Ex tD A21 T100°C", "IIIC", "review"),
        ("II 2 D T 80 °C", "IIIC", "review"),
        ("Ex db IIC T6 Gb", "IIIA", "refused"),
        ("Ex ia I Ma", "IIIA", "refused"),
        ("Ex tb IIC T85°C Db", "IIIA", "unknown"),
        ("Ex tb IIIC T85°C Db", None, "unknown"),
        ("Ex tb IIIC T85°C Db", "flour", "unknown"),
    ],
)
def test_dust_group(text: str, area_group: str | None, outcome: str) -> None:
    assert dust_group(mark(text), area_group).outcome == outcome


@pytest.mark.parametrize(
    ("marked", "needed", "outcome"),
    [
        ("BCD", "B", "accepted"),
        ("CD", "B", "refused"),
        ("A", "B", "refused"),
        ("A", "D", "refused"),
        ("ABCD", "C,D", "accepted"),
        ("D", "C,D", "refused"),
        ("EFG", "G", "accepted"),
        ("", "D", "unknown"),
        ("D", "", "unknown"),
        ("D", None, "unknown"),
        ("D", "?", "unknown"),
        # a zone's group has no letters of a division in it
        ("C", "IIC", "unknown"),
        ("AB", "IIA, IIB", "unknown"),
        ("CD", "C & D", "accepted"),
        ("CD", "CD", "accepted"),
    ],
)
def test_division_groups_are_no_ladder(marked: str, needed: str | None, outcome: str) -> None:
    assert division_group(marked, needed).outcome == outcome


@given(st.sets(st.sampled_from("ABCDEFG"), min_size=1), st.sets(st.sampled_from("ABCDEFG"), min_size=1))
def test_a_division_group_is_accepted_where_all_letters_needed_are_marked(marked: set[str], needed: set[str]) -> None:
    assert division_group(marked, ",".join(sorted(needed))).accepted is (needed <= marked)


# Temperature


def test_every_t_code_against_every_other() -> None:
    for marked, wanted in itertools.product(T_CODE_C, T_CODE_C):
        entry = mark(f"Class I Div 1 Gr D {marked}")
        assert temperature(entry, wanted).accepted is (T_CODE_C[marked] <= T_CODE_C[wanted])


@pytest.mark.parametrize(
    ("text", "area_class", "site_max_c", "outcome"),
    [
        ("Ex ia IIC T4 Ga", "T4", 40.0, "accepted"),
        ("Ex ia IIC T4 Ga", "T5", 40.0, "refused"),
        ("Ex ia IIC T6 Ga", "T1", 40.0, "accepted"),
        ("Ex ia IIC T6...T4 Ga", "T5", 20.0, "refused"),
        ("Ex ia IIC T6...T4 Ga", "T4", None, "accepted"),
        ("Ex ia IIC T4/T6 Ga", "T5", 20.0, "refused"),
        ("Ex eb IIC 350 °C (T1) Gb", "T1", 40.0, "accepted"),
        ("Ex eb IIC 350 °C (T1) Gb", "T2", 40.0, "refused"),
        ("Ex eb IIC 250 °C Gb", "T2", 40.0, "accepted"),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", "T6", 40.0, "accepted"),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", "T6", 41.0, "refused"),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", "T4", 70.0, "accepted"),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", "T4", 71.0, "refused"),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", "T4", None, "accepted"),
        ("Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", "T6", None, "unknown"),
        ("Ex ia IIC T5 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga", "T6", None, "refused"),
        ("Class I Div 2 Gr D T3C", "T3B", 40.0, "accepted"),
        ("Class I Div 2 Gr D T3B", "T3C", 40.0, "refused"),
        ("Class I Div 2 Gr D", "T3", 40.0, "review"),
        ("Ex ia IIC Ga U", "T3", 40.0, "unknown"),
        ("Ex ia IIC T4 Ga", None, 40.0, "unknown"),
        ("Ex ia IIC T4 Ga", "hot", 40.0, "unknown"),
    ],
)
def test_temperature(text: str, area_class: str | None, site_max_c: float | None, outcome: str) -> None:
    assert temperature(mark(text), area_class, ambient_max_c=site_max_c).outcome == outcome


def test_a_surface_must_stay_below_the_ignition_temperature_strictly() -> None:
    entry = mark("Ex db IIA T1 Gb")
    assert temperature(entry, None, ignition_c=450.0).outcome == "refused"
    assert temperature(entry, None, ignition_c=450.1).outcome == "accepted"
    assert temperature(mark("Ex db IIA T2 Gb"), None, ignition_c=450.0).outcome == "accepted"
    assert temperature(mark("Ex db IIA T2 Gb"), "T3", ignition_c=450.0).outcome == "refused"
    assert temperature(entry, None, ignition_c=450.0).reason == "T1 450 degC, below 450 degC needed"


@pytest.mark.parametrize(
    ("ignition_c", "t_class"),
    [
        (600.0, "T1"),
        (450.1, "T1"),
        (450.0, "T2"),
        (300.1, "T2"),
        (300.0, "T3"),
        (200.1, "T3"),
        (200.0, "T4"),
        (135.1, "T4"),
        (135.0, "T5"),
        (100.1, "T5"),
        (100.0, "T6"),
        (90.0, "T6"),
        (85.1, "T6"),
        (85.0, None),
    ],
)
def test_t_class_for_ignition(ignition_c: float, t_class: str | None) -> None:
    assert t_class_for_ignition(ignition_c) == t_class


FLOUR = Area(zone="21", cloud_ignition_c=420.0, layer_ignition_c=225.0, layer_mm=5.0)
DEEP = Area(zone="21", cloud_ignition_c=420.0, layer_ignition_c=225.0, layer_mm=6.0)


@pytest.mark.parametrize(
    ("text", "area", "outcome"),
    [
        ("Ex tb IIIC T135°C Db", FLOUR, "accepted"),
        ("Ex tb IIIC T150°C Db", FLOUR, "accepted"),
        ("Ex tb IIIC T151°C Db", FLOUR, "refused"),
        ("Ex tb IIIC T200°C Db", FLOUR, "refused"),
        ("Ex tb IIIC T135°C Db", DEEP, "review"),
        ("Ex tb IIIC T280°C Db", DEEP, "review"),
        ("Ex tb IIIC T281°C Db", DEEP, "refused"),
        ("Ex ta IIIC T500 135 °C Da", FLOUR, "accepted"),
        ("Ex tb IIIC T80°C...T180°C Db", FLOUR, "refused"),
        ("Ex tb IIIC T6 Db", FLOUR, "unknown"),
        ("Ex tb IIIC Db", FLOUR, "unknown"),
        ("Ex tb IIIC T100°C Db", Area(zone="21"), "unknown"),
        ("Ex tb IIIC T100°C Db", Area(zone="21", cloud_ignition_c=420.0), "unknown"),
        ("Ex tb IIIC T281°C Db", Area(zone="21", cloud_ignition_c=420.0), "refused"),
        ("Ex tb IIIC T120°C Db", Area(zone="21", dust_surface_c=120.0), "accepted"),
        ("Ex tb IIIC T121°C Db", Area(zone="21", dust_surface_c=120.0), "refused"),
        (
            "Ex tb IIIC T85°C (Ta ≤ 40 °C) / T135°C (Ta ≤ 60 °C) Db",
            Area(dust_surface_c=120.0, ambient_max_c=40.0),
            "accepted",
        ),
        (
            "Ex tb IIIC T85°C (Ta ≤ 40 °C) / T135°C (Ta ≤ 60 °C) Db",
            Area(dust_surface_c=120.0, ambient_max_c=50.0),
            "refused",
        ),
        (
            "Ex tb IIIC T85°C (Ta ≤ 40 °C) / T115°C (Ta ≤ 60 °C) Db",
            Area(dust_surface_c=120.0, ambient_max_c=70.0),
            "refused",
        ),
    ],
)
def test_dust_surface(text: str, area: Area, outcome: str) -> None:
    assert dust_surface(mark(text), area).outcome == outcome


# Ambient


@pytest.mark.parametrize(
    ("text", "low", "high", "outcome"),
    [
        ("Ex ia IIC T4 Ga", -20.0, 40.0, "accepted"),
        ("Ex ia IIC T4 Ga", -20.1, 40.0, "refused"),
        ("Ex ia IIC T4 Ga", -20.0, 40.1, "refused"),
        ("Ex ia IIC T4 Ga -40 °C ≤ Ta ≤ +60 °C", -40.0, 60.0, "accepted"),
        ("Ex ia IIC T4 Ga -40 °C ≤ Ta ≤ +60 °C", -41.0, 60.0, "refused"),
        ("Ex ia IIC T4 Ga -40 °C ≤ Ta ≤ +60 °C", -40.0, 61.0, "refused"),
        ("Ex ia IIC T4 Ga Ta ≤ 60 °C", -21.0, 50.0, "refused"),
        ("Ex ia IIC T4 Ga 0 °C ≤ Ta ≤ 35 °C", -5.0, 30.0, "refused"),
        ("Ex ia IIC T4 Ga", None, 40.0, "unknown"),
        ("Ex ia IIC T4 Ga", -20.0, None, "unknown"),
        ("Ex ia IIC T4 Ga", None, 41.0, "refused"),
        ("Ex ia IIC T4 Ga", -21.0, None, "refused"),
        ("Ex ia IIC T4 Ga", None, None, "unknown"),
        ("Class I Div 2 Gr D T3", -10.0, 40.0, "unknown"),
        ("Class I Div 2 Gr D T3", -10.0, 40.1, "refused"),
        ("Class I Div 2 Gr D T3 Ta ≤ 60 °C", -10.0, 60.0, "unknown"),
        ("Class I Div 2 Gr D T3 -40 °C ≤ Ta ≤ 60 °C", -40.0, 60.0, "accepted"),
        ("Class I Div 2 Gr D T3 -40 °C ≤ Ta ≤ 60 °C", -41.0, 60.0, "refused"),
    ],
)
def test_ambient(text: str, low: float | None, high: float | None, outcome: str) -> None:
    assert ambient(mark(text), area_min_c=low, area_max_c=high).outcome == outcome


def test_what_is_unknown_of_an_ambient_is_named() -> None:
    blank = ambient(mark("Ex ia IIC T4 Ga"), area_min_c=None, area_max_c=30.0)
    assert (blank.missing, blank.reason) == (("ambient min",), "the area has no ambient min")
    silent = ambient(mark("Class I Div 2 Gr D T3"), area_min_c=-10.0, area_max_c=30.0)
    assert silent.missing == ("ambient min of the marking",)


# Divisions

ZONE_MARKS = {
    "0": "Class I, Zone 0, AEx ia IIC T4 Ga",
    "1": "Class I, Zone 1, AEx db IIC T4 Gb",
    "2": "Class I, Zone 2, AEx ec IIC T4 Gc",
    "20": "Zone 20 AEx ta IIIC T120°C Da",
    "21": "Zone 21 AEx tb IIIC T120°C Db",
    "22": "Zone 22 AEx tc IIIC T120°C Dc",
}
DIVISION_MARKS = {
    "I/1": "Class I Div 1 Gr ABCD T4",
    "I/2": "Class I Div 2 Gr ABCD T4",
    "I": "Class I Gr ABCD T4",
    "II/1": "Class II Div 1 Gr EFG T4",
    "II/2": "Class II Div 2 Gr FG T4",
    "III/1": "Class III Div 1 T4",
    "III/2": "Class III Div 2 T4",
}
MARKS = {**ZONE_MARKS, **DIVISION_MARKS}


@pytest.mark.parametrize(
    ("where", "accepts"),
    [
        ("Class I Div 1", {"0", "I/1", "I"}),
        ("Class I Div 2", {"0", "1", "2", "I/1", "I/2", "I"}),
        ("Class II Div 1", {"20", "II/1"}),
        ("Class II Div 2", {"20", "21", "22", "II/1", "II/2"}),
        ("Class III Div 1", {"III/1"}),
        ("Class III Div 2", {"III/1", "III/2"}),
        ("Zone 0", {"0"}),
        ("Zone 1", {"0", "1", "I/1", "I"}),
        ("Zone 2", {"0", "1", "2", "I/1", "I/2", "I"}),
        ("Zone 20", {"20"}),
        ("Zone 21", {"20", "21", "II/1"}),
        ("Zone 22", {"20", "21", "22", "II/1", "II/2"}),
    ],
)
def test_every_mark_in_every_division_and_zone(where: str, accepts: set[str]) -> None:
    area = place(where)
    side = area.sides[0]
    found = {
        name
        for name, text in MARKS.items()
        if division_location(mark(text), area, side=side, intrinsically_safe=False).accepted
    }
    assert found == accepts


@pytest.mark.parametrize(
    ("text", "where", "safe", "jurisdiction", "outcome"),
    [
        ("Class I Div 1 Gr BCD T4", "Zone 0", True, "US", "accepted"),
        ("Class I Div 1 Gr BCD T4", "Zone 0", False, "US", "refused"),
        ("Class I Div 1 Gr BCD T4", "Zone 0", None, "US", "review"),
        ("IS Class I Div 1 Gr BCD T4", "Zone 0", None, "US", "accepted"),
        ("XP Class I Div 1 Gr BCD T4", "Zone 0", None, "US", "refused"),
        ("Class I Div 2 Gr BCD T4", "Zone 0", True, "US", "refused"),
        ("Class II Div 1 Gr EFG T4", "Zone 20", True, "US", "accepted"),
        ("Class II Div 1 Gr EFG T4", "Zone 0", True, "US", "refused"),
        ("Ex ia IIC T4 Ga", "Class I Div 1", None, "US", "review"),
        ("Ex db IIC T4 Gb", "Class I Div 1", None, "US", "refused"),
        ("Ex db IIC T4 Gb", "Class I Div 2", None, "US", "review"),
        ("II 2 D T 80 °C", "Class II Div 2", None, "US", "review"),
        ("AEx ia IIC T4 Ga", "Class I Div 1", None, "US", "accepted"),
        ("AEx ia IIC T4 Gb", "Class I Div 1", None, "US", "refused"),
        ("Class I, Zone 1, AEx ia IIC T4 Ga", "Class I Div 1", None, "US", "refused"),
        ("Class I, Zone 0, AEx ia IIC T4 Gb", "Class I Div 1", None, "US", "refused"),
        ("AEx op is IIC T4", "Class I Div 1", None, "US", "unknown"),
        ("AEx tb IIIC T100°C Db", "Class III Div 1", None, "US", "review"),
        ("AEx ia IIC T4 Ga", "Class I Div 1", None, "Canada", "review"),
        ("Class I Div 1 Gr BCD T4", "Zone 1", None, "Canada", "review"),
        ("Class I Div 2 Gr BCD T4", "Class I Div 1", None, "Canada", "refused"),
        ("Class I Div 1 Gr BCD T4", "Zone 1", None, "ATEX", "unknown"),
        ("Class I Div 1 Gr BCD T4", "Zone 1", None, None, "unknown"),
        ("Class I Div 1 Gr BCD T4", "safe", None, "ATEX", "accepted"),
        ("Class I Div 1 Gr BCD T4", "Div 1", None, "US", "unknown"),
        ("Class I Div 1 Gr BCD T4", "Class I", None, "US", "unknown"),
        ("Class II Div 1 Gr EFG T4", "Class I Div 1", None, "US", "refused"),
        ("Class I Div 1 Gr BCD T4", "Class I Div 1, Class II Div 1", None, "US", "accepted"),
    ],
)
def test_division_location(text: str, where: str, safe: bool | None, jurisdiction: str | None, outcome: str) -> None:
    found = division_location(mark(text), place(where), jurisdiction=jurisdiction, intrinsically_safe=safe)
    assert found.outcome == outcome


def test_crossing_systems() -> None:
    assert crosses_systems(mark("Class I Div 1 Gr D T4"), place("Zone 1"))
    assert crosses_systems(mark("Ex ia IIC T4 Ga"), place("Class I Div 1"))
    assert not crosses_systems(mark("Class I Div 1 Gr D T4"), place("Class I Div 2"))
    assert not crosses_systems(mark("Ex ia IIC T4 Ga"), place("Zone 1"))
    assert not crosses_systems(mark("Class I Div 1 Gr D T4"), place("safe"))


@pytest.mark.parametrize(
    ("text", "zone"),
    [
        ("Class I, Zone 1, AEx ia IIC T4 Ga", "1"),
        ("Class I, Zone 0, AEx ia IIC T4 Gb", "1"),
        ("AEx ia IIC T4", "0"),
        ("Class I, Zone 2, AEx op is IIC T4", "2"),
        ("AEx op is IIC T4", None),
    ],
)
def test_of_zone_and_epl_the_weaker_is_marked(text: str, zone: str | None) -> None:
    assert zone_marked(mark(text)) == zone


@pytest.mark.parametrize(
    ("text", "where", "gas", "outcome"),
    [
        ("AEx db IIC T4 Gb", "Class I Div 2 Gr A", None, "accepted"),
        ("AEx db IIC T4 Gb", "Class I Div 2 Gr A-D", None, "accepted"),
        ("AEx db IIB+H2 T4 Gb", "Class I Div 2 Gr A", None, "refused"),
        ("AEx db IIB+H2 T4 Gb", "Class I Div 2 Gr B", None, "review"),
        ("AEx db IIB+H2 T4 Gb", "Class I Div 2 Gr B", "hydrogen", "accepted"),
        ("AEx db IIB T4 Gb", "Class I Div 2 Gr B", None, "refused"),
        ("AEx db IIB T4 Gb", "Class I Div 2 Gr C", None, "review"),
        ("AEx db IIB T4 Gb", "Class I Div 2 Gr C", "ethylene", "accepted"),
        ("AEx db IIB T4 Gb", "Class I Div 2 Gr D", None, "accepted"),
        ("AEx db IIB T4 Gb", "Class I Div 2 Gr C,D", None, "review"),
        ("AEx db IIA T4 Gb", "Class I Div 2 Gr C", None, "refused"),
        ("AEx db IIA T4 Gb", "Class I Div 2 Gr D", None, "review"),
        ("AEx db IIA T4 Gb", "Class I Div 2 Gr D", "propane", "accepted"),
        ("AEx db IIA T4 Gb", "Class I Div 2", None, "unknown"),
        ("AEx tb IIIC T100°C Db", "Class II Div 2 Gr F", None, "accepted"),
        ("AEx tb IIIB T100°C Db", "Class II Div 2 Gr F", None, "review"),
        ("AEx tb IIIA T100°C Db", "Class II Div 2 Gr F", None, "refused"),
        ("AEx tb IIIB T100°C Db", "Class II Div 2 Gr G", None, "accepted"),
        ("AEx tb IIIB T100°C Db", "Class II Div 1 Gr E", None, "refused"),
        ("AEx tb IIIA T100°C Db", "Class III Div 1", None, "accepted"),
        ("Class I Div 1 Gr ABCD", "Zone 1 IIC", None, "accepted"),
        ("Class I Div 1 Gr BCD", "Zone 1 IIC", None, "review"),
        ("Class I Div 1 Gr BCD", "Zone 1 IIC", "hydrogen", "accepted"),
        ("Class I Div 1 Gr BCD", "Zone 1 IIC", "acetylene", "refused"),
        ("Class I Div 1 Gr ABCD", "Zone 1 IIC", "CS2", "review"),
        ("Class I Div 1 Gr CD", "Zone 1 IIC", None, "refused"),
        ("Class I Div 1 Gr CD", "Zone 1 IIB", None, "accepted"),
        ("Class I Div 1 Gr D", "Zone 1 IIB", None, "refused"),
        ("Class I Div 1 Gr CD", "Zone 1 IIB+H2", None, "refused"),
        ("Class I Div 1 Gr BCD", "Zone 1 IIB+H2", None, "accepted"),
        ("Class I Div 1 Gr D", "Zone 1 IIA", None, "accepted"),
        ("Class I Div 1 Gr C", "Zone 1 IIA", None, "refused"),
        ("Class I Div 1 Gr D", "Zone 1", None, "unknown"),
        ("Class I Div 1", "Zone 1 IIA", None, "unknown"),
        ("Class II Div 1 Gr EFG", "Zone 21 IIIC", None, "accepted"),
        ("Class II Div 1 Gr FG", "Zone 21 IIIC", None, "review"),
        ("Class II Div 1 Gr G", "Zone 21 IIIC", None, "refused"),
        ("Class II Div 1 Gr G", "Zone 21 IIIB", None, "accepted"),
        ("Class III Div 1", "Zone 21 IIIA", None, "accepted"),
        ("Class II Div 1 Gr G", "Zone 21 IIIA", None, "refused"),
    ],
)
def test_translated_group(text: str, where: str, gas: str | None, outcome: str) -> None:
    assert translated_group(mark(text), place(where), gas=gas).outcome == outcome


def test_a_gas_between_the_systems_boundaries_is_refused_where_its_groups_are_known() -> None:
    """MESG between 0.75 and 0.90 mm: group D in the NEC, IIB in IEC 60079 (ethanol, from memory)."""
    area = place("Class I Div 2 Gr D")
    assert translated_group(mark("AEx db IIA T2 Gb"), area, gas="ethanol", iec_group="IIB").outcome == "refused"
    assert translated_group(mark("AEx db IIB T2 Gb"), area, gas="ethanol", iec_group="IIB").outcome == "accepted"
    zone = place("Zone 1 IIB T2")
    assert translated_group(mark("Class I Div 1 Gr C"), zone, gas="ethanol", nec_group="D").outcome == "refused"
    assert translated_group(mark("Class I Div 1 Gr D"), zone, gas="ethanol", nec_group="D").outcome == "accepted"


def in_division(letter: str, gas: str | None = None) -> Area:
    return Area(system="division", class_="I", division="2", gas_group=letter, gas=gas)


@pytest.mark.parametrize(
    ("text", "area", "outcome", "assumed"),
    [
        # a named gas whose group is held refuses, or settles what was left to a person
        ("AEx db IIA T2 Gb", in_division("D", "Ethanol"), "refused", ""),
        ("AEx db IIA T2 Gb", in_division("D", "Acetone"), "accepted",
         "acetone: group IIA, from memory"),
        ("AEx db IIA T2 Gb", in_division("D", "Acetone, MEK"), "refused", ""),
        ("AEx db IIA T2 Gb", in_division("D", "Acetone, Solvent XY"), "review", ""),
        ("AEx db IIA T2 Gb", in_division("D", "acetone mixture"), "review", ""),
        ("AEx db IIA T2 Gb", in_division("D", "biogas"), "review", ""),
        ("AEx db IIA T2 Gb", in_division("D"), "review", ""),
        ("AEx db IIB T2 Gb", in_division("C", "Diethyl ether"), "accepted",
         "diethyl ether: group IIB, from memory"),
        # it never overrules what the zone's own group refuses
        ("Class I Div 1 Gr D", Area(system="zone", zone="1", gas_group="IIB", gas="ethanol"), "review", ""),
        ("Class I Div 1 Gr C", Area(system="zone", zone="1", gas_group="IIB", gas="ethanol"), "refused", ""),
        # a group of the other system is none
        ("AEx db IIC T2 Gb", Area(system="division", class_="I", division="2", gas_group="IIC"), "unknown", ""),
        ("AEx tb IIIC T85°C Db", Area(system="division", class_="II", division="2", dust_group="IIIC"), "unknown", ""),
    ],
)  # fmt: skip
def test_what_a_named_gas_makes_of_a_translation(text: str, area: Area, outcome: str, assumed: str) -> None:
    found = translated_group(mark(text), area)
    assert (found.outcome, "; ".join(found.assumed)) == (outcome, assumed)


# Certificates


@pytest.mark.parametrize(
    ("cell", "accepted_by", "outcome"),
    [
        ("ABC 20 ATEX 0001", None, "accepted"),
        ("ABC 20 ATEX 0001X", None, "review"),
        ("ABC 20 ATEX 0001X", " ", "review"),
        ("ABC 20 ATEX 0001X", "N. Hollin, 3 May 2026", "accepted"),
        ("ABC 20 ATEX 0001U", "N. Hollin, 3 May 2026", "refused"),
        ("ABC 20 ATEX 0001U; IECEx ABC 20.0002", None, "accepted"),
        ("ABC 20 ATEX 0001U; IECEx ABC 20.0002X", None, "review"),
        ("", None, "unknown"),
    ],
)
def test_certificate_suffix(cell: str, accepted_by: str | None, outcome: str) -> None:
    assert certificate_suffix(read_certificates(cell), conditions_accepted=accepted_by).outcome == outcome


# Schemes


@pytest.mark.parametrize(
    ("text", "evidence"),
    [
        ("Ex ia IIC T4 Ga", {"IEC", "ATEX", "Canada"}),
        ("II 1 G Ex ia IIC T4 Ga", {"IEC", "ATEX"}),
        ("EEx ia IIC T4", {"IEC", "ATEX"}),
        ("II 2 D T 80 °C", {"ATEX"}),
        ("AEx ia IIC T4 Ga", {"US"}),
        ("Class I, Zone 1, AEx db IIC T4 Gb", {"US"}),
        ("Class I Div 1 Gr D T4", {"US", "Canada"}),
    ],
)
def test_every_scheme_under_every_jurisdiction(text: str, evidence: set[str]) -> None:
    places = ("IEC", "ATEX", "US", "Canada")
    found = {each: scheme_as_evidence(mark(text), each).outcome for each in places}
    assert found == {each: "accepted" if each in evidence else "review" for each in places}
    assert scheme_as_evidence(mark(text), None).missing == ("jurisdiction",)


# One marking of several


@pytest.mark.parametrize(
    ("text", "where", "side", "jurisdiction", "epl_or_class"),
    [
        ("Ex ia IIC T4 Ga; Ex tb IIIC T135°C Db", "Zone 1/21 IIB T4 IIIB T135°C", "gas", None, "Ga"),
        ("Ex ia IIC T4 Ga; Ex tb IIIC T135°C Db", "Zone 1/21 IIB T4 IIIB T135°C", "dust", None, "Db"),
        ("Ex ic IIC T6 Gc; Ex ia IIC T4 Ga", "Zone 1 IIB T4", "gas", None, "Ga"),
        ("Ex ic IIC T6 Gc; Ex ia IIC T4 Ga", "Zone 2 IIB T6", "gas", None, "Gc"),
        ("Ex db IIC T6 Gb", "Zone 21 IIIC T100°C", "dust", None, "Gb"),
        ("AEx ia IIC T4 Ga; Class I Div 2 Gr ABCD T4", "Class I Div 1 Gr C T4", "gas", "US", "Ga"),
        ("AEx ia IIC T4 Ga; Class I Div 1 Gr ABCD T4", "Class I Div 1 Gr C T4", "gas", "Canada", "I"),
        ("Class I Div 1 Gr ABCD T4; Class II Div 1 Gr EFG T4", "Class II Div 2 Gr G T4", "dust", "US", "II"),
        ("Class I Div 1 Gr ABCD T4; Ex db IIB T4 Gb", "Zone 1 IIB T4", "gas", "ATEX", "Gb"),
        ("[Ex ia Ga] IIC", "Zone 1 IIB T4", "gas", None, None),
    ],
)
def test_best_entry(text: str, where: str, side: str, jurisdiction: str | None, epl_or_class: str | None) -> None:
    entry = best_entry(
        read_marking(text),
        place(where),
        side="dust" if side == "dust" else "gas",
        jurisdiction=jurisdiction,
    )
    assert (entry and (entry.epl or entry.class_)) == epl_or_class


# Mistakes that are easily made


def zone_area(
    zone: str, group: str, t_class: str, low: float = -20.0, high: float = 40.0, gas: str | None = None
) -> Area:
    return Area(
        system="zone",
        zone=zone,
        gas_group=group,
        temperature_class=t_class,
        ambient_min_c=low,
        ambient_max_c=high,
        gas=gas,
    )


def everything(text: str, area: Area, *, process_zone: str | None = None) -> set[str]:
    """Return the outcomes other than accepted of all that a zone asks, by name."""
    entry = mark(text)
    asked = {
        "EPL": entry_in_zone(entry, area, side=area.sides[0], process_zone=process_zone),
        "ambient": ambient(entry, area_min_c=area.ambient_min_c, area_max_c=area.ambient_max_c),
    }
    if area.sides == ("gas",):
        asked["group"] = gas_group(entry, area.gas_group, gas=area.gas)
        asked["temperature"] = temperature(entry, area.temperature_class, ambient_max_c=area.ambient_max_c)
    else:
        asked["group"] = dust_group(entry, area.dust_group)
        asked["temperature"] = dust_surface(entry, area)
    return {f"{name} {each.outcome}" for name, each in asked.items() if not each.accepted}


@pytest.mark.parametrize(
    ("text", "area", "process_zone", "wrong"),
    [
        # the T class alone, the ambient ignored
        ("Ex ia IIC T4 Ga", zone_area("1", "IIB", "T3", high=50.0), None, {"ambient refused"}),
        ("Ex ia IIC T4 Ga", zone_area("1", "IIB", "T3"), None, set()),
        # a range of ambients with a range of T classes
        (
            "Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga",
            zone_area("1", "IIB", "T6", high=55.0),
            None,
            {"temperature refused"},
        ),
        (
            "Ex ia IIC T6 (Ta ≤ 40°C) / T4 (Ta ≤ 70 °C) Ga",
            zone_area("1", "IIB", "T4", high=55.0),
            None,
            set(),
        ),
        # the low ambient forgotten
        ("Ex db IIC T6 Gb", zone_area("1", "IIB", "T3", low=-30.0, high=35.0), None, {"ambient refused"}),
        # ia read as Zone 0
        ("Ex ia IIC T4 Gb", zone_area("0", "IIC", "T4"), None, {"EPL refused"}),
        # a partition read as Ga
        ("Ex db ia IIC T6...T4 Ga/Gb", zone_area("0", "IIC", "T4"), None, {"EPL refused"}),
        ("Ex db ia IIC T6...T4 Ga/Gb", zone_area("1", "IIC", "T4"), "0", set()),
        ("Ex db ia IIC T6...T4 Ga/Gb", zone_area("1", "IIC", "T5"), "0", {"temperature refused"}),
        # the bracket's EPL taken for the body's
        ("Ex ec [ia Ga] nC IIC T4 Gc", zone_area("1", "IIC", "T4"), None, {"EPL refused"}),
        ("Ex ec [ia Ga] nC IIC T4 Gc", zone_area("2", "IIC", "T4"), None, set()),
        # IIB+H2 taken as IIC, or as IIB
        ("Ex db IIB+H2 T1 Gb", zone_area("1", "IIC", "T1", gas="hydrogen"), None, set()),
        ("Ex db IIB+H2 T1 Gb", zone_area("1", "IIC", "T1", gas="acetylene"), None, {"group refused"}),
        ("Ex db IIB+H2 T1 Gb", zone_area("1", "IIC", "T1"), None, {"group review"}),
        # a group I mark in a plant
        (
            "Ex db I Mb",
            zone_area("1", "IIA", "T1"),
            None,
            {"EPL refused", "group refused", "temperature unknown"},
        ),
        # category and EPL differ: the EPL decides
        ("II 1 G Ex db IIC T6 Gb", zone_area("0", "IIC", "T4"), None, {"EPL refused"}),
        ("II 1 G Ex db IIC T6 Gb", zone_area("1", "IIC", "T4"), None, set()),
    ],
)
def test_mistakes_in_gas_zones(text: str, area: Area, process_zone: str | None, wrong: set[str]) -> None:
    assert everything(text, area, process_zone=process_zone) == wrong


@pytest.mark.parametrize(
    ("text", "area", "wrong"),
    [
        # a gas EPL for dust, and the reverse
        (
            "Ex db IIC T4 Gb",
            Area(zone="21", dust_group="IIIB", dust_surface_c=135.0),
            {"EPL refused", "group refused"},
        ),
        # the dust's group
        ("Ex tb IIIB T100°C Db", Area(zone="21", dust_group="IIIC", dust_surface_c=135.0), {"group refused"}),
        ("Ex tb IIIB T100°C Db", Area(zone="21", dust_group="IIIA", dust_surface_c=135.0), set()),
        # the dust's temperature
        (
            "Ex tb IIIC T135°C Db",
            Area(zone="21", dust_group="IIIC", cloud_ignition_c=420.0, layer_ignition_c=225.0, layer_mm=5.0),
            set(),
        ),
        (
            "Ex tb IIIC T200°C Db",
            Area(zone="21", dust_group="IIIC", cloud_ignition_c=420.0, layer_ignition_c=225.0, layer_mm=5.0),
            {"temperature refused"},
        ),
        (
            "Ex tb IIIC T135°C Db",
            Area(zone="21", dust_group="IIIC", cloud_ignition_c=420.0, layer_ignition_c=225.0, layer_mm=12.0),
            {"temperature review"},
        ),
        # a T class on dust is no temperature
        (
            "Ex tb IIIC T6 Db",
            Area(zone="21", dust_group="IIIC", dust_surface_c=135.0),
            {"temperature unknown"},
        ),
    ],
)
def test_mistakes_in_dust_zones(text: str, area: Area, wrong: set[str]) -> None:
    assert everything(text, area) - {"ambient unknown"} == wrong


def test_a_dust_mark_in_a_gas_zone() -> None:
    wrong = everything("Ex tb IIIC T85°C Db", zone_area("1", "IIB", "T3"))
    assert wrong == {"EPL refused", "group refused"}


def test_associated_apparatus_has_no_place_in_the_area() -> None:
    """[Ex ia Ga] IIC says nothing of where it stands itself; its outputs may feed a Ga device."""
    marking = read_marking("[Ex ia Ga] IIC")
    assert marking.is_associated
    assert best_entry(marking, zone_area("2", "IIC", "T4"), side="gas") is None
    assert [output.epl for output in marking.outputs] == ["Ga"]


@pytest.mark.parametrize(
    ("text", "where", "intrinsically_safe", "outcome"),
    [
        # Division 2 treated as Zones 1 and 2 alike
        ("Class I Div 2 Gp ABCD T4", "Zone 1 IIB T4", None, "refused"),
        ("Class I Div 2 Gp ABCD T4", "Zone 2 IIB T4", None, "accepted"),
        # Zone 1 equipment in Division 1
        ("Class I, Zone 1, AEx db IIC T4 Gb", "Class I Div 1 Gr C T4", None, "refused"),
        ("Class I, Zone 1, AEx db IIC T4 Gb", "Class I Div 2 Gr C T4", None, "accepted"),
        # Division 1 in Zone 0
        ("Class I Div 1 Gp B,C,D T4", "Zone 0 IIB T4", False, "refused"),
        ("Class I Div 1 Gp B,C,D T4", "Zone 0 IIB T4", True, "accepted"),
        ("Class I Div 1 Gp B,C,D T4", "Zone 0 IIB T4", None, "review"),
        # a US location, a mark without AEx
        ("Ex ia IIC T4 Ga", "Class I Div 1 Gr C T4", None, "review"),
    ],
)
def test_mistakes_between_divisions_and_zones(
    text: str, where: str, intrinsically_safe: bool | None, outcome: str
) -> None:
    found = division_location(mark(text), place(where), intrinsically_safe=intrinsically_safe)
    assert found.outcome == outcome


def test_t_codes_of_north_america_against_an_ignition_temperature() -> None:
    assert temperature(mark("Class I Div 1 Gr C T3C"), None, ignition_c=155.0).outcome == "refused"
    assert temperature(mark("Class I Div 1 Gr C T4A"), None, ignition_c=155.0).outcome == "accepted"


def test_a_component_is_no_evidence_by_itself() -> None:
    assert certificate_suffix(read_certificates("ABC 20 ATEX 0001 U"), conditions_accepted=None).outcome == "refused"
    assert read_marking("Ex ia IIC Ga U").is_component


def test_no_ladder_of_group_letters() -> None:
    hydrogen = place("Class I Div 1 Gr B T4")
    assert division_group(mark("Class I Div 1 Gr C,D T4").groups, hydrogen.gas_group).outcome == "refused"
    assert division_group(mark("Class I Div 1 Gr B,C,D T4").groups, hydrogen.gas_group).outcome == "accepted"


# No blank is acceptance


@given(
    st.sampled_from(
        (
            "Ex ia IIC T4 Ga",
            "Ex tb IIIC T85°C Db",
            "Class I Div 1 Gr ABCD T4",
            "Ex op is IIC",
            "II 2 D T 80 °C",
        )
    ),
)
def test_nothing_is_accepted_of_an_empty_area(text: str) -> None:
    entry, empty = mark(text), Area()
    found = [
        entry_in_zone(entry, empty, side="gas"),
        entry_in_zone(entry, empty, side="dust"),
        gas_group(entry, None),
        dust_group(entry, None),
        dust_surface(entry, empty),
        temperature(entry, None),
        ambient(entry, area_min_c=None, area_max_c=None),
        division_location(entry, Area(system="division")),
        division_location(entry, Area(system="zone")),
        translated_group(entry, empty),
        division_group(entry.groups, None),
    ]
    assert not [each for each in found if each.accepted]
