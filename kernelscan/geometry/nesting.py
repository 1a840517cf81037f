"""How rings lie to each other and to a point: inside, outside or on, judged exactly.

Problem
    Say where a point lies to a ring; and whether rings make an outline with holes, each hole inside the outline
    and outside the others, with nothing crossed.
Method
    A point is located by counting the edges that cross the ray from it towards +x, half-open in y, so that a vertex
    at its height counts once; comparisons of coordinates are exact, and the side of an edge is a float with a
    proven bound or, failing that, rational. Rings that do not meet lie to each other as one vertex does. Where
    they touch in single points, a ring is cut there and each piece located by its middle.
Cost
    O(n) a point; O(n k) for k holes that touch nothing.
Degenerate cases
    Rings that run along each other over some length are a fault. Touching in points is none.
Letters
    p, q the ends of an edge; c a point; t the place along an edge.
"""

from collections.abc import Sequence
from fractions import Fraction
from itertools import pairwise

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.contacts import edge_ends, meeting_edges, meeting_place
from kernelscan.geometry.signs import Point, orientation, orientations

__all__ = ["crossings_right_of", "first_fault_between", "on_edges", "side_of_ring"]

Floats = npt.NDArray[np.float64]
Signs = npt.NDArray[np.int8]
Place = tuple[Fraction, Fraction]


def side_of_ring(ring: Floats, point: Point) -> int:
    """Return +1 for a point inside a simple ring, 0 on it, -1 outside; exact, for doubles and rationals."""
    x, y = point
    if isinstance(x, Fraction) or isinstance(y, Fraction):
        return _side_of_rational(ring, (Fraction(x), Fraction(y)))
    p, q = edge_ends([ring])
    at_height = np.flatnonzero((np.minimum(p[:, 1], q[:, 1]) <= y) & (np.maximum(p[:, 1], q[:, 1]) >= y))
    p, q = p[at_height], q[at_height]
    c = np.array([x, y])
    sides = orientations(p, q, c)
    if on_edges(p, q, sides, c).any():
        return 0
    return 1 if crossings_right_of(p, q, sides, c) % 2 else -1


def on_edges(p: Floats, q: Floats, sides: Signs, c: Floats) -> npt.NDArray[np.bool_]:
    """Return for each edge whether c lies on it, from the side of its line on which c lies."""
    in_box = (np.minimum(p, q) <= c) & (np.maximum(p, q) >= c)
    return np.asarray((sides == 0) & in_box[:, 0] & in_box[:, 1])


def crossings_right_of(p: Floats, q: Floats, sides: Signs, c: Floats) -> int:
    """Count the edges that the ray from c towards +x crosses, c on none of them; odd inside."""
    low, high = p[:, 1] <= c[1], q[:, 1] <= c[1]
    return int(np.count_nonzero((low & ~high & (sides > 0)) | (high & ~low & (sides < 0))))


def first_fault_between(rings: Sequence[Floats]) -> str | None:
    """Return what is wrong between an outline and its holes, each ring simple, or ``None``.

    Parameters
    ----------
    rings
        The outline and then the holes.
    """
    touches: dict[int, set[Place]] = {}
    fault = _fault_of_meetings(rings, touches)
    if fault is not None:
        return fault
    low, high = (np.array([extreme(ring, axis=0) for ring in rings]) for extreme in (np.min, np.max))
    starts = np.cumsum([0, *(len(ring) for ring in rings)]).tolist()
    for k in range(1, len(rings)):
        middles = _middles(rings[k], starts[k], touches)
        at = f"near ({rings[k][0][0]:.9g}, {rings[k][0][1]:.9g})"
        if any(side_of_ring(rings[0], point) != 1 for point in middles):
            return f"hole {k} is not inside the outline, {at}"
        near = (low[1:] <= high[k]).all(axis=1) & (low[k] <= high[1:]).all(axis=1)
        for other in (np.flatnonzero(near) + 1).tolist():
            if other != k and any(side_of_ring(rings[other], point) != -1 for point in middles):
                return f"hole {k} lies in hole {other}, {at}"
    return None


def _fault_of_meetings(rings: Sequence[Floats], touches: dict[int, set[Place]]) -> str | None:
    """Return the first crossing or common stretch of two rings, and note by edge where they only touch."""
    p, q = edge_ends(rings)
    owner = np.repeat(np.arange(len(rings)), [len(ring) for ring in rings]).tolist()
    for i, j in meeting_edges(rings):
        places = _meeting(*(_rational(point) for point in (p[i], q[i], p[j], q[j])))
        if len(places) != 1:
            what = "run along each other" if places else "cross"
            x, y = meeting_place(*(point.tolist() for point in (p[i], q[i], p[j], q[j])))
            return f"{_name(owner[i])} and {_name(owner[j])} {what} near ({x:.9g}, {y:.9g})"
        touches.setdefault(i, set()).update(places)
        touches.setdefault(j, set()).update(places)
    return None


def _meeting(p: Place, q: Place, r: Place, s: Place) -> set[Place]:
    """Return the ends at which two meeting edges touch: none if they cross, two if they share a stretch."""
    return {end for end in (r, s) if _on_edge(p, q, end)} | {end for end in (p, q) if _on_edge(r, s, end)}


def _on_edge(p: Place, q: Place, c: Place) -> bool:
    in_box = min(p[0], q[0]) <= c[0] <= max(p[0], q[0]) and min(p[1], q[1]) <= c[1] <= max(p[1], q[1])
    return in_box and orientation(p, q, c) == 0


def _middles(ring: Floats, start: int, touches: dict[int, set[Place]]) -> list[Point]:
    """Return a point in the middle of each piece of a ring between its contacts, or one vertex if it has none."""
    touched = [i for i in range(len(ring)) if start + i in touches]
    if not touched:
        return [ring[0].tolist()]
    middles: list[Point] = []
    for i in touched:
        p, q = _rational(ring[i]), _rational(ring[(i + 1) % len(ring)])
        stops = sorted({p, q} | touches[start + i], key=lambda c: (c[0] - p[0]) ** 2 + (c[1] - p[1]) ** 2)
        middles += [((a[0] + b[0]) / 2, (a[1] + b[1]) / 2) for a, b in pairwise(stops)]
    return middles


def _side_of_rational(ring: Floats, place: Place) -> int:
    x, y = place
    p, q = edge_ends([ring])
    below, above = float(np.nextafter(float(y), -np.inf)), float(np.nextafter(float(y), np.inf))
    near = np.flatnonzero((np.minimum(p[:, 1], q[:, 1]) <= above) & (np.maximum(p[:, 1], q[:, 1]) >= below))
    crossings = 0
    for i in near.tolist():
        a, b = _rational(p[i]), _rational(q[i])
        if _on_edge(a, b, place):
            return 0
        if (a[1] <= y) != (b[1] <= y):
            crossings += orientation(a, b, (x, y)) == (1 if b[1] > a[1] else -1)
    return 1 if crossings % 2 else -1


def _rational(point: Floats) -> Place:
    return Fraction(float(point[0])), Fraction(float(point[1]))


def _name(ring: int) -> str:
    return f"hole {ring}" if ring else "the outline"
