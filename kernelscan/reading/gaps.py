"""Gaps in walls: where a wall stops and goes on, and what stands in between.

Problem
    Drawn walls stop at doors and windows. A room closes only if each such gap is closed by a straight threshold,
    and must not be closed where the wall merely makes way for a niche, a corridor or the next house.
Method
    Wall pieces that lie on one line (the same carrier: direction and offset within the tolerances) are sorted along
    it; between one piece and the next is a gap. Both faces of a double wall have their own carrier and so their own
    gap. A gap is closed if no other line crosses it, and if it is no wider than a door, or a door or window drawn in
    it covers most of its width. A wall end that nothing continues, a free line end or the narrow head of a double
    wall, is closed against the wall that it faces, no farther off than a door is wide.
    What proves to be a niche is undone afterwards, when the faces are known (:mod:`kernelscan.reading.faces`).
Cost
    Sorting, and one search per gap in a tree of the lines: O(n log n).
"""

from dataclasses import dataclass

import numpy as np

from kernelscan.geometry.shapes import lines_near, meeting_lines
from kernelscan.reading.segments import DOOR, GAP, WINDOW, Segments, Swing
from kernelscan.tolerances import Tolerances

__all__ = ["Gaps", "closing_lines", "connectors", "wall_gaps"]

SAME_DIRECTION = 2e-3
SHORTEST_PIECE = 0.02
TOUCHING = 1e-9
LEAST_SLENDER = 1.5
"""A wall is longer than it is thick; what is not is a column, and has no head."""

STEEP = 0.5
"""The sine of the smallest angle at which a wall stops a threshold."""

FREE_ENDS = 1.25
"""Between two free wall ends in one line a bare gap may be this many times as wide as elsewhere: a double door."""

DOUBTFUL = 2.0
"""A bare gap up to this many times as wide as a door is reported; beyond, walls that end are just walls that end."""

COVERED = 0.7
"""This part of a wide gap must be covered by the door or window drawn in it."""


@dataclass(frozen=True, slots=True, eq=False)
class Gaps:
    """Straight thresholds: ``a`` and ``b`` are their ends, ``(n, 2)``; ``code`` is DOOR, WINDOW or GAP.

    ``wide`` holds the gaps between free wall ends that were too wide to close, ``(m, 2, 2)``.
    """

    a: np.ndarray
    b: np.ndarray
    code: np.ndarray
    wide: np.ndarray


def connectors(walls: Segments, snap: float) -> tuple[np.ndarray, np.ndarray]:
    """Return short lines from each end that nearly meets another line to the nearest point of the nearest one."""
    points = np.concatenate((walls.a, walls.b))
    owner = np.concatenate((np.arange(len(walls)),) * 2)
    k, i = lines_near(points, walls.a, walls.b, snap)
    other = owner[k] != i
    k, i = k[other], i[other]
    foot = _foot(points[k], walls.a[i], walls.b[i])
    apart = np.hypot(*(foot - points[k]).T)
    near = np.flatnonzero(apart > TOUCHING)
    near = near[np.lexsort((apart[near], k[near]))]
    nearest = near[np.unique(k[near], return_index=True)[1]]
    return points[k[nearest]], foot[nearest]


def _foot(points: np.ndarray, a: np.ndarray, b: np.ndarray) -> np.ndarray:
    along = b - a
    share = ((points - a) * along).sum(axis=1) / (along * along).sum(axis=1)
    return np.asarray(a + np.clip(share, 0.0, 1.0)[:, None] * along)


def closing_lines(openings: Segments, walls: Segments, tolerances: Tolerances) -> np.ndarray:
    """Return which lines of openings close something themselves: those with both ends on a wall.

    The leaf of an open door and the sides of a garage door drawn open touch a wall with one end at most.
    """
    touches = np.zeros((2, len(openings)), dtype=bool)
    for side, ends in enumerate((openings.a, openings.b)):
        if len(ends) and len(walls):
            touches[side, lines_near(ends, walls.a, walls.b, 2 * tolerances.snap)[0]] = True
    return np.asarray(touches.all(axis=0) & (openings.length <= tolerances.widest_opening))


