"""Rings: what becomes one, what is refused, and that the judgement is exact whatever the doubles."""

from collections.abc import Sequence
from fractions import Fraction

import numpy as np
import pytest
from geometry.grown_rooms import Floats, grown_ring, star

from kernelscan.errors import GeometryError
from kernelscan.geometry import contacts
from kernelscan.geometry.neighbourhood import nearby_edges
from kernelscan.geometry.nesting import side_of_ring
from kernelscan.geometry.rings import as_ring, as_rings, signed_area
from kernelscan.geometry.signs import orientation, orientations

Corners = Sequence[tuple[float, float]]

ELL = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
SQUARE = [(0, 0), (10, 0), (10, 10), (0, 10)]
TINY = 1e-12


def rectangle(x0: float, y0: float, x1: float, y1: float) -> Corners:
    return [(x0, y0), (x1, y0), (x1, y1), (x0, y1)]


# What becomes a ring


@pytest.mark.parametrize(
    "points", [ELL, [*ELL, ELL[0]], [list(p) for p in ELL], np.array(ELL, dtype=np.float32)]
)
def test_points_become_a_read_only_counter_clockwise_ring(points: object) -> None:
    ring = as_ring(points)  # type: ignore[arg-type]
    assert ring.tolist() == [list(p) for p in ELL]
    assert ring.dtype == np.float64
    assert not ring.flags.writeable
    assert ring.flags.c_contiguous


def test_a_clockwise_ring_is_turned_round_and_starts_where_it_did() -> None:
    assert as_ring([ELL[0], *ELL[:0:-1]]).tolist() == [list(p) for p in ELL]


def test_a_hole_is_clockwise() -> None:
    assert signed_area(as_ring(ELL, hole=True)) == -33
    assert as_ring(ELL, hole=True).tolist() == [list(p) for p in [ELL[0], *ELL[:0:-1]]]


def test_the_caller_s_array_is_left_alone() -> None:
    points = np.array(ELL, dtype=float)
    ring = as_ring(points)
    assert points.flags.writeable
    points[0] = 99
    assert ring[0].tolist() == [0, 0]


def test_repeated_points_count_once() -> None:
    doubled = [p for p in [*ELL, ELL[0]] for _ in range(3)]
    assert as_ring(doubled).tolist() == [list(p) for p in ELL]


def test_a_wall_in_two_parts_is_kept() -> None:
    assert len(as_ring([(0, 0), (2, 0), (4, 0), (4, 4), (0, 4)])) == 5


def test_negative_zero_becomes_zero() -> None:
    assert not np.signbit(as_ring([(-0.0, -0.0), (1, -0.0), (0, 1)])).any()


def test_a_triangle_is_the_smallest_ring() -> None:
    assert len(as_ring([(0, 0), (1, 0), (0, 1)])) == 3


@pytest.mark.parametrize("size", [1e-150, 1e-12, 1e8, 1e150, 1e300])
def test_any_size_will_do(size: float) -> None:
    assert len(as_ring(np.array(ELL) * size)) == 6
    with pytest.raises(GeometryError):
        as_ring(np.array([(0, 0), (2, 2), (2, 0), (0, 2)]) * size)


# What is refused


@pytest.mark.parametrize(
    ("points", "fault"),
    [
        ([], "shape"),
        ([1, 2, 3], "shape"),
        ([(1, 2, 3)] * 3, "shape"),
        ("square", "numbers"),
        ([(0, 0), (1, 0), (0, None)], "not finite|numbers"),
        ([(0, 0), (1,), (0, 1)], "numbers"),
        ([(0, 0), (1j, 0), (0, 1)], "numbers"),
        ([(0, 0), (float("nan"), 0), (0, 1)], r"point 1 of the ring is not finite: \(nan, 0.0\)"),
        ([(0, 0), (1, 0), (0, float("inf"))], "point 2 of the ring is not finite"),
        ([(0, 0)], "three distinct points or more, got 1"),
        ([(0, 0), (1, 0), (1, 0), (0, 0)], "three distinct points or more, got 2"),
        ([(0, 0), (1, 0), (0, 0), (1, 0)], "no area"),
        ([(0, 0), (1, 1), (3, 3), (2, 2)], "no area"),
        ([(0, 0), (2, 2), (2, 0), (0, 2)], "crosses or touches itself"),
    ],
)
def test_points_that_make_no_ring_are_refused_with_the_reason(points: object, fault: str) -> None:
    with pytest.raises(GeometryError, match=fault):
        as_ring(points)  # type: ignore[arg-type]


