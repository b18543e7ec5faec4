"""HH and LL of safety devices on a list that has no column for trips."""

import pytest

from tests.validation.rules.applied import Row, counts, tell

SAFE = {"LRV": "0", "URV": "100", "range unit": "barg", "HH": "76", "LL": "", "design pressure": "85 barg",
        "safety function": "SIF-1", "voting": "2oo3"}  # fmt: skip
ABC = ("PT-1A", "PT-1B", "PT-1C")


def voted(**each: str) -> list[Row]:
    """Three voted transmitters; of a field three values, parted by strokes."""
    rows = [{"tag": tag, **SAFE} for tag in ABC]
    for name, texts in each.items():
        for row, text in zip(rows, texts.split("/"), strict=True):
            row[name] = text
    return rows


@pytest.mark.parametrize(
    ("rows", "settings"),
    [
        (voted(), ""),
        (voted(HH="76/76/67.5"), "76 barg, 76 barg, 67.5 barg"),
        (voted(HH="76/76/7600 kPag"), ""),
        (voted(LL="5/5/6"), "5 barg, 5 barg, 6 barg"),
        # One that has none is unchecked, the others are compared.
        (voted(HH="76/76/"), ""),
        (voted(HH="76/70/"), "76 barg, 70 barg"),
    ],
)
def test_voted_devices_trip_alike(rows: list[Row], settings: str) -> None:
    tags = ", ".join(ABC[: settings.count(",") + 1])
    message = f"{tags}: redundant devices with different trip settings: {settings}"
    assert tell("SET08", *rows) == ([message] if settings else [])


def test_both_ends_are_two_findings() -> None:
    assert len(tell("SET08", *voted(HH="76/76/70", LL="5/5/6"))) == 2


def test_a_list_with_a_column_for_trips_has_its_trips_there() -> None:
    rows = [{**row, "trip": ""} for row in voted(HH="76/76/67.5")]
    assert tell("SET08", *rows) == []
    assert counts("SET08", *rows) == {"unchecked": 3}


@pytest.mark.parametrize(
    ("change", "found"),
    [
        ({"HH": "85"}, False),
        ({"HH": "85.1"}, True),
        ({"HH": "90", "safety function": "", "voting": ""}, False),
        ({"HH": "90", "safety function": "", "voting": "", "system": "ESD"}, True),
        ({"HH": "90", "safety function": "", "voting": "", "SIL": "SIL 2"}, True),
        ({"HH": "90", "safety function": "", "voting": "", "SIL": "none"}, False),
        ({"HH": "90", "trip": ""}, False),
        ({"HH": "", "LL": "90"}, False),
    ],
)
def test_a_safety_hh_stays_below_the_design_pressure(change: Row, found: bool) -> None:
    row = {"tag": "PT-1", **SAFE, **change}
    message = f"PT-1: the high trip {row['HH']} barg is above the design limit 85 barg"
    assert tell("SET04", row) == ([message] if found else [])


@pytest.mark.parametrize(
    ("change", "trip"),
    [
        ({}, "high"),
        ({"failure direction": "high"}, ""),
        ({"HH": "", "LL": "5"}, ""),
        ({"HH": "", "LL": "5", "failure direction": "high"}, "low"),
        # Trips at both ends: the signal can fail toward one of them alone.
        ({"LL": "5"}, "high"),
        ({"bad-signal detection": "yes"}, ""),
        ({"safety function": "", "voting": ""}, ""),
    ],
)
def test_a_signal_fails_toward_its_trip(change: Row, trip: str) -> None:
    row = {"tag": "PT-1", **SAFE, "failure direction": "low", "bad-signal detection": "no", **change}
    message = f"PT-1: the signal fails {row['failure direction']}, the trip is {trip}, and bad signals are not detected"
    assert tell("SET10", row) == ([message] if trip else [])
