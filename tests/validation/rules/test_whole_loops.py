"""Elements, wells and controllers that are alone: both sides of each boundary, exceptions and blanks."""

from typing import Any

import pytest

from tests.validation.rules.applied import Row, counts, found, rows_of, tell, untold

# ------------------------------------------------------------------------------------------------------------ DAT06

NEITHER = "{0}: an element with neither a transmitter in its loop {1} nor an input of its own"
NO_ELEMENT = "{0}: a well with no element in its loop {1}"


def with_io(*rows: str | Row) -> list[Row]:
    """Return rows of an index that has a column for I/O."""
    return [{"I/O type": "", "line": "L-1", **row} for row in rows_of(*rows)]


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (["TE-1"], [NEITHER.format("TE-1", "T-1")]),
        (["TE-1", "TT-1"], []),
        (["TE-1", "TIT-1"], []),
        (["TE-1", "TT-2"], [NEITHER.format("TE-1", "T-1")]),
        ([{"tag": "TE-1", "I/O type": "RTD"}], []),
        ([{"tag": "TE-1", "I/O address": "R1.1"}], []),
        ([{"tag": "TE-1", "card": "RTD-8"}], []),
        ([{"tag": "TE-1", "I/O type": "none"}], [NEITHER.format("TE-1", "T-1")]),
        # Local indication counts, and so does what takes the sensor's signal.
        (["TE-1", "TG-1"], []),
        (["TE-1", "TI-1"], []),
        (["AE-1", "AIT-1"], []),
        (["LE-1", "LSHH-1"], []),
        (["TE-1", {"tag": "TIC-1", "I/O type": "AI"}], []),
        (["TE-1", {"tag": "TIC-1", "I/O type": "AO"}], [NEITHER.format("TE-1", "T-1")]),
        (["TE-1", {"tag": "TIC-1", "location": "system"}], [NEITHER.format("TE-1", "T-1")]),
        (["TE-1", {"tag": "TY-1", "I/O type": "AI"}], []),
        (["TE-1", {"tag": "TY-1", "I/O type": "AO"}], [NEITHER.format("TE-1", "T-1")]),
        # Not live, in another loop by the column, of another prefix.
        (["TE-1", {"tag": "TT-1", "status": "deleted"}], [NEITHER.format("TE-1", "T-1")]),
        ([{"tag": "TE-1", "status": "void"}], []),
        ([{"tag": "TE-1", "loop": "T-5"}, {"tag": "TT-1", "loop": "T-6"}], [NEITHER.format("TE-1", "T-5")]),
        (["1-TE-1", "2-TT-1"], [NEITHER.format("1-TE-1", "1-T-1")]),
        # An orifice; its transmitter may be tagged by its differential pressure. A restriction measures nothing.
        (["FE-1"], [NEITHER.format("FE-1", "F-1")]),
        (["FE-1", "FT-1"], []),
        (["FE-1A", "PDT-1A"], []),
        (["FE-1A", "DPIT-1"], []),
        (["FE-1", "PDT-2"], [NEITHER.format("FE-1", "F-1")]),
        (["FO-1"], []),
        (["RO-1"], []),
        # Wells.
        (["TW-1"], [NO_ELEMENT.format("TW-1", "T-1")]),
        (["TW-1", "TT-1"], []),
        (["TW-1", "TG-1"], []),
        (["TW-1", {"tag": "TE-1", "I/O type": "RTD"}], []),
        (["TW-1", {"tag": "TG-1", "status": "deleted"}], [NO_ELEMENT.format("TW-1", "T-1")]),
        (["TW-1A", "TW-1B", {"tag": "TE-1A", "I/O type": "RTD"}], [NO_ELEMENT.format("TW-1B", "T-1")]),
        (["TW-1A", "TW-1B", {"tag": "TE-1", "I/O type": "RTD"}], []),
        (["TW-1A", {"tag": "TE-1A", "I/O type": "RTD"}, "TW-1B", {"tag": "TE-1B", "I/O type": "RTD"}], []),
        ([{"tag": "TW-1", "service": "Test thermowell, outlet"}], []),
        ([{"tag": "TW-1", "remarks": "plugged"}], []),
        # A measuring point of older lists.
        (["TW 27", {"tag": "TI 27", "signal": "Pt100", "I/O type": "RTD"}], []),
        ([{"tag": "T-1", "I/O type": "DI"}], []),
    ],
)  # fmt: skip
def test_an_element_or_a_well_is_not_alone(rows: list[str | Row], expected: list[str]) -> None:
    assert tell("DAT06", *with_io(*rows)) == expected


