"""On which side of a line points lie, for whole arrays at once and exactly.

Problem
    The sign of (b - a) x (c - a) for many triples of points given as doubles.
Method
    A float with a proven bound; where that says nothing, rational arithmetic for the single triple.
Source
    The bound: Shewchuk, "Adaptive precision floating-point arithmetic and fast robust geometric predicates", 1997.
"""

from fractions import Fraction

import numpy as np
import numpy.typing as npt

__all__ = ["orientations"]

Floats = npt.NDArray[np.float64]

_UNIT = 2.0**-53


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
        value, bound = left - right, 8 * _UNIT * (np.abs(left) + np.abs(right)) + 1e-290
        signs = np.asarray((value > bound).astype(np.int8) - (value < -bound))
        doubtful = np.abs(signs) == 0
    if doubtful.any():
        a, b, c = np.broadcast_arrays(a, b, c)
        signs[doubtful] = [
            _sign(*t)
            for t in zip(a[doubtful].tolist(), b[doubtful].tolist(), c[doubtful].tolist(), strict=True)
        ]
    return signs


def _sign(a: list[float], b: list[float], c: list[float]) -> int:
    if (a[0] == b[0] or a[1] == c[1]) and (a[1] == b[1] or a[0] == c[0]):
        return 0
    (ax, ay), (bx, by), (cx, cy) = (map(Fraction, point) for point in (a, b, c))
    value = (bx - ax) * (cy - ay) - (by - ay) * (cx - ax)
    return (value > 0) - (value < 0)
