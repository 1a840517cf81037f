"""What one eye sees of a room: the visible region, the walls in it, and how much of either.

The method, what is exact in it and what is rounded, and what happens to an eye on a wall or in line with one, are
told in :mod:`kernelscan.geometry.sight`; here are the questions and the answers.
"""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import Ring, as_rings, signed_area
from kernelscan.geometry.sight import Sight, Walls

__all__ = ["View", "view_from", "visible_from", "visible_region", "visible_regions"]

Floats = npt.NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class View:
    """What one eye sees.

    Attributes
    ----------
    eye
        ``(2,)``, in metres.
    region
        ``(m, 2)``, counter-clockwise.
    walls
        ``(k, 2)`` ring and edge of each piece of wall seen, in that order; a wall seen in parts comes several times.
    spans
        ``(k, 2)`` where along its wall each piece begins and ends, 0 at the first vertex and 1 at the second.
    wall_fraction, floor_fraction
        How much of the length of all walls, and of the floor's area, is seen; 0 to 1.
    """

    eye: Floats
    region: Ring
    walls: npt.NDArray[np.intp]
    spans: Floats
    wall_fraction: float
    floor_fraction: float


def visible_region(outline: npt.ArrayLike, eye: npt.ArrayLike, holes: Iterable[npt.ArrayLike] = ()) -> Ring:
    """Return what one point of a room sees.

    Parameters
    ----------
    outline, holes
        ``(n, 2)`` array-likes in either direction, in metres.
    eye
        A point of the room, ``(2,)``; on a wall or at a corner it is still in.

    Returns
    -------
    Ring
        ``(m, 2)``, read-only, counter-clockwise.

    Raises
    ------
    GeometryError
        For points that make no room (see :func:`kernelscan.geometry.rings.as_rings`), and for an eye that is outside
        the outline, strictly inside a hole, or not two finite numbers.
    """
    return visible_from(as_rings(outline, holes), eye)


def visible_from(rings: Sequence[Ring], eye: npt.ArrayLike) -> Ring:
    """Return what one point sees of a room whose rings, the outline and then the holes, are already checked."""
    return Sight(Walls.of(rings), _as_eye(eye)).region()


def visible_regions(rings: Sequence[Ring], eyes: Iterable[npt.ArrayLike]) -> list[Ring]:
    """Return what each of several eyes sees of a room whose rings are already checked."""
    walls = Walls.of(rings)
    return [Sight(walls, _as_eye(eye)).region() for eye in eyes]


def view_from(rings: Sequence[Ring], eye: npt.ArrayLike) -> View:
    """Return the region, the walls and the fractions that one point sees of a room whose rings are already checked."""
    walls = Walls.of(rings)
    sight = Sight(walls, _as_eye(eye))
    region = sight.region()
    edges, spans = sight.pieces()
    size = float(np.ptp(rings[0], axis=0).max())
    lengths = np.hypot(*((walls.q - walls.p) / size).T)
    seen = float((lengths[edges] * (spans[:, 1] - spans[:, 0])).sum())
    areas = [signed_area((ring - rings[0][0]) / size) for ring in (region, *rings)]
    return View(
        sight.eye,
        region,
        np.column_stack([walls.ring[edges], edges - walls.start[edges]]),
        spans,
        min(1.0, seen / float(lengths.sum())),
        min(1.0, areas[0] / sum(areas[1:])),
    )


def _as_eye(eye: npt.ArrayLike) -> Floats:
    try:
        c = np.array(eye, dtype=np.float64)
    except (TypeError, ValueError) as error:
        raise GeometryError(f"an eye needs two numbers: {error}") from None
    if c.shape != (2,) or not np.isfinite(c).all():
        raise GeometryError(f"an eye needs two finite numbers, got {eye!r}")
    c += 0.0
    c.flags.writeable = False
    return c
