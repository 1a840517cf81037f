"""The checker accepts what is true, and refuses a dozen kinds of what is not."""

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import polygons
import pytest

from kernelscan import CertificateError, Kernel, verify_kernel, visibility_kernel

L = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
CRANK = [(0, 0), (4, 0), (4, 2), (8, 2), (8, 6), (4, 6), (4, 4), (0, 4)]
PINWHEEL = [(2, 0), (4, 0), (-1, 2), (-2, 4), (-1, -2), (-2, -4)]
U = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]
BLADES = [(2, 0.1), (4, 0.1), (-1, 2), (-2, 4), (-1, -2), (-2, -4)]
NONE = np.zeros((0, 2))
NO_WALLS = np.zeros((0, 2), dtype=np.int64)


@pytest.mark.parametrize("outline", [L, CRANK, PINWHEEL, U, BLADES])
def test_accepts_the_true_kernel(outline: list) -> None:
    verify_kernel(outline, visibility_kernel(outline))


def nudged(kernel: Kernel) -> Kernel:
    vertices = kernel.vertices.copy()
    vertices[1, 0] = np.nextafter(vertices[1, 0], 100)
    return replace(kernel, vertices=vertices)


def renamed(kernel: Kernel) -> Kernel:
    walls = kernel.walls.copy()
    walls[2] = [0, 1]
    return replace(kernel, walls=walls)


def out_of_range(kernel: Kernel) -> Kernel:
    walls = kernel.walls.copy()
    walls[0] = [0, 99]
    return replace(kernel, walls=walls)


def of_another_ring(kernel: Kernel) -> Kernel:
    walls = kernel.walls.copy()
    walls[0] = [1, 0]
    return replace(kernel, walls=walls)


def too_large(kernel: Kernel) -> Kernel:
    """A polygon that ignores one of the walls."""
    whole = visibility_kernel([(0, 0), (8, 0), (8, 3), (0, 3)])
    return replace(whole, walls=np.array([[0, 0], [0, 1], [0, 2], [0, 5]]))


def too_small(kernel: Kernel) -> Kernel:
    return replace(kernel, vertices=kernel.vertices / 2, area=kernel.area / 4)


def twice_around(kernel: Kernel) -> Kernel:
    return replace(
        kernel,
        vertices=np.tile(kernel.vertices, (2, 1)),
        walls=np.tile(kernel.walls, (2, 1)),
        area=2 * kernel.area,
    )


WRONG_AREAS: dict[str, Callable[[Kernel], Kernel]] = {
    "a vertex off by one unit in the last place": nudged,
    "a wall that carries another side": renamed,
    "a wall that is not there": out_of_range,
    "a ring that is not there": of_another_ring,
    "a polygon larger than the kernel": too_large,
    "a polygon smaller than the kernel": too_small,
    "once around too often": twice_around,
    "clockwise": lambda k: replace(k, vertices=k.vertices[::-1], walls=np.roll(k.walls, 1, axis=0)[::-1]),
    "walls shifted against vertices": lambda k: replace(k, walls=np.roll(k.walls, 1, axis=0)),
    "a vertex missing": lambda k: replace(k, vertices=k.vertices[:-1], walls=k.walls[:-1]),
    "a wall missing": lambda k: replace(k, walls=k.walls[:-1]),
    "a wrong area": lambda k: replace(k, area=k.area * (1 + 1e-6)),
    "an area that is no number": lambda k: replace(k, area=float("nan")),
    "a vertex that is no number": lambda k: replace(k, vertices=k.vertices * np.nan),
    "a segment instead": lambda k: replace(k, kind="segment", vertices=k.vertices[:2], area=0.0),
    "a point instead": lambda k: replace(k, kind="point", vertices=k.vertices[:1], area=0.0),
    "empty instead": lambda k: Kernel("empty", NONE, 0.0, NO_WALLS, np.array([[0, 0], [0, 2]])),
    "empty with three walls": lambda k: Kernel(
        "empty", NONE, 0.0, NO_WALLS, np.array([[0, 0], [0, 3], [0, 2]])
    ),
    "empty for no reason": lambda k: Kernel("empty", NONE, 0.0, NO_WALLS, NO_WALLS),
    "an unknown kind": lambda k: replace(k, kind="blob"),
    "a conflict beside an area": lambda k: replace(k, conflict=np.array([[0, 0], [0, 2]])),
}


@pytest.mark.parametrize("corrupt", WRONG_AREAS.values(), ids=WRONG_AREAS)
def test_refuses_a_wrong_area(corrupt: Callable[[Kernel], Kernel]) -> None:
    with pytest.raises(CertificateError):
        verify_kernel(L, corrupt(visibility_kernel(L)))


WRONG_SEGMENTS: dict[str, Callable[[Kernel], Kernel]] = {
    "one end too far": lambda k: replace(k, vertices=k.vertices + np.array([[0, 0], [0, 1]])),
    "one end too near": lambda k: replace(k, vertices=k.vertices * [[1, 1], [1, 0.75]]),
    "an area given": lambda k: replace(k, area=1.0),
    "too few walls": lambda k: replace(k, walls=k.walls[:3]),
    "not its own walls": lambda k: replace(k, walls=k.walls[::-1]),
    "a point": lambda k: replace(k, kind="point", vertices=k.vertices[:1]),
    "walls that bound one end only": lambda k: replace(k, walls=k.walls[[0, 1, 2, 2]]),
    "empty": lambda k: Kernel("empty", NONE, 0.0, NO_WALLS, k.walls[:2]),
}


