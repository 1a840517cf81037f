"""What one eye sees, against brute force in rational numbers, against an independent exact library, and by symmetry."""

from collections.abc import Iterator, Sequence
from itertools import pairwise

import numpy as np
import pytest
from geometry import visible_oracle
from geometry.grown_rooms import Floats, columned_room, grown_room, star

from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import Ring, as_ring, as_rings, signed_area
from kernelscan.geometry.visible import View, view_from, visible_from, visible_region, visible_regions

SQUARE = [(0, 0), (10, 0), (10, 10), (0, 10)]
ELL = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
COLUMN = [(4, 4), (6, 4), (6, 6), (4, 6)]


def same_ring(found: Floats, expected: Sequence[tuple[float, float]], error: float = 1e-12) -> bool:
    """Whether two rings are the same up to where they start."""
    wanted = np.array(expected, dtype=float)
    return found.shape == wanted.shape and any(
        np.abs(np.roll(found, k, axis=0) - wanted).max() <= error for k in range(len(wanted))
    )


def eyes_of(rng: np.random.Generator, rings: Sequence[Ring], size: int) -> Iterator[Floats]:
    """Yield eyes of every kind: on the grid, half-way, anywhere, at corners and in the middle of walls."""
    yield rng.integers(0, size, 2).astype(float)
    yield rng.integers(0, 2 * size, 2) / 2
    yield rng.uniform(0, size, 2)
    for ring in rings:
        k = int(rng.integers(len(ring)))
        yield ring[k]
        yield (ring[k] + ring[k - 1]) / 2


# Basic


def test_a_convex_room_is_seen_whole() -> None:
    region = visible_region(SQUARE, (3, 4))
    assert same_ring(region, SQUARE)
    assert not region.flags.writeable


def test_an_ell_hides_what_is_round_its_corner() -> None:
    assert same_ring(visible_region(ELL, (1, 5)), [(0, 0), (6, 0), (3, 3), (3, 6), (0, 6)])


def test_a_column_casts_a_shadow() -> None:
    view = view_from(as_rings(SQUARE, [COLUMN]), (2, 2))
    assert same_ring(view.region, [(0, 0), (10, 0), (10, 6), (6, 4), (4, 4), (4, 6), (6, 10), (0, 10)])
    assert view.walls.tolist() == [[0, 0], [0, 1], [0, 2], [0, 3], [1, 0], [1, 3]]
    assert view.spans == pytest.approx(np.array([(0, 1), (0, 0.6), (0.4, 1), (0, 1), (0, 1), (0, 1)]))
    assert view.wall_fraction == pytest.approx((10 + 6 + 6 + 10 + 2 + 2) / 48)
    assert view.floor_fraction == pytest.approx(72 / 96)


def test_both_directions_and_a_repeated_end_give_one_answer() -> None:
    expected = visible_region(SQUARE, (2, 2), [COLUMN])
    other = visible_region([*SQUARE[::-1], SQUARE[-1]], (2, 2), [[*COLUMN[::-1], COLUMN[-1]]])
    assert same_ring(other, expected.tolist())


def test_many_eyes_give_what_each_gives() -> None:
    rings = as_rings(SQUARE, [COLUMN])
    eyes = [(1, 1), (5, 4), (9.5, 2), (0, 0)]
    for eye, region in zip(eyes, visible_regions(rings, eyes), strict=True):
        assert (region == visible_from(rings, eye)).all()


# Degenerate eyes


def test_on_a_wall_only_the_room_s_side_is_seen() -> None:
    assert same_ring(visible_region(ELL, (4, 0)), [(4, 0), (8, 0), (8, 3), (3, 3), (2, 6), (0, 6), (0, 0)])


def test_at_a_convex_corner() -> None:
    assert signed_area(visible_region(ELL, (0, 0))) == 33
    assert same_ring(visible_region(ELL, (8, 0)), [(8, 0), (8, 3), (3, 3), (0, 4.8), (0, 0)])


def test_at_a_reflex_corner_the_whole_ell_is_seen() -> None:
    assert same_ring(visible_region(ELL, (3, 3)), ELL)


def test_in_line_with_a_wall_the_sight_grazes_it() -> None:
    view = view_from(as_rings(ELL), (1, 3))
    assert same_ring(view.region, ELL)
    assert view.wall_fraction == 1
    assert view.floor_fraction == 1


