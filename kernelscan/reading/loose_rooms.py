"""Rooms from loose linework: the faces between walls that are rooms, and what stands in them.

Problem
    Most drawings outline no room. They draw walls, as single lines or as two faces, that stop at doors, overshoot at
    corners, and stand among much else.
Method
    Near misses are joined, gaps closed (:mod:`kernelscan.reading.gaps`), and all lines noded into faces
    (:mod:`kernelscan.reading.faces`). A face is a room by its area and by its width, the short side of the rectangle
    of the same area and perimeter; what is narrower is the body of a wall, a jamb or a door's place. A face with a
    name in it may be smaller.
Not rooms
    A face around everything else, which opens to nothing, is a frame or a plot. What stands free inside a room, has no
    opening and no name, is an obstacle of that room.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np

from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import as_ring, signed_area
from kernelscan.geometry.shapes import inner_points, lines_near, meetings_of_lines, rings_around
from kernelscan.plan import Obstacle, Problem, Source
from kernelscan.plan.room import OpeningKind
from kernelscan.reading.closed_rooms import FoundRoom, RoomEdge
from kernelscan.reading.corners import clean_ring
from kernelscan.reading.faces import DRAWN_OPENING, OUTSIDE, Face, SmallFace, faces_of
from kernelscan.reading.gaps import closing_lines, connectors, wall_gaps
from kernelscan.reading.layers import LayerRole
from kernelscan.reading.merging import merged
from kernelscan.reading.names import labels_in_rings, room_label
from kernelscan.reading.outlines import Outline
from kernelscan.reading.segments import (
    DOOR,
    GAP,
    WALL,
    WINDOW,
    Segments,
    are_leaves,
    opening_code,
    plug_strokes,
    segments_of,
    swings_of,
)
from kernelscan.reading.strokes import Label, Stroke, stroke_boxes
from kernelscan.tolerances import Tolerances

__all__ = ["Barriers", "barriers_by_content", "barriers_by_name", "loose_rooms"]

CORNER = 1.5
"""Two lines that each stop short of a corner by the snap distance end this many times as far from each other."""

GRID = 1e-5
FARTHEST = 5000.0
SMALLEST_PLAN = 1.0
MOST_MEETINGS = 1_000_000
STRAIGHT = 1e-3
LABELLED_AREA, LABELLED_WIDTH = 0.5, 0.5
FILLED_KINDS = frozenset({"HATCH", "MPOLYGON", "SOLID", "TRACE"})
KINDS: dict[int, OpeningKind] = {DOOR: "door", WINDOW: "window", GAP: "gap"}


@dataclass(frozen=True, slots=True, eq=False)
class Barriers:
    """What bounds rooms: walls, doors and windows, layers with solid outlines, and whether names say so."""

    walls: Sequence[Stroke]
    openings: Sequence[Stroke]
    bodies: frozenset[str] = frozenset()
    by_name: bool = False


def barriers_by_name(strokes: Sequence[Stroke], roles: Mapping[str, LayerRole]) -> Barriers:
    """Return what lies on layers named for walls, or, for doors and windows, on layers named so."""
    walls = [
        s
        for s in strokes
        if roles[s.layer].role == "wall" or (roles[s.layer].role == "room" and not s.closed)
    ]
    return Barriers(walls, [s for s in strokes if roles[s.layer].role == "opening"], by_name=True)


def barriers_by_content(
    strokes: Sequence[Stroke], roles: Mapping[str, LayerRole], metres: float, tolerances: Tolerances
) -> Barriers:
    """Return all that may be a wall where names say nothing: no fillings, nothing named as something else."""
    walls, openings = [], []
    for stroke in strokes:
        part = roles[stroke.layer].role
        block = roles[stroke.blocks].role if stroke.blocks else "unknown"
        if stroke.kind in FILLED_KINDS or block in {"furniture", "annotation", "stairs", "other"}:
            continue
        if part == "opening" or (part == "unknown" and block == "opening"):
            openings.append(stroke)
        elif part in {"unknown", "wall", "obstacle"}:
            walls.append(stroke)
    plugs = plug_strokes(walls, metres, tolerances)
    openings += [walls[k] for k in sorted(plugs)]
    walls = [stroke for k, stroke in enumerate(walls) if k not in plugs]
    solid = frozenset(layer for layer, role in roles.items() if role.role == "obstacle")
    return Barriers(walls, openings, solid)


def loose_rooms(
    barriers: Barriers, labels: Sequence[Label], metres: float, tolerances: Tolerances
) -> tuple[list[FoundRoom], list[Problem]]:
    """Return the rooms that the barriers bound, top to bottom and left to right, and the problems met.

    Parameters
    ----------
    barriers
        In drawing units.
    labels
        In drawing units.
    metres
        How many metres a drawing unit is.
    tolerances
        Snap, door gap, widest opening, thickest wall, smallest room.
    """
    origin = _middle([*barriers.walls, *barriers.openings], metres)
    barriers, far = _within(barriers, metres, origin)
    strokes = [*barriers.walls, *barriers.openings]
    if not strokes or _reach(strokes, metres) < SMALLEST_PLAN:
        return [], far
    if _too_dense(barriers, metres, origin):
        return [], [
            *far,
            Problem("too-dense", f"over {MOST_MEETINGS:,} crossings of lines; they cannot all be walls"),
        ]
    lines, wide = _closed_lines(barriers, metres, origin, tolerances)
    faces = faces_of(lines, GRID, SmallFace(tolerances.smallest_room, tolerances.thickest_wall))
    named = _named(faces, labels, metres, origin)
    solid = _solid_faces(faces, barriers, metres, origin)
    rooms = [f for f in _room_faces(faces, named, barriers.by_name, tolerances) if f not in solid]
    bounding = _bounding_strokes([faces[f] for f in rooms], strokes, lines)
    found = [_found(faces[f], origin, stroke, tolerances) for f, stroke in zip(rooms, bounding, strict=True)]
    found.sort(key=_reading_order)
    walls = lines.where((lines.code == WALL) & (lines.stroke >= 0))
    if found and _bounded_length(faces, rooms) < tolerances.least_closed * float(walls.length.sum()):
        return [], [*far, *(_pocket(room) for room in found)]
    loose = _free_walls([faces[f] for f in rooms], walls, origin, strokes, tolerances)
    return found, [*far, *_wide_gaps(wide + origin), *loose]


def _middle(strokes: Sequence[Stroke], metres: float) -> np.ndarray:
    """Return a whole number of metres amid the strokes, to reckon from; far-off strays do not move it."""
    if not strokes:
        return np.zeros(2)
    return np.asarray(np.rint(np.median(np.concatenate([s.points[:1] for s in strokes]), axis=0) * metres))


def _too_dense(barriers: Barriers, metres: float, origin: np.ndarray) -> bool:
    """Whether lines cross so often that noding would take for ever, as in hatching drawn line by line."""
    strokes = [*barriers.walls, *barriers.openings]
    lines = merged(segments_of(strokes, [WALL] * len(strokes), metres, origin))
    return meetings_of_lines(lines.a, lines.b) > MOST_MEETINGS


def _reach(strokes: Sequence[Stroke], metres: float) -> float:
    """Return the longer side of the box around all strokes."""
    low, high = stroke_boxes(strokes)
    return float((high.max(axis=0) - low.min(axis=0)).max() * metres)


def _within(barriers: Barriers, metres: float, origin: np.ndarray) -> tuple[Barriers, list[Problem]]:
    """Leave out what lies farther from the rest than any building reaches, and say so."""
    problems: list[Problem] = []

    def near(strokes: Sequence[Stroke]) -> list[Stroke]:
        low, high = stroke_boxes(strokes)
        reach = np.maximum(np.abs(low * metres - origin), np.abs(high * metres - origin)).max(
            axis=1, initial=0.0
        )
        for k in np.flatnonzero(reach > FARTHEST).tolist():
            text = f"{strokes[k].kind} lies over {FARTHEST / 1000:g} km from the rest; left out"
            at = (float(low[k, 0] * metres), float(low[k, 1] * metres))
            problems.append(Problem("far-off", text, at, Source(strokes[k].layer, strokes[k].handle)))
        return [stroke for stroke, off in zip(strokes, reach.tolist(), strict=True) if off <= FARTHEST]

    return replace(barriers, walls=near(barriers.walls), openings=near(barriers.openings)), problems


def _bounded_length(faces: Sequence[Face], rooms: Sequence[int]) -> float:
    """Return how much wall bounds the rooms, their openings not counted."""
    total = 0.0
    for f in rooms:
        for ring, codes in zip(faces[f].rings, faces[f].codes, strict=True):
            steps = np.hypot(*np.diff(ring, axis=0, append=ring[:1]).T)
            total += float(steps[codes == WALL].sum())
    return total


def _wide_gaps(wide: np.ndarray) -> list[Problem]:
    """Return a problem for each gap between free wall ends that is wider than a door, with its size and place."""
    widths = np.hypot(*(wide[:, 1] - wide[:, 0]).T)
    middles = wide.mean(axis=1)
    return [
        Problem("wide-gap", f"a gap of {width:.2f} m between two wall ends is left open", (x, y))
        for width, (x, y) in zip(widths.tolist(), middles.tolist(), strict=True)
    ]


def _free_walls(
    rooms: Sequence[Face],
    walls: Segments,
    origin: np.ndarray,
    strokes: Sequence[Stroke],
    tolerances: Tolerances,
) -> list[Problem]:
    """Return a problem for each wall line that stands in a room and bounds nothing: it hides nothing there."""
    long = np.flatnonzero(walls.length >= tolerances.thickest_wall / 2)
    if not rooms or not len(long):
        return []
    middles = (walls.a[long] + walls.b[long]) / 2
    rings = [ring for room in rooms for ring in room.rings]
    a, b = np.concatenate(rings), np.concatenate([np.roll(ring, -1, axis=0) for ring in rings])
    inside = np.zeros(len(long), dtype=np.int64)
    np.add.at(inside, rings_around([room.rings[0] for room in rooms], middles)[0], 1)
    holes = [ring for room in rooms for ring in room.rings[1:]]
    if holes:
        np.add.at(inside, rings_around(holes, middles)[0], -1)
    inside[lines_near(middles, a, b, tolerances.snap)[0]] = 0
    problems = []
    for k in np.flatnonzero(inside > 0).tolist():
        stroke = strokes[int(walls.stroke[long[k]])]
        x, y = (middles[k] + origin).tolist()
        text = (
            f"a wall line of {walls.length[long[k]]:.2f} m stands free in a room and hides nothing; close it"
        )
        problems.append(Problem("free-wall", text, (x, y), Source(stroke.layer, stroke.handle)))
    return problems


def _pocket(room: FoundRoom) -> Problem:
    text = (
        f"{room.outline.area:.2f} m2 are enclosed here, but hardly any other wall of the drawing encloses anything: "
        "an open plan, without rooms"
    )
    return Problem("open-plan", text, room.outline.centre, room.outline.source)


def _closed_lines(
    barriers: Barriers, metres: float, origin: np.ndarray, tolerances: Tolerances
) -> tuple[Segments, np.ndarray]:
    """Return the walls, openings' lines and thresholds that close the rooms, and the gaps too wide to be closed."""
    strokes = [*barriers.walls, *barriers.openings]
    swinging = swings_of(strokes, metres, origin)
    arcs = {k for k, _ in swinging}
    first = len(barriers.walls)
    codes = [WALL if k < first else opening_code(s.layer, s.blocks) for k, s in enumerate(strokes)]
    whole = segments_of(strokes, codes, metres, origin)
    swings = [swing for _, swing in swinging]
    leaves = are_leaves(whole, swings) & (whole.code == WALL)
    whole = whole.where(~np.isin(whole.stroke, list(arcs)) & ~leaves)
    walls, openings = merged(whole.where(whole.code == WALL)), whole.where(whole.code != WALL)
    gaps = wall_gaps(walls, openings, swings, tolerances)
    closing = openings.where(closing_lines(openings, walls, tolerances))
    drawn = walls.plus(closing.a, closing.b, closing.code + DRAWN_OPENING)
    starts, ends = connectors(drawn, CORNER * tolerances.snap)
    joined = drawn.plus(starts, ends, np.full(len(starts), WALL))
    return joined.plus(gaps.a, gaps.b, gaps.code), gaps.wide


