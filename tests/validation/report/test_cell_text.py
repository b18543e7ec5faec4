"""Text as it may be typed into a cell, and the room it takes."""

import re

import pytest
from hypothesis import example, given
from hypothesis import strategies as st
from reportlab.lib.utils import simpleSplit
from reportlab.pdfbase.pdfmetrics import stringWidth

from validation.report.cell_text import CUT, MOST_CHARACTERS, MOST_LINES, cell_text, em_of, lines_of


@pytest.mark.parametrize(
    ("written", "typed"),
    [
        ("PT-101", "PT-101"),
        ("Ω µ × – °C \N{ZERO WIDTH JOINER} 漢 😀", "Ω µ × – °C \N{ZERO WIDTH JOINER} 漢 😀"),
        ("=1+1", "=1+1"),
        ("a\nb", "a\nb"),
        ("a\r\nb\rc", "a\nb\nc"),
        ("a\tb", "a b"),
        ("\x00\x1b\x7f\x85", "<U+0000><U+001B><U+007F><U+0085>"),
        ("PT\u200b-1\u00ad01\u202e", "PT<U+200B>-1<U+00AD>01<U+202E>"),
        ("\ufffe\uffff\ud800\udfff\ufeff", "<U+FFFE><U+FFFF><U+D800><U+DFFF><U+FEFF>"),
        ("\u2028", "<U+2028>"),
        ("_x0041_ _x005F_", "_x005F_x0041_ _x005F_x005F_"),
        ("_x00_ _xQQQQ_ _x0041", "_x00_ _xQQQQ_ _x0041"),
        ("", ""),
    ],
)
def test_typed(written: str, typed: str) -> None:
    assert cell_text(written) == typed


@pytest.mark.parametrize(
    ("written", "typed"),
    [
        ("x" * MOST_CHARACTERS, "x" * MOST_CHARACTERS),
        ("x" * (MOST_CHARACTERS + 1), "x" * (MOST_CHARACTERS - len(CUT)) + CUT),
        ("😀" * 16_383, "😀" * 16_383),
        ("😀" * 16_384, "😀" * ((MOST_CHARACTERS - len(CUT)) // 2) + CUT),
        # What is cut is no half of an escape: it would show as one.
        ("_x0041_" * 5000, "_x005F_x0041_" * 2519 + "_x005F_x004" + CUT),
        ("x" * 7 + "_x0041_" * 5000, "x" * 7 + "_x005F_x0041_" * 2519 + CUT),
        ("_x0041_" * 2520 + "____", "_x005F_x0041_" * 2520 + "____"),
        ("x\n" * (MOST_LINES - 1) + "y", "x\n" * (MOST_LINES - 1) + "y"),
        ("x\n" * (MOST_LINES + 2) + "y", "x\n" * MOST_LINES + "x / x / y"),
    ],
)
def test_limits_of_a_cell(written: str, typed: str) -> None:
    assert cell_text(written) == typed


ALLOWED = re.compile("[\n\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]*")


@given(st.text(st.characters(categories=None), max_size=60))
@example("\ud83d")
@example("_x_x0041_x0041_")
def test_any_text_can_be_typed_and_nothing_of_it_is_decoded_as_something_else(text: str) -> None:
    typed = cell_text(text)
    assert ALLOWED.fullmatch(typed)
    decoded = re.sub("_x([0-9A-Fa-f]{4})_", lambda escape: chr(int(escape[1], 16)), typed)
    shown = re.sub(
        "[\x00-\x08\x0e-\x1f\x7f-\x9f\ud800-\udfff\ufffe\uffff\x0b\x0c]",
        lambda odd: f"<U+{ord(odd[0]):04X}>",
        re.sub("\r\n?", "\n", text).replace("\t", " "),
    )
    shown = re.sub(
        "[\u00ad\u200b\u200e\u200f\u2028-\u202e\u2060\u2066-\u2069\ufeff]",
        lambda odd: f"<U+{ord(odd[0]):04X}>",
        shown,
    )
    assert decoded == shown


@pytest.mark.parametrize("character", [chr(code) for code in range(32, 127)])
def test_widths_are_those_of_the_font(character: str) -> None:
    assert em_of(character) == pytest.approx(stringWidth(character, "Helvetica", 1))


@pytest.mark.parametrize("words", ["severity", "danger", "cells that all of them name", "not applicable", "FAULT"])
def test_bold_is_not_underrated(words: str) -> None:
    assert em_of(words, bold=True) >= stringWidth(words, "Helvetica-Bold", 1)


TEXTS = st.lists(st.text("abcdefgh WmiIl.,0123456789()/=+%-\n", min_size=0, max_size=30), min_size=1, max_size=8).map(
    " ".join
)


@given(TEXTS, st.floats(3.0, 60.0))
def test_lines_are_never_fewer_than_another_typesetter_makes(text: str, room_em: float) -> None:
    if any(stringWidth(word, "Helvetica", 1) > room_em for word in text.split()):
        return  # where a word is broken is told below
    assert lines_of(text, room_em) >= len(simpleSplit(text, "Helvetica", 1, room_em))


@pytest.mark.parametrize(
    ("text", "room_em", "lines"),
    [
        ("", 5, 1),
        ("one", 5, 1),
        ("0" * 100, 55.6, 1),
        ("0" * 101, 55.6, 2),
        ("0" * 300, 55.6, 3),
        ("a " + "0" * 101, 55.6, 3),
        ("a\n\nb", 5, 3),
        ("漢" * 10, 5, 2),
        ("漢" * 11, 5, 3),
        ("x", 0, 1),
    ],
)
def test_lines(text: str, room_em: float, lines: int) -> None:
    assert lines_of(text, room_em) == lines
