"""Where doors and windows are drawn in the walls of rooms: which stretch of which edge of an outline each occupies.

Problem
    An outline runs along the inner faces of a room's walls and past its doors and windows, which are drawn in the
    wall behind it: as lines, rectangles, blocks, leaves and swing arcs. Nothing may be mounted there.
Method
    A straight piece of a drawn opening belongs to an edge if it runs along it, parallel or on along a curved wall,
    no farther behind it than a wall is thick; it shuts what it covers of the edge. A swing arc counts as the closed
    door (:mod:`kernelscan.reading.opening_pieces`). What overlaps becomes one opening, and its ends go to the jambs
    drawn near by. Both rooms that share a wall get its openings. The outline itself stays as it is.
No openings
    A leaf or a jamb, which meets a wall at an angle, is no opening of the wall that it runs beside; nor is the short
    side of a drawn opening whose long side runs along another wall, nor what another room lies in front of.
Cost
    Searches in trees of the edges: O(n log n) in all that is drawn.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import groupby
from math import radians, sin

import numpy as np

from kernelscan.geometry.rings import Ring
from kernelscan.geometry.shapes import lines_near, neighbouring_lines, rings_around
from kernelscan.plan import Opening, WallRef
from kernelscan.plan.room import OpeningKind
from kernelscan.reading.jambs import Jambs, jambs_of
from kernelscan.reading.layers import LayerRole
from kernelscan.reading.opening_pieces import NO_SWING, Pieces, opening_pieces, opening_strokes
from kernelscan.reading.opening_spans import NARROWEST, Span, merged_spans
from kernelscan.reading.segments import DOOR, LARGEST_LEAF, SMALLEST_LEAF, WINDOW
from kernelscan.reading.strokes import Stroke
from kernelscan.reading.wall_edges import WallEdges, wall_edges
from kernelscan.tolerances import Tolerances

__all__ = ["drawn_openings", "with_drawn"]

INTO_ROOM = 0.15
"""Openings may be drawn this far into a room: some outlines run along the middle of the walls."""

LONG_SIDE = 0.4
"""Sides of a drawn opening that are shorter than this part of its longest side along any wall are its ends."""

TOUCH = 0.05
"""An end of a leaf or jamb lies this near to the face of its wall."""

STEEP = sin(radians(20))
"""Sine of the least angle between a wall and a leaf or jamb that starts at it."""


@dataclass(frozen=True, slots=True, eq=False)
class _Covers:
    """Which piece covers which edge, from where to where along it, and how far behind it in the middle of that."""

    piece: np.ndarray
    edge: np.ndarray
    low: np.ndarray
    high: np.ndarray
    depth: np.ndarray

    def where(self, chosen: np.ndarray) -> "_Covers":
        return _Covers(
            self.piece[chosen], self.edge[chosen], self.low[chosen], self.high[chosen], self.depth[chosen]
        )


def drawn_openings(
    rings: Sequence[Ring],
    strokes: Sequence[Stroke],
    roles: Mapping[str, LayerRole],
    metres: float,
    tolerances: Tolerances,
) -> list[tuple[Opening, ...]]:
    """Return for each outline the doors and windows drawn in its walls.

    Parameters
    ----------
    rings
        The rooms' outlines, counter-clockwise, in metres.
    strokes
        All strokes of the drawing, in drawing units.
    roles
        The role of each layer and block: openings are sought on opening layers and blocks, jambs on wall layers.
    metres
        How many metres a drawing unit is.
    tolerances
        The thickest wall, the snap distance, and the turn below which a wall goes on smoothly.

    Returns
    -------
    list of tuple of Opening
        In the order of the edges; those of one edge do not overlap. A curved wall has one on each of its edges.
    """
    drawn = opening_strokes(strokes, roles)
    if not drawn or not rings:
        return [()] * len(rings)
    origin = np.rint(rings[0][0])
    edges, floors = wall_edges(rings, origin, tolerances.smooth), [ring - origin for ring in rings]
    pieces = opening_pieces(drawn, metres, origin, tolerances.smooth)
    pieces = _without_arcs(pieces, edges, floors, tolerances)
    jambs = jambs_of(strokes, roles, metres, origin, tolerances)
    pieces = _without_leaves(pieces, edges, jambs, tolerances)
    covers = _without_ends(_covers(pieces, edges, floors, tolerances), pieces)
    spans = _spans(covers, pieces, edges, tolerances.snap)
    return _openings(_to_jambs(spans, jambs, edges), edges, len(rings))


def with_drawn(
    known: Sequence[Opening], drawn: Sequence[Opening], ring: Ring, thickest_wall: float
) -> tuple[Opening, ...]:
    """Return a room's openings: those known as whole edges, and those drawn in its other walls.

    The short edges beside a known opening are its jambs, in which nothing opens.
    """
    whole = {opening.wall.edge for opening in known}
    length = np.hypot(*(np.roll(ring, -1, axis=0) - ring).T)
    beside = {(edge + step) % len(ring) for edge in whole for step in (-1, 1)}
    shut = whole | {edge for edge in beside if length[edge] <= thickest_wall}
    return tuple(
        sorted((*known, *(o for o in drawn if o.wall.edge not in shut)), key=lambda o: (o.wall, o.span))
    )


def _without_arcs(
    pieces: Pieces, edges: WallEdges, floors: Sequence[np.ndarray], tolerances: Tolerances
) -> Pieces:
    """Leave out the arcs whose closed door lies in a wall; others may be the glass of a curved wall."""
    doors = pieces.where(pieces.closed)
    fits = np.zeros(doors.swing.max(initial=NO_SWING) + 2, dtype=bool)  # the last for NO_SWING
    fits[doors.swing[_covers(doors, edges, floors, tolerances).piece]] = True
    return pieces.where(pieces.closed | ~fits[pieces.swing])


def _without_leaves(pieces: Pieces, edges: WallEdges, jambs: Jambs, tolerances: Tolerances) -> Pieces:
    """Leave out leaves and jambs, which start at the face of a wall, and not at its end, at an angle.

    In the place of a leaf comes the closed door, if a jamb says where that is.
    """
    points = np.concatenate((pieces.a, pieces.b))
    far = np.concatenate((pieces.b, pieces.a))
    end, i = lines_near(points, edges.a, edges.b, TOUCH)
    k, place = end % max(len(pieces), 1), edges.along(i, points[end])
    out, long = edges.outward(i, far[end] - points[end]), pieces.length[k]
    midway = ((place > TOUCH) | ~edges.corner[i, 0]) & (
        (place < edges.length[i] - TOUCH) | ~edges.corner[i, 1]
    )
    into = midway & (out < -STEEP * long) & (long > INTO_ROOM)
    through = midway & (out > STEEP * long) & (long <= tolerances.thickest_wall)
    starts = np.zeros((2, len(pieces)), dtype=bool)
    starts.reshape(-1)[end[into]] = True
    leaf, jamb = starts[0] != starts[1], np.zeros(len(pieces), dtype=bool)
    jamb[k[through]] = True
    lone = into & leaf[k] & (pieces.swing[k] == NO_SWING) & (pieces.code[k] == DOOR)
    lone &= (long >= SMALLEST_LEAF) & (long <= LARGEST_LEAF)
    doors = _shut(pieces.where(k[lone]), i[lone], place[lone], edges, jambs)
    return pieces.where(~leaf & ~jamb).plus(doors)


def _shut(leaves: Pieces, i: np.ndarray, hinge: np.ndarray, edges: WallEdges, jambs: Jambs) -> Pieces:
    """Return the closed doors of leaves hinged at places along the edges ``i``, where a jamb is a leaf's length off."""
    tips = np.stack((hinge - leaves.length, hinge + leaves.length))
    found = np.stack([jambs.nearest(i, tip, edges) for tip in tips])
    off = np.where(np.isnan(found), np.inf, np.abs(found - tips))
    side = (off[1] < off[0]).astype(int)
    known = np.flatnonzero(np.isfinite(off.min(axis=0, initial=np.inf)))
    tip = found[side[known], known]
    flat = np.zeros(len(known))
    return leaves.where(known).shut(
        edges.points(i[known], hinge[known], flat), edges.points(i[known], tip, flat)
    )


