"""What one eye sees, against brute force in rational numbers, against an independent exact library, and by symmetry."""

from collections.abc import Iterator, Sequence
from itertools import pairwise

import numpy as np
import pytest
from geometry import visible_oracle
from geometry.grown_rooms import Floats, grown_room, star

from kernelscan.errors import GeometryError
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.geometry.nesting import side_of_ring
from kernelscan.geometry.rings import as_ring, as_rings, signed_area
from kernelscan.geometry.signs import orientations
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


# Symmetry and steps


def split(rings: Iterator[Floats]) -> tuple[Floats, list[Floats]]:
    outline, *holes = rings
    return outline, holes


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


@pytest.mark.parametrize("seed", range(10))
def test_the_whole_room_is_seen_just_from_the_inner_side_of_every_wall(seed: int) -> None:
    rng = np.random.default_rng(8000 + seed)
    rings = grown_room(rng, int(rng.integers(4, 9)), 0, 6)
    verdicts = []
    for eye in np.argwhere(np.ones((11, 11))) / 2:
        if side_of_ring(rings[0], eye.tolist()) < 0:
            continue
        view = view_from(rings, eye)
        verdicts.append((orientations(rings[0], np.roll(rings[0], -1, axis=0), eye) >= 0).all())
        assert (view.wall_fraction == 1) == verdicts[-1]
        assert (view.floor_fraction > 1 - 1e-12) == verdicts[-1]
        assert (
            np.unique(view.walls, axis=0).tolist() == [[0, k] for k in range(len(rings[0]))]
            or not verdicts[-1]
        )
    assert verdicts


@pytest.mark.parametrize("seed", range(10))
def test_the_middle_of_a_kernel_sees_every_wall(seed: int) -> None:
    rings = as_rings(star(np.random.default_rng(9000 + seed), 60))
    kernel = kernel_of_rings(rings)
    assert kernel.kind == "area"
    view = view_from(rings, kernel.vertices.mean(axis=0))
    assert view.wall_fraction == 1
    assert view.floor_fraction == pytest.approx(1, abs=1e-13)
    assert view.spans.tolist() == [[0, 1]] * 60


# Hostile


@pytest.mark.parametrize("columns", [1, 5, 20])
def test_columns_whose_tips_are_all_in_line_with_the_eye(columns: int) -> None:
    tips = [[(k + 0.2, 2), (k + 0.4, 1), (k + 0.6, 2)] for k in range(1, columns + 1)]
    length = columns + 2
    rings = as_rings([(0, 0), (length, 0), (length, 4), (0, 4)], tips)
    pieces = visible_oracle.sight(rings, (0, 1))
    region = visible_from(rings, (0, 1))
    assert signed_area(region) == pytest.approx(float(visible_oracle.seen_area(pieces, (0, 1))), rel=1e-13)


@pytest.mark.parametrize("scale", [2.0**-1000, 2.0**-520, 2.0**500, 2.0**1018])
def test_rooms_of_any_size_are_seen_alike(scale: float) -> None:
    rings = grown_room(np.random.default_rng(6), 16, 3, 14)
    scaled = as_rings(*split(ring * scale for ring in rings))
    for eye in (rings[0][0], rings[1][1], (rings[0][2] + rings[0][3]) / 2):
        view, same = view_from(rings, eye), view_from(scaled, eye * scale)
        assert np.abs(same.region / scale - view.region).max() < 1e-14
        assert same.walls.tolist() == view.walls.tolist()
        assert same.floor_fraction == pytest.approx(view.floor_fraction, rel=1e-14)
        assert same.wall_fraction == pytest.approx(view.wall_fraction, rel=1e-14)
