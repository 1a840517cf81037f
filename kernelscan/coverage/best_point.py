"""The point of a room that sees most floor, as far as a short search finds it.

Problem
    Where no point sees every wall, which one misses least floor? No exact method of any use is known for that; the
    answer here is the best of the points that were tried, and is never called more than that.
Method
    The floor seen is exact for each point. First some likely points and those of a square grid over the room are tried;
    then the neighbours of the best one, nearer and nearer. Everything is deterministic.
Cost
    At most ``TRIED`` views, n log n each for n walls.
"""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from math import ceil, sqrt

import numpy as np
import numpy.typing as npt

from kernelscan.geometry import shapes
from kernelscan.geometry.nesting import side_of_ring
from kernelscan.geometry.rings import Ring, signed_area
from kernelscan.geometry.visible import visible_regions
from kernelscan.plan import Room

__all__ = ["BestPoint", "best_point"]

Floats = npt.NDArray[np.float64]

ON_GRID = 24
"""About how many points of the grid lie in a room."""

TRIED = 60
"""No more points than this are tried."""

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
    """Return the point that sees most floor among likely points, each ``(2,)``, a grid, and the best one's neighbours.

    Likely points outside the room are passed over.
    """
    spacing = sqrt(room.area / ON_GRID)
    middle = np.array(shapes.interior_point(room.outline, room.holes))
    best = _best(room, [*likely, middle, *_grid(room, spacing)][: TRIED // 2])
    while spacing > NEAREST and best.tried + len(AROUND) <= TRIED:
        near = _best(room, best.point + spacing / 2 * AROUND)
        better = near if near.floor > best.floor + LEAST_GAIN else best
        spacing = spacing if better is near else spacing / 2
        best = BestPoint(better.point, better.floor, best.tried + near.tried)
    return best


def _best(room: Room, points: Iterable[Floats]) -> BestPoint:
    """The best of the points that are in the room; of equals the first."""
    eyes = [point for point in points if _is_inside(room.rings, point)]
    floors = [signed_area(region) for region in visible_regions(room.rings, eyes)]
    if not eyes:
        return BestPoint(np.zeros(2), 0.0, 0)
    first = next(k for k, floor in enumerate(floors) if floor >= max(floors) - LEAST_GAIN)
    return BestPoint(eyes[first], floors[first], len(eyes))


def _grid(room: Room, spacing: float) -> Iterator[Floats]:
    """The points of a square grid in the middle of the room's box."""
    low, high = room.outline.min(axis=0), room.outline.max(axis=0)
    columns, rows = (ceil(extent / spacing) for extent in high - low)
    for row in range(rows):
        for column in range(columns):
            steps = np.array([column - (columns - 1) / 2, row - (rows - 1) / 2])
            yield (low + high) / 2 + spacing * steps


def _is_inside(rings: Sequence[Ring], point: Floats) -> bool:
    """Whether a point is strictly within the outline and outside the holes; exact."""
    place = point.tolist()
    return side_of_ring(rings[0], place) > 0 and all(side_of_ring(hole, place) < 0 for hole in rings[1:])
