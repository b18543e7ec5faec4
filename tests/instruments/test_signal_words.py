"""What the words of signals and of I/O types mean."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.signal_words import carries_live_zero, io_types, signal_class, signal_classes


@pytest.mark.parametrize(
    ("text", "classes", "one", "live_zero"),
    [
        ("4-20 mA", {"current"}, "current", True),
        ("4-20mA HART", {"current"}, "current", True),
        ("4..20 mA", {"current"}, "current", True),
        ("4...20mADC", {"current"}, "current", True),
        ("4 to 20 mA", {"current"}, "current", True),
        ("4–20 mA", {"current"}, "current", True),
        ("4/20 mA", {"current"}, "current", True),
        ("4-20", {"current"}, "current", True),
        ("20-4 mA", {"current"}, "current", True),
        ("HART", {"current"}, "current", True),
        ("4-20 mA + relay", {"current", "contact"}, "current", True),
        ("0-20 mA", {"current"}, "current", False),
        ("10-50 mA", {"current"}, "current", False),
        ("mA", {"current"}, "current", None),
        ("WirelessHART", {"bus"}, "bus", False),
        ("Wireless HART", {"bus"}, "bus", False),
        ("Profibus PA", {"bus"}, "bus", False),
        ("Modbus RTU", {"bus"}, "bus", False),
        ("FF", {"bus"}, "bus", False),
        ("4-20 mA / Modbus", {"current", "bus"}, "current", True),
        ("Pt100", {"RTD"}, "RTD", False),
        ("PT 100 3-wire", {"RTD"}, "RTD", False),
        ("RTD", {"RTD"}, "RTD", False),
        ("Ni120", {"RTD"}, "RTD", False),
        ("TC type K", {"thermocouple"}, "thermocouple", False),
        ("T/C", {"thermocouple"}, "thermocouple", False),
        ("Type J", {"thermocouple"}, "thermocouple", False),
        ("K-type", {"thermocouple"}, "thermocouple", False),
        ("Thermoelement", {"thermocouple"}, "thermocouple", False),
        ("VFC", {"contact"}, "contact", False),
        ("Volt-free contact", {"contact"}, "contact", False),
        ("NAMUR", {"contact"}, "contact", False),
        ("SPDT", {"contact"}, "contact", False),
        ("24 VDC", {"volts"}, "volts", False),
        ("230VAC", {"volts"}, "volts", False),
        ("0-10 V", {"voltage"}, None, False),
        ("1-5 VDC", {"voltage"}, None, False),
        ("±10 V", {"voltage"}, None, False),
        ("mV", {"voltage"}, None, False),
        ("pulse", {"pulse"}, None, False),
        ("Frequency", {"pulse"}, None, False),
        ("Digital", {"digital"}, None, False),
        ("On/Off", {"digital"}, None, False),
        ("analogue", set(), None, None),
        ("pneumatic 3-15 psi", set(), None, None),
        ("special", set(), None, None),
        ("", set(), None, None),
        (None, set(), None, None),
    ],
)
def test_what_a_signal_says(text: str | None, classes: set[str], one: str | None, live_zero: bool | None) -> None:
    assert signal_classes(text) == classes
    assert signal_class(text) == one
    assert carries_live_zero(text) is live_zero


@pytest.mark.parametrize(
    ("text", "types"),
    [
        ("AI", ("AI",)),
        ("ai", ("AI",)),
        ("AI-HART", ("AI",)),
        ("HART AI", ("AI",)),
        ("AIH", ("AI",)),
        ("SAI", ("AI",)),
        ("IS AI", ("AI",)),
        ("SIS-DI", ("DI",)),
        ("F&G DI", ("DI",)),
        ("AI 4-20mA", ("AI",)),
        ("Analog Input", ("AI",)),
        ("ANALOGUE IN", ("AI",)),
        ("Analogeingang", ("AI",)),
        ("EA", ("AI",)),
        ("SA", ("AO",)),
        ("ETOR", ("DI",)),
        ("STOR", ("DO",)),
        ("Entrée analogique", ("AI",)),
        ("Sorties TOR", ("DO",)),
        ("Entrada digital", ("DI",)),
        ("Salida analógica", ("AO",)),
        ("STORE", ()),
        ("SEA", ()),
        ("Analogausgang", ("AO",)),
        ("Binärausgang", ("DO",)),
        ("Digitaleingang", ("DI",)),
        ("Digital Input", ("DI",)),
        ("Discrete Output", ("DO",)),
        ("AE", ("AI",)),
        ("DA", ("DO",)),
        ("DI/DO", ("DI", "DO")),
        ("DI + DO", ("DI", "DO")),
        ("Digital In/Out", ("DI", "DO")),
        ("AI/AO", ("AI", "AO")),
        ("DI, DI", ("DI",)),
        ("RTD", ("RTD",)),
        ("RTD (AI)", ("RTD",)),
        ("AI/RTD", ("AI", "RTD")),
        ("TC", ("TC",)),
        ("T/C", ("TC",)),
        ("PI", ("PI",)),
        ("Pulse input", ("PI",)),
        ("BI", ("DI",)),
        ("DO-NO", ("DO",)),
        ("soft", ()),
        ("Bus", ()),
        ("P&ID", ()),
        ("main", ()),
        ("none", ()),
        ("", ()),
        (None, ()),
    ],
)
def test_what_an_io_type_says(text: str | None, types: tuple[str, ...]) -> None:
    assert io_types(text) == types


@given(st.text(max_size=200))
def test_any_text_can_be_asked(text: str) -> None:
    assert signal_class(text) is None or signal_class(text) in signal_classes(text)
    assert len(set(io_types(text))) == len(io_types(text))
    if carries_live_zero(text):
        assert "current" in signal_classes(text)
