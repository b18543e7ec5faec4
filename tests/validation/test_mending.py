"""Fixes that are values clear their findings, whatever the rows hold; and how such values are written."""

import random
from collections.abc import Iterator
from typing import Any

import pytest

from instruments.unit import read_unit
from validation.audit import audit
from validation.example import example_plant
from validation.mending import rounded_down, rounded_up, written

CODES = [*(f"RNG{number:02}" for number in range(1, 17)), *(f"PRO{number:02}" for number in range(1, 7))]
PRESSURES = (
    "-2 barg", "-1 barg", "0 barg", "0.5 barg", "1 barg", "2.5 barg", "10 barg", "16 barg", "0 bara", "1 bara",
    "4 bara", "0 bar", "6 bar", "10 bar", "100 psig", "0 mbar", "250 mbar", "-84 inH2O", "0 mmWG",
    "20 inHg vac", "-14.7 psig",
    "0 kPag", "3 mlc", "",
)  # fmt: skip
TEMPERATURES = ("-300 °C", "-50 °C", "0 °C", "20 °C", "100 °C", "212 °F", "1400 °C", "850 °C", "")
FLOWS = ("0 m3/h", "10 m3/h", "100 m3/h", "5 l/s", "1000 l/h", "0 mbar", "100 mbar", "250 mbar", "")
LEVELS = ("0 m", "2 m", "600 mm", "0 %", "50 %", "100 %", "101 %", "0 mbar", "-50 mbar", "")
ACIDITIES = ("0 pH", "14 pH", "15 pH", "-1 pH", "7 pH", "")
MEASURED = {
    "PT": PRESSURES, "PDT": PRESSURES, "PG": PRESSURES, "PSH": PRESSURES, "TT": TEMPERATURES, "TE": TEMPERATURES,
    "FT": FLOWS, "LT": LEVELS, "AT": ACIDITIES, "PIC": PRESSURES, "PSV": PRESSURES, "FE": FLOWS,
}  # fmt: skip
RANGES = {"LRV": 0.8, "URV": 0.8, "system LRV": 0.4, "system URV": 0.4, "HH": 0.3, "L": 0.3, "trip": 0.2}
OPERATION = {f"operating value {end}": 0.3 for end in ("min", "normal", "max")}
LINE_PRESSURES = {**{f"operating pressure {end}": 0.5 for end in ("min", "normal", "max")}, "design pressure": 0.8}
LINE_TEMPERATURES = {
    **{f"operating temperature {end}": 0.5 for end in ("min", "normal", "max")},
    "design temperature": 0.8,
    "temperature at the device": 0.2,
}
SHEETS: dict[str, Any] = {
    "areas": [{"code": "A1", "system": "zone", "zone": "2", "ambient min": "-20 °C", "ambient max": "40 °C"}],
    "plant": {"numbering": "parallel", "RNG04 maximum turndown": "10", "atmospheric pressure": "0.95 bara"},
}


def some_types(dice: random.Random) -> Iterator[dict[str, str]]:
    """Device types whose limits nobody has thought about."""
    for number in range(12):
        pool = dice.choice((PRESSURES, PRESSURES, TEMPERATURES, FLOWS, LEVELS))
        yield {
            "code": f"X{number}",
            "kind": dice.choice(("transmitter", "transmitter", "element", "switch", "gauge")),
            "body": dice.choice(("gauge", "absolute", "differential", "")),
            "LRL": dice.choice(pool),
            "URL": dice.choice(pool),
            "minimum span": dice.choice(("", "0.2 bar", "10 K", "5 m3/h", "20 %")),
            "maximum turndown": dice.choice(("", "5", "50")),
            "zero shift limit": dice.choice(("", "15")),
            "over-range limit": dice.choice(PRESSURES),
            "static pressure limit": dice.choice(PRESSURES),
            "process temperature limit min": dice.choice(TEMPERATURES),
            "process temperature limit max": dice.choice(TEMPERATURES),
            "seal temperature limit max": dice.choice(TEMPERATURES),
            "ambient limit min": dice.choice(TEMPERATURES),
            "ambient limit max": dice.choice(TEMPERATURES),
            "sensor type": dice.choice(("", "Pt100", "type K")),
        }


def some_rows(dice: random.Random, count: int) -> Iterator[dict[str, str]]:
    """Rows that fit together only by chance."""
    for number in range(count):
        letters = dice.choice(tuple(MEASURED))
        row = {"tag": f"{letters}-{1000 + number // 2}{'AB'[number % 2]}", "service": "s", "area": "A1"}
        for titles, pool in (
            (RANGES | OPERATION, MEASURED[letters]),
            (LINE_PRESSURES, PRESSURES),
            (LINE_TEMPERATURES, TEMPERATURES),
        ):
            for title, often in titles.items():
                row[title] = dice.choice(pool) if dice.random() < often else ""
        row |= {
            "device type": dice.choice((*(f"X{each}" for each in range(12)), "")),
            "mounting": dice.choice(("direct", "impulse line", "remote seal", "thermowell", "")),
            "square root in device": dice.choice(("yes", "no", "")),
            "square root in system": dice.choice(("yes", "no", "")),
            "safety function": dice.choice(("", "", "SIF-1", "SIF-2")),
            "voting": dice.choice(("", "2oo3", "1oo1")),
            "signal": dice.choice(("4-20 mA", "Pt100", "TC type K", "")),
        }
        yield row


@pytest.mark.parametrize("seed", [2, 8, 16])
def test_whatever_a_list_holds_no_rule_breaks_and_each_fix_clears_its_finding(seed: int) -> None:
    dice = random.Random(seed)
    types = list(some_types(dice))
    rows = list(some_rows(dice, 40))
    result = audit(example_plant(rows, types=types, **SHEETS), codes=CODES, raise_errors=True)
    for coverage in result.coverage.values():
        assert sum(coverage.outcomes.values()) == len(result.plant.instruments)
    left = []
    for finding in result.findings:
        mine = [row for row in rows if row["tag"] == finding.subject]
        for fix in finding.fixes:
            if not fix.change or not mine:
                continue
            mended = [{**row, **fix.change} for row in mine]
            again = audit(example_plant(mended, types=types, **SHEETS), codes=[finding.rule], raise_errors=True)
            if any(each.part == finding.part for each in again.findings):
                left.append((finding.message, fix.text))
    assert left == []


@pytest.mark.parametrize(
    ("value", "up", "down"),
    [
        (142.2334321, 142.234, 142.233),
        (-142.2334321, -142.233, -142.234),
        (9.999999999999998, 10.0, 10.0),
        (0.1 + 0.2, 0.3, 0.3),
        (0.0, 0.0, 0.0),
        (1234567.0, 1234570.0, 1234560.0),
        (0.00012345678, 0.000123457, 0.000123456),
    ],
)
def test_values_are_rounded_to_the_side_that_holds(value: float, up: float, down: float) -> None:
    assert (rounded_up(value), rounded_down(value)) == (up, down)


@pytest.mark.parametrize(
    ("value", "text", "expected"),
    [(12.5, "barg", "12.5 barg"), (0.0, "m3/h", "0 m³/h"), (-5.0, "inHg vac", "5 inHg(g)"), (-5.0, "°C", "-5 °C")],
)
def test_values_are_written_as_a_list_holds_them(value: float, text: str, expected: str) -> None:
    unit = read_unit(text)
    assert unit is not None
    assert written(value, unit) == expected
