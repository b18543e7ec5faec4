"""The typeface's numbers, against another reader of the same files."""

from __future__ import annotations

import unicodedata
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st
from reportlab.pdfbase.ttfonts import TTFontFile

from loops.sheet import font
from loops.sheet.font import BOLD, PLACEHOLDER, REGULAR, UnreadableFont, bold, printable, read_face, regular


@pytest.mark.parametrize("path", [REGULAR, BOLD])
def test_widths(path: Path) -> None:
    face = read_face(path)
    other = TTFontFile(str(path))
    characters = {chr(code): width for code, width in other.charWidths.items() if code <= 0xFFFF and code != 0xA0}
    ours = {sign: width for sign, width in face.advances.items() if sign != "\xa0"}
    assert ours.keys() == characters.keys()
    assert max(abs(ours[sign] - characters[sign]) for sign in ours) < 0.01


def test_the_signs_of_the_trade_are_there() -> None:
    for sign in "Ωµμ°√≤≥±×→←²³½…–‰∆φρЖЩäöüßéñŁőžγ" + PLACEHOLDER:
        assert sign in regular().advances
        assert sign in bold().advances


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("plain", "plain"),
        ("Dru\u0308cke", "Drücke"),
        ("a\u00a0b\u2009c\td\ne\r\nf", "a b c d e  f"),
        ("soft\u00adhyphen", "softhyphen"),
        ("\u202eevil", f"{PLACEHOLDER}evil"),
        ("zero\u200bwidth", f"zero{PLACEHOLDER}width"),
        ("bell\x07", f"bell{PLACEHOLDER}"),
        ("\U0001f512 \U0001d6fa", f"{PLACEHOLDER} {PLACEHOLDER}"),
        ("\ud83d", PLACEHOLDER),
        ("\u0e01", PLACEHOLDER),
        ("250 Ω → 1…5 V", "250 Ω → 1…5 V"),
    ],
)
def test_printable(text: str, shown: str) -> None:
    assert printable(text) == shown


@given(st.text(st.characters(exclude_categories=())))
def test_what_is_printable_has_glyphs_and_can_be_measured(text: str) -> None:
    shown = printable(text)
    assert all(sign in regular().advances and sign in bold().advances for sign in shown)
    assert all(unicodedata.category(sign)[0] != "C" for sign in shown)
    assert regular().width_mm(shown, 10.0) >= 0.0
    assert printable(shown) == shown


@pytest.mark.parametrize(
    "data",
    [b"", b"OTTO" + b"\0" * 100, b"\0\1\0\0\0\1", b"\0\1\0\0\0\0" + b"\0" * 20, REGULAR.read_bytes()[:400]],
)
def test_no_font(tmp_path: Path, data: bytes) -> None:
    path = tmp_path / "font.ttf"
    path.write_bytes(data)
    with pytest.raises(UnreadableFont):
        read_face(path)


def test_the_licence_stands_beside_the_fonts() -> None:
    text = (font.FOLDER / "LICENSE.txt").read_text(encoding="utf-8")
    assert "Permission is hereby granted, free of charge" in text
