"""Tags, letters and loops: every rule on both sides of its boundary, its exceptions, blanks and fixes."""

from datetime import datetime
from typing import Any

import pytest

from tests.validation.rules.applied import Row, cells, counts, fixes, found, tell, untold

ISA = "the plant's pattern (isa-hyphen)"

# ------------------------------------------------------------------------------------------------------------ TAG01


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({"tag": "", "LRV": "0 barg"}, ["Instruments: Feed: the row has instrument data and no tag"]),
        ({"tag": "TBA", "LRV": "0 barg"}, ["Instruments: Feed: the row has instrument data and no tag"]),
        ({"tag": "", "service": "", "P&ID": "D-1", "LRV": "0 barg"},
         ["Instruments: D-1: the row has instrument data and no tag"]),
        ({"tag": "", "equipment": "V-1"}, ["Instruments: Feed: the row has instrument data and no tag"]),
        ({"tag": "PT-1", "LRV": "0 barg"}, []),
        # A spare is not live; words alone are a section or a note.
        ({"tag": "SPARE", "LRV": "0 barg"}, []),
        ({"tag": "", "remarks": "see vendor's list", "revision": "B"}, []),
        ({"tag": "", "LRV": "0 barg", "status": "deleted"}, []),
    ],
)  # fmt: skip
def test_a_row_with_data_has_a_tag(row: Row, expected: list[str]) -> None:
    assert tell("TAG01", row, {"tag": "PT-9", "LRV": "1 barg"}) == expected


def test_a_blank_tag_tells_its_reason_and_an_unread_one_is_unchecked() -> None:
    assert [each.found for each in found("TAG01", {"tag": "TBA", "LRV": "0 barg"}, "PT-9")] == ["blank (to be defined)"]
    assert untold("TAG01", {"tag": datetime(2026, 12, 5), "LRV": "0 barg"}, "PT-9") == {"tag": 1}  # noqa: DTZ001


def test_two_rows_without_a_tag_are_two_subjects() -> None:
    blank = {"tag": "", "LRV": "0 barg"}
    assert tell("TAG01", blank, {**blank, "LRV": "1 barg"}, "PT-9") == [
        "Instruments: Feed: the row has instrument data and no tag",
        "Instruments: Feed (2): the row has instrument data and no tag",
    ]


# ------------------------------------------------------------------------------------------------------------ TAG02


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ([{"tag": "PT-1", "service": "a"}, {"tag": "PT-1", "service": "b"}],
         ["PT-1: 2 rows have the tag PT-1 and disagree in service: a / b"]),
        # Separators do not count, zeros and suffixes do.
        ([{"tag": "PT-1", "service": "a"}, {"tag": "PT 1", "service": "b"}],
         ["PT 1: 2 rows have the tag PT 1 and disagree in service: b / a"]),
        ([{"tag": "PT-1", "service": "a"}, {"tag": "PT-01", "service": "b"}], []),
        ([{"tag": "PT-1A", "service": "a"}, {"tag": "PT-1B", "service": "b"}], []),
        ([{"tag": "1-PT-1", "service": "a"}, {"tag": "2-PT-1", "service": "b"}], []),
        # Look-alike letters are read as Latin ones.
        ([{"tag": "РТ-1", "service": "a"}, {"tag": "PT-1", "service": "b"}],
         ["PT-1: 2 rows have the tag PT-1 and disagree in service: b / a"]),
        # Agreement: equal, blank on one row, the same in another unit.
        ([{"tag": "PT-1"}, {"tag": "PT-1"}], []),
        ([{"tag": "PT-1", "line": "L-1"}, {"tag": "PT-1", "equipment": "V-1"}], []),
        ([{"tag": "PT-1", "URV": "10 barg"}, {"tag": "PT-1", "URV": "1000 kPag"}], []),
        ([{"tag": "PT-1", "URV": "10 barg"}, {"tag": "PT-1", "URV": "10 bara"}],
         ["PT-1: 2 rows have the tag PT-1 and disagree in URV: 10 bara / 10 barg"]),
        # Another signal of the same instrument; its service text may then differ too.
        ([{"tag": "PT-1", "signal": "4-20 mA", "I/O type": "AI", "wires": "2", "cable": "C-1"},
          {"tag": "PT-1", "signal": "VFC", "I/O type": "DI", "wires": "4", "cable": "C-2"}], []),
        ([{"tag": "PT-1", "service": "a", "I/O address": "1.1"}, {"tag": "PT-1", "service": "b", "I/O address": "1.2"}],
         []),
        ([{"tag": "PT-1", "service": "a", "I/O address": "1.1"}, {"tag": "PT-1", "service": "b", "I/O address": "1.1"}],
         ["PT-1: 2 rows have the tag PT-1 and disagree in service: a / b"]),
        ([{"tag": "PT-1", "service": "a", "I/O address": "1.1", "line": "L-1"},
          {"tag": "PT-1", "service": "b", "I/O address": "1.2", "line": "L-2"}],
         ["PT-1: 2 rows have the tag PT-1 and disagree in service: a / b; line: L-1 / L-2; I/O address: 1.1 / 1.2"]),
        # Limits that the rows state themselves, yes and no, and three rows of which two agree.
        ([{"tag": "PT-1", "URL": "10 barg"}, {"tag": "PT-1", "URL": "16 barg"}],
         ["PT-1: 2 rows have the tag PT-1 and disagree in URL: 10 barg / 16 barg"]),
        ([{"tag": "FT-1", "square root in device": "yes"}, {"tag": "FT-1", "square root in device": "no"}],
         ["FT-1: 2 rows have the tag FT-1 and disagree in square root in device: no / yes"]),
        ([{"tag": "PT-1", "service": "a"}, {"tag": "PT-1", "service": "b"}, {"tag": "PT-1", "service": "b"}],
         ["PT-1: 3 rows have the tag PT-1 and disagree in service: a / b"]),
        # Not live; equipment; free text, where a separator between two digits parts two numbers.
        ([{"tag": "PT-1", "service": "a"}, {"tag": "PT-1", "service": "b", "status": "deleted"}], []),
        ([{"tag": "P-1", "service": "a", "I/O type": "DI"}, {"tag": "P-1", "service": "b", "I/O type": "DO"}], []),
        ([{"tag": "Fan A1 on", "service": "a"}, {"tag": "Fan A-1 on", "service": "b"}, "Boiler 1 on", "Boiler 2 on"],
         ["Fan A-1 on: 2 rows have the tag FAN A-1 ON and disagree in service: b / a"]),
        ([{"tag": "Bay 1-12 on", "service": "a"}, {"tag": "Bay 11-2 on", "service": "b"}, "Boiler 1 on", "Boiler 2 on"],
         []),
    ],
)  # fmt: skip
def test_one_tag_is_of_one_instrument(rows: list[Row], expected: list[str]) -> None:
    assert tell("TAG02", *rows) == expected


