"""Fixes applied: the lists as they would be, what would then be found, and what a fix says of itself beforehand."""

from dataclasses import replace
from typing import Any

import pytest

from instruments.written import CannotStand
from tests.marrowbeck import DEMO, audit_of
from validation.audit import Audit, audit
from validation.example import example_plant
from validation.finding import Finding, Fix, Outcome
from validation.mend import found_after, mended, with_consequences

Row = dict[str, Any]


def finding_of(code: str, rows: list[Row], **sheets: Any) -> tuple[Audit, Finding]:
    result = audit(example_plant(rows, **sheets), raise_errors=True)
    (finding,) = [each for each in result.findings if each.rule == code]
    return result, finding


def record_of(result: Audit, finding: Finding, fix: Fix) -> Any:
    """Return the rows of the index once a fix is applied."""
    return mended(result.plant, finding, fix).records["Instruments"]


# ------------------------------------------------------------------------------------------------------ one change

HIGH = [{"tag": "LT-1", "LRV": "0 m", "URV": "6 m", "HH": "6.5 m", "signal": "4-20 mA"}, {"tag": "LT-2", "HH": "1 m"}]


def test_a_change_is_made_on_the_row_it_means() -> None:
    result, finding = finding_of("SET07", HIGH)
    (fix,) = finding.fixes
    rows = record_of(result, finding, fix)
    assert [str(row.setting_hh) for row in rows] == ["6 m", "1 m"]
    # The list itself stays as it is.
    assert [str(row.setting_hh) for row in result.plant.lists.records["Instruments"]] == ["6.5 m", "1 m"]
    assert "SET07" not in {each.rule for each in found_after(result.plant, finding, fix)}


def test_a_change_may_be_on_another_row_and_sheet() -> None:
    loops = [{"number": "P-1", "circuit or tag": "PT-1", "supply V max": 36, "range resistor": 250}]
    types = [{"code": "T1", "kind": "transmitter", "maximum V": 32}]
    rows = [{"tag": "PT-1", "device type": "T1", "signal": "4-20 mA", "wires": 2, "I/O type": "AI"}]
    result, finding = finding_of("ELC02", rows, loops=loops, types=types)
    changed = mended(result.plant, finding, finding.fixes[0])
    assert [row.supply_max_v for row in changed.records["Loops"]] == [32.9]
    assert "ELC02" not in {each.rule for each in found_after(result.plant, finding, finding.fixes[0])}


def test_all_rows_of_an_instrument_are_changed() -> None:
    rows = [
        {"tag": "FIT-1", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "A1", "H": "9 m3/h", "HH": "8 m3/h"},
        {"tag": "FIT-1", "signal": "pulse", "I/O type": "DI", "I/O address": "D1", "H": "9 m3/h", "HH": "8 m3/h"},
    ]
    result, finding = finding_of("SET01", rows)
    changed = record_of(result, finding, finding.fixes[0])
    assert [(str(row.setting_h), str(row.setting_hh)) for row in changed] == [("8 m³/h", "9 m³/h")] * 2


def test_rows_that_share_a_tag_are_told_apart() -> None:
    rows = [
        {"tag": "LT-1", "service": "Tank 1", "LRV": "0 m", "URV": "6 m", "HH": "6.5 m", "signal": "4-20 mA"},
        {"tag": "LT-1", "service": "Tank 2", "LRV": "0 m", "URV": "9 m", "HH": "8 m", "signal": "4-20 mA"},
    ]
    result, finding = finding_of("SET07", rows)
    assert [str(row.setting_hh) for row in record_of(result, finding, finding.fixes[0])] == ["6 m", "8 m"]


def test_an_io_list_alone_is_the_index() -> None:
    io_list = [{"tag": "LT-1", "signal": "4-20 mA", "I/O type": "DI", "I/O address": "D1"}]
    result = audit(example_plant([], io_list=io_list))
    (finding,) = [each for each in result.findings if each.rule == "ELC16"]
    changed = mended(result.plant, finding, finding.fixes[0])
    assert [row.io_type for rows in changed.records.values() for row in rows] == ["AI"]


@pytest.mark.parametrize(
    ("change", "expected"),
    [
        ({"URV": "10 barg"}, "10 barg"),
        ({"urv": "10 barg"}, "10 barg"),
        ({"URV": ""}, None),
    ],
)
def test_a_field_takes_its_new_value_or_becomes_blank(change: dict[str, str], expected: str | None) -> None:
    result, finding = finding_of("SET07", HIGH)
    rows = record_of(result, finding, Fix(text="x", change=change))
    assert (None if rows[0].urv is None else str(rows[0].urv)) == expected