def _named(faces: Sequence[Face], labels: Sequence[Label], metres: float, origin: np.ndarray) -> set[int]:
    """Return the faces in which a label that is a name stands."""
    inside = labels_in_rings([face.rings[0] + origin for face in faces], labels, metres)
    return {f for f, texts in enumerate(inside) if texts and room_label(texts).name}


def _solid_faces(faces: Sequence[Face], barriers: Barriers, metres: float, origin: np.ndarray) -> set[int]:
    """Return the faces that lie in an outline of an obstacle layer, the body of a wall or column."""
    bodies = [
        s.points * metres - origin for s in barriers.walls if s.layer in barriers.bodies and s.is_ring(0.0)
    ]
    if not bodies or not faces:
        return set()
    points = inner_points([face.rings[0] for face in faces])
    return set(rings_around(bodies, points)[0].tolist())


def _room_faces(faces: Sequence[Face], named: set[int], by_name: bool, tolerances: Tolerances) -> list[int]:
    """Return the faces that are rooms: large and wide enough or named, no frame, and not just standing in a room."""
    rooms = [
        f
        for f, face in enumerate(faces)
        if (face.area >= tolerances.smallest_room and face.width >= tolerances.thickest_wall)
        or (f in named and face.area >= LABELLED_AREA and face.width >= LABELLED_WIDTH)
    ]
    holes = [(f, hole) for f in rooms for hole in faces[f].rings[1:]]
    if not holes:
        return rooms
    points = inner_points([faces[f].rings[0] for f in rooms])
    held: dict[int, set[int]] = {}
    around: dict[int, set[int]] = {}
    for k, h in zip(
        *(pairs.tolist() for pairs in rings_around([hole for _, hole in holes], points)), strict=True
    ):
        held.setdefault(holes[h][0], set()).add(rooms[k])
        around.setdefault(rooms[k], set()).add(holes[h][0])
    frames = {
        f for f, inner in held.items() if _is_frame(faces[f], [faces[i] for i in inner], f in named, by_name)
    }
    return [
        f
        for f in rooms
        if f not in frames and (f in named or _is_entered(faces[f]) or not around.get(f, set()) - frames)
    ]


