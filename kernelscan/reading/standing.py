"""What stands in rooms and was drawn in loose lines: columns, and walls that stand free in an outlined room.

Problem
    A column is often four lines or two arcs and no closed outline; a screen is two faces and two ends. What is not
    closed would vanish, and the kernel would look through it.
Method
    The loose lines of obstacle layers, their near misses joined, are noded together with the outlines of the rooms that
    they lie in; a face of which half the edge or more was drawn as an obstacle is one. So a column of three lines
    against a wall closes too, and a line across a room makes nothing solid. Of the lines of wall layers, in outlined
    rooms, only those count that lie within a room and off its outline, so that the walls around it make nothing.
Left over
    What lies in a room and closes nothing is a problem, one for each room and layer. Wall lines nearer to the outline
    than a wall is thick go with the walls around the room and are none.
"""

from collections import defaultdict
from collections.abc import Mapping, Sequence

import numpy as np

from kernelscan.geometry.rings import signed_area
from kernelscan.geometry.shapes import (
    Patch,
    are_simple,
    faces_between,
    inner_points,
    lines_near,
    overlap_areas,
    rings_around,
    union,
)
from kernelscan.plan import Problem, Source
from kernelscan.reading.closed_rooms import FoundRoom
from kernelscan.reading.corners import clean_ring
from kernelscan.reading.faces import short_side
from kernelscan.reading.gaps import connectors
from kernelscan.reading.layers import LayerRole
from kernelscan.reading.outlines import Outline
from kernelscan.reading.segments import WALL, Segments, are_leaves, segments_of, swings_of
from kernelscan.reading.strokes import Stroke
from kernelscan.tolerances import Tolerances

__all__ = ["distinct", "standing_columns", "standing_walls"]

GRID = 1e-5
CORNER = 1.5
STRAIGHT = 1e-3
WIDEST = 2.5
"""Lines of obstacle layers that enclose more than this width, in metres, are a grid of axes rather than a column."""
LEAST_DRAWN = 0.499
COVERED = 0.98
ROOM = WALL + 1
"""The code of a piece of a room's outline, beside the pieces that were drawn."""
FILLED_KINDS = frozenset({"HATCH", "MPOLYGON", "SOLID", "TRACE"})
SYMBOLS = frozenset({"furniture", "annotation", "opening", "stairs", "other"})

Standing = tuple[list[Outline], list[Problem]]


def standing_columns(
    rooms: Sequence[FoundRoom],
    strokes: Sequence[Stroke],
    closed: Sequence[Outline],
    roles: Mapping[str, LayerRole],
    metres: float,
    tolerances: Tolerances,
) -> Standing:
    """Return what the loose lines of obstacle layers enclose in rooms, and a problem for those that enclose nothing.

    Parameters
    ----------
    rooms
        In the order of their numbers; in metres.
    strokes
        In drawing units.
    closed
        The obstacles that are drawn closed; lines on or in these are no concern.
    roles
        The role of each layer.
    metres
        How many metres a drawing unit is.
    tolerances
        Snap.
    """
    loose = [
        s for s in strokes if roles[s.layer].role == "obstacle" and not s.is_ring(tolerances.snap / metres)
    ]
    if not loose or not rooms:
        return [], []
    origin = _origin(rooms)
    rings = [room.outline.ring - origin for room in rooms]
    pieces = segments_of(loose, [WALL] * len(loose), metres, origin)
    around = _edges(rings, pieces)
    patches = _faces(pieces.plus(*around, np.full(len(around[0]), ROOM)), tolerances.snap)
    solid: list[Patch] = []
    wide: list[Patch] = []
    drawn = _drawn_parts(patches, pieces).tolist()
    for patch, where, part in zip(patches, _holders(patches, rings), drawn, strict=True):
        if where is not None and part >= LEAST_DRAWN and _short_side(patch) > tolerances.snap:
            half = _net_area(patch) >= abs(signed_area(rings[where])) / 2
            (wide if half or _short_side(patch) > WIDEST else solid).append(patch)
    found = _outlines(solid, pieces, loose, origin, tolerances)
    known = [
        np.asarray(ring) for ring in [o.ring - origin for o in closed] + [o.ring - origin for o in found]
    ] + [np.asarray(patch.outline) for patch in wide]
    held = [o.ring - origin for room in rooms for o in room.obstacles]
    left = _left_over(pieces, rings, [*known, *held], tolerances.snap)
    problems = _open(left, pieces, loose, origin) + _wide(wide, pieces, loose, origin)
    return found, problems


