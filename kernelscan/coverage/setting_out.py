"""Setting out: the two distances from wall faces that fix a point, and the nearest point that a fitter can measure.

A distance is measured at a right angle from the face of a wall, so the foot of the perpendicular has to lie on that
wall. Two walls fix a point when they are not parallel; at right angles they fix it best. Where no two walls offer
that, the point is set out from two corners by its distances to them, on its side of the line between them.

On a grid both distances are whole multiples of a step that is easy on a tape.
"""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from itertools import combinations, product
from math import ceil, floor, hypot
from typing import Literal

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.depth import line_depths
from kernelscan.coverage.surfaces import solid_spans
from kernelscan.plan import Room, WallRef

__all__ = ["Offset", "SettingOut", "on_grid", "point_from", "setting_out"]

Floats = npt.NDArray[np.float64]

SHORTEST_FACE = 0.3
"""Metres: a face shorter than this is no base for a tape."""
LEAST_ANGLE = 0.5
"""The sine of the least angle between two faces that fix a point well enough: 30 degrees."""


@dataclass(frozen=True, slots=True, eq=False)
class Offset:
    """One distance: from the face of a wall to its foot on it, or from the corner where that wall begins.

    Attributes
    ----------
    wall
        The wall whose face, or whose first corner, it is measured from.
    start
        ``(2,)``: where the tape begins, the foot of the perpendicular or the corner.
    distance
        In metres.
    """

    wall: WallRef
    start: Floats
    distance: float


@dataclass(frozen=True, slots=True, eq=False)
class SettingOut:
    """The two distances that fix a point, from two faces or from two corners.

    ``side`` is +1 or -1 where the point lies left or right of the way from the first corner to the second, and 0 for
    faces.
    """

    by: Literal["faces", "corners"]
    offsets: tuple[Offset, Offset]
    side: int = 0


def setting_out(room: Room, point: Floats, on: Sequence[WallRef] = ()) -> SettingOut:
    """Return the two distances that fix a point of the room, ``(2,)``.

    Of the pairs of faces that can be measured from, the nearest to a right angle is taken (to a degree or so), then
    the one with the shortest tapes. A point on one wall or on two is measured from these, whatever their angle.
    """
    offsets = list(_face_offsets(room, point, on))
    least = LEAST_ANGLE if len(on) < 2 else 0.0
    pairs = [
        (a, b)
        for a, b in combinations(offsets, 2)
        if set(on) <= {a.wall, b.wall} and _sine(room, a.wall, b.wall) >= least
    ]
    if pairs:
        best = min(pairs, key=lambda pair: (-round(_sine(room, pair[0].wall, pair[1].wall), 3), _tapes(pair)))
        return SettingOut("faces", best)
    first, second = _corner_offsets(room, point)
    side = 1 if _side(first.start, second.start, point) >= 0 else -1
    return SettingOut("corners", (first, second), side)


def point_from(room: Room, plan: SettingOut) -> Floats:
    """Walk back: return the point that two offsets fix, ``(2,)``, from the walls alone."""
    a, b = plan.offsets
    if plan.by == "faces":
        return _from_faces(room, (a.wall, b.wall), (a.distance, b.distance))
    p, q = (room.wall_ends(offset.wall)[0] for offset in plan.offsets)
    base = q - p
    along = (a.distance**2 - b.distance**2 + float(base @ base)) / (2 * float(base @ base))
    across = plan.side * max(0.0, a.distance**2 / float(base @ base) - along**2) ** 0.5
    return np.asarray(p + along * base + across * np.array([-base[1], base[0]]))


