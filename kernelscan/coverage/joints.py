"""How two walls are made to meet when what lies between them is left out, and how far that strays.

Problem
    Between two straight walls of an outline there is a chain of others: the three faces of a pilaster, a chamfer, a
    step and the short wall behind it. Leave the chain out and let the two walls meet, each on its own line, and say
    how far apart the chain and what stands in its place are.
Method
    Walls on one line are joined by the straight piece from the end of the first to the start of the second. Other
    walls are drawn on, or cut back, to the point where their lines meet. Since no wall leaves its line, leaving out
    one chain after another cannot add up: each joint is measured against the outline itself.
Depth
    An upper bound of the Hausdorff distance between the chain and its joint, in whole micrometres. Each piece of the
    one is held against each piece of the other: the distance from a straight piece is convex, so that it is greatest
    at an end. Chains are split at the bisector of the joint, and joints at the feet of the chain's corners, which
    makes the bound the distance itself for a pilaster, a niche, a step and a chamfer. The joint of two walls on one
    line is covered by the feet of the chain, so that there the chain's greatest height is enough.
Which chains count
    Walls on one line: any chain. Otherwise the chain must turn sharply to either side and its longest piece run along
    one of the two walls, which makes it a step; or the chain must be narrower than either wall is long, which makes
    it a cut corner. So no piece of a curved wall, and no side of a regular polygon, is taken for a small feature.
Cost
    O(n k) pairs of walls for n walls and chains of at most k.
Letters
    a, b the two walls' numbers; p, q the ends of a wall; d, e unit vectors along a and b; m where their lines meet.
Source
    The definition is this project's own; common practice, no source.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import accumulate, pairwise
from math import dist, hypot, inf, sin
from typing import Literal

import numpy as np

from kernelscan.geometry.rings import Ring
from kernelscan.tolerances import Tolerances

__all__ = ["ROUNDING", "SQUARE", "Joint", "Point", "StraightWalls"]

Point = tuple[float, float]
Shape = Literal["line", "step", "cut"]

ROUNDING = 1e-6
"""Metres: lengths nearer than this are equal. A drawing that is turned or far from its origin loses less than that."""

SQUARE = 0.087
"""Sine of 5 degrees: walls that differ by less are parallel, or square to each other."""

MOST = 60
"""A chain of more walls than this is no small feature."""


@dataclass(frozen=True, slots=True)
class Joint:
    """What stands in place of the walls between ``a`` and ``b``.

    Attributes
    ----------
    a, b
        The numbers of the two walls.
    shape
        Whether the two are on one line, the chain is a step, or it cuts a corner.
    path
        One to three points: from the end of the one wall, by the point where they meet, to the start of the other.
    chain
        The outline's own points from the first of the path to the last.
    depth
        How far the two are apart at most, in metres.
    """

    a: int
    b: int
    shape: Shape
    path: tuple[Point, ...]
    chain: tuple[Point, ...]
    depth: float

    @property
    def floor(self) -> float:
        """The floor that leaving the chain out takes from the room; below 0 where it adds to it."""
        (ox, oy), *others = [*self.chain, *self.path[-2:0:-1]]
        arms = [(x - ox, y - oy) for x, y in others]
        return sum(px * qy - py * qx for (px, py), (qx, qy) in pairwise(arms)) / 2


class StraightWalls:
    """The straight walls of an outline: edges that run on along one line are one wall.

    Attributes
    ----------
    points
        The outline's vertices.
    corners
        For each wall the number of the vertex where it starts.
    """

    def __init__(self, ring: Ring, tolerances: Tolerances) -> None:
        self.points: list[Point] = [(x, y) for x, y in ring.tolist()]
        self.corners: list[int] = np.flatnonzero(~_runs_on(ring)).tolist()
        self.starts = [self.points[corner] for corner in self.corners]
        self.ends = [*self.starts[1:], *self.starts[:1]]
        ways = [(q[0] - p[0], q[1] - p[1]) for p, q in zip(self.starts, self.ends, strict=True)]
        self.lengths = [hypot(*way) for way in ways]
        self.units = [(x / size, y / size) for (x, y), size in zip(ways, self.lengths, strict=True)]
        self.one_line, self.smooth = tolerances.chord, sin(tolerances.smooth)
        turns = [d[0] * e[1] - d[1] * e[0] for d, e in pairwise([*self.units, self.units[0]])]
        # How many sharp turns there are before each wall, and in all.
        self._lefts = [0, *accumulate(turn >= self.smooth for turn in turns)]
        self._rights = [0, *accumulate(turn <= -self.smooth for turn in turns)]

    def __len__(self) -> int:
        """How many there are."""
        return len(self.corners)

    def edges(self, wall: int) -> list[int]:
        """Return the outline's edges that make up a wall."""
        start, end, count = self.corners[wall], self.corners[(wall + 1) % len(self)], len(self.points)
        return [edge % count for edge in range(start, end if end > start else end + count)]

    def edges_between(self, a: int, b: int) -> list[int]:
        """Return the outline's edges from the end of wall a to the start of wall b."""
        walls = range(a + 1, b if b > a else b + len(self))
        return [edge for wall in walls for edge in self.edges(wall % len(self))]

    def left_out(self, joint: Joint) -> tuple[float, int]:
        """Return how long the walls are that a joint leaves out, in metres, and how many walls it saves."""
        walls = range(joint.a + 1, joint.b if joint.b > joint.a else joint.b + len(self))
        saved = len(walls) + (joint.shape == "line")
        return sum(self.lengths[wall % len(self)] for wall in walls), saved

    def edge_ends(self, edge: int) -> tuple[Point, Point]:
        """Return the two ends of an edge of the outline."""
        return self.points[edge], self.points[(edge + 1) % len(self.points)]

    def along(self, wall: int, point: Point) -> float:
        """Return how far along a wall a point lies, from its start, in metres."""
        return _along(self.starts[wall], self.units[wall], point)

    def joints(self, limit: float) -> Iterator[Joint]:
        """Yield the joints of any two walls with others between them that stray by no more than the limit."""
        count = len(self)
        for a in range(count):
            for between in range(1, min(MOST, count - 3) + 1):
                joint = self._joint(a, (a + between + 1) % count, limit)
                if joint is not None:
                    yield joint

    def _joint(self, a: int, b: int, limit: float) -> Joint | None:
        (dx, dy), (ex, ey) = self.units[a], self.units[b]
        if abs(dx * ey - dy * ex) >= self.smooth:
            return self._at_meeting(a, b, limit)
        if dx * ex + dy * ey > 0 and self._on_one_line(a, b):
            chain = self._between(a, b)
            height = _height(chain, (chain[0], chain[-1]), limit)
            return _joint(a, b, "line", (chain[0], chain[-1]), chain, height, limit)
        return None

    def _on_one_line(self, a: int, b: int) -> bool:
        """Whether wall b lies ahead of wall a on its line."""
        off = max(
            *(abs(_across(self.ends[a], self.units[a], p)) for p in (self.starts[b], self.ends[b])),
            *(abs(_across(self.starts[b], self.units[b], p)) for p in (self.starts[a], self.ends[a])),
        )
        return off <= self.one_line and _along(self.ends[a], self.units[a], self.starts[b]) > ROUNDING

    def _at_meeting(self, a: int, b: int, limit: float) -> Joint | None:
        q, p, d, e = self.ends[a], self.starts[b], self.units[a], self.units[b]
        turn = d[0] * e[1] - d[1] * e[0]
        # How far past the end of a, and how far before the start of b, their lines meet.
        beyond, before = _across(p, e, q) / turn, _across(q, d, p) / turn
        if beyond <= ROUNDING - self.lengths[a] or before <= ROUNDING - self.lengths[b]:
            return None
        m = q if abs(beyond) <= ROUNDING else (q[0] + beyond * d[0], q[1] + beyond * d[1])
        m = p if abs(before) <= ROUNDING else m
        path = (*([q] if beyond > ROUNDING else []), m, *([p] if before > ROUNDING else []))
        chain = self._between(a, b)
        chain = (*([m] if beyond < -ROUNDING else []), *chain, *([m] if before < -ROUNDING else []))
        # The cheap tests come first: few chains pass them.
        shape = self._shape(a, b, chain)
        if shape is None or _height(chain, path, limit) == inf or _height([m], chain, limit) == inf:
            return None
        return _joint(a, b, shape, path, chain, _deviation(chain, path), limit)

    def _shape(self, a: int, b: int, chain: Sequence[Point]) -> Shape | None:
        if self._turns_both_ways(a, b) and self._runs_along(chain, a, b):
            return "step"
        return "cut" if dist(chain[0], chain[-1]) < min(self.lengths[a], self.lengths[b]) - ROUNDING else None

    def _turns_both_ways(self, a: int, b: int) -> bool:
        """Whether the outline turns sharply to the left and to the right somewhere from wall a to wall b."""
        return all(
            turns[b] > turns[a] if b > a else turns[-1] + turns[b] > turns[a]
            for turns in (self._lefts, self._rights)
        )

    def _runs_along(self, chain: Sequence[Point], *walls: int) -> bool:
        """Whether the longest piece of a chain runs along one of the walls, in its direction."""
        (px, py), (qx, qy) = max(pairwise(chain), key=lambda ends: dist(*ends))
        way, size = (qx - px, qy - py), dist((px, py), (qx, qy))
        return any(
            abs(d[0] * way[1] - d[1] * way[0]) < SQUARE * size and d[0] * way[0] + d[1] * way[1] > 0
            for d in (self.units[wall] for wall in walls)
        )

    def _between(self, a: int, b: int) -> tuple[Point, ...]:
        """The corners from the end of wall a to the start of wall b."""
        count = len(self)
        return tuple(self.starts[k % count] for k in range(a + 1, (b if b > a else b + count) + 1))