def test_rows_that_agree_are_one_instrument_and_those_that_do_not_are_counted() -> None:
    rows = [{"tag": "PT-1", "service": "a"}, {"tag": "PT-1", "service": "a"}, "PT-2"]
    assert counts("TAG02", *rows) == {"clear": 2}
    assert counts("TAG02", *rows, {"tag": "PT-2", "service": "b"}) == {"clear": 1, "finding": 2}
    assert counts("TAG02", {"tag": "P-1", "I/O type": "DI"}, "PT-2") == {"clear": 1, "not applicable": 1}


def test_a_disagreement_points_at_the_cells_of_all_rows() -> None:
    rows: list[Row] = [{"tag": "PT-1", "service": "a", "line": "L-1"}, {"tag": "PT-1", "service": "b", "line": "L-1"}]
    assert [sorted(each) for each in cells("TAG02", *rows)] == [
        ["Instruments A2", "Instruments A3", "Instruments B2", "Instruments B3"]
    ]


# ------------------------------------------------------------------------------------------------------------ TAG03


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (["FT-101", "FT-0101"], ["FT-0101, FT-101: FT-0101 and FT-101 differ only by leading zeros"]),
        (["1-PT-5", "01-PT-5"], ["01-PT-5, 1-PT-5: 01-PT-5 and 1-PT-5 differ only by leading zeros"]),
        (["PCV-101-1", "PCV-101-01"],
         ["PCV-101-01, PCV-101-1: PCV-101-01 and PCV-101-1 differ only by leading zeros"]),
        (["FT-1O1", "FT-101"], ["FT-1O1, FT-101: FT-1O1 and FT-101 differ only by characters that look alike"]),
        (["FT-10l", "FT-101"], ["FT-10L, FT-101: FT-10L and FT-101 differ only by characters that look alike"]),
        (["FT-10I", "FT-101"], ["FT-10I, FT-101: FT-10I and FT-101 differ only by characters that look alike"]),
        (["FT-1O1", "FT-101", "FT-0101"],
         ["FT-1O1, FT-0101, FT-101: FT-1O1, FT-0101 and FT-101 differ only by characters that look alike"]),
        (["FT-101", "FT-102"], []),
        (["FT-101", "FT-1010"], []),
        (["FT-101A", "FT-101B"], []),
        # A capital L is the twelfth of a set, an I beside H the ninth, an O beside P the fifteenth.
        (["TE-12L", "TE-121"], []),
        (["TE-12H", "TE-12I", "TE-121"], []),
        (["TE-12O", "TE-12P", "TE-120"], []),
        (["TE-12O", "TE-120"], ["TE-12O, TE-120: TE-12O and TE-120 differ only by characters that look alike"]),
        # The same parsed tag is TAG02's.
        (["PT-1", "PT 1"], []),
        (["РТ-1", "PT-1"], []),
        ([{"tag": "PT-1", "service": "a"}, {"tag": "PT-1", "service": "b"}], []),
        ([{"tag": "PT-1", "status": "void"}, "PT-01"], []),
        ([{"tag": "P-1", "I/O type": "DI"}, {"tag": "P-01", "I/O type": "DI"}], []),
    ],
)  # fmt: skip
def test_no_two_tags_look_alike(rows: list[str | Row], expected: list[str]) -> None:
    assert tell("TAG03", *rows) == expected


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        # The width of the list's other numbers decides, and a doubtful character never.
        (["FT-101", "FT-0101", "PT-0102", "PT-0103"], [("FT-101", "tag FT-0101 for FT-101", {"tag": "FT-0101"})]),
        (["FT-101", "FT-0101", "PT-102", "PT-103"], [("FT-0101", "tag FT-101 for FT-0101", {"tag": "FT-101"})]),
        (["JB-1O5", "JB-105"], [("JB-1O5", "tag JB-105 for JB-1O5", {"tag": "JB-105"})]),
        (["TE-12I", "TE-121"], [("TE-12I", "tag TE-121 for TE-12I", {"tag": "TE-121"})]),
        (["FT-10l", "FT-101"], [("FT-10L", "tag FT-101 for FT-10L", {"tag": "FT-101"})]),
    ],
)
def test_the_canonical_tag_is_offered(rows: list[str], expected: list[tuple[str, str, dict[str, str]]]) -> None:
    assert fixes("TAG03", *rows) == expected


# ------------------------------------------------------------------------------------------------------------ TAG04

OTHERS = ("PT-1001", "PT-1002", "FT-1004")


