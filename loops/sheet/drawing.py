"""A circuit drawn: its path from the field on the left to the control system on the right, as shapes in millimetres."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Final, NamedTuple

from instruments.installed import Installed
from instruments.kind import Kind
from loops.sheet.flow import PAD_X, shortened, width_mm
from loops.sheet.font import printable
from loops.sheet.path import Path, Station, Stretch, Symbol, Wire, Zone
from loops.sheet.shapes import (
    GREY,
    HAIR_MM,
    THICK_MM,
    THIN_MM,
    Bounds,
    Box,
    Circle,
    Line,
    Shape,
    Style,
    Text,
    style,
)

NAME: Final = style(6.7, bold=True)
PLAIN: Final = style(6.0)
CAPTION: Final = style(6.0, grey=GREY)
LETTERS: Final = style(7.0, bold=True)

EDGE_MM: Final = 1.6
"""Between the frame of the drawing and what stands in it."""
CAPTION_MM: Final = 3.3
HEAD_MM: Final = 11.6
"""Above the conductors: what a station is called, what a cable is."""
PITCH_MM: Final = 5.4
"""From conductor to conductor: its core and colour stand above it."""
FOOT_MM: Final = 3.4
LEAST_STRETCH_MM: Final = 14.0
LEAST_INTERNAL_MM: Final = 9.0
RADIUS_MM: Final = 5.0
JOINED_MM: Final = 2 * RADIUS_MM + 3.0
FUNCTION_MM: Final = 2 * RADIUS_MM + 4.0
TERMINAL_MM: Final = 3.6
"""Height of a terminal."""
_WIDTHS: Final = {
    Symbol.DEVICE: 22.0,
    Symbol.IN_SERIES: 28.0,
    Symbol.BOX: 18.0,
    Symbol.STRIP: 18.0,
    Symbol.BARRIER: 21.0,
    Symbol.CARD: 19.0,
}
_DEVICE_TERMINAL_MM: Final = 7.0
_SERIES_RADIUS_MM: Final = 3.9
"""Of a device that one conductor goes through: the next passes beneath it."""

CONTINUES: Final = "continues below"
CONTINUED: Final = "continued from above"


class Band(NamedTuple):
    """A drawing of one height, its shapes from 0 mm downwards."""

    height: float
    shapes: tuple[Shape, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class _Part:
    """What of a path one band shows: stations `first` to `last`."""

    first: int
    last: int


def bands_of(path: Path, *, left: float, width: float, classification: str | None = None) -> list[Band]:
    """Draw a path: in one band, or in several where its stations do not stand side by side.

    Parameters
    ----------
    path
        The path.
    left, width
        Of the page, in mm.
    classification
        What the area of the device is, as listed.
    """
    parts = _parts(path, width)
    return [_band(path, part, left, width, classification) for part in parts]


def _room_at_ends(path: Path, first: int, last: int) -> float:
    joined = JOINED_MM if path.joined and first == 0 else 0.0
    functions = FUNCTION_MM if path.functions and last == len(path.stations) - 1 else 0.0
    return joined + functions + 2 * EDGE_MM


def _least(stretch: Stretch) -> float:
    return LEAST_INTERNAL_MM if stretch.internal else LEAST_STRETCH_MM


def _parts(path: Path, width: float) -> list[_Part]:
    """Return which stations stand side by side; the last of a band begins the next."""
    parts: list[_Part] = []
    first = 0
    stations = path.stations
    while True:
        last = first
        used = _WIDTHS[stations[first].symbol]
        while last + 1 < len(stations):
            more = _least(path.stretches[last]) + _WIDTHS[stations[last + 1].symbol]
            if last > first and used + more + _room_at_ends(path, first, last + 1) > width:
                break
            used += more
            last += 1
        parts.append(_Part(first=first, last=last))
        if last == len(stations) - 1:
            return parts
        first = last


def _band(path: Path, part: _Part, left: float, width: float, classification: str | None) -> Band:
    stations = path.stations[part.first : part.last + 1]
    stretches = path.stretches[part.first : part.last]
    lanes = max(1, path.conductors)
    frame_top = CAPTION_MM
    lanes_top = frame_top + HEAD_MM
    lanes_bottom = lanes_top + lanes * PITCH_MM
    frame_bottom = lanes_bottom + 1.0
    height = frame_bottom + FOOT_MM
    shapes: list[Shape] = [Box(left, 0.0, left + width, height)]
    middle = (lanes_top + lanes_bottom) / 2.0

    # Where each station stands.
    spare = width - _room_at_ends(path, part.first, part.last) - sum(_WIDTHS[each.symbol] for each in stations)
    gaps = _gaps(stretches, spare)
    x = left + EDGE_MM + (JOINED_MM if path.joined and part.first == 0 else 0.0)
    places: list[Bounds] = []
    for number, station in enumerate(stations):
        places.append(Bounds(x, frame_top, x + _WIDTHS[station.symbol], frame_bottom))
        x = places[-1].right + (gaps[number] if number < len(gaps) else 0.0)

    shapes.extend(_captions(path, part, stations, places, left, width))
    for number, (station, place) in enumerate(zip(stations, places, strict=True)):
        before = path.stretches[part.first + number - 1] if part.first + number > 0 else None
        behind = path.stretches[part.first + number] if part.first + number < len(path.stretches) else None
        shapes.extend(_station(station, place, before, behind, lanes_top, lanes, path))
    for number, stretch in enumerate(stretches):
        boundary = path.boundary == part.first + number
        room = Bounds(places[number].right, frame_top, places[number + 1].left, frame_bottom)
        shapes.extend(_stretch(stretch, room, lanes_top, boundary=boundary))
        if boundary:
            shapes.extend(_boundary(room, height, left, width, classification))
    if path.joined and part.first == 0:
        shapes.extend(_joined(path.joined, left + EDGE_MM, places[0].left, frame_top, frame_bottom, middle))
    if path.functions and part.last == len(path.stations) - 1:
        shapes.extend(_functions(path.functions, places[-1].right, frame_top, frame_bottom))
    earthed = next((stretch.screen_earthed_at for stretch in stretches if stretch.screen_earthed_at), None)
    if earthed and (path.boundary is None or not part.first <= path.boundary < part.last):
        text = f"screen earthed at {earthed}"
        box = Bounds(left + EDGE_MM, frame_bottom, left + width - EDGE_MM, height)
        shapes.append(_line_of(text, box, frame_bottom + 0.5, PLAIN))
    return Band(height, tuple(shapes))


def _gaps(stretches: Sequence[Stretch], spare: float) -> list[float]:
    """Return the widths of the stretches: what each needs, and for each cable an equal part of what is left."""
    gaps = [_least(stretch) for stretch in stretches]
    wider = [number for number, stretch in enumerate(stretches) if not stretch.internal] or list(range(len(gaps)))
    for number in wider:
        gaps[number] += max(0.0, spare - sum(map(_least, stretches))) / len(wider)
    return gaps


# --------------------------------------------------------------------------------------------------------
# Texts


def _line_of(text: str, box: Bounds, top: float, look: Style, align: str = "left") -> Text:
    shown = shortened(text, look, box.right - box.left)[0][0]
    spare = box.right - box.left - width_mm(shown, look)
    shift = {"left": 0.0, "centre": spare / 2.0, "right": spare}[align]
    return Text(box.left + shift, top + look.ascent_mm, shown, look, box)


def _lines_of(texts: Iterable[tuple[str, Style, int]], box: Bounds, top: float, align: str) -> Iterable[Shape]:
    """Yield texts one below the other, each in at most so many lines, as far as the box goes."""
    y = top
    for text, look, most in texts:
        for line in shortened(printable(text), look, box.right - box.left, most)[0]:
            if y + look.pitch_mm > box.bottom + 0.01:
                return
            yield _line_of(line, box, y, look, align)
            y += look.pitch_mm


def _to_write(left: float, right: float, y: float) -> Line:
    return Line(left, y, right, y, THIN_MM, GREY, True)


def _captions(
    path: Path, part: _Part, stations: Sequence[Station], places: Sequence[Bounds], left: float, width: float
) -> Iterable[Shape]:
    """Yield the zones above the stations, and where the path goes on."""
    ends = left + width - EDGE_MM
    starts: list[tuple[float, str]] = []
    zone: Zone | None = None
    for station, place in zip(stations, places, strict=True):
        if station.zone is not zone:
            zone = station.zone
            starts.append((place.left, zone.value))
    if path.joined and part.first == 0:
        starts[0] = (left + EDGE_MM, starts[0][1])
    if part.first > 0:
        starts[0] = (starts[0][0], f"{starts[0][1]}, {CONTINUED}")
    goes_on = part.last < len(path.stations) - 1
    if goes_on:
        ends -= width_mm(CONTINUES, CAPTION) + 2.0
        box = Bounds(ends + 1.0, 0.0, left + width - EDGE_MM, CAPTION_MM)
        yield _line_of(CONTINUES, box, 0.4, CAPTION, "right")
    for number, (x, text) in enumerate(starts):
        right = starts[number + 1][0] - 1.0 if number + 1 < len(starts) else ends
        if right - x > 4.0:
            yield _line_of(text, Bounds(x, 0.0, right, CAPTION_MM), 0.4, CAPTION)


# --------------------------------------------------------------------------------------------------------
# Stations


def _station(
    station: Station,
    place: Bounds,
    before: Stretch | None,
    behind: Stretch | None,
    lanes_top: float,
    lanes: int,
    path: Path,
) -> Iterable[Shape]:
    heavy = THICK_MM if station.symbol in (Symbol.BARRIER, Symbol.CARD) else THIN_MM
    yield Box(place.left, place.top, place.right, place.bottom, heavy)
    head_ends = lanes_top - 1.4 if station.symbol is Symbol.IN_SERIES else lanes_top
    inner = Bounds(place.left + PAD_X, place.top, place.right - PAD_X, head_ends)
    if station.name is None:
        yield _line_of(station.symbol.value, inner, place.top + 0.6, CAPTION, "centre")
        yield _to_write(inner.left, inner.right, place.top + 6.0)
        rest = Bounds(inner.left, place.top + 6.4, inner.right, lanes_top)
        yield from _lines_of(((text, PLAIN, 1) for text in station.lines), rest, rest.top, "centre")
    else:
        said = [(station.name, NAME, 2), *((text, PLAIN, 1) for text in _said_at(station, path))]
        yield from _lines_of(said, inner, place.top + 0.6, "centre")
    if station.symbol in (Symbol.DEVICE, Symbol.IN_SERIES) and station.device is not None:
        yield from _device(station, place, before, behind, lanes_top, lanes)
        return
    for lane in range(lanes):
        one = before.wires[lane] if before is not None and lane < len(before.wires) else None
        other = behind.wires[lane] if behind is not None and lane < len(behind.wires) else None
        yield from _terminal(station, place, one, other, lanes_top + (lane + 0.5) * PITCH_MM)


def _said_at(station: Station, path: Path) -> Iterable[str]:
    if station.device is not None:
        kind = station.device.kind
        in_series = station.symbol is Symbol.IN_SERIES
        code = None if in_series else station.device.record.device_type
        if path.supply and station.symbol is Symbol.DEVICE:
            yield f"supply {path.supply}"
        yield from (text for text in (kind.value if kind else None, code) if text)
        if in_series and kind is Kind.INDICATOR:
            diode = station.device.type.bypass_diode if station.device.type is not None else None
            yield {True: "diode across it", False: "no diode", None: "diode: not given"}[diode]
    yield from station.lines


def _terminal(station: Station, place: Bounds, one: Wire | None, other: Wire | None, y: float) -> Iterable[Shape]:
    """Yield a conductor's terminals at a station: one where it goes in and out at the same."""
    comes = one is not None and not one.ends_at
    if not comes and other is None:
        return
    into = one.right if one is not None else None
    out_of = other.left if other is not None else None
    margin = 1.8
    if station.symbol is Symbol.CARD:
        yield from _box(place.left + margin, place.left + margin + 9.0, into, y)
        yield Line(place.left, y, place.left + margin, y, THIN_MM)
        return
    sides = station.symbol is Symbol.BARRIER or (into is not None and out_of is not None and into != out_of)
    if not sides:
        yield from _box(place.left + margin, place.right - margin, into if into is not None else out_of, y)
        if comes:
            yield Line(place.left, y, place.left + margin, y, THIN_MM)
        if other is not None:
            yield Line(place.right - margin, y, place.right, y, THIN_MM)
        return
    half = (place.right - place.left - 2 * margin - 1.2) / 2.0
    if comes:
        yield from _box(place.left + margin, place.left + margin + half, into, y)
        yield Line(place.left, y, place.left + margin, y, THIN_MM)
    if other is not None:
        yield from _box(place.right - margin - half, place.right - margin, out_of, y)
        yield Line(place.right - margin, y, place.right, y, THIN_MM)


