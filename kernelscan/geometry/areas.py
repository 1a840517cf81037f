"""The area of a convex polygon whose corners are known exactly and, rounded, as doubles.

Problem
    The area of a kernel to a part in 1e12, also where the kernel is a sliver far from the origin.
Method
    Twice the area is the sum of p x e over the sides e, p their starts as seen from the first corner; no term is
    negative. With e = 2**-53 and m the largest |coordinate|, rounding the corners moves each by at most e m in x and in
    y, which changes twice the area by at most 4 e m L + 8 k (e m)**2, L the sum of the sides' |x| + |y| and k their
    number; evaluating the terms errs by at most 8 e R L, R the reach of the polygon, and adding them, exactly rounded,
    by a part e. If that is too much, the terms are taken from the exact corners.
"""

from collections.abc import Callable, Sequence
from fractions import Fraction
from itertools import pairwise
from math import fsum, inf

import numpy as np

from kernelscan.geometry.predicates import Triple, quotient
from kernelscan.geometry.rings import Ring

__all__ = ["polygon_area", "ring_area"]

UNIT = 2.0**-53
WANTED = 1e-12


def polygon_area(vertices: Sequence[Sequence[float]], exact_corners: Callable[[], Sequence[Triple]]) -> float:
    """Return the area within a convex polygon, counter-clockwise; infinity where it is beyond the doubles."""
    ox, oy = vertices[0]
    terms, length = [], 0.0
    for (px, py), (qx, qy) in pairwise(vertices):
        ex, ey = qx - px, qy - py
        length += abs(ex) + abs(ey)
        terms.append((px - ox) * ey - (py - oy) * ex)
    xs, ys = zip(*vertices, strict=True)
    size = max(abs(x) for x in (max(xs), max(ys), min(xs), min(ys)))
    reach = max(xs) - min(xs) + max(ys) - min(ys)
    error = (
        16 * UNIT * (size + reach) * (length + reach)
        + 16 * len(terms) * (UNIT * size) * (UNIT * size)
        + 2.0**-1000
    )
    if error < inf:
        twice = fsum(terms)
        if error < WANTED * twice:
            return twice / 2
    return _exact_area([(Fraction(x, w), Fraction(y, w)) for x, y, w in exact_corners()])


def ring_area(ring: Ring) -> float:
    """Return the area within a convex ring, the vertices of which are exact, so that only the terms are in error."""
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        x, y = np.ascontiguousarray(ring.T)
        e_x, e_y = x[1:] - x[:-1], y[1:] - y[:-1]
        x, y = x[:-1] - x[0], y[:-1] - y[0]
        twice = float((x * e_y - y * e_x).sum())
        length = float(np.abs(e_x).sum() + np.abs(e_y).sum())
        error = 16 * UNIT * length * length + 2.0**-1000
    if error < WANTED * twice < inf:
        return twice / 2
    return _exact_area([(Fraction(x), Fraction(y)) for x, y in ring.tolist()])


def _exact_area(corners: Sequence[tuple[Fraction, Fraction]]) -> float:
    (ox, oy), *others = corners
    arms = [(x - ox, y - oy) for x, y in others]
    triangles = [(px * qy - py * qx) / 2 for (px, py), (qx, qy) in pairwise(arms)]
    try:
        return fsum(quotient(triangle.numerator, triangle.denominator) for triangle in triangles)
    except OverflowError:
        return inf
