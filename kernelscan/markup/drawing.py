"""The plan on the sheet: pale linework, rooms, zones by kind, small features, and what leaves a room without one."""

from collections.abc import Iterable, Iterator, Sequence
from math import dist, sqrt

import numpy as np

from kernelscan.coverage import WallZone
from kernelscan.geometry import shapes
from kernelscan.markup.hatching import hatch_lines
from kernelscan.markup.scene import Box, Fill, Hatch, Item, Pen, Point, Stroke, points_of
from kernelscan.markup.shown import Nook, ShownArea, ShownRoom, wall_normal
from kernelscan.markup.style import (
    ARROW_PEN,
    BLACK,
    CONFLICT_PEN,
    CORNER_RADIUS,
    FEATURE_ANGLES,
    FEATURE_EDGE_PEN,
    FEATURE_PEN,
    FEATURE_SPACING,
    HIDDEN_ANGLE,
    HIDDEN_PEN,
    HIDDEN_SPACING,
    LINEWORK_PEN,
    MARKS,
    OBSTACLE_INK,
    OBSTACLE_PEN,
    ROOM_PEN,
    SYMBOL_RADIUS,
    WALL_BAND,
    ZONE_EDGE_PEN,
)
from kernelscan.markup.symbols import sector, spot_symbol, tried_symbol
from kernelscan.markup.view import PlanView, clipped_polyline, thinned
from kernelscan.plan import Fixing, Room, WallRef

__all__ = [
    "band_ring",
    "conflict_items",
    "corner_rings",
    "feature_items",
    "hidden_items",
    "linework_items",
    "obstacle_items",
    "outline_items",
    "point_items",
    "seeing_arrow",
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


def zone_items(room: ShownRoom, view: PlanView) -> Iterator[Item]:
    """Yield the zones of a room: those in plan first, the walls' and the corners' over them."""
    for area in room.areas:
        yield from _area(area, view)
    width = WALL_BAND / view.scale.mm_per_metre
    bands, ticks = [], []
    for wall in room.stretches:
        ring = view.ring(band_ring(room.basis.room, wall, width))
        if wall.length > width / 2:
            bands.append(ring)
        else:
            ticks.append(Stroke((ring[0], ring[-1]), ROOM_PEN))
    yield from _hatched("wall", bands)
    yield from ticks
    nooks = [ring for nook in room.nooks for ring in corner_rings(room.basis.room, nook, view)]
    yield from _hatched("corner", nooks)


def feature_items(room: ShownRoom, view: PlanView) -> Iterator[Item]:
    """Yield the small features that were left out: a cross hatch, and a dashed border."""
    for _, feature in room.features:
        ring = view.to_paper(feature.ring)
        for angle in FEATURE_ANGLES:
            yield Hatch(hatch_lines([ring], angle, FEATURE_SPACING), FEATURE_PEN)
        yield Stroke(points_of(ring), FEATURE_EDGE_PEN, closed=True)


def hidden_items(room: ShownRoom, view: PlanView) -> Iterator[Item]:
    """Yield the floor that the best point tried does not see."""
    for patch in () if room.tried is None else room.tried.hidden.patches:
        rings = [view.to_paper(ring) for ring in (patch.outline, *patch.holes)]
        yield Hatch(hatch_lines(rings, HIDDEN_ANGLE, HIDDEN_SPACING), HIDDEN_PEN)
        for ring in rings:
            yield Stroke(points_of(ring), HIDDEN_PEN, closed=True)


def point_items(room: ShownRoom, view: PlanView) -> Iterator[Item]:
    """Yield the symbols of a room: its points, and the best point tried where there is none."""
    for spot in room.spots:
        yield from spot_symbol(spot, view.point(spot.point))
    if room.tried is not None:
        yield from tried_symbol(view.point(room.tried.best.point))


def _hatched(fixing: Fixing, rings: Sequence[tuple[Point, ...]]) -> Iterator[Item]:
    """Yield areas with the hatch of their kind, one hatch for all, and their borders."""
    mark = MARKS[fixing]
    lines = tuple(line for ring in rings for line in hatch_lines([np.array(ring)], mark.angle, mark.spacing))
    if lines:
        yield Hatch(lines, mark.hatch_pen)
    for ring in rings:
        yield Stroke(ring, ZONE_EDGE_PEN, closed=True)


def _area(area: ShownArea, view: PlanView) -> Iterator[Item]:
    mark = MARKS[area.fixing]
    rings = [view.ring(ring) for ring in area.rings]
    if len(rings[0]) >= 3:
        yield Hatch(hatch_lines([np.array(ring) for ring in rings], mark.angle, mark.spacing), mark.hatch_pen)
        for ring in rings:
            yield Stroke(ring, mark.edge_pen, closed=True)
    elif len(rings[0]) == 2:
        yield Stroke(rings[0], mark.line_pen)
    else:
        (x, y), arm = rings[0][0], 1.5 * WALL_BAND
        yield Stroke(((x - arm, y - arm), (x + arm, y + arm)), ZONE_EDGE_PEN)
        yield Stroke(((x - arm, y + arm), (x + arm, y - arm)), ZONE_EDGE_PEN)


def band_ring(room: Room, zone: WallZone, width: float) -> np.ndarray:
    """Return the band along a stretch of wall, on its inner side: ``(2 k + 2, 2)`` metres, along the wall and back.

    Where two pieces meet, the inner side runs on the mean of their normals: they meet smoothly.
    """
    normals = np.array([wall_normal(room, wall) for wall in zone.walls])
    means = np.concatenate([normals[:1], (normals[:-1] + normals[1:]) / 2, normals[-1:]])
    return np.concatenate([zone.path, (zone.path + width * means)[::-1]])


def corner_rings(room: Room, nook: Nook, view: PlanView) -> Iterator[tuple[Point, ...]]:
    """Yield the sector that shows a corner zone, smaller in a room that is small on paper, as far as it is inside."""
    across = sqrt(room.area) * view.scale.mm_per_metre
    radius = min(CORNER_RADIUS, max(SYMBOL_RADIUS + 0.8, across / 7))
    ring = sector(view.point(nook.point), radius, nook.bearing, nook.field)
    outline, *holes = (view.to_paper(each) for each in room.rings)
    for piece in shapes.intersection(shapes.Patch(np.array(ring), ()), shapes.Patch(outline, tuple(holes))):
        yield points_of(np.asarray(piece.outline))


def conflict_items(room: ShownRoom, view: PlanView) -> Iterator[Item]:
    """Yield the walls that exclude each other, heavy and dashed, each with an arrow to its seeing side."""
    for wall in room.conflict:
        start, end = room.basis.room.wall_ends(wall)
        ends = view.ring(np.array([start, end]))
        short = dist(*ends) < SHORT_WALL
        yield Stroke(ends, Pen(CONFLICT_PEN.width) if short else CONFLICT_PEN)
        yield from _arrow(*seeing_arrow(room.basis.room, wall, view))


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
