"""The plan on the sheet: pale linework, rooms, zones by kind, and the walls that leave a room without a point."""

from collections.abc import Iterable, Iterator, Sequence
from math import dist, sqrt

import numpy as np

from kernelscan.coverage import CornerZone, FloorZone, Mount, RoomZones, WallZone
from kernelscan.geometry import shapes
from kernelscan.markup.hatching import hatch_lines
from kernelscan.markup.scene import Box, Fill, Hatch, Item, Pen, Point, Stroke, points_of
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
    "band_ring",
    "conflict_items",
    "conflict_walls",
    "corner_rings",
    "linework_items",
    "obstacle_items",
    "outline_items",
    "seeing_arrow",
    "wall_normal",
    "zone_items",
]

FINEST = 0.1
"""Points of the background nearer than this on paper are one, in millimetres."""
SHORT_WALL = 6.0
"""A wall in conflict that is shorter than this is heavy and solid: a dash or two would not show."""
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
        yield Fill((view.ring(hole),), OBSTACLE_INK, OBSTACLE_PEN)


def outline_items(room: Room, view: PlanView) -> Iterator[Item]:
    """Yield the outline of a room."""
    yield Stroke(view.ring(room.outline), ROOM_PEN, closed=True)


def zone_items(zones: RoomZones, view: PlanView) -> Iterator[Item]:
    """Yield the zones of a room: the ceiling's first, the walls' and the corners' over it."""
    if zones.ceiling is not None:
        yield from _ceiling(zones.ceiling, view)
    width = WALL_BAND / view.scale.mm_per_metre
    bands, ticks = [], []
    for wall in zones.walls:
        ring = view.ring(band_ring(zones.room, wall, width))
        if wall.length > width / 2:
            bands.append(ring)
        else:
            ticks.append(Stroke((ring[0], ring[-1]), ROOM_PEN))
    yield from _hatched("wall", bands)
    yield from ticks
    yield from _hatched(
        "corner", [ring for corner in zones.corners for ring in corner_rings(zones.room, corner, view)]
    )


def _hatched(mount: Mount, rings: Sequence[tuple[Point, ...]]) -> Iterator[Item]:
    """Yield areas with the hatch of their kind, one hatch for all, and their borders."""
    mark = MARKS[mount]
    lines = tuple(line for ring in rings for line in hatch_lines([np.array(ring)], mark.angle, mark.spacing))
    if lines:
        yield Hatch(lines, mark.hatch_pen)
    for ring in rings:
        yield Stroke(ring, ZONE_EDGE_PEN, closed=True)


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


def band_ring(room: Room, zone: WallZone, width: float) -> np.ndarray:
    """Return the band along a stretch of wall, on its inner side: ``(2 k + 2, 2)`` metres, along the wall and back.

    Where two pieces meet, the inner side runs on the mean of their normals: they meet smoothly.
    """
    normals = np.array([wall_normal(room, wall) for wall in zone.walls])
    means = np.concatenate([normals[:1], (normals[:-1] + normals[1:]) / 2, normals[-1:]])
    return np.concatenate([zone.path, (zone.path + width * means)[::-1]])


def corner_rings(room: Room, zone: CornerZone, view: PlanView) -> Iterator[tuple[Point, ...]]:
    """Yield the sector that shows a corner zone, smaller in a room that is small on paper, as far as it is inside."""
    across = sqrt(room.area) * view.scale.mm_per_metre
    radius = min(CORNER_RADIUS, max(SYMBOL_RADIUS + 0.8, across / 7))
    spot = zone.spot
    ring = sector(view.point(spot.point), radius, spot.bearing, spot.field_of_view)
    outline, *holes = (view.to_paper(each) for each in room.rings)
    for piece in shapes.intersection(shapes.Patch(np.array(ring), ()), shapes.Patch(outline, tuple(holes))):
        yield points_of(np.asarray(piece.outline))


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
        short = dist(*ends) < SHORT_WALL
        yield Stroke(ends, Pen(CONFLICT_PEN.width) if short else CONFLICT_PEN)
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
