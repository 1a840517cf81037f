"""The intersection of closed half-planes, exactly, from three to millions.

Problem
    Its kind (an area, a segment, a point or empty), its sides in order, its corners; of an empty one, two or three
    half-planes that exclude each other.
Method
    Few half-planes cut a region one after the other (:mod:`~kernelscan.geometry.clipping`). Of many, the first few are
    cut, since walls that follow each other often exclude each other: if nothing is left of them, nothing is left of
    all. The region is then cut by the deepest of a sample (:mod:`~kernelscan.geometry.sifting`), one pass drops every
    half-plane that holds what the sample leaves (:mod:`~kernelscan.geometry.pruning`), and the rest is sifted like the
    sample. Where a pass drops too little, because the intersection has very many sides, a larger sample and those that
    cut deepest make one more pass, and the sides are found by local elimination
    (:mod:`~kernelscan.geometry.elimination`).
Exactness
    Signs come from floats with proven bounds or else from integers, for the six doubles of each half-plane as they are
    stored. Corners are named by two half-planes and rounded once, at the end.
Degenerate cases
    An unbounded intersection is an area without some corners, or a segment of which one end or both are missing.
Cost
    Expected O(n) for n half-planes and few sides; O(n log n) at most but for numbers that leave every sign in doubt.
Source
    The sampling follows Clarkson, Las Vegas algorithms for linear and integer programming, J. ACM 42(2), 1995.
"""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.areas import polygon_area
from kernelscan.geometry.clipping import INFINITE, ConvexRegion, Shape, region_of
from kernelscan.geometry.elimination import sides_of
from kernelscan.geometry.halfplanes import HalfPlanes
from kernelscan.geometry.predicates import Row, Triple, exact_line, meet, rounded
from kernelscan.geometry.pruning import HalfPlaneSource, Indices, Outline, RowSource, most_cutting, survivors
from kernelscan.geometry.sifting import sift

__all__ = ["FEW", "Intersection", "Solution", "corners_of", "intersect", "solve"]

FEW = 64
HEAD = 8
FINISH = 100
PORTION = 4096
SAMPLE = 1024
CUTTING = 64
MANY = 8192
HEADS = (128, 1024)
HEAD_SHARE = 1000
GOLDEN = 0.6180339887498949


class Solution(NamedTuple):
    """An intersection by the numbers of its half-planes.

    Attributes
    ----------
    kind
        What it is.
    sides
        Of an area its sides in order, side i from corner i to corner i + 1; of a thin one those that prove it.
    conflict
        Of an empty one, two or three that exclude each other.
    corners
        The two half-planes that meet in each finite corner; ``None`` for a bounded area, where they are neighbours.
    is_bounded
        Whether it is.
    """

    kind: Shape
    sides: Indices
    conflict: tuple[int, ...] = ()
    corners: Sequence[tuple[int, int]] | None = None
    is_bounded: bool = True


@dataclass(frozen=True, slots=True, eq=False)
class Intersection:
    """The common points of some half-planes.

    Attributes
    ----------
    kind
        An area, a segment (of an unbounded one, a ray or a line), a point or empty.
    vertices
        ``(k, 2)`` its finite corners, each coordinate the double nearest to the exact one; of an area
        counter-clockwise, of an unbounded one from one end to the other.
    area
        Its area; infinity for an unbounded one.
    sides
        ``(s,)`` which half-planes bound it: of a bounded area, side i runs from vertex i to vertex i + 1; of an
        unbounded one, from vertex i - 1 to vertex i. Of a thin one, up to four that have nothing else in common.
    conflict
        ``(2,)`` or ``(3,)`` half-planes that have no common point; ``(0,)`` unless empty.
    is_bounded
        Whether it is.
    planes
        The half-planes; ``planes.walls`` has the wall of each.
    """

    kind: Shape
    vertices: npt.NDArray[np.float64]
    area: float
    sides: npt.NDArray[np.int64]
    conflict: npt.NDArray[np.int64]
    is_bounded: bool
    planes: HalfPlanes
    _corners: tuple[tuple[int, int], ...]

    @property
    def walls(self) -> npt.NDArray[np.int64]:
        """``(s, 2)``: the walls that the sides come from."""
        return self.planes.walls[self.sides]

    def rationals(self) -> tuple[tuple[Fraction, Fraction], ...]:
        """Return the exact corners, in the order of ``vertices``."""
        triples = corners_of(self._corners, lambda i: self.planes.rows[i].tolist())
        return tuple((Fraction(x, w), Fraction(y, w)) for x, y, w in triples)


