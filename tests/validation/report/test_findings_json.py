"""findings.json: all of an audit as data, in its documented shape, the same for the same lists."""

import json
import subprocess
import sys
from pathlib import Path
from typing import Any

import pytest

from instruments.quantity import read_quantity
from tests.validation.report.small_audit import FINDINGS, cell, coverage, finding, small_audit
from validation.finding import Fix, Outcome
from validation.report.caution import CAUTION
from validation.report.findings_json import as_data, as_text, counts

ROOT = Path(__file__).parents[3]
NAMED = {"digests": {"exceptions.xlsx": "ab12"}, "version": "0.1", "inputs": {"in/index.xlsx": "cd34"}}


def test_counts() -> None:
    assert counts(small_audit()) == {
        "tags": 4, "instruments": 4, "live": 3, "rows": 6, "rows_merged": 0, "loops": 3, "circuits": 3, "files": 2,
        "sheets": 3, "cells_filled": 53, "cells_read": 46, "cells_unread": 1, "cells_left_out": 6,
        "danger": 1, "fault": 1, "gap": 1,
        "review": 1, "unchecked": 3, "broken": 1,
    }  # fmt: skip


def test_everything_but_the_findings() -> None:
    data = as_data(small_audit(), **NAMED)
    assert {name: value for name, value in data.items() if name not in ("counts", "findings")} == {
        "audit": {
            "ferrule": "0.1",
            "plant": "Marrowbeck Works",
            "files": [{"file": "in/index.xlsx", "sha256": "cd34"}],
            "rules": [
                {"rule": "HAZ05", "outcomes_add_up_to": 4},
                {"rule": "RNG02", "outcomes_add_up_to": 4},
                {"rule": "TAG04", "outcomes_add_up_to": 4},
            ],
            "broken": [
                {"rule": "RNG05", "subject": "PT-102", "error": "ZeroDivisionError: float division by zero"}
            ],
            "caution": CAUTION,
        },
        "coverage": [
            {
                "rule": "HAZ05", "clear": 0, "finding": 1, "review": 0, "unchecked": 1, "not_applicable": 2,
                "because": {"area temperature class": 1},
            },
            {
                "rule": "RNG02", "clear": 0, "finding": 1, "review": 1, "unchecked": 2, "not_applicable": 0,
                "because": {"LRV or range": 1, "URL": 2},
            },
            {
                "rule": "TAG04", "clear": 2, "finding": 1, "review": 0, "unchecked": 0, "not_applicable": 1,
                "because": {},
            },
        ],
        "unchecked": [
            {"rule": "HAZ05", "because": ["area temperature class"], "subjects": ["PT-103"]},
            {"rule": "RNG02", "because": ["LRV or range", "URL"], "subjects": ["PT-104"]},
            {"rule": "RNG02", "because": ["URL"], "subjects": ["PT-102"]},
        ],
        "assumptions": ["most tags fit isa-hyphen", "receiver 250 ohm"],
        "outputs": {"exceptions.xlsx": "ab12"},
    }  # fmt: skip
    assert list(data) == [
        "audit", "counts", "coverage", "findings", "unchecked", "assumptions", "outputs",
    ]  # fmt: skip


