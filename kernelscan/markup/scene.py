"""A neutral scene: what goes on one sheet of paper, in no file format.

Everything is in millimetres of paper. The origin is the lower left corner of the trimmed sheet, x to the right and
y **up**, as on a drawing board and as in the plan; angles are radians counter-clockwise. Inks are ``#rrggbb``.
A scene is a sequence of groups, painted in their order, each a sequence of items, painted in theirs.

Items are of four sorts only, so that a writer for a new format is short: strokes, fills, hatches and lines of text.
Symbols, dimensions, tables and tags are composed of these before a writer sees them.
"""

from collections.abc import Iterator
from dataclasses import dataclass, field
from math import cos, sin
from typing import Literal, NamedTuple

import numpy as np

from kernelscan.markup.metrics import ASCENT, DESCENT, font_size, text_width

__all__ = [
    "Anchor",
    "Box",
    "Fill",
    "Group",
    "Hatch",
    "Item",
    "Pen",
    "Point",
    "Scene",
    "Stroke",
    "Text",
    "canonical_text",
    "points_of",
]

Point = tuple[float, float]
Anchor = Literal["start", "middle", "end"]


def points_of(array: np.ndarray) -> tuple[Point, ...]:
    """Return an ``(n, 2)`` array as a tuple of points, so that frozen values can hold and compare it."""
    return tuple((float(x), float(y)) for x, y in array)


class Box(NamedTuple):
    """An upright rectangle on the paper."""

    left: float
    bottom: float
    right: float
    top: float

    @property
    def width(self) -> float:
        """Width in millimetres."""
        return self.right - self.left

    @property
    def height(self) -> float:
        """Height in millimetres."""
        return self.top - self.bottom

    @property
    def centre(self) -> Point:
        """The middle of the box."""
        return (self.left + self.right) / 2, (self.bottom + self.top) / 2

    def grown(self, by: float) -> "Box":
        """Return the box with ``by`` more on each side."""
        return Box(self.left - by, self.bottom - by, self.right + by, self.top + by)

    def overlaps(self, other: "Box") -> bool:
        """Whether the two boxes share more than their borders."""
        return (
            self.left < other.right
            and other.left < self.right
            and self.bottom < other.top
            and other.bottom < self.top
        )

    @property
    def corners(self) -> tuple[Point, Point, Point, Point]:
        """The four corners, counter-clockwise from the lower left."""
        return (
            (self.left, self.bottom),
            (self.right, self.bottom),
            (self.right, self.top),
            (self.left, self.top),
        )


@dataclass(frozen=True, slots=True)
class Pen:
    """A line: its width in millimetres, its ink, and the lengths of its dashes and gaps (none: solid)."""

    width: float
    ink: str = "#000000"
    dashes: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True)
class Stroke:
    """A line through points, closed or open."""

    points: tuple[Point, ...]
    pen: Pen
    closed: bool = False


@dataclass(frozen=True, slots=True)
class Fill:
    """An area of one ink: rings by the even-odd rule, drawn round with a pen where there is one."""

    rings: tuple[tuple[Point, ...], ...]
    ink: str
    pen: Pen | None = None


@dataclass(frozen=True, slots=True)
class Hatch:
    """Parallel lines already clipped to an area, in one pen: pairs of ends."""

    lines: tuple[tuple[Point, Point], ...]
    pen: Pen


@dataclass(frozen=True, slots=True)
class Text:
    """One line of text; ``at`` is on the baseline, at its start, middle or end; ``height`` is that of capitals."""

    at: Point
    string: str
    height: float = 2.5
    anchor: Anchor = "start"
    bold: bool = False
    ink: str = "#000000"
    angle: float = 0.0

    @property
    def width(self) -> float:
        """How long the line of text is, in millimetres."""
        return text_width(self.string, self.height, self.bold)

    @property
    def corners(self) -> tuple[Point, ...]:
        """The corners of the line's box, from ascent to descent, turned with the text."""
        size, width = font_size(self.height), self.width
        left = -width * {"start": 0.0, "middle": 0.5, "end": 1.0}[self.anchor]
        c, s = cos(self.angle), sin(self.angle)
        flat = Box(left, -DESCENT * size, left + width, ASCENT * size).corners
        return tuple((self.at[0] + c * x - s * y, self.at[1] + s * x + c * y) for x, y in flat)

    @property
    def box(self) -> Box:
        """The upright box around the line of text."""
        x, y = zip(*self.corners, strict=True)
        return Box(min(x), min(y), max(x), max(y))


Item = Stroke | Fill | Hatch | Text


@dataclass(frozen=True, slots=True)
class Group:
    """Items that belong together; the name is a plain word, unique in its scene."""

    name: str
    items: tuple[Item, ...]


@dataclass(frozen=True, slots=True)
class Scene:
    """One sheet.

    Attributes
    ----------
    width, height
        The trimmed sheet in millimetres.
    title, description
        What the sheet is, for programs that read it out.
    groups
        In painting order.
    """

    width: float
    height: float
    title: str
    description: str = ""
    groups: tuple[Group, ...] = field(default=())

    def items(self) -> Iterator[Item]:
        """Yield every item in painting order."""
        for group in self.groups:
            yield from group.items

    def texts(self) -> tuple[Text, ...]:
        """Return every line of text in painting order."""
        return tuple(item for item in self.items() if isinstance(item, Text))

    def group(self, name: str) -> Group:
        """Return the group of that name; ``KeyError`` if there is none."""
        return {group.name: group for group in self.groups}[name]


def canonical_text(scene: Scene) -> str:
    """Return the scene as text, one item a line, to a thousandth of a millimetre: what golden tests compare."""
    lines = [f"scene {_mm(scene.width)} x {_mm(scene.height)} {scene.title!r} {scene.description!r}"]
    for group in scene.groups:
        lines.append(f"group {group.name}")
        lines += [f"  {_line(item)}" for item in group.items]
    return "\n".join(lines) + "\n"


def _mm(value: float) -> str:
    return f"{round(value, 3) + 0.0:.3f}".rstrip("0").rstrip(".")


def _points(points: tuple[Point, ...]) -> str:
    return " ".join(f"{_mm(x)},{_mm(y)}" for x, y in points)


def _pen(pen: Pen) -> str:
    dashes = "/" + "-".join(map(_mm, pen.dashes)) if pen.dashes else ""
    return f"{_mm(pen.width)}{pen.ink}{dashes}"


def _line(item: Item) -> str:
    match item:
        case Stroke(points, pen, closed):
            return f"{'loop' if closed else 'line'} {_pen(pen)} {_points(points)}"
        case Fill(rings, ink, pen):
            return f"fill {ink} {_pen(pen) if pen else 'bare'} " + " | ".join(_points(ring) for ring in rings)
        case Hatch(lines, pen):
            return f"hatch {_pen(pen)} " + " | ".join(_points(line) for line in lines)
        case Text(at, string, height, anchor, bold, ink, angle):
            weight = "bold" if bold else "book"
            turned = f" turned {angle:.4f}" if angle else ""
            return f"text {_points((at,))} {_mm(height)} {weight} {anchor} {ink}{turned} {string!r}"
