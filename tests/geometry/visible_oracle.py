"""What one eye sees, by brute force in rational arithmetic; shares no code with the package.

The directions to all corners, and the four axes, are sorted around the eye. In each sector between neighbours a ray
through the middle is cut with every wall; the nearest wall cut is seen over the sector if the middle of the way
to it is floor. Quadratic, and meant for rooms of a few dozen walls.
"""

from fractions import Fraction
from functools import cmp_to_key
from itertools import pairwise
from typing import NamedTuple

Point = tuple[Fraction, Fraction]


class Seen(NamedTuple):
    """One wall over one or more neighbouring sectors: its number through all rings, and where it is cut."""

    wall: int
    first: Point
    last: Point


def exact(points: object) -> list[Point]:
    return [(Fraction(float(x)), Fraction(float(y))) for x, y in points]  # type: ignore[attr-defined]


def cross(a: Point, b: Point) -> Fraction:
    return a[0] * b[1] - a[1] * b[0]


def minus(a: Point, b: Point) -> Point:
    return a[0] - b[0], a[1] - b[1]


def walls_of(rings: object) -> list[tuple[Point, Point]]:
    walls = []
    for ring in rings:  # type: ignore[attr-defined]
        points = exact(ring)
        walls += list(zip(points, points[1:] + points[:1], strict=True))
    return walls


def in_floor(walls: list[tuple[Point, Point]], c: Point) -> bool:
    """Even-odd rule for a point on no wall."""
    odd = False
    for p, q in walls:
        if (p[1] > c[1]) != (q[1] > c[1]):
            x = p[0] + (c[1] - p[1]) / (q[1] - p[1]) * (q[0] - p[0])
            odd ^= x > c[0]
    return odd


def on_wall(walls: list[tuple[Point, Point]], c: Point) -> bool:
    for p, q in walls:
        a, b = minus(p, c), minus(q, c)
        if cross(a, b) == 0 and a[0] * b[0] + a[1] * b[1] <= 0:
            return True
    return False


def sorted_directions(c: Point, points: list[Point]) -> list[Point]:
    def half(v: Point) -> int:
        return 0 if v[1] < 0 or (v[1] == 0 and v[0] < 0) else 1

    def compare(a: Point, b: Point) -> int:
        if half(a) != half(b):
            return half(a) - half(b)
        turn = cross(a, b)
        return (turn < 0) - (turn > 0)

    one, zero = Fraction(1), Fraction(0)
    axes = [(one, zero), (zero, one), (-one, zero), (zero, -one)]
    found: list[Point] = []
    for v in sorted([minus(p, c) for p in points if p != c] + axes, key=cmp_to_key(compare)):
        if not found or compare(found[-1], v) != 0:
            found.append(v)
    return found


def hit(c: Point, u: Point, p: Point, q: Point) -> Fraction | None:
    """Return s > 0 with c + s u strictly between p and q, or None."""
    d = minus(q, p)
    slope = cross(u, d)
    if slope == 0:
        return None
    s, t = cross(minus(p, c), d) / slope, cross(minus(p, c), u) / slope
    return s if s > 0 and 0 < t < 1 else None


def foot(c: Point, u: Point, p: Point, q: Point) -> Point:
    d = minus(q, p)
    s = cross(minus(p, c), d) / cross(u, d)
    return c[0] + s * u[0], c[1] + s * u[1]


def middle(a: Point, b: Point) -> Point:
    """Return a direction strictly between two that are less than half a turn apart."""
    size_a, size_b = abs(a[0]) + abs(a[1]), abs(b[0]) + abs(b[1])
    return a[0] / size_a + b[0] / size_b, a[1] / size_a + b[1] / size_b


def sight(rings: object, eye: object) -> list[Seen]:
    """Return the pieces of wall seen from an eye of the room, in order around it."""
    walls = walls_of(rings)
    (c,) = exact([eye])
    directions = sorted_directions(c, [p for p, _ in walls])
    pieces: list[Seen] = []
    for a, b in zip(directions, directions[1:] + directions[:1], strict=True):
        u = middle(a, b)
        hits = [(s, k) for k, (p, q) in enumerate(walls) if (s := hit(c, u, p, q)) is not None]
        if not hits:
            continue
        s, k = min(hits)
        if not in_floor(walls, (c[0] + s / 2 * u[0], c[1] + s / 2 * u[1])):
            continue
        p, q = walls[k]
        pieces.append(Seen(k, foot(c, a, p, q), foot(c, b, p, q)))
    return joined(pieces)


def joined(pieces: list[Seen]) -> list[Seen]:
    """Join neighbouring pieces of one wall."""
    found: list[Seen] = []
    for piece in pieces:
        if found and found[-1].wall == piece.wall and found[-1].last == piece.first:
            found[-1] = Seen(piece.wall, found[-1].first, piece.last)
        else:
            found.append(piece)
    if len(found) > 1 and found[0].wall == found[-1].wall and found[-1].last == found[0].first:
        found[0] = Seen(found[0].wall, found.pop().first, found[0].last)
    return found


def seen_area(pieces: list[Seen], eye: object) -> Fraction:
    (c,) = exact([eye])
    return sum((cross(minus(s.first, c), minus(s.last, c)) for s in pieces), Fraction(0)) / 2


def sees(rings: object, eye: object, target: object) -> bool:
    """Whether the straight line from the eye to the target stays in the closed floor."""
    walls = walls_of(rings)
    c, g = exact([eye, target])
    u = minus(g, c)
    stops = {Fraction(0), Fraction(1)}
    for p, q in walls:
        d = minus(q, p)
        slope = cross(u, d)
        if slope != 0:
            s, t = cross(minus(p, c), d) / slope, cross(minus(p, c), u) / slope
            if 0 <= t <= 1 and 0 < s < 1:
                stops.add(s)
        elif cross(minus(p, c), u) == 0:
            along = [
                (minus(e, c)[0] * u[0] + minus(e, c)[1] * u[1]) / (u[0] ** 2 + u[1] ** 2) for e in (p, q)
            ]
            stops |= {s for s in along if 0 < s < 1}
    cuts = sorted(stops)
    for low, high in pairwise(cuts):
        s = (low + high) / 2
        m = (c[0] + s * u[0], c[1] + s * u[1])
        if not on_wall(walls, m) and not in_floor(walls, m):
            return False
    return True