def wall_gaps(walls: Segments, openings: Segments, swings: list[Swing], tolerances: Tolerances) -> Gaps:
    """Return the thresholds that close the gaps in walls.

    Parameters
    ----------
    walls
        What bounds rooms.
    openings
        Lines of doors and windows.
    swings
        The arcs of doors.
    tolerances
        The snap distance, the widest bare gap and the widest opening.
    """
    a, b = _carrier_gaps(walls, tolerances)
    if len(a):
        a, b = _uncrossed(a, b, walls)
    tips, outward = _wall_ends(walls, tolerances)
    code = _what_stands_there(a, b, openings, swings, tolerances)
    free = _near(a, tips, tolerances) & _near(b, tips, tolerances)
    limit = tolerances.door_gap * np.where(free, FREE_ENDS, 1.0)
    kept = (code != GAP) | (np.hypot(*(b - a).T) <= limit * (1 + 1e-6))
    doubtful = np.hypot(*(b - a).T) <= DOUBTFUL * tolerances.door_gap
    wide = np.stack((a, b), axis=1)[free & ~kept & doubtful]
    a, b, code = a[kept], b[kept], code[kept]
    unmet = ~_near(tips, np.concatenate((a, b)), tolerances)
    ea, eb = _ends_facing_walls(walls, tips[unmet], outward[unmet], tolerances)
    ends_code = _what_stands_there(ea, eb, openings, swings, tolerances)
    kept = (ends_code != GAP) | (np.hypot(*(eb - ea).T) <= tolerances.door_gap * (1 + 1e-6))
    both = zip((a, b, code), (ea, eb, ends_code), strict=True)
    start, end, kind = (np.concatenate((first, second[kept])) for first, second in both)
    return Gaps(start, end, kind, wide)


def _near(points: np.ndarray, others: np.ndarray, tolerances: Tolerances) -> np.ndarray:
    """Return which of the points are one with any of the others."""
    hit = np.zeros(len(points), dtype=bool)
    if len(points) and len(others):
        hit[lines_near(points, others, others, tolerances.snap)[0]] = True
    return hit


def _carrier_gaps(walls: Segments, tolerances: Tolerances) -> tuple[np.ndarray, np.ndarray]:
    """Return the gaps between each piece of a carrier and the next."""
    long = np.flatnonzero(walls.length > SHORTEST_PIECE)
    starts: list[np.ndarray] = []
    ends: list[np.ndarray] = []
    a, b = walls.a[long], walls.b[long]
    angle = np.arctan2(*(b - a).T[::-1]) % np.pi
    for group in _runs(angle, SAME_DIRECTION, wrap=np.pi):
        ends_of = np.stack((a[group], b[group]))
        direction = _mean_direction(ends_of)
        normal = np.array((-direction[1], direction[0]))
        offset = ends_of.mean(axis=0) @ normal
        for row in _runs(offset, tolerances.snap):
            _gaps_of_row(ends_of[:, row], direction, tolerances, starts, ends)
    return np.array(starts).reshape(-1, 2), np.array(ends).reshape(-1, 2)


def _gaps_of_row(
    row: np.ndarray,
    direction: np.ndarray,
    tolerances: Tolerances,
    starts: list[np.ndarray],
    ends: list[np.ndarray],
) -> None:
    if row.shape[1] < 2:
        return
    place = row @ direction
    turned = place[0] > place[1]
    low, high = np.where(turned, place[1], place[0]), np.where(turned, place[0], place[1])
    order = np.argsort(low, kind="stable")
    reach = np.maximum.accumulate(high[order])
    gap = low[order][1:] - reach[:-1]
    for at in np.flatnonzero((gap > tolerances.snap) & (gap <= tolerances.widest_opening)).tolist():
        last = order[: at + 1][np.argmax(high[order[: at + 1]])]
        first = order[at + 1]
        starts.append(row[0 if turned[last] else 1, last])
        ends.append(row[1 if turned[first] else 0, first])