def _box(left: float, right: float, text: str | None, y: float) -> Iterable[Shape]:
    """Yield one terminal; a line to write on where nobody named it."""
    top, bottom = y - TERMINAL_MM / 2.0, y + TERMINAL_MM / 2.0
    yield Box(left, top, right, bottom, HAIR_MM)
    if text is None or text == "":
        yield _to_write(left + 0.8, right - 0.8, bottom - 0.6)
        return
    inner = Bounds(left + 0.4, top, right - 0.4, bottom)
    yield _line_of(printable(text), inner, y - (PLAIN.ascent_mm + PLAIN.descent_mm) / 2.0, PLAIN, "centre")


def _device(
    station: Station, place: Bounds, before: Stretch | None, behind: Stretch | None, lanes_top: float, lanes: int
) -> Iterable[Shape]:
    assert station.device is not None
    if station.symbol is Symbol.IN_SERIES:
        yield from _in_series(station.device, place, lanes_top, lanes)
        return
    middle = lanes_top + lanes * PITCH_MM / 2.0
    inside = place.right - (_DEVICE_TERMINAL_MM + 1.4)
    radius = min(RADIUS_MM, (inside - place.left - 0.8) / 2.0)
    yield from _bubble(station.device, (place.left + 0.8 + inside) / 2.0, middle, radius)
    for lane in range(lanes):
        y = lanes_top + (lane + 0.5) * PITCH_MM
        other = behind.wires[lane] if behind is not None and lane < len(behind.wires) else None
        # A screen without a terminal is cut back and insulated in the field.
        if other is not None and not (other.is_screen and other.left is None):
            yield from _box(place.right - 0.8 - _DEVICE_TERMINAL_MM, place.right - 0.8, other.left, y)
            yield Line(place.right - 0.8, y, place.right, y, THIN_MM)


