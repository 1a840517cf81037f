"""What one point, or several together, do not see of a room: how much floor and wall, and where.

Problem
    Given a room as it is, obstacles and small features included, and one or more eyes in it: the floor that no eye
    sees, in connected patches, and the stretches of wall that no eye sees.
Method
    The floor is the outline without the obstacles and without the region that each eye sees
    (:mod:`kernelscan.geometry.visible`); the walls are what is left of each wall without the pieces that each eye
    sees. Hidden floor is added up patch by patch, and seen floor is the rest, so that a small patch loses no digits.
Exact and rounded
    What is seen whole is exactly so. The overlay of areas is rounded: patches of less than a square millimetre and
    stretches of less than a micrometre are rounding and left out.
Degenerate cases
    From a point of the kernel nothing is hidden. A wall seen edge-on is seen, as the kernel has it. Where the region
    comes back to an eye at which rings touch, each loop is taken for itself.
Cost
    One view an eye, n log n each for n walls, and one overlay.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.surfaces import without
from kernelscan.geometry import shapes
from kernelscan.geometry.shapes import Patch
from kernelscan.geometry.visible import View, view_from
from kernelscan.plan import Room, WallRef

__all__ = ["Hidden", "HiddenFloor", "HiddenWall", "hidden_from"]

Floats = npt.NDArray[np.float64]

LEAST_AREA = 1e-6
"""Square metres: a smaller patch of floor is what rounding leaves."""

LEAST_LENGTH = 1e-6
"""Metres: the same of a stretch of wall."""


@dataclass(frozen=True, slots=True, eq=False)
class HiddenFloor:
    """A connected patch of floor that no eye sees.

    Attributes
    ----------
    outline, holes
        ``(k, 2)`` metres, the outline counter-clockwise.
    area
        Square metres.
    """

    outline: Floats
    holes: tuple[Floats, ...]
    area: float

    @property
    def middle(self) -> tuple[float, float]:
        """A point well inside."""
        return shapes.interior_point(self.outline, self.holes)


@dataclass(frozen=True, slots=True, eq=False)
class HiddenWall:
    """A stretch of one wall that no eye sees.

    Attributes
    ----------
    wall
        The wall it lies on.
    ends
        ``(2, 2)`` metres, in the wall's direction.
    length
        Metres.
    """

    wall: WallRef
    ends: Floats
    length: float


@dataclass(frozen=True, slots=True, eq=False)
class Hidden:
    """What some eyes together see of a room, and what they do not.

    Attributes
    ----------
    eyes
        ``(k, 2)`` metres.
    floor_seen, floor_hidden
        Square metres; together the room's floor.
    wall_seen, wall_hidden
        Metres, openings and the faces of obstacles included; together all walls of the room.
    patches
        The hidden floor, the largest patch first.
    stretches
        The hidden walls, the longest stretch first.
    """

    eyes: Floats
    floor_seen: float
    floor_hidden: float
    wall_seen: float
    wall_hidden: float
    patches: tuple[HiddenFloor, ...]
    stretches: tuple[HiddenWall, ...]

    @property
    def floor_fraction(self) -> float:
        """How much of the floor is seen, 0 to 1."""
        return self.floor_seen / (self.floor_seen + self.floor_hidden)

    @property
    def wall_fraction(self) -> float:
        """How much of the walls' length is seen, 0 to 1."""
        return self.wall_seen / (self.wall_seen + self.wall_hidden)


def hidden_from(room: Room, points: npt.ArrayLike) -> Hidden:
    """Return what one point, or several together, do not see of a room.

    Parameters
    ----------
    room
        The room as it is.
    points
        ``(2,)`` or ``(k, 2)`` metres, in the room or on its walls.

    Raises
    ------
    GeometryError
        If a point is outside the room, inside an obstacle, or not two finite numbers.
    """
    eyes = np.array(points, dtype=np.float64)
    eyes = eyes[None] if eyes.ndim == 1 else eyes
    views = [view_from(room.rings, eye) for eye in eyes]
    patches = sorted(_floor(room, views), key=lambda patch: -patch.area)
    stretches = sorted(_walls(room, views), key=lambda stretch: -stretch.length)
    floor_hidden = sum((patch.area for patch in patches), 0.0)
    wall_hidden = sum((stretch.length for stretch in stretches), 0.0)
    wall = sum(float(np.hypot(*(np.roll(ring, -1, axis=0) - ring).T).sum()) for ring in room.rings)
    return Hidden(
        eyes,
        room.area - floor_hidden,
        floor_hidden,
        wall - wall_hidden,
        wall_hidden,
        tuple(patches),
        tuple(stretches),
    )


def _floor(room: Room, views: Sequence[View]) -> Iterator[HiddenFloor]:
    seen = [piece for view in views for piece in _simple_pieces(view)]
    for outline, holes in shapes.difference(
        Patch(room.outline), [*map(Patch, room.holes), *map(Patch, seen)]
    ):
        area = shapes.area(Patch(outline, holes))
        if area >= LEAST_AREA:
            yield HiddenFloor(np.asarray(outline), tuple(np.asarray(hole) for hole in holes), area)


def _simple_pieces(view: View) -> list[Floats]:
    """The seen region as simple rings: its loops at the eye, or triangles if rounding has made one cross itself."""
    at_eye = np.flatnonzero((view.region == view.eye).all(axis=1))
    loops = [view.region]
    if len(at_eye) > 1:
        loops = np.split(np.roll(view.region, -at_eye[0], axis=0), (at_eye - at_eye[0])[1:])
    if shapes.are_simple(loops).all():
        return loops
    arms = view.region - view.eye
    ahead = np.roll(arms, -1, axis=0)
    wide = np.flatnonzero(arms[:, 0] * ahead[:, 1] - arms[:, 1] * ahead[:, 0] > 0)
    return [np.array([view.eye, view.region[k], view.region[(k + 1) % len(arms)]]) for k in wide.tolist()]


def _walls(room: Room, views: Sequence[View]) -> Iterator[HiddenWall]:
    unseen = {
        (ring, edge): [(0.0, 1.0)] for ring, points in enumerate(room.rings) for edge in range(len(points))
    }
    for view in views:
        for (ring, edge), (low, high) in zip(view.walls.tolist(), view.spans.tolist(), strict=True):
            unseen[ring, edge] = without(unseen[ring, edge], (low, high))
    for wall, spans in unseen.items():
        start, end = room.wall_ends(WallRef(*wall))
        for low, high in spans:
            length = float(np.hypot(*(end - start))) * (high - low)
            if length >= LEAST_LENGTH:
                ends = np.array([start + low * (end - start), start + high * (end - start)])
                yield HiddenWall(WallRef(*wall), ends, length)
