"""The tolerances of one run, in one value that is passed along; no module keeps a constant of its own."""

from dataclasses import dataclass

__all__ = ["Tolerances"]


@dataclass(frozen=True, slots=True)
class Tolerances:
    """How coarse a run may be; every length in metres, areas in square metres.

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
    """

    chord: float = 0.001
    snap: float = 0.005
    smallest_room: float = 1.5
    thickest_wall: float = 0.6
