"""Hatch lines clipped to an area.

Every line of a hatch lies on one lattice fixed to the paper, so that two areas side by side hatch through, and the
same area hatches the same wherever its ring begins. Cost: edges times lines in the worst case, in numpy.

Letters: ``u`` along the lines, ``v`` across them, ``k`` a line's number, ``v = k * spacing``.
"""

from collections.abc import Iterator, Sequence
from math import cos, radians, sin

import numpy as np

from kernelscan.markup.scene import Point

__all__ = ["hatch_lines"]

BLOCK = 1 << 20
"""Crossings of lines and edges that are looked at together: it bounds the memory."""


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
    numbers = _lattice(starts[:, 1], spacing)
    pieces = [
        piece
        for block in np.array_split(numbers, max(1, numbers.size * len(starts) // BLOCK))
        for piece in _pieces(block * spacing, starts, ends)
    ]
    return tuple(
        (_back(left, v, c, s), _back(right, v, c, s)) for v, left, right in pieces if right - left >= shortest
    )


def _lattice(v: np.ndarray, spacing: float) -> np.ndarray:
    return np.arange(np.ceil(v.min() / spacing), np.floor(v.max() / spacing) + 1)


def _pieces(levels: np.ndarray, starts: np.ndarray, ends: np.ndarray) -> Iterator[tuple[float, float, float]]:
    """Yield level, left and right end of each piece of the lines at some levels."""
    # A line through a vertex counts it once: an edge owns its lower end and not its upper one.
    met = (starts[:, 1] <= levels[:, None]) != (ends[:, 1] <= levels[:, None])
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        share = (levels[:, None] - starts[:, 1]) / (ends[:, 1] - starts[:, 1])
        u = np.where(met, starts[:, 0] + share * (ends[:, 0] - starts[:, 0]), np.inf)
    u.sort(axis=1)
    for level, row, count in zip(levels.tolist(), u.tolist(), met.sum(axis=1).tolist(), strict=True):
        for left, right in zip(row[:count:2], row[1:count:2], strict=True):
            yield level, left, right


def _back(u: float, v: float, c: float, s: float) -> Point:
    return c * u - s * v, s * u + c * v