def _covers(
    pieces: Pieces, edges: WallEdges, floors: Sequence[np.ndarray], tolerances: Tolerances
) -> _Covers:
    """Return which pieces run along which edges, within the thickness of their walls."""
    k, i = neighbouring_lines(pieces.a, pieces.b, (edges.a, edges.b), tolerances.thickest_wall)
    step, way = (pieces.b - pieces.a)[k], edges.way[i]
    turn = np.arcsin(
        np.minimum(np.abs(step[:, 0] * way[:, 1] - step[:, 1] * way[:, 0]) / pieces.length[k], 1.0)
    )
    straight = turn <= np.where(edges.curved[i], tolerances.smooth, pieces.slack[k])
    k, i = k[straight], i[straight]
    p, q = (edges.along(i, points[k]) for points in (pieces.a, pieces.b))
    deep, deeper = (edges.behind(i, points[k]) for points in (pieces.a, pieces.b))
    low, high = np.maximum(np.minimum(p, q), 0.0), np.minimum(np.maximum(p, q), edges.length[i])
    slope = (deeper - deep) / (q - p)  # never 0: what stands across an edge is left out above
    at_low, at_high = deep + (low - p) * slope, deep + (high - p) * slope
    good = high - low > np.minimum(tolerances.snap, edges.length[i] / 2)
    good &= np.minimum(at_low, at_high) >= -INTO_ROOM
    covers = _Covers(k, i, low, high, (at_low + at_high) / 2).where(good)
    return _uncovered(covers, edges, floors)