def _is_entered(face: Face) -> bool:
    return any((codes != WALL).any() for codes in face.codes)


def _is_frame(face: Face, held: Sequence[Face], has_name: bool, by_name: bool) -> bool:
    """Whether a face is a sheet's frame or a plot: it opens to nothing outside and holds a building of several rooms.

    What is drawn on wall layers is so only around a building of three rooms or more, and if it is mostly empty.
    A name in it makes it a room, unless it is mostly filled with others.
    """
    alone = bool((face.beyond[0] == OUTSIDE).all() and (face.codes[0] == WALL).all())
    whole = abs(signed_area(face.rings[0]))
    if not alone or (has_name and face.area > whole / 2):
        return False
    return len(held) >= 3 and face.area > whole / 2 if by_name else len(held) >= 2


def _found(face: Face, origin: np.ndarray, stroke: Stroke, tolerances: Tolerances) -> FoundRoom:
    """Return a face as a room: its corners cleaned, its holes obstacles, its openings kept."""
    ring, codes = clean_ring(face.rings[0], face.codes[0], CORNER * tolerances.snap, STRAIGHT)
    try:
        outline = as_ring(ring + origin)
    except GeometryError:
        ring, codes = face.rings[0], face.codes[0]
        outline = as_ring(ring + origin)
    source = Source(stroke.layer, stroke.handle)
    obstacles = []
    for hole, kinds in zip(face.rings[1:], face.codes[1:], strict=True):
        cleaned, _ = clean_ring(hole, kinds, CORNER * tolerances.snap, STRAIGHT)
        if (kinds == WALL).any() and len(cleaned) > 2:
            obstacles.append(Obstacle(as_ring(cleaned + origin, hole=True), source))
    edges = tuple(
        RoomEdge(np.array((ring[k], ring[(k + 1) % len(ring)])) + origin, KINDS[code % DRAWN_OPENING])
        for k, code in enumerate(codes.tolist())
        if code != WALL
    )
    area = signed_area(outline)
    return FoundRoom(Outline(outline, area, stroke), tuple(obstacles), edges, "walls")


def _bounding_strokes(faces: Sequence[Face], strokes: Sequence[Stroke], lines: Segments) -> list[Stroke]:
    """Return for each face the stroke that its longest edge lies on."""
    middles = np.array([_middle_of_longest(face.rings[0]) for face in faces]).reshape(-1, 2)
    drawn = np.flatnonzero(lines.stroke >= 0)
    k, i = lines_near(middles, lines.a[drawn], lines.b[drawn], 10 * GRID)
    owner = dict(zip(k.tolist(), lines.stroke[drawn[i]].tolist(), strict=True))
    return [strokes[owner.get(f, 0)] for f in range(len(faces))]


def _middle_of_longest(ring: np.ndarray) -> np.ndarray:
    long = int(np.argmax(np.hypot(*np.diff(ring, axis=0, append=ring[:1]).T)))
    return np.asarray((ring[long] + ring[(long + 1) % len(ring)]) / 2)


def _reading_order(room: FoundRoom) -> tuple[float, float]:
    x, y = room.outline.centre
    return (-round(y, 1), x)
