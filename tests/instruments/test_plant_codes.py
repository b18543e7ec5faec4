"""Plant codes: what every plant has, what it says of its own, and the relatives of DPT."""

import pytest

from instruments.kind import Kind, code_kind
from instruments.plant_codes import CODES, code_for, codes_with, read_codes


def test_the_known_codes_and_their_kinds() -> None:
    assert {code: code_kind(entry) for code, entry in CODES.items()} == {
        "SDV": Kind.ON_OFF_VALVE,
        "BDV": Kind.ON_OFF_VALVE,
        "ESDV": Kind.ON_OFF_VALVE,
        "ROV": Kind.ON_OFF_VALVE,
        "MOV": Kind.ON_OFF_VALVE,
        "SOV": Kind.SOLENOID,
        "GD": Kind.GAS_DETECTOR,
        "FD": Kind.FIRE_DETECTOR,
        "JB": Kind.JUNCTION_BOX,
        "DPT": Kind.TRANSMITTER,
        "RO": Kind.PRIMARY_ELEMENT,
        "PVRV": Kind.RELIEF_VALVE,
    }
    assert {entry.first for entry in CODES.values()} == {None}


@pytest.mark.parametrize(
    ("letters", "turned"),
    [("DPIT", "PDIT"), ("DPI", "PDI"), ("DPSHH", "PDSHH"), ("DPAH", "PDAH"), ("DPG", "PDG")],
)
def test_relatives_of_dpt(letters: str, turned: str) -> None:
    found = code_for(letters)
    assert found is not None
    assert found.letters == turned


@pytest.mark.parametrize("letters", ["DP", "DPH", "DPTI", "DT", "PDT", "PT", ""])
def test_no_codes(letters: str) -> None:
    assert code_for(letters) is None


def test_no_relatives_where_dpt_is_no_code() -> None:
    assert code_for("DPIT", {}) is None


@pytest.mark.parametrize(
    ("text", "codes"),
    [
        ("SDV = on/off valve, X", {"SDV": ("on/off valve", "X")}),
        (
            "sdv: on/off valve; GD = gas detector, A;",
            {"SDV": ("on/off valve", ""), "GD": ("gas detector", "A")},
        ),
        ("PB = push button\nKHV=Kugelhahn,H", {"PB": ("push button", ""), "KHV": ("Kugelhahn", "H")}),
        ("ZV = valve, pneumatic, X", {"ZV": ("valve, pneumatic", "X")}),
        ("nothing; = x; A1 = b; SDV =", {}),
    ],
)
def test_codes_of_one_cell(text: str, codes: dict[str, tuple[str, str]]) -> None:
    assert read_codes(text) == codes


def test_a_plants_own_codes_lie_over_the_known() -> None:
    codes = codes_with({"SDV": ("on/off valve", "X"), "KHV": ("Kugelhahn", ""), "GD": ("governor drive", "S")})
    assert (codes["SDV"].first, codes["SDV"].meaning, codes["SDV"].letters) == ("X", "shutdown valve", "XV")
    assert code_kind(codes["KHV"]) is Kind.ON_OFF_VALVE
    assert (codes["GD"].meaning, codes["GD"].letters) == ("governor drive", None)
    assert codes["MOV"] is CODES["MOV"]
