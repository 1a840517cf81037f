"""Polygon overlay and spatial search: the one module that knows shapely, behind a few functions on arrays.

Shapely works in doubles and rounds what it constructs. Nothing here decides a kernel or a visible region; it
serves where a rounded answer is right (areas for a table, label points, joining an obstacle with a wall) or where
only candidates are wanted, which others then settle exactly.

All points are ``(n, 2)`` float64, all lengths in whatever unit comes in. Outlines come back counter-clockwise and
holes clockwise, without a repeated last point; they are rounded, so :func:`kernelscan.geometry.rings.as_ring`
has the last word on whether they are rings.
"""

import re
from collections.abc import Iterable, Sequence
from typing import NamedTuple

import numpy as np
import numpy.typing as npt
import shapely

__all__ = [
    "Patch",
    "are_simple",
    "area",
    "covers_points",
    "crossing_place",
    "deepest_point",
    "difference",
    "faces_between",
    "inner_points",
    "interior_point",
    "intersection",
    "lines_near",
    "meeting_lines",
    "meetings_of_lines",
    "meetings_of_rings",
    "nearest_point",
    "neighbouring_lines",
    "overlap_areas",
    "rings_around",
    "union",
]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.intp]


class Patch(NamedTuple):
    """A connected piece of the plane: its outline and the holes in it, in either direction."""

    outline: npt.ArrayLike
    holes: Sequence[npt.ArrayLike] = ()


def area(patch: Patch) -> float:
    """Return the area of a patch, its holes taken off."""
    return float(_polygon(patch).area)


def covers_points(patch: Patch, points: npt.ArrayLike) -> npt.NDArray[np.bool_]:
    """Return for each point, ``(k,)``, whether it lies in the patch or on its edge, as far as doubles can say."""
    xy = np.asarray(points, dtype=np.float64).reshape(-1, 2)
    polygon = _polygon(patch)
    shapely.prepare(polygon)
    return np.asarray(shapely.intersects_xy(polygon, xy[:, 0], xy[:, 1]))


def union(patches: Iterable[Patch]) -> list[Patch]:
    """Return what any of the patches covers, in pieces of some area."""
    return _patches(shapely.union_all([_polygon(patch) for patch in patches]))


def intersection(a: Patch, b: Patch) -> list[Patch]:
    """Return what both patches cover, in pieces of some area."""
    return _patches(_polygon(a).intersection(_polygon(b)))


def difference(a: Patch, others: Iterable[Patch]) -> list[Patch]:
    """Return what is left of a patch without the others, in pieces of some area."""
    return _patches(_polygon(a).difference(shapely.union_all([_polygon(other) for other in others])))


def interior_point(outline: npt.ArrayLike, holes: Sequence[npt.ArrayLike] = ()) -> tuple[float, float]:
    """Return a point well inside, for a label: the centre of the largest disc that fits, to a hundredth of the size."""
    low_x, low_y, high_x, high_y = _polygon(Patch(outline, holes)).bounds
    return deepest_point(Patch(outline, holes), max(high_x - low_x, high_y - low_y) / 100)


def deepest_point(patch: Patch, error: float) -> tuple[float, float]:
    """Return the centre of a disc inside a patch whose radius is less than the largest by no more than the error."""
    x, y = shapely.maximum_inscribed_circle(_polygon(patch), error).coords[0]
    return float(x), float(y)


def nearest_point(patch: Patch, point: Floats) -> Floats:
    """Return the point of a patch, ``(2,)``, that is nearest to a given one."""
    line = shapely.shortest_line(_polygon(patch), shapely.Point(point))
    return np.asarray(shapely.get_coordinates(line)[0])


def _polygon(patch: Patch) -> shapely.Polygon:
    return shapely.Polygon(patch.outline, patch.holes)


def _patches(geometry: shapely.Geometry) -> list[Patch]:
    """Return the polygons of whatever an overlay gives, without the points and lines that it may give as well."""
    polygons = [part for part in _leaves(geometry) if isinstance(part, shapely.Polygon) and part.area > 0]
    return [
        Patch(_open(part.exterior, ccw=True), tuple(_open(ring, ccw=False) for ring in part.interiors))
        for part in polygons
    ]


def _leaves(geometry: shapely.Geometry) -> Iterable[shapely.Geometry]:
    if not hasattr(geometry, "geoms"):
        return [geometry]
    return [leaf for part in geometry.geoms for leaf in _leaves(part)]


def _open(ring: shapely.LinearRing, *, ccw: bool) -> Floats:
    points: Floats = shapely.get_coordinates(ring)[:-1]
    return points if ring.is_ccw == ccw else points[::-1].copy()


def are_simple(rings: Sequence[Floats]) -> npt.NDArray[np.bool_]:
    """Return for each ring, ``(n, 2)`` in either direction, whether it is simple: no crossing, no touching."""
    return np.asarray(shapely.is_valid(_polygons(rings)), dtype=bool)


