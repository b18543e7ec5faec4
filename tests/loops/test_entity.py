"""The arithmetic of the entity comparison: each term, both sides of each boundary, the longest cable proved."""

from dataclasses import replace
from decimal import Decimal
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.entity import (
    IEC_DEFAULTS,
    US_DEFAULTS,
    Apparatus,
    CablePiece,
    Comparison,
    Source,
    compare,
    exact,
    largest_lo_ro,
    longest_cable_m,
    lumped_limits,
    number,
    pair,
    with_defaults,
)

D = Decimal
SOURCE = Source(
    name="ZB", came_from="ZB", uo_v=D(28), io_ma=D(93), po_mw=D(650), co_nf=D(83), co_group="IIC", lo_mh=D("3.05"),
    lo_group="IIC",
)  # fmt: skip
DEVICE = Apparatus(name="PT-1", ui_v=D(30), ii_ma=D(120), pi_mw=D(1000), ci_nf=D(3), li_uh=D(10))


def cable(length_m: Any, **more: Any) -> CablePiece:
    values = {"pf_per_m": D(200), "uh_per_m": D(1), **more}
    return CablePiece(name="cable", length_m=None if length_m is None else D(str(length_m)), **values)


def outcome(comparison: Comparison) -> str:
    """Return the quantities that fail, then those that cannot be told: ``power fails``, ``all pass``."""
    words = [f"{line.quantity} fails" for line in comparison.lines if line.passes is False]
    words += [f"{line.quantity} open" for line in comparison.lines if line.passes is None]
    return ", ".join(words) or "all pass"


@pytest.mark.parametrize(
    ("value", "text"),
    [(0.083e-6 * 1e9, "83"), (0.1 + 0.2, "0.3"), (93.0, "93"), (0.0, "0"), (1e6, "1000000")],
)
def test_a_number_is_the_decimal_that_was_written(value: float, text: str) -> None:
    assert exact(value) == D(text)


# ------------------------------------------------------------------------------------------ each device by itself


@pytest.mark.parametrize(
    ("field", "value", "wanted"),
    [
        ("ui_v", "28", "all pass"),
        ("ui_v", "27.999999", "voltage fails"),
        ("ui_v", None, "voltage open"),
        ("ii_ma", "93", "all pass"),
        ("ii_ma", "92.99", "current fails"),
        ("ii_ma", None, "current open"),
        ("pi_mw", "650", "all pass"),
        ("pi_mw", "649.999", "power fails"),
        ("pi_mw", None, "power open"),
        ("pi_mw", "0", "power fails"),
    ],
)
def test_each_limit_of_a_device(field: str, value: str | None, wanted: str) -> None:
    device = replace(DEVICE, **{field: None if value is None else D(value)})  # type: ignore[arg-type]
    assert outcome(compare(SOURCE, [device], [cable(10)], group="IIC")) == wanted


@pytest.mark.parametrize("field", ["uo_v", "io_ma", "po_mw", "co_nf", "lo_mh"])
def test_nothing_that_a_source_does_not_state_passes(field: str) -> None:
    found = compare(replace(SOURCE, **{field: None}), [DEVICE], [cable(10)], group="IIC")  # type: ignore[arg-type]
    assert found.passes is None
    assert sum(line.passes is None for line in found.lines) == 1


def test_two_devices_are_compared_one_by_one() -> None:
    other = replace(DEVICE, name="LI-1", ii_ma=D(90))
    found = compare(SOURCE, [DEVICE, other], [cable(10)], group="IIC")
    assert [(line.device, line.quantity) for line in found.lines if line.passes is False] == [("LI-1", "current")]


def test_a_limit_that_a_certificate_does_not_set_is_not_compared() -> None:
    device = replace(DEVICE, ii_ma=None, not_set=frozenset({"Ii"}))
    found = compare(SOURCE, [device], [cable(10)], group="IIC")
    assert found.of("current") == ()
    assert found.passes is True


def test_simple_apparatus_has_no_limits_and_stores_what_it_states() -> None:
    simple = Apparatus(name="TE-1", simple=True, ci_nf=D(1))
    found = compare(SOURCE, [simple], [cable(410)], group="IIC")
    assert [line.quantity for line in found.lines] == ["capacitance", "inductance"]
    assert (found.passes, found.lines[0].found) == (True, D(83))