def _in_series(device: Installed, place: Bounds, lanes_top: float, lanes: int) -> Iterable[Shape]:
    """Yield a device that one conductor goes through; the others pass it by."""
    y = lanes_top + PITCH_MM / 2.0
    x = (place.left + place.right) / 2.0
    yield from _bubble(device, x, y, _SERIES_RADIUS_MM)
    for left, right, edge in (
        (place.left + 0.8, place.left + 0.8 + _DEVICE_TERMINAL_MM, place.left),
        (place.right - 0.8 - _DEVICE_TERMINAL_MM, place.right - 0.8, place.right),
    ):
        yield from _box(left, right, None, y)
        yield Line(edge, y, left if edge == place.left else right, y, THIN_MM)
    yield Line(place.left + 0.8 + _DEVICE_TERMINAL_MM, y, x - _SERIES_RADIUS_MM, y, THIN_MM)
    yield Line(x + _SERIES_RADIUS_MM, y, place.right - 0.8 - _DEVICE_TERMINAL_MM, y, THIN_MM)
    for lane in range(1, lanes):
        y = lanes_top + (lane + 0.5) * PITCH_MM
        yield Line(place.left, y, place.right, y, THIN_MM)


def _bubble(each: Installed, x: float, y: float, radius: float) -> Iterable[Shape]:
    """Yield the circle of an instrument with its letters above its number."""
    yield Circle(x, y, radius, THIN_MM)
    room = radius * 1.6
    for text, top in zip(_two_lines(each), (True, False), strict=True):
        if not text:
            continue
        look = next((look for look in (LETTERS, PLAIN) if width_mm(text, look) <= room), PLAIN)
        shown = shortened(text, look, room)[0][0]
        base = y - look.descent_mm if top else y + look.ascent_mm
        box = Bounds(x - radius, y - radius, x + radius, y + radius)
        yield Text(x - width_mm(shown, look) / 2.0, base, shown, look, box)


