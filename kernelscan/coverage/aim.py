"""What a device sees of a room when its field or its reach is the limit, and how to aim it for the most.

From the lens the visible region is star-shaped: in each direction it ends at one distance, or at the reach if that
comes first. What a field of width H sees when its middle points in the direction b is the part of that region between
the directions b - H/2 and b + H/2. Floor and wall are added up over the directions, piece by piece and in closed form,
so that what lies between two directions is the difference of two running sums.
"""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from math import inf, pi

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.visible import View, view_from
from kernelscan.plan import Room, WallRef

__all__ = ["Aim", "best_aim", "seen_from"]

Floats = npt.NDArray[np.float64]
Measure = Callable[[Floats, Floats, float], Floats]

IN_LINE = 1e-9
"""Radians: a piece that fills no more of the view than this is seen end-on."""

STEPS = 720
"""Directions that are tried for the middle of the field: half a degree apart."""


@dataclass(frozen=True, slots=True)
class Aim:
    """What a device sees from one place with one aim.

    Attributes
    ----------
    bearing
        Where the middle of its field points, radians from the x axis, from -pi to pi.
    floor, wall
        The fractions, 0 to 1, of the floor's area and of the length of the walls (openings too) that it sees.
    """

    bearing: float
    floor: float
    wall: float


def best_aim(room: Room, lens: Floats, field: float, reach: float = inf, but: Sequence[WallRef] = ()) -> Aim:
    """Return the aim that sees most floor, to half a degree; of equals the one in the middle of them.

    ``but`` names walls that are left out of the fraction of walls: those that the device is fixed to.
    """
    bearings = np.linspace(-pi, pi, STEPS, endpoint=False)
    floor, wall = _Sweep(room, lens, reach, but).aims(bearings, min(field, 2 * pi))
    best = _middle_of_the_best(floor)
    return Aim(float(bearings[best]), float(floor[best]), float(wall[best]))


def seen_from(room: Room, lens: Floats, bearing: float, field: float, reach: float = inf) -> Aim:
    """Return what is seen with a given aim."""
    floor, wall = _Sweep(room, lens, reach, ()).aims(np.array([bearing]), min(field, 2 * pi))
    return Aim(bearing, float(floor[0]), float(wall[0]))


