"""Tags: reading, comparing, sorting, their loops, and what would mend them."""

import csv
import random
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.plant_codes import CODES, codes_with
from instruments.tag import (
    DEFAULT,
    PROFILES,
    assembly_key,
    best_profile,
    canonical_tag,
    is_equipment_shape,
    is_valve,
    look_alike_key,
    loop_agrees,
    loop_of,
    match_key,
    natural_key,
    nearest_fitting_tag,
    normalise_tag,
    plant_profile,
    profile_from_pattern,
    read_tag,
)

with (Path(__file__).parents[1] / "vectors" / "tags.csv").open(encoding="utf-8", newline="") as file:
    VECTORS = list(csv.DictReader(file))
COLUMNS = ("normalised", "prefix", "letters", "number", "suffix", "loop", "verdict")


def test_there_are_vectors() -> None:
    assert len(VECTORS) == 100


@pytest.mark.parametrize("row", VECTORS, ids=lambda row: repr(row["input"]))
def test_vector(row: dict[str, str]) -> None:
    reading = read_tag(row["input"])
    assert reading.as_vector() == {column: row[column] for column in COLUMNS}
    if row["verdict"] in ("valid", "site"):
        assert reading.reason == row["reason"]


# Others of the same kinds: prefix, letters, number, suffix, loop, verdict.
UNSEEN = {
    "20-LSHH-0034B": ("20", "LSHH", "0034", "B", "20-L-0034", "valid"),
    "3A-TDIC-12": ("3A", "TDIC", "12", "", "3A-T-12", "valid"),
    "lit 2013": ("", "LIT", "2013", "", "L-2013", "valid"),
    "fv101b": ("", "FV", "101", "B", "F-101", "valid"),
    "PSV.1200A": ("", "PSV", "1200", "A", "P-1200", "valid"),
    "PCV-12-2": ("", "PCV", "12", "2", "P-12", "valid"),
    "TE-3001A1": ("", "TE", "3001", "A1", "T-3001", "valid"),
    "AIT\u20112009": ("", "AIT", "2009", "", "A-2009", "valid"),
    "FIT\u20141\u200b01": ("", "FIT", "101", "", "F-101", "valid"),
    "\ufeff\u00a0VIT-7011\u00a0": ("", "VIT", "7011", "", "V-7011", "valid"),
    "ＦＴ－１０１": ("", "FT", "101", "", "F-101", "valid"),
    "PSV-9A/B": ("", "PSV", "9", "A/B", "P-9", "warn"),
    "FV-3A/B/C": ("", "FV", "3", "A/B/C", "F-3", "warn"),
    "XIC-4": ("", "XIC", "4", "", "X-4", "warn"),
    "FICA-10": ("", "FICA", "10", "", "F-10", "warn"),
    "TRCA-3": ("", "TRCA", "3", "", "T-3", "warn"),
    "LISA+ 12": ("", "LISA+", "12", "", "L-12", "warn"),
    "DT-5": ("", "DT", "5", "", "D-5", "warn"),
    "GT-5": ("", "GT", "5", "", "G-5", "warn"),
    "PB-5": ("", "PB", "5", "", "P-5", "warn"),
    "LT-000": ("", "LT", "000", "", "L-000", "warn"),
    "PT-2l": ("", "PT", "2", "L", "P-2", "warn"),
    "PT-20O": ("", "PT", "20", "O", "P-20", "warn"),
    "FT-1I1": ("", "FT", "1", "I1", "F-1", "warn"),
    "TE-12I": ("", "TE", "12", "I", "T-12", "valid"),  # the ninth of a lettered set
    "PT-2O2": ("", "PT", "2", "O2", "P-2", "warn"),
    "ТТ-300": ("", "TT", "300", "", "T-300", "warn"),  # Cyrillic
    "ΡΤ-300": ("", "PT", "300", "", "P-300", "warn"),  # Greek
    "PDISHH-3": ("", "PDISHH", "3", "", "P-3", "warn"),
    "ESDV-1201A": ("", "ESDV", "1201", "A", "by code table", "site"),
    "10-JB-101": ("10", "JB", "101", "", "by code table", "site"),
    "PVRV-2": ("", "PVRV", "2", "", "by code table", "site"),
    "RO-7": ("", "RO", "7", "", "by code table", "site"),
    "DPIT-12": ("", "DPIT", "12", "", "by code table", "site"),
    "TCI-4": ("", "TCI", "4", "", "", "invalid"),
    "LH-4": ("", "LH", "4", "", "", "invalid"),
    "P-3601A": ("", "P", "3601", "A", "", "invalid"),
    "PVV-1": ("", "PVV", "1", "", "", "invalid"),
    "PT_1001": ("", "", "", "", "", "invalid"),
    "11HAD20CL001": ("", "", "", "", "", "invalid"),
    "LT-1 THRU 4": ("", "", "", "", "", "invalid"),
    "TE-101A~D": ("", "", "", "", "", "invalid"),
    "PI/PT-4": ("", "", "", "", "", "invalid"),
    "TT-100, TT-101": ("", "", "", "", "", "invalid"),
    "LIT": ("", "", "", "", "", "invalid"),
    "1001": ("", "", "", "", "", "invalid"),
    "VOID": ("", "", "", "", "", "invalid"),
    "PT-1234567": ("", "", "", "", "", "invalid"),
    "": ("", "", "", "", "", "invalid"),
}


