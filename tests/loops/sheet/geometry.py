"""Asks a page what a draughtsman would ask: does each text fit its box, does anything lie over anything else."""

from __future__ import annotations

from loops.sheet.font import MM_PER_POINT, bold, regular
from loops.sheet.layout import FOOT_BOTTOM, LEFT, PAGE_HEIGHT, PAGE_WIDTH, RIGHT, TOP
from loops.sheet.shapes import Bounds, Box, Line, Link, Page, Text, expanded, extent

HAIR = 0.011
LEAST_MM = 2.0


def troubles(page: Page) -> list[str]:
    """Say what is wrong with a page's geometry; nothing where it is right."""
    found: list[str] = []
    shapes = list(expanded(page.shapes))
    texts = [shape for shape in shapes if isinstance(shape, Text)]
    extents = [extent(text) for text in texts]
    for text, around in zip(texts, extents, strict=True):
        if not inside(around, text.box):
            found.append(f"{text.text!r} leaves its box: {around} {text.box}")
        if not inside(text.box, Bounds(LEFT, TOP, RIGHT, FOOT_BOTTOM)):
            found.append(f"the box of {text.text!r} leaves the frame: {text.box}")
        if text.style.size_pt * MM_PER_POINT < LEAST_MM:
            found.append(f"{text.text!r} is too small")
        face = bold() if text.style.bold else regular()
        found.extend(f"{sign!r} of {text.text!r} has no glyph" for sign in text.text if sign not in face.advances)
    found.extend(
        f"{texts[one].text!r} lies over {texts[other].text!r}: {extents[one]} {extents[other]}"
        for one, other in overlapping(extents)
    )
    for line in (shape for shape in shapes if isinstance(shape, Line)):
        found.extend(
            f"a line crosses {text.text!r}"
            for text, around in zip(texts, extents, strict=True)
            if crosses(line, around, text)
        )
    for shape in shapes:
        if isinstance(shape, Line):
            ends = Bounds(min(shape.x0, shape.x1), shape.y0, max(shape.x0, shape.x1), shape.y1)
        elif isinstance(shape, Box):
            ends = Bounds(shape.left, shape.top, shape.right, shape.bottom)
        elif isinstance(shape, Link):
            ends = shape.box
        else:
            continue
        if not inside(ends, Bounds(0.0, 0.0, PAGE_WIDTH, PAGE_HEIGHT)):
            found.append(f"off the page: {shape}")
    return found


def overlapping(extents: list[Bounds]) -> list[tuple[int, int]]:
    """Return the pairs of rectangles that share more than an edge."""
    found: list[tuple[int, int]] = []
    order = sorted(range(len(extents)), key=lambda number: extents[number].top)
    for place, one in enumerate(order):
        for other in order[place + 1 :]:
            if extents[other].top >= extents[one].bottom:
                break
            if overlap(extents[one], extents[other]):
                found.append((one, other))
    return found


def inside(one: Bounds, other: Bounds) -> bool:
    """Whether a rectangle lies in another."""
    return (
        one.left >= other.left - HAIR
        and one.top >= other.top - HAIR
        and one.right <= other.right + HAIR
        and one.bottom <= other.bottom + HAIR
    )


def overlap(one: Bounds, other: Bounds) -> bool:
    """Whether two rectangles share more than an edge."""
    return (
        one.left < other.right - HAIR
        and other.left < one.right - HAIR
        and one.top < other.bottom - HAIR
        and other.top < one.bottom - HAIR
    )


def crosses(line: Line, around: Bounds, text: Text) -> bool:
    """Whether a line runs through the letters of a text: through the middle of them, where it is level."""
    if line.x0 == line.x1:
        return around.left + 0.05 < line.x0 < around.right - 0.05 and overlap_1d(line.y0, line.y1, around)
    # A dotted line may stand close under a text; what lies between base line and half the height is struck.
    half = text.y - text.style.ascent_mm / 2.0
    return half < line.y0 < text.y - 0.1 and line.x0 < around.right and around.left < line.x1


def overlap_1d(y0: float, y1: float, around: Bounds) -> bool:
    """Whether an upright line and a text share some height."""
    return min(y0, y1) < around.bottom - HAIR and around.top + HAIR < max(y0, y1)


def words(page: Page) -> str:
    """Return all that a page says, in the order of its shapes."""
    return "\n".join(shape.text for shape in expanded(page.shapes) if isinstance(shape, Text))