def _runs(values: np.ndarray, tolerance: float, wrap: float | None = None) -> list[np.ndarray]:
    """Return the indices of values that follow each other more closely than a tolerance, run by run."""
    if not len(values):
        return []
    order = np.argsort(values, kind="stable")
    runs = np.split(order, np.flatnonzero(np.diff(values[order]) > tolerance) + 1)
    if wrap is not None and len(runs) > 1 and values[runs[0][0]] + wrap - values[runs[-1][-1]] <= tolerance:
        runs[0] = np.concatenate((runs.pop(), runs[0]))
    return runs


def _mean_direction(ends: np.ndarray) -> np.ndarray:
    """Return the direction that pieces have on average, the long ones counting more, either way round."""
    steps = ends[1] - ends[0]
    longest = steps[np.argmax(np.hypot(*steps.T))]
    steps = np.where((steps @ longest)[:, None] < 0, -steps, steps)
    whole = steps.sum(axis=0)
    return np.asarray(whole / np.hypot(*whole))


def _uncrossed(a: np.ndarray, b: np.ndarray, walls: Segments) -> tuple[np.ndarray, np.ndarray]:
    """Keep the thresholds that no wall crosses; their own ends do not count."""
    inset = (b - a) * np.minimum(0.02 / np.maximum(np.hypot(*(b - a).T), 1e-12), 0.2)[:, None]
    k, _ = meeting_lines(a + inset, b - inset, (walls.a, walls.b))
    free = np.ones(len(a), dtype=bool)
    free[k] = False
    return a[free], b[free]


def _what_stands_there(
    a: np.ndarray, b: np.ndarray, openings: Segments, swings: list[Swing], tolerances: Tolerances
) -> np.ndarray:
    """Return for each gap what the openings drawn in it say that it is; GAP where they cover too little of it."""
    code = np.full(len(a), GAP)
    if not len(a):
        return code
    oa, ob, kinds = _barriers(openings, swings)
    if not len(oa):
        return code
    reach = tolerances.widest_opening / 2 + tolerances.thickest_wall
    gap_middle = (a + b) / 2
    k, i = lines_near(gap_middle, oa, ob, reach)
    width = np.hypot(*(b - a).T)
    along = (b - a) / width[:, None]
    normal = np.column_stack((-along[:, 1], along[:, 0]))
    p, q = (((end[i] - a[k]) * along[k]).sum(axis=1) for end in (oa, ob))
    off = np.maximum(*(np.abs(((end[i] - a[k]) * normal[k]).sum(axis=1)) for end in (oa, ob)))
    low = np.maximum(np.minimum(p, q), 0.0)
    high = np.minimum(np.maximum(p, q), width[k])
    good = (off <= tolerances.thickest_wall) & (high > low)
    for kind in (WINDOW, DOOR):
        these = good & (kinds[i] == kind)
        covered = _covered(k[these], low[these], high[these], len(a))
        code[covered >= COVERED * width] = kind
    return code


def _covered(owner: np.ndarray, low: np.ndarray, high: np.ndarray, count: int) -> np.ndarray:
    """Return for each owner how much its intervals cover together."""
    order = np.lexsort((low, owner))
    total = np.zeros(count)
    at = -1
    reach = 0.0
    for k, start, end in zip(owner[order].tolist(), low[order].tolist(), high[order].tolist(), strict=True):
        if k != at:
            at, reach = k, start
        if end > reach:
            total[k] += end - max(start, reach)
            reach = end
    return total


