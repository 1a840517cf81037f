"""Small features of a room's outline: pilasters, niches, reveals, jogs and cut corners, and the room without them.

Problem
    A pilaster of 20 cm empties an exact kernel though it hides a hand's breadth. Leave out of the outline what is
    no deeper than a given depth, and list it.
Method
    A feature is a chain of walls between two others that can be made to meet without it, and whose joint strays from
    the outline by no more than the depth (:mod:`kernelscan.coverage.joints`). The shallowest goes first; of equals
    the one that costs least wall for each wall saved, then the one that makes the room smaller, then the leftmost and
    lowest. After each step the outline must still be a ring around its obstacles, every wall that stays must keep some
    length and its direction, and chains are made of whole walls: a wall that runs on past a feature is one wall.
What is kept
    Walls that stay, stay on their lines, so that a staircase of small jogs does not creep: each joint, and so every
    point of the simplified outline, is within the depth of the exact one, and the other way round. With more depth the
    same steps are taken first and others follow. Obstacles are no features of the outline: a column stays, however
    thin.
Openings
    A stretch that stands in place of a feature is no surface to fix a device to. It is an opening of the simplified
    room, of the kind of the first opening left out with the feature, or else a gap.
Degenerate cases
    At depth 0 the room itself comes back. Where two equal features exclude each other and nothing but their place
    tells them apart, the place decides: there a mirrored room may give another, equally good answer.
Source
    The definition is this project's own; common practice, no source.
"""

from collections.abc import Iterator
from dataclasses import dataclass, replace
from itertools import pairwise
from math import dist, inf
from typing import Literal

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.joints import SQUARE, Joint, Point, StraightWalls
from kernelscan.coverage.leaving_out import LeavingOut
from kernelscan.errors import GeometryError
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.plan import Opening, Room, WallRef
from kernelscan.tolerances import Tolerances

__all__ = ["Feature", "FeatureKind", "Simplified", "least_depth", "least_simplified", "simplified"]

Floats = npt.NDArray[np.float64]
FeatureKind = Literal["pilaster", "niche", "splayed niche", "reveal", "jog", "chamfer", "rounded corner"]

MOST = 1.0
"""Metres: what is deeper is no small feature, whatever its shape."""


@dataclass(frozen=True, slots=True, eq=False)
class Feature:
    """A small feature that was left out of an outline.

    Attributes
    ----------
    kind
        What a fitter calls it. A reveal is a niche with a door or a window in it; a jog is a step in a wall, also one
        at its end, such as boxed-in pipes in a corner.
    depth, width
        In metres: how far the outline strays by leaving it out, and how wide it is along the wall or across
        the corner.
    middle
        ``(2,)``: the point halfway along the walls left out.
    chain
        ``(k, 2)``: the outline's own points from where it leaves the simplified outline to where it returns.
    ring
        ``(k, 2)``: the chain and what closes it along the simplified outline.
    walls
        The walls of the exact room that were left out.
    projects
        Whether it stands out into the room, as a pilaster does, so that the simplified room has floor there and the
        real one has none.
    """

    kind: FeatureKind
    depth: float
    width: float
    middle: Floats
    chain: Floats
    ring: Floats
    walls: tuple[WallRef, ...]
    projects: bool


@dataclass(frozen=True, slots=True, eq=False)
class Simplified:
    """A room without its small features.

    Attributes
    ----------
    exact, room
        The room as it is, and without the features.
    depth
        Up to which depth features were left out, in metres.
    features
        What was left out, in the outline's order.
    walls
        For each wall of the simplified outline the exact wall that it lies on, or ``None`` where it stands in place of
        a feature.
    """

    exact: Room
    room: Room
    depth: float
    features: tuple[Feature, ...]
    walls: tuple[WallRef | None, ...]


def simplified(room: Room, depth: float, tolerances: Tolerances = Tolerances()) -> Simplified:
    """Return a room without the features of its outline up to a depth.

    Parameters
    ----------
    room
        The exact room.
    depth
        In metres, 0 or more; features that are this deep and no deeper, to a micrometre, are left out.
    tolerances
        ``chord``: walls that are off each other's line by no more are on one line; ``smooth``: walls that turn by
        less do not meet in a corner.

    Raises
    ------
    GeometryError
        For a depth below 0 or without end.
    """
    if not 0 <= depth < inf:
        raise GeometryError(f"features can be left out up to a depth of 0 or more, got {depth}")
    if depth == 0:
        return _untouched(room, 0.0)
    steps = LeavingOut(room, depth, tolerances)
    for _ in steps.levels():
        pass
    return _result(room, depth, steps)


def least_depth(room: Room, most: float = MOST, tolerances: Tolerances = Tolerances()) -> float | None:
    """Return the depth of :func:`least_simplified`, or ``None``."""
    least = least_simplified(room, most, tolerances)
    return least.depth if least is not None else None