def test_a_line_shows_its_terms_and_where_they_came_from() -> None:
    device = replace(DEVICE, came_from="type T1")
    run = cable(300, came_from="cable type C1", length_from="loop list")
    lines = compare(replace(SOURCE, uo_v=D("28.0")), [device], [run], group="IIC").lines
    assert [line.working for line in lines] == [
        "Uo 28 V (ZB); Ui 30 V of PT-1 (type T1)",
        "Io 93 mA (ZB); Ii 120 mA of PT-1 (type T1)",
        "Po 650 mW (ZB); Pi 1000 mW of PT-1 (type T1)",
        "Ci 3 nF (PT-1, type T1) + cable 300 m (loop list) x 200 pF/m (cable type C1) = 60 nF: 63 nF;"
        " Co for IIC 83 nF (ZB)",
        "Li 0.01 mH (PT-1, type T1) + cable 300 m (loop list) x 1 uH/m (cable type C1) = 0.3 mH: 0.31 mH;"
        " Lo for IIC 3.05 mH (ZB)",
    ]
    assert [term.came_from for term in lines[3].terms] == ["type T1", "cable type C1"]


# -------------------------------------------------------------------------------------------------- 1 % and 50 %

FULL: dict[str, Any] = {"co_nf": D(83), "lo_mh": D("3.05"), "group": "IIC"}


@pytest.mark.parametrize(
    ("ci_nf", "li_uh", "halved"),
    [
        ("0.83", "30.5", True),  # exactly one percent of both
        ("0.8299", "30.5", False),
        ("0.83", "30.4999", False),
        ("80", "0", False),  # one alone never halves
        ("0", "3000", False),
        ("80", "3000", True),
    ],
)
def test_both_lumped_parts_must_reach_one_percent(ci_nf: str, li_uh: str, halved: bool) -> None:
    found = lumped_limits(**FULL, ci_nf=D(ci_nf), li_uh=D(li_uh))
    wanted = (D("41.5"), D("1.525")) if halved else (D(83), D("3.05"))
    assert (found.halved, found.co_nf, found.lo_mh) == (halved, *wanted)


@pytest.mark.parametrize(
    ("group", "co_nf", "wanted", "capped"),
    [
        ("IIC", "1200", "600", False),
        ("IIC", "1200.2", "600", True),
        ("IIC", "3000", "600", True),
        ("IIB", "3000", "1000", True),
        ("IIB", "2000", "1000", False),
        ("IIA", "30000", "1000", True),
        ("IIA", "1500", "750", False),
    ],
)
def test_half_of_co_has_a_cap(group: str, co_nf: str, wanted: str, capped: bool) -> None:
    found = lumped_limits(D(co_nf), D(10), ci_nf=D(co_nf) / 50, li_uh=D(200), group=group)
    assert (found.co_nf, found.capped, found.lo_mh) == (D(wanted), capped, D(5))


def test_the_cap_is_for_what_is_halved() -> None:
    assert lumped_limits(D(3000), D(10), ci_nf=D(60), li_uh=D(0), group="IIC").co_nf == D(3000)


def test_combined_pairs_are_not_halved() -> None:
    found = lumped_limits(**FULL, ci_nf=D(3), li_uh=D(40), combined_pairs=True)
    assert (found.co_nf, found.lo_mh, found.halved) == (D(83), D("3.05"), False)
    assert found.working == "Co and Lo are combined pairs: not halved"


@pytest.mark.parametrize(
    ("ci_nf", "li_uh", "wanted"),
    [
        # Nothing can be halved: the other blank does not matter.
        ("0.5", None, "inductance open"),
        ("0", None, "inductance open"),
        (None, "0", "capacitance open"),
        # The blank may bring both to one percent.
        ("50", None, "capacitance open, inductance open"),
        # Even halved there is room enough.
        ("3", None, "inductance open"),
        ("90", None, "capacitance fails, inductance open"),
    ],
)
def test_a_blank_leaves_open_what_it_can_change(ci_nf: str | None, li_uh: str | None, wanted: str) -> None:
    device = replace(DEVICE, ci_nf=None if ci_nf is None else D(ci_nf), li_uh=None if li_uh is None else D(li_uh))
    assert outcome(compare(SOURCE, [device], [cable(10)], group="IIC")) == wanted


def test_a_blank_names_the_device() -> None:
    found = compare(SOURCE, [replace(DEVICE, ci_nf=None)], [cable(10)], group="IIC")
    assert found.of("capacitance")[0].missing == ("Ci nF of PT-1",)


# ----------------------------------------------------------------------------------------------------------- L/R

LONG = cable(4000, pf_per_m=D(1), uh_per_ohm=D(30))


