"""Leaving chains of walls out of an outline, one after another, the shallowest first.

Method
    All joints within a limit are found once and put in order: by depth, then by the length of wall left out for each
    wall saved, then those that make the room smaller, then by place. Each has one chance, in its turn. It is taken if
    both its walls still stand, neither runs on into the chain, both keep some length in their own direction, and the
    outline is still a ring around the room's obstacles. Where it would be none, the two walls stay for good: beside a
    niche that must stay, since a column stands in it, the wall is no jog. Since no step undoes another, a higher limit
    only adds steps at the end.
Cost
    The search for joints, and one check of the ring for each step that is tried.
"""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from kernelscan.coverage.joints import ROUNDING, Joint, Point, StraightWalls
from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import Ring, as_rings, signed_area
from kernelscan.plan import Room
from kernelscan.tolerances import Tolerances

__all__ = ["LeavingOut", "Piece"]


@dataclass(frozen=True, slots=True)
class Piece:
    """One edge of the outline as it stands.

    Attributes
    ----------
    start
        Its first point.
    edge
        The edge of the exact outline that it lies on; ``None`` if it stands in place of others.
    joint
        What it is part of in that case.
    """

    start: Point
    edge: int | None
    joint: Joint | None = None


class LeavingOut:
    """The outline on its way, one step after another.

    Attributes
    ----------
    walls
        The straight walls of the exact outline.
    rings
        The outline as it stands, and the room's holes.
    pieces
        The edges of the outline as it stands.
    joints
        The joints that stand, by the number of the wall before each.
    """

    def __init__(self, room: Room, limit: float, tolerances: Tolerances) -> None:
        self.walls = StraightWalls(room.outline, tolerances)
        self.rings: tuple[Ring, ...] = room.rings
        self.pieces = [Piece(self.walls.edge_ends(edge)[0], edge) for edge in range(len(room.outline))]
        self.joints: dict[int, Joint] = {}
        self._limit = limit
        self._standing = list(range(len(self.walls)))
        self._held: set[int] = set()

    def levels(self) -> Iterator[float]:
        """Take all steps; yield, before the first and after the last of each depth, the depth taken so far."""
        depth = 0.0
        for joint in sorted(self.walls.joints(self._limit), key=self._order):
            changed = self._with(joint)
            if changed is not None:
                if joint.depth > depth:
                    yield depth
                    depth = joint.depth
                self._standing, self.joints, self.pieces, self.rings = changed
        yield depth

    def _order(self, joint: Joint) -> tuple[float, ...]:
        low = self.rings[0].min(axis=0)
        place = np.round(np.mean(joint.chain, axis=0) - low, 6)
        length, saved = self.walls.left_out(joint)
        return joint.depth, round(length / saved, 6), -round(joint.floor, 6), *place.tolist()

    def _with(self, joint: Joint) -> tuple[list[int], dict[int, Joint], list[Piece], tuple[Ring, ...]] | None:
        """Everything as it would be with one more joint, or ``None`` if that is not possible."""
        standing, joints = self._standing, self.joints
        if joint.a not in standing or joint.b not in standing:
            return None
        first = standing.index(joint.a)
        turned = standing[first:] + standing[:first]
        dropped = turned[1 : turned.index(joint.b)]
        if not dropped or any(_is_one_line(joints.get(wall)) for wall in (joint.a, dropped[-1])):
            return None
        if not self._held.isdisjoint(dropped):
            return None
        standing = [wall for wall in standing if wall not in dropped]
        joints = {wall: each for wall, each in joints.items() if wall in standing} | {joint.a: joint}
        pieces = self._pieces(standing, joints)
        if not pieces:
            return None
        rings = _rings(pieces, self.rings[1:])
        if rings is None:
            self._held |= {joint.a, joint.b}
            return None
        return standing, joints, pieces, rings

    def _pieces(self, standing: list[int], joints: dict[int, Joint]) -> list[Piece]:
        """The outline's edges; none at all if a wall would be left without length."""
        pieces: list[Piece] = []
        for k, wall in enumerate(standing):
            before, after = joints.get(standing[k - 1]), joints.get(wall)
            start = before.path[-1] if before else self.walls.starts[wall]
            end = after.path[0] if after else self.walls.ends[wall]
            if self.walls.along(wall, end) - self.walls.along(wall, start) <= ROUNDING:
                return []
            pieces += self._of_wall(wall, start, end)
            if after:
                pieces += [Piece(point, None, after) for point in after.path[:-1]]
        return pieces

    def _of_wall(self, wall: int, start: Point, end: Point) -> Iterator[Piece]:
        """The edges of a wall from one of its points to another."""
        low, high = self.walls.along(wall, start) + ROUNDING, self.walls.along(wall, end) - ROUNDING
        for edge in self.walls.edges(wall):
            p, q = self.walls.edge_ends(edge)
            if self.walls.along(wall, q) > low and self.walls.along(wall, p) < high:
                yield Piece(p if self.walls.along(wall, p) > low else start, edge)


def _is_one_line(joint: Joint | None) -> bool:
    """Whether a wall runs on past a feature that was left out."""
    return joint is not None and joint.shape == "line"


def _rings(pieces: list[Piece], holes: tuple[Ring, ...]) -> tuple[Ring, ...] | None:
    """The rings of the room, or ``None`` if these are none."""
    outline = np.array([piece.start for piece in pieces])
    if len(outline) < 3 or signed_area(outline) <= 0:
        return None
    try:
        return as_rings(outline, holes)
    except GeometryError:
        return None
