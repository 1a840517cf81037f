"""Symbols of the recommended points: each is the field of view that a device needs there, and a core at the point.

Under the ceiling a full circle, on a wall a half disc whose flat side is the wall, in a corner the sector that the
corner encloses. A symbol is composed of strokes and fills, so that every writer can draw it.
"""

from math import acos, ceil, cos, pi, sin

from kernelscan.coverage import Spot
from kernelscan.markup.scene import Box, Fill, Item, Point, Stroke
from kernelscan.markup.style import MARKS, SYMBOL_PEN, SYMBOL_RADIUS, WHITE

__all__ = ["arc", "box_around", "sector", "spot_ring", "spot_symbol"]

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


def spot_ring(spot: Spot, at: Point) -> tuple[Point, ...]:
    """Return the outline of the symbol of a recommended point."""
    return sector(at, SYMBOL_RADIUS, spot.bearing, spot.field_of_view)


def spot_symbol(spot: Spot, at: Point) -> tuple[Item, ...]:
    """Return the symbol of a recommended point, drawn at its place on the paper."""
    ring = spot_ring(spot, at)
    items: list[Item] = [Fill((ring,), WHITE, SYMBOL_PEN)]
    if spot.bearing is None:
        items += [
            Stroke(((at[0] - SYMBOL_RADIUS, at[1]), (at[0] + SYMBOL_RADIUS, at[1])), SYMBOL_PEN),
            Stroke(((at[0], at[1] - SYMBOL_RADIUS), (at[0], at[1] + SYMBOL_RADIUS)), SYMBOL_PEN),
        ]
    core = sector(at, 0.45 * SYMBOL_RADIUS, spot.bearing, spot.field_of_view)
    items.append(Fill((core,), MARKS[spot.mount].ink, SYMBOL_PEN))
    return tuple(items)


def box_around(points: tuple[Point, ...]) -> Box:
    """Return the upright box around points."""
    x, y = zip(*points, strict=True)
    return Box(min(x), min(y), max(x), max(y))
