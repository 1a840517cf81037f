"""Linear programs of the plane against scipy's HiGHS, ranges against brute force, and both by worked figures."""

from collections import Counter
from math import hypot, inf, pi, sqrt

import numpy as np
import polygons
import pytest
from scipy.optimize import linprog

from kernelscan import GeometryError, visibility_kernel
from kernelscan.geometry.halfplanes import HalfPlanes, half_planes, wall_half_planes
from kernelscan.geometry.intersection import intersect
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.geometry.linear_programs import (
    ExtremePoint,
    ExtremeSegment,
    Infeasible,
    Unbounded,
    deepest_point,
    extreme_point,
    least_slack,
)
from kernelscan.geometry.ranges import PointInRange, nearest_point, smallest_range
from kernelscan.geometry.reaches import Arc, within_range
from kernelscan.geometry.rings import as_rings

SQUARE = [(0, 0), (4, 0), (4, 4), (0, 4)]
U = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]


def planes_of(outline: list) -> HalfPlanes:
    return wall_half_planes(as_rings(outline))


# Extreme points.


def random_planes(rng: np.random.Generator) -> HalfPlanes:
    m = int(rng.integers(1, 12))
    if rng.integers(2):
        ways = rng.integers(-2, 3, (m, 2)).astype(float)
        ways[(ways == 0).all(axis=1)] = [1, 0]
        return half_planes(np.column_stack([rng.integers(-3, 4, (m, 2)), ways]))
    ways, points = rng.normal(size=(m, 2)), rng.normal(size=(m, 2))
    if rng.integers(2):
        points = np.column_stack([ways[:, 1], -ways[:, 0]]) * rng.uniform(0, 2, (m, 1))
    return half_planes(np.column_stack([points, ways]))


def inequalities(planes: HalfPlanes) -> tuple[np.ndarray, np.ndarray]:
    ways = planes.ways
    table = np.column_stack([ways[:, 1], -ways[:, 0]])
    return table, (table * planes.rows[:, :2]).sum(axis=1)


def highs(c: list, table: np.ndarray, right: np.ndarray) -> tuple[int, float]:
    result = linprog(c, A_ub=table, b_ub=right, bounds=[(None, None)] * len(c), method="highs")
    return result.status, result.fun


def test_extreme_points_agree_with_highs() -> None:
    rng = np.random.default_rng(8)
    outcomes: Counter[type] = Counter()
    for _ in range(2000):
        planes = random_planes(rng)
        c = rng.integers(-2, 3, 2) + np.array([0.0, 0.0]) if rng.integers(2) else rng.normal(size=2)
        if not c.any():
            continue
        outcome = extreme_point(planes, c)
        outcomes[type(outcome)] += 1
        table, right = inequalities(planes)
        status, least = highs((-c).tolist(), table, right)
        if status == 0:
            assert isinstance(outcome, ExtremePoint | ExtremeSegment)
            points = outcome.ends if isinstance(outcome, ExtremeSegment) else outcome.point[None]
            assert points @ c == pytest.approx(np.full(len(points), -least), rel=1e-6, abs=1e-6)
            assert (points @ table.T <= right + 1e-7 * (1 + np.abs(right))).all()
        elif isinstance(outcome, Infeasible):
            assert highs([0, 0], table, right)[0] == 2
            assert highs([0, 0], table[outcome.conflict], right[outcome.conflict])[0] == 2
        else:
            assert isinstance(outcome, Unbounded)
            assert outcome.way @ c > 0
            assert (table @ outcome.way <= 1e-9).all()
            assert (table @ outcome.start <= right + 1e-7).all()
    assert all(outcomes[kind] > 20 for kind in (ExtremePoint, ExtremeSegment, Infeasible, Unbounded))


def test_extreme_points_of_a_square() -> None:
    planes = planes_of(SQUARE)
    corner, side = extreme_point(planes, (1, 2)), extreme_point(planes, (0, -1))
    assert isinstance(corner, ExtremePoint)
    assert corner.point.tolist() == [4, 4]
    assert isinstance(side, ExtremeSegment)
    assert sorted(side.ends.tolist()) == [[0, 0], [4, 0]]


