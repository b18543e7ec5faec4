"""The certificates of a plant: each once, whoever names it and however it is written."""

from loops.certificates import certificate_text, certificates_of, evidence_of
from validation.example import example_plant

TYPES = [
    {"code": "T-1", "kind": "transmitter", "certificate": "ABC 20 ATEX 0003X"},
    {"code": "T-2", "kind": "transmitter", "certificate": "ABC 20 ATEX 0004"},
]
ROWS = [
    {"tag": "PT-10", "certificate": "ABC 20 ATEX 0001", "device type": "", "Ex marking": "", "status": ""},
    {"tag": "PT-2", "certificate": "abc20atex0001X", "device type": "", "Ex marking": "", "status": ""},
    {"tag": "PT-3", "certificate": "", "device type": "T-1", "Ex marking": "", "status": ""},
    {"tag": "PT-4", "certificate": "ABC 20 ATEX 0002", "device type": "T-1", "Ex marking": "", "status": ""},
    {
        "tag": "PT-5",
        "certificate": "",
        "device type": "",
        "Ex marking": "Ex db IIC T4 Gb IECEx ABC 20.0005",
        "status": "",
    },
    {"tag": "PT-6", "certificate": "ABC 20 ATEX 0009", "device type": "", "Ex marking": "", "status": "spare"},
]


def test_each_is_there_once_with_its_live_tags() -> None:
    plant = example_plant(ROWS, types=TYPES)
    assert [(each.name, [member.name for member in each.members]) for each in certificates_of(plant)] == [
        ("ABC 20 ATEX 0001X", ["PT-2", "PT-10"]),
        ("ABC 20 ATEX 0002", ["PT-4"]),
        ("ABC 20 ATEX 0003X", ["PT-3"]),
        ("IECEx ABC 20.0005", ["PT-5"]),
    ]
    assert certificates_of(plant) is certificates_of(plant)


def test_the_rows_certificate_counts_before_its_types() -> None:
    by_name = {each.name: each for each in example_plant(ROWS, types=TYPES).instruments}
    assert [certificate_text(by_name[name]) for name in ("PT-3", "PT-4", "PT-5")] == [
        "ABC 20 ATEX 0003X",
        "ABC 20 ATEX 0002",
        "IECEx ABC 20.0005",  # the number is parted from the marking
    ]
    assert [str(each) for each in evidence_of(by_name["PT-5"])] == ["IECEx ABC 20.0005"]


def test_no_order_of_rows_changes_them() -> None:
    names = [each.name for each in certificates_of(example_plant(ROWS, types=TYPES))]
    assert [each.name for each in certificates_of(example_plant(ROWS[::-1], types=TYPES))] == names
