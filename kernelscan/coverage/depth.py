"""How deep points lie behind lines, and the deepest point along a straight way."""

from collections.abc import Callable

import numpy as np
import numpy.typing as npt

__all__ = ["deepest_along", "line_depths"]

Floats = npt.NDArray[np.float64]

PLACES = 17
"""Points at which a way is tried at a time."""


def line_depths(points: Floats, lines: Floats) -> Floats:
    """Return how far left of each line, ``(k, 2, 2)``, each point, ``(m, 2)``, lies: ``(m, k)``."""
    ways = lines[:, 1] - lines[:, 0]
    ways = ways / np.hypot(ways[:, 0], ways[:, 1])[:, None]
    offsets = points[:, None] - lines[None, :, 0]
    return np.asarray(ways[:, 0] * offsets[..., 1] - ways[:, 1] * offsets[..., 0])


def deepest_along(start: Floats, end: Floats, depth: Callable[[Floats], Floats]) -> Floats:
    """Return the point between two ends at which a concave depth is greatest, to a billionth of the way.

    Parameters
    ----------
    start, end
        ``(2,)`` each.
    depth
        Takes ``(m, 2)`` points and gives ``(m,)`` depths. On a flat top the middle is the best: it leaves the most
        room to slide either way.
    """
    low, high = 0.0, 1.0
    while high - low > 1e-9:
        places = np.linspace(low, high, PLACES)
        depths = depth(start + places[:, None] * (end - start))
        top = np.flatnonzero(depths >= depths.max() - 1e-9)
        if len(top) > 2:
            low = high = float(places[top].mean())
        else:
            low, high = float(places[max(top[0] - 1, 0)]), float(places[min(top[-1] + 1, PLACES - 1)])
    return np.asarray(start + (low + high) / 2 * (end - start))
