"""What one eye sees, against brute force in rational arithmetic and against an independent exact library."""

from collections.abc import Iterator, Sequence

import numpy as np
import pytest
from geometry import visible_oracle
from geometry.grown_rooms import Floats, columned_room, grown_room, star

from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import Ring, as_rings, signed_area
from kernelscan.geometry.visible import View, view_from, visible_from, visible_regions

ELL = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]


def eyes_of(rng: np.random.Generator, rings: Sequence[Ring], size: int) -> Iterator[Floats]:
    """Yield eyes of every kind: on the grid, half-way, anywhere, at corners and in the middle of walls."""
    yield rng.integers(0, size, 2).astype(float)
    yield rng.integers(0, 2 * size, 2) / 2
    yield rng.uniform(0, size, 2)
    for ring in rings:
        k = int(rng.integers(len(ring)))
        yield ring[k]
        yield (ring[k] + ring[k - 1]) / 2


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


@pytest.mark.parametrize("seed", range(30))
def test_small_rooms_on_a_grid_agree_with_brute_force(seed: int) -> None:
    rng = np.random.default_rng(seed)
    size = int(rng.integers(4, 12))
    rings = grown_room(rng, int(rng.integers(3, 20)), int(rng.integers(0, 4)), size)
    check_eyes(rng, rings, size, 1e-12)


@pytest.mark.parametrize("seed", range(20))
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
