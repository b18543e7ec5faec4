"""The names of thresholds: each that is asked for, found where it is asked for."""

from __future__ import annotations

import ast

import pytest

from validation.thresholds import _asked_by, threshold_names


def test_the_names_of_the_catalogue_that_rules_ask_for() -> None:
    names = set(threshold_names())
    assert {
        "TAG08 disagreement %", "RNG04 maximum turndown", "RNG08 low %", "RNG08 high %", "ELC high alarm mA",
        "ELC low failure mA", "ELC supply tolerance %", "ELC receiver ohm", "ELC hot degC", "ELC cold degC", "SET13 %",
    } <= names  # fmt: skip
    assert list(threshold_names()) == sorted(names)


@pytest.mark.parametrize(
    ("source", "names"),
    [
        ('plant.threshold("RNG08 low %", 30.0)', ["RNG08 low %"]),
        ('self.data.threshold("A b", X), plant.threshold("C d", 1)', ["A b", "C d"]),
        ("def threshold(self, name, default):\n    return self.data.threshold(name, default)", []),
        ("threshold(1)", []),
    ],
)
def test_how_they_are_found(source: str, names: list[str]) -> None:
    assert list(_asked_by("validation.thresholds", ast.parse(source))) == names


@pytest.mark.parametrize("source", ["plant.threshold(name, 1)", 'plant.threshold(f"{code} %", 1)', "plant.threshold()"])
def test_a_name_that_is_not_told_is_refused(source: str) -> None:
    with pytest.raises(ValueError, match=r"validation\.thresholds, line 1: a threshold is asked for by a name"):
        list(_asked_by("validation.thresholds", ast.parse(source)))
