"""Files made to harm, or damaged as files are: each with what the audit must say of it."""

from __future__ import annotations

import io
import random
import struct
import zipfile
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any
from xml.sax.saxutils import escape

from instruments.origin import column_letters
from tests.instruments.workbook.packages import KINDS, MAIN, parts, relations, styles, texts, worksheet, zipped

READ = 0
"""The exit status of an audit that went to its end."""
CANNOT = 2


@dataclass(frozen=True, slots=True, kw_only=True)
class Hostile:
    """A file, what the audit ends with, and words that must stand in what it says (or in findings.json)."""

    name: str
    make: Callable[[Path], object]
    status: int
    words: tuple[str, ...] = ()
    ending: str = ".xlsx"


HOSTILE: list[Hostile] = []


def hostile(
    name: str, *words: str, status: int = CANNOT, ending: str = ".xlsx"
) -> Callable[[Callable[[], bytes]], Callable[[], bytes]]:
    """Put the bytes that a function makes among the hostile files."""

    def put(make: Callable[[], bytes]) -> Callable[[], bytes]:
        HOSTILE.append(
            Hostile(name=name, make=lambda path: path.write_bytes(make()), status=status, words=words, ending=ending)
        )
        return make

    return put


HEADINGS = (
    "Tag No.", "Service", "Kind", "LRV", "URV", "Range Unit", "H", "HH", "Trip", "Signal", "I/O Type", "I/O Address",
    "Power Supply", "Cable Length", "Conductor Size", "Ex Marking", "Area Classification", "IP Rating", "Remarks",
)  # fmt: skip
GOOD: tuple[tuple[Any, ...], ...] = (
    ("PT-101", "Feed pressure", "pressure transmitter", 0, 10, "barg", 8, 9, 9.5, "4-20 mA", "AI", "1.1.1", "24 VDC",
     120, "1.5 mm2", "II 2 G Ex ia IIC T4 Gb", "Zone 1 IIB T3", "IP66", "as found"),
    ("TT-102", "Feed temperature", "temperature transmitter", 0, 100, "°C", 80, 90, 95, "4-20 mA", "AI", "1.1.2",
     "24 VDC", 140, "1.5 mm2", "II 2 G Ex ia IIC T4 Gb", "Zone 1 IIB T3", "IP66", None),
    ("PG-103", "Feed pressure", "pressure gauge", 0, 16, "barg", None, None, None, None, None, None, None, None, None,
     None, None, None, None),
    ("FV-104", "Feed valve", "control valve", None, None, None, None, None, None, "4-20 mA", "AO", "1.2.1", None, 90,
     "1.5 mm2", "II 2 G Ex ia IIC T4 Gb", "Zone 1 IIB T3", "IP66", None),
)  # fmt: skip


def cell(address: str, value: Any) -> str:
    """A cell: a text for what is one, else the number as it is given, well or not."""
    if value is None:
        return ""
    if isinstance(value, Raw):
        return f'<c r="{address}"><v>{value.text}</v></c>'
    if isinstance(value, str):
        return f'<c r="{address}" t="inlineStr"><is><t xml:space="preserve">{_xml(value)}</t></is></c>'
    return f'<c r="{address}"><v>{value}</v></c>'


class Raw:
    """A number as a file may write it."""

    def __init__(self, text: str) -> None:
        self.text = text


def _xml(text: str) -> str:
    """The text as a workbook holds it: what XML cannot hold stands as its code."""
    return "".join(
        f"_x{ord(each):04X}_" if (each < " " and each not in "\t\n") or each in "\ufffe\uffff" else each
        for each in escape(text)
    )


def row(number: int, values: Iterable[Any]) -> str:
    return (
        f'<row r="{number}">'
        + "".join(cell(f"{column_letters(at)}{number}", each) for at, each in enumerate(values))
        + "</row>"
    )


def sheet(rows: Iterable[Sequence[Any]], **frame: str) -> str:
    return worksheet("".join(row(number, values) for number, values in enumerate(rows, 1)), **frame)


def book(rows: Iterable[Sequence[Any]], **more: Any) -> bytes:
    return zipped(parts(sheet(rows), style=styles(), shared=texts(), **more))


def good() -> bytes:
    return book([HEADINGS, *GOOD])


