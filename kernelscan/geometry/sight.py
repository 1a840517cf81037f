"""The line of sight from one eye: which walls it meets first, and so the region it sweeps.

Problem
    In a floor with holes, find the points that a straight line inside the floor joins with a given eye.
Method
    Every wall has the floor on its left. Along a ray from the eye the first wall crossed is one with the eye
    strictly on its left, a facing wall. The ends of the facing walls, sorted around the eye, make sectors in
    which the nearest facing wall is always the same one; :mod:`kernelscan.geometry.envelope` finds it.
    Neighbouring sectors with one nearest wall are joined; the pieces, in order, are the region's boundary, with a
    stretch of a ray (a window) wherever two pieces do not meet.
Exact and rounded
    Exact: whether the eye is in the room, which walls face it, the order of the directions, which wall is
    nearest, whether a wall is seen whole. Rounded: the feet of windows, that is the points where a ray past a corner
    meets the wall behind; each is within a relative 1e-10 of the distance from the eye, nearly always 1e-15.
    Corners of the region that are corners of the room are the very same doubles.
Cost
    O(n log n), all of it in array passes.
Degenerate cases
    An eye on a wall or at a corner sees only into the floor's own angle there and is a corner of the region. Where
    rings touch in the eye, the region comes back to it once for each angle. A line of sight may graze walls and
    corners. Lines seen past two corners on opposite sides have no area and are left out of the region. A wall in
    line with the eye is seen, edge-on, if the region reaches along it, as the kernel has it.
Source
    The radial sweep of Asano, "An efficient algorithm for finding the visibility polygon for a polygonal region
    with holes", 1985, with the table of blocks in place of the sweep's tree.
Letters
    c the eye; p -> q a wall; e a wall's number through all rings; D a direction's number.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

import numpy as np
import numpy.typing as npt

from kernelscan.errors import GeometryError
from kernelscan.geometry.directions import Directions, directions_around
from kernelscan.geometry.envelope import nearest_edges
from kernelscan.geometry.nesting import crossings_right_of, on_edges
from kernelscan.geometry.rings import Ring
from kernelscan.geometry.signs import ROUNDOFF, SMALLEST, orientations

__all__ = ["Sight", "Walls"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.intp]

_FOOT_ERROR = 1e-10
"""A foot whose floats may be off by more, as a part of its distance, is worked out in rational arithmetic."""


@dataclass(frozen=True, slots=True, eq=False)
class Walls:
    """All walls of a room in one row.

    Attributes
    ----------
    p, q
        ``(n, 2)`` ends, the floor on the left.
    following, previous
        ``(n,)`` the neighbours in the ring; q is the p of the following wall.
    ring, start
        ``(n,)`` the ring of each wall, and the number of that ring's first wall.
    """

    p: Floats
    q: Floats
    following: Indices
    previous: Indices
    ring: Indices
    start: Indices

    @classmethod
    def of(cls, rings: Sequence[Ring]) -> "Walls":
        """Put the walls of all rings in one row, ring after ring."""
        sizes = [len(ring) for ring in rings]
        p = np.concatenate(rings)
        ring = np.repeat(np.arange(len(rings)), sizes)
        starts = np.cumsum([0, *sizes[:-1]])
        following = np.arange(1, len(p) + 1)
        following[starts + sizes - 1] = starts
        previous = np.empty_like(following)
        previous[following] = np.arange(len(p))
        return cls(p, p[following], following, previous, ring, starts[ring])


class Sight:
    """One eye in one room: the facing walls, and which of them is nearest in which sector."""

    def __init__(self, walls: Walls, eye: Floats) -> None:
        self.walls, self.eye = walls, eye
        self.side = orientations(walls.p, walls.q, eye)
        self.under = self._walls_at_eye()
        self.facing = np.flatnonzero(self.side > 0)
        self.edge_on = np.flatnonzero(self.side == 0)
        self.directions, self.rank = self._sorted_ends()
        self.nearest = self._nearest()

    def _walls_at_eye(self) -> Indices:
        """Return the walls that the eye stands on; an error if it is not in the room at all."""
        known = self.walls.p, self.walls.q, self.side, self.eye
        under = np.flatnonzero(on_edges(*known))
        if not len(under) and crossings_right_of(*known) % 2 == 0:
            x, y = self.eye
            raise GeometryError(f"the eye ({x:.9g}, {y:.9g}) is outside the room or inside a hole")
        return under

    def _sorted_ends(self) -> tuple[Directions, Indices]:
        """Return the directions of the ends of facing and in-line walls, and each end's number."""
        wanted = np.zeros(len(self.walls.p), dtype=bool)
        for edges in (self.facing, self.edge_on):
            wanted[edges] = True
            wanted[self.walls.following[edges]] = True
        wanted[self.edge_on] &= (self.walls.p[self.edge_on] != self.eye).any(axis=1)
        ends = np.flatnonzero(wanted)
        found = directions_around(self.eye, self.walls.p[ends])
        rank = np.full(len(wanted), -1, dtype=np.intp)
        rank[ends] = found.rank
        return Directions(rank, ends[found.leader], found.unit), rank

    def _nearest(self) -> Indices:
        """Return for each sector its nearest facing wall, -1 where the eye stands against a wall."""
        walls, facing = self.walls, self.facing
        found = nearest_edges(
            self.eye,
            walls.p[facing],
            walls.q[facing],
            self.rank[facing],
            self.rank[walls.following[facing]],
            self.directions.unit,
        )
        nearest = np.where(found >= 0, facing[found], -1)
        for first, last in self._angles_at_eye():
            outside = (np.arange(len(nearest)) - first) % len(nearest) >= (last - first) % len(nearest)
            nearest[outside] = -1
        return nearest

    def _angles_at_eye(self) -> list[tuple[int, int]]:
        """Return, for each ring that the eye stands on, from which direction to which the floor lies there."""
        angles = []
        for e in self.under.tolist():
            if (self.walls.p[e] == self.eye).all():
                arriving = self.walls.previous[e]
                angles.append((int(self.rank[self.walls.following[e]]), int(self.rank[arriving])))
            elif (self.walls.q[e] != self.eye).any():
                angles.append((int(self.rank[self.walls.following[e]]), int(self.rank[e])))
        return angles

    def _runs(self) -> tuple[Indices, Indices, Indices]:
        """Return the pieces of the boundary: each one's wall and the directions where it starts and stops."""
        first = np.flatnonzero(self.nearest != np.roll(self.nearest, 1))
        stop = np.roll(first, -1)
        wall = self.nearest[first]
        seen = wall >= 0
        return wall[seen], first[seen], stop[seen]

    def region(self) -> Ring:
        """Return the boundary of what is seen."""
        wall, first, stop = self._runs()
        corners = np.empty((len(wall), 3, 2))
        corners[:, 0], corners[:, 1] = self._ends_of(wall, first, stop)
        corners[:, 2] = self.eye
        wanted = np.ones((len(wall), 3), dtype=bool)
        wanted[:, 2] = stop != np.roll(first, -1)
        ring = corners[wanted]
        region: Ring = ring[(ring != np.roll(ring, 1, axis=0)).any(axis=1)]
        region.flags.writeable = False
        return region

    def pieces(self) -> tuple[Indices, Floats]:
        """Return the pieces of wall that are seen, ``(k,)`` walls and ``(k, 2)`` spans, in the order of the walls."""
        wall, first, stop = self._runs()
        spans = np.column_stack([self._along(wall, end) for end in self._ends_of(wall, first, stop)])
        flat = self._seen_edge_on()
        wall = np.concatenate([wall, flat])
        spans = np.concatenate([spans, np.tile([0.0, 1.0], (len(flat), 1))])
        order = np.lexsort([spans[:, 0], wall])
        return wall[order], spans[order]

    def _ends_of(self, wall: Indices, first: Indices, stop: Indices) -> tuple[Floats, Floats]:
        """Return both ends of each piece: the wall's own, or the foot of a window."""
        following = self.walls.following[wall]
        starts, stops = self.walls.p[wall], self.walls.p[following]
        cut = self.rank[wall] != first
        starts[cut] = self._feet(wall[cut], first[cut])
        cut = self.rank[following] != stop
        stops[cut] = self._feet(wall[cut], stop[cut])
        return starts, stops

    def _feet(self, wall: Indices, direction: Indices) -> Floats:
        """Return where the rays in the given directions meet the lines of the given walls."""
        p, q = self.walls.p[wall], self.walls.q[wall]
        past = self.walls.p[self.directions.leader[direction]]
        with np.errstate(all="ignore"):
            v, d, ray = p - self.eye, q - p, past - self.eye
            height, height_error = _cross(v, d)
            slope, slope_error = _cross(ray, d)
            feet = self.eye + (height / slope)[:, None] * ray
            loose = ~(height_error / np.abs(height) + slope_error / np.abs(slope) < _FOOT_ERROR)
        for k in np.flatnonzero(loose).tolist():
            feet[k] = _exact_foot(self.eye, p[k], q[k], past[k])
        return np.asarray(feet)

    def _along(self, wall: Indices, points: Floats) -> Floats:
        """Return where along their walls points lie, 0 to 1."""
        d, v = self.walls.q[wall] - self.walls.p[wall], points - self.walls.p[wall]
        axis = np.abs(d).argmax(axis=1)[:, None]
        ratio = np.take_along_axis(v, axis, 1) / np.take_along_axis(d, axis, 1)
        return np.asarray(np.clip(ratio[:, 0], 0.0, 1.0))

    def _seen_edge_on(self) -> Indices:
        """Return the walls in line with the eye along which the region reaches; no wall crosses, so wholly or not."""
        walls, e = self.walls, self.edge_on
        e = e[~np.isin(e, self.under)]
        ends = np.stack([walls.p[e], walls.q[e]])
        distance = np.abs(ends - self.eye).sum(axis=2)
        near = np.where((distance[0] <= distance[1])[:, None], ends[0], ends[1])
        seen = np.zeros(len(e), dtype=bool)
        for behind in (self.nearest[self.rank[e]], self.nearest[self.rank[e] - 1]):
            seen |= (behind >= 0) & (orientations(walls.p[behind], walls.q[behind], near) > 0)
        return np.concatenate([self.under, e[seen]])


def _cross(a: Floats, b: Floats) -> tuple[Floats, Floats]:
    """Return the cross products of differences of doubles, and bounds on their errors."""
    left, right = a[:, 0] * b[:, 1], a[:, 1] * b[:, 0]
    return left - right, 8 * ROUNDOFF * (np.abs(left) + np.abs(right)) + SMALLEST


def _exact_foot(c: Floats, p: Floats, q: Floats, past: Floats) -> tuple[float, float]:
    (cx, cy), (px, py), (qx, qy), (ax, ay) = (
        [Fraction(x) for x in point.tolist()] for point in (c, p, q, past)
    )
    height = (px - cx) * (qy - py) - (py - cy) * (qx - px)
    slope = (ax - cx) * (qy - py) - (ay - cy) * (qx - px)
    return float(cx + height / slope * (ax - cx)), float(cy + height / slope * (ay - cy))