def crossing_place(ring: Floats) -> tuple[float, float] | None:
    """Return where a ring crosses or touches itself, rounded; ``None`` if it does not, or has no area at all."""
    shape = shapely.Polygon(ring)
    place = re.search(r"elf-intersection\[(\S+) (\S+)\]", shapely.is_valid_reason(shape))
    return (float(place[1]), float(place[2])) if place and shape.convex_hull.area > 0 else None


def overlap_areas(first: Sequence[Floats], second: Sequence[Floats]) -> tuple[Indices, Indices, Floats]:
    """Return the pairs (i of the first, j of the second) of simple rings that overlap, and the area they share.

    Where both are the same sequence, only pairs i < j are returned.
    """
    ours = _polygons(first)
    theirs = ours if second is first else _polygons(second)
    i, j = shapely.STRtree(theirs).query(ours)
    if second is first:
        i, j = i[i < j], j[i < j]
    boxes, others = shapely.bounds(ours)[i], shapely.bounds(theirs)[j]
    shared = np.minimum(boxes[:, 2:], others[:, 2:]) - np.maximum(boxes[:, :2], others[:, :2])
    near = (shared > 0).all(axis=1)
    i, j = i[near], j[near]
    area = shapely.area(shapely.intersection(ours[i], theirs[j]))
    return i[area > 0], j[area > 0], area[area > 0]


def rings_around(rings: Sequence[Floats], points: Floats) -> tuple[Indices, Indices]:
    """Return the pairs (k of a point, i of a ring) where the point, ``(m, 2)``, lies within the simple ring."""
    k, i = shapely.STRtree(_polygons(rings)).query(shapely.points(points), predicate="within")
    return k, i


def _polygons(rings: Sequence[Floats]) -> npt.NDArray[np.object_]:
    if not len(rings):
        return np.empty(0, dtype=object)
    counts = [len(ring) for ring in rings]
    lines = shapely.linearrings(np.concatenate(rings), indices=np.repeat(np.arange(len(rings)), counts))
    return np.asarray(shapely.polygons(lines), dtype=object)


def faces_between(starts: Floats, ends: Floats, grid: float) -> list[Patch]:
    """Return the bounded faces between straight lines, which may cross, touch and overlap in any way.

    Parameters
    ----------
    starts, ends
        ``(n, 2)``, the lines' two ends.
    grid
        Points of the result lie on a grid of this pitch: what is nearer to each other becomes one.
    """
    noded = shapely.union_all(_lines(starts, ends), grid_size=grid)
    return [
        Patch(_points(face.exterior), tuple(_points(hole) for hole in face.interiors))
        for face in shapely.get_parts(shapely.polygonize([noded]))
    ]


def _points(ring: shapely.LinearRing) -> Floats:
    return np.asarray(shapely.get_coordinates(ring)[:-1])


def lines_near(points: Floats, starts: Floats, ends: Floats, distance: float) -> tuple[Indices, Indices]:
    """Return the pairs (k of a point, i of a line) that are no farther apart than ``distance``."""
    spots = shapely.points(points)
    k, i = shapely.STRtree(_lines(starts, ends)).query(spots, predicate="dwithin", distance=distance)
    return k, i


def meeting_lines(starts: Floats, ends: Floats, others: tuple[Floats, Floats]) -> tuple[Indices, Indices]:
    """Return the pairs (k of the lines, i of the other lines, given by starts and ends) that meet."""
    k, i = shapely.STRtree(_lines(*others)).query(_lines(starts, ends), predicate="intersects")
    return k, i


def neighbouring_lines(
    starts: Floats, ends: Floats, others: tuple[Floats, Floats], distance: float
) -> tuple[Indices, Indices]:
    """Return the pairs (k of the lines, i of the other lines) that are no farther apart than ``distance``."""
    tree = shapely.STRtree(_lines(*others))
    k, i = tree.query(_lines(starts, ends), predicate="dwithin", distance=distance)
    return k, i


def _lines(starts: Floats, ends: Floats) -> npt.NDArray[np.object_]:
    return np.asarray(shapely.linestrings(np.stack((starts, ends), axis=1)), dtype=object)


def inner_points(rings: Sequence[Floats]) -> Floats:
    """Return a point inside each simple ring, ``(n, 2)``."""
    return np.asarray(shapely.get_coordinates(shapely.point_on_surface(_polygons(rings))))


def meetings_of_lines(starts: Floats, ends: Floats) -> int:
    """Return about how many pairs of lines meet, from a sample: whether to look at all of them is worth the time."""
    return _meetings(_lines(starts, ends), "intersects")


def meetings_of_rings(rings: Sequence[Floats]) -> int:
    """Return about how many pairs of simple rings have overlapping boxes, from a sample."""
    return _meetings(_polygons(rings), None)


def _meetings(shapes: npt.NDArray[np.object_], predicate: str | None) -> int:
    if len(shapes) < 2:
        return 0
    sample = shapes[:: max(len(shapes) // 200, 1)]
    hits = shapely.STRtree(shapes).query(sample, predicate=predicate)
    return int(max(hits.shape[1] - len(sample), 0) * len(shapes) // (2 * len(sample)))