@pytest.mark.parametrize(
    ("rows", "sheets", "expected"),
    [
        # No list says what is wired to what.
        (["TE-1"], {}, {"I/O type or I/O address": 1}),
        (["TE-1", "TT-1"], {}, {}),
        ([{"tag": "BEARING", "kind": "temperature element", "I/O type": ""}, {"tag": "PT-2", "I/O type": "AI"},
          {"tag": "PT-3", "I/O type": "AI"}], {}, {"loop": 1}),
        ([{"tag": "PUMP 7", "I/O type": ""}], {}, {"kind": 1}),
        # The other lists do.
        ([{"tag": "TE-1", "line": "L-1"}], {"io_list": [{"tag": "TE-1", "I/O type": "RTD"}]}, {}),
        ([{"tag": "TE-1", "line": "L-1"}], {"loops": [{"number": "T-1", "circuit or tag": "TE-1", "kind": "RTD"}]}, {}),
    ],
)  # fmt: skip
def test_what_cannot_be_told_of_an_element(
    rows: list[str | Row], sheets: dict[str, Any], expected: dict[str, int]
) -> None:
    assert untold("DAT06", *rows, **sheets) == expected
    assert tell("DAT06", *rows, **sheets) == []


def test_the_input_list_finds_what_it_does_not_hold() -> None:
    rows = [{"tag": "TE-1", "line": "L-1"}, {"tag": "TE-2", "line": "L-1"}]
    assert tell("DAT06", *rows, io_list=[{"tag": "TE-1", "I/O type": "RTD"}]) == [NEITHER.format("TE-2", "T-2")]


def test_a_well_for_tests_is_not_applicable() -> None:
    assert counts("DAT06", {"tag": "TW-1", "service": "Test well"}) == {"not applicable": 1}


# ------------------------------------------------------------------------------------------------------------ DAT07

