"""A room: its outline, what stands in it, what opens in its walls, and where in the drawing it came from."""

from dataclasses import dataclass
from math import atan2
from typing import Literal, NamedTuple

import numpy as np

from kernelscan.geometry.rings import Ring, signed_area
from kernelscan.tolerances import Tolerances

__all__ = [
    "Closing",
    "Fixture",
    "NameSource",
    "Obstacle",
    "Opening",
    "OpeningKind",
    "Room",
    "Source",
    "WallRef",
]

NameSource = Literal["label", "layer", "number"]
OpeningKind = Literal["door", "window", "gap", "feature"]
"""``feature`` is no opening but the place of a small feature left out of an outline; it carries nothing either."""
Closing = Literal["outline", "walls"]


class WallRef(NamedTuple):
    """One wall of a room: ring 0 is the outline and 1 … the obstacles; edge i runs from vertex i to the next."""

    ring: int
    edge: int


@dataclass(frozen=True, slots=True)
class Source:
    """Where in the drawing something came from: the layer's name and the entity's handle."""

    layer: str = ""
    handle: str = ""


@dataclass(frozen=True, slots=True, eq=False)
class Obstacle:
    """Something inside a room that blocks sight, such as a column; a clockwise ring in metres."""

    ring: Ring
    source: Source = Source()


@dataclass(frozen=True, slots=True, eq=False)
class Fixture:
    """Something drawn under a name that devices may have to stay away from, such as an air outlet.

    Attributes
    ----------
    name
        The name of its block.
    centre, radius
        ``(2,)`` and metres: a circle around all of it.
    source
        Layer and handle.
    """

    name: str
    centre: np.ndarray
    radius: float
    source: Source = Source()


@dataclass(frozen=True, slots=True)
class Opening:
    """A door, a window or a bare gap in a wall: it bounds the room, but carries no device.

    ``span`` says where along its wall it lies, 0 at the wall's first vertex and 1 at its second; ``width`` is in
    metres.
    """

    wall: WallRef
    kind: OpeningKind
    width: float
    span: tuple[float, float] = (0.0, 1.0)


@dataclass(frozen=True, slots=True, eq=False)
class Room:
    """One room of a plan.

    Attributes
    ----------
    id
        ``R001`` and so on, unique in its plan.
    name
        What people call it; two rooms of a plan may share one.
    name_from
        Whether the name is a label inside the outline, the layer's name or only a number.
    outline
        ``(n, 2)`` counter-clockwise ring in metres.
    obstacles, openings
        What stands in the room, and the doors, windows and gaps in its walls.
    source
        Layer and handle of the outline.
    fixtures
        What is drawn in it as a named block; it blocks no sight.
    closed_by
        Whether the drawing outlines the room, or walls enclose it.
    """

    id: str
    name: str
    outline: Ring
    obstacles: tuple[Obstacle, ...] = ()
    openings: tuple[Opening, ...] = ()
    name_from: NameSource = "number"
    source: Source = Source()
    fixtures: tuple[Fixture, ...] = ()
    closed_by: Closing = "outline"

    @property
    def holes(self) -> tuple[Ring, ...]:
        """The obstacles' rings, clockwise."""
        return tuple(obstacle.ring for obstacle in self.obstacles)

    @property
    def rings(self) -> tuple[Ring, ...]:
        """The outline and then the holes: what a :class:`WallRef` counts in."""
        return (self.outline, *self.holes)

    @property
    def area(self) -> float:
        """Floor area in square metres, obstacles taken off."""
        return float(sum(signed_area(ring) for ring in self.rings))

    @property
    def corner_count(self) -> int:
        """How many corners the outline and the obstacles have."""
        return sum(len(ring) for ring in self.rings)

    @property
    def opening_count(self) -> int:
        """How many openings there are, where a door in a curved wall, drawn over several of its chords, is one.

        Openings of one kind are one where they meet at a joint at which the wall goes on smoothly.
        """
        ends = {(each.wall, each.kind) for each in self.openings if each.span[1] >= 1.0}
        starts = {(each.wall, each.kind) for each in self.openings if each.span[0] <= 0.0}
        joined = sum((self._smooth_after(wall), kind) in starts for wall, kind in ends)
        return max(len(self.openings) - joined, min(len(self.openings), 1))

    def _smooth_after(self, wall: WallRef) -> WallRef | None:
        """Return the next wall of the ring if this one runs on into it smoothly."""
        following = WallRef(wall.ring, (wall.edge + 1) % len(self.rings[wall.ring]))
        (a, b), (c, d) = self.wall_ends(wall), self.wall_ends(following)
        (ux, uy), (vx, vy) = (b - a).tolist(), (d - c).tolist()
        turn = abs(atan2(ux * vy - uy * vx, ux * vx + uy * vy))
        return following if turn < Tolerances().smooth else None

    def wall_ends(self, wall: WallRef) -> tuple[np.ndarray, np.ndarray]:
        """Return the two ends of a wall, each ``(2,)`` in metres, in the ring's own direction."""
        ring = self.rings[wall.ring]
        return ring[wall.edge], ring[(wall.edge + 1) % len(ring)]

    def opening_ends(self, opening: Opening) -> np.ndarray:
        """Return the two ends of an opening, ``(2, 2)`` in metres, in the ring's own direction."""
        start, end = self.wall_ends(opening.wall)
        low, high = opening.span
        return np.array([start + low * (end - start), start + high * (end - start)])
