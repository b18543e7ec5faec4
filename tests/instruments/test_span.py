"""Span, turndown, limits, zero shift, preferred ranges and unit slips."""

from decimal import Decimal

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from instruments.span import (
    UnitSlip,
    above,
    below,
    beyond_limit,
    nearest_range_inside,
    nearest_zero_shift,
    percent_of_span,
    preferred_urv,
    preferred_urv_for_normal,
    range_with_span,
    smallest_span,
    span,
    turndown,
    unit_slips,
    within_zero_shift,
    zero_shift_limit,
)

END = st.floats(-1e4, 1e4)
Range = tuple[float, float]


@pytest.mark.parametrize(
    ("lrv", "urv", "expected"),
    [(0.0, 10.0, 10.0), (-84.0, -29.0, 55.0), (-25.0, 100.0, 125.0), (10.0, 0.0, 10.0), (5.0, 5.0, 0.0)],
)
def test_span(lrv: float, urv: float, expected: float) -> None:
    assert span(lrv, urv) == expected


@pytest.mark.parametrize(
    ("lrl", "url", "of_span", "expected"),
    [
        (0.0, 500.0, 100.0, 5.0),
        (-60.0, 60.0, 55.0, 60 / 55),
        (-100.0, 10.0, 20.0, 5.0),
        (0.0, 1000.0, 40.0, 25.0),
    ],
)
def test_turndown_is_of_the_span_not_of_urv(lrl: float, url: float, of_span: float, expected: float) -> None:
    assert turndown(lrl, url, of_span) == expected


def test_no_turndown_without_a_span() -> None:
    with pytest.raises(ValueError, match="no span"):
        turndown(0.0, 10.0, 0.0)


@pytest.mark.parametrize(
    ("value", "limit", "expected"),
    [(5.0, 5.0, False), (5.0000001, 5.0, True), (5.000000001, 5.0, False), (0.3, 0.1 + 0.2, False)],
)
def test_above_a_limit_takes_rounding_but_nothing_more(value: float, limit: float, expected: bool) -> None:
    assert above(value, limit) is expected
    assert below(limit, value) is expected


@pytest.mark.parametrize(
    ("value", "lower", "upper", "expected"),
    [
        (-84.0, -60.0, 60.0, -24.0),
        (-29.0, -60.0, 60.0, 0.0),
        (60.0, -60.0, 60.0, 0.0),
        (60.0 * (1 + 1e-12), -60.0, 60.0, 0.0),
        (-1e-10, 0.0, 60.0, 0.0),
        (-1e-6, 0.0, 60.0, -1e-6),
        (12.0, None, 10.0, 2.0),
        (12.0, None, None, 0.0),
        (-5.0, -4.0, None, -1.0),
        (-5.0, None, 10.0, 0.0),
    ],
)
def test_beyond_limit(value: float, lower: float | None, upper: float | None, expected: float) -> None:
    assert beyond_limit(value, lower, upper) == expected


@pytest.mark.parametrize(
    ("value", "lrv", "urv", "expected"),
    [(5.0, 0.0, 10.0, 50.0), (-70.25, -84.0, -29.0, 25.0), (2.5, 10.0, 0.0, 75.0), (12.0, 0.0, 10.0, 120.0)],
)
def test_percent_of_span(value: float, lrv: float, urv: float, expected: float) -> None:
    assert percent_of_span(value, lrv, urv) == pytest.approx(expected, rel=1e-12)


def test_no_percent_without_a_span() -> None:
    with pytest.raises(ValueError, match="no span"):
        percent_of_span(1.0, 5.0, 5.0)


@pytest.mark.parametrize(
    ("asked", "body", "expected"),
    [
        ((0.0, 10.0), (0.0, 10.0), (0.0, 10.0)),
        ((-84.0, -29.0), (-60.0, 60.0), (-60.0, -5.0)),
        ((-29.0, -84.0), (-60.0, 60.0), (-5.0, -60.0)),
        ((8.0, 12.0), (0.0, 10.0), (6.0, 10.0)),
        ((0.0, 16.0), (-1.0, 10.0), (0.0, 10.0)),
        ((16.0, 0.0), (-1.0, 10.0), (10.0, 0.0)),
        ((100.0, 200.0), (0.0, 50.0), (0.0, 50.0)),
        ((-10.0, 30.0), (0.0, 20.0), (0.0, 20.0)),
        ((0.3, 1.0), (0.0, 0.9), (0.2, 0.9)),
    ],
)
def test_nearest_range_inside(asked: Range, body: Range, expected: Range) -> None:
    assert nearest_range_inside(*asked, *body) == expected


@pytest.mark.parametrize(
    ("hold_zero", "expected"), [(False, (-0.5, 11.5)), (True, (0.0, 11.5))], ids=["shifted", "cut"]
)
def test_an_end_at_zero_stays_if_it_must(hold_zero: bool, expected: Range) -> None:
    assert nearest_range_inside(0.0, 12.0, -1.0, 11.5, hold_zero=hold_zero) == expected