def test_a_limit_of_the_row_is_changed_as_such() -> None:
    result, finding = finding_of("SET07", HIGH)
    rows = record_of(result, finding, Fix(text="x", change={"URL": "12 m", "kind": "switch"}))
    assert str(rows[0].own.url) == "12 m"
    assert rows[0].kind_written == "switch"


@pytest.mark.parametrize(
    ("fix", "message"),
    [
        (Fix(text="x", change={"URV": "wide"}), "URV cannot be 'wide'"),
        (Fix(text="x", change={"colour": "red"}), "Instruments has no column colour"),
        (Fix(text="x", change={"URV": "10 m"}, subject="LT-9"), "no row of Instruments is LT-9"),
        (Fix(text="x", change={"supply V max": "30"}, subject="P-1", sheet="Loops"), "no row of Loops is P-1"),
    ],
)
def test_what_cannot_be_changed_says_why(fix: Fix, message: str) -> None:
    result, finding = finding_of("SET07", HIGH)
    with pytest.raises(CannotStand, match=message):
        mended(result.plant, finding, fix)


def test_a_filled_cell_is_no_longer_unread() -> None:
    rows = [{"tag": "LT-1", "H": "4..0.5 m", "HH": "5 m"}, {"tag": "LT-2", "H": "1 m", "HH": "2 m"}]
    result, finding = finding_of("DAT09", rows)
    changed = found_after(result.plant, finding, Fix(text="x", change={"H": "4 m"}))
    assert "DAT09" not in {each.rule for each in changed}
    (record, _) = record_of(result, finding, Fix(text="x", change={"H": "4 m"}))
    assert (str(record.setting_h), record.unread) == ("4 m", frozenset())


# ----------------------------------------------------------------------------------------------- what a fix makes


def test_a_fix_says_what_it_would_make() -> None:
    # At the end of the range HH meets H, and trips with it.
    rows = [{"tag": "LT-1", "LRV": "0 m", "URV": "6 m", "H": "6 m", "HH": "6.5 m", "signal": "4-20 mA"}]
    result, _ = finding_of("SET07", rows)
    with_consequences(result)
    (finding,) = [each for each in result.findings if each.rule == "SET07"]
    assert [(fix.text, fix.makes) for fix in finding.fixes] == [("HH 6 m at the most", ("SET01",))]


@pytest.mark.parametrize(
    ("barrier", "other", "expected"),
    [
        # A circuit far away names a barrier, so that a blank says that there is none.
        ("", "ZB", ("ISC01",)),
        # No circuit names one: the lists don't say which circuits have one.
        ("", "", ()),
        ("ZB", "", ()),
    ],
)
def test_whether_a_blank_barrier_says_that_there_is_none_the_whole_plant_tells(
    barrier: str, other: str, expected: tuple[str, ...]
) -> None:
    types: list[Row] = [
        {"code": "EX", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "100 barg",
         "Ex marking": "Ex ia IIC T4 Ga"},
        {"code": "SMALL", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "10 barg",
         "Ex marking": "Ex db IIC T4 Gb"},
        {"code": "AI8", "kind": "card"},
        {"code": "ZB", "kind": "barrier", "Ex marking": "[Ex ia Ga] IIC"},
    ]  # fmt: skip
    common: Row = {"area classification": "Zone 1 IIC T4", "card": "AI8", "I/O type": "AI", "signal": "4-20 mA"}
    rows = [
        {**common, "tag": "PT-101", "device type": "SMALL", "LRV": "0 barg", "URV": "20 barg", "barrier": barrier},
        {**common, "tag": "PT-909", "device type": "EX", "LRV": "0 barg", "URV": "20 barg", "barrier": other},
    ]
    result, found = finding_of("RNG02", rows, types=types)
    fix = Fix(text="x", change={"device type": "EX"})
    result.findings = [replace(found, fixes=(fix,))] + [each for each in result.findings if each is not found]
    before = {each.identity for each in result.findings}
    after = found_after(result.plant, found, fix)
    with_consequences(result)
    (made,) = (fix.makes for fix in result.findings[0].fixes)
    assert tuple(code for code in made if code == "ISC01") == expected
    assert made == tuple(
        sorted({each.rule for each in after if each.outcome is Outcome.FINDING and each.identity not in before})
    )


