"""A made-up list of any length for the benchmark: ordinary rows, every kind, a few mistakes in a hundred."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path
from typing import Any

from openpyxl import Workbook

HEADINGS = (
    "Tag No.", "Service Description", "Device Type", "Kind", "Unit", "Area", "P&ID No.", "Line No.", "Equipment",
    "Location", "Mounting", "Status", "Fluid", "Op Press Min", "Op Press Norm", "Op Press Max", "Design Press",
    "Op Temp Norm", "Op Temp Max", "Operating Min", "Operating Normal", "Operating Max", "LRV", "URV", "Range Unit",
    "LL", "L", "H", "HH", "Trip", "Trip Direction", "Failure Direction", "Failure Position", "Signal", "Wires",
    "I/O Type", "I/O Address", "Power Supply", "Receiver ohm", "Cable Length", "Conductor Size", "Ex Marking",
    "IP Rating", "Maker", "Remarks",
)  # fmt: skip
PRESSURES = ("Op Press Min", "Op Press Norm", "Op Press Max", "Design Press")
TEMPERATURES = ("Op Temp Norm", "Op Temp Max")
MARKING = "II 1 G Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +70°C"

TYPES = (
    ("Code", "Kind", "Body", "LRL", "URL", "Limit Unit", "Minimum Span", "Over-range limit", "Static pressure limit",
     "Process temperature min", "Process temperature max", "Ambient min", "Ambient max", "Signal", "Wires",
     "Lift-off V", "Maximum V", "High-alarm mA", "Ex Marking"),
    ("P-16", "pressure transmitter", "gauge", -1, 16, "barg", 0.4, 32, None, "-40 °C", "120 °C", "-40 °C", "85 °C",
     "4-20 mA HART", 2, 10.5, 42, 22, MARKING),
    ("D-05", "dp transmitter", "differential", -0.5, 0.5, "bar", 0.01, None, 160, "-40 °C", "120 °C", "-40 °C",
     "85 °C", "4-20 mA HART", 2, 10.5, 42, 22, MARKING),
    ("T-1", "temperature transmitter", None, None, None, None, None, None, None, "-40 °C", "400 °C", "-40 °C", "85 °C",
     "4-20 mA HART", 2, 11, 42, 22, MARKING),
    ("L-1", "level transmitter", None, None, None, None, None, None, None, "-40 °C", "150 °C", "-40 °C", "85 °C",
     "4-20 mA HART", 2, 12, 42, 22, MARKING),
)  # fmt: skip


def headings() -> list[str]:
    """Return the headings with the units that stand in them."""
    with_unit = dict.fromkeys(PRESSURES, "barg") | dict.fromkeys(TEMPERATURES, "°C") | {"Cable Length": "m"}
    return [f"{name} ({with_unit[name]})" if name in with_unit else name for name in HEADINGS]


def rows(tags: int) -> Iterator[list[Any]]:
    """Return the rows: in every ten, three loops, so that 50,000 tags have 15,000."""
    number = 0
    made = 0
    while made < tags:
        number += 1
        for row in _ten(number):
            if made == tags:
                return
            made += 1
            yield [row.get(name) for name in HEADINGS]


def _ten(number: int) -> Iterator[dict[str, Any]]:
    """Return ten tags in three loops: a pressure loop with its valve, a temperature and a level loop."""
    unit = f"{10 + number % 40}"
    wrong = number % 97 == 0
    common = {
        "Unit": unit,
        "P&ID No.": f"D-{unit}-{number % 300:03d}",
        "Line No.": f"{unit}-P-{number % 9000:04d}",
        "Equipment": f"V-{unit}{number % 90:02d}",
        "Status": "IFC",
        "Fluid": ("Water", "Steam", "Naphtha", "Air")[number % 4],
        "Op Press Min": 2,
        "Op Press Norm": 5,
        "Op Press Max": 8,
        "Design Press": 14,
        "Op Temp Norm": 40,
        "Op Temp Max": 60,
        "IP Rating": "IP66",
        "Maker": ("Brackwater", "Kestrix", "Ardwell")[number % 3],
        "Area": f"A{number % 8 + 1}",
    }
    field = {**common, "Location": "field", "Mounting": "impulse line"}
    wired = {
        "Signal": "4-20 mA HART",
        "Wires": 2,
        "Power Supply": "24 VDC",
        "Receiver ohm": 250,
        "Cable Length": 80 + number % 400,
        "Conductor Size": "1.5 mm2",
        "Failure Direction": "high",
    }
    base = number * 10
    system = {**common, "Location": "system"}
    yield {
        **field, **wired, "Tag No.": f"PT-{base:06d}", "Service Description": f"Feed {number} pressure",
        "Device Type": "P-16", "Kind": "pressure transmitter", "LRV": 0, "URV": 40 if wrong else 10,
        "Range Unit": "barg", "L": 3, "H": 8, "HH": 9, "LL": 1, "I/O Type": "AI", "I/O Address": f"N1.{number:05d}.1",
    }  # fmt: skip
    yield {**system, "Tag No.": f"PIC-{base:06d}", "Service Description": f"Feed {number} pressure control"}
    yield {
        **field, "Tag No.": f"PV-{base:06d}", "Service Description": f"Feed {number} control valve",
        "Kind": "control valve", "Failure Position": None if number % 211 == 0 else "FC", "Signal": "4-20 mA",
        "I/O Type": "AO", "I/O Address": f"N1.{number:05d}.2", "Cable Length": 90, "Conductor Size": "1.5 mm2",
        "Ex Marking": MARKING,
    }  # fmt: skip
    yield {
        **field, "Tag No.": f"PG-{base:06d}", "Service Description": f"Feed {number} local pressure",
        "Kind": "pressure gauge", "LRV": 0, "URV": 10, "Range Unit": "barg",
    }  # fmt: skip
    yield {
        **field, **wired, "Tag No.": f"TT-{base:06d}", "Service Description": f"Feed {number} temperature",
        "Device Type": "T-1", "Kind": "temperature transmitter", "Mounting": "thermowell", "LRV": 0, "URV": 100,
        "Range Unit": "°C", "Operating Min": 30, "Operating Normal": 45, "Operating Max": 60, "H": 80, "HH": 90,
        "I/O Type": "AI", "I/O Address": f"N1.{number:05d}.3",
    }  # fmt: skip
    yield {
        **field,
        "Tag No.": f"TE-{base:06d}",
        "Service Description": f"Feed {number} element",
        "Kind": "resistance thermometer",
        "Mounting": "thermowell",
        "Ex Marking": MARKING,
        "Signal": "Pt100",
    }
    yield {**field, "Tag No.": f"TW-{base:06d}", "Service Description": f"Feed {number} well", "Kind": "thermowell"}
    yield {
        **field, **wired, "Tag No.": f"LT-{base:06d}", "Service Description": f"Drum {number} level",
        "Device Type": "L-1", "Kind": "level transmitter", "Mounting": "direct", "LRV": 0, "URV": 3, "Range Unit": "m",
        "Operating Min": 1, "Operating Normal": 1.5, "Operating Max": 2, "L": 0.5, "H": 2.5, "LL": 0.2,
        "HH": 3.5 if wrong else 2.8, "I/O Type": "AI",
        "I/O Address": f"N1.{number:05d}.{1 if number % 389 == 0 else 4}",
    }  # fmt: skip
    yield {**system, "Tag No.": f"LIC-{base:06d}", "Service Description": f"Drum {number} level control"}
    yield {
        **field, "Tag No.": f"LV-{base:06d}", "Service Description": f"Drum {number} control valve",
        "Kind": "control valve", "Failure Position": "FO", "Signal": "4-20 mA", "I/O Type": "AO",
        "I/O Address": f"N1.{number:05d}.5", "Cable Length": 120, "Conductor Size": "1.5 mm2", "Ex Marking": MARKING,
    }  # fmt: skip


def write_list(path: Path, tags: int) -> int:
    """Write the list as a workbook; return the cells it holds."""
    book = Workbook(write_only=True)
    index = book.create_sheet("Instruments")
    index.append(["Made for measuring"])
    index.append([])
    index.append(headings())
    cells = len(HEADINGS)
    for row in rows(tags):
        index.append(row)
        cells += sum(1 for cell in row if cell is not None)
    types = book.create_sheet("Device types")
    for entry in TYPES:
        types.append(entry)
    areas = book.create_sheet("Areas")
    areas.append(["Code", "Zone", "Gas Group", "Temperature Class", "Ambient min", "Ambient max"])
    for number in range(1, 9):
        areas.append([f"A{number}", str(1 + number % 2), "IIB", "T3", -20, 40])
    book.save(path)
    return cells
