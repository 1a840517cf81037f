"""Rings: the one way in which points become the boundary of a room or of something standing in it.

Problem
    Make a simple, closed, oriented polygon from whatever array of points a caller has, or say what is wrong and
    where; put several together into an outline with holes.
Method
    The cheap faults are looked for first (shape, numbers that are not finite, repeated points). Then every pair of
    edges that are not neighbours must be apart, and neighbours must not fold back on each other; both are settled
    in :mod:`kernelscan.geometry.contacts`, exactly. The lowest of the leftmost vertices is a corner of the convex
    hull, so that the turn there, exact too, gives the orientation.
Cost
    That of the search for contacts: O(n^2) in a few array operations for small rings, near O(n log n) for large.
Degenerate cases
    Points repeated one after the other count once, -0.0 becomes 0.0, and straight angles (a wall split in two) are
    kept. A vertex met twice, a vertex on another edge, a spike of no area: refused. A hole may touch the
    outline or another hole in single points, which neither hides anything nor lets a sight line through; a
    hole that runs along a wall over some length is refused, because there the two are one wall and the caller
    must join them (:func:`kernelscan.geometry.shapes.difference`).
"""

from collections.abc import Iterable

import numpy as np
import numpy.typing as npt

from kernelscan.errors import GeometryError
from kernelscan.geometry.contacts import contact_of_ring
from kernelscan.geometry.nesting import first_fault_between
from kernelscan.geometry.signs import orientation, orientations

__all__ = ["Ring", "as_ring", "as_rings", "signed_area"]

Ring = npt.NDArray[np.float64]
"""``(n, 2)``, read-only, counter-clockwise (a hole clockwise), simple, the last point not repeated."""


def as_ring(points: npt.ArrayLike, *, hole: bool = False) -> Ring:
    """Make a ring from points in either direction, with or without the first point repeated at the end.

    Parameters
    ----------
    points
        ``(n, 2)`` array-like; any unit of length.
    hole
        Whether the ring is wanted clockwise.

    Returns
    -------
    Ring
        A read-only copy; it starts at the first of the points.

    Raises
    ------
    GeometryError
        For a wrong shape, NaN or infinity, fewer than three distinct points, no area, and a ring that crosses
        or touches itself.
    """
    ring = _distinct(_finite_points(points))
    place = contact_of_ring(ring)
    if place is not None:
        raise GeometryError(_self_contact(ring, place))
    if (_turn_at_extreme(ring) < 0) != hole:
        ring = np.concatenate([ring[:1], ring[:0:-1]])
    ring.flags.writeable = False
    return ring


def as_rings(outline: npt.ArrayLike, holes: Iterable[npt.ArrayLike] = ()) -> tuple[Ring, ...]:
    """Make the rings of a room: the outline, counter-clockwise, and then the holes, clockwise.

    Raises
    ------
    GeometryError
        As :func:`as_ring`, and for a hole that is not inside the outline, that overlaps, crosses or holds another, or
        that runs along a wall. Touching in single points is allowed.
    """
    rings = (as_ring(outline), *(_hole(k, points) for k, points in enumerate(holes, 1)))
    fault = first_fault_between(rings) if len(rings) > 1 else None
    if fault is not None:
        raise GeometryError(fault)
    return rings


def signed_area(ring: npt.NDArray[np.float64]) -> float:
    """Return the area within a ring, negative if it runs clockwise.

    The first vertex is taken as the origin, so that a room far from the drawing's origin loses no digits.
    """
    x, y = (ring - ring[0]).T
    return float(x[:-1] @ y[1:] - x[1:] @ y[:-1]) / 2


def _hole(number: int, points: npt.ArrayLike) -> Ring:
    try:
        return as_ring(points, hole=True)
    except GeometryError as error:
        raise GeometryError(f"hole {number}: {error}") from None


def _finite_points(points: npt.ArrayLike) -> npt.NDArray[np.float64]:
    if isinstance(points, np.ndarray) and points.dtype.kind == "c":
        raise GeometryError("a ring needs an (n, 2) array of numbers, got complex ones")
    try:
        array = np.array(points, dtype=np.float64)
    except (TypeError, ValueError, OverflowError) as error:
        raise GeometryError(f"a ring needs an (n, 2) array of numbers: {error}") from None
    if array.ndim != 2 or array.shape[1] != 2:
        raise GeometryError(f"a ring needs an (n, 2) array of points, got the shape {array.shape}")
    if not np.isfinite(array).all():
        bad = int(np.flatnonzero(~np.isfinite(array).all(axis=1))[0])
        raise GeometryError(f"point {bad} of the ring is not finite: ({array[bad, 0]}, {array[bad, 1]})")
    array += 0.0  # -0.0 becomes 0.0
    return array


def _distinct(points: npt.NDArray[np.float64]) -> npt.NDArray[np.float64]:
    """Drop each point that repeats the one before it, and a last one that repeats the first."""
    if len(points):
        differs = (points[1:] != points[:-1]).any(axis=1)
        if not differs.all():
            points = points[np.concatenate([[True], differs])]
        if len(points) > 1 and (points[0] == points[-1]).all():
            points = points[:-1].copy()
    if len(points) < 3:
        raise GeometryError(
            f"a ring needs three distinct points or more, got {len(np.unique(points, axis=0))}"
        )
    return points


def _turn_at_extreme(ring: npt.NDArray[np.float64]) -> int:
    """Return the exact turn, +1 left and -1 right, at the lowest of the leftmost vertices of a simple ring."""
    x = ring[:, 0]
    leftmost = np.flatnonzero(x == x.min())
    k = int(leftmost[ring[leftmost, 1].argmin()])
    before, at, after = ring[k - 1].tolist(), ring[k].tolist(), ring[(k + 1) % len(ring)].tolist()
    return orientation(before, at, after)


def _self_contact(ring: npt.NDArray[np.float64], place: tuple[float, float]) -> str:
    if not orientations(ring[0], ring[1], ring).any():
        return f"the ring has no area: its points lie on one line, the first at ({ring[0, 0]:.9g}, {ring[0, 1]:.9g})"
    return f"the ring crosses or touches itself near ({place[0]:.9g}, {place[1]:.9g})"
