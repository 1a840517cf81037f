"""The window through which a sheet shows the plan: metres of the building to millimetres of paper, and back."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from kernelscan.markup.paper import Scale
from kernelscan.markup.scene import Box, Point, points_of
from kernelscan.plan import Plan, Room

__all__ = ["PlanView", "clipped_polyline", "clipped_segment", "plan_extent", "thinned"]


@dataclass(frozen=True, slots=True)
class PlanView:
    """A part of the paper, the scale there, and the point of the building that lies in its middle.

    Attributes
    ----------
    box
        The part of the paper that shows the plan, in millimetres.
    scale
        What a metre is there.
    middle
        The point of the plan, in metres, at the middle of the box.
    """

    box: Box
    scale: Scale
    middle: Point

    def to_paper(self, points: np.ndarray) -> np.ndarray:
        """Return ``(n, 2)`` or ``(2,)`` metres of the plan as millimetres of paper.

        The middle is taken off first, so that coordinates of millions of metres keep their millimetres.
        """
        placed: np.ndarray = (np.asarray(points) - self.middle) * self.scale.mm_per_metre + self.box.centre
        return placed

    def box_on_paper(self, box: Box) -> Box:
        """Return a box of the plan, in metres, on the paper."""
        (left, bottom), (right, top) = self.to_paper(np.array([box[:2], box[2:]]))
        return Box(float(left), float(bottom), float(right), float(top))

    def to_plan(self, point: Point) -> Point:
        """Return a point of the paper in metres of the plan."""
        x, y = (np.array(point) - self.box.centre) / self.scale.mm_per_metre + self.middle
        return float(x), float(y)

    def point(self, point: np.ndarray) -> Point:
        """Return one point of the plan on the paper."""
        x, y = self.to_paper(point)
        return float(x), float(y)

    def ring(self, ring: np.ndarray) -> tuple[Point, ...]:
        """Return a ring or a line of the plan on the paper."""
        return points_of(self.to_paper(ring))


def plan_extent(plan: Plan, rooms: Sequence[Room]) -> Box:
    """Return the box, in metres, around the rooms; around the linework where there are none, or of 10 m.

    The drawing's own linework is not asked where there are rooms: one stray line far away would shrink the plan
    to a speck.
    """
    arrays = [room.outline for room in rooms] or [line for line in plan.linework if len(line)]
    if not arrays:
        return Box(0.0, 0.0, 10.0, 10.0)
    points = np.concatenate(arrays)
    (left, bottom), (right, top) = points.min(axis=0), points.max(axis=0)
    return Box(float(left), float(bottom), float(right), float(top))


def thinned(points: np.ndarray, nearest: float) -> np.ndarray:
    """Return a line without the points that lie nearer than ``nearest`` to the last one kept; its ends stay."""
    if len(points) < 3:
        return points
    kept = [0]
    for i in range(1, len(points) - 1):
        if np.abs(points[i] - points[kept[-1]]).max() >= nearest:
            kept.append(i)
    return points[[*kept, len(points) - 1]]


def clipped_polyline(points: np.ndarray, box: Box) -> Iterator[tuple[Point, ...]]:
    """Yield the pieces of a line that lie in a box; segments that meet stay one piece."""
    piece: list[Point] = []
    for start, end in pairwise(points_of(points)):
        inside = clipped_segment(start, end, box)
        if inside is None:
            continue
        if not piece or piece[-1] != inside[0]:
            if piece:
                yield tuple(piece)
            piece = [inside[0]]
        piece.append(inside[1])
    if piece:
        yield tuple(piece)


def clipped_segment(start: Point, end: Point, box: Box) -> tuple[Point, Point] | None:
    """Return the part of a segment that lies in a box, or ``None`` where it only touches (Liang and Barsky 1984)."""
    first, last = 0.0, 1.0
    for axis, (low, high) in enumerate(((box.left, box.right), (box.bottom, box.top))):
        step = end[axis] - start[axis]
        if step == 0.0:
            if not low <= start[axis] <= high:
                return None
            continue
        enter, leave = sorted(((low - start[axis]) / step, (high - start[axis]) / step))
        first, last = max(first, enter), min(last, leave)
    if first >= last:
        return None
    return _along(start, end, first), _along(start, end, last)


def _along(start: Point, end: Point, t: float) -> Point:
    """Return the point at a fraction of a segment, the ends themselves to the last bit."""
    if t in (0.0, 1.0):
        return end if t else start
    return start[0] + t * (end[0] - start[0]), start[1] + t * (end[1] - start[1])