@pytest.mark.parametrize(
    ("tag", "expected", "nearest"),
    [
        ("PT-1003", "", ""),
        ("PT 1003", "", ""),
        ("pt1003", "", ""),
        ("PT.1003.A", "", ""),
        ("PT-1003 (Note 3)", "", ""),
        ("PT-0000", "", ""),
        ("PT_1003", f"PT_1003: PT_1003 does not fit {ISA}: PT-1003 would", "PT-1003"),
        ("PT:1003", f"PT:1003: PT:1003 does not fit {ISA}: PT-1003 would", "PT-1003"),
        ("PT--1003", f"PT--1003: PT--1003 does not fit {ISA}: PT-1003 would", "PT-1003"),
        ("PT-1OO3", f"PT-1OO3: PT-1OO3 does not fit {ISA}: PT-1003 would", "PT-1003"),
        ("PT-10l3", f"PT-10L3: PT-10l3 does not fit {ISA}: PT-1013 would", "PT-1013"),
        ("PT-100l", f"PT-100L: PT-100l does not fit {ISA}: PT-1001 would", "PT-1001"),
        ("P1-1003", f"P1-1003: P1-1003 does not fit {ISA}: PI-1003 would", "PI-1003"),
        ("JB-1O5", f"JB-1O5: JB-1O5 does not fit {ISA}: JB-105 would", "JB-105"),
        ("SPARE-1", f"SPARE-1: SPARE-1 does not fit {ISA}: not a tag: placeholder row", ""),
        ("A_B_C_1X2Y", f"A_B_C_1X2Y: A_B_C_1X2Y does not fit {ISA}: it cannot be parted into letters and number", ""),
        ("ТT-1003", "TT-1003: ТT-1003 has a character that only looks Latin: Т", "TT-1003"),
        ("РТ-1003", "PT-1003: РТ-1003 has characters that only look Latin: РТ", "PT-1003"),
        ("ΡT-1003", "PT-1003: ΡT-1003 has a character that only looks Latin: Ρ", "PT-1003"),
        # Two tags in a cell are TAG13's; a letter of a set is no digit.
        ("PT-1003A/B", "", ""),
        ("PT-1003, PT-1005", "", ""),
    ],
)  # fmt: skip
def test_a_tag_fits_the_pattern_of_the_list(tag: str, expected: str, nearest: str) -> None:
    assert tell("TAG04", tag, *OTHERS) == ([expected] if expected else [])
    assert [change["tag"] for _, _, change in fixes("TAG04", tag, *OTHERS) if change] == ([nearest] if nearest else [])


@pytest.mark.parametrize(
    ("rows", "pattern", "expected"),
    [
        (["PT-1001", "PT 1002", "PT1003"], r"(?P<l>[A-Z]+)-(?P<n>\d{4})", []),
        (["PT-101"], r"(?P<l>[A-Z]+)-(?P<n>\d{4})",
         ["PT-101: PT-101 does not fit the plant's pattern (plant pattern): PT-0101 would"]),
        (["10-PT-0034"], "compact", []),
        (["PT-0034"], "compact", []),
        (["PT-0034-X1"], "compact",
         ["PT-0034-X1: PT-0034-X1 does not fit the plant's pattern (compact): "
          "it cannot be parted into letters and number"]),
        (["10LBA10CP001", "PT-1001"], "kks",
         ["PT-1001: PT-1001 does not fit the plant's pattern (kks): it cannot be parted into letters and number"]),
        # Free text asks for no pattern, but for Latin letters.
        (["PT_1003", "4th pump"], "free-text", []),
        (["Рump A1", "4th pump"], "free-text", ["Рump A1: Рump A1 has a character that only looks Latin: Р"]),
        (["Насос А1", "Бак 2"], "free-text", []),
    ],
)  # fmt: skip
def test_a_tag_fits_the_pattern_that_the_plant_states(rows: list[str], pattern: str, expected: list[str]) -> None:
    assert tell("TAG04", *rows, plant={"tag pattern": pattern}) == expected


def test_a_letter_of_a_set_is_no_digit() -> None:
    assert tell("TAG04", "TE-12O", *OTHERS) == [f"TE-12O: TE-12O does not fit {ISA}: TE-120 would"]
    assert tell("TAG04", "TE-12O", "TE-12N", *OTHERS) == []


def test_a_look_alike_is_seen_though_its_row_agrees_with_another() -> None:
    rows: list[str | Row] = ["PT-1003", "РТ-1003", *OTHERS]
    assert tell("TAG04", *rows) == ["PT-1003: РТ-1003 has characters that only look Latin: РТ"]
    assert cells("TAG04", *rows) == [["Instruments B3"]]


def test_whose_tags_have_no_pattern() -> None:
    free = {"tag pattern": "free-text"}
    assert counts("TAG04", "4th pump", "PT-1", plant=free) == {"not applicable": 2}
    assert counts("TAG04", "PT-1A/B", {"tag": "P-1", "I/O type": "DI"}, {"tag": "PT-2"}) == {
        "clear": 1,
        "not applicable": 3,
    }


# ------------------------------------------------------------------------------------------------------------ TAG05


