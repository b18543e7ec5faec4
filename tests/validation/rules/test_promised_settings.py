"""Settings that the letters promise, on lists that have fewer columns for them."""

import pytest

from tests.validation.rules.applied import Row, tell, untold

NONE = "the letters {} promise a switch at {}, and there is none"
OTHER = {"tag": "PT-9", "H": "8 bar", "L": "1 bar", "remarks": ""}


@pytest.mark.parametrize(
    ("row", "missing"),
    [
        # High and low are all the columns that there are.
        ({"tag": "LSHH-1", "H": "5.7 m"}, ""),
        ({"tag": "LSLL-1", "L": "0.4 m"}, ""),
        ({"tag": "LSHH-1", "L": "5.7 m"}, "HH"),
        ({"tag": "LSH-1", "H": ""}, "H"),
        # With a column for HH it is asked for.
        ({"tag": "LSHH-1", "H": "5.7 m", "HH": ""}, "HH"),
        ({"tag": "LSLL-1", "L": "0.4 m", "HH": ""}, "LL"),
        # The remarks hold it, or something else.
        ({"tag": "PSL-1", "remarks": "Schaltpunkt 1,5 bar, Pumpe aus"}, ""),
        ({"tag": "PSL-1", "remarks": "set 15 psig falling"}, ""),
        ({"tag": "PSL-1", "remarks": "trips pump 2, 4-20 mA to PIC-3"}, "L"),
        ({"tag": "PSL-1", "remarks": "in line DN 50, 3 m above grade"}, "L"),
        ({"tag": "TSH-1", "remarks": "75 °C"}, ""),
        ({"tag": "TSH-1", "remarks": "75 bar"}, "H"),
    ],
)
def test_a_promised_setting_is_given(row: Row, missing: str) -> None:
    row = {"H": "", "L": "", "remarks": "", **row}
    other = {**OTHER, "HH": ""} if "HH" in row else OTHER
    letters = row["tag"].partition("-")[0]
    expected = [f"{row['tag']}: {NONE.format(letters, missing)}"] if missing else []
    assert tell("SET06", row, other) == expected


def test_a_setting_in_the_remarks_is_not_clear() -> None:
    row = {"tag": "PSL-1", "H": "", "L": "", "remarks": "1.5 bar"}
    assert untold("SET06", row, OTHER) == {"L in a column": 1}
