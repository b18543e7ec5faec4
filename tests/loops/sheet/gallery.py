"""A loop of every kind that has a sheet, each with as much as a good list gives.

``python -m tests.loops.sheet.gallery FILE.pdf`` draws them all, to be looked at as a draughtsman would.
"""

from __future__ import annotations

import sys
from functools import cache
from pathlib import Path
from typing import Any

from loops.plant import Plant
from loops.sheet.pdf import write_sheets
from validation.example import example_plant

Row = dict[str, Any]

AREAS: list[Row] = [
    {"code": "A1", "name": "Tank farm", "zone": "1", "gas group": "IIB", "temperature class": "T3",
     "ambient min": "-20", "ambient max": "40"},
    {"code": "A2", "name": "Control building", "system": "none"},
]  # fmt: skip
TYPES: list[Row] = [
    {"code": "PT-A", "kind": "transmitter", "lift-off V": "10.5", "maximum V": "30", "maker": "Quillmoor",
     "model": "QP-4", "Ex marking": "II 1 G Ex ia IIC T4 Ga", "certificate": "QVB 17 ATEX 0412", "Ui V": "30",
     "Ii mA": "120", "Pi mW": "1000", "Ci nF": "3", "Li microhenry": "10"},
    {"code": "PT-B", "kind": "transmitter", "lift-off V": "10.5", "maker": "Quillmoor", "model": "QP-6",
     "Ex marking": "II 2 G Ex db IIC T6 Gb", "certificate": "QVB 17 ATEX 0413"},
    {"code": "ZB-28", "kind": "barrier", "zener or isolator": "zener", "resistance ohm": "340",
     "Ex marking": "II (1) G [Ex ia Ga] IIC", "certificate": "QVB 09 ATEX 0107", "Uo V": "28", "Io mA": "93",
     "Po mW": "650", "Co IIC nF": "83", "Lo IIC mH": "3.05", "IS earth": "yes"},
    {"code": "ISO-2", "kind": "isolator", "zener or isolator": "isolator", "volts available at 20 mA": "16.5",
     "Ex marking": "II (1) G [Ex ia Ga] IIC", "certificate": "QVB 09 ATEX 0109", "Uo V": "25", "Io mA": "90",
     "Po mW": "560", "Co IIC nF": "110", "Lo IIC mH": "4"},
    {"code": "PI-D", "kind": "indicator", "resistance ohm": "20", "bypass diode": "yes"},
    {"code": "TC-K", "kind": "element", "sensor type": "TC type K"},
]  # fmt: skip
CABLES: list[Row] = [
    {"code": "IS-1P", "conductor": "1.5", "capacitance pF/m": "110", "inductance uH/m": "0.65"},
    {"code": "NS-1P", "conductor": "1.5"},
    {"code": "KX", "conductor": "1.5", "extension type": "KX"},
]
AI: Row = {
    "area": "A1", "P&ID": "PID-1", "line": "L-100", "equipment": "P-100", "location": "field", "LRV": "0", "URV": "10",
    "range unit": "barg", "system LRV": "0", "system URV": "10", "system unit": "barg", "signal": "4-20 mA HART",
    "wires": "2", "I/O type": "AI", "I/O address": "1.1.1", "card": "AI-8", "system": "DCS", "junction box": "JB-1",
    "terminals": "X1:1,X1:2", "cable": "C-101, MC-1", "pair": "1", "failure direction": "high",
    "bad signal detection": "yes", "device type": "PT-B", "cable type": "NS-1P", "cable length": "240",
    "power supply": "24 V DC", "receiver ohm": "250",
}  # fmt: skip
DI: Row = {"area": "A1", "signal": "24 V DC", "I/O type": "DI", "I/O address": "1.2.1", "card": "DI-16",
           "system": "DCS", "junction box": "JB-2", "cable": "C-1, MC-2", "cable type": "NS-1P"}  # fmt: skip
OUT: Row = {"area": "A1", "signal": "4-20 mA", "I/O type": "AO", "I/O address": "1.3.1", "card": "AO-8",
            "system": "DCS", "junction box": "JB-3", "cable": "C-1, MC-3", "cable type": "NS-1P"}  # fmt: skip
SOFT: Row = {"location": "system", "system": "DCS"}

