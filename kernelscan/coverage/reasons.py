"""Why no point of a room sees every wall, and what can be done about it.

What is exact
    The walls that exclude each other are those of the kernel's own evidence, and whether the outline alone has a kernel
    is exact. How far the room falls short is a linear program, in doubles. The best point is the best of those that
    were tried, and nothing more is said of it.
Words
    Names and directions are those of :mod:`kernelscan.coverage.wall_names`: north is +y of the drawing. The sentences
    hold no numbers, so that they need no unit; the numbers stand beside them.
"""

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Literal

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.best_point import BestPoint, best_point
from kernelscan.coverage.features import Feature, Simplified, least_simplified, simplified
from kernelscan.coverage.hidden import Hidden, hidden_from
from kernelscan.coverage.wall_names import WallName, joined, wall_names
from kernelscan.errors import GeometryError
from kernelscan.geometry.kernel import Kernel, kernel_of_rings
from kernelscan.geometry.linear_programs import deepest_point, least_slack
from kernelscan.plan import Room, WallRef
from kernelscan.tolerances import Tolerances

__all__ = ["TELLING_SHORTFALL", "ConflictWall", "Reasons", "why_no_point"]

Floats = npt.NDArray[np.float64]
Blame = Literal["outline", "obstacles"]

TELLING_SHORTFALL = 1.0
"""Metres: a room that falls short by more is not a matter of small features, and the figure tells a fitter nothing."""

SMALL = 0.5
"""Metres: features up to this depth are named as such."""


@dataclass(frozen=True, slots=True, eq=False)
class ConflictWall:
    """One of the walls that exclude each other.

    Attributes
    ----------
    wall, name
        Which wall, and what a fitter would call it.
    ends
        ``(2, 2)`` metres.
    faces
        ``(2,)``: the unit vector from the wall into the room.
    """

    wall: WallRef
    name: WallName
    ends: Floats
    faces: Floats

    @property
    def length(self) -> float:
        """Metres."""
        return float(np.hypot(*(self.ends[1] - self.ends[0])))


@dataclass(frozen=True, slots=True, eq=False)
class Reasons:
    """Why no point of a room sees every wall.

    Attributes
    ----------
    room
        The room.
    conflict
        The two or three walls that exclude each other.
    because
        The same in sentences for a person.
    shortfall
        Metres: every wall would have to give way by that much before one point saw them all.
    blame
        Whether the outline alone is to blame, with or without obstacles, or only what stands in the room.
    outline_kernel
        The kernel of the outline without the obstacles; ``None`` if there are none.
    least
        The outline without obstacles and without its small features up to the least depth that leaves it a kernel;
        ``None`` if none up to a metre does. Its depth is 0 where only the obstacles are to blame.
    best
        The best of the points tried, by the floor that it sees.
    hidden
        What that point does not see.
    """

    room: Room
    conflict: tuple[ConflictWall, ...]
    because: tuple[str, ...]
    shortfall: float
    blame: Blame
    outline_kernel: Kernel | None
    least: Simplified | None
    best: BestPoint
    hidden: Hidden


def why_no_point(room: Room, kernel: Kernel, tolerances: Tolerances = Tolerances()) -> Reasons:
    """Return why no point of a room sees every wall.

    Parameters
    ----------
    room, kernel
        A room, and its kernel, which is empty.
    tolerances
        For the small features.

    Raises
    ------
    GeometryError
        If the kernel is not empty.
    """
    if kernel.kind != "empty":
        raise GeometryError(f"the room has a kernel: {kernel.kind}")
    alone = replace(room, obstacles=(), openings=tuple(each for each in room.openings if each.wall.ring == 0))
    outline_kernel = kernel_of_rings(alone.rings) if room.obstacles else None
    least = least_simplified(alone, tolerances=tolerances)
    named = least if least is not None and least.features else simplified(alone, SMALL, tolerances)
    features = tuple(feature for feature in named.features if feature.depth <= SMALL)
    nearest = least_slack(room.rings)
    best = best_point(room, _likely_points(nearest.point, least))
    return Reasons(
        room,
        tuple(_conflict_walls(room, kernel, features)),
        tuple(_sentences(room, kernel, outline_kernel, features)),
        nearest.slack,
        "outline" if outline_kernel is None or outline_kernel.kind == "empty" else "obstacles",
        outline_kernel,
        least,
        best,
        hidden_from(room, best.point),
    )


def _likely_points(nearest: Floats, least: Simplified | None) -> Iterator[Floats]:
    """The point nearest to seeing every wall, and the middle of the kernel without small features."""
    yield nearest
    if least is not None:
        yield deepest_point(least.room.rings).point


def _conflict_walls(room: Room, kernel: Kernel, features: tuple[Feature, ...]) -> Iterator[ConflictWall]:
    walls = [WallRef(*wall) for wall in kernel.conflict.tolist()]
    for wall, name in zip(walls, wall_names(room, walls, features), strict=True):
        ends = np.array(room.wall_ends(wall))
        x, y = (ends[1] - ends[0]) / np.hypot(*(ends[1] - ends[0]))
        yield ConflictWall(wall, name, ends, np.array([-y, x]))


def _sentences(
    room: Room, kernel: Kernel, outline_kernel: Kernel | None, features: tuple[Feature, ...]
) -> Iterator[str]:
    yield _conflict(room, kernel, features)
    if outline_kernel is None:
        return
    if outline_kernel.kind != "empty":
        yield "Without what stands in the room there would be such a point: the outline is not to blame."
        return
    yield "Even without what stands in the room there would be no such point."
    if not set(map(tuple, kernel.conflict.tolist())) <= {(0, edge) for edge in range(len(room.outline))}:
        yield _conflict(room, outline_kernel, features)


def _conflict(room: Room, kernel: Kernel, features: tuple[Feature, ...]) -> str:
    names = wall_names(room, [WallRef(*wall) for wall in kernel.conflict.tolist()], features)
    words = joined(names)
    if len(names) == 2:
        return f"{words[0].upper()}{words[1:]} face away from each other."
    return f"No point is in front of {words} at once."
