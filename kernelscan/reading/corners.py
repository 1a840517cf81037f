"""The corners of a face made clean: what snapping and noding left behind is taken out again.

A face's ring has a vertex wherever a line was cut, and short steps where ends were joined. A vertex on a straight
wall is no corner; a step shorter than the snap distance is one corner, where the two walls beside it meet.
"""

import numpy as np

__all__ = ["clean_ring"]

SHARPEST = 0.05
"""Walls that meet at a smaller angle (radians) are not extended to their crossing, which may be far off."""


def clean_ring(
    ring: np.ndarray, codes: np.ndarray, snap: float, straight: float
) -> tuple[np.ndarray, np.ndarray]:
    """Return the ring without steps and without vertices on straight walls, and its edges' codes.

    Parameters
    ----------
    ring
        ``(n, 2)``, simple.
    codes
        ``(n,)``, what each edge is.
    snap
        Steps shorter than this are taken out.
    straight
        A vertex that strays less than this from the line between its neighbours is no corner, if the edges beside it
        are of one code.
    """
    points, kinds = _without_steps([tuple(p) for p in ring.tolist()], codes.tolist(), snap)
    points, kinds = _without_straight(points, kinds, straight)
    return np.array(points, dtype=np.float64).reshape(-1, 2), np.array(kinds, dtype=np.int64)


Point = tuple[float, float]


def _without_steps(points: list[Point], codes: list[int], snap: float) -> tuple[list[Point], list[int]]:
    """Take out each run of edges shorter than ``snap``: its corner is where the edges beside it would meet."""
    n = len(points)
    short = [_distance(points[k], points[(k + 1) % n]) < snap for k in range(n)]
    if not any(short) or sum(not s for s in short) < 3:
        return points, codes
    first = next(k for k in range(n) if not short[k - 1])
    out: list[Point] = []
    kinds: list[int] = []
    k = 0
    while k < n:
        at = (first + k) % n
        run = 0
        while short[(at + run) % n]:
            run += 1
        end = (at + run) % n
        before, after = points[at - 1], points[(end + 1) % n]
        corner = points[at] if run == 0 else _meeting(before, points[at], points[end], after, snap)
        out.append(corner)
        kinds.append(codes[end])
        k += run + 1
    return out, kinds


def _meeting(before: Point, start: Point, end: Point, after: Point, snap: float) -> Point:
    """Return where the line that arrives at ``start`` and the one that leaves ``end`` meet, if that is near by."""
    ux, uy = start[0] - before[0], start[1] - before[1]
    vx, vy = after[0] - end[0], after[1] - end[1]
    cross = ux * vy - uy * vx
    middle = (start[0] + end[0]) / 2, (start[1] + end[1]) / 2
    if abs(cross) <= SHARPEST * np.hypot(ux, uy) * np.hypot(vx, vy):
        return middle
    share = ((end[0] - start[0]) * vy - (end[1] - start[1]) * vx) / cross
    x, y = start[0] + share * ux, start[1] + share * uy
    return (x, y) if np.hypot(x - middle[0], y - middle[1]) <= 4 * snap else middle


def _without_straight(
    points: list[Point], codes: list[int], straight: float
) -> tuple[list[Point], list[int]]:
    """Take out vertices that lie on the line between the corner kept before and the next vertex."""
    n = len(points)
    corners = [
        k
        for k in range(n)
        if _is_corner(points[k - 1], points[k], points[(k + 1) % n], codes[k - 1], codes[k], straight)
    ]
    if len(corners) < 3:
        return points, codes
    out = [corners[0]]
    start = corners[0]
    for step in range(1, n):
        k = (start + step) % n
        after = points[(k + 1) % n]
        if _is_corner(points[out[-1]], points[k], after, codes[k - 1], codes[k], straight):
            out.append(k)
    return [points[k] for k in out], [codes[k] for k in out]


def _is_corner(before: Point, at: Point, after: Point, code_in: int, code_out: int, straight: float) -> bool:
    if code_in != code_out:
        return True
    dx, dy = after[0] - before[0], after[1] - before[1]
    long = np.hypot(dx, dy)
    if long == 0:
        return True
    stray = abs((at[0] - before[0]) * dy - (at[1] - before[1]) * dx) / long
    forward = (at[0] - before[0]) * dx + (at[1] - before[1]) * dy
    return bool(stray > straight or not 0 <= forward <= long * long)


def _distance(a: Point, b: Point) -> float:
    return float(np.hypot(a[0] - b[0], a[1] - b[1]))
