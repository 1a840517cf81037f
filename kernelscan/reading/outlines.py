"""Closed strokes into outlines in metres; what almost is one, and is not, becomes a problem with its place."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from kernelscan.geometry.rings import Ring
from kernelscan.geometry.shapes import are_simple, crossing_place
from kernelscan.plan import Problem, Source
from kernelscan.reading.strokes import Stroke

__all__ = ["Outline", "closed_outlines", "open_outline_problems", "ring_areas"]


SMALLEST, LARGEST = 1e-9, 1e10
"""Square metres: an outline of less encloses nothing that could be told from a line, one of more is no building."""


@dataclass(frozen=True, slots=True, eq=False)
class Outline:
    """A simple closed outline: its ring (counter-clockwise, metres), its area, and the stroke it came from."""

    ring: Ring
    area: float
    stroke: Stroke

    @property
    def source(self) -> Source:
        """Layer and handle."""
        return Source(self.stroke.layer, self.stroke.handle)

    @property
    def centre(self) -> tuple[float, float]:
        """The middle of its box, for saying where it is."""
        x, y = (self.ring.min(axis=0) + self.ring.max(axis=0)) / 2
        return float(x), float(y)

    @property
    def width(self) -> float:
        """Twice the area by the perimeter: the width of a long strip, half that of a square."""
        steps = np.diff(self.ring, axis=0, append=self.ring[:1])
        return 2 * self.area / float(np.hypot(steps[:, 0], steps[:, 1]).sum())


def closed_outlines(
    strokes: Iterable[Stroke], metres: float, snap: float
) -> tuple[list[Outline], list[Problem]]:
    """Return the simple outlines among the strokes, in their order, and the faults of the others.

    Parameters
    ----------
    strokes
        In drawing units.
    metres
        How many metres a drawing unit is.
    snap
        Ends nearer than this, in metres, are one point.
    """
    rings = [stroke for stroke in strokes if stroke.is_ring(snap / metres)]
    points = _distinct_points(
        [stroke.points * metres for stroke in rings], [0.0 if stroke.closed else snap for stroke in rings]
    )
    areas = ring_areas(points)
    sound = (np.abs(areas) > SMALLEST) & (np.abs(areas) < LARGEST)
    thick = [k for k in range(len(rings)) if len(points[k]) > 2 and sound[k]]
    simple = dict(zip(thick, are_simple([points[k] for k in thick]), strict=True))
    outlines, problems = [], []
    for k, stroke in enumerate(rings):
        if simple.get(k):
            outlines.append(Outline(_read_only(points[k], areas[k]), abs(float(areas[k])), stroke))
        else:
            problems.append(_fault(stroke, points[k]))
    return outlines, problems


def open_outline_problems(strokes: Iterable[Stroke], metres: float, snap: float) -> list[Problem]:
    """Return a problem for each polyline or spline that almost encloses something: the size and place of its gap."""
    problems = []
    for stroke in strokes:
        if (
            len(stroke.points) < 4
            or stroke.is_ring(snap / metres)
            or stroke.kind not in {"LWPOLYLINE", "POLYLINE", "SPLINE"}
        ):
            continue
        ends = stroke.points[[0, -1]] * metres
        gap = float(np.hypot(*(ends[1] - ends[0])))
        middle = ends.mean(axis=0)
        problems.append(
            Problem(
                "open-outline",
                f"outline is open by {gap * 1000:.0f} mm; close it",
                (float(middle[0]), float(middle[1])),
                Source(stroke.layer, stroke.handle),
            )
        )
    return problems


def ring_areas(rings: Sequence[np.ndarray]) -> np.ndarray:
    """Return the signed area within each ring; each takes its own first point as the origin."""
    if not rings:
        return np.empty(0)
    counts = np.array([len(ring) for ring in rings])
    starts = np.cumsum(counts) - counts
    points = np.concatenate(rings)
    local = points - np.repeat(points[starts], counts, axis=0)
    following = np.roll(local, -1, axis=0)
    following[starts + counts - 1] = 0.0
    cross = local[:, 0] * following[:, 1] - local[:, 1] * following[:, 0]
    return np.asarray(np.add.reduceat(cross, starts) / 2)


def _distinct_points(rings: Sequence[np.ndarray], snaps: Sequence[float]) -> list[np.ndarray]:
    """Drop each point that repeats the one before it, and last ones that come back to the first, to within a snap."""
    if not rings:
        return []
    counts = np.array([len(ring) for ring in rings])
    starts = np.cumsum(counts) - counts
    points = np.concatenate(rings) + 0.0
    keep = np.ones(len(points), dtype=bool)
    keep[1:] = (points[1:] != points[:-1]).any(axis=1)
    keep[starts] = True
    ends = starts + counts - 1
    back = np.hypot(*(points[ends] - points[starts]).T) <= np.array(snaps)
    keep[ends[back & (counts > 3)]] = False
    spans = zip(starts.tolist(), counts.tolist(), strict=True)
    if keep.all():
        return [points[s : s + n] for s, n in spans]
    return [points[s : s + n][keep[s : s + n]] for s, n in spans]


def _read_only(points: np.ndarray, area: float) -> Ring:
    ring = points if area > 0 else np.concatenate((points[:1], points[:0:-1]))
    ring.flags.writeable = False
    return ring


def _fault(stroke: Stroke, points: np.ndarray) -> Problem:
    source = Source(stroke.layer, stroke.handle)
    if len(points) > 2 and not abs(float(ring_areas([points])[0])) < LARGEST:
        text = f"{stroke.kind} is larger than any building; check the unit, or delete it"
        return Problem("absurd-outline", text, None, source)
    place = crossing_place(points) if len(points) > 2 else None
    if place is None:
        at = (float(points[0, 0]), float(points[0, 1])) if len(points) else None
        return Problem("degenerate-outline", f"{stroke.kind} encloses no area; it is no room", at, source)
    text = f"{stroke.kind} crosses or touches itself at ({place[0]:.3f}, {place[1]:.3f}); mend it"
    return Problem("crossing-outline", text, place, source)
