"""The path of a circuit: by the termination list where there is one, by the circuit's own row where there is none."""

from __future__ import annotations

from typing import Any

import pytest

from loops.plant import Plant
from loops.sheet.pack import sheets_of
from loops.sheet.path import Path, Symbol, path_of
from validation.example import example_plant

Row = dict[str, Any]

DEVICE: Row = {
    "tag": "PT-1",
    "area": "A1",
    "signal": "4-20 mA",
    "wires": "2",
    "I/O type": "AI",
    "I/O address": "1.1.1",
    "card": "AI-8",
    "barrier": "ZB-28",
    "junction box": "JB-1",
    "cable": "C-1",
}
TYPES: list[Row] = [
    {"code": "ZB-28", "kind": "barrier", "zener or isolator": "zener"},
    {"code": "ISO-2", "kind": "isolator", "zener or isolator": "isolator"},
]
AREAS: list[Row] = [
    {"code": "A1", "zone": "1", "gas group": "IIB", "temperature class": "T3"},
    {"code": "A2", "system": "none"},
]


def path(rows: list[Row], *, circuit: int = 0, **lists: Any) -> Path:
    lists.setdefault("types", TYPES)
    lists.setdefault("areas", AREAS)
    plant: Plant = example_plant(rows, **lists)
    (loop,) = sheets_of(plant).drawn
    return path_of(loop.circuits[circuit], plant, members=loop.members)


def shown(found: Path) -> list[str]:
    """Stations with what stands at them, and the conductors between them: terminal, core and colour, terminal."""
    lines: list[str] = []
    for number, station in enumerate(found.stations):
        said = " ".join((station.name or "_", *station.lines))
        lines.append(f"{station.zone.value}: {station.symbol.value} {said}")
        if number < len(found.stretches):
            stretch = found.stretches[number]
            told = (stretch.cable, stretch.cable_type, stretch.pair, stretch.length_m)
            wires = [
                "."
                if wire is None
                else f"{wire.left or '_'}>{wire.right or '_'}"
                + "".join(f" {text}" for text in (wire.core, wire.colour) if text)
                + (f" ends at {wire.ends_at}" if wire.ends_at else "")
                for wire in stretch.wires
            ]
            lines.append(f"  {' '.join(str(each) for each in told if each)}: {' | '.join(wires)}")
    return lines


def row(start: str, end: str, **more: str) -> Row:
    """One conductor: ``PT-1 +`` is the terminal + of PT-1."""
    one, other = start.partition(" "), end.partition(" ")
    return {
        "circuit or tag": "PT-1",
        "from item": one[0],
        "from terminal": one[2],
        "to item": other[0],
        "to terminal": other[2],
        **more,
    }


LISTED = [
    row("PT-1 +", "JB-1 X1:1", cable="C-1", pair="1", core="1", colour="white"),
    row("JB-1 X1:1/out", "MAR-1 M1:7", cable="MC-1", pair="4", core="7", colour="white"),
    row("MAR-1 M1:7/out", "MAR-1 ISO:PT-1+", colour="blue"),
    row("PT-1 -", "JB-1 X1:2", cable="C-1", pair="1", core="2", colour="black"),
    row("JB-1 X1:2/out", "MAR-1 M1:8", cable="MC-1", pair="4", core="8", colour="black"),
    row("MAR-1 M1:8/out", "MAR-1 ISO:PT-1-", colour="blue"),
    row("PT-1", "JB-1 X1:3", cable="C-1", pair="1", core="S"),
    row("JB-1 X1:3/out", "MAR-1 M1:9", cable="MC-1", pair="4", core="S"),
    row("MAR-1 M1:9/out", "MAR-1 IE"),
]
AS_LISTED = [
    "field: device PT-1",
    "  C-1 1: +>1 1 white | ->2 2 black | _>3 S",
    "field: junction box JB-1 X1",
    "  MC-1 4: 1>7 7 white | 2>8 8 black | 3>9 S",
    "cabinet: terminal strip MAR-1 M1",
    "  : 7>+ blue | 8>- blue | 9>_ ends at IE",
    "cabinet: barrier or isolator MAR-1 ZB-28 zener barrier",
    "  : _>_ | _>_ | .",
    "control system: card AI-8 1.1.1 AI",
]


def reversed_(rows: list[Row]) -> list[Row]:
    swapped = {"from item": "to item", "from terminal": "to terminal"}
    swapped |= {value: key for key, value in swapped.items()}
    return [{swapped.get(key, key): value for key, value in each.items()} for each in reversed(rows)]


