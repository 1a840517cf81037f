"""Where one device sees every wall of a room, without any device file.

A point sees every wall exactly when it lies in the visibility kernel. So the ceiling zone is the kernel itself, a wall
zone is a stretch of the outline in the kernel, and a corner zone is a corner of the outline in the kernel. Which
points of the outline are in the kernel is decided exactly; where to mount best is computed in doubles.

How far a device may be off is its distance to the nearest line that bounds the kernel, leaving out the walls it is
fixed to: along those it slides.
"""

from collections.abc import Iterable, Iterator
from itertools import pairwise
from math import atan2, pi

import numpy as np

from kernelscan.coverage.zones import CornerZone, FloorZone, RoomZones, Spot, WallZone
from kernelscan.geometry.kernel import Kernel, kernel_of_rings
from kernelscan.geometry.linear_programs import deepest_point
from kernelscan.geometry.stretches import parts_within, side_signs, vertices_within
from kernelscan.plan import Room, WallRef
from kernelscan.tolerances import Tolerances

__all__ = ["room_zones"]

PLACES = 17
"""Points at which a stretch is tried at a time, when the best of it is sought."""


def room_zones(room: Room, tolerances: Tolerances = Tolerances()) -> RoomZones:
    """Return the kernel of a room and every place from which one device sees every wall."""
    kernel = kernel_of_rings(room.rings)
    if kernel.kind == "empty":
        return RoomZones(room, kernel, None, (), (), ())
    lines = np.array([room.wall_ends(WallRef(*wall)) for wall in kernel.walls.tolist()])
    joints = _joint_turns(room.outline)
    walls = tuple(_wall_zones(room, lines, np.abs(joints) < tolerances.smooth))
    corners = tuple(_corner_zones(room, lines, np.abs(joints) >= tolerances.smooth))
    best = (
        _ceiling_spot(room, kernel, lines),
        _best(_wall_spot(room, zone, lines) for zone in walls),
        _best(zone.spot for zone in corners if zone.spot.field_of_view < pi),
    )
    recommended = tuple(spot for spot in best if spot is not None)
    return RoomZones(room, kernel, FloorZone(kernel.vertices), walls, corners, recommended)


def _joint_turns(ring: np.ndarray) -> np.ndarray:
    """The turn at each vertex, ``(n,)`` radians: positive where the room's corner is convex."""
    ahead = np.roll(ring, -1, axis=0) - ring
    back = ring - np.roll(ring, 1, axis=0)
    turns: np.ndarray = np.arctan2(
        back[:, 0] * ahead[:, 1] - back[:, 1] * ahead[:, 0], (back * ahead).sum(axis=1)
    )
    return turns


def _opened(room: Room) -> set[int]:
    """The outline's edges that are openings: nothing is fixed to them."""
    return {opening.wall.edge for opening in room.openings if opening.wall.ring == 0}


def _wall_zones(room: Room, lines: np.ndarray, smooth: np.ndarray) -> Iterator[WallZone]:
    """The stretches of the outline in the kernel, joined where one wall runs smoothly into the next."""
    opened, ring = _opened(room), room.outline
    parts = [part for part in parts_within(ring, lines) if part[0] not in opened]
    joined = [_runs_on(parts[k - 1], part, ring, smooth) for k, part in enumerate(parts)]
    starts = [k for k, runs_on in enumerate(joined) if not runs_on] or [0]
    for start, end in pairwise([*starts, starts[0] + len(parts)]):
        run = [parts[k % len(parts)] for k in range(start, end)]
        if run:
            path = np.array([run[0][1][0], *(ends[1] for _, ends in run)])
            yield WallZone(tuple(WallRef(0, edge) for edge, _ in run), path)


def _runs_on(
    before: tuple[int, np.ndarray], after: tuple[int, np.ndarray], ring: np.ndarray, smooth: np.ndarray
) -> bool:
    """Whether two stretches, each an edge and its ends, meet in a joint that is no corner."""
    joint = ring[after[0]]
    neighbours = (before[0] + 1) % len(ring) == after[0]
    return bool(
        neighbours and smooth[after[0]] and (before[1][1] == joint).all() and (after[1][0] == joint).all()
    )


def _corner_zones(room: Room, lines: np.ndarray, sharp: np.ndarray) -> Iterator[CornerZone]:
    """The outline's corners in the kernel whose two walls can carry a device."""
    opened, count = _opened(room), len(room.outline)
    for corner in np.flatnonzero(sharp & vertices_within(room.outline, lines)).tolist():
        before = (corner - 1) % count
        if not opened & {before, corner}:
            yield CornerZone(_corner_spot(room, before, corner, lines))


