"""The overlay's few functions, on shapes whose answers are known by hand."""

import numpy as np
import pytest

from kernelscan.geometry.rings import as_ring, as_rings, signed_area
from kernelscan.geometry.shapes import (
    Patch,
    area,
    covers_points,
    difference,
    interior_point,
    intersection,
    neighbouring_lines,
    union,
)


def rectangle(x0: float, y0: float, x1: float, y1: float) -> list[tuple[float, float]]:
    return [(x0, y0), (x1, y0), (x1, y1), (x0, y1)]


FRAME = Patch(rectangle(0, 0, 10, 10), [rectangle(4, 4, 6, 6)])


def total(patches: list[Patch]) -> float:
    return sum(area(patch) for patch in patches)


def test_area_takes_holes_off() -> None:
    assert area(FRAME) == 96


def test_points_on_the_edge_are_covered_and_points_in_a_hole_are_not() -> None:
    assert covers_points(FRAME, [(1, 1), (0, 5), (4, 5), (5, 5), (11, 5)]).tolist() == [
        True,
        True,
        True,
        False,
        False,
    ]
    assert covers_points(FRAME, []).shape == (0,)


def test_a_column_against_a_wall_becomes_a_pilaster() -> None:
    (piece,) = difference(Patch(rectangle(0, 0, 6, 4)), [Patch(rectangle(2, 0, 3, 1))])
    ring = as_ring(piece.outline)
    assert not piece.holes
    assert len(ring) == 8
    assert signed_area(ring) == 23


def test_difference_of_nothing_and_of_everything() -> None:
    assert total(difference(FRAME, [])) == 96
    assert difference(FRAME, [Patch(rectangle(-1, -1, 11, 11))]) == []


def test_a_cut_through_gives_two_pieces() -> None:
    pieces = difference(Patch(rectangle(0, 0, 6, 4)), [Patch(rectangle(2, -1, 3, 5))])
    assert sorted(area(piece) for piece in pieces) == [8, 12]


def test_union_joins_what_touches_and_keeps_holes() -> None:
    walls = [rectangle(0, 0, 6, 1), rectangle(0, 3, 6, 4), rectangle(0, 0, 1, 4), rectangle(5, 0, 6, 4)]
    (piece,) = union(Patch(wall) for wall in walls)
    outline, hole = as_rings(piece.outline, piece.holes)
    assert signed_area(outline) == 24
    assert signed_area(hole) == -8


def test_pieces_come_in_the_direction_of_rings() -> None:
    (piece,) = union([Patch(rectangle(0, 0, 9, 9)[::-1], [rectangle(1, 1, 2, 2)])])
    assert signed_area(np.asarray(piece.outline)) > 0
    assert signed_area(np.asarray(piece.holes[0])) < 0


def test_intersection_drops_pieces_without_area() -> None:
    assert intersection(Patch(rectangle(0, 0, 1, 1)), Patch(rectangle(1, 0, 2, 1))) == []
    assert total(intersection(Patch(rectangle(0, 0, 2, 2)), Patch(rectangle(1, 1, 3, 3)))) == 1
    saw = [(0, 0), (4, 0), (4, 2), (3, 1), (3, 2), (2, 2), (2, 1), (0, 1)]
    assert total(intersection(Patch(saw), Patch(rectangle(0, 1, 4, 3)))) == pytest.approx(1.5)


@pytest.mark.parametrize(("dx", "dy"), [(0, 0), (5e6, -3e6)])
def test_a_label_point_keeps_away_from_walls_and_holes(dx: float, dy: float) -> None:
    shift = np.array([dx, dy])
    outline = np.array([(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]) + shift
    x, y = interior_point(outline)
    assert min(x - dx, y - dy) > 1.4
    hole = np.array(rectangle(1, 1, 2, 2)) + shift
    x, y = interior_point(outline, [hole])
    assert covers_points(Patch(outline, [hole]), [(x, y)]).all()
    assert np.hypot(x - dx - 1.5, y - dy - 1.5) > 2


def test_neighbouring_lines_are_those_no_farther_off() -> None:
    starts, ends = np.array([(0.0, 0), (0, 5)]), np.array([(4.0, 0), (4, 5)])
    others = np.array([(1.0, 0.5), (3, -2), (5, 0)]), np.array([(2.0, 0.5), (3, 2), (6, 0)])
    k, i = neighbouring_lines(starts, ends, others, 0.5)
    assert sorted(zip(k.tolist(), i.tolist(), strict=True)) == [(0, 0), (0, 1)]
    k, i = neighbouring_lines(starts, ends, others, 1.0)
    assert sorted(zip(k.tolist(), i.tolist(), strict=True)) == [(0, 0), (0, 1), (0, 2)]
    none = np.empty((0, 2))
    assert [len(part) for part in neighbouring_lines(none, none, others, 1.0)] == [0, 0]
