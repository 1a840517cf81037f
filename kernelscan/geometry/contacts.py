"""Which edges of rings meet, and so whether a ring is simple, judged exactly.

Problem
    Given edges p -> q, find two that share a point though they are not neighbours in a ring, or neighbours that fold
    back on each other.
Method
    Two closed segments share a point if and only if their bounding boxes do and neither has both ends strictly on
    one side of the other's line. Floats decide wherever the cross product exceeds its proven bound; the few
    pairs left over are settled in rational arithmetic.
Cost
    A dozen edges are compared pair by pair, without the overhead of arrays; up to a hundred all pairs at once, in some
    twenty array operations; beyond that only the pairs that :mod:`kernelscan.geometry.neighbourhood` cannot
    keep apart.
Degenerate cases
    Collinear edges that lie apart do not meet. A touch is a meeting.
Letters
    p, q the ends of an edge; d = q - p; i, j edges.
"""

from collections.abc import Iterable, Iterator, Sequence
from fractions import Fraction

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.neighbourhood import nearby_edges
from kernelscan.geometry.signs import ROUNDOFF, SMALLEST, orientation

__all__ = ["contact_of_ring", "edge_ends", "meeting_edges", "meeting_place"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.intp]

_PLAIN = 12
_DENSE = 100


def contact_of_ring(ring: Floats) -> tuple[float, float] | None:
    """Return a place where a ring crosses, touches or folds back on itself, rounded, or ``None`` for a simple ring."""
    for i in _doubtful_turns(ring):
        if _folds_back(*(ring[k].tolist() for k in (i - 1, i, (i + 1) % len(ring)))):
            return float(ring[i, 0]), float(ring[i, 1])
    for i, j in meeting_edges([ring]):
        return meeting_place(*(ring[k % len(ring)].tolist() for k in (i, i + 1, j, j + 1)))
    return None


def meeting_place(a: list[float], b: list[float], c: list[float], d: list[float]) -> tuple[float, float]:
    """Return a common point of the edges a -> b and c -> d, which meet; rounded."""
    (ax, ay), (bx, by), (cx, cy), (dx, dy) = ([Fraction(x) for x in point] for point in (a, b, c, d))
    slope = (bx - ax) * (dy - cy) - (by - ay) * (dx - cx)
    if slope == 0:  # on one line: the second of the four ends along it is common
        x, y = sorted([(ax, ay), (bx, by), (cx, cy), (dx, dy)])[1]
        return float(x), float(y)
    t = ((cx - ax) * (dy - cy) - (cy - ay) * (dx - cx)) / slope
    return float(ax + t * (bx - ax)), float(ay + t * (by - ay))


def meeting_edges(rings: Sequence[Floats]) -> Iterator[tuple[int, int]]:
    """Yield the pairs i < j of edges that share a point and are not neighbours in a ring, counted through the rings."""
    p, q = edge_ends(rings)
    following = _following([len(ring) for ring in rings])
    if len(p) <= _PLAIN:
        yield from _meeting_among_few(p.tolist(), q.tolist(), following.tolist())
        return
    for i, j in _pairs_to_settle(p, q, following):
        strangers = (following[i] != j) & (following[j] != i)
        for first, second in zip(i[strangers].tolist(), j[strangers].tolist(), strict=True):
            if _share_a_point(*(end[k].tolist() for k in (first, second) for end in (p, q))):
                yield first, second


def _meeting_among_few(
    p: list[list[float]], q: list[list[float]], following: list[int]
) -> Iterator[tuple[int, int]]:
    """Yield what :func:`meeting_edges` does, without the overhead of arrays."""
    for j in range(len(p)):
        for i in range(j):
            if following[i] != j and following[j] != i and _share_a_point(p[i], q[i], p[j], q[j]):
                yield i, j


def edge_ends(rings: Sequence[Floats]) -> tuple[Floats, Floats]:
    """Return the first and the second ends of all edges of the rings, ``(n, 2)`` each, ring after ring."""
    return np.concatenate(rings), np.concatenate([part for ring in rings for part in (ring[1:], ring[:1])])


