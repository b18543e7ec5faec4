"""mapping.toml as a text: what is written reads back, and what cannot be meant is refused with its line."""

from __future__ import annotations

import tomllib
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.workbook.mapping import LEAVE_OUT, MappedColumn, MappedSheet, Mapping
from instruments.workbook.mapping_toml import MOST_BYTES, mapping_text, read_mapping
from instruments.workbook.sheet import UnreadableFile
from tests.instruments.workbook.sheets import KINDS

WHOLE = Mapping(
    sheets=(
        MappedSheet(
            file="index.csv",
            sheet="index",
            kind="Instruments",
            heading_rows=(4, 5),
            decimal=",",
            encoding="Windows-1252",
            separator=";",
            columns=(
                MappedColumn(index=0, row=5, heading="Kz", fields=("tag",), part=1, how="contents", likelihood=0.95),
                MappedColumn(index=1, row=5, heading="Nr", fields=("tag",), part=2, before="-", how="contents"),
                MappedColumn(index=2, row=5, heading='1/2" "x"\\', how="not understood"),
                MappedColumn(index=3, row=5, heading="Design p/T", fields=("design_pressure", "design_temperature"),
                             units=("barg", "degC"), decimal="."),
                MappedColumn(index=4, row=5, heading="Flow", fields=("operating_value_max",), units=("",), only="F"),
                MappedColumn(index=5, row=5, heading="E.U.", fields=("range_unit",), unit_of=(4, 30)),
                MappedColumn(index=6, row=5, heading="", unit_of=(4,)),
                MappedColumn(index=7, row=5, heading="Zone", fields=("area_classification",), before="Zone"),
                MappedColumn(index=8, row=5, heading="Card", fields=("card", "io_address"), part=1, before="Slot"),
            ),
        ),
        MappedSheet(file="a.xlsx", sheet="Cover", why="a sheet named Cover holds no list"),
        MappedSheet(file="a.xlsx", sheet="Old", kind=LEAVE_OUT, why="as told"),
        MappedSheet(file="a.xlsx", sheet="Plant", kind="Plant"),
        MappedSheet(
            file="a.xlsx",
            sheet="Data sheet",
            kind="Instruments",
            heading_rows=(1,),
            turned=True,
            columns=(
                MappedColumn(index=4, row=1, heading="Tag", fields=("tag",)),
                MappedColumn(index=5, row=1, heading="Unit", unit_of=(6, 11)),
            ),
        ),
    )
)  # fmt: skip


def reading(folder: Path, text: str | bytes) -> Mapping:
    path = folder / "mapping.toml"
    path.write_bytes(text.encode() if isinstance(text, str) else text)
    return read_mapping(path, KINDS)


def test_what_is_written_reads_back(tmp_path: Path) -> None:
    assert reading(tmp_path, mapping_text(WHOLE, KINDS)) == WHOLE


def test_the_text_is_plain() -> None:
    lines = mapping_text(WHOLE, KINDS).splitlines()
    assert max(map(len, (line for line in lines if line.startswith("#")))) <= 120
    start = lines.index("[[sheet]]")
    assert all(line.startswith("#") or not line for line in lines[:start])
    assert lines[start : start + 12] == [
        "[[sheet]]",
        'file = "index.csv"',
        'sheet = "index"',
        'read_as = "Instruments"',
        'encoding = "Windows-1252"',
        'separator = ";"',
        "heading_rows = [5, 6]",
        'decimal_sign = ","',
        "columns = [",
        '  { cell = "A6", heading = "Kz",            field = "tag",                           '
        'part = 1, how = "contents", likely = 0.95 },',
        '  { cell = "B6", heading = "Nr",            field = "tag",                           '
        'part = 2, before = "-", how = "contents" },',
        '  { cell = "C6", heading = "1/2\\" \\"x\\"\\\\", field = "none",                          '
        'how = "not understood" },',
    ]
    assert '  { cell = "B6", heading = "Unit", field = "unit of 7, 12" },' in lines
    assert 'heading_columns = ["B"]' in "\n".join(lines)
    assert lines[-1].startswith("# ")


TEXT = st.text(st.characters(exclude_categories=["Cs"]), max_size=12)


@given(TEXT, TEXT, TEXT)
def test_any_text_reads_back(tmp_path_factory: pytest.TempPathFactory, file: str, sheet: str, heading: str) -> None:
    column = MappedColumn(index=2, row=0, heading=heading, fields=("tag",), before=heading)
    mapping = Mapping(
        sheets=(MappedSheet(file=file or "x", sheet=sheet, kind="Instruments", heading_rows=(0,), columns=(column,)),)
    )
    text = mapping_text(mapping, KINDS)
    assert all(line.isprintable() for line in text.splitlines())
    assert reading(tmp_path_factory.mktemp("a"), text) == mapping


