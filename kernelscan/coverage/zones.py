"""Mount zones without a device file: from which ceiling points, wall stretches and corners is every wall seen.

A point sees every wall exactly when it lies in the visibility kernel, so the ceiling zone is the kernel itself,
a wall zone is a piece of wall that lies in the kernel, and a corner zone is a corner of the outline that does.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from kernelscan.geometry.kernel import Kernel
from kernelscan.plan import Room, WallRef

__all__ = ["CornerZone", "FloorZone", "Mount", "RoomZones", "Spot", "WallZone", "room_zones"]

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
        How far, in metres, the device may be off and still see every wall: the distance to the nearest border
        of the kernel other than the walls the device is fixed to.
    walls
        The walls it is fixed to: none, one or two.
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
    """A stretch of one wall: ``(2, 2)`` ends in metres; both ends are equal where a single point remains."""

    wall: WallRef
    ends: np.ndarray

    @property
    def length(self) -> float:
        """Length in metres."""
        return float(np.hypot(*(self.ends[1] - self.ends[0])))


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