def standing_walls(
    rooms: Sequence[FoundRoom],
    strokes: Sequence[Stroke],
    roles: Mapping[str, LayerRole],
    metres: float,
    tolerances: Tolerances,
) -> Standing:
    """Return what the lines of wall layers enclose within outlined rooms, and a problem for those that do not close.

    The parameters are those of :func:`standing_columns`.
    """
    walls = [
        s for s in strokes if roles[s.layer].role == "wall" and _may_be_wall(s, roles, metres, tolerances)
    ]
    if not walls or not rooms:
        return [], []
    origin = _origin(rooms)
    rings = [room.outline.ring - origin for room in rooms]
    whole = segments_of(walls, [WALL] * len(walls), metres, origin)
    turning = [s for s in strokes if s.kind == "ARC" and roles[s.layer].role in {"wall", "opening"}]
    swings = [swing for _, swing in swings_of(turning, metres, origin)]
    swung = [k for k, _ in swings_of(walls, metres, origin)]
    pieces = whole.where(~np.isin(whole.stroke, swung) & ~are_leaves(whole, swings))
    inside = _left_over(pieces, rings, [], tolerances.snap)
    within = pieces.where(np.unique([k for k, _ in inside]).astype(np.int64))
    patches = _faces(within, tolerances.snap)
    small = [
        patch
        for patch, where in zip(patches, _holders(patches, rings), strict=True)
        if where is not None and _gross_area(patch) < abs(signed_area(rings[where])) / 2
    ]
    found = _outlines(small, within, walls, origin, tolerances)
    known = [np.asarray(patch.outline) for patch in patches] + [outline.ring - origin for outline in found]
    left = _left_over(within, rings, known, tolerances.thickest_wall, tolerances.snap)
    return found, _open(left, within, walls, origin)


def distinct(outlines: Sequence[Outline], others: Sequence[np.ndarray] = ()) -> list[Outline]:
    """Return the outlines without those that lie in an earlier one, or in one of the other rings.

    A column is often drawn twice, as a line around it and as a filling.
    """
    if not outlines:
        return []
    rings = [outline.ring for outline in outlines]
    first, second, shared = overlap_areas(rings, rings)
    covered: set[int] = set()
    for i, j, common in zip(first.tolist(), second.tolist(), shared.tolist(), strict=True):
        small, large = (i, j) if outlines[i].area < outlines[j].area else (j, i)
        if common >= COVERED * outlines[small].area and large not in covered:
            covered.add(small)
    if len(others):
        i, _, shared = overlap_areas(rings, others)
        full = shared >= COVERED * np.array([outline.area for outline in outlines])[i]
        covered |= set(i[full].tolist())
    return [outline for k, outline in enumerate(outlines) if k not in covered]


def _origin(rooms: Sequence[FoundRoom]) -> np.ndarray:
    """Return whole metres amid the rooms, to reckon from."""
    return np.asarray(np.rint(np.median([room.outline.ring[0] for room in rooms], axis=0)))