@pytest.mark.parametrize(
    ("tag", "expected", "offered"),
    [
        ("TIC-101", "", []),
        ("PDIT-101", "", []),
        ("FFIC-101", "", []),
        ("ZSO-101", "", []),
        ("PAHH-101", "", []),
        ("TCI-101", "the letters TCI break the rules of succession: readout I after output letter",
         ["TIC-101", "TI-101", "TC-101", "TCV-101"]),
        ("FTIC-1", "the letters FTIC break the rules of succession: readout I after output letter",
         ["FIC-1", "TIC-1", "FT-1", "FI-1"]),
        ("PHH-3", "the letters PHH break the rules of succession: modifier H has no function letter before it",
         ["PSHH-3", "PAHH-3", "PSH-3", "PAH-3"]),
        ("PH-1", "the letters PH break the rules of succession: modifier H has no function letter before it",
         ["AT-1", "AIT-1", "AE-1", "PSH-1"]),
        ("T-101", "the letters T break the rules of succession: no function letter",
         ["TT-101", "TI-101", "TE-101", "TV-101"]),
        # A digit for a letter: the tag that was meant, and no other.
        ("P1-10", "the letters P break the rules of succession: no function letter", ["PI-10"]),
        # Letters that two traditions read differently.
        ("LICA-5", "review: the letters LICA are read in two ways: alarm after output letter: "
                   "older European order, or a slip", ["LIAC-5", "LIC-5", "LIA-5", "LICV-5"]),
        ("ZIC-1", "review: the letters ZIC are read in two ways: ZIC ambiguous (closed/open indication or control)",
         ["ZI-1", "ZC-1", "ZIRC-1", "ZIAC-1"]),
        ("LL-12", "review: the letters LL are read in two ways: parses as level light; usually a typo for LSLL/LALL",
         ["LSLL-12", "LALL-12", "LSL-12", "LAL-12"]),
        # Plant codes.
        ("SDV-1", "", []),
        ("JB-1", "", []),
        ("DPSHH-1", "", []),
    ],
)  # fmt: skip
def test_letters_follow_each_other(tag: str, expected: str, offered: list[str]) -> None:
    lines = [line.replace(f"{tag}: ", "", 1) for line in tell("TAG05", tag, "PT-9")]
    assert lines == ([expected] if expected else [])
    assert sorted(change["tag"] for _, _, change in fixes("TAG05", tag, "PT-9")) == sorted(offered)


@pytest.mark.parametrize(
    ("tags", "reviewed"),
    [
        ("LICA-5", "LICA-5"),
        # Several are a manner, and so is one among recorders; a list that has both orders has slips.
        ("LICA-5 TRCA-6", ""),
        ("LICA-5 FRC-1 TIR-2 PR-4", ""),
        ("LICA-5 FRC-1 TIR-2", "LICA-5"),
        ("LICA-5 TRCA-6 PIAC-7", "LICA-5 TRCA-6"),
    ],
)
def test_the_older_order_is_a_manner(tags: str, reviewed: str) -> None:
    lines = tell("TAG05", *tags.split())
    assert " ".join(line.split()[1].rstrip(":") for line in lines) == reviewed


@pytest.mark.parametrize(
    ("row", "reviewed"),
    [
        ({"I/O type": "DI"}, False),
        ({"I/O type": "AO"}, True),
        ({"I/O type": "DI/DO"}, True),
        ({"kind": "Limit switch"}, False),
        ({"kind": "Controller"}, True),
    ],
)
def test_a_contact_reports_and_controls_nothing(row: Row, reviewed: bool) -> None:
    assert bool(tell("TAG05", {"tag": "ZIC-1", **row})) is reviewed


@pytest.mark.parametrize(
    ("rows", "plant", "expected"),
    [
        (["LCP-1"], {}, {"finding": 1}),
        (["LCP-1"], {"plant codes": "LCP = panel"}, {"not applicable": 1}),
        # What the list calls a panel has a name, no functions.
        ([{"tag": "LCP-1", "kind": "control panel"}], {}, {"not applicable": 1}),
        ([{"tag": "LCP-1", "kind": "control valve"}], {}, {"finding": 1}),
        ([{"tag": "T-101", "I/O type": "DI"}], {}, {"not applicable": 1}),
        (["10LBA10CP001", "10LBA10CP002"], {}, {"not applicable": 2}),
        (["4th pump", "TCI 1"], {"tag pattern": "free-text"}, {"not applicable": 2}),
        (["PT_1", "PT-2", "PT-3"], {}, {"clear": 2, "not applicable": 1}),
    ],
)
def test_whose_letters_are_asked(rows: list[str | Row], plant: dict[str, str], expected: dict[str, int]) -> None:
    assert counts("TAG05", *rows, plant=plant or {"name": "x"}) == expected


def test_letters_are_offered_only_where_the_pattern_holds_them() -> None:
    plant = {"tag pattern": r"(?P<l>TCI|TIC|PT)-(?P<n>\d{3})"}
    assert [change for _, _, change in fixes("TAG05", "TCI-101", plant=plant)] == [{"tag": "TIC-101"}]
    assert tell("TAG05", "TCI-101", plant=plant) == [
        "TCI-101: the letters TCI break the rules of succession: readout I after output letter"
    ]


# ------------------------------------------------------------------------------------------------------------ TAG06

UNDEFINED = "list.xlsx: the first letter {} is a user's choice and the plant has not defined it; {} it"


@pytest.mark.parametrize(
    ("letters", "expected"),
    [
        ("", [UNDEFINED.format("D", "2 tags use"), UNDEFINED.format("M", "1 tag uses")]),
        ("M = moisture", [UNDEFINED.format("D", "2 tags use")]),
        ("D = density; M = moisture", []),
    ],
)
def test_a_letter_of_the_users_choice_is_defined(letters: str, expected: list[str]) -> None:
    rows: list[str | Row] = [
        "MT-1", "DT-2", "DT-3", "PT-4", "GD-5", {"tag": "M-6", "I/O type": "DI"}, {"tag": "GT-7", "status": "void"},
    ]  # fmt: skip
    assert tell("TAG06", *rows, plant={"users' first letters": letters}) == expected


def test_each_letter_is_a_part_with_the_first_of_its_tags() -> None:
    each = found("TAG06", "CT-12", "CT-3", "DT-2")
    assert [(one.subject, one.part, one.found, one.fields) for one in each] == [
        ("list.xlsx", "C", "CT-3, CT-12", ("tag",)),
        ("list.xlsx", "D", "DT-2", ("tag",)),
    ]
    assert [fix.text for one in each for fix in one.fixes] == [
        "define C among the users' first letters of the plant",
        "define D among the users' first letters of the plant",
    ]


