"""Device types that would do instead: like the present one, and for the place where it stands."""

import pytest

from validation.example import findings

TYPE = {"kind": "transmitter", "body": "gauge", "LRL": "0 barg", "signal": "4-20 mA"}
NOW = {**TYPE, "code": "NOW", "URL": "10 barg"}
ROW = {"tag": "PT-1", "device type": "NOW", "LRV": "0 barg", "URV": "16 barg"}


@pytest.mark.parametrize(
    ("now", "others", "expected"),
    [
        # The narrowest first; its own marking before any other.
        ("Ex ia IIC T4 Ga", {"A": "Ex ia IIC T4 Ga", "B": "Ex db IIC T4 Gb"}, ["A"]),
        ("Ex ia IIC T4 Ga", {"A": "Ex db IIC T4 Gb", "B": "Ex ec IIC T4 Gc"}, ["A", "B"]),
        # Neither dust for gas, nor a division for a zone, nor what is marked for nothing.
        ("Ex ia IIC T4 Ga", {"A": "Ex tb IIIC T100°C Db", "B": "Class I Div 1 Groups A,B,C,D T4", "C": ""}, []),
        ("Class I Div 2 Groups C,D T4", {"A": "Ex db IIC T4 Gb", "B": "Class I Div 1 Groups B,C,D T5"}, ["B"]),
        ("Ex tb IIIC T100°C Db", {"A": "Ex db IIC T4 Gb; Ex tb IIIC T90°C Db", "B": "Ex db IIC T4 Gb"}, ["A"]),
        ("", {"A": "", "B": "Ex db IIC T4 Gb"}, ["A"]),
    ],
)  # fmt: skip
def test_another_type_is_marked_for_the_same_place(now: str, others: dict[str, str], expected: list[str]) -> None:
    types = [
        {**NOW, "Ex marking": now},
        *(
            {**TYPE, "code": code, "URL": f"{20 + number} barg", "Ex marking": marking}
            for number, (code, marking) in enumerate(others.items())
        ),
    ]
    (found,) = findings("RNG02", [ROW], types=types)
    named = [fix.change["device type"] for fix in found.fixes if "device type" in fix.change]
    assert named == expected