@pytest.mark.parametrize(("text", "parts"), UNSEEN.items())
def test_unseen(text: str, parts: tuple[str, ...]) -> None:
    vector = read_tag(text).as_vector()
    assert tuple(vector[column] for column in COLUMNS[1:]) == parts


def test_what_a_reading_tells_besides() -> None:
    reading = read_tag("РТ-1001A/B")
    assert (reading.look_alikes, reading.means, reading.legal) == ("РТ", ("PT-1001A", "PT-1001B"), "legal")
    assert read_tag("MT-31").undefined == "M"
    assert read_tag("MT-31", users_letters={"M"}).verdict == "valid"
    assert read_tag("SDV-1").code is CODES["SDV"]
    assert read_tag("TBA").placeholder
    assert not read_tag("PT_1").placeholder
    assert (read_tag("PT-1001 (Note 3)").normalised, read_tag("PT-1001 (Note 3)").note) == (
        "PT-1001",
        "Note 3",
    )
    assert read_tag("FT-101 new").verdict == "valid"


@pytest.mark.parametrize("word", ["SPARE 1", "UNIT 10", "NOTE 3", "HOLD-3", "-", "--", "n.a.", "?", "2oo3"])
def test_words_that_are_no_tags(word: str) -> None:
    reading = read_tag(word)
    assert (reading.parsed, reading.verdict) == (False, "invalid")


def test_serial_numbering_and_a_plants_codes() -> None:
    assert read_tag("10-FT-101", numbering="serial").loop == "10-101"
    assert read_tag("FT-101", numbering="serial").loop == "101"
    own = codes_with({"SDV": ("on/off valve", "X"), "FIC": ("flame ionisation cell", "B")})
    assert read_tag("SDV-1201", codes=own).loop == "X-1201"
    assert read_tag("SDV-1201", codes=own).as_vector()["loop"] == "by code table"
    assert (read_tag("FIC-1", codes=own).verdict, read_tag("FIC-1", codes=own).loop) == ("site", "B-1")


# --------------------------------------------------------------------------------------- normalisation


@given(st.text(max_size=40))
def test_normalise_is_idempotent(text: str) -> None:
    once = normalise_tag(text)
    assert normalise_tag(once) == once


@given(st.text(alphabet="АВЕаре\u0301\u200b\u0345ǰßŉſıİİµΐ½ﬁ\u00ad-/ l1", max_size=12))
def test_normalise_is_idempotent_for_what_unicode_does_worst(text: str) -> None:
    once = normalise_tag(text)
    assert normalise_tag(once) == once


@pytest.mark.parametrize("dash", "\u2010\u2011\u2012\u2013\u2014\u2015\u2212\u00ad\ufe58\ufe63\uff0d")
def test_every_dash_is_a_hyphen(dash: str) -> None:
    assert normalise_tag(f"PT{dash}1001") == "PT-1001"