def _joint(
    a: int,
    b: int,
    shape: Shape,
    path: tuple[Point, ...],
    chain: tuple[Point, ...],
    depth: float,
    limit: float,
) -> Joint | None:
    depth = round(depth, 6)
    return Joint(a, b, shape, path, chain, depth) if depth <= limit else None


def _runs_on(ring: Ring) -> np.ndarray:
    """Whether the outline runs straight on at each vertex, ``(n,)``."""
    ahead = np.roll(ring, -1, axis=0) - ring
    back = np.roll(ahead, 1, axis=0)
    across = np.abs(back[:, 0] * ahead[:, 1] - back[:, 1] * ahead[:, 0])
    straight: np.ndarray = across <= ROUNDING * np.hypot(*(back + ahead).T)
    straight &= (back * ahead).sum(axis=1) > 0
    return straight


def _across(p: Point, d: Point, point: Point) -> float:
    """How far to the left of the line through p in the direction d a point lies."""
    return d[0] * (point[1] - p[1]) - d[1] * (point[0] - p[0])


def _along(p: Point, d: Point, point: Point) -> float:
    return d[0] * (point[0] - p[0]) + d[1] * (point[1] - p[1])


def _distance(point: Point, u: Point, v: Point) -> float:
    """The distance from a point to the straight piece from u to v, which may be a point itself."""
    x, y = v[0] - u[0], v[1] - u[1]
    square = x * x + y * y
    t = min(1.0, max(0.0, ((point[0] - u[0]) * x + (point[1] - u[1]) * y) / square)) if square else 0.0
    return hypot(u[0] + t * x - point[0], u[1] + t * y - point[1])


