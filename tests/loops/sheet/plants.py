"""Plants for the tests of the sheets: one of each kind of circuit, and what would break a careless page."""

from __future__ import annotations

from functools import cache
from typing import Any

from loops.plant import Plant
from validation.example import example_plant

Row = dict[str, Any]

TYPES: list[Row] = [
    {"code": "PT-A", "kind": "transmitter", "lift-off V": "10.5", "maker": "Quillmoor", "model": "QP-4"},
    {"code": "ZB-28", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": "340"},
    {"code": "TT-K", "kind": "transmitter", "sensor type": "TC type K"},
]
AREAS: list[Row] = [
    {"code": "A1", "name": "Tank farm", "zone": "1", "gas group": "IIB", "temperature class": "T3"},
    {"code": "A2", "name": "Boiler house", "system": "none"},
]
TRANSMITTER: Row = {
    "tag": "PT-101",
    "service": "Feed pump discharge pressure",
    "device type": "PT-A",
    "area": "A1",
    "P&ID": "PID-1",
    "line": "L-100",
    "equipment": "P-100",
    "location": "field",
    "LRV": "0",
    "URV": "10",
    "range unit": "barg",
    "system LRV": "0",
    "system URV": "10",
    "system unit": "barg",
    "H": "8",
    "L": "1",
    "trip": "9",
    "trip direction": "high",
    "signal": "4-20 mA HART",
    "wires": "2",
    "I/O type": "AI",
    "I/O address": "1.1.1",
    "card": "AI-8",
    "system": "DCS",
    "barrier": "ZB-28",
    "junction box": "JB-1",
    "terminals": "X1:1,X1:2",
    "cable": "C-101",
    "conductor size": "1.5 mm2",
    "pair": "1",
    "failure direction": "high",
}
LOOP: Row = {
    "number": "P-101",
    "circuit or tag": "PT-101",
    "supply V min": "24",
    "cable length": "1000",
    "range resistor": "250",
    "drawing": "LD-P-101",
}
ORIFICE: Row = {
    "tag": "FT-102",
    "service": "Feed flow",
    "device type": "PT-A",
    "area": "A1",
    "LRV": "0",
    "URV": "250",
    "range unit": "mbar",
    "square root in device": "yes",
    "square root in system": "no",
    "system LRV": "0",
    "system URV": "100",
    "system unit": "m3/h",
    "L": "25",
    "settings unit": "m3/h",
    "signal": "4-20 mA",
    "wires": "4",
    "I/O type": "AI",
    "I/O address": "1.1.2",
}
RESISTANCE: Row = {
    "tag": "TE-103",
    "service": "Feed temperature",
    "area": "A2",
    "LRV": "0",
    "URV": "200",
    "range unit": "degC",
    "signal": "Pt100",
    "I/O type": "RTD",
    "I/O address": "1.2.1",
}
THERMOCOUPLE: Row = {
    "tag": "TE-104",
    "service": "Flue gas temperature",
    "area": "A2",
    "LRV": "0",
    "URV": "1000",
    "range unit": "degC",
    "signal": "TC type K",
    "I/O type": "TC",
    "I/O address": "1.2.2",
}
VALVE: list[Row] = [
    {"tag": "FV-105", "service": "Feed control", "area": "A1", "failure position": "FC"},
    {"tag": "FY-105", "service": "Feed control", "kind": "positioner", "area": "A1", "signal": "4-20 mA",
     "I/O type": "AO", "I/O address": "1.3.1"},
    {"tag": "XV-106", "service": "Feed shut-off", "area": "A1", "failure position": "FC"},
    {"tag": "XY-106", "service": "Feed shut-off, solenoid", "area": "A1", "signal": "24 VDC", "I/O type": "DO",
     "I/O address": "1.4.1"},
    {"tag": "ZSO-106", "service": "Feed shut-off open", "area": "A1", "signal": "NAMUR", "I/O type": "DI",
     "I/O address": "1.5.1", "contact": "NO"},
]  # fmt: skip
LOCAL: list[Row] = [
    {"tag": "PG-107", "service": "Local pressure", "area": "A1"},
    {"tag": "PSV-108", "service": "Relief", "area": "A1", "set pressure": "12 barg"},
]
TERMINATIONS: list[Row] = [
    {"circuit or tag": "PT-101", "from item": "PT-101", "from terminal": "+", "to item": "JB-1",
     "to terminal": "X1:1", "cable": "C-101", "pair": "1", "core": "1", "colour": "white", "wire mark": "PT-101+"},
    {"circuit or tag": "PT-101", "from item": "PT-101", "from terminal": "", "to item": "JB-1",
     "to terminal": "X1:2", "cable": "C-101", "pair": "1", "core": "2", "colour": "black",
     "screen earthed at": "MAR-1"},
]  # fmt: skip


@cache
def works() -> Plant:
    """Return a plant with a circuit of every kind, and with loops that have no signal."""
    rows = [TRANSMITTER, ORIFICE, RESISTANCE, THERMOCOUPLE, *VALVE, *LOCAL]
    return example_plant(
        rows, types=TYPES, areas=AREAS, loops=[LOOP], terminations=TERMINATIONS, plant={"name": "Marrowbeck Works"}
    )


LONG = "Наружная температура обратной воды " * 9  # 300 characters and more, Cyrillic
HOSTILE = "A\u202eB <b>&amp; %n $(x) \\ ) ( \U0001f512 \x07 \ufeff\u0e01\u05d0 𝛺 \ud83d Ω→µ"


@cache
def crowded() -> Plant:
    """Return a plant of loops that would break a careless page."""
    rows: list[Row] = [
        {"tag": f"TT-{200}{letter}", "service": f"Bed temperature {number} of the twelve in the first reactor",
         "area": "A1", "LRV": "-40", "URV": "1234567.891", "range unit": "degC", "H": "1000.125", "HH": "1100.125",
         "LL": "-30.5", "L": "-20.25", "trip": "1200", "signal": "4-20 mA", "wires": "2", "I/O type": "AI",
         "I/O address": f"NODE-{number}/RACK-{number}/SLOT-{number}/CHANNEL-{number}"}
        for number, letter in enumerate("ABCDEFGHJKLM", start=1)
    ]  # fmt: skip
    rows += [
        {"tag": "PT-201", "service": LONG, "area": "A1", "signal": "4-20 mA", "I/O type": "AI", "line": LONG,
         "equipment": LONG, "P&ID": LONG, "remarks": LONG * 12, "junction box": LONG, "cable": "x" * 400},
        {"tag": "PT-202", "I/O type": "AI"},
        {"tag": "PT-203", "service": HOSTILE, "maker": HOSTILE, "model": HOSTILE, "area": HOSTILE, "I/O type": "DI",
         "I/O address": HOSTILE},
        {"tag": "PT-204", "service": "W" * 300, "loop": "L" * 200, "I/O type": "AI", "I/O address": "W" * 300,
         "Ex marking": "II 2 G Ex " + "d" * 200},
        {"tag": "PT-205", "loop": "P-205 " * 12, "I/O type": "AO", "signal": "0-20 mA"},
        {"tag": "XYZ not a tag at all", "service": "free text", "I/O type": "DI", "I/O address": "7"},
    ]  # fmt: skip
    loops = [{"number": "P-201", "circuit or tag": "PT-201", "kind": "AI", "service": LONG, "drawing": LONG}]
    terminations = [
        {"circuit or tag": "PT-202", "from item": f"JB-{number}", "from terminal": f"TB{number}:{number}/out",
         "to item": f"MARSHALLING-CABINET-{number}", "to terminal": f"MX{number}:{number}",
         "cable": f"MC-{number}-WITH-A-LONG-NUMBER", "pair": str(number), "core": str(number), "colour": "white/blue",
         "screen earthed at": f"MAR-{number}", "wire mark": f"PT-202/{number}/+"}
        for number in range(1, 121)
    ]  # fmt: skip
    return example_plant(rows, areas=AREAS, loops=loops, terminations=terminations, plant={"name": LONG})
