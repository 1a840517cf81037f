"""Other ways to the intersection of a room's half-planes, for comparison; each returns about what it can.

All take an ``(n, 2)`` counter-clockwise ring and return the number of corners found, 0 for none. They work in floats:
their answers are not checked, and nearly degenerate rooms are beyond them.
"""

from math import atan2

import numpy as np
import shapely
from scipy.optimize import linprog
from scipy.spatial import ConvexHull, HalfspaceIntersection, QhullError

FAR = 1e3


def numpy_pass(ring: np.ndarray) -> int:
    """One plain pass over the edges: vectors, cross products with a point, comparison. It finds nothing."""
    ways = np.roll(ring, -1, axis=0) - ring
    sides = ways[:, 0] * (0.1 - ring[:, 1]) - ways[:, 1] * (0.2 - ring[:, 0])
    return int((sides >= 0).all())


def shapely_clipping(ring: np.ndarray) -> int:
    """Cut a box by one half-plane after the other, each a large rectangle, until nothing is left."""
    region = shapely.box(-FAR, -FAR, FAR, FAR)
    points = ring.tolist()
    for (ax, ay), (bx, by) in zip(points, points[1:] + points[:1], strict=True):
        length = ((bx - ax) ** 2 + (by - ay) ** 2) ** 0.5
        u, v = (bx - ax) / length * FAR, (by - ay) / length * FAR
        half = shapely.Polygon(
            [(ax - u, ay - v), (bx + u, by + v), (bx + u - v, by + v + u), (ax - u - v, ay - v + u)]
        )
        region = shapely.intersection(region, half)
        if region.is_empty:
            return 0
    return len(region.exterior.coords) - 1 if region.geom_type == "Polygon" else 0


def depths(ring: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Unit normals inward and offsets: n x >= o."""
    ways = np.roll(ring, -1, axis=0) - ring
    normals = np.column_stack([-ways[:, 1], ways[:, 0]]) / np.hypot(ways[:, 0], ways[:, 1])[:, None]
    return normals, (normals * ring).sum(axis=1)


def inner_point(normals: np.ndarray, offsets: np.ndarray) -> np.ndarray | None:
    """The deepest point by scipy's linear programming, or None."""
    table = np.column_stack([-normals, np.ones(len(normals))])
    result = linprog([0, 0, -1], A_ub=table, b_ub=-offsets, bounds=[(None, None)] * 3, method="highs")
    return result.x[:2] if result.status == 0 and result.x[2] > 0 else None


def scipy_halfspaces(ring: np.ndarray) -> int:
    """Linear programming for a point inside, and then HalfspaceIntersection around it."""
    normals, offsets = depths(ring)
    point = inner_point(normals, offsets)
    if point is None:
        return 0
    try:
        return len(HalfspaceIntersection(np.column_stack([-normals, offsets]), point).dual_vertices)
    except QhullError:
        return 0


def scipy_dual_hull(ring: np.ndarray) -> int:
    """Linear programming for a point inside, and then the convex hull of the dual points."""
    normals, offsets = depths(ring)
    point = inner_point(normals, offsets)
    if point is None:
        return 0
    try:
        return len(ConvexHull(-normals / (normals @ point - offsets)[:, None]).vertices)
    except QhullError:
        return 0


def float_deque(ring: np.ndarray) -> int:
    """The textbook method in plain Python floats: sort by angle, sweep with a double-ended queue."""
    points = ring.tolist()
    lines = []
    for (ax, ay), (bx, by) in zip(points, points[1:] + points[:1], strict=True):
        lines.append((atan2(by - ay, bx - ax), ax, ay, bx - ax, by - ay))
    lines.sort()
    queue: list = []
    corners: list = []
    first = 0
    for line in lines:
        while len(queue) - first > 1 and outside(line, corners[-1]):
            queue.pop()
            corners.pop()
        while len(queue) - first > 1 and outside(line, corners[first]):
            first += 1
        if len(queue) > first and abs(queue[-1][3] * line[4] - queue[-1][4] * line[3]) < 1e-15:
            if queue[-1][3] * line[3] + queue[-1][4] * line[4] < 0:
                return 0
            if outside(line, (queue[-1][1], queue[-1][2])):
                queue[-1] = line
                if len(queue) - first > 1:
                    corners[-1] = crossing(queue[-2], line)
            continue
        if len(queue) > first:
            corners.append(crossing(queue[-1], line))
        queue.append(line)
    while len(queue) - first > 2 and outside(queue[first], corners[-1]):
        queue.pop()
        corners.pop()
    return len(queue) - first if len(queue) - first > 2 else 0


def outside(line: tuple, point: tuple) -> bool:
    _, ax, ay, dx, dy = line
    return dx * (point[1] - ay) - dy * (point[0] - ax) < 0


def crossing(g: tuple, h: tuple) -> tuple[float, float]:
    _, ax, ay, dx, dy = g
    _, bx, by, ex, ey = h
    t = ((bx - ax) * ey - (by - ay) * ex) / (dx * ey - dy * ex)
    return ax + t * dx, ay + t * dy
