"""XML as it may be spelt: what is rewritten, and what is refused."""

import codecs
import itertools
from collections.abc import Iterator

import pytest

from instruments.workbook.plain import (
    MAX_TOKEN,
    BrokenXml,
    is_utf8,
    read_xml,
    rewritten,
    well_formed,
    without_codes,
)
from tests.instruments.workbook.packages import KINDS, MAIN, STRICT


def cut(data: bytes, size: int) -> Iterator[bytes]:
    return (data[at : at + size] for at in range(0, len(data), size))


USUAL = '<worksheet><sheetData><row r="1"><c r="A1" t="str"><v>a</v></c></row></sheetData></worksheet>'


@pytest.mark.parametrize("size", [1, 7, 1000])
@pytest.mark.parametrize(
    ("written", "usual"),
    [
        pytest.param(USUAL.encode(), USUAL, id="usual"),
        pytest.param(codecs.BOM_UTF8 + USUAL.encode(), USUAL, id="byte order mark"),
        pytest.param(USUAL.encode("utf-16"), USUAL, id="UTF-16"),
        pytest.param(
            '<?xml version="1.0" encoding="ISO-8859-1"?><v>°C</v>'.encode("latin-1"),
            "<v>°C</v>",
            id="Latin-1",
        ),
        pytest.param(
            f"<x:worksheet xmlns:x='{MAIN}'><x:sheetData/></x:worksheet>".encode(),
            "<worksheet><sheetData></sheetData></worksheet>",
            id="prefix and single quotes",
        ),
        pytest.param(
            f'<worksheet xmlns="{STRICT}"><sheetData/></worksheet>'.encode(),
            "<worksheet><sheetData></sheetData></worksheet>",
            id="strict namespace",
        ),
        pytest.param(
            f'<worksheet xmlns="{MAIN}" xmlns:r="{KINDS}" xmlns:y="urn:y"><y:row/><drawing'
            f' r:id="rId1"/></worksheet>'.encode(),
            '<worksheet><other-row></other-row><drawing id="rId1"></drawing></worksheet>',
            id="foreign element and attribute",
        ),
        pytest.param(
            b"<sheetData><!-- <row/> --><row><c><v>1</v></c><?x y?><c/><c r='E1'><v>2</v></c>"
            b"<c><v>3</v></c></row>"
            b"<row/><row r='9'><c><v>4</v></c></row><row><c t='e' r='b10'><v>5</v></c></row></sheetData>",
            '<sheetData><row r="1"><c r="A1"><v>1</v></c><c r="B1"/><c r="E1"><v>2</v></c><c'
            ' r="F1"><v>3</v></c></row>'
            '<row r="2"></row><row r="9"><c r="A9"><v>4</v></c></row><row r="10"><c r="B10"'
            ' t="e"><v>5</v></c></row>'
            "</sheetData>",
            id="no addresses",
        ),
        pytest.param(
            b"<t xml:space='preserve'><![CDATA[a<b ]]>&amp;&#65;&gt;\r\n&#13;</t>",
            '<t xml:space="preserve">a&lt;b &amp;A&gt;\n&#13;</t>',
            id="CDATA and entities",
        ),
        pytest.param(b"<c a='x&quot;&#10;&lt;y'/>", '<c a="x&quot;&#10;&lt;y"/>', id="attribute"),
    ],
)
def test_what_is_spelt_otherwise_is_rewritten(written: bytes, usual: str, size: int) -> None:
    assert b"".join(rewritten(cut(written, size))).decode() == usual


