"""How numbers are written."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.number import CellTrouble, Number, decimal_convention, plain_signs, read_number, split_qualifier


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("5", 5.0), ("+5", 5.0), ("-5", -5.0), ("\u22125", -5.0), ("–5", -5.0), ("- 5", -5.0), (" 5 ", 5.0),
        ("0034", 34.0), ("5.", 5.0), (".5", 0.5), (",5", 0.5), ("-.5", -0.5), ("-0", 0.0),
        ("1,000.5", 1000.5), ("1.000,5", 1000.5), ("1,234,567", 1234567.0), ("1.234.567", 1234567.0),
        ("1,234,567.8", 1234567.8), ("1,00,000", 100000.0), ("1 000", 1000.0), ("1\u00a0000", 1000.0),
        ("1\u202f000,5", 1000.5), ("10 000 000", 1e7), ("1'000", 1000.0), ("1’000.5", 1000.5),
        ("0,5", 0.5), ("12,75", 12.75), ("0,500", 0.5), ("0.500", 0.5), ("1,5", 1.5), ("1,0000", 1.0),
        ("1e3", 1000.0), ("1E+03", 1000.0), ("1.5e-3", 0.0015), ("２５", 25.0),
        ("2,500", 2500.0), ("2.500", 2.5),
    ],
)  # fmt: skip
def test_number(text, value):
    assert read_number(text) == Number(value=value)


@pytest.mark.parametrize(
    ("text", "decimal", "value"),
    [("2,500", ".", 2500.0), ("2,500", ",", 2.5), ("2.500", ".", 2.5), ("2.500", ",", 2500.0), ("-2,500",
     ",", -2.5),
     ("2.500,5", ".", 2500.5), ("2,500.5", ",", 2500.5), ("12.5", ",", 12.5), ("12,5", ".", 12.5),
     ("12,5", None, 12.5), ("1,000,000", None, 1e6), ("0,125", None, 0.125), ("2 500", None, 2500.0)],
)  # fmt: skip
def test_the_mark_of_the_sheet_decides_only_what_has_two_readings(text, decimal, value):
    assert read_number(text, decimal=decimal) == Number(value=value)


@pytest.mark.parametrize(
    ("text", "readings"),
    [("2,500", ("2.5", "2500")), ("-2.500", ("-2.5", "-2500")), ("999,999", ("999.999", "999999"))],
)
def test_two_readings_are_trouble(text, readings):
    trouble = read_number(text, decimal=None)
    assert isinstance(trouble, CellTrouble)
    assert trouble.readings == readings


@pytest.mark.parametrize(
    ("text", "value", "qualifier"),
    [("<5", 5.0, "<"), ("< 5", 5.0, "<"), ("≤5", 5.0, "<"), ("<=5", 5.0, "<"), (">100", 100.0, ">"),
     ("≥ 7", 7.0, ">"),
     ("~20", 20.0, "~"), ("≈20", 20.0, "~"), ("ca. 5", 5.0, "~"), ("approx 5", 5.0, "~"), ("max 5", 5.0,
     "max"),
     ("Max. 5", 5.0, "max"), ("5 max", 5.0, "max"), ("5 (max.)", 5.0, "max"), ("5 MIN", 5.0, "min"),
     ("norm 5", 5.0, "norm"), ("max -5", -5.0, "max"), ("max. 2,500", 2500.0, "max")],
)  # fmt: skip
def test_qualifier(text, value, qualifier):
    assert read_number(text) == Number(value=value, qualifier=qualifier)


@pytest.mark.parametrize(
    ("text", "wanted"),
    [("5 mbar", ("5 mbar", None)), ("5 l/min", ("5 l/min", None)), ("max 5 l/min", ("5 l/min", "max")),
     ("5 barg max.", ("5 barg", "max")), ("maxi", ("maxi", None)), ("", ("", None)), ("5 normal", ("5",
     "norm"))],
)  # fmt: skip
def test_split_qualifier(text, wanted):
    assert split_qualifier(text) == wanted


@pytest.mark.parametrize(
    "text",
    ["", " ", "-", "+", ".", ",", "NaN", "nan", "inf", "-Infinity", "1e999", "1e-999", "1e9999", "9**9",
    "2*3", "=1+1",
     "1/2", "½", "(5)", "5-", "--5", "+-5", "1.2.3", "12.03.24", "1,2,3", "1,23,4", "1.000,5,5",
     "1.000.5", "1,000,5",
     "1_000", "0x10", "1e", "e3", "1e3.5", "12 10", "1 00", "100 00", "5 5", "٣", "५", "TBA", "5 bar",
     "5%", "1" * 41,
     "O", "l", "max", "max max 5", "5..5", "5,,5", "1'00", None, True, False, b"5", [], math.nan,
     math.inf, 10**400],
)  # fmt: skip
def test_no_number(text):
    assert isinstance(read_number(text), CellTrouble)


@pytest.mark.parametrize(
    ("text", "reading"), [("1O0", "100"), ("l0", "10"), ("-1O", "-10"), ("1o,5", "10,5"), ("I2", "12"), ("1О", "10")]
)
def test_a_damaged_number_shows_what_it_was(text, reading):
    trouble = read_number(text)
    assert isinstance(trouble, CellTrouble)
    assert (trouble.readings, "damaged" in trouble.reason) == ((reading,), True)


@pytest.mark.parametrize(("cell", "value"), [(5, 5.0), (5.5, 5.5), (-0.0, 0.0), (0, 0.0), (1e300, 1e300)])
def test_numbers_pass(cell, value):
    number = read_number(cell)
    assert number == Number(value=value)
    assert math.copysign(1.0, number.value) == math.copysign(1.0, value)


@pytest.mark.parametrize(
    ("texts", "wanted"),
    [
        ([], None),
        (["1,000", "2,500"], None),
        (["1.000"], None),
        (["12.5", "2,500"], "."),
        (["12,5", "2.500"], ","),
        (["1,000.5"], "."),
        (["1.000,5"], ","),
        (["1,000,000"], "."),
        (["1.000.000"], ","),
        (["0,250"], ","),
        (["0.250"], "."),
        (["0,5-1,5 bar"], ","),
        (["0 - 2.5 bar", 7.5, None], "."),
        (["<0,5", "max. 12,5"], ","),
        (["12.5", "12,5"], None),
        (["12.03.24", "1.2.3.4"], None),  # a date, an address
        (["PT-1,5", "ISO 5167.2", "Tank 1.5 level"], None),  # no cells that look like numbers
        ([7.5, 12, True], None),
        (["1,5" + "x" * 200], None),
    ],
)
def test_decimal_convention(texts, wanted):
    assert decimal_convention(texts) == wanted


@given(st.text(max_size=60), st.sampled_from([".", ",", None]))
def test_reading_never_raises(text, decimal):
    found = read_number(text, decimal=decimal)
    assert isinstance(found, CellTrouble) or math.isfinite(found.value)
    assert decimal_convention([text]) in (".", ",", None)


@given(st.text(alphabet="0123456789.,'-+eE <>~ max", max_size=24), st.sampled_from([".", ",", None]))
def test_texts_like_numbers_never_raise(text, decimal):
    found = read_number(text, decimal=decimal)
    assert isinstance(found, CellTrouble) or math.isfinite(found.value)


@given(st.floats(min_value=-1e12, max_value=1e12).map(lambda value: round(value, 3)))
def test_both_conventions_lead_back(value):
    english = f"{value:,.3f}"
    german = english.translate(str.maketrans(".,", ",."))
    assert read_number(english, decimal=".") == read_number(german, decimal=",") == Number(value=value + 0.0)
    assert read_number(english.replace(",", " "), decimal=".") == Number(value=value + 0.0)


def test_plain_signs():
    assert plain_signs("−1\u00a0–\u200b２") == "-1 -2"


def test_hostile_text_is_read_in_proportion_to_its_length():
    import time

    start = time.perf_counter()
    for text in ("1" * 10_000_000, "1,1" * 100_000, " " * 1_000_000, "1 000" * 100_000, "max" * 100_000):
        read_number(text)
        decimal_convention([text])
    assert time.perf_counter() - start < 3.0
