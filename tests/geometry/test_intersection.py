"""Three ways to an intersection (cutting, sampling, elimination) against each other and against the oracle."""

from collections import Counter
from fractions import Fraction
from itertools import pairwise

import numpy as np
import oracle
import polygons
import pytest

from kernelscan import verify_kernel
from kernelscan.geometry.clipping import region_of
from kernelscan.geometry.convexity import is_surely_convex
from kernelscan.geometry.elimination import sides_of
from kernelscan.geometry.halfplanes import half_planes, wall_half_planes
from kernelscan.geometry.intersection import Intersection, corners_of, intersect
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.geometry.predicates import exact_line, excludes, first_conflict, quotient

Corners = set[tuple[Fraction, Fraction]]


def by_cutting(rows: np.ndarray) -> tuple[str, Corners]:
    region = region_of(dict(enumerate(rows.tolist())))
    assert region is not None
    return region.shape, {(Fraction(x, w), Fraction(y, w)) for x, y, w in region.exact_corners() if w}


def by_elimination(rows: np.ndarray) -> tuple[str, Corners]:
    found = sides_of(rows)
    if found.conflict:
        assert excludes([exact_line(rows[i].tolist()) for i in found.conflict])
        return "empty", set()
    if found.thin:
        return "thin", set()
    order = found.order.tolist()
    names = list(pairwise([*order, order[0]] if found.is_bounded else order))
    triples = corners_of(names, lambda i: rows[i].tolist())
    return "area", {(Fraction(x, w), Fraction(y, w)) for x, y, w in triples}


def agreed(rows: np.ndarray) -> Intersection:
    region = intersect(half_planes(rows))
    kind, corners = by_cutting(rows)
    assert (region.kind, set(region.rationals())) == (kind, corners)
    if region.kind == "empty":
        assert excludes([exact_line(rows[i].tolist()) for i in region.conflict.tolist()])
    other, corners = by_elimination(rows)
    assert other in (kind, "thin")
    if other != "thin":
        assert corners == set(region.rationals())
    else:
        assert kind != "area"
    return region


def some_planes(rng: np.random.Generator, m: int) -> np.ndarray:
    """Half-planes of a kind drawn at random: grid or general, around a point or anywhere, over part of the turn."""
    if rng.integers(2):
        ways = rng.integers(-2, 3, (m, 2)).astype(float)
        ways[(ways == 0).all(axis=1)] = [1, 0]
        ways[0], ways[1] = (1, 0), (1, 1)
    else:
        angles = rng.uniform(0, 2 * np.pi, m) * rng.choice([1, 0.5, 0.3])
        ways = polygons.polar(angles, np.ones(m))
    points = rng.integers(-3, 4, (m, 2)).astype(float) if rng.integers(2) else rng.normal(size=(m, 2))
    if rng.integers(2):
        points = points - rng.uniform(0, 4) * np.column_stack([-ways[:, 1], ways[:, 0]])
    return np.column_stack([points, np.zeros((m, 2)), ways])


def test_three_ways_agree_on_any_half_planes() -> None:
    rng = np.random.default_rng(21)
    kinds: Counter[tuple[str, bool]] = Counter()
    for _ in range(400):
        region = agreed(some_planes(rng, int(10 ** rng.uniform(0.5, 2.7))))
        kinds[region.kind, region.is_bounded] += 1
    assert {("area", True), ("area", False), ("empty", True), ("point", True)} <= set(kinds)


@pytest.mark.parametrize("m", [100, 1000, 6000])
def test_three_ways_agree_on_borders_given_ever_farther_away(m: int) -> None:
    """Lines through or just beside the corners of a square, by points that are farther and farther from it."""
    rng = np.random.default_rng(m)
    box = np.array([(0, 0, 1, 0), (4, 0, 0, 1), (4, 4, -1, 0), (0, 4, 0, -1)], dtype=float)
    kinds: Counter[str] = Counter()
    for shift in (0.0, 0.0, 0.0, 1.0, 1.0):
        ways = rng.integers(-3, 4, (m, 2)).astype(float)
        ways[(ways == 0).all(axis=1)] = [1, 1]
        corners = 4.0 * np.column_stack([(ways[:, 1] > 0), (ways[:, 0] < 0)])
        points = corners + ways * 2.0 ** np.linspace(0, 40, m).astype(int)[:, None]
        beside = rng.random(m) < 0.1
        points[beside] = np.nextafter(points[beside], points[beside] + rng.normal(size=(beside.sum(), 2)))
        points[-1] += shift * 9 * np.array([-ways[-1, 1], ways[-1, 0]])
        kinds[agreed(half_planes(np.concatenate([box, np.column_stack([points, ways])])).rows).kind] += 1
    assert kinds["area"] >= 3
    assert kinds["empty"] >= 1