@pytest.mark.parametrize(
    "points",
    [
        [(0, 0), (4, 0), (4, 4), (2, 0), (0, 4)],  # a vertex on a wall
        [(0, 0), (4, 0), (4, 4), (2, 2), (4, 6), (0, 6), (2, 2)],  # a vertex met twice
        [(0, 0), (4, 0), (4, 4), (4, 7), (4, 4), (0, 4)],  # a spike outwards
        [(0, 0), (4, 0), (4, 4), (2, 4), (2, 2), (2, 4), (0, 4)],  # a spike inwards
        [(0, 0), (6, 0), (6, 4), (4, 4), (4, 0), (3, 0), (3, 4), (0, 4)],  # two walls that share a stretch
        [(0, 0), (4, 0), (6, 0), (3, 0), (3, 3)],  # a wall that folds back
        [(0, 0), (4, 0), (4, 4), (0, 4), (0, 0), (4, 0), (4, 4), (0, 4)],  # round twice
    ],
)
@pytest.mark.parametrize("extra", [0, 20, 300])
def test_a_ring_that_touches_itself_is_refused_at_any_number_of_walls(points: Corners, extra: int) -> None:
    """The three searches (plain, all pairs, tree) are reached by splitting the first wall."""
    for turned in range(len(points)):
        ring = [*points[turned:], *points[:turned]]
        (ax, ay), (bx, by) = ring[:2]
        ts = [k / 512 for k in range(1, extra + 1)]
        longer = [ring[0], *((ax + t * (bx - ax), ay + t * (by - ay)) for t in ts), *ring[1:]]
        with pytest.raises(GeometryError, match="crosses or touches itself near"):
            as_ring(longer)


def test_the_place_of_the_fault_is_named() -> None:
    shift = np.array([5e6, 0])
    with pytest.raises(GeometryError, match=r"near \(5000004, 7\)"):
        as_ring(np.array([(0, 0), (4, 0), (4, 4), (4, 7), (4, 4), (0, 4)]) + shift)
    with pytest.raises(GeometryError, match=r"near \(5000001, 1\)"):
        as_ring(np.array([(0, 0), (2, 2), (2, 0), (0, 2)]) + shift)
    with pytest.raises(GeometryError, match=r"near \(5000004, [0-4]\)"):
        as_ring(np.array([(0, 0), (6, 0), (6, 4), (4, 4), (4, 0), (3, 0), (3, 4), (0, 4)]) + shift)
    with pytest.raises(GeometryError, match=r"cross near \((5000010, 9|5000009, 10)\)"):
        as_rings(np.array(SQUARE) + shift, [np.array(rectangle(9, 9, 11, 11)) + shift])


@pytest.mark.parametrize("extra", [0, 20, 300])
def test_a_vertex_one_ulp_off_a_wall_is_judged_exactly(extra: int) -> None:
    bottom = [(3 * k / (extra + 1), 0.0) for k in range(extra + 1)]
    for height, simple in ((np.nextafter(0, 1), True), (0.0, False), (-np.nextafter(0, 1), False)):
        assert is_ring([*bottom, (3, 0), (3, 3), (1.4, height), (0, 3)]) == simple


def test_a_vertex_near_a_slanted_wall_is_judged_by_the_very_doubles() -> None:
    sides = []
    for k in range(1, 40):
        at = (0.01 * k, 0.03 * k)
        sides.append(exact_side((0, 0), (1, 3), at))
        assert is_ring([(0, 0), (1, 3), (-3, 3), at, (-3, 0)]) == (sides[-1] > 0)
    assert set(sides) == {-1, 0, 1}


def is_ring(points: object) -> bool:
    try:
        as_ring(points)  # type: ignore[arg-type]
    except GeometryError:
        return False
    return True


# Against brute force


def exact_side(a: Sequence[float], b: Sequence[float], c: Sequence[float]) -> int:
    (ax, ay), (bx, by), (cx, cy) = ((Fraction(float(x)), Fraction(float(y))) for x, y in (a, b, c))
    value = (bx - ax) * (cy - ay) - (by - ay) * (cx - ax)
    return (value > 0) - (value < 0)


