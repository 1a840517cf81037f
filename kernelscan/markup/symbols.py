"""Symbols of the recommended points: each is the field of view that a device needs there, and a core at the point.

Under the ceiling a full circle with a cross, on a stand a full circle with three legs, on a wall a half disc whose flat
side is the wall, in a corner the sector that the corner encloses. A device that has to be aimed has an arrow. Where a
device covers a room only in part, the border is dashed and the core is white. A symbol is composed of strokes and
fills, so that every writer can draw it.
"""

from math import acos, atan2, ceil, cos, pi, sin

from kernelscan.markup.scene import Box, Fill, Item, Point, Stroke
from kernelscan.markup.shown import ShownSpot
from kernelscan.markup.style import (
    AIM_LENGTH,
    AIM_PEN,
    BLACK,
    MARKS,
    PARTIAL_PEN,
    SYMBOL_PEN,
    SYMBOL_RADIUS,
    WHITE,
)

__all__ = [
    "aim_lines",
    "arc",
    "arrow",
    "box_around",
    "sector",
    "spot_ring",
    "spot_symbol",
    "tried_ring",
    "tried_symbol",
]

CROSS = (0.0, pi / 2, pi, 3 * pi / 2)
STAND_LEGS = (pi / 2, 7 * pi / 6, 11 * pi / 6)
BARB, BARB_HALF = 1.6, 0.6
"""Length and half width of an arrowhead, in millimetres."""
SAGITTA = 0.03
"""How far, in millimetres, a chord may stray from the arc it stands for."""


def arc(centre: Point, radius: float, start: float, sweep: float) -> tuple[Point, ...]:
    """Return points on an arc, ends included; angles in radians counter-clockwise."""
    count = max(2, ceil(abs(sweep) / (2 * acos(1 - SAGITTA / radius))))
    angles = [start + sweep * i / count for i in range(count + 1)]
    return tuple((centre[0] + radius * cos(a), centre[1] + radius * sin(a)) for a in angles)


def sector(centre: Point, radius: float, bearing: float | None, field: float) -> tuple[Point, ...]:
    """Return the ring of a sector about its bearing, or of a full circle where there is no bearing."""
    if bearing is None:
        return arc(centre, radius, 0.0, 2 * pi)[:-1]
    return (centre, *arc(centre, radius, bearing - field / 2, field))


def spot_ring(spot: ShownSpot, at: Point) -> tuple[Point, ...]:
    """Return the outline of the symbol of a marked point."""
    return sector(at, SYMBOL_RADIUS, spot.bearing, spot.field)


def spot_symbol(spot: ShownSpot, at: Point) -> tuple[Item, ...]:
    """Return the symbol of a marked point, drawn at its place on the paper, with an arrow for each aim."""
    pen = PARTIAL_PEN if spot.is_partial else SYMBOL_PEN
    items: list[Item] = [item for line in aim_lines(spot, at) for item in arrow(*line)]
    items.append(Fill((spot_ring(spot, at),), WHITE, pen))
    if spot.bearing is None:
        legs = STAND_LEGS if spot.fixing == "floor" else CROSS
        items += [
            Stroke((at, (at[0] + SYMBOL_RADIUS * cos(leg), at[1] + SYMBOL_RADIUS * sin(leg))), SYMBOL_PEN)
            for leg in legs
        ]
    core = sector(at, 0.45 * SYMBOL_RADIUS, spot.bearing, spot.field)
    items.append(Fill((core,), WHITE if spot.is_partial else MARKS[spot.fixing].ink, SYMBOL_PEN))
    return tuple(items)


def aim_lines(spot: ShownSpot, at: Point) -> tuple[tuple[Point, Point], ...]:
    """Return foot and tip of the arrow of each aim, from the point on."""
    return tuple((at, (at[0] + AIM_LENGTH * cos(aim), at[1] + AIM_LENGTH * sin(aim))) for aim in spot.aims)


def arrow(foot: Point, tip: Point) -> tuple[Item, Item]:
    """Return a line that ends in an arrowhead."""
    angle = atan2(tip[1] - foot[1], tip[0] - foot[0])
    c, s = cos(angle), sin(angle)
    back = tip[0] - BARB * c, tip[1] - BARB * s
    left = back[0] - BARB_HALF * s, back[1] + BARB_HALF * c
    right = back[0] + BARB_HALF * s, back[1] - BARB_HALF * c
    return Stroke((foot, tip), AIM_PEN), Fill(((tip, left, right),), BLACK)


def tried_ring(at: Point) -> tuple[Point, ...]:
    """Return the outline of the symbol of the best point tried: a square on its corner."""
    return tuple(
        (at[0] + SYMBOL_RADIUS * x, at[1] + SYMBOL_RADIUS * y) for x, y in ((1, 0), (0, 1), (-1, 0), (0, -1))
    )


def tried_symbol(at: Point) -> tuple[Item, Item]:
    """Return the symbol of the best point that was tried where none sees every wall."""
    return Fill((tried_ring(at),), WHITE, SYMBOL_PEN), Fill((arc(at, 0.5, 0.0, 2 * pi)[:-1],), BLACK)


def box_around(points: tuple[Point, ...]) -> Box:
    """Return the upright box around points."""
    x, y = zip(*points, strict=True)
    return Box(min(x), min(y), max(x), max(y))
