"""Settings drawn on a scale of the span, with the operating values beneath: a wrong one is seen before it is read."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from typing import Final, NamedTuple

from loops.sheet.flow import PAD_X, shortened, width_mm
from loops.sheet.shapes import GREY, HAIR_MM, RULE, THICK_MM, THIN_MM, Bounds, Box, Line, Shape, Style, Text, style

MARK: Final = style(6.4, bold=True)
VALUE: Final = style(6.0)
END: Final = style(6.0, grey=GREY)

TAG_MM: Final = 26.0
"""Left of the scale: whose it is."""
BEYOND_MM: Final = 12.0
"""On either side of the span: what lies outside stands there, however far it is."""
PAD_MM: Final = 0.8
TICK_MM: Final = 1.3
LEADER_MM: Final = 2.6
"""From the scale to the texts: room for a line that leads aside."""
APART_MM: Final = 1.2


@dataclass(frozen=True, slots=True, kw_only=True)
class SpanScale:
    """One device's settings and operating values in percent of its span.

    Attributes
    ----------
    tag
        The device.
    lrv, urv
        The ends as written.
    settings, operating
        Name and place of each: ``H``, 80.0.
    """

    tag: str
    lrv: str
    urv: str
    settings: tuple[tuple[str, float], ...]
    operating: tuple[tuple[str, float], ...]


class Drawn(NamedTuple):
    """A scale of one height, its shapes from 0 mm downwards."""

    height: float
    shapes: tuple[Shape, ...]


class _Placed(NamedTuple):
    """A mark: its place on the scale, and its text with where it stands."""

    x: float
    text: str
    left: float
    width: float


def draw_scale(scale: SpanScale, *, left: float, width: float) -> Drawn:
    """Draw a scale.

    Parameters
    ----------
    scale
        What stands on it.
    left, width
        Of the page, in mm.
    """
    right = left + width
    x0, x1 = left + TAG_MM + BEYOND_MM, right - BEYOND_MM - 2.0
    bounds = Bounds(left + TAG_MM + 0.5, 0.0, right - PAD_X, 0.0)

    def at(percent: float) -> float:
        x = x0 + (x1 - x0) * percent / 100.0
        return min(max(x, x0 - BEYOND_MM + 3.0), x1 + BEYOND_MM - 3.0)

    above = _spread(scale.settings, at, bounds, MARK)
    below = _spread(scale.operating, at, bounds, VALUE)
    y = PAD_MM + MARK.pitch_mm + LEADER_MM
    ends_top = y + LEADER_MM + (VALUE.pitch_mm if below else 0.0)
    height = ends_top + END.pitch_mm + PAD_MM
    shapes: list[Shape] = [
        Box(left, 0.0, right, height),
        Line(left + TAG_MM, 0.0, left + TAG_MM, height, HAIR_MM, RULE),
    ]
    name_box = Bounds(left + PAD_X, 0.0, left + TAG_MM - PAD_X, height)
    for number, line in enumerate(shortened(scale.tag, MARK, TAG_MM - 2 * PAD_X, 2)[0]):
        shapes.append(Text(name_box.left, PAD_MM + number * MARK.pitch_mm + MARK.ascent_mm, line, MARK, name_box))
    shapes.append(Line(x0, y, x1, y, THICK_MM))
    shapes.append(Line(x0 - BEYOND_MM + 3.0, y, x0, y, THIN_MM, GREY, True))
    shapes.append(Line(x1, y, x1 + BEYOND_MM - 3.0, y, THIN_MM, GREY, True))
    for quarter in range(5):
        x = x0 + (x1 - x0) * quarter / 4.0
        shapes.append(Line(x, y - TICK_MM / 2.0, x, y + TICK_MM / 2.0, THIN_MM if quarter % 4 else THICK_MM))
    shapes.extend(_marks(above, y, upwards=True, look=MARK, box=bounds._replace(top=0.0, bottom=height)))
    shapes.extend(_marks(below, y, upwards=False, look=VALUE, box=bounds._replace(top=0.0, bottom=height)))
    operating = sorted(at(percent) for _, percent in scale.operating)
    if len(operating) > 1 and operating[-1] > operating[0]:
        # From the least to the greatest value that the process has.
        shapes.append(Box(operating[0], y + 0.35, operating[-1], y + 0.95, 0.0, RULE))
    box = bounds._replace(top=ends_top, bottom=height)
    lrv = shortened(scale.lrv, END, (x1 - x0) / 2.0)[0][0]
    urv = shortened(scale.urv, END, (x1 - x0) / 2.0)[0][0]
    base = ends_top + END.ascent_mm
    shapes.append(Text(x0, base, lrv, END, box))
    shapes.append(Text(x1 - width_mm(urv, END), base, urv, END, box))
    return Drawn(height, tuple(shapes))


def _spread(
    marks: Sequence[tuple[str, float]], at: Callable[[float], float], bounds: Bounds, look: Style
) -> list[_Placed]:
    """Give each mark a place for its text: above it, or as near to that as its neighbours leave."""
    texts = [
        (at(percent), _with_place(name, percent))
        for name, percent in sorted(marks, key=lambda mark: (mark[1], mark[0]))
    ]
    wide = [width_mm(text, look) for _, text in texts]
    lefts: list[float] = []
    for (x, _), width in zip(texts, wide, strict=True):
        least = lefts[-1] + wide[len(lefts) - 1] + APART_MM if lefts else bounds.left
        lefts.append(max(x - width / 2.0, least))
    most = bounds.right
    for number in reversed(range(len(lefts))):
        lefts[number] = min(lefts[number], most - wide[number])
        most = lefts[number] - APART_MM
    return [_Placed(x, text, left, width) for (x, text), left, width in zip(texts, lefts, wide, strict=True)]


def _with_place(name: str, percent: float) -> str:
    """Return a mark's text; of one outside the span with its place, which the paper does not show."""
    return name if 0.0 <= percent <= 100.0 else f"{name} ({percent:.1f} %)"


def _marks(placed: Iterable[_Placed], y: float, *, upwards: bool, look: Style, box: Bounds) -> Iterable[Shape]:
    side = -1.0 if upwards else 1.0
    base = y - LEADER_MM - look.descent_mm if upwards else y + LEADER_MM + look.ascent_mm
    for x, text, left, width in placed:
        yield Line(x, y, x, y + side * TICK_MM, THICK_MM if upwards else THIN_MM)
        yield Line(x, y + side * TICK_MM, left + width / 2.0, y + side * LEADER_MM, HAIR_MM)
        yield Text(left, base, text, look, box)