@pytest.mark.parametrize("hidden", "\u200b\u200c\u200d\ufeff\u2060\u200e\x00\x7f")
def test_hidden_characters_go(hidden: str) -> None:
    assert normalise_tag(f"P{hidden}T-1001{hidden}") == "PT-1001"


@pytest.mark.parametrize(
    ("odd", "plain"),
    [
        ("АВЕКМНОРСТХУІЅЈ", "ABEKMHOPCTXYISJ"),
        ("ΑΒΕΖΗΙΚΜΝΟΡΤΥΧ", "ABEZHIKMNOPTYX"),
        ("рт", "PT"),
    ],
)
def test_look_alikes_become_latin(odd: str, plain: str) -> None:
    assert normalise_tag(odd) == plain
    assert read_tag(odd).look_alikes == odd


# ----------------------------------------------------------------------------------- never an accident


@given(st.text(max_size=60))
def test_any_text_is_read(text: str) -> None:
    reading = read_tag(text)
    assert reading.verdict in ("valid", "warn", "site", "invalid")
    assert match_key(reading) == match_key(read_tag(text))
    look_alike_key(reading)
    loop_of(reading)
    nearest_fitting_tag(text)
    loop_agrees(text, read_tag("PT-1"))
    loop_agrees("P-1", reading)


TAG_LIKE = st.from_regex(
    r"(?:[0-9]{1,2}[A-C]?[-. ]?)?[A-Z]{1,5}[-. _/]?[0-9OIl]{1,5}[-. ]?(?:[A-Z]{0,2}|[0-9]{1,2})"
    r"(?:/[A-Z])?( ?\(?[A-Za-z ]{0,9}\)?)?",
    fullmatch=True,
)


@given(TAG_LIKE)
def test_what_is_near_fits_and_needs_no_more_mending(text: str) -> None:
    nearest = nearest_fitting_tag(text)
    if nearest is not None:
        reading = read_tag(nearest)
        assert reading.parsed
        assert reading.legal != "illegal"
        assert nearest_fitting_tag(nearest) is None


@given(TAG_LIKE)
def test_separators_do_not_count(text: str) -> None:
    reading = read_tag(text)
    if reading.parsed and not reading.means and reading.legal != "illegal":
        again = read_tag(canonical_tag(reading))
        assert match_key(again) == match_key(reading)
        assert look_alike_key(again) == look_alike_key(read_tag(reading.normalised))


# ------------------------------------------------------------------------------------------- comparing


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("10-PT-1001A", "10 PT 1001 A"),
        ("PT-1001", "pt1001"),
        ("PT-1001-A", "PT-1001A"),
        ("PT\u20131001", "PT-1001"),
        ("PT-1001 (Note 3)", "PT-1001"),
        ("Boiler-feed 7/x", "boiler feed 7 x"),
    ],
)
def test_same_tag(one: str, other: str) -> None:
    assert match_key(read_tag(one)) == match_key(read_tag(other))


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("PT-1001", "PT-01001"),
        ("PCV-101-1", "PCV-1011"),
        ("PT-1001", "PT-1001A"),
        ("10-PT-1", "PT-1"),
        ("1-PT-1", "PT-11"),
    ],
)
def test_other_tag(one: str, other: str) -> None:
    assert match_key(read_tag(one)) != match_key(read_tag(other))


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("PT-0034", "PT-34"),
        ("FT-1O1", "FT-101"),
        ("FT-10O", "FT-100"),
        ("FT-10l", "FT-101"),
        ("FT-10I", "FT-101"),
        ("FT-l01", "FT-101"),
        ("FT-O101", "FT-0101"),
        ("FTO101", "FT-101"),
        ("F1-101", "FI-101"),
        ("P1C-101", "PIC-101"),
        ("F0-12", "FO-12"),
        ("РТ-1001", "PT-1001"),
        ("010-PT-1", "10-PT-1"),
    ],
)
def test_tags_that_look_the_same(one: str, other: str) -> None:
    assert look_alike_key(one) == look_alike_key(other)


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("TE-12L", "TE-121"),
        ("te-12l", "te-121"),
        ("P-11", "PI-1"),
        ("FI-1", "F-11"),
        ("PCV-101-1", "PCV-1011"),
        ("PT-100", "PT-10"),
        ("PT-101A", "PT-101"),
        ("PIT-1", "PT-1"),
    ],
)
def test_tags_that_do_not(one: str, other: str) -> None:
    assert look_alike_key(one) != look_alike_key(other)


