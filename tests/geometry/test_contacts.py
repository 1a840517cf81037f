"""Which edges meet and on which side points lie, against brute force in rational arithmetic."""

from collections.abc import Sequence
from fractions import Fraction

import numpy as np
import pytest
from geometry.grown_rooms import Floats, grown_ring, star

from kernelscan.errors import GeometryError
from kernelscan.geometry import contacts
from kernelscan.geometry.neighbourhood import nearby_edges
from kernelscan.geometry.nesting import side_of_ring
from kernelscan.geometry.rings import as_ring
from kernelscan.geometry.signs import orientation, orientations

TINY = 1e-12


def is_ring(points: object) -> bool:
    try:
        as_ring(points)  # type: ignore[arg-type]
    except GeometryError:
        return False
    return True


def exact_side(a: Sequence[float], b: Sequence[float], c: Sequence[float]) -> int:
    (ax, ay), (bx, by), (cx, cy) = ((Fraction(float(x)), Fraction(float(y))) for x, y in (a, b, c))
    value = (bx - ax) * (cy - ay) - (by - ay) * (cx - ax)
    return (value > 0) - (value < 0)


# Against brute force


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


@pytest.mark.parametrize("seed", range(20))
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


# A point and a ring


@pytest.mark.parametrize("seed", range(20))
def test_the_side_of_a_ring_agrees_with_winding_in_rational_arithmetic(seed: int) -> None:
    rng = np.random.default_rng(seed)
    ring = as_ring(grown_ring(rng, 14, 8))
    for point in [*rng.integers(-1, 9, (30, 2)), *rng.integers(0, 16, (30, 2)) / 2, *ring]:
        found = side_of_ring(ring, point.astype(float).tolist())
        assert found == winding_side(ring, point)
        assert side_of_ring(ring, [Fraction(x) for x in point.tolist()]) == found


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