def on_grid(
    room: Room,
    point: Floats,
    step: float,
    allowed: Callable[[Floats], float],
    on: Sequence[WallRef] = (),
    near: Floats | None = None,
) -> Floats | None:
    """Return the point nearby whose distances are multiples of a step and that is best, or ``None`` if none will do.

    Parameters
    ----------
    point
        ``(2,)``, the best point without a grid.
    step
        In metres.
    allowed
        Gives for a point by how much it may be missed; below 0 it may not be used.
    on
        The wall that the point must stay on, if it is fixed to one.
    near
        A spot, ``(2,)``, to which the point is rather to be near than to be good.
    """
    plan = setting_out(room, point, on)
    if plan.by != "faces" or step <= 0:
        return None
    walls = (plan.offsets[0].wall, plan.offsets[1].wall)
    choices = [
        (offset.distance,) if offset.wall in on else _multiples(offset.distance, step)
        for offset in plan.offsets
    ]
    points = [_from_faces(room, walls, distances) for distances in product(*choices)]
    usable = [each for each in points if allowed(each) >= 0]
    if near is not None:
        return min(usable, key=lambda each: hypot(*(each - near)), default=None)
    return max(usable, key=lambda each: (round(allowed(each), 9), -hypot(*(each - point))), default=None)


def _multiples(distance: float, step: float) -> tuple[float, ...]:
    return tuple(dict.fromkeys((floor(distance / step) * step, ceil(distance / step) * step)))


def _face_offsets(room: Room, point: Floats, on: Sequence[WallRef]) -> Iterator[Offset]:
    """The walls from which a point can be measured at a right angle: long enough, no openings, the foot on them."""
    for wall in (WallRef(0, edge) for edge in range(len(room.outline))):
        start, end = room.wall_ends(wall)
        length = hypot(*(end - start))
        along = float((point - start) @ (end - start)) / length
        foot = start + along * (end - start) / length
        distance = float(line_depths(point[None], np.array([[start, end]]))[0, 0])
        if wall in on:
            yield Offset(wall, foot, 0.0)
        elif length >= SHORTEST_FACE and distance >= 0 and _is_solid_at(room, wall.edge, along / length):
            yield Offset(wall, foot, distance)


def _is_solid_at(room: Room, edge: int, place: float) -> bool:
    return any(low <= place <= high for low, high in solid_spans(room, edge))


def _corner_offsets(room: Room, point: Floats) -> tuple[Offset, Offset]:
    """The two corners, the nearest of those that do not lie in line with the point, that fix it by distances."""
    distances = np.hypot(*(room.outline - point).T)
    order = np.argsort(distances, kind="stable").tolist()
    pairs = [(i, j) for i, j in combinations(order[:8], 2) if _bearing_sine(room, point, i, j) >= LEAST_ANGLE]
    i, j = min(pairs, key=lambda pair: distances[list(pair)].sum(), default=(order[0], order[1]))
    first, second = (Offset(WallRef(0, k), room.outline[k], float(distances[k])) for k in (i, j))
    return first, second


def _from_faces(room: Room, walls: tuple[WallRef, WallRef], distances: tuple[float, ...]) -> Floats:
    rows, sides = [], []
    for wall, distance in zip(walls, distances, strict=True):
        start, end = room.wall_ends(wall)
        way = (end - start) / hypot(*(end - start))
        normal = np.array([-way[1], way[0]])
        rows.append(normal)
        sides.append(distance + float(normal @ (start - room.outline[0])))
    return np.asarray(room.outline[0] + np.linalg.solve(np.array(rows), np.array(sides)))


def _sine(room: Room, a: WallRef, b: WallRef) -> float:
    (p, q), (r, s) = room.wall_ends(a), room.wall_ends(b)
    v, w = (q - p) / hypot(*(q - p)), (s - r) / hypot(*(s - r))
    return float(abs(v[0] * w[1] - v[1] * w[0]))


def _bearing_sine(room: Room, point: Floats, i: int, j: int) -> float:
    v, w = room.outline[i] - point, room.outline[j] - point
    return abs(float(v[0] * w[1] - v[1] * w[0])) / max(hypot(*v) * hypot(*w), 1e-300)


def _side(p: Floats, q: Floats, c: Floats) -> float:
    return float((q[0] - p[0]) * (c[1] - p[1]) - (q[1] - p[1]) * (c[0] - p[0]))


def _tapes(pair: tuple[Offset, Offset]) -> float:
    return pair[0].distance + pair[1].distance
