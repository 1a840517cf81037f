"""An exact check of a kernel, by other means than those that found it.

Problem
    Given a room and what is said to be its kernel, accept it if all of it is true, and else say what is not.
Method
    An area: its sides lie on walls of the room, and these must turn left all the way, once around, each side with
    some length. Then they enclose a convex polygon that is the intersection of their own half-planes, so the kernel
    cannot be larger; and it cannot be smaller if every other wall's half-plane holds the polygon, which is asked at
    the one corner that lies farthest out of it.
    A segment: its first two walls run along one line in opposite directions, the others bound it there, and every
    wall's half-plane holds both ends. A point: the ways of its walls through it leave no half turn free, and every
    wall's half-plane holds it. An empty kernel: two antiparallel walls face away from each other, or the ways of
    three leave no half turn free and one of them does not hold the point where the others meet (Farkas' lemma).
Exactness
    The vertices are first shown to be the exact corners, correctly rounded. Signs are then tried in doubles: with
    e = 2**-53, a difference of doubles errs by a part e, and a corner from its rounded vertex by a part e of each
    coordinate, so a cross product x y - x' y' of such differences is off by less than 4 e (|x y| + |x' y'|) and what
    the corner's own errors add. What lies within the bound is settled with fractions.
Cost
    O(n log k) in array operations for n walls and k sides, and some ten microseconds for each doubtful sign.
Letters
    a, b the ends of a wall, d = b - a its way; c a corner; v a vertex, its rounded form; k sides.
Source
    The shape of the check follows McConnell, Mehlhorn, Näher and Schweitzer, Certifying algorithms, 2011.
"""

from collections.abc import Iterable, Sequence
from fractions import Fraction
from itertools import pairwise
from math import inf
from typing import Protocol

import numpy as np
import numpy.typing as npt

from kernelscan.errors import CertificateError
from kernelscan.geometry.containment import (
    TINY,
    UNIT,
    Corners,
    Floats,
    Indices,
    Point,
    Walls,
    cross,
    first_cut,
)
from kernelscan.geometry.rings import as_rings

__all__ = ["KernelClaim", "verify_kernel"]


SMALLEST = 2.0**-1074


class KernelClaim(Protocol):
    """What is said of a kernel; :class:`kernelscan.geometry.kernel.Kernel` is one."""

    @property
    def kind(self) -> str:
        """``area``, ``segment``, ``point`` or ``empty``."""

    @property
    def vertices(self) -> Floats:
        """``(k, 2)``."""

    @property
    def area(self) -> float:
        """Square units."""

    @property
    def walls(self) -> Indices:
        """``(k, 2)`` [ring, edge]."""

    @property
    def conflict(self) -> Indices:
        """``(0, 2)``, ``(2, 2)`` or ``(3, 2)`` [ring, edge]."""


def verify_kernel(outline: npt.ArrayLike, kernel: KernelClaim, holes: Iterable[npt.ArrayLike] = ()) -> None:
    """Accept a kernel of a room, or raise.

    Parameters
    ----------
    outline, holes
        The room as it was given to :func:`~kernelscan.geometry.kernel.visibility_kernel`.
    kernel
        What is said of it.

    Raises
    ------
    CertificateError
        If any part of it is not true; the text says which.
    GeometryError
        If these are not the rings of a room.
    """
    rings = as_rings(outline, holes)
    room = Walls.of(rings)
    _check_form(kernel)
    _check_room(rings, kernel)
    checks = {"area": _check_area, "segment": _check_segment, "point": _check_point, "empty": _check_conflict}
    try:
        with np.errstate(over="ignore", invalid="ignore", under="ignore"):
            checks[kernel.kind](room, kernel)
    except IndexError as error:
        raise CertificateError(str(error)) from None


def _check_room(rings: Sequence[Floats], kernel: KernelClaim) -> None:
    """A kernel that carries its room along, to give exact corners on request, must carry this one."""
    carried = getattr(kernel, "_rings", ())
    same = len(carried) == len(rings) and all(map(np.array_equal, carried, rings))
    if len(carried) and not same:
        raise CertificateError("the kernel is that of another room")


