"""Delimited text: encodings, separators, quotes that are none, ragged rows."""

import codecs
import csv
import io

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.workbook.delimited import find_separator, read_delimited
from instruments.workbook.sheet import Sheet, UnreadableFile


def read(text: str | bytes, file: str = "lists/index.csv") -> Sheet:
    return read_delimited(text.encode() if isinstance(text, str) else text, file=file)


def test_a_plain_list_whole() -> None:
    assert read("Tag,Service,LRV\nPT-1,feed,0\nPT-2, ,  10 \n\nPT-3,,#REF!\n") == Sheet(
        file="lists/index.csv",
        name="index",
        rows=[
            ["Tag", "Service", "LRV"],
            ["PT-1", "feed", "0"],
            ["PT-2", None, "  10 "],
            [None, None, None],
            ["PT-3", None, None],
        ],
        errors={(4, 2): "#REF!"},
        encoding="UTF-8",
        separator=",",
        cells_filled=10,
    )


TEXT = "Tag;Temp °C\nTT-1;80\n"
ROWS = [["Tag", "Temp °C"], ["TT-1", "80"]]
SEMICOLONS = "columns taken to be separated by semicolons"


@pytest.mark.parametrize(
    ("data", "rows", "notes"),
    [
        (TEXT.encode(), ROWS, (SEMICOLONS,)),
        (TEXT.encode("utf-8-sig"), ROWS, (SEMICOLONS,)),
        (TEXT.encode("utf-16"), ROWS, (SEMICOLONS,)),
        (codecs.BOM_UTF16_BE + TEXT.encode("utf-16-be"), ROWS, (SEMICOLONS,)),
        (TEXT.encode("cp1252"), ROWS, ("not in UTF-8: read as Windows-1252", SEMICOLONS)),
        (
            TEXT.encode("cp1252") + b"\x81;\x90\n",
            [*ROWS, ["\ufffd", "\ufffd"]],
            (
                "not in UTF-8: read as Windows-1252",
                "characters that Windows-1252 has not, shown as \ufffd: 2",
                SEMICOLONS,
            ),
        ),
        # Two files put together, each line as its own file had it.
        (
            TEXT.encode() + "Länge;20 °C\n".encode("cp1252") + "Höhe;½\n".encode(),
            [*ROWS, ["Länge", "20 °C"], ["Höhe", "½"]],
            ("in UTF-8, but for lines read as Windows-1252: 1, line 3", SEMICOLONS),
        ),
        # One damaged byte among good ones: every other degree sign stays what it is.
        (
            TEXT.encode() * 2 + b"TT-\xff;1\n",
            [*ROWS, *ROWS, ["TT-\ufffd", "1"]],
            ("damaged characters, shown as \ufffd: 1", SEMICOLONS),
        ),
    ],
)
def test_encodings(data: bytes, rows: list[list[str]], notes: tuple[str, ...]) -> None:
    found = read(data)
    assert (found.rows, found.notes) == (rows, notes)


@pytest.mark.parametrize(
    ("text", "separator"),
    [
        ("a,b\nc,d\n", ","),
        ("a;b\nc;d\n", ";"),
        ("a\tb\nc\td\n", "\t"),
        ("a|b\nc|d\n", "|"),
        ("one column\nof words\n", ","),
        ("", ","),
        # Decimal commas, and as many of them as semicolons.
        ("tag;lrv;urv\nPT-1;0,5;1,5\nPT-2;0,1;2,5\n", ";"),
        ("tag;lrv\nPT-1;0,5\nPT-2;1,5\nPT-3;2,5\n", ";"),
        # Commas in texts, one in each row.
        ("tag\tservice\tunit\nPT-1\tfeed, hot\tbar\nPT-2\tfeed, cold\tbar\n", "\t"),
        ('tag,service\nPT-1,"feed; hot; wet"\nPT-2,"a; b; c"\n', ","),
        # Title rows and notes round about.
        (
            "Project: Works, Unit 10\n\ntag;service;unit\nPT-1;feed;bar\nPT-2;feed;bar\nEnd of list, rev. 2\n",
            ";",
        ),
        ("PT-1|4,20|mA;HART\nPT-2|4,20|mA;HART\n", "|"),
    ],
)
def test_the_separator(text: str, separator: str) -> None:
    assert find_separator(text.splitlines(keepends=True))[0] == separator


DAMAGED = "Tag;C\nTT-1;20 °C\n".encode() + b"TT-2;30 \xb0C\n"


