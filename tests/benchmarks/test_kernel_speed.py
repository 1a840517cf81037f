"""How long kernels and linear programs take beside other methods; both sides in one run, ratios printed.

``pytest tests/benchmarks/test_kernel_speed.py -s`` prints them. Nothing is asserted about time: that the others agree
on the number of corners, where they can be expected to, is.
"""

import cases
import numpy as np
import pytest
import rivals
from pytest_benchmark.fixture import BenchmarkFixture

from kernelscan.geometry.kernel import Kernel, kernel_of_rings

SMALL = [case for case in cases.CASES if "1,000,000" not in case.name and "mixed" not in case.name]


@pytest.mark.parametrize("case", SMALL, ids=lambda case: case.name)
def test_kernel_beside_others(case: cases.Case, benchmark: BenchmarkFixture) -> None:
    (room,) = case.rooms()
    benchmark(cases.ours, room)
    times = cases.timed(case)
    print(f"\n{case.name}: {times['kernelscan'] * 1e3:.3f} ms")
    for name, seconds in times.items():
        print(f"    {name:18s}{seconds * 1e3:12.3f} ms   {seconds / times['kernelscan']:8.2f} times ours")


@pytest.mark.parametrize("n", [20, 200])
def test_others_find_as_many_corners_in_ordinary_rooms(n: int) -> None:
    room = cases.star(n)
    kernel = kernel_of_rings((room,))
    assert isinstance(kernel, Kernel)
    others = (rivals.shapely_clipping, rivals.scipy_halfspaces, rivals.scipy_dual_hull, rivals.float_deque)
    assert {other(room) for other in others} == {len(kernel.vertices)}


@pytest.mark.parametrize("n", [40, 1000])
def test_deepest_point_beside_scipy(n: int, benchmark: BenchmarkFixture) -> None:
    room = cases.star(n)
    ours = benchmark(cases.deepest, room)
    theirs = cases.deepest_by_scipy(room)
    assert np.allclose(ours.point, theirs, atol=1e-6)


def test_a_room_with_its_checks(benchmark: BenchmarkFixture) -> None:
    """What it costs to show first that the points make a ring."""
    rooms = cases.mixed_rooms(200)
    benchmark(lambda: [cases.with_checks(room) for room in rooms])