# ------------------------------------------------------------------------------------------------------------ TAG08


def loops(*pairs: tuple[str, str]) -> list[Row]:
    return [{"tag": tag, "loop": loop} for tag, loop in pairs]


SDV_IS_X = {"plant codes": "SDV = on/off valve, X"}
SERIAL = {"numbering": "serial"}


@pytest.mark.parametrize(
    ("pairs", "plant", "expected"),
    [
        ([("FT-101", "F-101")], {}, []),
        ([("FT-101", "F-102")], {}, ["FT-101: the loop column says F-102, the tag gives F-101"]),
        ([("FT-101", "P-101")], {}, ["FT-101: the loop column says P-101, the tag gives F-101"]),
        # However the loop is written: by its controller, without letters, with the unit.
        ([("FT-101", "FIC-101")], {}, []),
        ([("FT-101", "f 0101")], {}, []),
        ([("FT-101", "LOOP 101")], {}, []),
        ([("FT-101", "101")], {}, []),
        ([("FT-101", "102")], {}, ["FT-101: the loop column says 102, the tag gives 101"]),
        ([("10-FT-101", "10-F-101")], {}, []),
        ([("10-FT-101", "F-101")], {}, []),
        ([("10-FT-101", "20-F-101")], {}, ["10-FT-101: the loop column says 20-F-101, the tag gives 10-F-101"]),
        ([("PT-210-001", "P-210-001"), ("PT-210-002", "P-220-002")], {},
         ["PT-210-002: the loop column says P-220-002, the tag gives P-210-002"]),
        ([("10LBA10CP001", "10LBA10CP001"), ("10LBA10CP002", "10LBA10CP003")], {},
         ["10LBA10CP002: the loop column says 10LBA10CP003, the tag gives 10LBA10CP002"]),
        # A loop of another letter is another train's; a set of letters is all of them.
        ([("FT-101A", "F-101")], {}, []),
        ([("FT-101A", "F-101A")], {}, []),
        ([("FT-101A", "F-101A/B")], {}, []),
        ([("FT-101A", "F-101B")], {}, ["FT-101A: the loop column says F-101B, the tag gives F-101"]),
        # Serial numbering: the number alone.
        ([("FT-101", "101")], SERIAL, []),
        ([("FT-101", "102")], SERIAL, ["FT-101: the loop column says 102, the tag gives 101"]),
        ([("10-FT-101", "10-102")], SERIAL, ["10-FT-101: the loop column says 10-102, the tag gives 10-101"]),
        ([("SDV-101", "101")], SERIAL, []),
        # An assembly: what carries a valve's number belongs to the valve's loop, or to that of its own letter.
        ([("ZSC-2041", "X-2041"), ("XV-2041", "X-2041")], {}, []),
        ([("ZSC-2041", "Z-2041"), ("XV-2041", "X-2041")], {}, []),
        ([("ZSC-2041", "P-2041"), ("PV-2041", "")], {}, []),
        ([("ZSC-2041", "X-2014"), ("XV-2041", "X-2041")], {},
         ["ZSC-2041: the loop column says X-2014, its valve XV-2041 gives X-2041"]),
        ([("HS-2041", "F-2041"), ("PV-2041", "P-2041")], {},
         ["HS-2041: the loop column says F-2041, its valve PV-2041 gives P-2041"]),
        ([("YS-2041", "2014"), ("XV-2041", "2041")], {},
         ["YS-2041: the loop column says 2014, its valve XV-2041 gives 2041"]),
        # The valve's own mistake is found once.
        ([("XV-2041", "X-2014"), ("ZSC-2041", "X-2041")], {},
         ["XV-2041: the loop column says X-2014, the tag gives X-2041"]),
        ([("XV-2041", "X-2014"), ("ZSC-2041", "X-2014")], {},
         ["XV-2041: the loop column says X-2014, the tag gives X-2041"]),
        # Of two valves with one number, either; of a third loop, the tag's own.
        ([("ZT-1", "F-1"), ("FV-1", "F-1"), ("PV-1", "P-1")], {}, []),
        ([("ZT-1", "P-1"), ("FV-1", "F-1"), ("PV-1", "P-1")], {}, []),
        ([("ZT-1", "T-1"), ("FV-1", "F-1"), ("PV-1", "P-1")], {},
         ["ZT-1: the loop column says T-1, the tag gives Z-1"]),
        # Plant codes: the code table's letter; the number speaks for itself.
        ([("SDV-1201", "X-1201")], SDV_IS_X, []),
        ([("SDV-1201", "P-1201")], SDV_IS_X, ["SDV-1201: the loop column says P-1201, the tag gives X-1201"]),
        ([("SDV-1201", "X-1201")], {}, []),
        ([("SDV-1201", "X-1210")], {}, ["SDV-1201: the loop column says X-1210, the tag's number is 1201"]),
        ([("SDV-1201", "SDV-1201"), ("ZSO-1201", "SDV-1201"), ("SOV-1201", "SDV-1201")], {}, []),
        # Equipment.
        ([("P-101", "F-102")], {}, []),
    ],
)  # fmt: skip
def test_the_loop_column_names_the_loop_of_the_tag(
    pairs: list[tuple[str, str]], plant: dict[str, str], expected: list[str]
) -> None:
    rows = [{**row, "I/O type": "DI"} if row["tag"].startswith("P-") else row for row in loops(*pairs)]
    assert tell("TAG08", *rows, plant=plant or {"name": "x"}) == expected


