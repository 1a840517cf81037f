"""A label: a few lines of text on a white ground, and the leader that ties it to its place."""

from collections.abc import Iterator
from dataclasses import dataclass
from math import cos, pi, sin

from kernelscan.markup.metrics import ASCENT, DESCENT, font_size, text_width
from kernelscan.markup.scene import Box, Fill, Item, Point, Text
from kernelscan.markup.style import BLACK, BODY, LEADER_PEN, WHITE
from kernelscan.markup.text import LINE_PITCH

__all__ = ["GROUND", "Label", "Line", "boxes_around", "dot", "nearest_in"]

GROUND = 0.4
"""How far the white ground reaches beyond the text, in millimetres."""


@dataclass(frozen=True, slots=True)
class Line:
    """One line of a label."""

    string: str
    bold: bool = False
    height: float = BODY


@dataclass(frozen=True, slots=True)
class Label:
    """Lines of text, centred one under the other."""

    lines: tuple[Line, ...]
    framed: bool = False

    @property
    def width(self) -> float:
        """Width of the ground in millimetres."""
        return max(text_width(line.string, line.height, line.bold) for line in self.lines) + 2 * GROUND

    @property
    def height(self) -> float:
        """Height of the ground in millimetres."""
        first, last = self.lines[0], self.lines[-1]
        edges = ASCENT * font_size(first.height) + DESCENT * font_size(last.height)
        return edges + sum(line.height * LINE_PITCH for line in self.lines[1:]) + 2 * GROUND

    def items(self, box: Box) -> tuple[Item, ...]:
        """Return the label drawn in a box of its own size."""
        items: list[Item] = [Fill((box.corners,), WHITE, LEADER_PEN if self.framed else None)]
        x, baseline = box.centre[0], box.top - GROUND - ASCENT * font_size(self.lines[0].height)
        for i, line in enumerate(self.lines):
            baseline -= line.height * LINE_PITCH if i else 0.0
            items.append(Text((x, baseline), line.string, line.height, "middle", line.bold))
        return tuple(items)


def boxes_around(point: Point, label: Label, radii: tuple[float, ...], directions: int = 8) -> Iterator[Box]:
    """Yield boxes for a label around a point, the nearest first, each just clear of a circle of its radius."""
    width, height = label.width, label.height
    for radius in radii:
        for k in range(directions):
            angle = pi / 4 + 2 * pi * k / directions
            dx, dy = cos(angle), sin(angle)
            x = point[0] + dx * radius + (_side(dx) - 1) * width / 2
            y = point[1] + dy * radius + (_side(dy) - 1) * height / 2
            yield Box(x, y, x + width, y + height)


def _side(direction: float) -> float:
    """Return -1, 0 or 1: on which side of the point the label lies."""
    return 0.0 if abs(direction) < 0.3 else 1.0 if direction > 0 else -1.0


def nearest_in(point: Point, box: Box) -> Point:
    """Return the point of a box that is nearest to a point."""
    return min(max(point[0], box.left), box.right), min(max(point[1], box.bottom), box.top)


def dot(point: Point, radius: float = 0.5) -> Fill:
    """Return the dot at the foot of a leader."""
    ring = tuple(
        (point[0] + radius * cos(2 * pi * k / 12), point[1] + radius * sin(2 * pi * k / 12))
        for k in range(12)
    )
    return Fill((ring,), BLACK)