def test_natural_order() -> None:
    tags = ["2-FT-1", "10-FT-1", "FT-9", "FT-9A", "FT-10", "FT-101", "FT-101A", "LT-1", "PT-2"]
    shuffled = random.Random(3).sample(tags, len(tags))
    assert sorted(shuffled, key=natural_key) == tags
    assert natural_key("FT-" + "9" * 5000) > natural_key("FT-10")


# ----------------------------------------------------------------------------------------------- loops


@pytest.mark.parametrize(
    ("tag", "parallel", "strict", "serial"),
    [
        ("PDT-77", "P-77", "PD-77", "77"),
        ("FQI-101", "F-101", "FQ-101", "101"),
        ("10-FFIC-305A", "10-F-305", "10-FF-305", "10-305"),
        ("FTIC-101", "F-101", "F-101", "101"),
        ("SDV-1201", "", "", "1201"),
        ("SPARE", "", "", ""),
    ],
)
def test_loop_of(tag: str, parallel: str, strict: str, serial: str) -> None:
    reading = read_tag(tag)
    assert loop_of(reading) == parallel
    assert loop_of(reading, with_modifier=True) == strict
    assert loop_of(reading, numbering="serial") == serial


@pytest.mark.parametrize(
    "tag", ["XV-1201", "XY-1201", "ZSO-1201", "ZSC-1201A", "HS-1201", "SDV-1201", "SOV-1201", "FV-1201"]
)
def test_a_valves_assembly(tag: str) -> None:
    assert assembly_key(read_tag(tag)) == ("", "1201")


@pytest.mark.parametrize("tag", ["FT-1201", "FIC-1201", "PSV-1201", "GD-1201", "SPARE", "P-1201"])
def test_not_of_a_valves_assembly(tag: str) -> None:
    assert assembly_key(read_tag(tag)) is None


@pytest.mark.parametrize(
    ("tag", "is_one"),
    [("XV-1", True), ("FCV-1", True), ("MOV-1", True), ("UZ-1", True), ("PSV-1", False), ("PVRV-1", False),
     ("SOV-1", False), ("ZSO-1", False), ("FT-1", False), ("GD-1", False)],
)  # fmt: skip
def test_is_valve(tag: str, is_one: bool) -> None:
    assert is_valve(read_tag(tag)) is is_one


@pytest.mark.parametrize(
    ("loop", "tag", "agrees"),
    [
        ("F-101", "FT-101", True),
        ("F101", "FT-101", True),
        ("f - 101", "FT-101", True),
        ("FIC-101", "FT-101", True),
        ("101", "FT-101", True),
        ("Loop 101", "FT-101", True),
        ("F-0101", "FT-101", True),
        ("10-F-101", "10-FT-101", True),
        ("F-101", "10-FT-101", True),
        ("PD-77", "PDT-77", True),
        ("F-102", "FT-101", False),
        ("P-101", "FT-101", False),
        ("20-F-101", "10-FT-101", False),
        ("102", "FT-101", False),
        ("FEED", "FT-101", None),
        ("", "FT-101", None),
        ("X-1201", "ZSO-1201", True),
        ("F-1201", "ZSO-1201", None),
        ("X-1202", "ZSO-1201", False),
        ("SDV-1201", "SDV-1201", True),
        ("X-1201", "SDV-1201", None),
        ("X-1202", "SDV-1201", False),
        ("F-101", "FTIC-101", None),
        ("F-101", "SPARE", None),
        ("L-12", "LT-12", True),
        ("L-13", "LT-12", False),
    ],
)
def test_loop_agrees(loop: str, tag: str, agrees: bool | None) -> None:
    assert loop_agrees(loop, read_tag(tag)) is agrees


