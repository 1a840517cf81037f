"""Loose linework as arrays: straight pieces in metres, each with what it is part of and where it came from.

Door leaves that stand open and the arcs they swing on are no walls: arcs of a door's size on opening layers, or with
a leaf drawn from their hinge, are kept apart as swings, from which the width of the closed door is known.
"""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from kernelscan.geometry.shapes import lines_near
from kernelscan.reading.strokes import Stroke
from kernelscan.reading.texts import words
from kernelscan.tolerances import Tolerances

__all__ = [
    "DOOR",
    "GAP",
    "WALL",
    "WINDOW",
    "Segments",
    "Swing",
    "are_leaves",
    "opening_code",
    "plug_strokes",
    "segments_of",
    "swings_of",
]

WALL, DOOR, WINDOW, GAP = 0, 1, 2, 3
"""What a piece is part of, as a number, for arrays; a gap is a piece that nobody drew."""

SMALLEST_LEAF, LARGEST_LEAF = 0.4, 1.6
LEAF_THICKNESS = 0.07
WINDOW_TEXT = """
    window windows glaz glazing glass fenster fenetre fenetres finestra finestre ventana ventanas janela janelas raam
    ramen okno okna fonster vindu ikkuna pencere
"""
WINDOW_WORDS = frozenset(WINDOW_TEXT.split())


@dataclass(frozen=True, slots=True, eq=False)
class Segments:
    """Straight pieces: ``a`` and ``b`` are ``(n, 2)`` ends in metres, ``code`` and ``stroke`` are ``(n,)``."""

    a: np.ndarray
    b: np.ndarray
    code: np.ndarray
    stroke: np.ndarray

    def __len__(self) -> int:
        return len(self.a)

    @property
    def length(self) -> np.ndarray:
        """Their lengths."""
        return np.asarray(np.hypot(*(self.b - self.a).T))

    def where(self, chosen: np.ndarray) -> "Segments":
        """Return only the chosen ones."""
        return Segments(self.a[chosen], self.b[chosen], self.code[chosen], self.stroke[chosen])

    def plus(self, a: np.ndarray, b: np.ndarray, code: np.ndarray) -> "Segments":
        """Return these and more, which no stroke drew."""
        none = np.full(len(a), -1)
        return Segments(
            np.concatenate((self.a, a)),
            np.concatenate((self.b, b)),
            np.concatenate((self.code, code)),
            np.concatenate((self.stroke, none)),
        )


@dataclass(frozen=True, slots=True)
class Swing:
    """The arc that a door leaf swings on, in metres: its hinge, its two ends, its radius."""

    hinge: tuple[float, float]
    ends: tuple[tuple[float, float], tuple[float, float]]
    radius: float


def opening_code(layer: str, blocks: str) -> int:
    """Return whether the words of an opening's layer or block say window; door otherwise."""
    return WINDOW if WINDOW_WORDS & {*words(layer), *words(blocks)} else DOOR


def segments_of(
    strokes: Sequence[Stroke], codes: Sequence[int], metres: float, origin: np.ndarray
) -> Segments:
    """Return the straight pieces of strokes, as coordinates from an origin in metres."""
    starts, ends, code, index = [], [], [], []
    for stroke, its in zip(strokes, codes, strict=True):
        points = stroke.points
        if stroke.closed:
            points = np.concatenate((points, points[:1]))
        starts.append(points[:-1])
        ends.append(points[1:])
        code.append(its)
        index.append(len(points) - 1)
    if not starts:
        return Segments(np.empty((0, 2)), np.empty((0, 2)), np.empty(0, dtype=int), np.empty(0, dtype=int))
    a, b = (np.concatenate(part) * metres - origin for part in (starts, ends))
    whole = Segments(a, b, np.repeat(code, index), np.repeat(np.arange(len(strokes)), index))
    return whole.where(whole.length > 1e-6)