def test_a_wall_in_line_is_seen_just_when_the_region_reaches_along_it() -> None:
    above, below = [(4, 4), (5, 4), (5, 5), (4, 5)], [(7, 3), (8, 3), (8, 4), (7, 4)]
    assert has_wall(view_from(as_rings(SQUARE, [above]), (1, 4)), (1, 3))
    assert has_wall(view_from(as_rings(SQUARE, [below]), (1, 4)), (1, 1))
    # between the two there is only a line of sight without area
    both = view_from(as_rings(SQUARE, [above, below]), (1, 4))
    assert has_wall(both, (1, 3))
    assert not has_wall(both, (2, 1))
    screen = [(4, 3), (5, 3), (5, 5), (4, 5)]
    assert not has_wall(view_from(as_rings(SQUARE, [screen, below]), (1, 4)), (2, 1))


def has_wall(view: View, wall: tuple[int, int]) -> bool:
    return list(wall) in view.walls.tolist()


def test_at_a_column_s_corner_and_on_its_side() -> None:
    rings = as_rings(SQUARE, [COLUMN])
    assert signed_area(visible_from(rings, (4, 4))) == 100 - 6 * 6
    assert signed_area(visible_from(rings, (5, 4))) == 40


def test_where_a_column_touches_a_wall_in_a_point_the_region_comes_back_to_the_eye() -> None:
    rings = as_rings(SQUARE, [[(5, 0), (6, 2), (4, 2)]])
    region = visible_from(rings, (5, 0))
    assert (region == (5, 0)).all(axis=1).sum() == 2
    assert signed_area(region) == 50


def test_through_a_slit() -> None:
    gap = 1e-9
    walls = [
        (0, 0),
        (4, 0),
        (4, 5 - gap),
        (6, 5 - gap),
        (6, 0),
        (10, 0),
        (10, 10),
        (6, 10),
        (6, 5 + gap),
        (4, 5 + gap),
    ]
    rings = as_rings([*walls, (4, 10), (0, 10)])
    # in the slit all of its width 2 g; beyond it a strip that has widened from there to 4 g at the wall
    beyond = signed_area(visible_from(rings, (2, 5))) - 40
    assert beyond == pytest.approx(2 * gap * 2 + (2 * gap + 4 * gap) / 2 * 4, rel=1e-5)
    assert signed_area(visible_from(rings, (2, 5.5))) == pytest.approx(40, abs=1e-8)


def test_past_two_corners_on_opposite_sides_nothing_of_area_is_seen() -> None:
    rings = as_rings(
        [(0, 0), (10, 0), (10, 10), (0, 10)],
        [[(3, 5), (4, 5), (4, 8), (3, 8)], [(6, 2), (7, 2), (7, 5), (6, 5)]],
    )
    region = visible_from(rings, (1, 5))
    pieces = visible_oracle.sight(rings, (1, 5))
    assert signed_area(region) == pytest.approx(float(visible_oracle.seen_area(pieces, (1, 5))))


# Refused


@pytest.mark.parametrize(
    "eye", [(11, 5), (5, 5), (-1e-300, 5), (10, 10.000000000000002), (4.000000000000001, 5)]
)
def test_an_eye_outside_the_room_or_in_a_column_is_refused(eye: tuple[float, float]) -> None:
    with pytest.raises(GeometryError, match="outside the room or inside a hole"):
        visible_region(SQUARE, eye, [COLUMN])


@pytest.mark.parametrize("eye", [(float("nan"), 1), (float("inf"), 1), (1,), (1, 2, 3), "no", None, [[1, 1]]])
def test_an_eye_that_is_no_point_is_refused(eye: object) -> None:
    with pytest.raises(GeometryError, match="an eye needs two"):
        visible_region(SQUARE, eye)  # type: ignore[arg-type]


def test_an_eye_on_a_slanted_wall_is_in_only_if_it_is_exactly_there() -> None:
    triangle = [(0, 0), (3, 0), (3, 3)]
    assert signed_area(visible_region(triangle, (1.1, 1.1))) == 4.5
    with pytest.raises(GeometryError):
        visible_region(triangle, (1.1, np.nextafter(1.1, 2)))


# Against brute force in rational arithmetic


def agrees(view: View, rings: Sequence[Ring], error: float) -> None:
    """Check area, pieces of wall and fractions of a view against brute force."""
    pieces = visible_oracle.sight(rings, view.eye)
    area = float(visible_oracle.seen_area(pieces, view.eye))
    assert abs(signed_area(view.region) - area) <= error * max(area, 1)
    facing = [piece for piece in pieces if piece.first != piece.last]
    starts = np.cumsum([0, *(len(ring) for ring in rings)])
    found = sorted(
        (starts[ring] + edge, *span)
        for (ring, edge), span in zip(view.walls.tolist(), view.spans.tolist(), strict=True)
        if not in_line(rings[ring], edge, view.eye)
    )
    walls = visible_oracle.walls_of(rings)
    expected = sorted((s.wall, along(walls[s.wall], s.first), along(walls[s.wall], s.last)) for s in facing)
    assert [f[0] for f in found] == [e[0] for e in expected]
    assert np.allclose(np.array(found), np.array(expected), rtol=0, atol=error)