_LETTERS_AND_REST: Final = re.compile(r"([^\W\d_]+)[\W_]*(.+)")


def _two_lines(each: Installed) -> tuple[str, str]:
    """Return the letters of a tag and its number; of one that could not be read what stands before its number."""
    tag = each.tag
    if tag is not None and tag.letters:
        return tag.letters, f"{tag.number or ''}{tag.suffix or ''}"
    found = _LETTERS_AND_REST.fullmatch(each.name)
    return (found[1], found[2]) if found else (each.name, "")


def _functions(functions: Sequence[Installed], left: float, top: float, bottom: float) -> Iterable[Shape]:
    """Yield the functions in the control system: a circle in a square, joined to the card by a dotted line."""
    x = left + FUNCTION_MM - RADIUS_MM
    for y, each in _stacked(functions, top, bottom):
        yield Box(x - RADIUS_MM, y - RADIUS_MM, x + RADIUS_MM, y + RADIUS_MM)
        yield from _bubble(each, x, y, RADIUS_MM)
        yield Line(left, y, x - RADIUS_MM, y, THIN_MM, 0.0, True)


def _stacked(each: Sequence[Installed], top: float, bottom: float) -> Iterable[tuple[float, Installed]]:
    height = bottom - top
    for number, one in enumerate(each):
        yield top + height * (2 * number + 1) / (2 * len(each)), one


