"""How a rule is declared, and how what it needs is looked up."""

from typing import Any

import pytest

from instruments.columns import INSTRUMENTS
from validation.example import example_plant
from validation.finding import Severity, Verdict
from validation.rule import RULES, Registry, Subject, load_rules, rule, title_of


def declare(code: str = "TAG90", *, on: Subject = Subject.INSTRUMENT, needs: tuple[str, ...] = ()) -> Registry:
    registry = Registry()

    @rule(code, severity=Severity.GAP, on=on, message="m", basis="b", needs=needs, registry=registry)
    def made_up(subject: Any, plant: Any) -> Verdict:
        """A first line that is the title.

        And more.
        """
        return None

    return registry


def test_a_rule_is_told_by_its_docstring() -> None:
    made = declare()["TAG90"]
    assert (made.title, made.family) == ("A first line that is the title", "TAG")
    assert made.text == "A first line that is the title.\n\nAnd more."


def test_a_rule_without_docstring_is_none() -> None:
    with pytest.raises(ValueError, match="TAG91 has no docstring; the catalogue is made of it"):
        rule("TAG91", severity=Severity.GAP, on=Subject.INSTRUMENT, message="m", basis="b", registry=Registry())(
            lambda subject, plant: None
        )


def test_a_code_is_used_once() -> None:
    registry = declare()
    with pytest.raises(ValueError, match=r"TAG90 is the code of .*made_up already"):
        registry.add(declare()["TAG90"])


def test_rules_stand_in_the_order_of_their_codes() -> None:
    registry = declare("TAG92")
    registry.add(declare("TAG91")["TAG91"])
    assert [each.code for each in registry] == ["TAG91", "TAG92"]
    registry.add(declare("DAT91")["DAT91"])
    assert [each.code for each in registry] == ["DAT91", "TAG91", "TAG92"]
    assert ("TAG91" in registry, "TAG90" in registry, len(registry)) == (True, False, 3)
    registry.remove("TAG91")
    assert [each.code for each in registry] == ["DAT91", "TAG92"]


PLANT = example_plant(
    [{"tag": "PT-1", "URV": "10 barg", "device type": "T1", "area": "A", "cable length": 50, "wires": 2,
      "signal": "4-20 mA", "loop": "P-9"}],
    types=[{"code": "T1", "kind": "transmitter", "lift-off V": 10.5}],
    areas=[{"code": "A", "zone": "1"}],
    loops=[{"number": "P-9", "circuit or tag": "PT-1", "supply V min": 22}],
)  # fmt: skip


@pytest.mark.parametrize(
    ("need", "on", "title", "value"),
    [
        ("urv", Subject.INSTRUMENT, "URV", "10 barg"),
        ("lrv", Subject.INSTRUMENT, "LRV", "None"),
        ("lrv|urv", Subject.INSTRUMENT, "LRV or URV", "10 barg"),
        ("type.lift_off_v", Subject.INSTRUMENT, "lift-off V", "10.5"),
        ("type.maximum_v", Subject.INSTRUMENT, "maximum V", "None"),
        ("area.zone", Subject.INSTRUMENT, "area zone", "1"),
        ("kind", Subject.INSTRUMENT, "kind", "transmitter"),
        ("loop", Subject.INSTRUMENT, "loop", "P-9"),
        ("record.loop", Subject.INSTRUMENT, "loop", "P-9"),
        ("urv", Subject.CIRCUIT, "URV", "10 barg"),
        ("wires", Subject.CIRCUIT, "wires", "2"),
        ("row.supply_min_v", Subject.CIRCUIT, "supply V min", "22.0"),
        ("type.lift_off_v", Subject.CIRCUIT, "lift-off V", "10.5"),
    ],
)
def test_a_need_is_looked_up_on_its_subject(need: str, on: Subject, title: str, value: str) -> None:
    ((shown, get),) = declare(on=on, needs=(need,))["TAG90"].needs
    subject = PLANT.instruments[0] if on is Subject.INSTRUMENT else PLANT.circuits[0]
    assert (shown, str(get(subject))) == (title, value)


def test_what_an_absent_owner_has_is_blank() -> None:
    (bare,) = example_plant([{"tag": "PT-1", "service": "x"}]).instruments
    ((_, get),) = declare(needs=("type.lift_off_v",))["TAG90"].needs
    assert get(bare) is None


def test_titles_are_those_of_the_columns() -> None:
    assert [title_of(column.field) for column in INSTRUMENTS.columns] == [
        column.title for column in INSTRUMENTS.columns
    ]
    assert title_of("a made-up field") == "a made-up field"


def test_every_rule_is_told_whole() -> None:
    rules = list(load_rules())
    assert rules
    assert load_rules() is RULES
    for each in rules:
        assert each.title, each.code
        assert not each.title.endswith("."), each.code
        assert each.basis, each.code
        assert "Why it matters:" in each.text, each.code
        assert "What to do:" in each.text, each.code
        assert f'said("{each.code}"' in each.text or f"said('{each.code}'" in each.text, each.code
        assert (each.groups is not None) is (each.on is Subject.GROUP), each.code


@pytest.mark.parametrize("word", ["invalid", "safe ", "certified", "compliant"])
def test_no_message_promises_or_scolds(word: str) -> None:
    assert [each.code for each in load_rules() if word in each.message.casefold()] == []