def with_columns(**values: Any) -> list[Any]:
    """The first good row with other values in the columns named (blanks and dots as underscores)."""
    changed = dict(zip(HEADINGS, GOOD[0], strict=True)) | {
        key.replace("_", " "): value for key, value in values.items()
    }
    return list(changed.values())


# Not a workbook, or not one any more.

for _ending in (".xlsx", ".xlsm"):
    hostile(f"random bytes{_ending}", "is not a workbook", ending=_ending)(lambda: random.Random(1).randbytes(20_000))
hostile("text under a workbook's name", "is not a workbook, though its name ends in .xlsx")(
    lambda: b"Tag,Service\nPT-1,Feed\n"
)
hostile("web page", "web page (HTML)", ending=".xls")(lambda: b"<html><table><tr><td>Tag</td></tr></table></html>")
hostile("PDF", "is a PDF")(lambda: b"%PDF-1.7\n" + bytes(5000))
hostile("picture", "is a picture")(lambda: b"\x89PNG\r\n\x1a\n" + bytes(500))
hostile("zip of texts", "is a zip file with no workbook in it")(lambda: zipped({"a.txt": "a", "b.txt": "b"}))
hostile("empty zip", "zip file with nothing in it")(lambda: b"PK\5\6" + bytes(18))
hostile("empty", "is empty")(lambda: b"")
hostile("empty text", "is empty", ending=".csv")(lambda: b"")
hostile("blank text", "no list with tags", ending=".csv")(lambda: b" \r\n\r\n ,,,\r\n")
hostile("zeros", "is not a workbook")(lambda: bytes(10_000))
for _share in (1, 10, 50, 90, 99):
    hostile(f"cut at {_share} %", "damaged or cut short")(lambda share=_share: good()[: len(good()) * share // 100])
hostile("last byte gone", "damaged or cut short")(lambda: good()[:-1])


def _compound(*streams: str) -> bytes:
    names = b"".join(name.encode("utf-16-le").ljust(128, b"\0") for name in streams)
    return b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(504) + names + bytes(4000)


hostile("old xls", "old kind (.xls): save it as .xlsx", ending=".xls")(lambda: _compound("Root Entry", "Workbook"))
hostile("password", "protected by a password: save it without one")(
    lambda: _compound("Root Entry", "EncryptionInfo", "EncryptedPackage")
)


@hostile("zip password", "protected by a password")
def _zip_password() -> bytes:
    data = bytearray(good())
    at = -1
    while (at := data.find(b"PK\1\2", at + 1)) >= 0:
        data[at + 8] |= 1
    return bytes(data)


# Bombs.


@hostile("zip bomb", "part xl/worksheets/sheet1.xml", "times its size")
def _bomb() -> bytes:
    return zipped(parts(worksheet(" " * 300_000_000)))


@hostile("zip bomb in a part that nobody needs", "times its size")
def _bomb_beside() -> bytes:
    return zipped(parts(sheet([HEADINGS, *GOOD]), more={"xl/media/image1.bin": bytes(300_000_000)}))


@hostile("zip bomb that lies about its size", "is damaged")
def _lying_bomb() -> bytes:
    data = bytearray(zipped(parts(worksheet(" " * 300_000_000))))
    size = struct.pack("<I", len(worksheet(" " * 300_000_000)))
    while (at := data.find(size)) >= 0:
        data[at : at + 4] = struct.pack("<I", 5000)
    return bytes(data)


@hostile("many times the same bytes", "")
def _overlapping_bomb() -> bytes:
    """Two hundred parts that all are the same bytes of the file."""
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as package:
        for name, text in parts(sheet([HEADINGS, *GOOD])).items():
            package.writestr(name, text)
        package.writestr("xl/media/0.bin", random.Random(1).randbytes(4000) * 1200)
        info = package.infolist()[-1]
        for number in range(1, 200):
            again = zipfile.ZipInfo(f"xl/media/{number}.bin")
            again.header_offset, again.CRC, again.compress_type = info.header_offset, info.CRC, info.compress_type
            again.file_size, again.compress_size = info.file_size, info.compress_size
            package.filelist.append(again)
            package.NameToInfo[again.filename] = again
    return out.getvalue()


@hostile("ten thousand parts", "parts; at most 2,000 are read")
def _many_parts() -> bytes:
    return zipped({**parts(sheet([HEADINGS, *GOOD])), **{f"xl/media/{number}.txt": "" for number in range(10_000)}})


# XML.

_LAUGHS = (
    '<!DOCTYPE x [<!ENTITY a "ha">'
    + "".join(f'<!ENTITY {chr(98 + at)} "{f"&{chr(97 + at)};" * 10}">' for at in range(12))
    + "]>"
)
_OUTSIDE = '<!DOCTYPE x [<!ENTITY a SYSTEM "file:///etc/passwd">]>'
_PARTS = parts(
    '<worksheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><sheetData>'
    '<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1" t="s"><v>1</v></c></row>'
    '<row r="2"><c r="A2" t="s"><v>2</v></c><c r="B2" t="s"><v>3</v></c></row></sheetData></worksheet>',
    shared=texts("<t>Tag No.</t>", "<t>Service</t>", "<t>PT-1</t>", "<t>Feed</t>"),
    style=styles(),
)
_NEEDED = (
    "xl/workbook.xml",
    "xl/_rels/workbook.xml.rels",
    "xl/worksheets/sheet1.xml",
    "xl/sharedStrings.xml",
    "xl/styles.xml",
)


def _with(part: str, change: Callable[[str], str | bytes]) -> bytes:
    return zipped({**_PARTS, part: change(str(_PARTS[part]))})


def _after_declaration(text: str, put: str, inside: str) -> str:
    head, _, rest = text.partition("<")
    name, mark, after = rest.partition(">")
    return f"{head}{put}<{name}{mark}{inside}{after}"


for _part in _NEEDED:
    _place = "sheet 'Sheet1'" if "sheet1" in _part else f"part {_part}"
    hostile(f"entities in {_part.rpartition('/')[2]}", _place, "DOCTYPE")(
        lambda part=_part: _with(part, lambda text: _after_declaration(text, _LAUGHS, "&m;"))
    )
    hostile(f"outside entity in {_part.rpartition('/')[2]}", _place, "DOCTYPE")(
        lambda part=_part: _with(part, lambda text: _after_declaration(text, _OUTSIDE, "&a;"))
    )
    hostile(f"broken {_part.rpartition('/')[2]}", _place)(
        lambda part=_part: _with(part, lambda text: text[: len(text) * 2 // 3] + "<<" + text[len(text) * 2 // 3 :])
    )
    hostile(f"cut {_part.rpartition('/')[2]}", _place)(
        lambda part=_part: _with(part, lambda text: text[: len(text) * 2 // 3])
    )
hostile("deeply nested", "sheet 'Sheet1'")(
    lambda: _with("xl/worksheets/sheet1.xml", lambda text: text.replace("<sheetData>", "<!--x--><a>" + "<a>" * 100_000))
)
hostile("deeply nested texts", "part xl/sharedStrings.xml")(
    lambda: _with("xl/sharedStrings.xml", lambda text: text.replace("<si>", "<!--x-->" + "<si>" * 100_000, 1))
)
hostile("a part in a made-up encoding", "part xl/sharedStrings.xml")(
    lambda: _with("xl/sharedStrings.xml", lambda text: '<?xml version="1.0" encoding="x-none"?>' + text)
)
hostile("a text that is not there", "sheet 'Sheet1', cell A2")(
    lambda: _with("xl/worksheets/sheet1.xml", lambda text: text.replace("<v>2<", "<v>999999999<"))
)

# Parts that are missing.


def _without(part: str) -> bytes:
    return zipped({name: text for name, text in _PARTS.items() if name != part})


hostile("no workbook part", "no workbook in it")(lambda: _without("xl/workbook.xml"))
hostile("no relations", "part xl/_rels/workbook.xml.rels", "missing")(lambda: _without("xl/_rels/workbook.xml.rels"))
hostile("no sheet part", "sheet 'Sheet1'", "its part is missing")(lambda: _without("xl/worksheets/sheet1.xml"))
hostile("no texts part", "sheet 'Sheet1', cell A1")(lambda: _without("xl/sharedStrings.xml"))
hostile("no styles part", "PT-1", status=READ)(lambda: _without("xl/styles.xml"))
hostile("no content types", "PT-1", status=READ)(lambda: _without("[Content_Types].xml"))
hostile("no relations of the package", "PT-1", status=READ)(lambda: _without("_rels/.rels"))

# Extents.

_LIST = "".join(row(number, values) for number, values in enumerate([HEADINGS, *GOOD], 1))
hostile("a cell at XFD1048576 alone", "sheet 'Sheet1'", "reaches to XFD1048576")(
    lambda: zipped(parts(worksheet('<row r="1048576"><c r="XFD1048576"><v>1</v></c></row>')))
)
hostile("a cell at XFD1048576 beside a list", "PT-101", "XFD1048576", status=READ)(
    lambda: zipped(parts(worksheet(_LIST + '<row r="1048576"><c r="XFD1048576"><v>1</v></c></row>')))
)
hostile("a cell beyond the last", "sheet 'Sheet1'")(
    lambda: zipped(parts(worksheet(_LIST + '<row r="1048577"><c r="XFE1048577"><v>1</v></c></row>')))
)
hostile("rows out of order", "", status=READ)(
    lambda: zipped(parts(worksheet(row(9, GOOD[0]) + row(1, HEADINGS) + row(3, GOOD[1]))))
)
hostile("a false dimension", "PT-101", status=READ)(
    lambda: zipped(parts(worksheet(_LIST, before='<dimension ref="A1:XFD1048576"/>')))
)
hostile("a merged range over everything", "PT-101", status=READ)(
    lambda: zipped(parts(worksheet(_LIST, after='<mergeCells><mergeCell ref="A1:XFD1048576"/></mergeCells>')))
)
hostile("a hundred thousand merged ranges", "PT-101", status=READ)(
    lambda: zipped(
        parts(worksheet(_LIST, after="<mergeCells>" + '<mergeCell ref="A2:XFD1048576"/>' * 100_000 + "</mergeCells>"))
    )
)


@hostile("a million formatted blank rows", "PT-101", status=READ)
def _blank_rows() -> bytes:
    blank = "".join(
        f'<row r="{number}" s="1" customFormat="1"><c r="A{number}" s="1"/></row>' for number in range(6, 1_048_577)
    )
    return zipped(parts(worksheet(_LIST + blank), style=styles(cells='<xf fontId="0"/><xf fontId="0" numFmtId="2"/>')))


@hostile("16,000 columns", "PT-1", status=READ)
def _columns() -> bytes:
    headings = ["Tag No.", "Service", *(f"Column {number}" for number in range(15_998))]
    return book([headings, *(["PT-1%d" % number, "Feed", *range(15_998)] for number in range(3))])  # noqa: UP031


@hostile("16,384 columns of the same heading", "PT-1", status=READ)
def _same_columns() -> bytes:
    return book([["Tag No.", *["LRV"] * 16_383], ["PT-1", *[1] * 16_383]])


@hostile("200 sheets", "PT-1", status=READ)
def _sheets() -> bytes:
    return zipped(parts(*(sheet([HEADINGS, with_columns(**{"Tag No.": f"PT-1{number:03}"})]) for number in range(200))))


hostile("200 blank sheets", "no list with tags")(lambda: zipped(parts(*[worksheet("")] * 200)))
hostile("no sheet", "no sheet was found")(lambda: zipped(parts()))
hostile("two sheets of one name", "there are two of this name")(
    lambda: zipped(
        {
            **parts(sheet([HEADINGS, *GOOD]), sheet([HEADINGS, *GOOD])),
            "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{KINDS}"><sheets><sheet name="A" r:id="rId1"/>'
            '<sheet name="A" r:id="rId2"/></sheets></workbook>',
        }
    )
)

# Numbers and texts that no cell should hold.

_NUMBERS = (
    "NaN",
    "inf",
    "-inf",
    "1e999",
    "-1e999",
    "9**9**9",
    "1e308",
    "-0",
    "1e-320",
    "0x10",
    "1_000",
    "٣",
    "9" * 400,
)


@hostile("numbers that are none, as texts", "PT-1", status=READ)
def _number_texts() -> bytes:
    fields = [name for name in HEADINGS if name not in ("Tag No.", "Service", "Kind")]
    return book(
        [
            HEADINGS,
            *(
                with_columns(**{"Tag No.": f"PT-1{number:03}", name: text})
                for number, (name, text) in enumerate((name, text) for name in fields for text in _NUMBERS)
            ),
        ]
    )


for _text in ("NaN", "inf", "1e999", "-1e999"):
    hostile(f"a cell that is {_text}", "PT-101", status=READ)(
        lambda text=_text: book([HEADINGS, with_columns(LRV=Raw(text), URV=Raw(text), HH=Raw(text)), *GOOD[1:]])
    )
hostile("a cell that is 9**9**9", "9**9**9", "PT-101", status=READ)(
    lambda: book([HEADINGS, with_columns(LRV=Raw("9**9**9")), *GOOD[1:]])
)
hostile("dates that are none", "PT-1", status=READ)(
    lambda: zipped(
        parts(
            worksheet(
                row(1, HEADINGS)
                + "".join(
                    f'<row r="{at}"><c r="A{at}" t="inlineStr"><is><t>PT-1{at}</t></is></c>'
                    f'<c r="D{at}" s="1"><v>{value}</v></c></row>'
                    for at, value in enumerate(("1e300", "-1", "2958466", "0", "60", "-1e300", "99999999999"), 2)
                )
            ),
            style=styles(cells='<xf fontId="0"/><xf fontId="0" numFmtId="14"/>'),
        )
    )
)
hostile("numbers that are none, in a text file", "PT-1", status=READ, ending=".csv")(
    lambda: (
        "Tag,LRV,URV,Unit\n" + "".join(f"PT-1{at:02},{text},{text},{text}\n" for at, text in enumerate(_NUMBERS))
    ).encode()
)

_LONG = (
    "A" * 32_000,
    "(" * 32_000,
    "1-" * 16_000,
    "-." * 16_000,
    "0 to " * 6_400,
    "Ex ia IIC " * 3_200,
    "/,;" * 10_600,
    " " * 31_990 + "x",
    "\n" * 32_000 + "x",
    "II 2 G " * 4_500,
    "9" * 32_000,
    "1e" * 16_000,
    "é̂" * 10_000,
    "mA " * 10_600,
    "AAAA-" * 6_400,
    "PT-1 " * 6_400,
    "PT-1/" * 6_400,
    "[" * 32_000,
    "A1" * 16_000,
    "°" * 32_000,
    "=" * 32_000,
)


@hostile("cells of 32,000 characters", "PT-1", status=READ)
def _long_texts() -> bytes:
    fields = [name for name in HEADINGS if name != "Tag No."]
    rows = [
        with_columns(**{"Tag No.": f"PT-1{number:03}", **dict.fromkeys(fields, text)})
        for number, text in enumerate(_LONG)
    ]
    return book([HEADINGS, *rows])


@hostile("tags of 32,000 characters", "", status=READ)
def _long_tags() -> bytes:
    return book([HEADINGS, *GOOD, *(with_columns(**{"Tag No.": text}) for text in _LONG)])


@hostile("headings of 32,000 characters", "PT-1", status=READ)
def _long_headings() -> bytes:
    return book([[*HEADINGS, *_LONG], *GOOD])


@hostile("longer than a cell can hold", "PT-101", status=READ)
def _longer() -> bytes:
    return book([HEADINGS, with_columns(Service="word " * 400_000), *GOOD[1:]])


# Text that would be acted upon, were it not taken for text.

CONTROLS = (
    "\x1b[31mred\x1b[0m",
    "\x1b]0;title\x07",
    "\x1b]52;c;aGk=\x07",
    "\x9b31m",
    "a\x08b",
    "\x00",
    "a\rb",
    "\x7f",
    "\x85",
    "abc\u202edef",
    "\u2066abc\u2069",
    "\u200b",
    "\u2028",
    "\ufeffx",
    "\ufffe",
    "a\x0bb",
    "a\x0cb",
    "\x1bP+q\x1b\\",
    "\U000e0041",
)
FORMULAS = (
    "=1+1",
    "+1+1",
    "-1+1",
    "@SUM(1)",
    '=HYPERLINK("http://example.invalid","x")',
    "=cmd|' /C calc'!A0",
    "\t=1+1",
    "\r=1+1",
    '=DDE("cmd";"/C calc";"x")',
    "{=1+1}",
    "'=1+1",
    "http://example.invalid/x",
    "mailto:a@example.invalid",
    "＝1+1",
)
MARKUP = (
    "<script>alert(1)</script>",
    "<img src=x onerror=alert(1)>",
    "]]>",
    "</t></is></c>",
    "&lt;b&gt;",
    "<a href='x'>y</a>",
    "<font size=99>big</font>",
    "<para>x",
    "<b>",
    "&amp;",
    "&#0;",
    "%s %d {0} {x} $x",
    "[red]x[/red]",
    "[link=x]y",
    "\\x1b[31m",
)
PATHS = (
    "../../x",
    "..\\..\\x",
    "/etc/passwd",
    "C:\\x",
    "CON",
    "NUL.txt",
    "a" * 300,
    "x\x00y",
    "~/x",
    "$HOME",
    "`id`",
    "x;id",
    "| id",
    "file:///etc/passwd",
    "\\\\host\\share",
)


def everywhere(texts_: Sequence[str]) -> list[list[Any]]:
    """A list that has each of the texts in each of its columns, one at a time, and once in all of a row."""
    rows: list[list[Any]] = [list(HEADINGS), *map(list, GOOD)]
    for number, text in enumerate(texts_):
        rows.extend(
            with_columns(**{"Tag No.": f"PT-{number + 2}{at:02}", name: text})
            for at, name in enumerate(HEADINGS[1:], 1)
        )
        rows.append(with_columns(**{"Tag No.": text}))
        rows.append(with_columns(**{"Tag No.": f"PT-101 {text}"}))
        rows.append([text] * len(HEADINGS))
    return rows


def in_frame(texts_: Sequence[str]) -> list[list[Any]]:
    """A list that has the texts in its title and headings, and below its rows."""
    return [[texts_[0]], [], [*HEADINGS, *texts_], *map(list, GOOD), [], list(texts_)]


for _name, _texts in (("control", CONTROLS), ("formula", FORMULAS), ("markup", MARKUP), ("path", PATHS)):
    hostile(f"{_name} texts everywhere", "PT-101", status=READ)(lambda found=_texts: book(everywhere(found)))
    hostile(f"{_name} texts around", "PT-101", status=READ)(lambda found=_texts: book(in_frame(found)))
    hostile(f"{_name} texts as names of sheets", "PT-101", status=READ)(lambda found=_texts: _named(found))
    hostile(f"{_name} texts in a text file", "PT-101", status=READ, ending=".csv")(
        lambda found=_texts: _delimited(everywhere([text.replace("\0", "") for text in found]))
    )


def _named(names: Sequence[str]) -> bytes:
    listed = "".join(
        f'<sheet name="{_xml(name).replace(chr(34), "&quot;")}" sheetId="{at}" r:id="rId{at}"/>'
        for at, name in enumerate(names, 1)
    )
    return zipped(
        {
            **parts(
                *(
                    sheet([HEADINGS, *(with_columns(**{"Tag No.": "PT-101" if not at else f"PT-2{at:02}"}),)])
                    for at in range(len(names))
                )
            ),
            "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{KINDS}"><sheets>{listed}</sheets></workbook>',
        }
    )


def _delimited(rows: Iterable[Sequence[Any]]) -> bytes:
    import csv

    out = io.StringIO(newline="")
    csv.writer(out, quoting=csv.QUOTE_ALL).writerows(rows)
    return out.getvalue().encode("utf-8", "surrogatepass")


@hostile("the plant's own data as formulas and markup", "PT-101", status=READ)
def _plant() -> bytes:
    fields = (
        "Name",
        "Tag pattern",
        "Numbering",
        "Users' first letters",
        "Plant codes",
        "Jurisdiction",
        "Atmospheric pressure",
    )
    rows = [[field, text] for field in fields for text in (*FORMULAS, *MARKUP, *CONTROLS)]
    return zipped(
        {
            **parts(sheet([HEADINGS, *GOOD]), sheet([["Field", "Value"], *rows])),
            "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{KINDS}"><sheets>'
            '<sheet name="Index" r:id="rId1"/>'
            '<sheet name="Plant" r:id="rId2"/></sheets></workbook>',
        }
    )


for _number, _pattern in enumerate(
    (
        r"(?P<p>(?:[A-Z]+)+)-(?P<l>[A-Z]+)(?P<n>[0-9]+)",
        r"(?P<l>(A|A)*)(?P<n>[0-9]+)B",
        r"(?P<l>(.*)*)x(?P<n>\d+)",
        r"(?P<l>.*.*.*.*.*.*.*.*.*.*.*.*)(?P<n>\d{9})",
    )
):
    hostile(f"tag pattern without end {_number}", "PT-101", status=READ)(
        lambda pattern=_pattern: zipped(
            {
                **parts(
                    sheet(
                        [
                            HEADINGS,
                            *GOOD,
                            with_columns(**{"Tag No.": "A" * 60 + "!"}),
                            with_columns(**{"Tag No.": "A" * 5_000}),
                        ]
                    ),
                    sheet([["Field", "Value"], ["Tag pattern", pattern]]),
                ),
                "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{KINDS}"><sheets>'
                '<sheet name="Index" r:id="rId1"/>'
                '<sheet name="Plant" r:id="rId2"/></sheets></workbook>',
            }
        )
    )

# Text files.

hostile("NUL in a text file", "line 3", "NUL character", ending=".csv")(
    lambda: b"Tag,Service\nPT-101,Feed\nPT-102,Fe\0ed\n"
)
hostile("UTF-16 without its mark", "line 1", "NUL character", ending=".csv")(
    lambda: "Tag,Service\nPT-1,Feed\n".encode("utf-16-le")
)
hostile("ragged rows", "PT-101", status=READ, ending=".csv")(
    lambda: (
        b"Tag,Service,LRV,URV,Unit\nPT-101,Feed\nPT-102,Feed,0,10,barg,9,9,9,9\n\nPT-103\n,,,,\nPT-104,Feed,0,10,barg\n"
    )
)
hostile("an unclosed quote", "line 3", "quotation mark", ending=".csv")(
    lambda: b'Tag,Service,LRV\nPT-101,Feed,0\nPT-102,"Feed,0\nPT-103,Feed,0,9\nPT-104,Feed,0\n'
)
hostile("quotes that mean inches", "PT-101", status=READ, ending=".csv")(
    lambda: b'Tag,Service,Size\nPT-101,Feed,1"\nPT-102,"old" feed,2"\nPT-103,Feed,"3\nPT-104,Feed,4"\nPT-105,Feed,5\n'
)
hostile("a text of one line", "longer than", ending=".csv")(lambda: b"Tag" + b"x" * 9_000_000)
hostile("a text of commas", "PT-101", status=READ, ending=".csv")(
    lambda: b"Tag,Service\nPT-101,Feed\n" + b"," * 3_000_000 + b"\n"
)
hostile("a text of quotes", "", ending=".csv")(lambda: b"Tag,Service\n" + b'"' * 3_000_001)
hostile("a text of bytes", "", ending=".csv")(lambda: bytes(range(1, 256)) * 2_000)
hostile("a text of line ends", "no list with tags", ending=".csv")(lambda: b"\n" * 3_000_000)

# Lists that are none.

hostile("headings and no row", "no row stands under the headings", "Sheet1")(lambda: book([HEADINGS]))
hostile("headings and no row in a text file", "no row stands under the headings", ending=".csv")(
    lambda: b"Tag No.,Service,LRV\n"
)
hostile("a list without tags", "no list with tags")(lambda: book([HEADINGS[1:], *(each[1:] for each in GOOD)]))
hostile("a sheet of prose", "no list with tags")(
    lambda: book([["Dear all,"], ["please find attached the list of instruments."], ["Regards"]])
)
hostile("3,000 equal tags", "PT-101", status=READ)(lambda: book([HEADINGS, *[GOOD[0]] * 3_000]))
hostile("3,000 tags of one loop", "PT-101", status=READ)(
    lambda: book(
        [
            HEADINGS,
            *(
                with_columns(**{"Tag No.": f"PT-101{chr(65 + at % 26)}{at}", "I/O Address": f"1.{at}"})
                for at in range(3_000)
            ),
        ]
    )
)
hostile("3,000 tags of one address", "PT-1", status=READ)(
    lambda: book([HEADINGS, *(with_columns(**{"Tag No.": f"PT-1{at:04}"}) for at in range(3_000))])
)


def damaged_comments() -> bytes:
    """A good list whose comments part is broken: it is read, and the comments are said to be lost."""
    return zipped(
        {
            **parts(sheet([HEADINGS, *GOOD])),
            "xl/worksheets/_rels/sheet1.xml.rels": relations(("r1", "comments", "../comments1.xml")),
            "xl/comments1.xml": f'<comments xmlns="{MAIN}"><commentList><comment ref="A1"><text><t>x',
        }
    )


hostile("broken comments", "PT-101", status=READ)(damaged_comments)
