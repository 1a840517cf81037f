"""Names for walls to measure from: by the side of the room that they close, and by their length.

North is +y of the drawing, whatever the site's north may be. Where several walls of a room stand on one side, the
length tells them apart, or else a count from the west, or from the south for those that run north and south.
"""

from math import hypot, pi

import numpy as np

from kernelscan.coverage.wording import Custom
from kernelscan.plan import Room, WallRef

__all__ = ["face_name"]

SIDES = ("east", "north-east", "north", "north-west", "west", "south-west", "south", "south-east")


def face_name(room: Room, wall: WallRef, custom: Custom) -> str:
    """Return a name such as ``north wall`` or ``south wall of 2.40 m`` for a wall of the outline."""
    side = _side(room, wall)
    rivals = [WallRef(0, edge) for edge in range(len(room.outline)) if _side(room, WallRef(0, edge)) == side]
    if len(rivals) == 1:
        return f"{side} wall"
    length = custom.length(_length(room, wall))
    same = [rival for rival in rivals if custom.length(_length(room, rival)) == length]
    if len(same) == 1:
        return f"{side} wall of {length}"
    place = sorted(same, key=lambda rival: _order(room, rival)).index(wall) + 1
    return f"{side} wall of {length}, no. {place} of {len(same)}"


def _side(room: Room, wall: WallRef) -> str:
    """The direction in which one looks straight at a wall from inside, in eighths of a turn."""
    start, end = room.wall_ends(wall)
    way = end - start
    return SIDES[round(float(np.arctan2(-way[0], way[1])) / (pi / 4)) % 8]


def _length(room: Room, wall: WallRef) -> float:
    start, end = room.wall_ends(wall)
    return hypot(*(end - start))


def _order(room: Room, wall: WallRef) -> tuple[float, float]:
    start, end = room.wall_ends(wall)
    x, y = ((start + end) / 2).tolist()
    way = np.abs(end - start)
    return (x, y) if way[0] >= way[1] else (y, x)