def _following(sizes: Sequence[int]) -> Indices:
    """Return for each edge the next one in its ring."""
    following = np.arange(1, sum(sizes) + 1)
    start = 0
    for size in sizes:
        following[start + size - 1] = start
        start += size
    return following


def _doubtful_turns(ring: Floats) -> Iterable[int]:
    """Return the vertices at which floats do not prove a turn to the left or to the right."""
    if len(ring) <= _PLAIN:
        return range(len(ring))
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        d = ring - np.concatenate([ring[-1:], ring[:-1]])
        e = np.concatenate([d[1:], d[:1]])
        left, right = d[:, 0] * e[:, 1], d[:, 1] * e[:, 0]
        bound = 8 * ROUNDOFF * (np.abs(left) + np.abs(right)) + SMALLEST
        doubtful = np.flatnonzero(~(np.abs(left - right) > bound))
    return [int(k) for k in doubtful]


def _folds_back(a: list[float], b: list[float], c: list[float]) -> bool:
    if orientation(a, b, c) != 0:
        return False
    (ax, ay), (bx, by), (cx, cy) = ((Fraction(x), Fraction(y)) for x, y in (a, b, c))
    return (bx - ax) * (cx - bx) + (by - ay) * (cy - by) < 0


def _pairs_to_settle(p: Floats, q: Floats, following: Indices) -> Iterator[tuple[Indices, Indices]]:
    """Yield the pairs of edges i < j that floats do not prove to be apart; neighbours in a ring are among them."""
    if len(p) <= _DENSE:
        yield _dense_pairs(p, following)
        return
    for i, j in nearby_edges(p, q):
        with np.errstate(over="ignore", invalid="ignore", under="ignore"):
            apart = _on_one_side(p[i], q[i], p[j], q[j]) | _on_one_side(p[j], q[j], p[i], q[i])
        yield i[~apart], j[~apart]


def _on_one_side(p: Floats, q: Floats, r: Floats, s: Floats) -> npt.NDArray[np.bool_]:
    """Return where r and s lie, proven by floats, strictly on one side of the line p -> q."""
    dx, dy = (q - p).T
    rx, ry = (r - p).T
    sx, sy = (s - p).T
    r1, r2, s1, s2 = dx * ry, dy * rx, dx * sy, dy * sx
    bound = 8 * ROUNDOFF * (np.abs(r1) + np.abs(r2) + np.abs(s1) + np.abs(s2)) + SMALLEST
    at_r, at_s = r1 - r2, s1 - s2
    return np.asarray((np.minimum(at_r, at_s) > bound) | (np.maximum(at_r, at_s) < -bound))


def _dense_pairs(p: Floats, following: Indices) -> tuple[Indices, Indices]:
    """Return the pairs to settle among few edges: all of them at once, with one bound for the whole."""
    x, y = p.T
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        from_x, from_y = x - x[:, None], y - y[:, None]
        d = p[following] - p
        side = d[:, :1] * from_y - d[:, 1:] * from_x
        bound = 16 * ROUNDOFF * np.abs(from_x).max() * np.abs(from_y).max() + SMALLEST
    left, right = side > bound, side < -bound
    apart = (left & left[:, following]) | (right & right[:, following])
    i, j = np.nonzero(~(apart | apart.T))
    upper = i < j
    return i[upper], j[upper]


def _share_a_point(a: list[float], b: list[float], c: list[float], d: list[float]) -> bool:
    """Whether the closed edges a -> b and c -> d meet; exact."""
    for k in (0, 1):
        u, v, w, z = a[k], b[k], c[k], d[k]
        if (u < w and u < z and v < w and v < z) or (u > w and u > z and v > w and v > z):
            return False
    if orientation(a, b, c) * orientation(a, b, d) > 0:
        return False
    return orientation(c, d, a) * orientation(c, d, b) <= 0