def _middle_of_the_best(seen: Floats) -> int:
    """The middle of the longest run, around the circle, of places that are within a millionth of the best."""
    good = seen >= seen.max() * (1 - 1e-6)
    if good.all():
        return 0
    start = int(np.flatnonzero(~good)[0])
    turned = np.roll(good, -start)
    edges = np.flatnonzero(np.diff(np.concatenate([[0], turned.astype(np.int8), [0]])))
    runs = edges.reshape(-1, 2)
    low, high = runs[(runs[:, 1] - runs[:, 0]).argmax()]
    return (start + int(low + high - 1) // 2) % len(seen)


class _Sweep:
    """The floor and the wall seen between two directions from one lens, as fractions of the room's."""

    def __init__(self, room: Room, lens: Floats, reach: float, but: Sequence[WallRef]) -> None:
        view = view_from(room.rings, lens)
        counted = np.array([WallRef(*wall) not in but for wall in view.walls.tolist()], dtype=bool)
        region, pieces = view.region - lens, _wall_pieces(room, view)[counted] - lens
        self.floor = _Running(region, np.roll(region, -1, axis=0), reach, _area_within)
        self.wall = _Running(pieces[:, 0], pieces[:, 1], reach, _length_within)
        self.floor_area = room.area
        every = [WallRef(k, edge) for k, ring in enumerate(room.rings) for edge in range(len(ring))]
        ends = np.array([room.wall_ends(wall) for wall in every if wall not in but])
        self.wall_length = float(np.hypot(*(ends[:, 1] - ends[:, 0]).T).sum())

    def aims(self, bearings: Floats, field: float) -> tuple[Floats, Floats]:
        """The fractions of floor and of wall seen with each bearing."""
        low, high = bearings - field / 2, bearings + field / 2
        floor = self.floor.between(low, high) / self.floor_area
        return floor, self.wall.between(low, high) / self.wall_length


class _Running:
    """A measure of straight pieces, added up over the directions in which they are seen from the origin.

    ``p`` and ``q`` are the ends of the pieces, ``(n, 2)``, counter-clockwise as seen from the origin.
    """

    def __init__(self, p: Floats, q: Floats, reach: float, measure: Measure) -> None:
        self.reach, self.measure = reach, measure
        p, q = _cut_at_the_back(p, q)
        in_line = _angles(p, q) <= IN_LINE
        self.p, self.q, self.start, self.before = self._sorted(p[~in_line], q[~in_line])
        self.end = self.start + _angles(self.p, self.q)
        # A wall in line with the lens has one direction only: it is counted whole from there on.
        _, _, self.line_at, self.line_before = self._sorted(p[in_line], q[in_line])

    def _sorted(self, p: Floats, q: Floats) -> tuple[Floats, Floats, Floats, Floats]:
        """Pieces by the direction in which they begin, their directions, and the measure before each."""
        at_lens = np.equal(p, 0.0).all(axis=1, keepdims=True)
        ahead = np.where(at_lens, q, p)
        start = np.arctan2(ahead[:, 1], ahead[:, 0])
        order = np.argsort(start, kind="stable")
        p, q = p[order], q[order]
        return p, q, start[order], np.concatenate([[0.0], np.cumsum(self.measure(p, q, self.reach))])

    def between(self, low: Floats, high: Floats) -> Floats:
        """The measure between directions, ``(m,)`` each, ``high - low`` at most a full turn."""
        return self._up_to(high) - self._up_to(low)

    def _up_to(self, direction: Floats) -> Floats:
        """The measure from straight back, -pi, to each direction, turn after turn."""
        turns = np.floor((direction + pi) / (2 * pi))
        within = direction - 2 * pi * turns
        last = np.searchsorted(self.start, within, side="right") - 1
        k = np.maximum(last, 0)
        p, q = self.p[k], self.q[k]
        cut = _where_it_meets(p, q, within)
        cut = np.where((within >= self.end[k])[:, None], q, cut)
        part = np.where(last >= 0, self.measure(p, cut, self.reach), 0.0)
        in_line = self.line_before[np.searchsorted(self.line_at, within, side="right")]
        whole = self.before[-1] + self.line_before[-1]
        return np.asarray(turns * whole + self.before[k] + part + in_line)


def _wall_pieces(room: Room, view: View) -> Floats:
    """The pieces of wall that are seen, ``(k, 2, 2)``, counter-clockwise as seen from the eye."""
    ends = np.array([room.wall_ends(WallRef(*wall)) for wall in view.walls.tolist()])
    ways = ends[:, 1] - ends[:, 0]
    return np.asarray(ends[:, :1] + view.spans[..., None] * ways[:, None])


def _cut_at_the_back(p: Floats, q: Floats) -> tuple[Floats, Floats]:
    """Cut in two each piece that crosses the direction -pi, so that none begins before it and ends after it."""
    down = (p[:, 1] >= 0) & (q[:, 1] < 0) & (_cross(p, q) > 0)
    crosses = np.flatnonzero(down & ((p[:, 0] < 0) | (q[:, 0] < 0)))
    t = (p[crosses, 1] / (p[crosses, 1] - q[crosses, 1]))[:, None]
    middle = p[crosses] + t * (q[crosses] - p[crosses])
    behind = middle[:, 0] < 0
    ends, starts = middle.copy(), middle[behind].copy()
    ends[:, 1], starts[:, 1] = 0.0, -0.0
    first_ends = q.copy()
    first_ends[crosses[behind]] = ends[behind]
    return np.concatenate([p, starts]), np.concatenate([first_ends, q[crosses][behind]])


def _where_it_meets(p: Floats, q: Floats, direction: Floats) -> Floats:
    """The point of each line p -> q in the given direction from the origin; p itself where it runs along it."""
    way = np.column_stack([np.cos(direction), np.sin(direction)])
    d = q - p
    across, at_p = _cross(way, d), _cross(way, p)
    with np.errstate(divide="ignore", invalid="ignore"):
        t = np.where(across != 0, -at_p / across, 0.0)
    return np.asarray(p + np.clip(t, 0.0, 1.0)[:, None] * d)


def _inside(p: Floats, q: Floats, reach: float) -> tuple[Floats, Floats]:
    """From where to where along p -> q, 0 to 1, a piece is within reach; from 1 to 1 or so where it is not."""
    d = q - p
    a, b, c = (d * d).sum(axis=1), (p * d).sum(axis=1), (p * p).sum(axis=1) - reach**2
    with np.errstate(divide="ignore", invalid="ignore"):
        root = np.sqrt(np.maximum(b * b - a * c, 0.0))
        low, high = (-b - root) / a, (-b + root) / a
    hit = (b * b - a * c > 0) & (a > 0)
    return np.where(hit, np.clip(low, 0, 1), 1.0), np.where(hit, np.clip(high, 0, 1), 1.0)


def _length_within(p: Floats, q: Floats, reach: float) -> Floats:
    length = np.hypot(*(q - p).T)
    if reach == inf:
        return np.asarray(length)
    low, high = _inside(p, q, reach)
    return np.asarray(length * (high - low))


def _area_within(p: Floats, q: Floats, reach: float) -> Floats:
    """The area of the triangle from the origin to each piece, within reach: triangles and sectors."""
    if reach == inf:
        return np.asarray(_cross(p, q) / 2)
    low, high = _inside(p, q, reach)
    a, b = p + low[:, None] * (q - p), p + high[:, None] * (q - p)
    return np.asarray(_cross(a, b) / 2 + reach**2 / 2 * (_angles(p, a) + _angles(b, q)))


def _cross(p: Floats, q: Floats) -> Floats:
    return np.asarray(p[:, 0] * q[:, 1] - p[:, 1] * q[:, 0])


def _angles(p: Floats, q: Floats) -> Floats:
    """The angle from p to q as seen from the origin; 0 where either is the origin."""
    return np.asarray(np.arctan2(_cross(p, q), (p * q).sum(axis=1)))
