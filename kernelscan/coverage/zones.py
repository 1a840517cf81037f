"""Mount zones as values: where one device sees every wall of a room, and the spots to recommend."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from kernelscan.geometry.kernel import Kernel
from kernelscan.plan import Room, WallRef

__all__ = ["CornerZone", "FloorZone", "Mount", "RoomZones", "Spot", "WallZone"]

Mount = Literal["ceiling", "wall", "corner"]


@dataclass(frozen=True, slots=True, eq=False)
class Spot:
    """One point where a device may be fixed.

    Attributes
    ----------
    mount
        What it is fixed to.
    point
        ``(2,)`` metres.
    field_of_view
        The horizontal field that a device needs there, in radians: the interior angle at a corner, pi on a
        wall, 2 pi under the ceiling.
    bearing
        Where the middle of that field points, radians counter-clockwise from the x axis; ``None`` under the
        ceiling.
    farthest
        Distance in metres to the farthest corner of the room: the range that is needed.
    tolerance
        How far, in metres, the device may be off and still have every wall in its line of sight: the distance to the
        nearest border of the kernel other than the walls the device is fixed to. Off a corner or a wall the field
        that is needed grows.
    walls
        The wall or the two walls it is fixed to; none under the ceiling.
    """

    mount: Mount
    point: np.ndarray
    field_of_view: float
    bearing: float | None
    farthest: float
    tolerance: float
    walls: tuple[WallRef, ...]


@dataclass(frozen=True, slots=True, eq=False)
class FloorZone:
    """A ceiling zone in plan: ``(k, 2)`` vertices, an area for k >= 3, a segment for 2, a point for 1."""

    vertices: np.ndarray


@dataclass(frozen=True, slots=True, eq=False)
class WallZone:
    """A stretch of wall, of one straight wall or of several that run on smoothly.

    Attributes
    ----------
    walls
        The walls it lies on, in the outline's order.
    path
        ``(k + 1, 2)`` metres: piece i, from point i to the next, lies on wall i.
    """

    walls: tuple[WallRef, ...]
    path: np.ndarray

    @property
    def length(self) -> float:
        """Length along the wall in metres."""
        return float(np.hypot(*np.diff(self.path, axis=0).T).sum())


@dataclass(frozen=True, slots=True, eq=False)
class CornerZone:
    """A corner of the outline from which every wall is seen."""

    spot: Spot


@dataclass(frozen=True, slots=True, eq=False)
class RoomZones:
    """Everything that is known of one room.

    Attributes
    ----------
    kernel
        The exact answer; when it is empty, so are all the zones.
    ceiling
        The ceiling zone, or ``None``.
    walls, corners
        In the outline's order.
    recommended
        The best spot of each mount that is possible, ceiling, wall, corner in this order.
    """

    room: Room
    kernel: Kernel
    ceiling: FloorZone | None
    walls: tuple[WallZone, ...]
    corners: tuple[CornerZone, ...]
    recommended: tuple[Spot, ...]