def in_line(ring: Ring, edge: int, eye: Floats) -> bool:
    p, q, c = visible_oracle.exact([ring[edge], ring[(edge + 1) % len(ring)], eye])
    return visible_oracle.cross(visible_oracle.minus(q, p), visible_oracle.minus(c, p)) == 0


def along(wall: tuple[visible_oracle.Point, visible_oracle.Point], point: visible_oracle.Point) -> float:
    (px, py), (qx, qy) = wall
    return float((point[0] - px) / (qx - px) if qx != px else (point[1] - py) / (qy - py))


@pytest.mark.parametrize("seed", range(60))
def test_small_rooms_on_a_grid_agree_with_brute_force(seed: int) -> None:
    rng = np.random.default_rng(seed)
    size = int(rng.integers(4, 12))
    rings = grown_room(rng, int(rng.integers(3, 20)), int(rng.integers(0, 4)), size)
    check_eyes(rng, rings, size, 1e-12)


@pytest.mark.parametrize("seed", range(30))
def test_nearly_degenerate_rooms_agree_with_brute_force(seed: int) -> None:
    rng = np.random.default_rng(1000 + seed)
    size = int(rng.integers(4, 12))
    steps = [0, 0, 0, 1e-15, -1e-15, 2e-16, 1e-13, 1e-9, -1e-7]
    grid = grown_room(rng, int(rng.integers(3, 20)), int(rng.integers(0, 4)), size)
    try:
        rings = as_rings(*split(ring + rng.choice(steps, ring.shape) for ring in grid))
    except GeometryError:  # a touch has become a crossing
        rings = as_rings(grid[0] + rng.choice(steps[3:], 2))
    check_eyes(rng, rings, size, 1e-9)


@pytest.mark.parametrize("seed", range(10))
def test_rooms_far_from_the_origin_agree_with_brute_force(seed: int) -> None:
    rng = np.random.default_rng(2000 + seed)
    shift = rng.choice([-5e6, 5e6], 2)
    rings = as_rings(*split(ring / 4 + shift for ring in grown_room(rng, 16, 3, 8)))
    for eye in eyes_of(rng, [ring - shift for ring in rings], 2):
        check_eye(rings, eye + shift, 1e-8)


def split(rings: Iterator[Floats]) -> tuple[Floats, list[Floats]]:
    outline, *holes = rings
    return outline, holes


def check_eyes(rng: np.random.Generator, rings: Sequence[Ring], size: int, error: float) -> None:
    for eye in eyes_of(rng, rings, size):
        check_eye(rings, eye, error)


def check_eye(rings: Sequence[Ring], eye: Floats, error: float) -> None:
    walls, (c,) = visible_oracle.walls_of(rings), visible_oracle.exact([eye])
    if visible_oracle.on_wall(walls, c) or visible_oracle.in_floor(walls, c):
        agrees(view_from(rings, eye), rings, error)
    else:
        with pytest.raises(GeometryError):
            visible_from(rings, eye)


def test_the_comparison_can_fail() -> None:
    rings = as_rings(ELL)
    view = view_from(rings, (1, 5))
    wrong = View(np.array([1.0, 4.0]), view.region, view.walls, view.spans, 1, 1)
    with pytest.raises(AssertionError):
        agrees(wrong, rings, 1e-9)


# Against points tried one by one


@pytest.mark.parametrize("seed", range(6))
def test_points_of_the_floor_are_in_the_region_just_when_a_segment_reaches_them(seed: int) -> None:
    rng = np.random.default_rng(3000 + seed)
    rings = grown_room(rng, 16, 3, 10)
    eyes = [eye for eye in rng.uniform(0, 10, (40, 2)) if inside(rings, eye)][:2]
    assert eyes
    for eye in eyes:
        region = [visible_from(rings, eye)]
        targets = [target for target in rng.uniform(0, 10, (60, 2)) if inside(rings, target)]
        assert all(inside(region, t) == visible_oracle.sees(rings, eye, t) for t in targets)


def inside(rings: Sequence[Floats], point: Floats) -> bool:
    return visible_oracle.in_floor(visible_oracle.walls_of(rings), visible_oracle.exact([point])[0])


@pytest.mark.parametrize("seed", range(4))
def test_sight_is_mutual(seed: int) -> None:
    rng = np.random.default_rng(4000 + seed)
    rings = grown_room(rng, 14, 2, 9)
    points = [point for point in rng.uniform(0, 9, (60, 2)) if inside(rings, point)][:9]
    regions = visible_regions(rings, points)
    seen = np.array([[inside([region], point) for point in points] for region in regions])
    assert (seen | np.eye(len(points), dtype=bool) == (seen | np.eye(len(points), dtype=bool)).T).all()


