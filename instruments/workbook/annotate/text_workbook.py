"""Delimited text as a workbook: every cell the text that stands there, and none of it a formula."""

from __future__ import annotations

import os
import re
import zipfile
from collections.abc import Iterator
from typing import Final

from instruments.origin import column_letters
from instruments.workbook.annotate.splice import text_in_xml
from instruments.workbook.number_format import as_text
from instruments.workbook.sheet import Sheet

__all__ = ["sheet_name", "write_text_workbook"]

MOST_CHARACTERS: Final = 32_767
"""Characters in a cell, counted as UTF-16 does (Excel's specification limits)."""

_CUT: Final = "... (cut)"
_NO_TIME: Final = (1980, 1, 1, 0, 0, 0)
_NOT_IN_A_NAME: Final = re.compile(r"[\x00-\x1f\x7f:\\/?*\[\]\ud800-\udfff\ufffe\uffff]")
_ESCAPE: Final = re.compile("_(?=x[0-9A-Fa-f]{4}_)")
_CONTROL: Final = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\ud800-\udfff\ufffe\uffff]")

_MAIN: Final = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
_KINDS: Final = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
_PACKAGE: Final = "http://schemas.openxmlformats.org/package/2006"
_TYPE: Final = "application/vnd.openxmlformats-officedocument.spreadsheetml"
_HEAD: Final = '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n'

_WIDEST: Final = 50
_NARROWEST: Final = 6
_ROWS_MEASURED: Final = 500


def sheet_name(name: str) -> str:
    """Return a name as a sheet may have it: 31 characters, none of them reserved.

    >>> sheet_name("loops [rev 3]"), sheet_name("'")
    ('loops _rev 3_', 'List')
    """
    return _NOT_IN_A_NAME.sub("_", name)[:31].strip("'").strip() or "List"


def write_text_workbook(sheet: Sheet, target: str | os.PathLike[str]) -> str:
    """Write a sheet of delimited text as a workbook, its rows and columns where they stood.

    Parameters
    ----------
    sheet
        What was read.
    target
        The workbook to write.

    Returns
    -------
    str
        The name of its sheet.
    """
    name = sheet_name(sheet.name)
    parts = {
        "[Content_Types].xml": f'<Types xmlns="{_PACKAGE}/content-types">'
        f'<Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
        f'<Default Extension="xml" ContentType="application/xml"/>'
        f'<Override PartName="/xl/workbook.xml" ContentType="{_TYPE}.sheet.main+xml"/>'
        f'<Override PartName="/xl/worksheets/sheet1.xml" ContentType="{_TYPE}.worksheet+xml"/>'
        f'<Override PartName="/xl/styles.xml" ContentType="{_TYPE}.styles+xml"/></Types>',
        "_rels/.rels": f'<Relationships xmlns="{_PACKAGE}/relationships">'
        f'<Relationship Id="rId1" Type="{_KINDS}/officeDocument" Target="xl/workbook.xml"/></Relationships>',
        "xl/workbook.xml": f'<workbook xmlns="{_MAIN}" xmlns:r="{_KINDS}"><sheets>'
        f'<sheet name="{text_in_xml(name).decode()}" sheetId="1" r:id="rId1"/></sheets></workbook>',
        "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{_PACKAGE}/relationships">'
        f'<Relationship Id="rId1" Type="{_KINDS}/worksheet" Target="worksheets/sheet1.xml"/>'
        f'<Relationship Id="rId2" Type="{_KINDS}/styles" Target="styles.xml"/></Relationships>',
        # 49 is the format of text, so that what is typed over a text stays one.
        "xl/styles.xml": f'<styleSheet xmlns="{_MAIN}">'
        '<fonts count="1"><font><sz val="10"/><name val="Arial"/><family val="2"/></font></fonts>'
        '<fills count="2"><fill><patternFill patternType="none"/></fill>'
        '<fill><patternFill patternType="gray125"/></fill></fills>'
        '<borders count="1"><border><left/><right/><top/><bottom/><diagonal/></border></borders>'
        '<cellStyleXfs count="1"><xf numFmtId="0" fontId="0" fillId="0" borderId="0"/></cellStyleXfs>'
        '<cellXfs count="2"><xf numFmtId="0" fontId="0" fillId="0" borderId="0" xfId="0"/>'
        '<xf numFmtId="49" fontId="0" fillId="0" borderId="0" xfId="0" quotePrefix="1" applyNumberFormat="1"/>'
        '</cellXfs><cellStyles count="1"><cellStyle name="Normal" xfId="0" builtinId="0"/></cellStyles></styleSheet>',
    }
    with zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED) as out:
        for part, text in parts.items():
            out.writestr(_entry(part), _HEAD + text)
        with out.open(_entry("xl/worksheets/sheet1.xml"), "w") as stream:
            for piece in _sheet_part(sheet):
                stream.write(piece)
    return name


def _entry(name: str) -> zipfile.ZipInfo:
    entry = zipfile.ZipInfo(name, _NO_TIME)
    entry.compress_type = zipfile.ZIP_DEFLATED
    return entry


def _sheet_part(sheet: Sheet) -> Iterator[bytes]:
    columns = "".join(
        f'<col min="{number}" max="{number}" width="{width}" style="1" customWidth="1"/>'
        for number, width in enumerate(_widths(sheet), 1)
    )
    yield f'{_HEAD}<worksheet xmlns="{_MAIN}">{f"<cols>{columns}</cols>" if columns else ""}<sheetData>'.encode()
    letters = [column_letters(column) for column in range(sheet.width)]
    errors: dict[int, dict[int, str]] = {}
    for (row, column), text in sheet.errors.items():
        errors.setdefault(row, {})[column] = text
    made: dict[str, bytes] = {}
    waiting: list[bytes] = []
    for number, values in enumerate(sheet.rows, 1):
        shown = errors.get(number - 1, {})
        cells: list[bytes] = []
        for column, value in enumerate(values):
            if value is None and column not in shown:
                continue
            text = shown.get(column) or (value if isinstance(value, str) else as_text(value))
            held = made.get(text)
            if held is None:
                held = text_in_xml(_held(text))
                if len(made) < 100_000:
                    made[text] = held
            cells.append(
                b'<c r="%b%d" s="1" t="inlineStr"><is><t xml:space="preserve">%b</t></is></c>'
                % (letters[column].encode(), number, held)
            )
        if cells:
            waiting.append(b'<row r="%d">%b</row>' % (number, b"".join(cells)))
        if len(waiting) > 500:
            yield b"".join(waiting)
            waiting.clear()
    yield b"".join(waiting) + b"</sheetData></worksheet>"


def _held(text: str) -> str:
    """Return a text as a cell can hold it: escaped where it would be decoded, and not too long."""
    if len(text) * 2 > MOST_CHARACTERS:
        units = text.encode("utf-16-le", "replace")
        if len(units) > MOST_CHARACTERS * 2:
            text = units[: (MOST_CHARACTERS - len(_CUT)) * 2].decode("utf-16-le", "ignore") + _CUT
    return _CONTROL.sub(lambda found: f"<U+{ord(found[0]):04X}>", _ESCAPE.sub("_x005F_", text))


def _widths(sheet: Sheet) -> list[int]:
    widths = [_NARROWEST] * sheet.width
    for row in sheet.rows[:_ROWS_MEASURED]:
        for column, value in enumerate(row):
            if isinstance(value, str) and len(value) > widths[column]:
                widths[column] = min(_WIDEST, max(map(len, value.split("\n"))) + 1)
    return widths
