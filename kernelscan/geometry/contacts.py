"""Which edges of rings meet, and so whether a ring is simple, judged exactly.

Problem
    Given edges p -> q, find two that share a point though they are not neighbours in a ring, or neighbours that fold
    back on each other.
Method
    Two closed segments share a point if and only if their bounding boxes do and neither has both ends strictly on
    one side of the other's line. Floats decide wherever the cross product exceeds its proven bound; the few
    pairs left over are settled in rational arithmetic.
Cost
    Up to a hundred edges all pairs at once, in some twenty array operations; beyond that only the pairs that
    :mod:`kernelscan.geometry.neighbourhood` cannot keep apart.
Degenerate cases
    Collinear edges that lie apart do not meet. A touch is a meeting.
Letters
    p, q the ends of an edge; d = q - p; i, j edges.
"""

from collections.abc import Iterator, Sequence
from fractions import Fraction

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.neighbourhood import nearby_edges
from kernelscan.geometry.signs import ROUNDOFF, SMALLEST, orientation

__all__ = ["contact_of_ring", "edge_ends", "meeting_edges"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.intp]

_DENSE = 100


def contact_of_ring(ring: Floats) -> Floats | None:
    """Return a vertex next to which a ring crosses, touches or folds back on itself, or ``None`` for a simple ring."""
    _, ends = edge_ends([ring])
    for i in _doubtful_turns(ring, ends).tolist():
        if _folds_back(ring[i].tolist(), ends[i].tolist(), ends[(i + 1) % len(ring)].tolist()):
            return np.asarray(ends[i])
    first = next(meeting_edges([ring]), None)
    return None if first is None else np.asarray(ring[first[0]])


def meeting_edges(rings: Sequence[Floats]) -> Iterator[tuple[int, int]]:
    """Yield the pairs i < j of edges that share a point and are not neighbours in a ring, counted through the rings."""
    p, q = edge_ends(rings)
    following = _following([len(ring) for ring in rings])
    for i, j in _pairs_to_settle(p, q):
        strangers = (following[i] != j) & (following[j] != i)
        for first, second in zip(i[strangers].tolist(), j[strangers].tolist(), strict=True):
            if _share_a_point(p[first], q[first], p[second], q[second]):
                yield first, second


def edge_ends(rings: Sequence[Floats]) -> tuple[Floats, Floats]:
    """Return the first and the second ends of all edges of the rings, ``(n, 2)`` each, ring after ring."""
    return np.concatenate(rings), np.concatenate([part for ring in rings for part in (ring[1:], ring[:1])])


def _following(sizes: Sequence[int]) -> Indices:
    """Return for each edge the next one in its ring."""
    following = np.arange(1, sum(sizes) + 1)
    last = np.cumsum(sizes) - 1
    following[last] -= sizes
    return following


def _doubtful_turns(p: Floats, q: Floats) -> Indices:
    """Return the edges after which floats do not prove a turn to the left or to the right."""
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        d = q - p
        e = np.concatenate([d[1:], d[:1]])
        left, right = d[:, 0] * e[:, 1], d[:, 1] * e[:, 0]
        bound = 8 * ROUNDOFF * (np.abs(left) + np.abs(right)) + SMALLEST
        return np.flatnonzero(~(np.abs(left - right) > bound))


def _folds_back(a: list[float], b: list[float], c: list[float]) -> bool:
    if orientation(a, b, c) != 0:
        return False
    (ax, ay), (bx, by), (cx, cy) = ((Fraction(x), Fraction(y)) for x, y in (a, b, c))
    return (bx - ax) * (cx - bx) + (by - ay) * (cy - by) < 0


def _pairs_to_settle(p: Floats, q: Floats) -> Iterator[tuple[Indices, Indices]]:
    """Yield the pairs of edges i < j that floats do not prove to be apart; neighbours in a ring are among them."""
    if len(p) <= _DENSE:
        yield _dense_pairs(p, q)
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


def _dense_pairs(p: Floats, q: Floats) -> tuple[Indices, Indices]:
    """Return the pairs to settle among few edges: all of them at once, with one bound for the whole."""
    (px, py), (qx, qy) = p.T, q.T
    x, y, dx, dy = px[:, None], py[:, None], (qx - px)[:, None], (qy - py)[:, None]
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        at_p = dx * (py - y) - dy * (px - x)
        at_q = dx * (qy - y) - dy * (qx - x)
        bound = 16 * ROUNDOFF * float(np.ptp(px)) * float(np.ptp(py)) + SMALLEST
    low_x, high_x, low_y, high_y = (
        np.minimum(px, qx),
        np.maximum(px, qx),
        np.minimum(py, qy),
        np.maximum(py, qy),
    )
    apart = (np.minimum(at_p, at_q) > bound) | (np.maximum(at_p, at_q) < -bound)
    apart |= low_x[:, None] > high_x
    apart |= low_y[:, None] > high_y
    i, j = np.nonzero(~(apart | apart.T))
    upper = i < j
    return i[upper], j[upper]


def _share_a_point(p: Floats, q: Floats, r: Floats, s: Floats) -> bool:
    if not (np.maximum(p, q) >= np.minimum(r, s)).all() or not (np.maximum(r, s) >= np.minimum(p, q)).all():
        return False
    a, b, c, d = p.tolist(), q.tolist(), r.tolist(), s.tolist()
    if orientation(a, b, c) * orientation(a, b, d) > 0:
        return False
    return orientation(c, d, a) * orientation(c, d, b) <= 0