def is_simple(points: Floats) -> bool:
    """By parameters of every pair of walls, in rational arithmetic."""
    corners = [(Fraction(x), Fraction(y)) for x, y in points.tolist()]
    n = len(corners)
    walls = [(corners[k], corners[(k + 1) % n]) for k in range(n)]
    for i in range(n):
        for j in range(i + 1, n):
            shared = {walls[i][0], walls[i][1]} & {walls[j][0], walls[j][1]}
            neighbours = j == i + 1 or (i == 0 and j == n - 1)
            common = common_points(walls[i], walls[j])
            if common is None or (common and (not neighbours or common != shared)):
                return False
    return True


Wall = tuple[tuple[Fraction, Fraction], tuple[Fraction, Fraction]]


def common_points(one: Wall, other: Wall) -> set[tuple[Fraction, Fraction]] | None:
    """Return the common points of two walls, at most one, or None for a stretch."""
    (px, py), (qx, qy) = one
    (rx, ry), (sx, sy) = other
    ux, uy, vx, vy = qx - px, qy - py, sx - rx, sy - ry
    cross = ux * vy - uy * vx
    if cross:
        t = ((rx - px) * vy - (ry - py) * vx) / cross
        s = ((rx - px) * uy - (ry - py) * ux) / cross
        return {(px + t * ux, py + t * uy)} if 0 <= t <= 1 and 0 <= s <= 1 else set()
    if ux * (ry - py) - uy * (rx - px):
        return set()
    low = max(min(one), min(other))
    high = min(max(one), max(other))
    return None if low < high else ({low} if low == high else set())


@pytest.mark.parametrize("seed", range(40))
def test_random_rings_on_a_small_grid_are_judged_like_brute_force(seed: int) -> None:
    rng = np.random.default_rng(seed)
    verdicts = []
    for _ in range(40):
        ring = grown_ring(rng, int(rng.integers(3, 16)), 8)
        if rng.random() < 0.7:
            ring = ring.copy()
            ring[rng.integers(len(ring))] = rng.integers(0, 8, 2)
        if (ring == np.roll(ring, 1, axis=0)).all(axis=1).any() or len(np.unique(ring, axis=0)) < 3:
            continue
        steps = rng.choice([0, 0, 0, 0, 1e-16, -TINY], ring.shape) if rng.random() < 0.5 else 0.0
        verdicts.append(is_simple(ring + steps))
        assert is_ring(ring + steps) == verdicts[-1]
    assert len(set(verdicts)) == 2


def test_the_three_searches_give_the_same_meetings(monkeypatch: pytest.MonkeyPatch) -> None:
    rng = np.random.default_rng(7)
    for size in (12, 5000):
        tangle = rng.integers(0, size, (90, 2)).astype(float)
        tangle = tangle[(tangle != np.roll(tangle, 1, axis=0)).any(axis=1)]
        found = []
        for plain, dense in ((200, 200), (0, 200), (0, 0)):
            monkeypatch.setattr(contacts, "_PLAIN", plain)
            monkeypatch.setattr(contacts, "_DENSE", dense)
            found.append(sorted(contacts.meeting_edges([tangle[:40], tangle[40:]])))
        assert found[0] == found[1] == found[2]
        assert len(found[0]) > 100


@pytest.mark.parametrize("corners", [500, 3000])
def test_meetings_of_a_large_tangle_are_those_of_all_pairs(corners: int) -> None:
    rng = np.random.default_rng(corners)
    walk = np.cumsum(rng.normal(size=(corners, 2)), axis=0)
    found = set(contacts.meeting_edges([walk]))
    p, q = walk, np.roll(walk, -1, axis=0)
    expected = set()
    for i in range(corners):
        a = orientations(p[i], q[i], p[i + 2 :]) * orientations(p[i], q[i], q[i + 2 :])
        b = orientations(p[i + 2 :], q[i + 2 :], p[i]) * orientations(p[i + 2 :], q[i + 2 :], q[i])
        expected |= {(i, int(j) + i + 2) for j in np.flatnonzero((a <= 0) & (b <= 0))}
    expected.discard((0, corners - 1))
    assert found == expected
    assert len(found) > corners / 10


