"""Hatch lines clipped to an area.

Every line of a hatch lies on one lattice fixed to the paper, so that two areas side by side hatch through, and the
same area hatches the same wherever its ring begins. Cost: edges times lines in the worst case, in numpy.

Letters: ``u`` along the lines, ``v`` across them, ``k`` a line's number, ``v = k * spacing``.
"""

from collections.abc import Sequence
from math import cos, radians, sin

import numpy as np

from kernelscan.markup.scene import Point

__all__ = ["hatch_lines"]


def hatch_lines(
    rings: Sequence[np.ndarray], angle: float, spacing: float, shortest: float = 0.05
) -> tuple[tuple[Point, Point], ...]:
    """Return the pieces of parallel lines that lie inside rings by the even-odd rule.

    Parameters
    ----------
    rings
        ``(n, 2)`` arrays in millimetres.
    angle
        Of the lines, in degrees counter-clockwise from the x axis.
    spacing
        Between two lines, in millimetres.
    shortest
        Pieces below this are left out.
    """
    c, s = cos(radians(angle)), sin(radians(angle))
    turn = np.array([[c, -s], [s, c]])
    starts = np.concatenate([ring @ turn for ring in rings])
    ends = np.concatenate([np.roll(ring, -1, axis=0) @ turn for ring in rings])
    lines: list[tuple[Point, Point]] = []
    # A line through a vertex counts it once: an edge owns its lower end and not its upper one.
    low, high = np.minimum(starts[:, 1], ends[:, 1]), np.maximum(starts[:, 1], ends[:, 1])
    for k in range(int(np.ceil(low.min() / spacing)), int(np.floor(high.max() / spacing)) + 1):
        v = k * spacing
        met = (low <= v) & (v < high)
        p, q = starts[met], ends[met]
        u = np.sort(p[:, 0] + (v - p[:, 1]) / (q[:, 1] - p[:, 1]) * (q[:, 0] - p[:, 0]))
        for left, right in zip(u[::2], u[1::2], strict=True):
            if right - left >= shortest:
                lines.append((_back(left, v, c, s), _back(right, v, c, s)))
    return tuple(lines)


def _back(u: float, v: float, c: float, s: float) -> Point:
    return float(c * u - s * v), float(s * u + c * v)
