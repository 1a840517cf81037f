"""Where one device sees every wall of a room, without any device file.

A point sees every wall exactly when it lies in the visibility kernel. So the ceiling zone is the kernel itself, a wall
zone is a stretch of the outline in the kernel, and a corner zone is a corner of the outline in the kernel. Which
points of the outline are in the kernel is decided exactly; where to mount best is computed in doubles.

How far a device may be off is its distance to the nearest line that bounds the kernel, leaving out the walls it is
fixed to: along those it slides.
"""

from collections.abc import Iterable, Iterator
from itertools import pairwise
from math import atan2, inf, pi

import numpy as np

from kernelscan.coverage.depth import deepest_along, line_depths
from kernelscan.coverage.surfaces import corners, joint_turns, runs, solid_spans, walls_along
from kernelscan.coverage.zones import CornerZone, FloorZone, RoomZones, Spot, WallZone
from kernelscan.geometry.halfplanes import wall_half_planes
from kernelscan.geometry.intersection import intersect
from kernelscan.geometry.kernel import Kernel, kernel_of_rings
from kernelscan.geometry.linear_programs import deepest_point
from kernelscan.geometry.stretches import parts_within, vertices_within
from kernelscan.plan import Room, WallRef
from kernelscan.tolerances import Tolerances

__all__ = ["room_zones"]


def room_zones(room: Room, tolerances: Tolerances = Tolerances()) -> RoomZones:
    """Return the kernel of a room and every place from which one device sees every wall."""
    kernel = kernel_of_rings(room.rings)
    if kernel.kind == "empty":
        return RoomZones(room, kernel, None, (), (), ())
    lines = np.array([room.wall_ends(WallRef(*wall)) for wall in kernel.walls.tolist()])
    walls = tuple(_wall_zones(room, lines, np.abs(joint_turns(room.outline)) < tolerances.smooth))
    corner_zones = tuple(_corner_zones(room, lines, tolerances.smooth))
    best = (
        _ceiling_spot(room, kernel, lines),
        _best(_wall_spot(room, zone, lines, tolerances.smooth) for zone in walls),
        _best(zone.spot for zone in corner_zones if zone.spot.field_of_view < pi),
    )
    recommended = tuple(spot for spot in best if spot is not None)
    return RoomZones(room, kernel, FloorZone(kernel.vertices), walls, corner_zones, recommended)


def _wall_zones(room: Room, lines: np.ndarray, smooth: np.ndarray) -> Iterator[WallZone]:
    """The stretches of the outline in the kernel, joined where one wall runs smoothly into the next."""
    ring = room.outline
    parts = [part for edge, ends in parts_within(ring, lines) for part in _solid_parts(room, edge, ends)]
    joined = [_runs_on(parts[k - 1], part, ring, smooth) for k, part in enumerate(parts)]
    starts = [k for k, runs_on in enumerate(joined) if not runs_on] or [0]
    for start, end in pairwise([*starts, starts[0] + len(parts)]):
        run = [parts[k % len(parts)] for k in range(start, end)]
        if run:
            path = np.array([run[0][1][0], *(ends[1] for _, ends in run)])
            yield WallZone(tuple(WallRef(0, edge) for edge, _ in run), path)


def _solid_parts(room: Room, edge: int, ends: np.ndarray) -> Iterator[tuple[int, np.ndarray]]:
    """The parts of a stretch of one edge that are no opening; a stretch without openings stays as it is."""
    spans = solid_spans(room, edge)
    if spans == [(0.0, 1.0)]:
        yield edge, ends
        return
    start, end = room.wall_ends(WallRef(0, edge))
    way = end - start
    first, last = ((ends - start) @ way / (way @ way)).tolist()
    for low, high in spans:
        if max(low, first) < min(high, last):
            part = np.array([start + max(low, first) * way, start + min(high, last) * way])
            part[0], part[1] = ends[0] if low <= first else part[0], ends[1] if high >= last else part[1]
            yield edge, part


