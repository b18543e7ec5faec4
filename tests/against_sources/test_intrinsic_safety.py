"""Intrinsic safety: worked numbers, mistakes that are easily made with what must come of each, and common practice.

The relations and limits are those of IEC 60079-14:2013 16.2, IEC 60079-11:2011 5.7 and IEC 60079-25:2020, from
memory; the worked numbers are arithmetic of this place, checked by hand, and no example of a standard.
Each naive result stands beside the outcome as a case that must not come back.
"""

from decimal import Decimal
from typing import Any

import pytest

from loops.entity import Apparatus, CablePiece, Comparison, Source, compare, exact, largest_lo_ro, number
from loops.plant import Plant
from validation.audit import audit
from validation.example import example_plant
from validation.finding import Outcome
from validation.rules.intrinsic_safety import t4_power_mw

D = Decimal
Row = dict[str, Any]

# ------------------------------------------------------------------------------------------------ worked numbers

W1 = {"uo_v": "28", "io_ma": "93", "po_mw": "650", "co_nf": "83", "lo_mh": "3.05"}
W6 = {"uo_v": "10", "io_ma": "50", "po_mw": "125", "co_nf": "3000", "lo_mh": "10"}
BEARS = {"ui_v": "30", "ii_ma": "120", "pi_mw": "1000"}


def worked(
    source: Row, devices: list[Row], length_m: str, *, group: str = "IIC", bears: Row | None = None
) -> Comparison:
    """Compare with a cable of 200 pF/m and 1 uH/m."""
    figures: dict[str, Any] = {name: D(value) for name, value in source.items()}
    every: list[dict[str, Any]] = [
        {name: D(value) for name, value in {**(bears or BEARS), **each}.items()} for each in devices
    ]
    return compare(
        Source(name="source", **figures),
        [Apparatus(name=f"device {place}", **each) for place, each in enumerate(every, start=1)],
        [CablePiece(name="cable", length_m=D(length_m), pf_per_m=D(200), uh_per_m=D(1))],
        group=group,
    )


@pytest.mark.parametrize(
    ("case", "found", "fails", "halved", "capacitance", "inductance", "longest_m"),
    [
        ("W1", worked(W1, [{"ci_nf": "3", "li_uh": "10"}], "300"), [], False, ("63", "83"), ("0.31", "3.05"), 400),
        ("W2", worked(W1, [{"ci_nf": "3", "li_uh": "40"}], "300"), ["capacitance"], True, ("63", "41.5"),
         ("0.34", "1.525"), 192),
        ("W3", worked(W1, [{"ci_nf": "0", "li_uh": "0"}], "415", bears={"ui_v": "28", "ii_ma": "93", "pi_mw": "650"}),
         [], False, ("83", "83"), ("0.415", "3.05"), 415),
        ("W4", worked(W1, [{"ci_nf": "0", "li_uh": "0", "pi_mw": "600"}], "10"), ["power"], False, ("2", "83"),
         ("0.01", "3.05"), 415),
        ("W5", worked(W1, [{"ci_nf": "3", "li_uh": "10"}] * 2, "400"), ["capacitance"], False, ("86", "83"),
         ("0.42", "3.05"), 385),
        ("W6", worked(W6, [{"ci_nf": "60", "li_uh": "200"}], "100"), [], True, ("80", "600"), ("0.3", "5"), 2700),
        ("W7", worked({**W6, "co_nf": "30000"}, [{"ci_nf": "600", "li_uh": "200"}], "100", group="IIB"), [], True,
         ("620", "1000"), ("0.3", "5"), 2000),
        ("W8", worked(W1, [{"ci_nf": "0.83", "li_uh": "30.5"}], "10"), [], True, ("2.83", "41.5"),
         ("0.0405", "1.525"), 203),
    ],
)  # fmt: skip
def test_the_worked_numbers(
    case: str,
    found: Comparison,
    fails: list[str],
    halved: bool,
    capacitance: tuple[str, str],
    inductance: tuple[str, str],
    longest_m: int,
) -> None:
    assert [line.quantity for line in found.lines if line.passes is False] == fails
    assert found.passes is (not fails)
    assert found.limits.halved is halved
    for quantity, wanted in (("capacitance", capacitance), ("inductance", inductance)):
        (line,) = found.of(quantity)  # type: ignore[arg-type]
        assert line.found is not None
        assert line.allowed is not None
        assert (number(line.found), number(line.allowed)) == wanted
    assert found.longest_cable_m == longest_m


