"""Nothing that a file holds acts upon a terminal."""

import pytest

from instruments.console import for_console


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("PT-101 feed 0 – 10 °C, Größe, 圧力, é", "PT-101 feed 0 – 10 °C, Größe, 圧力, é"),
        ("", ""),
        ("\x1b[2J\x1b]0;x\x07", "<U+001B>[2J<U+001B>]0;x<U+0007>"),
        ("\x9b31m", "<U+009B>31m"),
        ("a\rb\nc\td\x08", "a<U+000D>b<U+000A>c<U+0009>d<U+0008>"),
        ("\u202ecod.exe\u2066", "<U+202E>cod.exe<U+2066>"),
        ("\u200b\ufeff\u2028\u061c", "<U+200B><U+FEFF><U+2028><U+061C>"),
        ("\udcff\ud800", "<U+DCFF><U+D800>"),
        ("\U000e0041\uffff", "<U+E0041><U+FFFF>"),
    ],
)
def test_what_acts_is_shown(text: str, shown: str) -> None:
    assert for_console(text) == shown
