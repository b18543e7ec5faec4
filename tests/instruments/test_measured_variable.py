"""What tags measure, and in which units their ranges can be."""

import pytest

from instruments.measured_variable import dimension_allowed, measured_variable
from instruments.plant_codes import codes_with

UNIT_KINDS = tuple(
    "pressure temperature dtemp volflow stdflow massflow ratio length vel accel speed cond curr volt res power "  # noqa: SIM905
    "conc volume density dynvisc kinvisc mass other".split()
)
ANYTHING = " ".join(UNIT_KINDS)


@pytest.mark.parametrize(
    ("letters", "variable"),
    [
        ("PT", "pressure"),
        ("PDIT", "differential pressure"),
        ("DPT", "differential pressure"),
        ("DPSH", "differential pressure"),
        ("PSV", "pressure"),
        ("PVRV", "pressure"),
        ("PDSV", "differential pressure"),
        ("TT", "temperature"),
        ("TDT", "temperature difference"),
        ("FIC", "flow"),
        ("FQIT", "flow quantity"),
        ("FQ", "flow"),
        ("FFIC", "flow ratio"),
        ("RO", "flow"),
        ("LSHH", "level"),
        ("AIT", "analysis"),
        ("GD", "analysis"),
        ("FD", "fire"),
        ("ST", "speed"),
        ("VT", "vibration"),
        ("WT", "weight"),
        ("ZT", "position"),
        ("JI", "power"),
        ("EI", "voltage"),
        ("II", "current"),
        ("SDV", None),
        ("SOV", None),
        ("JB", None),
        ("DT", None),
        ("", None),
    ],
)
def test_measured_variable(letters: str, variable: str | None) -> None:
    assert measured_variable(letters) == variable


def test_measured_variable_by_the_plants_own_words() -> None:
    assert measured_variable("DT", users_letters={"D": "density"}) == "density"
    assert measured_variable("KHV", codes=codes_with({"KHV": ("Kugelhahn", "F")})) == "flow"
    assert measured_variable("CL", scheme="kks") == "level"


# The units that may stand, and (after the stroke) those of which nothing is said; all others are findings.
@pytest.mark.parametrize(
    ("letters", "units"),
    [
        ("PT", "pressure"),
        ("PDIT", "pressure"),
        ("DPIT", "pressure"),
        ("PG", "pressure"),
        ("PSHH", "pressure"),
        ("TT", "temperature dtemp"),
        ("TIC", "temperature dtemp / ratio"),
        ("TE", "temperature dtemp volt curr res length speed"),
        ("FT", "volflow stdflow massflow / vel pressure"),
        ("FQIT", "volflow stdflow massflow volume mass / vel pressure"),
        ("FIQ", "volflow stdflow massflow volume mass / vel pressure"),
        ("FFIC", "volflow stdflow massflow ratio / vel pressure"),
        ("LT", "length pressure volume mass ratio"),
        ("LSH", "length pressure volume mass ratio"),
        ("ST", "speed ratio vel / other accel"),
        ("VT", "vel accel length ratio dynvisc kinvisc / speed other volt curr"),
        ("WT", "mass massflow ratio / other pressure"),
        ("ZT", "length ratio other / speed curr volt res"),
        ("II", "curr ratio / other"),
        ("EI", "volt ratio / other curr power"),
        ("JI", "power curr volt ratio / other"),
        *(
            (letters, " ".join(UNIT_KINDS))
            for letters in ("AIT", "QI", "UI", "XT", "YI", "DT", "CT", "GT", "MT", "HIC")
        ),
        *(
            (letters, " ".join(UNIT_KINDS))
            for letters in ("FV", "FY", "TW", "FO", "PSV", "SDV", "JB", "GD", "RO", "PVRV")
        ),
        *((letters, f" / {ANYTHING}") for letters in ("FTIC", "T", "PH")),
    ],
)
def test_dimensions(letters: str, units: str) -> None:
    allowed, _, untold = units.partition("/")
    expected = {
        kind: True if kind in allowed.split() else None if kind in untold.split() else False for kind in UNIT_KINDS
    }
    assert {kind: dimension_allowed(letters, kind) for kind in UNIT_KINDS} == expected


@pytest.mark.parametrize(
    ("dp_body", "square_root_known", "allowed"),
    [
        (True, True, True),
        (True, False, None),
        (False, True, False),
        (False, False, False),
        (None, True, True),
        (None, False, None),
    ],
)
def test_flow_in_pressure(dp_body: bool | None, square_root_known: bool, allowed: bool | None) -> None:
    assert dimension_allowed("FT", "pressure", dp_body=dp_body, square_root_known=square_root_known) is allowed


def test_a_unit_that_is_not_known_is_not_judged() -> None:
    assert dimension_allowed("PT", None) is None


def test_kks() -> None:
    assert dimension_allowed("CP", "pressure", scheme="kks") is True
    assert dimension_allowed("CT", "pressure", scheme="kks") is False
    assert dimension_allowed("AA", "pressure", scheme="kks") is None