def _height(points: Sequence[Point], path: Sequence[Point], limit: float) -> float:
    """The greatest distance of points from a path; infinite as soon as one is beyond the limit."""
    pieces = list(pairwise(path)) or [(path[0], path[0])]
    height = 0.0
    for point in points:
        height = max(height, min(_distance(point, u, v) for u, v in pieces))
        if height > limit + ROUNDING:
            return inf
    return height


def _deviation(chain: Sequence[Point], path: Sequence[Point]) -> float:
    """An upper bound of the distance between a chain and a path with the same ends."""
    return max(_strays(_split_at_bisector(chain, path), path), _strays(_split_at_feet(path, chain), chain))


def _strays(points: Sequence[Point], others: Sequence[Point]) -> float:
    """An upper bound of how far one line of points strays from another."""
    u = np.array(others if len(others) == 1 else others[:-1])
    v = np.array(others if len(others) == 1 else others[1:])
    way, off = v - u, np.array(points)[:, None] - u
    square = np.maximum((way * way).sum(axis=1), 1e-300)
    place = np.clip((off * way).sum(axis=2) / square, 0.0, 1.0)
    distances = np.hypot(*np.moveaxis(off - place[..., None] * way, 2, 0))
    return float(np.maximum(distances[:-1], distances[1:]).min(axis=1).max(initial=0.0))


def _split_at_bisector(chain: Sequence[Point], path: Sequence[Point]) -> list[Point]:
    if len(path) < 3:
        return list(chain)
    (sx, sy), (mx, my), (ex, ey) = path
    one, other = hypot(sx - mx, sy - my), hypot(ex - mx, ey - my)
    nx, ny = (sx - mx) / one - (ex - mx) / other, (sy - my) / one - (ey - my) / other
    points = [chain[0]]
    for (ux, uy), (vx, vy) in pairwise(chain):
        at_u, at_v = (ux - mx) * nx + (uy - my) * ny, (vx - mx) * nx + (vy - my) * ny
        if at_u * at_v < 0:
            t = at_u / (at_u - at_v)
            points.append((ux + t * (vx - ux), uy + t * (vy - uy)))
        points.append((vx, vy))
    return points


def _split_at_feet(path: Sequence[Point], chain: Sequence[Point]) -> list[Point]:
    points = [path[0]]
    for u, v in pairwise(path):
        size = hypot(v[0] - u[0], v[1] - u[1])
        d = ((v[0] - u[0]) / size, (v[1] - u[1]) / size)
        feet = sorted(foot for foot in (_along(u, d, point) for point in chain) if 0 < foot < size)
        points += [(u[0] + foot * d[0], u[1] + foot * d[1]) for foot in feet]
        points.append(v)
    return points
