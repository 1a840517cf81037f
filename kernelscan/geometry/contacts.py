"""Which edges of rings meet, and so whether a ring is simple, judged exactly.

Problem
    Given edges p -> q, find two that share a point though they are not neighbours in a ring, or neighbours that fold
    back on each other.
Method
    Two closed segments share a point if and only if their bounding boxes do and neither has both ends strictly on
    one side of the other's line. Floats decide wherever the cross product exceeds its proven bound; the few
    pairs left over are settled in rational arithmetic.
Cost
    Up to a hundred edges all pairs at once, in some twenty array operations; beyond that only the pairs
    whose boxes overlap.
Degenerate cases
    Collinear edges that lie apart do not meet. A touch is a meeting.
Source
    The bound: Shewchuk, "Adaptive precision floating-point arithmetic and fast robust geometric predicates", 1997.
Letters
    p, q the ends of an edge; d = q - p; u the unit roundoff 2**-53; i, j edges.
"""

from collections.abc import Iterator, Sequence
from fractions import Fraction

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.shapes import overlapping_boxes

__all__ = ["contact_of_ring", "edge_ends", "meeting_edges", "orientation"]

Floats = npt.NDArray[np.float64]
Point = Sequence[float] | Sequence[Fraction]

_UNIT = 2.0**-53
_DENSE = 100


def orientation(a: Point, b: Point, c: Point) -> int:
    """Return +1 if c lies left of the line a -> b, -1 if right, 0 if on it; exact."""
    (ax, ay), (bx, by), (cx, cy) = ((Fraction(x), Fraction(y)) for x, y in (a, b, c))
    value = (bx - ax) * (cy - ay) - (by - ay) * (cx - ax)
    return (value > 0) - (value < 0)


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
    following = np.concatenate([np.roll(np.arange(len(p))[k : k + len(r)], -1) for k, r in _starts(rings)])
    i, j = _pairs_to_settle(p, q)
    strangers = (following[i] != j) & (following[j] != i)
    for first, second in zip(i[strangers].tolist(), j[strangers].tolist(), strict=True):
        if _share_a_point(p[first], q[first], p[second], q[second]):
            yield first, second


def edge_ends(rings: Sequence[Floats]) -> tuple[Floats, Floats]:
    """Return the first and the second ends of all edges of the rings, ``(n, 2)`` each, ring after ring."""
    return np.concatenate(rings), np.concatenate([part for ring in rings for part in (ring[1:], ring[:1])])


def _starts(rings: Sequence[Floats]) -> Iterator[tuple[int, Floats]]:
    start = 0
    for ring in rings:
        yield start, ring
        start += len(ring)


def _doubtful_turns(p: Floats, q: Floats) -> npt.NDArray[np.intp]:
    """Return the edges after which floats do not prove a turn to the left or to the right."""
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        d = q - p
        e = np.concatenate([d[1:], d[:1]])
        left, right = d[:, 0] * e[:, 1], d[:, 1] * e[:, 0]
        bound = 8 * _UNIT * (np.abs(left) + np.abs(right)) + 1e-290
        return np.flatnonzero(~(np.abs(left - right) > bound))


def _folds_back(a: list[float], b: list[float], c: list[float]) -> bool:
    if orientation(a, b, c) != 0:
        return False
    (ax, ay), (bx, by), (cx, cy) = ((Fraction(x), Fraction(y)) for x, y in (a, b, c))
    return (bx - ax) * (cx - bx) + (by - ay) * (cy - by) < 0


def _pairs_to_settle(p: Floats, q: Floats) -> tuple[npt.NDArray[np.intp], npt.NDArray[np.intp]]:
    """Return the pairs of edges i < j that floats do not prove to be apart; neighbours in a ring are among them."""
    if len(p) <= _DENSE:
        return _dense_pairs(p, q)
    i, j = overlapping_boxes(np.minimum(p, q), np.maximum(p, q))
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        apart = _on_one_side(p[i], q[i], p[j], q[j]) | _on_one_side(p[j], q[j], p[i], q[i])
    return i[~apart], j[~apart]


def _on_one_side(p: Floats, q: Floats, r: Floats, s: Floats) -> npt.NDArray[np.bool_]:
    """Return where r and s lie, proven by floats, strictly on one side of the line p -> q."""
    dx, dy = (q - p).T
    rx, ry = (r - p).T
    sx, sy = (s - p).T
    r1, r2, s1, s2 = dx * ry, dy * rx, dx * sy, dy * sx
    bound = 8 * _UNIT * (np.abs(r1) + np.abs(r2) + np.abs(s1) + np.abs(s2)) + 1e-290
    at_r, at_s = r1 - r2, s1 - s2
    return np.asarray(((at_r > bound) & (at_s > bound)) | ((at_r < -bound) & (at_s < -bound)))


def _dense_pairs(p: Floats, q: Floats) -> tuple[npt.NDArray[np.intp], npt.NDArray[np.intp]]:
    """Return the pairs to settle among few edges: all of them at once, with one bound for the whole."""
    px, py = p[:, :1], p[:, 1:]
    qx, qy = q[:, :1], q[:, 1:]
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        dx, dy = qx - px, qy - py
        at_p = dx * (py.T - py) - dy * (px.T - px)
        at_q = dx * (qy.T - py) - dy * (qx.T - px)
        extent = np.maximum(p, q).max(axis=0) - np.minimum(p, q).min(axis=0)
        bound = 16 * _UNIT * extent[0] * extent[1] + 1e-290
    apart = (np.minimum(at_p, at_q) > bound) | (np.maximum(at_p, at_q) < -bound)
    low_x, high_x, low_y, high_y = (
        np.minimum(px, qx),
        np.maximum(px, qx),
        np.minimum(py, qy),
        np.maximum(py, qy),
    )
    apart |= low_x > high_x.T
    apart |= low_y > high_y.T
    i, j = np.nonzero(~(apart | apart.T))
    upper = i < j
    return i[upper], j[upper]


def _share_a_point(p: Floats, q: Floats, r: Floats, s: Floats) -> bool:
    if not (np.maximum(p, q) >= np.minimum(r, s)).all() or not (np.maximum(r, s) >= np.minimum(p, q)).all():
        return False
    a, b, c, d = p.tolist(), q.tolist(), r.tolist(), s.tolist()
    return (
        orientation(a, b, c) * orientation(a, b, d) <= 0 and orientation(c, d, a) * orientation(c, d, b) <= 0
    )
