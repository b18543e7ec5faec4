"""What the sheets say of the audit: each note on the sheets of what it is about, and on no other."""

from __future__ import annotations

from typing import Any

import pytest

from loops.plant import Plant
from validation.audit import Audit, Coverage
from validation.example import example_plant
from validation.finding import Finding, Outcome, Severity
from validation.report.sheet_notes import notes_by_loop

ROWS: list[dict[str, Any]] = [
    {"tag": "PT-1A", "I/O type": "AI", "loop": "P-1"},
    {"tag": "PT-1B", "I/O type": "AI", "loop": "P-1"},
    {"tag": "PT-2", "I/O type": "AI"},
    {"tag": "PG-3"},
]


def plant() -> Plant:
    return example_plant(ROWS, plant={"name": "Marrowbeck Works"})


def finding(subject: str, **changes: Any) -> Finding:
    values: dict[str, Any] = {
        "rule": "RNG01",
        "severity": Severity.FAULT,
        "outcome": Outcome.FINDING,
        "subject": subject,
        "part": "",
        "fields": (),
        "message": "LRV equals URV",
        "values": {},
        "found": "",
        "wanted": "",
        "off_by": "",
        "working": "",
        "assumed": (),
        "fixes": (),
        "cells": (),
    }
    return Finding(**{**values, **changes})


@pytest.mark.parametrize(
    ("subject", "loops"),
    [
        ("PT-2", ["P-2"]),
        ("P-2", ["P-2"]),
        ("P-1 PT-1A", ["P-1"]),
        ("P-1", ["P-1"]),
        ("PT-1A, PT-1B", ["P-1"]),
        ("PT-1B, PT-2", ["P-1", "P-2"]),
        ("PT-2, PT-99", ["P-2"]),
        ("PG-3", []),
        ("list.xlsx", []),
        ("A1", []),
    ],
)
def test_where_a_finding_stands(subject: str, loops: list[str]) -> None:
    notes = notes_by_loop(Audit(plant=plant(), findings=[finding(subject)]))
    assert sorted(notes) == ["P-1", "P-2"]
    assert [loop for loop, said in notes.items() if said] == loops
    assert all(said == [f"FAULT RNG01 {subject}: LRV equals URV"] for said in notes.values() if said)


@pytest.mark.parametrize(
    ("changes", "note"),
    [
        ({"severity": Severity.DANGER}, "DANGER RNG01 PT-2: LRV equals URV"),
        ({"outcome": Outcome.REVIEW}, "review RNG01 PT-2: LRV equals URV"),
        ({"part": "HH"}, "FAULT RNG01 PT-2 (HH): LRV equals URV"),
        ({"part": "LRV"}, "FAULT RNG01 PT-2: LRV equals URV"),
        ({"working": "1 - 1 = 0"}, "FAULT RNG01 PT-2: LRV equals URV [1 - 1 = 0]"),
        ({"working": "LRV equals URV"}, "FAULT RNG01 PT-2: LRV equals URV"),
    ],
)
def test_the_words_of_a_note(changes: dict[str, Any], note: str) -> None:
    notes = notes_by_loop(Audit(plant=plant(), findings=[finding("PT-2", **changes)]))
    assert notes["P-2"] == [note]


def test_notes_keep_the_order_of_the_findings() -> None:
    found = [finding("PT-2", rule=code) for code in ("ELC01", "RNG02", "TAG04")]
    notes = notes_by_loop(Audit(plant=plant(), findings=found))["P-2"]
    assert [note.split()[1] for note in notes] == ["ELC01", "RNG02", "TAG04"]


def test_rows_that_share_a_tag_are_meant_together_and_one_by_one() -> None:
    rows = [
        {"tag": "PT-1", "service": "one", "I/O type": "AI", "loop": "P-1", "LRV": "0", "URV": "1"},
        {"tag": "PT-1", "service": "two", "I/O type": "AI", "loop": "P-2", "LRV": "0", "URV": "2"},
    ]
    both = example_plant(rows)
    assert [each.name for each in both.instruments] == ["PT-1", "PT-1 (2)"]
    of_group = notes_by_loop(Audit(plant=both, findings=[finding("PT-1", rule="TAG02")]))
    assert all(of_group.values())
    second = notes_by_loop(Audit(plant=both, findings=[finding("PT-1 (2)")]))
    assert [bool(said) for said in second.values()].count(True) == 1


def test_what_could_not_be_checked_comes_last() -> None:
    lift = Coverage(rule="ELC01", unchecked={("lift-off V", "cable length"): ["P-2", "P-1 PT-1A"]})
    limits = Coverage(rule="RNG02", unchecked={("LRL", "URL"): ["PT-2"], ("lift-off V",): ["list.xlsx"]})
    result = Audit(plant=plant(), findings=[finding("PT-2")], coverage={"ELC01": lift, "RNG02": limits})
    assert notes_by_loop(result) == {
        "P-1": ["not checked: 1 check, for want of lift-off V, cable length"],
        "P-2": [
            "FAULT RNG01 PT-2: LRV equals URV",
            "not checked: 2 checks, for want of lift-off V, cable length, LRL, URL",
        ],
    }
