"""What if: which changes a file can tell, what they change, and that asking less finds the same as asking all."""

from __future__ import annotations

from functools import cache
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from instruments.written import CannotStand
from loops.plant import assemble
from tests.twin import twin
from validation.audit import Audit, audit
from validation.example import example_plant
from validation.finding import Finding
from validation.what_if import Change, changed_lists, read_changes, what_if

Row = dict[str, Any]


# ------------------------------------------------------------------------------------------------------- the file


def test_a_change_is_read_of_toml() -> None:
    told = read_changes(
        """
        [[change]]
        sheet = "areas"
        rows = "30T"
        set = { zone = 0, "gas group" = "IIC" }

        [[change]]
        sheet = "Loops"
        rows = "*"
        set = { "supply V nominal" = 22.5, HART = true }
        add = { "cable length" = 100 }

        [[change]]
        rows = ["PT-1", "PT-2"]
        where = { "device type" = "T1" }
        set = { "device type" = "T2" }
        """
    )
    assert told == (
        Change(sheet="Areas", rows=("30T",), set={"zone": "0", "gas group": "IIC"}),
        Change(sheet="Loops", set={"supply V nominal": "22.5", "HART": "yes"}, add={"cable length": 100.0}),
        Change(rows=("PT-1", "PT-2"), where={"device type": "T1"}, set={"device type": "T2"}),
    )


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("", "it has no [[change]]"),
        ("change = 3", "it has no [[change]]"),
        ("[[change", "it is no TOML"),
        ('[plant]\nname = "x"', "it says plant; a what-if has only [[change]]"),
        ('[[change]]\nrows = "*"\nvalues = { URV = 1 }', "change 1 says values; it can say add, rows, set, "),
        ('[[change]]\nsheet = "Zones"\nrows = "*"\nset = { URV = 1 }', "change 1: there is no sheet Zones; there are "),
        ("[[change]]\nset = { URV = 1 }", "change 1 does not say which rows"),
        ('[[change]]\nrows = [1]\nset = { URV = 1 }', "change 1 does not say which rows"),
        ('[[change]]\nrows = "*"', "change 1 changes nothing: it needs set or add"),
        ('[[change]]\nrows = "*"\nset = "URV"', "change 1, set needs columns and their values"),
        ('[[change]]\nrows = "*"\nset = { URV = [1] }', "change 1, set, URV needs a text or a number"),
        ('[[change]]\nrows = "*"\nadd = { "cable length" = "far" }', "change 1, add, cable length needs a number"),
    ],
)  # fmt: skip
def test_what_no_what_if_says_is_refused(text: str, says: str) -> None:
    with pytest.raises(CannotStand) as refused:
        read_changes(text)
    assert str(refused.value).startswith(says)


# -------------------------------------------------------------------------------------------------- what it changes

ROWS: list[Row] = [
    {"tag": "PT-1", "service": "Feed", "device type": "T1", "area": "Z1", "LRV": "0 barg", "URV": "10 barg",
     "cable length": 100, "signal": "4-20 mA"},
    {"tag": "PT-2", "service": "Feed", "device type": "T2", "area": "Z1", "LRV": "0 barg", "URV": "10 barg",
     "signal": "4-20 mA"},
]  # fmt: skip
SHEETS: dict[str, Any] = {
    "types": [
        {"code": "T1", "kind": "transmitter", "LRL": "0 barg", "URL": "16 barg", "ambient max": "60 degC"},
        {"code": "T2", "kind": "transmitter", "LRL": "0 barg", "URL": "4 barg", "ambient max": "40 degC"},
    ],
    "areas": [{"code": "Z1", "zone": "2", "ambient min": -20, "ambient max": 40}],
}


def small(*rows: Row) -> Audit:
    return audit(example_plant([*ROWS, *rows], **SHEETS), raise_errors=True)


def told_of(found: tuple[Finding, ...]) -> list[str]:
    return [f"{each.rule} {each.subject}" for each in found]


def test_one_type_for_another() -> None:
    found = what_if(small(), [Change(where={"device type": "T2"}, set={"device type": "T1"})], raise_errors=True)
    assert found.changed == ("Instruments PT-2: device type becomes T1 (was device type T2)",)
    assert [each for each in told_of(found.go) if "RNG" in each] == ["RNG02 PT-2"]
    assert found.appear == ()


