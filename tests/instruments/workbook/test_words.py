from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.columns import CONTACTS, HIGH_LOW, LOCATIONS, MOUNTINGS, POSITIONS
from instruments.workbook.cell import number_cell
from instruments.workbook.column_unit import factor_to, read_plain_number
from instruments.workbook.words import Words, folded, is_ditto, is_plainly_a_value, not_live, placeholder, yes_or_no


@pytest.mark.parametrize(
    ("text", "wanted"),
    [
        (("  Öffnet\n Übers "), "oeffnet uebers"),
        ("À côté", "a cote"),
        ("Straße", "strasse"),
        ("m³/h", "m3/h"),
        ("–", "-"),
    ],
)
def test_folded(text: str, wanted: str) -> None:
    assert folded(text) == wanted


@pytest.mark.parametrize(
    "text",
    [
        "4-20 mA",
        "PT-1001",
        "Zone 2",
        "10",
        "0",
        "NC",
        "NO",
        "Seal pot 4",
        ("note the level 4"),
        "Held by V-1",
        "Vendor A",
        "x",
    ],
)
def test_values_hold_no_place(text: str) -> None:
    assert placeholder(text) is None


@pytest.mark.parametrize("text", ['"', "''", "”", "ditto", "Ditto", "-do-", "do.", "dto", "wie oben", '- " -', "〃"])
def test_ditto_marks(text: str) -> None:
    assert is_ditto(text)


@pytest.mark.parametrize("text", ["DO", '2"', "done", "", "-", "same line"])
def test_no_ditto_marks(text: str) -> None:
    assert not is_ditto(text)


@given(st.text(max_size=80))
def test_what_is_plainly_a_value_is_neither_placeholder_nor_ditto(text: str) -> None:
    text = text.strip()
    if is_plainly_a_value(text):
        assert placeholder(text) is None
        assert not is_ditto(text)


NOT_LIVE = [
    ("SPARE", "spare"),
    ("Spare AI", "spare"),
    ("spare channel 4", "spare"),
    ("DELETED", "deleted"),
    ("deleted, see PT-2", "deleted"),
    ("(VOID)", "void"),
    ("NOT USED", "void"),
    ("Feed pressure - DEMOLISHED", "demolished"),
    ("Feed (future)", "future"),
    ("Entfallen", "deleted"),
    ("Spare feed pump discharge", None),
    ("Feed pump (spare)", None),
    ("Future compressor suction", None),
    ("Void fraction", None),
    ("Removed solids flow", None),
]


@pytest.mark.parametrize(("text", "status"), NOT_LIVE)
def test_what_a_service_says_of_its_row(text: str, status: str | None) -> None:
    assert not_live(text) == status


@pytest.mark.parametrize(
    ("text", "status"),
    [
        (("Deleted in rev C"), "deleted"),
        ("Not used", "void"),
        ("IFC", None),
        ("For future use", "future"),
        ("Approved", None),
    ],
)
def test_what_a_status_says(text: str, status: str | None) -> None:
    assert not_live(text, status_column=True) == status


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("Y", True),
        ("●", True),
        ("Ja", True),
        ("1", True),
        ("Yes (see note)", True),
        ("N", False),
        ("0", False),
        ("Nein", False),
        ("none", False),
        ("maybe", None),
        ("", None),
        ("4-20", None),
    ],
)
def test_yes_or_no(text: str, said: bool | None) -> None:
    assert yes_or_no(text) is said


WORDS = [
    (POSITIONS, "FC", ("closed",)),
    (POSITIONS, "F.C.", ("closed",)),
    (POSITIONS, "Fail-closed", ("closed",)),
    (POSITIONS, "Fails open (spring)", ("open",)),
    (POSITIONS, "FL", ("in place",)),
    (POSITIONS, "Fail as is", ("in place",)),
    (POSITIONS, "FO / FC", ("open", "closed")),
    (POSITIONS, "see data sheet", ()),
    (CONTACTS, "N/O", ("NO",)),
    (CONTACTS, "NC", ("NC",)),
    (HIGH_LOW, "Upscale (>21 mA)", ("high",)),
    (LOCATIONS, "Local panel", ("panel",)),
    (LOCATIONS, "Field", ("field",)),
    (LOCATIONS, "Marshalling cabinet MC-1", ("cabinet",)),
    (MOUNTINGS, "in thermowell", ("thermowell",)),
    (MOUNTINGS, "level A", ()),
]