def least_simplified(
    room: Room, most: float = MOST, tolerances: Tolerances = Tolerances()
) -> Simplified | None:
    """Return the room without its small features up to the least depth that leaves it a kernel.

    Parameters
    ----------
    room
        The exact room; if it has a kernel as it is, it comes back with depth 0.
    most
        In metres: deeper features are not small.
    tolerances
        As in :func:`simplified`.

    Returns
    -------
    Simplified or None
        ``None`` if there is no kernel up to the depth ``most``. A room with obstacles never has one: nobody sees the
        back of a column.
    """
    if kernel_of_rings(room.rings).kind != "empty":
        return _untouched(room, 0.0)
    if room.obstacles:
        return None
    # Most rooms need little: what is shallow is looked for first, which never changes the first steps.
    for limit in (most / 4, most):
        steps = LeavingOut(room, limit, tolerances)
        for depth in steps.levels():
            if depth and kernel_of_rings(steps.rings).kind != "empty":
                return _result(room, depth, steps)
    return None


def _untouched(room: Room, depth: float) -> Simplified:
    return Simplified(room, room, depth, (), tuple(WallRef(0, edge) for edge in range(len(room.outline))))


def _result(room: Room, depth: float, steps: LeavingOut) -> Simplified:
    if not steps.joints:
        return _untouched(room, depth)
    features = tuple(_feature(room, steps.walls, steps.joints[wall]) for wall in sorted(steps.joints))
    walls = tuple(WallRef(0, piece.edge) if piece.edge is not None else None for piece in steps.pieces)
    openings = (*_openings(room, steps), *(opening for opening in room.openings if opening.wall.ring))
    plain = replace(room, outline=steps.rings[0], openings=openings)
    return Simplified(room, plain, depth, features, walls)


def _openings(room: Room, steps: LeavingOut) -> Iterator[Opening]:
    """The openings of the simplified outline."""
    openings = [opening for opening in room.openings if opening.wall.ring == 0]
    for k, (piece, following) in enumerate(pairwise([*steps.pieces, steps.pieces[0]])):
        wall, length = WallRef(0, k), dist(piece.start, following.start)
        if piece.joint is not None:
            edges = steps.walls.edges_between(piece.joint.a, piece.joint.b)
            left_out = (opening.kind for edge in edges for opening in openings if opening.wall.edge == edge)
            yield Opening(wall, next(left_out, "feature"), length)
        elif piece.edge is not None:
            low, high = (_place(steps.walls, piece.edge, each.start) for each in (piece, following))
            for opening in openings:
                if opening.wall.edge == piece.edge:
                    span = tuple(min(1.0, max(0.0, (place - low) / (high - low))) for place in opening.span)
                    if span[0] < span[1]:
                        yield Opening(wall, opening.kind, (span[1] - span[0]) * length, (span[0], span[1]))


def _place(walls: StraightWalls, edge: int, point: Point) -> float:
    """Where along an edge of the exact outline a point on it lies, 0 to 1."""
    start, end = walls.edge_ends(edge)
    return 1.0 if point == end else dist(start, point) / dist(start, end)


def _feature(room: Room, walls: StraightWalls, joint: Joint) -> Feature:
    refs = tuple(WallRef(0, edge) for edge in walls.edges_between(joint.a, joint.b))
    opened = any(opening.wall in refs and opening.kind != "gap" for opening in room.openings)
    chain = np.array(joint.chain)
    ring = np.array([*joint.chain, *joint.path[-2:0:-1]])
    kind = _kind(joint, chain, opened)
    return Feature(kind, joint.depth, _width(joint), _halfway(chain), chain, ring, refs, joint.floor < 0)


def _kind(joint: Joint, chain: Floats, opened: bool) -> FeatureKind:
    if joint.shape == "step":
        return "jog"
    if joint.shape == "cut":
        return "chamfer" if len(chain) == 2 else "rounded corner"
    if joint.floor < 0:
        return "pilaster"
    if opened:
        return "reveal"
    way, flanks = chain[-1] - chain[0], np.diff(chain, axis=0)[[0, -1]]
    square = np.abs(flanks @ way) < SQUARE * np.hypot(*way) * np.hypot(*flanks.T)
    return "niche" if square.all() else "splayed niche"


def _width(joint: Joint) -> float:
    """The width of a step along the longer of its two walls, of others between the walls on either side."""
    if joint.shape == "step":
        return max(dist(u, v) for u, v in pairwise(joint.path if len(joint.path) > 1 else joint.chain))
    return dist(joint.chain[0], joint.chain[-1])


def _halfway(chain: Floats) -> Floats:
    """The point halfway along a chain."""
    places = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(chain, axis=0).T))])
    return np.array([np.interp(places[-1] / 2, places, chain[:, axis]) for axis in (0, 1)])
