"""Names and the sheets that list them, rows and their device types: boundaries, exceptions, blanks and fixes."""

from typing import Any

import pytest

from tests.validation.rules.applied import Row, cells, fixes, found, tell, untold

# ------------------------------------------------------------------------------------------------------------ DAT10

TYPES: list[Row] = [
    {"code": "DP-30", "kind": "pressure transmitter", "URL": "10 barg"},
    {"code": "DP-31", "kind": "pressure transmitter", "URL": "16 barg"},
    {"code": "AI-16", "kind": "card", "URL": ""},
    {"code": "IS-1", "kind": "isolator", "URL": ""},
    {"code": "PS-24", "kind": "power supply", "URL": ""},
]
AREAS = [{"code": code, "zone": "2", "gas group": "IIB", "temperature class": "T3"} for code in ("10A", "10B", "20B")]
CABLES = [{"number": "C-101", "type": "IS-1P", "length": "10"}, {"number": "C-202", "type": "IS-1P", "length": "20"}]
CABLE_TYPES = [{"code": code, "ohm per km": 12.1, "class": "2"} for code in ("IS-1P", "NIS-1P", "TX-1P")]
SHEETS: dict[str, Any] = {"types": TYPES, "areas": AREAS, "cables": CABLES, "cable_types": CABLE_TYPES}
# Rows that name everything as it is listed, so that no column is one that names nothing.
GOOD: Row = {
    "device type": "DP-30", "area": "10A", "barrier": "IS-1", "card": "AI-16", "power supply": "PS-24",
    "cable": "C-101", "cable type": "IS-1P",
}  # fmt: skip


def tell_of(row: Row, **sheets: Any) -> list[str]:
    return tell("DAT10", {"tag": "PT-1", **GOOD, **row}, {"tag": "PT-8", **GOOD}, **{**SHEETS, **sheets})


def offered(row: Row, **sheets: Any) -> list[tuple[str, str, dict[str, str]]]:
    return fixes("DAT10", {"tag": "PT-1", **GOOD, **row}, {"tag": "PT-8", **GOOD}, **{**SHEETS, **sheets})


@pytest.mark.parametrize(
    ("row", "expected", "nearest"),
    [
        ({}, "", []),
        ({"device type": "dp -30"}, "", []),
        ({"device type": "DP-3O"}, "device type DP-3O is not listed on Device types",
         [{"device type": "DP-30"}, {"device type": "DP-31"}]),
        # A type is a code; a barrier, a card or a supply may be a tag of the list.
        ({"device type": "PT-8"}, "device type PT-8 is not listed on Device types", []),
        ({"barrier": "PT-8"}, "", []),
        ({"card": "AI-61"}, "card AI-61 is not listed on Device types", [{"card": "AI-16"}]),
        ({"barrier": "IS-l"}, "barrier IS-l is not listed on Device types", [{"barrier": "IS-1"}]),
        ({"barrier": "yes"}, "", []),
        ({"barrier": "Zener"}, "", []),
        ({"area": "10C"}, "area 10C is not listed on Areas", [{"area": "10A"}, {"area": "10B"}]),
        ({"area": "Zone 2 IIB T3"}, "", []),
        ({"area": "safe"}, "", []),
        ({"area": "10C", "area classification": "Zone 2 IIB T3"}, "area 10C is not listed on Areas",
         [{"area": "10A"}, {"area": "10B"}]),
        ({"cable": "C-110"}, "cable C-110 is not listed on Cables", [{"cable": "C-101"}]),
        ({"cable": "C-101; C-220"}, "cable C-220 is not listed on Cables", [{"cable": "C-101; C-202"}]),
        ({"cable": "C-101, C-202"}, "", []),
        ({"cable type": "IS-1PR"}, "cable type IS-1PR is not listed on Cable types", [{"cable type": "IS-1P"},
         {"cable type": "NIS-1P"}]),
        ({"cable type": "2 x 1.5 mm2"}, "", []),
        # Volts and words are no supply's name.
        ({"power supply": "24 VDC"}, "", []),
        ({"power supply": "24"}, "", []),
        ({"power supply": "loop"}, "", []),
        ({"power supply": "230 V AC, UPS"}, "", []),
        ({"power supply": "from the card"}, "", []),
        ({"power supply": "PS-42"}, "power supply PS-42 is not listed on Device types", [{"power supply": "PS-24"}]),
        # Blank, a placeholder, not live.
        ({"card": "TBA", "barrier": ""}, "", []),
        ({"card": "12"}, "", []),  # the slot that it sits in
        ({"card": "Slot 3"}, "", []),
        ({"card": "AI-61", "status": "deleted"}, "", []),
    ],
)  # fmt: skip
def test_what_is_named_is_listed(row: Row, expected: str, nearest: list[dict[str, str]]) -> None:
    assert tell_of(row) == ([f"PT-1: {expected}"] if expected else [])
    assert [change for _, _, change in offered(row)] == nearest


