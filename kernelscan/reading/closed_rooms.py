"""Rooms that the drawing outlines: which closed outlines are rooms, and what stands in them.

Rule
    Outlines on the layers that the user names; else on layers whose names say room by the published conventions;
    else, by content, every closed outline on a layer whose name says nothing, of the smallest room's area or more.
Not rooms
    A second outline on top of another; an outline that others fill (a gross area, the outer face of the walls, a
    sheet's frame); by content also whatever lies inside a room, and strips as narrow as walls.
Obstacles
    What is drawn closed on an obstacle layer and lies in a room becomes a hole of it. What crosses or touches the
    room's outline, or another obstacle, is cut out of the room together with it, so that the outline runs around it.
"""

from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Literal

import numpy as np

from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import as_rings
from kernelscan.geometry.shapes import Patch, area, difference, meetings_of_rings, overlap_areas
from kernelscan.plan import Obstacle, Problem
from kernelscan.plan.room import OpeningKind
from kernelscan.reading.layers import LayerRole, Role
from kernelscan.reading.outlines import Outline
from kernelscan.reading.texts import words
from kernelscan.tolerances import Tolerances

__all__ = ["FoundRoom", "RoomEdge", "chosen_outlines", "with_obstacles"]

SAME = 0.995
"""Two outlines that share this part of the larger are one outline drawn twice."""

FILLED = 0.6
"""An outline of which others fill this part is not a room but what holds them."""

ROOM_SIZED = 4.0
"""No table is as large as this, in square metres."""

MOST_MEETINGS = 1_000_000

LEAST_OVERLAP = 1e-3
"""Rooms that share less than this part of the smaller only touch."""

INSIDE = 0.98
"""An outline of which this part lies in another is inside it."""

CONTENT_KINDS = frozenset({"LWPOLYLINE", "POLYLINE", "CIRCLE", "ELLIPSE", "SPLINE"})
SYMBOL_ROLES: frozenset[Role] = frozenset({"furniture", "annotation", "opening", "stairs", "obstacle"})


@dataclass(frozen=True, slots=True, eq=False)
class RoomEdge:
    """An edge of a room that is an opening: its two ends, ``(2, 2)``, and what it is."""

    ends: np.ndarray
    kind: OpeningKind


@dataclass(frozen=True, slots=True, eq=False)
class FoundRoom:
    """An outline taken for a room, what stands in it and opens in it, and whether it was drawn or made from walls."""

    outline: Outline
    obstacles: tuple[Obstacle, ...] = ()
    edges: tuple[RoomEdge, ...] = ()
    closed_by: Literal["outline", "walls"] = "outline"


def chosen_outlines(
    outlines: Sequence[Outline], roles: Mapping[str, LayerRole], by_option: bool, tolerances: Tolerances
) -> tuple[list[Outline], str, list[Problem]]:
    """Return the outlines that are rooms, the rule that was used, as a sentence, and the problems met.

    Parameters
    ----------
    outlines
        All closed outlines of the drawing.
    roles
        The role of each layer.
    by_option
        Whether the user named the room layers.
    tolerances
        The smallest room by content.
    """
    named = [outline for outline in outlines if roles[outline.stroke.layer].role == "room"]
    if named or by_option:
        layers = ", ".join(sorted({outline.stroke.layer for outline in named}))
        how = "named by --room-layer" if by_option else "whose names say room by convention"
        rule = f"Closed outlines on layers {how}: {layers or 'none found'}."
        rooms, problems = _without_doubles(named, by_content=False)
        return rooms, rule, problems
    candidates = [outline for outline in outlines if _may_be_room(outline, roles, tolerances)]
    rooms, problems = _without_doubles(candidates, by_content=True)
    rooms, inner = _without_inner(rooms)
    rule = (
        f"No layer's name says room, so by content: closed outlines of at least {tolerances.smallest_room:g} m2 "
        "that are neither inside another nor as narrow as a wall."
    )
    return rooms, rule, problems + inner


def _may_be_room(outline: Outline, roles: Mapping[str, LayerRole], tolerances: Tolerances) -> bool:
    return (
        roles[outline.stroke.layer].role == "unknown"
        and outline.stroke.kind in CONTENT_KINDS
        and outline.area >= tolerances.smallest_room
        and outline.width > tolerances.thickest_wall
        and not _is_symbol(outline.stroke.blocks, roles)
    )


def _is_symbol(blocks: str, roles: Mapping[str, LayerRole]) -> bool:
    """Whether a block's name says that it is a piece of furniture, a door, a legend or the like."""
    return bool(words(blocks)) and roles[blocks].role in SYMBOL_ROLES if blocks else False


def _without_doubles(outlines: Sequence[Outline], by_content: bool) -> tuple[list[Outline], list[Problem]]:
    """Leave out second copies and outlines that others fill; report these and every other overlap."""
    if meetings_of_rings([outline.ring for outline in outlines]) > MOST_MEETINGS:
        return list(outlines), [
            Problem("too-dense", f"over {MOST_MEETINGS:,} outlines overlap; copies are not looked for")
        ]
    areas = np.array([outline.area for outline in outlines], dtype=np.float64)
    first, second, shared = _overlaps(outlines)
    copies = _copies(first, second, shared >= SAME * np.maximum(areas[first], areas[second]))
    live = [k for k in range(len(first)) if first[k] not in copies and second[k] not in copies]
    holders = _holders(live, first, second, shared, areas, by_content)
    problems = [
        _problem("duplicate-outline", outlines[j], f"is drawn twice; the first is {_where(outlines[i])}")
        for j, i in copies.items()
    ]
    problems += [
        _problem("outer-outline", outlines[i], "holds rooms that fill it; not taken for one")
        for i in sorted(holders)
    ]
    problems += [
        _problem("overlapping-rooms", outlines[i], f"overlaps {_where(outlines[j])} by {shared[k]:.2f} m2")
        for k, i, j in ((k, int(first[k]), int(second[k])) for k in live)
        if not {i, j} & holders and shared[k] > LEAST_OVERLAP * min(areas[i], areas[j])
    ]
    return [outline for k, outline in enumerate(outlines) if k not in copies and k not in holders], problems


