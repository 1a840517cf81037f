"""Linear programs of the plane: the extreme point in a direction, exactly, and the deepest point.

Problem
    Of the points that closed half-planes have in common, find one that lies farthest in a direction c, and say which of
    four cases it is: there are none, none is farthest, one is, or all those of a segment are. And find the point
    whose nearest border is farthest: how far it is from there is the radius of a largest disc inside, or, if
    negative, the least distance by which all borders must give way for a point to be in all.
Method
    Extreme point: along the sides of the intersection, counter-clockwise, the ways turn left; the farthest point is
    where they pass the way t that is c turned left by a right angle. A side of exactly that way is the segment. The
    signs are those of integers.
    Deepest point: with unit normals n and depths n (q - a), maximise r subject to n (q - a) >= r, a linear program in
    three unknowns. Its dual simplex method starts from a triangle far outside and exchanges one of its three sides for
    the half-plane that is violated most, until none is. Ties, of which rooms of right angles are full, are broken by
    moving each border by less than 1e-13 of the extent while the three are sought.
Exactness
    Extreme points are exact, rounded once. The deepest point is found in doubles from a local origin; its radius is
    that of the very point returned. Unit normals are rounded, so that it is right to about 1e-12 of the extent.
Cost
    That of :func:`~kernelscan.geometry.intersection.intersect`, and of some ten passes over the half-planes.
Letters
    c the direction; t the way; n normals; q the point; r the radius.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from kernelscan.errors import GeometryError
from kernelscan.geometry.halfplanes import HalfPlanes, wall_half_planes
from kernelscan.geometry.intersection import Intersection, intersect
from kernelscan.geometry.predicates import Line, exact_line, same_way, turn
from kernelscan.geometry.rings import Ring

__all__ = [
    "DeepestPoint",
    "ExtremeOutcome",
    "ExtremePoint",
    "ExtremeSegment",
    "Infeasible",
    "LeastSlack",
    "Unbounded",
    "deepest_point",
    "extreme_point",
    "least_slack",
]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.int64]

CLOSE = 1e-15
JITTER = 1e-13
LONGEST = 1000
FAR = 1e4
FENCE = np.array([[0.0, 1.0], [-np.sqrt(0.75), -0.5], [np.sqrt(0.75), -0.5]])


@dataclass(frozen=True, slots=True, eq=False)
class Infeasible:
    """The half-planes have no common point: ``(2,)`` or ``(3,)`` of them exclude each other."""

    conflict: Indices


@dataclass(frozen=True, slots=True, eq=False)
class Unbounded:
    """There are points as far as one likes: on the ray from ``start`` along ``way``, each ``(2,)``."""

    start: Floats
    way: Floats


@dataclass(frozen=True, slots=True, eq=False)
class ExtremeSegment:
    """All points of a segment are farthest: ``(2, 2)`` its ends; of a ray its one end, of a line none."""

    ends: Floats


@dataclass(frozen=True, slots=True, eq=False)
class ExtremePoint:
    """One point is farthest: ``(2,)``."""

    point: Floats


ExtremeOutcome = Infeasible | Unbounded | ExtremeSegment | ExtremePoint


@dataclass(frozen=True, slots=True, eq=False)
class DeepestPoint:
    """The point whose nearest border is farthest.

    Attributes
    ----------
    point
        ``(2,)``.
    radius
        Its distance to the nearest border; below 0 where the half-planes have no common point: then all of
        them, moved outward by that much, meet in ``point``.
    walls
        ``(3, 2)`` the walls that keep the disc from growing.
    """

    point: Floats
    radius: float
    walls: Indices


@dataclass(frozen=True, slots=True, eq=False)
class LeastSlack:
    """How far a room is from having a point that sees every wall.

    Attributes
    ----------
    point
        ``(2,)``: the point that comes nearest to it.
    slack
        By how much walls would have to give way for it to see all; 0 if it does.
    walls
        ``(3, 2)`` the walls that bind.
    """

    point: Floats
    slack: float
    walls: Indices


def extreme_point(half_planes: HalfPlanes, direction: Sequence[float]) -> ExtremeOutcome:
    """Return the common point of half-planes that lies farthest in a direction.

    Parameters
    ----------
    half_planes
        Closed half-planes; of a kernel, :meth:`~kernelscan.geometry.kernel.Kernel.half_planes`.
    direction
        Two numbers, not both 0.
    """
    cx, cy = (float(number) for number in direction)
    if not np.isfinite([cx, cy]).all() or cx == cy == 0:
        raise GeometryError(f"a direction is two finite numbers, not both 0, got ({cx}, {cy})")
    region = intersect(half_planes)
    way = exact_line((0.0, 0.0, cy, -cx, 0.0, 0.0))
    if region.kind == "empty":
        return Infeasible(region.conflict)
    if not len(region.sides):
        return Unbounded(np.zeros(2), np.array([cx, cy]))
    if region.kind == "area":
        return _extreme_of_area(region, way)
    return _extreme_of_thin(region, way)


def _lines(region: Intersection) -> list[Line]:
    return [exact_line(row) for row in region.planes.rows[region.sides].tolist()]


def _extreme_of_area(region: Intersection, way: Line) -> ExtremeOutcome:
    lines, vertices = _lines(region), region.vertices
    if region.is_bounded:
        for k, line in enumerate(lines):
            if same_way(line, way):
                return ExtremeSegment(vertices[[k, (k + 1) % len(lines)]])
            if turn(lines[k - 1], way) > 0 and turn(way, line) > 0:
                return ExtremePoint(vertices[k])
    escape = _escape(region, lines, way)
    if escape is not None:
        return escape
    for k, line in enumerate(lines):
        if same_way(line, way):
            return ExtremeSegment(vertices[max(k - 1, 0) : k + 1])
    k = next(k for k in range(len(vertices)) if turn(lines[k], way) > 0 and turn(way, lines[k + 1]) > 0)
    return ExtremePoint(vertices[k])


def _escape(region: Intersection, lines: list[Line], way: Line) -> Unbounded | None:
    """Return a way to infinity that leads farther, if there is one."""
    rows = region.planes.rows[region.sides]
    ways = rows[:, 4:] - rows[:, 2:4]
    first, last = lines[0], lines[-1]
    if turn(way, last) < 0:
        start = region.vertices[-1] if len(region.vertices) else rows[-1, :2]
        return Unbounded(start, ways[-1])
    if turn(way, first) > 0:
        start = region.vertices[0] if len(region.vertices) else rows[0, :2]
        return Unbounded(start, -ways[0])
    if not len(region.vertices) and turn(way, first) < 0:  # a strip, or a single half-plane
        return Unbounded(rows[0, :2], ways[0])
    if len(lines) == 1 and not same_way(first, way):
        return Unbounded(rows[0, :2], np.array([-ways[0, 1], ways[0, 0]]))
    return None


def _extreme_of_thin(region: Intersection, way: Line) -> ExtremeOutcome:
    if region.kind == "point":
        return ExtremePoint(region.vertices[0])
    carrier = _lines(region)[0]
    along = turn(carrier, way)  # positive if the carrier leads farther
    if along == 0:
        return ExtremeSegment(region.vertices)
    corners = region.rationals()
    forward = [u * carrier[1] - v * carrier[0] for u, v in corners]
    row = region.planes.rows[region.sides[0]]
    ahead = (row[4:] - row[2:4]) * (1 if along > 0 else -1)
    if region.is_bounded:
        best = max(range(2), key=lambda k: forward[k] if along > 0 else -forward[k])
        return ExtremePoint(region.vertices[best])
    if not corners:
        return Unbounded(row[:2], ahead)
    return (
        ExtremePoint(region.vertices[0])
        if _is_end(region, carrier, along)
        else Unbounded(region.vertices[0], ahead)
    )


def _is_end(region: Intersection, carrier: Line, along: int) -> bool:
    """Whether a ray has its end, and not its open side, in the direction of its carrier, or against it."""
    turns = [turn(carrier, line) for line in _lines(region)[2:]]
    return any(t > 0 for t in turns) == (along > 0)


def least_slack(rings: Sequence[Ring]) -> LeastSlack:
    """Return how far a room is from having a point that sees every wall."""
    deepest = deepest_point(rings)
    return LeastSlack(deepest.point, max(0.0, -deepest.radius), deepest.walls)


def deepest_point(region: Sequence[Ring] | HalfPlanes) -> DeepestPoint:
    """Return the centre of a largest disc inside the half-planes of some rings, or inside given half-planes.

    Raises
    ------
    GeometryError
        If the half-planes hold discs as large as one likes.
    """
    planes = region if isinstance(region, HalfPlanes) else wall_half_planes(region)
    ways, origin = planes.ways, planes.rows[:, :2].mean(axis=0)
    normals = np.column_stack([-ways[:, 1], ways[:, 0]]) / np.hypot(ways[:, 0], ways[:, 1])[:, None]
    offsets = np.einsum("ij,ij->i", normals, planes.rows[:, :2] - origin)
    basis = _deepest_basis(normals, offsets)
    point, _ = _meeting(normals[basis], offsets[basis])
    depths = normals @ point - offsets
    return DeepestPoint(point + origin, float(depths.min()), planes.walls[basis])


def _deepest_basis(normals: Floats, offsets: Floats) -> list[int]:
    """Return three half-planes that keep the disc from growing."""
    count, extent = len(normals), float(np.abs(offsets).max()) or 1.0
    uneven = offsets + JITTER * extent * np.random.default_rng(1).uniform(-1, 1, count)
    normals, uneven = np.concatenate([normals, FENCE]), np.append(uneven, np.full(3, -FAR * extent))
    basis = [count, count + 1, count + 2]
    for _ in range(LONGEST):
        point, radius = _meeting(normals[basis], uneven[basis])
        depths = normals @ point - uneven
        worst = int(depths.argmin())
        if worst in basis or depths[worst] >= radius - CLOSE * (extent + float(np.abs(point).max())):
            break
        basis = _exchanged(normals, basis, worst)
    if max(basis) >= count:
        raise GeometryError("the half-planes hold discs as large as one likes")
    return basis


def _meeting(normals: Floats, offsets: Floats) -> tuple[Floats, float]:
    """Return the point that is equally deep in three half-planes, and how deep."""
    table = np.column_stack([normals, -np.ones(3)])
    x, y, r = np.linalg.lstsq(table, offsets, rcond=None)[0]
    return np.array([x, y]), float(r)


def _exchanged(normals: Floats, basis: list[int], entering: int) -> list[int]:
    """Take a half-plane into the basis for the one whose weight reaches 0 first."""
    table = np.vstack([normals[basis].T, np.ones(3)])
    weights = np.linalg.lstsq(table, np.array([0.0, 0.0, 1.0]), rcond=None)[0]
    shares = np.linalg.lstsq(table, np.append(normals[entering], 1.0), rcond=None)[0]
    ratios = [w / s if s > 1e-12 else np.inf for w, s in zip(weights.tolist(), shares.tolist(), strict=True)]
    leaving = int(np.argmin(ratios))
    return [entering if k == leaving else number for k, number in enumerate(basis)]
