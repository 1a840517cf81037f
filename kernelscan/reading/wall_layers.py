"""Which layers hold the walls, where no name says so: walls have two faces.

A layer is a wall layer if a good part of its length is drawn double, as thin closed bodies or as parallel lines a
wall's thickness apart. A layer with an outline that holds all of these belongs to them too: it may be the outer
face. Where no layer stands out, nothing can be said, and all lines count.
"""

from collections import defaultdict
from collections.abc import Sequence

import numpy as np

from kernelscan.geometry.shapes import lines_near
from kernelscan.reading.segments import WALL, Segments, segments_of
from kernelscan.reading.strokes import Stroke
from kernelscan.tolerances import Tolerances

__all__ = ["double_layers"]

THINNEST_WALL = 0.04
SHORTEST_WALL = 0.5
LEAST_SHARE = 0.35
LEAST_LENGTH = 5.0


def double_layers(strokes: Sequence[Stroke], metres: float, tolerances: Tolerances) -> frozenset[str]:
    """Return the layers whose lines are walls by content; none where no layer stands out."""
    lengths: dict[str, float] = defaultdict(float)
    double: dict[str, float] = defaultdict(float)
    by_layer: dict[str, list[Stroke]] = defaultdict(list)
    for stroke in strokes:
        by_layer[stroke.layer].append(stroke)
    for layer, its in by_layer.items():
        lines = segments_of(its, [WALL] * len(its), metres, np.zeros(2))
        lengths[layer] = float(lines.length.sum())
        double[layer] = _double_length(lines, tolerances)
    found = {layer for layer in by_layer if double[layer] >= max(LEAST_LENGTH, LEAST_SHARE * lengths[layer])}
    return frozenset(found | _layers_around(found, by_layer, metres))


def _double_length(lines: Segments, tolerances: Tolerances) -> float:
    """Return how much of the lines runs beside a parallel one, a wall's thickness away."""
    length = lines.length
    long = lines.where(length > SHORTEST_WALL)
    if len(long) < 2:
        return 0.0
    k, i = lines_near((long.a + long.b) / 2, long.a, long.b, tolerances.thickest_wall)
    ours, theirs = (long.b - long.a)[k], (long.b - long.a)[i]
    cross = np.abs(ours[:, 0] * theirs[:, 1] - ours[:, 1] * theirs[:, 0])
    parallel = cross <= 0.02 * long.length[k] * long.length[i]
    to = ((long.a + long.b) / 2)[k] - long.a[i]
    apart = np.abs(to[:, 0] * theirs[:, 1] - to[:, 1] * theirs[:, 0]) / long.length[i]
    beside = np.unique(k[parallel & (apart >= THINNEST_WALL) & (k != i)])
    return float(long.length[beside].sum())


def _layers_around(found: set[str], by_layer: dict[str, list[Stroke]], metres: float) -> set[str]:
    """Return the other layers with an outline that is no wall's body and whose box holds all the walls."""
    walls = [stroke.points for layer in found for stroke in by_layer[layer]]
    if not walls:
        return set()
    points = np.concatenate(walls)
    slack = 0.6 / metres
    low, high = points.min(axis=0) + slack, points.max(axis=0) - slack
    around = set()
    for layer in by_layer.keys() - found:
        for stroke in by_layer[layer]:
            if (
                stroke.is_ring(0.0)
                and (stroke.points.min(axis=0) <= low).all()
                and (stroke.points.max(axis=0) >= high).all()
            ):
                around.add(layer)
    return around
