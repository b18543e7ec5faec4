"""What is missing from a row or cannot be read: each rule on both sides of its boundary, its blanks and fixes."""

import pytest

from tests.validation.rules.applied import Row, cells, fixes, found, tell, untold

# ------------------------------------------------------------------------------------------------------------ DAT01

WHOLE = {"P&ID": "D-1", "LRV": "0", "URV": "4", "range unit": "barg", "I/O type": "AI", "kind": ""}
NO_RANGE = {"LRV": "", "URV": "", "range unit": ""}


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({}, ""),
        ({"service": ""}, "service"),
        ({"service": "TBA"}, "service (to be defined)"),
        ({"P&ID": "", "service": "by vendor"}, "service (by vendor), P&ID"),
        ({"P&ID": "N/A"}, "P&ID (not applicable)"),
        ({"LRV": ""}, "LRV"),
        ({"URV": ""}, "URV"),
        (NO_RANGE, "range, range unit"),
        ({**NO_RANGE, "range unit": "barg"}, "range"),
        ({"range unit": "", "LRV": "0 barg", "URV": "4 barg"}, ""),
        # Kinds that are asked for no P&ID, or for no range.
        ({"tag": "PSH-1", **NO_RANGE}, ""),
        ({"tag": "FD-1", **NO_RANGE, "P&ID": ""}, ""),
        ({"tag": "GD-1", **NO_RANGE, "P&ID": ""}, "range, range unit"),
        ({"tag": "LG-1", **NO_RANGE}, ""),
        ({"tag": "LI-1", **NO_RANGE, "kind": "Standglas"}, ""),
        ({"tag": "PG-1", **NO_RANGE}, "range, range unit"),
        ({"tag": "TIC-1", **NO_RANGE, "P&ID": "", "I/O type": ""}, ""),
        ({"tag": "FV-1", **NO_RANGE}, ""),
        ({"tag": "FV-1", **NO_RANGE, "P&ID": ""}, "P&ID"),
        ({"tag": "PSV-1", **NO_RANGE}, ""),
        ({"tag": "HS-1", **NO_RANGE, "P&ID": ""}, ""),
        ({"tag": "JB-1", **NO_RANGE, "P&ID": ""}, ""),
        ({"tag": "AIT-1", **NO_RANGE}, "range, range unit"),
        # A contact tells a state, which has no range; a ratio has no unit.
        ({"tag": "BE-1", **NO_RANGE, "I/O type": "DI", "signal": "dry contact"}, ""),
        ({"tag": "AIT-1", **NO_RANGE, "I/O type": "DI"}, ""),
        ({"tag": "BE-1", **NO_RANGE, "I/O type": "AI", "signal": "dry contact"}, "range, range unit"),
        ({"tag": "LT-1", **NO_RANGE, "I/O type": "DI"}, "range, range unit"),
        ({"tag": "FFT-1", "range unit": ""}, ""),
        # A kind that the letters give counts as filled, and so does a word that is not understood.
        ({"tag": "PUMP 7", **NO_RANGE, "P&ID": ""}, ""),  # equipment, by its word and its I/O
        ({"tag": "UNIT 7", **NO_RANGE, "P&ID": ""}, "kind"),
        ({"tag": "PUMP 7", **NO_RANGE, "P&ID": "", "kind": "gizmo"}, ""),
        # What another rule finds: no tag, no unit, a cell that cannot be read.
        ({"tag": ""}, ""),
        ({"tag": "", "service": ""}, "service"),
        ({"range unit": ""}, ""),
        ({"range unit": "Hazen"}, ""),
        ({"URV": "4.0.5"}, ""),
        ({"status": "void", "service": ""}, ""),
        ({"tag": "P-1", "service": "", "I/O type": "DI"}, ""),
    ],
)  # fmt: skip
def test_what_is_required_is_filled(row: Row, expected: str) -> None:
    name = row.get("tag", "PT-1") or "Instruments: D-1"
    lines = tell("DAT01", {"tag": "PT-1", **WHOLE, **row}, {"tag": "PT-8", **WHOLE}, {"tag": "LT-9", **WHOLE})
    assert lines == ([f"{name}: required and blank: {expected}"] if expected else [])


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"range unit": ""}, {"LRV": 1, "URV": 1, "range unit": 1}),
        ({"range unit": "Hazen"}, {"LRV": 1, "URV": 1, "range unit": 1}),
        ({"URV": "4.0.5"}, {"URV": 1}),
        ({"tag": "P-1", "service": "", "I/O type": "DI"}, {}),
    ],
)
def test_what_another_rule_finds_is_unchecked(row: Row, expected: dict[str, int]) -> None:
    assert untold("DAT01", {"tag": "PT-1", **WHOLE, **row}, {"tag": "PT-9", **WHOLE}) == expected


