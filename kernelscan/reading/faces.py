"""The faces between lines: what each is bounded by, what lies beyond, and which of them belong together.

A face whose only way out is an undrawn threshold, or drawn lines of an opening, to one single neighbour is a niche, or
the leaf of an open door: it is joined with that neighbour. A face between two thresholds (the door's place in a
double wall) leads to two and stays.
"""

from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from kernelscan.geometry.shapes import Patch, faces_between, lines_near, union
from kernelscan.reading.segments import DOOR, GAP, WALL, WINDOW, Segments

__all__ = ["DRAWN_OPENING", "OUTSIDE", "Face", "edge_codes", "faces_of", "short_side"]

OUTSIDE = -1
DRAWN_OPENING = 10
"""Added to DOOR or WINDOW for lines that were drawn, to tell them from thresholds put across a gap."""

PARALLEL = 0.02


@dataclass(frozen=True, slots=True, eq=False)
class Face:
    """A face: its rings (the outline first), and for each edge of each ring its code and the face beyond."""

    rings: list[np.ndarray]
    codes: list[np.ndarray]
    beyond: list[np.ndarray]
    area: float

    @property
    def width(self) -> float:
        """The short side of the rectangle of the same area and perimeter."""
        return short_side(self.area, sum(_perimeter(ring) for ring in self.rings))

    def neighbours(self, codes: frozenset[int]) -> set[int]:
        """Return the faces beyond the edges of the given codes."""
        return {
            int(face)
            for edges, beyond in zip(self.codes, self.beyond, strict=True)
            for code, face in zip(edges.tolist(), beyond.tolist(), strict=True)
            if code in codes
        }


def short_side(area: float, perimeter: float) -> float:
    """Return the short side of the rectangle that has this area and perimeter; of a square where there is none."""
    half = perimeter / 4
    rest = half * half - area
    return float(half - np.sqrt(rest)) if rest > 0 else float(np.sqrt(area))


def faces_of(lines: Segments, grid: float, is_small: "SmallFace") -> list[Face]:
    """Return the faces between the lines, niches and door leaves joined with the face they open to.

    Parameters
    ----------
    lines
        Walls, the lines of openings (their code plus ``DRAWN_OPENING``) and thresholds.
    grid
        Points nearer than about this are one.
    is_small
        Which faces are too small for a room and may be joined with another.
    """
    if not len(lines):
        return []
    patches = faces_between(lines.a, lines.b, grid)
    faces = _linked(patches, lines, grid)
    groups = _joined(faces, is_small)
    return [faces[group[0]] if len(group) == 1 else _merged(faces, group, lines, grid) for group in groups]


class SmallFace:
    """Whether a face is too small or too narrow to be a room."""

    def __init__(self, smallest: float, narrowest: float) -> None:
        self.smallest = smallest
        self.narrowest = narrowest

    def __call__(self, face: Face) -> bool:
        """Return whether it is."""
        return face.area < self.smallest or face.width < self.narrowest


def edge_codes(a: np.ndarray, b: np.ndarray, lines: Segments, grid: float) -> np.ndarray:
    """Return what each edge, from ``a`` to ``b``, lies on: a drawn opening before a wall, a wall before a gap."""
    k, i = lines_near((a + b) / 2, lines.a, lines.b, 3 * grid)
    edge, line = (b - a)[k], (lines.b - lines.a)[i]
    cross = np.abs(edge[:, 0] * line[:, 1] - edge[:, 1] * line[:, 0])
    lengths = np.hypot(*edge.T) * np.hypot(*line.T)
    along = (cross <= PARALLEL * lengths) | (np.hypot(*edge.T) < 100 * grid)
    rank = np.full(len(a), -1)
    code = np.full(len(a), WALL)
    importance = np.where(lines.code == WALL, 1, np.where(lines.code == GAP, 0, 2))
    k, i = k[along], i[along]
    order = np.argsort(importance[i], kind="stable")
    rank[k[order]] = importance[i[order]]
    code[k[order]] = lines.code[i[order]]
    return code