def intersect(half_planes: HalfPlanes) -> Intersection:
    """Return what closed half-planes have in common; all of the plane is an unbounded area without sides."""
    solution = solve(RowSource(half_planes.rows))
    names = solution.corners
    if names is None:
        numbers = solution.sides.tolist()
        names = list(zip([numbers[-1], *numbers[:-1]], numbers, strict=True)) if numbers else []
    triples = corners_of(names, lambda i: half_planes.rows[i].tolist())
    vertices = np.array([rounded(triple) for triple in triples], dtype=np.float64).reshape(-1, 2)
    area = 0.0
    if solution.kind == "area":
        area = polygon_area(vertices.tolist(), lambda: triples) if solution.is_bounded else np.inf
    conflict = np.array(solution.conflict, dtype=np.int64)
    return Intersection(
        solution.kind,
        vertices,
        area,
        solution.sides,
        conflict,
        solution.is_bounded,
        half_planes,
        tuple(names),
    )


def corners_of(names: Sequence[tuple[int, int]], row: Callable[[int], Row]) -> list[Triple]:
    """Return where the named pairs of half-planes meet."""
    lines = {i: exact_line(row(i)) for i in {i for name in names for i in name}}
    return [meet(lines[g], lines[h]) for g, h in names]


def solve(source: HalfPlaneSource) -> Solution:
    """Return the intersection of many half-planes or of few."""
    count = len(source)
    if not count:
        return _eliminated(source, np.arange(0))
    region = region_of(_rows(source, np.arange(count if count <= FEW else HEAD)))
    if region is None:
        region = region_of(_rows(source, _spread(count, FEW)))
    if region is None:
        return _eliminated(source, np.arange(count))
    return _solved(region) if count <= FEW else _narrowed(source, region)


def _narrowed(source: HalfPlaneSource, region: ConvexRegion) -> Solution:
    """Cut a region by samples, and then by all that may still change it."""
    count, pool = len(source), None
    for sample in _samples(count):
        if region.shape == "area":
            sift(region, source.rows(sample), sample)
    if region.shape == "area" and count > PORTION:
        outline = Outline.of(region)
        if outline is None:
            return _eliminated(source, None)
        pool = survivors(source, outline)
        if 2 * len(pool) > count:
            return _many_sided(source, region, _without(pool, region), outline)
    if region.shape == "area":
        pool = _sifted(source, region, np.arange(count) if pool is None else pool)
        if region.shape == "area" and len(pool) > FINISH:
            return _many_sided(source, region, pool, Outline.of(region))
    if region.shape in ("segment", "point"):
        pool = _survivors(source, pool, Outline.of(region))
    if pool is not None and region.shape != "empty":
        region.cut_by_rows(pool, source.rows(pool))
    return _solved(region)


def _samples(count: int) -> Iterator[Indices]:
    """Yield some of all, and the first, since walls that follow each other often exclude each other."""
    if count > PORTION:
        yield _spread(count, SAMPLE)
    for size in HEADS:
        if count >= size * HEAD_SHARE:
            yield np.arange(size)


def _sifted(source: HalfPlaneSource, region: ConvexRegion, pool: Indices) -> Indices:
    """Cut a region by a pool, a portion at a time; return who is still in doubt."""
    left = []
    for k in range(0, len(pool), PORTION):
        portion = pool[k : k + PORTION]
        left.append(sift(region, source.rows(portion), portion))
    pool = np.concatenate(left) if left else pool
    if region.shape == "area" and len(pool) > FINISH and len(left) > 1:
        pool = sift(region, source.rows(pool), pool)
    return _without(pool, region)


