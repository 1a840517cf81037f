"""Rooms with all that stands in them: what is drawn closed, and what loose lines close."""

from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import replace

import numpy as np

from kernelscan.geometry.shapes import overlap_areas
from kernelscan.plan import Obstacle, Problem
from kernelscan.reading.closed_rooms import FoundRoom, with_obstacles
from kernelscan.reading.layers import LayerRole
from kernelscan.reading.outlines import Outline
from kernelscan.reading.standing import distinct, standing_columns, standing_walls
from kernelscan.reading.strokes import Stroke
from kernelscan.tolerances import Tolerances

__all__ = ["furnished_outlines", "furnished_walls"]


def furnished_outlines(
    chosen: Sequence[Outline],
    closed: Sequence[Outline],
    strokes: Sequence[Stroke],
    roles: Mapping[str, LayerRole],
    metres: float,
    tolerances: Tolerances,
) -> tuple[list[FoundRoom], list[Problem]]:
    """Return outlined rooms with the columns and the walls that stand in them.

    Parameters
    ----------
    chosen
        The rooms' outlines, in the order of their numbers.
    closed
        Closed outlines on obstacle layers.
    strokes, roles, metres, tolerances
        The drawing, in drawing units; the role of each layer; metres to a drawing unit; snap, thickest wall.
    """
    bare = [FoundRoom(outline) for outline in chosen]
    columns, open_columns = standing_columns(bare, strokes, closed, roles, metres, tolerances)
    walls, open_walls = standing_walls(bare, strokes, roles, metres, tolerances)
    found, problems = with_obstacles(chosen, distinct([*closed, *columns, *walls]), tolerances.snap)
    return found, [*problems, *open_columns, *open_walls]


def furnished_walls(
    rooms: Sequence[FoundRoom],
    closed: Sequence[Outline],
    strokes: Sequence[Stroke],
    roles: Mapping[str, LayerRole],
    metres: float,
    tolerances: Tolerances,
) -> tuple[list[FoundRoom], list[Problem]]:
    """Return rooms between walls with the columns that stand in them as well; what was found in them before stays.

    The parameters are those of :func:`furnished_outlines`.
    """
    columns, problems = standing_columns(rooms, strokes, closed, roles, metres, tolerances)
    held = [obstacle.ring for room in rooms for obstacle in room.obstacles]
    more = distinct([*closed, *columns], held)
    inside: dict[int, list[Outline]] = defaultdict(list)
    pairs = overlap_areas([room.outline.ring for room in rooms], [outline.ring for outline in more])
    for i, j, shared in zip(*(part.tolist() for part in pairs), strict=True):
        if shared >= min(0.5 * more[j].area, tolerances.snap * _half_perimeter(more[j])):
            inside[i].append(more[j])
    found = list(rooms)
    for i, things in inside.items():
        known = [_outline(obstacle, metres) for obstacle in rooms[i].obstacles]
        (made,), faults = with_obstacles([rooms[i].outline], [*known, *things], tolerances.snap)
        found[i] = replace(made, edges=rooms[i].edges, closed_by=rooms[i].closed_by)
        problems = [*faults, *problems]
    return found, problems


def _half_perimeter(outline: Outline) -> float:
    return outline.area / outline.width if outline.width else 0.0


def _outline(obstacle: Obstacle, metres: float) -> Outline:
    """Return an obstacle as the outline that it might have come from."""
    ring = np.ascontiguousarray(obstacle.ring[::-1])
    x, y = (ring - ring[0]).T
    area = float(x[:-1] @ y[1:] - x[1:] @ y[:-1]) / 2
    source = obstacle.source
    return Outline(ring, area, Stroke(ring / metres, True, "LWPOLYLINE", source.layer, source.handle))
