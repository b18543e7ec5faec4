"""What a page is made of: texts, lines, boxes, circles, links and groups, in millimetres from its upper left corner."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from typing import Final, NamedTuple

from loops.sheet.font import MM_PER_POINT, Face, bold, regular
from loops.sheet.font import bold as bold_face

BLACK: Final = 0.0
GREY: Final = 0.38
"""The lightest grey for letters: it still prints on a worn office printer."""
RULE: Final = 0.62
SHADE: Final = 0.91

HAIR_MM: Final = 0.1
THIN_MM: Final = 0.18
THICK_MM: Final = 0.4


class Style(NamedTuple):
    """How a text looks.

    `ascent_mm` and `descent_mm` are how far its tallest letter stands above the base line and its
    longest reaches below it; `pitch_mm` is the distance from line to line.
    """

    size_pt: float
    bold: bool
    grey: float
    ascent_mm: float
    descent_mm: float
    pitch_mm: float

    @property
    def face(self) -> Face:
        """The face it is set in."""
        return bold() if self.bold else regular()


def style(size_pt: float, *, bold: bool = False, grey: float = BLACK) -> Style:
    """Return a style whose lines stand as close as they can without touching."""
    face = bold_face() if bold else regular()
    ascent_mm, descent_mm = (each * size_pt * (MM_PER_POINT / 1000.0) for each in (face.ascent, face.descent))
    return Style(size_pt, bold, grey, ascent_mm, descent_mm, ascent_mm + descent_mm)


class Bounds(NamedTuple):
    """A rectangle: left, top, right, bottom."""

    left: float
    top: float
    right: float
    bottom: float


class Text(NamedTuple):
    """One line of text; `y` is its base line, `box` what it must stay inside."""

    x: float
    y: float
    text: str
    style: Style
    box: Bounds


class Line(NamedTuple):
    """A straight line."""

    x0: float
    y0: float
    x1: float
    y1: float
    weight_mm: float = THIN_MM
    grey: float = BLACK
    dotted: bool = False


class Box(NamedTuple):
    """A rectangle, with an outline, a filling, or both; a weight of 0 is no outline."""

    left: float
    top: float
    right: float
    bottom: float
    weight_mm: float = THIN_MM
    fill: float | None = None


class Circle(NamedTuple):
    """A circle, with an outline, a filling, or both; a weight of 0 is no outline."""

    x: float
    y: float
    radius: float
    weight_mm: float = THIN_MM
    fill: float | None = None


class Use(NamedTuple):
    """A group of shapes that many pages share, `share`d under a name, drawn `y` lower than it was made."""

    name: str
    y: float = 0.0


class Link(NamedTuple):
    """A rectangle that leads to the page with the anchor `target`."""

    box: Bounds
    target: str


Shape = Text | Line | Box | Circle | Use | Link


class Page(NamedTuple):
    """One page; `anchors` are what links and bookmarks call it."""

    shapes: tuple[Shape, ...]
    anchors: tuple[str, ...] = ()


_GROUPS: dict[str, tuple[Shape, ...]] = {}


def share(name: str, make: Callable[[], Iterable[Shape]]) -> str:
    """Make a group of shapes known under a name, unless it is; the name must say all that the shapes depend on."""
    if name not in _GROUPS:
        _GROUPS[name] = tuple(make())
    return name


def group(name: str) -> tuple[Shape, ...]:
    """Return the shapes shared under a name.

    Raises
    ------
    KeyError
        Nothing is.
    """
    return _GROUPS[name]


def expanded(shapes: Iterable[Shape]) -> Iterator[Shape]:
    """Yield the shapes with each group's own in its place."""
    for shape in shapes:
        if isinstance(shape, Use):
            for inner in expanded(group(shape.name)):
                yield lowered(inner, shape.y)
        else:
            yield shape


def lowered(shape: Shape, by_mm: float) -> Shape:
    """Return a shape further down the page."""
    # Made anew and not by `_replace`, which takes three times as long; a sheet has a hundred of them.
    if isinstance(shape, Text):
        x, y, text, look, box = shape
        return Text(x, y + by_mm, text, look, Bounds(box.left, box.top + by_mm, box.right, box.bottom + by_mm))
    if isinstance(shape, Line):
        x0, y0, x1, y1, weight_mm, grey, dotted = shape
        return Line(x0, y0 + by_mm, x1, y1 + by_mm, weight_mm, grey, dotted)
    if isinstance(shape, Box):
        left, top, right, bottom, weight_mm, fill = shape
        return Box(left, top + by_mm, right, bottom + by_mm, weight_mm, fill)
    if isinstance(shape, Use | Circle):
        return shape._replace(y=shape.y + by_mm)
    box = shape.box
    return shape._replace(box=Bounds(box.left, box.top + by_mm, box.right, box.bottom + by_mm))


def extent(text: Text) -> Bounds:
    """Return the rectangle that a text's line fills, whatever its letters."""
    width = text.style.face.width_mm(text.text, text.style.size_pt)
    return Bounds(text.x, text.y - text.style.ascent_mm, text.x + width, text.y + text.style.descent_mm)
