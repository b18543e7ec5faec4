"""The first pages of the file: every loop with its sheet, and every loop that has none."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Mapping, Sequence
from itertools import groupby
from operator import attrgetter
from typing import Final, NamedTuple

from loops.plant import Plant
from loops.sheet.content import NOT_APPLICABLE, loop_service
from loops.sheet.flow import (
    BODY,
    NOTHING,
    PAD_X,
    SMALL,
    STRONG,
    Cell,
    Column,
    Flow,
    Para,
    Table,
    cell,
    set_table,
    shortened,
)
from loops.sheet.layout import (
    BOTTOM,
    FOOT,
    INDEX,
    LEFT,
    RIGHT,
    TOP,
    WIDTH,
    page_foot,
)
from loops.sheet.pack import NoSheet, Sheets
from loops.sheet.shapes import (
    THICK_MM,
    Bounds,
    Box,
    Page,
    Shape,
    Text,
    Use,
    style,
)

TITLE: Final = "Loop sheets"
TITLED: Final = style(16.0, bold=True)
PLANT: Final = style(11.0)


class Entry(NamedTuple):
    """One line of the index: a loop and the anchor of its sheet; of the first loop of an area the area's, too."""

    anchor: str
    area_anchor: str | None
    area: str
    loop: str
    service: str | None
    signals: str
    notes: int | None


class Outline(NamedTuple):
    """One line of the file's bookmarks: its depth, its text and the anchor that it leads to."""

    level: int
    title: str
    anchor: str


def entries_of(sheets: Sheets, notes: Mapping[str, Sequence[str]] | None) -> list[Entry]:
    """Return a line for each sheet, in the order of the file."""
    entries: list[Entry] = []
    area: str | None = None
    for number, loop in enumerate(sheets.drawn):
        kinds = Counter(circuit.kind or "?" for circuit in loop.circuits)
        signals = ", ".join(f"{count} {kind}" if count > 1 else kind for kind, count in kinds.items())
        found = None if notes is None else len(notes.get(loop.name, ()))
        area_anchor = None if loop.area == area else f"area-{number}"
        area = loop.area
        entries.append(Entry(f"sheet-{number}", area_anchor, area, loop.name, loop_service(loop), signals, found))
    return entries


def outline_of(entries: Sequence[Entry]) -> list[Outline]:
    """Return the bookmarks: the index, each area, and in it its loops."""
    lines = [Outline(0, "Index", INDEX)]
    for entry in entries:
        if entry.area_anchor is not None:
            lines.append(Outline(0, entry.area, entry.area_anchor))
        lines.append(Outline(1, entry.loop, entry.anchor))
    return lines


_COLUMNS: Final = (
    Column("Loop", 36.0),
    Column("Service", 98.0),
    Column("Signals", 24.0),
    Column("Notes", 14.0, "right"),
    Column("Page", 13.0, "right"),
)
_LEFT_OUT: Final = (
    Column("Loop", 36.0),
    Column("Instruments", 64.0),
    Column("Service", 53.0),
    Column("Why it has no sheet", 32.0),
)
_ROW_MM: Final = 4.4


def lay_index(
    plant: Plant,
    sheets: Sheets,
    entries: Sequence[Entry],
    source: str,
    *,
    emit: Callable[[Page], None],
    pages: Mapping[str, int] | None = None,
    count: int | None = None,
) -> None:
    """Lay the index out.

    Parameters
    ----------
    plant, sheets, entries, source
        The plant, its loops, a line for each sheet, and the names of the lists.
    emit
        Takes each page in turn.
    pages
        The page of each anchor; None while they are not known: the rest stays where it is.
    count
        The number of pages of the sheets, likewise.
    """
    number = 0

    def done(shapes: list[Shape]) -> None:
        nonlocal number
        number += 1
        foot = page_foot(f"page {number}", source, link=False)
        emit(Page((*shapes, Use(FOOT), *foot), (INDEX,) if number == 1 else ()))

    flow = Flow(left=LEFT, width=WIDTH, bottom=BOTTOM, first_top=TOP, next_top=TOP, done=done)
    _head(plant, sheets, entries, flow, count)
    if not entries:
        none = (cell("No loop of this plant has an electrical signal."),)
        flow.add(set_table(Table(title="Sheets", columns=(Column("", WIDTH),), rows=(none,))))
    for area, of_area in groupby(entries, key=attrgetter("area")):
        few = list(of_area)
        rows = [_row(entry, None if pages is None else pages.get(entry.anchor)) for entry in few]
        links = [entry.anchor for entry in few]
        table = Table(title=area, columns=_COLUMNS, rows=rows, links=links, row_mm=_ROW_MM)
        flow.add(set_table(table), together_mm=30.0)
    if sheets.left_out:
        rows = [_left_out(each) for each in sheets.left_out]
        title = f"Loops without an electrical signal: no sheet ({len(rows)})"
        flow.add(set_table(Table(title=title, columns=_LEFT_OUT, rows=rows, row_mm=_ROW_MM)))
    done(flow.page)


