"""The plan on the sheet: pale linework, rooms, zones by kind, and the walls that leave a room without a point."""

from collections.abc import Iterable, Iterator, Sequence
from math import sqrt

import numpy as np

from kernelscan.coverage import CornerZone, FloorZone, RoomZones, WallZone
from kernelscan.markup.hatching import hatch_lines
from kernelscan.markup.scene import Box, Fill, Hatch, Item, Point, Stroke
from kernelscan.markup.style import (
    ARROW_PEN,
    BLACK,
    CEILING_EDGE_PEN,
    CONFLICT_PEN,
    CORNER_RADIUS,
    DEGENERATE_PEN,
    LINEWORK_PEN,
    MARKS,
    OBSTACLE_INK,
    OBSTACLE_PEN,
    ROOM_PEN,
    SYMBOL_RADIUS,
    WALL_BAND,
    ZONE_EDGE_PEN,
)
from kernelscan.markup.symbols import sector
from kernelscan.markup.view import PlanView, clipped_polyline, thinned
from kernelscan.plan import Room, WallRef

__all__ = [
    "conflict_items",
    "conflict_walls",
    "corner_ring",
    "linework_items",
    "obstacle_items",
    "outline_items",
    "seeing_arrow",
    "wall_normal",
    "zone_items",
]

FINEST = 0.1
"""Points of the background nearer than this on paper are one, in millimetres."""
SEEING_ARROW = 4.0
"""Length of the arrow to the side from which a wall is seen, in millimetres."""


def linework_items(lines: Iterable[np.ndarray], view: PlanView, window: Box) -> Iterator[Item]:
    """Yield the drawing's own strokes, thinned and clipped to a window on the paper."""
    for line in lines:
        if len(line) < 2:
            continue
        for piece in clipped_polyline(thinned(view.to_paper(line), FINEST), window):
            yield Stroke(piece, LINEWORK_PEN)


def obstacle_items(room: Room, view: PlanView) -> Iterator[Item]:
    """Yield the obstacles of a room, filled in pale grey."""
    for hole in room.holes:
        ring = view.ring(hole)
        yield Fill((ring,), OBSTACLE_INK)
        yield Stroke(ring, OBSTACLE_PEN, closed=True)


def outline_items(room: Room, view: PlanView) -> Iterator[Item]:
    """Yield the outline of a room."""
    yield Stroke(view.ring(room.outline), ROOM_PEN, closed=True)


def zone_items(zones: RoomZones, view: PlanView) -> Iterator[Item]:
    """Yield the zones of a room: the ceiling's first, the walls' and the corners' over it."""
    if zones.ceiling is not None:
        yield from _ceiling(zones.ceiling, view)
    for wall in zones.walls:
        yield from _wall(zones.room, wall, view)
    for corner in zones.corners:
        yield from _corner(zones.room, corner, view)


def _ceiling(zone: FloorZone, view: PlanView) -> Iterator[Item]:
    mark, on_paper = MARKS["ceiling"], view.to_paper(zone.vertices)
    ring = view.ring(zone.vertices)
    if len(ring) >= 3:
        yield Hatch(hatch_lines([on_paper], mark.angle, mark.spacing), mark.hatch_pen)
        yield Stroke(ring, CEILING_EDGE_PEN, closed=True)
    elif len(ring) == 2:
        yield Stroke(ring, DEGENERATE_PEN)
    else:
        (x, y), arm = ring[0], 1.5 * WALL_BAND
        yield Stroke(((x - arm, y - arm), (x + arm, y + arm)), ZONE_EDGE_PEN)
        yield Stroke(((x - arm, y + arm), (x + arm, y - arm)), ZONE_EDGE_PEN)


def wall_normal(room: Room, wall: WallRef) -> np.ndarray:
    """Return the unit vector ``(2,)`` from a wall into its room: to the left of the ring's direction."""
    start, end = room.wall_ends(wall)
    along = (end - start) / np.hypot(*(end - start))
    return np.array([-along[1], along[0]])


def _wall(room: Room, zone: WallZone, view: PlanView) -> Iterator[Item]:
    """Yield a band along the wall, on its inner side; a bare tick where only a point of it is left."""
    inward = wall_normal(room, zone.wall) * WALL_BAND
    start, end = view.to_paper(zone.ends)
    if np.hypot(*(end - start)) < WALL_BAND / 2:
        yield Stroke((_pair(start), _pair(start + inward)), ROOM_PEN)
        return
    band = np.array([start, end, end + inward, start + inward])
    mark = MARKS["wall"]
    yield Hatch(hatch_lines([band], mark.angle, mark.spacing), mark.hatch_pen)
    yield Stroke(tuple(_pair(corner) for corner in band), ZONE_EDGE_PEN, closed=True)


def _corner(room: Room, zone: CornerZone, view: PlanView) -> Iterator[Item]:
    mark, ring = MARKS["corner"], corner_ring(room, zone, view)
    yield Hatch(hatch_lines([np.array(ring)], mark.angle, mark.spacing), mark.hatch_pen)
    yield Stroke(ring, ZONE_EDGE_PEN, closed=True)


def corner_ring(room: Room, zone: CornerZone, view: PlanView) -> tuple[Point, ...]:
    """Return the sector that shows a corner zone, smaller in a room that is small on paper."""
    across = sqrt(room.area) * view.scale.mm_per_metre
    radius = min(CORNER_RADIUS, max(SYMBOL_RADIUS + 0.8, across / 7))
    return sector(view.point(zone.spot.point), radius, zone.spot.bearing, zone.spot.field_of_view)


def conflict_walls(zones: RoomZones) -> tuple[WallRef, ...]:
    """Return the two or three walls that exclude each other; none where a point sees every wall."""
    if zones.kernel.kind != "empty":
        return ()
    return tuple(WallRef(int(ring), int(edge)) for ring, edge in zones.kernel.conflict)


def conflict_items(zones: RoomZones, view: PlanView) -> Iterator[Item]:
    """Yield the walls that exclude each other, heavy and dashed, each with an arrow to its seeing side."""
    for wall in conflict_walls(zones):
        start, end = zones.room.wall_ends(wall)
        ends = view.ring(np.array([start, end]))
        yield Stroke(ends, CONFLICT_PEN)
        yield from _arrow(*seeing_arrow(zones.room, wall, view))


def seeing_arrow(room: Room, wall: WallRef, view: PlanView) -> tuple[Point, Point]:
    """Return foot and tip of the arrow from a wall's middle to the side from which it is seen."""
    start, end = room.wall_ends(wall)
    foot = view.to_paper((start + end) / 2)
    return _pair(foot), _pair(foot + SEEING_ARROW * wall_normal(room, wall))


def _arrow(foot: Point, tip: Point) -> Iterator[Item]:
    yield Stroke((foot, tip), ARROW_PEN)
    along = (np.array(tip) - foot) / SEEING_ARROW
    side = np.array([-along[1], along[0]])
    barbs = (tip, tip - 1.6 * along + 0.6 * side, tip - 1.6 * along - 0.6 * side)
    yield Fill((tuple(_pair(each) for each in barbs),), BLACK)


def _pair(point: np.ndarray | Sequence[float]) -> Point:
    return float(point[0]), float(point[1])