def slanted_comb(teeth: int) -> Floats:
    x = np.arange(teeth)
    top = np.stack([(x, 0 * x), (x, 0 * x + teeth), (x + 0.5, 0 * x + teeth), (x + 0.5, 0 * x)]).transpose(
        2, 0, 1
    )
    points = np.concatenate([top.reshape(-1, 2), [(teeth, 0), (teeth, -1), (0, -1)]])
    return points @ np.array([(0.8, 0.6), (-0.6, 0.8)])


@pytest.mark.parametrize("ring", [slanted_comb(2500), star(np.random.default_rng(1), 20_000, 0.01)])
def test_long_thin_rings_open_few_pairs(ring: Floats) -> None:
    p, q = contacts.edge_ends([as_ring(ring)])
    pairs = sum(len(i) for i, _ in nearby_edges(p, q))
    assert pairs < 12 * len(ring)


def test_a_large_ring_with_one_touch_is_refused() -> None:
    ring = slanted_comb(3000)
    assert is_ring(ring)
    ring[4002] = ring[4005] = (ring[4002] + ring[4005]) / 2
    assert not is_ring(ring)


# Area


def test_area_of_a_room_far_from_the_origin_keeps_its_digits() -> None:
    shifted = np.array(ELL) + np.array([5e6, -5e6])
    assert signed_area(as_ring(shifted)) == 33
    assert signed_area(np.array(ELL[::-1])) == -33


@pytest.mark.parametrize("seed", range(10))
def test_area_agrees_with_rational_arithmetic(seed: int) -> None:
    rng = np.random.default_rng(seed)
    ring = as_ring(star(rng, 200) * 10 + rng.choice([0, 5e6], 2))
    corners = [(Fraction(x), Fraction(y)) for x, y in ring.tolist()]
    exact = (
        sum(a[0] * b[1] - a[1] * b[0] for a, b in zip(corners, corners[1:] + corners[:1], strict=True)) / 2
    )
    assert abs(Fraction(signed_area(ring)) / exact - 1) < 1e-14


# Holes


@pytest.mark.parametrize(
    "holes",
    [
        [],
        [rectangle(1, 1, 2, 2)],
        [rectangle(1, 1, 2, 2), rectangle(2, 2, 3, 3)],  # two columns that touch in a corner
        [[(0, 5), (1, 4), (1, 6)]],  # a column that touches a wall in a point
        [[(0, 0), (1, 2), (2, 1)]],  # a corner
        [[(0, 5), (5, 0), (10, 5), (5, 10)]],  # all four walls
        [rectangle(1, 1, 9, 2), rectangle(1, 3, 9, 4), rectangle(1, 5, 9, 6)],
    ],
)
def test_holes_inside_may_touch_in_points(holes: list[Corners]) -> None:
    rings = as_rings(SQUARE, holes)
    assert signed_area(rings[0]) == 100
    assert all(signed_area(ring) < 0 for ring in rings[1:])
    assert len(rings) == 1 + len(holes)


@pytest.mark.parametrize(
    ("holes", "fault"),
    [
        ([rectangle(1, 0, 2, 2)], "the outline and hole 1 run along each other"),
        ([rectangle(0, 0, 10, 10)], "the outline and hole 1 run along each other"),
        ([rectangle(9, 9, 11, 11)], "the outline and hole 1 cross"),
        ([rectangle(11, 11, 12, 12)], "hole 1 is not inside the outline"),
        ([rectangle(-1, -1, 11, 11)], "hole 1 is not inside the outline"),
        ([[(0, 5), (-1, 4), (-1, 6)]], "hole 1 is not inside the outline"),
        ([[(0, 0), (-1, 2), (2, -1)]], "the outline and hole 1 cross|not inside"),
        ([[(5, 0), (6, 1), (10, 5), (11, 6), (5, 5)]], "cross"),
        ([rectangle(1, 1, 3, 3), rectangle(2, 2, 4, 4)], "hole 1 and hole 2 cross"),
        ([rectangle(1, 1, 3, 3), rectangle(1, 1, 3, 3)], "hole 1 and hole 2 run along each other"),
        ([rectangle(1, 1, 3, 3), rectangle(3, 2, 5, 4)], "hole 1 and hole 2 run along each other"),
        ([rectangle(1, 1, 9, 9), rectangle(2, 2, 3, 3)], "hole 2 lies in hole 1"),
        ([rectangle(2, 2, 3, 3), rectangle(1, 1, 9, 9)], "hole 1 lies in hole 2"),
        ([rectangle(1, 1, 9, 9), [(1, 5), (5, 4), (5, 6)]], "hole 2 lies in hole 1"),
        ([rectangle(1, 1, 2, 2), [(3, 3), (4, 4), (4, 3), (3, 4)]], "hole 2: the ring crosses"),
        ([[(1, 1), (2, 1)]], "hole 1: a ring needs three"),
    ],
)
def test_holes_that_make_no_room_are_refused_with_the_reason(holes: list[Corners], fault: str) -> None:
    with pytest.raises(GeometryError, match=fault):
        as_rings(SQUARE, holes)