@pytest.mark.parametrize(
    ("written", "reason"),
    [
        (b"<a>", "is not well-formed XML: no element found, line 1, column 4"),
        (b"", "is not well-formed XML: no element found, line 1, column 1"),
        (b"<a></b>", "is not well-formed XML: mismatched tag, line 1, column 6"),
        (b"<a>&b;</a>", "is not well-formed XML: undefined entity, line 1, column 4"),
        (b"<a>\x01</a>", "is not well-formed XML: not well-formed (invalid token), line 1, column 4"),
        (b"<a>\xff</a>", "is not well-formed XML: not well-formed (invalid token), line 1, column 4"),
        (b"<a b='1' b='2'/>", "is not well-formed XML: duplicate attribute, line 1, column 10"),
        (
            b'<?xml version="1.0" encoding="klingon"?><a/>',
            "is in an encoding that cannot be read (unknown encoding: klingon)",
        ),
        (b"<a>" * 300, "is nested too deeply"),
        (b"<a b='" + b"x" * (MAX_TOKEN + 1), f"has a tag or text of more than {MAX_TOKEN:,} bytes"),
        (
            b'<!DOCTYPE a [<!ENTITY b "bbbbbbbb"><!ENTITY c "&b;&b;&b;">]><a>&c;</a>',
            "has a DOCTYPE, which no workbook needs and which can make a small file fill the memory",
        ),
        (
            b'<!DOCTYPE a SYSTEM "file:///etc/passwd"><a/>',
            "has a DOCTYPE, which no workbook needs and which can make a small file fill the memory",
        ),
        (b"<row><c r='A0'/></row>", "has a cell at 'A0', which no sheet has"),
        (b"<row><c r='XFE1'/></row>", "has a cell at 'XFE1', which no sheet has"),
        (b"<row><c r='A99999999999'/></row>", "has a cell at 'A99999999999', which no sheet has"),
        (b"<sheetData><row r='x'/></sheetData>", "has a row numbered 'x'"),
        (b"<sheetData><row r='1048577'/></sheetData>", "has a row 1048577, and a sheet ends at row 1048576"),
        (b"<sheetData><row r='0'/></sheetData>", "has a row 0, and a sheet ends at row 1048576"),
        (b"<row>" + b"<c/>" * 16_385 + b"</row>", "has more than 16384 cells in row 0"),
    ],
)
def test_what_is_refused(written: bytes, reason: str) -> None:
    with pytest.raises(BrokenXml) as refused:
        b"".join(rewritten(cut(written, 1 << 20)))
    assert str(refused.value) == reason


def test_the_last_cell_and_the_deepest_nesting_are_read() -> None:
    row = b"<row>" + b"<c/>" * 16_384 + b"</row>"
    assert b'<c r="XFD1"/></row>' in b"".join(rewritten([b"<sheetData>", row, b"</sheetData>"]))
    assert b"".join(rewritten([b"<a>" * 200 + b"</a>" * 200])) == b"<a>" * 200 + b"</a>" * 200


def test_a_tag_without_end_is_given_up_before_it_has_been_read() -> None:
    taken = itertools.count()
    with pytest.raises(BrokenXml):
        read_xml(b"<a " if next(taken) == 0 else b"x" * (1 << 20) for _ in range(1000))
    assert next(taken) <= 10


@pytest.mark.parametrize(
    ("head", "answer"),
    [
        (b"", True),
        (b"<a/>", True),
        (codecs.BOM_UTF8 + b'<?xml version="1.0" encoding="UTF-8"?>', True),
        (b"<?xml version='1.0' encoding='utf-8'?>", True),
        (b'<?xml version="1.0" encoding="US-ASCII"?>', True),
        (b'<?xml version="1.0"?><a encoding="latin-1"/>', True),
        (b'<?xml version="1.0" encoding="windows-1252"?>', False),
        (b'<?xml version="1.0" encoding="UTF-16"?>', False),
        ("<a/>".encode("utf-16"), False),
        ("<a/>".encode("utf-16-le"), False),
        ("<a/>".encode("utf-16-be"), False),
    ],
)
def test_whether_a_part_is_in_utf8(head: bytes, answer: bool) -> None:
    assert is_utf8(head) is answer


@pytest.mark.parametrize(
    ("written", "meant"),
    [
        ("4-20 mA", "4-20 mA"),
        ("a_x000D_b", "a\rb"),
        ("_x00B0_C", "°C"),
        ("_x005F_x0041_", "_x0041_"),
        ("_x00_", "_x00_"),
        ("TAG_x", "TAG_x"),
    ],
)
def test_coded_characters(written: str, meant: str) -> None:
    assert without_codes(written) == meant


@pytest.mark.parametrize("size", [1, 7, 1000])
@pytest.mark.parametrize(
    ("text", "reason"),
    [
        (b'<a b="1">x<c/></a>', None),
        (b'<a xmlns:r="r"><r:b>\xc2\xb0</r:b></a>', None),
        (b"<a><b></a>", "is not well-formed XML: mismatched tag, line 1, column 9"),
        (b"<a>", "is not well-formed XML: no element found, line 1, column 4"),
        (b"", "is not well-formed XML: no element found, line 1, column 1"),
        (b"<a>\xff</a>", "is not well-formed XML: not well-formed (invalid token), line 1, column 4"),
        (b"<!DOCTYPE a><a/>", "has a DOCTYPE, which no workbook needs and which can make a small file fill the memory"),
    ],
)
def test_pieces_are_passed_on_and_looked_at(text: bytes, reason: str | None, size: int) -> None:
    pieces = [text[at : at + size] for at in range(0, len(text), size)]
    passed: list[bytes] = []
    found: str | None = None
    try:
        passed.extend(well_formed(pieces))
    except BrokenXml as error:
        found = str(error)
    assert found == reason
    assert b"".join(passed) == text[: len(b"".join(passed))]
    if reason is None:
        assert passed == pieces
