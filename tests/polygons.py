"""Families of random rooms for the tests and the benchmarks; every one is a function of a numpy generator."""

from collections.abc import Callable, Iterator
from fractions import Fraction
from itertools import pairwise
from math import cos, pi, sin

import numpy as np

Rng = np.random.Generator
Points = np.ndarray


def star(rng: Rng, n: int) -> Points:
    """Random radii at sorted random angles: the centre sees every wall."""
    angles = np.zeros(n)
    while np.diff(angles, append=angles[0] + 2 * pi).max() >= pi:
        angles = np.sort(rng.uniform(0, 2 * pi, n))
    return polar(angles, rng.uniform(0.3, 1.0, n) * 10)


def even_star(rng: Rng, n: int) -> Points:
    """Random radii at equal angles."""
    return polar(np.arange(n) * (2 * pi / n), rng.uniform(0.5, 1.5, n) * 10)


def smooth_star(n: int, waves: int = 5, depth: float = 0.3) -> Points:
    """A smooth curve with a few lobes."""
    angles = np.arange(n) * (2 * pi / n)
    return polar(angles, 10 * (1 + depth * np.cos(waves * angles)))


def convex(n: int) -> Points:
    """A regular polygon."""
    return polar(np.arange(n) * (2 * pi / n), np.full(n, 10.0))


def dented(n: int, every: int = 20) -> Points:
    """A regular polygon with a shallow dent at every so many corners: a kernel of about n / 10 sides."""
    angles = np.arange(n) * (2 * pi / n)
    radii = np.full(n, 10.0)
    radii[::every] -= 100 * (1 - cos(2 * pi / n))
    return polar(angles, radii)