def test_an_area_that_becomes_hotter() -> None:
    found = what_if(small(), [Change(sheet="Areas", rows=("Z1",), set={"ambient max": "50 degC"})], raise_errors=True)
    assert found.changed == ("Areas Z1: ambient max becomes 50 degC (was ambient max 40)",)
    assert told_of(found.appear) == ["PRO06 PT-2"]
    assert "TAG04" not in found.rules


def test_lengths_are_added_where_there_are_any() -> None:
    plant = small().plant
    lists = changed_lists(plant, [Change(add={"cable length": 100.0})])
    assert [row.cable_length_m for row in lists.records["Instruments"]] == [200.0, None]
    found = what_if(small(), [Change(add={"cable length": 100.0})])
    assert found.changed == ("Instruments PT-1: cable length +100 (was cable length 100)",)


def test_changes_are_made_one_after_the_other() -> None:
    plant = small().plant
    changes = [
        Change(rows=("PT-1",), set={"device type": "T2"}),
        Change(where={"device type": "T2"}, set={"URV": "4 barg"}),
        Change(rows=("PT 1",), add={"URV": -1.0}),
    ]
    rows = changed_lists(plant, changes).records["Instruments"]
    assert [(row.device_type, str(row.urv)) for row in rows] == [("T2", "3 barg"), ("T2", "4 barg")]
    # The plant itself stays as it is.
    assert [str(row.urv) for row in plant.lists.records["Instruments"]] == ["10 barg", "10 barg"]


def test_what_is_so_already_changes_nothing() -> None:
    found = what_if(small(), [Change(rows=("PT-1",), set={"URV": "10 barg"})])
    assert (found.changed, found.appear, found.go) == (("Instruments: nothing, for it is so already",), (), ())


def test_a_finding_that_stays_with_other_figures() -> None:
    found = what_if(small(), [Change(rows=("PT-2",), set={"URV": "12 barg"})], raise_errors=True)
    assert (told_of(found.appear), told_of(found.go)) == ([], [])
    assert "RNG02" in {after.rule for _, after in found.stay}


@pytest.mark.parametrize(
    ("change", "says"),
    [
        (Change(rows=("PT-9",), set={"URV": "1 barg"}), "no row of Instruments is PT-9"),
        (Change(rows=("PT-1",), set={"colour": "red"}), "Instruments has no column colour"),
        (Change(rows=("PT-1",), where={"colour": "red"}, set={"URV": "1 barg"}), "Instruments has no column colour"),
        (Change(rows=("PT-1",), set={"URV": "wide"}), "URV cannot be 'wide'"),
        (Change(rows=("PT-1",), set={"wires": "few"}), "wires cannot be 'few'"),
        (Change(where={"wires": "9"}, set={"URV": "1 barg"}), "no row of Instruments that is meant has wires 9"),
        (Change(rows=("PT-2",), add={"cable length": 5.0}), "no row of Instruments that is meant has a number"),
        (Change(rows=("PT-2",), add={"service": 5.0}), "service holds no numbers to add to"),
        (Change(sheet="Loops", set={"HART": "yes"}), "there is no sheet of Loops"),
        (Change(sheet="Areas", rows=("Z9",), set={"zone": "0"}), "no row of Areas is Z9"),
    ],
)  # fmt: skip
def test_what_cannot_be_changed_says_why(change: Change, says: str) -> None:
    with pytest.raises(CannotStand) as refused:
        what_if(small(), [change])
    assert str(refused.value).startswith(says)


# ----------------------------------------------------------------------------- asking less finds what asking all does


@cache
def clean() -> Audit:
    return twin().audit(twin().rows)


