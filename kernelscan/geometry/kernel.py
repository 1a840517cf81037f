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

from kernelscan.geometry.clipping import Shape, region_of
from kernelscan.geometry.halfplanes import wall_numbers, wall_rows
from kernelscan.geometry.predicates import Row, exact_line, meet, rounded
from kernelscan.geometry.rings import Ring, as_rings

__all__ = ["Kernel", "Shape", "kernel_of_rings", "visibility_kernel"]


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
            lines = [exact_line(row) for row in rows]
            triples = [meet(lines[k - 1], line) for k, line in enumerate(lines)]
        else:
            triples = region_of(rows).exact_corners()
        return tuple((Fraction(x, w), Fraction(y, w)) for x, y, w in triples)


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
    region = region_of(wall_rows(rings))
    corners = [rounded(corner) for corner in region.exact_corners()]
    vertices = np.array(corners, dtype=np.float64).reshape(-1, 2)
    sides = region.names if region.shape == "area" else region.proof
    walls = wall_numbers(rings, np.array(sides, dtype=np.intp))
    none = walls[:0]
    if region.shape == "empty":
        return Kernel("empty", vertices, 0.0, none, walls, tuple(rings))
    return Kernel(region.shape, vertices, region.area(), walls, none, tuple(rings))


def _wall_row(rings: Sequence[Ring], ring: int, edge: int) -> Row:
    points = rings[ring]
    (px, py), (hx, hy) = points[edge].tolist(), points[(edge + 1) % len(points)].tolist()
    return px, py, px, py, hx, hy
