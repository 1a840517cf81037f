"""The tolerances of one run, in one value that is passed along; no module keeps a constant of its own."""

from dataclasses import dataclass
from math import radians

__all__ = ["Tolerances"]


@dataclass(frozen=True, slots=True)
class Tolerances:
    """How coarse a run may be; lengths in metres, areas in square metres, angles in radians.

    Attributes
    ----------
    chord
        The farthest that a straight piece may stray from the curve it stands for.
    snap
        Ends of drawn lines nearer than this are one point.
    smallest_room
        A closed outline under this area is not taken for a room by content.
    thickest_wall
        A strip narrower than this is the body of a wall, not a room.
    door_gap
        A bare gap between two wall ends that face each other is closed up to this width.
    least_closed
        Where closed rooms account for less than this part of the walls' length, the plan is open and has no rooms.
    widest_opening
        A gap is closed up to this width where a door or window is drawn in it.
    smooth
        Walls that meet at less than this turn run on as one, as the pieces of a curved wall do; where they turn by
        more there is a corner.
    """

    chord: float = 0.001
    snap: float = 0.005
    smallest_room: float = 1.5
    thickest_wall: float = 0.6
    door_gap: float = 1.3
    least_closed: float = 0.1
    widest_opening: float = 6.0
    smooth: float = radians(20)