def _copies(first: np.ndarray, second: np.ndarray, same: np.ndarray) -> dict[int, int]:
    """Return the outlines that repeat another one, each with the one it repeats."""
    copies: dict[int, int] = {}
    for i, j in zip(first[same].tolist(), second[same].tolist(), strict=True):
        if i not in copies and j not in copies:
            copies[j] = i
    return copies


def _holders(
    live: Sequence[int],
    first: np.ndarray,
    second: np.ndarray,
    shared: np.ndarray,
    areas: np.ndarray,
    by_content: bool,
) -> set[int]:
    """Return the outlines that others fill and, by content, those that hold two of a room's size or more."""
    filled: dict[int, float] = defaultdict(float)
    held: dict[int, int] = defaultdict(int)
    for k in live:
        i, j = int(first[k]), int(second[k])
        outer, inner = (i, j) if areas[i] >= areas[j] else (j, i)
        if shared[k] >= INSIDE * areas[inner]:
            filled[outer] += float(shared[k])
            held[outer] += areas[inner] >= ROOM_SIZED
    return {k for k in filled if filled[k] >= FILLED * areas[k] or (by_content and held[k] >= 2)}


def _without_inner(outlines: Sequence[Outline]) -> tuple[list[Outline], list[Problem]]:
    """By content, what lies inside a room is something standing there; what it is, the drawing does not say."""
    if meetings_of_rings([outline.ring for outline in outlines]) > MOST_MEETINGS:
        return list(outlines), []
    first, second, shared = _overlaps(outlines)
    inner: dict[int, int] = {}
    for i, j, common in zip(first.tolist(), second.tolist(), shared.tolist(), strict=True):
        small, large = (i, j) if outlines[i].area < outlines[j].area else (j, i)
        if common >= INSIDE * outlines[small].area:
            inner[small] = large
    problems = [
        _problem(
            "inner-outline",
            outlines[k],
            f"lies inside {_where(outlines[home])} and is left out; --obstacle-layer makes such things block sight",
        )
        for k, home in inner.items()
    ]
    return [outline for k, outline in enumerate(outlines) if k not in inner], problems


def _overlaps(outlines: Sequence[Outline]) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    rings = [outline.ring for outline in outlines]
    return overlap_areas(rings, rings)


def with_obstacles(
    rooms: Sequence[Outline], obstacles: Sequence[Outline], snap: float
) -> tuple[list[FoundRoom], list[Problem]]:
    """Return the rooms with the obstacles that stand in them as holes, or cut out where they meet a wall."""
    room_of, thing, shared = overlap_areas([r.ring for r in rooms], [o.ring for o in obstacles])
    inside: dict[int, list[Outline]] = defaultdict(list)
    problems = []
    for i, j, common in zip(room_of.tolist(), thing.tolist(), shared.tolist(), strict=True):
        if common >= 0.5 * rooms[i].area:
            problems.append(
                _problem("obstacle-fills-room", obstacles[j], f"covers half of {_where(rooms[i])}; left out")
            )
        elif common > snap * snap:
            inside[i].append(obstacles[j])
    found = []
    for i, room in enumerate(rooms):
        made, faults = _furnished(room, inside[i]) if i in inside else (FoundRoom(room), [])
        found.append(made)
        problems += faults
    return found, problems


def _furnished(room: Outline, obstacles: Sequence[Outline]) -> tuple[FoundRoom, list[Problem]]:
    try:
        rings = as_rings(room.ring, [obstacle.ring for obstacle in obstacles])
    except GeometryError:
        return _cut(room, obstacles)
    pairs = zip(rings[1:], obstacles, strict=True)
    return FoundRoom(room, tuple(Obstacle(ring, obstacle.source) for ring, obstacle in pairs)), []


def _cut(room: Outline, obstacles: Sequence[Outline]) -> tuple[FoundRoom, list[Problem]]:
    """Cut out of the room what meets its walls or each other; of several pieces the largest is the room."""
    pieces = difference(Patch(room.ring), [Patch(obstacle.ring) for obstacle in obstacles])
    pieces.sort(key=lambda piece: -area(piece))
    try:
        outline, *holes = as_rings(pieces[0].outline, pieces[0].holes)
    except (GeometryError, IndexError) as fault:
        return FoundRoom(room), [
            _problem("obstacle-left-out", room, f"its obstacles cannot be cut out of it: {fault}")
        ]
    problems = [
        _problem("obstacle-at-wall", obstacle, f"meets a wall or another obstacle; cut out of {_where(room)}")
        for obstacle in obstacles
    ]
    if len(pieces) > 1:
        problems.append(
            _problem("room-divided", room, f"its obstacles divide it into {len(pieces)}; the largest is kept")
        )
    cut = replace(room, ring=outline, area=area(Patch(outline)))
    return FoundRoom(cut, tuple(Obstacle(hole, obstacles[0].source) for hole in holes)), problems


def _problem(code: str, outline: Outline, text: str) -> Problem:
    return Problem(code, f"outline of {outline.area:.2f} m2 {text}", outline.centre, outline.source)


def _where(outline: Outline) -> str:
    x, y = outline.centre
    return f"the one at ({x:.2f}, {y:.2f})"
