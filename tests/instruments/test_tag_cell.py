"""Cells of a tag column that hold several tags, or a tag and a note."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.tag_cell import split_note, tags_of_cell
from instruments.tag_profile import PROFILES
from instruments.tag_text import normalise_tag

SEVERAL = {
    "TE-2001A/B": "TE-2001A TE-2001B",
    "PV-12A/B/C": "PV-12A PV-12B PV-12C",
    "PT-1001A,B": "PT-1001A PT-1001B",
    "PT-1001 A, B & C": "PT-1001A PT-1001B PT-1001C",
    "PT-1001 TO 1004": "PT-1001 PT-1002 PT-1003 PT-1004",
    "PT-1001 to PT-1003": "PT-1001 PT-1002 PT-1003",
    "PT-1001..1003": "PT-1001 PT-1002 PT-1003",
    "PT-1001…1003": "PT-1001 PT-1002 PT-1003",
    "PT-1001-1003": "PT-1001 PT-1002 PT-1003",
    "TE-0998 thru 1001": "TE-0998 TE-0999 TE-1000 TE-1001",
    "TE-1 bis 3": "TE-1 TE-2 TE-3",
    "TE-12A-D": "TE-12A TE-12B TE-12C TE-12D",
    "PT-1001 A thru C": "PT-1001A PT-1001B PT-1001C",
    "PT-1001A~C": "PT-1001A PT-1001B PT-1001C",
    "PT-1001A-PT-1001C": "PT-1001A PT-1001B PT-1001C",
    "FIT-0101/0102": "FIT-0101 FIT-0102",
    "PT-1001/2/3": "PT-1001 PT-1002 PT-1003",
    "PT-1001 & 1002": "PT-1001 PT-1002",
    "PT-1001 und PT-1002": "PT-1001 PT-1002",
    "PT-1001\nPT-1002": "PT-1001 PT-1002",
    "PT-1001; FT-7": "PT-1001 FT-7",
    "LI-12/LAH-12": "LI-12 LAH-12",
    "LI/LAH-12": "LI-12 LAH-12",
    "LI-12/LAH": "LI-12 LAH-12",
    "10-LI/LAH-12A": "10-LI-12A 10-LAH-12A",
    "ZSO/C-101": "ZSO-101 ZSC-101",
    "LSHH/LL-14": "LSHH-14 LSLL-14",
    "PSH/L-7": "PSH-7 PSL-7",
    "10-PT-1001/PT-1002": "10-PT-1001 10-PT-1002",
    "PCV-101-1/2": "PCV-101-1 PCV-101-2",
    "PCV-101-1/-2": "PCV-101-1 PCV-101-2",
    "PT-1A/B, PT-2A/B": "PT-1A PT-1B PT-2A PT-2B",
    "P-101A/B": "P-101A P-101B",
}


@pytest.mark.parametrize(("cell", "tags"), SEVERAL.items())
def test_several_tags(cell: str, tags: str) -> None:
    assert " ".join(tags_of_cell(normalise_tag(cell))) == tags


@pytest.mark.parametrize(
    "cell",
    [
        "PT-1001",
        "PCV-101-1",
        "PT-1001-A",
        "PT-1001 TO DCS",
        "PT-1001/1",  # the same tag again, or a suffix
        "PT-1004 TO 1001",
        "PT-1 TO 900",
        "TE-12C-A",
        "FT-100-001",  # no range: 1 is below 100
        "PT-1001 TO FT-1003",
        "SPARE",
        "1001/1002",
        "P/ID",
        "N/A",
        "",
        "/",
        "PT-1001,",
        "PT-101 102",
    ],
)
def test_no_list(cell: str) -> None:
    assert tags_of_cell(normalise_tag(cell)) == ()


def test_a_list_follows_the_plants_profile() -> None:
    profile = PROFILES["isa-unit-prefix"]
    assert tags_of_cell("U10-PT-1/2", profile=profile) == ("U10-PT-1", "U10-PT-2")
    area = PROFILES["isa-area-number"]
    assert tags_of_cell("PT-210-001", profile=area) == ()


@pytest.mark.parametrize(
    ("cell", "tag", "note"),
    [
        ("PT-1001 (Note 3)", "PT-1001", "Note 3"),
        ("*PT-1001", "PT-1001", "*"),
        ("PT-1001*", "PT-1001", "*"),
        ("PT-1001 NEW", "PT-1001", "NEW"),
        ("PT-1001 - NEW", "PT-1001", "NEW"),
        ("PT-1001 [1]", "PT-1001", "1"),
        ("(new) PT-1001", "PT-1001", "new"),
        ("PT-1001, deleted", "PT-1001", "deleted"),
        ("PT-1001 Rev 2", "PT-1001", "Rev 2"),
        ("PT-1001 see note 4", "PT-1001", "see note 4"),
        ("PT-1001 by vendor", "PT-1001", "by vendor"),
        ("'PT-1001", "PT-1001", ""),
        ("P-3601A running", "P-3601A", "running"),
        ("XV-101 OPEN CMD", "XV-101", "OPEN CMD"),
        ("FIC 3 alt", "FIC 3", "alt"),
        ("PT-1001A/B (existing)", "PT-1001A/B", "existing"),
        ("PT-1001", "PT-1001", ""),
        ("PT-1001(A)", "PT-1001(A)", ""),  # a suffix, not a note
        ("PT-1001 DISCHARGE", "PT-1001 DISCHARGE", ""),
        ("Inlet (new)", "Inlet (new)", ""),
        ("*", "*", ""),
        ("", "", ""),
    ],
)
def test_note(cell: str, tag: str, note: str) -> None:
    assert split_note(cell) == (tag, note)


@given(st.text(alphabet="PT-1024AB/,;&~. ()[]*TOto", max_size=60))
def test_any_cell_is_read(text: str) -> None:
    tag, _ = split_note(text)
    assert split_note(tag)[0] == tag
    assert len(tags_of_cell(normalise_tag(text))) <= 200


def test_long_cells_take_no_time() -> None:
    for text in (
        "PT-1" * 20000,
        "(" * 50000,
        "PT-1 (" * 9000,
        "PT-1/" * 9000,
        " ".join(["PT-1"] * 9000),
        "*" * 50000,
    ):
        split_note(text)
        tags_of_cell(normalise_tag(text))
