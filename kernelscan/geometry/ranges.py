"""Where in a convex region to stand so that nothing is too far: nearest points and smallest ranges.

Problem
    Among the points of a region, find the one whose farthest corner (of the room) is nearest: its distance is the
    smallest range that a device needs. With a single wanted spot in place of the corners, it is the nearest point.
Method
    Minimise R subject to |p - c| <= R for each corner c and n p >= o for each half-plane. The optimum is unique and is
    fixed by at most three of these constraints, so a basis of three is kept: the constraint that it violates most
    is tried with it, and the best point that any one to three of the four fix becomes the new basis (a
    linear-program-like problem; Sharir and Welzl 1992). R grows with every step.
Exactness
    Doubles, from a local origin; right to about 1e-12 of the extent of room and region together.
Degenerate cases
    A region that is a segment or a point is given by half-planes that meet in nothing else; each is held to within
    that accuracy.
Cost
    Some ten passes over corners and half-planes.
Letters
    p the point; c a corner; n, o a half-plane n p >= o; R the range.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import combinations

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.halfplanes import HalfPlanes
from kernelscan.geometry.intersection import intersect
from kernelscan.geometry.linear_programs import Infeasible

__all__ = ["PointInRange", "nearest_point", "smallest_range"]

Floats = npt.NDArray[np.float64]

CLOSE = 1e-13
LONGEST = 1000


@dataclass(frozen=True, slots=True, eq=False)
class PointInRange:
    """A point of a region, ``(2,)``, and its distance to the wanted spot, or to the farthest corner."""

    point: Floats
    distance: float


def nearest_point(half_planes: HalfPlanes, spot: Sequence[float] | Floats) -> PointInRange | Infeasible:
    """Return the point of half-planes that is nearest to a spot: the spot itself if it lies in all of them."""
    return smallest_range(half_planes, np.asarray(spot, dtype=np.float64).reshape(1, 2))


def smallest_range(half_planes: HalfPlanes, corners: Floats) -> PointInRange | Infeasible:
    """Return the point of half-planes whose farthest corner is nearest.

    Parameters
    ----------
    half_planes
        Of a kernel, :meth:`~kernelscan.geometry.kernel.Kernel.half_planes`.
    corners
        ``(m, 2)`` the corners to be reached, at least one.
    """
    region = intersect(half_planes)
    if region.kind == "empty":
        return Infeasible(region.conflict)
    if region.kind == "point":
        return PointInRange(region.vertices[0], float(np.hypot(*(corners - region.vertices[0]).T).max()))
    origin = corners.mean(axis=0)
    rows = half_planes.rows[region.sides]
    ways = rows[:, 4:] - rows[:, 2:4]
    normals = np.column_stack([-ways[:, 1], ways[:, 0]]) / np.hypot(ways[:, 0], ways[:, 1])[:, None]
    limits = np.einsum("ij,ij->i", normals, rows[:, :2] - origin)
    p = _Program(corners - origin, normals, limits).best()
    return PointInRange(p + origin, float(np.hypot(*(corners - origin - p).T).max()))


class _Program:
    """Constraints are numbered: the corners first, and then the half-planes."""

    def __init__(self, corners: Floats, normals: Floats, limits: Floats) -> None:
        self.corners, self.normals, self.limits = corners, normals, limits
        self.close = CLOSE * (1 + float(np.abs(corners).max()) + float(np.abs(limits).max(initial=0.0)))

    def best(self) -> Floats:
        """Exchange constraints until none is violated."""
        basis: tuple[int, ...] = (0,)
        p: Floats = self.corners[0]
        reach = 0.0
        for _ in range(LONGEST):
            excess = np.hypot(*(self.corners - p).T) - reach
            short = self.limits - self.normals @ p
            worst = int(excess.argmax())
            if len(short) and short.max() > excess[worst]:
                worst = len(excess) + int(short.argmax())
            if max(float(excess.max()), float(short.max(initial=0.0))) <= self.close or worst in basis:
                break
            basis, p, reach = self._improved((*basis, worst))
        return p

    def _improved(self, four: tuple[int, ...]) -> tuple[tuple[int, ...], Floats, float]:
        """Return the best point that some of up to four constraints fix and all four allow."""
        count = len(self.corners)
        corners = self.corners[[k for k in four if k < count]]
        lines = [k - count for k in four if k >= count]
        options = []
        for basis, p in self._fixed(four):
            short = float((self.limits[lines] - self.normals[lines] @ p).max(initial=0.0))
            options.append(
                (max(0.0, short - 16 * self.close), float(np.hypot(*(corners - p).T).max()), basis, p)
            )
        _, reach, basis, p = min(options, key=lambda option: option[:2])
        return basis, p, reach

    def _fixed(self, four: tuple[int, ...]) -> Iterator[tuple[tuple[int, ...], Floats]]:
        """Yield the points that one to three constraints fix, with these."""
        count = len(self.corners)
        for size in (1, 2, 3):
            for basis in combinations(four, size):
                corners = self.corners[[k for k in basis if k < count]]
                lines = [k - count for k in basis if k >= count]
                if len(corners):
                    p = _balanced(corners, self.normals[lines], self.limits[lines])
                    if p is not None:
                        yield basis, p


def _balanced(corners: Floats, normals: Floats, limits: Floats) -> Floats | None:
    """Return the point equally far from the corners and on all the borders that is nearest to the first corner."""
    table = np.concatenate([2 * (corners[1:] - corners[0]), normals])
    right = np.concatenate([((corners[1:] - corners[0]) ** 2).sum(axis=1), limits - normals @ corners[0]])
    if not len(table):
        p: Floats = corners[0]
        return p
    step, _, rank, _ = np.linalg.lstsq(table, right, rcond=1e-14)
    if rank < len(table):
        return None
    p = corners[0] + step
    return p