_VALVES: Final = frozenset({Kind.CONTROL_VALVE, Kind.ON_OFF_VALVE})


def _joined(
    joined: Sequence[Installed], left: float, device_left: float, top: float, bottom: float, middle: float
) -> Iterable[Shape]:
    """Yield what the device is joined with: an element, or a valve with its body beneath its tag."""
    x = left + RADIUS_MM
    valve = len(joined) == 1 and joined[0].kind in _VALVES
    if valve:
        y = top + RADIUS_MM + 0.6
        yield from _bubble(joined[0], x, y, RADIUS_MM)
        body = bottom - 3.4
        yield Line(x, y + RADIUS_MM, x, body, THIN_MM)
        yield from _valve(x, body)
        stem = (y + RADIUS_MM + body) / 2.0
        yield Line(x, stem, device_left, stem, THIN_MM, 0.0, True)
        return
    for y, each in _stacked(joined, top, bottom):
        yield from _bubble(each, x, y, RADIUS_MM)
        yield Line(x + RADIUS_MM, y, device_left, y, THIN_MM)


@lru_cache(maxsize=1)
def _valve_lines() -> tuple[tuple[float, float, float, float], ...]:
    wide, high = 4.0, 2.2
    return (
        (-wide, -high, -wide, high),
        (-wide, -high, wide, high),
        (-wide, high, wide, -high),
        (wide, -high, wide, high),
    )


def _valve(x: float, y: float) -> Iterable[Shape]:
    """Yield the body of a valve: two triangles tip to tip."""
    for x0, y0, x1, y1 in _valve_lines():
        yield Line(x + x0, y + y0, x + x1, y + y1, THIN_MM)


