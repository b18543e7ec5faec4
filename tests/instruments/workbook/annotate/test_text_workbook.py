"""Delimited text as a workbook: the same texts where they stood, and none of them alive."""

from pathlib import Path

import openpyxl
import pytest

from instruments.workbook.annotate.text_workbook import sheet_name, write_text_workbook
from instruments.workbook.delimited import read_delimited
from instruments.workbook.reader import read_file

TEXT = """Tag;Service;Remark
=1+1;@SUM(A1);+1
-2;0034;007
PT-1;"two
lines";#REF!
_x0041_;<b>&amp;</b>;   blank around

;;"last"
"""


def test_the_same_texts(tmp_path: Path) -> None:
    sheet = read_delimited(TEXT.encode(), file="in/loops.csv")
    assert write_text_workbook(sheet, tmp_path / "list.xlsx") == "loops"
    (read,) = read_file(tmp_path / "list.xlsx")
    assert (read.rows, read.errors, read.name) == (sheet.rows, sheet.errors, "loops")
    book = openpyxl.load_workbook(tmp_path / "list.xlsx")
    cells = [cell for row in book.worksheets[0].iter_rows() for cell in row if cell.value is not None]
    assert {cell.data_type for cell in cells} == {"s"}
    assert {(cell.number_format, cell.quotePrefix) for cell in cells} == {("@", True)}
    assert "".join(cell.value for cell in cells if cell.coordinate in ("A2", "B2", "C4")) == "=1+1@SUM(A1)#REF!"


@pytest.mark.parametrize(
    ("name", "shown"),
    [
        ("loops", "loops"),
        ("a" * 40, "a" * 31),
        ("rev [3]: a/b\\c?*", "rev _3__ a_b_c__"),
        ("'quoted'", "quoted"),
        ("", "List"),
        ("a\x07b\ud800", "a_b_"),
    ],
)
def test_names(name: str, shown: str) -> None:
    assert sheet_name(name) == shown


def test_what_no_cell_holds(tmp_path: Path) -> None:
    long, odd = "x" * 40_000, "a\x07b\x0bc"
    sheet = read_delimited(f"Tag,Service\n{long},{odd}\n".encode(), file="list.csv")
    write_text_workbook(sheet, tmp_path / "list.xlsx")
    (read,) = read_file(tmp_path / "list.xlsx")
    first, second = read.rows[1]
    assert isinstance(first, str)
    assert (len(first), first.endswith("x... (cut)")) == (32_767, True)
    assert second == "a<U+0007>b<U+000B>c"


def test_an_empty_text(tmp_path: Path) -> None:
    write_text_workbook(read_delimited(b"\n", file="list.csv"), tmp_path / "list.xlsx")
    assert openpyxl.load_workbook(tmp_path / "list.xlsx").sheetnames == ["list"]


def test_the_same_bytes(tmp_path: Path) -> None:
    sheet = read_delimited(TEXT.encode(), file="list.csv")
    for name in ("one", "two"):
        write_text_workbook(sheet, tmp_path / name)
    assert (tmp_path / "one").read_bytes() == (tmp_path / "two").read_bytes()