def parts(lines: list[str]) -> list[list[str]]:
    """The conductors of each line in an order of their own."""
    return [sorted(line.replace(": ", " | ").split(" | ")) for line in lines]


@pytest.mark.parametrize("rows", [LISTED, reversed_(LISTED)], ids=["from the field", "from the system, last row first"])
def test_the_termination_list_gives_the_path(rows: list[Row]) -> None:
    found = path([DEVICE], terminations=rows)
    assert parts(shown(found)) == parts(AS_LISTED)
    assert rows is not LISTED or shown(found) == AS_LISTED
    assert found.from_terminations
    assert found.boundary == 1


def test_the_screen_is_earthed_where_any_of_its_rows_says() -> None:
    rows = [{**each, **({"screen earthed at": "MAR-1"} if each.get("core") == "S" else {})} for each in LISTED]
    earthed = [stretch.screen_earthed_at for stretch in path([DEVICE], terminations=rows).stretches]
    assert earthed == ["MAR-1", "MAR-1", None, None]


def test_a_list_that_ends_at_the_card_needs_no_more_stations() -> None:
    rows = [
        row("PT-1 +", "JB-1 X1:1"),
        row("JB-1 X1:1", "AI-8 3+"),
        row("PT-1 -", "JB-1 X1:2"),
        row("JB-1 X1:2", "AI-8 3-"),
    ]
    assert shown(path([{**DEVICE, "barrier": ""}], terminations=rows)) == [
        "field: device PT-1",
        "  : +>1 | ->2",
        "field: junction box JB-1 X1",
        "  : 1>3+ | 2>3-",
        "control system: card AI-8 1.1.1 AI",
    ]


def test_two_boxes_in_the_field() -> None:
    rows = [
        row("PT-1 +", "JB-7 T:1"),
        row("JB-7 T:1", "JB-1 X1:1"),
        row("JB-1 X1:1", "MAR-1 M1:1"),
    ]
    found = path([{**DEVICE, "barrier": ""}], terminations=rows)
    assert [(each.symbol, each.zone.value) for each in found.stations] == [
        (Symbol.DEVICE, "field"),
        (Symbol.BOX, "field"),
        (Symbol.BOX, "field"),
        (Symbol.STRIP, "cabinet"),
        (Symbol.CARD, "control system"),
    ]
    assert found.boundary == 2


@pytest.mark.parametrize(
    "rows",
    [
        [row("JB-1 X1:1", "MAR-1 M1:1")],
        [row(f"PT-1 {number}", f"JB-1 X1:{number}") for number in range(9)],
        [row("PT-1 +", "B-0 1"), *(row(f"B-{number} 1", f"B-{number + 1} 1") for number in range(15))],
    ],
    ids=["not from the device", "more conductors than stand side by side", "more stations than a drawing holds"],
)
def test_a_list_that_cannot_be_drawn_leaves_the_path_to_the_row(rows: list[Row]) -> None:
    found = path([DEVICE], terminations=rows)
    assert not found.from_terminations
    assert [each.symbol for each in found.stations] == [Symbol.DEVICE, Symbol.BOX, Symbol.BARRIER, Symbol.CARD]


def test_conductors_that_go_round_in_a_ring_end() -> None:
    rows = [row("PT-1 +", "JB-1 X1:1"), row("JB-1 X1:1", "JB-1 X1:2"), row("JB-1 X1:2", "JB-1 X1:1")]
    assert [each.symbol for each in path([DEVICE], terminations=rows).stations] == [
        Symbol.DEVICE,
        Symbol.BOX,
        Symbol.BARRIER,
        Symbol.CARD,
    ]