def test_what_the_naive_checks_would_have_said_of_the_worked_numbers() -> None:
    # W1: halved though the inductance is below one percent.
    assert worked(W1, [{"ci_nf": "3", "li_uh": "10"}], "300").limits.co_nf != D("41.5")
    # W2: the full Co, for 'the cable has most of it'.
    assert worked(W1, [{"ci_nf": "3", "li_uh": "40"}], "300").passes is not True
    # W3: in binary floats 0.415 km of 0.2 uF/km and 0.083 uF need not be equal.
    assert exact(0.415 * 0.2 * 1000) == exact(0.083 * 1000) == D(83)
    # W5: each device alone passes.
    alone = worked(W1, [{"ci_nf": "3", "li_uh": "10"}], "400")
    assert alone.passes
    assert not worked(W1, [{"ci_nf": "3", "li_uh": "10"}] * 2, "400").passes
    # W6: half of Co without its cap.
    assert worked(W6, [{"ci_nf": "60", "li_uh": "200"}], "5000").of("capacitance")[0].passes is False
    # W8: 'greater than one percent'.
    assert worked(W1, [{"ci_nf": "0.83", "li_uh": "30.5"}], "300").passes is False


def test_the_least_resistance_gives_the_ratio() -> None:
    # 32 e R / (9 U^2) with 40 uJ, 300 ohm and 28 V.
    found = largest_lo_ro(D(28), D(28000) / 300, group="IIC")
    assert found is not None
    assert round(found, 1) == round(D(32) * 40 * 300 / (9 * 28 * 28), 1) == D("54.4")


def test_a_linear_source_gives_a_quarter_of_its_volts_times_its_current() -> None:
    # Arithmetic of a source and a load that match: plausible, no verdict.
    assert D(28) * D("0.093") / 4 == D("0.651")


def test_the_us_defaults_in_metres() -> None:
    # 60 pF/ft and 0.20 uH/ft (ANSI/ISA RP12.06.01, from memory); 1 ft = 0.3048 m exactly.
    assert number(D(60) / D("0.3048")) == "196.85"
    assert number(D("0.2") / D("0.3048"), 3) == "0.656"


# ------------------------------------------------------------------------------------ mistakes, through the rules

TYPES: list[Row] = [
    {"code": "T", "kind": "transmitter", "Ex marking": "Ex ia IIC T4 Ga", "Ui V": "30", "Ii mA": "120", "Pi mW": "1000",
     "Ci nF": "3", "Li uH": "10"},
    {"code": "Z", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC", "zener or isolator": "zener", "IS earth": "yes",
     "Uo V": "28", "Io mA": "93", "Po mW": "650", "Co nF IIC": "83", "Co nF IIB": "650", "Lo mH IIC": "3.05",
     "Lo mH IIB": "12.2"},
    {"code": "I", "kind": "indicator", "Ex marking": "Ex ia IIC T4 Ga", "Ui V": "30", "Ii mA": "120", "Pi mW": "1000",
     "Ci nF": "3", "Li uH": "10"},
]  # fmt: skip
CABLE: Row = {"code": "C", "conductor": "1.5 mm2", "capacitance": "200 pF/m", "inductance": "1 uH/m"}
ROW: Row = {
    "tag": "PT-101", "device type": "T", "area classification": "Zone 1 IIC T4", "barrier": "Z", "I/O type": "AI",
    "I/O address": "1", "signal": "4-20 mA", "cable type": "C", "cable length": "300 m",
}  # fmt: skip
ISC = tuple(f"ISC{number:02}" for number in (1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 13))


