"""Extension and compensating cables: what they are called, which element each fits, what a wrong one does."""

import pytest

from instruments.extension_cable import (
    IEC_COLOURS,
    ExtensionCable,
    cable_error_k,
    extension_in_words,
    fits,
    fitting_cables,
    read_extension,
)

COPPER = ExtensionCable(letter=None)


@pytest.mark.parametrize(
    ("text", "letter", "code"),
    [
        ("KX", "K", "KX"),
        ("kx", "K", "KX"),
        ("KX-1P", "K", "KX"),
        ("KX 2x1.5 mm2", "K", "KX"),
        ("Type KX, IEC 60584-3", "K", "KX"),
        ("KPX/KNX", "K", "KX"),
        ("KCA", "K", "KCA"),
        ("KCB", "K", "KCB"),
        ("VX", "K", "KCB"),
        ("WX", "K", "KCA"),
        ("JX", "J", "JX"),
        ("TX", "T", "TX"),
        ("EX", "E", "EX"),
        ("NX", "N", "NX"),
        ("NC", "N", "NC"),
        ("RCA", "R", "RCA"),
        ("SCB", "S", "SCB"),
        ("SX", "S", "SCA"),
        ("RCA/SCA", "R", ""),
        ("KX / KCA", "K", ""),
        ("R/S", "R", ""),
        ("BC", "B", "BC"),
        ("BX", "B", "BC"),
        ("K", "K", ""),
        ("Type J", "J", ""),
        ("TC type N extension", "N", ""),
        ("NiCr-Ni", "K", ""),
        ("copper", None, ""),
        ("Cu", None, ""),
        ("Kupfer", None, ""),
    ],
)
def test_what_a_catalogue_calls_them(text: str, letter: str | None, code: str) -> None:
    assert read_extension(text) == ExtensionCable(letter=letter, code=code)


@pytest.mark.parametrize(
    "text", ["", "yes", "twisted", "KX / JX", "K and J", "Pt100", "1.5 mm2", "NKX1", "XK", "K" * 200]
)
def test_what_says_none_or_several(text: str) -> None:
    assert read_extension(text) is None


@pytest.mark.parametrize(
    ("text", "name"),
    [
        ("KX 2x1.5 mm2", "KX"),
        ("thermocouple cable type J", "for type J"),
        ("Ausgleichsleitung Typ K", "for type K"),
        ("extension EX", "EX"),
        # These speak of something else: protection, a transmitter, a contact.
        ("1x2x1.5 Ex i blue", None),
        ("Ex cable", None),
        ("TX cable 1 pair", None),
        ("NC contact cable", None),
        ("2x1.5 mm2 Cu", None),
    ],
)
def test_a_free_text_must_speak_of_one(text: str, name: str | None) -> None:
    found = extension_in_words(text)
    assert (found.name if found else None) == name


# Compatible pairs of IEC 60584-3, from memory.
PAIRS = {
    "K": {"KX", "KCA", "KCB"},
    "J": {"JX"},
    "T": {"TX"},
    "E": {"EX"},
    "N": {"NX", "NC"},
    "R": {"RCA", "RCB", "SCA", "SCB"},
    "S": {"RCA", "RCB", "SCA", "SCB"},
    "B": {"BC"},
}


@pytest.mark.parametrize("element", PAIRS)
def test_which_cable_fits_which_element(element: str) -> None:
    every = {code for codes in PAIRS.values() for code in codes}
    fitting = {code for code in every if fits(element, ExtensionCable(letter=code[0], code=code))}
    assert fitting == PAIRS[element]
    assert set(fitting_cables(element)) == PAIRS[element]


def test_copper_fits_none_but_type_b_which_is_left_to_the_head() -> None:
    assert {letter: fits(letter, COPPER) for letter in PAIRS} == {**dict.fromkeys("KJTENRS", False), "B": None}


def test_a_letter_alone_is_its_cable() -> None:
    assert [fits("K", ExtensionCable(letter=letter)) for letter in "KJ"] == [True, False]
    assert [fits(letter, ExtensionCable(letter="R")) for letter in "RSB"] == [True, True, False]
    assert [fits(letter, ExtensionCable(letter="C")) for letter in "CK"] == [True, False]


@pytest.mark.parametrize(
    ("element", "cable", "error_k"),
    [
        ("K", COPPER, -19.77),
        ("K", ExtensionCable(letter="K"), 0.0),
        ("K", ExtensionCable(letter="J"), 5.48),
        ("J", ExtensionCable(letter="K"), -4.11),
    ],
)
def test_the_error_of_a_wrong_cable(element: str, cable: ExtensionCable, error_k: float) -> None:
    found = cable_error_k(element, 300.0, head_c=45.0, cabinet_c=25.0, cable=cable)
    assert found == pytest.approx(error_k, abs=0.02)


def test_copper_is_right_where_head_and_cabinet_are_alike() -> None:
    assert cable_error_k("K", 300.0, head_c=25.0, cabinet_c=25.0, cable=COPPER) == pytest.approx(0.0, abs=1e-9)


def test_there_is_no_error_where_no_function_is_held() -> None:
    with pytest.raises(ValueError, match="no function"):
        cable_error_k("C", 300.0, head_c=45.0, cabinet_c=25.0, cable=COPPER)


def test_colours_of_iec_60584_3() -> None:
    """From memory; the sheath is blue in intrinsically safe circuits, whatever the type."""
    assert IEC_COLOURS == {
        "K": "green", "J": "black", "T": "brown", "E": "violet", "N": "pink", "R": "orange", "S": "orange", "B": "grey",
    }  # fmt: skip