def test_a_body_needs_two_different_limits() -> None:
    with pytest.raises(ValueError, match="LRL"):
        nearest_range_inside(0.0, 1.0, 5.0, 5.0)


@given(END, END, END, END, st.booleans())
def test_the_nearest_range_is_inside_and_keeps_its_direction(
    lrv: float, urv: float, lrl: float, url: float, hold_zero: bool
) -> None:
    assume(url - lrl > 1e-3 and abs(urv - lrv) > 1e-3)
    new_lrv, new_urv = nearest_range_inside(lrv, urv, lrl, url, hold_zero=hold_zero)
    assert not beyond_limit(new_lrv, lrl, url)
    assert not beyond_limit(new_urv, lrl, url)
    assert (new_lrv < new_urv) is (lrv < urv)
    if not hold_zero and span(lrv, urv) <= url - lrl:
        assert span(new_lrv, new_urv) == pytest.approx(span(lrv, urv), rel=1e-9)


@pytest.mark.parametrize(
    ("body", "maximum_turndown", "minimum_span", "expected"),
    [
        ((0.0, 1000.0), 20.0, None, 50.0),
        ((-100.0, 100.0), 5.0, None, 20.0),
        ((0.0, 6.0), 3.0, 2.5, 2.5),
        ((0.0, 6.0), 3.0, 1.0, 2.0),
        ((0.0, 6.0), None, 1.0, 1.0),
        ((0.0, 6.0), None, None, None),
    ],
)
def test_smallest_span(
    body: Range, maximum_turndown: float | None, minimum_span: float | None, expected: float | None
) -> None:
    found = smallest_span(*body, maximum_turndown=maximum_turndown, minimum_span=minimum_span)
    assert found == expected


def test_a_turndown_is_above_zero() -> None:
    with pytest.raises(ValueError, match="turndown"):
        smallest_span(0.0, 1.0, maximum_turndown=0.0)


@pytest.mark.parametrize(
    ("asked", "at_least", "body", "expected"),
    [
        ((50.0, 90.0), 50.0, (0.0, 1000.0), (50.0, 100.0)),
        ((90.0, 50.0), 50.0, (0.0, 1000.0), (90.0, 40.0)),
        ((960.0, 1000.0), 50.0, (0.0, 1000.0), (950.0, 1000.0)),
        ((0.0, 90.0), 50.0, (0.0, 1000.0), (0.0, 90.0)),
        ((0.0, 1.0), 50.0, (0.0, 40.0), None),
    ],
)
def test_range_with_span(asked: Range, at_least: float, body: Range, expected: Range | None) -> None:
    assert range_with_span(*asked, at_least=at_least, lrl=body[0], url=body[1]) == expected


@given(END, END, st.floats(0.01, 100.0))
def test_a_widened_range_has_its_span(lrv: float, urv: float, at_least: float) -> None:
    widened = range_with_span(lrv, urv, at_least=at_least, lrl=-2e4, url=2e4)
    assert widened is not None
    assert not below(span(*widened), at_least)


@pytest.mark.parametrize(("lrv", "within"), [(0.0, True), (0.9, True), (0.901, False), (-0.9, True), (-0.901, False)])
def test_zero_shift_reaches_as_far_down_as_up(lrv: float, within: bool) -> None:
    assert zero_shift_limit(6.0, 15.0) == 0.9
    assert within_zero_shift(lrv, 6.0, 15.0) is within


@pytest.mark.parametrize(
    ("asked", "expected"),
    [
        ((2.0, 5.0), (0.9, 3.9)),
        ((-2.0, 1.0), (-0.9, 2.1)),
        ((0.5, 3.5), (0.5, 3.5)),
        ((2.0, 1.0), (0.9, -0.1)),
    ],
)
def test_nearest_zero_shift_keeps_the_span(asked: Range, expected: Range) -> None:
    found = nearest_zero_shift(*asked, 6.0, 15.0)
    assert found == expected
    assert within_zero_shift(found[0], 6.0, 15.0)


@pytest.mark.parametrize(
    ("at_least", "at_most", "expected"),
    [
        (1.0, None, 1.0),
        (1.0000001, None, 1.6),
        (1.6, None, 1.6),
        (1.6 * (1 + 1e-12), None, 1.6),
        (2.0, None, 2.5),
        (2.6, None, 4.0),
        (4.1, None, 6.0),
        (6.1, None, 10.0),
        (95.0, None, 100.0),
        (0.17, None, 0.25),
        (0.16, None, 0.16),
        (0.0011, None, 0.0016),
        (11.0, 16.0, 16.0),
        (11.0, 15.9, None),
        (0.0, None, None),
        (-5.0, None, None),
        (float("nan"), None, None),
        (float("inf"), None, None),
        (9e307, None, 1e308),
        (1.1e308, 1e308, None),
    ],
)
def test_preferred_urv(at_least: float, at_most: float | None, expected: float | None) -> None:
    assert preferred_urv(at_least, at_most=at_most) == expected


