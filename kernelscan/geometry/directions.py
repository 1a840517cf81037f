"""The directions from an eye to points, in exact counter-clockwise order.

Problem
    Sort points around an eye, and number their directions so that points on one ray get one number.
Method
    Float angles sort all but those that differ by less than a bound on their error; such neighbours are compared by
    the exact orientation of the eye and the two points, and a cluster found out of order is sorted anew by it.
    The order starts just past the direction of -x. Whether a point lies below the eye is exact in floats (a
    difference of doubles has the right sign), so that nothing near that cut is misplaced.
Cost
    One sort, n log n, and an exact comparison for each pair that is nearly or truly in line with the eye.
Degenerate cases
    Points in line with the eye on one side share a number; on opposite sides they do not. A point at the eye has no
    direction and must be left out.
Letters
    c the eye; v = point - c.
"""

from functools import cmp_to_key
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.signs import orientations

__all__ = ["Directions", "directions_around"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.intp]

_ANGLE_ERROR = 1e-14
"""Above the error of a float angle: two roundings of the offset and at most 2 units in the last place of pi."""


class Directions(NamedTuple):
    """The distinct directions around an eye.

    Attributes
    ----------
    rank
        ``(n,)`` for each point the number of its direction, counter-clockwise.
    leader
        ``(k,)`` for each direction one of its points.
    unit
        ``(k, 2)`` for each direction its unit vector, rounded.
    """

    rank: Indices
    leader: Indices
    unit: Floats


def directions_around(c: Floats, points: Floats) -> Directions:
    """Return the directions from the eye c to the points, ``(n, 2)``, none of them at the eye."""
    v = points - c
    angle = np.arctan2(v[:, 1] + 0.0, v[:, 0])
    order = np.argsort(angle)
    close = np.flatnonzero(np.diff(angle[order]) < _ANGLE_ERROR)
    differs = np.ones(len(points), dtype=bool)
    if len(close):
        turns = orientations(c, points[order[close]], points[order[close + 1]])
        if (turns < 0).any():
            _sort_clusters(order, close, c, points)
            turns = orientations(c, points[order[close]], points[order[close + 1]])
        differs[close + 1] = turns != 0
    rank = np.empty(len(points), dtype=np.intp)
    rank[order] = np.cumsum(differs) - 1
    leader = order[differs]
    toward = v[leader]
    return Directions(rank, leader, toward / np.hypot(toward[:, 0], toward[:, 1])[:, None])


def _sort_clusters(order: Indices, close: Indices, c: Floats, points: Floats) -> None:
    """Sort anew, in place and exactly, each stretch of the order whose neighbours are close."""

    def clockwise(a: int, b: int) -> int:
        return -int(orientations(c, points[a : a + 1], points[b : b + 1])[0])

    for stretch in np.split(close, np.flatnonzero(np.diff(close) > 1) + 1):
        span = slice(int(stretch[0]), int(stretch[-1]) + 2)
        order[span] = sorted(order[span].tolist(), key=cmp_to_key(clockwise))