def plant_of(row: Row, types: tuple[Row, ...] = (), others: tuple[Row, ...] = (), **sheets: Any) -> Plant:
    """Return a plant of PT-101; `types` change T, Z and I, in that order, and add others."""
    changed = [{**own, **change} for own, change in zip(TYPES, (*types, {}, {}, {}), strict=False)]
    return example_plant([{**ROW, **row}, *others], types=[*changed, *types[3:]], cable_types=[CABLE], **sheets)


def said(plant: Plant, subject: str = "101") -> dict[str, str]:
    """Return what the rules of intrinsic safety find or review, or leave unchecked, of PT-101 and its circuit."""
    result = audit(plant, codes=ISC, raise_errors=True)
    told = {each.rule: each.outcome.value for each in result.findings if subject in each.subject}
    for code in ISC:
        if result.coverage[code].count(Outcome.UNCHECKED) and code not in told:
            told[code] = "unchecked"
    return told


RTD: Row = {"tag": "TE-101", "kind": "element", "signal": "Pt100", "I/O type": "RTD", "device type": "",
            "simple apparatus": "yes", "surface area": "100 mm2", "earthed sensor": "no"}  # fmt: skip
HOT: Row = {"code": "A", "zone": "1", "gas group": "IIC", "temperature class": "T4", "ambient max": "60"}


@pytest.mark.parametrize(
    ("mistake", "plant", "wanted"),
    [
        ("nothing is wrong", plant_of({}), {}),
        # An associated bracket: the barrier in the cabinet feeds a Ga device.
        ("a bracket feeds Zone 0", plant_of({"area classification": "Zone 0 IIC T4"}), {}),
        ("outputs ia of a body for Zone 2",
         plant_of({"area classification": "Zone 0 IIC T4"}, ({}, {"Ex marking": "Ex ec [ia Ga] nC IIC T4 Gc"})), {}),
        # Halved on one condition only, or not at all.
        ("one percent of one alone", plant_of({}), {}),
        ("one percent of both", plant_of({}, ({"Li uH": "40"},)), {"ISC05": "finding"}),
        # Each device alone passes.
        ("two devices", plant_of({"cable length": "400 m"}, others=(
            {"tag": "PI-101", "location": "field", "signal": "4-20 mA", "device type": "I",
             "area classification": "Zone 1 IIC T4"},)), {"ISC05": "finding"}),
        ("one device alone", plant_of({"cable length": "400 m"}), {}),
        # Co of the wrong group: 100 nF on 83 nF (IIC) or 650 nF (IIB).
        ("Co of IIB in IIC", plant_of({"cable length": "485 m"}), {"ISC05": "finding"}),
        ("Co of IIB in IIB", plant_of({"cable length": "485 m", "area classification": "Zone 1 IIB T4"}), {}),
        ("pairs of IIB alone in IIC", plant_of({}, ({}, {"Co nF IIC": "", "Lo mH IIC": ""})),
         {"ISC08": "finding", "ISC05": "unchecked", "ISC06": "unchecked"}),
        # An ia source with an ib device is a system ib.
        ("ib in Zone 0", plant_of({"area classification": "Zone 0 IIC T4"}, ({"Ex marking": "Ex ib IIC T4 Gb"},)),
         {"ISC09": "finding"}),
        ("ib in Zone 1", plant_of({}, ({"Ex marking": "Ex ib IIC T4 Gb"},)), {}),
        ("an ic source for Zone 1", plant_of({}, ({}, {"Ex marking": "[Ex ic Gc] IIC"})), {"ISC09": "finding"}),
        # Two sources that pass one by one.
        ("two sources", plant_of({"card": "X"}, ({}, {}, {}, {"code": "X", "kind": "card", "Uo V": "12", "Io mA": "20",
                                                              "Ex marking": "[Ex ia Ga] IIC"})),
         {"ISC10": "review", "ISC02": "unchecked", "ISC03": "unchecked", "ISC04": "unchecked", "ISC05": "unchecked",
          "ISC06": "unchecked", "ISC08": "unchecked", "ISC07": "review"}),
        # A blank is not without limit.
        ("no Pi", plant_of({}, ({"Pi mW": ""},)), {"ISC07": "review", "ISC04": "unchecked"}),
        ("no Ci", plant_of({}, ({"Ci nF": ""},)), {"ISC07": "review", "ISC05": "unchecked"}),
        # An earthed thermocouple on a zener barrier whose earth is recorded.
        ("two earths", plant_of({**RTD, "signal": "thermocouple", "I/O type": "TC", "earthed sensor": "yes",
                                 "area": "A", "area classification": ""}, areas=[HOT]), {"ISC11": "finding"}),
        # Simple apparatus by name: 0.65 W is no more than 1.2 W at 60 degC.
        ("an RTD on 0.65 W", plant_of({**RTD, "area": "A", "area classification": ""}, areas=[HOT]), {}),
        ("an RTD on 1.25 W", plant_of({**RTD, "area": "A", "area classification": ""}, ({}, {"Po mW": "1250"}),
                                      areas=[HOT]), {"ISC13": "finding"}),
        ("1.22 W between two ambients", plant_of({**RTD, "area": "A", "area classification": ""},
                                                 ({}, {"Po mW": "1220"}), areas=[{**HOT, "ambient max": "55"}]),
         {"ISC13": "finding"}),
        # An ia source does not make a flameproof device intrinsically safe, nor the reverse.
        ("an item of another protection", plant_of({}, ({"Ex marking": "Ex db IIC T4 Gb"},)),
         {"ISC01": "finding", "ISC11": "unchecked"}),
    ],
)  # fmt: skip
def test_a_mistake_and_what_must_come_of_it(mistake: str, plant: Plant, wanted: dict[str, str]) -> None:
    assert said(plant) == wanted


