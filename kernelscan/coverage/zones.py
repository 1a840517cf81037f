"""Mount zones without a device file: from which ceiling points, wall stretches and corners is every wall seen.

A point sees every wall exactly when it lies in the visibility kernel, so the ceiling zone is the kernel itself,
a wall zone is a piece of wall that lies in the kernel, and a corner zone is a corner of the outline that does.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from math import atan2, pi
from typing import Literal

import numpy as np

from kernelscan.geometry.kernel import Kernel, kernel_of_rings
from kernelscan.geometry.linear_programs import deepest_point
from kernelscan.geometry.stretches import parts_within, side_signs, vertices_within
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


def room_zones(room: Room) -> RoomZones:
    """Return the kernel of a room and every place from which one device sees every wall."""
    kernel = kernel_of_rings(room.rings)
    if kernel.kind == "empty":
        return RoomZones(room, kernel, None, (), (), ())
    lines = wall_lines(room, kernel.walls)
    walls = _wall_zones(room, lines)
    corners = _corner_zones(room, lines)
    best = [_ceiling_spot(room, kernel, lines), _best(_wall_spot(room, zone, lines) for zone in walls)]
    best.append(_best(zone.spot for zone in corners if zone.spot.field_of_view < pi))
    return RoomZones(room, kernel, FloorZone(kernel.vertices), walls, corners, tuple(filter(None, best)))


def wall_lines(room: Room, walls: np.ndarray) -> np.ndarray:
    """Return the ends of some walls, ``(k, 2, 2)``, each with the room on its left."""
    return np.array([room.wall_ends(WallRef(*wall)) for wall in walls.tolist()])


def _wall_zones(room: Room, lines: np.ndarray) -> tuple[WallZone, ...]:
    """The parts of the outline in the kernel; nothing is fixed to an opening."""
    opened = {opening.wall for opening in room.openings}
    parts = ((WallRef(0, edge), ends) for edge, ends in parts_within(room.outline, lines))
    return tuple(WallZone(wall, ends) for wall, ends in parts if wall not in opened)


def _corner_zones(room: Room, lines: np.ndarray) -> tuple[CornerZone, ...]:
    """The outline's corners in the kernel, where two walls that are no openings meet at an angle."""
    opened = {opening.wall.edge for opening in room.openings if opening.wall.ring == 0}
    count = len(room.outline)
    zones = []
    for corner in np.flatnonzero(vertices_within(room.outline, lines)).tolist():
        before, after = (corner - 1) % count, corner
        if before in opened or after in opened or not _turns(room.outline, corner):
            continue
        zones.append(CornerZone(_corner_spot(room, before, after, lines)))
    return tuple(zones)


def _ceiling_spot(room: Room, kernel: Kernel, lines: np.ndarray) -> Spot:
    is_area = kernel.kind == "area"
    point = deepest_point([kernel.vertices]).point if is_area else kernel.vertices.mean(axis=0)
    return _spot(room, "ceiling", point, 2 * pi, None, (), lines)


def _wall_spot(room: Room, zone: WallZone, lines: np.ndarray) -> Spot:
    """The spot of a stretch that may be missed by most."""
    start, end = room.wall_ends(zone.wall)
    point = _safest_along(zone.ends, _other_lines(lines, zone.ends))
    bearing = atan2(*(end - start)[::-1]) + pi / 2
    return _spot(room, "wall", point, pi, bearing, (zone.wall,), lines)


def _corner_spot(room: Room, before: int, after: int, lines: np.ndarray) -> Spot:
    point = room.outline[after]
    ahead = room.outline[(after + 1) % len(room.outline)] - point
    back = room.outline[before] - point
    angle = (atan2(back[1], back[0]) - atan2(ahead[1], ahead[0])) % (2 * pi)
    bearing = atan2(ahead[1], ahead[0]) + angle / 2
    return _spot(room, "corner", point, angle, bearing, (WallRef(0, before), WallRef(0, after)), lines)


def _spot(
    room: Room,
    mount: Mount,
    point: np.ndarray,
    field_of_view: float,
    bearing: float | None,
    walls: tuple[WallRef, ...],
    lines: np.ndarray,
) -> Spot:
    for wall in walls:
        lines = _other_lines(lines, np.array(room.wall_ends(wall)))
    farthest = float(np.hypot(*(room.outline - point).T).max())
    return Spot(mount, point, field_of_view, bearing, farthest, _clearance(point, lines), walls)


def _other_lines(lines: np.ndarray, ends: np.ndarray) -> np.ndarray:
    """The lines that do not run along the given wall in its own direction."""
    along = (side_signs(ends, lines) == 0).all(axis=0)
    same_way = ((lines[:, 1] - lines[:, 0]) @ (ends[1] - ends[0])) > 0
    return lines[~(along & same_way)]


def _clearance(point: np.ndarray, lines: np.ndarray) -> float:
    """The distance from a point of the kernel to the nearest of the lines that bound it."""
    return max(0.0, float(_depths(point[None], lines).min()))


def _depths(points: np.ndarray, lines: np.ndarray) -> np.ndarray:
    """How far left of each line each point lies, ``(m, k)`` metres."""
    ways = lines[:, 1] - lines[:, 0]
    ways /= np.hypot(ways[:, 0], ways[:, 1])[:, None]
    offsets = points[:, None] - lines[None, :, 0]
    depths: np.ndarray = ways[:, 0] * offsets[..., 1] - ways[:, 1] * offsets[..., 0]
    return depths


def _safest_along(ends: np.ndarray, lines: np.ndarray) -> np.ndarray:
    """The point between two ends whose nearest line is farthest; the depth along the way is concave."""
    low, high = 0.0, 1.0
    for _ in range(80):
        thirds = np.array([low + (high - low) / 3, high - (high - low) / 3])
        points = ends[0] + thirds[:, None] * (ends[1] - ends[0])
        near, far = _depths(points, lines).min(axis=1)
        low, high = (low, float(thirds[1])) if near >= far else (float(thirds[0]), high)
    point: np.ndarray = ends[0] + (low + high) / 2 * (ends[1] - ends[0])
    return point


def _turns(ring: np.ndarray, corner: int) -> bool:
    """Whether the ring changes direction at a corner; a point along a straight wall is no corner."""
    before, here, after = ring[corner - 1], ring[corner], ring[(corner + 1) % len(ring)]
    return bool(side_signs(after[None], np.array([[before, here]]))[0, 0])


def _best(spots: Iterable[Spot]) -> Spot | None:
    """The spot that may be missed by most; of equals the one with the shortest range."""
    return max(spots, key=lambda spot: (round(spot.tolerance, 6), -round(spot.farthest, 6)), default=None)