def test_a_hole_through_a_corner_of_the_outline_is_refused() -> None:
    """The hole leaves the ell through its inner corner, where it touches no wall anywhere else."""
    through = [(2, 2), (3, 3), (2, 2.5)]
    assert len(as_rings(ELL, [through])) == 2
    with pytest.raises(GeometryError):
        as_rings(ELL, [[(2, 2), (3, 3), (4, 4), (2, 2.5)]])
    with pytest.raises(GeometryError):
        as_rings(ELL, [[(3, 3), (5, 4), (4, 5)]])


def test_many_columns_far_from_the_origin() -> None:
    shift = np.array([5e6, 5e6])
    columns = [np.array(rectangle(k, m, k + 0.5, m + 0.5)) + shift for k in range(1, 9) for m in range(1, 9)]
    assert len(as_rings(np.array(SQUARE) + shift, columns)) == 65
    columns[17] = columns[17] + 0.5
    with pytest.raises(GeometryError, match="hole"):
        as_rings(np.array(SQUARE) + shift, [*columns, np.array(rectangle(4.2, 4.2, 4.3, 4.3)) + shift])


# A point and a ring


@pytest.mark.parametrize("seed", range(20))
def test_the_side_of_a_ring_agrees_with_winding_in_rational_arithmetic(seed: int) -> None:
    rng = np.random.default_rng(seed)
    ring = as_ring(grown_ring(rng, 14, 8))
    for point in [*rng.integers(-1, 9, (30, 2)), *rng.integers(0, 16, (30, 2)) / 2, *ring]:
        assert side_of_ring(ring, point.tolist()) == winding_side(ring, point)


def winding_side(ring: Floats, point: Floats) -> int:
    """Return 0 if the point is on an edge, else 1 or -1 by quarter turns of the corners around it."""
    quarters = 0
    for p, q in zip(ring, np.roll(ring, -1, axis=0), strict=True):
        side = exact_side(p, q, point)
        a, b = p - point, q - point
        if side == 0 and a @ b <= 0:
            return 0
        step = (quadrant(b) - quadrant(a)) % 4
        quarters += step if step < 2 else (-1 if step == 3 else 2 * side)
    return 1 if quarters else -1


def quadrant(v: Floats) -> int:
    if v[1] >= 0:
        return 0 if v[0] > 0 else 1 if v[1] > 0 else 2
    return 3 if v[0] >= 0 else 2


# The predicate under all of it


@pytest.mark.parametrize("scale", [1.0, 1e-160, 1e160, 5e-324, 1e308])
def test_orientation_is_exact(scale: float) -> None:
    rng = np.random.default_rng(9)
    grid = rng.integers(-3, 4, (300, 3, 2)) * (scale if scale < 1e300 else scale / 4)
    jitter = np.nextafter(grid, np.inf)
    triples = np.where(rng.random(grid.shape) < 0.2, jitter, grid)
    expected = [exact_side(*triple) for triple in triples.tolist()]
    assert orientations(triples[:, 0], triples[:, 1], triples[:, 2]).tolist() == expected
    assert [orientation(*triple) for triple in triples.tolist()] == expected
    assert set(expected) == {-1, 0, 1}


def test_orientation_takes_rationals() -> None:
    third = Fraction(1, 3)
    assert orientation((Fraction(0), Fraction(0)), (Fraction(1), Fraction(1)), (third, third)) == 0
    assert (
        orientation(
            (Fraction(0), Fraction(0)), (Fraction(1), Fraction(1)), (third, third + Fraction(1, 10**30))
        )
        == 1
    )