def _uncovered(covers: _Covers, edges: WallEdges, floors: Sequence[np.ndarray]) -> _Covers:
    """Keep what no room's floor lies in front of, or under: there is nothing but wall from the edge to the piece."""
    i, middle = covers.edge, (covers.low + covers.high) / 2
    points = np.concatenate([edges.points(i, middle, covers.depth * share) for share in (0.5, 1.0)])
    inside = np.unique(rings_around(floors, points)[0])
    near = lines_near(points[inside], edges.a, edges.b, INTO_ROOM)[0]
    deep = np.zeros(2 * len(i), dtype=bool)
    deep[np.delete(inside, near)] = True
    return covers.where(~(deep[: len(i)] | deep[len(i) :]))


def _without_ends(covers: _Covers, pieces: Pieces) -> _Covers:
    """Leave out the short sides of drawn openings, by what runs along any wall."""
    longest = np.zeros(pieces.stroke.max(initial=-1) + 1)
    np.maximum.at(longest, pieces.stroke[covers.piece], pieces.run[covers.piece])
    return covers.where(pieces.run[covers.piece] >= LONG_SIDE * longest[pieces.stroke[covers.piece]])


def _spans(covers: _Covers, pieces: Pieces, edges: WallEdges, snap: float) -> list[tuple[int, Span]]:
    """Return each edge's openings, one by one; those narrower than any are kept where they go on round a joint."""
    order = np.lexsort((covers.low, covers.edge))
    rows = zip(
        covers.edge[order].tolist(),
        covers.low[order].tolist(),
        covers.high[order].tolist(),
        pieces.code[covers.piece[order]].tolist(),
        strict=True,
    )
    found: dict[int, list[Span]] = {}
    for edge, group in groupby(rows, key=lambda row: row[0]):
        length = float(edges.length[edge])
        found[edge] = merged_spans([(low, high, code) for _, low, high, code in group], length, snap)
    return [
        (edge, span) for edge, spans in found.items() for span in spans if _is_wide(edge, span, found, edges)
    ]


def _is_wide(edge: int, span: Span, found: Mapping[int, Sequence[Span]], edges: WallEdges) -> bool:
    """Whether an opening is as wide as any, or goes on into the next edge."""
    if span[1] - span[0] >= NARROWEST:
        return True
    after, before = int(edges.after[edge]), int(edges.before[edge])
    goes_on = span[1] == edges.length[edge] and any(other[0] == 0 for other in found.get(after, ()))
    comes_from = span[0] == 0 and any(other[1] == edges.length[before] for other in found.get(before, ()))
    return goes_on or comes_from


def _to_jambs(spans: Sequence[tuple[int, Span]], jambs: Jambs, edges: WallEdges) -> list[tuple[int, Span]]:
    """Move each end that lies near a jamb, and not at the end of its edge, to that jamb."""
    edge = np.repeat(np.array([edge for edge, _ in spans], dtype=int), 2)
    place = np.array([at for _, span in spans for at in span[:2]])
    jamb = jambs.nearest(edge, place, edges)
    stays = np.isnan(jamb) | (place <= 0) | (place >= edges.length[edge])
    moved = np.where(stays, place, jamb).reshape(-1, 2).tolist()
    return [
        (edge, (low, high, span[2]) if low < high else span)
        for (edge, span), (low, high) in zip(spans, moved, strict=True)
    ]


def _openings(spans: Sequence[tuple[int, Span]], edges: WallEdges, rooms: int) -> list[tuple[Opening, ...]]:
    kinds: dict[int, OpeningKind] = {DOOR: "door", WINDOW: "window"}
    found: list[list[Opening]] = [[] for _ in range(rooms)]
    for edge, (low, high, code) in spans:
        length, wall = float(edges.length[edge]), WallRef(0, int(edges.number[edge]))
        found[int(edges.ring[edge])].append(
            Opening(wall, kinds[code], high - low, (low / length, high / length))
        )
    return [tuple(openings) for openings in found]
