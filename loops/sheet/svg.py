"""A page as SVG: the same shapes as in the PDF, in millimetres; attributes alone, so that a page may forbid styles."""

from __future__ import annotations

from collections.abc import Iterable
from html import escape
from typing import Final

from loops.sheet.font import MM_PER_POINT, printable
from loops.sheet.layout import PAGE_HEIGHT, PAGE_WIDTH
from loops.sheet.shapes import Box, Circle, Line, Link, Page, Shape, Text, expanded

FAMILY: Final = "DejaVu Sans Condensed, DejaVu Sans, sans-serif"


def svg_of(page: Page, *, title: str, description: str = "", prefix: str = "sheet") -> str:
    """Return a page as an SVG element.

    Parameters
    ----------
    page
        The page.
    title, description
        What it is, for those who do not see it.
    prefix
        Of its ids: two drawings may stand on one page.
    """
    shapes = "\n".join(_element(shape) for shape in expanded(page.shapes) if not isinstance(shape, Link))
    links = "\n".join(_link(shape) for shape in page.shapes if isinstance(shape, Link))
    name, told = f"{prefix}-title", f"{prefix}-description"
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{PAGE_WIDTH:g}mm" height="{PAGE_HEIGHT:g}mm" '
        f'viewBox="0 0 {PAGE_WIDTH:g} {PAGE_HEIGHT:g}" role="img" aria-labelledby="{name} {told}" '
        f'font-family="{FAMILY}">\n'
        f'<title id="{name}">{_text(title)}</title>\n<desc id="{told}">{_text(description)}</desc>\n'
        f"{shapes}\n{links}\n</svg>\n"
    )


def _text(text: str) -> str:
    return escape(printable(text), quote=True)


def _grey(level: float) -> str:
    shade = round(level * 255)
    return f"#{shade:02x}{shade:02x}{shade:02x}"


def _number(value: float) -> str:
    return f"{value:.3f}".rstrip("0").rstrip(".")


def _element(shape: Shape) -> str:
    if isinstance(shape, Text):
        size = _number(shape.style.size_pt * MM_PER_POINT)
        width = shape.style.face.width_mm(shape.text, shape.style.size_pt)
        weight = ' font-weight="bold"' if shape.style.bold else ""
        # The length that the layout reckoned with, whatever face the browser has.
        length = f' textLength="{_number(width)}" lengthAdjust="spacingAndGlyphs"' if shape.text.strip() else ""
        return (
            f'<text x="{_number(shape.x)}" y="{_number(shape.y)}" font-size="{size}"{weight} '
            f'fill="{_grey(shape.style.grey)}"{length} xml:space="preserve">{_text(shape.text)}</text>'
        )
    if isinstance(shape, Line):
        ends = " ".join(
            f'{name}="{_number(value)}"'
            for name, value in (("x1", shape.x0), ("y1", shape.y0), ("x2", shape.x1), ("y2", shape.y1))
        )
        dots = ' stroke-dasharray="0.2 0.64"' if shape.dotted else ""
        return f'<line {ends} stroke="{_grey(shape.grey)}" stroke-width="{_number(shape.weight_mm)}"{dots}/>'
    if isinstance(shape, Box):
        return (
            f'<rect x="{_number(shape.left)}" y="{_number(shape.top)}" width="{_number(shape.right - shape.left)}" '
            f'height="{_number(shape.bottom - shape.top)}" {_look(shape)}/>'
        )
    assert isinstance(shape, Circle)
    return f'<circle cx="{_number(shape.x)}" cy="{_number(shape.y)}" r="{_number(shape.radius)}" {_look(shape)}/>'


def _look(shape: Box | Circle) -> str:
    fill = "none" if shape.fill is None else _grey(shape.fill)
    stroke = f' stroke="#000000" stroke-width="{_number(shape.weight_mm)}"' if shape.weight_mm else ""
    return f'fill="{fill}"{stroke}'


def _link(link: Link) -> str:
    box = link.box
    return (
        f'<a href="#{_text(link.target)}"><rect x="{_number(box.left)}" y="{_number(box.top)}" '
        f'width="{_number(box.right - box.left)}" height="{_number(box.bottom - box.top)}" fill="#ffffff" '
        f'fill-opacity="0"/></a>'
    )


def svg_pages(pages: Iterable[Page], *, title: str) -> list[str]:
    """Return the pages of a sheet, each an SVG element with ids of its own."""
    return [
        svg_of(page, title=f"{title}, page {number}", prefix=f"page-{number}")
        for number, page in enumerate(pages, start=1)
    ]