@pytest.mark.parametrize(
    ("data", "encoding", "separator", "read_as", "cells"),
    [
        (b"tag,x;y\na,b;c\n", "", ";", ("UTF-8", ";"), ["a,b", "c"]),
        (b"tag,x;y\na,b;c\n", "", ",", ("UTF-8", ","), ["a", "b;c"]),
        # A separator that parts nothing, and one that is none, are found out.
        (b"tag;y\na;c\n", "", "\t", ("UTF-8", ";"), ["a", "c"]),
        (b"tag;y\na;c\n", "", "x", ("UTF-8", ";"), ["a", "c"]),
        # What the file says itself goes before.
        (b"sep=;\ntag;x,y\na;b,c\n", "", ",", ("UTF-8", ";"), ["a", "b,c"]),
        # In UTF-8 is what can be: nobody writes two such characters side by side.
        ("tag;y\na;°C\n".encode(), "Windows-1252", ";", ("UTF-8", ";"), ["a", "°C"]),
        ("tag;y\na;°C\n".encode("utf-16"), "Windows-1252", ";", ("UTF-16", ";"), ["a", "°C"]),
        ("tag;y\na;°C\n".encode("cp1252"), "UTF-8", ";", ("UTF-8", ";"), ["a", "\ufffdC"]),
        (DAMAGED, "", "", ("UTF-8", ";"), ["TT-1", "20 °C"]),
        (DAMAGED, "Windows-1252", "", ("Windows-1252", ";"), ["TT-1", "20 Â°C"]),
        (DAMAGED + b"TT-3;20 \xc2\xb0 \xb0\n" + b"\xff" * 9, "", "", ("Windows-1252", ";"), ["TT-1", "20 Â°C"]),
        (DAMAGED, "UTF-8", "", ("UTF-8", ";"), ["TT-1", "20 °C"]),
        (DAMAGED + "\u00b5".encode() * 9, "", "", ("UTF-8", ";"), ["TT-1", "20 °C"]),
        (DAMAGED + "\u00b5".encode() * 9, "Windows-1252", "", ("Windows-1252", ";"), ["TT-1", "20 Â°C"]),
    ],
)
def test_what_is_told_of_a_text(
    data: bytes, encoding: str, separator: str, read_as: tuple[str, str], cells: list[str]
) -> None:
    found = read_delimited(data, file="a.csv", encoding=encoding, separator=separator)
    assert ((found.encoding, found.separator), found.rows[1]) == (read_as, cells)
    # What was found out, told again, reads the same.
    again = read_delimited(data, file="a.csv", encoding=found.encoding, separator=found.separator)
    assert again.rows == found.rows


def test_a_separator_that_the_file_names() -> None:
    assert read("sep=;\r\na,b;c\r\n") == Sheet(
        file="lists/index.csv", name="index", rows=[["a,b", "c"]], cells_filled=2, encoding="UTF-8", separator=";"
    )
    assert read("SEP=#\na#b\n").rows == [["a", "b"]]
    assert read('sep="\na,b\n').rows == [['sep="', None], ["a", "b"]]


@pytest.mark.parametrize(
    ("text", "rows"),
    [
        ('a,"b, c"\n', [["a", "b, c"]]),
        ('a,"b\nc"\nd,e\n', [["a", "b\nc"], ["d", "e"]]),
        ('a,"1/2"" NPT"\n', [["a", '1/2" NPT']]),
        ('a,1/2" NPT\nb,3/4" NPT\n', [["a", '1/2" NPT'], ["b", '3/4" NPT']]),
        ('="0034",="a ""b"""\n', [["0034", 'a "b"']]),
        ("a,b\rc,d\r", [["a", "b"], ["c", "d"]]),
        ("a,b\r\nc,d\r\n", [["a", "b"], ["c", "d"]]),
        ("a,b\n,\n , \n", [["a", "b"]]),
        ("a\u2028b,c\x0bd\n", [["a\u2028b", "c\x0bd"]]),
        ("", []),
        ("\n\n", []),
        ("a\n\u200b\n \n", [["a"]]),
    ],
)
def test_cells(text: str, rows: list[list[str | None]]) -> None:
    assert read(text).rows == rows


INCHES = 'the quotation marks were taken as part of the text (") and not as quotes'


@pytest.mark.parametrize(
    ("text", "rows"),
    [
        (
            'tag;urv;unit;rev\nPT-1;100;"WC;0\nPT-2;50;"WC;0\n',
            [["tag", "urv", "unit", "rev"], ["PT-1", "100", '"WC', "0"], ["PT-2", "50", '"WC', "0"]],
        ),
        (
            'tag;urv;unit\nPT-1;100;"WC\nPT-2;50;"WC\nPT-3;50;"in ""WC"""\n',
            [
                ["tag", "urv", "unit"],
                ["PT-1", "100", '"WC'],
                ["PT-2", "50", '"WC'],
                ["PT-3", "50", 'in "WC"'],
            ],
        ),
    ],
)
def test_quotation_marks_that_are_inches(text: str, rows: list[list[str]]) -> None:
    found = read(text)
    assert found.rows == rows
    assert INCHES in found.notes