def test_equipment_is_asked_for_no_names() -> None:
    row = {"tag": "P-1", **GOOD, "card": "AI-61", "I/O type": "DI"}
    assert tell("DAT10", row, {"tag": "PT-8", **GOOD, "I/O type": "AI"}, **SHEETS) == []


@pytest.mark.parametrize(
    ("sheet", "twin", "row", "expected"),
    [
        ("types", {"code": "DP-30", "kind": "pressure transmitter", "URL": "25 barg"}, {},
         "device type DP-30 is listed twice on Device types, with different figures"),
        ("types", {"code": "DP-30", "kind": "pressure transmitter", "URL": "10 barg"}, {}, ""),
        ("areas", {"code": "10A", "zone": "1", "gas group": "IIB"}, {},
         "area 10A is listed twice on Areas, with different figures"),
        ("cables", {"number": "C-101", "type": "IS-1P", "length": "15"}, {},
         "cable C-101 is listed twice on Cables, with different figures"),
        ("cable_types", {"code": "IS-1P", "ohm per km": 7.41, "class": "2"}, {},
         "cable type IS-1P is listed twice on Cable types, with different figures"),
    ],
)  # fmt: skip
def test_two_different_entries_with_a_name_are_none(sheet: str, twin: Row, row: Row, expected: str) -> None:
    lines = tell_of(row, **{sheet: [*SHEETS[sheet], twin]})
    assert lines == ([f"PT-1: {expected}", f"PT-8: {expected}"] if expected else [])
    turned = tell_of(row, **{sheet: [twin, *SHEETS[sheet]]})
    assert turned == lines


def test_a_wrong_name_is_found_in_each_cell_that_has_it() -> None:
    wrong = [{**CABLES[0], "type": "IS-1PR"}, CABLES[1]]
    rows = [{"tag": "PT-1", **GOOD, "cable type": "IS-1PR"}, {"tag": "PT-8", **GOOD, "cable": "C-202"}]
    lines = tell("DAT10", *rows, **{**SHEETS, "cables": wrong})
    assert lines == ["PT-1: cable type IS-1PR is not listed on Cable types"] * 2
    each = found("DAT10", *rows, **{**SHEETS, "cables": wrong})
    assert [(one.part, one.fixes[0].sheet, one.fixes[0].subject) for one in each] == [
        ("cable type", "Instruments", "PT-1"),
        ("cable type of C-101", "Cables", "C-101"),
    ]


def test_names_of_the_circuit_are_the_instruments() -> None:
    loop = {"number": "P-1", "circuit or tag": "PT-1", "kind": "AI", "card": "AI-61", "cable type": "NS-1P"}
    assert tell_of({}, loops=[loop]) == [
        "PT-1: cable type NS-1P is not listed on Cable types",
        "PT-1: card AI-61 is not listed on Device types",
    ]
    assert offered({}, loops=[loop]) == [
        ("PT-1", "cable type NIS-1P", {"cable type": "NIS-1P"}),
        ("PT-1", "cable type IS-1P", {"cable type": "IS-1P"}),
        ("PT-1", "card AI-16", {"card": "AI-16"}),
    ]
    rows: list[Row] = [{"tag": "PT-1", **GOOD}, {"tag": "PT-8", **GOOD}]
    assert cells("DAT10", *rows, **SHEETS, loops=[loop])[1] == ["Instruments F2", "Loops D2"]


def test_the_type_of_a_cable_is_named_by_what_the_cable_wires() -> None:
    wrong = [{**CABLES[0], "type": "IS-1PR"}, CABLES[1]]
    row = {"cable": "C-202", "I/O type": "AI"}
    lines = tell("DAT10", {"tag": "PT-1", **GOOD, **row}, {"tag": "PT-8", **GOOD, "I/O type": "AI"}, **{
        **SHEETS, "cables": wrong,
    })  # fmt: skip
    assert lines == ["PT-8: cable type IS-1PR is not listed on Cable types"]
    fix = fixes("DAT10", {"tag": "PT-8", **GOOD, "I/O type": "AI"}, **{**SHEETS, "cables": wrong})[0]
    assert fix == ("C-101", "cable type IS-1P", {"type": "IS-1P"})


