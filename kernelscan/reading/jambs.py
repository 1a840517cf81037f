"""Jambs, the short lines of walls that stand square to a wall's face, and the ends that they give to openings.

A leaf that is drawn open, without the arc that it swings on, does not say to which side of its hinge it closes; the
jamb that is a leaf's length off does.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from kernelscan.geometry.shapes import lines_near
from kernelscan.reading.layers import LayerRole
from kernelscan.reading.segments import WALL, segments_of
from kernelscan.reading.strokes import Stroke
from kernelscan.reading.wall_edges import WallEdges
from kernelscan.tolerances import Tolerances

__all__ = ["Jambs", "jambs_of"]

NEAR = 0.1
"""An opening's end goes to a jamb no farther off than this, in metres: frames and leaves stand beside jambs."""

SQUARE = 0.99
"""Sine of the least angle between a jamb and the face of its wall."""


@dataclass(frozen=True, slots=True, eq=False)
class Jambs:
    """Lines short enough to be jambs: their ends, ``(n, 2)`` metres."""

    a: np.ndarray
    b: np.ndarray

    def nearest(self, edge: np.ndarray, place: np.ndarray, walls: WallEdges) -> np.ndarray:
        """Return for places along edges, ``(k,)`` each, where along the edge the nearest jamb is.

        Where no jamb of that wall is near, the answer is not a number.
        """
        found = np.full(len(place), np.nan)
        if not len(place) or not len(self.a):
            return found
        k, j = lines_near(walls.points(edge, place, np.zeros(len(place))), self.a, self.b, NEAR)
        step, i = (self.b - self.a)[j], edge[k]
        square = np.abs(walls.outward(i, step)) >= SQUARE * np.hypot(*step.T)
        k, j, i = k[square], j[square], i[square]
        at = np.clip(walls.along(i, (self.a[j] + self.b[j]) / 2), 0.0, walls.length[i])
        off = np.abs(at - place[k])
        order = np.lexsort((off, k))[::-1]  # of several for one place the last written is the nearest
        found[k[order]] = np.where(off[order] <= NEAR, at[order], np.nan)
        return found


def jambs_of(
    strokes: Sequence[Stroke],
    roles: Mapping[str, LayerRole],
    metres: float,
    origin: np.ndarray,
    tolerances: Tolerances,
) -> Jambs:
    """Return the lines on wall layers that are no longer than a wall is thick, as coordinates from an origin."""
    walls = [stroke for stroke in strokes if roles[stroke.layer].role == "wall"]
    lines = segments_of(walls, [WALL] * len(walls), metres, origin)
    short = lines.length <= tolerances.thickest_wall + tolerances.snap
    return Jambs(lines.a[short], lines.b[short])