def test_loop_agrees_with_the_valve_and_with_serial_numbering() -> None:
    assert loop_agrees("F-101", read_tag("ZSO-101"), valve_loops={"F-101"}) is True
    assert loop_agrees("T-101", read_tag("FT-101"), numbering="serial") is True
    assert loop_agrees("T-102", read_tag("FT-101"), numbering="serial") is False
    own = codes_with({"SDV": ("on/off valve", "X")})
    assert loop_agrees("X-1201", read_tag("SDV-1201", codes=own)) is True
    assert loop_agrees("P-1201", read_tag("SDV-1201", codes=own)) is False


@pytest.mark.parametrize(
    ("tag", "is_one"),
    [("P-3601A", True), ("10-E-101", True), ("P-3601A running", True), ("K101", True), ("PT-101", False),
     ("PUMP 1", True), ("MIXER-8A", True), ("HEATER 3", True), ("20-FAN-2", True), ("PUMPT 1", False), ("101", False)],
)  # fmt: skip
def test_equipment_shape(tag: str, is_one: bool) -> None:
    assert is_equipment_shape(read_tag(tag)) is is_one


# -------------------------------------------------------------------------------------------- profiles


@pytest.mark.parametrize("name", PROFILES)
def test_every_profile_reads_its_examples(name: str) -> None:
    profile = PROFILES[name]
    assert profile.examples
    for example in profile.examples:
        reading = read_tag(example, profile=profile)
        assert reading.parsed, example
        assert reading.verdict in ("valid", "site"), example
        assert match_key(read_tag(canonical_tag(reading, profile=profile), profile=profile)) == match_key(reading)


@pytest.mark.parametrize(
    ("texts", "name", "separator"),
    [
        (["PT-1001", "10-FT-2", "TIC101"], "isa-hyphen", "-"),
        (["PT 1001", "FT 2", "TIC-101"], "isa-hyphen", " "),
        (["PT_1001", "FT_2", "TIC-101"], "isa-hyphen", "_"),
        (["PT-1001", "FT-2", "TIC_101"], "isa-hyphen", "-"),
        (["20PT0034", "20FT0035", "13ESDV0012"], "compact", ""),
        (["U10-PT-1001", "U10-FT-2", "PT-3"], "isa-unit-prefix", "-"),
        (["P1_FT01", "P1_LIT01", "P1_FCV01D", "P2_24Vdc"], "isa-unit-prefix", ""),
        (["PT-210-01", "FT-210-02", "LIT-220-001A"], "isa-area-number", "-"),
        (["10LBA10CP001", "1 LBA10 CP002 XQ01", "PT-1"], "kks", ""),
        (["PIC 4712.02", "TIR 4713.01", "Boiler 1"], "isa-area-number", " "),
        (["Boiler 7 inlet", "4th pump", "PT-1"], "free-text", "-"),
        (["PAS1_TT11", "PAS1_FT11", "PAS1_PU11_RUN", "PAS1_PU11_FLT"], "free-text", "-"),
        (["PAS1_TT11", "PAS1_FT11", "PAS1_PU11_RUN"], "isa-unit-prefix", ""),
        (["Inlet pressure", "SPARE"], "isa-hyphen", "-"),
        ([], "isa-hyphen", "-"),
    ],
)
def test_best_profile(texts: list[str], name: str, separator: str) -> None:
    for order in (texts, texts[::-1], texts * 2):
        profile = best_profile(order)
        assert (profile.name, profile.separator) == (name, separator)


def test_a_lists_own_underscore_is_a_separator() -> None:
    profile = best_profile(["PT_1001", "FT_2", "TIC_101"])
    assert read_tag("PT_1001", profile=profile).parsed
    assert read_tag("PT-1001", profile=profile).parsed
    assert canonical_tag(read_tag("PT-1001"), profile=profile) == "PT_1001"


def test_an_area_in_the_middle() -> None:
    reading = read_tag("PT-210-001A", profile=PROFILES["isa-area-number"])
    assert (reading.prefix, reading.letters, reading.number, reading.suffix, reading.loop) == (
        "210", "PT", "001", "A", "P-210-001",
    )  # fmt: skip
    assert loop_agrees("P-210-001", reading, profile=PROFILES["isa-area-number"]) is True


