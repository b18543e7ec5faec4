"""The gases against what is published of them; each test names its source.

Auto-ignition temperatures: the package chemicals carries the figures of IEC 60079-20-1 (2010) and of NFPA 497
(2008) by CAS number. It holds no group; groups are compared where a second source is at hand.
"""

import pytest
from chemicals.safety import T_autoignition, T_autoignition_methods

from instruments.acceptance import GAS_IEC_GROUP, GAS_NEC_GROUP, t_class_for_ignition
from instruments.gas import GASES, Gas, gas_of, source_of

IEC, NFPA = "IEC 60079-20-1 (2010)", "NFPA 497 (2008)"
XYLENES = ("95-47-6", "108-38-3", "106-42-3")


def published_c(cas: str, source: str) -> float | None:
    """Return a source's auto-ignition temperature in degC as the package has it; other sources are never asked."""
    if source not in T_autoignition_methods(cas):
        return None
    return round(float(T_autoignition(cas, method=source)) - 273.15, 2)


@pytest.mark.parametrize("gas", [gas for gas in GASES.values() if gas.cas], ids=lambda gas: gas.name)
def test_auto_ignition_temperatures(gas: Gas) -> None:
    iec = published_c(gas.cas, IEC)
    if gas.name == "xylene":  # listed by isomer alone
        iec = min(c for each in XYLENES if (c := published_c(each, IEC)) is not None)
    assert (gas.ignition_iec_c, gas.ignition_nfpa_c) == (iec, published_c(gas.cas, NFPA))


# The least T class by either source, from those figures: strictly below (IEC 60079-14:2013 Table 4, from memory).
T_CLASSES = {
    "methane": ("T1", "T1"),
    "propane": ("T2", "T2"),
    "n-butane": ("T2", "T3"),
    "n-pentane": ("T3", "T3"),
    "n-hexane": ("T3", "T3"),
    "ethylene": ("T2", "T1"),
    "propylene": ("T1", "T1"),
    "1,3-butadiene": ("T2", "T2"),
    "acetylene": ("T2", "T2"),
    "hydrogen": ("T1", "T1"),
    "carbon monoxide": ("T1", "T1"),
    "hydrogen sulfide": ("T3", "T3"),
    "ammonia": ("T1", "T1"),
    "carbon disulfide": ("T6", "T6"),
    "methanol": ("T2", "T2"),
    "ethanol": ("T2", "T2"),
    "acetone": ("T1", "T1"),
    "toluene": ("T1", "T1"),
    "o-xylene": ("T1", None),
    "diethyl ether": ("T4", "T4"),
    "acetaldehyde": ("T4", "T4"),
    "tetrahydrofuran": ("T3", "T2"),
    "ethyl acetate": ("T1", "T2"),
    "vinyl chloride": ("T2", "T1"),
    "acetic acid": ("T1", "T2"),
    "ethyl nitrite": ("T6", None),
}


@pytest.mark.parametrize(("name", "classes"), T_CLASSES.items(), ids=str)
def test_temperature_classes(name: str, classes: tuple[str, str | None]) -> None:
    gas = gas_of(name)
    assert gas is not None
    figures = (gas.ignition_iec_c, gas.ignition_nfpa_c)
    assert tuple(None if each is None else t_class_for_ignition(each) for each in figures) == classes


def test_six_common_gases_are_a_class_apart_between_the_sources() -> None:
    """The two sources as the package carries them, over common gases."""
    apart = {name for name, (iec, nfpa) in T_CLASSES.items() if nfpa is not None and iec != nfpa}
    assert apart == {"n-butane", "ethylene", "tetrahydrofuran", "ethyl acetate", "vinyl chloride", "acetic acid"}


def test_groups_of_representative_gases() -> None:
    """NEC 500.6(A) names a gas for each letter; training pages on gas groups name the same for IIA, IIB and IIC."""
    published = {
        "acetylene": ("IIC", "A"),
        "hydrogen": ("IIC", "B"),
        "ethylene": ("IIB", "C"),
        "propane": ("IIA", "D"),
    }
    held = {name: gas for name in published if (gas := gas_of(name))}
    assert {name: (gas.iec_group, gas.nec_group) for name, gas in held.items()} == published
    assert {name: GASES[name].iec_group for name in GAS_IEC_GROUP} == dict(GAS_IEC_GROUP)
    assert {name: GASES[name].nec_group for name in GAS_NEC_GROUP} == dict(GAS_NEC_GROUP)


def test_exceptions_of_the_group_letters() -> None:
    """NEC 500.6(A), as a published page of Article 500 (2008) shows it: with every conduit sealed within 450 mm,
    group D equipment serves butadiene, and group C ethylene oxide, propylene oxide and acrolein."""
    published = {"1,3-butadiene": "B/D", "ethylene oxide": "B/C", "propylene oxide": "B/C", "acrolein": "B/C"}
    assert {name: GASES[name].nec_group for name in published} == published


def test_the_standards_differ_where_their_boundaries_do() -> None:
    """An MESG between 0.75 and 0.90 mm is group D in the NEC and IIB in IEC 60079 (the gases: from memory)."""
    between = ("ethanol", "methyl ethyl ketone", "acrylonitrile")
    assert [(GASES[name].iec_group, GASES[name].nec_group) for name in between] == [("IIB", "D")] * 3


def test_whose_figures_count() -> None:
    """IEC 60079-14 refers to IEC 60079-20-1, the NEC to NFPA 497 (common practice)."""
    assert [source_of(each) for each in ("IEC", "ATEX", "US", "Canada")] == ["IEC", "IEC", "NFPA", "NFPA"]