def test_a_fix_that_is_no_value_makes_nothing() -> None:
    result, _ = finding_of("SET07", HIGH)
    before = [each.identity for each in result.findings]
    seen: list[tuple[int, int]] = []
    with_consequences(result, on_fix=lambda number, of: seen.append((number, of)))
    assert [each.identity for each in result.findings] == before
    assert seen == [(number, len(before)) for number in range(1, len(before) + 1)]


# Mistakes in one small plant, whose fixes reach other rows, loops, groups and lists.
MISTAKES: list[Row] = [
    {"tag": "PT-101A", "service": "Feed A", "LRV": "0 barg", "URV": "10 barg", "HH": "14 barg", "trip": "8 barg",
     "trip direction": "high", "safety function": "SIF-1", "signal": "4-20 mA", "I/O type": "AI", "I/O address": "A1",
     "device type": "T1", "wires": 2, "conductor size": "1.5 mm2", "H": "7.8 barg"},
    {"tag": "PT-101B", "service": "Feed B", "LRV": "0 barg", "URV": "16 barg", "HH": "9 barg", "trip": "9 barg",
     "trip direction": "high", "safety function": "SIF-1", "signal": "4-20 mA", "I/O type": "DI", "I/O address": "A2",
     "device type": "T1", "wires": 2, "conductor size": "1.5 mm2", "H": "8 barg"},
    {"tag": "LCI-005", "service": "Tank", "H": "4 m", "HH": "3 m", "loop": "L-5"},
    {"tag": "LIC-05", "service": "Tank", "location": "system"},
    {"tag": "LT-05", "service": "Tank", "LRV": "0 m", "URV": "5 m", "HH": "6 m", "signal": "4-20 mA",
     "I/O type": "AI", "I/O address": "A3", "device type": "T9"},
    {"tag": "TT-7", "service": "Pump", "LRV": "0 °C", "URV": "100 °C", "trip": "95 °C", "trip direction": "high",
     "design temperature": "90 °C", "failure direction": "low", "bad-signal detection": "no", "signal": "4-20 mA",
     "I/O type": "AI", "I/O address": "A3"},
]  # fmt: skip
SHEETS: dict[str, Any] = {
    "types": [
        {"code": "T1", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "12 barg", "lift-off V": 12,
         "maximum V": 26, "minimum span": "1 bar"},
        {"code": "T2", "kind": "transmitter", "body": "gauge", "LRL": "-1 barg", "URL": "40 barg", "lift-off V": 9,
         "maximum V": 42, "minimum span": "4 bar"},
        {"code": "T9A", "kind": "transmitter"},
    ],
    "loops": [
        {"number": "P-101", "circuit or tag": "PT-101A", "supply V min": 22, "supply V max": 28, "range resistor": 500,
         "cable length": 900},
        {"number": "P-101", "circuit or tag": "PT-101B", "supply V min": 22, "supply V max": 26, "range resistor": 250,
         "cable length": 100},
    ],
}  # fmt: skip


Makes = dict[tuple[Any, str], tuple[str, ...]]


def consequences(result: Audit, *, every: int = 1) -> tuple[Makes, Makes]:
    """Return what each fix says that it makes, and what the whole audit then finds."""
    plant = result.plant
    before = {each.identity for each in result.findings}
    with_consequences(result)
    said: Makes = {}
    found: Makes = {}
    fixes = [(finding, fix) for finding in result.findings for fix in finding.fixes if fix.change]
    for finding, fix in fixes[::every]:
        after = found_after(plant, finding, fix)
        assert finding.identity not in {each.identity for each in after}, (finding.message, fix.text)
        key = (finding.identity, fix.text)
        said[key] = fix.makes
        found[key] = tuple(
            sorted({each.rule for each in after if each.outcome is Outcome.FINDING and each.identity not in before})
        )
    return said, found


def test_a_fix_says_exactly_what_the_whole_audit_would_find() -> None:
    said, found = consequences(audit(example_plant(MISTAKES, **SHEETS), raise_errors=True))
    assert len(said) > 12
    assert said == found
    assert any(said.values())


def test_of_the_demo_every_third_fix_clears_its_finding_and_makes_what_it_says() -> None:
    said, found = consequences(audit_of(DEMO), every=3)
    assert len(said) > 25
    assert said == found