def test_half_a_character_is_written_as_none() -> None:
    mapping = Mapping(sheets=(MappedSheet(file="a\udce9.csv", sheet=""),))
    text = mapping_text(mapping, KINDS)
    assert tomllib.loads(text.encode().decode())["sheet"][0]["file"] == "a\ufffd.csv"


@pytest.mark.parametrize(
    ("field", "meant"),
    [
        ("tag", "tag"), ("TAG", "tag"), ("LRV", "lrv"), ("range min", "lrv"),
        ("operating_value_max", "operating_value_max"),
        ("operating value max", "operating_value_max"), ("P&ID no.", "pid"), ("Ex  marking", "ex_marking"),
    ],
)  # fmt: skip
def test_a_field_by_its_title_or_a_heading_that_means_it_alone(tmp_path: Path, field: str, meant: str) -> None:
    text = SHEET.replace('"tag" }', '"none" }').replace('"service"', f'"{field}"')
    text = text.replace('"range", unit = "barg"', '"none"')
    assert reading(tmp_path, text).sheets[0].columns[1].fields == (meant,)


SERVICE = "line 12, heading 'Service # {' of a.xlsx, sheet 'Index': "
RANGE = "line 13, heading 'Range' of a.xlsx, sheet 'Index': "
TYPES = "line 16, b.xlsx, sheet 'Types': "
SHEET = """
# a list
[[sheet]]
file = "a.xlsx"
sheet = "Index"
read_as = "Instruments"
heading_rows = [1]
decimal_sign = "."
columns = [
  { cell = "A1", heading = "Tag", field = "tag" },
  # a comment { with = "braces" }
  { cell = "B1", heading = "Service # {", field = "service" },
  { cell = "C1", heading = "Range", field = "range", unit = "barg" },
]

[[sheet]]
file = "b.xlsx"
sheet = "Types"
read_as = "Device types"
heading_rows = [2]
columns = [{ cell = "A2", heading = "Code", field = "code" }, { cell = "B2", heading = "X", field = "model" }]
"""


def test_a_mapping_by_hand(tmp_path: Path) -> None:
    one, two = reading(tmp_path, SHEET).sheets
    assert [each.line for each in (one, two)] == [3, 16]
    assert [each.line for each in (*one.columns, *two.columns)] == [10, 12, 13, 21, 21]
    as_tables = """[[sheet]]
file = "a.xlsx"
sheet = 'Index'
read_as = "instruments"
heading_rows = 1

[[sheet.columns]]
cell = "A1"
heading = \"\"\"Tag\"\"\"
field = "tag"

[[sheet.columns]]
cell = "B"
heading = "x"
"""
    (sheet,) = reading(tmp_path, as_tables).sheets
    assert [(each.index, each.row, each.fields, each.line) for each in sheet.columns] == [
        (0, 0, ("tag",), 7), (1, None, (), 12),
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        # A field that does not exist, and two columns for one.
        ('"service"', '"servise"', SERVICE + "Instruments has no field 'servise'; the nearest: service"),
        ('"service"', '"tag"', SERVICE + "tag is read from column A ('Tag', line 10) already"),
        ('"service"', '"LRV"', RANGE + "range holds LRV too, which is read from column B ('Service # {', line 12)"),
        ('"service"', '["service", "service"]', SERVICE + "field names one field twice"),
        ('"service"', '"type"', SERVICE + "'type' may be "),
        ('"service"', "7", SERVICE + "field is a title, or several in a list: 7"),
        ('"service"', '["service", 7]', "field is a title, or several in a list"),
        ('"model"', '"lrv"', "Device types has no field 'lrv'; the nearest:"),
        ('cell = "B1"', 'cell = "A1"', SERVICE + "this column stands in line 10 already"),
        ('cell = "B1"', 'cell = "B0"', "cell is no cell such as C5: B0"),
        ('cell = "B1"', 'cell = "XFE1"', "cell is no cell such as C5: XFE1"),
        ('cell = "B1"', "cell = 5", "cell is no text in quotation marks: 5"),
        ('cell = "B1",', "", "cell is no cell such as C5: missing"),
        ('cell = "B1"', 'zelle = "B1"', "'zelle' means nothing here; the nearest: cell"),
        ('"Service # {"', "[]", "line 12, a.xlsx, sheet 'Index': heading is no text in quotation marks: []"),
        ('unit = "barg"', 'unit = "foo"', "'foo' is no unit that range can be in"),
        ('unit = "barg"', 'unit = ["barg", "barg"]', "unit has 2 units for 1 fields"),
        ('unit = "barg"', "unit = true", "unit is a text, or one for each field in a list: True"),
        ('unit = "barg"', "part = 1.5", "part is a number, 1 for the first: 1.5"),
        ('unit = "barg"', "part = true", "part is a number, 1 for the first: True"),
        ('unit = "barg"', 'only = "FT"', "only is one letter, with which tags begin: FT"),
        ('unit = "barg"', 'decimal_sign = ";"', 'decimal_sign is one of "", ".", ",", not ";"'),
        # A sheet.
        ("[[sheet]]\nfile = \"b", "[[sheets]]\nfile = \"b", "'sheets' means nothing here; the nearest: sheet"),
        ('"Device types"', '"Device tipes"', TYPES + "read_as: there is no kind of sheet 'Device tipes'; "),
        ('file = "b.xlsx"', 'file = "A.xlsx"', "line 16, A.xlsx, sheet 'Types': heading_rows"),
        ('file = "b.xlsx"', "", "line 16, [[sheet]]: 'file' is missing: the name of the list"),
        ("heading_rows = [2]", "heading_rows = [0]", "heading_rows is no list of rows, such as [5] or [5, 6]: [0]"),
        ("heading_rows = [2]", 'heading_rows = ["2"]', "heading_rows is no list of rows"),
        ("heading_rows = [2]", "heading_rows = [2, 9]", "heading_rows are at most four rows, one below the other"),
        ("heading_rows = [2]", "heading_rows = []", "has columns, and no 'heading_rows' that they stand under"),
        ("heading_rows = [2]", 'heading_rows = [2]\nheading_columns = ["B"]', "has heading_rows and heading_columns"),
        ("heading_rows = [2]", "heading_columns = [2]", "heading_columns is no list of columns, such as"),
        ("heading_rows = [2]", 'heading_rows = [2]\nencoding = "EBCDIC"', "encoding is one of"),
        ("heading_rows = [2]", 'heading_rows = [2]\ncolumns = 5\nx = [', "is not TOML ("),
        ('columns = [{ cell = "A2"', 'columns = 5\nx = [{ cell = "A2"', "line 16, [[sheet]]: 'x' means nothing here"),
    ],
)  # fmt: skip
def test_what_cannot_be_meant_is_refused_with_its_line(tmp_path: Path, old: str, new: str, said: str) -> None:
    assert SHEET.count(old) == 1
    text = SHEET.replace(old, new)
    if said.endswith("heading_rows"):
        text = text.replace('sheet = "Types"', 'sheet = "index"')
        said = "line 16: A.xlsx, sheet 'index' stands in line 3 already"
    with pytest.raises(UnreadableFile) as refused:
        reading(tmp_path, text)
    message = str(refused.value)
    assert message.startswith(f"{tmp_path / 'mapping.toml'}")
    assert said in message
    assert "\n" not in message


