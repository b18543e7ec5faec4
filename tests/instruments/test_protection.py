"""How an instrument is protected, as far as its own row and type say."""

import pytest

from instruments.protection import says_intrinsically_safe


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("IS", True),
        ("Ex ia", True),
        ("EEx ib", True),
        ("intrinsically safe", True),
        ("eigensicher", True),
        ("XP", False),
        ("Ex d", False),
        ("flameproof", False),
        ("nonincendive", False),
        ("IS / XP", None),
        ("Ex d ia", None),
        ("", None),
        ("this is it", None),
        ("sealed", None),
    ],
)
def test_whether_words_say_intrinsic_safety(text: str, said: bool | None) -> None:
    assert says_intrinsically_safe(text) is said