# Symmetry and steps


@pytest.mark.parametrize("seed", range(8))
def test_turning_mirroring_and_scaling_change_nothing(seed: int) -> None:
    rng = np.random.default_rng(5000 + seed)
    rings = grown_room(rng, 16, 3, 10)
    eye = rings[0][int(rng.integers(len(rings[0])))]
    expected = signed_area(visible_from(rings, eye))
    for matrix, scale in (([[0, 1], [-1, 0]], 1), ([[-1, 0], [0, 1]], 1), ([[0.25, 0], [0, 0.25]], 16)):
        moved = as_rings(*split(ring @ np.array(matrix, dtype=float) for ring in rings))
        region = visible_from(moved, eye @ np.array(matrix, dtype=float))
        assert scale * signed_area(region) == pytest.approx(expected, rel=1e-13)


@pytest.mark.parametrize("seed", range(8))
def test_where_a_ring_starts_and_an_added_wall_point_change_nothing(seed: int) -> None:
    rng = np.random.default_rng(6000 + seed)
    rings = grown_room(rng, 16, 2, 12)
    eye = rings[0][0]
    expected = signed_area(visible_from(rings, eye))
    turned = tuple(as_ring(np.roll(ring, 2, axis=0), hole=k > 0) for k, ring in enumerate(rings))
    assert signed_area(visible_from(turned, eye)) == pytest.approx(expected, rel=1e-13)
    split_up = np.stack([rings[0], (rings[0] + np.roll(rings[0], -1, axis=0)) / 2], axis=1).reshape(-1, 2)
    assert signed_area(visible_from((as_ring(split_up), *rings[1:]), eye)) == pytest.approx(
        expected, rel=1e-13
    )


@pytest.mark.parametrize("seed", range(8))
def test_one_column_more_never_shows_more(seed: int) -> None:
    rng = np.random.default_rng(7000 + seed)
    rings = grown_room(rng, 12, 4, 12)
    eye = rings[0][0]
    areas = [signed_area(visible_from(rings[: k + 1], eye)) for k in range(len(rings))]
    assert all(more <= less * (1 + 1e-13) for less, more in pairwise(areas))


def test_from_every_point_of_the_kernel_the_whole_room_is_seen() -> None:
    kernel = [(0, 0), (3, 0), (3, 3), (0, 3)]
    rng = np.random.default_rng(8)
    for eye in [*kernel, (1.5, 0), (3, 1), (0, 2.5), *rng.uniform(0, 3, (20, 2))]:
        view = view_from(as_rings(ELL), eye)
        assert view.wall_fraction == 1
        assert view.floor_fraction == 1
    assert view_from(as_rings(ELL), (3.0000000000000004, 2)).floor_fraction < 1


# Large rooms, against an independent exact library


@pytest.mark.parametrize(("corners", "columns"), [(300, 0), (1000, 0), (1000, 5), (3000, 20), (10_000, 50)])
def test_large_rooms_agree_with_an_independent_library(corners: int, columns: int) -> None:
    pyvispoly = pytest.importorskip("pyvispoly")
    rng = np.random.default_rng(corners + columns)
    rings = columned_room(rng, corners, columns) if columns else as_rings(star(rng, corners))

    def polygon(ring: Ring) -> object:
        return pyvispoly.Polygon([pyvispoly.Point(x, y) for x, y in ring.tolist()])

    room = pyvispoly.PolygonWithHoles(polygon(rings[0]), [polygon(ring) for ring in rings[1:]])
    calculator = pyvispoly.VisibilityPolygonCalculator(room)
    eyes = [eye for eye in rng.uniform(-0.7, 0.7, (60, 2)) if located(rings, eye)][:3]
    assert len(eyes) == 3
    for eye in eyes:
        expected = calculator.compute_visibility_polygon(pyvispoly.Point(*eye.tolist()))
        region = visible_from(rings, eye)
        assert signed_area(region) == pytest.approx(float(expected.area()), rel=1e-9)


def located(rings: Sequence[Ring], eye: Floats) -> bool:
    try:
        visible_from(rings, eye)
    except GeometryError:
        return False
    return True


@pytest.mark.parametrize("columns", [1, 5, 20])
def test_columns_whose_tips_are_all_in_line_with_the_eye(columns: int) -> None:
    tips = [[(k + 0.2, 2), (k + 0.4, 1), (k + 0.6, 2)] for k in range(1, columns + 1)]
    length = columns + 2
    rings = as_rings([(0, 0), (length, 0), (length, 4), (0, 4)], tips)
    pieces = visible_oracle.sight(rings, (0, 1))
    region = visible_from(rings, (0, 1))
    assert signed_area(region) == pytest.approx(float(visible_oracle.seen_area(pieces, (0, 1))), rel=1e-13)