def comb(n: int) -> Points:
    """Teeth side by side; nothing sees into all of them."""
    teeth = max(2, (n - 2) // 4)
    x = np.arange(4 * teeth) // 2 + 0.0
    y = np.tile([1.0, 5.0, 5.0, 1.0], teeth)
    top = np.column_stack([x, y])[::-1]
    return np.concatenate([[[0.0, 0.0], [x[-1], 0.0]], top])


def orthogonal_star(rng: Rng, n: int) -> Points:
    """Four staircases around a middle square that sees everything: a large room of right angles."""
    steps = max(1, n // 8)
    sides = []
    for quarter in range(4):
        x = 1 + np.cumsum(rng.uniform(0.1, 1.0, steps))
        y = 1 + np.cumsum(rng.uniform(0.1, 1.0, steps))[::-1]
        corners = np.empty((2 * steps, 2))
        corners[0::2] = np.column_stack([x[::-1], np.concatenate([[1.0], y[::-1][:-1]])])
        corners[1::2] = np.column_stack([x[::-1], y[::-1]])
        turn = np.linalg.matrix_power(np.array([[0.0, -1.0], [1.0, 0.0]]), quarter)
        sides.append(corners @ turn.T)
    return np.concatenate(sides)


def polyomino(rng: Rng, cells: int) -> Points:
    """The outline of cells grown at random on a grid, without holes or corners that touch."""
    while True:
        outline = outline_of_cells(grown_cells(rng, cells))
        if outline is not None:
            return outline


def grown_cells(rng: Rng, count: int) -> set[tuple[int, int]]:
    cells = {(0, 0)}
    while len(cells) < count:
        x, y = sorted(cells)[rng.integers(len(cells))]
        dx, dy = ((1, 0), (-1, 0), (0, 1), (0, -1))[rng.integers(4)]
        cells.add((x + dx, y + dy))
    return cells


def outline_of_cells(cells: set[tuple[int, int]]) -> Points | None:
    """The boundary as one ring, or ``None`` if it is not a simple one."""
    following: dict[tuple[int, int], tuple[int, int]] = {}
    for x, y in cells:
        square = ((x, y), (x + 1, y), (x + 1, y + 1), (x, y + 1))
        outside = ((x, y - 1), (x + 1, y), (x, y + 1), (x - 1, y))
        for k, cell in enumerate(outside):
            if cell in cells:
                continue
            if square[k] in following:
                return None
            following[square[k]] = square[(k + 1) % 4]
    start = min(following)
    ring, at = [start], following.pop(start)
    while at != start:
        ring.append(at)
        at = following.pop(at)
    return None if following else np.array(ring, dtype=float)


def untangled(rng: Rng, n: int, grid: int | None = None) -> Points:
    """A simple polygon through random points, by undoing crossings; on a small integer grid if one is given."""
    while True:
        points = rng.integers(0, grid, (n, 2)).astype(float) if grid else rng.uniform(0, 10, (n, 2))
        ring = two_opt(points.tolist())
        if ring is not None:
            return np.array(ring)


def two_opt(ring: list[list[float]]) -> list[list[float]] | None:
    """Reverse stretches between crossing edges until none cross; ``None`` if some still touch."""
    n = len(ring)
    for _ in range(4 * n * n):
        crossing = next((pair for pair in pairs(n) if properly_cross(ring, *pair)), None)
        if crossing is None:
            return ring if is_simple(ring) else None
        i, j = crossing
        ring[i + 1 : j + 1] = ring[i + 1 : j + 1][::-1]
    return None


def pairs(n: int) -> Iterator[tuple[int, int]]:
    return ((i, j) for i in range(n) for j in range(i + 2, n) if (i, j) != (0, n - 1))


def exact_side(a: list[float], b: list[float], p: list[float]) -> int:
    (ax, ay), (bx, by), (px, py) = ((Fraction(u), Fraction(v)) for u, v in (a, b, p))
    s = (bx - ax) * (py - ay) - (by - ay) * (px - ax)
    return (s > 0) - (s < 0)


def sides_of_pair(ring: list[list[float]], i: int, j: int) -> tuple[int, int, int, int]:
    a, b, c, d = ring[i], ring[(i + 1) % len(ring)], ring[j], ring[(j + 1) % len(ring)]
    return exact_side(a, b, c), exact_side(a, b, d), exact_side(c, d, a), exact_side(c, d, b)


def properly_cross(ring: list[list[float]], i: int, j: int) -> bool:
    s = sides_of_pair(ring, i, j)
    return s[0] * s[1] < 0 and s[2] * s[3] < 0


def is_simple(ring: list[list[float]]) -> bool:
    n = len(ring)
    for i in range(n):
        a, b, c = ring[i - 1], ring[i], ring[(i + 1) % n]
        if b == c or (
            exact_side(a, b, c) == 0 and (b[0] - a[0]) * (c[0] - b[0]) + (b[1] - a[1]) * (c[1] - b[1]) <= 0
        ):
            return False
    return not any(meet(ring, i, j) for i, j in pairs(n))


def meet(ring: list[list[float]], i: int, j: int) -> bool:
    s = sides_of_pair(ring, i, j)
    if any(s):
        return s[0] * s[1] <= 0 and s[2] * s[3] <= 0
    n = len(ring)
    a, b, c, d = ring[i], ring[(i + 1) % n], ring[j], ring[(j + 1) % n]
    return all(max(a[k], b[k]) >= min(c[k], d[k]) and max(c[k], d[k]) >= min(a[k], b[k]) for k in (0, 1))


def mixed(rng: Rng) -> Points:
    """A room of 4 to 40 edges as they come: stars, right angles, rectangles with niches."""
    n = int(rng.integers(4, 41))
    kind = rng.integers(4)
    if kind == 0:
        return star(rng, n)
    if kind == 1:
        return turned(polyomino(rng, max(1, n // 3)), rng.uniform(0, 2 * pi) if rng.integers(2) else 0.0)
    if kind == 2:
        return rectangle_with_niches(rng, n)
    return even_star(rng, n)


def rectangle_with_niches(rng: Rng, n: int) -> Points:
    """An 8 x 5 m rectangle whose lower wall has splayed niches going outward."""
    count = max(0, (n - 4) // 4)
    x = np.sort(rng.uniform(0.2, 7.8, 4 * count)).reshape(-1, 4)
    depth = rng.uniform(0.05, 0.4, count)
    niches = [
        [(a, 0), (b, -d), (c, -d), (e, 0)] for (a, b, c, e), d in zip(x.tolist(), depth.tolist(), strict=True)
    ]
    lower = [point for niche in niches for point in niche]
    return np.array([(0, 0), *lower, (8, 0), (8, 5), (0, 5)], dtype=float)


def polar(angles: np.ndarray, radii: np.ndarray) -> Points:
    return np.column_stack([radii * np.cos(angles), radii * np.sin(angles)])


def turned(points: Points, angle: float) -> Points:
    """Turned about the origin; by an exact quarter where that is meant."""
    c, s = cos(angle), sin(angle)
    return points @ np.array([[c, s], [-s, c]])


def mirrored(points: Points) -> Points:
    return (points * [-1.0, 1.0])[::-1]


# Rooms that are nearly degenerate.


def crank(rng: Rng, w: float) -> Points:
    """Two rooms side by side that share a strip of width w; the kernel is in that strip."""
    return np.array([(0, 0), (4 + w, 0), (4 + w, 2), (8, 2), (8, 6), (4, 6), (4, 4), (0, 4)])


def pinwheel(rng: Rng, w: float) -> Points:
    """Blades whose inner walls pass the middle at the distance w, all on the same side."""
    blades = int(rng.integers(3, 7))
    ring = []
    for k in range(blades):
        t = 2 * pi * k / blades
        way, left = np.array([cos(t), sin(t)]), np.array([-sin(t), cos(t)])
        ring += [way * 2 - left * w, way * 4 - left * w]
    return np.array(ring)


def pilaster(rng: Rng, w: float) -> Points:
    """A rectangle with a pilaster of depth w, or a niche if w is negative."""
    return np.array([(0, 0), (2.8, 0), (2.8, w), (3.2, w), (3.2, 0), (6, 0), (6, 4), (0, 4)])


def facing_corners(rng: Rng, w: float) -> Points:
    """Two reflex corners from either side, w apart in x, as in a U and its mirror image."""
    return np.array([(0, 0), (9, 0), (9, 6), (4.5 + w, 6), (4.5, 3), (4.5, 6.5), (0, 6)])


def bow(rng: Rng, w: float) -> Points:
    """A wall bent by w at its middle, facing one bent the other way."""
    return np.array([(0, 0), (3, w), (6, 0), (6, 4), (3.1, 4 - w), (0, 4)])


def narrow_star(rng: Rng, w: float) -> Points:
    """A star whose kernel is squeezed to about w by two nearly parallel walls."""
    return np.array([(0, 0), (5, 1), (10, 0), (10, 2 + w), (5.5, 1 + w), (0, 2 + 2 * w)])


def cross(rng: Rng, w: float) -> Points:
    """Four arms; opposite walls of the arms are off by w, so that the middle is no rectangle."""
    return np.array([
        (4, 0), (6, 0), (6, 4), (10, 4), (10, 6), (6 + w, 6),
        (6 + w, 10), (4 + w, 10), (4 + w, 6), (0, 6), (0, 4), (4, 4),
    ])  # fmt: skip


Degenerate = Callable[[Rng, float], Points]
NEARLY_DEGENERATE: tuple[Degenerate, ...] = (
    crank, pinwheel, pilaster, facing_corners, bow, narrow_star, cross,
)  # fmt: skip


def nearly_degenerate(rng: Rng, large: bool = False) -> Points:
    """A room on the brink of having no kernel, turned, mirrored, moved up to 5e6 away and with walls split.

    The result may be refused (a duplicate point, a spike of no area, a wall that touches another): that is part of
    the family.
    """
    width = 0.0 if rng.integers(5) == 0 else float(rng.choice([-1, 1])) * 10 ** rng.uniform(-15, -5)
    points = NEARLY_DEGENERATE[rng.integers(len(NEARLY_DEGENERATE))](rng, width)
    points = with_splits(rng, points, 4400 if large else int(rng.integers(0, 4)))
    points = turned(points, [0.0, pi / 2, rng.uniform(0, 2 * pi)][rng.integers(3)])
    if rng.integers(2):
        points = mirrored(points)
    if rng.integers(2):
        points = points + rng.uniform(-5e6, 5e6, 2)
    if not large and rng.integers(20) == 0:
        points = spoiled(rng, points)
    return np.roll(points, int(rng.integers(len(points))), axis=0)


def with_splits(rng: Rng, points: Points, count: int) -> Points:
    """Split walls by points on them or nearly on them: walls of nearly equal angles."""
    if count == 0:
        return points
    edges = np.sort(rng.integers(len(points), size=count))
    ring: list[Points] = []
    for k, (p, q) in enumerate(pairwise([*points, points[0]])):
        places = np.sort(rng.uniform(0.01, 0.99, int((edges == k).sum())))
        way = q - p
        off = 0.0 if rng.integers(2) else 10 ** rng.uniform(-16, -9)
        normal = np.array([-way[1], way[0]])
        offsets = off * rng.uniform(-1, 1, len(places))
        ring += [p[None], p + places[:, None] * way + offsets[:, None] * normal]
    return np.concatenate(ring)


def spoiled(rng: Rng, points: Points) -> Points:
    """Repeat a point, which is harmless, or add a spike of no area, which is refused."""
    k = int(rng.integers(len(points)))
    if rng.integers(2):
        return np.insert(points, k, points[k], axis=0)
    tip = points[k] + rng.uniform(0.1, 1.0, 2)
    return np.insert(points, k, [points[k], tip], axis=0)


def nearly_convex(rng: Rng, n: int) -> Points:
    """A regular polygon with corners off by a hair or dented, and its edges split by nearly collinear points."""
    angles = np.arange(n) * (2 * pi / n)
    corners = polar(angles, 1 + rng.choice([0, 0, 0, 1e-12, -1e-12, -0.01], n))
    points = []
    for a, b in zip(corners, np.roll(corners, -1, axis=0), strict=True):
        points.append(a)
        if rng.random() < 0.5:
            points.append(a + rng.choice([rng.random(), 0.5, 1e-9]) * (b - a))
    return np.array(points)