@pytest.mark.parametrize(
    ("data", "said"),
    [
        (b"", "says nothing of any sheet: each begins with [[sheet]]"),
        (b"sheet = 5", "'sheet' is not a table: each begins with [[sheet]]"),
        (b"sheet = [5]", "'sheet' is not a table: each begins with [[sheet]]"),
        (b"[sheet]\nfile = 'a'", "'sheet' is not a table: each begins with [[sheet]]"),
        (b"PK\x03\x04\x00\xff\xfe", "is not text in UTF-8"),
        (b"tag;service\nPT-1;x", "is not TOML ("),
        (b"x = " + b"[" * 100_000, "is not TOML that can be read"),
        (b"x = " + b"9" * 100_000, "is not TOML that can be read"),
        (b"x = 1\n" * 2, "is not TOML (Cannot overwrite a value"),
        (b"#" + b"x" * MOST_BYTES, "is larger than 2,097,152 bytes, as no mapping is"),
        (b"x = 1979-05-27", "'x' means nothing here; known: sheet"),
    ],
)
def test_what_is_no_mapping(tmp_path: Path, data: bytes, said: str) -> None:
    with pytest.raises(UnreadableFile) as refused:
        reading(tmp_path, data)
    assert said in str(refused.value)
    assert len(str(refused.value)) < 300


def test_no_such_file(tmp_path: Path) -> None:
    with pytest.raises(UnreadableFile, match="there is no such file"):
        read_mapping(tmp_path / "none.toml", KINDS)
    with pytest.raises(UnreadableFile, match="cannot be opened"):
        read_mapping(tmp_path, KINDS)


def test_two_tables_of_one_sheet_side_by_side(tmp_path: Path) -> None:
    table = """[[sheet]]
file = "a.xlsx"
sheet = "Index"
read_as = "Instruments"
heading_rows = [1]
columns = [{ cell = "A1", heading = "Tag", field = "tag" }]
"""
    one, two = reading(tmp_path, table + table.replace('"A1"', '"C1"')).sheets
    assert [one.columns[0].index, two.columns[0].index] == [0, 2]
    with pytest.raises(UnreadableFile, match=r"line 7: a.xlsx, sheet 'Index' stands in line 1 already"):
        reading(tmp_path, table + table)