@given(st.floats(1e-6, 1e9))
def test_the_preferred_urv_is_the_next_one(at_least: float) -> None:
    found = preferred_urv(at_least)
    assert found is not None
    assert not below(found, at_least)
    assert found <= at_least * (10.0 / 6.0) * (1 + 1e-9)
    assert Decimal(repr(found)).normalize().as_tuple().digits in {(1,), (1, 6), (2, 5), (4,), (6,)}


@pytest.mark.parametrize(
    ("normal", "lrv", "limits", "expected"),
    [
        (6.5, 0.0, {}, 10.0),
        (7.5, 0.0, {}, 10.0),
        (7.6, 0.0, {}, 16.0),
        (3.0, 0.0, {"at_least": 8.0}, 10.0),
        (3.0, 0.0, {"at_least": 11.0}, None),
        (3.0, 0.0, {"at_most": 3.9}, None),
        (3.0, 0.0, {"at_most": 4.0}, 4.0),
        (110.0, 100.0, {}, None),
        (150.0, 100.0, {}, 250.0),
        (150.0, 50.0, {}, 250.0),
        (0.0, 0.0, {}, None),
        (-5.0, 0.0, {}, None),
        (3.0, 0.0, {"low_percent": 0.0, "at_least": 100.0}, 100.0),
    ],
)
def test_preferred_urv_for_normal(normal: float, lrv: float, limits: dict[str, float], expected: float | None) -> None:
    assert preferred_urv_for_normal(normal, lrv, **limits) == expected


@given(st.floats(1e-3, 1e6), st.floats(-1e3, 1e3))
def test_a_preferred_urv_puts_the_normal_value_where_it_belongs(rise: float, lrv: float) -> None:
    normal = lrv + rise
    urv = preferred_urv_for_normal(normal, lrv)
    if urv is not None:
        assert not beyond_limit(percent_of_span(normal, lrv, urv), 30.0 - 1e-4, 75.0 + 1e-4)


@pytest.mark.parametrize(
    ("lrv", "urv", "op_min", "normal", "op_max", "kind", "names"),
    [
        (0.0, 10.0, None, 0.6, 0.8, "flow", ["x 10"]),
        (0.0, 10.0, None, 60.0, 80.0, "flow", ["/ 10"]),
        (0.0, 10.0, None, 600.0, 800.0, "flow", ["/ 100"]),
        (0.0, 10.0, 3000.0, 6000.0, 8000.0, "flow", ["/ 1000"]),
        (0.0, 10000.0, 3.0, 6.0, 8.0, None, ["x 1000"]),
        (0.0, 10.0, 60.0, 85.0, 110.0, "pressure", ["/ 14.5 (psi written as bar)"]),
        (0.0, 100.0, 2.0, 4.0, 6.0, "pressure", ["x 10", "x 14.5 (bar written as psi)"]),
        (0.0, 10.0, None, 7.5, 10.1, "pressure", ["/ 1.02 (kgf/cm2 written as bar)"]),
        (0.0, 100.0, 68.0, 122.0, 200.0, "temperature", ["degF written as degC"]),
        (100.0, 300.0, 80.0, 100.0, 140.0, "temperature", ["degC written as degF"]),
        (10.0, 0.0, None, 60.0, 80.0, "flow", ["/ 10"]),
        (0.0, 10.0, None, 60.0, 110.0, "flow", []),
        (0.0, 10.0, -1.0, 60.0, 80.0, "flow", []),
        (0.0, 10.0, None, 30.0, 80.0, "flow", ["/ 10"]),
        (0.0, 10.0, None, 29.9, 80.0, "flow", []),
        (0.0, 10.0, None, 75.0, 80.0, "flow", ["/ 10"]),
        (0.0, 10.0, None, 75.1, 80.0, "flow", []),
        (0.0, 10.0, 60.0, 85.0, 110.0, "flow", []),
        (0.0, 100.0, 68.0, 122.0, 200.0, "pressure", []),
        (5.0, 5.0, None, 50.0, 60.0, "flow", []),
    ],
)
def test_unit_slips(
    lrv: float,
    urv: float,
    op_min: float | None,
    normal: float,
    op_max: float | None,
    kind: str | None,
    names: list[str],
) -> None:
    found = unit_slips(lrv, urv, normal=normal, op_min=op_min, op_max=op_max, unit_kind=kind)
    assert [slip.name for slip in found] == names


@pytest.mark.parametrize(
    ("slip", "written", "meant"),
    [
        (UnitSlip(name="degF written as degC", factor=1 / 1.8, offset=-32 / 1.8), 212.0, 100.0),
        (UnitSlip(name="/ 10", factor=0.1), 60.0, 6.0),
    ],
)
def test_a_slip_mended(slip: UnitSlip, written: float, meant: float) -> None:
    assert slip.mended(written) == pytest.approx(meant, rel=1e-12)