@pytest.mark.parametrize(
    ("others", "expected"),
    [
        ([{"tag": "TT-1", **WHOLE}], []),
        # Without a transmitter DAT06 finds it; with an input of its own the range is its own.
        ([{"tag": "TT-2", **WHOLE}], []),
        ([{"tag": "TG-1", **WHOLE, "I/O type": ""}], ["TE-1: required and blank: range, range unit"]),
    ],
)
def test_an_element_leaves_its_range_to_its_transmitter(others: list[Row], expected: list[str]) -> None:
    assert tell("DAT01", {"tag": "TE-1", **WHOLE, **NO_RANGE, "I/O type": ""}, *others) == expected


def test_an_element_with_an_input_has_a_range() -> None:
    element = {"tag": "TE-1", **WHOLE, **NO_RANGE, "I/O type": "RTD"}
    assert tell("DAT01", element, {"tag": "PT-9", **WHOLE}) == ["TE-1: required and blank: range, range unit"]


@pytest.mark.parametrize(
    ("rows", "expected", "blanks"),
    [
        (["PT-1", "PT-2", "HS-3"],
         "P&ID (2 instruments), range (2 instruments), range unit (2 instruments)",
         {"P&ID": 2, "range": 2, "range unit": 2}),
        ([{"tag": "PT-1", "LRV": "0 bar", "URV": "1 bar"}, "HS-3"], "P&ID (1 instrument)", {"P&ID": 1}),
        (["PUMP 7", "PUMP 8"], "kind (2 instruments)", {"kind": 2}),
        (["HS-3", "HS-4"], "", {}),
    ],
)  # fmt: skip
def test_an_absent_column_is_one_finding_on_the_list(
    rows: list[str | Row], expected: str, blanks: dict[str, int]
) -> None:
    assert tell("DAT01", *rows) == ([f"list.xlsx: no sheet has a column for {expected}"] if expected else [])
    assert untold("DAT01", *rows) == blanks


def test_an_absent_column_leaves_the_others_to_be_found() -> None:
    rows = [{"tag": "PT-1", "service": "", "LRV": "0 bar", "URV": "1 bar"}, {"tag": "HS-3"}]
    assert tell("DAT01", *rows) == [
        "list.xlsx: no sheet has a column for P&ID (1 instrument)",
        "PT-1: required and blank: service",
    ]


def test_a_kind_of_a_type_that_is_not_listed_is_no_second_finding() -> None:
    types = [{"code": "A-1", "kind": "gauge", "URL": "1 bar"}]
    rows = [{"tag": "PUMP 6", "device type": ""}, {"tag": "PUMP 7", "device type": "A-2"}]
    rows += [{"tag": f"PUMP {number}", "device type": "A-1", "P&ID": "D-1", "range": "0-1 bar"} for number in (8, 9)]
    assert tell("DAT01", *rows, types=types) == ["PUMP 6: required and blank: kind"]


@pytest.mark.parametrize(
    ("required", "expected"),
    [
        ("tag; line", ["FV-1: required and blank: line", "PT-1: required and blank: line"]),
        ("signal", ["PT-1: required and blank: signal"]),
        ("failure position", ["FV-1: required and blank: failure position"]),
        ("area", [f"{tag}: required and blank: area" for tag in ("FV-1", "JB-1", "PT-1")]),
        ("set pressure", []),
        ("LRV; revision", [
            "FV-1: required and blank: revision", "JB-1: required and blank: revision",
            "PT-1: required and blank: LRV, revision", "TIC-1: required and blank: revision",
        ]),
    ],
)  # fmt: skip
def test_a_plant_says_what_it_requires_and_no_kind_is_asked_for_what_it_cannot_have(
    required: str, expected: list[str]
) -> None:
    blank = dict.fromkeys(
        ("line", "signal", "failure position", "area", "set pressure", "LRV", "revision", "equipment"), ""
    )
    rows = [{"tag": tag, **blank} for tag in ("PT-1", "FV-1", "JB-1", "TIC-1")]
    assert tell("DAT01", *rows, plant={"required fields": required}) == expected


def test_what_one_device_of_a_cell_cannot_have_is_not_asked_of_the_others() -> None:
    row = {"tag": "PT-1A/B", "serial": "123"}
    assert tell("DAT01", row, plant={"required fields": "serial"}) == []


