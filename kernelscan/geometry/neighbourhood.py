"""Pairs of edges that may meet, among so many that trying all pairs is out of the question.

Problem
    Given the edges of rings, in the order of the rings, find a set of pairs that contains every pair that
    meets and few others.
Method
    Neighbours in the order are neighbours in space, so the order itself is a binary tree: a node of the k-th level
    holds 2**k consecutive edges. Each node gets the smallest box around its vertices that is turned the way its
    edges run, the mean of their directions doubled. Pairs of nodes whose boxes overlap are opened, from some
    hundred nodes down to single edges. Turned boxes matter: upright ones round the spikes of a star or the
    teeth of a slanted comb overlap by the thousand.
Cost
    O(n log n) to make the boxes. A pair of rings that keep clear of themselves, on the whole, opens O(n) pairs;
    the worst case, edges criss-crossing everywhere, is quadratic. Memory stays bounded: pairs are opened in
    portions.
Degenerate cases
    Boxes are widened by more than the rounding of their making, so that no meeting is lost.
Source
    Gottschalk, Lin and Manocha, "OBBTree", 1996, for the test of turned boxes; here in the plane, on a fixed tree.
Letters
    Points, offsets and directions are complex numbers; u a box's direction, c its centre, h its half-sizes along u and
    across.
"""

from collections.abc import Iterator
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.signs import SMALLEST

__all__ = ["nearby_edges"]

Floats = npt.NDArray[np.float64]
Complexes = npt.NDArray[np.complex128]
Indices = npt.NDArray[np.intp]

_ROOTS = 128
_PORTION = 1 << 18


class _Boxes(NamedTuple):
    """The boxes of one level: directions and centres, complex, and half-sizes."""

    u: Complexes
    c: Complexes
    along: Floats
    across: Floats


def nearby_edges(p: Floats, q: Floats) -> Iterator[tuple[Indices, Indices]]:
    """Yield, in portions, pairs i < j of edges that may meet; every pair that does meet is among them."""
    levels = _levels(p, q)
    i, j = np.triu_indices(len(levels[-1].u) if levels else len(p))
    stack = [(len(levels), i, j)]
    while stack:
        level, i, j = stack.pop()
        if level == 0:
            yield i[i < j], j[i < j]
            continue
        count = len(levels[level - 2].u) if level > 1 else len(p)
        for start in range(0, len(i), _PORTION):
            portion = slice(start, start + _PORTION)
            meeting = ~_apart(levels[level - 1], i[portion], j[portion])
            stack.append((level - 1, *_opened(i[portion][meeting], j[portion][meeting], count)))


def _levels(p: Floats, q: Floats) -> list[_Boxes]:
    """Return the boxes of the levels above the single edges, up to one with few nodes."""
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        v, w = ((end - p[0]).view(np.complex128)[:, 0] for end in (p, q))
        way = w - v
        doubled = way * way / np.maximum(np.abs(way), SMALLEST)
        levels: list[_Boxes] = []
        while len(doubled) > _ROOTS:
            doubled = np.add.reduceat(doubled, np.arange(0, len(doubled), 2))
            levels.append(_boxes(v, w, doubled, 2 << len(levels)))
        return levels


def _boxes(v: Complexes, w: Complexes, doubled: Complexes, size: int) -> _Boxes:
    """Return the boxes around each ``size`` consecutive edges v -> w, turned by half the angle of ``doubled``."""
    u = np.exp(0.5j * np.angle(doubled))
    starts = np.arange(0, len(v), size)
    turned = [end * np.repeat(u.conj(), size)[: len(v)] for end in (v, w)]
    low, high = (
        [
            extreme(
                extreme.reduceat(getattr(turned[0], axis), starts),
                extreme.reduceat(getattr(turned[1], axis), starts),
            )
            for axis in ("real", "imag")
        ]
        for extreme in (np.minimum, np.maximum)
    )
    slack = 2.0**-44 * float(np.maximum(np.abs(v), np.abs(w)).max())
    centre = u * ((low[0] + high[0]) / 2 + 0.5j * (low[1] + high[1]))
    return _Boxes(u, centre, (high[0] - low[0]) / 2 + slack, (high[1] - low[1]) / 2 + slack)


def _apart(boxes: _Boxes, i: Indices, j: Indices) -> npt.NDArray[np.bool_]:
    """Return where the boxes i and j are separated along a side of either; never where i is j."""
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        step, turn = boxes.c[j] - boxes.c[i], boxes.u[j] * boxes.u[i].conj()
        cos, sin = np.abs(turn.real), np.abs(turn.imag)
        apart = np.zeros(len(i), dtype=bool)
        for one, other in ((i, j), (j, i)):
            offset = step * boxes.u[one].conj()
            along, across = boxes.along[other], boxes.across[other]
            apart |= np.abs(offset.real) > boxes.along[one] + along * cos + across * sin
            apart |= np.abs(offset.imag) > boxes.across[one] + along * sin + across * cos
        return apart


def _opened(i: Indices, j: Indices, count: int) -> tuple[Indices, Indices]:
    """Return the pairs of children, i <= j, of pairs of nodes; there are ``count`` nodes on the level below."""
    first = np.concatenate([2 * i, 2 * i, 2 * i + 1, 2 * i + 1])
    second = np.concatenate([2 * j, 2 * j + 1, 2 * j, 2 * j + 1])
    wanted = (first <= second) & (second < count)
    return first[wanted], second[wanted]