def swings_of(strokes: Iterable[Stroke], metres: float, origin: np.ndarray) -> list[tuple[int, Swing]]:
    """Return which of the strokes are arcs of a door's size, and their swings."""
    found = []
    for k, stroke in enumerate(strokes):
        if stroke.kind != "ARC" or len(stroke.points) < 3:
            continue
        a, b = (stroke.points[i] * metres - origin for i in (0, -1))
        middle = stroke.points[len(stroke.points) // 2] * metres - origin
        circle = _circle_through(a, middle, b)
        if circle is None:
            continue
        hinge, radius = circle
        chord = float(np.hypot(*(b - a)))
        if SMALLEST_LEAF <= radius <= LARGEST_LEAF and 0.7 * radius <= chord <= 1.75 * radius:
            ends = (float(a[0]), float(a[1])), (float(b[0]), float(b[1]))
            found.append((k, Swing((float(hinge[0]), float(hinge[1])), ends, radius)))
    return found


def _circle_through(a: np.ndarray, b: np.ndarray, c: np.ndarray) -> tuple[np.ndarray, float] | None:
    """Return the centre and radius of the circle through three points; ``None`` if they lie on a line."""
    u, v = b - a, c - a
    cross = 2 * float(u[0] * v[1] - u[1] * v[0])
    if abs(cross) < 1e-12:
        return None
    x = (v[1] * (u @ u) - u[1] * (v @ v)) / cross
    y = (u[0] * (v @ v) - v[0] * (u @ u)) / cross
    return a + np.array((x, y)), float(np.hypot(x, y))


def are_leaves(lines: Segments, swings: Sequence[Swing]) -> np.ndarray:
    """Return which lines are door leaves: both ends at a swing's hinge or at its ends, but for a leaf's thickness."""
    leaf = np.zeros(len(lines), dtype=bool)
    if not swings or not len(lines):
        return leaf
    spots = np.array([(swing.hinge, *swing.ends) for swing in swings])
    owner = np.repeat(np.arange(len(swings)), 3)
    flat = spots.reshape(-1, 2)
    ends = []
    for points in (lines.a, lines.b):
        k, i = lines_near(points, flat, flat, LEAF_THICKNESS)
        ends.append(set(zip(k.tolist(), owner[i].tolist(), strict=True)))
    both = [k for k, _ in ends[0] & ends[1]]
    leaf[both] = True
    return leaf


def plug_strokes(strokes: Sequence[Stroke], metres: float, tolerances: Tolerances) -> set[int]:
    """Return which strokes are doors or windows by content: narrow rectangles with a line's end at either short side.

    Rectangles that follow each other are the bodies of walls instead: no line ends at them.
    """
    boxes, sides = [], []
    for k, stroke in enumerate(strokes):
        corners = _rectangle(stroke, metres)
        if (
            corners is not None
            and corners[2] <= tolerances.thickest_wall
            and corners[3] <= tolerances.widest_opening / 2
        ):
            boxes.append(k)
            sides.append(corners[:2])
    ends = [stroke.points[[0, -1]] * metres for stroke in strokes if not stroke.is_ring(0.0)]
    if not boxes or not ends:
        return set()
    short = np.array(sides).reshape(-1, 2, 2)
    _, i = lines_near(np.concatenate(ends), short[:, 0], short[:, 1], tolerances.snap)
    met = np.zeros(len(short), dtype=bool)
    met[i] = True
    both = np.asarray(met.reshape(-1, 2).all(axis=1))
    return {k for k, plugs in zip(boxes, both, strict=True) if plugs}


def _rectangle(stroke: Stroke, metres: float) -> tuple[np.ndarray, np.ndarray, float, float] | None:
    """Return a rectangle's two short sides, ``(2, 2)``, and its two lengths; ``None`` for any other stroke."""
    points = stroke.points * metres
    if len(points) == 5 and not np.any(points[0] != points[-1]):
        points = points[:4]
    if len(points) != 4 or not stroke.is_ring(0.0):
        return None
    steps = np.roll(points, -1, axis=0) - points
    long = np.hypot(*steps.T)
    if (
        np.abs((steps * np.roll(steps, -1, axis=0)).sum(axis=1)).max() > 0.01 * long.max() ** 2
        or long.min() < 1e-3
    ):
        return None
    first = 0 if long[0] <= long[1] else 1
    sides = [np.array((points[k], points[(k + 1) % 4])) for k in (first, first + 2)]
    return sides[0], sides[1], float(long[first]), float(long[1 - first])