def test_the_cells_of_what_is_blank() -> None:
    assert cells("DAT01", {"tag": "PT-1", **WHOLE, **NO_RANGE}, {"tag": "PT-9", **WHOLE}) == [
        ["Instruments D2", "Instruments E2", "Instruments F2"]
    ]


# ------------------------------------------------------------------------------------------------------------ DAT02


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "PT-1"}, "a transmitter that is on neither a line nor equipment"),
        ({"tag": "TE-1"}, "an element that is on neither a line nor equipment"),
        ({"tag": "XV-1"}, "an on/off valve that is on neither a line nor equipment"),
        ({"tag": "PSV-1"}, "a relief valve that is on neither a line nor equipment"),
        ({"tag": "PSHH-1"}, "a switch that is on neither a line nor equipment"),
        ({"tag": "PT-1", "line": "by vendor"}, "a transmitter that is on neither a line nor equipment"),
        ({"tag": "PT-1", "line": "L-1"}, ""),
        ({"tag": "PT-1", "equipment": "V-1"}, ""),
        # A valve's switches and its solenoid have the valve's line.
        ({"tag": "ZSO-1"}, ""),
        ({"tag": "GO-1", "kind": "Endschalter"}, ""),
        ({"tag": "GS-1", "kind": "level switch"}, "a switch that is on neither a line nor equipment"),
        ({"tag": "ZT-1"}, ""),
        ({"tag": "XY-1"}, ""),
        ({"tag": "GD-1"}, ""),
        ({"tag": "HS-1"}, ""),
        ({"tag": "FIC-1"}, ""),
        ({"tag": "JB-1"}, ""),
        ({"tag": "PT-1", "status": "deleted"}, ""),
        ({"tag": "P-1", "I/O type": "DI"}, ""),
    ],
)
def test_what_touches_the_process_is_on_a_line_or_on_equipment(row: Row, expected: str) -> None:
    blank = {"line": "", "equipment": "", "kind": ""}
    assert tell("DAT02", {**blank, **row}, {**blank, "tag": "PT-9", "line": "L-9"}) == (
        [f"{row['tag']}: {expected}"] if expected else []
    )


def test_a_blank_line_tells_its_reason_and_an_unknown_kind_is_unchecked() -> None:
    row = {"tag": "PT-1", "line": "by vendor", "kind": ""}
    assert [each.found for each in found("DAT02", row)] == ["blank (by vendor)"]
    assert untold("DAT02", {**row, "tag": "PUMP 7"}, {**row, "tag": "PUMP 8"}) == {"kind": 2}


@pytest.mark.parametrize(
    ("rows", "expected", "blanks"),
    [
        (["PT-1", "PT-2", "HS-3"],
         ["list.xlsx: no sheet has a column for line or equipment; 2 instruments touch the process"],
         {"line": 2, "equipment": 2}),
        (["PT-1"], ["list.xlsx: no sheet has a column for line or equipment; 1 instrument touches the process"],
         {"line": 1, "equipment": 1}),
        (["HS-3"], [], {}),
    ],
)  # fmt: skip
def test_without_either_column(rows: list[str], expected: list[str], blanks: dict[str, int]) -> None:
    assert tell("DAT02", *rows) == expected
    assert untold("DAT02", *rows) == blanks


# ------------------------------------------------------------------------------------------------------------ DAT05

GOOD = {"tag": "PT-9", "LRV": "0", "URV": "10", "range unit": "barg", "H": "8", "design pressure": "12 barg",
        "LRL": "0 barg", "trip": "9"}  # fmt: skip
WITHOUT = "without a unit in cell, heading or unit column"


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"LRV": "0", "URV": "10", "range unit": "barg"}, ""),
        ({"LRV": "0", "URV": "10 barg"}, ""),
        ({"LRV": "0", "URV": "10"}, "LRV 0, URV 10"),
        ({"LRV": "0", "URV": "10", "H": "8"}, "LRV 0, URV 10, H 8"),
        ({"URV": "10 barg", "H": "8"}, ""),
        ({"trip": "25"}, "trip 25"),
        ({"trip": "25 psig"}, ""),
        ({"design pressure": "12"}, "design pressure 12"),
        ({"LRL": "0"}, "LRL 0"),
        ({"LRV": "0", "URV": "10", "status": "void"}, ""),
    ],
)
def test_a_number_that_needs_a_unit_has_one(row: Row, expected: str) -> None:
    assert tell("DAT05", {"tag": "PT-1", **row}, GOOD) == ([f"PT-1: {expected} {WITHOUT}"] if expected else [])


