"""Which of many half-planes may cut a small convex region: one pass over memory.

Problem
    Given a region that is already known to hold the intersection, find among very many half-planes the few that do
    not surely hold all of it; the others change nothing.
Method
    With c a double near the region and q its corners as seen from c, a half-plane with border point p and way d has
    at a corner the value d x (c - p) + d x q. The least of these over a box |q_x| <= r_x, |q_y| <= r_y is
    d x (c - p) - |d_x| r_y - |d_y| r_x: a few array operations, in portions that stay in the cache. The
    half-planes that do not hold the box are asked about the corners themselves: all at once as a matrix product if
    they are few, and of many the one where the ways of the sides pass d, found by angle, with its two neighbours.
Exactness
    What is dropped is surely held. With e = 2**-53: c - p errs by a part e, d by a part e, the two products each by a
    part 3 e more, so d x (c - p) is off by less than 5 e (|d_x| |c_y - p_y| + |d_y| |c_x - p_x|), which is bounded with
    the largest |c - p| of the portion and added to r. Asking about the corners, their own errors and that of the
    matrix product, 3 e |d| |q|, take the place of r. Overflow gives infinities or NaN, which compare as not held.
Letters
    p, d as above; g = c - p; q corners, r the box.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import inf
from typing import Protocol

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.clipping import ConvexRegion
from kernelscan.geometry.elimination import angle_keys
from kernelscan.geometry.predicates import exact_line, meet, rounded
from kernelscan.geometry.rings import Ring

__all__ = ["HalfPlaneSource", "Outline", "RingSource", "RowSource", "most_cutting", "survivors"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.int64]
Flags = npt.NDArray[np.bool_]

UNIT = 2.0**-53
TINY = 2.0**-1000
PORTION = 1 << 14
FEW = 16
WAY_OF_ROW = np.array([[0, 0], [0, 0], [-1, 0], [0, -1], [1, 0], [0, 1]])


class HalfPlaneSource(Protocol):
    """Many half-planes, by number."""

    def __len__(self) -> int:
        """How many there are."""

    def rows(self, numbers: Indices) -> Floats:
        """Return some of them as ``(m, 6)`` rows."""

    def portions(self) -> Iterator[tuple[int, Floats, Floats]]:
        """Yield border points and ways, ``(2, m)`` each, in portions, with the number of the first."""


@dataclass(frozen=True, slots=True, eq=False)
class RowSource:
    """Half-planes kept as ``(n, 6)`` rows."""

    table: Floats

    def __len__(self) -> int:
        return len(self.table)

    def rows(self, numbers: Indices) -> Floats:
        """Return some of them as ``(m, 6)`` rows."""
        return self.table[numbers]

    def portions(self) -> Iterator[tuple[int, Floats, Floats]]:
        """Yield border points and ways, ``(2, m)`` each, in portions, with the number of the first."""
        for first in range(0, len(self.table), PORTION):
            part = np.ascontiguousarray(self.table[first : first + PORTION].T)
            yield first, part[:2], part[4:] - part[2:4]


class RingSource:
    """The half-planes of the edges of rings, without a copy of them."""

    def __init__(self, rings: Sequence[Ring]) -> None:
        self.rings = rings
        self.firsts = np.cumsum([0, *(len(ring) for ring in rings)])

    def __len__(self) -> int:
        return int(self.firsts[-1])

    def rows(self, numbers: Indices) -> Floats:
        """Return some of them as ``(m, 6)`` rows."""
        if len(self.rings) == 1:
            (ring,) = self.rings
            starts, ends = ring.take(numbers, axis=0), ring.take(numbers + 1, axis=0, mode="wrap")
            return np.concatenate([starts, starts, ends], axis=1)
        table = np.empty((len(numbers), 6))
        for ring, first, after in zip(self.rings, self.firsts[:-1], self.firsts[1:], strict=True):
            mine = np.flatnonzero((numbers >= first) & (numbers < after))
            edges = numbers[mine] - first
            table[mine, :2] = table[mine, 2:4] = ring[edges]
            table[mine, 4:] = ring[(edges + 1) % len(ring)]
        return table

    def portions(self) -> Iterator[tuple[int, Floats, Floats]]:
        """Yield border points and ways, ``(2, m)`` each, in portions, with the number of the first."""
        for ring, first in zip(self.rings, self.firsts.tolist(), strict=False):
            count = len(ring)
            for k in range(0, count, PORTION):
                points = ring[k : k + PORTION + 1]
                if k + PORTION >= count:
                    points = np.concatenate([points, ring[:1]])
                points = np.ascontiguousarray(points.T)
                yield first + k, points[:, :-1], points[:, 1:] - points[:, :-1]


@dataclass(frozen=True, slots=True, eq=False)
class Outline:
    """A region as doubles.

    Attributes
    ----------
    centre
        c.
    corners
        ``(2, k)``: q.
    error
        How far off the coordinates of q are, in x and in y.
    limits
        ``(2, 2)``: the exact least and greatest x, and y, of a thin region; NaN where they are no doubles.
    ways
        ``(2, k)``: of a region with an area, the way of the side from each corner, in the order of their
        :func:`~kernelscan.geometry.elimination.angle_keys`.
    """

    centre: tuple[float, float]
    corners: Floats
    error: tuple[float, float]
    limits: Floats | None = None
    ways: Floats | None = None

    @property
    def reach(self) -> Floats:
        """The half sides of a box about the centre that surely holds the region."""
        reach: Floats = np.abs(self.corners).max(axis=1) * (1 + 4 * UNIT) + self.error
        return reach

    @staticmethod
    def of(region: ConvexRegion) -> "Outline | None":
        """Return the outline of a region, or ``None`` if it is unbounded or its corners are too ill-conditioned."""
        if not region.is_bounded or region.bound == inf:
            return None
        if region.shape != "area":
            return Outline._of_thin(region)
        lowest = min(z for _, _, z in region.corners)
        if lowest < 2.0**-40:
            return None
        ways = np.array([region.rows[name] for name in region.names]) @ WAY_OF_ROW
        first = int(angle_keys(ways).argmin())
        corners = region.corners[first:] + region.corners[:first]
        x, y = np.array([(x / z, y / z) for x, y, z in corners]).T
        ox, oy = region.origin
        lx, ly = (float(x.max()) + float(x.min())) / 2, (float(y.max()) + float(y.min())) / 2
        cx, cy = ox + lx, oy + ly
        around = np.array([x - (cx - ox), y - (cy - oy)])
        error = 80 * UNIT * region.reach / lowest**2 + TINY
        return Outline((cx, cy), around, (error, error), ways=np.roll(ways, -first, axis=0).T)

    @staticmethod
    def of_sides(sides: Floats) -> "Outline":
        """Return the outline of a bounded region with many sides, given in order as ``(k, 6)`` rows."""
        sides = np.roll(sides, -int(angle_keys(sides @ WAY_OF_ROW).argmin()), axis=0)
        lines = [exact_line(row) for row in sides.tolist()]
        points = np.array([rounded(meet(lines[k - 1], line)) for k, line in enumerate(lines)]).T
        centre = points.mean(axis=1)
        corners = points - centre[:, None]
        error = 4 * UNIT * (np.abs(points).max(axis=1) + np.abs(corners).max(axis=1)) + TINY
        place, off = (float(centre[0]), float(centre[1])), (float(error[0]), float(error[1]))
        return Outline(place, corners, off, ways=(sides @ WAY_OF_ROW).T)

    @staticmethod
    def _of_thin(region: ConvexRegion) -> "Outline":
        """Take the first corner, rounded, for the centre, so that it is free of error if it is a pair of doubles."""
        exact = region.exact_corners()
        (cx, cy), *_ = points = [rounded(corner) for corner in exact]
        at = np.array(points).T
        corners = at - [[cx], [cy]]
        off = [max(_off(q[k], q[2], p[k]) for p, q in zip(points, exact, strict=True)) for k in (0, 1)]
        error = [bound + 2 * UNIT * float(np.abs(row).max()) for bound, row in zip(off, corners, strict=True)]
        limits = np.array([at.min(axis=1), at.max(axis=1)]).T
        limits[np.array(off) > 0] = np.nan
        return Outline((cx, cy), corners, (error[0], error[1]), limits)


def _off(numerator: int, denominator: int, nearest: float) -> float:
    """Return 0 if a rounded quotient is the quotient itself, and else a bound on the difference."""
    p, q = nearest.as_integer_ratio()
    return 0.0 if p * denominator == q * numerator else 2 * UNIT * abs(nearest) + TINY


def survivors(source: HalfPlaneSource, outline: Outline) -> Indices:
    """Return the numbers, ascending, of the half-planes that do not surely hold a region."""
    found, box = [], outline.reach
    held = _held_by_corners if outline.corners.shape[1] <= FEW else _held_by_angle
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        for first, p, d in source.portions():
            depths, off = _depths(p, d, outline)
            left = np.flatnonzero(~(depths > _margins(d, box + off)))
            if len(left):
                ways = d.take(left, axis=1)
                kept = ~held(depths.take(left), ways, outline, off)
                if outline.limits is not None:
                    kept &= ~_along(p[:, left], ways, outline.limits)
                found.append(left[kept] + first)
    return np.concatenate(found) if found else np.zeros(0, dtype=np.int64)


def _depths(p: Floats, d: Floats, outline: Outline) -> tuple[Floats, Floats]:
    """Return d x (c - p), and a box about c such that moving c within it covers the error."""
    g_x, g_y = outline.centre[0] - p[0], outline.centre[1] - p[1]
    off = 8 * UNIT * np.array([_largest(g_x), _largest(g_y)])
    g_y *= d[0]
    g_x *= d[1]
    g_y -= g_x
    return g_y, off


def _margins(d: Floats, box: Floats) -> Floats:
    """Return by how much d x q can change while q moves within half of a box."""
    margins: Floats = np.abs(d[0])
    margins *= box[1]
    other = np.abs(d[1])
    other *= box[0]
    margins += other
    margins += TINY
    return margins


def _held_by_corners(depths: Floats, d: Floats, outline: Outline, off: Floats) -> Flags:
    q_x, q_y = outline.corners
    lowest = np.minimum.reduce(np.column_stack([q_y, -q_x]) @ d)
    lowest += depths
    return np.asarray(lowest > _margins(d, off + _corner_errors(outline)))


def _corner_errors(outline: Outline) -> Floats:
    errors: Floats = 8 * UNIT * np.abs(outline.corners).max(axis=1) + outline.error
    return errors


def _held_by_angle(depths: Floats, d: Floats, outline: Outline, off: Floats) -> Flags:
    """Ask about the corner where the sides' ways pass d, and its neighbours, if the sides beyond surely turn away."""
    assert outline.ways is not None
    count = outline.ways.shape[1]
    near = np.searchsorted(angle_keys(outline.ways.T), angle_keys(d.T))
    margins = _margins(d, off + _corner_errors(outline))
    held = np.ones(len(near), dtype=bool)
    for shift in (-1, 0, 1):
        x, y = outline.corners[:, (near + shift) % count]
        held &= depths + (d[0] * y - d[1] * x) > margins
    before, after = outline.ways[:, (near - 2) % count], outline.ways[:, (near + 1) % count]
    return np.asarray(held & _surely_left(before, d) & _surely_left(d, after))


