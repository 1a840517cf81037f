"""Walls in words that a fitter would use: the south wall, the return facing east, the west side of the pilaster.

Directions are those of the plan: north is up, +y of the drawing, wherever the building's north may be. A wall on the
outer edge of the room, or less than half a metre within it, is named by the side of the room it is on; one that lies
farther in is a return, and is named by where its face looks. A face of a small feature or of an obstacle is named with
it. Common practice, no source.
"""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import atan2, pi

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.depth import line_depths
from kernelscan.coverage.features import Feature
from kernelscan.coverage.joints import SQUARE
from kernelscan.coverage.wording import Custom
from kernelscan.plan import Room, WallRef

__all__ = ["WallName", "face_name", "joined", "wall_names"]

Floats = npt.NDArray[np.float64]

WINDS = ("east", "north-east", "north", "north-west", "west", "south-west", "south", "south-east")

OUTER = 0.5
"""Metres: a wall that is no farther within the room's outer edge is a wall of the room and no return."""

COLUMN = 1.5
"""Metres: an obstacle no wider than this is a column to a fitter."""


@dataclass(frozen=True, slots=True)
class WallName:
    """What a wall is called: ``the west side`` and ``of the pilaster in the south wall``; the second may be empty."""

    what: str
    where: str = ""

    def __str__(self) -> str:
        """Give the name in full."""
        return f"{self.what} {self.where}".rstrip()


def wall_names(room: Room, walls: Sequence[WallRef], features: Sequence[Feature] = ()) -> list[WallName]:
    """Return what each of some walls is called; where two would be called the same, their place is added."""
    names = [_name(room, wall, features) for wall in walls]
    alike = [names.count(name) > 1 for name in names]
    return [
        replace(name, where=f"{name.where} in the {_part(room, wall)} of the room".lstrip())
        if twice
        else name
        for name, wall, twice in zip(names, walls, alike, strict=True)
    ]


def face_name(room: Room, wall: WallRef, custom: Custom) -> str:
    """Return what to measure from: a wall's name, with its length where another wall of the outline has the same."""
    name = str(_name(room, wall, ()))
    alike = [edge for edge in range(len(room.outline)) if str(_name(room, WallRef(0, edge), ())) == name]
    if len(alike) < 2:
        return name
    start, end = room.wall_ends(wall)
    return f"{name} of {custom.length(float(np.hypot(*(end - start))))}"


def joined(names: Sequence[WallName]) -> str:
    """Return names as a list in words; what those of one feature have in common is said once."""
    groups: dict[tuple[str, int], list[str]] = {}
    for k, name in enumerate(names):
        groups.setdefault((name.where, 0 if name.where else k), []).append(name.what)
    said = [f"{' and '.join(group)} {where}".rstrip() for (where, _), group in groups.items()]
    comma = "," if len(said) < len(names) else ""
    return said[0] if len(said) == 1 else f"{', '.join(said[:-1])}{comma} and {said[-1]}"


def _name(room: Room, wall: WallRef, features: Sequence[Feature]) -> WallName:
    facing, outward = _wind(_inward(room, wall)), _wind(-_inward(room, wall))
    if wall.ring:
        return WallName(f"the {facing} face", f"of the {_obstacle(room, wall.ring)}")
    is_outer = line_depths(room.outline, np.array([room.wall_ends(wall)])).min() >= -OUTER
    opening = next((each for each in room.openings if each.wall == wall and each.span == (0.0, 1.0)), None)
    if opening is not None:
        return WallName(f"the {opening.kind}", f"in the {outward} wall" if is_outer else f"facing {facing}")
    feature = next((each for each in features if wall in each.walls), None)
    if feature is not None:
        return _face(room, wall, feature)
    if is_outer:
        return WallName(f"the {outward} wall")
    return WallName(f"the return facing {facing}", _beside(room, wall))


def _face(room: Room, wall: WallRef, feature: Feature) -> WallName:
    """One wall of a small feature."""
    across, inward = feature.chain[-1] - feature.chain[0], _inward(room, wall)
    is_corner = len(feature.ring) > len(feature.chain)
    side = _wind(np.array([across[1], -across[0]]))
    place = f"in the {side} {'corner' if is_corner else 'wall'}"
    if feature.kind in ("chamfer", "rounded corner"):
        return WallName(f"the {feature.kind}", place)
    along = abs(across @ inward) < SQUARE * np.hypot(*across)
    if feature.kind == "jog" and not is_corner and along:
        return WallName(
            f"the part of the {side} wall that {'stands out' if feature.projects else 'is set back'}"
        )
    if feature.kind == "jog":
        return WallName(f"the {_wind(inward)} face", f"of the jog {place}")
    if along:
        return WallName(f"the {'face' if feature.projects else 'back'}", f"of the {feature.kind} {place}")
    return WallName(
        f"the {_wind(inward if feature.projects else -inward)} side", f"of the {feature.kind} {place}"
    )


def _beside(room: Room, wall: WallRef) -> str:
    """The opening in a wall or in one of its neighbours."""
    count = len(room.outline)
    for edge, word in ((wall.edge, "with"), (wall.edge - 1, "beside"), (wall.edge + 1, "beside")):
        for opening in room.openings:
            if opening.wall == WallRef(0, edge % count):
                return f"{word} the {opening.kind}"
    return ""


def _obstacle(room: Room, ring: int) -> str:
    points = room.rings[ring]
    word = "column" if np.ptp(points, axis=0).max() <= COLUMN else "obstacle"
    if len(room.obstacles) == 1:
        return word
    return f"{word} in the {_part_at(room, points.mean(axis=0))} of the room"


def _part(room: Room, wall: WallRef) -> str:
    return _part_at(room, np.mean(room.wall_ends(wall), axis=0))


def _part_at(room: Room, point: Floats) -> str:
    """The ninth of the room's box that a point is in."""
    low, high = room.outline.min(axis=0), room.outline.max(axis=0)
    column, row = np.clip((3 * (point - low) / (high - low)).astype(int), 0, 2) - 1
    return _wind(np.array([column, row])) if column or row else "middle"


def _inward(room: Room, wall: WallRef) -> Floats:
    """The unit vector from a wall into the room."""
    start, end = room.wall_ends(wall)
    x, y = (end - start) / np.hypot(*(end - start))
    return np.array([-y, x])


def _wind(way: Floats) -> str:
    return WINDS[round(atan2(way[1], way[0]) / (pi / 4)) % 8]
