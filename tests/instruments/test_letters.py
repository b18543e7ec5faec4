"""Identification letters: the rules of succession, and what is proposed where they are broken."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.letters import (
    LETTERS,
    USERS_CHOICE,
    letters_stem,
    nearest_legal_letters,
    read_letters,
    read_users_letters,
)


def test_every_letter_has_a_first_meaning() -> None:
    assert {m.letter for m in LETTERS if m.role == "first"} == set("ABCDEFGHIJKLMNOPQRSTUVWXYZ")
    assert frozenset("CDGMNO") == USERS_CHOICE
    assert {m.edition for m in LETTERS} == {"1984", "2009", "both"}


LEGAL = {
    "FT": "flow + transmit",
    "PDIT": "pressure + differential(mod) + indicate + transmit",
    "TDIC": "temperature + differential(mod) + indicate + control",
    "FQ": "flow + totalise",
    "FQIT": "flow + total(mod) + indicate + transmit",
    "FFSL": "flow + ratio(mod) + switch + low",
    "FY": "flow + relay/compute/convert",
    "VYT": "vibration/mech. analysis + y-axis(mod) + transmit",
    "VXSHH": "vibration/mech. analysis + x-axis(mod) + switch + high + high",
    "UZ": "multivariable + actuator/driver",
    "XZV": "unclassified + z-axis/SIS(mod) + valve",
    "PSV": "pressure + safety(mod) + valve",
    "TSE": "temperature + safety(mod) + element",
    "PSH": "pressure + switch + high",
    "PDSV": "pressure + differential(mod) + safety(mod) + valve",
    "PDZSHH": "pressure + differential(mod) + z-axis/SIS(mod) + switch + high + high",
    "LSHL": "level + switch + high + low",
    "LSHHH": "level + switch + high + high + high",
    "LIHH": "level + indicate + high + high",
    "PTD": "pressure + transmit + deviation",
    "LSM": "level + switch + middle",
    "ZSO": "position/dimension + switch + open",
    "ZLC": "position/dimension + light + closed",
    "ZIO": "position/dimension + indicate + open",
    "YLR": "event/state/presence + light + run",
    "HSS": "hand + switch + stop",
    "TJR": "temperature + scan + record",
    "WKIC": "weight/force + time rate of change(mod) + indicate + control",
    "AAHH": "analysis + alarm + high + high",
    "LAHSHH": "level + alarm + high + switch + high + high",
    "TIRC": "temperature + indicate + record + control",
}


@pytest.mark.parametrize(("letters", "meaning"), LEGAL.items())
def test_legal(letters: str, meaning: str) -> None:
    reading = read_letters(letters)
    assert (reading.legal, " + ".join(reading.meaning), reading.problem) == ("legal", meaning, "")


@pytest.mark.parametrize(
    ("letters", "problem"),
    [
        ("T", "no function letter"),
        ("PH", "modifier H has no function letter before it"),
        ("LHH", "modifier H has no function letter before it"),
        ("PDH", "modifier D has no function letter before it"),
        ("PD", "modifier D has no function letter before it"),
        ("FF", "F is no function letter"),
        ("TCI", "readout I after output letter"),
        ("FTIC", "readout I after output letter"),
        ("PTR", "readout R after output letter"),
        ("TTE", "readout E after output letter"),
        ("FYI", "readout I after output letter"),
        ("FITQ", "readout Q after output letter"),
        ("PVV", "function V is repeated"),
        ("TICC", "function C is repeated"),
        ("TEE", "function E is repeated"),
        ("PITH", ""),
        ("LTVH", "modifier H has no function letter before it"),
        ("LSHHHH", "modifier H has no function letter before it"),
        ("TVO", "readout O after output letter"),
        ("ZOS", "O for open stands behind the switch or light that it speaks of"),
        ("ZO", ""),
        ("FO", ""),
    ],
)
def test_illegal_and_why(letters: str, problem: str) -> None:
    reading = read_letters(letters)
    assert (reading.legal, reading.problem) == ("illegal" if problem else "legal", problem)


@pytest.mark.parametrize(
    "letters",
    ["ZIC", "XIC", "ZICA", "LL", "LLH", "LLL", "FICA", "TRCA", "FIRCSA", "TSHA", "PTA", "PB", "FN", "HMS"],
)
def test_two_traditions(letters: str) -> None:
    reading = read_letters(letters)
    assert reading.legal == "ambiguous"
    assert reading.problem


@pytest.mark.parametrize("letters", ["TIC", "FFIC", "ZIT", "ZC", "LLC", "LSL", "YIC", "LIA", "PAHH"])
def test_one_tradition_only(letters: str) -> None:
    assert read_letters(letters).legal == "legal"


def test_momentary_is_the_1984_editions_modifier() -> None:
    assert read_letters("HMS", edition="1984").legal == "legal"
    assert read_letters("TJI", edition="1984").meaning == ("temperature", "scan(mod)", "indicate")


@pytest.mark.parametrize("first", "CDGMNO")
def test_users_choice_is_legal_but_wants_a_definition(first: str) -> None:
    assert (read_letters(f"{first}T").legal, read_letters(f"{first}T").undefined) == ("legal", first)
    assert read_letters(f"{first}T", users_letters={first}).undefined == ""


def test_functions_carry_their_modifiers() -> None:
    assert read_letters("PDISHH").functions == ("I", "SHH")
    assert read_letters("LISA+").functions == ("I", "S", "AH")
    assert read_letters("ZSC").function_letters == frozenset("S")


def test_longer_than_five_is_told_but_legal() -> None:
    assert (read_letters("PDISHH").legal, read_letters("PDISHH").too_long) == ("legal", True)
    assert not read_letters("PZSHH").too_long


@pytest.mark.parametrize(
    ("letters", "nearest"),
    [
        ("TCI", "TIC"),
        ("FTIC", "FIC"),
        ("PTI", "PIT"),
        ("FCI", "FIC"),
        ("FITQ", "FIQT"),
        ("PH", "AT"),
        ("PDH", "PDSH"),
        ("LHH", "LSHH"),
        ("T", "TT"),
        ("PTT", "PT"),
        ("TTE", "TT"),
        ("PITT", "PIT"),
        ("PDDT", "PDT"),
        ("LHSH", "LSHH"),
        ("TTIC", "TIC"),
        ("LSHHHH", "LSHHH"),
        ("XVO", "XV"),
        ("FFF", "FFT"),
    ],
)
def test_nearest_legal_letters(letters: str, nearest: str) -> None:
    assert nearest_legal_letters(letters)[0] == nearest


def test_nearest_letters_for_low_low_name_switch_and_alarm() -> None:
    assert nearest_legal_letters("LL")[:2] == ("LSLL", "LALL")
    assert nearest_legal_letters("PH")[:4] == ("AT", "AIT", "AE", "PSH")
    assert "FQIT" in nearest_legal_letters("FITQ")


def test_codes_are_proposed_too() -> None:
    assert nearest_legal_letters("SVD", codes=frozenset({"SDV"}))[0] == "SDV"


@given(st.text(alphabet="ABCDEFGHIJKLMNOPQRSTUVWXYZ", min_size=1, max_size=7))
def test_proposals_are_legal_and_not_what_was_written(letters: str) -> None:
    for proposal in nearest_legal_letters(letters):
        assert proposal != letters
        assert read_letters(proposal).legal == "legal"


@given(st.text(max_size=10))
def test_any_text_is_read(text: str) -> None:
    assert read_letters(text).legal in ("legal", "ambiguous", "illegal")
    nearest_legal_letters(text)


@given(st.text(alphabet="ABCDEFGHIJKLMNOPQRSTUVWXYZ", min_size=2, max_size=6))
def test_legal_letters_lose_nothing(letters: str) -> None:
    reading = read_letters(letters)
    if reading.legal != "illegal":
        assert reading.first + reading.modifier + "".join(reading.functions) == letters
        assert len(reading.meaning) == len(letters)


@pytest.mark.parametrize(
    ("letters", "stem"), [("ZSO", "ZS"), ("LSHH", "LS"), ("LAHSHH", "LAHS"), ("PT", "PT"), ("PH", "PH")]
)
def test_stem(letters: str, stem: str) -> None:
    assert letters_stem(letters) == stem


@pytest.mark.parametrize(
    ("text", "letters"),
    [
        ("D = density; C = conductivity", {"D": "density", "C": "conductivity"}),
        ("d: Dichte", {"D": "Dichte"}),
        ("D=density, M=moisture", {"D": "density", "M": "moisture"}),
        ("G gas\nD density", {"G": "gas", "D": "density"}),
        ("", {}),
        ("D =; = x; DD = y", {}),
    ],
)
def test_users_letters_of_one_cell(text: str, letters: dict[str, str]) -> None:
    assert read_users_letters(text) == letters