@pytest.mark.parametrize(
    ("unread", "read"),
    [
        ({"range": "0-50 Hazen"}, {"range": "0-50 NTU"}),
        ({"LRV": "0", "URV": "50", "range unit": "Hazen"}, {"LRV": "0", "URV": "50", "range unit": "NTU"}),
    ],
)
def test_what_takes_its_unit_from_an_unread_range_is_no_finding_of_its_own(unread: Row, read: Row) -> None:
    values = {"H": "40", "operating value normal": "20"}
    row, good = {"tag": "AIT-1", **values, **unread}, {"tag": "AIT-2", **values, **read}
    assert tell("DAT05", row, good) == []
    assert len(tell("DAT09", row, good)) == 1


def test_equipment_is_not_asked_for_units() -> None:
    assert tell("DAT05", {"tag": "P-1", "URV": "10", "I/O type": "DI"}, GOOD) == []


def test_a_ratio_needs_no_unit() -> None:
    ratio = {"tag": "FFIC-1", "LRV": "0", "URV": "3", "H": "2.5", "range unit": "-"}
    assert tell("DAT05", ratio, GOOD) == []
    assert tell("DAT05", {**ratio, "design pressure": "10"}, GOOD) != []


def test_a_number_of_a_row_that_agrees_with_another() -> None:
    blank = {"tag": "PT-1", "URV": ""}
    assert tell("DAT05", {"tag": "PT-1", "URV": "10"}, blank, GOOD) == [f"PT-1: URV 10 {WITHOUT}"]
    assert tell("DAT05", {"tag": "PT-1", "URV": "10"}, {"tag": "PT-1", "URV": "10 barg"}, GOOD) == []


NO_VALUE = "list.xlsx: no value of {} has a unit, in its cell, its heading or a unit column ({} values)"


@pytest.mark.parametrize(
    ("rows", "expected", "blanks"),
    [
        # The columns that take their unit from one place lack it for one cause.
        ([{"LRV": "0", "URV": "10", "H": "8"}, {"LRV": "0", "URV": "10", "H": "8"}],
         [NO_VALUE.format("LRV, URV, H", 6)], {"LRV": 2, "URV": 2, "H": 2}),
        ([{"range": "0-10"}, {"range": "0-10"}], [NO_VALUE.format("LRV, URV", 4)], {"LRV": 2, "URV": 2}),
        ([{"URV": "10", "design pressure": "12"}, {"URV": "10", "design pressure": "14"}],
         [NO_VALUE.format("design pressure", 2), NO_VALUE.format("URV", 2)], {"design pressure": 2, "URV": 2}),
        ([{"trip": "10"}, {"trip": "12"}], [NO_VALUE.format("trip", 2)], {"trip": 2}),
        ([{"LRL": "0", "URL": "12"}, {"LRL": "0", "URL": "12"}], [NO_VALUE.format("LRL, URL", 4)],
         {"LRL": 2, "URL": 2}),
        # Of a column beside it that takes its unit from there a few values have their own.
        ([{"LRV": "0", "URV": "10", "H": "8"}, {"LRV": "0", "URV": "10", "H": "8"}, {"LRV": "0", "URV": "9",
          "H": "7 barg"}], [NO_VALUE.format("LRV, URV, H", 8)], {"LRV": 3, "URV": 3, "H": 2}),
        ([{"LRV": "0", "URV": "10", "H": "8"}, {"LRV": "0", "URV": "10", "H": "8 barg"}, {"H": "7 barg"}],
         [NO_VALUE.format("LRV, URV", 4), f"PT-0: H 8 {WITHOUT}"], {"LRV": 1, "URV": 1}),
        # One row is no column, and one value with a unit makes the others slips.
        ([{"URV": "10"}], [f"PT-0: URV 10 {WITHOUT}"], {}),
        ([{"URV": "10"}, {"URV": "12"}, {"URV": "16 barg"}],
         [f"PT-0: URV 10 {WITHOUT}", f"PT-1: URV 12 {WITHOUT}"], {}),
    ],
)  # fmt: skip
def test_a_whole_column_without_units_is_one_finding(
    rows: list[Row], expected: list[str], blanks: dict[str, int]
) -> None:
    listed = [{"tag": f"PT-{number}", **row} for number, row in enumerate(rows)]
    assert tell("DAT05", *listed) == expected
    assert untold("DAT05", *listed) == blanks


def test_an_entry_of_the_catalogue_is_found_once_however_many_instruments_name_it() -> None:
    rows = [{"tag": f"PT-{number}", "device type": "A"} for number in range(3)]
    entry = {"code": "A", "LRL": "0", "URL": "10"}
    good = {"code": "B", "LRL": "0 barg", "URL": "10 barg"}
    assert tell("DAT05", *rows, types=[entry, good]) == [f"A: LRL 0, URL 10 {WITHOUT}"]
    assert tell("DAT05", *rows, types=[entry, {**entry, "code": "B"}]) == [NO_VALUE.format("LRL, URL", 4)]
    assert tell("DAT05", *rows, types=[good]) == []