AREAS = st.sampled_from(("10A", "10B", "30T", "40B", "50A"))
TAGS = st.sampled_from(
    ("PT-1001", "FT-1007", "LT-3001", "TE-4006A", "XY-1013", "ZSO-1013", "PT-1045", "FV-1051", "PT-3020")
)
TYPES = st.sampled_from(("TP-G02", "TP-G10", "TP-S16", "ZB-28", "ISO-AI", "SV-M", "TC-K", "AI-16H", "LF-N"))
VALUES: dict[str, list[Row]] = {
    "Areas": [
        {"zone": "0"}, {"zone": "1"}, {"zone": "2"}, {"gas group": "IIC"}, {"gas group": "IIA"}, {"gas": "hydrogen"},
        {"temperature class": "T6"}, {"ambient max": "50"}, {"ambient max": "75"}, {"ambient min": "-45"},
        {"ambient max": ""},
    ],
    "Loops": [
        {"supply V nominal": "22", "supply V min": "21"}, {"supply V max": "31"}, {"range resistor": "600"},
        {"HART": "yes"}, {"supply V min": ""}, {"cable length": "9000"}, {"barrier": "ZB-28"},
    ],
    "Cables": [{"length": "2000"}, {"type": "NS-1P"}, {"type": ""}],
    "Cable types": [{"ohm per km": "90"}, {"capacitance": "900"}],
    "Device types": [
        {"lift-off V": "15"}, {"maximum V": "20"}, {"URL": "1 barg"}, {"ambient limit max": "30 degC"}, {"Uo V": "40"},
        {"Ui V": "5"}, {"Ex marking": "II 3 G Ex ec IIB T3 Gc"}, {"working voltage V": "20"}, {"resistance ohm": "900"},
        {"coil W": "30"}, {"Ci nF": "900"}, {"wires": "4"}, {"kind": "isolator"}, {"sensor type": "J"},
    ],
    "Instruments": [
        {"URV": "3 barg"}, {"HH": "900 barg"}, {"design pressure": "0.01 barg"}, {"power supply": "12 VDC"},
        {"device type": "TP-G10"}, {"area": "40B"}, {"barrier": "ZB-28"}, {"barrier": ""}, {"status": "deleted"},
        {"loop": "P-1001"}, {"I/O address": "D1.02.00"}, {"service": "Other"}, {"kind": "switch"}, {"tag": "PT-3004"},
        {"mounting": "direct"}, {"Ex marking": "II 2 G Ex db IIB T3 Gb"}, {"trip": "5 barg"}, {"LRV": "2 barg"},
    ],
}  # fmt: skip
NAMES: dict[str, Any] = {
    "Areas": AREAS, "Device types": TYPES, "Instruments": TAGS, "Loops": st.nothing(), "Cables": st.nothing(),
    "Cable types": st.nothing(),
}  # fmt: skip


def one_change(sheet: str) -> st.SearchStrategy[tuple[str, tuple[str, ...], Row]]:
    rows = st.one_of(NAMES[sheet].map(lambda each: (each,)), st.just(()))
    return st.tuples(st.just(sheet), rows, st.sampled_from(VALUES[sheet]))


ONE = st.sampled_from(sorted(VALUES)).flatmap(one_change)


def whole_difference(changes: list[Change]) -> tuple[dict[Any, str], dict[Any, str]]:
    """Return what appears and what goes by auditing the whole of the changed lists by every rule."""
    after = audit(assemble(changed_lists(clean().plant, changes)), raise_errors=True).findings
    was = {(each.identity, each.outcome): each.message for each in clean().findings}
    found = {(each.identity, each.outcome): each.message for each in after}
    return (
        {key: found[key] for key in found.keys() - was.keys()},
        {key: was[key] for key in was.keys() - found.keys()},
    )


def by_key(found: tuple[Finding, ...]) -> dict[Any, str]:
    return {(each.identity, each.outcome): each.message for each in found}


@settings(max_examples=25, deadline=None, suppress_health_check=list(HealthCheck))
@given(st.lists(ONE, min_size=1, max_size=2))
def test_it_finds_what_a_whole_audit_finds(told: list[tuple[str, tuple[str, ...], Row]]) -> None:
    changes = [Change(sheet=sheet, rows=rows, set=values) for sheet, rows, values in told]
    found = what_if(clean(), changes, raise_errors=True)
    assert (by_key(found.appear), by_key(found.go)) == whole_difference(changes)


def test_a_small_change_looks_at_a_small_part() -> None:
    found = what_if(clean(), [Change(rows=("PT-3020",), set={"HH": "12 barg"})])
    assert found.appear
    assert found.looked_at < len(clean().plant.instruments) / 4
    assert not set(found.rules) & {"HAZ03", "ISC02", "ELC01", "TAG04"}