@pytest.mark.parametrize(
    ("text", "line"),
    [
        ('a,b\nc,"d\ne,f,g\n', 2),
        ('a,b\n"c\nx",d\ne,"f" g\nh,i,j\n', 4),
        ('"', 1),
        ('sep=,\na,b\nc,"d\ne,f,g\n', 3),
    ],
)
def test_a_quotation_mark_that_is_not_closed(text: str, line: int) -> None:
    with pytest.raises(UnreadableFile) as refused:
        read(text)
    assert (refused.value.file, refused.value.place) == ("lists/index.csv", f"line {line}")
    assert refused.value.reason.startswith(
        "a quotation mark in the row that begins here is not closed where its cell ends ("
    )


@pytest.mark.parametrize(
    "data", [b"a,b\nc\0,d\n", b"a,b\nc,d\n".replace(b"d", b"\0"), codecs.BOM_UTF32_LE + b"a\0\0\0"]
)
def test_nul_is_refused(data: bytes) -> None:
    with pytest.raises(UnreadableFile) as refused:
        read(data)
    assert str(refused.value).endswith(": holds a NUL character, as no text does: save it as CSV in UTF-8.")


def test_utf16_that_is_none() -> None:
    with pytest.raises(UnreadableFile) as refused:
        read(codecs.BOM_UTF16_LE + b"a\0b")
    assert str(refused.value) == "lists/index.csv: says that it is in UTF-16, and is not all of it."


def test_ragged_rows_are_kept_padded_and_said() -> None:
    found = read("Index,rev 2\ntag,service,urv\nPT-1,feed, hot,5\nPT-2,feed\nPT-3,feed,6\nNotes\n")
    assert found.rows == [
        ["Index", "rev 2", None, None],
        ["tag", "service", "urv", None],
        ["PT-1", "feed", " hot", "5"],
        ["PT-2", "feed", None, None],
        ["PT-3", "feed", "6", None],
        ["Notes", None, None, None],
    ]
    assert found.ragged == {0: 2, 2: 4, 3: 2}
    assert found.notes == ("rows with more or fewer cells than is usual here: 3, in row 1, 3, 4",)


@pytest.mark.parametrize(
    ("text", "cells", "fits"),
    [
        ("a,b\nc\n", 4, True),
        ("a,b\nc\n", 3, False),
        ("," * 16_383 + "\n", 10**9, True),
        ("a" + "," * 16_384, 10**9, False),
    ],
)
def test_how_large(text: str, cells: int, fits: bool) -> None:
    if fits:
        read_delimited(text.encode(), file="a.csv", max_cells=cells)
    else:
        with pytest.raises(UnreadableFile, match="cells are read"):
            read_delimited(text.encode(), file="a.csv", max_cells=cells)


def test_a_file_of_separators_does_not_fill_the_memory() -> None:
    with pytest.raises(UnreadableFile, match=r"a.csv, line 2: is longer than 8,000,000 characters, as no row is\."):
        read_delimited(b"\n" + b"," * 30_000_000, file="a.csv")
    with pytest.raises(UnreadableFile, match=r"has more than 1,000,000 cells, and no more are read"):
        read_delimited(b",\n" * 600_000, file="a.csv", max_cells=1_000_000)
    with pytest.raises(UnreadableFile, match=r"has more than 1,000,000 cells, and no more are read"):
        read_delimited(b"\n" * 2_000_000, file="a.csv", max_cells=1_000_000)


def test_one_long_row_among_many_is_not_spread_out() -> None:
    text = "a\n" * 100_000 + "," * 5_000 + "x\n"
    with pytest.raises(UnreadableFile, match=r"has 100,001 rows and 5,001 columns; at most 20,000,000 cells are read"):
        read(text)


CELL = st.text(st.characters(exclude_characters="\0", exclude_categories=["Cs"]), max_size=8)


@given(st.lists(st.lists(CELL, min_size=3, max_size=3), min_size=3, max_size=8), st.sampled_from(",;\t|"))
def test_what_a_program_wrote_comes_back(rows: list[list[str]], separator: str) -> None:
    out = io.StringIO()
    csv.writer(out, delimiter=separator, quoting=csv.QUOTE_ALL).writerows(rows)
    found = read_delimited(f"sep={separator}\n{out.getvalue()}".encode(), file="a.csv")
    for row, (got, written) in enumerate(zip(found.rows, rows, strict=False)):
        for column, (cell, text) in enumerate(zip(got, written, strict=True)):
            if cell is not None and not text.startswith('="'):
                assert cell == text
            elif cell is None and (row, column) not in found.errors:
                assert not text.strip("\u200b\u200c\u200d\u200e\u200f\u2060\ufeff").strip() or text == '=""'
    assert not any(any(cell.strip() for cell in row) for row in rows[len(found.rows) :])
