"""The point of a room that sees most floor, as far as a short search finds it.

Problem
    Where no point sees every wall, which one misses least floor? No exact method of any use is known for that; the
    answer here is the best of the points that were tried, and is never called more than that.
Method
    Points of a square grid over the room are first counted: how many of the others can each be joined with by a line
    that crosses no wall, in doubles. Then points are tried, that is, the floor that they see is measured exactly:
    likely points handed in, those of the grid that see most others, and the neighbours of the best, nearer and nearer.
    The search ends early at a point that sees all but a thousandth of the floor. Everything is deterministic.
Cost
    O(m^2 n) for the count, m about ``ON_GRID`` and n walls, with fewer points where walls are many; and at most
    ``TRIED`` views, n log n each.
"""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from itertools import islice
from math import ceil, sqrt

import numpy as np
import numpy.typing as npt

from kernelscan.errors import GeometryError
from kernelscan.geometry import shapes
from kernelscan.geometry.rings import signed_area
from kernelscan.geometry.shapes import Patch
from kernelscan.geometry.visible import visible_from
from kernelscan.plan import Room

__all__ = ["BestPoint", "best_point"]

Floats = npt.NDArray[np.float64]

ON_GRID = 80
"""About how many points of the grid lie in a room of few walls."""

IN_BOX = 4000
"""No more points than about this lie in the box around a room."""

COUNTED = 400_000
"""No more lines between points are held against walls than this."""

PROMISING = 6
"""So many points of the grid are tried."""

TRIED = 26
"""No more points than this are tried."""

ENOUGH = 0.999
"""A point that sees so much of the floor is good enough: the search ends."""

NEAREST = 0.02
"""Metres: nearer neighbours are not worth a try."""

LEAST_GAIN = 1e-9
"""Square metres: floors that differ by less are equal."""

AROUND = np.array([(x, y) for y in (-1, 0, 1) for x in (-1, 0, 1) if x or y], dtype=np.float64)
"""The eight neighbours of a point."""


@dataclass(frozen=True, slots=True, eq=False)
class BestPoint:
    """The best of some points.

    Attributes
    ----------
    point
        ``(2,)`` metres.
    floor
        The floor that it sees, in square metres.
    tried
        How many points were tried.
    """

    point: Floats
    floor: float
    tried: int

    @property
    def words(self) -> str:
        """What may be claimed of it."""
        return f"best of {self.tried} points tried"


def best_point(room: Room, likely: Iterable[Floats] = ()) -> BestPoint:
    """Return the point that sees most floor among likely points, ``(2,)`` each, a grid, and the best one's neighbours.

    Likely points outside the room are passed over.
    """
    inner = np.array(shapes.interior_point(room.outline, room.holes))
    best, spacing, enough = _best(room, [*likely, inner, room.outline[0]]), _spacing(room), ENOUGH * room.area
    if best.floor < enough:
        best = _better(best, _best(room, islice(_promising(room, spacing), PROMISING)))
    while best.floor < enough and spacing > NEAREST and best.tried + len(AROUND) <= TRIED:
        near = _better(best, _best(room, best.point + spacing / 2 * AROUND))
        spacing = spacing if near.floor > best.floor else spacing / 2
        best = near
    return best


def _best(room: Room, points: Iterable[Floats]) -> BestPoint:
    """The best of the points that are in the room; of equals the first."""
    best = BestPoint(np.zeros(2), 0.0, 0)
    for point in points:
        try:
            floor = signed_area(visible_from(room.rings, point))
        except GeometryError:  # not in the room
            continue
        best = _better(best, BestPoint(point, floor, 1))
    return best


def _better(one: BestPoint, other: BestPoint) -> BestPoint:
    """The better of two, of equals the first; all points tried count."""
    better = other if other.floor > one.floor + LEAST_GAIN else one
    return BestPoint(better.point, better.floor, one.tried + other.tried)


def _promising(room: Room, spacing: float) -> Iterator[Floats]:
    """The points of a grid that see most others, best first; none beside one that was given already."""
    grid = _grid(room, spacing)
    grid = grid[shapes.covers_points(Patch(room.outline, room.holes), grid)]
    seen = _seen_of_each_other(room, grid).sum(axis=1)
    while len(grid):
        best = int(seen.argmax())
        yield grid[best]
        apart = np.abs(grid - grid[best]).max(axis=1) > 1.5 * spacing
        grid, seen = grid[apart], seen[apart]


def _spacing(room: Room) -> float:
    """The pitch of the grid; a thin room that runs aslant has fewer points in it, since its box has no more."""
    count = min(ON_GRID, sqrt(2 * COUNTED / room.corner_count))
    box = float(np.ptp(room.outline, axis=0).prod())
    return sqrt(max(room.area / count, box / IN_BOX))


def _grid(room: Room, spacing: float) -> Floats:
    """The points of a square grid in the middle of the room's box, ``(m, 2)``."""
    low, high = room.outline.min(axis=0), room.outline.max(axis=0)
    columns, rows = (ceil(extent / spacing) for extent in high - low)
    steps = np.stack(np.meshgrid(np.arange(columns), np.arange(rows)), axis=-1).reshape(-1, 2)
    return np.asarray((low + high) / 2 + spacing * (steps - (np.array([columns, rows]) - 1) / 2))


def _seen_of_each_other(room: Room, points: Floats) -> npt.NDArray[np.bool_]:
    """Whether a line from point i to point j crosses no wall, ``(m, m)``; in doubles, a hint and no more."""
    a = np.concatenate(room.rings)
    b = np.concatenate([np.roll(ring, -1, axis=0) for ring in room.rings])
    behind = _sides(a, b, points).T
    i, j = np.triu_indices(len(points), 1)
    beside = _sides(points[i], points[j], a), _sides(points[i], points[j], b)
    crossed = ((behind[i] != behind[j]) & (beside[0] != beside[1])).any(axis=1)
    seen = np.ones((len(points), len(points)), dtype=bool)
    seen[i, j] = seen[j, i] = ~crossed
    return seen


def _sides(p: Floats, q: Floats, points: Floats) -> npt.NDArray[np.bool_]:
    """Whether each point lies to the left of each line p -> q: ``(lines, points)``."""
    d = q - p
    return np.asarray(
        d[:, 0, None] * (points[:, 1] - p[:, 1, None]) > d[:, 1, None] * (points[:, 0] - p[:, 0, None])
    )
