"""The exact kernel of a room by the plainest means: a polygon of rationals, clipped by one wall after another.

It shares nothing with the package. The clipped polygon may shrink to a segment, a point or nothing; every corner is
a pair of fractions, and nothing is ever rounded.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

Point = tuple[Fraction, Fraction]


@dataclass(frozen=True)
class ExactKernel:
    """What the oracle says: the kind, the corners (counter-clockwise, none of them flat) and the area."""

    kind: str
    corners: tuple[Point, ...]
    area: Fraction


def exact_kernel(rings: Sequence[Sequence[Sequence[float]]]) -> ExactKernel:
    """Clip a box around the room by the inner side of every wall: outline counter-clockwise, holes clockwise."""
    exact = [[(Fraction(x), Fraction(y)) for x, y in ring] for ring in rings]
    region = box_around([p for ring in exact for p in ring])
    for ring in exact:
        for a, b in zip(ring, ring[1:] + ring[:1], strict=True):
            region = clipped(region, a, b)
            if not region:
                return ExactKernel("empty", (), Fraction(0))
    return described(region)


def described(region: list[Point]) -> ExactKernel:
    corners = without_flat_corners(region)
    kind = {0: "empty", 1: "point", 2: "segment"}.get(len(corners), "area")
    return ExactKernel(kind, tuple(corners), twice_area(corners) / 2)


def box_around(points: list[Point]) -> list[Point]:
    xs, ys = [p[0] for p in points], [p[1] for p in points]
    low, high, bottom, top = min(xs) - 1, max(xs) + 1, min(ys) - 1, max(ys) + 1
    return [(low, bottom), (high, bottom), (high, top), (low, top)]


def side(a: Point, b: Point, p: Point) -> Fraction:
    """Positive on the left of the line from a to b."""
    return (b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0])


def clipped(region: list[Point], a: Point, b: Point) -> list[Point]:
    """Keep of a convex polygon, thin ones included, what is not on the right of the line from a to b."""
    sides = [side(a, b, p) for p in region]
    if min(sides) >= 0:
        return region
    kept: list[Point] = []
    for k, (p, s) in enumerate(zip(region, sides, strict=True)):
        q, t = region[k - 1], sides[k - 1]
        if s * t < 0:
            f = t / (t - s)
            kept.append((q[0] + f * (p[0] - q[0]), q[1] + f * (p[1] - q[1])))
        if s >= 0:
            kept.append(p)
    return [p for k, p in enumerate(kept) if p != kept[k - 1] or len(kept) == 1] or kept[:1]


def without_flat_corners(region: list[Point]) -> list[Point]:
    if len(region) < 3:
        return list(dict.fromkeys(region))
    count = len(region)
    corners = [p for k, p in enumerate(region) if side(region[k - 1], p, region[(k + 1) % count])]
    return corners or [min(region), max(region)]


def twice_area(corners: Sequence[Point]) -> Fraction:
    return sum(
        (p[0] * q[1] - p[1] * q[0] for p, q in zip(corners, [*corners[1:], *corners[:1]], strict=True)),
        Fraction(0),
    )