def test_extreme_points_of_thin_and_endless_regions() -> None:
    ray = half_planes([(0, 0, 1, 0), (0, 0, -1, 0), (2, 0, 0, -1)])  # y = 0, x >= 2
    end, endless, all_of_it = (extreme_point(ray, c) for c in ((-1, 3), (1, 0), (0, 1)))
    assert isinstance(end, ExtremePoint)
    assert end.point.tolist() == [2, 0]
    assert isinstance(endless, Unbounded)
    assert isinstance(all_of_it, ExtremeSegment)
    assert all_of_it.ends.tolist() == [[2, 0]]
    line = half_planes([(0, 1, 1, 0), (0, 1, -1, 0)])
    assert isinstance(extreme_point(line, (0, 1)), ExtremeSegment)
    assert isinstance(extreme_point(line, (1, 1)), Unbounded)
    assert isinstance(extreme_point(half_planes(np.zeros((0, 4))), (1, 0)), Unbounded)
    point = extreme_point(planes_of([(2, 0), (4, 0), (-1, 2), (-2, 4), (-1, -2), (-2, -4)]), (1, 1))
    assert isinstance(point, ExtremePoint)
    assert point.point.tolist() == [0, 0]


@pytest.mark.parametrize("direction", [(0, 0), (inf, 1)])
def test_a_direction_must_be_one(direction: tuple) -> None:
    with pytest.raises(GeometryError):
        extreme_point(planes_of(SQUARE), direction)


# Deepest points.


def test_deepest_points_agree_with_highs() -> None:
    rng = np.random.default_rng(9)
    empty = 0
    for _ in range(1000):
        outline = polygons.mixed(rng)
        deepest = deepest_point([outline])
        table, right = inequalities(wall_half_planes([outline]))
        lengths = np.hypot(*table.T)
        status, least = highs([0, 0, -1], np.column_stack([table, lengths]), right)
        assert status == 0
        assert deepest.radius == pytest.approx(-least, abs=1e-9)
        empty += deepest.radius < 0
    assert empty > 100


@pytest.mark.parametrize(
    ("outline", "point", "radius"),
    [
        (SQUARE, (2, 2), 2.0),
        ([(0, 0), (4, 0), (4, 3)], (3, 1), 1.0),
        ([(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)], (1.5, 1.5), 1.5),
    ],
)
def test_deepest_point_by_hand(outline: list, point: tuple, radius: float) -> None:
    deepest = deepest_point(as_rings(outline))
    assert deepest.radius == pytest.approx(radius, abs=1e-12)
    assert deepest.point == pytest.approx(point, abs=1e-9)


def test_deepest_point_far_from_the_origin() -> None:
    outline = np.array([(0, 0), (4, 0), (4, 3)]) + np.array([4e6, 5e6])
    assert deepest_point(as_rings(outline)).radius == pytest.approx(1, abs=1e-9)


def test_least_slack() -> None:
    """In the U, the walls at x = 3 and x = 6 would each have to give way by 1.5."""
    slack = least_slack(as_rings(U))
    assert slack.slack == pytest.approx(1.5, abs=1e-12)
    assert slack.point[0] == pytest.approx(4.5, abs=1e-9)
    assert {(0, 3), (0, 5)} <= {tuple(wall) for wall in slack.walls.tolist()}
    assert least_slack(as_rings(SQUARE)).slack == 0


def test_discs_without_limit_are_refused() -> None:
    with pytest.raises(GeometryError):
        deepest_point(half_planes([(0, 0, 1, 0)]))


# Half-planes moved and turned.