KINDS: dict[str, list[Row]] = {
    "two wires": [{**AI, "tag": "PT-101", "service": "Feed pressure", "H": "8", "trip": "9", "trip direction": "high",
                   "operating pressure min": "3 barg", "operating pressure normal": "5 barg",
                   "operating pressure max": "7 barg"}, {**SOFT, "tag": "PI-101"}],
    "three wires": [{**AI, "tag": "AT-102", "service": "Oxygen", "wires": "3", "URV": "25", "range unit": "%",
                     "system URV": "25", "system unit": "%", "device type": ""}],
    "four wires": [{**AI, "tag": "FT-103", "service": "Cooling water", "wires": "4", "power supply": "230 V AC",
                    "URV": "60", "range unit": "m3/h", "system URV": "60", "system unit": "m3/h", "device type": ""}],
    "zener barrier": [{**AI, "tag": "PT-104", "service": "Biogas pressure", "device type": "PT-A", "barrier": "ZB-28",
                       "cable type": "IS-1P"}],
    "isolator": [{**AI, "tag": "PT-105", "service": "Biogas pressure", "device type": "PT-A", "barrier": "ISO-2",
                  "cable type": "IS-1P"}],
    "indicator in series": [{**AI, "tag": "LT-106", "service": "Sump level", "URV": "4", "range unit": "m",
                             "system URV": "4", "system unit": "m"},
                            {"tag": "LI-106", "kind": "indicator", "signal": "4-20 mA", "location": "field",
                             "loop": "L-106", "device type": "PI-D", "area": "A1"}],
    "flow by orifice": [{**AI, "tag": "FT-107", "service": "Feed flow", "URV": "250", "range unit": "mbar",
                         "square root in device": "yes", "square root in system": "no", "system URV": "100",
                         "system unit": "m3/h", "L": "25", "settings unit": "m3/h"},
                        {"tag": "FE-107", "area": "A1"}, {**SOFT, "tag": "FIC-107"},
                        {**OUT, "tag": "FY-107", "kind": "positioner", "service": "Feed control"},
                        {"tag": "FV-107", "area": "A1", "failure position": "FC"}],
    "RTD of two wires": [{**AI, "tag": "TE-108", "service": "Oil temperature", "URV": "120", "range unit": "degC",
                          "system URV": "120", "system unit": "degC", "signal": "Pt100", "wires": "2",
                          "I/O type": "RTD", "device type": ""}],
    "RTD of three wires": [{**AI, "tag": "TE-109", "service": "Oil temperature", "URV": "120", "range unit": "degC",
                            "system URV": "120", "system unit": "degC", "signal": "Pt100", "wires": "3",
                            "I/O type": "RTD", "device type": ""}],
    "RTD of four wires": [{**AI, "tag": "TE-110", "service": "Oil temperature", "URV": "120", "range unit": "degC",
                           "system URV": "120", "system unit": "degC", "signal": "Pt100", "wires": "4",
                           "I/O type": "RTD", "device type": ""}],
    "thermocouple": [{**AI, "tag": "TE-111", "service": "Flue gas temperature", "URV": "1000", "range unit": "degC",
                      "system URV": "1000", "system unit": "degC", "signal": "TC type K", "wires": "2",
                      "I/O type": "TC", "device type": "TC-K", "cable type": "KX", "H": "900"}],
    "contact": [{**DI, "tag": "PSHH-112", "service": "Inlet pressure high", "contact": "NC", "trip": "12 barg",
                 "trip direction": "high"}],
    "proximity": [{**DI, "tag": "ZSC-113", "service": "Valve closed", "signal": "NAMUR", "contact": "NO",
                   "barrier": "ISO-2"}],
    "solenoid with its valve and switches": [
        {"tag": "XV-114", "service": "Feed shut-off", "area": "A1", "failure position": "FC"},
        {**DI, "tag": "XY-114", "kind": "solenoid", "service": "Feed shut-off, solenoid", "I/O type": "DO",
         "card": "DO-8", "I/O address": "1.4.1"},
        {**DI, "tag": "ZSO-114", "service": "Feed shut-off open", "contact": "NO", "I/O address": "1.2.2"},
        {**DI, "tag": "ZSC-114", "service": "Feed shut-off closed", "contact": "NO", "I/O address": "1.2.3"}],
    "I/P converter": [{**OUT, "tag": "PY-115", "kind": "I/P converter", "service": "Pressure control"},
                      {"tag": "PV-115", "area": "A1", "failure position": "FO"}],
    "split range": [{**OUT, "tag": "TY-116A", "kind": "positioner", "service": "Heating"},
                    {"tag": "TV-116A", "area": "A1", "failure position": "FC"},
                    {**OUT, "tag": "TY-116B", "kind": "positioner", "service": "Cooling"},
                    {"tag": "TV-116B", "area": "A1", "failure position": "FO"}],
    "three voting": [{**AI, "tag": f"PT-117{letter}", "service": "Column pressure", "I/O address": f"1.5.{number}",
                      "voting": "2oo3", "safety function": "SIF-7", "SIL": "2", "trip": "9", "trip direction": "high"}
                     for number, letter in enumerate("ABC", start=1)],
    "nothing but a signal": [{"tag": "PT-118", "I/O type": "AI"}],
}  # fmt: skip


@cache
def plant_of(kind: str) -> Plant:
    """Return a plant of one loop."""
    return example_plant(KINDS[kind], types=TYPES, areas=AREAS, cable_types=CABLES, plant={"name": "Marrowbeck Works"})


def whole_plant() -> Plant:
    """Return a plant of them all."""
    rows = [row for rows in KINDS.values() for row in rows]
    return example_plant(rows, types=TYPES, areas=AREAS, cable_types=CABLES, plant={"name": "Marrowbeck Works"})


if __name__ == "__main__":
    write_sheets(whole_plant(), Path(sys.argv[1]), notes={})