def test_kks() -> None:
    reading = read_tag("10LBA10 CP001", profile=PROFILES["kks"])
    assert (reading.verdict, reading.letters, reading.number, reading.loop) == (
        "valid",
        "CP",
        "001",
        "10LBA10CP001",
    )


def test_free_text_asks_for_nothing() -> None:
    profile = PROFILES["free-text"]
    assert read_tag("Inlet pressure", profile=profile).verdict == "valid"
    assert read_tag("PIC 4712.02", profile=profile).letters == "PIC"
    assert (read_tag("QZH 7", profile=profile).verdict, read_tag("QZH 7", profile=profile).parsed) == (
        "valid",
        False,
    )


@pytest.mark.parametrize(
    ("pattern", "tag", "parts"),
    [
        (
            r"(?P<p>[A-Z]\d{2})-(?P<l>[A-Z]+)-(?P<n>\d{4})(?P<x>[A-Z])?",
            "B12-FT-0031A",
            ("B12", "FT", "0031", "A"),
        ),
        (r"^(?P<l>[a-z]{2,5}) (?P<n>\d{3})$", "PDIT 101", ("", "PDIT", "101", "")),
        (
            r"(?:(?P<p>\d{2})-|(?P<p2>\d))(?P<l>[A-Z]+)-(?P<n>\d+)(?:-(?P<x>[A-Z])|/(?P<x2>\d))?",
            "1FT-9/2",
            ("1", "FT", "9", "2"),
        ),
        (r"(?P<p>(?:[A-Z0-9]+-)*)(?P<l>[A-Z]+)-(?P<n>\d+)", "AB-12-FT-1", ("AB-12-", "FT", "1", "")),
    ],
)
def test_a_plants_own_pattern(pattern: str, tag: str, parts: tuple[str, str, str, str]) -> None:
    profile = profile_from_pattern(pattern)
    reading = read_tag(tag, profile=profile)
    assert (reading.prefix, reading.letters, reading.number, reading.suffix) == parts


OWN = profile_from_pattern(r"(?P<p>\d{2})-(?P<l>[A-Z]{2,5})-(?P<n>\d{4})(?P<x>[A-Z])?")


@pytest.mark.parametrize(
    ("tag", "parsed", "nearest"),
    [
        ("10-PT-1001A", True, None),
        ("10 PT 1001 A", True, "10-PT-1001A"),
        ("10PT1001", True, "10-PT-1001"),
        ("10_PT_1001", False, "10-PT-1001"),
        ("10-PT-34", False, "10-PT-0034"),
        ("PT-1001", False, None),
        ("10-PT-1O01", False, "10-PT-1001"),
    ],
)
def test_separators_are_made_canonical_first(tag: str, parsed: bool, nearest: str | None) -> None:
    assert read_tag(tag, profile=OWN).parsed is parsed
    assert nearest_fitting_tag(tag, profile=OWN) == nearest


def test_hyphens_in_a_compact_list_are_separators() -> None:
    assert read_tag("20-PT-0034", profile=PROFILES["compact"]).parsed
    assert canonical_tag(read_tag("20-PT-0034"), profile=PROFILES["compact"]) == "20PT0034"


