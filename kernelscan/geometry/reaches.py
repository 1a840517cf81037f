"""A convex polygon cut by discs, with arcs kept as arcs: the part of a kernel from which all corners are in range.

Problem
    The points of a convex polygon that are within a distance R of every one of some corners.
Method
    The region is kept as its boundary, counter-clockwise, of straight pieces and arcs of circles. A disc cuts
    it like a half-plane would: each piece is split where it meets the circle, what lies outside is left out, and where
    one piece leaves the disc, an arc of the circle leads to where the next one comes in again. If no part of the
    boundary is inside, the disc lies inside the region, or has nothing in common with it.
    Only corners of the convex hull can be farthest.
Exactness
    Doubles; distances are compared to within 1e-12 of R.
Letters
    c the corner, centre of a disc; R the radius; a, b the ends of a piece; t a place along it, from 0 to 1.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from math import acos, atan2, ceil, cos, hypot, pi, sin, sqrt

import numpy as np
import numpy.typing as npt

from kernelscan.errors import GeometryError

__all__ = ["Arc", "Reach", "Stretch", "within_range"]

Floats = npt.NDArray[np.float64]
Point = tuple[float, float]

CLOSE = 1e-12


@dataclass(frozen=True, slots=True)
class Stretch:
    """A straight piece of boundary from a to b."""

    a: Point
    b: Point

    def at(self, t: float) -> Point:
        """Return the point at a place."""
        return self.a[0] + t * (self.b[0] - self.a[0]), self.a[1] + t * (self.b[1] - self.a[1])

    def part(self, t: float, u: float) -> "Stretch":
        """Return the piece between two places."""
        return Stretch(self.at(t), self.at(u))

    def meets(self, c: Point, radius: float) -> list[float]:
        """Return the places where it meets a circle."""
        dx, dy = self.b[0] - self.a[0], self.b[1] - self.a[1]
        gx, gy = self.a[0] - c[0], self.a[1] - c[1]
        square, half = dx * dx + dy * dy, dx * gx + dy * gy
        root = half * half - square * (gx * gx + gy * gy - radius * radius)
        if root < 0 or square == 0:
            return []
        return [(-half - sqrt(root)) / square, (-half + sqrt(root)) / square]

    def twice_sector(self) -> float:
        """Return twice the area between the origin and the piece."""
        return self.a[0] * self.b[1] - self.a[1] * self.b[0]

    def points(self, chord: float) -> list[Point]:
        """Return the start of the piece, and no more."""
        return [self.a]


@dataclass(frozen=True, slots=True)
class Arc:
    """A piece of a circle, counter-clockwise from the angle ``start`` by ``sweep`` radians."""

    centre: Point
    radius: float
    start: float
    sweep: float

    def at(self, t: float) -> Point:
        """Return the point at a place."""
        angle = self.start + t * self.sweep
        return self.centre[0] + self.radius * cos(angle), self.centre[1] + self.radius * sin(angle)

    def part(self, t: float, u: float) -> "Arc":
        """Return the piece between two places."""
        return Arc(self.centre, self.radius, self.start + t * self.sweep, (u - t) * self.sweep)

    def meets(self, c: Point, radius: float) -> list[float]:
        """Return the places where it meets a circle of the same radius."""
        dx, dy = c[0] - self.centre[0], c[1] - self.centre[1]
        apart = hypot(dx, dy)
        if not 0 < apart <= 2 * radius:
            return []
        middle, half = atan2(dy, dx), acos(apart / (2 * radius))
        return [(angle - self.start) % (2 * pi) / self.sweep for angle in (middle - half, middle + half)]

    def twice_sector(self) -> float:
        """Return twice the area between the origin and the piece."""
        (ax, ay), (bx, by), (cx, cy) = self.at(0), self.at(1), self.centre
        return cx * (by - ay) - cy * (bx - ax) + self.radius * self.radius * self.sweep

    def points(self, chord: float) -> list[Point]:
        """Return the start and points between, so that chords stray from the arc by at most ``chord``."""
        step = 2 * acos(max(0.0, 1 - chord / self.radius))
        count = max(1, ceil(self.sweep / step)) if step > 0 else 1
        return [self.at(k / count) for k in range(count)]


Piece = Stretch | Arc


@dataclass(frozen=True, slots=True)
class Reach:
    """A convex region bounded by straight pieces and arcs, counter-clockwise; none if it is empty."""

    pieces: tuple[Piece, ...]

    @property
    def area(self) -> float:
        """Its area."""
        return sum(piece.twice_sector() for piece in self.pieces) / 2

    def flattened(self, chord: float) -> Floats:
        """Return ``(k, 2)`` points of its boundary; chords stray from the arcs by at most ``chord``."""
        if not chord > 0:
            raise GeometryError(f"arcs need a chord error above 0, got {chord}")
        return np.array([point for piece in self.pieces for point in piece.points(chord)]).reshape(-1, 2)


def within_range(vertices: Floats, corners: Floats, radius: float) -> Reach:
    """Return the part of a convex polygon that is within a distance of all corners.

    Parameters
    ----------
    vertices
        ``(k, 2)`` the polygon, counter-clockwise; a segment for two, a point for one.
    corners
        ``(m, 2)`` the corners to be reached.
    radius
        The range, above 0.
    """
    if not 0 < radius < np.inf:
        raise GeometryError(f"a range is a length above 0, got {radius}")
    origin = corners.mean(axis=0)
    ring = [(float(x), float(y)) for x, y in vertices - origin]
    pieces: list[Piece] = [Stretch(a, b) for a, b in pairwise([*ring, ring[0]])] if ring else []
    for c in _hull(corners - origin):
        pieces = _cut(pieces, c, radius)
    return Reach(tuple(_moved(piece, origin) for piece in pieces))


def _cut(pieces: list[Piece], c: Point, radius: float) -> list[Piece]:
    """Keep what lies in a disc."""
    kept = [part for piece in pieces for part in _inside(piece, c, radius)]
    if not kept:
        return [Arc(c, radius, 0.0, 2 * pi)] if _holds(pieces, c) else []
    joined: list[Piece] = []
    for piece, following in zip(kept, [*kept[1:], kept[0]], strict=True):
        (ax, ay), (bx, by) = piece.at(1), following.at(0)
        joined.append(piece)
        if hypot(bx - ax, by - ay) > CLOSE * radius:
            start = atan2(ay - c[1], ax - c[0])
            joined.append(Arc(c, radius, start, (atan2(by - c[1], bx - c[0]) - start) % (2 * pi)))
    return joined


def _inside(piece: Piece, c: Point, radius: float) -> list[Piece]:
    """Return the parts of a piece in a disc."""
    if isinstance(piece, Stretch) and piece.a == piece.b:
        return [piece] if hypot(piece.a[0] - c[0], piece.a[1] - c[1]) <= radius * (1 + CLOSE) else []
    places = sorted({0.0, 1.0, *(t for t in piece.meets(c, radius) if CLOSE < t < 1 - CLOSE)})
    parts: list[Piece] = []
    for t, u in pairwise(places):
        x, y = piece.at((t + u) / 2)
        if hypot(x - c[0], y - c[1]) <= radius * (1 + CLOSE):
            parts.append(piece.part(t, u))
    return parts


def _holds(pieces: Sequence[Piece], c: Point) -> bool:
    """Whether a point lies inside the region of which these pieces are the boundary."""
    inside = len(pieces) > 2 or any(isinstance(piece, Arc) for piece in pieces)
    for piece in pieces:
        if isinstance(piece, Arc):
            inside &= hypot(c[0] - piece.centre[0], c[1] - piece.centre[1]) <= piece.radius
        else:
            (ax, ay), (bx, by) = piece.a, piece.b
            inside &= (bx - ax) * (c[1] - ay) - (by - ay) * (c[0] - ax) >= 0
    return inside


def _hull(points: Floats) -> list[Point]:
    """Return the corners of the convex hull, by Andrew's monotone chains."""
    ordered = sorted({(float(x), float(y)) for x, y in points})
    chains = []
    for way in (ordered, ordered[::-1]):
        chain: list[Point] = []
        for p in way:
            while len(chain) > 1 and _turn(chain[-2], chain[-1], p) <= 0:
                chain.pop()
            chain.append(p)
        chains.append(chain[:-1] or chain)
    return list(dict.fromkeys(chains[0] + chains[1]))


def _turn(a: Point, b: Point, c: Point) -> float:
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])


def _moved(piece: Piece, by: Floats) -> Piece:
    x, y = float(by[0]), float(by[1])
    if isinstance(piece, Arc):
        return Arc((piece.centre[0] + x, piece.centre[1] + y), piece.radius, piece.start, piece.sweep)
    return Stretch((piece.a[0] + x, piece.a[1] + y), (piece.b[0] + x, piece.b[1] + y))