@pytest.mark.parametrize(
    ("pairs", "plant", "blank"),
    [
        ([("FT-101", "")], {}, "loop"),
        ([("FT-101", "FEED")], {}, "loop in a form that can be compared"),
        ([("10LBA10CP001", "FEED")], {}, "loop in a form that can be compared"),
        ([("TCI-101", "T-101")], {}, "tag"),
        ([("SDV-1201", "X-1201")], {}, "first letter of the plant code SDV"),
        ([("SDV-1201", "P-1201")], {}, "first letter of the plant code SDV"),
        # The valve may stand in another list.
        ([("ZSC-2041", "P-2041")], {}, "loop in a form that can be compared"),
        ([("ZSC-2041", "P-2041"), ("XV-2041", "X-2041"), ("PT-2041", "P-2041")], {},
         "loop in a form that can be compared"),
    ],
)  # fmt: skip
def test_a_loop_that_cannot_be_compared_is_unchecked(
    pairs: list[tuple[str, str]], plant: dict[str, str], blank: str
) -> None:
    assert untold("TAG08", *loops(*pairs), plant=plant or {"name": "x"}) == {blank: 1}


@pytest.mark.parametrize(
    ("differing", "percent", "whole"),
    [(2, None, False), (3, None, True), (2, "10", True), (3, "30", False), (0, None, False)],
)
def test_another_numbering_is_one_finding_on_the_list(differing: int, percent: str | None, whole: bool) -> None:
    agreeing = 10 - differing if differing < 3 else 8
    rows = loops(
        *[(f"FT-{n}", f"F-{n}") for n in range(100, 100 + agreeing)],
        *[(f"FT-{n}", f"F-{n + 900}") for n in range(200, 200 + differing)],
    )
    plant: dict[str, Any] = {"name": "x"} if percent is None else {"TAG08 disagreement %": percent}
    lines = tell("TAG08", *rows, plant=plant)
    if whole:
        assert lines == [
            f"list.xlsx: the loop column differs from the tags in {differing} of {len(rows)} rows: "
            "the list numbers its loops in another way"
        ]
        assert untold("TAG08", *rows, plant=plant) == {"loop": len(rows)}
    else:
        assert [line.partition(":")[0] for line in lines] == [f"FT-{n}" for n in range(200, 200 + differing)]


def test_few_rows_are_no_column() -> None:
    assert tell("TAG08", *loops(*[(f"FT-{n}", "F-1") for n in range(2, 5)])) == [
        f"FT-{n}: the loop column says F-1, the tag gives F-{n}" for n in range(2, 5)
    ]


# ------------------------------------------------------------------------------------------------------------ TAG09

DP = [{"code": "DP", "kind": "pressure transmitter", "URL": "10 barg"}]


@pytest.mark.parametrize(
    ("row", "expected", "offered"),
    [
        ({"tag": "PG-1", "kind": "pressure gauge"}, [], []),
        ({"tag": "PI-1", "kind": "pressure gauge"}, [], []),
        ({"tag": "PT-1", "kind": "pressure gauge"}, ["PT-1: a gauge cannot bear the letters PT"],
         [{"tag": "PG-1"}, {"tag": "PI-1"}, {"kind": "transmitter"}]),
        ({"tag": "ZSC-1", "kind": "Pilot light"}, ["ZSC-1: a lamp cannot bear the letters ZSC"],
         [{"tag": "ZL-1"}, {"kind": "switch"}]),
        ({"tag": "FT-1", "kind": "control valve"}, ["FT-1: a control valve cannot bear the letters FT"],
         [{"tag": "FV-1"}, {"tag": "FCV-1"}, {"kind": "transmitter"}]),
        ({"tag": "PSV-1", "kind": "solenoid valve"}, ["PSV-1: a solenoid cannot bear the letters PSV"],
         [{"tag": "XY-1"}, {"kind": "relief valve"}]),
        ({"tag": "PT-1", "kind": "analyser"}, ["PT-1: an analyser cannot bear the letters PT"],
         [{"kind": "transmitter"}]),
        ({"tag": "SDV-1", "kind": "pressure transmitter"}, ["SDV-1: a transmitter cannot bear the letters SDV"],
         [{"tag": "XT-1"}, {"tag": "XIT-1"}, {"kind": "on/off valve"}]),
        # The kind that the device type states.
        ({"tag": "PG-1", "device type": "DP"}, ["PG-1: a transmitter cannot bear the letters PG"],
         [{"tag": "PT-1"}, {"tag": "PIT-1"}, {"kind": "gauge"}]),
        ({"tag": "PT-1", "device type": "DP"}, [], []),
        ({"tag": "PG-1", "device type": "DP", "kind": "pressure gauge"}, [], []),
        # A derived kind, unknown words, a practice that differs.
        ({"tag": "PT-1", "kind": ""}, [], []),
        ({"tag": "PT-1", "kind": "gizmo"}, [], []),
        ({"tag": "PCV-1", "kind": "relief valve"}, [], []),
        ({"tag": "PCV-1", "kind": "self-acting regulator"}, [], []),
        # A measuring point of older lists.
        ({"tag": "PI-27", "kind": "pressure transmitter", "I/O type": "AI"}, [], []),
        ({"tag": "PI-27", "kind": "pressure transmitter", "I/O type": ""},
         ["PI-27: a transmitter cannot bear the letters PI"], [{"tag": "PT-27"}, {"tag": "PIT-27"}, {"kind": "gauge"}]),
        ({"tag": "TCI-1", "kind": "gauge"}, [], []),
        ({"tag": "P-1", "kind": "transmitter", "I/O type": "DI"}, [], []),
    ],
)  # fmt: skip
def test_a_stated_kind_bears_its_letters(row: Row, expected: list[str], offered: list[dict[str, str]]) -> None:
    other = {"tag": "LT-9", "I/O type": "AI", "kind": "level transmitter"}
    assert tell("TAG09", row, other, types=DP) == expected
    assert [change for _, _, change in fixes("TAG09", row, other, types=DP)] == offered


