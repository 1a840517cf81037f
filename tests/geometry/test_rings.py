"""Rings: what becomes one, what is refused and why, and how holes may lie."""

from collections.abc import Sequence
from fractions import Fraction

import numpy as np
import pytest
import shapely
from geometry.grown_rooms import Floats, grown_ring, star

from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import as_ring, as_rings, signed_area

Corners = Sequence[tuple[float, float]]

ELL = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
SQUARE = [(0, 0), (10, 0), (10, 10), (0, 10)]


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
        (np.array([(0, 0), (1j, 0), (0, 1)]), "numbers"),
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


@pytest.mark.parametrize("seed", range(10))
def test_random_holes_are_judged_as_the_overlay_of_their_areas_has_it(seed: int) -> None:
    rng = np.random.default_rng(seed)
    verdicts = []
    for _ in range(100):
        outline = grown_ring(rng, 6, 9)
        holes = [grown_ring(rng, 3, 3) + rng.integers(0, 7, 2) for _ in range(2)]
        room, *columns = (shapely.Polygon(ring) for ring in (outline, *holes))
        verdicts.append(
            all(room.covers(column) for column in columns)
            and columns[0].intersection(columns[1]).length == 0
            and all(room.exterior.intersection(column.exterior).length == 0 for column in columns)
        )
        assert accepted(outline, holes) == verdicts[-1]
    assert set(verdicts) == {False, True}


def accepted(outline: Floats, holes: list[Floats]) -> bool:
    try:
        as_rings(outline, holes)
    except GeometryError:
        return False
    return True


def test_many_columns_far_from_the_origin() -> None:
    shift = np.array([5e6, 5e6])
    columns = [np.array(rectangle(k, m, k + 0.5, m + 0.5)) + shift for k in range(1, 9) for m in range(1, 9)]
    assert len(as_rings(np.array(SQUARE) + shift, columns)) == 65
    columns[17] = columns[17] + 0.5
    with pytest.raises(GeometryError, match="hole"):
        as_rings(np.array(SQUARE) + shift, [*columns, np.array(rectangle(4.2, 4.2, 4.3, 4.3)) + shift])