def _runs_on(
    before: tuple[int, np.ndarray], after: tuple[int, np.ndarray], ring: np.ndarray, smooth: np.ndarray
) -> bool:
    """Whether two stretches, each an edge and its ends, meet in a joint that is no corner."""
    joint = ring[after[0]]
    neighbours = (before[0] + 1) % len(ring) == after[0]
    return bool(
        neighbours and smooth[after[0]] and (before[1][1] == joint).all() and (after[1][0] == joint).all()
    )


def _corner_zones(room: Room, lines: np.ndarray, smooth: float) -> Iterator[CornerZone]:
    """The outline's corners in the kernel whose two walls can carry a device."""
    within = vertices_within(room.outline, lines)
    for corner in corners(room, smooth):
        if within[corner.walls[1].edge]:
            clearance = _clearance(corner.point, lines[~walls_along(room, corner.walls, lines)])
            farthest = _farthest(room, corner.point)
            spot = Spot(
                "corner", corner.point, corner.angle, corner.bearing, farthest, clearance, corner.walls
            )
            yield CornerZone(spot)


def _ceiling_spot(room: Room, kernel: Kernel, lines: np.ndarray) -> Spot:
    point = _deepest(kernel.vertices) if kernel.kind == "area" else kernel.vertices.mean(axis=0)
    return Spot("ceiling", point, 2 * pi, None, _farthest(room, point), _clearance(point, lines), ())


def _deepest(vertices: np.ndarray) -> np.ndarray:
    """The deepest point of a convex area; where a long area has many, the middle of them."""
    deepest = deepest_point([vertices])
    inner = intersect(wall_half_planes([vertices], deepest.radius * (1 - 1e-9))).vertices
    return inner.mean(axis=0) if len(inner) else deepest.point


def _wall_spot(room: Room, zone: WallZone, lines: np.ndarray, smooth: float) -> Spot:
    """The spot of a stretch that may be missed by most, without leaving the kernel or coming onto an opening."""
    others = lines[~walls_along(room, zone.walls, lines)]
    # A round room is one zone along all of its wall: then the device is to stay on its own side of it.
    most = inf if len(others) else deepest_point([room.outline]).radius
    run = {wall for run in runs(room, smooth) if zone.walls[0] in run for wall in run}
    openings = [room.opening_ends(each) for each in room.openings if each.wall in run]
    best: tuple[float, np.ndarray, WallRef] | None = None
    for wall, (start, end) in zip(zone.walls, pairwise(zone.path), strict=True):

        def depth(points: np.ndarray) -> np.ndarray:
            off = [np.hypot(*(points - ends[k]).T) for ends in openings for k in (0, 1)]
            depths = line_depths(points, others).min(axis=1, initial=most)
            return np.asarray(np.min([depths, *off], axis=0))

        point = deepest_along(start, end, depth)
        clearance = max(0.0, float(depth(point[None])[0]))
        if best is None or round(clearance, 6) > round(best[0], 6):
            best = clearance, point, wall
    assert best is not None  # a zone has a wall at least
    clearance, point, wall = best
    start, end = room.wall_ends(wall)
    bearing = atan2(*(end - start)[::-1]) + pi / 2
    return Spot("wall", point, pi, bearing, _farthest(room, point), clearance, (wall,))


def _clearance(point: np.ndarray, lines: np.ndarray) -> float:
    """The distance from a point of the kernel to the nearest of some lines that bound it."""
    return max(0.0, float(line_depths(point[None], lines).min()))


def _farthest(room: Room, point: np.ndarray) -> float:
    return float(np.hypot(*(room.outline - point).T).max())


def _best(spots: Iterable[Spot]) -> Spot | None:
    """The spot that may be missed by most; of equals the one with the shortest range."""
    return max(spots, key=lambda spot: (round(spot.tolerance, 6), -round(spot.farthest, 6)), default=None)