def _head(plant: Plant, sheets: Sheets, entries: Sequence[Entry], flow: Flow, count: int | None) -> None:
    out = flow.page
    top = flow.y
    inner = Bounds(LEFT + 2.0, top, RIGHT - 2.0, top + 23.5)
    y = top + 2.5
    out.append(Text(inner.left, y + TITLED.ascent_mm, TITLE, TITLED, inner))
    y += TITLED.pitch_mm + 0.5
    name = shortened(plant.data.name or "plant not named", PLANT, inner.right - inner.left)[0][0]
    out.append(Text(inner.left, y + PLANT.ascent_mm, name, PLANT, inner))
    y += PLANT.pitch_mm + 1.5
    circuits = sum(len(loop.circuits) for loop in sheets.drawn)
    on = f" on {count} pages" if count is not None else ""
    audited = any(entry.notes is not None for entry in entries)
    lines = [
        f"{_count(len(entries), 'loop')} with a sheet{on}, {_count(circuits, 'circuit')}; "
        f"{_count(len(sheets.left_out), 'loop')} without an electrical signal and so without a sheet",
        "Sheets stand by area, then by loop. Notes: what the audit says on the sheet."
        if audited
        else "Sheets stand by area, then by loop. Drawn without an audit: the sheets show no findings.",
    ]
    for text in lines:
        shown = shortened(text, BODY, inner.right - inner.left)[0][0]
        out.append(Text(inner.left, y + BODY.ascent_mm, shown, BODY, inner))
        y += BODY.pitch_mm
    out.append(Box(LEFT, top, RIGHT, top + 23.5, THICK_MM))
    flow.took(23.5)
    flow.skip(3.0)


def _count(number: int, what: str) -> str:
    return f"{number} {what}" if number == 1 else f"{number} {what}s"


_LONGEST: Final = 3
"""Lines that a name or a service may take in the index; the sheet has the whole."""


def _row(entry: Entry, page: int | None) -> tuple[Cell, ...]:
    loop = shortened(entry.loop, STRONG, _COLUMNS[0].width - 2 * PAD_X, _LONGEST)[0]
    service = shortened(entry.service or NOT_APPLICABLE, BODY, _COLUMNS[1].width - 2 * PAD_X, _LONGEST)[0]
    signals = shortened(entry.signals, BODY, _COLUMNS[2].width - 2 * PAD_X, _LONGEST)[0]
    return (
        tuple(Para(line, STRONG) for line in loop),
        tuple(Para(line) for line in service),
        tuple(Para(line) for line in signals),
        cell(str(entry.notes)) if entry.notes else NOTHING,
        NOTHING if page is None else cell(str(page)),
    )


def _left_out(each: NoSheet) -> tuple[Cell, ...]:
    names = ", ".join(
        f"{member.name} ({member.kind.value if member.kind else 'kind not known'})" for member in each.members
    )
    services = dict.fromkeys(member.record.service for member in each.members if member.record.service)
    return (
        cell(each.name, STRONG),
        cell(names, SMALL),
        cell(", ".join(services), SMALL) if services else NOTHING,
        cell(each.why, SMALL),
    )
