"""Threads of comments, as newer spreadsheets have them: a reply to a thread, so that what is added is seen there."""

from __future__ import annotations

import uuid
from collections.abc import Mapping
from typing import Final

from instruments.workbook.annotate.splice import Edit, Element, elements, spliced, text_in_xml
from instruments.workbook.plain import BrokenXml
from instruments.workbook.sheet import cell_address, cell_position

__all__ = ["with_person", "with_replies"]

# Any fixed name will do: the same comment of the same person has the same id in every copy.
_SPACE: Final = uuid.UUID("7c0f1a2e-5d0b-4c1e-9a57-3f6c0c2b9d41")

Place = tuple[int, int]


def _id_of(*what: str) -> str:
    return f"{{{str(uuid.uuid5(_SPACE, ' '.join(what))).upper()}}}"


def with_person(data: bytes, name: str) -> tuple[bytes, str]:
    """Return the part of persons with one of this name, and the person's id.

    Raises
    ------
    BrokenXml
        It cannot be read.
    """
    root = elements(data, deepest=1)
    if root.name.lstrip("~") != "personList":
        raise BrokenXml("is no list of persons")
    known = _id_of("person", name)
    for child in root.children:
        if child.attributes.get("id", "").upper() == known:
            return data, known
    made = b'<%bperson displayName="%b" id="%b" userId="%b" providerId="None"/>' % (
        root.prefix, text_in_xml(name), known.encode(), text_in_xml(name),
    )  # fmt: skip
    return b"".join(spliced([data], [root.appended(data, made)])), known


def with_replies(data: bytes, texts: Mapping[Place, str], person: str) -> bytes:
    """Return a part of threads with this person's reply to the thread of each of these cells that has one.

    A reply bears the time of the one before it: the same list gives the same copy at any time of day.

    Raises
    ------
    BrokenXml
        It cannot be read.
    """
    root = elements(data)
    threads: dict[Place, list[Element]] = {}
    for child in root.children:
        place = cell_position(child.attributes.get("ref", ""))
        if child.name.lstrip("~") == "threadedComment" and place is not None:
            threads.setdefault(place, []).append(child)
    edits: list[Edit] = []
    for place, text in texts.items():
        thread = threads.get(place)
        if not thread:
            continue
        first, last = thread[0], thread[-1]
        own = next((one for one in thread if one.attributes.get("personId", "").upper() == person.upper()), None)
        if own is not None:
            # From an earlier copy: its text gives way.
            held = own.children[0] if own.children else None
            if held is not None and not held.closes_itself:
                edits.append(Edit(held.inside, held.close, text_in_xml(text)))
            continue
        time = f' dT="{last.attributes["dT"]}"' if "dT" in last.attributes else ""
        address = cell_address(*place)
        parent = first.attributes.get("parentId") or first.attributes.get("id", "")
        reply = _id_of("reply", parent, address, text)
        tag = f'ref="{address}"{time} personId="{person}" id="{reply}" parentId="{parent}"'
        made = b"<%bthreadedComment %b><%btext>%b</%btext></%bthreadedComment>" % (
            root.prefix, tag.encode(), root.prefix, text_in_xml(text), root.prefix, root.prefix,
        )  # fmt: skip
        edits.append(Edit(last.end, last.end, made))
    return b"".join(spliced([data], edits))
