"""The copy of a package: parts as they are packed, whatever wrote them."""

import io
import zipfile
from pathlib import Path

import pytest

from instruments.workbook.annotate.package_parts import Changes
from instruments.workbook.package import Package
from tests.instruments.workbook.annotate.shapes import PLAIN, TYPES, made, parsed, raw
from tests.instruments.workbook.packages import RELATIONS


class Unseekable(io.RawIOBase):
    """A stream as a web server writes a workbook into: what a part's length is stands behind it."""

    def __init__(self) -> None:
        self.kept = io.BytesIO()

    def writable(self) -> bool:
        return True

    def write(self, data: bytes) -> int:
        return self.kept.write(data)


def streamed(parts: dict[str, bytes]) -> bytes:
    out = Unseekable()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as package:
        for name, data in parts.items():
            package.writestr(name, data)
    return out.kept.getvalue()


def large(parts: dict[str, bytes]) -> bytes:
    """Written for parts of more than 4 GB, which none is."""
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as package:
        for name, data in parts.items():
            with package.open(name, "w", force_zip64=True) as stream:
                stream.write(data)
    return out.getvalue()


def commented(parts: dict[str, bytes]) -> bytes:
    """With a note and a field of its own at each part."""
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as package:
        for name, data in parts.items():
            entry = zipfile.ZipInfo(name, (2020, 2, 3, 4, 5, 6))
            entry.compress_type = zipfile.ZIP_DEFLATED
            entry.comment = b"note"
            entry.extra = b"\x55\x54\x05\x00\x01\x00\x00\x00\x00"
            package.writestr(entry, data)
    return out.getvalue()


def behind_something(parts: dict[str, bytes]) -> bytes:
    return b"#! not part of it\n" * 50 + streamed(parts)


def named_oddly(parts: dict[str, bytes]) -> bytes:
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w") as package:
        for name, data in parts.items():
            package.writestr(
                zipfile.ZipInfo(name if name.startswith("[") else name.replace("xl/work", "XL\\Work")), data
            )
        package.writestr("docProps/größe µ.xml", "<a/>")
        package.writestr("media/", "")
    return out.getvalue()


@pytest.mark.parametrize("write", [streamed, large, commented, behind_something, named_oddly])
def test_parts_are_copied_as_they_are_packed(write: object, tmp_path: Path) -> None:
    assert callable(write)
    with zipfile.ZipFile(io.BytesIO(made(PLAIN))) as package:
        parts = {name: package.read(name) for name in package.namelist()} | {
            "xl/media/image1.png": bytes(range(256)) * 99
        }
    before, after = tmp_path / "before.xlsx", tmp_path / "after.xlsx"
    before.write_bytes(write(parts))
    with Package(before, file="before.xlsx") as package:
        changes = Changes(package)
        changes.put_bytes("xl/worksheets/sheet1.xml", b"<changed/>")
        changes.put_bytes("xl/new.xml", b"<new/>")
        changes.write(after)
    with zipfile.ZipFile(before) as old, zipfile.ZipFile(after) as new:
        assert new.testzip() is None
        assert new.namelist() == [*old.namelist(), "xl/new.xml"]
        for entry in old.infolist():
            twin = new.getinfo(entry.filename)
            if "sheet1" in entry.filename:
                assert new.read(twin) == b"<changed/>"
                continue
            assert new.read(twin) == old.read(entry)
            assert (twin.compress_size, twin.CRC, twin.date_time, twin.external_attr, twin.comment) == (
                entry.compress_size, entry.CRC, entry.date_time, entry.external_attr, entry.comment,
            )  # fmt: skip
            assert not twin.flag_bits & 0x08


def test_relations_and_types_are_added_to(tmp_path: Path) -> None:
    path, after = tmp_path / "list.xlsx", tmp_path / "after.xlsx"
    path.write_bytes(made(PLAIN))
    with Package(path, file="list.xlsx") as package:
        changes = Changes(package)
        names = [
            changes.refer("xl/worksheets/sheet1.xml", "comments", f"xl/comments{number}.xml", spaces="urn:kinds")
            for number in (1, 2)
        ]
        assert changes.refer("xl/workbook.xml", "styles", "xl/styles.xml", spaces="urn:kinds") == "ferrule1"
        assert changes.free_name("xl/worksheets/sheet{}.xml") == "xl/worksheets/sheet2.xml"
        changes.declare("xl/comments1.xml", "application/comments")
        changes.declare_ending("vml", "application/boxes")
        changes.declare_ending("xml", "application/never")
        changes.write(after)
    assert names == ["ferrule1", "ferrule2"]
    with zipfile.ZipFile(after) as package:
        relations = parsed(package.read("xl/worksheets/_rels/sheet1.xml.rels"))
        assert {each.tag for each in relations} == {f"{{{RELATIONS}}}Relationship"}
        assert [dict(each.attrib) for each in relations] == [
            {"Id": f"ferrule{number}", "Type": "urn:kinds/comments", "Target": f"../comments{number}.xml"}
            for number in (1, 2)
        ]
        types = {next(iter(each.attrib.values())): each for each in parsed(package.read("[Content_Types].xml"))}
        assert types["vml"].get("ContentType") == "application/boxes"
        assert types["xml"].get("ContentType") == "application/xml"
        assert types["/xl/comments1.xml"].tag == f"{{{TYPES}}}Override"
        assert list(raw(after))[-1] == "xl/worksheets/_rels/sheet1.xml.rels"