def _surely_left(d: Floats, e: Floats) -> Flags:
    """Which ways e surely turn left from d by less than half a turn."""
    left, right = d[0] * e[1], d[1] * e[0]
    return np.asarray(left - right > 8 * UNIT * (np.abs(left) + np.abs(right)) + TINY)


def most_cutting(rows: Floats, outline: Outline, count: int) -> Indices:
    """Return which of ``(m, 6)`` rows have the centre of a region least deep inside, or farthest outside."""
    ways = rows[:, 4:] - rows[:, 2:4]
    offsets = np.array(outline.centre) - rows[:, :2]
    with np.errstate(over="ignore", invalid="ignore", under="ignore", divide="ignore"):
        depths = (ways[:, 0] * offsets[:, 1] - ways[:, 1] * offsets[:, 0]) / np.hypot(ways[:, 0], ways[:, 1])
    return np.argpartition(depths, min(count, len(rows) - 1))[:count]


def _along(p: Floats, d: Floats, limits: Floats) -> Flags:
    """Which borders run along an axis and hold the limits, be it on the border itself: a plain comparison."""
    (left, right), (bottom, top) = limits
    upright = (d[0] == 0) & np.where(d[1] < 0, p[0] <= left, p[0] >= right)
    level = (d[1] == 0) & np.where(d[0] > 0, p[1] <= bottom, p[1] >= top)
    return np.asarray(upright | level)


def _largest(numbers: Floats) -> float:
    return max(float(numbers.max()), -float(numbers.min()))