@pytest.mark.parametrize(
    ("lo_ro", "li_uh", "wanted"),
    [
        ("30", "30.4", "all pass"),  # equal, and less than one percent of Lo
        ("29.9", "30.4", "inductance fails"),
        ("30", "30.5", "inductance fails"),  # one percent: for a person, by the formula
        (None, "0", "inductance fails"),
    ],
)
def test_the_cables_ratio_may_stand_for_its_inductance(lo_ro: str | None, li_uh: str, wanted: str) -> None:
    source = replace(SOURCE, lo_ro_uh_per_ohm=None if lo_ro is None else D(lo_ro))
    device = replace(DEVICE, ci_nf=D(0), li_uh=D(li_uh))
    assert outcome(compare(source, [device], [LONG], group="IIC")) == wanted


def test_with_lumped_inductance_the_ratio_is_for_a_person() -> None:
    source = replace(SOURCE, lo_ro_uh_per_ohm=D("54.4"))
    (line,) = compare(source, [replace(DEVICE, ci_nf=D(0), li_uh=D(40))], [LONG], group="IIC").of("inductance")
    assert (line.passes, line.by_ratio, line.ratio_doubtful) == (False, False, True)
    assert line.working.endswith(
        "; cable L/R 30 uH/ohm, Lo/Ro 54.4 uH/ohm, which holds without lumped inductance; with it 54.5 uH/ohm by the"
        " formula of IEC 60079-11 (from memory, not verified)"
    )


def test_the_ratio_never_helps_what_the_devices_store() -> None:
    source = replace(SOURCE, lo_ro_uh_per_ohm=D(100))
    (line,) = compare(source, [replace(DEVICE, ci_nf=D(0), li_uh=D(3051))], [LONG], group="IIC").of("inductance")
    assert (line.passes, line.ratio_doubtful) == (False, False)


def test_the_ratio_never_helps_the_capacitance() -> None:
    source = replace(SOURCE, lo_ro_uh_per_ohm=D(100))
    found = compare(source, [replace(DEVICE, li_uh=D(0))], [cable(4000, uh_per_ohm=D(30))], group="IIC")
    assert outcome(found) == "capacitance fails"
    assert found.of("inductance")[0].by_ratio


@pytest.mark.parametrize(("group", "wanted"), [("IIC", "54.4"), ("IIB", "217.7"), ("IIA", "435.4")])
def test_the_formula_for_the_ratio(group: str, wanted: str) -> None:
    found = largest_lo_ro(D(28), D(28000) / 300, group=group)
    assert found is not None
    assert round(found, 1) == D(wanted)


def test_the_formula_leaves_nothing_beside_much_inductance() -> None:
    assert largest_lo_ro(D(28), D(28000) / 300, group="IIC", li_uh=D(4100)) is None
    assert largest_lo_ro(D(0), D(0), group="IIC") is None


# --------------------------------------------------------------------------------------------------------- cable


def test_what_is_not_given_of_a_cable_takes_one_standards_figures() -> None:
    bare = CablePiece(name="C", length_m=D(100))
    iec, us = with_defaults(bare, IEC_DEFAULTS), with_defaults(bare, US_DEFAULTS)
    assert (iec.pf_per_m, iec.uh_per_m, iec.uh_per_ohm) == (D(200), D(1), D(30))
    assert (number(us.pf_per_m or D(0)), number(us.uh_per_m or D(0)), us.uh_per_ohm) == ("196.85", "0.656168", None)
    given = with_defaults(replace(bare, pf_per_m=D(110), uh_per_m=D(1), uh_per_ohm=D(27)), IEC_DEFAULTS)
    assert given.assumed == frozenset()


@pytest.mark.parametrize(
    ("pieces", "missing"),
    [
        ([], ("cable length",)),
        ([cable(None)], ("cable length",)),
        ([cable(10, pf_per_m=None)], ("cable type",)),
        ([cable(10), cable(None)], ("cable length",)),
    ],
)
def test_a_cable_that_is_not_known_is_not_nothing(pieces: list[CablePiece], missing: tuple[str, ...]) -> None:
    (line,) = compare(SOURCE, [DEVICE], pieces, group="IIC").of("capacitance")
    assert (line.passes, line.missing) == (None, missing)


def test_cables_of_a_run_are_added() -> None:
    found = compare(SOURCE, [DEVICE], [cable(100), cable(200, pf_per_m=D(300))], group="IIC")
    assert found.of("capacitance")[0].found == D(83)
    assert (found.passes, found.longest_cable_m) == (True, None)