@pytest.mark.parametrize("n", [65, 300, 2000])
def test_three_ways_agree_on_rooms(n: int) -> None:
    rng = np.random.default_rng(n)
    rooms = [
        polygons.even_star(rng, n), polygons.star(rng, n), polygons.orthogonal_star(rng, n), polygons.comb(n),
        polygons.smooth_star(n), polygons.dented(n), polygons.polyomino(rng, 40), polygons.nearly_degenerate(rng, True),
    ]  # fmt: skip
    for room in rooms:
        ring = polygons.turned(room, rng.uniform(0, 6))
        ring = ring[(ring != np.roll(ring, -1, axis=0)).any(axis=1)]
        for change in ({}, {"inward": 0.01}, {"grazing": 0.02}):
            agreed(wall_half_planes([ring], **change).rows)


def test_bounded_intersections_agree_with_the_oracle() -> None:
    rng = np.random.default_rng(22)
    box = [(0, 0, 0, 0, 1, 0), (9, 0, 9, 0, 9, 1), (9, 9, 9, 9, 8, 9), (0, 9, 0, 9, 0, 8)]
    for _ in range(300):
        rows = np.concatenate([box, some_planes(rng, 12) + np.array([4, 4, 0, 0, 0, 0])])
        truth = oracle.box_around([(Fraction(0), Fraction(0)), (Fraction(9), Fraction(9))])
        for px, py, tx, ty, hx, hy in rows.tolist():
            a = (Fraction(px), Fraction(py))
            b = (a[0] + Fraction(hx) - Fraction(tx), a[1] + Fraction(hy) - Fraction(ty))
            truth = oracle.clipped(truth, a, b) if truth else truth
        exact = oracle.described(truth)
        region = intersect(half_planes(rows))
        assert (region.kind, set(region.rationals())) == (exact.kind, set(exact.corners))
        assert region.area == pytest.approx(float(exact.area), rel=1e-12)


def test_intersections_that_hold_no_corner() -> None:
    plane = intersect(half_planes(np.zeros((0, 4))))
    half = intersect(half_planes([(0, 0, 1, 0), (0, -1, 2, 0)]))
    strip = intersect(half_planes([(0, 0, 1, 0), (0, 2, -1, 0)]))
    line = intersect(half_planes([(0, 0, 1, 0), (0, 0, -1, 0)]))
    nothing = intersect(half_planes([(0, 0, 1, 0), (0, -1, -1, 0)]))
    assert [region.kind for region in (plane, half, strip, line, nothing)] == ["area"] * 3 + [
        "segment",
        "empty",
    ]
    assert [len(region.sides) for region in (plane, half, strip, line)] == [0, 1, 2, 2]
    assert half.sides.tolist() == [0]
    assert not any(region.is_bounded for region in (plane, half, strip, line))
    assert sorted(nothing.conflict.tolist()) == [0, 1]


def test_a_half_strip_and_a_ray() -> None:
    half_strip = intersect(half_planes([(0, 0, 1, 0), (0, 2, -1, 0), (1, 0, 0, -1)]))
    assert (half_strip.kind, half_strip.is_bounded) == ("area", False)
    assert sorted(half_strip.vertices.tolist()) == [[1, 0], [1, 2]]
    ray = intersect(half_planes([(0, 0, 1, 0), (0, 0, -1, 0), (1, 0, 0, -1)]))
    assert (ray.kind, ray.is_bounded, ray.vertices.tolist()) == ("segment", False, [[1, 0]])


def test_a_kernel_of_very_many_sides_is_certified() -> None:
    """Past the sizes at which a larger sample is taken, with a wall that cuts off half of them."""
    outline = polygons.convex(20_000)
    niche = [outline[6665] + [-0.1, 0.2], outline[6665] + [-0.3, 0.2]]
    outline = np.concatenate([outline[:6666], niche, outline[6740:]])
    for room in (outline, polygons.dented(20_000)):
        kernel = kernel_of_rings((room,))
        assert len(kernel.walls) > 500
        verify_kernel(room, kernel)
        exact = [[float(x), float(y)] for x, y in kernel.rationals()]
        assert kernel.vertices.tolist() == exact


def test_convex_or_in_doubt() -> None:
    ring = polygons.convex(50)
    assert is_surely_convex(ring)
    assert not is_surely_convex(ring[::-1])
    assert not is_surely_convex(np.insert(ring, 30, (ring[29] + ring[30]) / 2 * 0.99, axis=0))
    assert not is_surely_convex(
        np.array([(0.0, 0), (1, 0), (2, 0), (2, 2), (0, 2)])
    )  # a flat corner is in doubt


def test_conflicts_and_quotients() -> None:
    lines = [exact_line((0, y, 0, y, x, y)) for x, y in ((1.0, 0.0), (-1.0, 2.0), (-1.0, -1.0))]
    assert first_conflict(lines) == (0, 2)
    assert first_conflict(lines[:2]) is None
    assert quotient(10**400, 1) == np.inf
    assert quotient(-(10**400), 1) == -np.inf
