"""The edges of many outlines in arrays: where a point lies along an edge, and how far behind it, outside the room."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from kernelscan.geometry.rings import Ring

__all__ = ["WallEdges", "wall_edges"]

STRAIGHT_ON = 1e-3
"""Edges that meet at a smaller turn (radians) are one straight wall that a vertex splits."""


@dataclass(frozen=True, slots=True, eq=False)
class WallEdges:
    """All the edges of some outlines, outline by outline.

    Attributes
    ----------
    a, b
        ``(n, 2)`` ends in metres.
    way, length
        ``(n, 2)`` unit directions, and ``(n,)`` metres.
    ring, number
        ``(n,)``: which outline each is of, and which edge of it.
    before, after
        ``(n,)``: the edges of the same outline on either side.
    corner
        ``(n, 2)``: whether there is a corner at the first end, and at the second; else the wall goes on smoothly.
    curved
        ``(n,)``: whether it stands for a piece of a curved wall.
    """

    a: np.ndarray
    b: np.ndarray
    way: np.ndarray
    length: np.ndarray
    ring: np.ndarray
    number: np.ndarray
    before: np.ndarray
    after: np.ndarray
    corner: np.ndarray
    curved: np.ndarray

    def along(self, i: np.ndarray, points: np.ndarray) -> np.ndarray:
        """Return how far along the edges ``i`` points lie."""
        return np.asarray(((points - self.a[i]) * self.way[i]).sum(axis=1))

    def behind(self, i: np.ndarray, points: np.ndarray) -> np.ndarray:
        """Return how far points lie outside the room from the lines of the edges ``i``."""
        return self.outward(i, points - self.a[i])

    def outward(self, i: np.ndarray, steps: np.ndarray) -> np.ndarray:
        """Return how far steps lead out of the room through the edges ``i``."""
        way = self.way[i]
        return np.asarray(steps[:, 0] * way[:, 1] - steps[:, 1] * way[:, 0])

    def points(self, i: np.ndarray, along: np.ndarray, behind: np.ndarray) -> np.ndarray:
        """Return the points so far along the edges ``i`` and so far behind them."""
        way = self.way[i]
        out = np.column_stack((way[:, 1], -way[:, 0]))
        return np.asarray(self.a[i] + along[:, None] * way + behind[:, None] * out)


def wall_edges(rings: Sequence[Ring], origin: np.ndarray, smooth: float) -> WallEdges:
    """Return the edges of outlines, counter-clockwise, as coordinates from an origin.

    Parameters
    ----------
    rings
        In metres, at least one.
    origin
        ``(2,)`` metres.
    smooth
        Where edges turn by this much or more, in radians, there is a corner.
    """
    counts = np.array([len(ring) for ring in rings])
    starts = np.cumsum(counts) - counts
    a = np.concatenate(rings) - origin
    index = np.arange(len(a))
    after = index + 1
    after[starts + counts - 1] = starts
    before = np.empty_like(after)
    before[after] = index
    length = np.hypot(*(a[after] - a).T)
    way = (a[after] - a) / length[:, None]
    turn = np.abs(_turns(way[before], way))
    corner, bent = turn >= smooth, (turn > STRAIGHT_ON) & (turn < smooth)
    return WallEdges(
        a,
        a[after],
        way,
        length,
        np.repeat(np.arange(len(rings)), counts),
        index - np.repeat(starts, counts),
        before,
        after,
        np.column_stack((corner, corner[after])),
        bent | bent[after],
    )


def _turns(back: np.ndarray, ahead: np.ndarray) -> np.ndarray:
    cross = back[:, 0] * ahead[:, 1] - back[:, 1] * ahead[:, 0]
    return np.asarray(np.arctan2(cross, (back * ahead).sum(axis=1)))
