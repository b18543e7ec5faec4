"""Workbooks made by hand, part by part, for what no program writes or every program writes differently."""

from __future__ import annotations

import io
import zipfile
from collections.abc import Mapping

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
STRICT = "http://purl.oclc.org/ooxml/spreadsheetml/main"
KINDS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
RELATIONS = "http://schemas.openxmlformats.org/package/2006/relationships"
FIRST_SHEET = "xl/worksheets/sheet1.xml"


def worksheet(rows: str, *, before: str = "", after: str = "") -> str:
    """The part of a sheet with these rows."""
    return (
        f'<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n<worksheet xmlns="{MAIN}"'
        f' xmlns:r="{KINDS}">'
        f"{before}<sheetData>{rows}</sheetData>{after}</worksheet>"
    )


def texts(*items: str) -> str:
    """The part of the shared texts, each given as what stands in its <si>."""
    return f'<sst xmlns="{MAIN}">' + "".join(f"<si>{item}</si>" for item in items) + "</sst>"


def styles(*, formats: Mapping[int, str] | None = None, fonts: str = "<font/>", cells: str = '<xf fontId="0"/>') -> str:
    """The part of the styles."""
    codes = "".join(f'<numFmt numFmtId="{number}" formatCode="{code}"/>' for number, code in (formats or {}).items())
    return (
        f'<styleSheet xmlns="{MAIN}"><numFmts>{codes}</numFmts><fonts>{fonts}</fonts>'
        f"<cellXfs>{cells}</cellXfs>"
        "<dxfs><dxf><font><strike/></font></dxf></dxfs></styleSheet>"
    )


def relations(*found: tuple[str, str, str]) -> str:
    """A part of relations: id, kind and target of each."""
    return (
        f'<Relationships xmlns="{RELATIONS}">'
        + "".join(
            f'<Relationship Id="{name}" Type="{KINDS}/{kind}" Target="{target}"/>' for name, kind, target in found
        )
        + "</Relationships>"
    )


def parts(
    *sheets: str | bytes,
    shared: str | bytes | None = None,
    style: str | bytes | None = None,
    more: Mapping[str, str | bytes | None] | None = None,
) -> dict[str, str | bytes]:
    """The parts of a workbook of these sheets; a part in `more` that is None is left out."""
    listed = "".join(
        f'<sheet name="Sheet{number}" sheetId="{number}" r:id="rId{number}"/>' for number in range(1, len(sheets) + 1)
    )
    made: dict[str, str | bytes | None] = {
        "[Content_Types].xml": '<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"/>',
        "_rels/.rels": relations(("rId1", "officeDocument", "xl/workbook.xml")),
        "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{KINDS}"><sheets>{listed}</sheets></workbook>',
        "xl/_rels/workbook.xml.rels": relations(
            *((f"rId{number}", "worksheet", f"worksheets/sheet{number}.xml") for number in range(1, len(sheets) + 1)),
            ("rIdTexts", "sharedStrings", "sharedStrings.xml"),
            ("rIdStyles", "styles", "styles.xml"),
        ),
        "xl/sharedStrings.xml": shared,
        "xl/styles.xml": style,
    }
    made |= {f"xl/worksheets/sheet{number}.xml": sheet for number, sheet in enumerate(sheets, 1)}
    made |= more or {}
    return {name: text for name, text in made.items() if text is not None}


def zipped(made: Mapping[str, str | bytes], *, method: int = zipfile.ZIP_DEFLATED) -> bytes:
    """The package of these parts."""
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", method) as package:
        for name, text in made.items():
            package.writestr(name, text)
    return out.getvalue()
