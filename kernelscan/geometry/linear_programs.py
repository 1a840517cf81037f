"""Linear programs of the plane: the deepest point of half-planes."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.halfplanes import HalfPlanes, wall_half_planes
from kernelscan.geometry.rings import Ring

__all__ = ["DeepestPoint", "deepest_point"]


@dataclass(frozen=True, slots=True, eq=False)
class DeepestPoint:
    """The point whose nearest border is farthest.

    Attributes
    ----------
    point
        ``(2,)``.
    radius
        Its distance to the nearest border; below 0 where the half-planes have no common point: then all of
        them, moved outward by that much, meet in ``point``.
    """

    point: npt.NDArray[np.float64]
    radius: float


def deepest_point(region: Sequence[Ring] | HalfPlanes) -> DeepestPoint:
    """Return the centre of a largest disc inside the half-planes of some rings, or inside given half-planes."""
    planes = region if isinstance(region, HalfPlanes) else wall_half_planes(region)
    ways = planes.ways
    normals = np.column_stack([-ways[:, 1], ways[:, 0]]) / np.hypot(ways[:, 0], ways[:, 1])[:, None]
    origin = planes.rows[0, :2]
    table = np.column_stack([normals, -np.ones(len(normals))])
    offsets = -np.einsum("ij,ij->i", normals, planes.rows[:, :2] - origin)
    basis = _dual_feasible(normals)
    for _ in range(10 * len(table) + 100):
        solution = np.linalg.solve(table[basis], -offsets[basis])
        slack = table @ solution + offsets
        worst = int(slack.argmin())
        if slack[worst] >= -1e-15 * (1 + np.abs(solution).max()) or worst in basis:
            break
        multipliers = np.linalg.solve(table[basis].T, np.array([0.0, 0.0, -1.0]))
        share = np.linalg.solve(table[basis].T, table[worst])
        ratios = np.where(share > 1e-14, multipliers / np.where(share > 1e-14, share, 1), np.inf)
        basis[int(ratios.argmin())] = worst
    return DeepestPoint(solution[:2] + origin, float(solution[2]))


def _dual_feasible(normals: npt.NDArray[np.float64]) -> list[int]:
    """Return three half-planes between which every disc is caught."""
    angles = np.arctan2(normals[:, 1], normals[:, 0])
    relative = (angles - angles[0]) % (2 * np.pi) - np.pi
    after = np.where(relative >= 0, relative, np.inf).argmin()
    before = np.where(relative < 0, relative, -np.inf).argmax()
    return [0, int(after), int(before)]
