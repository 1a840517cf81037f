"""Polygon overlay and spatial search: the one module that knows shapely, behind a few functions on arrays.

Shapely works in doubles and rounds what it constructs. Nothing here decides a kernel or a visible region; it
serves where a rounded answer is right (areas for a table, label points, joining obstacles with walls) or where
only candidates are wanted, which others then settle exactly.
"""

import numpy as np
import numpy.typing as npt
import shapely

__all__ = ["overlapping_boxes"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.intp]


def overlapping_boxes(low: Floats, high: Floats) -> tuple[Indices, Indices]:
    """Return the pairs i < j of closed boxes that overlap; ``low`` and ``high`` are their corners, ``(n, 2)``."""
    boxes = shapely.box(low[:, 0], low[:, 1], high[:, 0], high[:, 1])
    i, j = shapely.STRtree(boxes).query(boxes)
    once = i < j
    return i[once], j[once]