def _check_form(kernel: KernelClaim) -> None:
    if not isinstance(kernel.kind, str) or not isinstance(kernel.area, int | float):
        raise CertificateError("a kernel has a kind, which is a word, and an area, which is a number")
    for name, walls in (("walls", kernel.walls), ("conflict", kernel.conflict)):
        named = np.asarray(walls)
        if named.size and (named.ndim != 2 or named.shape[1] != 2 or named.dtype.kind not in "iu"):
            raise CertificateError(f"{name} are pairs of whole numbers [ring, edge]")
    corners = {"area": range(3, len(kernel.walls) + 1), "segment": (2,), "point": (1,), "empty": (0,)}
    if kernel.kind not in corners:
        raise CertificateError(f"there is no kind of kernel called {kernel.kind!r}")
    vertices = np.asarray(kernel.vertices)
    if vertices.ndim != 2 or vertices.shape[1] != 2 or len(vertices) not in corners[kernel.kind]:
        raise CertificateError(
            f"a kernel of the kind {kernel.kind} does not have vertices of shape {vertices.shape}"
        )
    if kernel.kind == "area" and len(kernel.walls) != len(vertices):
        raise CertificateError("an area has one wall a vertex")
    if kernel.kind != "area" and kernel.area != 0:
        raise CertificateError(f"a kernel of the kind {kernel.kind} has no area, but {kernel.area} is given")
    if len(kernel.conflict) not in ((2, 3) if kernel.kind == "empty" else (0,)):
        raise CertificateError(
            "two or three walls exclude each other in an empty kernel, and none in another"
        )
    if kernel.kind == "empty" and len(kernel.walls):
        raise CertificateError("no wall bounds an empty kernel")


def _check_conflict(room: Walls, kernel: KernelClaim) -> None:
    walls = room.places(kernel.conflict).tolist()
    ways = [room.way(wall) for wall in walls]
    if len(walls) == 2:
        (d, e), a = ways, room.wall(walls[0])[0]
        if cross(d, e) or d[0] * e[0] + d[1] * e[1] > 0 or room.side(walls[1], a) >= 0:
            raise CertificateError("the two walls of the conflict have common points")
        return
    if cross(ways[0], ways[1]) < 0:
        walls, ways = [walls[1], walls[0], walls[2]], [ways[1], ways[0], ways[2]]
    turns = [cross(ways[0], ways[1]), cross(ways[1], ways[2]), cross(ways[2], ways[0])]
    if min(turns) <= 0 or room.side(walls[2], room.meeting(walls[0], walls[1])) >= 0:
        raise CertificateError("the three walls of the conflict have common points")


def _check_point(room: Walls, kernel: KernelClaim) -> None:
    walls = room.places(kernel.walls).tolist()
    other = next((wall for wall in walls[1:] if cross(room.way(walls[0]), room.way(wall))), None)
    if other is None:
        raise CertificateError("no two walls of the point meet")
    corner = room.meeting(walls[0], other)
    ways = [room.way(wall) for wall in walls if room.side(wall, corner) == 0]
    if not all(any(cross(d, e) > 0 for e in ways) for d in ways):
        raise CertificateError("the walls of the point have more in common than a point")
    _check_thin(room, kernel.vertices, [corner])


def _check_segment(room: Walls, kernel: KernelClaim) -> None:
    walls = room.places(kernel.walls).tolist()
    if len(walls) < 4:
        raise CertificateError("a segment needs four walls")
    (a, _), d, e = room.wall(walls[0]), room.way(walls[0]), room.way(walls[1])
    if cross(d, e) or d[0] * e[0] + d[1] * e[1] > 0 or room.side(walls[1], a) != 0:
        raise CertificateError(
            "the first two walls of the segment do not run along one line in opposite directions"
        )
    low: list[Fraction] = []
    high: list[Fraction] = []
    for wall in walls[2:]:
        slope = cross(room.way(wall), d)
        if slope:
            (low if slope > 0 else high).append(-room.side(wall, a) / slope)
    if not low or not high or max(low) >= min(high):
        raise CertificateError("the walls of the segment do not bound it on both sides")
    ends = [(a[0] + t * d[0], a[1] + t * d[1]) for t in (max(low), min(high))]
    _check_thin(room, kernel.vertices, ends if _is_rounded(kernel.vertices, ends) else ends[::-1])


def _nearest(number: Fraction) -> float:
    try:
        return float(number)
    except OverflowError:
        return inf if number > 0 else -inf


def _is_rounded(vertices: Floats, corners: Sequence[Point]) -> bool:
    return bool(np.asarray(vertices).tolist() == [[_nearest(x), _nearest(y)] for x, y in corners])


def _check_rounded(vertices: Floats, corners: Sequence[Point]) -> None:
    if not _is_rounded(vertices, corners):
        raise CertificateError("a vertex is not the double nearest to where its walls meet")


