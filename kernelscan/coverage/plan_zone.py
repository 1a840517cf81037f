"""The area in plan in which a lens may be that is fixed to no wall: under a ceiling, or on a stand."""

from dataclasses import dataclass
from math import acos, ceil, cos, hypot, inf, pi

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.device_zones import Conditions, free_conditions
from kernelscan.coverage.limits import Limits
from kernelscan.geometry.shapes import (
    Patch,
    covers_points,
    deepest_point,
    difference,
    intersection,
    nearest_point,
)
from kernelscan.plan import Room

__all__ = ["PlanZone", "plan_zone"]

Floats = npt.NDArray[np.float64]

CHORD = 1e-4
"""Metres by which the straight pieces of a flattened zone may stay inside its arcs."""
DEPTH_ERROR = 1e-3
"""Metres by which the best point may be less deep than the deepest."""


@dataclass(frozen=True, slots=True, eq=False)
class PlanZone:
    """The positions in plan from which a device that sees all round covers the room.

    Attributes
    ----------
    conditions
        What a position must fulfil: these, and nothing else, say what is in the zone.
    pieces
        The zone flattened, each piece inside it and no more than 0.1 mm from its border. Empty where the zone is no
        more than a point or a segment.
    corners
        ``(k, 2)``: the corners of the half-planes' intersection, which the reach and the clearances cut further.
    """

    conditions: Conditions
    pieces: tuple[Patch, ...]
    corners: Floats

    def best(self) -> Floats:
        """Return the position that may be missed by most, ``(2,)``, to a few millimetres of depth.

        Where a long zone has many such positions, it is the middle of them.
        """
        if not self.pieces:
            return np.asarray(self.corners.mean(axis=0))
        points = np.array([deepest_point(piece, DEPTH_ERROR) for piece in self.pieces])
        depths = self.tolerances(points)
        point, depth = points[depths.argmax()], float(depths.max()) - 2 * DEPTH_ERROR
        if depth <= 0:
            return np.asarray(point)
        deeper = self.conditions.moved_in(depth)
        for piece in _flattened(deeper, deeper.common_corners()):
            middle = np.asarray(piece.outline, dtype=np.float64).mean(axis=0)
            if covers_points(piece, point)[0] and self.tolerances(middle[None])[0] >= depth:
                return np.asarray(middle)
        return np.asarray(point)

    def nearest(self, wanted: Floats) -> Floats:
        """Return the position nearest to a wanted spot, ``(2,)``."""
        if not self.pieces:
            return self.best()
        points = [nearest_point(piece, wanted) for piece in self.pieces]
        return min(points, key=lambda point: hypot(*(point - wanted)))

    def tolerances(self, points: Floats) -> Floats:
        """Return by how much each position, ``(m, 2)``, may be missed: negative outside the zone."""
        return np.asarray(np.minimum(self.conditions.slack(points), self.conditions.clear_of(points, points)))


def plan_zone(room: Room, limits: Limits) -> PlanZone | None:
    """Return where a lens that sees all round covers the room, or ``None`` if nowhere."""
    needed = free_conditions(room, limits)
    corners = needed.common_corners()
    if len(corners) == 0:
        return None
    zone = PlanZone(needed, tuple(_flattened(needed, corners)), corners)
    return zone if zone.tolerances(zone.best()[None])[0] >= -DEPTH_ERROR * 1e-3 else None


def _flattened(needed: Conditions, corners: Floats) -> list[Patch]:
    if len(corners) < 3 or needed.reach < 0:
        return []
    pieces = [Patch(corners)]
    if needed.reach < inf:
        too_far = np.hypot(*np.moveaxis(corners[:, None] - needed.corners, 2, 0)).max(axis=0) > needed.reach
        for centre in needed.corners[too_far]:
            disc = Patch(_disc(centre, needed.reach))
            pieces = [part for piece in pieces for part in intersection(piece, disc)]
    if len(needed.keep_out):
        shut = [
            Patch(_capsule(segment, margin))
            for segment, margin in zip(needed.keep_out, needed.margins.tolist(), strict=True)
        ]
        pieces = [part for piece in pieces for part in difference(piece, shut)]
    return pieces


def _turns(radius: float) -> int:
    """How many straight pieces keep a circle within the chord error."""
    return max(16, 4 * ceil(pi / acos(max(0.0, 1 - CHORD / max(radius, CHORD))) / 4))


def _disc(centre: Floats, radius: float) -> Floats:
    """A polygon inside a disc."""
    angles = 2 * pi / _turns(radius) * np.arange(_turns(radius))
    return np.asarray(centre + radius * np.column_stack([np.cos(angles), np.sin(angles)]))


def _capsule(segment: Floats, radius: float) -> Floats:
    """A polygon around everything nearer than the radius to a segment."""
    way = segment[1] - segment[0]
    heading = np.arctan2(way[1], way[0])
    count = _turns(radius) // 2
    arc = pi / count * np.arange(count + 1)
    outside = radius / cos(pi / count / 2)
    ends = []
    for end, turn in zip(segment[::-1], (heading - pi / 2, heading + pi / 2), strict=True):
        ends.append(end + outside * np.column_stack([np.cos(turn + arc), np.sin(turn + arc)]))
    return np.concatenate(ends)