def test_walls_moved_inward() -> None:
    region = intersect(wall_half_planes(as_rings(SQUARE), inward=0.5))
    assert region.vertices.tolist() == [[0.5, 0.5], [3.5, 0.5], [3.5, 3.5], [0.5, 3.5]]
    assert region.area == 9
    assert intersect(wall_half_planes(as_rings(SQUARE), inward=2)).kind == "point"
    assert intersect(wall_half_planes(as_rings(SQUARE), inward=2.1)).kind == "empty"


def test_walls_seen_at_an_angle() -> None:
    """Every point left sees every point of every wall at the angle or more; every corner left sees one at just that."""
    angle = 0.3
    rings = as_rings(SQUARE)
    region = intersect(wall_half_planes(rings, grazing=angle))
    assert region.kind == "area"
    for eye in region.vertices:
        assert least_angle(rings[0], eye) == pytest.approx(angle, abs=1e-12)
    assert intersect(wall_half_planes(rings, grazing=pi / 4)).kind in ("point", "area", "empty")
    assert intersect(wall_half_planes(rings, grazing=pi / 4 + 1e-6)).kind == "empty"


def least_angle(ring: np.ndarray, eye: np.ndarray) -> float:
    angles = []
    for a, b in zip(ring, np.roll(ring, -1, axis=0), strict=True):
        for p, q in ((a, b), (b, a)):
            u, v = q - p, eye - p
            angles.append(float(np.arctan2(abs(u[0] * v[1] - u[1] * v[0]), u @ v)))
    return min(angles)


def test_both_at_once_is_inside_either() -> None:
    rings = as_rings([(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)])
    both = intersect(wall_half_planes(rings, inward=0.1, grazing=0.1))
    moved, turned = (intersect(wall_half_planes(rings, **k)) for k in ({"inward": 0.1}, {"grazing": 0.1}))
    assert 0 < both.area < min(moved.area, turned.area)
    assert both.walls.tolist() == [both.planes.walls[side].tolist() for side in both.sides.tolist()]
    assert deepest_point(rings).radius - 0.1 >= deepest_point(both.planes).radius


@pytest.mark.parametrize(
    "arguments", [{"inward": -1}, {"inward": inf}, {"grazing": -0.1}, {"grazing": pi / 2}]
)
def test_walls_cannot_be_moved_outward_or_turned_too_far(arguments: dict) -> None:
    with pytest.raises(GeometryError):
        wall_half_planes(as_rings(SQUARE), **arguments)


@pytest.mark.parametrize("rows", [np.zeros((2, 3)), [(0, 0, 0, 0)], [(0, 0, np.nan, 1)]])
def test_half_planes_must_be_some(rows: list) -> None:
    with pytest.raises(GeometryError):
        half_planes(rows)


# Ranges.


def test_nearest_points() -> None:
    planes = planes_of(SQUARE)
    for spot, point in [((1, 1), (1, 1)), ((6, 2), (4, 2)), ((7, 8), (4, 4)), ((2, -3), (2, 0))]:
        nearest = nearest_point(planes, spot)
        assert isinstance(nearest, PointInRange)
        assert nearest.point == pytest.approx(point, abs=1e-12)
        assert nearest.distance == pytest.approx(hypot(spot[0] - point[0], spot[1] - point[1]), abs=1e-12)
    assert isinstance(nearest_point(planes_of(U), (0, 0)), Infeasible)


