"""A column that one sheet of the index lacks is one finding on the list, and none a row."""

import pytest

from instruments.workbook.lists import records_of_sheets
from loops.plant import assemble
from tests.instruments.workbook.sheets import KINDS, sheet
from validation.audit import audit, reaudit
from validation.example import said

VALVES = "Tag|Service|P&ID|Line|Fail pos.\nFV-1|Feed|D-1|L-1|FC\nFV-2|Feed|D-1|L-1|"
MORE_VALVES = "Tag|Service|P&ID|Line|Maker\nFV-3|Feed|D-1|L-2|X\nFV-4|Feed|D-1|L-2|X"
SWITCHES = "Tag|Service|Line\nLSH-5|Feed|L-3\nLSL-6|Feed|L-3\nPSH-7||L-3"
ALARMS = "Tag|Service|P&ID|Line|H\nLSH-8|Feed|D-1|L-4|3 m\nLSH-9|Feed|D-1|L-4|"


def told(code: str, *texts: str) -> tuple[list[str], dict[str, int]]:
    names = [f"Part {number}" for number, _ in enumerate(texts, start=1)]
    sheets = [sheet(text, name=name) for text, name in zip(texts, names, strict=True)]
    result = audit(assemble(records_of_sheets(sheets, KINDS)), codes=[code], raise_errors=True)
    outcomes = result.coverage[code].outcomes
    return (
        [f"{each.subject}: {each.message}" for each in result.findings],
        {outcome.value: count for outcome, count in outcomes.items() if count},
    )


@pytest.mark.parametrize(
    ("code", "texts", "found", "outcomes"),
    [
        # The blank beside filled ones is the row's, the column that is not there the sheet's.
        (
            "CTL01",
            (VALVES, MORE_VALVES),
            [
                "FV-2: a control valve without a failure position",
                "list.xlsx: sheet Part 2 has no column for failure position; 2 instruments need one",
            ],
            {"clear": 1, "finding": 1, "unchecked": 2},
        ),
        ("CTL01", (VALVES,), ["FV-2: a control valve without a failure position"], {"clear": 1, "finding": 1}),
        (
            "SET06",
            (ALARMS, SWITCHES),
            [
                "LSH-9: the letters LSH promise a switch at H, and there is none",
                "list.xlsx: sheet Part 2 has no column for LL, L, H, HH or trip; 3 instruments need one",
            ],
            {"clear": 1, "finding": 1, "unchecked": 3},
        ),
        # Where the sheet has a column for a switch's trip, a blank there is the row's.
        (
            "SET06",
            (ALARMS, "Tag|Service|Line|Trip\nPSLL-1|Oil|L-5|2 bar\nPSLL-2|Oil|L-5|\nPAL-3|Oil|L-5|"),
            [
                "LSH-9: the letters LSH promise a switch at H, and there is none",
                "PSLL-2: the letters PSLL promise a switch at LL, and there is none",
                "list.xlsx: sheet Part 2 has no column for L; 1 instrument needs one",
            ],
            {"clear": 2, "finding": 2, "unchecked": 1},
        ),
        # A row's own blank is told beside it.
        (
            "DAT01",
            (VALVES, SWITCHES),
            [
                "PSH-7: required and blank: service",
                "list.xlsx: sheet Part 2 has no column for P&ID; 3 instruments need one",
            ],
            {"clear": 2, "finding": 1, "unchecked": 2},
        ),
    ],
)
def test_what_a_sheet_lacks_is_told_once(
    code: str, texts: tuple[str, ...], found: list[str], outcomes: dict[str, int]
) -> None:
    lines, counts = told(code, *texts)
    assert (sorted(lines), counts) == (sorted(found), outcomes)


def test_what_another_sheet_says_of_an_instrument_needs_no_column_of_its_own() -> None:
    rows = [{"tag": f"PT-{number}", "I/O type": "AI", "cable": f"C-{number}"} for number in (1, 2)]
    cables = [{"number": f"C-{number}", "type": "K", "length": "50 m"} for number in (1, 2)]
    twice = [{"code": "K", "conductor size": "1.5 mm2"}, {"code": "K", "conductor size": "2.5 mm2"}]
    assert said("DAT10", rows, cables=cables, cable_types=twice) == [
        f"PT-{number}: cable type K is listed twice on Cable types, with different figures" for number in (1, 2)
    ]


def test_one_record_audited_again_says_nothing_of_its_sheet() -> None:
    sheets = [sheet(VALVES, name="Part 1"), sheet(MORE_VALVES, name="Part 2")]
    plant = assemble(records_of_sheets(sheets, KINDS))
    again = {each.name: [found.rule for found in reaudit(each, plant) if found.rule == "CTL01"] for each in plant.live}
    assert again == {"FV-1": [], "FV-2": ["CTL01"], "FV-3": [], "FV-4": []}