# ------------------------------------------------------------------------------------------------------------ DAT09


@pytest.mark.parametrize(
    ("row", "expected", "offered"),
    [
        ({"range unit": "Hazen"}, "range unit: 'Hazen' cannot be read: unit 'Hazen' is not known", []),
        ({"URV": "1,000"}, "URV: '1,000' cannot be read: '1,000' may have a decimal mark or a thousands mark",
         [{"URV": "1 barg"}, {"URV": "1000 barg"}]),
        ({"H": "1,000 psig"}, "H: '1,000 psig' cannot be read: '1,000' may have a decimal mark or a thousands mark",
         [{"H": "1 psig"}, {"H": "1000 psig"}]),
        ({"H": "4.0.5"}, "H: '4.0.5' cannot be read: '4.0.5' is not a number", []),
        ({"area classification": "Zone X"}, "area classification: 'Zone X' cannot be read: no zone or division, and "
         "no word for an unclassified place, is read in it", []),
        ({"H": "5"}, "", []),
        ({"H": "4.0.5", "status": "deleted"}, "", []),
    ],
)  # fmt: skip
def test_a_cell_that_cannot_be_read(row: Row, expected: str, offered: list[dict[str, str]]) -> None:
    good = {"LRV": "0", "URV": "10", "range unit": "barg", "H": "8", "area classification": "Zone 1 IIB T3"}
    rows = [{"tag": "PT-1", **good, **row}, {"tag": "PT-8", **good}, {"tag": "PT-9", **good}]
    assert tell("DAT09", *rows) == ([f"PT-1: {expected}"] if expected else [])
    assert [change for _, _, change in fixes("DAT09", *rows) if change] == offered


def test_the_readings_that_were_considered_are_offered_with_their_unit() -> None:
    row = {"tag": "PT-1", "URV": "1,000", "range unit": "barg"}
    assert fixes("DAT09", row, {"tag": "PT-2", "URV": "5", "range unit": "barg"}) == [
        ("PT-1", "URV 1", {"URV": "1 barg"}),
        ("PT-1", "URV 1000", {"URV": "1000 barg"}),
    ]


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ([{"H": "4.0.5"}, {"H": "1.2.3"}, {"H": "1.2.4"}],
         "list.xlsx: H: none of its 3 cells can be read, such as '4.0.5': '4.0.5' is not a number"),
        ([{"area classification": "Zone X"}, {"area classification": "Foo"}],
         "list.xlsx: area classification: none of its 2 cells can be read, such as 'Zone X': no zone or division, "
         "and no word for an unclassified place, is read in it"),
    ],
)  # fmt: skip
def test_a_column_that_cannot_be_read_is_one_finding(rows: list[Row], expected: str) -> None:
    listed = [{"tag": f"AIT-{number}", "LRV": "0", "URV": "5", **row} for number, row in enumerate(rows)]
    # The example that is quoted for a column is its first cell, which another order of rows changes.
    assert [f"{each.subject}: {each.message}" for each in found("DAT09", *listed)] == [expected]


def test_a_cell_is_found_once_whoever_shares_it() -> None:
    shared = {"tag": "TE-1A/B", "URV": "4.0.5"}
    good = {"tag": "TE-2", "URV": "5 °C"}
    assert tell("DAT09", shared, good) == ["TE-1A: URV: '4.0.5' cannot be read: '4.0.5' is not a number"]
    assert untold("DAT09", shared, good) == {"URV": 1}
    agreeing = {"tag": "TE-2", "URV": "4.0.5"}
    assert tell("DAT09", agreeing, good) == ["TE-2: URV: '4.0.5' cannot be read: '4.0.5' is not a number"]


def test_cells_of_other_sheets_are_found_under_their_own_names() -> None:
    types = [{"code": "A", "LRL": "x.y", "URL": "10 bar"}, {"code": "B", "LRL": "0 bar", "URL": "10 bar"}]
    assert tell("DAT09", {"tag": "PT-1", "device type": "A"}, types=types) == [
        "A: LRL: 'x.y' cannot be read: 'x.y' is not a number"
    ]


def test_equipment_is_asked_by_no_rule_about_data() -> None:
    assert tell("DAT09", {"tag": "P-1", "URV": "4.0.5", "I/O type": "DI"}, {"tag": "PT-2", "URV": "5 bar"}) == []