def test_smallest_ranges_by_hand() -> None:
    assert range_of(SQUARE) == pytest.approx(2 * sqrt(2), abs=1e-12)
    # The L's kernel is [0, 3] x [0, 3]; from (3, 5/3), (8, 0) and (0, 6) are equally far: 25 + y^2 = 9 + (6 - y)^2.
    assert range_of([(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]) == pytest.approx(
        sqrt(250) / 3, abs=1e-12
    )
    assert range_of([(2, 0), (4, 0), (-1, 2), (-2, 4), (-1, -2), (-2, -4)]) == pytest.approx(
        sqrt(20), abs=1e-12
    )


def range_of(outline: list) -> float:
    found = smallest_range(visibility_kernel(outline).half_planes(), np.array(outline, dtype=float))
    assert isinstance(found, PointInRange)
    return found.distance


def test_smallest_ranges_are_smallest() -> None:
    """Against a fine grid and against steps away from the point found, for random rooms."""
    rng = np.random.default_rng(3)
    for _ in range(150):
        outline = polygons.mixed(rng)
        kernel = kernel_of_rings([outline])
        if kernel.kind != "area":
            continue
        planes = kernel.half_planes()
        found = smallest_range(planes, outline)
        assert isinstance(found, PointInRange)
        assert depth(planes, found.point) >= -1e-9
        weights = rng.dirichlet(np.ones(len(kernel.vertices)), 300)
        others = np.concatenate([weights @ kernel.vertices, kernel.vertices])
        others = np.concatenate([others, found.point + (others - found.point) * 1e-3])
        farthest = np.hypot(*(others[:, None] - outline[None]).T).max(axis=0)
        assert (farthest >= found.distance - 1e-9).all()


def depth(planes: HalfPlanes, p: np.ndarray) -> float:
    table, right = inequalities(planes)
    return float(((right - table @ p) / np.hypot(*table.T)).min())


def test_a_kernel_cut_by_ranges_by_hand() -> None:
    """A square with corners in range R = 4: four arcs; a wide range leaves the square, a short one nothing."""
    square = np.array(SQUARE, dtype=float)
    reach = within_range(square, square, 4.0)
    assert [type(piece) for piece in reach.pieces] == [Arc] * 4
    # Four quarter discs of radius a on a square of side a: a^2 (1 + pi/3 - sqrt 3).
    assert reach.area == pytest.approx(16 * (1 + pi / 3 - sqrt(3)), rel=1e-12)
    assert within_range(square, square, 6.0).area == pytest.approx(16, rel=1e-12)
    assert within_range(square, square, 2.8).pieces == ()
    inner = within_range(square * 10, np.array([[20.0, 20.0]]), 1.0)
    assert inner.area == pytest.approx(pi, rel=1e-12)
    assert len(inner.flattened(1e-3)) > 40


def test_arcs_are_flattened_within_the_chord_error() -> None:
    square = np.array(SQUARE, dtype=float)
    reach = within_range(square, square, 4.0)
    for chord in (0.1, 1e-3, 1e-5):
        points = reach.flattened(chord)
        middles = (points + np.roll(points, -1, axis=0)) / 2
        stray = 4.0 - np.hypot(*(middles[:, None] - square[None]).T).max(axis=0)
        assert (stray <= chord * 1.0001).all()
        assert (stray >= -1e-12).all()
    with pytest.raises(GeometryError):
        reach.flattened(0)


def test_a_kernel_cut_by_ranges_against_sampling() -> None:
    rng = np.random.default_rng(4)
    for _ in range(60):
        outline = polygons.even_star(rng, int(rng.integers(5, 15)))
        kernel = kernel_of_rings([outline])
        found = smallest_range(kernel.half_planes(), outline)
        assert isinstance(found, PointInRange)
        radius = found.distance * rng.uniform(1.001, 1.3)
        reach = within_range(kernel.vertices, outline, radius)
        weights = rng.dirichlet(np.full(len(kernel.vertices), 0.7), 4000)
        points = weights @ kernel.vertices
        inside = np.hypot(*(points[:, None] - outline[None]).T).max(axis=0) <= radius
        ring = reach.flattened(1e-6)
        edges = np.roll(ring, -1, axis=0) - ring
        left = edges[:, 0] * (points[:, None, 1] - ring[:, 1]) - edges[:, 1] * (
            points[:, None, 0] - ring[:, 0]
        )
        assert ((left >= -1e-5).all(axis=1) == inside).mean() > 0.995
        assert within_range(kernel.vertices, outline, found.distance * 0.999).pieces == ()


def test_a_range_must_be_a_length() -> None:
    with pytest.raises(GeometryError):
        within_range(np.array(SQUARE, dtype=float), np.array(SQUARE, dtype=float), 0)