@pytest.mark.parametrize("corrupt", WRONG_SEGMENTS.values(), ids=WRONG_SEGMENTS)
def test_refuses_a_wrong_segment(corrupt: Callable[[Kernel], Kernel]) -> None:
    with pytest.raises(CertificateError):
        verify_kernel(CRANK, corrupt(visibility_kernel(CRANK)))


def test_refuses_part_of_a_segment_although_walls_bound_it() -> None:
    """Walls 2 and 6 bound the crank's segment; a room in which another wall bounds it more closely must be noticed."""
    outline = [(0, 0), (4, 0), (4, 2), (8, 2), (8, 6), (4, 6), (4, 4), (3, 4), (3, 3.5), (0, 3.5)]
    whole = visibility_kernel(CRANK)
    with pytest.raises(CertificateError, match="cuts the kernel"):
        verify_kernel(outline, replace(whole, walls=np.array([[0, 1], [0, 5], [0, 2], [0, 6]]), _rings=()))


def test_refuses_a_kernel_that_carries_another_room() -> None:
    whole = visibility_kernel(CRANK)
    elsewhere = visibility_kernel(np.array(CRANK) + np.array([1.0, 0.0]))
    with pytest.raises(CertificateError, match="another room"):
        verify_kernel(CRANK, replace(whole, _rings=elsewhere._rings))


@pytest.mark.parametrize(
    "change",
    [
        {"kind": ["area"]},
        {"area": None},
        {"walls": np.zeros((4, 3), dtype=int)},
        {"walls": np.full((4, 2), 0.4)},
    ],
)
def test_refuses_what_has_not_the_form_of_a_kernel(change: dict[str, object]) -> None:
    with pytest.raises(CertificateError):
        verify_kernel(CRANK, replace(visibility_kernel(CRANK), **change))


WRONG_POINTS: dict[str, Callable[[Kernel], Kernel]] = {
    "elsewhere": lambda k: replace(k, vertices=k.vertices + 1e-300),
    "too few walls": lambda k: replace(k, walls=k.walls[:2]),
    "one wall": lambda k: replace(k, walls=k.walls[:1]),
    "other walls": lambda k: replace(k, walls=k.walls + np.array([0, 1])),
    "empty": lambda k: Kernel("empty", NONE, 0.0, NO_WALLS, k.walls),
    "empty by two": lambda k: Kernel("empty", NONE, 0.0, NO_WALLS, k.walls[:2]),
}


@pytest.mark.parametrize("corrupt", WRONG_POINTS.values(), ids=WRONG_POINTS)
def test_refuses_a_wrong_point(corrupt: Callable[[Kernel], Kernel]) -> None:
    with pytest.raises(CertificateError):
        verify_kernel(PINWHEEL, corrupt(visibility_kernel(PINWHEEL)))


@pytest.mark.parametrize("outline", [U, BLADES])
def test_refuses_a_wrong_conflict(outline: list) -> None:
    kernel = visibility_kernel(outline)
    assert kernel.kind == "empty"
    for conflict in (
        kernel.conflict[:1],
        kernel.conflict[[0, 0]],
        (kernel.conflict + np.array([0, 1])) % [[1, len(outline)]],
    ):
        with pytest.raises(CertificateError):
            verify_kernel(outline, replace(kernel, conflict=conflict))


def test_refuses_the_kernel_of_another_room() -> None:
    rng = np.random.default_rng(5)
    rooms = [polygons.even_star(rng, 12) for _ in range(20)]
    kernels = [visibility_kernel(room) for room in rooms]
    for k, kernel in enumerate(kernels):
        verify_kernel(rooms[k], kernel)
        with pytest.raises(CertificateError):
            verify_kernel(rooms[k - 1], kernel)


def test_a_large_kernel_with_one_false_side_is_refused() -> None:
    outline = polygons.dented(600)
    kernel = visibility_kernel(outline)
    verify_kernel(outline, kernel)
    assert len(kernel.walls) > 100
    fewer = np.delete(np.arange(len(kernel.walls)), 37)
    walls = kernel.walls[fewer]
    with pytest.raises(CertificateError):
        verify_kernel(outline, replace(kernel, walls=walls, vertices=kernel.vertices[fewer]))


def test_a_wall_that_cuts_a_large_kernel_is_named() -> None:
    """The kernel of a convex room of many sides, claimed for the same room with one wall split and bent inward."""
    outline = polygons.convex(400)
    kernel = visibility_kernel(outline)
    dent = (outline[10] + outline[11]) / 2 * 0.999
    bent = np.insert(outline, 11, dent, axis=0)
    walls = kernel.walls + (kernel.walls[:, 1:] > 10) * np.array([[0, 1]])
    with pytest.raises(CertificateError):
        verify_kernel(bent, replace(kernel, walls=walls))
