"""Certificate numbers as plates and lists write them, and records that conditions of use are met."""

import time

import pytest

from instruments.certificate import conditions_accepted, read_certificate, read_certificates
from instruments.marking_text import MAX_LENGTH


@pytest.mark.parametrize(
    ("text", "number", "suffix", "known"),
    [
        ("IECEx ABC 20.0001X", "IECEx ABC 20.0001", "X", True),
        ("ABC 20 ATEX 0001 U", "ABC 20 ATEX 0001", "U", True),
        ("ABC20ATEX0001X", "ABC 20 ATEX 0001", "X", True),
        ("ABC 20 ATEX 0001", "ABC 20 ATEX 0001", "", True),
        ("ABC 21 UKEX 0002X", "ABC 21 UKEX 0002", "X", True),
        ("ABC 03 ATEX E 100 X", "ABC 03 ATEX E 100", "X", True),
        ("IECEx ABC 20.0001X Issue 3", "IECEx ABC 20.0001", "X", True),
        ("E-20417", "E-20417", "", False),
        ("ABC-4471 X", "ABC-4471", "X", False),
    ],
)
def test_numbers(text: str, number: str, suffix: str, known: bool) -> None:
    read = read_certificate(text)
    assert (read.number, read.suffix, read.form_known) == (number, suffix, known)


def test_several_in_a_cell() -> None:
    assert [str(each) for each in read_certificates("ABC 20 ATEX 0001X / IECEx ABC 20.0002U\nABC 21 UKEX 0003")] == [
        "ABC 20 ATEX 0001X",
        "IECEx ABC 20.0002U",
        "ABC 21 UKEX 0003",
    ]


@pytest.mark.parametrize(
    "text",
    [
        "N. Hollin, 3 May 2026",
        "NH 2026-05-03",
        "03.05.2026 N. Hollin",
        "N. Hollin 3.5.26",
        "NH 05/2026",
        "May 3, 2026 NH",
        "N. Hollin, Mai 2026",
        "accepted by N. Hollin on 3 May 2026",
        "conditions 1, 2 met - N. Hollin 3.5.2026",
        "NH 3-May-26",
    ],
)
def test_a_name_and_a_day_are_a_record(text: str) -> None:
    assert conditions_accepted(text)


@pytest.mark.parametrize(
    "text",
    [
        None,
        "",
        " ",
        "X",
        "yes",
        "accepted",
        "N. Hollin",
        "2026-05-03",
        "2026-05-03 00:00:00",
        "yes 3 May 2026",
        "accepted 2026-05-03",
        "see clause 17 of the certificate",
        "Clean with a damp cloth only, 17",
        "Ambient -20 to +60 degC",
        "max 20 mA, part 7 rev 2026",
        "not accepted, NH 2026-05-03",
        "open, NH 2026-05-03",
        "NH to check, due 2026-05-03",
        "rejected NH 3.5.2026",
    ],
)
def test_anything_less_is_none(text: str | None) -> None:
    assert not conditions_accepted(text)


@pytest.mark.parametrize("piece", ["3 May ", "1.1.", "a", "12-", "not "])
def test_long_hostile_text_is_read_quickly(piece: str) -> None:
    start = time.perf_counter()
    conditions_accepted(piece * (MAX_LENGTH // len(piece)))
    assert not conditions_accepted("NH 2026-05-03 " * 10_000)
    assert time.perf_counter() - start < 1.0