def _may_be_wall(
    stroke: Stroke, roles: Mapping[str, LayerRole], metres: float, tolerances: Tolerances
) -> bool:
    """Whether a stroke of a wall layer is a wall: no piece of a door's or a table's block, no broad filling."""
    if stroke.blocks and roles[stroke.blocks].role in SYMBOLS:
        return False
    if stroke.kind not in FILLED_KINDS:
        return True
    ring = stroke.points * metres
    steps = np.hypot(*np.diff(ring, axis=0, append=ring[:1]).T)
    return short_side(abs(signed_area(ring)), float(steps.sum())) <= tolerances.thickest_wall


def _edges(rings: Sequence[np.ndarray], pieces: Segments) -> tuple[np.ndarray, np.ndarray]:
    """Return the edges of the rings that hold a piece, or an end of one: starts and ends."""
    points = np.concatenate((pieces.a, pieces.b, (pieces.a + pieces.b) / 2))
    touched = sorted(set(rings_around(rings, points)[1].tolist()))
    if not touched:
        return np.empty((0, 2)), np.empty((0, 2))
    return _ring_edges([rings[k] for k in touched])


def _faces(lines: Segments, snap: float) -> list[Patch]:
    """Return the faces between lines whose ends may miss each other by the snap distance."""
    if not len(lines):
        return []
    starts, ends = connectors(lines, CORNER * snap)
    joined = lines.plus(starts, ends, np.full(len(starts), WALL))
    return faces_between(joined.a, joined.b, GRID)


def _holders(patches: Sequence[Patch], rings: Sequence[np.ndarray]) -> list[int | None]:
    """Return for each patch the smallest ring that holds it, or ``None``."""
    home: list[int | None] = [None] * len(patches)
    if not patches:
        return home
    points = inner_points([np.asarray(patch.outline) for patch in patches])
    for k, i in zip(*(pairs.tolist() for pairs in rings_around(rings, points)), strict=True):
        now = home[k]
        if now is None or abs(signed_area(rings[i])) < abs(signed_area(rings[now])):
            home[k] = i
    return home


def _drawn_parts(patches: Sequence[Patch], pieces: Segments) -> np.ndarray:
    """Return which part of each patch's edge was drawn as an obstacle."""
    if not patches:
        return np.empty(0)
    rings = [np.asarray(patch.outline) for patch in patches]
    starts, ends = _ring_edges(rings)
    owner = np.repeat(np.arange(len(rings)), [len(ring) for ring in rings])
    length = np.hypot(*(ends - starts).T)
    near = np.unique(lines_near((starts + ends) / 2, pieces.a, pieces.b, 3 * GRID)[0])
    drawn = np.bincount(owner[near], length[near], len(rings))
    return np.asarray(drawn / np.bincount(owner, length, len(rings)))


def _ring_edges(rings: Sequence[np.ndarray]) -> tuple[np.ndarray, np.ndarray]:
    """Return the starts and the ends of the edges of rings, ring by ring."""
    return np.concatenate(rings), np.concatenate([np.roll(ring, -1, axis=0) for ring in rings])


def _gross_area(patch: Patch) -> float:
    return abs(signed_area(np.asarray(patch.outline)))


def _net_area(patch: Patch) -> float:
    return _gross_area(patch) - sum(abs(signed_area(np.asarray(hole))) for hole in patch.holes)


def _short_side(patch: Patch) -> float:
    ring = np.asarray(patch.outline)
    return short_side(_gross_area(patch), float(np.hypot(*np.diff(ring, axis=0, append=ring[:1]).T).sum()))


def _outlines(
    patches: Sequence[Patch],
    pieces: Segments,
    strokes: Sequence[Stroke],
    origin: np.ndarray,
    tolerances: Tolerances,
) -> list[Outline]:
    """Return what the patches cover together as outlines, without holes, each with a stroke that bounds it."""
    raw = [np.asarray(whole.outline) for whole in union(patches)] if patches else []
    found = []
    for ring, stroke in zip(raw, _nearest_strokes(raw, pieces), strict=True):
        cleaned, _ = clean_ring(ring, np.zeros(len(ring), dtype=np.int64), CORNER * tolerances.snap, STRAIGHT)
        sound = len(cleaned) > 2 and bool(are_simple([cleaned])[0])
        outline = cleaned if sound else ring
        found.append(Outline(outline + origin, abs(signed_area(outline)), strokes[stroke]))
    return found