@pytest.mark.parametrize(("words", "text", "found"), WORDS)
def test_closed_words(words: dict[str, tuple[str, ...]], text: str, found: tuple[str, ...]) -> None:
    assert set(Words(words).find(text)) == set(found)


FACTORS = [
    ("nF", "pF", 1e-3),
    ("nF", "µF", 1e3),
    ("uH", "mH", 1e3),
    ("mH", "µH", 1e-3),
    ("mW", "W", 1e3),
    ("mA", "A", 1e3),
    ("V", "mV", 1e-3),
    ("V", ("VDC"), 1.0),
    ("ohm", "kΩ", 1e3),
    ("m", "ft", 0.3048),
    ("m", "km", 1e3),
    ("mm2", "cm2", 100.0),
    ("ohm/km", "ohm/1000ft", 1 / 0.3048),
    ("pF/m", "nF/km", 1.0),
    ("pF/m", "pF/ft", 1 / 0.3048),
    ("uH/m", "mH/km", 1.0),
    ("uH/ohm", "mH/ohm", 1e3),
    ("%", "pct", 1.0),
    ("degC", "K", 1.0),
]


@pytest.mark.parametrize(("own", "written", "factor"), FACTORS)
def test_factors_of_column_units(own: str, written: str, factor: float) -> None:
    found = factor_to(own, written)
    assert found is not None
    assert found[0] == pytest.approx(factor, rel=1e-12)


@pytest.mark.parametrize(
    ("own", ("written")), [("nF", "V"), ("m", "kg"), ("ohm", "MΩ"), ("V", "furlong"), ("degC", "V"), ("m", "")]
)
def test_no_factor_leads_to_another_quantity(own: str, written: str) -> None:
    assert factor_to(own, written) is None


@pytest.mark.parametrize(
    ("cell", "unit", "heading", "value"),
    [
        ("30 V", "V", None, 30.0),
        (30.0, "V", None, 30.0),
        ("104 °F", "degC", None, 40.0),
        ("1 500", "m", None, 1500.0),
        ("10:1", "", None, 10.0),
        (5.0, "", None, 5.0),
        ("0,5", "W", None, 0.5),
        ("200", "m", "ft", 60.96),
        ("200 m", "m", "ft", 200.0),
        ("<5", "nF", None, 5.0),
    ],
)
def test_plain_numbers(cell: object, unit: str, heading: str | None, value: float) -> None:
    assert read_plain_number(cell, unit, heading_unit=heading, decimal=".") == pytest.approx(value)


@pytest.mark.parametrize(("cell", "unit"), [("abc", "V"), ("30 kg", "V"), ("5 barg", ""), ("1-2", "V"), ("", "V")])
def test_what_is_no_plain_number_is_trouble(cell: object, unit: str) -> None:
    assert not isinstance(read_plain_number(cell, unit, heading_unit=None, decimal="."), float)


@pytest.mark.parametrize("text", ["negligible", "Negl.", "vernachlässigbar", "vernachlaessigbar klein", "négligeable"])
@pytest.mark.parametrize("field", ["ci_nf", "li_uh"])
def test_what_a_certificate_calls_negligible_counts_as_nothing(field: str, text: str) -> None:
    assert number_cell(field, "nF", stated=None, decimal=None)(text).value == 0.0


@pytest.mark.parametrize(
    ("field", "text"), [("co_iic_nf", "negligible"), ("ci_nf", "negligible or 3"), ("pi_mw", "negl.")]
)
def test_nothing_else_is_negligible(field: str, text: str) -> None:
    read = number_cell(field, "nF", stated=None, decimal=None)(text)
    assert read.value is None
    assert read.trouble is not None