def test_a_finding() -> None:
    fixes = (
        Fix(text="range 0 to 16 bar", change={"URV": "16 bar"}, makes=("RNG08",)),
        Fix(text="another limit", change={"URL": "20 bar"}, subject="T1", sheet="Device types"),
    )
    (data,) = as_data(small_audit([finding(outcome=Outcome.REVIEW, assumed=("24 V",), fixes=fixes)]), **NAMED)[
        "findings"
    ]
    assert data == {
        "rule": "RNG02",
        "severity": "fault",
        "outcome": "review",
        "subject": "PT-101",
        "part": "URV",
        "fields": ["URV", "URL"],
        "message": "URV 20 bar is above 16 bar",
        "found": "20 bar",
        "wanted": "at most 16 bar",
        "off_by": "4 bar",
        "values": {"end": "URV", "value": "20 bar", "limit": "16 bar"},
        "working": "20 bar - 16 bar = 4 bar",
        "assumed": ["24 V"],
        "fixes": [
            {
                "text": "range 0 to 16 bar", "change": {"URV": "16 bar"}, "subject": "PT-101",
                "sheet": "Instruments", "makes": ["RNG08"],
            },
            {
                "text": "another limit", "change": {"URL": "20 bar"}, "subject": "T1", "sheet": "Device types",
                "makes": [],
            },
        ],
        "cells": [
            {"file": "in/index.xlsx", "sheet": "Index", "cell": "V7"},
            {"file": "in/index.xlsx", "sheet": "Types", "cell": "H3"},
        ],
    }  # fmt: skip


@pytest.mark.parametrize(
    ("value", "plain"),
    [
        (None, None),
        (True, True),
        (3, 3),
        (2.5, 2.5),
        ("=1+1", "=1+1"),
        (float("inf"), "inf"),
        (float("nan"), "nan"),
        (read_quantity("4 barg"), "4 barg"),
        (("a", 1), ["a", 1]),
        (frozenset({"b", "a", "c"}), ["a", "b", "c"]),
        (Outcome.REVIEW, "review"),
        (cell(3, 2).address, "C3"),
    ],
)
def test_values_become_plain(value: Any, plain: Any) -> None:
    text = as_text(small_audit([finding(values={"value": value})]), **NAMED)
    assert json.loads(text)["findings"][0]["values"] == {"value": plain}


@pytest.mark.parametrize("text", ["Ω °C µ", "\ud800 half", "\x00\x1f", "\u2028", "😀", '"\\', "</script>"])
def test_any_text_can_be_written_and_read_back(text: str) -> None:
    written = as_text(
        small_audit([finding(subject=text, message=text, values={text: text})]),
        digests={}, version="0.1", inputs={text: ""},
    )  # fmt: skip
    (read,) = json.loads(written.encode("utf-8"))["findings"]
    assert (read["subject"], read["message"], read["values"]) == (text, text, {text: text})


def test_letters_of_any_language_stay_readable() -> None:
    assert '"subject": "ÖL-101 Ω"' in as_text(small_audit([finding(subject="ÖL-101 Ω")]), **NAMED)


def test_subjects_stand_in_natural_order_and_blanks_in_theirs() -> None:
    result = small_audit([])
    result.coverage = {
        "RNG02": coverage("RNG02", 0, 0, 0, 3, 0, unchecked={("b",): ["PT-10", "PT-9"], ("a",): ["PT-1"]})
    }
    data = as_data(result, **NAMED)
    assert data["unchecked"] == [
        {"rule": "RNG02", "because": ["a"], "subjects": ["PT-1"]},
        {"rule": "RNG02", "because": ["b"], "subjects": ["PT-9", "PT-10"]},
    ]


def test_findings_keep_the_order_of_the_audit() -> None:
    data = as_data(small_audit(), **NAMED)
    assert [each["rule"] for each in data["findings"]] == [each.rule for each in FINDINGS]


def test_the_same_audit_gives_the_same_text_whatever_the_order_of_sets() -> None:
    script = (
        "from tests.validation.report.small_audit import finding, small_audit; "
        "from validation.report.findings_json import as_text; import hashlib; "
        "result = small_audit([finding(values={'units': frozenset(f'u{n}' for n in range(50))})]); "
        "text = as_text(result, digests={}, version='0.1', inputs={}); "
        "print(hashlib.sha256(text.encode()).hexdigest())"
    )
    digests = {
        subprocess.run(
            [sys.executable, "-c", script], cwd=ROOT, capture_output=True, text=True, check=True,
            env={"PYTHONHASHSEED": seed, "PATH": ""},
        ).stdout
        for seed in ("1", "2")
    }  # fmt: skip
    assert len(digests) == 1
