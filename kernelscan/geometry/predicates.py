"""Exact questions about lines of the plane, in integer arithmetic.

Problem
    A half-plane is given by six doubles, a :data:`Row`: a point p of its border and the two ends t -> h of its
    way; its points q are those with (h - t) x (q - p) >= 0, the ones on the left. For a wall p = t. Whatever those
    doubles are, questions of sign must be answered for exactly these numbers.
Method
    A double is an integer over a power of two, so each row has a line (u, v, w) of integers with
    u x + v y + w >= 0 exactly on the half-plane (a positive common factor is of no account). Everything else is
    oriented projective geometry: two lines g, h meet in the triple g x h = (X, Y, W), the point (X/W, Y/W) if W > 0
    and a direction if W = 0. W is the cross product of the two ways, so that W > 0 when h turns left from g. A
    constructed point is never rounded and asked about: it is named by its two lines.
Cost
    A few microseconds for a line of ordinary numbers; integers grow with the spread of the exponents.
Letters
    g, h lines (u, v, w); q a triple (X, Y, W).
Source
    J. Stolfi, Oriented Projective Geometry, 1991, for the signs; Helly 1923 for conflicts of two or three.
"""

from collections.abc import Sequence
from itertools import combinations
from math import copysign, inf

__all__ = [
    "AT_INFINITY",
    "Line",
    "Row",
    "Triple",
    "exact_line",
    "excludes",
    "first_conflict",
    "meet",
    "quotient",
    "rounded",
    "same_way",
    "sign",
    "turn",
    "value",
]

Row = Sequence[float]
"""Six doubles (px, py, tx, ty, hx, hy): the half-plane left of the line through p in the direction h - t."""

Line = tuple[int, int, int]
"""Integers (u, v, w): the half-plane u x + v y + w >= 0."""

Triple = tuple[int, int, int]
"""Integers (X, Y, W), W >= 0: the point (X/W, Y/W), or the direction (X, Y) if W = 0."""

AT_INFINITY: Line = (0, 0, 1)
"""The line at infinity: the half-plane that holds every point."""


def exact_line(row: Row) -> Line:
    """Return integers (u, v, w) with u x + v y + w >= 0 exactly on the half-plane of the row."""
    px, py, tx, ty, hx, hy = row
    tx_, ty_, hx_, hy_, d = _integers(tx, ty, hx, hy)
    u, v = ty_ - hy_, hx_ - tx_
    if px == tx and py == ty:
        return u * d, v * d, -(u * tx_ + v * ty_)
    px_, py_, _, _, d = _integers(px, py, px, py)
    return u * d, v * d, -(u * px_ + v * py_)


def _integers(a: float, b: float, c: float, d: float) -> tuple[int, int, int, int, int]:
    """Return four numbers times their least common denominator, a power of two, and that denominator."""
    a_, p = a.as_integer_ratio()
    b_, q = b.as_integer_ratio()
    c_, r = c.as_integer_ratio()
    d_, s = d.as_integer_ratio()
    common = max(p, q, r, s)
    return a_ * (common // p), b_ * (common // q), c_ * (common // r), d_ * (common // s), common


def turn(g: Line, h: Line) -> int:
    """Return the cross product of the two ways: positive if h turns left from g by less than half a turn."""
    return g[0] * h[1] - g[1] * h[0]


def same_way(g: Line, h: Line) -> bool:
    """Whether two lines run exactly in the same direction."""
    return turn(g, h) == 0 and g[0] * h[0] + g[1] * h[1] > 0


def meet(g: Line, h: Line) -> Triple:
    """Return where two lines meet; W > 0 if h turns left from g."""
    return g[1] * h[2] - h[1] * g[2], g[2] * h[0] - h[2] * g[0], g[0] * h[1] - h[0] * g[1]


def value(h: Line, q: Triple) -> int:
    """Return a number with the sign of the side of h on which q lies: positive inside."""
    return h[0] * q[0] + h[1] * q[1] + h[2] * q[2]


def sign(number: float) -> int:
    """Return -1, 0 or 1."""
    return (number > 0) - (number < 0)


def rounded(q: Triple) -> tuple[float, float]:
    """Return the doubles nearest to the coordinates of a point, W != 0; beyond the largest double, infinity."""
    return quotient(q[0], q[2]), quotient(q[1], q[2])


def quotient(numerator: int, denominator: int) -> float:
    """Return the double nearest to a quotient; beyond the largest double, infinity."""
    try:
        return numerator / denominator  # correctly rounded for integers of any size
    except OverflowError:
        return copysign(inf, sign(numerator) * sign(denominator))


def excludes(lines: Sequence[Line]) -> bool:
    """Whether two or three half-planes have no common point and, if three, no two of them are enough for that.

    By Farkas' lemma non-negative multiples of them must add up to a negative constant; for two they are
    antiparallel, for three they are the cross products of the other two ways.
    """
    if len(lines) == 2:
        g, h = lines
        opposite = turn(g, h) == 0 and g[0] * h[0] + g[1] * h[1] < 0
        k = 0 if g[0] else 1
        return opposite and g[2] * abs(h[k]) + h[2] * abs(g[k]) < 0
    f, g, h = lines if turn(lines[0], lines[1]) > 0 else (lines[1], lines[0], lines[2])
    weights = turn(g, h), turn(h, f), turn(f, g)
    return min(weights) > 0 and weights[0] * f[2] + weights[1] * g[2] + weights[2] * h[2] < 0


def first_conflict(lines: Sequence[Line]) -> tuple[int, ...] | None:
    """Return the first pair or else triple that excludes each other, as positions; None if there is none."""
    for size in (2, 3):
        for places in combinations(range(len(lines)), size):
            if excludes([lines[k] for k in places]):
                return places
    return None