@pytest.mark.parametrize(
    ("tag", "kind", "found"),
    [
        ("UPS-1", "Power supply", False),
        ("MCC-1", "Panel", False),
        ("PT-1", "Panel", True),
        ("FV-1", "Power supply", True),
    ],
)
def test_letters_that_are_a_name_bear_their_own_kind(tag: str, kind: str, found: bool) -> None:
    assert bool(tell("TAG09", {"tag": tag, "kind": kind})) is found


@pytest.mark.parametrize(
    ("tag", "kind", "meant"),
    [
        ("PIT-1", "Temperature transmitter", "TIT-1"),
        ("TT-1", "Pressure transmitter", "PT-1"),
        ("TI-1", "Manometer", "PI-1"),
        ("PI-1", "Bimetallthermometer", "TI-1"),
        ("LSH-1", "Flow switch", "FSH-1"),
        ("PT-1", "Füllstandmessumformer", "LT-1"),
        ("FT-1", "Level transmitter", "LT-1"),
        # A pressure stands for level and flow, a level for the flow of a channel.
        ("LT-1", "Pressure transmitter", ""),
        ("FT-1", "DP transmitter", ""),
        ("FT-1", "Ultrasonic level transmitter", ""),
        # Two variables, a principle, another variable altogether, a valve.
        ("FT-1", "Flow transmitter with temperature compensation", ""),
        ("FT-1", "Thermal mass flowmeter", ""),
        ("AT-1", "Temperature transmitter", ""),
        ("PDT-1", "Flow transmitter", ""),
        ("LV-1", "Flow control valve", ""),
        ("TE-1", "RTD Pt100", ""),
    ],
)
def test_the_words_of_a_kind_name_the_variable_of_its_letters(tag: str, kind: str, meant: str) -> None:
    row = {"tag": tag, "kind": kind, "I/O type": "AI"}
    letters = tag.partition("-")[0]
    expected = [f"{tag}: a kind written '{kind}' cannot bear the letters {letters}"] if meant else []
    assert tell("TAG09", row) == expected
    assert [change["tag"] for _, _, change in fixes("TAG09", row) if "tag" in change] == ([meant] if meant else [])


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ([{"tag": "PT-1", "kind": ""}], {"not applicable": 1}),
        ([{"tag": "PCV-1", "kind": "relief valve"}], {"not applicable": 1}),
        ([{"tag": "PG-1", "kind": "gauge"}], {"clear": 1}),
        # Nothing in the list could tell a measuring point.
        ([{"tag": "PI-27", "kind": "pressure transmitter"}], {"unchecked": 1}),
        ([{"tag": "PI-27", "kind": "pressure transmitter"}, "PT-27"], {"finding": 1, "not applicable": 1}),
    ],
)
def test_what_the_letters_leave_open(rows: list[Row], expected: dict[str, int]) -> None:
    assert counts("TAG09", *rows) == expected


# ------------------------------------------------------------------------------------------------------------ TAG10


@pytest.mark.parametrize(
    ("tag", "unit", "variable"),
    [
        ("PIT-1", "bar", ""), ("PDT-1", "mbar", ""), ("PIT-1", "m3/h", "pressure"), ("PIT-1", "%", "pressure"),
        ("TT-1", "°C", ""), ("TDT-1", "K", ""), ("TT-1", "barg", "temperature"), ("TE-1", "mV", ""),
        # L takes length, pressure, volume, mass, %.
        ("LT-1", "mm", ""), ("LT-1", "mbar", ""), ("LT-1", "m3", ""), ("LT-1", "t", ""), ("LT-1", "%", ""),
        ("LT-1", "m3/h", "level"), ("LT-1", "°C", "level"),
        ("FT-1", "m3/h", ""), ("FT-1", "Nm3/h", ""), ("FT-1", "kg/h", ""), ("FT-1", "°C", "flow"),
        ("FT-1", "%", "flow"), ("FFIC-1", "%", ""), ("FQI-1", "m3", ""),
        # A, Q, U, X, Y and user's choices take any.
        ("AT-1", "bar", ""), ("QT-1", "bar", ""), ("UT-1", "bar", ""), ("XT-1", "bar", ""), ("YT-1", "bar", ""),
        ("MT-1", "bar", ""), ("DT-1", "kg/m3", ""), ("CT-1", "°C", ""),
        ("ST-1", "rpm", ""), ("ST-1", "bar", "speed"), ("WT-1", "t", ""), ("WT-1", "°C", "weight"),
        ("DPT-1", "mbar", ""), ("DPT-1", "°C", "differential pressure"), ("FV-1", "%", ""),
        ("PSH-1", "m3/h", "pressure"), ("10LBA10CP001", "°C", "pressure"), ("10LBA10CP001", "bar", ""),
    ],
)  # fmt: skip
def test_a_range_is_in_a_unit_of_the_variable(tag: str, unit: str, variable: str) -> None:
    row = {"tag": tag, "LRV": "0", "URV": "50", "range unit": unit}
    shown = {"m3/h": "m³/h"}.get(unit, unit)
    letters = "CP" if tag.endswith("CP001") else tag.partition("-")[0]
    expected = [f"{tag}: {letters} with a range in {shown}: {shown} is no unit of {variable}"] if variable else []
    assert tell("TAG10", row) == expected


FLOW = {"tag": "FT-1", "LRV": "0", "URV": "50", "range unit": "mbar"}


