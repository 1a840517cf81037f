"""Whether a ring surely turns left at every vertex: then the room is its own kernel.

Method
    The cross product of each edge with the next, with e = 2**-53 surely positive if it is above
    6 e (|x y| + |x' y'|), since each component is a difference of doubles, off by a part e. The first few are tried,
    without a bound, before the rest. A simple ring that turns left all the way turns around once.
"""

import numpy as np

from kernelscan.geometry.rings import Ring

__all__ = ["is_surely_convex"]

UNIT = 2.0**-53
TINY = 2.0**-1000
FIRST = 16
PORTION = 1 << 14


def is_surely_convex(ring: Ring) -> bool:
    """Whether every turn of a ring is to the left beyond doubt; False may also mean that it is in doubt."""
    around = np.concatenate([ring[-2:], ring[:2]])
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        return (
            _turns_left(ring[:FIRST])
            and _turns_left(around)
            and all(_turns_left(ring[k : k + PORTION + 2]) for k in range(0, len(ring) - 2, PORTION))
        )


def _turns_left(points: Ring) -> bool:
    x, y = np.ascontiguousarray(points.T)
    d_x, d_y = x[1:] - x[:-1], y[1:] - y[:-1]
    left, right = d_x[:-1] * d_y[1:], d_y[:-1] * d_x[1:]
    size = left - right
    np.abs(left, out=left)
    np.abs(right, out=right)
    left += right
    left *= 6 * UNIT
    left += TINY
    return bool((size > left).all())