NO_FINAL = "{0}: {1} has no final element in its loop"
NO_MEASUREMENT = "{0}: {1} has no measurement in its loop"
CASCADE = ["TT-300", "FIC-301", "FT-301", "FV-301"]


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (["FIC-1", "FT-1", "FV-1"], []),
        (["FIC-1", "FT-1"], [NO_FINAL.format("F-1", "FIC-1")]),
        (["FIC-1", "FV-1"], [NO_MEASUREMENT.format("F-1", "FIC-1")]),
        (["FIC-1"], ["F-1: FIC-1 has no measurement and no final element in its loop"]),
        (["FIC-1A", "FIC-1B", "FT-1"], ["F-1: FIC-1A, FIC-1B have no final element in its loop"]),
        # Two loops of one number are two.
        (["FIC-1", "FT-1", "FV-1", "PIC-1", "PT-1", "PV-1"], []),
        (["FIC-1", "FT-1", "FV-1", "PIC-1", "PT-1"], [NO_FINAL.format("P-1", "PIC-1")]),
        # Measurements.
        (["TIC-1", "TE-1", "TV-1"], []),
        (["PIC-1", "PG-1", "PV-1"], [NO_MEASUREMENT.format("P-1", "PIC-1")]),
        (["LIC-1", "LSHH-1", "LV-1"], [NO_MEASUREMENT.format("L-1", "LIC-1")]),
        (["LC-1", "LSH-1", "LV-1"], []),
        ([{"tag": "LC-1", "location": "field"}, "LV-1"], []),
        ([{"tag": "FIC 3", "I/O type": "AI"}, {"tag": "FV 3", "I/O type": "AO"}], []),
        (["FIC-1", {"tag": "FT-1", "status": "void"}, "FV-1"], [NO_MEASUREMENT.format("F-1", "FIC-1")]),
        (["HIC-1", "FV-1", {"tag": "HV-1"}], []),
        (["HIC-1"], [NO_FINAL.format("H-1", "HIC-1")]),
        ([{"tag": "FFIC-3", "remarks": "ratio of FT-1 to FT-2"}, "FV-3", "FT-1", "FT-2"], []),
        (["FFIC-3", "FV-3", "FT-1", "FT-2"], [NO_MEASUREMENT.format("F-3", "FFIC-3")]),
        # Final elements.
        (["FIC-1", "FT-1", {"tag": "FY-1", "I/O type": "AO"}], []),
        (["FIC-1", "FT-1", {"tag": "P-1", "loop": "F-1", "I/O type": "AO"}], []),
        (["FIC-1", "FT-1", {"tag": "P-1", "loop": "F-1", "I/O type": "DO"}], []),
        (["FIC-1", "FT-1", {"tag": "P-1", "loop": "F-1", "I/O type": "DI"}], [NO_FINAL.format("F-1", "FIC-1")]),
        (["FIC-1", "FT-1", {"tag": "XL-1", "loop": "F-1", "I/O type": "DO"}], [NO_FINAL.format("F-1", "FIC-1")]),
        (["FIC-1", "FT-1", {"tag": "FV-1", "status": "deleted"}], [NO_FINAL.format("F-1", "FIC-1")]),
        # A controller that another names, or that names another, acts through it.
        ([{"tag": "TIC-300", "remarks": "cascade to FIC-301"}, *CASCADE], []),
        ([{"tag": "TIC-300", "remarks": "cascade to FIC 301"}, *CASCADE], []),
        ([{"tag": "TIC-300", "remarks": "see FT-301"}, *CASCADE], [NO_FINAL.format("T-300", "TIC-300")]),
        # The other loop's valve, named itself.
        ([{"tag": "TIC-300", "remarks": "override, output to FV-301"}, *CASCADE], []),
        ([{"tag": "TIC-300", "remarks": "cascade to FIC-302"}, *CASCADE], [NO_FINAL.format("T-300", "TIC-300")]),
        (["TIC-300", "TT-300", {"tag": "FIC-301", "remarks": "set point from TIC-300"}, "FT-301", "FV-301"], []),
        ([{"tag": "10-TIC-300", "remarks": "Cascade to 10-FIC-301"}, "10-TT-300", "10-FIC-301", "10-FT-301",
          "10-FV-301"], []),
        # The speed of a drive is measured by the drive.
        ([{"tag": "SIC-1", "I/O type": "AO"}], []),
        (["SIC-1", {"tag": "P-1", "loop": "S-1", "I/O type": "AO"}], []),
        (["SIC-1"], ["S-1: SIC-1 has no measurement and no final element in its loop"]),
        # Not controllers.
        ([{"tag": "LCP-1", "kind": "Local control panel"}], []),
        (["LCP-1"], []),
        (["ZIC-1"], []),
        (["PCV-1"], []),
        (["TCV-1", "TT-1"], []),
        (["ZSC-1", "XV-1"], []),
        (["TIR-1", "TT-1"], []),
    ],
)  # fmt: skip
def test_a_controller_has_a_measurement_and_a_final_element(rows: list[str | Row], expected: list[str]) -> None:
    assert tell("DAT07", *rows) == expected


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"number": "T-300", "parent loop": "F-301"}, []),
        ({"number": "F-301", "parent loop": "T-300"}, []),
        ({"number": "T-300", "parent loop": "F-900"}, []),
        ({"number": "T-300", "parent loop": "L-302"}, [NO_FINAL.format("T-300", "TIC-300")]),
        ({"number": "T-300", "parent loop": "T-300"}, [NO_FINAL.format("T-300", "TIC-300")]),
        ({"number": "T-300", "parent loop": ""}, [NO_FINAL.format("T-300", "TIC-300")]),
    ],
)
def test_a_parent_loop_with_a_controller_acts_for_its_child(row: Row, expected: list[str]) -> None:
    assert tell("DAT07", "TIC-300", *CASCADE, "LT-302", loops=[{"kind": "AI", **row}]) == expected


def test_an_unknown_kind_may_be_what_is_missing() -> None:
    assert untold("DAT07", "FIC-1", "FT-1", {"tag": "DOSING", "loop": "F-1", "I/O type": ""}) == {"kind": 1}


def test_a_list_without_valves_is_one_finding() -> None:
    few = [tag for number in range(4) for tag in (f"FIC-{number}", f"FT-{number}")]
    assert tell("DAT07", *few) == [NO_FINAL.format(f"F-{number}", f"FIC-{number}") for number in range(4)]
    more = [*few, "FIC-4", "FT-4", "FIC-5"]
    assert tell("DAT07", *more) == [
        "F-5: FIC-5 has no measurement in its loop",
        "list.xlsx: the list has no final element; 6 loops have a controller",
    ]
    assert untold("DAT07", *more) == {"final element": 5}
    assert tell("DAT07", *more, "FV-5") == [
        *[NO_FINAL.format(f"F-{number}", f"FIC-{number}") for number in range(5)],
        "F-5: FIC-5 has no measurement in its loop",
    ]


def test_a_list_of_functions_alone() -> None:
    rows = [f"FIC-{number}" for number in range(5)]
    assert tell("DAT07", *rows) == [
        "list.xlsx: the list has no measurement and no final element; 5 loops have a controller"
    ]
    assert found("DAT07", *rows)[0].wanted == (
        "the final elements and measurements of the loops, or the list that holds them"
    )
