"""Which part of each edge of a ring lies within an intersection of half-planes.

Problem
    Given lines a -> b, each standing for the closed half-plane on its left, and the edges p -> q of a ring: for
    each edge, the points of it that lie in all the half-planes.
Method
    Along p + t (q - p), 0 <= t <= 1, the cross product (b - a) x (p + t (q - p) - a) is linear in t, so each line
    gives t a lower or an upper limit, or forbids the edge, or says nothing. The signs at the ends come from the
    filtered predicate; only a line that cuts an edge in two is worked out, in rational arithmetic.
Cost
    O(n k) for n edges and k lines, in numpy; the exact part is for the few edges that are cut.
Degenerate cases
    An edge along a line is inside it. A part of no length is no part; a lone corner is asked of
    :func:`vertices_within`. Ends are the ring's own doubles, or correctly rounded where a line cuts.
Letters
    a, b the ends of a line; p, q those of an edge; t the place along it; s a sign.
"""

from fractions import Fraction

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.rings import Ring
from kernelscan.geometry.signs import orientations

__all__ = ["parts_within", "side_signs", "vertices_within"]

Lines = npt.NDArray[np.float64]
"""``(k, 2, 2)``: the ends a and b of each line."""

AT_ONCE = 2**20
"""Signs that are found at a time, to bound the memory."""


def vertices_within(ring: Ring, lines: Lines) -> npt.NDArray[np.bool_]:
    """Return for each of the ring's vertices, ``(n,)``, whether it lies in all the closed half-planes."""
    return np.asarray((side_signs(ring, lines) >= 0).all(axis=1))


def parts_within(ring: Ring, lines: Lines) -> list[tuple[int, npt.NDArray[np.float64]]]:
    """Return each edge that has a part of some length in all the half-planes: its number and the part's ends.

    Returns
    -------
    list of (int, ndarray)
        In the ring's order; the ends are ``(2, 2)``, in the direction of the edge.
    """
    s = side_signs(ring, lines)
    s_next = np.roll(s, -1, axis=0)
    shut = ((s <= 0) & (s_next <= 0) & ((s < 0) | (s_next < 0))).any(axis=1)
    cut = s * s_next < 0
    parts = []
    for edge in np.flatnonzero(~shut).tolist():
        part = _part(ring[edge], ring[(edge + 1) % len(ring)], lines[cut[edge]])
        if part is not None:
            parts.append((edge, part))
    return parts


def _part(p: np.ndarray, q: np.ndarray, lines: Lines) -> npt.NDArray[np.float64] | None:
    """Return the ends of the part of p -> q within lines that all cut it, or None where nothing of length is left."""
    low, high = Fraction(0), Fraction(1)
    for a, b in lines:
        at_p, at_q = _cross(a, b, p), _cross(a, b, q)
        t = at_p / (at_p - at_q)
        low, high = (max(low, t), high) if at_p < 0 else (low, min(high, t))
    if low >= high:
        return None
    return np.array([_along(p, q, low), _along(p, q, high)])


def _along(p: np.ndarray, q: np.ndarray, t: Fraction) -> list[float]:
    return [float(u + t * (v - u)) for u, v in zip(_exact(p), _exact(q), strict=True)]


def side_signs(points: npt.NDArray[np.float64], lines: Lines) -> npt.NDArray[np.int8]:
    """Return ``(n, k)`` signs, exact: +1 where a point lies left of a line, 0 on it, -1 right of it."""
    at_once = max(1, AT_ONCE // max(1, len(lines)))
    parts = [
        orientations(lines[None, :, 0], lines[None, :, 1], points[first : first + at_once, None])
        for first in range(0, len(points), at_once)
    ]
    return np.concatenate(parts)


def _cross(a: np.ndarray, b: np.ndarray, p: np.ndarray) -> Fraction:
    (ax, ay), (bx, by), (px, py) = _exact(a), _exact(b), _exact(p)
    return (bx - ax) * (py - ay) - (by - ay) * (px - ax)


def _exact(point: np.ndarray) -> tuple[Fraction, Fraction]:
    return Fraction(float(point[0])), Fraction(float(point[1]))
