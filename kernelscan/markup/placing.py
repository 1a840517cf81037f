"""Where labels go: greedy placement among candidates, so that no two boxes overlap.

Everything that must stay legible is entered as a box or as a line; a label takes the first candidate that touches
none of them and lies in the window. The boxes are kept in a grid of cells, so that a candidate is compared with its
neighbours only. Greedy is not the best arrangement there is (finding that is NP-hard even for one size of label:
Formann and Wagner 1991), but it keeps its promise: what it places is clear, and what it cannot place it says.
"""

from collections import defaultdict
from collections.abc import Iterator

import numpy as np

from kernelscan.markup.scene import Box, Point
from kernelscan.markup.view import clipped_segment

__all__ = ["Occupied", "boxes_inside", "inner_points"]

CELL = 15.0
"""Side of a cell of the grid, in millimetres."""


class Occupied:
    """The boxes and lines on a part of the paper that labels must keep off."""

    def __init__(self, window: Box) -> None:
        self.window = window
        self._boxes: dict[tuple[int, int], list[Box]] = defaultdict(list)
        self._lines: dict[tuple[int, int], list[tuple[Point, Point]]] = defaultdict(list)

    def add(self, box: Box) -> None:
        """Enter a box."""
        for cell in _cells(box):
            self._boxes[cell].append(box)

    def add_line(self, start: Point, end: Point) -> None:
        """Enter a line."""
        for cell in _cells_along(start, end):
            self._lines[cell].append((start, end))

    def shows(self, point: Point) -> bool:
        """Whether a point lies in the window."""
        return _holds(self.window, point)

    def takes(self, box: Box) -> bool:
        """Whether a box lies in the window and touches nothing that was entered."""
        window = self.window
        if not (
            window.left <= box.left
            and box.right <= window.right
            and window.bottom <= box.bottom
            and box.top <= window.top
        ):
            return False
        for cell in _cells(box):
            if any(box.overlaps(other) for other in self._boxes[cell]):
                return False
            if any(clipped_segment(start, end, box) for start, end in self._lines[cell]):
                return False
        return True

    def takes_line(self, start: Point, end: Point) -> bool:
        """Whether a line crosses no box that was entered, but for those in which it starts."""
        return not any(
            clipped_segment(start, end, box) and not _holds(box, start)
            for cell in _cells_along(start, end)
            for box in self._boxes[cell]
        )


def _holds(box: Box, point: Point) -> bool:
    return box.left <= point[0] <= box.right and box.bottom <= point[1] <= box.top


def _cells_along(start: Point, end: Point) -> Iterator[tuple[int, int]]:
    """Yield the cells that a line comes through or near to."""
    around = Box(min(start[0], end[0]), min(start[1], end[1]), max(start[0], end[0]), max(start[1], end[1]))
    for column, row in _cells(around):
        cell = Box(column * CELL, row * CELL, (column + 1) * CELL, (row + 1) * CELL).grown(0.1)
        if start == end or clipped_segment(start, end, cell):
            yield column, row


def _cells(box: Box) -> Iterator[tuple[int, int]]:
    for column in range(int(box.left // CELL), int(box.right // CELL) + 1):
        for row in range(int(box.bottom // CELL), int(box.top // CELL) + 1):
            yield column, row


def inner_points(rings: tuple[np.ndarray, ...], count: int = 16) -> tuple[np.ndarray, np.ndarray]:
    """Return points inside an area, ``(m, 2)``, the one farthest from its border first, and these distances, ``(m,)``.

    A lattice of ``count`` by ``count`` points over the area's box, kept where the even-odd rule says inside. For an
    area so thin that the lattice misses it, the middle of its widest chord at mid-height.
    """
    points = np.concatenate(rings)
    low, high = points.min(axis=0), points.max(axis=0)
    steps = (np.arange(count) + 0.5) / count
    x, y = np.meshgrid(low[0] + steps * (high[0] - low[0]), low[1] + steps * (high[1] - low[1]))
    lattice = np.column_stack([x.ravel(), y.ravel()])
    starts, ends = _edges(rings)
    inside = lattice[_even_odd(lattice, starts, ends)]
    if not len(inside):
        inside = _widest_chord_middle(rings, starts, ends)[None]
    clearance = _clearance(inside, starts, ends)
    order = np.argsort(-clearance, kind="stable")
    return inside[order], clearance[order]


def boxes_inside(rings: tuple[np.ndarray, ...], boxes: np.ndarray) -> np.ndarray:
    """Return which boxes, ``(m, 4)`` as left, bottom, right, top, lie wholly inside an area: ``(m,)`` of bool.

    A box is inside when its middle is, and no edge of the area meets it: an edge misses a box when one of the two
    axes or the edge's own normal separates them.
    """
    starts, ends = _edges(rings)
    middles = (boxes[:, :2] + boxes[:, 2:]) / 2
    halves = (boxes[:, 2:] - boxes[:, :2]) / 2
    low, high = np.minimum(starts, ends), np.maximum(starts, ends)
    beside = ((low[None] >= boxes[:, None, 2:]) | (high[None] <= boxes[:, None, :2])).any(axis=2)
    normals = np.column_stack([starts[:, 1] - ends[:, 1], ends[:, 0] - starts[:, 0]])
    reach = halves @ np.abs(normals).T
    apart = np.abs(((middles[:, None] - starts[None]) * normals[None]).sum(axis=2)) >= reach
    clear: np.ndarray = np.logical_and((beside | apart).all(axis=1), _even_odd(middles, starts, ends))
    return clear


def _edges(rings: tuple[np.ndarray, ...]) -> tuple[np.ndarray, np.ndarray]:
    return np.concatenate(rings), np.concatenate([np.roll(ring, -1, axis=0) for ring in rings])


def _even_odd(points: np.ndarray, starts: np.ndarray, ends: np.ndarray) -> np.ndarray:
    x, y = points[:, 0, None], points[:, 1, None]
    spans = (starts[:, 1] <= y) != (ends[:, 1] <= y)
    with np.errstate(divide="ignore", invalid="ignore"):
        at = starts[:, 0] + (y - starts[:, 1]) / (ends[:, 1] - starts[:, 1]) * (ends[:, 0] - starts[:, 0])
    odd: np.ndarray = (spans & (x < at)).sum(axis=1) % 2 == 1
    return odd


def _clearance(points: np.ndarray, starts: np.ndarray, ends: np.ndarray) -> np.ndarray:
    """Return each point's distance to the nearest edge."""
    along = ends - starts
    squares = np.maximum((along**2).sum(axis=1), np.finfo(float).tiny)
    offset = points[:, None] - starts[None]
    t = np.clip((offset * along[None]).sum(axis=2) / squares, 0, 1)
    nearest: np.ndarray = np.sqrt(((offset - t[..., None] * along[None]) ** 2).sum(axis=2)).min(axis=1)
    return nearest


def _widest_chord_middle(rings: tuple[np.ndarray, ...], starts: np.ndarray, ends: np.ndarray) -> np.ndarray:
    levels = np.unique(np.concatenate(rings)[:, 1])
    y = (levels[len(levels) // 2] + levels[len(levels) // 2 - 1]) / 2
    crossing = (starts[:, 1] <= y) != (ends[:, 1] <= y)
    p, q = starts[crossing], ends[crossing]
    x = np.sort(p[:, 0] + (y - p[:, 1]) / (q[:, 1] - p[:, 1]) * (q[:, 0] - p[:, 0]))
    widths = x[1::2] - x[::2]
    left = x[2 * int(np.argmax(widths))]
    return np.array([left + widths.max() / 2, y])