def _linked(patches: Sequence[Patch], lines: Segments, grid: float) -> list[Face]:
    rings = [
        (f, np.asarray(ring)) for f, patch in enumerate(patches) for ring in (patch.outline, *patch.holes)
    ]
    if not rings:
        return []
    counts = np.array([len(ring) for _, ring in rings])
    a = np.concatenate([ring for _, ring in rings])
    b = np.concatenate([np.roll(ring, -1, axis=0) for _, ring in rings])
    face = np.repeat([f for f, _ in rings], counts)
    keys = np.rint(np.concatenate((a, b), axis=1) / grid).astype(np.int64)
    swap = (keys[:, 0] > keys[:, 2]) | ((keys[:, 0] == keys[:, 2]) & (keys[:, 1] > keys[:, 3]))
    keys[swap] = keys[swap][:, [2, 3, 0, 1]]
    _, first, edge = np.unique(keys, axis=0, return_index=True, return_inverse=True)
    edge = edge.reshape(-1)
    codes = edge_codes(a[first], b[first], lines, grid)[edge]
    both = np.zeros(len(first), dtype=np.int64)
    np.add.at(both, edge, face + 1)
    twice = np.bincount(edge) == 2
    beyond = np.where(twice[edge], both[edge] - face - 2, OUTSIDE)
    cuts = np.cumsum(counts)[:-1]
    parts = zip(rings, np.split(codes, cuts), np.split(beyond, cuts), strict=True)
    found = [Face([], [], [], _area(patch)) for patch in patches]
    for (f, ring), code, there in parts:
        found[f].rings.append(ring)
        found[f].codes.append(code)
        found[f].beyond.append(there)
    return found


def _joined(faces: Sequence[Face], is_small: SmallFace) -> list[list[int]]:
    """Return the groups of faces that are one: small faces open to each other and to one large face only, with it."""
    openings = frozenset({GAP, DOOR, WINDOW, DOOR + DRAWN_OPENING, WINDOW + DRAWN_OPENING})
    small = {f for f, face in enumerate(faces) if is_small(face)}
    ways = {f: faces[f].neighbours(openings) for f in small}
    home = {f: f for f in range(len(faces)) if f not in small}
    for cluster in _clusters(ways, small):
        beyond = set().union(*(ways[f] for f in cluster)) - set(cluster)
        if len(beyond) == 1 and not any(faces[f].neighbours(frozenset({DOOR, WINDOW})) for f in cluster):
            home.update(dict.fromkeys(cluster, beyond.pop()))
        else:
            home.update({f: f for f in cluster})
    groups = defaultdict(list)
    for f, to in home.items():
        if to != OUTSIDE:
            groups[to].append(f)
    return [sorted(groups[to], key=lambda f: f != to) for to in sorted(groups)]


def _clusters(ways: Mapping[int, set[int]], small: set[int]) -> list[list[int]]:
    """Return the small faces in clusters of those that are open to each other."""
    seen: set[int] = set()
    clusters = []
    for first in sorted(small):
        if first in seen:
            continue
        cluster, waiting = [], [first]
        seen.add(first)
        while waiting:
            f = waiting.pop()
            cluster.append(f)
            fresh = (ways[f] & small) - seen
            seen |= fresh
            waiting += fresh
        clusters.append(cluster)
    return clusters


def _merged(faces: Sequence[Face], group: Sequence[int], lines: Segments, grid: float) -> Face:
    whole = union([Patch(faces[f].rings[0], tuple(faces[f].rings[1:])) for f in group])
    whole.sort(key=lambda patch: -_area(patch))
    rings = [np.asarray(ring) for ring in (whole[0].outline, *whole[0].holes)]
    codes = [edge_codes(ring, np.roll(ring, -1, axis=0), lines, grid) for ring in rings]
    beyond = [np.full(len(ring), OUTSIDE - 1) for ring in rings]
    return Face(rings, codes, beyond, _area(whole[0]))


def _area(patch: Patch) -> float:
    return abs(_ring_area(np.asarray(patch.outline))) - sum(
        abs(_ring_area(np.asarray(hole))) for hole in patch.holes
    )


def _ring_area(ring: np.ndarray) -> float:
    x, y = (ring - ring[0]).T
    return float(x[:-1] @ y[1:] - x[1:] @ y[:-1]) / 2


def _perimeter(ring: np.ndarray) -> float:
    return float(np.hypot(*np.diff(ring, axis=0, append=ring[:1]).T).sum())