TOLD = [
    (
        {"terminals": "X1:1,X1:2", "cable": "C-1, MC-1", "pair": "3", "cable type": "IS-1P"},
        [
            "field: device PT-1",
            "  C-1 IS-1P 3: +>1 | \u2212>2",
            "field: junction box JB-1 X1",
            "  MC-1 IS-1P: 1>_ | 2>_",
            "cabinet: barrier or isolator ZB-28 zener barrier",
            "  : _>_ | _>_",
            "control system: card AI-8 1.1.1 AI",
        ],
    ),
    (
        {"junction box": "", "barrier": "", "cable": "C-1", "cable length": "80", "terminals": ""},
        ["field: device PT-1", "  C-1 80.0: +>_ | \u2212>_", "control system: card AI-8 1.1.1 AI"],
    ),
    (
        {"junction box": "", "barrier": "", "cable": "", "card": "", "I/O address": ""},
        ["field: device PT-1", "  : +>_ | \u2212>_", "control system: card _ AI"],
    ),
    (
        {"tag": "TE-1", "signal": "Pt100", "I/O type": "RTD", "wires": "4", "junction box": "", "barrier": ""},
        ["field: device TE-1", "  C-1: _>_ | _>_ | _>_ | _>_", "control system: card AI-8 1.1.1 RTD"],
    ),
    (
        {"tag": "TE-1", "signal": "Pt100", "I/O type": "RTD", "wires": "", "junction box": "", "barrier": ""},
        ["field: device TE-1", "  C-1: _>_ | _>_ | _>_", "control system: card AI-8 1.1.1 RTD"],
    ),
    (
        {"wires": "4", "power supply": "230 V AC", "junction box": "", "barrier": ""},
        ["field: device PT-1", "  C-1: +>_ | \u2212>_", "control system: card AI-8 1.1.1 AI"],
    ),
    (
        {"tag": "PSH-1", "signal": "dry contact", "I/O type": "DI", "wires": "", "barrier": "ISO-2"},
        [
            "field: device PSH-1",
            "  C-1: _>_ | _>_",
            "field: junction box JB-1",
            "  : _>_ | _>_",
            "cabinet: barrier or isolator ISO-2 isolator",
            "  : _>_ | _>_",
            "control system: card AI-8 1.1.1 DI",
        ],
    ),
]


@pytest.mark.parametrize(("changes", "expected"), TOLD)
def test_the_row_tells_the_path_where_no_list_does(changes: Row, expected: list[str]) -> None:
    assert shown(path([{**DEVICE, **changes}])) == expected


def test_cables_of_the_schedule_stand_where_they_run() -> None:
    cables = [
        {"number": "C-1", "type": "IS-1P", "from": "PT-1", "to": "JB-1", "length": "40"},
        {"number": "MC-1", "type": "IS-MP", "from": "JB-1", "to": "MAR-1", "length": "100"},
    ]
    assert shown(path([{**DEVICE, "barrier": ""}], cables=cables))[1::2] == [
        "  C-1 IS-1P 40.0: +>_ | \u2212>_",
        "  MC-1 IS-MP 100.0: _>_ | _>_",
    ]


def test_what_lies_in_series_stands_between_device_and_box() -> None:
    rows = [
        {**DEVICE, "receiver ohm": "250"},
        {"tag": "PI-1", "kind": "indicator", "signal": "4-20 mA", "location": "field", "loop": "P-1"},
    ]
    found = path(rows)
    assert [(each.symbol, each.name) for each in found.stations] == [
        (Symbol.DEVICE, "PT-1"),
        (Symbol.IN_SERIES, "PI-1"),
        (Symbol.BOX, "JB-1"),
        (Symbol.BARRIER, "ZB-28"),
        (Symbol.CARD, "AI-8"),
    ]
    assert found.stations[-1].lines == ("1.1.1", "AI", "250 \u03a9")


@pytest.mark.parametrize(("area", "boundary"), [("A1", 1), ("A2", None), ("", None)])
def test_the_hazardous_area_ends_behind_the_last_station_in_the_field(area: str, boundary: int | None) -> None:
    assert path([{**DEVICE, "area": area}]).boundary == boundary


@pytest.mark.parametrize(
    ("rows", "joined", "functions", "supply"),
    [
        ([{"tag": "FT-1", "I/O type": "AI"}, {"tag": "FE-1"}, {"tag": "FI-1", "location": "system"}],
         ["FE-1"], ["FI-1"], None),
        ([{"tag": "FY-1", "kind": "positioner", "I/O type": "AO"}, {"tag": "FV-1"},
          {"tag": "FIC-1", "location": "system"}, {"tag": "FI-1", "location": "system"}],
         ["FV-1"], ["FIC-1"], None),
        ([{"tag": "FY-1A", "kind": "positioner", "I/O type": "AO"}, {"tag": "FV-1A"}, {"tag": "FV-1B"}],
         ["FV-1A"], [], None),
        ([{"tag": "PT-1", "I/O type": "AI", "wires": "4", "power supply": "230 V AC"}], [], [], "230 V AC"),
        ([{"tag": "PT-1", "I/O type": "AI", "wires": "2", "power supply": "24 V DC"}], [], [], None),
    ],
)  # fmt: skip
def test_what_stands_beside_the_wires(
    rows: list[Row], joined: list[str], functions: list[str], supply: str | None
) -> None:
    found = path(rows)
    assert [each.name for each in found.joined] == joined
    assert [each.name for each in found.functions] == functions
    assert found.supply == supply