# --------------------------------------------------------------------------------------------------------
# Stretches


def _label(wire: Wire | None) -> str:
    if wire is None:
        return ""
    if wire.ends_at:
        return wire.ends_at
    return " ".join(text for text in (wire.core, wire.colour) if text)


def _stretch(stretch: Stretch, room: Bounds, lanes_top: float, *, boundary: bool) -> Iterable[Shape]:
    inner = Bounds(room.left + 0.6, room.top, room.right - (2.6 if boundary else 0.6), lanes_top)
    if not stretch.internal:
        yield from _cable(stretch, inner)
    for lane, wire in enumerate(stretch.wires):
        if wire is None:
            continue
        y = lanes_top + (lane + 0.5) * PITCH_MM
        right = room.right
        if wire.ends_at:
            right = room.left + 0.75 * (inner.right - room.left)
            yield from _earth(right, y)
        yield Line(room.left, y, right, y, THIN_MM, 0.0, wire.is_screen)
        label = _label(wire)
        if label:
            box = Bounds(inner.left, y - PITCH_MM + 0.3, right - 0.4 if wire.ends_at else inner.right, y - 0.2)
            top = y - 0.35 - PLAIN.ascent_mm - PLAIN.descent_mm
            yield _line_of(printable(label), box, top, PLAIN, "left" if wire.ends_at else "centre")


def _cable(stretch: Stretch, inner: Bounds) -> Iterable[Shape]:
    """Yield what the cable is, above its conductors."""
    if stretch.cable is None:
        yield _line_of("cable", inner, inner.top + 0.6, CAPTION)
        yield _to_write(inner.left, inner.right, inner.top + 6.0)
        top, most = inner.top + 6.4, 0
    else:
        top, most = inner.top + 0.6, 2
    pair = f"pair {stretch.pair}" if stretch.pair else None
    length = f"{stretch.length_m:g} m" if stretch.length_m is not None else None
    said = [
        *([(stretch.cable, NAME, most)] if stretch.cable is not None else []),
        *((text, PLAIN, 1) for text in (stretch.cable_type, _joint(pair, length)) if text),
    ]
    yield from _lines_of(said, Bounds(inner.left, top, inner.right, inner.bottom), top, "centre")


def _joint(*texts: str | None) -> str | None:
    shown = [text for text in texts if text]
    return ", ".join(shown) if shown else None


def _earth(x: float, y: float) -> Iterable[Shape]:
    """Yield the sign of an earth at the end of a conductor."""
    yield Line(x, y - 1.3, x, y + 1.3, THIN_MM)
    yield Line(x + 0.6, y - 0.9, x + 0.6, y + 0.9, THIN_MM)
    yield Line(x + 1.2, y - 0.4, x + 1.2, y + 0.4, THIN_MM)


def _boundary(room: Bounds, height: float, left: float, width: float, classification: str | None) -> Iterable[Shape]:
    """Yield the end of the hazardous area, and what is listed on its two sides."""
    x = room.right - 1.3
    yield Line(x, CAPTION_MM, x, height, THICK_MM, 0.0, True)
    top = height - FOOT_MM + 0.5
    here = Bounds(left + EDGE_MM, top, x - 1.0, height)
    if classification:
        yield _line_of(printable(classification), here, top, PLAIN, "right")
    beyond = Bounds(x + 1.0, top, left + width - EDGE_MM, height)
    words = next((text for text in _BEYOND if width_mm(text, CAPTION) + 12.0 < beyond.right - beyond.left), _BEYOND[-1])
    yield _line_of(words, beyond, top, CAPTION)
    start = beyond.left + width_mm(words, CAPTION) + 1.0
    if start < beyond.right - 5.0:
        yield _to_write(start, beyond.right, height - 0.9)


_BEYOND: Final = ("beyond, by the area drawing:", "beyond:")
"""What stands there is not in the list, and is left to be written in."""