def _nearest_strokes(rings: Sequence[np.ndarray], pieces: Segments) -> list[int]:
    """Return for each ring the first stroke that an edge of it lies on."""
    if not rings:
        return []
    starts, ends = _ring_edges(rings)
    owner = np.repeat(np.arange(len(rings)), [len(ring) for ring in rings])
    k, i = lines_near((starts + ends) / 2, pieces.a, pieces.b, 3 * GRID)
    first = np.full(len(rings), int(pieces.stroke.max()))
    np.minimum.at(first, owner[k], pieces.stroke[i])
    return [int(stroke) for stroke in first]


def _left_over(
    pieces: Segments,
    rings: Sequence[np.ndarray],
    known: Sequence[np.ndarray],
    off: float,
    snap: float | None = None,
) -> list[tuple[int, int]]:
    """Return each piece, and the room, whose middle is in a room, off its outline, and not on or in what is known."""
    middles = (pieces.a + pieces.b) / 2
    k, room = rings_around(rings, middles)
    starts, ends = _ring_edges(rings)
    out = set(lines_near(middles, starts, ends, off)[0].tolist())
    if known:
        starts, ends = _ring_edges(known)
        out |= set(lines_near(middles, starts, ends, 2 * (off if snap is None else snap))[0].tolist())
        out |= set(rings_around(known, middles)[0].tolist())
    return [(i, r) for i, r in zip(k.tolist(), room.tolist(), strict=True) if i not in out]


def _open(
    left: Sequence[tuple[int, int]], pieces: Segments, strokes: Sequence[Stroke], origin: np.ndarray
) -> list[Problem]:
    """Return a problem for each room and layer in which lines are left that close nothing."""
    groups: dict[tuple[int, str], dict[int, int]] = defaultdict(dict)
    for piece, room in left:
        stroke = int(pieces.stroke[piece])
        groups[room, strokes[stroke].layer].setdefault(stroke, piece)
    problems = []
    for (room, layer), its in sorted(groups.items()):
        first, piece = next(iter(sorted(its.items())))
        x, y = ((pieces.a[piece] + pieces.b[piece]) / 2 + origin).tolist()
        lines = "1 line" if len(its) == 1 else f"{len(its)} lines"
        fault = "does not close and hides nothing" if len(its) == 1 else "do not close and hide nothing"
        text = f"{lines} on layer {layer} inside R{room + 1:03d} {fault}; draw a closed outline"
        problems.append(Problem("open-obstacle", text, (x, y), Source(layer, strokes[first].handle)))
    return problems


def _wide(
    patches: Sequence[Patch], pieces: Segments, strokes: Sequence[Stroke], origin: np.ndarray
) -> list[Problem]:
    """Return a problem for each layer whose lines enclose what is too wide for a column."""
    groups: dict[str, list[tuple[Patch, Stroke]]] = defaultdict(list)
    rings = [np.asarray(patch.outline) for patch in patches]
    for patch, stroke in zip(patches, _nearest_strokes(rings, pieces), strict=True):
        groups[strokes[stroke].layer].append((patch, strokes[stroke]))
    problems = []
    for layer, its in sorted(groups.items()):
        patch, first = max(its, key=lambda pair: _gross_area(pair[0]))
        x, y = (inner_points([np.asarray(patch.outline)])[0] + origin).tolist()
        cells = "an area" if len(its) == 1 else f"{len(its)} areas"
        text = (
            f"lines on layer {layer} enclose {cells} of up to {_gross_area(patch):.2f} m2, too much for a column; "
            "left out, but a closed outline would block sight"
        )
        problems.append(Problem("wide-obstacle", text, (x, y), Source(layer, first.handle)))
    return problems