def _barriers(openings: Segments, swings: list[Swing]) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Return the openings' lines and, for each swing, the door as it stands when closed, on either side."""
    hinges = np.array([swing.hinge for swing in swings for _ in swing.ends]).reshape(-1, 2)
    tips = np.array([end for swing in swings for end in swing.ends]).reshape(-1, 2)
    doors = np.full(len(tips), DOOR)
    return (
        np.concatenate((openings.a, hinges)),
        np.concatenate((openings.b, tips)),
        np.concatenate((openings.code, doors)),
    )


def _ends_facing_walls(
    walls: Segments, tips: np.ndarray, outward: np.ndarray, tolerances: Tolerances
) -> tuple[np.ndarray, np.ndarray]:
    """Return the thresholds from wall ends to the first wall that each faces, if it stands steep enough to them."""
    if not len(tips):
        return tips, tips
    start, end = tips + outward * 2 * tolerances.snap, tips + outward * tolerances.widest_opening
    k, i = meeting_lines(start, end, (walls.a, walls.b))
    step, to = (walls.b - walls.a)[i], walls.a[i] - tips[k]
    cross = outward[k, 0] * step[:, 1] - outward[k, 1] * step[:, 0]
    steep = np.abs(cross) > STEEP * np.hypot(*step.T)
    reach = (to[:, 0] * step[:, 1] - to[:, 1] * step[:, 0]) / np.where(steep, cross, 1.0)
    reach = np.where(steep, reach, 0.0)
    order = np.lexsort((reach, k))
    first = order[np.unique(k[order], return_index=True)[1]]
    first = first[steep[first]]
    return tips[k[first]], tips[k[first]] + outward[k[first]] * reach[first][:, None]


def _wall_ends(walls: Segments, tolerances: Tolerances) -> tuple[np.ndarray, np.ndarray]:
    """Return the free ends of single walls and both corners of the heads of double walls, and where they point."""
    n = len(walls)
    points = np.concatenate((walls.a, walls.b))
    away = np.concatenate((walls.a - walls.b, walls.b - walls.a))
    length = np.hypot(*away.T)
    away = away / length[:, None]
    k, i = lines_near(points, walls.a, walls.b, tolerances.snap)
    other = k % n != i
    k, i = k[other], i[other]
    meets = np.bincount(k, minlength=2 * n)
    free = (meets == 0) & (length > tolerances.thickest_wall / 2)
    head = _heads(k, i, points, away, length, walls, tolerances)
    chosen = free | head
    return points[chosen], away[chosen]


def _heads(
    k: np.ndarray,
    i: np.ndarray,
    points: np.ndarray,
    away: np.ndarray,
    length: np.ndarray,
    walls: Segments,
    tolerances: Tolerances,
) -> np.ndarray:
    """Return which ends are a corner of a wall's head: a short cross line to the end of a parallel line beside."""
    n = len(walls)
    head = np.zeros(2 * n, dtype=bool)
    short = (walls.length <= tolerances.thickest_wall) & (walls.length > 2 * tolerances.snap)
    corner = short[i] & (np.abs((away[k] * (walls.b - walls.a)[i]).sum(axis=1)) < 0.2 * walls.length[i])
    corner &= length[k] > LEAST_SLENDER * walls.length[i]
    at_a = np.hypot(*(walls.a[i] - points[k]).T) <= tolerances.snap
    at_b = np.hypot(*(walls.b[i] - points[k]).T) <= tolerances.snap
    by_cap: dict[int, list[tuple[int, bool]]] = {}
    for end, cap, low, high in zip(k[corner], i[corner], at_a[corner], at_b[corner], strict=True):
        if low != high:
            by_cap.setdefault(int(cap), []).append((int(end), bool(low)))
    for ends in by_cap.values():
        lows, highs = [e for e, low in ends if low], [e for e, low in ends if not low]
        if len(lows) == len(highs) == 1 and float(away[lows[0]] @ away[highs[0]]) > 0.95:
            head[[lows[0], highs[0]]] = True
    return head
