"""The visibility kernel of a room: the points that see every wall.

Problem
    A point of a room sees all of every wall exactly when it lies on the inner side of the line of every wall edge,
    those of holes included. The kernel is therefore the intersection of the edges' closed half-planes: an area, a
    segment, a single point or empty.
Exactness
    Kind, bounding walls and conflict are those of the very doubles of the rings; vertices are rounded once, each
    coordinate to the nearest double. :meth:`Kernel.rationals` gives them unrounded.
Source
    Lee and Preparata, An optimal algorithm for finding the kernel of a polygon, J. ACM 26(3), 1979, for the problem;
    the method is that of :mod:`kernelscan.geometry.intersection`.
"""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from fractions import Fraction

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.areas import polygon_area, ring_area
from kernelscan.geometry.clipping import Shape, region_of
from kernelscan.geometry.convexity import is_surely_convex
from kernelscan.geometry.corners import corners_between
from kernelscan.geometry.halfplanes import HalfPlanes, wall_numbers, wall_rows
from kernelscan.geometry.intersection import FEW, Solution, corners_of, solve
from kernelscan.geometry.predicates import Row, Triple, exact_line, meet, rounded
from kernelscan.geometry.pruning import RingSource
from kernelscan.geometry.rings import Ring, as_rings

__all__ = ["Kernel", "Shape", "kernel_of_rings", "visibility_kernel"]


NO_POINTS: npt.NDArray[np.float64] = np.zeros((0, 2))
NO_WALLS: npt.NDArray[np.int64] = np.zeros((0, 2), dtype=np.int64)


@dataclass(frozen=True, slots=True, eq=False)
class Kernel:
    """The points of a room that see every wall.

    Attributes
    ----------
    kind
        What the kernel is: an area, a segment, a point or empty.
    vertices
        ``(k, 2)`` its corners, each coordinate the double nearest to the exact one: three or more,
        counter-clockwise, of an area; the two ends of a segment; one point; none.
    area
        Its area, in square units of the rings; infinity where it is beyond the doubles.
    walls
        ``(k, 2)`` walls as [ring, edge], ring 0 the outline, edge i from vertex i to the next. Of an area, wall i
        carries the side from vertex i to vertex i + 1. Of a segment or a point, three to four walls (two that run
        along the segment in opposite directions first) whose half-planes have nothing else in common. Of an empty
        kernel, none.
    conflict
        ``(2, 2)`` or ``(3, 2)`` walls whose half-planes have no common point; ``(0, 2)`` unless empty.
    """

    kind: Shape
    vertices: npt.NDArray[np.float64]
    area: float
    walls: npt.NDArray[np.int64]
    conflict: npt.NDArray[np.int64]
    _rings: tuple[Ring, ...] = field(default=(), repr=False)

    def rationals(self) -> tuple[tuple[Fraction, Fraction], ...]:
        """Return the exact corners, in the order of ``vertices``."""
        if self.kind == "empty":
            return ()
        rows = [_wall_row(self._rings, ring, edge) for ring, edge in self.walls.tolist()]
        if self.kind == "area":
            triples = _corners_around(rows)
        else:
            region = region_of(dict(enumerate(rows)))
            triples = region.exact_corners() if region is not None else []
        return tuple((Fraction(x, w), Fraction(y, w)) for x, y, w in triples)

    def half_planes(self) -> HalfPlanes:
        """Return the half-planes of ``walls``: what they have in common is the kernel, unless it is empty."""
        rows = [_wall_row(self._rings, ring, edge) for ring, edge in self.walls.tolist()]
        return HalfPlanes(np.array(rows, dtype=np.float64).reshape(-1, 6), self.walls)


def visibility_kernel(outline: npt.ArrayLike, holes: Iterable[npt.ArrayLike] = ()) -> Kernel:
    """Return the kernel of a room from points as they come.

    Parameters
    ----------
    outline
        ``(n, 2)`` array-like, in either direction; edges are counted as :func:`~kernelscan.geometry.rings.as_ring`
        arranges it, counter-clockwise from the first point.
    holes
        What stands in the room and blocks sight, each ``(m, 2)``.

    Raises
    ------
    GeometryError
        If these are not the rings of a room.
    """
    return kernel_of_rings(as_rings(outline, holes))


