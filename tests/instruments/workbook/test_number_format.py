"""How numbers look: kinds of format codes, and texts."""

import datetime

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.workbook.number_format import BUILT_IN, as_text, format_kind


@pytest.mark.parametrize(
    ("code", "kind"),
    [
        ("General", None),
        ("GENERAL", None),
        ("0", None),
        ("0.00", None),
        ("#,##0", None),
        ("#,##0.00_);[Red](#,##0.00)", None),
        ("@", None),
        ("0.00E+00", "scientific"),
        ("# ?/?", None),
        ("[Red]0;[Magenta]-0", None),
        ("[>100]0;0.0", None),
        ("_-* #,##0.00_-", None),
        ("*m0", None),
        ("0_d", None),
        ("00", "padded"),
        ("0000", "padded"),
        ("0000;-0000", "padded"),
        ("00-000", "padded"),
        ("[Blue]0000", "padded"),
        ('"PT-"0000', "padded"),
        ("0;0000", None),
        ("0%", "percent"),
        ("0.00%", "percent"),
        ("0000%", "percent"),
        (r"0\%", None),
        ('0"%"', None),
        ("dd/mm/yyyy", "date"),
        ("[$-409]d-mmm;@", "date"),
        ("h:mm AM/PM", "date"),
        ("[h]:mm", "date"),
        ("[mm]:ss", "date"),
        ("[SS]", "date"),
        ("yyyy-mm-dd", "date"),
        ("0.0 m", "date"),
        ('0.0" m"', "worded"),
        (r"0\ \m", "worded"),
        ('0" barg"', "worded"),
        ('General" mA"', "worded"),
        ('"day "0', "worded"),
        ('0" -"', None),
        ('"', None),
        ("", None),
    ],
)
def test_kind_of_a_format_code(code: str, kind: str | None) -> None:
    assert format_kind(code) == kind


def test_every_built_in_code_shows_numbers_otherwise() -> None:
    assert {number: format_kind(code) for number, code in BUILT_IN.items()} == dict.fromkeys(
        (*range(14, 23), *range(27, 37), 45, 46, 47, *range(50, 59)), "date"
    ) | {9: "percent", 10: "percent", 11: "scientific", 48: "scientific"}


@pytest.mark.parametrize(
    ("cell", "code", "text"),
    [
        (None, None, ""),
        ("", None, ""),
        (" as it is ", "0000", " as it is "),
        (True, None, "TRUE"),
        (False, "0000", "FALSE"),
        (1001.0, None, "1001"),
        (-0.5, None, "-0.5"),
        (0.1 + 0.2, None, "0.3"),
        (123456789012345.0, None, "123456789012345"),
        (9007199254740991.0, None, "9007199254740991"),
        (1e300, None, "1e+300"),
        (34.0, "0", "34"),
        (34.0, "0000", "0034"),
        (0.0, "000", "000"),
        (34567.0, "0000", "34567"),
        (-34.0, "0000", "-0034"),
        (34.5, "0000", "0034.5"),
        (34.25, "0000.0", "0034.25"),
        (34.0, "0000.00", "0034"),
        (34.0, '"PT-"0000', "PT-0034"),
        (34.0, "[Red]0000;-0000", "0034"),
        (12345.0, "00-000", "12-345"),
        (1234567.0, "00-000", "1234-567"),
        (7.0, "00-000", "00-007"),
        (7.0, "##-000", "-007"),
        (1001.0, r"00\-\P\T\-00", "10-PT-01"),
        (12345.0, "00,000", "12345"),
        (16.0, '0" barg"', "16 barg"),
        (16.0, '0.0" barg"', "16 barg"),
        (0.25, '0.0" barg"', "0.25 barg"),
        (-1.0, '0" barg"', "-1 barg"),
        (16.5, 'General" mA"', "16.5 mA"),
        (16.0, "[$EUR-407]000", "EUR016"),
        (0.25, "0%", "25%"),
        (0.255, "0%", "25.5%"),
        (-0.07, "0.00%", "-7%"),
        (1200.0, "000E+00", "1200"),
        (0.5, "00/00", "0.5"),
        (1e300, "0000", "1e+300"),
        (datetime.date(2024, 3, 12), "d-mmm", "2024-03-12"),
        (datetime.datetime.fromisoformat("2024-03-12 10:05"), None, "2024-03-12 10:05"),
        (datetime.datetime.fromisoformat("2024-03-12 10:05:07"), None, "2024-03-12 10:05:07"),
        (datetime.time(10, 5), None, "10:05"),
        (datetime.time(10, 5, 7), None, "10:05:07"),
    ],
)
def test_text_of_a_cell(cell: object, code: str | None, text: str) -> None:
    assert as_text(cell, code) == text  # type: ignore[arg-type] # the table holds every kind


@given(st.integers(min_value=-(10**12), max_value=10**12), st.integers(min_value=2, max_value=9))
def test_padding_never_loses_a_digit(number: int, width: int) -> None:
    shown = as_text(float(number), "0" * width)
    assert int(shown) == number
    assert len(shown.lstrip("-")) == max(width, len(str(abs(number))))


@given(st.floats(allow_nan=False, allow_infinity=False), st.text(max_size=40))
def test_no_format_code_stops_a_text(number: float, code: str) -> None:
    assert isinstance(as_text(number, code), str)