def test_a_name_of_one_of_several_signals_is_no_value_for_the_others() -> None:
    rows = [
        {"tag": "PT-1", **GOOD, "card": "AI-61", "I/O address": "1.1"},
        {"tag": "PT-1", **GOOD, "I/O address": "1.2"},
        {"tag": "PT-8", **GOOD},
    ]
    assert tell("DAT10", *rows, **SHEETS) == ["PT-1: card AI-61 is not listed on Device types"]
    assert fixes("DAT10", *rows, **SHEETS) == [("PT-1", "card AI-16", {})]


@pytest.mark.parametrize(
    ("row", "absent", "expected", "blanks"),
    [
        ({"area": "10A"}, ("areas",), "Areas: 2 names under area, such as 10A", {"area": 2}),
        ({"cable": "C-101", "cable type": "IS-1P"}, ("cables", "cable_types"),
         "Cable types: 2 names under cable type, such as IS-1P; Cables: 2 names under cable, such as C-101",
         {"cable": 2, "cable type": 2}),
        ({"card": "AI-16", "barrier": "IS-1"}, ("types",),
         "Device types: 2 names under barrier, such as IS-1, 2 names under card, such as AI-16",
         {"barrier": 2, "card": 2}),
        # Where no area is listed, a row with a classification names a part of the plant.
        ({"area": "Filter gallery", "area classification": "Zone 2 IIB T3"}, ("areas",), "", {}),
        ({"area": "Filter gallery", "area classification": "safe"}, ("areas",), "", {}),
    ],
)  # fmt: skip
def test_an_absent_sheet_is_one_finding_on_the_list(
    row: Row, absent: tuple[str, ...], expected: str, blanks: dict[str, int]
) -> None:
    rows = [{"tag": "PT-1", **row}, {"tag": "PT-2", **row}]
    sheets = {name: sheet for name, sheet in SHEETS.items() if name not in absent}
    lines = [f"list.xlsx: the list names what no sheet describes: {expected}"] if expected else []
    assert tell("DAT10", *rows, **sheets) == lines
    assert untold("DAT10", *rows, **sheets) == blanks
    assert len(found("DAT10", *rows, **sheets)) == len(lines)


@pytest.mark.parametrize(
    ("wrong", "good", "expected"),
    [
        (4, 0, [f"PT-{n}: card Q{n} is not listed on Device types" for n in range(4)]),
        (5, 0, ["list.xlsx: the list names what no sheet describes: "
                "Device types: none of the 5 names under card is on it, such as Q0"]),
        (5, 1, [f"PT-{n}: card Q{n} is not listed on Device types" for n in range(5)]),
    ],
)  # fmt: skip
def test_a_column_that_names_nothing_that_is_listed(wrong: int, good: int, expected: list[str]) -> None:
    rows = [{"tag": f"PT-{n}", "card": f"Q{n}"} for n in range(wrong)]
    rows += [{"tag": f"LT-{n}", "card": "AI-16"} for n in range(good)]
    assert tell("DAT10", *rows, types=TYPES) == expected


# ------------------------------------------------------------------------------------------------------------ DAT11


def against(row: Row, entry: Row) -> tuple[list[Row], dict[str, Any]]:
    types = [{"code": "P1", "kind": "transmitter", "maximum V": "42", **entry}, {"code": "P2", "kind": "card"}]
    return [{"tag": "PT-1", "device type": "P1", **row}], {"types": types}


SAYS = "PT-1: {0}: the row says {1}, its device type P1 says {2}"


