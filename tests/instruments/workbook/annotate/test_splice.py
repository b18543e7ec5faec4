"""XML changed in place: elements found where they stand, and only what is changed is changed."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.workbook.annotate.splice import Edit, elements, in_utf8, spliced, text_in_xml, with_attribute
from instruments.workbook.plain import BrokenXml


@given(
    st.binary(max_size=60), st.lists(st.tuples(st.integers(0, 60), st.integers(0, 9), st.binary(max_size=5))), st.data()
)
def test_any_edits_in_any_pieces(data: bytes, wanted: list[tuple[int, int, bytes]], chance: st.DataObject) -> None:
    edits: list[Edit] = []
    last = 0
    for start, length, text in sorted(wanted):
        if last <= start and start + length <= len(data):
            edits.append(Edit(start, start + length, text))
            last = start + length + (length == 0)
    whole = data
    for edit in reversed(edits):
        whole = whole[: edit.start] + edit.text + whole[edit.end :]
    pieces, rest = [], data
    while rest:
        size = chance.draw(st.integers(1, 20))
        pieces.append(rest[:size])
        rest = rest[size:]
    assert b"".join(spliced(pieces, chance.draw(st.permutations(edits)))) == whole


def test_edits_at_one_place_stand_in_their_order() -> None:
    edits = [Edit(1, 1, b"x"), Edit(1, 1, b"y"), Edit(0, 0, b"w"), Edit(2, 2, b"z")]
    assert b"".join(spliced([b"ab"], edits)) == b"waxybz"


def names(data: bytes) -> list[tuple[str, bytes]]:
    """Every element with its own bytes, in order."""
    found: list[tuple[str, bytes]] = []
    waiting = [elements(data)]
    while waiting:
        each = waiting.pop(0)
        found.append((each.name, data[each.start : each.end]))
        waiting = each.children + waiting
    return found


@pytest.mark.parametrize(
    ("data", "found"),
    [
        (b"<a><b/>x</a>", [("a", b"<a><b/>x</a>"), ("b", b"<b/>")]),
        (b"<a ><b c = 'd>' ></b ></a >", [("a", b"<a ><b c = 'd>' ></b ></a >"), ("b", b"<b c = 'd>' ></b >")]),
        (
            "\ufeff<?xml version='1.0'?>\r\n<!-- <x/> --><a>µ<![CDATA[<y/>]]><b/></a>\n".encode(),
            [("a", "<a>µ<![CDATA[<y/>]]><b/></a>".encode()), ("b", b"<b/>")],
        ),
        (b'<p:a xmlns:p="urn:p"><b/></p:a>', [("~a", b'<p:a xmlns:p="urn:p"><b/></p:a>'), ("b", b"<b/>")]),
    ],
)
def test_elements_stand_where_they_stand(data: bytes, found: list[tuple[str, bytes]]) -> None:
    assert names(data) == found


@pytest.mark.parametrize(
    "data", [b"", b"<a>", b"<a></b>", b"<!DOCTYPE a><a/>", b"<a>" * 300, b"<a b=1/>", b"<a>\xff</a>", b"<a/><b/>"]
)
def test_what_is_no_xml(data: bytes) -> None:
    with pytest.raises(BrokenXml):
        elements(data)


def test_depth_and_what_is_left_out() -> None:
    data = b"<a><b><c><d/></c></b><e><f/></e><g><h/></g></a>"
    root = elements(data, deepest=2, leaving_out=("e",))
    shown = [(child.name, [each.name for each in child.children]) for child in root.children]
    assert shown == [("b", ["c"]), ("e", []), ("g", ["h"])]
    assert data[root.children[1].start : root.children[1].end] == b"<e><f/></e>"
    assert root.children[0].children[0].children == []


@pytest.mark.parametrize(
    "data",
    [
        "<?xml version='1.0' encoding='UTF-16'?><a>µΩ</a>".encode("utf-16"),
        "<?xml version='1.0' encoding='UTF-16'?><a>µΩ</a>".encode("utf-16-be"),
        "<?xml version='1.0' encoding='UTF-16'?><a>µΩ</a>".encode("utf-16-le"),
        "<a>µΩ</a>".encode("utf-16"),
        "<?xml version='1.0' encoding='windows-1253'?><a>µΩ</a>".encode("cp1253"),
    ],
)
def test_other_encodings_become_utf_8(data: bytes) -> None:
    made = in_utf8(data)
    root = elements(made)
    assert made[root.inside : root.close].decode() == "µΩ"


@pytest.mark.parametrize("data", [b"<a/>", b"\xef\xbb\xbf<a/>", b"<?xml version='1.0' encoding='utf-8'?><a/>"])
def test_utf_8_stays_as_it_is(data: bytes) -> None:
    assert in_utf8(data) is data


def test_an_unknown_encoding_is_said() -> None:
    with pytest.raises(BrokenXml, match="encoding"):
        in_utf8(b"<?xml version='1.0' encoding='no-such'?><a/>")


@pytest.mark.parametrize(
    ("tag", "made"),
    [
        (b"<c/>", b'<c s="5"/>'),
        (b"<c>", b'<c s="5">'),
        (b'<c r="A1" />', b'<c r="A1" s="5"/>'),
        (b'<c s="1"/>', b'<c s="5"/>'),
        (b"<c  s = '1' t=\"s\">", b'<c  s = "5" t="s">'),
        (b'<c x:s="1" ss="2">', b'<c x:s="1" ss="2" s="5">'),
        (b"<c t=\" s='1' \">", b'<c t=" s=\'1\' " s="5">'),
    ],
)
def test_an_attribute_is_set(tag: bytes, made: bytes) -> None:
    assert with_attribute(tag, b"s", b"5") == made


@given(st.text())
def test_any_text_stands_in_xml(text: str) -> None:
    held = text_in_xml(text)
    for data in (b"<a>" + held + b"</a>", b'<a b="' + held.replace(b"\n", b"").replace(b"\t", b"") + b'"/>'):
        elements(data)
