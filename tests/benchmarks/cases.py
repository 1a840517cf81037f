"""The rooms that are timed, and how: the sides take turns in one process, and the median of each counts."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from statistics import median
from time import perf_counter

import numpy as np
import polygons
import rivals

from kernelscan.geometry.kernel import kernel_of_rings, visibility_kernel
from kernelscan.geometry.linear_programs import deepest_point

Side = Callable[[np.ndarray], object]


def ours(ring: np.ndarray) -> object:
    """Our kernel of a ring already made."""
    return kernel_of_rings((ring,))


RIVALS: dict[str, Side] = {
    "kernelscan": ours,
    "numpy pass": rivals.numpy_pass,
    "shapely clipping": rivals.shapely_clipping,
    "scipy halfspaces": rivals.scipy_halfspaces,
    "scipy dual hull": rivals.scipy_dual_hull,
    "float deque": rivals.float_deque,
}


@dataclass(frozen=True)
class Case:
    """Rooms to be timed, which sides take part, how often, and what is to be reached (ours to theirs)."""

    name: str
    rooms: Callable[[], Sequence[np.ndarray]]
    sides: tuple[str, ...]
    rounds: int
    goals: dict[str, float]


def one(make: Callable[[], np.ndarray]) -> Callable[[], Sequence[np.ndarray]]:
    return lambda: [np.ascontiguousarray(make())]


def mixed_rooms(count: int = 10_000) -> list[np.ndarray]:
    rng = np.random.default_rng(3)
    return [np.ascontiguousarray(polygons.mixed(rng)) for _ in range(count)]


def star(n: int) -> np.ndarray:
    return polygons.even_star(np.random.default_rng(1), n)


def orthogonal(n: int) -> np.ndarray:
    return polygons.orthogonal_star(np.random.default_rng(1), n)


ALL = tuple(RIVALS)
NO_CLIPPING = tuple(name for name in ALL if name != "shapely clipping")
PASS_AND_SCIPY = ("kernelscan", "numpy pass", "scipy halfspaces")
WITH_CLIPPING = ("kernelscan", "numpy pass", "shapely clipping")
MILLION = 1_000_000

CASES = [
    Case("10,000 mixed rooms of 4 to 40 edges", mixed_rooms, ("kernelscan", "shapely clipping"), 3,
         {"shapely clipping": 4}),
    Case("random star, n = 1,000", one(lambda: star(1000)), ALL, 15,
         {"shapely clipping": 10, "scipy halfspaces": 5}),
    Case("smooth star, n = 1,000", one(lambda: polygons.smooth_star(1000)), ALL, 15,
         {"shapely clipping": 10, "scipy halfspaces": 5}),
    Case("orthogonal, n = 1,000", one(lambda: orthogonal(1000)), ALL, 15,
         {"shapely clipping": 10, "scipy halfspaces": 5}),
    Case("random star, n = 100,000", one(lambda: star(100_000)), NO_CLIPPING, 5,
         {"scipy halfspaces": 50, "float deque": 50}),
    Case("smooth star, n = 100,000", one(lambda: polygons.smooth_star(100_000)), NO_CLIPPING, 5,
         {"scipy halfspaces": 50, "float deque": 50}),
    Case("random star, n = 1,000,000", one(lambda: star(MILLION)), PASS_AND_SCIPY, 3,
         {"numpy pass": 1 / 8, "scipy halfspaces": 100}),
    Case("smooth star, n = 1,000,000", one(lambda: polygons.smooth_star(MILLION)), PASS_AND_SCIPY, 3,
         {"numpy pass": 1 / 8, "scipy halfspaces": 100}),
    Case("orthogonal, n = 1,000,000", one(lambda: orthogonal(MILLION)), PASS_AND_SCIPY, 3,
         {"numpy pass": 1 / 8, "scipy halfspaces": 100}),
    Case("comb (empty), n = 1,000,000", one(lambda: polygons.comb(MILLION)), WITH_CLIPPING, 5,
         {"numpy pass": 1 / 8, "shapely clipping": 1}),
    Case("convex, n = 1,000,000", one(lambda: polygons.convex(MILLION)), PASS_AND_SCIPY, 3,
         {"numpy pass": 1 / 8, "scipy halfspaces": 100}),
    Case("convex with dents, n = 1,000,000", one(lambda: polygons.dented(MILLION)),
         ("kernelscan", "numpy pass"), 3, {}),
    Case("comb (empty), n = 40", one(lambda: polygons.comb(40)), WITH_CLIPPING, 51, {"shapely clipping": 1}),
    Case("comb (empty), n = 1,000", one(lambda: polygons.comb(1000)), WITH_CLIPPING, 51, {"shapely clipping": 1}),
]  # fmt: skip


def timed(case: Case) -> dict[str, float]:
    """Return the median seconds for a room of each side, the sides taking turns."""
    rooms = case.rooms()
    times: dict[str, list[float]] = {name: [] for name in case.sides}
    for _ in range(case.rounds):
        for name in case.sides:
            side = RIVALS[name]
            start = perf_counter()
            for room in rooms:
                side(room)
            times[name].append((perf_counter() - start) / len(rooms))
    return {name: median(spent) for name, spent in times.items()}


def with_checks(ring: np.ndarray) -> object:
    """Our kernel from points as they come, which must be shown to make a ring first."""
    return visibility_kernel(ring)


def deepest(ring: np.ndarray) -> object:
    """Our deepest point."""
    return deepest_point([ring])


def deepest_by_scipy(ring: np.ndarray) -> object:
    """The same by scipy's linear programming."""
    return rivals.inner_point(*rivals.depths(ring))
