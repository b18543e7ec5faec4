"""Small plants written in code, as the rules' examples and these tests use them."""

import pytest

from validation.example import FILE, example_lists, example_plant, findings, outcomes, said, unchecked_for

ROW = {"tag": "LT-1", "LRV": 0, "URV": 6, "range unit": "m", "HH": 7, "signal": "4-20 mA"}


def test_rows_become_a_plant() -> None:
    plant = example_plant([ROW])
    (installed,) = plant.instruments
    assert (installed.name, str(installed.record.urv), str(installed.record.setting_hh)) == ("LT-1", "6 m", "7 m")
    assert plant.file_name == FILE
    assert [cell.address for cell in installed.cells("urv")] == ["C2"]


def test_every_sheet_has_a_short_name() -> None:
    lists = example_lists(
        [ROW],
        types=[{"code": "T1", "kind": "transmitter"}],
        areas=[{"code": "A", "zone": "1"}],
        loops=[{"number": "L-1", "kind": "AI"}],
        cables=[{"number": "C-1", "from": "LT-1", "to": "MAR"}],
        cable_types=[{"code": "CT", "conductor size": "1.5 mm2"}],
        terminations=[{"from item": "LT-1", "from terminal": "1", "to item": "MAR"}],
        io_list=[{"tag": "LT-1", "I/O type": "AI"}],
        alarms=[{"tag": "LT-1", "HH": "7 m"}],
        plant={"numbering": "serial", "SET13 %": 7},
    )
    filled = [kind for kind, records in lists.records.items() if len(records) == 1]
    assert sorted(filled) == [
        "Alarm and trip list", "Areas", "Cable types", "Cables", "Device types", "IO list", "Instruments", "Loops",
        "Plant", "Terminations",
    ]  # fmt: skip
    assert lists.plant.numbering == "serial"
    assert lists.plant.threshold("SET13 %", 5.0) == 7.0
    assert lists.problems == ()


def test_a_blank_cell_is_a_blank() -> None:
    (installed,) = example_plant([{**ROW, "H": "", "L": None}]).instruments
    assert (installed.record.setting_h, installed.record.setting_l) == (None, None)


def test_what_one_rule_says() -> None:
    assert said("SET07", [ROW]) == ["LT-1: HH 7 m on 0 to 6 m needs 22.667 mA, the signal ends at 20.5 mA"]
    assert [each.subject for each in findings("SET07", [ROW])] == ["LT-1"]
    assert outcomes("SET07", [ROW, {"tag": "PG-2"}]) == {"finding": 1, "not applicable": 1}
    assert unchecked_for("SET07", [{**ROW, "URV": ""}]) == {"LRV or system LRV": 1, "URV or system URV": 1}


def test_a_review_is_marked() -> None:
    rows = [{"tag": "PT-1A", "trip": "8 barg"}, {"tag": "PT-1B", "trip": "9 barg"}]
    assert said("SET08", rows)[0].startswith("review: PT-1A, PT-1B: ")


def test_a_rule_that_there_is_not_says_nothing_unseen() -> None:
    with pytest.raises(KeyError):
        outcomes("TAG00", [ROW])
