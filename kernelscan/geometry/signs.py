"""On which side of a line a point lies, for one point or for whole arrays, exactly.

Problem
    The sign of (b - a) x (c - a) for points given as doubles.
Method
    A float with a proven bound; where that says nothing, rational arithmetic for the single triple.
Source
    The bound: Shewchuk, "Adaptive precision floating-point arithmetic and fast robust geometric predicates", 1997.
"""

from collections.abc import Sequence
from fractions import Fraction

import numpy as np
import numpy.typing as npt

__all__ = ["ROUNDOFF", "SMALLEST", "Point", "orientation", "orientations"]

Floats = npt.NDArray[np.float64]
Point = Sequence[float | Fraction]

ROUNDOFF = 2.0**-53
"""The relative error of one operation on doubles."""

SMALLEST = 1e-290
"""Above the absolute error of a cross product whose factors or products underflow."""


def orientation(a: Point, b: Point, c: Point) -> int:
    """Return +1 if c lies left of a -> b, -1 if right of it, 0 if on the line; exact, for doubles or rationals."""
    left, right = (b[0] - a[0]) * (c[1] - a[1]), (b[1] - a[1]) * (c[0] - a[0])
    value = left - right
    if isinstance(left, float) and isinstance(right, float):
        bound = 8 * ROUNDOFF * (abs(left) + abs(right)) + SMALLEST
        if value > bound:
            return 1
        if value < -bound:
            return -1
        return _exact_orientation(a, b, c)
    return (value > 0) - (value < 0)


def _exact_orientation(a: Point, b: Point, c: Point) -> int:
    if (a[0] == b[0] or a[1] == c[1]) and (a[1] == b[1] or a[0] == c[0]):
        return 0
    rational = [(Fraction(x), Fraction(y)) for x, y in (a, b, c)]
    return orientation(*rational)


def orientations(a: Floats, b: Floats, c: Floats) -> npt.NDArray[np.int8]:
    """Return +1 where c lies left of a -> b, -1 right of it, 0 on the line; exact for any finite doubles.

    Parameters
    ----------
    a, b, c
        ``(..., 2)``, broadcast against each other.
    """
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        d, e = b - a, c - a
        left, right = d[..., 0] * e[..., 1], d[..., 1] * e[..., 0]
        value, bound = left - right, 8 * ROUNDOFF * (np.abs(left) + np.abs(right)) + SMALLEST
        signs = np.asarray((value > bound).astype(np.int8) - (value < -bound))
    doubtful = signs == 0
    if doubtful.any():
        triples = (x[doubtful].tolist() for x in np.broadcast_arrays(a, b, c))
        signs[doubtful] = [_exact_orientation(*triple) for triple in zip(*triples, strict=True)]
    return signs
