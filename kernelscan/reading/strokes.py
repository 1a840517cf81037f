"""What a drawing holds for us, as plain values: strokes, labels and measured dimensions, all in drawing units."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

import numpy as np

from kernelscan.plan import Problem

__all__ = ["Contents", "Label", "MeasuredDimension", "Stroke", "stroke_boxes"]


@dataclass(frozen=True, slots=True, eq=False)
class Stroke:
    """One drawn line or curve, flattened.

    Attributes
    ----------
    points
        ``(n, 2)``, n >= 2, finite; a closed stroke may or may not repeat its first point.
    closed
        Closed by its own flag or kind; a repeated first point is found by :attr:`is_ring`.
    kind
        The entity's type, such as ``LWPOLYLINE``.
    layer, handle
        Where it is in the drawing.
    blocks
        The names of the blocks it was drawn in, outermost first, joined by ``/``; empty outside blocks.
    """

    points: np.ndarray
    closed: bool
    kind: str
    layer: str
    handle: str
    blocks: str = ""

    def is_ring(self, snap: float) -> bool:
        """Whether the stroke encloses something: closed, or with its ends within ``snap``."""
        if len(self.points) < 3:
            return False
        if self.closed:
            return True
        gap = self.points[0] - self.points[-1]
        return len(self.points) > 3 and float(np.hypot(gap[0], gap[1])) <= snap


@dataclass(frozen=True, slots=True)
class Label:
    """A piece of text: its lines, where its middle is, where it begins, its height and its direction."""

    lines: tuple[str, ...]
    middle: tuple[float, float]
    start: tuple[float, float]
    height: float
    layer: str
    handle: str

    @property
    def text(self) -> str:
        """The lines as one."""
        return " ".join(self.lines)


@dataclass(frozen=True, slots=True)
class MeasuredDimension:
    """A dimension: what it measures in drawing units, and what its text says (empty where it says just that)."""

    measured: float
    text: str
    layer: str
    handle: str


@dataclass(slots=True)
class Contents:
    """Everything taken from one drawing; filled while its entities are walked through."""

    strokes: list[Stroke] = field(default_factory=list)
    labels: list[Label] = field(default_factory=list)
    dimensions: list[MeasuredDimension] = field(default_factory=list)
    problems: list[Problem] = field(default_factory=list)

    def layers(self) -> Iterator[str]:
        """Return every layer that something was found on, each once, in the order met."""
        return iter(dict.fromkeys([s.layer for s in self.strokes] + [t.layer for t in self.labels]))


def stroke_boxes(strokes: Sequence[Stroke]) -> tuple[np.ndarray, np.ndarray]:
    """Return the low and the high corner of each stroke's box, ``(n, 2)`` each, in drawing units."""
    if not strokes:
        return np.empty((0, 2)), np.empty((0, 2))
    counts = np.array([len(stroke.points) for stroke in strokes])
    points = np.concatenate([stroke.points for stroke in strokes])
    starts = np.cumsum(counts) - counts
    return np.minimum.reduceat(points, starts), np.maximum.reduceat(points, starts)