def _many_sided(
    source: HalfPlaneSource, region: ConvexRegion, pool: Indices, outline: Outline | None
) -> Solution:
    """Find the sides of a region that has many; if the pool is large, with the help of a large sample of it."""
    own = np.array([name for name in region.names if name != INFINITE])
    if outline is not None and len(pool) > MANY:
        rows = source.rows(pool)
        cutting = most_cutting(rows, outline, CUTTING)
        sample = _together(len(source), own, pool[_spread(len(pool), SAMPLE)], pool[cutting])
        rough = _eliminated(source, sample)
        if rough.kind == "empty":
            return rough
        if rough.kind == "area" and rough.is_bounded:
            own = rough.sides
            pool = pool[survivors(RowSource(rows), Outline.of_sides(source.rows(own)))]
    return _eliminated(source, _together(len(source), own, pool))


def _together(count: int, *numbers: Indices) -> Indices:
    """Return the numbers below ``count`` that are in any of the sets, ascending."""
    marked = np.zeros(count, dtype=bool)
    for some in numbers:
        marked[some] = True
    return np.flatnonzero(marked)


def _survivors(source: HalfPlaneSource, pool: Indices | None, outline: Outline | None) -> Indices:
    if outline is None:
        return np.arange(len(source)) if pool is None else pool
    if pool is None:
        return survivors(source, outline)
    return pool[survivors(RowSource(source.rows(pool)), outline)]


def _without(numbers: Indices, region: ConvexRegion) -> Indices:
    """Leave out the lines of the region itself."""
    own = region.names if region.shape == "area" else region.proof
    places = np.searchsorted(numbers, own)
    known = places < len(numbers)
    places = places[known]
    return np.delete(numbers, places[numbers[places] == np.array(own)[known]])


def _spread(count: int, size: int) -> Indices:
    """Return some numbers below count, ascending, far from each other and from any period."""
    places = np.sort((np.arange(1, size + 1) * GOLDEN % 1 * count).astype(np.int64))
    return places[np.diff(places, prepend=-1) > 0]


def _rows(source: HalfPlaneSource, numbers: Indices) -> dict[int, Row]:
    return dict(zip(numbers.tolist(), source.rows(numbers).tolist(), strict=True))


def _solved(region: ConvexRegion) -> Solution:
    """Return a region as a solution."""
    if region.shape == "empty":
        return Solution("empty", np.zeros(0, dtype=np.int64), region.conflict, ())
    names, infinite = region.corner_names(), region.infinite_corners()
    corners = [name for k, name in enumerate(names) if k not in infinite]
    if region.shape != "area":
        return Solution(region.shape, np.array(region.proof), (), corners, not infinite)
    if not infinite:
        return Solution("area", np.array(region.names))
    first = max(infinite) if infinite != [0, len(names) - 1] else 0
    sides = [name for name in (*region.names[first:], *region.names[:first]) if name != INFINITE]
    return Solution("area", np.array(sides), (), list(pairwise(sides)), is_bounded=False)


def _eliminated(source: HalfPlaneSource, numbers: Indices | None) -> Solution:
    """Find the sides of many half-planes, of all if no numbers are given."""
    if numbers is None:
        numbers = np.arange(len(source))
    if not len(numbers):
        return Solution("area", numbers, (), (), is_bounded=False)
    found = sides_of(source.rows(numbers))
    if found.conflict:
        return Solution("empty", numbers[:0], tuple(numbers[list(found.conflict)].tolist()), ())
    if len(found.thin) == 2:
        return Solution("segment", numbers[list(found.thin)], (), (), is_bounded=False)
    if found.thin:
        region = region_of(_rows(source, numbers[list(found.thin)]))
        assert region is not None  # the three are not all parallel
        return _narrowed(source, region)
    sides = numbers[found.order]
    if found.is_bounded:
        return Solution("area", sides)
    corners = [] if found.is_strip else list(pairwise(sides.tolist()))
    return Solution("area", sides, (), corners, is_bounded=False)
