"""SVG: the scene written so that one user unit is one millimetre of paper.

``width`` and ``height`` are in millimetres and the ``viewBox`` counts in them, so 10 m at 1:100 is 100 units and, in
print at 100 %, 100 mm. A page rule asks for the sheet's own size without margins, so that a browser prints it true to
scale when it is simply told to print. The same scene gives the same bytes: no random names, no clock, a fixed order.

Text stays text. Each line carries ``textLength``, the width the scene has measured, so that it keeps its box even
where the reader lacks the typeface. All text goes through the XML writer's own escaping.
"""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from itertools import groupby
from math import degrees
from typing import TYPE_CHECKING, Any

from kernelscan.markup.metrics import FONT_FAMILY, font_size
from kernelscan.markup.scene import Fill, Hatch, Item, Pen, Point, Scene, Stroke, Text
from kernelscan.markup.text import clean_text

if TYPE_CHECKING:
    import svgwrite

__all__ = ["svg_text"]

GRID = 100
"""Steps in a millimetre."""


def svg_text(scene: Scene) -> str:
    """Return a scene as an SVG document."""
    import svgwrite

    size = (f"{_number(scene.width)}mm", f"{_number(scene.height)}mm")
    drawing = svgwrite.Drawing(size=size, profile="full", debug=False)
    drawing.viewbox(0, 0, _number(scene.width), _number(scene.height))
    drawing["role"] = "img"
    drawing.set_desc(clean_text(scene.title), clean_text(scene.description))
    drawing.defs.add(drawing.style(f"@page{{size:{size[0]} {size[1]};margin:0}}"))
    drawing.add(drawing.rect((0, 0), (_number(scene.width), _number(scene.height)), fill="#ffffff"))
    for group in scene.groups:
        if group.items:
            layer = drawing.g(id=group.name, fill="none", font_family=FONT_FAMILY)
            layer["stroke-linejoin"], layer["stroke-linecap"] = "round", "butt"
            for item in _joined(group.items):
                layer.add(_element(drawing, item, scene.height))
            drawing.add(layer)
    return '<?xml version="1.0" encoding="utf-8"?>\n' + str(drawing.tostring()) + "\n"


@dataclass(frozen=True, slots=True)
class _Strokes:
    """Neighbouring strokes of one pen, written as one path."""

    pieces: tuple[tuple[Point, ...], ...]
    pen: Pen
    closed: bool


def _joined(items: Iterable[Item]) -> Iterator[Item | _Strokes]:
    """Yield the items in their order, neighbouring strokes of one pen together: the same picture in less text."""
    for style, run in groupby(
        items, lambda item: (item.pen, item.closed) if isinstance(item, Stroke) else None
    ):
        if style is None:
            yield from run
        else:
            yield _Strokes(tuple(item.points for item in run if isinstance(item, Stroke)), *style)


def _element(drawing: "svgwrite.Drawing", item: Item | _Strokes, height: float) -> Any:  # noqa: ANN401 - svgwrite is untyped
    match item:
        case _Strokes(pieces, pen, closed):
            return drawing.path(_path(pieces, height, closed), **_pen(pen))
        case Stroke(points, pen, closed):
            return drawing.path(_path([points], height, closed), **_pen(pen))
        case Fill(rings, ink, border):
            rule = {"fill_rule": "evenodd"} if len(rings) > 1 else {}
            line = _pen(border) if border else {}
            return drawing.path(_path(rings, height, True), fill=ink, **rule, **line)
        case Hatch(lines, pen):
            return drawing.path(_path(lines, height, False), **_pen(pen))
        case Text():
            return _text(drawing, item, height)


def _text(drawing: "svgwrite.Drawing", text: Text, height: float) -> Any:  # noqa: ANN401
    x, y = text.at[0], height - text.at[1]
    element = drawing.text(text.string, insert=(_number(x), _number(y)), fill=text.ink)
    element["font-size"] = _number(font_size(text.height))
    if text.bold:
        element["font-weight"] = "bold"
    if text.anchor != "start":
        element["text-anchor"] = text.anchor
    if len(text.string) > 1:
        element["textLength"], element["lengthAdjust"] = _number(text.width), "spacingAndGlyphs"
    if text.angle:
        element["transform"] = f"rotate({_number(-degrees(text.angle))} {_number(x)} {_number(y)})"
    return element


def _pen(pen: Pen) -> dict[str, Any]:
    attributes: dict[str, Any] = {"stroke": pen.ink, "stroke_width": _number(pen.width)}
    if pen.dashes:
        attributes["stroke_dasharray"] = " ".join(str(_number(length)) for length in pen.dashes)
    return attributes


def _path(pieces: Iterable[tuple[Point, ...]], height: float, closed: bool) -> str:
    """Return path data, each step relative to the last: short, and exact on a grid of a hundredth of a millimetre."""
    data: list[str] = []
    here = (0, 0)
    for piece in pieces:
        letter = "m" if data else "M"
        for x, y in piece:
            there = round(x * GRID), round((height - y) * GRID)
            data.append(f"{letter}{_short(there[0] - here[0])},{_short(there[1] - here[1])}")
            letter, here = "l", there
        if closed:
            data.append("z")
            here = round(piece[0][0] * GRID), round((height - piece[0][1]) * GRID)
    return "".join(data)


def _short(units: int) -> str:
    """Return a whole number of hundredths as the shortest decimal number."""
    return f"{units / GRID:.2f}".rstrip("0").rstrip(".") if units % GRID else str(units // GRID)


def _number(value: float) -> float | int:
    """Return a length to a hundredth of a millimetre, a whole one as a whole number."""
    rounded = round(value, 2) + 0.0
    return int(rounded) if rounded == int(rounded) else rounded