def _check_thin(room: Walls, vertices: Floats, corners: Sequence[Point]) -> None:
    _check_rounded(vertices, corners)
    exact = dict(enumerate(corners))
    _check_all_hold(
        room, Corners.of(np.asarray(vertices), exact, np.zeros((0, 2))), np.zeros(0, dtype=np.int64)
    )


def _check_all_hold(room: Walls, corners: Corners, own: Indices) -> None:
    wall = first_cut(room, corners, own)
    if wall is not None:
        raise CertificateError(f"wall {room.name(wall)} cuts the kernel")


def _check_area(room: Walls, kernel: KernelClaim) -> None:
    sides = room.places(kernel.walls)
    ways = room.ends[sides] - room.starts[sides]
    _check_turns(room, sides, ways)
    corners = _corners_of_area(room, sides, np.asarray(kernel.vertices), ways)
    _check_lengths(room, sides, corners)
    _check_size(kernel.area, corners)
    _check_all_hold(room, corners, sides)


def _check_turns(room: Walls, sides: Indices, ways: Floats) -> None:
    """Each side must turn left from the one before, and all of them once around."""
    before = np.roll(ways, 1, axis=0)
    left, right = before[:, 0] * ways[:, 1], before[:, 1] * ways[:, 0]
    sure = left - right > 4 * UNIT * (np.abs(left) + np.abs(right)) + TINY
    for k in np.flatnonzero(~sure).tolist():
        if cross(room.way(int(sides[k - 1])), room.way(int(sides[k]))) <= 0:
            raise CertificateError("the sides of the kernel do not turn left all the way")
    upward = (ways[:, 1] > 0) | ((ways[:, 1] == 0) & (ways[:, 0] > 0))
    if np.count_nonzero(upward & ~np.roll(upward, 1)) != 1:
        raise CertificateError("the sides of the kernel do not go around once")


def _corners_of_area(room: Walls, sides: Indices, vertices: Floats, ways: Floats) -> Corners:
    """Corner k is where side k - 1 meets side k: the room's own point if one wall ends where the next starts."""
    before = np.roll(sides, 1)
    shared = (room.ends[before] == room.starts[sides]).all(axis=1)
    if (vertices[shared] != room.starts[sides[shared]]).any():
        raise CertificateError("a vertex is not the point that its two walls share")
    exact = {k: room.meeting(int(before[k]), int(sides[k])) for k in np.flatnonzero(~shared).tolist()}
    _check_rounded(vertices[list(exact)], list(exact.values()))
    return Corners.of(vertices, exact, ways)


def _check_lengths(room: Walls, sides: Indices, corners: Corners) -> None:
    """Each side must lead from its corner onward."""
    ways = corners.ways
    steps = np.roll(corners.vertices, -1, axis=0) - corners.vertices
    doubt = np.roll(corners.errors, -1, axis=0) + corners.errors + 2 * UNIT * np.abs(steps)
    along = (steps * ways).sum(axis=1)
    sure = along > (np.abs(ways) * doubt).sum(axis=1) * 2 + 8 * UNIT * np.abs(steps * ways).sum(axis=1) + TINY
    for k in np.flatnonzero(~sure).tolist():
        p, q = corners.corner(k), corners.corner((k + 1) % len(sides))
        d = room.way(int(sides[k]))
        if (q[0] - p[0]) * d[0] + (q[1] - p[1]) * d[1] <= 0:
            raise CertificateError("a side of the kernel has no length")


def _check_size(area: float, corners: Corners) -> None:
    """The area must be right to a part in 1e9; doubles are enough for that unless the kernel is thin or far away."""
    arms = corners.vertices - corners.vertices[0]
    sides = np.roll(corners.vertices, -1, axis=0) - corners.vertices
    twice = float((arms[:, 0] * sides[:, 1] - arms[:, 1] * sides[:, 0]).sum())
    reach = float(np.abs(corners.vertices).max() + np.abs(arms).max())
    size, error = twice / 2, 16 * UNIT * reach * float(np.abs(sides).sum()) + 1e-12 * twice
    if not error < 1e-10 * size < inf:
        first, *others = (corners.corner(k) for k in range(len(arms)))
        spokes = [(p[0] - first[0], p[1] - first[1]) for p in others]
        size = _nearest(sum((cross(p, q) for p, q in pairwise(spokes)), Fraction(0)) / 2)
    if area != size and not abs(area - size) <= 1e-9 * size + SMALLEST:
        raise CertificateError(f"the area is {size}, not {area}")
