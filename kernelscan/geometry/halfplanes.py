"""Half-planes: those of a room's walls, also moved inward and turned.

Problem
    Every wall keeps the closed half-plane on its inner side. People also ask for walls moved inward by a distance
    ("and the fitter may be that far off") and for walls turned about each of their two ends ("and no wall is seen at
    less than that angle"), and for both at once.
Method
    A half-plane is kept as six doubles: a point p of the border and the two ends t -> h of its way; it holds the
    points on the left of the line through p in the direction h - t. A wall from a to b is p = t = a, h = b, so
    nothing is rounded. A moved wall keeps its way, and so stays parallel to others; only p is rounded. A wall
    turned by the angle g gives two half-planes: about a, counter-clockwise by g, and about b, clockwise by g; the
    points that lie in both see every point of the wall at an angle of at least g to the wall. There p is the wall's
    end, exact, and the way is rounded. With both, the turned half-planes are moved. Everything after this module is
    exact for the six doubles as they are stored.
Degenerate cases
    Distances are taken from 0 up and angles from 0 to below a right angle, at which no point is left.
Letters
    a, b the ends of a wall; d its way b - a; p, t, h as above.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from math import cos, inf, pi, sin

import numpy as np
import numpy.typing as npt

from kernelscan.errors import GeometryError
from kernelscan.geometry.predicates import Row
from kernelscan.geometry.rings import Ring

__all__ = ["HalfPlanes", "half_planes", "wall_half_planes", "wall_numbers", "wall_rows"]


@dataclass(frozen=True, slots=True, eq=False)
class HalfPlanes:
    """A set of closed half-planes.

    Attributes
    ----------
    rows
        ``(m, 6)`` doubles px, py, tx, ty, hx, hy: the points left of the line through p in the direction h - t.
    walls
        ``(m, 2)`` the wall, [ring, edge], that each comes from; [0, row] for half-planes of no room.
    """

    rows: npt.NDArray[np.float64]
    walls: npt.NDArray[np.int64]

    def __len__(self) -> int:
        """How many there are."""
        return len(self.rows)

    @property
    def ways(self) -> npt.NDArray[np.float64]:
        """``(m, 2)``: the directions h - t, each component rounded once."""
        return self.rows[:, 4:] - self.rows[:, 2:4]


def half_planes(rows: npt.ArrayLike) -> HalfPlanes:
    """Return half-planes of no room, given as points and ways.

    Parameters
    ----------
    rows
        ``(m, 4)``: a point of the border and a way, the half-plane on its left; or ``(m, 6)`` as they are kept.

    Raises
    ------
    GeometryError
        For another shape, numbers that are not finite, and a way of no length.
    """
    array = np.array(rows, dtype=np.float64)
    if array.ndim != 2 or array.shape[1] not in (4, 6):
        raise GeometryError(f"half-planes need an (m, 4) or (m, 6) array, got the shape {array.shape}")
    if array.shape[1] == 4:
        array = np.column_stack([array[:, :2], np.zeros_like(array[:, :2]), array[:, 2:]])
    if not np.isfinite(array).all():
        raise GeometryError("half-planes need finite numbers")
    if len(array) and (array[:, 2:4] == array[:, 4:]).all(axis=1).any():
        raise GeometryError("a half-plane needs a way of some length")
    numbers = np.arange(len(array))
    return HalfPlanes(array, np.column_stack([np.zeros_like(numbers), numbers]))


def wall_half_planes(rings: Sequence[Ring], inward: float = 0.0, grazing: float = 0.0) -> HalfPlanes:
    """Return the half-planes of a room's walls, one a wall, or two a wall if they are turned.

    Parameters
    ----------
    rings
        The outline, counter-clockwise, and the holes, clockwise.
    inward
        The distance, 0 or more, by which every wall is moved inward.
    grazing
        The angle in radians, from 0 to below a right angle, by which every wall is turned about its two ends.

    Raises
    ------
    GeometryError
        For a distance or an angle outside these limits.
    """
    if not 0 <= inward < inf:
        raise GeometryError(f"walls can be moved inward by a distance of 0 or more, got {inward}")
    if not 0 <= grazing < pi / 2:
        raise GeometryError(f"walls can be turned by 0 up to a right angle, got {grazing} radians")
    starts, ends = np.concatenate(rings), np.concatenate([np.roll(ring, -1, axis=0) for ring in rings])
    walls = wall_numbers(rings, np.arange(len(starts)))
    if grazing:
        ways, none = ends - starts, np.zeros_like(starts)
        about_start = np.column_stack([starts, none, _turned(ways, grazing)])
        about_end = np.column_stack([ends, none, _turned(ways, -grazing)])
        rows, walls = np.concatenate([about_start, about_end]), np.concatenate([walls, walls])
    else:
        rows = np.column_stack([starts, starts, ends])
    if inward:
        rows[:, :2] += inward * _normals(rows[:, 4:] - rows[:, 2:4])
    return HalfPlanes(rows, walls)


def wall_numbers(rings: Sequence[Ring], places: npt.NDArray[np.intp]) -> npt.NDArray[np.int64]:
    """Return the walls, ``(m, 2)`` [ring, edge], at places counted through all the rings."""
    starts = np.cumsum([0, *(len(ring) for ring in rings[:-1])])
    ring = np.searchsorted(starts, places, side="right") - 1
    return np.column_stack([ring, places - starts[ring]]).astype(np.int64)


def wall_rows(rings: Sequence[Ring]) -> list[Row]:
    """Return the half-planes of a small room's walls as plain rows."""
    rows: list[Row] = []
    for ring in rings:
        points = ring.tolist()
        points.append(points[0])
        rows += [(px, py, px, py, hx, hy) for (px, py), (hx, hy) in pairwise(points)]
    return rows


def _normals(ways: npt.NDArray[np.float64]) -> npt.NDArray[np.float64]:
    """Return the unit vectors to the left of the ways."""
    units = ways / np.abs(ways).max(axis=1)[:, None]
    units /= np.hypot(units[:, 0], units[:, 1])[:, None]
    return np.column_stack([-units[:, 1], units[:, 0]])


def _turned(ways: npt.NDArray[np.float64], angle: float) -> npt.NDArray[np.float64]:
    c, s = cos(angle), sin(angle)
    return np.column_stack([c * ways[:, 0] - s * ways[:, 1], s * ways[:, 0] + c * ways[:, 1]])
