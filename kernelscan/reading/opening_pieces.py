"""What doors and windows are drawn with: straight pieces, and for each swing arc the door as it stands when closed.

Runs
    Pieces of one stroke that go on smoothly, such as a flattened arc, are one run; a run's length tells the long
    sides of a drawn opening from its ends.
Swings
    A run on a circle of a door's size is what a leaf swings through. Its centre is the hinge, and the closed door
    reaches from the hinge to one end of the arc; to which, the leaf says, which is drawn to the other. Where no leaf
    is drawn, or one to either end, both are kept, and the walls decide.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, fields, replace
from math import radians

import numpy as np

from kernelscan.geometry.shapes import lines_near
from kernelscan.reading.layers import LayerRole
from kernelscan.reading.segments import (
    DOOR,
    LARGEST_LEAF,
    SMALLEST_LEAF,
    Segments,
    opening_code,
    segments_of,
)
from kernelscan.reading.strokes import Stroke

__all__ = ["NO_SWING", "Pieces", "opening_pieces", "opening_strokes"]

NO_SWING = -1
PARALLEL = radians(2)
"""A drawn line runs along a wall if it turns from it by no more than this."""

SWUNG = radians(5)
"""As much for a closed door known from its arc: hinges and leaves are drawn some centimetres beside the jambs."""

LEAST_SWEEP, MOST_SWEEP = radians(25), radians(200)
ROUND = 0.02
"""A run is an arc if its points stray from the circle by no more than this part of the radius."""

LEAF_OFF = 0.12
"""A leaf's ends lie as near to the hinge and the arc's end as this part of the radius: leaves have a thickness."""


@dataclass(frozen=True, slots=True, eq=False)
class Pieces:
    """Straight pieces of drawn openings.

    Attributes
    ----------
    a, b
        ``(n, 2)`` ends in metres from the origin.
    code, stroke
        ``(n,)``: DOOR or WINDOW, and which stroke drew it.
    run
        ``(n,)``: the length of the run that it is part of, in metres.
    swing
        ``(n,)``: the swing that it belongs to, as a piece of its arc or as the closed door; else ``NO_SWING``.
    closed
        ``(n,)``: whether it is not drawn, but a closed door known from its arc.
    """

    a: np.ndarray
    b: np.ndarray
    code: np.ndarray
    stroke: np.ndarray
    run: np.ndarray
    swing: np.ndarray
    closed: np.ndarray

    def __len__(self) -> int:
        return len(self.a)

    @property
    def length(self) -> np.ndarray:
        """Their lengths."""
        return np.asarray(np.hypot(*(self.b - self.a).T))

    @property
    def slack(self) -> np.ndarray:
        """By how much each may turn from a straight wall that it runs along, in radians."""
        return np.where(self.closed, SWUNG, PARALLEL)

    def where(self, chosen: np.ndarray) -> "Pieces":
        """Return only the chosen ones."""
        return Pieces(*(getattr(self, field.name)[chosen] for field in fields(self)))

    def plus(self, others: "Pieces") -> "Pieces":
        """Return these and others."""
        return Pieces(
            *(np.concatenate((getattr(self, f.name), getattr(others, f.name))) for f in fields(self))
        )

    def shut(self, a: np.ndarray, b: np.ndarray) -> "Pieces":
        """Return them as closed doors between other ends, ``(n, 2)``."""
        return replace(self, a=a, b=b, run=np.hypot(*(b - a).T), closed=np.ones(len(self), dtype=bool))


@dataclass(frozen=True, slots=True, eq=False)
class _Swings:
    """Swing arcs: hinge ``(m, 2)``, both ends ``(m, 2, 2)``, radius and stroke ``(m,)``."""

    hinge: np.ndarray
    ends: np.ndarray
    radius: np.ndarray
    stroke: np.ndarray


def opening_strokes(strokes: Sequence[Stroke], roles: Mapping[str, LayerRole]) -> list[Stroke]:
    """Return the strokes that draw doors and windows: by their layer, or by their block where the layer says nothing.

    What is drawn in a piece of furniture, such as a cupboard's door, is none.
    """
    found = []
    for stroke in strokes:
        part = roles[stroke.layer].role
        if part not in {"opening", "unknown"}:
            continue
        block = roles[stroke.blocks].role if stroke.blocks else "unknown"
        if block == "opening" or (part == "opening" and block != "furniture"):
            found.append(stroke)
    return found


def opening_pieces(strokes: Sequence[Stroke], metres: float, origin: np.ndarray, smooth: float) -> Pieces:
    """Return the pieces of openings' strokes, leaves left out, and the closed doors of their swings.

    Parameters
    ----------
    strokes
        In drawing units.
    metres
        How many metres a drawing unit is.
    origin
        ``(2,)`` metres, from which the pieces are reckoned.
    smooth
        Pieces that meet at less than this turn go on as one run, in radians.
    """
    names = [(stroke.layer, stroke.blocks) for stroke in strokes]
    code_of = {name: opening_code(*name) for name in set(names)}
    lines = segments_of(strokes, [code_of[name] for name in names], metres, origin)
    if not len(lines):
        none = np.empty(0, dtype=int)
        return Pieces(lines.a, lines.b, none, none, np.empty(0), none, np.empty(0, dtype=bool))
    turn, joined = _joints(lines, smooth)
    starts = np.flatnonzero(~joined)
    counts = np.diff(starts, append=len(lines))
    swings, swinging = _swings(lines, turn, starts, counts)
    of_run = np.full(len(starts), NO_SWING)
    of_run[swinging] = np.arange(len(swinging))
    swing = np.repeat(of_run, counts)
    run = np.repeat(np.add.reduceat(lines.length, starts), counts)
    leaf, shut = _leaves(lines, swings, swing)
    drawn = ~leaf
    k, end = np.nonzero(shut)
    doors = np.full(len(k), DOOR)
    return Pieces(
        np.concatenate((lines.a[drawn], swings.hinge[k])),
        np.concatenate((lines.b[drawn], swings.ends[k, end])),
        np.concatenate((lines.code[drawn], doors)),
        np.concatenate((lines.stroke[drawn], swings.stroke[k])),
        np.concatenate((run[drawn], swings.radius[k])),
        np.concatenate((swing[drawn], k)),
        np.repeat((False, True), (int(drawn.sum()), len(k))),
    )


def _joints(lines: Segments, smooth: float) -> tuple[np.ndarray, np.ndarray]:
    """Return for each piece the turn from the one before, and whether it goes on smoothly from that: ``(n,)`` both."""
    way = lines.b - lines.a
    cross = way[:-1, 0] * way[1:, 1] - way[:-1, 1] * way[1:, 0]
    turn = np.concatenate(([0.0], np.arctan2(cross, (way[:-1] * way[1:]).sum(axis=1))))
    joined = np.zeros(len(lines), dtype=bool)
    joined[1:] = (lines.stroke[1:] == lines.stroke[:-1]) & (
        np.hypot(*(lines.a[1:] - lines.b[:-1]).T) <= 1e-5  # pieces of no length were left out between
    )
    joined &= np.abs(turn) < smooth
    return np.where(joined, turn, 0.0), joined


def _swings(
    lines: Segments, turn: np.ndarray, starts: np.ndarray, counts: np.ndarray
) -> tuple[_Swings, np.ndarray]:
    """Return the swings and which runs they are."""
    sweep = np.abs(np.add.reduceat(turn, starts)) * counts / np.maximum(counts - 1, 1)
    may = np.flatnonzero((counts >= 3) & (sweep >= LEAST_SWEEP) & (sweep <= MOST_SWEEP))
    first, last = starts[may], starts[may] + counts[may] - 1
    centre = _centres(lines.a[first], lines.a[first + counts[may] // 2], lines.b[last])
    radius = np.hypot(*(lines.a[first] - centre).T)
    stray = np.zeros(len(may))
    for part in (1, 2, 3):
        points = lines.a[first + counts[may] * part // 4]
        stray = np.maximum(stray, np.abs(np.hypot(*(points - centre).T) - radius))
    good = (radius >= SMALLEST_LEAF) & (radius <= LARGEST_LEAF) & (stray <= ROUND * radius)
    ends = np.stack((lines.a[first], lines.b[last]), axis=1)
    return _Swings(centre[good], ends[good], radius[good], lines.stroke[first[good]]), may[good]


def _centres(a: np.ndarray, b: np.ndarray, c: np.ndarray) -> np.ndarray:
    """Return the centres of the circles through three points each, ``(n, 2)``; far off where they lie on a line."""
    u, v = b - a, c - a
    cross = 2 * (u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0])
    cross = np.where(np.abs(cross) < 1e-12, 1e-12, cross)
    uu, vv = (u * u).sum(axis=1), (v * v).sum(axis=1)
    x, y = v[:, 1] * uu - u[:, 1] * vv, u[:, 0] * vv - v[:, 0] * uu
    return np.asarray(a + np.column_stack((x, y)) / cross[:, None])


def _leaves(lines: Segments, swings: _Swings, swing: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return which pieces are leaves that stand open, and to which ends of its arc each closed door may reach."""
    leaf, shut = np.zeros(len(lines), dtype=bool), np.ones((len(swings.hinge), 2), dtype=bool)
    straight = np.flatnonzero(swing == NO_SWING)
    if not (len(straight) and len(swings.hinge)):
        return leaf, shut
    a, b = lines.a[straight], lines.b[straight]
    k, i = lines_near(swings.hinge, a, b, LEAF_OFF * LARGEST_LEAF)
    reach, hinge = LEAF_OFF * swings.radius[k], swings.hinge[k]
    open_to = np.zeros_like(shut)
    hits = []
    for end in (0, 1):
        tip = swings.ends[k, end]
        hit = (_apart(a[i], hinge) <= reach) & (_apart(b[i], tip) <= reach)
        hit |= (_apart(b[i], hinge) <= reach) & (_apart(a[i], tip) <= reach)
        open_to[k[hit], end] = True
        hits.append(hit)
    certain = open_to[:, 0] != open_to[:, 1]
    shut[certain] = ~open_to[certain]
    leaf[straight[i[(hits[0] | hits[1]) & certain[k]]]] = True
    return leaf, shut


def _apart(points: np.ndarray, others: np.ndarray) -> np.ndarray:
    return np.asarray(np.hypot(*(points - others).T))