@pytest.mark.parametrize(
    ("row", "expected"),
    [
        ({}, {"square root in device or square root in system": 1}),
        ({"body": "differential"}, {"square root in device or square root in system": 1}),
        ({"square root in device": "yes"}, {}),
        ({"square root in system": "no"}, {}),
        ({"body": "differential", "square root in device": "no"}, {}),
        ({"URV": "", "LRV": "", "range unit": ""}, {"range unit": 1}),
        ({"range unit": ""}, {"range unit": 1}),
        ({"range unit": "Hazen"}, {"range unit": 1}),
    ],
)
def test_what_leaves_the_unit_unchecked(row: Row, expected: dict[str, int]) -> None:
    other = {"tag": "PT-9", "LRV": "0", "URV": "4", "range unit": "bar"}
    assert untold("TAG10", {**FLOW, **row}, other) == expected
    assert tell("TAG10", {**FLOW, **row}, other) == []


def test_a_flow_in_pressure_on_a_gauge_body() -> None:
    assert tell("TAG10", {**FLOW, "body": "gauge"}) == ["FT-1: FT with a range in mbar: mbar is no unit of flow"]


SYSTEM = {"system LRV": "0", "system URV": "100"}


@pytest.mark.parametrize(
    ("row", "expected", "parts"),
    [
        ({"tag": "PT-1", "LRV": "0 bar", "URV": "5 bar", **SYSTEM, "system unit": "°C"},
         ["PT-1: PT with a range in the system in °C: °C is no unit of pressure"], ["system range"]),
        ({"tag": "PT-1", "LRV": "0 bar", "URV": "5 bar", **SYSTEM, "system unit": "kPa"}, [], []),
        # One range that was copied with its unit is one mistake.
        ({"tag": "PT-1", "LRV": "0 m3/h", "URV": "5 m3/h", **SYSTEM, "system unit": "m3/h"},
         ["PT-1: PT with a range in m³/h: m³/h is no unit of pressure"], [""]),
        ({"tag": "FT-1", "LRV": "0 m3/h", "URV": "5 m3/h", **SYSTEM, "system unit": "%"}, [], []),
        ({"tag": "LT-1", "LRV": "0 mbar", "URV": "5 mbar", **SYSTEM, "system unit": "m3"}, [], []),
        ({"tag": "TIC-1", "location": "system", **SYSTEM, "system unit": "bar"},
         ["TIC-1: TIC with a range in the system in bar: bar is no unit of temperature"], ["system range"]),
        ({"tag": "TIC-1", "location": "system", **SYSTEM, "system unit": "°C"}, [], []),
        ({"tag": "PT-1", "range": "0-10 m3/h"}, ["PT-1: PT with a range in m³/h: m³/h is no unit of pressure"], [""]),
        ({"tag": "P-1", "LRV": "0 °C", "URV": "5 °C", "I/O type": "AI"}, [], []),
    ],
)  # fmt: skip
def test_the_ranges_of_field_and_system(row: Row, expected: list[str], parts: list[str]) -> None:
    assert tell("TAG10", row) == expected
    assert [each.part for each in found("TAG10", row)] == parts


def test_who_is_asked_for_a_unit() -> None:
    blank = {"LRV": "", "URV": "", "range unit": ""}
    rows = [{"tag": tag, **blank} for tag in ("PT-1", "PSH-2", "FV-3", "PSV-4", "JB-5", "FIC-6")]
    assert counts("TAG10", *rows) == {"not applicable": 4, "unchecked": 2}


# ------------------------------------------------------------------------------------------------------------ TAG13


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        (["TE-2001A"], []),
        (["TE-2001A/B"], ["TE-2001A/B: one cell holds 2 tags: TE-2001A, TE-2001B"]),
        (["PT-1001 TO 1003"], ["PT-1001 TO 1003: one cell holds 3 tags: PT-1001, PT-1002, PT-1003"]),
        (["LI/LAH-12"], ["LI/LAH-12: one cell holds 2 tags: LI-12, LAH-12"]),
        (["PT-1, PT-2"], ["PT-1, PT-2: one cell holds 2 tags: PT-1, PT-2"]),
        (["PT-1001A/B (Note 3)"], ["PT-1001A/B (Note 3): one cell holds 2 tags: PT-1001A, PT-1001B"]),
        # Its tags may have rows of their own: rows that agree, one that does not.
        (["TE-1A/B", "TE-1A", "TE-1B"], ["TE-1A/B: one cell holds 2 tags: TE-1A, TE-1B"]),
        (["TE-1A/B", {"tag": "TE-1A", "service": "other"}], ["TE-1A/B: one cell holds 2 tags: TE-1A, TE-1B"]),
        (["TE-1A/B", "TE-1A/B"], ["TE-1A/B: one cell holds 2 tags: TE-1A, TE-1B"]),
        ([{"tag": "TE-1A/B", "service": "a"}, {"tag": "TE-1A/B", "service": "b"}],
         ["TE-1A/B: one cell holds 2 tags: TE-1A, TE-1B", "TE-1A/B (2): one cell holds 2 tags: TE-1A, TE-1B"]),
        ([{"tag": "TE-1A/B", "status": "deleted"}], []),
        ([{"tag": "P-1A/B", "I/O type": "DI"}], []),
    ],
)  # fmt: skip
def test_a_cell_holds_one_tag(rows: list[str | Row], expected: list[str]) -> None:
    assert tell("TAG13", *rows, "LT-7", "LT-8", "LT-9") == expected


def test_the_tags_of_a_cell_are_audited_as_they_are_meant() -> None:
    assert counts("TAG13", "TE-2001A/B", "PT-9") == {"clear": 1, "finding": 1, "not applicable": 1}
    assert fixes("TAG13", "TE-2001A/B", "PT-9") == [("TE-2001A/B", "a row each: TE-2001A, TE-2001B", {})]