def _ceiling_spot(room: Room, kernel: Kernel, lines: np.ndarray) -> Spot:
    is_area = kernel.kind == "area"
    point = deepest_point([kernel.vertices]).point if is_area else kernel.vertices.mean(axis=0)
    return Spot("ceiling", point, 2 * pi, None, _farthest(room, point), _clearance(point, lines), ())


def _corner_spot(room: Room, before: int, after: int, lines: np.ndarray) -> Spot:
    ring = room.outline
    point, walls = ring[after], (WallRef(0, before), WallRef(0, after))
    ahead, back = ring[(after + 1) % len(ring)] - point, ring[before] - point
    heading = atan2(ahead[1], ahead[0])
    angle = (atan2(back[1], back[0]) - heading) % (2 * pi)
    clearance = _clearance(point, _lines_but(lines, room, walls))
    return Spot("corner", point, angle, heading + angle / 2, _farthest(room, point), clearance, walls)


def _wall_spot(room: Room, zone: WallZone, lines: np.ndarray) -> Spot:
    """The spot of a stretch that may be missed by most: never by more than the way to the stretch's nearer end."""
    others = _lines_but(lines, room, zone.walls)
    lengths = np.hypot(*np.diff(zone.path, axis=0).T)
    if len(others) == 0:
        # The room is round and the whole of its wall is one zone: any place is as good as another.
        wall, point, clearance = zone.walls[0], zone.path[:2].mean(axis=0), float(lengths.sum() / 2)
    else:
        found = (_safest_along(ends, others) for ends in zip(zone.path, zone.path[1:], strict=False))
        clearance, point, wall = max(
            ((_clearance(point, others), point, wall) for point, wall in zip(found, zone.walls, strict=True)),
            key=lambda each: round(each[0], 6),
        )
    start, end = room.wall_ends(wall)
    bearing = atan2(*(end - start)[::-1]) + pi / 2
    return Spot("wall", point, pi, bearing, _farthest(room, point), clearance, (wall,))


def _lines_but(lines: np.ndarray, room: Room, walls: Iterable[WallRef]) -> np.ndarray:
    """The lines that do not run along any of the walls in its own direction."""
    for wall in walls:
        ends = np.array(room.wall_ends(wall))
        along = (side_signs(ends, lines) == 0).all(axis=0)
        same_way = ((lines[:, 1] - lines[:, 0]) @ (ends[1] - ends[0])) > 0
        lines = lines[~(along & same_way)]
    return lines


def _clearance(point: np.ndarray, lines: np.ndarray) -> float:
    """The distance from a point of the kernel to the nearest of some lines that bound it."""
    return max(0.0, float(_depths(point[None], lines).min()))


def _depths(points: np.ndarray, lines: np.ndarray) -> np.ndarray:
    """How far left of each line each point lies, ``(m, k)`` metres."""
    ways = lines[:, 1] - lines[:, 0]
    ways = ways / np.hypot(ways[:, 0], ways[:, 1])[:, None]
    offsets = points[:, None] - lines[None, :, 0]
    depths: np.ndarray = ways[:, 0] * offsets[..., 1] - ways[:, 1] * offsets[..., 0]
    return depths


def _safest_along(ends: tuple[np.ndarray, np.ndarray], lines: np.ndarray) -> np.ndarray:
    """The point between two ends whose nearest line is farthest, to a billionth of the way; the depth is concave."""
    low, high = 0.0, 1.0
    while high - low > 1e-9:
        places = np.linspace(low, high, PLACES)
        depths = _depths(ends[0] + places[:, None] * (ends[1] - ends[0]), lines).min(axis=1)
        # On a flat top the middle is the best: it leaves the most room to slide.
        top = np.flatnonzero(depths >= depths.max() - 1e-9)
        if len(top) > 2:
            low = high = float(places[top].mean())
        else:
            low, high = float(places[max(top[0] - 1, 0)]), float(places[min(top[-1] + 1, PLACES - 1)])
    point: np.ndarray = ends[0] + (low + high) / 2 * (ends[1] - ends[0])
    return point


def _farthest(room: Room, point: np.ndarray) -> float:
    return float(np.hypot(*(room.outline - point).T).max())


def _best(spots: Iterable[Spot]) -> Spot | None:
    """The spot that may be missed by most; of equals the one with the shortest range."""
    return max(spots, key=lambda spot: (round(spot.tolerance, 6), -round(spot.farthest, 6)), default=None)