@pytest.mark.parametrize(
    ("nf_left", "mh_left", "per_m", "wanted"),
    [
        ("80", "3.04", ("200", "1"), (400, "capacitance")),
        ("80.1", "3.04", ("200", "1"), (400, "capacitance")),
        ("80.2", "3.04", ("200", "1"), (401, "capacitance")),
        ("80", "0.39", ("200", "1"), (390, "inductance")),
        ("80", None, ("200", "1"), (400, "capacitance")),
        ("0", "1", ("200", "1"), (0, "capacitance")),
        ("-0.1", "1", ("200", "1"), (0, "capacitance")),
        ("80", "-0.1", ("200", "1"), (0, "inductance")),
        ("80", "1", ("0", "0"), (None, "")),
        ("80", "1", ("0", "1"), (1000, "inductance")),
    ],
)
def test_the_longest_cable(
    nf_left: str, mh_left: str | None, per_m: tuple[str, str], wanted: tuple[int | None, str]
) -> None:
    found = longest_cable_m(
        D(nf_left), None if mh_left is None else D(mh_left), pf_per_m=D(per_m[0]), uh_per_m=D(per_m[1])
    )
    assert found == wanted


def decimals(least: str, most: str, places: int) -> st.SearchStrategy[Decimal]:
    return st.decimals(min_value=D(least), max_value=D(most), places=places, allow_nan=False)


@given(
    co_nf=decimals("1", "5000", 2),
    lo_mh=decimals("0.05", "50", 3),
    ci_nf=decimals("0", "60", 2),
    li_uh=decimals("0", "400", 1),
    pf_per_m=decimals("20", "400", 1),
    uh_per_m=decimals("0.1", "2", 2),
    lo_ro=st.none() | decimals("5", "100", 1),
    group=st.sampled_from(["IIC", "IIB", "IIA"]),
    combined=st.booleans(),
)
def test_one_metre_more_than_the_longest_cable_fails(
    co_nf: Decimal,
    lo_mh: Decimal,
    ci_nf: Decimal,
    li_uh: Decimal,
    pf_per_m: Decimal,
    uh_per_m: Decimal,
    lo_ro: Decimal | None,
    group: str,
    combined: bool,
) -> None:
    source = replace(SOURCE, co_nf=co_nf, lo_mh=lo_mh, lo_ro_uh_per_ohm=lo_ro, combined_pairs=combined)
    device = replace(DEVICE, ci_nf=ci_nf, li_uh=li_uh)

    def stores(length_m: int) -> Comparison:
        run = cable(length_m, pf_per_m=pf_per_m, uh_per_m=uh_per_m, uh_per_ohm=D(27))
        return compare(source, [device], [run], group=group)

    longest = stores(10).longest_cable_m
    assert longest is not None
    failing = [line for line in stores(longest + 1).lines[3:] if line.passes is False]
    assert failing
    if longest > 0:
        assert all(line.passes for line in stores(longest).lines[3:])
        assert stores(longest + 1).longest_because in [line.quantity for line in failing]


@given(
    figures=st.lists(decimals("0", "100", 3), min_size=5, max_size=5),
    more=decimals("0.001", "50", 3),
    which=st.sampled_from(["ui_v", "ii_ma", "pi_mw"]),
)
def test_a_device_that_bears_more_never_fails_where_one_that_bears_less_passes(
    figures: list[Decimal], more: Decimal, which: str
) -> None:
    names = ("ui_v", "ii_ma", "pi_mw", "ci_nf", "li_uh")
    device = Apparatus(name="PT-1", **dict(zip(names, figures, strict=True)))  # type: ignore[arg-type]
    better = replace(device, **{which: getattr(device, which) + more})
    before = compare(SOURCE, [device], [cable(10)], group="IIC")
    after = compare(SOURCE, [better], [cable(10)], group="IIC")
    for one, other in zip(before.lines, after.lines, strict=True):
        assert not (one.passes is True and other.passes is not True)


# ------------------------------------------------------------------------------------------------------- figures


@pytest.mark.parametrize(
    ("one", "other", "wanted"),
    [
        ("83", "83", ("83", "83")),
        ("83.0000001", "83", ("83.0000001", "83")),
        ("0.31", "3.05", ("0.31", "3.05")),
        ("1000000", "1000000.5", ("1000000", "1000000.5")),
    ],
)
def test_two_figures_can_be_told_apart(one: str, other: str, wanted: tuple[str, str]) -> None:
    assert pair(D(one), D(other)) == wanted
