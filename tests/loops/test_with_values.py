"""A plant with other values: the one that putting all its lists together anew gives, or none."""

from typing import Any

import pytest

from loops.plant import assemble, with_values
from tests.twin import twin
from validation.what_if import Change, changed_lists, changed_names

PLANT = twin().plant(twin().rows)


def change(sheet: str, *rows: str, **values: str) -> Change:
    return Change(sheet=sheet, rows=rows, set={title.replace("_", " "): text for title, text in values.items()})


@pytest.mark.parametrize(
    "changes",
    [
        [change("Areas", "30T", zone="1", ambient_max="55")],
        [change("Areas", zone="none")],
        [change("Areas", gas_group="")],
        [change("Loops", supply_V_nominal="22"), change("Loops", "PT-1001", barrier="ZB-28", kind="AO")],
        [change("Cables", length="900"), change("Cables", "C-PT-1001", type="", to="")],
        [change("Cable types", ohm_per_km="90")],
        [change("Device types", "TP-G10", URL="1 barg", wires="4", signal="Pt100")],
        [change("Device types", Ex_marking="II 3 G Ex ec IIB T3 Gc", body="absolute")],
        [change("Instruments", "PT-1001", URV="3 barg", power_supply="12 VDC", barrier="", cable="")],
        [change("Instruments", service="Other", HH="900 barg"), change("Areas", "10A", zone="0")],
    ],
    ids=lambda changes: f"{changes[0].sheet} {dict(changes[0].set)}",
)
def test_it_is_what_putting_it_together_gives(changes: list[Change]) -> None:
    lists = changed_lists(PLANT, changes)
    quick, whole = with_values(PLANT, lists), assemble(lists)
    assert quick is not None
    assert changed_names(quick, whole) == frozenset()
    assert (quick.assumptions, quick.problems, quick.areas_twice) == (
        whole.assumptions,
        whole.problems,
        whole.areas_twice,
    )
    assert [each.name for each in quick.by_tag("PT-1001")] == ["PT-1001"]
    assert quick.by_tag("PT-1001")[0] in quick.instruments
    # The plant itself stays as it is.
    assert changed_names(PLANT, twin().plant(twin().rows)) == frozenset()


@pytest.mark.parametrize(
    ("sheet", "rows", "values"),
    [
        ("Instruments", ("PT-1001",), {"tag": "PT-9999"}),
        ("Instruments", ("PT-1001",), {"loop": "P-9999"}),
        ("Instruments", ("PT-1001",), {"status": "deleted"}),
        ("Instruments", ("PT-1001",), {"kind": "switch"}),
        ("Instruments", ("PT-1001",), {"I/O address": "X9"}),
        ("Instruments", ("PT-1001",), {"device type": "TP-G10"}),
        ("Instruments", ("PT-1001",), {"area": "40B"}),
        ("Device types", ("TP-G10",), {"kind": "isolator"}),
        ("Areas", ("30T",), {"code": "30X"}),
        ("Terminations", (), {"core": "1"}),
    ],
)
def test_what_is_more_than_a_value_is_put_together_anew(
    sheet: str, rows: tuple[str, ...], values: dict[str, Any]
) -> None:
    lists = changed_lists(PLANT, [Change(sheet=sheet, rows=rows, set=values)])
    assert with_values(PLANT, lists) is None
