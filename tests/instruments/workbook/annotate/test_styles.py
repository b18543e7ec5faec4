"""Formats of marked cells: all of the cell's own but the fill, and a fill that its letters can be read on."""

import re

import pytest

from instruments.workbook.annotate.styles import NEW_STYLES, Fill, Styles
from instruments.workbook.plain import BrokenXml
from tests.instruments.workbook.annotate.shapes import BLUE, RED, parsed
from tests.instruments.workbook.packages import MAIN

SPACE = f"{{{MAIN}}}"
FONTS = {
    "<font/>": "pale",
    '<font><color rgb="FF000000"/></font>': "pale",
    '<font><color rgb="FFFFFFFF"/></font>': "dark",
    '<font><color rgb="FFFFFF"/></font>': "dark",
    '<font><color rgb="00FFFF99"/></font>': "dark",
    '<font><color rgb="FFFF0000"/></font>': "pale",
    '<font><color rgb="FF808080"/></font>': "pale",
    '<font><color rgb="nonsense"/></font>': "pale",
    '<font><color theme="0"/></font>': "dark",
    '<font><color theme="0" tint="-0.25"/></font>': "dark",
    '<font><color theme="0" tint="-0.5"/></font>': "pale",
    '<font><color theme="1"/></font>': "pale",
    '<font><color theme="4"/></font>': "pale",
    '<font><color indexed="9"/></font>': "dark",
    '<font><color indexed="8"/></font>': "pale",
    '<font><b/><color auto="1"/></font>': "pale",
}


def sheet_of(fonts: str = "<font/>", cells: str = '<xf fontId="0"/>', fills: str = "") -> bytes:
    held = f"<fills>{fills}</fills>" if fills else ""
    inside = f"<fonts>{fonts}</fonts>{held}<cellXfs>{cells}</cellXfs>"
    return f'<styleSheet xmlns="{MAIN}">{inside}</styleSheet>'.encode()


@pytest.mark.parametrize("font", FONTS)
def test_letters_can_be_read(font: str) -> None:
    styles = Styles(sheet_of(fonts=font))
    assert styles.filled(0, RED) == 1
    colour = re.findall(r'<fgColor rgb="FF([0-9A-F]{6})"/>', styles.written().decode())
    assert colour == [RED.pale if FONTS[font] == "pale" else RED.dark]


def test_a_format_keeps_all_but_its_fill() -> None:
    own = (
        '<xf numFmtId="164" fontId="3" fillId="2" borderId="7" xfId="4" applyNumberFormat="1" quotePrefix="1">'
        '<alignment horizontal="center" textRotation="90"/><protection locked="0"/><extLst><ext uri="x"/></extLst></xf>'
    )
    styles = Styles(sheet_of(cells=f'<xf/>{own}<xf fillId = "0" applyFill="0"/>', fills="<fill/>" * 3))
    assert [styles.filled(style, fill) for style, fill in ((1, RED), (2, RED), (1, BLUE), (1, RED), (0, RED))] == [
        3, 4, 5, 3, 6,
    ]  # fmt: skip
    written = styles.written().decode()
    made = written.partition("<cellXfs")[2]
    assert own.replace('fillId="2"', 'fillId="3"').replace('quotePrefix="1">', 'quotePrefix="1" applyFill="1">') in made
    assert '<xf fillId = "3" applyFill="1"/>' in made
    assert written.startswith(sheet_of(fills="<fill/>" * 3).decode().partition("<fills>")[0])
    root = parsed(written)
    assert [(root.find(SPACE + name).get("count"), len(root.find(SPACE + name))) for name in ("fills", "cellXfs")] == [
        ("5", 5), ("7", 7),
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("data", "order"),
    [
        (f'<styleSheet xmlns="{MAIN}"/>', ["fills", "cellXfs"]),
        (f'<styleSheet xmlns="{MAIN}"></styleSheet>', ["fills", "cellXfs"]),
        (f'<styleSheet xmlns="{MAIN}"><fonts/><dxfs/></styleSheet>', ["fonts", "fills", "cellXfs", "dxfs"]),
        (f'<styleSheet xmlns="{MAIN}"><fills/><cellXfs/></styleSheet>', ["fills", "cellXfs"]),
        (f'<x:styleSheet xmlns:x="{MAIN}"><x:borders/></x:styleSheet>', ["fills", "borders", "cellXfs"]),
        (f'<styleSheet xmlns="{MAIN}"><fills count="9"><fill/></fills></styleSheet>', ["fills", "cellXfs"]),
        (NEW_STYLES.decode(), ["fonts", "fills", "borders", "cellStyleXfs", "cellXfs", "cellStyles"]),
    ],
)
def test_what_is_missing_is_made_in_its_place(data: str, order: list[str]) -> None:
    styles = Styles(data.encode())
    assert (styles.filled(0, RED), styles.filled(77, BLUE)) == (1, 2)
    root = parsed(styles.written())
    assert [child.tag.removeprefix(SPACE) for child in root] == order
    fills, formats = (root.find(SPACE + name) for name in ("fills", "cellXfs"))
    # Two fills come first in every workbook.
    assert [len(fills), fills.get("count")] == [4, "4"]
    assert [each.get("fillId", "0") for each in formats] == ["0", "2", "3"]
    colours = [each.find(f"{SPACE}patternFill/{SPACE}fgColor").get("rgb") for each in list(fills)[2:]]
    assert colours == [f"FF{RED.pale}", f"FF{BLUE.pale}"]


def test_what_is_not_asked_for_changes_nothing() -> None:
    data = sheet_of()
    styles = Styles(data)
    assert styles.written() is data
    state = styles.state()
    styles.filled(0, RED)
    styles.back_to(state)
    assert styles.written() is data
    assert styles.filled(0, BLUE) == 1


def test_no_more_formats_than_a_workbook_has() -> None:
    styles = Styles(sheet_of(cells="<xf/>" * 63_999))
    assert styles.filled(0, RED) == 63_999
    with pytest.raises(BrokenXml, match="64,000 cell formats"):
        styles.filled(0, BLUE)


@pytest.mark.parametrize("data", [b"<other/>", b"", b"<styleSheet", b"<!DOCTYPE a><styleSheet/>"])
def test_no_styles(data: bytes) -> None:
    with pytest.raises(BrokenXml):
        Styles(data)


def test_a_fill_is_named_by_its_colours() -> None:
    assert Fill(pale="FFB3B3", dark="9C0006") == RED
