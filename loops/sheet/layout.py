"""A loop's sheet on its pages: from content to shapes in millimetres."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Mapping, Sequence
from functools import lru_cache
from typing import Final

from instruments.quantity import format_number
from instruments.signal import RANGE_RESISTOR_OHM
from loops.power import HIGH_ALARM_MA, LOW_FAILURE_MA
from loops.sheet.check_record import ToTry
from loops.sheet.check_table import TERMINALS_C, CheckPoint, CheckTable
from loops.sheet.content import (
    NOT_APPLICABLE,
    SETTINGS,
    CircuitContent,
    DeviceLine,
    Field,
    Power,
    SettingLine,
    SettingValue,
    SheetContent,
)
from loops.sheet.drawing import bands_of
from loops.sheet.entity_table import EntityTable, SystemDocument
from loops.sheet.flow import (
    BODY,
    GAP_MM,
    HEAD,
    LABEL,
    NOTHING,
    PAD_X,
    ROW_MM,
    SMALL,
    STRONG,
    TITLE_MM,
    TO_WRITE,
    WRITE,
    Cell,
    Column,
    Flow,
    Para,
    SetTable,
    Table,
    cell,
    set_table,
    shortened,
    title_bar,
    width_mm,
)
from loops.sheet.font import printable
from loops.sheet.shapes import (
    GREY,
    HAIR_MM,
    RULE,
    THICK_MM,
    THIN_MM,
    Bounds,
    Box,
    Line,
    Link,
    Page,
    Shape,
    Style,
    Text,
    Use,
    share,
    style,
)
from loops.sheet.span_scale import draw_scale

PAGE_WIDTH: Final = 210.0
PAGE_HEIGHT: Final = 297.0
LEFT: Final = 17.0
"""Room for the holes of a binder."""
RIGHT: Final = 202.0
WIDTH: Final = RIGHT - LEFT
TOP: Final = 9.0
FIRST_TOP: Final = 40.5
NEXT_TOP: Final = 22.0
BOTTOM: Final = 279.0
FOOT_BOTTOM: Final = 290.0

INDEX: Final = "index"
"""The anchor of the first page of the index."""

CAUTION: Final = (
    "Screening aid - requires review by a competent person. A blank is never a pass. UNCONTROLLED WHEN PRINTED."
)
LEGEND: Final = (
    "Dotted line: not given in the list, to be filled in.   \u2013 not applicable.   * assumed or derived, not given."
)

NAME: Final = style(15.0, bold=True)
NAME_SMALL: Final = style(11.0, bold=True)
SERVICE: Final = style(9.5)
NUMBER: Final = style(9.5, bold=True)


# --------------------------------------------------------------------------------------------------------
# The title block


class _Place:
    """One cell of the title block: where it stands and how many lines it holds."""

    __slots__ = ("box", "label", "lines", "style")

    def __init__(self, label: str, box: Bounds, style: Style, lines: int) -> None:
        self.label = label
        self.box = box
        self.style = style
        self.lines = lines


def _places() -> Mapping[str, _Place]:
    rows = (TOP, TOP + 10.9, TOP + 20.2, TOP + 29.5)
    made: dict[str, _Place] = {}

    def row(number: int, cells: Sequence[tuple[str, str, float, Style, int]]) -> None:
        x = LEFT
        for key, label, width, look, lines in cells:
            made[key] = _Place(label, Bounds(x, rows[number], x + width, rows[number + 1]), look, lines)
            x += width

    row(
        0,
        (
            ("loop", "Loop", 52.0, NAME, 1),
            ("service", "Service", 97.0, SERVICE, 2),
            ("number", "Sheet", 36.0, NUMBER, 1),
        ),
    )
    row(
        1,
        (
            ("area", "Area", 52.0, BODY, 2),
            ("classification", "Area classification as listed", 61.0, BODY, 2),
            ("unit", "Unit", 36.0, BODY, 2),
            ("plant", "Plant", 36.0, BODY, 2),
        ),
    )
    row(
        2,
        (
            ("pid", "P&ID", 52.0, BODY, 2),
            ("line", "Line", 61.0, BODY, 2),
            ("equipment", "Equipment", 36.0, BODY, 2),
            ("drawing", "Loop drawing", 36.0, BODY, 2),
        ),
    )
    return made


_PLACES: Final = _places()
_NEXT: Final = {
    "loop": _Place("Loop", Bounds(LEFT, TOP, LEFT + 52.0, TOP + 10.9), NAME_SMALL, 1),
    "service": _Place("Service", Bounds(LEFT + 52.0, TOP, LEFT + 149.0, TOP + 10.9), SERVICE, 2),
    "number": _Place("Sheet", Bounds(LEFT + 149.0, TOP, RIGHT, TOP + 10.9), NUMBER, 1),
}
_UNDER_LABEL: Final = 0.3 + LABEL.pitch_mm


def _frame(places: Mapping[str, _Place]) -> list[Shape]:
    """Draw the lines and the labels of a title block."""
    shapes: list[Shape] = []
    bottom = max(place.box.bottom for place in places.values())
    for place in places.values():
        box = place.box
        inner = Bounds(box.left + PAD_X, box.top, box.right - PAD_X, box.bottom)
        shapes.append(Text(inner.left, box.top + 0.4 + LABEL.ascent_mm, place.label, LABEL, inner))
        if box.right < RIGHT - HAIR_MM:
            shapes.append(Line(box.right, box.top, box.right, box.bottom, HAIR_MM, RULE))
        if box.bottom < bottom - HAIR_MM:
            shapes.append(Line(box.left, box.bottom, box.right, box.bottom, HAIR_MM, RULE))
    shapes.append(Box(LEFT, TOP, RIGHT, bottom, THICK_MM))
    return shapes


def _fill(place: _Place, text: str | None, out: list[Shape]) -> bool:
    """Write a value into its place; say whether it had to be cut short."""
    box = place.box
    inner = Bounds(box.left + PAD_X, box.top, box.right - PAD_X, box.bottom)
    if text is None:
        y = box.bottom - 1.6
        out.append(Line(inner.left, y, inner.right, y, THIN_MM, GREY, True))
        return False
    text = printable(text)
    look, most = place.style, place.lines
    if look is NAME and width_mm(text, look) > inner.right - inner.left:
        look = NAME_SMALL
    if look is NAME_SMALL and width_mm(text, look) > inner.right - inner.left:
        look, most = STRONG, 2
    lines, cut = shortened(text, look, inner.right - inner.left, most)
    y = box.top + _UNDER_LABEL + 0.2
    if len(lines) == 1:
        # One line stands in the middle of what the label leaves.
        y += max(0.0, (box.bottom - y - look.pitch_mm) / 2.0 - 0.3)
    for line in lines:
        out.append(Text(inner.left, y + look.ascent_mm, line, look, inner))
        y += look.pitch_mm
    return cut


def _foot() -> list[Shape]:
    box = Bounds(LEFT, BOTTOM + 1.0, RIGHT - 34.0, FOOT_BOTTOM)
    y = BOTTOM + 1.6
    shapes: list[Shape] = [Line(LEFT, BOTTOM + 1.0, RIGHT, BOTTOM + 1.0, THIN_MM)]
    for text, look in ((CAUTION, HEAD), (LEGEND, LABEL)):
        shapes.append(Text(LEFT, y + look.ascent_mm, text, look, box))
        y += look.pitch_mm
    return shapes


# --------------------------------------------------------------------------------------------------------
# Signing

SIGN_MM: Final = 32.5
_ROLES: Final = ("Checked by", "Witnessed by", "Accepted by")
_SIGN_COLUMNS: Final = (("", 27.0), ("Name", 48.0), ("Company", 38.0), ("Signature", 44.0), ("Date", 28.0))


def _sign() -> list[Shape]:
    """Draw the lines to sign on, from 0 mm downwards."""
    shapes = title_bar("Loop check", LEFT, 0.0, WIDTH)
    y = TITLE_MM
    box = Bounds(LEFT, y, RIGHT, y + 5.6)
    base = y + 3.9
    x = LEFT + PAD_X
    for text in ("passed", "passed with punch items", "failed", "restored to service"):
        shapes.append(Box(x, base - 2.5, x + 2.7, base + 0.2))
        x += 3.9
        shapes.append(Text(x, base, text, BODY, box))
        x += width_mm(text, BODY) + 5.0
    shapes.append(Text(x, base, "Punch items", LABEL, box))
    shapes.append(Line(x + width_mm("Punch items", LABEL) + 1.0, base + 0.4, RIGHT - PAD_X, base + 0.4, HAIR_MM))
    y += 5.6
    box = Bounds(LEFT, y, RIGHT, y + 4.8)
    base = y + 3.4
    for x, ends, text in (
        (LEFT + PAD_X, LEFT + 120.0, "Test equipment, number"),
        (LEFT + 123.0, RIGHT - PAD_X, "Calibration due"),
    ):
        shapes.append(Text(x, base, text, LABEL, box))
        shapes.append(Line(x + width_mm(text, LABEL) + 1.0, base + 0.4, ends, base + 0.4, HAIR_MM))
    y += 4.8
    shapes.append(Line(LEFT, y, RIGHT, y, THIN_MM))
    x = LEFT
    top = y
    for text, width in _SIGN_COLUMNS:
        if text:
            inner = Bounds(x + PAD_X, top, x + width - PAD_X, top + 2.9)
            shapes.append(Text(inner.left, top + 0.4 + LABEL.ascent_mm, text, LABEL, inner))
        x += width
        if x < RIGHT - HAIR_MM:
            shapes.append(Line(x, top, x, SIGN_MM, HAIR_MM, RULE))
    y = top + 2.9
    height = (SIGN_MM - y) / len(_ROLES)
    for number, role in enumerate(_ROLES):
        if number:
            shapes.append(Line(LEFT, y, RIGHT, y, HAIR_MM, RULE))
        inner = Bounds(LEFT + PAD_X, y, LEFT + _SIGN_COLUMNS[0][1] - PAD_X, y + height)
        shapes.append(Text(inner.left, y + (height + BODY.ascent_mm - BODY.descent_mm) / 2.0, role, BODY, inner))
        y += height
    shapes.append(Box(LEFT, 0.0, RIGHT, SIGN_MM))
    return shapes


# --------------------------------------------------------------------------------------------------------
# Tables

_DEVICES: Final = (
    Column("Tag", 26.0),
    Column("Kind", 33.0),
    Column("Type, maker and model, Ex marking", 53.0),
    Column("Range", 25.0),
    Column("Range in system", 25.0),
    Column("Location", 23.0),
)
_SETTINGS: Final = (
    Column("Tag", 26.0),
    *(Column("Trip" if title == "trip" else title, 28.0, "centre") for title, _ in SETTINGS),
    Column("Trip direction", 19.0),
)
_CONDUCTORS: Final = (
    Column("From", 25.0),
    Column("Terminal", 20.0),
    Column("To", 25.0),
    Column("Terminal", 24.0),
    Column("Cable", 24.0),
    Column("Pair", 9.0),
    Column("Core", 9.0),
    Column("Colour", 14.0),
    Column("Wire mark", 20.0),
    Column("Screen\nearthed at", 15.0),
)
_NOTES: Final = (Column("", WIDTH),)
_NAMED: Final = (Column("", 26.0), Column("", WIDTH - 26.0))
_TRIES: Final = (
    Column("Device", 26.0),
    Column("Tried", 32.0),
    Column("Brought about", 36.0),
    Column("Expected", 33.0),
    Column("acts at", 15.0, "centre"),
    Column("resets at", 15.0, "centre"),
    Column("tolerance", 14.0, "centre"),
    Column("as\nexpected", 14.0, "centre"),
)
_GRID: Final = (Column("", WIDTH / 6.0),) * 6
_ENTITY: Final = (
    Column("Compared", 40.0),
    Column("Device", 34.0),
    Column("Found", 34.0, "right"),
    Column("Allowed", 34.0, "right"),
    Column("Outcome", 43.0),
)
_SYSTEM_PARTS: Final = (
    Column("Part", 30.0),
    Column("What it is", 32.0),
    Column("Marking: group, temperature class, ambient, EPL", 70.0),
    Column("Certificate", 43.0),
    Column("Level", 10.0, "centre"),
)
_SYSTEM_ITEMS: Final = (Column("", 40.0), Column("", WIDTH - 40.0))
_TITLES: Final = {
    "devices": ("Devices", _DEVICES),
    "settings": ("Settings: value, percent of span, current", _SETTINGS),
    "conductors": ("Terminations", _CONDUCTORS),
    "changed": ("Changed", _NOTES),
    "findings": ("Open findings and reviews", _NOTES),
    "assumed": ("Assumed or derived, not given *", _NOTES),
    "remarks": ("Remarks in the list", _NAMED),
    "tries": ("Function check", _TRIES),
    "in full": ("Title block in full", _NAMED),
}


FIRST: Final = share("sheet", lambda: _frame(_PLACES))
NEXT: Final = share("sheet, next", lambda: _frame(_NEXT))
FOOT: Final = share("foot", _foot)
SIGN: Final = share("sign", _sign)


def _named(name: str, rows: Sequence[Sequence[Cell]], *, tight: bool, row_mm: float = ROW_MM) -> SetTable:
    title, columns = _TITLES[name]
    return set_table(Table(title=title, columns=columns, rows=rows, shared=True, row_mm=row_mm, tight=tight))


def _devices(lines: Iterable[DeviceLine], tight: bool) -> SetTable:
    rows: list[tuple[Cell, ...]] = []
    for line in lines:
        kind = cell(line.kind)
        if line.service:
            kind = (*kind, Para(line.service, SMALL))
        make: Cell = cell(line.type_code)
        if line.maker:
            make = (*(make if line.type_code else NOTHING), Para(line.maker, SMALL))
        if line.marking:
            make = (*make, Para(line.marking, SMALL))
        rows.append(
            (
                cell(line.tag, STRONG),
                kind,
                make,
                cell(line.field_range),
                cell(line.system_range),
                cell(line.location),
            )
        )
    return _named("devices", rows, tight=tight)


def _setting(value: SettingValue | str | None) -> Cell:
    if not isinstance(value, SettingValue):
        return cell(value)
    below = []
    if value.percent is not None:
        below.append(f"{_fixed(value.percent, 1)} %")
    if value.ma is not None:
        below.append(f"{value.ma:.2f} mA")
    shown: Cell = (Para(value.text, STRONG),)
    return (*shown, Para(" = ".join(below), SMALL)) if below else shown


def _settings(lines: Iterable[SettingLine], tight: bool) -> SetTable:
    rows = [
        (cell(line.tag, STRONG), *(_setting(value) for value in line.values), cell(line.direction)) for line in lines
    ]
    return _named("settings", rows, tight=tight)


def _fixed(value: float, places: int) -> str:
    """Return a number to so many places, without a minus before nothing."""
    text = f"{value:.{places}f}"
    return text[1:] if text.startswith("-") and not text.strip("-0.") else text


_DRAWN: Final = frozenset(
    {"I/O address", "Card", "Barrier or isolator", "Junction box", "Terminals", "Cable", "Cable type", "Pair"}
)
"""What the drawing shows; what does not stand there in full stands in the table too."""
_PARTS: Final = re.compile(r"[\s,;:]+")


def _words_of(shapes: Iterable[Shape]) -> Iterable[str]:
    for shape in shapes:
        if isinstance(shape, Text):
            yield from _PARTS.split(shape.text)


def _is_drawn(field: Field, drawn: frozenset[str]) -> bool:
    if field.label not in _DRAWN:
        return False
    return field.value is None or all(word in drawn for word in _PARTS.split(printable(field.value)) if word)


def _grid(circuit: CircuitContent, tight: bool, *, drawn: frozenset[str]) -> SetTable:
    parts = [f"Circuit {circuit.name}", circuit.kind or "kind not given"]
    if circuit.device not in circuit.name:
        parts.append(circuit.device)
    if circuit.service:
        parts.append(circuit.service)
    fields = [field for field in circuit.fields if not (drawn and _is_drawn(field, drawn))]
    rows: list[list[Cell]] = []
    labels: list[str] = []
    for start in range(0, len(fields), len(_GRID)):
        few = fields[start : start + len(_GRID)]
        row: list[Cell] = [(_LABEL_ROOM, Para(field.value) if field.value is not None else _TO_WRITE) for field in few]
        row.extend([NOTHING] * (len(_GRID) - len(row)))
        rows.append(row)
        labels.append(_labels(tuple(field.label for field in few)))
    title = " \u2013 ".join(parts)
    return set_table(Table(title=title, columns=_GRID, rows=rows, under=labels, tight=tight))


_LABEL_ROOM: Final = Para("", LABEL)
_TO_WRITE: Final = Para("", WRITE)


@lru_cache(maxsize=1024)
def _labels(labels: tuple[str, ...]) -> str:
    """Share the labels of a row of the grid; they stand above its values."""

    def make() -> Iterable[Shape]:
        for number, label in enumerate(labels):
            left = LEFT + number * _GRID[0].width
            box = Bounds(left + PAD_X, 0.0, left + _GRID[0].width - PAD_X, LABEL.pitch_mm)
            yield Text(box.left, LABEL.ascent_mm, label, LABEL, box)

    return share(f"labels|{'|'.join(labels)}", make)


def _conductors(circuit: CircuitContent, tight: bool) -> SetTable:
    def given(text: str | None) -> Cell:
        return (Para(text, SMALL),) if text else TO_WRITE

    rows = [
        (
            given(each.from_item),
            given(each.from_terminal),
            given(each.to_item),
            given(each.to_terminal),
            (Para(each.cable, SMALL),) if each.cable else NOTHING,
            (Para(each.pair, SMALL),) if each.pair else NOTHING,
            (Para(each.core, SMALL),) if each.core else NOTHING,
            (Para(each.colour, SMALL),) if each.colour else NOTHING,
            (Para(each.wire_mark, SMALL),) if each.wire_mark else NOTHING,
            (Para(each.screen, SMALL),) if each.screen else NOTHING,
        )
        for each in circuit.conductors
    ]
    return _named("conductors", rows, row_mm=4.3, tight=tight)


def _volts(value: float | None, look: Style = BODY) -> Cell:
    return NOTHING if value is None else (Para(_fixed(value, 3), look),)


_COMMON_MA: Final = (LOW_FAILURE_MA, HIGH_ALARM_MA)


def _power(power: Power, tight: bool) -> SetTable:
    current = format_number(power.current_ma) if power.current_ma is not None else "?"
    both = power.at_terminals_20_v is not None
    columns = (
        Column("2-wire circuit", 43.0 if both else 54.0),
        Column("ohm", 12.0, "right"),
        Column(f"V at\n{current} mA", 14.0, "right"),
        *((Column("V at\n20 mA", 11.0, "right"),) if both else ()),
    )
    if power.current_ma is None:
        columns = (Column("", 80.0),)
    rows: list[tuple[Cell, ...]] = []

    def add(name: str, ohm: Cell, volts: Cell, volts_20: Cell, look: Style = BODY) -> None:
        row = (cell(name, look), ohm, volts, volts_20)
        rows.append(row if both else row[:3])

    if power.current_ma is not None:
        source = _volts(power.source_v) or TO_WRITE
        add(f"{power.source_name}{' *' if power.source_assumed else ''}", NOTHING, source, source)
        for line in power.lines:
            name = f"\u2013 {line.name}{' *' if line.assumed else ''}"
            add(
                name, NOTHING if line.ohm is None else cell(_ohm(line.ohm)), _volts(line.drop_v), _volts(line.drop_20_v)
            )
        at_terminals = _volts(power.at_terminals_v) or TO_WRITE
        add("= at the transmitter", NOTHING, at_terminals, _volts(power.at_terminals_20_v))
        lift_off = _volts(power.lift_off_v) or TO_WRITE
        add("lift-off", NOTHING, lift_off, lift_off)
    if power.margin_v is not None:
        short = power.margin_v < 0.0 or (power.margin_20_v or 0.0) < 0.0
        margins = (_volts(power.margin_v, STRONG), _volts(power.margin_20_v, STRONG))
        add("margin: falls short" if short else "margin", NOTHING, *margins, STRONG)
    foot: list[Para] = []
    if power.missing:
        foot.append(Para(f"Not worked for want of: {', '.join(power.missing)}.", SMALL))
    if power.working:
        foot.append(Para(power.working, SMALL))
    return set_table(
        Table(
            title="Power budget",
            columns=columns,
            rows=rows,
            shared=power.current_ma in _COMMON_MA,
            tight=tight,
            foot=tuple(foot),
        )
    )


def _ohm(value: float) -> str:
    return format_number(round(value, 3))


_CHECK_WIDTH: Final = 103.0
_CHECK_ROW_MM: Final = 5.0


def _check(check: CheckTable, width: float, tight: bool) -> SetTable:
    """Set the check table; what the listed columns leave is for the readings."""
    first = "output %" if check.output else "flow %" if check.law == "square root" else "%"
    columns: list[tuple[Column, Callable[[CheckPoint], Cell]]] = [
        (Column(first.replace(" ", "\n"), 10.0, "right"), lambda point: cell(format_number(point.percent), STRONG))
    ]

    def add(head: str, width: float, value: Callable[[CheckPoint], str | None]) -> None:
        columns.append((Column(head, width, "right"), lambda point: cell(value(point))))

    if not check.output:
        unit = check.input_unit or ""
        add(f"input\n{unit}".rstrip(), 16.0, lambda point: _number(point.input_value))
    if check.sensor_unit:
        if check.sensor_unit == "ohm":
            add("sensor\n\u03a9", 15.0, lambda point: _places_or_none(point.sensor, 2))
        else:
            add("mV at\n0 \u00b0C", 15.0, lambda point: _places_or_none(point.sensor, 3))
            add(f"mV at\n{TERMINALS_C:g} \u00b0C", 15.0, lambda point: _places_or_none(point.sensor_warm, 3))
    if check.current:
        add("\nmA", 11.0, lambda point: _places_or_none(point.ma, 2))
        if check.resistor_ohm is not None:
            star = " *" if check.resistor_assumed else ""
            head = f"V across\n{format_number(check.resistor_ohm)} \u03a9{star}"
            add(head, 14.0, lambda point: _places_or_none(point.range_v, 3))
        add("mV over\n2.5 \u03a9", 13.0, lambda point: _places_or_none(point.test_mv, 2))
    if check.reading_unit is not None:
        add(f"system\n{check.reading_unit}", 15.0, lambda point: _number(point.reading))
    used = sum(column.width for column, _ in columns)
    heads = ("stroke\nup", "stroke\ndown") if check.output else ("read\nup", "read\ndown")
    room = min(28.0, (width - used) / 2.0)
    remarks = width - used - 2.0 * room
    columns.extend((Column(head, room, "centre"), lambda point: NOTHING) for head in heads)
    if remarks > 0.0:
        columns.append((Column("remarks", remarks), lambda point: NOTHING))
    foot = [f"{remark[:1].upper()}{remark[1:]}." for remark in check.remarks]
    if check.sensor:
        foot.insert(0, f"Sensor {check.sensor}.")
    title = "Check table" if check.output else f"Check table, {check.law}"
    return set_table(
        Table(
            title=title,
            columns=tuple(column for column, _ in columns),
            rows=[tuple(made(point) for _, made in columns) for point in check.points],
            shared=check.resistor_ohm in (None, RANGE_RESISTOR_OHM),
            row_mm=_CHECK_ROW_MM,
            tight=tight,
            foot=(Para(" ".join(foot), SMALL),) if foot else (),
        )
    )


def _number(value: float | None) -> str | None:
    return None if value is None else format_number(value)


def _places_or_none(value: float | None, places: int) -> str | None:
    return None if value is None else _fixed(value, places)


# --------------------------------------------------------------------------------------------------------
# The sheet


def sheet_pages(
    content: SheetContent,
    *,
    anchors: tuple[str, ...] = (),
    first_page: int = 1,
    mark: str = "",
    changed: str = "",
) -> list[Page]:
    """Lay a loop's sheet out.

    Parameters
    ----------
    content
        What stands on it.
    anchors
        What links and bookmarks call its first page.
    first_page
        Number of its first page in the file.
    mark
        Its content mark.
    changed
        What of it is not as it was, in words.
    """
    flow = _fill_pages(content, changed, tight=False)
    if len(flow.pages) > 1 and flow.y - NEXT_TOP <= _SPILL_MM:
        tighter = _fill_pages(content, changed, tight=True)
        if len(tighter.pages) < len(flow.pages):
            flow = tighter
    flow.page.append(Use(SIGN, BOTTOM - SIGN_MM))
    return _finished(flow, content, anchors, first_page, mark)


_SPILL_MM: Final = 45.0
"""What a last page may hold, beside the lines to sign on, for it to be worth trying without it."""


def _fill_pages(content: SheetContent, changed: str, *, tight: bool) -> Flow:
    """Fill the pages below the title block; the last has room for the lines to sign on."""
    flow = Flow(left=LEFT, width=WIDTH, bottom=BOTTOM, first_top=FIRST_TOP, next_top=NEXT_TOP)
    if changed:
        flow.add(_named("changed", [(cell(changed, STRONG),)], row_mm=3.9, tight=tight))
    flow.add(_devices(content.devices, tight))
    if content.settings:
        flow.add(_settings(content.settings, tight))
        _scales(content.settings, flow)
    for circuit in content.circuits:
        _circuit(circuit, flow, tight)
    tries = [each for circuit in content.circuits for each in circuit.tries]
    if tries:
        flow.add(_tries(tries, tight))
    cut = _title_block(content, [])
    if cut:
        flow.add(_named("in full", [(cell(label, LABEL), cell(text)) for label, text in cut], tight=tight))
    if content.remarks:
        rows = [(cell(tag, STRONG), cell(text)) for tag, text in content.remarks]
        flow.add(_named("remarks", rows, tight=tight))
    for name, texts in (("findings", _notes(content)), ("assumed", content.assumed)):
        if texts:
            notes = [(cell(text, SMALL),) for text in texts]
            flow.add(_named(name, notes, row_mm=3.9, tight=tight), together_mm=30.0)
    if flow.room < SIGN_MM:
        flow.new_page()
    return flow


def _tries(tries: Iterable[ToTry], tight: bool) -> SetTable:
    not_asked = (Para(NOT_APPLICABLE),)
    rows = [
        (
            cell(each.device, STRONG),
            cell(each.what),
            cell(each.bring_about),
            cell(each.expect),
            *((NOTHING,) * 3 if each.acts else (not_asked,) * 3),
            NOTHING,
        )
        for each in tries
    ]
    return _named("tries", rows, tight=tight)


def _entity(entity: EntityTable, tight: bool) -> SetTable:
    rows = [
        (
            cell(each.what),
            cell(each.device or NOT_APPLICABLE),
            cell(each.found),
            cell(each.allowed),
            cell(each.outcome, BODY if each.outcome.startswith("holds") else STRONG),
        )
        for each in entity.lines
    ]
    foot = [Para(f"{text}.", SMALL) for text in entity.workings]
    if entity.missing:
        foot.append(Para(f"Not worked for want of: {', '.join(entity.missing)}.", SMALL))
    title = f"Entity comparison: {entity.source}"
    return set_table(Table(title=title, columns=_ENTITY, rows=rows, row_mm=4.3, tight=tight, foot=tuple(foot)))


def _system(system: SystemDocument, name: str, flow: Flow, tight: bool) -> None:
    """Set what the standard asks of the document of an Ex i system, and what of it is missing."""
    parts = [
        (cell(each.name, STRONG), cell(each.role), cell(each.marking), cell(each.certificate), cell(each.level))
        for each in system.parts
    ]
    title = f"Descriptive system document: {name}"
    flow.add(set_table(Table(title=title, columns=_SYSTEM_PARTS, rows=parts, row_mm=4.3, tight=tight)))
    rows = [(cell(label, LABEL), cell(text)) for label, text in system.items]
    if system.missing:
        state = f"not complete, missing: {', '.join(system.missing)}"
    else:
        state = "no item is blank; whether the document is complete is for a competent person to say"
    rows.append((cell("State", LABEL), cell(state, STRONG)))
    title = "Items of IEC 60079-25:2020 clause 4"
    flow.add(set_table(Table(title=title, columns=_SYSTEM_ITEMS, rows=rows, shared=True, row_mm=4.3, tight=tight)))


def _scales(lines: Iterable[SettingLine], flow: Flow) -> None:
    drawn = [draw_scale(line.scale, left=LEFT, width=WIDTH) for line in lines if line.scale is not None]
    if not drawn:
        return
    flow.back(GAP_MM)
    for each in drawn:
        flow.draw(each.height, each.shapes)
    flow.skip(GAP_MM)


def _circuit(circuit: CircuitContent, flow: Flow, tight: bool) -> None:
    bands = (
        bands_of(circuit.path, left=LEFT, width=WIDTH, classification=circuit.classification) if circuit.path else []
    )
    grid = _grid(circuit, tight, drawn=frozenset(word for band in bands for word in _words_of(band.shapes)))
    if bands:
        flow.need(grid.height + GAP_MM + bands[0].height)
    flow.add(grid)
    for number, band in enumerate(bands):
        if number == 0:
            flow.back(GAP_MM)
        flow.draw(band.height, band.shapes)
    if bands:
        flow.skip(GAP_MM)
    if circuit.conductors:
        flow.add(_conductors(circuit, tight), together_mm=75.0)
    power = _power(circuit.power, tight) if circuit.power is not None else None
    if circuit.check is not None:
        if power is not None:
            flow.beside(power, _check(circuit.check, _CHECK_WIDTH, tight))
        else:
            flow.add(_check(circuit.check, WIDTH, tight))
    elif power is not None:
        flow.add(power)
    if circuit.entity is not None:
        flow.add(_entity(circuit.entity, tight))
    if circuit.system is not None:
        _system(circuit.system, circuit.name, flow, tight)


def _notes(content: SheetContent) -> tuple[str, ...]:
    if content.notes is None:
        return ("Drawn without an audit: whether there are any is not known.",)
    return content.notes or ("None found.",)


def _title_block(content: SheetContent, out: list[Shape]) -> list[tuple[str, str]]:
    """Fill the title block; return the values that it could not hold in full."""
    cut: list[tuple[str, str]] = []
    for key, place in _PLACES.items():
        if key == "number":
            continue
        text = getattr(content, key)
        if _fill(place, text, out):
            cut.append((place.label, text))
    return cut


def _finished(flow: Flow, content: SheetContent, anchors: tuple[str, ...], first_page: int, mark: str) -> list[Page]:
    pages: list[Page] = []
    title: list[Shape] = []
    _title_block(content, title)
    count = len(flow.pages)
    for number, shapes in enumerate(flow.pages):
        head: list[Shape] = []
        if number == 0:
            head.append(Use(FIRST))
            head.extend(title)
            _fill(_PLACES["number"], f"{number + 1} of {count}", head)
        else:
            head.append(Use(NEXT))
            _fill(_NEXT["loop"], content.loop, head)
            _fill(_NEXT["service"], content.service, head)
            _fill(_NEXT["number"], f"{number + 1} of {count}", head)
        foot = page_foot(f"page {first_page + number}", content.source, link=True, mark=mark)
        pages.append(Page((*head, *shapes, Use(FOOT), *foot), anchors if number == 0 else ()))
    return pages


_FOOT_RIGHT: Final = Bounds(RIGHT - 33.0, BOTTOM + 1.2, RIGHT, FOOT_BOTTOM)


def page_foot(page: str, source: str, *, link: bool, mark: str = "") -> list[Shape]:
    """Return the right end of a page's foot: number and way back; the list it was made from; the content mark."""
    shapes: list[Shape] = []
    base = BOTTOM + 1.6 + HEAD.ascent_mm
    box = _FOOT_RIGHT
    shapes.append(Text(box.right - width_mm(page, HEAD), base, page, HEAD, box))
    if link:
        text = "to the index"
        shapes.append(Text(box.left, base, text, LABEL, box))
        ends = Bounds(box.left, BOTTOM + 1.2, box.left + width_mm(text, LABEL), base + 0.8)
        shapes.append(Link(ends, INDEX))
    y = BOTTOM + 1.6 + HEAD.pitch_mm + LABEL.pitch_mm + LABEL.ascent_mm
    room = WIDTH
    whole = Bounds(LEFT, BOTTOM + 1.2, RIGHT, FOOT_BOTTOM)
    if mark:
        text = f"content mark {mark}"
        room -= width_mm(text, LABEL) + 2.0
        shapes.append(
            Text(RIGHT - width_mm(text, LABEL), y, text, LABEL, Bounds(LEFT, BOTTOM + 1.2, RIGHT, FOOT_BOTTOM))
        )
    made_from = shortened(f"Ferrule, from {source}", LABEL, room)[0][0]
    shapes.append(Text(LEFT, y, made_from, LABEL, whole))
    return shapes