@pytest.mark.parametrize(
    ("title", "on_row", "by_type", "shown"),
    [
        ("wires", "4", "2", ("4", "2")),
        ("wires", "2", "2", ()),
        ("signal", "4-20 mA", "4-20mA HART", ()),
        ("signal", "Profibus PA", "4-20 mA", ("Profibus PA", "4-20 mA")),
        ("certificate", "ABC 19 ATEX 0301", "ABC 19 ATEX 0310", ("ABC 19 ATEX 0301", "ABC 19 ATEX 0310")),
        ("certificate", "ABC19ATEX0301", "ABC 19 ATEX 0301", ()),
        ("certificate", "ABC 19 ATEX 0301", "ABC 19 ATEX 0301 X", ("ABC 19 ATEX 0301", "ABC 19 ATEX 0301 X")),
        # A row may name one of a type's certificates.
        ("certificate", "ABC 19 ATEX 0301", "ABC 19 ATEX 0301 / IECEx ABC 19.0012", ()),
        ("certificate", "ABC 19 ATEX 0302", "ABC 19 ATEX 0301 / IECEx ABC 19.0012",
         ("ABC 19 ATEX 0302", "ABC 19 ATEX 0301 / IECEx ABC 19.0012")),
        # Of a marking what both state is compared.
        ("Ex marking", "Ex ia IIC T4", "II 1 G Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +70°C", ()),
        ("Ex marking", "EX IA IIC T4 GA", "Ex ia IIC T4 Ga", ()),
        ("Ex marking", "Ex ia IIB T4 Ga", "Ex ia IIC T4 Ga", ("Ex ia IIB T4 Ga", "Ex ia IIC T4 Ga")),
        ("Ex marking", "Ex ia IIC T4 Gb", "Ex ia IIC T4 Ga", ("Ex ia IIC T4 Gb", "Ex ia IIC T4 Ga")),
        ("Ex marking", "Ex ia IIC T6", "Ex ia IIC T4", ("Ex ia IIC T6", "Ex ia IIC T4")),
        ("Ex marking", "Ex db IIC T4", "Ex ia IIC T4", ("Ex db IIC T4", "Ex ia IIC T4")),
        ("Ex marking", "Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +60°C", "Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +70°C",
         ("Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +60°C", "Ex ia IIC T4 Ga -40°C ≤ Ta ≤ +70°C")),
        # Limits, in whatever unit.
        ("URL", "16 barg", "10 barg", ("16 barg", "10 barg")),
        ("URL", "1000 kPag", "10 barg", ()),
        ("LRL", "0 psig", "0 barg", ()),
        ("URL", "10 bara", "10 barg", ("10 bara", "10 barg")),
        ("HART", "yes", "no", ("yes", "no")),
        ("lift-off V", "10.5", "12", ("10.5", "12")),
        ("lift-off V", "10.5", "10.50", ()),
        ("Ui V", "30", "28", ("30", "28")),
        ("body", "gauge", "absolute", ("gauge", "absolute")),
        ("ambient limit max", "60 °C", "85 °C", ("60 °C", "85 °C")),
        ("sensor type", "Pt100", "PT 100 3-wire", ()),
        ("sensor type", "Pt100", "type K", ("Pt100", "type K")),
    ],
)  # fmt: skip
def test_row_and_type_say_the_same(title: str, on_row: str, by_type: str, shown: tuple[str, ...]) -> None:
    rows, sheets = against({title: on_row}, {title: by_type})
    assert tell("DAT11", *rows, **sheets) == ([SAYS.format(title, *shown)] if shown else [])
    assert fixes("DAT11", *rows, **sheets) == (
        [
            ("PT-1", f"{title} {shown[1]} on the row", {title: shown[1]}),
            ("P1", f"{title} {shown[0]} on the device type P1", {title: shown[0]}),
        ]
        if shown
        else []
    )
    if shown:
        sheets_of = [place.partition(" ")[0] for place in cells("DAT11", *rows, **sheets)[0]]
        assert sheets_of == ["Instruments", "Device"]


def test_each_thing_is_a_part() -> None:
    rows, sheets = against({"wires": "4", "URL": "16 barg"}, {"wires": "2", "URL": "10 barg"})
    assert [each.part for each in found("DAT11", *rows, **sheets)] == ["URL", "wires"]


@pytest.mark.parametrize(
    ("row", "entry", "blanks"),
    [
        ({"wires": ""}, {"wires": "2"}, {}),
        ({"wires": "2"}, {"wires": ""}, {}),
        ({"signal": "by radio"}, {"signal": "4-20 mA"}, {"signal": 1}),
        ({"Ex marking": "flameproof"}, {"Ex marking": "Ex ia IIC T4"}, {"Ex marking": 1}),
        ({"URL": "1.6.0 barg"}, {"URL": "10 barg"}, {"URL": 1}),
        ({"URL": "16"}, {"URL": "10 barg"}, {"URL": 1}),
        ({"device type": "P9", "wires": "4"}, {"wires": "2"}, {}),
    ],
)
def test_what_cannot_be_compared(row: Row, entry: Row, blanks: dict[str, int]) -> None:
    rows, sheets = against(row, entry)
    good = {"tag": "PT-8", "device type": "P1", "wires": "2", "URL": "10 barg", "I/O type": "AI"}
    assert tell("DAT11", *rows, good, **sheets) == []
    assert untold("DAT11", *rows, good, **sheets) == blanks