def test_the_naive_powers_must_not_come_back() -> None:
    # 1.22 W at 55 degC lies under the straight line between 1.25 W (50) and 1.2 W (60): the line is not used.
    line = 1250 + (1200 - 1250) * (55 - 50) / (60 - 50)
    assert line == 1225
    assert t4_power_mw(55) == 1200
    # Nor is the table carried on above 80 degC.
    assert t4_power_mw(85) is None


# ------------------------------------------------------------------------------------- common practice, no source


def test_one_item_that_is_not_intrinsically_safe_breaks_the_loop() -> None:
    """Common practice, no source."""
    indicator = {"tag": "PI-101", "kind": "indicator", "location": "field", "signal": "4-20 mA",
                 "area classification": "Zone 1 IIC T4"}  # fmt: skip
    good = plant_of({}, others=({**indicator, "device type": "I"},))
    bad = plant_of({}, others=({**indicator, "Ex marking": "Ex ec IIC T4 Gc"},))
    assert "ISC01" not in said(good)
    assert said(bad)["ISC01"] == "finding"


def test_a_pair_of_a_more_demanding_group_serves_a_less_demanding_one() -> None:
    """Common practice, no source: IIC for IIB and IIA, IIB for IIA and for dust (the last from memory)."""
    no_iib: tuple[Row, ...] = ({}, {"Co nF IIB": "", "Lo mH IIB": ""})
    for area in ("Zone 1 IIB T4", "Zone 2 IIA T1"):
        assert said(plant_of({"area classification": area}, no_iib)) == {}
    dust = plant_of(
        {"area classification": "Zone 21 IIIB T120°C"},
        ({"Ex marking": "Ex ia IIIC T100°C Db"}, {"Ex marking": "[Ex ia] IIC", "Co nF IIC": "", "Lo mH IIC": ""}),
    )
    assert said(dust) == {}