def kernel_of_rings(rings: Sequence[Ring]) -> Kernel:
    """Return the kernel of a room whose rings are already made: the outline, and then the holes.

    Nothing is checked; see :func:`~kernelscan.geometry.rings.as_rings`.
    """
    count = sum([len(ring) for ring in rings])
    if count <= FEW:
        return _of_few(rings)
    if len(rings) == 1 and is_surely_convex(rings[0]):
        return _whole(rings[0])
    source = RingSource(rings)
    solution = solve(source)
    if solution.kind == "empty":
        conflict = wall_numbers(rings, np.array(solution.conflict, dtype=np.int64))
        return Kernel("empty", NO_POINTS, 0.0, NO_WALLS, conflict, tuple(rings))
    walls = _named(rings, solution.sides.tolist())
    vertices, area = _corners_of_many(source, solution)
    return Kernel(solution.kind, vertices, area, walls, NO_WALLS, tuple(rings))


def _whole(ring: Ring) -> Kernel:
    """A convex room."""
    walls = np.zeros((len(ring), 2), dtype=np.int64)
    walls[:, 1] = np.arange(len(ring))
    return Kernel("area", ring, ring_area(ring), walls, NO_WALLS, (ring,))


def _of_few(rings: Sequence[Ring]) -> Kernel:
    region = region_of(dict(enumerate(wall_rows(rings))))
    assert region is not None  # the walls around a room are not all parallel
    corners = region.exact_corners()
    vertices = [rounded(corner) for corner in corners]
    walls = _named(rings, region.names if region.shape == "area" else region.proof)
    if region.shape == "empty":
        return Kernel("empty", NO_POINTS, 0.0, NO_WALLS, walls, tuple(rings))
    area = polygon_area(vertices, lambda: corners) if region.shape == "area" else 0.0
    return Kernel(region.shape, np.array(vertices), area, walls, NO_WALLS, tuple(rings))


def _corners_of_many(source: RingSource, solution: Solution) -> tuple[npt.NDArray[np.float64], float]:
    sides = source.rows(solution.sides)
    if solution.corners is not None:
        row = dict(zip(solution.sides.tolist(), sides.tolist(), strict=True))
        triples = corners_of(solution.corners, row.__getitem__)
        return np.array([rounded(triple) for triple in triples]), 0.0
    if len(sides) <= FEW:
        triples = _corners_around(sides.tolist())
        points = [rounded(triple) for triple in triples]
        return np.array(points), polygon_area(points, lambda: triples)
    before = np.roll(sides, 1, axis=0)
    vertices = sides[:, :2].copy()
    apart = np.flatnonzero((before[:, 4:] != vertices).any(axis=1))
    vertices[apart] = corners_between(before[apart], sides[apart])
    return vertices, polygon_area(vertices.tolist(), lambda: _corners_around(sides.tolist()))


def _corners_around(sides: Sequence[Row]) -> list[Triple]:
    """Return where each side meets the one before it."""
    lines = [exact_line(row) for row in sides]
    return [meet(lines[k - 1], line) for k, line in enumerate(lines)]


def _named(rings: Sequence[Ring], places: Sequence[int]) -> npt.NDArray[np.int64]:
    """Return the walls at a few places counted through all the rings."""
    if len(rings) == 1:
        return np.array([(0, place) for place in places], dtype=np.int64)
    return wall_numbers(rings, np.array(places, dtype=np.int64))


def _wall_row(rings: Sequence[Ring], ring: int, edge: int) -> Row:
    points = rings[ring]
    (px, py), (hx, hy) = points[edge].tolist(), points[(edge + 1) % len(points)].tolist()
    return px, py, px, py, hx, hy