@pytest.mark.parametrize(
    ("pattern", "why"),
    [
        ("(", "no regular expression"),
        ("[z-a]", "no regular expression"),
        (r"(?P<l>[A-Z]+)\d+", "no group n"),
        (r"[A-Z]+\d+", "no group l and no group n"),
        (r"(?P<l>A)(?P<n>1)(?P<unit>x)", "names the group unit"),
        ("A" * 501, "501 characters"),
        (r"(?P<l>(A+)+)(?P<n>\d)", "repeat inside"),
        (r"(?P<l>(A|AB|B)*)(?P<n>\d)", "repeat inside"),
        (r"(?P<l>(?:[A-Z0-9]+-?)*)(?P<n>\d)", "repeat inside"),
        (r"(?P<l>(?:/A{0,9}A{0,9})*X)(?P<n>\d)", "repeat inside"),
        (r"(?P<l>(?:A{0,60}){60})(?P<n>1)", "repeat inside"),
        (r"(?P<l>A)(?P<n>(\d?){30})x", "repeat inside"),
        (r"(?P<l>(?=(A+)+)B)(?P<n>1)", "repeat inside"),
        (r"(?P<l>A)(?P<n>" + "(?:" * 9 + "1" + "){2}" * 9 + ")", "one inside of the other"),
        (r"\d*\d*\d*\d*\d*(?P<l>A)(?P<n>\d)", "too many ways"),
        (r"(?P<l>.*)(?P<n>.*).*.*", "too many ways"),
        (r"(?P<l>A)(?P<n>" + "1?" * 40 + "1" * 40 + ")", "too many ways"),
        (r"(?P<l>A)(?P<n>1)\1*", "refers back"),
    ],
)
def test_a_pattern_that_cannot_be_used_says_why(pattern: str, why: str) -> None:
    with pytest.raises(ValueError, match=why):
        profile_from_pattern(pattern)


@pytest.mark.parametrize(
    "pattern",
    [
        DEFAULT.pattern,
        r"^(?:(?P<p>[0-9]{1,4}[A-Z]?)[-./ ]|(?P<p2>[0-9]{1,4}))?(?P<l>[A-Z]{1,6})[-./ ]?(?P<n>[0-9]{1,6})"
        r"(?:[-./ ]?(?P<x>[A-Z]{1,2}[0-9]?(?:/[A-Z0-9]{1,2})*)|-(?P<x2>[0-9]{1,2}))?$",
        r"(?P<l>[A-Z]+)-?(?P<n>\d+)(?P<x>[A-Z]*)",
        r"(?P<p>.*)-(?P<l>[A-Z]+)-(?P<n>\d+).*",
        r"(?P<l>(?:FT|PT|TT|LT))(?P<n>\d+)",
        r"(?P<l>([A-Z]|[A-C])+)(?P<n>1)",
    ],
)
def test_ordinary_patterns_are_taken_and_are_quick(pattern: str) -> None:
    profile = profile_from_pattern(pattern)
    for probe in ("A" * 63 + "!", "1" * 63 + "!", "A1" * 31 + "!", "A-" * 31 + "!", "AB" * 5000):
        profile.parts(probe)


def test_a_plants_profile_by_name_or_pattern() -> None:
    assert plant_profile("ISA hyphen") is PROFILES["isa-hyphen"]
    assert plant_profile(" kks ") is PROFILES["kks"]
    assert plant_profile("") is None
    assert plant_profile(None) is None
    own = plant_profile(r"(?P<l>[A-Z]+)(?P<n>\d+)")
    assert own is not None
    assert own.parts("FT1") == ("", "FT", "1", "")
    with pytest.raises(ValueError, match="no group l"):
        plant_profile("isa-hyphens")


# -------------------------------------------------------------------------------------- what would fit


@pytest.mark.parametrize(
    ("text", "nearest"),
    [
        ("PT_1001", "PT-1001"),
        ("pt:1001", "PT-1001"),
        ("PT--1001", "PT-1001"),
        ("PT-1001.", "PT-1001"),
        ("PT-1001(A)", "PT-1001A"),
        ("10_PT_1001_A", "10-PT-1001A"),
        ("PT-1001 DISCHARGE", "PT-1001"),
        ("FT-IO1", "FT-101"),
        ("FT-O101", "FT-0101"),
        ("F1-101", "FI-101"),
        ("P1C-101", "PIC-101"),
        ("РТ_1001", "PT-1001"),
        ("FT-1O1", "FT-101"),
        ("FT-10l", "FT-101"),
        ("PT-1001", None),
        ("PT-1001A", None),
        ("TE-12I", None),
        ("TCI-4", None),
        ("ZIO-3", None),
        ("SPARE", None),
        ("UNIT_10", None),
        ("PT-1234567", None),
        ("12345-PT-1", None),
        ("FIT-0101/0102", None),
        ("PT-101 102", None),
        ("Inlet pressure", None),
        ("", None),
    ],
)
def test_nearest_fitting_tag(text: str, nearest: str | None) -> None:
    assert nearest_fitting_tag(text) == nearest
