"""Dimensions on paper: a line between two arrows, witness lines where it stands off, and the value along it.

Values are in the custom of the drawing: whole millimetres, or feet and inches to a sixteenth. A value stands over the
middle of its line; where something is in the way it moves along the line, to its other side, or beyond its end.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import atan2, cos, dist, pi, sin

import numpy as np

from kernelscan.coverage.setting_out import setting_out
from kernelscan.coverage.wording import Custom
from kernelscan.markup.placing import Occupied
from kernelscan.markup.scene import Fill, Item, Point, Stroke, Text
from kernelscan.markup.shown import ShownRoom, ShownSpot, wall_normal
from kernelscan.markup.style import BLACK, BODY, DIMENSION_PEN, WHITE
from kernelscan.markup.view import PlanView
from kernelscan.plan import Room
from kernelscan.units import feet_and_inches

__all__ = ["Dimension", "Length", "dimensions_on_paper", "lengths_to_set_out"]

STAND_OFF = 9.0
"""From a wall to its chain of dimensions, in millimetres."""
WITNESS_GAP, WITNESS_OVER = 1.0, 1.5
ARROW, ARROW_HALF = 2.4, 0.4
TEXT_GAP = 0.9
SHORTEST = 1e-6
"""Metres: two points nearer than this are one."""


@dataclass(frozen=True, slots=True, eq=False)
class Length:
    """One length to set out: from point to point, ``(2,)`` metres each.

    ``away`` is the unit vector out of the room in which the dimension line stands off the wall, or ``None`` where the
    line runs straight from the one point to the other.
    """

    start: np.ndarray
    end: np.ndarray
    away: np.ndarray | None


def lengths_to_set_out(shown: ShownRoom) -> tuple[Length, ...]:
    """Return the lengths by which a fitter finds the marked points of a room; a corner needs none."""
    room = shown.basis.room
    return tuple(
        Length(offset.start, spot.point, _away(room, spot, offset.start))
        for spot in shown.spots
        for offset in setting_out(room, spot.point, spot.walls).offsets
        if offset.distance > SHORTEST
    )


def _away(room: Room, spot: ShownSpot, start: np.ndarray) -> np.ndarray | None:
    """Return the direction out of the room for a length that runs along the wall of its point."""
    for wall in spot.walls:
        normal = wall_normal(room, wall)
        if abs(float((start - spot.point) @ normal)) < SHORTEST:
            return -normal
    return None


@dataclass(frozen=True, slots=True)
class Dimension:
    """One dimension placed on paper: the measured points, the ends of its line, and its value."""

    measured: tuple[Point, Point]
    line: tuple[Point, Point]
    value: Text

    def items(self) -> Iterator[Item]:
        """Yield the dimension drawn."""
        for measured, end in zip(self.measured, self.line, strict=True):
            reach = dist(measured, end)
            if reach > WITNESS_GAP:
                unit = (end[0] - measured[0]) / reach, (end[1] - measured[1]) / reach
                yield Stroke(
                    (_moved(measured, unit, WITNESS_GAP), _moved(end, unit, WITNESS_OVER)), DIMENSION_PEN
                )
        start, end = self.line
        yield Stroke(self.line, DIMENSION_PEN)
        angle = atan2(end[1] - start[1], end[0] - start[0])
        yield from (_arrow(start, angle + pi), _arrow(end, angle))
        yield Fill((self.value.corners,), WHITE)
        yield self.value


def _moved(point: Point, unit: Point, by: float) -> Point:
    return point[0] + by * unit[0], point[1] + by * unit[1]


def _arrow(tip: Point, angle: float) -> Item:
    """Return an arrowhead that points along an angle, filled."""
    c, s = cos(angle), sin(angle)
    back = tip[0] - ARROW * c, tip[1] - ARROW * s
    side = -s * ARROW_HALF, c * ARROW_HALF
    return Fill(
        ((tip, (back[0] + side[0], back[1] + side[1]), (back[0] - side[0], back[1] - side[1])),), BLACK
    )


def dimensions_on_paper(
    lengths: Sequence[Length], view: PlanView, custom: Custom, taken: Occupied
) -> list[Dimension]:
    """Return dimensions for lengths, their values clear of what is taken, and enter them there."""
    placed = []
    for length in lengths:
        measured = view.point(length.start), view.point(length.end)
        line = measured if length.away is None else _beside(measured, length.away)
        value = _value(line, _in_words(float(np.hypot(*(length.end - length.start))), custom), taken)
        taken.add(value.box)
        placed.append(Dimension(measured, line, value))
    for dimension in placed:
        taken.add_line(*dimension.line)
    return placed


def _beside(measured: tuple[Point, Point], away: np.ndarray) -> tuple[Point, Point]:
    unit = float(away[0]), float(away[1])
    return _moved(measured[0], unit, STAND_OFF), _moved(measured[1], unit, STAND_OFF)


def _in_words(metres: float, custom: Custom) -> str:
    return feet_and_inches(metres) if custom.imperial else f"{round(metres * 1000)}"


def _value(line: tuple[Point, Point], words: str, taken: Occupied) -> Text:
    """Return the value where it is clear, in the order: over the line, under it, beyond its ends."""
    candidates = list(_places(line, words))
    return next((text for text in candidates if taken.takes(text.box)), candidates[0])


def _places(line: tuple[Point, Point], words: str) -> Iterator[Text]:
    (x0, y0), (x1, y1) = line
    length, angle = dist(*line), _readable(atan2(y1 - y0, x1 - x0))
    width = Text((0, 0), words).width
    along = (x1 - x0) / length, (y1 - y0) / length
    up = -sin(angle), cos(angle)
    inside = [length * share for share in (0.5, 0.3, 0.7)] if length > width + 2 * ARROW else []
    for station in (*inside, length + width / 2 + 2.0, -width / 2 - 2.0):
        for over in (TEXT_GAP, -TEXT_GAP - BODY):
            foot = _moved((x0, y0), along, station)
            yield Text(_moved(foot, up, over), words, anchor="middle", angle=angle)


def _readable(angle: float) -> float:
    """Return an angle of text read from below or from the right: above -90 and up to 90 degrees."""
    turned = (angle + pi / 2) % pi - pi / 2
    return turned if turned > -pi / 2 + 1e-9 else pi / 2
