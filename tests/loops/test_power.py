"""The voltage budget of a two-wire transmitter, its maximum voltage, and what would mend either."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loops.cable import LONGEST_CABLE_M, STANDARD_SIZES_MM2, Conductor, conductor_ohm_per_km_20c, loop_resistance_ohm
from loops.power import (
    VoltageBudget,
    VoltageDrop,
    check_current_ma,
    highest_supply_v,
    least_supply_v,
    longest_cable_m,
    max_loop_ohm,
    over_voltage,
    smallest_conductor,
    stated_volts,
    voltage_budget,
    volts_at_transmitter,
)

BARRIER_AND_RECEIVER = [("barrier", 340.0), ("receiver", 250.0)]
WITH_CABLE = [*BARRIER_AND_RECEIVER, ("cable", 24.2)]

SUPPLY_V = st.floats(10.0, 60.0)
CURRENT_MA = st.floats(3.6, 23.0)
NEEDED_V = st.floats(5.0, 15.0)
OHM = st.floats(0.0, 1000.0)


@pytest.mark.parametrize(
    ("supply_v", "current_ma", "at_terminals_v", "passes"),
    [
        (24.0, 20.0, 11.716, True),
        (24.0, 22.0, 10.4876, False),
        (22.8, 20.0, 10.516, True),
        (22.8, 22.0, 9.2876, False),
    ],
)
def test_the_current_and_the_supply_decide(
    supply_v: float, current_ma: float, at_terminals_v: float, passes: bool
) -> None:
    budget = voltage_budget(supply_v, current_ma, needed_v=10.5, resistances=WITH_CABLE)
    assert budget.at_terminals_v == pytest.approx(at_terminals_v, abs=1e-9)
    assert budget.margin_v == pytest.approx(at_terminals_v - 10.5, abs=1e-9)
    assert budget.passes is passes


def test_a_budget_shows_its_terms() -> None:
    budget = voltage_budget(24.0, 20.0, needed_v=12.0, resistances=[("receiver", 250.0)], fixed_drops=[("diode", 0.5)])
    assert budget == VoltageBudget(
        supply_v=24.0,
        current_ma=20.0,
        terms=(
            VoltageDrop(name="receiver", ohm=250.0, drop_v=5.0),
            VoltageDrop(name="diode", ohm=None, drop_v=0.5),
        ),
        at_terminals_v=18.5,
        needed_v=12.0,
        margin_v=6.5,
    )


@pytest.mark.parametrize(
    ("supply_v", "current_ma", "needed_v", "resistances", "fixed_drops", "working"),
    [
        (
            *(24.0, 22.0, 10.5, WITH_CABLE, []),
            "24.0 V - 22 mA x 614.2 ohm = 10.488 V at the terminals, 10.5 V needed, short by 0.012 V",
        ),
        (
            *(24.0, 20.5, 10.5, [("receiver", 250.0)], [("diode", 0.7)]),
            "24.0 V - 20.5 mA x 250 ohm - 0.7 V = 18.175 V at the terminals, 10.5 V needed, margin 7.675 V",
        ),
        (
            *(22.8, 22.0, 12.0, [("cable", 86.3636)], [("diode", 0.7), ("meter", 2.0)]),
            "22.8 V - 22 mA x 86.364 ohm - 0.7 V - 2.0 V = 18.2 V at the terminals, 12.0 V needed, margin 6.2 V",
        ),
        (
            15.0,
            20.0,
            15.0,
            [],
            [],
            "15.0 V - 20 mA x 0 ohm = 15.0 V at the terminals, 15.0 V needed, margin 0.0 V",
        ),
        (
            *(24.0, 20.0, 11.71604, WITH_CABLE, []),
            "24.0 V - 20 mA x 614.2 ohm = 11.716 V at the terminals, 11.71604 V needed, short by 0.00004 V",
        ),
    ],
    ids=["short", "one fixed drop", "two fixed drops", "exact", "short by a hair"],
)
def test_working(
    supply_v: float,
    current_ma: float,
    needed_v: float,
    resistances: list[tuple[str, float]],
    fixed_drops: list[tuple[str, float]],
    working: str,
) -> None:
    budget = voltage_budget(supply_v, current_ma, needed_v=needed_v, resistances=resistances, fixed_drops=fixed_drops)
    assert budget.working == working


@pytest.mark.parametrize(
    ("needed_v", "margin_v"),
    [(11.716, 0.0), (11.716 * (1 + 1e-12), 0.0), (11.715, 0.001), (11.717, -0.001)],
)
def test_a_margin_of_exactly_nothing_passes(needed_v: float, margin_v: float) -> None:
    budget = voltage_budget(24.0, 20.0, needed_v=needed_v, resistances=WITH_CABLE)
    assert budget.margin_v == pytest.approx(margin_v, abs=1e-9)
    assert (budget.margin_v == 0.0) is (margin_v == 0.0)
    assert budget.passes is (margin_v >= 0.0)


@pytest.mark.parametrize(
    ("direction", "high_alarm_ma", "current_ma"),
    [
        ("high", 21.6, 21.6),
        ("high", None, 22.0),
        (None, 23.0, 23.0),
        (None, None, 22.0),
        ("low", None, 20.5),
        ("low", 22.5, 20.5),
    ],
)
def test_check_current(direction: str | None, high_alarm_ma: float | None, current_ma: float) -> None:
    assert check_current_ma(direction, high_alarm_ma) == current_ma


def test_check_current_follows_the_plants_settings() -> None:
    assert check_current_ma(None, None, default_high_ma=21.5) == 21.5
    assert check_current_ma("low", None, low_ma=20.8) == 20.8


def test_an_isolators_load_is_not_on_its_field_side() -> None:
    supply_v = stated_volts([(20.0, 15.0), (22.0, None)], 20.0)
    assert supply_v == 15.0
    field_side = voltage_budget(supply_v, 20.0, needed_v=12.0, resistances=[("cable", 24.2)])
    assert field_side.at_terminals_v == pytest.approx(14.516, abs=1e-9)
    assert field_side.passes


@pytest.mark.parametrize(("current_ma", "volts"), [(20.0, 15.0), (22.0, 14.5), (20.5, None), (21.0, None)])
def test_an_isolators_volts_count_at_their_own_current(current_ma: float, volts: float | None) -> None:
    assert stated_volts([(20.0, 15.0), (21.0, None), (22.0, 14.5)], current_ma) == volts


@pytest.mark.parametrize(("current_ma", "at_terminals_v", "passes"), [(3.6, 35.1, False), (20.0, 31.0, True)])
def test_the_highest_voltage_stands_at_the_lowest_current(
    current_ma: float, at_terminals_v: float, passes: bool
) -> None:
    found = over_voltage(36.0, allowed_v=32.0, current_ma=current_ma, resistances=[("receiver", 250.0)])
    assert found.at_terminals_v == pytest.approx(at_terminals_v, abs=1e-9)
    assert found.passes is passes


@pytest.mark.parametrize(
    ("supply_v", "margin_v", "working"),
    [
        (
            *(36.0, -3.1),
            "36.0 V - 3.6 mA x 250 ohm - 0.7 V = 34.4 V at the terminals, 31.3 V allowed, over by 3.1 V",
        ),
        (
            *(32.9, 0.0),
            "32.9 V - 3.6 mA x 250 ohm - 0.7 V = 31.3 V at the terminals, 31.3 V allowed, margin 0.0 V",
        ),
    ],
)
def test_over_voltage(supply_v: float, margin_v: float, working: str) -> None:
    found = over_voltage(supply_v, allowed_v=31.3, resistances=[("receiver", 250.0)], fixed_drops=[("diode", 0.7)])
    assert found.margin_v == pytest.approx(margin_v, abs=1e-9)
    assert found.passes is (margin_v >= 0.0)
    assert found.working == working


@pytest.mark.parametrize(
    ("current_ma", "at_10_5_v", "at_12_v"),
    [
        (20.0, 675.0, 600.0),
        (20.5, 658.5, 585.4),
        (21.0, 642.9, 571.4),
        (21.5, 627.9, 558.1),
        (22.0, 613.6, 545.5),
        (23.0, 587.0, 521.7),
    ],
)
def test_load_line(current_ma: float, at_10_5_v: float, at_12_v: float) -> None:
    assert max_loop_ohm(24.0, current_ma, needed_v=10.5) == pytest.approx(at_10_5_v, abs=0.05)
    assert max_loop_ohm(24.0, current_ma, needed_v=12.0) == pytest.approx(at_12_v, abs=0.05)


@pytest.mark.parametrize(
    ("supply_v", "fixed_v", "ohm"),
    [(12.0, 0.0, 0.0), (11.9, 0.0, None), (24.0, 2.0, 500.0), (13.0, 1.5, None)],
)
def test_load_line_ends_where_the_supply_alone_falls_short(supply_v: float, fixed_v: float, ohm: float | None) -> None:
    found = max_loop_ohm(supply_v, 20.0, needed_v=12.0, fixed_v=fixed_v)
    assert found is None if ohm is None else found == pytest.approx(ohm, abs=1e-9)


@pytest.mark.parametrize(
    ("changes", "longest_m"),
    [
        ({}, 976),
        ({"conductor_c": 70.0}, 816),
        ({"ohm_per_km_20c": 24.2, "per": "loop"}, 976),
        ({"resistances": []}, 25356),
        ({"fixed_drops": [("diode", 0.5)]}, 37),
        ({"fixed_drops": [("diode", 0.52)]}, 0),
        ({"fixed_drops": [("diode", 0.53)]}, None),
        ({"ohm_per_km_20c": 0.0}, LONGEST_CABLE_M),
        ({"ohm_per_km_20c": 1e-15}, LONGEST_CABLE_M),
        ({"ohm_per_km_20c": 1e12}, 0),
    ],
    ids=str,
)
def test_longest_cable(changes: dict[str, object], longest_m: int | None) -> None:
    case: dict[str, object] = {
        "needed_v": 10.5,
        "ohm_per_km_20c": 12.1,
        "conductor_c": 20.0,
        "resistances": BARRIER_AND_RECEIVER,
    }
    assert longest_cable_m(24.0, 22.0, **{**case, **changes}) == longest_m  # type: ignore[arg-type]


def test_a_length_that_exactly_fits_counts() -> None:
    # 24 V - 20 mA x (250 + 1000 m of 25 ohm/km out and back) = 18 V
    assert (
        longest_cable_m(
            24.0,
            20.0,
            needed_v=18.0,
            ohm_per_km_20c=25.0,
            conductor_c=20.0,
            resistances=[("receiver", 250.0)],
        )
        == 1000
    )


@given(SUPPLY_V, CURRENT_MA, NEEDED_V, st.floats(1.0, 100.0), st.floats(-40.0, 90.0), OHM, st.floats(0.0, 3.0))
def test_one_metre_more_than_the_longest_cable_falls_short(
    supply_v: float,
    current_ma: float,
    needed_v: float,
    ohm_per_km: float,
    conductor_c: float,
    other_ohm: float,
    fixed_v: float,
) -> None:
    longest_m = longest_cable_m(
        supply_v,
        current_ma,
        needed_v=needed_v,
        ohm_per_km_20c=ohm_per_km,
        conductor_c=conductor_c,
        resistances=[("other", other_ohm)],
        fixed_drops=[("diode", fixed_v)],
    )

    def passes(length_m: float) -> bool:
        ohm = loop_resistance_ohm(length_m, ohm_per_km, conductor_c=conductor_c)
        return voltage_budget(
            supply_v,
            current_ma,
            needed_v=needed_v,
            resistances=[("other", other_ohm), ("cable", ohm)],
            fixed_drops=[("diode", fixed_v)],
        ).passes

    if longest_m is None:
        assert not passes(0.0)
    else:
        assert passes(longest_m)
        assert longest_m == LONGEST_CABLE_M or not passes(longest_m + 1)


@pytest.mark.parametrize(
    ("length_m", "changes", "size_mm2"),
    [
        (300.0, {}, 0.5),
        (400.0, {}, 0.75),
        (976.0, {}, 1.5),
        (977.0, {}, 2.5),
        (976.0, {"conductor_class": 5}, 2.5),
        (976.0, {"tinned": True}, 2.5),
        (976.0, {"conductor_c": 70.0}, 2.5),
        (400.0, {"sizes_mm2": (4.0, 1.5, 2.5)}, 1.5),
        (400.0, {"sizes_mm2": (0.8, 16.0)}, None),
        (10000.0, {}, None),
    ],
    ids=str,
)
def test_smallest_conductor(length_m: float, changes: dict[str, object], size_mm2: float | None) -> None:
    case: dict[str, object] = {
        "needed_v": 10.5,
        "length_m": length_m,
        "conductor_c": 20.0,
        "resistances": BARRIER_AND_RECEIVER,
    }
    assert smallest_conductor(24.0, 22.0, **{**case, **changes}) == size_mm2  # type: ignore[arg-type]


@given(st.floats(0.0, 5000.0), st.floats(0.0, 600.0))
def test_the_next_smaller_conductor_falls_short(length_m: float, other_ohm: float) -> None:
    smallest = smallest_conductor(
        24.0, 22.0, needed_v=10.5, length_m=length_m, conductor_c=70.0, resistances=[("other", other_ohm)]
    )
    for size_mm2 in STANDARD_SIZES_MM2:
        ohm_per_km = conductor_ohm_per_km_20c(Conductor(size_mm2=size_mm2))
        assert ohm_per_km is not None
        ohm = loop_resistance_ohm(length_m, ohm_per_km, conductor_c=70.0)
        budget = voltage_budget(24.0, 22.0, needed_v=10.5, resistances=[("other", other_ohm), ("cable", ohm)])
        assert budget.passes is (smallest is not None and size_mm2 >= smallest)


@pytest.mark.parametrize(
    ("needed_v", "resistances", "fixed_drops", "supply_v"),
    [
        (10.5, WITH_CABLE, [], 24.1),
        (10.5, [("receiver", 250.0)], [], 16.0),
        (10.5, [("receiver", 250.0)], [("diode", 0.7)], 16.7),
        (10.50001, [("receiver", 250.0)], [], 16.1),
        (10.5, [], [], 10.5),
        (0.3, [], [("diode", 0.6)], 0.9),
    ],
)
def test_least_supply(
    needed_v: float,
    resistances: list[tuple[str, float]],
    fixed_drops: list[tuple[str, float]],
    supply_v: float,
) -> None:
    found = least_supply_v(22.0, needed_v=needed_v, resistances=resistances, fixed_drops=fixed_drops)
    assert found == supply_v


@given(CURRENT_MA, NEEDED_V, OHM, st.floats(0.0, 3.0))
def test_a_tenth_less_than_the_least_supply_falls_short(
    current_ma: float, needed_v: float, ohm: float, fixed_v: float
) -> None:
    resistances, fixed_drops = [("all", ohm)], [("diode", fixed_v)]
    least_v = least_supply_v(current_ma, needed_v=needed_v, resistances=resistances, fixed_drops=fixed_drops)
    for supply_v, passes in ((least_v, True), (round(least_v - 0.1, 1), False)):
        budget = voltage_budget(
            supply_v, current_ma, needed_v=needed_v, resistances=resistances, fixed_drops=fixed_drops
        )
        assert budget.passes is passes


@pytest.mark.parametrize(
    ("allowed_v", "resistances", "supply_v"),
    [
        (32.0, [("receiver", 250.0)], 32.9),
        (32.0, [], 32.0),
        (31.95, [], 31.9),
        (42.4, [("receiver", 250.0), ("cable", 10.0)], 43.3),
    ],
)
def test_highest_supply(allowed_v: float, resistances: list[tuple[str, float]], supply_v: float) -> None:
    assert highest_supply_v(allowed_v=allowed_v, resistances=resistances) == supply_v


@given(st.floats(10.0, 60.0), OHM, st.floats(0.0, 3.0))
def test_a_tenth_more_than_the_highest_supply_is_too_much(allowed_v: float, ohm: float, fixed_v: float) -> None:
    resistances, fixed_drops = [("all", ohm)], [("diode", fixed_v)]
    highest_v = highest_supply_v(allowed_v=allowed_v, resistances=resistances, fixed_drops=fixed_drops)
    for supply_v, passes in ((highest_v, True), (round(highest_v + 0.1, 1), False)):
        found = over_voltage(supply_v, allowed_v=allowed_v, resistances=resistances, fixed_drops=fixed_drops)
        assert found.passes is passes


@given(SUPPLY_V, CURRENT_MA)
def test_without_resistance_the_supply_reaches_the_terminals(supply_v: float, current_ma: float) -> None:
    assert volts_at_transmitter(supply_v, current_ma) == supply_v
    assert volts_at_transmitter(supply_v, current_ma, [("cable", 0.0)], [("diode", 0.0)]) == supply_v


@given(SUPPLY_V, CURRENT_MA, st.floats(1.0, 5000.0))
def test_double_length_doubles_the_drop(supply_v: float, current_ma: float, length_m: float) -> None:
    drops = [
        supply_v
        - volts_at_transmitter(supply_v, current_ma, [("cable", loop_resistance_ohm(metres, 12.1, conductor_c=70.0))])
        for metres in (length_m, 2.0 * length_m)
    ]
    assert drops[1] == pytest.approx(2.0 * drops[0], rel=1e-9, abs=1e-12)


@given(SUPPLY_V, CURRENT_MA, NEEDED_V, OHM, OHM)
def test_the_terms_add_up(supply_v: float, current_ma: float, needed_v: float, one: float, other: float) -> None:
    budget = voltage_budget(supply_v, current_ma, needed_v=needed_v, resistances=[("one", one), ("other", other)])
    assert budget.at_terminals_v == pytest.approx(supply_v - sum(term.drop_v for term in budget.terms), abs=1e-9)


@given(SUPPLY_V, NEEDED_V, OHM)
def test_more_current_never_leaves_more(supply_v: float, needed_v: float, ohm: float) -> None:
    margins = [
        voltage_budget(supply_v, ma, needed_v=needed_v, resistances=[("all", ohm)]).margin_v
        for ma in (3.6, 20.0, 20.5, 22.0)
    ]
    assert margins == sorted(margins, reverse=True)
