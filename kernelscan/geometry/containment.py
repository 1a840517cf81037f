"""Which wall of a room, if any, has a half-plane that does not hold a given convex polygon: for the certificate.

Problem
    Given all the walls of a room and the corners of a convex polygon, find a wall with a corner on its outer side.
Method
    Along the polygon the cross product of a wall's way d with the corner falls while the sides turn right from d and
    rises while they turn left, so the corner farthest out of the wall's half-plane is where the sides' ways pass d:
    found by angle. Angles are rounded, so that corner and its two neighbours are asked, and the sides before and
    after these must surely turn away. Up to eight corners are asked one and all.
Exactness
    Corners come as doubles with a bound on each coordinate's error, and exactly on request. With e = 2**-53, a
    difference of doubles errs by a part e and a product of two such by a part 3 e, so x y - x' y' is off by less than
    4 e (|x y| + |x' y'|), and by the corner's own errors times |d|. Walls within the bound are settled with fractions:
    from the corner found, exact values lead downhill to the lowest, since they have no other lowest place.
Cost
    O(n log k) in array operations for n walls and k corners, and some ten microseconds for each doubtful wall.
Letters
    a, b the ends of a wall, d = b - a its way; k a corner's number.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.rings import Ring

__all__ = ["TINY", "UNIT", "Corners", "Floats", "Indices", "Point", "Walls", "cross", "first_cut"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.int64]
Point = tuple[Fraction, Fraction]

UNIT = 2.0**-53
TINY = 2.0**-1000
"""More than underflow can take from a sum of products, and less than any such sum that matters."""

_FEW = 8
_CHUNK = 1 << 15


@dataclass(frozen=True, slots=True, eq=False)
class Walls:
    """All the walls of a room in one row: ``starts`` and ``ends`` ``(n, 2)``, and where each ring begins."""

    starts: Floats
    ends: Floats
    firsts: Indices

    @staticmethod
    def of(rings: Sequence[Ring]) -> "Walls":
        """Return the walls of some rings."""
        firsts = np.cumsum([0, *(len(ring) for ring in rings)])
        ends = [np.concatenate([ring[1:], ring[:1]]) for ring in rings]
        return Walls(np.concatenate(rings), np.concatenate(ends), firsts)

    def places(self, names: Indices) -> Indices:
        """Return where the named walls stand in the row."""
        ring, edge = np.asarray(names, dtype=np.int64).T
        known = (ring >= 0) & (ring < len(self.firsts) - 1) & (edge >= 0)
        if not known.all() or not (edge < np.diff(self.firsts)[ring]).all():
            raise IndexError("a wall is named that the room does not have")
        return np.asarray(self.firsts[ring] + edge)

    def name(self, place: int) -> list[int]:
        """Return [ring, edge] of a wall."""
        ring = int(np.searchsorted(self.firsts, place, side="right")) - 1
        return [ring, int(place - self.firsts[ring])]

    def wall(self, place: int) -> tuple[Point, Point]:
        """Return the ends of a wall, exactly."""
        return exact(self.starts[place]), exact(self.ends[place])

    def way(self, place: int) -> Point:
        """Return the direction of a wall, exactly."""
        (ax, ay), (bx, by) = self.wall(place)
        return bx - ax, by - ay

    def side(self, place: int, c: Point) -> Fraction:
        """Positive if the wall's half-plane holds the point with some distance, 0 on the wall's line."""
        a, b = self.wall(place)
        return cross((b[0] - a[0], b[1] - a[1]), (c[0] - a[0], c[1] - a[1]))

    def meeting(self, g: int, h: int) -> Point:
        """Return where the lines of two walls meet; they must not be parallel. Whole numbers are quicker here."""
        (u, v, w), (r, s, t) = self._equation(g), self._equation(h)
        q = u * s - r * v
        return Fraction(v * t - s * w, q), Fraction(w * r - t * u, q)

    def _equation(self, place: int) -> tuple[int, int, int]:
        """Return whole numbers u, v, w with u x + v y + w = 0 on the line of a wall."""
        ratios = [
            number.as_integer_ratio() for number in (*self.starts[place].tolist(), *self.ends[place].tolist())
        ]
        unit = max(denominator for _, denominator in ratios)
        ax, ay, bx, by = (numerator * (unit // denominator) for numerator, denominator in ratios)
        return (ay - by) * unit, (bx - ax) * unit, ax * by - bx * ay


@dataclass(frozen=True, slots=True, eq=False)
class Corners:
    """A convex polygon, a segment or a point.

    Attributes
    ----------
    vertices, errors
        ``(k, 2)``: the corners, counter-clockwise, and a bound on how far off each coordinate is.
    exact
        The exact corners by number, of those that are not their vertices already.
    ways
        ``(k, 2)``: the way of each side, from corner k on; a segment and a point need none.
    """

    vertices: Floats
    errors: Floats
    exact: dict[int, Point]
    ways: Floats

    @staticmethod
    def of(vertices: Floats, exact: dict[int, Point], ways: Floats) -> "Corners":
        """Take vertices that are the corners, or for the numbers given in ``exact`` the nearest doubles to them."""
        errors = np.zeros_like(vertices)
        for k, corner in exact.items():
            for axis, coordinate in enumerate(corner):
                v = float(vertices[k, axis])
                errors[k, axis] = 0.0 if coordinate == Fraction(v) else abs(v) * UNIT + TINY
        return Corners(vertices, errors, exact, ways)

    def corner(self, k: int) -> Point:
        """Return a corner exactly."""
        return self.exact[k] if k in self.exact else exact(self.vertices[k])


def exact(v: Floats) -> Point:
    """Return a point of doubles as fractions."""
    return Fraction(float(v[0])), Fraction(float(v[1]))


def cross(d: Point, e: Point) -> Fraction:
    """Return d x e: positive if e turns left from d by less than half a turn."""
    return d[0] * e[1] - d[1] * e[0]


def first_cut(walls: Walls, corners: Corners, own: Indices) -> int | None:
    """Return a wall whose half-plane does not hold all the corners, looking at all but ``own``; or None."""
    others = np.ones(len(walls.starts), dtype=bool)
    others[own] = False
    places = np.flatnonzero(others)
    search = _Search(corners)
    for k in range(0, len(places), _CHUNK):
        chunk = places[k : k + _CHUNK]
        sure, near = search.held(walls.starts[chunk], walls.ends[chunk] - walls.starts[chunk])
        for place, guess in zip(chunk[~sure].tolist(), near[~sure].tolist(), strict=True):
            if _farthest_out(walls, place, corners, guess) < 0:
                return int(place)
    return None


class _Search:
    """For walls in bulk: whether they surely hold the corners, and which corner is about the farthest out."""

    def __init__(self, corners: Corners) -> None:
        self.corners, self.count = corners, len(corners.vertices)
        self.order = np.arange(self.count)
        self.angles = np.zeros(self.count)
        if self.count > _FEW:
            angles = np.arctan2(corners.ways[:, 1], corners.ways[:, 0])
            self.order = np.argsort(angles, kind="stable")
            self.angles = angles[self.order]

    def held(self, a: Floats, d: Floats) -> tuple[npt.NDArray[np.bool_], Indices]:
        """Return which walls surely hold all the corners, and a corner near the one farthest out of each."""
        near = self.order[np.searchsorted(self.angles, np.arctan2(d[:, 1], d[:, 0])) % self.count]
        window = range(self.count) if self.count <= _FEW else range(-1, 2)
        sure = np.ones(len(a), dtype=bool)
        for shift in window:
            sure &= self._holds(a, d, (near + shift) % self.count)
        if self.count > _FEW:
            sure &= _turn(d, self.corners.ways[(near - 2) % self.count]) < 0
            sure &= _turn(d, self.corners.ways[(near + 1) % self.count]) > 0
        return sure, near

    def _holds(self, a: Floats, d: Floats, k: Indices) -> npt.NDArray[np.bool_]:
        offset, error = self.corners.vertices[k] - a, self.corners.errors[k]
        left, right = d[:, 0] * offset[:, 1], d[:, 1] * offset[:, 0]
        own = np.abs(d[:, 0]) * error[:, 1] + np.abs(d[:, 1]) * error[:, 0]
        beyond = left - right > 4 * UNIT * (np.abs(left) + np.abs(right)) + 2 * own + TINY
        along = (
            (d == 0).any(axis=1)
            & (np.where(d == 0, 0.0, np.abs(offset[:, ::-1])) == 0).all(axis=1)
            & (own == 0)
        )
        return np.asarray(beyond | along)


def _turn(d: Floats, e: Floats) -> Floats:
    """Return d x e where its sign is sure, and else 0."""
    left, right = d[:, 0] * e[:, 1], d[:, 1] * e[:, 0]
    value = left - right
    return np.where(np.abs(value) > 4 * UNIT * (np.abs(left) + np.abs(right)) + TINY, value, 0.0)


def _farthest_out(walls: Walls, place: int, corners: Corners, near: int) -> Fraction:
    """Return the lowest exact value of a wall over the corners, going downhill from a corner that is near it."""
    count = len(corners.vertices)
    if count <= _FEW:
        return min(walls.side(place, corners.corner(k)) for k in range(count))
    here = walls.side(place, corners.corner(near))
    for step in (1, -1):
        k = (near + step) % count
        there = walls.side(place, corners.corner(k))
        while there < here:
            near, here, k = k, there, (k + step) % count
            there = walls.side(place, corners.corner(k))
    return here
