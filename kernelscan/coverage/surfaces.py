"""The surfaces of a room that a device can be fixed to: runs of wall, and corners between two of them.

A run is a series of walls of the outline that go on smoothly, such as the pieces of a curved wall or a straight wall
split by a point; where walls turn by more there is a corner. Openings carry nothing, but a run goes on past them: a
device on one side of a door sees the wall on the other side along.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise
from math import atan2, pi

import numpy as np

from kernelscan.geometry.stretches import side_signs
from kernelscan.plan import Room, WallRef

__all__ = ["Corner", "corners", "joint_turns", "runs", "solid_spans", "walls_along", "without"]


@dataclass(frozen=True, slots=True, eq=False)
class Corner:
    """A corner of the outline.

    Attributes
    ----------
    point
        ``(2,)`` metres.
    walls
        The wall that ends there and the wall that begins there.
    angle, bearing
        The interior angle, and the direction of its bisector from the x axis; radians.
    """

    point: np.ndarray
    walls: tuple[WallRef, WallRef]
    angle: float
    bearing: float

    @property
    def is_convex(self) -> bool:
        """Whether the room is in the lesser angle: a corner to tuck a device into, not an edge to bump against."""
        return self.angle < pi


def joint_turns(ring: np.ndarray) -> np.ndarray:
    """Return the turn at each vertex, ``(n,)`` radians: positive where the room's corner is convex."""
    ahead = np.roll(ring, -1, axis=0) - ring
    back = np.roll(ahead, 1, axis=0)
    cross, dot = back[:, 0] * ahead[:, 1] - back[:, 1] * ahead[:, 0], (back * ahead).sum(axis=1)
    turns: np.ndarray = np.arctan2(cross, dot)
    return turns


def solid_spans(room: Room, edge: int) -> list[tuple[float, float]]:
    """Return the parts of an edge of the outline that are no openings, as places from 0 to 1 along it."""
    spans = [(0.0, 1.0)]
    for opening in room.openings:
        if opening.wall == WallRef(0, edge):
            spans = without(spans, opening.span)
    return [(low, high) for low, high in spans if low < high]


def without(spans: Sequence[tuple[float, float]], shut: tuple[float, float]) -> list[tuple[float, float]]:
    """Return what is left of closed intervals when an open one is taken out of them; lone points may be left."""
    start, end = shut
    if start >= end:
        return list(spans)
    pieces = [piece for low, high in spans for piece in ((low, min(high, start)), (max(low, end), high))]
    return list(dict.fromkeys((low, high) for low, high in pieces if low <= high))


def runs(room: Room, smooth: float) -> list[tuple[WallRef, ...]]:
    """Return the walls of the outline, run by run; a round room is one run."""
    count = len(room.outline)
    starts = np.flatnonzero(np.abs(joint_turns(room.outline)) >= smooth).tolist() or [0]
    return [
        tuple(WallRef(0, edge % count) for edge in range(start, end))
        for start, end in pairwise([*starts, starts[0] + count])
    ]


def corners(room: Room, smooth: float) -> Iterator[Corner]:
    """Yield the corners between two walls that can both carry a device."""
    ring, count = room.outline, len(room.outline)
    for after in np.flatnonzero(np.abs(joint_turns(ring)) >= smooth).tolist():
        before = (after - 1) % count
        ahead, back = solid_spans(room, after), solid_spans(room, before)
        if ahead and back and ahead[0][0] == 0 and back[-1][1] == 1:
            yield _corner(ring, before, after)


def _corner(ring: np.ndarray, before: int, after: int) -> Corner:
    point = ring[after]
    ahead, back = ring[(after + 1) % len(ring)] - point, ring[before] - point
    heading = atan2(ahead[1], ahead[0])
    angle = (atan2(back[1], back[0]) - heading) % (2 * pi)
    return Corner(point, (WallRef(0, before), WallRef(0, after)), angle, heading + angle / 2)


def walls_along(room: Room, walls: Sequence[WallRef], lines: np.ndarray) -> np.ndarray:
    """Return which lines, ``(k, 2, 2)``, run along one of the walls in its own direction: ``(k,)`` booleans, exact."""
    along = np.zeros(len(lines), dtype=bool)
    ways = lines[:, 1] - lines[:, 0]
    for wall in walls:
        ends = np.array(room.wall_ends(wall))
        along |= (side_signs(ends, lines) == 0).all(axis=0) & (ways @ (ends[1] - ends[0]) > 0)
    return along
