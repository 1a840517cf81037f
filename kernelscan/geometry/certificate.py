"""An exact check of a kernel, by other means than those that found it.

Problem
    Given a room and what is said to be its kernel, accept it if every part of it is true, else say what is not.
Method
    The sides of the kernel lie on walls, so it cannot be smaller than the kernel of all; it must be shown not to be
    larger: every wall's half-plane holds its corners.
"""

from collections.abc import Iterable, Sequence
from fractions import Fraction
from typing import Any

import numpy as np
import numpy.typing as npt

from kernelscan.errors import CertificateError
from kernelscan.geometry.rings import Ring, as_rings

__all__ = ["verify_kernel"]

Point = tuple[Fraction, Fraction]
Wall = tuple[Point, Point]


def verify_kernel(outline: npt.ArrayLike, kernel: Any, holes: Iterable[npt.ArrayLike] = ()) -> None:
    """Accept a kernel of a room, or raise."""
    rings = as_rings(outline, holes)
    walls = [wall for ring in rings for wall in _walls(ring)]
    if kernel.kind == "empty":
        _check_conflict([_wall(rings, *name) for name in kernel.conflict.tolist()])
        return
    corners = kernel.rationals()
    rounded = [[float(x), float(y)] for x, y in corners]
    if rounded != np.asarray(kernel.vertices).tolist():
        raise CertificateError("a vertex is not where its walls meet")
    for wall in walls:
        if any(_side(wall, corner) < 0 for corner in corners):
            raise CertificateError("a wall cuts the kernel")


def _walls(ring: Ring) -> list[Wall]:
    points = [(Fraction(x), Fraction(y)) for x, y in ring.tolist()]
    return list(zip(points, [*points[1:], points[0]], strict=True))


def _wall(rings: Sequence[Ring], ring: int, edge: int) -> Wall:
    return _walls(rings[ring])[edge]


def _side(wall: Wall, p: Point) -> Fraction:
    (ax, ay), (bx, by) = wall
    return (bx - ax) * (p[1] - ay) - (by - ay) * (p[0] - ax)


def _check_conflict(walls: list[Wall]) -> None:
    if len(walls) not in (2, 3):
        raise CertificateError("a conflict has two or three walls")
