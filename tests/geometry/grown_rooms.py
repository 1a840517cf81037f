"""Random rooms for the tests, with integer corners on purpose: walls in line and corners in line with eyes abound."""

import numpy as np
import numpy.typing as npt

from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import Ring, as_ring, as_rings

Floats = npt.NDArray[np.float64]


def grown_ring(rng: np.random.Generator, corners: int, size: int) -> Floats:
    """Start from a triangle and add random grid points, each between two corners where the ring stays simple."""
    points = None
    while points is None:
        points = _simple(rng.integers(0, size, (3, 2)).astype(float))
    for _ in range(20 * corners):
        if len(points) >= corners:
            break
        place = int(rng.integers(len(points)))
        longer = _simple(np.insert(points, place, rng.integers(0, size, 2), axis=0))
        points = points if longer is None else longer
    return points


def _simple(points: Floats) -> Floats | None:
    try:
        return as_ring(points)
    except GeometryError:
        return None


def grown_room(rng: np.random.Generator, corners: int, holes: int, size: int) -> tuple[Ring, ...]:
    """Return an outline with up to that many holes, which may touch it and each other in points."""
    rings = as_rings(grown_ring(rng, corners, size))
    for _ in range(12 * holes):
        if len(rings) > holes:
            break
        hole = grown_ring(rng, int(rng.integers(3, 6)), max(3, size // 3)) + rng.integers(0, size, 2)
        try:
            rings = as_rings(rings[0], [*rings[1:], hole])
        except GeometryError:
            continue
    return rings


def star(rng: np.random.Generator, corners: int, low: float = 0.5, high: float = 1.0) -> Floats:
    """Return a ring around the origin that sees all of it, its corners at random distances."""
    angle = (np.arange(corners) + rng.uniform(0, 0.9, corners)) * 2 * np.pi / corners
    radius = rng.uniform(low, high, corners)
    return np.column_stack([radius * np.cos(angle), radius * np.sin(angle)])


def columned_room(rng: np.random.Generator, corners: int, columns: int) -> tuple[Ring, ...]:
    """Return a round room of about that many corners in all, with a grid of many-cornered columns."""
    each, grid = corners // (columns + 1), int(np.ceil(np.sqrt(columns)))
    centres = [((i + 0.5) / grid - 0.5, (j + 0.5) / grid - 0.5) for i in range(grid) for j in range(grid)]
    outline = star(rng, corners - each * columns, 0.9)
    return as_rings(outline, [star(rng, each) * 0.4 / grid + centre for centre in centres[:columns]])
