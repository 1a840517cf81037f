"""A region cut by hundreds or thousands of half-planes, the deepest first, so that few are cut by at all.

Problem
    Cut a convex region by many half-planes of which only a few will bound it, without asking about them one by one.
Method
    All are asked about all corners in one matrix product. Those that surely hold every corner hold the region and are
    dropped. For each corner, the half-plane that has it farthest outside is cut by next; these cut away most of what
    has to go, so the next round drops most of the rest. It ends when no corner is surely outside any more, when so
    few are left that asking one by one is quicker, or when the region has very many sides, or many while most
    half-planes are still in doubt.
Exactness
    Which half-planes are cut by first is a mere hint: the cuts themselves are exact. What is dropped is surely held:
    lines, corners and bound are those of :mod:`~kernelscan.geometry.clipping`, whose proof does not depend on the
    order in which the three products are added. Overflow gives infinities or NaN, which do not compare as held.
Degenerate cases
    Borders that pass through corners, and all half-planes once the region is thin, stay in doubt; they are handed back.
Cost
    O(n k) in array operations for n half-planes and k corners a round; the number of corners can double each round.
Letters
    u, v, w a line, scaled so that |u| + |v| = 1; k a corner.
"""

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.clipping import ConvexRegion

__all__ = ["sift"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.int64]

FEW = 8
SOME_SIDES = 24
MANY_SIDES = 100


def sift(region: ConvexRegion, rows: Floats, numbers: Indices) -> Indices:
    """Cut a region by half-planes, and return the numbers of those not surely held: sides, and those still in doubt.

    Parameters
    ----------
    region
        An area.
    rows
        ``(m, 6)`` the half-planes.
    numbers
        ``(m,)`` their numbers, ascending.
    """
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        lines, reach = _lines(rows, region.origin)
        region.reach_to(reach)
        places = doubtful = np.arange(len(numbers))
        while region.shape == "area" and len(region.names) <= MANY_SIDES:
            values = np.array(region.corners) @ lines
            doubtful = np.flatnonzero(~(np.minimum.reduce(values) > region.bound))
            if len(region.names) > SOME_SIDES and 2 * len(doubtful) > len(numbers):
                break
            deepest = _deepest(values, region.bound) if len(doubtful) > FEW + len(region.names) else []
            if not deepest:
                break
            cutting = places[deepest]
            region.cut_by_rows(numbers[cutting], rows[cutting])
            if 2 * len(doubtful) < len(places):
                places, lines = places[doubtful], lines.take(doubtful, axis=1)
                doubtful = np.arange(len(places))
    return numbers[places[doubtful]]


def _lines(rows: Floats, origin: tuple[float, float]) -> tuple[Floats, float]:
    """Return ``(3, m)`` u, v, w as seen from the origin, and a bound on the coordinates of the border points."""
    p_x, p_y, t_x, t_y, h_x, h_y = rows.T
    u, v = t_y - h_y, h_x - t_x
    scale = np.abs(u) + np.abs(v)
    u, v = u / scale, v / scale
    g_x, g_y = origin[0] - p_x, origin[1] - p_y
    reach = max(float(g_x.max()), -float(g_x.min()), float(g_y.max()), -float(g_y.min()))
    return np.array([u, v, u * g_x + v * g_y]), reach


def _deepest(values: Floats, bound: float) -> list[int]:
    """Return the half-planes that have a corner farther outside than any other has, each once, the deepest first."""
    deepest = values.argmin(axis=1)
    depths = values[np.arange(len(values)), deepest].tolist()
    places = [place for depth, place in sorted(zip(depths, deepest.tolist(), strict=True)) if depth < -bound]
    return list(dict.fromkeys(places))
