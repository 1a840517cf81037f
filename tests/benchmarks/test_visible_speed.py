"""How long one look round a room takes, beside an independent exact library; both sides in one run.

``pytest tests/benchmarks/test_visible_speed.py`` prints the medians and their ratio. Our side starts from checked
rings; the other side from its own finished data structure. Nothing is asserted about time: that both see the
same area is.
"""

from collections.abc import Callable
from statistics import median
from time import perf_counter

import numpy as np
import pytest
import pyvispoly
from geometry.grown_rooms import columned_room, star
from pytest_benchmark.fixture import BenchmarkFixture

from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import Ring, as_rings, signed_area
from kernelscan.geometry.visible import visible_from, visible_regions

CASES = [(20, 0), (100, 0), (1000, 0), (1000, 5), (10_000, 0), (10_000, 50), (100_000, 0), (100_000, 50)]


def room_of(corners: int, columns: int) -> tuple[Ring, ...]:
    rng = np.random.default_rng(corners + columns)
    return columned_room(rng, corners, columns) if columns else as_rings(star(rng, corners))


def eye_in(rings: tuple[Ring, ...]) -> tuple[float, float]:
    """Return an eye off the middle, so that much of the room is hidden from it."""
    for x in np.linspace(0.3, 0.5, 50).tolist():
        try:
            visible_from(rings, (x, 0.13))
        except GeometryError:  # in a column
            continue
        return x, 0.13
    raise AssertionError("no free place for the eye")


def other_side(rings: tuple[Ring, ...], eye: tuple[float, float]) -> Callable[[], pyvispoly.Polygon]:
    polygons = [pyvispoly.Polygon([pyvispoly.Point(x, y) for x, y in ring.tolist()]) for ring in rings]
    calculator = pyvispoly.VisibilityPolygonCalculator(pyvispoly.PolygonWithHoles(polygons[0], polygons[1:]))
    point = pyvispoly.Point(*eye)
    return lambda: calculator.compute_visibility_polygon(point)


def medians(sides: list[Callable[[], object]], rounds: int) -> list[float]:
    """Return the median time of each side in seconds, the sides taking turns."""
    times: list[list[float]] = [[] for _ in sides]
    for _ in range(rounds):
        for side, spent in zip(sides, times, strict=True):
            start = perf_counter()
            side()
            spent.append(perf_counter() - start)
    return [median(spent) for spent in times]


@pytest.mark.parametrize(("corners", "columns"), CASES)
def test_one_eye(
    benchmark: BenchmarkFixture, capsys: pytest.CaptureFixture[str], corners: int, columns: int
) -> None:
    rings = room_of(corners, columns)
    eye = eye_in(rings)
    theirs = other_side(rings, eye)
    ours, others = medians([lambda: visible_from(rings, eye), theirs], 15 if corners <= 10_000 else 5)
    region = benchmark(visible_from, rings, eye)
    benchmark.extra_info.update(other_ms=others * 1e3, ratio=others / ours)
    assert signed_area(region) == pytest.approx(float(theirs().area()), rel=1e-9)
    with capsys.disabled():
        print(
            f"\nvisible region, {corners:7d} walls, {columns:3d} columns: "
            f"{ours * 1e3:8.3f} ms, pyvispoly {others * 1e3:8.3f} ms, ratio {others / ours:6.2f}"
        )


def test_many_eyes(benchmark: BenchmarkFixture) -> None:
    rings = room_of(1000, 5)
    eye = eye_in(rings)
    regions = benchmark(visible_regions, rings, [eye] * 50)
    assert len(regions) == 50
